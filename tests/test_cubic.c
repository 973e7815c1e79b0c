/* The cubic family: values against an independent evaluation, the critical point, and the roots in volume. */
#include "equilibrium/saturation.h"
#include "fluid/cubic_internal.h"
#include "fluid/phase.h"
#include "support/check.h"
#include "support/explained.h"
#include "support/sample_fluids.h"

#include <float.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

enum { WANTS = PHASE_LN_PHI | PHASE_RESIDUAL };

/* Evaluated with 40 to 50 digits by scripts of their own: pressure as the papers write it; ln phi, enthalpy and heat
 * capacity by numerical differentiation of the Helmholtz energy. Volumes (m3) are for all of the sample's amounts. */
static const struct {
    size_t sample; /* row of SAMPLE_FLUIDS */
    double T, volume, pressure, ln_phi[SAMPLE_MOST], enthalpy_rt, heat_capacity_r;
} EVALUATED[] = {
    {1, 457.0, 1.1e-3, 3879799.6319145237, {-0.18072118969943287}, -0.64739176140034513, 1.5171016940783479},
    {2,
     231.0,
     0.63e-4,
     35745366.910713799,
     {0.48080567670928344, -0.77479972873681354, -2.8397741119663662, -4.4327248921713922, -5.8800693908210212},
     -5.1112746996113708,
     3.2344743005051329},
    {2,
     311.0,
     2.3e-4,
     8889566.5310608599,
     {0.29139369570588260, -0.045774303230084923, -0.47125308144741261, -1.1911757318921613, -1.6931056446136536},
     -1.5900161836640416,
     5.8364058982132407},
    {2,
     457.0,
     1.1e-3,
     4328645.4692233619,
     {0.042724315290469889, -0.0050842775084379612, -0.050503961424274677, -0.14507977624096519, -0.20574877423748786},
     -0.21002732542295738,
     0.42613205332961937},
    {3, 457.0, 1.1e-3, 3974259.4869459205, {-0.15851774277650193}, -0.63401285283538978, 1.5897228670085691},
    {4,
     231.0,
     0.82e-4,
     4638898.6580432384,
     {-1.5578389494207640, -5.4958887220091970, 2.2667653302585181},
     -8.2692022601040233,
     5.1076830923409886},
    {4,
     347.0,
     2.9e-3,
     1215942.2685394828,
     {-0.029801809305805786, -0.17018255506591104, 0.047916869646313624},
     -0.22772016828777888,
     0.43805694770780326},
    {4,
     457.0,
     1.1e-3,
     4186410.2990383413,
     {-0.027291136892850286, -0.22680900550777304, 0.093557770515971203},
     -0.35380895846874989,
     0.81006074538360996},
    /* So hot that 1 + m (1 - sqrt(T / Tc)) is negative for some and positive for others. */
    {2,
     1700.0,
     3.1e-4,
     69651502.060808395,
     {0.11861239486387413, 0.12882185714444804, 0.13409915045438903, 0.26120495364340818, 0.33547399421501176},
     0.13809691975493941,
     0.11765387908291994},
    {4,
     1900.0,
     2.7e-4,
     98260356.943403698,
     {0.17832669687014425, 0.49759238955012309, 0.15515926028551324},
     0.28117863556971315,
     -0.00027936604328141788},
    /* Pressure as the papers write it; F by quadrature of the pressure, 40 digits. */
    {6, 311.0, 1.9e-3, 1506548.3792981894, {-0.17311747677966703}, -0.45371388410407293, 0.84307128397048172},
    {7,
     457.0,
     1.6e-4,
     29581645.760462207,
     {-0.36589069619509944, -0.91914742260281459, 0.3427398015239758},
     -1.29111829868843,
     1.0685399859867111},
    {7,
     271.0,
     3.3e-3,
     827859.44758361616,
     {-0.0395564008052425, -0.16277213182598535, 0.022860645626040613},
     -0.17600644744893132,
     0.2384262741490606},
    {8,
     231.0,
     0.93e-4,
     4972818.7489222803,
     {0.077312829038785218, -2.6058399987135306, 1.7785247701133927},
     -3.1935980705603061,
     17.797861116799754},
    {9, 347.0, 1.6e-4, 2681672.7402048951, {-0.30236795363127047}, -4.4337365736142575, 15.763112781790808},
    {10,
     231.0,
     0.71e-4,
     17487262.926338433,
     {0.57678630644967596, -0.55222182728300699, -2.0937453780460367, -4.1445824915840164, -5.6605712499742077},
     -4.802920367420236,
     3.3108045105145728},
    {10,
     347.0,
     6.1e-4,
     5249721.5853000369,
     {0.079629190414820874, -0.032291985879981848, -0.15458780537308522, -0.45132468159792234, -0.63043909713263234},
     -0.56656757135563876,
     1.2086183203864332},
    {11,
     231.0,
     0.93e-4,
     8587044.9488163791,
     {-4.9415903110582418, 0.70562366385815985, -0.21463540123921444},
     -4.2180734492741887,
     6.7966116125775783},
    {12, 347.0, 1.5e-4, 5344349.4585488536, {-0.87792755196350448}, -4.6552704126005093, 8.7967570854033464},
    {13,
     347.0,
     1.3e-4,
     22372334.598318663,
     {-0.67032428232586176, -0.029534725074834274, -1.4477064023942239},
     -2.0623158346543008,
     4.3093124713109328},
    {13,
     457.0,
     2.7e-3,
     1893348.9684362522,
     {-0.021054865138736643, 0.001938399424880377, -0.062220630367049324},
     -0.092181541278057763,
     0.18250001297764862},
    {14,
     311.0,
     0.89e-4,
     66127188.946714908,
     {1.0368297058830015, -2.9218219513024647, -1.3020618828052902},
     -4.2898578266483485,
     3.0261845452940883},
    {14,
     457.0,
     2.1e-3,
     2355903.757872148,
     {0.067881823249317093, -0.14001738468407013, -0.011445118794301287},
     -0.22649218761844903,
     0.48906211957958598},
    {15, 77.0, 4.3e-4, 1963880.7091653315, {-0.041775186767517552}, -0.16958111879966393, 0.29725028726105827},
    {16,
     41.0,
     0.31e-4,
     33036742.182994486,
     {-1.124614422394124, 0.097988109765520361, 1.7399353929762283},
     -0.72844354683049521,
     0.31141144857588778},
    {16,
     131.0,
     7.7e-4,
     1962899.4739050433,
     {0.0043304520037001536, 0.0088575429133923691, 0.031066340064234803},
     -0.01158843197547095,
     0.056939846407405057},
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
        snprintf(what, sizeof what, "%s at %g K, independent evaluation", sample->name, EVALUATED[k].T);
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
        {"redlich-kwong", 1.0 / 3.0, "closed form, Redlich and Kwong"},
        {"van-der-waals", 3.0 / 8.0, "closed form, van der Waals"},
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

/* ---- what belongs to one equation ------------------------------------------------------------------------------ */

/* By equal pressures and equal areas with 40 digits, from the equations as the papers write them. */
static void saturation_by_each_equation_agrees_with_an_independent_solution(void **state)
{
    (void)state;
    static const struct {
        size_t sample;
        double T, pressure, vapour, liquid; /* m3/mol */
    } cases[] = {
        {6, 291.0, 1507649.9996328085, 0.0012243017712909796, 0.00013818841559564268},
        {9, 291.0, 789000.94017652088, 0.0025878141466162245, 8.1337832348862035e-5},
        {12, 291.0, 794570.09137247804, 0.0025728696690665147, 8.7467514048046871e-5},
        {15, 21.3, 131254.39814895883, 0.0011955642814139148, 2.8823370515081905e-5},
        {15, 31.7, 1051571.1510381555, 0.00012732584395632481, 4.5208484419895593e-5},
    };
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(cases); k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[cases[k].sample];
        struct saturation found;
        struct fluid_at_t *at_t = sample_at_t(sample_fluid_create(sample, arena), cases[k].T, arena);
        assert_int_equal(saturation_at_t(at_t, &found), ANSWER_OK);
        assert_close(found.pressure, cases[k].pressure, 1e-11, sample->name);
        assert_close(found.vapour_volume, cases[k].vapour, 1e-11, sample->name);
        assert_close(found.liquid_volume, cases[k].liquid, 1e-11, sample->name);
    }
    arena_free(arena);
}

