/* The two equations of state of Lee and Kesler, AIChE J. 21 (1975) 510, eqs. 12 to 15 with the constants of table 2:
 *
 *   Z = 1 + B rho + C rho^2 + D rho^5 + c4 / T^3 rho^2 (beta + gamma rho^2) exp(-gamma rho^2)
 *   B = b1 - b2 / T - b3 / T^2 - b4 / T^3,   C = c1 - c2 / T + c3 / T^3,   D = d1 + d2 / T
 *
 * all in reduced variables. Below its critical temperature an isotherm is concave from zero density to the vapour's
 * spinodal and convex from the liquid's on, so that Newton's steps come to either root from one side without passing
 * it; both spinodals are therefore solved for first. Between them, below T_r = 0.5, lie further roots that are no
 * phase's; the search never sees them.
 */
#include "fluid/lee_kesler_internal.h"

#include <float.h>
#include <math.h>

enum { FIT_TERMS = 9, MOST_STEPS = 100, MOST_SPINODAL_STEPS = 30 };

/* Rounding lets Newton's steps end no better than this. */
#define LAST_STEP (4.0 * DBL_EPSILON)
/* Closer to its critical temperature than this part of it an isotherm is taken to have no spinodals. */
#define CRITICAL_MARGIN 1e-12
/* First density on the liquid's side, over that of the spinodal: near most liquids'. */
#define LIQUID_START 1.25

struct end {
    double b1, b2, b3, b4, c1, c2, c3, c4, d1, d2, beta, gamma;
    /* The critical point of the equation itself, solved here; the equation is fitted to have it at T_r = p_r = 1. */
    double critical_temperature, critical_density;
    /* ln(rho / rho_c) of the spinodals as s sum fit[k] s^k with s = sqrt(1 - T / T_c): our fit, to half a per cent. */
    double vapour_fit[FIT_TERMS], liquid_fit[FIT_TERMS];
};

static const struct end ENDS[LEE_KESLER_ENDS] =
    {
        [LEE_KESLER_SIMPLE] =
            {
                .b1 = 0.1181193,
                .b2 = 0.265728,
                .b3 = 0.154790,
                .b4 = 0.030323,
                .c1 = 0.0236744,
                .c2 = 0.0186984,
                .c3 = 0.0,
                .c4 = 0.042724,
                .d1 = 0.155488e-4,
                .d2 = 0.623689e-4,
                .beta = 0.65392,
                .gamma = 0.060167,
                .critical_temperature = 0.9999997157370973,
                .critical_density = 3.4423306139282124,
                .vapour_fit = {-2.677398, 5.344727, -39.00103, 221.3961, -818.5336, 1804.226, -2318.578, 1602.939,
                               -463.2918},
                .liquid_fit = {2.64633, -3.589268, -20.08347, 154.4615, -468.6086, 784.2686, -749.8042, 381.4269,
                               -79.21729},
            },
        [LEE_KESLER_REFERENCE] =
            {
                .b1 = 0.2026579,
                .b2 = 0.331511,
                .b3 = 0.027655,
                .b4 = 0.203488,
                .c1 = 0.0313385,
                .c2 = 0.0503618,
                .c3 = 0.016901,
                .c4 = 0.041577,
                .d1 = 0.48736e-4,
                .d2 = 0.0740336e-4,
                .beta = 1.226,
                .gamma = 0.03754,
                .critical_temperature = 0.9999999244990188,
                .critical_density = 3.906267328787785,
                .vapour_fit = {-3.92917, 9.649767, -47.10575, 193.6933, -652.9644, 1443.792, -1913.806, 1370.449,
                               -409.9387},
                .liquid_fit = {3.684603, -18.43528, 86.34582, -276.397, 591.8162, -826.5236, 718.0093, -349.4279,
                               71.85671},
            },
};

/* ---- one isotherm ------------------------------------------------------------------------------------------------ */

/* E stands for c4 / T^3. */
struct isotherm {
    const struct end *end;
    double T, B, C, D, E;
};

static struct isotherm isotherm_at(enum lee_kesler_end which, double T)
{
    const struct end *end = &ENDS[which];
    const double u = 1.0 / T;
    return (struct isotherm){
        .end = end,
        .T = T,
        .B = end->b1 - u * (end->b2 + u * (end->b3 + u * end->b4)),
        .C = end->c1 - u * (end->c2 - u * u * end->c3),
        .D = end->d1 + u * end->d2,
        .E = end->c4 * u * u * u,
    };
}

