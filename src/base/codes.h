/* The permanent codes of all messages, from the one table codes.def. */
#ifndef TAREWRIGHT_BASE_CODES_H
#define TAREWRIGHT_BASE_CODES_H

#include <stddef.h>

enum code {
#define CODE(number, severity, meaning, advice) CODE_##severity##number = number,
#include "base/codes.def"
#undef CODE
    CODE_NONE = 0
};

struct code_row {
    enum code code;
    char severity;    /* 'E' or 'W' */
    const char *name; /* "E101" */
    const char *meaning;
    const char *advice;
};

/* All rows, in the table's order; *count is their number. */
const struct code_row *code_rows(size_t *count);

/* The row of a code; never NULL for a member of enum code other than CODE_NONE. */
const struct code_row *code_row(enum code code);

#endif
