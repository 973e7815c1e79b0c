/* Fluids: what a sheet or a charge is filled with, a component by itself or a mixture. */
#include "case/case_internal.h"

#include <string.h>

/* What may be there as a trace without a flame or a reaction that is worth an assessment: a tenth of the leanest fuels'
 * lower limits in air, which are near 1 %, and of that another tenth for high pressure. */
#define TRACE 1e-4

static bool is_more_than_trace(const struct case_fluid *fluid, size_t i)
{
    return fluid->fractions[i] > TRACE;
}

/* The first component with the hazard, in more than traces; NULL: none. */
static const struct case_component *find_hazard(const struct case_fluid *fluid, unsigned hazard)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (is_more_than_trace(fluid, i) && (fluid->components[i]->hazards & hazard) != 0) {
            return fluid->components[i];
        }
    }
    return NULL;
}

/* Two components in more than traces that are known to react; NULL: none. */
static const struct case_pair *find_reaction(struct elaboration *e, const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t j = i + 1; j < fluid->count; j++) {
            const struct case_pair *pair =
                is_more_than_trace(fluid, i) && is_more_than_trace(fluid, j)
                    ? case_pair_of(fluid, fluid->components[i]->name, fluid->components[j]->name)
                    : NULL;
            if (pair != NULL && pair->reacts != NULL) {
                use_source(e, pair->reacts_origin.source);
                mark_file_used(e, pair->reacts_origin.at);
                return pair;
            }
        }
    }
    return NULL;
}

static const char *assessment_of(struct elaboration *e, const struct case_fluid *fluid)
{
    const struct case_component *fuel = find_hazard(fluid, HAZARD_FLAMMABLE | HAZARD_PYROPHORIC);
    const struct case_component *oxidant = find_hazard(fluid, HAZARD_OXIDISING);
    const struct case_component *unstable = find_hazard(fluid, HAZARD_DECOMPOSES);
    if (fuel != NULL && oxidant != NULL) {
        return fuel == oxidant
                   ? arena_format(e->arena, "%s is fuel and oxidant in one", fuel->name)
                   : arena_format(e->arena, "a fuel beside an oxidant, %s and %s", fuel->name, oxidant->name);
    }
    const struct case_pair *reaction = find_reaction(e, fluid);
    if (reaction != NULL) {
        return arena_format(e->arena, "%s and %s react: %s", reaction->first, reaction->second, reaction->reacts);
    }
    return unstable == NULL ? NULL
                            : arena_format(e->arena, "%s may decompose, and the pressure after that was not computed",
                                           unstable->name);
}

/* A gas that is carried dissolved only is refused where it is most of what is filled; as a part of a mixture it is a
 * matter of assessment. */
static const char *refusal_of(const struct case_fluid *fluid)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->fractions[i] <= 0.5) {
            continue;
        }
        if (fluid->components[i]->refuse != NULL) {
            return fluid->components[i]->refuse;
        }
        if ((fluid->components[i]->hazards & HAZARD_DISSOLVED) != 0) {
            return "a dissolved gas: its charge follows from the porous mass and the solvent";
        }
    }
    return NULL;
}

static void mark_in_use(struct elaboration *e, const struct case_component *component)
{
    struct named *named = names_find(&e->tables[NAMES_COMPONENT], component->name);
    if (!e->is_checking && !named->is_in_use) {
        named->is_in_use = true;
        *ARENA_APPEND(e->arena, &e->components) = component;
    }
}

void finish_fluid(struct elaboration *e, struct case_fluid *fluid)
{
    const struct pure_spec **pure = arena_alloc(e->arena, fluid->count, sizeof(const struct pure_spec *));
    fluid->molar_mass = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        pure[i] = &fluid->components[i]->spec;
        fluid->molar_mass += fluid->fractions[i] * fluid->components[i]->molar_mass.value;
        mark_in_use(e, fluid->components[i]);
    }
    fluid->spec = (struct fluid_spec){.count = fluid->count, .pure = pure};
    find_pairs(e, fluid);
    fluid->assessment = assessment_of(e, fluid);
    fluid->refuse = refusal_of(fluid);
}

static const struct case_fluid *make_pure(struct elaboration *e, const struct named *named,
                                          const struct case_component *component)
{
    struct case_fluid *fluid = arena_alloc(e->arena, 1, sizeof *fluid);
    const struct case_component **components = arena_alloc(e->arena, 1, sizeof(const struct case_component *));
    double *fractions = arena_alloc(e->arena, 1, sizeof *fractions);
    components[0] = component;
    fractions[0] = 1.0;
    *fluid = (struct case_fluid){
        .name = component->name, .at = named->at, .count = 1, .components = components, .fractions = fractions};
    finish_fluid(e, fluid);
    return fluid;
}

static const struct case_fluid *pure_of_name(struct elaboration *e, const struct expression *name)
{
    const struct case_component *component = component_of_name(e, name);
    if (component == NULL) {
        return NULL;
    }
    struct named *named = names_find(&e->tables[NAMES_COMPONENT], component->name);
    if (named->fluid == NULL) {
        named->fluid = make_pure(e, named, component);
    }
    return named->fluid;
}

/* The known names of both kinds, for the nearest one. */
static void report_unknown(struct elaboration *e, const struct expression *name)
{
    struct diagnostic *said =
        diagnose(e->out, CODE_E205, name->at, "there is no component or mixture named '%s'", shortened(e, name->name));
    size_t component_count;
    size_t mixture_count;
    const char **components = known_names(e, NAMES_COMPONENT, &component_count);
    const char **mixtures = known_names(e, NAMES_MIXTURE, &mixture_count);
    const char **known = arena_alloc(e->arena, component_count + mixture_count + 1, sizeof *known);
    memcpy(known, mixtures, mixture_count * sizeof *known);
    memcpy(known + mixture_count, components, component_count * sizeof *known);
    suggest(e, said, name->name, known, component_count + mixture_count);
}

const struct case_fluid *fluid_of_name(struct elaboration *e, const struct expression *name)
{
    if (name->kind != EXPRESSION_NAME) {
        return pure_of_name(e, name);
    }
    struct named *mixture = names_find(&e->tables[NAMES_MIXTURE], name->name);
    if (mixture != NULL) {
        return build_mixture(e, mixture);
    }
    if (names_find(&e->tables[NAMES_COMPONENT], name->name) == NULL) {
        report_unknown(e, name);
        return NULL;
    }
    return pure_of_name(e, name);
}
