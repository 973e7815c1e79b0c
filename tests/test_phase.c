/* Phase properties by every method: derivatives against differences, the thermodynamic identities, and the answers at
 * the edges. */
#include "fluid/phase.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { MOST = SAMPLE_MOST };
enum {
    ALL_WANTS = PHASE_LN_PHI | PHASE_DLN_PHI_DP | PHASE_DLN_PHI_DT | PHASE_DLN_PHI_DN | PHASE_DP_DN | PHASE_RESIDUAL |
                PHASE_LN_F
};

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Dilute, dense gas and liquid-like: T in K, p in Pa. */
static const struct {
    double T, p;
} STATES[] = {{457.0, 2.3e5}, {343.0, 1.7e6}, {311.0, 4.1e7}, {231.0, 6.3e6}, {571.0, 1.9e8}};

struct subject {
    const char *name;
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    double T, p, n[MOST];
    struct phase *phase;
};

static void evaluate(const struct subject *subject, struct phase *out)
{
    assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, subject->T), ANSWER_OK);
    assert_int_equal(phase_tp(subject->at_t, subject->p, subject->n, BRANCH_STABLE, ALL_WANTS, out), ANSWER_OK);
}

/* For gases alone, or with a liquid and a thin vapour and nothing between. */
static bool has_no_dense_gas(const struct fluid_ops *ops)
{
    return (ops->capabilities & CAN_LIQUID) == 0 || strcmp(ops->name, "poynting") == 0;
}

/* Such a method may refuse what is too dense for it; the first state never is. */
static bool is_refused(const struct subject *subject)
{
    assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, subject->T), ANSWER_OK);
    return has_no_dense_gas(subject->fluid->ops) && subject->p > STATES[0].p &&
           phase_tp(subject->at_t, subject->p, subject->n, BRANCH_STABLE, 0, subject->phase) == ANSWER_OUT_OF_RANGE;
}

static void for_each_state(void (*check)(struct subject *subject, struct arena *arena))
{
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        struct subject subject = {.name = sample->name, .fluid = sample_fluid_create(sample, arena)};
        subject.at_t = fluid_at_t_create(subject.fluid, arena);
        subject.phase = phase_create(sample->count, arena);
        for (size_t s = 0; s < COUNT(STATES); s++) {
            subject.T = STATES[s].T;
            subject.p = STATES[s].p;
            memcpy(subject.n, sample->n, sizeof subject.n);
            if (is_refused(&subject)) {
                continue;
            }
            evaluate(&subject, subject.phase);
            check(&subject, arena);
        }
    }
    arena_free(arena);
}

/* ---- derivatives ----------------------------------------------------------------------------------------------- */

struct differences {
    double ln_phi[MOST], enthalpy, entropy; /* of H / R and S / R */
};

/* By (45 (f1 - f-1) - 9 (f2 - f-2) + (f3 - f-3)) / 60 h. */
static struct differences differentiate(struct subject *subject, double *x, struct phase *work)
{
    static const double weight[] = {45.0 / 60.0, -9.0 / 60.0, 1.0 / 60.0};
    const double at = *x, h = 1e-3 * at;
    struct differences sum = {.enthalpy = 0.0};
    for (int offset = -3; offset <= 3; offset++) {
        if (offset != 0) {
            *x = at + offset * h;
            evaluate(subject, work);
            const double w = (offset > 0 ? 1.0 : -1.0) * weight[abs(offset) - 1] / h;
            for (size_t i = 0; i < subject->fluid->count; i++) {
                sum.ln_phi[i] += w * work->ln_phi[i];
            }
            sum.enthalpy += w * work->residual_enthalpy_rt * subject->T;
            sum.entropy += w * work->residual_entropy_r;
        }
    }
    *x = at;
    return sum;
}

