/* What a `no liquid` criterion found for a mixture: where it condenses, which component does, and what the rule of
 * partial pressures would have said.
 */
#ifndef TAREWRIGHT_FILLING_DEW_LIMIT_H
#define TAREWRIGHT_FILLING_DEW_LIMIT_H

#include "filling/permissible_internal.h"

/* The component that makes up most of the first liquid at the lowest dew point at `temperature`; NULL where there is no
 * dew point, and for a pure gas. */
const char *condensing_component(const struct sheet_run *run, struct method_run *method, double temperature);

/* Tables and notes for each such criterion of a mixture's sheet; nothing for a pure gas. */
void tell_dew_limits(const struct permissible *sheet);

#endif
