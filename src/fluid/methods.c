/* The table of property methods: adding a method is one file and one row here. */
#include "fluid/fluid.h"
#include "fluid/methods_internal.h"

#include <string.h>

static const struct fluid_ops *const METHODS[] = {
    &ideal_gas_ops,
    &van_der_waals_ops,
    &redlich_kwong_ops,
    &soave_redlich_kwong_ops,
    &peng_robinson_ops,
    &peng_robinson_1978_ops,
    &peng_robinson_twu_ops,
    &translated_peng_robinson_ops,
    &translated_redlich_kwong_ops,
    &quantum_peng_robinson_ops,
    &reference_ops,
    &multi_fluid_ops,
    &gerg_2008_ops,
    &lee_kesler_ops,
    &virial_pitzer_abbott_ops,
    &virial_tsonopoulos_ops,
    &virial_pitzer_abbott_pressure_ops,
    &virial_tsonopoulos_pressure_ops,
    &poynting_ops,
    NULL,
};

const struct fluid_ops *const *fluid_methods(void)
{
    return METHODS;
}

const struct fluid_ops *fluid_method(const char *name)
{
    for (const struct fluid_ops *const *method = METHODS; *method != NULL; method++) {
        if (strcmp((*method)->name, name) == 0) {
            return *method;
        }
    }
    return NULL;
}
