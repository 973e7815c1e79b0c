/* The cubic family: values against an independent evaluation, the critical point, and the roots in volume. */
#include "fluid/cubic_internal.h"
#include "fluid/phase.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <float.h>
#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

enum { WANTS = PHASE_LN_PHI | PHASE_RESIDUAL };

/* Evaluated with 50 digits by a script of its own: pressure as the papers write it; ln phi, enthalpy and heat capacity
 * by numerical differentiation of the Helmholtz energy. Volumes (m3) are for all of the sample's amounts. */
static const struct {
    size_t sample; /* row of SAMPLE_FLUIDS */
    double T, volume, pressure, ln_phi[SAMPLE_MOST], enthalpy_rt, heat_capacity_r;
} EVALUATED[] = {
    {1, 457.0, 1.1e-3, 3879799.6319145237, {-0.18072118969943287}, -0.64739176140034513, 1.5171016940783479},
    {2, 231.0, 0.63e-4, 35745366.910713799,
     {0.48080567670928344, -0.77479972873681354, -2.8397741119663662, -4.4327248921713922, -5.8800693908210212},
     -5.1112746996113708, 3.2344743005051329},
    {2, 311.0, 2.3e-4, 8889566.5310608599,
     {0.29139369570588260, -0.045774303230084923, -0.47125308144741261, -1.1911757318921613, -1.6931056446136536},
     -1.5900161836640416, 5.8364058982132407},
    {2, 457.0, 1.1e-3, 4328645.4692233619,
     {0.042724315290469889, -0.0050842775084379612, -0.050503961424274677, -0.14507977624096519, -0.20574877423748786},
     -0.21002732542295738, 0.42613205332961937},
    {3, 457.0, 1.1e-3, 3974259.4869459205, {-0.15851774277650193}, -0.63401285283538978, 1.5897228670085691},
    {4, 231.0, 0.82e-4, 4638898.6580432384, {-1.5578389494207640, -5.4958887220091970, 2.2667653302585181},
     -8.2692022601040233, 5.1076830923409886},
    {4, 347.0, 2.9e-3, 1215942.2685394828, {-0.029801809305805786, -0.17018255506591104, 0.047916869646313624},
     -0.22772016828777888, 0.43805694770780326},
    {4, 457.0, 1.1e-3, 4186410.2990383413, {-0.027291136892850286, -0.22680900550777304, 0.093557770515971203},
     -0.35380895846874989, 0.81006074538360996},
    /* So hot that 1 + m (1 - sqrt(T / Tc)) is negative for some and positive for others. */
    {2, 1700.0, 3.1e-4, 69651502.060808395,
     {0.11861239486387413, 0.12882185714444804, 0.13409915045438903, 0.26120495364340818, 0.33547399421501176},
     0.13809691975493941, 0.11765387908291994},
    {4, 1900.0, 2.7e-4, 98260356.943403698, {0.17832669687014425, 0.49759238955012309, 0.15515926028551324},
     0.28117863556971315, -0.00027936604328141788},
};

static void values_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(EVALUATED); k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[EVALUATED[k].sample];
        const struct fluid *fluid = sample_fluid_create(sample, arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, EVALUATED[k].T, arena);
        struct phase *phase = phase_create(sample->count, arena);
        char what[120];
        snprintf(what, sizeof what, "%s at %g K, 50-digit evaluation", sample->name, EVALUATED[k].T);
        assert_int_equal(phase_tv(at_t, EVALUATED[k].volume, sample->n, WANTS, phase), ANSWER_OK);
        assert_close(phase->pressure, EVALUATED[k].pressure, 1e-12, what);
        assert_close(phase->residual_enthalpy_rt, EVALUATED[k].enthalpy_rt, 1e-12, what);
        assert_near(phase->residual_heat_capacity_r, EVALUATED[k].heat_capacity_r, 1e-11, what);
        for (size_t i = 0; i < sample->count; i++) {
            assert_near(phase->ln_phi[i], EVALUATED[k].ln_phi[i], 1e-12, what);
        }
    }
    arena_free(arena);
}

/* n-Butane at 350 K and 9.4573 bar, from memory of a textbook's worked example (Smith, Van Ness and Abbott,
 * Introduction to Chemical Engineering Thermodynamics, chapter 3), which rounds to four figures and takes
 * R = 83.14 cm3 bar/(mol K). */
