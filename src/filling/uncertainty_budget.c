/* Budgets of the results that govern a sheet: which input contributes how much, and what random draws say of it. */
#include "filling/settled_draws.h"

#include <math.h>
#include <string.h>

/* Facts that a sheet is about, by its kind, beside the tightest margin; the last row stands for what a sheet has not of
 * them. */
static const struct {
    enum sheet_kind kind;
    const char *fact;
} GOVERNING[] = {
    {SHEET_PERMISSIBLE_CHARGE, "mass"},
    {SHEET_PERMISSIBLE_CHARGE, "settled-gauge-pressure"},
    {SHEET_SETTLED_PRESSURE, "mass"},
    {SHEET_DRAW_DOWN, "usable-mass"},
};

/* Outlets that get a budget. */
struct chosen {
    size_t count, capacity;
    size_t *items;
};

static bool is_uncertain(const struct uncertain_sheet *it, size_t k)
{
    return isfinite(it->first.standard[k]) && it->first.standard[k] > 0.0;
}

static void choose(struct uncertain_sheet *it, struct chosen *chosen, size_t k)
{
    for (size_t i = 0; i < chosen->count; i++) {
        if (chosen->items[i] == k) {
            return;
        }
    }
    *ARENA_APPEND(it->run->arena, chosen) = k;
}

static void choose_facts(struct uncertain_sheet *it, struct chosen *chosen)
{
    for (size_t g = 0; g < sizeof GOVERNING / sizeof *GOVERNING; g++) {
        for (size_t k = 0; k < it->outlets.count && GOVERNING[g].kind == it->run->sheet->kind; k++) {
            const struct outlet *outlet = &it->outlets.items[k];
            if (outlet->kind == OUTLET_FACT && strcmp(outlet->fact->name, GOVERNING[g].fact) == 0 &&
                is_uncertain(it, k)) {
                choose(it, chosen, k);
                break;
            }
        }
    }
}

/* The margin that is smallest against its own uncertainty. False where there is none. */
static bool choose_margin(struct uncertain_sheet *it, struct chosen *chosen)
{
    size_t tightest = it->outlets.count;
    double least = (double)INFINITY;
    for (size_t k = 0; k < it->outlets.count; k++) {
        if (it->outlets.items[k].kind == OUTLET_MARGIN && is_uncertain(it, k)) {
            const double distance = fabs(it->outlets.items[k].requirement->margin) / it->first.standard[k];
            if (distance < least) {
                least = distance;
                tightest = k;
            }
        }
    }
    if (tightest < it->outlets.count) {
        choose(it, chosen, tightest);
    }
    return tightest < it->outlets.count;
}

static bool is_in_column(const struct outlet *outlet, const char *column)
{
    const struct table *table = outlet->table;
    return column == NULL || strcmp(table->columns[outlet->place % table->column_count].name, column) == 0;
}

/* The first uncertain number in the last row of the first table that has one, in that column (NULL: in any). False
 * where there is none. */
static bool choose_cell(struct uncertain_sheet *it, const char *column, struct chosen *chosen)
{
    size_t first = it->outlets.count, table = 0, row = 0;
    for (size_t k = 0; k < it->outlets.count; k++) {
        const struct outlet *outlet = &it->outlets.items[k];
        if (outlet->kind != OUTLET_CELL || !is_uncertain(it, k) || !is_in_column(outlet, column)) {
            continue;
        }
        const size_t its_row = outlet->place / outlet->table->column_count;
        if (first == it->outlets.count || (outlet->table_place == table && its_row > row)) {
            first = k;
            table = outlet->table_place;
            row = its_row;
        }
    }
    if (first < it->outlets.count) {
        choose(it, chosen, first);
    }
    return first < it->outlets.count;
}

/* What a sheet without margins comes to: its last pressure, or else the last row of what it tells. */
static void choose_last(struct uncertain_sheet *it, struct chosen *chosen)
{
    if (!choose_cell(it, "pressure", chosen)) {
        choose_cell(it, NULL, chosen);
    }
}

/* ---- budgets ----------------------------------------------------------------------------------------------------- */

