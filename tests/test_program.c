/* The built program, as a user meets it: its verbs, its streams, its exit statuses, and 200 broken decks.
 *
 * TAREWRIGHT names the program; make sets it. Every run has a limit on its processor time as a safety net. */
#define _POSIX_C_SOURCE 200809L
#define _DEFAULT_SOURCE
#include "base/file.h"
#include "base/text.h"
#include "support/check.h"

#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

enum { PATH_BYTES = 512, ARGUMENTS_MOST = 12, SECONDS_MOST = 60 };

/* A scratch folder with what one run left in it. */
struct scene {
    struct arena *arena;
    char folder[64];
    char out[PATH_BYTES], err[PATH_BYTES];
    const char *output, *messages;
    int status; /* exit status, or -1 */
    int signal; /* that ended it, or 0 */
};

static const char *program(void)
{
    const char *named = getenv("TAREWRIGHT");
    return named ? named : "build/tarewright";
}

static int begin(void **state)
{
    struct arena *arena = arena_create(NULL);
    struct scene *scene = arena_alloc(arena, 1, sizeof *scene);
    scene->arena = arena;
    strcpy(scene->folder, "/tmp/tarewright-test-XXXXXX");
    if (!mkdtemp(scene->folder)) {
        return -1;
    }
    snprintf(scene->out, sizeof scene->out, "%s/stdout", scene->folder);
    snprintf(scene->err, sizeof scene->err, "%s/stderr", scene->folder);
    *state = scene;
    return 0;
}

static int end(void **state)
{
    struct scene *scene = *state;
    unlink(scene->out);
    unlink(scene->err);
    const int is_left = rmdir(scene->folder);
    arena_free(scene->arena);
    return is_left;
}

static const char *path_in(const struct scene *scene, const char *name)
{
    return arena_format(scene->arena, "%s/%s", scene->folder, name);
}

static _Noreturn void become_program(const struct scene *scene, char *const arguments[])
{
    const struct rlimit seconds = {SECONDS_MOST, SECONDS_MOST};
    setrlimit(RLIMIT_CPU, &seconds);
    const int out = open(scene->out, O_WRONLY | O_CREAT | O_TRUNC, 0600);
    const int err = open(scene->err, O_WRONLY | O_CREAT | O_TRUNC, 0600);
    if (out >= 0 && err >= 0 && dup2(out, STDOUT_FILENO) >= 0 && dup2(err, STDERR_FILENO) >= 0) {
        execv(arguments[0], arguments);
    }
    _exit(127);
}

static const char *read_text(struct scene *scene, const char *path)
{
    char *text;
    size_t length;
    assert_true(file_read(scene->arena, path, &text, &length));
    return text;
}

/* Runs the program with the words given, up to a NULL. */
static void run(struct scene *scene, const char *const words[])
{
    char *arguments[ARGUMENTS_MOST + 2] = {(char *)(size_t)program()};
    for (size_t i = 0; words[i]; i++) {
        assert_true(i < ARGUMENTS_MOST);
        arguments[i + 1] = arena_copy_text(scene->arena, words[i], strlen(words[i]));
    }
    const pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        become_program(scene, arguments);
    }
    int status = 0;
    assert_int_equal(waitpid(child, &status, 0), child);
    scene->status = WIFEXITED(status) ? WEXITSTATUS(status) : -1;
    scene->signal = WIFSIGNALED(status) ? WTERMSIG(status) : 0;
    scene->output = read_text(scene, scene->out);
    scene->messages = read_text(scene, scene->err);
}

#define RUN(scene, ...) run((scene), (const char *const[]){__VA_ARGS__, NULL})

static void version_and_help_go_to_standard_output(void **state)
{
    struct scene *scene = *state;
    RUN(scene, "--version");
    assert_int_equal(scene->status, 0);
    assert_string_equal(scene->output, "tarewright " TAREWRIGHT_VERSION "\n");
    static const char *const topics[][2] = {{"help", NULL}, {"--help", NULL}, {"help", "vessel"}, {"help", "E101"}};
    for (size_t i = 0; i < sizeof topics / sizeof *topics; i++) {
        RUN(scene, topics[i][0], topics[i][1]);
        assert_int_equal(scene->status, 0);
        assert_true(strlen(scene->output) > 0);
        assert_string_equal(scene->messages, "");
    }
}

