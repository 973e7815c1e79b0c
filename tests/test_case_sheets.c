/* Elaboration of sheets: methods, sweeps, rules, requirements and their formulas, listed entries. */
#include "support/elaborated.h"

#include <math.h>

#define VESSEL           "vessel v { water-capacity 50.2 L; test-pressure 250 barg; working-pressure 150 barg }\n"
#define SATURATION(rest) "use \"small\"\nsheet saturation { fluid carbon-dioxide; sweep temperature 280 K; " rest " }\n"

static const struct case_sheet *first_sheet(const struct elaborated *it)
{
    return &it->tree->sheets[0];
}

/* ---- Methods ---- */

static void the_reference_equation_leads_by_default_where_there_is_one(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(SATURATION(""));
    const struct case_methods *methods = &first_sheet(&it)->methods;
    assert_int_equal(methods->count, 1);
    assert_string_equal(methods->names[0], "reference");
    assert_string_equal(methods->reason, "no methods block: the published reference equation of carbon-dioxide leads");
    assert_int_equal(methods->govern, GOVERN_LEAD);
    elaborated_end(&it);
}

static void peng_robinson_leads_by_default_where_there_is_none(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("use \"small\"\nsheet saturation { fluid argon; sweep temperature 100 K }\n");
    const struct case_methods *methods = &first_sheet(&it)->methods;
    assert_string_equal(methods->names[0], "peng-robinson");
    assert_non_null(strstr(methods->reason, "no reference equation of argon"));
    elaborated_end(&it);
}

static void the_methods_block_orders_lead_beside_and_show(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("methods { show ideal-gas; beside soave-redlich-kwong, peng-robinson; lead reference\n"
                       "  govern strictest }\n" SATURATION(""));
    const struct case_methods *methods = &first_sheet(&it)->methods;
    const char *const names[] = {"reference", "soave-redlich-kwong", "peng-robinson", "ideal-gas"};
    assert_int_equal(methods->count, 4);
    for (size_t i = 0; i < 4; i++) {
        assert_string_equal(methods->names[i], names[i]);
    }
    assert_int_equal(methods->may_govern, 3);
    assert_int_equal(methods->govern, GOVERN_STRICTEST);
    elaborated_end(&it);
}

static void a_sheets_methods_stand_instead_of_the_blocks(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("methods { lead reference; govern strictest }\n" SATURATION("methods peng-robinson, ideal-gas"));
    const struct case_methods *methods = &first_sheet(&it)->methods;
    assert_int_equal(methods->count, 2);
    assert_string_equal(methods->names[0], "peng-robinson");
    assert_int_equal(methods->may_govern, 2);
    assert_int_equal(methods->govern, GOVERN_STRICTEST);
    elaborated_end(&it);
}

static void a_method_without_its_data_is_refused(void **state)
{
    (void)state;
    assert_refused("use \"small\"\nsheet saturation { fluid argon; sweep temperature 100 K; methods reference }\n",
                   CODE_E220);
    assert_refused("use \"small\"\nsheet saturation { fluid vapid; sweep temperature 100 K }\n", CODE_E220);
    assert_refused(
        "use \"small\"\nmethods { lead reference }\nsheet saturation { fluid argon; sweep temperature 100 K }\n",
        CODE_E220);
}

static void a_method_that_is_the_default_lead_stands_once(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("methods { beside reference; show peng-robinson }\n" SATURATION(""));
    const struct case_methods *methods = &first_sheet(&it)->methods;
    assert_int_equal(methods->count, 2);
    assert_int_equal(methods->may_govern, 1);
    assert_string_equal(methods->names[1], "peng-robinson");
    elaborated_end(&it);
}

/* ---- Sweeps ---- */

