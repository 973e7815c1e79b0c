/* The pipeline from a deck's text to listing, JSON, tables and status, with files held in memory. */
#define _XOPEN_SOURCE 700
#include "base/file.h"
#include "run/help.h"
#include "run/library.h"
#include "run/run.h"
#include "support/check.h"
#include "support/golden.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* A made-up gas with carbon dioxide's proportions, so that nothing but this text is needed. */
#define GAS                                                                                                          \
    "component stuff { molar-mass 44 g/mol; critical-temperature 304 K; critical-pressure 73.8 bara; acentric 0.22 " \
    "}\n"                                                                                                            \
    "vessel tube { water-capacity 50 L; test-pressure 250 barg }\n"                                                  \
    "methods { lead peng-robinson }\n"                                                                               \
    "charge lot { fluid stuff; vessel tube; mass 20 kg }\n"
#define SETTLED(requirement) GAS "sheet settled-pressure { charge lot; " requirement " }\n"
#define IN_ORDER             SETTLED("require at 50 degC pressure <= test-pressure")

struct memory_file {
    const char *path, *text;
};

/* Files by path; the list ends with a NULL path. */
static bool read_memory(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    for (const struct memory_file *file = context; file->path; file++) {
        if (strcmp(file->path, path) == 0) {
            *length = strlen(file->text);
            *text = arena_copy_text(arena, file->text, *length);
            return true;
        }
    }
    errno = ENOENT;
    return false;
}

static struct run *run_text(const char *path, const char *text, struct run_request request,
                            const struct arena_source *source)
{
    struct memory_file files[] = {{path, text}, {NULL, NULL}};
    const struct deck_reader reader = {.read = read_memory, .context = files};
    request.deck_path = path;
    request.reader = &reader;
    request.version = "0.1.0";
    return run_deck(&request, source);
}

static void the_worst_status_wins(void **state)
{
    (void)state;
    const enum run_status by_weight[] = {RUN_MET, RUN_NOT_MET, RUN_UNDECIDED, RUN_DECK_WRONG, RUN_NO_FILE};
    for (size_t i = 0; i < 5; i++) {
        for (size_t j = 0; j < 5; j++) {
            assert_int_equal(run_worse(by_weight[i], by_weight[j]), by_weight[i > j ? i : j]);
        }
    }
}

static void every_status_is_reached_by_a_deck(void **state)
{
    (void)state;
    static const struct {
        const char *name, *text;
        enum run_status status;
    } cases[] = {
        {"met", SETTLED("require at 15 degC pressure <= test-pressure"), RUN_MET},
        {"no requirement", SETTLED("sweep temperature 280 K, 300 K"), RUN_MET},
        {"not met", SETTLED("require at 15 degC pressure <= 2 barg"), RUN_NOT_MET},
        {"wrong word", SETTLED("requires at 15 degC pressure <= 2 barg"), RUN_DECK_WRONG},
        {"wrong unit", SETTLED("require at 15 degC pressure <= 2 kg"), RUN_DECK_WRONG},
        {"empty", "", RUN_DECK_WRONG},
        {"no sheet", GAS, RUN_DECK_WRONG},
        {"table outside its folder", SETTLED("sweep temperature 280 K; table \"../t.csv\""), RUN_DECK_WRONG},
        {"no such file", "use \"nowhere\"\n" IN_ORDER, RUN_NO_FILE},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct run *run = run_text("some.deck", cases[i].text, (struct run_request){.mode = RUN_ANSWER}, NULL);
        assert_non_null(run);
        if (run->status != cases[i].status) {
            print_error("%s: status %d\n%s", cases[i].name, (int)run->status,
                        run->diagnostics.bytes ? run->diagnostics.bytes : "");
        }
        assert_int_equal(run->status, cases[i].status);
        const bool is_wrong = run->status == RUN_DECK_WRONG || run->status == RUN_NO_FILE;
        assert_int_equal(run->output.length == 0, is_wrong);
        assert_int_equal(run->diagnostics.length != 0, is_wrong);
        run_free(run);
    }
}

