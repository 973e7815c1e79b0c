/* The sheet `saturation`: the boiling line of a pure gas by equal fugacity, method beside method, the classical
 * iteration written out where it is asked for, and the hand check of one point. */
#include "filling/hand_check.h"
#include "filling/melting_line.h"
#include "filling/mixture_sheets.h"
#include "filling/sheet.h"
#include "filling/sublimation_line.h"
#include "filling/sweep.h"

#include <math.h>

enum { MOST_PASSES = 40, SATURATION_DIGITS = 7 };

/* The columns, in the order they are added. */
enum line_column {
    LINE_TEMPERATURE,
    LINE_PRESSURE,
    LINE_LIQUID_DENSITY,
    LINE_VAPOUR_DENSITY,
    LINE_LATENT_HEAT,
    LINE_DEVIATION /* but for the lead's; the state in words is the last column */
};

enum evidence_column {
    EVIDENCE_TEMPERATURE,
    EVIDENCE_PRESSURE,
    EVIDENCE_LIQUID_Z,
    EVIDENCE_VAPOUR_Z,
    EVIDENCE_LN_PHI,
    EVIDENCE_FUGACITY,
    EVIDENCE_DIFFERENCE
};

/* One point of the line by one method. */
struct point {
    enum answer answer;
    struct saturation saturation;
    bool has_latent_heat;
    double latent_heat; /* J/kg */
    bool is_inside;     /* the method's published range */
};

static bool by_pressure(const struct sheet_run *run)
{
    return run->sheet->pressures.given && !run->sheet->temperatures.given;
}

static const struct case_sweep *sweep_of(const struct sheet_run *run)
{
    return by_pressure(run) ? &run->sheet->pressures : &run->sheet->temperatures;
}

/* ---- solving --------------------------------------------------------------------------------------------------- */

/* The ideal parts of both phases are equal at the same temperature, so that residual enthalpies are enough. */
static bool latent_heat_of(const struct sheet_run *run, const struct method_run *method,
                           const struct saturation *saturation, double *latent_heat)
{
    const double one = 1.0;
    struct pure_arrays arrays;
    struct phase vapour, liquid;
    phase_of_pure(&vapour, &arrays);
    phase_of_pure(&liquid, &arrays);
    if ((method->fluid->ops->capabilities & CAN_CALORIC) == 0 ||
        phase_tv(method->at_t, saturation->vapour_volume, &one, PHASE_RESIDUAL, &vapour) != ANSWER_OK ||
        phase_tv(method->at_t, saturation->liquid_volume, &one, PHASE_RESIDUAL, &liquid) != ANSWER_OK) {
        return false;
    }
    const double RT = method->fluid->gas_constant * saturation->temperature;
    *latent_heat = RT * (vapour.residual_enthalpy_rt - liquid.residual_enthalpy_rt) / run->sheet->fluid->molar_mass;
    return true;
}

/* The lines of a sheet as they are solved. */
struct lines {
    const struct sheet_run *run;
    struct method_run **methods; /* those with a liquid */
    struct point **points;       /* by each of them, in the order of the sweep */
};

static void solve_point(const void *context, struct method_run *method, size_t index, void *answer)
{
    const struct lines *lines = context;
    const double swept = sweep_of(lines->run)->values[index];
    struct point *point = answer;
    *point = (struct point){.is_inside = true};
    if (by_pressure(lines->run)) {
        point->answer = saturation_at_p(method->at_t, method->fluid, swept, &point->saturation);
    } else {
        point->answer = fluid_set_t(method->at_t, method->fluid, swept);
        if (point->answer == ANSWER_OK) {
            point->answer = saturation_at_t(method->at_t, &point->saturation);
        }
    }
    if (point->answer == ANSWER_OK) {
        point->has_latent_heat = latent_heat_of(lines->run, method, &point->saturation, &point->latent_heat);
    }
}

