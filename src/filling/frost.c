/* Densities are tried upwards, as one phase, until a solid would form; the density where it begins is then closed in
 * on. That phase may be unstable against a liquid, whose own fugacities are lower. It is taken all the same: below the
 * triple point many methods put the undercooled liquid a little below the solid, and would otherwise see no frost at
 * all; where the liquid is real the limit errs on the safe side. The margin need not grow with density, as a dense gas
 * dissolves its own frost: the first crossing counts. */
#include "filling/frost.h"

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

static bool can_freeze(const struct case_component *component, double temperature)
{
    return component->spec.solid != NULL && solid_exists_at(component->spec.solid, temperature);
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

bool frost_is_possible(const struct case_fluid *fluid, double temperature)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->fractions[i] > 0.0 && can_freeze(fluid->components[i], temperature)) {
            return true;
        }
    }
    return false;
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

static enum answer hold_against_solids(const struct case_fluid *fluid, struct method_run *method, double temperature,
                                       const struct fluid_fugacity *f, struct frost_margin *out)
{
    *out = (struct frost_margin){.value = -(double)INFINITY, .pressure = f->pressure};
    for (size_t i = 0; i < fluid->count; i++) {
        struct solid_state solid;
        if (!(fluid->fractions[i] > 0.0) || !can_freeze(fluid->components[i], temperature)) {
            continue;
        }
        const enum answer answer = solid_of(fluid, method, i, temperature, f->pressure, &solid);
        if (answer != ANSWER_OK) {
            return answer;
        }
        const double ln_x = f->x == NULL ? 0.0 : log(f->x[i]);
        const double margin = ln_x + f->ln_phi[i] + log(f->pressure) - solid.ln_fugacity;
        if (margin > out->value) {
            out->value = margin;
            out->component = i;
            out->solid = solid;
        }
    }
    return isfinite(out->value) ? ANSWER_OK : ANSWER_CANNOT;
}

static enum answer pure_margin(const struct case_fluid *fluid, struct method_run *method, double temperature,
                               double molar_volume, struct frost_margin *out)
{
    const double one = 1.0;
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    answer = answer == ANSWER_OK ? phase_tv(method->at_t, molar_volume, &one, PHASE_LN_PHI, &phase) : answer;
    if (answer != ANSWER_OK || !(phase.dp_dv < 0.0)) {
        return answer == ANSWER_OK ? ANSWER_OUT_OF_RANGE : answer;
    }
    const struct fluid_fugacity f = {phase.pressure, NULL, &arrays.ln_phi};
    return hold_against_solids(fluid, method, temperature, &f, out);
}

/* ---- the lowest density ------------------------------------------------------------------------------------------ */

struct search_state {
    const struct case_fluid *fluid;
    struct method_run *method;
    double temperature;
    struct frost_margin last;
};

/* As one phase, whether it is stable against other fluids or not. */
static enum answer homogeneous_margin(struct search_state *s, double molar_volume)
{
    struct phase *phase = s->method->mixture->phase;
    const enum answer answer = phase_tv(s->method->at_t, molar_volume, s->method->z, PHASE_LN_PHI, phase);
    if (answer != ANSWER_OK || !(phase->dp_dv < 0.0)) {
        return answer == ANSWER_OK ? ANSWER_OUT_OF_RANGE : answer;
    }
    const struct fluid_fugacity f = {phase->pressure, s->method->z, phase->ln_phi};
    return hold_against_solids(s->fluid, s->method, s->temperature, &f, &s->last);
}

static enum answer margin_at_density(struct search_state *s, double density)
{
    return s->method->mixture == NULL ? pure_margin(s->fluid, s->method, s->temperature, 1.0 / density, &s->last)
                                      : homogeneous_margin(s, 1.0 / density);
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

/* mol/m3: well below any frost of an ideal gas. */
static double thinnest(const struct case_fluid *fluid, double temperature)
{
    double pressure = (double)INFINITY, slope;
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->fractions[i] > 0.0 && can_freeze(fluid->components[i], temperature)) {
            const struct solid_spec *solid = fluid->components[i]->spec.solid;
            pressure = fmin(pressure, solid_sublimation_pressure(solid, temperature, &slope) / fluid->fractions[i]);
        }
    }
    return THINNEST_PART * pressure / (GAS_CONSTANT * temperature);
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
    out->ideal_pressure = s->last.solid.sublimation_pressure / s->fluid->fractions[s->last.component];
}

enum answer frost_limit_at(const struct case_fluid *fluid, struct method_run *method, double temperature,
                           struct frost_limit *out)
{
    struct search_state s = {.fluid = fluid, .method = method, .temperature = temperature};
    *out = (struct frost_limit){.forms = false, .clearance = (double)INFINITY};
    if (!frost_is_possible(fluid, temperature)) {
        return ANSWER_OK;
    }
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    const double most = answer == ANSWER_OK ? densest(&s) : 0.0;
    double below = 0.0;
    for (double density = thinnest(fluid, temperature); answer == ANSWER_OK && density < most;
         density *= NEXT_DENSITY) {
        const enum answer here = margin_at_density(&s, density);
        if (here == ANSWER_CANNOT) {
            return here;
        }
        if (here != ANSWER_OK) {
            continue; /* within the instability of one phase, or denser than the method answers for */
        }
        if (s.last.value > 0.0) {
            out->molar_volume = 1.0 / density;
            answer = below > 0.0 ? close_in(&s, below, density, out) : ANSWER_OK;
            put_limit(&s, out);
            return answer;
        }
        below = density;
        out->clearance = fmin(out->clearance, -s.last.value);
    }
    return answer;
}
