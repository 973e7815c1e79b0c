/* Single points of a phase boundary.
 *
 * With K_i = w_i / z_i of the incipient phase w over the feed z, unknowns ln K_i, ln T and ln p, the equations are
 *   ln K_i + ln phi_i(w) - ln phi_i(z) = 0,   sum z_i K_i = 1,   and one unknown held,
 * solved by Newton's method with analytic derivatives (Michelsen, Fluid Phase Equilib. 4 (1980) 1).
 */
#include "equilibrium/boundary_internal.h"
#include "equilibrium/linear.h"
#include "equilibrium/stability.h"

#include <math.h>

enum { DEW_SUBSTITUTIONS = 3, MOST_DEW_STEPS = 25 };

/* Newton is done when a step changes no unknown by more than this: what it leaves is of the order of its square. */
#define LAST_STEP 1e-7
/* No step changes an unknown by more than these: ln K and ln p, and ln T. */
#define LARGEST_STEP             2.0
#define LARGEST_TEMPERATURE_STEP 0.2
/* Nearer to one than this the ratios are the trivial solution. */
#define TRIVIAL 1e-9
/* A root this far in ln v from where it was expected is looked at twice. */
#define UNEXPECTED 0.4

void boundary_begin(struct boundary_state *b, const struct fluid_at_t *at_t, struct fluid_at_t *settable,
                    struct equilibrium_workspace *ws, double *X, double *slope)
{
    *b = (struct boundary_state){.at_t = at_t,
                                 .settable = settable,
                                 .ws = ws,
                                 .size = ws->active_count + 2,
                                 .X = X,
                                 .slope = slope,
                                 .is_dew = true};
    for (size_t i = 0; i < ws->count; i++) {
        ws->W[i] = 0.0;
    }
}

/* ---- phases on the roots meant --------------------------------------------------------------------------------- */

static enum answer evaluate_branch(const struct boundary_state *b, const double n[], enum branch branch, unsigned want,
                                   struct phase *out)
{
    const double p = exp(b->X[b->size - 1]);
    const enum answer answer = phase_tp(b->at_t, p, n, branch, want, out);
    return answer == ANSWER_NO_SUCH_ROOT ? phase_tp(b->at_t, p, n, BRANCH_STABLE, want, out) : answer;
}

static double surprise_of(const struct phase *phase, double expected)
{
    return fabs(log(phase_molar_volume(phase) / expected));
}

/* Of two roots the one nearer to the expected volume. */
static enum answer evaluate_phase(const struct boundary_state *b, const double n[], bool is_light, double expected,
                                  unsigned want, struct phase *out)
{
    const enum branch branch = is_light ? BRANCH_VAPOUR : BRANCH_LIQUID;
    const enum branch other = is_light ? BRANCH_LIQUID : BRANCH_VAPOUR;
    enum answer answer = evaluate_branch(b, n, branch, want, out);
    if (answer != ANSWER_OK || !(expected > 0.0) || out->roots != 2) {
        return answer;
    }
    const double surprise = surprise_of(out, expected);
    if (surprise < UNEXPECTED) {
        return ANSWER_OK;
    }
    answer = evaluate_branch(b, n, other, want, out);
    return answer == ANSWER_OK && surprise_of(out, expected) < surprise ? answer
                                                                        : evaluate_branch(b, n, branch, want, out);
}

/* Both phases at X; the incipient one's amounts stand in ws->W. */
static enum answer evaluate(struct boundary_state *b)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count;
    const double T = exp(b->X[m]);
    if (b->settable != NULL && (b->at_t->temperature < T || b->at_t->temperature > T)) {
        const enum answer set = fluid_set_t(b->settable, b->at_t->fluid, T);
        if (set != ANSWER_OK) {
            return set;
        }
    }
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        ws->W[i] = ws->feed[i] * exp(b->X[a]);
    }
    unsigned want = PHASE_LN_PHI | PHASE_DLN_PHI_DP;
    want |= b->settable != NULL ? (unsigned)PHASE_DLN_PHI_DT : 0U;
    const bool feed_is_light = b->expected_feed > 0.0 ? b->expected_feed > b->expected_incipient : b->is_dew;
    enum answer answer = evaluate_phase(b, ws->feed, feed_is_light, b->expected_feed, want, ws->reference);
    if (answer == ANSWER_OK) {
        answer = evaluate_phase(b, ws->W, !feed_is_light, b->expected_incipient, want | PHASE_DLN_PHI_DN, ws->trial);
    }
    if (answer == ANSWER_OK) {
        b->feed_volume = phase_molar_volume(ws->reference);
        b->incipient_volume = phase_molar_volume(ws->trial);
    }
    return answer;
}

/* ---- Newton's steps -------------------------------------------------------------------------------------------- */

/* The equations' values, negative, in ws->step, and the largest of them. */
static void set_equations(struct boundary_state *b)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count;
    double sum = -1.0;
    b->residual = 0.0;
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        const double value = b->X[a] + ws->trial->ln_phi[i] - ws->reference->ln_phi[i];
        ws->step[a] = -value;
        sum += ws->W[i];
        b->residual = fmax(b->residual, fabs(value));
    }
    ws->step[m] = -sum;
    ws->step[m + 1] = 0.0;
    b->residual = fmax(b->residual, fabs(sum));
}

