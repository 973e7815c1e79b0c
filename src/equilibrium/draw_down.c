/* Vapour or liquid drawn from a closed vessel, at one temperature or with its energy: integration, and the events on
 * the way. */
#include "equilibrium/draw_down.h"

#include "equilibrium/energy_vessel.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_odeiv2.h>
#include <math.h>
#include <string.h>

enum {
    MOST_STEPS = 20000,               /* of one call */
    MOST_SOLUTIONS = 6000,            /* of the vessel, from the start: some ten times what is usual */
    MOST_SOLUTIONS_WITH_HEAT = 60000, /* heat that comes fast holds the steps down to its own time */
    MOST_HALVINGS = 60,               /* of a step that cannot be made */
    MOST_BISECTIONS = 60,             /* of an event's place */
    FIRST_PARTS = 1000                /* the first step is that part of the mass */
};

/* An event is placed to this part of the mass at the start. */
#define EVENT_PLACE 1e-12

/* What is integrated behind the amounts of a draw at a rate. */
enum { ENERGY, WALL_TEMPERATURE, ENTHALPY_DELIVERED, HEAT_TAKEN, HEAT_UNKNOWNS };

/* No step that has to be smaller than this part of the mass is worth its work: the vessel's solution is not smooth. */
#define LEAST_STEP 1e-9

struct draw_down {
    const struct fluid_at_t *at_t;
    struct draw_task task;
    size_t count, size;  /* components; unknowns */
    double mass, amount; /* kg and mol at the start */
    struct draw_heat heat;
    struct energy_vessel *energies; /* NULL: at one temperature */
    double energy_scale;            /* J */
    double step;                    /* kg, for the next step */
    struct draw_state state, other;
    struct mixture_vessel *vessel; /* NULL: a pure fluid */
    struct equilibrium_workspace *ws;
    bool has_vessel;
    int solutions;                  /* of the vessel, since the start */
    double *trial, *error, *before; /* [count], mol */
    gsl_odeiv2_step *stepper;
    gsl_odeiv2_system system;
};

/* ---- the vessel -------------------------------------------------------------------------------------------------- */

/* One phase of the contents. */
struct part {
    double amount, molar_volume; /* mol, m3/mol */
    const double *x;             /* NULL: pure */
    double enthalpy;             /* J/mol, of a draw at a rate */
};

static double molar_mass_of(const struct draw_down *draw, const double x[])
{
    double sum = 0.0;
    for (size_t i = 0; i < draw->count; i++) {
        sum += (x == NULL ? 1.0 : x[i]) * draw->task.molar_masses[i];
    }
    return sum;
}

static const struct part *drawn_part(const struct draw_down *draw, const struct part parts[], size_t count)
{
    const struct part *found = &parts[0];
    double at = molar_mass_of(draw, found->x) / found->molar_volume;
    for (size_t k = 1; k < count; k++) {
        const double density = molar_mass_of(draw, parts[k].x) / parts[k].molar_volume;
        if (draw->task.drawn == DRAWN_LIQUID ? density > at : density < at) {
            found = &parts[k];
            at = density;
        }
    }
    return found;
}

static void take_parts(const struct draw_down *draw, const struct part parts[], size_t count, double pressure,
                       struct draw_state *out)
{
    out->pressure = pressure;
    out->phase_count = count;
    out->filled = 0.0;
    out->liquid_amount = 0.0;
    double liquid = 0.0;
    for (size_t k = 0; k < count; k++) {
        const double volume = parts[k].amount * parts[k].molar_volume;
        out->filled += volume;
        out->liquid_amount += k > 0 ? parts[k].amount : 0.0;
        liquid += k > 0 ? volume : 0.0;
    }
    out->liquid_fraction = liquid / draw->task.volume;
    const struct part *drawn = drawn_part(draw, parts, count);
    out->drawn_enthalpy = drawn->enthalpy;
    for (size_t i = 0; i < draw->count; i++) {
        out->drawn[i] = drawn->x == NULL ? 1.0 : drawn->x[i];
    }
}

static enum answer solve_pure(const struct draw_down *draw, double amount, struct draw_state *out)
{
    struct vessel_contents contents;
    const enum answer answer = closed_vessel_at_tv(draw->at_t, draw->task.volume, amount, &contents);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const struct part vapour = {contents.vapour_amount, contents.vapour_molar_volume, NULL, 0.0};
    const struct part liquid = {contents.liquid_amount, contents.liquid_molar_volume, NULL, 0.0};
    if (contents.state == VESSEL_TWO_PHASE) {
        take_parts(draw, (struct part[]){vapour, liquid}, 2, contents.pressure, out);
    } else {
        take_parts(draw, contents.state == VESSEL_LIQUID_FULL ? &liquid : &vapour, 1, contents.pressure, out);
    }
    return ANSWER_OK;
}

