#include "base/codes.h"

static const struct code_row rows[] = {
#define CODE(number, severity, meaning, advice) \
    {CODE_##severity##number, #severity[0], #severity #number, meaning, advice},
#include "base/codes.def"
#undef CODE
};

const struct code_row *code_rows(size_t *count)
{
    *count = sizeof rows / sizeof *rows;
    return rows;
}

const struct code_row *code_row(enum code code)
{
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        if (rows[i].code == code) {
            return &rows[i];
        }
    }
    return NULL;
}
