/* The cubic family's numbers for a reader with a calculator. */
#include "fluid/cubic_internal.h"

#include <math.h>

/* From here on a pressure is a small difference of two large terms. */
#define STRONG_CANCELLATION 1e3

static void add(struct explanation *out, const char *symbol, const char *meaning, const char *formula,
                const char *unit, double value)
{
    explanation_add(out, (struct explained_value){symbol, meaning, formula, unit, 0, value, false});
}

static void add_givens(const struct fluid_at_t *at_t, const struct cubic_form *form, double v, struct explanation *out)
{
    const struct pure_spec *pure = at_t->fluid->spec->pure[0];
    add(out, "R", "gas constant", NULL, "J/mol/K", at_t->fluid->gas_constant);
    add(out, "T", "temperature", NULL, "K", at_t->temperature);
    add(out, "v", "molar volume", NULL, "m3/mol", v);
    add(out, "T_c", "critical temperature", NULL, "K", pure->critical_temperature.value);
    add(out, "p_c", "critical pressure", NULL, "Pa", pure->critical_pressure.value);
    add(out, "omega", "acentric factor", NULL, "1", pure->acentric.value);
    add(out, "Omega_a", "the equation's constant for a", NULL, "1", form->omega_a);
    add(out, "Omega_b", "the equation's constant for b", NULL, "1", form->omega_b);
    add(out, "d_1", "first constant of the denominator", NULL, "1", form->delta1);
    add(out, "d_2", "second constant of the denominator", NULL, "1", form->delta2);
}

static void add_parameters(const struct cubic_parameters *parameters, struct explanation *out)
{
    add(out, "m", "slope of the attraction", parameters->slope_formula, "1", parameters->m);
    add(out, "a_c", "attraction at T_c", "Omega_a * (R * T_c) ^ 2 / p_c", "J m3/mol2", parameters->a_critical);
    add(out, "alpha", "its change with temperature", "(1 + m * (1 - sqrt(T / T_c))) ^ 2", "1",
        parameters->a / parameters->a_critical);
    add(out, "a", "attraction", "a_c * alpha", "J m3/mol2", parameters->a);
    add(out, "b", "covolume", "Omega_b * R * T_c / p_c", "m3/mol", parameters->b);
}

static void add_fugacity(const struct cubic_parameters *parameters, double RT, double p, double v,
                         struct explanation *out)
{
    const double d1 = parameters->form->delta1, d2 = parameters->form->delta2;
    const double A = parameters->a * p / (RT * RT), B = parameters->b * p / RT, Z = p * v / RT;
    add(out, "Z", "compressibility factor", "p * v / (R * T)", "1", Z);
    add(out, "A", "reduced attraction", "a * p / (R * T) ^ 2", "1", A);
    add(out, "B", "reduced covolume", "b * p / (R * T)", "1", B);
    add(out, "K", "attractive part", "A / ((d_1 - d_2) * B) * ln((Z + d_1 * B) / (Z + d_2 * B))", "1",
        A / ((d1 - d2) * B) * log((Z + d1 * B) / (Z + d2 * B)));
    add(out, "ln_phi", "ln fugacity coefficient", "Z - 1 - ln(Z - B) - K", "1",
        Z - 1.0 - log(Z - B) - out->values[out->count - 1].value);
}

enum answer cubic_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                          struct explanation *out)
{
    const struct cubic_parameters parameters = cubic_parameters_at(at_t);
    const double v = molar_volume, b = parameters.b, RT = at_t->fluid->gas_constant * at_t->temperature;
    const double d1 = parameters.form->delta1, d2 = parameters.form->delta2;
    if (!(v > b)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double repulsion = RT / (v - b), attraction = parameters.a / ((v + d1 * b) * (v + d2 * b));
    const double p = repulsion - attraction;
    const bool is_cancelling = repulsion > STRONG_CANCELLATION * fabs(p);
    add_givens(at_t, parameters.form, v, out);
    add_parameters(&parameters, out);
    explanation_add(out, (struct explained_value){"p_rep", "repulsive part", "R * T / (v - b)", "Pa", 0, repulsion,
                                                  is_cancelling});
    explanation_add(out, (struct explained_value){"p_att", "attractive part", "a / ((v + d_1 * b) * (v + d_2 * b))",
                                                  "Pa", 0, attraction, is_cancelling});
    add(out, "p", "pressure", "p_rep - p_att", "Pa", p);
    if (with_fugacity) {
        if (!(p > 0.0)) {
            return ANSWER_OUT_OF_RANGE;
        }
        add_fugacity(&parameters, RT, p, v, out);
    }
    return ANSWER_OK;
}
