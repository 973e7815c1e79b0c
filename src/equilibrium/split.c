/* The flash at T, p.
 *
 * The unknowns of the second-order steps are the amounts n_ik of component i in phase k, in all phases but the one
 * that holds most of i, which gets the rest: so no amount is a small difference. With f the fugacities, r = r(i) that
 * phase and A^k_ij = d ln f_i / d n_j = delta_ij / n_ik - 1 / n_k + d ln phi_i / d n_j in phase k,
 *   gradient  g_ik = ln f_ik - ln f_ir,
 *   Hessian   H = sum over phases m of  s_im s_jm A^m_ij,  s = +1 in the unknown's own phase, -1 in its rest phase.
 * Unknowns are scaled by sqrt(n_ik), which makes an ideal split's Hessian nearly the unit matrix (Michelsen, Fluid
 * Phase Equilib. 9 (1982) 21; Michelsen and Mollerup, Thermodynamic Models, 2nd ed., chapter 10).
 */
#include "equilibrium/linear.h"
#include "equilibrium/split_internal.h"

#include <math.h>

enum {
    MOST_STEPS = 80,
    MOST_ROUNDS = 12,
    MOST_HALVINGS = 18,
    MOST_SHIFTS = 14,
    FIRST_SUBSTITUTIONS = 2,
    SUBSTITUTIONS = 3,
    MOST_PARTS = 14,
    MOST_SUBSTITUTION_ROUNDS = 4
};

/* The last step is taken and only checked once it changes no amount by more than this part: what it leaves is of the
 * order of its square. */
#define LAST_STEP 1e-7
/* Differences of ln f that are rounding, at which a step that no longer shrinks is the last one. */
#define ROUNDING 1e-13
/* Steps that promise no more than this are made of rounding, after this many. */
#define LAST_DECREASE 1e-17
#define PATIENCE      8
/* Gibbs energies, by RT and mole of feed, nearer than this are not told apart. */
#define GIBBS_ROUNDING 1e-14
/* A gain that no rounding explains: the feed is not stable. */
#define CLEAR_GAIN 1e-9
/* Of what is there of its scarcest component, an incipient phase is given this at first. */
#define LARGEST_PART_TAKEN 0.5
/* The longest step, in amounts by the square roots of amounts. */
#define LONGEST_STEP 1.0
/* No amount grows by more than this part of itself in one step. */
#define LARGEST_GROWTH 20.0
/* A phase of less than this that is to shrink by a good part may be one too many: less than the second value, and it
 * is. */
#define SMALL_PHASE 0.05
#define VANISHING   1e-22
/* Of less than this no method can tell the properties: the squares of amounts are lost to underflow. */
#define LEAST_PHASE 1e-100
/* Two phases that differ by no more than this part in everything are one; by no more than the second, they may be. */
#define SAME_PHASE    1e-7
#define SIMILAR_PHASE 0.05

/* ---- the phases at hand ---------------------------------------------------------------------------------------- */

static enum answer evaluate_phase(struct flash *f, size_t k, unsigned want, const double amounts[])
{
    f->out->evaluations++;
    if (!(amount_of(amounts, f->ws->count) > LEAST_PHASE)) {
        return ANSWER_FAILED;
    }
    if (f->is_gas_over_liquid) {
        const enum branch branch = k == 0 ? BRANCH_VAPOUR : BRANCH_LIQUID;
        const enum answer answer = phase_tp(f->at_t, f->pressure, amounts, branch, want, f->ws->phase[k]);
        if (answer != ANSWER_NO_SUCH_ROOT) {
            return answer;
        }
    }
    return phase_tp(f->at_t, f->pressure, amounts, BRANCH_STABLE, want, f->ws->phase[k]);
}

