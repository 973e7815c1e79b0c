/* A small part of the campaign of tests/campaign.c, with seeds of its own. */
#include "support/campaign.h"
#include "support/check.h"

/* How many states of each kind by each method; most of a multi-fluid method's time goes into finding the boundaries and
 * critical points to be beside of. */
static const struct {
    const char *method;
    long counts[STATE_KINDS];
} RUNS[] = {
    {"peng-robinson", {4000, 1000, 1500, 300, 1000}},
    {"lee-kesler", {1000, 200, 300, 50, 100}},
    {"gerg-2008", {300, 50, 50, 20, 20}},
    {"multi-fluid", {150, 50, 30, 10, 10}},
};

static void random_states_keep_the_bounds(void **state)
{
    (void)state;
    for (size_t k = 0; k < sizeof RUNS / sizeof *RUNS; k++) {
        for (int kind = 0; kind < STATE_KINDS; kind++) {
            struct campaign_tally tally;
            const long count = RUNS[k].counts[kind];
            campaign_run(RUNS[k].method, 900000001, count, (enum state_kind)kind, 10, &tally);
            if (tally.refused != 0 || tally.wrong != 0 || tally.missed != 0) {
                fail_msg("%s, %s: %ld refused, %ld wrong, %ld missed, first seed %llu", RUNS[k].method,
                         campaign_kind_name((enum state_kind)kind), tally.refused, tally.wrong, tally.missed,
                         (unsigned long long)tally.first_bad);
            }
            assert_true(tally.searched >= count / 10);
        }
    }
}

/* The states themselves: the same seed is the same state, another kind or seed another. */
static void a_seed_is_a_state(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    struct mixture_state first, again, other;
    mixture_state_draw(42, STATE_GENERAL, room, &first);
    mixture_state_draw(42, STATE_GENERAL, room, &again);
    mixture_state_draw(43, STATE_GENERAL, room, &other);
    assert_int_equal(first.count, again.count);
    assert_close(again.pressure, first.pressure, 1e-15, "the same seed");
    assert_false(check_is_close(other.pressure, first.pressure, 1e-6));
    state_room_close(room);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(random_states_keep_the_bounds),
        cmocka_unit_test(a_seed_is_a_state),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
