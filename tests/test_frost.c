/* Solids: their sublimation lines and fugacities, frost in compressed gases against measurements, and the water that
 * compressed gases hold. */
#include "filling/frost.h"
#include "support/check.h"
#include "support/measured_mixture.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* ---- sublimation lines ------------------------------------------------------------------------------------------- */

static const struct solid_spec *solid_of(const char *name, struct arena *arena)
{
    const char *const names[] = {name};
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 1, arena);
    assert_non_null(m.spec->pure[0]->solid);
    return m.spec->pure[0]->solid;
}

/* The ice point was 273.10 K on the scale of 1937, whose deviations below it are not known better than some 0.1 K: 1 %
 * in pressure. */
static void dry_ice_has_its_measured_vapour_pressure(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct solid_spec *solid = solid_of("carbon-dioxide", arena);
    const struct measured_table table = measured_table_read("sublimation-carbon-dioxide.csv", arena);
    assert_true(table.count >= 8);
    for (size_t k = 0; k < table.count; k++) {
        double slope;
        const double T = measured_number(&table.rows[k], 0) + 0.05, p = 1e5 * measured_number(&table.rows[k], 1);
        assert_close(solid_sublimation_pressure(solid, T, &slope), p, 1.2e-2, "Giauque and Egan 1937");
    }
    arena_free(arena);
}

static const char *const WITH_SOLIDS[] = {"carbon-dioxide", "water",   "benzene", "nitrous-oxide",       "ammonia",
                                          "methane",        "ethane",  "xenon",   "sulfur-hexafluoride", "acetylene",
                                          "propane",        "nitrogen"};

/* Every form of the line; the slope and the departure enthalpy against differences. */
static void slopes_are_those_of_differences(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(WITH_SOLIDS); k++) {
        const struct measured_mixture m = measured_mixture_create("peng-robinson", &WITH_SOLIDS[k], 1, arena);
        const struct solid_spec *solid = m.spec->pure[0]->solid;
        if (solid == NULL) {
            continue;
        }
        for (double share = 0.9; share < 1.02; share += 0.0223) {
            const double T = share * solid->largest_temperature, h = 1e-4 * T, p = 3e6;
            double slope, unused;
            const double middle = solid_sublimation_pressure(solid, T, &slope);
            assert_true(middle > 0.0);
            const double upper = solid_sublimation_pressure(solid, T + h, &unused);
            const double lower = solid_sublimation_pressure(solid, T - h, &unused);
            assert_close(slope, log(upper / lower) / (2.0 * h), 1e-5, WITH_SOLIDS[k]);
            struct solid_state at, above, below;
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T + h), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &above), ANSWER_OK);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T - h), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &below), ANSWER_OK);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &at), ANSWER_OK);
            const double by_t = (above.ln_fugacity - below.ln_fugacity) / (2.0 * h);
            assert_close(at.departure_enthalpy, -m.fluid->gas_constant * T * T * by_t, 1e-5, WITH_SOLIDS[k]);
        }
    }
    arena_free(arena);
}

/* At the sublimation pressure the solid has the fugacity of its vapour; dln f/dp is v / (R T). */
static void a_solid_is_in_equilibrium_with_its_vapour(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const methods[] = {"multi-fluid", "peng-robinson", "lee-kesler", "ideal-gas"};
    static const char *const names[] = {"carbon-dioxide"};
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct measured_mixture m = measured_mixture_create(methods[k], names, 1, arena);
        const struct solid_spec *solid = m.spec->pure[0]->solid;
        struct solid_state at, pressed;
        double slope, one = 1.0;
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, 200.0), ANSWER_OK);
        const double p = solid_sublimation_pressure(solid, 200.0, &slope);
        struct phase *vapour = phase_create(1, arena);
        assert_int_equal(phase_tp(m.at_t, p, &one, BRANCH_VAPOUR, PHASE_LN_PHI, vapour), ANSWER_OK);
        assert_int_equal(solid_at(solid, m.at_t, p, &at), ANSWER_OK);
        assert_near(at.ln_fugacity, log(p) + vapour->ln_phi[0], 1e-13, methods[k]);
        assert_int_equal(solid_at(solid, m.at_t, p + 1e7, &pressed), ANSWER_OK);
        assert_near(pressed.ln_fugacity - at.ln_fugacity, 1e7 * 29.1e-6 / (m.fluid->gas_constant * 200.0), 1e-12,
                    "Poynting");
    }
    arena_free(arena);
}

/* ---- above the triple point -------------------------------------------------------------------------------------- */

