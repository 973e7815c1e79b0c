/* The closed vessel: which state it is in, that amounts and volumes add up, and that nothing jumps where it turns from
 * one state into another. */
#include "equilibrium/closed_vessel.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const char *const METHODS[] = {"peng-robinson", "soave-redlich-kwong", "reference"};

/* A vessel of 49.7 L. */
#define VOLUME 49.7e-3

static struct fluid_at_t *propane_at(const char *method, double temperature, struct arena *arena)
{
    return sample_at_t(sample_pure(method, &SAMPLE_SUBSTANCE[PROPANE], arena), temperature, arena);
}

static void check_balance(const struct vessel_contents *vessel, double amount, const char *what)
{
    assert_close(vessel->vapour_amount + vessel->liquid_amount, amount, 1e-12, what);
    assert_close(vessel->vapour_amount * vessel->vapour_molar_volume +
                     vessel->liquid_amount * vessel->liquid_molar_volume,
                 VOLUME, 1e-12, what);
    assert_near(vessel->liquid_fraction, vessel->liquid_amount * vessel->liquid_molar_volume / VOLUME, 1e-12, what);
    assert_true(vessel->vapour_amount >= 0.0 && vessel->liquid_amount >= 0.0);
}

static void amounts_and_volumes_add_up_in_every_state(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (double T = 190.0; T < 460.0; T += 7.3) {
            struct fluid_at_t *at_t = propane_at(METHODS[k], T, arena);
            for (double density = 3.0; density < 13e3; density *= 1.4) { /* mol/m3 */
                struct vessel_contents vessel;
                const double amount = density * VOLUME;
                assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, amount, &vessel), ANSWER_OK);
                check_balance(&vessel, amount, METHODS[k]);
                assert_true(vessel.pressure > 0.0);
                assert_true(vessel.temperature == T);
                assert_int_equal(vessel.has_saturation, T < 369.0);
            }
        }
    }
    arena_free(arena);
}

static void the_state_follows_from_density_and_temperature(void **state)
{
    (void)state;
    /* Propane at 311 K: dew density about 690 mol/m3, bubble density about 10 700 mol/m3 (NIST, from memory). */
    static const struct {
        double T, density;
        enum vessel_state state;
    } cases[] = {
        {311.0, 300.0, VESSEL_VAPOUR},        {311.0, 5000.0, VESSEL_TWO_PHASE},
        {311.0, 12400.0, VESSEL_LIQUID_FULL}, {391.0, 5000.0, VESSEL_SUPERCRITICAL},
        {391.0, 300.0, VESSEL_SUPERCRITICAL},
    };
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (size_t c = 0; c < COUNT(cases); c++) {
            struct vessel_contents vessel;
            struct fluid_at_t *at_t = propane_at(METHODS[k], cases[c].T, arena);
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, cases[c].density * VOLUME, &vessel), ANSWER_OK);
            assert_int_equal(vessel.state, cases[c].state);
            const double fraction = vessel.liquid_fraction;
            assert_true(cases[c].state == VESSEL_TWO_PHASE     ? fraction > 0.0 && fraction < 1.0
                        : cases[c].state == VESSEL_LIQUID_FULL ? fraction >= 1.0
                                                               : fraction <= 0.0);
            if (cases[c].state == VESSEL_TWO_PHASE) {
                assert_near(vessel.pressure, vessel.saturation.pressure, 0.0, "two phases are at saturation");
            }
        }
    }
    arena_free(arena);
}

/* At the dew and the bubble density the single phase has the saturation pressure, and the liquid's share of the volume
 * runs to 0 and to 1. */
