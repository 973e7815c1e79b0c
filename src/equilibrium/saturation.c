/* Saturation of a pure fluid, solved in the volumes of the two phases.
 *
 * Unknowns are v_V and v_L; the equations are equal pressures and equal ln f. With d ln f = v dp / (R T) along an
 * isotherm, one Newton step for both gives the pressure at which the linearised phases agree,
 *
 *   p = [R T (ln f_L - ln f_V) + p_V v_V - p_L v_L] / (v_V - v_L),
 *
 * which is Maxwell's equal-area construction, and then moves each volume by (p - p_phase) / (dp/dv). In pressure the
 * equations would be worse: near the triple point a liquid's pressure is the small difference of two large terms, and
 * a trial pressure may have no root. Volumes have neither trouble as long as each keeps to its side of the spinodal.
 */
#include "equilibrium/saturation.h"

#include <float.h>
#include <math.h>

enum { MOST_STEPS = 60, MOST_RETREATS = 40, MOST_BISECTIONS = 200, MOST_TEMPERATURES = 60 };

/* The last Newton step is taken, not evaluated again, once it is this small in both ln v: the error it leaves is of
 * the order of its square. */
#define LAST_STEP 1e-9
/* Close to the critical point rounding alone moves the volumes by more than that, and after this many steps a last one
 * of this part of ln(vV / vL) will do. */
#define PATIENCE              12
#define LAST_STEP_OF_CONTRAST 1e-3
/* And once ln fV - ln fL is this small: ten times better than what is promised. */
#define LAST_RESIDUAL (0.1 * SATURATION_LN_F_TOLERANCE)
/* One step moves each ln v by at most this part of ln(vV / vL), so that the phases never change places. */
#define LARGEST_STEP 0.4
/* Pressures searched when the first values fail: down to exp(-600) of the critical one. */
#define LEAST_LN_REDUCED_PRESSURE (-600.0)
/* Relative error in the pressure accepted by saturation_at_p. Far below the critical point rounding in a long
 * equation's ln f_L reaches 1e-12, and Newton's steps end well below this wherever they can. */
#define PRESSURE_TOLERANCE 1e-11

static const double ONE_MOLE[] = {1.0};

static bool is_pure_with_liquid(const struct fluid *fluid)
{
    return fluid->count == 1 && (fluid->ops->capabilities & CAN_LIQUID) != 0 && fluid->ops->critical != NULL;
}

/* ---- one phase ------------------------------------------------------------------------------------------------- */

struct side {
    double volume, pressure, dp_dv, ln_f;
};

/* False where there is no such state, or one that is not mechanically stable. */
static bool evaluate(const struct fluid_at_t *at_t, double volume, struct side *side)
{
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    if (phase_tv(at_t, volume, ONE_MOLE, PHASE_LN_F, &phase) != ANSWER_OK || !(phase.dp_dv < 0.0)) {
        return false;
    }
    *side = (struct side){volume, phase.pressure, phase.dp_dv, arrays.ln_f_over_x};
    return true;
}

/* ---- Newton's steps in both volumes ---------------------------------------------------------------------------- */

struct pair {
    struct side vapour, liquid;
};

/* The step from one pair of states: the new pressure, and the changes of ln v. */
struct step {
    double pressure, ln_vapour, ln_liquid;
};

static struct step step_from(const struct pair *pair, double RT)
{
    const struct side *V = &pair->vapour, *L = &pair->liquid;
    const double maxwell =
        (RT * (L->ln_f - V->ln_f) + V->pressure * V->volume - L->pressure * L->volume) / (V->volume - L->volume);
    struct step step;
    /* In ln p rather than p, and so for the vapour's volume: exact where the vapour is an ideal gas, whatever the
     * first values; to first order the same. */
    const double ln_ratio = maxwell / V->pressure - 1.0;
    step.pressure = V->pressure * exp(ln_ratio);
    step.ln_vapour = ln_ratio * V->pressure / (V->volume * V->dp_dv);
    step.ln_liquid = (step.pressure - L->pressure) / (L->volume * L->dp_dv);
    const double largest = LARGEST_STEP * log(V->volume / L->volume);
    step.ln_vapour = fmax(-largest, fmin(largest, step.ln_vapour));
    step.ln_liquid = fmax(-largest, fmin(largest, step.ln_liquid));
    return step;
}

/* The state at `volume`, or nearer to `last` where that one is beyond the spinodal. */
static bool evaluate_retreating(const struct fluid_at_t *at_t, double volume, const struct side *last,
                                struct side *side)
{
    for (int retreat = 0; retreat < MOST_RETREATS; retreat++) {
        if (evaluate(at_t, volume, side)) {
            return true;
        }
        volume = 0.5 * (volume + last->volume);
    }
    return false;
}

