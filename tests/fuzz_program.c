/* Fuzz target: the whole program from a deck's text to listing, JSON and tables, all in memory.
 *
 * With TAREWRIGHT_LIBRARY naming the library's folder, `use "gases"` finds it; otherwise every `use` fails. */
#include "base/file.h"
#include "run/run.h"

#include <assert.h>
#include <errno.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static const char root[] = "fuzzed/input.deck";

struct input {
    const uint8_t *data;
    size_t size;
};

static bool read_input(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const struct input *input = context;
    if (strcmp(path, root) == 0) {
        *text = arena_copy_text(arena, (const char *)input->data, input->size);
        *length = input->size;
        return true;
    }
    if (strncmp(path, "fuzzed/", 7) == 0) {
        errno = ENOENT;
        return false;
    }
    return file_read(arena, path, text, length);
}

static void run_in(enum run_mode mode, struct input *input)
{
    const struct deck_reader reader = {
        .read = read_input, .context = input, .library_folder = getenv("TAREWRIGHT_LIBRARY")};
    const struct run_request request = {
        .mode = mode, .deck_path = root, .reader = &reader, .version = "0", .json_path = "never-written.json"};
    struct run *run = run_deck(&request, NULL);
    assert(run);
    /* A deck that is wrong says so, and nothing else comes out of it. */
    const bool is_wrong = run->status == RUN_DECK_WRONG || run->status == RUN_NO_FILE;
    assert(!is_wrong || run->diagnostics.length > 0);
    assert(!is_wrong || run->output.length == 0);
    run_free(run);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct input input = {data, size};
    run_in(RUN_ANSWER, &input);
    run_in(RUN_PRINT, &input);
    return 0;
}
