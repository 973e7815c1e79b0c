/* The one predicate of rules and requirements: truth tables, worst temperatures and largest masses. */
#include "support/check.h"
#include "support/filled_vessel.h"

#include "filling/search.h"

#include <math.h>

/* ---- searches ---------------------------------------------------------------------------------------------------- */

static enum answer cubic_at(void *context, double x, double *y)
{
    (void)context;
    *y = (x - 1.3) * (x * x + 0.7);
    return ANSWER_OK;
}

static void a_bracket_closes_around_its_root_and_keeps_its_sides(void **state)
{
    (void)state;
    const struct search_function function = {cubic_at, NULL};
    struct search_bracket bracket = {7.0, 50.0 * 5.7, -2.0, -3.3 * 4.7};
    assert_int_equal(search_root(&function, 0.0, 1e-12, &bracket), ANSWER_OK);
    assert_close(bracket.a, 1.3, 1e-12, "root at 1.3: closed form");
    assert_close(bracket.b, 1.3, 1e-12, "root at 1.3: closed form");
    assert_true(bracket.value_a >= 0.0 && bracket.value_b < 0.0);
}

static void a_bracket_without_a_change_of_sign_has_no_root(void **state)
{
    (void)state;
    const struct search_function function = {cubic_at, NULL};
    struct search_bracket bracket = {2.0, 1.0, 3.0, 2.0};
    assert_int_equal(search_root(&function, 0.0, 1e-12, &bracket), ANSWER_NO_SUCH_ROOT);
}

static enum answer step_at(void *context, double x, double *y)
{
    *y = x < *(const double *)context ? (double)INFINITY : -1.0;
    return ANSWER_OK;
}

static void a_jump_from_infinity_is_halved_to_the_tolerance(void **state)
{
    (void)state;
    double jump = 0.377;
    const struct search_function function = {step_at, &jump};
    struct search_bracket bracket = {0.0, (double)INFINITY, 1.0, -1.0};
    assert_int_equal(search_root(&function, 1e-9, 0.0, &bracket), ANSWER_OK);
    assert_near(bracket.a - jump, 0.0, 1e-9, "the jump itself");
    assert_true(bracket.a < jump && bracket.b >= jump);
}

static enum answer valley_at(void *context, double x, double *y)
{
    const double centre = *(const double *)context;
    *y = fabs(x - centre) * 3.0 - 11.0;
    return ANSWER_OK;
}

static void the_least_value_of_a_kink_is_found_between_grid_points(void **state)
{
    (void)state;
    double centre = 311.2837;
    const struct search_function function = {valley_at, &centre};
    double at, value;
    assert_int_equal(search_least(&function, 250.0, 338.15, 0.5, 5e-4, &at, &value), ANSWER_OK);
    assert_near(at - centre, 0.0, 1e-3, "kink put there");
    assert_near(value + 11.0, 0.0, 3e-3, "its value");
}

static void the_least_value_at_an_end_is_that_end_exactly(void **state)
{
    (void)state;
    double centre = 100.0;
    const struct search_function function = {valley_at, &centre};
    double at, value;
    assert_int_equal(search_least(&function, 250.1, 338.15, 0.5, 5e-4, &at, &value), ANSWER_OK);
    assert_true(at == 250.1); /* the argument itself, not computed */
    centre = 400.0;
    assert_int_equal(search_least(&function, 250.1, 338.15, 0.5, 5e-4, &at, &value), ANSWER_OK);
    assert_true(at == 338.15);
}

static enum answer not_a_number_at(void *context, double x, double *y)
{
    (void)context;
    *y = (double)NAN + x;
    return ANSWER_OK;
}

static void a_value_that_is_not_a_number_ends_a_search(void **state)
{
    (void)state;
    const struct search_function function = {not_a_number_at, NULL};
    struct search_bracket bracket = {1.0, 1.0, 2.0, -1.0};
    double at, value;
    assert_int_equal(search_root(&function, 0.0, 1e-9, &bracket), ANSWER_FAILED);
    assert_int_equal(search_least(&function, 1.0, 2.0, 0.5, 1e-3, &at, &value), ANSWER_FAILED);
}

