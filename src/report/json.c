#include "report/report.h"

#include <jansson.h>
#include <math.h>
#include <string.h>

/* A tree of jansson values is built by functions that return NULL when memory runs out. append and set pass that on and
 * give back what they were handed, so one check at the root suffices and nothing is lost. */

/* Words of the deck are UTF-8 by the time they get here; anything else is refused rather than passed on broken. */
static json_t *words_or_null(const char *words)
{
    if (!words) {
        return json_null();
    }
    json_t *value = json_string(words);
    return value ? value : json_string("?");
}

static json_t *number_or_null(double value)
{
    return isfinite(value) ? json_real(value) : json_null();
}

/* A pressure shown as gauge is a gauge pressure for machines too: Pa above the zero of its unit. */
static json_t *si_or_null(const struct look *look, double si)
{
    const bool is_gauge = look->si_unit && strcmp(look->si_unit, "Pa") == 0;
    return number_or_null(is_gauge ? si - look->shown.offset : si);
}

static json_t *append(json_t *array, json_t *item)
{
    if (array && json_array_append_new(array, item) != 0) {
        json_decref(array);
        return NULL;
    }
    if (!array) {
        json_decref(item);
    }
    return array;
}

static json_t *set(json_t *object, const char *key, json_t *value)
{
    if (object && json_object_set_new(object, key, value) != 0) {
        json_decref(object);
        return NULL;
    }
    if (!object) {
        json_decref(value);
    }
    return object;
}

/* Expanded, k = 2; null where there is none or it is not known. */
static json_t *carried_tree(const struct carried *carried)
{
    const bool is_told = carried->kind == CARRIED || carried->kind == CARRIED_NOT_LINEAR;
    return is_told ? number_or_null(carried->expanded) : json_null();
}

/* Every fact has the same keys, so that a reader need not ask first: words stand as a value without a unit. */
static json_t *fact_tree(const struct fact *fact)
{
    json_t *tree = set(json_object(), "name", words_or_null(fact->name));
    tree = set(tree, "value", fact->text ? words_or_null(fact->text) : si_or_null(&fact->look, fact->value));
    tree = set(tree, "unit", fact->text ? json_null() : words_or_null(fact->look.si_unit));
    tree = set(tree, "method", words_or_null(fact->method));
    tree = set(tree, "uncertainty", carried_tree(&fact->carried));
    return fact->source ? set(tree, "source", words_or_null(fact->source)) : tree;
}

static json_t *facts_tree(const struct result_sheet *sheet)
{
    json_t *facts = json_array();
    for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
        for (size_t i = 0; i < part->facts.count; i++) {
            facts = append(facts, fact_tree(&part->facts.items[i]));
        }
    }
    return facts;
}

static json_t *cell_tree(const struct column *column, const struct cell *cell)
{
    switch (cell->kind) {
    case CELL_NUMBER:
        return si_or_null(&column->look, cell->number);
    case CELL_TEXT:
        return words_or_null(cell->text);
    case CELL_SHEET:
        return json_integer((json_int_t)cell->number);
    case CELL_EMPTY:
        break;
    }
    return json_null();
}

static bool has_spreads(const struct table *table)
{
    for (size_t i = 0; i < table->row_count * table->column_count; i++) {
        if (table->cells[i].carried.kind != CARRIED_NONE) {
            return true;
        }
    }
    return false;
}

/* Rows and columns as those of the table. */
static json_t *spreads_tree(const struct table *table)
{
    json_t *rows = json_array();
    for (size_t r = 0; r < table->row_count; r++) {
        json_t *row = json_array();
        for (size_t c = 0; c < table->column_count; c++) {
            row = append(row, carried_tree(&table->cells[r * table->column_count + c].carried));
        }
        rows = append(rows, row);
    }
    return rows;
}

