/* The phases of a mixture in its vessel: how much of each, how dense and of what.
 */
#ifndef TAREWRIGHT_FILLING_PHASES_TABLE_H
#define TAREWRIGHT_FILLING_PHASES_TABLE_H

#include "filling/sheet.h"

/* A table with a row for each phase of a mixture's contents, [count], each of more than one phase; none without
 * any. */
void add_phases_table(const struct sheet_run *run, const struct method_run *method,
                      const struct contents *const contents[], size_t count);

/* What has condensed at `temperature`, or would condense there in use as the pressure falls: a note and a table with
 * the liquid's composition. Nothing where the fluid has no dew point below its density. */
void add_liquid_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature);

#endif