/* Enthalpies of fusion at the triple point, J/mol: common handbook values, from memory. */
static const struct {
    const char *name;
    double enthalpy_of_fusion;
} MELTING[] = {
    {"carbon-dioxide", 9020.0}, {"methane", 939.0}, {"argon", 1180.0}, {"nitrogen", 720.0}, {"ethylene", 3350.0}};

/* One published line gives the heat of sublimation, the other, by Clapeyron's equation, that of fusion. The latter
 * carries the error of the solid's volume, itself from memory, divided by its small step to the liquid's. */
static void both_lines_know_of_one_solid(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(MELTING); k++) {
        const struct measured_mixture m = measured_mixture_create("multi-fluid", &MELTING[k].name, 1, arena);
        const struct solid_spec *solid = m.spec->pure[0]->solid;
        assert_non_null(solid->melting_from_triple);
        const double triple = solid->largest_temperature, one = 1.0;
        double slope;
        const double p = solid_sublimation_pressure(solid, triple, &slope);
        struct solid_state below, above;
        struct phase *liquid = phase_create(1, arena);
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, triple * (1.0 - 1e-9)), ANSWER_OK);
        assert_int_equal(solid_at(solid, m.at_t, p, &below), ANSWER_OK);
        assert_int_equal(below.line, SOLID_SUBLIMES);
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, triple * (1.0 + 1e-4)), ANSWER_OK);
        assert_int_equal(solid_at(solid, m.at_t, p, &above), ANSWER_OK);
        assert_int_equal(above.line, SOLID_MELTS);
        assert_int_equal(phase_tp(m.at_t, above.line_pressure, &one, BRANCH_LIQUID, PHASE_RESIDUAL, liquid), ANSWER_OK);
        const double RT = m.fluid->gas_constant * triple;
        const double fusion = RT * liquid->residual_enthalpy_rt - above.departure_enthalpy;
        const double by_sublimation = RT * liquid->residual_enthalpy_rt - below.departure_enthalpy;
        assert_near(above.ln_fugacity - below.ln_fugacity, 0.0, 3e-3, "a reference equation hardly steps");
        assert_close(by_sublimation, MELTING[k].enthalpy_of_fusion, 0.03, MELTING[k].name);
        assert_close(fusion, MELTING[k].enthalpy_of_fusion, 0.3, MELTING[k].name);
    }
    arena_free(arena);
}

/* Above the triple point too the departure enthalpy is the slope of ln f, and Poynting's factor that by pressure. */
static void melting_solids_have_the_slopes_of_differences(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const methods[] = {"multi-fluid", "peng-robinson", "lee-kesler"};
    for (size_t k = 0; k < COUNT(MELTING) * COUNT(methods); k++) {
        const char *name = MELTING[k / COUNT(methods)].name;
        const struct measured_mixture m = measured_mixture_create(methods[k % COUNT(methods)], &name, 1, arena);
        const struct solid_spec *solid = m.spec->pure[0]->solid;
        for (double share = 1.005; share < 1.0 + MELTING_FOLLOWED; share += 0.0223) {
            const double T = share * solid->largest_temperature, h = 1e-4 * T, p = 3e7;
            struct solid_state at, above, below, pressed;
            if (solid_line_at(solid, true, T + h) != SOLID_MELTS) {
                continue;
            }
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T + h), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &above), ANSWER_OK);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T - h), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &below), ANSWER_OK);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, p, &at), ANSWER_OK);
            assert_int_equal(solid_at(solid, m.at_t, 2.0 * p, &pressed), ANSWER_OK);
            const double RT = m.fluid->gas_constant * T;
            assert_close(at.departure_enthalpy, -RT * T * (above.ln_fugacity - below.ln_fugacity) / (2.0 * h), 1e-5,
                         name);
            assert_near(pressed.ln_fugacity - at.ln_fugacity, p * solid->molar_volume / RT, 1e-12, name);
        }
    }
    arena_free(arena);
}

/* The line that begins at the triple point and rises is followed, and not far; the melting line of ice falls, and the
 * ices that melt above it are others. A method without liquids keeps the sublimation line, drawn out. */
