/* The tangent-plane test: on both sides of phase boundaries, and its stationary points by their definition. */
#include "equilibrium/linear.h"
#include "equilibrium/stability.h"
#include "support/check.h"
#include "support/mixture_states.h"
#include "support/sample_mixture.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Dew and bubble points solved in 34 digits by an independent evaluation of Peng-Robinson 1976 (see test_boundary). */
struct boundary_case {
    const char *name;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double z[SAMPLE_MOST];
    double temperature, pressure;
    double side; /* +1: two phases above this pressure, -1: below */
};

static const struct boundary_case BOUNDARIES[] = {
    {"2 % n-butane in nitrogen, lower dew point",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     2903366.9516650985,
     1.0},
    {"2 % n-butane in nitrogen, upper dew point",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     14099129.930567956,
     -1.0},
    {"methane and propane, dew", 2, {METHANE, PROPANE}, {0.37, 0.63}, 277.6, 907209.2202260977, 1.0},
    {"methane and propane, bubble", 2, {METHANE, PROPANE}, {0.37, 0.63}, 277.6, 6067147.5041687842, -1.0},
    {"five components, dew",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     251.3,
     327072.34338708006,
     1.0},
    {"five components, bubble",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     251.3,
     10812095.907341331,
     -1.0},
    {"carbon dioxide and propane, bubble", 2, {CARBON_DIOXIDE, PROPANE}, {0.4, 0.6}, 290.0, 2985855.9814384881, -1.0},
};

static void the_verdict_turns_at_the_boundary(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const double distances[] = {1e-2, 1e-4, 1e-6, 1e-8};
    for (size_t k = 0; k < COUNT(BOUNDARIES); k++) {
        const struct boundary_case *b = &BOUNDARIES[k];
        struct sample_mixture m = sample_mixture_create(b->count, b->substance, b->temperature, arena);
        for (size_t d = 0; d < COUNT(distances); d++) {
            for (int effort = STABILITY_DECIDE; effort <= STABILITY_EXHAUSTIVE; effort++) {
                struct stability inside, outside;
                const double in = b->pressure * (1.0 + b->side * distances[d]);
                const double out = b->pressure * (1.0 - b->side * distances[d]);
                assert_int_equal(stability_at_tp(m.at_t, in, b->z, (enum stability_effort)effort, m.ws, &inside),
                                 ANSWER_OK);
                assert_false(inside.is_stable);
                assert_true(inside.has_incipient && inside.smallest_tpd < 0.0);
                assert_int_equal(stability_at_tp(m.at_t, out, b->z, (enum stability_effort)effort, m.ws, &outside),
                                 ANSWER_OK);
                assert_true(outside.is_stable && outside.smallest_tpd >= -STABILITY_ROUNDING);
            }
        }
    }
    arena_free(arena);
}

/* At a stationary point ln w_i + ln phi_i(w) - d_i is the same for all components, and that is tpd. */
static void an_incipient_phase_is_a_stationary_point(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(BOUNDARIES); k++) {
        const struct boundary_case *b = &BOUNDARIES[k];
        struct sample_mixture m = sample_mixture_create(b->count, b->substance, b->temperature, arena);
        struct stability found;
        struct phase *phase = phase_create(b->count, arena);
        const double p = b->pressure * (1.0 + 0.03 * b->side);
        assert_int_equal(stability_at_tp(m.at_t, p, b->z, STABILITY_REPORT, m.ws, &found), ANSWER_OK);
        assert_false(found.is_stable);
        assert_int_equal(phase_tp(m.at_t, p, found.incipient, BRANCH_STABLE, PHASE_LN_PHI, phase), ANSWER_OK);
        for (size_t i = 0; i < b->count; i++) {
            const double distance = log(found.incipient[i]) + phase->ln_phi[i] - m.ws->d[i];
            assert_near(distance - found.smallest_tpd, 0.0, 1e-9, b->name);
        }
    }
    arena_free(arena);
}

/* What the usual trials call stable, the exhaustive ones do too. */
static void the_usual_trials_miss_nothing(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    for (uint64_t seed = 5000; seed < 7000; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, STATE_GENERAL, room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        struct stability usual, exhaustive;
        assert_int_equal(stability_at_tp(place.at_t, drawn.pressure, drawn.z, STABILITY_DECIDE, place.ws, &usual),
                         ANSWER_OK);
        assert_int_equal(
            stability_at_tp(place.at_t, drawn.pressure, drawn.z, STABILITY_EXHAUSTIVE, place.ws, &exhaustive),
            ANSWER_OK);
        assert_int_equal(usual.is_stable, exhaustive.is_stable);
    }
    state_room_close(room);
    arena_free(arena);
}

static void assert_usual_trials_agree(const struct fluid_at_t *at_t, double pressure, const double z[],
                                      struct equilibrium_workspace *ws)
{
    struct stability usual, exhaustive;
    assert_int_equal(stability_at_tp(at_t, pressure, z, STABILITY_EXHAUSTIVE, ws, &exhaustive), ANSWER_OK);
    assert_int_equal(stability_at_tp(at_t, pressure, z, STABILITY_REPORT, ws, &usual), ANSWER_OK);
    assert_int_equal(usual.is_stable, exhaustive.is_stable);
    assert_int_equal(stability_at_tp(at_t, pressure, z, STABILITY_DECIDE, ws, &usual), ANSWER_OK);
    assert_int_equal(usual.is_stable, exhaustive.is_stable);
}

