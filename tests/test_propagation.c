/* Uncertainty carried through models whose answer is known: linear, products, squares, and published examples. */
#include "filling/propagation.h"

#include "support/check.h"
#include "support/weighed_blend.h"

#include <math.h>

enum { INPUTS_MOST = 6, OUTPUTS_MOST = 3 };

/* ---- the models -------------------------------------------------------------------------------------------------- */

/* y = 3 x0 - 2 x1 + 0.5 x2 */
static enum model_answer linear(void *context, const double x[], double y[])
{
    (void)context;
    y[0] = 3.0 * x[0] - 2.0 * x[1] + 0.5 * x[2];
    return MODEL_OK;
}

/* Pressure of an ideal gas from n, T, V. */
#define R 8.31446261815324
static enum model_answer ideal_pressure(void *context, const double x[], double y[])
{
    (void)context;
    y[0] = x[0] * R * x[1] / x[2];
    return MODEL_OK;
}

static enum model_answer square(void *context, const double x[], double y[])
{
    (void)context;
    y[0] = x[0] * x[0];
    return MODEL_OK;
}

/* A root that numbers below 2 do not have, and a second output that never depends on anything. */
static enum model_answer root(void *context, const double x[], double y[])
{
    (void)context;
    if (x[0] < 2.0) {
        return MODEL_IMPOSSIBLE;
    }
    y[0] = sqrt(x[0] - 2.0 + 1.0);
    y[1] = 17.0;
    return MODEL_OK;
}

/* Whole numbers: nothing between. */
static enum model_answer rounded_down(void *context, const double x[], double y[])
{
    (void)context;
    y[0] = floor(x[0]);
    return MODEL_OK;
}

/* No answer anywhere but at the best estimate. */
static enum model_answer brittle(void *context, const double x[], double y[])
{
    (void)context;
    y[0] = x[0];
    return fabs(x[0] - 5.0) > 0.0 ? MODEL_NO_ANSWER : MODEL_OK;
}

/* The end-gauge of the Guide, JCGM 100:2008, H.1: l = ls + d - ls (da theta + as dt), metres. */
static enum model_answer end_gauge(void *context, const double x[], double y[])
{
    (void)context;
    const double ls = x[0], d = x[1], da = x[2], theta = x[3], as = x[4], dt = x[5];
    y[0] = ls + d - ls * (da * theta + as * dt);
    return MODEL_OK;
}

/* Mass calibration of JCGM 101:2008, 9.3: (m + dm) (1 + (a - 1.2) (1 / w - 1 / r)) - 100 000, mg and kg/m3. */
static enum model_answer mass_calibration(void *context, const double x[], double y[])
{
    (void)context;
    const double m = x[0], dm = x[1], a = x[2], w = x[3], r = x[4];
    y[0] = (m + dm) * (1.0 + (a - 1.2) * (1.0 / w - 1.0 / r)) - 100000.0;
    return MODEL_OK;
}

struct subject {
    double values[INPUTS_MOST], spreads[INPUTS_MOST];
    struct propagation_model model;
    struct arena *arena;
    struct first_order first;
};

static struct subject *subject(enum model_answer (*evaluate)(void *, const double[], double[]), size_t inputs,
                               size_t outputs, const double values[], const double spreads[])
{
    struct arena *arena = arena_create(NULL);
    struct subject *it = arena_alloc(arena, 1, sizeof *it);
    it->arena = arena;
    for (size_t i = 0; i < inputs; i++) {
        it->values[i] = values[i];
        it->spreads[i] = spreads[i];
    }
    it->model = (struct propagation_model){.input_count = inputs,
                                           .output_count = outputs,
                                           .values = it->values,
                                           .spreads = it->spreads,
                                           .evaluate = evaluate};
    it->first = propagate_first_order(&it->model, arena);
    return it;
}

