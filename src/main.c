/* The command line: words and options in, a run out, its texts to the standard streams, its status to the caller. */
#define _POSIX_C_SOURCE 200809L
#include "base/codes.h"
#include "run/help.h"
#include "run/library.h"
#include "run/run.h"

#include <setjmp.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

static const char usage[] =
    "tarewright DECK                answer the deck's sheets; the listing goes to standard output\n"
    "tarewright run DECK            the same\n"
    "tarewright check DECK          read the deck and say what is wrong with it\n"
    "tarewright print DECK          write the deck back in its normal form\n"
    "tarewright show gas NAME       what the library holds about a gas, and from where\n"
    "tarewright help [TOPIC]        this text; or a word, a unit, a method, a code such as E101,\n"
    "                               or one of the lists: words, units, methods, codes\n"
    "tarewright --version\n"
    "\n"
    "  --json FILE                  write the results as JSON, in SI\n"
    "  --listing FILE               write the listing to FILE instead\n"
    "  --out FOLDER                 where the deck's tables are written (the current folder)\n"
    "  --library FOLDER             the data library (else TAREWRIGHT_LIBRARY, else the one\n"
    "                               that came with the program)\n"
    "\n"
    "Exit status: 0 every requirement is met, 1 a requirement is not met, 2 the deck or the command\n"
    "line is wrong, 3 undecided, 4 a file could not be read or written. The worst wins: 4, 2, 3, 1, 0.\n";

enum { WORDS_MOST = 3 };

struct command {
    const char *words[WORDS_MOST];
    int word_count;
    const char *json, *listing, *out, *library;
    bool wants_version, wants_help;
};

static enum run_status complain(enum code code, const char *what, const char *word, const char *hint)
{
    fprintf(stderr, "tarewright: error: %s%s%s%s [%s]\n", what, word ? " '" : "", word ? word : "", word ? "'" : "",
            code_row(code)->name);
    if (hint) {
        fprintf(stderr, "  hint: %s\n", hint);
    }
    return code == CODE_E414 || code == CODE_E410 ? RUN_NO_FILE : RUN_DECK_WRONG;
}

/* The value of option `name` when argument *at is that option, as `--name VALUE` or `--name=VALUE`; *at is moved on.
 * *lacks is set when the value is missing. */
static const char *option_value(const char *name, char *const arguments[], int *at, bool *lacks)
{
    const char *argument = arguments[*at];
    const size_t length = strlen(name);
    if (strncmp(argument, name, length) != 0 || (argument[length] != '\0' && argument[length] != '=')) {
        return NULL;
    }
    const char *value = argument[length] == '=' ? argument + length + 1 : arguments[*at + 1];
    if (!value || *value == '\0') {
        *lacks = true;
        return NULL;
    }
    *at += argument[length] == '\0';
    return value;
}

/* True when argument *at was an option that takes a value. */
static bool take_option(struct command *command, char *const arguments[], int *at, bool *lacks)
{
    const struct {
        const char *name;
        const char **into;
    } options[] = {{"--json", &command->json},
                   {"--listing", &command->listing},
                   {"--out", &command->out},
                   {"--library", &command->library}};
    for (size_t i = 0; i < sizeof options / sizeof *options && !*lacks; i++) {
        const char *value = option_value(options[i].name, arguments, at, lacks);
        if (value) {
            *options[i].into = value;
            return true;
        }
    }
    return false;
}

static enum run_status read_argument(struct command *command, char *const arguments[], int *at)
{
    const char *argument = arguments[*at];
    bool lacks = false;
    if (argument[0] != '-' || argument[1] == '\0') {
        if (command->word_count == WORDS_MOST) {
            return complain(CODE_E415, "one word too many:", argument, "tarewright help shows the command line");
        }
        command->words[command->word_count++] = argument;
    } else if (strcmp(argument, "--version") == 0) {
        command->wants_version = true;
    } else if (strcmp(argument, "--help") == 0) {
        command->wants_help = true;
    } else if (!take_option(command, arguments, at, &lacks)) {
        return complain(CODE_E415, lacks ? "a value is missing after" : "unknown option", argument,
                        "options are --json, --listing, --out and --library, each with a value");
    }
    return RUN_MET;
}

