/* The permissible-charge sheet: limits, rounding, listed rows, who governs, refusals. */
#include "support/check.h"
#include "support/filled_vessel.h"
#include "support/result_reading.h"

#include "filling/classify.h"
#include "filling/listed_ledger.h"
#include "filling/solve.h"

#include <math.h>

/* ---- a sheet with one rule --------------------------------------------------------------------------------------- */

struct bench {
    struct filled_vessel *it;
    struct predicate predicates[3];
    struct case_rule rule;
    const struct case_rule *rules[1];
    struct listed_row rows[3];
};

/* One rule for high-pressure liquefied gases: at 65 degC pressure <= test-pressure unless listed. */
static struct bench *set_up_bench(void)
{
    struct filled_vessel *it = filled_vessel_create();
    struct bench *bench = arena_alloc(it->arena, 1, sizeof *bench);
    bench->it = it;
    bench->predicates[0] = pressure_within_test(it, 338.15, 1.0);
    bench->predicates[0].unless_listed = true;
    bench->rule = (struct case_rule){.name = "hot-day",
                                     .meant_for = CLASS_HIGH_PRESSURE_LIQUEFIED,
                                     .round_to = 0.01,
                                     .predicate_count = 1,
                                     .predicates = bench->predicates};
    bench->rules[0] = &bench->rule;
    it->sheet.rule_count = 1;
    it->sheet.rules = bench->rules;
    return bench;
}

/* Rows at 190 barg and 250 barg, ratios as given. */
static void list_rows(struct bench *bench, double at_190, double at_250)
{
    struct filled_vessel *it = bench->it;
    bench->rows[0] = (struct listed_row){.test_pressure = 190.0 * BAR, .filling_ratio = {true, at_190}};
    bench->rows[1] = (struct listed_row){.test_pressure = 250.0 * BAR, .filling_ratio = {true, at_250}};
    it->entry =
        (struct case_entry){.name = "UN 1013", .component = &it->component, .row_count = 2, .rows = bench->rows};
    it->entries[0] = &it->entry;
    it->sheet.entry_count = 1;
    it->sheet.entries = it->entries;
}

static const struct result_sheet *answer(struct bench *bench)
{
    bench->it->sheet.methods.count = bench->it->run.method_count;
    answer_permissible_charge(&bench->it->run);
    return bench->it->run.out;
}

static void tear_down_bench(struct bench *bench)
{
    arena_free(bench->it->arena);
}

static double fact_value(const struct result_sheet *sheet, const char *name)
{
    const struct fact *fact = result_fact(sheet, name, NULL);
    assert_non_null(fact);
    return fact->value;
}

/* Peng and Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59, equations 4 and 9 to 18, written out again. */
static double peng_robinson_pressure(double mass, double temperature)
{
    const double Tc = 304.1282, pc = 7.3773e6, omega = 0.22394, R = GAS_CONSTANT;
    const double v = 0.0502 * 0.0440098 / mass;
    const double kappa = 0.37464 + 1.54226 * omega - 0.26992 * omega * omega;
    const double root_alpha = 1.0 + kappa * (1.0 - sqrt(temperature / Tc));
    const double a = 0.45723552892138219 * R * R * Tc * Tc / pc * root_alpha * root_alpha;
    const double b = 0.077796073903888456 * R * Tc / pc;
    return R * temperature / (v - b) - a / (v * (v + b) + b * (v - b));
}

/* ---- limits and rounding ----------------------------------------------------------------------------------------- */

static void a_liquefied_gas_gets_its_ratio_rounded_down_and_the_mass_follows(void **state)
{
    (void)state;
    static const double steps[] = {0.01, 0.05, 0.004, 0.001};
    for (size_t i = 0; i < sizeof steps / sizeof *steps; i++) {
        struct bench *bench = set_up_bench();
        bench->rule.round_to = steps[i];
        filled_vessel_method(bench->it, "peng-robinson");
        const struct result_sheet *sheet = answer(bench);
        const double unrounded = fact_value(sheet, "filling-ratio-unrounded");
        const double ratio = fact_value(sheet, "filling-ratio");
        assert_close(peng_robinson_pressure(unrounded * 999.1 * 0.0502, 338.15), 250.0 * BAR + GAUGE_ZERO, 1e-9,
                     "the limit is where the 1976 equation gives the test pressure");
        assert_close(ratio / steps[i], floor(unrounded / steps[i]), 1e-12, "rounded down, by definition");
        assert_close(fact_value(sheet, "mass"), ratio * 999.1 * 0.0502, 1e-14, "mass of the rounded ratio");
        assert_close(fact_value(sheet, "amount"), fact_value(sheet, "mass") / 0.0440098, 1e-14, "m / M");
        tear_down_bench(bench);
    }
}

