/* Elaboration: finds what a deck defines, builds what its sheets ask for, then checks the rest of the user's own text.
 */
#include "case/case_internal.h"

#include <string.h>

size_t trouble_so_far(const struct elaboration *e)
{
    return e->out->errors + e->silent;
}

/* ---- Definitions ---- */

static bool is_own(const struct statement *statement)
{
    return !statement->at.file->is_library;
}

static void report_defined_twice(struct elaboration *e, const struct named *named, struct location at)
{
    struct diagnostic *said = diagnose(e->out, CODE_E206, at, "'%s' is defined twice", shortened(e, named->name));
    said->note = "first defined here";
    said->note_at = named->at;
}

/* Components and pairs add up. Of everything else one definition counts: the deck's own before the library's. */
static void define(struct elaboration *e, enum name_kind kind, const char *name, struct location at,
                   const struct statement *statement)
{
    struct named *named = names_add(e->arena, &e->tables[kind], name);
    if (named->count == 0 || kind == NAMES_COMPONENT || kind == NAMES_PAIR) {
        named->at = named->count == 0 ? at : named->at;
        *ARENA_APPEND(e->arena, named) = statement;
        return;
    }
    if (is_own(statement) == is_own(named->items[0])) {
        report_defined_twice(e, named, at);
    } else if (is_own(statement)) {
        named->items[0] = statement;
        named->at = at;
    }
}

/* `vessel fifty { ... }`: the name, and no more items. */
static void define_named(struct elaboration *e, enum name_kind kind, const char *what,
                         const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, what);
        return;
    }
    define(e, kind, name->name, name->at, statement);
    finish_items(&reading);
}

/* `equation argon { ... }`, or `equation argon gerg-2008 { ... }` for that method alone. */
static void define_equation(struct elaboration *e, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, "the name of the equation's component");
        return;
    }
    const bool is_gerg = take_word(&reading, vocabulary_rows()[WORD_METHOD_GERG_2008].word);
    if (finish_items(&reading)) {
        define(e, is_gerg ? NAMES_GERG_EQUATION : NAMES_EQUATION, name->name, name->at, statement);
    }
}

/* `mixture name by mole { ... }`: what follows the name is read when the mixture is built. */
static void define_mixture(struct elaboration *e, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, "the name of the mixture");
        return;
    }
    define(e, NAMES_MIXTURE, name->name, name->at, statement);
}

/* `pair nitrogen propane { ... }`, `group-pair CH3 CH2 ...`: two names, of groups with values after them. */
static void define_pair(struct elaboration *e, enum name_kind kind, const char *what, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *first = take_name(&reading);
    const struct expression *second = first == NULL ? NULL : take_name(&reading);
    if (second == NULL) {
        report_missing(&reading, what);
        return;
    }
    if (strcmp(first->name, second->name) == 0) {
        diagnose(e->out, CODE_E229, second->at, "a pair is of two different %s, and '%s' is named twice",
                 kind == NAMES_PAIR ? "components" : "groups", shortened(e, first->name));
        return;
    }
    if (kind == NAMES_GROUP_PAIR || finish_items(&reading)) {
        const struct location at = location_span(first->at, second->at);
        define(e, kind, pair_name(e, first->name, second->name), at, statement);
    }
}

static void define_entry(struct elaboration *e, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct item *item = reading.item;
    const char *name = take_text(&reading, "the entry's number in quotes");
    if (name != NULL) {
        define(e, NAMES_ENTRY, name, item->at, statement);
        finish_items(&reading);
    }
}

/* `source key "citation"`: the citation is read when a value names the key. */
static void define_source(struct elaboration *e, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *key = take_name(&reading);
    if (key == NULL) {
        report_missing(&reading, "the key of the source");
        return;
    }
    define(e, NAMES_SOURCE, key->name, key->at, statement);
}

static void define_let(struct elaboration *e, const struct statement *statement)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, "a name");
        return;
    }
    define(e, NAMES_LET, name->name, name->at, statement);
}

/* A block that a deck has one of. */
static void keep_only(struct elaboration *e, const struct statement **kept, const struct statement *statement)
{
    if (*kept == NULL) {
        *kept = statement;
        return;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E206, statement->word_at, "a deck has one '%s' block, this is a second", statement->word);
    said->note = "the first";
    said->note_at = (*kept)->word_at;
}

