/* Sheets: the questions of a deck, each made complete with its fluid, vessel, methods and listed rows. */
#include "case/case_internal.h"

#include <string.h>

struct rule_use {
    const struct case_rule *rule;
    struct location at; /* where the sheet names it */
};

struct rule_use_list {
    struct rule_use *items;
    size_t count, capacity;
};

struct quote_list {
    double *items;
    size_t count, capacity;
};

struct note_list {
    const char **items;
    size_t count, capacity;
};

struct sheet_target {
    struct case_sheet sheet;
    const struct expression *fluid, *vessel, *charge; /* as named */
    const struct item *entry;                         /* its number, as named */
    const struct statement *methods, *sweep;
    struct fill fill;
    struct rule_use_list rules;
    struct predicate_list requirements;
    struct quote_list quotes;
    struct note_list notes;
    struct preparation_lines preparation;
};

static void read_fluid(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    into->fluid = read_one_name(e, statement, "the name of a component or mixture");
}

static void read_vessel(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    into->vessel = read_one_name(e, statement, "the name of a vessel");
}

static void read_charge(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    into->charge = read_one_name(e, statement, "the name of a charge");
}

static void read_fill_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_fill(e, statement, &into->fill);
}

/* Methods need the fluid, which may be named further down: kept for later. */
static void read_methods(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    if (forbid_block(e, statement)) {
        into->methods = statement;
    }
}

static void read_sheet_units(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_units(e, statement, &into->sheet.units);
}

/* The table goes beside the listing: a bare name, so that a deck cannot write elsewhere. */
static bool is_file_name(const char *name)
{
    for (const char *at = name; *at != '\0'; at++) {
        if (*at == '/' || *at == '\\' || *at == ':' || (unsigned char)*at < 0x20U) {
            return false;
        }
    }
    return name[0] != '.' && strlen(name) <= 200;
}

static void read_table(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    const char *name = read_text(e, statement, "a file name in quotes");
    if (name == NULL) {
        return;
    }
    const struct location at = statement->items->at;
    if (!is_file_name(name)) {
        struct diagnostic *said = diagnose(e->out, CODE_E213, at, "'%s' is not a plain file name", shortened(e, name));
        diagnostic_hint(e->out, said, "a table is written beside the listing, as in: table \"bench-lot.csv\"");
        return;
    }
    const struct named *before = names_find(&e->table_files, name);
    if (before != NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E206, at, "two tables cannot go into one file '%s'", shortened(e, name));
        said->note = "first named here";
        said->note_at = before->at;
        return;
    }
    names_add(e->arena, &e->table_files, name)->at = at;
    into->sheet.table_csv = name;
}

static void read_note(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    const char *note = read_text(e, statement, "a note in quotes");
    if (note != NULL) {
        struct note_list *list = &into->notes;
        *ARENA_APPEND(e->arena, list) = note;
    }
}

static void read_draws(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_monte_carlo(e, statement, &into->sheet.draws, &into->sheet.seed);
}

static void read_uncertainty(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    into->sheet.shows_every_uncertainty =
        take_choice(&reading, BLOCK_UNCERTAINTY, "'every-row'") != NULL && finish_items(&reading);
}

static void add_rule(struct elaboration *e, const struct expression *name, struct rule_use_list *rules)
{
    const struct case_rule *rule = rule_of_name(e, name);
    if (rule == NULL) {
        return;
    }
    for (size_t i = 0; i < rules->count; i++) {
        if (rules->items[i].rule == rule) {
            struct diagnostic *said =
                diagnose(e->out, CODE_E207, name->at, "the rule '%s' is named twice", shortened(e, rule->name));
            said->note = "first named here";
            said->note_at = rules->items[i].at;
            return;
        }
    }
    *ARENA_APPEND(e->arena, rules) = (struct rule_use){.rule = rule, .at = name->at};
}

