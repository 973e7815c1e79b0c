/* Builders of the result tree. Lists keep their order; nothing is computed here beyond a shown number. */
#include "result/result.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

/* Which of the last digits a residual has below this depends on the order of operations. */
#define LEAST_RESIDUAL 1e-12
enum { RESIDUAL_DIGITS = 2 };

static const char *format_text(struct arena *arena, const char *format, va_list arguments)
    __attribute__((format(printf, 2, 0)));

static const char *format_text(struct arena *arena, const char *format, va_list arguments)
{
    va_list again;
    va_copy(again, arguments);
    const int length = vsnprintf(NULL, 0, format, arguments);
    char *text = arena_alloc(arena, length < 0 ? 1 : (size_t)length + 1, 1);
    if (length > 0) {
        vsnprintf(text, (size_t)length + 1, format, again);
    }
    va_end(again);
    return text;
}

static void add_line(struct arena *arena, struct line_list *lines, const char *text)
{
    *ARENA_APPEND(arena, lines) = text;
}

struct result *result_create(struct arena *arena)
{
    struct result *result = arena_alloc(arena, 1, sizeof *result);
    result->arena = arena;
    return result;
}

struct result_sheet *result_add_sheet(struct result *result, const char *kind, const char *title)
{
    struct result_sheet *sheet = arena_alloc(result->arena, 1, sizeof *sheet);
    sheet->kind = kind;
    sheet->title = title;
    if (result->last_sheet) {
        result->last_sheet->next = sheet;
    } else {
        result->first_sheet = sheet;
    }
    result->last_sheet = sheet;
    result->sheet_count++;
    return sheet;
}

static struct sheet_part *add_part(struct result *result, struct result_sheet *sheet, enum part_kind kind,
                                   const char *title)
{
    struct sheet_part *part = arena_alloc(result->arena, 1, sizeof *part);
    part->kind = kind;
    part->title = title;
    if (sheet->last_part) {
        sheet->last_part->next = part;
    } else {
        sheet->first_part = part;
    }
    sheet->last_part = part;
    return part;
}

void sheet_begin_facts(struct result *result, struct result_sheet *sheet, const char *title)
{
    add_part(result, sheet, PART_FACTS, title);
}

/* A fact after a table or a note starts a group without a title, so that the order of the parts is kept. */
static struct fact *add_fact(struct result *result, struct result_sheet *sheet, const char *name)
{
    struct sheet_part *part = sheet->last_part;
    if (!part || part->kind != PART_FACTS) {
        part = add_part(result, sheet, PART_FACTS, NULL);
    }
    struct fact *fact = ARENA_APPEND(result->arena, &part->facts);
    *fact = (struct fact){.name = name};
    return fact;
}

struct fact *sheet_add_fact(struct result *result, struct result_sheet *sheet, const char *name, double value,
                            struct look look)
{
    struct fact *fact = add_fact(result, sheet, name);
    fact->value = value;
    fact->look = look;
    return fact;
}

struct fact *sheet_add_words(struct result *result, struct result_sheet *sheet, const char *name, const char *text)
{
    struct fact *fact = add_fact(result, sheet, name);
    fact->text = text;
    return fact;
}

struct table *sheet_add_table(struct result *result, struct result_sheet *sheet, const char *title, const char *method)
{
    struct table *table = arena_alloc(result->arena, 1, sizeof *table);
    table->title = title;
    table->method = method;
    add_part(result, sheet, PART_TABLE, NULL)->table = table;
    return table;
}

struct table *sheet_add_table_behind(struct result *result, struct result_sheet *sheet, const struct table *before,
                                     const char *title, const char *method)
{
    struct sheet_part *at = sheet->first_part;
    while (at && at->table != before) {
        at = at->next;
    }
    if (!at || !at->next) {
        return sheet_add_table(result, sheet, title, method);
    }
    struct table *table = arena_alloc(result->arena, 1, sizeof *table);
    struct sheet_part *part = arena_alloc(result->arena, 1, sizeof *part);
    table->title = title;
    table->method = method;
    *part = (struct sheet_part){.kind = PART_TABLE, .table = table, .next = at->next};
    at->next = part;
    return table;
}

struct hand_check *sheet_add_hand_check(struct result *result, struct result_sheet *sheet, const char *title)
{
    struct hand_check *check = arena_alloc(result->arena, 1, sizeof *check);
    check->title = title;
    add_part(result, sheet, PART_HAND_CHECK, NULL)->hand_check = check;
    return check;
}

void sheet_add_note(struct result *result, struct result_sheet *sheet, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    add_part(result, sheet, PART_NOTE, NULL)->note = format_text(result->arena, format, arguments);
    va_end(arguments);
}

struct budget *sheet_add_budget(struct result *result, struct result_sheet *sheet, const char *name)
{
    struct budget *budget = arena_alloc(result->arena, 1, sizeof *budget);
    budget->result = name;
    add_part(result, sheet, PART_BUDGET, NULL)->budget = budget;
    return budget;
}

