/* Which property methods answer a sheet, and why: the sheet's own words, the methods block, or the default. */
#include "case/case_internal.h"

#include <string.h>

struct choice {
    const struct vocabulary_row *method;
    struct location at;
};

struct choice_list {
    struct choice *items;
    size_t count, capacity;
};

struct methods_block {
    struct location at;
    struct choice_list lead, beside, show;
    enum governing govern;
};

static bool report_twice(struct elaboration *e, const struct choice *first, struct location at)
{
    struct diagnostic *said = diagnose(e->out, CODE_E207, at, "the method '%s' is named twice", first->method->word);
    said->note = "first named here";
    said->note_at = first->at;
    return false;
}

static bool is_new(struct elaboration *e, const struct choice_list *list, const struct choice *choice)
{
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i].method == choice->method) {
            return report_twice(e, &list->items[i], choice->at);
        }
    }
    return true;
}

/* The rest of the statement as names of methods, added to the list. False after a message. */
static bool take_methods(struct reading *reading, struct choice_list *list)
{
    do {
        const struct item *item = reading->item;
        const struct vocabulary_row *method = take_choice(reading, BLOCK_METHOD, "a method");
        if (method == NULL) {
            return false;
        }
        const struct choice choice = {.method = method, .at = item->at};
        if (!is_new(reading->e, list, &choice)) {
            return false;
        }
        *ARENA_APPEND(reading->e->arena, list) = choice;
    } while (reading->item != NULL);
    return true;
}

static void read_lead(struct elaboration *e, const struct statement *statement, void *target)
{
    struct methods_block *block = target;
    struct reading reading = read_items(e, statement);
    if (take_methods(&reading, &block->lead) && block->lead.count > 1) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E204, block->lead.items[1].at, "one method leads, this is a second");
        diagnostic_hint(e->out, said, "name it after 'beside' or 'show'");
    }
}

static void read_beside(struct elaboration *e, const struct statement *statement, void *target)
{
    struct methods_block *block = target;
    struct reading reading = read_items(e, statement);
    take_methods(&reading, &block->beside);
}

static void read_show(struct elaboration *e, const struct statement *statement, void *target)
{
    struct methods_block *block = target;
    struct reading reading = read_items(e, statement);
    take_methods(&reading, &block->show);
}

static void read_govern(struct elaboration *e, const struct statement *statement, void *target)
{
    struct methods_block *block = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row = take_choice(&reading, BLOCK_GOVERN, "'lead' or 'strictest'");
    if (row != NULL && finish_items(&reading)) {
        block->govern = row->id == WORD_GOVERN_STRICTEST ? GOVERN_STRICTEST : GOVERN_LEAD;
    }
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_METHODS_LEAD, read_lead),
    READ_EACH(WORD_METHODS_BESIDE, read_beside),
    READ_EACH(WORD_METHODS_SHOW, read_show),
    READ_ONCE(WORD_METHODS_GOVERN, read_govern),
};
static const struct block_form METHODS = BLOCK_FORM(BLOCK_METHODS, ROWS);

/* A method stands in one of the three places only. */
static void check_places(struct elaboration *e, const struct methods_block *block)
{
    for (size_t i = 0; i < block->beside.count; i++) {
        is_new(e, &block->lead, &block->beside.items[i]);
    }
    for (size_t i = 0; i < block->show.count; i++) {
        if (is_new(e, &block->lead, &block->show.items[i])) {
            is_new(e, &block->beside, &block->show.items[i]);
        }
    }
}

void read_methods_block(struct elaboration *e)
{
    const struct statement *statement = e->methods_statement;
    if (statement == NULL) {
        return;
    }
    struct reading reading = read_items(e, statement);
    if (!finish_items(&reading) || !require_block(e, statement)) {
        return;
    }
    struct methods_block *block = arena_alloc(e->arena, 1, sizeof *block);
    block->at = statement->at;
    read_block(e, &METHODS, "methods", statement, block);
    check_places(e, block);
    mark_file_used(e, statement->at);
    e->methods = block;
}

/* Methods whose alpha comes with a substance's own parameters, or that go by its acentric factor. */
static bool takes_twu(enum vocabulary_word method)
{
    return method == WORD_METHOD_PENG_ROBINSON_TWU || method == WORD_METHOD_TRANSLATED_PENG_ROBINSON ||
           method == WORD_METHOD_TRANSLATED_REDLICH_KWONG || method == WORD_METHOD_QUANTUM_PENG_ROBINSON;
}