static void derivatives_agree(struct subject *subject, struct arena *arena)
{
    const struct phase *phase = subject->phase;
    struct phase *work = phase_create(subject->fluid->count, arena);
    const size_t count = subject->fluid->count;
    const struct differences by_p = differentiate(subject, &subject->p, work);
    const struct differences by_T = differentiate(subject, &subject->T, work);
    assert_near(phase->residual_heat_capacity_r, by_T.enthalpy, 1e-8 * (1.0 + fabs(by_T.enthalpy)), subject->name);
    assert_near(phase->residual_heat_capacity_r, by_T.entropy * subject->T, 1e-8 * (1.0 + fabs(by_T.enthalpy)),
                "dS/dT = cp / T");
    /* (dS/dp)_T = -(dV/dT)_p; of the ideal gas both are R / p. */
    const double swelling = -phase->dp_dt / phase->dp_dv / (phase->amount * subject->fluid->gas_constant);
    assert_near(by_p.entropy * subject->p, 1.0 - swelling * subject->p, 1e-8 * (1.0 + fabs(by_p.entropy * subject->p)),
                "Maxwell, S and V");
    for (size_t i = 0; i < count; i++) {
        const double scale = 1.0 + fabs(phase->ln_phi[i]);
        assert_near(phase->dln_phi_dp[i] * subject->p, by_p.ln_phi[i] * subject->p, 1e-9 * scale, subject->name);
        assert_near(phase->dln_phi_dt[i] * subject->T, by_T.ln_phi[i] * subject->T, 1e-8 * scale, subject->name);
    }
    for (size_t j = 0; j < count; j++) {
        const struct differences by_n = differentiate(subject, &subject->n[j], work);
        for (size_t i = 0; i < count; i++) {
            const double scale = (1.0 + fabs(phase->ln_phi[i])) / subject->n[j];
            assert_near(phase->dln_phi_dn[i * count + j], by_n.ln_phi[i], 1e-9 * scale, subject->name);
        }
    }
}

static void derivatives_at_constant_pressure_agree_with_differences(void **state)
{
    (void)state;
    for_each_state(derivatives_agree);
}

/* dp/dV, dp/dT and dp/dn at constant volume, by differences of order two extrapolated once. */
static double pressure_difference(struct subject *subject, double *x, double *volume, struct phase *work)
{
    const double at = *x;
    double slope[2];
    for (int k = 0; k < 2; k++) {
        const double h = (k + 1) * 2e-4 * at;
        double p[2];
        for (int side = 0; side < 2; side++) {
            *x = at + (side == 0 ? -h : h);
            assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, subject->T), ANSWER_OK);
            assert_int_equal(phase_tv(subject->at_t, *volume, subject->n, 0, work), ANSWER_OK);
            p[side] = work->pressure;
        }
        slope[k] = (p[1] - p[0]) / (2.0 * h);
    }
    *x = at;
    return (4.0 * slope[0] - slope[1]) / 3.0;
}

static void pressure_derivatives_agree(struct subject *subject, struct arena *arena)
{
    const struct phase *phase = subject->phase;
    struct phase *work = phase_create(subject->fluid->count, arena);
    double volume = phase->volume;
    const double by_V = pressure_difference(subject, &volume, &volume, work);
    assert_close(phase->dp_dv, by_V, 1e-8, subject->name);
    assert_close(phase->dp_dt, pressure_difference(subject, &subject->T, &volume, work), 1e-8, subject->name);
    for (size_t i = 0; i < subject->fluid->count; i++) {
        const double by_n = pressure_difference(subject, &subject->n[i], &volume, work);
        const double scale = fabs(phase->dp_dv) * volume / phase->amount;
        assert_near(phase->dp_dn[i], by_n, 1e-8 * (fabs(by_n) + scale), subject->name);
    }
}

static void derivatives_of_pressure_agree_with_differences(void **state)
{
    (void)state;
    for_each_state(pressure_derivatives_agree);
}

/* ---- identities ------------------------------------------------------------------------------------------------ */

/* dln phi_i/dp = V_i / R T - 1 / p with the partial volume V_i = (dV/dn_i) of the pressure's own derivatives, which is
 * dmu_i/dp = dV/dn_i; Euler: sum n_i V_i = V. */
