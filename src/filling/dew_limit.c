#include "filling/dew_limit.h"

#include "equilibrium/boundary.h"
#include "filling/mixture_contents.h"
#include "filling/requirement.h"

#include <math.h>

#define SETTLED_TEMPERATURE 288.15 /* K */

/* One method's lowest dew point at the criterion's worst temperature, and the rule of partial pressures there. */
struct dew_limit {
    double temperature;
    double pressure, density; /* Pa, kg/m3, of the dew point */
    size_t component;         /* most of the first liquid */
    bool has_ideal;           /* the component has a vapour pressure at that temperature */
    double ideal_pressure;    /* Pa: the component's vapour pressure over its mole fraction */
    double ideal_density;     /* kg/m3, of an ideal gas at that pressure */
    double enhancement;       /* its partial pressure at the dew point over its vapour pressure */
};

/* ---- the numbers ------------------------------------------------------------------------------------------------- */

static size_t largest_of(const double x[], size_t count)
{
    size_t largest = 0;
    for (size_t i = 1; i < count; i++) {
        largest = x[i] > x[largest] ? i : largest;
    }
    return largest;
}

static bool vapour_pressure_of(struct method_run *method, size_t component, double temperature, double *pressure)
{
    struct phase_edges edges;
    if (edges_at(mixture_alone(method, component), temperature, &edges) != ANSWER_OK || !edges.high_is_bubble) {
        return false;
    }
    *pressure = edges.high_pressure;
    return true;
}

/* The lowest dew point at `temperature`, with the edge that holds the first liquid. */
static bool find_dew_limit(struct method_run *method, double temperature, struct dew_limit *dew,
                           const struct phase_edge **edge)
{
    const struct edge_list *list;
    struct phase_edges edges;
    if (edges_at(method, temperature, &edges) != ANSWER_OK || !edges.has_low ||
        mixture_edge_list(method, &list) != ANSWER_OK || list->is_unstable_at_start) {
        return false;
    }
    *edge = &list->items[0];
    *dew = (struct dew_limit){.temperature = temperature,
                              .pressure = (*edge)->pressure,
                              .density = method->molar_mass / (*edge)->molar_volume,
                              .component = largest_of((*edge)->other, method->fluid->count)};
    double vapour_pressure;
    dew->has_ideal = vapour_pressure_of(method, dew->component, temperature, &vapour_pressure);
    if (dew->has_ideal) {
        const double RT = method->fluid->gas_constant * temperature;
        dew->ideal_pressure = vapour_pressure / method->z[dew->component];
        dew->ideal_density = dew->ideal_pressure * method->molar_mass / RT;
        dew->enhancement = method->z[dew->component] * dew->pressure / vapour_pressure;
    }
    return true;
}

const char *condensing_component(const struct sheet_run *run, struct method_run *method, double temperature)
{
    struct dew_limit dew;
    const struct phase_edge *edge;
    return method->mixture != NULL && find_dew_limit(method, temperature, &dew, &edge)
               ? run->sheet->fluid->components[dew.component]->name
               : NULL;
}

/* ---- the limits beside the rule of partial pressures ------------------------------------------------------------- */

/* The last column only where the methods' worst temperatures differ. */
enum dew_column {
    DEW_METHOD,
    DEW_PRESSURE,
    DEW_DENSITY,
    DEW_MASS,
    DEW_COMPONENT,
    DEW_IDEAL_PRESSURE,
    DEW_IDEAL_MASS,
    DEW_ENHANCEMENT,
    DEW_TEMPERATURE
};

/* Whether a method's dew limit of that criterion is told: it has one. */
static bool is_told(const struct method_limits *of, size_t index)
{
    return of->method != NULL && of->limits[index].answer == ANSWER_OK && !of->limits[index].is_unlimited;
}

/* The worst temperature of all methods, in *temperature; false where they differ or none is told. */
static bool common_temperature(const struct permissible *sheet, size_t index, double *temperature)
{
    bool is_given = false;
    for (size_t m = 0; m < sheet->run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        if (!is_told(of, index)) {
            continue;
        }
        const double worst = of->limits[index].finding.worst_temperature;
        if (is_given && fabs(worst - *temperature) > 0.0) {
            return false;
        }
        is_given = true;
        *temperature = worst;
    }
    return is_given;
}

