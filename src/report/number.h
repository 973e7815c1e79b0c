/* Numbers as readers see them.
 *
 * Ownership: texts are made in the arena given.
 */
#ifndef TAREWRIGHT_REPORT_NUMBER_H
#define TAREWRIGHT_REPORT_NUMBER_H

#include "result/result.h"

/* An SI value in the look's unit and digits; a dash when that is not finite. A fixed number of decimals turns into
 * powers of ten from 1e15 on; significant digits do so below 1e-4 and where the number would need digits it does not
 * have. Zero has no sign. */
const char *number_shown(struct arena *arena, const struct look *look, double si);

/* As number_shown for a difference of two values: the unit's zero plays no part. */
const char *number_shown_difference(struct arena *arena, const struct look *look, double si);

/* An uncertainty in the look's unit, with the two significant digits it deserves. */
const char *number_spread(struct arena *arena, const struct look *look, double si);

/* The unit's symbol as a reader sees it; "1" for a plain number. */
const char *number_unit(const struct look *look);

/* An SI value in the look's unit with full precision: the shortest text, of 15 to 17 significant digits without closing
 * zeros, that converts back to the same SI value where one does; empty when not finite. */
const char *number_exact(struct arena *arena, const struct look *look, double si);

#endif
