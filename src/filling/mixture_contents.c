#include "filling/mixture_contents.h"

#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "equilibrium/mixture_vessel.h"
#include "filling/search.h"

#include <math.h>
#include <string.h>

/* Searches over a range ask for the same temperatures again and again. */
enum { KEPT_TEMPERATURES = 1024 };

struct kept_edges {
    double temperature; /* K; 0: none yet */
    enum answer answer;
    struct phase_edges edges;
};

struct mixture_work {
    size_t count;
    const double *molar_masses; /* [count], kg/mol */
    struct equilibrium_workspace *ws;
    struct split *split;
    struct mixture_vessel *vessel;
    bool has_vessel;         /* it holds an answer, from which the next search may start */
    struct phase *phase;     /* for the feed by itself */
    double list_temperature; /* K, of the list below; 0: none yet */
    enum answer list_answer;
    struct edge_list list;
    struct kept_edges *kept;  /* [KEPT_TEMPERATURES] */
    struct method_run *alone; /* [count], each component by itself */
    struct arena *arena;      /* for the envelope, which not every case asks for */
    bool is_traced;
    struct envelope *envelope; /* NULL: there is none */
    struct boundary_list *points;
};

/* Component i as a fluid of its own. */
static struct method_run create_alone(const struct case_fluid *fluid, size_t i, const char *method, struct arena *arena)
{
    struct case_fluid *alone = arena_alloc(arena, 1, sizeof *alone);
    double *fraction = arena_alloc(arena, 1, sizeof *fraction);
    *fraction = 1.0;
    *alone = (struct case_fluid){
        .name = fluid->components[i]->name,
        .at = fluid->at,
        .count = 1,
        .components = &fluid->components[i],
        .fractions = fraction,
        .molar_mass = fluid->components[i]->molar_mass.value,
        .spec = {.count = 1, .pure = &fluid->spec.pure[i]},
    };
    return method_run_create(alone, method, false, arena);
}

struct mixture_work *mixture_work_create(const struct case_fluid *fluid, const char *method, struct arena *arena)
{
    struct mixture_work *work = arena_alloc(arena, 1, sizeof *work);
    double *molar_masses = arena_alloc(arena, fluid->count, sizeof *molar_masses);
    struct method_run *alone = arena_alloc(arena, fluid->count, sizeof *alone);
    for (size_t i = 0; i < fluid->count; i++) {
        molar_masses[i] = fluid->components[i]->molar_mass.value;
        alone[i] = create_alone(fluid, i, method, arena);
    }
    *work = (struct mixture_work){
        .count = fluid->count,
        .molar_masses = molar_masses,
        .ws = equilibrium_workspace_create(fluid->count, arena),
        .split = split_create(fluid->count, arena),
        .vessel = mixture_vessel_create(fluid->count, arena),
        .phase = phase_create(fluid->count, arena),
        .kept = arena_alloc(arena, KEPT_TEMPERATURES, sizeof(struct kept_edges)),
        .alone = alone,
        .arena = arena,
    };
    for (size_t i = 0; i < MOST_EDGES; i++) {
        work->list.items[i].other = arena_alloc(arena, fluid->count, sizeof(double));
    }
    return work;
}

struct method_run *mixture_alone(struct method_run *method, size_t i)
{
    return &method->mixture->alone[i];
}

enum answer mixture_split(struct method_run *method, double pressure, const struct split **out)
{
    struct mixture_work *work = method->mixture;
    *out = work->split;
    return split_at_tp(method->at_t, pressure, method->z, work->ws, work->split);
}

double mixture_molar_mass(const struct method_run *method, const double x[])
{
    double sum = 0.0;
    for (size_t i = 0; i < method->mixture->count; i++) {
        sum += x[i] * method->mixture->molar_masses[i];
    }
    return sum;
}

/* ---- the envelope ------------------------------------------------------------------------------------------------ */

const struct envelope *mixture_envelope(struct method_run *method)
{
    struct mixture_work *work = method->mixture;
    if (work->is_traced || (method->fluid->ops->capabilities & CAN_LIQUID) == 0) {
        return work->envelope;
    }
    struct envelope *envelope = envelope_create(work->count, work->arena);
    work->points = boundary_list_create(work->count, work->arena);
    work->is_traced = true;
    if (envelope_trace(method->at_t, method->fluid, method->z, work->ws, envelope) == ANSWER_OK) {
        work->envelope = envelope;
    }
    return work->envelope;
}

