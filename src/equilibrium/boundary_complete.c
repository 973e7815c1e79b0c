/* What the lines of an envelope miss: every change between stable and unstable along a rising pressure.
 *
 * A line traced from low pressure can be lost next to a critical point, and it never leads to a second liquid that
 * forms above a metastable bubble point. The stability test of the feed needs no line: where its verdicts on either
 * side of a stretch of pressures do not fit the points known inside it, the point that is wanting is closed in on by
 * halving and then solved by Newton's method.
 */
#include "equilibrium/boundary_internal.h"
#include "equilibrium/stability.h"

#include <math.h>

/* Fewer components than FEW are tested exhaustively from the first; of more, pairs are too many to be tried every time.
 */
enum { MOST_PRESSURES = 80, FEW = 4, MOST_HALVINGS = 60, HALVINGS_A_NEWTON = 4, MOST_NEWTON = 25 };

/* Tried pressures follow each other by these factors; up to DENSE_FROM (Pa) a gas has few surprises. */
#define THIN_FACTOR  10.0
#define DENSE_FACTOR 1.6
#define DENSE_FROM   1e5
/* Each point known is held against the test this far on either side. */
#define BESIDE_POINT 1e-5
/* Two pressures this near, relative, are one. */
#define SAME_PRESSURE 1e-8
/* A mole fraction below this is as good as none. */
#define SMALLEST_FRACTION 1e-300

struct completion {
    const struct fluid_at_t *at_t;
    const double *z;
    struct equilibrium_workspace *ws;
    struct boundary_list *list;
    enum stability_effort effort;
    struct stability found; /* of the last pressure tried */
};

enum verdict { VERDICT_STABLE, VERDICT_UNSTABLE, VERDICT_UNKNOWN };

/* Next to a critical point a trial phase may not converge: a pressure a hair beside then speaks for this one. */
static enum verdict verdict_at(struct completion *c, double pressure)
{
    static const double nudges[] = {0.0, 1e-10, -1e-10, 1e-8, -1e-8, 1e-6, -1e-6};
    for (size_t i = 0; i < sizeof nudges / sizeof *nudges; i++) {
        const double p = pressure * (1.0 + nudges[i]);
        if (stability_at_tp(c->at_t, p, c->z, c->effort, c->ws, &c->found) == ANSWER_OK) {
            return c->found.is_stable ? VERDICT_STABLE : VERDICT_UNSTABLE;
        }
    }
    return VERDICT_UNKNOWN;
}

/* ---- the pressures tried ----------------------------------------------------------------------------------------- */

static size_t insert(double pressures[], size_t count, double pressure)
{
    if (count == MOST_PRESSURES) {
        return count;
    }
    size_t k = count;
    for (; k > 0 && pressures[k - 1] > pressure; k--) {
        pressures[k] = pressures[k - 1];
    }
    pressures[k] = pressure;
    return count + 1;
}

static size_t set_pressures(const struct boundary_list *list, double pressures[])
{
    size_t count = 0;
    for (size_t i = 0; i < list->count; i++) {
        count = insert(pressures, count, list->point[i]->pressure * (1.0 - BESIDE_POINT));
        count = insert(pressures, count, list->point[i]->pressure * (1.0 + BESIDE_POINT));
    }
    for (double p = ENVELOPE_LOWEST_PRESSURE; p <= ENVELOPE_HIGHEST_PRESSURE;) {
        count = insert(pressures, count, p);
        p *= p < DENSE_FROM ? THIN_FACTOR : DENSE_FACTOR;
    }
    return count;
}

static size_t stable_points_between(const struct boundary_list *list, double low, double high)
{
    size_t count = 0;
    for (size_t i = 0; i < list->count; i++) {
        const double p = list->point[i]->pressure;
        count += list->point[i]->is_stable && p > low && p <= high ? 1 : 0;
    }
    return count;
}

/* A point is tested beside the phase that forms there; a third one that its trials did not lead to may be found a
 * little below and above it. */
