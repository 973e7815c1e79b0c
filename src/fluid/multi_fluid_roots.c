/* Density roots of a multi-fluid mixture at given temperature, pressure and composition.
 *
 * The vapour root is the first mechanically stable one going up from zero density, the liquid root the first going down
 * from the largest density; roots between, which such equations have many of, are never looked at while there is one of
 * these two. There is no saturation line to start from as for a pure gas, so each branch is walked from its own end: up
 * from the root of the virial equation with the mixture's own second coefficient, down from a dense liquid. Both ways
 * the isotherm is curved so that Newton's steps fall short of the root, and no step is longer than a loop is wide.
 *
 * All components have their critical points near tau = 1, delta = 1, and so has their sum: well below tau = 1 an
 * isotherm has no loop, and a few points about delta = 1 tell the same nearer to it.
 *
 * Here densities are delta, pressures p / (R T rho_r) and stiffnesses (dp/drho) / (R T). */
#include "fluid/multi_fluid_internal.h"

#include <math.h>

/* Relative step at which the density stepped to is the answer; the steps shrink at least quadratically. */
#define DENSITY_TOLERANCE 1e-9
#define MOST_PASSES       100
/* A bracket this narrow that holds no root has none. */
#define NARROWEST_BRACKET 1e-12
/* Relative steps on a branch that may end: no loop is narrower. */
#define VAPOUR_STEP 0.2
#define LIQUID_STEP 0.15
/* Below this delta a vapour's steps need no limit that narrow, as its loops are as wide as it is thin. */
#define DILUTE      0.05
#define DILUTE_STEP 0.5
/* Starting value of the slope of the bulk modulus in pressure, for a liquid and for a gas. */
#define LIQUID_STIFFENING 8.0
#define GAS_STIFFENING    1.0
/* Isotherms of a tau up to the first are taken to be free of loops, up to the second they are looked at: the departure
 * functions move the end of the loops away from tau = 1 by less than that. */
#define MONOTONE_TAU 0.75
#define SEARCHED_TAU 1.15
/* The stiffness left at all points looked at, for the isotherm between them to be without loops. */
#define LEAST_STIFFNESS 0.05
/* Up to this tau a root between the branches may stand in for a feed; colder, what lies between is a spurious loop. */
#define MIDDLE_TAU 1.3
/* The delta at which second virial coefficients are taken. */
#define VIRIAL_DELTA 1e-5
/* Two roots nearer than this are one. */
#define SAME_ROOT 1e-7

enum side { SIDE_VAPOUR, SIDE_LIQUID, SIDE_SINGLE };

struct spot {
    double delta, pressure, stiffness;
    double log_activity; /* alphar + delta dalphar/ddelta, ln f of the mixture against rho R T */
};

struct search {
    struct parts_state *parts;
    enum side side;
    double pressure;
    double low, high;  /* deltas the root lies between */
    bool high_is_wall; /* `high` is the largest delta and has not been looked at */
    bool far_is_seen;  /* the far end was narrowed: bisection cannot land beyond a loop */
    bool has_end;      /* the far end is mechanically unstable: the branch ends before it */
};

static struct spot spot_at(struct parts_state *parts, double delta)
{
    struct residual_sums sums;
    parts_by_density(parts, delta, &sums);
    return (struct spot){.delta = delta,
                         .pressure = delta * (1.0 + sums.d),
                         .stiffness = 1.0 + 2.0 * sums.d + sums.dd,
                         .log_activity = sums.value + sums.d};
}

/* ---- one root ---------------------------------------------------------------------------------------------------- */

/* By Murnaghan's law, as in reference_roots.c; negative where it has no answer. */
static double step_from(const struct spot *spot, double pressure, double m)
{
    const double strain = (pressure - spot->pressure) / (spot->delta * spot->stiffness);
    if (fabs(m) < 0.01) {
        return spot->delta * exp(strain);
    }
    const double base = 1.0 + m * strain;
    return base > 0.0 ? spot->delta * exp(log(base) / m) : -1.0;
}

/* The slope of the bulk modulus between two densities; `usual` where they tell nothing. */
static double stiffening(const struct spot *a, const struct spot *b, double usual)
{
    const double rise = a->pressure - b->pressure;
    const double m = (a->delta * a->stiffness - b->delta * b->stiffness) / (fabs(rise) > 0.0 ? rise : 1.0);
    return fabs(m) < 40.0 && fabs(rise) > 0.0 ? m : usual;
}

static double middle(const struct search *search)
{
    return search->low > 0.0 ? sqrt(search->low * search->high) : 0.5 * search->high;
}