/* A limit that is a multiple of the step is found from a hair below it and must not lose a step. */
static void a_ratio_that_is_a_multiple_of_the_step_keeps_it(void **state)
{
    (void)state;
    static const double ratios[] = {0.68, 0.57, 0.29, 0.07};
    for (size_t i = 0; i < sizeof ratios / sizeof *ratios; i++) {
        struct bench *bench = set_up_bench();
        bench->predicates[0] =
            compared(288.15, 288.15, SYMBOL_FILLING_RATIO, RELATION_AT_MOST, formula_number(bench->it, ratios[i]));
        filled_vessel_method(bench->it, "peng-robinson");
        assert_close(fact_value(answer(bench), "filling-ratio"), ratios[i], 1e-14, "the ratio of the rule");
        tear_down_bench(bench);
    }
}

static void a_ratio_short_of_a_multiple_loses_the_step(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[0] =
        compared(288.15, 288.15, SYMBOL_FILLING_RATIO, RELATION_AT_MOST, formula_number(bench->it, 0.679999));
    filled_vessel_method(bench->it, "peng-robinson");
    assert_close(fact_value(answer(bench), "filling-ratio"), 0.67, 1e-14, "rounded down, never up");
    tear_down_bench(bench);
}

/* ADR/RID 2025, 2.2.2.1.2: compressed up to -50 degC, liquefied at high pressure up to +65 degC, both ends included. */
static void the_class_follows_the_critical_temperature(void **state)
{
    (void)state;
    static const struct {
        double critical_temperature;
        enum filling_class expected;
    } cases[] = {
        {223.15, CLASS_COMPRESSED},
        {223.25, CLASS_HIGH_PRESSURE_LIQUEFIED},
        {338.15, CLASS_HIGH_PRESSURE_LIQUEFIED},
        {338.25, CLASS_LOW_PRESSURE_LIQUEFIED},
    };
    struct bench *bench = set_up_bench();
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        bench->it->component.critical_temperature = given(cases[i].critical_temperature);
        assert_int_equal(classify_fluid(&bench->it->fluid), cases[i].expected);
    }
    bench->it->component.critical_temperature.given = false;
    assert_int_equal(classify_fluid(&bench->it->fluid), CLASS_NONE);
    tear_down_bench(bench);
}

static void a_compressed_gas_is_filled_to_a_pressure_and_not_rounded(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->rule.meant_for = CLASS_COMPRESSED;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_close(peng_robinson_pressure(fact_value(sheet, "mass"), 338.15), 250.0 * BAR + GAUGE_ZERO, 1e-9,
                 "the limit itself");
    const struct table *limits = result_table(sheet, "limits", NULL);
    size_t row = 0;
    assert_true(result_row(limits, "method", "permitted", &row));
    assert_non_null(result_cell(limits, row, "gauge-pressure-15-degC"));
    assert_null(result_cell(limits, row, "filling-ratio"));
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W323), 1);
    /* As filled it is liquefied all the same, and a cubic alone says how far: not for filling. */
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W325), 1);
    assert_non_null(strstr(bench->it->run.result->headlines.items[0], "not for filling"));
    tear_down_bench(bench);
}

/* "It and every smaller one": what is met by larger charges only permits none, and says so. */
static void a_condition_met_by_larger_charges_only_permits_none(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[0] =
        compared(293.15, 293.15, SYMBOL_DENSITY, RELATION_AT_LEAST, formula_number(bench->it, 310.0));
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_true(result_has_note(sheet, "by the smallest charges already"));
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W327), 1);
    tear_down_bench(bench);
}

static void gross_weight_is_tare_and_charge(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->it->vessel.tare = given(62.4);
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_close(fact_value(sheet, "gross-weight"), 62.4 + fact_value(sheet, "mass"), 1e-15, "sum");
    tear_down_bench(bench);
}

static void the_gas_volume_is_real_at_15_degc_and_1_bar(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    /* The mass that fills V at 15 degC and 1 bar by the same equation, scaled to the volume found. */
    const double volume = fact_value(sheet, "gas-volume");
    const double density = fact_value(sheet, "mass") / volume;
    assert_close(peng_robinson_pressure(density * 0.0502, 288.15), 1e5, 1e-9, "the 1976 equation at that density");
    tear_down_bench(bench);
}

