#include "filling/caloric_table.h"

#include "equilibrium/saturation.h"
#include "filling/mixture_contents.h"
#include "filling/mixture_internal.h"
#include "fluid/caloric.h"

#include <math.h>

enum { DIGITS = 6 };

enum caloric_column {
    COLUMN_TEMPERATURE,
    COLUMN_PRESSURE,
    COLUMN_PHASE,
    COLUMN_RESIDUAL_ENTHALPY,
    COLUMN_RESIDUAL_ENTROPY,
    COLUMN_ENTHALPY,
    COLUMN_ENTROPY,
    COLUMN_HEAT_CAPACITY_P,
    COLUMN_HEAT_CAPACITY_V,
    COLUMN_SPEED_OF_SOUND,
    COLUMN_POYNTING
};

struct caloric_table {
    const struct sheet_run *run;
    struct method_run *method;
    struct table *table;
};

static struct look energy(void)
{
    return (struct look){"J/mol", {"J/mol", 1.0, 0.0}, 2};
}

static struct look heat(void)
{
    return (struct look){"J/(mol K)", {"J/(mol K)", 1.0, 0.0}, 3};
}

static bool has_ideal_parts(struct method_run *method)
{
    struct caloric caloric;
    return fluid_set_t(method->at_t, method->fluid, 300.0) == ANSWER_OK &&
           caloric_ideal(method->at_t, 1e5, method->z, &caloric) == ANSWER_OK;
}

struct caloric_table *caloric_table_begin(const struct sheet_run *run, struct method_run *method)
{
    struct result *result = run->result;
    if (!run->sheet->show_caloric) {
        return NULL;
    }
    if (!has_ideal_parts(method)) {
        sheet_add_note(result, run->out, "%s tells no caloric properties: a component has no published ideal-gas part",
                       method->name);
        return NULL;
    }
    struct caloric_table *told = arena_alloc(run->arena, 1, sizeof *told);
    *told = (struct caloric_table){run, method, sheet_add_table(result, run->out, "caloric properties", method->name)};
    table_add_column(result, told->table, "temperature", look_temperature(run));
    table_add_column(result, told->table, "pressure", look_significant(look_pressure(run), DIGITS));
    table_add_word_column(result, told->table, "phase");
    table_add_column(result, told->table, "residual-enthalpy", energy());
    table_add_column(result, told->table, "residual-entropy", heat());
    table_add_column(result, told->table, "enthalpy", energy());
    table_add_column(result, told->table, "entropy", heat());
    table_add_column(result, told->table, "heat-capacity-p", heat());
    table_add_column(result, told->table, "heat-capacity-v", heat());
    table_add_column(result, told->table, "speed-of-sound", (struct look){"m/s", {"m/s", 1.0, 0.0}, 2});
    if (run->sheet->fluid->count == 1) {
        table_add_column(result, told->table, "poynting", look_ratio(-DIGITS));
    }
    return told;
}

/* exp of the integral of v dp / (R T) from the saturation pressure: the ratio of the fugacities at both ends. */
static void add_poynting(const struct caloric_table *told, const struct caloric_state *state, double ln_phi,
                         struct cell *row)
{
    struct saturation saturation;
    struct method_run *method = told->method;
    if (told->run->sheet->fluid->count > 1 || (method->fluid->ops->capabilities & CAN_LIQUID) == 0 ||
        (method->has_critical && state->temperature >= method->critical.temperature) ||
        saturation_at_t(method->at_t, &saturation) != ANSWER_OK ||
        !(state->molar_volume < 0.5 * (saturation.liquid_volume + saturation.vapour_volume))) {
        return;
    }
    const double ln_f_saturated = saturation.ln_phi_liquid + log(saturation.pressure);
    cell_set(&row[COLUMN_POYNTING], exp(ln_phi + log(state->pressure) - ln_f_saturated));
}

void caloric_table_add(struct caloric_table *told, const struct caloric_state *state)
{
    if (told == NULL) {
        return;
    }
    struct method_run *method = told->method;
    const double one = 1.0;
    const double *x = state->x == NULL ? &one : state->x;
    struct pure_arrays arrays;
    struct phase pure;
    struct caloric caloric;
    phase_of_pure(&pure, &arrays);
    struct phase *const phase = method->mixture == NULL ? &pure : method->mixture->phase;
    if (fluid_set_t(method->at_t, method->fluid, state->temperature) != ANSWER_OK ||
        phase_tv(method->at_t, state->molar_volume, x, PHASE_RESIDUAL | PHASE_LN_PHI, phase) != ANSWER_OK ||
        caloric_of_phase(method->at_t, x, phase, &caloric) != ANSWER_OK) {
        return;
    }
    const double R = method->fluid->gas_constant;
    struct cell *row = table_add_row(told->run->result, told->table);
    cell_set(&row[COLUMN_TEMPERATURE], state->temperature);
    cell_set(&row[COLUMN_PRESSURE], state->pressure);
    cell_set_text(&row[COLUMN_PHASE], state->phase);
    cell_set(&row[COLUMN_RESIDUAL_ENTHALPY], R * state->temperature * phase->residual_enthalpy_rt);
    cell_set(&row[COLUMN_RESIDUAL_ENTROPY], R * phase->residual_entropy_r);
    cell_set(&row[COLUMN_ENTHALPY], caloric.enthalpy);
    cell_set(&row[COLUMN_ENTROPY], caloric.entropy);
    cell_set(&row[COLUMN_HEAT_CAPACITY_P], caloric.heat_capacity_p);
    cell_set(&row[COLUMN_HEAT_CAPACITY_V], caloric.heat_capacity_v);
    cell_set(&row[COLUMN_SPEED_OF_SOUND], caloric.speed_of_sound);
    add_poynting(told, state, phase->ln_phi[0], row);
    for (size_t i = COLUMN_RESIDUAL_ENTHALPY; i <= COLUMN_SPEED_OF_SOUND; i++) {
        row[i].is_outside_range = !state->is_inside;
    }
}

void caloric_table_explain(const struct sheet_run *run)
{
    if (run->sheet->show_caloric) {
        sheet_add_note(
            run->result, run->out,
            "residual: against the ideal gas at the same temperature and pressure; enthalpy and entropy count "
            "from the zeros of the components' published ideal-gas parts, entropy with that of ideal mixing%s",
            run->sheet->fluid->count == 1
                ? "; Poynting factor: fugacity of a liquid over that at its saturation pressure"
                : "");
    }
}
