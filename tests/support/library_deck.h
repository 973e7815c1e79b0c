/* Decks from memory with the library from its folder: what tests of real gases share. */
#ifndef TAREWRIGHT_TESTS_LIBRARY_DECK_H
#define TAREWRIGHT_TESTS_LIBRARY_DECK_H

#include "case/case.h"
#include "support/check.h"

#include <string.h>

#define LIBRARY_DECK_NAME "job.deck"

static inline bool library_deck_read(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (strcmp(path, LIBRARY_DECK_NAME) == 0) {
        *text = context;
        *length = strlen(*text);
        return true;
    }
    return deck_read_file(NULL, arena, path, text, length);
}

/* The case of a deck; fails the test where it has a mistake. */
static inline const struct case_tree *library_deck(const char *text, struct arena *arena)
{
    const struct deck_reader reader = {.read = library_deck_read,
                                       .context = arena_copy_text(arena, text, strlen(text)),
                                       .library_folder = "decks/library"};
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck *deck = deck_load(LIBRARY_DECK_NAME, &reader, arena, &diagnostics);
    const struct case_tree *tree = deck == NULL ? NULL : case_elaborate(deck, arena, &diagnostics);
    if (tree == NULL) {
        fail_msg("%s\n%s", diagnostics.items[0].message, text);
    }
    return tree;
}

#endif
