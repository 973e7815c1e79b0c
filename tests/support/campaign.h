/* Random states solved one by one, each answer held against the conditions it must meet. */
#ifndef TAREWRIGHT_TESTS_CAMPAIGN_H
#define TAREWRIGHT_TESTS_CAMPAIGN_H

#include "support/mixture_states.h"

struct campaign_tally {
    long states, by_phases[MOST_PHASES + 1];
    long refused;          /* no answer, with a reason */
    long wrong;            /* an answer that breaks one of the conditions, or is not a number */
    long searched, missed; /* answers searched exhaustively for a further phase, and those where one was found */
    double worst_balance;  /* mass balance relative to each component */
    double worst_residual; /* difference of ln f between phases */
    double worst_gain;     /* Gibbs energy against the feed as one phase, by RT: not to be above rounding */
    double lowest_tpd;     /* final tangent-plane distance */
    uint64_t first_bad;    /* a seed that was refused, wrong or missed something; 0: none */
};

/* The states of seeds first .. first + count - 1 of one kind by a method; every `searched_every`-th answer is searched.
 */
void campaign_run(const char *method, uint64_t first, long count, enum state_kind kind, long searched_every,
                  struct campaign_tally *out);

/* A word for each kind. */
const char *campaign_kind_name(enum state_kind kind);

#endif
