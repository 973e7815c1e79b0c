#include "support/golden.h"

#include "base/file.h"
#include "base/text.h"
#include "support/check.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>

static void print_line_at(const char *lead, const char *text, size_t length, size_t at)
{
    size_t begin = at < length ? at : length;
    while (begin > 0 && text[begin - 1] != '\n') {
        begin--;
    }
    size_t end = begin;
    while (end < length && text[end] != '\n') {
        end++;
    }
    print_error("  %s %.*s\n", lead, (int)(end - begin), text + begin);
}

static bool is_same(const char *path, const char *wanted, size_t wanted_length, const char *text, size_t length)
{
    size_t at = 0, line = 1;
    while (at < length && at < wanted_length && text[at] == wanted[at]) {
        line += text[at] == '\n';
        at++;
    }
    if (at == length && at == wanted_length) {
        return true;
    }
    print_error("%s:%zu differs\n", path, line);
    print_line_at("file", wanted, wanted_length, at);
    print_line_at("now ", text, length, at);
    return false;
}

bool golden_matches(const char *path, const char *text, size_t length)
{
    struct arena *arena = arena_create(NULL);
    bool matches = false;
    char *wanted;
    size_t wanted_length;
    if (getenv("TAREWRIGHT_UPDATE_GOLDEN")) {
        matches = file_write(arena, path, text, length);
    } else if (file_read(arena, path, &wanted, &wanted_length)) {
        matches = is_same(path, wanted, wanted_length, text, length);
    }
    if (!matches) {
        print_error("%s: %s\n", path, errno ? strerror(errno) : "differs");
    }
    arena_free(arena);
    return matches;
}

size_t golden_wide_line(const char *text, size_t most)
{
    for (size_t line = 1; *text != '\0'; line++) {
        const size_t length = strcspn(text, "\n");
        if (text_columns(text, length) > most) {
            return line;
        }
        text += length + (text[length] == '\n');
    }
    return 0;
}
