/* Critical constants of the gases of the data library, for tests that need many components. */
#ifndef TAREWRIGHT_TESTS_LIBRARY_GASES_H
#define TAREWRIGHT_TESTS_LIBRARY_GASES_H

#include "fluid/spec.h"

enum { LIBRARY_GASES = 120 };

/* K, Pa and acentric factor, each with its source; the molar masses are invented, as no equilibrium in moles needs
 * them. */
extern const struct pure_spec LIBRARY_GAS[LIBRARY_GASES];

#endif
