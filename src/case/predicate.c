/* Predicates: `[at T | from T to T] quantity relation bound`, `one phase`, `no liquid`, `no solid`, in any order of
 * parts. */
#include "case/case_internal.h"

/* A predicate while its parts are found. */
struct parts {
    const struct expression *at, *from, *to;
    const struct expression *gauge_zero;
    const struct item *condition; /* ITEM_RELATION, ITEM_ONE or ITEM_NO */
    const struct vocabulary_row *quantity;
    bool unless_listed;
};

static bool report_second(struct reading *reading, const struct item *item, const char *what)
{
    diagnose(reading->e->out, CODE_E207, item->at, "a requirement has one %s, this is a second", what);
    return false;
}

static bool take_range(struct reading *reading, struct parts *parts)
{
    const struct item *item = reading->item;
    if (parts->at != NULL || parts->from != NULL) {
        return report_second(reading, item, "temperature or range");
    }
    const struct item *at = take_item(reading, ITEM_AT);
    if (at != NULL) {
        parts->at = at->value;
        return true;
    }
    const struct item *from = take_item(reading, ITEM_FROM);
    const struct item *to = take_item(reading, ITEM_TO);
    if (from == NULL || to == NULL) {
        report_missing(reading, "a range, 'from' a temperature 'to' a temperature,");
        return false;
    }
    parts->from = from->value;
    parts->to = to->value;
    return true;
}

static bool take_condition(struct reading *reading, struct parts *parts)
{
    const struct item *item = reading->item;
    if (parts->condition != NULL) {
        return report_second(reading, item, "condition");
    }
    if (item->kind == ITEM_EXPRESSION) {
        parts->quantity = take_choice(reading, BLOCK_QUANTITY, "a quantity");
        if (parts->quantity == NULL) {
            return false;
        }
        item = reading->item;
        if (item == NULL || item->kind != ITEM_RELATION) {
            report_missing(reading, "a comparison, as in '<= test-pressure',");
            return false;
        }
    }
    parts->condition = item;
    reading->item = item->next;
    return true;
}

static bool take_gauge_zero(struct reading *reading, struct parts *parts)
{
    const struct item *item = take_item(reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(reading, "an absolute pressure");
        return false;
    }
    parts->gauge_zero = item->value;
    return true;
}

static bool take_part(struct reading *reading, struct parts *parts)
{
    if (reading->item->kind == ITEM_AT || reading->item->kind == ITEM_FROM) {
        return take_range(reading, parts);
    }
    if (take_word(reading, "gauge-zero")) {
        return take_gauge_zero(reading, parts);
    }
    if (take_word(reading, "unless")) {
        parts->unless_listed = take_word(reading, "listed");
        if (!parts->unless_listed) {
            report_missing(reading, "'listed'");
        }
        return parts->unless_listed;
    }
    const enum item_kind kind = reading->item->kind;
    const bool is_name = kind == ITEM_EXPRESSION && reading->item->value->kind == EXPRESSION_NAME;
    if (kind == ITEM_ONE || kind == ITEM_NO || (is_name && parts->condition == NULL)) {
        return take_condition(reading, parts);
    }
    return finish_items(reading);
}

/* The parts of the whole statement; `is_bare`: its own word is the quantity. */
static bool take_parts(struct elaboration *e, const struct statement *statement, bool is_bare, struct parts *parts)
{
    struct reading reading = read_items(e, statement);
    if (is_bare) {
        parts->quantity = vocabulary_find(BLOCK_QUANTITY, statement->word);
        parts->condition = take_item(&reading, ITEM_RELATION);
        if (parts->condition == NULL) {
            report_missing(&reading, "a comparison, as in '<= 0.75',");
            return false;
        }
    }
    while (reading.item != NULL) {
        if (!take_part(&reading, parts)) {
            return false;
        }
    }
    if (parts->condition == NULL) {
        report_missing(&reading, "a condition, as in 'pressure <= test-pressure' or 'no liquid',");
        return false;
    }
    return true;
}

