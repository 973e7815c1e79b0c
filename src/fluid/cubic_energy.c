/* The residual Helmholtz energy of the cubic equations and its derivatives.
 *
 * With the sums n = sum n_i, A = n^2 a / (R T), B = n b, C = n c and the untranslated volume V + C it is
 *
 *   F = -n g(V, D) - A f(V + C, B),   D = B - C,
 *   g = ln(1 - D / V),   f = ln((V + C + delta1 B) / (V + C + delta2 B)) / ((delta1 - delta2) B)
 *
 * which is Michelsen and Mollerup's form (Thermodynamic Models, 2nd ed., chapter 3, with A in place of their D / T)
 * where C = 0. The translated equation's ideal gas is the one at the translated volume: hence V and not V + C in the
 * quotient of g, and hence that b - c alone stands there.
 */
#include "fluid/cubic_internal.h"

#include <math.h>
#include <string.h>

/* ---- sums ------------------------------------------------------------------------------------------------------ */

/* A_n[i] = 2 sum_j n_j pair[i, j]; returns sum_ij n_i n_j pair[i, j]. */
static double quadratic_sum(const double *pair, size_t count, const double n[], double A_n[])
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        const double *row = &pair[i * count];
        double even = 0.0, odd = 0.0; /* two chains of additions run side by side */
        size_t j = 0;
        for (; j + 1 < count; j += 2) {
            even += n[j] * row[j];
            odd += n[j + 1] * row[j + 1];
        }
        if (j < count) {
            even += n[j] * row[j];
        }
        A_n[i] = 2.0 * (even + odd);
        sum += n[i] * (even + odd);
    }
    return sum;
}

static double linear_sum(const double values[], size_t count, const double n[])
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i] * values[i];
    }
    return sum;
}

/* b_ij = (1 - lij) (b_i + b_j) / 2, or a derivative of it. */
static double pair_covolume(const struct cubic_at_t *at, const double b[], size_t i, size_t j)
{
    return 0.5 * (1.0 - cubic_of(&at->head)->pair[i * at->head.fluid->count + j].lij) * (b[i] + b[j]);
}

/* n b, or a derivative of it: sum_ij n_i n_j b_ij / n, and its derivatives by n_i. Without lij that is sum n_i b_i. */
static double covolume_sum(const struct cubic_at_t *at, const double b[], double amount, const double n[], double B_n[])
{
    const size_t count = at->head.fluid->count;
    double B = 0.0;
    if (!cubic_of(&at->head)->has_lij) {
        for (size_t i = 0; i < count; i++) {
            B_n[i] = b[i];
            B += n[i] * b[i];
        }
        return B;
    }
    for (size_t i = 0; i < count; i++) {
        B_n[i] = 0.0;
        for (size_t j = 0; j < count; j++) {
            B_n[i] += n[j] * pair_covolume(at, b, i, j) / amount;
        }
        B += n[i] * B_n[i];
    }
    for (size_t i = 0; i < count; i++) {
        B_n[i] = 2.0 * B_n[i] - B / amount;
    }
    return B;
}

