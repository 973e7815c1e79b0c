/* What scanner and parser share while one file is parsed, and the constructors the grammar's actions call.
 *
 * Ownership: everything lives in the arena. Nothing here jumps out of the parser: a constructor that finds no memory
 * returns NULL and the action ends the parse.
 */
#ifndef TAREWRIGHT_DECK_SYNTAX_BUILD_H
#define TAREWRIGHT_DECK_SYNTAX_BUILD_H

#include "base/arena.h"
#include "base/codes.h"
#include "deck/syntax.h"
#include "deck/words.h"

#include <stddef.h>

enum {
    NESTING_MOST = 64,       /* blocks and parentheses inside one another */
    EXPRESSION_MOST = 200,   /* operations inside one another, and values of a pair */
    TOKENS_MOST = 500000,    /* of one file; a library of all gases has a fifth of them */
    ERRORS_READ_MOST = 1000, /* then the rest of the file is not read */
    SCANNER_BYTES = 1024     /* all the scanner allocates: its state and one buffer's */
};

/* A message found while parsing; handed to the diagnostics afterwards, since adding one there may jump. */
struct parse_message {
    enum code code;
    struct location at;
    const char *text;
    const char *hint; /* NULL: none */
    const char *note; /* NULL: none */
    struct location note_at;
    struct parse_message *next;
};

struct opener {
    char with; /* '{' or '(' */
    struct location at;
};

struct parse_context {
    struct arena *arena;
    const struct source_file *file;
    const struct statement *statements; /* the result */
    struct word_table words;

    struct parse_message *first_message, *last_message;
    size_t message_count;
    bool is_out_of_memory;

    char *buffer;   /* the scanned copy of the file's text, with two closing NULs */
    int last_token; /* 0 at the start */
    struct location last_at;
    bool is_recovering; /* after a syntax error, up to the statement's end: parentheses no longer hold lines together */
    bool is_stopped;    /* something is too large: the rest of the file is not read */
    size_t token_count;
    bool is_end_known; /* the blocks open at the end of the file were reported */
    struct opener openers[NESTING_MOST];
    size_t opener_count;
    struct location unclosed_pair; /* the last '(' given up as never closed */
    size_t swallowed_blocks;       /* '{' at the end of texts that are not closed: their '}' are no mistakes */

    max_align_t scanner_memory[SCANNER_BYTES / sizeof(max_align_t)];
    size_t scanner_bytes;
};

/* Keeps a message, its text formatted; NULL beyond DIAGNOSTICS_MOST (it is counted) or without memory. */
struct parse_message *parse_complain(struct parse_context *context, enum code code, struct location at,
                                     const char *format, ...) __attribute__((format(printf, 4, 5)));

/* Hint and note of a message just kept; `to` may be NULL. The texts must be constants. */
void parse_hint(struct parse_message *to, const char *hint);
void parse_note(struct parse_message *to, struct location at, const char *note);

/* Expressions. An operation too large for EXPRESSION_MOST is reported and left out. */
struct expression *expression_number(struct parse_context *context, struct location at, double number);
struct expression *expression_of_name(struct parse_context *context, struct location at, const char *name);
struct expression *expression_operation(struct parse_context *context, enum expression_kind kind, struct location at,
                                        struct expression *left, struct expression *right);

/* The values of a pair in writing, before they are chained. */
struct tuple_list {
    struct expression *first, *last;
    unsigned count;
};

struct tuple_list tuple_start(struct expression *left, struct expression *right, struct parse_context *context,
                              struct location at);
struct tuple_list tuple_add(struct tuple_list list, struct expression *value, struct parse_context *context,
                            struct location at);

/* Items. */
struct item *item_of(struct parse_context *context, enum item_kind kind, struct location at,
                     const struct expression *value);
struct item *item_of_text(struct parse_context *context, struct location at, const char *text);
struct item *item_of_relation(struct parse_context *context, struct location at, enum relation relation,
                              const struct expression *value);

/* A statement and its last item so far. */
struct statement_head {
    struct statement *statement;
    struct item *last;
};

struct statement_head statement_start(struct parse_context *context, struct location at, const char *word);
struct statement_head statement_add_item(struct statement_head head, struct item *item, bool after_comma);

/* A list of statements in the order written. */
struct statement_list {
    struct statement *first, *last;
};

struct statement_list statement_list_add(struct statement_list list, struct statement *statement);
struct statement *statement_with_block(struct statement *statement, struct location at, struct statement_list block);

#endif
