/* Reading statements: items from left to right, blocks by a table of the words they take. */
#include "case/case_internal.h"

#include <string.h>

struct reading read_items(struct elaboration *e, const struct statement *statement)
{
    return (struct reading){.e = e, .of = statement, .item = statement->items};
}

const struct item *take_item(struct reading *reading, enum item_kind kind)
{
    const struct item *item = reading->item;
    if (item == NULL || item->kind != kind) {
        return NULL;
    }
    reading->item = item->next;
    return item;
}

/* All words that would do, when none is near to the one written. */
static void hint_words(struct elaboration *e, struct diagnostic *said, const char *const *known, size_t count)
{
    struct text list = {.arena = e->arena};
    for (size_t i = 0; i < count; i++) {
        text_format(&list, "%s%s", i == 0 ? "" : ", ", known[i]);
    }
    if (count != 0) {
        diagnostic_hint(e->out, said, "known: %s", list.bytes);
    }
}

static bool is_name(const struct item *item)
{
    return item != NULL && item->kind == ITEM_EXPRESSION && item->value->kind == EXPRESSION_NAME;
}

const struct expression *take_name(struct reading *reading)
{
    if (!is_name(reading->item)) {
        return NULL;
    }
    return take_item(reading, ITEM_EXPRESSION)->value;
}

bool take_word(struct reading *reading, const char *word)
{
    return is_name(reading->item) && strcmp(reading->item->value->name, word) == 0 && take_name(reading) != NULL;
}

const struct vocabulary_row *choice_of_name(struct elaboration *e, enum vocabulary_block block,
                                            const struct expression *name)
{
    const struct vocabulary_row *row = vocabulary_find(block, name->name);
    if (row != NULL) {
        return row;
    }
    const char *known[VOCABULARY_MOST];
    const size_t count = vocabulary_words(block, known, VOCABULARY_MOST);
    struct diagnostic *said = diagnose(e->out, CODE_E213, name->at, "'%s' has no place %s", shortened(e, name->name),
                                       vocabulary_block_title(block));
    hint_words(e, said, known, count);
    suggest(e, said, name->name, known, count);
    return NULL;
}

const struct vocabulary_row *take_choice(struct reading *reading, enum vocabulary_block block, const char *what)
{
    const struct expression *name = take_name(reading);
    if (name == NULL) {
        report_missing(reading, what);
        return NULL;
    }
    return choice_of_name(reading->e, block, name);
}

const char *take_text(struct reading *reading, const char *what)
{
    const struct item *item = take_item(reading, ITEM_TEXT);
    if (item == NULL) {
        report_missing(reading, what);
        return NULL;
    }
    if (*item->text == '\0') {
        diagnose(reading->e->out, CODE_E203, item->at, "%s must not be empty", what);
        return NULL;
    }
    return item->text;
}

/* How the statement is written, from the vocabulary's row in the block at hand. */
static void hint_form(struct elaboration *e, struct diagnostic *said, const struct statement *statement)
{
    const struct vocabulary_row *row = vocabulary_find(e->block, statement->word);
    row = row == NULL ? vocabulary_next(statement->word, NULL) : row;
    if (row != NULL) {
        diagnostic_hint(e->out, said, "as in: %s", row->example);
    }
}

/* Where a missing thing is pointed at: the item that stands in its place, else the end of the statement. */
static struct location place_of_missing(const struct reading *reading)
{
    if (reading->item != NULL) {
        return reading->item->at;
    }
    return reading->of->items == NULL ? reading->of->word_at : reading->of->at;
}

void report_missing(struct reading *reading, const char *what)
{
    struct elaboration *e = reading->e;
    const struct location at = place_of_missing(reading);
    struct diagnostic *said = reading->item == NULL ? diagnose(e->out, CODE_E203, at, "%s is missing after '%s'", what,
                                                               written_at(e, reading->of->at, QUOTED_MOST))
                                                    : diagnose(e->out, CODE_E203, at, "%s is needed here, not '%s'",
                                                               what, written_at(e, at, QUOTED_MOST));
    hint_form(e, said, reading->of);
}

bool finish_items(struct reading *reading)
{
    if (reading->item == NULL) {
        return true;
    }
    struct elaboration *e = reading->e;
    struct diagnostic *said = diagnose(e->out, CODE_E204, reading->item->at, "'%s' has no place here",
                                       written_at(e, reading->item->at, QUOTED_MOST));
    hint_form(e, said, reading->of);
    return false;
}

bool require_block(struct elaboration *e, const struct statement *statement)
{
    if (statement->has_block) {
        return true;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E212, statement->at, "'%s' needs a block in braces", shortened(e, statement->word));
    hint_form(e, said, statement);
    return false;
}

