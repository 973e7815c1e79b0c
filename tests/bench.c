/* Speed of the core: median time of one operation over named, seeded sets of states, one thread. Machines drift, so
 * each figure also stands as a multiple of one call of exp measured in the same run. */
#define _POSIX_C_SOURCE 200809L

#include "equilibrium/boundary.h"
#include "equilibrium/closed_vessel.h"
#include "equilibrium/mixture_critical.h"
#include "equilibrium/mixture_vessel.h"
#include "equilibrium/saturation.h"
#include "support/reference_data.h"
#include "support/timed_draws.h"
#include "support/timed_multi_fluid.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { STATES = 1000, SAMPLES = 101 };

/* One set of states: temperature, and what goes with it. */
struct state {
    double temperature; /* K */
    double pressure;    /* Pa */
    double volume;      /* m3/mol */
};

struct bench {
    const char *set;       /* the name of the set of states */
    const char *operation; /* what is done once for each state */
    const char *method;
    const char *gas;
    /* Draws one state; `u` and `v` are from 0 to 1. */
    struct state (*draw)(double u, double v);
    /* Does it; false on failure. The sum keeps the compiler from leaving the work out. */
    bool (*run)(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum);
};

static const double ONE[] = {1.0};

/* A linear congruential generator (Knuth's MMIX constants), so that the sets are the same everywhere. */
static double draw_uniform(uint64_t *seed)
{
    *seed = *seed * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*seed >> 11) / 9007199254740992.0;
}

static double between(double low, double high, double part)
{
    return low + (high - low) * part;
}

/* ---- the sets -------------------------------------------------------------------------------------------------- */

/* Carbon dioxide at 320 K, 0.1 to 23 mol/L: gas, near-critical and liquid-like densities. */
static struct state draw_isotherm(double u, double v)
{
    return (struct state){.temperature = 320.0, .volume = 1.0 / between(100.0, 23000.0, u), .pressure = v};
}

/* Carbon dioxide, 220 to 500 K, 0.1 to 80 MPa, even in ln p: both sides of saturation, and above the critical point. */
static struct state draw_plane(double u, double v)
{
    return (struct state){.temperature = between(220.0, 500.0, u), .pressure = 1e5 * pow(800.0, v)};
}

/* Carbon dioxide from the triple point to T/Tc = 0.9999. */
static struct state draw_carbon_dioxide_line(double u, double v)
{
    return (struct state){.temperature = between(216.592, 0.9999 * 304.1282, u), .pressure = v};
}

/* Propane from T/Tc = 0.5 to 0.9999. */
static struct state draw_propane_line(double u, double v)
{
    return (struct state){.temperature = between(0.5 * 369.89, 0.9999 * 369.89, u), .pressure = v};
}

/* Carbon dioxide cylinders filled to 0.55 to 0.75 kg/L, in the yard: vapour above liquid. */
static struct state draw_yard(double u, double v)
{
    return (struct state){.temperature = between(233.15, 290.15, u), .volume = 0.0440098 / between(550.0, 750.0, v)};
}

/* The same cylinders warm: one phase. */
static struct state draw_warm(double u, double v)
{
    return (struct state){.temperature = between(308.15, 338.15, u), .volume = 0.0440098 / between(550.0, 750.0, v)};
}

/* ---- the operations -------------------------------------------------------------------------------------------- */

static bool run_exponential(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    (void)at_t;
    (void)fluid;
    *sum += exp(-1e4 * state->volume);
    return true;
}

/* The temperature was set once: all states share it. */
static bool run_pressure(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    struct phase phase;
    (void)fluid;
    const enum answer answer = phase_tv(at_t, state->volume, ONE, 0, &phase);
    *sum += phase.pressure;
    return answer == ANSWER_OK;
}

static bool run_density(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    struct phase phase;
    const bool set = fluid_set_t(at_t, fluid, state->temperature) == ANSWER_OK;
    const enum answer answer = phase_tp(at_t, state->pressure, ONE, BRANCH_STABLE, 0, &phase);
    *sum += phase.volume;
    return set && answer == ANSWER_OK;
}