static void partial_volumes_agree(const struct subject *subject)
{
    const struct phase *phase = subject->phase;
    const double RT = subject->fluid->gas_constant * subject->T, p = subject->p;
    double sum = 0.0, size = 0.0;
    for (size_t i = 0; i < subject->fluid->count; i++) {
        const double partial = -phase->dp_dn[i] / phase->dp_dv;
        const double reduced = partial * p / RT;
        assert_near(phase->dln_phi_dp[i] * p, reduced - 1.0, 1e-12 * (1.0 + fabs(reduced)), "Maxwell, mu and V");
        sum += subject->n[i] * partial;
        size += fabs(subject->n[i] * partial);
    }
    assert_near(sum, phase->volume, 1e-12 * size, "Euler, sum n_i V_i = V");
}

static void identities_hold(struct subject *subject, struct arena *arena)
{
    (void)arena;
    const struct phase *phase = subject->phase;
    const size_t count = subject->fluid->count;
    const double n = phase->amount, T = subject->T;
    double gibbs = 0.0, enthalpy = 0.0, volume = 0.0;
    for (size_t i = 0; i < count; i++) {
        const double x = subject->n[i] / n;
        gibbs += x * phase->ln_phi[i];
        enthalpy -= x * phase->dln_phi_dt[i] * T;
        volume += x * phase->dln_phi_dp[i] * subject->p;
        assert_near(phase->ln_f_over_x[i], phase->ln_phi[i] + log(subject->p), 1e-11, "ln f by definition");
        double duhem = 0.0, size = 0.0;
        for (size_t j = 0; j < count; j++) {
            const double a = phase->dln_phi_dn[i * count + j], b = phase->dln_phi_dn[j * count + i];
            assert_near(a, b, 1e-13 * (fabs(a) + 1.0 / n), "second derivatives are symmetric");
            duhem += subject->n[j] * b;
            size += fabs(subject->n[j] * b) + 1.0;
        }
        assert_near(duhem, 0.0, 1e-12 * size, "Gibbs and Duhem");
    }
    assert_near(gibbs, phase->residual_enthalpy_rt - phase->residual_entropy_r, 1e-11, "G = H - T S");
    assert_near(enthalpy, phase->residual_enthalpy_rt, 1e-11, "Gibbs and Helmholtz");
    assert_near(volume, phase->Z - 1.0, 1e-11, "d(sum x ln phi)/dp = (Z - 1) / p");
    partial_volumes_agree(subject);
}

static void thermodynamic_identities_hold(void **state)
{
    (void)state;
    for_each_state(identities_hold);
}

static void the_volume_form_agrees(struct subject *subject, struct arena *arena)
{
    const struct phase *phase = subject->phase;
    struct phase *by_volume = phase_create(subject->fluid->count, arena);
    assert_int_equal(phase_tv(subject->at_t, phase->volume, subject->n, ALL_WANTS, by_volume), ANSWER_OK);
    assert_close(by_volume->pressure, subject->p, 1e-12, subject->name);
    assert_int_equal(by_volume->roots, 0);
    assert_true(phase->roots >= 1);
    for (size_t i = 0; i < subject->fluid->count; i++) {
        assert_near(by_volume->ln_phi[i], phase->ln_phi[i], 1e-11, subject->name);
    }
}

static void temperature_and_volume_give_back_the_pressure(void **state)
{
    (void)state;
    for_each_state(the_volume_form_agrees);
}

/* A new method is tested by a row of SAMPLE_FLUIDS, and has one for mixtures too where it takes them. */
static void every_method_has_a_row(void **state)
{
    (void)state;
    for (const struct fluid_ops *const *method = fluid_methods(); *method != NULL; method++) {
        size_t pure = 0, mixed = 0;
        for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
            if (strcmp(SAMPLE_FLUIDS[k].method, (*method)->name) == 0) {
                *(SAMPLE_FLUIDS[k].count == 1 ? &pure : &mixed) += 1;
            }
        }
        if (pure + mixed == 0 || (((*method)->capabilities & CAN_MIXTURE) != 0 && mixed == 0)) {
            fail_msg("%s has no row of SAMPLE_FLUIDS, or none for a mixture", (*method)->name);
        }
    }
}

