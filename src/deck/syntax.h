/* The syntax tree of a deck: what was written, with no meaning attached yet.
 *
 * A deck is a list of statements. A statement is a word, items, and perhaps a block of statements. What a word means,
 * which items it takes and in which block is the business of elaboration (src/case).
 * A condition may begin with `at`, `from`, `no`, `one`, and a rule's source with `ref`: such a statement's word is that
 * marker, and its first item is the marker's item (`at 65 degC ...`: word "at", items ITEM_AT ...).
 *
 * Ownership: all nodes live in the run's arena.
 */
#ifndef TAREWRIGHT_DECK_SYNTAX_H
#define TAREWRIGHT_DECK_SYNTAX_H

#include "deck/source.h"

enum expression_kind {
    EXPRESSION_NUMBER, /* number, perhaps with a unit */
    EXPRESSION_NAME,
    EXPRESSION_NEGATE, /* left */
    EXPRESSION_ADD,
    EXPRESSION_SUBTRACT,
    EXPRESSION_MULTIPLY,
    EXPRESSION_DIVIDE,
    EXPRESSION_TUPLE, /* (left, right): two or more, chained through right as nested tuples */
    EXPRESSION_KINDS
};

struct expression {
    enum expression_kind kind;
    unsigned depth;     /* operations inside one another below this one; bounded, so that recursion is safe */
    struct location at; /* with the unit, and with parentheses around the whole */
    double number;
    const char *unit; /* NULL: no unit written */
    const char *name; /* EXPRESSION_NAME */
    const struct expression *left, *right;
};

enum relation { RELATION_LESS, RELATION_AT_MOST, RELATION_EQUAL, RELATION_AT_LEAST, RELATION_GREATER };

enum item_kind {
    ITEM_EXPRESSION, /* value */
    ITEM_TEXT,       /* text: "quoted" */
    ITEM_RELATION,   /* relation and value: `<= test-pressure`; also the `= value` of a let */
    ITEM_FROM,       /* value */
    ITEM_TO,         /* value */
    ITEM_BY,         /* value */
    ITEM_IN,         /* value */
    ITEM_AT,         /* value */
    ITEM_REF,        /* value, a name */
    ITEM_PLUS_MINUS, /* value */
    ITEM_NO,         /* value, a name: `no liquid` */
    ITEM_ONE,        /* value, a name: `one phase` */
    ITEM_REST,       /* the word `rest` */
    ITEM_FOR,        /* value, a name: `use "equations/argon" for argon` */
    ITEM_KINDS
};

struct item {
    enum item_kind kind;
    struct location at;
    bool after_comma; /* a comma stands before this item */
    enum relation relation;
    const struct expression *value;
    const char *text;
    const struct item *next;
};

struct statement {
    struct location at; /* word to last item */
    struct location word_at;
    const char *word;
    const struct item *items;
    bool has_block;
    struct location block_at;      /* '{' to '}' */
    const struct statement *block; /* NULL for an empty block */
    const struct statement *next;
};

#endif
