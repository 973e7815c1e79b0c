/* What a charge holds at rest where some of it is solid: the settled pressure over ice or dry ice, and the amounts.
 */
#ifndef TAREWRIGHT_FILLING_SOLID_CONTENTS_H
#define TAREWRIGHT_FILLING_SOLID_CONTENTS_H

#include "filling/sheet.h"

/* A table of the temperatures (K, rising) at which a solid is there, by `method`, with the temperature below which the
 * first forms, a hand check at the coldest, and a warning that the table of settled pressures has the fluid alone.
 * Nothing where no solid forms. */
void tell_solid_contents(const struct sheet_run *run, struct method_run *method, double mass,
                         const double temperatures[], size_t count);

#endif
