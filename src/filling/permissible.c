/* The permissible-charge sheet: how much of a gas may go into a vessel, under which rule, and what it then does. */
#include "filling/charge_facts.h"
#include "filling/classify.h"
#include "filling/contents_table.h"
#include "filling/dew_limit.h"
#include "filling/frost_told.h"
#include "filling/hand_check.h"
#include "filling/permissible_internal.h"
#include "filling/requirement.h"
#include "filling/sensitivities.h"
#include "filling/stepwise.h"

#include <math.h>
#include <string.h>

/* Where no pressures are quoted, K: the base of settled pressures, that of low-pressure filling, the hot day. */
static const double DEFAULT_QUOTES[] = {288.15, 323.15, 338.15};

#define SETTLED_TEMPERATURE 288.15 /* K */

/* Headlines stand on the first page: a deck with more charges than this has them in its sheets. */
enum { MOST_HEADLINES = 4 };

/* ---- headlines --------------------------------------------------------------------------------------------------- */

static size_t charges_asked(const struct case_tree *tree)
{
    size_t count = 0;
    for (size_t i = 0; i < tree->sheet_count; i++) {
        count += tree->sheets[i].kind == SHEET_PERMISSIBLE_CHARGE;
    }
    return count;
}

static void add_headline(const struct sheet_run *run, const char *text)
{
    struct line_list *lines = &run->result->headlines;
    const size_t asked = charges_asked(run->tree);
    if (asked == 1) {
        line_list_add(run->result, lines, "%s", text);
    } else if (asked <= MOST_HEADLINES) {
        line_list_add(run->result, lines, "%s: %s",
                      run->sheet->title == NULL ? run->sheet->fluid->name : run->sheet->title, text);
    } else if (lines->count == 0) {
        line_list_add(run->result, lines, "%zu charges asked for: one in each sheet", asked);
    }
}

/* ---- gases that get no charge ------------------------------------------------------------------------------------ */

static void tell_no_charge(const struct sheet_run *run, enum requirement_state state, const char *reason)
{
    sheet_add_note(run->result, run->out, "no permitted charge: %s", reason);
    struct requirement *requirement =
        sheet_add_requirement(run->result, run->out, "there is a charge that may be filled");
    requirement->state = state;
    requirement->reason = reason;
    requirement->line = location_line(run->sheet->at);
    add_headline(run, "no permitted charge");
}

static void warn_of_polymerisation(const struct sheet_run *run)
{
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        if ((run->sheet->fluid->components[i]->hazards & HAZARD_POLYMERISES) != 0) {
            result_warn(run->result, CODE_W333, location_line(run->sheet->at), run->number,
                        "%s may polymerise: the charge holds for stabilised gas only, and heat set free by the "
                        "reaction was not computed",
                        run->sheet->fluid->components[i]->name);
        }
    }
}

/* True when the sheet ends here. An assessment is quoted, never judged. */
static bool refuses(const struct sheet_run *run)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    const char *needed = fluid->assessment;
    const char *reason = fluid->refuse == NULL ? NULL : arena_format(run->arena, "%s: %s", fluid->name, fluid->refuse);
    if (reason == NULL && needed != NULL && run->sheet->assessed == NULL) {
        reason = arena_format(run->arena, "%s; the sheet names no assessment", needed);
    }
    if (reason != NULL) {
        result_warn(run->result, CODE_W324, location_line(run->sheet->at), run->number, "%s", reason);
        tell_no_charge(run, REQUIREMENT_NOT_MET, reason);
        return true;
    }
    if (run->sheet->assessed != NULL) {
        sheet_add_note(run->result, run->out, "assessed: \"%s\"", run->sheet->assessed);
        if (needed != NULL) {
            result_warn(run->result, CODE_W329, location_line(run->sheet->at), run->number, "%s; assessed in \"%s\"",
                        needed, run->sheet->assessed);
        }
    }
    return false;
}

/* ---- sheets without a limit -------------------------------------------------------------------------------------- */

static const char *words_of_answer(const struct criterion_limit *limit)
{
    return limit->finding.words != NULL ? limit->finding.words : "the method gave no answer";
}

