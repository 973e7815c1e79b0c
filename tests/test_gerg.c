/* gerg-2008 from the library: the published check mixture, and what tells it from multi-fluid. */
#include "fluid/caloric.h"
#include "fluid/phase.h"
#include "support/measured_mixture.h"

#include "support/check.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* The check mixture in the AGA8 repository of NIST (C and Fortran sources), at 400 K and 50 MPa. */
enum { CHECK_COUNT = 21 };
static const char *const CHECK_NAMES[CHECK_COUNT] = {
    "methane",    "nitrogen",  "carbon-dioxide",  "ethane",    "propane",          "isobutane", "n-butane",
    "isopentane", "n-pentane", "n-hexane",        "n-heptane", "n-octane",         "n-nonane",  "n-decane",
    "hydrogen",   "oxygen",    "carbon-monoxide", "water",     "hydrogen-sulfide", "helium",    "argon"};
static const double CHECK_X[CHECK_COUNT] = {0.77824, 0.02,    0.06,    0.08,    0.03,    0.0015,  0.003,
                                            0.0005,  0.00165, 0.00215, 0.00088, 0.00024, 0.00015, 0.00009,
                                            0.004,   0.005,   0.002,   0.0001,  0.0025,  0.007,   0.001};

static void the_published_check_mixture_is_reproduced_in_every_listed_property(void **state)
{
    (void)state;
    static const char source[] = "check mixture of the AGA8 repository of NIST";
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("gerg-2008", CHECK_NAMES, CHECK_COUNT, arena);
    struct phase *phase = phase_create(CHECK_COUNT, arena);
    struct caloric caloric;
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, 400.0), ANSWER_OK);
    assert_int_equal(phase_tp(m.at_t, 50e6, CHECK_X, BRANCH_STABLE, PHASE_DLN_PHI_DT, phase), ANSWER_OK);
    const double V = phase->volume;
    assert_int_equal(caloric_at_volume(m.at_t, V, CHECK_X, &caloric), ANSWER_OK);
    assert_close(1.0 / V, 12798.28626082062, 1e-13, source);
    assert_close(phase->Z, 1.174690666383717, 1e-13, source);
    assert_close(-phase->dp_dv * V * V, 7000.694030193327, 1e-12, source);
    assert_close(phase->dp_dt, 235983.2292593096, 1e-12, source);
    assert_close(caloric.enthalpy - 50e6 * V, -2746.49290121253, 1e-11, source);
    assert_close(caloric.enthalpy, 1160.280160510973, 1e-11, source);
    assert_close(caloric.entropy, -38.57590392409089, 1e-11, source);
    assert_close(caloric.heat_capacity_v, 39.02948218156372, 1e-12, source);
    assert_close(caloric.heat_capacity_p, 58.45522051000366, 1e-12, source);
    assert_close(caloric.speed_of_sound, 714.4248840596024, 1e-11, source);
    assert_close(caloric.enthalpy - 400.0 * caloric.entropy, 16590.64173014733, 1e-11, source);
    arena_free(arena);
}

/* With n_i = 0 for all others the mixture is the component by itself, also in what it says of the others. */
static void a_mixture_of_one_component_is_that_component(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "methane", "ethane"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("gerg-2008", names, COUNT(names), arena);
    struct phase *mixed = phase_create(COUNT(names), arena);
    for (size_t i = 0; i < COUNT(names); i++) {
        const struct fluid_spec one = {.count = 1, .pure = &m.spec->pure[i]};
        struct fluid_lack_report lack;
        const struct fluid *alone = fluid_create("gerg-2008", &one, arena, &lack);
        assert_non_null(alone);
        assert_string_equal(alone->ops->name, "gerg-2008");
        struct fluid_at_t *at_t = fluid_at_t_create(alone, arena);
        double n[COUNT(names)] = {0.0};
        n[i] = 1.3;
        for (double T = 95.0; T < 500.0; T *= 1.27) {
            struct pure_arrays arrays;
            struct phase pure;
            phase_of_pure(&pure, &arrays);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, T), ANSWER_OK);
            assert_int_equal(fluid_set_t(at_t, alone, T), ANSWER_OK);
            assert_int_equal(phase_tp(m.at_t, 4.1e6, n, BRANCH_STABLE, PHASE_LN_PHI, mixed), ANSWER_OK);
            assert_int_equal(phase_tp(at_t, 4.1e6, &n[i], BRANCH_STABLE, PHASE_LN_PHI, &pure), ANSWER_OK);
            assert_close(mixed->volume, pure.volume, 1e-11, names[i]);
            assert_close(mixed->ln_phi[i], arrays.ln_phi, 1e-11, names[i]);
        }
    }
    arena_free(arena);
}

static void a_gas_outside_the_standard_is_lacking(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "methane"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("gerg-2008", names, COUNT(names), arena);
    struct pure_spec stranger = *m.spec->pure[0];
    stranger.gerg_2008 = NULL;
    const struct pure_spec *list[] = {m.spec->pure[1], &stranger};
    const struct fluid_spec spec = {.count = 2, .pure = list};
    struct fluid_lack_report lack;
    assert_null(fluid_create("gerg-2008", &spec, arena, &lack));
    assert_int_equal(lack.lack, LACK_PARAMETERS);
    assert_int_equal(lack.component, 1);
    arena_free(arena);
}

static void the_range_is_the_standards_extended_one(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("gerg-2008", CHECK_NAMES, CHECK_COUNT, arena);
    const struct fluid_ops *ops = m.fluid->ops;
    assert_int_equal(ops->range(m.fluid, 59.0, 1e5).side, RANGE_TOO_COLD);
    assert_int_equal(ops->range(m.fluid, 701.0, 1e5).side, RANGE_TOO_HOT);
    assert_int_equal(ops->range(m.fluid, 300.0, 71e6).side, RANGE_TOO_HIGH_PRESSURE);
    assert_int_equal(ops->range(m.fluid, 300.0, 69e6).side, RANGE_INSIDE);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_published_check_mixture_is_reproduced_in_every_listed_property),
        cmocka_unit_test(a_mixture_of_one_component_is_that_component),
        cmocka_unit_test(a_gas_outside_the_standard_is_lacking),
        cmocka_unit_test(the_range_is_the_standards_extended_one),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
