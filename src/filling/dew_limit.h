/* What a `no liquid` criterion found for a mixture: where it condenses, which component does, and what the rule of
 * partial pressures would have said.
 */
#ifndef TAREWRIGHT_FILLING_DEW_LIMIT_H
#define TAREWRIGHT_FILLING_DEW_LIMIT_H

#include "filling/permissible_internal.h"

/* Tables and notes for each such criterion of a mixture's sheet; nothing for a pure gas. */
void tell_dew_limits(const struct permissible *sheet);

#endif
