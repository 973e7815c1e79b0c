/* Decks of several files: where a used file is found, in which order statements stand, which files wait for a name. */
#include "base/file.h"
#include "deck/deck.h"
#include "support/check.h"
#include "support/memory_files.h"
#include "support/rationing.h"
#include "support/tree.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>

enum { FILES_IN_CASE = 8 };

struct loaded_case {
    const char *name;
    struct memory_file files[FILES_IN_CASE]; /* the first is the root; the library's folder is "library" */
    const char *tree;
    const char *names; /* of the files, in the order opened; library files with a star */
};

static const struct loaded_case cases[] = {
    {"one file", {{.path = "a.deck", .text = "x 1\ny 2"}}, "x[1] y[2]", "a.deck"},
    {"a file beside the deck",
     {{.path = "jobs/a.deck", .text = "x\nuse \"b\"\ny"}, {.path = "jobs/b.deck", .text = "z"}},
     "x z y",
     "jobs/a.deck jobs/b.deck"},
    {"a file in the library",
     {{.path = "a.deck", .text = "use \"gases\"\nx"}, {.path = "library/gases.deck", .text = "z"}},
     "z x",
     "a.deck gases.deck*"},
    {"a file beside goes before the library",
     {{.path = "a.deck", .text = "use \"gases\""},
      {.path = "gases.deck", .text = "mine"},
      {.path = "library/gases.deck", .text = "theirs"}},
     "mine",
     "a.deck gases.deck"},
    {"a folder of the library",
     {{.path = "a.deck", .text = "use \"rules/model\""}, {.path = "library/rules/model.deck", .text = "z"}},
     "z",
     "a.deck rules/model.deck*"},
    {"a library file uses its neighbour",
     {{.path = "a.deck", .text = "use \"rules/one\""},
      {.path = "library/rules/one.deck", .text = "use \"two\"\nx"},
      {.path = "library/rules/two.deck", .text = "y"}},
     "y x",
     "a.deck rules/one.deck* rules/two.deck*"},
    {"a library file uses one from the library's root",
     {{.path = "a.deck", .text = "use \"rules/one\""},
      {.path = "library/rules/one.deck", .text = "use \"sources\"\nx"},
      {.path = "library/sources.deck", .text = "y"}},
     "y x",
     "a.deck rules/one.deck* sources.deck*"},
    {"a folder above",
     {{.path = "plant/jobs/a.deck", .text = "use \"../common/b\""}, {.path = "plant/common/b.deck", .text = "z"}},
     "z",
     "plant/jobs/a.deck plant/common/b.deck"},
    {"above the folder the deck was named from",
     {{.path = "a.deck", .text = "use \"../../b\""},
      {.path = "../../b.deck", .text = "use \"./c\""},
      {.path = "../../c.deck", .text = "z"}},
     "z",
     "a.deck ../../b.deck ../../c.deck"},
    {"an absolute path",
     {{.path = "/jobs/a.deck", .text = "use \"b\""}, {.path = "/jobs/b.deck", .text = "z"}},
     "z",
     "/jobs/a.deck /jobs/b.deck"},
    {"a file is brought once",
     {{.path = "a.deck", .text = "use \"b\"\nuse \"c\"\nuse \"./b\"\nx"},
      {.path = "b.deck", .text = "y"},
      {.path = "c.deck", .text = "use \"b\"\nz"}},
     "y z x",
     "a.deck b.deck c.deck"},
    {"a library file used by its path is of the library",
     {{.path = "a.deck", .text = "use \"library/gases\""}, {.path = "library/gases.deck", .text = "z"}},
     "z",
     "a.deck gases.deck*"},
    {"an empty file",
     {{.path = "a.deck", .text = "use \"b\"\nx"}, {.path = "b.deck", .text = ""}},
     "x",
     "a.deck b.deck"},
    {"a root that is nothing but a library file",
     {{.path = "a.deck", .text = "use \"gases\""}, {.path = "library/gases.deck", .text = "x"}},
     "x",
     "a.deck gases.deck*"},
};

