/* The end of a fill that is too fast for the contents to share the temperature of the surroundings.
 *
 *   dU/dt = h_s dn/dt - k (T - T_w),  C dT_w/dt = k (T - T_w)
 *
 * with the enthalpy h_s of the supply, kinetic energy left out, and a wall of heat capacity C and conductance k that
 * gives nothing to the surroundings. The gas comes in evenly over the time. Method-agnostic.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_FAST_FILL_H
#define TAREWRIGHT_EQUILIBRIUM_FAST_FILL_H

#include "equilibrium/energy_vessel.h"

struct fast_fill {
    const double *before, *added; /* [count], mol */
    double temperature;           /* K, of contents and wall before */
    double enthalpy;              /* J, of all that is added, by the supply's state */
    double time;                  /* s */
    double wall_heat_capacity;    /* J/K */
    double wall_conductance;      /* W/K */
};

struct fast_fill_end {
    double temperature, wall_temperature, pressure; /* K, K, Pa */
    double energy;                                  /* J, of the contents */
};

/* Without any heat to the wall: U = U_before + h_s n. */
enum answer fast_fill_adiabatic(struct energy_vessel *vessel, size_t count, const struct fast_fill *fill,
                                struct arena *arena, struct fast_fill_end *out);

/* With the wall, integrated by GSL's eighth-order Runge-Kutta-Prince-Dormand pair; ANSWER_FAILED where that takes too
 * many steps. */
enum answer fast_fill_with_wall(struct energy_vessel *vessel, size_t count, const struct fast_fill *fill,
                                struct arena *arena, struct fast_fill_end *out);

#endif
