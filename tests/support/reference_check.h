/* A reference equation against the independent values of tests/data/reference-states.csv. */
#ifndef TAREWRIGHT_TESTS_REFERENCE_CHECK_H
#define TAREWRIGHT_TESTS_REFERENCE_CHECK_H

#include "base/arena.h"
#include "fluid/spec.h"

/* The file's text, from the arena; the test fails where it cannot be read. */
const char *reference_rows_read(struct arena *arena);

/* Checks every row of `rows` that names the gas, with the fluid made from `pure`: states, their roots, caloric values
 * where the equation has ideal terms, and saturation. The number of rows, so that the caller can see that none is
 * missing. */
size_t reference_rows_check(const char *rows, const struct pure_spec *pure, struct arena *arena);

#endif
