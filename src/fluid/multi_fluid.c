/* `multi-fluid`: mixtures by the pure components' reference equations, with published reducing and departure functions
 * for their pairs. A component by itself is its reference equation. */
#include "fluid/methods_internal.h"
#include "fluid/multi_fluid_internal.h"

static const struct reference_spec *equation_of(const struct pure_spec *pure)
{
    return pure->reference;
}

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    static const struct multi_fluid_model model = {
        .ops = &multi_fluid_ops,
        .equation_of = equation_of,
        .lack = LACK_EQUATION,
        .gas_constant = GAS_CONSTANT,
    };
    return multi_fluid_create(&model, spec, arena, lack);
}

const struct fluid_ops multi_fluid_ops = {
    .name = "multi-fluid",
    .title = "reference equations with reducing and departure functions",
    .validity = "a pair without published parameters is estimated with beta = gamma = 1",
    .form = FLUID_FROM_TV,
    .capabilities = CAN_LIQUID | CAN_MIXTURE | CAN_CALORIC,
    .create = create,
    .at_t_size = multi_fluid_at_t_size,
    .set_t = multi_fluid_set_t,
    .tv = multi_fluid_tv,
    .volume = multi_fluid_volume,
    .volume_and_tv = multi_fluid_volume_and_tv,
    .smallest_volume = multi_fluid_smallest_volume,
    .range = multi_fluid_range,
    .reducing = multi_fluid_reducing,
    .explain_whole = multi_fluid_explain,
    .ideal_of = multi_fluid_ideal_of,
};
