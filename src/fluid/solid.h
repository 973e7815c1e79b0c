/* A pure substance as a solid, by its sublimation line.
 *
 *   f = p_sub phi(T, p_sub) exp(v (p - p_sub) / (R T))
 *
 * with phi of the pure vapour by whichever method answers for the fluid, so that a solid is compared with that method's
 * own fugacities; the exponential is the Poynting correction with a constant molar volume v (Prausnitz, Lichtenthaler,
 * de Azevedo, Molecular Thermodynamics, section on the fugacity of a pure solid). Nothing is allocated.
 */
#ifndef TAREWRIGHT_FLUID_SOLID_H
#define TAREWRIGHT_FLUID_SOLID_H

#include "fluid/phase.h"

/* Above the triple point the line is drawn out by no more than this part: what a high pressure freezes there. */
#define SOLID_ABOVE_TRIPLE 0.03

struct solid_state {
    double sublimation_pressure; /* Pa */
    double ln_phi;               /* of the saturated vapour */
    double poynting;             /* the exponential, 1 */
    double ln_fugacity;          /* ln(f / Pa) */
    double molar_volume;         /* m3/mol */
    /* Against the ideal gas at the same temperature, J/mol: -R T^2 dln f/dT at constant pressure. */
    double departure_enthalpy;
};

/* The sublimation pressure (Pa) at T (K), and dln p/dT (1/K). */
double solid_sublimation_pressure(const struct solid_spec *solid, double temperature, double *slope);

/* The melting pressure (Pa) at T (K) by one part of the line. */
double solid_melting_pressure(const struct melting_part *part, double temperature);

/* The temperature (K) at which that part, or the sublimation line, has `pressure` (Pa), to the last digits; NaN where
 * it has not between its ends. */
double solid_melting_temperature(const struct melting_part *part, double pressure);
double solid_sublimation_temperature(const struct solid_spec *solid, double pressure);

/* Whether the substance can be a solid at this temperature at all, as far as the line says. */
bool solid_exists_at(const struct solid_spec *solid, double temperature);

/* The solid at the temperature set and `pressure` (Pa); `pure` is the substance's own fluid by the method asked.
 * ANSWER_ OUT_OF_RANGE above solid_exists_at, ANSWER_NO_SUCH_ROOT where the method has no vapour at the sublimation
 * pressure. */
enum answer solid_at(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                     struct solid_state *out);

#endif
