/* The settled-pressure sheet: pressures over temperature, found temperatures, rises, requirements. */
#include "support/check.h"
#include "support/filled_vessel.h"
#include "support/result_reading.h"

#include "filling/found_temperatures.h"
#include "filling/sensitivities.h"

#include <math.h>

static const double TEMPERATURES[] = {338.15, 253.15, 288.15, 303.15};

/* Twenty kilograms of the fixture's gas, swept over four temperatures. */
static struct filled_vessel *set_up_charge(enum fill_kind kind, double amount)
{
    struct filled_vessel *it = filled_vessel_create();
    it->charge = (struct case_charge){.name = "lot",
                                      .fluid = &it->fluid,
                                      .vessel = &it->vessel,
                                      .kind = kind,
                                      .amount = given(amount),
                                      .temperature = 293.15};
    it->sheet.kind = SHEET_SETTLED_PRESSURE;
    it->sheet.charge = &it->charge;
    it->sheet.temperatures = (struct case_sweep){.given = true, .count = 4, .values = TEMPERATURES};
    return it;
}

static const struct result_sheet *answer(struct filled_vessel *it)
{
    answer_settled_pressure(&it->run);
    return it->run.out;
}

static double ideal_pressure(double mass, double temperature)
{
    return mass / 0.0440098 * GAS_CONSTANT * temperature / 0.0502;
}

static double fact_value(const struct result_sheet *sheet, const char *name, const char *method)
{
    const struct fact *fact = result_fact(sheet, name, method);
    assert_non_null(fact);
    return fact->value;
}

/* ---- ideal gas: closed forms ------------------------------------------------------------------------------------- */

static void rows_are_sorted_and_follow_the_gas_law(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 7.3);
    filled_vessel_method(it, "ideal-gas");
    const struct table *table = result_table(answer(it), "settled pressure", "ideal-gas");
    static const double rising[] = {253.15, 288.15, 303.15, 338.15};
    assert_int_equal(table->row_count, 4);
    for (size_t i = 0; i < 4; i++) {
        const double pressure = ideal_pressure(7.3, rising[i]);
        assert_close(result_cell(table, i, "temperature")->number, rising[i], 0.0, "as swept");
        assert_close(result_cell(table, i, "pressure")->number, pressure, 1e-14, "n R T / V");
        assert_close(result_cell(table, i, "gauge-pressure")->number, pressure, 1e-14, "absolute in SI");
        assert_close(result_cell(table, i, "margin")->number, 250.0 * BAR + GAUGE_ZERO - pressure, 1e-12,
                     "test pressure less gauge pressure");
        assert_string_equal(result_cell(table, i, "state")->text, "gas");
        assert_int_equal(result_cell(table, i, "liquid-volume")->kind, CELL_EMPTY);
    }
    arena_free(it->arena);
}

static void a_vessel_marked_with_its_service_pressure_alone_is_held_against_that(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 7.3);
    it->vessel.test_pressure.given = false;
    it->vessel.service_pressure = given(123.0 * BAR);
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    const struct table *table = result_table(sheet, "settled pressure", "ideal-gas");
    assert_close(result_cell(table, 1, "margin")->number, 123.0 * BAR + GAUGE_ZERO - ideal_pressure(7.3, 288.15), 1e-12,
                 "service pressure less gauge pressure");
    assert_close(fact_value(sheet, "service-pressure-temperature", "ideal-gas"),
                 288.15 * (123.0 * BAR + GAUGE_ZERO) / ideal_pressure(7.3, 288.15), 1e-9, "p / T is constant");
    arena_free(it->arena);
}

static void the_temperature_at_a_rating_is_that_of_the_gas_law(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 17.0);
    it->vessel.working_pressure = given(190.0 * BAR);
    it->vessel.test_pressure = given(240.0 * BAR);
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    const double per_kelvin = ideal_pressure(17.0, 1.0);
    assert_close(fact_value(sheet, "test-pressure-temperature", "ideal-gas"), (240.0 * BAR + GAUGE_ZERO) / per_kelvin,
                 1e-9, "p V / (n R)");
    assert_close(fact_value(sheet, "working-pressure-temperature", "ideal-gas"),
                 (190.0 * BAR + GAUGE_ZERO) / per_kelvin, 1e-9, "p V / (n R)");
    arena_free(it->arena);
}

