/* Reading values: dimension, scale (gauge, absolute, point, difference) and what nature or a clause allows. */
#include "case/case_internal.h"

#include <math.h>
#include <string.h>

/* Upper ends are far beyond any cylinder: they catch slipped units and keep absurd numbers out of the solvers. */
const struct quantity_form FORM_TEMPERATURE = {
    .measure = MEASURE_TEMPERATURE, .reading = READ_TEMPERATURE, .least = 0.0, .is_least_open = true, .most = 5000.0};
const struct quantity_form FORM_PRESSURE = {
    .measure = MEASURE_PRESSURE, .reading = READ_ABSOLUTE, .least = 0.0, .is_least_open = true, .most = 1e10};
const struct quantity_form FORM_RATING = {
    .measure = MEASURE_PRESSURE, .reading = READ_RATING, .least = 0.0, .is_least_open = true, .most = 1e9};
const struct quantity_form FORM_DENSITY = {
    .measure = MEASURE_DENSITY, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e5};
const struct quantity_form FORM_MOLAR_DENSITY = {
    .measure = MEASURE_MOLAR_DENSITY, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e6};
const struct quantity_form FORM_VOLUME = {
    .measure = MEASURE_VOLUME, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e7};
const struct quantity_form FORM_MASS = {
    .measure = MEASURE_MASS, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e7};
const struct quantity_form FORM_AMOUNT = {
    .measure = MEASURE_AMOUNT, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e9};
/* No liquefied gas reaches five times the density of water. */
const struct quantity_form FORM_FILLING_RATIO = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 5.0};
const struct quantity_form FORM_FRACTION = {
    .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = 0.0, .most = 1.0};

/* The most general reading of each measure. Numbers may be anything; a word with a narrower range says so in its row.
 */
static const struct quantity_form FORM_NUMBER = {.reading = READ_NUMBER, .least = -1e9, .most = 1e9};
static const struct quantity_form FORM_MOLAR_MASS = {.measure = MEASURE_MOLAR_MASS,
                                                     .reading = READ_NUMBER,
                                                     .least = 0.001,
                                                     .most = 1.0,
                                                     .because = "atomic hydrogen has 1.008 g/mol"};
/* Of either sign: a shift of an equation's volume. No covolume is larger than a litre for each mole. */
static const struct quantity_form FORM_MOLAR_VOLUME = {
    .measure = MEASURE_MOLAR_VOLUME, .reading = READ_NUMBER, .least = -1e-3, .most = 1e-3};
static const struct quantity_form FORM_MOLAR_HEAT = {.measure = MEASURE_MOLAR_HEAT,
                                                     .reading = READ_NUMBER,
                                                     .least = 8.3,
                                                     .most = 8.33,
                                                     .because = "a molar gas constant"};
static const struct quantity_form FORM_DIPOLE = {
    .measure = MEASURE_DIPOLE, .reading = READ_NUMBER, .least = 0.0, .most = 1e-28};

static const struct quantity_form FORM_TIME = {
    .measure = MEASURE_TIME, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e9};
static const struct quantity_form FORM_MASS_FLOW = {
    .measure = MEASURE_MASS_FLOW, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e4};
static const struct quantity_form FORM_HEAT_CAPACITY = {
    .measure = MEASURE_HEAT_CAPACITY, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e10};
static const struct quantity_form FORM_CONDUCTANCE = {
    .measure = MEASURE_CONDUCTANCE, .reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e7};

const struct quantity_form *form_of_measure(enum measure measure)
{
    switch (measure) {
    case MEASURE_PRESSURE:
        return &FORM_PRESSURE;
    case MEASURE_GAUGE:
        return &FORM_RATING;
    case MEASURE_TEMPERATURE:
        return &FORM_TEMPERATURE;
    case MEASURE_VOLUME:
        return &FORM_VOLUME;
    case MEASURE_MASS:
        return &FORM_MASS;
    case MEASURE_AMOUNT:
        return &FORM_AMOUNT;
    case MEASURE_DENSITY:
        return &FORM_DENSITY;
    case MEASURE_MOLAR_DENSITY:
        return &FORM_MOLAR_DENSITY;
    case MEASURE_MOLAR_VOLUME:
        return &FORM_MOLAR_VOLUME;
    case MEASURE_MOLAR_MASS:
        return &FORM_MOLAR_MASS;
    case MEASURE_MOLAR_HEAT:
        return &FORM_MOLAR_HEAT;
    case MEASURE_DIPOLE:
        return &FORM_DIPOLE;
    case MEASURE_TIME:
        return &FORM_TIME;
    case MEASURE_MASS_FLOW:
        return &FORM_MASS_FLOW;
    case MEASURE_HEAT_CAPACITY:
        return &FORM_HEAT_CAPACITY;
    case MEASURE_CONDUCTANCE:
        return &FORM_CONDUCTANCE;
    case MEASURE_NONE:
    case MEASURE_NUMBER:
    case MEASURES:
        break;
    }
    return &FORM_NUMBER;
}

