/* What a result tells of the mixtures it used: composition, pairs with their sources, what methods take. */
#include "filling/data_used.h"

#include "filling/solve.h"
#include "support/result_reading.h"
#include "support/small_mixture.h"

#include <stdio.h>
#include <stdlib.h>

static const double SHARES[] = {0.02, 0.9, 0.05, 0.03};
static const double TEMPERATURES[] = {300.0};
static const double PRESSURES[] = {1e5};
static const char *const METHODS[] = {"peng-robinson-1978", "peng-robinson", "van-der-waals"};

static int set_up(void **state)
{
    static struct small_mixture mixture;
    memset(&mixture, 0, sizeof mixture);
    small_mixture_set_up(&mixture, SHEET_FUGACITY, SHARES);
    mixture.small.sheet.charge = NULL;
    mixture.small.sheet.methods =
        (struct case_methods){.count = 3, .names = METHODS, .may_govern = 2, .reason = "named here"};
    mixture.small.sheet.temperatures = (struct case_sweep){.given = true, .count = 1, .values = TEMPERATURES};
    mixture.small.sheet.pressures = (struct case_sweep){.given = true, .count = 1, .values = PRESSURES};
    *state = &mixture;
    return 0;
}

static int tear_down(void **state)
{
    small_mixture_tear_down(*state);
    return 0;
}

static const struct result *solve(struct small_mixture *mixture)
{
    return filling_solve(&mixture->small.tree, "0.0.0", mixture->small.arena);
}

/* The nth row of that group and name, from 0; NULL: none. */
static const struct data_row *datum(const struct result *result, const char *group, const char *name, size_t nth)
{
    for (size_t i = 0; i < result->data.count; i++) {
        const struct data_row *row = &result->data.items[i];
        if (strcmp(row->group, group) == 0 && strcmp(row->name, name) == 0 && nth-- == 0) {
            return row;
        }
    }
    return NULL;
}

static const struct method_row *method(const struct result *result, const char *name)
{
    for (size_t i = 0; i < result->methods.count; i++) {
        if (strcmp(result->methods.items[i].name, name) == 0) {
            return &result->methods.items[i];
        }
    }
    return NULL;
}

static bool is_cited(const struct result *result, const char *key)
{
    for (size_t i = 0; i < result->sources.count; i++) {
        if (strcmp(result->sources.items[i].key, key) == 0) {
            return true;
        }
    }
    return false;
}

/* ---- composition ------------------------------------------------------------------------------------------------- */

static void mole_fractions_stand_with_their_lines_and_uncertainty(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->shares[N_BUTANE].given.uncertainty = 0.0003;
    mixture->shares[NITROGEN].is_rest = true;
    const struct result *result = solve(mixture);
    const struct data_row *butane = datum(result, "mixture blend", "n-butane", 0);
    assert_non_null(butane);
    assert_string_equal(butane->value, "mole fraction 0.02");
    assert_string_equal(butane->source, "line 1");
    assert_string_equal(butane->remark, "+/- 0.0003");
    assert_string_equal(datum(result, "mixture blend", "nitrogen", 0)->remark, "rest");
    assert_null(datum(result, "mixture blend", "n-butane", 1));
}

/* 0.02 x 58.1222 + 0.9 x 28.01348 + 0.05 x 2.01588 + 0.03 x 39.948, worked by hand. */
static void the_molar_mass_is_that_of_the_whole(void **state)
{
    const struct data_row *row = datum(solve(*state), "mixture blend", "molar-mass", 0);
    assert_close(strtod(row->value, NULL), 27.67381, 1e-9, "worked by hand, above");
}

static void other_fractions_stand_beside_those_of_amount(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->fluid.basis = BASIS_MASS;
    mixture->shares[N_BUTANE].given.value = 0.0420;
    const struct result *result = solve(mixture);
    const struct data_row *as_given = datum(result, "mixture blend", "n-butane", 0);
    assert_string_equal(as_given->value, "mass fraction 0.042");
    assert_string_equal(as_given->source, "line 1");
    assert_string_equal(datum(result, "mixture blend", "n-butane", 1)->value, "mole fraction 0.02");
    assert_null(datum(result, "mixture blend", "n-butane", 1)->source);
}

/* Mole fractions by real volumes: the independent evaluation of tests/test_mixture_basis.c, 0.2049317535 and the
 * fractions of volume there. */
