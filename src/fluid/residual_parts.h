/* One published residual term taken apart: n tau^t W(tau) delta^d E(delta), with W and E told apart from the powers, so
 * that sums of terms can share them. The nonanalytic terms are of no such form and have no parts. */
#ifndef TAREWRIGHT_FLUID_RESIDUAL_PARTS_H
#define TAREWRIGHT_FLUID_RESIDUAL_PARTS_H

#include "fluid/spec.h"

#include <math.h>
#include <stdbool.h>
#include <stddef.h>

/* Integer powers of delta below this one come from a table; all others by exp(d ln delta). */
#define TABLE_POWERS  32
#define GENERAL_POWER TABLE_POWERS

/* E(delta). */
enum envelope_kind { ENVELOPE_NONE, ENVELOPE_EXPONENTIAL, ENVELOPE_GAUSSIAN };

struct residual_envelope {
    enum envelope_kind kind;
    double strength; /* g, or eta */
    double l;        /* EXPONENTIAL: exp(-g delta^l) */
    unsigned l_slot;
    double epsilon;      /* GAUSSIAN: exp(-eta (delta - epsilon)^2 - slope (delta - gamma)) */
    double slope, gamma; /* zero but for the special exponential */
};

/* W(tau), the factor of a term that depends on tau alone beyond tau^t. */
enum factor_kind { FACTOR_ONE, FACTOR_GAUSSIAN, FACTOR_INVERSE_GAUSSIAN, FACTOR_EXPONENTIAL };

struct residual_factor {
    enum factor_kind kind;
    double beta, gamma, b; /* the Gaussians */
    double g, l;           /* EXPONENTIAL: exp(-g tau^l) */
};

struct residual_parts {
    struct residual_envelope envelope;
    struct residual_factor factor;
    double n, t, d;
};

/* The parts of a term of any kind but NONANALYTIC. */
struct residual_parts residual_take_apart(const struct residual_term *term);

bool residual_same_envelope(const struct residual_envelope *a, const struct residual_envelope *b);
bool residual_same_factor(const struct residual_factor *a, const struct residual_factor *b);

/* The place of delta^d in the table of powers, GENERAL_POWER where it has none. */
unsigned residual_power_slot(double d);

/* W and its logarithmic derivatives tau W'/W and tau^2 (ln W)''. */
struct factor_value {
    double value, first, second;
};

struct factor_value residual_factor_at(const struct residual_factor *factor, double tau, double log_tau);

/* ---- what is evaluated at every density ------------------------------------------------------------------------ */

/* delta^0 to delta^(end - 1); products of halves keep the chain of multiplications short. */
static inline void residual_fill_powers(double *table, unsigned end, double delta)
{
    table[0] = 1.0;
    table[1] = delta;
    for (unsigned k = 2; k < end; k++) {
        table[k] = table[k / 2] * table[k - k / 2];
    }
}

static inline double residual_power_of(const double *table, unsigned slot, double d, double delta)
{
    return slot < GENERAL_POWER ? table[slot] : exp(d * log(delta));
}

/* An envelope E with delta E'/E in `first` and delta^2 E''/E in `second`. */
struct envelope_value {
    double value, first, second;
};

static inline struct envelope_value residual_envelope_at(const struct residual_envelope *envelope, const double *table,
                                                         double delta)
{
    switch (envelope->kind) {
    case ENVELOPE_EXPONENTIAL: {
        const double x = envelope->strength * residual_power_of(table, envelope->l_slot, envelope->l, delta);
        const double first = -envelope->l * x;
        return (struct envelope_value){exp(-x), first, first * (first + envelope->l - 1.0)};
    }
    case ENVELOPE_GAUSSIAN: {
        const double x = delta - envelope->epsilon;
        const double first = -(2.0 * envelope->strength * x + envelope->slope) * delta;
        return (struct envelope_value){exp(-envelope->strength * x * x - envelope->slope * (delta - envelope->gamma)),
                                       first, first * first - 2.0 * envelope->strength * delta * delta};
    }
    case ENVELOPE_NONE:
        break;
    }
    return (struct envelope_value){1.0, 0.0, 0.0};
}

#endif