static struct drawn draw(struct subject *it, size_t draws, uint64_t seed, size_t threads)
{
    return propagate_draws(&it->model, &it->first, draws, seed, threads, it->arena);
}

/* ---- first order ------------------------------------------------------------------------------------------------- */

/* u^2 = (3 0.2)^2 + (2 0.7)^2 + (0.5 1.1)^2 = 0.36 + 1.96 + 0.3025 = 2.6225 */
static void a_linear_model_adds_its_contributions_in_squares(void **state)
{
    (void)state;
    struct subject *it = subject(linear, 3, 1, (double[]){1.7, -4.1, 9.3}, (double[]){0.2, 0.7, 1.1});
    assert_true(it->first.is_known);
    assert_close(it->first.base[0], 17.95, 1e-15, "3 1.7 + 2 4.1 + 0.5 9.3");
    assert_close(it->first.standard[0], sqrt(2.6225), 1e-14, "sum of squares above");
    assert_close(it->first.sensitivities[0], 3.0, 1e-14, "coefficient");
    assert_close(it->first.sensitivities[1], -2.0, 1e-14, "coefficient");
    assert_close(it->first.sensitivities[2], 0.5, 1e-13, "coefficient");
    assert_close(first_order_share(&it->model, &it->first, 1, 0), 1.96 / 2.6225, 1e-13, "part of the variance");
    assert_near(it->first.deviations[0], 0.0, 1e-14, "a straight line");
    assert_true(first_order_is_linear(&it->first, 0));
    arena_free(it->arena);
}

static void shares_add_up_to_one(void **state)
{
    (void)state;
    struct subject *it = subject(ideal_pressure, 3, 1, (double[]){63.1, 288.15, 0.0102}, (double[]){0.3, 0.4, 2e-5});
    double sum = 0.0;
    for (size_t i = 0; i < 3; i++) {
        sum += first_order_share(&it->model, &it->first, i, 0);
    }
    assert_close(sum, 1.0, 1e-14, "parts of a whole");
    arena_free(it->arena);
}

/* p = n R T / V: dp/dn = p / n, dp/dT = p / T, dp/dV = -p / V. The central difference of 1 / V over u to either side is
 * -(1 / V^2) / (1 - (u / V)^2), too steep by (u / V)^2; the others are exact. */
static void central_differences_meet_the_derivatives_of_the_gas_law(void **state)
{
    (void)state;
    const double x[] = {63.1, 288.15, 0.0102}, u[] = {0.3, 0.4, 2e-5};
    struct subject *it = subject(ideal_pressure, 3, 1, x, u);
    const double p = x[0] * R * x[1] / x[2];
    assert_close(it->first.sensitivities[0], p / x[0], 1e-12, "p / n");
    assert_close(it->first.sensitivities[1], p / x[1], 1e-12, "p / T");
    assert_close(it->first.sensitivities[2], -p / x[2] / (1.0 - (u[2] / x[2]) * (u[2] / x[2])), 1e-11, "see above");
    assert_close(it->first.standard[0], p * sqrt(pow(u[0] / x[0], 2.0) + pow(u[1] / x[1], 2.0) + pow(u[2] / x[2], 2.0)),
                 1e-5, "relative uncertainties of a product add in squares");
    assert_true(first_order_is_linear(&it->first, 0));
    arena_free(it->arena);
}

/* x^2 about 0: no slope at all, and (2 u)^2 off the line at either end. */
static void a_model_without_a_slope_shows_its_deviation(void **state)
{
    (void)state;
    struct subject *it = subject(square, 1, 1, (double[]){0.0}, (double[]){0.3});
    assert_near(it->first.standard[0], 0.0, 0.0, "symmetric");
    assert_close(it->first.deviations[0], 0.36, 1e-15, "0.6^2");
    assert_false(first_order_is_linear(&it->first, 0));
    arena_free(it->arena);
}