static void textbook_volumes_of_butane_are_met(void **state)
{
    (void)state;
    static const struct pure_spec butane = {
        .name = "n-butane",
        .molar_mass = 0.0581222,
        .critical_temperature = {true, 425.1},
        .critical_pressure = {true, 37.96e5},
        .acentric = {true, 0.200},
    };
    static const struct {
        const char *method;
        double vapour, liquid;
    } cases[] = {{"peng-robinson", 2486e-6, 112.6e-6}, {"soave-redlich-kwong", 2520e-6, 127.8e-6}};
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct fluid_at_t *at_t = sample_at_t(sample_pure(cases[k].method, &butane, arena), 350.0, arena);
        struct phase phase = {.ln_phi = NULL};
        assert_int_equal(phase_tp(at_t, 9.4573e5, n, BRANCH_VAPOUR, 0, &phase), ANSWER_OK);
        assert_close(phase.volume, cases[k].vapour, 1e-3, cases[k].method);
        assert_int_equal(phase_tp(at_t, 9.4573e5, n, BRANCH_LIQUID, 0, &phase), ANSWER_OK);
        assert_close(phase.volume, cases[k].liquid, 1e-3, cases[k].method);
    }
    arena_free(arena);
}

static void the_critical_point_is_the_one_given(void **state)
{
    (void)state;
    static const struct {
        const char *method;
        double compressibility;
        const char *source;
    } cases[] = {
        {"peng-robinson", 0.30740130869870384, "closed form, (1 - omega_b) / 3"},
        {"soave-redlich-kwong", 1.0 / 3.0, "closed form, Redlich and Kwong"},
    };
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(cases); k++) {
        const struct pure_spec *propane = &SAMPLE_SUBSTANCE[PROPANE];
        const struct fluid *fluid = sample_pure(cases[k].method, propane, arena);
        struct critical_point critical;
        assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
        const double RT = GAS_CONSTANT * critical.temperature, v = critical.molar_volume;
        struct fluid_at_t *at_t = sample_at_t(fluid, critical.temperature, arena);
        struct phase phase = {.ln_phi = NULL};
        assert_int_equal(phase_tv(at_t, v, n, 0, &phase), ANSWER_OK);
        assert_close(phase.pressure, propane->critical_pressure.value, 1e-13, "given");
        assert_close(phase.Z, cases[k].compressibility, 1e-13, cases[k].source);
        assert_near(phase.dp_dv * v * v / RT, 0.0, 1e-13, "first critical condition");
        /* dp/dv = 0 on both sides to first order: its derivative vanishes as well. */
        double slope[2];
        for (int side = 0; side < 2; side++) {
            assert_int_equal(phase_tv(at_t, v * (side == 0 ? 1.0 - 1e-5 : 1.0 + 1e-5), n, 0, &phase), ANSWER_OK);
            slope[side] = phase.dp_dv * v * v / RT;
        }
        assert_near((slope[1] - slope[0]) / 2e-5, 0.0, 1e-7, "second critical condition");
    }
    arena_free(arena);
}

static void a_mixture_has_no_critical_point_of_its_own(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct fluid *fluid = sample_fluid_create(&SAMPLE_FLUIDS[2], arena);
    struct critical_point critical;
    struct saturation_start start;
    assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_CANNOT);
    assert_int_equal(fluid->ops->saturation_start(sample_at_t(fluid, 200.0, arena), &start), ANSWER_CANNOT);
    arena_free(arena);
}

/* ---- roots ----------------------------------------------------------------------------------------------------- */

/* Forms as the two equations have them, without the fits. */
static const struct cubic_form FORMS[] = {
    {.delta1 = 2.41421356237309505, .delta2 = -0.41421356237309505, .omega_a = 0.45723552892138219,
     .omega_b = 0.077796073903888456},
    {.delta1 = 1.0, .delta2 = 0.0, .omega_a = 0.42748023354034140, .omega_b = 0.086640349964957721},
};

/* Every root found must give back the pressure, within what rounding of y can do, and lie on a rising part. */
static void check_root(const struct cubic_form *form, double theta, double pi, double y, const char *what)
{
    assert_true(y > 0.0 && y < 1.0);
    const double slope = cubic_reduced_pressure_slope(form, theta, y);
    const double found = cubic_reduced_pressure(form, theta, y);
    const double rounding = 64.0 * DBL_EPSILON * (y / (1.0 - y) + theta * y * y + fabs(slope) * y);
    assert_near(found, pi, rounding, what);
    assert_true(slope >= -1e-7);
}