static bool settle_temperature(struct elaboration *e, const struct parts *parts, struct predicate *out)
{
    const struct expression *from = parts->at != NULL ? parts->at : parts->from;
    const struct expression *to = parts->at != NULL ? parts->at : parts->to;
    out->has_temperature = from != NULL;
    if (from == NULL) {
        return true;
    }
    const bool is_from = read_value(e, &FORM_TEMPERATURE, "the temperature", from, &out->from);
    const bool is_to = to == from ? is_from : read_value(e, &FORM_TEMPERATURE, "the temperature", to, &out->to);
    if (!is_from || !is_to) {
        return false;
    }
    out->to = to == from ? out->from : out->to;
    out->temperature_unit = unit_written(e, from, default_units().temperature);
    if (out->from > out->to) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E219, location_span(from->at, to->at), "the range runs from %s K down to %s K",
                     si_number(e->arena, out->from), si_number(e->arena, out->to));
        diagnostic_hint(e->out, said, "name the lower temperature first");
        return false;
    }
    return true;
}

static const struct quantity_form *form_of_symbol(enum case_symbol symbol)
{
    switch (symbol) {
    case SYMBOL_DENSITY:
    case SYMBOL_LIQUID_DENSITY:
        return &FORM_DENSITY;
    case SYMBOL_LIQUID_VOLUME:
        return &FORM_FRACTION;
    case SYMBOL_FILLING_RATIO:
        return &FORM_FILLING_RATIO;
    case SYMBOL_PRESSURE:
    case SYMBOL_VAPOUR_PRESSURE:
    case SYMBOL_TEST_PRESSURE:
    case SYMBOL_WORKING_PRESSURE:
    case SYMBOL_SERVICE_PRESSURE:
    case SYMBOLS:
        break;
    }
    return &FORM_PRESSURE;
}

/* Unlike a rating, a gauge bound may lie at or below the air's pressure: no vacuum in the coldest yard, say. */
static const struct quantity_form FORM_GAUGE_BOUND = {.measure = MEASURE_PRESSURE,
                                                      .reading = READ_RATING,
                                                      .least = -STANDARD_ATMOSPHERE,
                                                      .is_least_open = true,
                                                      .most = 1e9};

/* The form a bound is checked by: that of a gauge pressure, or of the quantity itself. */
static const struct quantity_form *form_of_bound(const struct predicate *predicate)
{
    return predicate->bound_is_gauge ? &FORM_GAUGE_BOUND : form_of_symbol(predicate->quantity);
}

/* A bound with symbols has a dimension too, though no value yet. */
static bool check_bound(struct elaboration *e, const struct expression *written, const struct value *kind,
                        const struct predicate *predicate)
{
    const struct quantity_form *form = form_of_bound(predicate);
    const char *name = case_symbol_name(predicate->quantity);
    if (predicate->bound->kind == FORMULA_NUMBER ||
        !dimension_equal(kind->dimension, measure_dimension(form->measure))) {
        double ignored;
        return convert_value(e, form, name, written, kind, &ignored);
    }
    return true;
}

static bool settle_comparison(struct elaboration *e, const struct parts *parts, struct predicate *out)
{
    const struct item *relation = parts->condition;
    if (relation->relation == RELATION_EQUAL) {
        struct diagnostic *said = diagnose(e->out, CODE_E219, relation->at, "a requirement cannot ask for equality");
        diagnostic_hint(e->out, said, "compare with <=, <, >= or >");
        return false;
    }
    struct value kind;
    out->kind = PREDICATE_COMPARE;
    out->relation = relation->relation;
    quantity_of_word(parts->quantity->id, &out->quantity);
    if (!read_formula(e, relation->value, &out->bound, &kind)) {
        return false;
    }
    out->bound_is_gauge = kind.sort == SORT_GAUGE && symbol_is_pressure(out->quantity);
    return check_bound(e, relation->value, &kind, out);
}

