/* Entries of a dangerous goods list: listed rows, limits and letters. */
#include "case/case_internal.h"

#include <stdlib.h>
#include <string.h>

struct row_list {
    struct listed_row *items;
    size_t count, capacity;
};

struct entry_target {
    struct case_entry entry;
    const struct expression *fluid;
    struct row_list rows;
    struct predicate_list limits;
};

static void read_title(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    into->entry.title = read_text(e, statement, "a title in quotes");
}

static void read_class_code(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    into->entry.class_code = read_text(e, statement, "a classification code in quotes");
}

/* True when `letters`, "ra, z", holds the letter as one of its members. */
static bool has_letter(const char *letters, const char *letter)
{
    const size_t length = strlen(letter);
    while (*letters != '\0') {
        const size_t member = strcspn(letters, ", ");
        if (member == length && strncmp(letters, letter, length) == 0) {
            return true;
        }
        letters += member;
        letters += strspn(letters, ", ");
    }
    return false;
}

static void read_letters(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    into->entry.letters = read_text(e, statement, "letters in quotes");
    into->entry.is_never_exceeded = into->entry.letters != NULL && has_letter(into->entry.letters, "o");
}

static void read_fluid(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    into->fluid = read_one_name(e, statement, "the name of a component");
}

static void read_lc50(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    struct reading reading = read_items(e, statement);
    struct quantity lc50 = {.given = false};
    if (take_quantity(&reading, &FORM_FRACTION, "lc50", &lc50) && finish_items(&reading)) {
        into->entry.lc50 = (struct optional){.given = true, .value = lc50.value};
    }
}

/* One of `filling-ratio 0.43` and `working-pressure 30 barg`. */
static bool take_listed_value(struct reading *reading, struct listed_row *row)
{
    const struct vocabulary_row *word = take_choice(reading, BLOCK_LISTED, "'filling-ratio' or 'working-pressure'");
    if (word == NULL) {
        return false;
    }
    const bool is_ratio = word->id == WORD_LISTED_FILLING_RATIO;
    struct optional *into = is_ratio ? &row->filling_ratio : &row->working_pressure;
    const struct item *item = take_item(reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(reading, "a value");
        return false;
    }
    into->given =
        read_value(reading->e, is_ratio ? &FORM_FILLING_RATIO : &FORM_RATING, word->word, item->value, &into->value);
    return into->given;
}

static void read_listed_fill(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct item *pressure = take_item(&reading, ITEM_EXPRESSION);
    struct listed_row row = {.origin = origin_of(e, statement->at)};
    if (pressure == NULL) {
        report_missing(&reading, "a test pressure");
        return;
    }
    if (!read_value(e, &FORM_RATING, "the test pressure of a listed row", pressure->value, &row.test_pressure) ||
        !take_listed_value(&reading, &row) || !take_reference(&reading, &row.origin.source) ||
        !finish_items(&reading) || !forbid_block(e, statement)) {
        return;
    }
    struct row_list *list = &into->rows;
    *ARENA_APPEND(e->arena, list) = row;
    const char *value = row.filling_ratio.given ? si_number(e->arena, row.filling_ratio.value)
                                                : si_text(e, &FORM_RATING, row.working_pressure.value);
    add_input(e, "listed-fill", arena_format(e->arena, "%s; %s", si_text(e, &FORM_RATING, row.test_pressure), value),
              &row.origin);
}

static void read_limit(struct elaboration *e, const struct statement *statement, void *target)
{
    struct entry_target *into = target;
    struct predicate limit;
    if (!read_predicate(e, statement, false, "limit", &limit)) {
        return;
    }
    if (!limit.has_temperature && predicate_needs_temperature(&limit)) {
        report_no_temperature(e, &limit);
        return;
    }
    struct predicate_list *list = &into->limits;
    *ARENA_APPEND(e->arena, list) = limit;
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_ENTRY_TITLE, read_title),           READ_ONCE(WORD_ENTRY_FLUID, read_fluid),
    READ_ONCE(WORD_ENTRY_CLASS_CODE, read_class_code), READ_ONCE(WORD_ENTRY_LC50, read_lc50),
    READ_ONCE(WORD_ENTRY_LETTERS, read_letters),       READ_EACH(WORD_ENTRY_LISTED_FILL, read_listed_fill),
    READ_EACH(WORD_ENTRY_LIMIT, read_limit),
};
static const struct block_form ENTRY = BLOCK_FORM(BLOCK_ENTRY, ROWS);