static void demote_points(struct completion *c)
{
    for (size_t i = 0; i < c->list->count; i++) {
        struct boundary_point *point = c->list->point[i];
        if (point->is_stable && verdict_at(c, point->pressure * (1.0 - BESIDE_POINT)) == VERDICT_UNSTABLE &&
            verdict_at(c, point->pressure * (1.0 + BESIDE_POINT)) == VERDICT_UNSTABLE) {
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
    if (stability_at_tp(c->at_t, unstable, c->z, effort, ws, &c->found) != ANSWER_OK || !c->found.has_incipient) {
        return false;
    }
    boundary_begin(&b, c->at_t, NULL, ws, ws->unknowns, NULL);
    const size_t m = ws->active_count;
    for (size_t a = 0; a < m; a++) {
        const size_t i = ws->active[a];
        b.X[a] = log(fmax(c->found.incipient[i], SMALLEST_FRACTION)) - ws->ln_feed[i];
    }
    b.X[m] = log(c->at_t->temperature);
    b.X[m + 1] = log(unstable);
    b.expected_feed = ws->reference->volume / ws->reference->amount;
    b.expected_incipient = c->found.incipient_volume;
    if (boundary_solve(&b, m, MOST_NEWTON) != ANSWER_OK || boundary_report(&b, out) != ANSWER_OK) {
        return false;
    }
    const double low = fmin(stable, unstable) * (1.0 - SAME_PRESSURE);
    const double high = fmax(stable, unstable) * (1.0 + SAME_PRESSURE);
    return out->is_stable && out->pressure >= low && out->pressure <= high;
}

/* By halving, in ln p, with Newton's steps every so often. */
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
    for (; k > 0 && list->point[k - 1]->pressure > point->pressure; k--) {
        list->point[k] = list->point[k - 1];
    }
    list->point[k] = point;
}

/* Upwards through the pressures: where stable and unstable change without a point that is known, there is another. */
static void walk(struct completion *c, const double pressures[], size_t count)
{
    double before = 0.0;
    enum verdict verdict_before = VERDICT_UNKNOWN;
    c->list->opens_below = verdict_at(c, ENVELOPE_LOWEST_PRESSURE) == VERDICT_UNSTABLE;
    for (size_t k = 0; k < count; k++) {
        const enum verdict verdict = verdict_at(c, pressures[k]);
        if (verdict == VERDICT_UNKNOWN) {
            continue;
        }
        const bool changes = verdict_before != VERDICT_UNKNOWN && verdict != verdict_before;
        const bool is_told = stable_points_between(c->list, before, pressures[k]) % 2 == 1;
        if (changes && !is_told) {
            const bool opens = verdict == VERDICT_UNSTABLE;
            add_between(c, opens ? before : pressures[k], opens ? pressures[k] : before);
        } else if (changes != is_told) {
            c->list->is_complete = false;
        }
        before = pressures[k];
        verdict_before = verdict;
    }
}

static void complete(struct completion *c, enum stability_effort effort)
{
    double pressures[MOST_PRESSURES];
    c->effort = effort;
    c->list->is_complete = true;
    demote_points(c);
    walk(c, pressures, set_pressures(c->list, pressures));
}

enum answer boundary_complete_at_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature,
                                   const double z[], struct equilibrium_workspace *ws, struct boundary_list *list)
{
    struct completion c = {.at_t = at_t, .z = z, .ws = ws, .list = list};
    if (!workspace_set_feed(ws, z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = fluid_set_t(at_t, fluid, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const bool has_few = ws->active_count < FEW;
    complete(&c, has_few ? STABILITY_EXHAUSTIVE : STABILITY_DECIDE);
    if (!list->is_complete && !has_few) {
        complete(&c, STABILITY_EXHAUSTIVE);
    }
    return ANSWER_OK;
}

/* ---- at a pressure ----------------------------------------------------------------------------------------------- */

/* Temperatures tried beyond the highest and the lowest point, by parts of theirs; and in K where there is no point. */
#define BEYOND_HIGHEST 1.02
static const double BEYOND_LOWEST[] = {0.99, 0.9};
static const double TRIED_ANYWHERE[] = {100.0, 125.0, 150.0, 200.0, 250.0, 300.0, 350.0};

struct isobar {
    struct completion completion;
    struct fluid_at_t *at_t;
    const struct fluid *fluid;
    double pressure;
};

/* What the test cannot say speaks against nothing. */
static bool is_as_expected(struct isobar *isobar, double temperature, bool is_stable)
{
    if (fluid_set_t(isobar->at_t, isobar->fluid, temperature) != ANSWER_OK) {
        return true;
    }
    return verdict_at(&isobar->completion, isobar->pressure) != (is_stable ? VERDICT_UNSTABLE : VERDICT_STABLE);
}

enum answer boundary_check_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure, const double z[],
                                struct equilibrium_workspace *ws, struct boundary_list *list)
{
    struct isobar isobar = {{.at_t = at_t, .z = z, .ws = ws, .list = list}, at_t, fluid, pressure};
    isobar.completion.effort = STABILITY_DECIDE;
    double above = 0.0; /* the stable point above the one at hand */
    bool is_stable = true;
    for (size_t k = list->count; k > 0; k--) {
        const struct boundary_point *point = list->point[k - 1];
        if (point->is_stable) {
            const double between = above > 0.0 ? sqrt(above * point->temperature) : BEYOND_HIGHEST * point->temperature;
            list->is_complete = list->is_complete && is_as_expected(&isobar, between, is_stable);
            is_stable = !is_stable;
            above = point->temperature;
        }
    }
    const size_t tried =
        above > 0.0 ? sizeof BEYOND_LOWEST / sizeof *BEYOND_LOWEST : sizeof TRIED_ANYWHERE / sizeof *TRIED_ANYWHERE;
    for (size_t k = 0; k < tried; k++) {
        const double temperature = above > 0.0 ? BEYOND_LOWEST[k] * above : TRIED_ANYWHERE[k];
        list->is_complete = list->is_complete && is_as_expected(&isobar, temperature, is_stable);
    }
    return ANSWER_OK;
}
