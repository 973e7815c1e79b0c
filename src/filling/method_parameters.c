#include "filling/method_parameters.h"

#include "base/text.h"

#include <string.h>

/* K: the origin of a pair's parameters does not depend on the temperature. */
#define ANY_TEMPERATURE 288.15

/* ---- what methods need ------------------------------------------------------------------------------------------- */

static bool is_one_of(const char *method, const char *const methods[], size_t count)
{
    for (size_t i = 0; i < count; i++) {
        if (strcmp(method, methods[i]) == 0) {
            return true;
        }
    }
    return false;
}

/* The virial methods' words begin alike. */
static bool is_virial(const char *method)
{
    static const char beginning[] = "virial-";
    return strncmp(method, beginning, sizeof beginning - 1) == 0;
}

bool method_takes_acentric(const char *method)
{
    static const char *const methods[] = {"soave-redlich-kwong", "peng-robinson", "peng-robinson-1978", "lee-kesler",
                                          "poynting"};
    return is_one_of(method, methods, sizeof methods / sizeof *methods) || is_virial(method);
}

static bool is_cubic(const char *method)
{
    const struct fluid_ops *ops = fluid_method(method);
    return ops != NULL && (ops->capabilities & IS_CUBIC) != 0;
}

const struct case_cubic_set *method_set_of(const struct case_component *component, const char *method)
{
    for (size_t i = 0; i < component->cubic_set_count; i++) {
        if (strcmp(component->cubic_sets[i].method, method) == 0) {
            return &component->cubic_sets[i];
        }
    }
    return NULL;
}

bool method_takes_critical(const char *method, const struct case_component *component)
{
    const struct case_cubic_set *set = method_set_of(component, method);
    const bool has_own = set != NULL && set->critical_temperature.given && set->critical_pressure.given;
    return strcmp(method, "reference") != 0 && strcmp(method, "ideal-gas") != 0 && !has_own;
}

/* ---- words ------------------------------------------------------------------------------------------------------- */

const char *quantity_words(const struct quantity *quantity, const char *si_unit, struct arena *arena)
{
    if (quantity->origin.written != NULL) {
        return quantity->origin.written;
    }
    return arena_format(arena, "%.10g%s%s", quantity->value, *si_unit ? " " : "", si_unit);
}

const char *equation_range_words(const struct reference_spec *equation, struct arena *arena)
{
    return arena_format(arena, "%.6g to %.6g K, to %.6g MPa", equation->smallest_temperature,
                        equation->largest_temperature, equation->largest_pressure / 1e6);
}

static const char *reference_parameters(const struct case_component *component, struct arena *arena)
{
    const struct reference_spec *equation = component->spec.reference;
    return arena_format(arena,
                        "%s: %zu terms as in the component's equation block; reducing temperature %.10g K, reducing "
                        "density %.10g mol/m3, R = %.10g J/(mol K)",
                        component->name, equation->residual_count, equation->reducing_temperature,
                        equation->reducing_density, equation->gas_constant);
}

/* ---- cubic equations --------------------------------------------------------------------------------------------- */

/* One parameter of a component; the set's own value comes before the component's. */
struct parameter {
    const char *name, *unit;
    const struct quantity *quantity;
};

enum { MOST_PARAMETERS = 9 };

static const struct quantity *first_given(const struct quantity *own, const struct quantity *common)
{
    return own != NULL && own->given ? own : common;
}

/* What the method takes of the component, in the order told; the number of them. */
static size_t parameters_of(const struct case_component *component, const char *method, struct parameter out[])
{
    const struct case_cubic_set *set = method_set_of(component, method);
    size_t count = 0;
    out[count++] = (struct parameter){
        "critical temperature", "K",
        first_given(set == NULL ? NULL : &set->critical_temperature, &component->critical_temperature)};
    out[count++] =
        (struct parameter){"critical pressure", "Pa",
                           first_given(set == NULL ? NULL : &set->critical_pressure, &component->critical_pressure)};
    if (method_takes_acentric(method)) {
        out[count++] = (struct parameter){"acentric factor", "", &component->acentric};
    }
    if (set == NULL) {
        return count;
    }
    const struct parameter more[] = {
        {"L", "", &set->twu[0]},
        {"M", "", &set->twu[1]},
        {"N", "", &set->twu[2]},
        {"covolume A", "K", &set->covolume_A},
        {"covolume B", "K", &set->covolume_B},
        {"shift c", "m3/mol", &set->shift},
    };
    for (size_t i = 0; i < sizeof more / sizeof *more; i++) {
        if (more[i].quantity->given) {
            out[count++] = more[i];
        }
    }
    return count;
}

