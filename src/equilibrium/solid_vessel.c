/* A closed vessel in which pure solids stand beside the fluid's phases.
 *
 * The fluid's Helmholtz energy, least over its splits, is convex in volume and amounts together, so with the solids'
 * it is convex in the solids' amounts s; its slope in s_j is R T (ln f_j of the solid - ln f_j of the fluid) at the
 * pressure of the vessel. The unknowns are u_j = ln(n_j - s_j), in which ln f_j is nearly straight however little is
 * left in the fluid: Newton's steps, with differences for the matrix, on the solids that are there. A solid goes when
 * its u reaches ln n_j, and comes when its component's fugacity in the fluid exceeds its own.
 */
#include "equilibrium/solid_vessel.h"
#include "equilibrium/closed_vessel.h"
#include "equilibrium/linear.h"

#include <math.h>
#include <string.h>

enum { MOST_STEPS = 60, MOST_ROUNDS = 4 * MOST_FORMERS, MOST_HALVINGS = 12 };

/* Of u: by how much it is moved for a difference, and by how much a step may move it. */
#define SHIFT        1e-5
#define LARGEST_STEP 2.0
/* Where a difference of the fluid's closed vessels vanishes, as over three phases of a binary: ln f_j then rises with
 * u_j by this, and the step is the largest. */
#define LEAST_SLOPE 1e-3
/* The slope after a step by the slope before it, turned round. */
#define MOST_CLIMB 0.9
#define AIM        1e-12 /* steps go on to this while they help */

static struct former former_of(const struct solid_state *unpressed, const struct fluid_at_t *pure, size_t component)
{
    return (struct former){
        .component = component,
        .line = unpressed->line,
        .line_pressure = unpressed->line_pressure,
        .ln_fugacity = unpressed->ln_fugacity,
        .molar_volume = unpressed->molar_volume,
        .poynting = unpressed->molar_volume / (pure->fluid->gas_constant * pure->temperature),
    };
}

enum answer former_at(const struct solid_spec *solid, const struct fluid_at_t *pure, size_t component,
                      struct former *out)
{
    struct solid_state unpressed;
    const enum answer answer = solid_at(solid, pure, 0.0, &unpressed);
    if (answer == ANSWER_OK) {
        *out = former_of(&unpressed, pure, component);
    }
    return answer;
}

enum answer former_by_sublimation(const struct solid_spec *solid, const struct fluid_at_t *pure, size_t component,
                                  struct former *out)
{
    struct solid_state unpressed;
    const enum answer answer = solid_by_sublimation(solid, pure, 0.0, &unpressed);
    if (answer == ANSWER_OK) {
        *out = former_of(&unpressed, pure, component);
    }
    return answer;
}

struct solid_vessel *solid_vessel_create(size_t count, struct arena *arena)
{
    struct solid_vessel *vessel = arena_alloc(arena, 1, sizeof *vessel);
    *vessel = (struct solid_vessel){
        .fluid = mixture_vessel_create(count, arena),
        .amounts = arena_alloc(arena, count, sizeof(double)),
        .trial = arena_alloc(arena, count, sizeof(double)),
    };
    return vessel;
}

/* One vessel at work. */
struct freezing {
    const struct fluid_at_t *at_t;
    struct equilibrium_workspace *ws;
    struct solid_vessel *out;
    const double *n;
    double volume;
    bool has_start; /* the fluid's vessel holds an answer nearby */
    size_t active_count;
    size_t active[MOST_FORMERS]; /* indices of the formers whose solid is there */
    double u[MOST_FORMERS], next_u[MOST_FORMERS];
    double gap[MOST_FORMERS], next_gap[MOST_FORMERS]; /* ln f_fluid - ln f_solid, of every former */
    double matrix[MOST_FORMERS * MOST_FORMERS], step[MOST_FORMERS];
};

/* ---- the fluid beside given solids ------------------------------------------------------------------------------- */