/* p_r and its derivatives by density. With w = gamma rho^2 the last term of p / T is E rho^3 (beta + w) exp(-w). */
struct pressures {
    double p, slope, curvature;
};

static struct pressures pressures_at(const struct isotherm *it, double rho)
{
    const double gamma = it->end->gamma, beta = it->end->beta;
    const double r2 = rho * rho, w = gamma * r2, D4 = it->D * r2 * r2;
    const double tail = it->E * exp(-w);
    const double Z = 1.0 + rho * (it->B + rho * it->C + D4) + tail * r2 * (beta + w);
    const double slope = 1.0 + rho * (2.0 * it->B + 3.0 * rho * it->C + 6.0 * D4) +
                         tail * r2 * (3.0 * beta + w * (5.0 - 2.0 * beta - 2.0 * w));
    const double curvature = 2.0 * it->B + 6.0 * rho * it->C + 30.0 * D4 +
                             tail * rho * (6.0 * beta + w * (20.0 - 14.0 * beta + w * (4.0 * beta - 22.0 + 4.0 * w)));
    return (struct pressures){it->T * rho * Z, it->T * slope, it->T * curvature};
}

/* ---- spinodals --------------------------------------------------------------------------------------------------- */

static double fitted(const struct end *end, const double fit[FIT_TERMS], double T)
{
    const double s = sqrt(1.0 - T / end->critical_temperature);
    double sum = 0.0;
    for (int k = FIT_TERMS; k > 0; k--) {
        sum = (sum + fit[k - 1]) * s;
    }
    return end->critical_density * exp(sum);
}

/* The density nearest to the fitted one where the slope vanishes. */
static double spinodal(const struct isotherm *it, const double fit[FIT_TERMS])
{
    double rho = fitted(it->end, fit, it->T);
    for (int step = 0; step < MOST_SPINODAL_STEPS; step++) {
        const struct pressures at = pressures_at(it, rho);
        const double change = -at.slope / at.curvature;
        rho += change;
        /* Half the digits do: the pressure there has a vanishing slope. */
        if (!(fabs(change) > 1e-9 * rho)) {
            break;
        }
    }
    return rho;
}

/* ---- roots ------------------------------------------------------------------------------------------------------- */

/* Newton's steps from a density on the side from which they cannot pass the root; `is_down` says on which side they
 * stay, so that rounding, or a first step from the other side, is told apart from convergence. */
static bool step_to_root(const struct isotherm *it, double p, double start, bool is_down, double *rho)
{
    *rho = start;
    for (int step = 0; step < MOST_STEPS; step++) {
        const struct pressures at = pressures_at(it, *rho);
        const double change = (p - at.p) / at.slope;
        if (!(at.slope > 0.0) || !isfinite(change)) {
            return step > 1; /* at a spinodal, to the last digit */
        }
        *rho += change;
        if (fabs(change) <= LAST_STEP * *rho || (step > 1 && is_down == (change > 0.0))) {
            return true;
        }
    }
    return false;
}

static bool find_vapour(const struct isotherm *it, double p, struct lee_kesler_roots *out)
{
    const double limit = spinodal(it, it->end->vapour_fit), ideal = p / it->T;
    out->has_vapour = ideal < limit && pressures_at(it, limit).p >= p;
    return !out->has_vapour || step_to_root(it, p, ideal, false, &out->vapour);
}

static bool find_liquid(const struct isotherm *it, double p, struct lee_kesler_roots *out)
{
    const double limit = spinodal(it, it->end->liquid_fit);
    out->has_liquid = pressures_at(it, limit).p <= p;
    return !out->has_liquid || step_to_root(it, p, LIQUID_START * limit, true, &out->liquid);
}

/* The root of an isotherm that rises throughout: Newton's steps within a bracket, which halves where they are slow. */
static bool find_only(const struct isotherm *it, double p, double *rho)
{
    double low = 0.0, high = (double)INFINITY, last = (double)INFINITY;
    *rho = p / it->T;
    for (int step = 0; step < MOST_STEPS; step++) {
        const struct pressures at = pressures_at(it, *rho);
        const double missing = p - at.p, change = missing / at.slope;
        double next = *rho + change;
        if (fabs(change) <= LAST_STEP * *rho) {
            *rho = next;
            return true;
        }
        *(missing > 0.0 ? &low : &high) = *rho;
        if (!(next > low && next < high) || !(fabs(missing) < 0.5 * last)) {
            next = isfinite(high) ? 0.5 * (low + high) : 2.0 * low;
        }
        if (!(next > low && next < high)) {
            return true; /* the bracket has no number left inside it */
        }
        last = fabs(missing);
        *rho = next;
    }
    return false;
}

