/* What the files of the `reference` method share; nothing outside fluid/reference*.c includes this. */
#ifndef TAREWRIGHT_FLUID_REFERENCE_INTERNAL_H
#define TAREWRIGHT_FLUID_REFERENCE_INTERNAL_H

#include "fluid/fluid.h"
#include "fluid/reference_residual.h"

/* One saturated state in the variables that run smoothly from the triple point to the critical point:
 * T_r = T/Tc times ln(p/pc) and ln(rhoV/rhoc), rhoL/rhoc, and (dp/drho)/(R T) of the liquid. */
struct saturation_node {
    double pressure, vapour, liquid, stiffness;
};

#define SATURATION_NODES 48 /* beside the critical point */
#define DENSITY_NODES    40

/* Found once for each fluid: the saturation line at equal steps of s = sqrt(1 - T/Tc), which is straight where an
 * analytic equation is near its critical point, and the largest density the equation can be used to. */
struct reference_table {
    double step;                                        /* of s */
    size_t count;                                       /* nodes that were solved, the critical point included */
    struct saturation_node nodes[SATURATION_NODES + 1]; /* nodes[0] is the critical point */
    double first_log, log_step;                         /* of ln T, for largest_density */
    double largest_density[DENSITY_NODES];              /* mol/m3 */
};

struct reference {
    struct fluid head;
    const struct reference_spec *equation;
    const struct residual *residual;
    struct reference_table table;
    double acentric; /* of the equation itself, for starting values */
};

/* The coefficients of the residual terms follow behind it in the same block. */
struct reference_at_t {
    struct fluid_at_t head;
    double largest_density; /* mol/m3; not set while the table is being filled */
};

static inline const struct reference *reference_of(const struct reference_at_t *at_t)
{
    return (const struct reference *)(const void *)at_t->head.fluid;
}

static inline const struct residual_at_t *reference_residual_at(const struct reference_at_t *at_t)
{
    return (const struct residual_at_t *)(const void *)(at_t + 1);
}

/* A saturated pair in SI. */
struct reference_pair {
    double pressure, vapour_density, liquid_density; /* Pa, mol/m3 */
    double liquid_stiffness;                         /* (dp/drho)/(R T) of the liquid, 1 */
    bool inside;                                     /* false: extrapolated past the coldest node */
};

/* What a density solver looks at. */
struct reference_spot {
    double density;      /* mol/m3 */
    double pressure;     /* Pa */
    double stiffness;    /* (dp/drho)/(R T); not positive where mechanically unstable */
    double log_activity; /* alphar + delta dalphar/ddelta, ln(f/(rho R T)) */
};

struct reference_spot reference_spot_at(const struct reference_at_t *at_t, double density);

/* Sets the temperature (K) of a block of reference_at_t_bytes. */
size_t reference_at_t_bytes(const struct reference *reference);
void reference_set_temperature(struct reference_at_t *at_t, const struct reference *reference, double temperature);

/* Fills reference->table; `at_t` is a workspace. */
void reference_fill_table(struct reference *reference, struct reference_at_t *at_t);

/* The saturated pair below the critical temperature, interpolated in the table to about 1e-6. False where so far
 * below the coldest node that the prolonged line has lost its meaning. */
bool reference_pair_at(const struct reference *reference, double temperature, struct reference_pair *out);

/* The largest density (mol/m3) the equation is used to at this temperature. */
double reference_largest_density(const struct reference *reference, double temperature);

/* struct fluid_ops' volume. */
enum answer reference_volume(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                             double *volume, int *roots);

#endif
