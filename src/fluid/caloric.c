#include "fluid/caloric.h"

#include "fluid/ideal_part.h"

#include <math.h>

/* Each component's ideal terms are functions of its own tau and delta, and were fitted with its own gas constant: hence
 * their scale (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032, eqs. 12 and 15). */
static const struct reference_spec *ideal_equation(const struct fluid *fluid, size_t i, double *scale)
{
    if (fluid->ops->ideal_of != NULL) {
        return fluid->ops->ideal_of(fluid, i, scale);
    }
    const struct reference_spec *equation = fluid->spec->pure[i]->reference;
    *scale = equation == NULL ? 0.0 : equation->gas_constant / fluid->gas_constant;
    return equation;
}

/* The sums over the components, per mole, at unit density in mol/m3: ln(rho x_i) is added by the caller. */
struct ideal_sums {
    double value, t, tt;
    double amount, mass; /* mol, kg */
};

static enum answer sum_ideal(const struct fluid_at_t *at_t, double density, const double n[], struct ideal_sums *sum)
{
    const struct fluid *fluid = at_t->fluid;
    *sum = (struct ideal_sums){.value = 0.0};
    for (size_t i = 0; i < fluid->count; i++) {
        sum->amount += n[i];
    }
    for (size_t i = 0; i < fluid->count; i++) {
        double scale;
        const struct reference_spec *equation = ideal_equation(fluid, i, &scale);
        const double x = n[i] / sum->amount;
        if (!(x > 0.0)) {
            continue;
        }
        if (equation == NULL || equation->ideal_count == 0) {
            return ANSWER_CANNOT;
        }
        const struct ideal_part part = ideal_part_at(equation, equation->reducing_temperature / at_t->temperature);
        sum->value += x * (log(x * density / equation->reducing_density) + scale * part.value);
        sum->t += x * scale * part.t;
        sum->tt += x * scale * part.tt;
        sum->mass +=
            n[i] * (equation->molar_mass.given ? equation->molar_mass.value : fluid->spec->pure[i]->molar_mass);
    }
    return sum->amount > 0.0 ? ANSWER_OK : ANSWER_OUT_OF_RANGE;
}

static void put_ideal(const struct fluid_at_t *at_t, const struct ideal_sums *sum, struct caloric *out)
{
    const double R = at_t->fluid->gas_constant, RT = R * at_t->temperature;
    *out = (struct caloric){
        .internal_energy = RT * sum->t,
        .enthalpy = RT * (1.0 + sum->t),
        .entropy = R * (sum->t - sum->value),
        .heat_capacity_v = -R * sum->tt,
        .heat_capacity_p = R * (1.0 - sum->tt),
    };
}

enum answer caloric_ideal(const struct fluid_at_t *at_t, double pressure, const double n[], struct caloric *out)
{
    struct ideal_sums sum;
    if (!(pressure > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = sum_ideal(at_t, pressure / (at_t->fluid->gas_constant * at_t->temperature), n, &sum);
    if (answer == ANSWER_OK) {
        put_ideal(at_t, &sum, out);
    }
    return answer;
}

enum answer caloric_of_phase(const struct fluid_at_t *at_t, const double n[], const struct phase *phase,
                             struct caloric *out)
{
    const double R = at_t->fluid->gas_constant, T = at_t->temperature;
    struct ideal_sums sum;
    const enum answer answer = sum_ideal(at_t, phase->pressure / (R * T), n, &sum);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!(phase->dp_dv < 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    put_ideal(at_t, &sum, out);
    out->enthalpy += R * T * phase->residual_enthalpy_rt;
    out->internal_energy = out->enthalpy - phase->pressure * phase->volume / sum.amount;
    out->entropy += R * phase->residual_entropy_r;
    out->heat_capacity_p += R * phase->residual_heat_capacity_r;
    out->heat_capacity_v = out->heat_capacity_p + T * phase->dp_dt * phase->dp_dt / (phase->dp_dv * sum.amount);
    const double isentropic =
        -phase->volume * phase->volume * phase->dp_dv * out->heat_capacity_p / out->heat_capacity_v;
    out->speed_of_sound = sqrt(isentropic / sum.mass);
    return isfinite(out->enthalpy) && isfinite(out->entropy) && isfinite(out->heat_capacity_v) &&
                   isfinite(out->speed_of_sound)
               ? ANSWER_OK
               : ANSWER_FAILED;
}

enum answer caloric_at_volume(const struct fluid_at_t *at_t, double volume, const double n[], struct caloric *out)
{
    struct phase phase = {.ln_phi = NULL};
    if (!(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = phase_tv(at_t, volume, n, PHASE_RESIDUAL, &phase);
    return answer == ANSWER_OK ? caloric_of_phase(at_t, n, &phase, out) : answer;
}
