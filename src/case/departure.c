/* What a multi-fluid method knows of mixtures: departure functions, and the reducing parameters of pairs. */
#include "case/case_internal.h"

#include <string.h>

static const struct quantity_form FORM_REDUCING = {.measure = MEASURE_NUMBER,
                                                   .reading = READ_NUMBER,
                                                   .least = 0.0,
                                                   .is_least_open = true,
                                                   .most = 100.0,
                                                   .because = "beta and gamma are near 1"};
static const struct quantity_form FORM_WEIGHT = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = -100.0, .most = 100.0};

/* ---- Departure functions ---- */

struct departure_target {
    const struct case_source *source;
    struct residual_list residual;
};

static void read_source(struct elaboration *e, const struct statement *statement, void *target)
{
    struct departure_target *into = target;
    const struct expression *key = read_one_name(e, statement, "the key of a source");
    into->source = key == NULL ? NULL : source_of_name(e, key);
}

static void read_residual(struct elaboration *e, const struct statement *statement, void *target)
{
    struct departure_target *into = target;
    read_residual_terms(e, statement, &into->residual);
}

static const struct block_row DEPARTURE_ROWS[] = {
    READ_ONCE(WORD_DEPARTURE_SOURCE, read_source),
    READ_EACH(WORD_DEPARTURE_RESIDUAL, read_residual),
};
static const struct block_form DEPARTURE = BLOCK_FORM(BLOCK_DEPARTURE, DEPARTURE_ROWS);

static void check_terms(struct elaboration *e, const struct statement *block, const struct departure_target *read)
{
    if (read->residual.count == 0) {
        diagnose(e->out, CODE_E216, block->at, "the departure lacks its residual terms");
    }
    for (size_t i = 0; i < read->residual.count; i++) {
        if (read->residual.items[i].kind == RESIDUAL_NONANALYTIC) {
            diagnose(e->out, CODE_E213, block->at, "a departure has no nonanalytic terms");
            return;
        }
    }
}

const struct case_departure *build_departure(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    const struct statement *block = named->items[0];
    struct departure_target read = {.source = NULL};
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    if (require_block(e, block)) {
        read_block(e, &DEPARTURE, arena_format(e->arena, "departure %s", named->name), block, &read);
        if (trouble_so_far(e) == before) {
            check_terms(e, block, &read);
        }
    }
    e->is_deferring = outer;
    struct case_departure *departure = arena_alloc(e->arena, 1, sizeof *departure);
    *departure = (struct case_departure){
        .source = read.source,
        .at = block->at,
        .spec = {.name = named->name, .residual_count = read.residual.count, .residual = read.residual.items}};
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? departure : NULL;
    return named->built;
}

/* ---- Reducing parameters ---- */

static const struct vocabulary_row *take_reducing(struct reading *reading)
{
    if (reading->item == NULL) {
        report_missing(reading, "'temperature', 'volume' or 'departure'");
        return NULL;
    }
    return take_choice(reading, BLOCK_REDUCING, "a reducing parameter");
}

/* `departure NAME WEIGHT` */
static bool take_departure(struct reading *reading, struct case_reducing *into)
{
    const struct expression *name = take_name(reading);
    if (name == NULL) {
        report_missing(reading, "the name of a departure");
        return false;
    }
    struct named *named = named_of_item(reading->e, NAMES_DEPARTURE, name, "departure");
    into->departure = named == NULL ? NULL : build_departure(reading->e, named);
    return into->departure != NULL && take_quantity(reading, &FORM_WEIGHT, "departure weight", &into->weight);
}

static bool take_parameters(struct reading *reading, const struct vocabulary_row *row, struct case_reducing *into)
{
    if (row->id == WORD_REDUCING_DEPARTURE) {
        return take_departure(reading, into);
    }
    const bool is_temperature = row->id == WORD_REDUCING_TEMPERATURE;
    struct quantity *beta = is_temperature ? &into->beta_T : &into->beta_V;
    struct quantity *gamma = is_temperature ? &into->gamma_T : &into->gamma_V;
    if (beta->given) {
        diagnose(reading->e->out, CODE_E207, reading->of->at, "'%s' is given twice", row->word);
        return false;
    }
    return take_quantity(reading, &FORM_REDUCING, arena_format(reading->e->arena, "%s beta", row->word), beta) &&
           take_quantity(reading, &FORM_REDUCING, arena_format(reading->e->arena, "%s gamma", row->word), gamma);
}

