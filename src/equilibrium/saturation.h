/* Vapour and liquid of a pure fluid in equilibrium, by equal fugacity.
 *
 * Method-agnostic: only ln f and pressures from fluid/phase.h are compared. Nothing is allocated.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_SATURATION_H
#define TAREWRIGHT_EQUILIBRIUM_SATURATION_H

#include "fluid/phase.h"

struct saturation {
    double temperature;                  /* K */
    double pressure;                     /* Pa */
    double vapour_volume, liquid_volume; /* m3/mol */
    double ln_phi_vapour, ln_phi_liquid;
    double residual; /* ln fV - ln fL of the answer */
    int iterations;
};

/* Largest |ln fV - ln fL|, and smallest rhoL/rhoV - 1, of a saturation that is reported. */
#define SATURATION_LN_F_TOLERANCE 1e-10
#define SATURATION_LEAST_CONTRAST 1e-3
/* To this T / Tc saturation is promised. Beyond it is found as far as the contrast allows, to about 1 - 1e-7. */
#define SATURATION_HIGHEST_REDUCED_TEMPERATURE 0.9999

/* Saturation of the pure fluid at the temperature set. ANSWER_NO_SUCH_ROOT at or above the critical temperature;
 * ANSWER_CANNOT where the method has no liquid; ANSWER_FAILED rather than a value that misses the tolerances. */
enum answer saturation_at_t(const struct fluid_at_t *at_t, struct saturation *out);

/* Boiling temperature at `pressure` (Pa): `at_t` is the caller's workspace and holds that temperature afterwards.
 * ANSWER_NO_SUCH_ROOT at or above the critical pressure. */
enum answer saturation_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure,
                            struct saturation *out);

/* One pass of the classical correction p_next = p fL(p) / fV(p). */
struct saturation_pass {
    double pressure; /* Pa, the trial */
    double Z_vapour, Z_liquid;
    double fugacity_vapour, fugacity_liquid; /* Pa */
    double next_pressure;                    /* Pa */
};

/* The classical iteration from `start` (Pa), written down pass by pass for a reader who follows it by hand; stops when
 * |ln fV - ln fL| meets the tolerance or after `most` passes. *count is the number of passes written.
 * ANSWER_NO_SUCH_ROOT when a trial pressure has lost one of the two roots; the passes so far are kept. */
enum answer saturation_passes(const struct fluid_at_t *at_t, double start, size_t most, struct saturation_pass *passes,
                              size_t *count);

/* The stable phase of a pure fluid at the temperature set and `pressure`: the saturation pressure decides. `want` and
 * the arrays of *out as for phase_tp; out->branch says which side of saturation the state lies on, BRANCH_STABLE
 * above the critical temperature. A method without a liquid gives its vapour. */
enum answer stable_phase_tp(const struct fluid_at_t *at_t, double pressure, const double n[], unsigned want,
                            struct phase *out);

#endif