static void read_rules(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    do {
        const struct expression *name = take_name(&reading);
        if (name == NULL) {
            report_missing(&reading, "the name of a rule");
            return;
        }
        add_rule(e, name, &into->rules);
    } while (reading.item != NULL);
}

static void add_quote(struct elaboration *e, const struct item *item, struct quote_list *quotes)
{
    double temperature;
    if (read_value(e, &FORM_TEMPERATURE, "the quoted temperature", item->value, &temperature)) {
        *ARENA_APPEND(e->arena, quotes) = temperature;
        const struct origin origin = origin_of(e, item->value->at);
        add_input(e, "quote pressure at", si_text(e, &FORM_TEMPERATURE, temperature), &origin);
    }
}

/* `quote pressure at T, T, ...` */
static void read_quote(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    if (take_choice(&reading, BLOCK_QUOTED, "a quantity to quote") == NULL) {
        return;
    }
    const struct item *item = take_item(&reading, ITEM_AT);
    if (item == NULL) {
        report_missing(&reading, "'at' and a temperature");
        return;
    }
    for (; item != NULL; item = take_item(&reading, ITEM_EXPRESSION)) {
        add_quote(e, item, &into->quotes);
    }
    finish_items(&reading);
}

static void read_sweep_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct case_sheet *sheet = &into->sheet;
    into->sweep = statement;
    if (sheet->kind == SHEET_PERMISSIBLE_CHARGE || sheet->kind == SHEET_SETTLED_PRESSURE) {
        const struct item *first = statement->items;
        if (first != NULL && first->value != NULL && first->value->kind == EXPRESSION_NAME &&
            strcmp(first->value->name, "temperature") != 0 &&
            vocabulary_find(BLOCK_SWEPT, first->value->name) != NULL) {
            diagnose(e->out, CODE_E202, first->at, "this sheet sweeps temperature only");
            return;
        }
    }
    read_sweep(e, statement, &sheet->temperatures, &sheet->pressures, &sheet->densities);
}

/* `draw vapour` */
static void read_draw(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row = take_choice(&reading, BLOCK_PHASE_DRAWN, "'vapour' or 'liquid'");
    if (row != NULL && finish_items(&reading)) {
        into->sheet.drawing.given = true;
        into->sheet.drawing.is_liquid = row->id == WORD_PHASE_DRAWN_LIQUID;
    }
}

static void read_stop_at_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_stop_at(e, statement, &into->sheet);
}

static void read_stop_when_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_stop_when(e, statement, &into->sheet);
}

/* What one kind of sheet can show; false after a message. */
static bool is_shown(struct reading *reading, const struct vocabulary_row *row, enum vocabulary_word shown)
{
    if (row != NULL && row->id != shown) {
        diagnose(reading->e->out, CODE_E213, reading->of->at, "this sheet has no '%s' to show", row->word);
    }
    return row != NULL && row->id == shown;
}

static bool take_shown(struct reading *reading, enum vocabulary_word shown)
{
    return is_shown(reading, take_choice(reading, BLOCK_SHOWN, "what to show"), shown);
}

static void read_show(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row = take_choice(&reading, BLOCK_SHOWN, "what to show");
    if (row == NULL) {
        return;
    }
    if (row->id == WORD_SHOWN_MELTING) {
        into->sheet.show_melting = finish_items(&reading);
        return;
    }
    if (!is_shown(&reading, row, WORD_SHOWN_ITERATION)) {
        return;
    }
    const struct item *at = take_item(&reading, ITEM_AT);
    if (at != NULL) {
        struct optional *where = &into->sheet.iteration_at;
        where->given = read_value(e, &FORM_TEMPERATURE, "the temperature to show", at->value, &where->value);
    }
    into->sheet.show_iteration = finish_items(&reading);
}

static void read_show_caloric(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    into->sheet.show_caloric = take_shown(&reading, WORD_SHOWN_CALORIC) && finish_items(&reading);
}

