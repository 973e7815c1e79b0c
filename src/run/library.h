/* Where the data library lies.
 */
#ifndef TAREWRIGHT_RUN_LIBRARY_H
#define TAREWRIGHT_RUN_LIBRARY_H

#include "base/arena.h"

/* The library's folder: `asked` (from the command line), else `named` (from the environment), both of which may be
 * NULL; else the first there is of ../share/tarewright/library, ../decks/library and ../../decks/library beside the
 * folder of the running program. NULL when there is none. The text is one of those passed in or lives in the arena. */
const char *library_find(const char *asked, const char *named, struct arena *arena);

#endif
