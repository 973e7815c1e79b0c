/* What a property method is built from: plain parameters, in SI, with no knowledge of where they came from.
 *
 * Ownership: a spec and all it points to is owned by whoever filled it in (the case tree's arena) and must outlive
 * every fluid created from it. Methods read specs and never change them.
 */
#ifndef TAREWRIGHT_FLUID_SPEC_H
#define TAREWRIGHT_FLUID_SPEC_H

#include <stdbool.h>
#include <stddef.h>

/* Molar gas constant in J/(mol K), exact since the 2019 revision of the SI (k times N_A). */
#define GAS_CONSTANT 8.31446261815324

/* A number that may be absent. */
struct optional {
    bool given;
    double value;
};

/* One term of a residual Helmholtz energy, n delta^d tau^t times a factor that depends on its kind:
 *   POWER               1 when l = 0, else exp(-delta^l)
 *   EXPONENTIAL         exp(-g delta^l)
 *   GAUSSIAN            exp(-eta (delta - epsilon)^2 - beta (tau - gamma)^2)
 *   INVERSE_GAUSSIAN    exp(-eta (delta - epsilon)^2 + 1 / (b + beta (tau - gamma)^2))
 *   DOUBLE_EXPONENTIAL  exp(-gd delta^ld - gt tau^lt); a part whose g or l is zero is 1
 *   NONANALYTIC         n delta D^b psi in place of n delta^d tau^t, with D = theta^2 + B ((delta - 1)^2)^a,
 *                       theta = (1 - tau) + A ((delta - 1)^2)^(1 / (2 beta)),
 *                       psi = exp(-C (delta - 1)^2 - E (tau - 1)^2)
 * The members a kind does not use are zero. */
enum residual_kind {
    RESIDUAL_POWER,
    RESIDUAL_EXPONENTIAL,
    RESIDUAL_GAUSSIAN,
    RESIDUAL_INVERSE_GAUSSIAN,
    RESIDUAL_DOUBLE_EXPONENTIAL,
    RESIDUAL_NONANALYTIC,
    RESIDUAL_KINDS
};

struct residual_term {
    enum residual_kind kind;
    double n, t, d, l;
    double g;                         /* EXPONENTIAL */
    double eta, epsilon, beta, gamma; /* the GAUSSIANs, NONANALYTIC (beta) */
    double b;                         /* INVERSE_GAUSSIAN, NONANALYTIC */
    double gd, ld, gt, lt;            /* DOUBLE_EXPONENTIAL */
    double a, A, B, C, E;             /* NONANALYTIC */
};

/* One term of an ideal-gas Helmholtz energy alpha0(tau, delta) beyond `ln delta`:
 *   LEAD              a + b tau
 *   LOG_TAU           a ln tau
 *   TAU_LOG_TAU       a tau ln tau
 *   POWER             a tau^b
 *   EINSTEIN          a ln(1 - exp(-b tau))
 *   EINSTEIN_GENERAL  a ln(c + d exp(b tau))
 *   LOG_SINH          a ln|sinh(b tau)|
 *   LOG_COSH          -a ln cosh(b tau) */
enum ideal_kind {
    IDEAL_LEAD,
    IDEAL_LOG_TAU,
    IDEAL_TAU_LOG_TAU,
    IDEAL_POWER,
    IDEAL_EINSTEIN,
    IDEAL_EINSTEIN_GENERAL,
    IDEAL_LOG_SINH,
    IDEAL_LOG_COSH,
    IDEAL_KINDS
};

struct ideal_term {
    enum ideal_kind kind;
    double a, b, c, d;
};

/* A fit to the saturation line of an equation, used for starting values only. With theta = 1 - T / T_r and
 * S = sum n theta^t:  EXP_TAU y = y_r exp(S T_r / T),  EXP y = y_r exp(S),  ONE_PLUS y = y_r (1 + S). */
enum guess_form { GUESS_NONE, GUESS_EXP_TAU, GUESS_EXP, GUESS_ONE_PLUS };

struct saturation_guess {
    enum guess_form form;
    double reducing_temperature; /* K */
    double reducing_value;       /* Pa for a pressure, mol/m3 for a density */
    size_t count;
    const double (*terms)[2]; /* n, t */
};

/* A pure substance's Helmholtz equation of state with the constants of its own paper.
 *   a / (R T) = alpha0(tau, delta) + alphar(tau, delta),  tau = T_r / T,  delta = rho / rho_r */
struct reference_spec {
    double gas_constant;         /* J/(mol K) */
    double reducing_temperature; /* K */
    double reducing_density;     /* mol/m3 */
    size_t residual_count;
    const struct residual_term *residual;
    size_t ideal_count;
    const struct ideal_term *ideal;
    /* The critical point of the equation itself (dp/drho = d2p/drho2 = 0); the paper's where that is not computed. */
    double critical_temperature, critical_pressure, critical_density; /* K, Pa, mol/m3 */
    double smallest_temperature, largest_temperature;                 /* K, published limits */
    double largest_pressure;                                          /* Pa, published limit */
    struct saturation_guess pressure_guess, liquid_guess, vapour_guess;
};

/* A pure substance as every method sees it; what a method needs and does not find makes it unable to answer. */
struct pure_spec {
    const char *name;
    double molar_mass; /* kg/mol, always given */
    struct optional critical_temperature, critical_pressure, critical_density; /* K, Pa, mol/m3 */
    struct optional acentric;
    struct optional triple_temperature;     /* K */
    const struct reference_spec *reference; /* NULL where none is published */
};

/* A fluid for one method: its substances and, row by row, their pair parameters. */
struct fluid_spec {
    size_t count;
    const struct pure_spec *const *pure; /* [count] */
    const double *kij;                   /* [count * count], symmetric, zero diagonal; NULL: all zero */
};

#endif