static const char *name_of_result(const struct sheet_run *run, const struct outlet *outlet)
{
    switch (outlet->kind) {
    case OUTLET_FACT:
        return outlet->fact->name;
    case OUTLET_CELL:
        return arena_format(run->arena, "%s in row %zu of '%s'",
                            outlet->table->columns[outlet->place % outlet->table->column_count].name,
                            outlet->place / outlet->table->column_count + 1, outlet->table->title);
    case OUTLET_MARGIN:
    case OUTLET_STATE:
        break;
    }
    return arena_format(run->arena, "margin of '%s'", outlet->requirement->text);
}

static const char *method_of_result(const struct outlet *outlet)
{
    return outlet->kind == OUTLET_FACT   ? outlet->fact->method
           : outlet->kind == OUTLET_CELL ? outlet->table->method
                                         : outlet->requirement->method;
}

static const char *name_of_input(const struct sheet_run *run, const struct case_spread *spread)
{
    return spread->group == NULL ? spread->name : arena_format(run->arena, "%s of %s", spread->name, spread->group);
}

static struct budget_line line_of(const struct uncertain_sheet *it, size_t i, size_t k)
{
    const struct case_spread *spread = it->inputs[i];
    const struct look look = {spread->si_unit, spread->unit, 0};
    const bool is_own = spread->origin.at.file == it->run->tree->deck->root;
    const double sensitivity = it->first.sensitivities[i * it->outlets.count + k];
    return (struct budget_line){
        .input = name_of_input(it->run, spread),
        .line = is_own ? location_line(spread->origin.at) : 0,
        .value = spread->value,
        .standard = it->model.spreads[i],
        .look = look,
        .step_look = look_of_steps(look),
        .sensitivity = sensitivity,
        .contribution = sensitivity * it->model.spreads[i],
        .share = first_order_share(&it->model, &it->first, i, k),
        .is_one_sided = it->first.is_one_sided[i],
    };
}

/* Inputs that contribute, in the order they were read. */
static void add_lines(const struct uncertain_sheet *it, size_t k, struct budget *budget)
{
    struct budget_line *lines = arena_alloc(it->run->arena, it->input_count, sizeof *lines);
    for (size_t i = 0; i < it->input_count; i++) {
        if (fabs(it->first.sensitivities[i * it->outlets.count + k]) > 0.0) {
            lines[budget->line_count++] = line_of(it, i, k);
        }
    }
    budget->lines = lines;
}

static struct budget *add_budget(const struct uncertain_sheet *it, size_t k)
{
    const struct outlet *outlet = &it->outlets.items[k];
    struct sheet_run *run = it->run;
    struct budget *budget = sheet_add_budget(run->result, run->out, name_of_result(run, outlet));
    budget->method = method_of_result(outlet);
    budget->value = outlet_value(outlet);
    budget->look = outlet_look(outlet);
    if (outlet->kind == OUTLET_MARGIN) {
        budget->look = look_of_steps(budget->look);
    }
    budget->step_look = look_of_steps(budget->look);
    budget->standard = it->first.standard[k];
    budget->deviation = it->first.deviations[k];
    budget->is_linear = first_order_is_linear(&it->first, k);
    add_lines(it, k, budget);
    return budget;
}

/* ---- draws ------------------------------------------------------------------------------------------------------- */

/* The chosen results alone, of the whole sheet. */
struct picked {
    const struct uncertain_sheet *it;
    const struct chosen *chosen;
    void *context;
    double *all; /* [outlets.count] */
};

static enum model_answer evaluate_picked(void *context, const double inputs[], double outputs[])
{
    struct picked *picked = context;
    const enum model_answer answer = picked->it->model.evaluate(picked->context, inputs, picked->all);
    for (size_t i = 0; answer == MODEL_OK && i < picked->chosen->count; i++) {
        outputs[i] = picked->all[picked->chosen->items[i]];
    }
    return answer;
}

static void *picked_for_thread(void *context, struct arena *arena)
{
    const struct picked *from = context;
    struct picked *own = arena_alloc(arena, 1, sizeof *own);
    *own = *from;
    own->context = from->it->model.context_for_thread(from->it->model.context, arena);
    own->all = arena_alloc(arena, from->it->outlets.count, sizeof *own->all);
    return own;
}

