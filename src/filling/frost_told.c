#include "filling/frost_told.h"

#include "filling/frost.h"
#include "filling/hand_check.h"
#include "filling/mixture_contents.h"
#include "filling/requirement.h"

#include <math.h>

/* ---- the table --------------------------------------------------------------------------------------------------- */

enum frost_column {
    FROST_METHOD,
    FROST_TEMPERATURE,
    FROST_PRESSURE,
    FROST_DENSITY,
    FROST_COMPONENT,
    FROST_SUBLIMATION,
    FROST_IDEAL_PRESSURE,
    FROST_ENHANCEMENT,
    FROST_OFFSET
};

static struct table *begin_table(const struct sheet_run *run, const char *title)
{
    struct result *result = run->result;
    const struct look significant = look_significant(look_pressure(run), 4);
    struct table *table = sheet_add_table(result, run->out, title, NULL);
    table_add_word_column(result, table, "method");
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_column(result, table, "frost-pressure", significant);
    table_add_column(result, table, "density", look_significant(look_density(run), 4));
    table_add_word_column(result, table, "freezing");
    table_add_column(result, table, "sublimation-pressure", significant);
    table_add_column(result, table, "ideal-pressure", significant);
    table_add_column(result, table, "enhancement", look_ratio(-4));
    table_add_column(result, table, "triple-point-offset", look_percent(2));
    return table;
}

/* By how much the method's vapour pressure at the triple point misses the sublimation line; NaN without an answer. */
static double triple_point_offset(const struct sheet_run *run, struct method_run *method, size_t component)
{
    const struct solid_spec *solid = run->sheet->fluid->components[component]->spec.solid;
    struct method_run *pure = method->mixture == NULL ? method : mixture_alone(method, component);
    struct phase_edges edges;
    double slope;
    if (edges_at(pure, solid->largest_temperature, &edges) != ANSWER_OK || !edges.high_is_bubble) {
        return (double)NAN;
    }
    return edges.high_pressure / solid_sublimation_pressure(solid, solid->largest_temperature, &slope) - 1.0;
}

/* Whether what freezes there is above its triple point. */
static bool add_row(const struct sheet_run *run, struct table *table, struct method_run *method, double temperature,
                    const struct frost_limit *limit)
{
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[FROST_METHOD], method->name);
    cell_set(&row[FROST_TEMPERATURE], temperature);
    if (!limit->forms) {
        cell_set_text(&row[FROST_COMPONENT], "none");
        return false;
    }
    cell_set(&row[FROST_PRESSURE], limit->at.pressure);
    cell_set(&row[FROST_DENSITY], method->molar_mass / limit->molar_volume);
    cell_set_text(&row[FROST_COMPONENT], run->sheet->fluid->components[limit->at.component]->name);
    if (limit->at.solid.line == SOLID_MELTS) {
        return true; /* no rule of partial pressures to hold it against */
    }
    cell_set(&row[FROST_SUBLIMATION], limit->at.solid.line_pressure);
    cell_set(&row[FROST_IDEAL_PRESSURE], limit->ideal_pressure);
    cell_set(&row[FROST_ENHANCEMENT], limit->at.pressure / limit->ideal_pressure);
    const double offset = triple_point_offset(run, method, limit->at.component);
    if (isfinite(offset)) {
        cell_set(&row[FROST_OFFSET], offset);
    }
    return false;
}

/* `melts`: a row of the table is above the triple point of what freezes. */
static void tell_meaning(const struct sheet_run *run, bool melts)
{
    sheet_add_note(
        run->result, run->out,
        "frost: the lowest density at which a component's fugacity in the fluid reaches that of its solid, "
        "f = p_sub phi(p_sub) exp(v (p - p_sub) / (R T)); ideal: where its partial pressure is the "
        "sublimation pressure; enhancement: the one pressure over the other; triple-point offset: of the method's "
        "vapour pressure there against the sublimation line");
    if (melts) {
        sheet_add_note(run->result, run->out,
                       "above the triple point of what freezes, where no sublimation pressure is told, f is that of "
                       "its liquid at the melting pressure: f = p_melt phi(p_melt) exp(v (p - p_melt) / (R T))");
    }
}

/* ---- by hand ----------------------------------------------------------------------------------------------------- */

