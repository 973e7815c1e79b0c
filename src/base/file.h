/* Files read whole and written whole or not at all.
 *
 * Ownership: texts read belong to the arena passed in. Nothing stays open between calls.
 */
#ifndef TAREWRIGHT_BASE_FILE_H
#define TAREWRIGHT_BASE_FILE_H

#include "base/arena.h"

#include <stdbool.h>
#include <stddef.h>

/* Reads the file at `path` into *text (closing NUL added) and *length. On failure false, with errno set;
 * a folder and a file over 64 MiB (EFBIG) are failures too. */
bool file_read(struct arena *arena, const char *path, char **text, size_t *length);

/* Writes `length` bytes to `path` through a temporary file beside it and a rename, so that a reader sees the old
 * file or the new one. False with errno set on failure; the temporary file is removed then. */
bool file_write(struct arena *arena, const char *path, const char *text, size_t length);

/* SHA-256 of `length` bytes in lower-case hexadecimal, 64 digits and a NUL. */
char *file_sha256(struct arena *arena, const char *text, size_t length);

#endif