static void a_rating_out_of_reach_is_told_in_words(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 2.0);
    filled_vessel_method(it, "ideal-gas");
    const struct fact *fact = result_fact(answer(it), "test-pressure-temperature", "ideal-gas");
    assert_string_equal(fact->text, "not reached up to 200 degC");
    arena_free(it->arena);
}

static void the_weakest_fitting_is_named(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 9.0);
    const struct case_rating fittings[] = {{.name = "hose", .pressure = given(120.0 * BAR)},
                                           {.name = "gauge", .pressure = given(110.0 * BAR)}};
    it->vessel.fittings = fittings;
    it->vessel.fitting_count = 2;
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    assert_close(fact_value(sheet, "lowest-fitting-temperature", NULL),
                 (110.0 * BAR + GAUGE_ZERO) / ideal_pressure(9.0, 1.0), 1e-9, "p V / (n R) of the lower rating");
    const struct requirement *hose = result_requirement(sheet, "hose");
    assert_close(hose->margin, 120.0 * BAR + GAUGE_ZERO - ideal_pressure(9.0, 288.15), 1e-12,
                 "rating less the settled pressure at 15 degC");
    assert_non_null(result_requirement(sheet, "gauge"));
    arena_free(it->arena);
}

static void rises_are_whole_steps(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 7.3);
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    const double pressure = ideal_pressure(7.3, 338.15);
    assert_close(fact_value(sheet, "rise-per-kelvin", "ideal-gas"), pressure / 338.15, 1e-10, "n R / V");
    assert_close(fact_value(sheet, "rise-per-percent-of-charge", "ideal-gas"), 0.01 * pressure, 1e-10, "one per cent");
    assert_close(fact_value(sheet, "rise-per-bar-of-fill", "ideal-gas"), 338.15 / 288.15 * BAR, 1e-10,
                 "1 bar at 15 degC, warmed");
    arena_free(it->arena);
}

static void a_fill_by_pressure_becomes_mass_and_sets_the_fill_point(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_PRESSURE, 150.0 * BAR);
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    assert_close(fact_value(sheet, "mass", NULL), 150.0 * BAR * 0.0502 / (GAS_CONSTANT * 293.15) * 0.0440098, 1e-13,
                 "p V M / (R T)");
    assert_close(fact_value(sheet, "rise-per-bar-of-fill", NULL), 338.15 / 293.15 * BAR, 1e-9,
                 "1 bar at the fill temperature, warmed");
    arena_free(it->arena);
}

/* ---- requirements ------------------------------------------------------------------------------------------------ */

static void a_requirement_without_a_temperature_holds_over_the_sweep(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 20.0);
    struct predicate within = pressure_within_test(it, 0.0, 1.0);
    within.has_temperature = false;
    it->sheet.requirements = &within;
    it->sheet.requirement_count = 1;
    filled_vessel_method(it, "ideal-gas");
    const struct requirement *one = answer(it)->first_requirement;
    assert_close(one->worst_temperature, 338.15, 0.0, "the hot end");
    assert_close(one->margin, 250.0 * BAR + GAUGE_ZERO - ideal_pressure(20.0, 338.15), 1e-12, "closed form");
    assert_int_equal(one->state,
                     ideal_pressure(20.0, 338.15) - GAUGE_ZERO <= 250.0 * BAR ? REQUIREMENT_MET : REQUIREMENT_NOT_MET);
    arena_free(it->arena);
}

static void requirements_are_judged_by_the_lead_or_by_the_strictest(void **state)
{
    (void)state;
    for (int strictest = 0; strictest <= 1; strictest++) {
        struct filled_vessel *it = set_up_charge(FILL_MASS, 37.0);
        const struct predicate within = pressure_within_test(it, 338.15, 1.0);
        it->sheet.requirements = &within;
        it->sheet.requirement_count = 1;
        it->sheet.methods.govern = strictest ? GOVERN_STRICTEST : GOVERN_LEAD;
        filled_vessel_method(it, "peng-robinson");
        filled_vessel_method(it, "soave-redlich-kwong");
        const struct requirement *one = answer(it)->first_requirement;
        /* At this density Soave's equation gives the higher pressure and misses the test pressure. */
        assert_int_equal(one->state, strictest ? REQUIREMENT_NOT_MET : REQUIREMENT_MET);
        assert_string_equal(one->method, strictest ? "soave-redlich-kwong" : "peng-robinson");
        arena_free(it->arena);
    }
}

