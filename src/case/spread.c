/* Uncertain values: what a deck writes with `+/-`, and the same case with such values shifted. */
#include "case/case_internal.h"

#include <math.h>
#include <string.h>

bool case_is_same_place(struct location a, struct location b)
{
    return a.file == b.file && a.begin == b.begin;
}

static double shift_at(const struct elaboration *e, struct location at)
{
    double sum = 0.0;
    for (size_t i = 0; i < e->shift_count; i++) {
        sum += case_is_same_place(e->shifts[i].at, at) ? e->shifts[i].by : 0.0;
    }
    return sum;
}

/* Pressures are kept absolute, or as gauge ratings: the zero of the unit follows what is kept. */
static struct shown_unit value_unit(struct elaboration *e, const struct quantity_form *form,
                                    const struct expression *expression, const char *si_unit)
{
    struct shown_unit unit = unit_written(e, expression, (struct shown_unit){si_unit, 1.0, 0.0});
    struct value value;
    if (form->reading == READ_RATING) {
        unit.offset = 0.0;
    } else if (form->reading == READ_ABSOLUTE && value_of(e, expression, &value)) {
        unit.offset = value.sort == SORT_GAUGE ? e->tree->ambient_pressure : 0.0;
    }
    return unit;
}

static bool is_taken_down(const struct elaboration *e, struct location at)
{
    for (size_t i = 0; i < e->spreads.count; i++) {
        if (case_is_same_place(e->spreads.items[i].at, at)) {
            return true;
        }
    }
    return false;
}

/* Whether the value at `at` is to be taken down as uncertain: once, and only where sheets are read for. */
static bool is_news(const struct elaboration *e, double uncertainty, struct location at)
{
    return uncertainty > 0.0 && !e->is_checking && e->shift_count == 0 && !is_taken_down(e, at);
}

static void take_down(struct elaboration *e, const struct case_spread *spread)
{
    struct spread_list *list = &e->spreads;
    struct case_spread *added = ARENA_APPEND(e->arena, list);
    *added = *spread;
    added->group = e->group;
}

static const char *si_unit_of(struct elaboration *e, struct dimension dimension)
{
    const char *base = base_unit(dimension, e->arena);
    return *base == '\0' ? "1" : base;
}

bool settle_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                  const struct expression *expression, double uncertainty, const struct origin *origin, double *si)
{
    const double shift = shift_at(e, expression->at);
    if (fabs(shift) > 0.0) {
        *si += shift;
        return check_range(e, form, name, expression, *si);
    }
    if (is_news(e, uncertainty, expression->at)) {
        const char *si_unit = si_unit_of(e, measure_dimension(form->measure));
        take_down(e, &(struct case_spread){
                         .name = name,
                         .value = *si,
                         .uncertainty = uncertainty,
                         .unit = value_unit(e, form, expression, si_unit),
                         .si_unit = si_unit,
                         .at = expression->at,
                         .origin = *origin,
                     });
    }
    return true;
}

/* ---- values with names of their own ------------------------------------------------------------------------------ */

static bool report_spread(struct elaboration *e, const char *name, const struct expression *spread,
                          const struct value *value)
{
    struct diagnostic *said =
        diagnose(e->out, CODE_E208, spread->at, "the uncertainty of %s: expected a difference, %s, 0 or more", name,
                 dimension_name(value->dimension, e->arena));
    diagnostic_hint(e->out, said, "as in: let hall = 18 degC +/- 2 K");
    return false;
}

static bool take_let_uncertainty(struct reading *reading, const char *name, const struct value *value,
                                 double *uncertainty, struct location *last)
{
    const struct item *item = take_item(reading, ITEM_PLUS_MINUS);
    if (item == NULL) {
        return true;
    }
    *last = item->at;
    const struct item *next = reading->item;
    const bool is_relative = take_word(reading, vocabulary_rows()[WORD_SPREAD_RELATIVE].word);
    struct value spread;
    if (!value_of(reading->e, item->value, &spread)) {
        return false;
    }
    *last = is_relative ? next->at : *last;
    const struct dimension expected = is_relative ? DIMENSION_NONE : value->dimension;
    if (!dimension_equal(spread.dimension, expected) || spread.sort != SORT_PLAIN || !(spread.si >= 0.0)) {
        return report_spread(reading->e, name, item->value, value);
    }
    *uncertainty = is_relative ? spread.si * fabs(value->si) : spread.si;
    return true;
}

bool settle_let(struct reading *reading, const char *name, const struct expression *expression, struct let_value *let,
                struct location *last)
{
    struct elaboration *e = reading->e;
    double uncertainty = 0.0;
    if (!take_let_uncertainty(reading, name, &let->value, &uncertainty, last)) {
        return false;
    }
    if (is_news(e, uncertainty, expression->at)) {
        const char *si_unit = si_unit_of(e, let->value.dimension);
        struct shown_unit unit = let->unit.symbol == NULL ? (struct shown_unit){si_unit, 1.0, 0.0} : let->unit;
        unit.offset = let->value.sort == SORT_GAUGE ? 0.0 : unit.offset; /* kept as gauge */
        take_down(e, &(struct case_spread){
                         .name = name,
                         .value = let->value.si,
                         .uncertainty = uncertainty,
                         .unit = unit,
                         .si_unit = si_unit,
                         .at = expression->at,
                         .origin = origin_of(e, location_span(expression->at, *last)),
                     });
    }
    let->value.si += shift_at(e, expression->at);
    return true;
}

