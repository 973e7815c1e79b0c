/* The campaign: a million random states of mixtures of library gases, or as many as the first argument says, from seed
 * 1 or the second, by Peng-Robinson or the method that is the third. Prints a tally for each kind of state and fails
 * when one breaks its bounds. */
#include "support/campaign.h"

#include <stdio.h>
#include <stdlib.h>

/* Out of ten states, so many of each kind; and the refusals allowed, as one in so many. */
static const struct {
    enum state_kind kind;
    long tenths, one_refusal_in;
} SHARES[] = {
    {STATE_GENERAL, 5, 100000},     {STATE_NEARLY_PURE, 1, 100000}, {STATE_NEAR_BOUNDARY, 2, 100000},
    {STATE_NEAR_CRITICAL, 1, 1000}, {STATE_AZEOTROPE, 1, 100000},
};

int main(int argc, char **argv)
{
    const long states = argc > 1 ? strtol(argv[1], NULL, 10) : 1000000;
    const uint64_t seed = argc > 2 ? strtoull(argv[2], NULL, 10) : 1;
    const char *method = argc > 3 ? argv[3] : "peng-robinson";
    bool is_good = true;
    for (size_t k = 0; k < sizeof SHARES / sizeof *SHARES; k++) {
        struct campaign_tally t;
        campaign_run(method, seed, SHARES[k].tenths * states / 10, SHARES[k].kind, 100, &t);
        printf("%-14s %8ld states: %ld / %ld / %ld / %ld of 1 / 2 / 3 / more phases, %ld refused, %ld wrong, "
               "%ld of %ld searched miss a phase\n",
               campaign_kind_name(SHARES[k].kind), t.states, t.by_phases[1], t.by_phases[2], t.by_phases[3],
               t.by_phases[4] + t.by_phases[5] + t.by_phases[6], t.refused, t.wrong, t.missed, t.searched);
        printf("               balance %.1e, ln f %.1e, gain %.1e, tpd %.1e, first bad seed %llu\n", t.worst_balance,
               t.worst_residual, t.worst_gain, t.lowest_tpd, (unsigned long long)t.first_bad);
        is_good = is_good && t.wrong == 0 && t.missed == 0 && t.refused * SHARES[k].one_refusal_in <= t.states;
    }
    return is_good ? EXIT_SUCCESS : EXIT_FAILURE;
}
