/* Preparation sheets: the lines that say how a mixture is made, and the fluid of all that may come into the vessel. */
#include "case/case_internal.h"

#include <math.h>
#include <string.h>

enum { ADDITIONS_MOST = 12, TOGETHER_MOST = 10000 };

static const struct quantity_form FORM_COUNT = {
    .reading = READ_NUMBER, .least = 1.0, .most = TOGETHER_MOST, .because = "a number of vessels"};
static const struct quantity_form FORM_READING = {.measure = MEASURE_PRESSURE,
                                                  .reading = READ_DIFFERENCE,
                                                  .least = 0.0,
                                                  .most = 1e8,
                                                  .because = "an uncertainty, as 0.4 bar"};

/* ---- lines ------------------------------------------------------------------------------------------------------- */

static void read_make(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    const struct item *by = take_item(&reading, ITEM_BY);
    if (by == NULL || by->value->kind != EXPRESSION_NAME) {
        report_missing(&reading, "'by weight' or 'by pressure'");
        return;
    }
    const struct vocabulary_row *way = choice_of_name(e, BLOCK_MADE_BY, by->value);
    if (way != NULL && finish_items(&reading)) {
        lines->is_way_given = true;
        lines->preparation.is_by_pressure = way->id == WORD_MADE_BY_PRESSURE;
    }
}

static void read_order(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *order = take_choice(&reading, BLOCK_ADDING_ORDER, "'as-written' or 'proposed'");
    if (order != NULL && finish_items(&reading)) {
        lines->preparation.is_order_proposed = order->id == WORD_ADDING_ORDER_PROPOSED;
    }
}

static const struct block_row ADDITION_ROWS[] = {
    READ_QUANTITY(WORD_ADDITION_SUPPLY_PRESSURE, &FORM_PRESSURE, struct case_addition, supply_pressure),
    READ_QUANTITY(WORD_ADDITION_BALANCE, &FORM_MASS, struct case_addition, balance),
    READ_QUANTITY(WORD_ADDITION_FILL_TIME, NULL, struct case_addition, fill_time),
    READ_QUANTITY(WORD_ADDITION_SUPPLY_TEMPERATURE, &FORM_TEMPERATURE, struct case_addition, supply_temperature),
};
static const struct block_form ADDITION = BLOCK_FORM(BLOCK_ADDITION, ADDITION_ROWS);

static const struct case_addition *find_addition(const struct preparation_lines *lines, const char *name)
{
    for (size_t i = 0; i < lines->additions.count; i++) {
        if (strcmp(lines->additions.items[i].name, name) == 0) {
            return &lines->additions.items[i];
        }
    }
    return NULL;
}

static bool is_new_addition(struct elaboration *e, const struct preparation_lines *lines, const struct expression *name)
{
    const struct case_addition *before = find_addition(lines, name->name);
    if (before != NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E207, name->at, "'%s' is added twice", shortened(e, name->name));
        said->note = "first added here";
        said->note_at = before->at;
        return false;
    }
    if (lines->additions.count >= ADDITIONS_MOST) {
        diagnose(e->out, CODE_E232, name->at, "a recipe has at most %d additions", ADDITIONS_MOST);
        return false;
    }
    return true;
}

