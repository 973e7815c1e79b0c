/* What the files of the Lee-Kesler method share.
 *
 * Two fluids, the simple one and the reference one (n-octane), have one equation of state each in reduced variables,
 *
 *   Z = p_r / (rho_r T_r),  T_r = T / Tc,  p_r = p / pc,  rho_r = rho R Tc / pc,
 *
 * and every other fluid is interpolated between the two at the same T_r and p_r by its acentric factor.
 */
#ifndef TAREWRIGHT_FLUID_LEE_KESLER_INTERNAL_H
#define TAREWRIGHT_FLUID_LEE_KESLER_INTERNAL_H

#include "fluid/fluid.h"

enum lee_kesler_end { LEE_KESLER_SIMPLE, LEE_KESLER_REFERENCE, LEE_KESLER_ENDS };

/* The acentric factor of the reference fluid; the simple one has zero. */
#define LEE_KESLER_REFERENCE_ACENTRIC 0.3978

/* Below this reduced temperature the equations are not used at all; the paper's tables begin at 0.3. */
#define LEE_KESLER_LEAST_REDUCED_TEMPERATURE 0.2

/* The densities rho_r of one end's roots: the vapour's is the first mechanically stable one from zero density up, the
 * liquid's the first from high density down. An isotherm that rises throughout has one root, which is both. */
struct lee_kesler_roots {
    bool has_vapour, has_liquid, are_one;
    double vapour, liquid;
};

/* True where the search was carried through, whatever it found. `branch` says which root is looked for;
 * BRANCH_STABLE: both. T_r from LEE_KESLER_LEAST_REDUCED_TEMPERATURE, p_r greater than zero. */
bool lee_kesler_find_roots(enum lee_kesler_end end, double T_r, double p_r, enum branch branch,
                           struct lee_kesler_roots *out);

/* One end at one root. With lambda = ln T_r and pi = ln p_r, d(ln phi)/dpi = Z - 1 and d(ln phi)/dlambda = -h. */
struct lee_kesler_spot {
    double Z, ln_phi;
    double h;              /* residual enthalpy over R T */
    double Z_pi, Z_lambda; /* derivatives of Z */
    double compliance;     /* Z - Z_pi without cancelling digits */
    double cp;             /* residual isobaric heat capacity over R */
};

/* `density` is a root at p_r, from which Z follows without cancelling digits. */
struct lee_kesler_spot lee_kesler_spot_at(enum lee_kesler_end end, double T_r, double p_r, double density);

/* ln p_r of saturation at T_r < 1 by the vapour pressure equation of the paper, for starting values. */
double lee_kesler_ln_vapour_pressure(double T_r, double acentric);

#endif
