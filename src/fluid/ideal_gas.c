/* The ideal gas: no residual Helmholtz energy at all. It is the limit every other method is tested against, and the
 * usual substitute whose error the listings show. */
#include "fluid/explanation.h"
#include "fluid/methods_internal.h"

#include <string.h>

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    (void)lack;
    struct fluid *fluid = arena_alloc(arena, 1, sizeof *fluid);
    fluid->ops = &ideal_gas_ops;
    fluid->spec = spec;
    fluid->count = spec->count;
    fluid->gas_constant = GAS_CONSTANT;
    return fluid;
}

static size_t at_t_size(const struct fluid *fluid)
{
    (void)fluid;
    return sizeof(struct fluid_at_t);
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    (void)at_t;
    return ANSWER_OK;
}

static void clear(double *values, size_t count, bool wanted)
{
    if (wanted) {
        memset(values, 0, count * sizeof *values);
    }
}

static enum answer tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                      struct helmholtz *out)
{
    (void)n;
    if (!(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const size_t count = at_t->fluid->count;
    out->F = out->F_V = out->F_VV = out->F_T = out->F_TV = out->F_TT = 0.0;
    clear(out->F_n, count, (want & WANT_F_N) != 0);
    clear(out->F_Vn, count, (want & WANT_F_VN) != 0);
    clear(out->F_Tn, count, (want & WANT_F_TN) != 0);
    clear(out->F_nn, count * count, (want & WANT_F_NN) != 0);
    return ANSWER_OK;
}

static enum answer volume_at(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                             double *volume, int *roots)
{
    const struct fluid *fluid = at_t->fluid;
    *roots = 1;
    if (branch == BRANCH_LIQUID) {
        return ANSWER_NO_SUCH_ROOT;
    }
    double amount = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        amount += n[i];
    }
    *volume = amount * fluid->gas_constant * at_t->temperature / pressure;
    return ANSWER_OK;
}

static double smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    (void)at_t;
    (void)n;
    return 0.0;
}

static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    (void)fluid;
    (void)temperature;
    (void)pressure;
    return (struct range_note){.side = RANGE_INSIDE};
}

static enum answer explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                           struct explanation *out)
{
    const double R = at_t->fluid->gas_constant, T = at_t->temperature, v = molar_volume;
    if (!(v > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    explanation_add(out, (struct explained_value){"R", "gas constant", NULL, "J/mol/K", 0, R, false});
    explanation_add(out, (struct explained_value){"T", "temperature", NULL, "K", 0, T, false});
    explanation_add(out, (struct explained_value){"v", "molar volume", NULL, "m3/mol", 0, v, false});
    explanation_add(out, (struct explained_value){"p", "pressure", "R * T / v", "Pa", 0, R * T / v, false});
    if (with_fugacity) {
        explanation_add(out, (struct explained_value){"ln_phi", "ln fugacity coefficient", "0", "1", 0, 0.0, false});
    }
    return ANSWER_OK;
}

const struct fluid_ops ideal_gas_ops = {
    .name = "ideal-gas",
    .title = "ideal gas",
    .citation = "p v = R T",
    .validity = "the limit of low pressure; shown for comparison, never governs",
    .form = FLUID_FROM_TV,
    .capabilities = CAN_MIXTURE | CAN_CALORIC | IS_FOR_COMPARISON,
    .create = create,
    .at_t_size = at_t_size,
    .set_t = set_t,
    .tv = tv,
    .volume = volume_at,
    .smallest_volume = smallest_volume,
    .range = range,
    .explain = explain,
};
