#include "report/grid.h"

#include "report/page.h"

#include <string.h>

/* Blanks between columns; the least columns that words are wrapped to, a head is, and what stands beside a lead is. */
enum { WIDEST_GAP = 3, NARROWEST_GAP = 2, NARROWEST_WORDS = 24, NARROWEST_HEAD = 8, NARROWEST_SPAN = 20 };

/* Words wrapped to fewer columns than this are worth a narrower gap. */
enum { TIGHT_WORDS = 36 };

/* A grid drawn in blocks repeats at most so many columns. */
enum { MOST_REPEATED = 3 };

struct layout {
    const struct grid *grid;
    size_t indent, gap;
    size_t lead;          /* so many first columns are repeated in every block */
    size_t *limit;        /* [column_count]: what words are wrapped to */
    size_t *words;        /* [column_count]: columns the widest words take */
    size_t *left, *width; /* [column_count]: columns before the point; the whole column, 0 for one that is not drawn */
    size_t *start;        /* [column_count]: where a column begins in the block at hand */
};

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

/* Columns of a number before its point, or before what else follows its first digits. */
static size_t columns_before_point(const char *number)
{
    return strspn(number, "+-0123456789");
}

static size_t longest_piece(const char *name)
{
    size_t longest = 0;
    while (*name != '\0') {
        size_t bytes = strcspn(name, "- ");
        bytes += name[bytes] == '-';
        longest = larger(longest, text_columns(name, bytes));
        name += bytes;
        name += strspn(name, " ");
    }
    return longest;
}

static bool is_aligned(const struct grid_column *column, const struct grid_cell *cell)
{
    return cell->text && cell->is_number && column->align == GRID_NUMBERS;
}

/* Measures column `c`: aligned numbers need room on both sides of the point, words are wrapped. */
static void measure_body(struct layout *layout, size_t c)
{
    const struct grid *grid = layout->grid;
    size_t right = 0, words = 0;
    for (size_t r = 0; r < grid->row_count; r++) {
        const struct grid_cell *cell = &grid->rows[r].cells[c];
        if (is_aligned(&grid->columns[c], cell)) {
            const size_t before = columns_before_point(cell->text);
            layout->left[c] = larger(layout->left[c], before);
            right = larger(right, page_columns(cell->text) - before + (cell->mark ? page_columns(cell->mark) : 0));
        } else if (cell->text) {
            words = larger(words, page_wrapped_columns(cell->text, layout->limit[c]));
        }
    }
    layout->words[c] = words;
    layout->width[c] = larger(layout->left[c] + right, words);
    if (words > layout->left[c] + right) {
        layout->left[c] = words - right;
    }
}

static void measure_head(struct layout *layout, size_t c)
{
    const struct grid_column *column = &layout->grid->columns[c];
    const size_t body = layout->width[c];
    if (column->name) {
        const size_t columns = page_columns(column->name);
        const size_t least = column->align == GRID_WORDS ? NARROWEST_WORDS : NARROWEST_HEAD;
        const size_t wanted = columns < least ? columns : least;
        layout->width[c] = larger(layout->width[c], larger(wanted, longest_piece(column->name)));
    }
    if (column->unit) {
        layout->width[c] = larger(layout->width[c], page_columns(column->unit));
    }
    const size_t most = PAGE_WIDTH / 2;
    layout->width[c] = layout->width[c] < most ? layout->width[c] : larger(most, body);
    if (column->align == GRID_NUMBERS) {
        layout->left[c] += layout->width[c] - body;
    }
}

static void measure(struct layout *layout, size_t c)
{
    layout->left[c] = 0;
    measure_body(layout, c);
    measure_head(layout, c);
}

/* Whether column `c` is drawn in the block of columns first..end. */
static bool is_in_block(const struct layout *layout, size_t c, size_t first, size_t end)
{
    return layout->width[c] != 0 && (c < layout->lead || (c >= first && c < end));
}

/* Sets where the columns of a block begin; the columns taken in all. */
static size_t place_columns(struct layout *layout, size_t first, size_t end)
{
    size_t reach = 0;
    for (size_t c = 0; c < end; c++) {
        if (is_in_block(layout, c, first, end)) {
            layout->start[c] = reach == 0 ? 0 : reach + layout->gap;
            reach = layout->start[c] + layout->width[c];
        }
    }
    return reach;
}

