#include "report/listing_internal.h"
#include "report/number.h"
#include "report/page.h"

#include <math.h>

#define OUTSIDE_MARK "*"

static void set_cell(struct grid *grid, struct grid_cell *to, const struct column *column, const struct cell *cell)
{
    switch (cell->kind) {
    case CELL_NUMBER:
        to->text = fabs(cell->number) < column->least
                       ? arena_format(grid->arena, "< %s", number_shown(grid->arena, &column->look, column->least))
                       : number_shown(grid->arena, &column->look, cell->number);
        to->is_number = isfinite(cell->number);
        break;
    case CELL_TEXT:
        to->text = page_clean(grid->arena, cell->text);
        break;
    case CELL_SHEET:
        to->text = arena_format(grid->arena, "section %zu", section_of_sheet((size_t)cell->number));
        break;
    case CELL_EMPTY:
        to->text = PAGE_DASH;
        break;
    }
    to->mark = cell->kind == CELL_EMPTY ? NULL : cell->is_outside_range ? OUTSIDE_MARK : cell->is_bent ? "~" : NULL;
}

static struct grid *grid_of_table(const struct table *table, struct arena *arena)
{
    struct grid *grid = grid_create(arena, table->column_count);
    for (size_t c = 0; c < table->column_count; c++) {
        const struct column *column = &table->columns[c];
        const bool is_words = !column->look.si_unit;
        grid->columns[c] = (struct grid_column){.name = page_clean(arena, column->name),
                                                .unit = is_words ? NULL : number_unit(&column->look),
                                                .align = is_words ? GRID_WORDS : GRID_NUMBERS};
    }
    for (size_t r = 0; r < table->row_count; r++) {
        struct grid_row *row = grid_add_row(grid);
        for (size_t c = 0; c < table->column_count; c++) {
            set_cell(grid, &row->cells[c], &table->columns[c], &table->cells[r * table->column_count + c]);
        }
    }
    return grid;
}

static bool has_outside_range(const struct table *table)
{
    for (size_t i = 0; i < table->row_count * table->column_count; i++) {
        if (table->cells[i].is_outside_range) {
            return true;
        }
    }
    return false;
}

static void draw_title(const struct table *table, struct text *out)
{
    struct text title = {.arena = out->arena};
    text_format(&title, "%s", table->title ? table->title : "");
    if (table->method) {
        text_format(&title, "%s(%s)", title.length == 0 ? "" : " ", table->method);
    }
    if (title.length != 0) {
        page_paragraph(out, SECTION_INDENT, title.bytes);
    }
}

void listing_table(const struct table *table, size_t warnings, struct text *out)
{
    draw_title(table, out);
    if (table->row_count == 0 || table->column_count == 0) {
        page_paragraph(out, PART_INDENT, "no rows");
    } else {
        grid_draw(grid_of_table(table, out->arena), PART_INDENT, out);
    }
    listing_table_spreads(table, out);
    if (has_outside_range(table)) {
        page_paragraph(out, PART_INDENT,
                       arena_format(out->arena, "%s outside the method's published range, see section %zu",
                                    OUTSIDE_MARK, warnings));
    }
    if (table->csv) {
        page_paragraph(out, PART_INDENT, arena_format(out->arena, "also written to %s", table->csv));
    }
}