static void fittings_are_always_checked_at_15_degc(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    const struct case_rating hose = {.name = "hose", .pressure = given(31.0 * BAR)};
    bench->it->vessel.fittings = &hose;
    bench->it->vessel.fitting_count = 1;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_non_null(strstr(result_fact(sheet, "governed-by", NULL)->text, "vessel"));
    const double unrounded = fact_value(sheet, "filling-ratio-unrounded");
    const double limit = unrounded * 999.1 * 0.0502;
    assert_close(peng_robinson_pressure(limit, 288.15), 31.0 * BAR + GAUGE_ZERO, 1e-9, "vapour at the hose's rating");
    assert_close(fact_value(sheet, "filling-ratio"), floor(unrounded * 100.0) / 100.0, 1e-14,
                 "a rating's limit is rounded down to 0.01");
    assert_int_equal(result_requirement(sheet, "hose")->state, REQUIREMENT_MET);
    tear_down_bench(bench);
}

static void every_criterion_is_checked_again_for_the_permitted_charge(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[1] =
        compared(293.15, 293.15, SYMBOL_LIQUID_VOLUME, RELATION_AT_MOST, formula_number(bench->it, 0.9));
    bench->rule.predicate_count = 2;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    size_t count = 0;
    for (const struct requirement *one = sheet->first_requirement; one != NULL; one = one->next) {
        assert_int_equal(one->state, REQUIREMENT_MET);
        assert_true(one->has_margin && one->margin >= 0.0);
        count++;
    }
    assert_int_equal(count, 2);
    assert_non_null(result_hand_check(sheet));
    assert_true(result_hand_check(sheet)->lines.count > 5);
    tear_down_bench(bench);
}

/* ---- listed rows ------------------------------------------------------------------------------------------------- */

struct listed_case {
    const char *name;
    double test_bar, ratio_190, ratio_250;
    enum listed_policy policy;
    bool is_never_exceeded;
    double permitted; /* filling ratio; 0: the computed one, rounded down */
    size_t exceeds, below, missing;
};

static double permitted_ratio(const struct listed_case *one, double *computed, size_t warnings[3])
{
    struct bench *bench = set_up_bench();
    bench->it->vessel.test_pressure = given(one->test_bar * BAR);
    list_rows(bench, one->ratio_190, one->ratio_250);
    bench->it->entry.is_never_exceeded = one->is_never_exceeded;
    bench->it->sheet.listed = one->policy;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    *computed = fact_value(sheet, "filling-ratio-unrounded");
    const double ratio = fact_value(sheet, "filling-ratio");
    warnings[0] = result_warnings(bench->it->run.result, CODE_W320);
    warnings[1] = result_warnings(bench->it->run.result, CODE_W321);
    warnings[2] = result_warnings(bench->it->run.result, CODE_W322);
    tear_down_bench(bench);
    return ratio;
}

/* By this equation the computed limits are 0.661 at 190 barg and 0.747 at 250 barg; the rows are invented. */
static void a_listed_row_acts_as_the_sheet_asks(void **state)
{
    (void)state;
    static const struct listed_case cases[] = {
        {"the row of the vessel's test pressure governs", 250.0, 0.61, 0.72, LISTED_GOVERNS, false, 0.72, 0, 1, 0},
        {"a row above its criterion governs, flagged", 250.0, 0.61, 0.77, LISTED_GOVERNS, false, 0.77, 1, 0, 0},
        {"between rows the lower one", 249.0, 0.61, 0.72, LISTED_GOVERNS, false, 0.61, 0, 1, 0},
        {"above all rows the highest one", 300.0, 0.61, 0.72, LISTED_GOVERNS, false, 0.72, 0, 1, 0},
        {"computation lowers a row where asked", 250.0, 0.61, 0.77, LISTED_CHECK_GOVERNS, false, 0.0, 1, 0, 0},
        {"and leaves a lower row alone", 250.0, 0.61, 0.72, LISTED_CHECK_GOVERNS, false, 0.72, 0, 1, 0},
        {"compared only, the computation governs", 250.0, 0.61, 0.72, LISTED_COMPARE, false, 0.0, 0, 0, 0},
        {"letter o binds even then", 250.0, 0.61, 0.72, LISTED_COMPARE, true, 0.72, 0, 1, 0},
        {"below all rows the computation stands alone", 180.0, 0.61, 0.72, LISTED_GOVERNS, false, 0.0, 0, 0, 1},
        {"except that letter o keeps to the lowest", 180.0, 0.31, 0.72, LISTED_GOVERNS, true, 0.31, 0, 1, 1},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        double computed;
        size_t warnings[3];
        const double ratio = permitted_ratio(&cases[i], &computed, warnings);
        const double expected = cases[i].permitted > 0.0 ? cases[i].permitted : floor(computed * 100.0) / 100.0;
        assert_close(ratio, expected, 1e-14, cases[i].name);
        if (warnings[0] != cases[i].exceeds || warnings[1] != cases[i].below || warnings[2] != cases[i].missing) {
            fail_msg("%s: warnings %zu %zu %zu", cases[i].name, warnings[0], warnings[1], warnings[2]);
        }
    }
}

