/* The residual Helmholtz energy of a multi-fluid mixture and its derivatives by T, V and amounts.
 *
 * F = N alphar(tau, delta, x). With A the value, A_t = tau dA/dtau, A_d = delta dA/ddelta and so on, t_i and v_i the
 * logarithmic slopes n dln T_r/dn_i and n dln(1/rho_r)/dn_i, and d_i = 1 + v_i, every function of (tau, delta, x) has
 *
 *   n df/dn_i = f_t t_i + f_d d_i + f_xi - sum_k x_k f_xk
 *
 * at constant T and V; applied to A it gives g_i, F_i = A + g_i, and applied to g_i it gives F_ij = (g_j + n
 * dg_i/dn_j)/N (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032, table B4, in other symbols). All stays finite where
 * x_i = 0. */
#include "fluid/multi_fluid_internal.h"

#include <math.h>
#include <string.h>

/* ---- composition ------------------------------------------------------------------------------------------------- */

static bool set_fractions(const struct multi_fluid *fluid, struct multi_fluid_work *w, const double n[])
{
    const size_t count = fluid->head.count;
    bool is_good = true;
    w->amount = 0.0;
    for (size_t i = 0; i < count; i++) {
        is_good = is_good && n[i] >= 0.0;
        w->n[i] = n[i];
        w->amount += n[i];
    }
    if (!is_good || !(w->amount > 0.0) || !isfinite(w->amount)) {
        return false;
    }
    const double by_amount = 1.0 / w->amount;
    for (size_t i = 0; i < count; i++) {
        w->x[i] = n[i] * by_amount;
        w->weights[i] = w->x[i];
    }
    return isfinite(by_amount);
}

static void set_departure_weights(const struct multi_fluid *fluid, struct multi_fluid_work *w)
{
    double *weights = &w->weights[fluid->head.count];
    for (size_t k = 0; k < fluid->function_count; k++) {
        weights[k] = 0.0;
    }
    for (size_t k = 0; k < fluid->departure_count; k++) {
        const struct multi_fluid_departure *departure = &fluid->departures[k];
        weights[departure->function] += departure->weight * w->x[departure->i] * w->x[departure->j];
    }
}

enum answer multi_fluid_set_amounts(const struct fluid_at_t *at_t, const double n[], enum multi_fluid_stage stage)
{
    const struct multi_fluid *fluid = multi_fluid_of(at_t);
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    const bool is_same = w->stage != STAGE_NOTHING && memcmp(n, w->n, fluid->head.count * sizeof *n) == 0;
    if (is_same && w->stage >= stage) {
        return ANSWER_OK;
    }
    if (!is_same) {
        w->stage = STAGE_NOTHING;
        if (!set_fractions(fluid, w, n)) {
            return ANSWER_OUT_OF_RANGE;
        }
        multi_fluid_reduce(fluid, w);
        set_departure_weights(fluid, w);
        w->tau = w->reducing_temperature / at_t->temperature;
        w->isotherm = ISOTHERM_UNKNOWN;
        w->has_reducing_slopes = false;
        parts_set_tau(w->parts, w->tau);
    }
    parts_set_weights(w->parts, w->weights, stage == STAGE_SLOPES);
    w->stage = stage;
    return ANSWER_OK;
}

/* ---- derivatives by amount -----------------------------------------------------------------------------------------
 */

/* dalphar/dx_i from the parts' values (or their slopes): the component's own and the departures of its pairs. */
static void by_fraction(const struct multi_fluid *fluid, const struct multi_fluid_work *w, const double part[],
                        double out[])
{
    const double *function = &part[fluid->head.count];
    memcpy(out, part, fluid->head.count * sizeof *out);
    for (size_t k = 0; k < fluid->departure_count; k++) {
        const struct multi_fluid_departure *departure = &fluid->departures[k];
        const double value = departure->weight * function[departure->function];
        out[departure->i] += w->x[departure->j] * value;
        out[departure->j] += w->x[departure->i] * value;
    }
}

/* f_xi - sum_k x_k f_xk in place of f_xi. */
static void against_mean(const struct multi_fluid_work *w, size_t count, double f_x[])
{
    double mean = 0.0;
    for (size_t k = 0; k < count; k++) {
        mean += w->x[k] * f_x[k];
    }
    for (size_t i = 0; i < count; i++) {
        f_x[i] -= mean;
    }
}

/* Fills a, and with `slopes` a_d and a_t, each against its mean. */
static void set_fraction_slopes(const struct multi_fluid *fluid, struct multi_fluid_work *w, bool slopes)
{
    const size_t count = fluid->head.count;
    if (slopes) {
        parts_slopes(w->parts, w->value, w->d, w->t);
        by_fraction(fluid, w, w->d, w->a_d);
        by_fraction(fluid, w, w->t, w->a_t);
        against_mean(w, count, w->a_d);
        against_mean(w, count, w->a_t);
    } else {
        parts_values(w->parts, w->value);
    }
    by_fraction(fluid, w, w->value, w->a);
    against_mean(w, count, w->a);
}

