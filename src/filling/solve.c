/* From a case to its result: methods made ready once, sheets answered in order, and all that a reader needs to trust
 * them told around. */
#include "filling/solve.h"

#include "filling/data_used.h"
#include "filling/listed_ledger.h"
#include "filling/mixture_basis.h"
#include "filling/pair_warnings.h"
#include "filling/uncertainty.h"

#include <string.h>

/* ---- fluids by amount -------------------------------------------------------------------------------------------- */

/* Fluids written by volume at a stated state, in mole fractions by one method. */
struct basis_list {
    size_t count, capacity;
    const struct mixture_basis **items;
};

static const struct mixture_basis *basis_of(struct basis_list *list, const struct case_fluid *written,
                                            const char *method, struct arena *arena)
{
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i]->written == written && strcmp(list->items[i]->method, method) == 0) {
            return list->items[i];
        }
    }
    const struct mixture_basis *basis = mixture_basis_create(written, method, arena);
    *ARENA_APPEND(arena, list) = basis;
    return basis;
}

/* Gives the sheet its fluid in mole fractions, by the method that leads. False where there are none. */
static bool take_amounts(struct sheet_run *run, struct basis_list *list)
{
    const struct case_sheet *asked = run->sheet;
    if (!asked->fluid->has_state) {
        return true;
    }
    const struct mixture_basis *basis = basis_of(list, asked->fluid, asked->methods.names[0], run->arena);
    tell_mixture_basis(run, basis);
    struct case_sheet *made = arena_alloc(run->arena, 1, sizeof *made);
    *made = *asked;
    made->fluid = basis->fluid;
    if (asked->charge != NULL) {
        struct case_charge *charge = arena_alloc(run->arena, 1, sizeof *charge);
        *charge = *asked->charge;
        charge->fluid = basis->fluid;
        made->charge = charge;
    }
    run->sheet = basis->fluid == NULL ? asked : made;
    return basis->fluid != NULL;
}

/* ---- methods ready --------------------------------------------------------------------------------------------- */

static struct pooled_method *pooled(struct method_pool *pool, const struct case_fluid *fluid, const char *method,
                                    struct arena *arena)
{
    for (size_t i = 0; i < pool->count; i++) {
        if (pool->items[i].fluid == fluid && strcmp(pool->items[i].run.name, method) == 0) {
            return &pool->items[i];
        }
    }
    struct pooled_method *added = ARENA_APPEND(arena, pool);
    *added = (struct pooled_method){.fluid = fluid, .run = method_run_create(fluid, method, true, arena)};
    return added;
}

static enum method_role role_in(const struct case_methods *methods, size_t index)
{
    if (index == 0) {
        return ROLE_LEADS;
    }
    return index < methods->may_govern ? ROLE_BESIDE : ROLE_SHOWN;
}

static void ready_methods(struct sheet_run *run, struct method_pool *pool)
{
    const struct case_methods *methods = &run->sheet->methods;
    run->method_count = methods->count;
    run->methods = arena_alloc(run->arena, methods->count, sizeof *run->methods);
    for (size_t i = 0; i < methods->count; i++) {
        struct pooled_method *method = pooled(pool, run->sheet->fluid, methods->names[i], run->arena);
        const enum method_role role = role_in(methods, i);
        if (role > method->role) {
            method->role = role;
        }
        if (role == ROLE_LEADS && method->reason == NULL) {
            method->reason = methods->reason;
        }
        run->methods[i] = method->run;
        run->methods[i].may_govern = method->run.may_govern && i < methods->may_govern;
    }
}

static void tell_lacks(const struct sheet_run *run)
{
    for (size_t i = 0; i < run->method_count; i++) {
        const struct method_run *method = &run->methods[i];
        if (method->fluid != NULL) {
            continue;
        }
        const char *why = lack_words(run->sheet->fluid, &method->lack, run->arena);
        sheet_add_note(run->result, run->out, "%s gives no answer: %s.", method->name, why);
        result_warn(run->result, CODE_W302, location_line(run->sheet->at), run->number, "%s gives no answer: %s",
                    method->name, why);
        if (i == 0) {
            run->result->is_undecided = true;
        }
    }
}

/* ---- sheets ---------------------------------------------------------------------------------------------------- */

/* One row for each kind, in the order of enum sheet_kind. */
static const struct {
    const char *word;
    void (*answer)(struct sheet_run *run);
} KINDS[SHEET_KINDS] = {
    [SHEET_PERMISSIBLE_CHARGE] = {"permissible-charge", answer_permissible_charge},
    [SHEET_SETTLED_PRESSURE] = {"settled-pressure", answer_settled_pressure},
    [SHEET_SATURATION] = {"saturation", answer_saturation},
    [SHEET_FUGACITY] = {"fugacity", answer_fugacity},
    [SHEET_DRAW_DOWN] = {"draw-down", answer_draw_down},
    [SHEET_PREPARATION] = {"preparation", answer_preparation},
};

