/* The points of a traced envelope at one temperature or pressure.
 *
 * Between two points of a line where temperature, or pressure, passes the value asked for, Newton's method solves for
 * it from the point between them; next to a critical point a cubic across it is as good as a solution.
 */
#include "equilibrium/boundary_internal.h"

#include <math.h>
#include <string.h>

enum { MOST_STEPS = ENVELOPE_MOST_STEPS, MOST_REFINEMENTS = 60 };

/* Points on both sides of a critical point as near to each other as this, in ln K, are joined by a cubic. */
#define CLOSE_TOGETHER 0.02
/* And so close to a critical point that they are hardly two, but still solved for. */
#define HARDLY_APART 2e-3
/* Four points, two on either side, tell a curve of higher order when the outer two are as near to each other as this.
 */
#define NOT_FAR_APART 0.25
/* Points nearer to each other than this carry too much of rounding to tell the curve by. */
#define ROUNDED 0.015
/* Where the largest ln K is more than this Newton's method, from a point of the curve, does better than the curve. */
#define CONTRASTED 0.004
/* A solution lies between two points, or little more than their distance and this from the middle. */
#define SLIGHTLY_BESIDE 0.05
/* Between such points the line is interpolated, to this difference of ln f: what is left of a pressure's error then is
 * far less, as beside a critical point ln f hardly tells two phases apart. */
#define CRITICAL_TOLERANCE 2e-9

struct boundary_list *boundary_list_create(size_t components, struct arena *arena)
{
    struct boundary_list *list = arena_alloc(arena, 1, sizeof *list);
    for (size_t k = 0; k < BOUNDARY_MOST; k++) {
        list->point[k] = boundary_point_create(components, arena);
    }
    return list;
}

static void interpolate_volumes(struct boundary_state *b, const struct envelope *e, size_t k, double part)
{
    b->expected_feed = e->feed_volume[k] * pow(e->feed_volume[k + 1] / e->feed_volume[k], part);
    b->expected_incipient = e->incipient_volume[k] * pow(e->incipient_volume[k + 1] / e->incipient_volume[k], part);
}

/* The line that point k of the envelope belongs to. */
static const struct envelope_line *line_of(const struct envelope *e, size_t k)
{
    const struct envelope_line *line = e->line;
    while (k >= line->first + line->count) {
        line++;
    }
    return line;
}

/* `part` of the way from point k of the envelope to the next. */
static void interpolate(struct boundary_state *b, const struct envelope *e, size_t k, double part)
{
    const double *before = envelope_point_at(e, k), *after = envelope_point_at(e, k + 1);
    for (size_t c = 0; c < b->size; c++) {
        b->X[c] = before[c] + part * (after[c] - before[c]);
    }
    interpolate_volumes(b, e, k, part);
}

/* Gaps between the points of a curve are no less than this part of the middle one's: what rounding leaves of closer
 * points would bend it. */
#define EVEN_ENOUGH 0.05

/* Whether the points around k and k + 1 belong to their line, and unknown `a` changes one way from each to the next. */
static bool has_neighbours(const struct envelope *e, size_t k, size_t a)
{
    const struct envelope_line *line = line_of(e, k);
    if (k == line->first || k + 2 >= line->first + line->count) {
        return false;
    }
    const double gap = envelope_point_at(e, k + 1)[a] - envelope_point_at(e, k)[a];
    return (envelope_point_at(e, k)[a] - envelope_point_at(e, k - 1)[a]) / gap > EVEN_ENOUGH &&
           (envelope_point_at(e, k + 2)[a] - envelope_point_at(e, k + 1)[a]) / gap > EVEN_ENOUGH;
}

/* The same by the cubic through these and their neighbours, told by unknown `a`. */
static void interpolate_cubically(struct boundary_state *b, const struct envelope *e, size_t k, size_t a, double value)
{
    const double *node[] = {envelope_point_at(e, k - 1), envelope_point_at(e, k), envelope_point_at(e, k + 1),
                            envelope_point_at(e, k + 2)};
    double weight[] = {1.0, 1.0, 1.0, 1.0};
    for (size_t i = 0; i < 4; i++) {
        for (size_t j = 0; j < 4; j++) {
            weight[i] *= i == j ? 1.0 : (value - node[j][a]) / (node[i][a] - node[j][a]);
        }
    }
    for (size_t c = 0; c < b->size; c++) {
        b->X[c] = weight[0] * node[0][c] + weight[1] * node[1][c] + weight[2] * node[2][c] + weight[3] * node[3][c];
    }
    interpolate_volumes(b, e, k, (value - node[1][a]) / (node[2][a] - node[1][a]));
}

