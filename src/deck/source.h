/* Source text and places in it.
 *
 * Ownership: files and their texts live in the run's arena. A location is a plain value that points at its file.
 */
#ifndef TAREWRIGHT_DECK_SOURCE_H
#define TAREWRIGHT_DECK_SOURCE_H

#include "base/arena.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

struct source_file {
    const char *name; /* as shown to the reader: the path as given, or the path below the library folder */
    const char *path; /* as opened */
    const char *text; /* NUL-terminated; may hold NULs before `length` */
    size_t length;
    const char *sha256; /* 64 hexadecimal digits */
    bool is_library;
    bool is_used;                /* a value or block of it went into the case tree; set by elaboration */
    const uint32_t *line_starts; /* byte offset of each line */
    size_t line_count;
    size_t order; /* how many files were opened before it */
};

/* Bytes begin..end (end not included) of a file; file NULL: nowhere in particular. */
struct location {
    const struct source_file *file;
    uint32_t begin, end;
};

/* A file for `text`, which must outlive it and be shorter than 4 GiB: lines counted, digest taken. The names are not
 * copied. */
struct source_file *source_create(struct arena *arena, const char *name, const char *path, const char *text,
                                  size_t length);

/* Line and byte column of a location's begin, both from 1; 0 when it is nowhere. */
size_t location_line(struct location at);
size_t location_column(struct location at);

/* From the begin of the first to the end of the second (same file). */
struct location location_span(struct location first, struct location last);

/* The bytes of the UTF-8 character at `text` (at most `left` bytes are looked at), 0 where there is no valid one. */
size_t utf8_length(const char *text, size_t left);

#endif