/* sqrt(x - 1) at 2 going up only: (sqrt(1.04) - 1) / 0.04. */
static void an_input_at_the_end_of_its_range_is_varied_to_one_side(void **state)
{
    (void)state;
    struct subject *it = subject(root, 1, 2, (double[]){2.0}, (double[]){0.04});
    assert_true(it->first.is_one_sided[0]);
    assert_close(it->first.sensitivities[0], (sqrt(1.04) - 1.0) / 0.04, 1e-12, "difference to one side");
    assert_near(it->first.sensitivities[1], 0.0, 0.0, "constant output");
    arena_free(it->arena);
}

static void a_step_is_not_taken_for_certainty(void **state)
{
    (void)state;
    struct subject *it = subject(rounded_down, 1, 1, (double[]){3.9}, (double[]){0.07});
    assert_near(it->first.standard[0], 0.0, 0.0, "3.83 and 3.97 are 3");
    assert_close(it->first.deviations[0], 1.0, 0.0, "4.04 is 4");
    assert_false(first_order_is_linear(&it->first, 0));
    arena_free(it->arena);
}

static void what_is_below_the_resolution_is_none(void **state)
{
    (void)state;
    const double resolutions[] = {0.61};
    struct subject *it = subject(linear, 3, 1, (double[]){1.7, -4.1, 9.3}, (double[]){0.2, 0.7, 1.1});
    it->model.resolutions = resolutions;
    const struct first_order first = propagate_first_order(&it->model, it->arena);
    assert_close(first.standard[0], 1.4, 1e-14, "0.6 and 0.55 are left out");
    arena_free(it->arena);
}

static void no_answer_beside_the_estimate_is_not_no_uncertainty(void **state)
{
    (void)state;
    struct subject *it = subject(brittle, 1, 1, (double[]){5.0}, (double[]){0.1});
    assert_true(it->first.is_known);
    assert_true(isnan(it->first.standard[0]));
    it->values[0] = 6.0;
    assert_false(propagate_first_order(&it->model, it->arena).is_known);
    arena_free(it->arena);
}

/* JCGM 100:2008, H.1, entered from memory of the publication: l = 50.000 838 mm, u(l) = 32 nm, of 25 nm, 9.7 nm, 2.9 nm
 * and 16.6 nm for standard, comparison, difference of expansion and difference of temperature. */
static void the_end_gauge_of_the_guide_has_its_uncertainty(void **state)
{
    (void)state;
    const double x[] = {0.050000623, 215e-9, 0.0, -0.1, 11.5e-6, 0.0};
    const double u[] = {25e-9, 9.7e-9, 0.58e-6, 0.41, 1.2e-6, 0.029};
    struct subject *it = subject(end_gauge, 6, 1, x, u);
    assert_near(it->first.base[0] * 1e3, 50.000838, 5e-7, "JCGM 100 H.1.7");
    assert_near(it->first.standard[0] * 1e9, 32.0, 0.5, "JCGM 100 H.1.7, first order");
    assert_near(fabs(it->first.sensitivities[2]) * u[2] * 1e9, 2.9, 0.05, "JCGM 100 table H.1");
    assert_near(fabs(it->first.sensitivities[5]) * u[5] * 1e9, 16.6, 0.1, "JCGM 100 table H.1");
    assert_near(it->first.sensitivities[3], 0.0, 1e-18, "JCGM 100 table H.1: c is zero");
    assert_near(it->first.sensitivities[4], 0.0, 1e-12, "JCGM 100 table H.1: c is zero");
    arena_free(it->arena);
}

/* ---- a blend off the scales -------------------------------------------------------------------------------------- */

/* By hand: the parents' molar masses are 0.9996 58.124 + 0.0004 28.014 = 58.111956 g/mol and 28.014 + 3e-6 30.11 =
 * 28.01409 g/mol, their amounts 77 / 58.111956 = 1.3250285 and 1818.6 / 28.01409 = 64.917332 mol; of n-butane there are
 * 0.9996 1.3250285 + 3e-6 64.917332 = 1.3246933 mol in 66.2423605 mol: x = 0.01999768. */
