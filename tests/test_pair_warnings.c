/* Warnings of pairs without data and of light gases by the acentric factor. */
#include "filling/pair_warnings.h"

#include "support/measured_mixture.h"
#include "support/result_reading.h"
#include "support/small_mixture.h"

static const double SHARES[] = {0.1, 0.6, 0.2, 0.1};

static int set_up(void **state)
{
    static struct small_mixture mixture;
    memset(&mixture, 0, sizeof mixture);
    small_mixture_set_up(&mixture, SHEET_FUGACITY, SHARES);
    *state = &mixture;
    return 0;
}

static int tear_down(void **state)
{
    small_mixture_tear_down(*state);
    return 0;
}

/* The warnings of one method by itself. */
static const struct result *warned(struct small_mixture *mixture, const char *method)
{
    struct small_case *small = &mixture->small;
    const char *const none[] = {NULL};
    small_case_start(small, none);
    struct method_run run = method_run_create(small->sheet.fluid, method, true, small->arena);
    warn_pairs(&small->run, &run);
    return small->run.result;
}

static const char *text_of(const struct result *result, enum code code)
{
    for (size_t i = 0; i < result->warnings.count; i++) {
        if (result->warnings.items[i].code == code) {
            return result->warnings.items[i].text;
        }
    }
    return "";
}

static void pairs_without_data_are_named_in_one_warning(void **state)
{
    const struct result *result = warned(*state, "peng-robinson");
    assert_int_equal(result_warnings(result, CODE_W306), 1);
    assert_string_equal(text_of(result, CODE_W306),
                        "blend, peng-robinson: no interaction is known, and none is taken, of n-butane with hydrogen, "
                        "argon; nitrogen with hydrogen, argon; hydrogen with argon");
    assert_int_equal(result->warnings.items[0].sheet, 1);
}

/* By peng-robinson-1978 the groups give n-butane with nitrogen, the deck nitrogen with hydrogen. */
static void pairs_by_groups_or_from_the_deck_are_known(void **state)
{
    const struct result *result = warned(*state, "peng-robinson-1978");
    assert_string_equal(text_of(result, CODE_W306),
                        "blend, peng-robinson-1978: no interaction is known, and none is taken, of n-butane with "
                        "hydrogen, argon; nitrogen with argon; hydrogen with argon");
}

static void a_missing_pair_of_groups_leaves_the_pair_unknown(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->fluid.spec.group_pair_count = 2;
    const char *text = text_of(warned(mixture, "peng-robinson-1978"), CODE_W306);
    assert_non_null(strstr(text, "n-butane with nitrogen, hydrogen, argon"));
}

static void a_component_without_a_share_is_not_named(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->fractions[HYDROGEN] = 0.0;
    const struct result *result = warned(mixture, "peng-robinson-1978");
    assert_null(strstr(text_of(result, CODE_W306), "hydrogen"));
    assert_int_equal(result_warnings(result, CODE_W307), 0);
}

static void a_known_interaction_of_zero_is_no_want_of_data(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->fractions[HYDROGEN] = mixture->fractions[ARGON] = 0.0;
    mixture->constants[0].kij = 0.0;
    assert_int_equal(result_warnings(warned(mixture, "peng-robinson"), CODE_W306), 0);
}

static void a_method_without_interactions_warns_of_none(void **state)
{
    assert_int_equal(warned(*state, "ideal-gas")->warnings.count, 0);
}

/* Aasen et al., Fluid Phase Equilib. 524 (2020) 112790: quantum effects of hydrogen. */
static void light_gases_by_the_acentric_factor_are_named(void **state)
{
    static const struct {
        const char *method;
        size_t warnings;
    } cases[] = {{"soave-redlich-kwong", 1}, {"peng-robinson", 1}, {"peng-robinson-1978", 1}, {"lee-kesler", 1},
                 {"redlich-kwong", 0},       {"van-der-waals", 0}, {"ideal-gas", 0}};
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        const struct result *result = warned(*state, cases[k].method);
        assert_int_equal(result_warnings(result, CODE_W307), cases[k].warnings);
        if (cases[k].warnings > 0) {
            assert_non_null(strstr(text_of(result, CODE_W307), "as light as hydrogen"));
            assert_null(strstr(text_of(result, CODE_W307), "nitrogen"));
        }
    }
}

