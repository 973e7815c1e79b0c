/* Mixture critical points, in T and V.
 *
 * With B_ij = sqrt(z_i z_j) d ln f_i / d n_j at constant T, V and u the eigenvector of its smallest eigenvalue, the
 * critical point has
 *   b = u' B u = 0   and   c = d/ds (u' B(n + s u sqrt(z)) u) = 0 at s = 0,
 * the derivative by differences of the analytic second derivatives. Newton's steps in ln T and ln V, with the four
 * derivatives of b and c by differences too.
 */
#include "equilibrium/mixture_critical.h"
#include "equilibrium/linear.h"

#include <math.h>

enum { MOST_STEPS = 40 };

/* Steps of the differences: along the eigenvector, where the error is of its square, and in ln T and ln V. */
#define ALONG  3e-5
#define ACROSS 1e-5
/* The last step in ln T and ln V, and the largest. */
#define LAST_STEP    1e-10
#define LARGEST_STEP 0.1
/* Rounding in the differences keeps steps from shrinking below this. */
#define SETTLED 1e-7

struct criteria {
    double b, c;
};

struct search {
    struct fluid_at_t *at_t;
    const struct fluid *fluid;
    struct equilibrium_workspace *ws;
    double pressure;
};

/* B at the amounts n, scaled by the feed, into ws->matrix, active components only. */
static enum answer set_hessian(struct search *s, double volume, const double n[])
{
    struct equilibrium_workspace *ws = s->ws;
    struct phase *phase = ws->trial;
    const size_t m = ws->active_count;
    const double RT = s->fluid->gas_constant * s->at_t->temperature;
    const enum answer answer = phase_tv(s->at_t, volume, n, PHASE_DLN_PHI_DN | PHASE_DP_DN, phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    s->pressure = phase->pressure;
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        for (size_t b = 0; b < m; b++) {
            const size_t j = ws->active[b];
            /* From constant pressure back to constant volume. */
            const double slope = phase->dln_phi_dn[i * ws->count + j] - 1.0 / phase->amount -
                                 phase->dp_dn[i] * phase->dp_dn[j] / (phase->dp_dv * RT);
            ws->matrix[a * m + b] = sqrt(ws->feed[i] * ws->feed[j]) * (slope + (i == j ? 1.0 / n[i] : 0.0));
        }
    }
    return ANSWER_OK;
}

/* u' B u with u in ws->border. */
static double quadratic_form(const struct equilibrium_workspace *ws)
{
    const size_t m = ws->active_count;
    double sum = 0.0;
    for (size_t a = 0; a < m; a++) {
        for (size_t b = 0; b < m; b++) {
            sum += ws->border[a] * ws->matrix[a * m + b] * ws->border[b];
        }
    }
    return sum;
}

/* The eigenvector of the smallest eigenvalue, in ws->border, its largest entry positive so that it does not turn
 * about between evaluations. `vectors` is room for [m * m]. */
static double smallest_eigenvalue(struct equilibrium_workspace *ws, double *vectors)
{
    const size_t m = ws->active_count;
    size_t smallest = 0, largest = 0;
    linear_eigen(ws->matrix, m, ws->step, vectors);
    for (size_t a = 1; a < m; a++) {
        smallest = ws->step[a] < ws->step[smallest] ? a : smallest;
    }
    for (size_t a = 0; a < m; a++) {
        ws->border[a] = vectors[a * m + smallest];
        largest = fabs(ws->border[a]) > fabs(ws->border[largest]) ? a : largest;
    }
    const double sign = ws->border[largest] < 0.0 ? -1.0 : 1.0;
    for (size_t a = 0; a < m; a++) {
        ws->border[a] *= sign;
    }
    return ws->step[smallest];
}