static enum answer solve_mixture(struct draw_down *draw, const double n[], struct draw_state *out)
{
    struct mixture_vessel *vessel = draw->vessel;
    const enum answer answer =
        mixture_vessel_at_tv(draw->at_t, draw->task.volume, n, draw->has_vessel ? vessel : NULL, draw->ws, vessel);
    draw->has_vessel = answer == ANSWER_OK;
    if (answer != ANSWER_OK) {
        return answer;
    }
    struct part parts[MOST_PHASES];
    for (size_t k = 0; k < vessel->split->phase_count; k++) {
        const struct split_phase *phase = &vessel->split->phase[k];
        parts[k] = (struct part){vessel->amount * phase->fraction, phase->molar_volume, phase->x, 0.0};
    }
    take_parts(draw, parts, vessel->split->phase_count, vessel->split->pressure, out);
    return ANSWER_OK;
}

static int most_solutions(const struct draw_down *draw)
{
    return draw->energies == NULL ? MOST_SOLUTIONS : MOST_SOLUTIONS_WITH_HEAT;
}

/* The contents as their energy has them: y[count + ENERGY]. */
static enum answer solve_with_energy(struct draw_down *draw, const double y[], struct draw_state *out)
{
    struct energy_state energy;
    struct part parts[MOST_PHASES];
    const enum answer answer =
        energy_vessel_at_u(draw->energies, y[draw->count + ENERGY], y, draw->state.temperature, &energy);
    if (answer != ANSWER_OK) {
        return answer;
    }
    for (size_t k = 0; k < energy.phase_count; k++) {
        const struct energy_part *part = &energy.parts[k];
        parts[k] = (struct part){part->amount, part->molar_volume, part->x, part->enthalpy};
    }
    take_parts(draw, parts, energy.phase_count, energy.pressure, out);
    out->filled += energy.solid_amount * energy.solid_molar_volume;
    out->temperature = energy.temperature;
    out->wall_temperature = y[draw->count + WALL_TEMPERATURE];
    out->solid_amount = energy.solid_amount;
    out->energy = energy.internal_energy;
    out->enthalpy_delivered = y[draw->count + ENTHALPY_DELIVERED];
    out->heat_taken = y[draw->count + HEAT_TAKEN];
    return ANSWER_OK;
}

/* The contents with n[] mol; a negative amount has none. Work is limited, so that every draw comes to an end. */
static enum answer solve(struct draw_down *draw, const double n[], struct draw_state *out)
{
    if (draw->solutions++ >= most_solutions(draw)) {
        return ANSWER_FAILED;
    }
    for (size_t i = 0; i < draw->count; i++) {
        if (!(n[i] >= 0.0)) {
            return ANSWER_OUT_OF_RANGE;
        }
    }
    if (draw->energies != NULL) {
        return solve_with_energy(draw, n, out);
    }
    return draw->vessel == NULL ? solve_pure(draw, n[0], out) : solve_mixture(draw, n, out);
}

/* ---- steps ------------------------------------------------------------------------------------------------------- */

/* By the mass delivered: all powers over the rate. */
static void set_heat_slopes(const struct draw_down *draw, const double y[], double molar_mass, double slope[])
{
    const struct draw_heat *heat = &draw->heat;
    const double T = draw->other.temperature, T_w = y[draw->count + WALL_TEMPERATURE];
    const bool has_wall = heat->wall_heat_capacity > 0.0;
    const double outside = heat->ambient_conductance * (heat->ambient - (has_wall ? T_w : T)) / heat->rate;
    const double inside = has_wall ? heat->wall_conductance * (T_w - T) / heat->rate : outside;
    const double enthalpy = draw->other.drawn_enthalpy / molar_mass;
    slope[draw->count + ENERGY] = inside - enthalpy;
    slope[draw->count + WALL_TEMPERATURE] = has_wall ? (outside - inside) / heat->wall_heat_capacity : 0.0;
    slope[draw->count + ENTHALPY_DELIVERED] = enthalpy;
    slope[draw->count + HEAT_TAKEN] = outside;
}

static int slopes(double delivered, const double n[], double slope[], void *context)
{
    (void)delivered;
    struct draw_down *draw = context;
    if (solve(draw, n, &draw->other) != ANSWER_OK) {
        return GSL_EBADFUNC;
    }
    const double molar_mass = molar_mass_of(draw, draw->other.drawn);
    for (size_t i = 0; i < draw->count; i++) {
        slope[i] = -draw->other.drawn[i] / molar_mass;
    }
    if (draw->energies != NULL) {
        set_heat_slopes(draw, n, molar_mass, slope);
    }
    return GSL_SUCCESS;
}