static struct table *begin_dew_table(const struct permissible *sheet, size_t index)
{
    const struct sheet_run *run = sheet->run;
    struct result *result = run->result;
    double temperature;
    const bool is_common = common_temperature(sheet, index, &temperature);
    const char *title = arena_format(run->arena, "dew limit of '%s'%s%s, beside the rule of partial pressures",
                                     sheet->criteria[index].predicate->written, is_common ? ", at " : "",
                                     is_common ? temperature_words(run, temperature) : "");
    struct table *table = sheet_add_table(result, run->out, title, NULL);
    table_add_word_column(result, table, "method");
    table_add_column(result, table, "dew-pressure", look_pressure(run));
    table_add_column(result, table, "density", look_density(run));
    table_add_column(result, table, "mass", look_mass(run));
    table_add_word_column(result, table, "condensing");
    table_add_column(result, table, "ideal-pressure", look_pressure(run));
    table_add_column(result, table, "ideal-mass", look_mass(run));
    table_add_column(result, table, "enhancement", look_ratio(3));
    if (!is_common) {
        table_add_column(result, table, "temperature", look_temperature(run));
    }
    return table;
}

static void add_dew_row(const struct sheet_run *run, struct table *table, const struct method_run *method,
                        const struct dew_limit *dew)
{
    const double volume = run->sheet->vessel->water_capacity.value;
    struct cell *row = table_add_row(run->result, table);
    cell_set_text(&row[DEW_METHOD], method->name);
    cell_set(&row[DEW_PRESSURE], dew->pressure);
    cell_set(&row[DEW_DENSITY], dew->density);
    cell_set(&row[DEW_MASS], dew->density * volume);
    cell_set_text(&row[DEW_COMPONENT], run->sheet->fluid->components[dew->component]->name);
    if (dew->has_ideal) {
        cell_set(&row[DEW_IDEAL_PRESSURE], dew->ideal_pressure);
        cell_set(&row[DEW_IDEAL_MASS], dew->ideal_density * volume);
        cell_set(&row[DEW_ENHANCEMENT], dew->enhancement);
    }
    if (table->column_count > DEW_TEMPERATURE) {
        cell_set(&row[DEW_TEMPERATURE], dew->temperature);
    }
}

/* ---- the first liquid -------------------------------------------------------------------------------------------- */

enum first_column { FIRST_COMPONENT, FIRST_WHOLE, FIRST_LIQUID, FIRST_RATIO, FIRST_VAPOUR_PRESSURE };

static void tell_first_liquid(const struct sheet_run *run, struct method_run *method, const struct dew_limit *dew,
                              const struct phase_edge *edge)
{
    struct result *result = run->result;
    const struct look percent = {"1", {"%", 0.01, 0.0}, -5};
    struct table *table = sheet_add_table(
        result, run->out, arena_format(run->arena, "the first liquid at %s", temperature_words(run, dew->temperature)),
        method->name);
    table_add_word_column(result, table, "component");
    table_add_column(result, table, "whole", percent);
    table_add_column(result, table, "first-liquid", percent);
    table_add_column(result, table, "K", look_significant(look_ratio(0), 5));
    table_add_column(result, table, "vapour-pressure", look_significant(look_pressure(run), 5));
    for (size_t i = 0; i < method->fluid->count; i++) {
        struct cell *row = table_add_row(result, table);
        double vapour_pressure;
        cell_set_text(&row[FIRST_COMPONENT], run->sheet->fluid->components[i]->name);
        cell_set(&row[FIRST_WHOLE], method->z[i]);
        cell_set(&row[FIRST_LIQUID], edge->other[i]);
        if (edge->other[i] > 0.0) {
            cell_set(&row[FIRST_RATIO], method->z[i] / edge->other[i]);
        }
        if (vapour_pressure_of(method, i, dew->temperature, &vapour_pressure)) {
            cell_set(&row[FIRST_VAPOUR_PRESSURE], vapour_pressure);
        }
    }
}

