/* Densities are tried upwards until a solid would form; the density where it begins is then closed in on.
 *
 * Below its triple point a solid is held against the fluid as one phase. That phase may be unstable against a liquid,
 * whose own fugacities are lower. It is taken all the same: many methods put the undercooled liquid a little below the
 * solid, and would otherwise see no frost at all; where the liquid is real the limit errs on the safe side. Above its
 * triple point a solid melts, and is held against the fluid as it settles. The margin need not grow with density, as a
 * dense gas dissolves its own frost: the first crossing counts. */
#include "filling/frost.h"

#include "equilibrium/closed_vessel.h"
#include "equilibrium/split.h"
#include "filling/mixture_contents.h"
#include "filling/mixture_internal.h"
#include "filling/search.h"

#include <math.h>

/* The thinnest state tried, by part of where the rule of partial pressures sees frost; and the factor from one density
 * to the next. */
#define THINNEST_PART 0.1
#define NEXT_DENSITY  1.25
/* Searches end so far short of the densest state of the method. */
#define SHORT_OF_DENSEST 0.95
/* mol/m3, for methods without a densest state. */
#define DENSEST 5e4
/* In ln density. */
#define LIMIT_TOLERANCE 1e-12

/* ---- who may freeze ---------------------------------------------------------------------------------------------- */

static bool knows_liquids(const struct method_run *method)
{
    return (method->fluid->ops->capabilities & CAN_LIQUID) != 0;
}

static enum solid_line line_of(const struct case_component *component, const struct method_run *method,
                               double temperature)
{
    return component->spec.solid == NULL ? SOLID_NOT_KNOWN
                                         : solid_line_at(component->spec.solid, knows_liquids(method), temperature);
}

/* Whether a component that is there has a solid that the line tells of. */
static bool any_on_line(const struct case_fluid *fluid, const struct method_run *method, double temperature,
                        enum solid_line line)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->fractions[i] > 0.0 && line_of(fluid->components[i], method, temperature) == line) {
            return true;
        }
    }
    return false;
}

const struct case_component *frost_unknown(const struct case_fluid *fluid, double temperature)
{
    for (size_t i = 0; i < fluid->count; i++) {
        const struct case_component *component = fluid->components[i];
        const struct quantity *triple = &component->triple_temperature;
        if (fluid->fractions[i] > 0.0 && component->spec.solid == NULL &&
            (!triple->given || temperature < triple->value * (1.0 - TEMPERATURE_ROUNDING))) {
            return component;
        }
    }
    return NULL;
}

bool frost_is_possible(const struct case_fluid *fluid, const struct method_run *method, double temperature)
{
    return any_on_line(fluid, method, temperature, SOLID_SUBLIMES) ||
           any_on_line(fluid, method, temperature, SOLID_MELTS);
}

/* ---- one state --------------------------------------------------------------------------------------------------- */

/* ln(f_i / Pa) of every component in the fluid, as the callers below have it. */
struct fluid_fugacity {
    double pressure;
    const double *x, *ln_phi; /* [count]; of a pure fluid x is NULL and ln_phi has one entry */
};

static enum answer solid_of(const struct case_fluid *fluid, struct method_run *method, size_t i, double temperature,
                            double pressure, struct solid_state *out)
{
    struct method_run *pure = method->mixture == NULL ? method : mixture_alone(method, i);
    if (pure->fluid == NULL) {
        return ANSWER_CANNOT;
    }
    const enum answer answer = fluid_set_t(pure->at_t, pure->fluid, temperature);
    return answer == ANSWER_OK ? solid_at(fluid->components[i]->spec.solid, pure->at_t, pressure, out) : answer;
}