/* ---- ideal gas: everything in closed form ------------------------------------------------------------------------ */

static double ideal_mass(const struct filled_vessel *it, double pressure, double temperature)
{
    return pressure * it->vessel.water_capacity.value / (GAS_CONSTANT * temperature) * it->fluid.molar_mass;
}

static void the_largest_ideal_mass_is_p_v_over_r_t(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    const struct predicate rule = pressure_within_test(it, 338.15, 1.0);
    double mass;
    bool is_unlimited;
    struct predicate_finding finding;
    assert_int_equal(predicate_largest_mass(&it->run, ideal, &rule, predicate_most_mass(&it->run, ideal), &mass,
                                            &is_unlimited, &finding),
                     ANSWER_OK);
    assert_false(is_unlimited);
    assert_close(mass, ideal_mass(it, 250.0 * BAR + GAUGE_ZERO, 338.15), 2e-10, "n = p V / (R T), closed form");
    assert_true(finding.holds);
    assert_true(finding.margin >= 0.0);
    assert_near(finding.margin, 0.0, 250.0 * BAR * 2e-10, "at its limit");
    arena_free(it->arena);
}

static void a_gauge_bound_counts_from_its_own_zero(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    struct predicate rule = pressure_within_test(it, 288.15, 2.0 / 3.0);
    const double mass = ideal_mass(it, 101.0 * BAR, 288.15);
    assert_close(predicate_check(&it->run, ideal, &rule, mass).margin, 250e5 * 2.0 / 3.0 - (101e5 - 101325.0), 1e-12,
                 "2/3 of 250 barg less 101 bara, by hand");
    rule.gauge_zero = 1.0 * BAR;
    assert_close(predicate_check(&it->run, ideal, &rule, mass).margin, 250e5 * 2.0 / 3.0 - 100e5, 1e-12,
                 "the same with the zero at 1 bara");
    rule.bound_is_gauge = false;
    assert_close(predicate_check(&it->run, ideal, &rule, mass).margin, 250e5 * 2.0 / 3.0 - 101e5, 1e-12,
                 "the same as an absolute bound");
    arena_free(it->arena);
}

static void the_relations_mean_what_they_say(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    const double mass = 0.7 * 0.0502; /* 0.7 kg/m3, exact enough either side of the bounds below */
    static const struct {
        enum relation relation;
        double bound;
        bool holds;
    } cases[] = {
        {RELATION_LESS, 0.71, true},     {RELATION_LESS, 0.69, false},     {RELATION_AT_MOST, 0.71, true},
        {RELATION_AT_MOST, 0.69, false}, {RELATION_EQUAL, 0.7, true},      {RELATION_EQUAL, 0.7001, false},
        {RELATION_AT_LEAST, 0.69, true}, {RELATION_AT_LEAST, 0.71, false}, {RELATION_GREATER, 0.69, true},
        {RELATION_GREATER, 0.71, false},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        const struct predicate rule =
            compared(300.0, 300.0, SYMBOL_DENSITY, cases[i].relation, formula_number(it, cases[i].bound));
        const struct predicate_finding finding = predicate_check(&it->run, ideal, &rule, mass);
        assert_int_equal(finding.answer, ANSWER_OK);
        assert_int_equal(finding.holds, cases[i].holds);
        assert_true(finding.has_margin);
    }
    arena_free(it->arena);
}

static void a_method_without_liquid_cannot_answer_questions_about_it(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    const struct predicate rules[] = {
        of_phases(PREDICATE_NO_LIQUID, 250.0, 250.0),
        of_phases(PREDICATE_ONE_PHASE, 250.0, 300.0),
        compared(280.0, 280.0, SYMBOL_LIQUID_VOLUME, RELATION_LESS, formula_number(it, 1.0)),
        compared(280.0, 280.0, SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST, formula_number(it, 1e7)),
        compared(280.0, 280.0, SYMBOL_DENSITY, RELATION_AT_MOST, formula_share(it, 0.95, SYMBOL_LIQUID_DENSITY)),
    };
    for (size_t i = 0; i < sizeof rules / sizeof *rules; i++) {
        const struct predicate_finding finding = predicate_check(&it->run, ideal, &rules[i], 5.0);
        assert_int_equal(finding.answer, ANSWER_CANNOT);
        assert_non_null(finding.words);
    }
    arena_free(it->arena);
}

