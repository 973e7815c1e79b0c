/* Liquids by vapour pressure and Poynting factor: the parts by hand, values beside reference equations, what it has no
 * answer for. The identities every method meets are in test_phase.c. */
#include "equilibrium/saturation.h"
#include "filling/sheet.h"

#include "support/explained.h"
#include "support/library_deck.h"
#include "support/result_reading.h"

#include <math.h>

#define R 8.31446261815324

static struct method_run method_of(const char *gas, const char *method, struct arena *arena)
{
    const char *text =
        arena_format(arena, "use \"gases\"\nsheet saturation { fluid %s; sweep temperature 280 K }\n", gas);
    return method_run_create(library_deck(text, arena)->sheets[0].fluid, method, true, arena);
}

static const double ONE[] = {1.0};

/* ln of the fugacity, and molar volume, at T and p. */
static enum answer liquid_at(struct method_run *method, double T, double p, double *ln_f, double *volume)
{
    double ln_phi = 0.0, ln_f_over_x = 0.0;
    struct phase phase = {.ln_phi = &ln_phi, .ln_f_over_x = &ln_f_over_x};
    enum answer answer = fluid_set_t(method->at_t, method->fluid, T);
    answer = answer == ANSWER_OK ? stable_phase_tp(method->at_t, p, ONE, PHASE_LN_F, &phase) : answer;
    *ln_f = ln_f_over_x;
    *volume = phase.volume;
    return answer;
}

/* Propane at 280 K and 100 bar, with Tc = 369.89 K, pc = 42.512 bar and omega = 0.1521 (Lemmon, McLinden and Wagner,
 * J. Chem. Eng. Data 54 (2009) 3141): Tr = 0.756982, ln(p_sat / pc) = f0 + omega f1 with
 *   f0 = 5.92714 - 6.09648 / Tr - 1.28862 ln Tr + 0.169347 Tr^6,
 *   f1 = 15.2518 - 15.6875 / Tr - 13.4721 ln Tr + 0.43577 Tr^6,
 * Z_RA = 0.29056 - 0.08775 omega, v_sat = (R Tc / pc) Z_RA^(1 + (1 - Tr)^(2/7)); worked out below step by step. */
static void the_parts_are_those_by_hand(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct method_run method = method_of("propane", "poynting", arena);
    const struct pure_spec *pure = method.fluid->spec->pure[0];
    const double Tc = pure->critical_temperature.value, pc = pure->critical_pressure.value, w = pure->acentric.value;
    const double Tr = 280.0 / Tc, f0 = 5.92714 - 6.09648 / Tr - 1.28862 * log(Tr) + 0.169347 * pow(Tr, 6.0);
    const double f1 = 15.2518 - 15.6875 / Tr - 13.4721 * log(Tr) + 0.43577 * pow(Tr, 6.0);
    const double psat = pc * exp(f0 + w * f1), Z_RA = 0.29056 - 0.08775 * w;
    const double vsat = R * Tc / pc * pow(Z_RA, 1.0 + pow(1.0 - Tr, 2.0 / 7.0));
    struct saturation saturation;
    assert_int_equal(fluid_set_t(method.at_t, method.fluid, 280.0), ANSWER_OK);
    assert_int_equal(saturation_at_t(method.at_t, &saturation), ANSWER_OK);
    assert_close(saturation.pressure, psat, 1e-10, "by hand");
    assert_close(saturation.liquid_volume, vsat, 1e-10, "by hand");
    /* the integral of v dp by Simpson's rule over the method's own volumes */
    enum { PARTS = 400 };
    double sum = 0.0, ln_low, ln_high, volume;
    for (int i = 0; i <= PARTS; i++) {
        const double p = psat * (1.0 + 1e-12) + (1e7 - psat) * i / PARTS;
        assert_int_equal(liquid_at(&method, 280.0, p, &ln_high, &volume), ANSWER_OK);
        sum += volume * (i == 0 || i == PARTS ? 1.0 : i % 2 == 1 ? 4.0 : 2.0);
    }
    const double integral = sum * (1e7 - psat) / PARTS / 3.0;
    ln_low = saturation.ln_phi_vapour + log(psat);
    assert_close(ln_high - ln_low, integral / (R * 280.0), 1e-8, "Simpson's rule");
    arena_free(arena);
}

/* Beside the reference equations of the same gases, of which the correlations are meant to be good: vapour pressures
 * within 3 %, saturated liquids within 4 %, fugacities at 100 bar within 4 %. Common practice, no source for the
 * bounds. */
