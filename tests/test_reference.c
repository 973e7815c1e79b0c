/* The `reference` method: published check values, an independent evaluation, its derivatives, limits and roots. */
#include "equilibrium/saturation.h"
#include "fluid/phase.h"
#include "fluid/caloric.h"
#include "support/check.h"
#include "support/reference_check.h"
#include "support/reference_subject.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* ---- values ---------------------------------------------------------------------------------------------------- */

static void carried_gases_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    size_t count = 0;
    const struct reference_gas *gases = reference_gases(&count);
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        const struct pure_spec pure = {
            .name = gases[i].name, .molar_mass = gases[i].molar_mass, .reference = gases[i].equation};
        const size_t rows = reference_rows_check(reference_rows_read(arena), &pure, arena);
        arena_free(arena);
        assert_true(rows >= 10);
    }
}

/* Wagner and Pruss, J. Phys. Chem. Ref. Data 31 (2002) 387, table 6.6 (also IAPWS R6-95, table 6), from memory:
 * alphar, delta, delta-delta, tau, tau-tau and mixed derivatives. */
static const struct {
    double temperature, density; /* K, kg/m3 */
    double a, a_d, a_dd, a_t, a_tt, a_dt;
} WATER_DERIVATIVES[] = {
    {500.0, 838.025, -3.42693206, -0.364366650, 0.856063701, -5.81403435, -2.23440737, -1.12176915},
    {647.0, 358.0, -1.21202657, -0.714012024, 0.475730696, -3.21722501, -9.96029507, -1.33214720},
};

static void the_derivatives_of_water_are_the_published_ones(void **state)
{
    (void)state;
    const char *what = "Wagner and Pruss 2002, table 6.6, from memory";
    struct subject water;
    open_gas(&water, "water");
    for (size_t i = 0; i < COUNT(WATER_DERIVATIVES); i++) {
        const double T = WATER_DERIVATIVES[i].temperature, tau = water.equation->reducing_temperature / T;
        const double rho = WATER_DERIVATIVES[i].density / water.pure.molar_mass, V = 1.0 / rho, n[] = {1.0};
        const double delta = rho / water.equation->reducing_density;
        struct helmholtz F = {0};
        set_temperature(&water, T);
        assert_int_equal(water.fluid->ops->tv(water.at_t, V, n, WANT_F_VV | WANT_F_T | WANT_F_TT, &F), ANSWER_OK);
        /* F = alphar at n = 1, with delta = 1 / (V rho_r) and tau = T_r / T. */
        const double d = -F.F_V * V, dd = F.F_VV * V * V - 2.0 * d, t = -F.F_T * T;
        assert_close(F.F, WATER_DERIVATIVES[i].a, 5e-9, what);
        assert_close(d / delta, WATER_DERIVATIVES[i].a_d, 5e-9, what);
        assert_close(dd / (delta * delta), WATER_DERIVATIVES[i].a_dd, 5e-9, what);
        assert_close(t / tau, WATER_DERIVATIVES[i].a_t, 5e-9, what);
        assert_close((F.F_TT * T * T - 2.0 * t) / (tau * tau), WATER_DERIVATIVES[i].a_tt, 5e-9, what);
        assert_close(F.F_TV * V * T / (delta * tau), WATER_DERIVATIVES[i].a_dt, 5e-9, what);
    }
    close_gas(&water);
}