static void a_deck_that_cannot_be_read_is_told_of(void **state)
{
    (void)state;
    struct memory_file files[] = {{NULL, NULL}};
    const struct deck_reader reader = {.read = read_memory, .context = files};
    const struct run_request request = {.mode = RUN_CHECK, .deck_path = "missing.deck", .reader = &reader};
    struct run *run = run_deck(&request, NULL);
    assert_int_equal(run->status, RUN_NO_FILE);
    assert_non_null(strstr(run->diagnostics.bytes, "missing.deck"));
    assert_non_null(strstr(run->diagnostics.bytes, "E401"));
    run_free(run);
}

/* A slip of the pen in one statement hides none of the others, and a name it may have defined is not asked for. */
static void one_run_shows_mistakes_of_grammar_and_of_meaning(void **state)
{
    (void)state;
    const struct {
        const char *text, *expected[5], *unexpected;
    } cases[] = {
        {"let hot = = 5 K\nvessel v { water-capacity 50 bar; test-presure 200 barg }\n"
         "sheet saturation { fluid argon; sweep temperature hot }\n",
         {"[E105]", "[E208]", "'test-pressure'?"},
         "'hot'"},
        {"let hot = = 5 K\nsheet saturation { fluid nitogen; sweep temperature hott, hot }\n"
         "vessel v { water-capacity 3 * cap }\n",
         {"[E105]", "named 'nitogen'", "'hott' stands for no value", "'cap' stands for no value"},
         "'hot' "},
        {"use \"nowhere\"\nvessel v { water-capacity 50 bar }\n"
         "sheet saturation { fluid argon; sweep temperature 90 K }\n",
         {"[E402]", "[E208]"},
         "'argon'"},
        {"vessel v {\n water-capacity 50 bar\nlet a = 5 K + 1 bar\n", {"[E107]"}, "[E208]"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct run *run = run_text("some.deck", cases[i].text, (struct run_request){.mode = RUN_CHECK}, NULL);
        for (size_t k = 0; cases[i].expected[k] != NULL; k++) {
            assert_non_null(strstr(run->diagnostics.bytes, cases[i].expected[k]));
        }
        assert_null(strstr(run->diagnostics.bytes, cases[i].unexpected));
        run_free(run);
    }
}

static void a_listing_does_not_depend_on_where_the_deck_lies(void **state)
{
    (void)state;
    struct run *here = run_text("some.deck", IN_ORDER, (struct run_request){.mode = RUN_ANSWER}, NULL);
    struct run *there = run_text("/elsewhere/a/b/some.deck", IN_ORDER, (struct run_request){.mode = RUN_ANSWER}, NULL);
    assert_string_equal(here->output.bytes, there->output.bytes);
    assert_null(strstr(there->output.bytes, "elsewhere"));
    assert_int_equal(golden_wide_line(here->output.bytes, 100), 0);
    run_free(here);
    run_free(there);
}

static void a_check_says_that_a_deck_is_in_order(void **state)
{
    (void)state;
    struct run *run = run_text("some.deck", IN_ORDER, (struct run_request){.mode = RUN_CHECK}, NULL);
    assert_int_equal(run->status, RUN_MET);
    assert_string_equal(run->output.bytes, "some.deck: in order, 1 sheet\n");
    assert_int_equal(run->files.count, 0);
    run_free(run);
}

static void a_printed_deck_prints_the_same_again(void **state)
{
    (void)state;
    struct run *first = run_text("some.deck", IN_ORDER, (struct run_request){.mode = RUN_PRINT}, NULL);
    assert_int_equal(first->status, RUN_MET);
    struct run *second = run_text("some.deck", first->output.bytes, (struct run_request){.mode = RUN_PRINT}, NULL);
    assert_int_equal(second->status, RUN_MET);
    assert_string_equal(first->output.bytes, second->output.bytes);
    run_free(first);
    run_free(second);
}

static void files_are_named_by_deck_and_command_line(void **state)
{
    (void)state;
    const struct run_request request = {
        .mode = RUN_ANSWER, .json_path = "a.json", .listing_path = "a.listing", .out_folder = "out"};
    struct run *run = run_text("some.deck", SETTLED("sweep temperature 280 K, 300 K; table \"t.csv\""), request, NULL);
    assert_int_equal(run->status, RUN_MET);
    const char *const paths[] = {"out/t.csv", "a.json", "a.listing"};
    assert_int_equal(run->files.count, 3);
    for (size_t i = 0; i < 3; i++) {
        assert_string_equal(run->files.items[i].path, paths[i]);
        assert_true(run->files.items[i].content.length > 0);
    }
    run_free(run);
}

static char *scratch_folder(char folder[64])
{
    strcpy(folder, P_tmpdir "/tarewright-test-XXXXXX");
    assert_non_null(mkdtemp(folder));
    return folder;
}

static void a_file_that_cannot_be_written_leaves_nothing_behind(void **state)
{
    (void)state;
    char folder[64], missing[128], in_the_way[128];
    scratch_folder(folder);
    snprintf(missing, sizeof missing, "%s/not-there/a.json", folder);
    snprintf(in_the_way, sizeof in_the_way, "%s/a.listing", folder);
    assert_int_equal(mkdir(in_the_way, 0700), 0);
    const char *const paths[] = {missing, in_the_way};
    for (size_t i = 0; i < 2; i++) {
        struct run *run =
            run_text("some.deck", IN_ORDER, (struct run_request){.mode = RUN_ANSWER, .json_path = paths[i]}, NULL);
        assert_int_equal(run->status, RUN_MET);
        run_write(run);
        assert_int_equal(run->status, RUN_NO_FILE);
        assert_non_null(strstr(run->diagnostics.bytes, "E410"));
        run_free(run);
    }
    assert_int_equal(rmdir(in_the_way), 0);
    assert_int_equal(rmdir(folder), 0);
}

static void a_device_is_written_through_and_not_replaced(void **state)
{
    (void)state;
    static const struct {
        const char *path;
        enum run_status status;
    } cases[] = {{"/dev/null", RUN_MET}, {"/dev/full", RUN_NO_FILE}};
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct stat about;
        const struct run_request request = {.mode = RUN_ANSWER, .json_path = cases[i].path};
        struct run *run = run_text("some.deck", IN_ORDER, request, NULL);
        run_write(run);
        assert_int_equal(run->status, cases[i].status);
        assert_int_equal(stat(cases[i].path, &about), 0);
        assert_true(S_ISCHR(about.st_mode));
        run_free(run);
    }
}

