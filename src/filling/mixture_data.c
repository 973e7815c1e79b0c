#include "filling/mixture_data.h"

#include "base/text.h"

#include <math.h>
#include <string.h>

#define STATED_TEMPERATURE 288.15 /* K: interactions that depend on temperature are told at 15 degC */
/* K: gases critical below this are light enough for quantum effects; the acentric factor then says little. */
#define QUANTUM_CRITICAL_TEMPERATURE 50.0

static struct data_row *add_row(struct result *result, const char *group, const char *name, const char *value)
{
    struct data_row *row = ARENA_APPEND(result->arena, &result->data);
    *row = (struct data_row){.group = group, .name = name, .value = value};
    return row;
}

/* ---- composition ------------------------------------------------------------------------------------------------- */

static const char *share_place(const struct case_tree *tree, const struct case_share *share, struct arena *arena)
{
    const struct origin *origin = &share->given.origin;
    if (origin->source != NULL) {
        return origin->source->key;
    }
    if (origin->at.file == NULL) {
        return "default";
    }
    const size_t line = location_line(origin->at);
    return origin->at.file == tree->deck->root ? arena_format(arena, "line %zu", line)
                                               : arena_format(arena, "%s, line %zu", origin->at.file->name, line);
}

static const char *basis_words(enum fraction_basis basis)
{
    switch (basis) {
    case BASIS_MOLE:
        return "mole";
    case BASIS_MASS:
        return "mass";
    case BASIS_VOLUME:
        break;
    }
    return "volume";
}

static const char *share_words(const struct case_fluid *fluid, size_t i, struct arena *arena)
{
    struct text text = {.arena = arena};
    const struct case_share *share = &fluid->shares[i];
    if (fluid->basis != BASIS_MOLE) {
        text_format(&text, "%.6g by %s", share->given.value, basis_words(fluid->basis));
    }
    if (share->is_rest) {
        text_format(&text, "%srest", text.length == 0 ? "" : ", ");
    }
    if (share->given.uncertainty > 0.0) {
        text_format(&text, "%s+/- %.6g", text.length == 0 ? "" : ", ", share->given.uncertainty);
    }
    return text.bytes;
}

static void tell_composition(const struct case_tree *tree, const struct case_fluid *fluid, struct result *result)
{
    struct arena *arena = result->arena;
    const char *group = arena_format(arena, "mixture %s", fluid->name);
    for (size_t i = 0; i < fluid->count; i++) {
        struct data_row *row = add_row(result, group, fluid->components[i]->name,
                                       arena_format(arena, "mole fraction %.10g", fluid->fractions[i]));
        if (fluid->shares != NULL) {
            row->source = share_place(tree, &fluid->shares[i], arena);
            row->remark = share_words(fluid, i, arena);
        }
    }
    add_row(result, group, "molar-mass", arena_format(arena, "%.10g g/mol", 1e3 * fluid->molar_mass))->source =
        "mean by mole";
}

/* ---- pairs ------------------------------------------------------------------------------------------------------- */

/* Pairs of one method that rest on one unverified source. */
struct unverified {
    const struct case_source *source;
    size_t count;
};

struct telling {
    struct result *result;
    const struct pooled_method *pooled;
    const char *group;
    struct unverified unverified;
};

static const struct case_source *source_of_groups(const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->group_pair_count; i++) {
        if (fluid->group_pairs[i]->A.origin.source != NULL) {
            return fluid->group_pairs[i]->A.origin.source;
        }
    }
    return NULL;
}

static const struct case_source *source_of_pair(const struct telling *telling, size_t i, size_t j,
                                                enum pair_origin origin)
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    if (origin == PAIR_FROM_GROUPS) {
        return source_of_groups(fluid);
    }
    const struct case_pair *pair = case_pair_of(fluid, fluid->components[i]->name, fluid->components[j]->name);
    const struct case_pair_constants *constants =
        pair == NULL ? NULL : case_pair_constants_of(pair, telling->pooled->run.name);
    return constants == NULL ? NULL : constants->kij.origin.source;
}

static const char *pair_value(const struct pair_parameter *pair, struct arena *arena)
{
    struct text text = {.arena = arena};
    text_format(&text, "%.6g", pair->kij);
    if (fabs(pair->lij) > 0.0) {
        text_format(&text, ", lij %.6g", pair->lij);
    }
    if (pair->origin == PAIR_FROM_GROUPS) {
        text_format(&text, " at 15 degC, by groups");
    }
    return text.bytes;
}

