/* The valleys of the tangent-plane distance about the known phases.
 *
 * Near a critical point the distance is nearly flat along one direction through a known phase. There a trial phase
 * comes near it only in many small steps, and another phase may stand right beside it. Both are seen from the curvature
 * of the distance at the known phase, the matrix delta_ij + sqrt(x_i x_j) d ln phi_i / d n_j in alpha_i = 2 sqrt(x_i).
 */
#include "equilibrium/linear.h"
#include "equilibrium/stability_internal.h"

#include <math.h>
#include <string.h>

enum { MOST_SHIFTS = 13, INVERSE_ITERATIONS = 4 };

/* Below this least curvature of the distance about a known phase nothing tells what surrounds it but going there. */
#define LEAST_CURVATURE 1e-3
/* How nearly the polynomial of a slope is to be confirmed, how much of the steepest rise there has to be everywhere on
 * it, and how long one may be, in alpha. */
#define POLYNOMIAL_TOLERANCE 0.1
#define LEAST_RISE           0.05
#define LONGEST_SLOPE        0.3
/* So much of a start for inverse iteration that none is zero. */
#define LEAST_START 1e-3
/* How far from a known phase, in alpha, its valley is entered, and how far away another phase may end it. */
#define END_OF_VALLEY  0.1
#define LONGEST_VALLEY 0.5
/* A slope this long and this nearly along the valley (its cosine) has shown that side of it. */
#define SHORTEST_SHOWN 0.05
#define LEAST_COSINE   0.9

/* sum v_a v_b matrix[a, b] of a symmetric matrix whose lower triangle is given. */
static double quadratic_form(const double *matrix, const double v[], size_t size)
{
    double sum = 0.0;
    for (size_t a = 0; a < size; a++) {
        double row = 0.5 * matrix[a * size + a] * v[a];
        for (size_t b = 0; b < a; b++) {
            row += matrix[a * size + b] * v[b];
        }
        sum += 2.0 * row * v[a];
    }
    return sum;
}

/* Sets the direction of length one in alpha in which the distance bends least about the known phase k, by inverse
 * iteration; returns that curvature. */
static double set_valley(struct equilibrium_workspace *ws, size_t k)
{
    const size_t active = ws->active_count;
    const double *hessian = ws->known_hessian[k];
    double *valley = ws->valley[k], shift = 0.0;
    bool is_factored = false;
    for (int j = 0; j < MOST_SHIFTS && !is_factored; j++) {
        memcpy(ws->known_factor, hessian, active * active * sizeof *hessian);
        for (size_t a = 0; a < active; a++) {
            ws->known_factor[a * active + a] += shift;
        }
        is_factored = linear_factor(ws->known_factor, active);
        shift = shift > 0.0 ? 10.0 * shift : 1e-8;
    }
    for (size_t a = 0; a < active; a++) {
        valley[a] = ws->offset[a] + (a % 2 == 0 ? LEAST_START : -LEAST_START);
    }
    for (int j = 0; j < INVERSE_ITERATIONS; j++) {
        double square = 0.0;
        linear_solve_factored(ws->known_factor, active, valley);
        for (size_t a = 0; a < active; a++) {
            square += valley[a] * valley[a];
        }
        for (size_t a = 0; a < active; a++) {
            valley[a] /= sqrt(square);
        }
    }
    return quadratic_form(hessian, valley, active);
}

/* The Hessian of tm in alpha at a known phase, and the valley through it; once for each. */
static void look_about(struct test *t, size_t k)
{
    struct equilibrium_workspace *ws = t->ws;
    const double *amounts = t->known->amounts[k];
    t->has_looked_about[k] = true;
    t->least_curvature[k] = (double)NAN;
    t->out->evaluations++;
    if (phase_tp(t->at_t, t->pressure, amounts, BRANCH_STABLE, PHASE_DLN_PHI_DN, ws->known) != ANSWER_OK ||
        !(fabs(phase_molar_volume(ws->known) / t->known->molar_volume[k] - 1.0) <= STABILITY_SAME_PHASE)) {
        return;
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double *row = ws->known->dln_phi_dn + i * ws->count;
        for (size_t b = 0; b <= a; b++) {
            const size_t j = ws->active[b];
            ws->known_hessian[k][a * ws->active_count + b] =
                (a == b ? 1.0 : 0.0) + sqrt(amounts[i] * amounts[j]) * row[j];
        }
    }
    t->least_curvature[k] = set_valley(ws, k);
}

/* Sets ws->offset to where the trial stands from a known phase, in alpha; returns its length. */
static double set_offset(struct equilibrium_workspace *ws, const double amounts[])
{
    const double scale = 1.0 / amount_of(amounts, ws->count);
    double square = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->offset[a] = 2.0 * (ws->scale[a] - sqrt(scale * amounts[i]));
        square += ws->offset[a] * ws->offset[a];
    }
    return sqrt(square);
}