static void read_listed(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row =
        take_choice(&reading, BLOCK_LISTED_POLICY, "'governs', 'check-governs' or 'compare'");
    if (row != NULL && finish_items(&reading)) {
        into->sheet.listed = row->id == WORD_LISTED_POLICY_CHECK_GOVERNS ? LISTED_CHECK_GOVERNS
                             : row->id == WORD_LISTED_POLICY_COMPARE     ? LISTED_COMPARE
                                                                         : LISTED_GOVERNS;
    }
}

static void read_assessed(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    into->sheet.assessed = read_text(e, statement, "the document in quotes");
}

static void read_entry(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    if (read_text(e, statement, "the entry's number in quotes") != NULL) {
        into->entry = statement->items;
    }
}

static void read_require(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    struct predicate requirement;
    if (read_predicate(e, statement, false, "require", &requirement)) {
        struct predicate_list *list = &into->requirements;
        *ARENA_APPEND(e->arena, list) = requirement;
    }
}

static void read_preparation(struct elaboration *e, const struct statement *statement, void *target)
{
    struct sheet_target *into = target;
    read_preparation_line(e, statement, &into->preparation);
}

/* The words of all kinds of sheet; which of them a kind takes, its block of the vocabulary says. */
static const struct block_row ROWS[] = {
    READ_ONCE(WORD_SHEET_FLUID, read_fluid),
    READ_ONCE(WORD_SHEET_METHODS, read_methods),
    READ_ONCE(WORD_SHEET_UNITS, read_sheet_units),
    READ_ONCE(WORD_SHEET_TABLE, read_table),
    READ_EACH(WORD_SHEET_NOTE, read_note),
    READ_ONCE(WORD_SHEET_UNCERTAINTY, read_uncertainty),
    READ_ONCE(WORD_SHEET_MONTE_CARLO, read_draws),
    READ_ONCE(WORD_PERMISSIBLE_CHARGE_VESSEL, read_vessel),
    READ_ONCE(WORD_PERMISSIBLE_CHARGE_RULES, read_rules),
    READ_EACH(WORD_PERMISSIBLE_CHARGE_QUOTE, read_quote),
    READ_EACH(WORD_PERMISSIBLE_CHARGE_SWEEP, read_sweep_row),
    READ_ONCE(WORD_PERMISSIBLE_CHARGE_LISTED, read_listed),
    READ_ONCE(WORD_PERMISSIBLE_CHARGE_ASSESSED, read_assessed),
    READ_ONCE(WORD_PERMISSIBLE_CHARGE_ENTRY, read_entry),
    READ_EACH(WORD_PERMISSIBLE_CHARGE_REQUIRE, read_require),
    READ_ONCE(WORD_SETTLED_PRESSURE_CHARGE, read_charge),
    READ_EACH(WORD_SETTLED_PRESSURE_SWEEP, read_sweep_row),
    READ_EACH(WORD_SETTLED_PRESSURE_REQUIRE, read_require),
    READ_EACH(WORD_SETTLED_PRESSURE_QUOTE, read_quote),
    READ_ONCE(WORD_DRAW_DOWN_CHARGE, read_charge),
    READ_ONCE(WORD_DRAW_DOWN_DRAW, read_draw),
    READ_QUANTITY(WORD_DRAW_DOWN_TEMPERATURE, &FORM_TEMPERATURE, struct sheet_target, sheet.drawing.temperature),
    READ_QUANTITY(WORD_DRAW_DOWN_LEAST_PRESSURE, &FORM_PRESSURE, struct sheet_target, sheet.drawing.least_pressure),
    READ_ONCE(WORD_DRAW_DOWN_STOP_AT, read_stop_at_row),
    READ_ONCE(WORD_DRAW_DOWN_STOP_WHEN, read_stop_when_row),
    READ_QUANTITY(WORD_DRAW_DOWN_RATE, NULL, struct sheet_target, sheet.drawing.rate),
    READ_QUANTITY(WORD_DRAW_DOWN_AMBIENT, &FORM_TEMPERATURE, struct sheet_target, sheet.drawing.ambient),
    READ_QUANTITY(WORD_DRAW_DOWN_AMBIENT_CONDUCTANCE, NULL, struct sheet_target, sheet.drawing.ambient_conductance),
    READ_QUANTITY(WORD_DRAW_DOWN_LEAST_TEMPERATURE, &FORM_TEMPERATURE, struct sheet_target,
                  sheet.drawing.least_temperature),
    READ_QUANTITY(WORD_DRAW_DOWN_TIME, NULL, struct sheet_target, sheet.drawing.time),
    READ_QUANTITY(WORD_DRAW_DOWN_LEAST_CONTENT, &FORM_MASS, struct sheet_target, sheet.drawing.least_content),
    READ_ONCE(WORD_PREPARATION_CHARGE, read_charge),
    READ_ONCE(WORD_PREPARATION_MAKE, read_preparation),
    READ_EACH(WORD_PREPARATION_ADD, read_preparation),
    READ_ONCE(WORD_PREPARATION_ORDER, read_preparation),
    READ_ONCE(WORD_PREPARATION_HEEL, read_preparation),
    READ_QUANTITY(WORD_PREPARATION_BALANCE, &FORM_MASS, struct sheet_target, preparation.preparation.balance),
    READ_ONCE(WORD_PREPARATION_GAUGE, read_preparation),
    READ_QUANTITY(WORD_PREPARATION_TOLERANCE, &FORM_FRACTION, struct sheet_target, preparation.preparation.tolerance),
    READ_ONCE(WORD_PREPARATION_TOGETHER, read_preparation),
    READ_EACH(WORD_PREPARATION_ALSO, read_preparation),
    READ_EACH(WORD_PREPARATION_WEIGHED, read_preparation),
    READ_ONCE(WORD_PREPARATION_ASSESSED, read_assessed),
    READ_EACH(WORD_PREPARATION_REQUIRE, read_require),
    READ_ONCE(WORD_CHARGE_VESSEL, read_vessel),
    READ_ONCE(WORD_CHARGE_FILL, read_fill_row),
    READ_ONCE(WORD_CHARGE_MASS, read_fill_row),
    READ_ONCE(WORD_CHARGE_FILLING_RATIO, read_fill_row),
    READ_ONCE(WORD_CHARGE_DENSITY, read_fill_row),
    READ_ONCE(WORD_CHARGE_MOLES, read_fill_row),
    READ_ONCE(WORD_CHARGE_VOLUME, read_fill_row),
    READ_EACH(WORD_SATURATION_SWEEP, read_sweep_row),
    READ_EACH(WORD_SATURATION_SHOW, read_show),
    READ_EACH(WORD_FUGACITY_SWEEP, read_sweep_row),
    READ_ONCE(WORD_FUGACITY_SHOW, read_show_caloric),
};

