/* The cubic family's numbers for a reader with a calculator. */
#include "fluid/cubic_internal.h"

#include <math.h>

/* From here on a pressure is a small difference of two large terms. */
#define STRONG_CANCELLATION 1e3

static void add(struct explanation *out, const char *symbol, const char *meaning, const char *formula, const char *unit,
                double value)
{
    explanation_add(out, (struct explained_value){symbol, meaning, formula, unit, 0, value, false});
}

/* Above this acentric factor Robinson and Peng's slope of 1978 is another polynomial. */
#define HIGH_ACENTRIC 0.491

static void add_givens(const struct fluid_at_t *at_t, double v, struct explanation *out)
{
    const struct cubic_fluid *cubic = cubic_of(at_t);
    const struct cubic_form *form = cubic->equation->form;
    add(out, "R", "gas constant", NULL, "J/mol/K", at_t->fluid->gas_constant);
    add(out, "T", "temperature", NULL, "K", at_t->temperature);
    add(out, "v", "molar volume", NULL, "m3/mol", v);
    add(out, "T_c", "critical temperature", NULL, "K", cubic->component[0].critical_temperature);
    add(out, "p_c", "critical pressure", NULL, "Pa", cubic->component[0].critical_pressure);
    if (cubic->equation->alpha == ALPHA_SOAVE) {
        add(out, "omega", "acentric factor", NULL, "1", at_t->fluid->spec->pure[0]->acentric.value);
    }
    add(out, "Omega_a", "the equation's constant for a", NULL, "1", form->omega_a);
    add(out, "Omega_b", "the equation's constant for b", NULL, "1", form->omega_b);
    add(out, "d_1", "first constant of the denominator", NULL, "1", form->delta1);
    add(out, "d_2", "second constant of the denominator", NULL, "1", form->delta2);
}

static const char *alpha_formula(enum cubic_alpha alpha)
{
    switch (alpha) {
    case ALPHA_REDLICH_KWONG:
        return "1 / sqrt(T / T_c)";
    case ALPHA_SOAVE:
        return "(1 + m * (1 - sqrt(T / T_c))) ^ 2";
    case ALPHA_TWU:
        return "(T / T_c) ^ (N * (M - 1)) * exp(L * (1 - (T / T_c) ^ (N * M)))";
    case ALPHA_ONE:
        break;
    }
    return NULL;
}

static void add_alpha_parameters(const struct cubic_fluid *cubic, struct explanation *out)
{
    const struct cubic_component *component = &cubic->component[0];
    if (cubic->equation->alpha == ALPHA_SOAVE) {
        const bool is_high =
            cubic->equation->high_slope_formula != NULL && cubic->head.spec->pure[0]->acentric.value > HIGH_ACENTRIC;
        add(out, "m", "slope of the attraction",
            is_high ? cubic->equation->high_slope_formula : cubic->equation->slope_formula, "1", component->m);
    } else if (cubic->equation->alpha == ALPHA_TWU) {
        add(out, "L", "first constant of alpha", NULL, "1", component->L);
        add(out, "M", "second constant of alpha", NULL, "1", component->M);
        add(out, "N", "third constant of alpha", NULL, "1", component->N);
    }
}

static void add_covolume(const struct cubic_at_t *at, struct explanation *out)
{
    const struct cubic_component *component = &cubic_of(&at->head)->component[0];
    if (!cubic_of(&at->head)->equation->has_moving_covolume) {
        add(out, "b", "covolume", "Omega_b * R * T_c / p_c", "m3/mol", at->b[0]);
        return;
    }
    add(out, "A_b", "first constant of the covolume", NULL, "K", component->set->covolume_A);
    add(out, "B_b", "second constant of the covolume", NULL, "K", component->set->covolume_B);
    add(out, "b", "covolume", "Omega_b * R * T_c / p_c * ((1 + A_b / (T + B_b)) / (1 + A_b / (T_c + B_b))) ^ 3",
        "m3/mol", at->b[0]);
}

static void add_parameters(const struct cubic_at_t *at, double a, struct explanation *out)
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    const double a_critical = cubic->component[0].a_critical * at->head.fluid->gas_constant;
    add_alpha_parameters(cubic, out);
    add(out, "a_c", "attraction at T_c", "Omega_a * (R * T_c) ^ 2 / p_c", "J m3/mol2", a_critical);
    add(out, "alpha", "its change with temperature", alpha_formula(cubic->equation->alpha), "1", a / a_critical);
    add(out, "a", "attraction", "a_c * alpha", "J m3/mol2", a);
    add_covolume(at, out);
}

