/* Virial coefficients by corresponding states, all of the form
 *
 *   B = (R Tc / pc) f(x),  C = (R Tc / pc)^2 g(x),  f and g sums of (c0 + omega c1 + a c2) x^-m,  x = T / Tc.
 *
 * Quantum gases take Tc = Tc0 / (1 + 21.8 / (M T)), pc = pc0 / (1 + 44.2 / (M T)), M in g/mol, with classical constants
 * and omega = 0 (Gunn, Chueh and Prausnitz, AIChE J. 12 (1966) 937; for pairs M is twice the reduced mass). So
 * x = (T + 21.8 / M) / Tc0 and R Tc / pc = (R Tc0 / pc0) (T + 44.2 / M) / (T + 21.8 / M).
 */
#include "fluid/virial_internal.h"

#include <math.h>

#define QUANTUM_TEMPERATURE 21.8e-3 /* K kg/mol */
#define QUANTUM_PRESSURE    44.2e-3 /* K kg/mol */

#define DEBYE      3.33564e-30 /* C m */
#define ATMOSPHERE 101325.0    /* Pa */
/* Below this reduced dipole moment a molecule counts as nonpolar beside an unlike one; propylene has 5, carbonyl
 * sulfide 22. Our choice: the papers speak of polar and nonpolar without a limit. */
#define LEAST_POLAR 1e-3 /* of -a; a reduced moment of 5 */

struct term {
    double power, c0, c1, c2;
};

/* Abbott's forms of Pitzer's correlation, in Smith and Van Ness, Introduction to Chemical Engineering Thermodynamics,
 * eqs. for B0 and B1. */
static const struct term PITZER_ABBOTT[] = {
    {0.0, 0.083, 0.139, 0.0}, {1.6, -0.422, 0.0, 0.0}, {4.2, 0.0, -0.172, 0.0}, {.power = -1.0}};

/* C. Tsonopoulos, AIChE J. 20 (1974) 263, eqs. 8 to 11. */
static const struct term TSONOPOULOS[] = {{0.0, 0.1445, 0.0637, 0.0},
                                          {1.0, -0.330, 0.0, 0.0},
                                          {2.0, -0.1385, 0.331, 0.0},
                                          {3.0, -0.0121, -0.423, 0.0},
                                          {6.0, 0.0, 0.0, 1.0},
                                          {8.0, -0.000607, -0.008, 0.0},
                                          {.power = -1.0}};

/* H. Orbey and J. H. Vera, AIChE J. 29 (1983) 107. */
static const struct term ORBEY_VERA[] = {{0.0, 0.01407, -0.02676, 0.0},   {2.8, 0.02432, 0.01770, 0.0},
                                         {3.0, 0.0, 0.040, 0.0},          {6.0, 0.0, -0.003, 0.0},
                                         {10.5, -0.00313, -0.00228, 0.0}, {.power = -1.0}};

/* The sum and its derivatives by x. */
static struct virial_curve sum_of(const struct term *terms, const struct virial_constants *of, double x)
{
    struct virial_curve sum = {.value = 0.0};
    for (const struct term *term = terms; term->power >= 0.0; term++) {
        const double m = term->power;
        const double value = (term->c0 + of->acentric * term->c1 + of->polar * term->c2) * pow(x, -m);
        sum.value += value;
        sum.t -= m * value / x;
        sum.tt += m * (m + 1.0) * value / (x * x);
    }
    return sum;
}

static struct virial_curve product(const struct virial_curve *a, const struct virial_curve *b)
{
    return (struct virial_curve){a->value * b->value, a->t * b->value + a->value * b->t,
                                 a->tt * b->value + 2.0 * a->t * b->t + a->value * b->tt};
}

/* mol/kg, zero for classical molecules. */
static double quantum_mass(const struct virial_constants *of)
{
    return of->is_quantum ? of->inverse_mass : 0.0;
}

/* R Tc / pc, which but for quantum gases is constant. */
static struct virial_curve volume_of(const struct virial_constants *of, double T)
{
    const double classical = of->critical_volume / of->compressibility;
    const double shifted = T + QUANTUM_TEMPERATURE * quantum_mass(of);
    const double excess = classical * (QUANTUM_PRESSURE - QUANTUM_TEMPERATURE) * quantum_mass(of);
    return (struct virial_curve){classical + excess / shifted, -excess / (shifted * shifted),
                                 2.0 * excess / (shifted * shifted * shifted)};
}

static struct virial_curve function_of(const struct term *terms, const struct virial_constants *of, double T)
{
    const double Tc = of->critical_temperature;
    const double x = (T + QUANTUM_TEMPERATURE * quantum_mass(of)) / Tc;
    struct virial_curve f = sum_of(terms, of, x);
    f.t /= Tc;
    f.tt /= Tc * Tc;
    return f;
}

