#include "filling/found_temperatures.h"

#include "filling/search.h"

#include <math.h>

#define HOTTEST         473.15 /* K: no filled vessel is asked about above 200 degC */
#define COLDEST         20.0   /* K: for gases whose triple point and method say nothing */
#define COLDEST_MIXTURE 120.0  /* K: colder than any yard; what freezes above it is not a matter of these searches */
/* K, of the walk down to a mixture's second phase: what is there over less may be missed. */
#define MIXTURE_STEP 5.0
/* K, of the walk up to a pressure: at given volume a pressure all but always rises with temperature. */
#define STEP                  25.0
#define TEMPERATURE_TOLERANCE 1e-7   /* K */
#define NEAR_CRITICAL         0.9999 /* of the critical temperature: saturation is promised up to here */

/* ---- the range searched ------------------------------------------------------------------------------------------ */

struct span {
    double low, high;
};

static struct span searched_span(const struct sheet_run *run, const struct method_run *method)
{
    const struct quantity *triple = &run->sheet->fluid->components[0]->triple_temperature;
    struct span span = {triple->given ? triple->value : COLDEST, HOTTEST};
    if (method->mixture != NULL) {
        span.low = COLDEST_MIXTURE;
    }
    if (method->fluid->ops->range == NULL) {
        return span;
    }
    const struct range_note cold = method->fluid->ops->range(method->fluid, span.low, STANDARD_ATMOSPHERE);
    const struct range_note hot = method->fluid->ops->range(method->fluid, span.high, STANDARD_ATMOSPHERE);
    if (cold.side == RANGE_TOO_COLD) {
        span.low = fmax(span.low, cold.limit);
    }
    if (hot.side == RANGE_TOO_HOT) {
        span.high = fmin(span.high, hot.limit);
    }
    return span;
}

/* ---- the end of the liquid --------------------------------------------------------------------------------------- */

struct volume_search {
    struct method_run *method;
    double molar_volume;
    bool is_liquid; /* compare with the saturated liquid, else with the saturated vapour */
};

/* Positive while there are two phases. */
static enum answer distance_to_saturation(void *context, double temperature, double *distance)
{
    const struct volume_search *search = context;
    struct saturation saturation;
    enum answer answer = fluid_set_t(search->method->at_t, search->method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = saturation_at_t(search->method->at_t, &saturation);
    }
    if (answer == ANSWER_OK) {
        *distance = search->is_liquid ? log(search->molar_volume / saturation.liquid_volume)
                                      : log(saturation.vapour_volume / search->molar_volume);
    }
    return answer;
}

struct phase_search {
    const struct sheet_run *run;
    struct method_run *method;
    double mass;
};

/* Minus infinity where there is more than one phase, else infinity. */
static enum answer one_phase_side(void *context, double temperature, double *side)
{
    const struct phase_search *search = context;
    struct contents contents;
    const enum answer answer = pressure_at(search->run, search->method, search->mass, temperature, &contents);
    if (answer == ANSWER_OK) {
        *side = contents.phase_count == 1 ? (double)INFINITY : -(double)INFINITY;
    }
    return answer;
}

/* Down from the hottest to the first step with more than one phase. */
static enum answer walk_to_second_phase(const struct search_function *function, struct span span,
                                        struct search_bracket *bracket)
{
    bracket->a = span.high;
    enum answer answer = function->value(function->context, bracket->a, &bracket->value_a);
    if (answer == ANSWER_OK && bracket->value_a < 0.0) {
        return ANSWER_CANNOT;
    }
    while (answer == ANSWER_OK && bracket->a > span.low) {
        bracket->b = fmax(bracket->a - MIXTURE_STEP, span.low);
        answer = function->value(function->context, bracket->b, &bracket->value_b);
        if (answer == ANSWER_OK && bracket->value_b < 0.0) {
            return ANSWER_OK;
        }
        bracket->a = bracket->b;
    }
    return answer == ANSWER_OK ? ANSWER_NO_SUCH_ROOT : answer;
}

/* What the second phase is tells the end: a bubble in a full vessel, or the first liquid. */
static enum liquid_end end_at(const struct phase_search *search, double temperature)
{
    struct contents contents;
    if (pressure_at(search->run, search->method, search->mass, temperature, &contents) != ANSWER_OK) {
        return LIQUID_END_UNKNOWN;
    }
    return contents.liquid_fraction > 0.5 ? LIQUID_END_FULL : LIQUID_END_DRY;
}

