/* The ideal-gas part alpha0(tau, delta) = ln delta + f(tau) of a reference equation. */
#ifndef TAREWRIGHT_FLUID_IDEAL_PART_H
#define TAREWRIGHT_FLUID_IDEAL_PART_H

#include "fluid/spec.h"

/* f and its derivatives, dimensionless: `t` is tau f', `tt` is tau^2 f''. */
struct ideal_part {
    double value, t, tt;
};

/* The sum of the equation's ideal terms at tau = T_r / T, greater than zero. `ln delta` is not in it. */
struct ideal_part ideal_part_at(const struct reference_spec *equation, double tau);

/* Ideal-gas heat capacity at constant pressure over R: 1 - tau^2 f''. */
double ideal_part_heat_capacity_r(const struct reference_spec *equation, double temperature);

#endif