/* Sum over i of n_i (ln x_i + ln phi_i - feed_d_i) in phase k; leaves ln x_i + ln phi_i in its ln_f_over_x. */
static double gibbs_of(struct equilibrium_workspace *ws, size_t k, const double amounts[])
{
    struct phase *phase = ws->phase[k];
    double gibbs = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double ln_f = log(amounts[i] / phase->amount) + phase->ln_phi[i];
        phase->ln_f_over_x[i] = ln_f;
        gibbs += amounts[i] * (ln_f - ws->feed_d[i]);
    }
    return gibbs;
}

enum answer flash_evaluate(struct flash *f, unsigned want, double *const amounts[], double *gibbs)
{
    *gibbs = 0.0;
    for (size_t k = 0; k < f->phases; k++) {
        const enum answer answer = evaluate_phase(f, k, want, amounts[k]);
        if (answer != ANSWER_OK) {
            return answer;
        }
        *gibbs += gibbs_of(f->ws, k, amounts[k]);
    }
    return isfinite(*gibbs) ? ANSWER_OK : ANSWER_FAILED;
}

/* ---- successive substitution, two phases ----------------------------------------------------------------------- */

static void set_ratios_from_coefficients(struct equilibrium_workspace *ws)
{
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->ln_K[i] = ws->phase[1]->ln_phi[i] - ws->phase[0]->ln_phi[i];
    }
}

/* Passes from ws->ln_K; the phases and their coefficients are left for the last one. False when the ratios admit no
 * split or a phase could not be evaluated. */
static bool substitute(struct flash *f, int passes)
{
    struct equilibrium_workspace *ws = f->ws;
    f->phases = 2;
    for (int pass = 0; pass < passes; pass++) {
        if (!split_by_ratios(ws) || evaluate_phase(f, 0, PHASE_LN_PHI, ws->amounts[0]) != ANSWER_OK ||
            evaluate_phase(f, 1, PHASE_LN_PHI, ws->amounts[1]) != ANSWER_OK) {
            return false;
        }
        set_ratios_from_coefficients(ws);
    }
    return true;
}

/* Substitution until the two phases have less Gibbs energy than the feed; given up when neither of them, as a trial,
 * lies below the feed's tangent plane, and after a few rounds. */
static bool substitute_to_gain(struct flash *f)
{
    struct equilibrium_workspace *ws = f->ws;
    for (int round = 0;
         round < MOST_SUBSTITUTION_ROUNDS && substitute(f, round == 0 ? FIRST_SUBSTITUTIONS : SUBSTITUTIONS); round++) {
        const double first = gibbs_of(ws, 0, ws->amounts[0]), second = gibbs_of(ws, 1, ws->amounts[1]);
        f->gibbs = first + second;
        if (f->gibbs < -CLEAR_GAIN) {
            return true;
        }
        if (!(first < 0.0) && !(second < 0.0)) {
            return false;
        }
    }
    return false;
}

/* ---- second-order steps ---------------------------------------------------------------------------------------- */

/* The gradient, its largest entry, and the scales. */
void flash_set_gradient(struct flash *f, double *g)
{
    struct equilibrium_workspace *ws = f->ws;
    f->residual = 0.0;
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        const struct unknown u = flash_unknown_at(f, a);
        g[a] = ws->phase[u.phase]->ln_f_over_x[u.i] - ws->phase[u.rest]->ln_f_over_x[u.i];
        ws->scale[a] = sqrt(ws->amounts[u.phase][u.i]);
        f->residual = fmax(f->residual, fabs(g[a]));
    }
}

/* Solves for the step in scaled unknowns with the Hessian shifted; false when it is not positive definite or the step
 * is longer than it can be trusted. */
static bool solve_step(struct flash *f, double shift)
{
    struct equilibrium_workspace *ws = f->ws;
    const size_t size = flash_unknowns_of(f);
    double square = 0.0;
    flash_set_hessian(f, shift);
    if (!linear_factor(ws->matrix, size)) {
        return false;
    }
    for (size_t a = 0; a < size; a++) {
        ws->step[a] = -ws->scale[a] * ws->border[a];
    }
    linear_solve_factored(ws->matrix, size, ws->step);
    for (size_t a = 0; a < size; a++) {
        square += ws->step[a] * ws->step[a];
    }
    return square <= LONGEST_STEP * LONGEST_STEP;
}

