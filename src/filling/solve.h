/* Answers the sheets of a case: the trade's questions, put to the solvers, told as a result tree.
 *
 * Ownership: the result and all it needs live in the arena. Reentrant: nothing is kept between calls.
 */
#ifndef TAREWRIGHT_FILLING_SOLVE_H
#define TAREWRIGHT_FILLING_SOLVE_H

#include "base/arena.h"
#include "case/case.h"
#include "result/result.h"

/* Every sheet of the case, in order, with document, inputs, data, methods, warnings and cautions filled in. Never NULL:
 * what a method cannot answer is told in the result. */
struct result *filling_solve(const struct case_tree *tree, const char *version, struct arena *arena);

#endif
