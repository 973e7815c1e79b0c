/* The gravimetric equation: a worked example by hand, its derivatives against differences and against a model written
 * apart, and uncertainty through it. */
#include "filling/gravimetric.h"

#include "support/check.h"
#include "support/weighed_blend.h"

#include <math.h>
#include <string.h>

enum { N2, O2, C4, COUNT_OF_GASES };

static const double MOLAR_MASSES[] = {0.028014, 0.031998, 0.058124};

/* Two parents by mole, the second's rest nitrogen; one by mass without a rest. Invented. */
static double butane_fractions[] = {2e-4, 0.0, 0.9998}, nitrogen_fractions[] = {0.99999, 7e-6, 3e-6},
              leftover_fractions[] = {0.7, 0.2, 0.1};
static const struct gravimetric_part PARTS[] = {
    {.mass = 0.0770, .fractions = butane_fractions, .has_rest = true, .rest = C4},
    {.mass = 1.8186, .fractions = nitrogen_fractions, .has_rest = true, .rest = N2},
    {.mass = 0.0150, .fractions = leftover_fractions, .is_by_mass = true},
};

static const double FIRST[] = {1.0, 0.0, 0.0}, SECOND[] = {0.0, 1.0, 0.0}, THIRD[] = {0.0, 0.0, 1.0},
                    BOTH[] = {0.2, -0.7, 0.0};

static const struct gravimetric_input INPUTS[] = {
    {.kind = GRAVIMETRIC_MASS, .mass_change = FIRST, .value = 0.0770, .standard = 1e-5},
    {.kind = GRAVIMETRIC_MASS, .mass_change = SECOND, .value = 1.8186, .standard = 1e-4},
    {.kind = GRAVIMETRIC_MASS, .mass_change = THIRD, .value = 0.0150, .standard = 1e-4},
    {.kind = GRAVIMETRIC_MASS, .mass_change = BOTH, .value = 100.0, .standard = 1e-3},
    {.kind = GRAVIMETRIC_FRACTION, .part = 0, .component = N2, .value = 2e-4, .standard = 1e-5},
    {.kind = GRAVIMETRIC_FRACTION, .part = 1, .component = O2, .value = 7e-6, .standard = 1e-6},
    {.kind = GRAVIMETRIC_FRACTION, .part = 1, .component = C4, .value = 3e-6, .standard = 1e-6},
    {.kind = GRAVIMETRIC_FRACTION, .part = 2, .component = O2, .value = 0.2, .standard = 1e-3},
    {.kind = GRAVIMETRIC_MOLAR_MASS, .component = N2, .value = 0.028014, .standard = 1e-6},
    {.kind = GRAVIMETRIC_MOLAR_MASS, .component = C4, .value = 0.058124, .standard = 1e-6},
};
enum { INPUT_COUNT = sizeof INPUTS / sizeof *INPUTS };

static struct gravimetric equation_of(size_t parts)
{
    return (struct gravimetric){.count = COUNT_OF_GASES,
                                .parts = parts,
                                .molar_masses = MOLAR_MASSES,
                                .part = PARTS,
                                .input_count = INPUT_COUNT,
                                .inputs = INPUTS};
}

/* By hand, of the two parents by mole:
 *   M_1 = 0.0002 x 28.014 + 0.9998 x 58.124 = 58.117978 g/mol, n_1 = 77.0 g / M_1 = 1.324891 mol
 *   M_2 = 0.99999 x 28.014 + 7e-6 x 31.998 + 3e-6 x 58.124 = 28.014118218 g/mol, n_2 = 1818.6 g / M_2 = 64.917267 mol
 *   n(C4) = 0.9998 n_1 + 3e-6 n_2 = 1.324821 mol;  x(C4) = n(C4) / (n_1 + n_2) = 0.01999967
 * and of the third by mass 15.0 g x 0.1 / 58.124 g/mol = 0.02580689 mol of n-butane of
 * 15.0 g x (0.7 / 28.014 + 0.2 / 31.998 + 0.1 / 58.124) mol/g = 0.49437535 mol. */
static void a_worked_example_by_hand(void **state)
{
    (void)state;
    double x[COUNT_OF_GASES];
    struct gravimetric two = equation_of(2), three = equation_of(3);
    gravimetric_fractions(&two, x);
    const double n1 = 0.0770 / 0.058117978, n2 = 1.8186 / 0.028014118218, n3 = 0.494375349047;
    assert_close(n1, 1.324891, 1e-6, "by hand");
    assert_close(n2, 64.917267, 1e-7, "by hand");
    assert_close(x[C4], (0.9998 * n1 + 3e-6 * n2) / (n1 + n2), 1e-12, "by hand");
    assert_close(x[O2], 7e-6 * n2 / (n1 + n2), 1e-12, "by hand");
    assert_close(x[N2] + x[O2] + x[C4], 1.0, 1e-15, "a whole");
    gravimetric_fractions(&three, x);
    assert_close(x[C4], (0.9998 * n1 + 3e-6 * n2 + 0.0258068956) / (n1 + n2 + n3), 1e-9, "by hand");
}

