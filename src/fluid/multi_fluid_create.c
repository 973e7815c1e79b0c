/* Building a multi-fluid mixture from its components' equations and what is published of their pairs. */
#include "fluid/methods_internal.h"
#include "fluid/multi_fluid_internal.h"
#include "fluid/reference_internal.h"

#include <math.h>
#include <string.h>

/* Of tau: components are looked at from a twentieth to eight times their reducing temperature. */
#define LEAST_TAU 0.125
#define MOST_TAU  20.0

/* ---- a component by itself --------------------------------------------------------------------------------------- */

/* The same equation as the method `reference` takes, under this method's name. */
static struct fluid *create_pure(const struct multi_fluid_model *model, const struct pure_spec *pure,
                                 const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    struct pure_spec *alone = arena_alloc(arena, 1, sizeof *alone);
    const struct pure_spec **list = arena_alloc(arena, 1, sizeof(const struct pure_spec *));
    struct fluid_spec *one = arena_alloc(arena, 1, sizeof *one);
    struct fluid_ops *ops = arena_alloc(arena, 1, sizeof *ops);
    *alone = *pure;
    alone->reference = model->equation_of(pure);
    list[0] = alone;
    *one = (struct fluid_spec){.count = 1, .pure = list};
    struct fluid *fluid = reference_ops.create(one, arena, lack);
    *ops = reference_ops;
    ops->name = model->ops->name;
    ops->title = model->ops->title;
    ops->citation = model->ops->citation;
    ops->validity = model->ops->validity;
    fluid->ops = ops;
    if (spec != NULL) {
        fluid->spec = spec;
    }
    return fluid;
}

/* ---- pairs ------------------------------------------------------------------------------------------------------- */

/* What is given of components i and j, the deck's before the library's; NULL: nothing. */
static const struct reducing_pair *find_pair(const struct fluid_spec *spec, const char *method, size_t i, size_t j)
{
    const struct reducing_pair *found = NULL;
    for (size_t k = 0; k < spec->reducing_pair_count; k++) {
        const struct reducing_pair *pair = &spec->reducing_pairs[k];
        const bool is_it = (pair->first == i && pair->second == j) || (pair->first == j && pair->second == i);
        if (is_it && strcmp(pair->method, method) == 0 && (found == NULL || pair->origin == PAIR_FROM_DECK)) {
            found = pair;
        }
    }
    return found;
}

static double mean_volume(const struct multi_fluid *fluid, size_t i, size_t j)
{
    const double edge = cbrt(fluid->volume[i]) + cbrt(fluid->volume[j]);
    return edge * edge * edge / 8.0;
}

static struct multi_fluid_pair pair_of(const struct multi_fluid *fluid, const char *method, size_t i, size_t j)
{
    const struct reducing_pair *given = find_pair(fluid->head.spec, method, i, j);
    struct multi_fluid_pair pair = {.i = i, .j = j, .given = given, .is_turned = given != NULL && given->first == j};
    const double mean_temperature = sqrt(fluid->temperature[i] * fluid->temperature[j]);
    double beta_T = given == NULL ? 1.0 : given->beta_T, beta_V = given == NULL ? 1.0 : given->beta_V;
    if (pair.is_turned) {
        beta_T = 1.0 / beta_T;
        beta_V = 1.0 / beta_V;
    }
    pair.temperature = reducing_term_of(beta_T, given == NULL ? 1.0 : given->gamma_T, mean_temperature);
    pair.volume = reducing_term_of(beta_V, given == NULL ? 1.0 : given->gamma_V, mean_volume(fluid, i, j));
    return pair;
}

static void set_pairs(struct multi_fluid *fluid, const char *method, struct arena *arena)
{
    const size_t count = fluid->head.count;
    struct multi_fluid_pair *pairs = arena_alloc(arena, count * (count - 1) / 2, sizeof *pairs);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = i + 1; j < count; j++) {
            pairs[fluid->pair_count++] = pair_of(fluid, method, i, j);
        }
    }
    fluid->pairs = pairs;
}

/* ---- parts ------------------------------------------------------------------------------------------------------- */

static size_t function_index(const struct departure_spec **functions, size_t *count,
                             const struct departure_spec *wanted)
{
    for (size_t k = 0; k < *count; k++) {
        if (functions[k] == wanted) {
            return k;
        }
    }
    functions[*count] = wanted;
    return (*count)++;
}