static void set_jacobian(struct boundary_state *b, size_t held)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count, size = b->size;
    const double T = b->at_t->temperature, p = exp(b->X[m + 1]);
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        double *row = ws->matrix + a * size;
        for (size_t c = 0; c < m; c++) {
            const size_t j = ws->active[c];
            row[c] = ws->W[j] * ws->trial->dln_phi_dn[i * ws->count + j] + (a == c ? 1.0 : 0.0);
        }
        row[m] = b->settable == NULL ? 0.0 : T * (ws->trial->dln_phi_dt[i] - ws->reference->dln_phi_dt[i]);
        row[m + 1] = p * (ws->trial->dln_phi_dp[i] - ws->reference->dln_phi_dp[i]);
        ws->matrix[m * size + a] = ws->W[i];
        ws->matrix[(m + 1) * size + a] = 0.0;
    }
    for (size_t c = m; c < size; c++) {
        ws->matrix[m * size + c] = ws->matrix[(m + 1) * size + c] = 0.0;
    }
    ws->matrix[(m + 1) * size + held] = 1.0;
}

/* The part of the step that keeps every unknown within bounds, and its largest change. */
static double bounded_part(const struct boundary_state *b, double *largest)
{
    const size_t m = b->ws->active_count;
    double excess = 0.0;
    *largest = 0.0;
    for (size_t a = 0; a < b->size; a++) {
        const double change = fabs(b->ws->step[a]);
        *largest = fmax(*largest, change);
        excess = fmax(excess, change / (a == m ? LARGEST_TEMPERATURE_STEP : LARGEST_STEP));
    }
    return excess > 1.0 ? 1.0 / excess : 1.0;
}

static bool is_trivial(const struct boundary_state *b)
{
    double largest = 0.0;
    for (size_t a = 0; a < b->ws->active_count; a++) {
        largest = fmax(largest, fabs(b->X[a]));
    }
    return !(largest > TRIVIAL) && fabs(b->feed_volume / b->incipient_volume - 1.0) < TRIVIAL;
}

/* dX by the held unknown, from the Jacobian at the solution. */
static bool set_slope(struct boundary_state *b, size_t held)
{
    if (b->slope == NULL) {
        return true;
    }
    for (size_t a = 0; a < b->size; a++) {
        b->slope[a] = a + 1 == b->size ? 1.0 : 0.0;
    }
    set_jacobian(b, held);
    return linear_solve(b->ws->matrix, b->size, b->slope);
}

enum answer boundary_solve(struct boundary_state *b, size_t held, int most_steps)
{
    bool is_last = false;
    double last = HUGE_VAL;
    for (b->iterations = 1; b->iterations <= most_steps; b->iterations++) {
        const enum answer answer = evaluate(b);
        if (answer != ANSWER_OK) {
            return answer == ANSWER_CANNOT ? answer : ANSWER_FAILED;
        }
        set_equations(b);
        if (is_last && b->residual <= BOUNDARY_TOLERANCE) {
            return is_trivial(b) || !set_slope(b, held) ? ANSWER_FAILED : ANSWER_OK;
        }
        set_jacobian(b, held);
        double largest;
        if (!linear_solve(b->ws->matrix, b->size, b->ws->step)) {
            return ANSWER_FAILED;
        }
        const double part = bounded_part(b, &largest);
        for (size_t a = 0; a < b->size; a++) {
            b->X[a] += part * b->ws->step[a];
        }
        if (!isfinite(largest)) {
            return ANSWER_FAILED;
        }
        is_last = largest <= LAST_STEP || (b->residual <= 1e-12 && largest > 0.5 * last);
        last = largest;
    }
    return ANSWER_FAILED;
}

enum answer boundary_take(struct boundary_state *b, double tolerance)
{
    const enum answer answer = evaluate(b);
    if (answer != ANSWER_OK) {
        return answer;
    }
    set_equations(b);
    return b->residual <= tolerance ? ANSWER_OK : ANSWER_FAILED;
}

/* ---- reporting ------------------------------------------------------------------------------------------------- */

struct boundary_point *boundary_point_create(size_t count, struct arena *arena)
{
    struct boundary_point *point = arena_alloc(arena, 1, sizeof *point);
    point->incipient = arena_alloc(arena, count, sizeof(double));
    return point;
}

/* At a critical point itself a trial phase may not converge: the feed a hair beside speaks for it, on the side where it
 * is one phase. */
static enum answer test_beside(struct boundary_state *b, const struct boundary_point *point, struct stability *out)
{
    static const double nudges[] = {1e-8, -1e-8, 1e-7, -1e-7, 1e-6, -1e-6};
    enum answer answer = ANSWER_FAILED;
    for (size_t k = 0; k < sizeof nudges / sizeof *nudges; k++) {
        struct stability found;
        const double pressure = point->pressure * (1.0 + nudges[k]);
        if (stability_at_tp(b->at_t, pressure, b->ws->feed, STABILITY_DECIDE, b->ws, &found) == ANSWER_OK &&
            (answer != ANSWER_OK || found.smallest_tpd > out->smallest_tpd)) {
            *out = found;
            answer = ANSWER_OK;
        }
    }
    return answer;
}

