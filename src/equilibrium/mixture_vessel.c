/* The closed vessel.
 *
 * As one phase its contents have a pressure; where that is positive and mechanically stable, the tangent-plane test at
 * that pressure decides, as equal T, p and ln f is what equilibrium at T, V means too.
 *
 * Otherwise the unknowns of the flash (split.c) and the pressure are solved for together. With w_ik the difference of
 * the partial volumes of i in its phases k and r(i), c = -dV/dp of all phases, and r what is missing to the volume,
 *   H dn + w dp / (R T) = -g,   w' dn - c dp = r
 * gives (H + w w' / (c R T)) dn = -g + w r / (c R T), whose matrix is the Hessian of the Helmholtz energy and positive
 * definite also where that of the Gibbs energy is not: a pure fluid, an azeotrope (Michelsen, Fluid Phase Equilib.
 * 158-160 (1999) 617).
 *
 * First values come from a state nearby, or from substitution with the pressure that fills the volume in each pass.
 * Failing that the pressure is bracketed by flashes: at equilibrium the volume only falls with rising pressure. Where
 * it falls at once, as at the vapour pressure of a pure fluid or where a binary has three phases, the phases of both
 * sides together are first values for all that are there.
 */
#include "equilibrium/mixture_vessel.h"
#include "equilibrium/linear.h"
#include "equilibrium/split_internal.h"

#include <math.h>
#include <string.h>

enum { MOST_STEPS = 30, MOST_SHIFTS = 12, MOST_PARTS = 12, PASSES = 4, MOST_PRESSURES = 80, MOST_FLASHES = 200 };

/* Relative to the volume: what the phases may leave unfilled. */
#define VOLUME_TOLERANCE 1e-10
/* The last step changes no amount and no pressure by more than this part. */
#define LAST_STEP 1e-7
#define SETTLED   1e-13
/* Beyond this part a step in pressure is taken in its logarithm. */
#define LARGEST_PRESSURE_STEP 0.5
/* A molar volume of liquids by their smallest one, for first values. */
#define LIQUID_BY_SMALLEST 1.25
/* Phases on two sides of a pressure that differ by less, in a mole fraction or by part of the volume, are one. */
#define MOST_TWINS_DIFFER 0.05
/* How near the two sides are, by part of the pressure, when they are first joined, and by what factor again. */
#define FIRST_NEAR 1e-2
#define NEARER     1e-2

struct filling {
    struct flash flash;
    double volume; /* m3 by mole of feed */
    double RT;
};

/* ---- both amounts and pressure --------------------------------------------------------------------------------- */

static double volume_of_phases(const struct flash *f)
{
    double volume = 0.0;
    for (size_t k = 0; k < f->phases; k++) {
        volume += f->ws->phase[k]->volume;
    }
    return volume;
}

/* -dV/dp at constant amounts. */
static double compliance_of_phases(const struct flash *f)
{
    double sum = 0.0;
    for (size_t k = 0; k < f->phases; k++) {
        sum -= 1.0 / f->ws->phase[k]->dp_dv;
    }
    return sum;
}

static double partial_volume(const struct phase *phase, size_t i)
{
    return -phase->dp_dn[i] / phase->dp_dv;
}

/* Scaled as the unknowns are. */
static void set_partial_volumes(const struct flash *f)
{
    struct equilibrium_workspace *ws = f->ws;
    for (size_t a = 0; a < flash_unknowns_of(f); a++) {
        const struct unknown u = flash_unknown_at(f, a);
        ws->partial_volume[a] =
            ws->scale[a] * (partial_volume(ws->phase[u.phase], u.i) - partial_volume(ws->phase[u.rest], u.i));
    }
}