static void the_library_is_the_one_named_first(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    assert_string_equal(library_find("asked", "named", arena), "asked");
    assert_string_equal(library_find(NULL, "named", arena), "named");
    /* What lies beside this test's own program depends on where it was built. */
    const char *found = library_find(NULL, NULL, arena);
    assert_true(!found || strstr(found, "/library"));
    arena_free(arena);
}

static void a_result_is_not_written_over_the_deck_or_another_result(void **state)
{
    (void)state;
    char folder[64], deck[128], other[128];
    scratch_folder(folder);
    snprintf(deck, sizeof deck, "%s/a.deck", folder);
    snprintf(other, sizeof other, "%s/./a.deck", folder);
    struct arena *arena = arena_create(NULL);
    assert_true(file_write(arena, deck, IN_ORDER, strlen(IN_ORDER)));
    static const char *const codes[] = {"E416", "E412"};
    for (size_t i = 0; i < 2; i++) {
        const char *json = i == 0 ? other : "same.json";
        struct run *run =
            run_text(deck, IN_ORDER,
                     (struct run_request){.mode = RUN_ANSWER, .json_path = json, .listing_path = "same.json"}, NULL);
        run_write(run);
        assert_int_equal(run->status, RUN_NO_FILE);
        assert_non_null(strstr(run->diagnostics.bytes, codes[i]));
        run_free(run);
    }
    char *text;
    size_t length;
    assert_true(file_read(arena, deck, &text, &length));
    assert_string_equal(text, IN_ORDER);
    assert_int_equal(access("same.json", F_OK), -1);
    arena_free(arena);
    unlink(deck);
    assert_int_equal(rmdir(folder), 0);
}