static void report(const struct fluid_at_t *at_t, const struct pair *pair, const struct step *step,
                   struct saturation *out)
{
    const double RT = at_t->fluid->gas_constant * at_t->temperature, p = step->pressure;
    const struct side *V = &pair->vapour, *L = &pair->liquid;
    out->temperature = at_t->temperature;
    out->pressure = p;
    out->vapour_volume = V->volume * exp(step->ln_vapour);
    out->liquid_volume = L->volume * exp(step->ln_liquid);
    out->ln_phi_vapour = V->ln_f + V->volume * (p - V->pressure) / RT - log(p);
    out->ln_phi_liquid = L->ln_f + L->volume * (p - L->pressure) / RT - log(p);
    out->residual = V->ln_f - L->ln_f;
}

static bool is_last(const struct pair *pair, const struct step *step, int count)
{
    const double contrast = log(pair->vapour.volume / pair->liquid.volume);
    const double last = count <= PATIENCE ? LAST_STEP : LAST_STEP_OF_CONTRAST * contrast;
    return fabs(step->ln_vapour) <= last && fabs(step->ln_liquid) <= last &&
           fabs(pair->vapour.ln_f - pair->liquid.ln_f) <= LAST_RESIDUAL;
}

/* From volumes on the right sides of the spinodals; false when the tolerances are not met. */
static bool solve_volumes(const struct fluid_at_t *at_t, double vapour, double liquid, struct saturation *out)
{
    const double RT = at_t->fluid->gas_constant * at_t->temperature;
    struct pair pair;
    if (!(vapour > liquid) || !evaluate(at_t, vapour, &pair.vapour) || !evaluate(at_t, liquid, &pair.liquid)) {
        return false;
    }
    for (int count = 1; count <= MOST_STEPS; count++) {
        if (!(pair.vapour.pressure > 0.0)) {
            return false;
        }
        const struct step step = step_from(&pair, RT);
        if (is_last(&pair, &step, count)) {
            report(at_t, &pair, &step, out);
            out->iterations += count;
            return out->vapour_volume / out->liquid_volume - 1.0 > SATURATION_LEAST_CONTRAST;
        }
        const struct pair last = pair;
        if (!evaluate_retreating(at_t, last.vapour.volume * exp(step.ln_vapour), &last.vapour, &pair.vapour) ||
            !evaluate_retreating(at_t, last.liquid.volume * exp(step.ln_liquid), &last.liquid, &pair.liquid)) {
            return false;
        }
    }
    return false;
}

/* ---- first values by bracketing the pressure ------------------------------------------------------------------- */

enum trial { TRIAL_TOO_LOW, TRIAL_TOO_HIGH, TRIAL_BOTH_ROOTS, TRIAL_FAILED };

/* Both roots at exp(ln_p), or on which side of the window with two roots it lies: above it there is no vapour, below
 * it no liquid. A method may also answer with its only root for either branch. */
static enum trial try_pressure(const struct fluid_at_t *at_t, double ln_p, double critical_volume, struct pair *pair)
{
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    const double p = exp(ln_p);
    const enum answer vapour = phase_tp(at_t, p, ONE_MOLE, BRANCH_VAPOUR, PHASE_LN_F, &phase);
    if (vapour == ANSWER_NO_SUCH_ROOT) {
        return TRIAL_TOO_HIGH;
    }
    if (vapour != ANSWER_OK) {
        return TRIAL_FAILED;
    }
    pair->vapour = (struct side){phase.volume, p, phase.dp_dv, arrays.ln_f_over_x};
    const enum answer liquid = phase_tp(at_t, p, ONE_MOLE, BRANCH_LIQUID, PHASE_LN_F, &phase);
    if (liquid == ANSWER_NO_SUCH_ROOT) {
        return TRIAL_TOO_LOW;
    }
    if (liquid != ANSWER_OK) {
        return TRIAL_FAILED;
    }
    pair->liquid = (struct side){phase.volume, p, phase.dp_dv, arrays.ln_f_over_x};
    if (pair->vapour.volume <= critical_volume) {
        return TRIAL_TOO_HIGH;
    }
    return pair->liquid.volume >= critical_volume ? TRIAL_TOO_LOW : TRIAL_BOTH_ROOTS;
}

/* Newton's steps on ln fV - ln fL in ln p, which rises by Z_V - Z_L, kept in a bracket that halves wherever a root is
 * missing. Ends with two volumes close enough for solve_volumes. */