static void a_rating_the_vessel_lacks_leaves_the_rule_undecided(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    const struct predicate rule =
        compared(288.15, 288.15, SYMBOL_PRESSURE, RELATION_AT_MOST, formula_share(it, 1.0, SYMBOL_WORKING_PRESSURE));
    const struct predicate_finding finding = predicate_check(&it->run, ideal, &rule, 3.0);
    assert_int_equal(finding.answer, ANSWER_CANNOT);
    assert_string_equal(finding.words, "the vessel lacks the rating named");
    arena_free(it->arena);
}

static void the_worst_temperature_of_a_pressure_is_the_hot_end(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    struct predicate rule = pressure_within_test(it, 233.15, 1.0);
    rule.to = 338.15;
    const struct predicate_finding finding = predicate_check(&it->run, ideal, &rule, 3.0);
    assert_true(finding.worst_temperature == 338.15); /* the argument itself */
    rule.relation = RELATION_AT_LEAST;
    assert_true(predicate_check(&it->run, ideal, &rule, 3.0).worst_temperature == 233.15);
    double mass;
    bool is_unlimited;
    struct predicate_finding at_limit;
    rule.relation = RELATION_AT_MOST;
    assert_int_equal(predicate_largest_mass(&it->run, ideal, &rule, predicate_most_mass(&it->run, ideal), &mass,
                                            &is_unlimited, &at_limit),
                     ANSWER_OK);
    assert_close(mass, ideal_mass(it, 250.0 * BAR + GAUGE_ZERO, 338.15), 3e-9, "p V / (R T) at the hot end");
    assert_true(at_limit.holds);
    arena_free(it->arena);
}

static void what_no_mass_breaks_is_unlimited_and_what_all_break_allows_none(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *ideal = filled_vessel_method(it, "ideal-gas");
    struct predicate rule = compared(288.15, 288.15, SYMBOL_DENSITY, RELATION_AT_LEAST, formula_number(it, 0.0));
    const double most = predicate_most_mass(&it->run, ideal);
    double mass;
    bool is_unlimited;
    struct predicate_finding finding;
    assert_int_equal(predicate_largest_mass(&it->run, ideal, &rule, most, &mass, &is_unlimited, &finding), ANSWER_OK);
    assert_true(is_unlimited && finding.holds);
    rule.bound = formula_number(it, 1e9);
    assert_int_equal(predicate_largest_mass(&it->run, ideal, &rule, most, &mass, &is_unlimited, &finding), ANSWER_OK);
    assert_false(is_unlimited || finding.holds);
    assert_true(mass == 0.0); /* set, not computed */
    arena_free(it->arena);
}

/* ---- a cubic: phases --------------------------------------------------------------------------------------------- */

struct phase_case {
    const char *name;
    double temperature;
    double share; /* of the way from dew (0) to bubble density (1); beyond either for one phase */
    bool one_phase, no_liquid;
    double liquid_volume;
};

static void phases_are_told_apart_by_density(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    static const struct phase_case cases[] = {
        {"vapour", 250.0, -0.01, true, true, 0.0},
        {"vapour and liquid", 250.0, 0.37, false, false, 0.37},
        {"liquid-full", 250.0, 1.03, true, false, 1.0},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct saturation saturation;
        assert_int_equal(fluid_set_t(method->at_t, method->fluid, cases[i].temperature), ANSWER_OK);
        assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
        const double dew = 1.0 / saturation.vapour_volume, bubble = 1.0 / saturation.liquid_volume;
        const double mass = (dew + cases[i].share * (bubble - dew)) * 0.0502 * 0.0440098;
        const struct predicate one_phase = of_phases(PREDICATE_ONE_PHASE, cases[i].temperature, cases[i].temperature);
        const struct predicate no_liquid = of_phases(PREDICATE_NO_LIQUID, cases[i].temperature, cases[i].temperature);
        const struct predicate level = compared(cases[i].temperature, cases[i].temperature, SYMBOL_LIQUID_VOLUME,
                                                RELATION_LESS, formula_number(it, 1.0));
        assert_int_equal(predicate_check(&it->run, method, &one_phase, mass).holds, cases[i].one_phase);
        assert_int_equal(predicate_check(&it->run, method, &no_liquid, mass).holds, cases[i].no_liquid);
        const struct predicate_finding found = predicate_check(&it->run, method, &level, mass);
        assert_int_equal(found.holds, cases[i].liquid_volume < 1.0);
        assert_near(found.margin - (1.0 - cases[i].liquid_volume), 0.0, 1e-9, "lever rule in volumes, closed form");
    }
    arena_free(it->arena);
}