/* Memory that gives out at the call numbered `left`. */
struct failing {
    size_t left, held;
};

static void *take_or_fail(void *context, size_t bytes)
{
    struct failing *failing = context;
    if (failing->left == 0) {
        return NULL;
    }
    failing->left--;
    void *block = malloc(bytes);
    failing->held += block != NULL;
    return block;
}

static void give_back(void *context, void *block)
{
    struct failing *failing = context;
    failing->held--;
    free(block);
}

/* Every block the run asks for fails once: the run is refused, and what it held is given back. */
static void memory_may_run_out_anywhere(void **state)
{
    (void)state;
    bool is_done = false;
    size_t calls = 0;
    for (; !is_done; calls++) {
        struct failing failing = {.left = calls};
        const struct arena_source source = {take_or_fail, give_back, &failing};
        struct run *run =
            run_text("some.deck", IN_ORDER, (struct run_request){.mode = RUN_ANSWER, .json_path = "a.json"}, &source);
        is_done = run != NULL;
        assert_true(!run || run->status == RUN_MET);
        run_free(run);
        assert_int_equal(failing.held, 0);
    }
    assert_true(calls > 3);
}

static void help_knows_words_units_methods_codes_and_lists(void **state)
{
    (void)state;
    static const struct {
        const char *topic, *says;
    } cases[] = {
        {"test-pressure", "in a vessel block"},
        {"E101", "no place in a deck"},
        {"e101", "no place in a deck"},
        {"psig", "psi above 101 325 Pa"},
        {"peng-robinson", "mixtures"},
        {"reference", "pure gases"},
        {"units", "0.45359237 kg"},
        {"methods", "ideal-gas"},
        {"codes", "E401"},
        {"words", "water-capacity"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct text out = {.arena = arena_create(NULL)};
        const char *nearest;
        assert_true(help_topic(cases[i].topic, &out, &nearest));
        assert_null(nearest);
        if (!strstr(out.bytes, cases[i].says)) {
            print_error("help %s does not say '%s':\n%s", cases[i].topic, cases[i].says, out.bytes);
            fail();
        }
        assert_int_equal(golden_wide_line(out.bytes, 100), 0);
        arena_free(out.arena);
    }
}

static void help_offers_the_nearest_word(void **state)
{
    (void)state;
    struct text out = {.arena = arena_create(NULL)};
    const char *nearest;
    assert_false(help_topic("tset-pressure", &out, &nearest));
    assert_string_equal(nearest, "test-pressure");
    assert_false(help_topic("qqqqqqqqqq", &out, &nearest));
    assert_null(nearest);
    assert_int_equal(out.length, 0);
    arena_free(out.arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_worst_status_wins),
        cmocka_unit_test(every_status_is_reached_by_a_deck),
        cmocka_unit_test(a_deck_that_cannot_be_read_is_told_of),
        cmocka_unit_test(one_run_shows_mistakes_of_grammar_and_of_meaning),
        cmocka_unit_test(a_listing_does_not_depend_on_where_the_deck_lies),
        cmocka_unit_test(a_check_says_that_a_deck_is_in_order),
        cmocka_unit_test(a_printed_deck_prints_the_same_again),
        cmocka_unit_test(files_are_named_by_deck_and_command_line),
        cmocka_unit_test(a_file_that_cannot_be_written_leaves_nothing_behind),
        cmocka_unit_test(a_device_is_written_through_and_not_replaced),
        cmocka_unit_test(the_library_is_the_one_named_first),
        cmocka_unit_test(a_result_is_not_written_over_the_deck_or_another_result),
        cmocka_unit_test(memory_may_run_out_anywhere),
        cmocka_unit_test(help_knows_words_units_methods_codes_and_lists),
        cmocka_unit_test(help_offers_the_nearest_word),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