/* Why the method asked to govern has no limit. */
static void tell_undecided(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct method_limits *lead = &sheet->by_method[0];
    const char *name = run->methods[0].name;
    const char *reason = arena_format(run->arena, "%s never governs", name);
    enum code code = CODE_W326;
    if (lead->method == NULL) {
        reason = arena_format(run->arena, "%s lacks data for this gas", name);
    } else if (!lead->is_decided) {
        const struct criterion *criterion = &sheet->criteria[lead->undecided.index];
        reason = arena_format(run->arena, "'%s' by %s: %s", criterion->predicate->written, name,
                              words_of_answer(&lead->limits[lead->undecided.index]));
        code = lead->limits[lead->undecided.index].answer == ANSWER_CANNOT ? CODE_W328 : CODE_W326;
    } else if (!lead->permitted.given) {
        reason = "no criterion limits the charge";
        code = CODE_W332;
    }
    result_warn(run->result, code, location_line(run->sheet->at), run->number, "%s: %s", run->sheet->fluid->name,
                reason);
    tell_no_charge(run, REQUIREMENT_UNDECIDED, reason);
}

/* A larger charge is permitted only where every smaller one is too; a window above is told, no more. */
static void warn_of_windows(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct method_limits *of = &sheet->by_method[sheet->governing.index];
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct criterion_limit *limit = &of->limits[i];
        if (limit->answer == ANSWER_OK && limit->finding.has_window) {
            result_warn(run->result, CODE_W327, location_line(run->sheet->at), run->number,
                        "'%s' would be met%s by larger charges, as %s (%s)", sheet->criteria[i].predicate->written,
                        limit->mass > 0.0 ? " again" : "", shown_text(run, look_mass(run), limit->finding.window),
                        of->method->name);
        }
    }
}

static void tell_nothing_allowed(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct criterion *criterion = governing_criterion(sheet);
    const struct criterion_limit *limit = governing_limit(sheet);
    const char *found = margin_words(run, criterion->predicate, &limit->finding);
    const char *by = limit->finding.has_window ? "by the smallest charges already" : "whatever the charge";
    const char *reason =
        limit->mass > 0.0
            ? arena_format(run->arena, "the limit of '%s', filling ratio %.6f, rounds down to nothing by steps of %g",
                           criterion->predicate->written, ratio_of_mass(run, limit->mass), criterion->round_to)
            : arena_format(run->arena, "'%s' is missed at %s %s: %s", criterion->predicate->written,
                           temperature_words(run, limit->finding.worst_temperature), by, found);
    tell_no_charge(run, REQUIREMENT_NOT_MET, reason);
    warn_of_windows(sheet);
}

/* ---- the permitted charge ---------------------------------------------------------------------------------------- */

static void warn_of_class(const struct permissible *sheet, enum filling_class of)
{
    const struct sheet_run *run = sheet->run;
    for (size_t i = 0; i < run->sheet->rule_count; i++) {
        const struct case_rule *rule = run->sheet->rules[i];
        if (rule->meant_for != CLASS_NONE && of != CLASS_NONE && rule->meant_for != of) {
            result_warn(run->result, CODE_W323, location_line(run->sheet->at), run->number,
                        "rule %s is meant for a %s; as filled, %s is a %s", rule->name, class_words(rule->meant_for),
                        run->sheet->fluid->name, class_words(of));
        }
    }
}

static void warn_if_indicative(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    if (is_indicative(sheet)) {
        result_warn(run->result, CODE_W325, location_line(run->sheet->at), run->number,
                    "%s: the charge rests on %s alone: indicative, not for filling", run->sheet->fluid->name,
                    governing_method(sheet)->name);
    }
}

/* What a compressed gas is filled to. */
static void add_settled_pressure(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    struct method_run *method = governing_method(sheet);
    struct contents contents;
    if (!sheet->is_by_ratio && contents_at(run, method, sheet->mass, SETTLED_TEMPERATURE, &contents) == ANSWER_OK) {
        struct fact *fact =
            sheet_add_fact(run->result, run->out, "settled-gauge-pressure", contents.pressure, look_gauge(run));
        fact->method = method->name;
        fact->remark = "at 15 degC";
    }
}