static void a_sweep_is_laid_out_in_si(void **state)
{
    (void)state;
    static const struct {
        const char *written;
        size_t count;
        double first, last;
        const char *unit, *source;
    } rows[] = {
        {"from -40 degC to 65 degC by 5 K", 22, 233.15, 338.15, "degC", "21 steps of 5 K"},
        {"from 0 degC to 12 degC by 5 K", 3, 273.15, 283.15, "degC", "the end is off the grid"},
        {"from 300 K to 290 K by -2.5 K", 5, 300.0, 290.0, "K", "4 steps down"},
        {"from 220 K to 300 K in 8 steps", 9, 220.0, 300.0, "K", "8 parts, 9 values"},
        {"from 0.1 K to 0.7 K by 0.1 K", 7, 0.1, 0.7, "K", "0.1 is no binary fraction; the end is met all the same"},
        {"280 K, 300 K, 290 K", 3, 280.0, 290.0, "K", "a list keeps its order"},
        {"59 degF", 1, 288.15, 288.15, "degF", "(59 + 459.67) 5/9"},
        {"from 290 K to 290 K by 1 K", 1, 290.0, 290.0, "K", "one point"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        char text[500];
        snprintf(text, sizeof text, "use \"small\"\nsheet saturation { fluid carbon-dioxide; sweep temperature %s }\n",
                 rows[i].written);
        struct elaborated it = elaborate_well(text);
        const struct case_sweep *sweep = &first_sheet(&it)->temperatures;
        assert_true(sweep->given);
        assert_int_equal(sweep->count, rows[i].count);
        assert_close(sweep->values[0], rows[i].first, 1e-14, rows[i].source);
        assert_close(sweep->values[sweep->count - 1], rows[i].last, 1e-14, rows[i].source);
        assert_string_equal(sweep->shown.symbol, rows[i].unit);
        elaborated_end(&it);
    }
}

/* Each value is the number that its decimal, as anybody would write it, is read as: bit by bit, not nearly. */
static void swept_values_are_the_decimals_meant(void **state)
{
    (void)state;
    static const struct {
        const char *written;
        double first, step; /* of the decimals, in thousandths: whole numbers, so that k / 1000 is rounded once */
        size_t count;
    } rows[] = {
        {"temperature from 250 K to 200 K by -5 K", 250000.0, -5000.0, 11},
        {"temperature from 250.3 K to 180 K by -0.1 K", 250300.0, -100.0, 704},
        {"temperature from 273.15 K to 310 K by 0.7 K", 273150.0, 700.0, 53},
        {"temperature from 300.1 K to 310.1 K in 1000 steps", 300100.0, 10.0, 1001},
        {"pressure from 100100 Pa to 100200 Pa by 0.1 Pa", 100100000.0, 100.0, 1001},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        char text[300];
        const bool is_pressure = rows[i].written[0] == 'p';
        snprintf(text, sizeof text, "use \"small\"\nsheet fugacity { fluid carbon-dioxide; sweep %s%s }\n",
                 rows[i].written, is_pressure ? "; sweep temperature 300 K" : "; sweep pressure 1 bara");
        struct elaborated it = elaborate_well(text);
        const struct case_sweep *sweep = is_pressure ? &first_sheet(&it)->pressures : &first_sheet(&it)->temperatures;
        assert_int_equal(sweep->count, rows[i].count);
        for (size_t k = 0; k < sweep->count; k++) {
            assert_close(sweep->values[k], (rows[i].first + (double)k * rows[i].step) / 1000.0, 0.0, "the decimal");
        }
        elaborated_end(&it);
    }
}

static void a_density_sweep_is_per_mass_or_per_amount_as_written(void **state)
{
    (void)state;
    static const char head[] =
        "use \"small\"\nsheet fugacity { fluid carbon-dioxide; sweep temperature 350 K; sweep density ";
    char text[500];
    snprintf(text, sizeof text, "%s from 0.1 kg/L to 0.3 kg/L by 100 kg/m3 }\n", head);
    struct elaborated mass = elaborate_well(text);
    assert_true(first_sheet(&mass)->densities.is_mass_density);
    assert_int_equal(first_sheet(&mass)->densities.count, 3);
    assert_close(first_sheet(&mass)->densities.values[1], 200.0, 1e-14, "0.2 kg/L");
    elaborated_end(&mass);
    snprintf(text, sizeof text, "%s 5 mol/L }\n", head);
    struct elaborated amount = elaborate_well(text);
    assert_false(first_sheet(&amount)->densities.is_mass_density);
    assert_close(first_sheet(&amount)->densities.values[0], 5000.0, 1e-15, "5 mol over 1 dm3");
    elaborated_end(&amount);
}

static void swept_gauge_pressures_count_from_the_ambient_pressure(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("case \"a\" { ambient-pressure 1 bara }\nuse \"small\"\n"
                                          "sheet fugacity { fluid carbon-dioxide; sweep temperature 350 K\n"
                                          "  sweep pressure from 0 barg to 20 barg by 10 bar }\n");
    const struct case_sweep *sweep = &first_sheet(&it)->pressures;
    assert_int_equal(sweep->count, 3);
    assert_close(sweep->values[0], 1e5, 1e-15, "0 barg at 1 bara");
    assert_close(sweep->values[2], 21e5, 1e-15, "20 barg at 1 bara");
    assert_string_equal(sweep->shown.symbol, "barg");
    assert_close(sweep->shown.offset, 1e5, 1e-15, "readings count from the ambient pressure");
    elaborated_end(&it);
}

static void the_iteration_is_shown_on_request(void **state)
{
    (void)state;
    struct elaborated plain = elaborate_well(SATURATION("show iteration"));
    assert_true(first_sheet(&plain)->show_iteration);
    assert_false(first_sheet(&plain)->iteration_at.given);
    elaborated_end(&plain);
    struct elaborated placed = elaborate_well(SATURATION("show iteration at 7 degC"));
    assert_close(first_sheet(&placed)->iteration_at.value, 280.15, 1e-15, "7 + 273.15");
    elaborated_end(&placed);
}

/* ---- Requirements ---- */

static double symbol_value(void *context, enum case_symbol symbol)
{
    (void)context;
    static const double values[SYMBOLS] = {[SYMBOL_TEST_PRESSURE] = 300e5,
                                           [SYMBOL_WORKING_PRESSURE] = 200e5,
                                           [SYMBOL_SERVICE_PRESSURE] = 0.0,
                                           [SYMBOL_LIQUID_DENSITY] = 700.0,
                                           [SYMBOL_DENSITY] = 650.0};
    return values[symbol];
}

static struct elaborated with_requirement(const char *requirement)
{
    char text[1000];
    snprintf(text, sizeof text,
             "use \"small\"\nlet margin = 10 bar\nlet gauge = 40 barg\nlet coldest = -25 degC\n" VESSEL
             "sheet settled-pressure { fluid carbon-dioxide; vessel v; mass 1 kg\n"
             "  sweep temperature 15 degC; require %s }\n",
             requirement);
    return elaborate_well(text);
}

static void a_bound_is_arithmetic_over_numbers_and_the_vessels_ratings(void **state)
{
    (void)state;
    static const struct {
        const char *written;
        enum case_symbol quantity;
        enum relation relation;
        bool is_gauge;
        double value;
        const char *source;
    } rows[] = {
        {"at 15 degC pressure <= test-pressure", SYMBOL_PRESSURE, RELATION_AT_MOST, true, 300e5, "the rating"},
        {"at 15 degC pressure < 2 / 3 * test-pressure", SYMBOL_PRESSURE, RELATION_LESS, true, 200e5,
         "2/3 of 300 bar, scaled as gauge"},
        {"at 15 degC pressure <= test-pressure - margin", SYMBOL_PRESSURE, RELATION_AT_MOST, true, 290e5,
         "300 - 10 bar"},
        {"at 15 degC pressure <= (test-pressure - working-pressure) / 2", SYMBOL_PRESSURE, RELATION_AT_MOST, false,
         50e5, "the difference of two gauge pressures is plain"},
        {"at 15 degC pressure >= 0 barg", SYMBOL_PRESSURE, RELATION_AT_LEAST, true, 0.0, "no vacuum"},
        {"at 15 degC pressure >= -0.5 barg", SYMBOL_PRESSURE, RELATION_AT_LEAST, true, -5e4, "half a bar of vacuum"},
        {"at 15 degC pressure <= 2 * gauge", SYMBOL_PRESSURE, RELATION_AT_MOST, true, 80e5, "2 x 40 barg, as gauge"},
        {"at 15 degC pressure <= 55 bara", SYMBOL_PRESSURE, RELATION_AT_MOST, false, 55e5, "as written"},
        {"at 15 degC pressure >= 55 bar", SYMBOL_PRESSURE, RELATION_AT_LEAST, false, 55e5,
         "a plain pressure is absolute"},
        {"at 15 degC pressure <= -(0 - 1) * test-pressure", SYMBOL_PRESSURE, RELATION_AT_MOST, true, 300e5, "-(-1)"},
        {"at 50 degC density <= 0.95 * liquid-density", SYMBOL_DENSITY, RELATION_AT_MOST, false, 665.0, "0.95 x 700"},
        {"at 60 degC liquid-volume < 100 %", SYMBOL_LIQUID_VOLUME, RELATION_LESS, false, 1.0, "100/100"},
        {"filling-ratio <= 0.7", SYMBOL_FILLING_RATIO, RELATION_AT_MOST, false, 0.7, "as written"},
        {"at 50 degC liquid-density > density", SYMBOL_LIQUID_DENSITY, RELATION_GREATER, false, 650.0, "the symbol"},
        {"at 15 degC vapour-pressure <= 26 bara", SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST, false, 26e5, "as written"},
        {"at 15 degC pressure <= test-pressure / (test-pressure / working-pressure)", SYMBOL_PRESSURE, RELATION_AT_MOST,
         true, 200e5, "a ratio of gauge pressures is a number"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct elaborated it = with_requirement(rows[i].written);
        const struct predicate *predicate = &first_sheet(&it)->requirements[0];
        assert_int_equal(predicate->kind, PREDICATE_COMPARE);
        assert_int_equal(predicate->quantity, rows[i].quantity);
        assert_int_equal(predicate->relation, rows[i].relation);
        assert_int_equal(predicate->bound_is_gauge, rows[i].is_gauge);
        assert_close(formula_value(predicate->bound, symbol_value, NULL), rows[i].value, 1e-14, rows[i].source);
        assert_string_equal(predicate->written, rows[i].written);
        elaborated_end(&it);
    }
}

static void a_division_by_a_rating_of_zero_is_no_number(void **state)
{
    (void)state;
    const struct formula one = {.kind = FORMULA_NUMBER, .number = 1.0};
    const struct formula none = {.kind = FORMULA_SYMBOL, .symbol = SYMBOL_SERVICE_PRESSURE};
    const struct formula ratio = {.kind = FORMULA_DIVIDE, .left = &one, .right = &none};
    const double value = formula_value(&ratio, symbol_value, NULL);
    assert_true(isnan(value));
    assert_true(formula_mentions(&ratio, SYMBOL_SERVICE_PRESSURE));
    assert_false(formula_mentions(&ratio, SYMBOL_TEST_PRESSURE));
}

static void a_requirement_holds_at_a_point_over_a_range_or_at_every_swept_temperature(void **state)
{
    (void)state;
    struct elaborated point = with_requirement("at 65 degC one phase");
    const struct predicate *at = &first_sheet(&point)->requirements[0];
    assert_int_equal(at->kind, PREDICATE_ONE_PHASE);
    assert_true(at->has_temperature);
    assert_close(at->to, 338.15, 1e-15, "65 + 273.15");
    elaborated_end(&point);

    struct elaborated range = with_requirement("no liquid from coldest to 50 degC");
    const struct predicate *over = &first_sheet(&range)->requirements[0];
    assert_int_equal(over->kind, PREDICATE_NO_LIQUID);
    assert_close(over->from, 248.15, 1e-15, "-25 + 273.15");
    assert_close(over->to, 323.15, 1e-15, "50 + 273.15");
    assert_string_equal(over->temperature_unit.symbol, "degC");
    elaborated_end(&range);

    struct elaborated swept = with_requirement("pressure <= test-pressure");
    assert_false(first_sheet(&swept)->requirements[0].has_temperature);
    elaborated_end(&swept);
}

static void the_zero_of_gauges_can_be_stated(void **state)
{
    (void)state;
    struct elaborated it = with_requirement("at 25 degC vapour-pressure <= test-pressure gauge-zero 1 bara");
    const struct predicate *stated = &first_sheet(&it)->requirements[0];
    assert_true(stated->bound_is_gauge && stated->states_gauge_zero);
    assert_close(stated->gauge_zero, 1e5, 1e-15, "as written");
    elaborated_end(&it);
    it = with_requirement("at 15 degC pressure <= test-pressure");
    assert_close(first_sheet(&it)->requirements[0].gauge_zero, 101325.0, 1e-15, "the standard atmosphere");
    assert_false(first_sheet(&it)->requirements[0].states_gauge_zero);
    elaborated_end(&it);
}

/* ---- Rules and entries ---- */

static void a_rule_is_read_with_its_clause_and_conditions(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("use \"small\"\n" VESSEL "source plant \"works rule 7\"\n"
                       "rule own { title \"t\"; clause \"7\"; edition \"2\"; ref plant; class compressed; round 0.005\n"
                       "  gauge-zero 1 bara\n"
                       "  at 65 degC pressure <= test-pressure\n"
                       "  at 60 degC pressure <= test-pressure gauge-zero 1.01 bara\n"
                       "  from -20 degC to 50 degC no liquid\n"
                       "  filling-ratio <= 0.7 }\n"
                       "sheet permissible-charge { fluid carbon-dioxide; vessel v; rules own }\n");
    const struct case_rule *rule = first_sheet(&it)->rules[0];
    assert_string_equal(rule->title, "t");
    assert_string_equal(rule->clause, "7");
    assert_string_equal(rule->edition, "2");
    assert_string_equal(rule->source->citation, "works rule 7");
    assert_int_equal(rule->meant_for, CLASS_COMPRESSED);
    assert_close(rule->round_to, 0.005, 1e-15, "as written");
    assert_int_equal(rule->predicate_count, 4);
    assert_close(rule->predicates[0].gauge_zero, 1e5, 1e-15, "the rule's");
    assert_close(rule->predicates[1].gauge_zero, 1.01e5, 1e-15, "the condition's own");
    assert_string_equal(rule->predicates[2].written, "from -20 degC to 50 degC no liquid");
    assert_false(rule->predicates[3].has_temperature);
    assert_string_equal(rule->predicates[3].written, "filling-ratio <= 0.7");
    elaborated_end(&it);
}

static void a_library_rule_brings_its_source_and_its_default_rounding(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("use \"small\"\n" VESSEL
                                          "sheet permissible-charge \"how far?\" { fluid carbon-dioxide; vessel v\n"
                                          "  rules liquefied-high-pressure; quote pressure at 15 degC, 21 degC\n"
                                          "  listed check-governs; assessed \"HA-17\"; table \"a.csv\"; note \"n\"\n"
                                          "  sweep temperature 0 degC, 10 degC }\n");
    const struct case_sheet *sheet = first_sheet(&it);
    assert_string_equal(sheet->title, "how far?");
    assert_close(sheet->rules[0]->round_to, 0.01, 1e-15, "the default");
    assert_true(sheet->rules[0]->source->is_unverified);
    assert_true(sheet->rules[0]->predicates[0].unless_listed);
    assert_int_equal(sheet->rules[0]->origin.kind, ORIGIN_LIBRARY);
    assert_int_equal(sheet->quote_count, 2);
    assert_close(sheet->quotes[1], 294.15, 1e-15, "21 + 273.15");
    assert_int_equal(sheet->listed, LISTED_CHECK_GOVERNS);
    assert_string_equal(sheet->assessed, "HA-17");
    assert_string_equal(sheet->table_csv, "a.csv");
    assert_string_equal(sheet->notes[0], "n");
    assert_int_equal(sheet->temperatures.count, 2);
    elaborated_end(&it);
}

static void entries_for_the_fluid_are_attached_with_rows_by_rising_pressure(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("use \"small\"\n" VESSEL "entry \"own\" { fluid carbon-dioxide; lc50 760 ppm; letters \"k, o\"; "
                       "listed-fill 100 barg working-pressure 30 barg\n"
                       "  limit at 70 degC vapour-pressure <= 26 bara }\n"
                       "entry \"other\" { fluid argon; listed-fill 100 barg filling-ratio 0.5 }\n"
                       "sheet permissible-charge { fluid carbon-dioxide; vessel v; rules liquefied-high-pressure }\n");
    const struct case_sheet *sheet = first_sheet(&it);
    assert_int_equal(sheet->entry_count, 2);
    const struct case_entry *listed = sheet->entries[0];
    assert_string_equal(listed->name, "UN 1013");
    assert_ptr_equal(listed->component, it.tree->components[0]);
    assert_false(listed->is_never_exceeded);
    assert_int_equal(listed->row_count, 2);
    assert_close(listed->rows[0].test_pressure, 190e5, 1e-15, "the lower one, though written second");
    assert_close(listed->rows[1].filling_ratio.value, 0.76, 1e-15, "as written");
    const struct case_entry *own = sheet->entries[1];
    assert_true(own->is_never_exceeded);
    assert_close(own->lc50.value, 760e-6, 1e-15, "760 ppm");
    assert_close(own->rows[0].working_pressure.value, 30e5, 1e-15, "30 barg as gauge");
    assert_false(own->rows[0].filling_ratio.given);
    assert_int_equal(own->limit_count, 1);
    assert_string_equal(own->limits[0].written, "at 70 degC vapour-pressure <= 26 bara");
    elaborated_end(&it);
}

static void a_sheets_units_stand_before_the_cases(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("case \"u\" { units psig, K }\n" SATURATION("units degF"));
    assert_string_equal(first_sheet(&it)->units.temperature.symbol, "degF");
    assert_string_equal(first_sheet(&it)->units.gauge.symbol, "psig");
    assert_string_equal(first_sheet(&it)->units.pressure.symbol, "bara");
    elaborated_end(&it);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_reference_equation_leads_by_default_where_there_is_one),
        cmocka_unit_test(peng_robinson_leads_by_default_where_there_is_none),
        cmocka_unit_test(the_methods_block_orders_lead_beside_and_show),
        cmocka_unit_test(a_sheets_methods_stand_instead_of_the_blocks),
        cmocka_unit_test(a_method_without_its_data_is_refused),
        cmocka_unit_test(a_method_that_is_the_default_lead_stands_once),
        cmocka_unit_test(a_sweep_is_laid_out_in_si),
        cmocka_unit_test(swept_values_are_the_decimals_meant),
        cmocka_unit_test(a_density_sweep_is_per_mass_or_per_amount_as_written),
        cmocka_unit_test(swept_gauge_pressures_count_from_the_ambient_pressure),
        cmocka_unit_test(the_iteration_is_shown_on_request),
        cmocka_unit_test(a_bound_is_arithmetic_over_numbers_and_the_vessels_ratings),
        cmocka_unit_test(a_division_by_a_rating_of_zero_is_no_number),
        cmocka_unit_test(a_requirement_holds_at_a_point_over_a_range_or_at_every_swept_temperature),
        cmocka_unit_test(the_zero_of_gauges_can_be_stated),
        cmocka_unit_test(a_rule_is_read_with_its_clause_and_conditions),
        cmocka_unit_test(a_library_rule_brings_its_source_and_its_default_rounding),
        cmocka_unit_test(entries_for_the_fluid_are_attached_with_rows_by_rising_pressure),
        cmocka_unit_test(a_sheets_units_stand_before_the_cases),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