/* First order of the chosen results alone, for the comparison. */
static struct first_order picked_first(const struct uncertain_sheet *it, const struct chosen *chosen)
{
    double *base = arena_alloc(it->run->arena, chosen->count, sizeof *base);
    double *standard = arena_alloc(it->run->arena, chosen->count, sizeof *standard);
    for (size_t i = 0; i < chosen->count; i++) {
        base[i] = it->first.base[chosen->items[i]];
        standard[i] = it->first.standard[chosen->items[i]];
    }
    return (struct first_order){.is_known = true, .base = base, .standard = standard};
}

struct drawn_budget drawn_budget_of(const struct drawn *drawn, const struct first_order *first, size_t i, uint64_t seed)
{
    const struct drawn_output *output = &drawn->outputs[i];
    return (struct drawn_budget){
        .given = true,
        .draws = drawn->draws,
        .answered = output->count,
        .seed = seed,
        .mean = output->mean,
        .standard = output->standard,
        .low = output->low,
        .high = output->high,
        .first_low = first->base[i] - COVERAGE_FACTOR * first->standard[i],
        .first_high = first->base[i] + COVERAGE_FACTOR * first->standard[i],
        .part_met = output->part_not_below_zero,
        .tolerance = output->tolerance,
        .agreement = output->agrees       ? AGREES
                     : output->is_blurred ? AGREEMENT_BLURRED
                                          : AGREES_NOT,
    };
}

static void tell_disagreement(const struct uncertain_sheet *it, const struct budget *budget)
{
    if (budget->drawn.agreement == AGREES_NOT) {
        result_warn(it->run->result, CODE_W348, location_line(it->run->sheet->at), it->run->number,
                    "%s: the 95 %% interval by random draws is not the one by first order", budget->result);
    }
}

/* Models that give a kind of sheet's results without answering all of it: each says whether it serves. */
static bool make_quick(const struct uncertain_sheet *it, const struct chosen *chosen, struct propagation_model *model)
{
    static bool (*const QUICK[])(const struct uncertain_sheet *, const size_t[], size_t, struct propagation_model *) = {
        settled_quick_model,
    };
    for (size_t i = 0; i < sizeof QUICK / sizeof *QUICK; i++) {
        if (QUICK[i](it, chosen->items, chosen->count, model)) {
            return true;
        }
    }
    return false;
}

static void tell_draws(struct uncertain_sheet *it, const struct chosen *chosen, struct budget **budgets)
{
    struct sheet_run *run = it->run;
    struct picked context = {.it = it, .chosen = chosen};
    struct propagation_model model = it->model;
    model.output_count = chosen->count;
    model.resolutions = NULL;
    model.evaluate = evaluate_picked;
    model.context = &context;
    model.context_for_thread = picked_for_thread;
    const bool is_quick = make_quick(it, chosen, &model);
    const struct first_order first = picked_first(it, chosen);
    const struct drawn drawn = propagate_draws(&model, &first, run->sheet->draws, run->sheet->seed, 0, run->arena);
    for (size_t i = 0; i < chosen->count; i++) {
        budgets[i]->drawn = drawn_budget_of(&drawn, &first, i, run->sheet->seed);
        budgets[i]->drawn.has_part_met = it->outlets.items[chosen->items[i]].kind == OUTLET_MARGIN;
        tell_disagreement(it, budgets[i]);
    }
    if (is_quick && run->sheet->kind == SHEET_SETTLED_PRESSURE) {
        sheet_add_note(run->result, run->out,
                       "draws of margins: at the temperature that is worst at the values as written");
    }
    if (drawn.impossible > 0) {
        sheet_add_note(run->result, run->out,
                       "%zu draws had impossible inputs and were drawn anew: the distributions are cut off where their "
                       "values end",
                       drawn.impossible);
    }
}

/* A limit lower by its own uncertainty holds for nearly all that the inputs may be: a guard band of U, as JCGM
 * 106:2012, 8.3.2 (from memory), has it. */
