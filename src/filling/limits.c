/* The limit of each criterion by each method, and which of them governs. */
#include "filling/permissible_internal.h"

#include "filling/classify.h"
#include "filling/requirement.h"

#include <math.h>
#include <string.h>

/* A limit found this little (in steps) below a multiple of the rounding step is that multiple: limits are found to
 * 1e-10 from below, and a listed 0.75 must not become 0.74. */
#define ROUNDING_SLACK 1e-7

double ratio_of_mass(const struct sheet_run *run, double mass)
{
    return mass / run->sheet->vessel->water_capacity.value / WATER_DENSITY_15C;
}

double mass_of_ratio(const struct sheet_run *run, double ratio)
{
    return ratio * WATER_DENSITY_15C * run->sheet->vessel->water_capacity.value;
}

/* Steps as 0.01 are not exact in binary: where the step is one over a whole number, divide by that. */
static double rounded_down(double ratio, double step)
{
    const double steps = floor(ratio / step + ROUNDING_SLACK);
    const double per_one = round(1.0 / step);
    return fabs(per_one * step - 1.0) < ROUNDING_SLACK ? steps / per_one : steps * step;
}

static double rounded_mass(const struct sheet_run *run, double mass, double step)
{
    return step > 0.0 ? mass_of_ratio(run, rounded_down(ratio_of_mass(run, mass), step)) : mass;
}

/* ---- one method -------------------------------------------------------------------------------------------------- */

/* A listed filling ratio is a mass at once: searching for it would only lose its last digits. */
static struct criterion_limit listed_limit(const struct permissible *sheet)
{
    const double mass = mass_of_ratio(sheet->run, sheet->listed.filling_ratio);
    return (struct criterion_limit){
        .answer = ANSWER_OK, .mass = mass, .rounded = mass, .finding = {.answer = ANSWER_OK, .holds = true}};
}

/* An entry's limit asks about the fluid: kept, it limits no charge, and missed, it allows none. */
static struct criterion_limit entry_limit(const struct permissible *sheet, struct method_run *method,
                                          const struct criterion *criterion, double most)
{
    struct criterion_limit limit = {.finding = predicate_check_fluid(sheet->run, method, criterion->predicate)};
    limit.answer = limit.finding.answer;
    limit.is_unlimited = limit.answer == ANSWER_OK && limit.finding.holds;
    limit.mass = limit.rounded = limit.is_unlimited ? most : 0.0;
    return limit;
}

static struct criterion_limit limit_of(const struct permissible *sheet, struct method_run *method,
                                       const struct criterion *criterion, double most)
{
    if (criterion->kind == CRITERION_LISTED && sheet->listed.has_ratio) {
        return listed_limit(sheet);
    }
    if (criterion->kind == CRITERION_ENTRY) {
        return entry_limit(sheet, method, criterion, most);
    }
    struct criterion_limit limit = {0};
    limit.answer = predicate_largest_mass(sheet->run, method, criterion->predicate, most, &limit.mass,
                                          &limit.is_unlimited, &limit.finding);
    limit.rounded = limit.mass;
    if (limit.answer == ANSWER_OK && !limit.is_unlimited) {
        limit.rounded = rounded_mass(sheet->run, limit.mass, criterion->round_to);
    }
    return limit;
}

/* Less by the rounded mass, among equals by the mass as found. */
static bool allows_less(const struct criterion_limit *left, const struct criterion_limit *right)
{
    if (left->rounded < right->rounded) {
        return true;
    }
    return !(left->rounded > right->rounded) && left->mass < right->mass;
}

static void take_least(struct choice *choice, const struct criterion_limit *limits, size_t index)
{
    if (!choice->given || allows_less(&limits[index], &limits[choice->index])) {
        *choice = (struct choice){true, index};
    }
}

static bool binds(const struct criterion *criterion)
{
    return !criterion->is_replaced && !criterion->is_shown_only;
}

static void rank_limits(const struct permissible *sheet, struct method_limits *of)
{
    of->is_decided = true;
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct criterion *criterion = &sheet->criteria[i];
        if (of->limits[i].answer != ANSWER_OK) {
            if (binds(criterion) && of->is_decided) {
                of->is_decided = false;
                of->undecided = (struct choice){true, i};
            }
            continue;
        }
        if (of->limits[i].is_unlimited) {
            continue;
        }
        if (binds(criterion)) {
            take_least(&of->permitted, of->limits, i);
        }
        if (criterion->kind != CRITERION_LISTED) {
            take_least(&of->computed, of->limits, i);
        }
        if (criterion->is_of_listed_rule) {
            take_least(&of->ruled, of->limits, i);
        }
        if (criterion->predicate->unless_listed) {
            take_least(&of->replaced, of->limits, i);
        }
    }
}