enum answer mixture_points(struct method_run *method, bool is_pressure, double value, const struct boundary_list **out)
{
    struct mixture_work *work = method->mixture;
    const struct envelope *envelope = mixture_envelope(method);
    if (envelope == NULL) {
        return ANSWER_CANNOT;
    }
    *out = work->points;
    return is_pressure ? boundary_at_p(method->at_t, method->fluid, value, method->z, envelope, work->ws, work->points)
                       : boundary_at_t(method->at_t, method->fluid, value, method->z, envelope, work->ws, work->points);
}

enum answer mixture_critical_point(struct method_run *method, size_t index, struct mixture_critical *out)
{
    const struct envelope *envelope = mixture_envelope(method);
    return mixture_critical_near(method->at_t, method->fluid, method->z, &envelope->critical[index],
                                 method->mixture->ws, out);
}

/* ---- where one phase ends ---------------------------------------------------------------------------------------- */

/* Densities are tried upwards from that of a gas at this pressure, each by this factor above the one before. */
#define THINNEST_PRESSURE 1.0 /* Pa */
#define DENSITY_FACTOR    1.12
/* Pa; far above any vessel's pressure, where looking for edges ends. */
#define HIGHEST_PRESSURE 1e9
/* Parts of the densest state that the trials end at. */
#define SHORT_OF_DENSEST 0.9995
#define EDGE_TOLERANCE   1e-11 /* relative, of the molar volume */
/* Molar volumes by this factor beside an edge lie clearly on one side of it. */
#define BESIDE_EDGE 1.3
/* The state tried is the stable root of its pressure when their volumes agree to this part. */
#define SAME_VOLUME 1e-7

struct edge_search {
    struct method_run *method;
    struct stability found; /* of the last state tried */
    double pressure;
};

/* Infinite where the fluid as one phase of that molar volume is stable, else minus infinity.
 * ANSWER_NO_SUCH_ROOT beyond the highest pressure. */