/* draw->trial after a step of h kg from draw->before; false where it cannot be made. */
static bool make_step(struct draw_down *draw, double h)
{
    memcpy(draw->trial, draw->before, draw->size * sizeof *draw->trial);
    gsl_odeiv2_step_reset(draw->stepper);
    return gsl_odeiv2_step_apply(draw->stepper, draw->state.delivered, h, draw->trial, draw->error, NULL, NULL,
                                 &draw->system) == GSL_SUCCESS;
}

/* The error of the step just made over the tolerance. */
static double step_error(const struct draw_down *draw)
{
    double largest = 0.0;
    for (size_t i = 0; i < draw->count; i++) {
        largest = fmax(largest, fabs(draw->error[i]));
    }
    largest /= draw->amount;
    for (size_t i = draw->count; i < draw->size; i++) {
        const double scale = i == draw->count + WALL_TEMPERATURE ? draw->heat.temperature : draw->energy_scale;
        largest = fmax(largest, fabs(draw->error[i]) / scale);
    }
    return largest / draw->task.tolerance;
}

static bool is_at_limit(const struct draw_down *draw, const struct draw_state *state)
{
    const struct draw_task *task = &draw->task;
    const double fraction = state->drawn[task->limited];
    return task->has_limit && (task->is_limit_from_above ? fraction <= task->limit : fraction >= task->limit);
}

static enum draw_event event_between(const struct draw_down *draw, const struct draw_state *before,
                                     const struct draw_state *after)
{
    if (draw->task.drawn == DRAWN_LIQUID && before->phase_count > 1 && after->phase_count == 1) {
        return DRAW_LIQUID_IS_GONE;
    }
    if (!(after->pressure > draw->task.least_pressure)) {
        return DRAW_LEAST_PRESSURE;
    }
    if (draw->energies != NULL && !(after->temperature > draw->heat.least_temperature)) {
        return DRAW_LEAST_TEMPERATURE;
    }
    if (is_at_limit(draw, after)) {
        return DRAW_COMPOSITION;
    }
    if ((after->solid_amount > 0.0) != (before->solid_amount > 0.0)) {
        return after->solid_amount > 0.0 ? DRAW_SOLID_COMES : DRAW_SOLID_GOES;
    }
    return after->phase_count > before->phase_count   ? DRAW_PHASE_COMES
           : after->phase_count < before->phase_count ? DRAW_PHASE_GOES
                                                      : DRAW_NO_EVENT;
}

static void keep(struct draw_down *draw, double delivered)
{
    struct draw_state *state = &draw->state, *other = &draw->other;
    double *amounts = state->amounts, *drawn = state->drawn;
    memcpy(amounts, draw->trial, draw->size * sizeof *amounts);
    memcpy(drawn, other->drawn, draw->count * sizeof *drawn);
    *state = *other;
    state->amounts = amounts;
    state->drawn = drawn;
    state->delivered = delivered;
}

/* A step of h, and the vessel behind it, in draw->trial and draw->other. */
static bool step_and_solve(struct draw_down *draw, double h)
{
    return make_step(draw, h) && solve(draw, draw->trial, &draw->other) == ANSWER_OK;
}

/* The first event within a step of h kg that has one: the step is bisected, each time integrated anew from its start,
 * so that nothing is taken from a step that ran across the event. */
static enum answer place_event(struct draw_down *draw, double h, enum draw_event *event)
{
    double low = 0.0, high = h;
    for (int i = 0; i < MOST_BISECTIONS && high - low > EVENT_PLACE * draw->mass; i++) {
        const double middle = 0.5 * (low + high);
        if (!step_and_solve(draw, middle)) {
            return ANSWER_FAILED;
        }
        if (event_between(draw, &draw->state, &draw->other) == DRAW_NO_EVENT) {
            low = middle;
        } else {
            high = middle;
        }
    }
    if (!step_and_solve(draw, high)) {
        return ANSWER_FAILED;
    }
    *event = event_between(draw, &draw->state, &draw->other);
    const double at = *event == DRAW_LIQUID_IS_GONE ? low : high;
    if (at != high && !step_and_solve(draw, at)) {
        return ANSWER_FAILED;
    }
    keep(draw, draw->state.delivered + at);
    return ANSWER_OK;
}