static const struct loaded_case waiting[] = {
    {"a file for a name that is mentioned",
     {{.path = "a.deck", .text = "use \"gases\"\nfluid argon"},
      {.path = "library/gases.deck", .text = "use \"eos/argon\" for argon\nuse \"eos/xenon\" for xenon"},
      {.path = "library/eos/argon.deck", .text = "equation argon { }"},
      {.path = "library/eos/xenon.deck", .text = "equation xenon { }"}},
     "equation[argon]{} fluid[argon]",
     "a.deck gases.deck* eos/argon.deck*"},
    {"a condition does not mention its own name",
     {{.path = "a.deck", .text = "use \"b\" for argon\nx"}, {.path = "b.deck", .text = "y"}},
     "x",
     "a.deck"},
    {"the word of a statement is a mention, as in a mixture's lines",
     {{.path = "a.deck", .text = "use \"b\" for argon\nargon 5"}, {.path = "b.deck", .text = "y"}},
     "y argon[5]",
     "a.deck b.deck"},
    {"a name in an expression, in a block, after a marker",
     {{.path = "a.deck",
       .text = "use \"b\" for p\nuse \"c\" for q\nuse \"d\" for r\n"
               "x { at 2 * (p - 1) y { z 1 ref q, no r } }"},
      {.path = "b.deck", .text = "b"},
      {.path = "c.deck", .text = "c"},
      {.path = "d.deck", .text = "d"}},
     "b c d x{at[at (2 * (p - 1))][y]{z[1][ref q][,no r]}}",
     "a.deck b.deck c.deck d.deck"},
    {"a name that only the library mentions does not count",
     {{.path = "a.deck", .text = "use \"gases\"\nx"},
      {.path = "library/gases.deck", .text = "use \"b\" for argon\ncomponent krypton { like argon }"},
      {.path = "library/b.deck", .text = "y"}},
     "component[krypton]{like[argon]} x",
     "a.deck gases.deck*"},
    {"unless a block it belongs to is led to",
     {{.path = "a.deck", .text = "use \"gases\"\nx krypton"},
      {.path = "library/gases.deck", .text = "use \"b\" for argon\ncomponent krypton { like argon }"},
      {.path = "library/b.deck", .text = "y"}},
     "y component[krypton]{like[argon]} x[krypton]",
     "a.deck gases.deck* b.deck*"},
    {"names lead on from block to block and file to file",
     {{.path = "a.deck", .text = "use \"gases\"\nx p"},
      {.path = "library/gases.deck", .text = "use \"c\" for r\nmix q { r }\nuse \"b\" for q\nmix p { part q }"},
      {.path = "library/b.deck", .text = "mix q { part r }"},
      {.path = "library/c.deck", .text = "z"}},
     "z mix[q]{r} mix[q]{part[r]} mix[p]{part[q]} x[p]",
     "a.deck gases.deck* c.deck* b.deck*"},
    {"a block of two names leads from neither to the other",
     {{.path = "a.deck", .text = "use \"gases\"\nx p"},
      {.path = "library/gases.deck", .text = "use \"b\" for q\nmix p q { y }"},
      {.path = "library/b.deck", .text = "z"}},
     "mix[p][q]{y} x[p]",
     "a.deck gases.deck*"},
    {"a file that waits may bring the deck's own mention",
     {{.path = "a.deck", .text = "use \"b\" for p\nuse \"c\" for q\nx p"},
      {.path = "b.deck", .text = "y q"},
      {.path = "c.deck", .text = "z"}},
     "y[q] z x[p]",
     "a.deck b.deck c.deck"},
};

static struct deck *load(const struct memory_file *files, size_t count, const char *library, struct arena *arena,
                         struct diagnostics *diagnostics)
{
    struct memory_files all = {.files = files, .count = count};
    const struct deck_reader reader = {memory_files_read, &all, library};
    struct deck *deck = deck_load(files[0].path, &reader, arena, diagnostics);
    /* No file is read twice. */
    assert_true(all.reads <= count);
    return deck;
}

static size_t count_files(const struct memory_file *files)
{
    size_t count = 0;
    while (count < FILES_IN_CASE && files[count].path) {
        count++;
    }
    return count;
}

static const char *names_of(const struct deck *deck, struct arena *arena)
{
    struct text out = {.arena = arena};
    for (size_t i = 0; i < deck->file_count; i++) {
        text_format(&out, "%s%s%s", i > 0 ? " " : "", deck->files[i]->name, deck->files[i]->is_library ? "*" : "");
        assert_int_equal(deck->files[i]->order, i);
    }
    return out.bytes;
}

static void check_cases(const struct loaded_case *list, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        struct diagnostics diagnostics = {.arena = arena};
        const struct deck *deck = load(list[i].files, count_files(list[i].files), "library", arena, &diagnostics);
        assert_non_null(deck);
        struct text tree = {.arena = arena};
        text_format(&tree, "%s", "");
        tree_add(deck->statements, &tree);
        const char *names = names_of(deck, arena);
        if (diagnostics.errors > 0 || strcmp(tree.bytes, list[i].tree) != 0 || strcmp(names, list[i].names) != 0) {
            print_error("%s\n  tree  %s\n  files %s\n  %s\n", list[i].name, tree.bytes, names,
                        diagnostics.errors > 0 ? diagnostics.items[0].message : "");
            fail();
        }
        assert_ptr_equal(deck->root, deck->files[0]);
        arena_free(arena);
    }
}

