#include "report/listing_internal.h"
#include "report/page.h"

#include <string.h>

/* Left edges of the document block and of what stands beside its words. */
enum { BLOCK_INDENT = 2, BLOCK_TEXT = 12, DIGEST_GROUP = 8 };

/* Case number and revision on the left, the program's version on the right. */
static void draw_case_line(const struct result *result, struct text *out)
{
    struct text left = {.arena = out->arena};
    text_pad(&left, BLOCK_INDENT);
    text_format(&left, "%s", result->number ? page_clean(out->arena, result->number) : "");
    if (result->revision) {
        text_format(&left, "  rev %s", page_clean(out->arena, result->revision));
    }
    const char *version = arena_format(out->arena, "tarewright %s", result->version ? result->version : "");
    const size_t taken = text_columns(left.bytes, left.length);
    const size_t wanted = page_columns(version) + BLOCK_INDENT;
    if (taken + wanted < PAGE_WIDTH) {
        text_pad(&left, PAGE_WIDTH - wanted - taken);
        text_format(&left, "%s", version);
        page_line(out, BLOCK_INDENT, left.bytes);
    } else {
        page_line(out, BLOCK_INDENT, left.bytes);
        page_paragraph(out, BLOCK_INDENT, version);
    }
}

static const char *grouped_digest(struct arena *arena, const char *digest)
{
    struct text grouped = {.arena = arena};
    const size_t length = strlen(digest);
    text_format(&grouped, "sha256");
    for (size_t i = 0; i < length; i += DIGEST_GROUP) {
        text_format(&grouped, " %.*s", DIGEST_GROUP, digest + i);
    }
    return grouped.bytes;
}

static void draw_file(const char *lead, const char *name, const char *digest, struct text *out)
{
    page_hanging(out, BLOCK_INDENT, lead, BLOCK_TEXT, name ? name : "(unnamed)");
    if (digest) {
        page_paragraph(out, BLOCK_TEXT + 2, grouped_digest(out->arena, digest));
    }
}

static void draw_files(const struct result *result, struct text *out)
{
    draw_file("deck", result->deck_name, result->deck_sha256, out);
    for (size_t i = 0; i < result->library.count; i++) {
        const struct library_row *row = &result->library.items[i];
        draw_file(i == 0 ? "library" : "", row->name, row->sha256, out);
    }
}

struct tally {
    size_t all, met, not_met, undecided;
};

static struct tally tally_requirements(const struct result *result)
{
    struct tally tally = {0};
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct requirement *one = sheet->first_requirement; one; one = one->next) {
            tally.all++;
            tally.met += one->state == REQUIREMENT_MET;
            tally.not_met += one->state == REQUIREMENT_NOT_MET;
            tally.undecided += one->state == REQUIREMENT_UNDECIDED;
        }
    }
    return tally;
}

static const char *verdict_words(const struct result *result, struct arena *arena)
{
    const struct tally tally = tally_requirements(result);
    struct text words = {.arena = arena};
    text_format(&words, "%s", counted(arena, tally.all, "requirement"));
    if (tally.all != 0 && tally.met == tally.all) {
        text_format(&words, tally.all == 1 ? ": met" : ": all met");
    } else if (tally.all != 0) {
        const char *separator = ":";
        if (tally.not_met != 0) {
            text_format(&words, "%s %zu NOT MET", separator, tally.not_met);
            separator = ",";
        }
        if (tally.undecided != 0) {
            text_format(&words, "%s %zu undecided", separator, tally.undecided);
            separator = ",";
        }
        if (tally.met != 0) {
            text_format(&words, "%s %zu met", separator, tally.met);
        }
    }
    const size_t close = result_close_verdicts(result);
    if (close != 0) {
        text_format(&words, "; %zu WITHIN UNCERTAINTY", close);
    }
    if (result->is_undecided) {
        text_format(&words, "; a question is left undecided, see the sheets");
    }
    return words.bytes;
}

static void draw_verdict(const struct result *result, struct text *out)
{
    page_hanging(out, BLOCK_INDENT, "VERDICT", BLOCK_TEXT, verdict_words(result, out->arena));
    for (size_t i = 0; i < result->headlines.count; i++) {
        page_paragraph(out, BLOCK_TEXT, result->headlines.items[i]);
    }
    struct text warnings = {.arena = out->arena};
    text_format(&warnings, "%s", counted(out->arena, result->warnings.count, "warning"));
    if (result->warnings.count != 0) {
        text_format(&warnings, ", section %zu", section_of_warnings(result));
    }
    page_paragraph(out, BLOCK_TEXT, warnings.bytes);
}

void listing_head(const struct result *result, struct text *out)
{
    draw_case_line(result, out);
    if (result->title) {
        page_paragraph(out, BLOCK_INDENT, result->title);
    }
    for (size_t i = 0; i < result->notes.count; i++) {
        page_paragraph(out, BLOCK_INDENT, result->notes.items[i]);
    }
    page_blank(out);
    draw_files(result, out);
    page_blank(out);
    draw_verdict(result, out);
}

/* Columns of the line number and of the mark behind it; a long line goes on behind the other mark. */
enum { NUMBER_COLUMNS = 6, TAB_STOP = 4 };
#define LINE_MARK " | "
#define MORE_MARK " \\ "

/* A deck line with tabs drawn as blanks, without the carriage return that some editors end it with. */
static const char *printable_line(struct arena *arena, const char *line, size_t length)
{
    struct text printable = {.arena = arena};
    if (length > 0 && line[length - 1] == '\r') {
        length--;
    }
    for (size_t begin = 0, column = 0; begin < length;) {
        const char *tab = memchr(line + begin, '\t', length - begin);
        const size_t end = tab ? (size_t)(tab - line) : length;
        text_add(&printable, line + begin, end - begin);
        column += text_columns(line + begin, end - begin);
        if (tab) {
            const size_t blanks = TAB_STOP - column % TAB_STOP;
            text_pad(&printable, blanks);
            column += blanks;
        }
        begin = end + (tab != NULL);
    }
    return printable.bytes ? page_clean(arena, printable.bytes) : "";
}

static void draw_deck_line(size_t number, const char *line, struct text *out)
{
    const size_t room = PAGE_WIDTH - NUMBER_COLUMNS - strlen(LINE_MARK);
    const struct page_lines lines = page_wrap(out->arena, line, room, false);
    for (size_t i = 0; i < lines.count; i++) {
        if (i == 0) {
            page_line(out, 0, arena_format(out->arena, "%*zu" LINE_MARK "%s", NUMBER_COLUMNS, number, lines.items[i]));
        } else {
            page_line(out, 0, arena_format(out->arena, "%*s" MORE_MARK "%s", NUMBER_COLUMNS, "", lines.items[i]));
        }
    }
}

void listing_deck(const struct result *result, struct text *out)
{
    page_section(out, SECTION_DECK, "The deck as read");
    const char *line = result->deck_text ? result->deck_text : "";
    for (size_t number = 1; *line != '\0'; number++) {
        const size_t length = strcspn(line, "\n");
        draw_deck_line(number, printable_line(out->arena, line, length), out);
        line += length + (line[length] == '\n');
    }
}
