/* The settled-pressure sheet: pressure, phases and level of a charge over temperature, the temperatures at which it
 * changes, and what 1 K, 1 % and 1 bar of fill do to it. */
#include "filling/frost_told.h"
#include "filling/charge_facts.h"
#include "filling/classify.h"
#include "filling/contents_table.h"
#include "filling/hand_check.h"
#include "filling/phases_table.h"
#include "filling/requirement.h"
#include "filling/sensitivities.h"
#include "filling/solid_contents.h"
#include "filling/stepwise.h"
#include "filling/sweep.h"

#include <math.h>
#include <string.h>

/* Where no temperatures are asked for, K: the base of settled pressures, that of low-pressure filling, the hot day. */
static const double DEFAULT_TEMPERATURES[] = {288.15, 323.15, 338.15};

struct settled {
    struct sheet_run *run;
    double mass;
    size_t count; /* of temperatures, rising */
    double *temperatures;
    bool has_answers;      /* by the lead method, in every row */
    struct table **tables; /* of each method that answers, lead first */
    struct method_run **methods;
    struct {
        size_t count, capacity;
        const struct contents **items;
    } split; /* the lead's contents of a mixture in two phases or more */
};

static double hottest(const struct settled *settled)
{
    return settled->temperatures[settled->count - 1];
}

/* The coldest temperature asked about, by the sweep or by a requirement. */
static double coldest(const struct settled *settled)
{
    const struct case_sheet *sheet = settled->run->sheet;
    double coldest = settled->temperatures[0];
    for (size_t i = 0; i < sheet->requirement_count; i++) {
        if (sheet->requirements[i].has_temperature) {
            coldest = fmin(coldest, sheet->requirements[i].from);
        }
    }
    return coldest;
}

static void choose_temperatures(struct settled *settled)
{
    const struct case_sheet *sheet = settled->run->sheet;
    const double *from = DEFAULT_TEMPERATURES;
    size_t count = sizeof DEFAULT_TEMPERATURES / sizeof *DEFAULT_TEMPERATURES;
    if (sheet->temperatures.given && sheet->temperatures.count > 0) {
        from = sheet->temperatures.values;
        count = sheet->temperatures.count;
    } else if (sheet->quote_count > 0) {
        from = sheet->quotes;
        count = sheet->quote_count;
    }
    settled->temperatures = arena_alloc(settled->run->arena, count, sizeof *settled->temperatures);
    memcpy(settled->temperatures, from, count * sizeof *from);
    settled->count = sorted_temperatures(settled->temperatures, count);
}

/* ---- tables ------------------------------------------------------------------------------------------------------ */

static void put_contents(void *teller, size_t method, size_t point, const struct swept_contents *found)
{
    struct settled *settled = teller;
    struct sheet_run *run = settled->run;
    const size_t components = run->sheet->fluid->count;
    contents_table_put(run, settled->tables[method], settled->methods[method], settled->temperatures[point],
                       found->answer, &found->contents);
    if (method > 0) {
        return;
    }
    settled->has_answers = settled->has_answers && found->answer == ANSWER_OK;
    if (found->answer == ANSWER_OK && components > 1 && found->contents.phase_count > 1) {
        *ARENA_APPEND(run->arena, &settled->split) = &swept_contents_keep(found, components, run->arena)->contents;
    }
}

/* The lead has a fluid, so that it is the first of those that serve. */
static void add_tables(struct settled *settled)
{
    struct sheet_run *run = settled->run;
    struct contents_sweep sweep = {.run = run,
                                   .mass = settled->mass,
                                   .count = settled->count,
                                   .temperatures = settled->temperatures,
                                   .tell = put_contents,
                                   .teller = settled};
    settled->methods = methods_that_serve(run, &sweep.method_count);
    settled->tables = arena_alloc(run->arena, sweep.method_count, sizeof *settled->tables);
    settled->has_answers = true;
    for (size_t m = 0; m < sweep.method_count; m++) {
        settled->tables[m] = contents_table_begin(run, "settled pressure", settled->methods[m]->name);
        settled->tables[m]->csv = m == 0 ? run->sheet->table_csv : NULL;
    }
    sweep.methods = settled->methods;
    sweep_contents(&sweep);
}