/* The unknown that changes most between the two points. */
static size_t most_changed(const struct boundary_state *b, const struct envelope *e, size_t k)
{
    size_t most = 0;
    for (size_t c = 1; c < b->size; c++) {
        if (fabs(envelope_point_at(e, k + 1)[c] - envelope_point_at(e, k)[c]) >
            fabs(envelope_point_at(e, k + 1)[most] - envelope_point_at(e, k)[most])) {
            most = c;
        }
    }
    return most;
}

/* Where unknown `a` passes `value`, by false position in the one that changes most: the way the line was traced. */
static enum answer approach(struct boundary_state *b, const struct envelope *e, size_t k, size_t a, double value)
{
    const size_t held = most_changed(b, e, k);
    double low = 0.0, high = 1.0, at_low = envelope_point_at(e, k)[a] - value,
           at_high = envelope_point_at(e, k + 1)[a] - value;
    for (int step = 0; step < MOST_REFINEMENTS; step++) {
        const double part = low + (high - low) * at_low / (at_low - at_high);
        interpolate(b, e, k, part);
        const enum answer answer = boundary_solve(b, held, MOST_STEPS);
        const double miss = b->X[a] - value;
        if (answer != ANSWER_OK || fabs(miss) < 1e-11) {
            return answer;
        }
        if ((miss < 0.0) == (at_low < 0.0)) {
            low = part;
            at_low = miss;
            at_high *= 0.5;
        } else {
            high = part;
            at_high = miss;
            at_low *= 0.5;
        }
    }
    return ANSWER_FAILED;
}

/* ---- across a critical point ------------------------------------------------------------------------------------- */

enum { MOST_NODES = 4 };

/* The curve through points of a line on both sides of a critical point, with its slopes there. */
struct crossing {
    size_t count, held; /* points, and the unknown they are told by */
    const double *X[MOST_NODES];
    double *slope[MOST_NODES]; /* dX by the held unknown */
};

static bool is_closely_across(const struct boundary_state *b, const double *before, const double *after)
{
    const size_t ratio = envelope_fastest_ratio(b, before);
    return envelope_is_across(b, before, after) && fabs(after[ratio] - before[ratio]) < CLOSE_TOGETHER;
}

static bool set_slope_at(struct boundary_state *b, const struct envelope *e, size_t k, size_t held, double *slope)
{
    memcpy(b->X, envelope_point_at(e, k), b->size * sizeof(double));
    b->expected_feed = e->feed_volume[k];
    b->expected_incipient = e->incipient_volume[k];
    const bool is_solved = boundary_solve(b, held, MOST_STEPS) == ANSWER_OK;
    memcpy(slope, b->slope, b->size * sizeof(double));
    return is_solved;
}

/* `count` points of the envelope, each solved again for its slope. False unless their held unknown changes one way. */
static bool set_crossing(struct boundary_state *b, const struct envelope *e, const size_t points[], size_t count,
                         size_t held, struct crossing *out)
{
    struct equilibrium_workspace *ws = b->ws;
    double *const room[MOST_NODES] = {ws->slope_before, ws->slope_after, ws->next_slope, ws->crossed};
    out->count = count;
    out->held = held;
    for (size_t k = 0; k < count; k++) {
        out->X[k] = envelope_point_at(e, points[k]);
        out->slope[k] = room[k];
        if (!set_slope_at(b, e, points[k], held, out->slope[k])) {
            return false;
        }
    }
    const double sense = out->X[count - 1][held] - out->X[0][held];
    for (size_t k = 1; k < count; k++) {
        if (!((out->X[k][held] - out->X[k - 1][held]) * sense > 0.0)) {
            return false;
        }
    }
    return true;
}

/* Unknown `a` of the curve where the held one is `at`: Hermite's polynomial by divided differences, each point counted
 * twice. */
