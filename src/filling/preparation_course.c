/* The course of a preparation: the vessel after and during each addition, the recipe by ideal partial pressures beside
 * it, and the masses for every vessel. */
#include "filling/preparation_internal.h"

#include "equilibrium/closed_vessel.h"
#include "equilibrium/mixture_vessel.h"
#include "filling/mixture_internal.h"
#include "filling/search.h"

#include <math.h>
#include <string.h>

/* How many times the vessel is looked at while one addition goes in. */
enum { LOOKS = 8 };

/* How closely the amount that reaches a pressure is found. */
#define AMOUNT_TOLERANCE 1e-12

/* ---- the vessel -------------------------------------------------------------------------------------------------- */

static enum answer pure_filled_at(const struct preparation *it, const struct method_run *method, double amount,
                                  struct filled_state *out)
{
    struct vessel_contents contents;
    const enum answer answer = closed_vessel_at_tv(method->at_t, it->volume, amount, &contents);
    if (answer == ANSWER_OK) {
        out->pressure = contents.pressure;
        out->phase_count = contents.state == VESSEL_TWO_PHASE ? 2 : 1;
        out->has_liquid = contents.liquid_amount > 0.0;
        out->liquid_amount = contents.liquid_amount;
    }
    return answer;
}

enum answer filled_at(const struct preparation *it, struct method_run *method, double temperature, const double n[],
                      struct filled_state *out)
{
    *out = (struct filled_state){.pressure = 0.0};
    if (!(amount_of(n, it->count) > 0.0)) {
        return ANSWER_OK;
    }
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (it->count == 1) {
        return answer == ANSWER_OK ? pure_filled_at(it, method, n[0], out) : answer;
    }
    struct mixture_vessel *vessel = method->mixture->vessel;
    method->mixture->has_vessel = false;
    answer = answer != ANSWER_OK ? answer
                                 : mixture_vessel_at_tv(method->at_t, it->volume, n, NULL, method->mixture->ws, vessel);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const struct split *split = vessel->split;
    out->pressure = split->pressure;
    out->phase_count = split->phase_count;
    for (size_t k = 0; split->phase_count > 1 && k < split->phase_count; k++) {
        if (mixture_is_liquid(method, split, k)) {
            out->has_liquid = true;
            out->liquid_amount += vessel->amount * split->phase[k].fraction;
        }
    }
    return ANSWER_OK;
}

static void add_part(const struct preparation *it, size_t p, double amount, double n[])
{
    for (size_t i = 0; i < it->count; i++) {
        n[i] += amount * it->parent[p][i];
    }
}

static enum answer follow_step(const struct preparation *it, struct method_run *method, size_t p, double amount,
                               double n[], struct filled_step *step)
{
    const double temperature = it->made->additions[p].temperature.value;
    enum answer answer = filled_at(it, method, temperature, n, &step->before);
    step->peak_pressure = step->before.pressure;
    for (int look = 1; look <= LOOKS && answer == ANSWER_OK; look++) {
        add_part(it, p, amount / LOOKS, n);
        answer = filled_at(it, method, temperature, n, &step->after);
        step->peak_pressure = fmax(step->peak_pressure, step->after.pressure);
        step->has_liquid_between = step->has_liquid_between || (look < LOOKS && step->after.has_liquid);
    }
    return answer;
}

enum answer follow_steps(const struct preparation *it, struct method_run *method, const double amounts[],
                         struct filled_step steps[])
{
    double *n = arena_alloc(it->run->arena, it->count, sizeof *n);
    memcpy(n, it->heel, it->count * sizeof *n);
    enum answer answer = ANSWER_OK;
    for (size_t k = 0; k < it->parents && answer == ANSWER_OK; k++) {
        steps[k] = (struct filled_step){.peak_pressure = 0.0};
        answer = follow_step(it, method, it->order[k], amounts[it->order[k]], n, &steps[k]);
    }
    return answer;
}

/* ---- tables ------------------------------------------------------------------------------------------------------ */

double parent_molar_mass(const struct preparation *it, size_t p)
{
    double molar_mass = 0.0;
    for (size_t i = 0; i < it->count; i++) {
        molar_mass += it->parent[p][i] * it->molar_masses[i];
    }
    return molar_mass;
}

struct look look_weighed(const struct sheet_run *run)
{
    return look_significant(look_mass(run), 7);
}

static const char *liquid_words(const struct filled_step *step)
{
    if (step->before.has_liquid) {
        return step->after.has_liquid ? "stays" : "dissolves";
    }
    if (step->after.has_liquid) {
        return "forms";
    }
    return step->has_liquid_between ? "forms, dissolves" : "none";
}