/* Of the components whose solids that line tells of; `out` keeps what it holds where none has a larger margin. */
static enum answer hold_against_solids(const struct case_fluid *fluid, struct method_run *method, double temperature,
                                       enum solid_line line, const struct fluid_fugacity *f, struct frost_margin *out)
{
    for (size_t i = 0; i < fluid->count; i++) {
        struct solid_state solid;
        if (!(fluid->fractions[i] > 0.0) || line_of(fluid->components[i], method, temperature) != line) {
            continue;
        }
        const enum answer answer = solid_of(fluid, method, i, temperature, f->pressure, &solid);
        if (answer != ANSWER_OK) {
            return answer;
        }
        const double ln_x = f->x == NULL ? 0.0 : log(f->x[i]);
        const double margin = ln_x + f->ln_phi[i] + log(f->pressure) - solid.ln_fugacity;
        if (margin > out->value) {
            *out = (struct frost_margin){margin, i, f->pressure, f->ln_phi[i], f->x == NULL ? 1.0 : f->x[i], solid};
        }
    }
    return ANSWER_OK;
}

/* ---- the lowest density ------------------------------------------------------------------------------------------ */

struct search_state {
    const struct case_fluid *fluid;
    struct method_run *method;
    double temperature;
    bool sublimes, melts; /* what may freeze is below its triple point, above it */
    struct frost_margin last;
};

/* As one phase, whether it is stable against other fluids or not. */
static enum answer hold_one_phase(struct search_state *s, double molar_volume)
{
    const double one = 1.0;
    struct pure_arrays arrays;
    struct phase pure, *phase = &pure;
    const bool is_pure = s->method->mixture == NULL;
    if (is_pure) {
        phase_of_pure(&pure, &arrays);
    } else {
        phase = s->method->mixture->phase;
    }
    const enum answer answer =
        phase_tv(s->method->at_t, molar_volume, is_pure ? &one : s->method->z, PHASE_LN_PHI, phase);
    if (answer != ANSWER_OK || !(phase->dp_dv < 0.0)) {
        return answer == ANSWER_OK ? ANSWER_OUT_OF_RANGE : answer;
    }
    const struct fluid_fugacity f = {phase->pressure, is_pure ? NULL : s->method->z, phase->ln_phi};
    return hold_against_solids(s->fluid, s->method, s->temperature, SOLID_SUBLIMES, &f, &s->last);
}

