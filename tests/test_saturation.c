/* Pure saturation: values against an independent solution, equal fugacities, Clapeyron's equation, the way back from
 * pressure to temperature, and what is refused. */
#include "equilibrium/saturation.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const double ONE_MOLE[] = {1.0};
static const char *const METHODS[] = {"peng-robinson", "soave-redlich-kwong", "reference"};

/* Reduced temperatures from well below propane's triple point (0.2312) up to what is promised. */
static const double REDUCED[] = {0.24, 0.3, 0.41, 0.57, 0.7, 0.83, 0.9, 0.96, 0.99, 0.997, 0.999, 0.9997, 0.9999};

static double critical_temperature(const struct fluid *fluid)
{
    struct critical_point critical;
    assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
    return critical.temperature;
}

/* ---- values ---------------------------------------------------------------------------------------------------- */

/* Equal pressures and equal fugacities solved with 40 digits by a script of its own. */
static const struct {
    const char *method;
    enum sample_substance substance;
    double reduced_temperature, pressure, vapour_volume, liquid_volume;
} SOLVED[] = {
    {"peng-robinson", PROPANE, 0.2, 1.9881456521196713e-6, 309377391.39193772, 5.8615097021939594e-5},
    {"peng-robinson", PROPANE, 0.3, 0.62670863958206144, 1472.1831343383489, 6.0349045385315337e-5},
    {"peng-robinson", PROPANE, 0.5, 7661.8989252838138, 0.19983400479216178, 6.5575495017479197e-5},
    {"peng-robinson", PROPANE, 0.7, 298795.35011731165, 0.0066596788126425899, 7.5636943840153689e-5},
    {"peng-robinson", PROPANE, 0.9, 2115516.9189336253, 0.00088167391937539111, 0.00010408404406572844},
    {"peng-robinson", PROPANE, 0.99, 3986387.3667461866, 0.00031490283491863546, 0.00016636577073923239},
    {"peng-robinson", PROPANE, 0.999, 4224148.0124753319, 0.00024657299371541987, 0.00020171818034999309},
    {"peng-robinson", PROPANE, 0.9999, 4248489.0314830540, 0.00022961816096405962, 0.00021549856464603711},
    {"peng-robinson", CARBON_DIOXIDE, 0.3, 0.26198903251962007, 2895.5354587640870, 2.8438769150579326e-5},
    {"peng-robinson", CARBON_DIOXIDE, 0.7, 437782.27144929709, 0.0037779026225708241, 3.5341401657778300e-5},
    {"peng-robinson", CARBON_DIOXIDE, 0.99, 6893206.6084766741, 0.00015103237032220565, 7.8163451849682405e-5},
    {"peng-robinson", CARBON_DIOXIDE, 0.9999, 7372336.0955881866, 0.00010890710661695948, 0.00010200161657915658},
    {"peng-robinson", NITROGEN, 0.5, 12947.768893410115, 0.040180526452644889, 2.8517418210417244e-5},
    {"peng-robinson", NITROGEN, 0.9, 1802497.7718941112, 0.00034248366966708086, 4.5742957810199763e-5},
    {"soave-redlich-kwong", PROPANE, 0.2, 7.9007276978811128e-7, 778519826.38051259, 6.5464168519265835e-5},
    {"soave-redlich-kwong", PROPANE, 0.7, 299417.55046095831, 0.0066696708220740843, 8.5665116015858573e-5},
    {"soave-redlich-kwong", PROPANE, 0.9, 2136179.5311144438, 0.00089270579798252686, 0.00011779197220450525},
    {"soave-redlich-kwong", PROPANE, 0.9999, 4248548.6948882336, 0.00024845419351551182, 0.00023417239130158608},
    {"soave-redlich-kwong", CARBON_DIOXIDE, 0.5, 7657.4428191643020, 0.16468832092030125, 3.4626819805297905e-5},
    {"soave-redlich-kwong", CARBON_DIOXIDE, 0.99, 6903701.5325626729, 0.00015996119784256468, 8.6467279712037113e-5},
    {"soave-redlich-kwong", NITROGEN, 0.3, 3.1068117462733617, 101.31401382556939, 2.9166288897117812e-5},
    {"soave-redlich-kwong", NITROGEN, 0.9999, 3393865.6519912493, 0.00010594524663318033, 0.00010016908884779362},
};

