/* Tracing a mixture's phase envelope.
 *
 * From a dew point at low pressure the boundary is followed point by point. Of the unknowns ln K, ln T, ln p the one
 * that changes fastest along the line is held at a new value in each step, so that neither the critical point nor the
 * extrema of temperature and pressure are special (Michelsen, Fluid Phase Equilib. 4 (1980) 1). Next to the critical
 * point, where all ln K vanish and every T and p is a trivial solution, the step is taken across.
 */
#include "equilibrium/boundary_internal.h"

#include <math.h>
#include <string.h>

enum {
    MOST_STEPS = ENVELOPE_MOST_STEPS,
    MOST_START_STEPS = 60,
    MOST_RETRIES = 14,
    MOST_REFINEMENTS = 60,
    EASY = 4,
    HARD = 6
};

/* Largest changes in one step of ln K and ln p, and of ln T. */
#define LARGEST_CHANGE             0.5
#define LARGEST_TEMPERATURE_CHANGE 0.05
/* Where all ln K, and the logarithm of the ratio of the molar volumes, are smaller than this, a critical point may be
 * near. */
#define NEAR_CRITICAL 0.2
/* Across a critical point, how far from the curve through the points before it the next may lie: as a part of the step,
 * and beside it. */
#define OFF_COURSE        0.5
#define SLIGHT_OFF_COURSE 0.01
/* The ln K of the points traced closest to a critical point: the error of a solution grows with its inverse square,
 * that of the cubic across with its fourth power, and here neither makes more than some 1e-9 of the pressure. */
#define BESIDE_CRITICAL 2.5e-3
/* Two lines that start as near to each other as this, in ln T, are one. */
#define SAME_TEMPERATURE 1e-7
/* A step shorter than this leads nowhere. */
#define SHORTEST_STEP 1e-7
/* Below this part of the first temperature a line is not followed. */
#define COLDEST 0.1

struct tracer {
    struct boundary_state b;
    struct envelope *envelope;
    struct envelope_line *line;
    size_t held;
    double direction; /* +1 or -1: of the held unknown */
    double step;      /* of the held unknown, positive */
    double *slope;    /* [components + 2], at the last point */
};

/* ---- points ---------------------------------------------------------------------------------------------------- */

struct envelope *envelope_create(size_t components, struct arena *arena)
{
    struct envelope *envelope = arena_alloc(arena, 1, sizeof *envelope);
    envelope->components = components;
    envelope->X = arena_alloc(arena, ENVELOPE_MOST_POINTS * (components + 2), sizeof(double));
    envelope->feed_volume = arena_alloc(arena, ENVELOPE_MOST_POINTS, sizeof(double));
    envelope->incipient_volume = arena_alloc(arena, ENVELOPE_MOST_POINTS, sizeof(double));
    envelope->cricondentherm = boundary_point_create(components, arena);
    envelope->cricondenbar = boundary_point_create(components, arena);
    return envelope;
}

double *envelope_point_at(const struct envelope *envelope, size_t k)
{
    return envelope->X + k * (envelope->components + 2);
}

static bool store(struct tracer *t)
{
    struct envelope *e = t->envelope;
    if (e->point_count == ENVELOPE_MOST_POINTS) {
        return false;
    }
    memcpy(envelope_point_at(e, e->point_count), t->b.X, t->b.size * sizeof(double));
    e->feed_volume[e->point_count] = t->b.feed_volume;
    e->incipient_volume[e->point_count] = t->b.incipient_volume;
    e->point_count++;
    t->line->count++;
    t->b.expected_feed = t->b.feed_volume;
    t->b.expected_incipient = t->b.incipient_volume;
    return true;
}

/* ---- the first point ------------------------------------------------------------------------------------------- */