/* ---- what lies above --------------------------------------------------------------------------------------------- */

/* Denser than the last edge the fluid is one phase again: allowed by no rule that says `no liquid`. */
static void tell_window(const struct sheet_run *run, struct method_run *method, double temperature)
{
    struct phase_edges edges;
    if (edges_at(method, temperature, &edges) != ANSWER_OK || !edges.has_high) {
        return;
    }
    const double mass = method->molar_mass / edges.high_volume * run->sheet->vessel->water_capacity.value;
    struct contents filled;
    const char *reading = "";
    if (pressure_at(run, method, mass, SETTLED_TEMPERATURE, &filled) == ANSWER_OK) {
        reading = arena_format(run->arena, ", %s at 15 degC,", shown_text(run, look_gauge(run), filled.pressure));
    }
    sheet_add_note(run->result, run->out,
                   "from %s%s on it is one phase again at %s (%s), but would condense in use at %s: shown, never "
                   "permitted",
                   shown_text(run, look_mass(run), mass), reading, temperature_words(run, temperature), method->name,
                   shown_text(run, look_pressure(run), edges.high_pressure));
}

/* ---- no dew point within the range ------------------------------------------------------------------------------- */

/* K: nearer to the cricondentherm than this the limit may jump with a small error of temperature or composition. */
#define NEAR_CRICONDENTHERM 5.0

/* The limit a few kelvin colder, where there is one at all. */
static const char *colder_words(const struct permissible *sheet, const struct method_limits *of, size_t index,
                                double temperature)
{
    const struct sheet_run *run = sheet->run;
    struct predicate colder = *sheet->criteria[index].predicate;
    colder.from = colder.to = temperature;
    double mass;
    bool is_unlimited;
    struct predicate_finding finding;
    if (predicate_largest_mass(run, of->method, &colder, predicate_most_mass(run, of->method), &mass, &is_unlimited,
                               &finding) != ANSWER_OK) {
        return "has no answer";
    }
    return is_unlimited ? "is none" : arena_format(run->arena, "is %s", shown_text(run, look_mass(run), mass));
}

static void tell_far_dew(const struct permissible *sheet, const struct method_limits *of, size_t index)
{
    const struct sheet_run *run = sheet->run;
    const struct envelope *envelope = mixture_envelope(of->method);
    const double coldest = sheet->criteria[index].predicate->from;
    if (envelope == NULL || !envelope->has_cricondentherm) {
        sheet_add_note(run->result, run->out, "no dew point from %s on (%s)", temperature_words(run, coldest),
                       of->method->name);
        return;
    }
    const struct boundary_point *highest = envelope->cricondentherm;
    const double distance = coldest - highest->temperature;
    if (!(distance >= 0.0)) {
        sheet_add_note(run->result, run->out,
                       "by the stability test nothing condenses from %s on, though the cricondentherm is %s (%s)",
                       temperature_words(run, coldest), temperature_words(run, highest->temperature), of->method->name);
        return;
    }
    struct fact *fact =
        sheet_add_fact(run->result, run->out, "cricondentherm", highest->temperature, look_temperature(run));
    fact->method = of->method->name;
    fact->remark = arena_format(run->arena, "at %s; no dew point above it",
                                shown_text(run, look_pressure(run), highest->pressure));
    fact = sheet_add_fact(run->result, run->out, "coldest-above-cricondentherm", distance,
                          (struct look){"K", {"K", 1.0, 0.0}, 2});
    fact->method = of->method->name;
    if (distance < NEAR_CRICONDENTHERM) {
        const double colder = coldest - NEAR_CRICONDENTHERM;
        result_warn(run->result, CODE_W334, location_line(run->sheet->at), run->number,
                    "'%s' by %s: the cricondentherm is only %.2f K colder; the limit jumps there, and at %s %s",
                    sheet->criteria[index].predicate->written, of->method->name, distance,
                    temperature_words(run, colder), colder_words(sheet, of, index, colder));
    }
}