/* A rule that no row replaces is no way around letter o. */
static void letter_o_binds_beside_a_rule_of_ones_own(void **state)
{
    (void)state;
    for (int is_never_exceeded = 0; is_never_exceeded <= 1; is_never_exceeded++) {
        struct bench *bench = set_up_bench();
        list_rows(bench, 0.61, 0.72);
        bench->predicates[0].unless_listed = false;
        bench->it->entry.is_never_exceeded = is_never_exceeded == 1;
        filled_vessel_method(bench->it, "peng-robinson");
        const struct result_sheet *sheet = answer(bench);
        const double computed = floor(fact_value(sheet, "filling-ratio-unrounded") * 100.0) / 100.0;
        assert_true(computed > 0.725);
        assert_close(fact_value(sheet, "filling-ratio"), is_never_exceeded == 1 ? 0.72 : computed, 1e-14,
                     "the row with letter o, the computation without");
        assert_int_equal(result_warnings(bench->it->run.result, CODE_W331), is_never_exceeded);
        tear_down_bench(bench);
    }
}

static void a_replaced_criterion_is_met_by_the_row_with_the_computation_beside_it(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    list_rows(bench, 0.61, 0.77);
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    const struct requirement *one = result_requirement(sheet, "hot-day");
    assert_int_equal(one->state, REQUIREMENT_MET);
    assert_non_null(strstr(one->reason, "met by the listed row UN 1013, 250 barg; computed: not met"));
    assert_close(one->margin, 250.0 * BAR + GAUGE_ZERO - peng_robinson_pressure(0.77 * 999.1 * 0.0502, 338.15), 1e-9,
                 "test pressure less the 1976 equation");
    assert_true(result_has_note(sheet, "is missed at 65 degC: by"));
    assert_close(fact_value(sheet, "listed-excess"), 0.77 - fact_value(sheet, "computed-filling-ratio"), 1e-14,
                 "listed less computed");
    assert_non_null(strstr(bench->it->run.result->headlines.items[0], "the listed row (UN 1013, 250 barg)"));
    tear_down_bench(bench);
}

static void a_row_replaces_only_the_criterion_marked_for_it(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    list_rows(bench, 0.61, 0.72);
    bench->predicates[1] =
        compared(293.15, 293.15, SYMBOL_LIQUID_VOLUME, RELATION_AT_MOST, formula_number(bench->it, 0.7));
    bench->rule.predicate_count = 2;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_true(fact_value(sheet, "filling-ratio") < 0.72);
    assert_string_equal(result_fact(sheet, "governing-criterion", NULL)->text, "hand-built");
    tear_down_bench(bench);
}

static void of_two_entries_the_smaller_ratio_applies(void **state)
{
    (void)state;
    for (int first = 0; first <= 1; first++) {
        struct bench *bench = set_up_bench();
        list_rows(bench, 0.61, 0.72);
        const struct listed_row other_row = {.test_pressure = 230.0 * BAR, .filling_ratio = {true, 0.69}};
        const struct case_entry other = {.name = "UN 1014", .row_count = 1, .rows = &other_row};
        const struct case_entry *entries[2];
        entries[first] = &bench->it->entry;
        entries[1 - first] = &other;
        bench->it->sheet.entries = entries;
        bench->it->sheet.entry_count = 2;
        filled_vessel_method(bench->it, "peng-robinson");
        assert_close(fact_value(answer(bench), "filling-ratio"), 0.69, 1e-14, "the smaller of 0.72 and 0.69");
        tear_down_bench(bench);
    }
}

static void a_listed_working_pressure_stands_for_the_criterion_of_compressed_gases(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    list_rows(bench, 0.61, 0.72);
    bench->rows[0].filling_ratio.given = bench->rows[1].filling_ratio.given = false;
    bench->rows[1].working_pressure = (struct optional){true, 30.0 * BAR};
    bench->rule.meant_for = CLASS_COMPRESSED;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_close(peng_robinson_pressure(fact_value(sheet, "mass"), 288.15), 30.0 * BAR + GAUGE_ZERO, 1e-9,
                 "the listed working pressure at 15 degC");
    assert_close(fact_value(sheet, "listed-working-pressure"), 30.0 * BAR + GAUGE_ZERO, 1e-15, "as listed");
    assert_close(fact_value(sheet, "settled-gauge-pressure"), 30.0 * BAR + GAUGE_ZERO, 1e-9, "what governs");
    tear_down_bench(bench);
}

/* ---- who governs ------------------------------------------------------------------------------------------------- */

