/* Solids in the closed vessel: equal fugacities and the balance of amounts, and by returning to the state it was made
 * from. */
#include "equilibrium/saturation.h"
#include "equilibrium/solid_vessel.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Span and Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509, eq. 3.12; the volume is that of 1512 kg/m3. */
static const double DRY_ICE_TERMS[][2] = {{-14.740846, 1.0}, {2.4327015, 1.9}, {-5.3061778, 2.9}};
/* Their eq. 3.10. */
static const double MELTING_TERMS[][2] = {{1955.539, 1.0}, {2055.4593, 2.0}};
static const struct melting_part DRY_ICE_MELTING = {.form = MELTING_GAP_POWERS,
                                                    .reducing_temperature = 216.592,
                                                    .reducing_pressure = 517950.0,
                                                    .count = COUNT(MELTING_TERMS),
                                                    .terms = MELTING_TERMS,
                                                    .smallest_temperature = 216.592,
                                                    .largest_temperature = 330.0};
static const struct solid_spec DRY_ICE = {.form = GAP_SERIES,
                                          .reducing_temperature = 216.592,
                                          .reducing_pressure = 517950.0,
                                          .count = COUNT(DRY_ICE_TERMS),
                                          .terms = DRY_ICE_TERMS,
                                          .smallest_temperature = 150.0,
                                          .largest_temperature = 216.592,
                                          .molar_volume = 29.1e-6,
                                          .melting_count = 1,
                                          .melting = &DRY_ICE_MELTING,
                                          .melting_from_triple = &DRY_ICE_MELTING};

struct bench {
    struct arena *arena;
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    struct equilibrium_workspace *ws;
    struct solid_vessel *out;
};

static struct bench bench_create(const char *method, const enum sample_substance substance[], size_t count, double T)
{
    struct bench b = {.arena = arena_create(NULL)};
    const struct pure_spec **pure = arena_alloc(b.arena, count, sizeof *pure);
    struct fluid_spec *spec = arena_alloc(b.arena, 1, sizeof *spec);
    for (size_t i = 0; i < count; i++) {
        pure[i] = &SAMPLE_SUBSTANCE[substance[i]];
    }
    *spec = (struct fluid_spec){.count = count, .pure = pure};
    struct fluid_lack_report lack;
    b.fluid = fluid_create(method, spec, b.arena, &lack);
    assert_non_null(b.fluid);
    b.at_t = sample_at_t(b.fluid, T, b.arena);
    b.ws = equilibrium_workspace_create(count, b.arena);
    b.out = solid_vessel_create(count, b.arena);
    return b;
}

/* Of an invented substance, component 2: conditions of equilibrium ask for no real one. */
static struct former invented_solid(double fugacity, double T)
{
    return (struct former){.component = 2,
                           .line = SOLID_SUBLIMES,
                           .line_pressure = fugacity,
                           .ln_fugacity = log(fugacity),
                           .molar_volume = 60e-6,
                           .poynting = 60e-6 / (8.31446261815324 * T)};
}

static struct former dry_ice(const struct bench *b, size_t component, double T)
{
    struct former former;
    const struct fluid *pure = sample_pure(b->fluid->ops->name, &SAMPLE_SUBSTANCE[CARBON_DIOXIDE], b->arena);
    assert_int_equal(former_at(&DRY_ICE, sample_at_t(pure, T, b->arena), component, &former), ANSWER_OK);
    return former;
}

