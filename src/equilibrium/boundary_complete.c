/* What the lines of an envelope miss: every change between stable and unstable along a rising pressure at a
 * temperature, or along a rising temperature at a pressure.
 *
 * A line traced from low pressure can be lost next to a critical point, and it never leads to a second liquid that
 * forms above a metastable bubble point. The stability test of the feed needs no line: where its verdicts on either
 * side of a stretch do not fit the points known inside it, the point that is wanting is closed in on by halving and
 * then solved by Newton's method. What is walked along is called a place below: a pressure, or a temperature.
 */
#include "equilibrium/boundary_internal.h"
#include "equilibrium/stability.h"

#include <math.h>

/* Fewer components than FEW are tested exhaustively from the first; of more, pairs are too many to be tried every time.
 */
enum { MOST_PLACES = 80, FEW = 4, MOST_HALVINGS = 60, HALVINGS_A_NEWTON = 4, MOST_NEWTON = 25 };

/* Tried temperatures go from that part of the highest point's to that, or from this to that one (K) without a point,
 * each a factor from the last. */
#define COLDEST_PART       0.35
#define HOTTEST_PART       1.06
#define COLDEST            70.0
#define HOTTEST            700.0
#define TEMPERATURE_FACTOR 1.04
/* Tried pressures follow each other by these factors; up to DENSE_FROM (Pa) a gas has few surprises. */
#define THIN_FACTOR  10.0
#define DENSE_FACTOR 1.6
#define DENSE_FROM   1e5
/* Tried pressures end at so many times the method's published limit. */
#define BEYOND_RANGE 2.0
/* Each point known is held against the test this far on either side. */
#define BESIDE_POINT 1e-5
/* Two places this near, relative, are one. */
#define SAME_PLACE 1e-8
/* A mole fraction below this is as good as none. */
#define SMALLEST_FRACTION 1e-300

struct completion {
    struct fluid_at_t *at_t;
    const struct fluid *fluid;
    bool is_isobar;
    double pressure; /* Pa, of an isobar */
    const double *z;
    struct equilibrium_workspace *ws;
    struct boundary_list *list;
    enum stability_effort effort;
    struct stability found; /* of the last place tried */
};

enum verdict { VERDICT_STABLE, VERDICT_UNSTABLE, VERDICT_UNKNOWN };

static double place_of(const struct completion *c, const struct boundary_point *point)
{
    return c->is_isobar ? point->temperature : point->pressure;
}

static enum answer test_at(struct completion *c, double place, enum stability_effort effort)
{
    const enum answer answer = c->is_isobar ? fluid_set_t(c->at_t, c->fluid, place) : ANSWER_OK;
    return answer == ANSWER_OK
               ? stability_at_tp(c->at_t, c->is_isobar ? c->pressure : place, c->z, effort, c->ws, &c->found)
               : answer;
}

/* Next to a critical point a trial phase may not converge: a place a hair beside then speaks for this one. */
static enum verdict verdict_at(struct completion *c, double place)
{
    static const double nudges[] = {0.0, 1e-10, -1e-10, 1e-8, -1e-8, 1e-6, -1e-6};
    for (size_t i = 0; i < sizeof nudges / sizeof *nudges; i++) {
        if (test_at(c, place * (1.0 + nudges[i]), c->effort) == ANSWER_OK) {
            return c->found.is_stable ? VERDICT_STABLE : VERDICT_UNSTABLE;
        }
    }
    return VERDICT_UNKNOWN;
}

/* ---- the places tried ---------------------------------------------------------------------------------------------
 */

static size_t insert(double places[], size_t count, double place)
{
    if (count == MOST_PLACES) {
        return count;
    }
    size_t k = count;
    for (; k > 0 && places[k - 1] > place; k--) {
        places[k] = places[k - 1];
    }
    places[k] = place;
    return count + 1;
}

