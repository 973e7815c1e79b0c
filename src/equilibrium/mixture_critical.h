/* The critical point of a mixture: where its two phases become one.
 *
 * By the criteria of Heidemann and Khalil, AIChE J. 26 (1980) 769, in the form of Michelsen, Fluid Phase Equilib. 16
 * (1984) 57. Method-agnostic, for methods explicit in T, V; nothing is allocated.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_MIXTURE_CRITICAL_H
#define TAREWRIGHT_EQUILIBRIUM_MIXTURE_CRITICAL_H

#include "equilibrium/workspace.h"

struct mixture_critical {
    double temperature, pressure, molar_volume; /* K, Pa, m3/mol */
    double eigenvalue; /* the smallest of the scaled Hessian of the Helmholtz energy, at the answer: about zero */
    double cubic_form; /* the third derivative along its vector: about zero */
    int iterations;
};

/* The critical point of z (any positive sum) near `start`, whose pressure is not used; an envelope's crossing is one.
 * `at_t` is a workspace and holds the critical temperature afterwards. ANSWER_NO_SUCH_ROOT when the iteration leads to
 * none, ANSWER_CANNOT for a method explicit in T, p. That no other phase is more stable there is not tested. */
enum answer mixture_critical_near(struct fluid_at_t *at_t, const struct fluid *fluid, const double z[],
                                  const struct critical_point *start, struct equilibrium_workspace *ws,
                                  struct mixture_critical *out);

#endif
