/* Deck files that exist in a list only, read as deck_load reads the real ones.
 */
#ifndef TAREWRIGHT_TESTS_MEMORY_FILES_H
#define TAREWRIGHT_TESTS_MEMORY_FILES_H

#include "base/arena.h"

#include <stdbool.h>

struct memory_file {
    const char *path;
    const char *text; /* NULL: reading it fails with `reason` */
    int reason;       /* an errno value */
};

struct memory_files {
    const struct memory_file *files;
    size_t count;
    size_t reads; /* counted: how often a file was given out */
};

/* The `read` of a struct deck_reader whose context is a struct memory_files. Unknown paths give ENOENT. */
bool memory_files_read(void *context, struct arena *arena, const char *path, char **text, size_t *length);

#endif