/* Every phase against every solid, by the phases' own fugacities; what is there and what was put in. */
static void assert_equilibrium(const struct bench *b, double volume, const double n[])
{
    const struct solid_vessel *v = b->out;
    const struct split *split = v->fluid->split;
    double filled = 0.0;
    for (size_t k = 0; k < split->phase_count; k++) {
        filled += v->fluid->amount * split->phase[k].fraction * split->phase[k].molar_volume;
    }
    for (size_t j = 0; j < v->former_count; j++) {
        const struct former *former = &v->formers[j];
        const size_t i = former->component;
        filled += v->solid[j] * former->molar_volume;
        assert_true(v->solid[j] >= 0.0);
        for (size_t k = 0; k < split->phase_count && n[i] > 0.0; k++) {
            const double fluid = log(split->phase[k].x[i] * split->pressure) + split->phase[k].ln_phi[i];
            const double solid = former->ln_fugacity + former->poynting * split->pressure;
            if (v->solid[j] > 0.0) {
                assert_near(fluid - solid, 0.0, 1e-9, "equal fugacity in every phase");
            } else {
                assert_true(fluid - solid <= 1e-9);
            }
        }
    }
    assert_close(filled, volume, 1e-9, "the vessel is full");
    for (size_t i = 0; i < b->fluid->count; i++) {
        double held = 0.0;
        for (size_t k = 0; k < split->phase_count; k++) {
            held += v->fluid->amount * split->phase[k].fraction * split->phase[k].x[i];
        }
        for (size_t j = 0; j < v->former_count; j++) {
            held += v->formers[j].component == i ? v->solid[j] : 0.0;
        }
        assert_near(held, n[i], 1e-12 * n[i], "the balance of amounts");
    }
}

struct state {
    const char *method;
    double carbon_dioxide; /* mole fraction, in nitrogen */
    double temperature;    /* K */
    double density;        /* mol/m3, of the whole */
    bool has_ice;          /* whether that much is more than the gas holds: none of a trace, none in a thin gas */
};

/* From thin gas to liquid beside ice; from traces to nearly all of it. */
static const struct state STATES[] = {
    {"peng-robinson", 0.18, 213.15, 9000.0, false},    {"peng-robinson", 0.5, 200.0, 4000.0, true},
    {"peng-robinson", 0.98, 210.0, 12000.0, true},     {"peng-robinson", 0.0004, 120.0, 9000.0, true},
    {"peng-robinson", 0.02, 110.0, 20000.0, true},     {"peng-robinson", 1e-6, 110.0, 15000.0, false},
    {"soave-redlich-kwong", 0.3, 180.0, 2000.0, true}, {"lee-kesler", 0.3, 190.0, 5000.0, true},
    {"peng-robinson", 0.97, 219.0, 33000.0, true},     {"peng-robinson", 0.97, 219.0, 20000.0, false},
    {"peng-robinson", 0.9, 225.0, 34000.0, true},
};

static void solids_and_fluid_have_one_fugacity(void **unused)
{
    (void)unused;
    static const enum sample_substance gases[] = {NITROGEN, CARBON_DIOXIDE};
    for (size_t k = 0; k < COUNT(STATES); k++) {
        const struct state *state = &STATES[k];
        const struct bench b = bench_create(state->method, gases, 2, state->temperature);
        const struct former former = dry_ice(&b, 1, state->temperature);
        const double n[] = {1.7 * (1.0 - state->carbon_dioxide), 1.7 * state->carbon_dioxide};
        const double volume = 1.7 / state->density;
        const enum answer answer = solid_vessel_at_tv(b.at_t, volume, n, &former, 1, b.ws, b.out);
        assert_int_equal(answer, ANSWER_OK);
        assert_equilibrium(&b, volume, n);
        assert_int_equal(b.out->solid[0] > 0.0, state->has_ice);
        arena_free(b.arena);
    }
}

/* More of the solid, and the room it takes, change neither the fluid nor its pressure. */
static void further_solid_changes_nothing_else(void **unused)
{
    (void)unused;
    static const enum sample_substance gases[] = {NITROGEN, CARBON_DIOXIDE, METHANE};
    const double T = 195.0, n[] = {0.5, 0.4, 0.1};
    const struct bench b = bench_create("peng-robinson", gases, 3, T);
    const struct former former = dry_ice(&b, 1, T);
    assert_int_equal(solid_vessel_at_tv(b.at_t, 2e-4, n, &former, 1, b.ws, b.out), ANSWER_OK);
    const double pressure = b.out->fluid->split->pressure, ice = b.out->solid[0];
    assert_true(ice > 0.05);
    for (double more = -0.9 * ice; more < 3.0; more += 0.7) {
        const double other[] = {n[0], n[1] + more, n[2]};
        assert_int_equal(solid_vessel_at_tv(b.at_t, 2e-4 + more * former.molar_volume, other, &former, 1, b.ws, b.out),
                         ANSWER_OK);
        assert_close(b.out->fluid->split->pressure, pressure, 1e-9, "the same fluid");
        assert_near(b.out->solid[0], ice + more, 1e-8, "ice put in is ice there");
        assert_equilibrium(&b, 2e-4 + more * former.molar_volume, other);
    }
    arena_free(b.arena);
}