static const struct block_form SHEETS[SHEET_KINDS] = {
    [SHEET_PERMISSIBLE_CHARGE] = BLOCK_FORM(BLOCK_PERMISSIBLE_CHARGE, ROWS),
    [SHEET_SETTLED_PRESSURE] = BLOCK_FORM(BLOCK_SETTLED_PRESSURE, ROWS),
    [SHEET_SATURATION] = BLOCK_FORM(BLOCK_SATURATION, ROWS),
    [SHEET_FUGACITY] = BLOCK_FORM(BLOCK_FUGACITY, ROWS),
    [SHEET_DRAW_DOWN] = BLOCK_FORM(BLOCK_DRAW_DOWN, ROWS),
    [SHEET_PREPARATION] = BLOCK_FORM(BLOCK_PREPARATION, ROWS),
};

static enum sheet_kind kind_of(enum vocabulary_word word)
{
    return word == WORD_SHEET_KIND_PERMISSIBLE_CHARGE ? SHEET_PERMISSIBLE_CHARGE
           : word == WORD_SHEET_KIND_SETTLED_PRESSURE ? SHEET_SETTLED_PRESSURE
           : word == WORD_SHEET_KIND_SATURATION       ? SHEET_SATURATION
           : word == WORD_SHEET_KIND_DRAW_DOWN        ? SHEET_DRAW_DOWN
           : word == WORD_SHEET_KIND_PREPARATION      ? SHEET_PREPARATION
                                                      : SHEET_FUGACITY;
}