/* Which components Raoult's law is summed over: all of them, or one alone, as its own phase. */
static double raoult_excess(struct boundary_state *b, double T, bool is_dew, const size_t *alone)
{
    struct equilibrium_workspace *ws = b->ws;
    double sum = 0.0;
    struct fluid_at_t at = {.fluid = b->at_t->fluid, .temperature = T};
    workspace_set_pure(ws, &at, ENVELOPE_START_PRESSURE);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        if (alone == NULL || *alone == i) {
            sum += ws->feed[i] * exp(is_dew ? -ws->ln_pure[i] : ws->ln_pure[i]);
        }
    }
    return is_dew ? 1.0 - sum : sum - 1.0;
}

/* The temperature where it holds at the first pressure, by halving; ws->ln_pure is left for it. */
static double raoult_temperature(struct boundary_state *b, bool is_dew, const size_t *alone)
{
    double low = 1.0, high = 3000.0;
    for (int k = 0; k < MOST_REFINEMENTS; k++) {
        const double middle = 0.5 * (low + high);
        *(raoult_excess(b, middle, is_dew, alone) < 0.0 ? &low : &high) = middle;
    }
    raoult_excess(b, high, is_dew, alone);
    return high;
}

static bool solve_start(struct boundary_state *b, double T, bool is_dew)
{
    const size_t m = b->ws->active_count;
    b->X[m] = log(T);
    b->X[m + 1] = log(ENVELOPE_START_PRESSURE);
    b->is_dew = is_dew;
    b->expected_feed = b->expected_incipient = 0.0;
    return boundary_solve(b, m + 1, MOST_START_STEPS) == ANSWER_OK && (b->feed_volume > b->incipient_volume) == is_dew;
}

/* Like dissolves like: an ideal incipient phase. */
static bool start_ideally(struct boundary_state *b, bool is_dew)
{
    struct equilibrium_workspace *ws = b->ws;
    const double T = raoult_temperature(b, is_dew, NULL);
    for (size_t a = 0; a < ws->active_count; a++) {
        const double ln_pure = ws->ln_pure[ws->active[a]];
        b->X[a] = is_dew ? -ln_pure : ln_pure;
    }
    return solve_start(b, T, is_dew);
}

/* A dew of one component alone, in which the others dissolve as little as its fugacity coefficients say. */
static bool start_alone(struct boundary_state *b, size_t alone)
{
    struct equilibrium_workspace *ws = b->ws;
    const double T = raoult_temperature(b, true, &alone);
    for (size_t i = 0; i < ws->count; i++) {
        ws->W[i] = i == alone ? 1.0 : 0.0;
    }
    if (fluid_set_t(b->settable, b->at_t->fluid, T) != ANSWER_OK ||
        phase_tp(b->at_t, ENVELOPE_START_PRESSURE, ws->W, BRANCH_LIQUID, PHASE_LN_PHI, ws->trial) != ANSWER_OK) {
        return false;
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        b->X[a] = -ws->trial->ln_phi[ws->active[a]];
    }
    ws->W[alone] = 0.0;
    return solve_start(b, T, true);
}

/* ---- one step -------------------------------------------------------------------------------------------------- */

static double change_limit(const struct tracer *t, size_t a)
{
    return a == t->b.size - 2 ? LARGEST_TEMPERATURE_CHANGE : LARGEST_CHANGE;
}

static void hold(struct tracer *t, size_t a)
{
    if (a == t->held) {
        return;
    }
    const double factor = t->slope[a];
    t->direction *= factor < 0.0 ? -1.0 : 1.0;
    t->step *= fabs(factor);
    for (size_t c = 0; c < t->b.size; c++) {
        t->slope[c] /= factor;
    }
    t->held = a;
}

/* Holds the unknown that changes fastest by its limit, and keeps the sense in which the line is followed. */
static void choose_held(struct tracer *t)
{
    size_t fastest = t->held;
    double rate = 0.0;
    for (size_t a = 0; a < t->b.size; a++) {
        const double here = fabs(t->slope[a]) / change_limit(t, a);
        if (here > rate) {
            rate = here;
            fastest = a;
        }
    }
    hold(t, fastest);
    t->step = fmin(t->step, change_limit(t, fastest));
}