static void add_quotes(const struct settled *settled)
{
    struct sheet_run *run = settled->run;
    const struct case_sheet *sheet = run->sheet;
    if (sheet->quote_count == 0 || !sheet->temperatures.given || run->methods[0].fluid == NULL) {
        return;
    }
    double *quotes = arena_alloc(run->arena, sheet->quote_count, sizeof *quotes);
    memcpy(quotes, sheet->quotes, sheet->quote_count * sizeof *quotes);
    const size_t count = sorted_temperatures(quotes, sheet->quote_count);
    struct table *table = contents_table_begin(run, "quoted pressures", run->methods[0].name);
    for (size_t i = 0; i < count; i++) {
        contents_table_row(run, table, &run->methods[0], settled->mass, quotes[i]);
    }
}

/* ---- found temperatures ------------------------------------------------------------------------------------------ */

static void add_reached(const struct settled *settled, struct method_run *method, const char *name, double gauge)
{
    const struct sheet_run *run = settled->run;
    double temperature = 0.0;
    const enum answer answer =
        find_temperature_of_pressure(run, method, settled->mass, gauge + STANDARD_ATMOSPHERE, &temperature);
    if (answer == ANSWER_OK) {
        sheet_add_fact(run->result, run->out, name, temperature, look_temperature(run))->method = method->name;
    } else if (answer == ANSWER_NO_SUCH_ROOT) {
        const bool is_cold = temperature < hottest(settled);
        sheet_add_words(run->result, run->out, name,
                        arena_format(run->arena, is_cold ? "above it from %s on" : "not reached up to %s",
                                     temperature_words(run, temperature)))
            ->method = method->name;
    }
}

/* The weakest fitting; the vessel's own ratings are told by name. */
static const struct case_rating *weakest_fitting(const struct case_vessel *vessel)
{
    const struct case_rating *weakest = NULL;
    for (size_t i = 0; i < vessel->fitting_count; i++) {
        if (weakest == NULL || vessel->fittings[i].pressure.value < weakest->pressure.value) {
            weakest = &vessel->fittings[i];
        }
    }
    return weakest;
}

/* A gas with a critical temperature above the hot day is liquid there, and a vessel full of liquid is about to burst;
 * one with a lower critical temperature goes liquid-full in ordinary use on its way to one dense phase. */
static void warn_if_liquid_full(const struct settled *settled, struct method_run *method, struct liquid_end_found found)
{
    const struct sheet_run *run = settled->run;
    const bool stays_liquid = classify_charge(run, method, settled->mass) == CLASS_LOW_PRESSURE_LIQUEFIED;
    if (stays_liquid && found.end == LIQUID_END_FULL && found.temperature <= hottest(settled)) {
        result_warn(run->result, CODE_W330, location_line(run->sheet->at), run->number,
                    "%s, %s: liquid-full from %s on, below the hottest temperature asked about, %s",
                    run->sheet->fluid->name, method->name, temperature_words(run, found.temperature),
                    temperature_words(run, hottest(settled)));
    }
}

static void add_found(const struct settled *settled)
{
    struct sheet_run *run = settled->run;
    const struct case_vessel *vessel = run->sheet->vessel;
    sheet_begin_facts(run->result, run->out, "temperatures found");
    for (size_t m = 0; m < run->method_count; m++) {
        struct method_run *method = &run->methods[m];
        if (method->fluid == NULL) {
            continue;
        }
        const struct liquid_end_found found = add_liquid_end(run, method, settled->mass);
        if (m == 0) {
            warn_if_liquid_full(settled, method, found);
        }
        if (vessel->working_pressure.given) {
            add_reached(settled, method, "working-pressure-temperature", vessel->working_pressure.value);
        }
        if (vessel->service_pressure.given) {
            add_reached(settled, method, "service-pressure-temperature", vessel->service_pressure.value);
        }
        if (vessel->test_pressure.given) {
            add_reached(settled, method, "test-pressure-temperature", vessel->test_pressure.value);
        }
        const struct case_rating *weakest = weakest_fitting(vessel);
        if (weakest != NULL) {
            add_reached(settled, method, "lowest-fitting-temperature", weakest->pressure.value);
        }
    }
}

