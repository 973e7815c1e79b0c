/* The energy of a vessel's contents at a temperature, and the temperature at an energy. At constant volume and amounts
 * the energy rises with temperature whatever the phases do, so that one bracket holds the answer. */
#include "equilibrium/energy_vessel.h"

#include "equilibrium/closed_vessel.h"
#include "equilibrium/linear.h"
#include "equilibrium/solid_vessel.h"
#include "fluid/caloric.h"

#include <math.h>
#include <string.h>

enum { MOST_PASSES = 100, MOST_WIDENINGS = 60 };

/* Of n R T. */
#define ENERGY_TOLERANCE 1e-12
/* The first step from where the search starts, K; it grows by a factor until the answer lies between. */
#define FIRST_STEP 0.5
#define GROWTH     2.0
#define COLDEST    20.0
#define HOTTEST    3000.0

struct energy_vessel {
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    double volume;
    const struct solid_spec *solid;
    struct mixture_vessel *vessel; /* NULL: a pure fluid */
    struct equilibrium_workspace *ws;
    bool has_vessel;
    double *scratch;           /* [count], mol of one phase */
    double triple_temperature; /* K, by the method; of a solid */
};

/* ---- the triple point -------------------------------------------------------------------------------------------- */

/* ln of the fugacity of the solid less that of the saturated fluid. */
static enum answer solid_above_fluid(struct energy_vessel *vessel, double temperature, double *above)
{
    struct saturation saturation;
    struct solid_state solid;
    enum answer answer = fluid_set_t(vessel->at_t, vessel->fluid, temperature);
    answer = answer == ANSWER_OK ? saturation_at_t(vessel->at_t, &saturation) : answer;
    answer =
        answer == ANSWER_OK ? solid_by_sublimation(vessel->solid, vessel->at_t, saturation.pressure, &solid) : answer;
    if (answer == ANSWER_OK) {
        *above = solid.ln_fugacity - (saturation.ln_phi_vapour + log(saturation.pressure));
    }
    return answer;
}

/* Where the method's own saturation line meets the sublimation line: solid, liquid and vapour then have one fugacity,
 * and energies join. False where they do not meet near the published triple point. */
static bool find_triple(struct energy_vessel *vessel)
{
    const double published = vessel->solid->largest_temperature;
    double low = (1.0 - SOLID_ABOVE_TRIPLE) * published, high = (1.0 + 0.99 * SOLID_ABOVE_TRIPLE) * published;
    double at_low, at_high, at_middle;
    if (solid_above_fluid(vessel, low, &at_low) != ANSWER_OK ||
        solid_above_fluid(vessel, high, &at_high) != ANSWER_OK || !(at_low < 0.0 && at_high > 0.0)) {
        return false;
    }
    while (nextafter(low, high) < high) {
        const double middle = 0.5 * (low + high);
        if (!(middle > low && middle < high) || solid_above_fluid(vessel, middle, &at_middle) != ANSWER_OK) {
            break;
        }
        *(at_middle < 0.0 ? &low : &high) = middle;
    }
    vessel->triple_temperature = low;
    return true;
}

struct energy_vessel *energy_vessel_create(const struct fluid *fluid, struct fluid_at_t *at_t, double volume,
                                           const struct solid_spec *solid, struct arena *arena)
{
    struct energy_vessel *vessel = arena_alloc(arena, 1, sizeof *vessel);
    *vessel = (struct energy_vessel){.fluid = fluid,
                                     .at_t = at_t,
                                     .volume = volume,
                                     .solid = fluid->count == 1 ? solid : NULL,
                                     .scratch = arena_alloc(arena, fluid->count, sizeof *vessel->scratch)};
    if (fluid->count > 1) {
        vessel->vessel = mixture_vessel_create(fluid->count, arena);
        vessel->ws = equilibrium_workspace_create(fluid->count, arena);
    }
    if (vessel->solid != NULL && !find_triple(vessel)) {
        vessel->solid = NULL;
    }
    return vessel;
}

