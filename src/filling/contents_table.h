/* Tables of a filled vessel over temperature: what every sheet about a charge shows.
 *
 * Ownership: rows and words live in the result's arena.
 */
#ifndef TAREWRIGHT_FILLING_CONTENTS_TABLE_H
#define TAREWRIGHT_FILLING_CONTENTS_TABLE_H

#include "filling/sheet.h"

/* "vapour + liquid" and the like. */
const char *contents_words(const struct sheet_run *run, const struct contents *contents);

/* A table with the columns temperature, pressure, gauge-pressure, state, liquid-volume, ullage and, where the vessel
 * has a test pressure, margin (to it). Rows are added with contents_table_row. */
struct table *contents_table_begin(const struct sheet_run *run, const char *title, const char *method);

/* One row for `mass` kg at `temperature`; where the method has no answer the row says so and a warning is given.
 * Numbers outside the method's published range, and states below the triple point, are warned of. */
enum answer contents_table_row(const struct sheet_run *run, struct table *table, struct method_run *method, double mass,
                               double temperature);

/* The same row for contents found before; `contents` counts for ANSWER_OK only. */
void contents_table_put(const struct sheet_run *run, struct table *table, const struct method_run *method,
                        double temperature, enum answer answer, const struct contents *contents);

/* Several temperatures (K), sorted upwards and without repetition; `count` of them are written back. */
size_t sorted_temperatures(double temperatures[], size_t count);

/* Warns once a sheet where `temperature` lies below the triple point of the sheet's gas. */
void warn_below_triple(const struct sheet_run *run, double temperature);

#endif
