#include "equilibrium/fast_fill.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_odeiv2.h>
#include <math.h>

enum { MOST_STEPS = 20000 };

/* An empty vessel has no temperature: the first gas, this part of all, comes in before the wall takes anything. */
#define FIRST_PART 1e-6
/* Of the energies and temperatures at each step. */
#define TOLERANCE  1e-9
#define FIRST_STEP 1e-4

enum { CONTENTS, WALL, UNKNOWNS };

struct filling {
    struct energy_vessel *vessel;
    const struct fast_fill *fill;
    size_t count;
    double *n;      /* [count] */
    double nearest; /* K, where the next temperature is looked for */
    struct energy_state state;
};

static void set_amounts(struct filling *of, double part)
{
    for (size_t i = 0; i < of->count; i++) {
        of->n[i] = of->fill->before[i] + part * of->fill->added[i];
    }
}

static enum answer state_after(struct filling *of, double part, double energy)
{
    set_amounts(of, part);
    const enum answer answer = energy_vessel_at_u(of->vessel, energy, of->n, of->nearest, &of->state);
    of->nearest = answer == ANSWER_OK ? of->state.temperature : of->nearest;
    return answer;
}

/* The energy of what is there before. */
static enum answer energy_before(struct filling *of, double *energy)
{
    *energy = 0.0;
    if (!(amount_of(of->fill->before, of->count) > 0.0)) {
        return ANSWER_OK;
    }
    set_amounts(of, 0.0);
    const enum answer answer = energy_vessel_at_t(of->vessel, of->fill->temperature, of->n, &of->state);
    *energy = of->state.internal_energy;
    return answer;
}

static struct filling begin(struct energy_vessel *vessel, size_t count, const struct fast_fill *fill,
                            struct arena *arena)
{
    return (struct filling){.vessel = vessel,
                            .fill = fill,
                            .count = count,
                            .n = arena_alloc(arena, count, sizeof(double)),
                            .nearest = fill->temperature};
}

static void take_end(const struct filling *of, double wall, struct fast_fill_end *out)
{
    *out = (struct fast_fill_end){.temperature = of->state.temperature,
                                  .wall_temperature = wall,
                                  .pressure = of->state.pressure,
                                  .energy = of->state.internal_energy};
}

enum answer fast_fill_adiabatic(struct energy_vessel *vessel, size_t count, const struct fast_fill *fill,
                                struct arena *arena, struct fast_fill_end *out)
{
    struct filling of = begin(vessel, count, fill, arena);
    double energy;
    enum answer answer = energy_before(&of, &energy);
    answer = answer == ANSWER_OK ? state_after(&of, 1.0, energy + fill->enthalpy) : answer;
    if (answer == ANSWER_OK) {
        take_end(&of, fill->temperature, out);
    }
    return answer;
}

/* By the part that is in. */
static int slopes(double part, const double y[], double slope[], void *context)
{
    struct filling *of = context;
    const struct fast_fill *fill = of->fill;
    if (state_after(of, part, y[CONTENTS]) != ANSWER_OK) {
        return GSL_FAILURE; /* a shorter step may do */
    }
    const double heat = fill->wall_conductance * (of->state.temperature - y[WALL]) * fill->time;
    slope[CONTENTS] = fill->enthalpy - heat;
    slope[WALL] = heat / fill->wall_heat_capacity;
    return GSL_SUCCESS;
}

enum answer fast_fill_with_wall(struct energy_vessel *vessel, size_t count, const struct fast_fill *fill,
                                struct arena *arena, struct fast_fill_end *out)
{
    struct filling of = begin(vessel, count, fill, arena);
    double y[UNKNOWNS] = {0.0, fill->temperature}, part = 0.0;
    enum answer answer = energy_before(&of, &y[CONTENTS]);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!(amount_of(fill->before, count) > 0.0)) {
        part = FIRST_PART;
        y[CONTENTS] = FIRST_PART * fill->enthalpy;
    }
    gsl_odeiv2_system system = {slopes, NULL, UNKNOWNS, &of};
    const double scale = fabs(fill->enthalpy) + fabs(y[CONTENTS]);
    const double scales[UNKNOWNS] = {scale / fill->temperature, 1.0};
    gsl_odeiv2_driver *driver = gsl_odeiv2_driver_alloc_scaled_new(
        &system, gsl_odeiv2_step_rk8pd, FIRST_STEP, TOLERANCE * fill->temperature, 0.0, 1.0, 0.0, scales);
    if (driver == NULL) {
        return ANSWER_FAILED;
    }
    gsl_odeiv2_driver_set_nmax(driver, MOST_STEPS);
    const bool is_made = gsl_odeiv2_driver_apply(driver, &part, 1.0, y) == GSL_SUCCESS;
    gsl_odeiv2_driver_free(driver);
    answer = is_made ? state_after(&of, 1.0, y[CONTENTS]) : ANSWER_FAILED;
    if (answer == ANSWER_OK) {
        take_end(&of, y[WALL], out);
    }
    return answer;
}
