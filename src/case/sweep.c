/* Sweeps: `from A to B by STEP`, `from A to B in N steps`, or a list of values. */
#include "case/case_internal.h"

#include <float.h>
#include <math.h>

enum { SWEEP_MOST = 100000 };

/* A sweep while it is read: which quantity, in what form its values are, where they go. */
struct swept {
    const char *name;
    const struct quantity_form *form;
    struct case_sweep sweep;
    double first; /* the first value's place in the grid */
    struct location at;
};

static const struct item *expect(struct reading *reading, enum item_kind kind, const char *what)
{
    const struct item *item = take_item(reading, kind);
    if (item == NULL) {
        report_missing(reading, what);
    }
    return item;
}

static bool report_count(struct elaboration *e, struct location at, double count)
{
    diagnose(e->out, CODE_E222, at, "the sweep has %s values: at most %s are allowed",
             si_number(e->arena, floor(count)), si_number(e->arena, SWEEP_MOST));
    return false;
}

/* Digits that a swept value is taken to have been meant with, and ulps of the largest by which sums may miss them. */
enum { MEANT_DIGITS = 12, MISSED_ULPS = 4 };

/* The number next to the short decimal that `value` misses by rounding only, else `value`: a step of 0.1 is no binary
 * fraction, and so its multiples are not those that anybody would write. Powers of ten up to the 22nd and the integers
 * here are exact, and the one division or product is rounded correctly. */
static double as_meant(double value, double largest)
{
    const double places = MEANT_DIGITS - ceil(log10(largest));
    if (!(fabs(places) <= 22.0)) {
        return value;
    }
    const double power = pow(10.0, fabs(places));
    const double decimal = places < 0.0 ? round(value / power) * power : round(value * power) / power;
    return fabs(decimal - value) <= MISSED_ULPS * DBL_EPSILON * largest ? decimal : value;
}

/* from + i step for i = 0 ... count - 1; the last is `to` exactly where the grid meets it. */
static void lay_grid(struct elaboration *e, struct swept *swept, double from, double to, double step, size_t count,
                     bool meets_end)
{
    double *values = arena_alloc(e->arena, count, sizeof *values);
    values[0] = from;
    for (size_t i = 1; i < count; i++) {
        values[i] = as_meant(from + (double)i * step, fmax(fabs(from), fabs(to)));
    }
    if (meets_end) {
        values[count - 1] = to;
    }
    swept->sweep.values = values;
    swept->sweep.count = count;
}

static bool lay_steps(struct elaboration *e, struct swept *swept, const struct item *by, double from, double to,
                      double step)
{
    if (!(fabs(step) > 0.0) || (to - from) * step < 0.0) {
        struct diagnostic *said = diagnose(e->out, CODE_E221, by->at, "a step of '%s' never leads from %s to %s",
                                           written_at(e, by->value->at, QUOTED_MOST), si_text(e, swept->form, from),
                                           si_text(e, swept->form, to));
        diagnostic_hint(e->out, said,
                        fabs(step) > 0.0 ? "turn the sign of the step, or exchange the ends"
                                         : "give a step other than 0");
        return false;
    }
    /* A grid that misses the end by rounding only still meets it. */
    const double steps = (to - from) / step;
    const double whole = floor(steps + 1e-9 * (1.0 + fabs(steps)));
    if (!(whole < SWEEP_MOST)) {
        return report_count(e, swept->at, whole + 1.0);
    }
    lay_grid(e, swept, from, to, step, (size_t)whole + 1, fabs(steps - whole) <= 1e-9 * (1.0 + fabs(steps)));
    return true;
}

static bool take_step(struct reading *reading, struct swept *swept, double from, double to)
{
    const struct item *by = take_item(reading, ITEM_BY);
    const struct quantity_form form = {.measure = swept->form->measure,
                                       .reading = READ_DIFFERENCE,
                                       .least = -swept->form->most,
                                       .most = swept->form->most};
    double step;
    return read_value(reading->e, &form, "the step of the sweep", by->value, &step) &&
           lay_steps(reading->e, swept, by, from, to, step);
}

static bool take_parts(struct reading *reading, struct swept *swept, double from, double to)
{
    static const struct quantity_form form = {.reading = READ_NUMBER, .least = 1.0, .most = SWEEP_MOST - 1};
    struct elaboration *e = reading->e;
    const struct item *in = expect(reading, ITEM_IN, "'by' and a step, or 'in' and a number of steps,");
    double parts;
    if (in == NULL || !read_value(e, &form, "the number of steps", in->value, &parts)) {
        return false;
    }
    if (!take_word(reading, "steps")) {
        report_missing(reading, "the word 'steps'");
        return false;
    }
    if (floor(parts) < parts) {
        diagnose(e->out, CODE_E221, in->at, "the number of steps must be a whole number");
        return false;
    }
    lay_grid(e, swept, from, to, (to - from) / parts, (size_t)parts + 1, true);
    return true;
}

/* The unit as written; a gauge one counts from the ambient pressure, since swept pressures are kept absolute. */
static void note_unit(struct elaboration *e, const struct expression *written, struct swept *swept)
{
    struct value value;
    swept->sweep.shown = unit_written(e, written, swept->sweep.shown);
    if (value_of(e, written, &value) && value.sort == SORT_GAUGE) {
        swept->sweep.shown.offset = e->tree->ambient_pressure;
    }
}