/* The isotherm is flat there, at the pressure given. */
static void check_critical_point(const struct fluid *fluid, const struct critical_point *critical, struct arena *arena)
{
    const double n[] = {1.0}, v = critical->molar_volume;
    struct phase phase = {.ln_phi = NULL};
    struct fluid_at_t *at_t = sample_at_t(fluid, critical->temperature, arena);
    assert_int_equal(phase_tv(at_t, v, n, 0, &phase), ANSWER_OK);
    assert_close(phase.pressure, critical->pressure, 1e-12, "given");
    assert_near(phase.dp_dv * v / phase.pressure, 0.0, 1e-12, "first critical condition");
}

/* Every pure gas of every equation that has its data, from far below the critical temperature up to it. */
static void every_equation_saturates_from_cold_to_critical(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    size_t lines = 0;
    for (const struct fluid_ops *const *method = fluid_methods(); *method != NULL; method++) {
        for (size_t i = 0; ((*method)->capabilities & IS_CUBIC) != 0 && i < SAMPLE_SUBSTANCES; i++) {
            const struct pure_spec *pure = &SAMPLE_SUBSTANCE[i];
            const struct fluid_spec spec = {.count = 1, .pure = &pure};
            struct fluid_lack_report lack;
            const struct fluid *fluid = fluid_create((*method)->name, &spec, arena, &lack);
            struct critical_point critical;
            double last = 0.0;
            if (fluid == NULL) {
                continue;
            }
            assert_int_equal((*method)->critical(fluid, &critical), ANSWER_OK);
            check_critical_point(fluid, &critical, arena);
            for (double reduced = 0.42; reduced < 0.9999; reduced += 0.0193) {
                struct saturation found;
                char what[120];
                snprintf(what, sizeof what, "%s of %s at Tr = %g", (*method)->name, pure->name, reduced);
                struct fluid_at_t *at_t = sample_at_t(fluid, reduced * critical.temperature, arena);
                assert_int_equal(saturation_at_t(at_t, &found), ANSWER_OK);
                assert_true(found.pressure > last && found.pressure < critical.pressure);
                assert_near(found.residual, 0.0, 1e-10, what);
                last = found.pressure;
            }
            lines++;
        }
    }
    assert_true(lines >= 5 * 8 + 3 * 5 + 3);
    arena_free(arena);
}

