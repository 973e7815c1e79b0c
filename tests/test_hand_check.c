/* Hand checks are redone here from the printed text alone, as a reader with a calculator would. */
#include "filling/hand_check.h"
#include "filling/solve.h"

#include "base/text.h"
#include "fluid/reference_explain.h"
#include "fluid/reference_internal.h"
#include "fluid/reference_residual.h"
#include "support/arithmetic.h"
#include "support/check.h"
#include "support/elaborated.h"
#include "support/small_case.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* ---- reading a check back ---------------------------------------------------------------------------------------- */

enum { MOST_STATEMENTS = 160, MOST_PARTS = 4, TEXT_BYTES = 1200, PAGE_COLUMNS = 100, INDENT_COLUMNS = 6 };

/* "symbol = formula = numbers = value unit": its parts without the meaning. */
struct statement_text {
    char parts[MOST_PARTS][TEXT_BYTES];
    size_t count;
};

struct statements {
    size_t count;
    struct statement_text items[MOST_STATEMENTS];
};

/* The meaning stands behind three blanks or more. */
static size_t length_without_meaning(const char *line)
{
    const char *text = line + strspn(line, " ");
    const char *gap = strstr(text, "   ");
    return gap ? (size_t)(gap - line) : strlen(line);
}

static void split(const char *text, struct statement_text *out)
{
    out->count = 0;
    while (out->count < MOST_PARTS) {
        const char *end = strstr(text, " = ");
        const size_t length = end ? (size_t)(end - text) : strlen(text);
        snprintf(out->parts[out->count++], TEXT_BYTES, "%.*s", (int)length, text + strspn(text, " "));
        if (!end) {
            return;
        }
        text = end + 3;
    }
}

/* Lines that begin with a blank go on with the line before; lines without " = " are words. */
static void read_back(const struct hand_check *check, struct statements *out)
{
    char text[TEXT_BYTES] = "";
    out->count = 0;
    for (size_t i = 0; i < check->lines.count; i++) {
        const char *line = check->lines.items[i];
        const size_t used = strlen(text), length = length_without_meaning(line);
        snprintf(text + used, TEXT_BYTES - used, "%.*s", (int)length, line);
        const bool goes_on = i + 1 < check->lines.count && check->lines.items[i + 1][0] == ' ';
        if (!goes_on && strstr(text, " = ")) {
            assert_true(out->count < MOST_STATEMENTS);
            split(text, &out->items[out->count++]);
        }
        if (!goes_on) {
            text[0] = '\0';
        }
    }
}

static double printed_value(const struct statement_text *statement)
{
    return strtod(statement->parts[statement->count - 1], NULL);
}

static const struct statement_text *last_named(const struct statements *statements, const char *symbol)
{
    for (size_t i = statements->count; i-- > 0;) {
        if (strcmp(statements->items[i].parts[0], symbol) == 0) {
            return &statements->items[i];
        }
    }
    fail_msg("nothing is said of %s", symbol);
    return NULL;
}

/* Every line that has numbers put in evaluates to the value printed behind it. */
static void redo(const struct hand_check *check, double tolerance, const char *what)
{
    static struct statements statements;
    read_back(check, &statements);
    assert_true(statements.count > 0);
    for (size_t i = 0; i < statements.count; i++) {
        const struct statement_text *each = &statements.items[i];
        if (each->count == 4) {
            char where[2 * TEXT_BYTES];
            snprintf(where, sizeof where, "%s: %s = %s", what, each->parts[0], each->parts[1]);
            assert_close(arithmetic(each->parts[2]), printed_value(each), tolerance, where);
        }
    }
}

static double printed(const struct hand_check *check, const char *symbol)
{
    static struct statements statements;
    read_back(check, &statements);
    return printed_value(last_named(&statements, symbol));
}

static void assert_fits_the_page(const struct hand_check *check)
{
    for (size_t i = 0; i < check->lines.count; i++) {
        const char *line = check->lines.items[i];
        if (text_columns(line, strlen(line)) > PAGE_COLUMNS - 2 * INDENT_COLUMNS) {
            fail_msg("line too long: %s", line);
        }
    }
}

/* ---- the tests --------------------------------------------------------------------------------------------------- */

static const char *const METHODS[] = {"ideal-gas", "peng-robinson", "soave-redlich-kwong", "reference", NULL};