enum step_column {
    STEP_ADDITION,
    STEP_MASS,
    STEP_RUNNING,
    STEP_TEMPERATURE,
    STEP_PRESSURE,
    STEP_SUPPLY,
    STEP_PHASES,
    STEP_LIQUID,
    STEP_GROSS
};

void tell_steps(const struct preparation *it, const struct method_run *method, const struct filled_step steps[])
{
    const struct sheet_run *run = it->run;
    struct table *table = sheet_add_table(run->result, run->out, "additions", method->name);
    const struct quantity *tare = &run->sheet->vessel->tare;
    double running = it->heel_mass;
    table->csv = method == &run->methods[0] ? run->sheet->table_csv : NULL;
    table_add_word_column(run->result, table, "addition");
    table_add_column(run->result, table, "mass-to-add", look_weighed(run));
    table_add_column(run->result, table, "running-mass", look_weighed(run));
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, "gauge-pressure", look_gauge(run));
    table_add_column(run->result, table, "supply-needed", look_gauge(run));
    table_add_word_column(run->result, table, "phases");
    table_add_word_column(run->result, table, "liquid");
    if (tare->given) {
        table_add_column(run->result, table, "gross-weight", look_weighed(run));
    }
    for (size_t k = 0; k < it->parents; k++) {
        const struct case_addition *addition = &it->made->additions[it->order[k]];
        const double mass = it->amounts[it->order[k]] * parent_molar_mass(it, it->order[k]);
        struct cell *row = table_add_row(run->result, table);
        running += mass;
        cell_set_text(&row[STEP_ADDITION], addition->name);
        cell_set(&row[STEP_MASS], mass);
        cell_set(&row[STEP_RUNNING], running);
        cell_set(&row[STEP_TEMPERATURE], addition->temperature.value);
        cell_set(&row[STEP_PRESSURE], steps[k].after.pressure);
        row[STEP_PRESSURE].is_outside_range =
            !warn_outside_range(run, method, addition->temperature.value, steps[k].after.pressure);
        cell_set(&row[STEP_SUPPLY], steps[k].peak_pressure);
        cell_set_text(&row[STEP_PHASES], steps[k].after.phase_count > 1 ? "gas, liquid" : "one");
        cell_set_text(&row[STEP_LIQUID], liquid_words(&steps[k]));
        if (tare->given) {
            cell_set(&row[STEP_GROSS], running + tare->value);
        }
    }
}

/* ---- the ideal recipe -------------------------------------------------------------------------------------------- */

/* The amount of a parent that brings the vessel to a pressure. */
struct pressure_reached {
    const struct preparation *it;
    struct method_run *method;
    size_t p;
    double temperature, pressure;
    const double *before; /* [count] */
    double *n;            /* [count] */
};

static enum answer pressure_missing(void *context, double amount, double *missing)
{
    const struct pressure_reached *of = context;
    struct filled_state state;
    memcpy(of->n, of->before, of->it->count * sizeof *of->n);
    add_part(of->it, of->p, amount, of->n);
    const enum answer answer = filled_at(of->it, of->method, of->temperature, of->n, &state);
    *missing = state.pressure - of->pressure;
    return answer;
}

/* The pressure of ideal gases: each its part of the finished pressure, at the temperature of the step. */
static double ideal_pressure(const struct preparation *it, const struct filled_step steps[], const double n[], size_t k)
{
    const size_t last = it->parents - 1;
    const double at = it->made->additions[it->order[k]].temperature.value;
    const double finished_at = it->made->additions[it->order[last]].temperature.value;
    return steps[last].after.pressure * amount_of(n, it->count) / amount_of(it->finished, it->count) * at / finished_at;
}

/* Fills by the ideal pressures; sets what is then in the vessel. */
static enum answer fill_by_ideal(const struct preparation *it, struct method_run *method,
                                 const struct filled_step steps[], double pressures[], double n[])
{
    struct arena *arena = it->run->arena;
    double *planned = arena_alloc(arena, 2 * it->count, sizeof *planned), *trial = planned + it->count;
    memcpy(planned, it->heel, it->count * sizeof *planned);
    memcpy(n, it->heel, it->count * sizeof *n);
    for (size_t k = 0; k < it->parents; k++) {
        const size_t p = it->order[k];
        add_part(it, p, it->amounts[p], planned);
        pressures[k] = ideal_pressure(it, steps, planned, k);
        struct pressure_reached of = {it, method, p, it->made->additions[p].temperature.value, pressures[k], n, trial};
        const struct search_function function = {pressure_missing, &of};
        struct search_bracket bracket = {.a = 0.0, .b = fmax(it->amounts[p], 1e-3)};
        enum answer answer = function.value(&of, bracket.a, &bracket.value_a);
        if (answer == ANSWER_OK && bracket.value_a >= 0.0) {
            continue; /* the heel alone is above it: nothing is added */
        }
        answer = answer == ANSWER_OK ? function.value(&of, bracket.b, &bracket.value_b) : answer;
        for (int doubling = 0; answer == ANSWER_OK && bracket.value_b < 0.0 && doubling < 40; doubling++) {
            bracket.b *= 1.5;
            answer = function.value(&of, bracket.b, &bracket.value_b);
        }
        answer = answer == ANSWER_OK ? search_root(&function, 0.0, AMOUNT_TOLERANCE, &bracket) : answer;
        if (answer != ANSWER_OK) {
            return answer;
        }
        add_part(it, p, bracket.b, n);
    }
    return ANSWER_OK;
}

