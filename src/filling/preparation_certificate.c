/* What a preparation makes, for certificate and label: the composition by the gravimetric equation with its
 * uncertainty, by recipe or as weighed, held against the target; the limits of use. */
#include "filling/classify.h"
#include "filling/found_temperatures.h"
#include "filling/gravimetric.h"
#include "filling/preparation_internal.h"
#include "filling/uncertainty_internal.h"

#include <math.h>
#include <string.h>

/* Differences for the slopes of pressures: in amounts, as part of everything, and in temperature, K. */
#define AMOUNT_STEP      1e-5
#define TEMPERATURE_STEP 0.01
/* Parts of the content that are looked at for what condenses as it is drawn. */
static const double PARTS_LEFT[] = {1.0, 0.75, 0.5, 0.25};

enum { FRACTION_DIGITS = 6 };

/* Composition and inputs at work. */
struct certificate {
    const struct preparation *it;
    struct gravimetric equation;
    struct gravimetric_input *inputs;
    const char **names; /* [inputs] */
    struct look *looks; /* [inputs] */
    size_t *lines;      /* [inputs] */
    double *x;          /* [count], mole fractions made */
    struct first_order first;
    struct propagation_model model;
    bool is_weighed;
};

/* ---- the parts --------------------------------------------------------------------------------------------------- */

/* Fractions on the basis they are written on, so that their uncertainties are of that basis. */
static struct gravimetric_part part_of(const struct preparation *it, const struct case_fluid *fluid,
                                       const size_t places[], double mass)
{
    struct gravimetric_part part = {.mass = mass, .is_by_mass = fluid->shares != NULL && fluid->basis == BASIS_MASS};
    double sum = 0.0;
    part.fractions = arena_alloc(it->run->arena, it->count, sizeof *part.fractions);
    for (size_t i = 0; i < fluid->count; i++) {
        const struct case_share *share = fluid->shares == NULL ? NULL : &fluid->shares[i];
        const double fraction = share != NULL && part.is_by_mass ? share->given.value : fluid->fractions[i];
        part.fractions[places[i]] = fraction;
        sum += fraction;
        if (share != NULL && share->is_rest) {
            part.has_rest = true;
            part.rest = places[i];
        }
    }
    for (size_t i = 0; i < it->count; i++) {
        part.fractions[i] /= sum;
    }
    return part;
}

static void set_parts(struct certificate *of)
{
    const struct preparation *it = of->it;
    struct gravimetric_part *parts = arena_alloc(it->run->arena, it->parents + 1, sizeof *parts);
    size_t count = 0;
    for (size_t p = 0; p < it->parents; p++) {
        const struct case_addition *addition = &it->made->additions[p];
        of->is_weighed = of->is_weighed || addition->weighed.given;
        const double mass =
            addition->weighed.given ? addition->weighed.value : it->amounts[p] * parent_molar_mass(it, p);
        parts[count++] = part_of(it, addition->parent, addition->places, mass);
    }
    if (it->made->heel != NULL) {
        parts[count++] = part_of(it, it->made->heel->fluid, it->made->heel_places, it->heel_mass);
    }
    of->equation =
        (struct gravimetric){.count = it->count, .parts = count, .molar_masses = it->molar_masses, .part = parts};
}

/* ---- the inputs -------------------------------------------------------------------------------------------------- */

static void add_input_of(struct certificate *of, struct gravimetric_input input, const char *name, struct look look,
                         struct location at)
{
    if (!(input.standard > 0.0)) {
        return;
    }
    const size_t k = of->equation.input_count++;
    of->inputs[k] = input;
    of->names[k] = name;
    of->looks[k] = look;
    of->lines[k] = at.file == of->it->run->tree->deck->root ? location_line(at) : 0;
}

static const double *single_change(const struct certificate *of, size_t part, double change)
{
    double *changes = arena_alloc(of->it->run->arena, of->equation.parts, sizeof *changes);
    changes[part] = change;
    return changes;
}

static void add_mass_input(struct certificate *of, size_t part, double expanded, const char *name, struct location at)
{
    add_input_of(of,
                 (struct gravimetric_input){.kind = GRAVIMETRIC_MASS,
                                            .mass_change = single_change(of, part, 1.0),
                                            .value = of->equation.part[part].mass,
                                            .standard = expanded / 2.0},
                 name, look_mass(of->it->run), at);
}