/* `add NAME at T { ... }` */
static void read_addition(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    const struct item *at = name == NULL ? NULL : take_item(&reading, ITEM_AT);
    if (at == NULL) {
        report_missing(&reading, name == NULL ? "the name of a component or mixture" : "'at' and a temperature");
        return;
    }
    struct case_addition addition = {.name = name->name, .at = name->at, .parent = fluid_of_name(e, name)};
    const char *what = arena_format(e->arena, "temperature after %s", name->name);
    double uncertainty = 0.0;
    struct location last = at->at;
    struct quantity *temperature = &addition.temperature;
    if (!read_value(e, &FORM_TEMPERATURE, what, at->value, &temperature->value) ||
        !take_uncertainty(&reading, &FORM_TEMPERATURE, what, temperature->value, &uncertainty, &last) ||
        !finish_items(&reading) || !is_new_addition(e, lines, name) || addition.parent == NULL) {
        return;
    }
    temperature->given = true;
    temperature->uncertainty = uncertainty;
    temperature->origin = origin_of(e, location_span(at->at, last));
    if (!settle_value(e, &FORM_TEMPERATURE, what, at->value, uncertainty, &temperature->origin, &temperature->value)) {
        return;
    }
    add_input(e, what, si_text(e, &FORM_TEMPERATURE, temperature->value), &temperature->origin);
    if (statement->block != NULL) {
        read_block(e, &ADDITION, arena_format(e->arena, "%s, %s", e->group, name->name), statement, &addition);
    }
    if (addition.fill_time.given && !addition.supply_pressure.given) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E214, addition.at, "the fast addition of '%s' has no supply-pressure",
                     shortened(e, name->name));
        diagnostic_hint(e->out, said, "the energy of the gas follows from it, as in: supply-pressure 300 barg");
    }
    struct addition_list *list = &lines->additions;
    *ARENA_APPEND(e->arena, list) = addition;
}

static void read_gauge(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    if (take_quantity(&reading, &FORM_READING, "gauge", &lines->preparation.gauge)) {
        finish_items(&reading);
    }
}

/* A number of vessels; 0 after a message. */
static size_t take_number(struct reading *reading, const char *name)
{
    double number;
    const struct item *item = take_item(reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(reading, "a number");
        return 0;
    }
    if (!read_value(reading->e, &FORM_COUNT, name, item->value, &number)) {
        return 0;
    }
    if (floor(number) < number) {
        diagnose(reading->e->out, CODE_E209, item->at, "'%s' takes a whole number", name);
        return 0;
    }
    return (size_t)number;
}

static void read_together(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    const size_t number = take_number(&reading, "together");
    if (number > 0 && finish_items(&reading)) {
        lines->preparation.together = number;
    }
}

static void read_further(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    if (name == NULL) {
        report_missing(&reading, "the name of a vessel");
        return;
    }
    struct case_further further = {.vessel = vessel_of_name(e, name), .number = 1};
    if (reading.item != NULL) {
        further.number = take_number(&reading, "also");
    }
    if (further.vessel != NULL && further.number > 0 && finish_items(&reading)) {
        struct further_list *list = &lines->further;
        *ARENA_APPEND(e->arena, list) = further;
    }
}

/* `weighed NAME m +/- u`; the addition may stand further down. */
static void read_weighed(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    struct reading reading = read_items(e, statement);
    struct weighing weighing = {.name = take_name(&reading)};
    if (weighing.name == NULL) {
        report_missing(&reading, "the name of an addition");
        return;
    }
    const char *what = arena_format(e->arena, "weighed %s", shortened(e, weighing.name->name));
    if (take_quantity(&reading, &FORM_MASS, what, &weighing.mass) && finish_items(&reading)) {
        struct weighing_list *list = &lines->weighed;
        *ARENA_APPEND(e->arena, list) = weighing;
    }
}

static void read_heel(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    lines->heel = read_one_name(e, statement, "the name of a charge");
}

void read_preparation_line(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines)
{
    static const struct {
        enum vocabulary_word word;
        bool may_have_block;
        void (*read)(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines);
    } readers[] = {
        {WORD_PREPARATION_MAKE, false, read_make},    {WORD_PREPARATION_ADD, true, read_addition},
        {WORD_PREPARATION_ORDER, false, read_order},  {WORD_PREPARATION_HEEL, false, read_heel},
        {WORD_PREPARATION_GAUGE, false, read_gauge},  {WORD_PREPARATION_TOGETHER, false, read_together},
        {WORD_PREPARATION_ALSO, false, read_further}, {WORD_PREPARATION_WEIGHED, false, read_weighed},
    };
    const struct vocabulary_row *row = vocabulary_find(BLOCK_PREPARATION, statement->word);
    for (size_t i = 0; i < sizeof readers / sizeof *readers; i++) {
        if (row != NULL && row->id == readers[i].word && (readers[i].may_have_block || forbid_block(e, statement))) {
            readers[i].read(e, statement, lines);
        }
    }
}

/* ---- the whole --------------------------------------------------------------------------------------------------- */

