/* One trial phase of a stability test, moved downhill on the modified distance
 *   tm(W) = 1 + sum W_i (ln W_i + ln phi_i(W) - d_i - 1),
 * W being amounts that need not sum to one. Its stationary points are those of tpd, and there tpd = -ln sum W.
 * First by successive substitution, ln W_i = d_i - ln phi_i, then by Newton's steps in alpha_i = 2 sqrt(W_i), in which
 * an ideal trial phase has the unit matrix for Hessian (Michelsen, Fluid Phase Equilib. 9 (1982) 1; Michelsen and
 * Mollerup, Thermodynamic Models, 2nd ed., chapter 9).
 */
#include "equilibrium/linear.h"
#include "equilibrium/stability_internal.h"

#include <math.h>

enum { SUBSTITUTIONS = 3, MOST_STEPS = 80, MOST_HALVINGS = 8, MOST_SHIFTS = 13 };

/* Below this a trial in progress has proved instability beyond doubt, and is good enough to start a split from. */
#define CLEARLY_UNSTABLE (-1e-3)
/* Converged: largest sqrt(W_i) |g_i|. */
#define GRADIENT_TOLERANCE 1e-11
/* Steps that promise no more decrease than this change no verdict, however long they are beside a critical point. */
#define NO_DECREASE          1e-17
#define NO_DECREASE_REPORTED 1e-21
/* A Newton step shorter than this is the last one. */
#define LAST_STEP 1e-10
/* Steps that shrink by less than this each time do not converge quadratically; the shortest to be taken twice. */
#define SLOWEST_QUADRATIC 0.5
#define SHORTEST_DOUBLED  1e-5
/* The longest Newton step, in alpha, whose length is 2 for a normalised trial. */
#define LONGEST_STEP 0.7
/* And one whose distance is this nearly a quadratic form about a known phase is on its way there. */
#define LIKE_A_KNOWN_PHASE 0.03
/* Where the form is flat the trial has to be this near. */
#define NEAR_IF_FLAT 1e-3

/* ---- the distance ------------------------------------------------------------------------------------------------ */

/* On its own branch a liquid-like trial does not turn into a gas, or the other way, on its way to a liquid. */
enum answer trial_evaluate_phase(struct test *t, unsigned want)
{
    struct equilibrium_workspace *ws = t->ws;
    t->out->evaluations++;
    const enum answer answer = phase_tp(t->at_t, t->pressure, ws->W, t->branch, want, ws->trial);
    if (answer != ANSWER_NO_SUCH_ROOT) {
        return answer;
    }
    t->branch = BRANCH_STABLE;
    return phase_tp(t->at_t, t->pressure, ws->W, BRANCH_STABLE, want, ws->trial);
}

enum answer trial_evaluate(struct test *t, unsigned want, struct trial *trial)
{
    struct equilibrium_workspace *ws = t->ws;
    const enum answer answer = trial_evaluate_phase(t, want);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *trial = (struct trial){.tm = 1.0};
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double W = ws->W[i];
        const double g = ws->ln_W[i] + ws->trial->ln_phi[i] - ws->d[i];
        ws->g[i] = g;
        trial->sum += W;
        trial->tm += W * (g - 1.0);
        trial->norm += W * g * g;
        trial->largest = fmax(trial->largest, W * g * g);
    }
    trial->norm = sqrt(trial->norm);
    trial->largest = sqrt(trial->largest);
    return isfinite(trial->tm) ? ANSWER_OK : ANSWER_FAILED;
}

void trial_set_ln_W(struct equilibrium_workspace *ws, size_t i, double ln_W)
{
    ws->ln_W[i] = fmax(-STABILITY_LARGEST_LN_W, fmin(STABILITY_LARGEST_LN_W, ln_W));
    ws->W[i] = exp(ws->ln_W[i]);
}

void trial_substitute(struct equilibrium_workspace *ws)
{
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        trial_set_ln_W(ws, i, ws->d[i] - ws->trial->ln_phi[i]);
    }
}

