/* The preparation sheet: from a target, a vessel and parent gases to what the hall has to do, step by step, and to what
 * it has then made. What cannot be made is told with what would make it possible. */
#include "filling/preparation_internal.h"

#include "equilibrium/saturation.h"
#include "equilibrium/split.h"
#include "filling/mixture_internal.h"
#include "filling/search.h"

#include <math.h>
#include <string.h>

/* An addition of less than this part of everything, below zero, is rounding. */
#define NO_AMOUNT 1e-12
/* How closely the largest fill that a supply can make is found, as part of the fill. */
#define FILL_TOLERANCE 1e-6

/* ---- requirements of its own --------------------------------------------------------------------------------------
 */

static struct requirement *require_own(const struct preparation *it, const char *text, bool is_met, size_t line)
{
    struct requirement *requirement = sheet_add_requirement(it->run->result, it->run->out, text);
    requirement->state = is_met ? REQUIREMENT_MET : REQUIREMENT_NOT_MET;
    requirement->method = it->run->methods[0].name;
    requirement->line = line;
    return requirement;
}

static void require_margin(const struct preparation *it, const char *text, double margin, struct look look, size_t line,
                           const char *reason)
{
    struct requirement *requirement = require_own(it, text, margin >= 0.0, line);
    requirement->has_margin = true;
    requirement->margin = margin;
    requirement->look = look;
    requirement->reason = margin >= 0.0 ? NULL : reason;
}

/* Ends a sheet that has no recipe. */
static void tell_impossible(const struct preparation *it, const char *reason)
{
    require_own(it, "there is a recipe", false, location_line(it->run->sheet->at))->reason = reason;
    sheet_add_note(it->run->result, it->run->out, "no recipe: %s.", reason);
}

static void tell_undecided(struct sheet_run *run, const char *what)
{
    sheet_add_note(run->result, run->out, "%s: %s.", run->methods[0].name, what);
    result_warn(run->result, CODE_W371, location_line(run->sheet->at), run->number, "%s, %s: %s",
                run->sheet->fluid->name, run->methods[0].name, what);
    run->result->is_undecided = true;
}

/* ---- setting up -------------------------------------------------------------------------------------------------- */

static double *spread_over(const struct preparation *it, const struct case_fluid *fluid, const size_t places[])
{
    double *over = arena_alloc(it->run->arena, it->count, sizeof *over);
    for (size_t i = 0; i < fluid->count; i++) {
        over[places[i]] = fluid->fractions[i];
    }
    return over;
}

/* The component that completes the target: its `rest`, or what there is most of. */
static size_t rest_of(const struct case_fluid *target)
{
    size_t most = 0;
    for (size_t i = 0; i < target->count; i++) {
        if (target->shares != NULL && target->shares[i].is_rest) {
            return i;
        }
        most = target->fractions[i] > target->fractions[most] ? i : most;
    }
    return most;
}

static double mass_of(const struct preparation *it, const double n[])
{
    double mass = 0.0;
    for (size_t i = 0; i < it->count; i++) {
        mass += n[i] * it->molar_masses[i];
    }
    return mass;
}

static void set_up(struct preparation *it)
{
    struct arena *arena = it->run->arena;
    const struct case_fluid *fluid = it->run->sheet->fluid;
    double *molar_masses = arena_alloc(arena, it->count, sizeof *molar_masses);
    double **parent = arena_alloc(arena, it->parents, sizeof *parent);
    for (size_t i = 0; i < it->count; i++) {
        molar_masses[i] = fluid->components[i]->molar_mass.value;
    }
    for (size_t p = 0; p < it->parents; p++) {
        parent[p] = spread_over(it, it->made->additions[p].parent, it->made->additions[p].places);
    }
    it->molar_masses = molar_masses;
    it->parent = parent;
    it->volume = it->run->sheet->vessel->water_capacity.value;
    it->heel = arena_alloc(arena, it->count, sizeof *it->heel);
    it->order = arena_alloc(arena, it->parents, sizeof *it->order);
    it->amounts = arena_alloc(arena, it->parents, sizeof *it->amounts);
    it->finished = arena_alloc(arena, it->count, sizeof *it->finished);
    it->task = (struct recipe_task){.count = it->count,
                                    .parents = it->parents,
                                    .target = fluid->fractions,
                                    .rest = rest_of(it->made->target),
                                    .molar_masses = molar_masses,
                                    .parent = (const double *const *)parent,
                                    .heel = it->heel};
}