static void volumes_at_a_state_are_told_with_the_state(void **state)
{
    struct small_mixture *mixture = *state;
    static const double shares[] = {0.2, 0.7, 0.1, 0.0};
    small_mixture_set_up_fluid(mixture, shares);
    mixture->fluid.basis = BASIS_VOLUME;
    mixture->fluid.has_state = true;
    mixture->fluid.temperature = 288.15;
    mixture->fluid.pressure = 1e5;
    mixture->small.sheet.methods.names = &METHODS[1];
    mixture->small.sheet.methods.count = 1;
    const struct result *result = solve(mixture);
    const char *group = "mixture blend, by peng-robinson";
    assert_string_equal(datum(result, group, "volumes at", 0)->value, "288.15 K, 100000 Pa");
    assert_string_equal(datum(result, group, "n-butane", 0)->value, "volume fraction 0.2");
    assert_string_equal(datum(result, group, "n-butane", 1)->value, "mole fraction 0.20493175");
}

static void reactions_and_assessments_are_quoted(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->pairs[1].reacts = "they form ammonia";
    mixture->pairs[1].reacts_origin = (struct origin){.kind = ORIGIN_LIBRARY, .source = &SMALL_GROUP_SOURCE};
    mixture->fluid.assessment = "nitrogen and hydrogen react: they form ammonia";
    mixture->fluid.refuse = "for no reason";
    mixture->small.sheet.assessed = "report 17";
    const struct result *result = solve(mixture);
    const struct data_row *reaction = datum(result, "mixture blend", "reaction nitrogen, hydrogen", 0);
    assert_string_equal(reaction->value, "they form ammonia");
    assert_string_equal(reaction->source, "small-groups");
    assert_string_equal(reaction->remark, "unverified");
    assert_string_equal(datum(result, "mixture blend", "to be assessed", 0)->value, mixture->fluid.assessment);
    assert_string_equal(datum(result, "mixture blend", "no charge", 0)->value, "for no reason");
    assert_string_equal(datum(result, "mixture blend", "assessed", 0)->value, "\"report 17\"");
}

/* ---- pairs ------------------------------------------------------------------------------------------------------- */

/* kij = [E - (d1 - d2)^2] / (2 d1 d2) at 288.15 K, Jaubert and Mutelet, Fluid Phase Equilib. 224 (2004) 285, with the
 * groups of n-butane and nitrogen, evaluated at 40 digits with mpmath: 0.01071202093113786. */
static void pairs_stand_with_value_and_source(void **state)
{
    static const struct {
        const char *method, *pair, *source, *remark;
        double kij;
    } cases[] = {
        {"peng-robinson-1978", "n-butane, nitrogen", "small-groups, by groups", "unverified", 0.01071202},
        {"peng-robinson-1978", "nitrogen, hydrogen", "given in this deck, line 1", NULL, 0.0711},
        {"peng-robinson", "n-butane, nitrogen", "small-pairs, constant", NULL, 0.08},
    };
    const struct result *result = solve(*state);
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        char group[80];
        snprintf(group, sizeof group, "kij at 15 degC of blend, %s", cases[k].method);
        const struct data_row *row = datum(result, group, cases[k].pair, 0);
        assert_non_null(row);
        assert_close(strtod(row->value, NULL), cases[k].kij, 1e-5, "given, or independent evaluation, above");
        assert_string_equal(row->source, cases[k].source);
        assert_int_equal(row->remark == NULL, cases[k].remark == NULL);
    }
}

static void few_unknown_pairs_are_named_and_many_are_counted(void **state)
{
    struct small_mixture *mixture = *state;
    const struct result *result = solve(mixture);
    const struct data_row *others = datum(result, "kij at 15 degC of blend, van-der-waals", "6 other pairs", 0);
    assert_non_null(others);
    assert_string_equal(others->value, "0");
    assert_string_equal(others->source, "none known");
    mixture->fractions[ARGON] = 0.0;
    result = solve(mixture);
    assert_non_null(datum(result, "kij at 15 degC of blend, van-der-waals", "n-butane, hydrogen", 0));
    assert_null(datum(result, "kij at 15 degC of blend, van-der-waals", "nitrogen, argon", 0));
}

static void sources_of_pairs_are_cited_and_unverified_ones_warned_of_once(void **state)
{
    const struct result *result = solve(*state);
    assert_true(is_cited(result, "small-groups"));
    assert_true(is_cited(result, "small-molecules"));
    assert_true(is_cited(result, "small-pairs"));
    assert_int_equal(result_warnings(result, CODE_W301), 1);
}

static void groups_stand_with_the_component(void **state)
{
    struct small_mixture *mixture = *state;
    const struct data_row *row = datum(solve(mixture), "n-butane", "groups", 0);
    assert_string_equal(row->value, "CH3 2, CH2 2");
    assert_string_equal(row->source, "small-molecules");
    mixture->small.sheet.methods.names = &METHODS[1];
    mixture->small.sheet.methods.count = 1;
    assert_null(datum(solve(mixture), "n-butane", "groups", 0));
}