static bool factor_helmholtz_hessian(const struct flash *f, double shift, double weight)
{
    struct equilibrium_workspace *ws = f->ws;
    const size_t size = flash_unknowns_of(f);
    flash_set_hessian(f, shift);
    for (size_t a = 0; a < size; a++) {
        for (size_t b = 0; b <= a; b++) {
            ws->matrix[a * size + b] += weight * ws->partial_volume[a] * ws->partial_volume[b];
        }
    }
    return linear_factor(ws->matrix, size);
}

/* The step in amounts, in ws->step, and the one in pressure. */
static double joint_step(struct filling *v)
{
    struct flash *f = &v->flash;
    struct equilibrium_workspace *ws = f->ws;
    const size_t size = flash_unknowns_of(f);
    const double c = compliance_of_phases(f), missing = v->volume - volume_of_phases(f);
    double shift = 0.0, swelling = 0.0;
    flash_set_gradient(f, ws->border);
    set_partial_volumes(f);
    for (int k = 0; !factor_helmholtz_hessian(f, shift, 1.0 / (c * v->RT)) && k < MOST_SHIFTS; k++) {
        shift = shift > 0.0 ? 10.0 * shift : 1e-8;
    }
    for (size_t a = 0; a < size; a++) {
        ws->step[a] = -ws->scale[a] * ws->border[a] + ws->partial_volume[a] * missing / (c * v->RT);
    }
    linear_solve_factored(ws->matrix, size, ws->step);
    for (size_t a = 0; a < size; a++) {
        swelling += ws->partial_volume[a] * ws->step[a];
        ws->step[a] *= ws->scale[a];
    }
    return (swelling - missing) / c;
}

static double moved_pressure(double pressure, double change)
{
    const double part = change / pressure;
    return fabs(part) <= LARGEST_PRESSURE_STEP ? pressure + change : pressure * exp(fmax(-1.0, fmin(1.0, part)));
}

static bool is_filled(const struct filling *v)
{
    return fabs(volume_of_phases(&v->flash) / v->volume - 1.0) <= VOLUME_TOLERANCE;
}

/* All that is left is rounding: an amount near zero may then still change by much of itself. */
static bool is_settled(const struct filling *v)
{
    return v->flash.residual <= SETTLED && fabs(volume_of_phases(&v->flash) / v->volume - 1.0) <= SETTLED;
}

/* From amounts and pressure at hand. False, wherever that led, unless it converged. */
static bool solve_jointly(struct filling *v)
{
    struct flash *f = &v->flash;
    const unsigned want = PHASE_LN_PHI | PHASE_DLN_PHI_DN | PHASE_DP_DN;
    bool is_last = false;
    double last = HUGE_VAL;
    for (int step = 0; step < MOST_STEPS; step++) {
        if (flash_evaluate(f, is_last ? (unsigned)PHASE_LN_PHI : want, f->ws->amounts, &f->gibbs) != ANSWER_OK) {
            return false;
        }
        if (is_last) {
            flash_set_gradient(f, f->ws->border);
            return f->residual <= SPLIT_LN_F_TOLERANCE && is_filled(v);
        }
        f->out->steps++;
        const double change = joint_step(v);
        double part = 1.0;
        for (int k = 0; !flash_take_step(f, part) && k < MOST_PARTS; k++) {
            part *= 0.5;
        }
        const double largest = fmax(flash_largest_change(f), fabs(change) / f->pressure);
        is_last = largest <= LAST_STEP || (is_settled(v) && largest > 0.3 * last);
        last = largest;
        flash_accept_candidate(f->ws, f->phases);
        f->pressure = moved_pressure(f->pressure, part * change);
        if (!(f->pressure > 0.0) || !isfinite(f->pressure)) {
            return false;
        }
    }
    return false;
}

/* The plane is that of the phases, at the pressure found: ws->ln_pure must follow it. */
static bool is_proved(struct filling *v)
{
    struct stability found;
    workspace_set_pure(v->flash.ws, v->flash.at_t, v->flash.pressure);
    return flash_prove(&v->flash, &found) == ANSWER_OK && found.smallest_tpd >= -SPLIT_LEAST_TPD;
}