/* m3/mol of the heel as it stands, by the lead method; 0 where its amount does not rest on one. */
static enum answer heel_molar_volume(const struct preparation *it, const double z[], double *molar_volume)
{
    const struct case_charge *heel = it->made->heel;
    struct method_run *method = &it->run->methods[0];
    const bool is_by_pressure = heel->kind == FILL_PRESSURE;
    *molar_volume = 0.0;
    if (!is_by_pressure && heel->kind != FILL_VOLUME) {
        return ANSWER_OK;
    }
    const double pressure = is_by_pressure ? heel->amount.value : heel->pressure;
    enum answer answer = fluid_set_t(method->at_t, method->fluid, heel->temperature);
    if (it->count == 1) {
        struct phase *phase = phase_create(1, it->run->arena);
        answer = answer == ANSWER_OK ? stable_phase_tp(method->at_t, pressure, z, 0, phase) : answer;
        *molar_volume = phase->volume / z[0];
        return answer;
    }
    struct split *split = split_create(it->count, it->run->arena);
    answer = answer != ANSWER_OK ? answer : split_at_tp(method->at_t, pressure, z, method->mixture->ws, split);
    for (size_t k = 0; answer == ANSWER_OK && k < split->phase_count; k++) {
        *molar_volume += split->phase[k].fraction * split->phase[k].molar_volume;
    }
    return answer;
}

/* What is in the vessel before, and how well that is known: of a heel by pressure as of an ideal gas. */
static enum answer set_heel(struct preparation *it)
{
    const struct case_charge *heel = it->made->heel;
    if (heel == NULL) {
        return ANSWER_OK;
    }
    const double *z = spread_over(it, heel->fluid, it->made->heel_places);
    double molar_volume;
    const enum answer answer = heel_molar_volume(it, z, &molar_volume);
    if (answer != ANSWER_OK) {
        return answer;
    }
    it->heel_mass = charge_mass_of(heel, molar_volume, heel->fluid->molar_mass);
    it->heel_uncertainty = it->heel_mass * heel->amount.uncertainty / heel->amount.value;
    for (size_t i = 0; i < it->count; i++) {
        it->heel[i] = it->heel_mass / heel->fluid->molar_mass * z[i];
    }
    return ANSWER_OK;
}

/* ---- order ------------------------------------------------------------------------------------------------------- */

static struct recipe_nature nature_of(const struct preparation *it, size_t p)
{
    const struct case_component *const *components = it->run->sheet->fluid->components;
    struct recipe_nature nature = {.critical_temperature = 0.0};
    size_t most = 0;
    for (size_t i = 0; i < it->count; i++) {
        const unsigned hazards = components[i]->hazards;
        most = it->parent[p][i] > it->parent[p][most] ? i : most;
        nature.is_fuel =
            nature.is_fuel || (it->parent[p][i] > 1e-4 && (hazards & (HAZARD_FLAMMABLE | HAZARD_PYROPHORIC)) != 0);
        nature.is_oxidant = nature.is_oxidant || (it->parent[p][i] > 1e-4 && (hazards & HAZARD_OXIDISING) != 0);
    }
    nature.critical_temperature = components[most]->critical_temperature.value;
    nature.is_balance = most == it->task.rest;
    return nature;
}

/* False where fuel and oxidant stand together whatever the order. */
static bool set_order(struct preparation *it)
{
    struct recipe_nature *natures = arena_alloc(it->run->arena, it->parents, sizeof *natures);
    bool is_parted = true;
    for (size_t p = 0; p < it->parents; p++) {
        natures[p] = nature_of(it, p);
        it->order[p] = p;
    }
    if (it->made->is_order_proposed) {
        is_parted = recipe_order(natures, it->parents, it->order);
    }
    for (size_t k = 0; k + 1 < it->parents; k++) {
        const struct recipe_nature *one = &natures[it->order[k]], *next = &natures[it->order[k + 1]];
        is_parted = is_parted && recipe_may_follow(one, next);
    }
    return is_parted;
}

