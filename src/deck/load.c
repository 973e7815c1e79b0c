/* Reading a deck with the files it uses. Files are opened first, in rounds: a file with a condition (`for NAME`) waits
 * until that name is known to be mentioned. Only then are their statements put in order, each `use` replaced by what it
 * brings. */
#include "deck/deck.h"

#include "base/file.h"
#include "deck/parse.h"
#include "deck/vocabulary.h"
#include "deck/words.h"

#include <errno.h>
#include <string.h>

enum {
    USE_DEPTH_MOST = 32, /* files using one another in a chain */
    FILES_MOST = 1000
};

struct use {
    const struct statement *statement;
    const char *name;      /* NULL: the statement was wrong */
    const char *condition; /* NULL: none */
    struct opened *brought;
    bool is_settled; /* opened, found missing, or wrong */
};

struct use_list {
    struct use *items;
    size_t count, capacity;
};

struct opened {
    struct source_file *source;
    const struct statement *statements;
    struct use_list uses;
    size_t depth;
    bool is_counted;           /* the names of a file outside the library were noted */
    bool is_in_order, is_done; /* its statements are being, or have been, put into the deck */
};

/* A block of the library that nothing has led to yet. */
struct library_block {
    const struct statement *statement;
    const char *name;
    bool is_led_to;
};

struct file_list {
    struct opened **items;
    size_t count, capacity;
};

struct block_list {
    struct library_block *items;
    size_t count, capacity;
};

struct loading {
    const struct deck_reader *reader;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct file_list files;
    struct block_list blocks;
    struct word_table mentioned;
    struct statement *first, *last; /* of the deck in order */
};

/* ---- paths ---- */

/* Drops "." steps and pairs of a folder and "..", in place. */
static void tidy_path(char *path)
{
    char *to = path;
    const bool is_absolute = *path == '/';
    char *const start = path + is_absolute;
    to = start;
    for (char *step = start; *step;) {
        const size_t length = strcspn(step, "/");
        char *const next = step + length + (step[length] == '/');
        char *back = to;
        while (back > start && (back == to || back[-1] != '/')) {
            back--;
        }
        const size_t back_length = (size_t)(to - back);
        const bool is_up = length == 2 && memcmp(step, "..", 2) == 0;
        const bool can_go_up = back_length > 0 && !(back_length == 3 && memcmp(back, "../", 3) == 0);
        if (is_up && can_go_up) {
            to = back;
        } else if (length > 0 && !(length == 1 && *step == '.')) {
            memmove(to, step, (size_t)(next - step));
            to += next - step;
        }
        step = next;
    }
    *to = '\0';
}

/* `name`.deck in the folder of the file `beside`. */
static char *path_beside(struct arena *arena, const char *beside, const char *name)
{
    const char *slash = strrchr(beside, '/');
    const size_t folder = slash ? (size_t)(slash + 1 - beside) : 0;
    char *path = arena_format(arena, "%.*s%s.deck", (int)folder, beside, name);
    tidy_path(path);
    return path;
}

static char *path_in_library(struct arena *arena, const char *folder, const char *name)
{
    char *path = arena_format(arena, "%s/%s.deck", folder, name);
    tidy_path(path);
    return path;
}

/* The part of a path below the library folder, or NULL. */
static const char *below_library(const struct loading *loading, const char *path)
{
    const char *folder = loading->reader->library_folder;
    if (!folder || !*folder) {
        return NULL;
    }
    char *tidy = arena_format(loading->arena, "%s/", folder);
    tidy_path(tidy);
    const size_t length = strlen(tidy);
    return strncmp(path, tidy, length) == 0 ? path + length : NULL;
}

/* ---- opening files ---- */

static const struct item *find_item(const struct statement *statement, enum item_kind kind)
{
    const struct item *item = statement->items;
    while (item && item->kind != kind) {
        item = item->next;
    }
    return item;
}

static bool is_use(const struct statement *statement)
{
    return strcmp(statement->word, vocabulary_rows()[WORD_FILE_USE].word) == 0;
}

/* The statement has one text, perhaps a condition, and nothing more. */
static void read_use(struct loading *loading, struct opened *file, const struct statement *statement)
{
    const struct item *text = find_item(statement, ITEM_TEXT);
    const struct item *condition = find_item(statement, ITEM_FOR);
    size_t count = 0;
    for (const struct item *item = statement->items; item; item = item->next) {
        count++;
    }
    struct use *use = ARENA_APPEND(loading->arena, &file->uses);
    *use = (struct use){.statement = statement, .is_settled = true};
    const bool is_shaped = text && text == statement->items && count == (condition ? 2U : 1U) && !statement->has_block;
    if (!is_shaped) {
        struct diagnostic *message = diagnose(loading->diagnostics, CODE_E120, statement->at, "'use' names one file");
        diagnostic_hint(loading->diagnostics, message, "write use \"name\" or use \"name\" for something");
        return;
    }
    if (text->text[0] == '\0' || text->text[0] == '/') {
        diagnose(loading->diagnostics, CODE_E120, text->at, "%s",
                 text->text[0] ? "a used file is named from this one's folder, not from '/'" : "a file without a name");
        return;
    }
    use->name = text->text;
    use->condition = condition ? condition->value->name : NULL;
    use->is_settled = false;
}