/* Two solids, the second invented: conditions of equilibrium ask for no real substance. Each alone, both and none. */
static void several_solids_come_and_go(void **unused)
{
    (void)unused;
    static const enum sample_substance gases[] = {NITROGEN, CARBON_DIOXIDE, PROPANE};
    const double T = 190.0, volume = 4e-4;
    const struct bench b = bench_create("peng-robinson", gases, 3, T);
    const struct former formers[] = {dry_ice(&b, 1, T), invented_solid(2e3, T)};
    static const double shares[][2] = {{0.3, 0.1}, {0.3, 1e-4}, {1e-3, 0.1}, {1e-3, 1e-4}, {0.05, 0.01}};
    bool seen[2][2] = {{false, false}, {false, false}};
    for (size_t k = 0; k < COUNT(shares); k++) {
        const double n[] = {1.0 - shares[k][0] - shares[k][1], shares[k][0], shares[k][1]};
        assert_int_equal(solid_vessel_at_tv(b.at_t, volume, n, formers, 2, b.ws, b.out), ANSWER_OK);
        assert_equilibrium(&b, volume, n);
        seen[b.out->solid[0] > 0.0][b.out->solid[1] > 0.0] = true;
    }
    assert_true(seen[0][0] && seen[0][1] && seen[1][0] && seen[1][1]);
    arena_free(b.arena);
}

/* Over the whole square of compositions and three densities, thin gas to liquid. */
static void every_state_of_two_solids_has_an_answer(void **unused)
{
    (void)unused;
    static const enum sample_substance gases[] = {NITROGEN, CARBON_DIOXIDE, PROPANE};
    static const double volumes[] = {4e-3, 4e-4, 8e-5};
    const double T = 180.0;
    const struct bench b = bench_create("peng-robinson", gases, 3, T);
    const struct former formers[] = {dry_ice(&b, 1, T), invented_solid(1.5e3, T)};
    size_t unanswered = 0;
    for (size_t k = 0; k < COUNT(volumes); k++) {
        for (double x = 1e-7; x < 0.5; x *= 4.7) {
            for (double y = 1e-7; y < 0.5; y *= 5.3) {
                const double n[] = {1.0 - x - y, x, y};
                const enum answer answer = solid_vessel_at_tv(b.at_t, volumes[k], n, formers, 2, b.ws, b.out);
                if (answer == ANSWER_OK) {
                    assert_equilibrium(&b, volumes[k], n);
                } else {
                    print_message("V %g x %g y %g: %d\n", volumes[k], x, y, (int)answer);
                    unanswered++;
                }
            }
        }
    }
    assert_int_equal(unanswered, 0);
    arena_free(b.arena);
}

/* Without a former, or warm, it is the vessel of the fluid alone. */
static void without_solids_it_is_the_fluid(void **unused)
{
    (void)unused;
    static const enum sample_substance gases[] = {NITROGEN, CARBON_DIOXIDE};
    const double n[] = {0.8, 0.2};
    const struct bench b = bench_create("peng-robinson", gases, 2, 230.0);
    struct mixture_vessel *alone = mixture_vessel_create(2, b.arena);
    assert_int_equal(solid_vessel_at_tv(b.at_t, 2e-4, n, NULL, 0, b.ws, b.out), ANSWER_OK);
    assert_int_equal(mixture_vessel_at_tv(b.at_t, 2e-4, n, NULL, b.ws, alone), ANSWER_OK);
    assert_close(b.out->fluid->split->pressure, alone->split->pressure, 1e-14, "the same answer");
    assert_int_equal(solid_vessel_at_tv(b.at_t, -1.0, n, NULL, 0, b.ws, b.out), ANSWER_OUT_OF_RANGE);
    arena_free(b.arena);
}

