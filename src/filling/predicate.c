#include "filling/frost.h"
#include "filling/mixture_contents.h"
#include "filling/predicate_internal.h"
#include "filling/search.h"

#include <float.h>
#include <math.h>

/* Values of `=` that agree to this part of the bound are equal. */
#define EQUAL_TOLERANCE 1e-9

#define RANGE_STEP      0.5    /* K: features narrower than this may be missed */
#define RANGE_TOLERANCE 0.0005 /* K: half of the 1 mK promised */

double vessel_symbol(const struct case_vessel *vessel, enum case_symbol symbol)
{
    const struct quantity *rating = NULL;
    if (symbol == SYMBOL_TEST_PRESSURE) {
        rating = &vessel->test_pressure;
    } else if (symbol == SYMBOL_WORKING_PRESSURE) {
        rating = &vessel->working_pressure;
    } else if (symbol == SYMBOL_SERVICE_PRESSURE) {
        rating = &vessel->service_pressure;
    }
    return rating != NULL && rating->given ? rating->value : (double)NAN;
}

/* ---- values of the symbols --------------------------------------------------------------------------------------- */

struct symbols {
    const struct sheet_run *run;
    double mass;
    const struct contents *contents; /* NULL: none needed */
};

static double contents_symbol(const struct symbols *symbols, enum case_symbol symbol)
{
    const struct contents *contents = symbols->contents;
    if (contents == NULL) {
        return (double)NAN;
    }
    if (symbol == SYMBOL_PRESSURE) {
        return contents->pressure;
    }
    if (symbol == SYMBOL_VAPOUR_PRESSURE) {
        return contents->edges.high_is_bubble ? contents->edges.high_pressure : (double)NAN;
    }
    if (symbol == SYMBOL_LIQUID_VOLUME) {
        return contents->liquid_fraction;
    }
    return contents->liquid_density > 0.0 ? contents->liquid_density : (double)NAN;
}

static double symbol_value(void *context, enum case_symbol symbol)
{
    const struct symbols *symbols = context;
    const struct case_vessel *vessel = symbols->run->sheet->vessel;
    const double density = symbols->mass / vessel->water_capacity.value;
    switch (symbol) {
    case SYMBOL_DENSITY:
        return density;
    case SYMBOL_FILLING_RATIO:
        return density / WATER_DENSITY_15C;
    case SYMBOL_TEST_PRESSURE:
    case SYMBOL_WORKING_PRESSURE:
    case SYMBOL_SERVICE_PRESSURE:
        return vessel_symbol(vessel, symbol);
    case SYMBOL_PRESSURE:
    case SYMBOL_VAPOUR_PRESSURE:
    case SYMBOL_LIQUID_DENSITY:
    case SYMBOL_LIQUID_VOLUME:
        return contents_symbol(symbols, symbol);
    case SYMBOLS:
        break;
    }
    return (double)NAN;
}

static bool mentions(const struct predicate *predicate, enum case_symbol symbol)
{
    return predicate->quantity == symbol || formula_mentions(predicate->bound, symbol);
}

static bool needs_contents(const struct predicate *predicate)
{
    return mentions(predicate, SYMBOL_PRESSURE) || mentions(predicate, SYMBOL_VAPOUR_PRESSURE) ||
           mentions(predicate, SYMBOL_LIQUID_DENSITY) || mentions(predicate, SYMBOL_LIQUID_VOLUME);
}

static bool lacks_rating(const struct case_vessel *vessel, const struct formula *bound)
{
    static const enum case_symbol ratings[] = {SYMBOL_TEST_PRESSURE, SYMBOL_WORKING_PRESSURE, SYMBOL_SERVICE_PRESSURE};
    for (size_t i = 0; i < sizeof ratings / sizeof *ratings; i++) {
        if (formula_mentions(bound, ratings[i]) && isnan(vessel_symbol(vessel, ratings[i]))) {
            return true;
        }
    }
    return false;
}

/* ---- the kinds of predicate -------------------------------------------------------------------------------------- */

static struct predicate_finding undecided(enum answer answer, double temperature, const char *words)
{
    return (struct predicate_finding){.answer = answer, .worst_temperature = temperature, .words = words};
}

static void decide(struct predicate_finding *finding, bool holds, double distance, const char *words, double *score)
{
    finding->holds = holds;
    finding->words = words;
    *score = holds ? fabs(distance) : -fmax(fabs(distance), DBL_MIN);
}