static bool is_translated(const struct pooled_method *pooled, size_t i)
{
    const struct case_cubic_set *set = method_set_of(pooled->fluid->components[i], pooled->run.name);
    return set != NULL && set->shift.given;
}

static bool is_any_translated(const struct pooled_method *pooled)
{
    for (size_t i = 0; i < pooled->fluid->count; i++) {
        if (is_translated(pooled, i)) {
            return true;
        }
    }
    return false;
}

static void add_values(const struct pooled_method *pooled, struct text *text)
{
    const struct case_component *component = pooled->fluid->components[0];
    struct parameter parameters[MOST_PARAMETERS];
    const size_t count = parameters_of(component, pooled->run.name, parameters);
    text_format(text, "%s: ", component->name);
    for (size_t i = 0; i < count; i++) {
        text_format(text, "%s%s %s", i == 0 ? "" : ", ", parameters[i].name,
                    quantity_words(parameters[i].quantity, parameters[i].unit, text->arena));
    }
}

/* Every name that some component has a value for, once. */
static void add_names(const struct pooled_method *pooled, struct text *text)
{
    const char *names[MOST_PARAMETERS];
    size_t told = 0;
    text_format(text, "%s: ", pooled->fluid->name);
    for (size_t k = 0; k < pooled->fluid->count; k++) {
        struct parameter parameters[MOST_PARAMETERS];
        const size_t count = parameters_of(pooled->fluid->components[k], pooled->run.name, parameters);
        for (size_t i = 0; i < count; i++) {
            if (!is_one_of(parameters[i].name, names, told)) {
                text_format(text, "%s%s", told == 0 ? "" : ", ", parameters[i].name);
                names[told++] = parameters[i].name;
            }
        }
    }
    text_format(text, " of each component, as in the data used");
}

/* ---- pairs ------------------------------------------------------------------------------------------------------- */

static const char *origin_words(enum pair_origin origin)
{
    switch (origin) {
    case PAIR_FROM_DECK:
        return "given in the deck";
    case PAIR_FROM_GROUPS:
        return "by groups";
    case PAIR_FROM_LIBRARY:
        return "constant, of the library";
    case PAIR_FROM_NOTHING:
        break;
    }
    return "not known and taken as zero";
}

struct pair_counts {
    size_t all, of[PAIR_FROM_NOTHING + 1];
};

static struct pair_counts count_pairs(const struct pooled_method *pooled)
{
    struct pair_counts counts = {.all = 0};
    struct pair_parameter pair;
    for (size_t i = 0; i < pooled->fluid->count; i++) {
        for (size_t j = i + 1; j < pooled->fluid->count; j++) {
            if (pooled->fluid->fractions[i] > 0.0 && pooled->fluid->fractions[j] > 0.0 &&
                fluid_pair(pooled->run.at_t, i, j, &pair) == ANSWER_OK) {
                counts.all++;
                counts.of[pair.origin]++;
            }
        }
    }
    return counts;
}

/* `rule` says what kij does. */
static void add_pairs(const struct pooled_method *pooled, const char *rule, struct text *text)
{
    if (pooled->fluid->count < 2 || fluid_set_t(pooled->run.at_t, pooled->run.fluid, ANY_TEMPERATURE) != ANSWER_OK) {
        return;
    }
    const struct pair_counts counts = count_pairs(pooled);
    const char *before = ": ";
    text_format(text, "; %s, kij of %zu pair%s", rule, counts.all, counts.all == 1 ? "" : "s");
    for (size_t origin = 0; origin <= PAIR_FROM_NOTHING; origin++) {
        if (counts.of[origin] > 0) {
            text_format(text, "%s%zu %s", before, counts.of[origin], origin_words((enum pair_origin)origin));
            before = ", ";
        }
    }
}

/* Peneloux, Rauzy and Freze, Fluid Phase Equilib. 8 (1982) 7: a constant shift leaves every equilibrium as it is. */
static void add_translation(const struct pooled_method *pooled, struct text *text)
{
    if (is_any_translated(pooled)) {
        text_format(text,
                    pooled->fluid->count == 1
                        ? "; translated: v = v_eos - c, ln phi = ln phi_eos - c p / (R T), equilibria as without"
                        : "; translated: v = v_eos - sum x_i c_i, ln phi_i = ln phi_i,eos - c_i p / (R T), equilibria "
                          "as without");
    }
}

