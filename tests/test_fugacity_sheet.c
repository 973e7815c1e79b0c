/* The sheet `fugacity` over a case built by hand, against direct calls of the property layer and identities. */
#include "support/check.h"
#include "support/small_case.h"

#include <math.h>
#include <string.h>

static const char *const ALL[] = {"reference", "peng-robinson", "ideal-gas", NULL};

static struct case_sweep sweep(const double *values, size_t count)
{
    return (struct case_sweep){.given = true, .count = count, .values = values, .shown = {"K", 1.0, 0.0}};
}

static double number(const struct table *table, size_t row, const char *column)
{
    const struct cell *cell = small_case_cell(table, row, column);
    assert_int_equal(cell->kind, CELL_NUMBER);
    return cell->number;
}

static const char *words(const struct table *table, size_t row)
{
    return small_case_cell(table, row, "state")->text;
}

static void assert_consistent(const struct table *table, size_t row, double R, const char *what)
{
    const double T = number(table, row, "temperature"), p = number(table, row, "pressure");
    const double rho = number(table, row, "molar-density");
    assert_close(number(table, row, "density"), rho * 0.04409562, 1e-14, what);
    assert_close(number(table, row, "compressibility-factor"), p / (rho * R * T), 1e-12, what);
    assert_close(number(table, row, "fugacity-coefficient"), exp(number(table, row, "ln-fugacity-coefficient")), 1e-14,
                 what);
    assert_close(number(table, row, "fugacity"), p * number(table, row, "fugacity-coefficient"), 1e-14, what);
}

static void states_over_temperature_and_pressure_are_named_and_consistent(void **state)
{
    (void)state;
    const double temperatures[] = {290.3, 381.0}, pressures[] = {1e5, 2.1e6, 6.3e6};
    const char *const expected[] = {"vapour", "liquid", "liquid", "supercritical", "supercritical", "supercritical"};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 2);
    small.sheet.pressures = sweep(pressures, 3);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    for (size_t m = 0; m < 3; m++) {
        const struct table *table = small_case_table(&small, m);
        assert_string_equal(table->method, ALL[m]);
        assert_int_equal(table->row_count, 6);
        for (size_t i = 0; i < 6; i++) {
            assert_close(number(table, i, "temperature"), temperatures[i / 3], 0.0, "as swept");
            assert_close(number(table, i, "pressure"), pressures[i % 3], 0.0, "as swept");
            assert_string_equal(words(table, i), m == 2 ? "gas" : expected[i]);
            assert_consistent(table, i, small.methods[m].fluid->gas_constant, ALL[m]);
        }
    }
    small_case_tear_down(&small);
}

static void rows_are_the_phase_at_exactly_the_temperature_and_density_asked_for(void **state)
{
    (void)state;
    const double temperatures[] = {343.7, 512.9}, densities[] = {17.0, 13400.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 2);
    small.sheet.densities = sweep(densities, 2);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const double one = 1.0;
    for (size_t m = 0; m < 2; m++) {
        const struct table *table = small_case_table(&small, m);
        struct method_run *method = &small.methods[m];
        for (size_t i = 0; i < 4; i++) {
            if (small_case_cell(table, i, "compressibility-factor")->kind == CELL_EMPTY) {
                assert_string_equal(words(table, i), "beyond the densities of the method"); /* beyond the covolume */
                continue;
            }
            struct pure_arrays arrays;
            struct phase phase;
            phase_of_pure(&phase, &arrays);
            assert_int_equal(fluid_set_t(method->at_t, method->fluid, temperatures[i / 2]), ANSWER_OK);
            assert_int_equal(phase_tv(method->at_t, 1.0 / densities[i % 2], &one, PHASE_LN_PHI, &phase), ANSWER_OK);
            assert_close(number(table, i, "molar-density"), densities[i % 2], 0.0, "as swept");
            assert_close(number(table, i, "pressure"), phase.pressure, 1e-15, "phase_tv");
            assert_close(number(table, i, "ln-fugacity-coefficient"), arrays.ln_phi, 1e-15, "phase_tv");
            assert_consistent(table, i, method->fluid->gas_constant, ALL[m]);
        }
    }
    small_case_tear_down(&small);
}