static bool bracket_pressure(const struct fluid_at_t *at_t, const struct critical_point *critical, struct pair *pair)
{
    const double RT = at_t->fluid->gas_constant * at_t->temperature;
    double high = log(critical->pressure), low = high + LEAST_LN_REDUCED_PRESSURE;
    double ln_p = high + 5.0 * (1.0 - critical->temperature / at_t->temperature);
    for (int count = 0; count < MOST_BISECTIONS && high - low > DBL_EPSILON * fabs(high); count++) {
        double next = low; /* outside the bracket: halve it */
        switch (try_pressure(at_t, ln_p, critical->molar_volume, pair)) {
        case TRIAL_TOO_LOW:
            low = ln_p;
            break;
        case TRIAL_TOO_HIGH:
            high = ln_p;
            break;
        case TRIAL_BOTH_ROOTS: {
            const double excess = pair->vapour.ln_f - pair->liquid.ln_f;
            if (fabs(excess) <= LAST_STEP) {
                return true;
            }
            next = ln_p - excess * RT / (exp(ln_p) * (pair->vapour.volume - pair->liquid.volume));
            *(excess > 0.0 ? &high : &low) = ln_p;
            break;
        }
        case TRIAL_FAILED:
            return false;
        }
        ln_p = next > low && next < high ? next : 0.5 * (low + high);
    }
    return false;
}

/* ---- at a temperature ------------------------------------------------------------------------------------------ */

