/* Memory for equilibria of mixtures: taken once from an arena, sized by the number of components, and then used by
 * any number of calls, one at a time. A thread needs its own.
 *
 * What stands in it between calls is of no meaning to anyone, but for nothing else may it be shared.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_WORKSPACE_H
#define TAREWRIGHT_EQUILIBRIUM_WORKSPACE_H

#include "fluid/phase.h"

enum { MOST_PHASES = 6 };

struct equilibrium_workspace {
    size_t count;        /* components of the fluid */
    size_t active_count; /* those present in the feed */
    size_t *active;      /* [active_count], ascending */
    double *feed;        /* [count], mole fractions */
    double *ln_feed;     /* [count]; of the components present */
    double *ln_pure;     /* [count], roughly ln(f/p) of each pure condensed phase, at the T and p of the call */
    double *d;           /* [count], ln x_i + ln phi_i of the tangent plane under test */
    double *feed_d;      /* [count], the same of the feed as one phase */
    struct phase *reference, *trial;
    struct phase *phase[MOST_PHASES];
    double *amounts[MOST_PHASES];             /* [count], mol of each component in each phase, per mole of feed */
    double *candidate[MOST_PHASES];           /* [count], the same for a step on trial */
    double *ln_K, *ln_K_change, *last_change; /* [count] */
    /* Trial phases of the stability test. */
    double *W, *ln_W, *g, *kept_W, *kept_ln_W, *offset; /* [count] */
    struct phase *known;                                /* one of the known phases, for its curvature: */
    double *known_hessian[MOST_PHASES], *known_factor;  /* [count][count] */
    double *valley[MOST_PHASES];                        /* [count] */
    /* Second-order steps: room for (MOST_PHASES - 1) count + 2 unknowns. */
    double *matrix, *step, *scale, *border, *partial_volume, *unknowns, *next_unknowns, *next_slope, *crossed;
    double *slope_before, *slope_after; /* the same room: at the ends of a step of an envelope */
};

struct equilibrium_workspace *equilibrium_workspace_create(size_t count, struct arena *arena);

/* Takes the composition z (any positive sum, [count]) as feed: mole fractions, their logarithms, the list of those
 * present. False unless every amount is zero or more, finite, and one is positive. */
bool workspace_set_feed(struct equilibrium_workspace *ws, const double z[]);

/* The sum of n[count], mol. */
double amount_of(const double n[], size_t count);

/* Fills ws->ln_pure: ln(f/p) of each component's pure condensed phase at the temperature set and `pressure` (Pa),
 * roughly: the vapour pressure of Lee and Kesler, AIChE J. 21 (1975) 510, below the critical temperature and of Wilson
 * (1968), ln(pc/p) + 5.373 (1 + omega) (1 - Tc/T), above, without any correction for pressure. A first value and never
 * an answer; as such also ln K of vapour over liquid. A component without critical constants gets 0. */
void workspace_set_pure(struct equilibrium_workspace *ws, const struct fluid_at_t *at_t, double pressure);

#endif
