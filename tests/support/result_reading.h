/* Reading a sheet's results in tests: facts, cells, requirements and warnings by name. NULL where there is none. */
#ifndef TAREWRIGHT_TESTS_RESULT_READING_H
#define TAREWRIGHT_TESTS_RESULT_READING_H

#include "result/result.h"

#include <string.h>

/* The first fact of that name, by that method where `method` is not NULL. */
static inline const struct fact *result_fact(const struct result_sheet *sheet, const char *name, const char *method)
{
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        for (size_t i = 0; part->kind == PART_FACTS && i < part->facts.count; i++) {
            const struct fact *fact = &part->facts.items[i];
            const bool is_method = method == NULL || (fact->method != NULL && strcmp(fact->method, method) == 0);
            if (strcmp(fact->name, name) == 0 && is_method) {
                return fact;
            }
        }
    }
    return NULL;
}

/* The first table with that title, by that method where `method` is not NULL. */
static inline const struct table *result_table(const struct result_sheet *sheet, const char *title, const char *method)
{
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_TABLE && part->table->title != NULL && strcmp(part->table->title, title) == 0 &&
            (method == NULL || (part->table->method != NULL && strcmp(part->table->method, method) == 0))) {
            return part->table;
        }
    }
    return NULL;
}

static inline const struct cell *result_cell(const struct table *table, size_t row, const char *column)
{
    for (size_t c = 0; c < table->column_count; c++) {
        if (strcmp(table->columns[c].name, column) == 0 && row < table->row_count) {
            return &table->cells[row * table->column_count + c];
        }
    }
    return NULL;
}

/* The first row whose cell in `column` is the word. */
static inline bool result_row(const struct table *table, const char *column, const char *word, size_t *row)
{
    for (size_t r = 0; r < table->row_count; r++) {
        const struct cell *cell = result_cell(table, r, column);
        if (cell != NULL && cell->kind == CELL_TEXT && strcmp(cell->text, word) == 0) {
            *row = r;
            return true;
        }
    }
    return false;
}

/* The first requirement whose text holds `words`. */
static inline const struct requirement *result_requirement(const struct result_sheet *sheet, const char *words)
{
    for (const struct requirement *one = sheet->first_requirement; one != NULL; one = one->next) {
        if (strstr(one->text, words) != NULL) {
            return one;
        }
    }
    return NULL;
}

static inline size_t result_warnings(const struct result *result, enum code code)
{
    size_t count = 0;
    for (size_t i = 0; i < result->warnings.count; i++) {
        count += result->warnings.items[i].code == code;
    }
    return count;
}

static inline bool result_has_note(const struct result_sheet *sheet, const char *words)
{
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_NOTE && strstr(part->note, words) != NULL) {
            return true;
        }
    }
    return false;
}

static inline const struct hand_check *result_hand_check(const struct result_sheet *sheet)
{
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_HAND_CHECK) {
            return part->hand_check;
        }
    }
    return NULL;
}

#endif