/* The step, in ws->step, and the decrease of the Gibbs energy it promises. Where several phases of a mixture of few
 * components leave a direction without curvature, or where there is an unstable one, the shift bounds the step. */
static double newton_step(struct flash *f)
{
    struct equilibrium_workspace *ws = f->ws;
    double shift = 0.0, decrease = 0.0;
    flash_set_gradient(f, ws->border);
    for (int k = 0; !solve_step(f, shift) && k < MOST_SHIFTS; k++) {
        shift = shift > 0.0 ? 10.0 * shift : 1e-10;
    }
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        ws->step[a] *= ws->scale[a];
        decrease -= 0.5 * ws->step[a] * ws->border[a];
    }
    return decrease;
}

/* The largest change of an amount relative to itself. */
double flash_largest_change(const struct flash *f)
{
    double largest = 0.0;
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        const struct unknown u = flash_unknown_at(f, a);
        largest = fmax(largest, fabs(f->ws->step[a]) / f->ws->amounts[u.phase][u.i]);
    }
    return largest;
}

/* Straight along the step for as long as that is safe: beside a critical point the valley is so narrow that any bend
 * leads out of it. An amount that would lose more than half shrinks as 1 / change, and never reaches zero; one that
 * grows does so by a limited factor. */
static double moved_amount(double n, double change)
{
    return change < -0.5 * n ? 0.25 * n * n / -change : n + fmin(change, LARGEST_GROWTH * n);
}

/* `part` of the step, into ws->candidate. False when a component's rest would not stay well above zero. */
bool flash_take_step(const struct flash *f, double part)
{
    struct equilibrium_workspace *ws = f->ws;
    const size_t others = f->phases - 1;
    for (size_t a = 0; a < flash_unknowns_of(f); a += others) {
        const size_t i = ws->active[a / others];
        double rest = ws->feed[i];
        for (size_t b = a; b < a + others; b++) {
            const size_t k = flash_unknown_at(f, b).phase;
            const double n = ws->amounts[k][i], change = part * ws->step[b];
            ws->candidate[k][i] = moved_amount(n, change);
            rest -= ws->candidate[k][i];
        }
        const size_t r = flash_rest_phase(f, i);
        ws->candidate[r][i] = rest;
        if (!(rest > 0.1 * ws->amounts[r][i])) {
            return false;
        }
    }
    return true;
}

void flash_accept_candidate(struct equilibrium_workspace *ws, size_t phases)
{
    for (size_t k = 0; k < phases; k++) {
        double *const kept = ws->amounts[k];
        ws->amounts[k] = ws->candidate[k];
        ws->candidate[k] = kept;
    }
}

/* The largest difference of ln f between the phases as evaluated. */
static double residual_of(const struct flash *f)
{
    double largest = 0.0;
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        const struct unknown u = flash_unknown_at(f, a);
        largest = fmax(largest, fabs(f->ws->phase[u.phase]->ln_f_over_x[u.i] - f->ws->phase[u.rest]->ln_f_over_x[u.i]));
    }
    return largest;
}

/* Is the step good? Where it promises less than the Gibbs energy can show, and the split is no matter of rounding, the
 * fugacities may say so instead. */
static bool leads_down(const struct flash *f, double gibbs, double decrease)
{
    const bool is_below_rounding = decrease < GIBBS_ROUNDING;
    return gibbs <= f->gibbs + (is_below_rounding ? 10.0 : 1.0) * GIBBS_ROUNDING ||
           (is_below_rounding && gibbs < -CLEAR_GAIN && residual_of(f) < 0.5 * f->residual);
}