static void keep_point(void *teller, size_t method, size_t index, const void *answer)
{
    const struct lines *lines = teller;
    struct point *point = &lines->points[method][index];
    *point = *(const struct point *)answer;
    if (point->answer == ANSWER_OK) {
        point->is_inside = warn_outside_range(lines->run, lines->methods[method], point->saturation.temperature,
                                              point->saturation.pressure);
    }
}

static void solve_lines(struct lines *lines, size_t method_count)
{
    const struct sheet_run *run = lines->run;
    const size_t count = sweep_of(run)->count;
    lines->points = arena_alloc(run->arena, method_count, sizeof *lines->points);
    for (size_t m = 0; m < method_count; m++) {
        lines->points[m] = arena_alloc(run->arena, count, sizeof **lines->points);
    }
    const struct sweep sweep = {
        .run = run,
        .point_count = count,
        .method_count = method_count,
        .methods = lines->methods,
        .answer_size = sizeof(struct point),
        .context = lines,
        .solve = solve_point,
        .tell = keep_point,
        .teller = lines,
    };
    sweep_points(&sweep);
}

/* ---- the state in words ---------------------------------------------------------------------------------------- */

static const char *critical_words(const struct sheet_run *run, const struct method_run *method)
{
    if (by_pressure(run)) {
        return arena_format(run->arena, "above the critical pressure, %s",
                            shown_text(run, look_pressure(run), method->critical.pressure));
    }
    return arena_format(run->arena, "above the critical temperature, %s",
                        shown_text(run, look_temperature(run), method->critical.temperature));
}

static const char *undercooled_words(const struct sheet_run *run, const struct method_run *method, double temperature)
{
    const struct optional triple = run->sheet->fluid->spec.pure[0]->triple_temperature;
    if (!triple.given || temperature >= triple.value * (1.0 - TEMPERATURE_ROUNDING)) {
        return "vapour + liquid";
    }
    result_warn(run->result, CODE_W350, location_line(run->sheet->at), run->number,
                "%s, %s: states below the triple point at %s are of an undercooled liquid", run->sheet->fluid->name,
                method->name, shown_text(run, look_temperature(run), triple.value));
    return "undercooled liquid";
}

static const char *state_words(const struct sheet_run *run, const struct method_run *method, double swept,
                               const struct point *point)
{
    switch (point->answer) {
    case ANSWER_OK:
        return undercooled_words(run, method, point->saturation.temperature);
    case ANSWER_NO_SUCH_ROOT:
        return critical_words(run, method);
    case ANSWER_OUT_OF_RANGE:
    case ANSWER_CANNOT:
    case ANSWER_FAILED:
        break;
    }
    result_warn(run->result, CODE_W303, location_line(run->sheet->at), run->number, "%s, %s: no saturation found at %s",
                run->sheet->fluid->name, method->name,
                by_pressure(run) ? shown_text(run, look_pressure(run), swept)
                                 : shown_text(run, look_temperature(run), swept));
    if (method == &run->methods[0]) {
        run->result->is_undecided = true;
    }
    return "no answer";
}

/* ---- the tables ------------------------------------------------------------------------------------------------ */

static struct look significant_pressure(const struct sheet_run *run)
{
    return look_significant(look_pressure(run), SATURATION_DIGITS);
}

static struct look significant_density(const struct sheet_run *run)
{
    return look_significant(look_density(run), SATURATION_DIGITS);
}

static void add_line_columns(const struct sheet_run *run, struct table *table, bool is_lead)
{
    const struct look kelvin_apart = {"K", {"K", 1.0, 0.0}, 3};
    struct look temperature = look_temperature(run);
    temperature.decimals += by_pressure(run) ? 2 : 0;
    table_add_column(run->result, table, "temperature", temperature);
    table_add_column(run->result, table, "pressure", significant_pressure(run));
    table_add_column(run->result, table, "liquid-density", significant_density(run));
    table_add_column(run->result, table, "vapour-density", significant_density(run));
    table_add_column(run->result, table, "latent-heat", (struct look){"J/kg", {"kJ/kg", 1e3, 0.0}, 2});
    if (!is_lead) {
        table_add_column(run->result, table, by_pressure(run) ? "temperature-deviation" : "pressure-deviation",
                         by_pressure(run) ? kelvin_apart : look_percent(3));
    }
    table_add_word_column(run->result, table, "state");
}

