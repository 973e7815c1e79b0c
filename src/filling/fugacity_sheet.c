/* The sheet `fugacity`: the stable state, compressibility, density and fugacity over swept temperature and pressure,
 * or over swept temperature and density, method beside method. */
#include "filling/caloric_table.h"
#include "filling/hand_check.h"
#include "filling/method_spread.h"
#include "filling/mixture_sheets.h"
#include "filling/sheet.h"
#include "filling/sweep.h"

#include <math.h>

enum state_column {
    COLUMN_TEMPERATURE,
    COLUMN_PRESSURE,
    COLUMN_DENSITY,
    COLUMN_MOLAR_DENSITY,
    COLUMN_STATE,
    COLUMN_Z,
    COLUMN_PHI,
    COLUMN_LN_PHI,
    COLUMN_FUGACITY,
    COLUMN_DEVIATION
};

enum { FUGACITY_DIGITS = 6 };

/* One state by one method. */
struct spot {
    enum answer answer;
    bool is_two_phase; /* only temperature, pressure and the density asked for are set */
    bool is_inside;    /* the method's published range */
    double temperature, pressure;
    double molar_volume; /* m3/mol */
    double Z, ln_phi;
    const char *state;
};

static bool by_density(const struct sheet_run *run)
{
    return run->sheet->densities.given;
}

static const struct case_sweep *second_sweep(const struct sheet_run *run)
{
    return by_density(run) ? &run->sheet->densities : &run->sheet->pressures;
}

/* ---- solving --------------------------------------------------------------------------------------------------- */

static const char *branch_words(const struct method_run *method, enum branch branch)
{
    if ((method->fluid->ops->capabilities & CAN_LIQUID) == 0) {
        return "gas";
    }
    switch (branch) {
    case BRANCH_VAPOUR:
        return "vapour";
    case BRANCH_LIQUID:
        return "liquid";
    case BRANCH_STABLE:
        break;
    }
    return "supercritical";
}

static void put_phase(const struct phase *phase, double ln_phi, struct spot *spot)
{
    spot->pressure = phase->pressure;
    spot->molar_volume = phase->volume;
    spot->Z = phase->Z;
    spot->ln_phi = ln_phi;
}

static void solve_at_pressure(struct method_run *method, double pressure, struct spot *spot)
{
    const double one = 1.0;
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    spot->answer = stable_phase_tp(method->at_t, pressure, &one, PHASE_LN_PHI, &phase);
    if (spot->answer == ANSWER_OK) {
        put_phase(&phase, arrays.ln_phi, spot);
        spot->pressure = pressure;
        spot->state = branch_words(method, phase.branch);
    }
}

static const char *vessel_words(enum vessel_state state)
{
    switch (state) {
    case VESSEL_VAPOUR:
        return "vapour";
    case VESSEL_LIQUID_FULL:
        return "liquid";
    case VESSEL_SUPERCRITICAL:
        return "supercritical";
    case VESSEL_GAS:
        return "gas";
    case VESSEL_TWO_PHASE:
        break;
    }
    return "between the saturation densities";
}

/* The closed vessel says whether the density lies between the saturation densities; the phase's own numbers are then
 * taken at exactly the density asked for. */
static void solve_at_density(struct method_run *method, double molar_density, struct spot *spot)
{
    const double one = 1.0;
    struct vessel_contents contents;
    spot->molar_volume = 1.0 / molar_density;
    spot->answer = closed_vessel_at_tv(method->at_t, spot->molar_volume, one, &contents);
    if (spot->answer != ANSWER_OK) {
        return;
    }
    spot->state = vessel_words(contents.state);
    spot->pressure = contents.pressure;
    spot->is_two_phase = contents.state == VESSEL_TWO_PHASE;
    if (spot->is_two_phase) {
        return;
    }
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    spot->answer = phase_tv(method->at_t, spot->molar_volume, &one, PHASE_LN_PHI, &phase);
    put_phase(&phase, arrays.ln_phi, spot);
}

static double molar_density_of(const struct sheet_run *run, double swept)
{
    return run->sheet->densities.is_mass_density ? swept / run->sheet->fluid->molar_mass : swept;
}

/* The states of a sheet as they are solved, temperature by temperature. */
struct states {
    const struct sheet_run *run;
    struct method_run **methods; /* those that serve */
    struct spot **spots;         /* by each of them */
};

static void solve_spot(const void *context, struct method_run *method, size_t index, void *answer)
{
    const struct sheet_run *run = ((const struct states *)context)->run;
    const struct case_sweep *second = second_sweep(run);
    struct spot *spot = answer;
    *spot = (struct spot){.temperature = run->sheet->temperatures.values[index / second->count], .is_inside = true};
    spot->answer = fluid_set_t(method->at_t, method->fluid, spot->temperature);
    if (spot->answer != ANSWER_OK) {
        return;
    }
    if (by_density(run)) {
        solve_at_density(method, molar_density_of(run, second->values[index % second->count]), spot);
    } else {
        solve_at_pressure(method, second->values[index % second->count], spot);
    }
}

