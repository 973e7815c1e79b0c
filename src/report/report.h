/* Renderers of the result tree: the listing for people, JSON and CSV for programs.
 *
 * Ownership: texts are built in the arena of the struct text given.
 */
#ifndef TAREWRIGHT_REPORT_REPORT_H
#define TAREWRIGHT_REPORT_REPORT_H

#include "base/text.h"
#include "result/result.h"

/* The listing: plain text, at most 100 columns (a longer word of the deck's own is wrapped). */
void report_listing(const struct result *result, struct text *out);

/* The data and the sources of a result, as the listing draws them, without a heading. */
void report_data(const struct result *result, struct text *out);

/* The same tree as JSON, SI, 17 significant digits, a closing newline; a pressure shown as gauge is Pa above that
 * gauge's zero. False when memory ran out. */
bool report_json(const struct result *result, struct text *out);

/* One table as comma-separated values: a header row of `name [unit]`, units as shown, full precision (the shortest text
 * that reads back as the same number); empty cells are empty fields. */
void report_csv(const struct table *table, struct text *out);

#endif
