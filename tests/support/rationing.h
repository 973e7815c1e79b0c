/* An arena's source that gives only so many blocks: for making the i-th allocation fail.
 */
#ifndef TAREWRIGHT_TESTS_RATIONING_H
#define TAREWRIGHT_TESTS_RATIONING_H

#include "base/arena.h"

#include <stdatomic.h>
#include <stdbool.h>

/* Threads may ask at once. */
struct ration {
    atomic_long left; /* blocks still given; below 0 for each that was asked for in vain */
    atomic_long held; /* blocks given and not given back */
};

struct arena_source ration_source(struct ration *ration);

/* Runs `work` in an arena of `blocks` blocks; true when it came to its end. Fails the running test when blocks were not
 * given back. */
bool ration_run(size_t blocks, void (*work)(struct arena *arena, void *context), void *context);

/* Runs `work` with 0, 1, 2, ... blocks until it comes to its end; returns how many that took. */
size_t ration_until_done(void (*work)(struct arena *arena, void *context), void *context);

#endif
