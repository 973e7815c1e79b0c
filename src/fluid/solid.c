#include "fluid/solid.h"

#include <math.h>

/* ---- the sublimation line ---------------------------------------------------------------------------------------- */

/* ln(p / p_r) and its derivative by theta. */
struct line_value {
    double ln_p, slope;
};

static struct line_value term_at(enum sublimation_form form, double n, double t, double theta)
{
    struct line_value term = {0.0, 0.0};
    const double size = fabs(1.0 - theta);
    switch (form) {
    case REDUCED_SERIES:
        term.ln_p = n * pow(theta, t - 1.0);
        term.slope = (t - 1.0) * term.ln_p / theta;
        break;
    case GAP_SERIES:
        /* Above the triple point, where 1 - theta is negative, the series goes on as an odd function of it. */
        term.ln_p = (theta > 1.0 ? -n : n) * pow(size, t) / theta;
        term.slope = -n * t * pow(size, t - 1.0) / theta - term.ln_p / theta;
        break;
    case POWER_DIFFERENCES:
        term.ln_p = n * (1.0 - pow(theta, t));
        term.slope = -n * t * pow(theta, t - 1.0);
        break;
    case INVERSE_POWERS:
        term.ln_p = n * pow(theta, -t);
        term.slope = -t * term.ln_p / theta;
        break;
    }
    return term;
}

double solid_sublimation_pressure(const struct solid_spec *solid, double temperature, double *slope)
{
    const double theta = temperature / solid->reducing_temperature;
    struct line_value sum = {0.0, 0.0};
    for (size_t i = 0; i < solid->count; i++) {
        const struct line_value term = term_at(solid->form, solid->terms[i][0], solid->terms[i][1], theta);
        sum.ln_p += term.ln_p;
        sum.slope += term.slope;
    }
    *slope = sum.slope / solid->reducing_temperature;
    return solid->reducing_pressure * exp(sum.ln_p);
}

/* ---- the melting line -------------------------------------------------------------------------------------------- */

/* The melting pressure (Pa) and its slope (Pa/K). */
static double melting_pressure(const struct melting_part *part, double temperature, double *slope)
{
    const double theta = temperature / part->reducing_temperature;
    double sum = 0.0, by_theta = 0.0;
    for (size_t i = 0; i < part->count; i++) {
        const double n = part->terms[i][0], t = part->terms[i][1];
        const bool is_gap = part->form == MELTING_GAP_POWERS;
        const double base = is_gap ? theta - 1.0 : theta;
        sum += n * (is_gap ? pow(base, t) : pow(base, t) - 1.0);
        by_theta += n * t * pow(base, t - 1.0);
    }
    const double scale = part->form == MELTING_SIMON ? 1.0 : part->reducing_pressure;
    *slope = scale * by_theta / part->reducing_temperature;
    return part->reducing_pressure + scale * sum;
}

double solid_melting_pressure(const struct melting_part *part, double temperature)
{
    double slope;
    return melting_pressure(part, temperature, &slope);
}

/* ---- temperatures of a pressure ---------------------------------------------------------------------------------- */

static double pressure_of_line(const void *line, double temperature)
{
    double slope;
    return solid_sublimation_pressure(line, temperature, &slope);
}

static double pressure_of_part(const void *part, double temperature)
{
    return solid_melting_pressure(part, temperature);
}

/* By bisection: the lines rise or fall from one end to the other. */
static double temperature_between(double (*pressure_at)(const void *, double), const void *line, double cold,
                                  double warm, double pressure)
{
    enum { MOST_HALVINGS = 200 };
    const bool rises = pressure_at(line, warm) > pressure_at(line, cold);
    const double least = pressure_at(line, rises ? cold : warm), most = pressure_at(line, rises ? warm : cold);
    if (!(pressure >= least && pressure <= most)) {
        return (double)NAN;
    }
    for (int i = 0; i < MOST_HALVINGS; i++) {
        const double middle = 0.5 * (cold + warm);
        if (!(middle > cold && middle < warm)) {
            break;
        }
        *((pressure_at(line, middle) < pressure) == rises ? &cold : &warm) = middle;
    }
    return 0.5 * (cold + warm);
}