/* Keeps a step inside the bracket, and on a branch that may end no longer than a loop is wide. */
static double limited(const struct search *search, double delta, double next)
{
    const bool is_lost = !(next > search->low && next < search->high);
    switch (search->side) {
    case SIDE_VAPOUR: {
        const double farthest = delta * (1.0 + (delta < DILUTE ? DILUTE_STEP : VAPOUR_STEP));
        next = is_lost || next > farthest ? farthest : next;
        return next < search->high ? next : 0.5 * (delta + search->high);
    }
    case SIDE_LIQUID: {
        const double farthest = delta * (1.0 - LIQUID_STEP);
        /* Upward, to a pressure above what was seen, a liquid's steps fall short by themselves. */
        next = is_lost ? (delta < search->high && search->high_is_wall ? middle(search) : farthest) : next;
        next = fmax(next, farthest);
        return next > search->low ? next : 0.5 * (delta + search->low);
    }
    case SIDE_SINGLE:
        break;
    }
    return is_lost ? middle(search) : next;
}

/* By concavity (convexity) no density up to the unstable end of the bracket reaches the pressure. */
static bool is_lost(const struct search *search, const struct spot *spot)
{
    if (!search->has_end) {
        return false;
    }
    switch (search->side) {
    case SIDE_VAPOUR:
        return spot->pressure < search->pressure &&
               spot->pressure + spot->stiffness * (search->high - spot->delta) < search->pressure;
    case SIDE_LIQUID:
        return spot->pressure > search->pressure &&
               spot->pressure - spot->stiffness * (spot->delta - search->low) > search->pressure;
    case SIDE_SINGLE:
        break;
    }
    return false;
}

/* Narrows the bracket by what was seen at a density. */
static void narrow(struct search *search, const struct spot *spot)
{
    const bool stable = spot->stiffness > 0.0;
    const bool reaches = spot->pressure >= search->pressure;
    search->has_end = search->has_end || !stable;
    const bool above = search->side == SIDE_VAPOUR   ? !stable || reaches
                       : search->side == SIDE_LIQUID ? stable && reaches
                                                     : reaches;
    if (above) {
        search->high = spot->delta;
        search->high_is_wall = false;
        search->far_is_seen = search->far_is_seen || search->side == SIDE_VAPOUR;
    } else {
        search->low = spot->delta;
        search->far_is_seen = search->far_is_seen || search->side == SIDE_LIQUID;
    }
}

/* True when the pressure lies beyond the one at the largest density. */
static bool passes_wall(struct search *search, double next)
{
    if (!search->high_is_wall || next < search->high) {
        return false;
    }
    search->high_is_wall = false;
    return spot_at(search->parts, search->high).pressure < search->pressure;
}

static enum answer find_root(struct search *search, double delta, double usual, struct spot *root)
{
    struct spot last = {0};
    bool has_last = false;
    for (int pass = 1; pass <= MOST_PASSES; pass++) {
        struct spot spot = spot_at(search->parts, delta);
        if (has_last && (spot.delta - last.delta) * (spot.pressure - last.pressure) < 0.0) {
            spot.stiffness = 0.0; /* a loop lies between the two */
        }
        if (!isfinite(spot.pressure) || !isfinite(spot.stiffness)) {
            return ANSWER_FAILED;
        }
        narrow(search, &spot);
        double next = middle(search);
        if (spot.stiffness > 0.0) {
            const double m = has_last ? stiffening(&spot, &last, usual) : usual;
            const double free_step = step_from(&spot, search->pressure, m);
            if (fabs(free_step - delta) <= DENSITY_TOLERANCE * delta) {
                *root = spot;
                root->delta = free_step;
                return ANSWER_OK;
            }
            if (is_lost(search, &spot)) {
                return ANSWER_NO_SUCH_ROOT;
            }
            if (passes_wall(search, free_step)) {
                return ANSWER_OUT_OF_RANGE;
            }
            /* Every eighth pass halves the bracket, so that no shape of isotherm keeps it from closing. */
            next = pass % 8 == 0 && search->far_is_seen ? next : limited(search, delta, free_step);
            last = spot;
            has_last = true;
        }
        if (search->high - search->low <= NARROWEST_BRACKET * search->high) {
            *root = spot;
            root->delta = next;
            return search->side == SIDE_SINGLE ? ANSWER_OK : ANSWER_NO_SUCH_ROOT;
        }
        delta = next;
    }
    return ANSWER_FAILED;
}

/* ---- the ends of the branches --------------------------------------------------------------------------------------
 */

/* The mean of the components' largest deltas at this tau. */
static double largest_delta(const struct multi_fluid *fluid, const struct multi_fluid_work *w)
{
    const double place = multi_fluid_node_of_tau(w->tau);
    const size_t node = (size_t)fmin(place, MULTI_FLUID_NODES - 2);
    const double part = place - (double)node;
    double sum = 0.0;
    for (size_t i = 0; i < fluid->head.count; i++) {
        const double *delta = &fluid->largest_delta[i][node];
        sum += w->x[i] * (delta[0] + part * (delta[1] - delta[0]));
    }
    return sum;
}

