/* Where a mixture stops being one phase: by its envelope where the stability test agrees with it, else by trying
 * densities upwards. */
#include "filling/mixture_internal.h"

#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "equilibrium/split.h"
#include "equilibrium/stability.h"
#include "filling/search.h"

#include <math.h>
#include <string.h>

/* ---- where one phase ends ---------------------------------------------------------------------------------------- */

/* Densities are tried upwards from that of a gas at this pressure, each by this factor above the one before. What is
 * unstable there already has its dew point below. */
#define THINNEST_PRESSURE 1.0 /* Pa */
#define DENSITY_FACTOR    1.12
/* Pa; far above any vessel's pressure, where looking for edges ends. */
#define HIGHEST_PRESSURE 1e9
/* Parts of the densest state that the trials end at. */
#define SHORT_OF_DENSEST 0.9995
#define EDGE_TOLERANCE   1e-11 /* relative, of the molar volume */
/* A dew point below the thinnest pressure is estimated, and looked for within these parts of its volume: where the
 * whole is as good as ideal there, and where it is not quite. */
#define AT_ESTIMATE     1e-8
#define BESIDE_ESTIMATE 0.1
/* The state tried is the stable root of its pressure when their volumes agree to this part. */
#define SAME_VOLUME 1e-7

struct edge_search {
    struct method_run *method;
    struct stability found; /* of the last state tried */
    double pressure;
    bool takes_failure_for_unstable; /* closing in: what cannot be said counts to the side of the second phase */
};

