/* How long random draws take, in seconds on the caller's thread, for `make bench`. */
#ifndef TAREWRIGHT_TESTS_TIMED_DRAWS_H
#define TAREWRIGHT_TESTS_TIMED_DRAWS_H

#include <stddef.h>

/* The composition of a blend off the scales, summed up with its interval. */
double time_blend_draws(size_t draws);

/* The charge of 2 % n-butane in nitrogen filled by gauge, and its pressure at 50 degC and at -25 degC, where it is two
 * phases: each state proved stable. The sheet with the draws less the sheet without; below 0 where it had no answer. */
double time_settled_draws(size_t draws);

#endif
