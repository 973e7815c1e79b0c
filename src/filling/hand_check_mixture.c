/* The hand check of a mixture's phase by a cubic equation: the components' own constants as the method sets them out
 * for each by itself, the one-fluid mixing rules, and then the equation with the mixture's constants.
 *
 *   a = sum x_i x_j (1 - k_ij) sqrt(a_i a_j),  b = sum x_i b_i,  c = sum x_i c_i
 *   ln phi_i = b_i / b (Z - 1) - ln(Z - B) - K (2 S_i / a - b_i / b) - c_i p / (R T),  S_i = sum x_j (1 - k_ij)
 * sqrt(a_i a_j) (Peng and Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59, equations 20 to 23, in the form all cubics
 * share.) */
#include "filling/hand_check.h"
#include "filling/mixture_contents.h"

#include "base/text.h"

#include <math.h>
#include <string.h>

/* Sums over so many components are written out, over more they are only told. */
enum { WRITTEN_OUT = 3 };

struct constants {
    double a, b, c; /* of one component at the temperature set */
};

struct mixture_check {
    const struct sheet_run *run;
    struct hand_check *check;
    struct method_run *method;
    const struct mixture_state *state;
    size_t count;
    struct constants *component;    /* [count] */
    const struct explanation *form; /* of the first component: the equation's formulas and constants */
    bool is_translated;
};

/* ---- reading explanations ---------------------------------------------------------------------------------------- */

static const struct explained_value *value_named(const struct explanation *numbers, const char *symbol)
{
    for (size_t i = 0; i < numbers->count; i++) {
        if (strcmp(numbers->values[i].symbol, symbol) == 0) {
            return &numbers->values[i];
        }
    }
    return NULL;
}

static double number_of(const struct explanation *numbers, const char *symbol)
{
    const struct explained_value *value = value_named(numbers, symbol);
    return value == NULL ? 0.0 : value->value;
}

/* Component i by itself at the temperature and molar volume of the state: only its constants are of interest. */
static bool explain_alone(const struct mixture_check *it, size_t i, struct explanation *numbers)
{
    const double one = 1.0;
    struct method_run *alone = mixture_alone(it->method, i);
    numbers->count = 0;
    if (alone->fluid == NULL || (alone->fluid->ops->capabilities & IS_CUBIC) == 0 ||
        fluid_set_t(alone->at_t, alone->fluid, it->state->temperature) != ANSWER_OK) {
        return false;
    }
    /* In this much room no state of the component is too dense to be told. */
    const double volume = it->state->molar_volume + 10.0 * smallest_molar_volume(alone);
    return fluid_explain(alone->at_t, volume, &one, false, numbers) == ANSWER_OK && value_named(numbers, "a") != NULL &&
           value_named(numbers, "b") != NULL;
}

/* ---- the components ---------------------------------------------------------------------------------------------- */

static const char *indexed(const struct mixture_check *it, const char *symbol, size_t i)
{
    return arena_format(it->run->arena, "%s_%zu", symbol, i + 1);
}

static const char *indexed_pair(const struct mixture_check *it, const char *symbol, size_t i, size_t j)
{
    return arena_format(it->run->arena, it->count > 9 ? "%s_%zu_%zu" : "%s_%zu%zu", symbol, (i < j ? i : j) + 1,
                        (i < j ? j : i) + 1);
}

/* Only what leads to a, b and c; volumes and pressures of the component by itself are of no interest. */
static void keep_constants(struct explanation *numbers)
{
    size_t kept = 0;
    for (size_t i = 0; i < numbers->count; i++) {
        const char *symbol = numbers->values[i].symbol;
        if (strcmp(symbol, "v") != 0 && strcmp(symbol, "v_0") != 0 && symbol[0] != 'd' &&
            !(symbol[0] == 'p' && strcmp(symbol, "p_c") != 0)) {
            numbers->values[kept++] = numbers->values[i];
        }
    }
    numbers->count = kept;
}

static bool set_out_components(struct mixture_check *it, struct explanation *form, bool is_shown)
{
    struct explanation first = {.count = 0}, one;
    for (size_t i = 0; i < it->count; i++) {
        if (!explain_alone(it, i, &one)) {
            hand_check_line(it->run->result, it->check, "  %s does not set out its numbers for this state",
                            it->method->name);
            return false;
        }
        it->component[i] = (struct constants){number_of(&one, "a"), number_of(&one, "b"), number_of(&one, "c")};
        it->is_translated = it->is_translated || fabs(it->component[i].c) > 0.0;
        /* The form is that of a translated equation where any component is. */
        if (i == 0 || value_named(form, "c") == NULL) {
            *form = one;
        }
        if (is_shown) {
            keep_constants(&one);
            hand_check_line(it->run->result, it->check, "%zu: %s", i + 1, it->run->sheet->fluid->components[i]->name);
            hand_check_further_numbers(it->run, it->check, &one, i == 0 ? NULL : &first);
            first = i == 0 ? one : first;
        }
    }
    it->form = form;
    return true;
}