static void the_strictest_is_the_method_with_the_smallest_mass(void **state)
{
    (void)state;
    for (int strictest = 0; strictest <= 1; strictest++) {
        struct bench *bench = set_up_bench();
        filled_vessel_method(bench->it, "peng-robinson");
        filled_vessel_method(bench->it, "soave-redlich-kwong");
        filled_vessel_method(bench->it, "ideal-gas");
        bench->it->sheet.methods.govern = strictest ? GOVERN_STRICTEST : GOVERN_LEAD;
        const struct result_sheet *sheet = answer(bench);
        const char *expected = strictest ? "soave-redlich-kwong" : "peng-robinson";
        assert_string_equal(result_fact(sheet, "governing-method", NULL)->text, expected);
        tear_down_bench(bench);
    }
}

static void a_shown_method_never_governs(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    filled_vessel_method(bench->it, "peng-robinson");
    filled_vessel_method(bench->it, "soave-redlich-kwong")->may_govern = false;
    bench->it->sheet.methods.govern = GOVERN_STRICTEST;
    const struct result_sheet *sheet = answer(bench);
    assert_string_equal(result_fact(sheet, "governing-method", NULL)->text, "peng-robinson");
    size_t row = 0;
    assert_true(result_row(result_table(sheet, "limits", NULL), "method", "soave-redlich-kwong", &row));
    tear_down_bench(bench);
}

static void an_ideal_gas_leads_nowhere(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    filled_vessel_method(bench->it, "ideal-gas")->may_govern = true;
    const struct result_sheet *sheet = answer(bench);
    assert_int_equal(result_requirement(sheet, "may be filled")->state, REQUIREMENT_UNDECIDED);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W326), 1);
    assert_null(result_fact(sheet, "mass", NULL));
    tear_down_bench(bench);
}

static void a_cubic_alone_is_indicative_and_a_listed_row_is_not(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    filled_vessel_method(bench->it, "peng-robinson");
    answer(bench);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W325), 1);
    assert_non_null(strstr(bench->it->run.result->headlines.items[0], "indicative, not for filling"));
    tear_down_bench(bench);
    bench = set_up_bench();
    list_rows(bench, 0.61, 0.72);
    filled_vessel_method(bench->it, "peng-robinson");
    answer(bench);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W325), 0);
    tear_down_bench(bench);
}

/* ---- every listed row together ----------------------------------------------------------------------------------- */

static void two_listed_rows_or_more_are_told_together(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    list_rows(bench, 0.61, 0.77);
    bench->it->sheet.listed = LISTED_COMPARE;
    filled_vessel_method(bench->it, "peng-robinson");
    struct listed_ledger ledger = {0};
    bench->it->run.ledger = &ledger;
    answer(bench);
    struct result *result = bench->it->run.result;
    tell_listed_ledger(&ledger, result);
    assert_int_equal(result->sheet_count, 1); /* one row: the sheet says it all */
    bench->it->vessel.test_pressure = given(190.0 * BAR);
    answer(bench);
    tell_listed_ledger(&ledger, result);
    assert_int_equal(result->sheet_count, 2);
    const struct table *table =
        result_table(result->last_sheet, "filling ratio, listed beside computed", "peng-robinson");
    assert_non_null(table);
    assert_int_equal(table->row_count, 2);
    const double computed = result_cell(table, 0, "computed")->number;
    assert_close(peng_robinson_pressure(computed * 999.1 * 0.0502, 338.15), 250.0 * BAR + GAUGE_ZERO, 1e-9,
                 "the 1976 equation gives the test pressure there");
    assert_close(result_cell(table, 0, "excess")->number, 0.77 - computed, 1e-12, "listed less computed");
    assert_string_equal(result_cell(table, 0, "agrees")->text, "no");
    assert_true(result_cell(table, 1, "sheet")->number == 1.0); /* set, not computed */
    table = result_table(result->last_sheet, "criteria that listed charges miss", NULL);
    assert_int_equal(table->row_count,
                     peng_robinson_pressure(0.61 * 999.1 * 0.0502, 338.15) > 190e5 + GAUGE_ZERO ? 2 : 1);
    tear_down_bench(bench);
}

/* ---- no charge --------------------------------------------------------------------------------------------------- */

static void a_refused_gas_gets_no_charge_whatever_was_assessed(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->it->fluid.refuse = "porous mass and solvent decide";
    bench->it->sheet.assessed = "HAZ-7";
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    const struct requirement *one = result_requirement(sheet, "may be filled");
    assert_int_equal(one->state, REQUIREMENT_NOT_MET);
    assert_string_equal(one->reason, "carbon-dioxide: porous mass and solvent decide");
    assert_null(result_fact(sheet, "mass", NULL));
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W324), 1);
    tear_down_bench(bench);
}