static void compare(struct predicate_finding *finding, const struct predicate *predicate, double value, double bound,
                    double *score)
{
    const double above = value - (bound + (predicate->bound_is_gauge ? predicate->gauge_zero : 0.0));
    bool holds = false;
    switch (predicate->relation) {
    case RELATION_LESS:
        holds = above < 0.0;
        finding->margin = -above;
        break;
    case RELATION_AT_MOST:
        holds = above <= 0.0;
        finding->margin = -above;
        break;
    case RELATION_EQUAL:
        holds = fabs(above) <= EQUAL_TOLERANCE * fabs(bound);
        finding->margin = -fabs(above);
        break;
    case RELATION_AT_LEAST:
        holds = above >= 0.0;
        finding->margin = above;
        break;
    case RELATION_GREATER:
        holds = above > 0.0;
        finding->margin = above;
        break;
    }
    finding->has_margin = true;
    finding->bound = bound;
    decide(finding, holds, finding->margin, NULL, score);
}

/* A rule on the liquid's density speaks of the liquid beside vapour: none present, it is met; nothing else present,
 * it is failed. True when that settled it. */
static bool settle_liquid_density(struct predicate_finding *finding, double *score)
{
    const struct contents *contents = &finding->worst;
    if (contents->state == VESSEL_TWO_PHASE) {
        return false;
    }
    if (contents->state == VESSEL_LIQUID_FULL) {
        decide(finding, false, log(contents->edges.high_volume / contents->molar_volume), "liquid-full", score);
        return true;
    }
    decide(finding, true, (double)INFINITY, "no liquid present", score);
    return true;
}

static struct predicate_finding compare_at(const struct sheet_run *run, const struct predicate *predicate, double mass,
                                           struct predicate_finding finding, double *score)
{
    const struct contents *contents = &finding.worst;
    if (finding.has_contents && contents->state == VESSEL_GAS &&
        (mentions(predicate, SYMBOL_LIQUID_DENSITY) || mentions(predicate, SYMBOL_LIQUID_VOLUME) ||
         mentions(predicate, SYMBOL_VAPOUR_PRESSURE))) {
        return undecided(ANSWER_CANNOT, finding.worst_temperature, "this method knows no liquid");
    }
    if (mentions(predicate, SYMBOL_VAPOUR_PRESSURE) && !contents->edges.high_is_bubble) {
        return undecided(ANSWER_CANNOT, finding.worst_temperature,
                         "not applicable: above the critical temperature there is no vapour pressure");
    }
    if (mentions(predicate, SYMBOL_LIQUID_DENSITY) && settle_liquid_density(&finding, score)) {
        return finding;
    }
    struct symbols symbols = {run, mass, finding.has_contents ? contents : NULL};
    const double value = symbol_value(&symbols, predicate->quantity);
    const double bound = formula_value(predicate->bound, symbol_value, &symbols);
    if (lacks_rating(run->sheet->vessel, predicate->bound)) {
        return undecided(ANSWER_CANNOT, finding.worst_temperature, "the vessel lacks the rating named");
    }
    if (!isfinite(value) || !isfinite(bound)) {
        return undecided(ANSWER_FAILED, finding.worst_temperature,
                         isfinite(value) ? "the bound has no value here" : "the quantity has no value here");
    }
    compare(&finding, predicate, value, bound, score);
    if (!finding.holds && predicate->quantity == SYMBOL_LIQUID_VOLUME && contents->state == VESSEL_LIQUID_FULL) {
        finding.words = "liquid-full";
    }
    return finding;
}

/* How far, in ln density, the contents lie below the dew point, or above the upper edge; infinite without one. */
static double below_dew(const struct contents *contents)
{
    return contents->edges.has_low ? log(contents->molar_volume / contents->edges.low_volume) : (double)INFINITY;
}

static double above_upper_edge(const struct contents *contents)
{
    return contents->edges.has_high ? log(contents->edges.high_volume / contents->molar_volume) : -(double)INFINITY;
}

static const char *phase_words(const struct contents *contents, bool is_pure)
{
    switch (contents->state) {
    case VESSEL_VAPOUR:
        return "vapour";
    case VESSEL_TWO_PHASE:
        return "vapour + liquid";
    case VESSEL_LIQUID_FULL:
        return "liquid-full";
    case VESSEL_SUPERCRITICAL:
    case VESSEL_GAS:
        break;
    }
    if (contents->edges.has_high) {
        return "one phase, would condense in use";
    }
    return is_pure ? "above the critical temperature" : "no dew point at this temperature";
}