static void index_statement(struct elaboration *e, const struct statement *statement)
{
    const struct vocabulary_row *row = vocabulary_find(BLOCK_FILE, statement->word);
    static const struct {
        enum vocabulary_word word;
        enum name_kind kind;
        const char *what;
    } blocks[] = {
        {WORD_FILE_COMPONENT, NAMES_COMPONENT, "the name of the component"},
        {WORD_FILE_DEPARTURE, NAMES_DEPARTURE, "the name of the departure"},
        {WORD_FILE_SOLID, NAMES_SOLID, "the name of the solid's component"},
        {WORD_FILE_VESSEL, NAMES_VESSEL, "the name of the vessel"},
        {WORD_FILE_CHARGE, NAMES_CHARGE, "the name of the charge"},
        {WORD_FILE_RULE, NAMES_RULE, "the name of the rule"},
    };
    if (row == NULL) {
        report_word(e, BLOCK_FILE, statement);
        return;
    }
    for (size_t i = 0; i < sizeof blocks / sizeof *blocks; i++) {
        if (blocks[i].word == row->id) {
            define_named(e, blocks[i].kind, blocks[i].what, statement);
            return;
        }
    }
    if (row->id == WORD_FILE_ENTRY) {
        define_entry(e, statement);
    } else if (row->id == WORD_FILE_MIXTURE) {
        define_mixture(e, statement);
    } else if (row->id == WORD_FILE_EQUATION) {
        define_equation(e, statement);
    } else if (row->id == WORD_FILE_PAIR) {
        define_pair(e, NAMES_PAIR, "the names of two components", statement);
    } else if (row->id == WORD_FILE_GROUP_PAIR) {
        define_pair(e, NAMES_GROUP_PAIR, "the names of two groups", statement);
    } else if (row->id == WORD_FILE_SOURCE) {
        define_source(e, statement);
    } else if (row->id == WORD_FILE_LET) {
        define_let(e, statement);
    } else if (row->id == WORD_FILE_CASE) {
        keep_only(e, &e->case_statement, statement);
    } else if (row->id == WORD_FILE_METHODS) {
        keep_only(e, &e->methods_statement, statement);
    } else if (row->id == WORD_FILE_SHEET) {
        *ARENA_APPEND(e->arena, &e->sheets) = statement;
    }
}

static void index_deck(struct elaboration *e)
{
    for (const struct statement *at = e->deck->statements; at != NULL; at = at->next) {
        index_statement(e, at);
    }
}

/* ---- Names in use ---- */

void suggest(struct elaboration *e, struct diagnostic *said, const char *word, const char *const *known, size_t count)
{
    /* Beyond the messages that are kept nobody reads the suggestion, and a deck of nothing but mistakes stays quick. */
    const char *nearest = e->out->errors > DIAGNOSTICS_MOST ? NULL : nearest_word(word, known, count);
    if (nearest != NULL) {
        diagnostic_hint(e->out, said, "did you mean '%s'?", nearest);
    }
}

/* So many names are looked through for the nearest one. */
enum { KNOWN_MOST = 1000 };

const char **known_names(struct elaboration *e, enum name_kind kind, size_t *count)
{
    const struct name_table *table = &e->tables[kind];
    *count = table->count < KNOWN_MOST ? table->count : KNOWN_MOST;
    const char **known = arena_alloc(e->arena, *count + 1, sizeof *known);
    for (size_t i = 0; i < *count; i++) {
        known[i] = table->items[i]->name;
    }
    return known;
}

struct named *named_of_item(struct elaboration *e, enum name_kind kind, const struct expression *name, const char *what)
{
    if (name->kind != EXPRESSION_NAME) {
        diagnose(e->out, CODE_E203, name->at, "the name of a %s is needed here, not '%s'", what,
                 written_at(e, name->at, QUOTED_MOST));
        return NULL;
    }
    struct named *named = names_find(&e->tables[kind], name->name);
    if (named != NULL) {
        return named;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E205, name->at, "there is no %s named '%s'", what, shortened(e, name->name));
    if (e->out->errors <= DIAGNOSTICS_MOST) {
        size_t count;
        const char **known = known_names(e, kind, &count);
        suggest(e, said, name->name, known, count);
    }
    return NULL;
}

