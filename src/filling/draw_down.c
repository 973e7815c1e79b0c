/* The draw-down sheet: what a charge delivers while vapour or liquid is drawn, slowly at one temperature or at a rate
 * with its cooling, how pressure, level and composition go, and what stays behind. */
#include "equilibrium/draw_down.h"

#include "filling/mixture_internal.h"
#include "filling/requirement.h"

#include <math.h>
#include <string.h>

enum { PARTS = 10, MOST_EVENTS = 16, FRACTION_DIGITS = 5 };

/* Of the amount at the start, at each step: some thousand steps at the most leave the printed digits alone. */
#define TOLERANCE 1e-11
/* The same at a rate, where a temperature is searched for at every step. */
#define TOLERANCE_WITH_HEAT 1e-9

/* The mass delivered and left is the mass at the start to this part of it. */
#define MASS_CLOSURE 1e-12

/* The energy likewise, of what was exchanged. */
#define ENERGY_CLOSURE 1e-8

/* The state at which contents are sold by volume. */
#define VOLUME_TEMPERATURE 288.15
#define VOLUME_PRESSURE    1e5

/* One method at the sheet's drawing. */
struct drawing {
    struct sheet_run *run;
    struct method_run *method;
    bool is_lead;
    double mass;                  /* kg at the start */
    double most;                  /* kg, delivered when the time is over; all of it where none is given */
    const struct draw_heat *heat; /* NULL: at one temperature */
    bool has_solid;               /* at some moment */
    double *start, *molar_masses; /* [components] */
    struct draw_down *draw;
    struct draw_state first; /* its arrays are not kept */
    struct table *course, *heats, *drawn, *left;
};

enum course_column { COURSE_DELIVERED, COURSE_LEFT, COURSE_PRESSURE, COURSE_LEVEL, COURSE_LIQUID, COURSE_EVENT };
enum heat_column { HEAT_DELIVERED, HEAT_TIME, HEAT_TEMPERATURE, HEAT_REST };

/* ---- tables ------------------------------------------------------------------------------------------------------ */

static struct table *begin_fractions(const struct drawing *it, const char *title)
{
    const struct sheet_run *run = it->run;
    struct table *table = sheet_add_table(run->result, run->out, title, it->method->name);
    table_add_column(run->result, table, "delivered", look_mass(run));
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        table_add_column(run->result, table, run->sheet->fluid->components[i]->name,
                         look_significant(look_percent(0), FRACTION_DIGITS));
    }
    return table;
}

static struct look look_time(void)
{
    return (struct look){"s", {"min", 60.0, 0.0}, 2};
}

/* Time and temperatures, beside the course. */
static void begin_heats(struct drawing *it)
{
    const struct sheet_run *run = it->run;
    it->heats = sheet_add_table(run->result, run->out, "time and temperatures", it->method->name);
    table_add_column(run->result, it->heats, "delivered", look_mass(run));
    table_add_column(run->result, it->heats, "time", look_time());
    table_add_column(run->result, it->heats, "temperature", look_temperature(run));
    if (it->heat->wall_heat_capacity > 0.0) {
        table_add_column(run->result, it->heats, "wall", look_temperature(run));
    }
    if (it->has_solid) {
        table_add_column(run->result, it->heats, "solid", look_mass(run));
    }
}

static void begin_tables(struct drawing *it)
{
    const struct sheet_run *run = it->run;
    it->course = sheet_add_table(run->result, run->out, "draw-down", it->method->name);
    it->course->csv = it->is_lead ? run->sheet->table_csv : NULL;
    table_add_column(run->result, it->course, "delivered", look_mass(run));
    table_add_column(run->result, it->course, "left", look_mass(run));
    table_add_column(run->result, it->course, "pressure", look_gauge(run));
    table_add_column(run->result, it->course, "liquid-level", look_percent(2));
    table_add_column(run->result, it->course, "liquid", look_amount());
    table_add_word_column(run->result, it->course, "event");
    if (it->heat != NULL) {
        begin_heats(it);
    }
    if (run->sheet->fluid->count > 1) {
        it->drawn = begin_fractions(it, "mole fractions of what is being drawn");
        it->left = begin_fractions(it, "mole fractions of all that is left");
    }
}

