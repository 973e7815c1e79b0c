/* Library mixtures beside published measurements: fluids as a user's deck has them, and the tables of measurements. */
#ifndef TAREWRIGHT_TESTS_MEASURED_MIXTURE_H
#define TAREWRIGHT_TESTS_MEASURED_MIXTURE_H

#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "equilibrium/split.h"

enum { MEASURED_MOST = 3, MEASURED_FIELDS = 10 };

/* ---- tables --------------------------------------------------------------------------------------------------------
 */

struct measured_row {
    const char *field[MEASURED_FIELDS]; /* by column; an empty text where the row is shorter */
};

struct measured_table {
    size_t count;
    const struct measured_row *rows;
};

/* A file of tests/data/measurements, without the lines that start with # and without the heading; in the arena. */
struct measured_table measured_table_read(const char *name, struct arena *arena);

/* The number in a field; NaN where it is empty. */
double measured_number(const struct measured_row *row, size_t column);

/* ---- mixtures ------------------------------------------------------------------------------------------------------
 */

/* A mixture by one method, with the memory for its equilibria; all from the arena. */
struct measured_mixture {
    const struct fluid *fluid;
    const struct fluid_spec *spec;
    struct fluid_at_t *at_t;
    struct equilibrium_workspace *ws;
    struct split *split;
    struct envelope *envelope;
    struct boundary_list *boundaries;
};

/* The same as a deck's mixture, 1 % of each component but the last. */
struct case_fluid;
const struct case_fluid *measured_case_fluid(const char *method, const char *const names[], size_t count,
                                             struct arena *arena);

/* `names` are the library's words; fails the test where the method cannot be had. */
struct measured_mixture measured_mixture_create(const char *method, const char *const names[], size_t count,
                                                struct arena *arena);

/* Where the parameter of the first two components comes from. */
enum pair_origin measured_pair_origin(const struct measured_mixture *mixture);

/* The stable phases of z at T (K), p (Pa) in mixture->split, their number returned; fails the test without an answer.
 */
size_t measured_phases(const struct measured_mixture *mixture, double T, double p, const double z[]);

/* Mole fractions of the first of two components in liquid and vapour at T (K), p (Pa): of the two-phase feed nearest to
 * `near`. False where every feed forms one phase. */
bool measured_tie_line(const struct measured_mixture *mixture, double T, double p, double near, double *x1, double *y1);

/* The stable dew or bubble pressure (Pa) of z at T (K) that is nearest to `near` (Pa). False where there is none
 * or no answer. */
bool measured_boundary_pressure(const struct measured_mixture *mixture, enum boundary_kind kind, double T,
                                const double z[], double near, double *pressure);

/* The critical point of z, from the temperature and the volume the mixture has at `near` (K, Pa) on; fails the test
 * without one. */
struct mixture_critical measured_critical(const struct measured_mixture *mixture, const double z[],
                                          struct critical_point near);

/* ---- deviations ----------------------------------------------------------------------------------------------------
 */

/* Absolute deviations of one kind, gathered. */
struct deviations {
    size_t points, missing; /* with a value, and those for which the method has none */
    double sum, sum_of_signed, worst;
};

/* Takes a deviation in where the quantity was measured, or counts it as missing where the method has no value. */
void deviations_of(struct deviations *deviations, bool is_measured, bool is_found, double deviation);
double deviations_mean(const struct deviations *deviations);

#endif
