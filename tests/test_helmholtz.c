/* Every method's residual Helmholtz energy: its derivatives against sixth-order differences, and its homogeneity. */
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

enum { MOST = SAMPLE_MOST, MOST_VALUES = 3 + SAMPLE_MOST };
enum { ALL_WANTS = WANT_F_VV | WANT_F_N | WANT_F_VN | WANT_F_NN | WANT_F_T | WANT_F_TT | WANT_F_TN };

/* Molar volumes (m3/mol) from liquid-like to dilute, and temperatures (K) on both sides of the critical ones. No volume
 * comes nearer to the smallest one than this factor. */
#define LEAST_CLEARANCE 1.2
static const double MOLAR_VOLUMES[] = {0.91e-4, 2.3e-4, 1.1e-3, 2.3e-2};
static const double TEMPERATURES[] = {231.0, 311.0, 457.0};

#define COUNT(array) (sizeof(array) / sizeof *(array))

struct evaluation {
    struct helmholtz F;
    double F_n[MOST], F_Vn[MOST], F_Tn[MOST], F_nn[MOST * MOST];
};

struct subject {
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    double T, V, n[MOST];
};

static void evaluate(const struct subject *subject, struct evaluation *out)
{
    out->F = (struct helmholtz){.F_n = out->F_n, .F_Vn = out->F_Vn, .F_Tn = out->F_Tn, .F_nn = out->F_nn};
    assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, subject->T), ANSWER_OK);
    assert_int_equal(subject->fluid->ops->tv(subject->at_t, subject->V, subject->n, ALL_WANTS, &out->F), ANSWER_OK);
}

/* F, F_V, F_T and F_1 ... as one row; what their derivatives should be is a row of the same shape. */
static void row_of_values(const struct evaluation *e, size_t count, double row[MOST_VALUES])
{
    row[0] = e->F.F;
    row[1] = e->F.F_V;
    row[2] = e->F.F_T;
    for (size_t i = 0; i < count; i++) {
        row[3 + i] = e->F_n[i];
    }
}

static void row_by_volume(const struct evaluation *e, size_t count, double row[MOST_VALUES])
{
    row[0] = e->F.F_V;
    row[1] = e->F.F_VV;
    row[2] = e->F.F_TV;
    for (size_t i = 0; i < count; i++) {
        row[3 + i] = e->F_Vn[i];
    }
}

static void row_by_temperature(const struct evaluation *e, size_t count, double row[MOST_VALUES])
{
    row[0] = e->F.F_T;
    row[1] = e->F.F_TV;
    row[2] = e->F.F_TT;
    for (size_t i = 0; i < count; i++) {
        row[3 + i] = e->F_Tn[i];
    }
}

static void row_by_amount(const struct evaluation *e, size_t count, size_t j, double row[MOST_VALUES])
{
    row[0] = e->F_n[j];
    row[1] = e->F_Vn[j];
    row[2] = e->F_Tn[j];
    for (size_t i = 0; i < count; i++) {
        row[3 + i] = e->F_nn[i * count + j];
    }
}

/* d(row)/dx by (45 (f1 - f-1) - 9 (f2 - f-2) + (f3 - f-3)) / 60 h: truncation h^6, about 1e-10 where a Gaussian term is
 * narrow. */
static void differentiate(struct subject *subject, double *x, double row[MOST_VALUES])
{
    static const double weight[] = {45.0 / 60.0, -9.0 / 60.0, 1.0 / 60.0};
    const double at = *x, h = 5e-4 * at;
    for (size_t k = 0; k < MOST_VALUES; k++) {
        row[k] = 0.0;
    }
    for (int offset = -3; offset <= 3; offset++) {
        if (offset != 0) {
            struct evaluation e;
            double values[MOST_VALUES];
            *x = at + offset * h;
            evaluate(subject, &e);
            row_of_values(&e, subject->fluid->count, values);
            for (size_t k = 0; k < 3 + subject->fluid->count; k++) {
                row[k] += (offset > 0 ? 1.0 : -1.0) * weight[abs(offset) - 1] * values[k] / h;
            }
        }
    }
    *x = at;
}

