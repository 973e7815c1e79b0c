/* One point of a phase boundary and Newton's steps to it, shared by single points and by the tracing of envelopes. */
#ifndef TAREWRIGHT_EQUILIBRIUM_BOUNDARY_INTERNAL_H
#define TAREWRIGHT_EQUILIBRIUM_BOUNDARY_INTERNAL_H

#include "equilibrium/boundary.h"

/* Unknowns X: ln K_i of the components present, then ln T, then ln p. One of them is held at a value. */
struct boundary_state {
    const struct fluid_at_t *at_t;
    struct fluid_at_t *settable; /* the same, where the temperature may change; else NULL */
    struct equilibrium_workspace *ws;
    size_t size;                          /* active_count + 2 */
    double *X;                            /* [size] */
    double *slope;                        /* [size], dX by the held unknown; NULL where it is not wanted */
    double residual;                      /* largest of the equations */
    double feed_volume, incipient_volume; /* m3/mol of the last evaluation */
    double expected_feed,
        expected_incipient; /* m3/mol: of several roots the nearest to these is taken; 0: by density */
    bool is_dew;            /* with no volume expected: the feed is the vapour */
    int iterations;
};

/* Prepares for the feed in ws. X and slope are the caller's, [count + 2]. */
void boundary_begin(struct boundary_state *b, const struct fluid_at_t *at_t, struct fluid_at_t *settable,
                    struct equilibrium_workspace *ws, double *X, double *slope);

/* Newton's steps with X[held] as it stands. ANSWER_OK with X, slope, volumes and residual of the solution; FAILED when
 * there was no convergence, or only to the trivial solution, all K = 1. */
enum answer boundary_solve(struct boundary_state *b, size_t held, int most_steps);

/* The equations at X as it stands, for where Newton's matrix is as good as singular: ANSWER_OK with volumes and
 * residual where that is within the tolerance, even if all K are one. */
enum answer boundary_take(struct boundary_state *b, double tolerance);

/* Copies the point out, and tests its feed for stability. */
enum answer boundary_report(struct boundary_state *b, struct boundary_point *out);

/* ---- lines of an envelope: shared by its tracing and by what is read from it ------------------------------------- */

enum { ENVELOPE_MOST_STEPS = 12 }; /* of Newton's method, from one point of a line to another */

/* The unknowns of point k, [components + 2]. */
double *envelope_point_at(const struct envelope *envelope, size_t k);

/* The component whose ratio is farthest from one at X. */
size_t envelope_fastest_ratio(const struct boundary_state *b, const double *X);

/* Does the line pass a critical point between two of its points? The ratio that is farthest from one turns over. */
bool envelope_is_across(const struct boundary_state *b, const double *before, const double *after);

/* Sets b->X `part` of the way from one point to another in the held unknown, by the cubic with the slopes that stand in
 * slope_before and slope_after of the workspace. */
void envelope_curve_between(struct boundary_state *b, size_t held, const double *before, const double *after,
                            double part);

#endif
