/* A closed vessel at given internal energy and volume: temperature, pressure, phases and, of a pure substance whose
 * solid is known, how much of it is solid. Energies count from the zeros that caloric.h takes.
 *
 * Method-agnostic; nothing is allocated after energy_vessel_create.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_ENERGY_VESSEL_H
#define TAREWRIGHT_EQUILIBRIUM_ENERGY_VESSEL_H

#include "equilibrium/mixture_vessel.h"
#include "fluid/solid.h"

struct energy_part {
    double amount, molar_volume; /* mol, m3/mol */
    double enthalpy;             /* J/mol */
    const double *x;             /* [count], mole fractions; NULL: pure */
};

struct energy_state {
    double temperature, pressure;
    double internal_energy;                  /* J, of all that is there, from its parts */
    size_t phase_count;                      /* of the fluid */
    struct energy_part parts[MOST_PHASES];   /* the lightest first */
    double solid_amount, solid_molar_volume; /* mol, m3/mol; 0: no solid */
};

struct energy_vessel;

/* K: where solid, liquid and vapour of a pure substance have one fugacity by the method, with its sublimation line; 0
 * where no solid is looked for. */
double energy_vessel_triple(const struct energy_vessel *vessel);

/* `at_t` is used as workspace: its temperature changes with every question. `solid` NULL: what might freeze is not
 * looked for; of a mixture it never is. */
struct energy_vessel *energy_vessel_create(const struct fluid *fluid, struct fluid_at_t *at_t, double volume,
                                           const struct solid_spec *solid, struct arena *arena);

/* n[] mol at a temperature; of a pure substance below its triple point vapour and solid. The parts point into the
 * vessel until its next question. ANSWER_CANNOT where a component has no ideal-gas part. */
enum answer energy_vessel_at_t(struct energy_vessel *vessel, double temperature, const double n[],
                               struct energy_state *out);

/* n[] mol with internal energy `energy`; the search starts near `start` (K). At its triple point a pure substance keeps
 * one temperature while solid, liquid and vapour share the energy. The state's energy is the one asked for to 1e-11 of
 * n R T. ANSWER_OUT_OF_RANGE where no temperature has it within the reach of the method. */
enum answer energy_vessel_at_u(struct energy_vessel *vessel, double energy, const double n[], double start,
                               struct energy_state *out);

#endif
