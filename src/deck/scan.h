/* What the scanner's rules call: which token a match is, in the light of what stands around it.
 *
 * The places given are those of the match. All but scan_locate and scan_begin return the token to give, or tell whether
 * there is one.
 */
#ifndef TAREWRIGHT_DECK_SCAN_H
#define TAREWRIGHT_DECK_SCAN_H

#include "deck/syntax_build.h"

/* Scans and parses the context's buffer; the outcome is 0 when parsed (perhaps with messages),
 * 1 when given up, 2 when there was no memory. */
int scan_file(struct parse_context *context);

/* Part of the scanner's memory reserve; NULL when it is used up. */
void *scan_reserve(struct parse_context *context, size_t bytes);

void scan_locate(const struct parse_context *context, struct location *at, const char *match, size_t length);

/* Before each token: a statement's end also ends its parentheses and its errors. */
void scan_begin(struct parse_context *context);

/* Notes and returns the token. */
int scan_give(struct parse_context *context, int token, struct location at);

/* Whether a line end counts here, and whether a statement is under way that a '}' must end. */
bool scan_ends_statement(const struct parse_context *context);
bool scan_needs_end(const struct parse_context *context);

/* '{' and '(': END in its place, and the scan is stopped, when nested too deeply. */
int scan_open(struct parse_context *context, char with, struct location at);
void scan_close_pair(struct parse_context *context);

/* False, after a message, where no block is open. */
bool scan_close_block(struct parse_context *context, struct location at);

/* At the end of the file: ends what is open, one token for each call, then gives the end. */
int scan_finish(struct parse_context *context, struct location *at);

/* Whether the sign of a number belongs to it, and the token of an operator that stands alone. */
bool scan_is_sign(const struct parse_context *context, struct location at);
int scan_operator(struct parse_context *context, struct location at);

/* The value of a number, rounded to nearest; a message where that is out of range. */
double scan_number(struct parse_context *context, struct location at, const char *digits);

/* Whether a word stands after the number at this place, on its line. */
bool scan_may_unit_follow(const struct parse_context *context, struct location at);

/* A name or a reserved word, its spelling in *spelled. */
int scan_word(struct parse_context *context, const char *match, size_t length, const char **spelled);

/* How many bytes of a match like "kg/L" or "a/b" make a word: all of a unit, the name before the first sign else. */
size_t scan_composed(struct parse_context *context, const char *match, size_t length);
bool scan_is_unit(struct parse_context *context, const char *match, size_t length, const char **spelled);

/* A text in quotes, which are part of the match, its escapes replaced. */
int scan_text(struct parse_context *context, struct location at, bool is_closed, const char **text);

/* A character that has no place outside texts and comments. */
void scan_stranger(struct parse_context *context, struct location at);

#endif