static const char *event_words(enum draw_event event)
{
    switch (event) {
    case DRAW_NO_EVENT:
        break;
    case DRAW_PHASE_COMES:
        return "a phase comes";
    case DRAW_PHASE_GOES:
        return "a phase goes";
    case DRAW_LIQUID_IS_GONE:
        return "liquid is gone";
    case DRAW_LEAST_PRESSURE:
        return "least pressure";
    case DRAW_SOLID_COMES:
        return "first solid";
    case DRAW_SOLID_GOES:
        return "solid is gone";
    case DRAW_LEAST_TEMPERATURE:
        return "least temperature";
    case DRAW_COMPOSITION:
        return "limit of composition";
    }
    return "";
}

static double mass_of(const struct drawing *it, const double n[])
{
    double mass = 0.0;
    for (size_t i = 0; i < it->run->sheet->fluid->count; i++) {
        mass += n[i] * it->molar_masses[i];
    }
    return mass;
}

static void put_fractions(const struct drawing *it, struct table *table, double delivered, const double n[])
{
    const size_t count = it->run->sheet->fluid->count;
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    struct cell *row = table_add_row(it->run->result, table);
    cell_set(&row[0], delivered);
    for (size_t i = 0; i < count; i++) {
        cell_set(&row[1 + i], n[i] / sum);
    }
}

static double temperature_of(const struct drawing *it)
{
    return it->heat == NULL ? it->run->sheet->drawing.temperature.value : draw_down_state(it->draw)->temperature;
}

/* Only a pure substance has a solid here. */
static double solid_mass(const struct drawing *it)
{
    return draw_down_state(it->draw)->solid_amount * it->molar_masses[0];
}

static void put_heat_row(const struct drawing *it)
{
    const struct draw_state *state = draw_down_state(it->draw);
    struct cell *row = table_add_row(it->run->result, it->heats);
    cell_set(&row[HEAT_DELIVERED], state->delivered);
    cell_set(&row[HEAT_TIME], state->delivered / it->heat->rate);
    cell_set(&row[HEAT_TEMPERATURE], state->temperature);
    size_t column = HEAT_REST;
    if (it->heat->wall_heat_capacity > 0.0) {
        cell_set(&row[column++], state->wall_temperature);
    }
    if (it->has_solid) {
        cell_set(&row[column], solid_mass(it));
    }
}

static void put_row(const struct drawing *it, enum draw_event event)
{
    const struct draw_state *state = draw_down_state(it->draw);
    const bool is_inside = warn_outside_range(it->run, it->method, temperature_of(it), state->pressure);
    struct cell *row = table_add_row(it->run->result, it->course);
    cell_set(&row[COURSE_DELIVERED], state->delivered);
    cell_set(&row[COURSE_LEFT], mass_of(it, state->amounts));
    cell_set(&row[COURSE_PRESSURE], state->pressure);
    row[COURSE_PRESSURE].is_outside_range = !is_inside;
    if (state->phase_count > 1) { /* one phase has no level, whichever it is */
        cell_set(&row[COURSE_LEVEL], state->liquid_fraction);
        cell_set(&row[COURSE_LIQUID], state->liquid_amount);
    }
    cell_set_text(&row[COURSE_EVENT], event_words(event));
    if (it->heats != NULL) {
        put_heat_row(it);
    }
    if (it->drawn != NULL) {
        put_fractions(it, it->drawn, state->delivered, state->drawn);
        put_fractions(it, it->left, state->delivered, state->amounts);
    }
}

/* ---- the two ways down ------------------------------------------------------------------------------------------- */

static bool is_end(const struct drawing *it, enum draw_event event)
{
    const struct case_sheet *sheet = it->run->sheet;
    return event == DRAW_LIQUID_IS_GONE || event == DRAW_LEAST_PRESSURE || event == DRAW_LEAST_TEMPERATURE ||
           event == DRAW_COMPOSITION || (event == DRAW_PHASE_COMES && sheet->drawing.stops_at_liquid) ||
           (event == DRAW_SOLID_COMES && sheet->drawing.stops_at_solid);
}

/* Has everything been drawn that the time allows? */
static bool is_over(const struct drawing *it, enum draw_event event)
{
    return event == DRAW_NO_EVENT && !(draw_down_state(it->draw)->delivered < it->most * (1.0 - MASS_CLOSURE));
}