/* The column whose words are widest and can still be wrapped more tightly; column_count when there is none.
 * *next is the width of the next widest. */
static size_t widest_words(const struct layout *layout, size_t *next)
{
    size_t widest = layout->grid->column_count;
    *next = NARROWEST_WORDS;
    for (size_t c = 0; c < layout->grid->column_count; c++) {
        const size_t words = layout->words[c];
        if (words <= NARROWEST_WORDS || words < layout->width[c]) {
            continue;
        }
        if (widest == layout->grid->column_count || words > layout->words[widest]) {
            *next = widest == layout->grid->column_count ? *next : larger(*next, layout->words[widest]);
            widest = c;
        } else {
            *next = larger(*next, words);
        }
    }
    return widest;
}

/* Takes `excess` columns from the widest words, but no more than down to the next widest, or one. */
static bool tighten(struct layout *layout, size_t excess)
{
    size_t next;
    const size_t c = widest_words(layout, &next);
    if (c == layout->grid->column_count) {
        return false;
    }
    const size_t words = layout->words[c];
    const size_t least = next < words ? next : words - 1;
    layout->limit[c] = words > excess + least ? words - excess : least;
    measure(layout, c);
    return true;
}

static bool is_same_text(const char *a, const char *b)
{
    return a == b || (a && b && strcmp(a, b) == 0);
}

static bool is_row_told_apart(const struct grid *grid, size_t row, size_t columns)
{
    for (size_t r = 0; r < row; r++) {
        size_t same = 0;
        while (same < columns && is_same_text(grid->rows[r].cells[same].text, grid->rows[row].cells[same].text)) {
            same++;
        }
        if (same == columns) {
            return false;
        }
    }
    return true;
}

/* How many first columns tell all rows apart, when that is few columns of no more than half the page; else one. */
static size_t telling_columns(const struct layout *layout)
{
    const struct grid *grid = layout->grid;
    size_t taken = 0;
    for (size_t columns = 1; columns <= MOST_REPEATED && columns < grid->column_count; columns++) {
        taken += layout->width[columns - 1] + layout->gap;
        size_t row = 0;
        while (row < grid->row_count && is_row_told_apart(grid, row, columns)) {
            row++;
        }
        if (row == grid->row_count) {
            return taken <= PAGE_WIDTH / 2 ? columns : 1;
        }
    }
    return 1;
}

/* Wraps words as loosely as the whole grid fits the page with that gap; false when it does not fit at all. */
static bool fits_with_gap(struct layout *layout, size_t gap)
{
    const size_t room = PAGE_WIDTH - layout->indent;
    for (size_t c = 0; c < layout->grid->column_count; c++) {
        layout->limit[c] = room;
        measure(layout, c);
    }
    layout->gap = gap;
    layout->lead = 1;
    size_t reach;
    do {
        reach = place_columns(layout, 1, layout->grid->column_count);
    } while (reach > room && tighten(layout, reach - room));
    return reach <= room;
}

static bool has_tight_words(const struct layout *layout)
{
    for (size_t c = 0; c < layout->grid->column_count; c++) {
        if (layout->limit[c] < TIGHT_WORDS) {
            return true;
        }
    }
    return false;
}

/* Finds widths and a gap at which the whole grid fits the page; or else the narrowest words and what to repeat. */
static void fit(struct layout *layout)
{
    if (fits_with_gap(layout, WIDEST_GAP) && !has_tight_words(layout)) {
        return;
    }
    if (!fits_with_gap(layout, NARROWEST_GAP)) {
        layout->gap = WIDEST_GAP;
        layout->lead = telling_columns(layout);
    }
}

static void pad_to(struct text *line, size_t column)
{
    const size_t now = line->bytes ? text_columns(line->bytes, line->length) : 0;
    if (now < column) {
        text_pad(line, column - now);
    }
}

static void put(struct text *line, const struct layout *layout, size_t column, const char *words)
{
    if (*words != '\0') {
        pad_to(line, layout->indent + column);
        text_add(line, words, strlen(words));
    }
}

static void end_line(struct text *line, const struct layout *layout, struct text *out)
{
    page_line(out, layout->indent + 2, line->bytes ? line->bytes : "");
    line->length = 0;
    if (line->bytes) {
        line->bytes[0] = '\0';
    }
}