/* ---- random draws ------------------------------------------------------------------------------------------------ */

enum { DRAWS_LEAST = 100, DRAWS_MOST = 2000000, USUAL_SEED = 1 };

/* Whole numbers up to here are doubles of their own. */
#define SEED_MOST 9007199254740992.0

static const struct quantity_form FORM_DRAWS = {
    .reading = READ_NUMBER, .least = DRAWS_LEAST, .most = DRAWS_MOST, .because = "enough to tell an interval by"};
static const struct quantity_form FORM_SEED = {.reading = READ_NUMBER, .least = 0.0, .most = SEED_MOST};

static bool take_whole(struct reading *reading, const char *word, const struct quantity_form *form, double *number)
{
    if (!take_word(reading, word)) {
        report_missing(reading, arena_format(reading->e->arena, "'%s' and a number", word));
        return false;
    }
    const struct item *item = take_item(reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(reading, arena_format(reading->e->arena, "the number after '%s'", word));
        return false;
    }
    if (!read_value(reading->e, form, word, item->value, number)) {
        return false;
    }
    if (floor(*number) < *number) {
        struct diagnostic *said = diagnose(reading->e->out, CODE_E209, item->at, "'%s' takes a whole number", word);
        diagnostic_hint(reading->e->out, said, "as in: monte-carlo draws 2000, seed 7");
        return false;
    }
    return true;
}

void read_monte_carlo(struct elaboration *e, const struct statement *statement, size_t *draws, uint64_t *seed)
{
    const char *of_draws = vocabulary_rows()[WORD_DRAWN_DRAWS].word, *of_seed = vocabulary_rows()[WORD_DRAWN_SEED].word;
    struct reading reading = read_items(e, statement);
    double count, start = USUAL_SEED;
    if (!forbid_block(e, statement) || !take_whole(&reading, of_draws, &FORM_DRAWS, &count) ||
        (reading.item != NULL && !take_whole(&reading, of_seed, &FORM_SEED, &start)) || !finish_items(&reading)) {
        return;
    }
    *draws = (size_t)count;
    *seed = (uint64_t)start;
}

/* ---- what a sheet can depend on ---------------------------------------------------------------------------------- */

/* The name behind "vessel " of "vessel fifty"; NULL where the group is none of that kind. */
static const char *name_in_group(const char *group, const char *kind)
{
    const size_t length = strlen(kind);
    return group != NULL && strncmp(group, kind, length) == 0 ? group + length : NULL;
}

/* `name` may go on behind a comma: "argon, peng-robinson-twu". */
static bool has_component(const struct case_fluid *fluid, const char *name)
{
    for (size_t i = 0; i < fluid->count; i++) {
        const size_t length = strlen(fluid->components[i]->name);
        if (strncmp(fluid->components[i]->name, name, length) == 0 && (name[length] == '\0' || name[length] == ',')) {
            return true;
        }
    }
    return false;
}

/* Of the kinds of sheet that have one fluid and at most one vessel and one charge. */
static bool has_one_fluid(enum sheet_kind kind)
{
    return kind == SHEET_PERMISSIBLE_CHARGE || kind == SHEET_SETTLED_PRESSURE || kind == SHEET_SATURATION ||
           kind == SHEET_FUGACITY || kind == SHEET_DRAW_DOWN;
}

/* A recipe makes up for what is known of its parents; what is not known of them, and the masses found, are carried to
 * the composition by the gravimetric equation. Everything else moves masses and pressures. */
static bool recipe_may_depend(const struct case_sheet *sheet, const struct case_spread *spread)
{
    const char *vessel = name_in_group(spread->group, "vessel ");
    const char *charge = name_in_group(spread->group, "charge ");
    if (vessel != NULL) {
        return sheet->vessel != NULL && strcmp(sheet->vessel->name, vessel) == 0;
    }
    if (charge != NULL) {
        return sheet->charge != NULL && strcmp(sheet->charge->name, charge) == 0;
    }
    return name_in_group(spread->group, "sheet ") != NULL && strncmp(spread->name, "weighed", 7) != 0;
}

bool case_sheet_may_depend(const struct case_sheet *sheet, const struct case_spread *spread)
{
    if (sheet->kind == SHEET_PREPARATION) {
        return recipe_may_depend(sheet, spread);
    }
    if (sheet->fluid == NULL || !has_one_fluid(sheet->kind)) {
        return true;
    }
    const char *vessel = name_in_group(spread->group, "vessel ");
    const char *charge = name_in_group(spread->group, "charge ");
    const char *mixture = name_in_group(spread->group, "mixture ");
    const char *component = name_in_group(spread->group, "component ");
    if (vessel != NULL) {
        return sheet->vessel != NULL && strcmp(sheet->vessel->name, vessel) == 0;
    }
    if (charge != NULL) {
        return sheet->charge != NULL && strcmp(sheet->charge->name, charge) == 0;
    }
    if (mixture != NULL) {
        return strcmp(sheet->fluid->name, mixture) == 0;
    }
    return component == NULL || has_component(sheet->fluid, component);
}