static void cubic_saturation_agrees_with_an_independent_solution(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(SOLVED); k++) {
        const struct pure_spec *substance = &SAMPLE_SUBSTANCE[SOLVED[k].substance];
        const struct fluid *fluid = sample_pure(SOLVED[k].method, substance, arena);
        const double T = SOLVED[k].reduced_temperature * substance->critical_temperature.value;
        struct saturation found;
        char what[120];
        snprintf(what, sizeof what, "%s %s at %g Tc, 40-digit solution", SOLVED[k].method, substance->name,
                 SOLVED[k].reduced_temperature);
        assert_int_equal(saturation_at_t(sample_at_t(fluid, T, arena), &found), ANSWER_OK);
        assert_close(found.pressure, SOLVED[k].pressure, 1e-12, what);
        assert_close(found.vapour_volume, SOLVED[k].vapour_volume, 1e-9, what);
        assert_close(found.liquid_volume, SOLVED[k].liquid_volume, 1e-9, what);
    }
    arena_free(arena);
}

static void published_saturation_of_propane_is_met(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct fluid *fluid = sample_pure("reference", &SAMPLE_SUBSTANCE[PROPANE], arena);
    struct saturation found;
    /* Lemmon et al. 2009, from memory: boiling at 231.036 K under 101325 Pa; 0.000172 Pa at the triple point. */
    assert_int_equal(saturation_at_t(sample_at_t(fluid, 231.036, arena), &found), ANSWER_OK);
    assert_close(found.pressure, 101325.0, 5e-5, "normal boiling point, from memory");
    assert_int_equal(saturation_at_t(sample_at_t(fluid, 85.525, arena), &found), ANSWER_OK);
    assert_close(found.pressure, 1.72e-4, 1e-3, "triple point, from memory");
    arena_free(arena);
}

/* ---- identities, for every method with a liquid ---------------------------------------------------------------- */

static void for_each_temperature(void (*check)(struct fluid_at_t *at_t, const struct saturation *found,
                                               const char *what))
{
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        for (size_t t = 0; t < COUNT(REDUCED); t++) {
            struct fluid_at_t *at_t = sample_at_t(fluid, REDUCED[t] * critical_temperature(fluid), arena);
            char what[80];
            snprintf(what, sizeof what, "%s at %g Tc", METHODS[k], REDUCED[t]);
            struct saturation found;
            assert_int_equal(saturation_at_t(at_t, &found), ANSWER_OK);
            check(at_t, &found, what);
        }
    }
    arena_free(arena);
}

static void fugacities_are_equal(struct fluid_at_t *at_t, const struct saturation *found, const char *what)
{
    struct pure_arrays vapour_arrays, liquid_arrays;
    struct phase vapour, liquid;
    phase_of_pure(&vapour, &vapour_arrays);
    phase_of_pure(&liquid, &liquid_arrays);
    assert_int_equal(phase_tv(at_t, found->vapour_volume, ONE_MOLE, PHASE_LN_F, &vapour), ANSWER_OK);
    assert_int_equal(phase_tv(at_t, found->liquid_volume, ONE_MOLE, PHASE_LN_F, &liquid), ANSWER_OK);
    assert_near(vapour_arrays.ln_f_over_x, liquid_arrays.ln_f_over_x, SATURATION_LN_F_TOLERANCE, what);
    assert_near(found->residual, 0.0, SATURATION_LN_F_TOLERANCE, what);
    assert_close(vapour.pressure, found->pressure, 1e-11, what);
    /* The liquid's own pressure is as good as its volume, which a few units in the last place move by this much. */
    assert_near(liquid.pressure, found->pressure, 1e-13 * fabs(liquid.dp_dv) * liquid.volume + 1e-11 * found->pressure,
                what);
    assert_near(found->ln_phi_vapour, vapour_arrays.ln_f_over_x - log(found->pressure), 1e-11, what);
    assert_near(found->ln_phi_liquid, found->ln_phi_vapour, 1e-11, what);
    assert_true(vapour.dp_dv < 0.0 && liquid.dp_dv < 0.0);
    assert_true(found->vapour_volume / found->liquid_volume - 1.0 > SATURATION_LEAST_CONTRAST);
    assert_true(found->iterations >= 1);
}

static void both_phases_have_equal_fugacity_and_pressure(void **state)
{
    (void)state;
    for_each_temperature(fugacities_are_equal);
}