static void a_gas_that_reacts_needs_an_assessment(void **state)
{
    (void)state;
    static const struct {
        const char *needed, *assessed;
        bool is_filled;
    } cases[] = {
        {"it may decompose", NULL, false},
        {"it may decompose", "HAZ-7", true},
        {NULL, NULL, true},
        {NULL, "HAZ-7", true},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct bench *bench = set_up_bench();
        bench->it->fluid.assessment = cases[i].needed;
        bench->it->sheet.assessed = cases[i].assessed;
        filled_vessel_method(bench->it, "peng-robinson");
        const struct result_sheet *sheet = answer(bench);
        assert_int_equal(result_fact(sheet, "mass", NULL) != NULL, cases[i].is_filled);
        assert_int_equal(result_has_note(sheet, "assessed: \"HAZ-7\""),
                         cases[i].is_filled && cases[i].assessed != NULL);
        tear_down_bench(bench);
    }
}

static void a_gas_that_polymerises_is_filled_with_a_warning(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->it->component.hazards = HAZARD_POLYMERISES;
    filled_vessel_method(bench->it, "peng-robinson");
    answer(bench);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W333), 1);
    tear_down_bench(bench);
}

static void a_vapour_pressure_rule_above_the_critical_temperature_is_undecided(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[0] = compared(338.15, 338.15, SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST,
                                    formula_share(bench->it, 1.0, SYMBOL_TEST_PRESSURE));
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    const struct requirement *one = result_requirement(sheet, "may be filled");
    assert_int_equal(one->state, REQUIREMENT_UNDECIDED);
    assert_non_null(strstr(one->reason, "not applicable"));
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W328), 1);
    tear_down_bench(bench);
}

static void a_rule_that_every_charge_breaks_allows_none(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->it->vessel.test_pressure = given(40.0 * BAR);
    bench->predicates[0] = compared(293.15, 293.15, SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST,
                                    formula_share(bench->it, 1.0, SYMBOL_TEST_PRESSURE));
    bench->predicates[0].bound_is_gauge = true;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_int_equal(result_requirement(sheet, "may be filled")->state, REQUIREMENT_NOT_MET);
    assert_null(result_fact(sheet, "mass", NULL));
    tear_down_bench(bench);
}

static void a_limit_that_rounds_to_nothing_allows_none(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[0] = of_phases(PREDICATE_NO_LIQUID, 220.0, 220.0); /* the dew ratio is 0.016 */
    bench->rule.round_to = 0.1;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_non_null(strstr(result_requirement(sheet, "may be filled")->reason, "rounds down to nothing"));
    tear_down_bench(bench);
}

static void a_sheet_without_a_limit_is_undecided(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->it->sheet.rule_count = 0;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_int_equal(result_requirement(sheet, "may be filled")->state, REQUIREMENT_UNDECIDED);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W332), 1);
    tear_down_bench(bench);
}

static void a_higher_window_is_told_and_not_permitted(void **state)
{
    (void)state;
    struct bench *bench = set_up_bench();
    bench->predicates[1] = of_phases(PREDICATE_ONE_PHASE, 263.15, 263.15);
    bench->rule.predicate_count = 2;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    assert_true(fact_value(sheet, "filling-ratio") < 0.1);
    assert_int_equal(result_warnings(bench->it->run.result, CODE_W327), 1);
    tear_down_bench(bench);
}

/* ---- what is told of the charge ---------------------------------------------------------------------------------- */

static void the_fill_chart_reads_above_the_ambient_pressure(void **state)
{
    (void)state;
    static const double temperatures[] = {278.15, 311.15};
    struct bench *bench = set_up_bench();
    bench->it->tree.ambient_pressure = 0.9 * BAR;
    bench->it->sheet.temperatures = (struct case_sweep){.given = true, .count = 2, .values = temperatures};
    bench->rule.meant_for = CLASS_COMPRESSED;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    const struct table *chart =
        result_table(sheet, "fill chart: gauge reading of the permitted charge", "peng-robinson");
    const struct cell *reading = result_cell(chart, 1, "gauge-reading");
    assert_close(reading->number, peng_robinson_pressure(fact_value(sheet, "mass"), 311.15), 1e-12,
                 "absolute in SI, by the 1976 equation");
    assert_close(look_shown(&chart->columns[1].look, reading->number), (reading->number - 0.9 * BAR) / BAR, 1e-12,
                 "shown above 0.9 bara");
    tear_down_bench(bench);
}

