/* `gerg-2008`: natural gases and other mixtures of 21 components by the equations and constants of the standard alone
 * (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032; ISO 20765-2). */
#include "fluid/methods_internal.h"
#include "fluid/multi_fluid_internal.h"

/* J/(mol K): R of the equation, and R* that its ideal-gas terms were fitted with. */
#define GERG_GAS_CONSTANT       8.314472
#define GERG_IDEAL_GAS_CONSTANT 8.31451

static const struct reference_spec *equation_of(const struct pure_spec *pure)
{
    return pure->gerg_2008;
}

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    static const struct multi_fluid_model model = {
        .ops = &gerg_2008_ops,
        .equation_of = equation_of,
        .lack = LACK_PARAMETERS,
        .gas_constant = GERG_GAS_CONSTANT,
        .ideal_scale_of_all = GERG_IDEAL_GAS_CONSTANT / GERG_GAS_CONSTANT,
    };
    return multi_fluid_create(&model, spec, arena, lack);
}

const struct fluid_ops gerg_2008_ops = {
    .name = "gerg-2008",
    .title = "GERG-2008 wide-range equation of state (ISO 20765-2)",
    .citation = "O. Kunz and W. Wagner, J. Chem. Eng. Data 57 (2012) 3032",
    .validity = "normal range 90 to 450 K up to 35 MPa, extended range 60 to 700 K up to 70 MPa",
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