/* dp/dT = (h_V - h_L) / (T (v_V - v_L)), with dp/dT by differences along the line. */
static void clapeyron_holds_at(struct fluid_at_t *at_t, const struct saturation *found, const char *what)
{
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    const struct fluid *fluid = at_t->fluid;
    const double T = found->temperature;
    assert_int_equal(phase_tv(at_t, found->vapour_volume, ONE_MOLE, PHASE_DLN_PHI_DT, &phase), ANSWER_OK);
    const double vapour = -T * arrays.dln_phi_dt;
    assert_int_equal(phase_tv(at_t, found->liquid_volume, ONE_MOLE, PHASE_DLN_PHI_DT, &phase), ANSWER_OK);
    const double liquid = -T * arrays.dln_phi_dt;
    const double slope =
        (vapour - liquid) * fluid->gas_constant / (found->vapour_volume - found->liquid_volume); /* Pa/K */
    const double distance = 1.0 - T / critical_temperature(fluid);
    const double h = 1e-3 * T * fmin(1.0, 20.0 * distance);
    double ln_p[4];
    static const double at[] = {-2.0, -1.0, 1.0, 2.0};
    for (size_t k = 0; k < COUNT(at); k++) {
        struct saturation near;
        assert_int_equal(fluid_set_t(at_t, fluid, T + at[k] * h), ANSWER_OK);
        assert_int_equal(saturation_at_t(at_t, &near), ANSWER_OK);
        ln_p[k] = log(near.pressure);
    }
    const double by_difference = (8.0 * (ln_p[2] - ln_p[1]) - (ln_p[3] - ln_p[0])) / (12.0 * h);
    assert_close(slope / found->pressure, by_difference, 1e-7, what);
}

static void the_slope_is_clapeyrons(void **state)
{
    (void)state;
    for_each_temperature(clapeyron_holds_at);
}

static void boiling_temperature_returns(struct fluid_at_t *at_t, const struct saturation *found, const char *what)
{
    struct saturation back;
    const double T = found->temperature;
    assert_int_equal(saturation_at_p(at_t, at_t->fluid, found->pressure, &back), ANSWER_OK);
    assert_close(back.temperature, T, 1e-11, what);
    assert_close(back.pressure, found->pressure, 1e-10, what);
    assert_near(at_t->temperature, back.temperature, 0.0, "the workspace holds the temperature found");
}

static void the_boiling_temperature_leads_back(void **state)
{
    (void)state;
    for_each_temperature(boiling_temperature_returns);
}

static void every_pressure_below_the_critical_one_has_a_boiling_temperature(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
        struct critical_point critical;
        assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
        double last = 0.0;
        for (double missing = 0.9999; missing > 1e-4; missing *= 0.7) {
            struct saturation found;
            const double p = critical.pressure * (1.0 - missing);
            assert_int_equal(saturation_at_p(at_t, fluid, p, &found), ANSWER_OK);
            assert_close(found.pressure, p, 1e-10, METHODS[k]);
            assert_true(found.temperature > last && found.temperature < critical.temperature);
            last = found.temperature;
        }
    }
    arena_free(arena);
}

/* ---- how it is found ------------------------------------------------------------------------------------------- */

static enum answer bad_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    (void)at_t;
    *out = (struct saturation_start){.pressure = 1.0, .vapour_volume = 1e-4, .liquid_volume = 0.9e-4};
    return ANSWER_OK;
}

/* Without first values, or with bad ones, the bracketed pressure leads to the same answer. */
static void bad_first_values_lead_to_the_same_answer(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid *other = (struct fluid *)(void *)sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid_ops ops = *fluid->ops;
        other->ops = &ops;
        for (int is_bad = 0; is_bad < 2; is_bad++) {
            ops.saturation_start = is_bad ? bad_start : NULL;
            for (size_t t = 0; t < COUNT(REDUCED); t++) {
                const double T = REDUCED[t] * critical_temperature(fluid);
                struct saturation expected, found;
                assert_int_equal(saturation_at_t(sample_at_t(fluid, T, arena), &expected), ANSWER_OK);
                assert_int_equal(saturation_at_t(sample_at_t(other, T, arena), &found), ANSWER_OK);
                assert_close(found.pressure, expected.pressure, 1e-11, METHODS[k]);
                assert_close(found.liquid_volume, expected.liquid_volume, 1e-8, METHODS[k]);
            }
        }
    }
    arena_free(arena);
}