static enum answer side_at(struct edge_search *search, double molar_volume, double *side)
{
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

/* Infinite where the fluid as one phase of that molar volume is stable, else minus infinity. ANSWER_NO_SUCH_ROOT beyond
 * the highest pressure. Next to a critical point a trial phase may not converge: a state a hair beside it then speaks
 * for this one. */
static enum answer stable_side(void *context, double molar_volume, double *side)
{
    static const double nudges[] = {0.0, 1e-9, -1e-9, 1e-7, -1e-7, 1e-5, -1e-5};
    struct edge_search *search = context;
    enum answer answer = ANSWER_FAILED;
    for (size_t i = 0; answer == ANSWER_FAILED && i < sizeof nudges / sizeof *nudges; i++) {
        answer = side_at(search, molar_volume * (1.0 + nudges[i]), side);
    }
    if (answer == ANSWER_FAILED && search->takes_failure_for_unstable) {
        *side = -(double)INFINITY;
        search->found.has_incipient = false;
        return ANSWER_OK;
    }
    return answer;
}

/* Closes in on a change of side between two volumes; the edge is the end that is stable, its other phase the one that
 * forms on the further side. */
static enum answer close_in(struct edge_search *search, double stable, double unstable, struct phase_edge *edge)
{
    const size_t bytes = search->method->mixture->count * sizeof *edge->other;
    const struct search_function function = {stable_side, search};
    struct search_bracket bracket = {stable, (double)INFINITY, unstable, -(double)INFINITY};
    search->takes_failure_for_unstable = true;
    enum answer answer = search_root(&function, 0.0, EDGE_TOLERANCE, &bracket);
    double side;
    if (answer == ANSWER_OK) {
        answer = stable_side(search, bracket.b, &side);
    }
    /* Where no other phase is caught the two are about to be one. */
    const bool has_other = answer == ANSWER_OK && search->found.has_incipient;
    memcpy(edge->other, has_other ? search->found.incipient : search->method->z, bytes);
    edge->other_volume = has_other ? search->found.incipient_volume : bracket.b;
    edge->opens = unstable < stable;
    edge->other_is_lighter = edge->other_volume > bracket.b;
    if (answer == ANSWER_OK) {
        answer = stable_side(search, bracket.a, &side);
    }
    edge->molar_volume = bracket.a;
    edge->pressure = search->pressure;
    search->takes_failure_for_unstable = false;
    return answer;
}

static double thinnest_molar_volume(const struct method_run *method)
{
    return method->fluid->gas_constant * method->at_t->temperature / THINNEST_PRESSURE;
}

/* Closes in on a dew point estimated to be at that molar volume, if states so near to it, tested, lie on both sides. */
static bool close_in_on_thin_dew(struct edge_search *search, double estimate, double nearness, double thinnest,
                                 struct phase_edge *edge)
{
    const double thin = estimate * (1.0 + nearness), dense = fmax(estimate / (1.0 + nearness), thinnest);
    double thin_side, dense_side;
    return thin > dense && isfinite(thin) && stable_side(search, thin, &thin_side) == ANSWER_OK && thin_side > 0.0 &&
           stable_side(search, dense, &dense_side) == ANSWER_OK && dense_side < 0.0 &&
           close_in(search, thin, dense, edge) == ANSWER_OK;
}

/* The dew point of a fluid that is unstable at the thinnest pressure. As thin as that the whole is an ideal gas, and
 * the fugacities in a liquid do not depend on pressure: the smallest distance changes as -ln p, and is zero at p
 * exp(tpd). Only states on both sides of that, tested, make it an edge; else all that is known is that the start is
 * unstable. */
static void find_thin_dew(struct edge_search *search, double thinnest, struct edge_list *list)
{
    struct method_run *method = search->method;
    struct stability found;
    list->is_unstable_at_start = true;
    if (stability_at_tp(method->at_t, THINNEST_PRESSURE, method->z, STABILITY_REPORT, method->mixture->ws, &found) !=
            ANSWER_OK ||
        !found.has_incipient) {
        return;
    }
    const double estimate = thinnest * exp(-found.smallest_tpd);
    if (close_in_on_thin_dew(search, estimate, AT_ESTIMATE, thinnest, &list->items[0]) ||
        close_in_on_thin_dew(search, estimate, BESIDE_ESTIMATE, thinnest, &list->items[0])) {
        list->count = 1;
        list->is_unstable_at_start = false;
    }
}

/* Without an envelope to go by: densities are tried upwards, and what is two-phase over less than a step is missed. */
static enum answer scan_edges(struct method_run *method, struct edge_list *list)
{
    struct edge_search search = {.method = method};
    const double smallest = smallest_molar_volume(method) / SHORT_OF_DENSEST;
    double before = thinnest_molar_volume(method), side_before;
    list->count = 0;
    list->is_unstable_at_start = false;
    enum answer answer = stable_side(&search, before, &side_before);
    if (answer == ANSWER_OK && side_before < 0.0) {
        find_thin_dew(&search, before, list);
    }
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

/* The stable points of the envelope, lowest pressure first. They follow what the list holds. */
static void append_points(const struct mixture_work *work, const struct boundary_list *points, struct edge_list *list)
{
    for (size_t i = 0; i < points->count && list->count < MOST_EDGES; i++) {
        const struct boundary_point *point = points->point[i];
        if (!point->is_stable) {
            continue;
        }
        struct phase_edge *edge = &list->items[list->count];
        edge->opens = point->opens;
        edge->other_is_lighter = point->kind == BOUNDARY_BUBBLE;
        edge->pressure = point->pressure;
        edge->molar_volume = point->feed_volume;
        edge->other_volume = point->incipient_volume;
        memcpy(edge->other, point->incipient, work->count * sizeof *edge->other);
        list->count++;
    }
}

/* The envelope of a heavy fluid in the cold begins with a bubble point, as its dew point lies at no pressure to speak
 * of: that one is found by itself. */
static void edges_of_points(struct method_run *method, const struct boundary_list *points, struct edge_list *list)
{
    struct edge_search search = {.method = method};
    const double thinnest = thinnest_molar_volume(method);
    size_t first = 0;
    double side;
    while (first < points->count && !points->point[first]->is_stable) {
        first++;
    }
    if (first < points->count && points->point[first]->kind == BOUNDARY_BUBBLE &&
        stable_side(&search, thinnest, &side) == ANSWER_OK && side < 0.0) {
        find_thin_dew(&search, thinnest, list);
        list->is_unstable_at_start = false; /* if no dew point was found, the list will not agree with stability */
    }
    append_points(method->mixture, points, list);
}

/* Whether one phase ends at the first edge, begins again at the second, and so on. Each edge, a stable point, says by
 * itself on which side of it the second phase is; of each stretch between two a state is tested. */
static bool agrees_with_stability(struct method_run *method, const struct edge_list *list)
{
    struct edge_search search = {.method = method};
    for (size_t i = 0; i < list->count; i++) {
        const double denser = list->items[i].molar_volume;
        double side;
        if (list->items[i].opens != (i % 2 == 0)) {
            return false;
        }
        if (i == 0) {
            continue;
        }
        const double thinner = list->items[i - 1].molar_volume;
        if (!(thinner > denser) ||
            (stable_side(&search, sqrt(thinner * denser), &side) == ANSWER_OK && (side > 0.0) != (i % 2 == 0))) {
            return false;
        }
    }
    return true;
}

static enum answer points_of_envelope(struct method_run *method, bool is_pressure, double value)
{
    struct mixture_work *work = method->mixture;
    return is_pressure
               ? boundary_at_p(method->at_t, method->fluid, value, method->z, work->envelope, work->ws, work->points)
               : boundary_at_t(method->at_t, method->fluid, value, method->z, work->envelope, work->ws, work->points);
}

static bool is_above_envelope(const struct mixture_work *work, double temperature)
{
    return work->envelope->has_cricondentherm && temperature > work->envelope->cricondentherm->temperature;
}

/* ---- whether the envelope is the whole boundary ------------------------------------------------------------------ */

/* Temperatures (K) and densities at which it is held against the stability test when it has been traced. */
#define CHECKED_FROM              160.0
#define CHECKED_TO                420.0
#define CHECKED_STEP              20.0
#define CHECKED_FACTOR            1.8
#define CHECKED_THINNEST_PRESSURE 1e3 /* Pa */
/* At molar volumes above `densest`. What the stability test cannot say counts for nothing. */
static bool is_stable_along_isotherm(struct method_run *method, double densest)
{
    struct edge_search search = {.method = method};
    const double smallest = fmax(densest, smallest_molar_volume(method) / SHORT_OF_DENSEST);
    const double RT = method->fluid->gas_constant * method->at_t->temperature;
    for (double v = RT / CHECKED_THINNEST_PRESSURE; v > smallest; v /= CHECKED_FACTOR) {
        double side;
        if (stable_side(&search, v, &side) == ANSWER_OK && side < 0.0) {
            return false;
        }
    }
    return true;
}

/* Below the cricondentherm each temperature's edges are held against stability on their own; above it the envelope says
 * that there are none, and that is what is checked here. */
static bool is_whole(struct method_run *method)
{
    struct mixture_work *work = method->mixture;
    for (double T = CHECKED_FROM; T <= CHECKED_TO; T += CHECKED_STEP) {
        if (is_above_envelope(work, T) && fluid_set_t(method->at_t, method->fluid, T) == ANSWER_OK &&
            !is_stable_along_isotherm(method, 0.0)) {
            return false;
        }
    }
    return true;
}

/* ---- the envelope ------------------------------------------------------------------------------------------------ */

void mixture_give_up_envelope(struct method_run *method)
{
    struct mixture_work *work = method->mixture;
    work->envelope = NULL;
    work->is_incomplete = true;
    work->list_temperature = 0.0;
    for (size_t i = 0; i < work->kept_count; i++) {
        work->kept[i].temperature = 0.0;
    }
}

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
        if (!is_whole(method)) {
            mixture_give_up_envelope(method);
        }
    }
    return work->envelope;
}

