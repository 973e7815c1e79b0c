/* What the methods for mixtures tell a reader with a calculator: every formula holds, and it ends at what they answer.
 */
#include "fluid/phase.h"
#include "support/check.h"
#include "support/explained.h"
#include "support/measured_mixture.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const char *const METHODS[] = {
    "multi-fluid",
    "gerg-2008",
    "lee-kesler",
    "virial-tsonopoulos",
    "virial-pitzer-abbott",
    "virial-tsonopoulos-pressure",
    "virial-pitzer-abbott-pressure",
};

static const char *const NAMES[] = {"methane", "propane", "carbon-dioxide", "nitrogen", "n-butane"};
static const double AMOUNTS[] = {0.71, 0.23, 0.31, 0.17, 0.11};

static void assert_explained(const struct fluid_at_t *at_t, double volume, const double n[], size_t count,
                             struct phase *phase)
{
    struct explanation numbers;
    assert_int_equal(phase_tv(at_t, volume, n, PHASE_LN_PHI, phase), ANSWER_OK);
    assert_int_equal(fluid_explain(at_t, volume, n, true, &numbers), ANSWER_OK);
    char name[64];
    snprintf(name, sizeof name, "%s of %zu at %g m3", at_t->fluid->ops->name, count, volume);
    assert_close(explained_number(&numbers, "p"), phase->pressure, 1e-11, name);
    assert_close(explained_number(&numbers, "Z"), phase->Z, 1e-11, name);
    assert_formulas_hold(&numbers);
    if (count == 1) {
        assert_near(numbers.values[numbers.count - 1].value, phase->ln_phi[0], 1e-11, name);
    }
    for (size_t i = 0; count > 1 && count <= EXPLAINED_COMPONENTS && i < count; i++) {
        char symbol[16];
        snprintf(symbol, sizeof symbol, "ln_phi_%zu", i + 1);
        assert_near(explained_number(&numbers, symbol), phase->ln_phi[i], 1e-11, name);
    }
}

static void gases_of_one_to_five_components_are_explained(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        for (size_t count = 1; count <= COUNT(NAMES); count++) {
            const struct measured_mixture m = measured_mixture_create(METHODS[k], NAMES, count, arena);
            struct phase *phase = phase_create(count, arena);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, 311.0), ANSWER_OK);
            for (double volume = 3e-3; volume < 0.1; volume *= 2.3) {
                assert_explained(m.at_t, volume, AMOUNTS, count, phase);
            }
        }
    }
    arena_free(arena);
}

/* Of Lee and Kesler's two fluids each has a root of its own for a liquid. */
static void liquids_are_explained_by_the_methods_that_know_them(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < 3; k++) {
        for (size_t count = 1; count <= 3; count++) {
            static const char *const names[] = {"propane", "n-butane", "carbon-dioxide"};
            const struct measured_mixture m = measured_mixture_create(METHODS[k], names, count, arena);
            struct phase *phase = phase_create(count, arena);
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, 262.0), ANSWER_OK);
            assert_int_equal(phase_tp(m.at_t, 6e6, AMOUNTS, BRANCH_LIQUID, 0, phase), ANSWER_OK);
            assert_explained(m.at_t, phase->volume, AMOUNTS, count, phase);
        }
    }
    arena_free(arena);
}

static void what_has_no_meaning_is_not_explained(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(METHODS); k++) {
        const struct measured_mixture m = measured_mixture_create(METHODS[k], NAMES, 2, arena);
        const double none[] = {0.0, 0.0};
        struct explanation numbers;
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, 311.0), ANSWER_OK);
        assert_int_equal(fluid_explain(m.at_t, 0.0, AMOUNTS, true, &numbers), ANSWER_OUT_OF_RANGE);
        assert_int_equal(fluid_explain(m.at_t, 1e-3, none, true, &numbers), ANSWER_OUT_OF_RANGE);
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(gases_of_one_to_five_components_are_explained),
        cmocka_unit_test(liquids_are_explained_by_the_methods_that_know_them),
        cmocka_unit_test(what_has_no_meaning_is_not_explained),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