static void keep_spot(void *teller, size_t method, size_t index, const void *answer)
{
    const struct states *states = teller;
    struct spot *spot = &states->spots[method][index];
    *spot = *(const struct spot *)answer;
    if (spot->answer == ANSWER_OK) {
        spot->is_inside = warn_outside_range(states->run, states->methods[method], spot->temperature, spot->pressure);
    }
}

static void solve_spots(struct states *states, size_t method_count)
{
    const struct sheet_run *run = states->run;
    const size_t count = run->sheet->temperatures.count * second_sweep(run)->count;
    states->spots = arena_alloc(run->arena, method_count, sizeof *states->spots);
    for (size_t m = 0; m < method_count; m++) {
        states->spots[m] = arena_alloc(run->arena, count, sizeof **states->spots);
    }
    const struct sweep sweep = {
        .run = run,
        .point_count = count,
        .method_count = method_count,
        .methods = states->methods,
        .answer_size = sizeof(struct spot),
        .context = states,
        .solve = solve_spot,
        .tell = keep_spot,
        .teller = states,
    };
    sweep_points(&sweep);
}

/* ---- the table ------------------------------------------------------------------------------------------------- */

static void add_columns(const struct sheet_run *run, struct table *table, bool is_first)
{
    struct result *result = run->result;
    const struct look pressure = look_significant(look_pressure(run), FUGACITY_DIGITS);
    const struct look molar = look_significant(look_molar_density(), FUGACITY_DIGITS);
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_column(result, table, "pressure", pressure);
    table_add_column(result, table, "density", look_significant(look_density(run), FUGACITY_DIGITS));
    table_add_column(result, table, "molar-density", molar);
    table_add_word_column(result, table, "state");
    table_add_column(result, table, "compressibility-factor", look_ratio(-FUGACITY_DIGITS));
    table_add_column(result, table, "fugacity-coefficient", look_ratio(-FUGACITY_DIGITS));
    table_add_column(result, table, "ln-fugacity-coefficient", look_ratio(FUGACITY_DIGITS));
    table_add_column(result, table, "fugacity", pressure);
    if (!is_first) {
        table_add_column(result, table, "fugacity-deviation", look_percent(3));
    }
}

static const char *no_answer_words(const struct sheet_run *run, const struct method_run *method,
                                   const struct spot *spot, double second)
{
    if (spot->answer == ANSWER_OUT_OF_RANGE) {
        return "beyond the densities of the method";
    }
    result_warn(run->result, CODE_W303, location_line(run->sheet->at), run->number, "%s, %s: no state found at %s, %s",
                run->sheet->fluid->name, method->name, shown_text(run, look_temperature(run), spot->temperature),
                by_density(run) ? shown_text(run, look_molar_density(), molar_density_of(run, second))
                                : shown_text(run, look_pressure(run), second));
    if (method == &run->methods[0]) {
        run->result->is_undecided = true;
    }
    return "no answer";
}

/* The columns that were swept, exactly as asked for, whatever the answer. */
static void fill_swept(const struct sheet_run *run, const struct spot *spot, double second, struct cell *row)
{
    cell_set(&row[COLUMN_TEMPERATURE], spot->temperature);
    if (!by_density(run)) {
        cell_set(&row[COLUMN_PRESSURE], second);
        return;
    }
    const bool is_mass = run->sheet->densities.is_mass_density;
    cell_set(&row[COLUMN_DENSITY], is_mass ? second : second * run->sheet->fluid->molar_mass);
    cell_set(&row[COLUMN_MOLAR_DENSITY], molar_density_of(run, second));
}

static void fill_state(const struct sheet_run *run, const struct spot *spot, struct cell *row)
{
    cell_set(&row[COLUMN_PRESSURE], spot->pressure);
    if (!spot->is_two_phase) {
        if (!by_density(run)) {
            cell_set(&row[COLUMN_DENSITY], run->sheet->fluid->molar_mass / spot->molar_volume);
            cell_set(&row[COLUMN_MOLAR_DENSITY], 1.0 / spot->molar_volume);
        }
        cell_set(&row[COLUMN_Z], spot->Z);
        cell_set(&row[COLUMN_PHI], exp(spot->ln_phi));
        cell_set(&row[COLUMN_LN_PHI], spot->ln_phi);
        cell_set(&row[COLUMN_FUGACITY], spot->pressure * exp(spot->ln_phi));
    }
    for (size_t k = 0; k <= COLUMN_FUGACITY; k++) {
        row[k].is_outside_range = !spot->is_inside;
    }
}

static bool is_one_phase(const struct spot *spot)
{
    return spot->answer == ANSWER_OK && !spot->is_two_phase;
}