/* True when the expression leans on a let that was reported already: a second message would only repeat it. */
static bool leans_on_failed_let(const struct elaboration *e, const struct expression *expression)
{
    for (; expression != NULL; expression = expression->left) {
        if (expression->kind == EXPRESSION_NAME) {
            const struct named *let = names_find(&e->tables[NAMES_LET], expression->name);
            return let != NULL && let->state == FAILED;
        }
        if (expression->right != NULL && leans_on_failed_let(e, expression->right)) {
            return true;
        }
    }
    return false;
}

bool value_of(struct elaboration *e, const struct expression *expression, struct value *value)
{
    if (leans_on_failed_let(e, expression)) {
        e->silent++;
        return false;
    }
    struct name_scope scope = e->scope;
    if (e->out->errors > DIAGNOSTICS_MOST) {
        scope.known_count = 0; /* nobody will read a suggestion */
    }
    return expression_value(expression, &scope, e->out, value);
}

static const char *quoted(struct elaboration *e, const struct expression *expression)
{
    return written_at(e, expression->at, QUOTED_MOST);
}

/* A unit that a writer might use; NULL for plain numbers. */
static const char *usual_unit(const struct quantity_form *form)
{
    static const char *const units[MEASURES] = {
        [MEASURE_PRESSURE] = "bara",
        [MEASURE_GAUGE] = "barg",
        [MEASURE_TEMPERATURE] = "degC",
        [MEASURE_VOLUME] = "L",
        [MEASURE_MASS] = "kg",
        [MEASURE_AMOUNT] = "mol",
        [MEASURE_DENSITY] = "kg/L",
        [MEASURE_MOLAR_DENSITY] = "mol/L",
        [MEASURE_MOLAR_VOLUME] = "cm3/mol",
        [MEASURE_MOLAR_MASS] = "g/mol",
        [MEASURE_MOLAR_HEAT] = "J/mol/K",
        [MEASURE_DIPOLE] = "D",
        [MEASURE_TIME] = "min",
        [MEASURE_MASS_FLOW] = "kg/h",
        [MEASURE_HEAT_CAPACITY] = "kJ/K",
        [MEASURE_CONDUCTANCE] = "W/K",
    };
    if (form->reading == READ_RATING) {
        return units[MEASURE_GAUGE];
    }
    if (form->reading == READ_DIFFERENCE && form->measure == MEASURE_TEMPERATURE) {
        return "K";
    }
    return form->reading == READ_DIFFERENCE && form->measure == MEASURE_PRESSURE ? "bar" : units[form->measure];
}

static bool report_dimension(struct elaboration *e, const struct quantity_form *form, const char *name,
                             const struct expression *expression, const struct value *value)
{
    const char *found = dimension_equal(value->dimension, DIMENSION_NONE) ? "a plain number"
                                                                          : dimension_name(value->dimension, e->arena);
    const char *expected = dimension_equal(measure_dimension(form->measure), DIMENSION_NONE)
                               ? "a plain number"
                               : dimension_name(measure_dimension(form->measure), e->arena);
    struct diagnostic *said = diagnose(e->out, CODE_E208, expression->at, "%s: expected %s, found %s: '%s'", name,
                                       expected, found, quoted(e, expression));
    const char *unit = usual_unit(form);
    if (unit != NULL) {
        diagnostic_hint(e->out, said, "write it in %s, say", unit);
    }
    return false;
}

