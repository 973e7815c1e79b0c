/* The residual terms of a mixture's components and departure functions, all at one tau and delta, as one sum.
 *
 * Each component, and each departure function, is a part. The mixture's residual Helmholtz energy is the sum of the
 * parts' times their weights: mole fractions, and sums of F_ij x_i x_j. Since all parts share tau and delta, terms of
 * all of them that have the same factor in delta share a slot; at given tau and weights a density costs one exponential
 * for each kind of factor and one multiplication for each slot, however many components there are.
 *
 * Ownership: struct parts lives in the arena given and never changes. Its state at one tau is the caller's block of
 * parts_state_size bytes, and no function here allocates after creation.
 */
#ifndef TAREWRIGHT_FLUID_MULTI_FLUID_TERMS_H
#define TAREWRIGHT_FLUID_MULTI_FLUID_TERMS_H

#include "base/arena.h"
#include "fluid/reference_residual.h"

/* The terms of one part. */
struct part_terms {
    size_t count;
    const struct residual_term *terms;
};

struct parts;
struct parts_state;

/* All parts, in the order given. */
const struct parts *parts_create(const struct part_terms *terms, size_t count, struct arena *arena);
size_t parts_state_size(const struct parts *parts);

/* Must be called once on a new block before anything else. */
void parts_state_place(struct parts_state *state, const struct parts *parts);

/* Sets tau, finite and greater than zero. */
void parts_set_tau(struct parts_state *state, double tau);

/* Sets the weights ([count], read during this call only); `with_slopes`: derivatives by tau will be asked for. */
void parts_set_weights(struct parts_state *state, const double weights[], bool with_slopes);

/* The weighted sum at delta > 0: value, d and dd; `parts_by_both` also t, tt and dt, which takes slopes. */
void parts_by_density(struct parts_state *state, double delta, struct residual_sums *out);
void parts_by_both(struct parts_state *state, double delta, struct residual_sums *out);

/* Each part by itself, at the delta of the last parts_by_both: its value alone, or value, d and t
 * ([count] each; slopes needed). */
void parts_values(struct parts_state *state, double value[]);
void parts_slopes(struct parts_state *state, double value[], double d[], double t[]);

#endif