static bool are_distinct(const struct flash *f)
{
    const struct equilibrium_workspace *ws = f->ws;
    for (size_t k = 0; k < f->phases; k++) {
        for (size_t l = 0; l < k; l++) {
            const double v_k = ws->phase[k]->volume / ws->phase[k]->amount;
            const double v_l = ws->phase[l]->volume / ws->phase[l]->amount;
            double difference = fabs(v_k / v_l - 1.0);
            for (size_t a = 0; a < ws->active_count; a++) {
                const size_t i = ws->active[a];
                difference = fmax(difference, fabs(ws->amounts[k][i] / ws->phase[k]->amount -
                                                   ws->amounts[l][i] / ws->phase[l]->amount));
            }
            if (!(difference > 1e-7)) {
                return false;
            }
        }
    }
    return true;
}

static bool solve_and_prove(struct filling *v)
{
    return solve_jointly(v) && are_distinct(&v->flash) && is_proved(v);
}

/* ---- pressures between two others ------------------------------------------------------------------------------- */

/* A pressure too low or too high, with the volume and the phases there. */
struct side {
    double pressure, volume;
    struct split *split; /* of a flash, in memory of the vessel's own */
};

/* By false position in the logarithms of pressure and volume, and every third time by halving. */
static double next_pressure(const struct filling *v, const struct side *low, const struct side *high, int count)
{
    const double middle = sqrt(low->pressure * high->pressure);
    const double span = high->volume > 0.0 ? log(low->volume / high->volume) : 0.0;
    if (count % 3 == 2 || !(fabs(span) > 0.0)) {
        return middle;
    }
    const double part = log(low->volume / v->volume) / span;
    const double next = low->pressure * pow(high->pressure / low->pressure, part);
    return next > low->pressure && next < high->pressure ? next : middle;
}

/* ---- first values by substitution ------------------------------------------------------------------------------ */

/* What two phases of ratios K, with ln(K p) in ws->kept_ln_W, would fill at a pressure. */
struct guess {
    double Z;            /* of the lighter phase */
    double heavy_volume; /* m3/mol */
};

static void set_ratios(struct filling *v, double pressure)
{
    struct equilibrium_workspace *ws = v->flash.ws;
    const double ln_p = log(pressure);
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->ln_K[i] = ws->kept_ln_W[i] - ln_p;
    }
}

/* Without a split there is vapour alone where the ratios are the larger, and liquid alone where they are the smaller.
 */
static bool is_vapour_alone(const struct equilibrium_workspace *ws)
{
    double at_none = 0.0, at_all = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        at_none += ws->feed[i] * exp(fmin(ws->ln_K[i], 600.0));
        at_all += ws->feed[i] * exp(fmin(-ws->ln_K[i], 600.0));
    }
    return at_all < at_none;
}

static double guessed_volume(struct filling *v, const struct guess *guess, double pressure)
{
    struct equilibrium_workspace *ws = v->flash.ws;
    double light = 0.0;
    set_ratios(v, pressure);
    if (!split_by_ratios(ws)) {
        return is_vapour_alone(ws) ? guess->Z * v->RT / pressure : guess->heavy_volume;
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        light += ws->amounts[0][ws->active[a]];
    }
    return light * guess->Z * v->RT / pressure + (1.0 - light) * guess->heavy_volume;
}

/* The pressure at which they fill the vessel, bracketed outwards from the last one and then by false position in the
 * logarithms; false where they then are one phase. */
