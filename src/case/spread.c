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

bool settle_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                  const struct expression *expression, double uncertainty, const struct origin *origin, double *si)
{
    const double shift = shift_at(e, expression->at);
    if (fabs(shift) > 0.0) {
        *si += shift;
        return check_range(e, form, name, expression, *si);
    }
    if (!(uncertainty > 0.0) || e->is_checking || e->shift_count > 0 || is_taken_down(e, expression->at)) {
        return true;
    }
    const char *base = base_unit(measure_dimension(form->measure), e->arena);
    const char *si_unit = *base == '\0' ? "1" : base;
    struct spread_list *list = &e->spreads;
    *ARENA_APPEND(e->arena, list) = (struct case_spread){
        .group = e->group,
        .name = name,
        .value = *si,
        .uncertainty = uncertainty,
        .unit = value_unit(e, form, expression, si_unit),
        .si_unit = si_unit,
        .at = expression->at,
        .origin = *origin,
    };
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
           kind == SHEET_FUGACITY;
}

bool case_sheet_may_depend(const struct case_sheet *sheet, const struct case_spread *spread)
{
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