static void roots_give_back_the_pressure_over_the_whole_plane(void **state)
{
    (void)state;
    for (size_t f = 0; f < COUNT(FORMS); f++) {
        const double critical = cubic_critical_theta(&FORMS[f]);
        for (double ratio = 1e-3; ratio < 60.0; ratio *= 1.07) {
            for (double pi = 1e-40; pi < 1e4; pi *= 1.7) {
                const double theta = ratio * critical;
                char what[120];
                snprintf(what, sizeof what, "form %zu, theta %.17g, pi %.17g", f, theta, pi);
                double y[3];
                int roots[3];
                enum answer answer[3];
                for (int branch = BRANCH_VAPOUR; branch <= BRANCH_STABLE; branch++) {
                    answer[branch] =
                        cubic_packing(&FORMS[f], theta, pi, (enum branch)branch, &y[branch], &roots[branch]);
                    if (answer[branch] == ANSWER_OK) {
                        check_root(&FORMS[f], theta, pi, y[branch], what);
                    }
                }
                assert_int_equal(answer[BRANCH_STABLE], ANSWER_OK);
                assert_true(answer[BRANCH_VAPOUR] == ANSWER_OK || answer[BRANCH_LIQUID] == ANSWER_OK);
                assert_int_equal(roots[BRANCH_STABLE], roots[BRANCH_VAPOUR]);
                assert_int_equal(roots[BRANCH_VAPOUR] == 2 && ratio > 1.0,
                                 answer[BRANCH_VAPOUR] == ANSWER_OK && answer[BRANCH_LIQUID] == ANSWER_OK &&
                                     ratio > 1.0);
            }
        }
    }
}

static void the_stable_root_is_the_one_of_lower_fugacity(void **state)
{
    (void)state;
    for (size_t f = 0; f < COUNT(FORMS); f++) {
        const double theta = 1.4 * cubic_critical_theta(&FORMS[f]);
        size_t vapours = 0, liquids = 0;
        for (double pi = 1e-5; pi < 1e-1; pi *= 1.02) {
            double vapour, liquid, stable;
            int roots;
            if (cubic_packing(&FORMS[f], theta, pi, BRANCH_VAPOUR, &vapour, &roots) == ANSWER_OK && roots == 2) {
                assert_int_equal(cubic_packing(&FORMS[f], theta, pi, BRANCH_LIQUID, &liquid, &roots), ANSWER_OK);
                assert_int_equal(cubic_packing(&FORMS[f], theta, pi, BRANCH_STABLE, &stable, &roots), ANSWER_OK);
                const bool is_vapour = cubic_ln_reduced_fugacity(&FORMS[f], theta, vapour) <
                                       cubic_ln_reduced_fugacity(&FORMS[f], theta, liquid);
                assert_near(stable, is_vapour ? vapour : liquid, 0.0, "one of the two roots");
                /* Once the liquid is the stable one it stays so at every higher pressure. */
                assert_true(!is_vapour || liquids == 0);
                *(is_vapour ? &vapours : &liquids) += 1;
            }
        }
        assert_true(vapours > 10 && liquids > 10);
    }
}

/* On the critical isotherm pi - pi_c is nearly the cube of y - y_c: a root found to the last digit of pi is off by
 * the cube root of rounding in y, and no worse. */
static void roots_beside_the_critical_point_are_as_good_as_rounding_allows(void **state)
{
    (void)state;
    for (size_t f = 0; f < COUNT(FORMS); f++) {
        const struct cubic_form *form = &FORMS[f];
        const double theta = cubic_critical_theta(form), y_c = cubic_critical_packing(form);
        const double pi_c = cubic_reduced_pressure(form, theta, y_c);
        for (double step = 1e-15; step < 1e-2; step *= 3.0) {
            double y;
            int roots;
            for (int side = -1; side <= 1; side++) {
                const double pi = pi_c * (1.0 + side * step);
                assert_int_equal(cubic_packing(form, theta, pi, BRANCH_STABLE, &y, &roots), ANSWER_OK);
                assert_near(cubic_reduced_pressure(form, theta, y), pi, 8.0 * DBL_EPSILON, "root");
                assert_true(fabs(y - y_c) < 2.0 * cbrt(step + 1e-15));
            }
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(values_agree_with_an_independent_evaluation),
        cmocka_unit_test(textbook_volumes_of_butane_are_met),
        cmocka_unit_test(the_critical_point_is_the_one_given),
        cmocka_unit_test(a_mixture_has_no_critical_point_of_its_own),
        cmocka_unit_test(roots_give_back_the_pressure_over_the_whole_plane),
        cmocka_unit_test(the_stable_root_is_the_one_of_lower_fugacity),
        cmocka_unit_test(roots_beside_the_critical_point_are_as_good_as_rounding_allows),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