/* v = v_eos - c and ln phi = ln phi_eos - c p / (R T), component by component, for an equation that differs in nothing
 * else; so what two phases have in common stays as it is. */
static void a_translation_moves_volumes_and_fugacities_and_no_equilibrium(void **state)
{
    (void)state;
    static const double shift[] = {-4.1e-6, 3.3e-6, 0.9e-6};
    static const double n[] = {0.31, 0.53, 0.29};
    const struct pure_spec *plain[3], *moved[3];
    struct pure_spec copies[3][2];
    struct cubic_set sets[3];
    for (size_t i = 0; i < 3; i++) {
        copies[i][0] = copies[i][1] = SAMPLE_SUBSTANCE[i];
        sets[i] = (struct cubic_set){.method = "peng-robinson", .shift = shift[i]};
        copies[i][1].cubic_set_count = 1;
        copies[i][1].cubic_sets = &sets[i];
        plain[i] = &copies[i][0];
        moved[i] = &copies[i][1];
    }
    const struct fluid_spec specs[] = {{.count = 3, .pure = plain}, {.count = 3, .pure = moved}};
    struct arena *arena = arena_create(NULL);
    struct phase *phase[2];
    struct fluid_at_t *at_t[2];
    struct fluid_lack_report lack;
    for (int k = 0; k < 2; k++) {
        at_t[k] = sample_at_t(fluid_create("peng-robinson", &specs[k], arena, &lack), 213.0, arena);
        phase[k] = phase_create(3, arena);
    }
    const double RT = GAS_CONSTANT * 213.0;
    for (double p = 1e4; p < 3e8; p *= 1.7) {
        for (int k = 0; k < 2; k++) {
            assert_int_equal(phase_tp(at_t[k], p, n, BRANCH_STABLE, PHASE_LN_PHI, phase[k]), ANSWER_OK);
        }
        double volume = phase[0]->volume;
        for (size_t i = 0; i < 3; i++) {
            volume -= n[i] * shift[i];
            assert_near(phase[1]->ln_phi[i], phase[0]->ln_phi[i] - shift[i] * p / RT, 1e-12, "by definition");
        }
        assert_close(phase[1]->volume, volume, 1e-13, "by definition");
        assert_close(phase[1]->dp_dv, phase[0]->dp_dv, 1e-10, "the same isotherm, moved");
    }
    assert_close(phase_smallest_volume(at_t[1], n),
                 phase_smallest_volume(at_t[0], n) - 0.31 * shift[0] - 0.53 * shift[1] - 0.29 * shift[2], 1e-13,
                 "by definition");
    arena_free(arena);
}