/* `no liquid` asks whether any density up to the vessel's would condense: whether its density is above the dew density.
 * `one phase` asks about the vessel's own density alone. */
static struct predicate_finding phases_at(enum predicate_kind kind, bool is_pure, struct predicate_finding finding,
                                          double *score)
{
    const struct contents *contents = &finding.worst;
    if (!contents->edges.is_known) {
        return undecided(ANSWER_CANNOT, finding.worst_temperature,
                         contents->state == VESSEL_GAS ? "this method knows no liquid"
                                                       : "the dew points were not found");
    }
    const double low = below_dew(contents), high = above_upper_edge(contents);
    if (kind == PREDICATE_NO_LIQUID) {
        decide(&finding, low >= 0.0, low, phase_words(contents, is_pure), score);
    } else {
        decide(&finding, contents->phase_count == 1, fmin(fabs(low), fabs(high)), phase_words(contents, is_pure),
               score);
    }
    return finding;
}

static struct predicate_finding solid_unknown(const struct sheet_run *run, const struct case_component *component,
                                              double temperature)
{
    return undecided(
        ANSWER_CANNOT, temperature,
        !component->triple_temperature.given
            ? "the triple temperature is not given"
            : arena_format(run->arena, "below the triple point of %s, of which no solid is known", component->name));
}

/* As with liquids, every density up to the vessel's counts: its density is held against the lowest that freezes. */
static struct predicate_finding no_solid_at(const struct sheet_run *run, struct method_run *method, double mass,
                                            double temperature, double *score)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    struct predicate_finding finding = {.answer = ANSWER_OK, .worst_temperature = temperature};
    const struct case_component *unknown = frost_unknown(fluid, temperature);
    struct frost_limit limit;
    if (unknown != NULL) {
        return solid_unknown(run, unknown, temperature);
    }
    if (!frost_is_possible(fluid, method, temperature)) {
        decide(&finding, true, (double)INFINITY, "above the triple point", score);
        return finding;
    }
    const enum answer answer = frost_limit_at(fluid, method, temperature, &limit);
    if (answer != ANSWER_OK) {
        return undecided(answer, temperature, "the method gave no answer");
    }
    if (!limit.forms) {
        decide(&finding, true, limit.clearance, "no frost at any density", score);
        return finding;
    }
    const double molar_volume = run->sheet->vessel->water_capacity.value * method->molar_mass / mass;
    const double below = log(molar_volume / limit.molar_volume);
    decide(&finding, below >= 0.0, below,
           arena_format(run->arena, below >= 0.0 ? "short of frost of %s" : "frost of %s",
                        fluid->components[limit.at.component]->name),
           score);
    return finding;
}

/* ---- one temperature --------------------------------------------------------------------------------------------- */

/* More gas than the method's densest state: no pressure holds it, so every question about the contents is failed. */
static bool is_overfull(const struct sheet_run *run, const struct method_run *method, double mass, double temperature)
{
    if (fluid_set_t(method->at_t, method->fluid, temperature) != ANSWER_OK) {
        return false;
    }
    const double amount = mass / method->molar_mass;
    return run->sheet->vessel->water_capacity.value <= amount * smallest_molar_volume(method);
}

/* Whether more than pressure and density is asked for. */
static bool needs_edges(const struct predicate *predicate)
{
    return predicate->kind != PREDICATE_COMPARE || mentions(predicate, SYMBOL_VAPOUR_PRESSURE) ||
           mentions(predicate, SYMBOL_LIQUID_DENSITY) || mentions(predicate, SYMBOL_LIQUID_VOLUME);
}

static struct predicate_finding find_contents(const struct sheet_run *run, struct method_run *method,
                                              const struct predicate *predicate, double mass, double temperature,
                                              double *score)
{
    struct predicate_finding finding = {.answer = ANSWER_OK, .worst_temperature = temperature};
    const enum answer answer = needs_edges(predicate) ? contents_at(run, method, mass, temperature, &finding.worst)
                                                      : pressure_at(run, method, mass, temperature, &finding.worst);
    if (answer == ANSWER_OK) {
        finding.has_contents = true;
    } else if (answer == ANSWER_OUT_OF_RANGE && is_overfull(run, method, mass, temperature)) {
        decide(&finding, false, (double)INFINITY, "denser than any state the method knows", score);
        finding.is_overfull = true;
    } else {
        return undecided(answer, temperature, "the method gave no answer");
    }
    return finding;
}