/* The incipient phase touches the tangent plane of the feed. Being a stationary point its distance moves with pressure
 * as it would at constant composition: by the sum of w_i (d ln phi_i(w) / dp - d ln phi_i(z) / dp). */
static bool gains_with_pressure(const struct equilibrium_workspace *ws)
{
    double slope = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        slope += ws->W[i] * (ws->trial->dln_phi_dp[i] - ws->reference->dln_phi_dp[i]);
    }
    return slope < 0.0;
}

enum answer boundary_report(struct boundary_state *b, struct boundary_point *out)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count;
    out->temperature = b->at_t->temperature;
    out->pressure = exp(b->X[m + 1]);
    out->feed_volume = b->feed_volume;
    out->incipient_volume = b->incipient_volume;
    out->kind = b->incipient_volume < b->feed_volume ? BOUNDARY_DEW : BOUNDARY_BUBBLE;
    out->residual = b->residual;
    out->opens = gains_with_pressure(ws);
    for (size_t i = 0; i < ws->count; i++) {
        out->incipient[i] = 0.0;
    }
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        out->incipient[i] = ws->W[i];
        ws->d[i] = ws->ln_feed[i] + ws->reference->ln_phi[i];
    }
    const struct known_phases known = {
        .count = 2,
        .amounts = {ws->feed, out->incipient},
        .molar_volume = {out->feed_volume, out->incipient_volume},
    };
    struct stability found;
    workspace_set_pure(ws, b->at_t, out->pressure);
    enum answer answer = stability_of_plane(b->at_t, out->pressure, &known, STABILITY_DECIDE, ws, &found);
    answer = answer == ANSWER_FAILED ? test_beside(b, out, &found) : answer;
    out->smallest_tpd = found.has_incipient ? found.smallest_tpd : 0.0;
    out->is_stable = out->smallest_tpd >= -BOUNDARY_TOLERANCE;
    return answer;
}

/* ---- the first dew point --------------------------------------------------------------------------------------- */

/* Raoult's law: 1/p = sum z_i / p_i. */
static void start_dew(struct boundary_state *b)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count;
    workspace_set_pure(ws, b->at_t, 1.0);
    double sum = ws->feed[ws->active[0]] * exp(-ws->ln_pure[ws->active[0]]);
    for (size_t a = 1; a < m; a++) {
        const size_t i = ws->active[a];
        sum += ws->feed[i] * exp(-ws->ln_pure[i]);
    }
    b->X[m] = log(b->at_t->temperature);
    b->X[m + 1] = -log(sum);
    for (size_t a = 0; a < m; a++) {
        b->X[a] = b->X[m + 1] - ws->ln_pure[ws->active[a]];
    }
}

/* One pass ln K_i = ln phi_i(z) - ln phi_i(w), with the pressure moved to where their sum would be one. */
static bool substitute_dew(struct boundary_state *b)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t m = ws->active_count;
    const double T = b->at_t->temperature, p = exp(b->X[m + 1]);
    double sum = 0.0, slope = 0.0;
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        ws->W[i] = ws->feed[i] * exp(b->X[a]);
    }
    if (evaluate_phase(b, ws->feed, true, 0.0, PHASE_LN_PHI, ws->reference) != ANSWER_OK ||
        evaluate_phase(b, ws->W, false, 0.0, PHASE_LN_PHI, ws->trial) != ANSWER_OK) {
        return false;
    }
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        b->X[a] = ws->reference->ln_phi[i] - ws->trial->ln_phi[i];
        sum += ws->feed[i] * exp(b->X[a]);
    }
    /* d ln(sum) / d ln p is roughly the difference of the compressibilities. */
    slope = ws->reference->Z - p * phase_molar_volume(ws->trial) / (b->at_t->fluid->gas_constant * T);
    const double change = fmax(-1.0, fmin(1.0, -log(sum) / fmax(slope, 0.1)));
    b->X[m + 1] += change;
    for (size_t a = 0; a < m; a++) {
        b->X[a] += fmax(slope, 0.1) * change;
    }
    return true;
}

enum answer boundary_dew_pressure(const struct fluid_at_t *at_t, const double z[], struct equilibrium_workspace *ws,
                                  struct boundary_point *out)
{
    struct boundary_state b;
    if (!workspace_set_feed(ws, z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    boundary_begin(&b, at_t, NULL, ws, ws->unknowns, NULL);
    start_dew(&b);
    for (int pass = 0; pass < DEW_SUBSTITUTIONS; pass++) {
        if (!substitute_dew(&b)) {
            return ANSWER_NO_SUCH_ROOT;
        }
    }
    if (boundary_solve(&b, ws->active_count, MOST_DEW_STEPS) != ANSWER_OK || !(b.incipient_volume < b.feed_volume)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    return boundary_report(&b, out);
}
