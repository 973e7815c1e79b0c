/* Texts compared byte for byte with files under tests/golden: they detect change and are no evidence of being right.
 *
 * With TAREWRIGHT_UPDATE_GOLDEN set in the environment the files are written anew instead; read their difference before
 * committing it.
 */
#ifndef TAREWRIGHT_TESTS_GOLDEN_H
#define TAREWRIGHT_TESTS_GOLDEN_H

#include <stdbool.h>
#include <stddef.h>

/* True when the file at `path` holds exactly these bytes, or was written so. Else says where the two part and returns
 * false. */
bool golden_matches(const char *path, const char *text, size_t length);

/* Fails the running test at the caller's line when the text is not the file's. */
#define assert_golden(path, text, length)                \
    do {                                                 \
        if (!golden_matches((path), (text), (length))) { \
            _fail(__FILE__, __LINE__);                   \
        }                                                \
    } while (0)

/* The first line of more than `most` columns (code points), as its number from 1; 0 when there is none. */
size_t golden_wide_line(const char *text, size_t most);

#endif