static double deviation_of(const struct sheet_run *run, const struct point *point, const struct point *lead)
{
    if (by_pressure(run)) {
        return point->saturation.temperature - lead->saturation.temperature;
    }
    return point->saturation.pressure / lead->saturation.pressure - 1.0;
}

static void fill_line_row(const struct sheet_run *run, const struct point *point, struct cell *row)
{
    const double M = run->sheet->fluid->molar_mass;
    cell_set(&row[LINE_TEMPERATURE], point->saturation.temperature);
    cell_set(&row[LINE_PRESSURE], point->saturation.pressure);
    cell_set(&row[LINE_LIQUID_DENSITY], M / point->saturation.liquid_volume);
    cell_set(&row[LINE_VAPOUR_DENSITY], M / point->saturation.vapour_volume);
    if (point->has_latent_heat) {
        cell_set(&row[LINE_LATENT_HEAT], point->latent_heat);
    }
    for (size_t i = 0; i <= LINE_LATENT_HEAT; i++) {
        row[i].is_outside_range = !point->is_inside;
    }
}

static void add_line_table(const struct sheet_run *run, const struct method_run *method, const struct point *points,
                           const struct point *lead)
{
    const struct case_sweep *sweep = sweep_of(run);
    const bool is_lead = lead == NULL;
    struct table *table = sheet_add_table(run->result, run->out, "saturation line", method->name);
    table->csv = is_lead ? run->sheet->table_csv : NULL;
    add_line_columns(run, table, is_lead);
    for (size_t i = 0; i < sweep->count; i++) {
        struct cell *row = table_add_row(run->result, table);
        if (points[i].answer == ANSWER_OK) {
            fill_line_row(run, &points[i], row);
            if (!is_lead && lead[i].answer == ANSWER_OK) {
                cell_set(&row[LINE_DEVIATION], deviation_of(run, &points[i], &lead[i]));
            }
        }
        cell_set(&row[by_pressure(run) ? LINE_PRESSURE : LINE_TEMPERATURE], sweep->values[i]);
        cell_set_text(&row[table->column_count - 1], state_words(run, method, sweep->values[i], &points[i]));
    }
}

static void add_evidence_table(const struct sheet_run *run, const struct method_run *method, const struct point *points)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "equality of the fugacities", method->name);
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_column(result, table, "pressure", significant_pressure(run));
    table_add_column(result, table, "liquid-compressibility-factor", look_ratio(-7));
    table_add_column(result, table, "vapour-compressibility-factor", look_ratio(7));
    table_add_column(result, table, "ln-fugacity-coefficient", look_ratio(8));
    table_add_column(result, table, "fugacity", significant_pressure(run));
    table_add_residual_column(result, table, "ln-fugacity-difference");
    for (size_t i = 0; i < sweep_of(run)->count; i++) {
        const struct saturation *point = &points[i].saturation;
        if (points[i].answer != ANSWER_OK) {
            continue;
        }
        const double p_over_RT = point->pressure / (method->fluid->gas_constant * point->temperature);
        struct cell *row = table_add_row(result, table);
        cell_set(&row[EVIDENCE_TEMPERATURE], point->temperature);
        cell_set(&row[EVIDENCE_PRESSURE], point->pressure);
        cell_set(&row[EVIDENCE_LIQUID_Z], p_over_RT * point->liquid_volume);
        cell_set(&row[EVIDENCE_VAPOUR_Z], p_over_RT * point->vapour_volume);
        cell_set(&row[EVIDENCE_LN_PHI], point->ln_phi_vapour);
        cell_set(&row[EVIDENCE_FUGACITY], point->pressure * exp(point->ln_phi_vapour));
        cell_set(&row[EVIDENCE_DIFFERENCE], point->residual);
        for (size_t k = 0; k <= EVIDENCE_DIFFERENCE; k++) {
            row[k].is_outside_range = !points[i].is_inside;
        }
    }
}

