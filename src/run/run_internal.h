/* What the files of src/run share. */
#ifndef TAREWRIGHT_RUN_RUN_INTERNAL_H
#define TAREWRIGHT_RUN_RUN_INTERNAL_H

#include "case/case.h"
#include "run/run.h"

/* An empty run with memory of its own; NULL when there is none. */
struct run *run_begin(const struct arena_source *source);

/* What the messages about a deck amount to. */
enum run_status status_of_messages(const struct diagnostics *diagnostics);

/* The root deck, normalised, into the run's output. */
void print_root(struct run *run, const struct deck *deck, struct diagnostics *diagnostics);

#endif
