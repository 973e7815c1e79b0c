/* What single methods know of a component beyond its constants: parameters of a cubic equation, and the groups a
 * molecule is made of. */
#include "case/case_internal.h"

#include <string.h>

static const struct quantity_form FORM_TWU = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = -1000.0, .most = 1000.0};
static const struct quantity_form FORM_COUNT = {.measure = MEASURE_NUMBER,
                                                .reading = READ_NUMBER,
                                                .least = 0.0,
                                                .is_least_open = true,
                                                .most = 1000.0,
                                                .because = "how often the molecule has the group"};

/* ---- Parameters of one method ---- */

/* `twu L, M, N ref KEY` */
static void read_twu(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_cubic_set *set = target;
    struct reading reading = read_items(e, statement);
    static const char *const names[] = {"twu L", "twu M", "twu N"};
    const struct case_source *source = NULL;
    struct quantity twu[3] = {set->twu[0], set->twu[1], set->twu[2]};
    for (size_t i = 0; i < 3; i++) {
        if (!take_quantity(&reading, &FORM_TWU, names[i], &twu[i])) {
            return;
        }
        source = twu[i].origin.source != NULL ? twu[i].origin.source : source;
    }
    if (!finish_items(&reading) || !forbid_block(e, statement)) {
        return;
    }
    for (size_t i = 0; i < 3; i++) {
        twu[i].origin.source = source;
        set->twu[i] = twu[i];
    }
}

/* `covolume A, B ref KEY`, both temperatures */
static void read_covolume(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_cubic_set *set = target;
    struct reading reading = read_items(e, statement);
    struct quantity A = set->covolume_A;
    struct quantity B = set->covolume_B;
    if (!take_quantity(&reading, &FORM_TEMPERATURE, "covolume A", &A) ||
        !take_quantity(&reading, &FORM_TEMPERATURE, "covolume B", &B) || !finish_items(&reading) ||
        !forbid_block(e, statement)) {
        return;
    }
    A.origin.source = A.origin.source == NULL ? B.origin.source : A.origin.source;
    set->covolume_A = A;
    set->covolume_B = B;
}

#define QUANTITY(word, form, member) READ_QUANTITY(WORD_PARAMETERS_##word, form, struct case_cubic_set, member)

static const struct block_row ROWS[] = {
    QUANTITY(CRITICAL_TEMPERATURE, NULL, critical_temperature),
    QUANTITY(CRITICAL_PRESSURE, NULL, critical_pressure),
    QUANTITY(SHIFT, NULL, shift),
    READ_ONCE(WORD_PARAMETERS_TWU, read_twu),
    READ_ONCE(WORD_PARAMETERS_COVOLUME, read_covolume),
};
static const struct block_form PARAMETERS = BLOCK_FORM(BLOCK_PARAMETERS, ROWS);

bool method_is_cubic(enum vocabulary_word method)
{
    return method != WORD_METHOD_IDEAL_GAS && method != WORD_METHOD_REFERENCE && method != WORD_METHOD_MULTI_FLUID &&
           method != WORD_METHOD_GERG_2008 && method != WORD_METHOD_LEE_KESLER;
}

const struct vocabulary_row *take_cubic(struct reading *reading)
{
    const struct item *item = reading->item;
    const struct vocabulary_row *method = take_choice(reading, BLOCK_METHOD, "a method");
    if (method == NULL || method_is_cubic(method->id)) {
        return method;
    }
    diagnose(reading->e->out, CODE_E213, item->at, "the method '%s' takes no parameters of this kind", method->word);
    return NULL;
}

static struct case_cubic_set *set_of(struct elaboration *e, struct cubic_set_list *sets, const char *method)
{
    for (size_t i = 0; i < sets->count; i++) {
        if (sets->items[i].method == method) {
            return &sets->items[i];
        }
    }
    struct case_cubic_set *set = ARENA_APPEND(e->arena, sets);
    *set = (struct case_cubic_set){.method = method};
    return set;
}

void read_parameters(struct elaboration *e, const struct statement *statement, struct cubic_set_list *sets)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *method = take_cubic(&reading);
    if (method == NULL || !finish_items(&reading) || !require_block(e, statement)) {
        return;
    }
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    const char *group = arena_format(e->arena, "%s, %s", e->group, method->word);
    read_block(e, &PARAMETERS, group, statement, set_of(e, sets, method->word));
    e->is_deferring = outer;
}