/* ---- the iteration, pass by pass ------------------------------------------------------------------------------- */

static double rounded_to_digits(double value, int digits)
{
    const double place = pow(10.0, floor(log10(value)) + 1.0 - digits);
    return round(value / place) * place;
}

/* Starts that a reader can retrace, the roughest first: Wilson's estimate, then the answer itself cut to fewer and
 * fewer digits, until both phases exist at the trial pressure. */
static double start_of(const struct sheet_run *run, const struct method_run *method, const struct saturation *answer,
                       int attempt, const char **words)
{
    const struct optional acentric = run->sheet->fluid->spec.pure[0]->acentric;
    if (attempt == 0 && acentric.given && method->has_critical) {
        *words = "pc exp(5.373 (1 + omega)(1 - Tc / T)), Wilson's estimate, rounded to two digits";
        const double exponent =
            5.373 * (1.0 + acentric.value) * (1.0 - method->critical.temperature / answer->temperature);
        return rounded_to_digits(method->critical.pressure * exp(exponent), 2);
    }
    *words = attempt <= 1 ? "the saturation pressure to one digit" : "the saturation pressure to a few digits";
    return rounded_to_digits(answer->pressure, attempt <= 1 ? 1 : attempt);
}

enum { MOST_STARTS = 6 };

static size_t find_passes(const struct sheet_run *run, const struct method_run *method, const struct saturation *answer,
                          struct saturation_pass passes[MOST_PASSES], const char **words)
{
    for (int attempt = 0; attempt < MOST_STARTS; attempt++) {
        size_t count = 0;
        const double start = start_of(run, method, answer, attempt, words);
        if (saturation_passes(method->at_t, start, MOST_PASSES, passes, &count) == ANSWER_OK && count > 0) {
            return count;
        }
    }
    return 0;
}

static void add_pass_table(const struct sheet_run *run, const struct method_run *method, double temperature,
                           const struct saturation_pass *passes, size_t count)
{
    struct result *result = run->result;
    const struct look pressure = look_significant(look_pressure(run), 10);
    struct table *table = sheet_add_table(
        result, run->out,
        arena_format(run->arena, "iteration at %s", shown_text(run, look_temperature(run), temperature)), method->name);
    table_add_column(result, table, "pass", look_ratio(0));
    table_add_column(result, table, "trial-pressure", pressure);
    table_add_column(result, table, "vapour-compressibility-factor", look_ratio(8));
    table_add_column(result, table, "liquid-compressibility-factor", look_ratio(-8));
    table_add_column(result, table, "vapour-fugacity", pressure);
    table_add_column(result, table, "liquid-fugacity", pressure);
    table_add_column(result, table, "next-pressure", pressure);
    for (size_t i = 0; i < count; i++) {
        struct cell *row = table_add_row(result, table);
        const double values[] = {(double)(i + 1),        passes[i].pressure,        passes[i].Z_vapour,
                                 passes[i].Z_liquid,     passes[i].fugacity_vapour, passes[i].fugacity_liquid,
                                 passes[i].next_pressure};
        for (size_t k = 0; k < sizeof values / sizeof *values; k++) {
            cell_set(&row[k], values[k]);
        }
    }
}

static bool has_converged(const struct saturation_pass *last)
{
    return fabs(log(last->fugacity_vapour / last->fugacity_liquid)) <= SATURATION_LN_F_TOLERANCE;
}