/* Along the line from the known phase (0) to the trial (1) the distance is nearly a polynomial of fourth order,
 *   p(s) = a2 s^2 + a3 s^3 + a4 s^4,
 * which the curvature at the known phase and distance and slope at the trial determine and the curvature at the trial
 * has to confirm. Where it rises all the way, the way down from the trial ends at the known phase. */
static bool rises_all_the_way(double curvature, double tm, double slope, double bend)
{
    const double a2 = 0.5 * curvature, a4 = slope - 3.0 * tm + a2, a3 = tm - a2 - a4;
    const double told = 2.0 * a2 + 6.0 * a3 + 12.0 * a4;
    if (!(fabs(told - bend) <= POLYNOMIAL_TOLERANCE * bend)) {
        return false;
    }
    /* p'(s) / s, and the s at which it is least. */
    const double c0 = 2.0 * a2, c1 = 3.0 * a3, c2 = 4.0 * a4;
    const double s = c2 > 0.0 ? fmax(0.0, fmin(1.0, -0.5 * c1 / c2)) : 1.0;
    const double end = c0 + c1 + c2, least = fmin(fmin(c0, end), c0 + s * (c1 + s * c2));
    return least > LEAST_RISE * fmax(c0, end);
}

static double product_of(const double v[], const double w[], size_t size)
{
    double sum = 0.0;
    for (size_t a = 0; a < size; a++) {
        sum += v[a] * w[a];
    }
    return sum;
}

/* A slope along the valley of k has shown what there is on its side. */
static void note_side(struct test *t, size_t k, double length)
{
    const double along = product_of(t->ws->offset, t->ws->valley[k], t->ws->active_count);
    if (length > SHORTEST_SHOWN && fabs(along) > LEAST_COSINE * length) {
        t->has_seen[k][along > 0.0] = true;
    }
}

bool valley_leads_to_known(struct test *t, const struct trial *trial)
{
    struct equilibrium_workspace *ws = t->ws;
    if (t->effort == STABILITY_EXHAUSTIVE || !(trial->tm > 0.0 && trial->tm < 1e-3)) {
        return false;
    }
    for (size_t k = 0; k < t->known->count; k++) {
        const double length = set_offset(ws, t->known->amounts[k]);
        if (!(length < LONGEST_SLOPE)) {
            continue;
        }
        if (!t->has_looked_about[k]) {
            look_about(t, k);
        }
        if (!(t->least_curvature[k] > LEAST_CURVATURE)) {
            continue;
        }
        const double slope = -product_of(ws->offset, ws->step, ws->active_count);
        const double curvature = quadratic_form(ws->known_hessian[k], ws->offset, ws->active_count);
        const double bend = quadratic_form(ws->matrix, ws->offset, ws->active_count);
        if (rises_all_the_way(curvature, trial->tm, slope, bend)) {
            note_side(t, k, length);
            return true;
        }
    }
    return false;
}

/* Two known phases near one another are both ends of their valley. */
static bool has_a_near_twin(const struct test *t, size_t k)
{
    struct equilibrium_workspace *ws = t->ws;
    const double scale = 1.0 / amount_of(t->known->amounts[k], ws->count);
    for (size_t a = 0; a < ws->active_count; a++) {
        ws->scale[a] = sqrt(scale * t->known->amounts[k][ws->active[a]]);
    }
    for (size_t l = 0; l < t->known->count; l++) {
        if (l != k && set_offset(ws, t->known->amounts[l]) < LONGEST_VALLEY) {
            return true;
        }
    }
    return false;
}

/* A trial from the end of the valley of k: forwards along ws->valley, or backwards. It is so flat there that nothing
 * short of a resting place tells; where none is found within rounding, the other trials have to do. */
static void try_end(struct test *t, size_t k, bool is_forwards)
{
    struct equilibrium_workspace *ws = t->ws;
    const double *amounts = t->known->amounts[k], scale = 1.0 / amount_of(amounts, ws->count);
    struct trial trial;
    enum verdict verdict;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->scale[a] = sqrt(scale * amounts[i]);
        ws->step[a] = ws->valley[k][a];
        ws->kept_ln_W[i] = log(scale * amounts[i]);
    }
    trial_take_step(ws, is_forwards ? END_OF_VALLEY : -END_OF_VALLEY);
    t->branch = BRANCH_STABLE;
    t->out->trials++;
    if (trial_evaluate(t, PHASE_LN_PHI | PHASE_DLN_PHI_DN, &trial) == ANSWER_OK &&
        trial_run_newton(t, &trial, &verdict) == ANSWER_OK && verdict != KNOWN_PHASE) {
        trial_record(t, &trial);
    }
}

void valley_try(struct test *t, size_t k)
{
    const enum stability_effort effort = t->effort;
    if (!t->has_looked_about[k] || !(t->least_curvature[k] < STABILITY_FLAT) || has_a_near_twin(t, k)) {
        return;
    }
    t->effort = effort == STABILITY_DECIDE ? STABILITY_REPORT : effort;
    for (int side = 0; side <= 1; side++) {
        if (!t->has_seen[k][side]) {
            try_end(t, k, side == 1);
        }
    }
    t->effort = effort;
}