static bool takes_acentric(enum vocabulary_word method)
{
    return method == WORD_METHOD_PENG_ROBINSON || method == WORD_METHOD_PENG_ROBINSON_1978 ||
           method == WORD_METHOD_SOAVE_REDLICH_KWONG || method == WORD_METHOD_LEE_KESLER ||
           method == WORD_METHOD_VIRIAL_PITZER_ABBOTT || method == WORD_METHOD_VIRIAL_TSONOPOULOS ||
           method == WORD_METHOD_VIRIAL_PITZER_ABBOTT_PRESSURE || method == WORD_METHOD_VIRIAL_TSONOPOULOS_PRESSURE ||
           method == WORD_METHOD_POYNTING;
}

static bool goes_by_reference(enum vocabulary_word method)
{
    return method == WORD_METHOD_REFERENCE || method == WORD_METHOD_MULTI_FLUID;
}

static const struct case_cubic_set *set_of(const struct vocabulary_row *method, const struct case_component *component)
{
    for (size_t i = 0; i < component->cubic_set_count; i++) {
        if (strcmp(component->cubic_sets[i].method, method->word) == 0) {
            return &component->cubic_sets[i];
        }
    }
    return NULL;
}

/* What a method needs of a component and does not find; NULL: nothing. */
static const char *lack_of(const struct vocabulary_row *method, const struct case_component *component)
{
    if (goes_by_reference(method->id)) {
        return component->spec.reference == NULL ? "a published reference equation" : NULL;
    }
    if (method->id == WORD_METHOD_GERG_2008) {
        return component->spec.gerg_2008 == NULL ? "its own equation" : NULL;
    }
    if (!method_is_cubic(method->id) && !takes_acentric(method->id)) {
        return NULL;
    }
    const struct case_cubic_set *set = set_of(method, component);
    if (takes_twu(method->id) && (set == NULL || !set->twu[0].given)) {
        return "a fitted alpha";
    }
    if (!component->critical_temperature.given && (set == NULL || !set->critical_temperature.given)) {
        return "a critical-temperature";
    }
    if (!component->critical_pressure.given && (set == NULL || !set->critical_pressure.given)) {
        return "a critical-pressure";
    }
    return takes_acentric(method->id) && !component->acentric.given ? "an acentric factor" : NULL;
}

/* A method for pure gases only cannot answer for a mixture. */
static bool check_mixture(struct elaboration *e, const struct choice *choice, const struct case_fluid *fluid)
{
    if (fluid->count == 1 || choice->method->id != WORD_METHOD_REFERENCE) {
        return true;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E230, choice->at, "%s answers for pure gases only, and '%s' is a mixture",
                 choice->method->word, shortened(e, fluid->name));
    diagnostic_hint(e->out, said, "name another method for it, as in 'methods peng-robinson-1978' in the sheet");
    return false;
}

/* True when every component has what the method needs; else says what is missing, at `at`. */
static bool check_data(struct elaboration *e, const struct choice *choice, const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->count; i++) {
        const struct case_component *component = fluid->components[i];
        const char *lack = lack_of(choice->method, component);
        if (lack == NULL) {
            continue;
        }
        struct diagnostic *said = diagnose(e->out, CODE_E220, choice->at, "%s needs %s of '%s', and there is none",
                                           choice->method->word, lack, shortened(e, component->name));
        diagnostic_hint(e->out, said,
                        goes_by_reference(choice->method->id) || choice->method->id == WORD_METHOD_GERG_2008
                            ? "name another method for this gas, as in 'methods peng-robinson' in the sheet"
                        : takes_twu(choice->method->id)
                            ? "give it in a component block, as 'parameters %s { twu L, M, N }', or name another method"
                            : "give it in a component block, or name another method",
                        choice->method->word);
        return false;
    }
    return true;
}

static bool is_among(const struct choice_list *list, const struct vocabulary_row *method)
{
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i].method == method) {
            return true;
        }
    }
    return false;
}

/* Adds what is not there yet: the default lead may stand beside itself. */
static bool add_choices(struct elaboration *e, const struct choice_list *from, const struct case_fluid *fluid,
                        struct choice_list *to)
{
    bool is_good = true;
    for (size_t i = 0; i < from->count; i++) {
        if (!is_among(to, from->items[i].method)) {
            is_good = check_data(e, &from->items[i], fluid) && is_good;
            *ARENA_APPEND(e->arena, to) = from->items[i];
        }
    }
    return is_good;
}

/* The same of methods that a sheet or the deck wants to hear of this very fluid. */
static bool add_firm_choices(struct elaboration *e, const struct choice_list *from, const struct case_fluid *fluid,
                             struct choice_list *to)
{
    bool is_good = true;
    for (size_t i = 0; i < from->count; i++) {
        is_good = check_mixture(e, &from->items[i], fluid) && is_good;
    }
    return add_choices(e, from, fluid, to) && is_good;
}