/* A head's word or a unit: over words at the left, over numbers at the right. */
static void put_head(struct text *line, const struct layout *layout, size_t c, const char *words)
{
    const size_t columns = page_columns(words);
    const bool is_right = layout->grid->columns[c].align == GRID_NUMBERS && columns < layout->width[c];
    put(line, layout, layout->start[c] + (is_right ? layout->width[c] - columns : 0), words);
}

static void draw_heads(const struct layout *layout, size_t first, size_t end, struct text *out)
{
    const struct grid *grid = layout->grid;
    struct page_lines *heads = arena_alloc(grid->arena, grid->column_count, sizeof *heads);
    size_t tallest = 0;
    bool has_units = false;
    for (size_t c = 0; c < grid->column_count; c++) {
        if (is_in_block(layout, c, first, end) && grid->columns[c].name) {
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
        if (is_in_block(layout, c, first, end) && grid->columns[c].unit) {
            put_head(&line, layout, c, grid->columns[c].unit);
        }
    }
    if (has_units) {
        end_line(&line, layout, out);
    }
}

static void put_cell(struct text *line, const struct layout *layout, size_t c, const struct grid_cell *cell,
                     const char *words)
{
    size_t shift = 0;
    if (is_aligned(&layout->grid->columns[c], cell)) {
        shift = layout->left[c] - columns_before_point(words);
    } else if (layout->grid->columns[c].align == GRID_NUMBERS) {
        shift = layout->width[c] - page_columns(words);
    }
    put(line, layout, layout->start[c] + shift, words);
    if (cell->mark) {
        text_add(line, cell->mark, strlen(cell->mark));
    }
}

static struct page_lines cell_lines(const struct layout *layout, size_t c, const struct grid_cell *cell)
{
    if (!cell->text) {
        return (struct page_lines){0};
    }
    return page_wrap(layout->grid->arena, cell->text, layout->width[c], false);
}

/* Where what stands beside the first column begins, leaving words room enough to be wrapped. */
static size_t second_column(const struct layout *layout)
{
    const size_t furthest = PAGE_WIDTH - NARROWEST_SPAN;
    const size_t begin = layout->indent + (layout->width[0] == 0 ? 0 : layout->width[0] + layout->gap);
    return begin < furthest ? begin : furthest;
}

static void draw_cells(const struct layout *layout, const struct grid_row *row, size_t first, size_t end,
                       struct text *out)
{
    const struct grid *grid = layout->grid;
    struct page_lines *lines = arena_alloc(grid->arena, grid->column_count, sizeof *lines);
    size_t tallest = 1;
    for (size_t c = 0; c < grid->column_count; c++) {
        if (is_in_block(layout, c, first, end)) {
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

static void draw_spanned(const struct layout *layout, const struct grid_row *row, struct text *out)
{
    const char *lead = row->cells[0].text ? row->cells[0].text : "";
    page_hanging(out, layout->indent, lead, second_column(layout), row->span);
}

static void draw_block(const struct layout *layout, size_t first, size_t end, bool is_last, struct text *out)
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

/* The end of the block that begins with column `first`: at least one column, and as many as fit. */
static size_t block_end(struct layout *layout, size_t first)
{
    const size_t room = PAGE_WIDTH - layout->indent;
    size_t end = first + 1;
    while (end < layout->grid->column_count && place_columns(layout, first, end + 1) <= room) {
        end++;
    }
    place_columns(layout, first, end);
    return end;
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
    struct layout layout = {.grid = grid, .indent = indent + (has_groups(grid) ? 2 : 0)};
    layout.limit = arena_alloc(grid->arena, grid->column_count, sizeof *layout.limit);
    layout.words = arena_alloc(grid->arena, grid->column_count, sizeof *layout.words);
    layout.left = arena_alloc(grid->arena, grid->column_count, sizeof *layout.left);
    layout.width = arena_alloc(grid->arena, grid->column_count, sizeof *layout.width);
    layout.start = arena_alloc(grid->arena, grid->column_count, sizeof *layout.start);
    fit(&layout);
    size_t first = layout.lead;
    do {
        const size_t end = block_end(&layout, first);
        if (first > layout.lead) {
            page_blank(out);
        }
        draw_block(&layout, first, end, end >= grid->column_count, out);
        first = end;
    } while (first < grid->column_count);
}
