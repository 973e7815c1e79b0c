/* What the files of the cubic family share.
 *
 * The family is  p = R T / (v - b) - a(T) / ((v + delta1 b)(v + delta2 b)),  written throughout with the packing
 * y = b / v, 0 < y < 1, the attraction theta = a / (b R T) and the reduced pressure pi = p b / (R T):
 *
 *   pi = y / (1 - y) - theta y^2 / ((1 + delta1 y)(1 + delta2 y))
 *
 * so that a pure fluid, or a mixture of given composition, has one parameter at each temperature: theta. A translated
 * equation has the same p at the volume v = v_eos - c; a mixture's c is sum x_i c_i.
 */
#ifndef TAREWRIGHT_FLUID_CUBIC_INTERNAL_H
#define TAREWRIGHT_FLUID_CUBIC_INTERNAL_H

#include "fluid/explanation.h"
#include "fluid/fluid.h"

enum { CUBIC_FIT_TERMS = 9 };

/* What tells the denominators apart. Equations that differ in a(T) only share a form. */
struct cubic_form {
    double delta1, delta2;   /* delta1 > delta2, or both zero */
    double omega_a, omega_b; /* a(Tc) = omega_a (R Tc)^2 / pc, b = omega_b R Tc / pc */
    /* Packings at saturation over s = sqrt(1 - theta_c / theta), y_c being the critical one:
     *   y_liquid = y_c (1 + s sum liquid[k] s^k)
     *   ln(y_vapour (theta_c / theta) / y_c) = (theta / theta_c) s sum vapour[k] s^k */
    double liquid[CUBIC_FIT_TERMS], vapour[CUBIC_FIT_TERMS];
};

/* ---- cubic_volume.c: one fluid in reduced variables -------------------------------------------------------------- */

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

/* ---- cubic_alpha.c: what a component's a and b do with temperature ----------------------------------------------- */

enum cubic_alpha {
    ALPHA_ONE,           /* alpha = 1 */
    ALPHA_REDLICH_KWONG, /* alpha = Tr^(-1/2) */
    ALPHA_SOAVE,         /* sqrt(alpha) = 1 + m (1 - sqrt(Tr)), m a polynomial of the acentric factor */
    ALPHA_TWU            /* alpha = Tr^(N (M - 1)) exp(L (1 - Tr^(N M))) */
};

/* One equation of state. */
struct cubic_equation {
    const char *method; /* the method's word */
    const struct cubic_form *form;
    enum cubic_alpha alpha;
    double (*slope)(double acentric); /* m of ALPHA_SOAVE, */
    const char *slope_formula;        /* and the same for readers; in the manner of fluid/explanation.h */
    const char *high_slope_formula;   /* the formula above omega = 0.491, where that is another one; else NULL */
    bool takes_groups;                /* pair parameters by groups were fitted to this alpha */
    bool needs_set;                   /* lives by a cubic_set of its own */
    bool has_moving_covolume;         /* b depends on temperature */
};

struct cubic_component {
    const struct cubic_set *set; /* NULL: none of this method */
    double critical_temperature; /* K */
    double critical_pressure;    /* Pa */
    double a_critical;           /* a(Tc) / R, K m3/mol */
    double root_a;               /* its square root */
    double root_critical;        /* sqrt(Tc) */
    double b;                    /* m3/mol, at Tc where it moves */
    double m;                    /* 1, of ALPHA_SOAVE */
    double L, M, N;              /* of ALPHA_TWU */
};

/* A function of temperature with its first and second derivatives. */
struct cubic_curve {
    double value, t, tt;
};

/* sqrt(a / (R T)) in (m3/mol)^(1/2). Soave's sqrt(alpha) is never negative here: beyond the temperature where it
 * passes through zero alpha rises again, as its square does. */
struct cubic_curve cubic_root_of_a(const struct cubic_equation *equation, const struct cubic_component *component,
                                   double temperature, double root_temperature);

/* b in m3/mol. */
struct cubic_curve cubic_covolume(const struct cubic_equation *equation, const struct cubic_component *component,
                                  double temperature);

/* ---- the fluid, and its state at one temperature ----------------------------------------------------------------- */

/* Two groups' share in a pair: `part` times a power of temperature that other pairs may need as well. */
struct cubic_group_part {
    size_t power; /* index into the fluid's powers */
    double part;  /* -(f_ik - f_jk)(f_il - f_jl) A_kl, Pa */
};

/* (298.15 K / T)^exponent of one pair of groups, exponent = B_kl / A_kl - 1. */
struct cubic_power {
    const struct group_pair *groups;
    double exponent;
};

struct cubic_powers {
    size_t count, capacity;
    struct cubic_power *items;
};

