/* Syntax trees as text, and compared: what the tests of the parser share.
 */
#ifndef TAREWRIGHT_TESTS_TREE_H
#define TAREWRIGHT_TESTS_TREE_H

#include "base/text.h"
#include "deck/syntax.h"

/* Adds the tree on one line: each statement as `word` and items in brackets, `,` before an item after a comma, blocks
 * in braces; operations with all parentheses: `[let x][= ((1 + 2 K) * a)]`. */
void tree_add(const struct statement *statements, struct text *out);

/* Whether two trees say the same; places do not count. */
bool tree_equal(const struct statement *a, const struct statement *b);

#endif