/* A block of one name leads on from that name; one of two, a pair, would lead from each gas to all others. */
static void note_library_block(struct loading *loading, const struct statement *statement)
{
    const struct item *head = statement->items;
    const bool is_pair = head && head->next && head->next->kind == ITEM_EXPRESSION;
    if (head && head->kind == ITEM_EXPRESSION && head->value->kind == EXPRESSION_NAME && !is_pair) {
        struct library_block *block = ARENA_APPEND(loading->arena, &loading->blocks);
        *block = (struct library_block){.statement = statement, .name = head->value->name};
    }
}

static struct opened *add_file(struct loading *loading, struct source_file *source, size_t depth)
{
    struct opened *file = arena_alloc(loading->arena, 1, sizeof *file);
    source->order = loading->files.count;
    *file = (struct opened){.source = source, .depth = depth};
    *ARENA_APPEND(loading->arena, &loading->files) = file;
    deck_parse_file(source, loading->arena, loading->diagnostics, &file->statements);
    for (const struct statement *statement = file->statements; statement; statement = statement->next) {
        if (is_use(statement)) {
            read_use(loading, file, statement);
        } else if (source->is_library) {
            note_library_block(loading, statement);
        }
    }
    return file;
}

static struct opened *find_opened(const struct loading *loading, const char *path)
{
    for (size_t i = 0; i < loading->files.count; i++) {
        if (strcmp(loading->files.items[i]->source->path, path) == 0) {
            return loading->files.items[i];
        }
    }
    return NULL;
}

/* Reads a path; NULL with errno set. */
static struct source_file *read_source(struct loading *loading, const char *name, const char *path)
{
    char *text = NULL;
    size_t length = 0;
    if (!loading->reader->read(loading->reader->context, loading->arena, path, &text, &length)) {
        if (errno == ENOMEM) {
            arena_give_up(loading->arena);
        }
        return NULL;
    }
    if (length >= UINT32_MAX) {
        errno = EFBIG;
        return NULL;
    }
    return source_create(loading->arena, name, path, text, length);
}

static bool is_missing(int reason)
{
    return reason == ENOENT || reason == ENOTDIR;
}

static struct location place_of_use(const struct use *use)
{
    return use->statement->items->at;
}

static void report_unread(struct loading *loading, const struct opened *by, const struct use *use, int reason)
{
    struct diagnostics *all = loading->diagnostics;
    if (!is_missing(reason)) {
        diagnose(all, CODE_E403, place_of_use(use), "'%s.deck' cannot be read: %s", use->name, strerror(reason));
        return;
    }
    struct diagnostic *message =
        diagnose(all, CODE_E402, place_of_use(use), "'%s.deck' is neither beside '%s' nor in the library", use->name,
                 by->source->name);
    const size_t length = strlen(use->name);
    if (length > 5 && strcmp(use->name + length - 5, ".deck") == 0) {
        diagnostic_hint(all, message, "leave off '.deck'");
    }
}

/* The file at a path, opened now or before; NULL with errno set. */
static struct opened *open_path(struct loading *loading, const struct opened *by, const char *name, char *path)
{
    struct opened *known = find_opened(loading, path);
    if (known) {
        return known;
    }
    const char *below = below_library(loading, path);
    struct source_file *source = read_source(loading, below ? below : name, path);
    if (!source) {
        return NULL;
    }
    source->is_library = below || by->source->is_library;
    return add_file(loading, source, by->depth + 1);
}

static void bring(struct loading *loading, const struct opened *by, struct use *use)
{
    use->is_settled = true;
    if (loading->diagnostics->errors > DIAGNOSTICS_MOST) {
        return; /* nobody would read what else is missing */
    }
    if (by->depth == USE_DEPTH_MOST || loading->files.count == FILES_MOST) {
        diagnose(loading->diagnostics, CODE_E122, place_of_use(use),
                 "files use one another too deeply, or there are too many of them");
        return;
    }
    struct arena *arena = loading->arena;
    const char *library = loading->reader->library_folder;
    const char *name = path_beside(arena, by->source->name, use->name);
    use->brought = open_path(loading, by, name, path_beside(arena, by->source->path, use->name));
    if (!use->brought && is_missing(errno) && library) {
        use->brought = open_path(loading, by, use->name, path_in_library(arena, library, use->name));
    }
    if (!use->brought) {
        report_unread(loading, by, use, errno);
    }
}

/* ---- names mentioned ---- */

static void mention(struct loading *loading, const char *name)
{
    if (!word_enter(&loading->mentioned, loading->arena, name, strlen(name))) {
        arena_give_up(loading->arena);
    }
}

