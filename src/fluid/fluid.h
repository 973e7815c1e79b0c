/* The property interface: every equation of state behind one small table of functions.
 *
 * A method gives either the residual Helmholtz energy as a function of (T, V, n), or compressibility and fugacity
 * coefficients as functions of (T, p, n). The layers above never call these functions; they call fluid/phase.h,
 * which turns either form into phase properties.
 *
 * Ownership: a struct fluid lives in the arena given to fluid_create, never changes afterwards and may be shared
 * between threads. A struct fluid_at_t is memory the caller provides (fluid_at_t_create, or any block of
 * fluid_at_t_size bytes), one for each thread, as it also holds scratch that calls with a const pointer overwrite;
 * setting a temperature allocates nothing.
 */
#ifndef TAREWRIGHT_FLUID_FLUID_H
#define TAREWRIGHT_FLUID_FLUID_H

#include "base/arena.h"
#include "fluid/spec.h"

#include <stdbool.h>
#include <stddef.h>

enum branch { BRANCH_VAPOUR, BRANCH_LIQUID, BRANCH_STABLE };

enum answer {
    ANSWER_OK,
    ANSWER_NO_SUCH_ROOT, /* the branch asked for has no root at this T, p */
    ANSWER_OUT_OF_RANGE, /* the method has no meaning there (V below the smallest volume, T <= 0) */
    ANSWER_CANNOT,       /* the method does not answer this question at all */
    ANSWER_FAILED        /* an iteration did not converge, or a value was not finite */
};

enum capability {
    CAN_LIQUID = 1,
    CAN_MIXTURE = 2,
    CAN_CALORIC = 4,
    IS_CUBIC = 8,          /* its liquid densities are estimates */
    IS_FOR_COMPARISON = 16 /* too far from real gases for any charge to rest on it */
};

/* What may be asked of a (T, V, n) method, as a set of bits. The value itself and F_V always come. */
enum helmholtz_want {
    WANT_F_VV = 1,
    WANT_F_N = 2,
    WANT_F_VN = 4,
    WANT_F_NN = 8,
    WANT_F_T = 16, /* F_T and F_TV */
    WANT_F_TT = 32,
    WANT_F_TN = 64
};

/* F = A^residual(T, V, n) / (R T), in mol, against the ideal gas at the same T, V, n, and its derivatives
 * (Michelsen and Mollerup, Thermodynamic Models, 2nd ed., chapter 2). The arrays are the caller's; one that is
 * wanted must not be NULL, one that is not wanted may be. */
struct helmholtz {
    double F;     /* mol */
    double F_V;   /* mol/m3 */
    double F_VV;  /* mol/m6 */
    double F_T;   /* mol/K */
    double F_TV;  /* mol/(K m3) */
    double F_TT;  /* mol/K2 */
    double *F_n;  /* [count], 1 */
    double *F_Vn; /* [count], 1/m3 */
    double *F_Tn; /* [count], 1/K */
    double *F_nn; /* [count * count], 1/mol */
};

/* What a (T, p, n) method gives for one branch. An array that is NULL is not asked for. */
struct explicit_phase {
    double Z;
    double *ln_phi;     /* [count] */
    double *dln_phi_dn; /* [count * count], 1/mol at constant T, p */
    double *dln_phi_dp; /* [count], 1/Pa */
    double *dln_phi_dt; /* [count], 1/K at constant p */
    int roots;          /* mechanically stable roots found (1 or 2) */
    /* A method that sets has_slopes gives the two arrays above and all of these as well. */
    bool has_slopes;
    double compliance;        /* Z - p dZ/dp at constant T, that is -(p^2 / n R T) dV/dp; for a liquid small beside Z */
    double Z_ln_t;            /* T dZ/dT at constant p */
    double residual_gibbs_rt; /* the mean of ln phi_i by mole */
    double residual_enthalpy_rt, residual_heat_capacity_r; /* as in struct phase */
};

struct critical_point {
    double temperature;  /* K */
    double pressure;     /* Pa */
    double molar_volume; /* m3/mol */
};

/* First values for a pure fluid's saturation; all greater than zero. */
struct saturation_start {
    double pressure;                     /* Pa */
    double vapour_volume, liquid_volume; /* m3/mol */
};

/* Below a limit by no more than this part of it, a temperature is the limit as written: 0.01 degC is not 273.16 K to
 * the last digit. */
#define TEMPERATURE_ROUNDING 1e-12

/* Where a state lies relative to a method's published range. */
enum range_side { RANGE_INSIDE, RANGE_TOO_COLD, RANGE_TOO_HOT, RANGE_TOO_HIGH_PRESSURE };

struct range_note {
    enum range_side side;
    double limit; /* K or Pa: the limit that was passed */
};

/* Why a fluid could not be created. */
enum fluid_lack {
    LACK_NOTHING,
    LACK_METHOD,         /* no method of that name */
    LACK_MIXTURE,        /* the method is for pure gases */
    LACK_CRITICAL_POINT, /* `component` has no critical temperature or pressure */
    LACK_ACENTRIC,       /* `component` has no acentric factor */
    LACK_EQUATION,       /* `component` has no reference equation */
    LACK_PARAMETERS      /* `component` has no parameters of this method's own */
};