/* Whether the isotherm may have an unstable part; found once for each composition. */
static bool may_loop(struct multi_fluid_work *w)
{
    static const double looked_at[] = {1.0, 0.8, 1.25, 0.6, 1.5, 0.4};
    if (w->isotherm == ISOTHERM_UNKNOWN) {
        w->isotherm = w->tau <= MONOTONE_TAU ? ISOTHERM_MONOTONE : ISOTHERM_MAY_LOOP;
        bool is_stiff = w->tau > MONOTONE_TAU && w->tau <= SEARCHED_TAU;
        for (size_t i = 0; is_stiff && i < sizeof looked_at / sizeof *looked_at; i++) {
            is_stiff = spot_at(w->parts, looked_at[i]).stiffness > LEAST_STIFFNESS;
        }
        if (is_stiff) {
            w->isotherm = ISOTHERM_MONOTONE;
        }
    }
    return w->isotherm == ISOTHERM_MAY_LOOP;
}

/* From the root of p = rho R T (1 + B rho), or from the end of that equation's own vapour branch. */
static enum answer vapour_root(struct multi_fluid_work *w, double pressure, double largest, struct search *search,
                               struct spot *root)
{
    const double B = (spot_at(w->parts, VIRIAL_DELTA).pressure / VIRIAL_DELTA - 1.0) / VIRIAL_DELTA;
    const double square = 1.0 + 4.0 * B * pressure;
    const double start = square > 0.0 ? 2.0 * pressure / (1.0 + sqrt(square)) : -0.5 / B;
    *search = (struct search){
        .parts = w->parts, .side = SIDE_VAPOUR, .pressure = pressure, .high = largest, .high_is_wall = true};
    return find_root(search, fmin(start, 0.9 * largest), GAS_STIFFENING, root);
}

/* A delta above the saturated liquid's, after the rectilinear form of Guggenheim (J. Chem. Phys. 13 (1945) 253). */
static double dense_start(double tau, double largest)
{
    const double theta = fmax(0.0, 1.0 - 1.0 / tau);
    return fmin(1.15 * (1.0 + 1.75 * cbrt(theta) + 0.75 * theta), largest);
}

static enum answer liquid_root(struct multi_fluid_work *w, double pressure, double largest, struct search *search,
                               struct spot *root)
{
    *search = (struct search){.parts = w->parts, .side = SIDE_LIQUID, .pressure = pressure, .high = 1.001 * largest};
    double start = dense_start(w->tau, largest);
    struct spot spot = spot_at(w->parts, start);
    if (!(spot.stiffness > 0.0 && spot.pressure >= pressure)) {
        start = largest;
        spot = spot_at(w->parts, start);
    }
    if (spot.stiffness > 0.0 && spot.pressure < pressure) {
        return ANSWER_OUT_OF_RANGE;
    }
    while (!(spot.stiffness > 0.0) && start > 1.0) {
        start *= 1.0 - 0.3 * LIQUID_STEP;
        spot = spot_at(w->parts, start);
        search->high = start * 1.001;
    }
    return spot.stiffness > 0.0 && spot.pressure >= pressure ? find_root(search, start, LIQUID_STIFFENING, root)
                                                             : ANSWER_NO_SUCH_ROOT;
}

/* Z of the Peng-Robinson equation from the gas side, by a few of Newton's steps: a starting value only. */
static double cubic_Z(double A, double B)
{
    double Z = 1.0 + B;
    for (int i = 0; i < 12; i++) {
        const double c2 = B - 1.0, c1 = A - B * (2.0 + 3.0 * B), c0 = B * (B * (1.0 + B) - A);
        const double f = ((Z + c2) * Z + c1) * Z + c0;
        const double slope = (3.0 * Z + 2.0 * c2) * Z + c1;
        const double step = slope != 0.0 ? f / slope : 0.0;
        Z = fmax(Z - step, B + 0.05 * (Z - B));
        if (fabs(step) < 1e-3 * Z) {
            break;
        }
    }
    return Z;
}

/* The one root of an isotherm without loops, from the cubic equation at the same reduced state; Z_c = 0.28. */
static enum answer single_root(const struct multi_fluid *fluid, struct multi_fluid_work *w, double pressure,
                               double largest, struct spot *root)
{
    const double reduced = pressure / (0.28 * w->tau); /* p over R T_r rho_r Z_c */
    const double a = fluid->acentric;
    const double alpha = 1.0 + (0.37464 + a * (1.54226 - 0.26992 * a)) * (1.0 - sqrt(1.0 / w->tau));
    const double Z = cubic_Z(0.45724 * alpha * alpha * reduced * w->tau * w->tau, 0.0778 * reduced * w->tau);
    struct search search = {.parts = w->parts,
                            .side = SIDE_SINGLE,
                            .pressure = pressure,
                            .high = largest,
                            .high_is_wall = true,
                            .far_is_seen = true};
    const double start = fmin(pressure / Z, largest);
    return find_root(&search, start, start > 1.5 ? LIQUID_STIFFENING : GAS_STIFFENING, root);
}

