#include "report/grid_layout.h"

#include "report/page.h"

#include <string.h>

/* Blanks between columns; the least columns that words are wrapped to and a head of words takes, and other heads do. */
enum { WIDEST_GAP = 3, NARROWEST_GAP = 2, NARROWEST_WORDS = 24, NARROWEST_HEAD = 8 };

/* Words wrapped to fewer columns than this are worth a narrower gap. */
enum { TIGHT_WORDS = 36 };

/* A grid drawn in blocks repeats at most so many columns. */
enum { MOST_REPEATED = 3 };

static size_t larger(size_t a, size_t b)
{
    return a > b ? a : b;
}

size_t grid_columns_before_point(const char *number)
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

bool grid_cell_is_aligned(const struct grid_column *column, const struct grid_cell *cell)
{
    return cell->text && cell->is_number && column->align == GRID_NUMBERS;
}

/* Measures column `c`: aligned numbers need room on both sides of the point, words are wrapped. */
static void measure_body(struct grid_layout *layout, size_t c)
{
    const struct grid *grid = layout->grid;
    size_t right = 0, words = 0;
    for (size_t r = 0; r < grid->row_count; r++) {
        const struct grid_cell *cell = &grid->rows[r].cells[c];
        if (grid_cell_is_aligned(&grid->columns[c], cell)) {
            const size_t before = grid_columns_before_point(cell->text);
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

static void measure_head(struct grid_layout *layout, size_t c)
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

static void measure(struct grid_layout *layout, size_t c)
{
    layout->left[c] = 0;
    measure_body(layout, c);
    measure_head(layout, c);
}

bool grid_layout_shows(const struct grid_layout *layout, size_t c, size_t first, size_t end)
{
    return (c < layout->lead || (c >= first && c < end)) && layout->width[c] != 0;
}

/* Sets where the columns of a block begin; the columns taken in all. */
static size_t place_columns(struct grid_layout *layout, size_t first, size_t end)
{
    size_t reach = 0;
    for (size_t c = 0; c < end; c++) {
        if (grid_layout_shows(layout, c, first, end)) {
            layout->start[c] = reach == 0 ? 0 : reach + layout->gap;
            reach = layout->start[c] + layout->width[c];
        }
    }
    return reach;
}

/* The column whose words are widest and can still be wrapped more tightly; column_count when there is none.
 * *next is the width of the next widest. */
static size_t widest_words(const struct grid_layout *layout, size_t *next)
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
static bool tighten(struct grid_layout *layout, size_t excess)
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
static size_t telling_columns(const struct grid_layout *layout)
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
static bool fits_with_gap(struct grid_layout *layout, size_t gap)
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

static bool has_tight_words(const struct grid_layout *layout)
{
    for (size_t c = 0; c < layout->grid->column_count; c++) {
        if (layout->limit[c] < TIGHT_WORDS) {
            return true;
        }
    }
    return false;
}

struct grid_layout grid_layout_fit(const struct grid *grid, size_t indent)
{
    struct grid_layout layout = {.grid = grid, .indent = indent};
    size_t **const arrays[] = {&layout.limit, &layout.words, &layout.left, &layout.width, &layout.start};
    for (size_t i = 0; i < sizeof arrays / sizeof *arrays; i++) {
        *arrays[i] = arena_alloc(grid->arena, grid->column_count, sizeof **arrays[i]);
    }
    if (fits_with_gap(&layout, WIDEST_GAP) && !has_tight_words(&layout)) {
        return layout;
    }
    if (!fits_with_gap(&layout, NARROWEST_GAP)) {
        layout.gap = WIDEST_GAP;
        layout.lead = telling_columns(&layout);
    }
    return layout;
}

size_t grid_layout_place(struct grid_layout *layout, size_t first)
{
    const size_t room = PAGE_WIDTH - layout->indent;
    size_t end = first + 1;
    while (end < layout->grid->column_count && place_columns(layout, first, end + 1) <= room) {
        end++;
    }
    place_columns(layout, first, end);
    return end;
}
