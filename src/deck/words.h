/* The distinct words of one file, each kept once. A library repeats few words many times, so what a word is (reserved,
 * a unit) is found out once, and equal words share their bytes.
 *
 * Ownership: table and words live in the arena.
 */
#ifndef TAREWRIGHT_DECK_WORDS_H
#define TAREWRIGHT_DECK_WORDS_H

#include "base/arena.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

struct word {
    const char *text; /* NUL-terminated; NULL marks a free place */
    uint32_t length;
    uint32_t hash;
    int token; /* the parser's token of a reserved word, else that of a name; 0: not looked up */
    enum { UNIT_UNKNOWN, UNIT_YES, UNIT_NO } unit; /* UNIT_UNKNOWN: not looked up */
};

struct word_table {
    struct word *places; /* capacity is a power of two */
    size_t capacity, count;
};

/* The word with these bytes, entered if it is new; valid until the next call. NULL when there is no memory. */
struct word *word_enter(struct word_table *table, struct arena *arena, const char *text, size_t length);

/* Whether a word was entered. */
bool word_is_entered(const struct word_table *table, const char *text, size_t length);

/* Whether the word is a unit. */
bool word_is_unit(struct word *word);

#endif
