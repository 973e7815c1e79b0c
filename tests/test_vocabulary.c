/* The table of words: well formed, in step with the scanner, and shown in the language reference as it is.
 * With TAREWRIGHT_UPDATE_GOLDEN set the reference's tables of words and units are written anew. */
#include "deck/vocabulary.h"

#include "base/file.h"
#include "deck/parse.h"
#include "support/check.h"
#include "support/golden.h"

#include <stdio.h>
#include <string.h>

#define REFERENCE "grammar/reference.md"

static const struct vocabulary_row *rows(void)
{
    return vocabulary_rows();
}

static void every_row_is_at_its_own_index(void **state)
{
    (void)state;
    for (size_t i = 0; i < WORDS; i++) {
        assert_int_equal(rows()[i].id, i);
        assert_true(rows()[i].block < BLOCKS);
    }
}

static void a_word_stands_once_in_a_block(void **state)
{
    (void)state;
    for (size_t i = 0; i < WORDS; i++) {
        for (size_t j = 0; j < i; j++) {
            if (rows()[i].block == rows()[j].block && strcmp(rows()[i].word, rows()[j].word) == 0) {
                print_error("'%s' stands twice %s\n", rows()[i].word, vocabulary_block_title(rows()[i].block));
                fail();
            }
        }
    }
}

static void every_word_says_what_it_means_in_one_line(void **state)
{
    (void)state;
    for (size_t i = 0; i < WORDS; i++) {
        const struct vocabulary_row *row = &rows()[i];
        const size_t length = strlen(row->meaning);
        const bool is_line = length > 2 && !strpbrk(row->meaning, "\n|") && !strpbrk(row->follows, "\n|");
        if (!is_line || row->meaning[length - 1] == '.' || strlen(row->example) == 0) {
            print_error("'%s' %s\n", row->word, vocabulary_block_title(row->block));
            fail();
        }
    }
}

/* Whether `text` holds `word` between signs that end words. */
static bool mentions(const char *text, const char *word)
{
    static const char letters[] = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-";
    const size_t length = strlen(word);
    for (const char *at = text; (at = strstr(at, word)); at++) {
        const bool begins = at == text || !strchr(letters, at[-1]);
        const bool ends = at[length] == '\0' || !strchr(letters, at[length]);
        if (begins && ends) {
            return true;
        }
    }
    return false;
}

static bool parses(const char *text)
{
    struct arena *arena = arena_create(NULL);
    struct diagnostics diagnostics = {.arena = arena};
    const struct source_file *file = source_create(arena, "example", "example", text, strlen(text));
    const struct statement *statements;
    const bool is_right = deck_parse_file(file, arena, &diagnostics, &statements);
    arena_free(arena);
    return is_right;
}

static void every_example_parses_and_shows_its_word(void **state)
{
    (void)state;
    for (size_t i = 0; i < WORDS; i++) {
        const struct vocabulary_row *row = &rows()[i];
        if (!parses(row->example) || !mentions(row->example, row->word)) {
            print_error("'%s': %s\n", row->word, row->example);
            fail();
        }
    }
}

static void the_scanner_reserves_the_markers_and_no_other_word(void **state)
{
    (void)state;
    for (size_t i = 0; i < WORDS; i++) {
        char text[80];
        snprintf(text, sizeof text, "word 1 ref %s", rows()[i].word);
        const bool is_marker = vocabulary_find(BLOCK_MARKER, rows()[i].word) != NULL;
        if (parses(text) == is_marker) {
            print_error("'%s' is%s reserved\n", rows()[i].word, is_marker ? " not" : "");
            fail();
        }
    }
}

static void words_are_found_in_their_block_and_in_those_it_shares(void **state)
{
    (void)state;
    const struct {
        enum vocabulary_block block;
        const char *word;
        int id; /* -1: not there */
    } cases[] = {
        {BLOCK_VESSEL, "test-pressure", WORD_VESSEL_TEST_PRESSURE},
        {BLOCK_SYMBOL, "test-pressure", WORD_SYMBOL_TEST_PRESSURE},
        {BLOCK_CASE, "test-pressure", -1},
        {BLOCK_VESSEL, "Test-pressure", -1},
        {BLOCK_VESSEL, "test-pressur", -1},
        {BLOCK_VESSEL, "", -1},
        {BLOCK_SATURATION, "show", WORD_SATURATION_SHOW},
        {BLOCK_SATURATION, "fluid", WORD_SHEET_FLUID},
        {BLOCK_SATURATION, "fill", -1},
        {BLOCK_SETTLED_PRESSURE, "fill", WORD_CHARGE_FILL},
        {BLOCK_SETTLED_PRESSURE, "table", WORD_SHEET_TABLE},
        {BLOCK_GUESS, "term", WORD_TERMS_TERM},
        {BLOCK_SHEET, "show", -1},
        {BLOCKS, "show", -1},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        const struct vocabulary_row *row = vocabulary_find(cases[i].block, cases[i].word);
        assert_int_equal(row ? (int)row->id : -1, cases[i].id);
    }
}

static void all_rows_of_a_spelling_are_visited(void **state)
{
    (void)state;
    size_t visited = 0;
    const struct vocabulary_row *row = vocabulary_next("test-pressure", NULL);
    for (; row; row = vocabulary_next("test-pressure", row)) {
        assert_string_equal(row->word, "test-pressure");
        visited++;
    }
    assert_int_equal(visited, 2);
    assert_null(vocabulary_next("no-such-word", NULL));
}