/* ---- the parts --------------------------------------------------------------------------------------------------- */

/* Adds a fluid phase and its energy. */
static enum answer add_part(struct energy_vessel *vessel, double amount, double molar_volume, const double *x,
                            struct energy_state *out)
{
    struct caloric caloric;
    for (size_t i = 0; i < vessel->fluid->count; i++) {
        vessel->scratch[i] = x == NULL ? 1.0 : x[i];
    }
    const enum answer answer = caloric_at_volume(vessel->at_t, molar_volume, vessel->scratch, &caloric);
    if (answer == ANSWER_OK) {
        out->parts[out->phase_count++] = (struct energy_part){amount, molar_volume, caloric.enthalpy, x};
        out->internal_energy += amount * caloric.internal_energy;
    }
    return answer;
}

static enum answer add_pure(struct energy_vessel *vessel, double amount, struct energy_state *out)
{
    struct vessel_contents contents;
    enum answer answer = closed_vessel_at_tv(vessel->at_t, vessel->volume, amount, &contents);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->pressure = contents.pressure;
    if (contents.vapour_amount > 0.0) {
        answer = add_part(vessel, contents.vapour_amount, contents.vapour_molar_volume, NULL, out);
    }
    if (answer == ANSWER_OK && contents.liquid_amount > 0.0) {
        answer = add_part(vessel, contents.liquid_amount, contents.liquid_molar_volume, NULL, out);
    }
    return answer;
}

static enum answer add_mixture(struct energy_vessel *vessel, const double n[], struct energy_state *out)
{
    struct mixture_vessel *mixture = vessel->vessel;
    enum answer answer =
        mixture_vessel_at_tv(vessel->at_t, vessel->volume, n, vessel->has_vessel ? mixture : NULL, vessel->ws, mixture);
    vessel->has_vessel = answer == ANSWER_OK;
    out->pressure = mixture->split->pressure;
    for (size_t k = 0; answer == ANSWER_OK && k < mixture->split->phase_count; k++) {
        const struct split_phase *phase = &mixture->split->phase[k];
        answer = add_part(vessel, mixture->amount * phase->fraction, phase->molar_volume, phase->x, out);
    }
    return answer;
}

/* J/mol of the solid: the ideal gas and the departure from it, less p v. */
static enum answer solid_energy(const struct energy_vessel *vessel, double pressure, double *energy, double *volume)
{
    struct solid_state solid;
    struct caloric ideal;
    const double one = 1.0;
    enum answer answer = solid_by_sublimation(vessel->solid, vessel->at_t, pressure, &solid);
    answer = answer == ANSWER_OK ? caloric_ideal(vessel->at_t, pressure, &one, &ideal) : answer;
    if (answer == ANSWER_OK) {
        *energy = ideal.enthalpy + solid.departure_enthalpy - pressure * solid.molar_volume;
        *volume = solid.molar_volume;
    }
    return answer;
}

static enum answer add_solid(struct energy_vessel *vessel, double amount, struct energy_state *out)
{
    double energy;
    const enum answer answer = solid_energy(vessel, out->pressure, &energy, &out->solid_molar_volume);
    out->solid_amount = amount;
    out->internal_energy += amount * energy;
    return answer;
}

/* Vapour over solid. */
static enum answer add_frozen(struct energy_vessel *vessel, double amount, struct energy_state *out)
{
    struct former former;
    struct pure_solid_vessel frozen;
    enum answer answer = former_by_sublimation(vessel->solid, vessel->at_t, 0, &former);
    answer =
        answer == ANSWER_OK ? pure_solid_vessel_at_tv(vessel->at_t, vessel->volume, amount, &former, &frozen) : answer;
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->pressure = frozen.pressure;
    answer = add_part(vessel, frozen.fluid_amount, frozen.fluid_volume, NULL, out);
    return answer == ANSWER_OK && frozen.solid_amount > 0.0 ? add_solid(vessel, frozen.solid_amount, out) : answer;
}