static const char *order_words(const struct preparation *it)
{
    const char *words = "";
    for (size_t k = 0; k < it->parents; k++) {
        words =
            arena_format(it->run->arena, "%s%s%s", words, k == 0 ? "" : ", ", it->made->additions[it->order[k]].name);
    }
    return words;
}

/* ---- recipes that cannot be -------------------------------------------------------------------------------------- */

/* A component that no addition holds as much of as the target asks for; the sheet's count where there is none. */
static size_t find_too_rich(const struct preparation *it, size_t *richest)
{
    for (size_t i = 0; i < it->count; i++) {
        *richest = 0;
        for (size_t p = 0; p < it->parents; p++) {
            *richest = it->parent[p][i] > it->parent[*richest][i] ? p : *richest;
        }
        if (it->run->sheet->fluid->fractions[i] > it->parent[*richest][i] && !(it->heel[i] > 0.0)) {
            return i;
        }
    }
    return it->count;
}

static const char *percent_words(const struct preparation *it, double fraction)
{
    return arena_format(it->run->arena, "%.5g %%", 100.0 * fraction);
}

/* Which addition would have to be taken out, and what would help. */
static const char *impossible_words(const struct preparation *it)
{
    struct sheet_run *run = it->run;
    size_t richest = 0, taken_out = 0;
    const size_t rich = find_too_rich(it, &richest);
    if (rich < it->count) {
        return arena_format(run->arena, "no addition holds as much %s as the target, %s; the richest, %s, has %s",
                            run->sheet->fluid->components[rich]->name,
                            percent_words(it, run->sheet->fluid->fractions[rich]), it->made->additions[richest].name,
                            percent_words(it, it->parent[richest][rich]));
    }
    for (size_t p = 0; p < it->parents; p++) {
        taken_out = it->amounts[p] < it->amounts[taken_out] ? p : taken_out;
    }
    const char *name = it->made->additions[taken_out].name;
    const double part = recipe_heel_part(&it->task, run->arena);
    if (it->made->heel == NULL || !(part >= 0.0)) {
        return arena_format(run->arena,
                            "%.5g mol of %s would have to be taken out: these additions cannot make the target",
                            -it->amounts[taken_out], name);
    }
    struct filled_state state = {.pressure = 0.0};
    double *bled = arena_alloc(run->arena, it->count, sizeof *bled);
    const double at = it->made->heel->temperature > 0.0 ? it->made->heel->temperature
                                                        : it->made->additions[it->order[0]].temperature.value;
    for (size_t i = 0; i < it->count; i++) {
        bled[i] = part * it->heel[i];
    }
    if (filled_at(it, &run->methods[0], at, bled, &state) != ANSWER_OK ||
        state.pressure < run->tree->ambient_pressure) {
        return arena_format(run->arena, "the heel leaves no room for %s; evacuate the vessel", name);
    }
    return arena_format(run->arena, "the heel leaves no room for %s; bleed it down to %s at %s", name,
                        shown_text(run, look_gauge(run), state.pressure), temperature_words(run, at));
}

/* ---- what the supplies can do ------------------------------------------------------------------------------------ */

/* The highest pressure of step k when the whole fill is some part of what was asked for, above the supply's. */
struct smaller_fill {
    const struct preparation *it;
    size_t step;
    double supply;
    double *amounts;
    struct filled_step *steps;
};

static enum answer supply_missing(void *context, double part, double *missing)
{
    const struct smaller_fill *of = context;
    struct recipe_task task = of->it->task;
    task.mass *= part;
    enum answer answer = recipe_amounts(&task, of->it->run->arena, of->amounts);
    answer = answer == ANSWER_OK ? follow_steps(of->it, &of->it->run->methods[0], of->amounts, of->steps) : answer;
    *missing = of->steps[of->step].peak_pressure - of->supply;
    return answer;
}

