#include "fluid/multi_fluid_caloric.h"

#include "fluid/ideal_part.h"
#include "fluid/methods_internal.h"
#include "fluid/multi_fluid_internal.h"

#include <math.h>

/* The mixture's ideal-gas part, sum_i x_i (alpha0_i + ln x_i). Each component's terms are functions of its own tau and
 * delta, and were fitted with its own gas constant: hence their scale (Kunz and Wagner, J. Chem. Eng. Data 57 (2012)
 * 3032, eqs. 12 and 15). */
static bool ideal_sum(const struct multi_fluid *fluid, const struct multi_fluid_work *w, double temperature,
                      double volume, struct ideal_part *sum)
{
    *sum = (struct ideal_part){0.0, 0.0, 0.0};
    for (size_t i = 0; i < fluid->head.count; i++) {
        const struct reference_spec *equation = fluid->equation[i];
        if (!(w->x[i] > 0.0)) {
            continue;
        }
        if (equation->ideal_count == 0) {
            return false;
        }
        const double scale = fluid->ideal_scale_of_all > 0.0 ? fluid->ideal_scale_of_all
                                                             : equation->gas_constant / fluid->head.gas_constant;
        const struct ideal_part part = ideal_part_at(equation, equation->reducing_temperature / temperature);
        const double delta = w->n[i] / (volume * equation->reducing_density); /* ln delta_i + ln x_i at once */
        sum->value += w->x[i] * (log(delta) + scale * part.value);
        sum->t += w->x[i] * scale * part.t;
        sum->tt += w->x[i] * scale * part.tt;
    }
    return true;
}

static double molar_mass(const struct multi_fluid *fluid, const struct multi_fluid_work *w)
{
    double sum = 0.0;
    for (size_t i = 0; i < fluid->head.count; i++) {
        const struct optional *own = &fluid->equation[i]->molar_mass;
        sum += w->x[i] * (own->given ? own->value : fluid->head.spec->pure[i]->molar_mass);
    }
    return sum;
}

/* The same relations as of a pure gas, tau and delta being the mixture's. */
static enum answer put_caloric(const struct fluid_at_t *at_t, const struct ideal_part *ideal,
                               const struct residual_sums *residual, double mass, struct caloric *out)
{
    const double R = at_t->fluid->gas_constant, T = at_t->temperature;
    const double stiffness = 1.0 + 2.0 * residual->d + residual->dd; /* (dp/drho) / (R T) */
    const double heating = 1.0 + residual->d - residual->dt;         /* (dp/dT) / (R rho) */
    const double cv = -(ideal->tt + residual->tt);
    if (!(stiffness > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    *out = (struct caloric){
        .enthalpy = R * T * (1.0 + ideal->t + residual->t + residual->d),
        .entropy = R * (ideal->t + residual->t - ideal->value - residual->value),
        .heat_capacity_v = R * cv,
        .heat_capacity_p = R * (cv + heating * heating / stiffness),
        .speed_of_sound = sqrt(R * T / mass * (stiffness + heating * heating / cv)),
    };
    return isfinite(out->enthalpy) && isfinite(out->entropy) && isfinite(out->heat_capacity_p) &&
                   isfinite(out->speed_of_sound)
               ? ANSWER_OK
               : ANSWER_FAILED;
}

enum answer multi_fluid_caloric(const struct fluid_at_t *at_t, double volume, const double n[], struct caloric *out)
{
    const struct multi_fluid *fluid = multi_fluid_of(at_t);
    if (at_t->fluid->ops != &multi_fluid_ops && at_t->fluid->ops != &gerg_2008_ops) {
        return ANSWER_CANNOT;
    }
    if (!(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const enum answer answer = multi_fluid_set_amounts(at_t, n, STAGE_SLOPES);
    if (answer != ANSWER_OK) {
        return answer;
    }
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    struct ideal_part ideal;
    struct residual_sums residual;
    if (!ideal_sum(fluid, w, at_t->temperature, volume, &ideal)) {
        return ANSWER_CANNOT;
    }
    parts_by_both(w->parts, w->amount * w->reducing_volume / volume, &residual);
    return put_caloric(at_t, &ideal, &residual, molar_mass(fluid, w), out);
}
