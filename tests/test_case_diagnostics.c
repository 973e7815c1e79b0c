/* What elaboration says about wrong decks, drawn whole; and that nothing a deck can say makes it fall over. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "deck/vocabulary.h"
#include "support/elaborated.h"
#include "support/golden.h"

#include <dirent.h>
#include <stdlib.h>

#define FOLDER "tests/golden/case"

enum { DECKS_MOST = 100, NAME_BYTES = 64, PATH_BYTES = 200 };

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

static char *read_deck(struct arena *arena, const char *name)
{
    char path[PATH_BYTES];
    char *text;
    size_t length;
    snprintf(path, sizeof path, FOLDER "/%s.deck", name);
    assert_true(file_read(arena, path, &text, &length));
    return text;
}

static void wrong_decks_are_told_as_in_the_golden_files(void **state)
{
    (void)state;
    char names[DECKS_MOST][NAME_BYTES];
    const size_t count = deck_names(names);
    assert_true(count > 20);
    bool is_same = true;
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        struct elaborated it = elaborate_in(arena, read_deck(arena, names[i]));
        const char *messages = elaborated_messages(&it);
        char path[PATH_BYTES];
        snprintf(path, sizeof path, FOLDER "/%s.expected", names[i]);
        is_same = golden_matches(path, messages, strlen(messages)) && is_same;
        elaborated_end(&it);
    }
    assert_true(is_same);
}

/* Every error of elaboration stands in a golden file, so that each is drawn and read at least once. */
static void each_code_of_elaboration_has_a_golden_deck(void **state)
{
    (void)state;
    char names[DECKS_MOST][NAME_BYTES];
    const size_t count = deck_names(names);
    size_t row_count;
    const struct code_row *rows = code_rows(&row_count);
    bool is_seen[400] = {false};
    for (size_t i = 0; i < count; i++) {
        struct arena *arena = arena_create(NULL);
        struct elaborated it = elaborate_in(arena, read_deck(arena, names[i]));
        for (size_t j = 0; j < it.diagnostics.count; j++) {
            if (it.diagnostics.items[j].code < 400) {
                is_seen[it.diagnostics.items[j].code] = true;
            }
        }
        elaborated_end(&it);
    }
    for (size_t i = 0; i < row_count; i++) {
        if (rows[i].code >= 200 && rows[i].code < 300 && !is_seen[rows[i].code]) {
            print_error("%s is in no golden deck\n", rows[i].name);
            fail();
        }
    }
}

/* ---- Running out of memory ---- */

struct rationed {
    size_t left; /* calls that still succeed */
    size_t held;
};

static void *take(void *context, size_t bytes)
{
    struct rationed *ration = context;
    if (ration->left == 0) {
        return NULL;
    }
    ration->left--;
    ration->held++;
    return malloc(bytes);
}

static void give_back(void *context, void *block)
{
    struct rationed *ration = context;
    ration->held -= block != NULL;
    free(block);
}

static const char BUSY_DECK[] =
    "case \"busy\" { number \"1\"; note \"n\"; units psig }\nuse \"small\"\nlet hot = 65 degC\n"
    "vessel v { water-capacity 50.2 L; test-pressure 250 barg; fitting \"f\" 300 barg }\n"
    "charge c { fluid carbon-dioxide; vessel v; fill 50 barg at 15 degC }\n"
    "methods { lead reference; beside peng-robinson }\n"
    "component vapid { parameters peng-robinson { shift 2 cm3/mol }; groups CH3 1, CH2 2 }\n"
    "component argon { groups CH2 1 }\ngroup-pair CH3 CH2 65.5 MPa, 105.7 MPa\n"
    "pair argon vapid { peng-robinson kij 0.1; peng-robinson-1978 kij 0.2, lij 0.1; reacts \"slowly\" }\n"
    "mixture m by volume at (15 degC, 1 bara) { argon 2 % +/- 0.1 %; vapid 5 ppm; carbon-dioxide rest }\n"
    "sheet permissible-charge { fluid carbon-dioxide; vessel v; rules liquefied-high-pressure\n"
    "  entry \"UN 1013\"; quote pressure at 15 degC, hot; require at hot pressure <= 2 / 3 * test-pressure }\n"
    "sheet settled-pressure { charge c; sweep temperature from 0 degC to 60 degC by 0.5 K }\n";