static void at_vanishing_pressure_every_method_is_the_ideal_gas(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        const struct fluid *fluid = sample_fluid_create(sample, arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 293.0, arena);
        struct phase *phase = phase_create(sample->count, arena);
        assert_int_equal(phase_tp(at_t, 1e-3, sample->n, BRANCH_VAPOUR, ALL_WANTS, phase), ANSWER_OK);
        assert_near(phase->Z - 1.0, 0.0, 1e-9, sample->name);
        for (size_t i = 0; i < sample->count; i++) {
            assert_near(phase->ln_phi[i], 0.0, 1e-9, sample->name);
        }
    }
    arena_free(arena);
}

/* ---- edges ----------------------------------------------------------------------------------------------------- */

static void infinite_dilution_is_finite_and_continuous(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        if (sample->count > 1) {
            const struct fluid *fluid = sample_fluid_create(sample, arena);
            struct fluid_at_t *at_t = sample_at_t(fluid, 271.0, arena);
            struct phase *none = phase_create(sample->count, arena), *trace = phase_create(sample->count, arena);
            double n[MOST];
            memcpy(n, sample->n, sizeof n);
            n[1] = 0.0;
            const double p = (fluid->ops->capabilities & CAN_LIQUID) != 0 ? 2.9e6 : 3e5;
            assert_int_equal(phase_tp(at_t, p, n, BRANCH_STABLE, ALL_WANTS, none), ANSWER_OK);
            n[1] = 1e-11;
            assert_int_equal(phase_tp(at_t, p, n, BRANCH_STABLE, ALL_WANTS, trace), ANSWER_OK);
            for (size_t i = 0; i < sample->count; i++) {
                assert_near(none->ln_phi[i], trace->ln_phi[i], 1e-9, sample->name);
            }
        }
    }
    arena_free(arena);
}

static void without_wants_no_array_is_touched(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        const struct fluid *fluid = sample_fluid_create(sample, arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 411.0, arena);
        struct phase phase = {.ln_phi = NULL};
        assert_int_equal(phase_tp(at_t, 1.1e6, sample->n, BRANCH_VAPOUR, 0, &phase), ANSWER_OK);
        assert_true(phase.dp_dv < 0.0);
        assert_int_equal(phase_tv(at_t, phase.volume, sample->n, 0, &phase), ANSWER_OK);
        double ln_f[MOST];
        phase.ln_f_over_x = ln_f;
        assert_int_equal(phase_tv(at_t, phase.volume, sample->n, PHASE_LN_F, &phase), ANSWER_OK);
    }
    arena_free(arena);
}

static void impossible_pressures_volumes_and_temperatures_are_out_of_range(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double odd[] = {0.0, -1.0, (double)NAN, (double)INFINITY};
    for (size_t k = 0; k < SAMPLE_FLUIDS_COUNT; k++) {
        const struct sample_fluid *sample = &SAMPLE_FLUIDS[k];
        const struct fluid *fluid = sample_fluid_create(sample, arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 411.0, arena);
        struct phase phase = {.ln_phi = NULL};
        for (size_t i = 0; i < COUNT(odd); i++) {
            assert_int_equal(phase_tp(at_t, odd[i], sample->n, BRANCH_STABLE, 0, &phase), ANSWER_OUT_OF_RANGE);
            assert_int_equal(phase_tv(at_t, odd[i], sample->n, 0, &phase), ANSWER_OUT_OF_RANGE);
            assert_int_equal(fluid_set_t(at_t, fluid, odd[i]), ANSWER_OUT_OF_RANGE);
        }
        fluid_set_t(at_t, fluid, 411.0);
        const double smallest = phase_smallest_volume(at_t, sample->n);
        assert_true(smallest >= 0.0);
        assert_int_equal(phase_tv(at_t, smallest, sample->n, 0, &phase), ANSWER_OUT_OF_RANGE);
    }
    arena_free(arena);
}

static void a_negative_pressure_has_a_fugacity_but_no_coefficient(void **state)
{
    (void)state;
    static const char *const methods[] = {"peng-robinson", "soave-redlich-kwong", "reference"};
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct fluid *fluid = sample_pure(methods[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 231.0, arena);
        const double n[] = {1.0};
        struct pure_arrays arrays;
        struct phase phase;
        phase_of_pure(&phase, &arrays);
        /* The saturated liquid takes 7.6e-5 m3/mol at its boiling point. */
        assert_int_equal(phase_tv(at_t, 9.0e-5, n, PHASE_LN_F, &phase), ANSWER_OK);
        assert_true(phase.pressure < 0.0);
        assert_true(isfinite(arrays.ln_f_over_x));
        assert_int_equal(phase_tv(at_t, 9.0e-5, n, PHASE_LN_PHI, &phase), ANSWER_OUT_OF_RANGE);
        assert_int_equal(phase_tv(at_t, 9.0e-5, n, PHASE_RESIDUAL, &phase), ANSWER_OUT_OF_RANGE);
    }
    arena_free(arena);
}