static void what_the_method_cannot_answer_is_undecided(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 20.0);
    const struct predicate dry = of_phases(PREDICATE_NO_LIQUID, 253.15, 303.15);
    it->sheet.requirements = &dry;
    it->sheet.requirement_count = 1;
    filled_vessel_method(it, "ideal-gas");
    assert_int_equal(answer(it)->first_requirement->state, REQUIREMENT_UNDECIDED);
    assert_int_equal(result_verdict(it->run.result), VERDICT_UNDECIDED);
    arena_free(it->arena);
}

/* ---- a cubic: phases and their ends ------------------------------------------------------------------------------ */

static void level_and_ullage_make_up_the_vessel(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 30.0);
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct table *table = result_table(answer(it), "settled pressure", "peng-robinson");
    struct saturation saturation;
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 253.15), ANSWER_OK);
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    const double amount = 30.0 / 0.0440098;
    const double level = saturation.liquid_volume * (amount - 0.0502 / saturation.vapour_volume) /
                         (1.0 - saturation.liquid_volume / saturation.vapour_volume) / 0.0502;
    assert_close(result_cell(table, 0, "liquid-volume")->number, level, 1e-10, "lever rule, written the other way");
    assert_close(result_cell(table, 0, "ullage")->number, 1.0 - level, 1e-10, "the rest");
    assert_close(result_cell(table, 0, "pressure")->number, saturation.pressure, 1e-12, "the saturation pressure");
    arena_free(it->arena);
}

static void liquid_ends_where_a_saturated_density_is_the_vessels(void **state)
{
    (void)state;
    static const struct {
        double mass;
        enum liquid_end end;
    } cases[] = {{38.0, LIQUID_END_FULL}, {3.0, LIQUID_END_DRY}, {0.2, LIQUID_END_BELOW}};
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct filled_vessel *it = filled_vessel_create();
        struct method_run *method = filled_vessel_method(it, "peng-robinson");
        const struct liquid_end_found found = find_liquid_end(&it->run, method, cases[i].mass);
        assert_int_equal(found.end, cases[i].end);
        if (found.end != LIQUID_END_BELOW) {
            struct saturation saturation;
            assert_int_equal(fluid_set_t(method->at_t, method->fluid, found.temperature), ANSWER_OK);
            assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
            const double saturated = found.end == LIQUID_END_FULL ? saturation.liquid_volume : saturation.vapour_volume;
            assert_close(saturated, 0.0502 * 0.0440098 / cases[i].mass, 1e-7, "the vessel's molar volume");
        }
        arena_free(it->arena);
    }
}

static void a_vessel_at_the_critical_density_keeps_two_phases_to_the_critical_point(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const double mass = 0.0502 * 0.0440098 / method->critical.molar_volume;
    const struct liquid_end_found found = find_liquid_end(&it->run, method, mass);
    assert_int_equal(found.end, LIQUID_END_CRITICAL);
    assert_close(found.temperature, 304.1282, 1e-12, "the critical temperature given");
    arena_free(it->arena);
}

static void a_method_without_liquid_has_no_end_of_it(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "ideal-gas");
    assert_int_equal(find_liquid_end(&it->run, method, 10.0).end, LIQUID_END_UNKNOWN);
    arena_free(it->arena);
}

static void a_pressure_reached_is_that_pressure(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "soave-redlich-kwong");
    static const double pressures[] = {20.0 * BAR, 60.0 * BAR, 199.0 * BAR};
    for (size_t i = 0; i < sizeof pressures / sizeof *pressures; i++) {
        double temperature;
        struct contents contents;
        assert_int_equal(find_temperature_of_pressure(&it->run, method, 30.0, pressures[i], &temperature), ANSWER_OK);
        assert_int_equal(contents_at(&it->run, method, 30.0, temperature, &contents), ANSWER_OK);
        assert_close(contents.pressure, pressures[i], 1e-7, "found again at that temperature");
    }
    double temperature;
    assert_int_equal(find_temperature_of_pressure(&it->run, method, 30.0, 1e3, &temperature), ANSWER_NO_SUCH_ROOT);
    assert_close(temperature, 216.592, 1e-12, "the cold end of the range: the triple point");
    arena_free(it->arena);
}

