/* Pairs: what methods know of two components together, two groups together, and which components react. */
#include "case/case_internal.h"

#include <string.h>

static const struct quantity_form FORM_KIJ = {.measure = MEASURE_NUMBER,
                                              .reading = READ_NUMBER,
                                              .least = -5.0,
                                              .most = 1.0,
                                              .because = "a_ij = (1 - kij) sqrt(a_i a_j)"};
static const struct quantity_form FORM_LIJ = {.measure = MEASURE_NUMBER,
                                              .reading = READ_NUMBER,
                                              .least = -5.0,
                                              .most = 1.0,
                                              .because = "b_ij = (1 - lij) (b_i + b_j) / 2"};
static const struct quantity_form FORM_KAPPA = {.measure = MEASURE_NUMBER,
                                                .reading = READ_NUMBER,
                                                .least = 0.0,
                                                .most = 6.0,
                                                .because = "Tc_ij = kappa sqrt(Tc_i Tc_j)"};
/* Energies for each volume, positive or negative, of the size of a / b^2. */
static const struct quantity_form FORM_INTERACTION = {
    .measure = MEASURE_PRESSURE, .reading = READ_NUMBER, .least = -1e11, .most = 1e11};

const char *pair_name(struct elaboration *e, const char *one, const char *other)
{
    const bool is_in_order = strcmp(one, other) <= 0;
    return arena_format(e->arena, "%s %s", is_in_order ? one : other, is_in_order ? other : one);
}

/* ---- Pairs of components ---- */

struct constants_list {
    struct case_pair_constants *items;
    size_t count, capacity;
};

struct pair_target {
    struct case_pair pair;
    struct constants_list constants;
    struct reducing_list reducing;
    const char *first; /* in the block being read */
};

static struct case_pair_constants *constants_of(struct elaboration *e, struct constants_list *list, const char *method)
{
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i].method == method) {
            return &list->items[i];
        }
    }
    struct case_pair_constants *constants = ARENA_APPEND(e->arena, list);
    *constants = (struct case_pair_constants){.method = method};
    return constants;
}

/* Whether the method has such a parameter of pairs; a message if not. */
static bool check_parameter(struct elaboration *e, const struct vocabulary_row *method,
                            const struct vocabulary_row *parameter, struct location at)
{
    const bool takes_kappa = method->id == WORD_METHOD_LEE_KESLER;
    if (takes_kappa == (parameter->id == WORD_INTERACTION_KAPPA)) {
        return true;
    }
    struct diagnostic *said = diagnose(e->out, CODE_E203, at, "'%s' takes no '%s'", method->word, parameter->word);
    diagnostic_hint(e->out, said, takes_kappa ? "as in: %s kappa 1.113" : "as in: %s kij 0.0852", method->word);
    return false;
}

/* 'kij', 'lij' or 'kappa'; NULL after a message. */
static const struct vocabulary_row *take_parameter(struct reading *reading)
{
    const struct item *item = reading->item;
    if (item != NULL && item->kind == ITEM_EXPRESSION && item->value->kind == EXPRESSION_NAME) {
        return take_choice(reading, BLOCK_INTERACTION, "a parameter");
    }
    struct elaboration *e = reading->e;
    struct diagnostic *said = diagnose(e->out, CODE_E203, item == NULL ? reading->of->word_at : item->at,
                                       "'%s' is followed by 'kij' and a number", reading->of->word);
    diagnostic_hint(e->out, said, "as in: %s kij 0.0852", reading->of->word);
    return NULL;
}

struct parameter_place {
    const struct quantity_form *form;
    struct quantity *quantity;
};

static struct parameter_place place_of(enum vocabulary_word parameter, struct case_pair_constants *constants)
{
    switch ((unsigned)parameter) {
    case WORD_INTERACTION_KIJ:
        return (struct parameter_place){&FORM_KIJ, &constants->kij};
    case WORD_INTERACTION_LIJ:
        return (struct parameter_place){&FORM_LIJ, &constants->lij};
    default:
        return (struct parameter_place){&FORM_KAPPA, &constants->kappa};
    }
}