/* p, cv, speed of sound and either s (water) or cp (propane); molar for propane, for each kg for water. */
static const struct {
    const char *gas;
    double temperature, density, pressure, cv, sound, other;
} SINGLE_PHASE[] = {
    /* Wagner and Pruss 2002, table 13.1 check values (IAPWS R6-95, table 7), from memory: kg/m3, Pa, J/(kg K), m/s,
     * entropy J/(kg K). */
    {"water", 300.0, 996.556, 0.992418352e5, 4130.18112, 1501.51914, 393.062643},
    {"water", 300.0, 1188.202, 0.700004704e9, 3461.35580, 2443.57992, 132.609616},
    {"water", 500.0, 0.435, 0.999679423e5, 1508.17541, 548.314253, 7944.88271},
    {"water", 500.0, 838.025, 0.100003858e8, 3221.06219, 1271.28441, 2566.90919},
    {"water", 647.0, 358.0, 0.220384756e8, 6183.15728, 252.145078, 4320.92307},
    {"water", 900.0, 52.615, 0.200000690e8, 1935.10526, 698.445674, 6590.70225},
    {"water", 900.0, 870.769, 0.700000006e9, 2664.22350, 2019.33608, 4172.23802},
    /* Lemmon, McLinden and Wagner, J. Chem. Eng. Data 54 (2009) 3141, table 8, from memory: mol/m3, Pa, J/(mol K),
     * m/s, cp J/(mol K). */
    {"propane", 200.0, 14000.0, 2.3795138e6, 61.078424, 1381.9552, 93.475362},
    {"propane", 300.0, 12000.0, 19.053797e6, 73.972542, 958.40520, 108.61529},
    {"propane", 300.0, 400.0, 0.84694991e6, 69.021875, 221.88959, 85.753997},
    {"propane", 400.0, 5000.0, 6.6462840e6, 97.017439, 194.65847, 271.07044},
    {"propane", 369.9, 5000.0, 4.2519399e6, 117.71621, 130.89800, 753625.00},
};

static void single_phase_states_are_the_published_ones(void **state)
{
    (void)state;
    for (size_t i = 0; i < COUNT(SINGLE_PHASE); i++) {
        struct subject gas;
        struct caloric caloric;
        char what[120];
        open_gas(&gas, SINGLE_PHASE[i].gas);
        const bool by_mass = i < 7;
        const double mass = by_mass ? gas.pure.molar_mass : 1.0;
        const double density = SINGLE_PHASE[i].density / mass;
        snprintf(what, sizeof what, "%s, %g K, %g: check value of the paper, from memory", gas.name,
                 SINGLE_PHASE[i].temperature, SINGLE_PHASE[i].density);
        set_temperature(&gas, SINGLE_PHASE[i].temperature);
        /* Eight or nine digits printed; propane's were made with a slightly different gas constant. */
        const double tolerance = 1e-7;
        assert_close(phase_at(&gas, density).pressure, SINGLE_PHASE[i].pressure, tolerance, what);
        assert_int_equal(caloric_at_volume(gas.at_t, 1.0 / density, (const double[]){1.0}, &caloric), ANSWER_OK);
        assert_close(caloric.heat_capacity_v / mass, SINGLE_PHASE[i].cv, tolerance, what);
        assert_close(caloric.speed_of_sound, SINGLE_PHASE[i].sound, tolerance, what);
        assert_close(by_mass ? caloric.entropy / mass : caloric.heat_capacity_p, SINGLE_PHASE[i].other, tolerance,
                     what);
        close_gas(&gas);
    }
}

/* Saturation: K, Pa, and mol/m3 or (carbon dioxide) kg/m3 of vapour and liquid. */
static const struct {
    const char *gas;
    double temperature, pressure, vapour, liquid, digits;
    const char *source;
} SATURATION[] = {
    {"carbon-dioxide", 216.592, 0.51796e6, 13.761, 1178.46, 2e-5, "Span and Wagner 1996, table 34, from memory"},
    {"carbon-dioxide", 250.0, 1.7850e6, 46.644, 1045.97, 3e-5, "Span and Wagner 1996, table 34, from memory"},
    {"carbon-dioxide", 300.0, 6.7131e6, 268.58, 679.24, 2e-5, "Span and Wagner 1996, table 34, from memory"},
    {"nitrogen", 63.151, 0.01252e6, 24.07, 30957.0, 1e-4, "Span et al. 2000, triple point, from memory"},
    {"nitrogen", 77.355, 0.101325e6, 164.64, 28775.0, 1e-5, "Span et al. 2000, normal boiling point, from memory"},
    {"ammonia", 239.832, 0.101325e6, 52.25, 40024.0, 2e-4, "Gao et al. 2023, normal boiling point, from memory"},
    {"fluorine", 85.0368, 0.101325e6, 148.47, 39524.0, 5e-5, "de Reuck 1990, normal boiling point, from memory"},
};

