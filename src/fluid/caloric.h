/* Caloric properties of one phase by any method: the method's residual properties, and the ideal-gas part that is
 * published with each component's reference equation. */
#ifndef TAREWRIGHT_FLUID_CALORIC_H
#define TAREWRIGHT_FLUID_CALORIC_H

#include "fluid/phase.h"

/* Per mole of the phase. Energies and the entropy count from the zeros that the components' ideal terms carry; the
 * entropy holds that of ideal mixing. */
struct caloric {
    double internal_energy, enthalpy; /* J/mol */
    double entropy;                   /* J/(mol K) */
    double heat_capacity_v;           /* J/(mol K) */
    double heat_capacity_p;           /* J/(mol K) */
    double speed_of_sound;            /* m/s */
};

/* The ideal gas of the amounts n at the temperature set and `pressure` (Pa); without a speed of sound. ANSWER_CANNOT
 * where a component that is present has no ideal terms. */
enum answer caloric_ideal(const struct fluid_at_t *at_t, double pressure, const double n[], struct caloric *out);

/* A phase that phase_tp or phase_tv gave for the amounts n with PHASE_RESIDUAL. ANSWER_CANNOT as above;
 * ANSWER_OUT_OF_RANGE where it is not mechanically stable. Nothing is allocated. The relations are those of any
 * fundamental equation: Span, Multiparameter Equations of State (2000), table 3.10. */
enum answer caloric_of_phase(const struct fluid_at_t *at_t, const double n[], const struct phase *phase,
                             struct caloric *out);

/* Both in one, at `volume` (m3, for all of n). */
enum answer caloric_at_volume(const struct fluid_at_t *at_t, double volume, const double n[], struct caloric *out);

#endif
