/* A deck read from its files: parsed, with every file it uses, ready for elaboration.
 *
 * Ownership: all of it lives in the arena passed in.
 */
#ifndef TAREWRIGHT_DECK_DECK_H
#define TAREWRIGHT_DECK_DECK_H

#include "deck/diagnostic.h"
#include "deck/syntax.h"
#include "deck/units.h"

struct deck {
    const struct source_file *root;
    struct source_file **files; /* in the order first opened; files[0] is the root */
    size_t file_count;
    const struct statement *statements; /* of the root, each `use` replaced by what it brings, in order */
};

/* Where decks and the texts they use are found. Tests and fuzzers replace `read`. */
struct deck_reader {
    bool (*read)(void *context, struct arena *arena, const char *path, char **text, size_t *length); /* sets errno */
    void *context;
    const char *library_folder; /* NULL: none */
};

/* Reads and parses `path` and all it uses. Returns the deck even when there were errors (diagnostics->errors > 0: do
 * not elaborate); NULL when the root file itself could not be read (CODE_E401 is then in the diagnostics).
 *
 * `use "name"`: name.deck beside the file that uses it, else below the library folder. A file is brought once.
 * `use "name" for thing`: brought only when some file of the deck outside the library, or a library block that such a
 * file's names lead to, mentions `thing`, be it as the word of a statement. */
struct deck *deck_load(const char *path, const struct deck_reader *reader, struct arena *arena,
                       struct diagnostics *diagnostics);

/* The usual reader's read: base/file.h. */
bool deck_read_file(void *context, struct arena *arena, const char *path, char **text, size_t *length);

/* Writes statements as a normalised deck that parses to the same tree. */
void deck_print(const struct statement *statements, struct text *out);

#endif
