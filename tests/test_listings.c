/* Every example deck and every deck of the language reference runs; an example's listing is the committed one. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "run/run.h"
#include "support/check.h"
#include "support/golden.h"

#include <dirent.h>
#include <errno.h>
#include <jansson.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { DECKS_MOST = 200, NAME_BYTES = 128, PAGE_COLUMNS = 100 };

#define FENCE_DECK "fence.deck"

/* The usual reader, except for one text that is held in memory. */
static bool read_fence_or_file(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (strcmp(path, FENCE_DECK) == 0) {
        const char *fence = context;
        *length = strlen(fence);
        *text = arena_copy_text(arena, fence, *length);
        return true;
    }
    return deck_read_file(NULL, arena, path, text, length);
}

static struct run *run_deck_or_fence(const char *path, char *fence)
{
    const struct deck_reader reader = {.read = read_fence_or_file, .context = fence, .library_folder = "decks/library"};
    const struct run_request request = {
        .mode = RUN_ANSWER, .deck_path = path, .reader = &reader, .version = TAREWRIGHT_VERSION, .json_path = "a.json"};
    return run_deck(&request, NULL);
}

static struct run *run_deck_at(const char *path)
{
    return run_deck_or_fence(path, NULL);
}

static int by_name(const void *a, const void *b)
{
    return strcmp(a, b);
}

/* The names of the decks in decks/, without their ending, sorted. */
static size_t example_names(char names[DECKS_MOST][NAME_BYTES])
{
    DIR *folder = opendir("decks");
    assert_non_null(folder);
    size_t count = 0;
    for (struct dirent *entry; (entry = readdir(folder));) {
        const char *ending = strstr(entry->d_name, ".deck");
        if (ending && ending[5] == '\0' && ending - entry->d_name < NAME_BYTES) {
            assert_true(count < DECKS_MOST);
            snprintf(names[count++], NAME_BYTES, "%.*s", (int)(ending - entry->d_name), entry->d_name);
        }
    }
    closedir(folder);
    qsort(names, count, sizeof *names, by_name);
    return count;
}

static void assert_fit_to_be_filed(const char *name, const struct run *run)
{
    const char *const never[] = {" nan", " -nan", " inf", " -inf", " -0.0 ", "/work", "/tmp", "/home", "(null)"};
    for (size_t i = 0; i < sizeof never / sizeof *never; i++) {
        if (strstr(run->output.bytes, never[i])) {
            print_error("%s: the listing says '%s'\n", name, never[i]);
            fail();
        }
    }
    const size_t wide = golden_wide_line(run->output.bytes, PAGE_COLUMNS);
    if (wide != 0) {
        print_error("%s: line %zu of the listing is wider than the page\n", name, wide);
        fail();
    }
}

static void assert_json_parses(const struct run *run)
{
    for (size_t i = 0; i < run->files.count; i++) {
        if (strcmp(run->files.items[i].path, "a.json") == 0) {
            json_t *tree = json_loads(run->files.items[i].content.bytes, 0, NULL);
            assert_non_null(tree);
            json_decref(tree);
        }
    }
}

static void every_example_deck_gives_its_committed_listing(void **state)
{
    (void)state;
    static char names[DECKS_MOST][NAME_BYTES];
    const size_t count = example_names(names);
    assert_true(count >= 8);
    bool all_match = true;
    for (size_t i = 0; i < count; i++) {
        char deck[2 * NAME_BYTES], listing[2 * NAME_BYTES];
        snprintf(deck, sizeof deck, "decks/%s.deck", names[i]);
        snprintf(listing, sizeof listing, "tests/golden/listings/%s.listing", names[i]);
        struct run *run = run_deck_at(deck);
        assert_non_null(run);
        if (run->status == RUN_DECK_WRONG || run->status == RUN_NO_FILE) {
            print_error("%s\n%s", deck, run->diagnostics.bytes);
            fail();
        }
        assert_fit_to_be_filed(deck, run);
        assert_json_parses(run);
        all_match = golden_matches(listing, run->output.bytes, run->output.length) && all_match;
        run_free(run);
    }
    assert_true(all_match);
}

static void a_deck_whose_requirement_is_not_met_says_so(void **state)
{
    (void)state;
    struct run *run = run_deck_at("decks/overfilled.deck");
    assert_int_equal(run->status, RUN_NOT_MET);
    assert_non_null(strstr(run->output.bytes, "NOT MET"));
    run_free(run);
}

static void two_runs_of_a_deck_are_the_same_to_the_byte(void **state)
{
    (void)state;
    struct run *first = run_deck_at("decks/carbon-dioxide-fifty.deck");
    struct run *second = run_deck_at("decks/carbon-dioxide-fifty.deck");
    assert_int_equal(first->output.length, second->output.length);
    assert_memory_equal(first->output.bytes, second->output.bytes, first->output.length);
    assert_int_equal(first->files.count, second->files.count);
    for (size_t i = 0; i < first->files.count; i++) {
        assert_string_equal(first->files.items[i].content.bytes, second->files.items[i].content.bytes);
    }
    run_free(first);
    run_free(second);
}

/* Decks in the reference stand between a line of ```deck and one of ```. */
static void every_deck_of_the_reference_runs(void **state)
{
    (void)state;
    static const char opening[] = "\n```deck\n", closing[] = "\n```";
    struct arena *arena = arena_create(NULL);
    char *text;
    size_t length, count = 0;
    assert_true(file_read(arena, "grammar/reference.md", &text, &length));
    for (const char *at = strstr(text, opening); at; at = strstr(at, opening)) {
        at += strlen(opening);
        const char *end = strstr(at - 1, closing);
        assert_non_null(end);
        const size_t bytes = end > at ? (size_t)(end - at) : 0;
        struct run *run = run_deck_or_fence(FENCE_DECK, arena_copy_text(arena, at, bytes));
        assert_non_null(run);
        if (run->status == RUN_DECK_WRONG || run->status == RUN_NO_FILE) {
            print_error("a deck of the reference:\n%.*s\n%s", (int)bytes, at, run->diagnostics.bytes);
            fail();
        }
        assert_fit_to_be_filed("a deck of the reference", run);
        run_free(run);
        count++;
    }
    assert_true(count > 0);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_example_deck_gives_its_committed_listing),
        cmocka_unit_test(a_deck_whose_requirement_is_not_met_says_so),
        cmocka_unit_test(two_runs_of_a_deck_are_the_same_to_the_byte),
        cmocka_unit_test(every_deck_of_the_reference_runs),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