/* The components and the departure functions of their pairs, each function once. */
static void set_parts(struct multi_fluid *fluid, struct arena *arena)
{
    const size_t count = fluid->head.count;
    const struct departure_spec **functions =
        arena_alloc(arena, fluid->pair_count, sizeof(const struct departure_spec *));
    struct multi_fluid_departure *departures = arena_alloc(arena, fluid->pair_count, sizeof *departures);
    for (size_t k = 0; k < fluid->pair_count; k++) {
        const struct multi_fluid_pair *pair = &fluid->pairs[k];
        if (pair->given != NULL && pair->given->departure != NULL && fabs(pair->given->weight) > 0.0) {
            departures[fluid->departure_count++] = (struct multi_fluid_departure){
                pair->i, pair->j, function_index(functions, &fluid->function_count, pair->given->departure),
                pair->given->weight};
        }
    }
    fluid->departures = departures;
    struct part_terms *terms = arena_alloc(arena, count + fluid->function_count, sizeof *terms);
    for (size_t i = 0; i < count; i++) {
        terms[i] = (struct part_terms){fluid->equation[i]->residual_count, fluid->equation[i]->residual};
    }
    for (size_t k = 0; k < fluid->function_count; k++) {
        terms[count + k] = (struct part_terms){functions[k]->residual_count, functions[k]->residual};
    }
    fluid->parts = parts_create(terms, count + fluid->function_count, arena);
}

/* ---- what the roots need ----------------------------------------------------------------------------------------- */

double multi_fluid_node_tau(size_t node)
{
    return LEAST_TAU * pow(MOST_TAU / LEAST_TAU, (double)node / (MULTI_FLUID_NODES - 1));
}

double multi_fluid_node_of_tau(double tau)
{
    const double node = (MULTI_FLUID_NODES - 1) * log(tau / LEAST_TAU) / log(MOST_TAU / LEAST_TAU);
    return fmax(0.0, fmin(node, MULTI_FLUID_NODES - 1));
}

/* The largest delta that each equation by itself is used to: the mixture takes their mean. Equations that were already
 * asked for by an earlier fluid are searched again, which takes a few milliseconds. */
static void set_largest_deltas(struct multi_fluid *fluid, const struct multi_fluid_model *model, struct arena *arena,
                               struct fluid_lack_report *lack)
{
    double acentric = 0.0;
    fluid->largest_delta = arena_alloc(arena, fluid->head.count, sizeof *fluid->largest_delta);
    for (size_t i = 0; i < fluid->head.count; i++) {
        const struct fluid *alone = create_pure(model, fluid->head.spec->pure[i], NULL, arena, lack);
        const struct reference *reference = (const struct reference *)(const void *)alone;
        acentric += reference->acentric / (double)fluid->head.count;
        for (size_t k = 0; k < MULTI_FLUID_NODES; k++) {
            const double temperature = fluid->temperature[i] / multi_fluid_node_tau(k);
            fluid->largest_delta[i][k] = reference_largest_density(reference, temperature) * fluid->volume[i];
        }
    }
    fluid->acentric = acentric;
}

/* A component may be dissolved far below its own triple temperature, so the coldest component counts; too hot, or too
 * high a pressure, for one is too much for all. */
static void set_limits(struct multi_fluid *fluid)
{
    const struct reference_spec *first = fluid->equation[0];
    fluid->smallest_temperature = first->smallest_temperature;
    fluid->largest_temperature = first->largest_temperature;
    fluid->largest_pressure = first->largest_pressure;
    for (size_t i = 1; i < fluid->head.count; i++) {
        const struct reference_spec *equation = fluid->equation[i];
        fluid->smallest_temperature = fmin(fluid->smallest_temperature, equation->smallest_temperature);
        fluid->largest_temperature = fmin(fluid->largest_temperature, equation->largest_temperature);
        fluid->largest_pressure = fmin(fluid->largest_pressure, equation->largest_pressure);
    }
}

/* ---- the fluid --------------------------------------------------------------------------------------------------- */

static bool take_equations(const struct multi_fluid_model *model, const struct fluid_spec *spec,
                           struct multi_fluid *fluid, struct arena *arena, struct fluid_lack_report *lack)
{
    const struct reference_spec **equation = arena_alloc(arena, spec->count, sizeof(const struct reference_spec *));
    double *temperature = arena_alloc(arena, spec->count, sizeof *temperature);
    double *volume = arena_alloc(arena, spec->count, sizeof *volume);
    for (size_t i = 0; i < spec->count; i++) {
        equation[i] = model->equation_of(spec->pure[i]);
        if (equation[i] == NULL) {
            *lack = (struct fluid_lack_report){model->lack, i};
            return false;
        }
        temperature[i] = equation[i]->reducing_temperature;
        volume[i] = 1.0 / equation[i]->reducing_density;
    }
    fluid->equation = equation;
    fluid->temperature = temperature;
    fluid->volume = volume;
    return true;
}

struct fluid *multi_fluid_create(const struct multi_fluid_model *model, const struct fluid_spec *spec,
                                 struct arena *arena, struct fluid_lack_report *lack)
{
    struct multi_fluid *fluid = arena_alloc(arena, 1, sizeof *fluid);
    *lack = (struct fluid_lack_report){LACK_NOTHING, 0};
    if (!take_equations(model, spec, fluid, arena, lack)) {
        return NULL;
    }
    if (spec->count == 1) {
        return create_pure(model, spec->pure[0], spec, arena, lack);
    }
    fluid->head = (struct fluid){model->ops, spec, spec->count, model->gas_constant};
    fluid->ideal_scale_of_all = model->ideal_scale_of_all;
    set_pairs(fluid, model->ops->name, arena);
    set_parts(fluid, arena);
    set_largest_deltas(fluid, model, arena, lack);
    set_limits(fluid);
    return &fluid->head;
}