static struct liquid_end_found find_mixture_end(const struct sheet_run *run, struct method_run *method, double mass)
{
    struct liquid_end_found found = {.end = LIQUID_END_UNKNOWN};
    struct phase_search search = {run, method, mass};
    const struct search_function function = {one_phase_side, &search};
    const struct span span = searched_span(run, method);
    struct search_bracket bracket;
    enum answer answer = walk_to_second_phase(&function, span, &bracket);
    if (answer == ANSWER_OK) {
        bracket.value_a = (double)INFINITY;
        answer = search_root(&function, TEMPERATURE_TOLERANCE, 0.0, &bracket);
        found.temperature = bracket.a;
        found.end = answer == ANSWER_OK ? end_at(&search, bracket.b) : LIQUID_END_UNKNOWN;
    } else if (answer == ANSWER_NO_SUCH_ROOT) {
        found = (struct liquid_end_found){LIQUID_END_BELOW, span.low};
    }
    return found;
}

struct liquid_end_found find_liquid_end(const struct sheet_run *run, struct method_run *method, double mass)
{
    struct liquid_end_found found = {.end = LIQUID_END_UNKNOWN};
    if (method->fluid != NULL && method->mixture != NULL && (method->fluid->ops->capabilities & CAN_LIQUID) != 0) {
        return find_mixture_end(run, method, mass);
    }
    if (method->fluid == NULL || !method->has_critical) {
        return found;
    }
    const double molar_volume = run->sheet->vessel->water_capacity.value * run->sheet->fluid->molar_mass / mass;
    struct volume_search search = {method, molar_volume, molar_volume < method->critical.molar_volume};
    const struct search_function function = {distance_to_saturation, &search};
    const double critical = method->critical.temperature;
    const struct span span = searched_span(run, method);
    struct search_bracket bracket = {.a = span.low, .b = fmin(NEAR_CRITICAL * critical, span.high)};
    if (!(bracket.a < bracket.b) || function.value(&search, bracket.a, &bracket.value_a) != ANSWER_OK ||
        function.value(&search, bracket.b, &bracket.value_b) != ANSWER_OK) {
        return found;
    }
    found.temperature = bracket.a;
    if (bracket.value_a < 0.0) {
        found.end = LIQUID_END_BELOW;
    } else if (bracket.value_b >= 0.0) {
        /* Two phases to the end: of the range, or of the liquid itself. */
        found.end = bracket.b < span.high ? LIQUID_END_CRITICAL : LIQUID_END_UNKNOWN;
        found.temperature = critical;
    } else if (search_root(&function, TEMPERATURE_TOLERANCE, 0.0, &bracket) == ANSWER_OK) {
        found.end = search.is_liquid ? LIQUID_END_FULL : LIQUID_END_DRY;
        found.temperature = bracket.b;
    }
    return found;
}

/* ---- a pressure reached ------------------------------------------------------------------------------------------ */

struct pressure_search {
    const struct sheet_run *run;
    struct method_run *method;
    double mass, pressure;
};

static enum answer pressure_above(void *context, double temperature, double *above)
{
    const struct pressure_search *search = context;
    struct contents contents;
    const enum answer answer = pressure_at(search->run, search->method, search->mass, temperature, &contents);
    if (answer == ANSWER_OK) {
        *above = contents.pressure - search->pressure;
    }
    return answer;
}

/* The first step going up within which the pressure is reached. A cold end without an answer (a vessel denser than the
 * method's liquid there) is passed over. */
static enum answer walk_to_pressure(const struct search_function *function, struct span span,
                                    struct search_bracket *bracket)
{
    bool has_below = false;
    const size_t steps = (size_t)ceil((span.high - span.low) / STEP);
    for (size_t i = 0; i <= steps; i++) {
        const double temperature = i == steps ? span.high : span.low + STEP * (double)i;
        double above;
        const enum answer answer = function->value(function->context, temperature, &above);
        if (answer != ANSWER_OK) {
            if (has_below) {
                return answer;
            }
        } else if (above < 0.0) {
            has_below = true;
            bracket->a = temperature;
            bracket->value_a = above;
        } else {
            bracket->b = temperature;
            bracket->value_b = above;
            return has_below ? ANSWER_OK : ANSWER_NO_SUCH_ROOT;
        }
    }
    bracket->b = span.high;
    return ANSWER_NO_SUCH_ROOT;
}

enum answer find_temperature_of_pressure(const struct sheet_run *run, struct method_run *method, double mass,
                                         double pressure, double *temperature)
{
    if (method->fluid == NULL) {
        return ANSWER_CANNOT;
    }
    struct pressure_search search = {run, method, mass, pressure};
    const struct search_function function = {pressure_above, &search};
    const struct span span = searched_span(run, method);
    if (!(span.low < span.high)) {
        return ANSWER_OUT_OF_RANGE;
    }
    struct search_bracket bracket;
    enum answer answer = walk_to_pressure(&function, span, &bracket);
    if (answer == ANSWER_OK) {
        answer = search_root(&function, TEMPERATURE_TOLERANCE, 0.0, &bracket);
    }
    *temperature = bracket.b;
    return answer;
}