/* The source stands after the last number and is meant for all of them. */
static void share_source(struct case_reducing *into)
{
    struct quantity *const quantities[] = {&into->beta_T, &into->gamma_T, &into->beta_V, &into->gamma_V, &into->weight};
    const struct case_source *source = NULL;
    for (size_t i = 0; i < sizeof quantities / sizeof *quantities; i++) {
        source = quantities[i]->origin.source != NULL ? quantities[i]->origin.source : source;
    }
    for (size_t i = 0; i < sizeof quantities / sizeof *quantities; i++) {
        quantities[i]->origin.source = source;
    }
}

/* The method's place in the list, a new one where it has none. */
static struct case_reducing *reducing_of(struct elaboration *e, struct reducing_list *list, const char *method)
{
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i].method == method) {
            return &list->items[i];
        }
    }
    return ARENA_APPEND(e->arena, list);
}

void read_reducing(struct elaboration *e, const struct statement *statement, const char *first,
                   struct reducing_list *list)
{
    struct reading reading = read_items(e, statement);
    struct case_reducing read = {.method = vocabulary_find(BLOCK_METHOD, statement->word)->word, .first = first};
    do {
        const struct vocabulary_row *row = take_reducing(&reading);
        if (row == NULL || !take_parameters(&reading, row, &read)) {
            return;
        }
    } while (reading.item != NULL);
    if (!read.beta_T.given || !read.beta_V.given) {
        report_missing(&reading,
                       read.beta_T.given ? "'volume' with beta and gamma" : "'temperature' with beta and gamma");
        return;
    }
    if (forbid_block(e, statement)) {
        share_source(&read);
        *reducing_of(e, list, read.method) = read;
    }
}

const struct case_reducing *case_reducing_of(const struct case_pair *pair, const char *method)
{
    for (size_t i = 0; i < pair->reducing_count; i++) {
        if (strcmp(pair->reducing[i].method, method) == 0) {
            return &pair->reducing[i];
        }
    }
    return NULL;
}

struct reducing_pair plain_reducing(const struct case_reducing *from, const char *first, size_t i, size_t j)
{
    const bool is_turned = strcmp(from->first, first) != 0;
    return (struct reducing_pair){
        .first = is_turned ? j : i,
        .second = is_turned ? i : j,
        .method = from->method,
        .origin = from->beta_T.origin.kind == ORIGIN_DECK ? PAIR_FROM_DECK : PAIR_FROM_LIBRARY,
        .beta_T = from->beta_T.value,
        .gamma_T = from->gamma_T.value,
        .beta_V = from->beta_V.value,
        .gamma_V = from->gamma_V.value,
        .weight = from->departure == NULL ? 0.0 : from->weight.value,
        .departure = from->departure == NULL ? NULL : &from->departure->spec,
    };
}

/* ---- Sources, once it is known that the method answers ---- */

void use_reducing(struct elaboration *e, const struct case_pair *pair, const char *method)
{
    const struct case_reducing *reducing = case_reducing_of(pair, method);
    if (reducing == NULL) {
        return;
    }
    use_quantity(e, &reducing->beta_T);
    if (reducing->departure != NULL) {
        use_source(e, reducing->departure->source);
        mark_file_used(e, reducing->departure->at);
    }
}

void use_own_equation(struct elaboration *e, const struct case_component *component, const char *method)
{
    const bool is_gerg = strcmp(method, vocabulary_rows()[WORD_METHOD_GERG_2008].word) == 0;
    if (is_gerg && component->spec.gerg_2008 != NULL) {
        use_source(e, component->gerg_source);
        mark_file_used(e, component->gerg_at);
    }
}