enum answer saturation_at_t(const struct fluid_at_t *at_t, struct saturation *out)
{
    const struct fluid *fluid = at_t->fluid;
    struct critical_point critical;
    if (!is_pure_with_liquid(fluid) || fluid->ops->critical(fluid, &critical) != ANSWER_OK) {
        return ANSWER_CANNOT;
    }
    if (!(at_t->temperature < critical.temperature)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    *out = (struct saturation){.iterations = 0};
    struct saturation_start start;
    if (fluid->ops->saturation_start != NULL && fluid->ops->saturation_start(at_t, &start) == ANSWER_OK &&
        solve_volumes(at_t, start.vapour_volume, start.liquid_volume, out)) {
        return ANSWER_OK;
    }
    struct pair pair;
    if (bracket_pressure(at_t, &critical, &pair) && solve_volumes(at_t, pair.vapour.volume, pair.liquid.volume, out)) {
        return ANSWER_OK;
    }
    return ANSWER_FAILED;
}

/* ---- at a pressure --------------------------------------------------------------------------------------------- */

/* d ln p / dT along the saturation line, from d ln phi_V = d ln phi_L: Clausius and Clapeyron's equation in terms of
 * what every method gives. */
static enum answer saturation_slope(const struct fluid_at_t *at_t, const struct saturation *saturation, double *slope)
{
    struct pure_arrays vapour, liquid;
    struct phase phase;
    phase_of_pure(&phase, &vapour);
    enum answer answer = phase_tv(at_t, saturation->vapour_volume, ONE_MOLE, PHASE_DLN_PHI_DT, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    phase_of_pure(&phase, &liquid);
    answer = phase_tv(at_t, saturation->liquid_volume, ONE_MOLE, PHASE_DLN_PHI_DT, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double RT = at_t->fluid->gas_constant * at_t->temperature;
    const double Z_change = saturation->pressure * (saturation->vapour_volume - saturation->liquid_volume) / RT;
    *slope = (liquid.dln_phi_dt - vapour.dln_phi_dt) / Z_change;
    return isfinite(*slope) && *slope > 0.0 ? ANSWER_OK : ANSWER_FAILED;
}

/* ln(p / pc) falls nearly along a straight line in Tc / T; its slope is taken from the acentric factor where one is
 * given: log10(p / pc) = -(1 + omega) at T / Tc = 0.7. */
static double first_temperature(const struct fluid *fluid, const struct critical_point *critical, double pressure)
{
    const struct optional *acentric = &fluid->spec->pure[0]->acentric;
    const double omega = acentric->given ? fmax(acentric->value, -0.5) : 0.1;
    const double slope = 7.0 / 3.0 * log(10.0) * (1.0 + omega);
    return critical->temperature / (1.0 + log(critical->pressure / pressure) / slope);
}

enum answer saturation_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure, struct saturation *out)
{
    struct critical_point critical;
    if (!is_pure_with_liquid(fluid) || fluid->ops->critical(fluid, &critical) != ANSWER_OK) {
        return ANSWER_CANNOT;
    }
    if (!(pressure > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (!(pressure < critical.pressure)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    double low = 0.0, high = critical.temperature;
    double T = first_temperature(fluid, &critical, pressure), slope = 0.0;
    for (int count = 0; count < MOST_TEMPERATURES && high - low > 2.0 * DBL_EPSILON * high; count++) {
        if (fluid_set_t(at_t, fluid, T) != ANSWER_OK || saturation_at_t(at_t, out) != ANSWER_OK ||
            saturation_slope(at_t, out, &slope) != ANSWER_OK) {
            /* Too close to the critical temperature, or colder than the equation has a liquid for. */
            *(T > SATURATION_HIGHEST_REDUCED_TEMPERATURE * critical.temperature ? &high : &low) = T;
            T = 0.5 * (low + high);
            continue;
        }
        const double missing = log(pressure / out->pressure);
        if (fabs(missing) <= PRESSURE_TOLERANCE) {
            return ANSWER_OK;
        }
        *(missing > 0.0 ? &low : &high) = T;
        const double next = T / (1.0 - missing / (T * slope));
        T = next > low && next < high ? next : 0.5 * (low + high);
    }
    return ANSWER_FAILED;
}

/* ---- the classical iteration ----------------------------------------------------------------------------------- */

enum answer saturation_passes(const struct fluid_at_t *at_t, double start, size_t most, struct saturation_pass *passes,
                              size_t *count)
{
    *count = 0;
    if (!is_pure_with_liquid(at_t->fluid)) {
        return ANSWER_CANNOT;
    }
    double p = start;
    while (*count < most) {
        struct pure_arrays vapour, liquid;
        struct phase V, L;
        phase_of_pure(&V, &vapour);
        phase_of_pure(&L, &liquid);
        enum answer answer = phase_tp(at_t, p, ONE_MOLE, BRANCH_VAPOUR, PHASE_LN_PHI, &V);
        if (answer == ANSWER_OK) {
            answer = phase_tp(at_t, p, ONE_MOLE, BRANCH_LIQUID, PHASE_LN_PHI, &L);
        }
        if (answer != ANSWER_OK) {
            return answer;
        }
        if (!(V.volume / L.volume - 1.0 > SATURATION_LEAST_CONTRAST)) {
            return ANSWER_NO_SUCH_ROOT;
        }
        const double difference = vapour.ln_phi - liquid.ln_phi;
        passes[(*count)++] = (struct saturation_pass){
            .pressure = p,
            .Z_vapour = V.Z,
            .Z_liquid = L.Z,
            .fugacity_vapour = p * exp(vapour.ln_phi),
            .fugacity_liquid = p * exp(liquid.ln_phi),
            .next_pressure = p * exp(-difference),
        };
        if (fabs(difference) <= SATURATION_LN_F_TOLERANCE) {
            return ANSWER_OK;
        }
        p *= exp(-difference);
    }
    return ANSWER_OK;
}

/* ---- the stable phase ------------------------------------------------------------------------------------------ */

static enum answer stable_branch(const struct fluid_at_t *at_t, double pressure, enum branch *branch)
{
    const struct fluid *fluid = at_t->fluid;
    struct critical_point critical;
    const enum answer answer = fluid->ops->critical(fluid, &critical);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *branch = BRANCH_STABLE;
    if (!(at_t->temperature < critical.temperature)) {
        return ANSWER_OK;
    }
    if (pressure >= critical.pressure) {
        *branch = BRANCH_LIQUID;
        return ANSWER_OK;
    }
    struct saturation saturation;
    const enum answer solved = saturation_at_t(at_t, &saturation);
    if (solved == ANSWER_OK) {
        *branch = pressure < saturation.pressure ? BRANCH_VAPOUR : BRANCH_LIQUID;
        return ANSWER_OK;
    }
    /* Closer to the critical temperature a state that saturation cannot place is the root of lower Gibbs energy. */
    return at_t->temperature > SATURATION_HIGHEST_REDUCED_TEMPERATURE * critical.temperature ? ANSWER_OK : solved;
}

enum answer stable_phase_tp(const struct fluid_at_t *at_t, double pressure, const double n[], unsigned want,
                            struct phase *out)
{
    const struct fluid *fluid = at_t->fluid;
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    enum branch branch = BRANCH_VAPOUR;
    if (is_pure_with_liquid(fluid)) {
        const enum answer answer = stable_branch(at_t, pressure, &branch);
        if (answer != ANSWER_OK) {
            return answer;
        }
    }
    return phase_tp(at_t, pressure, n, branch, want, out);
}
