/* The residual Helmholtz energy alphar(tau, delta) of a reference equation, regrouped for speed.
 *
 * Every kind of term but the nonanalytic one is n tau^t W(tau) delta^d E(delta). At creation the terms are sorted by
 * their envelope E and their power d; at each temperature the tau parts are summed into one coefficient for each
 * (envelope, d), so that an evaluation costs one exponential for each envelope and a short polynomial.
 *
 * Ownership: a struct residual lives in the arena given; the coefficients at one temperature are the caller's block
 * of residual_at_t_size bytes. Nothing here allocates after creation.
 */
#ifndef TAREWRIGHT_FLUID_REFERENCE_RESIDUAL_H
#define TAREWRIGHT_FLUID_REFERENCE_RESIDUAL_H

#include "base/arena.h"
#include "fluid/spec.h"

#include <stdbool.h>
#include <stddef.h>

struct residual;
struct residual_at_t;

/* alphar and its derivatives, each made dimensionless by the powers of tau and delta that belong to it:
 * `d` is delta dalphar/ddelta, `dd` is delta^2 d2alphar/ddelta2, `dt` is delta tau d2alphar/(ddelta dtau). */
struct residual_sums {
    double value, d, dd;
    double t, tt, dt;
};

/* The terms of `spec`, regrouped. */
const struct residual *residual_create(const struct reference_spec *spec, struct arena *arena);

/* Bytes of a struct residual_at_t for these terms. */
size_t residual_at_t_size(const struct residual *residual);

/* The coefficients at tau = T_r / T, finite and greater than zero. */
void residual_set_tau(struct residual_at_t *at_t, const struct residual *residual, double tau);

/* value, d and dd at delta > 0. */
void residual_by_density(const struct residual_at_t *at_t, const struct residual *residual, double delta,
                         struct residual_sums *out);

/* As residual_by_density, and t, tt and dt too. */
void residual_by_both(const struct residual_at_t *at_t, const struct residual *residual, double delta,
                      struct residual_sums *out);

#endif
