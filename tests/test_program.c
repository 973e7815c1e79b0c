/* The built program, as a user meets it: its verbs, its streams, its exit statuses, and 200 broken decks.
 *
 * TAREWRIGHT names the program; make sets it. Every run has a limit on its processor time as a safety net. */
#define _XOPEN_SOURCE 700
#define _DEFAULT_SOURCE
#include "base/file.h"
#include "base/text.h"
#include "support/check.h"

#include <dirent.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
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
    strcpy(scene->folder, P_tmpdir "/tarewright-test-XXXXXX");
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

/* ---- long runs --------------------------------------------------------------------------------------------------- */

/* Enough states for threads, and `sheets` files to write; the more steps, the longer it takes. */
static const char *write_long_deck(struct scene *scene, size_t sheets, size_t steps)
{
    struct text deck = {.arena = scene->arena};
    text_format(&deck, "use \"gases\"\n"
                       "mixture blend by mole { methane 80 %%; propane 5 %%; carbon-dioxide 3 %%; nitrogen rest }\n"
                       "vessel fifty { water-capacity 50 L; test-pressure 300 barg }\n"
                       "methods { lead peng-robinson-1978; beside soave-redlich-kwong }\n"
                       "charge lot { fluid blend; vessel fifty; fill 100 barg at 15 degC }\n");
    for (size_t i = 0; i < sheets; i++) {
        text_format(&deck,
                    "sheet settled-pressure { charge lot; sweep temperature from -60 degC to 65 degC in %zu steps\n"
                    "  table \"table-%zu.csv\" }\n",
                    steps, i);
    }
    const char *path = path_in(scene, "long.deck");
    assert_true(file_write(scene->arena, path, deck.bytes, deck.length));
    return path;
}

static void any_number_of_threads_gives_the_same_bytes(void **state)
{
    static const char *const threads[] = {"1", "2", "3"};
    struct scene *scene = *state;
    const char *deck = write_long_deck(scene, 1, 800), *json = path_in(scene, "a.json");
    const char *table = path_in(scene, "table-0.csv");
    const char *listings[3], *trees[3], *tables[3];
    for (size_t i = 0; i < 3; i++) {
        setenv("OMP_NUM_THREADS", threads[i], 1);
        RUN(scene, deck, "--json", json, "--out", scene->folder);
        assert_int_equal(scene->status, 0);
        listings[i] = scene->output;
        trees[i] = read_text(scene, json);
        tables[i] = read_text(scene, table);
    }
    unsetenv("OMP_NUM_THREADS");
    for (size_t i = 1; i < 3; i++) {
        assert_string_equal(listings[i], listings[0]);
        assert_string_equal(trees[i], trees[0]);
        assert_string_equal(tables[i], tables[0]);
    }
    unlink(deck);
    unlink(json);
    unlink(table);
}

static double now_in_seconds(void)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void wait_seconds(double seconds)
{
    const struct timespec span = {(time_t)seconds, (long)(1e9 * (seconds - (double)(time_t)seconds))};
    nanosleep(&span, NULL);
}

/* Starts the program on a deck and sends it a signal after so many seconds; not started over when that comes late. */
static void run_interrupted(struct scene *scene, const char *deck, int signal, double seconds)
{
    char *arguments[] = {(char *)(size_t)program(), (char *)(size_t)deck, (char *)(size_t) "--out", scene->folder,
                         NULL};
    assert_true(file_write(scene->arena, scene->out, "", 0));
    const pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        become_program(scene, arguments);
    }
    int status = 0;
    wait_seconds(seconds);
    kill(child, signal);
    assert_int_equal(waitpid(child, &status, 0), child);
    scene->status = WIFEXITED(status) ? WEXITSTATUS(status) : -1;
    scene->signal = WIFSIGNALED(status) ? WTERMSIG(status) : 0;
}

/* Removes what a run wrote; how many files there were. Nothing but whole tables may be there. */
static size_t take_away_tables(struct scene *scene, size_t length)
{
    size_t count = 0;
    DIR *folder = opendir(scene->folder);
    assert_non_null(folder);
    for (struct dirent *entry = readdir(folder); entry; entry = readdir(folder)) {
        const size_t name_length = strlen(entry->d_name);
        if (strncmp(entry->d_name, "table-", 6) != 0) {
            continue;
        }
        const char *path = path_in(scene, entry->d_name);
        assert_string_equal(entry->d_name + name_length - 4, ".csv");
        assert_int_equal(strlen(read_text(scene, path)), length);
        unlink(path);
        count++;
    }
    closedir(folder);
    return count;
}