struct fluid_lack_report {
    enum fluid_lack lack;
    size_t component; /* index into the spec */
};

/* The interaction a method uses for a pair, and where it has it from. */
struct pair_parameter {
    enum pair_origin origin;
    double kij; /* 1, at the temperature set */
    double lij; /* 1 */
};

/* What a multi-fluid method has of a pair, in the order of the two asked for: see struct reducing_pair. With
 * PAIR_FROM_NOTHING nothing is published and the method's stated estimate beta = gamma = 1 (Lorentz and Berthelot),
 * without a departure, stands in. */
struct reducing_parameter {
    enum pair_origin origin;
    double beta_T, gamma_T, beta_V, gamma_V;
    double weight;         /* of the departure function, F_ij; 0 without one */
    const char *departure; /* its name; NULL: none */
};

struct fluid;
struct fluid_at_t;
struct explanation;

enum fluid_form { FLUID_FROM_TV, FLUID_FROM_TP };

/* One method. A member that a form does not have is NULL. */
struct fluid_ops {
    const char *name;     /* the deck's word for it */
    const char *title;    /* the published name, for listings */
    const char *citation; /* the publication; NULL: each component's own */
    const char *validity; /* what is known of its range and accuracy; NULL: each component's own */
    enum fluid_form form;
    unsigned capabilities;

    struct fluid *(*create)(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack);
    size_t (*at_t_size)(const struct fluid *fluid);
    /* Everything that depends on T alone; `at_t->fluid` and `at_t->temperature` are already set. */
    enum answer (*set_t)(struct fluid_at_t *at_t);

    enum answer (*tv)(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                      struct helmholtz *out);
    enum answer (*tp)(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                      struct explicit_phase *out);

    /* `volume` and then `tv` there, for a method that does better with both at once; NULL: one after the other. */
    enum answer (*volume_and_tv)(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                 unsigned want, double *volume, int *roots, struct helmholtz *out);

    /* The volume (m3, for all of n) of the root on `branch` at `pressure`; BRANCH_STABLE: the one of lower Gibbs
     * energy. *roots is the number of mechanically stable roots found (1 or 2). NULL: phase.c solves for it. */
    enum answer (*volume)(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                          double *volume, int *roots);
    /* No state of the method has a volume at or below this (m3, for all of n). */
    double (*smallest_volume)(const struct fluid_at_t *at_t, const double n[]);
    struct range_note (*range)(const struct fluid *fluid, double temperature, double pressure);
    /* Pure fluids only. */
    enum answer (*critical)(const struct fluid *fluid, struct critical_point *out);
    enum answer (*saturation_start)(const struct fluid_at_t *at_t, struct saturation_start *out);
    /* The interaction of components i and j. NULL: the method has no such parameters. */
    enum answer (*pair)(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out);
    /* The reducing parameters of components i and j. NULL: not a multi-fluid method. */
    enum answer (*reducing)(const struct fluid *fluid, size_t i, size_t j, struct reducing_parameter *out);
    /* The equation whose ideal terms component i takes, and by what its alpha0 is multiplied; NULL: none. NULL for the
     * operation: the component's reference equation, by its gas constant over the method's. */
    const struct reference_spec *(*ideal_of)(const struct fluid *fluid, size_t i, double *scale);
    /* Pure fluids only: the numbers behind the pressure of one phase (fluid/explanation.h). NULL: not explained. */
    enum answer (*explain)(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                           struct explanation *out);
    /* The same by a method that explains mixtures too, in `volume` m3 for all of n. NULL: see `explain`. */
    enum answer (*explain_whole)(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                                 struct explanation *out);
};

/* The common head of every method's fluid; a method's own struct has it as first member. */
struct fluid {
    const struct fluid_ops *ops;
    const struct fluid_spec *spec;
    size_t count;
    double gas_constant; /* J/(mol K), the method's own */
};

/* The common head of every method's state at one temperature. */
struct fluid_at_t {
    const struct fluid *fluid;
    double temperature; /* K */
};

/* All methods, in the order of the table in methods.c; NULL-terminated. */
const struct fluid_ops *const *fluid_methods(void);

/* The method of that name, or NULL. */
const struct fluid_ops *fluid_method(const char *name);

/* A fluid of `spec` by the method named, or NULL with the reason in *lack. `spec` must outlive it. */
const struct fluid *fluid_create(const char *method, const struct fluid_spec *spec, struct arena *arena,
                                 struct fluid_lack_report *lack);

/* Bytes a fluid_at_t of this fluid takes, and one taken from an arena. */
size_t fluid_at_t_size(const struct fluid *fluid);
struct fluid_at_t *fluid_at_t_create(const struct fluid *fluid, struct arena *arena);

/* Sets the temperature (K, greater than zero and finite); must be called before any property is asked for. */
enum answer fluid_set_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature);

/* The interaction used for two different components of a mixture; ANSWER_CANNOT where the method has none. */
enum answer fluid_pair(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out);

/* The reducing parameters used for two different components of a mixture; ANSWER_CANNOT where the method has none. */
enum answer fluid_reducing(const struct fluid *fluid, size_t i, size_t j, struct reducing_parameter *out);

#endif
