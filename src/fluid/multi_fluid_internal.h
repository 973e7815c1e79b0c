/* What the files of the multi-fluid methods share; nothing outside fluid/multi_fluid*.c and fluid/gerg.c includes this.
 *
 *   alphar(tau, delta, x) = sum_i x_i alphar_i(tau, delta) + sum_{i<j} x_i x_j F_ij alphar_ij(tau, delta)
 *   tau = T_r(x) / T,  delta = rho / rho_r(x)
 *
 * (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032, eqs. 10 to 17). */
#ifndef TAREWRIGHT_FLUID_MULTI_FLUID_INTERNAL_H
#define TAREWRIGHT_FLUID_MULTI_FLUID_INTERNAL_H

#include "fluid/fluid.h"
#include "fluid/multi_fluid_terms.h"

/* ---- the fluid --------------------------------------------------------------------------------------------------- */

/* What two components add to one reducing function Y: c x_i x_j (x_i + x_j) / (b x_i + x_j). */
struct reducing_term {
    double c, b;
};

/* Components i < j. */
struct multi_fluid_pair {
    size_t i, j;
    struct reducing_term temperature, volume;
    const struct reducing_pair *given; /* NULL: none published, the stated estimate beta = gamma = 1 */
    bool is_turned;                    /* `given` is of the order (j, i) */
};

/* F_ij alphar_ij; `function` counts the distinct departure functions. */
struct multi_fluid_departure {
    size_t i, j, function;
    double weight;
};

/* The largest delta of each component over ln tau, at equal steps. */
enum { MULTI_FLUID_NODES = 40 };

struct multi_fluid {
    struct fluid head;
    const struct reference_spec *const *equation; /* [count] */
    double ideal_scale_of_all;                    /* GERG's R* / R; 0: each equation's own R over R */
    const double *temperature, *volume;           /* [count], K and m3/mol, the components' reducing values */
    size_t pair_count;
    const struct multi_fluid_pair *pairs; /* all i < j, row by row */
    size_t departure_count, function_count;
    const struct multi_fluid_departure *departures;
    const struct parts *parts;                  /* the components, then the departure functions */
    double acentric;                            /* of an average component, for starting values */
    double (*largest_delta)[MULTI_FLUID_NODES]; /* [count] */
    double smallest_temperature, largest_temperature, largest_pressure;
};

/* ---- its state at one temperature ----------------------------------------------------------------------------------
 */

/* How far the state at the present composition has been worked out. */
enum multi_fluid_stage { STAGE_NOTHING, STAGE_VALUES, STAGE_SLOPES };

/* Whether an isotherm of the present composition has an unstable part. */
enum multi_fluid_isotherm { ISOTHERM_UNKNOWN, ISOTHERM_MONOTONE, ISOTHERM_MAY_LOOP };

/* Everything at one temperature that depends on composition; the next composition overwrites it. */
struct multi_fluid_work {
    enum multi_fluid_stage stage;
    enum multi_fluid_isotherm isotherm;
    bool has_reducing_slopes;
    double amount;               /* mol */
    double reducing_temperature; /* K */
    double reducing_volume;      /* m3/mol */
    double tau;
    double *n;                                /* [count], mol: what all this was worked out for */
    double *x;                                /* [count], mole fractions */
    double *weights;                          /* [count + functions] */
    double *temperature_slope, *volume_slope; /* [count], n dln(T_r)/dn_i and n dln(1/rho_r)/dn_i */
    double *value, *d, *t;                    /* [count + functions], the parts */
    double *a, *a_d, *a_t;                    /* [count], dalphar/dx_i and its delta and tau derivatives */
    double *mixed;                            /* [count * count], d2alphar/(dx_i dx_j) */
    double *bent_temperature, *bent_volume;   /* [count * count], n^2 d2ln/(dn_i dn_j) of T_r and of 1/rho_r */
    struct parts_state *parts;
};