/* One accepted step of at most `most` kg. */
static enum answer one_step(struct draw_down *draw, double most, enum draw_event *event)
{
    memcpy(draw->before, draw->state.amounts, draw->size * sizeof *draw->before);
    double h = fmin(draw->step, most);
    for (int i = 0; i < MOST_HALVINGS && draw->solutions < most_solutions(draw); i++) {
        const bool is_made = step_and_solve(draw, h);
        const double error = is_made ? step_error(draw) : HUGE_VAL;
        if (error <= 1.0) {
            *event = event_between(draw, &draw->state, &draw->other);
            const double wider = h * fmin(5.0, 0.9 * pow(fmax(error, 1e-12), -1.0 / 8.0));
            draw->step = h < draw->step ? fmax(draw->step, wider) : wider;
            if (*event != DRAW_NO_EVENT) {
                return place_event(draw, h, event);
            }
            keep(draw, draw->state.delivered + h);
            return ANSWER_OK;
        }
        if (!(h > LEAST_STEP * draw->mass)) {
            /* what is drawn may jump at an event, and no step across it has a small error: the event itself is placed
             * by steps up to it */
            *event = is_made ? event_between(draw, &draw->state, &draw->other) : DRAW_NO_EVENT;
            return *event == DRAW_NO_EVENT ? ANSWER_FAILED : place_event(draw, h, event);
        }
        h *= is_made ? fmax(0.2, 0.9 * pow(error, -1.0 / 8.0)) : 0.5;
        draw->step = h;
    }
    return ANSWER_FAILED;
}

enum answer draw_down_to(struct draw_down *draw, double delivered, enum draw_event *event)
{
    *event = DRAW_NO_EVENT;
    for (int i = 0; i < MOST_STEPS; i++) {
        const double most = delivered - draw->state.delivered;
        if (!(most > EVENT_PLACE * draw->mass)) {
            return ANSWER_OK;
        }
        const enum answer answer = one_step(draw, most, event);
        if (answer != ANSWER_OK || *event != DRAW_NO_EVENT) {
            return answer;
        }
    }
    return ANSWER_FAILED;
}

/* ---- life -------------------------------------------------------------------------------------------------------- */

struct draw_down *draw_down_create(const struct fluid_at_t *at_t, size_t count, const struct draw_task *task,
                                   struct arena *arena)
{
    struct draw_down *draw = arena_alloc(arena, 1, sizeof *draw);
    *draw = (struct draw_down){.at_t = at_t, .task = *task, .count = count};
    draw->size = count + (task->heat != NULL ? (size_t)HEAT_UNKNOWNS : 0);
    double *rooms = arena_alloc(arena, 7 * draw->size, sizeof *rooms);
    draw->state.amounts = rooms;
    draw->state.drawn = rooms + draw->size;
    draw->other.drawn = rooms + 2 * draw->size;
    draw->trial = rooms + 3 * draw->size;
    draw->error = rooms + 4 * draw->size;
    draw->before = rooms + 5 * draw->size;
    draw->other.amounts = rooms + 6 * draw->size;
    if (task->heat != NULL) {
        draw->heat = *task->heat;
        draw->energies = energy_vessel_create(draw->heat.fluid, draw->heat.at_t, task->volume, draw->heat.solid, arena);
    }
    if (count > 1) {
        draw->vessel = mixture_vessel_create(count, arena);
        draw->ws = equilibrium_workspace_create(count, arena);
    }
    for (size_t i = 0; i < count; i++) {
        draw->amount += task->start[i];
        draw->mass += task->start[i] * task->molar_masses[i];
    }
    draw->system = (gsl_odeiv2_system){slopes, NULL, draw->size, draw};
    draw->stepper = gsl_odeiv2_step_alloc(gsl_odeiv2_step_rk8pd, draw->size);
    return draw->stepper == NULL ? NULL : draw;
}

void draw_down_free(struct draw_down *draw)
{
    gsl_odeiv2_step_free(draw->stepper);
}

/* The energy of the start, at its temperature. */
static enum answer begin_energy(struct draw_down *draw)
{
    struct energy_state energy;
    const double temperature = draw->heat.temperature;
    const enum answer answer = energy_vessel_at_t(draw->energies, temperature, draw->trial, &energy);
    memset(draw->trial + draw->count, 0, HEAT_UNKNOWNS * sizeof *draw->trial);
    draw->trial[draw->count + ENERGY] = energy.internal_energy;
    draw->trial[draw->count + WALL_TEMPERATURE] = temperature;
    draw->state.temperature = temperature;
    draw->energy_scale = draw->amount * draw->heat.fluid->gas_constant * temperature;
    return answer;
}

enum answer draw_down_begin(struct draw_down *draw)
{
    memcpy(draw->trial, draw->task.start, draw->count * sizeof *draw->trial);
    draw->has_vessel = false;
    draw->solutions = 0;
    draw->step = draw->mass / FIRST_PARTS;
    enum answer answer = draw->energies == NULL ? ANSWER_OK : begin_energy(draw);
    answer = answer == ANSWER_OK ? solve(draw, draw->trial, &draw->other) : answer;
    if (answer == ANSWER_OK) {
        keep(draw, 0.0);
    }
    return answer;
}

const struct draw_state *draw_down_state(const struct draw_down *draw)
{
    return &draw->state;
}