/* Far above the pressures it is published for an equation has boundaries of its own making. */
static double highest_pressure(const struct completion *c)
{
    const struct fluid_ops *ops = c->fluid->ops;
    struct range_note note = {.side = RANGE_INSIDE};
    if (ops->range != NULL) {
        note = ops->range(c->fluid, c->at_t->temperature, ENVELOPE_HIGHEST_PRESSURE);
    }
    return note.side == RANGE_TOO_HIGH_PRESSURE ? BEYOND_RANGE * note.limit : ENVELOPE_HIGHEST_PRESSURE;
}

static size_t add_pressures(const struct completion *c, double places[], size_t count)
{
    const double highest = highest_pressure(c);
    for (double p = ENVELOPE_LOWEST_PRESSURE; p <= highest;) {
        count = insert(places, count, p);
        p *= p < DENSE_FROM ? THIN_FACTOR : DENSE_FACTOR;
    }
    return count;
}

static size_t add_temperatures(const struct boundary_list *list, double places[], size_t count)
{
    double highest = 0.0;
    for (size_t i = 0; i < list->count; i++) {
        highest = fmax(highest, list->point[i]->temperature);
    }
    const double coldest = highest > 0.0 ? COLDEST_PART * highest : COLDEST;
    const double hottest = highest > 0.0 ? HOTTEST_PART * highest : HOTTEST;
    for (double T = coldest; T <= hottest; T *= TEMPERATURE_FACTOR) {
        count = insert(places, count, T);
    }
    return insert(places, count, hottest);
}

static size_t set_places(const struct completion *c, double places[])
{
    size_t count = 0;
    for (size_t i = 0; i < c->list->count; i++) {
        count = insert(places, count, place_of(c, c->list->point[i]) * (1.0 - BESIDE_POINT));
        count = insert(places, count, place_of(c, c->list->point[i]) * (1.0 + BESIDE_POINT));
    }
    return c->is_isobar ? add_temperatures(c->list, places, count) : add_pressures(c, places, count);
}

static size_t stable_points_between(const struct completion *c, double low, double high)
{
    size_t count = 0;
    for (size_t i = 0; i < c->list->count; i++) {
        const double place = place_of(c, c->list->point[i]);
        count += c->list->point[i]->is_stable && place > low && place <= high ? 1 : 0;
    }
    return count;
}

/* A point is tested beside the phase that forms there; a third one that its trials did not lead to may be found a
 * little below and above it. */
static void demote_points(struct completion *c)
{
    for (size_t i = 0; i < c->list->count; i++) {
        struct boundary_point *point = c->list->point[i];
        if (point->is_stable && verdict_at(c, place_of(c, point) * (1.0 - BESIDE_POINT)) == VERDICT_UNSTABLE &&
            verdict_at(c, place_of(c, point) * (1.0 + BESIDE_POINT)) == VERDICT_UNSTABLE) {
            point->is_stable = false;
            point->smallest_tpd = c->found.smallest_tpd;
        }
    }
}

/* ---- one point that is wanting ----------------------------------------------------------------------------------- */

/* Newton's steps from the phase that forms on the unstable side; a point elsewhere than between them is none. */
static bool solve_from(struct completion *c, double stable, double unstable, struct boundary_point *out)
{
    struct equilibrium_workspace *ws = c->ws;
    struct boundary_state b;
    const enum stability_effort effort = c->effort == STABILITY_DECIDE ? STABILITY_REPORT : c->effort;
    if (test_at(c, unstable, effort) != ANSWER_OK || !c->found.has_incipient) {
        return false;
    }
    boundary_begin(&b, c->at_t, c->is_isobar ? c->at_t : NULL, ws, ws->unknowns,
                   c->is_isobar ? ws->partial_volume : NULL);
    const size_t m = ws->active_count;
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        b.X[a] = log(fmax(c->found.incipient[i], SMALLEST_FRACTION)) - ws->ln_feed[i];
    }
    b.X[m] = log(c->at_t->temperature);
    b.X[m + 1] = log(c->is_isobar ? c->pressure : unstable);
    b.expected_feed = ws->reference->volume / ws->reference->amount;
    b.expected_incipient = c->found.incipient_volume;
    if (boundary_solve(&b, c->is_isobar ? m + 1 : m, MOST_NEWTON) != ANSWER_OK ||
        boundary_report(&b, out) != ANSWER_OK) {
        return false;
    }
    const double low = fmin(stable, unstable) * (1.0 - SAME_PLACE);
    const double high = fmax(stable, unstable) * (1.0 + SAME_PLACE);
    return out->is_stable && place_of(c, out) >= low && place_of(c, out) <= high;
}

