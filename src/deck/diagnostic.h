/* Messages about a deck: collected while it is read, sorted, and drawn with the line and a caret.
 *
 * Ownership: messages live in the run's arena.
 */
#ifndef TAREWRIGHT_DECK_DIAGNOSTIC_H
#define TAREWRIGHT_DECK_DIAGNOSTIC_H

#include "base/arena.h"
#include "base/codes.h"
#include "base/text.h"
#include "deck/source.h"

struct diagnostic {
    enum code code;
    struct location at;
    const char *message;
    const char *hint; /* NULL: none */
    const char *note; /* about `note_at`, as "first defined here"; NULL: none */
    struct location note_at;
    size_t order; /* of arrival, the last sort key */
};

/* At most this many errors, and this many warnings, are kept; the rest is counted. */
enum { DIAGNOSTICS_MOST = 100 };

/* Starts as {.arena = arena}, all else zero. */
struct diagnostics {
    struct arena *arena;
    struct diagnostic *items;
    size_t count, capacity;
    size_t errors, warnings;   /* all of them, also those beyond DIAGNOSTICS_MOST */
    struct diagnostic dropped; /* what diagnose returns for a message it does not keep */
};

/* Adds a message; the returned one can be given a hint or a note, before the next message is added. Never NULL.
 * A second error at the same place as an earlier one is dropped as a consequence of it (and a dummy returned). */
struct diagnostic *diagnose(struct diagnostics *all, enum code code, struct location at, const char *format, ...)
    __attribute__((format(printf, 4, 5)));

/* hint of an existing message, formatted. */
void diagnostic_hint(struct diagnostics *all, struct diagnostic *of, const char *format, ...)
    __attribute__((format(printf, 3, 4)));

/* Counts `more` errors that were found but not kept. */
void diagnostics_count_more(struct diagnostics *all, size_t more);

/* Sorts by file order and position and draws all into *out:
 *   file:line:column: error: message [E101]
 *       3 |   test-presure 300 barg
 *         |   ^~~~~~~~~~~~
 *     hint: did you mean 'test-pressure'?
 * Lines longer than the page are shortened around the caret; control bytes are shown as '?'. */
void diagnostics_draw(struct diagnostics *all, struct text *out);

/* The known word nearest to `word` when it is near enough to be meant, else NULL. Case does not count; a swap of
 * neighbouring letters counts one. */
const char *nearest_word(const char *word, const char *const *known, size_t count);

#endif