static double curve_at(const struct crossing *curve, size_t a, double at)
{
    const size_t count = 2 * curve->count;
    double difference[2 * MOST_NODES] = {0.0};
    for (size_t i = 0; i < count; i++) {
        difference[i] = curve->X[i / 2][a];
    }
    for (size_t order = 1; order < count; order++) {
        for (size_t i = count - 1; i >= order; i--) {
            const double gap = curve->X[i / 2][curve->held] - curve->X[(i - order) / 2][curve->held];
            difference[i] =
                order == 1 && i % 2 == 1 ? curve->slope[i / 2][a] : (difference[i] - difference[i - 1]) / gap;
        }
    }
    double sum = difference[count - 1];
    for (size_t i = count - 1; i > 0; i--) {
        sum = sum * (at - curve->X[(i - 1) / 2][curve->held]) + difference[i - 1];
    }
    return sum;
}

/* The point of the curve between points k and k + 1 of the envelope where unknown `a` has the value. */
static void set_from_curve(struct boundary_state *b, const struct envelope *e, size_t k, const struct crossing *curve,
                           size_t a, double value)
{
    const double *before = envelope_point_at(e, k), *after = envelope_point_at(e, k + 1);
    const size_t held = curve->held;
    double low = 0.0, high = 1.0;
    for (int step = 0; step < MOST_REFINEMENTS; step++) {
        const double middle = 0.5 * (low + high);
        const double here = curve_at(curve, a, before[held] + middle * (after[held] - before[held]));
        *((here < value) == (before[a] < value) ? &low : &high) = middle;
    }
    const double at = before[held] + low * (after[held] - before[held]);
    for (size_t c = 0; c < b->size; c++) {
        b->X[c] = curve_at(curve, c, at);
    }
    b->X[held] = at;
    b->X[a] = value;
    interpolate_volumes(b, e, k, low);
}

/* Newton's method may have ended on another branch of the boundary. */
static bool is_beside(const struct boundary_state *b, const struct envelope *e, size_t k)
{
    const double *before = envelope_point_at(e, k), *after = envelope_point_at(e, k + 1);
    for (size_t c = 0; c < b->size; c++) {
        const double reach = fabs(after[c] - before[c]) + SLIGHTLY_BESIDE;
        if (!(fabs(b->X[c] - 0.5 * (before[c] + after[c])) <= reach)) {
            return false;
        }
    }
    return true;
}

/* Two points on either side of the critical point: the curve's error is then of the eighth order. The very closest are
 * passed over, for what rounding leaves of them is more than that. */
static bool take_wide_curve(struct boundary_state *b, const struct envelope *e, size_t k, size_t a, double value)
{
    const struct envelope_line *line = line_of(e, k);
    const size_t held = envelope_fastest_ratio(b, envelope_point_at(e, k));
    size_t low = k, high = k + 1;
    if (!envelope_is_across(b, envelope_point_at(e, k), envelope_point_at(e, k + 1))) {
        return false;
    }
    while (low > line->first && high + 1 < line->first + line->count &&
           fabs(envelope_point_at(e, high)[held] - envelope_point_at(e, low)[held]) < ROUNDED) {
        low--;
        high++;
    }
    if (low == line->first || high + 1 >= line->first + line->count) {
        return false;
    }
    const size_t nodes[] = {low - 1, low, high, high + 1};
    const double width = envelope_point_at(e, high + 1)[held] - envelope_point_at(e, low - 1)[held];
    struct crossing curve;
    if (!(fabs(width) < NOT_FAR_APART) || !set_crossing(b, e, nodes, MOST_NODES, held, &curve)) {
        return false;
    }
    set_from_curve(b, e, k, &curve, a, value);
    if (fabs(b->X[held]) > CONTRASTED) {
        if (boundary_solve(b, a, MOST_STEPS) == ANSWER_OK && is_beside(b, e, k)) {
            return true;
        }
        set_from_curve(b, e, k, &curve, a, value);
    }
    return boundary_take(b, BOUNDARY_TOLERANCE) == ANSWER_OK;
}

/* The part of the way on the cubic between two points at which unknown `a` has the value; leaves the point there. */
static double curve_to(struct boundary_state *b, size_t held, const double *before, const double *after, size_t a,
                       double value)
{
    double low = 0.0, high = 1.0;
    for (int step = 0; step < MOST_REFINEMENTS; step++) {
        const double middle = 0.5 * (low + high);
        envelope_curve_between(b, held, before, after, middle);
        *((b->X[a] < value) == (before[a] < value) ? &low : &high) = middle;
    }
    return low;
}

/* Right at the critical point itself Newton's method has nothing to hold on to. Between two points solved for close on
 * either side of it, the cubic is as good as a solution. */
