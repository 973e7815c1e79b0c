/* Messages: drawn whole against golden files, and how they are sorted, dropped, counted and marked. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "deck/diagnostic.h"
#include "deck/parse.h"
#include "support/check.h"
#include "support/golden.h"

#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define FOLDER "tests/golden/diagnostics"

enum { DECKS_MOST = 100, NAME_BYTES = 64, PATH_BYTES = 200, PAGE = 100 };

static int by_name(const void *left, const void *right)
{
    return strcmp(left, right);
}

/* The decks of the folder without their ending, sorted. */
static size_t deck_names(char names[DECKS_MOST][NAME_BYTES])
{
    DIR *folder = opendir(FOLDER);
    assert_non_null(folder);
    size_t count = 0;
    for (const struct dirent *entry; (entry = readdir(folder)) != NULL;) {
        const char *ending = strstr(entry->d_name, ".deck");
        if (ending != NULL && ending[5] == '\0') {
            assert_true(count < DECKS_MOST);
            snprintf(names[count++], NAME_BYTES, "%.*s", (int)(ending - entry->d_name), entry->d_name);
        }
    }
    closedir(folder);
    qsort(names, count, sizeof *names, by_name);
    return count;
}

static struct source_file *open_deck(struct arena *arena, const char *name)
{
    const char *path = arena_format(arena, FOLDER "/%s.deck", name);
    const char *shown = arena_format(arena, "%s.deck", name);
    char *text;
    size_t length;
    assert_true(file_read(arena, path, &text, &length));
    return source_create(arena, shown, path, text, length);
}

static void wrong_decks_are_told_as_in_the_golden_files(void **state)
{
    (void)state;
    char names[DECKS_MOST][NAME_BYTES];
    const size_t count = deck_names(names);
    assert_true(count >= 30);
    bool is_same = true;
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        struct diagnostics diagnostics = {.arena = arena};
        const struct statement *statements;
        assert_false(deck_parse_file(open_deck(arena, names[i]), arena, &diagnostics, &statements));
        struct text out = {.arena = arena};
        diagnostics_draw(&diagnostics, &out);
        const char *path = arena_format(arena, FOLDER "/%s.expected", names[i]);
        is_same = golden_matches(path, out.bytes, out.length) && is_same;
        if (golden_wide_line(out.bytes, PAGE + 40) > 0) { /* a message may be longer than the page, a quoted line not */
            print_error("%s: line %zu is too wide\n", names[i], golden_wide_line(out.bytes, PAGE + 40));
            is_same = false;
        }
        arena_free(arena);
    }
    assert_true(is_same);
}

/* Every message about text stands in a golden file, so that each is drawn and read at least once. */
static void each_code_of_the_parser_has_a_golden_deck(void **state)
{
    (void)state;
    char names[DECKS_MOST][NAME_BYTES];
    const size_t count = deck_names(names);
    bool is_seen[200] = {false};
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        struct diagnostics diagnostics = {.arena = arena};
        const struct statement *statements;
        deck_parse_file(open_deck(arena, names[i]), arena, &diagnostics, &statements);
        for (size_t j = 0; j < diagnostics.count; j++) {
            is_seen[diagnostics.items[j].code] = true;
        }
        arena_free(arena);
    }
    const enum code codes[] = {CODE_E101, CODE_E102, CODE_E103, CODE_E104, CODE_E105,
                               CODE_E106, CODE_E107, CODE_E108, CODE_E109, CODE_E110};
    for (size_t i = 0; i < sizeof codes / sizeof *codes; i++) {
        assert_true(is_seen[codes[i]]);
    }
}

/* ---- Drawing ---- */

struct drawing {
    struct arena *arena;
    struct diagnostics all;
    const struct source_file *file;
};

static struct drawing draw_on(const char *text)
{
    struct drawing it = {.arena = arena_create(NULL)};
    it.all.arena = it.arena;
    it.file = source_create(it.arena, "job.deck", "job.deck", text, strlen(text));
    return it;
}

static struct location place(const struct drawing *on, uint32_t begin, uint32_t end)
{
    return (struct location){on->file, begin, end};
}

static const char *drawn(struct drawing *it)
{
    struct text out = {.arena = it->arena};
    text_format(&out, "%s", "");
    diagnostics_draw(&it->all, &out);
    return out.bytes;
}