/* Robinson and Peng's slopes of 1978, RR-28: above 0.491 another polynomial, below it that of 1976. Read back from
 * alpha in the explanation: sqrt(alpha) = 1 + m (1 - sqrt(Tr)). */
static void the_slope_of_1978_differs_above_an_acentric_factor_of_0_491(void **state)
{
    (void)state;
    static const struct {
        double acentric, slope;
    } cases[] = {
        {0.3, 0.37464 + 1.54226 * 0.3 - 0.26992 * 0.3 * 0.3},
        {0.491, 0.37464 + 1.54226 * 0.491 - 0.26992 * 0.491 * 0.491},
        {0.6436, 0.379642 + 1.48503 * 0.6436 - 0.164423 * 0.6436 * 0.6436 + 0.016666 * 0.6436 * 0.6436 * 0.6436},
    };
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct pure_spec pure = SAMPLE_SUBSTANCE[PROPANE];
        pure.acentric.value = cases[k].acentric;
        struct fluid_at_t *at_t = sample_at_t(sample_pure("peng-robinson-1978", &pure, arena), 291.0, arena);
        const double n[] = {1.0};
        struct explanation numbers;
        assert_int_equal(fluid_explain(at_t, 1.3e-3, n, false, &numbers), ANSWER_OK);
        for (size_t i = 0; i < numbers.count; i++) {
            if (strcmp(numbers.values[i].symbol, "alpha") == 0) {
                const double root = sqrt(numbers.values[i].value);
                assert_close((root - 1.0) / (1.0 - sqrt(291.0 / 369.89)), cases[k].slope, 1e-13, "RR-28");
            }
        }
    }
    arena_free(arena);
}

/* ---- explanations ---------------------------------------------------------------------------------------------- */