static void nothing_jumps_at_the_dew_and_the_bubble_density(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        static const double temperatures[] = {233.0, 311.0, 360.0, 369.0};
        for (size_t t = 0; t < COUNT(temperatures); t++) {
            struct fluid_at_t *at_t = propane_at(METHODS[k], temperatures[t], arena);
            struct saturation saturation;
            assert_int_equal(saturation_at_t(at_t, &saturation), ANSWER_OK);
            struct vessel_contents outside, inside;
            const double dew = VOLUME / saturation.vapour_volume, bubble = VOLUME / saturation.liquid_volume;
            const double little = 1e-9;
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, dew * (1.0 - little), &outside), ANSWER_OK);
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, dew * (1.0 + little), &inside), ANSWER_OK);
            assert_int_equal(outside.state, VESSEL_VAPOUR);
            assert_int_equal(inside.state, VESSEL_TWO_PHASE);
            assert_close(outside.pressure, inside.pressure, 3.0 * little, METHODS[k]);
            assert_near(inside.liquid_fraction, 0.0, 1e-7, METHODS[k]);
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, bubble * (1.0 + little), &outside), ANSWER_OK);
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, bubble * (1.0 - little), &inside), ANSWER_OK);
            assert_int_equal(outside.state, VESSEL_LIQUID_FULL);
            assert_int_equal(inside.state, VESSEL_TWO_PHASE);
            /* A cold liquid is stiff: a part in 1e9 of its density is worth several pascals. */
            assert_near(outside.pressure, inside.pressure, 10.0 + 1e-8 * inside.pressure, METHODS[k]);
            assert_near(inside.liquid_fraction, 1.0, 1e-7, METHODS[k]);
        }
    }
    arena_free(arena);
}

/* Close below the critical temperature, where the phases can no longer be told apart, the pressure goes on smoothly. */
static void the_pressure_is_continuous_through_the_critical_temperature(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct critical_point critical;
        assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
        const double amount = VOLUME / (1.003 * critical.molar_volume);
        double last = 0.0;
        for (double distance = 1e-3; distance > 1e-13; distance *= 0.3) {
            struct vessel_contents vessel;
            struct fluid_at_t *at_t = sample_at_t(fluid, critical.temperature * (1.0 - distance), arena);
            assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, amount, &vessel), ANSWER_OK);
            check_balance(&vessel, amount, METHODS[k]);
            assert_true(vessel.pressure > last * (1.0 - 1e-11));
            last = vessel.pressure;
        }
        assert_close(last, critical.pressure, 1e-5, "the critical pressure");
    }
    arena_free(arena);
}

static void the_ideal_gas_has_one_phase_at_any_density(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct vessel_contents vessel;
    struct fluid_at_t *at_t = propane_at("ideal-gas", 251.0, arena);
    assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, 213.0, &vessel), ANSWER_OK);
    assert_int_equal(vessel.state, VESSEL_GAS);
    assert_false(vessel.has_saturation);
    assert_close(vessel.pressure, 213.0 * GAS_CONSTANT * 251.0 / VOLUME, 1e-14, "closed form");
    check_balance(&vessel, 213.0, "ideal gas");
    arena_free(arena);
}

static void impossible_contents_are_out_of_range(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct fluid_at_t *at_t = propane_at("peng-robinson", 311.0, arena);
    struct vessel_contents vessel;
    const double b = phase_smallest_volume(at_t, (const double[]){1.0});
    assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, VOLUME / (0.99 * b), &vessel), ANSWER_OUT_OF_RANGE);
    const double odd[] = {0.0, -1.0, (double)NAN, (double)INFINITY};
    for (size_t i = 0; i < COUNT(odd); i++) {
        assert_int_equal(closed_vessel_at_tv(at_t, VOLUME, odd[i], &vessel), ANSWER_OUT_OF_RANGE);
        assert_int_equal(closed_vessel_at_tv(at_t, odd[i], 1.0, &vessel), ANSWER_OUT_OF_RANGE);
    }
    struct fluid_at_t *mixture = sample_at_t(sample_fluid_create(&SAMPLE_FLUIDS[2], arena), 311.0, arena);
    assert_int_equal(closed_vessel_at_tv(mixture, VOLUME, 1.0, &vessel), ANSWER_CANNOT);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(amounts_and_volumes_add_up_in_every_state),
        cmocka_unit_test(the_state_follows_from_density_and_temperature),
        cmocka_unit_test(nothing_jumps_at_the_dew_and_the_bubble_density),
        cmocka_unit_test(the_pressure_is_continuous_through_the_critical_temperature),
        cmocka_unit_test(the_ideal_gas_has_one_phase_at_any_density),
        cmocka_unit_test(impossible_contents_are_out_of_range),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