/* By weight, or as weighed: the balance's error of each addition by itself. */
static void add_weighings(struct certificate *of)
{
    const struct preparation *it = of->it;
    for (size_t p = 0; p < it->parents; p++) {
        const struct case_addition *addition = &it->made->additions[p];
        const struct quantity *balance = addition->balance.given ? &addition->balance : &it->made->balance;
        const bool is_own = addition->weighed.given && addition->weighed.uncertainty > 0.0;
        if (!it->made->is_by_pressure || addition->weighed.given) {
            add_mass_input(of, p,
                           is_own           ? addition->weighed.uncertainty
                           : balance->given ? balance->value
                                            : 0.0,
                           arena_format(it->run->arena, "mass of %s", addition->name),
                           is_own ? addition->weighed.origin.at : balance->origin.at);
        }
    }
}

static struct look look_fraction_input(void)
{
    return look_significant(look_percent(0), FRACTION_DIGITS);
}

static void add_fractions(struct certificate *of, size_t part, const struct case_fluid *fluid, const size_t places[])
{
    for (size_t i = 0; fluid->shares != NULL && i < fluid->count; i++) {
        const struct quantity *share = &fluid->shares[i].given;
        add_input_of(of,
                     (struct gravimetric_input){.kind = GRAVIMETRIC_FRACTION,
                                                .part = part,
                                                .component = places[i],
                                                .value = of->equation.part[part].fractions[places[i]],
                                                .standard = share->uncertainty / 2.0},
                     arena_format(of->it->run->arena, "%s of %s", fluid->components[i]->name, fluid->name),
                     look_fraction_input(), share->origin.at);
    }
}

static void add_molar_masses(struct certificate *of)
{
    const struct look look = {"kg/mol", {"g/mol", 1e-3, 0.0}, 5};
    for (size_t i = 0; i < of->it->count; i++) {
        const struct case_component *component = of->it->run->sheet->fluid->components[i];
        add_input_of(of,
                     (struct gravimetric_input){.kind = GRAVIMETRIC_MOLAR_MASS,
                                                .component = i,
                                                .value = component->molar_mass.value,
                                                .standard = component->molar_mass.uncertainty / 2.0},
                     arena_format(of->it->run->arena, "molar mass of %s", component->name), look,
                     component->molar_mass.origin.at);
    }
}

/* ---- readings of pressure and temperature ------------------------------------------------------------------------ */

/* The pressure after step k with the amounts and the temperature as given. */
static enum answer pressure_after(const struct preparation *it, size_t k, const double amounts[], double temperature,
                                  double *pressure)
{
    double *n = arena_alloc(it->run->arena, it->count, sizeof *n);
    memcpy(n, it->heel, it->count * sizeof *n);
    for (size_t j = 0; j <= k; j++) {
        for (size_t i = 0; i < it->count; i++) {
            n[i] += amounts[it->order[j]] * it->parent[it->order[j]][i];
        }
    }
    struct filled_state state;
    const enum answer answer = filled_at(it, &it->run->methods[0], temperature, n, &state);
    *pressure = state.pressure;
    return answer;
}

/* slopes[k][j] = d(pressure after step k) / d(amount of step j), j <= k; by_temperature[k]. */
static enum answer set_slopes(const struct preparation *it, double *slopes, double by_temperature[])
{
    double *amounts = arena_alloc(it->run->arena, it->parents, sizeof *amounts);
    const double step = AMOUNT_STEP * amount_of(it->finished, it->count);
    for (size_t k = 0; k < it->parents; k++) {
        const double at = it->made->additions[it->order[k]].temperature.value;
        double high, low;
        for (size_t j = 0; j <= k; j++) {
            const size_t p = it->order[j];
            memcpy(amounts, it->amounts, it->parents * sizeof *amounts);
            amounts[p] += step;
            enum answer answer = pressure_after(it, k, amounts, at, &high);
            amounts[p] = it->amounts[p] - fmin(step, 0.5 * it->amounts[p]);
            answer = answer == ANSWER_OK ? pressure_after(it, k, amounts, at, &low) : answer;
            if (answer != ANSWER_OK) {
                return answer;
            }
            slopes[k * it->parents + j] = (high - low) / (it->amounts[p] + step - amounts[p]);
        }
        if (pressure_after(it, k, it->amounts, at + TEMPERATURE_STEP, &high) != ANSWER_OK ||
            pressure_after(it, k, it->amounts, at - TEMPERATURE_STEP, &low) != ANSWER_OK) {
            return ANSWER_FAILED;
        }
        by_temperature[k] = (high - low) / (2.0 * TEMPERATURE_STEP);
    }
    return ANSWER_OK;
}