static bool report_lack(struct elaboration *e, const struct case_sheet *sheet, const char *what, const char *example)
{
    struct diagnostic *said = diagnose(e->out, CODE_E214, sheet->at, "the sheet names no %s", what);
    diagnostic_hint(e->out, said, "as in: %s", example);
    return false;
}

/* One thing said in two ways: `charge` brings its own fluid, vessel and amount. */
static void check_charge_alone(struct elaboration *e, const struct sheet_target *target)
{
    const struct location *second = target->fluid != NULL    ? &target->fluid->at
                                    : target->vessel != NULL ? &target->vessel->at
                                    : target->fill.given     ? &target->fill.at
                                                             : NULL;
    if (second != NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E204, *second, "the charge '%s' names its own fluid, vessel and amount",
                     shortened(e, target->charge->name));
        said->note = "the charge";
        said->note_at = target->charge->at;
    }
}

/* Fluid, vessel and charge of the sheet from the names in it. False after a message. */
static bool resolve(struct elaboration *e, struct sheet_target *target)
{
    struct case_sheet *sheet = &target->sheet;
    if (target->charge != NULL) {
        check_charge_alone(e, target);
        sheet->charge = charge_of_name(e, target->charge);
        if (sheet->charge != NULL) {
            sheet->fluid = sheet->charge->fluid;
            sheet->vessel = sheet->charge->vessel;
        }
        return sheet->charge != NULL;
    }
    const bool needs_fill =
        sheet->kind == SHEET_SETTLED_PRESSURE || sheet->kind == SHEET_DRAW_DOWN || sheet->kind == SHEET_PREPARATION;
    const bool needs_vessel = sheet->kind == SHEET_PERMISSIBLE_CHARGE || needs_fill;
    if (needs_fill && target->fluid == NULL && !target->fill.given) {
        return report_lack(e, sheet, "charge", "charge bench-lot");
    }
    if (target->fluid == NULL) {
        return report_lack(e, sheet, "fluid", "fluid carbon-dioxide");
    }
    sheet->fluid = fluid_of_name(e, target->fluid);
    if (!needs_vessel) {
        return sheet->fluid != NULL;
    }
    if (target->vessel == NULL) {
        return report_lack(e, sheet, "vessel", "vessel fifty");
    }
    sheet->vessel = vessel_of_name(e, target->vessel);
    if (needs_fill && !target->fill.given) {
        return report_lack(e, sheet, "amount filled", "filling-ratio 0.68, or: charge bench-lot");
    }
    return sheet->fluid != NULL && sheet->vessel != NULL;
}

