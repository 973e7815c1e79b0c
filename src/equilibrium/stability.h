/* Stability of a phase, or of several in equilibrium, by Michelsen's tangent-plane distance.
 *
 * A mixture is stable at T, p when no trial phase of composition w lies below the plane that touches the Gibbs energy
 * at the phase in question:  tpd(w) = sum w_i (ln w_i + ln phi_i(w) - d_i) >= 0  with d_i = ln z_i + ln phi_i(z)
 * (Michelsen, Fluid Phase Equilib. 9 (1982) 1). Method-agnostic; nothing is allocated.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_STABILITY_H
#define TAREWRIGHT_EQUILIBRIUM_STABILITY_H

#include "equilibrium/workspace.h"

enum stability_effort {
    STABILITY_DECIDE,    /* the usual trials; stops at the first that is clearly below the plane */
    STABILITY_REPORT,    /* the usual trials, each followed to its stationary point */
    STABILITY_EXHAUSTIVE /* every pure component, mixtures of any two and of all as further trials */
};

/* A distance above minus this is rounding, not a phase. */
#define STABILITY_ROUNDING 1e-13

struct stability {
    bool is_stable;
    bool has_incipient;      /* a stationary point other than the phases tested was found, or one below the plane */
    double smallest_tpd;     /* of the trial phases, by RT and mole; 0 without an incipient phase */
    const double *incipient; /* [count], mole fractions of that trial; in the workspace until its next use */
    double incipient_volume; /* m3/mol */
    int trials, evaluations;
};

/* Whether the composition z (any positive sum) is stable as one phase at the temperature set and `pressure` (Pa).
 * ws->reference holds the phase tested, with ln phi, ws->feed its mole fractions and ws->d its tangent plane
 * afterwards. ANSWER_OUT_OF_RANGE for a composition or pressure without meaning; ANSWER_FAILED when a trial does not
 * converge. */
enum answer stability_at_tp(const struct fluid_at_t *at_t, double pressure, const double z[],
                            enum stability_effort effort, struct equilibrium_workspace *ws, struct stability *out);

/* Phases already known to touch the plane: trials that run into one of them are given up. */
struct known_phases {
    size_t count;
    const double *amounts[MOST_PHASES]; /* [count of components], mol, any positive sum */
    double molar_volume[MOST_PHASES];   /* m3/mol */
};

/* The same for a tangent plane set by the caller: ws->feed, ws->ln_pure and ws->d are filled in. */
enum answer stability_of_plane(const struct fluid_at_t *at_t, double pressure, const struct known_phases *known,
                               enum stability_effort effort, struct equilibrium_workspace *ws, struct stability *out);

#endif
