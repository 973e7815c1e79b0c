#define _POSIX_C_SOURCE 200809L
#include "support/timed_multi_fluid.h"

#include "equilibrium/mixture_vessel.h"
#include "support/check.h"
#include "support/measured_mixture.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { COUNT = 10, STATES = 300, PASSES = 21 };

/* A natural gas as delivered; mole fractions, before the spread below. */
static const char *const NAMES[COUNT] = {"methane",   "nitrogen", "carbon-dioxide", "ethane",   "propane",
                                         "isobutane", "n-butane", "n-pentane",      "n-hexane", "oxygen"};
static const double DELIVERED[COUNT] = {0.86, 0.03, 0.02, 0.055, 0.02, 0.004, 0.005, 0.002, 0.001, 0.003};

struct gas_state {
    double temperature, pressure, volume; /* K, Pa, m3/mol */
    double x[COUNT];
};

struct room {
    struct measured_mixture m;
    struct phase *phase;
    struct mixture_vessel *vessel;
    uint64_t seed;
};

static double now(void)
{
    struct timespec time;
    clock_gettime(CLOCK_MONOTONIC, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static int by_size(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Knuth's MMIX constants. */
static double draw(uint64_t *seed)
{
    *seed = *seed * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*seed >> 11) / 9007199254740992.0;
}

static void normalise(double x[COUNT])
{
    double sum = 0.0;
    for (size_t i = 0; i < COUNT; i++) {
        sum += x[i];
    }
    for (size_t i = 0; i < COUNT; i++) {
        x[i] /= sum;
    }
}

/* ---- the sets -------------------------------------------------------------------------------------------------- */

/* 270 to 450 K, 0.1 to 30 MPa even in ln p, each part of the gas between half and twice what is delivered. */
static bool draw_gas(struct room *room, struct gas_state *s)
{
    for (size_t i = 0; i < COUNT; i++) {
        s->x[i] = DELIVERED[i] * pow(2.0, 2.0 * draw(&room->seed) - 1.0);
    }
    normalise(s->x);
    s->temperature = 270.0 + 180.0 * draw(&room->seed);
    s->pressure = 1e5 * pow(300.0, draw(&room->seed));
    return true;
}

/* 200 to 400 K, 10 kPa to 20 MPa, compositions even over the simplex, where they form two phases. */
static bool draw_two_phases(struct room *room, struct gas_state *s)
{
    for (size_t i = 0; i < COUNT; i++) {
        s->x[i] = -log(1.0 - draw(&room->seed));
    }
    normalise(s->x);
    s->temperature = 200.0 + 200.0 * draw(&room->seed);
    s->pressure = 1e4 * pow(2e3, draw(&room->seed));
    if (fluid_set_t(room->m.at_t, room->m.fluid, s->temperature) != ANSWER_OK ||
        split_at_tp(room->m.at_t, s->pressure, s->x, room->m.ws, room->m.split) != ANSWER_OK ||
        room->m.split->phase_count != 2) {
        return false;
    }
    s->volume = 0.0;
    for (size_t k = 0; k < 2; k++) {
        s->volume += room->m.split->phase[k].fraction * room->m.split->phase[k].molar_volume;
    }
    return true;
}

/* ---- what is done with them, the temperature set anew each time -------------------------------------------------- */

static bool find_density(struct room *room, const struct gas_state *s)
{
    return fluid_set_t(room->m.at_t, room->m.fluid, s->temperature) == ANSWER_OK &&
           phase_tp(room->m.at_t, s->pressure, s->x, BRANCH_STABLE, 0, room->phase) == ANSWER_OK;
}

static bool find_fugacities(struct room *room, const struct gas_state *s)
{
    return fluid_set_t(room->m.at_t, room->m.fluid, s->temperature) == ANSWER_OK &&
           phase_tp(room->m.at_t, s->pressure, s->x, BRANCH_STABLE, PHASE_LN_PHI, room->phase) == ANSWER_OK;
}

static bool fill_vessel(struct room *room, const struct gas_state *s)
{
    return fluid_set_t(room->m.at_t, room->m.fluid, s->temperature) == ANSWER_OK &&
           mixture_vessel_at_tv(room->m.at_t, s->volume, s->x, NULL, room->m.ws, room->vessel) == ANSWER_OK &&
           fabs(room->vessel->split->pressure / s->pressure - 1.0) <= 1e-7;
}

/* ---- the table ------------------------------------------------------------------------------------------------- */

struct row {
    const char *operation, *method;
    double limit; /* microseconds, of the mean */
    bool (*draw)(struct room *room, struct gas_state *s);
    bool (*run)(struct room *room, const struct gas_state *s);
};

static const struct row ROWS[] = {
    {"T, p to density of a gas", "gerg-2008", 4.0, draw_gas, find_density},
    {"ln phi of a gas", "gerg-2008", 40.0, draw_gas, find_fugacities},
    {"two-phase vessel at T, V, with stability", "gerg-2008", 1000.0, draw_two_phases, fill_vessel},
    {"T, p to density of a gas", "multi-fluid", 40.0, draw_gas, find_density},
    {"ln phi of a gas", "multi-fluid", 40.0, draw_gas, find_fugacities},
};

/* Each state's median over the passes; the number of states that fail. */
static size_t time_states(const struct row *row, struct room *room, const struct gas_state states[], double seconds[])
{
    double samples[STATES][PASSES];
    size_t failed = 0;
    for (size_t k = 0; k < PASSES; k++) {
        failed = 0;
        for (size_t i = 0; i < STATES; i++) {
            const double start = now();
            failed += row->run(room, &states[i]) ? 0 : 1;
            samples[i][k] = now() - start;
        }
    }
    for (size_t i = 0; i < STATES; i++) {
        qsort(samples[i], PASSES, sizeof **samples, by_size);
        seconds[i] = samples[i][PASSES / 2];
    }
    return failed;
}

static bool time_row(const struct row *row)
{
    struct arena *arena = arena_create(NULL);
    struct room room = {.m = measured_mixture_create(row->method, NAMES, COUNT, arena), .seed = 20250917};
    room.phase = phase_create(COUNT, arena);
    room.vessel = mixture_vessel_create(COUNT, arena);
    struct gas_state *states = arena_alloc(arena, STATES, sizeof *states);
    double seconds[STATES], mean = 0.0;
    for (size_t i = 0; i < STATES; i++) {
        while (!row->draw(&room, &states[i])) {}
    }
    const size_t failed = time_states(row, &room, states, seconds);
    for (size_t i = 0; i < STATES; i++) {
        mean += seconds[i] / STATES;
    }
    qsort(seconds, STATES, sizeof *seconds, by_size);
    printf("%-42s %-12s %9.2f %9.2f %9.0f%s\n", row->operation, row->method, 1e6 * seconds[STATES / 2], 1e6 * mean,
           row->limit, failed > 0 ? "   states failed" : "");
    arena_free(arena);
    return failed == 0;
}

bool time_multi_fluid(void)
{
    bool good = true;
    printf("\nmulti-fluid methods, %d components, %d seeded states, each the median of %d passes\n\n", COUNT, STATES,
           PASSES);
    printf("%-42s %-12s %9s %9s %9s\n", "operation", "method", "median us", "mean us", "limit us");
    for (size_t i = 0; i < sizeof ROWS / sizeof *ROWS; i++) {
        good = time_row(&ROWS[i]) && good;
    }
    return good;
}
