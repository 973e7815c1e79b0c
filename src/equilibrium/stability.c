/* The stability test: several trial phases, each moved downhill on the modified distance
 *   tm(W) = 1 + sum W_i (ln W_i + ln phi_i(W) - d_i - 1),
 * W being amounts that need not sum to one. Its stationary points are those of tpd, and there tpd = -ln sum W.
 * First by successive substitution, ln W_i = d_i - ln phi_i, then by Newton's steps in alpha_i = 2 sqrt(W_i), in which
 * an ideal trial phase has the unit matrix for Hessian (Michelsen, Fluid Phase Equilib. 9 (1982) 1; Michelsen and
 * Mollerup, Thermodynamic Models, 2nd ed., chapter 9).
 */
#include "equilibrium/stability.h"
#include "equilibrium/linear.h"

#include <math.h>

enum { SUBSTITUTIONS = 4, MOST_STEPS = 80, MOST_HALVINGS = 8, MOST_SHIFTS = 13, MANY_STEPS = 8 };

/* Below this a trial in progress has proved instability beyond doubt, and is good enough to start a split from. */
#define CLEARLY_UNSTABLE (-1e-3)
/* No other trial is needed after one that ended as far below as this: nearer, another may lie much lower. */
#define SETTLED (-1e-6)
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
/* A phase with no more than this part of its volume taken up by molecules is gas enough for no other gas to be looked
 * for. */
#define LARGEST_PACKING_OF_GAS 0.1
/* A component this prevalent in a phase need not be tried alone. */
#define PREVALENT 0.9
/* So much of a component, the rest feed, for a liquid that it does not form alone. */
#define RICH 0.75
/* ln W is kept within what exp can take. */
#define LARGEST_LN_W 600.0
/* A trial this near to a known phase, in ln W and ln v, is that phase. */
#define SAME_PHASE 1e-6
/* And one whose distance is this nearly a quadratic form about a known phase is on its way there. */
#define LIKE_A_KNOWN_PHASE 0.03
/* A form of less than this part of an ideal phase's is flat, and has to be that near. */
#define FLAT         0.2
#define NEAR_IF_FLAT 1e-3
/* A distance that may hide a phase on the other side of a known one, and how far away that is tried, in alpha. */
#define HARDLY_OFF 1e-8
#define MIRRORED   0.1
/* A distance too small to have a direction. */
#define NO_DISTANCE 1e-10
/* A pure trial is worth its cost from this activity of the component upwards, against its own pure phase; and that
 * phase is worth evaluating when its estimate leaves the activity above the second value. */
#define LEAST_LN_ACTIVITY           (-1.5)
#define LEAST_ESTIMATED_LN_ACTIVITY (-4.0)

struct test {
    const struct fluid_at_t *at_t;
    double pressure;
    const struct known_phases *known;
    enum stability_effort effort;
    struct equilibrium_workspace *ws;
    struct stability *out;
    enum branch branch; /* that the trial keeps to, as long as it exists */
};

/* Where a trial stands. */
struct trial {
    double tm;      /* the modified distance */
    double sum;     /* of W */
    double norm;    /* sqrt(sum W g^2) */
    double largest; /* max sqrt(W_i) |g_i| */
    int newton_steps;
};

enum verdict { GOING_ON, STATIONARY, BELOW_PLANE, NOT_BELOW, KNOWN_PHASE };

/* ---- one trial phase ------------------------------------------------------------------------------------------- */

/* On its own branch a liquid-like trial does not turn into a gas, or the other way, on its way to a liquid. */
static enum answer evaluate_phase(struct test *t, unsigned want)
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

static enum answer evaluate(struct test *t, unsigned want, struct trial *trial)
{
    struct equilibrium_workspace *ws = t->ws;
    const enum answer answer = evaluate_phase(t, want);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *trial = (struct trial){.tm = 1.0, .newton_steps = trial->newton_steps};
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

static void set_ln_W(struct equilibrium_workspace *ws, size_t i, double ln_W)
{
    ws->ln_W[i] = fmax(-LARGEST_LN_W, fmin(LARGEST_LN_W, ln_W));
    ws->W[i] = exp(ws->ln_W[i]);
}

static void substitute(struct equilibrium_workspace *ws)
{
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        set_ln_W(ws, i, ws->d[i] - ws->trial->ln_phi[i]);
    }
}