/* A pure gas: its pressure over dry ice is the published one, as phi at p_sub is the method's own; amounts by the two
 * volumes. Warm thin gas has no solid. */
static void dry_ice_alone(void **unused)
{
    (void)unused;
    static const enum sample_substance gas[] = {CARBON_DIOXIDE};
    const struct bench b = bench_create("peng-robinson", gas, 1, 194.686);
    const struct former former = dry_ice(&b, 0, 194.686);
    struct pure_solid_vessel v;
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 1e-3, 2.0, &former, &v), ANSWER_OK);
    assert_close(v.pressure, 101325.0, 2e-3, "the sublimation point, 194.686 K, CODATA and Span and Wagner");
    assert_close(v.fluid_amount * v.fluid_volume + v.solid_amount * v.solid_volume, 1e-3, 1e-12, "filled");
    assert_close(v.fluid_amount + v.solid_amount, 2.0, 1e-14, "the balance");
    assert_near(v.residual, 0.0, 1e-11, "equal fugacity");
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 1e-3, 0.01, &former, &v), ANSWER_OK);
    assert_true(v.solid_amount <= 0.0 && v.pressure < 101325.0);
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 1e-3, 40.0, &former, &v), ANSWER_OUT_OF_RANGE);
    arena_free(b.arena);
}

/* Liquid pressed onto its solid stands at the melting pressure whatever the shares; less of it does not freeze. */
static void liquid_over_its_solid(void **unused)
{
    (void)unused;
    static const enum sample_substance gas[] = {CARBON_DIOXIDE};
    const double T = 219.0, p_melt = solid_melting_pressure(&DRY_ICE_MELTING, T);
    const struct bench b = bench_create("peng-robinson", gas, 1, T);
    const struct former former = dry_ice(&b, 0, T);
    struct pure_solid_vessel v;
    assert_int_equal(former.line, SOLID_MELTS);
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 30e-6, 1.0, &former, &v), ANSWER_OK);
    assert_true(v.solid_amount > 0.0 && v.fluid_amount > 0.0);
    assert_close(v.pressure, p_melt, 1e-9, "Span and Wagner 1996, eq. 3.10");
    assert_close(v.fluid_amount * v.fluid_volume + v.solid_amount * v.solid_volume, 30e-6, 1e-12, "filled");
    assert_close(v.fluid_amount + v.solid_amount, 1.0, 1e-14, "the balance");
    assert_near(v.residual, 0.0, 1e-11, "equal fugacity");
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 1.01 * v.fluid_volume, 1.0, &former, &v), ANSWER_OK);
    assert_true(v.solid_amount <= 0.0 && v.pressure < p_melt && v.pressure > 0.0);
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 1e-3, 1.0, &former, &v), ANSWER_OK);
    assert_true(v.solid_amount <= 0.0);
    struct saturation saturation;
    assert_int_equal(saturation_at_t(b.at_t, &saturation), ANSWER_OK);
    assert_close(v.pressure, saturation.pressure, 1e-10, "vapour and liquid, no solid");
    assert_int_equal(pure_solid_vessel_at_tv(b.at_t, 29e-6, 1.0, &former, &v), ANSWER_OUT_OF_RANGE);
    arena_free(b.arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(solids_and_fluid_have_one_fugacity),
        cmocka_unit_test(further_solid_changes_nothing_else),
        cmocka_unit_test(several_solids_come_and_go),
        cmocka_unit_test(every_state_of_two_solids_has_an_answer),
        cmocka_unit_test(without_solids_it_is_the_fluid),
        cmocka_unit_test(dry_ice_alone),
        cmocka_unit_test(liquid_over_its_solid),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
