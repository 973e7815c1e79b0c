/* Critical points of mixtures, and of a pure fluid written as a mixture of it with a trace. */
#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "support/check.h"
#include "support/sample_mixture.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Peng-Robinson 1976 in 50 digits from the same constants: the criteria of Heidemann and Khalil with all derivatives by
 * differences of ln f. */
struct known_critical {
    const char *name;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double z[SAMPLE_MOST];
    double temperature, pressure, molar_volume;
};

static const struct known_critical KNOWN[] = {
    {"five components",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     301.27586691134189,
     12156934.169177399,
     0.00010155556978591757},
    {"methane and propane",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     338.59468591148535,
     7373195.273048975,
     0.0001568989941664299},
    {"carbon dioxide and propane",
     2,
     {CARBON_DIOXIDE, PROPANE},
     {0.4, 0.6},
     342.80889294687455,
     6030089.2368086727,
     0.00016723339353470548},
    {"methane and n-butane",
     2,
     {METHANE, N_BUTANE},
     {0.7, 0.3},
     325.01371355414193,
     13321577.348235453,
     0.00010953956537882543},
};

static void critical_points_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(KNOWN); k++) {
        const struct known_critical *known = &KNOWN[k];
        struct sample_mixture m = sample_mixture_create(known->count, known->substance, 300.0, arena);
        struct envelope *envelope = envelope_create(known->count, arena);
        struct mixture_critical critical;
        assert_int_equal(envelope_trace(m.at_t, m.fluid, known->z, m.ws, envelope), ANSWER_OK);
        assert_int_equal(envelope->critical_count, 1);
        assert_int_equal(mixture_critical_near(m.at_t, m.fluid, known->z, &envelope->critical[0], m.ws, &critical),
                         ANSWER_OK);
        assert_close(critical.temperature, known->temperature, 1e-8, known->name);
        assert_close(critical.pressure, known->pressure, 1e-8, known->name);
        assert_close(critical.molar_volume, known->molar_volume, 1e-7, known->name);
    }
    arena_free(arena);
}

/* With a vanishing trace the critical point is the pure fluid's. */
static void a_trace_moves_the_critical_point_by_a_trace(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 300.0, arena);
    struct mixture_critical critical;
    static const double z[] = {1e-7, 1.0};
    const struct critical_point start = {.temperature = 368.0, .molar_volume = 2.3e-4};
    assert_int_equal(mixture_critical_near(m.at_t, m.fluid, z, &start, m.ws, &critical), ANSWER_OK);
    assert_close(critical.temperature, 369.89, 1e-6, "propane's critical temperature");
    assert_close(critical.pressure, 4.2512e6, 1e-5, "propane's critical pressure");
    arena_free(arena);
}

static void a_start_without_meaning_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 300.0, arena);
    struct mixture_critical critical;
    static const double z[] = {0.37, 0.63};
    static const struct critical_point starts[] = {{.temperature = 0.0, .molar_volume = 1e-4},
                                                   {.temperature = (double)NAN, .molar_volume = 1e-4},
                                                   {.temperature = 300.0, .molar_volume = -1e-4}};
    for (size_t k = 0; k < COUNT(starts); k++) {
        assert_int_equal(mixture_critical_near(m.at_t, m.fluid, z, &starts[k], m.ws, &critical), ANSWER_OUT_OF_RANGE);
    }
    const struct critical_point far = {.temperature = 3000.0, .molar_volume = 1e-2};
    assert_int_equal(mixture_critical_near(m.at_t, m.fluid, z, &far, m.ws, &critical), ANSWER_NO_SUCH_ROOT);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(critical_points_agree_with_an_independent_evaluation),
        cmocka_unit_test(a_trace_moves_the_critical_point_by_a_trace),
        cmocka_unit_test(a_start_without_meaning_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