static void densities_by_mass_are_kept_as_written(void **state)
{
    (void)state;
    const double temperatures[] = {300.0}, densities[] = {1.7, 531.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.densities = sweep(densities, 2);
    small.sheet.densities.is_mass_density = true;
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const struct table *table = small_case_table(&small, 0);
    for (size_t i = 0; i < 2; i++) {
        assert_close(number(table, i, "density"), densities[i], 0.0, "as swept");
        assert_close(number(table, i, "molar-density"), densities[i] / 0.04409562, 1e-15, "rho / M");
    }
    assert_string_equal(words(table, 0), "vapour");
    assert_string_equal(words(table, 1), "liquid");
    small_case_tear_down(&small);
}

static void a_density_between_the_saturation_densities_shows_the_saturation_pressure_only(void **state)
{
    (void)state;
    const double temperatures[] = {300.0}, densities[] = {5000.0};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.densities = sweep(densities, 1);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const struct table *table = small_case_table(&small, 0);
    assert_string_equal(words(table, 0), "between the saturation densities");
    struct saturation saturation;
    struct method_run *method = &small.methods[0];
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 300.0), ANSWER_OK);
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    assert_close(number(table, 0, "pressure"), saturation.pressure, 1e-15, "saturation_at_t");
    const char *const empty[] = {"compressibility-factor", "fugacity-coefficient", "ln-fugacity-coefficient",
                                 "fugacity"};
    for (size_t i = 0; i < sizeof empty / sizeof *empty; i++) {
        assert_int_equal(small_case_cell(table, 0, empty[i])->kind, CELL_EMPTY);
    }
    assert_null(small_case_check(&small, 0));
    small_case_tear_down(&small);
}

static void the_ideal_gas_has_fugacity_equal_to_pressure_and_real_gases_approach_it(void **state)
{
    (void)state;
    const double temperatures[] = {300.0}, pressures[] = {1.0, 8e5};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.pressures = sweep(pressures, 2);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const struct table *ideal = small_case_table(&small, 2);
    assert_close(number(ideal, 1, "fugacity"), 8e5, 1e-15, "f = p, by definition");
    assert_close(number(ideal, 1, "molar-density"), 8e5 / (8.31446261815324 * 300.0), 1e-15, "p / (R T)");
    for (size_t m = 0; m < 2; m++) {
        assert_near(number(small_case_table(&small, m), 0, "ln-fugacity-coefficient"), 0.0, 3e-7,
                    "B p / (R T) with B about -400 cm3/mol at 1 Pa is -1.6e-7");
    }
    small_case_tear_down(&small);
}

static void the_method_beside_is_compared_by_fugacity(void **state)
{
    (void)state;
    const double temperatures[] = {300.0}, pressures[] = {8e5, 4e6};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.pressures = sweep(pressures, 2);
    small.sheet.table_csv = "f.csv";
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const struct table *lead = small_case_table(&small, 0), *beside = small_case_table(&small, 1);
    assert_int_equal(beside->column_count, lead->column_count + 1);
    assert_string_equal(lead->csv, "f.csv");
    assert_null(beside->csv);
    for (size_t i = 0; i < 2; i++) {
        assert_close(number(beside, i, "fugacity-deviation"),
                     number(beside, i, "fugacity") / number(lead, i, "fugacity") - 1.0, 1e-12, "ratio by hand");
    }
    small_case_tear_down(&small);
}

static void pressures_above_the_published_limit_are_marked_and_warned_of_once(void **state)
{
    (void)state;
    const double temperatures[] = {400.0}, pressures[] = {8e5, 1.2e9, 1.3e9};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.pressures = sweep(pressures, 3);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    const struct table *table = small_case_table(&small, 0);
    assert_false(small_case_cell(table, 0, "density")->is_outside_range);
    assert_true(small_case_cell(table, 1, "density")->is_outside_range);
    assert_int_equal(small.run.result->warnings.count, 1);
    assert_int_equal(small.run.result->warnings.items[0].code, CODE_W300);
    assert_string_equal(small.run.result->warnings.items[0].text,
                        "propane, reference: above the published limit of 10000 bara, first at 12000.00 bara");
    small_case_tear_down(&small);
}

static void a_method_that_lacks_data_leaves_the_others_their_tables(void **state)
{
    (void)state;
    const double temperatures[] = {300.0}, pressures[] = {8e5};
    struct small_case small;
    small_case_set_up(&small, SHEET_FUGACITY);
    small.pure.reference = NULL;
    small.sheet.temperatures = sweep(temperatures, 1);
    small.sheet.pressures = sweep(pressures, 1);
    small_case_start(&small, ALL);
    answer_fugacity(&small.run);
    assert_int_equal(small.methods[0].lack.lack, LACK_EQUATION);
    assert_true(small.run.result->is_undecided);
    assert_string_equal(small_case_table(&small, 0)->method, "peng-robinson");
    small_case_tear_down(&small);
}

