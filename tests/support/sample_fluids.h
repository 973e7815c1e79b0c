/* Fluids for the tests of property methods and equilibria: one row for each method to be tested. */
#ifndef TAREWRIGHT_TESTS_SAMPLE_FLUIDS_H
#define TAREWRIGHT_TESTS_SAMPLE_FLUIDS_H

#include "base/arena.h"
#include "fluid/fluid.h"

enum sample_substance { NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE, SAMPLE_SUBSTANCES };

extern const struct pure_spec SAMPLE_SUBSTANCE[SAMPLE_SUBSTANCES];

enum { SAMPLE_MOST = SAMPLE_SUBSTANCES };

struct sample_fluid {
    const char *name;   /* for messages */
    const char *method;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double n[SAMPLE_MOST]; /* mol, awkward on purpose */
};

/* Every method, pure and as a mixture where it can. The pair parameters of mixtures are invented. */
extern const struct sample_fluid SAMPLE_FLUIDS[];
extern const size_t SAMPLE_FLUIDS_COUNT;

const struct fluid *sample_fluid_create(const struct sample_fluid *sample, struct arena *arena);

/* A pure fluid of any method. */
const struct fluid *sample_pure(const char *method, const struct pure_spec *substance, struct arena *arena);

/* A state of the fluid at temperature (K), from the arena. */
struct fluid_at_t *sample_at_t(const struct fluid *fluid, double temperature, struct arena *arena);

#endif
