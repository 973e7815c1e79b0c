#include "filling/uncertainty.h"

#include "filling/solve.h"
#include "filling/uncertainty_internal.h"

#include <math.h>
#include <stdatomic.h>
#include <string.h>

/* ---- the sheet with shifted inputs ------------------------------------------------------------------------------- */

/* One reader of the sheet as a function of its inputs; threads have one each. */
struct shifted_sheet {
    const struct uncertain_sheet *of;
    struct case_shift *shifts; /* [input_count] */
    double held_mass;
    atomic_bool *is_exhausted; /* memory ran out in one of them */
};

static const struct result_sheet *solve_shifted(const struct shifted_sheet *it, size_t count, struct arena *scratch)
{
    const struct sheet_run *run = it->of->run;
    struct diagnostics unheard = {.arena = scratch};
    const struct case_tree *tree = case_elaborate_shifted(run->tree->deck, it->shifts, count, scratch, &unheard);
    return tree == NULL ? NULL : filling_solve_sheet(tree, run->number - 1, it->held_mass, scratch);
}

/* Everything of the shifted case lives in an arena of its own, given back as soon as its results are read. */
static enum model_answer evaluate_within(const struct shifted_sheet *it, size_t count, struct arena *scratch,
                                         double outputs[])
{
    jmp_buf exhausted;
    if (setjmp(exhausted) != 0) {
        atomic_store(it->is_exhausted, true);
        return MODEL_NO_ANSWER;
    }
    arena_on_exhaustion(scratch, &exhausted);
    const struct result_sheet *sheet = solve_shifted(it, count, scratch);
    if (sheet == NULL) {
        return MODEL_IMPOSSIBLE;
    }
    read_outlets(&it->of->outlets, sheet, outputs);
    return MODEL_OK;
}

static enum model_answer evaluate_sheet(void *context, const double inputs[], double outputs[])
{
    const struct shifted_sheet *it = context;
    size_t count = 0;
    for (size_t i = 0; i < it->of->input_count; i++) {
        const struct case_spread *spread = it->of->inputs[i];
        if (fabs(inputs[i] - spread->value) > 0.0) {
            it->shifts[count++] = (struct case_shift){.at = spread->at, .by = inputs[i] - spread->value};
        }
    }
    struct arena *scratch = arena_create_beside(it->of->run->arena);
    if (scratch == NULL) {
        atomic_store(it->is_exhausted, true);
        return MODEL_NO_ANSWER;
    }
    const enum model_answer answer = evaluate_within(it, count, scratch, outputs);
    arena_free(scratch);
    return answer;
}

static void *shifted_for_thread(void *context, struct arena *arena)
{
    const struct shifted_sheet *it = context;
    struct shifted_sheet *own = arena_alloc(arena, 1, sizeof *own);
    *own = *it;
    own->shifts = arena_alloc(arena, it->of->input_count, sizeof *own->shifts);
    return own;
}

static void tell_progress(void *context, size_t done, size_t count)
{
    const struct sheet_run *run = context;
    if (run->progress != NULL) {
        const struct progress_state state = {.sheet = run->number,
                                             .sheet_count = run->tree->sheet_count,
                                             .kind = run->out->kind,
                                             .done = done,
                                             .count = count};
        run->progress->tell(run->progress->context, &state);
    }
}

/* ---- the model --------------------------------------------------------------------------------------------------- */

static void collect_inputs(struct uncertain_sheet *it)
{
    const struct case_tree *tree = it->run->tree;
    it->inputs = arena_alloc(it->run->arena, tree->spread_count, sizeof *it->inputs);
    for (size_t i = 0; i < tree->spread_count; i++) {
        if (case_sheet_may_depend(it->run->sheet, &tree->spreads[i])) {
            it->inputs[it->input_count++] = &tree->spreads[i];
        }
    }
}

/* Searches end within this part of what they look for, temperatures within a millikelvin; plain numbers that should be
 * nought are rounding: a smaller change is none. */
#define RELATIVE_RESOLUTION    1e-8
#define TEMPERATURE_RESOLUTION 2e-3 /* K */
#define NUMBER_RESOLUTION      1e-12
/* Nor is one that is no more than this part of the last digit shown. */
#define SHOWN_RESOLUTION 0.05

/* SI of one in the last digit that a reader sees. */
static double last_digit(const struct look *look, double value)
{
    if (look->decimals >= 0) {
        return pow(10.0, -look->decimals) * look->shown.factor;
    }
    return fabs(value) > 0.0 ? pow(10.0, floor(log10(fabs(value))) + 1.0 + look->decimals) : 0.0;
}

static double resolution_of(const struct outlet *outlet)
{
    const struct look look = outlet_look(outlet);
    const double value = outlet_value(outlet);
    const char *unit = look.si_unit == NULL ? "" : look.si_unit;
    const double rounding = strcmp(unit, "K") == 0   ? TEMPERATURE_RESOLUTION
                            : strcmp(unit, "1") == 0 ? NUMBER_RESOLUTION
                                                     : 0.0;
    const double of_search = fmax(RELATIVE_RESOLUTION * fabs(value), rounding);
    return outlet->kind == OUTLET_STATE ? 0.0 : fmax(of_search, SHOWN_RESOLUTION * last_digit(&look, value));
}