static struct optional optional_of(const struct quantity *quantity)
{
    return (struct optional){.given = quantity->given, .value = quantity->value};
}

const struct cubic_set *plain_sets(struct elaboration *e, const struct case_cubic_set *sets, size_t count)
{
    struct cubic_set *plain = arena_alloc(e->arena, count + 1, sizeof *plain);
    for (size_t i = 0; i < count; i++) {
        const struct case_cubic_set *set = &sets[i];
        plain[i] = (struct cubic_set){
            .method = set->method,
            .critical_temperature = optional_of(&set->critical_temperature),
            .critical_pressure = optional_of(&set->critical_pressure),
            .has_twu = set->twu[0].given,
            .L = set->twu[0].value,
            .M = set->twu[1].value,
            .N = set->twu[2].value,
            .shift = set->shift.value,
            .covolume_A = set->covolume_A.value,
            .covolume_B = set->covolume_B.value,
        };
    }
    return plain;
}

/* ---- Groups ---- */

static const struct case_group *find_group(const struct group_list *groups, const char *name)
{
    for (size_t i = 0; i < groups->count; i++) {
        if (strcmp(groups->items[i].name, name) == 0) {
            return &groups->items[i];
        }
    }
    return NULL;
}

/* `CH3 2`: a group and how often the molecule has it. */
static bool take_group(struct reading *reading, struct group_list *groups)
{
    struct elaboration *e = reading->e;
    const struct expression *name = take_name(reading);
    if (name == NULL) {
        report_missing(reading, "the name of a group");
        return false;
    }
    if (find_group(groups, name->name) != NULL) {
        diagnose(e->out, CODE_E207, name->at, "the group '%s' is given twice", shortened(e, name->name));
        return false;
    }
    const struct item *number = take_item(reading, ITEM_EXPRESSION);
    if (number == NULL) {
        report_missing(reading, "the number of that group");
        return false;
    }
    struct case_group group = {.name = name->name};
    if (!read_value(e, &FORM_COUNT, name->name, number->value, &group.number)) {
        return false;
    }
    *ARENA_APPEND(e->arena, groups) = group;
    return true;
}

void read_groups(struct elaboration *e, const struct statement *statement, struct case_component *component)
{
    struct reading reading = read_items(e, statement);
    struct group_list groups = {.items = NULL};
    const struct case_source *source = NULL;
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    bool is_good = true;
    do {
        is_good = take_group(&reading, &groups);
    } while (is_good && reading.item != NULL && reading.item->kind != ITEM_REF);
    is_good = is_good && take_reference(&reading, &source) && finish_items(&reading) && forbid_block(e, statement);
    e->is_deferring = outer;
    if (is_good) {
        component->groups = groups.items;
        component->group_count = groups.count;
        component->groups_origin = origin_of(e, statement->at);
        component->groups_origin.source = source;
        add_input(e, "groups", "as written", &component->groups_origin);
    }
}

const struct group_share *plain_groups(struct elaboration *e, const struct case_component *component)
{
    struct group_share *plain = arena_alloc(e->arena, component->group_count + 1, sizeof *plain);
    for (size_t i = 0; i < component->group_count; i++) {
        const struct case_group *group = &component->groups[i];
        plain[i].group = names_add(e->arena, &e->groups, group->name)->number;
        plain[i].number = group->number;
    }
    return plain;
}

/* ---- Sources, once it is known which methods answer ---- */

static void use_origin(struct elaboration *e, const struct origin *origin)
{
    use_source(e, origin->source);
    mark_file_used(e, origin->at);
}

void use_quantity(struct elaboration *e, const struct quantity *quantity)
{
    if (quantity->given) {
        use_origin(e, &quantity->origin);
    }
}

static void use_set(struct elaboration *e, const struct case_cubic_set *set)
{
    use_quantity(e, &set->critical_temperature);
    use_quantity(e, &set->critical_pressure);
    use_quantity(e, &set->twu[0]);
    use_quantity(e, &set->shift);
    use_quantity(e, &set->covolume_A);
}

void use_parameters(struct elaboration *e, const struct case_component *component, const char *method)
{
    for (size_t i = 0; i < component->cubic_set_count; i++) {
        if (strcmp(component->cubic_sets[i].method, method) == 0) {
            use_set(e, &component->cubic_sets[i]);
        }
    }
}

void use_groups(struct elaboration *e, const struct case_component *component)
{
    if (component->group_count != 0) {
        use_origin(e, &component->groups_origin);
    }
}