static void used_files_are_found_and_put_in_their_place(void **state)
{
    (void)state;
    check_cases(cases, sizeof cases / sizeof *cases);
}

static void files_with_a_condition_wait_for_its_name(void **state)
{
    (void)state;
    check_cases(waiting, sizeof waiting / sizeof *waiting);
}

/* ---- What goes wrong ---- */

struct refused_case {
    const char *name;
    struct memory_file files[FILES_IN_CASE];
    const char *messages; /* complete */
};

static const struct refused_case refusals[] = {
    {"a file that is nowhere",
     {{.path = "a.deck", .text = "x\nuse \"gasses\""}},
     "a.deck:2:5: error: 'gasses.deck' is neither beside 'a.deck' nor in the library [E402]\n"
     "      2 | use \"gasses\"\n"
     "        |     ^~~~~~~~\n"},
    {"the ending is not written",
     {{.path = "a.deck", .text = "use \"b.deck\""}, {.path = "b.deck", .text = "x"}},
     "a.deck:1:5: error: 'b.deck.deck' is neither beside 'a.deck' nor in the library [E402]\n"
     "      1 | use \"b.deck\"\n"
     "        |     ^~~~~~~~\n"
     "    hint: leave off '.deck'\n"},
    {"a file that cannot be read",
     {{.path = "a.deck", .text = "use \"b\""},
      {.path = "b.deck", .reason = EACCES},
      {.path = "library/b.deck", .text = "x"}},
     "a.deck:1:5: error: 'b.deck' cannot be read: Permission denied [E403]\n"
     "      1 | use \"b\"\n"
     "        |     ^~~\n"},
    {"a deck that uses itself",
     {{.path = "a.deck", .text = "x\nuse \"a\""}},
     "a.deck:2:5: error: 'a.deck' uses itself, by this statement [E121]\n"
     "      2 | use \"a\"\n"
     "        |     ^~~\n"
     "    hint: remove this 'use': the file is already being read\n"},
    {"files that use one another in a circle",
     {{.path = "a.deck", .text = "use \"b\""},
      {.path = "b.deck", .text = "use \"c\""},
      {.path = "c.deck", .text = "use \"b\""}},
     "c.deck:1:5: error: 'b.deck' uses itself, by this statement [E121]\n"
     "      1 | use \"b\"\n"
     "        |     ^~~\n"
     "    hint: remove this 'use': the file is already being read\n"},
    {"use without a name",
     {{.path = "a.deck", .text = "use\nuse b\nuse \"b\" \"c\"\nuse \"b\" { }\nuse \"\"\nuse \"/b\"\nuse for b"}},
     "a.deck:1:1: error: 'use' names one file [E120]\n"
     "      1 | use\n"
     "        | ^~~\n"
     "    hint: write use \"name\" or use \"name\" for something\n"
     "a.deck:2:1: error: 'use' names one file [E120]\n"
     "      2 | use b\n"
     "        | ^~~~~\n"
     "    hint: write use \"name\" or use \"name\" for something\n"
     "a.deck:3:1: error: 'use' names one file [E120]\n"
     "      3 | use \"b\" \"c\"\n"
     "        | ^~~~~~~~~~~\n"
     "    hint: write use \"name\" or use \"name\" for something\n"
     "a.deck:4:1: error: 'use' names one file [E120]\n"
     "      4 | use \"b\" { }\n"
     "        | ^~~~~~~\n"
     "    hint: write use \"name\" or use \"name\" for something\n"
     "a.deck:5:5: error: a file without a name [E120]\n"
     "      5 | use \"\"\n"
     "        |     ^~\n"
     "a.deck:6:5: error: a used file is named from this one's folder, not from '/' [E120]\n"
     "      6 | use \"/b\"\n"
     "        |     ^~~~\n"
     "a.deck:7:1: error: 'use' names one file [E120]\n"
     "      7 | use for b\n"
     "        | ^~~~~~~~~\n"
     "    hint: write use \"name\" or use \"name\" for something\n"},
    {"mistakes of all files are shown, file by file",
     {{.path = "a.deck", .text = "use \"b\"\n}\nuse \"c\""},
      {.path = "b.deck", .text = "x ) 1"},
      {.path = "c.deck", .text = "5"}},
     "a.deck:2:1: error: '}' without a '{' before it [E106]\n"
     "      2 | }\n"
     "        | ^\n"
     "b.deck:1:3: error: ')' is not expected here [E105]\n"
     "      1 | x ) 1\n"
     "        |   ^\n"
     "    hint: there is no '(' before it\n"
     "c.deck:1:1: error: a statement begins with a word, not with '5' [E105]\n"
     "      1 | 5\n"
     "        | ^\n"},
};

