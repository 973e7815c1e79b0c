/* What is not known of the fluid a method is asked about, and has to be said beside its numbers.
 */
#ifndef TAREWRIGHT_FILLING_PAIR_WARNINGS_H
#define TAREWRIGHT_FILLING_PAIR_WARNINGS_H

#include "filling/sheet.h"

/* Of one sheet and method: the pairs whose interaction is zero for want of data, in one warning; the very light gases
 * whose attraction it takes from the acentric factor, in another. Components without a share count for nothing.
 * Nothing where the method has no fluid. The method's temperature changes. */
void warn_pairs(struct sheet_run *run, struct method_run *method);

#endif
