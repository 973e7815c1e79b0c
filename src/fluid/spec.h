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
 *   SPECIAL_EXPONENTIAL exp(-eta (delta - epsilon)^2 - beta (delta - gamma)), delta in both
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
    RESIDUAL_SPECIAL_EXPONENTIAL,
    RESIDUAL_NONANALYTIC,
    RESIDUAL_KINDS
};

struct residual_term {
    enum residual_kind kind;
    double n, t, d, l;
    double g;                         /* EXPONENTIAL */
    double eta, epsilon, beta, gamma; /* the GAUSSIANs, SPECIAL_EXPONENTIAL, NONANALYTIC (beta) */
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
    struct optional molar_mass;  /* kg/mol, where the paper's differs from the substance's */
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

/* The sublimation line of a pure solid, with theta = T / T_r:
 *   REDUCED_SERIES     ln(p / p_r) = (1 / theta) sum n theta^t
 *   GAP_SERIES         ln(p / p_r) = (1 / theta) sum n (1 - theta)^t
 *   POWER_DIFFERENCES  ln(p / p_r) = sum n (1 - theta^t)
 *   INVERSE_POWERS     ln(p / p_r) = sum n theta^-t */
enum sublimation_form { REDUCED_SERIES, GAP_SERIES, POWER_DIFFERENCES, INVERSE_POWERS };

/* A melting line, or a part of it, with theta = T / T_r:
 *   MELTING_POWERS      p = p_r (1 + sum n (theta^t - 1))
 *   MELTING_GAP_POWERS  p = p_r (1 + sum n (theta - 1)^t)
 *   MELTING_SIMON       p = p_r + sum n (theta^t - 1), n in Pa */
enum melting_form { MELTING_POWERS, MELTING_GAP_POWERS, MELTING_SIMON };

struct melting_part {
    enum melting_form form;
    double reducing_temperature, reducing_pressure; /* K, Pa */
    size_t count;
    const double (*terms)[2];                         /* n, t */
    double smallest_temperature, largest_temperature; /* K */
};

struct solid_spec {
    enum sublimation_form form;
    double reducing_temperature, reducing_pressure; /* K, Pa */
    size_t count;
    const double (*terms)[2];                         /* n, t */
    double smallest_temperature, largest_temperature; /* K, of the line; the latter is the triple point */
    double molar_volume;                              /* m3/mol */
    size_t melting_count;                             /* 0: no melting line is known */
    const struct melting_part *melting;
    const struct melting_part *melting_from_triple; /* of them the one that rises from the triple point; NULL: none */
};

/* A melting line is followed no further than to this part above the triple temperature: it is then at more than gases
 * are filled to. */
#define MELTING_FOLLOWED 0.07

/* Parameters of a component that belong to one cubic equation alone. A member set to zero (or not given) is left out
 * of the equation. Method words are those of fluid/methods.c. */
struct cubic_set {
    const char *method;                                      /* the method's word */
    struct optional critical_temperature, critical_pressure; /* K, Pa, the set's own; absent: the component's */
    bool has_twu;                                            /* L, M, N are given */
    double L, M, N;                                          /* alpha = Tr^(N (M - 1)) exp(L (1 - Tr^(N M))) */
    double shift;                                            /* c, m3/mol, in v = v_eos - c */
    /* K, in b(T) = b ((1 + A / (T + B)) / (1 + A / (Tc + B)))^3 */
    double covolume_A, covolume_B;
};

/* How often a molecule holds a group of the group-contribution method; groups are numbered by whoever fills in the
 * spec, alike in all its parts. */
struct group_share {
    size_t group;
    double number;
};

/* The interaction of two different groups, in either order: A and B in Pa. */
struct group_pair {
    size_t first, second;
    double A, B;
};

/* A pair's constants for one method: a_ij = (1 - kij) sqrt(a_i a_j), b_ij = (1 - lij) (b_i + b_j) / 2. */
enum pair_origin { PAIR_FROM_DECK, PAIR_FROM_GROUPS, PAIR_FROM_LIBRARY, PAIR_FROM_NOTHING };

struct pair_constant {
    size_t first, second;    /* indices of the components, in either order */
    const char *method;      /* the method's word */
    enum pair_origin origin; /* PAIR_FROM_DECK or PAIR_FROM_LIBRARY */
    double kij, lij;
};

/* What a pair of components adds to a mixture's residual Helmholtz energy beyond its components' own: a function of the
 * mixture's tau and delta, shared by all pairs that name it. */
struct departure_spec {
    const char *name;
    size_t residual_count;
    const struct residual_term *residual; /* of any kind but NONANALYTIC */
};

/* A pair's constants of a multi-fluid method. Of the order (first, second); turned round, a beta becomes 1 / beta:
 *
 *   T_r       = sum_i x_i^2 T_i + sum_{i<j} 2 x_i x_j beta_T gamma_T (x_i + x_j) / (beta_T^2 x_i + x_j) sqrt(T_i T_j)
 *   1 / rho_r = the same with beta_V, gamma_V, 1 / rho_i and (rho_i^(-1/3) + rho_j^(-1/3))^3 / 8
 *
 * (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032, eqs. 16 and 17). */
struct reducing_pair {
    size_t first, second;    /* indices of the components */
    const char *method;      /* the method's word */
    enum pair_origin origin; /* PAIR_FROM_DECK or PAIR_FROM_LIBRARY */
    double beta_T, gamma_T, beta_V, gamma_V;
    double weight;                          /* of the departure, F_ij */
    const struct departure_spec *departure; /* NULL: none */
};

/* A pure substance as every method sees it; what a method needs and does not find makes it unable to answer. */
struct pure_spec {
    const char *name;
    double molar_mass;                                                         /* kg/mol, always given */
    struct optional critical_temperature, critical_pressure, critical_density; /* K, Pa, mol/m3 */
    struct optional acentric;
    struct optional triple_temperature;     /* K */
    struct optional dipole;                 /* C m */
    const struct reference_spec *reference; /* NULL where none is published */
    const struct reference_spec *gerg_2008; /* NULL: not one of the components of GERG-2008 */
    const struct solid_spec *solid;         /* NULL: nothing is known of it as a solid */
    size_t cubic_set_count;
    const struct cubic_set *cubic_sets; /* at most one for each method */
    size_t group_count;                 /* 0: no assignment to groups */
    const struct group_share *groups;
};

/* A fluid: its substances and what is known of their pairs. A cubic method takes a pair's parameters from the deck,
 * else from the groups (the method that has them), else from the library, else sets them to zero. */
struct fluid_spec {
    size_t count;
    const struct pure_spec *const *pure; /* [count] */
    const double *kij; /* [count * count], symmetric, zero diagonal: as if from the deck, for any method; or NULL */
    size_t pair_count;
    const struct pair_constant *pairs;
    size_t group_pair_count;
    const struct group_pair *group_pairs;
    size_t reducing_pair_count;
    const struct reducing_pair *reducing_pairs;
};

#endif