/* Along the step downhill. False when no part of it leads there; the phases are then evaluated where they were. */
static bool descend(struct flash *f, double decrease, unsigned want)
{
    double part = 1.0;
    for (int k = 0; k < MOST_HALVINGS; k++, part *= 0.3) {
        double gibbs;
        if (!flash_take_step(f, part) || flash_evaluate(f, want, f->ws->candidate, &gibbs) != ANSWER_OK) {
            continue;
        }
        if (leads_down(f, gibbs, decrease)) {
            f->gibbs = gibbs;
            flash_accept_candidate(f->ws, f->phases);
            return true;
        }
    }
    return flash_evaluate(f, want, f->ws->amounts, &f->gibbs) == ANSWER_OK && false;
}

/* ---- phases that come and go ----------------------------------------------------------------------------------- */

/* A phase that can go, and the one that takes what it holds; that is f->phases where all others do, in proportion. */
struct removal {
    size_t gone, into;
};

/* What phase l holds of component i without the one that goes. */
static double amount_without(const struct flash *f, struct removal r, size_t l, size_t i)
{
    double *const *amounts = f->ws->amounts;
    const double moved = amounts[r.gone][i];
    if (r.into < f->phases) {
        return amounts[l][i] + (l == r.into ? moved : 0.0);
    }
    double remaining = 0.0;
    for (size_t k = 0; k < f->phases; k++) {
        remaining += k == r.gone ? 0.0 : amounts[k][i];
    }
    return amounts[l][i] * f->ws->feed[i] / remaining;
}

/* The amounts without it, in ws->candidate. */
static void set_candidate_without(const struct flash *f, struct removal r)
{
    struct equilibrium_workspace *ws = f->ws;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        for (size_t l = 0; l < f->phases; l++) {
            ws->candidate[l][i] = l == r.gone ? 0.0 : amount_without(f, r, l, i);
        }
    }
}

static void remove_phase(struct flash *f, struct removal r)
{
    struct equilibrium_workspace *ws = f->ws;
    set_candidate_without(f, r);
    flash_accept_candidate(ws, f->phases);
    double *const amounts = ws->amounts[r.gone];
    struct phase *const phase = ws->phase[r.gone];
    f->phases--;
    ws->amounts[r.gone] = ws->amounts[f->phases];
    ws->amounts[f->phases] = amounts;
    ws->phase[r.gone] = ws->phase[f->phases];
    ws->phase[f->phases] = phase;
}

/* By what part two phases differ, in molar volume or in any mole fraction, whichever is more. */
static double difference_of(const struct equilibrium_workspace *ws, size_t k, size_t l)
{
    const double scale = ws->phase[k]->amount / ws->phase[l]->amount;
    double largest = fabs(phase_molar_volume(ws->phase[k]) / phase_molar_volume(ws->phase[l]) - 1.0);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        largest = fmax(largest, fabs(ws->amounts[k][i] / (scale * ws->amounts[l][i]) - 1.0));
    }
    return largest;
}

/* What the step at hand would add to the amount of phase k. */
static double growth_of(const struct flash *f, size_t k)
{
    double change = 0.0;
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        const struct unknown u = flash_unknown_at(f, a);
        change += u.phase == k ? f->ws->step[a] : 0.0;
        change -= u.rest == k ? f->ws->step[a] : 0.0;
    }
    return change;
}

/* Does the Gibbs energy rise by no more than the allowance without the phase? The others are evaluated where that moves
 * them. */
static bool is_no_higher_without(struct flash *f, struct removal r, double allowance)
{
    struct equilibrium_workspace *ws = f->ws;
    double gibbs = 0.0;
    set_candidate_without(f, r);
    for (size_t l = 0; l < f->phases; l++) {
        if (l != r.gone && evaluate_phase(f, l, PHASE_LN_PHI, ws->candidate[l]) != ANSWER_OK) {
            return false;
        }
        gibbs += l == r.gone ? 0.0 : gibbs_of(ws, l, ws->candidate[l]);
    }
    return gibbs <= f->gibbs + allowance;
}

/* The same, with the phases evaluated where they stand again unless one can go. */
static bool can_do_without(struct flash *f, struct removal r, double allowance)
{
    double gibbs;
    return is_no_higher_without(f, r, allowance) ||
           (flash_evaluate(f, PHASE_LN_PHI, f->ws->amounts, &gibbs) == ANSWER_OK && false);
}

