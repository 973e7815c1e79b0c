/* The units results are shown in: one for each quantity, the trade's usual ones where the deck names none. */
#include "case/case_internal.h"

#include <string.h>

static struct shown_unit shown(const char *symbol)
{
    struct unit unit = {.shown = {symbol, 1.0, 0.0}};
    unit_find(symbol, strlen(symbol), &unit);
    return unit.shown;
}

/* A gauge unit is shown of absolute values: its zero is the standard atmosphere. */
static struct shown_unit as_gauge(struct shown_unit unit)
{
    unit.offset = STANDARD_ATMOSPHERE;
    return unit;
}

struct display_units default_units(void)
{
    return (struct display_units){
        .temperature = shown("degC"),
        .pressure = shown("bara"),
        .gauge = as_gauge(shown("barg")),
        .density = shown("kg/L"),
        .mass = shown("kg"),
        .gas_volume = shown("m3"),
        .volume = shown("L"),
    };
}

/* From this size on a unit of volume is one for gas, below it one for vessels. */
static const double GAS_VOLUME_LEAST = 0.02;

/* Where a unit goes, or NULL when no result is shown in such a unit. */
static struct shown_unit *place_of(const struct unit *unit, struct display_units *units)
{
    if (dimension_equal(unit->dimension, DIMENSION_PRESSURE)) {
        return unit->sort == SORT_GAUGE ? &units->gauge : &units->pressure;
    }
    if (dimension_equal(unit->dimension, DIMENSION_VOLUME)) {
        return unit->shown.factor < GAS_VOLUME_LEAST ? &units->volume : &units->gas_volume;
    }
    return dimension_equal(unit->dimension, DIMENSION_TEMPERATURE) ? &units->temperature
           : dimension_equal(unit->dimension, DIMENSION_DENSITY)   ? &units->density
           : dimension_equal(unit->dimension, DIMENSION_MASS)      ? &units->mass
                                                                   : NULL;
}

/* The unit an item names: a word, `kg/L` or a quoted text. */
static bool unit_of_item(struct elaboration *e, const struct item *item, struct unit *unit)
{
    const char *symbol = item->kind == ITEM_TEXT ? item->text : written_at(e, item->at, QUOTED_MOST);
    if (unit_find(symbol, strlen(symbol), unit)) {
        return true;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E213, item->at, "'%s' is not known as a unit", shortened(e, symbol));
    enum { KNOWN_MOST = 200 };
    const char *known[KNOWN_MOST];
    size_t count;
    const struct unit *rows = unit_rows(&count);
    for (size_t i = 0; i < count && i < KNOWN_MOST; i++) {
        known[i] = rows[i].shown.symbol;
    }
    suggest(e, said, symbol, known, count < KNOWN_MOST ? count : KNOWN_MOST);
    return false;
}

static void put_unit(struct elaboration *e, const struct item *item, const struct unit *unit,
                     struct display_units *units, struct display_units *named)
{
    struct shown_unit *place = place_of(unit, units);
    if (place == NULL) {
        diagnose(e->out, CODE_E213, item->at, "no result is shown in '%s'", written_at(e, item->at, QUOTED_MOST));
        return;
    }
    struct shown_unit *before = place_of(unit, named);
    if (before->symbol != NULL) {
        diagnose(e->out, CODE_E207, item->at, "a second unit for what is shown in '%s'", before->symbol);
        return;
    }
    *place = unit->sort == SORT_GAUGE ? as_gauge(unit->shown) : unit->shown;
    *before = *place;
}

void read_units(struct elaboration *e, const struct statement *statement, struct display_units *units)
{
    struct reading reading = read_items(e, statement);
    struct display_units named = {.temperature = {NULL, 0.0, 0.0}};
    if (!forbid_block(e, statement)) {
        return;
    }
    do {
        const struct item *item = reading.item;
        if (take_item(&reading, ITEM_EXPRESSION) == NULL && take_item(&reading, ITEM_TEXT) == NULL) {
            report_missing(&reading, "a unit");
            return;
        }
        struct unit unit;
        if (unit_of_item(e, item, &unit)) {
            put_unit(e, item, &unit, units, &named);
        }
    } while (reading.item != NULL);
}