/* ---- mixing ------------------------------------------------------------------------------------------------------ */

static struct pair_parameter pair_of(const struct mixture_check *it, size_t i, size_t j)
{
    struct pair_parameter pair = {.kij = 0.0};
    if (i == j || fluid_pair(it->method->at_t, i, j, &pair) != ANSWER_OK) {
        pair.kij = pair.lij = 0.0;
    }
    return pair;
}

static bool has_lij(const struct mixture_check *it)
{
    for (size_t i = 0; i < it->count; i++) {
        for (size_t j = i + 1; j < it->count; j++) {
            if (fabs(pair_of(it, i, j).lij) > 0.0) {
                return true;
            }
        }
    }
    return false;
}

/* S_i, the attraction of component i to the whole. */
static double attraction_to(const struct mixture_check *it, size_t i)
{
    double sum = 0.0;
    for (size_t j = 0; j < it->count; j++) {
        sum += it->state->x[j] * (1.0 - pair_of(it, i, j).kij) * sqrt(it->component[i].a * it->component[j].a);
    }
    return sum;
}

static double mixed_a(const struct mixture_check *it)
{
    double sum = 0.0;
    for (size_t i = 0; i < it->count; i++) {
        sum += it->state->x[i] * attraction_to(it, i);
    }
    return sum;
}

static double mixed_b(const struct mixture_check *it)
{
    double sum = 0.0;
    for (size_t i = 0; i < it->count; i++) {
        for (size_t j = 0; j < it->count; j++) {
            sum += it->state->x[i] * it->state->x[j] * (1.0 - pair_of(it, i, j).lij) *
                   (it->component[i].b + it->component[j].b) / 2.0;
        }
    }
    return sum;
}

static double mixed_c(const struct mixture_check *it)
{
    double sum = 0.0;
    for (size_t i = 0; i < it->count; i++) {
        sum += it->state->x[i] * it->component[i].c;
    }
    return sum;
}

static const char *a_formula(const struct mixture_check *it)
{
    struct text text = {.arena = it->run->arena};
    for (size_t i = 0; i < it->count; i++) {
        text_format(&text, "%s%s ^ 2 * %s", i == 0 ? "" : " + ", indexed(it, "x", i), indexed(it, "a", i));
        for (size_t j = i + 1; j < it->count; j++) {
            text_format(&text, " + 2 * %s * %s * (1 - %s) * sqrt(%s * %s)", indexed(it, "x", i), indexed(it, "x", j),
                        indexed_pair(it, "k", i, j), indexed(it, "a", i), indexed(it, "a", j));
        }
    }
    return text.bytes;
}

static const char *linear_formula(const struct mixture_check *it, const char *symbol)
{
    struct text text = {.arena = it->run->arena};
    for (size_t i = 0; i < it->count; i++) {
        text_format(&text, "%s%s * %s", i == 0 ? "" : " + ", indexed(it, "x", i), indexed(it, symbol, i));
    }
    return text.bytes;
}

static const char *s_formula(const struct mixture_check *it, size_t i)
{
    struct text text = {.arena = it->run->arena};
    for (size_t j = 0; j < it->count; j++) {
        if (i == j) {
            text_format(&text, "%s%s * %s", j == 0 ? "" : " + ", indexed(it, "x", j), indexed(it, "a", j));
        } else {
            text_format(&text, "%s%s * (1 - %s) * sqrt(%s * %s)", j == 0 ? "" : " + ", indexed(it, "x", j),
                        indexed_pair(it, "k", i, j), indexed(it, "a", i), indexed(it, "a", j));
        }
    }
    return text.bytes;
}

static void put_sum(struct explanation *numbers, const char *symbol, const char *meaning, const char *unit,
                    size_t terms, double value)
{
    explanation_add(numbers, (struct explained_value){symbol, meaning, NULL, unit, terms, value, false});
}

/* ---- the phase --------------------------------------------------------------------------------------------------- */