static void lines_are_followed_as_far_as_they_serve(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const struct {
        const char *name;
        double temperature;
        bool knows_liquids;
        enum solid_line line;
    } cases[] = {
        {"carbon-dioxide", 216.592, true, SOLID_SUBLIMES},
        {"carbon-dioxide", 216.593, true, SOLID_MELTS},
        {"carbon-dioxide", 231.7, true, SOLID_MELTS},
        {"carbon-dioxide", 231.8, true, SOLID_NOT_KNOWN},
        {"carbon-dioxide", 220.0, false, SOLID_SUBLIMES},
        {"carbon-dioxide", 224.0, false, SOLID_NOT_KNOWN},
        {"ethylene", 110.0, true, SOLID_MELTS},
        {"ethylene", 110.5, true, SOLID_NOT_KNOWN},
        {"water", 273.2, true, SOLID_SUBLIMES},
        {"water", 290.0, true, SOLID_NOT_KNOWN},
        {"nitrous-oxide", 183.0, true, SOLID_SUBLIMES}, /* its triple point is at 182.33 K */
    };
    for (size_t i = 0; i < COUNT(cases); i++) {
        assert_int_equal(solid_line_at(solid_of(cases[i].name, arena), cases[i].knows_liquids, cases[i].temperature),
                         cases[i].line);
    }
    arena_free(arena);
}

/* ---- frost of carbon dioxide in nitrogen ------------------------------------------------------------------------- */

/* The mole fraction of carbon dioxide at which the gas has the solid's fugacity, by halving. */
static double frost_fraction(const struct measured_mixture *m, const struct fluid_at_t *pure, double p,
                             struct phase *gas)
{
    struct solid_state solid;
    double low = 1e-8, high = 0.5;
    assert_int_equal(solid_at(m->spec->pure[1]->solid, pure, p, &solid), ANSWER_OK);
    for (int k = 0; k < 60; k++) {
        const double y = sqrt(low * high), n[] = {1.0 - y, y};
        assert_int_equal(phase_tp(m->at_t, p, n, BRANCH_VAPOUR, PHASE_LN_PHI, gas), ANSWER_OK);
        *(log(y * p) + gas->ln_phi[1] < solid.ln_fugacity ? &low : &high) = y;
    }
    return sqrt(low * high);
}

/* Largest deviation from the measurements up to a pressure (Pa), and their number. */
struct deviation {
    size_t count, close; /* close: within what the measurements carry */
    double mean, worst;
};

/* Smoothed values of mole fractions down to 1e-4: no uncertainty is stated; the scatter of the series is this. */
#define MEASURED_TO 0.03

static struct deviation frost_deviation(const char *method, double lowest, double highest, double coldest,
                                        struct arena *arena)
{
    static const char *const names[] = {"nitrogen", "carbon-dioxide"};
    const struct measured_mixture m = measured_mixture_create(method, names, 2, arena);
    const struct measured_mixture alone = measured_mixture_create(method, &names[1], 1, arena);
    const struct measured_table table = measured_table_read("frost-carbon-dioxide.csv", arena);
    struct phase *gas = phase_create(2, arena);
    struct deviation deviation = {0, 0, 0.0, 0.0};
    for (size_t k = 0; k < table.count; k++) {
        const double T = measured_number(&table.rows[k], 0), p = 1e5 * measured_number(&table.rows[k], 1);
        if (!(p > lowest && p <= highest && T >= coldest)) {
            continue;
        }
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, T), ANSWER_OK);
        assert_int_equal(fluid_set_t(alone.at_t, alone.fluid, T), ANSWER_OK);
        const double y = frost_fraction(&m, alone.at_t, p, gas);
        const double off = fabs(y / measured_number(&table.rows[k], 2) - 1.0);
        deviation.count++;
        deviation.close += off <= MEASURED_TO;
        deviation.mean += off;
        deviation.worst = fmax(deviation.worst, off);
        printf("  %.0f K %.1f bar: %.5f, measured %.5f, %+.1f %%\n", T, p / 1e5, y, measured_number(&table.rows[k], 2),
               100.0 * (y / measured_number(&table.rows[k], 2) - 1.0));
    }
    deviation.mean /= (double)deviation.count;
    printf("frost of carbon dioxide in nitrogen, %s, %.0f to %.0f bar, from %.0f K: %zu points, %zu within 3 %%, mean "
           "%.1f %%, worst %.1f %%\n",
           method, lowest / 1e5, highest / 1e5, coldest, deviation.count, deviation.close, 100.0 * deviation.mean,
           100.0 * deviation.worst);
    return deviation;
}

/* What the mixture equation adds to the 3 % of the measurements grows with density: 11 % at the median to 200 bar. */
static void frost_points_in_nitrogen_are_those_measured(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct deviation thin = frost_deviation("multi-fluid", 0.0, 1.02e7, 150.0, arena);
    assert_true(thin.close >= 15 && thin.mean < 0.05 && thin.worst < 0.18);
    const struct deviation dense = frost_deviation("multi-fluid", 1.02e7, 2.1e7, 150.0, arena);
    assert_true(dense.count >= 8 && dense.mean < 0.15 && dense.worst < 0.30);
    const struct deviation cubic = frost_deviation("peng-robinson", 0.0, 1.02e7, 150.0, arena);
    assert_true(cubic.mean < 0.15);
    arena_free(arena);
}