static void show_iteration(const struct sheet_run *run, const struct method_run *lead, const struct point *point)
{
    struct saturation_pass passes[MOST_PASSES];
    const char *words = NULL;
    const struct saturation *answer = &point->saturation;
    if (fluid_set_t(lead->at_t, lead->fluid, answer->temperature) != ANSWER_OK) {
        return;
    }
    const size_t count = find_passes(run, lead, answer, passes, &words);
    if (count == 0) {
        sheet_add_note(run->result, run->out, "The iteration at %s found no trial pressure with both phases.",
                       shown_text(run, look_temperature(run), answer->temperature));
        return;
    }
    sheet_add_note(run->result, run->out, "Iteration p(next) = p fL(p) / fV(p), started at %s: %s.",
                   shown_text(run, look_significant(look_pressure(run), SATURATION_DIGITS), passes[0].pressure), words);
    add_pass_table(run, lead, answer->temperature, passes, count);
    if (!has_converged(&passes[count - 1])) {
        result_warn(run->result, CODE_W351, location_line(run->sheet->at), run->number,
                    "%s, %s: the iteration at %s is shown for %zu passes and has not ended; the line above is solved "
                    "in the volumes and has",
                    run->sheet->fluid->name, lead->name, shown_text(run, look_temperature(run), answer->temperature),
                    count);
    }
}

/* ---- the sheet ------------------------------------------------------------------------------------------------- */

static const struct point *first_answer(const struct sheet_run *run, const struct point *points)
{
    for (size_t i = 0; i < sweep_of(run)->count; i++) {
        if (points[i].answer == ANSWER_OK) {
            return &points[i];
        }
    }
    return NULL;
}

/* The point that is worked by hand: where the iteration is asked for, else the first of the sweep. */
static bool worked_point(const struct sheet_run *run, struct method_run *lead, const struct point *points,
                         struct point *worked)
{
    if (run->sheet->show_iteration && run->sheet->iteration_at.given) {
        worked->is_inside = true;
        worked->answer = fluid_set_t(lead->at_t, lead->fluid, run->sheet->iteration_at.value);
        if (worked->answer == ANSWER_OK) {
            worked->answer = saturation_at_t(lead->at_t, &worked->saturation);
        }
        if (worked->answer == ANSWER_OK) {
            return true;
        }
        sheet_add_note(run->result, run->out, "No iteration at %s: there is no saturation by %s.",
                       shown_text(run, look_temperature(run), run->sheet->iteration_at.value), lead->name);
    }
    const struct point *first = first_answer(run, points);
    if (first != NULL) {
        *worked = *first;
    }
    return first != NULL;
}

static void work_one_point(struct sheet_run *run, struct method_run *lead, const struct point *points)
{
    struct point worked = {.is_inside = true};
    if (!worked_point(run, lead, points, &worked)) {
        return;
    }
    if (run->sheet->show_iteration) {
        show_iteration(run, lead, &worked);
    }
    struct hand_check *check = sheet_add_hand_check(
        run->result, run->out,
        arena_format(run->arena, "saturation at %s, %s",
                     shown_text(run, look_temperature(run), worked.saturation.temperature), lead->name));
    hand_check_saturation(run, check, lead, &worked.saturation);
}

static bool has_liquid(const struct sheet_run *run, const struct method_run *method)
{
    if (method->fluid == NULL) {
        return false; /* said once for all sheets, where methods are made ready */
    }
    if ((method->fluid->ops->capabilities & CAN_LIQUID) == 0) {
        sheet_add_note(run->result, run->out, "%s has no liquid and therefore no saturation line.", method->name);
        return false;
    }
    return true;
}

void answer_saturation(struct sheet_run *run)
{
    if (run->sheet->fluid->count > 1) {
        answer_mixture_saturation(run);
        return;
    }
    struct lines lines = {.run = run, .methods = arena_alloc(run->arena, run->method_count, sizeof *lines.methods)};
    size_t count = 0;
    for (size_t i = 0; i < run->method_count; i++) {
        if (has_liquid(run, &run->methods[i])) {
            lines.methods[count++] = &run->methods[i];
        } else {
            run->result->is_undecided |= i == 0;
        }
    }
    solve_lines(&lines, count);
    for (size_t m = 0; m < count; m++) {
        add_line_table(run, lines.methods[m], lines.points[m], m == 0 ? NULL : lines.points[0]);
        add_evidence_table(run, lines.methods[m], lines.points[m]);
        tell_sublimation_line(run, lines.methods[m]);
        if (m == 0) {
            work_one_point(run, lines.methods[m], lines.points[m]);
        }
    }
    tell_melting_line(run);
}