static void a_weighed_blend_has_its_composition(void **state)
{
    (void)state;
    const struct propagation_model model = weighed_blend();
    double y[BLEND_OUTPUTS];
    assert_int_equal(model.evaluate(NULL, BLEND_VALUES, y), MODEL_OK);
    assert_close(y[BLEND_BUTANE], 0.01999768, 3e-7, "by hand, see above");
    assert_close(y[BLEND_BUTANE] + y[BLEND_NITROGEN], 1.0, 1e-15, "a whole");
}

static void known_derivatives_are_those_of_differences(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct propagation_model model = weighed_blend();
    const struct first_order known = propagate_first_order(&model, arena);
    model.differentiate = NULL;
    const struct first_order found = propagate_first_order(&model, arena);
    for (size_t i = 0; i < BLEND_INPUTS * BLEND_OUTPUTS; i++) {
        assert_close(known.sensitivities[i], found.sensitivities[i], 1e-5, "analytic beside central differences");
    }
    for (size_t k = 0; k < BLEND_OUTPUTS; k++) {
        assert_close(known.standard[k], found.standard[k], 1e-6, "the same");
        assert_true(first_order_is_linear(&known, k));
    }
    arena_free(arena);
}

static void draws_of_a_weighed_blend_agree_with_first_order(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct propagation_model model = weighed_blend();
    const struct first_order first = propagate_first_order(&model, arena);
    const struct drawn drawn = propagate_draws(&model, &first, 100000, 17, 0, arena);
    /* A fortieth of the draws of the trace of 3e-6 with u = 1.5e-6 is below nothing, and is drawn anew. */
    assert_near((double)drawn.impossible, 100000.0 * 0.02275 / (1.0 - 0.02275), 300.0, "normal distribution at -2 u");
    assert_true(drawn.outputs[BLEND_BUTANE].agrees);
    assert_close(drawn.outputs[BLEND_BUTANE].standard, first.standard[BLEND_BUTANE], 0.03, "nearly linear");
    arena_free(arena);
}

/* ---- draws ------------------------------------------------------------------------------------------------------- */

static void tolerances_are_half_of_the_last_place(void **state)
{
    (void)state;
    /* JCGM 101, 7.9.2 has u = 0.00035: two digits 35 10^-5, 0.5 10^-5; one digit 4 10^-4, 0.5 10^-4. From memory. */
    assert_close(numerical_tolerance(0.00035, 2), 0.5e-5, 1e-12, "JCGM 101 7.9.2");
    assert_close(numerical_tolerance(0.00035, 1), 0.5e-4, 1e-12, "JCGM 101 7.9.2");
    assert_close(numerical_tolerance(2.0, 2), 0.05, 1e-12, "20 10^-1");
    assert_close(numerical_tolerance(9.96, 2), 0.5, 1e-12, "rounds up to 10");
    assert_near(numerical_tolerance(0.0, 2), 0.0, 0.0, "nothing to keep");
}

/* A sum of normal inputs is normal: the interval is the mean and 1.96 u to either side. With 200 000 draws the mean is
 * known to u / 447, the standard uncertainty to u / 632, the ends to some u / 168: five times that is taken. */