static void every_equation_explains_its_pressure_and_fugacity(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        const struct fluid_ops *method = fluid_method(sample->method);
        if ((method->capabilities & IS_CUBIC) == 0 || (sample->count > 1 && k != 8 && k != 11 && k != 14)) {
            continue;
        }
        struct fluid_at_t *at_t =
            sample_at_t(sample_pure(sample->method, &SAMPLE_SUBSTANCE[sample->substance[0]], arena), 287.0, arena);
        const double n[] = {1.37};
        struct pure_arrays arrays;
        struct phase phase;
        struct explanation numbers;
        phase_of_pure(&phase, &arrays);
        assert_int_equal(phase_tv(at_t, 3.1e-3, n, PHASE_LN_PHI, &phase), ANSWER_OK);
        assert_int_equal(fluid_explain(at_t, 3.1e-3, n, true, &numbers), ANSWER_OK);
        assert_near(numbers.values[numbers.count - 1].value, arrays.ln_phi, 1e-13, sample->name);
        for (size_t i = 0; i < numbers.count; i++) {
            const struct explained_value *each = &numbers.values[i];
            if (strcmp(each->symbol, "p") == 0) {
                assert_close(each->value, phase.pressure, 1e-13, sample->name);
            }
        }
        assert_formulas_hold(&numbers);
    }
    arena_free(arena);
}

/* ---- pairs ----------------------------------------------------------------------------------------------------- */

/* From the formula of the papers with 40 digits, for the sample by groups at 231 and 347 K: pairs in the order 1-0,
 * 2-0, 2-1, 3-0 ... */
static void group_contributions_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    static const struct {
        double T, kij[10];
    } cases[] = {
        {231.0,
         {0.028421092276573544, -0.008990989330149164, 0.10455633021432425, 0.024126828847338373, 0.015973088469468352,
          0.15362898231604168, 0.045707991044230062, 0.019878260246999012, 0.14102120916313553, 0.0025631382564979148}},
        {347.0,
         {0.023399003951581181, -0.041082884253412809, 0.11688241960495962, -0.037154293201917007, 0.021600738691966877,
          0.10398346050683319, -0.019041199037736533, 0.021385795105413684, 0.10432073887450242,
          0.0024395432408118333}},
    };
    struct arena *arena = arena_create(NULL);
    const struct fluid *fluid = sample_fluid_create(&SAMPLE_FLUIDS[10], arena);
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct fluid_at_t *at_t = sample_at_t(fluid, cases[k].T, arena);
        size_t row = 0;
        for (size_t i = 0; i < fluid->count; i++) {
            for (size_t j = 0; j < i; j++, row++) {
                struct pair_parameter one, other;
                assert_int_equal(fluid_pair(at_t, i, j, &one), ANSWER_OK);
                assert_int_equal(fluid_pair(at_t, j, i, &other), ANSWER_OK);
                assert_int_equal(one.origin, PAIR_FROM_GROUPS);
                assert_near(one.kij, cases[k].kij[row], 1e-14, "formula of the papers");
                assert_near(one.kij, other.kij, 0.0, "symmetric");
            }
        }
    }
    arena_free(arena);
}

static struct pair_parameter pair_of(const char *method, const struct fluid_spec *spec, struct arena *arena)
{
    struct fluid_lack_report lack;
    struct pair_parameter found;
    struct fluid_at_t *at_t = sample_at_t(fluid_create(method, spec, arena, &lack), 300.0, arena);
    assert_int_equal(fluid_pair(at_t, 0, 1, &found), ANSWER_OK);
    return found;
}

