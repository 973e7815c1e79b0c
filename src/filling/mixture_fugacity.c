/* The sheet `fugacity` for a mixture: at each state its stable phases, what every component's fugacity is in each, and
 * the tangent-plane evidence that no phase is missing. */
#include "equilibrium/split.h"
#include "filling/caloric_table.h"
#include "filling/hand_check.h"
#include "filling/method_spread.h"
#include "filling/mixture_contents.h"
#include "filling/mixture_sheets.h"
#include "filling/sweep.h"

#include <assert.h>
#include <math.h>
#include <string.h>

enum { DIGITS = 6 };

/* The sweep as the tables go through it, for one method. */
struct sweeping {
    const struct sheet_run *run;
    struct method_run *method;
    size_t index; /* of the method */
    struct table *phases, *fugacities, *evidence;
    struct caloric_table *caloric; /* NULL: not asked for */
    struct method_spread *spread;  /* of all methods */
};

/* ---- columns ----------------------------------------------------------------------------------------------------- */

static struct look significant(struct look look)
{
    return look_significant(look, DIGITS);
}

static void add_state_columns(const struct sheet_run *run, struct table *table)
{
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, "pressure", significant(look_pressure(run)));
}

enum phase_column {
    PHASE_TEMPERATURE,
    PHASE_PRESSURE,
    PHASE_NAME,
    PHASE_AMOUNT,
    PHASE_DENSITY,
    PHASE_MOLAR_DENSITY,
    PHASE_Z
};

static struct table *begin_phases(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "stable phases", method->name);
    add_state_columns(run, table);
    table_add_word_column(result, table, "phase");
    table_add_column(result, table, "amount", significant(look_percent(0)));
    table_add_column(result, table, "density", significant(look_density(run)));
    table_add_column(result, table, "molar-density", significant(look_molar_density()));
    table_add_column(result, table, "compressibility-factor", look_ratio(-DIGITS));
    return table;
}

enum fugacity_column {
    FUGACITY_TEMPERATURE,
    FUGACITY_PRESSURE,
    FUGACITY_PHASE,
    FUGACITY_COMPONENT,
    FUGACITY_FRACTION,
    FUGACITY_PHI,
    FUGACITY_FUGACITY,
    FUGACITY_K
};

static struct table *begin_fugacities(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "fugacities of the components", method->name);
    add_state_columns(run, table);
    table_add_word_column(result, table, "phase");
    table_add_word_column(result, table, "component");
    table_add_column(result, table, "mole-fraction", look_ratio(-DIGITS));
    table_add_column(result, table, "fugacity-coefficient", look_ratio(-DIGITS));
    table_add_column(result, table, "fugacity", significant(look_pressure(run)));
    table_add_column(result, table, "K", look_ratio(-DIGITS));
    return table;
}

enum evidence_column {
    EVIDENCE_TEMPERATURE,
    EVIDENCE_PRESSURE,
    EVIDENCE_PHASES,
    EVIDENCE_DISTANCE,
    EVIDENCE_TRIALS,
    EVIDENCE_RESIDUAL,
    EVIDENCE_GAIN
};

static struct table *begin_evidence(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "evidence of stability", method->name);
    add_state_columns(run, table);
    table_add_column(result, table, "phases", look_ratio(0));
    table_add_column(result, table, "tangent-plane-distance", look_ratio(-3));
    table_add_column(result, table, "trial-phases", look_ratio(0));
    table_add_residual_column(result, table, "ln-fugacity-difference");
    table_add_column(result, table, "gibbs-energy-gain", look_ratio(-4));
    return table;
}

/* ---- one state --------------------------------------------------------------------------------------------------- */

static const char *phase_name(const struct sweeping *at, const struct split *split, size_t k)
{
    static const char *const liquids[] = {"liquid", "liquid 2", "liquid 3", "liquid 4", "liquid 5", "liquid 6"};
    static_assert(sizeof liquids / sizeof *liquids == MOST_PHASES, "a name for every phase");
    if (split->phase_count == 1) {
        return "one phase";
    }
    const bool has_vapour = !mixture_is_liquid(at->method, split, 0);
    return has_vapour && k == 0 ? "vapour" : liquids[has_vapour ? k - 1 : k];
}

static void add_phase(const struct sweeping *at, const struct split *split, size_t k, bool is_inside)
{
    const struct split_phase *phase = &split->phase[k];
    const double molar_mass = mixture_molar_mass(at->method, phase->x);
    struct cell *row = table_add_row(at->run->result, at->phases);
    cell_set(&row[PHASE_TEMPERATURE], split->temperature);
    cell_set(&row[PHASE_PRESSURE], split->pressure);
    cell_set_text(&row[PHASE_NAME], phase_name(at, split, k));
    cell_set(&row[PHASE_AMOUNT], phase->fraction);
    cell_set(&row[PHASE_DENSITY], molar_mass / phase->molar_volume);
    cell_set(&row[PHASE_MOLAR_DENSITY], 1.0 / phase->molar_volume);
    cell_set(&row[PHASE_Z], phase->Z);
    for (size_t i = PHASE_DENSITY; i <= PHASE_Z; i++) {
        row[i].is_outside_range = !is_inside;
    }
}

