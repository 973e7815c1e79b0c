/* Components: constants of a pure substance, added up from the library's blocks and then the deck's own. */
#include "case/case_internal.h"

#include <string.h>

static const struct quantity_form CRITICAL_PRESSURE = {
    .measure = MEASURE_PRESSURE, .reading = READ_ABSOLUTE, .least = 0.0, .is_least_open = true, .most = 1e9};
/* Quantum gases go down to about -0.5; the longest molecules of interest stay below 2. */
static const struct quantity_form ACENTRIC = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = -0.5, .most = 2.0};

static const struct quantity_form UN_NUMBER = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = 1.0, .most = 9999.0, .because = "four digits"};

static void read_formula_text(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    const char *text = read_text(e, statement, "a formula in quotes");
    component->formula = text != NULL ? text : component->formula;
}

static void read_title(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    const char *text = read_text(e, statement, "a title in quotes");
    component->title = text != NULL ? text : component->title;
}

/* Digits, two digits, one check digit: the sum of the digits, each times its place from the right, modulo ten. */
static bool is_cas_number(const char *text)
{
    const size_t length = strlen(text);
    if (length < 7 || length > 12 || text[length - 2] != '-' || text[length - 5] != '-') {
        return false;
    }
    int sum = 0;
    int place = 0;
    for (size_t i = length - 1; i-- > 0;) {
        if (text[i] == '-') {
            if (i != length - 2 && i != length - 5) {
                return false;
            }
            continue;
        }
        if (text[i] < '0' || text[i] > '9') {
            return false;
        }
        sum += ++place * (text[i] - '0');
    }
    return sum % 10 == text[length - 1] - '0';
}

static void read_cas(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    const char *text = read_text(e, statement, "a CAS number in quotes");
    if (text == NULL) {
        return;
    }
    if (!is_cas_number(text)) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E213, statement->items->at, "'%s' is no CAS number: its form or check digit is wrong",
                     shortened(e, text));
        diagnostic_hint(e->out, said, "as in: cas \"124-38-9\"");
        return;
    }
    component->cas = text;
}

static void read_un_number(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    struct reading reading = read_items(e, statement);
    const struct item *item = take_item(&reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(&reading, "a number");
        return;
    }
    double number;
    if (!read_value(e, &UN_NUMBER, "un-number", item->value, &number) || !finish_items(&reading)) {
        return;
    }
    const unsigned whole = (unsigned)number;
    if ((double)whole < number) {
        diagnose(e->out, CODE_E213, item->at, "a UN number is a whole number");
        return;
    }
    component->un_number = whole;
}

static unsigned hazard_of(enum vocabulary_word word)
{
    static const struct {
        enum vocabulary_word word;
        enum hazard hazard;
    } hazards[] = {
        {WORD_HAZARD_FLAMMABLE, HAZARD_FLAMMABLE},
        {WORD_HAZARD_OXIDISING, HAZARD_OXIDISING},
        {WORD_HAZARD_TOXIC, HAZARD_TOXIC},
        {WORD_HAZARD_CORROSIVE, HAZARD_CORROSIVE},
        {WORD_HAZARD_PYROPHORIC, HAZARD_PYROPHORIC},
        {WORD_HAZARD_DECOMPOSES, HAZARD_DECOMPOSES},
        {WORD_HAZARD_POLYMERISES, HAZARD_POLYMERISES},
        {WORD_HAZARD_DISSOLVED, HAZARD_DISSOLVED},
    };
    for (size_t i = 0; i < sizeof hazards / sizeof *hazards; i++) {
        if (hazards[i].word == word) {
            return hazards[i].hazard;
        }
    }
    return 0;
}

/* Hazards of a later block replace the earlier ones, as every other value does. */
static void read_hazard(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    struct reading reading = read_items(e, statement);
    unsigned hazards = 0;
    do {
        const struct vocabulary_row *row = take_choice(&reading, BLOCK_HAZARD, "a hazard");
        if (row == NULL) {
            return;
        }
        hazards |= hazard_of(row->id);
    } while (reading.item != NULL);
    component->hazards = hazards;
}

static void read_refuse(struct elaboration *e, const struct statement *statement, void *target)
{
    struct case_component *component = target;
    const char *text = read_text(e, statement, "a reason in quotes");
    if (text != NULL) {
        component->refuse = text;
        component->refuse_at = statement->at;
    }
}

struct component_target {
    struct case_component component; /* first, so that the rows' offsets serve both */
    struct statement_list critical_densities;
    struct cubic_set_list sets;
};