static void draws_of_a_linear_model_agree_with_first_order(void **state)
{
    (void)state;
    struct subject *it = subject(linear, 3, 1, (double[]){1.7, -4.1, 9.3}, (double[]){0.2, 0.7, 1.1});
    const struct drawn drawn = draw(it, 200000, 7, 0);
    const double u = sqrt(2.6225);
    assert_int_equal(drawn.outputs[0].count, 200000);
    assert_int_equal(drawn.impossible + drawn.unanswered, 0);
    assert_near(drawn.outputs[0].mean, 17.95, 5.0 * u / 447.0, "closed form");
    assert_close(drawn.outputs[0].standard, u, 5.0 / 632.0, "closed form");
    assert_near(drawn.outputs[0].low, 17.95 - 1.959964 * u, 5.0 * u / 168.0, "normal distribution");
    assert_near(drawn.outputs[0].high, 17.95 + 1.959964 * u, 5.0 * u / 168.0, "normal distribution");
    /* sqrt(0.025 0.975 / N) over the density there, 0.05845 / u */
    assert_close(drawn.outputs[0].low_blur, sqrt(0.025 * 0.975 / 200000.0) / 0.05845 * u, 0.1, "normal distribution");
    assert_true(drawn.outputs[0].agrees);
    assert_close(drawn.outputs[0].part_not_below_zero, 1.0, 0.0, "11 u above zero");
    arena_free(it->arena);
}

/* 0.3 u above zero: Phi(0.3) = 0.617911 of the draws (tables of the normal distribution, from memory), known to
 * sqrt(0.236 / 100 000) = 0.0015. */
static void draws_tell_how_often_a_margin_is_kept(void **state)
{
    (void)state;
    struct subject *it = subject(linear, 3, 1, (double[]){0.5, 0.75, 0.6}, (double[]){1.0 / 3.0, 1e-9, 1e-9});
    assert_close(it->first.base[0], 0.3, 1e-12, "3 0.5 - 2 0.75 + 0.5 0.6");
    assert_near(draw(it, 100000, 23, 0).outputs[0].part_not_below_zero, 0.617911, 0.0075, "normal distribution");
    arena_free(it->arena);
}

/* x^2 about 0 is u^2 times chi squared of one degree of freedom: mean u^2, standard deviation sqrt(2) u^2, 2.5 % below
 * 0.000982 u^2 and 97.5 % below 5.0239 u^2 (tables of the distribution, from memory). */
static void draws_of_a_bent_model_disagree_with_first_order(void **state)
{
    (void)state;
    struct subject *it = subject(square, 1, 1, (double[]){0.02}, (double[]){1.0});
    const struct drawn drawn = draw(it, 100000, 3, 0);
    assert_false(drawn.outputs[0].agrees);
    assert_false(drawn.outputs[0].is_blurred);
    assert_near(drawn.outputs[0].mean, 1.0, 0.03, "chi squared");
    assert_near(drawn.outputs[0].standard, sqrt(2.0), 0.05, "chi squared");
    assert_near(drawn.outputs[0].high, 5.0239, 0.15, "chi squared");
    arena_free(it->arena);
}

/* JCGM 101:2008, 9.3, from memory: by first order u = 0.0539 mg; by draws 0.0754 mg, which it calls unreliable. The
 * three densities are uniform there and normal with the same standard deviations here; the product of their
 * deviations, 100 000 u(a) sqrt(u(1/w)^2 + u(1/r)^2) = 0.0521 mg, adds to the 0.0539 mg in squares to 0.0750 mg. */
static void the_mass_calibration_of_the_supplement_is_told_apart(void **state)
{
    (void)state;
    const double x[] = {100000.0, 1.234, 1.2, 8000.0, 8000.0};
    const double u[] = {0.050, 0.020, 0.1 / sqrt(3.0), 1000.0 / sqrt(3.0), 50.0 / sqrt(3.0)};
    struct subject *it = subject(mass_calibration, 5, 1, x, u);
    assert_near(it->first.base[0], 1.234, 1e-9, "JCGM 101 table 7");
    assert_near(it->first.standard[0], 0.0539, 5e-5, "JCGM 101 table 7, first order");
    const struct drawn drawn = draw(it, 100000, 11, 0);
    assert_near(drawn.outputs[0].standard, 0.0750, 0.0015, "derivation above; 0.0754 with uniform densities");
    assert_false(drawn.outputs[0].agrees);
    arena_free(it->arena);
}