/* True when the elaboration came to its end, with `calls` allocations allowed. */
static bool elaborates_within(size_t calls)
{
    struct rationed ration = {.left = calls};
    const struct arena_source source = {.take = take, .give_back = give_back, .context = &ration};
    struct arena *arena = arena_create(&source);
    if (arena == NULL) {
        return false;
    }
    char text[sizeof BUSY_DECK];
    memcpy(text, BUSY_DECK, sizeof text);
    volatile bool is_done = false;
    jmp_buf place;
    if (setjmp(place) == 0) {
        arena_on_exhaustion(arena, &place);
        const struct elaborated it = elaborate_in(arena, text);
        is_done = it.tree != NULL;
    }
    arena_free(arena);
    assert_int_equal(ration.held, 0);
    return is_done;
}

static void running_out_of_memory_leaks_nothing(void **state)
{
    (void)state;
    size_t calls = 0;
    while (!elaborates_within(calls)) {
        calls++;
        assert_true(calls < 100000);
    }
    assert_true(calls > 1);
}

/* ---- Odd trees ---- */

/* A generator of its own, so that every run is the same: Lehmer's, modulus 2^31 - 1, multiplier 48271. */
static uint32_t next_random(uint32_t *state)
{
    *state = (uint32_t)((uint64_t)*state * 48271U % 2147483647U);
    return *state;
}

/* Swaps, drops and doubles words of a deck: most results parse, few mean anything. */
static void shuffle_words(const char *from, char *to, size_t capacity, uint32_t *random)
{
    size_t length = 0;
    while (*from != '\0' && length + 80 < capacity) {
        const size_t word = strcspn(from, " \n{};") + 1;
        const uint32_t chance = next_random(random) % 120;
        const size_t taken = from[word - 1] == '\0' ? word - 1 : word;
        static const char *const odd[] = {" -1 ", " 1e300 K ",  " (1, 2, 3) ", " \"\" ",     " at ", " no liquid ",
                                          " <= ", " pressure ", " 5 degC ",    " x - 1 kg ", " , "};
        if (chance == 0) {
            length += (size_t)snprintf(to + length, capacity - length, "%s", odd[next_random(random) % 11]);
        }
        for (uint32_t times = chance == 1 ? 0 : chance == 2 ? 2 : 1; times > 0 && taken < 40; times--) {
            memcpy(to + length, from, taken);
            length += taken;
        }
        from += taken;
    }
    to[length] = '\0';
}

static void shuffled_decks_are_refused_or_understood_and_nothing_worse(void **state)
{
    (void)state;
    uint32_t random = 20211;
    size_t understood = 0;
    for (int i = 0; i < 3000; i++) {
        char text[3000];
        shuffle_words(BUSY_DECK, text, sizeof text, &random);
        struct elaborated it = elaborate(text);
        assert_true((it.tree == NULL) == (it.diagnostics.errors != 0));
        understood += it.tree != NULL;
        elaborated_messages(&it);
        elaborated_end(&it);
    }
    assert_true(understood > 0);
}

static void each_word_of_the_vocabulary_is_at_home_in_some_reader(void **state)
{
    (void)state;
    /* A statement of every word in every top-level block: each is read or refused with a message. */
    static const char *const heads[] = {"vessel b",
                                        "charge b",
                                        "component b",
                                        "mixture b by mole",
                                        "pair argon vapid",
                                        "component b { parameters peng-robinson { shift 1 cm3/mol } }; component b",
                                        "equation b",
                                        "rule b",
                                        "entry \"b\"",
                                        "case \"b\"",
                                        "methods",
                                        "sheet permissible-charge",
                                        "sheet settled-pressure",
                                        "sheet saturation",
                                        "sheet fugacity",
                                        "sheet draw-down",
                                        "sheet preparation"};
    const struct vocabulary_row *rows = vocabulary_rows();
    for (size_t i = 0; i < sizeof heads / sizeof *heads; i++) {
        for (size_t j = 0; j < WORDS; j++) {
            char text[1000];
            snprintf(text, sizeof text, "use \"small\"\n%s { %s }\n", heads[i], rows[j].example);
            struct elaborated it = elaborate(text);
            elaborated_end(&it);
            snprintf(text, sizeof text, "use \"small\"\n%s { %s }\n", heads[i], rows[j].word);
            it = elaborate(text);
            elaborated_end(&it);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(wrong_decks_are_told_as_in_the_golden_files),
        cmocka_unit_test(each_code_of_elaboration_has_a_golden_deck),
        cmocka_unit_test(running_out_of_memory_leaks_nothing),
        cmocka_unit_test(shuffled_decks_are_refused_or_understood_and_nothing_worse),
        cmocka_unit_test(each_word_of_the_vocabulary_is_at_home_in_some_reader),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