static bool guess_pressure(struct filling *v, const struct guess *guess)
{
    struct side low = {v->flash.pressure, 0.0, NULL}, high;
    low.volume = guessed_volume(v, guess, low.pressure);
    high = low;
    double factor = 1.5;
    for (; low.volume < v->volume && low.pressure > 1e-12; factor *= factor) {
        high = low;
        low.pressure /= factor;
        low.volume = guessed_volume(v, guess, low.pressure);
    }
    for (; high.volume > v->volume && high.pressure < 1e12; factor *= factor) {
        low = high;
        high.pressure *= factor;
        high.volume = guessed_volume(v, guess, high.pressure);
    }
    for (int k = 0; k < MOST_PRESSURES && high.pressure > low.pressure * (1.0 + 1e-3); k++) {
        const double pressure = next_pressure(v, &low, &high, k);
        const double volume = guessed_volume(v, guess, pressure);
        *(volume > v->volume ? &low : &high) = (struct side){pressure, volume, NULL};
        if (fabs(volume / v->volume - 1.0) < 1e-3) {
            low = high = (struct side){pressure, volume, NULL};
        }
    }
    v->flash.pressure = sqrt(low.pressure * high.pressure);
    set_ratios(v, v->flash.pressure);
    return split_by_ratios(v->flash.ws);
}

/* The ratios and volumes of the phases just evaluated. */
static void set_guess(struct filling *v, struct guess *guess)
{
    struct equilibrium_workspace *ws = v->flash.ws;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->kept_ln_W[i] = ws->phase[1]->ln_phi[i] - ws->phase[0]->ln_phi[i] + log(v->flash.pressure);
    }
    guess->Z = ws->phase[0]->Z;
    guess->heavy_volume = ws->phase[1]->volume / ws->phase[1]->amount;
}

static bool start_by_substitution(struct filling *v)
{
    struct flash *f = &v->flash;
    struct equilibrium_workspace *ws = f->ws;
    struct guess guess = {1.0, LIQUID_BY_SMALLEST * phase_smallest_volume(f->at_t, ws->feed)};
    workspace_set_pure(ws, f->at_t, 1.0);
    f->pressure = v->RT / v->volume;
    for (size_t i = 0; i < ws->count; i++) {
        ws->kept_ln_W[i] = ws->ln_pure[i];
    }
    f->phases = 2;
    for (int pass = 0; pass < PASSES; pass++) {
        if (!guess_pressure(v, &guess) || flash_evaluate(f, PHASE_LN_PHI, ws->amounts, &f->gibbs) != ANSWER_OK) {
            return false;
        }
        set_guess(v, &guess);
    }
    return true;
}

/* From the contents found before, brought to this feed: each component divided between the phases as it was. */
static bool start_nearby(struct filling *v, const struct mixture_vessel *start)
{
    struct flash *f = &v->flash;
    if (start == NULL || start->split->phase_count < 2 || !(start->split->pressure > 0.0)) {
        return false;
    }
    f->phases = start->split->phase_count;
    for (size_t a = 0; a < f->ws->active_count; a++) {
        const size_t i = f->ws->active[a];
        double held = 0.0;
        for (size_t k = 0; k < f->phases; k++) {
            held += start->split->phase[k].fraction * start->split->phase[k].x[i];
        }
        for (size_t k = 0; k < f->phases; k++) {
            const double part = start->split->phase[k].fraction * start->split->phase[k].x[i] / held;
            if (!(part > 0.0)) {
                return false;
            }
            f->ws->amounts[k][i] = part * f->ws->feed[i];
        }
    }
    f->pressure = start->split->pressure * f->at_t->temperature / start->split->temperature;
    return true;
}

/* ---- by flashes at trial pressures ----------------------------------------------------------------------------- */

static enum answer flash_at(struct filling *v, double pressure)
{
    struct flash *f = &v->flash;
    f->pressure = pressure;
    const enum answer answer = split_at_tp(f->at_t, pressure, f->ws->feed, f->ws, f->out);
    f->phases = f->out->phase_count;
    return answer;
}

static double volume_of_split(const struct split *split)
{
    double volume = 0.0;
    for (size_t k = 0; k < split->phase_count; k++) {
        volume += split->phase[k].fraction * split->phase[k].molar_volume;
    }
    return volume;
}