bool lee_kesler_find_roots(enum lee_kesler_end end, double T_r, double p_r, enum branch branch,
                           struct lee_kesler_roots *out)
{
    const struct isotherm it = isotherm_at(end, T_r);
    *out = (struct lee_kesler_roots){.are_one = T_r >= (1.0 - CRITICAL_MARGIN) * ENDS[end].critical_temperature};
    if (out->are_one) {
        out->has_vapour = out->has_liquid = true;
        const bool is_found = find_only(&it, p_r, &out->vapour);
        out->liquid = out->vapour;
        return is_found;
    }
    return (branch == BRANCH_LIQUID || find_vapour(&it, p_r, out)) &&
           (branch == BRANCH_VAPOUR || find_liquid(&it, p_r, out));
}

/* ---- properties at a root ---------------------------------------------------------------------------------------- */

/* a / (R T) = B rho + C rho^2 / 2 + D rho^5 / 5 + E / (2 gamma) (beta + 1 - (beta + 1 + gamma rho^2) exp(-gamma
 * rho^2)), the integral of (Z - 1) / rho. A bar over a coefficient in the paper's enthalpy is T d/dT here. */
struct lee_kesler_spot lee_kesler_spot_at(enum lee_kesler_end which, double T_r, double p_r, double density)
{
    const struct isotherm it = isotherm_at(which, T_r);
    const struct end *end = it.end;
    const double u = 1.0 / T_r, rho = density, r2 = rho * rho, r5 = r2 * r2 * rho;
    const double w = end->gamma * r2, e = exp(-w);
    const double in_Z = r2 * (end->beta + w) * e;
    /* (beta + 1) (1 - exp(-w)) - w exp(-w), which loses no digits at low density. */
    const double in_a = (-(end->beta + 1.0) * expm1(-w) - w * e) / (2.0 * end->gamma);
    /* T d/dT and T^2 d2/dT2 of B, C, D; E has -3 E and 12 E. */
    const double B_1 = u * (end->b2 + u * (2.0 * end->b3 + u * 3.0 * end->b4));
    const double B_2 = -u * (2.0 * end->b2 + u * (6.0 * end->b3 + u * 12.0 * end->b4));
    const double C_1 = u * (end->c2 - 3.0 * u * u * end->c3);
    const double C_2 = -u * (2.0 * end->c2 - 12.0 * u * u * end->c3);
    const double D_1 = -u * end->d2, D_2 = 2.0 * u * end->d2;
    const double Z = p_r / (rho * T_r);
    const double a = it.B * rho + 0.5 * it.C * r2 + 0.2 * it.D * r5 + it.E * in_a;
    const double a_1 = B_1 * rho + 0.5 * C_1 * r2 + 0.2 * D_1 * r5 - 3.0 * it.E * in_a;
    const double a_2 = B_2 * rho + 0.5 * C_2 * r2 + 0.2 * D_2 * r5 + 12.0 * it.E * in_a;
    const double thermal = Z + B_1 * rho + C_1 * r2 + D_1 * r5 - 3.0 * it.E * in_Z; /* (dp/dT) / (R rho) */
    const double stiffness = pressures_at(&it, rho).slope / T_r;                    /* (dp/drho) / (R T) */
    return (struct lee_kesler_spot){
        .Z = Z,
        .ln_phi = Z - 1.0 - log(Z) + a,
        .h = Z - 1.0 - a_1,
        .Z_pi = Z * (1.0 - Z / stiffness),
        .compliance = Z * Z / stiffness,
        .Z_lambda = Z * (thermal / stiffness - 1.0),
        .cp = thermal * thermal / stiffness - 1.0 - a_2 - 2.0 * a_1,
    };
}

/* Lee and Kesler 1975, eqs. 16 to 18. */
double lee_kesler_ln_vapour_pressure(double T_r, double acentric)
{
    const double u = 1.0 / T_r, ln_T = log(T_r), T6 = T_r * T_r * T_r * T_r * T_r * T_r;
    return 5.92714 - 6.09648 * u - 1.28862 * ln_T + 0.169347 * T6 +
           acentric * (15.2518 - 15.6875 * u - 13.4721 * ln_T + 0.43577 * T6);
}