/* A listed row's mass is the row's own; a computed one is the method's, rounded as its criterion says. */
static struct mass_basis basis_of_permitted(const struct permissible *sheet)
{
    const struct criterion *criterion = governing_criterion(sheet);
    if (criterion->kind == CRITERION_LISTED && sheet->listed.has_ratio) {
        return (struct mass_basis){.source = listed_source(sheet)};
    }
    struct mass_basis basis = {.method = governing_method(sheet)->name};
    if (criterion->round_to > 0.0) {
        basis.ratio_remark = arena_format(sheet->run->arena, "rounded down to a multiple of %g", criterion->round_to);
    }
    return basis;
}

static void tell_governing(const struct permissible *sheet, size_t criterion, const struct criterion_limit *limit)
{
    const struct sheet_run *run = sheet->run;
    struct method_run *method = governing_method(sheet);
    const double temperature = limit->finding.worst_temperature;
    sheet_add_words(run->result, run->out, "governing-method", method->name);
    sheet_add_fact(run->result, run->out, "governing-temperature", temperature, look_temperature(run))->method =
        method->name;
    const char *condensing = sheet->criteria[criterion].predicate->kind == PREDICATE_NO_LIQUID
                                 ? condensing_component(run, method, temperature)
                                 : NULL;
    if (condensing != NULL) {
        sheet_add_words(run->result, run->out, "governing-component", condensing)->method = method->name;
    }
}

static void tell_charge(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    struct method_run *method = governing_method(sheet);
    const struct criterion_limit *limit = governing_limit(sheet);
    const size_t criterion = sheet->by_method[sheet->governing.index].permitted.index;
    const struct choice computed = sheet->by_method[sheet->governing.index].computed;
    sheet_begin_facts(run->result, run->out,
                      is_indicative(sheet) ? "indicative charge, not for filling" : "permitted charge");
    add_charge_facts(run, method, sheet->mass, basis_of_permitted(sheet));
    if (computed.given) {
        struct fact *fact = sheet_add_fact(
            run->result, run->out, "filling-ratio-unrounded",
            ratio_of_mass(run, sheet->by_method[sheet->governing.index].limits[computed.index].mass), look_ratio(4));
        fact->method = method->name;
        fact->remark = "least of all computed limits";
    }
    add_settled_pressure(sheet);
    sheet_add_words(run->result, run->out, "governed-by", governed_by(sheet, criterion, limit));
    sheet_add_words(run->result, run->out, "governing-criterion", sheet->criteria[criterion].predicate->written);
    if (sheet->criteria[criterion].kind != CRITERION_LISTED) {
        tell_governing(sheet, criterion, limit);
    }
    add_liquid_end(run, method, sheet->mass);
    warn_of_class(sheet, classify_charge(run, method, sheet->mass));
    warn_of_windows(sheet);
    warn_if_indicative(sheet);
}

static const char *governed_in_words(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct criterion *criterion = governing_criterion(sheet);
    if (criterion->kind == CRITERION_LISTED) {
        return arena_format(run->arena, "the listed row (%s)", listed_words(sheet));
    }
    return arena_format(run->arena, "%s at %s (%s)", criterion->name,
                        temperature_words(run, governing_limit(sheet)->finding.worst_temperature),
                        governing_method(sheet)->name);
}

/* Two decimals as the tables have, more where the ratio has more. */
static const char *ratio_words(const struct sheet_run *run, double ratio)
{
    const double hundredths = ratio * 100.0;
    return arena_format(run->arena, fabs(hundredths - round(hundredths)) < 1e-6 ? "%.2f" : "%.4f", ratio);
}

static void tell_headline(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const char *opening = is_indicative(sheet) ? "indicative, not for filling: charge" : "permitted charge";
    const char *amount =
        arena_format(run->arena, "filling ratio %s", ratio_words(run, ratio_of_mass(run, sheet->mass)));
    struct contents contents;
    if (!sheet->is_by_ratio &&
        contents_at(run, governing_method(sheet), sheet->mass, SETTLED_TEMPERATURE, &contents) == ANSWER_OK) {
        amount = arena_format(run->arena, "%s at 15 degC", shown_text(run, look_gauge(run), contents.pressure));
    }
    add_headline(run, arena_format(run->arena, "%s %s, %s, governed by %s", opening,
                                   shown_text(run, look_mass(run), sheet->mass), amount, governed_in_words(sheet)));
}