size_t envelope_fastest_ratio(const struct boundary_state *b, const double *X)
{
    size_t fastest = 0;
    for (size_t a = 1; a < b->ws->active_count; a++) {
        if (fabs(X[a]) > fabs(X[fastest])) {
            fastest = a;
        }
    }
    return fastest;
}

/* Does the line pass a critical point between two of its points? The ratio that is farthest from one turns over. */
bool envelope_is_across(const struct boundary_state *b, const double *before, const double *after)
{
    const size_t ratio = envelope_fastest_ratio(b, before);
    return fabs(before[ratio]) < NEAR_CRITICAL && before[ratio] * after[ratio] < 0.0;
}

/* Is the line about to reach a critical point? Then the phases are alike and growing more so. */
static bool is_approaching_critical(const struct tracer *t, const double *from)
{
    const size_t ratio = envelope_fastest_ratio(&t->b, from);
    const double towards = -from[ratio] * t->slope[ratio] * t->direction;
    return fabs(from[ratio]) < NEAR_CRITICAL && towards > 0.0 &&
           fabs(log(t->b.expected_feed / t->b.expected_incipient)) < NEAR_CRITICAL;
}

/* Next to a critical point the largest ln K is held and the first attempt is to cross over to minus its value; later
 * ones go nearer by ever less. */
static double next_held_value(const struct tracer *t, const double *from, bool is_near_critical, int retry)
{
    const double here = from[t->held];
    if (!is_near_critical) {
        return here + t->direction * t->step;
    }
    return retry == 0 ? -here : here * (1.0 - 0.7 * pow(0.5, retry));
}

/* Along the tangent; next to a critical point, where Newton's method reaches its solution only from nearby, along the
 * parabola through the point before the last. */
static void predict(struct tracer *t, const double *from, double value, bool is_near_critical)
{
    const double change = value - from[t->held];
    const bool has_earlier = is_near_critical && t->line->count > 1;
    const double *earlier = has_earlier ? from - (t->envelope->components + 2) : from;
    const double back = earlier[t->held] - from[t->held];
    for (size_t a = 0; a < t->b.size; a++) {
        t->b.X[a] = from[a] + t->slope[a] * change;
        if (fabs(back) > SHORTEST_STEP) {
            t->b.X[a] += (earlier[a] - from[a] - t->slope[a] * back) * (change / back) * (change / back);
        }
    }
    t->b.X[t->held] = value;
}

/* Has a step across a critical point led to another one's neighbourhood? */
static bool is_off_course(const struct tracer *t, const double *from)
{
    const double change = t->b.X[t->held] - from[t->held];
    for (size_t a = t->b.ws->active_count; a < t->b.size; a++) {
        const double expected = t->slope[a] * change;
        if (!(fabs(t->b.X[a] - from[a] - expected) <= OFF_COURSE * fabs(expected) + SLIGHT_OFF_COURSE)) {
            return true;
        }
    }
    return false;
}

/* Has the solution gone elsewhere than along the line? */
static bool is_astray(const struct tracer *t, const double *from)
{
    for (size_t a = 0; a < t->b.size; a++) {
        if (!(fabs(t->b.X[a] - from[a]) <= 3.0 * change_limit(t, a))) {
            return true;
        }
    }
    return false;
}

/* One more point from the last one; false when no step, however short, leads to one. */
static bool advance(struct tracer *t)
{
    const double *from = envelope_point_at(t->envelope, t->envelope->point_count - 1);
    choose_held(t);
    const bool is_near_critical = is_approaching_critical(t, from);
    if (is_near_critical) {
        hold(t, envelope_fastest_ratio(&t->b, from));
    }
    for (int retry = 0; retry < MOST_RETRIES && t->step > SHORTEST_STEP; retry++) {
        memcpy(t->b.X, from, t->b.size * sizeof(double));
        predict(t, from, next_held_value(t, from, is_near_critical, retry), is_near_critical);
        if (boundary_solve(&t->b, t->held, MOST_STEPS) == ANSWER_OK && !is_astray(t, from) &&
            !(is_near_critical && is_off_course(t, from))) {
            t->step *= t->b.iterations <= EASY ? 1.5 : t->b.iterations >= HARD ? 0.6 : 1.0;
            return true;
        }
        t->step *= is_near_critical ? 1.0 : 0.4;
    }
    return false;
}