/* What the masses become when reading k stops the filling `off` Pa too high: later additions make up for it, as they
 * are stopped at their own pressures. Forward through the triangle of slopes. */
static const double *changes_by_reading(const struct certificate *of, const double *slopes, size_t k, double off)
{
    const struct preparation *it = of->it;
    double *changes = arena_alloc(it->run->arena, of->equation.parts + it->parents, sizeof *changes);
    double *amounts = changes + of->equation.parts;
    for (size_t row = k; row < it->parents; row++) {
        double right = row == k ? off : 0.0;
        for (size_t j = k; j < row; j++) {
            right -= slopes[row * it->parents + j] * amounts[j];
        }
        amounts[row] = right / slopes[row * it->parents + row];
        changes[it->order[row]] = amounts[row] * parent_molar_mass(it, it->order[row]);
    }
    return changes;
}

static void add_readings(struct certificate *of, const struct filled_step steps[])
{
    const struct preparation *it = of->it;
    struct arena *arena = it->run->arena;
    double *slopes = arena_alloc(arena, it->parents * (it->parents + 1), sizeof *slopes);
    double *by_temperature = slopes + it->parents * it->parents;
    if (!it->made->is_by_pressure || of->is_weighed) {
        return;
    }
    if (set_slopes(it, slopes, by_temperature) != ANSWER_OK) {
        sheet_add_note(it->run->result, it->run->out,
                       "U is without the part of pressures and temperatures read: their slopes were not found");
        it->run->result->is_undecided = true;
        return;
    }
    for (size_t k = 0; k < it->parents; k++) {
        const struct case_addition *addition = &it->made->additions[it->order[k]];
        add_input_of(of,
                     (struct gravimetric_input){.kind = GRAVIMETRIC_MASS,
                                                .mass_change = changes_by_reading(of, slopes, k, 1.0),
                                                .value = steps[k].after.pressure,
                                                .standard = it->made->gauge.value / 2.0},
                     arena_format(arena, "pressure after %s", addition->name), look_gauge(it->run),
                     it->made->gauge.origin.at);
        add_input_of(of,
                     (struct gravimetric_input){.kind = GRAVIMETRIC_MASS,
                                                .mass_change = changes_by_reading(of, slopes, k, -by_temperature[k]),
                                                .value = addition->temperature.value,
                                                .standard = addition->temperature.uncertainty / 2.0},
                     arena_format(arena, "temperature after %s", addition->name), look_temperature(it->run),
                     addition->temperature.origin.at);
    }
}

/* As many as there can be: two for each addition, each share of a parent, the heel with its shares, the molar masses.
 */
static size_t room_for_inputs(const struct preparation *it)
{
    size_t room = 1 + it->count + (it->made->heel == NULL ? 0 : it->made->heel->fluid->count);
    for (size_t p = 0; p < it->parents; p++) {
        room += 2 + it->made->additions[p].parent->count;
    }
    return room;
}

static void set_inputs(struct certificate *of, const struct filled_step steps[])
{
    const struct preparation *it = of->it;
    struct arena *arena = it->run->arena;
    const size_t room = room_for_inputs(it);
    of->inputs = arena_alloc(arena, room, sizeof *of->inputs);
    of->names = arena_alloc(arena, room, sizeof *of->names);
    of->looks = arena_alloc(arena, room, sizeof *of->looks);
    of->lines = arena_alloc(arena, room, sizeof *of->lines);
    of->equation.inputs = of->inputs;
    add_weighings(of);
    add_readings(of, steps);
    for (size_t p = 0; p < it->parents; p++) {
        add_fractions(of, p, it->made->additions[p].parent, it->made->additions[p].places);
    }
    if (it->made->heel != NULL) {
        add_mass_input(of, it->parents, it->heel_uncertainty, "mass of the heel", it->made->heel->amount.origin.at);
        add_fractions(of, it->parents, it->made->heel->fluid, it->made->heel_places);
    }
    add_molar_masses(of);
}