bool mixture_envelope_is_incomplete(struct method_run *method)
{
    mixture_envelope(method);
    return method->mixture->is_incomplete;
}

/* Largest difference of ln f between the whole at an edge and its other phase. */
static enum answer edge_residual(struct method_run *method, const struct phase_edge *edge, double *residual)
{
    struct mixture_work *work = method->mixture;
    struct phase *whole = work->phase, *other = work->ws->trial;
    enum answer answer = phase_tv(method->at_t, edge->molar_volume, method->z, PHASE_LN_F, whole);
    if (answer == ANSWER_OK) {
        answer = phase_tv(method->at_t, edge->other_volume, edge->other, PHASE_LN_F, other);
    }
    *residual = 0.0;
    for (size_t i = 0; answer == ANSWER_OK && i < work->count; i++) {
        if (method->z[i] > 0.0 && edge->other[i] > 0.0) {
            *residual = fmax(*residual, fabs(whole->ln_f_over_x[i] + log(method->z[i]) - other->ln_f_over_x[i] -
                                             log(edge->other[i])));
        }
    }
    return answer;
}

/* Edges found without the envelope, told as its points. */
static enum answer points_of_edges(struct method_run *method, double temperature)
{
    struct mixture_work *work = method->mixture;
    const struct edge_list *list;
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = mixture_edge_list(method, &list);
    }
    work->points->count = 0;
    for (size_t i = 0; answer == ANSWER_OK && i < list->count; i++) {
        const struct phase_edge *edge = &list->items[i];
        struct boundary_point *point = work->points->point[work->points->count++];
        point->kind = edge->other_is_lighter ? BOUNDARY_BUBBLE : BOUNDARY_DEW;
        point->temperature = temperature;
        point->pressure = edge->pressure;
        point->feed_volume = edge->molar_volume;
        point->incipient_volume = edge->other_volume;
        memcpy(point->incipient, edge->other, work->count * sizeof *edge->other);
        point->is_stable = true;
        point->smallest_tpd = 0.0;
        answer = edge_residual(method, edge, &point->residual);
    }
    return answer;
}

