/* Caloric properties by every method: what must hold between them, against differences, and the ideal-gas limit. */
#include "fluid/caloric.h"
#include "support/check.h"
#include "support/measured_mixture.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const char *const METHODS[] = {
    "ideal-gas",     "van-der-waals", "redlich-kwong",      "soave-redlich-kwong",
    "peng-robinson", "multi-fluid",   "peng-robinson-1978", "peng-robinson-twu",
    "gerg-2008",     "lee-kesler",    "virial-tsonopoulos", "virial-pitzer-abbott-pressure",
};

static const char *const NAMES[] = {"methane", "propane", "nitrogen"};
static const double AMOUNTS[] = {0.83, 0.41, 0.29};

struct state {
    const struct measured_mixture *m;
    struct phase *phase;
    enum branch branch;
};

static struct caloric caloric_at(const struct state *s, double T, double p)
{
    struct caloric caloric;
    assert_int_equal(fluid_set_t(s->m->at_t, s->m->fluid, T), ANSWER_OK);
    assert_int_equal(phase_tp(s->m->at_t, p, AMOUNTS, s->branch, PHASE_RESIDUAL, s->phase), ANSWER_OK);
    assert_int_equal(caloric_of_phase(s->m->at_t, AMOUNTS, s->phase, &caloric), ANSWER_OK);
    return caloric;
}

/* dH/dT = cp and dS/dT = cp / T at constant pressure; dH - T dS = V dp at constant temperature; U = H - p V. */
static void assert_identities(const struct state *s, double T, double p, const char *method)
{
    const double h = 1e-4 * T, k = 1e-4 * p;
    const struct caloric at = caloric_at(s, T, p);
    const double V = s->phase->volume / s->phase->amount;
    assert_close(at.internal_energy, at.enthalpy - p * V, 1e-10, method);
    assert_true(at.heat_capacity_p > at.heat_capacity_v && at.heat_capacity_v > 0.0);
    const struct caloric hot = caloric_at(s, T + h, p), cold = caloric_at(s, T - h, p);
    assert_close((hot.enthalpy - cold.enthalpy) / (2.0 * h), at.heat_capacity_p, 1e-5, method);
    assert_close(T * (hot.entropy - cold.entropy) / (2.0 * h), at.heat_capacity_p, 1e-5, method);
    const struct caloric high = caloric_at(s, T, p + k), low = caloric_at(s, T, p - k);
    const double work = (high.enthalpy - low.enthalpy - T * (high.entropy - low.entropy)) / (2.0 * k);
    assert_close(work, V, 1e-5, method);
}

/* The speed of sound against the slope of the isentrope: w^2 = (dp/drho)_S, rho mass by volume. */
static void assert_sound(const struct state *s, double T, double p, const char *method)
{
    const struct caloric at = caloric_at(s, T, p);
    double mass = 0.0, amount = 0.0;
    for (size_t i = 0; i < s->m->fluid->count; i++) {
        mass += AMOUNTS[i] * s->m->spec->pure[i]->molar_mass;
        amount += AMOUNTS[i];
    }
    /* Along the isentrope dT = (T V alpha / cp) dp; alpha V = (dV/dT)_p by differences. */
    const double h = 1e-4 * T, k = 1e-5 * p;
    caloric_at(s, T + h, p);
    const double hot = s->phase->volume;
    caloric_at(s, T - h, p);
    const double swelling = (hot - s->phase->volume) / (2.0 * h) / amount;
    const double by_p = T * swelling / at.heat_capacity_p;
    caloric_at(s, T + by_p * k, p + k);
    const double high = mass / s->phase->volume;
    caloric_at(s, T - by_p * k, p - k);
    const double low = mass / s->phase->volume;
    assert_close(at.speed_of_sound, sqrt(2.0 * k / (high - low)), 1e-4, method);
}

static void every_method_keeps_the_identities(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (size_t count = 1; count <= COUNT(NAMES); count += 2) {
            const struct measured_mixture m = measured_mixture_create(METHODS[k], NAMES, count, arena);
            const struct state gas = {&m, phase_create(count, arena), BRANCH_VAPOUR};
            for (double T = 290.0; T < 400.0; T += 47.0) {
                for (double p = 1e5; p < 3e6; p *= 4.0) {
                    assert_identities(&gas, T, p, METHODS[k]);
                    assert_sound(&gas, T, p, METHODS[k]);
                }
            }
        }
    }
    arena_free(arena);
}

static void liquids_keep_them_too(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"propane", "n-butane"};
    static const char *const methods[] = {"peng-robinson", "multi-fluid", "gerg-2008", "lee-kesler"};
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct measured_mixture m = measured_mixture_create(methods[k], names, 2, arena);
        const struct state liquid = {&m, phase_create(2, arena), BRANCH_LIQUID};
        assert_identities(&liquid, 270.0, 3e6, methods[k]);
        assert_sound(&liquid, 270.0, 3e6, methods[k]);
    }
    arena_free(arena);
}

/* Thin gases are ideal: cp - cv = R, w^2 = gamma R T / M, and by all methods the same enthalpy. */
static void thin_gases_are_ideal(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct measured_mixture m = measured_mixture_create(METHODS[k], NAMES, 3, arena);
        const struct state gas = {&m, phase_create(3, arena), BRANCH_VAPOUR};
        const struct caloric at = caloric_at(&gas, 300.0, 1.0);
        struct caloric ideal;
        assert_int_equal(caloric_ideal(m.at_t, 1.0, AMOUNTS, &ideal), ANSWER_OK);
        assert_near(at.enthalpy, ideal.enthalpy, 1e-6 * 8.3 * 300.0, METHODS[k]);
        assert_near(at.entropy, ideal.entropy, 1e-6 * 8.3, METHODS[k]);
        assert_close(at.heat_capacity_p - at.heat_capacity_v, m.fluid->gas_constant, 1e-5, METHODS[k]);
    }
    arena_free(arena);
}

static void what_has_no_ideal_part_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const char *const names[] = {"methane", "silane"};
    const struct measured_mixture m = measured_mixture_create("peng-robinson", names, 2, arena);
    struct caloric caloric;
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, 300.0), ANSWER_OK);
    assert_int_equal(caloric_at_volume(m.at_t, 1e-2, AMOUNTS, &caloric), ANSWER_CANNOT);
    assert_int_equal(caloric_at_volume(m.at_t, -1.0, AMOUNTS, &caloric), ANSWER_OUT_OF_RANGE);
    const double methane_alone[] = {1.0, 0.0};
    assert_int_equal(caloric_at_volume(m.at_t, 1e-2, methane_alone, &caloric), ANSWER_OK);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_method_keeps_the_identities),
        cmocka_unit_test(liquids_keep_them_too),
        cmocka_unit_test(thin_gases_are_ideal),
        cmocka_unit_test(what_has_no_ideal_part_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