static enum run_status read_command(int count, char *const arguments[], struct command *command)
{
    for (int at = 1; at < count; at++) {
        const enum run_status status = read_argument(command, arguments, &at);
        if (status != RUN_MET) {
            return status;
        }
    }
    return RUN_MET;
}

/* ---- somebody waits ---------------------------------------------------------------------------------------------- */

#define SECONDS_BEFORE_TELLING 1.0
#define SECONDS_BETWEEN        0.1
enum { LINE_BYTES = 79 };

/* One line on a terminal, written over and over, and gone at the end. */
struct waiting {
    struct timespec begun, told;
    bool is_shown;
};

static double seconds_since(struct timespec then, struct timespec now)
{
    return (double)(now.tv_sec - then.tv_sec) + 1e-9 * (double)(now.tv_nsec - then.tv_nsec);
}

static void tell_progress(void *context, const struct progress_state *state)
{
    struct waiting *waiting = context;
    char line[LINE_BYTES + 1];
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    if (seconds_since(waiting->begun, now) < SECONDS_BEFORE_TELLING ||
        (waiting->is_shown && seconds_since(waiting->told, now) < SECONDS_BETWEEN)) {
        return;
    }
    const int length =
        snprintf(line, sizeof line, "sheet %zu of %zu, %s", state->sheet, state->sheet_count, state->kind);
    if (state->count > 0 && length > 0 && length < LINE_BYTES) {
        snprintf(line + length, sizeof line - (size_t)length, ": %zu of %zu states", state->done, state->count);
    }
    fprintf(stderr, "\r%-*s", LINE_BYTES, line);
    waiting->told = now;
    waiting->is_shown = true;
}

static void clear_progress(const struct waiting *waiting)
{
    if (waiting->is_shown) {
        fprintf(stderr, "\r%-*s\r", LINE_BYTES, "");
    }
}

/* ---- interrupts -------------------------------------------------------------------------------------------------- */

/* An interrupt ends the run while it has written nothing. Once files are being written it waits until they are whole,
 * and the standard output too where that is a file; at a pipe or a terminal nobody is to be kept waiting. */
static void hold_interrupts(sigset_t *before)
{
    sigset_t held;
    sigemptyset(&held);
    sigaddset(&held, SIGHUP);
    sigaddset(&held, SIGINT);
    sigaddset(&held, SIGTERM);
    sigprocmask(SIG_BLOCK, &held, before);
}

static void heed_interrupts(const sigset_t *before)
{
    sigprocmask(SIG_SETMASK, before, NULL);
}

static bool output_is_file(void)
{
    struct stat about;
    return fstat(STDOUT_FILENO, &about) == 0 && S_ISREG(about.st_mode);
}

/* ---- runs -------------------------------------------------------------------------------------------------------- */

/* Standard output may be a full disk or a closed pipe; a listing that did not arrive is a failure. */
static enum run_status print(const struct text *text)
{
    if (text->length != 0) {
        fwrite(text->bytes, 1, text->length, stdout);
    }
    if (fflush(stdout) != 0 || ferror(stdout)) {
        return complain(CODE_E410, "standard output could not be written", NULL, NULL);
    }
    return RUN_MET;
}

/* Writes out what a run came to and ends it. */
static enum run_status finish(struct run *run, bool prints_output)
{
    if (!run) {
        return complain(CODE_E414, "memory ran out", NULL, NULL);
    }
    sigset_t before;
    hold_interrupts(&before);
    run_write(run);
    enum run_status status = run->status;
    if (!output_is_file()) {
        heed_interrupts(&before);
    }
    if (prints_output) {
        status = run_worse(status, print(&run->output));
    }
    heed_interrupts(&before);
    if (run->diagnostics.length != 0) {
        fwrite(run->diagnostics.bytes, 1, run->diagnostics.length, stderr);
    } else if (run->status == RUN_NO_FILE) {
        complain(CODE_E414, "memory ran out while files were written", NULL, NULL);
    }
    run_free(run);
    return status;
}