static void the_calculator_of_this_test_knows_arithmetic(void **state)
{
    (void)state;
    assert_close(arithmetic("2 + 3 * 4 ^ 2 / (7 - (-1)) - 1"), 7.0, 1e-15, "2 + 48 / 8 - 1");
    assert_close(arithmetic("1.5e-3 * exp(ln(2)) + sqrt(2.25)"), 1.503, 1e-15, "0.003 + 1.5");
    assert_true(isnan(arithmetic("3 + x")));
    assert_true(isnan(arithmetic("3 4")));
}

static void amount_and_molar_volume_are_redone(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_PERMISSIBLE_CHARGE);
    small_case_start(&small, METHODS);
    struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, "amount");
    hand_check_amount(&small.run, check, 33.37);
    redo(check, 1e-9, "amount");
    assert_close(printed(check, "n"), 33.37 / 0.04409562, 1e-9, "m / M");
    assert_close(printed(check, "v"), 0.0793 * 0.04409562 / 33.37, 1e-9, "V M / m");
    assert_fits_the_page(check);
    small_case_tear_down(&small);
}

static void ratio_is_rounded_down_and_the_mass_follows(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_PERMISSIBLE_CHARGE);
    small_case_start(&small, METHODS);
    struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, "ratio");
    hand_check_ratio(&small.run, check, 33.97, 0.01);
    redo(check, 1e-9, "ratio");
    assert_close(printed(check, "r"), 33.97 / (999.1 * 0.0793), 1e-9, "filling ratio by definition: 0.42877");
    assert_close(printed(check, "r_d"), 0.42, 1e-15, "0.42877 rounded down to 0.01");
    assert_close(printed(check, "m_d"), 0.42 * 999.1 * 0.0793, 1e-9, "0.42 of the water");
    struct hand_check *plain = sheet_add_hand_check(small.run.result, small.run.out, "ratio");
    hand_check_ratio(&small.run, plain, 33.97, 0.0);
    assert_true(plain->lines.count < check->lines.count);
    small_case_tear_down(&small);
}

static void a_ratio_is_never_rounded_up(void **state)
{
    (void)state;
    const struct {
        double ratio, step, expected;
    } cases[] = {
        {0.7637, 0.01, 0.76},   {0.7699999, 0.01, 0.76}, {0.77, 0.01, 0.77}, {0.29, 0.01, 0.29},
        {0.4263, 0.005, 0.425}, {0.0037, 0.01, 0.0},     {3.7, 1.0, 3.0},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        const double rounded = ratio_rounded_down(cases[i].ratio, cases[i].step);
        assert_near(rounded, cases[i].expected, 1e-15, "multiples of the step, by hand");
        assert_true(rounded <= cases[i].ratio);
    }
}

static void the_margin_to_a_rating_is_redone(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_PERMISSIBLE_CHARGE);
    small_case_start(&small, METHODS);
    struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, "margin");
    hand_check_gauge(&small.run, check, 23.37e5, 1e5, 22.5e5);
    redo(check, 1e-9, "margin");
    assert_close(printed(check, "margin"), 0.13e5, 1e-9, "22.5 - (23.37 - 1) bar");
    struct hand_check *at_bound = sheet_add_hand_check(small.run.result, small.run.out, "margin");
    hand_check_gauge(&small.run, at_bound, 20101324.9988, 101325.0, 200e5);
    redo(at_bound, 0.0, "at the bound but for a few units of the search's tolerance");
    small_case_tear_down(&small);
}