static enum answer stable_side(void *context, double molar_volume, double *side)
{
    struct edge_search *search = context;
    struct mixture_work *work = search->method->mixture;
    const double *z = search->method->z;
    enum answer answer = phase_tv(search->method->at_t, molar_volume, z, 0, work->phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    search->pressure = work->phase->pressure;
    if (search->pressure > HIGHEST_PRESSURE) {
        return ANSWER_NO_SUCH_ROOT;
    }
    *side = -(double)INFINITY;
    if (!(work->phase->pressure > 0.0) || !(work->phase->dp_dv < 0.0)) {
        search->found.is_stable = false;
        search->found.has_incipient = false;
        return ANSWER_OK;
    }
    answer = stability_at_tp(search->method->at_t, search->pressure, z, STABILITY_DECIDE, work->ws, &search->found);
    if (answer == ANSWER_OK && search->found.is_stable &&
        fabs(work->ws->reference->volume / (work->ws->reference->amount * molar_volume) - 1.0) <= SAME_VOLUME) {
        *side = (double)INFINITY;
    }
    return answer;
}

/* Closes in on a change of side between two volumes; the edge is the end that is stable, its other phase the one that
 * forms on the further side. */
static enum answer close_in(struct edge_search *search, double stable, double unstable, struct phase_edge *edge)
{
    const struct search_function function = {stable_side, search};
    struct search_bracket bracket = {stable, (double)INFINITY, unstable, -(double)INFINITY};
    enum answer answer = search_root(&function, 0.0, EDGE_TOLERANCE, &bracket);
    double side;
    if (answer == ANSWER_OK) {
        answer = stable_side(search, bracket.b, &side);
    }
    edge->other_volume = 0.0;
    if (answer == ANSWER_OK && search->found.has_incipient) {
        memcpy(edge->other, search->found.incipient, search->method->mixture->count * sizeof *edge->other);
        edge->other_volume = search->found.incipient_volume;
    }
    edge->opens = unstable < stable;
    edge->other_is_lighter = edge->other_volume > bracket.b;
    if (answer == ANSWER_OK) {
        answer = stable_side(search, bracket.a, &side);
    }
    edge->molar_volume = bracket.a;
    edge->pressure = search->pressure;
    return answer;
}

/* Without an envelope to go by: densities are tried upwards, and what is two-phase over less than a step is missed. */
static enum answer scan_edges(struct method_run *method, struct edge_list *list)
{
    struct edge_search search = {.method = method};
    const double smallest = smallest_molar_volume(method) / SHORT_OF_DENSEST;
    double before = method->fluid->gas_constant * method->at_t->temperature / THINNEST_PRESSURE, side_before;
    list->count = 0;
    enum answer answer = stable_side(&search, before, &side_before);
    for (double v = before / DENSITY_FACTOR; answer == ANSWER_OK && v > smallest; v /= DENSITY_FACTOR) {
        double side;
        answer = stable_side(&search, v, &side);
        if (answer == ANSWER_OK && (side < 0.0) != (side_before < 0.0) && list->count < MOST_EDGES) {
            struct phase_edge *edge = &list->items[list->count++];
            answer = side < 0.0 ? close_in(&search, before, v, edge) : close_in(&search, v, before, edge);
        }
        before = v;
        side_before = side;
    }
    return answer == ANSWER_NO_SUCH_ROOT ? ANSWER_OK : answer;
}

/* The stable points of the envelope, lowest pressure first: one phase ends at the first, begins again at the second,
 * and so on. */
static void edges_of_points(const struct mixture_work *work, const struct boundary_list *points, struct edge_list *list)
{
    list->count = 0;
    for (size_t i = 0; i < points->count && list->count < MOST_EDGES; i++) {
        const struct boundary_point *point = points->point[i];
        if (!point->is_stable) {
            continue;
        }
        struct phase_edge *edge = &list->items[list->count];
        edge->opens = list->count % 2 == 0;
        edge->other_is_lighter = point->kind == BOUNDARY_BUBBLE;
        edge->pressure = point->pressure;
        edge->molar_volume = point->feed_volume;
        edge->other_volume = point->incipient_volume;
        memcpy(edge->other, point->incipient, work->count * sizeof *edge->other);
        list->count++;
    }
}

/* Whether the fluid is one phase below, between and above the edges just where they say: a state of each stretch is
 * tested. */
static bool agrees_with_stability(struct method_run *method, const struct edge_list *list)
{
    struct edge_search search = {.method = method};
    const double smallest = smallest_molar_volume(method) / SHORT_OF_DENSEST;
    for (size_t i = 0; i <= list->count; i++) {
        const double thinner = i == 0 ? BESIDE_EDGE * list->items[0].molar_volume : list->items[i - 1].molar_volume;
        const double denser =
            i == list->count ? list->items[i - 1].molar_volume / BESIDE_EDGE : list->items[i].molar_volume;
        double side;
        const double middle = sqrt(thinner * denser);
        if (!(thinner > denser)) {
            return false;
        }
        if (middle <= smallest || stable_side(&search, middle, &side) != ANSWER_OK) {
            continue;
        }
        if ((side > 0.0) != (i % 2 == 0)) {
            return false;
        }
    }
    return true;
}

static enum answer find_edges(struct method_run *method, struct edge_list *list)
{
    const double temperature = method->at_t->temperature;
    const struct envelope *envelope = mixture_envelope(method);
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    list->count = 0;
    if (envelope != NULL && envelope->has_cricondentherm && temperature > envelope->cricondentherm->temperature) {
        return ANSWER_OK;
    }
    const struct boundary_list *points;
    const bool has_points =
        envelope != NULL && mixture_points(method, false, temperature, &points) == ANSWER_OK && points->count > 0;
    answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (has_points) {
        edges_of_points(method->mixture, points, list);
        if (list->count > 0 && agrees_with_stability(method, list)) {
            return ANSWER_OK;
        }
    }
    return scan_edges(method, list);
}

enum answer mixture_edge_list(struct method_run *method, const struct edge_list **out)
{
    struct mixture_work *work = method->mixture;
    const double temperature = method->at_t->temperature;
    if (!(fabs(work->list_temperature - temperature) <= 0.0)) {
        work->list_answer =
            (method->fluid->ops->capabilities & CAN_LIQUID) == 0 ? ANSWER_CANNOT : find_edges(method, &work->list);
        work->list_temperature = temperature;
    }
    *out = &work->list;
    return work->list_answer;
}

static enum answer lowest_and_highest(struct method_run *method, struct phase_edges *edges)
{
    const struct edge_list *list;
    const enum answer answer = mixture_edge_list(method, &list);
    *edges = (struct phase_edges){.is_known = answer == ANSWER_OK};
    if (answer != ANSWER_OK || list->count == 0) {
        return answer;
    }
    const struct phase_edge *low = &list->items[0], *high = &list->items[list->count - 1];
    edges->has_low = low->opens;
    edges->low_volume = low->molar_volume;
    edges->low_pressure = low->pressure;
    edges->has_high = !high->opens;
    edges->high_volume = high->molar_volume;
    edges->high_pressure = high->pressure;
    edges->high_is_bubble = edges->has_high && high->other_is_lighter;
    return answer;
}

enum answer mixture_edges(struct method_run *method, struct phase_edges *out)
{
    const double temperature = method->at_t->temperature;
    struct kept_edges *kept = &method->mixture->kept[(size_t)(temperature * 1e3) % KEPT_TEMPERATURES];
    if (!(fabs(kept->temperature - temperature) <= 0.0)) {
        kept->answer = lowest_and_highest(method, &kept->edges);
        kept->temperature = temperature;
    }
    *out = kept->edges;
    return kept->answer;
}

/* ---- the closed vessel ------------------------------------------------------------------------------------------- */

/* A lightest phase of no more than this many times the smallest volume is a liquid as well. */
#define LIQUID_EXPANSION 2.2

static double split_volume(const struct split *split)
{
    double sum = 0.0;
    for (size_t k = 0; k < split->phase_count; k++) {
        sum += split->phase[k].fraction * split->phase[k].molar_volume;
    }
    return sum;
}

enum answer mixture_split_at_volume(struct method_run *method, double molar_volume, const struct split **out)
{
    struct mixture_work *work = method->mixture;
    const struct mixture_vessel *start = work->has_vessel ? work->vessel : NULL;
    const enum answer answer =
        mixture_vessel_at_tv(method->at_t, molar_volume, method->z, start, work->ws, work->vessel);
    work->has_vessel = answer == ANSWER_OK;
    *out = work->vessel->split;
    return answer;
}

bool mixture_is_liquid(const struct method_run *method, const struct split *split, size_t k)
{
    return k > 0 ||
           (split->phase_count > 1 && split->phase[0].molar_volume < LIQUID_EXPANSION * smallest_molar_volume(method));
}

static void put_phases(const struct method_run *method, const struct split *split, double amount, double volume,
                       struct contents *out)
{
    double liquid_volume = 0.0, liquid_mass = 0.0;
    out->phase_count = split->phase_count;
    for (size_t k = 0; k < split->phase_count; k++) {
        const struct split_phase *from = &split->phase[k];
        struct contents_phase *phase = &out->phases[k];
        *phase = (struct contents_phase){.is_liquid = mixture_is_liquid(method, split, k),
                                         .amount = from->fraction * amount,
                                         .molar_volume = from->molar_volume,
                                         .molar_mass = mixture_molar_mass(method, from->x),
                                         .x = from->x};
        liquid_volume += phase->is_liquid ? phase->amount * phase->molar_volume : 0.0;
        liquid_mass += phase->is_liquid ? phase->amount * phase->molar_mass : 0.0;
    }
    out->liquid_fraction = fmin(liquid_volume / volume, 1.0);
    out->liquid_density = liquid_volume > 0.0 ? liquid_mass / liquid_volume : 0.0;
}

/* One phase is named after the edge it lies beyond. */
static void name_one_phase(const struct method_run *method, struct contents *out)
{
    const struct phase_edges *edges = &out->edges;
    struct contents_phase *phase = &out->phases[0];
    out->state = VESSEL_SUPERCRITICAL;
    if (edges->has_low && out->molar_volume >= edges->low_volume) {
        out->state = VESSEL_VAPOUR;
    } else if (edges->high_is_bubble && out->molar_volume < edges->low_volume) {
        out->state = VESSEL_LIQUID_FULL;
        phase->is_liquid = true;
        out->liquid_fraction = 1.0;
        out->liquid_density = method->molar_mass / out->molar_volume;
    }
}

enum answer mixture_contents(struct method_run *method, double volume, double amount, bool with_edges,
                             struct contents *out)
{
    const double molar_volume = volume / amount;
    const struct split *split;
    *out = (struct contents){
        .state = VESSEL_SUPERCRITICAL, .temperature = method->at_t->temperature, .molar_volume = molar_volume};
    if (with_edges) {
        mixture_edges(method, &out->edges);
    }
    const enum answer answer = mixture_split_at_volume(method, molar_volume, &split);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->pressure = split->pressure;
    put_phases(method, split, amount, volume, out);
    if (out->phase_count > 1) {
        out->state = VESSEL_TWO_PHASE;
    } else if ((method->fluid->ops->capabilities & CAN_LIQUID) == 0) {
        out->state = VESSEL_GAS;
    } else {
        name_one_phase(method, out);
    }
    return ANSWER_OK;
}

enum answer mixture_free_volume(struct method_run *method, double pressure, double *molar_volume, bool *holds_liquid)
{
    struct mixture_work *work = method->mixture;
    const enum answer answer = split_at_tp(method->at_t, pressure, method->z, work->ws, work->split);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *molar_volume = split_volume(work->split);
    struct phase_edges edges = {.is_known = false};
    if (work->split->phase_count == 1) {
        mixture_edges(method, &edges);
    }
    *holds_liquid = work->split->phase_count > 1 || (edges.high_is_bubble && *molar_volume <= edges.high_volume);
    return ANSWER_OK;
}
