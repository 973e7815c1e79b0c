/* Speed of the multi-fluid methods on gases of ten components from the library, for the bench. */
#ifndef TAREWRIGHT_TESTS_TIMED_MULTI_FLUID_H
#define TAREWRIGHT_TESTS_TIMED_MULTI_FLUID_H

#include <stdbool.h>

/* Prints a table of median and mean times beside the limits set for them; false where a state failed. */
bool time_multi_fluid(void);

#endif
