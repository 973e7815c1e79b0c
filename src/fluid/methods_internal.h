/* The property methods' tables, each defined in its family's file; methods.c lists them. */
#ifndef TAREWRIGHT_FLUID_METHODS_INTERNAL_H
#define TAREWRIGHT_FLUID_METHODS_INTERNAL_H

#include "fluid/fluid.h"

extern const struct fluid_ops ideal_gas_ops;
extern const struct fluid_ops van_der_waals_ops;
extern const struct fluid_ops redlich_kwong_ops;
extern const struct fluid_ops soave_redlich_kwong_ops;
extern const struct fluid_ops peng_robinson_ops;
extern const struct fluid_ops peng_robinson_1978_ops;
extern const struct fluid_ops peng_robinson_twu_ops;
extern const struct fluid_ops translated_peng_robinson_ops;
extern const struct fluid_ops translated_redlich_kwong_ops;
extern const struct fluid_ops quantum_peng_robinson_ops;
extern const struct fluid_ops reference_ops;
extern const struct fluid_ops multi_fluid_ops;
extern const struct fluid_ops gerg_2008_ops;
extern const struct fluid_ops lee_kesler_ops;
extern const struct fluid_ops virial_pitzer_abbott_ops;
extern const struct fluid_ops virial_tsonopoulos_ops;
extern const struct fluid_ops virial_pitzer_abbott_pressure_ops;
extern const struct fluid_ops virial_tsonopoulos_pressure_ops;
extern const struct fluid_ops poynting_ops;

#endif