/* `peng-robinson kij 0.0852 ref KEY`, perhaps with lij; `lee-kesler kappa 1.113` */
static void read_constants(struct elaboration *e, const struct statement *statement, void *target)
{
    struct pair_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *method = vocabulary_find(BLOCK_METHOD, statement->word);
    struct case_pair_constants *constants = constants_of(e, &into->constants, method->word);
    unsigned seen = 0;
    do {
        const struct item *item = reading.item;
        const struct vocabulary_row *row = take_parameter(&reading);
        if (row == NULL || !check_parameter(e, method, row, item->at)) {
            return;
        }
        const unsigned bit = 1U << (row->id - WORD_INTERACTION_KIJ);
        if (seen & bit) {
            diagnose(e->out, CODE_E207, item->at, "'%s' is given twice", row->word);
            return;
        }
        seen |= bit;
        const struct parameter_place place = place_of(row->id, constants);
        if (!take_quantity(&reading, place.form, arena_format(e->arena, "%s %s", method->word, row->word),
                           place.quantity)) {
            return;
        }
    } while (reading.item != NULL);
    if (constants->kappa.given) {
        constants->kij = constants->kappa;
        constants->kij.value = 1.0 - constants->kappa.value;
        constants->kij.overridden = NULL; /* it would be a kappa */
    }
    forbid_block(e, statement);
}

static void read_reacts(struct elaboration *e, const struct statement *statement, void *target)
{
    struct pair_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct case_source *source = NULL;
    const char *text = take_text(&reading, "what the two do, in quotes");
    if (text != NULL && take_reference(&reading, &source) && finish_items(&reading) && forbid_block(e, statement)) {
        into->pair.reacts = text;
        into->pair.reacts_origin = origin_of(e, statement->at);
        into->pair.reacts_origin.source = source;
    }
}

static void read_reducing_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct pair_target *into = target;
    read_reducing(e, statement, into->first, &into->reducing);
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_METHOD_VAN_DER_WAALS, read_constants),
    READ_ONCE(WORD_METHOD_REDLICH_KWONG, read_constants),
    READ_ONCE(WORD_METHOD_SOAVE_REDLICH_KWONG, read_constants),
    READ_ONCE(WORD_METHOD_PENG_ROBINSON, read_constants),
    READ_ONCE(WORD_METHOD_PENG_ROBINSON_1978, read_constants),
    READ_ONCE(WORD_METHOD_PENG_ROBINSON_TWU, read_constants),
    READ_ONCE(WORD_METHOD_TRANSLATED_PENG_ROBINSON, read_constants),
    READ_ONCE(WORD_METHOD_TRANSLATED_REDLICH_KWONG, read_constants),
    READ_ONCE(WORD_METHOD_QUANTUM_PENG_ROBINSON, read_constants),
    READ_ONCE(WORD_METHOD_MULTI_FLUID, read_reducing_row),
    READ_ONCE(WORD_METHOD_GERG_2008, read_reducing_row),
    READ_ONCE(WORD_METHOD_LEE_KESLER, read_constants),
    READ_ONCE(WORD_METHOD_VIRIAL_PITZER_ABBOTT, read_constants),
    READ_ONCE(WORD_METHOD_VIRIAL_TSONOPOULOS, read_constants),
    READ_ONCE(WORD_PAIR_REACTS, read_reacts),
};
static const struct block_form PAIR = BLOCK_FORM(BLOCK_PAIR, ROWS);

/* The library names components that a deck may not have; a name in the user's own pair must be one. */
static void check_names(struct elaboration *e, const struct statement *statement)
{
    if (statement->at.file->is_library) {
        return;
    }
    const struct item *first = statement->items;
    named_of_item(e, NAMES_COMPONENT, first->value, "component");
    named_of_item(e, NAMES_COMPONENT, first->next->value, "component");
}

static void read_pair_block(struct elaboration *e, const struct statement *block, struct pair_target *target)
{
    check_names(e, block);
    target->first = block->items->value->name;
    if (require_block(e, block)) {
        const char *group = arena_format(e->arena, "pair %s %s", target->pair.first, target->pair.second);
        read_block(e, &PAIR, group, block, target);
    }
}

