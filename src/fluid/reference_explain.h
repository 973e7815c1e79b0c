/* struct fluid_ops' explain of the `reference` method. */
#ifndef TAREWRIGHT_FLUID_REFERENCE_EXPLAIN_H
#define TAREWRIGHT_FLUID_REFERENCE_EXPLAIN_H

#include "fluid/explanation.h"

enum answer reference_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                              struct explanation *out);

#endif