struct cubic_pair {
    enum pair_origin origin;
    double kij; /* zero from groups */
    double lij;
    size_t part_count; /* from groups */
    const struct cubic_group_part *parts;
};

struct cubic_fluid {
    struct fluid head;
    const struct cubic_equation *equation;
    const struct cubic_component *component; /* [count] */
    const double *b;                         /* [count], m3/mol; at the critical temperature where it moves */
    const double *c;                         /* [count], m3/mol, the translations */
    const struct cubic_pair *pair;           /* [count * count] */
    const double *factor;                    /* [count * count], 1 - kij */
    bool has_groups;                         /* some pair has its parameter from groups */
    struct cubic_powers powers;              /* what the pairs from groups need */
    bool has_lij;                            /* some pair has lij other than zero: b is quadratic in x */
};

/* What is worked out only on demand, or overwritten by every call. */
struct cubic_work {
    bool has_slopes;
    double *pair_t, *pair_tt; /* [count * count], derivatives of `pair` */
    double *A_n, *A_Tn;       /* [count], dA/dn_i and d2A/(dT dn_i) */
    double *B_n, *B_Tn;       /* [count], dB/dn_i and d2B/(dT dn_i) */
};

/* The arrays follow in the same block. */
struct cubic_at_t {
    struct fluid_at_t head;
    double *s, *s_t, *s_tt; /* [count], sqrt(a_i / (R T)) */
    double *moving_b;       /* [count], what `b` points to where it moves */
    double *b_t, *b_tt;     /* [count], not looked at unless b moves */
    double *pair;           /* [count * count], a_ij / (R T) in m3/mol */
    double *power;          /* [powers.count], over R T */
    const double *b;        /* [count], m3/mol */
    const double *c;        /* [count], m3/mol */
    struct cubic_work *work;
};

static inline const struct cubic_fluid *cubic_of(const struct fluid_at_t *at_t)
{
    return (const struct cubic_fluid *)at_t->fluid;
}

static inline const struct cubic_at_t *cubic_at(const struct fluid_at_t *at_t)
{
    return (const struct cubic_at_t *)at_t;
}

/* ---- cubic_pairs.c ----------------------------------------------------------------------------------------------- */

/* Chooses where every pair has its parameters from; `component` and `equation` are set. */
void cubic_choose_pairs(struct cubic_fluid *cubic, struct arena *arena);

/* Fills `pair`; s and b are set. */
void cubic_set_pairs(struct cubic_at_t *at);

/* Fills `pair_t` and `pair_tt` unless that was done since the temperature was set. */
void cubic_set_pair_slopes(const struct cubic_at_t *at);

/* struct fluid_ops' pair. */
enum answer cubic_pair_at(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out);

/* ---- cubic_energy.c: the residual Helmholtz energy --------------------------------------------------------------- */

/* The mixture as one fluid: sums over all of n. */
struct cubic_sums {
    double n; /* mol */
    double A; /* n^2 a / (R T), mol m3 */
    double B; /* n b, m3 */
    double C; /* n c, m3 */
};

/* Sets A_n and B_n as well. */
struct cubic_sums cubic_sums_of(const struct cubic_at_t *at, const double n[]);

/* B - C alone, m3: no state has a volume at or below it. */
double cubic_occupied_volume(const struct cubic_at_t *at, const double n[]);

/* struct fluid_ops' tv, for sums just taken; `volume` is the translated one. */
void cubic_energy_at(const struct cubic_at_t *at, const struct cubic_sums *sums, double volume, const double n[],
                     unsigned want, struct helmholtz *out);

/* ---- cubic.c ----------------------------------------------------------------------------------------------------- */

/* A fluid of that equation, or NULL with the reason in *lack. */
struct fluid *cubic_create(const struct fluid_ops *ops, const struct cubic_equation *equation,
                           const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack);

/* The members of struct fluid_ops that all cubic equations share. */
size_t cubic_at_t_size(const struct fluid *fluid);
enum answer cubic_set_t(struct fluid_at_t *at_t);
enum answer cubic_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                     struct helmholtz *out);
enum answer cubic_volume(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                         double *volume, int *roots);
enum answer cubic_volume_and_tv(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                unsigned want, double *volume, int *roots, struct helmholtz *out);
double cubic_smallest_volume(const struct fluid_at_t *at_t, const double n[]);
struct range_note cubic_range(const struct fluid *fluid, double temperature, double pressure);
enum answer cubic_critical(const struct fluid *fluid, struct critical_point *out);
enum answer cubic_saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out);

/* ---- cubic_explain.c --------------------------------------------------------------------------------------------- */

/* struct fluid_ops' explain. */
enum answer cubic_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                          struct explanation *out);

#endif
