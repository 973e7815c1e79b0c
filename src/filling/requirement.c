#include "filling/requirement.h"

#include <math.h>
#include <string.h>

#define SETTLED_TEMPERATURE 288.15 /* K: where working pressures are stated */

/* ---- looks and words --------------------------------------------------------------------------------------------- */

struct look look_pressure_difference(const struct sheet_run *run)
{
    /* Units whose symbol with `a` or `g` at its end names a pressure with a zero, and without it a difference. */
    static const char *const plain[] = {"bar", "psi", "kPa", "MPa"};
    struct look look = look_pressure(run);
    look.shown.offset = 0.0;
    const size_t length = strlen(look.shown.symbol);
    for (size_t i = 0; i < sizeof plain / sizeof *plain; i++) {
        if (length == strlen(plain[i]) + 1 && strncmp(look.shown.symbol, plain[i], length - 1) == 0) {
            look.shown.symbol = plain[i];
        }
    }
    return look;
}

struct look look_predicate_margin(const struct sheet_run *run, const struct predicate *predicate)
{
    switch (predicate->quantity) {
    case SYMBOL_DENSITY:
    case SYMBOL_LIQUID_DENSITY:
        return look_density(run);
    case SYMBOL_LIQUID_VOLUME:
        return look_percent(1);
    case SYMBOL_FILLING_RATIO:
        return look_ratio(4);
    case SYMBOL_PRESSURE:
    case SYMBOL_VAPOUR_PRESSURE:
    case SYMBOL_TEST_PRESSURE:
    case SYMBOL_WORKING_PRESSURE:
    case SYMBOL_SERVICE_PRESSURE:
    case SYMBOLS:
        break;
    }
    return look_pressure_difference(run);
}

const char *temperature_words(const struct sheet_run *run, double temperature)
{
    const struct look look = look_temperature(run);
    const double shown = round(look_shown(&look, temperature) * 100.0) / 100.0;
    return arena_format(run->arena, "%.6g %s", shown, look.shown.symbol);
}

const char *margin_words(const struct sheet_run *run, const struct predicate *predicate,
                         const struct predicate_finding *finding)
{
    if (finding->words != NULL) {
        return finding->words;
    }
    if (!finding->has_margin) {
        return "no margin to tell";
    }
    return arena_format(run->arena, "by %s",
                        shown_text(run, look_predicate_margin(run, predicate), fabs(finding->margin)));
}

size_t deck_line(const struct sheet_run *run, struct location at)
{
    const bool is_own = run->tree->deck != NULL && at.file == run->tree->deck->root;
    return location_line(is_own ? at : run->sheet->at);
}

/* ---- requirements ------------------------------------------------------------------------------------------------ */

/* A bound missed by no more than this part of it is met: a vessel filled to a rating keeps it, whatever the last digits
 * of the solution say. */
#define BOUND_TOLERANCE 1e-9

static bool is_at_its_bound(const struct predicate_finding *finding)
{
    return finding->has_margin && !(finding->margin < -BOUND_TOLERANCE * fabs(finding->bound));
}

static enum requirement_state state_of(const struct predicate_finding *finding)
{
    if (finding->answer != ANSWER_OK) {
        return REQUIREMENT_UNDECIDED;
    }
    return finding->holds || is_at_its_bound(finding) ? REQUIREMENT_MET : REQUIREMENT_NOT_MET;
}

struct requirement *add_requirement(const struct sheet_run *run, const struct method_run *method, const char *text,
                                    const struct predicate *predicate, const struct predicate_finding *finding)
{
    struct requirement *requirement = sheet_add_requirement(run->result, run->out, text);
    requirement->state = state_of(finding);
    requirement->reason = finding->words;
    requirement->has_margin = finding->answer == ANSWER_OK && finding->has_margin;
    requirement->margin = requirement->state == REQUIREMENT_MET ? fmax(finding->margin, 0.0) : finding->margin;
    requirement->look = look_predicate_margin(run, predicate);
    requirement->has_worst_temperature = true;
    requirement->worst_temperature = finding->worst_temperature;
    requirement->temperature_look = look_temperature(run);
    requirement->line = deck_line(run, predicate->at);
    requirement->method = method->name;
    return requirement;
}