struct union_list {
    const struct case_component **items;
    size_t count, capacity;
};

static size_t place_in(struct elaboration *e, struct union_list *all, const struct case_component *component)
{
    for (size_t i = 0; i < all->count; i++) {
        if (all->items[i] == component) {
            return i;
        }
    }
    *ARENA_APPEND(e->arena, all) = component;
    return all->count - 1;
}

static void gather(struct elaboration *e, struct union_list *all, const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->count; i++) {
        place_in(e, all, fluid->components[i]);
    }
}

/* What is beside the target, by name: the order of the additions makes no difference to the fluid. */
static void sort_behind(struct union_list *all, size_t from)
{
    for (size_t i = from + 1; i < all->count; i++) {
        const struct case_component *moved = all->items[i];
        size_t place = i;
        for (; place > from && strcmp(all->items[place - 1]->name, moved->name) > 0; place--) {
            all->items[place] = all->items[place - 1];
        }
        all->items[place] = moved;
    }
}

static const size_t *places_in(struct elaboration *e, struct union_list *all, const struct case_fluid *fluid)
{
    size_t *places = arena_alloc(e->arena, fluid->count, sizeof *places);
    for (size_t i = 0; i < fluid->count; i++) {
        places[i] = place_in(e, all, fluid->components[i]);
    }
    return places;
}

/* Fractions by volume at a state become amounts by a method only, and a recipe is put together before one is chosen. */
static bool is_by_amount(struct elaboration *e, const struct case_fluid *fluid, struct location at)
{
    if (fluid->has_state) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E232, at, "'%s' has fractions of real volume at a state", shortened(e, fluid->name));
        diagnostic_hint(e->out, said, "give its fractions by mole, by mass, or by volume without a state");
    }
    return !fluid->has_state;
}

/* The same target with the same components beside it; NULL: there is none yet. */
static const struct case_fluid *find_blend(const struct elaboration *e, const struct case_fluid *target,
                                           const struct union_list *all)
{
    for (size_t k = 0; k < e->blends.count; k++) {
        const struct case_fluid *blend = e->blends.items[k];
        if (case_is_same_place(blend->at, target->at) && strcmp(blend->name, target->name) == 0 &&
            blend->count == all->count &&
            memcmp(blend->components, all->items, all->count * sizeof(const struct case_component *)) == 0) {
            return blend;
        }
    }
    return NULL;
}

/* The target with all that comes with the parents and the heel, in no amount as far as the target goes. */
static const struct case_fluid *make_blend(struct elaboration *e, const struct case_fluid *target,
                                           const struct union_list *all)
{
    struct case_fluid *blend = arena_alloc(e->arena, 1, sizeof *blend);
    double *fractions = arena_alloc(e->arena, all->count, sizeof *fractions);
    struct case_share *shares = arena_alloc(e->arena, all->count, sizeof *shares);
    for (size_t i = 0; i < all->count; i++) {
        fractions[i] = i < target->count ? target->fractions[i] : 0.0;
        shares[i].given = (struct quantity){.given = true, .value = fractions[i], .origin = origin_of(e, target->at)};
        shares[i].is_beside = i >= target->count;
        if (i < target->count && target->shares != NULL) {
            shares[i] = target->shares[i];
        }
    }
    *blend = (struct case_fluid){.name = target->name,
                                 .at = target->at,
                                 .count = all->count,
                                 .components = all->items,
                                 .fractions = fractions,
                                 .basis = target->basis,
                                 .shares = all->count > 1 ? shares : NULL};
    finish_fluid(e, blend);
    struct fluid_list *blends = &e->blends;
    *ARENA_APPEND(e->arena, blends) = blend;
    return blend;
}

/* The sheet's fluid, and its charge's. */
static void take_blend(struct elaboration *e, const struct case_fluid *target, const struct union_list *all,
                       struct case_sheet *sheet)
{
    const struct case_fluid *known = find_blend(e, target, all);
    sheet->fluid = known == NULL ? make_blend(e, target, all) : known;
    if (sheet->charge != NULL) {
        struct case_charge *charge = arena_alloc(e->arena, 1, sizeof *charge);
        *charge = *sheet->charge;
        charge->fluid = sheet->fluid;
        sheet->charge = charge;
    }
}