static void the_classical_iteration_ends_at_the_same_pressure(void **state)
{
    (void)state;
    enum { MOST = 60 };
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        struct fluid_at_t *at_t = sample_at_t(sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena), 311.0, arena);
        struct saturation found;
        struct saturation_pass passes[MOST];
        size_t count;
        assert_int_equal(saturation_at_t(at_t, &found), ANSWER_OK);
        assert_int_equal(saturation_passes(at_t, 1.2 * found.pressure, MOST, passes, &count), ANSWER_OK);
        assert_true(count > 3 && count < MOST);
        for (size_t i = 0; i < count; i++) {
            const struct saturation_pass *pass = &passes[i];
            assert_close(pass->next_pressure, pass->pressure * pass->fugacity_liquid / pass->fugacity_vapour, 1e-14,
                         "p fL / fV");
            assert_true(i == 0 || pass->pressure == passes[i - 1].next_pressure); /* handed on unchanged */
            assert_true(pass->Z_vapour > pass->Z_liquid);
        }
        assert_close(passes[count - 1].pressure, found.pressure, 1e-9, METHODS[k]);
    }
    arena_free(arena);
}

static void the_classical_iteration_says_when_a_root_is_lost(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        struct fluid_at_t *at_t = sample_at_t(sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena), 345.0, arena);
        struct saturation_pass passes[5];
        size_t count;
        assert_int_equal(saturation_passes(at_t, 9e6, 5, passes, &count), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(count, 0);
        assert_int_equal(saturation_passes(at_t, 2e5, 5, passes, &count), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(count, 0);
        assert_int_equal(saturation_passes(at_t, 2.6e6, 2, passes, &count), ANSWER_OK);
        assert_int_equal(count, 2);
    }
    arena_free(arena);
}

/* ---- what is refused ------------------------------------------------------------------------------------------- */

static void there_is_no_saturation_at_or_above_the_critical_point(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct critical_point critical;
        struct saturation found;
        assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
        struct fluid_at_t *at_t = sample_at_t(fluid, critical.temperature, arena);
        assert_int_equal(saturation_at_t(at_t, &found), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(fluid_set_t(at_t, fluid, 1.3 * critical.temperature), ANSWER_OK);
        assert_int_equal(saturation_at_t(at_t, &found), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(saturation_at_p(at_t, fluid, critical.pressure, &found), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(saturation_at_p(at_t, fluid, 0.0, &found), ANSWER_OUT_OF_RANGE);
        assert_int_equal(saturation_at_p(at_t, fluid, (double)NAN, &found), ANSWER_OUT_OF_RANGE);
    }
    arena_free(arena);
}

/* The phases of a state this close differ by less than the least contrast: a failure, not a guess. */
static void phases_too_alike_are_not_reported(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct fluid *fluid = sample_pure(METHODS[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        for (double distance = 1e-9; distance > 1e-14; distance *= 0.1) {
            struct saturation found;
            struct fluid_at_t *at_t = sample_at_t(fluid, critical_temperature(fluid) * (1.0 - distance), arena);
            assert_int_equal(saturation_at_t(at_t, &found), ANSWER_FAILED);
        }
    }
    arena_free(arena);
}

static void a_method_without_liquid_and_a_mixture_cannot_answer(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct fluid *ideal = sample_pure("ideal-gas", &SAMPLE_SUBSTANCE[PROPANE], arena);
    const struct fluid *mixture = sample_fluid_create(&SAMPLE_FLUIDS[2], arena);
    const struct fluid *fluids[] = {ideal, mixture};
    for (size_t k = 0; k < COUNT(fluids); k++) {
        struct fluid_at_t *at_t = sample_at_t(fluids[k], 250.0, arena);
        struct saturation found;
        struct saturation_pass pass;
        size_t count;
        assert_int_equal(saturation_at_t(at_t, &found), ANSWER_CANNOT);
        assert_int_equal(saturation_at_p(at_t, fluids[k], 1e5, &found), ANSWER_CANNOT);
        assert_int_equal(saturation_passes(at_t, 1e5, 1, &pass, &count), ANSWER_CANNOT);
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(cubic_saturation_agrees_with_an_independent_solution),
        cmocka_unit_test(published_saturation_of_propane_is_met),
        cmocka_unit_test(both_phases_have_equal_fugacity_and_pressure),
        cmocka_unit_test(the_slope_is_clapeyrons),
        cmocka_unit_test(the_boiling_temperature_leads_back),
        cmocka_unit_test(every_pressure_below_the_critical_one_has_a_boiling_temperature),
        cmocka_unit_test(bad_first_values_lead_to_the_same_answer),
        cmocka_unit_test(the_classical_iteration_ends_at_the_same_pressure),
        cmocka_unit_test(the_classical_iteration_says_when_a_root_is_lost),
        cmocka_unit_test(there_is_no_saturation_at_or_above_the_critical_point),
        cmocka_unit_test(phases_too_alike_are_not_reported),
        cmocka_unit_test(a_method_without_liquid_and_a_mixture_cannot_answer),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