/* Is phase k the same as l, or similar and better joined with it? */
static bool is_one_with(struct flash *f, size_t k, size_t l)
{
    const double difference = difference_of(f->ws, k, l);
    return difference < SAME_PHASE ||
           (difference < SIMILAR_PHASE && can_do_without(f, (struct removal){k, l}, -10.0 * GIBBS_ROUNDING));
}

/* Is it vanishing, or better left out? */
static bool is_vanishing(struct flash *f, size_t k)
{
    const double amount = f->ws->phase[k]->amount;
    return amount < SMALL_PHASE && growth_of(f, k) < -0.3 * amount &&
           (amount < VANISHING ||
            (f->phases > 2 && can_do_without(f, (struct removal){k, f->phases}, -10.0 * GIBBS_ROUNDING)));
}

/* Finds the first phase that can go; false without one. */
static bool find_superfluous(struct flash *f, struct removal *out)
{
    for (size_t k = 0; k < f->phases; k++) {
        for (size_t l = 0; l < k; l++) {
            if (is_one_with(f, k, l)) {
                *out = (struct removal){k, l};
                return true;
            }
        }
        if (is_vanishing(f, k)) {
            *out = (struct removal){k, f->phases};
            return true;
        }
    }
    return false;
}

/* ---- the minimum of the Gibbs energy --------------------------------------------------------------------------- */

/* Where Newton's direction leads nowhere a pass of substitution does, with two phases. */
static bool make_do(struct flash *f)
{
    if (f->phases != 2) {
        return false;
    }
    set_ratios_from_coefficients(f->ws);
    return substitute(f, 2) &&
           flash_evaluate(f, PHASE_LN_PHI | PHASE_DLN_PHI_DN, f->ws->amounts, &f->gibbs) == ANSWER_OK;
}

/* From the amounts at hand; ends with fewer phases where some were superfluous, at best with one. */
static enum answer minimise(struct flash *f)
{
    const unsigned want = PHASE_LN_PHI | PHASE_DLN_PHI_DN;
    enum answer answer = flash_evaluate(f, want, f->ws->amounts, &f->gibbs);
    double last = HUGE_VAL;
    for (int step = 0; step < MOST_STEPS && answer == ANSWER_OK; step++) {
        f->out->steps++;
        const double decrease = newton_step(f);
        struct removal superfluous;
        if (find_superfluous(f, &superfluous)) {
            remove_phase(f, superfluous);
            if (f->phases == 1) {
                return ANSWER_OK;
            }
            answer = flash_evaluate(f, want, f->ws->amounts, &f->gibbs);
            continue;
        }
        const double change = flash_largest_change(f);
        if (step >= PATIENCE && f->residual <= SPLIT_LN_F_TOLERANCE && decrease <= LAST_DECREASE &&
            change > 0.3 * last) {
            /* Beside a critical point rounding alone makes steps of this size: the phases stay where they were, and
             * are evaluated there again, as the search for superfluous ones has moved them. */
            return flash_evaluate(f, PHASE_LN_PHI, f->ws->amounts, &f->gibbs);
        }
        const bool is_last = change <= LAST_STEP || (f->residual <= ROUNDING && change > 0.5 * last);
        if (!descend(f, decrease, is_last ? (unsigned)PHASE_LN_PHI : want) && !make_do(f)) {
            return ANSWER_FAILED;
        }
        if (is_last) {
            flash_set_gradient(f, f->ws->border);
            return f->residual <= SPLIT_LN_F_TOLERANCE ? ANSWER_OK : ANSWER_FAILED;
        }
        last = change;
    }
    return answer == ANSWER_OK ? ANSWER_FAILED : answer;
}