/* A rating in a unit that does not say gauge: both readings, so that the writer can choose. */
static bool report_rating(struct elaboration *e, const char *name, const struct expression *expression, double si)
{
    struct diagnostic *said = diagnose(
        e->out, CODE_E210, expression->at,
        "%s must be a gauge pressure: '%s' could mean %.7g barg (read as gauge) or %.7g barg (read as absolute)", name,
        quoted(e, expression), si / 1e5, (si - STANDARD_ATMOSPHERE) / 1e5);
    diagnostic_hint(e->out, said, "ratings are stamped as gauge: write it in barg, psig, kPag or MPag");
    return false;
}

static bool report_point(struct elaboration *e, const char *name, const struct expression *expression,
                         enum value_sort sort)
{
    const bool is_temperature = sort == SORT_TEMPERATURE_POINT;
    struct diagnostic *said = diagnose(
        e->out, CODE_E211, expression->at, "%s: a difference is needed, '%s' is %s", name, quoted(e, expression),
        is_temperature ? "a point of a temperature scale" : "a gauge or absolute pressure");
    diagnostic_hint(e->out, said,
                    is_temperature ? "write the difference in K, as in 'by 5 K'"
                                   : "write the difference in a plain unit, as in '5 bar'");
    return false;
}

static const char *range_text(struct elaboration *e, const struct quantity_form *form)
{
    const char *unit = base_unit(measure_dimension(form->measure), e->arena);
    const char *gap = *unit == '\0' ? "" : " ";
    const char *gauge = form->reading == READ_RATING ? " gauge" : "";
    return arena_format(e->arena, "%s %s%s%s%s, at most %s%s%s%s", form->is_least_open ? "above" : "at least",
                        si_number(e->arena, form->least), gap, unit, gauge, si_number(e->arena, form->most), gap, unit,
                        gauge);
}

bool check_range(struct elaboration *e, const struct quantity_form *form, const char *name,
                 const struct expression *expression, double si)
{
    const bool is_above = form->is_least_open ? si > form->least : si >= form->least;
    if (is_above && si <= form->most) {
        return true;
    }
    const char *unit = base_unit(measure_dimension(form->measure), e->arena);
    const bool is_bare = *unit == '\0' && expression->kind == EXPRESSION_NUMBER && expression->unit == NULL;
    const char *in_si =
        is_bare ? ""
                : arena_format(e->arena, ", which is %s%s%s%s", si_number(e->arena, si), *unit == '\0' ? "" : " ", unit,
                               form->reading == READ_RATING     ? " gauge"
                               : form->reading == READ_ABSOLUTE ? " abs"
                                                                : "");
    struct diagnostic *said =
        diagnose(e->out, CODE_E209, expression->at, "%s cannot be '%s'%s", name, quoted(e, expression), in_si);
    diagnostic_hint(e->out, said, "allowed: %s%s%s%s", range_text(e, form), form->because == NULL ? "" : " (",
                    form->because == NULL ? "" : form->because, form->because == NULL ? "" : ")");
    return false;
}

/* The value on the scale that the form reads. False after a message. */
static bool put_on_scale(struct elaboration *e, const struct quantity_form *form, const char *name,
                         const struct expression *expression, const struct value *value, double *si)
{
    *si = value->si;
    switch (form->reading) {
    case READ_NUMBER:
    case READ_TEMPERATURE:
        return true;
    case READ_DIFFERENCE:
        return value->sort == SORT_PLAIN || report_point(e, name, expression, value->sort);
    case READ_ABSOLUTE:
        *si += value->sort == SORT_GAUGE ? e->tree->ambient_pressure : 0.0;
        return true;
    case READ_RATING:
        return value->sort == SORT_GAUGE || report_rating(e, name, expression, value->si);
    }
    return false;
}

bool convert_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                   const struct expression *expression, const struct value *value, double *si)
{
    if (!dimension_equal(value->dimension, measure_dimension(form->measure))) {
        return report_dimension(e, form, name, expression, value);
    }
    double converted;
    if (!put_on_scale(e, form, name, expression, value, &converted) ||
        !check_range(e, form, name, expression, converted)) {
        return false;
    }
    *si = converted;
    return true;
}

bool read_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                const struct expression *expression, double *si)
{
    struct value value;
    return value_of(e, expression, &value) && convert_value(e, form, name, expression, &value, si);
}

