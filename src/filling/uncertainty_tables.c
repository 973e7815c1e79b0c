/* Tables of uncertainties, row by row, under the tables they belong to. */
#include "filling/uncertainty_internal.h"

/* Significant digits of an uncertainty: JCGM 100, 7.2.6. */
enum { SPREAD_DIGITS = 2 };

static const struct cell *cell_of(const struct table *table, size_t row, size_t column)
{
    return &table->cells[row * table->column_count + column];
}

static bool is_uncertain(const struct table *table, size_t column)
{
    for (size_t r = 0; r < table->row_count; r++) {
        if (cell_of(table, r, column)->carried.kind != CARRIED_NONE) {
            return true;
        }
    }
    return false;
}

/* The columns before the first uncertain one tell the rows apart. */
static size_t leading_columns(const struct table *table)
{
    size_t leading = 0;
    while (leading < table->column_count && !is_uncertain(table, leading)) {
        leading++;
    }
    return leading;
}

static struct cell spread_cell(const struct carried *carried)
{
    struct cell cell = {.kind = CELL_EMPTY, .is_bent = carried->kind == CARRIED_NOT_LINEAR};
    switch (carried->kind) {
    case CARRIED_NONE:
        break;
    case CARRIED:
    case CARRIED_NOT_LINEAR:
        cell_set(&cell, carried->expanded);
        break;
    case CARRIED_UNKNOWN:
        cell_set_text(&cell, "?");
        break;
    }
    return cell;
}

static void add_rows(const struct sheet_run *run, const struct table *of, size_t leading, struct table *spreads)
{
    for (size_t r = 0; r < of->row_count; r++) {
        struct cell *row = table_add_row(run->result, spreads);
        for (size_t c = 0, to = 0; c < of->column_count; c++) {
            if (c < leading) {
                row[to] = *cell_of(of, r, c);
                row[to++].carried.kind = CARRIED_NONE;
            } else if (is_uncertain(of, c)) {
                row[to++] = spread_cell(&cell_of(of, r, c)->carried);
            }
        }
    }
}

static void add_spreads(const struct sheet_run *run, const struct table *of)
{
    const size_t leading = leading_columns(of);
    if (leading == of->column_count) {
        return;
    }
    struct table *spreads =
        sheet_add_table_behind(run->result, run->out, of, "U (k = 2) in the rows of the table above", of->method);
    for (size_t c = 0; c < of->column_count; c++) {
        const struct look steps = look_significant(look_of_steps(of->columns[c].look), SPREAD_DIGITS);
        if (c < leading) {
            table_add_column(run->result, spreads, of->columns[c].name, of->columns[c].look);
        } else if (is_uncertain(of, c)) {
            table_add_column(run->result, spreads, of->columns[c].name, steps);
        }
    }
    add_rows(run, of, leading, spreads);
}

void tell_every_row(const struct uncertain_sheet *it)
{
    const struct table *last = NULL;
    for (size_t k = 0; k < it->outlets.count; k++) {
        const struct table *table = it->outlets.items[k].table;
        if (table != NULL && table != last) {
            add_spreads(it->run, table);
            last = table;
        }
    }
}
