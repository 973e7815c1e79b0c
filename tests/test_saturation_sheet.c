/* The sheet `saturation` over a case built by hand, against direct calls of the equilibrium layer and identities. */
#include "support/check.h"
#include "support/small_case.h"

#include <math.h>
#include <string.h>

static const char *const CUBICS[] = {"peng-robinson", "soave-redlich-kwong", "ideal-gas", NULL};
static const char *const REFERENCE[] = {"reference", "peng-robinson", NULL};

static struct case_sweep sweep(const double *values, size_t count)
{
    return (struct case_sweep){.given = true, .count = count, .values = values, .shown = {"K", 1.0, 0.0}};
}

static void answer(struct small_case *small, const char *const methods[])
{
    small_case_start(small, methods);
    answer_saturation(&small->run);
}

static double number(const struct table *table, size_t row, const char *column)
{
    const struct cell *cell = small_case_cell(table, row, column);
    assert_int_equal(cell->kind, CELL_NUMBER);
    return cell->number;
}

/* Tables come in pairs for each method: the line, and the equality of the fugacities. */
static const struct table *line_of(const struct small_case *small, size_t method)
{
    return small_case_table(small, method);
}

static size_t warnings_of(const struct small_case *small, enum code code)
{
    size_t count = 0;
    for (size_t i = 0; i < small->run.result->warnings.count; i++) {
        count += small->run.result->warnings.items[i].code == code;
    }
    return count;
}

static void rows_are_the_saturations_at_exactly_the_swept_temperatures(void **state)
{
    (void)state;
    const double temperatures[] = {231.1, 288.15, 341.7, 369.6};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 4);
    answer(&small, CUBICS);
    const struct table *line = line_of(&small, 0);
    assert_string_equal(line->method, "peng-robinson");
    struct method_run *method = &small.methods[0];
    for (size_t i = 0; i < 4; i++) {
        struct saturation direct;
        assert_int_equal(fluid_set_t(method->at_t, method->fluid, temperatures[i]), ANSWER_OK);
        assert_int_equal(saturation_at_t(method->at_t, &direct), ANSWER_OK);
        assert_close(number(line, i, "temperature"), temperatures[i], 0.0, "as swept");
        assert_close(number(line, i, "pressure"), direct.pressure, 1e-15, "saturation_at_t");
        assert_close(number(line, i, "liquid-density"), 0.04409562 / direct.liquid_volume, 1e-14, "M / v");
        assert_close(number(line, i, "vapour-density"), 0.04409562 / direct.vapour_volume, 1e-14, "M / v");
        assert_string_equal(small_case_cell(line, i, "state")->text, "vapour + liquid");
    }
    assert_false(small.run.result->is_undecided);
    small_case_tear_down(&small);
}

/* An invented solid of propane, with a triple point where its vapour is no ideal gas: conditions of equilibrium ask for
 * no real one. ln(p / 2 bar) = 11 (1 - 260 K / T). */
static const double INVENTED_TERMS[][2] = {{11.0, -1.0}};
static const struct solid_spec INVENTED_SOLID = {.form = POWER_DIFFERENCES,
                                                 .reducing_temperature = 260.0,
                                                 .reducing_pressure = 2e5,
                                                 .count = 1,
                                                 .terms = INVENTED_TERMS,
                                                 .smallest_temperature = 230.0,
                                                 .largest_temperature = 260.0,
                                                 .molar_volume = 60e-6};

/* Clapeyron: heat of sublimation = T (v_V - v_S) dp/dT, which the sheet has from departures and the line alone. */
static void sublimation_heat_agrees_with_the_slope_of_the_line(void **state)
{
    (void)state;
    const double temperatures[] = {225.0, 231.0, 245.0, 259.9, 265.0};
    const double M = 0.04409562;
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.pure.solid = &INVENTED_SOLID;
    small.sheet.temperatures = sweep(temperatures, 5);
    answer(&small, CUBICS);
    const struct table *line = small_case_table(&small, 2);
    assert_string_equal(line->title, "sublimation line");
    assert_int_equal(line->row_count, 4);
    for (size_t i = 0; i < 4; i++) {
        const double T = temperatures[i], p = 2e5 * exp(11.0 * (1.0 - 260.0 / T));
        const double slope = p * 11.0 * 260.0 / (T * T);
        const double swell = M / number(line, i, "vapour-density") - M / number(line, i, "solid-density");
        assert_close(number(line, i, "pressure"), p, 1e-13, "the line as published");
        assert_close(number(line, i, "solid-density"), M / 60e-6, 1e-13, "M / v");
        assert_close(number(line, i, "sublimation-heat") * M, T * swell * slope, 1e-10, "Clapeyron");
        assert_int_equal(small_case_cell(line, i, "pressure")->is_outside_range, T < 230.0);
    }
    assert_int_equal(warnings_of(&small, CODE_W365), 1);
    small_case_tear_down(&small);
}

