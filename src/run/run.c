#include "run/run.h"

#include "case/case.h"
#include "filling/solve.h"
#include "report/report.h"
#include "run/run_internal.h"

#include <setjmp.h>
#include <string.h>

/* The statuses by rising weight, so that the worst of several wins. */
static int weight(enum run_status status)
{
    switch (status) {
    case RUN_MET:
        return 0;
    case RUN_NOT_MET:
        return 1;
    case RUN_UNDECIDED:
        return 2;
    case RUN_DECK_WRONG:
        return 3;
    case RUN_NO_FILE:
        break;
    }
    return 4;
}

enum run_status run_worse(enum run_status a, enum run_status b)
{
    return weight(a) >= weight(b) ? a : b;
}

enum run_status status_of_messages(const struct diagnostics *diagnostics)
{
    enum run_status status = diagnostics->errors > 0 ? RUN_DECK_WRONG : RUN_MET;
    for (size_t i = 0; i < diagnostics->count; i++) {
        const enum code code = diagnostics->items[i].code;
        if (code == CODE_E401 || code == CODE_E402 || code == CODE_E403) {
            status = RUN_NO_FILE;
        }
    }
    return status;
}

static enum run_status status_of_result(const struct result *result)
{
    enum run_status status = result->is_undecided ? RUN_UNDECIDED : RUN_MET;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct requirement *one = sheet->first_requirement; one; one = one->next) {
            if (one->state != REQUIREMENT_MET) {
                status = run_worse(status, one->state == REQUIREMENT_NOT_MET ? RUN_NOT_MET : RUN_UNDECIDED);
            }
        }
    }
    return status;
}

/* The last part of a path, so that a listing is the same wherever the deck lies. */
static const char *base_name(const char *path)
{
    const char *slash = strrchr(path, '/');
    return slash ? slash + 1 : path;
}

static void add_file(struct run *run, const char *path, struct text content)
{
    *ARENA_APPEND(run->arena, &run->files) = (struct run_file){path, content};
}

static const char *joined_path(struct arena *arena, const char *folder, const char *name)
{
    const size_t length = folder ? strlen(folder) : 0;
    if (length == 0) {
        return name;
    }
    return arena_format(arena, "%s%s%s", folder, folder[length - 1] == '/' ? "" : "/", name);
}

static void add_tables(struct run *run, const struct run_request *request, const struct result *result)
{
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
            if (part->kind == PART_TABLE && part->table->csv) {
                struct text csv = {.arena = run->arena};
                report_csv(part->table, &csv);
                add_file(run, joined_path(run->arena, request->out_folder, part->table->csv), csv);
            }
        }
    }
}

/* Renders a result into the run; false when JSON found no memory. */
static bool render(struct run *run, const struct run_request *request, const struct result *result)
{
    report_listing(result, &run->output);
    add_tables(run, request, result);
    if (request->json_path) {
        struct text json = {.arena = run->arena};
        if (!report_json(result, &json)) {
            return false;
        }
        add_file(run, request->json_path, json);
    }
    if (request->listing_path) {
        add_file(run, request->listing_path, run->output);
    }
    run->status = status_of_result(result);
    return true;
}

/* Messages name files as the user reached them; a listing names them from the deck's own folder. */
static void name_files_from_deck(const struct deck *deck)
{
    const char *name = base_name(deck->root->name);
    const size_t folder = (size_t)(name - deck->root->name);
    for (size_t i = 0; i < deck->file_count; i++) {
        struct source_file *file = deck->files[i];
        if (file != deck->root && strncmp(file->name, deck->root->name, folder) == 0) {
            file->name += folder;
        }
    }
    deck->files[0]->name = name;
}

static bool answer(struct run *run, const struct run_request *request, const struct case_tree *tree)
{
    name_files_from_deck(tree->deck);
    return render(run, request, filling_solve_telling(tree, request->version, request->progress, run->arena));
}

/* Counts what a deck asks, for the one line of a check. */
static void say_in_order(struct run *run, const struct run_request *request, const struct case_tree *tree)
{
    text_format(&run->output, "%s: in order, %zu sheet%s\n", request->deck_path, tree->sheet_count,
                tree->sheet_count == 1 ? "" : "s");
}

/* A deck without a sheet is worth a warning when it is checked; where answers are wanted it is wrong. */
static bool refuse_nothing_asked(struct diagnostics *diagnostics)
{
    for (size_t i = 0; i < diagnostics->count; i++) {
        if (diagnostics->items[i].code == CODE_W280) {
            diagnostics->items[i].code = CODE_E418;
            diagnostics->warnings--;
            diagnostics->errors++;
        }
    }
    return true;
}

/* Whether what was read still has the deck's own structure: every error so far is within one statement. */
static bool keeps_its_structure(const struct diagnostics *diagnostics)
{
    for (size_t i = 0; i < diagnostics->count; i++) {
        const enum code code = diagnostics->items[i].code;
        if (code == CODE_E106 || code == CODE_E107 || code == CODE_E108 || code == CODE_E109 || code == CODE_E119) {
            return false;
        }
    }
    return diagnostics->count < DIAGNOSTICS_MOST;
}

