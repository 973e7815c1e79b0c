/* The stable phase of a pure fluid at a pressure: the saturation pressure decides. */
#include "equilibrium/saturation.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const char *const METHODS[] = {"peng-robinson", "soave-redlich-kwong", "reference"};

static struct fluid_at_t *propane_at(const char *method, double temperature, struct arena *arena)
{
    return sample_at_t(sample_pure(method, &SAMPLE_SUBSTANCE[PROPANE], arena), temperature, arena);
}

static void saturation_divides_vapour_from_liquid(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {2.3};
    static const double temperatures[] = {120.0, 233.0, 311.0, 360.0, 369.8};
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (size_t t = 0; t < COUNT(temperatures); t++) {
            struct fluid_at_t *at_t = propane_at(METHODS[k], temperatures[t], arena);
            struct saturation saturation;
            struct phase phase = {.ln_phi = NULL};
            assert_int_equal(saturation_at_t(at_t, &saturation), ANSWER_OK);
            const double p = saturation.pressure;
            assert_int_equal(stable_phase_tp(at_t, p * (1.0 - 1e-6), n, 0, &phase), ANSWER_OK);
            assert_int_equal(phase.branch, BRANCH_VAPOUR);
            assert_close(phase.volume, n[0] * saturation.vapour_volume, 2e-2, "saturated vapour");
            assert_int_equal(stable_phase_tp(at_t, p * (1.0 + 1e-6), n, 0, &phase), ANSWER_OK);
            assert_int_equal(phase.branch, BRANCH_LIQUID);
            assert_close(phase.volume, n[0] * saturation.liquid_volume, 2e-2, "saturated liquid");
        }
    }
    arena_free(arena);
}

/* Of all roots the stable one has the smallest fugacity. */
static void no_other_root_has_a_lower_fugacity(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (double T = 180.0; T < 420.0; T += 13.7) {
            struct fluid_at_t *at_t = propane_at(METHODS[k], T, arena);
            for (double p = 2e3; p < 3e7; p *= 1.37) {
                struct pure_arrays stable_arrays, other_arrays;
                struct phase stable, other;
                phase_of_pure(&stable, &stable_arrays);
                phase_of_pure(&other, &other_arrays);
                assert_int_equal(stable_phase_tp(at_t, p, n, PHASE_LN_PHI, &stable), ANSWER_OK);
                assert_true(stable.dp_dv < 0.0);
                for (int branch = BRANCH_VAPOUR; branch <= BRANCH_LIQUID; branch++) {
                    if (phase_tp(at_t, p, n, (enum branch)branch, PHASE_LN_PHI, &other) == ANSWER_OK) {
                        assert_true(stable_arrays.ln_phi <= other_arrays.ln_phi + 1e-11);
                    }
                }
            }
        }
    }
    arena_free(arena);
}

static void above_the_critical_temperature_there_is_no_branch(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        struct fluid_at_t *at_t = propane_at(METHODS[k], 391.0, arena);
        struct phase phase = {.ln_phi = NULL};
        for (double p = 1e3; p < 1e8; p *= 4.1) {
            assert_int_equal(stable_phase_tp(at_t, p, n, 0, &phase), ANSWER_OK);
            assert_int_equal(phase.branch, BRANCH_STABLE);
        }
    }
    arena_free(arena);
}

static void above_the_critical_pressure_a_cold_fluid_is_liquid(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        struct phase phase = {.ln_phi = NULL};
        assert_int_equal(stable_phase_tp(propane_at(METHODS[k], 301.0, arena), 7.1e6, n, 0, &phase), ANSWER_OK);
        assert_int_equal(phase.branch, BRANCH_LIQUID);
    }
    arena_free(arena);
}

static void it_answers_right_up_to_the_critical_temperature(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct critical_point critical;
        assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
        for (double distance = 1e-4; distance > 1e-14; distance *= 0.1) {
            struct fluid_at_t *at_t = sample_at_t(fluid, critical.temperature * (1.0 - distance), arena);
            struct phase phase = {.ln_phi = NULL};
            assert_int_equal(stable_phase_tp(at_t, 0.99 * critical.pressure, n, 0, &phase), ANSWER_OK);
            assert_true(phase.volume > critical.molar_volume);
            assert_int_equal(stable_phase_tp(at_t, 1.01 * critical.pressure, n, 0, &phase), ANSWER_OK);
            assert_true(phase.volume < critical.molar_volume);
        }
    }
    arena_free(arena);
}

static void without_a_liquid_the_phase_is_vapour(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.7};
    struct phase phase = {.ln_phi = NULL};
    assert_int_equal(stable_phase_tp(propane_at("ideal-gas", 251.0, arena), 3e5, n, 0, &phase), ANSWER_OK);
    assert_int_equal(phase.branch, BRANCH_VAPOUR);
    assert_close(phase.volume, n[0] * GAS_CONSTANT * 251.0 / 3e5, 1e-14, "closed form");
    struct fluid_at_t *mixture = sample_at_t(sample_fluid_create(&SAMPLE_FLUIDS[2], arena), 251.0, arena);
    assert_int_equal(stable_phase_tp(mixture, 3e5, SAMPLE_FLUIDS[2].n, 0, &phase), ANSWER_CANNOT);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(saturation_divides_vapour_from_liquid),
        cmocka_unit_test(no_other_root_has_a_lower_fugacity),
        cmocka_unit_test(above_the_critical_temperature_there_is_no_branch),
        cmocka_unit_test(above_the_critical_pressure_a_cold_fluid_is_liquid),
        cmocka_unit_test(it_answers_right_up_to_the_critical_temperature),
        cmocka_unit_test(without_a_liquid_the_phase_is_vapour),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
