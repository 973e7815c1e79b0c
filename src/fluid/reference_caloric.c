#include "fluid/reference_caloric.h"

#include "fluid/ideal_part.h"
#include "fluid/methods_internal.h"
#include "fluid/reference_internal.h"

#include <math.h>

/* The relations of every fundamental equation in the Helmholtz energy; for instance Span, Multiparameter Equations of
 * State (2000), table 3.10. */
enum answer reference_caloric(const struct fluid_at_t *head, double molar_volume, struct caloric *out)
{
    if (head->fluid->ops != &reference_ops) {
        return ANSWER_CANNOT;
    }
    const struct reference_at_t *at_t = (const struct reference_at_t *)(const void *)head;
    const struct reference *reference = reference_of(at_t);
    const struct reference_spec *equation = reference->equation;
    if (equation->ideal_count == 0) {
        return ANSWER_CANNOT;
    }
    if (!(molar_volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double R = head->fluid->gas_constant, T = head->temperature;
    const double delta = 1.0 / (molar_volume * equation->reducing_density);
    const struct ideal_part ideal = ideal_part_at(equation, equation->reducing_temperature / T);
    struct residual_sums residual;
    residual_by_both(reference_residual_at(at_t), reference->residual, delta, &residual);
    const double stiffness = 1.0 + 2.0 * residual.d + residual.dd; /* (dp/drho) / (R T) */
    const double heating = 1.0 + residual.d - residual.dt;         /* (dp/dT) / (R rho) */
    const double cv = -(ideal.tt + residual.tt);
    if (!(stiffness > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double molar_mass = head->fluid->spec->pure[0]->molar_mass;
    *out = (struct caloric){
        .enthalpy = R * T * (1.0 + ideal.t + residual.t + residual.d),
        .entropy = R * (ideal.t + residual.t - log(delta) - ideal.value - residual.value),
        .heat_capacity_v = R * cv,
        .heat_capacity_p = R * (cv + heating * heating / stiffness),
        .speed_of_sound = sqrt(R * T / molar_mass * (stiffness + heating * heating / cv)),
    };
    return isfinite(out->enthalpy) && isfinite(out->entropy) && isfinite(out->heat_capacity_p) &&
                   isfinite(out->speed_of_sound)
               ? ANSWER_OK
               : ANSWER_FAILED;
}