static enum answer solve_at_critical(struct boundary_state *b, size_t held, const double *before, const double *after,
                                     size_t a, double value)
{
    struct equilibrium_workspace *ws = b->ws;
    const size_t bytes = b->size * sizeof(double);
    const double sign = after[held] > before[held] ? 1.0 : -1.0, length = after[held] - before[held];
    envelope_curve_between(b, held, before, after, (-sign * HARDLY_APART - before[held]) / length);
    memcpy(ws->next_unknowns, b->X, bytes);
    envelope_curve_between(b, held, before, after, (sign * HARDLY_APART - before[held]) / length);
    if (boundary_solve(b, held, MOST_STEPS) != ANSWER_OK) {
        return ANSWER_FAILED;
    }
    memcpy(ws->crossed, b->X, bytes);
    memcpy(ws->next_slope, b->slope, bytes);
    memcpy(b->X, ws->next_unknowns, bytes);
    if (boundary_solve(b, held, MOST_STEPS) != ANSWER_OK) {
        return ANSWER_FAILED;
    }
    memcpy(ws->next_unknowns, b->X, bytes);
    memcpy(ws->slope_before, b->slope, bytes);
    memcpy(ws->slope_after, ws->next_slope, bytes);
    if ((ws->next_unknowns[a] < value) == (ws->crossed[a] < value)) {
        return ANSWER_FAILED;
    }
    curve_to(b, held, ws->next_unknowns, ws->crossed, a, value);
    b->X[a] = value;
    return boundary_take(b, CRITICAL_TOLERANCE);
}

/* The same next to a critical point. Newton's method at a given temperature or pressure gets there only from nearby,
 * and on both sides of the critical point itself not at all; but in the ratio that is farthest from one the line is as
 * smooth there as elsewhere, and between two close points of it a cubic is as good as a solution. */
static enum answer solve_near_critical(struct boundary_state *b, const struct envelope *e, size_t k, size_t a,
                                       double value)
{
    const double *before = envelope_point_at(e, k), *after = envelope_point_at(e, k + 1);
    const size_t held = envelope_fastest_ratio(b, fabs(before[0]) > fabs(after[0]) ? before : after);
    if (!set_slope_at(b, e, k, held, b->ws->slope_before) || !set_slope_at(b, e, k + 1, held, b->ws->slope_after)) {
        return ANSWER_FAILED;
    }
    const double part = curve_to(b, held, before, after, a, value);
    interpolate_volumes(b, e, k, part);
    b->X[a] = value;
    if (is_closely_across(b, before, after) && boundary_take(b, BOUNDARY_TOLERANCE) == ANSWER_OK) {
        return ANSWER_OK;
    }
    if (take_wide_curve(b, e, k, a, value)) {
        return ANSWER_OK;
    }
    if (!set_slope_at(b, e, k, held, b->ws->slope_before) || !set_slope_at(b, e, k + 1, held, b->ws->slope_after)) {
        return ANSWER_FAILED;
    }
    interpolate_volumes(b, e, k, curve_to(b, held, before, after, a, value));
    b->X[a] = value;
    return boundary_solve(b, a, MOST_STEPS) == ANSWER_OK ? ANSWER_OK
                                                         : solve_at_critical(b, held, before, after, a, value);
}

/* Newton's steps from between the points; nobody asks for the slope of what they find. */
static enum answer solve_directly(struct boundary_state *b, const struct envelope *e, size_t k, size_t a, double value)
{
    double *const slope = b->slope;
    const double before = envelope_point_at(e, k)[a], after = envelope_point_at(e, k + 1)[a];
    if (has_neighbours(e, k, a)) {
        interpolate_cubically(b, e, k, a, value);
    } else {
        interpolate(b, e, k, (value - before) / (after - before));
    }
    b->X[a] = value;
    b->slope = NULL;
    const enum answer answer = boundary_solve(b, a, MOST_STEPS);
    b->slope = slope;
    return answer;
}

/* Between points k and k + 1 of the envelope unknown `a` passes `value`. */
static enum answer solve_between(struct boundary_state *b, const struct envelope *e, size_t k, size_t a, double value,
                                 struct boundary_point *out)
{
    enum answer answer = ANSWER_FAILED;
    if (!is_closely_across(b, envelope_point_at(e, k), envelope_point_at(e, k + 1))) {
        answer = solve_directly(b, e, k, a, value);
    }
    if (answer != ANSWER_OK || !is_beside(b, e, k)) {
        answer = solve_near_critical(b, e, k, a, value);
    }
    if (answer != ANSWER_OK || !is_beside(b, e, k)) {
        answer = approach(b, e, k, a, value);
    }
    return answer == ANSWER_OK ? boundary_report(b, out) : answer;
}

