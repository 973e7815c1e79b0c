#include "filling/phases_table.h"

#include "filling/contents_table.h"
#include "filling/mixture_contents.h"
#include "filling/requirement.h"

/* Mole fractions in percent, to the digits an equation of state deserves. */
static struct look look_fraction(void)
{
    return (struct look){"1", {"%", 0.01, 0.0}, -5};
}

/* ---- every phase ------------------------------------------------------------------------------------------------- */

enum phase_column { PHASE_TEMPERATURE, PHASE_NAME, PHASE_AMOUNT, PHASE_VOLUME, PHASE_DENSITY, PHASE_FRACTIONS };

static struct table *begin_phases(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "phases, and mole fractions in them", method->name);
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_word_column(result, table, "phase");
    table_add_column(result, table, "amount", look_percent(2));
    table_add_column(result, table, "volume", look_percent(2));
    table_add_column(result, table, "density", look_density(run));
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        table_add_column(result, table, run->sheet->fluid->components[i]->name, look_fraction());
    }
    return table;
}

static void add_phase(const struct sheet_run *run, struct table *table, const struct contents *contents, size_t k)
{
    const struct contents_phase *phase = &contents->phases[k];
    const double volume = run->sheet->vessel->water_capacity.value;
    double amount = 0.0;
    for (size_t i = 0; i < contents->phase_count; i++) {
        amount += contents->phases[i].amount;
    }
    struct cell *row = table_add_row(run->result, table);
    cell_set(&row[PHASE_TEMPERATURE], contents->temperature);
    cell_set_text(&row[PHASE_NAME], phase->is_liquid ? "liquid" : "vapour");
    cell_set(&row[PHASE_AMOUNT], phase->amount / amount);
    cell_set(&row[PHASE_VOLUME], phase->amount * phase->molar_volume / volume);
    cell_set(&row[PHASE_DENSITY], phase->molar_mass / phase->molar_volume);
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        cell_set(&row[PHASE_FRACTIONS + i], phase->x[i]);
    }
}

void add_phases_table(const struct sheet_run *run, const struct method_run *method,
                      const struct contents *const contents[], size_t count)
{
    if (count == 0) {
        return;
    }
    struct table *table = begin_phases(run, method);
    for (size_t t = 0; t < count; t++) {
        for (size_t k = 0; k < contents[t]->phase_count; k++) {
            add_phase(run, table, contents[t], k);
        }
    }
}

/* ---- the liquid at one temperature ------------------------------------------------------------------------------- */

static void add_composition(const struct sheet_run *run, const struct method_run *method, const char *title,
                            const double x[])
{
    struct table *table = sheet_add_table(run->result, run->out, title, method->name);
    table_add_word_column(run->result, table, "component");
    table_add_column(run->result, table, "whole", look_fraction());
    table_add_column(run->result, table, "liquid", look_fraction());
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[0], run->sheet->fluid->components[i]->name);
        cell_set(&row[1], method->z[i]);
        cell_set(&row[2], x[i]);
    }
}

static void add_condensed(const struct sheet_run *run, const struct method_run *method, const struct contents *contents)
{
    const struct contents_phase *heaviest = &contents->phases[contents->phase_count - 1];
    sheet_add_note(run->result, run->out, "at %s liquid is there: %s of it, %s of the capacity (%s)",
                   temperature_words(run, contents->temperature),
                   shown_text(run, look_mass(run), heaviest->amount * heaviest->molar_mass),
                   shown_text(run, look_percent(2), contents->liquid_fraction), method->name);
}

/* One phase above its upper edge condenses as the pressure falls; one below its dew point does not. */
static void add_incipient(const struct sheet_run *run, struct method_run *method, const struct contents *contents)
{
    const struct edge_list *list;
    if (contents->state == VESSEL_VAPOUR || !contents->edges.has_high || contents->edges.high_is_bubble ||
        edges_at(method, contents->temperature, &(struct phase_edges){0}) != ANSWER_OK ||
        mixture_edge_list(method, &list) != ANSWER_OK || list->count == 0) {
        return;
    }
    const struct phase_edge *edge = &list->items[list->count - 1];
    add_composition(run, method,
                    arena_format(run->arena, "the liquid that would form at %s, in use, at %s",
                                 temperature_words(run, contents->temperature),
                                 shown_text(run, look_pressure(run), edge->pressure)),
                    edge->other);
}

void add_liquid_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature)
{
    struct contents contents;
    if (method->mixture == NULL || contents_at(run, method, mass, temperature, &contents) != ANSWER_OK) {
        return;
    }
    if (contents.phase_count > 1) {
        add_condensed(run, method, &contents);
    } else {
        add_incipient(run, method, &contents);
    }
}