/* What the kind of sheet still needs. False after a message. */
static bool check_complete(struct elaboration *e, const struct sheet_target *target)
{
    const struct case_sheet *sheet = &target->sheet;
    const bool has_both = sheet->pressures.given && sheet->densities.given;
    switch (sheet->kind) {
    case SHEET_PERMISSIBLE_CHARGE:
        return target->rules.count != 0 || report_lack(e, sheet, "rules", "rules liquefied-high-pressure");
    case SHEET_SATURATION:
        if (sheet->densities.given || (sheet->temperatures.given && sheet->pressures.given)) {
            diagnose(e->out, CODE_E222, target->sweep->at,
                     "a saturation sheet sweeps temperature or pressure, one of them");
            return false;
        }
        return sheet->temperatures.given || sheet->pressures.given ||
               report_lack(e, sheet, "sweep", "sweep temperature from 220 K to 300 K in 8 steps");
    case SHEET_FUGACITY:
        if (!sheet->temperatures.given) {
            return report_lack(e, sheet, "sweep of temperature", "sweep temperature 300 K, 350 K");
        }
        if (has_both) {
            diagnose(e->out, CODE_E222, target->sweep->at, "a fugacity sheet sweeps pressure or density, not both");
            return false;
        }
        return sheet->pressures.given || sheet->densities.given ||
               report_lack(e, sheet, "sweep of pressure or density", "sweep pressure 1 bara, 10 bara");
    case SHEET_DRAW_DOWN:
        if (!sheet->drawing.given) {
            return report_lack(e, sheet, "phase to draw", "draw vapour");
        }
        if (!sheet->drawing.rate.given && (sheet->drawing.ambient.given || sheet->drawing.ambient_conductance.given ||
                                           sheet->drawing.least_temperature.given || sheet->drawing.time.given)) {
            return report_lack(e, sheet, "rate, without which it is drawn at one temperature", "rate 2 kg/h");
        }
        return sheet->drawing.temperature.given || report_lack(e, sheet, "temperature", "temperature 15 degC");
    case SHEET_PREPARATION:
        if (!target->preparation.is_way_given) {
            return report_lack(e, sheet, "way to make the mixture", "make by weight");
        }
        return target->preparation.additions.count > 0 || report_lack(e, sheet, "addition", "add nitrogen at 20 degC");
    case SHEET_SETTLED_PRESSURE:
    case SHEET_KINDS:
        break;
    }
    return true;
}

/* The rating of the vessel that a condition names and the vessel does not have; NULL: none. */
static const char *missing_rating(const struct predicate *predicate, const struct case_vessel *vessel)
{
    const struct {
        enum case_symbol symbol;
        const struct quantity *rating;
    } ratings[] = {
        {SYMBOL_TEST_PRESSURE, &vessel->test_pressure},
        {SYMBOL_WORKING_PRESSURE, &vessel->working_pressure},
        {SYMBOL_SERVICE_PRESSURE, &vessel->service_pressure},
    };
    for (size_t i = 0; i < sizeof ratings / sizeof *ratings; i++) {
        if (!ratings[i].rating->given && formula_mentions(predicate->bound, ratings[i].symbol)) {
            return case_symbol_name(ratings[i].symbol);
        }
    }
    return NULL;
}

static void check_rating(struct elaboration *e, const struct case_vessel *vessel, const struct predicate *predicate,
                         struct location at)
{
    const char *missing = missing_rating(predicate, vessel);
    if (missing == NULL) {
        return;
    }
    struct diagnostic *said = diagnose(e->out, CODE_E223, at, "'%s' needs the %s of vessel '%s', which has none",
                                       predicate->written, missing, shortened(e, vessel->name));
    diagnostic_hint(e->out, said, "add '%s ... barg' to the vessel", missing);
    said->note = "the vessel";
    said->note_at = vessel->at;
}

/* A pure gas has no vapour pressure above its critical temperature: a condition on one is of another class of gas. */
static void check_vapour_pressure(struct elaboration *e, const struct case_fluid *fluid,
                                  const struct predicate *predicate, struct location at)
{
    const bool is_asked = predicate->kind == PREDICATE_COMPARE && predicate->quantity == SYMBOL_VAPOUR_PRESSURE;
    if (!is_asked || !predicate->has_temperature || fluid->count != 1) {
        return;
    }
    const struct quantity *critical = &fluid->components[0]->critical_temperature;
    if (!critical->given || !(predicate->to > critical->value)) {
        return;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E231, at, "'%s': %s has no vapour pressure above its critical temperature, %.2f degC",
                 predicate->written, shortened(e, fluid->name), critical->value - 273.15);
    diagnostic_hint(e->out, said, "take the rule of the class the gas belongs to, or ask about its pressure");
}

