/* A text that grows at its end, kept in an arena.
 *
 * Ownership: the bytes belong to the arena; a struct text may be copied as long as only one copy is appended to.
 */
#ifndef TAREWRIGHT_BASE_TEXT_H
#define TAREWRIGHT_BASE_TEXT_H

#include "base/arena.h"

#include <stddef.h>

struct text {
    struct arena *arena;
    char *bytes; /* NUL-terminated once anything was added, else NULL */
    size_t length;
    size_t capacity;
};

/* Adds formatted text, or `length` bytes, or `count` blanks at the end. */
void text_format(struct text *text, const char *format, ...) __attribute__((format(printf, 2, 3)));
void text_add(struct text *text, const char *bytes, size_t length);
void text_pad(struct text *text, size_t count);

/* How many columns `bytes` takes in a terminal: code points of UTF-8 (a broken byte counts one). */
size_t text_columns(const char *bytes, size_t length);

#endif
