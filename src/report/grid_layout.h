/* Where a grid's columns stand on the page: widths, gap, and the blocks a wide grid is drawn in.
 *
 * Ownership: a layout lives in its grid's arena.
 */
#ifndef TAREWRIGHT_REPORT_GRID_LAYOUT_H
#define TAREWRIGHT_REPORT_GRID_LAYOUT_H

#include "report/grid.h"

struct grid_layout {
    const struct grid *grid;
    size_t indent, gap;
    size_t lead;   /* so many first columns are repeated in every block */
    size_t *limit; /* [column_count]: what words are wrapped to */
    size_t *words; /* [column_count]: columns the widest words take */
    size_t *left;  /* [column_count]: columns before the point */
    size_t *width; /* [column_count]: the whole column, 0 for one that is not drawn */
    size_t *start; /* [column_count]: where a column begins in the block placed last */
};

/* Widths and a gap at which the whole grid fits the page from column `indent` on; else the narrowest words, and what to
 * repeat in each block. */
struct grid_layout grid_layout_fit(const struct grid *grid, size_t indent);

/* Places the block that begins with column `first`, behind the repeated ones; the column behind its last: at least one
 * column is in it, and as many as fit. */
size_t grid_layout_place(struct grid_layout *layout, size_t first);

/* Whether column `c` is drawn in the block of columns first..end. */
bool grid_layout_shows(const struct grid_layout *layout, size_t c, size_t first, size_t end);

/* Whether a cell of column `c` is aligned on its point, and the columns its number takes before the point, or before
 * what else follows its first digits. */
bool grid_cell_is_aligned(const struct grid_column *column, const struct grid_cell *cell);
size_t grid_columns_before_point(const char *number);

#endif