/* The formulas in the equation's own volume: the molar volume, or where the equation is translated v_0 = v + c. */
struct wording {
    const char *repulsion, *attraction;
    const char *Z, *Z_formula;
    const char *attractive_part, *attractive_part_without_constants; /* the second where d_1 = d_2 = 0 */
    const char *ln_phi;
};

static const struct wording PLAIN = {
    .repulsion = "R * T / (v - b)",
    .attraction = "a / ((v + d_1 * b) * (v + d_2 * b))",
    .Z = "Z",
    .Z_formula = "p * v / (R * T)",
    .attractive_part = "A / ((d_1 - d_2) * B) * ln((Z + d_1 * B) / (Z + d_2 * B))",
    .attractive_part_without_constants = "A / Z",
    .ln_phi = "Z - 1 - ln(Z - B) - K",
};

static const struct wording TRANSLATED = {
    .repulsion = "R * T / (v_0 - b)",
    .attraction = "a / ((v_0 + d_1 * b) * (v_0 + d_2 * b))",
    .Z = "Z_0",
    .Z_formula = "p * v_0 / (R * T)",
    .attractive_part = "A / ((d_1 - d_2) * B) * ln((Z_0 + d_1 * B) / (Z_0 + d_2 * B))",
    .attractive_part_without_constants = "A / Z_0",
    .ln_phi = "Z_0 - 1 - ln(Z_0 - B) - K - c * p / (R * T)",
};

static void add_translation(double v, double c, struct explanation *out)
{
    add(out, "c", "translation", NULL, "m3/mol", c);
    add(out, "v_0", "volume before translation", "v + c", "m3/mol", v + c);
}

/* `v` is the equation's own volume. */
static void add_fugacity(const struct cubic_at_t *at, const struct wording *words, double a, double p, double v,
                         struct explanation *out)
{
    const struct cubic_form *form = cubic_of(&at->head)->equation->form;
    const double RT = at->head.fluid->gas_constant * at->head.temperature;
    const double d1 = form->delta1, d2 = form->delta2;
    const double A = a * p / (RT * RT), B = at->b[0] * p / RT, Z = p * v / RT;
    const bool has_constants = d1 > d2;
    const double K = has_constants ? A / ((d1 - d2) * B) * log((Z + d1 * B) / (Z + d2 * B)) : A / Z;
    add(out, words->Z, "compressibility factor", words->Z_formula, "1", Z);
    add(out, "A", "reduced attraction", "a * p / (R * T) ^ 2", "1", A);
    add(out, "B", "reduced covolume", "b * p / (R * T)", "1", B);
    add(out, "K", "attractive part", has_constants ? words->attractive_part : words->attractive_part_without_constants,
        "1", K);
    add(out, "ln_phi", "ln fugacity coefficient", words->ln_phi, "1", Z - 1.0 - log(Z - B) - K - at->c[0] * p / RT);
}

enum answer cubic_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                          struct explanation *out)
{
    const struct cubic_at_t *at = cubic_at(at_t);
    const struct cubic_form *form = cubic_of(at_t)->equation->form;
    const double RT = at_t->fluid->gas_constant * at_t->temperature;
    const double b = at->b[0], a = at->pair[0] * RT, v = molar_volume + at->c[0];
    const bool is_translated = fabs(at->c[0]) > 0.0;
    const struct wording *words = is_translated ? &TRANSLATED : &PLAIN;
    if (!(v > b) || !(molar_volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double repulsion = RT / (v - b), attraction = a / ((v + form->delta1 * b) * (v + form->delta2 * b));
    const double p = repulsion - attraction;
    const bool is_cancelling = repulsion > STRONG_CANCELLATION * fabs(p);
    add_givens(at_t, molar_volume, out);
    add_parameters(at, a, out);
    if (is_translated) {
        add_translation(molar_volume, at->c[0], out);
    }
    explanation_add(
        out, (struct explained_value){"p_rep", "repulsive part", words->repulsion, "Pa", 0, repulsion, is_cancelling});
    explanation_add(out, (struct explained_value){"p_att", "attractive part", words->attraction, "Pa", 0, attraction,
                                                  is_cancelling});
    add(out, "p", "pressure", "p_rep - p_att", "Pa", p);
    if (with_fugacity) {
        if (!(p > 0.0)) {
            return ANSWER_OUT_OF_RANGE;
        }
        add_fugacity(at, words, a, p, v, out);
    }
    return ANSWER_OK;
}
