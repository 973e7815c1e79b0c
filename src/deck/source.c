#include "deck/source.h"

#include "base/file.h"

#include <string.h>

static size_t count_lines(const char *text, size_t length)
{
    size_t lines = 1;
    const char *const end = text + length;
    for (const char *at = text; (at = memchr(at, '\n', (size_t)(end - at))); at++) {
        lines++;
    }
    return lines;
}

static const uint32_t *find_lines(struct arena *arena, const char *text, size_t length, size_t lines)
{
    uint32_t *starts = arena_alloc(arena, lines, sizeof *starts);
    size_t line = 1;
    const char *const end = text + length;
    for (const char *at = text; (at = memchr(at, '\n', (size_t)(end - at))); at++) {
        starts[line++] = (uint32_t)(at + 1 - text);
    }
    return starts;
}

struct source_file *source_create(struct arena *arena, const char *name, const char *path, const char *text,
                                  size_t length)
{
    struct source_file *file = arena_alloc(arena, 1, sizeof *file);
    const size_t lines = count_lines(text, length);
    *file = (struct source_file){
        .name = name,
        .path = path,
        .text = text,
        .length = length,
        .sha256 = file_sha256(arena, text, length),
        .line_starts = find_lines(arena, text, length, lines),
        .line_count = lines,
    };
    return file;
}

/* Index of the last line that starts at or before the offset. */
static size_t line_index(const struct source_file *file, uint32_t offset)
{
    size_t low = 0;
    size_t high = file->line_count;
    while (high - low > 1) {
        const size_t middle = low + (high - low) / 2;
        if (file->line_starts[middle] <= offset) {
            low = middle;
        } else {
            high = middle;
        }
    }
    return low;
}

size_t location_line(struct location at)
{
    return at.file ? line_index(at.file, at.begin) + 1 : 0;
}

size_t location_column(struct location at)
{
    return at.file ? at.begin - at.file->line_starts[line_index(at.file, at.begin)] + 1 : 0;
}

struct location location_span(struct location first, struct location last)
{
    return (struct location){first.file, first.begin, last.end > first.begin ? last.end : first.end};
}

/* The smallest code point that needs so many bytes; a longer spelling of a smaller one is not valid (RFC 3629). */
static bool is_shortest(uint32_t point, size_t bytes)
{
    const uint32_t smallest[] = {0, 0, 0x80, 0x800, 0x10000};
    return point >= smallest[bytes];
}

size_t utf8_length(const char *text, size_t left)
{
    if (left == 0) {
        return 0;
    }
    const unsigned char lead = (unsigned char)text[0];
    if (lead < 0x80) {
        return 1;
    }
    const size_t bytes = lead >= 0xf0 ? 4 : lead >= 0xe0 ? 3 : 2;
    if (lead < 0xc2 || lead > 0xf4 || bytes > left) {
        return 0;
    }
    uint32_t point = lead & (0xffU >> (bytes + 1));
    for (size_t i = 1; i < bytes; i++) {
        const unsigned char next = (unsigned char)text[i];
        if ((next & 0xc0U) != 0x80U) {
            return 0;
        }
        point = point << 6 | (next & 0x3fU);
    }
    const bool is_surrogate = point >= 0xd800 && point <= 0xdfff;
    return is_shortest(point, bytes) && !is_surrogate && point <= 0x10ffff ? bytes : 0;
}
