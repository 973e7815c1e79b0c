/* The `reference` method's density roots and its starting values for saturation. */
#include "equilibrium/saturation.h"
#include "support/check.h"
#include "support/reference_subject.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* ---- roots ----------------------------------------------------------------------------------------------------- */

/* The root is stable and gives the pressure back, to the rounding that a stiff liquid's pressure has. */
static void check_root(const struct subject *gas, double pressure, double density)
{
    char what[120];
    const struct phase phase = phase_at(gas, density);
    const double modulus = -phase.dp_dv * phase.volume;
    snprintf(what, sizeof what, "%s, %.17g K, root at %.17g Pa gives the pressure back", gas->name,
             gas->at_t->temperature, pressure);
    assert_near(phase.pressure, pressure, 1e-9 * pressure + 2e-13 * modulus, what);
    assert_true(phase.dp_dv < 0.0);
}

static double temperature_step(const struct subject *gas, int i, int count)
{
    const struct reference_spec *equation = gas->equation;
    return equation->smallest_temperature +
           (equation->largest_temperature - equation->smallest_temperature) * i / (count - 1);
}

/* Pressures from 1e-3 Pa to the equation's largest, at temperatures over its whole range and near the critical one. */
static void check_roots_over_the_range(struct subject *gas)
{
    static const double NEAR[] = {0.99, 0.999, 0.9999, 0.99999, 1.00001, 1.0001, 1.001, 1.01};
    const int grid = 20;
    for (int i = 0; i < grid + (int)COUNT(NEAR); i++) {
        const double Tc = gas->equation->critical_temperature;
        const double T = i < grid ? temperature_step(gas, i, grid) : Tc * NEAR[i - grid];
        set_temperature(gas, T);
        struct saturation saturation = {0};
        assert_int_equal(saturation_at_t(gas->at_t, &saturation), T < Tc ? ANSWER_OK : ANSWER_NO_SUCH_ROOT);
        for (int k = 0; k <= 40; k++) {
            const double p = 1e-3 * pow(gas->equation->largest_pressure / 1e-3, k / 40.0);
            double vapour = 0.0, liquid = 0.0, stable = 0.0;
            assert_int_equal(density_at(gas, p, BRANCH_STABLE, &stable), ANSWER_OK);
            check_root(gas, p, stable);
            const enum answer has_vapour = density_at(gas, p, BRANCH_VAPOUR, &vapour);
            const enum answer has_liquid = density_at(gas, p, BRANCH_LIQUID, &liquid);
            if (T >= Tc) {
                assert_int_equal(has_vapour, ANSWER_OK);
                assert_int_equal(has_liquid, ANSWER_OK);
                assert_true(vapour == stable && liquid == stable); /* one root, found in one way */
                continue;
            }
            const bool is_vapour = p < saturation.pressure;
            assert_int_equal(is_vapour ? has_vapour : has_liquid, ANSWER_OK);
            assert_true(is_vapour ? stable == vapour && stable < 1.0000001 / saturation.vapour_volume
                                  : stable == liquid && stable > 0.9999999 / saturation.liquid_volume);
        }
    }
}

static void roots_exist_from_a_millipascal_to_the_largest_pressure(void **state)
{
    (void)state;
    with_each_gas(check_roots_over_the_range);
}

/* The first density from `start` on, in equal steps of `step`, that is not stable; the largest (vapour) or smallest
 * (liquid) pressure before it. */
static double branch_end(const struct subject *gas, double start, double step, double *pressure)
{
    double density = start;
    *pressure = phase_at(gas, density).pressure;
    for (int i = 0; i < 4000; i++) {
        const struct phase phase = phase_at(gas, density + step);
        if (!(phase.dp_dv < 0.0)) {
            break;
        }
        density += step;
        *pressure = phase.pressure;
    }
    return density;
}

