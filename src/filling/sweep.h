/* The points of a sweep by one or more methods, on as many threads as there are, told in order on the caller's.
 *
 * Points are solved in chunks of one size, whatever the number of threads, and a method at the start of a chunk knows
 * nothing of the points before it: answers are the same to the last bit for any number of threads. Points are solved
 * some hundreds at a time and told before the next are, so that memory does not grow with their number.
 */
#ifndef TAREWRIGHT_FILLING_SWEEP_H
#define TAREWRIGHT_FILLING_SWEEP_H

#include "filling/sheet.h"

struct sweep {
    const struct sheet_run *run;
    size_t point_count;
    size_t method_count;
    struct method_run *const *methods; /* [method_count], each with its fluid */
    bool needs_edges;                  /* solve asks for a mixture's edges or boundary */
    size_t answer_size;                /* bytes of an answer, a multiple of those of a double */
    const void *context;
    /* Solves point `point` into `answer` (zeroed before its first use only) by a method of the thread's own. Called
     * on any thread: it may change nothing but the answer and the method, takes no memory and gives no warnings. The
     * method's memory holds until its next point only: what the answer needs of it is copied. */
    void (*solve)(const void *context, struct method_run *method, size_t point, void *answer);
    /* Tells answers on the caller's thread: in each block all points of the first method in order, then those of the
     * next. `method` is an index into the methods. */
    void (*tell)(void *teller, size_t method, size_t point, const void *answer);
    void *teller;
};

/* Leaves the methods as they were, but that a mixture's envelope was traced where it was needed, and given up where a
 * point spoke against it. */
void sweep_points(const struct sweep *sweep);

/* The methods of a sheet that have a fluid, in order, [run->method_count]; *count of them. */
struct method_run **methods_that_serve(const struct sheet_run *run, size_t *count);

/* ---- contents of the sheet's vessel over temperature ------------------------------------------------------------ */

/* An answer with the memory for its compositions, to which `contents` points. */
struct swept_contents {
    enum answer answer;
    struct contents contents; /* of ANSWER_OK */
    double x[];               /* [MOST_PHASES * components of a mixture] */
};

struct contents_sweep {
    const struct sheet_run *run;
    size_t method_count;
    struct method_run *const *methods;
    double mass; /* kg */
    size_t count;
    const double *temperatures; /* [count], K */
    void (*tell)(void *teller, size_t method, size_t point, const struct swept_contents *answer);
    void *teller;
};

void sweep_contents(const struct contents_sweep *sweep);

/* A copy for longer than its telling. */
struct swept_contents *swept_contents_keep(const struct swept_contents *answer, size_t components, struct arena *arena);

#endif
