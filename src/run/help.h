/* The help verb: what words, units, methods and message codes mean, from the tables the program itself works by.
 *
 * Ownership: texts are added to the struct text given.
 */
#ifndef TAREWRIGHT_RUN_HELP_H
#define TAREWRIGHT_RUN_HELP_H

#include "base/text.h"

#include <stdbool.h>

/* Everything known under `topic`: a word of the deck language, a unit, a method, a code as E101, or one of the lists
 * `words`, `units`, `methods`, `codes`. False when there is nothing; *nearest is then the word that may have been
 * meant, or NULL. */
bool help_topic(const char *topic, struct text *out, const char **nearest);

#endif