static void saturation_is_the_published_one(void **state)
{
    (void)state;
    for (size_t i = 0; i < COUNT(SATURATION); i++) {
        struct subject gas;
        struct saturation saturation;
        open_gas(&gas, SATURATION[i].gas);
        const double mass = i < 3 ? gas.pure.molar_mass : 1.0;
        set_temperature(&gas, SATURATION[i].temperature);
        assert_int_equal(saturation_at_t(gas.at_t, &saturation), ANSWER_OK);
        assert_close(saturation.pressure, SATURATION[i].pressure, SATURATION[i].digits, SATURATION[i].source);
        assert_close(mass / saturation.vapour_volume, SATURATION[i].vapour, SATURATION[i].digits, SATURATION[i].source);
        assert_close(mass / saturation.liquid_volume, SATURATION[i].liquid, SATURATION[i].digits, SATURATION[i].source);
        close_gas(&gas);
    }
}

/* ---- regrouping and derivatives -------------------------------------------------------------------------------- */

/* alphar term by term as defined in fluid/spec.h. */
static double plain_sum(const struct reference_spec *equation, double tau, double delta)
{
    double sum = 0.0;
    for (size_t i = 0; i < equation->residual_count; i++) {
        const struct residual_term *k = &equation->residual[i];
        const double y = delta - k->epsilon, z = tau - k->gamma, x = (delta - 1.0) * (delta - 1.0);
        const double term = k->n * pow(delta, k->d) * pow(tau, k->t);
        if (k->kind == RESIDUAL_POWER) {
            sum += k->l == 0.0 ? term : term * exp(-pow(delta, k->l));
        } else if (k->kind == RESIDUAL_EXPONENTIAL) {
            sum += term * exp(-k->g * pow(delta, k->l));
        } else if (k->kind == RESIDUAL_GAUSSIAN) {
            sum += term * exp(-k->eta * y * y - k->beta * z * z);
        } else if (k->kind == RESIDUAL_INVERSE_GAUSSIAN) {
            sum += term * exp(-k->eta * y * y + 1.0 / (k->b + k->beta * z * z));
        } else if (k->kind == RESIDUAL_DOUBLE_EXPONENTIAL) {
            const double by_delta = k->gd == 0.0 || k->ld == 0.0 ? 0.0 : k->gd * pow(delta, k->ld);
            const double by_tau = k->gt == 0.0 || k->lt == 0.0 ? 0.0 : k->gt * pow(tau, k->lt);
            sum += term * exp(-by_delta - by_tau);
        } else {
            const double theta = 1.0 - tau + k->A * pow(x, 0.5 / k->beta);
            const double D = theta * theta + k->B * pow(x, k->a);
            sum += k->n * delta * pow(D, k->b) * exp(-k->C * x - k->E * (tau - 1.0) * (tau - 1.0));
        }
    }
    return sum;
}

/* Invented terms of every kind, with powers that are no whole numbers and members of a group set apart on purpose. */
static const struct residual_term INVENTED_TERMS[] = {
    {.kind = RESIDUAL_POWER, .n = 0.31, .t = 0.37, .d = 1.0},
    {.kind = RESIDUAL_POWER, .n = -0.83, .t = 1.9, .d = 1.43, .l = 1.7},
    {.kind = RESIDUAL_EXPONENTIAL, .n = 0.21, .t = -0.4, .d = 2.0, .g = 0.8, .l = 1.7},
    {.kind = RESIDUAL_POWER, .n = 0.017, .t = 0.37, .d = 34.0, .l = 33.0},
    {.kind = RESIDUAL_EXPONENTIAL, .n = -0.11, .t = 2.1, .d = 1.43, .g = 1.0, .l = 1.7},
    {.kind = RESIDUAL_EXPONENTIAL, .n = 0.09, .t = 1.0, .d = 1.0, .g = 0.6, .l = 0.0},
    {.kind = RESIDUAL_GAUSSIAN, .n = 0.4, .t = 1.1, .d = 1.2, .eta = 1.3, .epsilon = 0.7, .beta = 2.2, .gamma = 1.1},
    {.kind = RESIDUAL_INVERSE_GAUSSIAN,
     .n = -0.2,
     .t = 0.9,
     .d = 1.2,
     .eta = 1.3,
     .epsilon = 0.7,
     .beta = 0.5,
     .gamma = 1.2,
     .b = 1.4},
    {.kind = RESIDUAL_DOUBLE_EXPONENTIAL, .n = 0.13, .t = 1.0, .d = 2.0, .gd = 0.7, .ld = 2.0, .gt = 0.3, .lt = 1.5},
    {.kind = RESIDUAL_DOUBLE_EXPONENTIAL, .n = 0.05, .t = 2.0, .d = 1.0, .gd = 0.0, .ld = 2.0, .gt = 0.3, .lt = 1.5},
    {.kind = RESIDUAL_DOUBLE_EXPONENTIAL, .n = 0.07, .t = 0.5, .d = 1.0, .gd = 0.7, .ld = 2.0, .gt = 0.9, .lt = 0.0},
    {.kind = RESIDUAL_NONANALYTIC, .n = -0.3, .a = 3.3, .b = 0.9, .beta = 0.31, .A = 0.6, .B = 0.4, .C = 2.0, .E = 9.0},
    {.kind = RESIDUAL_NONANALYTIC, .n = 0.2, .a = 3.3, .b = 0.8, .beta = 0.28, .A = 0.6, .B = 0.4, .C = 1.5, .E = 7.0},
};

