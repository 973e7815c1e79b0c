/* Where the trial phases of a stability test start, and what they are taken to show. */
#include "equilibrium/stability_internal.h"

#include <math.h>

/* A phase with no more than this part of its volume taken up by molecules is gas enough for no other gas to be looked
 * for. */
#define LARGEST_PACKING_OF_GAS 0.1
/* A component this prevalent in a phase need not be tried alone. */
#define PREVALENT 0.9
/* So much of a component, the rest feed, for a liquid that it does not form alone. */
#define RICH 0.75
/* A pure trial is worth its cost from this activity of the component upwards, against its own pure phase; and that
 * phase is worth evaluating when its estimate leaves the activity above the second value. */
#define LEAST_LN_ACTIVITY           (-1.5)
#define LEAST_ESTIMATED_LN_ACTIVITY (-4.0)

/* Where a method has no phase at all, as some equations have no cold liquid of a component by itself, none lies below
 * the plane: such a trial is passed over. */
static enum answer unless_there_is_none(enum answer answer)
{
    return answer == ANSWER_NO_SUCH_ROOT ? ANSWER_OK : answer;
}

/* From ws->W and ws->ln_W. */
static enum answer run_trial(struct test *t)
{
    struct trial trial;
    enum verdict verdict;
    return unless_there_is_none(trial_follow(t, &trial, &verdict));
}

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
        trial_set_ln_W(t->ws, i, t->ws->d[i]);
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
    const double vapour_pressure = exp(fmin(ws->ln_pure[i], STABILITY_LARGEST_LN_W)); /* by the pressure */
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
        trial_set_ln_W(t->ws, t->ws->active[a], t->ws->scale[a]);
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
        trial_set_ln_W(ws, i, ws->ln_feed[i] + power * ws->ln_pure[i] - largest);
    }
    t->branch = power > 0.0 ? BRANCH_VAPOUR : BRANCH_LIQUID;
    return run_trial(t);
}

/* From the fugacity coefficients of the composition in ws->W. */
static enum answer try_coefficients(struct test *t)
{
    t->branch = BRANCH_LIQUID;
    const enum answer answer = trial_evaluate_phase(t, PHASE_LN_PHI);
    if (answer != ANSWER_OK) {
        return unless_there_is_none(answer);
    }
    trial_substitute(t->ws);
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
        if (amounts[i] > PREVALENT * amount_of(amounts, t->ws->count) &&
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
    const enum answer answer = trial_evaluate_phase(t, PHASE_LN_PHI);
    if (answer != ANSWER_OK) {
        return unless_there_is_none(answer);
    }
    if (!is_exhaustive && (ws->d[i] - ws->trial->ln_phi[i] < LEAST_LN_ACTIVITY ||
                           is_in_known_phase(t, i, phase_molar_volume(ws->trial)))) {
        return ANSWER_OK;
    }
    if (t->branch == BRANCH_STABLE && !is_exhaustive) {
        return try_rich(t, i);
    }
    trial_substitute(ws);
    return run_trial(t);
}

static bool is_settled(const struct test *t)
{
    return t->effort == STABILITY_DECIDE && t->out->smallest_tpd < STABILITY_SETTLED;
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
        const double volume = t->known->molar_volume[k] * amount_of(amounts, t->ws->count);
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
    for (size_t k = 0; k < known->count && answer == ANSWER_OK && !is_settled(&t); k++) {
        valley_try(&t, k);
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
        .molar_volume = {phase_molar_volume(ws->reference)},
    };
    return stability_of_plane(at_t, pressure, &known, effort, ws, out);
}