/* Clausius and Clapeyron: dp/dT = latent heat / (T (v_V - v_L)), all per kilogram. */
static void latent_heat_agrees_with_the_slope_of_the_line(void **state)
{
    (void)state;
    const double step = 0.01;
    const double temperatures[] = {260.0 - step, 260.0, 260.0 + step, 340.0 - step, 340.0, 340.0 + step};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 6);
    answer(&small, REFERENCE);
    const struct table *line = line_of(&small, 0);
    for (size_t i = 1; i < 6; i += 3) {
        const double slope = (number(line, i + 1, "pressure") - number(line, i - 1, "pressure")) / (2.0 * step);
        const double expansion = 1.0 / number(line, i, "vapour-density") - 1.0 / number(line, i, "liquid-density");
        assert_close(number(line, i, "latent-heat"), slope * temperatures[i] * expansion, 1e-7,
                     "Clausius and Clapeyron, central difference over 0.02 K");
    }
    small_case_tear_down(&small);
}

static void the_evidence_shows_equal_fugacities_and_consistent_compressibilities(void **state)
{
    (void)state;
    const double temperatures[] = {250.0, 320.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 2);
    answer(&small, REFERENCE);
    const struct table *line = small_case_table(&small, 0), *evidence = small_case_table(&small, 1);
    for (size_t i = 0; i < 2; i++) {
        const double p = number(line, i, "pressure"), RT = 8.314472 * temperatures[i];
        assert_near(number(evidence, i, "ln-fugacity-difference"), 0.0, SATURATION_LN_F_TOLERANCE, "as promised");
        assert_close(number(evidence, i, "vapour-compressibility-factor"),
                     p * 0.04409562 / number(line, i, "vapour-density") / RT, 1e-13, "Z = p v / (R T)");
        assert_close(number(evidence, i, "liquid-compressibility-factor"),
                     p * 0.04409562 / number(line, i, "liquid-density") / RT, 1e-13, "Z = p v / (R T)");
        assert_close(number(evidence, i, "fugacity"), p * exp(number(evidence, i, "ln-fugacity-coefficient")), 1e-13,
                     "f = phi p");
    }
    small_case_tear_down(&small);
}

static void a_temperature_above_the_critical_one_is_a_row_of_words(void **state)
{
    (void)state;
    const double temperatures[] = {369.0, 371.3};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 2);
    answer(&small, CUBICS);
    const struct table *line = line_of(&small, 0);
    assert_close(number(line, 1, "temperature"), 371.3, 0.0, "as swept");
    assert_int_equal(small_case_cell(line, 1, "pressure")->kind, CELL_EMPTY);
    assert_int_equal(small_case_cell(line, 1, "liquid-density")->kind, CELL_EMPTY);
    assert_string_equal(small_case_cell(line, 1, "state")->text, "above the critical temperature, 96.74 degC");
    assert_false(small.run.result->is_undecided);
    small_case_tear_down(&small);
}

static void a_pressure_sweep_gives_boiling_temperatures(void **state)
{
    (void)state;
    const double pressures[] = {101325.0, 9.37e5, 4.3e6};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.pressures = sweep(pressures, 3);
    answer(&small, REFERENCE);
    const struct table *line = small_case_table(&small, 0);
    assert_close(number(line, 0, "pressure"), 101325.0, 0.0, "as swept");
    assert_close(number(line, 0, "temperature"), 231.036, 1e-5,
                 "normal boiling point of propane, Lemmon et al. 2009, table 1");
    assert_string_equal(small_case_cell(line, 2, "state")->text, "above the critical pressure, 42.51 bara");
    const struct table *beside = small_case_table(&small, 2);
    assert_close(number(beside, 1, "temperature-deviation"),
                 number(beside, 1, "temperature") - number(line, 1, "temperature"), 1e-12, "difference by hand");
    small_case_tear_down(&small);
}

static void the_method_beside_is_compared_with_the_lead(void **state)
{
    (void)state;
    const double temperatures[] = {253.1, 319.4};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 2);
    small.sheet.table_csv = "line.csv";
    answer(&small, REFERENCE);
    const struct table *lead = small_case_table(&small, 0), *beside = small_case_table(&small, 2);
    assert_string_equal(lead->csv, "line.csv");
    assert_null(beside->csv);
    assert_string_equal(beside->method, "peng-robinson");
    for (size_t i = 0; i < 2; i++) {
        assert_close(number(beside, i, "pressure-deviation"),
                     number(beside, i, "pressure") / number(lead, i, "pressure") - 1.0, 1e-12, "ratio by hand");
    }
    small_case_tear_down(&small);
}