static void put_components(const struct mixture_check *it, struct explanation *numbers)
{
    for (size_t i = 0; i < it->count; i++) {
        const struct constants *own = &it->component[i];
        hand_check_put(numbers, indexed(it, "x", i), "mole fraction", NULL, "1", it->state->x[i]);
        hand_check_put(numbers, indexed(it, "a", i), "attraction", NULL, "J m3/mol2", own->a);
        hand_check_put(numbers, indexed(it, "b", i), "covolume", NULL, "m3/mol", own->b);
        if (it->is_translated) {
            hand_check_put(numbers, indexed(it, "c", i), "translation", NULL, "m3/mol", own->c);
        }
    }
    for (size_t i = 0; i < it->count; i++) {
        for (size_t j = i + 1; j < it->count; j++) {
            hand_check_put(numbers, indexed_pair(it, "k", i, j), "interaction", NULL, "1", pair_of(it, i, j).kij);
        }
    }
}

static void put_mixing(const struct mixture_check *it, struct explanation *numbers)
{
    const bool is_written = it->count <= WRITTEN_OUT;
    const size_t square = it->count * it->count;
    if (is_written) {
        put_components(it, numbers);
        hand_check_put(numbers, "a", "attraction", a_formula(it), "J m3/mol2", mixed_a(it));
    } else {
        put_sum(numbers, "a", "terms x_i x_j (1 - k_ij) sqrt(a_i a_j)", "J m3/mol2", square, mixed_a(it));
    }
    if (has_lij(it)) {
        put_sum(numbers, "b", "terms x_i x_j (1 - l_ij) (b_i + b_j) / 2", "m3/mol", square, mixed_b(it));
    } else if (is_written) {
        hand_check_put(numbers, "b", "covolume", linear_formula(it, "b"), "m3/mol", mixed_b(it));
    } else {
        put_sum(numbers, "b", "terms x_i b_i", "m3/mol", it->count, mixed_b(it));
    }
    if (it->is_translated && is_written) {
        hand_check_put(numbers, "c", "translation", linear_formula(it, "c"), "m3/mol", mixed_c(it));
    } else if (it->is_translated) {
        put_sum(numbers, "c", "terms x_i c_i", "m3/mol", it->count, mixed_c(it));
    }
}

struct pressure_parts {
    double RT, b, v, repulsion, attraction, pressure; /* v is the equation's own volume */
};

static struct pressure_parts pressure_parts_of(const struct mixture_check *it)
{
    const double d1 = number_of(it->form, "d_1"), d2 = number_of(it->form, "d_2"), b = mixed_b(it);
    struct pressure_parts parts = {.RT = it->method->fluid->gas_constant * it->state->temperature,
                                   .b = b,
                                   .v = it->state->molar_volume + mixed_c(it)};
    parts.repulsion = parts.RT / (parts.v - b);
    parts.attraction = mixed_a(it) / ((parts.v + d1 * b) * (parts.v + d2 * b));
    parts.pressure = parts.repulsion - parts.attraction;
    return parts;
}

static void put_equation(const struct mixture_check *it, struct explanation *numbers)
{
    const struct pressure_parts parts = pressure_parts_of(it);
    hand_check_put(numbers, "R", "gas constant", NULL, "J/mol/K", it->method->fluid->gas_constant);
    hand_check_put(numbers, "T", "temperature", NULL, "K", it->state->temperature);
    hand_check_put(numbers, "v", "molar volume", NULL, "m3/mol", it->state->molar_volume);
    hand_check_put(numbers, "d_1", "first constant of the denominator", NULL, "1", number_of(it->form, "d_1"));
    hand_check_put(numbers, "d_2", "second constant of the denominator", NULL, "1", number_of(it->form, "d_2"));
    if (it->is_translated) {
        hand_check_put(numbers, "v_0", "volume before translation", "v + c", "m3/mol", parts.v);
    }
    hand_check_put(numbers, "p_rep", "repulsive part", value_named(it->form, "p_rep")->formula, "Pa", parts.repulsion);
    hand_check_put(numbers, "p_att", "attractive part", value_named(it->form, "p_att")->formula, "Pa",
                   parts.attraction);
    hand_check_put(numbers, "p", "pressure", "p_rep - p_att", "Pa", parts.pressure);
}

/* ---- fugacities -------------------------------------------------------------------------------------------------- */

/* The numbers of the pressure again, as givens: they are shown already. */
static void put_known(const struct explanation *before, struct explanation *numbers)
{
    for (size_t i = 0; i < before->count; i++) {
        const char *symbol = before->values[i].symbol;
        if (strcmp(symbol, "p_rep") != 0 && strcmp(symbol, "p_att") != 0) {
            hand_check_put(numbers, symbol, "", NULL, before->values[i].unit, before->values[i].value);
        }
    }
}

