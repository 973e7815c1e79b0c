/* Searches over one variable: a root in a bracket, and the least value over a range.
 *
 * Nothing is allocated; the function searched keeps its own context. An answer other than ANSWER_OK from the function
 * ends the search with that answer.
 */
#ifndef TAREWRIGHT_FILLING_SEARCH_H
#define TAREWRIGHT_FILLING_SEARCH_H

#include "fluid/fluid.h"

struct search_function {
    enum answer (*value)(void *context, double x, double *y);
    void *context;
};

/* Two places with values of different sign; `a` keeps the sign it started with. */
struct search_bracket {
    double a, value_a;
    double b, value_b;
};

/* Narrows a bracket with finite or infinite values of different sign until |b - a| <= absolute + relative |b|.
 * ANSWER_NO_SUCH_ROOT when the signs are equal, ANSWER_FAILED when a value is not a number or the passes run out.
 * Chandrupatla, Advances in Engineering Software 28 (1997) 145. */
enum answer search_root(const struct search_function *function, double absolute, double relative,
                        struct search_bracket *bracket);

/* The place of the least value over [from, to]: every `step` (at most) a value, then a golden-section search around
 * each low place to `tolerance`. Values may be infinite. *at is `from` or `to` exactly when an end is the lowest. */
enum answer search_least(const struct search_function *function, double from, double to, double step, double tolerance,
                         double *at, double *value);

#endif