static bool settle_phase(struct elaboration *e, const struct item *condition, struct predicate *out)
{
    const bool is_one = condition->kind == ITEM_ONE;
    const struct vocabulary_row *row = choice_of_name(e, is_one ? BLOCK_ONE : BLOCK_NO, condition->value);
    if (row == NULL) {
        return false;
    }
    out->kind = is_one ? PREDICATE_ONE_PHASE : row->id == WORD_NO_LIQUID ? PREDICATE_NO_LIQUID : PREDICATE_NO_SOLID;
    return true;
}

static bool settle_gauge_zero(struct elaboration *e, const struct parts *parts, struct predicate *out)
{
    out->gauge_zero = STANDARD_ATMOSPHERE;
    if (parts->gauge_zero == NULL) {
        return true;
    }
    if (!out->bound_is_gauge) {
        diagnose(e->out, CODE_E219, parts->gauge_zero->at,
                 "gauge-zero has no meaning here: the bound is not a gauge pressure");
        return false;
    }
    out->states_gauge_zero = true;
    return read_air_pressure(e, parts->gauge_zero, "gauge-zero", &out->gauge_zero);
}

/* True when the condition holds at every temperature or none: a ratio and a density of a closed vessel do not change.
 */
bool predicate_needs_temperature(const struct predicate *predicate)
{
    return !(predicate->kind == PREDICATE_COMPARE &&
             (predicate->quantity == SYMBOL_FILLING_RATIO || predicate->quantity == SYMBOL_DENSITY) &&
             !formula_mentions(predicate->bound, SYMBOL_LIQUID_DENSITY));
}

void report_no_temperature(struct elaboration *e, const struct predicate *predicate)
{
    struct diagnostic *said = diagnose(e->out, CODE_E203, predicate->at, "the condition names no temperature");
    diagnostic_hint(e->out, said, "begin with 'at 65 degC' or 'from -25 degC to 50 degC'");
}

/* "233.15 K to 338.15 K; 25 101 325 Pa abs", as far as there are numbers; NULL when there are none. */
static const char *numbers_of(struct elaboration *e, const struct predicate *predicate)
{
    struct text text = {.arena = e->arena};
    if (predicate->has_temperature) {
        text_format(&text, "%s", si_text(e, &FORM_TEMPERATURE, predicate->from));
        if (predicate->to > predicate->from) {
            text_format(&text, " to %s", si_text(e, &FORM_TEMPERATURE, predicate->to));
        }
    }
    if (predicate->kind == PREDICATE_COMPARE && predicate->bound->kind == FORMULA_NUMBER) {
        text_format(&text, "%s%s", text.length == 0 ? "" : "; ",
                    si_text(e, form_of_bound(predicate), predicate->bound->number));
    }
    return text.bytes;
}

static void echo_predicate(struct elaboration *e, const struct predicate *predicate, const char *name)
{
    const char *numbers = numbers_of(e, predicate);
    if (numbers != NULL) {
        struct origin origin = origin_of(e, predicate->at);
        origin.written = predicate->written;
        add_input(e, name, numbers, &origin);
    }
}

static struct location place_of(const struct statement *statement, bool is_bare)
{
    return is_bare || statement->items == NULL ? statement->at : location_span(statement->items->at, statement->at);
}

bool read_predicate(struct elaboration *e, const struct statement *statement, bool is_bare, const char *name,
                    struct predicate *out)
{
    struct parts parts = {.at = NULL};
    *out = (struct predicate){.at = place_of(statement, is_bare)};
    if (!forbid_block(e, statement) || !take_parts(e, statement, is_bare, &parts)) {
        return false;
    }
    out->unless_listed = parts.unless_listed;
    out->written = written_at(e, out->at, WRITTEN_MOST);
    const bool is_temperature = settle_temperature(e, &parts, out);
    const bool is_condition = parts.condition->kind == ITEM_RELATION ? settle_comparison(e, &parts, out)
                                                                     : settle_phase(e, parts.condition, out);
    if (!is_temperature || !is_condition || !settle_gauge_zero(e, &parts, out)) {
        return false;
    }
    echo_predicate(e, out, name);
    return true;
}