static void check_branch_ends(struct subject *gas)
{
    static const double REDUCED[] = {0.6, 0.75, 0.9, 0.98, 0.999};
    for (size_t i = 0; i < COUNT(REDUCED); i++) {
        struct saturation_start start;
        double vapour_pressure, liquid_pressure, density, n[] = {1.0};
        const double T = REDUCED[i] * gas->equation->critical_temperature, critical = gas->equation->critical_density;
        if (T < gas->equation->smallest_temperature) {
            continue;
        }
        set_temperature(gas, T);
        assert_int_equal(gas->fluid->ops->saturation_start(gas->at_t, &start), ANSWER_OK);
        const double vapour_end = branch_end(gas, 1.0 / start.vapour_volume,
                                             (critical - 1.0 / start.vapour_volume) / 2000.0, &vapour_pressure);
        const double liquid_end = branch_end(gas, 1.0 / start.liquid_volume,
                                             (critical - 1.0 / start.liquid_volume) / 2000.0, &liquid_pressure);
        assert_true(vapour_end < critical && liquid_end > critical);
        /* A metastable root just before the end, and none just beyond, be a spurious loop there or not. */
        const double inside = start.pressure + 0.98 * (vapour_pressure - start.pressure);
        assert_int_equal(density_at(gas, inside, BRANCH_VAPOUR, &density), ANSWER_OK);
        check_root(gas, inside, density);
        assert_true(density <= vapour_end);
        for (double p = vapour_pressure * 1.001; p < 20.0 * vapour_pressure; p *= 1.3) {
            assert_int_equal(density_at(gas, p, BRANCH_VAPOUR, &density), ANSWER_NO_SUCH_ROOT);
        }
        const double below = liquid_pressure + 0.02 * (start.pressure - liquid_pressure);
        if (below > 0.0) {
            assert_int_equal(density_at(gas, below, BRANCH_LIQUID, &density), ANSWER_OK);
            check_root(gas, below, density);
            assert_true(density >= liquid_end);
        }
        if (liquid_pressure > 0.0) {
            assert_int_equal(density_at(gas, 0.999 * liquid_pressure, BRANCH_LIQUID, &density), ANSWER_NO_SUCH_ROOT);
        }
        assert_true(gas->fluid->ops->smallest_volume(gas->at_t, n) < start.liquid_volume);
    }
}

static void each_branch_ends_at_its_limit_of_stability(void **state)
{
    (void)state;
    with_each_gas(check_branch_ends);
}

static void both_roots_are_compared_near_saturation(void **state)
{
    (void)state;
    struct subject gas;
    struct saturation saturation;
    double volume = 0.0;
    int roots = 0;
    const double n[] = {1.0};
    open_gas(&gas, "propane");
    set_temperature(&gas, 293.15);
    assert_int_equal(saturation_at_t(gas.at_t, &saturation), ANSWER_OK);
    assert_int_equal(
        gas.fluid->ops->volume(gas.at_t, saturation.pressure * (1.0 - 1e-8), n, BRANCH_STABLE, &volume, &roots),
        ANSWER_OK);
    assert_int_equal(roots, 2);
    assert_close(volume, saturation.vapour_volume, 1e-6, "below saturation the vapour is stable, Gibbs energy");
    assert_int_equal(
        gas.fluid->ops->volume(gas.at_t, saturation.pressure * (1.0 + 1e-8), n, BRANCH_STABLE, &volume, &roots),
        ANSWER_OK);
    assert_int_equal(roots, 2);
    assert_close(volume, saturation.liquid_volume, 1e-6, "above saturation the liquid is stable, Gibbs energy");
    close_gas(&gas);
}

static void what_has_no_meaning_is_out_of_range(void **state)
{
    (void)state;
    struct subject gas;
    double density;
    const double n[] = {1.0};
    struct helmholtz F = {0};
    open_gas(&gas, "nitrogen");
    set_temperature(&gas, 300.0);
    assert_int_equal(density_at(&gas, 0.0, BRANCH_STABLE, &density), ANSWER_OUT_OF_RANGE);
    assert_int_equal(density_at(&gas, -1e5, BRANCH_STABLE, &density), ANSWER_OUT_OF_RANGE);
    assert_int_equal(density_at(&gas, (double)NAN, BRANCH_STABLE, &density), ANSWER_OUT_OF_RANGE);
    assert_int_equal(density_at(&gas, 1e13, BRANCH_STABLE, &density), ANSWER_OUT_OF_RANGE);
    assert_int_equal(gas.fluid->ops->tv(gas.at_t, 0.0, n, 0, &F), ANSWER_OUT_OF_RANGE);
    assert_int_equal(gas.fluid->ops->tv(gas.at_t, (double)NAN, n, 0, &F), ANSWER_OUT_OF_RANGE);
    set_temperature(&gas, 100.0);
    assert_int_equal(density_at(&gas, 1e13, BRANCH_LIQUID, &density), ANSWER_OUT_OF_RANGE);
    close_gas(&gas);
}