/* The normalised distance tpd of a trial anywhere, from tm and sum W. */
static double distance_of(const struct trial *trial)
{
    return (trial->tm - 1.0 + trial->sum) / trial->sum - log(trial->sum);
}

/* ---- when to stop ---------------------------------------------------------------------------------------------- */

static double molar_volume_of(const struct phase *phase)
{
    return phase->volume / phase->amount;
}

static double sum_of(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

static bool is_same(const struct equilibrium_workspace *ws, const double amounts[], double molar_volume)
{
    const double scale = sum_of(ws->W, ws->count) / sum_of(amounts, ws->count);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        if (!(fabs(ws->W[i] / (scale * amounts[i]) - 1.0) <= SAME_PHASE)) {
            return false;
        }
    }
    return fabs(molar_volume_of(ws->trial) / molar_volume - 1.0) <= SAME_PHASE;
}

/* How far the trial stands from a known phase, in alpha by that of a normalised trial. */
static double distance_in_alpha(const struct equilibrium_workspace *ws, const double amounts[])
{
    const double scale = 1.0 / sum_of(amounts, ws->count);
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
    const double scale = 1.0 / sum_of(amounts, ws->count);
    double slope = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        slope += (ws->W[i] - scale * amounts[i]) * ws->g[i];
    }
    if (!(fabs(2.0 * trial->tm - slope) < LIKE_A_KNOWN_PHASE * fabs(slope))) {
        return false;
    }
    const double distance = distance_in_alpha(ws, amounts);
    return distance < NEAR_IF_FLAT || 2.0 * trial->tm > FLAT * distance * distance;
}