static void every_blocks_words_fit_the_list_for_suggestions(void **state)
{
    (void)state;
    const char *words[VOCABULARY_MOST];
    for (size_t i = 0; i < BLOCKS; i++) {
        const enum vocabulary_block block = (enum vocabulary_block)i;
        const size_t count = vocabulary_words(block, words, VOCABULARY_MOST);
        assert_in_range(count, 1, VOCABULARY_MOST);
        for (size_t j = 0; j < count; j++) {
            assert_non_null(vocabulary_find(block, words[j]));
        }
        assert_int_equal(vocabulary_words(block, words, 1), count);
        assert_true(strlen(vocabulary_block_title(block)) > 2);
    }
    assert_int_equal(vocabulary_words(BLOCKS, words, 1), 0);
    assert_string_equal(vocabulary_block_title(BLOCKS), "");
}

static void every_measure_has_its_dimension(void **state)
{
    (void)state;
    assert_true(dimension_equal(measure_dimension(MEASURE_GAUGE), DIMENSION_PRESSURE));
    assert_true(dimension_equal(measure_dimension(MEASURE_NUMBER), DIMENSION_NONE));
    for (size_t i = MEASURE_PRESSURE; i < MEASURES; i++) {
        assert_false(dimension_equal(measure_dimension((enum measure)i), DIMENSION_NONE));
    }
}

/* ---- The language reference ---- */

static const char *const block_names[] = {
#define BLOCK(id, title, also) [BLOCK_##id] = #id,
#define WORD(block, id, word, follows, measure, meaning, example)
#include "grammar/vocabulary.def"
#undef BLOCK
#undef WORD
};

static void add_words(enum vocabulary_block block, struct text *out)
{
    text_format(out, "| word | followed by | meaning |\n| --- | --- | --- |\n");
    for (size_t i = 0; i < WORDS; i++) {
        const struct vocabulary_row *row = &rows()[i];
        if (row->block == block) {
            text_format(out, "| `%s` | %s | %s |\n", row->word, row->follows, row->meaning);
        }
    }
}

static void add_units(struct text *out)
{
    size_t count;
    const struct unit *units = unit_rows(&count);
    text_format(out, "| unit | is |\n| --- | --- |\n");
    for (size_t i = 0; i < count; i++) {
        text_format(out, "| `%s` | %s |\n", units[i].shown.symbol, unit_definition(&units[i]));
    }
}

/* The table a line of the reference asks for, as `<!-- words VESSEL -->` does; false for any other line. */
static bool add_table(const char *line, bool is_shown[BLOCKS], struct text *out)
{
    if (strncmp(line, "<!-- units -->", 14) == 0) {
        add_units(out);
        return true;
    }
    for (size_t i = 0; i < BLOCKS; i++) {
        char mark[80];
        snprintf(mark, sizeof mark, "<!-- words %s -->\n", block_names[i]);
        if (strncmp(line, mark, strlen(mark)) == 0) {
            add_words((enum vocabulary_block)i, out);
            is_shown[i] = true;
            return true;
        }
    }
    return false;
}

/* The reference with its tables made from the program's own. */
static struct text with_tables(const char *reference, bool is_shown[BLOCKS], struct arena *arena)
{
    struct text out = {.arena = arena};
    bool is_skipping = false;
    for (const char *line = reference; *line != '\0';) {
        const size_t length = strcspn(line, "\n") + 1;
        is_skipping = is_skipping && strncmp(line, "<!-- end -->", 12) != 0;
        if (!is_skipping) {
            text_add(&out, line, length);
            is_skipping = add_table(line, is_shown, &out);
        }
        line += length;
    }
    return out;
}

static void the_reference_shows_every_table_as_it_is(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char *reference;
    size_t length;
    assert_true(file_read(arena, REFERENCE, &reference, &length));
    bool is_shown[BLOCKS] = {false};
    const struct text expected = with_tables(reference, is_shown, arena);
    assert_golden(REFERENCE, expected.bytes, expected.length);
    /* Words that only follow one other word are explained in its row. */
    is_shown[BLOCK_TERMS] = is_shown[BLOCK_STEPS] = is_shown[BLOCK_QUOTED] = is_shown[BLOCK_SHOWN] = true;
    for (size_t i = 0; i < BLOCKS; i++) {
        if (!is_shown[i]) {
            print_error("the reference has no line <!-- words %s -->\n", block_names[i]);
            fail();
        }
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_row_is_at_its_own_index),
        cmocka_unit_test(a_word_stands_once_in_a_block),
        cmocka_unit_test(every_word_says_what_it_means_in_one_line),
        cmocka_unit_test(every_example_parses_and_shows_its_word),
        cmocka_unit_test(the_scanner_reserves_the_markers_and_no_other_word),
        cmocka_unit_test(words_are_found_in_their_block_and_in_those_it_shares),
        cmocka_unit_test(all_rows_of_a_spelling_are_visited),
        cmocka_unit_test(every_blocks_words_fit_the_list_for_suggestions),
        cmocka_unit_test(every_measure_has_its_dimension),
        cmocka_unit_test(the_reference_shows_every_table_as_it_is),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