/* By halving, in the logarithm, with Newton's steps every so often. */
static bool find_between(struct completion *c, double stable, double unstable, struct boundary_point *out)
{
    for (int k = 1; k <= MOST_HALVINGS; k++) {
        const double middle = sqrt(stable * unstable);
        const enum verdict verdict = verdict_at(c, middle);
        *(verdict == VERDICT_STABLE ? &stable : &unstable) = middle;
        if (k % HALVINGS_A_NEWTON == 0 && solve_from(c, stable, unstable, out)) {
            return true;
        }
    }
    return false;
}

/* The point goes to its place in the list; of the room beyond the list one is taken for it. */
static void add_between(struct completion *c, double stable, double unstable)
{
    struct boundary_list *list = c->list;
    if (list->count == BOUNDARY_MOST) {
        list->is_complete = false;
        return;
    }
    struct boundary_point *point = list->point[list->count];
    if (!find_between(c, stable, unstable, point)) {
        list->is_complete = false;
        return;
    }
    size_t k = list->count++;
    for (; k > 0 && place_of(c, list->point[k - 1]) > place_of(c, point); k--) {
        list->point[k] = list->point[k - 1];
    }
    list->point[k] = point;
}

/* Upwards through the places: where stable and unstable change without a point that is known, there is another. */
static void walk(struct completion *c, const double places[], size_t count)
{
    double before = 0.0;
    enum verdict verdict_before = VERDICT_UNKNOWN;
    c->list->opens_below = !c->is_isobar && verdict_at(c, ENVELOPE_LOWEST_PRESSURE) == VERDICT_UNSTABLE;
    for (size_t k = 0; k < count; k++) {
        const enum verdict verdict = verdict_at(c, places[k]);
        if (verdict == VERDICT_UNKNOWN) {
            continue;
        }
        const bool changes = verdict_before != VERDICT_UNKNOWN && verdict != verdict_before;
        const bool is_told = stable_points_between(c, before, places[k]) % 2 == 1;
        if (changes && !is_told) {
            const bool opens = verdict == VERDICT_UNSTABLE;
            add_between(c, opens ? before : places[k], opens ? places[k] : before);
        } else if (changes != is_told) {
            c->list->is_complete = false;
        }
        before = places[k];
        verdict_before = verdict;
    }
}

static void complete_with(struct completion *c, enum stability_effort effort)
{
    double places[MOST_PLACES];
    c->effort = effort;
    c->list->is_complete = true;
    demote_points(c);
    walk(c, places, set_places(c, places));
}

static enum answer complete(struct completion *c)
{
    if (!workspace_set_feed(c->ws, c->z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const bool has_few = c->ws->active_count < FEW;
    complete_with(c, has_few ? STABILITY_EXHAUSTIVE : STABILITY_DECIDE);
    if (!c->list->is_complete && !has_few) {
        complete_with(c, STABILITY_EXHAUSTIVE);
    }
    return ANSWER_OK;
}

enum answer boundary_complete_at_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature,
                                   const double z[], struct equilibrium_workspace *ws, struct boundary_list *list)
{
    struct completion c = {.at_t = at_t, .fluid = fluid, .z = z, .ws = ws, .list = list};
    const enum answer answer = fluid_set_t(at_t, fluid, temperature);
    return answer == ANSWER_OK ? complete(&c) : answer;
}

enum answer boundary_complete_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure,
                                   const double z[], struct equilibrium_workspace *ws, struct boundary_list *list)
{
    struct completion c = {
        .at_t = at_t, .fluid = fluid, .is_isobar = true, .pressure = pressure, .z = z, .ws = ws, .list = list};
    return complete(&c);
}