/* ---- told -------------------------------------------------------------------------------------------------------- */

enum made_column { MADE_COMPONENT, MADE_TARGET, MADE_FRACTION, MADE_OFF, MADE_UNCERTAINTY };

static void tell_composition(const struct certificate *of)
{
    const struct preparation *it = of->it;
    const struct sheet_run *run = it->run;
    const bool has_uncertainty = of->equation.input_count > 0;
    struct table *table = sheet_add_table(
        run->result, run->out, of->is_weighed ? "composition as weighed" : "composition by the recipe", NULL);
    const struct look look = look_significant(look_percent(0), FRACTION_DIGITS);
    table->has_own_uncertainty = true;
    table_add_word_column(run->result, table, "component");
    table_add_column(run->result, table, "target", look);
    table_add_column(run->result, table, "made", look);
    table_add_column(run->result, table, "off-target-by", look_percent(3));
    if (has_uncertainty) {
        table_add_column(run->result, table, "U", look_significant(look_percent(0), 2));
    }
    for (size_t i = 0; i < it->count; i++) {
        const double target = run->sheet->fluid->fractions[i];
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[MADE_COMPONENT], run->sheet->fluid->components[i]->name);
        cell_set(&row[MADE_FRACTION], of->x[i]);
        if (target > 0.0) {
            cell_set(&row[MADE_TARGET], target);
            cell_set(&row[MADE_OFF], of->x[i] / target - 1.0);
        }
        if (has_uncertainty) {
            cell_set(&row[MADE_UNCERTAINTY], 2.0 * of->first.standard[i]);
        }
    }
    sheet_add_note(run->result, run->out, "mole fractions by the gravimetric equation of ISO 6142-1%s",
                   has_uncertainty ? "; U: expanded uncertainty, k = 2, by first order (JCGM 100)" : "");
}

static struct budget_line line_of(const struct certificate *of, size_t k, size_t i)
{
    const double sensitivity = of->first.sensitivities[k * of->equation.count + i];
    return (struct budget_line){
        .input = of->names[k],
        .line = of->lines[k],
        .value = of->inputs[k].value,
        .standard = of->inputs[k].standard,
        .look = of->looks[k],
        .step_look = look_of_steps(of->looks[k]),
        .sensitivity = sensitivity,
        .contribution = sensitivity * of->inputs[k].standard,
        .share = first_order_share(&of->model, &of->first, k, i),
    };
}

static struct budget *tell_budget(const struct certificate *of, size_t i)
{
    const struct sheet_run *run = of->it->run;
    struct budget_line *lines = arena_alloc(run->arena, of->equation.input_count, sizeof *lines);
    struct budget *budget = sheet_add_budget(
        run->result, run->out, arena_format(run->arena, "%s made", run->sheet->fluid->components[i]->name));
    budget->value = of->x[i];
    budget->look = look_significant(look_percent(0), FRACTION_DIGITS);
    budget->step_look = budget->look;
    budget->standard = of->first.standard[i];
    budget->deviation = of->first.deviations[i];
    budget->is_linear = first_order_is_linear(&of->first, i);
    for (size_t k = 0; k < of->equation.input_count; k++) {
        if (fabs(of->first.sensitivities[k * of->equation.count + i]) > 0.0) {
            lines[budget->line_count++] = line_of(of, k, i);
        }
    }
    budget->lines = lines;
    return budget;
}