/* Masses in the vessel of 79.3 L: propane boils at 250 K and 320 K below its density of either phase. */
static void the_pressure_of_one_phase_is_redone_from_the_printed_numbers(void **state)
{
    (void)state;
    const struct {
        const char *name;
        double mass, temperature;
    } cases[] = {
        {"thin vapour", 0.0171, 290.7},
        {"vapour", 0.81, 303.15},
        {"liquid-full", 36.3, 338.15},
        {"cold liquid-full", 45.9, 246.3},
        {"above the critical temperature", 14.7, 391.3},
        {"dense above the critical temperature", 34.1, 401.9},
    };
    struct small_case small;
    small_case_set_up(&small, SHEET_PERMISSIBLE_CHARGE);
    small_case_start(&small, METHODS);
    size_t checked = 0;
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        for (size_t k = 0; k < small.run.method_count; k++) {
            struct method_run *method = &small.methods[k];
            struct contents contents;
            if (contents_at(&small.run, method, cases[i].mass, cases[i].temperature, &contents) != ANSWER_OK ||
                contents.state == VESSEL_TWO_PHASE) {
                continue;
            }
            char what[TEXT_BYTES];
            snprintf(what, sizeof what, "%s by %s", cases[i].name, method->name);
            struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, what);
            hand_check_contents(&small.run, check, method, cases[i].mass, &contents);
            redo(check, 1e-6, what);
            assert_close(printed(check, "p"), contents.pressure, 1e-9, what);
            assert_fits_the_page(check);
            checked++;
        }
    }
    assert_in_range(checked, 20, 24);
    small_case_tear_down(&small);
}

static void the_fugacity_coefficient_is_redone(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small_case_start(&small, METHODS);
    const double one = 1.0, volumes[] = {23.7e-3, 1.71e-3, 0.0843e-3};
    for (size_t k = 0; k < small.run.method_count; k++) {
        for (size_t i = 0; i < sizeof volumes / sizeof *volumes; i++) {
            struct method_run *method = &small.methods[k];
            struct pure_arrays arrays;
            struct phase phase;
            phase_of_pure(&phase, &arrays);
            assert_int_equal(fluid_set_t(method->at_t, method->fluid, 371.7), ANSWER_OK);
            assert_int_equal(phase_tv(method->at_t, volumes[i], &one, PHASE_LN_PHI, &phase), ANSWER_OK);
            struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, method->name);
            hand_check_pressure(&small.run, check, method, 371.7, volumes[i], "vapour", true);
            redo(check, 1e-6, method->name);
            assert_close(printed(check, "f"), phase.pressure * exp(arrays.ln_phi), 1e-9,
                         "fugacity of the same state by phase_tv");
        }
    }
    small_case_tear_down(&small);
}

static void two_phases_are_redone_by_equal_fugacity_and_the_balance_of_volumes(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_PERMISSIBLE_CHARGE);
    small_case_start(&small, METHODS);
    const double temperatures[] = {231.1, 288.15, 359.3};
    for (size_t k = 1; k < small.run.method_count; k++) {
        for (size_t i = 0; i < sizeof temperatures / sizeof *temperatures; i++) {
            struct method_run *method = &small.methods[k];
            struct contents contents;
            assert_int_equal(contents_at(&small.run, method, 13.31, temperatures[i], &contents), ANSWER_OK);
            assert_int_equal(contents.state, VESSEL_TWO_PHASE);
            struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, method->name);
            hand_check_contents(&small.run, check, method, 13.31, &contents);
            redo(check, 1e-6, method->name);
            assert_close(printed(check, "x_L"), contents.liquid_fraction, 1e-9, "the closed vessel's answer");
            assert_close(printed(check, "f_V"), printed(check, "f_L"), 1e-9, "equal fugacities at saturation");
            assert_close(printed(check, "p"), contents.pressure, 1e-9, "the closed vessel's answer");
            assert_fits_the_page(check);
        }
    }
    small_case_tear_down(&small);
}

static size_t count_of(const struct hand_check *check, const char *opening)
{
    size_t count = 0;
    for (size_t i = 0; i < check->lines.count; i++) {
        count += strncmp(check->lines.items[i], opening, strlen(opening)) == 0;
    }
    return count;
}

static void what_both_phases_share_is_printed_once(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small_case_start(&small, METHODS);
    struct method_run *method = &small.methods[1];
    struct saturation saturation;
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 288.15), ANSWER_OK);
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, "saturation");
    hand_check_saturation(&small.run, check, method, &saturation);
    assert_int_equal(count_of(check, "R = "), 1);
    assert_int_equal(count_of(check, "a_c = "), 1);
    assert_int_equal(count_of(check, "v = "), 2);
    assert_int_equal(count_of(check, "ln_phi = "), 2);
    small_case_tear_down(&small);
}