/* ---- between two points ---------------------------------------------------------------------------------------- */

/* `part` of the way from one point to another in the held unknown, by the cubic with the slopes that stand in
 * slope_before and slope_after. */
void envelope_curve_between(struct boundary_state *b, size_t held, const double *before, const double *after,
                            double part)
{
    const double length = after[held] - before[held], rest = 1.0 - part;
    for (size_t a = 0; a < b->size; a++) {
        const double chord = after[a] - before[a];
        const double bend_before = b->ws->slope_before[a] * length - chord;
        const double bend_after = b->ws->slope_after[a] * length - chord;
        b->X[a] = before[a] + part * (chord + rest * (rest * bend_before - part * bend_after));
    }
    b->X[held] = before[held] + part * length;
}

/* ---- extrema of temperature and pressure ----------------------------------------------------------------------- */

/* Between the last point stored and the one just found the slope of unknown `a` changes sign: the point where it
 * vanishes, by false position in the held unknown (the Illinois way). False when it was not found. */
static bool find_extremum(struct tracer *t, size_t a, double slope_before, const double *after, double slope_after)
{
    const double *before = envelope_point_at(t->envelope, t->envelope->point_count - 1);
    double low = 0.0, high = 1.0, at_low = slope_before, at_high = slope_after;
    for (int k = 0; k < MOST_REFINEMENTS; k++) {
        const double part = low + (high - low) * at_low / (at_low - at_high);
        for (size_t c = 0; c < t->b.size; c++) {
            t->b.X[c] = before[c] + part * (after[c] - before[c]);
        }
        if (boundary_solve(&t->b, t->held, MOST_STEPS) != ANSWER_OK) {
            return false;
        }
        const double slope = t->b.slope[a];
        if (fabs(slope) < 1e-11 || high - low < 1e-13) {
            return true;
        }
        if ((slope < 0.0) == (at_low < 0.0)) {
            low = part;
            at_low = slope;
            at_high *= 0.5;
        } else {
            high = part;
            at_high = slope;
            at_low *= 0.5;
        }
    }
    return true;
}

/* Stores the extrema between the last point and the one in `after` first, so that between any two stored points
 * temperature and pressure are monotone. `X` and `slope` of the new point are the tracer's own copies. */
static void store_extrema(struct tracer *t, const double *after, const double *slope_after)
{
    const size_t m = t->b.ws->active_count;
    const double *before = envelope_point_at(t->envelope, t->envelope->point_count - 1);
    for (size_t a = m; a < m + 2 && !envelope_is_across(&t->b, before, after); a++) {
        if (t->slope[a] * slope_after[a] < 0.0 && find_extremum(t, a, t->slope[a], after, slope_after[a])) {
            memcpy(t->slope, t->b.slope, t->b.size * sizeof(double));
            store(t);
        }
    }
}

/* ---- one line -------------------------------------------------------------------------------------------------- */

/* True, with the reason, where the line ends at the point just stored. */
static bool is_at_end(struct tracer *t, double coldest)
{
    const size_t m = t->b.ws->active_count;
    const double ln_p = t->b.X[m + 1];
    if (ln_p < log(ENVELOPE_LOWEST_PRESSURE)) {
        t->line->end = ENVELOPE_END_LOW_PRESSURE;
    } else if (ln_p > log(ENVELOPE_HIGHEST_PRESSURE)) {
        t->line->end = ENVELOPE_END_HIGH_PRESSURE;
    } else if (t->b.X[m] < coldest) {
        t->line->end = ENVELOPE_END_COLD;
    } else {
        return false;
    }
    return true;
}