static bool attach_heel(struct elaboration *e, const struct preparation_lines *lines, const struct case_sheet *sheet,
                        struct case_preparation *into)
{
    if (lines->heel == NULL) {
        return true;
    }
    into->heel = charge_of_name(e, lines->heel);
    if (into->heel != NULL && into->heel->vessel != sheet->vessel) {
        struct diagnostic *said = diagnose(e->out, CODE_E232, lines->heel->at, "the heel '%s' is in another vessel",
                                           shortened(e, into->heel->name));
        said->note = "the vessel of this sheet";
        said->note_at = sheet->vessel->at;
        return false;
    }
    return into->heel != NULL && is_by_amount(e, into->heel->fluid, lines->heel->at);
}

static bool attach_weighings(struct elaboration *e, struct preparation_lines *lines)
{
    for (size_t k = 0; k < lines->weighed.count; k++) {
        const struct weighing *weighing = &lines->weighed.items[k];
        size_t i = 0;
        while (i < lines->additions.count && strcmp(lines->additions.items[i].name, weighing->name->name) != 0) {
            i++;
        }
        if (i == lines->additions.count) {
            diagnose(e->out, CODE_E232, weighing->name->at, "'%s' is weighed but not added",
                     shortened(e, weighing->name->name));
            return false;
        }
        if (lines->additions.items[i].weighed.given) {
            diagnose(e->out, CODE_E207, weighing->name->at, "'%s' is weighed twice",
                     shortened(e, weighing->name->name));
            return false;
        }
        lines->additions.items[i].weighed = weighing->mass;
    }
    if (lines->weighed.count > 0 && lines->weighed.count < lines->additions.count) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E232, lines->weighed.items[0].name->at, "only some of the additions are weighed");
        diagnostic_hint(e->out, said, "give the mass found for every addition, or for none");
        return false;
    }
    return true;
}

/* More parents than the target has components have no one solution. */
static bool is_told_apart(struct elaboration *e, const struct preparation_lines *lines, const struct case_fluid *target)
{
    size_t present = 0;
    for (size_t i = 0; i < target->count; i++) {
        present += target->fractions[i] > 0.0;
    }
    if (lines->additions.count <= present) {
        return true;
    }
    struct diagnostic *said = diagnose(e->out, CODE_E232, lines->additions.items[present].at,
                                       "%zu additions for the %zu components of '%s' leave their shares open",
                                       lines->additions.count, present, shortened(e, target->name));
    diagnostic_hint(e->out, said, "leave one out, or make a premixture of two of them");
    return false;
}

bool complete_preparation(struct elaboration *e, struct preparation_lines *lines, struct case_sheet *sheet)
{
    const struct case_fluid *target = sheet->fluid;
    struct case_preparation *made = arena_alloc(e->arena, 1, sizeof *made);
    struct union_list all = {.count = 0};
    *made = lines->preparation;
    made->target = target;
    made->together = made->together == 0 ? 1 : made->together;
    gather(e, &all, target);
    if (!is_by_amount(e, target, sheet->at) || !is_told_apart(e, lines, target) || !attach_weighings(e, lines) ||
        !attach_heel(e, lines, sheet, made)) {
        return false;
    }
    for (size_t i = 0; i < lines->additions.count; i++) {
        struct case_addition *addition = &lines->additions.items[i];
        if (!is_by_amount(e, addition->parent, addition->at)) {
            return false;
        }
        gather(e, &all, addition->parent);
    }
    if (made->heel != NULL) {
        gather(e, &all, made->heel->fluid);
    }
    sort_behind(&all, target->count);
    for (size_t i = 0; i < lines->additions.count; i++) {
        lines->additions.items[i].places = places_in(e, &all, lines->additions.items[i].parent);
    }
    made->heel_places = made->heel == NULL ? NULL : places_in(e, &all, made->heel->fluid);
    made->addition_count = lines->additions.count;
    made->additions = lines->additions.items;
    made->further_count = lines->further.count;
    made->further = lines->further.items;
    sheet->preparation = made;
    take_blend(e, target, &all, sheet);
    return true;
}
