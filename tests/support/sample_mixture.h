/* Mixtures of the sample substances by Peng-Robinson, with pair parameters of a size met in practice. */
#ifndef TAREWRIGHT_TESTS_SAMPLE_MIXTURE_H
#define TAREWRIGHT_TESTS_SAMPLE_MIXTURE_H

#include "equilibrium/workspace.h"
#include "support/sample_fluids.h"

/* The pair parameter of two sample substances: near the values fitted to measurements, from memory, and of no more
 * meaning here than that an independent evaluation must use the same. */
double sample_kij(enum sample_substance a, enum sample_substance b);

/* A fluid of `count` sample substances, and its state and workspace at a temperature (K), all from the arena. */
struct sample_mixture {
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    struct equilibrium_workspace *ws;
};
struct sample_mixture sample_mixture_create(size_t count, const enum sample_substance *substance, double temperature,
                                            struct arena *arena);

/* Two substances given by their constants (K, Pa, 1), by Peng-Robinson at a temperature (K), from the arena. */
struct sample_binary {
    double critical_temperature[2], critical_pressure[2], acentric[2], kij;
};
struct fluid_at_t *sample_binary_at_t(const struct sample_binary *binary, double temperature, struct arena *arena);

#endif