/* A critical density may be per mass, which takes the molar mass, perhaps of a later block: kept for the end. */
static void keep_critical_density(struct elaboration *e, const struct statement *statement, void *target)
{
    struct component_target *into = target;
    struct statement_list *list = &into->critical_densities;
    *ARENA_APPEND(e->arena, list) = statement;
}

static void read_parameters_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct component_target *into = target;
    read_parameters(e, statement, &into->sets);
}

static void read_groups_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct component_target *into = target;
    read_groups(e, statement, &into->component);
}

#define QUANTITY(word, form, member) READ_QUANTITY(WORD_COMPONENT_##word, form, struct case_component, member)

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_COMPONENT_FORMULA, read_formula_text),
    READ_ONCE(WORD_COMPONENT_TITLE, read_title),
    READ_ONCE(WORD_COMPONENT_CAS, read_cas),
    READ_ONCE(WORD_COMPONENT_UN_NUMBER, read_un_number),
    READ_ONCE(WORD_COMPONENT_HAZARD, read_hazard),
    READ_ONCE(WORD_COMPONENT_REFUSE, read_refuse),
    READ_ONCE(WORD_COMPONENT_CRITICAL_DENSITY, keep_critical_density),
    QUANTITY(MOLAR_MASS, NULL, molar_mass),
    QUANTITY(CRITICAL_TEMPERATURE, NULL, critical_temperature),
    QUANTITY(CRITICAL_PRESSURE, &CRITICAL_PRESSURE, critical_pressure),
    QUANTITY(ACENTRIC, &ACENTRIC, acentric),
    QUANTITY(TRIPLE_TEMPERATURE, NULL, triple_temperature),
    QUANTITY(TRIPLE_PRESSURE, NULL, triple_pressure),
    QUANTITY(BOILING_TEMPERATURE, NULL, boiling_temperature),
    QUANTITY(DIPOLE, NULL, dipole),
    READ_EACH(WORD_COMPONENT_PARAMETERS, read_parameters_row),
    READ_ONCE(WORD_COMPONENT_GROUPS, read_groups_row),
};

static const struct block_form COMPONENT = BLOCK_FORM(BLOCK_COMPONENT, ROWS);

static struct optional optional_of(const struct quantity *quantity)
{
    return (struct optional){.given = quantity->given, .value = quantity->value};
}

/* The plain parameters the methods see. */
static struct pure_spec spec_of(struct elaboration *e, const struct case_component *component,
                                const struct reference_spec *reference)
{
    return (struct pure_spec){
        .name = component->name,
        .molar_mass = component->molar_mass.value,
        .critical_temperature = optional_of(&component->critical_temperature),
        .critical_pressure = optional_of(&component->critical_pressure),
        .critical_density = optional_of(&component->critical_density),
        .acentric = optional_of(&component->acentric),
        .triple_temperature = optional_of(&component->triple_temperature),
        .dipole = optional_of(&component->dipole),
        .reference = reference,
        .cubic_set_count = component->cubic_set_count,
        .cubic_sets = plain_sets(e, component->cubic_sets, component->cubic_set_count),
        .group_count = component->group_count,
        .groups = plain_groups(e, component),
    };
}

/* Parameters and groups count as used only once a method asks for them; a block of nothing else does not either. */
static bool is_deferred(const struct statement *block)
{
    for (const struct statement *at = block->block; at != NULL; at = at->next) {
        const struct vocabulary_row *row = vocabulary_find(BLOCK_COMPONENT, at->word);
        if (row == NULL || (row->id != WORD_COMPONENT_PARAMETERS && row->id != WORD_COMPONENT_GROUPS)) {
            return false;
        }
    }
    return true;
}

/* Blocks of the library first, so that the deck's own word counts wherever it stands. */
static void read_blocks(struct elaboration *e, const struct named *named, const char *group,
                        struct component_target *target)
{
    for (int own = 0; own < 2; own++) {
        for (size_t i = 0; i < named->count; i++) {
            const struct statement *block = named->items[i];
            if (block->at.file->is_library == (own == 0) && require_block(e, block)) {
                if (!is_deferred(block)) {
                    mark_file_used(e, block->at);
                }
                read_block(e, &COMPONENT, group, block, target);
            }
        }
    }
}

/* True when the statement's value is mass per volume; false also when it has none, which its reading then reports. */
static bool is_mass_density(struct elaboration *e, const struct statement *statement)
{
    const struct item *item = statement->items;
    struct value value;
    return item != NULL && item->kind == ITEM_EXPRESSION && value_of(e, item->value, &value) &&
           dimension_equal(value.dimension, DIMENSION_DENSITY);
}

