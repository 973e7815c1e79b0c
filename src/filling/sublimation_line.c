/* The sublimation line in a saturation sheet. */
#include "filling/sublimation_line.h"

#include "filling/requirement.h"
#include "fluid/solid.h"

#include <math.h>

enum sublimation_column {
    SUBLIMATION_TEMPERATURE,
    SUBLIMATION_PRESSURE,
    SUBLIMATION_SOLID_DENSITY,
    SUBLIMATION_VAPOUR_DENSITY,
    SUBLIMATION_HEAT,
    SUBLIMATION_FUGACITY
};

enum { SUBLIMATION_DIGITS = 6 };

static struct table *begin_table(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "sublimation line", method->name);
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_column(result, table, "pressure", look_significant(look_pressure(run), SUBLIMATION_DIGITS));
    table_add_column(result, table, "solid-density", look_density(run));
    table_add_column(result, table, "vapour-density", look_significant(look_density(run), SUBLIMATION_DIGITS));
    table_add_column(result, table, "sublimation-heat", (struct look){"J/kg", {"kJ/kg", 1e3, 0.0}, 2});
    table_add_column(result, table, "fugacity", look_significant(look_pressure(run), SUBLIMATION_DIGITS));
    return table;
}

static void warn_outside_line(const struct sheet_run *run, const struct solid_spec *solid, double temperature)
{
    result_warn(run->result, CODE_W365, location_line(run->sheet->at), run->number,
                "%s: below %s, the end of the published sublimation line, first at %s", run->sheet->fluid->name,
                temperature_words(run, solid->smallest_temperature), temperature_words(run, temperature));
}

/* The ideal parts of solid and vapour are those of the same ideal gas, so that the departures are enough. */
static void add_row(const struct sheet_run *run, struct table *table, const struct method_run *method,
                    double temperature, const struct solid_state *solid, const struct phase *vapour)
{
    const struct solid_spec *spec = method->fluid->spec->pure[0]->solid;
    const double M = run->sheet->fluid->molar_mass, RT = method->fluid->gas_constant * temperature;
    struct cell *row = table_add_row(run->result, table);
    cell_set(&row[SUBLIMATION_TEMPERATURE], temperature);
    cell_set(&row[SUBLIMATION_PRESSURE], solid->line_pressure);
    cell_set(&row[SUBLIMATION_SOLID_DENSITY], M / solid->molar_volume);
    cell_set(&row[SUBLIMATION_VAPOUR_DENSITY], M / vapour->volume);
    cell_set(&row[SUBLIMATION_HEAT], (RT * vapour->residual_enthalpy_rt - solid->departure_enthalpy) / M);
    cell_set(&row[SUBLIMATION_FUGACITY], exp(solid->ln_fugacity));
    if (temperature < spec->smallest_temperature) {
        for (size_t k = 0; k <= SUBLIMATION_FUGACITY; k++) {
            row[k].is_outside_range = true;
        }
        warn_outside_line(run, spec, temperature);
    }
}

/* The state on the line at `temperature`. */
static enum answer line_at(struct method_run *method, double temperature, struct solid_state *solid,
                           struct phase *vapour)
{
    const struct solid_spec *spec = method->fluid->spec->pure[0]->solid;
    double slope;
    const double one = 1.0, p_sub = solid_sublimation_pressure(spec, temperature, &slope);
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = solid_by_sublimation(spec, method->at_t, p_sub, solid);
    }
    if (answer == ANSWER_OK) {
        answer = phase_tp(method->at_t, p_sub, &one, BRANCH_VAPOUR, PHASE_LN_PHI | PHASE_RESIDUAL, vapour);
    }
    return answer;
}

static void tell_offset(const struct sheet_run *run, struct method_run *method)
{
    const struct solid_spec *spec = method->fluid->spec->pure[0]->solid;
    struct saturation saturation;
    double slope;
    if (fluid_set_t(method->at_t, method->fluid, spec->largest_temperature) != ANSWER_OK ||
        saturation_at_t(method->at_t, &saturation) != ANSWER_OK) {
        return;
    }
    const double p_sub = solid_sublimation_pressure(spec, spec->largest_temperature, &slope);
    sheet_begin_facts(run->result, run->out, "where the two lines meet");
    struct fact *fact = sheet_add_fact(run->result, run->out, "triple-point-offset", saturation.pressure / p_sub - 1.0,
                                       look_percent(3));
    fact->method = method->name;
    fact->remark =
        arena_format(run->arena, "of its saturation line, %s at %s, against the sublimation line",
                     shown_text(run, look_significant(look_pressure(run), SUBLIMATION_DIGITS), saturation.pressure),
                     temperature_words(run, spec->largest_temperature));
}

void tell_sublimation_line(const struct sheet_run *run, struct method_run *method)
{
    const struct case_sweep *sweep = &run->sheet->temperatures;
    const struct solid_spec *spec = method->fluid->spec->pure[0]->solid;
    struct table *table = NULL;
    struct pure_arrays arrays;
    struct phase vapour;
    struct solid_state solid;
    phase_of_pure(&vapour, &arrays);
    for (size_t i = 0; spec != NULL && sweep->given && i < sweep->count; i++) {
        const double temperature = sweep->values[i];
        if (temperature > spec->largest_temperature) {
            continue;
        }
        table = table == NULL ? begin_table(run, method) : table;
        if (line_at(method, temperature, &solid, &vapour) == ANSWER_OK) {
            add_row(run, table, method, temperature, &solid, &vapour);
        } else {
            result_warn(run->result, CODE_W364, location_line(run->sheet->at), run->number,
                        "%s, %s: no vapour over the solid at %s", run->sheet->fluid->name, method->name,
                        temperature_words(run, temperature));
        }
    }
    if (table != NULL) {
        tell_offset(run, method);
    }
}
