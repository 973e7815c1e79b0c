/* A pure fluid in a closed vessel: saturation decides whether it splits, and the lever rule how. */
#include "equilibrium/closed_vessel.h"

#include <math.h>

static enum answer single_phase(const struct fluid_at_t *at_t, double volume, double amount, enum vessel_state state,
                                struct vessel_contents *out)
{
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    const double n[] = {amount};
    const enum answer answer = phase_tv(at_t, volume, n, 0, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!(phase.pressure > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    out->state = state;
    out->pressure = phase.pressure;
    if (state == VESSEL_LIQUID_FULL) {
        out->liquid_fraction = 1.0;
        out->liquid_amount = amount;
        out->liquid_molar_volume = volume / amount;
    } else {
        out->vapour_amount = amount;
        out->vapour_molar_volume = volume / amount;
    }
    return ANSWER_OK;
}

/* The lever rule in volumes: liquid and vapour together fill the vessel and make up the amount. */
static void two_phases(double volume, double amount, struct vessel_contents *out)
{
    const double v_V = out->saturation.vapour_volume, v_L = out->saturation.liquid_volume;
    out->state = VESSEL_TWO_PHASE;
    out->pressure = out->saturation.pressure;
    out->vapour_molar_volume = v_V;
    out->liquid_molar_volume = v_L;
    out->vapour_amount = (volume - amount * v_L) / (v_V - v_L);
    out->liquid_amount = amount - out->vapour_amount;
    out->liquid_fraction = out->liquid_amount * v_L / volume;
}

/* Within 1e-7 or so of the critical temperature the two phases cannot be told apart, and the vessel is taken to hold
 * one. Its pressure is then wrong by parts in 1e10: the unstable loop's height shrinks with (1 - T/Tc)^1.5. */
static bool is_beside_critical(const struct fluid_at_t *at_t)
{
    struct critical_point critical;
    return at_t->fluid->ops->critical(at_t->fluid, &critical) == ANSWER_OK &&
           at_t->temperature > SATURATION_HIGHEST_REDUCED_TEMPERATURE * critical.temperature;
}

enum answer closed_vessel_at_tv(const struct fluid_at_t *at_t, double volume, double amount,
                                struct vessel_contents *out)
{
    if (!(volume > 0.0) || !(amount > 0.0) || !isfinite(volume) || !isfinite(amount)) {
        return ANSWER_OUT_OF_RANGE;
    }
    *out = (struct vessel_contents){.temperature = at_t->temperature};
    const enum answer answer = saturation_at_t(at_t, &out->saturation);
    if (answer == ANSWER_CANNOT) {
        return at_t->fluid->count == 1 ? single_phase(at_t, volume, amount, VESSEL_GAS, out) : ANSWER_CANNOT;
    }
    if (answer == ANSWER_NO_SUCH_ROOT || (answer == ANSWER_FAILED && is_beside_critical(at_t))) {
        return single_phase(at_t, volume, amount, VESSEL_SUPERCRITICAL, out);
    }
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->has_saturation = true;
    if (volume >= amount * out->saturation.vapour_volume) {
        return single_phase(at_t, volume, amount, VESSEL_VAPOUR, out);
    }
    if (volume <= amount * out->saturation.liquid_volume) {
        return single_phase(at_t, volume, amount, VESSEL_LIQUID_FULL, out);
    }
    two_phases(volume, amount, out);
    return ANSWER_OK;
}