static void set_gaps(const struct freezing *z, double gap[])
{
    const struct split *split = z->out->fluid->split;
    const double p = split->pressure;
    for (size_t j = 0; j < z->out->former_count; j++) {
        const struct former *former = &z->out->formers[j];
        const size_t i = former->component;
        gap[j] = -HUGE_VAL;
        if (split->phase[0].x[i] > 0.0) {
            gap[j] =
                log(split->phase[0].x[i] * p) + split->phase[0].ln_phi[i] - former->ln_fugacity - former->poynting * p;
        }
    }
}

/* The fluid that the solids of `u` leave, and every former's gap. */
static enum answer evaluate(struct freezing *z, const double u[], double gap[])
{
    struct solid_vessel *out = z->out;
    double volume = z->volume;
    memcpy(out->trial, z->n, z->ws->count * sizeof *out->trial);
    for (size_t a = 0; a < z->active_count; a++) {
        const struct former *former = &out->formers[z->active[a]];
        out->trial[former->component] = exp(u[z->active[a]]);
        volume -= (z->n[former->component] - out->trial[former->component]) * former->molar_volume;
    }
    if (!(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    out->steps++;
    const enum answer answer =
        mixture_vessel_at_tv(z->at_t, volume, out->trial, z->has_start ? out->fluid : NULL, z->ws, out->fluid);
    z->has_start = answer == ANSWER_OK;
    if (answer == ANSWER_OK) {
        set_gaps(z, gap);
    }
    return answer;
}

/* Nothing is left of the solid, and its component would rather be in the fluid. */
static bool is_gone(const struct freezing *z, const double u[], const double gap[], size_t j)
{
    return u[j] >= log(z->n[z->out->formers[j].component]) && gap[j] < 0.0;
}

/* Of the solids that are there. */
static double largest_gap(const struct freezing *z, const double u[], const double gap[])
{
    double largest = 0.0;
    for (size_t a = 0; a < z->active_count; a++) {
        const size_t j = z->active[a];
        largest = is_gone(z, u, gap, j) ? largest : fmax(largest, fabs(gap[j]));
    }
    return largest;
}

/* ---- Newton's steps ---------------------------------------------------------------------------------------------- */

static enum answer set_matrix(struct freezing *z)
{
    const size_t size = z->active_count;
    for (size_t b = 0; b < size; b++) {
        const size_t k = z->active[b];
        memcpy(z->next_u, z->u, sizeof z->u);
        z->next_u[k] -= SHIFT;
        const enum answer answer = evaluate(z, z->next_u, z->next_gap);
        if (answer != ANSWER_OK) {
            return answer;
        }
        for (size_t a = 0; a < size; a++) {
            const size_t j = z->active[a];
            z->matrix[a * size + b] = (z->gap[j] - z->next_gap[j]) / SHIFT;
        }
        z->matrix[b * size + b] = fmax(z->matrix[b * size + b], LEAST_SLOPE);
    }
    return ANSWER_OK;
}

/* The step in u, no longer than allowed. */
static bool set_step(struct freezing *z)
{
    const size_t size = z->active_count;
    double largest = 0.0;
    for (size_t a = 0; a < size; a++) {
        z->step[a] = -z->gap[z->active[a]];
    }
    if (!linear_solve(z->matrix, size, z->step)) {
        return false;
    }
    for (size_t a = 0; a < size; a++) {
        largest = fmax(largest, fabs(z->step[a]));
    }
    for (size_t a = 0; largest > LARGEST_STEP && a < size; a++) {
        z->step[a] *= LARGEST_STEP / largest;
    }
    return isfinite(largest);
}

/* By R T, the slope of the Helmholtz energy towards z->next_u, at the amounts and gaps given. */
static double slope_at(const struct freezing *z, const double u[], const double gap[])
{
    double slope = 0.0;
    for (size_t a = 0; a < z->active_count; a++) {
        const size_t j = z->active[a];
        slope += gap[j] * exp(u[j]) * (z->next_u[j] - z->u[j]);
    }
    return slope;
}

/* Takes as much of the step as does not climb behind the valley. A solid that would be less than nothing ends at
 * nothing. */
static enum answer take_step(struct freezing *z)
{
    const double before = largest_gap(z, z->u, z->gap);
    double part = 1.0;
    for (int k = 0; k < MOST_HALVINGS; k++, part *= 0.5) {
        memcpy(z->next_u, z->u, sizeof z->u);
        for (size_t a = 0; a < z->active_count; a++) {
            const size_t j = z->active[a];
            z->next_u[j] = fmin(z->u[j] + part * z->step[a], log(z->n[z->out->formers[j].component]));
        }
        if (evaluate(z, z->next_u, z->next_gap) != ANSWER_OK) {
            continue;
        }
        const double down = slope_at(z, z->u, z->gap), after = slope_at(z, z->next_u, z->next_gap);
        if (largest_gap(z, z->next_u, z->next_gap) < before || (down < 0.0 && after <= MOST_CLIMB * -down)) {
            memcpy(z->u, z->next_u, sizeof z->u);
            memcpy(z->gap, z->next_gap, sizeof z->gap);
            return ANSWER_OK;
        }
        if (before <= SOLID_LN_F_TOLERANCE) {
            break;
        }
    }
    return ANSWER_NO_SUCH_ROOT;
}

/* Drops the solids of which nothing is left though their component would rather be in the fluid; true if any was. */
static bool drop_solids(struct freezing *z)
{
    size_t kept = 0;
    for (size_t a = 0; a < z->active_count; a++) {
        const size_t j = z->active[a];
        if (!is_gone(z, z->u, z->gap, j)) {
            z->active[kept++] = j;
        }
    }
    const bool has_dropped = kept < z->active_count;
    z->active_count = kept;
    return has_dropped;
}

/* The solids that are there brought to the fluid's fugacities; fewer of them may be there afterwards. */
static enum answer settle_solids(struct freezing *z)
{
    enum answer answer = evaluate(z, z->u, z->gap);
    for (int step = 0; answer == ANSWER_OK && step < MOST_STEPS; step++) {
        if (drop_solids(z)) {
            answer = evaluate(z, z->u, z->gap);
            continue;
        }
        if (z->active_count == 0 || largest_gap(z, z->u, z->gap) <= AIM) {
            return ANSWER_OK;
        }
        answer = set_matrix(z);
        if (answer != ANSWER_OK || !set_step(z)) {
            return ANSWER_FAILED;
        }
        if (take_step(z) != ANSWER_OK) {
            break; /* at the rounding of the fluid's own answers, or stuck: the gaps tell */
        }
    }
    if (answer == ANSWER_OK) {
        /* What was tried last need not be what was accepted. */
        answer = evaluate(z, z->u, z->gap);
    }
    return answer == ANSWER_OK && largest_gap(z, z->u, z->gap) <= SOLID_LN_F_TOLERANCE ? ANSWER_OK : ANSWER_FAILED;
}

/* ---- which solids are there -------------------------------------------------------------------------------------- */

static bool is_active(const struct freezing *z, size_t j)
{
    for (size_t a = 0; a < z->active_count; a++) {
        if (z->active[a] == j) {
            return true;
        }
    }
    return false;
}

/* The solid most wanted of those that are not there joins, from what an ideal gas would leave of its component. */
static bool add_solid(struct freezing *z)
{
    size_t worst = z->out->former_count;
    double largest = SOLID_LN_F_TOLERANCE;
    for (size_t j = 0; j < z->out->former_count; j++) {
        if (!is_active(z, j) && z->gap[j] > largest) {
            largest = z->gap[j];
            worst = j;
        }
    }
    if (worst == z->out->former_count) {
        return false;
    }
    const double most = log(z->n[z->out->formers[worst].component]);
    z->u[worst] = most - fmin(largest, LARGEST_STEP);
    z->active[z->active_count++] = worst;
    return true;
}

static void report(struct freezing *z)
{
    struct solid_vessel *out = z->out;
    memcpy(out->amounts, out->trial, z->ws->count * sizeof *out->amounts);
    out->residual = largest_gap(z, z->u, z->gap);
    for (size_t a = 0; a < z->active_count; a++) {
        const size_t i = out->formers[z->active[a]].component;
        out->solid[z->active[a]] = z->n[i] - out->amounts[i];
    }
}

enum answer solid_vessel_at_tv(const struct fluid_at_t *at_t, double volume, const double n[],
                               const struct former formers[], size_t former_count, struct equilibrium_workspace *ws,
                               struct solid_vessel *out)
{
    struct freezing z = {.at_t = at_t, .ws = ws, .out = out, .n = n, .volume = volume};
    if (former_count > MOST_FORMERS || at_t->fluid->count < 2) {
        return ANSWER_OUT_OF_RANGE;
    }
    out->former_count = former_count;
    out->steps = 0;
    memset(out->solid, 0, sizeof out->solid);
    if (former_count > 0) {
        memcpy(out->formers, formers, former_count * sizeof *formers);
    }
    enum answer answer = evaluate(&z, z.u, z.gap);
    for (int round = 0; answer == ANSWER_OK && round < MOST_ROUNDS; round++) {
        if (!add_solid(&z)) {
            report(&z);
            return ANSWER_OK;
        }
        answer = settle_solids(&z);
    }
    return answer == ANSWER_OK ? ANSWER_FAILED : answer;
}

/* ---- a pure substance -------------------------------------------------------------------------------------------- */

static const double ONE_MOLE = 1.0;

/* The pressure at which solid and fluid have one fugacity; `fluid` is then evaluated there. */
static enum answer equal_pressure(const struct fluid_at_t *at_t, const struct former *former, struct phase *fluid,
                                  double *pressure, double *gap)
{
    const enum branch branch = former->line == SOLID_MELTS ? BRANCH_LIQUID : BRANCH_VAPOUR;
    double p = former->line == SOLID_MELTS ? former->line_pressure : exp(former->ln_fugacity);
    for (int step = 0; step < MOST_STEPS; step++) {
        const enum answer answer = phase_tp(at_t, p, &ONE_MOLE, branch, PHASE_LN_PHI, fluid);
        if (answer != ANSWER_OK) {
            return answer;
        }
        *gap = log(p) + fluid->ln_phi[0] - former->ln_fugacity - former->poynting * p;
        *pressure = p;
        if (fabs(*gap) <= AIM) {
            return ANSWER_OK;
        }
        /* d gap / d ln p = p (v_fluid - v_solid) / (R T) */
        p *= exp(-*gap / (fluid->Z - former->poynting * p));
    }
    return fabs(*gap) <= SOLID_LN_F_TOLERANCE ? ANSWER_OK : ANSWER_FAILED;
}

enum answer pure_solid_vessel_at_tv(const struct fluid_at_t *at_t, double volume, double amount,
                                    const struct former *former, struct pure_solid_vessel *out)
{
    struct pure_arrays arrays;
    struct phase fluid;
    struct vessel_contents contents;
    phase_of_pure(&fluid, &arrays);
    if (!(volume > 0.0) || !(amount > 0.0) || at_t->fluid->count != 1) {
        return ANSWER_OUT_OF_RANGE;
    }
    *out = (struct pure_solid_vessel){.solid_volume = former->molar_volume};
    enum answer answer = equal_pressure(at_t, former, &fluid, &out->pressure, &out->residual);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->fluid_volume = fluid.volume;
    out->phi = exp(fluid.ln_phi[0]);
    if (volume <= amount * former->molar_volume) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (volume < amount * fluid.volume) {
        out->fluid_amount = (volume - amount * former->molar_volume) / (fluid.volume - former->molar_volume);
        out->solid_amount = amount - out->fluid_amount;
        return ANSWER_OK;
    }
    out->residual = 0.0;
    out->fluid_amount = amount;
    out->fluid_volume = volume / amount;
    if (former->line == SOLID_MELTS) {
        answer = closed_vessel_at_tv(at_t, volume, amount, &contents);
        out->pressure = contents.pressure;
    } else {
        answer = phase_tv(at_t, out->fluid_volume, &ONE_MOLE, 0, &fluid);
        out->pressure = fluid.pressure;
    }
    return answer;
}
