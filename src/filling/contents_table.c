#include "filling/contents_table.h"

#include "filling/requirement.h"

#include <math.h>
#include <stdlib.h>

/* Temperatures nearer to each other than this (K) are one row: the table shows hundredths. */
#define SAME_TEMPERATURE 0.005

static const char *split_words(const struct sheet_run *run, const struct contents *contents)
{
    size_t liquids = 0;
    for (size_t k = 0; k < contents->phase_count; k++) {
        liquids += contents->phases[k].is_liquid;
    }
    if (liquids == contents->phase_count) {
        return arena_format(run->arena, "%zu liquids", liquids);
    }
    return liquids == 1 ? "vapour + liquid" : arena_format(run->arena, "vapour + %zu liquids", liquids);
}

const char *contents_words(const struct sheet_run *run, const struct contents *contents)
{
    switch (contents->state) {
    case VESSEL_VAPOUR:
        return "vapour";
    case VESSEL_TWO_PHASE:
        return contents->has_saturation ? "vapour + liquid" : split_words(run, contents);
    case VESSEL_LIQUID_FULL:
        return "liquid-full";
    case VESSEL_SUPERCRITICAL:
        if (contents->edges.has_high) {
            return arena_format(run->arena, "one phase, would condense in use at %s",
                                shown_text(run, look_pressure(run), contents->edges.high_pressure));
        }
        return contents->phases[0].x == NULL ? "one phase, above critical" : "one phase";
    case VESSEL_GAS:
        return "gas";
    }
    return "";
}

enum contents_column {
    COLUMN_TEMPERATURE,
    COLUMN_PRESSURE,
    COLUMN_GAUGE,
    COLUMN_STATE,
    COLUMN_LIQUID,
    COLUMN_ULLAGE,
    COLUMN_MARGIN
};

/* What margins are to: the test pressure, or the service pressure of a vessel marked with that alone; NULL: neither. */
static const struct quantity *rating_of_margin(const struct case_vessel *vessel)
{
    if (vessel->test_pressure.given) {
        return &vessel->test_pressure;
    }
    return vessel->service_pressure.given ? &vessel->service_pressure : NULL;
}

struct table *contents_table_begin(const struct sheet_run *run, const char *title, const char *method)
{
    struct table *table = sheet_add_table(run->result, run->out, title, method);
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, "pressure", look_pressure(run));
    table_add_column(run->result, table, "gauge-pressure", look_gauge(run));
    table_add_word_column(run->result, table, "state");
    table_add_column(run->result, table, "liquid-volume", look_percent(1));
    table_add_column(run->result, table, "ullage", look_percent(1));
    if (rating_of_margin(run->sheet->vessel) != NULL) {
        table_add_column(run->result, table, "margin", look_pressure_difference(run));
    }
    return table;
}

void warn_below_triple(const struct sheet_run *run, double temperature)
{
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        const struct case_component *component = run->sheet->fluid->components[i];
        const struct quantity *triple = &component->triple_temperature;
        if (triple->given && temperature < triple->value * (1.0 - TEMPERATURE_ROUNDING)) {
            result_warn(run->result, CODE_W350, location_line(run->sheet->at), run->number,
                        "below the triple point of %s, %s, a solid may form beside the fluid phases told: "
                        "`no solid` asks for it",
                        component->name, temperature_words(run, triple->value));
        }
    }
}

/* Above the critical temperature, and for a method without liquid, there is no level to tell. */
static bool has_level(const struct contents *contents)
{
    return contents->state == VESSEL_TWO_PHASE || contents->edges.has_high;
}

static void fill_row(const struct sheet_run *run, struct cell *row, const struct contents *contents, bool is_inside)
{
    cell_set(&row[COLUMN_PRESSURE], contents->pressure);
    cell_set(&row[COLUMN_GAUGE], contents->pressure);
    row[COLUMN_PRESSURE].is_outside_range = row[COLUMN_GAUGE].is_outside_range = !is_inside;
    cell_set_text(&row[COLUMN_STATE], contents_words(run, contents));
    if (has_level(contents)) {
        cell_set(&row[COLUMN_LIQUID], contents->liquid_fraction);
        cell_set(&row[COLUMN_ULLAGE], 1.0 - contents->liquid_fraction);
    }
    const struct quantity *rating = rating_of_margin(run->sheet->vessel);
    if (rating != NULL) {
        cell_set(&row[COLUMN_MARGIN], rating->value - (contents->pressure - STANDARD_ATMOSPHERE));
    }
}

void contents_table_put(const struct sheet_run *run, struct table *table, const struct method_run *method,
                        double temperature, enum answer answer, const struct contents *contents)
{
    struct cell *row = table_add_row(run->result, table);
    cell_set(&row[COLUMN_TEMPERATURE], temperature);
    warn_below_triple(run, temperature);
    if (answer != ANSWER_OK) {
        cell_set_text(&row[COLUMN_STATE], "no answer");
        result_warn(run->result, CODE_W303, location_line(run->sheet->at), run->number,
                    "%s, %s: no answer for the contents at %s", run->sheet->fluid->name, method->name,
                    temperature_words(run, temperature));
        return;
    }
    fill_row(run, row, contents, warn_outside_range(run, method, temperature, contents->pressure));
}

enum answer contents_table_row(const struct sheet_run *run, struct table *table, struct method_run *method, double mass,
                               double temperature)
{
    struct contents contents;
    const enum answer answer = contents_at(run, method, mass, temperature, &contents);
    contents_table_put(run, table, method, temperature, answer, &contents);
    return answer;
}

static int by_value(const void *left, const void *right)
{
    const double a = *(const double *)left, b = *(const double *)right;
    return (a > b) - (a < b);
}

size_t sorted_temperatures(double temperatures[], size_t count)
{
    if (count == 0) {
        return 0;
    }
    qsort(temperatures, count, sizeof *temperatures, by_value);
    size_t kept = 1;
    for (size_t i = 1; i < count; i++) {
        if (temperatures[i] - temperatures[kept - 1] >= SAME_TEMPERATURE) {
            temperatures[kept++] = temperatures[i];
        }
    }
    return kept;
}