static void check_condition(struct elaboration *e, const struct sheet_target *target, const struct predicate *predicate,
                            struct location at)
{
    if (target->sheet.vessel != NULL) {
        check_rating(e, target->sheet.vessel, predicate, at);
    }
    if (target->sheet.fluid != NULL) {
        check_vapour_pressure(e, target->sheet.fluid, predicate, at);
    }
}

static void check_conditions(struct elaboration *e, const struct sheet_target *target)
{
    for (size_t i = 0; i < target->rules.count; i++) {
        const struct case_rule *rule = target->rules.items[i].rule;
        for (size_t j = 0; j < rule->predicate_count; j++) {
            check_condition(e, target, &rule->predicates[j], target->rules.items[i].at);
        }
    }
    for (size_t i = 0; i < target->requirements.count; i++) {
        check_condition(e, target, &target->requirements.items[i], target->requirements.items[i].at);
    }
}

/* A requirement without a temperature holds at every swept one: there has to be a sweep. */
static void check_temperatures(struct elaboration *e, const struct sheet_target *target)
{
    for (size_t i = 0; i < target->requirements.count; i++) {
        const struct predicate *requirement = &target->requirements.items[i];
        if (!requirement->has_temperature && !target->sheet.temperatures.given &&
            predicate_needs_temperature(requirement)) {
            report_no_temperature(e, requirement);
        }
    }
}

/* Ideal gas underestimates what a dense gas weighs and knows no liquid, and van der Waals is far off both: no charge is
 * permitted by them. */
static void check_lead(struct elaboration *e, const struct case_sheet *sheet)
{
    static const enum vocabulary_word never[] = {WORD_METHOD_IDEAL_GAS, WORD_METHOD_VAN_DER_WAALS};
    for (size_t i = 0; i < sizeof never / sizeof *never && sheet->kind == SHEET_PERMISSIBLE_CHARGE; i++) {
        const char *method = vocabulary_rows()[never[i]].word;
        if (sheet->methods.count != 0 && strcmp(sheet->methods.names[0], method) == 0) {
            struct diagnostic *said = diagnose(e->out, CODE_E224, sheet->methods.at,
                                               "%s never governs a charge, so it cannot lead here", method);
            diagnostic_hint(e->out, said, "lead with reference or peng-robinson");
        }
    }
}

static void attach_rules(struct elaboration *e, struct sheet_target *target)
{
    const struct case_rule **rules = arena_alloc(e->arena, target->rules.count + 1, sizeof *rules);
    for (size_t i = 0; i < target->rules.count; i++) {
        rules[i] = target->rules.items[i].rule;
    }
    target->sheet.rules = rules;
    target->sheet.rule_count = target->rules.count;
}

static void attach_lists(struct elaboration *e, struct sheet_target *target)
{
    struct case_sheet *sheet = &target->sheet;
    attach_rules(e, target);
    sheet->requirements = target->requirements.items;
    sheet->requirement_count = target->requirements.count;
    sheet->quotes = target->quotes.items;
    sheet->quote_count = target->quotes.count;
    sheet->notes = target->notes.items;
    sheet->note_count = target->notes.count;
    const struct entry_list *entries =
        target->entry == NULL ? entries_of_fluid(e, sheet->fluid) : entry_of_name(e, target->entry, sheet->fluid);
    if (entries != NULL) {
        sheet->entries = entries->items;
        sheet->entry_count = entries->count;
    }
}

static bool any_no_solid(const struct predicate *predicates, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        if (predicates[i].kind == PREDICATE_NO_SOLID) {
            return true;
        }
    }
    return false;
}