static void read_critical_density(struct elaboration *e, const struct statement *statement,
                                  struct case_component *component)
{
    struct reading reading = read_items(e, statement);
    const bool is_mass = is_mass_density(e, statement);
    const struct quantity *molar_mass = &component->molar_mass;
    if (is_mass && !molar_mass->given) {
        diagnose(e->out, CODE_E214, statement->at, "a critical-density per mass needs the component's molar-mass");
        return;
    }
    struct quantity *into = &component->critical_density;
    const struct quantity_form *form = is_mass ? &FORM_DENSITY : &FORM_MOLAR_DENSITY;
    if (!forbid_block(e, statement) || !take_quantity(&reading, form, statement->word, into)) {
        return;
    }
    finish_items(&reading);
    if (is_mass) {
        into->value /= molar_mass->value;
        into->uncertainty /= molar_mass->value;
    }
}

static void settle_critical_density(struct elaboration *e, struct component_target *target, const char *group)
{
    e->group = group;
    for (size_t i = 0; i < target->critical_densities.count; i++) {
        read_critical_density(e, target->critical_densities.items[i], &target->component);
    }
}

/* A triple point above the critical one is a slip in one of the two. */
static void check_order(struct elaboration *e, const struct case_component *component)
{
    const struct quantity *triple = &component->triple_temperature;
    const struct quantity *critical = &component->critical_temperature;
    if (triple->given && critical->given && !(triple->value < critical->value)) {
        struct diagnostic *said = diagnose(e->out, CODE_E209, triple->origin.at,
                                           "the triple temperature %s is not below the critical temperature %s",
                                           triple->origin.written, critical->origin.written);
        said->note = "the critical temperature";
        said->note_at = critical->origin.at;
    }
}

static const struct reference_spec *equation_of(struct elaboration *e, const struct case_component *component,
                                                enum name_kind kind, const struct case_source **source)
{
    struct named *equation = names_find(&e->tables[kind], component->name);
    if (equation == NULL) {
        return NULL;
    }
    struct reference_spec *reference = arena_alloc(e->arena, 1, sizeof *reference);
    return build_equation(e, equation, reference, source) ? reference : NULL;
}

/* The equation that serves one method only counts as used once that method answers. */
static const struct reference_spec *gerg_equation_of(struct elaboration *e, struct case_component *component)
{
    const bool outer = e->is_deferring;
    e->is_deferring = true;
    const struct reference_spec *equation = equation_of(e, component, NAMES_GERG_EQUATION, &component->gerg_source);
    e->is_deferring = outer;
    if (equation != NULL) {
        component->gerg_at = names_find(&e->tables[NAMES_GERG_EQUATION], component->name)->at;
    }
    return equation;
}

const struct case_component *build_component(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    struct component_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->component.name = named->name;
    const char *group = arena_format(e->arena, "component %s", named->name);
    const char *outer = e->group;
    read_blocks(e, named, group, target);
    settle_critical_density(e, target, group);
    e->group = outer;
    check_order(e, &target->component);
    target->component.cubic_sets = target->sets.items;
    target->component.cubic_set_count = target->sets.count;
    const struct case_source *source = NULL;
    const struct reference_spec *reference = equation_of(e, &target->component, NAMES_EQUATION, &source);
    target->component.equation_source = reference == NULL ? NULL : source;
    target->component.spec = spec_of(e, &target->component, reference);
    target->component.spec.gerg_2008 = gerg_equation_of(e, &target->component);
    struct named *solid = names_find(&e->tables[NAMES_SOLID], named->name);
    target->component.solid = solid == NULL ? NULL : build_solid(e, solid);
    target->component.spec.solid = target->component.solid == NULL ? NULL : &target->component.solid->spec;
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? &target->component : NULL;
    return named->built;
}

const struct case_component *component_of_name(struct elaboration *e, const struct expression *name)
{
    struct named *named = named_of_item(e, NAMES_COMPONENT, name, "component");
    if (named == NULL) {
        return NULL;
    }
    const struct case_component *component = build_component(e, named);
    if (component == NULL) {
        return NULL;
    }
    if (!component->molar_mass.given) {
        struct diagnostic *said = diagnose(e->out, CODE_E214, named->at, "component '%s' is used but has no molar-mass",
                                           shortened(e, named->name));
        said->note = "used here";
        said->note_at = name->at;
        return NULL;
    }
    return component;
}