static enum run_status run_on_deck(const struct command *command, enum run_mode mode, const char *deck,
                                   const struct deck_reader *reader)
{
    const bool answers = mode == RUN_ANSWER;
    if (!answers && (command->json || command->listing || command->out)) {
        return complain(CODE_E415, "--json, --listing and --out go with run only", NULL, NULL);
    }
    struct waiting waiting = {.is_shown = false};
    const struct progress progress = {tell_progress, &waiting};
    clock_gettime(CLOCK_MONOTONIC, &waiting.begun);
    const struct run_request request = {
        .mode = mode,
        .deck_path = deck,
        .reader = reader,
        .version = TAREWRIGHT_VERSION,
        .json_path = command->json,
        .listing_path = command->listing,
        .out_folder = command->out,
        .progress = isatty(STDERR_FILENO) ? &progress : NULL,
    };
    struct run *const run = run_deck(&request, NULL);
    clear_progress(&waiting);
    return finish(run, !answers || !command->listing);
}

static enum run_status show(const struct command *command, const struct deck_reader *reader)
{
    if (command->word_count != 3 || strcmp(command->words[1], "gas") != 0) {
        return complain(CODE_E415, "show takes the word gas and a name", NULL, "tarewright show gas propane");
    }
    return finish(run_show_gas(command->words[2], reader, NULL), true);
}

static enum run_status help(const struct command *command, struct arena *arena)
{
    if (command->word_count > 2 && !command->wants_help) {
        return complain(CODE_E415, "help takes one topic", NULL, NULL);
    }
    struct text out = {.arena = arena};
    const char *nearest = NULL;
    if (command->wants_help || command->word_count < 2) {
        text_format(&out, "%s", usage);
    } else if (!help_topic(command->words[1], &out, &nearest)) {
        return complain(CODE_E417, "nothing is known about", command->words[1],
                        nearest ? arena_format(arena, "did you mean '%s'?", nearest) : NULL);
    }
    return print(&out);
}

static enum run_status carry_out_verb(const struct command *command, struct arena *arena)
{
    static const struct {
        const char *verb;
        enum run_mode mode;
    } verbs[] = {{"run", RUN_ANSWER}, {"check", RUN_CHECK}, {"print", RUN_PRINT}};
    const struct deck_reader reader = {
        .read = deck_read_file,
        .library_folder = library_find(command->library, getenv("TAREWRIGHT_LIBRARY"), arena),
    };
    const char *first = command->words[0];
    if (strcmp(first, "show") == 0) {
        return show(command, &reader);
    }
    for (size_t i = 0; i < sizeof verbs / sizeof *verbs; i++) {
        if (strcmp(first, verbs[i].verb) == 0) {
            return command->word_count == 2 ? run_on_deck(command, verbs[i].mode, command->words[1], &reader)
                                            : complain(CODE_E415, "one deck is wanted after", first,
                                                       "tarewright help shows the command line");
        }
    }
    if (command->word_count > 1) {
        return complain(CODE_E415, "no such verb:", first, "verbs are run, check, print, show and help");
    }
    return run_on_deck(command, RUN_ANSWER, first, &reader);
}

static enum run_status carry_out(const struct command *command, struct arena *arena)
{
    if (command->wants_version) {
        const struct text version = {.bytes = "tarewright " TAREWRIGHT_VERSION "\n",
                                     .length = sizeof "tarewright " TAREWRIGHT_VERSION};
        return print(&version);
    }
    if (command->wants_help || (command->word_count > 0 && strcmp(command->words[0], "help") == 0)) {
        return help(command, arena);
    }
    if (command->word_count == 0) {
        return complain(CODE_E415, "no deck was named", NULL, "tarewright help shows the command line");
    }
    return carry_out_verb(command, arena);
}

int main(int count, char *arguments[])
{
    struct command command = {.word_count = 0};
    const enum run_status understood = read_command(count, arguments, &command);
    if (understood != RUN_MET) {
        return (int)understood;
    }
    struct arena *const arena = arena_create(NULL);
    jmp_buf exhausted;
    if (!arena || setjmp(exhausted) != 0) {
        arena_free(arena);
        return (int)complain(CODE_E414, "memory ran out", NULL, NULL);
    }
    arena_on_exhaustion(arena, &exhausted);
    const enum run_status status = carry_out(&command, arena);
    arena_free(arena);
    return (int)status;
}