static void fill_row(const struct sheet_run *run, const struct method_run *method, const struct spot *spot,
                     const struct spot *lead, double second, struct cell *row)
{
    fill_swept(run, spot, second, row);
    if (spot->answer != ANSWER_OK) {
        cell_set_text(&row[COLUMN_STATE], no_answer_words(run, method, spot, second));
        return;
    }
    fill_state(run, spot, row);
    cell_set_text(&row[COLUMN_STATE], spot->state);
    if (lead != NULL && is_one_phase(spot) && is_one_phase(lead)) {
        const double f = spot->pressure * exp(spot->ln_phi), f_lead = lead->pressure * exp(lead->ln_phi);
        cell_set(&row[COLUMN_DEVIATION], f / f_lead - 1.0);
    }
}

static void add_state_table(const struct sheet_run *run, const struct method_run *method, const struct spot *spots,
                            const struct spot *lead)
{
    const size_t seconds = second_sweep(run)->count, count = run->sheet->temperatures.count * seconds;
    struct table *table = sheet_add_table(run->result, run->out, "fugacity", method->name);
    table->csv = lead == NULL ? run->sheet->table_csv : NULL;
    add_columns(run, table, lead == NULL);
    for (size_t i = 0; i < count; i++) {
        struct cell *row = table_add_row(run->result, table);
        fill_row(run, method, &spots[i], lead == NULL ? NULL : &lead[i], second_sweep(run)->values[i % seconds], row);
    }
}

/* The first state in one phase, by the method that leads. */
static void work_one_state(const struct sheet_run *run, struct method_run *method, const struct spot *spots)
{
    const size_t count = run->sheet->temperatures.count * second_sweep(run)->count;
    for (size_t i = 0; i < count; i++) {
        if (is_one_phase(&spots[i])) {
            const char *title = arena_format(run->arena, "state at %s and %s, %s",
                                             shown_text(run, look_temperature(run), spots[i].temperature),
                                             shown_text(run, look_pressure(run), spots[i].pressure), method->name);
            struct hand_check *check = sheet_add_hand_check(run->result, run->out, title);
            hand_check_pressure(run, check, method, spots[i].temperature, spots[i].molar_volume, spots[i].state, true);
            return;
        }
    }
}

/* ---- the sheet ------------------------------------------------------------------------------------------------- */

/* Two phases at a density: p V / (n R T) of both together. */
static double compressibility_of(const struct method_run *method, const struct spot *spot)
{
    return spot->is_two_phase ? spot->pressure * spot->molar_volume / (method->fluid->gas_constant * spot->temperature)
                              : spot->Z;
}

static void tell_caloric(const struct sheet_run *run, struct method_run *method, const struct spot *spots)
{
    const size_t count = run->sheet->temperatures.count * second_sweep(run)->count;
    struct caloric_table *table = caloric_table_begin(run, method);
    for (size_t i = 0; table != NULL && i < count; i++) {
        const struct spot *spot = &spots[i];
        if (is_one_phase(spot)) {
            const struct caloric_state state = {spot->state, spot->temperature, spot->pressure, spot->molar_volume,
                                                NULL,        spot->is_inside};
            caloric_table_add(table, &state);
        }
    }
}

static void tell_spread(const struct states *states, size_t method_count)
{
    const struct sheet_run *run = states->run;
    const struct case_sweep *second = second_sweep(run);
    const size_t count = run->sheet->temperatures.count * second->count;
    struct method_spread *spread = method_spread_create(run, states->methods, method_count, count);
    for (size_t m = 0; m < method_count; m++) {
        for (size_t i = 0; i < count; i++) {
            const struct spot *spot = &states->spots[m][i];
            if (spot->answer == ANSWER_OK) {
                method_spread_note(spread, m, i, compressibility_of(states->methods[m], spot), spot->is_inside);
            }
        }
    }
    const struct look look = !by_density(run)          ? look_pressure(run)
                             : second->is_mass_density ? look_density(run)
                                                       : look_molar_density();
    const struct spread_axis axis = {!by_density(run)          ? "pressure"
                                     : second->is_mass_density ? "density"
                                                               : "molar-density",
                                     look_significant(look, FUGACITY_DIGITS), second->count, second->values};
    method_spread_tell(spread, &axis);
}

void answer_fugacity(struct sheet_run *run)
{
    if (run->sheet->fluid->count > 1) {
        answer_mixture_fugacity(run);
        return;
    }
    size_t count;
    struct states states = {.run = run, .methods = methods_that_serve(run, &count)};
    run->result->is_undecided |= run->methods[0].fluid == NULL;
    solve_spots(&states, count);
    for (size_t m = 0; m < count; m++) {
        add_state_table(run, states.methods[m], states.spots[m], m == 0 ? NULL : states.spots[0]);
        if (m == 0) {
            work_one_state(run, states.methods[m], states.spots[m]);
        }
        tell_caloric(run, states.methods[m], states.spots[m]);
    }
    caloric_table_explain(run);
    tell_spread(&states, count);
}
