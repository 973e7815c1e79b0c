/* A small part of the campaign of tests/campaign.c, with seeds of its own. */
#include "support/campaign.h"
#include "support/check.h"

static void random_states_keep_the_bounds(void **state)
{
    (void)state;
    static const long counts[STATE_KINDS] = {4000, 1000, 1500, 300, 1000};
    for (int kind = 0; kind < STATE_KINDS; kind++) {
        struct campaign_tally tally;
        campaign_run(900000001, counts[kind], (enum state_kind)kind, 10, &tally);
        assert_int_equal(tally.refused, 0);
        assert_int_equal(tally.wrong, 0);
        assert_int_equal(tally.missed, 0);
        assert_int_equal(tally.searched, counts[kind] / 10);
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