const struct case_pair *build_component_pair(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    const struct item *names = named->items[0]->items;
    struct pair_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->pair = (struct case_pair){.first = names->value->name, .second = names->next->value->name};
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    for (int own = 0; own < 2; own++) {
        for (size_t i = 0; i < named->count; i++) {
            if (named->items[i]->at.file->is_library == (own == 0)) {
                read_pair_block(e, named->items[i], target);
            }
        }
    }
    e->is_deferring = outer;
    target->pair.constants = target->constants.items;
    target->pair.count = target->constants.count;
    target->pair.reducing = target->reducing.items;
    target->pair.reducing_count = target->reducing.count;
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? &target->pair : NULL;
    return named->built;
}

/* ---- Pairs of groups ---- */

/* `group-pair CH3 CH2 65.5 MPa, 105.7 MPa ref KEY` */
const struct case_group_pair *build_group_pair(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    const struct statement *statement = named->items[0];
    struct reading reading = read_items(e, statement);
    struct case_group_pair *pair = arena_alloc(e->arena, 1, sizeof *pair);
    const char *outer_group = e->group;
    const bool outer = e->is_deferring;
    pair->first = take_name(&reading)->name;
    pair->second = take_name(&reading)->name;
    e->group = arena_format(e->arena, "group-pair %s %s", pair->first, pair->second);
    e->is_deferring = true;
    if (take_quantity(&reading, &FORM_INTERACTION, "A", &pair->A) &&
        take_quantity(&reading, &FORM_INTERACTION, "B", &pair->B) && finish_items(&reading)) {
        forbid_block(e, statement);
        pair->A.origin.source = pair->A.origin.source == NULL ? pair->B.origin.source : pair->A.origin.source;
    }
    e->is_deferring = outer;
    e->group = outer_group;
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? pair : NULL;
    return named->built;
}

/* ---- The pairs of a fluid ---- */

struct found {
    struct {
        const struct case_pair **items;
        size_t count, capacity;
    } pairs;
    struct {
        struct pair_constant *items;
        size_t count, capacity;
    } constants;
    struct {
        struct reducing_pair *items;
        size_t count, capacity;
    } reducing;
    struct {
        const struct case_group_pair **items;
        size_t count, capacity;
    } group_pairs;
};

static void add_constants(struct elaboration *e, const struct case_pair *pair, size_t i, size_t j, struct found *found)
{
    for (size_t k = 0; k < pair->count; k++) {
        const struct case_pair_constants *from = &pair->constants[k];
        const bool is_own = (from->kij.given && from->kij.origin.kind == ORIGIN_DECK) ||
                            (from->lij.given && from->lij.origin.kind == ORIGIN_DECK);
        *ARENA_APPEND(e->arena, &found->constants) = (struct pair_constant){
            .first = i,
            .second = j,
            .method = from->method,
            .origin = is_own ? PAIR_FROM_DECK : PAIR_FROM_LIBRARY,
            .kij = from->kij.value,
            .lij = from->lij.value,
        };
    }
}

static void find_pair(struct elaboration *e, const struct case_fluid *fluid, size_t i, size_t j, struct found *found)
{
    const char *name = pair_name(e, fluid->components[i]->name, fluid->components[j]->name);
    struct named *named = names_find(&e->tables[NAMES_PAIR], name);
    const struct case_pair *pair = named == NULL ? NULL : build_component_pair(e, named);
    if (pair != NULL) {
        *ARENA_APPEND(e->arena, &found->pairs) = pair;
        add_constants(e, pair, i, j, found);
        for (size_t k = 0; k < pair->reducing_count; k++) {
            *ARENA_APPEND(e->arena, &found->reducing) =
                plain_reducing(&pair->reducing[k], fluid->components[i]->name, i, j);
        }
    }
}

/* The names of all groups of the fluid, each once. */
static const char **groups_of(struct elaboration *e, const struct case_fluid *fluid, size_t *count)
{
    struct name_table seen = {.items = NULL};
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t k = 0; k < fluid->components[i]->group_count; k++) {
            names_add(e->arena, &seen, fluid->components[i]->groups[k].name);
        }
    }
    const char **names = arena_alloc(e->arena, seen.count + 1, sizeof *names);
    for (size_t i = 0; i < seen.count; i++) {
        names[i] = seen.items[i]->name;
    }
    *count = seen.count;
    return names;
}

