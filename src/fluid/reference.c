/* `reference`: a pure gas by its published multiparameter equation of state.
 *
 *   p = rho R T (1 + delta dalphar/ddelta),  F = n alphar(tau, delta),  tau = T_r / T,  delta = n / (V rho_r)
 *
 * with the terms in reference_residual.c, roots in reference_roots.c, the saturation table in reference_table.c. */
#include "fluid/methods_internal.h"
#include "fluid/reference_explain.h"
#include "fluid/reference_internal.h"

#include <math.h>

/* Stands for no amount at all where a derivative is divided by the amount. */
#define LEAST_DELTA 1e-150

static const struct reference_at_t *at_t_of(const struct fluid_at_t *at_t)
{
    return (const struct reference_at_t *)(const void *)at_t;
}

static const struct reference *fluid_of(const struct fluid *fluid)
{
    return (const struct reference *)(const void *)fluid;
}

size_t reference_at_t_bytes(const struct reference *reference)
{
    return sizeof(struct reference_at_t) + residual_at_t_size(reference->residual);
}

void reference_set_temperature(struct reference_at_t *at_t, const struct reference *reference, double temperature)
{
    *at_t = (struct reference_at_t){.head = {.fluid = &reference->head, .temperature = temperature}};
    residual_set_tau((struct residual_at_t *)(void *)(at_t + 1), reference->residual,
                     reference->equation->reducing_temperature / temperature);
}

struct reference_spot reference_spot_at(const struct reference_at_t *at_t, double density)
{
    const struct reference *reference = reference_of(at_t);
    struct residual_sums sums;
    residual_by_density(reference_residual_at(at_t), reference->residual,
                        density / reference->equation->reducing_density, &sums);
    return (struct reference_spot){
        .density = density,
        .pressure = density * reference->head.gas_constant * at_t->head.temperature * (1.0 + sums.d),
        .stiffness = 1.0 + 2.0 * sums.d + sums.dd,
        .log_activity = sums.value + sums.d,
    };
}

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    *lack = (struct fluid_lack_report){LACK_NOTHING, 0};
    if (spec->count != 1) {
        lack->lack = LACK_MIXTURE;
        return NULL;
    }
    const struct reference_spec *equation = spec->pure[0]->reference;
    if (equation == NULL) {
        lack->lack = LACK_EQUATION;
        return NULL;
    }
    struct reference *reference = arena_alloc(arena, 1, sizeof *reference);
    reference->head = (struct fluid){&reference_ops, spec, 1, equation->gas_constant};
    reference->equation = equation;
    reference->residual = residual_create(equation, arena);
    reference_fill_table(reference, arena_alloc(arena, 1, reference_at_t_bytes(reference)));
    return &reference->head;
}

static size_t at_t_size(const struct fluid *fluid)
{
    return reference_at_t_bytes(fluid_of(fluid));
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    struct reference_at_t *state = (struct reference_at_t *)(void *)at_t;
    const struct reference *reference = fluid_of(at_t->fluid);
    reference_set_temperature(state, reference, at_t->temperature);
    state->largest_density = reference_largest_density(reference, at_t->temperature);
    return ANSWER_OK;
}

/* The derivatives in temperature, with dtau/dT = -tau/T. */
static void put_thermal(const struct residual_sums *sums, double amount, double volume, double temperature,
                        unsigned want, struct helmholtz *out)
{
    if (want & WANT_F_T) {
        out->F_T = -amount * sums->t / temperature;
        out->F_TV = amount * sums->dt / (volume * temperature);
    }
    if (want & WANT_F_TT) {
        out->F_TT = amount * (2.0 * sums->t + sums->tt) / (temperature * temperature);
    }
    if (want & WANT_F_TN) {
        out->F_Tn[0] = -(sums->t + sums->dt) / temperature;
    }
}

static enum answer tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                      struct helmholtz *out)
{
    if (!(volume > 0.0) || !(n[0] >= 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const struct reference *reference = fluid_of(at_t->fluid);
    const struct residual_at_t *residual_at_t = reference_residual_at(at_t_of(at_t));
    const double unit = volume * reference->equation->reducing_density;
    const double delta = fmax(n[0] / unit, LEAST_DELTA);
    struct residual_sums sums;
    if (want & (WANT_F_T | WANT_F_TT | WANT_F_TN)) {
        residual_by_both(residual_at_t, reference->residual, delta, &sums);
        put_thermal(&sums, n[0], volume, at_t->temperature, want, out);
    } else {
        residual_by_density(residual_at_t, reference->residual, delta, &sums);
    }
    const double curvature = 2.0 * sums.d + sums.dd;
    out->F = n[0] * sums.value;
    out->F_V = -n[0] * sums.d / volume;
    if (want & WANT_F_VV) {
        out->F_VV = n[0] * curvature / (volume * volume);
    }
    if (want & WANT_F_N) {
        out->F_n[0] = sums.value + sums.d;
    }
    if (want & WANT_F_VN) {
        out->F_Vn[0] = -curvature / volume;
    }
    if (want & WANT_F_NN) {
        out->F_nn[0] = curvature / (delta * unit);
    }
    return isfinite(sums.value) && isfinite(curvature) ? ANSWER_OK : ANSWER_FAILED;
}

static double smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    return n[0] / at_t_of(at_t)->largest_density;
}

static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    const struct reference_spec *equation = fluid_of(fluid)->equation;
    if (!(temperature >= equation->smallest_temperature * (1.0 - TEMPERATURE_ROUNDING))) {
        return (struct range_note){RANGE_TOO_COLD, equation->smallest_temperature};
    }
    if (!(temperature <= equation->largest_temperature)) {
        return (struct range_note){RANGE_TOO_HOT, equation->largest_temperature};
    }
    if (!(pressure <= equation->largest_pressure)) {
        return (struct range_note){RANGE_TOO_HIGH_PRESSURE, equation->largest_pressure};
    }
    return (struct range_note){RANGE_INSIDE, 0.0};
}

static enum answer critical(const struct fluid *fluid, struct critical_point *out)
{
    const struct reference_spec *equation = fluid_of(fluid)->equation;
    *out = (struct critical_point){equation->critical_temperature, equation->critical_pressure,
                                   1.0 / equation->critical_density};
    return ANSWER_OK;
}

static enum answer saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    const struct reference *reference = fluid_of(at_t->fluid);
    if (!(at_t->temperature < reference->equation->critical_temperature)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    struct reference_pair pair;
    if (!reference_pair_at(reference, at_t->temperature, &pair)) {
        return ANSWER_FAILED;
    }
    *out = (struct saturation_start){pair.pressure, 1.0 / pair.vapour_density, 1.0 / pair.liquid_density};
    return ANSWER_OK;
}

static const struct reference_spec *ideal_of(const struct fluid *fluid, size_t i, double *scale)
{
    (void)i;
    *scale = 1.0;
    return ((const struct reference *)(const void *)fluid)->equation;
}

const struct fluid_ops reference_ops = {
    .name = "reference",
    .title = "multiparameter Helmholtz equation of state",
    .form = FLUID_FROM_TV,
    .capabilities = CAN_LIQUID | CAN_CALORIC,
    .create = create,
    .at_t_size = at_t_size,
    .set_t = set_t,
    .tv = tv,
    .volume = reference_volume,
    .smallest_volume = smallest_volume,
    .range = range,
    .critical = critical,
    .saturation_start = saturation_start,
    .explain = reference_explain,
    .ideal_of = ideal_of,
};
