/* Solids: what is known of a substance below its triple point. */
#include "case/case_internal.h"

static const struct quantity_form FORM_SOLID_VOLUME = {
    .measure = MEASURE_MOLAR_VOLUME, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e-3};

struct solid_target {
    const struct case_source *source;
    struct quantity molar_volume;
    bool has_range, has_line;
    double smallest_temperature, largest_temperature;
    enum sublimation_form form;
    struct power_terms line;
    const struct case_source *melting_source;
    struct melting_list {
        struct melting_part *items;
        size_t count, capacity;
    } melting;
};

static void read_source(struct elaboration *e, const struct statement *statement, void *target)
{
    struct solid_target *into = target;
    const struct expression *key = read_one_name(e, statement, "the key of a source");
    into->source = key == NULL ? NULL : source_of_name(e, key);
}

static void read_range(struct elaboration *e, const struct statement *statement, void *target)
{
    struct solid_target *into = target;
    into->has_range = read_temperature_range(e, statement, &into->smallest_temperature, &into->largest_temperature);
}

static enum sublimation_form form_of(enum vocabulary_word word)
{
    return word == WORD_SUBLIMATION_REDUCED_SERIES      ? REDUCED_SERIES
           : word == WORD_SUBLIMATION_GAP_SERIES        ? GAP_SERIES
           : word == WORD_SUBLIMATION_POWER_DIFFERENCES ? POWER_DIFFERENCES
                                                        : INVERSE_POWERS;
}

static void read_sublimation(struct elaboration *e, const struct statement *statement, void *target)
{
    struct solid_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *form = take_choice(&reading, BLOCK_SUBLIMATION, "the form of the sublimation line");
    if (form != NULL && finish_items(&reading) && require_block(e, statement)) {
        into->form = form_of(form->id);
        into->has_line = read_power_terms(e, statement, "the sublimation line", &FORM_PRESSURE, &into->line);
    }
}

static void read_melting_source(struct elaboration *e, const struct statement *statement, void *target)
{
    struct solid_target *into = target;
    const struct expression *key = read_one_name(e, statement, "the key of a source");
    into->melting_source = key == NULL ? NULL : source_of_name(e, key);
}

static enum melting_form melting_form_of(enum vocabulary_word word)
{
    return word == WORD_MELTING_GAP_POWERS ? MELTING_GAP_POWERS
           : word == WORD_MELTING_SIMON    ? MELTING_SIMON
                                           : MELTING_POWERS;
}

/* `melting gap-powers from 216.592 K to 330 K { ... }` */
static void read_melting(struct elaboration *e, const struct statement *statement, void *target)
{
    struct solid_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *form = take_choice(&reading, BLOCK_MELTING, "the form of the melting line");
    const struct item *from = take_item(&reading, ITEM_FROM), *to = take_item(&reading, ITEM_TO);
    struct power_terms line;
    double least, most;
    if (form == NULL) {
        return;
    }
    if (from == NULL || to == NULL) {
        report_missing(&reading, "a range, from a temperature to a temperature,");
        return;
    }
    if (!read_value(e, &FORM_TEMPERATURE, "melting", from->value, &least) ||
        !read_value(e, &FORM_TEMPERATURE, "melting", to->value, &most) || !finish_items(&reading) ||
        !require_block(e, statement) || !read_power_terms(e, statement, "the melting line", &FORM_PRESSURE, &line)) {
        return;
    }
    if (!(least < most)) {
        diagnose(e->out, CODE_E209, statement->at, "melting: the range ends before it begins");
        return;
    }
    *ARENA_APPEND(e->arena, &into->melting) = (struct melting_part){
        melting_form_of(form->id), line.temperature, line.value, line.count, line.terms, least, most};
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_SOLID_SOURCE, read_source),
    READ_QUANTITY(WORD_SOLID_MOLAR_VOLUME, &FORM_SOLID_VOLUME, struct solid_target, molar_volume),
    READ_ONCE(WORD_SOLID_VALID_TEMPERATURE, read_range),
    READ_ONCE(WORD_SOLID_SUBLIMATION, read_sublimation),
    READ_ONCE(WORD_SOLID_MELTING_SOURCE, read_melting_source),
    READ_EACH(WORD_SOLID_MELTING, read_melting),
};
static const struct block_form SOLID = BLOCK_FORM(BLOCK_SOLID, ROWS);

static const char *first_lack(const struct solid_target *read)
{
    return !read->molar_volume.given ? "molar-volume"
           : !read->has_range        ? "valid-temperature"
           : !read->has_line         ? "sublimation line"
                                     : NULL;
}

const struct case_solid *build_solid(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    const struct statement *block = named->items[0];
    struct solid_target read = {.source = NULL};
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    if (require_block(e, block)) {
        read_block(e, &SOLID, arena_format(e->arena, "solid %s", named->name), block, &read);
    }
    e->is_deferring = outer;
    const char *lack = first_lack(&read);
    if (lack != NULL && trouble_so_far(e) == before) {
        diagnose(e->out, CODE_E216, block->at, "the solid lacks its %s", lack);
    }
    struct case_solid *solid = arena_alloc(e->arena, 1, sizeof *solid);
    *solid = (struct case_solid){
        .source = read.source,
        .at = block->at,
        .molar_volume = read.molar_volume,
        .spec = {read.form, read.line.temperature, read.line.value, read.line.count, read.line.terms,
                 read.smallest_temperature, read.largest_temperature, read.molar_volume.value, read.melting.count,
                 read.melting.items},
        .melting_source = read.melting_source,
    };
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? solid : NULL;
    return named->built;
}

void use_melting(struct elaboration *e, const struct case_component *component)
{
    if (component->solid != NULL) {
        use_source(e, component->solid->melting_source);
    }
}

void use_solid(struct elaboration *e, const struct case_component *component)
{
    if (component->solid != NULL) {
        use_source(e, component->solid->source);
        use_quantity(e, &component->solid->molar_volume);
        mark_file_used(e, component->solid->at);
    }
}
