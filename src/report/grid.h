/* Columns of text: numbers aligned on their decimal point, words on the left, everything kept on the page.
 *
 * A grid too wide for the page first wraps its widest words more tightly, then is drawn as several blocks that repeat
 * its first columns, as many as tell the rows apart. Ownership: a grid lives in its arena; texts are kept by pointer
 * and must be clean (page_clean).
 */
#ifndef TAREWRIGHT_REPORT_GRID_H
#define TAREWRIGHT_REPORT_GRID_H

#include "base/text.h"

#include <stdbool.h>
#include <stddef.h>

enum grid_align { GRID_WORDS, GRID_NUMBERS };

struct grid_column {
    const char *name; /* NULL: no head */
    const char *unit; /* NULL: none */
    enum grid_align align;
};

struct grid_cell {
    const char *text; /* NULL: nothing */
    bool is_number;   /* begins with digits, aligned on their point in a column of numbers; other texts are set to its
                         right edge */
    const char *mark; /* set directly behind the text; NULL: none */
};

struct grid_row {
    const char *group;       /* NULL; else a line of its own before the row, which begins a group */
    struct grid_cell *cells; /* [column_count] */
    const char *span;        /* words in place of all cells but the first; NULL: none */
    const char *below;       /* words under the row, from its second column on; NULL: none */
};

struct grid {
    struct arena *arena;
    size_t column_count;
    struct grid_column *columns;
    size_t row_count, row_capacity;
    struct grid_row *rows;
};

struct grid *grid_create(struct arena *arena, size_t column_count);

/* A new row of empty cells; the pointer is good until the next row is added. */
struct grid_row *grid_add_row(struct grid *grid);

/* Draws the grid with its left edge at column `indent`; rows of a grid with groups stand two columns further in. */
void grid_draw(const struct grid *grid, size_t indent, struct text *out);

#endif