static void both_branches_exist_between_the_spinodals_only(void **state)
{
    (void)state;
    static const char *const methods[] = {"peng-robinson", "soave-redlich-kwong", "reference"};
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct fluid *fluid = sample_pure(methods[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 345.0, arena);
        struct phase vapour = {.ln_phi = NULL}, liquid = vapour;
        assert_int_equal(phase_tp(at_t, 2.6e6, n, BRANCH_VAPOUR, 0, &vapour), ANSWER_OK);
        assert_int_equal(phase_tp(at_t, 2.6e6, n, BRANCH_LIQUID, 0, &liquid), ANSWER_OK);
        assert_true(vapour.volume > 2.0 * liquid.volume);
        assert_true(vapour.dp_dv < 0.0 && liquid.dp_dv < 0.0);
        assert_int_equal(phase_tp(at_t, 2e5, n, BRANCH_LIQUID, 0, &liquid), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(phase_tp(at_t, 9e6, n, BRANCH_VAPOUR, 0, &vapour), ANSWER_NO_SUCH_ROOT);
    }
    arena_free(arena);
}

static void a_supercritical_isotherm_has_one_root_on_both_branches(void **state)
{
    (void)state;
    static const char *const methods[] = {"peng-robinson", "soave-redlich-kwong", "reference"};
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct fluid *fluid = sample_pure(methods[k], &SAMPLE_SUBSTANCE[PROPANE], arena);
        struct fluid_at_t *at_t = sample_at_t(fluid, 391.0, arena);
        for (double p = 1e4; p < 2e8; p *= 3.0) {
            struct phase vapour = {.ln_phi = NULL}, liquid = vapour;
            assert_int_equal(phase_tp(at_t, p, n, BRANCH_VAPOUR, 0, &vapour), ANSWER_OK);
            assert_int_equal(phase_tp(at_t, p, n, BRANCH_LIQUID, 0, &liquid), ANSWER_OK);
            assert_close(vapour.volume, liquid.volume, 1e-12, methods[k]);
            assert_int_equal(vapour.roots, 1);
        }
    }
    arena_free(arena);
}

/* ---- choosing a method ----------------------------------------------------------------------------------------- */

static void every_method_is_found_by_its_name(void **state)
{
    (void)state;
    size_t count = 0;
    for (const struct fluid_ops *const *method = fluid_methods(); *method != NULL; method++, count++) {
        assert_ptr_equal(fluid_method((*method)->name), *method);
        assert_non_null((*method)->title);
    }
    assert_true(count >= 4);
    assert_null(fluid_method("peng"));
}

static void a_fluid_that_cannot_be_made_says_what_it_lacks(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct pure_spec bare = {.name = "bare", .molar_mass = 0.031};
    struct pure_spec critical = SAMPLE_SUBSTANCE[PROPANE];
    critical.acentric.given = false;
    critical.reference = NULL;
    const struct pure_spec *both[] = {&SAMPLE_SUBSTANCE[PROPANE], &bare};
    const struct pure_spec *second[] = {&SAMPLE_SUBSTANCE[PROPANE], &critical};
    const struct fluid_spec lacks_critical = {.count = 2, .pure = both}, lacks_acentric = {.count = 2, .pure = second};
    const struct fluid_spec lacks_equation = {.count = 1, .pure = &second[1]};
    const struct {
        const char *method;
        const struct fluid_spec *spec;
        enum fluid_lack lack;
        size_t component;
    } cases[] = {
        {"no-such-method", &lacks_acentric, LACK_METHOD, 0},
        {"peng-robinson", &lacks_critical, LACK_CRITICAL_POINT, 1},
        {"soave-redlich-kwong", &lacks_acentric, LACK_ACENTRIC, 1},
        {"reference", &lacks_acentric, LACK_MIXTURE, 0},
        {"reference", &lacks_equation, LACK_EQUATION, 0},
        {"van-der-waals", &lacks_critical, LACK_CRITICAL_POINT, 1},
        {"peng-robinson-twu", &lacks_critical, LACK_PARAMETERS, 1},
        {"quantum-peng-robinson", &lacks_acentric, LACK_PARAMETERS, 0},
    };
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct fluid_lack_report report;
        assert_null(fluid_create(cases[k].method, cases[k].spec, arena, &report));
        assert_int_equal(report.lack, cases[k].lack);
        assert_int_equal(report.component, cases[k].component);
    }
    arena_free(arena);
}