static void corresponding_states_are_told_from_an_attraction(void **state)
{
    assert_string_equal(text_of(warned(*state, "lee-kesler"), CODE_W307),
                        "blend, lee-kesler: all properties follow the acentric factor, which says little of a gas as "
                        "light as hydrogen");
}

/* Nothing is published of xenon with nitrogen or neon; nitrogen with argon is, and neon with argon. */
static void estimated_pairs_of_reference_equations_are_named_in_one_warning(void **state)
{
    static const char *const names[] = {"nitrogen", "xenon", "argon", "neon"};
    struct small_mixture *mixture = *state;
    struct arena *arena = mixture->small.arena;
    mixture->small.sheet.fluid = measured_case_fluid("multi-fluid", names, 4, arena);
    const struct result *result = warned(mixture, "multi-fluid");
    assert_int_equal(result_warnings(result, CODE_W370), 1);
    assert_int_equal(result_warnings(result, CODE_W306), 0);
    assert_int_equal(result_warnings(result, CODE_W307), 0);
    assert_string_equal(text_of(result, CODE_W370),
                        "measured, multi-fluid: no reducing parameters are published, and beta = gamma = 1 without a "
                        "departure function is an estimate of unknown accuracy, of nitrogen with xenon, neon; xenon "
                        "with argon, neon");
}

static void published_pairs_of_reference_equations_need_no_warning(void **state)
{
    static const char *const names[] = {"nitrogen", "oxygen", "argon"};
    struct small_mixture *mixture = *state;
    mixture->small.sheet.fluid = measured_case_fluid("multi-fluid", names, 3, mixture->small.arena);
    assert_int_equal(warned(mixture, "multi-fluid")->warnings.count, 0);
    assert_int_equal(warned(mixture, "gerg-2008")->warnings.count, 0);
}

static void a_light_gas_by_itself_is_named_too(void **state)
{
    struct small_mixture *mixture = *state;
    const double one = 1.0;
    const struct case_fluid hydrogen = {
        .name = "hydrogen",
        .count = 1,
        .components = &mixture->component_list[HYDROGEN],
        .fractions = &one,
        .molar_mass = SMALL_MIXTURE_GASES[HYDROGEN].molar_mass,
        .spec = {.count = 1, .pure = &mixture->pure_list[HYDROGEN]},
    };
    mixture->small.sheet.fluid = &hydrogen;
    const struct result *result = warned(mixture, "peng-robinson");
    assert_int_equal(result_warnings(result, CODE_W307), 1);
    assert_int_equal(result_warnings(result, CODE_W306), 0);
}

static void a_method_that_cannot_serve_says_so_elsewhere(void **state)
{
    assert_int_equal(warned(*state, "reference")->warnings.count, 0);
}

#define TEST(name) cmocka_unit_test_setup_teardown(name, set_up, tear_down)

int main(void)
{
    const struct CMUnitTest tests[] = {
        TEST(pairs_without_data_are_named_in_one_warning),
        TEST(pairs_by_groups_or_from_the_deck_are_known),
        TEST(a_missing_pair_of_groups_leaves_the_pair_unknown),
        TEST(a_component_without_a_share_is_not_named),
        TEST(a_known_interaction_of_zero_is_no_want_of_data),
        TEST(a_method_without_interactions_warns_of_none),
        TEST(corresponding_states_are_told_from_an_attraction),
        TEST(estimated_pairs_of_reference_equations_are_named_in_one_warning),
        TEST(published_pairs_of_reference_equations_need_no_warning),
        TEST(light_gases_by_the_acentric_factor_are_named),
        TEST(a_light_gas_by_itself_is_named_too),
        TEST(a_method_that_cannot_serve_says_so_elsewhere),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
