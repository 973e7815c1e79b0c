/* The sublimation line in a saturation sheet: below the triple point a pure gas stands over its solid.
 */
#ifndef TAREWRIGHT_FILLING_SUBLIMATION_LINE_H
#define TAREWRIGHT_FILLING_SUBLIMATION_LINE_H

#include "filling/sheet.h"

/* A table, by `method`, of the swept temperatures of a pure gas below its triple point: the published sublimation
 * pressure, with the densities, the heat of sublimation and the fugacity; and the offset at the triple point between
 * that line and the method's own saturation line. Nothing without such temperatures, or where no solid is known. */
void tell_sublimation_line(const struct sheet_run *run, struct method_run *method);

#endif
