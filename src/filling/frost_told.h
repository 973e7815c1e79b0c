/* What a `no solid` criterion found: at what density the fluid freezes, which component does, and what the rule of
 * partial pressures would have said.
 */
#ifndef TAREWRIGHT_FILLING_FROST_TOLD_H
#define TAREWRIGHT_FILLING_FROST_TOLD_H

#include "filling/permissible_internal.h"

/* A table for each such criterion of a permissible-charge sheet, method beside method, and the hand check of the
 * governing method's frost point. */
void tell_frost_limits(const struct permissible *sheet);

/* Lines that show the equality of fugacities at a frost point: of the fluid, and of the solid by its own route. */
void hand_check_frost(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                      double temperature);

/* A table of the frost limits at the sheet's swept temperatures by every method, for a sheet that requires `no solid`;
 * nothing for another. */
void tell_frost_line(struct sheet_run *run);

#endif