static double total(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

struct cubic_sums cubic_sums_of(const struct cubic_at_t *at, const double n[])
{
    const size_t count = at->head.fluid->count;
    struct cubic_sums sums = {.n = total(n, count)};
    sums.A = quadratic_sum(at->pair, count, n, at->work->A_n);
    sums.B = covolume_sum(at, at->b, sums.n, n, at->work->B_n);
    sums.C = linear_sum(at->c, count, n);
    return sums;
}

double cubic_occupied_volume(const struct cubic_at_t *at, const double n[])
{
    const size_t count = at->head.fluid->count;
    return covolume_sum(at, at->b, total(n, count), n, at->work->B_n) - linear_sum(at->c, count, n);
}

/* ---- the two functions of volume ------------------------------------------------------------------------------- */

/* The subscript D of g is the derivative by its second argument, B of f likewise. */
struct parts {
    double n, A, B;
    double g, g_V, g_D, g_VV, g_VD, g_DD;
    double f, f_V, f_B, f_VV, f_VB, f_BB;
};

static void set_repulsion(struct parts *p, double V, double D)
{
    const double unit = 1.0 / (V * (V - D)), by_free = V * unit;
    p->g = log1p(-D / V);
    p->g_V = D * unit;
    p->g_D = -by_free;
    p->g_VV = -D * (2.0 * V - D) * unit * unit;
    p->g_VD = by_free * by_free;
    p->g_DD = -by_free * by_free;
}

/* f is homogeneous of degree -1 in V and B, which gives f_B and f_BB from the other derivatives. Below B / V = 1e-5
 * or so f_BB loses digits, but there it multiplies terms that no longer count. Van der Waals has f = 1 / V. */
static void set_attraction(struct parts *p, const struct cubic_form *form, double V)
{
    const double B = p->B, span = form->delta1 - form->delta2;
    const double first = V + form->delta1 * B, second = V + form->delta2 * B;
    const double by_product = 1.0 / (first * second);
    p->f_V = -by_product;
    p->f_VV = (first + second) * by_product * by_product;
    if (!(span > 0.0)) {
        p->f = 1.0 / V;
        p->f_B = p->f_VB = p->f_BB = 0.0;
        return;
    }
    p->f = log1p(span * B / second) / (span * B);
    p->f_VB = (form->delta1 * second + form->delta2 * first) * by_product * by_product;
    p->f_B = -(p->f + V * p->f_V) / B;
    p->f_BB = -(2.0 * p->f_B + V * p->f_VB) / B;
}

/* ---- derivatives ----------------------------------------------------------------------------------------------- */

/* With d_i = B_i - c_i:  F_i = -g - n g_D d_i - A_i f - A (f_V c_i + f_B B_i),  sorted by A_i, B_i and c_i. */
static void set_first(const struct cubic_at_t *at, const struct parts *p, double F_n[])
{
    const size_t count = at->head.fluid->count;
    const double *A_n = at->work->A_n, *B_n = at->work->B_n, *c = at->c;
    const double by_c = p->A * p->f_V - p->n * p->g_D, by_B = p->A * p->f_B + p->n * p->g_D;
    for (size_t i = 0; i < count; i++) {
        F_n[i] = -(p->g + p->f * A_n[i] + by_B * B_n[i] + by_c * c[i]);
    }
}

static void set_volume_derivatives(const struct cubic_at_t *at, const struct parts *p, double F_Vn[])
{
    const size_t count = at->head.fluid->count;
    const double *A_n = at->work->A_n, *B_n = at->work->B_n, *c = at->c;
    const double by_c = p->A * p->f_VV - p->n * p->g_VD, by_B = p->A * p->f_VB + p->n * p->g_VD;
    for (size_t i = 0; i < count; i++) {
        F_Vn[i] = -(p->g_V + p->f_V * A_n[i] + by_B * B_n[i] + by_c * c[i]);
    }
}

/* One row of F_nn is linear in pair[i, j], A_j, B_j and c_j. */
static void set_second(const struct cubic_at_t *at, const struct parts *p, double *F_nn)
{
    const size_t count = at->head.fluid->count;
    const double *A_n = at->work->A_n, *B_n = at->work->B_n, *c = at->c;
    for (size_t i = 0; i < count; i++) {
        const double repulsion = p->g_D + p->n * p->g_DD * (B_n[i] - c[i]);
        const double constant = p->g_D * (B_n[i] - c[i]);
        const double by_A = p->f_V * c[i] + p->f_B * B_n[i];
        const double by_B = A_n[i] * p->f_B + p->A * (p->f_VB * c[i] + p->f_BB * B_n[i]) + repulsion;
        const double by_c = A_n[i] * p->f_V + p->A * (p->f_VV * c[i] + p->f_VB * B_n[i]) - repulsion;
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j;
            F_nn[ij] = F_nn[j * count + i] =
                -(constant + 2.0 * p->f * at->pair[ij] + by_A * A_n[j] + by_B * B_n[j] + by_c * c[j]);
        }
    }
}