static const char *supply_words(const struct preparation *it, size_t k, double supply, double needed)
{
    struct sheet_run *run = it->run;
    struct smaller_fill of = {it, k, supply, arena_alloc(run->arena, it->parents, sizeof(double)),
                              arena_alloc(run->arena, it->parents, sizeof(struct filled_step))};
    const struct search_function function = {supply_missing, &of};
    struct search_bracket bracket = {.a = 1.0, .value_a = needed - supply, .b = 0.05};
    const char *words = arena_format(run->arena, "needs %s", shown_text(run, look_gauge(run), needed));
    if (function.value(&of, bracket.b, &bracket.value_b) == ANSWER_OK && bracket.value_b < 0.0 &&
        search_root(&function, FILL_TOLERANCE, 0.0, &bracket) == ANSWER_OK) {
        const double part = fmin(bracket.a, bracket.b);
        words = arena_format(run->arena, "%s; enough for %s in all", words,
                             shown_text(run, look_mass(run), part * it->task.mass));
    }
    return words;
}

/* Of an addition that a slow fill could make. */
static const char *fast_words(const struct preparation *it, const struct filled_step *step)
{
    const struct look look = look_gauge(it->run);
    return arena_format(it->run->arena, "needs %s while the gas is warm, %s when it has settled: fill more slowly",
                        shown_text(it->run, look, step->peak_pressure),
                        shown_text(it->run, look, step->after.pressure));
}

static void require_supplies(const struct preparation *it, const struct filled_step steps[])
{
    const struct sheet_run *run = it->run;
    for (size_t k = 0; k < it->parents; k++) {
        const struct case_addition *addition = &it->made->additions[it->order[k]];
        const struct quantity *supply = &addition->supply_pressure;
        if (!supply->given) {
            continue;
        }
        const double margin = supply->value - steps[k].peak_pressure;
        const bool is_enough_slowly = addition->fill_time.given && supply->value >= steps[k].after.pressure;
        require_margin(it,
                       arena_format(run->arena, "supply of %s, %s, suffices", addition->name,
                                    shown_text(run, look_gauge(run), supply->value)),
                       margin, look_pressure_difference(run), deck_line(run, addition->at),
                       margin >= 0.0      ? NULL
                       : is_enough_slowly ? fast_words(it, &steps[k])
                                          : supply_words(it, k, supply->value, steps[k].peak_pressure));
    }
}

/* ---- the vessel's ratings ---------------------------------------------------------------------------------------- */

