#include "filling/mixture_contents.h"

/* ---- pure gases -------------------------------------------------------------------------------------------------- */

static void set_pure_edges(bool has_saturation, const struct saturation *saturation, struct phase_edges *edges)
{
    *edges = (struct phase_edges){.is_known = true};
    if (has_saturation) {
        edges->has_low = edges->has_high = edges->high_is_bubble = true;
        edges->low_volume = saturation->vapour_volume;
        edges->high_volume = saturation->liquid_volume;
        edges->low_pressure = edges->high_pressure = saturation->pressure;
    }
}

static void add_pure_phase(const struct method_run *method, bool is_liquid, double amount, double molar_volume,
                           struct contents *out)
{
    if (amount > 0.0) {
        out->phases[out->phase_count++] = (struct contents_phase){
            .is_liquid = is_liquid, .amount = amount, .molar_volume = molar_volume, .molar_mass = method->molar_mass};
    }
}

static enum answer pure_contents(const struct method_run *method, double volume, double amount, struct contents *out)
{
    struct vessel_contents vessel;
    const enum answer answer = closed_vessel_at_tv(method->at_t, volume, amount, &vessel);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *out = (struct contents){.state = vessel.state,
                             .temperature = vessel.temperature,
                             .pressure = vessel.pressure,
                             .molar_volume = volume / amount,
                             .liquid_fraction = vessel.liquid_fraction,
                             .has_saturation = vessel.has_saturation,
                             .saturation = vessel.saturation};
    add_pure_phase(method, false, vessel.vapour_amount, vessel.vapour_molar_volume, out);
    add_pure_phase(method, true, vessel.liquid_amount, vessel.liquid_molar_volume, out);
    out->liquid_density = vessel.liquid_molar_volume > 0.0 ? method->molar_mass / vessel.liquid_molar_volume : 0.0;
    if (vessel.state != VESSEL_GAS) {
        set_pure_edges(vessel.has_saturation, &vessel.saturation, &out->edges);
    }
    return ANSWER_OK;
}

static enum answer pure_edges(const struct method_run *method, struct phase_edges *out)
{
    struct saturation saturation;
    const enum answer answer = saturation_at_t(method->at_t, &saturation);
    *out = (struct phase_edges){.is_known = false};
    if (answer == ANSWER_OK || answer == ANSWER_NO_SUCH_ROOT) {
        set_pure_edges(answer == ANSWER_OK, &saturation, out);
        return ANSWER_OK;
    }
    return answer;
}

/* ---- any fluid --------------------------------------------------------------------------------------------------- */

static enum answer set_temperature(struct method_run *method, double temperature)
{
    return method->fluid == NULL ? ANSWER_CANNOT : fluid_set_t(method->at_t, method->fluid, temperature);
}

static enum answer contents_by(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                               bool with_edges, struct contents *out)
{
    if (run->sheet->vessel == NULL) {
        return ANSWER_CANNOT;
    }
    const enum answer answer = set_temperature(method, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double volume = run->sheet->vessel->water_capacity.value, amount = mass / method->molar_mass;
    return method->mixture == NULL ? pure_contents(method, volume, amount, out)
                                   : mixture_contents(method, volume, amount, with_edges, out);
}

enum answer contents_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                        struct contents *out)
{
    return contents_by(run, method, mass, temperature, true, out);
}

enum answer pressure_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                        struct contents *out)
{
    return contents_by(run, method, mass, temperature, false, out);
}

static enum vessel_state state_beside(const struct phase_edges *edges, double molar_volume)
{
    if (!edges->has_low) {
        return VESSEL_SUPERCRITICAL;
    }
    if (molar_volume >= edges->low_volume) {
        return VESSEL_VAPOUR;
    }
    if (edges->has_high && molar_volume < edges->high_volume) {
        return edges->high_is_bubble ? VESSEL_LIQUID_FULL : VESSEL_SUPERCRITICAL;
    }
    return VESSEL_TWO_PHASE;
}

enum answer density_beside_edges(const struct sheet_run *run, struct method_run *method, double mass,
                                 double temperature, struct contents *out)
{
    *out = (struct contents){.temperature = temperature,
                             .molar_volume = run->sheet->vessel->water_capacity.value * method->molar_mass / mass};
    const enum answer answer = edges_at(method, temperature, &out->edges);
    out->state = answer == ANSWER_CANNOT ? VESSEL_GAS : state_beside(&out->edges, out->molar_volume);
    return answer;
}

enum answer edges_at(struct method_run *method, double temperature, struct phase_edges *out)
{
    const enum answer answer = set_temperature(method, temperature);
    if (answer != ANSWER_OK) {
        return answer;
    }
    return method->mixture == NULL ? pure_edges(method, out) : mixture_edges(method, out);
}

enum answer free_volume_at(struct method_run *method, double temperature, double pressure, double *molar_volume,
                           bool *holds_liquid)
{
    enum answer answer = set_temperature(method, temperature);
    if (answer != ANSWER_OK || method->mixture != NULL) {
        return answer != ANSWER_OK ? answer : mixture_free_volume(method, pressure, molar_volume, holds_liquid);
    }
    struct phase phase = {0};
    answer = stable_phase_tp(method->at_t, pressure, method->z, 0, &phase);
    *molar_volume = phase.volume;
    *holds_liquid = phase.branch == BRANCH_LIQUID;
    return answer;
}

enum answer free_volume_alone_at(struct method_run *method, double temperature, double pressure, double *molar_volume)
{
    bool holds_liquid;
    const enum answer answer = set_temperature(method, temperature);
    if (answer != ANSWER_OK || method->mixture == NULL) {
        return answer != ANSWER_OK ? answer
                                   : free_volume_at(method, temperature, pressure, molar_volume, &holds_liquid);
    }
    return mixture_free_volume_alone(method, pressure, molar_volume);
}

double smallest_molar_volume(const struct method_run *method)
{
    return phase_smallest_volume(method->at_t, method->z);
}
