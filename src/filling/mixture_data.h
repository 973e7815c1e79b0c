/* What a reader has to know of the mixtures in use: their composition as it was written and in mole fractions, what has
 * to be assessed, and the interaction each method takes for every pair, with its source.
 */
#ifndef TAREWRIGHT_FILLING_MIXTURE_DATA_H
#define TAREWRIGHT_FILLING_MIXTURE_DATA_H

#include "filling/data_used.h"

/* Rows of the data section for every mixture and method in the pool; warnings for pairs from unverified sources. */
void tell_mixtures(const struct case_tree *tree, const struct method_pool *pool, struct result *result);

#endif
