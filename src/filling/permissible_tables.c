/* The tables of the permissible-charge sheet: its criteria, and the limit of each by each method. */
#include "filling/permissible_internal.h"

#include "base/text.h"
#include "filling/requirement.h"

#include <string.h>

#define SETTLED_TEMPERATURE 288.15 /* K */

/* ---- criteria ---------------------------------------------------------------------------------------------------- */

static void tell_rule(const struct sheet_run *run, const struct case_rule *rule)
{
    struct text text = {.arena = run->arena};
    text_format(&text, "rule %s", rule->name);
    const char *const words[] = {rule->title, rule->clause, rule->edition};
    for (size_t i = 0; i < sizeof words / sizeof *words; i++) {
        if (words[i] != NULL) {
            text_format(&text, "%s%s", i == 0 ? ": " : ", ", words[i]);
        }
    }
    sheet_add_note(run->result, run->out, "%s", text.bytes);
}

static const char *criterion_words(const struct permissible *sheet, const struct criterion *criterion)
{
    const char *written = criterion->predicate->written;
    if (criterion->is_replaced) {
        return arena_format(sheet->run->arena, "%s: replaced by the listed row", written);
    }
    if (criterion->is_shown_only) {
        return arena_format(sheet->run->arena, "%s, for comparison", written);
    }
    return written;
}

void tell_rules(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    for (size_t i = 0; i < run->sheet->rule_count; i++) {
        tell_rule(run, run->sheet->rules[i]);
    }
    struct table *table = sheet_add_table(run->result, run->out, "criteria", NULL);
    table_add_word_column(run->result, table, "number");
    table_add_word_column(run->result, table, "from");
    table_add_word_column(run->result, table, "criterion");
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct criterion *criterion = &sheet->criteria[i];
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[0], arena_format(run->arena, "%zu", i + 1));
        cell_set_text(&row[1], criterion->kind == CRITERION_LISTED ? listed_words(sheet) : criterion->name);
        cell_set_text(&row[2], criterion_words(sheet, criterion));
    }
}

/* ---- limits ------------------------------------------------------------------------------------------------------ */

enum limit_column { LIMIT_METHOD, LIMIT_CRITERION, LIMIT_TEMPERATURE, LIMIT_DENSITY, LIMIT_RATIO, LIMIT_MASS };

static void add_limit_row(const struct permissible *sheet, struct table *table, const struct method_limits *of,
                          size_t index)
{
    const struct sheet_run *run = sheet->run;
    const struct criterion_limit *limit = &of->limits[index];
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[LIMIT_METHOD], of->method->name);
    cell_set_text(&row[LIMIT_CRITERION], arena_format(run->arena, "%zu", index + 1));
    cell_set(&row[LIMIT_TEMPERATURE], limit->finding.worst_temperature);
    if (limit->answer != ANSWER_OK) {
        cell_set_text(&row[LIMIT_MASS], "no answer");
        return;
    }
    if (limit->is_unlimited) {
        cell_set_text(&row[LIMIT_MASS], "no limit");
        return;
    }
    cell_set(&row[LIMIT_DENSITY], limit->mass / run->sheet->vessel->water_capacity.value);
    cell_set(&row[LIMIT_RATIO], ratio_of_mass(run, limit->mass));
    cell_set(&row[LIMIT_MASS], limit->mass);
}

/* Only where there is more than one computed criterion: else the table of limits says it all. */
static void tell_each_criterion(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    size_t computed = 0;
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        computed += sheet->criteria[i].kind != CRITERION_LISTED;
    }
    if (computed < 2) {
        return;
    }
    struct table *table = sheet_add_table(run->result, run->out, "limit of each criterion, before rounding", NULL);
    table_add_word_column(run->result, table, "method");
    table_add_word_column(run->result, table, "criterion");
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, "density", look_density(run));
    table_add_column(run->result, table, "filling-ratio-unrounded", look_ratio(4));
    table_add_column(run->result, table, "mass", look_mass(run));
    for (size_t m = 0; m < run->method_count; m++) {
        for (size_t i = 0; i < sheet->criterion_count && sheet->by_method[m].method != NULL; i++) {
            if (sheet->criteria[i].kind != CRITERION_LISTED) {
                add_limit_row(sheet, table, &sheet->by_method[m], i);
            }
        }
    }
}

const char *governed_by(const struct permissible *sheet, size_t criterion, const struct criterion_limit *limit)
{
    if (sheet->criteria[criterion].kind == CRITERION_LISTED) {
        return arena_format(sheet->run->arena, "listed row %s", listed_words(sheet));
    }
    return arena_format(sheet->run->arena, "%s, %s", sheet->criteria[criterion].name,
                        temperature_words(sheet->run, limit->finding.worst_temperature));
}

enum summary_column {
    SUMMARY_METHOD,
    SUMMARY_DENSITY,
    SUMMARY_UNROUNDED,
    SUMMARY_RATIO,
    SUMMARY_MASS,
    SUMMARY_GOVERNED_BY
};

