/* Mixtures: components with their fractions, by mole, by mass or by volume, one of them perhaps the rest. */
#include "case/case_internal.h"

#include <math.h>

/* Fractions that are meant to be a whole may miss it by the rounding of their sum, and no more. */
#define WHOLE_WITHIN 1e-9

enum { SHARES_MOST = 100 };

static const struct quantity_form FORM_SHARE = {.measure = MEASURE_NUMBER,
                                                .reading = READ_NUMBER,
                                                .least = 0.0,
                                                .most = 1.0,
                                                .because = "a part of the whole, as 2 % or 0.02"};

struct share_list {
    struct case_share *items;
    size_t count, capacity;
};

struct mixture_target {
    const struct named *named;
    struct case_fluid fluid;
    struct component_list components;
    struct share_list shares;
    struct location places[SHARES_MOST]; /* of the components' names */
    bool has_rest;
    size_t rest; /* index of the component that is the rest */
};

/* ---- The head ---- */

static bool report_no_basis(struct elaboration *e, const struct named *named)
{
    struct diagnostic *said =
        diagnose(e->out, CODE_E226, named->at, "mixture '%s' does not say what its fractions are parts of",
                 shortened(e, named->name));
    diagnostic_hint(e->out, said, "write 'mixture %s by mole', 'by mass' or 'by volume'", shortened(e, named->name));
    return false;
}

/* `at (T, p)`, the state whose volumes are meant. */
static bool take_volume_state(struct reading *reading, struct case_fluid *fluid)
{
    const struct item *at = reading->item;
    if (at == NULL || at->kind != ITEM_AT) {
        return true;
    }
    if (fluid->basis != BASIS_VOLUME) {
        struct diagnostic *said =
            diagnose(reading->e->out, CODE_E204, at->at, "only fractions of volume depend on a state");
        diagnostic_hint(reading->e->out, said, "remove it, or write 'by volume'");
        return false;
    }
    fluid->has_state = take_state(reading, "volumes stated", &fluid->temperature, &fluid->pressure);
    return fluid->has_state;
}

static bool read_head(struct elaboration *e, const struct statement *statement, struct mixture_target *target)
{
    struct reading reading = read_items(e, statement);
    take_name(&reading);
    const struct item *by = take_item(&reading, ITEM_BY);
    if (by == NULL) {
        return reading.item == NULL ? report_no_basis(e, target->named) : finish_items(&reading);
    }
    if (by->value->kind != EXPRESSION_NAME) {
        return report_no_basis(e, target->named);
    }
    const struct vocabulary_row *basis = choice_of_name(e, BLOCK_BASIS, by->value);
    if (basis == NULL) {
        return false;
    }
    target->fluid.basis = basis->id == WORD_BASIS_MASS     ? BASIS_MASS
                          : basis->id == WORD_BASIS_VOLUME ? BASIS_VOLUME
                                                           : BASIS_MOLE;
    return take_volume_state(&reading, &target->fluid) && finish_items(&reading);
}

/* ---- The lines ---- */

static bool report_repetition(struct elaboration *e, struct location at, const char *what, struct location first)
{
    struct diagnostic *said = diagnose(e->out, CODE_E207, at, "%s is given twice in one mixture", what);
    said->note = "first given here";
    said->note_at = first;
    return false;
}

/* A mixture of mixtures would hide what is in it. */
static const struct case_component *component_of_line(struct elaboration *e, const struct statement *line)
{
    const struct named *mixture = names_find(&e->tables[NAMES_MIXTURE], line->word);
    if (mixture != NULL && names_find(&e->tables[NAMES_COMPONENT], line->word) == NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E205, line->word_at, "'%s' is a mixture, and mixtures are made of components",
                     shortened(e, line->word));
        diagnostic_hint(e->out, said, "give its components their own lines");
        said->note = "defined here";
        said->note_at = mixture->at;
        return NULL;
    }
    const struct expression name = {.kind = EXPRESSION_NAME, .at = line->word_at, .name = line->word};
    return component_of_name(e, &name);
}

static bool is_new(struct elaboration *e, const struct mixture_target *target, const struct case_component *component,
                   const struct statement *line)
{
    for (size_t i = 0; i < target->components.count; i++) {
        if (target->components.items[i] == component) {
            return report_repetition(e, line->word_at, arena_format(e->arena, "'%s'", component->name),
                                     target->places[i]);
        }
    }
    if (target->components.count < SHARES_MOST) {
        return true;
    }
    diagnose(e->out, CODE_E204, line->word_at, "a mixture has at most %d components", SHARES_MOST);
    return false;
}

static bool take_rest(struct reading *reading, struct mixture_target *target, struct case_share *share)
{
    struct elaboration *e = reading->e;
    const struct item *rest = take_item(reading, ITEM_REST);
    if (target->has_rest) {
        return report_repetition(e, rest->at, "the rest", target->shares.items[target->rest].given.origin.at);
    }
    target->has_rest = true;
    target->rest = target->shares.count;
    share->is_rest = true;
    share->given = (struct quantity){.given = true, .origin = origin_of(e, rest->at)};
    return finish_items(reading);
}

static bool take_share(struct reading *reading, const char *name, struct case_share *share)
{
    const struct item *item = reading->item;
    if (item != NULL && item->kind == ITEM_EXPRESSION) {
        return take_quantity(reading, &FORM_SHARE, name, &share->given) && finish_items(reading);
    }
    struct elaboration *e = reading->e;
    struct diagnostic *said = diagnose(e->out, CODE_E203, item == NULL ? reading->of->word_at : item->at,
                                       "the fraction of %s is missing", name);
    diagnostic_hint(e->out, said, "as in: %s 2 %% or: %s rest", name, name);
    return false;
}