static bool is_name_byte(char byte)
{
    return (byte >= 'a' && byte <= 'z') || (byte >= 'A' && byte <= 'Z') || (byte >= '0' && byte <= '9') || byte == '-';
}

/* Whether the word at `word` stands, whole, on the line of `error` too. */
static bool stands_on_line(struct location word, struct location error)
{
    if (!word.file || !error.file) {
        return false;
    }
    const size_t line = location_line(error);
    const char *const file_end = error.file->text + error.file->length;
    const char *const start = error.file->text + error.file->line_starts[line - 1];
    const char *const end = line < error.file->line_count ? error.file->text + error.file->line_starts[line] : file_end;
    const char *const name = word.file->text + word.begin;
    const size_t length = word.end - word.begin;
    for (const char *at = start; length > 0 && (size_t)(end - at) >= length; at++) {
        const bool begins = at == start || !is_name_byte(at[-1]);
        const bool ends = at + length == end || !is_name_byte(at[length]);
        if (begins && ends && memcmp(at, name, length) == 0) {
            return true;
        }
    }
    return false;
}

/* Whether what `error` stopped, a statement or a file, may have given the name at `word`. */
static bool may_give(const struct diagnostic *error, struct location word)
{
    return error->code >= CODE_E401 || stands_on_line(word, error->at);
}

/* A name without a definition, or a block without a part, where the statement that gives it may be one of those that
 * were not understood, the first `count`. */
static bool may_be_consequence(const struct diagnostic *one, const struct diagnostics *all, size_t count)
{
    if (one->code == CODE_E112 || one->code == CODE_E205) {
        for (size_t i = 0; i < count; i++) {
            if (may_give(&all->items[i], one->at)) {
                return true;
            }
        }
        return false;
    }
    return one->code == CODE_E214 || one->code == CODE_E216 || one->code == CODE_E223 || one->code == CODE_W280;
}

/* Looks for further mistakes in a deck that is wrong already, so that one run shows them all, and keeps those that do
 * not follow from the first. */
static void add_mistakes_of_meaning(struct run *run, const struct deck *deck, struct diagnostics *diagnostics)
{
    const size_t before = diagnostics->count;
    size_t kept = before;
    case_elaborate(deck, run->arena, diagnostics);
    for (size_t i = before; i < diagnostics->count; i++) {
        const struct diagnostic one = diagnostics->items[i];
        if (!may_be_consequence(&one, diagnostics, before)) {
            diagnostics->items[kept++] = one;
        } else if (code_row(one.code)->severity == 'E') {
            diagnostics->errors--;
        } else {
            diagnostics->warnings--;
        }
    }
    diagnostics->count = kept;
}

/* Carries a deck as far as its mode and its errors allow; false when memory ran out outside the arena. */
static bool carry_out(struct run *run, const struct run_request *request, struct diagnostics *diagnostics)
{
    const struct deck *deck = deck_load(request->deck_path, request->reader, run->arena, diagnostics);
    run->deck = deck;
    if (!deck) {
        return true;
    }
    if (diagnostics->errors > 0) {
        if (request->mode != RUN_PRINT && keeps_its_structure(diagnostics)) {
            add_mistakes_of_meaning(run, deck, diagnostics);
        }
        return true;
    }
    if (request->mode == RUN_PRINT) {
        print_root(run, deck, diagnostics);
        return true;
    }
    const struct case_tree *tree = case_elaborate(deck, run->arena, diagnostics);
    if (!tree || diagnostics->errors > 0) {
        return true;
    }
    if (request->mode == RUN_CHECK) {
        say_in_order(run, request, tree);
        return true;
    }
    return tree->sheet_count == 0 ? refuse_nothing_asked(diagnostics) : answer(run, request, tree);
}

static bool run_within(struct run *run, const struct run_request *request)
{
    struct diagnostics diagnostics = {.arena = run->arena};
    const bool had_memory = carry_out(run, request, &diagnostics);
    run->status = run_worse(run->status, status_of_messages(&diagnostics));
    diagnostics_draw(&diagnostics, &run->diagnostics);
    return had_memory;
}

struct run *run_begin(const struct arena_source *source)
{
    struct arena *arena = arena_create(source);
    struct run *run = arena ? arena_try(arena, 1, sizeof *run) : NULL;
    if (!run) {
        arena_free(arena);
        return NULL;
    }
    run->arena = arena;
    run->output.arena = run->diagnostics.arena = arena;
    return run;
}

struct run *run_deck(const struct run_request *request, const struct arena_source *source)
{
    struct run *const run = run_begin(source);
    if (!run) {
        return NULL;
    }
    jmp_buf exhausted;
    if (setjmp(exhausted) != 0) {
        run_free(run);
        return NULL;
    }
    arena_on_exhaustion(run->arena, &exhausted);
    const bool had_memory = run_within(run, request);
    arena_on_exhaustion(run->arena, NULL);
    if (!had_memory) {
        run_free(run);
        return NULL;
    }
    return run;
}

void run_free(struct run *run)
{
    if (run) {
        arena_free(run->arena);
    }
}