/* `no liquid` of a mixture asks for its edges only, which saves the work of filling the vessel. That none was found is
 * no proof: what would be met by them is held against the stability test. */
static struct predicate_finding no_liquid_of_mixture(const struct sheet_run *run, struct method_run *method,
                                                     double mass, double temperature, double *score)
{
    struct predicate_finding finding = {.answer = ANSWER_OK, .worst_temperature = temperature};
    enum answer answer = density_beside_edges(run, method, mass, temperature, &finding.worst);
    if (answer == ANSWER_OK && below_dew(&finding.worst) >= 0.0) {
        answer = mixture_prove_edges(method, finding.worst.molar_volume);
        answer = answer == ANSWER_OK ? density_beside_edges(run, method, mass, temperature, &finding.worst) : answer;
    }
    return answer == ANSWER_OK || answer == ANSWER_CANNOT ? phases_at(PREDICATE_NO_LIQUID, false, finding, score)
                                                          : undecided(answer, temperature, "the method gave no answer");
}

struct predicate_finding predicate_at(const struct sheet_run *run, struct method_run *method,
                                      const struct predicate *predicate, double mass, double temperature, double *score)
{
    *score = 0.0;
    if (predicate->kind == PREDICATE_NO_SOLID) {
        return no_solid_at(run, method, mass, temperature, score);
    }
    if (predicate->kind == PREDICATE_NO_LIQUID && method->mixture != NULL) {
        return no_liquid_of_mixture(run, method, mass, temperature, score);
    }
    struct predicate_finding finding = {.answer = ANSWER_OK, .worst_temperature = temperature};
    if (predicate->kind != PREDICATE_COMPARE || needs_contents(predicate)) {
        finding = find_contents(run, method, predicate, mass, temperature, score);
        if (finding.answer != ANSWER_OK || !finding.has_contents) {
            return finding;
        }
    }
    if (predicate->kind == PREDICATE_COMPARE) {
        return compare_at(run, predicate, mass, finding, score);
    }
    return phases_at(predicate->kind, method->mixture == NULL, finding, score);
}

/* So much short of the bubble density, relative, a vessel holds liquid and a trace of vapour. */
#define SHORT_OF_FULL 1e-9

struct predicate_finding predicate_check_fluid(const struct sheet_run *run, struct method_run *method,
                                               const struct predicate *predicate)
{
    struct phase_edges edges;
    const enum answer answer = edges_at(method, predicate->from, &edges);
    if (answer != ANSWER_OK || !edges.high_is_bubble) {
        return undecided(answer == ANSWER_OK ? ANSWER_CANNOT : answer, predicate->from,
                         answer == ANSWER_OK ? "not applicable: the fluid has no bubble point there"
                                             : "the method gave no answer");
    }
    const double full = run->sheet->vessel->water_capacity.value * method->molar_mass / edges.high_volume;
    return predicate_check(run, method, predicate, full * (1.0 - SHORT_OF_FULL));
}

/* ---- a range of temperatures ------------------------------------------------------------------------------------- */

struct range_search {
    const struct sheet_run *run;
    struct method_run *method;
    const struct predicate *predicate;
    double mass;
    struct predicate_finding undecided; /* the one that ended the search */
};

static enum answer score_at_temperature(void *context, double temperature, double *score)
{
    struct range_search *search = context;
    const struct predicate_finding finding =
        predicate_at(search->run, search->method, search->predicate, search->mass, temperature, score);
    if (finding.answer != ANSWER_OK) {
        search->undecided = finding;
    }
    return finding.answer;
}

struct predicate_finding predicate_check(const struct sheet_run *run, struct method_run *method,
                                         const struct predicate *predicate, double mass)
{
    double worst = predicate->from, score;
    if (predicate->to > predicate->from) {
        struct range_search search = {.run = run, .method = method, .predicate = predicate, .mass = mass};
        const struct search_function function = {score_at_temperature, &search};
        const enum answer answer =
            search_least(&function, predicate->from, predicate->to, RANGE_STEP, RANGE_TOLERANCE, &worst, &score);
        if (search.undecided.answer != ANSWER_OK) {
            return search.undecided;
        }
        if (answer != ANSWER_OK) {
            return undecided(answer, worst, "the worst temperature was not found");
        }
    }
    return predicate_at(run, method, predicate, mass, worst, &score);
}
