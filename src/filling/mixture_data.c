#include "filling/mixture_data.h"

#include "base/text.h"

#include <math.h>
#include <string.h>

#define STATED_TEMPERATURE 288.15 /* K: interactions that depend on temperature are told at 15 degC */

/* More pairs than these of which a method knows nothing are told in one row. */
enum { UNKNOWN_NAMED = 3 };

/* Where the rows of one group go. */
struct telling {
    const struct case_tree *tree;
    struct result *result;
    const char *group;
};

static struct data_row *add_row(const struct telling *telling, const char *name, const char *value)
{
    struct data_row *row = ARENA_APPEND(telling->result->arena, &telling->result->data);
    *row = (struct data_row){.group = telling->group, .name = name, .value = value};
    return row;
}

/* ---- composition ------------------------------------------------------------------------------------------------- */

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

/* The fluid as the deck has it, of which one in mole fractions may have been made. */
static const struct case_fluid *as_written(const struct case_tree *tree, const struct case_fluid *fluid)
{
    for (size_t i = 0; i < tree->sheet_count; i++) {
        if (tree->sheets[i].fluid->shares == fluid->shares) {
            return tree->sheets[i].fluid;
        }
    }
    return fluid;
}

static const char *line_words(const struct case_tree *tree, const struct origin *origin, struct arena *arena)
{
    const bool is_root = origin->source == NULL && origin->at.file != NULL && origin->at.file == tree->deck->root;
    return is_root ? arena_format(arena, "line %zu", location_line(origin->at))
                   : data_source_words(tree, origin, arena);
}

/* Short, as all rows of the section share the width of this column. */
static const char *share_remark(const struct case_share *share, struct arena *arena)
{
    if (share->given.uncertainty > 0.0) {
        return arena_format(arena, "+/- %.6g", share->given.uncertainty);
    }
    if (share->is_beside) {
        return "of parent gases";
    }
    return share->is_rest ? "rest" : NULL;
}

/* One row for each component; `fractions` NULL: the shares as they were written. */
static void tell_fractions(const struct telling *telling, const struct case_fluid *fluid, const char *kind,
                           const double fractions[])
{
    struct arena *arena = telling->result->arena;
    for (size_t i = 0; i < fluid->count; i++) {
        const double value = fractions != NULL ? fractions[i] : fluid->shares[i].given.value;
        struct data_row *row =
            add_row(telling, fluid->components[i]->name, arena_format(arena, "%s fraction %.8g", kind, value));
        if (fluid->shares != NULL && (fractions == NULL || fluid->basis == BASIS_MOLE)) {
            row->source = line_words(telling->tree, &fluid->shares[i].given.origin, arena);
            row->remark = share_remark(&fluid->shares[i], arena);
        }
    }
}

/* Shares that are not of amount come first as they were written, with the state where their volumes are real. */
static void tell_composition(const struct telling *telling, const struct case_fluid *fluid,
                             const struct case_fluid *written)
{
    struct arena *arena = telling->result->arena;
    if (written->has_state) {
        add_row(telling, "volumes at", arena_format(arena, "%.6g K, %.8g Pa", written->temperature, written->pressure));
    }
    if (fluid->shares != NULL && fluid->basis != BASIS_MOLE) {
        tell_fractions(telling, fluid, basis_words(fluid->basis), NULL);
    }
    tell_fractions(telling, fluid, "mole", fluid->fractions);
    add_row(telling, "molar-mass", arena_format(arena, "%.10g g/mol", 1e3 * fluid->molar_mass))->source =
        "mean by mole";
}

/* ---- what has to be assessed ------------------------------------------------------------------------------------- */

static void tell_reaction(const struct telling *telling, const struct case_pair *pair)
{
    struct arena *arena = telling->result->arena;
    const struct case_source *source = pair->reacts_origin.source;
    const char *name = arena_format(arena, "reaction %s, %s", pair->first, pair->second);
    struct data_row *row = add_row(telling, name, pair->reacts);
    row->source = data_source_words(telling->tree, &pair->reacts_origin, arena);
    row->remark = source != NULL && source->is_unverified ? "unverified" : NULL;
}