static void find_group_pairs(struct elaboration *e, const struct case_fluid *fluid, struct found *found)
{
    size_t count;
    const char **names = groups_of(e, fluid, &count);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < i; j++) {
            struct named *named = names_find(&e->tables[NAMES_GROUP_PAIR], pair_name(e, names[j], names[i]));
            const struct case_group_pair *pair = named == NULL ? NULL : build_group_pair(e, named);
            if (pair != NULL) {
                *ARENA_APPEND(e->arena, &found->group_pairs) = pair;
            }
        }
    }
}

static const struct group_pair *plain_group_pairs(struct elaboration *e, const struct found *found)
{
    struct group_pair *plain = arena_alloc(e->arena, found->group_pairs.count + 1, sizeof *plain);
    for (size_t i = 0; i < found->group_pairs.count; i++) {
        const struct case_group_pair *pair = found->group_pairs.items[i];
        plain[i] = (struct group_pair){
            .first = names_add(e->arena, &e->groups, pair->first)->number,
            .second = names_add(e->arena, &e->groups, pair->second)->number,
            .A = pair->A.value,
            .B = pair->B.value,
        };
    }
    return plain;
}

void find_pairs(struct elaboration *e, struct case_fluid *fluid)
{
    struct found found = {.pairs = {.items = NULL}};
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t j = i + 1; j < fluid->count; j++) {
            find_pair(e, fluid, i, j, &found);
        }
    }
    find_group_pairs(e, fluid, &found);
    fluid->pairs = found.pairs.items;
    fluid->pair_count = found.pairs.count;
    fluid->group_pairs = found.group_pairs.items;
    fluid->group_pair_count = found.group_pairs.count;
    fluid->spec.pairs = found.constants.items;
    fluid->spec.pair_count = found.constants.count;
    fluid->spec.reducing_pairs = found.reducing.items;
    fluid->spec.reducing_pair_count = found.reducing.count;
    fluid->spec.group_pairs = plain_group_pairs(e, &found);
    fluid->spec.group_pair_count = found.group_pairs.count;
}

const struct case_pair *case_pair_of(const struct case_fluid *fluid, const char *one, const char *other)
{
    for (size_t i = 0; i < fluid->pair_count; i++) {
        const struct case_pair *pair = fluid->pairs[i];
        if ((strcmp(pair->first, one) == 0 && strcmp(pair->second, other) == 0) ||
            (strcmp(pair->first, other) == 0 && strcmp(pair->second, one) == 0)) {
            return pair;
        }
    }
    return NULL;
}

const struct case_pair_constants *case_pair_constants_of(const struct case_pair *pair, const char *method)
{
    for (size_t i = 0; i < pair->count; i++) {
        if (strcmp(pair->constants[i].method, method) == 0) {
            return &pair->constants[i];
        }
    }
    return NULL;
}

static void use_constants(struct elaboration *e, const struct case_pair *pair, const char *method)
{
    const struct case_pair_constants *constants = case_pair_constants_of(pair, method);
    if (constants != NULL) {
        use_quantity(e, &constants->kij);
        use_quantity(e, &constants->lij);
    }
}

void use_method_data(struct elaboration *e, const struct case_fluid *fluid, const char *method)
{
    const bool takes_groups = strcmp(method, vocabulary_rows()[WORD_METHOD_PENG_ROBINSON_1978].word) == 0;
    for (size_t i = 0; i < fluid->count; i++) {
        use_parameters(e, fluid->components[i], method);
        use_own_equation(e, fluid->components[i], method);
        if (takes_groups && fluid->count > 1) {
            use_groups(e, fluid->components[i]);
        }
    }
    for (size_t i = 0; i < fluid->pair_count; i++) {
        use_constants(e, fluid->pairs[i], method);
        use_reducing(e, fluid->pairs[i], method);
    }
    for (size_t i = 0; takes_groups && i < fluid->group_pair_count; i++) {
        use_quantity(e, &fluid->group_pairs[i]->A);
    }
}
