/* What the files of the cubic family share.
 *
 * The family is  p = R T / (v - b) - a(T) / ((v + delta1 b)(v + delta2 b)),  written throughout with the packing
 * y = b / v, 0 < y < 1, the attraction theta = a / (b R T) and the reduced pressure pi = p b / (R T):
 *
 *   pi = y / (1 - y) - theta y^2 / ((1 + delta1 y)(1 + delta2 y))
 *
 * so that a pure fluid, or a mixture of given composition, has one parameter at each temperature: theta.
 */
#ifndef TAREWRIGHT_FLUID_CUBIC_INTERNAL_H
#define TAREWRIGHT_FLUID_CUBIC_INTERNAL_H

#include "fluid/explanation.h"
#include "fluid/fluid.h"

enum { CUBIC_FIT_TERMS = 9 };

/* What tells the denominators apart. Equations that differ in a(T) only share a form. */
struct cubic_form {
    double delta1, delta2;
    double omega_a, omega_b; /* a(Tc) = omega_a (R Tc)^2 / pc, b = omega_b R Tc / pc */
    /* Packings at saturation over s = sqrt(1 - theta_c / theta), y_c being the critical one:
     *   y_liquid = y_c (1 + s sum liquid[k] s^k)
     *   ln(y_vapour (theta_c / theta) / y_c) = (theta / theta_c) s sum vapour[k] s^k */
    double liquid[CUBIC_FIT_TERMS], vapour[CUBIC_FIT_TERMS];
};

/* The attraction at the critical point; above it an isotherm has no unstable part. */
double cubic_critical_theta(const struct cubic_form *form);

/* The packing at the critical point, and the compressibility there. */
double cubic_critical_packing(const struct cubic_form *form);
double cubic_critical_compressibility(const struct cubic_form *form);

/* pi and d(pi)/dy at packing y. */
double cubic_reduced_pressure(const struct cubic_form *form, double theta, double y);
double cubic_reduced_pressure_slope(const struct cubic_form *form, double theta, double y);

/* ln(f b / (R T)) of a fluid at packing y, f in Pa: the residual Gibbs energy for one mole against pressure 1. */
double cubic_ln_reduced_fugacity(const struct cubic_form *form, double theta, double y);

/* The packing of the root on `branch` at the reduced pressure pi > 0, and the number of stable roots. A branch runs
 * from its end of the isotherm, y = 0 or y = 1, to the first point where the slope vanishes; on an isotherm without
 * such a point the one root is on both. BRANCH_STABLE takes the root of lower fugacity. */
enum answer cubic_packing(const struct cubic_form *form, double theta, double pi, enum branch branch, double *y,
                          int *roots);

/* First values of the packings of vapour and liquid at equilibrium, for theta above the critical one: relative to the
 * distance from the critical point, to 2e-5 (liquid) and 4e-3 (vapour) for theta up to 33 times the critical one. */
void cubic_saturation_guess(const struct cubic_form *form, double theta, double *vapour, double *liquid);

/* A pure fluid's parameters at the temperature set, with the equation's own wording for what tells it apart. */
struct cubic_parameters {
    const struct cubic_form *form;
    const char *slope_formula;           /* m of omega, in the manner of fluid/explanation.h */
    double a_critical, a;                /* J m3/mol2 */
    double b;                            /* m3/mol */
    double m;
};

struct cubic_parameters cubic_parameters_at(const struct fluid_at_t *at_t);

/* struct fluid_ops' explain. */
enum answer cubic_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                          struct explanation *out);

#endif