/* ---- water ------------------------------------------------------------------------------------------------------- */

/* The mixture equation is known to be 4 to 5 % off, 13 % at the worst; the measurements are good to 0.3 %. */
static void compressed_carbon_dioxide_holds_the_water_measured(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"carbon-dioxide", "water"};
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 2, arena);
    const struct measured_table table = measured_table_read("water-content.csv", arena);
    struct deviation deviation = {0, 0, 0.0, 0.0};
    for (size_t k = 0; k < table.count; k++) {
        const double T = measured_number(&table.rows[k], 0), p = 1e5 * measured_number(&table.rows[k], 1);
        const double z[] = {0.5, 0.5};
        if (p > 6.0e6 || measured_phases(&m, T, p, z) != 2) {
            continue;
        }
        const double off = fabs(m.split->phase[0].x[1] / measured_number(&table.rows[k], 2) - 1.0);
        deviation.count++;
        deviation.mean += off;
        deviation.worst = fmax(deviation.worst, off);
    }
    deviation.mean /= (double)deviation.count;
    printf("water in compressed carbon dioxide, multi-fluid: %zu points, mean %.1f %%, worst %.1f %%\n",
           deviation.count, 100.0 * deviation.mean, 100.0 * deviation.worst);
    assert_true(deviation.count >= 8 && deviation.mean < 0.06 && deviation.worst < 0.15);
    arena_free(arena);
}

/* Enhancement factors f of water over liquid in air, x_w = f p_sat / p; from memory, of R. W. Hyland, J. Res. Natl.
 * Bur. Stand. 79A (1975) 551, and D. P. Wylie and R. S. Fisher, J. Chem. Eng. Data 41 (1996) 133: unverified, rounded.
 */
static void compressed_air_holds_more_water_than_its_partial_pressure(void **state)
{
    (void)state;
    static const struct {
        double pressure, factor;
    } known[] = {{1e5, 1.004}, {5e5, 1.019}, {1e6, 1.037}, {2e6, 1.08}, {5e6, 1.19}};
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"nitrogen", "oxygen", "water"};
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 3, arena);
    const double saturation_pressure = 2339.3; /* Pa at 293.15 K; W. Wagner and A. Pruss 2002 */
    double last = 1.0;
    for (size_t k = 0; k < COUNT(known); k++) {
        const double z[] = {0.395, 0.105, 0.5};
        assert_int_equal(measured_phases(&m, 293.15, known[k].pressure, z), 2);
        const double factor = m.split->phase[0].x[2] * known[k].pressure / saturation_pressure;
        printf("enhancement of water in air at 20 degC, %.0f bar: %.4f, from memory %.3f\n", known[k].pressure / 1e5,
               factor, known[k].factor);
        assert_true(factor > last);
        assert_near(factor, known[k].factor, 0.01 + 0.3 * (known[k].factor - 1.0),
                    "Hyland; Wylie and Fisher, recalled");
        last = factor;
    }
    arena_free(arena);
}

/* ---- the lowest density that freezes ----------------------------------------------------------------------------- */

/* A mixture of the library with fractions of its own; it must not move. */
struct blend {
    struct case_fluid fluid;
    double fractions[3];
    struct method_run method;
};

static void blend_set_up(struct blend *blend, const char *method, const char *const names[], const double z[],
                         size_t count, struct arena *arena)
{
    blend->fluid = *measured_case_fluid(method, names, count, arena);
    blend->fluid.fractions = blend->fractions;
    blend->fluid.molar_mass = 0.0;
    for (size_t i = 0; i < count; i++) {
        blend->fractions[i] = z[i];
        blend->fluid.molar_mass += z[i] * blend->fluid.components[i]->molar_mass.value;
    }
    blend->method = method_run_create(&blend->fluid, method, true, arena);
    assert_non_null(blend->method.fluid);
}

/* A thin gas freezes where its partial pressure is the sublimation pressure; at the limit the fugacities are
 * equal. */