static void draw_told(const struct certificate *of, const size_t told[], size_t count, struct budget *const budgets[])
{
    struct arena *arena = of->it->run->arena;
    const struct case_sheet *sheet = of->it->run->sheet;
    double *base = arena_alloc(arena, 2 * count, sizeof *base), *standard = base + count;
    for (size_t k = 0; k < count; k++) {
        base[k] = of->first.base[told[k]];
        standard[k] = of->first.standard[told[k]];
    }
    const struct first_order first = {.is_known = true, .base = base, .standard = standard};
    const struct propagation_model model = gravimetric_model_of(&of->equation, told, count, arena);
    const struct drawn drawn = propagate_draws(&model, &first, sheet->draws, sheet->seed, 0, arena);
    for (size_t k = 0; k < count; k++) {
        budgets[k]->drawn = drawn_budget_of(&drawn, &first, k, sheet->seed);
    }
}

/* Of the target's components but the rest, whose uncertainty is theirs together. */
static void tell_budgets_of(const struct certificate *of)
{
    const struct preparation *it = of->it;
    const struct case_sheet *sheet = it->run->sheet;
    size_t *told = arena_alloc(it->run->arena, it->count, sizeof *told), count = 0;
    struct budget **budgets = arena_alloc(it->run->arena, it->count, sizeof *budgets);
    for (size_t i = 0; i < it->count; i++) {
        if (i != it->task.rest && sheet->fluid->fractions[i] > 0.0 && of->first.standard[i] > 0.0) {
            budgets[count] = tell_budget(of, i);
            told[count++] = i;
        }
    }
    if (sheet->draws > 0 && count > 0) {
        draw_told(of, told, count, budgets);
    }
}

static void require_tolerance(const struct certificate *of)
{
    const struct preparation *it = of->it;
    const struct sheet_run *run = it->run;
    const struct quantity *tolerance = &it->made->tolerance;
    for (size_t i = 0; i < it->count && tolerance->given; i++) {
        const double target = run->sheet->fluid->fractions[i];
        if (!(target > 0.0)) {
            continue;
        }
        const double off = fabs(of->x[i] / target - 1.0), margin = tolerance->value - off;
        struct requirement *requirement = sheet_add_requirement(
            run->result, run->out,
            arena_format(run->arena, "%s within %s of its target, %s", run->sheet->fluid->components[i]->name,
                         shown_text(run, look_significant(look_percent(0), 3), tolerance->value),
                         of->is_weighed ? "as weighed" : "by the recipe"));
        requirement->state = margin >= 0.0 ? REQUIREMENT_MET : REQUIREMENT_NOT_MET;
        requirement->has_margin = true;
        requirement->margin = margin;
        requirement->look = look_percent(3);
        requirement->line = deck_line(run, tolerance->origin.at);
        requirement->is_within_uncertainty =
            of->equation.input_count > 0 && fabs(margin) < 2.0 * of->first.standard[i] / target;
        if (requirement->is_within_uncertainty) {
            result_warn(run->result, CODE_W345, requirement->line, run->number,
                        "'%s': the verdict lies within the uncertainty of the inputs", requirement->text);
        }
        requirement->carried = (struct carried){.kind = of->equation.input_count > 0 ? CARRIED : CARRIED_NONE,
                                                .expanded = 2.0 * of->first.standard[i] / target};
    }
}

/* The gravimetric equation with the numbers put in. */
static void add_hand_check(const struct certificate *of)
{
    const struct preparation *it = of->it;
    struct sheet_run *run = it->run;
    struct hand_check *check = sheet_add_hand_check(run->result, run->out, "gravimetric equation");
    const struct gravimetric *equation = &of->equation;
    double whole = 0.0;
    size_t scarce = it->task.rest;
    for (size_t i = 0; i < it->count; i++) {
        const bool is_less = it->task.target[i] > 0.0 && i != it->task.rest;
        scarce = is_less && (scarce == it->task.rest || it->task.target[i] < it->task.target[scarce]) ? i : scarce;
    }
    double found = 0.0;
    for (size_t p = 0; p < equation->parts; p++) {
        const struct gravimetric_part *part = &equation->part[p];
        const char *name = p < it->parents ? it->made->additions[p].name : it->made->heel->fluid->name;
        double M = 0.0, inverse = 0.0;
        for (size_t i = 0; i < it->count; i++) {
            M += part->fractions[i] * it->molar_masses[i];
            inverse += part->fractions[i] / it->molar_masses[i];
        }
        M = part->is_by_mass ? 1.0 / inverse : M;
        const double X =
            part->is_by_mass ? part->fractions[scarce] / it->molar_masses[scarce] * M : part->fractions[scarce];
        hand_check_line(run->result, check, "%s: m / M = %.7f kg / %.8f kg/mol = %.6f mol, of it %s %.7g mol", name,
                        part->mass, M, part->mass / M, run->sheet->fluid->components[scarce]->name, X * part->mass / M);
        whole += part->mass / M;
        found += X * part->mass / M;
    }
    hand_check_line(run->result, check, "x(%s) = %.7g mol / %.6f mol = %.7g",
                    run->sheet->fluid->components[scarce]->name, found, whole, found / whole);
}