/* What a covolume quadratic in composition adds: B_ij = (2 b_ij - B_i - B_j) / n. */
static void add_covolume_curvature(const struct cubic_at_t *at, const struct parts *p, double *F_nn)
{
    const size_t count = at->head.fluid->count;
    const double *B_n = at->work->B_n;
    const double slope = p->n * p->g_D + p->A * p->f_B;
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            const double B_ij = (2.0 * pair_covolume(at, at->b, i, j) - B_n[i] - B_n[j]) / p->n;
            F_nn[i * count + j] -= slope * B_ij;
        }
    }
}

/* A's and B's derivatives by temperature. */
struct slopes {
    double A_t, A_tt, B_t, B_tt;
};

static struct slopes slopes_of(const struct cubic_at_t *at, double amount, const double n[])
{
    const size_t count = at->head.fluid->count;
    struct cubic_work *work = at->work;
    struct slopes slopes = {.B_t = 0.0};
    cubic_set_pair_slopes(at);
    slopes.A_tt = quadratic_sum(work->pair_tt, count, n, work->A_Tn); /* A_Tn is written over in the next line */
    slopes.A_t = quadratic_sum(work->pair_t, count, n, work->A_Tn);
    if (cubic_of(&at->head)->equation->has_moving_covolume) {
        slopes.B_tt = covolume_sum(at, at->b_tt, amount, n, work->B_Tn);
        slopes.B_t = covolume_sum(at, at->b_t, amount, n, work->B_Tn);
    } else {
        memset(work->B_Tn, 0, count * sizeof *work->B_Tn);
    }
    return slopes;
}

static void set_temperature_derivatives(const struct cubic_at_t *at, const struct parts *p, const double n[],
                                        unsigned want, struct helmholtz *out)
{
    const struct slopes s = slopes_of(at, p->n, n);
    const struct cubic_work *work = at->work;
    const size_t count = at->head.fluid->count;
    const double by_B = p->n * p->g_D + p->A * p->f_B;
    out->F_T = -s.A_t * p->f - by_B * s.B_t;
    out->F_TV = -s.A_t * p->f_V - (p->n * p->g_VD + p->A * p->f_VB) * s.B_t;
    if (want & WANT_F_TT) {
        out->F_TT = -s.A_tt * p->f - 2.0 * s.A_t * p->f_B * s.B_t - by_B * s.B_tt -
                    (p->n * p->g_DD + p->A * p->f_BB) * s.B_t * s.B_t;
    }
    for (size_t i = 0; want & WANT_F_TN && i < count; i++) {
        const double B_i = work->B_n[i], c_i = at->c[i];
        const double by_B_t =
            p->g_D + p->n * p->g_DD * (B_i - c_i) + work->A_n[i] * p->f_B + p->A * (p->f_VB * c_i + p->f_BB * B_i);
        out->F_Tn[i] =
            -work->A_Tn[i] * p->f - s.A_t * (p->f_V * c_i + p->f_B * B_i) - s.B_t * by_B_t - by_B * work->B_Tn[i];
    }
}

void cubic_energy_at(const struct cubic_at_t *at, const struct cubic_sums *sums, double volume, const double n[],
                     unsigned want, struct helmholtz *out)
{
    struct parts p = {.n = sums->n, .A = sums->A, .B = sums->B};
    set_repulsion(&p, volume, sums->B - sums->C);
    set_attraction(&p, cubic_of(&at->head)->equation->form, volume + sums->C);
    out->F = -p.n * p.g - p.A * p.f;
    out->F_V = -p.n * p.g_V - p.A * p.f_V;
    out->F_VV = -p.n * p.g_VV - p.A * p.f_VV;
    if (want & WANT_F_N) {
        set_first(at, &p, out->F_n);
    }
    if (want & WANT_F_VN) {
        set_volume_derivatives(at, &p, out->F_Vn);
    }
    if (want & WANT_F_NN) {
        set_second(at, &p, out->F_nn);
        if (cubic_of(&at->head)->has_lij) {
            add_covolume_curvature(at, &p, out->F_nn);
        }
    }
    if (want & (WANT_F_T | WANT_F_TT | WANT_F_TN)) {
        set_temperature_derivatives(at, &p, n, want, out);
    }
}