/* After a flash of two or more phases their amounts stand in the workspace. */
static bool finish_from_flash(struct filling *v)
{
    return v->flash.phases > 1 && solve_and_prove(v);
}

static void copy_phase(struct split_phase *to, const struct split_phase *from, size_t count)
{
    to->fraction = from->fraction;
    to->molar_volume = from->molar_volume;
    memcpy(to->x, from->x, count * sizeof *to->x);
}

/* The flash at hand becomes one side of the pressure looked for. */
static void set_side(struct filling *v, struct side *side, double volume)
{
    const struct split *found = v->flash.out;
    side->pressure = v->flash.pressure;
    side->volume = volume;
    side->split->phase_count = found->phase_count;
    for (size_t k = 0; k < found->phase_count; k++) {
        copy_phase(&side->split->phase[k], &found->phase[k], v->flash.ws->count);
    }
}

static double difference_of(const struct split_phase *one, const struct split_phase *other, size_t count)
{
    double largest = fabs(one->molar_volume / other->molar_volume - 1.0);
    for (size_t i = 0; i < count; i++) {
        largest = fmax(largest, fabs(one->x[i] - other->x[i]));
    }
    return largest;
}

/* Which phase of the other side goes on as this one; its phase count where none does. */
static size_t twin_of(const struct split_phase *phase, const struct split *other, size_t count)
{
    size_t twin = other->phase_count;
    double least = MOST_TWINS_DIFFER;
    for (size_t k = 0; k < other->phase_count; k++) {
        const double difference = difference_of(phase, &other->phase[k], count);
        if (difference < least) {
            least = difference;
            twin = k;
        }
    }
    return twin;
}

static void add_phase(struct filling *v, size_t k, double part, const struct split_phase *phase)
{
    struct equilibrium_workspace *ws = v->flash.ws;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        ws->amounts[k][i] += part * phase->fraction * phase->x[i];
    }
}

static void clear_amounts(struct equilibrium_workspace *ws)
{
    for (size_t k = 0; k < MOST_PHASES; k++) {
        for (size_t i = 0; i < ws->count; i++) {
            ws->amounts[k][i] = 0.0;
        }
    }
}

/* The phases of both sides in the parts that fill the vessel, those that go on from one side to the other once. False
 * where nothing is new on either side, or there are too many. */
static bool join_sides(struct filling *v, const struct side *low, const struct side *high, bool are_both_single)
{
    struct flash *f = &v->flash;
    const double light = (v->volume - high->volume) / (low->volume - high->volume);
    size_t lasting = 0;
    if (!(light > 0.0 && light < 1.0)) {
        return false;
    }
    clear_amounts(f->ws);
    f->phases = low->split->phase_count;
    f->pressure = sqrt(low->pressure * high->pressure);
    for (size_t k = 0; k < f->phases; k++) {
        add_phase(v, k, light, &low->split->phase[k]);
    }
    for (size_t k = 0; k < high->split->phase_count; k++) {
        const struct split_phase *phase = &high->split->phase[k];
        size_t place = are_both_single ? 1 : twin_of(phase, low->split, f->ws->count);
        if (place < low->split->phase_count) {
            lasting++;
        } else if (f->phases == MOST_PHASES) {
            return false;
        } else {
            place = f->phases++;
        }
        add_phase(v, place, 1.0 - light, phase);
    }
    return f->phases > low->split->phase_count || lasting < low->split->phase_count;
}

/* Different phases on either side of a pressure: at it there are all of them. One phase on either side is a pure
 * fluid's saturation, or an azeotrope; three of a binary stand between two sides of two, or of two and one. */
static bool finish_between(struct filling *v, const struct side *low, const struct side *high)
{
    struct flash *f = &v->flash;
    const bool are_both_single = low->split->phase_count == 1 && high->split->phase_count == 1;
    if (!join_sides(v, low, high, are_both_single)) {
        return false;
    }
    f->is_gas_over_liquid = are_both_single;
    const bool is_solved = solve_and_prove(v);
    f->is_gas_over_liquid = false;
    return is_solved;
}