static const struct reference_spec INVENTED = {
    .gas_constant = 8.3,
    .reducing_temperature = 311.0,
    .reducing_density = 9700.0,
    .residual_count = COUNT(INVENTED_TERMS),
    .residual = INVENTED_TERMS,
    .critical_temperature = 305.0,
    .critical_pressure = 5e6,
    .critical_density = 9300.0,
    .smallest_temperature = 200.0,
    .largest_temperature = 700.0,
    .largest_pressure = 5e7,
};

static void check_regrouping(struct subject *gas)
{
    static const double TAUS[] = {0.47, 0.93, 1.0, 1.37}, DELTAS[] = {0.013, 0.61, 0.97, 1.0, 1.9, 2.7};
    for (size_t i = 0; i < COUNT(TAUS); i++) {
        set_temperature(gas, gas->equation->reducing_temperature / TAUS[i]);
        for (size_t k = 0; k < COUNT(DELTAS); k++) {
            const double tau = gas->equation->reducing_temperature / gas->at_t->temperature, n[] = {1.0};
            struct helmholtz F = {0};
            assert_int_equal(
                gas->fluid->ops->tv(gas->at_t, 1.0 / (DELTAS[k] * gas->equation->reducing_density), n, 0, &F),
                ANSWER_OK);
            assert_near(F.F, plain_sum(gas->equation, tau, DELTAS[k]), 1e-12 * fmax(1.0, fabs(F.F)), gas->name);
        }
    }
}

static void regrouped_terms_add_up_to_the_plain_sum(void **state)
{
    (void)state;
    struct subject invented;
    with_each_gas(check_regrouping);
    open_equation(&invented, "invented terms", &INVENTED, 0.04);
    check_regrouping(&invented);
    close_gas(&invented);
}

enum { ALL_WANTS = WANT_F_VV | WANT_F_N | WANT_F_VN | WANT_F_NN | WANT_F_T | WANT_F_TT | WANT_F_TN };
enum { VALUES = 4 };

/* F, F_V, F_T and F_n at (T, V, n), and how each changes with T, V or n. */
static void evaluate(struct subject *gas, const double at[3], double values[VALUES], double slopes[3][VALUES])
{
    double F_n, F_Vn, F_Tn, F_nn;
    struct helmholtz F = {.F_n = &F_n, .F_Vn = &F_Vn, .F_Tn = &F_Tn, .F_nn = &F_nn};
    set_temperature(gas, at[0]);
    assert_int_equal(gas->fluid->ops->tv(gas->at_t, at[1], &at[2], ALL_WANTS, &F), ANSWER_OK);
    const double all[3][VALUES] = {
        {F.F_T, F.F_TV, F.F_TT, F_Tn}, {F.F_V, F.F_VV, F.F_TV, F_Vn}, {F_n, F_Vn, F_Tn, F_nn}};
    values[0] = F.F, values[1] = F.F_V, values[2] = F.F_T, values[3] = F_n;
    for (size_t i = 0; i < 3; i++) {
        for (size_t k = 0; k < VALUES; k++) {
            slopes[i][k] = all[i][k];
        }
    }
}