static void tell_pair(struct telling *telling, size_t i, size_t j)
{
    const struct pooled_method *pooled = telling->pooled;
    const struct case_fluid *fluid = pooled->fluid;
    struct result *result = telling->result;
    struct pair_parameter pair;
    if (fluid_pair(pooled->run.at_t, i, j, &pair) != ANSWER_OK) {
        return;
    }
    const char *name =
        arena_format(result->arena, "kij %s, %s", fluid->components[i]->name, fluid->components[j]->name);
    if (pair.origin == PAIR_FROM_NOTHING) {
        add_row(result, telling->group, name, "0")->source = "none known";
        result_warn(result, CODE_W306, location_line(fluid->at), 0,
                    "%s, %s: no interaction is known of %s and %s: taken as zero", fluid->name, pooled->run.name,
                    fluid->components[i]->name, fluid->components[j]->name);
        return;
    }
    const struct case_source *source = source_of_pair(telling, i, j, pair.origin);
    struct data_row *row = add_row(result, telling->group, name, pair_value(&pair, result->arena));
    row->source = source != NULL ? source->key : pair.origin == PAIR_FROM_DECK ? "given in this deck" : "library";
    if (source != NULL && source->is_unverified) {
        row->remark = "unverified";
        telling->unverified.source = source;
        telling->unverified.count++;
    }
}

static void warn_of_unverified(const struct telling *telling)
{
    if (telling->unverified.count > 0) {
        result_warn(telling->result, CODE_W301, 0, 0,
                    "%s, %s: the source of %zu interaction%s, %s, is marked unverified, as the citation or the figures "
                    "were entered from memory: compare them with the publication",
                    telling->pooled->fluid->name, telling->pooled->run.name, telling->unverified.count,
                    telling->unverified.count == 1 ? "" : "s", telling->unverified.source->key);
    }
}

static void tell_pairs(const struct pooled_method *pooled, struct result *result)
{
    struct telling telling = {
        .result = result,
        .pooled = pooled,
        .group = arena_format(result->arena, "pairs of %s, %s", pooled->fluid->name, pooled->run.name)};
    if (fluid_set_t(pooled->run.at_t, pooled->run.fluid, STATED_TEMPERATURE) != ANSWER_OK) {
        return;
    }
    for (size_t i = 0; i < pooled->fluid->count; i++) {
        for (size_t j = i + 1; j < pooled->fluid->count; j++) {
            if (pooled->fluid->fractions[i] > 0.0 && pooled->fluid->fractions[j] > 0.0) {
                tell_pair(&telling, i, j);
            }
        }
    }
    warn_of_unverified(&telling);
}

/* ---- light gases ------------------------------------------------------------------------------------------------- */

/* Cubic methods whose attraction follows the acentric factor alone. */
static bool goes_by_acentric_factor(const char *method)
{
    static const char *const methods[] = {"soave-redlich-kwong", "peng-robinson", "peng-robinson-1978"};
    for (size_t i = 0; i < sizeof methods / sizeof *methods; i++) {
        if (strcmp(methods[i], method) == 0) {
            return true;
        }
    }
    return false;
}

static void warn_of_light_gases(const struct pooled_method *pooled, struct result *result)
{
    for (size_t i = 0; i < pooled->fluid->count && goes_by_acentric_factor(pooled->run.name); i++) {
        const struct case_component *component = pooled->fluid->components[i];
        if (component->critical_temperature.given &&
            component->critical_temperature.value < QUANTUM_CRITICAL_TEMPERATURE) {
            result_warn(result, CODE_W307, location_line(pooled->fluid->at), 0,
                        "%s: the attraction of %s follows an acentric factor that says little of so light a gas",
                        pooled->run.name, component->name);
        }
    }
}

/* ---- the section ------------------------------------------------------------------------------------------------- */

static bool is_first_of_fluid(const struct method_pool *pool, size_t index)
{
    for (size_t i = 0; i < index; i++) {
        if (pool->items[i].fluid == pool->items[index].fluid) {
            return false;
        }
    }
    return true;
}

void tell_mixtures(const struct case_tree *tree, const struct method_pool *pool, struct result *result)
{
    for (size_t i = 0; i < pool->count; i++) {
        const struct pooled_method *pooled = &pool->items[i];
        if (pooled->fluid->count > 1 && is_first_of_fluid(pool, i)) {
            tell_composition(tree, pooled->fluid, result);
        }
    }
    for (size_t i = 0; i < pool->count; i++) {
        const struct pooled_method *pooled = &pool->items[i];
        if (pooled->run.fluid == NULL) {
            continue;
        }
        if (pooled->fluid->count > 1) {
            tell_pairs(pooled, result);
        }
        warn_of_light_gases(pooled, result);
    }
}