/* Whether every component has a reference equation and every pair published reducing parameters. */
static bool is_published(const struct case_fluid *fluid)
{
    const char *multi_fluid = vocabulary_rows()[WORD_METHOD_MULTI_FLUID].word;
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->components[i]->spec.reference == NULL) {
            return false;
        }
        for (size_t j = 0; j < i; j++) {
            const struct case_pair *pair = case_pair_of(fluid, fluid->components[i]->name, fluid->components[j]->name);
            if (pair == NULL || case_reducing_of(pair, multi_fluid) == NULL) {
                return false;
            }
        }
    }
    return true;
}

/* The reference equation where there is one for a pure gas, else Peng and Robinson's; of mixtures the reference
 * equations together where all their pairs are published, else the form whose pair parameters are predicted. */
static struct choice default_lead(const struct case_fluid *fluid, struct location at)
{
    const bool has_equation = fluid->components[0]->spec.reference != NULL;
    const enum vocabulary_word word = fluid->count > 1 && is_published(fluid) ? WORD_METHOD_MULTI_FLUID
                                      : fluid->count > 1                      ? WORD_METHOD_PENG_ROBINSON_1978
                                      : has_equation                          ? WORD_METHOD_REFERENCE
                                                                              : WORD_METHOD_PENG_ROBINSON;
    return (struct choice){.method = &vocabulary_rows()[word], .at = at};
}

static const char *default_reason(struct elaboration *e, const struct case_fluid *fluid, const struct choice *lead)
{
    const char *asked = e->methods == NULL ? "no methods block" : "the methods block names no lead";
    if (lead->method->id == WORD_METHOD_MULTI_FLUID) {
        return arena_format(e->arena, "%s: %s leads for mixtures of which all pairs are published", asked,
                            lead->method->word);
    }
    if (fluid->count > 1) {
        return arena_format(e->arena,
                            "%s: %s leads for mixtures, its pair parameters predicted by groups where they can be",
                            asked, lead->method->word);
    }
    return lead->method->id == WORD_METHOD_REFERENCE
               ? arena_format(e->arena, "%s: the published reference equation of %s leads", asked, fluid->name)
               : arena_format(e->arena, "%s, and no reference equation of %s is known: peng-robinson leads", asked,
                              fluid->name);
}

static void fill_methods(struct elaboration *e, const struct choice_list *choices, size_t may_govern,
                         struct case_methods *out)
{
    const char **names = arena_alloc(e->arena, choices->count, sizeof *names);
    for (size_t i = 0; i < choices->count; i++) {
        names[i] = choices->items[i].method->word;
    }
    out->count = choices->count;
    out->names = names;
    out->may_govern = may_govern;
    out->govern = e->methods == NULL ? GOVERN_LEAD : e->methods->govern;
}

static bool choose_own(struct elaboration *e, const struct statement *own, const struct case_fluid *fluid,
                       struct case_methods *out)
{
    struct choice_list written = {.items = NULL};
    struct choice_list choices = {.items = NULL};
    struct reading reading = read_items(e, own);
    if (!take_methods(&reading, &written) || !add_firm_choices(e, &written, fluid, &choices)) {
        return false;
    }
    out->reason = "named in the sheet";
    out->at = own->at;
    fill_methods(e, &choices, choices.count, out);
    return true;
}

bool choose_methods(struct elaboration *e, const struct statement *own, const struct case_fluid *fluid,
                    struct location at, struct case_methods *out)
{
    if (own != NULL) {
        return choose_own(e, own, fluid, out);
    }
    const struct methods_block *block = e->methods;
    struct choice_list choices = {.items = NULL};
    bool is_good = true;
    if (block != NULL && block->lead.count != 0) {
        out->reason = "named in the methods block";
        out->at = block->at;
        is_good = add_firm_choices(e, &block->lead, fluid, &choices);
    } else {
        const struct choice lead = default_lead(fluid, at);
        out->reason = default_reason(e, fluid, &lead);
        out->at = at;
        is_good = check_data(e, &lead, fluid);
        *ARENA_APPEND(e->arena, &choices) = lead;
    }
    size_t may_govern = choices.count;
    if (block != NULL) {
        is_good = add_choices(e, &block->beside, fluid, &choices) && is_good;
        may_govern = choices.count;
        is_good = add_choices(e, &block->show, fluid, &choices) && is_good;
    }
    fill_methods(e, &choices, may_govern, out);
    return is_good;
}