/* Relative to the derivative, or to value over argument where a derivative passes near zero. */
static void compare(const double analytical[], const double numerical[], const double values[], double x, size_t count,
                    const char *what)
{
    for (size_t k = 0; k < 3 + count; k++) {
        char text[160];
        snprintf(text, sizeof text, "%s, value %zu, against central differences", what, k);
        const double scale = fmax(fabs(analytical[k]), 0.1 * fabs(values[k] / x));
        assert_near(analytical[k], numerical[k], 1e-8 * scale + 1e-300, text);
    }
}

static void check_derivatives(struct subject *subject, const char *name)
{
    const size_t count = subject->fluid->count;
    struct evaluation e;
    double values[MOST_VALUES], expected[MOST_VALUES], numerical[MOST_VALUES];
    char what[120];
    evaluate(subject, &e);
    row_of_values(&e, count, values);
    snprintf(what, sizeof what, "%s at %g K, %g m3, by V", name, subject->T, subject->V);
    row_by_volume(&e, count, expected);
    differentiate(subject, &subject->V, numerical);
    compare(expected, numerical, values, subject->V, count, what);
    snprintf(what, sizeof what, "%s at %g K, %g m3, by T", name, subject->T, subject->V);
    row_by_temperature(&e, count, expected);
    differentiate(subject, &subject->T, numerical);
    compare(expected, numerical, values, subject->T, count, what);
    for (size_t j = 0; j < count; j++) {
        snprintf(what, sizeof what, "%s at %g K, %g m3, by n%zu", name, subject->T, subject->V, j);
        row_by_amount(&e, count, j, expected);
        differentiate(subject, &subject->n[j], numerical);
        compare(expected, numerical, values, subject->n[j], count, what);
    }
}

/* F is homogeneous of first degree in (V, n), F_i of degree zero; F_nn is symmetric. */
static void check_homogeneity(struct subject *subject, const char *name)
{
    const size_t count = subject->fluid->count;
    struct evaluation e;
    evaluate(subject, &e);
    double euler = subject->V * e.F.F_V;
    for (size_t i = 0; i < count; i++) {
        euler += subject->n[i] * e.F_n[i];
        double row = subject->V * e.F_Vn[i], size = fabs(row);
        for (size_t j = 0; j < count; j++) {
            row += subject->n[j] * e.F_nn[i * count + j];
            size += fabs(subject->n[j] * e.F_nn[i * count + j]);
            assert_near(e.F_nn[i * count + j], e.F_nn[j * count + i], 0.0, name);
        }
        assert_near(row, 0.0, 1e-13 * size, name);
    }
    assert_near(euler, e.F.F, 1e-13 * (fabs(e.F.F) + fabs(subject->V * e.F.F_V)), name);
}

static void for_each_state(void (*check)(struct subject *subject, const char *name))
{
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        struct subject subject = {.fluid = sample_fluid_create(sample, arena)};
        if (subject.fluid->ops->form == FLUID_FROM_TP) {
            continue; /* no Helmholtz energy of its own: test_phase.c */
        }
        subject.at_t = fluid_at_t_create(subject.fluid, arena);
        double amount = 0.0;
        for (size_t i = 0; i < sample->count; i++) {
            amount += subject.n[i] = sample->n[i];
        }
        for (size_t t = 0; t < COUNT(TEMPERATURES); t++) {
            for (size_t v = 0; v < COUNT(MOLAR_VOLUMES); v++) {
                subject.T = TEMPERATURES[t];
                assert_int_equal(fluid_set_t(subject.at_t, subject.fluid, subject.T), ANSWER_OK);
                const double smallest = subject.fluid->ops->smallest_volume(subject.at_t, subject.n);
                subject.V = fmax(MOLAR_VOLUMES[v] * amount, LEAST_CLEARANCE * smallest);
                check(&subject, sample->name);
            }
        }
    }
    arena_free(arena);
}

static void derivatives_agree_with_differences(void **state)
{
    (void)state;
    for_each_state(check_derivatives);
}

static void the_energy_is_homogeneous_in_volume_and_amounts(void **state)
{
    (void)state;
    for_each_state(check_homogeneity);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(derivatives_agree_with_differences),
        cmocka_unit_test(the_energy_is_homogeneous_in_volume_and_amounts),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
