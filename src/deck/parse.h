/* Parsing one file.
 */
#ifndef TAREWRIGHT_DECK_PARSE_H
#define TAREWRIGHT_DECK_PARSE_H

#include "deck/diagnostic.h"
#include "deck/syntax.h"

/* The statements of a file in *statements; false after messages (the statements that could be read are given
 * nevertheless). The tree lives in the arena; running out of memory leaves as arena_alloc does. */
bool deck_parse_file(const struct source_file *file, struct arena *arena, struct diagnostics *diagnostics,
                     const struct statement **statements);

#endif