static void a_command_line_that_makes_no_sense_is_refused(void **state)
{
    struct scene *scene = *state;
    static const char *const lines[][5] = {
        {NULL},
        {"--jsn", "x", "a.deck"},
        {"a.deck", "--json"},
        {"a.deck", "--json="},
        {"run"},
        {"run", "a.deck", "b.deck"},
        {"check", "a.deck", "--json", "x.json"},
        {"frobnicate", "a.deck"},
        {"show", "valve", "propane"},
        {"show", "gas"},
        {"help", "one", "two"},
        {"help", "qqqqqqqqqq"},
        {"a", "b", "c", "d"},
        {"show", "gas", "unobtainium"},
        {"show", "gas", "../gases\" }"},
    };
    for (size_t i = 0; i < sizeof lines / sizeof *lines; i++) {
        run(scene, lines[i]);
        assert_int_equal(scene->signal, 0);
        assert_int_equal(scene->status, 2);
        assert_string_equal(scene->output, "");
        assert_non_null(strstr(scene->messages, "error: "));
        assert_non_null(strstr(scene->messages, "[E"));
    }
}

static void a_deck_that_is_not_there_is_status_four(void **state)
{
    struct scene *scene = *state;
    const char *const decks[] = {path_in(scene, "missing.deck"), scene->folder};
    for (size_t i = 0; i < 2; i++) {
        RUN(scene, "run", decks[i]);
        assert_int_equal(scene->status, 4);
        assert_string_equal(scene->output, "");
        assert_non_null(strstr(scene->messages, "[E401]"));
    }
}

static void a_listing_that_cannot_be_delivered_is_status_four(void **state)
{
    struct scene *scene = *state;
    RUN(scene, "decks/overfilled.deck", "--json", path_in(scene, "no/such/folder.json"), "--out", scene->folder);
    assert_int_equal(scene->status, 4);
    assert_non_null(strstr(scene->messages, "[E410]"));
}

static void results_go_where_the_command_line_says(void **state)
{
    struct scene *scene = *state;
    const char *listing = path_in(scene, "a.listing"), *json = path_in(scene, "a.json");
    RUN(scene, "decks/overfilled.deck", "--out", scene->folder);
    assert_int_equal(scene->status, 1);
    const char *printed = scene->output;
    assert_true(strlen(printed) > 0);
    RUN(scene, "decks/overfilled.deck", "--listing", listing, "--json", json, "--out", scene->folder);
    assert_int_equal(scene->status, 1);
    assert_string_equal(scene->output, "");
    assert_string_equal(read_text(scene, listing), printed);
    assert_int_equal(read_text(scene, json)[0], '{');
    unlink(listing);
    unlink(json);
}

static void what_is_known_of_a_gas_is_shown_with_sources(void **state)
{
    struct scene *scene = *state;
    RUN(scene, "show", "gas", "carbon-dioxide");
    assert_int_equal(scene->status, 0);
    assert_non_null(strstr(scene->output, "critical-temperature"));
    assert_non_null(strstr(scene->output, "304.1282 K"));
    assert_non_null(strstr(scene->output, "(1996) 1509"));
    assert_non_null(strstr(scene->output, "carbon-dioxide, peng-robinson-twu"));
    assert_non_null(strstr(scene->output, "Bell"));
    RUN(scene, "show", "gas", "carbon-dioxid");
    assert_int_equal(scene->status, 2);
    assert_non_null(strstr(scene->messages, "carbon-dioxide"));
}

/* ---- 200 broken decks ------------------------------------------------------------------------------------------ */

static const char *const examples[] = {
    "decks/carbon-dioxide-fifty.deck", "decks/propane-thirty-three.deck", "decks/nitrogen-warm-fill.deck",
    "decks/ammonia-drum.deck",         "decks/overfilled.deck",
};
enum { EXAMPLES = sizeof examples / sizeof *examples, BROKEN_DECKS = 200 };

static bool is_blank_or_end(const char *text)
{
    return *text == '\0' || strchr(" \t\n;{}", *text) != NULL;
}

/* How deep in braces the text is after its first `length` bytes; comments and quoted texts do not count. */
static int depth_at(const char *text, size_t length)
{
    int depth = 0;
    char inside = '\0';
    for (size_t i = 0; i < length; i++) {
        if (inside != '\0') {
            inside = text[i] == (inside == '#' ? '\n' : '"') ? '\0' : inside;
        } else if (text[i] == '#' || text[i] == '"') {
            inside = text[i];
        } else {
            depth += (text[i] == '{') - (text[i] == '}');
        }
    }
    return depth;
}

struct broken {
    const char *what;
    const char *text;
    size_t length;
};

/* The `at`-th place, cyclically, where `text` says `from` as a whole word outside comments and at some depth, now says
 * `to`. NULL text when there is none. */