/* Two lines may be one curve traced from either end; its critical point is interpolated to about these parts. */
#define SAME_CRITICAL_TEMPERATURE 1e-3
#define SAME_CRITICAL_PRESSURE    1e-2

static bool is_noted(const struct envelope *e, const struct critical_point *critical)
{
    for (size_t i = 0; i < e->critical_count; i++) {
        if (fabs(log(e->critical[i].temperature / critical->temperature)) < SAME_CRITICAL_TEMPERATURE &&
            fabs(log(e->critical[i].pressure / critical->pressure)) < SAME_CRITICAL_PRESSURE) {
            return true;
        }
    }
    return false;
}

/* The critical point between the last two points, if the ratios pass through one there. */
static void note_critical(struct tracer *t)
{
    struct envelope *e = t->envelope;
    const size_t m = t->b.ws->active_count, last = e->point_count - 1;
    const double *before = envelope_point_at(e, last - 1), *after = envelope_point_at(e, last);
    const size_t ratio = envelope_fastest_ratio(&t->b, before);
    if (!envelope_is_across(&t->b, before, after) || e->critical_count == ENVELOPE_MOST_CRITICAL) {
        return;
    }
    const double part = before[ratio] / (before[ratio] - after[ratio]);
    const struct critical_point critical = {
        .temperature = exp(before[m] + part * (after[m] - before[m])),
        .pressure = exp(before[m + 1] + part * (after[m + 1] - before[m + 1])),
        .molar_volume = 0.5 * (e->feed_volume[last] + e->incipient_volume[last]),
    };
    if (!is_noted(e, &critical)) {
        e->critical[e->critical_count++] = critical;
    }
}

/* The point at hand, after any extrema before it. */
static bool add(struct tracer *t)
{
    struct equilibrium_workspace *ws = t->b.ws;
    const size_t bytes = t->b.size * sizeof(double);
    const double feed_volume = t->b.feed_volume, incipient_volume = t->b.incipient_volume;
    memcpy(ws->next_unknowns, t->b.X, bytes);
    memcpy(ws->next_slope, t->b.slope, bytes);
    store_extrema(t, ws->next_unknowns, ws->next_slope);
    memcpy(t->b.X, ws->next_unknowns, bytes);
    memcpy(t->slope, ws->next_slope, bytes);
    t->b.feed_volume = feed_volume;
    t->b.incipient_volume = incipient_volume;
    return store(t);
}

/* Not far outside the step it was meant to be a part of? Else it belongs to another critical point. */
static bool is_between(const struct tracer *t, const double *before, const double *after)
{
    const double *slope_before = t->b.ws->slope_before, *slope_after = t->b.ws->slope_after;
    const double length = after[t->held] - before[t->held];
    for (size_t a = 0; a < t->b.size; a++) {
        const double chord = after[a] - before[a];
        const double bulge = fabs(slope_before[a] * length - chord) + fabs(slope_after[a] * length - chord);
        const double reach = fabs(chord) + bulge + 1e-3;
        if (!(fabs(t->b.X[a] - 0.5 * (before[a] + after[a])) <= reach)) {
            return false;
        }
    }
    return true;
}

/* The step just taken passed a critical point: more points on either side of it, ever closer to it, so that little is
 * left between them where no point can be told from a trivial one. The closest are the ends of the cubic across it. */