static void quoted_pressures_are_those_asked_for_with_liquid_full_between(void **state)
{
    (void)state;
    static const double quotes[] = {338.15, 283.15, 283.15};
    struct bench *bench = set_up_bench();
    bench->it->sheet.quotes = quotes;
    bench->it->sheet.quote_count = 3;
    filled_vessel_method(bench->it, "peng-robinson");
    const struct result_sheet *sheet = answer(bench);
    const struct table *table = result_table(sheet, "settled pressure of the permitted charge", NULL);
    assert_int_equal(table->row_count, 3);
    assert_string_equal(result_cell(table, 0, "state")->text, "vapour + liquid");
    assert_string_equal(result_cell(table, 1, "state")->text, "liquid-full");
    assert_string_equal(result_cell(table, 2, "state")->text, "one phase, above critical");
    assert_close(result_cell(table, 1, "temperature")->number, fact_value(sheet, "liquid-full-temperature"), 1e-12,
                 "the temperature found");
    assert_close(result_cell(table, 2, "pressure")->number, peng_robinson_pressure(fact_value(sheet, "mass"), 338.15),
                 1e-12, "the 1976 equation");
    tear_down_bench(bench);
}

static void the_class_follows_from_the_filled_state_at_minus_50(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    assert_int_equal(classify_charge(&it->run, method, 38.0), CLASS_HIGH_PRESSURE_LIQUEFIED);
    assert_int_equal(classify_charge(&it->run, method, 0.3), CLASS_COMPRESSED);
    it->component.critical_temperature.value = 350.0;
    assert_int_equal(classify_fluid(&it->fluid), CLASS_LOW_PRESSURE_LIQUEFIED);
    it->component.critical_temperature.value = 223.15; /* ADR/RID 2025, 2.2.2.1.2: up to -50 degC */
    assert_int_equal(classify_fluid(&it->fluid), CLASS_COMPRESSED);
    arena_free(it->arena);
}

/* ---- carbon dioxide by its reference equation -------------------------------------------------------------------- */

static bool read_text_or_file(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (strcmp(path, "job.deck") == 0) {
        *length = strlen(context);
        *text = arena_copy_text(arena, context, *length);
        return true;
    }
    return deck_read_file(NULL, arena, path, text, length);
}

static const struct result *run_text(const char *text, struct arena *arena)
{
    char *copy = arena_copy_text(arena, text, strlen(text));
    const struct deck_reader reader = {read_text_or_file, copy, "decks/library"};
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck *deck = deck_load("job.deck", &reader, arena, &diagnostics);
    const struct case_tree *tree =
        deck == NULL || diagnostics.errors > 0 ? NULL : case_elaborate(deck, arena, &diagnostics);
    if (tree == NULL) {
        fail_msg("the deck was not read");
    }
    return filling_solve(tree, "0.0.0", arena);
}

#define REGULATIONS                                                                      \
    "case \"limits\" { number \"T\" }\nuse \"gases\"\nuse \"rules/model-regulations\"\n" \
    "use \"entries/adr-2025\"\nmethods { lead reference }\n"

/* Largest filling ratios with p(65 degC) at the test pressure, and the low-pressure criterion at 50 degC, computed with
 * the short equations of Span and Wagner (2003) and Lemmon and Span (2006): trade notes, 6.1. Two equations for one gas
 * agree to half a percent there. */
static void computed_ratios_agree_with_other_equations_for_the_same_gases(void **state)
{
    (void)state;
    static const struct {
        const char *fluid, *rule;
        double test_bar, ratio;
    } cases[] = {
        {"carbon-dioxide", "liquefied-high-pressure", 190.0, 0.6756},
        {"carbon-dioxide", "liquefied-high-pressure", 250.0, 0.7634},
        {"nitrous-oxide", "liquefied-high-pressure", 180.0, 0.6826},
        {"nitrous-oxide", "liquefied-high-pressure", 225.0, 0.7455},
        {"nitrous-oxide", "liquefied-high-pressure", 250.0, 0.7706},
        {"ethane", "liquefied-high-pressure", 95.0, 0.2529},
        {"ethane", "liquefied-high-pressure", 120.0, 0.3017},
        {"ethane", "liquefied-high-pressure", 300.0, 0.3996},
        {"sulfur-hexafluoride", "liquefied-high-pressure", 70.0, 1.061},
        {"sulfur-hexafluoride", "liquefied-high-pressure", 140.0, 1.335},
        {"sulfur-hexafluoride", "liquefied-high-pressure", 160.0, 1.373},
        {"ammonia", "liquefied-low-pressure", 29.0, 0.5352},
        {"propane", "liquefied-low-pressure", 23.0, 0.4263},
        {"n-butane", "liquefied-low-pressure", 10.0, 0.5155},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct arena *arena = arena_create(NULL);
        const char *text =
            arena_format(arena,
                         REGULATIONS "vessel v { water-capacity 50.2 L; test-pressure %g barg }\n"
                                     "sheet permissible-charge { fluid %s; vessel v; rules %s; listed compare }\n",
                         cases[i].test_bar, cases[i].fluid, cases[i].rule);
        const struct result *result = run_text(text, arena);
        const struct fact *fact = result_fact(result->first_sheet, "filling-ratio-unrounded", "reference");
        assert_non_null(fact);
        assert_close(fact->value, cases[i].ratio, 5e-3, cases[i].fluid);
        arena_free(arena);
    }
}