/* What is known of solids counts as used where a condition speaks of them, or a table tells them. */
static void use_solids(struct elaboration *e, struct case_sheet *sheet)
{
    sheet->asks_of_solids = any_no_solid(sheet->requirements, sheet->requirement_count);
    for (size_t i = 0; i < sheet->rule_count; i++) {
        sheet->asks_of_solids =
            sheet->asks_of_solids || any_no_solid(sheet->rules[i]->predicates, sheet->rules[i]->predicate_count);
    }
    for (size_t i = 0; i < sheet->fluid->count; i++) {
        const struct case_component *component = sheet->fluid->components[i];
        if (case_sheet_tells_solid(sheet, component)) {
            use_solid(e, component);
        }
        if (case_sheet_melts(sheet, component)) {
            use_melting(e, component);
        }
    }
}

static struct location place_of_fluid(const struct sheet_target *target)
{
    return target->fluid != NULL ? target->fluid->at : target->charge->at;
}

static void complete_sheet(struct elaboration *e, struct sheet_target *target)
{
    struct case_sheet *sheet = &target->sheet;
    if (!resolve(e, target) || !check_complete(e, target) || !check_limited(e, sheet)) {
        return;
    }
    if (target->fill.given) {
        sheet->charge = make_charge(e, sheet->title == NULL ? "of this sheet" : sheet->title, sheet->fluid,
                                    sheet->vessel, &target->fill);
    }
    if (sheet->kind == SHEET_PREPARATION && !complete_preparation(e, &target->preparation, sheet)) {
        return;
    }
    check_conditions(e, target);
    check_temperatures(e, target);
    if (choose_methods(e, target->methods, sheet->fluid, place_of_fluid(target), &sheet->methods)) {
        check_lead(e, sheet);
        for (size_t i = 0; i < sheet->methods.count; i++) {
            use_method_data(e, sheet->fluid, sheet->methods.names[i]);
        }
    }
    attach_lists(e, target);
    use_solids(e, sheet);
}

/* A sheet with a mistake in it is not put together, but what it names is looked up, so that one run tells of every
 * mistake. */
static void check_names(struct elaboration *e, struct sheet_target *target)
{
    struct case_sheet *sheet = &target->sheet;
    const struct case_charge *charge = target->charge == NULL ? NULL : charge_of_name(e, target->charge);
    if (target->fluid != NULL) {
        fluid_of_name(e, target->fluid);
    }
    if (charge != NULL) {
        sheet->vessel = charge->vessel;
    } else if (target->vessel != NULL) {
        sheet->vessel = vessel_of_name(e, target->vessel);
    }
    check_conditions(e, target);
}

static bool build_sheet(struct elaboration *e, const struct statement *statement, size_t number, struct case_sheet *out)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *kind = take_choice(&reading, BLOCK_SHEET_KIND, "a kind of sheet");
    if (kind == NULL) {
        return false;
    }
    struct sheet_target target = {.sheet = {.kind = kind_of(kind->id), .at = statement->at, .units = e->units}};
    const struct item *title = take_item(&reading, ITEM_TEXT);
    target.sheet.title = title == NULL ? NULL : title->text;
    if (!finish_items(&reading) || !require_block(e, statement)) {
        return false;
    }
    const size_t before = trouble_so_far(e);
    const char *group = arena_format(e->arena, "sheet %zu %s", number, kind->word);
    read_block(e, &SHEETS[target.sheet.kind], group, statement, &target);
    mark_file_used(e, statement->at);
    if (trouble_so_far(e) == before) {
        complete_sheet(e, &target);
    } else {
        check_names(e, &target);
    }
    *out = target.sheet;
    return trouble_so_far(e) == before;
}

void build_sheets(struct elaboration *e)
{
    struct case_sheet *sheets = arena_alloc(e->arena, e->sheets.count + 1, sizeof *sheets);
    for (size_t i = 0; i < e->sheets.count; i++) {
        build_sheet(e, e->sheets.items[i], i + 1, &sheets[i]);
    }
    e->tree->sheets = sheets;
    e->tree->sheet_count = e->sheets.count;
}
