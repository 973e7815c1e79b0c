/* A pure substance as a solid, by its sublimation and melting lines.
 *
 *   f = p_line phi(T, p_line) exp(v (p - p_line) / (R T))
 *
 * with phi of the pure fluid on the line, vapour over a solid that sublimes and liquid beside one that melts, by
 * whichever method answers for the fluid, so that a solid is compared with that method's own fugacities; the
 * exponential is the Poynting correction with a constant molar volume v (Prausnitz, Lichtenthaler, de Azevedo,
 * Molecular Thermodynamics, section on the fugacity of a pure solid). At the triple point, where one line goes over
 * into the other, f steps by as much as the method's vapour and liquid part there. Nothing is allocated.
 */
#ifndef TAREWRIGHT_FLUID_SOLID_H
#define TAREWRIGHT_FLUID_SOLID_H

#include "fluid/phase.h"

/* Above the triple point the sublimation line is drawn out by no more than this part, where no melting line says what
 * a high pressure freezes there. */
#define SOLID_ABOVE_TRIPLE 0.03

enum solid_line {
    SOLID_NOT_KNOWN, /* no solid that the lines know of */
    SOLID_SUBLIMES,  /* by the sublimation line */
    SOLID_MELTS      /* by the melting line, above the triple point */
};

struct solid_state {
    enum solid_line line;
    double line_pressure; /* Pa, of the line at this temperature */
    double ln_phi;        /* of the vapour, or liquid, on the line */
    double poynting;      /* the exponential, 1 */
    double ln_fugacity;   /* ln(f / Pa) */
    double molar_volume;  /* m3/mol */
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

/* The line that tells of the solid at this temperature (K), by a method that knows liquids or not. */
enum solid_line solid_line_at(const struct solid_spec *solid, bool knows_liquids, double temperature);

/* The solid at the temperature set and `pressure` (Pa); `pure` is the substance's own fluid by the method asked.
 * ANSWER_OUT_OF_RANGE where solid_line_at knows of none, ANSWER_NO_SUCH_ROOT where the method has no such vapour or
 * liquid on the line. */
enum answer solid_at(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                     struct solid_state *out);

/* The same by the sublimation line alone, drawn out where there is a melting line too: of what stands under hardly any
 * pressure the fugacity has no step then. ANSWER_OUT_OF_RANGE further above the triple point. */
enum answer solid_by_sublimation(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                                 struct solid_state *out);

#endif