static void what_cannot_be_used_is_told_where_it_is_used(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof refusals / sizeof *refusals; i++) {
        struct arena *arena = arena_create(NULL);
        struct diagnostics diagnostics = {.arena = arena};
        assert_non_null(load(refusals[i].files, count_files(refusals[i].files), "library", arena, &diagnostics));
        struct text out = {.arena = arena};
        text_format(&out, "%s", "");
        diagnostics_draw(&diagnostics, &out);
        if (strcmp(out.bytes, refusals[i].messages) != 0) {
            print_error("%s\n%s", refusals[i].name, out.bytes);
            fail();
        }
        arena_free(arena);
    }
}

static void a_root_that_cannot_be_read_gives_no_deck(void **state)
{
    (void)state;
    const struct memory_file files[] = {{.path = "a.deck", .reason = EACCES}};
    struct arena *arena = arena_create(NULL);
    struct diagnostics diagnostics = {.arena = arena};
    assert_null(load(files, 1, NULL, arena, &diagnostics));
    assert_int_equal(diagnostics.items[0].code, CODE_E401);
    struct text out = {.arena = arena};
    diagnostics_draw(&diagnostics, &out);
    assert_string_equal(out.bytes, "error: 'a.deck' cannot be read: Permission denied [E401]\n");
    arena_free(arena);
}

static void without_a_library_only_neighbours_are_found(void **state)
{
    (void)state;
    const struct memory_file files[] = {{.path = "a.deck", .text = "use \"b\"\nuse \"c\""},
                                        {.path = "b.deck", .text = "x"},
                                        {.path = "library/c.deck", .text = "y"}};
    struct arena *arena = arena_create(NULL);
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck *deck = load(files, 3, NULL, arena, &diagnostics);
    assert_int_equal(deck->file_count, 2);
    assert_int_equal(diagnostics.errors, 1);
    assert_int_equal(diagnostics.items[0].code, CODE_E402);
    arena_free(arena);
}

/* A reader in which every file uses the next: each name is one letter longer. */
static bool read_endless(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    (void)context;
    const size_t name = strlen(path) - strlen(".deck");
    *text = arena_format(arena, "use \"%.*sa\"\nuse \"folder/%.*sa\"", (int)name, path, (int)name % 7, path);
    *length = strlen(*text);
    return true;
}

static void an_endless_chain_of_files_comes_to_an_end(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck_reader reader = {read_endless, NULL, NULL};
    const struct deck *deck = deck_load("a.deck", &reader, arena, &diagnostics);
    assert_true(deck->file_count <= 1000);
    assert_true(diagnostics.errors > 0);
    assert_int_equal(diagnostics.items[0].code, CODE_E122);
    arena_free(arena);
}

static void real_files_are_read(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck_reader reader = {deck_read_file, NULL, "decks/library"};
    const struct deck *deck = deck_load("decks/carbon-dioxide-fifty.deck", &reader, arena, &diagnostics);
    assert_int_equal(diagnostics.errors, 0);
    assert_true(deck->file_count > 2);
    assert_null(deck_load("decks/no-such.deck", &reader, arena, &diagnostics));
    assert_null(deck_load("decks", &reader, arena, &diagnostics));
    assert_int_equal(diagnostics.errors, 2);
    arena_free(arena);
}

/* ---- Running out of memory ---- */

static bool read_or_run_out(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (!arena_try(arena, 40000, 1)) { /* a file of some size */
        errno = ENOMEM;
        return false;
    }
    return memory_files_read(context, arena, path, text, length);
}

static void load_in(struct arena *arena, void *context)
{
    const struct deck_reader reader = {read_or_run_out, context, "library"};
    struct diagnostics diagnostics = {.arena = arena};
    assert_non_null(deck_load("a.deck", &reader, arena, &diagnostics));
    struct text out = {.arena = arena};
    diagnostics_draw(&diagnostics, &out);
}

static void running_out_of_memory_leaks_nothing(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof waiting / sizeof *waiting; i++) {
        struct memory_files all = {.files = waiting[i].files, .count = count_files(waiting[i].files)};
        assert_true(ration_until_done(load_in, &all) > 1);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(used_files_are_found_and_put_in_their_place),
        cmocka_unit_test(files_with_a_condition_wait_for_its_name),
        cmocka_unit_test(what_cannot_be_used_is_told_where_it_is_used),
        cmocka_unit_test(a_root_that_cannot_be_read_gives_no_deck),
        cmocka_unit_test(without_a_library_only_neighbours_are_found),
        cmocka_unit_test(an_endless_chain_of_files_comes_to_an_end),
        cmocka_unit_test(real_files_are_read),
        cmocka_unit_test(running_out_of_memory_leaks_nothing),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