static enum answer bracket(struct filling *v, struct side *low, struct side *high)
{
    enum answer answer = flash_at(v, v->RT / v->volume);
    double volume = volume_of_split(v->flash.out);
    const bool is_low = volume > v->volume;
    for (int k = 0; answer == ANSWER_OK && k < MOST_PRESSURES; k++) {
        if ((volume > v->volume) != is_low) {
            set_side(v, is_low ? high : low, volume);
            return ANSWER_OK;
        }
        set_side(v, is_low ? low : high, volume);
        answer = flash_at(v, v->flash.pressure * (is_low ? 3.0 : 1.0 / 3.0));
        volume = volume_of_split(v->flash.out);
    }
    return answer == ANSWER_OK ? ANSWER_FAILED : answer;
}

static enum answer search(struct filling *v, struct mixture_vessel *vessel)
{
    struct side low = {.split = vessel->below}, high = {.split = vessel->above};
    double near = FIRST_NEAR;
    enum answer answer = bracket(v, &low, &high);
    for (int k = 0; answer == ANSWER_OK && k < MOST_FLASHES; k++) {
        if (high.pressure < low.pressure * (1.0 + near)) {
            near *= NEARER;
            if (finish_between(v, &low, &high)) {
                return ANSWER_OK;
            }
        }
        const double pressure = next_pressure(v, &low, &high, k);
        if (!(pressure > low.pressure && pressure < high.pressure) || high.pressure < low.pressure * (1.0 + 1e-14)) {
            return ANSWER_FAILED;
        }
        answer = flash_at(v, pressure);
        if (answer != ANSWER_OK) {
            return answer;
        }
        const double volume = volume_of_split(v->flash.out);
        set_side(v, volume > v->volume ? &low : &high, volume);
        if (finish_from_flash(v)) {
            return ANSWER_OK;
        }
    }
    return answer == ANSWER_OK ? ANSWER_FAILED : answer;
}

/* ---- one phase ------------------------------------------------------------------------------------------------- */

/* By how much the stable root lies below the one that fills the vessel, at the same pressure and composition. Inside a
 * loop that an equation has between its gas and its liquid the pressure may be one that no phase of it has. */
static enum answer distance_to_stable_root(const struct filling *v, double *distance)
{
    struct equilibrium_workspace *ws = v->flash.ws;
    const enum answer answer =
        phase_tp(v->flash.at_t, v->flash.pressure, ws->feed, BRANCH_STABLE, PHASE_LN_PHI, ws->trial);
    if (answer == ANSWER_OUT_OF_RANGE || answer == ANSWER_NO_SUCH_ROOT) {
        *distance = -HUGE_VAL;
        return ANSWER_OK;
    }
    *distance = 0.0;
    for (size_t i = 0; i < ws->count; i++) {
        *distance += ws->feed[i] * (ws->trial->ln_phi[i] - ws->reference->ln_phi[i]);
    }
    return answer;
}

/* Whether the contents are one phase, stable to the tolerance; it is then at hand. */
static enum answer try_single_phase(struct filling *v, double tolerance, bool *is_single)
{
    struct flash *f = &v->flash;
    struct equilibrium_workspace *ws = f->ws;
    *is_single = false;
    enum answer answer = phase_tv(f->at_t, v->volume, ws->feed, 0, ws->reference);
    if (answer != ANSWER_OK || !(ws->reference->pressure > 0.0) || !(ws->reference->dp_dv < 0.0)) {
        return answer;
    }
    f->pressure = ws->reference->pressure;
    double distance = 0.0;
    struct stability found = {.is_stable = false};
    answer = phase_tv(f->at_t, v->volume, ws->feed, PHASE_LN_PHI, ws->reference);
    if (answer == ANSWER_OK) {
        answer = distance_to_stable_root(v, &distance);
    }
    if (answer != ANSWER_OK || !(distance >= -tolerance)) {
        return answer;
    }
    for (size_t i = 0; i < ws->count; i++) {
        ws->feed_d[i] = ws->ln_feed[i] + ws->reference->ln_phi[i];
    }
    workspace_set_pure(ws, f->at_t, f->pressure);
    flash_set_single_phase(f);
    answer = flash_prove(f, &found);
    *is_single = answer == ANSWER_OK && found.smallest_tpd >= -tolerance;
    return answer;
}