/* Of three phases or more, two that are alike may be one that was found twice: then nothing is lost without it. */
static bool merge_phases(struct flash *f)
{
    for (size_t k = 0; k < f->phases && f->phases > 2; k++) {
        for (size_t l = 0; l < k; l++) {
            const struct removal joined = {k, l};
            if (difference_of(f->ws, k, l) < SIMILAR_PHASE && can_do_without(f, joined, 10.0 * GIBBS_ROUNDING)) {
                remove_phase(f, joined);
                return true;
            }
        }
    }
    return false;
}

static enum answer minimise_and_merge(struct flash *f)
{
    enum answer answer = minimise(f);
    if (answer == ANSWER_OK && merge_phases(f)) {
        answer = minimise(f);
    } else if (answer == ANSWER_OK && f->phases > 2) {
        answer = flash_evaluate(f, PHASE_LN_PHI, f->ws->amounts, &f->gibbs); /* the question moved the phases */
    }
    return answer;
}

/* ---- proof, and phases that were missing ----------------------------------------------------------------------- */

/* The plane through the phases at hand: of each component, where it is most plentiful. */
enum answer flash_prove(struct flash *f, struct stability *found)
{
    struct equilibrium_workspace *ws = f->ws;
    struct known_phases known = {.count = f->phases};
    for (size_t k = 0; k < f->phases; k++) {
        known.amounts[k] = ws->amounts[k];
        known.molar_volume[k] = phase_molar_volume(ws->phase[k]);
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->d[i] = ws->phase[flash_rest_phase(f, i)]->ln_f_over_x[i];
    }
    const enum answer answer = stability_of_plane(f->at_t, f->pressure, &known, STABILITY_DECIDE, ws, found);
    f->out->smallest_tpd = found->has_incipient ? found->smallest_tpd : 0.0;
    f->out->evaluations += found->evaluations;
    f->out->trials += found->trials;
    return answer;
}

/* Where a new phase is taken from: one phase, or all in proportion. */
static bool is_source(const struct flash *f, size_t k, size_t source)
{
    return source == f->phases || source == k;
}

/* The most of a phase w that the source holds. */
static double most_of(const struct flash *f, const double w[], size_t source)
{
    const struct equilibrium_workspace *ws = f->ws;
    double most = HUGE_VAL;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        most = fmin(most, (source == f->phases ? ws->feed[i] : ws->amounts[source][i]) / w[i]);
    }
    return most;
}

/* The amounts with `taken` mol of a phase w taken out of the source, in ws->candidate. */
static void take_out(struct flash *f, const double w[], size_t source, double taken)
{
    struct equilibrium_workspace *ws = f->ws;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double held = source == f->phases ? ws->feed[i] : ws->amounts[source][i];
        const double rest = 1.0 - taken * w[i] / held;
        for (size_t k = 0; k < f->phases; k++) {
            ws->candidate[k][i] = (is_source(f, k, source) ? rest : 1.0) * ws->amounts[k][i];
        }
        ws->candidate[f->phases][i] = taken * w[i];
    }
}

/* The Gibbs energy with that much of w; infinity where it has none. */
static double gibbs_with(struct flash *f, const double w[], size_t source, double taken)
{
    double gibbs;
    take_out(f, w, source, taken);
    f->phases++;
    const enum answer answer = flash_evaluate(f, PHASE_LN_PHI, f->ws->candidate, &gibbs);
    f->phases--;
    return answer == ANSWER_OK ? gibbs : HUGE_VAL;
}

/* Beside a phase boundary the gain is less than rounding. Were the phases ideal, beta mol of w would change the Gibbs
 * energy by beta tpd + beta^2 (sum w_i^2 / z_i - 1) / 2, which has its minimum here. */
static double estimated_amount(const struct flash *f, const double w[], double tpd)
{
    const struct equilibrium_workspace *ws = f->ws;
    double curvature = -1.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        curvature += w[i] * w[i] / ws->feed[i];
    }
    return fmin(-tpd / curvature, LARGEST_PART_TAKEN * most_of(f, w, f->phases));
}

/* A new phase w, from where and in what amount it lowers the Gibbs energy most: as it lies below the tangent plane, a
 * little of it will. */
