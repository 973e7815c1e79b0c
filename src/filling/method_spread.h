/* How far the methods of a sheet agree: one number at each swept state, method beside method, and their spread. */
#ifndef TAREWRIGHT_FILLING_METHOD_SPREAD_H
#define TAREWRIGHT_FILLING_METHOD_SPREAD_H

#include "filling/sheet.h"

/* The compressibility factor of the whole at each point by each method; NaN where there is no answer. */
struct method_spread;

/* For `points` states and the methods that serve, [method_count], lead first; in the run's arena. */
struct method_spread *method_spread_create(const struct sheet_run *run, struct method_run *const methods[],
                                           size_t method_count, size_t points);

/* What one method found at one point; `is_inside` its range. */
void method_spread_note(struct method_spread *spread, size_t method, size_t point, double Z, bool is_inside);

/* What is swept besides the temperature, all its values at the first temperature, then at the next. */
struct spread_axis {
    const char *name;
    struct look look;
    size_t count;
    const double *values; /* [count] */
};

/* A table of them, with the largest difference between two methods by part of the lead's value: of those inside their
 * range, and without the methods that are for comparison only. Nothing with one method alone. */
void method_spread_tell(const struct method_spread *spread, const struct spread_axis *second);

#endif
