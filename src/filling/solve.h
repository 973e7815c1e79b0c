/* Answers the sheets of a case: the trade's questions, put to the solvers, told as a result tree.
 *
 * Ownership: the result and all it needs live in the arena. Reentrant: nothing is kept between calls.
 */
#ifndef TAREWRIGHT_FILLING_SOLVE_H
#define TAREWRIGHT_FILLING_SOLVE_H

#include "base/arena.h"
#include "case/case.h"
#include "result/result.h"

/* Where a run stands, for somebody who waits for it. */
struct progress_state {
    size_t sheet, sheet_count; /* the sheet at work, from 1, and all there are */
    const char *kind;          /* of the sheet: "settled-pressure" */
    size_t done, count;        /* states of the sweep at work; both 0 where there is none */
};

/* Told at each sheet and after every few states of a sweep, on the thread that asked for the result; it may be often,
 * and is to be quick. What is told depends on the number of threads, the result never does. */
struct progress {
    void (*tell)(void *context, const struct progress_state *state);
    void *context;
};

/* Every sheet of the case, in order, with document, inputs, data, methods, warnings and cautions filled in. Never NULL:
 * what a method cannot answer is told in the result. */
struct result *filling_solve(const struct case_tree *tree, const char *version, struct arena *arena);

/* The same for somebody who waits: NULL is nobody. */
struct result *filling_solve_telling(const struct case_tree *tree, const char *version, const struct progress *progress,
                                     struct arena *arena);

/* One sheet of a case by itself, with nothing around it: for cases with shifted values. Requirements are held against
 * `held_mass` kg where that is not 0 and the sheet finds a charge. Nothing is told, and no uncertainty carried. */
const struct result_sheet *filling_solve_sheet(const struct case_tree *tree, size_t index, double held_mass,
                                               struct arena *arena);

#endif