/* ---- pressures of the permitted charge --------------------------------------------------------------------------- */

static void tell_pressures(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    struct method_run *method = governing_method(sheet);
    const double *quotes = DEFAULT_QUOTES;
    size_t count = sizeof DEFAULT_QUOTES / sizeof *DEFAULT_QUOTES;
    if (run->sheet->quote_count > 0) {
        quotes = run->sheet->quotes;
        count = run->sheet->quote_count;
    }
    double *temperatures = arena_alloc(run->arena, count + 1, sizeof *temperatures);
    memcpy(temperatures, quotes, count * sizeof *quotes);
    const struct liquid_end_found found = find_liquid_end(run, method, sheet->mass);
    count = sorted_temperatures(temperatures, count);
    if (found.end == LIQUID_END_FULL && found.temperature < temperatures[count - 1]) {
        temperatures[count] = found.temperature;
        count = sorted_temperatures(temperatures, count + 1);
    }
    struct table *table = contents_table_begin(run, "settled pressure of the permitted charge", method->name);
    table->csv = run->sheet->temperatures.given ? NULL : run->sheet->table_csv;
    for (size_t i = 0; i < count; i++) {
        contents_table_row(run, table, method, sheet->mass, temperatures[i]);
    }
}

/* ---- requirements ------------------------------------------------------------------------------------------------ */

static const char *requirement_words(const struct permissible *sheet, const struct criterion *criterion)
{
    if (criterion->kind == CRITERION_RATING) {
        return criterion->predicate->written;
    }
    return arena_format(sheet->run->arena, "%s: %s", criterion->name, criterion->predicate->written);
}

/* A criterion that a listed row replaces is met by the row; what the computation says of it stands beside, in words. */
static void tell_replaced(const struct permissible *sheet, struct requirement *requirement,
                          const struct criterion *criterion, const struct predicate_finding *finding)
{
    const struct sheet_run *run = sheet->run;
    const char *computed = "no answer";
    if (finding->answer == ANSWER_OK) {
        computed = arena_format(run->arena, "%s, %s", finding->holds ? "met" : "not met",
                                margin_words(run, criterion->predicate, finding));
    }
    requirement->state = REQUIREMENT_MET;
    requirement->reason =
        arena_format(run->arena, "met by the listed row %s; computed: %s", listed_words(sheet), computed);
}

static void tell_requirements(const struct permissible *sheet)
{
    struct sheet_run *run = sheet->run;
    const double mass = run->held_mass > 0.0 ? run->held_mass : sheet->mass;
    run->found_mass = sheet->mass;
    run->found_is_limit = !sheet->is_by_ratio && governing_criterion(sheet)->kind != CRITERION_LISTED;
    struct method_run *method =
        run->methods[0].fluid != NULL && method_governs(&run->methods[0]) ? &run->methods[0] : governing_method(sheet);
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct criterion *criterion = &sheet->criteria[i];
        if (criterion->kind == CRITERION_LISTED) {
            continue;
        }
        const struct predicate_finding finding = criterion->kind == CRITERION_ENTRY
                                                     ? predicate_check_fluid(run, method, criterion->predicate)
                                                     : predicate_check(run, method, criterion->predicate, mass);
        struct requirement *requirement =
            add_requirement(run, method, requirement_words(sheet, criterion), criterion->predicate, &finding);
        if (criterion->is_replaced) {
            tell_replaced(sheet, requirement, criterion, &finding);
        }
    }
    const struct case_sheet *asked = run->sheet;
    for (size_t i = 0; i < asked->requirement_count; i++) {
        const bool is_swept = asked->temperatures.given && asked->temperatures.count > 0;
        require_predicate(run, NULL, &asked->requirements[i], mass,
                          is_swept ? asked->temperatures.values[0] : SETTLED_TEMPERATURE,
                          is_swept ? asked->temperatures.values[asked->temperatures.count - 1] : SETTLED_TEMPERATURE);
    }
}