/* As it settles at that density, whose phases all have the same fugacities. */
static enum answer hold_settled(struct search_state *s, double molar_volume)
{
    const double one = 1.0;
    const struct split *split;
    struct pure_arrays arrays;
    struct phase phase;
    struct vessel_contents contents;
    if (s->method->mixture != NULL) {
        const enum answer answer = mixture_split_at_volume(s->method, molar_volume, &split);
        if (answer != ANSWER_OK) {
            return answer;
        }
        const struct fluid_fugacity f = {split->pressure, split->phase[0].x, split->phase[0].ln_phi};
        return hold_against_solids(s->fluid, s->method, s->temperature, SOLID_MELTS, &f, &s->last);
    }
    phase_of_pure(&phase, &arrays);
    enum answer answer = closed_vessel_at_tv(s->method->at_t, molar_volume, one, &contents);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double v = contents.state == VESSEL_TWO_PHASE ? contents.vapour_molar_volume : molar_volume;
    answer = phase_tv(s->method->at_t, v, &one, PHASE_LN_PHI, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const struct fluid_fugacity f = {phase.pressure, NULL, &arrays.ln_phi};
    return hold_against_solids(s->fluid, s->method, s->temperature, SOLID_MELTS, &f, &s->last);
}

static enum answer margin_at_density(struct search_state *s, double density)
{
    s->last = (struct frost_margin){.value = -(double)INFINITY};
    enum answer answer = fluid_set_t(s->method->at_t, s->method->fluid, s->temperature);
    if (answer == ANSWER_OK && s->sublimes) {
        answer = hold_one_phase(s, 1.0 / density);
    }
    if ((answer == ANSWER_OK || answer == ANSWER_OUT_OF_RANGE) && s->melts) {
        answer = hold_settled(s, 1.0 / density); /* there may be a whole that settles where one phase is unstable */
    }
    return answer == ANSWER_OK && !isfinite(s->last.value) ? ANSWER_CANNOT : answer;
}

/* Scores as searches want them: above zero where the condition holds, which here is no frost. */
static enum answer score_at(void *context, double ln_density, double *score)
{
    struct search_state *s = context;
    const enum answer answer = margin_at_density(s, exp(ln_density));
    *score = -s->last.value;
    return answer;
}

static double densest(const struct search_state *s)
{
    const double smallest = smallest_molar_volume(s->method);
    return smallest > 0.0 ? SHORT_OF_DENSEST / smallest : DENSEST;
}

/* mol/m3: well below any frost of an ideal gas. Above a triple point it is that of the triple point. */
static double thinnest(const struct search_state *s)
{
    const struct case_fluid *fluid = s->fluid;
    double pressure = (double)INFINITY, slope;
    for (size_t i = 0; i < fluid->count; i++) {
        const struct case_component *component = fluid->components[i];
        if (fluid->fractions[i] > 0.0 && line_of(component, s->method, s->temperature) != SOLID_NOT_KNOWN) {
            const struct solid_spec *solid = component->spec.solid;
            const double T = fmin(s->temperature, solid->largest_temperature);
            pressure = fmin(pressure, solid_sublimation_pressure(solid, T, &slope) / fluid->fractions[i]);
        }
    }
    return THINNEST_PART * pressure / (GAS_CONSTANT * s->temperature);
}

/* Between a density without frost and one with it. */
static enum answer close_in(struct search_state *s, double below, double above, struct frost_limit *out)
{
    struct search_bracket step = {.a = log(below), .b = log(above)};
    enum answer answer = score_at(s, step.a, &step.value_a);
    answer = answer == ANSWER_OK ? score_at(s, step.b, &step.value_b) : answer;
    const struct search_function function = {score_at, s};
    answer = answer == ANSWER_OK ? search_root(&function, LIMIT_TOLERANCE, 0.0, &step) : answer;
    answer = answer == ANSWER_OK ? score_at(s, step.a, &step.value_a) : answer;
    out->molar_volume = exp(-step.a);
    return answer;
}

static void put_limit(const struct search_state *s, struct frost_limit *out)
{
    out->forms = true;
    out->at = s->last;
    out->ideal_pressure = s->last.solid.line == SOLID_SUBLIMES
                              ? s->last.solid.line_pressure / s->fluid->fractions[s->last.component]
                              : (double)NAN;
}

enum answer frost_limit_at(const struct case_fluid *fluid, struct method_run *method, double temperature,
                           struct frost_limit *out)
{
    struct search_state s = {.fluid = fluid,
                             .method = method,
                             .temperature = temperature,
                             .sublimes = any_on_line(fluid, method, temperature, SOLID_SUBLIMES),
                             .melts = any_on_line(fluid, method, temperature, SOLID_MELTS)};
    *out = (struct frost_limit){.forms = false, .clearance = (double)INFINITY};
    out->may_sublime = s.sublimes;
    if (!s.sublimes && !s.melts) {
        return ANSWER_OK;
    }
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    const double most = answer == ANSWER_OK ? densest(&s) : 0.0;
    double below = 0.0;
    bool is_answered = false;
    for (double next = thinnest(&s); answer == ANSWER_OK && next < NEXT_DENSITY * most; next *= NEXT_DENSITY) {
        const double density = fmin(next, most);
        const enum answer here = margin_at_density(&s, density);
        if (here == ANSWER_CANNOT) {
            return here;
        }
        if (here != ANSWER_OK) {
            continue; /* within the instability of one phase, or denser than the method answers for */
        }
        is_answered = true;
        if (s.last.value > 0.0) {
            out->molar_volume = 1.0 / density;
            answer = below > 0.0 ? close_in(&s, below, density, out) : ANSWER_OK;
            put_limit(&s, out);
            return answer;
        }
        below = density;
        out->clearance = fmin(out->clearance, -s.last.value);
    }
    return answer == ANSWER_OK && !is_answered ? ANSWER_CANNOT : answer;
}