/* By rising test pressure; rows of the same pressure keep their order in the text. */
static int compare_rows(const void *left, const void *right)
{
    const struct listed_row *a = left;
    const struct listed_row *b = right;
    if (a->test_pressure < b->test_pressure || a->test_pressure > b->test_pressure) {
        return a->test_pressure < b->test_pressure ? -1 : 1;
    }
    return (a->origin.at.begin > b->origin.at.begin) - (a->origin.at.begin < b->origin.at.begin);
}

const struct case_entry *build_entry(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const struct statement *block = named->items[0];
    const size_t before = trouble_so_far(e);
    struct entry_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->entry = (struct case_entry){.name = named->name, .origin = origin_of(e, named->at)};
    if (require_block(e, block)) {
        read_block(e, &ENTRY, arena_format(e->arena, "entry \"%s\"", named->name), block, target);
    }
    if (target->rows.count != 0) {
        qsort(target->rows.items, target->rows.count, sizeof *target->rows.items, compare_rows);
    }
    struct case_entry *entry = &target->entry;
    entry->row_count = target->rows.count;
    entry->rows = target->rows.items;
    entry->limit_count = target->limits.count;
    entry->limits = target->limits.items;
    entry->component = target->fluid == NULL ? NULL : component_of_name(e, target->fluid);
    mark_file_used(e, block->at);
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? entry : NULL;
    return named->built;
}

/* Whether an entry is for a component can be seen before it is built. */
static bool is_for(const struct named *entry, const char *component)
{
    const struct statement *fluid = find_statement(entry->items[0]->block, "fluid");
    const struct item *item = fluid == NULL ? NULL : fluid->items;
    return item != NULL && item->kind == ITEM_EXPRESSION && item->value->kind == EXPRESSION_NAME &&
           strcmp(item->value->name, component) == 0;
}

const struct entry_list *entries_of_fluid(struct elaboration *e, const struct case_fluid *fluid)
{
    static const struct entry_list none = {.items = NULL};
    if (fluid->shares != NULL) {
        return &none;
    }
    struct named *component = names_find(&e->tables[NAMES_COMPONENT], fluid->name);
    if (component->entries != NULL) {
        return component->entries;
    }
    struct entry_list *entries = arena_alloc(e->arena, 1, sizeof *entries);
    const struct name_table *table = &e->tables[NAMES_ENTRY];
    for (size_t i = 0; i < table->count; i++) {
        const struct case_entry *entry = is_for(table->items[i], fluid->name) ? build_entry(e, table->items[i]) : NULL;
        if (entry != NULL) {
            *ARENA_APPEND(e->arena, entries) = entry;
        }
    }
    component->entries = entries;
    return entries;
}

static bool contains(const struct case_fluid *fluid, const struct case_component *component)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->components[i] == component) {
            return true;
        }
    }
    return false;
}

/* An entry of one substance is for that substance, perhaps with impurities; of a group, whoever names it says that the
 * fluid belongs to it, and its limits are tested. */
static bool check_fits(struct elaboration *e, const struct item *name, const struct case_entry *entry,
                       const struct case_fluid *fluid)
{
    if (entry->component == NULL || (fluid->count == 1 && fluid->components[0] == entry->component)) {
        return true;
    }
    const bool is_part = contains(fluid, entry->component);
    struct diagnostic *said =
        diagnose(e->out, is_part ? CODE_W281 : CODE_E228, name->at, "the entry \"%s\" is for %s%s, and '%s' %s",
                 shortened(e, entry->name), entry->component->name, is_part ? " by itself" : "",
                 shortened(e, fluid->name), is_part ? "is a mixture" : "contains none");
    said->note = "the entry";
    said->note_at = entry->origin.at;
    return is_part;
}

static struct named *find_entry(struct elaboration *e, const struct item *name)
{
    struct named *named = names_find(&e->tables[NAMES_ENTRY], name->text);
    if (named == NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E205, name->at, "there is no entry \"%s\"", shortened(e, name->text));
        size_t count;
        const char **known = known_names(e, NAMES_ENTRY, &count);
        suggest(e, said, name->text, known, count);
    }
    return named;
}

const struct entry_list *entry_of_name(struct elaboration *e, const struct item *name, const struct case_fluid *fluid)
{
    struct named *named = find_entry(e, name);
    const struct case_entry *entry = named == NULL ? NULL : build_entry(e, named);
    if (entry == NULL || !check_fits(e, name, entry, fluid)) {
        return NULL;
    }
    struct entry_list *entries = arena_alloc(e->arena, 1, sizeof *entries);
    *ARENA_APPEND(e->arena, entries) = entry;
    return entries;
}
