/* The melting line in a saturation sheet: where a pure gas stands over its solid under pressure.
 */
#ifndef TAREWRIGHT_FILLING_MELTING_LINE_H
#define TAREWRIGHT_FILLING_MELTING_LINE_H

#include "filling/sheet.h"

/* Where the sheet shows it, a table of the melting pressures at the swept temperatures, or of the melting and
 * sublimation temperatures at the swept pressures, as published; by no method. The sheet says so where there is no
 * such line, or no swept value lies on it. */
void tell_melting_line(const struct sheet_run *run);

#endif