/* The quadratic form a little along the eigenvector. */
static enum answer form_along(struct search *s, double volume, double distance, double *form)
{
    struct equilibrium_workspace *ws = s->ws;
    for (size_t i = 0; i < ws->count; i++) {
        ws->W[i] = ws->feed[i];
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->W[i] += distance * ws->border[a] * sqrt(ws->feed[i]);
    }
    const enum answer answer = set_hessian(s, volume, ws->W);
    *form = quadratic_form(ws);
    return answer;
}

/* No amount may come near zero. */
static double distance_along(const struct equilibrium_workspace *ws)
{
    double distance = ALONG;
    for (size_t a = 0; a < ws->active_count; a++) {
        distance = fmin(distance, 0.1 * sqrt(ws->feed[ws->active[a]]) / fabs(ws->border[a]));
    }
    return distance;
}

static enum answer evaluate(struct search *s, double T, double volume, struct criteria *out)
{
    double above, below;
    enum answer answer = fluid_set_t(s->at_t, s->fluid, T);
    if (answer == ANSWER_OK) {
        answer = set_hessian(s, volume, s->ws->feed);
    }
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double pressure = s->pressure;
    out->b = smallest_eigenvalue(s->ws, s->ws->reference->dln_phi_dn);
    const double distance = distance_along(s->ws);
    answer = form_along(s, volume, distance, &above);
    if (answer == ANSWER_OK) {
        answer = form_along(s, volume, -distance, &below);
    }
    if (answer == ANSWER_OK) {
        out->c = (above - below) / (2.0 * distance);
    }
    s->pressure = pressure;
    return answer;
}

/* One Newton step in ln T and ln V; its length. */
static enum answer step(struct search *s, double *T, double *volume, double *length)
{
    struct criteria here, warmer, wider;
    enum answer answer = evaluate(s, *T * exp(ACROSS), *volume, &warmer);
    if (answer == ANSWER_OK) {
        answer = evaluate(s, *T, *volume * exp(ACROSS), &wider);
    }
    if (answer == ANSWER_OK) {
        answer = evaluate(s, *T, *volume, &here);
    }
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double b_T = (warmer.b - here.b) / ACROSS, b_V = (wider.b - here.b) / ACROSS;
    const double c_T = (warmer.c - here.c) / ACROSS, c_V = (wider.c - here.c) / ACROSS;
    const double determinant = b_T * c_V - b_V * c_T;
    double by_T = -(here.b * c_V - here.c * b_V) / determinant;
    double by_V = -(here.c * b_T - here.b * c_T) / determinant;
    if (!isfinite(by_T) || !isfinite(by_V)) {
        return ANSWER_FAILED;
    }
    *length = fmax(fabs(by_T), fabs(by_V));
    const double part = fmin(1.0, LARGEST_STEP / *length);
    *T *= exp(part * by_T);
    *volume *= exp(part * by_V);
    return ANSWER_OK;
}

enum answer mixture_critical_near(struct fluid_at_t *at_t, const struct fluid *fluid, const double z[],
                                  const struct critical_point *start, struct equilibrium_workspace *ws,
                                  struct mixture_critical *out)
{
    struct search s = {.at_t = at_t, .fluid = fluid, .ws = ws};
    double T = start->temperature, volume = start->molar_volume, length = HUGE_VAL, last;
    if (!workspace_set_feed(ws, z) || !(T > 0.0) || !(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (fluid->ops->form == FLUID_FROM_TP) {
        return ANSWER_CANNOT;
    }
    for (out->iterations = 1; out->iterations <= MOST_STEPS; out->iterations++) {
        last = length;
        if (step(&s, &T, &volume, &length) != ANSWER_OK) {
            return ANSWER_NO_SUCH_ROOT;
        }
        if (length <= LAST_STEP || (length <= SETTLED && length > 0.3 * last)) {
            struct criteria here;
            const enum answer answer = evaluate(&s, T, volume, &here);
            *out = (struct mixture_critical){T, s.pressure, volume, here.b, here.c, out->iterations};
            return answer;
        }
    }
    return ANSWER_NO_SUCH_ROOT;
}
