#include "report/page.h"

#include <string.h>

/* A word behind a number is taken for its unit up to so many columns. */
enum { LONGEST_UNIT = 5 };

/* Bytes of the UTF-8 sequence at `text`, or 0 when it is broken, overlong or a control character. */
static size_t sequence_length(const unsigned char *text)
{
    static const unsigned smallest[] = {0, 0, 0x80U, 0x800U, 0x10000U};
    const size_t length = text[0] < 0x80U   ? 1
                          : text[0] < 0xC2U ? 0
                          : text[0] < 0xE0U ? 2
                          : text[0] < 0xF0U ? 3
                          : text[0] < 0xF5U ? 4
                                            : 0;
    if (length <= 1) {
        return length == 1 && text[0] >= 0x20U && text[0] != 0x7FU ? 1 : 0;
    }
    unsigned point = text[0] & (0xFFU >> (length + 1));
    for (size_t i = 1; i < length; i++) {
        if ((text[i] & 0xC0U) != 0x80U) {
            return 0;
        }
        point = point << 6 | (text[i] & 0x3FU);
    }
    const bool is_surrogate = point >= 0xD800U && point <= 0xDFFFU;
    const bool is_control = point < 0xA0U || point == 0x2028U || point == 0x2029U;
    return point < smallest[length] || point > 0x10FFFFU || is_surrogate || is_control ? 0 : length;
}

const char *page_clean(struct arena *arena, const char *text)
{
    const size_t length = strlen(text);
    char *clean = arena_copy_text(arena, text, length);
    for (size_t i = 0; i < length;) {
        const size_t sequence = sequence_length((const unsigned char *)clean + i);
        if (sequence == 0) {
            clean[i] = strchr("\t\n\r\v\f", clean[i]) ? ' ' : '?';
        }
        i += sequence == 0 ? 1 : sequence;
    }
    return clean;
}

size_t page_columns(const char *text)
{
    return text_columns(text, strlen(text));
}

static bool is_continuation(char byte)
{
    return ((unsigned char)byte & 0xC0U) == 0x80U;
}

/* Bytes of the first `width` columns of `text`, or all of it. */
static size_t bytes_of_columns(const char *text, size_t width)
{
    size_t bytes = 0;
    for (size_t columns = 0; text[bytes] != '\0' && columns < width; columns++) {
        do {
            bytes++;
        } while (is_continuation(text[bytes]));
    }
    return bytes;
}

/* Columns of the word that begins at byte `begin`. */
static size_t word_columns(const char *text, size_t begin)
{
    return text_columns(text + begin, strcspn(text + begin, " "));
}

/* True at the blank between a number and what is most likely its unit. */
static bool is_before_unit(const char *text, size_t blank)
{
    const char before = blank > 0 ? text[blank - 1] : ' ';
    const char after = text[blank + 1];
    const bool is_word = after == '%' || (after >= 'A' && after <= 'Z') || (after >= 'a' && after <= 'z');
    return before >= '0' && before <= '9' && is_word && word_columns(text, blank + 1) <= LONGEST_UNIT;
}

/* Where to end a line: after the last word that fits, but not between a number and its unit where there is another
 * place; in the middle of a word that fits on no line. */
static size_t line_bytes(const char *text, size_t width, bool at_hyphens)
{
    const size_t fitting = bytes_of_columns(text, width);
    if (text[fitting] == '\0') {
        return fitting;
    }
    const size_t leading = strspn(text, " ");
    size_t second_best = 0;
    for (size_t end = fitting; end > leading; end--) {
        if (at_hyphens && text[end - 1] == '-' && end > 1 && text[fitting] != ' ') {
            return end;
        }
        if (text[end] != ' ') {
            continue;
        }
        if (word_columns(text, end + 1) > width) {
            return fitting;
        }
        if (!is_before_unit(text, end)) {
            return end;
        }
        second_best = second_best > end ? second_best : end;
    }
    return second_best > 0 ? second_best : fitting;
}

static size_t without_trailing_blanks(const char *text, size_t length)
{
    while (length > 0 && text[length - 1] == ' ') {
        length--;
    }
    return length;
}

struct page_lines page_wrap(struct arena *arena, const char *text, size_t width, bool at_hyphens)
{
    struct page_lines lines = {0};
    do {
        const size_t bytes = line_bytes(text, width, at_hyphens);
        *ARENA_APPEND(arena, &lines) = arena_copy_text(arena, text, without_trailing_blanks(text, bytes));
        text += bytes;
        text += strspn(text, " ");
    } while (*text != '\0');
    return lines;
}

size_t page_wrapped_columns(const char *text, size_t width)
{
    size_t longest = 0;
    do {
        const size_t bytes = line_bytes(text, width, false);
        const size_t columns = text_columns(text, without_trailing_blanks(text, bytes));
        longest = columns > longest ? columns : longest;
        text += bytes;
        text += strspn(text, " ");
    } while (*text != '\0');
    return longest;
}

static void write_line(struct text *out, size_t indent, const char *line)
{
    const size_t length = without_trailing_blanks(line, strlen(line));
    if (length != 0) {
        text_pad(out, indent);
        text_add(out, line, length);
    }
    text_add(out, "\n", 1);
}

void page_line(struct text *out, size_t indent, const char *line)
{
    const char *clean = page_clean(out->arena, line);
    const size_t first = line_bytes(clean, PAGE_WIDTH, false);
    write_line(out, 0, arena_copy_text(out->arena, clean, first));
    const char *rest = clean + first;
    rest += strspn(rest, " ");
    if (*rest != '\0') {
        page_paragraph(out, indent, rest);
    }
}

void page_paragraph(struct text *out, size_t indent, const char *words)
{
    const char *clean = page_clean(out->arena, words);
    const struct page_lines lines = page_wrap(out->arena, clean + strspn(clean, " "), PAGE_WIDTH - indent, false);
    for (size_t i = 0; i < lines.count; i++) {
        write_line(out, indent, lines.items[i]);
    }
}

void page_hanging(struct text *out, size_t lead_indent, const char *lead, size_t indent, const char *words)
{
    const char *clean_lead = page_clean(out->arena, lead);
    const char *clean = page_clean(out->arena, words);
    const size_t reach = lead_indent + page_columns(clean_lead);
    if (reach >= indent) {
        page_paragraph(out, lead_indent, clean_lead);
        page_paragraph(out, indent, clean);
        return;
    }
    const struct page_lines lines = page_wrap(out->arena, clean, PAGE_WIDTH - indent, false);
    write_line(out, lead_indent,
               arena_format(out->arena, "%s%*s%s", clean_lead, (int)(indent - reach), "", lines.items[0]));
    for (size_t i = 1; i < lines.count; i++) {
        write_line(out, indent, lines.items[i]);
    }
}

void page_blank(struct text *out)
{
    text_add(out, "\n", 1);
}

void page_section(struct text *out, size_t number, const char *title)
{
    text_add(out, "\n\n", 2);
    page_hanging(out, 0, arena_format(out->arena, "%zu", number), number < 10 ? 3 : 4, title);
    page_blank(out);
}