/* By rising pressure, or temperature. */
static void sort(struct boundary_list *list, bool by_pressure)
{
    for (size_t k = 1; k < list->count; k++) {
        for (size_t l = k; l > 0; l--) {
            struct boundary_point *lower = list->point[l - 1], *upper = list->point[l];
            if (by_pressure ? lower->pressure <= upper->pressure : lower->temperature <= upper->temperature) {
                break;
            }
            list->point[l - 1] = upper;
            list->point[l] = lower;
        }
    }
}

/* Parts within which two solutions are one point, met by two lines. */
#define SAME_POINT_PRESSURE 1e-9
#define SAME_POINT_VOLUME   1e-6

static bool is_known(const struct boundary_list *list, const struct boundary_point *point)
{
    for (size_t i = 0; i < list->count; i++) {
        const struct boundary_point *known = list->point[i];
        if (fabs(log(known->pressure / point->pressure)) <= SAME_POINT_PRESSURE &&
            fabs(log(known->temperature / point->temperature)) <= SAME_POINT_PRESSURE &&
            fabs(log(known->incipient_volume / point->incipient_volume)) <= SAME_POINT_VOLUME) {
            return true;
        }
    }
    return false;
}

static enum answer find_all(struct fluid_at_t *at_t, const struct fluid *fluid, size_t offset, double ln_value,
                            const double z[], const struct envelope *e, struct equilibrium_workspace *ws,
                            struct boundary_list *out)
{
    struct boundary_state b;
    out->count = 0;
    out->is_complete = true;
    out->opens_below = false;
    if (!workspace_set_feed(ws, z) || !isfinite(ln_value)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer set = fluid_set_t(at_t, fluid, at_t->temperature > 0.0 ? at_t->temperature : 300.0);
    if (set != ANSWER_OK) {
        return set;
    }
    boundary_begin(&b, at_t, at_t, ws, ws->unknowns, ws->partial_volume);
    const size_t a = ws->active_count + offset;
    for (size_t l = 0; l < e->line_count; l++) {
        for (size_t k = e->line[l].first; k + 1 < e->line[l].first + e->line[l].count; k++) {
            const double before = envelope_point_at(e, k)[a] - ln_value,
                         after = envelope_point_at(e, k + 1)[a] - ln_value;
            if (!((before < 0.0) != (after < 0.0)) || out->count == BOUNDARY_MOST) {
                continue;
            }
            const enum answer answer = solve_between(&b, e, k, a, ln_value, out->point[out->count]);
            if (answer == ANSWER_CANNOT) {
                return answer;
            }
            out->is_complete = out->is_complete && answer == ANSWER_OK;
            out->count += answer == ANSWER_OK && !is_known(out, out->point[out->count]) ? 1 : 0;
        }
    }
    sort(out, offset == 0);
    return ANSWER_OK;
}

enum answer boundary_at_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature, const double z[],
                          const struct envelope *envelope, struct equilibrium_workspace *ws, struct boundary_list *out)
{
    enum answer answer = find_all(at_t, fluid, 0, log(temperature), z, envelope, ws, out);
    if (answer == ANSWER_OK && !out->is_complete) {
        answer = boundary_complete_at_t(at_t, fluid, temperature, z, ws, out);
    }
    for (size_t k = 0; answer == ANSWER_OK && k < out->count; k++) {
        out->point[k]->temperature = temperature; /* not what its logarithm gave back */
    }
    return answer == ANSWER_OK && !out->is_complete ? ANSWER_FAILED : answer;
}

enum answer boundary_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure, const double z[],
                          const struct envelope *envelope, struct equilibrium_workspace *ws, struct boundary_list *out)
{
    const enum answer answer = find_all(at_t, fluid, 1, log(pressure), z, envelope, ws, out);
    for (size_t k = 0; answer == ANSWER_OK && k < out->count; k++) {
        out->point[k]->pressure = pressure;
    }
    return answer == ANSWER_OK && !out->is_complete ? ANSWER_FAILED : answer;
}