static void set_up_model(struct uncertain_sheet *it, atomic_bool *is_exhausted)
{
    struct arena *arena = it->run->arena;
    double *values = arena_alloc(arena, it->input_count, sizeof *values);
    double *spreads = arena_alloc(arena, it->input_count, sizeof *spreads);
    double *resolutions = arena_alloc(arena, it->outlets.count, sizeof *resolutions);
    for (size_t i = 0; i < it->input_count; i++) {
        values[i] = it->inputs[i]->value;
        spreads[i] = it->inputs[i]->uncertainty / 2.0; /* written as expanded, k = 2 */
    }
    for (size_t k = 0; k < it->outlets.count; k++) {
        resolutions[k] = resolution_of(&it->outlets.items[k]);
    }
    struct shifted_sheet *context = arena_alloc(arena, 1, sizeof *context);
    *context = (struct shifted_sheet){.of = it,
                                      .shifts = arena_alloc(arena, it->input_count, sizeof *context->shifts),
                                      .held_mass = it->run->found_mass,
                                      .is_exhausted = is_exhausted};
    it->model = (struct propagation_model){.input_count = it->input_count,
                                           .output_count = it->outlets.count,
                                           .values = values,
                                           .spreads = spreads,
                                           .resolutions = resolutions,
                                           .evaluate = evaluate_sheet,
                                           .context = context,
                                           .context_for_thread = shifted_for_thread,
                                           .tell = tell_progress,
                                           .tell_context = it->run};
}

/* ---- what is carried to where ------------------------------------------------------------------------------------ */

static struct carried carried_to(const struct uncertain_sheet *it, size_t k)
{
    const double standard = it->first.standard[k], deviation = it->first.deviations[k];
    if (!isfinite(standard) || !isfinite(it->first.base[k])) {
        return (struct carried){.kind = CARRIED_UNKNOWN};
    }
    if (!(standard > 0.0) && !(deviation > 0.0)) {
        return (struct carried){.kind = CARRIED_NONE};
    }
    const bool is_linear = first_order_is_linear(&it->first, k);
    /* Off the straight line the larger of the two is told: a result that jumps shows no slope. */
    return (struct carried){.kind = is_linear ? CARRIED : CARRIED_NOT_LINEAR,
                            .expanded = is_linear ? 2.0 * standard : fmax(2.0 * standard, deviation)};
}

static void carry_to_margin(struct requirement *one, struct carried carried)
{
    one->carried = carried;
    one->is_within_uncertainty =
        one->is_within_uncertainty || ((carried.kind == CARRIED || carried.kind == CARRIED_NOT_LINEAR) &&
                                       one->state != REQUIREMENT_UNDECIDED && fabs(one->margin) < carried.expanded);
}

static void carry(const struct uncertain_sheet *it, size_t k)
{
    const struct outlet *outlet = &it->outlets.items[k];
    const struct carried carried = carried_to(it, k);
    switch (outlet->kind) {
    case OUTLET_FACT:
        outlet->fact->carried = carried;
        break;
    case OUTLET_CELL:
        outlet->cell->carried = carried;
        break;
    case OUTLET_MARGIN:
        carry_to_margin(outlet->requirement, carried);
        break;
    case OUTLET_STATE:
        /* Any change of state within twice an input's standard uncertainty shows as a spread or a deviation. */
        outlet->requirement->is_within_uncertainty =
            outlet->requirement->is_within_uncertainty || carried.kind != CARRIED_NONE;
        break;
    }
}

static void warn_of_verdicts(const struct uncertain_sheet *it)
{
    const struct sheet_run *run = it->run;
    for (const struct requirement *one = run->out->first_requirement; one != NULL; one = one->next) {
        if (one->is_within_uncertainty) {
            result_warn(run->result, CODE_W345, one->line, run->number,
                        "'%s': the verdict lies within the uncertainty of the inputs", one->text);
        }
    }
}

/* Draws that were asked for and have nothing to be drawn of. */
static void tell_nothing_to_draw(struct sheet_run *run)
{
    if (run->sheet->draws > 0 && run->sheet->kind != SHEET_PREPARATION) { /* which draws its composition itself */
        sheet_add_note(run->result, run->out, "nothing to draw: nothing this sheet depends on is written with +/-");
    }
}

void tell_uncertainty(struct sheet_run *run)
{
    struct uncertain_sheet it = {.run = run};
    collect_inputs(&it);
    if (it.input_count > 0) {
        it.outlets = collect_outlets(run->out, run->arena);
    }
    if (it.outlets.count == 0) {
        tell_nothing_to_draw(run);
        return;
    }
    atomic_bool is_exhausted = false;
    set_up_model(&it, &is_exhausted);
    it.first = propagate_first_order(&it.model, run->arena);
    if (atomic_load(&is_exhausted)) {
        arena_give_up(run->arena);
    }
    for (size_t k = 0; it.first.is_known && k < it.outlets.count; k++) {
        carry(&it, k);
    }
    warn_of_verdicts(&it);
    if (run->sheet->shows_every_uncertainty) {
        tell_every_row(&it);
    }
    tell_budgets(&it);
    tell_how_carried(&it);
    if (atomic_load(&is_exhausted)) {
        arena_give_up(run->arena);
    }
}