/* ---- the vessel ------------------------------------------------------------------------------------------------ */

struct mixture_vessel *mixture_vessel_create(size_t count, struct arena *arena)
{
    struct mixture_vessel *vessel = arena_alloc(arena, 1, sizeof *vessel);
    vessel->split = split_create(count, arena);
    vessel->below = split_create(count, arena);
    vessel->above = split_create(count, arena);
    return vessel;
}

static bool begin(struct filling *v, double volume, const double n[], struct mixture_vessel *out)
{
    struct flash *f = &v->flash;
    if (!workspace_set_feed(f->ws, n) || !(volume > 0.0) || !isfinite(volume)) {
        return false;
    }
    out->amount = 0.0;
    for (size_t i = 0; i < f->ws->count; i++) {
        out->amount += n[i];
    }
    out->volume = volume;
    v->volume = volume / out->amount;
    v->RT = f->at_t->fluid->gas_constant * f->at_t->temperature;
    return v->volume > phase_smallest_volume(f->at_t, f->ws->feed);
}

/* The Gibbs energy of the phases against the feed as one phase at the pressure found. */
static enum answer set_gibbs_gain(struct filling *v)
{
    struct flash *f = &v->flash;
    struct equilibrium_workspace *ws = f->ws;
    const enum answer answer = phase_tp(f->at_t, f->pressure, ws->feed, BRANCH_STABLE, PHASE_LN_PHI, ws->reference);
    f->gibbs = 0.0;
    for (size_t k = 0; k < f->phases; k++) {
        for (size_t a = 0; a < ws->active_count; a++) {
            const size_t i = ws->active[a];
            const double feed_ln_f = ws->ln_feed[i] + ws->reference->ln_phi[i];
            f->gibbs += ws->amounts[k][i] * (ws->phase[k]->ln_f_over_x[i] - feed_ln_f);
        }
    }
    return answer;
}

static enum answer finish(struct filling *v)
{
    struct split *split = v->flash.out;
    split->temperature = v->flash.at_t->temperature;
    split->pressure = v->flash.pressure;
    const enum answer answer = set_gibbs_gain(v);
    if (answer == ANSWER_OK) {
        flash_report(&v->flash);
    }
    return answer;
}

enum answer mixture_vessel_at_tv(const struct fluid_at_t *at_t, double volume, const double n[],
                                 const struct mixture_vessel *start, struct equilibrium_workspace *ws,
                                 struct mixture_vessel *out)
{
    struct filling v = {.flash = {.at_t = at_t, .ws = ws, .out = out->split}};
    if (!begin(&v, volume, n, out)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const bool is_nearby = start_nearby(&v, start);
    out->split->steps = out->split->evaluations = out->split->trials = 0;
    if (is_nearby && solve_and_prove(&v)) {
        return finish(&v);
    }
    bool is_single;
    enum answer answer = try_single_phase(&v, STABILITY_ROUNDING, &is_single);
    if (answer == ANSWER_OK && !is_single && !(start_by_substitution(&v) && solve_and_prove(&v))) {
        answer = search(&v, out);
        /* Below the plane by less than any split gains: one phase after all. */
        if (answer == ANSWER_FAILED && try_single_phase(&v, SPLIT_LEAST_TPD, &is_single) == ANSWER_OK && is_single) {
            answer = ANSWER_OK;
        }
    }
    return answer == ANSWER_OK ? finish(&v) : answer;
}