/* K is the fraction in the lightest phase over that in the phase of the row. */
static void add_fugacities(const struct sweeping *at, const struct split *split, size_t k)
{
    const struct split_phase *phase = &split->phase[k];
    for (size_t i = 0; i < at->method->fluid->count; i++) {
        struct cell *row = table_add_row(at->run->result, at->fugacities);
        cell_set(&row[FUGACITY_TEMPERATURE], split->temperature);
        cell_set(&row[FUGACITY_PRESSURE], split->pressure);
        cell_set_text(&row[FUGACITY_PHASE], phase_name(at, split, k));
        cell_set_text(&row[FUGACITY_COMPONENT], at->run->sheet->fluid->components[i]->name);
        cell_set(&row[FUGACITY_FRACTION], phase->x[i]);
        cell_set(&row[FUGACITY_PHI], exp(phase->ln_phi[i]));
        cell_set(&row[FUGACITY_FUGACITY], phase->x[i] * split->pressure * exp(phase->ln_phi[i]));
        if (k > 0 && phase->x[i] > 0.0) {
            cell_set(&row[FUGACITY_K], split->phase[0].x[i] / phase->x[i]);
        }
    }
}

static void add_evidence(const struct sweeping *at, const struct split *split)
{
    struct cell *row = table_add_row(at->run->result, at->evidence);
    cell_set(&row[EVIDENCE_TEMPERATURE], split->temperature);
    cell_set(&row[EVIDENCE_PRESSURE], split->pressure);
    cell_set(&row[EVIDENCE_PHASES], (double)split->phase_count);
    cell_set(&row[EVIDENCE_DISTANCE], split->smallest_tpd);
    cell_set(&row[EVIDENCE_TRIALS], (double)split->trials);
    cell_set(&row[EVIDENCE_RESIDUAL], split->residual);
    cell_set(&row[EVIDENCE_GAIN], split->gibbs_gain);
}

static void add_no_answer(const struct sweeping *at, double temperature, const char *second)
{
    const struct sheet_run *run = at->run;
    struct cell *row = table_add_row(run->result, at->phases);
    cell_set(&row[PHASE_TEMPERATURE], temperature);
    cell_set_text(&row[PHASE_NAME], "no answer");
    result_warn(run->result, CODE_W303, location_line(run->sheet->at), run->number, "%s, %s: no state found at %s, %s",
                run->sheet->fluid->name, at->method->name, shown_text(run, look_temperature(run), temperature), second);
    if (at->method == &run->methods[0]) {
        run->result->is_undecided = true;
    }
}

static const struct case_sweep *second_sweep(const struct sheet_run *run)
{
    return run->sheet->densities.given ? &run->sheet->densities : &run->sheet->pressures;
}

/* Point `index` of the sweep, temperature by temperature. */
static enum answer solve_state(const struct sheet_run *run, struct method_run *method, size_t index,
                               const struct split **split)
{
    const struct case_sweep *sweep = second_sweep(run);
    const double temperature = run->sheet->temperatures.values[index / sweep->count];
    const double second = sweep->values[index % sweep->count];
    const enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer != ANSWER_OK || !run->sheet->densities.given) {
        return answer != ANSWER_OK ? answer : mixture_split(method, second, split);
    }
    const double molar_density = sweep->is_mass_density ? second / method->molar_mass : second;
    return mixture_split_at_volume(method, 1.0 / molar_density, split);
}

static const char *second_words(const struct sheet_run *run, double second)
{
    if (!run->sheet->densities.given) {
        return shown_text(run, look_pressure(run), second);
    }
    return shown_text(run, run->sheet->densities.is_mass_density ? look_density(run) : look_molar_density(), second);
}

static void work_by_hand(const struct sweeping *at, const struct split *split)
{
    const struct sheet_run *run = at->run;
    struct hand_check *check = sheet_add_hand_check(
        run->result, run->out,
        arena_format(run->arena, "state at %s and %s, %s", shown_text(run, look_temperature(run), split->temperature),
                     shown_text(run, look_pressure(run), split->pressure), at->method->name));
    for (size_t k = 0; k < split->phase_count; k++) {
        const struct mixture_state state = {split->temperature, split->phase[k].molar_volume, split->phase[k].x};
        if (k == 0) {
            hand_check_mixture_components(run, check, at->method, &state);
        }
        hand_check_mixture_phase(run, check, at->method, &state, phase_name(at, split, k), true);
    }
}