static bool is_known(const struct test *t, const struct trial *trial)
{
    if (!(fabs(trial->tm) < 1e-3)) {
        return false;
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
    if (t->effort == STABILITY_DECIDE && trial->tm < CLEARLY_UNSTABLE) {
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
static double newton_step(struct equilibrium_workspace *ws)
{
    const size_t active = ws->active_count;
    double shift = 0.0;
    for (size_t a = 0; a < active; a++) {
        const size_t i = ws->active[a];
        ws->scale[a] = sqrt(ws->W[i]);
        ws->step[a] = -ws->scale[a] * ws->g[i];
    }
    set_hessian(ws, shift);
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

static double length_of_step(const struct equilibrium_workspace *ws)
{
    double square = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        square += ws->step[a] * ws->step[a];
    }
    return sqrt(square);
}

/* From the kept trial along the step. A component that shrinks does so in ln W, to the same first order: its amount
 * never passes zero. */
static void take_step(struct equilibrium_workspace *ws, double part)
{
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double change = part * ws->step[a] / ws->scale[a];
        set_ln_W(ws, i, ws->kept_ln_W[i] + (change < 0.0 ? change : 2.0 * log1p(0.5 * change)));
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
    double part = fmin(multiple, longest / length_of_step(t->ws));
    keep_trial(t->ws);
    for (int k = 0; k < MOST_HALVINGS; k++, part *= 0.4) {
        take_step(t->ws, part);
        const enum answer answer = evaluate(t, PHASE_LN_PHI | PHASE_DLN_PHI_DN, trial);
        if (answer == ANSWER_OK && trial->tm <= tm + 1e-14) {
            return ANSWER_OK;
        }
    }
    for (size_t i = 0; i < t->ws->count; i++) {
        t->ws->W[i] = t->ws->kept_W[i];
        t->ws->ln_W[i] = t->ws->kept_ln_W[i];
    }
    const enum answer answer = evaluate(t, PHASE_LN_PHI, trial);
    if (answer != ANSWER_OK) {
        return answer;
    }
    substitute(t->ws);
    return evaluate(t, PHASE_LN_PHI | PHASE_DLN_PHI_DN, trial);
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

static enum answer run_newton(struct test *t, struct trial *trial, enum verdict *verdict)
{
    double last_length = 0.0, multiple = 1.0;
    for (int step = 0; step < MOST_STEPS; step++) {
        const double decrease = newton_step(t->ws);
        *verdict = judge(t, trial, decrease);
        if (*verdict != GOING_ON) {
            return ANSWER_OK;
        }
        trial->newton_steps++;
        const double length = length_of_step(t->ws);
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

/* ---- one trial from start to verdict --------------------------------------------------------------------------- */

static enum answer run_substitution(struct test *t, struct trial *trial, enum verdict *verdict)
{
    double last_norm = 0.0;
    for (int step = 0; step < SUBSTITUTIONS; step++) {
        const unsigned want = PHASE_LN_PHI | (step + 1 == SUBSTITUTIONS ? (unsigned)PHASE_DLN_PHI_DN : 0U);
        const enum answer answer = evaluate(t, want, trial);
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
            substitute(t->ws);
        }
    }
    return ANSWER_OK;
}

static void record(struct test *t, const struct trial *trial)
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
    out->incipient_volume = molar_volume_of(t->ws->trial);
    out->is_stable = !(tpd < -STABILITY_ROUNDING);
}

/* Where a method has no phase at all, as some equations have no cold liquid of a component by itself, none lies below
 * the plane: such a trial is passed over. */
static enum answer unless_there_is_none(enum answer answer)
{
    return answer == ANSWER_NO_SUCH_ROOT ? ANSWER_OK : answer;
}

static enum answer follow_trial(struct test *t, struct trial *trial, enum verdict *verdict)
{
    *verdict = GOING_ON;
    *trial = (struct trial){.newton_steps = 0};
    t->out->trials++;
    enum answer answer = run_substitution(t, trial, verdict);
    if (answer == ANSWER_OK && *verdict == GOING_ON) {
        answer = run_newton(t, trial, verdict);
    }
    if (answer == ANSWER_OK && *verdict != KNOWN_PHASE) {
        record(t, trial);
    }
    return answer;
}

/* To the other side of a known phase, MIRRORED away from it. */
static void mirror_trial(struct equilibrium_workspace *ws, const double amounts[], double distance)
{
    const double scale = 1.0 / sum_of(amounts, ws->count);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double ln_known = log(scale * amounts[i]);
        set_ln_W(ws, i, ln_known - MIRRORED / distance * (ws->ln_W[i] - ln_known));
    }
}

/* A trial that comes to rest hardly off the plane and right beside a known phase without being that phase, or that took
 * many steps to become it, stood in the flat valley of a spinodal: the valley's other end may lie lower. */
static bool is_in_valley(const struct trial *trial, enum verdict verdict)
{
    return (verdict == STATIONARY && fabs(trial->tm) < HARDLY_OFF) ||
           (verdict == KNOWN_PHASE && trial->newton_steps >= MANY_STEPS);
}

/* The valley is so flat that nothing short of its end tells; where that is not found within rounding, the other trials
 * have to do. */
static void try_other_end(struct test *t, const double amounts[], double distance)
{
    const enum stability_effort effort = t->effort;
    struct trial trial;
    enum verdict verdict;
    mirror_trial(t->ws, amounts, distance);
    t->effort = effort == STABILITY_DECIDE ? STABILITY_REPORT : effort;
    (void)follow_trial(t, &trial, &verdict);
    t->effort = effort;
}

/* From ws->W and ws->ln_W. */
static enum answer run_trial(struct test *t)
{
    struct trial trial;
    enum verdict verdict;
    const enum answer answer = follow_trial(t, &trial, &verdict);
    if (answer != ANSWER_OK || !is_in_valley(&trial, verdict)) {
        return unless_there_is_none(answer);
    }
    for (size_t k = 0; k < t->known->count; k++) {
        const double distance = distance_in_alpha(t->ws, t->known->amounts[k]);
        if (distance > NO_DISTANCE && distance < MIRRORED) {
            try_other_end(t, t->known->amounts[k], distance);
            break;
        }
    }
    return ANSWER_OK;
}

/* ---- where trials start ---------------------------------------------------------------------------------------- */

static void clear_trial(struct equilibrium_workspace *ws)
{
    for (size_t i = 0; i < ws->count; i++) {
        ws->W[i] = 0.0;
        ws->ln_W[i] = 0.0;
    }
}

/* What an ideal gas on the plane would hold: ln W_i = d_i. */
static enum answer try_ideal_gas(struct test *t)
{
    for (size_t a = 0; a < t->ws->active_count; a++) {
        const size_t i = t->ws->active[a];
        set_ln_W(t->ws, i, t->ws->d[i]);
    }
    t->branch = BRANCH_VAPOUR;
    return run_trial(t);
}

/* ln phi of the pure component in its own condensed phase, from its estimated vapour pressure with the covolume for
 * molar volume, or from a gas with repulsion only: on the low side. */
static double pure_ln_phi(const struct test *t, size_t i)
{
    struct equilibrium_workspace *ws = t->ws;
    const double RT = t->at_t->fluid->gas_constant * t->at_t->temperature;
    clear_trial(ws);
    ws->W[i] = 1.0;
    const double packing = phase_smallest_volume(t->at_t, ws->W) * t->pressure / RT;
    const double vapour_pressure = exp(fmin(ws->ln_pure[i], LARGEST_LN_W)); /* by the pressure */
    return fmin(ws->ln_pure[i] + packing * (1.0 - vapour_pressure), packing);
}

/* What an ideal solution on the plane would hold: ln W_i = ln of the activity of i. */
static enum answer try_ideal_solution(struct test *t)
{
    for (size_t a = 0; a < t->ws->active_count; a++) {
        const size_t i = t->ws->active[a];
        t->ws->scale[a] = t->ws->d[i] - pure_ln_phi(t, i);
    }
    clear_trial(t->ws);
    for (size_t a = 0; a < t->ws->active_count; a++) {
        set_ln_W(t->ws, t->ws->active[a], t->ws->scale[a]);
    }
    t->branch = BRANCH_LIQUID;
    return run_trial(t);
}

/* Lighter or heavier than the feed: W_i = z_i K_i^power with K_i of an ideal mixture. */
static enum answer try_ratios(struct test *t, double power)
{
    struct equilibrium_workspace *ws = t->ws;
    double largest = -HUGE_VAL;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        largest = fmax(largest, ws->ln_feed[i] + power * ws->ln_pure[i]);
    }
    clear_trial(ws);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        set_ln_W(ws, i, ws->ln_feed[i] + power * ws->ln_pure[i] - largest);
    }
    t->branch = power > 0.0 ? BRANCH_VAPOUR : BRANCH_LIQUID;
    return run_trial(t);
}

/* From the fugacity coefficients of the composition in ws->W. */
static enum answer try_coefficients(struct test *t)
{
    t->branch = BRANCH_LIQUID;
    const enum answer answer = evaluate_phase(t, PHASE_LN_PHI);
    if (answer != ANSWER_OK) {
        return unless_there_is_none(answer);
    }
    substitute(t->ws);
    return run_trial(t);
}

/* A phase that holds almost nothing but i and j, half and half. */
static enum answer try_pair(struct test *t, size_t i, size_t j)
{
    for (size_t k = 0; k < t->ws->count; k++) {
        t->ws->W[k] = k == i || k == j ? 0.5 : 0.0;
    }
    return try_coefficients(t);
}

static enum answer try_equal_parts(struct test *t)
{
    for (size_t i = 0; i < t->ws->count; i++) {
        t->ws->W[i] = 0.0;
    }
    for (size_t a = 0; a < t->ws->active_count; a++) {
        t->ws->W[t->ws->active[a]] = 1.0;
    }
    return try_coefficients(t);
}

/* A component that makes up most of a known phase need not be tried again as the same phase alone. */
static bool is_in_known_phase(const struct test *t, size_t i, double molar_volume)
{
    for (size_t k = 0; k < t->known->count; k++) {
        const double *amounts = t->known->amounts[k];
        if (amounts[i] > PREVALENT * sum_of(amounts, t->ws->count) &&
            fabs(log(molar_volume / t->known->molar_volume[k])) < 0.3) {
            return true;
        }
    }
    return false;
}

/* A liquid rich in i that i alone does not form: some of the feed with it. */
static enum answer try_rich(struct test *t, size_t i)
{
    for (size_t k = 0; k < t->ws->count; k++) {
        t->ws->W[k] = (k == i ? RICH : 0.0) + (1.0 - RICH) * t->ws->feed[k];
    }
    return try_coefficients(t);
}

/* Could there be a phase rich in i? Only if i is present at a good part of the fugacity it has alone. */
static enum answer try_pure(struct test *t, size_t i)
{
    struct equilibrium_workspace *ws = t->ws;
    const bool is_exhaustive = t->effort == STABILITY_EXHAUSTIVE;
    const double estimate = ws->d[i] - pure_ln_phi(t, i); /* leaves i alone in ws->W */
    if (estimate < LEAST_ESTIMATED_LN_ACTIVITY && !is_exhaustive) {
        return ANSWER_OK;
    }
    t->branch = BRANCH_LIQUID;
    const enum answer answer = evaluate_phase(t, PHASE_LN_PHI);
    if (answer != ANSWER_OK) {
        return unless_there_is_none(answer);
    }
    if (!is_exhaustive &&
        (ws->d[i] - ws->trial->ln_phi[i] < LEAST_LN_ACTIVITY || is_in_known_phase(t, i, molar_volume_of(ws->trial)))) {
        return ANSWER_OK;
    }
    if (t->branch == BRANCH_STABLE && !is_exhaustive) {
        return try_rich(t, i);
    }
    substitute(ws);
    return run_trial(t);
}

static bool is_settled(const struct test *t)
{
    return t->effort == STABILITY_DECIDE && t->out->smallest_tpd < SETTLED;
}

static enum answer try_pure_components(struct test *t)
{
    enum answer answer = ANSWER_OK;
    for (size_t a = 0; a < t->ws->active_count && answer == ANSWER_OK && !is_settled(t); a++) {
        answer = try_pure(t, t->ws->active[a]);
    }
    return answer;
}

static enum answer try_everything_else(struct test *t)
{
    static const double POWERS[] = {1.0, -1.0, 1.0 / 3.0, -1.0 / 3.0, 3.0, -3.0};
    enum answer answer = try_equal_parts(t);
    for (size_t k = 0; k < sizeof POWERS / sizeof *POWERS && answer == ANSWER_OK; k++) {
        answer = try_ratios(t, POWERS[k]);
    }
    for (size_t a = 0; a < t->ws->active_count && answer == ANSWER_OK; a++) {
        for (size_t b = 0; b < a && answer == ANSWER_OK; b++) {
            answer = try_pair(t, t->ws->active[a], t->ws->active[b]);
        }
    }
    return answer;
}

/* An ideal gas need not be tried beside a phase that is nearly one. */
static bool is_without_gas(const struct test *t)
{
    for (size_t k = 0; k < t->known->count; k++) {
        const double *amounts = t->known->amounts[k];
        const double volume = t->known->molar_volume[k] * sum_of(amounts, t->ws->count);
        if (phase_smallest_volume(t->at_t, amounts) < LARGEST_PACKING_OF_GAS * volume &&
            t->effort != STABILITY_EXHAUSTIVE) {
            return false;
        }
    }
    return true;
}

enum answer stability_of_plane(const struct fluid_at_t *at_t, double pressure, const struct known_phases *known,
                               enum stability_effort effort, struct equilibrium_workspace *ws, struct stability *out)
{
    struct test t = {.at_t = at_t, .pressure = pressure, .known = known, .effort = effort, .ws = ws, .out = out};
    *out = (struct stability){.is_stable = true};
    clear_trial(ws);
    const bool is_without = is_without_gas(&t);
    enum answer answer = is_without ? try_ideal_gas(&t) : ANSWER_OK;
    if (answer == ANSWER_OK && !is_settled(&t)) {
        answer = known->count == 1 ? try_ratios(&t, -1.0) : try_ideal_solution(&t);
    }
    if (answer == ANSWER_OK && !is_settled(&t) && known->count == 1 && is_without) {
        answer = try_ratios(&t, 1.0);
    }
    if (answer == ANSWER_OK && !is_settled(&t)) {
        answer = try_pure_components(&t);
    }
    if (answer == ANSWER_OK && effort == STABILITY_EXHAUSTIVE) {
        answer = try_everything_else(&t);
    }
    return answer;
}

/* ---- one composition ------------------------------------------------------------------------------------------- */

enum answer stability_at_tp(const struct fluid_at_t *at_t, double pressure, const double z[],
                            enum stability_effort effort, struct equilibrium_workspace *ws, struct stability *out)
{
    if (!workspace_set_feed(ws, z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = phase_tp(at_t, pressure, ws->feed, BRANCH_STABLE, PHASE_LN_PHI, ws->reference);
    if (answer != ANSWER_OK) {
        return answer;
    }
    workspace_set_pure(ws, at_t, pressure);
    for (size_t i = 0; i < ws->count; i++) {
        ws->d[i] = ws->ln_feed[i] + ws->reference->ln_phi[i];
    }
    const struct known_phases known = {
        .count = 1,
        .amounts = {ws->feed},
        .molar_volume = {molar_volume_of(ws->reference)},
    };
    return stability_of_plane(at_t, pressure, &known, effort, ws, out);
}