static void approach_critical(struct tracer *t)
{
    struct equilibrium_workspace *ws = t->b.ws;
    const size_t bytes = t->b.size * sizeof(double);
    const double *before = envelope_point_at(t->envelope, t->envelope->point_count - 1);
    memcpy(ws->crossed, t->b.X, bytes);
    memcpy(ws->slope_before, t->slope, bytes);
    memcpy(ws->slope_after, t->b.slope, bytes);
    const double beside = fmin(0.04, BESIDE_CRITICAL / fabs(ws->crossed[t->held] - before[t->held]));
    const double parts[] = {0.2, 0.35, 0.45, 0.5 - beside, 0.5 + beside, 0.55, 0.65, 0.8};
    for (size_t k = 0; k < sizeof parts / sizeof *parts; k++) {
        envelope_curve_between(&t->b, t->held, before, ws->crossed, parts[k]);
        const enum answer answer = boundary_solve(&t->b, t->held, MOST_STEPS);
        if (answer == ANSWER_OK && is_between(t, before, ws->crossed) && add(t)) {
            note_critical(t);
        }
    }
    memcpy(t->b.X, ws->crossed, bytes);
    boundary_solve(&t->b, t->held, MOST_STEPS);
}

/* From the point at hand, stored, towards higher pressures or lower. */
static void follow(struct tracer *t, double direction, double coldest)
{
    const size_t m = t->b.ws->active_count;
    t->held = m + 1;
    t->direction = direction;
    t->step = 0.1;
    memcpy(t->slope, t->b.slope, t->b.size * sizeof(double));
    do {
        if (!advance(t)) {
            return;
        }
        if (envelope_is_across(&t->b, envelope_point_at(t->envelope, t->envelope->point_count - 1), t->b.X)) {
            approach_critical(t);
        }
        if (!add(t)) {
            return;
        }
        note_critical(t);
    } while (!is_at_end(t, coldest));
}

static void swap(double *a, double *b)
{
    const double kept = *a;
    *a = *b;
    *b = kept;
}

/* The points of the line at hand, the other way round. */
static void reverse(struct tracer *t)
{
    struct envelope *e = t->envelope;
    for (size_t k = 0; k < t->line->count / 2; k++) {
        const size_t one = t->line->first + k, other = t->line->first + t->line->count - 1 - k;
        for (size_t c = 0; c < t->b.size; c++) {
            swap(&envelope_point_at(e, one)[c], &envelope_point_at(e, other)[c]);
        }
        swap(&e->feed_volume[one], &e->feed_volume[other]);
        swap(&e->incipient_volume[one], &e->incipient_volume[other]);
    }
}

/* Downwards first, and then on from the same point upwards; how far down it got is seen from the first point. */
static void follow_both_ways(struct tracer *t)
{
    struct envelope *e = t->envelope;
    const size_t m = t->b.ws->active_count;
    const double coldest = t->b.X[m] + log(COLDEST);
    if (!store(t)) {
        return;
    }
    follow(t, -1.0, coldest);
    reverse(t);
    t->line->start = t->line->first + t->line->count - 1;
    t->line->end = ENVELOPE_END_LOST;
    memcpy(t->b.X, envelope_point_at(e, t->line->start), t->b.size * sizeof(double));
    t->b.expected_feed = e->feed_volume[t->line->start];
    t->b.expected_incipient = e->incipient_volume[t->line->start];
    if (boundary_solve(&t->b, m + 1, MOST_STEPS) == ANSWER_OK) {
        follow(t, 1.0, coldest);
    }
    /* Lost where it had come down again: what is left of it lies at lower pressures still. */
    if (t->line->end == ENVELOPE_END_LOST &&
        envelope_point_at(e, e->point_count - 1)[m + 1] < log(ENVELOPE_START_PRESSURE)) {
        t->line->end = ENVELOPE_END_LOW_PRESSURE;
    }
}

