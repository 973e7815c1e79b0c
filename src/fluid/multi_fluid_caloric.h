/* Caloric properties of a gas or mixture by a multi-fluid method, ideal part included. */
#ifndef TAREWRIGHT_FLUID_MULTI_FLUID_CALORIC_H
#define TAREWRIGHT_FLUID_MULTI_FLUID_CALORIC_H

#include "fluid/reference_caloric.h"

/* One phase of the amounts n at the temperature set and `volume` (m3, for all of n); molar and per kilogram of it as in
 * struct caloric. The entropy holds that of ideal mixing. ANSWER_CANNOT for another method or a component whose
 * equation has no ideal terms; ANSWER_OUT_OF_RANGE where the phase is not mechanically stable. */
enum answer multi_fluid_caloric(const struct fluid_at_t *at_t, double volume, const double n[], struct caloric *out);

#endif