static bool is_mentioned(const struct loading *loading, const char *name)
{
    return word_is_entered(&loading->mentioned, name, strlen(name));
}

static void mention_expression(struct loading *loading, const struct expression *expression)
{
    if (expression->kind == EXPRESSION_NAME) {
        mention(loading, expression->name);
    }
    if (expression->left) {
        mention_expression(loading, expression->left);
    }
    if (expression->right) {
        mention_expression(loading, expression->right);
    }
}

/* The word counts too: a line of a mixture begins with the name of its component. */
static void mention_statement(struct loading *loading, const struct statement *statement)
{
    mention(loading, statement->word);
    for (const struct item *item = statement->items; item; item = item->next) {
        if (item->value) {
            mention_expression(loading, item->value);
        }
    }
    for (const struct statement *inner = statement->block; inner; inner = inner->next) {
        mention_statement(loading, inner);
    }
}

/* Follows mentioned names into the library's blocks until nothing new turns up. */
static void follow_names(struct loading *loading)
{
    for (bool is_new = true; is_new;) {
        is_new = false;
        for (size_t i = 0; i < loading->blocks.count; i++) {
            struct library_block *block = &loading->blocks.items[i];
            if (!block->is_led_to && is_mentioned(loading, block->name)) {
                block->is_led_to = true;
                is_new = true;
                mention_statement(loading, block->statement);
            }
        }
    }
}

static void count_names(struct loading *loading)
{
    for (size_t i = 0; i < loading->files.count; i++) {
        struct opened *file = loading->files.items[i];
        if (file->source->is_library || file->is_counted) {
            continue;
        }
        file->is_counted = true;
        for (const struct statement *statement = file->statements; statement; statement = statement->next) {
            if (!is_use(statement)) {
                mention_statement(loading, statement);
            }
        }
    }
    follow_names(loading);
}

/* Opens every file that is wanted by now; true when there were any. */
static bool open_wanted(struct loading *loading)
{
    bool is_any = false;
    for (size_t i = 0; i < loading->files.count; i++) {
        struct opened *file = loading->files.items[i];
        for (size_t k = 0; k < file->uses.count; k++) {
            struct use *use = &file->uses.items[k];
            if (!use->is_settled && (!use->condition || is_mentioned(loading, use->condition))) {
                bring(loading, file, use);
                is_any = true;
            }
        }
    }
    return is_any;
}

/* ---- the deck's order ---- */

static void add_statement(struct loading *loading, const struct statement *statement)
{
    struct statement *copy = arena_alloc(loading->arena, 1, sizeof *copy);
    *copy = *statement;
    copy->next = NULL;
    if (loading->last) {
        loading->last->next = copy;
    } else {
        loading->first = copy;
    }
    loading->last = copy;
}

static void put_in_order(struct loading *loading, struct opened *file);

static void replace_use(struct loading *loading, const struct use *use)
{
    if (!use->brought || use->brought->is_done) {
        return;
    }
    if (use->brought->is_in_order) {
        struct diagnostic *message = diagnose(loading->diagnostics, CODE_E121, place_of_use(use),
                                              "'%s' uses itself, by this statement", use->brought->source->name);
        diagnostic_hint(loading->diagnostics, message, "remove this 'use': the file is already being read");
        return;
    }
    put_in_order(loading, use->brought);
}

static void put_in_order(struct loading *loading, struct opened *file)
{
    file->is_in_order = true;
    size_t uses = 0;
    for (const struct statement *statement = file->statements; statement; statement = statement->next) {
        if (is_use(statement)) {
            replace_use(loading, &file->uses.items[uses++]);
        } else {
            add_statement(loading, statement);
        }
    }
    file->is_done = true;
}

static struct deck *make_deck(struct loading *loading)
{
    struct deck *deck = arena_alloc(loading->arena, 1, sizeof *deck);
    deck->file_count = loading->files.count;
    deck->files = arena_alloc(loading->arena, deck->file_count, sizeof(struct source_file *));
    for (size_t i = 0; i < deck->file_count; i++) {
        deck->files[i] = loading->files.items[i]->source;
    }
    deck->root = deck->files[0];
    deck->statements = loading->first;
    return deck;
}

struct deck *deck_load(const char *path, const struct deck_reader *reader, struct arena *arena,
                       struct diagnostics *diagnostics)
{
    struct loading loading = {.reader = reader, .arena = arena, .diagnostics = diagnostics};
    char *tidy = arena_format(arena, "%s", path);
    tidy_path(tidy);
    struct source_file *root = read_source(&loading, path, tidy);
    if (!root) {
        diagnose(diagnostics, CODE_E401, (struct location){NULL, 0, 0}, "'%s' cannot be read: %s", path,
                 strerror(errno));
        return NULL;
    }
    add_file(&loading, root, 0);
    do {
        count_names(&loading);
    } while (open_wanted(&loading));
    put_in_order(&loading, loading.files.items[0]);
    return make_deck(&loading);
}

bool deck_read_file(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    (void)context;
    return file_read(arena, path, text, length);
}