/* To the end, which tells how far the rows of the table lie apart. */
static enum answer find_end(struct drawing *it, enum draw_event *end)
{
    *end = DRAW_NO_EVENT;
    for (int i = 0; i < MOST_EVENTS; i++) {
        const enum answer answer = draw_down_to(it->draw, it->most, end);
        it->has_solid = it->has_solid || draw_down_state(it->draw)->solid_amount > 0.0;
        if (answer != ANSWER_OK || is_end(it, *end) || is_over(it, *end)) {
            return answer;
        }
    }
    return ANSWER_FAILED;
}

/* Again, with a row at each tenth of what is delivered and at each event. */
static enum answer tell_course(struct drawing *it, double delivered)
{
    enum answer answer = draw_down_begin(it->draw);
    if (answer != ANSWER_OK) {
        return answer;
    }
    begin_tables(it);
    put_row(it, DRAW_NO_EVENT);
    for (int part = 1, events = 0; part <= PARTS && events < MOST_EVENTS;) {
        /* the last part ends at the end's own event, a little further than it was found */
        const double target = part == PARTS ? it->most : delivered * part / PARTS;
        enum draw_event event;
        answer = draw_down_to(it->draw, target, &event);
        if (answer != ANSWER_OK) {
            return answer;
        }
        put_row(it, event);
        events += event != DRAW_NO_EVENT;
        part += event == DRAW_NO_EVENT;
        if (is_end(it, event) || is_over(it, event)) {
            return ANSWER_OK;
        }
    }
    return ANSWER_FAILED;
}

/* ---- facts ------------------------------------------------------------------------------------------------------- */

static struct fact *add_number(const struct drawing *it, const char *name, double value, struct look look)
{
    struct fact *fact = sheet_add_fact(it->run->result, it->run->out, name, value, look);
    fact->method = it->method->name;
    return fact;
}

static void add_words(const struct drawing *it, const char *name, const char *words)
{
    sheet_add_words(it->run->result, it->run->out, name, words)->method = it->method->name;
}

/* What was delivered, as a gas at 15 degC and 1 bar; the method's temperature is another one afterwards. */
static enum answer volume_delivered(const struct drawing *it, double *volume)
{
    struct method_run *method = it->method;
    const size_t count = method->fluid->count;
    const double *left = draw_down_state(it->draw)->amounts;
    double *n = arena_alloc(it->run->arena, count, sizeof *n), sum = 0.0, molar_volume = 0.0;
    for (size_t i = 0; i < count; i++) {
        n[i] = fmax(it->start[i] - left[i], 0.0);
        sum += n[i];
    }
    bool holds_liquid = false;
    enum answer answer = ANSWER_OK;
    if (count == 1) {
        answer = free_volume_at(method, VOLUME_TEMPERATURE, VOLUME_PRESSURE, &molar_volume, &holds_liquid);
    } else {
        answer = fluid_set_t(method->at_t, method->fluid, VOLUME_TEMPERATURE);
        struct split *split = split_create(count, it->run->arena);
        answer =
            answer == ANSWER_OK ? split_at_tp(method->at_t, VOLUME_PRESSURE, n, method->mixture->ws, split) : answer;
        if (answer == ANSWER_OK) {
            molar_volume = split->phase[0].molar_volume;
            holds_liquid = split->phase_count > 1 || split->phase[0].Z < 0.5;
        }
    }
    *volume = sum * molar_volume;
    return answer == ANSWER_OK && holds_liquid ? ANSWER_NO_SUCH_ROOT : answer;
}

static void tell_volume(const struct drawing *it)
{
    double volume;
    const enum answer answer = volume_delivered(it, &volume);
    if (answer == ANSWER_OK) {
        add_number(it, "usable-volume", volume, look_gas_volume(it->run))->remark = "as a gas at 15 degC and 1 bar";
    } else {
        add_words(it, "usable-volume",
                  answer == ANSWER_NO_SUCH_ROOT ? "none: it would condense at 15 degC and 1 bar" : "not found");
    }
}