static bool run_saturation(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    struct saturation saturation;
    const bool set = fluid_set_t(at_t, fluid, state->temperature) == ANSWER_OK;
    const enum answer answer = saturation_at_t(at_t, &saturation);
    *sum += saturation.pressure;
    return set && answer == ANSWER_OK;
}

static bool vessel(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state,
                   enum vessel_state expected, double *sum)
{
    struct vessel_contents contents;
    const bool set = fluid_set_t(at_t, fluid, state->temperature) == ANSWER_OK;
    const enum answer answer = closed_vessel_at_tv(at_t, state->volume, 1.0, &contents);
    *sum += contents.pressure;
    return set && answer == ANSWER_OK && contents.state == expected;
}

static bool run_two_phases(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    return vessel(at_t, fluid, state, VESSEL_TWO_PHASE, sum);
}

static bool run_one_phase(struct fluid_at_t *at_t, const struct fluid *fluid, const struct state *state, double *sum)
{
    return vessel(at_t, fluid, state, VESSEL_SUPERCRITICAL, sum);
}

/* ---- measuring ------------------------------------------------------------------------------------------------- */

static const struct bench BENCHES[] = {
    {"co2-320-K", "one call of exp", "reference", "carbon-dioxide", draw_isotherm, run_exponential},
    {"co2-320-K", "p(T, rho), reference, T given", "reference", "carbon-dioxide", draw_isotherm, run_pressure},
    {"co2-plane", "T, p to density, reference", "reference", "carbon-dioxide", draw_plane, run_density},
    {"co2-line", "saturation, reference", "reference", "carbon-dioxide", draw_carbon_dioxide_line, run_saturation},
    {"propane-line", "saturation, Peng-Robinson", "peng-robinson", "propane", draw_propane_line, run_saturation},
    {"propane-line", "saturation, reference", "reference", "propane", draw_propane_line, run_saturation},
    {"co2-yard", "closed vessel, vapour and liquid", "reference", "carbon-dioxide", draw_yard, run_two_phases},
    {"co2-warm", "closed vessel, one phase", "reference", "carbon-dioxide", draw_warm, run_one_phase},
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

/* Median seconds for one operation; the number of states that failed in *failed. */
static double median_time(const struct bench *bench, const struct fluid *fluid, struct fluid_at_t *at_t,
                          const struct state *states, size_t *failed)
{
    double samples[SAMPLES], sum = 0.0;
    fluid_set_t(at_t, fluid, states[0].temperature);
    for (size_t k = 0; k < SAMPLES; k++) {
        *failed = 0;
        const double start = now();
        for (size_t i = 0; i < STATES; i++) {
            *failed += bench->run(at_t, fluid, &states[i], &sum) ? 0 : 1;
        }
        samples[k] = (now() - start) / STATES;
    }
    qsort(samples, SAMPLES, sizeof *samples, by_size);
    *failed += isfinite(sum) ? 0 : 1;
    return samples[SAMPLES / 2];
}

static const struct fluid *open_fluid(const struct bench *bench, struct arena *arena)
{
    const struct reference_gas *gas = reference_gas(bench->gas);
    struct pure_spec *pure = arena_alloc(arena, 1, sizeof *pure);
    const struct pure_spec **list = arena_alloc(arena, 1, sizeof *list);
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    struct fluid_lack_report lack;
    const struct reference_spec *equation = gas->equation;
    /* Propane's acentric factor, Lemmon, McLinden and Wagner 2009; carbon dioxide is run by `reference` alone. */
    *pure = (struct pure_spec){
        .name = gas->name,
        .molar_mass = gas->molar_mass,
        .critical_temperature = {true, equation->critical_temperature},
        .critical_pressure = {true, equation->critical_pressure},
        .acentric = {true, 0.1521},
        .reference = equation,
    };
    list[0] = pure;
    *spec = (struct fluid_spec){.count = 1, .pure = list};
    return fluid_create(bench->method, spec, arena, &lack);
}

static void print_row(const char *operation, const char *set, double seconds, double unit, size_t failed)
{
    printf("%-38s %-14s %10.4f %14.0f %10.1f", operation, set, 1e6 * seconds, 1.0 / seconds, seconds / unit);
    if (failed > 0) {
        printf("   %zu states failed", failed);
    }
    printf("\n");
}

/* Prints one row; false when a state failed. `*unit` is the time of one exp, set by the first row. */
static bool measure(const struct bench *bench, double *unit)
{
    struct arena *arena = arena_create(NULL);
    const struct fluid *fluid = arena == NULL ? NULL : open_fluid(bench, arena);
    if (fluid == NULL) {
        arena_free(arena);
        return false;
    }
    struct state *states = arena_alloc(arena, STATES, sizeof *states);
    uint64_t seed = 20250917;
    for (size_t i = 0; i < STATES; i++) {
        const double u = draw_uniform(&seed), v = draw_uniform(&seed);
        states[i] = bench->draw(u, v);
    }
    size_t failed = 0;
    const double seconds = median_time(bench, fluid, fluid_at_t_create(fluid, arena), states, &failed);
    *unit = *unit > 0.0 ? *unit : seconds;
    print_row(bench->operation, bench->set, seconds, *unit, failed);
    arena_free(arena);
    return failed == 0;
}

/* ---- mixtures -------------------------------------------------------------------------------------------------- */

enum { MOST_COMPONENTS = 10 };

/* Critical constants of the papers of the reference equations; acentric factors follow from those equations. */
#define GAS(word, mass, Tc, pc, omega)                                                                                 \
    {                                                                                                                  \
        .name = (word), .molar_mass = (mass), .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
        .acentric = {                                                                                                  \
            true,                                                                                                      \
            (omega)                                                                                                    \
        }                                                                                                              \
    }

static const struct pure_spec GASES[MOST_COMPONENTS] = {
    GAS("nitrogen", 0.0280135, 126.192, 3.3958e6, 0.0372), GAS("propane", 0.0440956, 369.89, 4.2512e6, 0.1521),
    GAS("methane", 0.0160428, 190.564, 4.5992e6, 0.0114),  GAS("carbon-dioxide", 0.0440098, 304.128, 7.3773e6, 0.2249),
    GAS("n-butane", 0.0581222, 425.125, 3.796e6, 0.2008),  GAS("ethane", 0.0300690, 305.322, 4.8722e6, 0.0995),
    GAS("isobutane", 0.0581222, 407.81, 3.629e6, 0.1835),  GAS("oxygen", 0.0319988, 154.581, 5.0430e6, 0.0222),
    GAS("argon", 0.0399480, 150.687, 4.8630e6, -0.0022),   GAS("n-pentane", 0.0721488, 469.7, 3.3675e6, 0.2509),
};

struct mixture_state {
    double temperature, pressure; /* K, Pa */
    double x[MOST_COMPONENTS];
};

/* 200 to 400 K, 1 kPa to 60 MPa even in ln p, compositions even over the simplex: one and two phases alike. */
static void draw_mixtures(size_t count, struct mixture_state states[STATES])
{
    uint64_t seed = 20250917;
    for (size_t i = 0; i < STATES; i++) {
        double sum = 0.0;
        states[i].temperature = between(200.0, 400.0, draw_uniform(&seed));
        states[i].pressure = 1e3 * pow(6e4, draw_uniform(&seed));
        for (size_t k = 0; k < count; k++) {
            sum += states[i].x[k] = -log(1.0 - draw_uniform(&seed));
        }
        for (size_t k = 0; k < count; k++) {
            states[i].x[k] /= sum;
        }
    }
}

/* Median seconds for ln phi of all components at T, p, the temperature set anew each time. */
static double time_fugacities(const struct fluid *fluid, const struct mixture_state states[STATES], struct arena *arena,
                              size_t *failed)
{
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    struct phase *phase = phase_create(fluid->count, arena);
    double samples[SAMPLES], sum = 0.0;
    for (size_t k = 0; k < SAMPLES; k++) {
        *failed = 0;
        const double start = now();
        for (size_t i = 0; i < STATES; i++) {
            fluid_set_t(at_t, fluid, states[i].temperature);
            const enum answer answer =
                phase_tp(at_t, states[i].pressure, states[i].x, BRANCH_STABLE, PHASE_LN_PHI, phase);
            *failed += answer == ANSWER_OK ? 0 : 1;
            sum += phase->ln_phi[0];
        }
        samples[k] = (now() - start) / STATES;
    }
    qsort(samples, SAMPLES, sizeof *samples, by_size);
    *failed += isfinite(sum) ? 0 : 1;
    return samples[SAMPLES / 2];
}

static bool measure_fugacities(size_t count, double unit)
{
    struct arena *arena = arena_create(NULL);
    const struct pure_spec *pure[MOST_COMPONENTS];
    double kij[MOST_COMPONENTS * MOST_COMPONENTS];
    for (size_t i = 0; i < count; i++) {
        pure[i] = &GASES[i];
        for (size_t j = 0; j < count; j++) {
            kij[i * count + j] = i == j ? 0.0 : 0.01 * (double)(i + j);
        }
    }
    const struct fluid_spec spec = {.count = count, .pure = pure, .kij = kij};
    struct fluid_lack_report lack;
    struct mixture_state *states = arena_alloc(arena, STATES, sizeof *states);
    draw_mixtures(count, states);
    char operation[64];
    size_t failed = 0;
    const struct fluid *fluid = fluid_create("peng-robinson", &spec, arena, &lack);
    snprintf(operation, sizeof operation, "ln phi, %zu components, Peng-Robinson", count);
    print_row(operation, "mixture-plane", time_fugacities(fluid, states, arena, &failed), unit, failed);
    arena_free(arena);
    return failed == 0;
}

/* ---- equilibria of mixtures ------------------------------------------------------------------------------------ */

enum { EQUILIBRIUM_STATES = 450, PASSES = 15 };

struct equilibrium_state {
    const struct fluid *fluid;
    double temperature, pressure, volume; /* K, Pa, m3/mol */
    double z[MOST_COMPONENTS];
};

/* Fluids of 2 to 10 of the gases from any of them on, and memory for each number. */
struct mixture_room {
    const struct fluid *fluid[MOST_COMPONENTS][MOST_COMPONENTS + 1]; /* by first gas and count */
    struct fluid_at_t *at_t[MOST_COMPONENTS + 1];
    struct equilibrium_workspace *ws[MOST_COMPONENTS + 1];
    struct split *split[MOST_COMPONENTS + 1];
    struct mixture_vessel *vessel[MOST_COMPONENTS + 1];
    struct envelope *envelope[MOST_COMPONENTS + 1];
    struct phase *phase[MOST_COMPONENTS + 1];
    struct boundary_point *point;
};

/* Of the size fitted to measurements: one for each pairing of air gases, carbon dioxide and hydrocarbons. */
static double usual_kij(size_t a, size_t b)
{
    static const int KIND[MOST_COMPONENTS] = {0, 2, 2, 1, 2, 2, 2, 0, 0, 2};
    static const double KIJ[3][3] = {{0.0, 0.0, 0.08}, {0.0, 0.0, 0.12}, {0.08, 0.12, 0.0}};
    return KIJ[KIND[a]][KIND[b]];
}

static const struct fluid *open_mixture(size_t first, size_t count, struct arena *arena)
{
    const struct pure_spec **pure = arena_alloc(arena, count, sizeof *pure);
    double *kij = arena_alloc(arena, count * count, sizeof *kij);
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    struct fluid_lack_report lack;
    for (size_t i = 0; i < count; i++) {
        const size_t gas = (first + i) % MOST_COMPONENTS;
        pure[i] = &GASES[gas];
        for (size_t j = 0; j < count; j++) {
            kij[i * count + j] = usual_kij(gas, (first + j) % MOST_COMPONENTS);
        }
    }
    *spec = (struct fluid_spec){.count = count, .pure = pure, .kij = kij};
    return fluid_create("peng-robinson", spec, arena, &lack);
}

static struct mixture_room *open_room(struct arena *arena)
{
    struct mixture_room *room = arena_alloc(arena, 1, sizeof *room);
    for (size_t count = 2; count <= MOST_COMPONENTS; count++) {
        for (size_t first = 0; first < MOST_COMPONENTS; first++) {
            room->fluid[first][count] = open_mixture(first, count, arena);
        }
        room->at_t[count] = fluid_at_t_create(room->fluid[0][count], arena);
        room->ws[count] = equilibrium_workspace_create(count, arena);
        room->split[count] = split_create(count, arena);
        room->vessel[count] = mixture_vessel_create(count, arena);
        room->envelope[count] = envelope_create(count, arena);
        room->phase[count] = phase_create(count, arena);
    }
    room->point = boundary_point_create(MOST_COMPONENTS, arena);
    return room;
}

static bool set_temperature(const struct mixture_room *room, const struct equilibrium_state *s)
{
    return fluid_set_t(room->at_t[s->fluid->count], s->fluid, s->temperature) == ANSWER_OK;
}

static const struct split *flash(const struct mixture_room *room, const struct equilibrium_state *s, double pressure)
{
    const size_t count = s->fluid->count;
    struct split *split = room->split[count];
    const enum answer answer = split_at_tp(room->at_t[count], pressure, s->z, room->ws[count], split);
    return answer == ANSWER_OK ? split : NULL;
}

/* ---- their sets: each draws again until it is what its name says ----------------------------------------------- */

/* 200 to 400 K, 1 kPa to 60 MPa even in ln p, 2 to 10 gases in turn, compositions even over the simplex. */
static bool draw_grid(const struct mixture_room *room, size_t index, uint64_t *seed, struct equilibrium_state *s)
{
    const size_t count = 2 + index % (MOST_COMPONENTS - 1);
    double sum = 0.0;
    s->fluid = room->fluid[(size_t)(MOST_COMPONENTS * draw_uniform(seed))][count];
    s->temperature = between(200.0, 400.0, draw_uniform(seed));
    s->pressure = 1e3 * pow(6e4, draw_uniform(seed));
    for (size_t k = 0; k < count; k++) {
        sum += s->z[k] = -log(1.0 - draw_uniform(seed));
    }
    for (size_t k = 0; k < count; k++) {
        s->z[k] /= sum;
    }
    return set_temperature(room, s);
}

/* From 1e-2 to 1e-6 of one above or below it, even in the logarithm. */
static double nearly_one(uint64_t *seed)
{
    const double distance = pow(10.0, -2.0 - 4.0 * draw_uniform(seed));
    return draw_uniform(seed) < 0.5 ? 1.0 - distance : 1.0 + distance;
}

/* Beside the pressure, between that of the grid and twice, four times ... that, at which phases come or go. */
static bool draw_near_saturation(const struct mixture_room *room, size_t index, uint64_t *seed,
                                 struct equilibrium_state *s)
{
    const struct split *split = draw_grid(room, index, seed, s) ? flash(room, s, s->pressure) : NULL;
    const size_t here = split ? split->phase_count : 0;
    double low = s->pressure, high = s->pressure;
    do {
        low = high;
        high *= 2.0;
        split = flash(room, s, high);
    } while (split && split->phase_count == here && high < 6e7);
    if (!split || split->phase_count == here) {
        return false;
    }
    for (int k = 0; k < 40; k++) {
        const double middle = sqrt(low * high);
        split = flash(room, s, middle);
        *(split && split->phase_count == here ? &low : &high) = middle;
    }
    s->pressure = low * nearly_one(seed);
    return true;
}

/* Temperature and pressure within 1 % of those of a critical point, evenly. */
static bool draw_near_critical(const struct mixture_room *room, size_t index, uint64_t *seed,
                               struct equilibrium_state *s)
{
    const bool is_drawn = draw_grid(room, index, seed, s);
    const size_t count = s->fluid->count;
    struct envelope *envelope = room->envelope[count];
    struct mixture_critical critical;
    if (!is_drawn || envelope_trace(room->at_t[count], s->fluid, s->z, room->ws[count], envelope) != ANSWER_OK ||
        envelope->critical_count == 0 ||
        mixture_critical_near(room->at_t[count], s->fluid, s->z, &envelope->critical[0], room->ws[count], &critical) !=
            ANSWER_OK) {
        return false;
    }
    s->temperature = critical.temperature * between(0.99, 1.01, draw_uniform(seed));
    s->pressure = critical.pressure * between(0.99, 1.01, draw_uniform(seed));
    return critical.pressure > 0.0;
}

/* States of the grid that have a dew point at their temperature. */
static bool draw_with_dew(const struct mixture_room *room, size_t index, uint64_t *seed, struct equilibrium_state *s)
{
    const bool is_drawn = draw_grid(room, index, seed, s);
    const size_t count = s->fluid->count;
    return is_drawn && boundary_dew_pressure(room->at_t[count], s->z, room->ws[count], room->point) == ANSWER_OK;
}

/* States of the grid that are two phases, with the volume these fill. */
static bool draw_two_phases(const struct mixture_room *room, size_t index, uint64_t *seed, struct equilibrium_state *s)
{
    const struct split *split = draw_grid(room, index, seed, s) ? flash(room, s, s->pressure) : NULL;
    if (!split || split->phase_count != 2) {
        return false;
    }
    s->volume = 0.0;
    for (size_t k = 0; k < 2; k++) {
        s->volume += split->phase[k].fraction * split->phase[k].molar_volume;
    }
    return true;
}

/* ---- what is done with them, the temperature set anew each time ------------------------------------------------ */

static bool do_fugacities(const struct mixture_room *room, const struct equilibrium_state *s)
{
    const size_t count = s->fluid->count;
    return set_temperature(room, s) &&
           phase_tp(room->at_t[count], s->pressure, s->z, BRANCH_STABLE, PHASE_LN_PHI, room->phase[count]) == ANSWER_OK;
}

static bool do_flash(const struct mixture_room *room, const struct equilibrium_state *s)
{
    const struct split *split = set_temperature(room, s) ? flash(room, s, s->pressure) : NULL;
    return split && split->smallest_tpd >= -SPLIT_LEAST_TPD;
}

static bool do_dew_pressure(const struct mixture_room *room, const struct equilibrium_state *s)
{
    const size_t count = s->fluid->count;
    return set_temperature(room, s) &&
           boundary_dew_pressure(room->at_t[count], s->z, room->ws[count], room->point) == ANSWER_OK &&
           room->point->is_stable;
}

/* Without a start from a state nearby; the pressure of the flash that gave the volume must come back. */
static bool do_vessel(const struct mixture_room *room, const struct equilibrium_state *s)
{
    const size_t count = s->fluid->count;
    struct mixture_vessel *vessel = room->vessel[count];
    return set_temperature(room, s) &&
           mixture_vessel_at_tv(room->at_t[count], s->volume, s->z, NULL, room->ws[count], vessel) == ANSWER_OK &&
           vessel->split->phase_count == 2 && fabs(vessel->split->pressure / s->pressure - 1.0) <= 1e-7;
}

struct equilibrium_bench {
    const char *operation, *set;
    bool (*draw)(const struct mixture_room *room, size_t index, uint64_t *seed, struct equilibrium_state *s);
    bool (*run)(const struct mixture_room *room, const struct equilibrium_state *s);
};

static const struct equilibrium_bench EQUILIBRIUM_BENCHES[] = {
    {"flash at T, p with stability", "grid", draw_grid, do_flash},
    {"flash at T, p with stability", "near-saturation", draw_near_saturation, do_flash},
    {"flash at T, p with stability", "near-critical", draw_near_critical, do_flash},
    {"dew pressure at T with stability", "grid-with-dew", draw_with_dew, do_dew_pressure},
    {"two-phase vessel at T, V, with stability", "grid-two-phase", draw_two_phases, do_vessel},
};

/* Seconds for each state: the median over passes, each of which goes through all states. */
static void time_states(const struct equilibrium_bench *bench, const struct mixture_room *room,
                        const struct equilibrium_state states[], double seconds[], size_t *failed)
{
    double samples[EQUILIBRIUM_STATES][PASSES];
    for (size_t k = 0; k < PASSES; k++) {
        *failed = 0;
        for (size_t i = 0; i < EQUILIBRIUM_STATES; i++) {
            const double start = now();
            *failed += bench->run(room, &states[i]) ? 0 : 1;
            samples[i][k] = now() - start;
        }
    }
    for (size_t i = 0; i < EQUILIBRIUM_STATES; i++) {
        qsort(samples[i], PASSES, sizeof **samples, by_size);
        seconds[i] = samples[i][PASSES / 2];
    }
}

struct summary {
    double mean, median;
};

static struct summary summary_of(double seconds[])
{
    struct summary summary = {.mean = 0.0};
    for (size_t i = 0; i < EQUILIBRIUM_STATES; i++) {
        summary.mean += seconds[i] / EQUILIBRIUM_STATES;
    }
    qsort(seconds, EQUILIBRIUM_STATES, sizeof *seconds, by_size);
    summary.median = seconds[EQUILIBRIUM_STATES / 2];
    return summary;
}

/* Prints one row; false when a state failed. The unit is ln phi of the same mixtures at the same states. */
static bool measure_equilibria(const struct equilibrium_bench *bench, const struct mixture_room *room,
                               struct equilibrium_state states[])
{
    static const struct equilibrium_bench UNIT = {.run = do_fugacities};
    double seconds[EQUILIBRIUM_STATES];
    uint64_t seed = 20250917;
    size_t failed = 0, unit_failed = 0;
    for (size_t i = 0; i < EQUILIBRIUM_STATES; i++) {
        while (!bench->draw(room, i, &seed, &states[i])) {}
    }
    time_states(&UNIT, room, states, seconds, &unit_failed);
    const struct summary unit = summary_of(seconds);
    time_states(bench, room, states, seconds, &failed);
    const struct summary time = summary_of(seconds);
    printf("%-42s %-16s %9.2f %9.2f %13.0f %10.1f", bench->operation, bench->set, 1e6 * time.median, 1e6 * time.mean,
           1.0 / time.median, time.mean / unit.mean);
    if (failed + unit_failed > 0) {
        printf("   %zu states failed", failed + unit_failed);
    }
    printf("\n");
    return failed + unit_failed == 0;
}

static bool measure_all_equilibria(void)
{
    struct arena *arena = arena_create(NULL);
    const struct mixture_room *room = open_room(arena);
    struct equilibrium_state *states = arena_alloc(arena, EQUILIBRIUM_STATES, sizeof *states);
    bool good = true;
    printf("\nmixtures of 2 to 10 components, Peng-Robinson: over %d seeded states, each the median of %d passes\n\n",
           EQUILIBRIUM_STATES, PASSES);
    printf("%-42s %-16s %9s %9s %13s %10s\n", "operation", "state set", "median us", "mean us", "operations/s",
           "ln phi's");
    for (size_t i = 0; i < sizeof EQUILIBRIUM_BENCHES / sizeof *EQUILIBRIUM_BENCHES; i++) {
        good = measure_equilibria(&EQUILIBRIUM_BENCHES[i], room, states) && good;
    }
    arena_free(arena);
    return good;
}

/* Whole runs of random draws: seconds for each, not medians. */
static bool measure_draws(void)
{
    const double blend = time_blend_draws(1000000), settled = time_settled_draws(10000);
    printf("\n1 000 000 draws of a weighed blend's composition, one thread: %.3f s\n", blend);
    printf("10 000 draws of its settled pressure with phase check, all threads, at 50 and at -25 degC: %.3f s\n",
           settled);
    return settled >= 0.0;
}

int main(void)
{
    double unit = 0.0;
    bool good = true;
    printf("medians of %d passes over %d seeded states, one thread\n\n", SAMPLES, STATES);
    printf("%-38s %-14s %10s %14s %10s\n", "operation", "state set", "us", "operations/s", "exp calls");
    for (size_t i = 0; i < sizeof BENCHES / sizeof *BENCHES; i++) {
        good = measure(&BENCHES[i], &unit) && good;
    }
    good = measure_fugacities(2, unit) && good;
    good = measure_fugacities(5, unit) && good;
    good = measure_fugacities(10, unit) && good;
    good = measure_all_equilibria() && good;
    good = time_multi_fluid() && good;
    good = measure_draws() && good;
    return good ? EXIT_SUCCESS : EXIT_FAILURE;
}