/* ---- charges, which this sheet's fixture serves as well ---------------------------------------------------------- */

static void a_charge_becomes_mass_once(void **state)
{
    (void)state;
    const double V = 0.0793, M = 0.04409562;
    const struct {
        const char *name;
        enum fill_kind kind;
        double amount, expected;
    } cases[] = {
        {"mass", FILL_MASS, 31.7, 31.7},
        {"filling ratio, 999.1 kg/m3 of water", FILL_RATIO, 0.42, 0.42 * 999.1 * V},
        {"density", FILL_DENSITY, 417.0, 417.0 * V},
        {"moles", FILL_MOLES, 713.0, 713.0 * M},
    };
    struct small_case small;
    small_case_set_up(&small, SHEET_SETTLED_PRESSURE);
    small_case_start(&small, ALL);
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        double mass;
        small.charge.kind = cases[i].kind;
        small.charge.amount.value = cases[i].amount;
        assert_int_equal(charge_mass(&small.run, &small.charge, &mass), ANSWER_OK);
        assert_close(mass, cases[i].expected, 1e-15, cases[i].name);
    }
    small_case_tear_down(&small);
}

static void a_fill_by_pressure_settles_back_to_that_pressure(void **state)
{
    (void)state;
    const struct {
        double temperature, pressure;
        size_t warnings; /* a fill above saturation is a vessel full of liquid */
        enum vessel_state state;
    } cases[] = {
        {300.0, 7.3e5, 0, VESSEL_VAPOUR},
        {300.0, 22.9e5, 1, VESSEL_LIQUID_FULL},
        {380.0, 51.0e5, 0, VESSEL_SUPERCRITICAL},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct small_case small;
        small_case_set_up(&small, SHEET_SETTLED_PRESSURE);
        small.charge.kind = FILL_PRESSURE;
        small.charge.amount.value = cases[i].pressure;
        small.charge.temperature = cases[i].temperature;
        small_case_start(&small, ALL);
        double mass;
        struct contents contents;
        assert_int_equal(charge_mass(&small.run, &small.charge, &mass), ANSWER_OK);
        assert_int_equal(contents_at(&small.run, &small.methods[0], mass, cases[i].temperature, &contents), ANSWER_OK);
        assert_int_equal(contents.state, cases[i].state);
        assert_close(contents.pressure, cases[i].pressure, 1e-9, "the pressure it was filled to");
        assert_int_equal(small.run.result->warnings.count, cases[i].warnings);
        small_case_tear_down(&small);
    }
}

static void a_fill_by_volume_is_a_real_gas_volume(void **state)
{
    (void)state;
    const char *const methods[] = {"ideal-gas", NULL};
    struct small_case small;
    small_case_set_up(&small, SHEET_SETTLED_PRESSURE);
    small.charge.kind = FILL_VOLUME;
    small.charge.amount.value = 1.7;
    small.charge.temperature = 288.15;
    small.charge.pressure = 1e5;
    double ideal, real;
    small_case_start(&small, methods);
    assert_int_equal(charge_mass(&small.run, &small.charge, &ideal), ANSWER_OK);
    assert_close(ideal, 1.7 * 1e5 / (8.31446261815324 * 288.15) * 0.04409562, 1e-14, "M p V / (R T)");
    small_case_start(&small, ALL);
    assert_int_equal(charge_mass(&small.run, &small.charge, &real), ANSWER_OK);
    assert_in_range((int)(1000.0 * real / ideal), 1015, 1022); /* 1 / Z at 1 bar is about 1.018 */
    small_case_tear_down(&small);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(states_over_temperature_and_pressure_are_named_and_consistent),
        cmocka_unit_test(rows_are_the_phase_at_exactly_the_temperature_and_density_asked_for),
        cmocka_unit_test(densities_by_mass_are_kept_as_written),
        cmocka_unit_test(a_density_between_the_saturation_densities_shows_the_saturation_pressure_only),
        cmocka_unit_test(the_ideal_gas_has_fugacity_equal_to_pressure_and_real_gases_approach_it),
        cmocka_unit_test(the_method_beside_is_compared_by_fugacity),
        cmocka_unit_test(pressures_above_the_published_limit_are_marked_and_warned_of_once),
        cmocka_unit_test(a_method_that_lacks_data_leaves_the_others_their_tables),
        cmocka_unit_test(a_charge_becomes_mass_once),
        cmocka_unit_test(a_fill_by_pressure_settles_back_to_that_pressure),
        cmocka_unit_test(a_fill_by_volume_is_a_real_gas_volume),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