static void above_the_critical_temperature_there_is_no_liquid_and_no_vapour_pressure(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct predicate no_liquid = of_phases(PREDICATE_NO_LIQUID, 310.0, 310.0);
    const struct predicate level = compared(310.0, 310.0, SYMBOL_LIQUID_VOLUME, RELATION_LESS, formula_number(it, 1.0));
    const struct predicate share =
        compared(310.0, 310.0, SYMBOL_DENSITY, RELATION_AT_MOST, formula_share(it, 0.95, SYMBOL_LIQUID_DENSITY));
    const struct predicate vapour =
        compared(310.0, 310.0, SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST, formula_number(it, 1e7));
    assert_true(predicate_check(&it->run, method, &no_liquid, 38.0).holds);
    assert_true(predicate_check(&it->run, method, &level, 38.0).holds);
    assert_true(predicate_check(&it->run, method, &share, 38.0).holds);
    assert_false(predicate_check(&it->run, method, &share, 38.0).has_margin);
    const struct predicate_finding finding = predicate_check(&it->run, method, &vapour, 38.0);
    assert_int_equal(finding.answer, ANSWER_CANNOT);
    assert_non_null(strstr(finding.words, "not applicable"));
    arena_free(it->arena);
}

static void a_rule_on_liquid_density_speaks_of_the_liquid_beside_vapour(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 270.0), ANSWER_OK);
    struct saturation saturation;
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    const double dew = 0.0502 * 0.0440098 / saturation.vapour_volume;
    const double bubble = 0.0502 * 0.0440098 / saturation.liquid_volume;
    const struct predicate heavy =
        compared(270.0, 270.0, SYMBOL_LIQUID_DENSITY, RELATION_AT_LEAST, formula_number(it, 100.0));
    const struct predicate share =
        compared(270.0, 270.0, SYMBOL_DENSITY, RELATION_AT_MOST, formula_share(it, 0.95, SYMBOL_LIQUID_DENSITY));
    assert_true(predicate_check(&it->run, method, &heavy, 0.9 * dew).holds);
    assert_false(predicate_check(&it->run, method, &heavy, 0.9 * dew).has_margin);
    assert_true(predicate_check(&it->run, method, &heavy, 0.9 * bubble).holds);
    assert_false(predicate_check(&it->run, method, &heavy, 1.01 * bubble).holds);
    assert_true(predicate_check(&it->run, method, &share, 0.94 * bubble).holds);
    assert_false(predicate_check(&it->run, method, &share, 0.96 * bubble).holds);
    assert_false(predicate_check(&it->run, method, &share, 1.01 * bubble).holds);
    arena_free(it->arena);
}

static void a_vessel_denser_than_the_method_knows_fails(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct predicate rule = pressure_within_test(it, 338.15, 1.0);
    const struct predicate_finding finding = predicate_check(&it->run, method, &rule, 200.0);
    assert_int_equal(finding.answer, ANSWER_OK);
    assert_false(finding.holds);
    assert_false(finding.has_contents);
    arena_free(it->arena);
}

