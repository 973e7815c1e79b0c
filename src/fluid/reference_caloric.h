/* Caloric properties of a pure gas by its reference equation, ideal part included. */
#ifndef TAREWRIGHT_FLUID_REFERENCE_CALORIC_H
#define TAREWRIGHT_FLUID_REFERENCE_CALORIC_H

#include "fluid/fluid.h"

/* Enthalpy and entropy count from the zero that the ideal terms of the equation carry. */
struct caloric {
    double enthalpy;        /* J/mol */
    double entropy;         /* J/(mol K) */
    double heat_capacity_v; /* J/(mol K) */
    double heat_capacity_p; /* J/(mol K) */
    double speed_of_sound;  /* m/s */
};

/* One phase at the temperature set and `molar_volume` (m3/mol). ANSWER_CANNOT for another method or an equation
 * without ideal terms; ANSWER_OUT_OF_RANGE where the phase is not mechanically stable. */
enum answer reference_caloric(const struct fluid_at_t *at_t, double molar_volume, struct caloric *out);

#endif