/* Written apart in another form (tests/support/weighed_blend.c): values, derivatives and u of n-butane. */
static void it_agrees_with_a_model_written_apart(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double *values = BLEND_VALUES, *spreads = BLEND_SPREADS;
    double butane[] = {1.0 - values[BLEND_TRACE_IN_BUTANE], values[BLEND_TRACE_IN_BUTANE]};
    double nitrogen[] = {values[BLEND_TRACE_IN_NITROGEN], 1.0 - values[BLEND_TRACE_IN_NITROGEN]};
    const double molar_masses[] = {values[BLEND_BUTANE_MOLAR_MASS], values[BLEND_NITROGEN_MOLAR_MASS]};
    const struct gravimetric_part parts[] = {
        {.mass = values[BLEND_BUTANE_MASS], .fractions = butane, .has_rest = true, .rest = 0},
        {.mass = values[BLEND_NITROGEN_MASS], .fractions = nitrogen, .has_rest = true, .rest = 1},
    };
    const struct gravimetric_input inputs[BLEND_INPUTS] = {
        [BLEND_BUTANE_MASS] = {.kind = GRAVIMETRIC_MASS, .mass_change = FIRST},
        [BLEND_NITROGEN_MASS] = {.kind = GRAVIMETRIC_MASS, .mass_change = SECOND},
        [BLEND_TRACE_IN_BUTANE] = {.kind = GRAVIMETRIC_FRACTION, .part = 0, .component = 1},
        [BLEND_TRACE_IN_NITROGEN] = {.kind = GRAVIMETRIC_FRACTION, .part = 1, .component = 0},
        [BLEND_BUTANE_MOLAR_MASS] = {.kind = GRAVIMETRIC_MOLAR_MASS, .component = 0},
        [BLEND_NITROGEN_MOLAR_MASS] = {.kind = GRAVIMETRIC_MOLAR_MASS, .component = 1},
    };
    struct gravimetric_input valued[BLEND_INPUTS];
    for (size_t k = 0; k < BLEND_INPUTS; k++) {
        valued[k] = inputs[k];
        valued[k].value = values[k];
        valued[k].standard = spreads[k];
    }
    const struct gravimetric of = {.count = 2,
                                   .parts = 2,
                                   .molar_masses = molar_masses,
                                   .part = parts,
                                   .input_count = BLEND_INPUTS,
                                   .inputs = valued};
    const struct propagation_model apart = weighed_blend(), own = gravimetric_model(&of, arena);
    const struct first_order expected = propagate_first_order(&apart, arena),
                             first = propagate_first_order(&own, arena);
    assert_close(first.base[0], expected.base[BLEND_BUTANE], 1e-14, "the fraction");
    for (size_t k = 0; k < BLEND_INPUTS; k++) {
        assert_close(first.sensitivities[k * 2], expected.sensitivities[k * BLEND_OUTPUTS + BLEND_BUTANE], 1e-11,
                     "a derivative");
    }
    assert_close(first.standard[0], expected.standard[BLEND_BUTANE], 1e-11, "u");
    arena_free(arena);
}

static void derivatives_agree_with_differences(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct gravimetric of = equation_of(3);
    struct propagation_model model = gravimetric_model(&of, arena);
    double inputs[INPUT_COUNT], exact[COUNT_OF_GASES], high[COUNT_OF_GASES], low[COUNT_OF_GASES];
    for (size_t k = 0; k < INPUT_COUNT; k++) {
        const double step = INPUTS[k].standard * 0.1;
        memcpy(inputs, model.values, sizeof inputs);
        gravimetric_derivatives(&of, &INPUTS[k], arena, exact);
        inputs[k] += step;
        assert_int_equal(model.evaluate(model.context, inputs, high), MODEL_OK);
        inputs[k] -= 2.0 * step;
        assert_int_equal(model.evaluate(model.context, inputs, low), MODEL_OK);
        for (size_t i = 0; i < COUNT_OF_GASES; i++) {
            assert_near((high[i] - low[i]) / (2.0 * step), exact[i], 1e-6 * (fabs(exact[i]) + 1e-3), "a difference");
        }
        assert_near(exact[N2] + exact[O2] + exact[C4], 0.0, 1e-12 * fabs(exact[C4]) + 1e-15, "a whole stays one");
    }
    arena_free(arena);
}

/* Nearly linear as it is, random draws give the same u; a fraction below zero is impossible. */
static void draws_agree_with_first_order(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct gravimetric of = equation_of(2);
    struct propagation_model model = gravimetric_model(&of, arena);
    const struct first_order first = propagate_first_order(&model, arena);
    const struct drawn drawn = propagate_draws(&model, &first, 40000, 3, 1, arena);
    assert_close(drawn.outputs[C4].standard, first.standard[C4], 0.02, "u by draws, 40000 of them");
    assert_true(first_order_is_linear(&first, C4));
    /* one output alone is drawn as it is among the others */
    const size_t told[] = {C4};
    const struct propagation_model alone = gravimetric_model_of(&of, told, 1, arena);
    const struct first_order first_alone = propagate_first_order(&alone, arena);
    const struct drawn drawn_alone = propagate_draws(&alone, &first_alone, 40000, 3, 2, arena);
    assert_true(drawn_alone.outputs[0].mean == drawn.outputs[C4].mean);
    assert_true(drawn_alone.outputs[0].high == drawn.outputs[C4].high);
    double inputs[INPUT_COUNT], outputs[COUNT_OF_GASES];
    memcpy(inputs, model.values, sizeof inputs);
    inputs[5] = -1e-6;
    assert_int_equal(model.evaluate(model.context, inputs, outputs), MODEL_IMPOSSIBLE);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_worked_example_by_hand),
        cmocka_unit_test(it_agrees_with_a_model_written_apart),
        cmocka_unit_test(derivatives_agree_with_differences),
        cmocka_unit_test(draws_agree_with_first_order),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