static void a_message_has_place_line_mark_hint_and_note(void **state)
{
    (void)state;
    struct drawing it = draw_on("vessel v {\n  test-presure 300 barg\n}\n");
    struct diagnostic *message = diagnose(&it.all, CODE_E112, place(&it, 13, 25), "no word '%s'", "test-presure");
    diagnostic_hint(&it.all, message, "did you mean '%s'?", "test-pressure");
    message->note = "the block begins here";
    message->note_at = place(&it, 9, 10);
    assert_string_equal(drawn(&it), "job.deck:2:3: error: no word 'test-presure' [E112]\n"
                                    "      2 |   test-presure 300 barg\n"
                                    "        |   ^~~~~~~~~~~~\n"
                                    "    hint: did you mean 'test-pressure'?\n"
                                    "    note: job.deck:1:10: the block begins here\n"
                                    "      1 | vessel v {\n"
                                    "        |          ^\n");
    arena_free(it.arena);
}

static void a_message_about_nowhere_has_no_line(void **state)
{
    (void)state;
    struct drawing it = draw_on("");
    struct diagnostic *message = diagnose(&it.all, CODE_E401, (struct location){NULL, 0, 0}, "no file");
    message->note = "elsewhere";
    assert_string_equal(drawn(&it), "error: no file [E401]\n    note: elsewhere\n");
    assert_int_equal(location_line((struct location){NULL, 5, 6}), 0);
    assert_int_equal(location_column((struct location){NULL, 5, 6}), 0);
    arena_free(it.arena);
}

static void messages_stand_in_the_order_of_files_and_places(void **state)
{
    (void)state;
    struct drawing it = draw_on("a\nb\nc\n");
    struct source_file *second = source_create(it.arena, "used.deck", "used.deck", "d\n", 2);
    second->order = 1;
    diagnose(&it.all, CODE_E112, (struct location){second, 0, 1}, "fourth");
    diagnose(&it.all, CODE_E112, place(&it, 4, 5), "third");
    diagnose(&it.all, CODE_W301, place(&it, 2, 3), "second, a warning");
    diagnose(&it.all, CODE_E112, place(&it, 0, 1), "first");
    assert_string_equal(drawn(&it), "job.deck:1:1: error: first [E112]\n      1 | a\n        | ^\n"
                                    "job.deck:2:1: warning: second, a warning [W301]\n      2 | b\n        | ^\n"
                                    "job.deck:3:1: error: third [E112]\n      3 | c\n        | ^\n"
                                    "used.deck:1:1: error: fourth [E112]\n      1 | d\n        | ^\n");
    assert_int_equal(it.all.errors, 3);
    assert_int_equal(it.all.warnings, 1);
    arena_free(it.arena);
}

static void a_second_error_at_a_place_is_a_consequence(void **state)
{
    (void)state;
    struct drawing it = draw_on("abc\n");
    diagnose(&it.all, CODE_E112, place(&it, 0, 3), "kept");
    struct diagnostic *dropped = diagnose(&it.all, CODE_E114, place(&it, 0, 1), "dropped");
    diagnostic_hint(&it.all, dropped, "nothing comes of it");
    diagnose(&it.all, CODE_W301, place(&it, 0, 1), "a warning is kept");
    diagnose(&it.all, CODE_W301, place(&it, 0, 1), "but not twice");
    diagnose(&it.all, CODE_W300, place(&it, 0, 1), "another warning is kept");
    diagnose(&it.all, CODE_E112, place(&it, 1, 2), "kept too");
    assert_int_equal(it.all.count, 4);
    assert_int_equal(it.all.errors, 2);
    assert_null(strstr(drawn(&it), "dropped"));
    arena_free(it.arena);
}

static void beyond_a_hundred_errors_are_counted_only(void **state)
{
    (void)state;
    struct drawing it = draw_on("................................................................................."
                                ".................................................................................\n");
    for (uint32_t i = 0; i < 150; i++) {
        struct diagnostic *message = diagnose(&it.all, CODE_E101, place(&it, i, i + 1), "wrong");
        assert_non_null(message);
        diagnostic_hint(&it.all, message, "a hint");
    }
    assert_int_equal(it.all.count, DIAGNOSTICS_MOST);
    assert_int_equal(it.all.errors, 150);
    assert_non_null(strstr(drawn(&it), "... and 50 more errors\n"));
    diagnostics_count_more(&it.all, 7);
    assert_non_null(strstr(drawn(&it), "... and 57 more errors\n"));
    arena_free(it.arena);
}

