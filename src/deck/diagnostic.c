#include "deck/diagnostic.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum {
    PAGE_COLUMNS = 100,  /* the listing's width */
    GUTTER_COLUMNS = 10, /* of "      3 | " */
    LINE_COLUMNS = PAGE_COLUMNS - GUTTER_COLUMNS,
    COLUMNS_BEFORE_CARET = 50, /* of a line that is too long to be shown from its start */
    TAB_COLUMNS = 4
};

static bool is_error(enum code code)
{
    const struct code_row *row = code_row(code);
    return !row || row->severity == 'E';
}

/* An error where there already is one follows from it; a warning is dropped only when it says the same again. */
static bool is_repeated(const struct diagnostics *all, enum code code, struct location at)
{
    if (!at.file) {
        return false;
    }
    const bool error = is_error(code);
    for (size_t i = 0; i < all->count; i++) {
        const struct diagnostic *item = &all->items[i];
        const bool is_same_place = item->at.file == at.file && item->at.begin == at.begin;
        if (is_same_place && (item->code == code || (error && is_error(item->code)))) {
            return true;
        }
    }
    return false;
}

static char *format_text(struct arena *arena, const char *format, va_list arguments)
    __attribute__((format(printf, 2, 0)));

static char *format_text(struct arena *arena, const char *format, va_list arguments)
{
    va_list again;
    va_copy(again, arguments);
    const int length = vsnprintf(NULL, 0, format, again);
    va_end(again);
    char *text = arena_alloc(arena, (length < 0 ? 0 : (size_t)length) + 1, 1);
    if (length > 0) {
        vsnprintf(text, (size_t)length + 1, format, arguments);
    }
    return text;
}

struct diagnostic *diagnose(struct diagnostics *all, enum code code, struct location at, const char *format, ...)
{
    all->dropped = (struct diagnostic){.code = code, .at = at};
    if (is_repeated(all, code, at)) {
        return &all->dropped;
    }
    size_t *tally = is_error(code) ? &all->errors : &all->warnings;
    *tally += 1;
    if (*tally > DIAGNOSTICS_MOST) {
        return &all->dropped;
    }
    va_list arguments;
    va_start(arguments, format);
    const char *message = format_text(all->arena, format, arguments);
    va_end(arguments);
    struct diagnostic *item = ARENA_APPEND(all->arena, all);
    *item = (struct diagnostic){.code = code, .at = at, .message = message, .order = all->count};
    return item;
}

void diagnostic_hint(struct diagnostics *all, struct diagnostic *of, const char *format, ...)
{
    if (of == &all->dropped) {
        return;
    }
    va_list arguments;
    va_start(arguments, format);
    of->hint = format_text(all->arena, format, arguments);
    va_end(arguments);
}

void diagnostics_count_more(struct diagnostics *all, size_t more)
{
    all->errors += more;
}

static int compare_sizes(size_t a, size_t b)
{
    return (a > b) - (a < b);
}

static int compare_diagnostics(const void *first, const void *second)
{
    const struct diagnostic *a = first;
    const struct diagnostic *b = second;
    int by = compare_sizes(a->at.file ? a->at.file->order + 1 : 0, b->at.file ? b->at.file->order + 1 : 0);
    by = by != 0 ? by : compare_sizes(a->at.begin, b->at.begin);
    return by != 0 ? by : compare_sizes(a->order, b->order);
}

/* A line being drawn from `from`: the cells so far and the columns that the marked bytes take. */
struct drawn_line {
    struct text *out;
    size_t columns;
    size_t mark_from, mark_to;
};

/* So far back from the caret that up to `most` columns lie between, or the line's start. */
static const char *go_back(const char *line, const char *caret, size_t most)
{
    const char *left = caret;
    for (size_t columns = 0; left > line && columns < most;) {
        left--;
        columns += ((unsigned char)*left & 0xc0U) == 0x80U ? 0U : *left == '\t' ? TAB_COLUMNS : 1U;
    }
    return left;
}

/* Start of the shown part: the line's start when the caret is near it, else some characters before the caret. */
static const char *find_left_end(const char *line, const char *caret)
{
    const char *left = go_back(line, caret, LINE_COLUMNS - 20);
    return left == line ? line : go_back(line, caret, COLUMNS_BEFORE_CARET);
}

/* Draws the character at `at` in the cells a terminal gives it; returns the bytes it took. */
static size_t draw_character(struct drawn_line *line, const char *at, size_t left)
{
    const size_t length = utf8_length(at, left);
    const unsigned char byte = (unsigned char)*at;
    if (length == 3 && memcmp(at, "\xef\xbb\xbf", length) == 0) { /* a byte-order mark takes no column */
        return length;
    }
    if (byte == '\t') {
        const size_t blanks = TAB_COLUMNS - line->columns % TAB_COLUMNS;
        text_pad(line->out, blanks);
        line->columns += blanks;
        return 1;
    }
    if (length == 0 || byte < 0x20 || byte == 0x7f) {
        text_add(line->out, "?", 1);
    } else {
        text_add(line->out, at, length);
    }
    line->columns++;
    return length > 1 ? length : 1;
}

