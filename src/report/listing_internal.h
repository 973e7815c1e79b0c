/* What the files that draw the listing share.
 *
 * Ownership: as report.h.
 */
#ifndef TAREWRIGHT_REPORT_LISTING_INTERNAL_H
#define TAREWRIGHT_REPORT_LISTING_INTERNAL_H

#include "base/text.h"
#include "report/grid.h"
#include "result/result.h"

/* Sections are numbered through: deck, inputs, data, methods, one for each sheet, requirements, warnings, cautions. */
enum { SECTION_DECK = 1, SECTION_INPUTS, SECTION_DATA, SECTION_METHODS, SECTION_FIRST_SHEET };
size_t section_of_sheet(size_t sheet); /* sheets are numbered from 1 */
size_t section_of_requirements(const struct result *result);
size_t section_of_warnings(const struct result *result);
size_t section_of_cautions(const struct result *result);

/* Columns at which a section's text begins, and what stands below a title in it. */
enum { SECTION_INDENT = 3, PART_INDENT = 5 };

/* "1 warning", "3 warnings", "no warnings" */
const char *counted(struct arena *arena, size_t count, const char *noun);

/* A number as shown, with its unit behind it unless it is a plain one; a dash stands alone. */
struct grid_cell number_cell(struct arena *arena, const struct look *look, const char *shown);

/* What stands behind a number whose unit is told: "±0.0044", with a mark where first order does not hold; NULL where
 * no input is uncertain. */
const char *spread_words(struct arena *arena, const struct look *look, const struct carried *carried);

/* One line under a table on the uncertainty of its columns, where they have one. */
void listing_table_spreads(const struct table *table, struct text *out);
void listing_budget(const struct budget *budget, struct text *out);

/* Document block and verdict. */
void listing_head(const struct result *result, struct text *out);
void listing_deck(const struct result *result, struct text *out);
void listing_inputs(const struct result *result, struct text *out);
void listing_data(const struct result *result, struct text *out);
/* The data section without its heading. */
void listing_values(const struct result *result, struct text *out);
void listing_methods(const struct result *result, struct text *out);
void listing_sheet(const struct result *result, const struct result_sheet *sheet, size_t section, struct text *out);
/* `warnings` is the number of the section with the warnings. */
void listing_table(const struct table *table, size_t warnings, struct text *out);
void listing_requirements(const struct result *result, struct text *out);
void listing_warnings(const struct result *result, struct text *out);
void listing_cautions(const struct result *result, struct text *out);

#endif
