/* Reference equations carried by hand for the tests. */
#ifndef TAREWRIGHT_TESTS_REFERENCE_DATA_H
#define TAREWRIGHT_TESTS_REFERENCE_DATA_H

#include "fluid/spec.h"

struct reference_gas {
    const char *name;
    double molar_mass;         /* kg/mol */
    double triple_temperature; /* K */
    const struct reference_spec *equation;
};

/* All of them. */
const struct reference_gas *reference_gases(size_t *count);

/* The one of that name, or NULL. */
const struct reference_gas *reference_gas(const char *name);

#endif
