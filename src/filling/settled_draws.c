/* The charge and the settled pressures of a settled-pressure sheet as quick functions of its inputs: for the many draws
 * that the whole sheet would take too long for. Everything else of the sheet stays as it is; in particular a margin is
 * taken at the temperature that is worst at the best estimates. */
#include "filling/settled_draws.h"

#include "filling/mixture_contents.h"
#include "filling/requirement.h"

#include <math.h>
#include <string.h>

#define RATED_TEMPERATURE 288.15 /* K: where fittings and working pressures are checked */

/* What an input is. */
enum role { ROLE_SHARE, ROLE_CAPACITY, ROLE_AMOUNT, ROLE_TEMPERATURE, ROLE_OTHER };

struct input_role {
    enum role role;
    size_t share; /* of ROLE_SHARE */
};

/* What an output is: the mass, or the base value, of a margin or a pressure, plus `sign` times the change of the
 * pressure. */
struct quick_output {
    bool is_mass;
    size_t method;
    double temperature, sign, base_value, base_pressure;
};

struct settled_quick {
    const struct uncertain_sheet *it;
    const struct input_role *roles; /* [input_count] */
    size_t output_count;
    struct quick_output *outputs;
    /* The copies that are changed from draw to draw. */
    struct sheet_run run;
    struct case_sheet sheet;
    struct case_vessel vessel;
    struct case_charge charge;
    struct method_run *methods; /* [run.method_count] */
    double *shares, *z;         /* [components] */
    double molar_mass;
};

/* ---- what the inputs are ----------------------------------------------------------------------------------------- */

static struct input_role role_of(const struct case_sheet *sheet, const struct case_spread *spread)
{
    const struct case_fluid *fluid = sheet->fluid;
    for (size_t i = 0; fluid->shares != NULL && !fluid->has_state && i < fluid->count; i++) {
        if (case_is_same_place(fluid->shares[i].given.origin.at, spread->at)) {
            return (struct input_role){ROLE_SHARE, i};
        }
    }
    if (case_is_same_place(sheet->vessel->water_capacity.origin.at, spread->at)) {
        return (struct input_role){ROLE_CAPACITY, 0};
    }
    if (case_is_same_place(sheet->charge->amount.origin.at, spread->at)) {
        return (struct input_role){ROLE_AMOUNT, 0};
    }
    if (sheet->charge->kind == FILL_PRESSURE && case_is_same_place(sheet->charge->temperature_at, spread->at)) {
        return (struct input_role){ROLE_TEMPERATURE, 0};
    }
    return (struct input_role){ROLE_OTHER, 0};
}

/* False where an input is something else that matters: what only weighs, as the tare, does not. */
static bool take_roles(struct settled_quick *quick, struct input_role *roles)
{
    const struct uncertain_sheet *it = quick->it;
    for (size_t i = 0; i < it->input_count; i++) {
        roles[i] = role_of(it->run->sheet, it->inputs[i]);
        const struct quantity *tare = &it->run->sheet->vessel->tare;
        const bool only_weighs = tare->given && case_is_same_place(tare->origin.at, it->inputs[i]->at);
        if (roles[i].role == ROLE_OTHER && !only_weighs) {
            return false;
        }
    }
    quick->roles = roles;
    return true;
}

/* ---- the state for a draw ---------------------------------------------------------------------------------------- */

/* The rest completes the whole; without one the shares are brought to it. */
static bool complete_shares(struct settled_quick *quick, const struct case_fluid *fluid)
{
    size_t rest = fluid->count;
    double sum = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        rest = fluid->shares[i].is_rest ? i : rest;
        sum += fluid->shares[i].is_rest ? 0.0 : quick->shares[i];
        if (!fluid->shares[i].is_rest && !(quick->shares[i] >= 0.0 && quick->shares[i] <= 1.0)) {
            return false;
        }
    }
    if (rest < fluid->count) {
        quick->shares[rest] = 1.0 - sum;
    }
    return rest < fluid->count ? sum <= 1.0 : sum > 0.0;
}

/* Mole fractions and molar mass from the shares. */
static bool set_composition(struct settled_quick *quick)
{
    const struct case_fluid *fluid = quick->sheet.fluid;
    if (fluid->shares == NULL || fluid->count == 1) {
        return true;
    }
    if (!complete_shares(quick, fluid)) {
        return false;
    }
    double sum = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        const double molar_mass = fluid->components[i]->molar_mass.value;
        quick->z[i] = quick->shares[i] / (fluid->basis == BASIS_MASS ? molar_mass : 1.0);
        sum += quick->z[i];
    }
    quick->molar_mass = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        quick->z[i] /= sum;
        quick->molar_mass += quick->z[i] * fluid->components[i]->molar_mass.value;
    }
    return true;
}