static const char *reason_words(const struct drawing *it, enum draw_event end)
{
    const struct draw_state *state = draw_down_state(it->draw);
    if (end == DRAW_LIQUID_IS_GONE) {
        return "the liquid is gone";
    }
    if (end == DRAW_LEAST_TEMPERATURE) {
        return "the least temperature is reached";
    }
    if (end == DRAW_NO_EVENT) {
        return "the time is over";
    }
    if (end == DRAW_COMPOSITION) {
        return "the limit of composition is reached";
    }
    if (end == DRAW_PHASE_COMES || end == DRAW_SOLID_COMES) {
        return end == DRAW_SOLID_COMES ? "the first solid comes" : "a second phase comes";
    }
    return state->delivered > 0.0 ? "the least pressure is reached"
                                  : "the charge is at or below the least pressure from the start";
}

static void tell_facts(const struct drawing *it, enum draw_event end)
{
    const struct sheet_run *run = it->run;
    const struct draw_state *state = draw_down_state(it->draw);
    sheet_begin_facts(run->result, run->out, "usable content");
    add_number(it, "start-gauge-pressure", it->first.pressure, look_gauge(run));
    add_words(it, "end", reason_words(it, end));
    add_number(it, "end-gauge-pressure", state->pressure, look_gauge(run));
    if (it->heat != NULL) {
        add_number(it, "end-temperature", state->temperature, look_temperature(run));
        add_number(it, "duration", state->delivered / it->heat->rate, look_time());
    }
    add_number(it, "usable-mass", state->delivered, look_mass(run));
    tell_volume(it);
    add_number(it, "residue-mass", mass_of(it, state->amounts), look_mass(run));
    if (it->has_solid) {
        add_number(it, "solid-residue", solid_mass(it), look_mass(run));
    }
}

static void require_content(const struct drawing *it)
{
    const struct sheet_run *run = it->run;
    const struct quantity *least = &run->sheet->drawing.least_content;
    if (!least->given || !it->is_lead) {
        return;
    }
    const double margin = draw_down_state(it->draw)->delivered - least->value;
    struct requirement *requirement = sheet_add_requirement(
        run->result, run->out,
        arena_format(run->arena, "usable mass >= %s", shown_text(run, look_mass(run), least->value)));
    requirement->state = margin >= 0.0 ? REQUIREMENT_MET : REQUIREMENT_NOT_MET;
    requirement->has_margin = true;
    requirement->margin = margin;
    requirement->look = look_mass(run);
    requirement->line = deck_line(run, least->origin.at);
    requirement->method = it->method->name;
}

/* ---- the hand check ---------------------------------------------------------------------------------------------- */