static void a_low_pressure_gas_that_goes_liquid_full_is_warned_of(void **state)
{
    (void)state;
    for (int is_low = 0; is_low <= 1; is_low++) {
        struct filled_vessel *it = set_up_charge(FILL_MASS, 38.0);
        if (is_low) {
            /* As if the critical temperature were above 65 degC; the method keeps its own. */
            it->component.critical_temperature.value = 339.0;
        }
        filled_vessel_method(it, "peng-robinson");
        answer(it);
        assert_int_equal(result_warnings(it->run.result, CODE_W330), is_low);
        arena_free(it->arena);
    }
}

static void below_the_triple_point_is_warned_of_once(void **state)
{
    (void)state;
    static const double cold[] = {210.0, 214.0, 220.0};
    struct filled_vessel *it = set_up_charge(FILL_MASS, 20.0);
    it->sheet.temperatures = (struct case_sweep){.given = true, .count = 3, .values = cold};
    filled_vessel_method(it, "peng-robinson");
    answer(it);
    assert_int_equal(result_warnings(it->run.result, CODE_W350), 1);
    arena_free(it->arena);
}

static void a_charge_denser_than_the_method_knows_has_no_answer(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 90.0);
    filled_vessel_method(it, "peng-robinson");
    const struct table *table = result_table(answer(it), "settled pressure", NULL);
    assert_string_equal(result_cell(table, 0, "state")->text, "no answer");
    assert_true(it->run.result->is_undecided);
    arena_free(it->arena);
}

static void every_method_has_its_table_and_the_lead_writes_the_file(void **state)
{
    (void)state;
    struct filled_vessel *it = set_up_charge(FILL_MASS, 20.0);
    it->sheet.table_csv = "lot.csv";
    filled_vessel_method(it, "peng-robinson");
    filled_vessel_method(it, "ideal-gas");
    const struct result_sheet *sheet = answer(it);
    assert_string_equal(result_table(sheet, "settled pressure", "peng-robinson")->csv, "lot.csv");
    assert_null(result_table(sheet, "settled pressure", "ideal-gas")->csv);
    arena_free(it->arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_are_sorted_and_follow_the_gas_law),
        cmocka_unit_test(a_vessel_marked_with_its_service_pressure_alone_is_held_against_that),
        cmocka_unit_test(the_temperature_at_a_rating_is_that_of_the_gas_law),
        cmocka_unit_test(a_rating_out_of_reach_is_told_in_words),
        cmocka_unit_test(the_weakest_fitting_is_named),
        cmocka_unit_test(rises_are_whole_steps),
        cmocka_unit_test(a_fill_by_pressure_becomes_mass_and_sets_the_fill_point),
        cmocka_unit_test(a_requirement_without_a_temperature_holds_over_the_sweep),
        cmocka_unit_test(requirements_are_judged_by_the_lead_or_by_the_strictest),
        cmocka_unit_test(what_the_method_cannot_answer_is_undecided),
        cmocka_unit_test(level_and_ullage_make_up_the_vessel),
        cmocka_unit_test(liquid_ends_where_a_saturated_density_is_the_vessels),
        cmocka_unit_test(a_vessel_at_the_critical_density_keeps_two_phases_to_the_critical_point),
        cmocka_unit_test(a_method_without_liquid_has_no_end_of_it),
        cmocka_unit_test(a_pressure_reached_is_that_pressure),
        cmocka_unit_test(a_low_pressure_gas_that_goes_liquid_full_is_warned_of),
        cmocka_unit_test(below_the_triple_point_is_warned_of_once),
        cmocka_unit_test(a_charge_denser_than_the_method_knows_has_no_answer),
        cmocka_unit_test(every_method_has_its_table_and_the_lead_writes_the_file),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
