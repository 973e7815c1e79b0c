/* Additions that come in fast: how warm the gas is then, with and without the wall, and by how much the pressure stands
 * above the one that it settles to. */
#include "filling/preparation_internal.h"

#include "equilibrium/fast_fill.h"
#include "equilibrium/saturation.h"
#include "filling/mixture_internal.h"
#include "fluid/caloric.h"

#include <math.h>
#include <string.h>

enum fast_column { FAST_ADDITION, FAST_TIME, FAST_ADIABATIC, FAST_GAS, FAST_WALL, FAST_PRESSURE, FAST_OVER };

/* J/mol of a parent as its supply has it. */
static enum answer supply_enthalpy(const struct preparation *it, struct method_run *method, size_t p, double *enthalpy)
{
    const struct case_addition *addition = &it->made->additions[p];
    const double temperature =
        addition->supply_temperature.given ? addition->supply_temperature.value : addition->temperature.value;
    struct phase *phase = phase_create(it->count, it->run->arena);
    struct caloric caloric;
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = it->count == 1 ? stable_phase_tp(method->at_t, addition->supply_pressure.value, it->parent[p],
                                                  PHASE_RESIDUAL, phase)
                                : phase_tp(method->at_t, addition->supply_pressure.value, it->parent[p], BRANCH_STABLE,
                                           PHASE_RESIDUAL, phase);
    }
    answer = answer == ANSWER_OK ? caloric_of_phase(method->at_t, it->parent[p], phase, &caloric) : answer;
    *enthalpy = caloric.enthalpy;
    return answer;
}

/* Amounts and temperature before step k. */
static double set_before(const struct preparation *it, size_t k, double n[])
{
    memcpy(n, it->heel, it->count * sizeof *n);
    for (size_t j = 0; j < k; j++) {
        for (size_t i = 0; i < it->count; i++) {
            n[i] += it->amounts[it->order[j]] * it->parent[it->order[j]][i];
        }
    }
    return it->made->additions[it->order[k > 0 ? k - 1 : 0]].temperature.value;
}

/* One row; false where the method has no answer. */
static bool put_fast(const struct preparation *it, struct method_run *method, struct table *table, size_t k,
                     struct filled_step *step)
{
    struct sheet_run *run = it->run;
    const size_t p = it->order[k];
    const struct case_addition *addition = &it->made->additions[p];
    const struct case_vessel *holds = run->sheet->vessel;
    double *n = arena_alloc(run->arena, 2 * it->count, sizeof *n), *added = n + it->count, enthalpy;
    struct fast_fill fill = {.before = n,
                             .added = added,
                             .temperature = set_before(it, k, n),
                             .time = addition->fill_time.value,
                             .wall_heat_capacity = holds->wall_heat_capacity.value,
                             .wall_conductance = holds->wall_conductance.value};
    for (size_t i = 0; i < it->count; i++) {
        added[i] = it->amounts[p] * it->parent[p][i];
    }
    if (supply_enthalpy(it, method, p, &enthalpy) != ANSWER_OK) {
        return false;
    }
    fill.enthalpy = it->amounts[p] * enthalpy;
    struct energy_vessel *vessel = energy_vessel_create(method->fluid, method->at_t, it->volume, NULL, run->arena);
    struct fast_fill_end adiabatic, end;
    if (fast_fill_adiabatic(vessel, it->count, &fill, run->arena, &adiabatic) != ANSWER_OK) {
        return false;
    }
    end = adiabatic;
    const bool has_wall = holds->wall_heat_capacity.given;
    if (has_wall && fast_fill_with_wall(vessel, it->count, &fill, run->arena, &end) != ANSWER_OK) {
        return false;
    }
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[FAST_ADDITION], addition->name);
    cell_set(&row[FAST_TIME], fill.time);
    cell_set(&row[FAST_ADIABATIC], adiabatic.temperature);
    if (has_wall) {
        cell_set(&row[FAST_GAS], end.temperature);
        cell_set(&row[FAST_WALL], end.wall_temperature);
    }
    cell_set(&row[FAST_PRESSURE], end.pressure);
    cell_set(&row[FAST_OVER], end.pressure - step->after.pressure);
    step->peak_pressure = fmax(step->peak_pressure, end.pressure);
    return true;
}

void tell_fast_fills(const struct preparation *it, struct method_run *method, struct filled_step steps[])
{
    struct sheet_run *run = it->run;
    struct table *table = NULL;
    for (size_t k = 0; k < it->parents; k++) {
        if (!it->made->additions[it->order[k]].fill_time.given) {
            continue;
        }
        if (table == NULL) {
            table = sheet_add_table(run->result, run->out, "fast additions, at their end", method->name);
            table_add_word_column(run->result, table, "addition");
            table_add_column(run->result, table, "time", (struct look){"s", {"min", 60.0, 0.0}, 2});
            table_add_column(run->result, table, "no-heat-lost", look_temperature(run));
            table_add_column(run->result, table, "gas", look_temperature(run));
            table_add_column(run->result, table, "wall", look_temperature(run));
            table_add_column(run->result, table, "gauge-pressure", look_gauge(run));
            table_add_column(run->result, table, "settles-by", look_pressure_difference(run));
        }
        if (!put_fast(it, method, table, k, &steps[k])) {
            sheet_add_note(run->result, run->out, "%s: it has no answer for the fast addition of %s.", method->name,
                           it->made->additions[it->order[k]].name);
        }
    }
    if (table != NULL) {
        sheet_add_note(
            run->result, run->out,
            "before a fast addition gas and wall have the temperature of the step before; nothing is lost to "
            "the surroundings while it comes in%s",
            run->sheet->vessel->wall_heat_capacity.given ? "" : ", nor to the wall, which is not given");
    }
}