static void tell_assessment(const struct telling *telling, const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->pair_count; i++) {
        if (fluid->pairs[i]->reacts != NULL) {
            tell_reaction(telling, fluid->pairs[i]);
        }
    }
    if (fluid->assessment != NULL) {
        add_row(telling, "to be assessed", fluid->assessment);
    }
    if (fluid->refuse != NULL) {
        add_row(telling, "no charge", fluid->refuse);
    }
}

/* Each document that a sheet names for the fluid, once. */
static void tell_documents(const struct telling *telling, const struct case_fluid *written)
{
    for (size_t i = 0; i < telling->tree->sheet_count; i++) {
        const struct case_sheet *sheet = &telling->tree->sheets[i];
        bool is_told = sheet->fluid != written || sheet->assessed == NULL;
        for (size_t k = 0; k < i && !is_told; k++) {
            const struct case_sheet *earlier = &telling->tree->sheets[k];
            is_told = earlier->fluid == written && earlier->assessed != NULL &&
                      strcmp(earlier->assessed, sheet->assessed) == 0;
        }
        if (!is_told) {
            add_row(telling, "assessed", arena_format(telling->result->arena, "\"%s\"", sheet->assessed))->source =
                arena_format(telling->result->arena, "sheet %zu", i + 1);
        }
    }
}

static void tell_mixture(const struct case_tree *tree, const struct pooled_method *pooled, struct result *result)
{
    const struct case_fluid *fluid = pooled->fluid, *written = as_written(tree, fluid);
    const char *group = written->has_state
                            ? arena_format(result->arena, "mixture %s, by %s", fluid->name, pooled->run.name)
                            : arena_format(result->arena, "mixture %s", fluid->name);
    const struct telling telling = {tree, result, group};
    tell_composition(&telling, fluid, written);
    tell_assessment(&telling, fluid);
    tell_documents(&telling, written);
}

/* ---- pairs ------------------------------------------------------------------------------------------------------- */

/* Sources marked unverified that pairs of one method rest on, each with the number of them. */
struct unverified {
    size_t count, capacity;
    struct unverified_source {
        const struct case_source *source;
        size_t pairs;
    } * items;
};

struct pairs_telling {
    struct telling to;
    const struct pooled_method *pooled;
    struct unverified unverified;
    size_t unknown; /* pairs the method knows nothing of */
};

static void count_unverified(struct pairs_telling *telling, const struct case_source *source)
{
    struct unverified *list = &telling->unverified;
    for (size_t i = 0; i < list->count; i++) {
        if (list->items[i].source == source) {
            list->items[i].pairs++;
            return;
        }
    }
    *ARENA_APPEND(telling->to.result->arena, list) = (struct unverified_source){source, 1};
}

static bool has_group(const struct case_component *component, const char *name)
{
    for (size_t i = 0; i < component->group_count; i++) {
        if (strcmp(component->groups[i].name, name) == 0) {
            return true;
        }
    }
    return false;
}

/* Whether the two groups meet when the two molecules do. */
static bool is_between(const struct case_group_pair *groups, const struct case_component *one,
                       const struct case_component *other)
{
    return (has_group(one, groups->first) || has_group(other, groups->first)) &&
           (has_group(one, groups->second) || has_group(other, groups->second));
}

/* Where the numbers behind one pair come from, each place once. */
struct places {
    struct text words;
    bool is_unverified;
};

static void take_source(struct pairs_telling *telling, const struct origin *origin, struct places *places)
{
    if (origin->source != NULL && origin->source->is_unverified) {
        places->is_unverified = true;
        count_unverified(telling, origin->source);
    }
}

static void add_place(struct pairs_telling *telling, const struct origin *origin, struct places *places)
{
    const char *words = data_source_words(telling->to.tree, origin, telling->to.result->arena);
    if (places->words.length > 0 && strstr(places->words.bytes, words) != NULL) {
        return;
    }
    text_format(&places->words, "%s%s", places->words.length == 0 ? "" : ", ", words);
    take_source(telling, origin, places);
}