void hand_check_frost(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                      double temperature)
{
    struct frost_limit limit;
    if (frost_limit_at(run->sheet->fluid, method, temperature, &limit) != ANSWER_OK || !limit.forms) {
        return;
    }
    const struct solid_state *solid = &limit.at.solid;
    const struct case_component *former = run->sheet->fluid->components[limit.at.component];
    struct explanation numbers = {.count = 0};
    hand_check_line(run->result, check, "solid %s:", former->name);
    hand_check_put(&numbers, "R", "gas constant", NULL, "J/mol/K", method->fluid->gas_constant);
    hand_check_put(&numbers, "T", "temperature", NULL, "K", temperature);
    hand_check_put(&numbers, "p", "pressure of the fluid", NULL, "Pa", limit.at.pressure);
    hand_check_put_solid(&numbers, solid);
    hand_check_put(&numbers, "x", "mole fraction in the fluid", NULL, "1", limit.at.x);
    hand_check_put(&numbers, "phi", "its fugacity coefficient in the fluid", NULL, "1", exp(limit.at.ln_phi));
    hand_check_put(&numbers, "f_fluid", "fugacity in the fluid", "x * p * phi", "Pa",
                   limit.at.x * limit.at.pressure * exp(limit.at.ln_phi));
    hand_check_numbers(run, check, &numbers);
}

/* ---- the criteria of a permissible charge ------------------------------------------------------------------------ */

static void tell_criterion(const struct permissible *sheet, size_t index)
{
    struct sheet_run *run = sheet->run;
    const char *written = sheet->criteria[index].predicate->written;
    struct table *table = NULL;
    bool melts = false;
    for (size_t m = 0; m < run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        struct frost_limit limit;
        if (of->method == NULL || of->limits[index].answer != ANSWER_OK) {
            continue;
        }
        const double worst = of->limits[index].finding.worst_temperature;
        if (frost_limit_at(run->sheet->fluid, of->method, worst, &limit) == ANSWER_OK) {
            table = table != NULL
                        ? table
                        : begin_table(run, arena_format(run->arena,
                                                        "frost limit of '%s', beside the rule of partial pressures",
                                                        written));
            melts = add_row(run, table, of->method, worst, &limit) || melts;
        }
    }
    if (table == NULL) {
        return;
    }
    tell_meaning(run, melts);
    struct frost_limit governing;
    const struct method_limits *of = &sheet->by_method[sheet->governing.given ? sheet->governing.index : 0];
    if (of->method != NULL && of->limits[index].answer == ANSWER_OK) {
        const double worst = of->limits[index].finding.worst_temperature;
        if (frost_limit_at(run->sheet->fluid, of->method, worst, &governing) != ANSWER_OK || !governing.forms) {
            return;
        }
        struct hand_check *check = sheet_add_hand_check(
            run->result, run->out,
            arena_format(run->arena, "frost at %s, %s", temperature_words(run, worst), of->method->name));
        hand_check_frost(run, check, of->method, worst);
    }
}

void tell_frost_limits(const struct permissible *sheet)
{
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        if (sheet->criteria[i].predicate->kind == PREDICATE_NO_SOLID) {
            tell_criterion(sheet, i);
        }
    }
}

/* ---- the swept temperatures of a filled vessel ------------------------------------------------------------------- */

void tell_frost_line(struct sheet_run *run)
{
    const struct case_sheet *sheet = run->sheet;
    struct table *table = NULL;
    bool melts = false;
    if (!sheet->asks_of_solids) {
        return;
    }
    for (size_t m = 0; m < run->method_count; m++) {
        struct method_run *method = &run->methods[m];
        for (size_t k = 0; method->fluid != NULL && k < sheet->temperatures.count; k++) {
            const double temperature = sheet->temperatures.values[k];
            struct frost_limit limit;
            if (frost_unknown(sheet->fluid, temperature) == NULL &&
                frost_is_possible(sheet->fluid, method, temperature) &&
                frost_limit_at(sheet->fluid, method, temperature, &limit) == ANSWER_OK &&
                (limit.forms || limit.may_sublime)) {
                table = table != NULL ? table : begin_table(run, "where the fluid freezes");
                melts = add_row(run, table, method, temperature, &limit) || melts;
            }
        }
    }
    if (table != NULL) {
        tell_meaning(run, melts);
    }
}
