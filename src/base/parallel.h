/* Tasks on as many threads as there are, for work whose answers do not depend on who does it.
 *
 * Where the compiler knows no OpenMP, or within a task of another such call, the caller's thread does all of them in
 * their order.
 */
#ifndef TAREWRIGHT_BASE_PARALLEL_H
#define TAREWRIGHT_BASE_PARALLEL_H

#include <stddef.h>

/* How many threads that many tasks are worth: `wanted` (0: as many as the machine has), but no more than tasks, and at
 * least 1. */
size_t parallel_threads(size_t wanted, size_t tasks);

struct parallel {
    void (*work)(void *context, size_t thread, size_t task); /* thread from 0 to threads - 1, 0 being the caller's */
    void *context;
    void (*tell)(void *context, size_t done); /* on the caller's thread, now and then; NULL: nobody waits */
};

/* All tasks done when it returns. Signals go to the caller's thread alone; the other threads end. */
void parallel_run(const struct parallel *run, size_t threads, size_t tasks);

#endif