/* ---- a method explicit in T and p ------------------------------------------------------------------------------ */

/* Z = 1 + B p / (R T) with one invented B, so ln phi = B p / (R T). */
#define SECOND_VIRIAL (-1.7e-4)

static enum answer virial_tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                             struct explicit_phase *out)
{
    (void)n;
    if (branch == BRANCH_LIQUID) {
        return ANSWER_NO_SUCH_ROOT;
    }
    const double reduced = SECOND_VIRIAL * pressure / (at_t->fluid->gas_constant * at_t->temperature);
    out->Z = 1.0 + reduced;
    if (out->ln_phi != NULL) {
        out->ln_phi[0] = reduced;
    }
    return ANSWER_OK;
}

static void a_method_in_temperature_and_pressure_answers_what_it_can(void **state)
{
    (void)state;
    const struct fluid_ops ops = {.name = "virial", .form = FLUID_FROM_TP, .tp = virial_tp};
    const struct fluid fluid = {.ops = &ops, .count = 1, .gas_constant = GAS_CONSTANT};
    const struct fluid_at_t at_t = {.fluid = &fluid, .temperature = 300.0};
    const double n[] = {1.3}, p = 7e5, RT = GAS_CONSTANT * 300.0;
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    assert_int_equal(phase_tp(&at_t, p, n, BRANCH_VAPOUR, PHASE_LN_PHI | PHASE_LN_F, &phase), ANSWER_OK);
    assert_close(phase.volume, n[0] * (RT / p + SECOND_VIRIAL), 1e-14, "closed form");
    assert_close(arrays.ln_phi, SECOND_VIRIAL * p / RT, 1e-14, "closed form");
    assert_close(arrays.ln_f_over_x, SECOND_VIRIAL * p / RT + log(p), 1e-14, "closed form");
    assert_int_equal(phase_tp(&at_t, p, n, BRANCH_LIQUID, 0, &phase), ANSWER_NO_SUCH_ROOT);
    assert_int_equal(phase_tp(&at_t, p, n, BRANCH_VAPOUR, PHASE_RESIDUAL, &phase), ANSWER_CANNOT);
    assert_int_equal(phase_tv(&at_t, 1.0, n, 0, &phase), ANSWER_CANNOT);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(derivatives_at_constant_pressure_agree_with_differences),
        cmocka_unit_test(derivatives_of_pressure_agree_with_differences),
        cmocka_unit_test(thermodynamic_identities_hold),
        cmocka_unit_test(every_method_has_a_row),
        cmocka_unit_test(temperature_and_volume_give_back_the_pressure),
        cmocka_unit_test(at_vanishing_pressure_every_method_is_the_ideal_gas),
        cmocka_unit_test(infinite_dilution_is_finite_and_continuous),
        cmocka_unit_test(without_wants_no_array_is_touched),
        cmocka_unit_test(impossible_pressures_volumes_and_temperatures_are_out_of_range),
        cmocka_unit_test(a_negative_pressure_has_a_fugacity_but_no_coefficient),
        cmocka_unit_test(both_branches_exist_between_the_spinodals_only),
        cmocka_unit_test(a_supercritical_isotherm_has_one_root_on_both_branches),
        cmocka_unit_test(every_method_is_found_by_its_name),
        cmocka_unit_test(a_fluid_that_cannot_be_made_says_what_it_lacks),
        cmocka_unit_test(a_method_in_temperature_and_pressure_answers_what_it_can),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