/* Carbon dioxide at listed ratios, bar absolute, with the same short equation: trade notes, 6.1. */
static void carbon_dioxide_follows_its_isochores(void **state)
{
    (void)state;
    static const struct {
        double ratio, celsius, bar, liquid_full;
    } cases[] = {
        {0.68, 30.0, 76.9, 26.9},  {0.68, 50.0, 142.3, 26.9}, {0.68, 65.0, 193.2, 26.9}, {0.75, 25.0, 71.4, 22.2},
        {0.75, 50.0, 175.1, 22.2}, {0.75, 65.0, 239.3, 22.2}, {0.76, 40.0, 138.0, 21.3}, {0.76, 65.0, 247.9, 21.3},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct arena *arena = arena_create(NULL);
        const char *text =
            arena_format(arena,
                         REGULATIONS "vessel v { water-capacity 40 L; test-pressure 300 barg }\n"
                                     "charge c { fluid carbon-dioxide; vessel v; filling-ratio %g }\n"
                                     "sheet settled-pressure { charge c; sweep temperature %g degC, 70 degC }\n",
                         cases[i].ratio, cases[i].celsius);
        const struct result_sheet *sheet = run_text(text, arena)->first_sheet;
        const struct cell *pressure = result_cell(result_table(sheet, "settled pressure", "reference"), 0, "pressure");
        assert_close(pressure->number / BAR, cases[i].bar, 5e-3, "short equation of Span and Wagner (2003)");
        assert_near(result_fact(sheet, "liquid-full-temperature", "reference")->value - CELSIUS - cases[i].liquid_full,
                    0.0, 0.1, "short equation of Span and Wagner (2003)");
        arena_free(arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_liquefied_gas_gets_its_ratio_rounded_down_and_the_mass_follows),
        cmocka_unit_test(a_ratio_that_is_a_multiple_of_the_step_keeps_it),
        cmocka_unit_test(a_ratio_short_of_a_multiple_loses_the_step),
        cmocka_unit_test(the_class_follows_the_critical_temperature),
        cmocka_unit_test(a_compressed_gas_is_filled_to_a_pressure_and_not_rounded),
        cmocka_unit_test(a_condition_met_by_larger_charges_only_permits_none),
        cmocka_unit_test(gross_weight_is_tare_and_charge),
        cmocka_unit_test(the_gas_volume_is_real_at_15_degc_and_1_bar),
        cmocka_unit_test(fittings_are_always_checked_at_15_degc),
        cmocka_unit_test(every_criterion_is_checked_again_for_the_permitted_charge),
        cmocka_unit_test(a_listed_row_acts_as_the_sheet_asks),
        cmocka_unit_test(letter_o_binds_beside_a_rule_of_ones_own),
        cmocka_unit_test(a_replaced_criterion_is_met_by_the_row_with_the_computation_beside_it),
        cmocka_unit_test(a_row_replaces_only_the_criterion_marked_for_it),
        cmocka_unit_test(of_two_entries_the_smaller_ratio_applies),
        cmocka_unit_test(a_listed_working_pressure_stands_for_the_criterion_of_compressed_gases),
        cmocka_unit_test(the_strictest_is_the_method_with_the_smallest_mass),
        cmocka_unit_test(a_shown_method_never_governs),
        cmocka_unit_test(an_ideal_gas_leads_nowhere),
        cmocka_unit_test(a_cubic_alone_is_indicative_and_a_listed_row_is_not),
        cmocka_unit_test(two_listed_rows_or_more_are_told_together),
        cmocka_unit_test(a_refused_gas_gets_no_charge_whatever_was_assessed),
        cmocka_unit_test(a_gas_that_reacts_needs_an_assessment),
        cmocka_unit_test(a_gas_that_polymerises_is_filled_with_a_warning),
        cmocka_unit_test(a_vapour_pressure_rule_above_the_critical_temperature_is_undecided),
        cmocka_unit_test(a_rule_that_every_charge_breaks_allows_none),
        cmocka_unit_test(a_limit_that_rounds_to_nothing_allows_none),
        cmocka_unit_test(a_sheet_without_a_limit_is_undecided),
        cmocka_unit_test(a_higher_window_is_told_and_not_permitted),
        cmocka_unit_test(the_fill_chart_reads_above_the_ambient_pressure),
        cmocka_unit_test(quoted_pressures_are_those_asked_for_with_liquid_full_between),
        cmocka_unit_test(the_class_follows_from_the_filled_state_at_minus_50),
        cmocka_unit_test(computed_ratios_agree_with_other_equations_for_the_same_gases),
        cmocka_unit_test(carbon_dioxide_follows_its_isochores),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