static void a_method_without_an_explanation_says_so(void **state)
{
    (void)state;
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small_case_start(&small, METHODS);
    struct fluid mute = *small.methods[0].fluid;
    struct fluid_ops ops = *mute.ops;
    ops.explain = NULL;
    mute.ops = &ops;
    small.methods[0].fluid = &mute;
    struct hand_check *check = sheet_add_hand_check(small.run.result, small.run.out, "mute");
    hand_check_pressure(&small.run, check, &small.methods[0], 300.0, 1.3e-3, "vapour", false);
    assert_int_equal(check->lines.count, 2);
    assert_non_null(strstr(check->lines.items[1], "does not set out its numbers"));
    small_case_tear_down(&small);
}

/* Invented terms, one or two of every kind; the two ways to sum them were written apart from each other. */
static void the_explained_sums_of_every_kind_of_term_agree_with_the_solver(void **state)
{
    (void)state;
    static const struct residual_term terms[] = {
        {.kind = RESIDUAL_POWER, .n = 0.43, .t = 0.37, .d = 1},
        {.kind = RESIDUAL_POWER, .n = -1.3, .t = 1.17, .d = 2, .l = 2},
        {.kind = RESIDUAL_EXPONENTIAL, .n = 0.21, .t = 2.3, .d = 3, .l = 1.7, .g = 1.3},
        {.kind = RESIDUAL_GAUSSIAN,
         .n = -0.31,
         .t = 1.9,
         .d = 2,
         .eta = 1.1,
         .epsilon = 0.7,
         .beta = 2.1,
         .gamma = 1.2},
        {.kind = RESIDUAL_INVERSE_GAUSSIAN,
         .n = 0.023,
         .t = 1.4,
         .d = 2,
         .eta = 1.8,
         .epsilon = 0.9,
         .beta = 0.37,
         .gamma = 1.1,
         .b = 1.43},
        {.kind = RESIDUAL_DOUBLE_EXPONENTIAL, .n = 0.17, .t = 1.6, .d = 2, .gd = 0.7, .ld = 2, .gt = 0.3, .lt = 3},
        {.kind = RESIDUAL_NONANALYTIC,
         .n = -0.67,
         .a = 3.5,
         .b = 0.875,
         .beta = 0.3,
         .A = 0.7,
         .B = 0.3,
         .C = 10,
         .E = 275},
    };
    const struct reference_spec equation = {
        .gas_constant = 8.3,
        .reducing_temperature = 310.0,
        .reducing_density = 9000.0,
        .residual_count = sizeof terms / sizeof *terms,
        .residual = terms,
    };
    const struct pure_spec pure = {.name = "invented", .molar_mass = 0.04, .reference = &equation};
    const struct pure_spec *const list[] = {&pure};
    const struct fluid_spec spec = {.count = 1, .pure = list};
    const struct fluid_ops ops = {.explain = reference_explain};
    const struct reference fluid = {.head = {.ops = &ops, .spec = &spec, .count = 1, .gas_constant = 8.3},
                                    .equation = &equation};
    const struct {
        double tau, delta;
    } states[] = {{0.87, 0.013}, {1.03, 0.97}, {0.991, 1.09}, {1.21, 2.3}};

    struct arena *arena = arena_create(NULL);
    const struct residual *residual = residual_create(&equation, arena);
    struct residual_at_t *coefficients = arena_alloc(arena, residual_at_t_size(residual), 1);
    for (size_t i = 0; i < sizeof states / sizeof *states; i++) {
        const struct fluid_at_t at_t = {.fluid = &fluid.head, .temperature = 310.0 / states[i].tau};
        const double one = 1.0;
        struct explanation numbers;
        assert_int_equal(fluid_explain(&at_t, 1.0 / (states[i].delta * 9000.0), &one, false, &numbers), ANSWER_OK);
        struct residual_sums sums;
        residual_set_tau(coefficients, residual, states[i].tau);
        residual_by_density(coefficients, residual, states[i].delta, &sums);
        const struct explained_value *Z = &numbers.values[numbers.count - 2];
        assert_string_equal(Z->symbol, "Z");
        assert_string_equal(Z->formula, "1 + D_pol + D_exp + D_gau + D_dbl + D_crit");
        assert_close(Z->value, 1.0 + sums.d, 1e-12, "1 + delta dalphar/ddelta by the regrouped sums");
    }
    arena_free(arena);
}

/* ---- mixtures ---------------------------------------------------------------------------------------------------- */