/* ---- the hand check ---------------------------------------------------------------------------------------------- */

/* The comparison that sets the limit, where it is not of pressures. */
static void check_comparison(const struct permissible *sheet, struct hand_check *check,
                             const struct criterion *criterion, const struct criterion_limit *limit)
{
    const struct sheet_run *run = sheet->run;
    if (criterion->predicate->kind != PREDICATE_COMPARE || !limit->finding.has_margin) {
        return;
    }
    if (criterion->predicate->quantity == SYMBOL_PRESSURE && criterion->predicate->bound_is_gauge) {
        const double zero = criterion->predicate->gauge_zero;
        hand_check_gauge(run, check, limit->finding.worst.pressure, zero,
                         limit->finding.worst.pressure - zero + limit->finding.margin);
    } else if (criterion->predicate->quantity == SYMBOL_DENSITY) {
        const double density = limit->mass / run->sheet->vessel->water_capacity.value;
        hand_check_line(run->result, check, "density = m / V = %.10g kg/m3, allowed %.10g kg/m3", density,
                        density + limit->finding.margin);
    }
}

static void check_limit(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct criterion *criterion = governing_criterion(sheet);
    const struct criterion_limit *limit = governing_limit(sheet);
    struct method_run *method = governing_method(sheet);
    struct hand_check *check = sheet_add_hand_check(
        run->result, run->out,
        arena_format(run->arena, "the limit of '%s', %s", criterion->predicate->written, method->name));
    hand_check_amount(run, check, limit->mass);
    if (method->mixture != NULL && criterion->predicate->kind == PREDICATE_NO_LIQUID) {
        hand_check_dew_point(run, check, method, limit->finding.worst_temperature);
    } else if (limit->finding.has_contents) {
        hand_check_contents(run, check, method, limit->mass, &limit->finding.worst);
    }
    check_comparison(sheet, check, criterion, limit);
    if (sheet->is_by_ratio) {
        hand_check_ratio(run, check, limit->mass, criterion->round_to);
    }
}

static void check_listed(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    struct method_run *method = governing_method(sheet);
    const double temperature = hottest_ruled(sheet);
    struct contents contents;
    struct hand_check *check =
        sheet_add_hand_check(run->result, run->out,
                             arena_format(run->arena, "the listed row's charge, and its pressure at %s, %s",
                                          temperature_words(run, temperature), method->name));
    if (sheet->listed.has_ratio) {
        hand_check_line(run->result, check, "m = ratio * 999.1 kg/m3 * V = %g * 999.1 * %.10g = %.10g kg",
                        sheet->listed.filling_ratio, run->sheet->vessel->water_capacity.value, sheet->mass);
    }
    hand_check_amount(run, check, sheet->mass);
    if (contents_at(run, method, sheet->mass, temperature, &contents) == ANSWER_OK) {
        hand_check_contents(run, check, method, sheet->mass, &contents);
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

void answer_permissible_charge(struct sheet_run *run)
{
    if (refuses(run)) {
        return;
    }
    warn_of_polymerisation(run);
    struct permissible sheet = {.run = run};
    collect_criteria(&sheet);
    find_limits(&sheet);
    tell_rules(&sheet);
    tell_limits(&sheet);
    tell_dew_limits(&sheet);
    tell_frost_limits(&sheet);
    tell_listed_row(&sheet);
    if (!sheet.governing.given) {
        tell_undecided(&sheet);
        return;
    }
    if (!(sheet.mass > 0.0)) {
        tell_nothing_allowed(&sheet);
        return;
    }
    tell_charge(&sheet);
    tell_headline(&sheet);
    tell_pressures(&sheet);
    add_stepwise(run, governing_method(&sheet), sheet.mass);
    const struct fill_point fill = fill_point_of(run, governing_method(&sheet), sheet.mass);
    add_sensitivities(run, governing_method(&sheet), sheet.mass, hottest_ruled(&sheet), &fill);
    tell_fill_chart(&sheet);
    tell_requirements(&sheet);
    if (governing_criterion(&sheet)->kind == CRITERION_LISTED) {
        check_listed(&sheet);
    } else {
        check_limit(&sheet);
    }
}