/* Eighth-order central differences: weights 4/5, -1/5, 4/105, -1/280. */
static void differentiate(struct subject *gas, const double at[3], size_t variable, double slope[VALUES])
{
    static const double weights[] = {4.0 / 5.0, -1.0 / 5.0, 4.0 / 105.0, -1.0 / 280.0};
    const double h = 6e-4 * at[variable];
    for (size_t k = 0; k < VALUES; k++) {
        slope[k] = 0.0;
    }
    for (int offset = -4; offset <= 4; offset++) {
        double values[VALUES], unused[3][VALUES], moved[3] = {at[0], at[1], at[2]};
        if (offset != 0) {
            moved[variable] += offset * h;
            evaluate(gas, moved, values, unused);
            for (size_t k = 0; k < VALUES; k++) {
                slope[k] += (offset > 0 ? 1.0 : -1.0) * weights[abs(offset) - 1] * values[k] / h;
            }
        }
    }
}

static void check_derivatives(struct subject *gas)
{
    static const double REDUCED_T[] = {0.71, 0.93, 1.13, 1.9}, REDUCED_RHO[] = {1e-4, 0.31, 0.88, 1.6, 2.4};
    const struct reference_spec *equation = gas->equation;
    for (size_t i = 0; i < COUNT(REDUCED_T) * COUNT(REDUCED_RHO); i++) {
        const double amount = 1.7, rho = equation->critical_density * REDUCED_RHO[i % COUNT(REDUCED_RHO)];
        const double at[3] = {equation->critical_temperature * REDUCED_T[i / COUNT(REDUCED_RHO)], amount / rho, amount};
        double values[VALUES], analytical[3][VALUES];
        evaluate(gas, at, values, analytical);
        for (size_t variable = 0; variable < 3; variable++) {
            double numerical[VALUES];
            differentiate(gas, at, variable, numerical);
            for (size_t k = 0; k < VALUES; k++) {
                char what[120];
                snprintf(what, sizeof what, "%s, T %g K, rho %g mol/m3, value %zu by %zu, central differences",
                         gas->name, at[0], rho, k, variable);
                /* Relative to the derivative, or to value over argument where the derivative passes near zero. */
                const double scale = fmax(fabs(analytical[variable][k]), fabs(values[k] / at[variable]));
                assert_near(analytical[variable][k], numerical[k], 1e-8 * scale, what);
            }
        }
    }
}

static void derivatives_agree_with_differences(void **state)
{
    (void)state;
    struct subject invented;
    with_each_gas(check_derivatives);
    open_equation(&invented, "invented terms", &INVENTED, 0.04);
    check_derivatives(&invented);
    close_gas(&invented);
}

/* ---- limits ---------------------------------------------------------------------------------------------------- */

static void check_critical_limit(struct subject *gas)
{
    const double Tr = gas->equation->reducing_temperature, V = 1.0 / gas->equation->reducing_density;
    const double exact[3] = {Tr, V, 1.0}, near[3] = {Tr * (1.0 + 3e-9), V * (1.0 - 2e-9), 1.0};
    double at_point[VALUES], beside[VALUES], slopes[3][VALUES];
    evaluate(gas, near, beside, slopes);
    evaluate(gas, exact, at_point, slopes);
    for (size_t k = 0; k < VALUES; k++) {
        assert_near(at_point[k], beside[k], 1e-6 * fabs(beside[k]), gas->name);
        for (size_t i = 0; i < 3; i++) {
            assert_true(isfinite(slopes[i][k]));
        }
    }
    /* On the critical isochore and on the critical isotherm alone. */
    const double isochore[3] = {1.01 * Tr, V, 1.0}, isotherm[3] = {Tr, 0.99 * V, 1.0};
    double numerical[VALUES];
    evaluate(gas, isochore, at_point, slopes);
    differentiate(gas, isochore, 1, numerical);
    assert_near(slopes[1][0], numerical[0], 1e-8 * fabs(numerical[0]), gas->name);
    assert_near(slopes[1][1], numerical[1], 1e-6 * fabs(numerical[1]), gas->name);
    evaluate(gas, isotherm, at_point, slopes);
    differentiate(gas, isotherm, 1, numerical);
    assert_near(slopes[1][0], numerical[0], 1e-8 * fabs(numerical[0]), gas->name);
}

