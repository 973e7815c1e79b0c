/* Solids: what is known of a substance below its triple point. */
#include "case/case_internal.h"

#include <math.h>

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

/* How near to the triple temperature a melting line begins, and up to which pressure (Pa), little for such a line: what
 * begins there at more is the line of another form of the solid. */
#define AT_TRIPLE_TEMPERATURE 1e-3
#define AT_TRIPLE_PRESSURE    1e6

static bool is_at(double temperature, double triple)
{
    return fabs(temperature / triple - 1.0) <= AT_TRIPLE_TEMPERATURE;
}

static const struct melting_part *part_from_triple(const struct solid_target *read)
{
    for (size_t k = 0; k < read->melting.count; k++) {
        const struct melting_part *part = &read->melting.items[k];
        if (is_at(part->smallest_temperature, read->largest_temperature) &&
            is_at(part->reducing_temperature, read->largest_temperature) &&
            part->reducing_pressure < AT_TRIPLE_PRESSURE) {
            return part;
        }
    }
    return NULL;
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
        .spec = {.form = read.form,
                 .reducing_temperature = read.line.temperature,
                 .reducing_pressure = read.line.value,
                 .count = read.line.count,
                 .terms = read.line.terms,
                 .smallest_temperature = read.smallest_temperature,
                 .largest_temperature = read.largest_temperature,
                 .molar_volume = read.molar_volume.value,
                 .melting_count = read.melting.count,
                 .melting = read.melting.items,
                 .melting_from_triple = part_from_triple(&read)},
        .melting_source = read.melting_source,
    };
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? solid : NULL;
    return named->built;
}

static bool may_melt(const struct case_solid *solid, double from, double to)
{
    const struct melting_part *part = solid == NULL ? NULL : solid->spec.melting_from_triple;
    const double triple = part == NULL ? 0.0 : solid->spec.largest_temperature;
    return part != NULL && to > triple && from <= fmin(part->largest_temperature, triple * (1.0 + MELTING_FOLLOWED));
}

static bool asks_beside_melting(const struct predicate *predicate, const struct case_solid *solid)
{
    return predicate->kind == PREDICATE_NO_SOLID && predicate->has_temperature &&
           may_melt(solid, predicate->from, predicate->to);
}

bool case_sheet_melts(const struct case_sheet *sheet, const struct case_component *component)
{
    const struct case_solid *solid = component->solid;
    bool melts = sheet->show_melting && solid != NULL && solid->spec.melting_count > 0;
    for (size_t i = 0; sheet->kind == SHEET_SETTLED_PRESSURE && i < sheet->temperatures.count; i++) {
        const double temperature = sheet->temperatures.values[i];
        melts = melts || may_melt(solid, temperature, temperature);
    }
    for (size_t i = 0; i < sheet->requirement_count; i++) {
        melts = melts || asks_beside_melting(&sheet->requirements[i], solid);
    }
    for (size_t r = 0; r < sheet->rule_count; r++) {
        for (size_t i = 0; i < sheet->rules[r]->predicate_count; i++) {
            melts = melts || asks_beside_melting(&sheet->rules[r]->predicates[i], solid);
        }
    }
    return melts;
}

/* A settled-pressure sheet tells the solids at rest at the temperatures it sweeps; a saturation sheet, of a pure gas,
 * the sublimation line, and the melting line where it is asked for. */
bool case_sheet_tells_solid(const struct case_sheet *sheet, const struct case_component *component)
{
    const bool is_pure = sheet->fluid->count == 1;
    if (sheet->asks_of_solids || component->solid == NULL) {
        return sheet->asks_of_solids;
    }
    if (sheet->kind == SHEET_DRAW_DOWN) {
        return sheet->drawing.rate.given && is_pure;
    }
    bool tells = case_sheet_melts(sheet, component);
    if (sheet->kind == SHEET_SETTLED_PRESSURE || (sheet->kind == SHEET_SATURATION && is_pure)) {
        for (size_t i = 0; i < sheet->temperatures.count; i++) {
            tells = tells || sheet->temperatures.values[i] < component->solid->spec.largest_temperature;
        }
    }
    return tells;
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