/* A vapour pressure does not depend on the mass: only the densest state ends the search. */
static void what_only_the_densest_state_ends_is_unlimited(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    struct predicate rule = compared(280.0, 280.0, SYMBOL_VAPOUR_PRESSURE, RELATION_AT_MOST, formula_number(it, 1e7));
    for (int ranged = 0; ranged < 2; ranged++) {
        rule.to = ranged ? 300.0 : 280.0;
        double mass;
        bool is_unlimited;
        struct predicate_finding finding;
        assert_int_equal(predicate_largest_mass(&it->run, method, &rule, 200.0, &mass, &is_unlimited, &finding),
                         ANSWER_OK);
        assert_true(is_unlimited);
        const double densest = 0.0502 * 0.0440098 * 7.3773e6 / (0.077796073903888456 * GAS_CONSTANT * 304.1282);
        assert_true(mass <= densest);
        assert_close(mass, densest, 1e-6, "V M / b, Peng and Robinson 1976");
    }
    arena_free(it->arena);
}

static void no_solid_is_decided_by_the_triple_point_alone(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct predicate warm = of_phases(PREDICATE_NO_SOLID, 220.0, 300.0);
    const struct predicate cold = of_phases(PREDICATE_NO_SOLID, 210.0, 300.0);
    assert_true(predicate_check(&it->run, method, &warm, 10.0).holds);
    assert_int_equal(predicate_check(&it->run, method, &cold, 10.0).answer, ANSWER_CANNOT);
    it->component.triple_temperature.given = false;
    assert_int_equal(predicate_check(&it->run, method, &warm, 10.0).answer, ANSWER_CANNOT);
    arena_free(it->arena);
}

/* ---- a cubic: largest masses ------------------------------------------------------------------------------------- */

static double largest(struct filled_vessel *it, struct method_run *method, const struct predicate *rule,
                      struct predicate_finding *finding)
{
    double mass;
    bool is_unlimited;
    assert_int_equal(predicate_largest_mass(&it->run, method, rule, predicate_most_mass(&it->run, method), &mass,
                                            &is_unlimited, finding),
                     ANSWER_OK);
    assert_false(is_unlimited);
    return mass;
}

static void the_limits_of_the_phase_rules_are_the_saturated_densities(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const double T = 268.3;
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, T), ANSWER_OK);
    struct saturation saturation;
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    const double dew = 0.0502 * 0.0440098 / saturation.vapour_volume;
    const double bubble = 0.0502 * 0.0440098 / saturation.liquid_volume;
    const struct predicate no_liquid = of_phases(PREDICATE_NO_LIQUID, T, T);
    const struct predicate one_phase = of_phases(PREDICATE_ONE_PHASE, T, T);
    const struct predicate level = compared(T, T, SYMBOL_LIQUID_VOLUME, RELATION_LESS, formula_number(it, 1.0));
    const struct predicate share =
        compared(T, T, SYMBOL_DENSITY, RELATION_AT_MOST, formula_share(it, 0.95, SYMBOL_LIQUID_DENSITY));
    struct predicate_finding finding;
    assert_close(largest(it, method, &no_liquid, &finding), dew, 2e-10, "dew density, by definition");
    assert_false(finding.has_window);
    assert_close(largest(it, method, &one_phase, &finding), dew, 2e-10, "dew density: the first failure going up");
    assert_true(finding.has_window && finding.window > bubble);
    assert_close(largest(it, method, &level, &finding), bubble, 2e-10, "bubble density, by definition");
    assert_close(largest(it, method, &share, &finding), 0.95 * bubble, 2e-10, "0.95 of the bubble density");
    arena_free(it->arena);
}

static void a_largest_mass_is_met_and_a_little_more_is_not(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "soave-redlich-kwong");
    struct predicate rules[] = {
        pressure_within_test(it, 338.15, 1.0),
        pressure_within_test(it, 288.15, 0.5),
        of_phases(PREDICATE_NO_LIQUID, 253.15, 323.15),
        compared(253.15, 300.15, SYMBOL_LIQUID_VOLUME, RELATION_AT_MOST, formula_number(it, 0.9)),
    };
    rules[1].from = 233.15;
    for (size_t i = 0; i < sizeof rules / sizeof *rules; i++) {
        struct predicate_finding finding;
        const double mass = largest(it, method, &rules[i], &finding);
        assert_true(finding.holds);
        assert_true(predicate_check(&it->run, method, &rules[i], mass).holds);
        assert_true(predicate_check(&it->run, method, &rules[i], 0.4 * mass).holds);
        assert_false(predicate_check(&it->run, method, &rules[i], mass * (1.0 + 1e-7)).holds);
    }
    arena_free(it->arena);
}

