/* The wording of syntax errors.
 */
#ifndef TAREWRIGHT_DECK_SYNTAX_REPORT_H
#define TAREWRIGHT_DECK_SYNTAX_REPORT_H

#include "deck/syntax_build.h"

/* What the parser knows when a token does not fit. */
struct syntax_error {
    struct location at;
    bool is_end, is_block, is_relation, is_close_pair, is_starter, is_reserved;      /* the token found */
    bool may_begin_value, may_begin_statement, may_close_pair, may_be_name, may_end; /* what would have fitted */
};

/* Keeps the message and puts the scanner into recovery up to the statement's end. */
void syntax_report(struct parse_context *context, const struct syntax_error *error);

#endif