static void tell_far_dews(const struct permissible *sheet, size_t index)
{
    const struct sheet_run *run = sheet->run;
    bool has_begun = false;
    for (size_t m = 0; m < run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        if (of->method == NULL || of->limits[index].answer != ANSWER_OK || !of->limits[index].is_unlimited) {
            continue;
        }
        if (!has_begun) {
            sheet_begin_facts(
                run->result, run->out,
                arena_format(run->arena, "no dew point for '%s'", sheet->criteria[index].predicate->written));
            has_begun = true;
        }
        tell_far_dew(sheet, of, index);
    }
}

/* ---- hardly a state thin enough ---------------------------------------------------------------------------------- */

/* Pa; a dew pressure below this leaves no charge to speak of. */
#define PRACTICALLY_NOTHING 1.0

static void tell_thin_dew(const struct sheet_run *run, struct method_run *method, const char *written,
                          double temperature)
{
    struct phase_edges edges;
    if (edges_at(method, temperature, &edges) != ANSWER_OK || !edges.has_low ||
        !(edges.low_pressure < PRACTICALLY_NOTHING)) {
        return;
    }
    if (isfinite(edges.low_volume)) {
        sheet_add_note(run->result, run->out,
                       "'%s': at %s the first liquid forms at %.3g Pa; that is practically no charge (%s)", written,
                       temperature_words(run, temperature), edges.low_pressure, method->name);
    } else {
        sheet_add_note(run->result, run->out,
                       "'%s': at %s no state was found thin enough, as one phase it is unstable at 1 Pa already; no "
                       "charge is allowed (%s)",
                       written, temperature_words(run, temperature), method->name);
    }
}

static void tell_thin_dews(const struct permissible *sheet, size_t index)
{
    for (size_t m = 0; m < sheet->run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        if (is_told(of, index)) {
            tell_thin_dew(sheet->run, of->method, sheet->criteria[index].predicate->written,
                          of->limits[index].finding.worst_temperature);
        }
    }
}

/* ---- each criterion ---------------------------------------------------------------------------------------------- */

static bool tell_table(const struct permissible *sheet, size_t index)
{
    const struct sheet_run *run = sheet->run;
    struct table *table = NULL;
    for (size_t m = 0; m < run->method_count; m++) {
        const struct method_limits *of = &sheet->by_method[m];
        struct dew_limit dew;
        const struct phase_edge *edge;
        if (is_told(of, index) &&
            find_dew_limit(of->method, of->limits[index].finding.worst_temperature, &dew, &edge)) {
            table = table != NULL ? table : begin_dew_table(sheet, index);
            add_dew_row(run, table, of->method, &dew);
        }
    }
    if (table != NULL) {
        sheet_add_note(run->result, run->out,
                       "ideal: the pressure at which the condensing component's partial pressure is its vapour "
                       "pressure, and the mass of an ideal gas there; enhancement: its partial pressure at the dew "
                       "point over its vapour pressure");
    }
    return table != NULL;
}

static void tell_criterion(const struct permissible *sheet, size_t index)
{
    const struct sheet_run *run = sheet->run;
    const struct method_limits *of = &sheet->by_method[sheet->governing.given ? sheet->governing.index : 0];
    struct dew_limit dew;
    const struct phase_edge *edge;
    if (!tell_table(sheet, index) || !is_told(of, index)) {
        return;
    }
    const double temperature = of->limits[index].finding.worst_temperature;
    if (find_dew_limit(of->method, temperature, &dew, &edge)) {
        tell_first_liquid(run, of->method, &dew, edge);
        tell_window(run, of->method, temperature);
    }
}

void tell_dew_limits(const struct permissible *sheet)
{
    if (sheet->run->sheet->fluid->count == 1) {
        return;
    }
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct predicate *predicate = sheet->criteria[i].predicate;
        if (predicate->kind == PREDICATE_NO_LIQUID) {
            tell_criterion(sheet, i);
            tell_far_dews(sheet, i);
            tell_thin_dews(sheet, i);
        }
    }
}