/* The normalised distance tpd of a trial anywhere, from tm and sum W. */
static double distance_of(const struct trial *trial)
{
    return (trial->tm - 1.0 + trial->sum) / trial->sum - log(trial->sum);
}

/* ---- when to stop ---------------------------------------------------------------------------------------------- */

static bool is_same(const struct equilibrium_workspace *ws, const double amounts[], double molar_volume)
{
    const double scale = amount_of(ws->W, ws->count) / amount_of(amounts, ws->count);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        if (!(fabs(ws->W[i] / (scale * amounts[i]) - 1.0) <= STABILITY_SAME_PHASE)) {
            return false;
        }
    }
    return fabs(phase_molar_volume(ws->trial) / molar_volume - 1.0) <= STABILITY_SAME_PHASE;
}

/* How far the trial stands from a known phase, in alpha by that of a normalised trial. */
static double distance_in_alpha(const struct equilibrium_workspace *ws, const double amounts[])
{
    const double scale = 1.0 / amount_of(amounts, ws->count);
    double square = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double change = 2.0 * (sqrt(ws->W[i]) - sqrt(scale * amounts[i]));
        square += change * change;
    }
    return sqrt(square);
}

/* Near a known phase x the distance is a quadratic form, so that 2 tm = sum (W - x) g; far from it that would be
 * chance (Michelsen 1982, eq. 27 and 28). So it would where the form is much flatter than that of an ideal phase, as
 * beside a critical point: there a trial has to come nearer. */
static bool runs_into(const struct equilibrium_workspace *ws, const double amounts[], const struct trial *trial)
{
    const double scale = 1.0 / amount_of(amounts, ws->count);
    double slope = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        slope += (ws->W[i] - scale * amounts[i]) * ws->g[i];
    }
    if (!(fabs(2.0 * trial->tm - slope) < LIKE_A_KNOWN_PHASE * fabs(slope))) {
        return false;
    }
    const double distance = distance_in_alpha(ws, amounts);
    return distance < NEAR_IF_FLAT || 2.0 * trial->tm > STABILITY_FLAT * distance * distance;
}

static bool is_known(const struct test *t, const struct trial *trial)
{
    if (!(fabs(trial->tm) < 1e-3)) {
        return false;
    }
    if (trial->is_on_slope) {
        return true;
    }
    for (size_t k = 0; k < t->known->count; k++) {
        const double *amounts = t->known->amounts[k];
        if (fabs(trial->tm) < 1e-9 && is_same(t->ws, amounts, t->known->molar_volume[k])) {
            return true;
        }
        if (t->effort != STABILITY_EXHAUSTIVE && trial->tm > 0.0 && runs_into(t->ws, amounts, trial)) {
            return true;
        }
    }
    return false;
}

/* `decrease` is what is expected of the steps still to come. */
static enum verdict judge(const struct test *t, const struct trial *trial, double decrease)
{
    if (!(trial->largest > GRADIENT_TOLERANCE) ||
        decrease < (t->effort == STABILITY_DECIDE ? NO_DECREASE : NO_DECREASE_REPORTED)) {
        return is_known(t, trial) ? KNOWN_PHASE : STATIONARY;
    }
    if (t->effort == STABILITY_DECIDE &&
        (trial->tm < CLEARLY_UNSTABLE || (trial->tm < STABILITY_SETTLED && decrease < -trial->tm))) {
        return BELOW_PLANE;
    }
    if (is_known(t, trial)) {
        return KNOWN_PHASE;
    }
    if (t->effort == STABILITY_DECIDE && trial->tm > 0.0 && 10.0 * decrease < trial->tm) {
        return NOT_BELOW;
    }
    return GOING_ON;
}

/* ---- Newton's steps in alpha ----------------------------------------------------------------------------------- */

