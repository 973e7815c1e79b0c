/* A deck from its text to its listing: the whole program but the command line.
 *
 * Nothing is printed and nothing is written but by run_write. Ownership: a struct run owns its memory and gives all of
 * it back in run_free. Reentrant: runs do not know of each other.
 */
#ifndef TAREWRIGHT_RUN_RUN_H
#define TAREWRIGHT_RUN_RUN_H

#include "base/arena.h"
#include "base/text.h"
#include "deck/deck.h"
#include "filling/solve.h"

#include <stdbool.h>
#include <stddef.h>

/* What the program tells its caller when it ends. */
enum run_status {
    RUN_MET = 0,        /* every requirement is met, or none was stated */
    RUN_NOT_MET = 1,    /* a requirement is not met */
    RUN_DECK_WRONG = 2, /* the deck, or the command line, is wrong */
    RUN_UNDECIDED = 3,  /* a question has no answer: no convergence, or outside every method's range */
    RUN_NO_FILE = 4     /* a file could not be read or written, or memory ran out */
};

/* The worse of two, by 4, 2, 3, 1, 0. */
enum run_status run_worse(enum run_status a, enum run_status b);

enum run_mode {
    RUN_ANSWER, /* solve the deck: output is the listing */
    RUN_CHECK,  /* read and elaborate it: output is one line when it is in order */
    RUN_PRINT   /* read it: output is the deck itself, normalised; files it uses are left where they are */
};

struct run_request {
    enum run_mode mode;
    const char *deck_path;
    const struct deck_reader *reader;
    const char *version;             /* of the program, for the listing */
    const char *json_path;           /* NULL: none */
    const char *listing_path;        /* NULL: none; the listing is in the output all the same */
    const char *out_folder;          /* where tables go; NULL: the current folder */
    const struct progress *progress; /* of the answers; NULL: nobody waits */
};

struct run_file {
    const char *path;
    struct text content;
};

struct run {
    struct arena *arena;
    enum run_status status;
    const struct deck *deck; /* as read; NULL when the root file could not be */
    struct text output;      /* for the reader; empty when the deck is wrong */
    struct text diagnostics; /* messages about deck and files, drawn */
    struct {
        size_t count, capacity;
        struct run_file *items;
    } files; /* to be written by run_write */
};

/* Runs a deck with memory from `source` (NULL: malloc). NULL when memory ran out; nothing is held then. */
struct run *run_deck(const struct run_request *request, const struct arena_source *source);

/* Shows what is known of one gas: its data with their sources. Names the library does not know give RUN_DECK_WRONG. */
struct run *run_show_gas(const char *name, const struct deck_reader *reader, const struct arena_source *source);

/* Writes the run's files, each of them whole or not at all. A file that cannot be written leaves a message in the
 * diagnostics and RUN_NO_FILE. */
void run_write(struct run *run);

void run_free(struct run *run); /* NULL is fine */

#endif