struct marked {
    const char *name, *text;
    uint32_t begin, end;
    const char *lines;
};

static const struct marked marks[] = {
    {"one byte", "a b c", 2, 3, "      1 | a b c\n        |   ^\n"},
    {"nothing wide", "a b c", 2, 2, "      1 | a b c\n        |   ^\n"},
    {"after the end", "a b", 3, 3, "      1 | a b\n        |    ^\n"},
    {"beyond the file", "a b", 9, 12, "      1 | a b\n        |    ^\n"},
    {"a line end", "a b\nc", 3, 4, "      1 | a b\n        |    ^\n"},
    {"over several lines", "a b\nc", 2, 5, "      1 | a b\n        |   ^\n"},
    {"an empty line", "a\n\nb", 2, 2, "      2 | \n        | ^\n"},
    {"the empty last line", "a\n", 2, 2, "      2 | \n        | ^\n"},
    {"tabs go to every fourth column", "\ta\tbc", 3, 5, "      1 |     a   bc\n        |         ^~\n"},
    {"a tab itself", "a\tb", 1, 2, "      1 | a   b\n        |  ^~~\n"},
    {"characters of two bytes", "\xc3\xbc\xc3\xb6 b", 5, 6, "      1 | \xc3\xbc\xc3\xb6 b\n        |    ^\n"},
    {"a marked character of three bytes", "a \xe2\x82\xac b", 2, 5, "      1 | a \xe2\x82\xac b\n        |   ^\n"},
    {"bytes that are no text", "a \xff\x01 b", 5, 6, "      1 | a ?? b\n        |      ^\n"},
    {"line ends of two bytes", "a b\r\nc", 2, 3, "      1 | a b\n        |   ^\n"},
};

static void marks_stand_under_what_they_mark(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof marks / sizeof *marks; i++) {
        struct drawing it = draw_on(marks[i].text);
        diagnose(&it.all, CODE_E101, place(&it, marks[i].begin, marks[i].end), "m");
        const char *lines = strchr(drawn(&it), '\n') + 1;
        if (strcmp(lines, marks[i].lines) != 0) {
            print_error("%s\n%s  expected\n%s", marks[i].name, lines, marks[i].lines);
            fail();
        }
        arena_free(it.arena);
    }
}

/* A mark anywhere in a long line of any kind of character: the page holds, and the caret is under its byte. */
static void long_lines_are_shortened_around_the_caret(void **state)
{
    (void)state;
    char text[1200];
    memset(text, '.', sizeof text);
    text[sizeof text - 1] = '\0';
    for (uint32_t at = 0; at + 1 < sizeof text; at += 7) {
        text[at] = '@';
        struct drawing it = draw_on(text);
        diagnose(&it.all, CODE_E101, place(&it, at, at + 300), "m");
        const char *line = strchr(drawn(&it), '\n') + 1;
        const char *mark = strchr(line, '\n') + 1;
        assert_int_equal(golden_wide_line(line, PAGE + 3), 0);
        assert_int_equal(line[strchr(mark, '^') - mark], '@');
        text[at] = '.';
        arena_free(it.arena);
    }
}

/* ---- Places ---- */

static void places_are_counted_from_one(void **state)
{
    (void)state;
    struct drawing it = draw_on("ab\n\ncd\n");
    const struct {
        uint32_t begin;
        size_t line, column;
    } places[] = {{0, 1, 1}, {1, 1, 2}, {2, 1, 3}, {3, 2, 1}, {4, 3, 1}, {6, 3, 3}, {7, 4, 1}};
    for (size_t i = 0; i < sizeof places / sizeof *places; i++) {
        const struct location at = place(&it, places[i].begin, places[i].begin);
        assert_int_equal(location_line(at), places[i].line);
        assert_int_equal(location_column(at), places[i].column);
    }
    const struct location span = location_span(place(&it, 1, 2), place(&it, 4, 6));
    assert_int_equal(span.begin, 1);
    assert_int_equal(span.end, 6);
    arena_free(it.arena);
}