static json_t *table_tree(const struct table *table)
{
    json_t *columns = json_array();
    for (size_t c = 0; c < table->column_count; c++) {
        const struct column *column = &table->columns[c];
        json_t *head = set(json_object(), "name", words_or_null(column->name));
        columns = append(columns, set(head, "unit", words_or_null(column->look.si_unit)));
    }
    json_t *rows = json_array();
    for (size_t r = 0; r < table->row_count; r++) {
        json_t *row = json_array();
        for (size_t c = 0; c < table->column_count; c++) {
            row = append(row, cell_tree(&table->columns[c], &table->cells[r * table->column_count + c]));
        }
        rows = append(rows, row);
    }
    json_t *tree = set(json_object(), "title", words_or_null(table->title));
    tree = set(tree, "method", words_or_null(table->method));
    tree = set(tree, "columns", columns);
    tree = set(tree, "rows", rows);
    return has_spreads(table) ? set(tree, "uncertainties", spreads_tree(table)) : tree;
}

static json_t *tables_tree(const struct result_sheet *sheet)
{
    json_t *tables = json_array();
    for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
        if (part->kind == PART_TABLE) {
            tables = append(tables, table_tree(part->table));
        }
    }
    return tables;
}

static json_t *state_tree(enum requirement_state state)
{
    switch (state) {
    case REQUIREMENT_MET:
        return json_true();
    case REQUIREMENT_NOT_MET:
        return json_false();
    case REQUIREMENT_UNDECIDED:
        break;
    }
    return json_null();
}

static json_t *requirement_tree(const struct requirement *one)
{
    json_t *tree = set(json_object(), "text", words_or_null(one->text));
    tree = set(tree, "met", state_tree(one->state));
    tree = set(tree, "margin", one->has_margin ? number_or_null(one->margin) : json_null());
    tree = set(tree, "unit", one->has_margin ? words_or_null(one->look.si_unit) : json_null());
    tree = set(tree, "uncertainty", carried_tree(&one->carried));
    tree = set(tree, "within_uncertainty", json_boolean(one->is_within_uncertainty));
    return set(tree, "worst_temperature",
               one->has_worst_temperature ? number_or_null(one->worst_temperature) : json_null());
}

static json_t *budget_line_tree(const struct budget_line *line)
{
    json_t *tree = set(json_object(), "input", words_or_null(line->input));
    tree = set(tree, "line", line->line != 0 ? json_integer((json_int_t)line->line) : json_null());
    tree = set(tree, "value", si_or_null(&line->look, line->value));
    tree = set(tree, "unit", words_or_null(line->look.si_unit));
    tree = set(tree, "standard_uncertainty", number_or_null(line->standard));
    tree = set(tree, "sensitivity", number_or_null(line->sensitivity));
    tree = set(tree, "contribution", number_or_null(line->contribution));
    return set(tree, "share", number_or_null(line->share));
}

static const char *agreement_word(enum agreement agreement)
{
    switch (agreement) {
    case AGREES:
        return "agrees";
    case AGREES_NOT:
        return "does not agree";
    case AGREEMENT_BLURRED:
        break;
    }
    return "too few draws";
}

static json_t *drawn_tree(const struct budget *budget)
{
    const struct drawn_budget *drawn = &budget->drawn;
    json_t *tree = set(json_object(), "draws", json_integer((json_int_t)drawn->draws));
    tree = set(tree, "seed", json_integer((json_int_t)drawn->seed));
    tree = set(tree, "answered", json_integer((json_int_t)drawn->answered));
    tree = set(tree, "mean", si_or_null(&budget->look, drawn->mean));
    tree = set(tree, "standard_uncertainty", number_or_null(drawn->standard));
    tree = set(tree, "low", si_or_null(&budget->look, drawn->low));
    tree = set(tree, "high", si_or_null(&budget->look, drawn->high));
    tree = set(tree, "first_order_low", si_or_null(&budget->look, drawn->first_low));
    tree = set(tree, "first_order_high", si_or_null(&budget->look, drawn->first_high));
    tree = set(tree, "tolerance", number_or_null(drawn->tolerance));
    tree = set(tree, "part_met", drawn->has_part_met ? number_or_null(drawn->part_met) : json_null());
    return set(tree, "first_order", words_or_null(agreement_word(drawn->agreement)));
}