/* Numbers of the sheet's own units would hide nothing, but SI needs no factors. */
static void add_hand_check(const struct drawing *it)
{
    struct result *result = it->run->result;
    const struct draw_state *state = draw_down_state(it->draw);
    struct hand_check *check = sheet_add_hand_check(
        result, it->run->out, arena_format(it->run->arena, "balance of masses, %s", it->method->name));
    hand_check_line(result, check, "m = m_start - m_delivered = %.6f kg - %.6f kg = %.6f kg", it->mass,
                    state->delivered, it->mass - state->delivered);
    hand_check_line(result, check, "against the sum of n_i M_i of what is left:");
    for (size_t i = 0; i < it->run->sheet->fluid->count; i++) {
        const double n = state->amounts[i], M = it->molar_masses[i];
        hand_check_line(result, check, "  %s: %.6f mol x %.8f kg/mol = %.6f kg",
                        it->run->sheet->fluid->components[i]->name, n, M, n * M);
    }
    hand_check_line(result, check, "  sum %.6f kg", mass_of(it, state->amounts));
    if (it->heat != NULL) {
        const double C = it->heat->wall_heat_capacity;
        hand_check_line(result, check, "U + C_w T_w = U_start + C_w T_start - H_delivered + Q from outside:");
        hand_check_line(result, check, "  %.10g J + %.6g J/K x %.6f K = %.10g J", state->energy, C,
                        state->wall_temperature, state->energy + C * state->wall_temperature);
        hand_check_line(result, check, "  %.10g J + %.6g J/K x %.6f K - %.10g J + %.10g J = %.10g J", it->first.energy,
                        C, it->first.wall_temperature, state->enthalpy_delivered, state->heat_taken,
                        it->first.energy + C * it->first.wall_temperature - state->enthalpy_delivered +
                            state->heat_taken);
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static void tell_trouble(const struct drawing *it, const char *what)
{
    const struct sheet_run *run = it->run;
    sheet_add_note(run->result, run->out, "%s: %s.", it->method->name, what);
    result_warn(run->result, CODE_W390, location_line(run->sheet->at), run->number, "%s, %s: %s",
                run->sheet->fluid->name, it->method->name, what);
    run->result->is_undecided = run->result->is_undecided || it->is_lead;
}

/* The energies of contents and wall, of the start less what left and with what came: of what was exchanged. */
static bool closes_in_energy(const struct drawing *it)
{
    const struct draw_state *state = draw_down_state(it->draw);
    const double wall = it->heat->wall_heat_capacity * (state->wall_temperature - it->first.wall_temperature);
    const double gain = state->energy - it->first.energy, out = state->enthalpy_delivered, in = state->heat_taken;
    const double exchanged = fabs(gain) + fabs(wall) + fabs(out) + fabs(in);
    return fabs(gain + wall + out - in) <= ENERGY_CLOSURE * exchanged;
}

static bool closes(const struct drawing *it)
{
    const struct draw_state *state = draw_down_state(it->draw);
    if (it->heat != NULL && !closes_in_energy(it)) {
        return false;
    }
    return fabs(it->mass - state->delivered - mass_of(it, state->amounts)) <= MASS_CLOSURE * it->mass;
}

static void draw_by(struct drawing *it)
{
    enum draw_event end = DRAW_NO_EVENT;
    if (draw_down_begin(it->draw) != ANSWER_OK) {
        tell_trouble(it, "what the vessel holds at the start was not found");
        return;
    }
    it->first = *draw_down_state(it->draw);
    if (!(it->first.pressure > it->run->tree->ambient_pressure) ||
        (it->run->sheet->drawing.least_pressure.given &&
         !(it->first.pressure > it->run->sheet->drawing.least_pressure.value))) {
        tell_facts(it, DRAW_LEAST_PRESSURE);
        require_content(it);
        return;
    }
    if (find_end(it, &end) != ANSWER_OK) {
        tell_trouble(it, arena_format(it->run->arena, "drawing could not be followed beyond %s delivered",
                                      shown_text(it->run, look_mass(it->run), draw_down_state(it->draw)->delivered)));
        return;
    }
    if (!closes(it) || tell_course(it, draw_down_state(it->draw)->delivered) != ANSWER_OK) {
        tell_trouble(it, "what was delivered and what is left are not what was there at the start");
        return;
    }
    if (it->is_lead) {
        add_hand_check(it);
    }
    tell_facts(it, end);
    require_content(it);
}

static void begin_amounts(struct drawing *it)
{
    const struct case_fluid *fluid = it->run->sheet->fluid;
    it->start = arena_alloc(it->run->arena, fluid->count, sizeof *it->start);
    it->molar_masses = arena_alloc(it->run->arena, fluid->count, sizeof *it->molar_masses);
    for (size_t i = 0; i < fluid->count; i++) {
        it->start[i] = it->mass / fluid->molar_mass * fluid->fractions[i];
        it->molar_masses[i] = fluid->components[i]->molar_mass.value;
    }
    it->mass = mass_of(it, it->start);
}

static size_t limited_component(const struct case_sheet *sheet)
{
    size_t i = 0;
    while (sheet->drawing.limited != NULL && strcmp(sheet->fluid->components[i]->name, sheet->drawing.limited) != 0) {
        i++;
    }
    return i;
}

/* Contents and wall at a rate; NULL: slowly. */
static const struct draw_heat *heat_of(const struct drawing *it)
{
    const struct sheet_run *run = it->run;
    const struct case_sheet *sheet = run->sheet;
    if (!sheet->drawing.rate.given) {
        return NULL;
    }
    struct draw_heat *heat = arena_alloc(run->arena, 1, sizeof *heat);
    const struct quantity *ambient = &sheet->drawing.ambient;
    *heat = (struct draw_heat){
        .fluid = it->method->fluid,
        .at_t = it->method->at_t,
        .solid = sheet->fluid->count == 1 ? sheet->fluid->components[0]->spec.solid : NULL,
        .temperature = sheet->drawing.temperature.value,
        .rate = sheet->drawing.rate.value,
        .wall_heat_capacity = sheet->vessel->wall_heat_capacity.value,
        .wall_conductance = sheet->vessel->wall_conductance.value,
        .ambient = ambient->given ? ambient->value : sheet->drawing.temperature.value,
        .ambient_conductance = sheet->drawing.ambient_conductance.value,
        .least_temperature = sheet->drawing.least_temperature.value,
    };
    return heat;
}

static bool is_below_triple_point(const struct sheet_run *run)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    const double temperature = run->sheet->drawing.temperature.value;
    return fluid->count == 1 && fluid->components[0]->triple_temperature.given &&
           temperature < fluid->components[0]->triple_temperature.value;
}

static void answer_by(struct sheet_run *run, size_t index, double mass)
{
    struct method_run *method = &run->methods[index];
    struct drawing it = {.run = run, .method = method, .is_lead = index == 0, .mass = mass};
    begin_amounts(&it);
    it.heat = heat_of(&it);
    it.most = it.mass;
    if (it.heat != NULL && run->sheet->drawing.time.given) {
        it.most = fmin(it.mass, it.heat->rate * run->sheet->drawing.time.value);
    }
    const struct draw_task task = {
        .drawn = run->sheet->drawing.is_liquid ? DRAWN_LIQUID : DRAWN_VAPOUR,
        .volume = run->sheet->vessel->water_capacity.value,
        .least_pressure = run->sheet->drawing.least_pressure.given ? run->sheet->drawing.least_pressure.value
                                                                   : run->tree->ambient_pressure,
        .tolerance = it.heat == NULL ? TOLERANCE : TOLERANCE_WITH_HEAT,
        .heat = it.heat,
        .has_limit = run->sheet->drawing.limited != NULL,
        .is_limit_from_above = run->sheet->drawing.is_limit_from_above,
        .limited = limited_component(run->sheet),
        .limit = run->sheet->drawing.limit.value,
        .molar_masses = it.molar_masses,
        .start = it.start,
    };
    if (fluid_set_t(method->at_t, method->fluid, run->sheet->drawing.temperature.value) != ANSWER_OK) {
        tell_trouble(&it, "it has no answer at that temperature");
        return;
    }
    it.draw = draw_down_create(method->at_t, method->fluid->count, &task, run->arena);
    if (it.draw == NULL) {
        tell_trouble(&it, "no memory is left for the integration");
        return;
    }
    draw_by(&it);
    draw_down_free(it.draw);
}

void answer_draw_down(struct sheet_run *run)
{
    double mass;
    if (run->methods[0].fluid == NULL) {
        return; /* said once for all sheets, where methods are made ready */
    }
    if (charge_mass(run, run->sheet->charge, &mass) != ANSWER_OK) {
        struct drawing it = {.run = run, .method = &run->methods[0], .is_lead = true};
        tell_trouble(&it, "the mass of the charge was not found");
        return;
    }
    if (!run->sheet->drawing.rate.given && is_below_triple_point(run)) {
        result_warn(run->result, CODE_W391, location_line(run->sheet->at), run->number,
                    "%s: %s lies below the triple point", run->sheet->fluid->name,
                    temperature_words(run, run->sheet->drawing.temperature.value));
        run->result->is_undecided = true;
        return;
    }
    sheet_begin_facts(run->result, run->out, NULL);
    sheet_add_fact(run->result, run->out, "charge-mass", mass, look_mass(run));
    const bool is_slow = !run->sheet->drawing.rate.given;
    sheet_add_fact(run->result, run->out, is_slow ? "held-at" : "start-temperature",
                   run->sheet->drawing.temperature.value, look_temperature(run));
    if (!is_slow) {
        sheet_add_fact(run->result, run->out, "rate", run->sheet->drawing.rate.value,
                       (struct look){"kg/s", {"kg/h", 1.0 / 3600.0, 0.0}, 3});
    }
    sheet_add_words(run->result, run->out, "drawn", run->sheet->drawing.is_liquid ? "liquid" : "vapour");
    for (size_t m = 0; m < run->method_count; m++) {
        if (run->methods[m].fluid != NULL) {
            answer_by(run, m, mass);
        }
    }
}