static void utf8_is_told_from_what_is_not(void **state)
{
    (void)state;
    const struct {
        const char *bytes;
        size_t left, length;
        const char *source;
    } cases[] = {
        {"a", 1, 1, "RFC 3629, section 3"},
        {"", 0, 0, "nothing left"},
        {"\xc2\x80", 2, 2, "RFC 3629: U+0080, the first of two bytes"},
        {"\xdf\xbf", 2, 2, "RFC 3629: U+07FF, the last of two bytes"},
        {"\xe0\xa0\x80", 3, 3, "RFC 3629: U+0800"},
        {"\xef\xbf\xbf", 3, 3, "RFC 3629: U+FFFF"},
        {"\xed\x9f\xbf", 3, 3, "RFC 3629: U+D7FF, before the surrogates"},
        {"\xee\x80\x80", 3, 3, "RFC 3629: U+E000, after the surrogates"},
        {"\xf0\x90\x80\x80", 4, 4, "RFC 3629: U+10000"},
        {"\xf4\x8f\xbf\xbf", 4, 4, "RFC 3629: U+10FFFF, the last of all"},
        {"\xf4\x90\x80\x80", 4, 0, "RFC 3629: beyond U+10FFFF"},
        {"\xf5\x80\x80\x80", 4, 0, "RFC 3629: F5 never appears"},
        {"\xc0\xaf", 2, 0, "RFC 3629, section 10: an overlong slash"},
        {"\xc1\xbf", 2, 0, "RFC 3629: C1 never appears"},
        {"\xe0\x9f\xbf", 3, 0, "RFC 3629: overlong"},
        {"\xf0\x8f\xbf\xbf", 4, 0, "RFC 3629: overlong"},
        {"\xed\xa0\x80", 3, 0, "RFC 3629: a surrogate"},
        {"\xed\xbf\xbf", 3, 0, "RFC 3629: a surrogate"},
        {"\x80", 1, 0, "RFC 3629: a continuation alone"},
        {"\xe2\x82", 2, 0, "cut"},
        {"\xe2\x28\xa1", 3, 0, "RFC 3629: no continuation"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        if (utf8_length(cases[i].bytes, cases[i].left) != cases[i].length) {
            print_error("case %zu: %s\n", i, cases[i].source);
            fail();
        }
    }
}

/* ---- Nearest words ---- */

static void a_misspelled_word_gets_the_nearest(void **state)
{
    (void)state;
    static const char *const known[] = {
        "test-pressure", "working-pressure", "tare", "water-capacity", "bara", "barg", "K"};
    const struct {
        const char *word, *nearest;
    } cases[] = {
        {"test-presure", "test-pressure"},
        {"tset-pressure", "test-pressure"},
        {"Test-Pressure", "test-pressure"},
        {"pressure", NULL},
        {"working-presure", "working-pressure"},
        {"taer", "tare"},
        {"watercapacity", "water-capacity"},
        {"BARA", "bara"},
        {"brag", "barg"},
        {"zebra-stripes", NULL},
        {"", NULL},
        {"x", NULL},
        {"k", "K"},
        {"tare", NULL},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        const char *nearest = nearest_word(cases[i].word, known, sizeof known / sizeof *known);
        const bool is_right =
            nearest && cases[i].nearest ? strcmp(nearest, cases[i].nearest) == 0 : nearest == cases[i].nearest;
        if (!is_right) {
            print_error("'%s' gives '%s'\n", cases[i].word, nearest ? nearest : "nothing");
            fail();
        }
    }
    char endless[300];
    memset(endless, 'a', sizeof endless);
    endless[sizeof endless - 1] = '\0';
    const char *const odd[] = {endless, "tare"};
    assert_null(nearest_word(endless, odd, 2));
    assert_string_equal(nearest_word("tara", odd, 2), "tare");
    assert_null(nearest_word("tara", NULL, 0));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(wrong_decks_are_told_as_in_the_golden_files),
        cmocka_unit_test(each_code_of_the_parser_has_a_golden_deck),
        cmocka_unit_test(a_message_has_place_line_mark_hint_and_note),
        cmocka_unit_test(a_message_about_nowhere_has_no_line),
        cmocka_unit_test(messages_stand_in_the_order_of_files_and_places),
        cmocka_unit_test(a_second_error_at_a_place_is_a_consequence),
        cmocka_unit_test(beyond_a_hundred_errors_are_counted_only),
        cmocka_unit_test(marks_stand_under_what_they_mark),
        cmocka_unit_test(long_lines_are_shortened_around_the_caret),
        cmocka_unit_test(places_are_counted_from_one),
        cmocka_unit_test(utf8_is_told_from_what_is_not),
        cmocka_unit_test(a_misspelled_word_gets_the_nearest),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