void mark_file_used(struct elaboration *e, struct location at)
{
    if (e->is_checking || at.file == NULL || at.file->is_used) {
        return;
    }
    for (size_t i = 0; i < e->deck->file_count; i++) {
        if (e->deck->files[i] == at.file) {
            e->deck->files[i]->is_used = true;
        }
    }
}

/* ---- Sources ---- */

static void build_source(struct elaboration *e, struct named *named)
{
    const struct statement *statement = named->items[0];
    struct reading reading = read_items(e, statement);
    take_name(&reading);
    const char *citation = take_text(&reading, "the citation in quotes");
    const bool is_unverified = take_word(&reading, vocabulary_rows()[WORD_SOURCE_UNVERIFIED].word);
    if (citation == NULL || !finish_items(&reading) || !forbid_block(e, statement)) {
        named->state = FAILED;
        return;
    }
    struct case_source *source = arena_alloc(e->arena, 1, sizeof *source);
    *source = (struct case_source){.key = named->name, .citation = citation, .is_unverified = is_unverified};
    named->built = source;
    named->state = BUILT;
}

const struct case_source *source_of_name(struct elaboration *e, const struct expression *key)
{
    struct named *named = named_of_item(e, NAMES_SOURCE, key, "source");
    if (named == NULL) {
        return NULL;
    }
    if (named->state == NOT_BUILT) {
        build_source(e, named);
    }
    if (!e->is_deferring) {
        use_source(e, named->built);
    }
    return named->built;
}

void use_source(struct elaboration *e, const struct case_source *source)
{
    struct named *named = source == NULL ? NULL : names_find(&e->tables[NAMES_SOURCE], source->key);
    if (named != NULL && !e->is_checking && !named->is_in_use) {
        named->is_in_use = true;
        *ARENA_APPEND(e->arena, &e->sources) = source;
        mark_file_used(e, named->at);
    }
}

/* ---- Lets ---- */

static bool look_up_let(void *context, const char *name, struct value *out)
{
    const struct elaboration *e = context;
    const struct named *named = names_find(&e->tables[NAMES_LET], name);
    const struct let_value *let = named == NULL ? NULL : named->built;
    if (let == NULL) {
        return false;
    }
    *out = let->value;
    return true;
}

static bool read_let(struct elaboration *e, const struct statement *statement, struct let_value *let)
{
    struct reading reading = read_items(e, statement);
    take_name(&reading);
    const struct item *item = take_item(&reading, ITEM_RELATION);
    if (item == NULL || item->relation != RELATION_EQUAL) {
        report_missing(&reading, "'=' and a value");
        return false;
    }
    const char *name = statement->items->value->name;
    struct location last = item->value->at;
    if (!value_of(e, item->value, &let->value)) {
        return false;
    }
    let->unit = unit_written(e, item->value, (struct shown_unit){NULL, 1.0, 0.0});
    if (!settle_let(&reading, name, item->value, let, &last) || !finish_items(&reading) ||
        !forbid_block(e, statement)) {
        return false;
    }
    const struct origin origin = origin_of(e, location_span(item->value->at, last));
    add_input(e, name, si_value_text(e, &let->value), &origin);
    return true;
}

/* In the order of the text: a let sees those before it only. */
static void evaluate_lets(struct elaboration *e)
{
    e->scope = (struct name_scope){.look_up = look_up_let, .context = e};
    e->scope.known = known_names(e, NAMES_LET, &e->scope.known_count);
    e->group = "let";
    for (const struct statement *at = e->deck->statements; at != NULL; at = at->next) {
        const struct item *first = at->items;
        if (strcmp(at->word, "let") != 0 || first == NULL || first->value == NULL ||
            first->value->kind != EXPRESSION_NAME) {
            continue;
        }
        struct named *named = names_find(&e->tables[NAMES_LET], first->value->name);
        if (named == NULL || named->items[0] != at) {
            continue;
        }
        struct let_value *let = arena_alloc(e->arena, 1, sizeof *let);
        named->state = read_let(e, at, let) ? BUILT : FAILED;
        named->built = named->state == BUILT ? let : NULL;
    }
}

/* ---- The case block ---- */