static void add_components_own(const struct pooled_method *pooled, struct text *text)
{
    if (pooled->fluid->count == 1) {
        add_values(pooled, text);
    } else {
        add_names(pooled, text);
    }
}

static const char *cubic_parameters(const struct pooled_method *pooled, struct arena *arena)
{
    struct text text = {.arena = arena};
    add_components_own(pooled, &text);
    add_pairs(pooled, "a_ij = (1 - kij) sqrt(a_i a_j)", &text);
    add_translation(pooled, &text);
    text_format(&text, "; R = %.15g J/(mol K)", pooled->run.fluid->gas_constant);
    return text.bytes;
}

/* Corresponding states: Lee and Kesler with Ploecker's kappa, the virial equations with a pair's own Tc. */
static const char *corresponding_parameters(const struct pooled_method *pooled, struct arena *arena)
{
    struct text text = {.arena = arena};
    add_components_own(pooled, &text);
    add_pairs(pooled, "Tc_ij = (1 - kij) sqrt(Tc_i Tc_j)", &text);
    text_format(&text, "; R = %.15g J/(mol K)", pooled->run.fluid->gas_constant);
    return text.bytes;
}

const char *method_parameters(const struct pooled_method *pooled, struct arena *arena)
{
    if (strcmp(pooled->run.name, "reference") == 0) {
        return reference_parameters(pooled->fluid->components[0], arena);
    }
    if (is_cubic(pooled->run.name)) {
        return cubic_parameters(pooled, arena);
    }
    if (method_takes_acentric(pooled->run.name)) {
        return corresponding_parameters(pooled, arena);
    }
    if (pooled->run.fluid->ops->reducing != NULL) {
        return arena_format(arena,
                            "%s: the equation of each component, beta, gamma and departure of each pair as in the data "
                            "used; R = %.15g J/(mol K)",
                            pooled->fluid->name, pooled->run.fluid->gas_constant);
    }
    return arena_format(arena, "%s: R = %.15g J/(mol K)", pooled->fluid->name, pooled->run.fluid->gas_constant);
}

/* ---- how far it can be relied on --------------------------------------------------------------------------------- */

enum shift_kind { SHIFT_NONE, SHIFT_OWN, SHIFT_OF_LIBRARY };

static enum shift_kind shift_of(const struct pooled_method *pooled, size_t i)
{
    if (!is_translated(pooled, i)) {
        return SHIFT_NONE;
    }
    const struct case_cubic_set *set = method_set_of(pooled->fluid->components[i], pooled->run.name);
    return set->shift.origin.kind == ORIGIN_LIBRARY ? SHIFT_OF_LIBRARY : SHIFT_OWN;
}

/* The components of that kind, after `lead`; false where there are none. */
static bool add_components(const struct pooled_method *pooled, enum shift_kind kind, const char *lead,
                           struct text *text)
{
    bool is_any = false;
    for (size_t i = 0; i < pooled->fluid->count; i++) {
        if (shift_of(pooled, i) == kind) {
            text_format(text, "%s%s", is_any ? ", " : lead, pooled->fluid->components[i]->name);
            is_any = true;
        }
    }
    return is_any;
}

/* The library fits the shifts of this method to the reference equations; how good that is stands with the shifts,
 * decks/library/cubic/peng-robinson-1978.deck. */
static const char *translated_range(const struct pooled_method *pooled, struct arena *arena)
{
    struct text text = {.arena = arena};
    text_format(&text, "%s", pooled->run.fluid->ops->validity);
    if (add_components(pooled, SHIFT_OF_LIBRARY, "; translated: ", &text)) {
        text_format(&text, "; the volume of one by itself is then within 0.2 to 1 %% as a gas far above its critical "
                           "temperature and as a liquid far below, 1 to 4 %% as a gas near it, from -20 to 60 degC and "
                           "10 to 300 bar");
    }
    add_components(pooled, SHIFT_OWN, "; translated by a shift given in the deck: ", &text);
    add_components(pooled, SHIFT_NONE, "; not translated, as no shift is known: ", &text);
    return text.bytes;
}

const char *method_range(const struct pooled_method *pooled, struct arena *arena)
{
    if (strcmp(pooled->run.name, "reference") == 0) {
        return equation_range_words(pooled->fluid->components[0]->spec.reference, arena);
    }
    if (strcmp(pooled->run.name, "peng-robinson-1978") == 0) {
        return translated_range(pooled, arena);
    }
    return pooled->run.fluid->ops->validity;
}
