/* Fluids for the tests of property methods and equilibria: one row for each method to be tested. */
#ifndef TAREWRIGHT_TESTS_SAMPLE_FLUIDS_H
#define TAREWRIGHT_TESTS_SAMPLE_FLUIDS_H

#include "base/arena.h"
#include "fluid/fluid.h"

enum sample_substance {
    NITROGEN,
    METHANE,
    CARBON_DIOXIDE,
    PROPANE,
    N_BUTANE,
    HYDROGEN,
    HELIUM,
    NEON,
    SAMPLE_SUBSTANCES
};

extern const struct pure_spec SAMPLE_SUBSTANCE[SAMPLE_SUBSTANCES];

/* Interactions of the groups the first five substances are made of. */
extern const struct group_pair SAMPLE_GROUP_PAIRS[];
extern const size_t SAMPLE_GROUP_PAIRS_COUNT;

enum { SAMPLE_MOST = 5 };

/* Where a mixture's pairs have their parameters from. */
enum sample_pairs {
    SAMPLE_INVENTED,  /* every kij invented */
    SAMPLE_GROUPS,    /* the groups of E-PPR78 */
    SAMPLE_CONSTANTS, /* kij and lij as published for the method, zero where nothing is */
    SAMPLE_LIBRARY,   /* components and pairs as a deck gets them from the library */
};

struct sample_fluid {
    const char *name; /* for messages */
    const char *method;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double n[SAMPLE_MOST]; /* mol, awkward on purpose */
    enum sample_pairs pairs;
};

/* Every method, pure and as a mixture where it can. */
extern const struct sample_fluid SAMPLE_FLUIDS[];
extern const size_t SAMPLE_FLUIDS_COUNT;

const struct fluid *sample_fluid_create(const struct sample_fluid *sample, struct arena *arena);

/* A pure fluid of any method. */
const struct fluid *sample_pure(const char *method, const struct pure_spec *substance, struct arena *arena);

/* A state of the fluid at temperature (K), from the arena. */
struct fluid_at_t *sample_at_t(const struct fluid *fluid, double temperature, struct arena *arena);

#endif