/* A number shown is warned of where it lies outside the method's range, whether it governs or not. */
static bool lies_within_range(const struct permissible *sheet, const struct method_limits *of, struct choice choice)
{
    if (!choice.given || !of->limits[choice.index].finding.has_contents) {
        return true;
    }
    const struct predicate_finding *finding = &of->limits[choice.index].finding;
    return warn_outside_range(sheet->run, of->method, finding->worst_temperature, finding->worst.pressure);
}

static void find_limits_by(const struct permissible *sheet, struct method_run *method, struct method_limits *of)
{
    if (method->fluid == NULL) {
        return;
    }
    *of = (struct method_limits){.method = method};
    of->limits = arena_alloc(sheet->run->arena, sheet->criterion_count, sizeof *of->limits);
    const double most = predicate_most_mass(sheet->run, method);
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        of->limits[i] = limit_of(sheet, method, &sheet->criteria[i], most);
    }
    rank_limits(sheet, of);
    const bool computed_within = lies_within_range(sheet, of, of->computed);
    of->is_within_range = lies_within_range(sheet, of, of->permitted) && computed_within;
}

/* ---- which governs ----------------------------------------------------------------------------------------------- */

static bool may_govern(const struct method_limits *of)
{
    return of->method != NULL && method_governs(of->method) && of->is_decided && of->permitted.given;
}

/* The strictest of those within their range; where none is, the lead alone, with the warning already given. */
static struct choice strictest(const struct permissible *sheet)
{
    struct choice choice = {0};
    for (size_t m = 0; m < sheet->run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        if (!may_govern(of) || !of->is_within_range) {
            continue;
        }
        const struct method_limits *best = &sheet->by_method[choice.index];
        if (!choice.given || allows_less(&of->limits[of->permitted.index], &best->limits[best->permitted.index])) {
            choice = (struct choice){true, m};
        }
    }
    return choice;
}

void find_limits(struct permissible *sheet)
{
    struct sheet_run *run = sheet->run;
    sheet->by_method = arena_alloc(run->arena, run->method_count, sizeof *sheet->by_method);
    for (size_t m = 0; m < run->method_count; m++) {
        find_limits_by(sheet, &run->methods[m], &sheet->by_method[m]);
    }
    if (run->sheet->methods.govern == GOVERN_STRICTEST) {
        sheet->governing = strictest(sheet);
    }
    if (!sheet->governing.given && may_govern(&sheet->by_method[0])) {
        sheet->governing = (struct choice){true, 0};
    }
    if (sheet->governing.given) {
        sheet->mass = governing_limit(sheet)->rounded;
    }
}

const struct criterion_limit *governing_limit(const struct permissible *sheet)
{
    const struct method_limits *of = &sheet->by_method[sheet->governing.index];
    return &of->limits[of->permitted.index];
}

const struct criterion *governing_criterion(const struct permissible *sheet)
{
    return &sheet->criteria[sheet->by_method[sheet->governing.index].permitted.index];
}

struct method_run *governing_method(const struct permissible *sheet)
{
    return sheet->by_method[sheet->governing.index].method;
}

bool is_cubic(const struct method_run *method)
{
    return method->fluid != NULL && (method->fluid->ops->capabilities & IS_CUBIC) != 0;
}

/* Whether a method better than a cubic allows the charge as well: then the cubic does not stand alone. */
static bool is_supported(const struct permissible *sheet)
{
    for (size_t m = 0; m < sheet->run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        if (may_govern(of) && of->is_within_range && !is_cubic(of->method) &&
            of->limits[of->permitted.index].rounded >= sheet->mass) {
            return true;
        }
    }
    return false;
}

/* Liquefied as its rules say; a pure gas also as it then lies in the vessel. A mixture with liquid at -50 degC may be
 * filled to a dew point far from any liquid density. */
static bool is_liquefied_charge(const struct permissible *sheet)
{
    return sheet->is_by_ratio ||
           (sheet->run->sheet->fluid->count == 1 &&
            class_is_liquefied(classify_charge(sheet->run, governing_method(sheet), sheet->mass)));
}

bool is_indicative(const struct permissible *sheet)
{
    return sheet->governing.given && is_cubic(governing_method(sheet)) &&
           governing_criterion(sheet)->kind != CRITERION_LISTED && !is_supported(sheet) && is_liquefied_charge(sheet);
}