static void tell_guarded_mass(const struct uncertain_sheet *it, const struct chosen *chosen)
{
    struct sheet_run *run = it->run;
    for (size_t i = 0; i < chosen->count && run->found_is_limit; i++) {
        const struct outlet *outlet = &it->outlets.items[chosen->items[i]];
        if (outlet->kind == OUTLET_FACT && strcmp(outlet->fact->name, "mass") == 0 &&
            outlet->fact->carried.kind == CARRIED && outlet->fact->carried.expanded < outlet->fact->value) {
            sheet_begin_facts(run->result, run->out, "with the uncertainty of the inputs");
            struct fact *fact =
                sheet_add_fact(run->result, run->out, "guarded-mass",
                               outlet->fact->value - outlet->fact->carried.expanded, outlet->fact->look);
            fact->method = outlet->fact->method;
            fact->remark = "the permitted mass less its U";
            return;
        }
    }
}

void tell_budgets(struct uncertain_sheet *it)
{
    struct chosen chosen = {.count = 0};
    choose_facts(it, &chosen);
    const bool has_margin = choose_margin(it, &chosen);
    if (!has_margin && (chosen.count == 0 || it->run->sheet->kind == SHEET_SETTLED_PRESSURE)) {
        choose_last(it, &chosen);
    }
    struct budget **budgets = arena_alloc(it->run->arena, chosen.count, sizeof *budgets);
    for (size_t i = 0; i < chosen.count; i++) {
        budgets[i] = add_budget(it, chosen.items[i]);
    }
    if (it->run->sheet->draws > 0 && chosen.count > 0) {
        tell_draws(it, &chosen, budgets);
    }
    tell_guarded_mass(it, &chosen);
}

/* ---- what has to be known to read them --------------------------------------------------------------------------- */

static size_t count_kind(const struct uncertain_sheet *it, enum carried_kind kind)
{
    size_t count = 0;
    for (size_t k = 0; k < it->outlets.count; k++) {
        const struct outlet *outlet = &it->outlets.items[k];
        count += (outlet->kind == OUTLET_FACT && outlet->fact->carried.kind == kind) ||
                 (outlet->kind == OUTLET_CELL && outlet->cell->carried.kind == kind) ||
                 (outlet->kind == OUTLET_MARGIN && outlet->requirement->carried.kind == kind);
    }
    return count;
}

/* Fractions that all have values of their own no longer add up to a whole when one is shifted. */
static bool has_shares_without_rest(const struct sheet_run *run)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    bool has_spread = false;
    for (size_t i = 0; fluid != NULL && fluid->shares != NULL && i < fluid->count; i++) {
        if (fluid->shares[i].is_rest) {
            return false;
        }
        has_spread = has_spread || fluid->shares[i].given.uncertainty > 0.0;
    }
    return has_spread;
}

void tell_how_carried(struct uncertain_sheet *it)
{
    struct sheet_run *run = it->run;
    const size_t bent = count_kind(it, CARRIED_NOT_LINEAR), unknown = count_kind(it, CARRIED_UNKNOWN);
    if (bent + unknown + count_kind(it, CARRIED) == 0) {
        return;
    }
    sheet_add_note(
        run->result, run->out,
        "\u00b1: expanded uncertainty U, k = 2, by first order (JCGM 100) from what the deck writes with +/-, "
        "those inputs taken as independent and normal; the methods' own errors are not in it%s%s",
        run->found_mass > 0.0 ? "; of margins, with the permitted mass held" : "",
        has_shares_without_rest(run) ? "; fractions are brought to a whole after each shift" : "");
    if (bent > 0) {
        result_warn(run->result, CODE_W346, location_line(run->sheet->at), run->number,
                    "%zu result%s not nearly linear within the inputs' uncertainty, marked ~: the larger of U by first "
                    "order and the change found is told",
                    bent, bent == 1 ? " is" : "s are");
    }
    if (unknown > 0) {
        result_warn(run->result, CODE_W347, location_line(run->sheet->at), run->number,
                    "%zu result%s no uncertainty told, marked ?: with shifted inputs there was no answer", unknown,
                    unknown == 1 ? " has" : "s have");
    }
}
