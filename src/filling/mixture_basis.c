#include "filling/mixture_basis.h"

#include "base/text.h"
#include "fluid/phase.h"

/* Fractions are told to this many digits: more than any that were weighed, so that both can be followed by hand. */
enum { FRACTION_DIGITS = 7, VOLUME_DIGITS = 7 };

/* ---- volumes ----------------------------------------------------------------------------------------------------- */

/* The molar volume on the gas's branch, also where the liquid is the stable phase, as far as that branch reaches. */
static enum answer gas_volume(struct method_run *alone, double temperature, double pressure, double *molar_volume,
                              bool *is_liquid)
{
    enum answer answer = free_volume_at(alone, temperature, pressure, molar_volume, is_liquid);
    if (answer != ANSWER_OK || !*is_liquid) {
        return answer;
    }
    struct phase gas = {0};
    answer = phase_tp(alone->at_t, pressure, alone->z, BRANCH_VAPOUR, 0, &gas);
    *molar_volume = gas.volume;
    return answer;
}

static enum answer volume_alone(const struct case_fluid *fluid, size_t i, const char *method, struct arena *arena,
                                double *molar_volume, bool *is_liquid)
{
    const double one = 1.0;
    const struct case_fluid alone = {
        .name = fluid->components[i]->name,
        .count = 1,
        .components = &fluid->components[i],
        .fractions = &one,
        .molar_mass = fluid->components[i]->molar_mass.value,
        .spec = {.count = 1, .pure = &fluid->spec.pure[i]},
    };
    struct method_run run = method_run_create(&alone, method, false, arena);
    return run.fluid == NULL ? ANSWER_CANNOT
                             : gas_volume(&run, fluid->temperature, fluid->pressure, molar_volume, is_liquid);
}

/* False where a component has none. */
static bool find_volumes(struct mixture_basis *basis, struct arena *arena)
{
    const struct case_fluid *fluid = basis->written;
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->fractions[i] > 0.0 &&
            volume_alone(fluid, i, basis->method, arena, &basis->molar_volumes[i], &basis->is_liquid[i]) != ANSWER_OK) {
            basis->without = i;
            return false;
        }
    }
    return true;
}

/* ---- amounts ----------------------------------------------------------------------------------------------------- */

static const struct case_fluid *by_amount(const struct mixture_basis *basis, struct arena *arena)
{
    const struct case_fluid *written = basis->written;
    struct case_fluid *made = arena_alloc(arena, 1, sizeof *made);
    double *fractions = arena_alloc(arena, written->count, sizeof *fractions);
    double sum = 0.0;
    for (size_t i = 0; i < written->count; i++) {
        fractions[i] = written->fractions[i] > 0.0 ? written->fractions[i] / basis->molar_volumes[i] : 0.0;
        sum += fractions[i];
    }
    *made = *written;
    made->has_state = false;
    made->fractions = fractions;
    made->molar_mass = 0.0;
    for (size_t i = 0; i < written->count; i++) {
        fractions[i] /= sum;
        made->molar_mass += fractions[i] * written->components[i]->molar_mass.value;
    }
    return made;
}

const struct mixture_basis *mixture_basis_create(const struct case_fluid *written, const char *method,
                                                 struct arena *arena)
{
    struct mixture_basis *basis = arena_alloc(arena, 1, sizeof *basis);
    *basis = (struct mixture_basis){
        .written = written,
        .method = method,
        .molar_volumes = arena_alloc(arena, written->count, sizeof(double)),
        .is_liquid = arena_alloc(arena, written->count, sizeof(bool)),
    };
    if (find_volumes(basis, arena)) {
        basis->fluid = by_amount(basis, arena);
    }
    return basis;
}

/* ---- what a reader sees ------------------------------------------------------------------------------------------ */

static const char *state_words(const struct sheet_run *run, const struct mixture_basis *basis)
{
    return arena_format(run->arena, "%s and %s", shown_text(run, look_temperature(run), basis->written->temperature),
                        shown_text(run, look_pressure(run), basis->written->pressure));
}

static void tell_no_amounts(const struct sheet_run *run, const struct mixture_basis *basis)
{
    const char *why =
        arena_format(run->arena, "its fractions are of volumes at %s, and %s knows no gas of %s there",
                     state_words(run, basis), basis->method, basis->written->components[basis->without]->name);
    sheet_add_note(run->result, run->out, "No answer for %s: %s.", basis->written->name, why);
    result_warn(run->result, CODE_W309, location_line(run->sheet->at), run->number, "%s: %s", basis->written->name,
                why);
    run->result->is_undecided = true;
}

static void warn_of_liquids(const struct sheet_run *run, const struct mixture_basis *basis)
{
    struct text names = {.arena = run->arena};
    for (size_t i = 0; i < basis->written->count; i++) {
        if (basis->is_liquid[i]) {
            text_format(&names, "%s%s", names.length == 0 ? "" : ", ", basis->written->components[i]->name);
        }
    }
    if (names.length > 0) {
        result_warn(run->result, CODE_W308, location_line(run->sheet->at), run->number,
                    "%s: its fractions are of volumes at %s, where what is a liquid by itself is taken with the volume "
                    "of its supersaturated gas: %s",
                    basis->written->name, state_words(run, basis), names.bytes);
    }
}

static void tell_amounts(const struct sheet_run *run, const struct mixture_basis *basis)
{
    const char *title = arena_format(run->arena, "fractions of volume at %s, and of amount", state_words(run, basis));
    struct table *table = sheet_add_table(run->result, run->out, title, basis->method);
    const struct look volume = {"m3/mol", {"L/mol", 1e-3, 0.0}, -VOLUME_DIGITS};
    const struct look percent = look_significant(look_percent(0), FRACTION_DIGITS);
    table_add_word_column(run->result, table, "component");
    table_add_column(run->result, table, "volume-fraction", percent);
    table_add_column(run->result, table, "molar-volume", volume);
    table_add_column(run->result, table, "mole-fraction", percent);
    for (size_t i = 0; i < basis->written->count; i++) {
        struct cell *row = table_add_row(run->result, table);
        cell_set_text(&row[0], basis->written->components[i]->name);
        cell_set(&row[1], basis->written->fractions[i]);
        if (basis->molar_volumes[i] > 0.0) {
            cell_set(&row[2], basis->molar_volumes[i]);
        }
        cell_set(&row[3], basis->fluid->fractions[i]);
    }
}

void tell_mixture_basis(const struct sheet_run *run, const struct mixture_basis *basis)
{
    if (basis->fluid == NULL) {
        tell_no_amounts(run, basis);
        return;
    }
    tell_amounts(run, basis);
    warn_of_liquids(run, basis);
}