static void add_phase(struct flash *f, const double w[], double tpd)
{
    double best = f->gibbs, best_taken = 0.0;
    size_t best_source = 0;
    /* Of one phase, from it and in proportion is the same. */
    for (size_t source = f->phases == 1 ? 1 : 0; source <= f->phases; source++) {
        double taken = LARGEST_PART_TAKEN * most_of(f, w, source);
        for (int k = 0; k < MOST_PARTS; k++, taken *= 0.2) {
            const double gibbs = gibbs_with(f, w, source, taken);
            if (gibbs < best) {
                best = gibbs;
                best_taken = taken;
                best_source = source;
            }
        }
    }
    if (best_taken > 0.0) {
        take_out(f, w, best_source, best_taken);
    } else {
        take_out(f, w, f->phases, estimated_amount(f, w, tpd));
    }
    f->phases++;
    flash_accept_candidate(f->ws, f->phases);
}

/* Two phases from the feed and an incipient phase w: its ratios to the feed, shifted to the middle of those that admit
 * a split. */
static bool start_from_incipient(struct flash *f, const double w[])
{
    struct equilibrium_workspace *ws = f->ws;
    double sum = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        sum += ws->feed[i] * ws->feed[i] / w[i];
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->ln_K[i] = log(w[i]) - ws->ln_feed[i] + 0.5 * log(sum);
    }
    return substitute_to_gain(f);
}

void flash_set_single_phase(struct flash *f)
{
    struct equilibrium_workspace *ws = f->ws;
    f->phases = 1;
    f->gibbs = f->residual = 0.0;
    for (size_t i = 0; i < ws->count; i++) {
        ws->amounts[0][i] = ws->feed[i];
        ws->phase[0]->ln_phi[i] = ws->reference->ln_phi[i];
        ws->phase[0]->ln_f_over_x[i] = ws->feed_d[i];
    }
    ws->phase[0]->volume = ws->reference->volume;
    ws->phase[0]->amount = ws->reference->amount;
    ws->phase[0]->Z = ws->reference->Z;
}

/* The phases at hand, all evaluated, and the incipient phase found beside them. */
static enum answer minimise_with(struct flash *f, const struct stability *found)
{
    double *w = f->ws->kept_W; /* the test's own copy lies where a step on trial will */
    const bool is_first = f->phases == 1;
    for (size_t i = 0; i < f->ws->count; i++) {
        w[i] = found->incipient[i];
    }
    if (is_first && start_from_incipient(f, w)) {
        return minimise_and_merge(f);
    }
    if (is_first) {
        flash_set_single_phase(f);
    }
    if (f->phases < MOST_PHASES) {
        add_phase(f, w, found->smallest_tpd);
        if (minimise_and_merge(f) == ANSWER_OK) {
            return ANSWER_OK;
        }
    }
    /* Where that leads nowhere, the new phase may take the place of all others but one. */
    return !is_first && start_from_incipient(f, w) ? minimise_and_merge(f) : ANSWER_FAILED;
}

/* From the phases at hand, one or more, until none is missing. */
enum answer flash_complete(struct flash *f)
{
    for (int round = 0; round < MOST_ROUNDS; round++) {
        struct stability found;
        enum answer answer = flash_prove(f, &found);
        const bool is_single = f->phases == 1, is_marginal = !(found.smallest_tpd < -SPLIT_LEAST_TPD);
        if (answer != ANSWER_OK || found.is_stable || (!is_single && is_marginal)) {
            return answer;
        }
        answer = minimise_with(f, &found);
        /* A single phase so little below the plane that no split is found to gain anything is one phase. */
        if (is_single && is_marginal && (answer != ANSWER_OK || f->phases == 1)) {
            flash_set_single_phase(f);
            return ANSWER_OK;
        }
        if (answer != ANSWER_OK) {
            return answer;
        }
        if (f->phases == 1) {
            flash_set_single_phase(f);
        }
    }
    return ANSWER_FAILED;
}

/* ---- what the caller gets -------------------------------------------------------------------------------------- */