/* The level of a vessel filled near the critical density first falls, then rises, or the other way: the worst
 * temperature lies between the ends and the derivative of the margin vanishes there. */
static void a_worst_temperature_between_the_ends_is_located_to_a_millikelvin(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct predicate level = compared(250.0, 303.9, SYMBOL_LIQUID_VOLUME, RELATION_LESS, formula_number(it, 1.0));
    const double mass = 0.0502 * 0.0440098 / (1.03 * method->critical.molar_volume);
    const struct predicate_finding finding = predicate_check(&it->run, method, &level, mass);
    assert_int_equal(finding.answer, ANSWER_OK);
    assert_true(finding.worst_temperature > 251.0 && finding.worst_temperature < 303.0);
    for (int side = -1; side <= 1; side += 2) {
        struct predicate beside = level;
        beside.from = beside.to = finding.worst_temperature + 0.05 * side;
        assert_true(predicate_check(&it->run, method, &beside, mass).margin > finding.margin);
    }
    arena_free(it->arena);
}

static void liquid_full_just_below_the_critical_temperature_is_seen(void **state)
{
    (void)state;
    struct filled_vessel *it = filled_vessel_create();
    struct method_run *method = filled_vessel_method(it, "peng-robinson");
    const struct predicate level = compared(280.0, 320.0, SYMBOL_LIQUID_VOLUME, RELATION_LESS, formula_number(it, 1.0));
    assert_int_equal(fluid_set_t(method->at_t, method->fluid, 0.99985 * 304.1282), ANSWER_OK);
    struct saturation saturation;
    assert_int_equal(saturation_at_t(method->at_t, &saturation), ANSWER_OK);
    /* Liquid-full from 0.99985 Tc on: 0.05 K, between two steps of the search. */
    const double mass = 0.0502 * 0.0440098 / saturation.liquid_volume;
    const struct predicate_finding finding = predicate_check(&it->run, method, &level, mass);
    assert_int_equal(finding.answer, ANSWER_OK);
    assert_false(finding.holds);
    arena_free(it->arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_bracket_closes_around_its_root_and_keeps_its_sides),
        cmocka_unit_test(a_bracket_without_a_change_of_sign_has_no_root),
        cmocka_unit_test(a_jump_from_infinity_is_halved_to_the_tolerance),
        cmocka_unit_test(the_least_value_of_a_kink_is_found_between_grid_points),
        cmocka_unit_test(the_least_value_at_an_end_is_that_end_exactly),
        cmocka_unit_test(a_value_that_is_not_a_number_ends_a_search),
        cmocka_unit_test(the_largest_ideal_mass_is_p_v_over_r_t),
        cmocka_unit_test(a_gauge_bound_counts_from_its_own_zero),
        cmocka_unit_test(the_relations_mean_what_they_say),
        cmocka_unit_test(a_method_without_liquid_cannot_answer_questions_about_it),
        cmocka_unit_test(a_rating_the_vessel_lacks_leaves_the_rule_undecided),
        cmocka_unit_test(the_worst_temperature_of_a_pressure_is_the_hot_end),
        cmocka_unit_test(what_no_mass_breaks_is_unlimited_and_what_all_break_allows_none),
        cmocka_unit_test(phases_are_told_apart_by_density),
        cmocka_unit_test(above_the_critical_temperature_there_is_no_liquid_and_no_vapour_pressure),
        cmocka_unit_test(a_rule_on_liquid_density_speaks_of_the_liquid_beside_vapour),
        cmocka_unit_test(a_vessel_denser_than_the_method_knows_fails),
        cmocka_unit_test(what_only_the_densest_state_ends_is_unlimited),
        cmocka_unit_test(no_solid_is_decided_by_the_triple_point_alone),
        cmocka_unit_test(the_limits_of_the_phase_rules_are_the_saturated_densities),
        cmocka_unit_test(a_largest_mass_is_met_and_a_little_more_is_not),
        cmocka_unit_test(a_worst_temperature_between_the_ends_is_located_to_a_millikelvin),
        cmocka_unit_test(liquid_full_just_below_the_critical_temperature_is_seen),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