static void nonanalytic_terms_are_finite_and_continuous_at_the_critical_point(void **state)
{
    (void)state;
    struct subject gas;
    open_gas(&gas, "carbon-dioxide");
    check_critical_limit(&gas);
    close_gas(&gas);
    open_gas(&gas, "water");
    check_critical_limit(&gas);
    close_gas(&gas);
}

static void check_dilute_limit(struct subject *gas)
{
    const double unit = gas->equation->reducing_density;
    set_temperature(gas, 0.9 * gas->equation->critical_temperature);
    double second_virial = 0.0;
    for (double delta = 1e-5; delta > 1e-13; delta *= 1e-2) {
        const double V = 1.0 / (delta * unit), n[] = {1.0};
        struct helmholtz F = {0};
        assert_int_equal(gas->fluid->ops->tv(gas->at_t, V, n, WANT_F_VV, &F), ANSWER_OK);
        /* F_V tends to -n^2 B / V^2 and F_VV to 2 n^2 B / V^3. */
        const double B = -F.F_V * V * V;
        assert_close(F.F_VV * V * V * V / 2.0, B, 1e-3, gas->name);
        assert_true(delta > 2e-6 || check_is_close(B, second_virial, 1e-3));
        second_virial = B;
    }
    assert_true(second_virial < 0.0);
}

static void a_vanishing_density_is_an_ideal_gas(void **state)
{
    (void)state;
    with_each_gas(check_dilute_limit);
}

static void check_no_amount(struct subject *gas)
{
    const double none[] = {0.0}, some[] = {1e-9};
    double F_n, F_Vn, F_Tn, F_nn, F_nn_some;
    struct helmholtz F = {.F_n = &F_n, .F_Vn = &F_Vn, .F_Tn = &F_Tn, .F_nn = &F_nn};
    set_temperature(gas, gas->equation->critical_temperature);
    assert_int_equal(gas->fluid->ops->tv(gas->at_t, 1.0, none, ALL_WANTS, &F), ANSWER_OK);
    assert_near(F.F, 0.0, 1e-300, gas->name);
    assert_true(isfinite(F_n) && isfinite(F_Vn) && isfinite(F_Tn));
    F.F_nn = &F_nn_some;
    assert_int_equal(gas->fluid->ops->tv(gas->at_t, 1.0, some, ALL_WANTS, &F), ANSWER_OK);
    assert_close(F_nn, F_nn_some, 1e-6, gas->name);
}

static void derivatives_stay_finite_without_any_amount(void **state)
{
    (void)state;
    with_each_gas(check_no_amount);
}

/* ---- range, critical point, creation ----------------------------------------------------------------------------- */

static void the_published_range_is_kept_side_by_side(void **state)
{
    (void)state;
    struct subject gas;
    open_gas(&gas, "r125");
    const struct {
        double temperature, pressure;
        enum range_side side;
        double limit;
    } cases[] = {
        {300.0, 1e6, RANGE_INSIDE, 0.0},    {172.5, 1e6, RANGE_TOO_COLD, 172.52},
        {500.1, 1e6, RANGE_TOO_HOT, 500.0}, {300.0, 6.1e7, RANGE_TOO_HIGH_PRESSURE, 6e7},
        {172.52, 6e7, RANGE_INSIDE, 0.0},   {(double)NAN, 1e6, RANGE_TOO_COLD, 172.52},
    };
    for (size_t i = 0; i < COUNT(cases); i++) {
        const struct range_note note = gas.fluid->ops->range(gas.fluid, cases[i].temperature, cases[i].pressure);
        assert_int_equal(note.side, cases[i].side);
        assert_near(note.limit, cases[i].limit, 1e-12, "Lemmon and Jacobsen 2005: 172.52 to 500 K, to 60 MPa");
    }
    close_gas(&gas);
}

static void check_critical_point(struct subject *gas)
{
    struct critical_point point;
    const double n[] = {1.0}, R = gas->fluid->gas_constant;
    struct phase phase = {0};
    assert_int_equal(gas->fluid->ops->critical(gas->fluid, &point), ANSWER_OK);
    set_temperature(gas, point.temperature);
    assert_int_equal(phase_tv(gas->at_t, point.molar_volume, n, 0, &phase), ANSWER_OK);
    /* 1e-5: water's and carbon dioxide's are the papers' rounded constants. */
    assert_close(phase.pressure, point.pressure, 1e-5, gas->name);
    assert_near(phase.dp_dv * point.molar_volume * point.molar_volume / (R * point.temperature), 0.0, 1e-4, gas->name);
}

