/* Every listed row of a case beside the limit computed for it: the last part of a result with two rows or more.
 *
 * Ownership: the ledger and its lines live in the arena of the result.
 */
#ifndef TAREWRIGHT_FILLING_LISTED_LEDGER_H
#define TAREWRIGHT_FILLING_LISTED_LEDGER_H

#include "filling/sheet.h"

/* A rule's criterion that the listed charge misses. */
struct listed_miss {
    const char *criterion;
    double temperature; /* K, the worst */
    const char *words;  /* by how much, or what was found */
};

struct listed_line {
    const struct sheet_run *run;
    const char *entry;
    double test_pressure; /* gauge, Pa */
    double listed;        /* filling ratio */
    const char *method;
    struct optional computed;    /* filling ratio, unrounded; not given where the method has no limit */
    struct optional liquid_full; /* K, of the listed charge */
    size_t miss_count, miss_capacity;
    struct listed_miss *misses;
};

struct listed_ledger {
    size_t count, capacity;
    struct listed_line *items;
};

/* Adds a sheet of its own at the end of the result: the rows, what those that miss a criterion miss, and how many lie
 * within 0.01 of the computed ratio. Nothing for fewer than two rows. */
void tell_listed_ledger(const struct listed_ledger *ledger, struct result *result);

#endif