bool forbid_block(struct elaboration *e, const struct statement *statement)
{
    if (!statement->has_block) {
        return true;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E212, statement->block_at, "'%s' takes no block", shortened(e, statement->word));
    hint_form(e, said, statement);
    return false;
}

const struct statement *find_statement(const struct statement *block, const char *word)
{
    while (block != NULL && strcmp(block->word, word) != 0) {
        block = block->next;
    }
    return block;
}

static const struct block_row *find_row(const struct block_form *form, enum vocabulary_word word)
{
    for (size_t i = 0; i < form->count; i++) {
        if (form->rows[i].word == word) {
            return &form->rows[i];
        }
    }
    return NULL;
}

/* Where a word is at home: the first few of its blocks. */
static const char *homes_of(struct elaboration *e, const char *word)
{
    enum { HOMES_MOST = 3 };
    struct text list = {.arena = e->arena};
    size_t count = 0;
    for (const struct vocabulary_row *row = NULL; count < HOMES_MOST && (row = vocabulary_next(word, row)) != NULL;
         count++) {
        text_format(&list, "%s%s", count == 0 ? "" : ", ", vocabulary_block_title(row->block));
    }
    return count == 0 ? NULL : list.bytes;
}

/* A word that the block does not take: at home elsewhere, or misspelled. */
void report_word(struct elaboration *e, enum vocabulary_block block, const struct statement *statement)
{
    const char *homes = homes_of(e, statement->word);
    struct diagnostic *said =
        diagnose(e->out, homes == NULL ? CODE_E201 : CODE_E202, statement->word_at, "'%s' has no place %s",
                 shortened(e, statement->word), vocabulary_block_title(block));
    if (homes != NULL) {
        diagnostic_hint(e->out, said, "it stands %s", homes);
        return;
    }
    const char *known[VOCABULARY_MOST];
    suggest(e, said, statement->word, known, vocabulary_words(block, known, VOCABULARY_MOST));
}

static void read_quantity_row(struct elaboration *e, const struct block_row *row, const struct vocabulary_row *word,
                              const struct statement *statement, void *target)
{
    struct reading reading = read_items(e, statement);
    struct quantity *into = (struct quantity *)(void *)((char *)target + row->offset);
    const struct quantity_form *form = row->form == NULL ? form_of_measure(word->measure) : row->form;
    if (forbid_block(e, statement) && take_quantity(&reading, form, word->word, into)) {
        finish_items(&reading);
    }
}

const char *read_text(struct elaboration *e, const struct statement *statement, const char *what)
{
    struct reading reading = read_items(e, statement);
    const char *text = forbid_block(e, statement) ? take_text(&reading, what) : NULL;
    return text != NULL && finish_items(&reading) ? text : NULL;
}

static void report_repetition(struct elaboration *e, const struct statement *statement, const struct statement *first)
{
    struct diagnostic *said = diagnose(e->out, CODE_E207, statement->word_at, "'%s' is given twice in one block",
                                       shortened(e, statement->word));
    said->note = "first given here";
    said->note_at = first->word_at;
}

const struct expression *read_one_name(struct elaboration *e, const struct statement *statement, const char *what)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, what);
        return NULL;
    }
    return finish_items(&reading) && forbid_block(e, statement) ? name : NULL;
}

/* One statement of a block; `seen` holds the first statement of each row. */
static void read_statement(struct elaboration *e, const struct block_form *form, const struct statement *statement,
                           const struct statement **seen, void *target)
{
    const struct vocabulary_row *word = vocabulary_find(form->block, statement->word);
    const struct block_row *row = word == NULL ? NULL : find_row(form, word->id);
    if (row == NULL) {
        if (form->read_other != NULL && vocabulary_find(form->other_block, statement->word) != NULL) {
            form->read_other(e, statement, target);
        } else {
            report_word(e, form->block, statement);
        }
        return;
    }
    const struct statement **first = &seen[row - form->rows];
    if (*first != NULL && !row->repeats) {
        report_repetition(e, statement, *first);
        return;
    }
    *first = statement;
    if (row->read != NULL) {
        row->read(e, statement, target);
    } else {
        read_quantity_row(e, row, word, statement, target);
    }
}

void read_block(struct elaboration *e, const struct block_form *form, const char *group, const struct statement *owner,
                void *target)
{
    assert(form->count <= BLOCK_ROWS_MOST);
    const struct statement *seen[BLOCK_ROWS_MOST] = {NULL};
    const char *outer_group = e->group;
    const enum vocabulary_block outer_block = e->block;
    e->group = group;
    e->block = form->block;
    for (const struct statement *at = owner->block; at != NULL; at = at->next) {
        read_statement(e, form, at, seen, target);
    }
    e->group = outer_group;
    e->block = outer_block;
}