/* From the point at hand, unless a line starts there already. */
static void trace_line(struct tracer *t)
{
    struct envelope *e = t->envelope;
    const size_t m = t->b.ws->active_count;
    for (size_t l = 0; l < e->line_count; l++) {
        const size_t start = e->line[l].start;
        const bool is_same_side =
            (e->feed_volume[start] > e->incipient_volume[start]) == (t->b.feed_volume > t->b.incipient_volume);
        if (is_same_side && fabs(envelope_point_at(e, start)[m] - t->b.X[m]) < SAME_TEMPERATURE) {
            return;
        }
    }
    if (e->line_count < ENVELOPE_MOST_LINES && e->point_count < ENVELOPE_MOST_POINTS) {
        t->line = &e->line[e->line_count++];
        *t->line = (struct envelope_line){.first = e->point_count};
        follow_both_ways(t);
    }
}

/* A dew may be of all components, or nearly of one alone where that dissolves little of the others. */
static void trace_dew_lines(struct tracer *t)
{
    if (start_ideally(&t->b, true)) {
        trace_line(t);
    }
    for (size_t a = 0; a < t->b.ws->active_count && t->envelope->line_count + 1 < ENVELOPE_MOST_LINES; a++) {
        if (start_alone(&t->b, t->b.ws->active[a])) {
            trace_line(t);
        }
    }
}

/* Did one of the lines come down again on the bubble side? */
static bool has_come_round(const struct envelope *e)
{
    for (size_t l = 0; l < e->line_count; l++) {
        const size_t last = e->line[l].first + e->line[l].count - 1;
        const bool is_whole = e->line[l].end == ENVELOPE_END_LOW_PRESSURE || e->line[l].end == ENVELOPE_END_COLD;
        if (is_whole && e->feed_volume[last] < e->incipient_volume[last]) {
            return true;
        }
    }
    return false;
}

/* ---- its highest temperature and pressure ---------------------------------------------------------------------- */

/* The point of highest unknown `a`, if it lies inside a line: extrema have been stored as points. */
static bool report_highest(struct tracer *t, size_t a, struct boundary_point *out)
{
    struct envelope *e = t->envelope;
    size_t highest = 0;
    bool is_inside = false;
    for (size_t l = 0; l < e->line_count; l++) {
        for (size_t k = 0; k < e->line[l].count; k++) {
            const size_t here = e->line[l].first + k;
            if (here == 0 || envelope_point_at(e, here)[a] > envelope_point_at(e, highest)[a]) {
                highest = here;
                is_inside = k > 0 && k + 1 < e->line[l].count;
            }
        }
    }
    if (!is_inside) {
        return false;
    }
    memcpy(t->b.X, envelope_point_at(e, highest), t->b.size * sizeof(double));
    t->b.expected_feed = e->feed_volume[highest];
    t->b.expected_incipient = e->incipient_volume[highest];
    const size_t m = t->b.ws->active_count;
    return boundary_solve(&t->b, a == m ? m + 1 : m, MOST_STEPS) == ANSWER_OK &&
           boundary_report(&t->b, out) == ANSWER_OK;
}

enum answer envelope_trace(struct fluid_at_t *at_t, const struct fluid *fluid, const double z[],
                           struct equilibrium_workspace *ws, struct envelope *out)
{
    struct tracer t = {.envelope = out};
    out->point_count = out->line_count = out->critical_count = 0;
    out->has_cricondentherm = out->has_cricondenbar = false;
    if (!workspace_set_feed(ws, z)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (ws->active_count < 2) {
        return ANSWER_CANNOT;
    }
    const enum answer answer = fluid_set_t(at_t, fluid, 300.0); /* any: the first point sets its own */
    if (answer != ANSWER_OK) {
        return answer;
    }
    boundary_begin(&t.b, at_t, at_t, ws, ws->unknowns, ws->partial_volume);
    t.slope = ws->border;
    trace_dew_lines(&t);
    if (!has_come_round(out) && start_ideally(&t.b, false)) {
        trace_line(&t);
    }
    if (out->line_count == 0) {
        return ANSWER_NO_SUCH_ROOT;
    }
    out->has_cricondentherm = report_highest(&t, ws->active_count, out->cricondentherm);
    out->has_cricondenbar = report_highest(&t, ws->active_count + 1, out->cricondenbar);
    return ANSWER_OK;
}