static void put_reduced(const struct mixture_check *it, struct explanation *numbers)
{
    const struct pressure_parts parts = pressure_parts_of(it);
    const double p = parts.pressure, RT = parts.RT, d1 = number_of(it->form, "d_1"), d2 = number_of(it->form, "d_2");
    const double Z = p * parts.v / RT, A = mixed_a(it) * p / (RT * RT), B = parts.b * p / RT;
    hand_check_put(numbers, "Z", "compressibility factor", it->is_translated ? "p * v_0 / (R * T)" : "p * v / (R * T)",
                   "1", Z);
    hand_check_put(numbers, "A", "reduced attraction", "a * p / (R * T) ^ 2", "1", A);
    hand_check_put(numbers, "B", "reduced covolume", "b * p / (R * T)", "1", B);
    if (d1 > d2) {
        hand_check_put(numbers, "K", "attractive part", "A / ((d_1 - d_2) * B) * ln((Z + d_1 * B) / (Z + d_2 * B))",
                       "1", A / ((d1 - d2) * B) * log((Z + d1 * B) / (Z + d2 * B)));
    } else {
        hand_check_put(numbers, "K", "attractive part", "A / Z", "1", A / Z);
    }
}

static const char *ln_phi_formula(const struct mixture_check *it, size_t i)
{
    const char *own = indexed(it, "b", i);
    const char *formula = arena_format(it->run->arena, "%s / b * (Z - 1) - ln(Z - B) - K * (2 * %s / a - %s / b)", own,
                                       indexed(it, "S", i), own);
    return it->is_translated ? arena_format(it->run->arena, "%s - %s * p / (R * T)", formula, indexed(it, "c", i))
                             : formula;
}

static void put_component_fugacity(const struct mixture_check *it, size_t i, struct explanation *numbers)
{
    const double Z = number_of(numbers, "Z"), B = number_of(numbers, "B"), K = number_of(numbers, "K");
    const double a = mixed_a(it), b = mixed_b(it), p = number_of(numbers, "p"), S = attraction_to(it, i);
    const double share = it->component[i].b / b;
    const double RT = it->method->fluid->gas_constant * it->state->temperature;
    const double ln_phi = share * (Z - 1.0) - log(Z - B) - K * (2.0 * S / a - share) - it->component[i].c * p / RT;
    hand_check_put(numbers, indexed(it, "S", i), "attraction to the whole", s_formula(it, i), "J m3/mol2", S);
    hand_check_put(numbers, indexed(it, "ln_phi", i), "ln fugacity coefficient", ln_phi_formula(it, i), "1", ln_phi);
    hand_check_put(numbers, indexed(it, "f", i), "fugacity",
                   arena_format(it->run->arena, "%s * p * exp(%s)", indexed(it, "x", i), indexed(it, "ln_phi", i)),
                   "Pa", it->state->x[i] * p * exp(ln_phi));
}

static void add_fugacities(const struct mixture_check *it, const struct explanation *before)
{
    struct explanation shown = *before, numbers = {.count = 0};
    put_known(before, &numbers);
    put_reduced(it, &numbers);
    hand_check_further_numbers(it->run, it->check, &numbers, &shown);
    for (size_t i = 0; i < it->count; i++) {
        struct explanation own = {.count = 0};
        put_known(&numbers, &own);
        put_component_fugacity(it, i, &own);
        hand_check_further_numbers(it->run, it->check, &own, &numbers);
    }
}

/* ---- the checks -------------------------------------------------------------------------------------------------- */

static bool begin(struct mixture_check *it, struct explanation *form, bool shows_components)
{
    it->count = it->method->fluid->count;
    it->component = arena_alloc(it->run->arena, it->count, sizeof *it->component);
    return set_out_components(it, form, shows_components) &&
           fluid_set_t(it->method->at_t, it->method->fluid, it->state->temperature) == ANSWER_OK;
}

void hand_check_mixture_components(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                                   const struct mixture_state *state)
{
    struct mixture_check it = {.run = run, .check = check, .method = method, .state = state};
    struct explanation form;
    if (method->fluid->ops->explain_whole != NULL) {
        return; /* it needs nothing of its components beyond what the data section shows */
    }
    hand_check_line(run->result, check, "the components by themselves, by %s:", method->name);
    begin(&it, &form, true);
}