static bool take_range(struct reading *reading, struct swept *swept)
{
    struct elaboration *e = reading->e;
    const struct item *first = take_item(reading, ITEM_FROM);
    const struct item *last = expect(reading, ITEM_TO, "'to' and the end of the sweep");
    double from;
    double to;
    if (last == NULL) {
        return false;
    }
    const bool is_from = read_value(e, swept->form, swept->name, first->value, &from);
    if (!read_value(e, swept->form, swept->name, last->value, &to) || !is_from) {
        return false;
    }
    note_unit(e, first->value, swept);
    return reading->item != NULL && reading->item->kind == ITEM_BY ? take_step(reading, swept, from, to)
                                                                   : take_parts(reading, swept, from, to);
}

struct number_list {
    double *items;
    size_t count, capacity;
};

static bool take_list(struct reading *reading, struct swept *swept)
{
    struct number_list numbers = {.items = NULL};
    struct elaboration *e = reading->e;
    do {
        const struct item *item = expect(reading, ITEM_EXPRESSION, "a value of the sweep");
        if (item == NULL || !read_value(e, swept->form, swept->name, item->value, ARENA_APPEND(e->arena, &numbers))) {
            return false;
        }
        if (numbers.count == 1) {
            note_unit(e, item->value, swept);
        }
    } while (reading->item != NULL);
    if (numbers.count > SWEEP_MOST) {
        return report_count(e, swept->at, (double)numbers.count);
    }
    swept->sweep.values = numbers.items;
    swept->sweep.count = numbers.count;
    return true;
}

/* A density sweep is per mass or per amount, as its first value is written. */
static bool settle_density(struct elaboration *e, const struct reading *reading, struct swept *swept)
{
    struct value value;
    const struct item *item = reading->item;
    if (item == NULL || item->value == NULL || !value_of(e, item->value, &value)) {
        return item == NULL || item->value == NULL;
    }
    if (dimension_equal(value.dimension, DIMENSION_MOLAR_DENSITY)) {
        swept->form = &FORM_MOLAR_DENSITY;
    }
    swept->sweep.is_mass_density = swept->form == &FORM_DENSITY;
    return true;
}

static bool settle_quantity(struct elaboration *e, enum vocabulary_word word, const struct reading *reading,
                            struct swept *swept)
{
    const struct display_units units = default_units();
    if (word == WORD_SWEPT_TEMPERATURE) {
        swept->form = &FORM_TEMPERATURE;
        swept->sweep.shown = units.temperature;
    } else if (word == WORD_SWEPT_PRESSURE) {
        swept->form = &FORM_PRESSURE;
        swept->sweep.shown = units.pressure;
    } else {
        swept->form = &FORM_DENSITY;
        swept->sweep.shown = units.density;
        if (!settle_density(e, reading, swept)) {
            return false;
        }
    }
    return true;
}

static struct case_sweep *place_of(enum vocabulary_word word, struct case_sweep *temperatures,
                                   struct case_sweep *pressures, struct case_sweep *densities)
{
    return word == WORD_SWEPT_TEMPERATURE ? temperatures : word == WORD_SWEPT_PRESSURE ? pressures : densities;
}

static void echo_sweep(struct elaboration *e, const struct swept *swept)
{
    const struct case_sweep *sweep = &swept->sweep;
    const char *name = arena_format(e->arena, "sweep %s", swept->name);
    const char *first = si_text(e, swept->form, sweep->values[0]);
    add_input(e, name,
              sweep->count == 1 ? first
                                : arena_format(e->arena, "%s to %s, %zu values", first,
                                               si_text(e, swept->form, sweep->values[sweep->count - 1]), sweep->count),
              &sweep->origin);
}

bool read_sweep(struct elaboration *e, const struct statement *statement, struct case_sweep *temperatures,
                struct case_sweep *pressures, struct case_sweep *densities)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *what = take_choice(&reading, BLOCK_SWEPT, "a quantity to sweep");
    if (what == NULL || !forbid_block(e, statement)) {
        return false;
    }
    struct case_sweep *into = place_of(what->id, temperatures, pressures, densities);
    if (into->given) {
        struct diagnostic *said = diagnose(e->out, CODE_E207, statement->word_at, "the %s is swept twice", what->word);
        said->note = "first swept here";
        said->note_at = into->origin.at;
        return false;
    }
    struct swept swept = {.name = what->word, .at = statement->at};
    into->origin = origin_of(e, reading.item == NULL ? statement->at : location_span(reading.item->at, statement->at));
    if (!settle_quantity(e, what->id, &reading, &swept)) {
        return false;
    }
    const bool is_range = reading.item != NULL && reading.item->kind == ITEM_FROM;
    if (!(is_range ? take_range(&reading, &swept) : take_list(&reading, &swept)) || !finish_items(&reading)) {
        return false;
    }
    swept.sweep.given = true;
    swept.sweep.origin = into->origin;
    *into = swept.sweep;
    echo_sweep(e, &swept);
    return true;
}