static void a_method_without_liquid_is_told_in_a_note(void **state)
{
    (void)state;
    const double temperatures[] = {253.1};
    const char *const methods[] = {"ideal-gas", "peng-robinson", NULL};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 1);
    answer(&small, methods);
    assert_true(small.run.result->is_undecided);
    assert_int_equal(small.run.out->first_part->kind, PART_NOTE);
    assert_non_null(strstr(small.run.out->first_part->note, "ideal-gas has no liquid"));
    assert_string_equal(small_case_table(&small, 0)->method, "peng-robinson");
    small_case_tear_down(&small);
}

static void the_iteration_is_a_chain_of_corrections_that_ends_at_the_line(void **state)
{
    (void)state;
    const double temperatures[] = {253.1, 310.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 2);
    small.sheet.show_iteration = true;
    small.sheet.iteration_at = (struct optional){true, 290.3};
    answer(&small, CUBICS);
    const struct table *passes = small_case_table(&small, 2);
    assert_string_equal(passes->title, "iteration at 17.15 degC");
    assert_true(passes->row_count > 3);
    for (size_t i = 0; i < passes->row_count; i++) {
        const double p = number(passes, i, "trial-pressure"), next = number(passes, i, "next-pressure");
        assert_close(next, p * number(passes, i, "liquid-fugacity") / number(passes, i, "vapour-fugacity"), 1e-13,
                     "p fL / fV by hand");
        if (i > 0) {
            assert_close(p, number(passes, i - 1, "next-pressure"), 1e-13, "each pass starts where the last ended");
        }
    }
    struct saturation direct;
    struct method_run *method = &small.methods[0];
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 290.3), ANSWER_OK);
    assert_int_equal(saturation_at_t(method->at_t, &direct), ANSWER_OK);
    assert_close(number(passes, passes->row_count - 1, "next-pressure"), direct.pressure, 1e-9,
                 "solved in the volumes instead");
    assert_int_equal(warnings_of(&small, CODE_W351), 0);
    small_case_tear_down(&small);
}

static void an_iteration_near_the_critical_point_says_that_it_has_not_ended(void **state)
{
    (void)state;
    const double temperatures[] = {369.6};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.show_iteration = true;
    answer(&small, CUBICS);
    assert_int_equal(warnings_of(&small, CODE_W351), 1);
    small_case_tear_down(&small);
}

static void one_point_is_worked_by_hand_at_the_lead(void **state)
{
    (void)state;
    const double temperatures[] = {372.0, 310.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 2);
    answer(&small, CUBICS);
    assert_string_equal(small_case_check(&small, 0)->title, "saturation at 36.85 degC, peng-robinson");
    assert_null(small_case_check(&small, 1));
    small_case_tear_down(&small);
}

static void states_below_the_published_limit_and_the_triple_point_are_warned_of_once(void **state)
{
    (void)state;
    const double temperatures[] = {84.3, 85.1, 120.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_SATURATION);
    small.sheet.temperatures = sweep(temperatures, 3);
    answer(&small, REFERENCE);
    assert_int_equal(warnings_of(&small, CODE_W300), 1);
    assert_int_equal(warnings_of(&small, CODE_W350), 2); /* one for each method */
    const struct table *line = small_case_table(&small, 0);
    assert_true(small_case_cell(line, 1, "pressure")->is_outside_range);
    assert_false(small_case_cell(line, 2, "pressure")->is_outside_range);
    assert_string_equal(small_case_cell(line, 0, "state")->text, "undercooled liquid");
    small_case_tear_down(&small);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_are_the_saturations_at_exactly_the_swept_temperatures),
        cmocka_unit_test(sublimation_heat_agrees_with_the_slope_of_the_line),
        cmocka_unit_test(latent_heat_agrees_with_the_slope_of_the_line),
        cmocka_unit_test(the_evidence_shows_equal_fugacities_and_consistent_compressibilities),
        cmocka_unit_test(a_temperature_above_the_critical_one_is_a_row_of_words),
        cmocka_unit_test(a_pressure_sweep_gives_boiling_temperatures),
        cmocka_unit_test(the_method_beside_is_compared_with_the_lead),
        cmocka_unit_test(a_method_without_liquid_is_told_in_a_note),
        cmocka_unit_test(the_iteration_is_a_chain_of_corrections_that_ends_at_the_line),
        cmocka_unit_test(an_iteration_near_the_critical_point_says_that_it_has_not_ended),
        cmocka_unit_test(one_point_is_worked_by_hand_at_the_lead),
        cmocka_unit_test(states_below_the_published_limit_and_the_triple_point_are_warned_of_once),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