struct note_list {
    const char **items;
    size_t count, capacity;
};

static void read_number(struct elaboration *e, const struct statement *statement, void *target)
{
    (void)target;
    e->tree->number = read_text(e, statement, "a number in quotes");
}

static void read_revision(struct elaboration *e, const struct statement *statement, void *target)
{
    (void)target;
    e->tree->revision = read_text(e, statement, "a revision in quotes");
}

static void read_note(struct elaboration *e, const struct statement *statement, void *target)
{
    struct note_list *notes = target;
    const char *note = read_text(e, statement, "a note in quotes");
    if (note != NULL) {
        *ARENA_APPEND(e->arena, notes) = note;
    }
}

static void read_ambient_pressure(struct elaboration *e, const struct statement *statement, void *target)
{
    (void)target;
    struct reading reading = read_items(e, statement);
    const struct item *item = take_item(&reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(&reading, "an absolute pressure");
        return;
    }
    static const char name[] = "ambient-pressure";
    double pressure, uncertainty = 0.0;
    struct location last = item->at;
    if (!read_air_pressure(e, item->value, name, &pressure) ||
        !take_uncertainty(&reading, &FORM_PRESSURE, name, pressure, &uncertainty, &last) || !finish_items(&reading)) {
        return;
    }
    const struct origin origin = origin_of(e, location_span(item->at, last));
    if (settle_value(e, &FORM_PRESSURE, name, item->value, uncertainty, &origin, &pressure)) {
        e->tree->ambient_pressure = pressure;
        add_input(e, name, si_text(e, &FORM_PRESSURE, pressure), &origin);
    }
}

static void read_case_units(struct elaboration *e, const struct statement *statement, void *target)
{
    (void)target;
    read_units(e, statement, &e->units);
}

static const struct block_row CASE_ROWS[] = {
    READ_ONCE(WORD_CASE_NUMBER, read_number),    READ_ONCE(WORD_CASE_REVISION, read_revision),
    READ_EACH(WORD_CASE_NOTE, read_note),        READ_ONCE(WORD_CASE_AMBIENT_PRESSURE, read_ambient_pressure),
    READ_ONCE(WORD_CASE_UNITS, read_case_units),
};
static const struct block_form CASE = BLOCK_FORM(BLOCK_CASE, CASE_ROWS);

static void read_case(struct elaboration *e)
{
    if (e->case_statement == NULL) {
        return;
    }
    struct reading reading = read_items(e, e->case_statement);
    struct note_list notes = {.items = NULL};
    e->tree->title = take_text(&reading, "a title in quotes");
    finish_items(&reading);
    read_block(e, &CASE, "case", e->case_statement, &notes);
    e->tree->notes = notes.items;
    e->tree->note_count = notes.count;
}

/* ---- What no sheet uses ---- */

static void check_equation(struct elaboration *e, struct named *named)
{
    if (names_find(&e->tables[NAMES_COMPONENT], named->name) == NULL) {
        diagnose(e->out, CODE_E205, named->at, "the equation's component '%s' is not defined",
                 shortened(e, named->name));
    }
    struct reference_spec spec;
    const struct case_source *source;
    build_equation(e, named, &spec, &source);
}

static void check_named(struct elaboration *e, enum name_kind kind, struct named *named)
{
    switch (kind) {
    case NAMES_SOURCE:
        build_source(e, named);
        break;
    case NAMES_COMPONENT:
        build_component(e, named);
        break;
    case NAMES_MIXTURE:
        build_mixture(e, named);
        break;
    case NAMES_PAIR:
        build_component_pair(e, named);
        break;
    case NAMES_GROUP_PAIR:
        build_group_pair(e, named);
        break;
    case NAMES_EQUATION:
    case NAMES_GERG_EQUATION:
        check_equation(e, named);
        break;
    case NAMES_DEPARTURE:
        build_departure(e, named);
        break;
    case NAMES_SOLID:
        build_solid(e, named);
        break;
    case NAMES_ENTRY:
        build_entry(e, named);
        break;
    case NAMES_VESSEL:
        build_vessel(e, named);
        break;
    case NAMES_CHARGE:
        build_charge(e, named);
        break;
    case NAMES_RULE:
        build_rule(e, named);
        break;
    case NAMES_LET:
    case NAME_KINDS:
        break;
    }
}