/* ---- the label --------------------------------------------------------------------------------------------------- */

/* The warmest temperature at which the content, or what is left of it on the way to empty, is not one phase. */
static void tell_coldest_use(const struct preparation *it)
{
    struct sheet_run *run = it->run;
    struct method_run *method = &run->methods[0];
    double warmest = 0.0, part_there = 1.0;
    bool is_known = true;
    for (size_t k = 0; k < sizeof PARTS_LEFT / sizeof *PARTS_LEFT; k++) {
        const struct liquid_end_found found = find_liquid_end(run, method, PARTS_LEFT[k] * it->mass);
        is_known = is_known && found.end != LIQUID_END_UNKNOWN;
        if (found.end == LIQUID_END_DRY && found.temperature > warmest) {
            warmest = found.temperature;
            part_there = PARTS_LEFT[k];
        }
    }
    if (!is_known || !(warmest > 0.0)) {
        sheet_add_words(run->result, run->out, "minimum-use-temperature",
                        is_known ? "none: nothing condenses" : "not found");
        return;
    }
    struct fact *fact =
        sheet_add_fact(run->result, run->out, "minimum-use-temperature", warmest, look_temperature(run));
    fact->method = method->name;
    fact->remark = part_there < 1.0
                       ? arena_format(run->arena, "first liquid, %.0f %% of the content left", 100.0 * part_there)
                       : "first liquid of the full vessel; none as it empties";
    sheet_add_words(run->result, run->out, "minimum-use-pressure",
                    "none: above that temperature it stays one phase down to empty");
}

static void tell_label(const struct preparation *it, const struct filled_step steps[])
{
    struct sheet_run *run = it->run;
    const struct filled_state *last = &steps[it->parents - 1].after;
    sheet_begin_facts(run->result, run->out, "label");
    sheet_add_fact(run->result, run->out, "content", it->mass, look_mass(run));
    sheet_add_words(run->result, run->out, "class", class_words(classify_charge(run, &run->methods[0], it->mass)));
    sheet_add_fact(run->result, run->out, "settled-gauge-pressure", last->pressure, look_gauge(run))->remark =
        arena_format(run->arena, "at %s",
                     temperature_words(run, it->made->additions[it->order[it->parents - 1]].temperature.value));
    if (last->has_liquid) {
        sheet_add_words(run->result, run->out, "minimum-use-temperature", "none: it is filled as a liquid");
        const struct liquid_end_found end = find_liquid_end(run, &run->methods[0], it->mass);
        if (end.end == LIQUID_END_DRY) {
            sheet_add_fact(run->result, run->out, "all-gas-above", end.temperature, look_temperature(run))->method =
                run->methods[0].name;
        }
        return;
    }
    tell_coldest_use(it);
}

void tell_certificate(const struct preparation *it, const struct filled_step steps[])
{
    struct arena *arena = it->run->arena;
    struct certificate of = {.it = it};
    set_parts(&of);
    set_inputs(&of, steps);
    of.x = arena_alloc(arena, it->count, sizeof *of.x);
    gravimetric_fractions(&of.equation, of.x);
    if (of.equation.input_count > 0) {
        of.model = gravimetric_model(&of.equation, arena);
        of.first = propagate_first_order(&of.model, arena);
    }
    if (it->count > 1) {
        tell_composition(&of);
        add_hand_check(&of);
    }
    if (of.equation.input_count > 0) {
        tell_budgets_of(&of);
    }
    tell_label(it, steps);
    require_tolerance(&of);
}