static bool set_inputs(struct settled_quick *quick, const double inputs[])
{
    for (size_t i = 0; i < quick->it->input_count; i++) {
        switch (quick->roles[i].role) {
        case ROLE_SHARE:
            quick->shares[quick->roles[i].share] = inputs[i];
            break;
        case ROLE_CAPACITY:
            quick->vessel.water_capacity.value = inputs[i];
            break;
        case ROLE_AMOUNT:
            quick->charge.amount.value = inputs[i];
            break;
        case ROLE_TEMPERATURE:
            quick->charge.temperature = inputs[i];
            break;
        case ROLE_OTHER:
            break;
        }
    }
    return quick->vessel.water_capacity.value > 0.0 && quick->charge.amount.value > 0.0 &&
           (quick->charge.kind != FILL_PRESSURE || quick->charge.temperature > 0.0) && set_composition(quick);
}

static enum answer find_mass(struct settled_quick *quick, double *mass)
{
    const struct case_charge *charge = &quick->charge;
    double molar_volume = 0.0;
    enum answer answer = ANSWER_OK;
    if (charge->kind == FILL_PRESSURE || charge->kind == FILL_VOLUME) {
        const double pressure = charge->kind == FILL_PRESSURE ? charge->amount.value : charge->pressure;
        answer = free_volume_alone_at(&quick->methods[0], charge->temperature, pressure, &molar_volume);
    }
    *mass = charge_mass_of(charge, molar_volume, quick->molar_mass);
    return answer;
}

/* The same whatever was drawn before: no answer starts from the last one. */
static void begin_draw(struct settled_quick *quick)
{
    for (size_t m = 0; m < quick->run.method_count; m++) {
        if (quick->methods[m].fluid != NULL) {
            quick->methods[m].molar_mass = quick->molar_mass;
            method_run_change_mixture(&quick->methods[m]);
        }
    }
}

static enum answer find_pressure(struct settled_quick *quick, const struct quick_output *output, double mass,
                                 double *pressure)
{
    struct contents contents;
    const enum answer answer =
        pressure_at(&quick->run, &quick->methods[output->method], mass, output->temperature, &contents);
    *pressure = answer == ANSWER_OK ? contents.pressure : (double)NAN;
    return answer;
}

static enum model_answer evaluate(void *context, const double inputs[], double outputs[])
{
    struct settled_quick *quick = context;
    double mass;
    if (!set_inputs(quick, inputs)) {
        return MODEL_IMPOSSIBLE;
    }
    begin_draw(quick);
    if (find_mass(quick, &mass) != ANSWER_OK) {
        return MODEL_NO_ANSWER;
    }
    for (size_t k = 0; k < quick->output_count; k++) {
        const struct quick_output *output = &quick->outputs[k];
        double pressure;
        outputs[k] = mass;
        if (output->is_mass) {
            continue;
        }
        if (find_pressure(quick, output, mass, &pressure) != ANSWER_OK) {
            return MODEL_NO_ANSWER;
        }
        outputs[k] = output->base_value + output->sign * (pressure - output->base_pressure);
    }
    return MODEL_OK;
}

/* ---- copies ------------------------------------------------------------------------------------------------------ */

static void *copy_for_thread(void *context, struct arena *arena)
{
    const struct settled_quick *from = context;
    const struct sheet_run *run = from->it->run;
    const struct case_fluid *fluid = run->sheet->fluid;
    struct settled_quick *own = arena_alloc(arena, 1, sizeof *own);
    *own = *from;
    own->sheet = *run->sheet;
    own->vessel = *run->sheet->vessel;
    own->charge = *run->sheet->charge;
    own->charge.vessel = own->sheet.vessel = &own->vessel;
    own->sheet.charge = &own->charge;
    own->run = *run;
    own->run.sheet = &own->sheet;
    own->shares = arena_alloc(arena, fluid->count, sizeof *own->shares);
    own->z = arena_alloc(arena, fluid->count, sizeof *own->z);
    own->molar_mass = fluid->molar_mass;
    for (size_t i = 0; i < fluid->count; i++) {
        own->shares[i] = fluid->shares == NULL ? 1.0 : fluid->shares[i].given.value;
        own->z[i] = fluid->fractions[i];
    }
    own->methods = arena_alloc(arena, run->method_count, sizeof *own->methods);
    for (size_t m = 0; m < run->method_count; m++) {
        if (run->methods[m].fluid != NULL) {
            own->methods[m] = method_run_for_thread(&run->methods[m], arena);
            own->methods[m].z = own->z;
        }
    }
    own->run.methods = own->methods;
    return own;
}

/* ---- what the outputs are ---------------------------------------------------------------------------------------- */