static enum answer state_at(struct energy_vessel *vessel, double temperature, const double n[], bool is_frozen,
                            struct energy_state *out)
{
    *out = (struct energy_state){.temperature = temperature};
    const enum answer answer = fluid_set_t(vessel->at_t, vessel->fluid, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    return vessel->vessel != NULL ? add_mixture(vessel, n, out)
           : is_frozen            ? add_frozen(vessel, n[0], out)
                                  : add_pure(vessel, n[0], out);
}

static bool freezes_at(const struct energy_vessel *vessel, double temperature)
{
    return vessel->solid != NULL && temperature < vessel->triple_temperature;
}

enum answer energy_vessel_at_t(struct energy_vessel *vessel, double temperature, const double n[],
                               struct energy_state *out)
{
    return state_at(vessel, temperature, n, freezes_at(vessel, temperature), out);
}

/* ---- at an energy ------------------------------------------------------------------------------------------------ */

/* One end of the bracket. */
struct place {
    double temperature, off; /* energy there less the one asked for */
};

static enum answer look(struct energy_vessel *vessel, double temperature, const double n[], double energy,
                        struct energy_state *out, struct place *place)
{
    const enum answer answer = energy_vessel_at_t(vessel, temperature, n, out);
    *place = (struct place){temperature, out->internal_energy - energy};
    return answer;
}

/* Walks from `start` towards the answer until it lies between; temperatures stay within [low, high]. */
static enum answer find_bracket(struct energy_vessel *vessel, double energy, const double n[], double start, double low,
                                double high, struct energy_state *out, struct place *cold, struct place *warm)
{
    struct place here, next;
    double step = FIRST_STEP;
    enum answer answer = look(vessel, fmin(fmax(start, low), high), n, energy, out, &here);
    const double sign = here.off > 0.0 ? -1.0 : 1.0;
    for (int k = 0; answer == ANSWER_OK && k < MOST_WIDENINGS; k++, step *= GROWTH) {
        const double at = fmin(fmax(here.temperature + sign * step, low), high);
        if (!(fabs(at - here.temperature) > 0.0)) {
            return ANSWER_OUT_OF_RANGE;
        }
        answer = look(vessel, at, n, energy, out, &next);
        for (int halving = 0; answer != ANSWER_OK && halving < 8; halving++) { /* beyond the method's reach */
            step *= 0.4;
            answer = look(vessel, here.temperature + sign * step, n, energy, out, &next);
        }
        if (answer == ANSWER_OK && sign * next.off >= 0.0) {
            *cold = sign > 0.0 ? here : next;
            *warm = sign > 0.0 ? next : here;
            return ANSWER_OK;
        }
        here = next;
    }
    return answer == ANSWER_OK ? ANSWER_OUT_OF_RANGE : answer;
}

/* Secant steps within the bracket; an end that stays twice counts half, so that steps come from both sides (the
 * Illinois rule), and the middle wherever a step would leave the bracket or three did not halve it. */
static enum answer close_in(struct energy_vessel *vessel, double energy, const double n[], struct place cold,
                            struct place warm, double scale, struct energy_state *out)
{
    double cold_off = cold.off, warm_off = warm.off, width = warm.temperature - cold.temperature;
    int last_side = 0;
    for (int pass = 1; pass <= MOST_PASSES; pass++) {
        double at = cold.temperature - cold_off * (warm.temperature - cold.temperature) / (warm_off - cold_off);
        if (pass % 3 == 0) {
            const bool is_slow = warm.temperature - cold.temperature > 0.5 * width;
            width = warm.temperature - cold.temperature;
            at = is_slow ? 0.5 * (cold.temperature + warm.temperature) : at;
        }
        if (!(at > cold.temperature && at < warm.temperature)) {
            at = 0.5 * (cold.temperature + warm.temperature);
        }
        struct place here;
        const enum answer answer = look(vessel, at, n, energy, out, &here);
        if (answer != ANSWER_OK || fabs(here.off) <= ENERGY_TOLERANCE * scale ||
            !(at > cold.temperature && at < warm.temperature)) {
            return answer;
        }
        const int side = here.off > 0.0 ? 1 : -1;
        if (side > 0) {
            warm = here;
            cold_off = last_side == side ? 0.5 * cold_off : cold.off;
            warm_off = here.off;
        } else {
            cold = here;
            warm_off = last_side == side ? 0.5 * warm_off : warm.off;
            cold_off = here.off;
        }
        last_side = side;
    }
    return ANSWER_OK; /* the bracket is as narrow as numbers allow */
}

static enum answer search(struct energy_vessel *vessel, double energy, const double n[], double start, double low,
                          double high, struct energy_state *out)
{
    struct place cold, warm;
    const enum answer answer = find_bracket(vessel, energy, n, start, low, high, out, &cold, &warm);
    const double scale = amount_of(n, vessel->fluid->count) * vessel->fluid->gas_constant * warm.temperature;
    return answer == ANSWER_OK ? close_in(vessel, energy, n, cold, warm, scale, out) : answer;
}

/* Solid, liquid and vapour of a pure substance at one temperature: amounts, volume and energy are three linear
 * equations. The fluid's state there is given. */
static enum answer share_three(struct energy_vessel *vessel, double energy, double amount, struct energy_state *fluid)
{
    if (fluid->phase_count != 2) {
        return ANSWER_FAILED;
    }
    double solid, solid_volume;
    const enum answer answer = solid_energy(vessel, fluid->pressure, &solid, &solid_volume);
    const struct energy_part *vapour = &fluid->parts[0], *liquid = &fluid->parts[1];
    const double p = fluid->pressure;
    double matrix[9] = {1.0,
                        1.0,
                        1.0,
                        vapour->molar_volume,
                        liquid->molar_volume,
                        solid_volume,
                        vapour->enthalpy - p * vapour->molar_volume,
                        liquid->enthalpy - p * liquid->molar_volume,
                        solid};
    double amounts[3] = {amount, vessel->volume, energy};
    if (answer != ANSWER_OK || !linear_solve(matrix, 3, amounts)) {
        return answer == ANSWER_OK ? ANSWER_FAILED : answer;
    }
    for (size_t k = 0; k < 3; k++) {
        if (!(amounts[k] >= -1e-8 * amount)) {
            return ANSWER_FAILED;
        }
        amounts[k] = fmax(amounts[k], 0.0);
    }
    fluid->parts[0].amount = amounts[0];
    fluid->parts[1].amount = amounts[1];
    fluid->solid_amount = amounts[2];
    fluid->solid_molar_volume = solid_volume;
    fluid->internal_energy = energy;
    return ANSWER_OK;
}

/* Below the energy of liquid and vapour at the triple point, above that of solid and vapour, all three are there. */
enum answer energy_vessel_at_u(struct energy_vessel *vessel, double energy, const double n[], double start,
                               struct energy_state *out)
{
    const double triple = vessel->triple_temperature;
    if (vessel->solid == NULL) {
        return search(vessel, energy, n, start, COLDEST, HOTTEST, out);
    }
    enum answer answer = state_at(vessel, triple, n, false, out);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (energy >= out->internal_energy) {
        return search(vessel, energy, n, start, triple, HOTTEST, out);
    }
    struct energy_state frozen;
    answer = state_at(vessel, triple, n, true, &frozen);
    if (answer != ANSWER_OK || !(energy > frozen.internal_energy)) {
        return answer != ANSWER_OK ? answer : search(vessel, energy, n, start, COLDEST, nextafter(triple, 0.0), out);
    }
    answer = state_at(vessel, triple, n, false, out);
    return answer == ANSWER_OK ? share_three(vessel, energy, n[0], out) : answer;
}

double energy_vessel_triple(const struct energy_vessel *vessel)
{
    return vessel->solid == NULL ? 0.0 : vessel->triple_temperature;
}