/* A method that sets out mixtures itself. */
static void add_own_explanation(const struct mixture_check *it, bool with_fugacity)
{
    struct explanation numbers = {.count = 0};
    enum answer answer = fluid_set_t(it->method->at_t, it->method->fluid, it->state->temperature);
    if (answer == ANSWER_OK) {
        answer = fluid_explain(it->method->at_t, it->state->molar_volume, it->state->x, with_fugacity, &numbers);
    }
    if (answer != ANSWER_OK) {
        hand_check_line(it->run->result, it->check, "  %s does not set out its numbers for this state",
                        it->method->name);
        return;
    }
    hand_check_numbers(it->run, it->check, &numbers);
    hand_check_pressure_shown(it->run, it->check, number_of(&numbers, "p"));
}

void hand_check_mixture_phase(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                              const struct mixture_state *state, const char *phase, bool with_fugacity)
{
    struct mixture_check it = {.run = run, .check = check, .method = method, .state = state};
    struct explanation form, numbers = {.count = 0};
    hand_check_line(run->result, check, "%s by %s:", phase, method->name);
    if (method->fluid->ops->explain_whole != NULL) {
        add_own_explanation(&it, with_fugacity);
        return;
    }
    if (!begin(&it, &form, false)) {
        return;
    }
    put_mixing(&it, &numbers);
    put_equation(&it, &numbers);
    hand_check_numbers(run, check, &numbers);
    const double pressure = number_of(&numbers, "p");
    if (with_fugacity && pressure > 0.0 && it.count <= WRITTEN_OUT && !has_lij(&it)) {
        add_fugacities(&it, &numbers);
    }
    hand_check_pressure_shown(run, check, pressure);
}

/* ---- checks of several phases ------------------------------------------------------------------------------------ */

static const char *phase_words(const struct contents *contents, size_t k)
{
    if (contents->phase_count == 1) {
        return "contents";
    }
    return contents->phases[k].is_liquid ? "liquid" : "vapour";
}

/* sum n_k v_k = V: the phases fill the vessel. */
static void add_volumes(const struct sheet_run *run, struct hand_check *check, const struct contents *contents)
{
    struct explanation numbers = {.count = 0};
    struct text sum = {.arena = run->arena};
    double volume = 0.0;
    hand_check_line(run->result, check, "balance of volumes, lightest phase first:");
    for (size_t k = 0; k < contents->phase_count; k++) {
        const struct contents_phase *phase = &contents->phases[k];
        const char *n = arena_format(run->arena, "n_%c", 'A' + (int)k);
        const char *v = arena_format(run->arena, "v_%c", 'A' + (int)k);
        hand_check_put(&numbers, n, "amount", NULL, "mol", phase->amount);
        hand_check_put(&numbers, v, "molar volume", NULL, "m3/mol", phase->molar_volume);
        text_format(&sum, "%s%s * %s", k == 0 ? "" : " + ", n, v);
        volume += phase->amount * phase->molar_volume;
    }
    hand_check_put(&numbers, "V", "water capacity", sum.bytes, "m3", volume);
    hand_check_numbers(run, check, &numbers);
}

void hand_check_mixture_contents(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                                 double mass, double temperature)
{
    struct contents contents;
    if (pressure_at(run, method, mass, temperature, &contents) != ANSWER_OK) {
        return;
    }
    for (size_t k = 0; k < contents.phase_count; k++) {
        const struct contents_phase *phase = &contents.phases[k];
        const struct mixture_state state = {temperature, phase->molar_volume, phase->x};
        if (k == 0) {
            hand_check_mixture_components(run, check, method, &state);
        }
        hand_check_mixture_phase(run, check, method, &state, phase_words(&contents, k), contents.phase_count > 1);
    }
    if (contents.phase_count > 1) {
        add_volumes(run, check, &contents);
    }
}

void hand_check_dew_point(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                          double temperature)
{
    const struct edge_list *list;
    if (fluid_set_t(method->at_t, method->fluid, temperature) != ANSWER_OK ||
        mixture_edge_list(method, &list) != ANSWER_OK || list->count == 0) {
        return;
    }
    const struct phase_edge *edge = &list->items[0];
    const struct mixture_state whole = {temperature, edge->molar_volume, method->z};
    const struct mixture_state first = {temperature, edge->other_volume, edge->other};
    hand_check_mixture_components(run, check, method, &whole);
    hand_check_mixture_phase(run, check, method, &whole, "the whole at its dew point", true);
    hand_check_mixture_phase(run, check, method, &first, "the first liquid", true);
}
