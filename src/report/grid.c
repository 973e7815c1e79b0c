#include "report/grid.h"

#include "report/grid_layout.h"
#include "report/page.h"

#include <string.h>

/* What stands beside a grid's first column has at least so many columns. */
enum { NARROWEST_SPAN = 20 };

struct grid *grid_create(struct arena *arena, size_t column_count)
{
    struct grid *grid = arena_alloc(arena, 1, sizeof *grid);
    grid->arena = arena;
    grid->column_count = column_count;
    grid->columns = arena_alloc(arena, column_count, sizeof *grid->columns);
    return grid;
}

struct grid_row *grid_add_row(struct grid *grid)
{
    grid->rows = arena_grow(grid->arena, grid->rows, &grid->row_capacity, grid->row_count + 1, sizeof *grid->rows);
    struct grid_row *row = &grid->rows[grid->row_count++];
    row->cells = arena_alloc(grid->arena, grid->column_count, sizeof *row->cells);
    return row;
}
static size_t larger(size_t a, size_t b)
{
    return a > b ? a : b;
}

static void pad_to(struct text *line, size_t column)
{
    const size_t now = line->bytes ? text_columns(line->bytes, line->length) : 0;
    if (now < column) {
        text_pad(line, column - now);
    }
}

static void put(struct text *line, const struct grid_layout *layout, size_t column, const char *words)
{
    if (*words != '\0') {
        pad_to(line, layout->indent + column);
        text_add(line, words, strlen(words));
    }
}

static void end_line(struct text *line, const struct grid_layout *layout, struct text *out)
{
    page_line(out, layout->indent + 2, line->bytes ? line->bytes : "");
    line->length = 0;
    if (line->bytes) {
        line->bytes[0] = '\0';
    }
}

/* A head's word or a unit: over words at the left, over numbers at the right. */
static void put_head(struct text *line, const struct grid_layout *layout, size_t c, const char *words)
{
    const size_t columns = page_columns(words);
    const bool is_right = layout->grid->columns[c].align == GRID_NUMBERS && columns < layout->width[c];
    put(line, layout, layout->start[c] + (is_right ? layout->width[c] - columns : 0), words);
}

static void draw_heads(const struct grid_layout *layout, size_t first, size_t end, struct text *out)
{
    const struct grid *grid = layout->grid;
    struct page_lines *heads = arena_alloc(grid->arena, grid->column_count, sizeof *heads);
    size_t tallest = 0;
    bool has_units = false;
    for (size_t c = 0; c < grid->column_count; c++) {
        if (grid_layout_shows(layout, c, first, end) && grid->columns[c].name) {
            heads[c] = page_wrap(grid->arena, grid->columns[c].name, layout->width[c], true);
            tallest = larger(tallest, heads[c].count);
            has_units = has_units || grid->columns[c].unit;
        }
    }
    struct text line = {.arena = grid->arena};
    for (size_t row = 0; row < tallest; row++) {
        for (size_t c = 0; c < grid->column_count; c++) {
            if (row + heads[c].count >= tallest) {
                put_head(&line, layout, c, heads[c].items[row + heads[c].count - tallest]);
            }
        }
        end_line(&line, layout, out);
    }
    for (size_t c = 0; has_units && c < grid->column_count; c++) {
        if (grid_layout_shows(layout, c, first, end) && grid->columns[c].unit) {
            put_head(&line, layout, c, grid->columns[c].unit);
        }
    }
    if (has_units) {
        end_line(&line, layout, out);
    }
}

static void put_cell(struct text *line, const struct grid_layout *layout, size_t c, const struct grid_cell *cell,
                     const char *words)
{
    size_t shift = 0;
    if (grid_cell_is_aligned(&layout->grid->columns[c], cell)) {
        shift = layout->left[c] - grid_columns_before_point(words);
    } else if (layout->grid->columns[c].align == GRID_NUMBERS) {
        shift = layout->width[c] - page_columns(words);
    }
    put(line, layout, layout->start[c] + shift, words);
    if (cell->mark) {
        text_add(line, cell->mark, strlen(cell->mark));
    }
}

static struct page_lines cell_lines(const struct grid_layout *layout, size_t c, const struct grid_cell *cell)
{
    if (!cell->text) {
        return (struct page_lines){0};
    }
    return page_wrap(layout->grid->arena, cell->text, layout->width[c], false);
}

/* Where what stands beside the first column begins, leaving words room enough to be wrapped. */
static size_t second_column(const struct grid_layout *layout)
{
    const size_t furthest = PAGE_WIDTH - NARROWEST_SPAN;
    const size_t begin = layout->indent + (layout->width[0] == 0 ? 0 : layout->width[0] + layout->gap);
    return begin < furthest ? begin : furthest;
}

static void draw_cells(const struct grid_layout *layout, const struct grid_row *row, size_t first, size_t end,
                       struct text *out)
{
    const struct grid *grid = layout->grid;
    struct page_lines *lines = arena_alloc(grid->arena, grid->column_count, sizeof *lines);
    size_t tallest = 1;
    for (size_t c = 0; c < grid->column_count; c++) {
        if (grid_layout_shows(layout, c, first, end)) {
            lines[c] = cell_lines(layout, c, &row->cells[c]);
            tallest = larger(tallest, lines[c].count);
        }
    }
    struct text line = {.arena = grid->arena};
    for (size_t i = 0; i < tallest; i++) {
        for (size_t c = 0; c < grid->column_count; c++) {
            if (i < lines[c].count) {
                put_cell(&line, layout, c, &row->cells[c], lines[c].items[i]);
            }
        }
        end_line(&line, layout, out);
    }
}

static void draw_spanned(const struct grid_layout *layout, const struct grid_row *row, struct text *out)
{
    const char *lead = row->cells[0].text ? row->cells[0].text : "";
    page_hanging(out, layout->indent, lead, second_column(layout), row->span);
}

static void draw_block(const struct grid_layout *layout, size_t first, size_t end, bool is_last, struct text *out)
{
    const struct grid *grid = layout->grid;
    draw_heads(layout, first, end, out);
    for (size_t r = 0; r < grid->row_count; r++) {
        const struct grid_row *row = &grid->rows[r];
        if (row->group) {
            page_paragraph(out, layout->indent - 2, row->group);
        }
        if (row->span) {
            draw_spanned(layout, row, out);
        } else {
            draw_cells(layout, row, first, end, out);
        }
        if (row->below && is_last) {
            page_paragraph(out, second_column(layout), row->below);
        }
    }
}

static bool has_groups(const struct grid *grid)
{
    for (size_t r = 0; r < grid->row_count; r++) {
        if (grid->rows[r].group) {
            return true;
        }
    }
    return false;
}

void grid_draw(const struct grid *grid, size_t indent, struct text *out)
{
    struct grid_layout layout = grid_layout_fit(grid, indent + (has_groups(grid) ? 2 : 0));
    size_t first = layout.lead;
    do {
        const size_t end = grid_layout_place(&layout, first);
        if (first > layout.lead) {
            page_blank(out);
        }
        draw_block(&layout, first, end, end >= grid->column_count, out);
        first = end;
    } while (first < grid->column_count);
}