/* ---- methods ----------------------------------------------------------------------------------------------------- */

static void a_mixture_s_methods_name_what_they_take(void **state)
{
    const struct result *result = solve(*state);
    const char *of_1978 = method(result, "peng-robinson-1978")->parameters;
    assert_non_null(
        strstr(of_1978, "blend: critical temperature, critical pressure, acentric factor, shift c of each"));
    assert_non_null(strstr(of_1978, "kij of 6 pairs: 1 given in the deck, 1 by groups, 4 not known and taken as zero"));
    assert_non_null(strstr(of_1978, "v = v_eos - sum x_i c_i"));
    const char *of_1976 = method(result, "peng-robinson")->parameters;
    assert_non_null(strstr(of_1976, "1 constant, of the library, 5 not known"));
    assert_null(strstr(of_1976, "shift"));
    assert_null(strstr(method(result, "van-der-waals")->parameters, "acentric"));
}

static void the_range_says_what_is_translated_and_by_whom(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->case_set[NITROGEN].shift.origin.kind = ORIGIN_DECK;
    const char *range = method(solve(mixture), "peng-robinson-1978")->range;
    assert_non_null(strstr(range, "; translated: n-butane; the volume of one by itself"));
    assert_non_null(strstr(range, "; translated by a shift given in the deck: nitrogen"));
    assert_non_null(strstr(range, "; not translated, as no shift is known: hydrogen, argon"));
}

/* A pure gas by a set of its own: what is told is what the equation takes. */
static void a_pure_gas_s_method_tells_the_values_it_takes(void **state)
{
    struct small_mixture *mixture = *state;
    static const char *const twu[] = {"translated-peng-robinson"};
    const double one = 1.0;
    mixture->set[NITROGEN] = (struct cubic_set){.method = twu[0],
                                                .critical_temperature = {true, 126.21},
                                                .critical_pressure = {true, 3.39e6},
                                                .has_twu = true,
                                                .L = 0.1243,
                                                .M = 0.8898,
                                                .N = 2.0129,
                                                .shift = -3.643e-6};
    struct case_cubic_set *set = &mixture->case_set[NITROGEN];
    *set = (struct case_cubic_set){
        .method = twu[0],
        .critical_temperature = small_mixture_value(126.21, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE),
        .critical_pressure = small_mixture_value(3.39e6, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE),
        .twu = {small_mixture_value(0.1243, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE),
                small_mixture_value(0.8898, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE),
                small_mixture_value(2.0129, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE)},
        .shift = small_mixture_value(-3.643e-6, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE),
    };
    const struct case_fluid nitrogen = {
        .name = "nitrogen",
        .count = 1,
        .components = &mixture->component_list[NITROGEN],
        .fractions = &one,
        .molar_mass = SMALL_MIXTURE_GASES[NITROGEN].molar_mass,
        .spec = {.count = 1, .pure = &mixture->pure_list[NITROGEN]},
    };
    mixture->small.sheet.fluid = &nitrogen;
    mixture->small.sheet.methods = (struct case_methods){.count = 1, .names = twu, .may_govern = 1};
    const struct result *result = solve(mixture);
    const char *parameters = method(result, twu[0])->parameters;
    assert_non_null(strstr(parameters,
                           "nitrogen: critical temperature 126.21 K, critical pressure 3390000 Pa, L 0.1243, "
                           "M 0.8898, N 2.0129, shift c -3.643e-06 m3/mol"));
    assert_non_null(strstr(parameters, "v = v_eos - c"));
    assert_non_null(datum(result, "nitrogen", "translated-peng-robinson L", 0));
    assert_null(datum(result, "nitrogen", "critical-temperature", 0));
    assert_null(datum(result, "nitrogen", "acentric", 0));
    assert_null(datum(result, "mixture nitrogen", "nitrogen", 0));
}

#define TEST(name) cmocka_unit_test_setup_teardown(name, set_up, tear_down)

int main(void)
{
    const struct CMUnitTest tests[] = {
        TEST(mole_fractions_stand_with_their_lines_and_uncertainty),
        TEST(the_molar_mass_is_that_of_the_whole),
        TEST(other_fractions_stand_beside_those_of_amount),
        TEST(volumes_at_a_state_are_told_with_the_state),
        TEST(reactions_and_assessments_are_quoted),
        TEST(pairs_stand_with_value_and_source),
        TEST(few_unknown_pairs_are_named_and_many_are_counted),
        TEST(sources_of_pairs_are_cited_and_unverified_ones_warned_of_once),
        TEST(groups_stand_with_the_component),
        TEST(a_mixture_s_methods_name_what_they_take),
        TEST(the_range_says_what_is_translated_and_by_whom),
        TEST(a_pure_gas_s_method_tells_the_values_it_takes),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