static json_t *budget_tree(const struct budget *budget)
{
    json_t *lines = json_array();
    for (size_t i = 0; i < budget->line_count; i++) {
        lines = append(lines, budget_line_tree(&budget->lines[i]));
    }
    json_t *tree = set(json_object(), "result", words_or_null(budget->result));
    tree = set(tree, "method", words_or_null(budget->method));
    tree = set(tree, "value", si_or_null(&budget->look, budget->value));
    tree = set(tree, "unit", words_or_null(budget->look.si_unit));
    tree = set(tree, "standard_uncertainty", number_or_null(budget->standard));
    tree = set(tree, "inputs", lines);
    return budget->drawn.given ? set(tree, "draws", drawn_tree(budget)) : tree;
}

static json_t *budgets_tree(const struct result_sheet *sheet)
{
    json_t *budgets = json_array();
    for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
        budgets = part->budget ? append(budgets, budget_tree(part->budget)) : budgets;
    }
    return budgets;
}

static json_t *sheet_tree(const struct result_sheet *sheet)
{
    json_t *requirements = json_array();
    for (const struct requirement *one = sheet->first_requirement; one; one = one->next) {
        requirements = append(requirements, requirement_tree(one));
    }
    json_t *tree = set(json_object(), "kind", words_or_null(sheet->kind));
    tree = set(tree, "title", words_or_null(sheet->title));
    tree = set(tree, "facts", facts_tree(sheet));
    tree = set(tree, "tables", tables_tree(sheet));
    tree = set(tree, "requirements", requirements);
    return set(tree, "budgets", budgets_tree(sheet));
}

static json_t *warning_tree(const struct warning *warning)
{
    const struct code_row *row = code_row(warning->code);
    json_t *tree = set(json_object(), "code", words_or_null(row ? row->name : NULL));
    tree = set(tree, "text", words_or_null(warning->text));
    return set(tree, "line", warning->line != 0 ? json_integer((json_int_t)warning->line) : json_null());
}

static const char *verdict_word(enum verdict verdict)
{
    switch (verdict) {
    case VERDICT_MET:
        return "met";
    case VERDICT_NOT_MET:
        return "not met";
    case VERDICT_UNDECIDED:
        return "undecided";
    case VERDICT_NONE:
        break;
    }
    return "none";
}

static json_t *result_tree(const struct result *result)
{
    json_t *sheets = json_array();
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        sheets = append(sheets, sheet_tree(sheet));
    }
    json_t *warnings = json_array();
    for (size_t i = 0; i < result->warnings.count; i++) {
        warnings = append(warnings, warning_tree(&result->warnings.items[i]));
    }
    json_t *deck = set(json_object(), "name", words_or_null(result->deck_name));
    deck = set(deck, "sha256", words_or_null(result->deck_sha256));
    json_t *tree = set(json_object(), "tarewright", words_or_null(result->version));
    tree = set(tree, "deck", deck);
    tree = set(tree, "verdict", words_or_null(verdict_word(result_verdict(result))));
    tree = set(tree, "sheets", sheets);
    return set(tree, "warnings", warnings);
}

/* The text is measured and then written into arena_try's memory, as arena_alloc would leave this function by its jump
 * and the tree with it. */
bool report_json(const struct result *result, struct text *out)
{
    const size_t style = JSON_INDENT(1) | JSON_PRESERVE_ORDER | JSON_REAL_PRECISION(17);
    json_t *tree = result_tree(result);
    const size_t length = tree ? json_dumpb(tree, NULL, 0, style) : 0;
    char *dumped = length != 0 ? arena_try(out->arena, length, 1) : NULL;
    const bool is_done = dumped && json_dumpb(tree, dumped, length, style) == length;
    json_decref(tree);
    if (is_done) {
        text_add(out, dumped, length);
        text_add(out, "\n", 1);
    }
    return is_done;
}