static bool depends_on_contents(const struct formula *bound)
{
    return formula_mentions(bound, SYMBOL_PRESSURE) || formula_mentions(bound, SYMBOL_VAPOUR_PRESSURE) ||
           formula_mentions(bound, SYMBOL_DENSITY) || formula_mentions(bound, SYMBOL_LIQUID_DENSITY) ||
           formula_mentions(bound, SYMBOL_LIQUID_VOLUME) || formula_mentions(bound, SYMBOL_FILLING_RATIO);
}

/* The sign with which the margin follows the pressure; 0 where it does not, or not alone. */
static double sign_of(const struct predicate *predicate)
{
    if (predicate->kind != PREDICATE_COMPARE || predicate->quantity != SYMBOL_PRESSURE ||
        depends_on_contents(predicate->bound)) {
        return 0.0;
    }
    switch (predicate->relation) {
    case RELATION_LESS:
    case RELATION_AT_MOST:
        return -1.0;
    case RELATION_AT_LEAST:
    case RELATION_GREATER:
        return 1.0;
    case RELATION_EQUAL:
        break;
    }
    return 0.0;
}

/* Requirements of the sheet come first, in their order, then the vessel's ratings. */
static double sign_of_requirement(const struct sheet_run *run, size_t place)
{
    const struct case_sheet *sheet = run->sheet;
    return place < sheet->requirement_count ? sign_of(&sheet->requirements[place]) : -1.0;
}

static bool find_method(const struct sheet_run *run, const char *name, size_t *method)
{
    for (*method = 0; *method < run->method_count; ++*method) {
        if (name != NULL && strcmp(run->methods[*method].name, name) == 0) {
            return run->methods[*method].fluid != NULL;
        }
    }
    return false;
}

static bool take_margin(const struct sheet_run *run, const struct outlet *outlet, struct quick_output *out)
{
    const struct requirement *requirement = outlet->requirement;
    out->temperature = requirement->worst_temperature;
    out->base_value = requirement->margin;
    out->sign = sign_of_requirement(run, outlet->place);
    return fabs(out->sign) > 0.0 && requirement->has_worst_temperature &&
           find_method(run, requirement->method, &out->method);
}

/* A pressure in a table of settled pressures, whose rows begin with their temperature. */
static bool take_cell(const struct sheet_run *run, const struct outlet *outlet, struct quick_output *out)
{
    const struct table *table = outlet->table;
    const struct cell *temperature = &table->cells[outlet->place - outlet->place % table->column_count];
    out->temperature = temperature->number;
    out->base_value = outlet->cell->number;
    out->sign = 1.0;
    return table->title != NULL && strcmp(table->title, "settled pressure") == 0 &&
           strcmp(table->columns[outlet->place % table->column_count].name, "pressure") == 0 &&
           temperature->kind == CELL_NUMBER && find_method(run, table->method, &out->method);
}

static bool take_output(struct settled_quick *quick, const struct outlet *outlet, struct quick_output *out)
{
    *out = (struct quick_output){.is_mass = outlet->kind == OUTLET_FACT};
    switch (outlet->kind) {
    case OUTLET_FACT:
        return strcmp(outlet->fact->name, "mass") == 0;
    case OUTLET_CELL:
        return take_cell(quick->it->run, outlet, out);
    case OUTLET_MARGIN:
        return take_margin(quick->it->run, outlet, out);
    case OUTLET_STATE:
        break;
    }
    return false;
}

static bool find_base_pressures(struct settled_quick *quick)
{
    double mass;
    begin_draw(quick);
    bool is_found = find_mass(quick, &mass) == ANSWER_OK;
    for (size_t k = 0; is_found && k < quick->output_count; k++) {
        struct quick_output *output = &quick->outputs[k];
        is_found = output->is_mass || find_pressure(quick, output, mass, &output->base_pressure) == ANSWER_OK;
    }
    return is_found;
}

bool settled_quick_model(const struct uncertain_sheet *it, const size_t chosen[], size_t count,
                         struct propagation_model *model)
{
    struct arena *arena = it->run->arena;
    const struct case_sheet *sheet = it->run->sheet;
    if (sheet->kind != SHEET_SETTLED_PRESSURE || it->run->methods[0].fluid == NULL || sheet->fluid->has_state) {
        return false;
    }
    struct settled_quick plan = {
        .it = it, .output_count = count, .outputs = arena_alloc(arena, count, sizeof *plan.outputs)};
    if (!take_roles(&plan, arena_alloc(arena, it->input_count, sizeof *plan.roles))) {
        return false;
    }
    for (size_t k = 0; k < count; k++) {
        if (!take_output(&plan, &it->outlets.items[chosen[k]], &plan.outputs[k])) {
            return false;
        }
    }
    struct settled_quick *quick = copy_for_thread(&plan, arena);
    if (!find_base_pressures(quick)) {
        return false;
    }
    model->evaluate = evaluate;
    model->context = quick;
    model->context_for_thread = copy_for_thread;
    return true;
}