/* The deck's, then the groups', then the library's, then none. */
static void a_pair_takes_its_parameter_in_the_order_of_precedence(void **state)
{
    (void)state;
    static const struct pair_constant all[] = {
        {1, 0, "peng-robinson", PAIR_FROM_LIBRARY, 0.0852, 0.0},
        {0, 1, "peng-robinson-1978", PAIR_FROM_LIBRARY, 0.0731, 0.0},
        {1, 0, "peng-robinson-1978", PAIR_FROM_DECK, 0.0517, 0.0},
    };
    struct arena *arena = arena_create(NULL);
    const struct pure_spec *pure[] = {&SAMPLE_SUBSTANCE[NITROGEN], &SAMPLE_SUBSTANCE[PROPANE]};
    struct fluid_spec spec = {.count = 2,
                              .pure = pure,
                              .pair_count = 3,
                              .pairs = all,
                              .group_pair_count = SAMPLE_GROUP_PAIRS_COUNT,
                              .group_pairs = SAMPLE_GROUP_PAIRS};
    struct pair_parameter pair = pair_of("peng-robinson-1978", &spec, arena);
    assert_int_equal(pair.origin, PAIR_FROM_DECK);
    assert_near(pair.kij, 0.0517, 1e-16, "given");
    spec.pair_count = 2; /* without the deck's */
    assert_int_equal(pair_of("peng-robinson-1978", &spec, arena).origin, PAIR_FROM_GROUPS);
    pair = pair_of("peng-robinson", &spec, arena);
    assert_int_equal(pair.origin, PAIR_FROM_LIBRARY); /* the groups were fitted with another alpha */
    assert_near(pair.kij, 0.0852, 1e-16, "given");
    spec.group_pair_count = 7; /* without nitrogen and CH2 */
    pair = pair_of("peng-robinson-1978", &spec, arena);
    assert_int_equal(pair.origin, PAIR_FROM_LIBRARY);
    assert_near(pair.kij, 0.0731, 1e-16, "given");
    spec.pair_count = 0;
    pair = pair_of("peng-robinson-1978", &spec, arena);
    assert_int_equal(pair.origin, PAIR_FROM_NOTHING);
    assert_near(pair.kij, 0.0, 0.0, "no parameter is zero");
    arena_free(arena);
}

static void a_method_without_pairs_says_so(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct pair_parameter pair;
    struct fluid_at_t *ideal = sample_at_t(sample_fluid_create(&SAMPLE_FLUIDS[0], arena), 300.0, arena);
    assert_int_equal(fluid_pair(ideal, 0, 1, &pair), ANSWER_CANNOT);
    struct fluid_at_t *cubic = sample_at_t(sample_fluid_create(&SAMPLE_FLUIDS[2], arena), 300.0, arena);
    assert_int_equal(fluid_pair(cubic, 1, 1, &pair), ANSWER_CANNOT);
    assert_int_equal(fluid_pair(cubic, 1, 5, &pair), ANSWER_CANNOT);
    arena_free(arena);
}

/* ---- roots ----------------------------------------------------------------------------------------------------- */

/* Forms as the equations have them, without the fits. */
static const struct cubic_form FORMS[] = {
    {.delta1 = 2.41421356237309505,
     .delta2 = -0.41421356237309505,
     .omega_a = 0.45723552892138219,
     .omega_b = 0.077796073903888456},
    {.delta1 = 1.0, .delta2 = 0.0, .omega_a = 0.42748023354034140, .omega_b = 0.086640349964957721},
    {.delta1 = 0.0, .delta2 = 0.0, .omega_a = 27.0 / 64.0, .omega_b = 1.0 / 8.0},
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
                assert_int_equal(roots[BRANCH_VAPOUR] == 2 && ratio > 1.0, answer[BRANCH_VAPOUR] == ANSWER_OK &&
                                                                               answer[BRANCH_LIQUID] == ANSWER_OK &&
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
        cmocka_unit_test(saturation_by_each_equation_agrees_with_an_independent_solution),
        cmocka_unit_test(every_equation_saturates_from_cold_to_critical),
        cmocka_unit_test(a_translation_moves_volumes_and_fugacities_and_no_equilibrium),
        cmocka_unit_test(the_slope_of_1978_differs_above_an_acentric_factor_of_0_491),
        cmocka_unit_test(every_equation_explains_its_pressure_and_fugacity),
        cmocka_unit_test(group_contributions_agree_with_an_independent_evaluation),
        cmocka_unit_test(a_pair_takes_its_parameter_in_the_order_of_precedence),
        cmocka_unit_test(a_method_without_pairs_says_so),
        cmocka_unit_test(roots_give_back_the_pressure_over_the_whole_plane),
        cmocka_unit_test(the_stable_root_is_the_one_of_lower_fugacity),
        cmocka_unit_test(roots_beside_the_critical_point_are_as_good_as_rounding_allows),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
