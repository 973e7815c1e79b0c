/* How many fluid phases a mixture forms at given temperature and pressure, and what they hold.
 *
 * Stability first, then successive substitution, then the minimum of the Gibbs energy by second-order steps, and at
 * the end a tangent-plane test of the phases found. Method-agnostic; nothing is allocated.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_SPLIT_H
#define TAREWRIGHT_EQUILIBRIUM_SPLIT_H

#include "equilibrium/stability.h"

/* Largest |ln f_i - ln f_i'| of a split that is reported, between any two phases, of any component present. */
#define SPLIT_LN_F_TOLERANCE 1e-10
/* Smallest tangent-plane distance of a split that is reported is minus this. */
#define SPLIT_LEAST_TPD 1e-10

struct split_phase {
    double fraction;     /* mol by mol of feed; the phases' sum is 1 */
    double molar_volume; /* m3/mol */
    double Z;
    double *x;      /* [count], mole fractions */
    double *ln_phi; /* [count]; finite for absent components too */
};

struct split {
    double temperature, pressure;          /* K, Pa */
    size_t phase_count;                    /* 1 to MOST_PHASES */
    struct split_phase phase[MOST_PHASES]; /* the lightest (by molar volume the largest) first */
    double residual;                       /* largest difference of ln f between phases; 0 for one phase */
    double gibbs_gain;              /* Gibbs energy against the feed as one phase, by RT and mole: 0 or negative */
    double smallest_tpd;            /* of the trial phases of the final test; 0 when all ran into the phases found */
    int steps, evaluations, trials; /* second-order steps, phase evaluations, trial phases */
};

struct split *split_create(size_t count, struct arena *arena);

/* The stable phases of z (mol, any positive sum, zeros allowed) at the temperature set and `pressure` (Pa).
 * ANSWER_OUT_OF_RANGE for a feed or pressure without meaning; ANSWER_FAILED rather than anything unconverged. */
enum answer split_at_tp(const struct fluid_at_t *at_t, double pressure, const double z[],
                        struct equilibrium_workspace *ws, struct split *out);

/* Solves sum z_i (K_i - 1) / (1 + beta (K_i - 1)) = 0 (Rachford and Rice 1952) for the feed in ws and ws->ln_K, and
 * sets the amounts of the two phases, the one of K-fold composition first. False without a root between 0 and 1. */
bool split_by_ratios(struct equilibrium_workspace *ws);

#endif