/* d2alphar/(dx_i dx_j), made into its part of n da_i/dn_j:  A_ij - P_i - P_j + sum_k x_k P_k,  P_j = sum_k x_k A_kj. */
static void set_mixed(const struct multi_fluid *fluid, struct multi_fluid_work *w, double P[])
{
    const size_t count = fluid->head.count;
    const double *function = &w->value[count];
    double mean = 0.0;
    memset(w->mixed, 0, count * count * sizeof *w->mixed);
    memset(P, 0, count * sizeof *P);
    for (size_t k = 0; k < fluid->departure_count; k++) {
        const struct multi_fluid_departure *departure = &fluid->departures[k];
        const size_t i = departure->i, j = departure->j;
        const double value = departure->weight * function[departure->function];
        w->mixed[i * count + j] = w->mixed[j * count + i] = value;
        P[i] += w->x[j] * value;
        P[j] += w->x[i] * value;
        mean += 2.0 * w->x[i] * w->x[j] * value;
    }
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            w->mixed[i * count + j] += mean - P[i] - P[j];
        }
    }
}

static void set_second(const struct multi_fluid *fluid, struct multi_fluid_work *w, const struct residual_sums *A,
                       double *F_nn)
{
    const size_t count = fluid->head.count;
    const double *t = w->temperature_slope, *v = w->volume_slope;
    multi_fluid_reduce_bends(fluid, w);
    set_mixed(fluid, w, w->d); /* the parts' slopes are in a_d already: their room is free */
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j;
            const double d_i = 1.0 + v[i], d_j = 1.0 + v[j];
            const double by_tau = A->t * (t[i] + t[j] + w->bent_temperature[ij]) + (A->t + A->tt) * t[i] * t[j];
            const double by_delta = A->d * (1.0 + v[i] + v[j] + w->bent_volume[ij]) + (A->d + A->dd) * d_i * d_j;
            const double crossed = A->dt * (t[i] * d_j + t[j] * d_i);
            const double composed =
                w->a_t[i] * t[j] + w->a_t[j] * t[i] + w->a_d[i] * d_j + w->a_d[j] * d_i + w->mixed[ij];
            F_nn[ij] = F_nn[j * count + i] = (by_tau + by_delta + crossed + composed) / w->amount;
        }
    }
}

static void put_by_amount(const struct multi_fluid *fluid, struct multi_fluid_work *w, const struct residual_sums *A,
                          double volume, double temperature, unsigned want, struct helmholtz *out)
{
    const double *t = w->temperature_slope, *v = w->volume_slope;
    if (!w->has_reducing_slopes) {
        multi_fluid_reduce_slopes(fluid, w);
        w->has_reducing_slopes = true;
    }
    set_fraction_slopes(fluid, w, (want & (WANT_F_VN | WANT_F_TN | WANT_F_NN)) != 0);
    for (size_t i = 0; want & WANT_F_N && i < fluid->head.count; i++) {
        out->F_n[i] = A->value + A->t * t[i] + A->d * (1.0 + v[i]) + w->a[i];
    }
    for (size_t i = 0; want & WANT_F_VN && i < fluid->head.count; i++) {
        out->F_Vn[i] = -(A->d + A->dt * t[i] + (A->d + A->dd) * (1.0 + v[i]) + w->a_d[i]) / volume;
    }
    for (size_t i = 0; want & WANT_F_TN && i < fluid->head.count; i++) {
        out->F_Tn[i] = -(A->t + (A->t + A->tt) * t[i] + A->dt * (1.0 + v[i]) + w->a_t[i]) / temperature;
    }
    if (want & WANT_F_NN) {
        set_second(fluid, w, A, out->F_nn);
    }
}

/* ---- the energy ------------------------------------------------------------------------------------------------- */

enum multi_fluid_stage multi_fluid_stage_for(unsigned want)
{
    return want & ~(unsigned)WANT_F_VV ? STAGE_SLOPES : STAGE_VALUES;
}

enum answer multi_fluid_energy(const struct fluid_at_t *at_t, double volume, unsigned want, struct helmholtz *out)
{
    const struct multi_fluid *fluid = multi_fluid_of(at_t);
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    const double T = at_t->temperature, n = w->amount;
    const double delta = n * w->reducing_volume / volume, square = volume * volume;
    struct residual_sums A;
    if (!(square > 0.0)) {
        return ANSWER_OUT_OF_RANGE; /* so small that its square is lost: no state has that volume */
    }
    if (w->stage == STAGE_SLOPES) {
        parts_by_both(w->parts, delta, &A);
    } else {
        parts_by_density(w->parts, delta, &A);
    }
    out->F = n * A.value;
    out->F_V = -n * A.d / volume;
    out->F_VV = n * (2.0 * A.d + A.dd) / square;
    if (w->stage == STAGE_SLOPES) {
        out->F_T = -n * A.t / T;
        out->F_TV = n * A.dt / (volume * T);
        out->F_TT = n * (2.0 * A.t + A.tt) / (T * T);
    }
    if (want & (WANT_F_N | WANT_F_VN | WANT_F_TN | WANT_F_NN)) {
        put_by_amount(fluid, w, &A, volume, T, want, out);
    }
    return isfinite(A.value) && isfinite(A.dd) ? ANSWER_OK : ANSWER_FAILED;
}

enum answer multi_fluid_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                           struct helmholtz *out)
{
    if (!(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = multi_fluid_set_amounts(at_t, n, multi_fluid_stage_for(want));
    return answer != ANSWER_OK ? answer : multi_fluid_energy(at_t, volume, want, out);
}