static const char MIXTURES[] =
    "component n-butane { molar-mass 58.1222 g/mol; critical-temperature 425.125 K; critical-pressure 3.796 MPa\n"
    "  acentric 0.2008; parameters peng-robinson-1978 { shift -5.3 cm3/mol } }\n"
    "component nitrogen { molar-mass 28.01348 g/mol; critical-temperature 126.192 K; critical-pressure 3.3958 MPa\n"
    "  acentric 0.0372; parameters peng-robinson-1978 { shift -3.825 cm3/mol } }\n"
    "pair nitrogen n-butane { peng-robinson kij 0.08; peng-robinson-1978 kij 0.08 }\n"
    "mixture span by mole { n-butane 2 %; nitrogen rest }\n"
    "vessel ten { water-capacity 10 L; test-pressure 300 barg }\n"
    "rule cold { from -25 degC to 50 degC no liquid }\n"
    "charge c { fluid span; vessel ten; density 0.1 kg/L }\n";

static const struct hand_check *first_check(const struct result_sheet *sheet)
{
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_HAND_CHECK) {
            return part->hand_check;
        }
    }
    fail_msg("no hand check");
    return NULL;
}

/* The value of a symbol each time it is printed. */
static size_t all_printed(const struct hand_check *check, const char *symbol, double values[], size_t most)
{
    static struct statements statements;
    size_t count = 0;
    read_back(check, &statements);
    for (size_t i = 0; i < statements.count; i++) {
        if (strcmp(statements.items[i].parts[0], symbol) == 0 && count < most) {
            values[count++] = printed_value(&statements.items[i]);
        }
    }
    return count;
}

static void phases_of_mixtures_are_redone_and_their_fugacities_are_equal(void **state)
{
    (void)state;
    static const char *const methods[] = {"van-der-waals", "soave-redlich-kwong", "peng-robinson",
                                          "peng-robinson-1978"};
    static const char *const sheets[] = {
        "sheet permissible-charge { fluid span; vessel ten; rules cold; methods ",
        "sheet saturation { fluid span; sweep temperature -25 degC; methods ",
        "sheet fugacity { fluid span; sweep temperature -100 degC; sweep density 0.1 kg/L; methods ",
    };
    for (size_t m = 0; m < sizeof methods / sizeof *methods; m++) {
        for (size_t k = m == 0 ? 2 : 0; k < sizeof sheets / sizeof *sheets; k++) { /* van der Waals never governs */
            char deck[4096];
            snprintf(deck, sizeof deck, "%s%s%s }\n", MIXTURES, sheets[k], methods[m]);
            struct elaborated it = elaborate_well(deck);
            const struct result *result = filling_solve(it.tree, "0.0.0", it.arena);
            const struct hand_check *check = first_check(result->first_sheet);
            redo(check, 1e-6, methods[m]); /* ten digits of p_rep and p_att leave seven of a liquid's p */
            assert_fits_the_page(check);
            double p[4], f[4];
            assert_int_equal(all_printed(check, "p", p, 4), 2);
            assert_close(p[0], p[1], 1e-8, "one pressure in both phases");
            assert_int_equal(all_printed(check, "f_1", f, 4), 2);
            assert_close(f[0], f[1], 1e-7, "equal fugacity of the first component");
            assert_int_equal(all_printed(check, "f_2", f, 4), 2);
            assert_close(f[0], f[1], 1e-7, "equal fugacity of the second component");
            elaborated_end(&it);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_calculator_of_this_test_knows_arithmetic),
        cmocka_unit_test(amount_and_molar_volume_are_redone),
        cmocka_unit_test(ratio_is_rounded_down_and_the_mass_follows),
        cmocka_unit_test(a_ratio_is_never_rounded_up),
        cmocka_unit_test(the_margin_to_a_rating_is_redone),
        cmocka_unit_test(the_pressure_of_one_phase_is_redone_from_the_printed_numbers),
        cmocka_unit_test(the_fugacity_coefficient_is_redone),
        cmocka_unit_test(two_phases_are_redone_by_equal_fugacity_and_the_balance_of_volumes),
        cmocka_unit_test(what_both_phases_share_is_printed_once),
        cmocka_unit_test(a_method_without_an_explanation_says_so),
        cmocka_unit_test(the_explained_sums_of_every_kind_of_term_agree_with_the_solver),
        cmocka_unit_test(phases_of_mixtures_are_redone_and_their_fugacities_are_equal),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