static void frost_begins_at_equal_fugacities(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"nitrogen", "carbon-dioxide", "water"};
    static const char *const methods[] = {"multi-fluid", "peng-robinson", "peng-robinson-1978"};
    static const double z[] = {0.8989, 0.1, 0.0011};
    for (size_t k = 0; k < COUNT(methods); k++) {
        struct blend *blend = arena_alloc(arena, 1, sizeof *blend);
        blend_set_up(blend, methods[k], names, z, 3, arena);
        for (double T = 150.0; T < 270.0; T += 13.0) {
            struct frost_limit limit;
            assert_int_equal(frost_limit_at(&blend->fluid, &blend->method, T, &limit), ANSWER_OK);
            assert_true(limit.forms);
            assert_near(limit.at.value, 0.0, 1e-9, methods[k]);
            const double fraction = z[limit.at.component];
            double slope;
            const double p_sub =
                solid_sublimation_pressure(blend->fluid.components[limit.at.component]->spec.solid, T, &slope);
            assert_close(limit.ideal_pressure, p_sub / fraction, 1e-13, "the rule of partial pressures");
            if (limit.ideal_pressure < 2e4) {
                assert_close(limit.at.pressure, limit.ideal_pressure, 0.01, methods[k]);
            }
        }
    }
    arena_free(arena);
}

/* Pure carbon dioxide above its triple point: its vapour and its liquid are no solid up to the melting pressure of Span
 * and Wagner 1996. Nitrogen in it, which the solid does not take up, lowers its fugacity: the liquid freezes later, at
 * a higher pressure. */
static void liquids_freeze_at_their_melting_pressure(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"carbon-dioxide", "nitrogen"};
    static const char *const methods[] = {"multi-fluid", "peng-robinson"};
    static const double z[] = {0.97, 0.03}, pure[] = {1.0};
    for (size_t k = 0; k < COUNT(methods); k++) {
        struct blend *alone = arena_alloc(arena, 1, sizeof *alone), *mixed = arena_alloc(arena, 1, sizeof *mixed);
        blend_set_up(alone, methods[k], names, pure, 1, arena);
        blend_set_up(mixed, methods[k], names, z, 2, arena);
        const struct melting_part *part = alone->fluid.components[0]->spec.solid->melting_from_triple;
        for (double T = 217.0; T < 226.0; T += 3.1) {
            struct frost_limit limit;
            const double p_melt = solid_melting_pressure(part, T);
            assert_int_equal(frost_limit_at(&alone->fluid, &alone->method, T, &limit), ANSWER_OK);
            assert_true(limit.forms);
            assert_close(limit.at.pressure, p_melt, 1e-7, methods[k]);
            assert_int_equal(frost_limit_at(&mixed->fluid, &mixed->method, T, &limit), ANSWER_OK);
            assert_true(limit.forms && limit.at.component == 0);
            assert_true(limit.at.pressure > 1.1 * p_melt);
            assert_true(isnan(limit.ideal_pressure));
        }
    }
    arena_free(arena);
}

/* Warm enough there is no frost; a component of which no solid is known is named below its triple point only. */
static void what_cannot_freeze_is_told(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"nitrogen", "carbon-dioxide", "propane"};
    static const double z[] = {0.6, 0.3, 0.1};
    struct blend *blend = arena_alloc(arena, 1, sizeof *blend);
    blend_set_up(blend, "peng-robinson", names, z, 3, arena);
    struct frost_limit limit;
    assert_int_equal(frost_limit_at(&blend->fluid, &blend->method, 300.0, &limit), ANSWER_OK);
    assert_false(limit.forms);
    assert_false(frost_is_possible(&blend->fluid, &blend->method, 300.0));
    assert_true(frost_is_possible(&blend->fluid, &blend->method, 200.0));
    assert_null(frost_unknown(&blend->fluid, 200.0));
    assert_ptr_equal(frost_unknown(&blend->fluid, 80.0), blend->fluid.components[2]);
    blend->fractions[2] = 0.0;
    assert_null(frost_unknown(&blend->fluid, 80.0));
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(dry_ice_has_its_measured_vapour_pressure),
        cmocka_unit_test(slopes_are_those_of_differences),
        cmocka_unit_test(a_solid_is_in_equilibrium_with_its_vapour),
        cmocka_unit_test(both_lines_know_of_one_solid),
        cmocka_unit_test(melting_solids_have_the_slopes_of_differences),
        cmocka_unit_test(lines_are_followed_as_far_as_they_serve),
        cmocka_unit_test(frost_points_in_nitrogen_are_those_measured),
        cmocka_unit_test(compressed_carbon_dioxide_holds_the_water_measured),
        cmocka_unit_test(frost_begins_at_equal_fugacities),
        cmocka_unit_test(liquids_freeze_at_their_melting_pressure),
        cmocka_unit_test(what_cannot_freeze_is_told),
        cmocka_unit_test(compressed_air_holds_more_water_than_its_partial_pressure),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