/* ---- the branches --------------------------------------------------------------------------------------------------
 */

/* A spurious loop near the mixture's own critical density can leave pressures above the vapour branch's highest and
 * below the liquid branch's lowest. A mixture forms two phases there, but whoever finds them out needs the feed as one
 * phase to start from: the isotherm rises through the pressure between the two ends, and that root is taken. */
static enum answer middle_root(const struct search *vapour, const struct search *liquid, struct spot *root)
{
    struct search search = {.parts = vapour->parts,
                            .side = SIDE_SINGLE,
                            .pressure = vapour->pressure,
                            .low = vapour->low,
                            .high = liquid->high,
                            .far_is_seen = true};
    return search.low < search.high ? find_root(&search, middle(&search), GAS_STIFFENING, root) : ANSWER_NO_SUCH_ROOT;
}

/* Of two different roots the one of lower Gibbs energy, ln f = ln rho + alphar + delta dalphar/ddelta + ... */
static enum answer stable_root(struct multi_fluid_work *w, double pressure, double largest, struct spot *root,
                               int *roots)
{
    struct spot vapour, liquid;
    struct search up, down;
    const enum answer has_vapour = vapour_root(w, pressure, largest, &up, &vapour);
    const enum answer has_liquid = liquid_root(w, pressure, largest, &down, &liquid);
    if (has_vapour == ANSWER_NO_SUCH_ROOT && has_liquid == ANSWER_NO_SUCH_ROOT && w->tau <= MIDDLE_TAU) {
        return middle_root(&up, &down, root);
    }
    if (has_vapour == ANSWER_OK && has_liquid == ANSWER_OK) {
        *roots = fabs(liquid.delta - vapour.delta) > SAME_ROOT * liquid.delta ? 2 : 1;
        *root = log(vapour.delta) + vapour.log_activity <= log(liquid.delta) + liquid.log_activity ? vapour : liquid;
        return ANSWER_OK;
    }
    *root = has_vapour == ANSWER_OK ? vapour : liquid;
    return has_vapour == ANSWER_OK ? has_vapour : has_liquid;
}

static enum answer root_on(const struct multi_fluid *fluid, struct multi_fluid_work *w, double pressure,
                           enum branch branch, struct spot *root, int *roots)
{
    const double largest = largest_delta(fluid, w);
    *roots = 1;
    if (!may_loop(w)) {
        return single_root(fluid, w, pressure, largest, root);
    }
    struct search search;
    switch (branch) {
    case BRANCH_VAPOUR:
        return vapour_root(w, pressure, largest, &search, root);
    case BRANCH_LIQUID:
        return liquid_root(w, pressure, largest, &search, root);
    case BRANCH_STABLE:
        break;
    }
    return stable_root(w, pressure, largest, root, roots);
}

static enum answer volume_at_stage(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                   enum multi_fluid_stage stage, double *volume, int *roots)
{
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    if (!(pressure > 0.0) || !isfinite(pressure)) {
        return ANSWER_OUT_OF_RANGE;
    }
    enum answer answer = multi_fluid_set_amounts(at_t, n, stage);
    if (answer != ANSWER_OK) {
        return answer;
    }
    struct spot root;
    const double scaled = pressure * w->reducing_volume / (at_t->fluid->gas_constant * at_t->temperature);
    answer = root_on(multi_fluid_of(at_t), w, scaled, branch, &root, roots);
    if (answer == ANSWER_OK) {
        *volume = w->amount * w->reducing_volume / root.delta;
    }
    return answer;
}

enum answer multi_fluid_volume(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                               double *volume, int *roots)
{
    return volume_at_stage(at_t, pressure, n, branch, STAGE_VALUES, volume, roots);
}

enum answer multi_fluid_volume_and_tv(const struct fluid_at_t *at_t, double pressure, const double n[],
                                      enum branch branch, unsigned want, double *volume, int *roots,
                                      struct helmholtz *out)
{
    const enum answer answer = volume_at_stage(at_t, pressure, n, branch, multi_fluid_stage_for(want), volume, roots);
    return answer != ANSWER_OK ? answer : multi_fluid_energy(at_t, *volume, want, out);
}

double multi_fluid_smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    if (multi_fluid_set_amounts(at_t, n, STAGE_VALUES) != ANSWER_OK) {
        return 0.0;
    }
    return w->amount * w->reducing_volume / largest_delta(multi_fluid_of(at_t), w);
}