struct multi_fluid_at_t {
    struct fluid_at_t head;
    struct multi_fluid_work *work;
};

static inline const struct multi_fluid *multi_fluid_of(const struct fluid_at_t *at_t)
{
    return (const struct multi_fluid *)(const void *)at_t->fluid;
}

static inline struct multi_fluid_work *multi_fluid_work_of(const struct fluid_at_t *at_t)
{
    return ((const struct multi_fluid_at_t *)(const void *)at_t)->work;
}

/* ---- multi_fluid_reducing.c ----------------------------------------------------------------------------------------
 */

/* The pairs' terms of one function: c and b from beta, gamma and the pair's own mean of the two reducing values. */
struct reducing_term reducing_term_of(double beta, double gamma, double mean);

/* T_r and 1/rho_r at w->x. */
void multi_fluid_reduce(const struct multi_fluid *fluid, struct multi_fluid_work *w);

/* The first derivatives of their logarithms by amount; the second ones. */
void multi_fluid_reduce_slopes(const struct multi_fluid *fluid, struct multi_fluid_work *w);
void multi_fluid_reduce_bends(const struct multi_fluid *fluid, struct multi_fluid_work *w);

/* ---- multi_fluid_energy.c ------------------------------------------------------------------------------------------
 */

/* Works out the state for n; ANSWER_OUT_OF_RANGE for amounts without meaning. Nothing is done twice for the same n. */
enum answer multi_fluid_set_amounts(const struct fluid_at_t *at_t, const double n[], enum multi_fluid_stage stage);

/* struct fluid_ops' tv, and the same once amounts are set to the stage it needs. */
enum multi_fluid_stage multi_fluid_stage_for(unsigned want);
enum answer multi_fluid_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                           struct helmholtz *out);
enum answer multi_fluid_energy(const struct fluid_at_t *at_t, double volume, unsigned want, struct helmholtz *out);

/* ---- multi_fluid_roots.c -------------------------------------------------------------------------------------------
 */

enum answer multi_fluid_volume(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                               double *volume, int *roots);
enum answer multi_fluid_volume_and_tv(const struct fluid_at_t *at_t, double pressure, const double n[],
                                      enum branch branch, unsigned want, double *volume, int *roots,
                                      struct helmholtz *out);
double multi_fluid_smallest_volume(const struct fluid_at_t *at_t, const double n[]);

/* ---- multi_fluid_create.c ------------------------------------------------------------------------------------------
 */

/* What tells one multi-fluid method from another. */
struct multi_fluid_model {
    const struct fluid_ops *ops;
    const struct reference_spec *(*equation_of)(const struct pure_spec *pure);
    enum fluid_lack lack; /* where equation_of gives NULL */
    double gas_constant;  /* J/(mol K), of mixtures */
    double ideal_scale_of_all;
};

/* A fluid of that model, or NULL with the reason in *lack. */
struct fluid *multi_fluid_create(const struct multi_fluid_model *model, const struct fluid_spec *spec,
                                 struct arena *arena, struct fluid_lack_report *lack);

/* The node of struct multi_fluid's table that a tau lies at, from 0 to the last; and the tau of a node. */
double multi_fluid_node_of_tau(double tau);
double multi_fluid_node_tau(size_t node);

/* The members of struct fluid_ops that all multi-fluid methods share. */
size_t multi_fluid_at_t_size(const struct fluid *fluid);
enum answer multi_fluid_set_t(struct fluid_at_t *at_t);
struct range_note multi_fluid_range(const struct fluid *fluid, double temperature, double pressure);
const struct reference_spec *multi_fluid_ideal_of(const struct fluid *fluid, size_t i, double *scale);
enum answer multi_fluid_reducing(const struct fluid *fluid, size_t i, size_t j, struct reducing_parameter *out);

/* ---- multi_fluid_explain.c -----------------------------------------------------------------------------------------
 */

/* struct fluid_ops' explain_whole. */
enum answer multi_fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                                struct explanation *out);

#endif