static void it_is_near_the_reference_equations(void **state)
{
    (void)state;
    static const struct {
        const char *gas;
        double T;
    } cases[] = {{"propane", 240.0},        {"propane", 320.0},        {"n-butane", 290.0},
                 {"carbon-dioxide", 230.0}, {"carbon-dioxide", 270.0}, {"nitrous-oxide", 260.0},
                 {"ethylene", 220.0},       {"argon", 110.0},          {"sulfur-hexafluoride", 270.0}};
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        struct arena *arena = arena_create(NULL);
        struct method_run own = method_of(cases[k].gas, "poynting", arena);
        struct method_run reference = method_of(cases[k].gas, "reference", arena);
        double ln_own, ln_reference, v_own, v_reference;
        struct saturation at, expected;
        assert_int_equal(fluid_set_t(own.at_t, own.fluid, cases[k].T), ANSWER_OK);
        assert_int_equal(fluid_set_t(reference.at_t, reference.fluid, cases[k].T), ANSWER_OK);
        assert_int_equal(saturation_at_t(own.at_t, &at), ANSWER_OK);
        assert_int_equal(saturation_at_t(reference.at_t, &expected), ANSWER_OK);
        assert_close(at.pressure, expected.pressure, 0.03, cases[k].gas);
        assert_close(at.liquid_volume, expected.liquid_volume, 0.04, cases[k].gas);
        assert_int_equal(liquid_at(&own, cases[k].T, 1e7, &ln_own, &v_own), ANSWER_OK);
        assert_int_equal(liquid_at(&reference, cases[k].T, 1e7, &ln_reference, &v_reference), ANSWER_OK);
        assert_near(ln_own, ln_reference, 0.04, cases[k].gas);
        assert_close(v_own, v_reference, 0.04, cases[k].gas);
        arena_free(arena);
    }
}

/* No dense gas above the critical temperature, no liquid near it, no mixtures. */
static void what_it_cannot_answer_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct method_run method = method_of("propane", "poynting", arena);
    struct saturation saturation;
    double ln_f, volume;
    assert_int_equal(liquid_at(&method, 400.0, 1e7, &ln_f, &volume), ANSWER_OUT_OF_RANGE);
    assert_int_equal(liquid_at(&method, 400.0, 1e5, &ln_f, &volume), ANSWER_OK);
    assert_int_equal(fluid_set_t(method.at_t, method.fluid, 369.0), ANSWER_OK);
    assert_true(saturation_at_t(method.at_t, &saturation) != ANSWER_OK);
    const char *lpg = "use \"gases\"\nmixture lpg by mole { propane 60 %; n-butane rest }\n"
                      "sheet saturation { fluid lpg; sweep temperature 280 K; methods peng-robinson }\n";
    const struct method_run mixed =
        method_run_create(library_deck(lpg, arena)->sheets[0].fluid, "poynting", true, arena);
    assert_null(mixed.fluid);
    assert_int_equal(mixed.lack.lack, LACK_MIXTURE);
    arena_free(arena);
}

/* Every line of the hand check, put in anew, gives its number (to 1e-11: the pressure comes back from the volume). */
static void the_hand_check_can_be_redone(void **state)
{
    (void)state;
    static const double pressures[] = {1e5, 1e6, 2e6, 4e7};
    struct arena *arena = arena_create(NULL);
    struct method_run method = method_of("propane", "poynting", arena);
    struct explanation *numbers = arena_alloc(arena, 1, sizeof *numbers);
    for (size_t k = 0; k < sizeof pressures / sizeof *pressures; k++) {
        double ln_f, volume;
        assert_int_equal(liquid_at(&method, 280.0, pressures[k], &ln_f, &volume), ANSWER_OK);
        assert_int_equal(fluid_explain(method.at_t, volume, ONE, true, numbers), ANSWER_OK);
        assert_near(explained_number(numbers, "ln_phi") + log(pressures[k]), ln_f, 1e-9, "the method's own");
        if (k == 2) {
            assert_formulas_hold(numbers);
            assert_close(explained_number(numbers, "P"), exp(explained_number(numbers, "I") / (R * 280.0)), 1e-12,
                         "the Poynting factor");
        }
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_parts_are_those_by_hand),
        cmocka_unit_test(it_is_near_the_reference_equations),
        cmocka_unit_test(what_it_cannot_answer_is_refused),
        cmocka_unit_test(the_hand_check_can_be_redone),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