static void draw_cells(struct drawn_line *line, const char *from, const char *end, const char *begin, const char *stop)
{
    const char *at = from;
    while (at < end && line->columns < LINE_COLUMNS) {
        if (at <= begin) {
            line->mark_from = line->columns;
        }
        at += draw_character(line, at, (size_t)(end - at));
        if (at <= stop) {
            line->mark_to = line->columns;
        }
    }
    if (begin >= end) {
        line->mark_from = line->columns;
    }
    if (at < end) {
        text_add(line->out, "...", 3);
    }
}

/* The line of a place with its number, and below it a caret under the first byte and tildes under the rest. */
static void draw_place(struct text *out, struct location at)
{
    const struct source_file *file = at.file;
    const size_t line = location_line(at);
    const char *start = file->text + file->line_starts[line - 1];
    const char *end = line < file->line_count ? file->text + file->line_starts[line] - 1 : file->text + file->length;
    if (end > start && end[-1] == '\r') {
        end--;
    }
    const char *begin = file->text + (at.begin < file->length ? at.begin : file->length);
    const char *stop = file->text + (at.end < file->length ? at.end : file->length);
    const char *from = find_left_end(start, begin < end ? begin : end);
    struct drawn_line drawn = {.out = out};
    text_format(out, "%7zu | ", line);
    if (from > start) {
        text_add(out, "...", 3);
        drawn.columns = 3;
    }
    draw_cells(&drawn, from, end, begin, stop < end ? stop : end);
    text_format(out, "\n%7s | ", "");
    text_pad(out, drawn.mark_from);
    text_add(out, "^", 1);
    for (size_t i = drawn.mark_from + 1; i < drawn.mark_to; i++) {
        text_add(out, "~", 1);
    }
    text_add(out, "\n", 1);
}

static void draw_head(struct text *out, struct location at)
{
    if (at.file) {
        text_format(out, "%s:%zu:%zu: ", at.file->name, location_line(at), location_column(at));
    }
}

static void draw_diagnostic(const struct diagnostic *item, struct text *out)
{
    const struct code_row *row = code_row(item->code);
    draw_head(out, item->at);
    text_format(out, "%s: %s [%s]\n", is_error(item->code) ? "error" : "warning", item->message, row ? row->name : "?");
    if (item->at.file) {
        draw_place(out, item->at);
    }
    if (item->hint) {
        text_format(out, "    hint: %s\n", item->hint);
    }
    if (item->note) {
        text_format(out, "    note: ");
        draw_head(out, item->note_at);
        text_format(out, "%s\n", item->note);
        if (item->note_at.file) {
            draw_place(out, item->note_at);
        }
    }
}

static void draw_rest(size_t all, const char *what, struct text *out)
{
    if (all > DIAGNOSTICS_MOST) {
        text_format(out, "... and %zu more %s\n", all - DIAGNOSTICS_MOST, what);
    }
}

void diagnostics_draw(struct diagnostics *all, struct text *out)
{
    if (all->count > 0) {
        qsort(all->items, all->count, sizeof *all->items, compare_diagnostics);
    }
    for (size_t i = 0; i < all->count; i++) {
        draw_diagnostic(&all->items[i], out);
    }
    draw_rest(all->errors, "errors", out);
    draw_rest(all->warnings, "warnings", out);
}

enum { LONGEST_WORD = 48 };

static char folded(char letter)
{
    return letter >= 'A' && letter <= 'Z' ? (char)(letter - 'A' + 'a') : letter;
}

static size_t smallest_of(size_t a, size_t b)
{
    return a < b ? a : b;
}

/* Insertions, deletions, substitutions and swaps of neighbours that turn one word into the other (optimal string
 * alignment), by rows of the usual table; both words are at most LONGEST_WORD long. */
static size_t word_distance(const char *a, size_t a_length, const char *b, size_t b_length)
{
    size_t rows[3][LONGEST_WORD + 1];
    for (size_t j = 0; j <= b_length; j++) {
        rows[0][j] = j;
    }
    for (size_t i = 1; i <= a_length; i++) {
        size_t *row = rows[i % 3];
        const size_t *above = rows[(i + 2) % 3];
        const size_t *two_above = rows[(i + 1) % 3];
        row[0] = i;
        for (size_t j = 1; j <= b_length; j++) {
            const char x = folded(a[i - 1]);
            const char y = folded(b[j - 1]);
            row[j] = smallest_of(above[j - 1] + (x != y), smallest_of(above[j], row[j - 1]) + 1);
            if (i > 1 && j > 1 && x == folded(b[j - 2]) && y == folded(a[i - 2])) {
                row[j] = smallest_of(row[j], two_above[j - 2] + 1);
            }
        }
    }
    return rows[a_length % 3][b_length];
}

const char *nearest_word(const char *word, const char *const *known, size_t count)
{
    const size_t length = strlen(word);
    /* A third of the letters may be wrong; more is another word. */
    size_t most = length < 3 ? 1 : (length + 1) / 3;
    const char *nearest = NULL;
    for (size_t i = 0; length <= LONGEST_WORD && i < count; i++) {
        const size_t known_length = strlen(known[i]);
        const size_t apart = known_length > length ? known_length - length : length - known_length;
        if (known_length > LONGEST_WORD || apart > most || strcmp(word, known[i]) == 0) {
            continue; /* the word itself is no help, if it is known elsewhere */
        }
        const size_t distance = word_distance(word, length, known[i], known_length);
        if (distance <= most && distance < length) {
            nearest = known[i];
            most = distance > 0 ? distance - 1 : 0;
            if (distance == 0) {
                return nearest;
            }
        }
    }
    return nearest;
}