static void tell_ideal_pressures(const struct preparation *it, const struct method_run *method,
                                 const struct filled_step steps[], const double pressures[])
{
    const struct sheet_run *run = it->run;
    struct table *table =
        sheet_add_table(run->result, run->out, "gauge targets beside ideal partial pressures", method->name);
    table_add_word_column(run->result, table, "addition");
    table_add_column(run->result, table, "gauge-pressure", look_gauge(run));
    table_add_column(run->result, table, "ideal-pressure", look_gauge(run));
    table_add_column(run->result, table, "ideal-less-real", look_pressure_difference(run));
    for (size_t k = 0; k < it->parents; k++) {
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[0], it->made->additions[it->order[k]].name);
        cell_set(&row[1], steps[k].after.pressure);
        cell_set(&row[2], pressures[k]);
        cell_set(&row[3], pressures[k] - steps[k].after.pressure);
    }
}

static void tell_ideal_fractions(const struct preparation *it, const struct method_run *method, const double n[])
{
    const struct sheet_run *run = it->run;
    struct table *table = sheet_add_table(run->result, run->out, "what the ideal pressures would make", method->name);
    const double whole = amount_of(n, it->count);
    table_add_word_column(run->result, table, "component");
    table_add_column(run->result, table, "target", look_significant(look_percent(0), 5));
    table_add_column(run->result, table, "made", look_significant(look_percent(0), 5));
    table_add_column(run->result, table, "off-by", look_percent(2));
    for (size_t i = 0; i < it->count; i++) {
        const double target = it->run->sheet->fluid->fractions[i];
        if (!(target > 0.0)) {
            continue;
        }
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[0], run->sheet->fluid->components[i]->name);
        cell_set(&row[1], target);
        cell_set(&row[2], n[i] / whole);
        cell_set(&row[3], n[i] / whole / target - 1.0);
    }
}

void tell_ideal_recipe(const struct preparation *it, struct method_run *method, const struct filled_step steps[])
{
    double *pressures = arena_alloc(it->run->arena, it->parents + it->count, sizeof *pressures);
    double *n = pressures + it->parents;
    if (fill_by_ideal(it, method, steps, pressures, n) != ANSWER_OK) {
        sheet_add_note(it->run->result, it->run->out, "%s: it has no answer for a fill by ideal partial pressures.",
                       method->name);
        return;
    }
    tell_ideal_pressures(it, method, steps, pressures);
    tell_ideal_fractions(it, method, n);
}

/* ---- every vessel ------------------------------------------------------------------------------------------------ */

static void tell_vessel_masses(const struct preparation *it, const char *title, double times)
{
    const struct sheet_run *run = it->run;
    struct table *table = sheet_add_table(run->result, run->out, title, NULL);
    table_add_word_column(run->result, table, "addition");
    table_add_column(run->result, table, "mass-to-add", look_weighed(run));
    double sum = 0.0;
    for (size_t k = 0; k < it->parents; k++) {
        const size_t p = it->order[k];
        struct cell *row = table_add_row(run->result, table);
        const double mass = times * it->amounts[p] * parent_molar_mass(it, p);
        cell_set_text(&row[0], it->made->additions[p].name);
        cell_set(&row[1], mass);
        sum += mass;
    }
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[0], "in all");
    cell_set(&row[1], sum);
}

/* Vessels filled to the same density take masses as their capacities. */
void tell_all_vessels(const struct preparation *it)
{
    const struct sheet_run *run = it->run;
    if (it->made->together > 1) {
        tell_vessel_masses(it, arena_format(run->arena, "bundle of %zu, filled together", it->made->together),
                           (double)it->made->together);
    }
    for (size_t k = 0; k < it->made->further_count; k++) {
        const struct case_further *further = &it->made->further[k];
        const double ratio = further->vessel->water_capacity.value / it->volume;
        tell_vessel_masses(
            it, arena_format(run->arena, "%zu of vessel %s, together", further->number, further->vessel->name),
            ratio * (double)further->number);
    }
}