static void add_group_places(struct pairs_telling *telling, size_t i, size_t j, struct places *places)
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    for (size_t k = 0; k < fluid->group_pair_count; k++) {
        if (is_between(fluid->group_pairs[k], fluid->components[i], fluid->components[j])) {
            add_place(telling, &fluid->group_pairs[k]->A.origin, places);
        }
    }
    take_source(telling, &fluid->components[i]->groups_origin, places);
    if (fluid->components[j]->groups_origin.source != fluid->components[i]->groups_origin.source) {
        take_source(telling, &fluid->components[j]->groups_origin, places);
    }
}

static void add_constant_places(struct pairs_telling *telling, size_t i, size_t j, struct places *places)
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    const struct case_pair *pair = case_pair_of(fluid, fluid->components[i]->name, fluid->components[j]->name);
    const struct case_pair_constants *constants =
        pair == NULL ? NULL : case_pair_constants_of(pair, telling->pooled->run.name);
    if (constants != NULL && constants->kij.given) {
        add_place(telling, &constants->kij.origin, places);
    }
    if (constants != NULL && constants->lij.given) {
        add_place(telling, &constants->lij.origin, places);
    }
}

static const char *pair_name(const struct pairs_telling *telling, size_t i, size_t j)
{
    const struct case_component *const *components = telling->pooled->fluid->components;
    return arena_format(telling->to.result->arena, "%s, %s", components[i]->name, components[j]->name);
}

static const char *pair_words(const struct pair_parameter *pair, struct arena *arena)
{
    return fabs(pair->lij) > 0.0 ? arena_format(arena, "%.6g, lij %.6g", pair->kij, pair->lij)
                                 : arena_format(arena, "%.6g", pair->kij);
}

static const char *kind_words(enum pair_origin origin)
{
    switch (origin) {
    case PAIR_FROM_GROUPS:
        return ", by groups";
    case PAIR_FROM_LIBRARY:
        return ", constant";
    case PAIR_FROM_DECK:
    case PAIR_FROM_NOTHING:
        break;
    }
    return "";
}

static void tell_known(struct pairs_telling *telling, size_t i, size_t j, const struct pair_parameter *pair)
{
    struct arena *arena = telling->to.result->arena;
    struct places places = {.words = {.arena = arena}};
    struct data_row *row = add_row(&telling->to, pair_name(telling, i, j), pair_words(pair, arena));
    if (pair->origin == PAIR_FROM_GROUPS) {
        add_group_places(telling, i, j, &places);
    } else {
        add_constant_places(telling, i, j, &places);
    }
    if (places.words.length > 0) {
        text_format(&places.words, "%s", kind_words(pair->origin));
    }
    row->source = places.words.bytes;
    row->remark = places.is_unverified ? "unverified" : NULL;
}

/* Calls `tell` for every pair that has shares in the mixture, known to the method or not. */
static void for_pairs(struct pairs_telling *telling, bool is_known,
                      void (*tell)(struct pairs_telling *telling, size_t i, size_t j,
                                   const struct pair_parameter *pair))
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    struct pair_parameter pair;
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t j = i + 1; j < fluid->count; j++) {
            if (fluid->fractions[i] > 0.0 && fluid->fractions[j] > 0.0 &&
                fluid_pair(telling->pooled->run.at_t, i, j, &pair) == ANSWER_OK &&
                (pair.origin != PAIR_FROM_NOTHING) == is_known) {
                tell(telling, i, j, &pair);
            }
        }
    }
}

static void count_unknown(struct pairs_telling *telling, size_t i, size_t j, const struct pair_parameter *pair)
{
    (void)i, (void)j, (void)pair;
    telling->unknown++;
}

static void tell_unknown(struct pairs_telling *telling, size_t i, size_t j, const struct pair_parameter *pair)
{
    (void)pair;
    add_row(&telling->to, pair_name(telling, i, j), "0")->source = "none known";
}

static void warn_of_unverified(const struct pairs_telling *telling)
{
    struct text names = {.arena = telling->to.result->arena};
    for (size_t i = 0; i < telling->unverified.count; i++) {
        const struct unverified_source *one = &telling->unverified.items[i];
        text_format(&names, "%s%s (%zu)", i == 0 ? "" : ", ", one->source->key, one->pairs);
    }
    if (names.length > 0) {
        result_warn(telling->to.result, CODE_W301, 0, 0,
                    "%s, %s: sources of interactions, each with the number of pairs, are marked unverified, as the "
                    "citation or the figures were entered from memory: %s: compare them with the publication",
                    telling->pooled->fluid->name, telling->pooled->run.name, names.bytes);
    }
}

