/* Properties of one homogeneous phase, by any method: the only property calls the layers above fluid/ make.
 *
 * Amounts n are in mol and need not sum to one; volumes are for all of n. Fugacity coefficients stay finite where a
 * component's amount is zero (infinite dilution). Nothing is allocated.
 */
#ifndef TAREWRIGHT_FLUID_PHASE_H
#define TAREWRIGHT_FLUID_PHASE_H

#include "fluid/fluid.h"

/* What is asked for beyond pressure, volume, Z and dp/dV, as a set of bits. */
enum phase_want {
    PHASE_LN_PHI = 1,     /* ln_phi */
    PHASE_DLN_PHI_DP = 2, /* dln_phi_dp */
    PHASE_DLN_PHI_DT = 4, /* dln_phi_dt and dp_dt */
    PHASE_DLN_PHI_DN = 8, /* dln_phi_dn */
    PHASE_DP_DN = 16,     /* dp_dn at constant T, V */
    PHASE_RESIDUAL = 32,  /* residual enthalpy, entropy, heat capacity, and dp_dt */
    PHASE_LN_F = 64       /* ln_f_over_x */
};

struct phase {
    double temperature; /* K */
    double pressure;    /* Pa */
    double volume;      /* m3, for all of n */
    double amount;      /* mol, the sum of n */
    double Z;           /* p V / (n R T) */
    double dp_dv;       /* Pa/m3 at constant T, n; negative where mechanically stable; 0: no slopes given */
    double dp_dt;       /* Pa/K at constant V, n */
    enum branch branch; /* the branch the root was taken from (phase_tp), else BRANCH_STABLE */
    int roots;          /* mechanically stable roots found at this T, p (phase_tp); 0 after phase_tv */
    /* Against the ideal gas at the same T and p, per mole of mixture, divided by RT or R. */
    double residual_enthalpy_rt, residual_entropy_r, residual_heat_capacity_r;
    double *ln_phi;      /* [count] */
    double *ln_f_over_x; /* [count], ln(f_i / x_i) with f in Pa: defined at any volume, also where p <= 0 */
    double *dln_phi_dp;  /* [count], 1/Pa */
    double *dln_phi_dt;  /* [count], 1/K at constant p */
    double *dln_phi_dn;  /* [count * count], 1/mol at constant T, p */
    double *dp_dn;       /* [count], Pa/mol at constant T, V */
    double *scratch;     /* [count * (count + 4)], needed for DT, DN and mixtures' DP and DP_DN; else may be NULL */
};

/* The phase on `branch` at pressure (Pa). BRANCH_STABLE takes the root of lower Gibbs energy. A branch ends where
 * dp/dV first vanishes: ANSWER_NO_SUCH_ROOT beyond. On an isotherm where it never does, both branches are the same. */
enum answer phase_tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                     unsigned want, struct phase *out);

/* The phase at volume (m3); its pressure may be negative (inside a spinodal). With PHASE_LN_PHI, PHASE_DLN_PHI_DP or
 * PHASE_RESIDUAL and a pressure that is not positive the answer is ANSWER_OUT_OF_RANGE; PHASE_LN_F answers there too.
 * A (T, p) method's pressure is solved for, on the vapour's branch and then on the liquid's: ANSWER_NO_SUCH_ROOT
 * between them, ANSWER_CANNOT from one without slopes. */
enum answer phase_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want, struct phase *out);

/* A memory-free home for a pure fluid's arrays: phase_of_pure points a struct phase at it. */
struct pure_arrays {
    double ln_phi, ln_f_over_x, dln_phi_dp, dln_phi_dt, dln_phi_dn, dp_dn;
    double scratch[5];
};
void phase_of_pure(struct phase *phase, struct pure_arrays *arrays);

/* A home for `count` components' arrays, from an arena. */
struct phase *phase_create(size_t count, struct arena *arena);

/* No state has a volume at or below this (m3, for all of n). */
double phase_smallest_volume(const struct fluid_at_t *at_t, const double n[]);

/* m3/mol of a phase evaluated before. */
double phase_molar_volume(const struct phase *phase);

#endif
