/* The multi-fluid methods' numbers for a reader with a calculator: the reducing functions, and the sums over the terms
 * of each component and of the departure functions at the mixture's tau and delta. */
#include "fluid/explanation.h"
#include "fluid/multi_fluid_internal.h"

#include <math.h>

struct parts_told {
    const struct multi_fluid *fluid;
    const struct multi_fluid_work *work;
    bool is_slope; /* delta dalphar/ddelta; else alphar */
    struct explanation *out;
};

static size_t terms_of_components(const struct multi_fluid *fluid)
{
    size_t terms = 0;
    for (size_t i = 0; i < fluid->head.count; i++) {
        terms += fluid->equation[i]->residual_count;
    }
    return terms;
}

static const char *value_words(const struct parts_told *told)
{
    return told->is_slope ? "delta dalphar/ddelta" : "alphar";
}

/* Each component's sum by itself, for few of them. */
static void tell_components(const struct parts_told *told)
{
    const struct multi_fluid_work *w = told->work;
    const size_t count = told->fluid->head.count;
    for (size_t i = 0; count <= EXPLAINED_COMPONENTS && i < count; i++) {
        explanation_add(told->out,
                        (struct explained_value){
                            explanation_text(told->out, told->is_slope ? "D_%zu" : "A_%zu", i + 1),
                            explanation_text(told->out, "terms of component %zu, %s", i + 1, value_words(told)),
                            NULL,
                            "1",
                            told->fluid->equation[i]->residual_count,
                            told->is_slope ? w->d[i] : w->value[i],
                            false,
                        });
    }
}

static const char *components_formula(const struct parts_told *told)
{
    const size_t count = told->fluid->head.count;
    const char *symbol = told->is_slope ? "D" : "A", *text = "";
    if (count > EXPLAINED_COMPONENTS) {
        return NULL;
    }
    for (size_t i = 0; i < count; i++) {
        text = count == 1
                   ? explanation_text(told->out, "%s_1", symbol)
                   : explanation_text(told->out, "%s%sx_%zu * %s_%zu", text, i == 0 ? "" : " + ", i + 1, symbol, i + 1);
    }
    return text;
}

/* The components' sum and the departures', both weighted. */
static void tell_sums(const struct parts_told *told)
{
    const struct multi_fluid_work *w = told->work;
    const size_t count = told->fluid->head.count;
    const double *part = told->is_slope ? w->d : w->value;
    double components = 0.0, departures = 0.0;
    size_t terms = 0;
    for (size_t i = 0; i < count; i++) {
        components += w->x[i] * part[i];
    }
    for (size_t k = 0; k < told->fluid->function_count; k++) {
        departures += w->weights[count + k] * part[count + k];
        terms++;
    }
    tell_components(told);
    const char *formula = components_formula(told);
    explanation_add(
        told->out,
        (struct explained_value){
            told->is_slope ? "D_comp" : "A_comp",
            explanation_text(told->out, formula == NULL ? "terms of the components, %s" : "the components, %s",
                             value_words(told)),
            formula, "1", formula == NULL ? terms_of_components(told->fluid) : 0, components, false});
    explanation_put(
        told->out, told->is_slope ? "D_dep" : "A_dep",
        terms == 0 ? "no departure function belongs to these pairs"
                   : explanation_text(told->out, "departure function%s, %s", terms == 1 ? "" : "s", value_words(told)),
        NULL, "1", departures);
}

static void tell_state(const struct fluid_at_t *at_t, const struct multi_fluid_work *w, double v, double delta,
                       struct explanation *out)
{
    explanation_put(out, "R", "gas constant of the method", NULL, "J/mol/K", at_t->fluid->gas_constant);
    explanation_put(out, "T", "temperature", NULL, "K", at_t->temperature);
    explanation_put(out, "v", "molar volume", NULL, "m3/mol", v);
    explanation_put_fractions(out, at_t->fluid->spec, w->x);
    explanation_put(out, "T_r", "reducing temperature at this composition", NULL, "K", w->reducing_temperature);
    explanation_put(out, "v_r", "reducing volume at this composition", NULL, "m3/mol", w->reducing_volume);
    explanation_put(out, "tau", "reduced inverse temperature", "T_r / T", "1", w->tau);
    explanation_put(out, "delta", "reduced density", "v_r / v", "1", delta);
}

/* ln phi_i = d(n alphar)/dn_i - ln Z. */
static void tell_fugacities(const struct fluid_at_t *at_t, const struct multi_fluid_work *w, const double F_n[],
                            double Z, double pressure, struct explanation *out)
{
    const size_t count = at_t->fluid->count;
    for (size_t i = 0; count <= EXPLAINED_COMPONENTS && i < count; i++) {
        const double ln_phi = F_n[i] - log(Z);
        const char *G = explanation_text(out, "G_%zu", i + 1);
        explanation_put(out, G, "d(n alphar)/dn_i at constant T and V", NULL, "1", F_n[i]);
        explanation_put(out, explanation_text(out, "ln_phi_%zu", i + 1), "ln fugacity coefficient",
                        explanation_text(out, "%s - ln(Z)", G), "1", ln_phi);
        explanation_put_fugacity(out, count, i, w->x[i], ln_phi, pressure);
    }
}

enum answer multi_fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                                struct explanation *out)
{
    const struct multi_fluid *fluid = multi_fluid_of(at_t);
    struct multi_fluid_work *w = multi_fluid_work_of(at_t);
    double F_n[EXPLAINED_COMPONENTS];
    const bool is_told = with_fugacity && fluid->head.count <= EXPLAINED_COMPONENTS;
    struct helmholtz F = {.F_n = F_n};
    /* With slopes, so that the parts are evaluated one by one. */
    const enum answer answer = multi_fluid_tv(at_t, volume, n, WANT_F_T | (is_told ? (unsigned)WANT_F_N : 0U), &F);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double v = volume / w->amount, Z = 1.0 - volume * F.F_V / w->amount;
    const double pressure = Z * fluid->head.gas_constant * at_t->temperature / v;
    parts_slopes(w->parts, w->value, w->d, w->t);
    tell_state(at_t, w, v, w->reducing_volume / v, out);
    tell_sums(&(struct parts_told){fluid, w, true, out});
    explanation_put(out, "Z", "compressibility factor", "1 + D_comp + D_dep", "1", Z);
    explanation_put(out, "p", "pressure", "Z * R * T / v", "Pa", pressure);
    if (!with_fugacity) {
        return ANSWER_OK;
    }
    if (!(Z > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (fluid->head.count == 1) {
        tell_sums(&(struct parts_told){fluid, w, false, out});
        explanation_put(out, "ln_phi", "ln fugacity coefficient", "Z - 1 - ln(Z) + A_comp + A_dep", "1",
                        F_n[0] - log(Z));
        return ANSWER_OK;
    }
    tell_fugacities(at_t, w, F_n, Z, pressure, out);
    return ANSWER_OK;
}