static void require_ratings(struct preparation *it, const struct filled_step steps[])
{
    struct sheet_run *run = it->run;
    const struct quantity *test = &run->sheet->vessel->test_pressure;
    double peak = 0.0;
    size_t count;
    for (size_t k = 0; k < it->parents; k++) {
        peak = fmax(peak, steps[k].peak_pressure);
    }
    if (test->given) {
        require_margin(it, "pressure while filling <= test-pressure", test->value + STANDARD_ATMOSPHERE - peak,
                       look_pressure_difference(run), deck_line(run, test->origin.at), "fill less");
    }
    const struct predicate *ratings = rating_predicates(run, &count);
    for (size_t i = 0; i < count; i++) {
        require_predicate(run, NULL, &ratings[i], it->mass, ratings[i].from, ratings[i].to);
    }
    for (size_t i = 0; i < run->sheet->requirement_count; i++) {
        const struct predicate *requirement = &run->sheet->requirements[i];
        const double last = it->made->additions[it->order[it->parents - 1]].temperature.value;
        require_predicate(run, NULL, requirement, it->mass, last, last);
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static bool refuses(const struct preparation *it)
{
    const struct sheet_run *run = it->run;
    const struct case_fluid *fluid = run->sheet->fluid;
    const char *reason = fluid->refuse;
    if (reason == NULL && fluid->assessment != NULL && run->sheet->assessed == NULL) {
        reason = arena_format(run->arena, "%s; the sheet names no assessment", fluid->assessment);
    }
    if (reason != NULL) {
        result_warn(run->result, CODE_W324, location_line(run->sheet->at), run->number, "%s", reason);
        tell_impossible(it, reason);
        return true;
    }
    if (run->sheet->assessed != NULL) {
        sheet_add_note(run->result, run->out, "assessed: \"%s\"", run->sheet->assessed);
        if (fluid->assessment != NULL) {
            result_warn(run->result, CODE_W329, location_line(run->sheet->at), run->number, "%s; assessed in \"%s\"",
                        fluid->assessment, run->sheet->assessed);
        }
    }
    return false;
}

static void tell_facts(const struct preparation *it)
{
    const struct sheet_run *run = it->run;
    sheet_begin_facts(run->result, run->out, "recipe");
    sheet_add_words(run->result, run->out, "made-by", it->made->is_by_pressure ? "pressure" : "weight");
    sheet_add_words(run->result, run->out, "order", order_words(it))->remark =
        it->made->is_order_proposed ? "proposed: easily condensed first, fuel and oxidant apart, balance gas last"
                                    : "as written";
    if (it->made->heel != NULL) {
        sheet_add_fact(run->result, run->out, "heel-mass", it->heel_mass, look_weighed(run));
    }
    sheet_add_fact(run->result, run->out, "finished-mass", it->mass, look_weighed(run));
}

/* The amounts, or why there are none. */
static bool find_amounts(struct preparation *it)
{
    const enum answer answer = recipe_amounts(&it->task, it->run->arena, it->amounts);
    if (answer != ANSWER_OK) {
        tell_impossible(it, "the additions cannot be told apart by the target's components");
        return false;
    }
    const double whole = it->task.mass / it->run->sheet->fluid->molar_mass;
    memcpy(it->finished, it->heel, it->count * sizeof *it->finished);
    for (size_t p = 0; p < it->parents; p++) {
        if (it->amounts[p] < -NO_AMOUNT * whole) {
            tell_impossible(it, impossible_words(it));
            return false;
        }
        for (size_t i = 0; i < it->count; i++) {
            it->finished[i] += it->amounts[p] * it->parent[p][i];
        }
    }
    it->mass = mass_of(it, it->finished);
    return true;
}

static void answer_recipe(struct preparation *it)
{
    struct sheet_run *run = it->run;
    struct filled_step *lead = NULL;
    tell_facts(it);
    for (size_t m = 0; m < run->method_count; m++) {
        struct filled_step *steps = arena_alloc(run->arena, it->parents, sizeof *steps);
        if (run->methods[m].fluid == NULL) {
            continue;
        }
        if (follow_steps(it, &run->methods[m], it->amounts, steps) != ANSWER_OK) {
            if (m == 0) {
                tell_undecided(run, "what is in the vessel after an addition was not found");
                return;
            }
            sheet_add_note(run->result, run->out, "%s: it has no answer for one of the steps.", run->methods[m].name);
            continue;
        }
        tell_steps(it, &run->methods[m], steps);
        tell_fast_fills(it, &run->methods[m], steps);
        lead = m == 0 ? steps : lead;
    }
    if (it->made->is_by_pressure && it->count > 1) {
        tell_ideal_recipe(it, &run->methods[0], lead);
    }
    tell_all_vessels(it);
    tell_certificate(it, lead);
    require_supplies(it, lead);
    require_ratings(it, lead);
}

void answer_preparation(struct sheet_run *run)
{
    struct preparation it = {.run = run,
                             .made = run->sheet->preparation,
                             .count = run->sheet->fluid->count,
                             .parents = run->sheet->preparation->addition_count};
    if (run->methods[0].fluid == NULL) {
        return; /* said once for all sheets, where methods are made ready */
    }
    if (refuses(&it)) {
        return;
    }
    set_up(&it);
    if (charge_mass(run, run->sheet->charge, &it.task.mass) != ANSWER_OK || set_heel(&it) != ANSWER_OK) {
        tell_undecided(run, "the mass of the charge or of the heel was not found");
        return;
    }
    if (!set_order(&it)) {
        tell_impossible(&it,
                        "a fuel and an oxidant would be added one right after the other; let another gas part them");
        return;
    }
    if (find_amounts(&it)) {
        answer_recipe(&it);
    }
}
