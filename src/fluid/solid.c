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

double solid_melting_pressure(const struct melting_part *part, double temperature)
{
    const double theta = temperature / part->reducing_temperature;
    double sum = 0.0;
    for (size_t i = 0; i < part->count; i++) {
        const double n = part->terms[i][0], t = part->terms[i][1];
        sum += n * (part->form == MELTING_GAP_POWERS ? pow(theta - 1.0, t) : pow(theta, t) - 1.0);
    }
    return part->form == MELTING_SIMON ? part->reducing_pressure + sum : part->reducing_pressure * (1.0 + sum);
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

bool solid_exists_at(const struct solid_spec *solid, double temperature)
{
    return temperature <= solid->largest_temperature * (1.0 + SOLID_ABOVE_TRIPLE);
}

/* ---- its fugacity ------------------------------------------------------------------------------------------------ */

enum answer solid_at(const struct solid_spec *solid, const struct fluid_at_t *pure, double pressure,
                     struct solid_state *out)
{
    const double T = pure->temperature, one = 1.0;
    if (!solid_exists_at(solid, T)) {
        return ANSWER_OUT_OF_RANGE;
    }
    double slope;
    const double p_sub = solid_sublimation_pressure(solid, T, &slope);
    const double RT = pure->fluid->gas_constant * T, v = solid->molar_volume;
    struct pure_arrays arrays;
    struct phase vapour;
    phase_of_pure(&vapour, &arrays);
    const enum answer answer =
        phase_tp(pure, p_sub, &one, BRANCH_VAPOUR, PHASE_LN_PHI | PHASE_DLN_PHI_DT | PHASE_DLN_PHI_DP, &vapour);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double exponent = v * (pressure - p_sub) / RT;
    /* dln f/dT = dln p_sub/dT (1 + p_sub dln phi/dp) + dln phi/dT - v (p - p_sub) / (R T^2) - v p_sub/(R T) dln
     * p_sub/dT */
    const double by_t = slope * (1.0 + p_sub * arrays.dln_phi_dp - v * p_sub / RT) + arrays.dln_phi_dt - exponent / T;
    *out = (struct solid_state){
        .sublimation_pressure = p_sub,
        .ln_phi = arrays.ln_phi,
        .poynting = exp(exponent),
        .ln_fugacity = log(p_sub) + arrays.ln_phi + exponent,
        .molar_volume = v,
        .departure_enthalpy = -RT * T * by_t,
    };
    return isfinite(out->ln_fugacity) ? ANSWER_OK : ANSWER_FAILED;
}