bool read_air_pressure(struct elaboration *e, const struct expression *expression, const char *name, double *pressure)
{
    static const struct quantity_form form = {.measure = MEASURE_PRESSURE,
                                              .reading = READ_ABSOLUTE,
                                              .least = 3e4,
                                              .most = 1.2e5,
                                              .because = "an air pressure"};
    struct value value;
    if (!value_of(e, expression, &value)) {
        return false;
    }
    if (value.sort == SORT_GAUGE) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E211, expression->at,
                     "%s: '%s' is a gauge pressure, but the zero of gauges is absolute", name, quoted(e, expression));
        diagnostic_hint(e->out, said, "as in: %s 1 bara", name);
        return false;
    }
    return convert_value(e, &form, name, expression, &value, pressure);
}

struct shown_unit unit_written(struct elaboration *e, const struct expression *expression, struct shown_unit fallback)
{
    for (; expression != NULL; expression = expression->left) {
        struct unit unit;
        if (expression->unit != NULL && unit_find(expression->unit, strlen(expression->unit), &unit)) {
            return unit.shown;
        }
        if (expression->kind == EXPRESSION_NAME) {
            const struct named *named = names_find(&e->tables[NAMES_LET], expression->name);
            const struct let_value *let = named == NULL ? NULL : named->built;
            return let == NULL || let->unit.symbol == NULL ? fallback : let->unit;
        }
    }
    return fallback;
}

struct origin origin_of(struct elaboration *e, struct location at)
{
    return (struct origin){
        .kind = at.file != NULL && at.file->is_library ? ORIGIN_LIBRARY : ORIGIN_DECK,
        .at = at,
        .written = written_at(e, at, WRITTEN_MOST),
    };
}

bool take_uncertainty(struct reading *reading, const struct quantity_form *form, const char *name, double value,
                      double *uncertainty, struct location *last)
{
    const struct item *item = take_item(reading, ITEM_PLUS_MINUS);
    if (item == NULL) {
        return true;
    }
    *last = item->at;
    const struct item *next = reading->item;
    const bool is_relative = take_word(reading, vocabulary_rows()[WORD_SPREAD_RELATIVE].word);
    if (is_relative) {
        *last = next->at;
    }
    const struct quantity_form spread = {
        .measure = is_relative ? MEASURE_NUMBER : form->measure,
        .reading = READ_DIFFERENCE,
        .least = 0.0,
        .most = is_relative ? 1.0 : form->most,
    };
    const char *of = arena_format(reading->e->arena, "the uncertainty of %s", name);
    double spread_si;
    if (!read_value(reading->e, &spread, of, item->value, &spread_si)) {
        return false;
    }
    *uncertainty = is_relative ? spread_si * fabs(value) : spread_si;
    return true;
}

bool take_reference(struct reading *reading, const struct case_source **source)
{
    *source = NULL;
    const struct item *item = take_item(reading, ITEM_REF);
    if (item == NULL) {
        return true;
    }
    *source = source_of_name(reading->e, item->value);
    return *source != NULL;
}

bool take_quantity(struct reading *reading, const struct quantity_form *form, const char *name, struct quantity *into)
{
    const struct item *item = take_item(reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(reading, "a value");
        return false;
    }
    struct quantity found = {.given = true};
    struct location last = item->at;
    const struct case_source *source = NULL;
    /* All three are read even when one fails, so that one run shows every mistake of the line. */
    const bool is_value = read_value(reading->e, form, name, item->value, &found.value);
    const bool is_spread = take_uncertainty(reading, form, name, found.value, &found.uncertainty, &last);
    const bool is_source = take_reference(reading, &source);
    if (!is_value || !is_spread || !is_source) {
        return false;
    }
    found.origin = origin_of(reading->e, location_span(item->at, last));
    found.origin.source = source;
    if (!settle_value(reading->e, form, name, item->value, found.uncertainty, &found.origin, &found.value)) {
        return false;
    }
    if (into->given) {
        struct quantity *before = arena_alloc(reading->e->arena, 1, sizeof *before);
        *before = *into;
        found.overridden = before;
    }
    *into = found;
    if (is_input(&found.origin)) { /* the library's many values are not worth their text */
        add_input(reading->e, name, si_text(reading->e, form, found.value), &found.origin);
    }
    return true;
}
