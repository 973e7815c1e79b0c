/* Speed of the core: median time of one operation over named, seeded sets of states, one thread. Machines drift, so
 * each figure also stands as a multiple of one call of exp measured in the same run. */
#define _POSIX_C_SOURCE 200809L

#include "equilibrium/closed_vessel.h"
#include "equilibrium/saturation.h"
#include "support/reference_data.h"

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
    return good ? EXIT_SUCCESS : EXIT_FAILURE;
}