/* ---- at one temperature ------------------------------------------------------------------------------------------ */

/* Arrays of struct multi_fluid_work, in the order in which they are laid out. */
enum { VECTORS = 7, PART_VECTORS = 4, MATRICES = 3 };

size_t multi_fluid_at_t_size(const struct fluid *head)
{
    const struct multi_fluid *fluid = (const struct multi_fluid *)(const void *)head;
    const size_t count = head->count, parts = count + fluid->function_count;
    return sizeof(struct multi_fluid_at_t) + sizeof(struct multi_fluid_work) +
           (VECTORS * count + PART_VECTORS * parts + MATRICES * count * count) * sizeof(double) +
           parts_state_size(fluid->parts);
}

static double *lay_out(double **next, size_t count)
{
    double *here = *next;
    *next += count;
    return here;
}

enum answer multi_fluid_set_t(struct fluid_at_t *head)
{
    struct multi_fluid_at_t *at_t = (struct multi_fluid_at_t *)(void *)head;
    const struct multi_fluid *fluid = multi_fluid_of(head);
    const size_t count = head->fluid->count, parts = count + fluid->function_count;
    struct multi_fluid_work *w = (struct multi_fluid_work *)(void *)(at_t + 1);
    double *next = (double *)(void *)(w + 1);
    at_t->work = w;
    w->stage = STAGE_NOTHING;
    double **const vectors[VECTORS] = {&w->n, &w->x, &w->temperature_slope, &w->volume_slope, &w->a, &w->a_d, &w->a_t};
    double **const part_vectors[PART_VECTORS] = {&w->weights, &w->value, &w->d, &w->t};
    double **const matrices[MATRICES] = {&w->mixed, &w->bent_temperature, &w->bent_volume};
    for (size_t k = 0; k < VECTORS; k++) {
        *vectors[k] = lay_out(&next, count);
    }
    for (size_t k = 0; k < PART_VECTORS; k++) {
        *part_vectors[k] = lay_out(&next, parts);
    }
    for (size_t k = 0; k < MATRICES; k++) {
        *matrices[k] = lay_out(&next, count * count);
    }
    w->parts = (struct parts_state *)(void *)next;
    parts_state_place(w->parts, fluid->parts);
    return ANSWER_OK;
}

struct range_note multi_fluid_range(const struct fluid *head, double temperature, double pressure)
{
    const struct multi_fluid *fluid = (const struct multi_fluid *)(const void *)head;
    if (!(temperature >= fluid->smallest_temperature)) {
        return (struct range_note){RANGE_TOO_COLD, fluid->smallest_temperature};
    }
    if (!(temperature <= fluid->largest_temperature)) {
        return (struct range_note){RANGE_TOO_HOT, fluid->largest_temperature};
    }
    if (!(pressure <= fluid->largest_pressure)) {
        return (struct range_note){RANGE_TOO_HIGH_PRESSURE, fluid->largest_pressure};
    }
    return (struct range_note){RANGE_INSIDE, 0.0};
}

const struct reference_spec *multi_fluid_ideal_of(const struct fluid *head, size_t i, double *scale)
{
    const struct multi_fluid *fluid = (const struct multi_fluid *)(const void *)head;
    const struct reference_spec *equation = fluid->equation[i];
    *scale = fluid->ideal_scale_of_all > 0.0 ? fluid->ideal_scale_of_all : equation->gas_constant / head->gas_constant;
    return equation;
}

enum answer multi_fluid_reducing(const struct fluid *head, size_t i, size_t j, struct reducing_parameter *out)
{
    const struct multi_fluid *fluid = (const struct multi_fluid *)(const void *)head;
    for (size_t k = 0; k < fluid->pair_count; k++) {
        const struct multi_fluid_pair *pair = &fluid->pairs[k];
        if ((pair->i != i || pair->j != j) && (pair->i != j || pair->j != i)) {
            continue;
        }
        const struct reducing_pair *given = pair->given;
        if (given == NULL) {
            *out = (struct reducing_parameter){PAIR_FROM_NOTHING, 1.0, 1.0, 1.0, 1.0, 0.0, NULL};
            return ANSWER_OK;
        }
        const bool is_turned = given->first != i;
        const bool departs = given->departure != NULL && fabs(given->weight) > 0.0;
        *out = (struct reducing_parameter){
            .origin = given->origin,
            .beta_T = is_turned ? 1.0 / given->beta_T : given->beta_T,
            .gamma_T = given->gamma_T,
            .beta_V = is_turned ? 1.0 / given->beta_V : given->beta_V,
            .gamma_V = given->gamma_V,
            .weight = departs ? given->weight : 0.0,
            .departure = departs ? given->departure->name : NULL,
        };
        return ANSWER_OK;
    }
    return ANSWER_CANNOT;
}