static void the_critical_point_is_the_equations_own(void **state)
{
    (void)state;
    with_each_gas(check_critical_point);
}

static void creation_tells_what_is_missing(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct pure_spec bare = {.name = "bare", .molar_mass = 0.03};
    const struct pure_spec *const list[] = {&bare, &bare};
    const struct fluid_spec alone = {.count = 1, .pure = list}, mixed = {.count = 2, .pure = list};
    struct fluid_lack_report lack;
    assert_null(fluid_create("reference", &alone, arena, &lack));
    assert_int_equal(lack.lack, LACK_EQUATION);
    assert_null(fluid_create("reference", &mixed, arena, &lack));
    assert_int_equal(lack.lack, LACK_MIXTURE);
    arena_free(arena);
}

static void caloric_values_need_ideal_terms_and_a_stable_phase(void **state)
{
    (void)state;
    struct reference_spec bare = *reference_gas("propane")->equation;
    struct subject gas;
    struct caloric caloric;
    bare.ideal_count = 0;
    open_equation(&gas, "propane without ideal terms", &bare, 0.04409562);
    set_temperature(&gas, 300.0);
    assert_int_equal(caloric_at_volume(gas.at_t, 1e-3, (const double[]){1.0}, &caloric), ANSWER_CANNOT);
    close_gas(&gas);
    open_gas(&gas, "propane");
    set_temperature(&gas, 300.0);
    /* Between the spinodals. */
    assert_int_equal(caloric_at_volume(gas.at_t, 3e-4, (const double[]){1.0}, &caloric), ANSWER_OUT_OF_RANGE);
    assert_int_equal(caloric_at_volume(gas.at_t, 0.0, (const double[]){1.0}, &caloric), ANSWER_OUT_OF_RANGE);
    close_gas(&gas);
}

/* dh = T ds + v dp along the saturation line's two sides: h_V - h_L = T (s_V - s_L). */
static void check_heat_of_vaporisation(struct subject *gas)
{
    struct saturation saturation;
    struct caloric vapour, liquid;
    const double T = 0.83 * gas->equation->critical_temperature;
    set_temperature(gas, T);
    assert_int_equal(saturation_at_t(gas->at_t, &saturation), ANSWER_OK);
    assert_int_equal(caloric_at_volume(gas->at_t, saturation.vapour_volume, (const double[]){1.0}, &vapour), ANSWER_OK);
    assert_int_equal(caloric_at_volume(gas->at_t, saturation.liquid_volume, (const double[]){1.0}, &liquid), ANSWER_OK);
    assert_close(vapour.enthalpy - liquid.enthalpy, T * (vapour.entropy - liquid.entropy), 1e-9, gas->name);
}

static void heat_and_entropy_of_vaporisation_belong_together(void **state)
{
    (void)state;
    with_each_gas(check_heat_of_vaporisation);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(carried_gases_agree_with_an_independent_evaluation),
        cmocka_unit_test(the_derivatives_of_water_are_the_published_ones),
        cmocka_unit_test(single_phase_states_are_the_published_ones),
        cmocka_unit_test(saturation_is_the_published_one),
        cmocka_unit_test(regrouped_terms_add_up_to_the_plain_sum),
        cmocka_unit_test(derivatives_agree_with_differences),
        cmocka_unit_test(nonanalytic_terms_are_finite_and_continuous_at_the_critical_point),
        cmocka_unit_test(a_vanishing_density_is_an_ideal_gas),
        cmocka_unit_test(derivatives_stay_finite_without_any_amount),
        cmocka_unit_test(the_published_range_is_kept_side_by_side),
        cmocka_unit_test(the_critical_point_is_the_equations_own),
        cmocka_unit_test(creation_tells_what_is_missing),
        cmocka_unit_test(caloric_values_need_ideal_terms_and_a_stable_phase),
        cmocka_unit_test(heat_and_entropy_of_vaporisation_belong_together),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