static void set_hessian(struct equilibrium_workspace *ws, double shift)
{
    const size_t active = ws->active_count;
    for (size_t a = 0; a < active; a++) {
        const size_t i = ws->active[a];
        const double *row = ws->trial->dln_phi_dn + i * ws->count;
        for (size_t b = 0; b <= a; b++) {
            const size_t j = ws->active[b];
            ws->matrix[a * active + b] = ws->scale[a] * ws->scale[b] * row[j];
        }
        ws->matrix[a * active + a] += 1.0 + shift;
    }
}

/* The step, in ws->step; returns the decrease it promises, or infinity when the Hessian had to be shifted. */
static double newton_step(struct test *t, struct trial *trial)
{
    struct equilibrium_workspace *ws = t->ws;
    const size_t active = ws->active_count;
    double shift = 0.0;
    for (size_t a = 0; a < active; a++) {
        const size_t i = ws->active[a];
        ws->scale[a] = sqrt(ws->W[i]);
        ws->step[a] = -ws->scale[a] * ws->g[i];
    }
    set_hessian(ws, shift);
    trial->is_on_slope = valley_leads_to_known(t, trial);
    for (int k = 0; !linear_factor(ws->matrix, active) && k < MOST_SHIFTS; k++) {
        shift = shift > 0.0 ? 10.0 * shift : 1e-8;
        set_hessian(ws, shift);
    }
    linear_solve_factored(ws->matrix, active, ws->step);
    double decrease = 0.0;
    for (size_t a = 0; a < active; a++) {
        decrease -= 0.5 * ws->step[a] * ws->scale[a] * ws->g[ws->active[a]];
    }
    return shift > 0.0 ? HUGE_VAL : decrease;
}

double trial_step_length(const struct equilibrium_workspace *ws)
{
    double square = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        square += ws->step[a] * ws->step[a];
    }
    return sqrt(square);
}

/* From the kept trial along the step. A component that shrinks does so in ln W, to the same first order: its amount
 * never passes zero. */
void trial_take_step(struct equilibrium_workspace *ws, double part)
{
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double change = part * ws->step[a] / ws->scale[a];
        trial_set_ln_W(ws, i, ws->kept_ln_W[i] + (change < 0.0 ? change : 2.0 * log1p(0.5 * change)));
    }
}

static void keep_trial(struct equilibrium_workspace *ws)
{
    for (size_t i = 0; i < ws->count; i++) {
        ws->kept_W[i] = ws->W[i];
        ws->kept_ln_W[i] = ws->ln_W[i];
    }
}

/* Along `multiple` times ws->step downhill; where no part of it leads down, a substitution takes its place. */
static enum answer descend(struct test *t, double multiple, struct trial *trial)
{
    const double tm = trial->tm, longest = LONGEST_STEP * fmax(1.0, sqrt(trial->sum));
    double part = fmin(multiple, longest / trial_step_length(t->ws));
    keep_trial(t->ws);
    for (int k = 0; k < MOST_HALVINGS; k++, part *= 0.4) {
        trial_take_step(t->ws, part);
        const enum answer answer = trial_evaluate(t, PHASE_LN_PHI | PHASE_DLN_PHI_DN, trial);
        if (answer == ANSWER_OK && trial->tm <= tm + 1e-14) {
            return ANSWER_OK;
        }
    }
    for (size_t i = 0; i < t->ws->count; i++) {
        t->ws->W[i] = t->ws->kept_W[i];
        t->ws->ln_W[i] = t->ws->kept_ln_W[i];
    }
    const enum answer answer = trial_evaluate(t, PHASE_LN_PHI, trial);
    if (answer != ANSWER_OK) {
        return answer;
    }
    trial_substitute(t->ws);
    return trial_evaluate(t, PHASE_LN_PHI | PHASE_DLN_PHI_DN, trial);
}