/* What all sheets of a case share. */
struct common {
    struct method_pool pool;
    struct listed_ledger ledger;
    struct basis_list bases;
    const struct progress *progress;
};

static void tell_begun(const struct sheet_run *run)
{
    if (run->progress != NULL) {
        const struct progress_state state = {
            .sheet = run->number, .sheet_count = run->tree->sheet_count, .kind = run->out->kind};
        run->progress->tell(run->progress->context, &state);
    }
}

static struct sheet_run *answer_sheet(const struct case_tree *tree, size_t index, double held_mass,
                                      struct common *common, struct result *result)
{
    const struct case_sheet *sheet = &tree->sheets[index];
    struct sheet_run *run = arena_alloc(result->arena, 1, sizeof *run);
    *run = (struct sheet_run){
        .arena = result->arena,
        .tree = tree,
        .sheet = sheet,
        .result = result,
        .out = result_add_sheet(result, KINDS[sheet->kind].word, sheet->title),
        .number = index + 1,
        .ledger = &common->ledger,
        .progress = common->progress,
        .held_mass = held_mass,
    };
    tell_begun(run);
    run->out->fluid = sheet->fluid->name;
    run->out->vessel = sheet->vessel == NULL ? NULL : sheet->vessel->name;
    run->out->charge = sheet->charge == NULL ? NULL : sheet->charge->name;
    for (size_t i = 0; i < sheet->note_count; i++) {
        sheet_add_note(result, run->out, "%s", sheet->notes[i]);
    }
    if (!take_amounts(run, &common->bases)) {
        return run;
    }
    ready_methods(run, &common->pool);
    tell_lacks(run);
    for (size_t i = 0; i < run->method_count; i++) {
        warn_pairs(run, &run->methods[i]);
    }
    KINDS[sheet->kind].answer(run);
    return run;
}

const struct result_sheet *filling_solve_sheet(const struct case_tree *tree, size_t index, double held_mass,
                                               struct arena *arena)
{
    struct common common = {.progress = NULL};
    return answer_sheet(tree, index, held_mass, &common, result_create(arena))->out;
}

/* ---- around the sheets ----------------------------------------------------------------------------------------- */

static void tell_document(const struct case_tree *tree, const char *version, struct result *result)
{
    const struct deck *deck = tree->deck;
    result->version = version;
    result->number = tree->number;
    result->revision = tree->revision;
    result->title = tree->title;
    for (size_t i = 0; i < tree->note_count; i++) {
        line_list_add(result, &result->notes, "%s", tree->notes[i]);
    }
    result->deck_name = deck->root->name;
    result->deck_sha256 = deck->root->sha256;
    result->deck_text = deck->root->text;
    for (size_t i = 0; i < deck->file_count; i++) {
        const struct source_file *file = deck->files[i];
        if (file != deck->root && file->is_used) {
            *ARENA_APPEND(result->arena, &result->library) = (struct library_row){file->name, file->sha256};
        }
    }
}

static const char *const CAUTIONS[] = {
    "These are engineering estimates. The statutory table, or the approval for this gas and this vessel, overrides "
    "them.",
    "Local regulations, the marks on the vessel and a competent, licensed person decide whether and how far it is "
    "filled.",
    "Gas, liquid and wall are taken to share one temperature. Filling warms the gas: a pressure read before the "
    "vessel has settled is not a settled pressure.",
    "Cooling by fast withdrawal, and what it condenses or freezes, is covered where a draw-down sheet has a rate and "
    "nowhere else; reaction and decomposition are not.",
    "The vessel is taken as rigid and as large as its stated water capacity; whether it is sound and fit for the "
    "gas is not examined here.",
};

static void tell_cautions(struct result *result)
{
    for (size_t i = 0; i < sizeof CAUTIONS / sizeof *CAUTIONS; i++) {
        line_list_add(result, &result->cautions, "%s", CAUTIONS[i]);
    }
}

struct result *filling_solve(const struct case_tree *tree, const char *version, struct arena *arena)
{
    return filling_solve_telling(tree, version, NULL, arena);
}

struct result *filling_solve_telling(const struct case_tree *tree, const char *version, const struct progress *progress,
                                     struct arena *arena)
{
    struct result *result = result_create(arena);
    struct common common = {.progress = progress};
    tell_document(tree, version, result);
    tell_inputs(tree, result);
    for (size_t i = 0; i < tree->sheet_count; i++) {
        tell_uncertainty(answer_sheet(tree, i, 0.0, &common, result));
    }
    tell_listed_ledger(&common.ledger, result);
    tell_data(tree, &common.pool, result);
    tell_methods(&common.pool, result);
    tell_cautions(result);
    return result;
}