static struct broken replaced(struct arena *arena, const char *text, const char *from, const char *to, size_t at)
{
    const char *places[64];
    size_t count = 0;
    for (const char *found = strstr(text, from); found && count < 64; found = strstr(found + 1, from)) {
        const char *line = found;
        while (line > text && line[-1] != '\n') {
            line--;
        }
        const bool is_comment = memchr(line, '#', (size_t)(found - line)) != NULL;
        if (!is_comment && is_blank_or_end(found + strlen(from)) && depth_at(text, (size_t)(found - text)) > 0) {
            places[count++] = found;
        }
    }
    if (count == 0) {
        return (struct broken){.text = NULL};
    }
    const char *place = places[at % count];
    const char *made = arena_format(arena, "%.*s%s%s", (int)(place - text), text, to, place + strlen(from));
    return (struct broken){arena_format(arena, "'%s' in place of '%s'", to, from), made, strlen(made)};
}

static struct broken truncated(struct arena *arena, const char *text, size_t at)
{
    const size_t length = strlen(text);
    size_t cut = 40 + at * 97 % (length - 41);
    while (cut > 0 && depth_at(text, cut) == 0) {
        cut = cut + 1 < length ? cut + 1 : 1;
    }
    return (struct broken){arena_format(arena, "cut after %zu bytes", cut), arena_copy_text(arena, text, cut), cut};
}

/* The statement that begins with `head` is taken out, with its block where it has one. */
static struct broken without_block(struct arena *arena, const char *text, const char *head)
{
    const char *begin_of = strstr(text, head);
    if (!begin_of) {
        return (struct broken){.text = NULL};
    }
    const char *end_of = begin_of + strlen(head);
    while (*end_of != '\0' && (*end_of != '\n' || depth_at(begin_of, (size_t)(end_of - begin_of)) > 0)) {
        end_of++;
    }
    const char *made = arena_format(arena, "%.*s%s", (int)(begin_of - text), text, end_of);
    return (struct broken){arena_format(arena, "no '%s'", head), made, strlen(made)};
}

static struct broken noise(struct arena *arena, size_t seed)
{
    const size_t length = 20 + seed * 211 % 4000;
    char *bytes = arena_alloc(arena, length + 1, 1);
    unsigned long long random = 88172645463325252ULL + seed;
    for (size_t i = 0; i < length; i++) {
        random ^= random << 13;
        random ^= random >> 7;
        random ^= random << 17;
        bytes[i] = (char)(random & 0xFFU);
    }
    bytes[length / 2] = '\0';
    return (struct broken){arena_format(arena, "noise %zu", seed), bytes, length};
}

static struct broken repeated(struct arena *arena, const char *head, const char *part, size_t count, const char *tail)
{
    struct text made = {.arena = arena};
    text_format(&made, "%s", head);
    for (size_t i = 0; i < count; i++) {
        text_add(&made, part, strlen(part));
    }
    text_format(&made, "%s", tail);
    return (struct broken){arena_format(arena, "%s%s, %zu times", head, part, count), made.bytes, made.length};
}

static const struct {
    const char *head, *part;
    size_t count;
    const char *tail;
} monsters[] = {
    {"let x = ", "a", 10000000, "\n"},
    {"let x = ", "1", 10000000, "\n"},
    {"note \"", "a", 10000000, "\n"},
    {"", "{", 100000, "\n"},
    {"", "a { ", 100000, "\n"},
    {"let x = ", "(", 100000, "1\n"},
    {"let x = ", "- (", 100000, "1\n"},
    {"let x = 1", " + 1 m", 200000, "\n"},
    {"", "}", 100000, "\n"},
    {"", "\xFF", 100000, "\n"},
    {"", "use \"broken\"\n", 1, ""},
    {"", "use \"gases\"\n", 5000, "sheet fugacity { fluid nothing }\n"},
};
enum { MONSTERS = sizeof monsters / sizeof *monsters };

static const char *const swaps[][2] = {
    {"barg", "kg"},
    {"degC", "L"},
    {"L", "barg"},
    {"kg", "degC"},
    {"barg", "bara"},
    {"barg", "brag"},
    {"degC", "degX"},
    {"vessel", "vesel"},
    {"fluid", "flud"},
    {"rules", "ruels"},
    {"number", "nubmer"},
    {"tare", "taer"},
    {"lead", "laed"},
    {"sweep", "swep"},
    {"require", "requiring"},
    {"charge", "chrage"},
    {"reference", "referencing"},
    {"carbon-dioxide", "carbon-dioxid"},
    {"propane", "propan"},
    {"nitrogen", "nitrogne"},
    {"ammonia", "amonia"},
    {"250 barg", "1e308 barg"},
    {"50.2 L", "1e308 L"},
    {"50.2 L", "-1e999 L"},
    {"50.2 L", "0 L"},
    {"50.2 L", "-3 L"},
    {"50.2 L", "nan L"},
    {"62.4 kg", "-1e999 kg"},
    {"37.5 kg", "1e308 kg"},
    {"37.5 kg", "-37.5 kg"},
    {"65 degC", "-300 degC"},
    {"65 degC", "1e999 degC"},
    {"by 5 K", "by 0 K"},
    {"by 5 K", "by -5 K"},
    {"by 5 K", "by 1e-12 K"},
    {"in 8 steps", "in 0 steps"},
    {"in 8 steps", "in 1e9 steps"},
    {"50.2 L", "50.2"},
    {"50.2 L", "50.2 L 3"},
};
enum { SWAPS = sizeof swaps / sizeof *swaps };
static const char *const heads[] = {"\nvessel ", "\ncharge ", "\nuse \"rules/"};
enum { HEADS = sizeof heads / sizeof *heads };