/* Interrupted at any time, a run leaves all of its files or none, the listing on standard output among them. */
static void an_interrupt_leaves_no_partial_file(void **state)
{
    enum { TABLES = 8, MOMENTS = 24 };
    static const int signals[] = {SIGINT, SIGTERM};
    struct scene *scene = *state;
    const char *deck = write_long_deck(scene, TABLES, 60);
    const double begun = now_in_seconds();
    RUN(scene, deck, "--out", scene->folder);
    const double taken = now_in_seconds() - begun;
    assert_int_equal(scene->status, 0);
    const size_t listing_length = strlen(scene->output),
                 length = strlen(read_text(scene, path_in(scene, "table-0.csv")));
    assert_int_equal(take_away_tables(scene, length), TABLES);
    for (size_t i = 0; i < MOMENTS; i++) {
        run_interrupted(scene, deck, signals[i % 2], taken * (double)i / (MOMENTS - 4));
        const size_t tables = take_away_tables(scene, length);
        const size_t listed = strlen(read_text(scene, scene->out));
        assert_true(scene->status == 0 || scene->signal == signals[i % 2]);
        assert_true((tables == 0 && listed == 0) || (tables == TABLES && listed == listing_length));
    }
    unlink(deck);
}

/* What the program says to a terminal as its standard error, until it ends. */
static struct text run_at_terminal(struct scene *scene, const char *deck)
{
    struct text said = {.arena = scene->arena};
    char *arguments[] = {(char *)(size_t)program(), (char *)(size_t)deck, (char *)(size_t) "--out", scene->folder,
                         NULL};
    const int terminal = posix_openpt(O_RDWR | O_NOCTTY);
    assert_true(terminal >= 0 && grantpt(terminal) == 0 && unlockpt(terminal) == 0);
    const int far_end = open(ptsname(terminal), O_RDWR | O_NOCTTY);
    assert_true(far_end >= 0);
    const pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        const int out = open(scene->out, O_WRONLY | O_CREAT | O_TRUNC, 0600);
        if (out >= 0 && dup2(out, STDOUT_FILENO) >= 0 && dup2(far_end, STDERR_FILENO) >= 0) {
            execv(arguments[0], arguments);
        }
        _exit(127);
    }
    close(far_end);
    char bytes[512];
    for (ssize_t got = read(terminal, bytes, sizeof bytes); got > 0; got = read(terminal, bytes, sizeof bytes)) {
        text_add(&said, bytes, (size_t)got);
    }
    int status = 0;
    assert_int_equal(waitpid(child, &status, 0), child);
    assert_true(WIFEXITED(status) && WEXITSTATUS(status) == 0);
    close(terminal);
    return said;
}

/* The deck grows until it takes longer than a second, whatever the machine. */
static void a_long_run_tells_a_terminal_how_far_it_is(void **state)
{
    struct scene *scene = *state;
    struct text said = run_at_terminal(scene, write_long_deck(scene, 1, 20));
    assert_int_equal(said.length, 0);
    const char *deck = NULL;
    for (size_t sheets = 2; said.length == 0 && sheets <= 64; sheets *= 2) {
        deck = write_long_deck(scene, sheets, 3000);
        said = run_at_terminal(scene, deck);
    }
    const char *line = said.length == 0 ? NULL : strstr(said.bytes, "\rsheet ");
    assert_non_null(line);
    assert_non_null(strstr(line, "settled-pressure"));
    assert_int_equal(said.bytes[said.length - 1], '\r');
    RUN(scene, deck, "--out", scene->folder);
    assert_string_equal(scene->messages, "");
    for (size_t i = 0; i < 64; i++) {
        unlink(path_in(scene, arena_format(scene->arena, "table-%zu.csv", i)));
    }
    unlink(deck);
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
        cmocka_unit_test_setup_teardown(any_number_of_threads_gives_the_same_bytes, begin, end),
        cmocka_unit_test_setup_teardown(an_interrupt_leaves_no_partial_file, begin, end),
        cmocka_unit_test_setup_teardown(a_long_run_tells_a_terminal_how_far_it_is, begin, end),
        cmocka_unit_test_setup_teardown(broken_decks_are_refused_with_a_place, begin, end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