static void read_line(struct elaboration *e, const struct statement *line, struct mixture_target *target)
{
    const struct case_component *component = component_of_line(e, line);
    if (component == NULL || !is_new(e, target, component, line) || !forbid_block(e, line)) {
        return;
    }
    struct reading reading = read_items(e, line);
    struct case_share share = {.is_rest = false};
    const bool is_rest = reading.item != NULL && reading.item->kind == ITEM_REST;
    if (is_rest ? take_rest(&reading, target, &share) : take_share(&reading, component->name, &share)) {
        struct component_list *components = &target->components;
        struct share_list *shares = &target->shares;
        target->places[components->count] = line->word_at;
        *ARENA_APPEND(e->arena, components) = component;
        *ARENA_APPEND(e->arena, shares) = share;
    }
}

/* ---- The whole ---- */

static double sum_of(const struct share_list *shares)
{
    double sum = 0.0;
    for (size_t i = 0; i < shares->count; i++) {
        sum += shares->items[i].given.value;
    }
    return sum;
}

static void report_sum(struct elaboration *e, const struct mixture_target *target, double sum)
{
    const char *percent = si_number(e->arena, 100.0 * sum);
    struct diagnostic *said = target->has_rest ? diagnose(e->out, CODE_E227, target->named->at,
                                                          "the fractions of '%s' add up to %s %%, which leaves no rest",
                                                          shortened(e, target->named->name), percent)
                                               : diagnose(e->out, CODE_E227, target->named->at,
                                                          "the fractions of '%s' add up to %s %%, not to 100 %%",
                                                          shortened(e, target->named->name), percent);
    diagnostic_hint(e->out, said,
                    target->has_rest ? "correct one of them"
                                     : "correct one of them, or let one component be the 'rest'");
}

/* The rest, or the rounding of a sum that is 1 within it. False after a message. */
static bool complete_shares(struct elaboration *e, struct mixture_target *target)
{
    const double sum = sum_of(&target->shares);
    const bool may_miss = e->shift_count > 0 && sum > 0.0; /* mole_fractions brings them to a whole */
    if (target->has_rest ? !(sum <= 1.0 + WHOLE_WITHIN) : !(fabs(sum - 1.0) <= WHOLE_WITHIN || may_miss)) {
        report_sum(e, target, sum);
        return false;
    }
    if (target->has_rest) {
        struct quantity *rest = &target->shares.items[target->rest].given;
        rest->value = fmax(1.0 - sum, 0.0);
        add_input(e, target->components.items[target->rest]->name, si_number(e->arena, rest->value), &rest->origin);
    }
    return true;
}

/* Mole fractions from parts by mass: x_i = (w_i / M_i) / sum (w_k / M_k). Parts by volume are mole fractions, as ideal
 * gases have them; where a state is given that is what they are until real volumes correct them. */
static double *mole_fractions(struct elaboration *e, const struct mixture_target *target)
{
    const size_t count = target->shares.count;
    double *fractions = arena_alloc(e->arena, count, sizeof *fractions);
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        const double molar_mass = target->components.items[i]->molar_mass.value;
        fractions[i] = target->shares.items[i].given.value / (target->fluid.basis == BASIS_MASS ? molar_mass : 1.0);
        sum += fractions[i];
    }
    for (size_t i = 0; i < count; i++) {
        fractions[i] /= sum;
    }
    return fractions;
}

static void finish_mixture(struct elaboration *e, struct mixture_target *target)
{
    struct case_fluid *fluid = &target->fluid;
    if (target->shares.count == 0) {
        struct diagnostic *said = diagnose(e->out, CODE_E214, target->named->at, "mixture '%s' has no components",
                                           shortened(e, target->named->name));
        diagnostic_hint(e->out, said, "as in: n-butane 2 %%; nitrogen rest");
        return;
    }
    if (!complete_shares(e, target)) {
        return;
    }
    fluid->count = target->shares.count;
    fluid->components = target->components.items;
    fluid->shares = target->shares.items;
    fluid->fractions = mole_fractions(e, target);
    finish_fluid(e, fluid);
}

static void check_name(struct elaboration *e, const struct named *named)
{
    const struct named *component = names_find(&e->tables[NAMES_COMPONENT], named->name);
    if (component != NULL) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E206, named->at, "'%s' is the name of a component too", shortened(e, named->name));
        said->note = "the component";
        said->note_at = component->at;
    }
}

static void read_mixture(struct elaboration *e, const struct statement *block, struct mixture_target *target)
{
    const size_t before = trouble_so_far(e);
    const char *outer = e->group;
    e->group = arena_format(e->arena, "mixture %s", target->named->name);
    check_name(e, target->named);
    if (read_head(e, block, target)) {
        require_block(e, block);
    }
    for (const struct statement *line = block->block; line != NULL; line = line->next) {
        read_line(e, line, target);
    }
    if (trouble_so_far(e) == before) {
        finish_mixture(e, target);
    }
    e->group = outer;
}

const struct case_fluid *build_mixture(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const size_t before = trouble_so_far(e);
    const struct statement *block = named->items[0];
    struct mixture_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->named = named;
    target->fluid = (struct case_fluid){.name = named->name, .at = named->at};
    read_mixture(e, block, target);
    mark_file_used(e, block->at);
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? &target->fluid : NULL;
    return named->built;
}
