#include "filling/mixture_internal.h"

#include "equilibrium/boundary.h"
#include "equilibrium/mixture_vessel.h"

#include <math.h>
#include <string.h>

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

/* What every thread needs for itself. */
static void create_own_memory(struct mixture_work *work, size_t kept_count, struct arena *arena)
{
    work->ws = equilibrium_workspace_create(work->count, arena);
    work->split = split_create(work->count, arena);
    work->vessel = mixture_vessel_create(work->count, arena);
    work->phase = phase_create(work->count, arena);
    work->kept_count = kept_count;
    work->kept = arena_alloc(arena, kept_count, sizeof *work->kept);
    for (size_t i = 0; i < MOST_EDGES; i++) {
        work->list.items[i].other = arena_alloc(arena, work->count, sizeof(double));
    }
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
        .alone = alone,
        .arena = arena,
    };
    create_own_memory(work, KEPT_TEMPERATURES, arena);
    return work;
}

/* ---- threads ----------------------------------------------------------------------------------------------------- */

struct mixture_work *mixture_work_for_thread(const struct mixture_work *work, struct arena *arena)
{
    struct mixture_work *own = arena_alloc(arena, 1, sizeof *own);
    *own = (struct mixture_work){.count = work->count, .molar_masses = work->molar_masses, .is_traced = true};
    create_own_memory(own, KEPT_BY_THREADS, arena);
    own->points = work->points == NULL ? NULL : boundary_list_create(work->count, arena);
    return own;
}

static void forget(struct mixture_work *work)
{
    work->has_vessel = false;
    work->list_temperature = 0.0;
    for (size_t i = 0; i < work->kept_count; i++) {
        work->kept[i].temperature = 0.0;
    }
}

struct method_run method_run_for_thread(const struct method_run *method, struct arena *arena)
{
    struct method_run own = *method;
    own.at_t = fluid_at_t_create(method->fluid, arena);
    own.mixture = method->mixture == NULL ? NULL : mixture_work_for_thread(method->mixture, arena);
    return own;
}

void method_run_begin_again(struct method_run *own, const struct method_run *method)
{
    if (own->mixture != NULL) {
        forget(own->mixture);
        own->mixture->envelope = method->mixture->envelope;
        own->mixture->is_incomplete = method->mixture->is_incomplete;
    }
}

void method_run_change_mixture(struct method_run *own)
{
    if (own->mixture != NULL) {
        forget(own->mixture);
        own->mixture->is_traced = true; /* the envelope of another composition says nothing of this one */
        own->mixture->envelope = NULL;
    }
}

bool method_run_gave_up_envelope(const struct method_run *own, const struct method_run *method)
{
    return own->mixture != NULL && own->mixture->is_incomplete && !method->mixture->is_incomplete;
}

void method_run_trace_envelope(struct method_run *method)
{
    if (method->mixture != NULL) {
        mixture_envelope(method);
    }
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

/* ln of volume: nearer to an edge than this, the phases of a vessel say nothing against it. */
#define AT_AN_EDGE 1e-6

/* Whether the vessel's phases, which are proved, are not those that the edges say. With more than two edges there may
 * be one phase between them. */
static bool contradicts(const struct phase_edges *edges, double molar_volume, size_t phase_count)
{
    if (!edges->is_known) {
        return false;
    }
    const double above_low = edges->has_low ? log(edges->low_volume / molar_volume) : -1.0;
    const double below_high = edges->has_high ? log(molar_volume / edges->high_volume) : 1.0;
    if (phase_count > 1) {
        return above_low < -AT_AN_EDGE || below_high < -AT_AN_EDGE;
    }
    return edges->edge_count <= 2 && above_low > AT_AN_EDGE && below_high > AT_AN_EDGE;
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
    if (with_edges && contradicts(&out->edges, molar_volume, split->phase_count)) {
        mixture_distrust_edges(method);
        mixture_edges(method, &out->edges);
    }
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

enum answer mixture_free_volume_alone(struct method_run *method, double pressure, double *molar_volume)
{
    const struct split *split;
    const enum answer answer = mixture_split(method, pressure, &split);
    *molar_volume = answer == ANSWER_OK ? split_volume(split) : 0.0;
    return answer;
}

enum answer mixture_free_volume(struct method_run *method, double pressure, double *molar_volume, bool *holds_liquid)
{
    const struct mixture_work *work = method->mixture;
    const enum answer answer = mixture_free_volume_alone(method, pressure, molar_volume);
    if (answer != ANSWER_OK) {
        return answer;
    }
    struct phase_edges edges = {.is_known = false};
    if (work->split->phase_count == 1) {
        mixture_edges(method, &edges);
    }
    *holds_liquid = work->split->phase_count > 1 || (edges.high_is_bubble && *molar_volume <= edges.high_volume);
    return ANSWER_OK;
}