/* A compressed gas is filled to a pressure: its settled pressure at 15 degC stands where the ratio is rounded. */
static void set_amounts(const struct permissible *sheet, struct cell *row, struct method_run *method, double found,
                        double rounded)
{
    const struct sheet_run *run = sheet->run;
    cell_set(&row[SUMMARY_DENSITY], found / run->sheet->vessel->water_capacity.value);
    cell_set(&row[SUMMARY_UNROUNDED], ratio_of_mass(run, found));
    cell_set(&row[SUMMARY_MASS], rounded);
    if (sheet->is_by_ratio) {
        cell_set(&row[SUMMARY_RATIO], ratio_of_mass(run, rounded));
        return;
    }
    struct contents contents;
    if (method != NULL && rounded > 0.0 &&
        contents_at(run, method, rounded, SETTLED_TEMPERATURE, &contents) == ANSWER_OK) {
        cell_set(&row[SUMMARY_RATIO], contents.pressure);
    }
}

static void add_method_row(const struct permissible *sheet, struct table *table, const struct method_limits *of)
{
    const struct sheet_run *run = sheet->run;
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[SUMMARY_METHOD], of->method->name);
    if (!of->computed.given) {
        cell_set_text(&row[SUMMARY_GOVERNED_BY], of->undecided.given ? "no answer" : "no limit");
        return;
    }
    const struct criterion_limit *limit = &of->limits[of->computed.index];
    set_amounts(sheet, row, of->method, limit->mass, limit->rounded);
    row[SUMMARY_DENSITY].is_outside_range = !of->is_within_range;
    const char *words = governed_by(sheet, of->computed.index, limit);
    if (!of->is_decided) {
        words = arena_format(run->arena, "%s; no answer for criterion %zu", words, of->undecided.index + 1);
    } else if (sheet->is_by_ratio && is_cubic(of->method)) {
        words = arena_format(run->arena, "%s; indicative", words);
    }
    cell_set_text(&row[SUMMARY_GOVERNED_BY], words);
}

static void add_listed_row(const struct permissible *sheet, struct table *table)
{
    if (sheet->listed.predicate == NULL || !sheet->listed.has_ratio) {
        return;
    }
    const double mass = mass_of_ratio(sheet->run, sheet->listed.filling_ratio);
    struct cell *row = table_add_row(sheet->run->result, table);
    cell_set_text(&row[SUMMARY_METHOD], "listed row");
    set_amounts(sheet, row, sheet->governing.given ? governing_method(sheet) : NULL, mass, mass);
    cell_set_text(&row[SUMMARY_GOVERNED_BY],
                  arena_format(sheet->run->arena, "%s, %s", listed_words(sheet), listed_source(sheet)));
}

static void add_permitted_row(const struct permissible *sheet, struct table *table)
{
    if (!sheet->governing.given) {
        return;
    }
    const struct criterion_limit *limit = governing_limit(sheet);
    const struct method_limits *of = &sheet->by_method[sheet->governing.index];
    struct cell *row = table_add_row(sheet->run->result, table);
    cell_set_text(&row[SUMMARY_METHOD], "permitted");
    set_amounts(sheet, row, of->method, sheet->mass, sheet->mass);
    row[SUMMARY_UNROUNDED] = (struct cell){.kind = CELL_EMPTY};
    const char *words = governed_by(sheet, of->permitted.index, limit);
    if (sheet->criteria[of->permitted.index].kind != CRITERION_LISTED) {
        words = arena_format(sheet->run->arena, "%s, %s", words, of->method->name);
    }
    cell_set_text(&row[SUMMARY_GOVERNED_BY], words);
}

static bool shows_indicative(const struct permissible *sheet)
{
    for (size_t m = 0; m < sheet->run->method_count && sheet->is_by_ratio; m++) {
        if (sheet->by_method[m].method != NULL && is_cubic(sheet->by_method[m].method)) {
            return true;
        }
    }
    return false;
}

void tell_limits(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    tell_each_criterion(sheet);
    struct table *table = sheet_add_table(run->result, run->out, "limits", NULL);
    table_add_word_column(run->result, table, "method");
    table_add_column(run->result, table, "density", look_density(run));
    table_add_column(run->result, table, "filling-ratio-unrounded", look_ratio(4));
    if (sheet->is_by_ratio) {
        table_add_column(run->result, table, "filling-ratio", look_ratio(4));
    } else {
        table_add_column(run->result, table, "gauge-pressure-15-degC", look_gauge(run));
    }
    table_add_column(run->result, table, "mass", look_mass(run));
    table_add_word_column(run->result, table, "governed-by");
    for (size_t m = 0; m < run->method_count; m++) {
        if (sheet->by_method[m].method != NULL) {
            add_method_row(sheet, table, &sheet->by_method[m]);
        }
    }
    add_listed_row(sheet, table);
    add_permitted_row(sheet, table);
    if (shows_indicative(sheet)) {
        sheet_add_note(run->result, run->out,
                       "indicative: by a cubic equation, which misses liquid densities by several percent; "
                       "not for filling");
    }
}