/* ---- starting values ------------------------------------------------------------------------------------------ */

static void check_starts(struct subject *gas)
{
    const struct reference_spec *equation = gas->equation;
    const double Tc = equation->critical_temperature;
    for (int i = 0; i <= 200; i++) {
        /* Down from T/Tc = 0.9999 with shrinking distance, to 5 % below the equation's range. */
        const double distance = 1e-4 * pow((1.0 - 0.95 * equation->smallest_temperature / Tc) / 1e-4, i / 200.0);
        struct saturation_start start;
        struct saturation saturation;
        set_temperature(gas, Tc * (1.0 - distance));
        assert_int_equal(gas->fluid->ops->saturation_start(gas->at_t, &start), ANSWER_OK);
        assert_true(start.pressure > 0.0 && start.vapour_volume > start.liquid_volume);
        assert_true(phase_at(gas, 1.0 / start.vapour_volume).dp_dv < 0.0);
        assert_true(phase_at(gas, 1.0 / start.liquid_volume).dp_dv < 0.0);
        assert_int_equal(saturation_at_t(gas->at_t, &saturation), ANSWER_OK);
        assert_close(start.pressure, saturation.pressure, 1e-4, gas->name);
    }
}

static void starting_values_lie_on_the_right_sides_up_to_the_critical_point(void **state)
{
    (void)state;
    with_each_gas(check_starts);
}

static void without_fits_an_equation_finds_its_own_saturation(void **state)
{
    (void)state;
    struct reference_spec bare = *reference_gas("propane")->equation;
    bare.pressure_guess.form = bare.liquid_guess.form = bare.vapour_guess.form = GUESS_NONE;
    struct subject gas;
    open_equation(&gas, "propane without fits", &bare, 0.04409562);
    check_starts(&gas);
    close_gas(&gas);
}

/* UN class limits are judged at -50 degC; this equation is published from 273 K on. */
static void a_little_below_its_range_an_equation_still_answers(void **state)
{
    (void)state;
    struct subject gas;
    struct saturation saturation;
    open_gas(&gas, "cyclopropane");
    set_temperature(&gas, 223.15);
    assert_int_equal(saturation_at_t(gas.at_t, &saturation), ANSWER_OK);
    assert_close(saturation.pressure, 37519.3176117, 1e-10, "independent 30-digit evaluation of the same equation");
    set_temperature(&gas, 20.0);
    double density = 0.0;
    assert_true(density_at(&gas, 1e5, BRANCH_LIQUID, &density) != ANSWER_OK);
    close_gas(&gas);
}

static void an_equation_without_a_liquid_fails_below_its_critical_temperature(void **state)
{
    (void)state;
    struct reference_spec empty = *reference_gas("propane")->equation;
    struct saturation_start start;
    struct subject gas;
    double density = 0.0;
    empty.residual_count = 0;
    open_equation(&gas, "no terms", &empty, 0.044);
    set_temperature(&gas, 300.0);
    assert_int_equal(density_at(&gas, 1e5, BRANCH_VAPOUR, &density), ANSWER_FAILED);
    assert_int_equal(gas.fluid->ops->saturation_start(gas.at_t, &start), ANSWER_FAILED);
    set_temperature(&gas, 400.0);
    assert_int_equal(gas.fluid->ops->saturation_start(gas.at_t, &start), ANSWER_NO_SUCH_ROOT);
    assert_int_equal(density_at(&gas, 1e5, BRANCH_VAPOUR, &density), ANSWER_OK);
    assert_close(density, 1e5 / (8.314472 * 400.0), 1e-14, "without terms the gas is ideal");
    close_gas(&gas);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(roots_exist_from_a_millipascal_to_the_largest_pressure),
        cmocka_unit_test(each_branch_ends_at_its_limit_of_stability),
        cmocka_unit_test(both_roots_are_compared_near_saturation),
        cmocka_unit_test(what_has_no_meaning_is_out_of_range),
        cmocka_unit_test(starting_values_lie_on_the_right_sides_up_to_the_critical_point),
        cmocka_unit_test(without_fits_an_equation_finds_its_own_saturation),
        cmocka_unit_test(a_little_below_its_range_an_equation_still_answers),
        cmocka_unit_test(an_equation_without_a_liquid_fails_below_its_critical_temperature),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