static void tell_pairs(const struct case_tree *tree, const struct pooled_method *pooled, struct result *result)
{
    const struct case_fluid *fluid = pooled->fluid;
    struct pairs_telling telling = {
        .to = {tree, result, arena_format(result->arena, "kij at 15 degC of %s, %s", fluid->name, pooled->run.name)},
        .pooled = pooled,
    };
    if (fluid_set_t(pooled->run.at_t, pooled->run.fluid, STATED_TEMPERATURE) != ANSWER_OK) {
        return;
    }
    for_pairs(&telling, true, tell_known);
    for_pairs(&telling, false, count_unknown);
    if (telling.unknown <= UNKNOWN_NAMED) {
        for_pairs(&telling, false, tell_unknown);
    } else {
        add_row(&telling.to, arena_format(result->arena, "%zu other pairs", telling.unknown), "0")->source =
            "none known";
    }
    warn_of_unverified(&telling);
}

/* ---- reducing parameters ----------------------------------------------------------------------------------------- */

static const char *reducing_source(struct pairs_telling *telling, size_t i, size_t j, bool is_of_volume)
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    const struct case_pair *pair = case_pair_of(fluid, fluid->components[i]->name, fluid->components[j]->name);
    const struct case_reducing *reducing = pair == NULL ? NULL : case_reducing_of(pair, telling->pooled->run.name);
    struct places places = {.words = {.arena = telling->to.result->arena}};
    if (reducing == NULL) {
        return "none published: estimated";
    }
    add_place(telling, is_of_volume ? &reducing->gamma_V.origin : &reducing->gamma_T.origin, &places);
    return places.words.bytes;
}

/* A row for the reducing temperature, one for the reducing volume, one for the departure function where there is one.
 */
static void tell_reducing_pair(struct pairs_telling *telling, size_t i, size_t j)
{
    const struct case_fluid *fluid = telling->pooled->fluid;
    struct arena *arena = telling->to.result->arena;
    struct reducing_parameter found;
    if (!(fluid->fractions[i] > 0.0) || !(fluid->fractions[j] > 0.0) ||
        fluid_reducing(telling->pooled->run.fluid, i, j, &found) != ANSWER_OK) {
        return;
    }
    add_row(&telling->to, arena_format(arena, "%s: T_r", pair_name(telling, i, j)),
            arena_format(arena, "%.6g, %.6g", found.beta_T, found.gamma_T))
        ->source = reducing_source(telling, i, j, false);
    add_row(&telling->to, "  v_r", arena_format(arena, "%.6g, %.6g", found.beta_V, found.gamma_V))->source =
        reducing_source(telling, i, j, true);
    if (found.departure != NULL) {
        add_row(&telling->to, arena_format(arena, "  F of %s", found.departure),
                arena_format(arena, "%.6g", found.weight));
    }
}

/* beta and gamma of the reducing temperature and volume of each pair, and the weight F of its departure function. */
static void tell_reducing(const struct case_tree *tree, const struct pooled_method *pooled, struct result *result)
{
    const struct case_fluid *fluid = pooled->fluid;
    struct pairs_telling telling = {
        .to = {tree, result, arena_format(result->arena, "beta, gamma of %s, %s", fluid->name, pooled->run.name)},
        .pooled = pooled,
    };
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t j = i + 1; j < fluid->count; j++) {
            tell_reducing_pair(&telling, i, j);
        }
    }
    warn_of_unverified(&telling);
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
            tell_mixture(tree, pooled, result);
        }
    }
    for (size_t i = 0; i < pool->count; i++) {
        const struct pooled_method *pooled = &pool->items[i];
        if (pooled->run.fluid != NULL && pooled->fluid->count > 1) {
            tell_pairs(tree, pooled, result);
            tell_reducing(tree, pooled, result);
        }
    }
}