static bool has_own_block(const struct named *named)
{
    for (size_t i = 0; i < named->count; i++) {
        if (is_own(named->items[i])) {
            return true;
        }
    }
    return false;
}

/* The user's own blocks that no sheet led to are checked too; those of the library are left alone. */
static void check_unused(struct elaboration *e)
{
    e->is_checking = true;
    for (int kind = 0; kind < NAME_KINDS; kind++) {
        const struct name_table *table = &e->tables[kind];
        for (size_t i = 0; i < table->count; i++) {
            if (table->items[i]->state == NOT_BUILT && has_own_block(table->items[i])) {
                check_named(e, (enum name_kind)kind, table->items[i]);
            }
        }
    }
}

/* ---- The whole ---- */

static struct elaboration *begin_shifted(const struct deck *deck, const struct case_shift *shifts, size_t count,
                                         struct arena *arena, struct diagnostics *diagnostics)
{
    struct elaboration *e = arena_alloc(arena, 1, sizeof *e);
    e->deck = deck;
    e->arena = arena;
    e->out = diagnostics;
    e->shifts = shifts;
    e->shift_count = count;
    e->tree = arena_alloc(arena, 1, sizeof *e->tree);
    e->tree->deck = deck;
    e->tree->ambient_pressure = STANDARD_ATMOSPHERE;
    e->units = default_units();
    e->block = BLOCK_FILE;
    index_deck(e);
    evaluate_lets(e);
    return e;
}

static struct elaboration *begin(const struct deck *deck, struct arena *arena, struct diagnostics *diagnostics)
{
    return begin_shifted(deck, NULL, 0, arena, diagnostics);
}

static void warn_no_sheet(struct elaboration *e)
{
    if (e->sheets.count == 0) {
        struct diagnostic *said = diagnose(e->out, CODE_W280, (struct location){.file = e->deck->root},
                                           "the deck has no sheet: nothing is computed");
        diagnostic_hint(e->out, said, "ask a question, as in: sheet permissible-charge { ... }");
    }
}

static void mark_own_files(struct elaboration *e)
{
    for (size_t i = 0; i < e->deck->file_count; i++) {
        if (!e->deck->files[i]->is_library) {
            e->deck->files[i]->is_used = true;
        }
    }
}

static void read_all_sheets_need(struct elaboration *e)
{
    read_case(e);
    read_methods_block(e);
    build_sheets(e);
    e->tree->spreads = e->spreads.items;
    e->tree->spread_count = e->spreads.count;
}

const struct case_tree *case_elaborate_shifted(const struct deck *deck, const struct case_shift *shifts, size_t count,
                                               struct arena *arena, struct diagnostics *diagnostics)
{
    struct elaboration *e = begin_shifted(deck, shifts, count, arena, diagnostics);
    read_all_sheets_need(e);
    return diagnostics->errors == 0 ? e->tree : NULL;
}

const struct case_tree *case_elaborate(const struct deck *deck, struct arena *arena, struct diagnostics *diagnostics)
{
    struct elaboration *e = begin(deck, arena, diagnostics);
    mark_own_files(e);
    read_all_sheets_need(e);
    check_unused(e);
    if (diagnostics->errors != 0) {
        return NULL;
    }
    warn_no_sheet(e);
    finish_inputs(e);
    e->tree->components = e->components.items;
    e->tree->component_count = e->components.count;
    e->tree->sources = e->sources.items;
    e->tree->source_count = e->sources.count;
    return e->tree;
}

const struct case_component *case_find_component(const struct deck *deck, const char *name, struct arena *arena,
                                                 struct diagnostics *diagnostics)
{
    struct elaboration *e = begin(deck, arena, diagnostics);
    struct named *named = names_find(&e->tables[NAMES_COMPONENT], name);
    return named == NULL ? NULL : build_component(e, named);
}

const struct case_fluid *case_find_mixture(const struct deck *deck, const char *name, struct arena *arena,
                                           struct diagnostics *diagnostics)
{
    struct elaboration *e = begin(deck, arena, diagnostics);
    struct named *named = names_find(&e->tables[NAMES_MIXTURE], name);
    return named == NULL ? NULL : build_mixture(e, named);
}