/* Whether a replacement leaves the deck wrong is known for those above; one that finds nothing to replace gives none.
 */
static struct broken broken_deck(struct arena *arena, const char *const texts[EXAMPLES], size_t index)
{
    if (index < MONSTERS) {
        return repeated(arena, monsters[index].head, monsters[index].part, monsters[index].count, monsters[index].tail);
    }
    const size_t kind = index % 5, turn = index / 5;
    const char *text = texts[turn % EXAMPLES];
    switch (kind) {
    case 0:
    case 1:
        return truncated(arena, text, index);
    case 2:
        return noise(arena, index);
    case 3:
        return without_block(arena, text, heads[turn / EXAMPLES % HEADS]);
    default:
        return replaced(arena, text, swaps[turn % SWAPS][0], swaps[turn % SWAPS][1], turn / SWAPS);
    }
}

/* True when some line reads `name:line:column: error: `. */
static bool has_located_message(const char *messages, const char *path)
{
    for (const char *at = strstr(messages, path); at; at = strstr(at + 1, path)) {
        unsigned long line, column;
        int read = 0;
        if (sscanf(at + strlen(path), ":%lu:%lu: error: %n", &line, &column, &read) == 2 && read > 0 && line > 0 &&
            column > 0) {
            return true;
        }
    }
    return false;
}

static bool is_refused_with_a_place(struct scene *scene, const char *path, const struct broken *deck)
{
    assert_true(file_write(scene->arena, path, deck->text, deck->length));
    RUN(scene, "run", path, "--out", scene->folder);
    const bool is_refused = scene->signal == 0 && (scene->status == 2 || scene->status == 4) &&
                            scene->output[0] == '\0' && has_located_message(scene->messages, path);
    if (!is_refused) {
        print_error("%s: signal %d, status %d\n%.600s\n", deck->what, scene->signal, scene->status, scene->messages);
        if (getenv("TAREWRIGHT_KEEP_BROKEN")) {
            file_write(scene->arena, getenv("TAREWRIGHT_KEEP_BROKEN"), deck->text, deck->length);
        }
    }
    return is_refused;
}

static void broken_decks_are_refused_with_a_place(void **state)
{
    struct scene *scene = *state;
    const char *texts[EXAMPLES];
    for (size_t i = 0; i < EXAMPLES; i++) {
        texts[i] = read_text(scene, examples[i]);
    }
    const char *path = path_in(scene, "broken.deck");
    size_t tried = 0, refused = 0;
    for (size_t index = 0; tried < BROKEN_DECKS; index++) {
        struct scene one = *scene;
        one.arena = arena_create(NULL);
        const struct broken deck = broken_deck(one.arena, texts, index);
        if (deck.text) {
            refused += is_refused_with_a_place(&one, path, &deck);
            tried++;
        }
        arena_free(one.arena);
    }
    unlink(path);
    assert_int_equal(refused, BROKEN_DECKS);
}

int main(void)
{
    /* The program may have been built anywhere; where it looks by itself is for the installed one. */
    setenv("TAREWRIGHT_LIBRARY", "decks/library", 1);
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(version_and_help_go_to_standard_output, begin, end),
        cmocka_unit_test_setup_teardown(a_command_line_that_makes_no_sense_is_refused, begin, end),
        cmocka_unit_test_setup_teardown(a_deck_that_is_not_there_is_status_four, begin, end),
        cmocka_unit_test_setup_teardown(a_listing_that_cannot_be_delivered_is_status_four, begin, end),
        cmocka_unit_test_setup_teardown(results_go_where_the_command_line_says, begin, end),
        cmocka_unit_test_setup_teardown(what_is_known_of_a_gas_is_shown_with_sources, begin, end),
        cmocka_unit_test_setup_teardown(broken_decks_are_refused_with_a_place, begin, end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