/* ---- points at a pressure, without the envelope ------------------------------------------------------------------ */

/* Temperatures (K) that are tried downwards; what is two-phase over less than a step is missed. */
#define TRIED_FROM        480.0
#define TRIED_TO          120.0
#define TRIED_STEP        4.0
#define POINT_TOLERANCE_K 1e-9

struct temperature_search {
    struct method_run *method;
    double pressure;
};

/* Infinite where the fluid is one phase, else minus infinity. */
static enum answer one_phase_at(void *context, double temperature, double *side)
{
    const struct temperature_search *search = context;
    const struct split *split;
    enum answer answer = fluid_set_t(search->method->at_t, search->method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = mixture_split(search->method, search->pressure, &split);
    }
    if (answer == ANSWER_OK) {
        *side = split->phase_count == 1 ? (double)INFINITY : -(double)INFINITY;
    }
    return answer;
}

static size_t least_phase(const struct split *split)
{
    size_t least = 0;
    for (size_t k = 1; k < split->phase_count; k++) {
        least = split->phase[k].fraction < split->phase[least].fraction ? k : least;
    }
    return least;
}

/* The phase that is about to vanish on the two-phase side of the bracket, beside the whole on the other. */
static enum answer add_point_of_split(struct temperature_search *search, const struct search_bracket *bracket)
{
    struct mixture_work *work = search->method->mixture;
    struct boundary_point *point = work->points->point[work->points->count];
    const double one_phase = bracket->value_a > 0.0 ? bracket->a : bracket->b;
    const double two_phase = bracket->value_a > 0.0 ? bracket->b : bracket->a;
    double side;
    enum answer answer = one_phase_at(search, one_phase, &side);
    point->feed_volume = work->split->phase[0].molar_volume;
    if (answer == ANSWER_OK) {
        answer = one_phase_at(search, two_phase, &side);
    }
    if (answer != ANSWER_OK || work->split->phase_count < 2 || work->points->count + 1 == BOUNDARY_MOST) {
        return answer;
    }
    const struct split_phase *least = &work->split->phase[least_phase(work->split)];
    point->temperature = one_phase;
    point->pressure = search->pressure;
    point->incipient_volume = least->molar_volume;
    memcpy(point->incipient, least->x, work->count * sizeof *least->x);
    point->kind = point->incipient_volume > point->feed_volume ? BOUNDARY_BUBBLE : BOUNDARY_DEW;
    point->residual = work->split->residual;
    point->smallest_tpd = work->split->smallest_tpd;
    point->is_stable = true;
    work->points->count++;
    return answer;
}

/* Downwards in temperature; the points are told upwards. */
static enum answer points_of_splits(struct method_run *method, double pressure)
{
    struct temperature_search search = {method, pressure};
    const struct search_function function = {one_phase_at, &search};
    struct boundary_list *points = method->mixture->points;
    double before = TRIED_FROM, side_before;
    points->count = 0;
    enum answer answer = one_phase_at(&search, before, &side_before);
    for (double T = before - TRIED_STEP; answer == ANSWER_OK && T >= TRIED_TO; T -= TRIED_STEP) {
        double side;
        answer = one_phase_at(&search, T, &side);
        if (answer == ANSWER_OK && (side < 0.0) != (side_before < 0.0)) {
            struct search_bracket bracket = {before, side_before, T, side};
            answer = search_root(&function, POINT_TOLERANCE_K, 0.0, &bracket);
            answer = answer == ANSWER_OK ? add_point_of_split(&search, &bracket) : answer;
        }
        before = T;
        side_before = side;
    }
    for (size_t i = 0; i < points->count / 2; i++) {
        struct boundary_point *swapped = points->point[i];
        points->point[i] = points->point[points->count - 1 - i];
        points->point[points->count - 1 - i] = swapped;
    }
    return answer;
}

enum answer mixture_points(struct method_run *method, bool is_pressure, double value, const struct boundary_list **out)
{
    const struct envelope *envelope = mixture_envelope(method);
    *out = method->mixture->points;
    if (method->mixture->points == NULL) {
        return ANSWER_CANNOT;
    }
    if (envelope != NULL) {
        const enum answer answer = points_of_envelope(method, is_pressure, value);
        struct mixture_work *work = method->mixture;
        if (answer != ANSWER_OK) {
            return answer;
        }
        return is_pressure
                   ? boundary_complete_at_p(method->at_t, method->fluid, value, method->z, work->ws, work->points)
                   : boundary_complete_at_t(method->at_t, method->fluid, value, method->z, work->ws, work->points);
    }
    method->mixture->points->is_complete = true;
    method->mixture->points->opens_below = false;
    return is_pressure ? points_of_splits(method, value) : points_of_edges(method, value);
}