struct requirement *sheet_add_requirement(struct result *result, struct result_sheet *sheet, const char *text)
{
    struct requirement *requirement = arena_alloc(result->arena, 1, sizeof *requirement);
    requirement->text = text;
    requirement->state = REQUIREMENT_UNDECIDED;
    if (sheet->last_requirement) {
        sheet->last_requirement->next = requirement;
    } else {
        sheet->first_requirement = requirement;
    }
    sheet->last_requirement = requirement;
    return requirement;
}

void table_add_column(struct result *result, struct table *table, const char *name, struct look look)
{
    table->columns = arena_grow(result->arena, table->columns, &table->column_capacity, table->column_count + 1,
                                sizeof *table->columns);
    table->columns[table->column_count++] = (struct column){.name = name, .look = look};
}

void table_add_residual_column(struct result *result, struct table *table, const char *name)
{
    table_add_column(result, table, name, (struct look){"1", {"1", 1.0, 0.0}, -RESIDUAL_DIGITS});
    table->columns[table->column_count - 1].least = LEAST_RESIDUAL;
}

void table_add_word_column(struct result *result, struct table *table, const char *name)
{
    table_add_column(result, table, name, (struct look){.si_unit = NULL});
}

struct cell *table_add_row(struct result *result, struct table *table)
{
    const size_t used = table->row_count * table->column_count;
    table->cells = arena_grow(result->arena, table->cells, &table->cell_capacity, used + table->column_count,
                              sizeof *table->cells);
    struct cell *row = table->cells + used;
    for (size_t i = 0; i < table->column_count; i++) {
        row[i] = (struct cell){.kind = CELL_EMPTY};
    }
    table->row_count++;
    return row;
}

void cell_set(struct cell *cell, double number)
{
    cell->kind = isfinite(number) ? CELL_NUMBER : CELL_EMPTY;
    cell->number = isfinite(number) ? number : 0.0;
}

void cell_set_text(struct cell *cell, const char *text)
{
    cell->kind = CELL_TEXT;
    cell->text = text;
}

void cell_set_sheet(struct cell *cell, size_t sheet)
{
    cell->kind = CELL_SHEET;
    cell->number = (double)sheet;
}

void hand_check_line(struct result *result, struct hand_check *check, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    add_line(result->arena, &check->lines, format_text(result->arena, format, arguments));
    va_end(arguments);
}

void line_list_add(struct result *result, struct line_list *lines, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    add_line(result->arena, lines, format_text(result->arena, format, arguments));
    va_end(arguments);
}

static bool is_known_warning(const struct result *result, const struct warning *wanted)
{
    for (size_t i = 0; i < result->warnings.count; i++) {
        const struct warning *known = &result->warnings.items[i];
        if (known->code == wanted->code && known->sheet == wanted->sheet && strcmp(known->text, wanted->text) == 0) {
            return true;
        }
    }
    return false;
}

void result_warn(struct result *result, enum code code, size_t line, size_t sheet, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    const char *text = format_text(result->arena, format, arguments);
    va_end(arguments);
    const struct warning warning = {.code = code, .text = text, .line = line, .sheet = sheet};
    if (!is_known_warning(result, &warning)) {
        *ARENA_APPEND(result->arena, &result->warnings) = warning;
    }
}

enum verdict result_verdict(const struct result *result)
{
    enum verdict verdict = VERDICT_NONE;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct requirement *each = sheet->first_requirement; each; each = each->next) {
            if (each->state == REQUIREMENT_NOT_MET) {
                return VERDICT_NOT_MET;
            }
            if (each->state == REQUIREMENT_UNDECIDED) {
                verdict = VERDICT_UNDECIDED;
            } else if (verdict == VERDICT_NONE) {
                verdict = VERDICT_MET;
            }
        }
    }
    return result->is_undecided ? VERDICT_UNDECIDED : verdict;
}

size_t result_close_verdicts(const struct result *result)
{
    size_t close = 0;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct requirement *each = sheet->first_requirement; each; each = each->next) {
            close += each->is_within_uncertainty;
        }
    }
    return close;
}

struct look look_of_steps(struct look look)
{
    static const struct {
        const char *point, *step;
    } STEPS[] = {
        {"bara", "bar"}, {"barg", "bar"}, {"psia", "psi"}, {"psig", "psi"}, {"kPaa", "kPa"},
        {"kPag", "kPa"}, {"MPaa", "MPa"}, {"MPag", "MPa"}, {"degC", "K"},
    };
    look.shown.offset = 0.0;
    if (look.shown.symbol && strcmp(look.shown.symbol, "degF") == 0) {
        look.shown = (struct shown_unit){"K", 1.0, 0.0};
    }
    for (size_t i = 0; look.shown.symbol && i < sizeof STEPS / sizeof *STEPS; i++) {
        if (strcmp(look.shown.symbol, STEPS[i].point) == 0) {
            look.shown.symbol = STEPS[i].step;
        }
    }
    return look;
}

double look_shown(const struct look *look, double si)
{
    return (si - look->shown.offset) / look->shown.factor;
}
