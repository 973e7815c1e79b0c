/* A predicate at one mass and one temperature: what predicate.c and predicate_mass.c share. */
#ifndef TAREWRIGHT_FILLING_PREDICATE_INTERNAL_H
#define TAREWRIGHT_FILLING_PREDICATE_INTERNAL_H

#include "filling/predicate.h"

/* The finding at `temperature` (worst_temperature is that), and in *score how far the predicate is from failing:
 * negative exactly when it does not hold, continuous enough to be searched, perhaps infinite. */
struct predicate_finding predicate_at(const struct sheet_run *run, struct method_run *method,
                                      const struct predicate *predicate, double mass, double temperature,
                                      double *score);

#endif