static void any_number_of_threads_draws_the_same(void **state)
{
    (void)state;
    struct subject *it = subject(ideal_pressure, 3, 1, (double[]){63.1, 288.15, 0.0102}, (double[]){0.3, 0.4, 2e-5});
    const struct drawn one = draw(it, 3333, 42, 1);
    for (size_t threads = 2; threads <= 3; threads++) {
        const struct drawn more = draw(it, 3333, 42, threads);
        assert_close(more.outputs[0].mean, one.outputs[0].mean, 0.0, "to the bit");
        assert_close(more.outputs[0].standard, one.outputs[0].standard, 0.0, "to the bit");
        assert_close(more.outputs[0].low, one.outputs[0].low, 0.0, "to the bit");
        assert_close(more.outputs[0].high, one.outputs[0].high, 0.0, "to the bit");
    }
    const struct drawn other = draw(it, 3333, 43, 1);
    assert_true(fabs(other.outputs[0].mean - one.outputs[0].mean) > 0.0);
    arena_free(it->arena);
}

/* A normal input cut off at its own mean: sqrt(x - 1) from x = 2 up, so that half of the draws are drawn anew. */
static void impossible_draws_are_drawn_anew(void **state)
{
    (void)state;
    struct subject *it = subject(root, 1, 2, (double[]){2.0}, (double[]){0.04});
    const struct drawn drawn = draw(it, 10000, 5, 1);
    assert_int_equal(drawn.outputs[0].count, 10000);
    assert_near((double)drawn.impossible, 10000.0, 700.0, "one in vain for each: 5 sqrt(2 10000)");
    assert_true(drawn.outputs[0].low > 1.0);
    assert_near(drawn.outputs[1].standard, 0.0, 0.0, "constant output");
    arena_free(it->arena);
}

static void draws_without_an_answer_are_counted(void **state)
{
    (void)state;
    struct subject *it = subject(brittle, 1, 1, (double[]){5.0}, (double[]){0.1});
    const struct drawn drawn = draw(it, 500, 5, 1);
    assert_int_equal(drawn.unanswered, 500);
    assert_int_equal(drawn.outputs[0].count, 0);
    assert_true(isnan(drawn.outputs[0].mean));
    assert_false(drawn.outputs[0].agrees);
    arena_free(it->arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_linear_model_adds_its_contributions_in_squares),
        cmocka_unit_test(shares_add_up_to_one),
        cmocka_unit_test(central_differences_meet_the_derivatives_of_the_gas_law),
        cmocka_unit_test(a_model_without_a_slope_shows_its_deviation),
        cmocka_unit_test(an_input_at_the_end_of_its_range_is_varied_to_one_side),
        cmocka_unit_test(a_step_is_not_taken_for_certainty),
        cmocka_unit_test(what_is_below_the_resolution_is_none),
        cmocka_unit_test(no_answer_beside_the_estimate_is_not_no_uncertainty),
        cmocka_unit_test(the_end_gauge_of_the_guide_has_its_uncertainty),
        cmocka_unit_test(a_weighed_blend_has_its_composition),
        cmocka_unit_test(known_derivatives_are_those_of_differences),
        cmocka_unit_test(draws_of_a_weighed_blend_agree_with_first_order),
        cmocka_unit_test(tolerances_are_half_of_the_last_place),
        cmocka_unit_test(draws_of_a_linear_model_agree_with_first_order),
        cmocka_unit_test(draws_tell_how_often_a_margin_is_kept),
        cmocka_unit_test(draws_of_a_bent_model_disagree_with_first_order),
        cmocka_unit_test(the_mass_calibration_of_the_supplement_is_told_apart),
        cmocka_unit_test(any_number_of_threads_draws_the_same),
        cmocka_unit_test(impossible_draws_are_drawn_anew),
        cmocka_unit_test(draws_without_an_answer_are_counted),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
