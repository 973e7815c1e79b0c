/* Random draw-downs of mixtures of library gases: each ends, or is refused, with everything in balance on the way.
 *
 * TAREWRIGHT_DRAWS in the environment is the number of them, 200 unless given; TAREWRIGHT_SEED the first one's seed. */
#include "equilibrium/draw_down.h"

#include "support/check.h"
#include "support/library_gases.h"
#include "support/sample_fluids.h"

#include <gsl/gsl_rng.h>
#include <math.h>
#include <stdlib.h>

enum { MOST_COMPONENTS = 4, MOST_EVENTS = 32 };

static const char *const METHODS[] = {"peng-robinson", "soave-redlich-kwong", "ideal-gas", "van-der-waals"};

struct random_draw {
    const char *method;
    size_t count;
    const struct pure_spec *gas[MOST_COMPONENTS];
    double n[MOST_COMPONENTS], molar_masses[MOST_COMPONENTS];
    double temperature, least_pressure;
    struct draw_task task;
};

static double between(gsl_rng *rng, double low, double high)
{
    return low * pow(high / low, gsl_rng_uniform(rng));
}

static bool is_among(const struct random_draw *draw, const struct pure_spec *gas)
{
    for (size_t i = 0; i < draw->count; i++) {
        if (draw->gas[i] == gas) {
            return true;
        }
    }
    return false;
}

/* 50 L, from thin gas to dense liquid; traces among the fractions. */
static void make_draw(unsigned long seed, struct random_draw *draw)
{
    gsl_rng *rng = gsl_rng_alloc(gsl_rng_mt19937);
    gsl_rng_set(rng, seed);
    *draw = (struct random_draw){.method = METHODS[gsl_rng_uniform_int(rng, sizeof METHODS / sizeof *METHODS)]};
    const size_t count = 1 + gsl_rng_uniform_int(rng, MOST_COMPONENTS);
    double sum = 0.0;
    while (draw->count < count) {
        const struct pure_spec *gas = &LIBRARY_GAS[gsl_rng_uniform_int(rng, LIBRARY_GASES)];
        if (!is_among(draw, gas)) {
            draw->gas[draw->count] = gas;
            draw->molar_masses[draw->count] = between(rng, 0.002, 0.2);
            sum += draw->n[draw->count++] = between(rng, 1e-5, 1.0);
        }
    }
    const double amount = 0.05 / between(rng, 60e-6, 5e-3);
    for (size_t i = 0; i < count; i++) {
        draw->n[i] *= amount / sum;
    }
    draw->temperature = between(rng, 220.0, 340.0);
    draw->task = (struct draw_task){.drawn = gsl_rng_uniform(rng) < 0.5 ? DRAWN_VAPOUR : DRAWN_LIQUID,
                                    .volume = 0.05,
                                    .least_pressure = between(rng, 1e4, 1e6),
                                    .tolerance = 1e-9,
                                    .molar_masses = draw->molar_masses,
                                    .start = draw->n};
    gsl_rng_free(rng);
}

static double mass_of(const struct random_draw *draw, const double n[])
{
    double mass = 0.0;
    for (size_t i = 0; i < draw->count; i++) {
        mass += n[i] * draw->molar_masses[i];
    }
    return mass;
}

/* An amount may miss by what the steps allow: their tolerance, of all that was there. */
static double slack_of(const struct random_draw *draw)
{
    double amount = 0.0;
    for (size_t i = 0; i < draw->count; i++) {
        amount += draw->n[i];
    }
    return 10.0 * draw->task.tolerance * amount;
}

static bool is_balanced(const struct random_draw *draw, const struct draw_state *at)
{
    const double slack = slack_of(draw);
    double drawn = 0.0;
    for (size_t i = 0; i < draw->count; i++) {
        if (!(at->amounts[i] >= 0.0 && at->amounts[i] <= draw->n[i] + slack && at->drawn[i] >= 0.0)) {
            return false;
        }
        drawn += at->drawn[i];
    }
    const double mass = mass_of(draw, draw->n);
    return fabs(drawn - 1.0) <= 1e-9 && fabs(at->delivered + mass_of(draw, at->amounts) - mass) <= 1e-12 * mass &&
           fabs(at->filled - draw->task.volume) <= 1e-8 * draw->task.volume && at->pressure > 0.0 &&
           isfinite(at->pressure);
}

/* IMPOSSIBLE: the method has no such contents from the start, most often because they would overfill the vessel. */
enum outcome { ENDED, IMPOSSIBLE, REFUSED, WRONG };

static enum outcome follow(const struct random_draw *task, struct draw_down *draw)
{
    enum draw_event event = DRAW_NO_EVENT;
    if (draw_down_begin(draw) != ANSWER_OK) {
        return IMPOSSIBLE;
    }
    for (int i = 0; i < MOST_EVENTS; i++) {
        const double before = draw_down_state(draw)->delivered;
        const enum answer answer = draw_down_to(draw, mass_of(task, task->n), &event);
        const struct draw_state *at = draw_down_state(draw);
        if (!is_balanced(task, at) || !(at->delivered >= before)) {
            return WRONG;
        }
        if (answer != ANSWER_OK) {
            return REFUSED;
        }
        if (event == DRAW_LIQUID_IS_GONE || event == DRAW_LEAST_PRESSURE) {
            return ENDED;
        }
    }
    return REFUSED;
}

static enum outcome follow_seed(unsigned long seed)
{
    struct arena *arena = arena_create(NULL);
    struct random_draw task;
    make_draw(seed, &task);
    const struct fluid_spec spec = {.count = task.count, .pure = task.gas};
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create(task.method, &spec, arena, &lack);
    assert_non_null(fluid);
    struct draw_down *draw =
        draw_down_create(sample_at_t(fluid, task.temperature, arena), task.count, &task.task, arena);
    assert_non_null(draw);
    const enum outcome outcome = follow(&task, draw);
    if (outcome != ENDED && outcome != IMPOSSIBLE) {
        print_message("seed %lu: %s, %s of %zu components at %.1f K, %s, with %.4f of the mass delivered\n", seed,
                      outcome == WRONG ? "WRONG" : "refused", task.method, task.count, task.temperature,
                      task.task.drawn == DRAWN_LIQUID ? "liquid" : "vapour",
                      draw_down_state(draw)->delivered / mass_of(&task, task.n));
    }
    draw_down_free(draw);
    arena_free(arena);
    return outcome;
}

static unsigned long from_environment(const char *name, unsigned long otherwise)
{
    const char *text = getenv(name);
    return text == NULL ? otherwise : strtoul(text, NULL, 10);
}

static void every_random_draw_down_ends_or_is_refused(void **state)
{
    (void)state;
    const unsigned long count = from_environment("TAREWRIGHT_DRAWS", 200);
    const unsigned long first = from_environment("TAREWRIGHT_SEED", 1);
    unsigned long outcomes[] = {0, 0, 0, 0};
    for (unsigned long i = 0; i < count; i++) {
        outcomes[follow_seed(first + i)]++;
    }
    print_message("%lu ended, %lu impossible from the start, %lu refused on the way, %lu wrong\n", outcomes[ENDED],
                  outcomes[IMPOSSIBLE], outcomes[REFUSED], outcomes[WRONG]);
    assert_int_equal(outcomes[WRONG], 0);
    assert_true(outcomes[REFUSED] * 50 <= count);
    assert_true(outcomes[IMPOSSIBLE] * 10 <= count);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_random_draw_down_ends_or_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