static void report_phase(const struct flash *f, size_t k, struct split_phase *out)
{
    const struct equilibrium_workspace *ws = f->ws;
    const struct phase *phase = ws->phase[k];
    const double amount = amount_of(ws->amounts[k], ws->count);
    out->fraction = amount;
    out->molar_volume = phase_molar_volume(phase);
    out->Z = phase->Z;
    for (size_t i = 0; i < ws->count; i++) {
        out->x[i] = ws->amounts[k][i] / amount;
        out->ln_phi[i] = phase->ln_phi[i];
    }
}

/* Lightest first; few enough for the plainest way. */
void flash_report(const struct flash *f)
{
    struct split *out = f->out;
    size_t order[MOST_PHASES];
    for (size_t k = 0; k < f->phases; k++) {
        size_t place = k;
        for (; place > 0 && phase_molar_volume(f->ws->phase[order[place - 1]]) < phase_molar_volume(f->ws->phase[k]);
             place--) {
            order[place] = order[place - 1];
        }
        order[place] = k;
    }
    for (size_t k = 0; k < f->phases; k++) {
        report_phase(f, order[k], &out->phase[k]);
    }
    out->phase_count = f->phases;
    out->residual = f->residual;
    out->gibbs_gain = f->gibbs;
}

struct split *split_create(size_t count, struct arena *arena)
{
    struct split *split = arena_alloc(arena, 1, sizeof *split);
    for (size_t k = 0; k < MOST_PHASES; k++) {
        split->phase[k].x = arena_alloc(arena, count, sizeof(double));
        split->phase[k].ln_phi = arena_alloc(arena, count, sizeof(double));
    }
    return split;
}

/* The feed as one phase, and everything a flash counts from zero. */
enum answer flash_begin(struct flash *f, const double z[])
{
    struct equilibrium_workspace *ws = f->ws;
    struct split *out = f->out;
    out->temperature = f->at_t->temperature;
    out->pressure = f->pressure;
    out->phase_count = 1;
    out->steps = out->evaluations = out->trials = 0;
    out->smallest_tpd = 0.0;
    if (!workspace_set_feed(ws, z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    out->evaluations++;
    const enum answer answer = phase_tp(f->at_t, f->pressure, ws->feed, BRANCH_STABLE, PHASE_LN_PHI, ws->reference);
    if (answer != ANSWER_OK) {
        return answer;
    }
    workspace_set_pure(ws, f->at_t, f->pressure);
    for (size_t i = 0; i < ws->count; i++) {
        ws->feed_d[i] = ws->ln_feed[i] + ws->reference->ln_phi[i];
        for (size_t k = 0; k < MOST_PHASES; k++) {
            ws->amounts[k][i] = ws->candidate[k][i] = 0.0;
        }
    }
    return ANSWER_OK;
}

/* From the ratios of an ideal mixture: two phases without any stability test where the Gibbs energy proves them. */
static bool start_from_guess(struct flash *f)
{
    for (size_t i = 0; i < f->ws->count; i++) {
        f->ws->ln_K[i] = f->ws->ln_pure[i];
    }
    return substitute_to_gain(f);
}

static enum answer finish(struct flash *f, enum answer answer)
{
    if (answer != ANSWER_OK || f->phases == 1) {
        flash_set_single_phase(f);
    }
    if (f->ws->active_count > 1) {
        answer = flash_complete(f);
    }
    if (answer == ANSWER_OK) {
        flash_report(f);
    }
    return answer;
}

enum answer split_at_tp(const struct fluid_at_t *at_t, double pressure, const double z[],
                        struct equilibrium_workspace *ws, struct split *out)
{
    struct flash f = {.at_t = at_t, .pressure = pressure, .ws = ws, .out = out, .phases = 1};
    const enum answer answer = flash_begin(&f, z);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (ws->active_count > 1 && start_from_guess(&f)) {
        return finish(&f, minimise(&f));
    }
    f.phases = 1;
    return finish(&f, ANSWER_OK);
}