/* Beside a critical point the distance is nearly of fourth order along one direction, and Newton's steps only shrink to
 * two thirds of the last. Every other step taken twice makes up for that, and cannot leap over a minimum: of a
 * polynomial with real roots alone a double step leads from outside at most to where the slope changes sign beyond the
 * first root (Maehly's rule; Stoer and Bulirsch, Introduction to Numerical Analysis, section 5.5). Never twice in a
 * row: where the distance is of second order after all a double step leads as far to the other side. */
static double multiple_of(double length, double last_length, double last_multiple)
{
    const bool is_linear = length > SLOWEST_QUADRATIC * last_length && length < last_length;
    return is_linear && last_multiple == 1.0 && length > SHORTEST_DOUBLED ? 2.0 : 1.0;
}

enum answer trial_run_newton(struct test *t, struct trial *trial, enum verdict *verdict)
{
    double last_length = 0.0, multiple = 1.0;
    for (int step = 0; step < MOST_STEPS; step++) {
        const double decrease = newton_step(t, trial);
        *verdict = judge(t, trial, decrease);
        if (*verdict != GOING_ON) {
            return ANSWER_OK;
        }
        const double length = trial_step_length(t->ws);
        multiple = decrease < HUGE_VAL ? multiple_of(length, last_length, multiple) : 1.0;
        const enum answer answer = descend(t, multiple, trial);
        if (answer != ANSWER_OK) {
            return answer;
        }
        if (length <= LAST_STEP || (length <= 1e3 * LAST_STEP && trial->largest <= 1e3 * GRADIENT_TOLERANCE)) {
            *verdict = is_known(t, trial) ? KNOWN_PHASE : STATIONARY;
            return ANSWER_OK;
        }
        last_length = length;
    }
    return ANSWER_FAILED;
}

/* ---- from start to verdict ------------------------------------------------------------------------------------- */

static enum answer run_substitution(struct test *t, struct trial *trial, enum verdict *verdict)
{
    double last_norm = 0.0;
    for (int step = 0; step < SUBSTITUTIONS; step++) {
        const unsigned want = PHASE_LN_PHI | (step + 1 == SUBSTITUTIONS ? (unsigned)PHASE_DLN_PHI_DN : 0U);
        const enum answer answer = trial_evaluate(t, want, trial);
        if (answer != ANSWER_OK) {
            return answer;
        }
        /* Substitution gains 1 / (1 - ratio) times what its last step did, ratio that of one step to the last. */
        const double ratio = step > 0 ? trial->norm / last_norm : 1.0;
        const double decrease = ratio < 0.4 ? trial->norm * trial->norm / (1.0 - ratio) : HUGE_VAL;
        *verdict = judge(t, trial, decrease);
        if (*verdict != GOING_ON) {
            return ANSWER_OK;
        }
        last_norm = trial->norm;
        if (step + 1 < SUBSTITUTIONS) {
            trial_substitute(t->ws);
        }
    }
    return ANSWER_OK;
}

void trial_record(struct test *t, const struct trial *trial)
{
    struct stability *out = t->out;
    const double tpd = distance_of(trial);
    if (out->has_incipient && !(tpd < out->smallest_tpd)) {
        return;
    }
    double *incipient = t->ws->candidate[0];
    for (size_t i = 0; i < t->ws->count; i++) {
        incipient[i] = t->ws->W[i] / trial->sum;
    }
    out->has_incipient = true;
    out->smallest_tpd = tpd;
    out->incipient = incipient;
    out->incipient_volume = phase_molar_volume(t->ws->trial);
    out->is_stable = !(tpd < -STABILITY_ROUNDING);
}

enum answer trial_follow(struct test *t, struct trial *trial, enum verdict *verdict)
{
    *verdict = GOING_ON;
    *trial = (struct trial){.tm = 0.0};
    t->out->trials++;
    enum answer answer = run_substitution(t, trial, verdict);
    if (answer == ANSWER_OK && *verdict == GOING_ON) {
        answer = trial_run_newton(t, trial, verdict);
    }
    if (answer == ANSWER_OK && *verdict != KNOWN_PHASE) {
        trial_record(t, trial);
    }
    return answer;
}