double solid_melting_temperature(const struct melting_part *part, double pressure)
{
    return temperature_between(pressure_of_part, part, part->smallest_temperature, part->largest_temperature, pressure);
}

double solid_sublimation_temperature(const struct solid_spec *solid, double pressure)
{
    return temperature_between(pressure_of_line, solid, solid->smallest_temperature, solid->largest_temperature,
                               pressure);
}

/* ---- which line -------------------------------------------------------------------------------------------------- */

enum solid_line solid_line_at(const struct solid_spec *solid, bool knows_liquids, double temperature)
{
    const struct melting_part *part = knows_liquids ? solid->melting_from_triple : NULL;
    const double triple = solid->largest_temperature;
    if (temperature <= triple) {
        return SOLID_SUBLIMES;
    }
    if (part == NULL) {
        return temperature <= triple * (1.0 + SOLID_ABOVE_TRIPLE) ? SOLID_SUBLIMES : SOLID_NOT_KNOWN;
    }
    return temperature <= fmin(part->largest_temperature, triple * (1.0 + MELTING_FOLLOWED)) ? SOLID_MELTS
                                                                                             : SOLID_NOT_KNOWN;
}

/* ---- its fugacity ------------------------------------------------------------------------------------------------ */

/* ln f by the line's pressure p_line, whose logarithm has that slope by temperature (1/K), and of which the fluid's
 * `branch` is the other phase. */
static enum answer solid_beside(const struct solid_spec *solid, const struct fluid_at_t *pure, enum branch branch,
                                double p_line, double slope, double pressure, struct solid_state *out)
{
    const double T = pure->temperature, one = 1.0;
    const double RT = pure->fluid->gas_constant * T, v = solid->molar_volume;
    struct pure_arrays arrays;
    struct phase fluid;
    phase_of_pure(&fluid, &arrays);
    const enum answer answer =
        phase_tp(pure, p_line, &one, branch, PHASE_LN_PHI | PHASE_DLN_PHI_DT | PHASE_DLN_PHI_DP, &fluid);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double exponent = v * (pressure - p_line) / RT;
    /* dln f/dT = dln p_line/dT (1 + p_line dln phi/dp) + dln phi/dT - v (p - p_line) / (R T^2) - v p_line/(R T) dln
     * p_line/dT */
    const double by_t = slope * (1.0 + p_line * arrays.dln_phi_dp - v * p_line / RT) + arrays.dln_phi_dt - exponent / T;
    *out = (struct solid_state){
        .line = branch == BRANCH_LIQUID ? SOLID_MELTS : SOLID_SUBLIMES,
        .line_pressure = p_line,
        .ln_phi = arrays.ln_phi,
        .poynting = exp(exponent),
        .ln_fugacity = log(p_line) + arrays.ln_phi + exponent,
        .molar_volume = v,
        .departure_enthalpy = -RT * T * by_t,
    };
    return isfinite(out->ln_fugacity) ? ANSWER_OK : ANSWER_FAILED;
}

enum answer solid_by_sublimation(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                                 struct solid_state *out)
{
    double slope;
    if (solid_line_at(solid, false, pure->temperature) != SOLID_SUBLIMES) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double p_sub = solid_sublimation_pressure(solid, pure->temperature, &slope);
    return solid_beside(solid, pure, BRANCH_VAPOUR, p_sub, slope, pressure, out);
}

enum answer solid_at(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                     struct solid_state *out)
{
    const bool knows_liquids = (pure->fluid->ops->capabilities & CAN_LIQUID) != 0;
    if (solid_line_at(solid, knows_liquids, pure->temperature) != SOLID_MELTS) {
        return solid_by_sublimation(solid, pure, pressure, out);
    }
    double slope;
    const double p_melt = melting_pressure(solid->melting_from_triple, pure->temperature, &slope);
    return solid_beside(solid, pure, BRANCH_LIQUID, p_melt, slope / p_melt, pressure, out);
}