enum answer mixture_critical_point(struct method_run *method, size_t index, struct mixture_critical *out)
{
    const struct envelope *envelope = mixture_envelope(method);
    return mixture_critical_near(method->at_t, method->fluid, method->z, &envelope->critical[index],
                                 method->mixture->ws, out);
}

/* ---- edges at a temperature -------------------------------------------------------------------------------------- */

static enum answer find_edges(struct method_run *method, struct edge_list *list)
{
    const double temperature = method->at_t->temperature;
    const struct envelope *envelope = mixture_envelope(method);
    struct mixture_work *work = method->mixture;
    list->count = 0;
    list->is_unstable_at_start = false;
    const bool has_points = envelope != NULL && !is_above_envelope(work, temperature) &&
                            points_of_envelope(method, false, temperature) == ANSWER_OK;
    const enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer != ANSWER_OK || (envelope != NULL && is_above_envelope(work, temperature))) {
        return answer;
    }
    if (has_points && work->points->count > 0) {
        edges_of_points(method, work->points, list);
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
    if (answer == ANSWER_OK && list->is_unstable_at_start) {
        edges->edge_count = 1;
        edges->has_low = true;
        edges->low_volume = (double)INFINITY; /* and the pressure zero: no state is known to be thin enough */
    }
    if (answer != ANSWER_OK || list->count == 0) {
        return answer;
    }
    const struct phase_edge *low = &list->items[0], *high = &list->items[list->count - 1];
    edges->edge_count += list->count;
    if (!list->is_unstable_at_start) {
        edges->has_low = low->opens;
        edges->low_volume = low->molar_volume;
        edges->low_pressure = low->pressure;
    }
    edges->has_high = !high->opens;
    edges->high_volume = high->molar_volume;
    edges->high_pressure = high->pressure;
    edges->high_is_bubble = edges->has_high && high->other_is_lighter;
    return answer;
}

static struct kept_edges *kept_at(const struct mixture_work *work, double temperature)
{
    return &work->kept[(size_t)(temperature * 1e3) % work->kept_count];
}

enum answer mixture_edges(struct method_run *method, struct phase_edges *out)
{
    const double temperature = method->at_t->temperature;
    struct kept_edges *kept = kept_at(method->mixture, temperature);
    if (!(fabs(kept->temperature - temperature) <= 0.0)) {
        kept->answer = lowest_and_highest(method, &kept->edges);
        kept->temperature = temperature;
        kept->is_proved = false;
    }
    *out = kept->edges;
    return kept->answer;
}

/* ---- whether nothing condenses below the lowest edge ------------------------------------------------------------- */

/* Relative: thinner than the lowest edge by this a state lies clearly outside of it. */
#define CLEAR_OF_EDGE 0.01

/* Without an edge the state asked about is tested too. */
static bool is_stable_below(struct method_run *method, const struct phase_edges *edges, double molar_volume,
                            bool is_proved)
{
    struct edge_search search = {.method = method};
    double side = (double)INFINITY;
    if (!edges->has_low && stable_side(&search, molar_volume, &side) == ANSWER_OK && side < 0.0) {
        return false;
    }
    return is_proved ||
           is_stable_along_isotherm(method, edges->has_low ? (1.0 + CLEAR_OF_EDGE) * edges->low_volume : 0.0);
}

enum answer mixture_prove_edges(struct method_run *method, double molar_volume)
{
    const double temperature = method->at_t->temperature;
    struct phase_edges edges;
    enum answer answer = mixture_edges(method, &edges);
    struct kept_edges *kept = kept_at(method->mixture, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!is_stable_below(method, &edges, molar_volume, kept->is_proved)) {
        mixture_distrust_edges(method);
        answer = fluid_set_t(method->at_t, method->fluid, temperature);
        answer = answer == ANSWER_OK ? mixture_edges(method, &edges) : answer;
        if (answer == ANSWER_OK && !is_stable_below(method, &edges, molar_volume, false)) {
            answer = ANSWER_FAILED;
        }
    }
    kept->is_proved = answer == ANSWER_OK;
    return answer;
}

void mixture_distrust_edges(struct method_run *method)
{
    struct mixture_work *work = method->mixture;
    if (work->envelope != NULL && is_above_envelope(work, method->at_t->temperature)) {
        mixture_give_up_envelope(method);
        return;
    }
    work->list_answer = scan_edges(method, &work->list);
    work->list_temperature = method->at_t->temperature;
    kept_at(work, work->list_temperature)->temperature = 0.0;
}