struct virial_curve virial_second(enum virial_correlation correlation, const struct virial_constants *of, double T)
{
    const struct virial_curve volume = volume_of(of, T);
    const struct virial_curve f = function_of(correlation == VIRIAL_TSONOPOULOS ? TSONOPOULOS : PITZER_ABBOTT, of, T);
    return product(&volume, &f);
}

struct virial_curve virial_third(const struct virial_constants *of, double T)
{
    const struct virial_curve volume = volume_of(of, T), square = product(&volume, &volume);
    const struct virial_curve g = function_of(ORBEY_VERA, of, T);
    return product(&square, &g);
}

/* ---- constants --------------------------------------------------------------------------------------------------- */

/* Tsonopoulos 1974, eq. 13 for molecules without hydrogen bonds, b = 0: a = -2.14e-4 mu_r - 4.308e-21 mu_r^8 with
 * mu_r = 1e5 mu^2 pc / Tc^2, mu in debye, pc in atm. */
static double polar_constant(const struct pure_spec *pure)
{
    if (!pure->dipole.given) {
        return 0.0;
    }
    const double mu = pure->dipole.value / DEBYE, Tc = pure->critical_temperature.value;
    const double reduced = 1e5 * mu * mu * pure->critical_pressure.value / ATMOSPHERE / (Tc * Tc);
    return -2.14e-4 * reduced - 4.308e-21 * pow(reduced, 8.0);
}

struct virial_constants virial_of_component(const struct pure_spec *pure, const struct cubic_set *set)
{
    const bool is_quantum = set != NULL && set->critical_temperature.given && set->critical_pressure.given;
    const double Tc = is_quantum ? set->critical_temperature.value : pure->critical_temperature.value;
    const double pc = is_quantum ? set->critical_pressure.value : pure->critical_pressure.value;
    const double omega = is_quantum ? 0.0 : pure->acentric.value;
    const bool has_density = !is_quantum && pure->critical_density.given;
    const double estimate = (0.291 - 0.08 * omega) * GAS_CONSTANT * Tc / pc;
    const double volume = has_density ? 1.0 / pure->critical_density.value : estimate;
    return (struct virial_constants){
        .critical_temperature = Tc,
        .critical_volume = volume,
        .compressibility = pc * volume / (GAS_CONSTANT * Tc),
        .acentric = omega,
        .polar = is_quantum ? 0.0 : polar_constant(pure),
        .inverse_mass = 1.0 / pure->molar_mass,
        .is_quantum = is_quantum,
    };
}

/* Tsonopoulos 1974, eqs. 14 to 16: Tc_ij = (1 - kij) sqrt(Tc_i Tc_j), Vc_ij^(1/3) the mean, Zc_ij the mean, omega_ij
 * the mean; a_ij the mean of two polar molecules, else zero. */
struct virial_constants virial_of_pair(const struct virial_constants *one, const struct virial_constants *other,
                                       double kij)
{
    const double edge = 0.5 * (cbrt(one->critical_volume) + cbrt(other->critical_volume));
    const bool are_polar = -one->polar > LEAST_POLAR && -other->polar > LEAST_POLAR;
    return (struct virial_constants){
        .critical_temperature = (1.0 - kij) * sqrt(one->critical_temperature * other->critical_temperature),
        .critical_volume = edge * edge * edge,
        .compressibility = 0.5 * (one->compressibility + other->compressibility),
        .acentric = 0.5 * (one->acentric + other->acentric),
        .polar = are_polar ? 0.5 * (one->polar + other->polar) : 0.0,
        .inverse_mass = 0.5 * (one->inverse_mass + other->inverse_mass),
        .is_quantum = one->is_quantum || other->is_quantum,
    };
}

/* The same means over three pairs. The cube root of C_ij C_ik C_jk, which the paper proposes, has no slope where one of
 * the three changes its sign, as each does near T_r = 0.75. */
struct virial_constants virial_of_triple(const struct virial_constants *ij, const struct virial_constants *ik,
                                         const struct virial_constants *jk)
{
    const double edge = (cbrt(ij->critical_volume) + cbrt(ik->critical_volume) + cbrt(jk->critical_volume)) / 3.0;
    return (struct virial_constants){
        .critical_temperature = cbrt(ij->critical_temperature * ik->critical_temperature * jk->critical_temperature),
        .critical_volume = edge * edge * edge,
        .compressibility = (ij->compressibility + ik->compressibility + jk->compressibility) / 3.0,
        .acentric = (ij->acentric + ik->acentric + jk->acentric) / 3.0,
        .inverse_mass = (ij->inverse_mass + ik->inverse_mass + jk->inverse_mass) / 3.0,
        .is_quantum = ij->is_quantum || ik->is_quantum || jk->is_quantum,
    };
}