/* A liquid rich in oxygen, close to where oxygen alone has no liquid any more, beside one of nitrous oxide and oxygen:
 * between 3.65 and 4.9 MPa only trials of a liquid with some of both find it. */
static void a_liquid_that_its_main_component_does_not_form_is_found(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const struct sample_binary nitrous_oxide_oxygen = {
        {309.52, 154.58}, {7245000.0, 5043000.0}, {0.1613, 0.0222}, 0.05};
    struct fluid_at_t *at_t = sample_binary_at_t(&nitrous_oxide_oxygen, 150.0, arena);
    struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
    size_t unstable = 0;
    for (double z = 0.1; z < 0.95; z += 0.1) {
        const double feed[] = {z, 1.0 - z};
        for (double pressure = 3.4e6; pressure < 5.2e6; pressure += 2e4) {
            assert_usual_trials_agree(at_t, pressure, feed, ws);
            struct stability found;
            (void)stability_at_tp(at_t, pressure, feed, STABILITY_DECIDE, ws, &found);
            unstable += !found.is_stable;
        }
    }
    assert_in_range(unstable, 100, 800);
    arena_free(arena);
}

/* Beside a spinodal close to a critical point: coming from one side a trial comes to rest right next to the feed, from
 * the other it looks as if it ran into the feed while a phase lies on the way. */
static void a_phase_in_a_flat_valley_is_found(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const struct sample_binary valley = {{227.51, 416.3}, {3750000.0, 6671690.0}, {0.1785, 0.1501}, 0.0};
    struct fluid_at_t *at_t = sample_binary_at_t(&valley, 277.2690953, arena);
    struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
    static const double feed[] = {0.305936606, 0.1};
    for (double pressure = 7.30e6; pressure < 7.32e6; pressure += 41.7) {
        assert_usual_trials_agree(at_t, pressure, feed, ws);
    }
    arena_free(arena);
}

/* A symmetric matrix made of known eigenvalues and of the reflection I - 2 u u' / u'u. */
static void linear_solvers_invert_a_known_matrix(void **state)
{
    (void)state;
    enum { SIZE = 4 };
    static const double u[SIZE] = {0.3, -0.7, 1.1, 0.2}, lambda[SIZE] = {0.013, 0.9, 2.7, 41.0};
    double reflection[SIZE][SIZE], matrix[SIZE * SIZE], copy[SIZE * SIZE], b[SIZE] = {0.0}, c[SIZE];
    double square = 0.0;
    for (size_t i = 0; i < SIZE; i++) {
        square += u[i] * u[i];
    }
    for (size_t i = 0; i < SIZE; i++) {
        for (size_t j = 0; j < SIZE; j++) {
            reflection[i][j] = (i == j ? 1.0 : 0.0) - 2.0 * u[i] * u[j] / square;
        }
    }
    for (size_t i = 0; i < SIZE; i++) {
        for (size_t j = 0; j < SIZE; j++) {
            matrix[i * SIZE + j] = 0.0;
            for (size_t k = 0; k < SIZE; k++) {
                matrix[i * SIZE + j] += reflection[i][k] * lambda[k] * reflection[k][j];
            }
            copy[i * SIZE + j] = matrix[i * SIZE + j];
            b[i] += matrix[i * SIZE + j] * u[j];
        }
        c[i] = b[i];
    }
    double values[SIZE], vectors[SIZE * SIZE], eigen[SIZE * SIZE];
    for (size_t i = 0; i < SIZE * SIZE; i++) {
        eigen[i] = matrix[i];
    }
    assert_true(linear_factor(matrix, SIZE) && linear_solve(copy, SIZE, c));
    linear_solve_factored(matrix, SIZE, b);
    linear_eigen(eigen, SIZE, values, vectors);
    for (size_t i = 0; i < SIZE; i++) {
        assert_close(b[i], u[i], 1e-12, "the vector the right-hand side was made from");
        assert_close(c[i], u[i], 1e-12, "the vector the right-hand side was made from");
        double nearest = HUGE_VAL;
        for (size_t k = 0; k < SIZE; k++) {
            nearest = fmin(nearest, fabs(values[k] / lambda[i] - 1.0));
        }
        assert_near(nearest, 0.0, 1e-12, "the eigenvalues the matrix was made from");
    }
    double indefinite[] = {1.0, 2.0, 2.0, 1.0}, singular[] = {1.0, 2.0, 2.0, 4.0}, r[] = {1.0, 1.0};
    assert_false(linear_factor(indefinite, 2));
    assert_false(linear_solve(singular, 2, r));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_verdict_turns_at_the_boundary),
        cmocka_unit_test(an_incipient_phase_is_a_stationary_point),
        cmocka_unit_test(the_usual_trials_miss_nothing),
        cmocka_unit_test(a_liquid_that_its_main_component_does_not_form_is_found),
        cmocka_unit_test(a_phase_in_a_flat_valley_is_found),
        cmocka_unit_test(linear_solvers_invert_a_known_matrix),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