/* ---- the sweep --------------------------------------------------------------------------------------------------- */

/* A state with the memory for its phases' arrays. */
struct swept_split {
    enum answer answer;
    struct split split;
    double arrays[]; /* [MOST_PHASES * 2 * components]: x and ln phi of each phase */
};

static void solve_swept(const void *context, struct method_run *method, size_t index, void *out)
{
    const size_t components = method->fluid->count;
    struct swept_split *state = out;
    const struct split *split;
    state->answer = solve_state(context, method, index, &split);
    if (state->answer != ANSWER_OK) {
        return;
    }
    state->split = *split;
    for (size_t k = 0; k < split->phase_count; k++) {
        double *arrays = &state->arrays[2 * k * components];
        state->split.phase[k].x = memcpy(arrays, split->phase[k].x, components * sizeof *arrays);
        state->split.phase[k].ln_phi = memcpy(arrays + components, split->phase[k].ln_phi, components * sizeof *arrays);
    }
}

/* The axis that stands beside the temperature. */
static struct spread_axis second_axis(const struct sheet_run *run)
{
    const struct case_sweep *second = second_sweep(run);
    struct spread_axis axis = {"pressure", significant(look_pressure(run)), second->count, second->values};
    if (run->sheet->densities.given) {
        axis.name = second->is_mass_density ? "density" : "molar-density";
        axis.look = significant(second->is_mass_density ? look_density(run) : look_molar_density());
    }
    return axis;
}

static void tell_swept(void *teller, size_t method, size_t index, const void *answer)
{
    const struct sweeping *at = &((const struct sweeping *)teller)[method];
    const struct swept_split *state = answer;
    const struct split *split = &state->split;
    const struct case_sweep *second = second_sweep(at->run);
    const double temperature = at->run->sheet->temperatures.values[index / second->count];
    if (state->answer != ANSWER_OK) {
        add_no_answer(at, temperature, second_words(at->run, second->values[index % second->count]));
        return;
    }
    const bool is_inside = warn_outside_range(at->run, at->method, temperature, split->pressure);
    double Z = 0.0;
    for (size_t k = 0; k < split->phase_count; k++) {
        add_phase(at, split, k, is_inside);
        add_fugacities(at, split, k);
        const struct split_phase *phase = &split->phase[k];
        const struct caloric_state caloric = {phase_name(at, split, k), temperature, split->pressure,
                                              phase->molar_volume,      phase->x,    is_inside};
        caloric_table_add(at->caloric, &caloric);
        Z += split->phase[k].fraction * split->phase[k].Z;
    }
    method_spread_note(at->spread, at->index, index, Z, is_inside);
    add_evidence(at, split);
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static struct sweeping begin_sweeping(const struct sheet_run *run, struct method_run *method, bool is_lead)
{
    struct sweeping at = {.run = run, .method = method};
    at.phases = begin_phases(run, method);
    at.fugacities = begin_fugacities(run, method);
    at.evidence = begin_evidence(run, method);
    at.caloric = caloric_table_begin(run, method);
    at.fugacities->csv = is_lead ? run->sheet->table_csv : NULL;
    const struct split *split;
    if (is_lead && solve_state(run, method, 0, &split) == ANSWER_OK) {
        work_by_hand(&at, split);
    }
    return at;
}

void answer_mixture_fugacity(struct sheet_run *run)
{
    size_t count;
    struct method_run **methods = methods_that_serve(run, &count);
    struct sweeping *each = arena_alloc(run->arena, count, sizeof *each);
    run->result->is_undecided |= run->methods[0].fluid == NULL;
    const size_t points = run->sheet->temperatures.count * second_sweep(run)->count;
    struct method_spread *spread = method_spread_create(run, methods, count, points);
    for (size_t m = 0; m < count; m++) {
        each[m] = begin_sweeping(run, methods[m], m == 0);
        each[m].index = m;
        each[m].spread = spread;
    }
    const struct sweep sweep = {
        .run = run,
        .point_count = points,
        .method_count = count,
        .methods = methods,
        .answer_size = sizeof(struct swept_split) + 2 * MOST_PHASES * run->sheet->fluid->count * sizeof(double),
        .context = run,
        .solve = solve_swept,
        .tell = tell_swept,
        .teller = each,
    };
    sweep_points(&sweep);
    const struct spread_axis second = second_axis(run);
    caloric_table_explain(run);
    method_spread_tell(spread, &second);
    sheet_add_note(run->result, run->out,
                   "K: mole fraction in the lightest phase over that in the phase of the row; tangent-plane distance: "
                   "the least of all trial phases, by RT and mole, negative only by rounding for a stable answer");
}