bool method_governs(const struct method_run *method)
{
    return method->fluid != NULL && method->may_govern && (method->fluid->ops->capabilities & IS_FOR_COMPARISON) == 0;
}

/* Worse: not met before undecided before met; among equals the smaller margin. */
static bool is_worse(const struct predicate_finding *left, const struct predicate_finding *right)
{
    static const int rank[] = {[REQUIREMENT_MET] = 0, [REQUIREMENT_UNDECIDED] = 1, [REQUIREMENT_NOT_MET] = 2};
    const int left_rank = rank[state_of(left)], right_rank = rank[state_of(right)];
    if (left_rank != right_rank) {
        return left_rank > right_rank;
    }
    return left->has_margin && right->has_margin && left->margin < right->margin;
}

/* A pressure outside the method's range is shown in the margin, so it is warned of. */
static struct predicate_finding check_by(const struct sheet_run *run, struct method_run *method,
                                         const struct predicate *predicate, double mass)
{
    if (method->fluid == NULL) {
        return (struct predicate_finding){.answer = ANSWER_CANNOT,
                                          .worst_temperature = predicate->from,
                                          .words = "the method has no data for this gas"};
    }
    const struct predicate_finding finding = predicate_check(run, method, predicate, mass);
    if (finding.has_contents) {
        warn_outside_range(run, method, finding.worst_temperature, finding.worst.pressure);
    }
    return finding;
}

struct requirement *require_predicate(struct sheet_run *run, const char *text, const struct predicate *predicate,
                                      double mass, double from, double to)
{
    struct predicate ranged = *predicate;
    if (!predicate->has_temperature) {
        ranged.from = from;
        ranged.to = to;
    }
    const struct method_run *method = &run->methods[0];
    struct predicate_finding finding = check_by(run, &run->methods[0], &ranged, mass);
    for (size_t i = 1; i < run->method_count && run->sheet->methods.govern == GOVERN_STRICTEST; i++) {
        if (!method_governs(&run->methods[i])) {
            continue;
        }
        const struct predicate_finding other = check_by(run, &run->methods[i], &ranged, mass);
        if (is_worse(&other, &finding)) {
            finding = other;
            method = &run->methods[i];
        }
    }
    return add_requirement(run, method, text == NULL ? predicate->written : text, &ranged, &finding);
}

/* ---- ratings ----------------------------------------------------------------------------------------------------- */

static struct predicate rating_predicate(const struct sheet_run *run, const struct quantity *rating, const char *name)
{
    struct formula *bound = arena_alloc(run->arena, 1, sizeof *bound);
    *bound = (struct formula){.kind = FORMULA_NUMBER, .number = rating->value};
    return (struct predicate){
        .kind = PREDICATE_COMPARE,
        .from = SETTLED_TEMPERATURE,
        .to = SETTLED_TEMPERATURE,
        .has_temperature = true,
        .quantity = SYMBOL_PRESSURE,
        .relation = RELATION_AT_MOST,
        .bound = bound,
        .bound_is_gauge = true,
        .gauge_zero = STANDARD_ATMOSPHERE,
        .written = arena_format(run->arena, "at 15 degC pressure <= %s", name),
        .at = rating->origin.at,
        .temperature_unit = {"degC", 1.0, 273.15},
    };
}

const struct predicate *rating_predicates(const struct sheet_run *run, size_t *count)
{
    const struct case_vessel *vessel = run->sheet->vessel;
    struct predicate *all = arena_alloc(run->arena, vessel->fitting_count + 1, sizeof *all);
    *count = 0;
    if (vessel->working_pressure.given) {
        all[(*count)++] = rating_predicate(run, &vessel->working_pressure, "working-pressure");
    }
    for (size_t i = 0; i < vessel->fitting_count; i++) {
        const struct case_rating *fitting = &vessel->fittings[i];
        all[(*count)++] = rating_predicate(
            run, &fitting->pressure,
            arena_format(run->arena, "%s (%s)",
                         fitting->pressure.origin.written == NULL ? "the rating" : fitting->pressure.origin.written,
                         fitting->name));
    }
    return all;
}