/* ---- requirements and the hand check ----------------------------------------------------------------------------- */

static void add_requirements(const struct settled *settled)
{
    struct sheet_run *run = settled->run;
    const double low = settled->temperatures[0], high = hottest(settled);
    for (size_t i = 0; i < run->sheet->requirement_count; i++) {
        require_predicate(run, NULL, &run->sheet->requirements[i], settled->mass, low, high);
    }
    size_t count;
    const struct predicate *ratings = rating_predicates(run, &count);
    for (size_t i = 0; i < count; i++) {
        require_predicate(run, NULL, &ratings[i], settled->mass, low, high);
    }
}

/* Where a pressure is required, its worst temperature is the one to check by hand; else the hottest asked about. */
static double checked_temperature(const struct settled *settled)
{
    for (const struct requirement *one = settled->run->out->first_requirement; one != NULL; one = one->next) {
        if (one->has_worst_temperature && one->has_margin && strcmp(one->look.si_unit, "Pa") == 0) {
            return one->worst_temperature;
        }
    }
    return hottest(settled);
}

static void add_hand_check(const struct settled *settled)
{
    struct sheet_run *run = settled->run;
    struct method_run *lead = &run->methods[0];
    const double temperature = checked_temperature(settled);
    struct contents contents;
    if (contents_at(run, lead, settled->mass, temperature, &contents) != ANSWER_OK) {
        return;
    }
    struct hand_check *check = sheet_add_hand_check(
        run->result, run->out,
        arena_format(run->arena, "settled pressure at %s, %s", temperature_words(run, temperature), lead->name));
    hand_check_amount(run, check, settled->mass);
    hand_check_contents(run, check, lead, settled->mass, &contents);
    if (run->sheet->vessel->test_pressure.given) {
        hand_check_gauge(run, check, contents.pressure, STANDARD_ATMOSPHERE, run->sheet->vessel->test_pressure.value);
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static void tell_no_mass(struct sheet_run *run, enum answer answer)
{
    sheet_add_note(run->result, run->out, "the mass of charge %s was not found: %s", run->sheet->charge->name,
                   answer == ANSWER_CANNOT || answer == ANSWER_OK ? "the lead method does not serve this gas"
                                                                  : "the lead method has no such state");
    result_warn(run->result, CODE_W303, location_line(run->sheet->charge->origin.at), run->number,
                "charge %s: no mass by %s", run->sheet->charge->name, run->methods[0].name);
    run->result->is_undecided = true;
}

void answer_settled_pressure(struct sheet_run *run)
{
    struct settled settled = {.run = run};
    const enum answer answer = charge_mass(run, run->sheet->charge, &settled.mass);
    if (answer != ANSWER_OK || run->methods[0].fluid == NULL) {
        tell_no_mass(run, answer);
        return;
    }
    struct method_run *lead = &run->methods[0];
    choose_temperatures(&settled);
    sheet_begin_facts(run->result, run->out, "charge");
    add_charge_facts(run, lead, settled.mass, basis_of_charge(run));
    add_tables(&settled);
    add_quotes(&settled);
    add_phases_table(run, lead, settled.split.items, settled.split.count);
    add_liquid_at(run, lead, settled.mass, coldest(&settled));
    tell_frost_line(run);
    tell_solid_contents(run, lead, settled.mass, settled.temperatures, settled.count);
    add_found(&settled);
    add_stepwise(run, lead, settled.mass);
    const struct fill_point fill = fill_point_of(run, lead, settled.mass);
    add_sensitivities(run, lead, settled.mass, hottest(&settled), &fill);
    add_requirements(&settled);
    add_hand_check(&settled);
    if (!settled.has_answers) {
        run->result->is_undecided = true;
    }
}
