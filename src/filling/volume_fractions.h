/* Mixtures written by volume at a stated state: fractions of the volumes that the components have by themselves there.
 */
#ifndef TAREWRIGHT_FILLING_VOLUME_FRACTIONS_H
#define TAREWRIGHT_FILLING_VOLUME_FRACTIONS_H

#include "filling/sheet.h"

/* The same fluid in mole fractions, x_i proportional to phi_i / v_i with the molar volumes v_i of the method at the
 * fluid's state; the fluid itself where its fractions need no method. NULL where the method has no volume for a
 * component. Ownership: in the arena. */
const struct case_fluid *fluid_by_amount(const struct case_fluid *fluid, const char *method, struct arena *arena);

#endif
