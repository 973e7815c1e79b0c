/* The ideal-gas part of a reference equation: term by term against closed forms, and as heat capacities. */
#include "fluid/ideal_part.h"
#include "support/check.h"
#include "support/reference_data.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static struct ideal_part part_of(struct ideal_term term, double tau)
{
    const struct reference_spec equation = {.ideal_count = 1, .ideal = &term};
    return ideal_part_at(&equation, tau);
}

static const struct {
    struct ideal_term term;
    double tau;
    double value; /* the closed form, by a calculation with 30 digits */
    const char *what;
} TERMS[] = {
    {{IDEAL_LEAD, 1.3, -0.7, 0.0, 0.0}, 1.7, 0.11, "1.3 - 0.7 x 1.7, closed form"},
    {{IDEAL_LOG_TAU, 2.5, 0.0, 0.0, 0.0}, 1.7, 1.3265706276554259906, "2.5 ln 1.7, closed form"},
    {{IDEAL_TAU_LOG_TAU, 0.9, 0.0, 0.0, 0.0}, 1.7, 0.81186122412512070623, "0.9 x 1.7 ln 1.7, closed form"},
    {{IDEAL_POWER, 0.6, -1.4, 0.0, 0.0}, 1.7, 0.28544521056564307937, "0.6 x 1.7^-1.4, closed form"},
    {{IDEAL_EINSTEIN, 1.9, 0.8, 0.0, 0.0}, 1.7, -0.56354528170855061898, "1.9 ln(1 - exp(-0.8 x 1.7)), closed form"},
    {{IDEAL_EINSTEIN_GENERAL, 1.1, -0.9, 0.4, 1.7},
     1.7,
     -0.29020365104790461345,
     "1.1 ln(0.4 + 1.7 exp(-0.9 x 1.7)), closed form"},
    {{IDEAL_LOG_SINH, 1.6, 0.7, 0.0, 0.0}, 1.7, 0.63957659560004308829, "1.6 ln sinh(0.7 x 1.7), closed form"},
    {{IDEAL_LOG_SINH, 1.6, -0.7, 0.0, 0.0}, 1.7, 0.63957659560004308829, "1.6 ln|sinh(-0.7 x 1.7)|, closed form"},
    {{IDEAL_LOG_COSH, 1.6, 0.7, 0.0, 0.0}, 1.7, -0.93658841849607761691, "-1.6 ln cosh(0.7 x 1.7), closed form"},
};

static void every_kind_of_term_has_its_closed_form(void **state)
{
    (void)state;
    for (size_t i = 0; i < COUNT(TERMS); i++) {
        assert_close(part_of(TERMS[i].term, TERMS[i].tau).value, TERMS[i].value, 1e-15, TERMS[i].what);
    }
}

/* Sixth-order central difference of tau f' or f over tau. */
static double difference(struct ideal_term term, double tau, bool of_slope)
{
    static const double weights[] = {45.0 / 60.0, -9.0 / 60.0, 1.0 / 60.0};
    const double h = 1e-3 * tau;
    double sum = 0.0;
    for (int k = 1; k <= 3; k++) {
        const double above = tau + k * h, below = tau - k * h;
        const struct ideal_part a = part_of(term, above), b = part_of(term, below);
        sum += weights[k - 1] * (of_slope ? a.t / above - b.t / below : a.value - b.value) / h;
    }
    return sum;
}

static void derivatives_agree_with_differences(void **state)
{
    (void)state;
    static const double TAUS[] = {0.31, 1.7, 4.3};
    for (size_t i = 0; i < COUNT(TERMS); i++) {
        for (size_t k = 0; k < COUNT(TAUS); k++) {
            const double tau = TAUS[k];
            const struct ideal_part part = part_of(TERMS[i].term, tau);
            const double scale = fmax(1.0, fabs(part.value));
            assert_near(part.t, tau * difference(TERMS[i].term, tau, false), 1e-10 * scale, TERMS[i].what);
            assert_near(part.tt, tau * tau * difference(TERMS[i].term, tau, true), 1e-10 * scale, TERMS[i].what);
        }
    }
}

static void a_cold_vibration_neither_overflows_nor_contributes(void **state)
{
    (void)state;
    const struct ideal_part einstein = part_of((struct ideal_term){IDEAL_EINSTEIN, 2.0, 30.0, 0.0, 0.0}, 100.0);
    assert_near(einstein.value, 0.0, 1e-300, "2 ln(1 - exp(-3000)) is zero to the last digit");
    assert_near(einstein.tt, 0.0, 1e-300, "the heat capacity of a frozen vibration");
    const struct ideal_part sinh_term = part_of((struct ideal_term){IDEAL_LOG_SINH, 2.0, 30.0, 0.0, 0.0}, 100.0);
    assert_close(sinh_term.value, 2.0 * (3000.0 - 0.69314718055994530942), 1e-15, "ln sinh x tends to x - ln 2");
    assert_near(sinh_term.tt, 0.0, 1e-300, "the heat capacity of a frozen vibration");
    const struct ideal_part cosh_term = part_of((struct ideal_term){IDEAL_LOG_COSH, 2.0, 30.0, 0.0, 0.0}, 100.0);
    assert_close(cosh_term.t, -6000.0, 1e-15, "-2 x tanh x tends to -2 x");
}

static const struct {
    const char *gas;
    double temperature, heat_capacity_r;
    const char *source;
} CAPACITIES[] = {
    {"carbon-dioxide", 311, 4.53697671088666, "independent 30-digit evaluation"},
    {"nitrogen", 311, 3.50377398185194, "independent 30-digit evaluation"},
    {"propane", 311, 9.12435229711637, "independent 30-digit evaluation"},
    {"water", 311, 4.04699526184118, "independent 30-digit evaluation"},
    {"ammonia", 311, 4.31793520407357, "independent 30-digit evaluation"},
    {"r125", 311, 11.6492900835706, "independent 30-digit evaluation"},
    {"fluorine", 311, 3.79226747516802, "independent 30-digit evaluation"},
    {"cyclopropane", 311, 7.03653631201732, "independent 30-digit evaluation"},
    {"n-heptane", 311, 20.5410971163056, "independent 30-digit evaluation"},
};

static void heat_capacities_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    for (size_t i = 0; i < COUNT(CAPACITIES); i++) {
        char what[120];
        snprintf(what, sizeof what, "cp0/R of %s, %s", CAPACITIES[i].gas, CAPACITIES[i].source);
        assert_close(ideal_part_heat_capacity_r(reference_gas(CAPACITIES[i].gas)->equation, CAPACITIES[i].temperature),
                     CAPACITIES[i].heat_capacity_r, 1e-12, what);
    }
}

static void nitrogen_is_a_rigid_rotor_at_room_temperature(void **state)
{
    (void)state;
    /* 7/2 and the Einstein function of its vibration, 3393.5 K, is below 2e-3. */
    assert_close(ideal_part_heat_capacity_r(reference_gas("nitrogen")->equation, 300.0), 3.5, 1e-3,
                 "diatomic gas, equipartition");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_kind_of_term_has_its_closed_form),
        cmocka_unit_test(derivatives_agree_with_differences),
        cmocka_unit_test(a_cold_vibration_neither_overflows_nor_contributes),
        cmocka_unit_test(heat_capacities_agree_with_an_independent_evaluation),
        cmocka_unit_test(nitrogen_is_a_rigid_rotor_at_room_temperature),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
