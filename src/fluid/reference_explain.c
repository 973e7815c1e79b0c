/* The reference equations' numbers for a reader with a calculator: the sums over each group of terms, taken term by
 * term as published. The solver's regrouped sums (reference_residual.c) are a second, independent way to the same. */
#include "fluid/reference_explain.h"
#include "fluid/reference_internal.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* Below this Z is a small difference of large sums. */
#define STRONG_CANCELLATION 1e-3

/* The groups a paper sets its terms out in. */
enum group { GROUP_POLYNOMIAL, GROUP_EXPONENTIAL, GROUP_GAUSSIAN, GROUP_DOUBLE, GROUP_CRITICAL, GROUPS };

struct group_sum {
    size_t terms;
    double value, slope; /* alphar and delta dalphar/ddelta */
};

static enum group group_of(const struct residual_term *term)
{
    switch (term->kind) {
    case RESIDUAL_POWER:
        return term->l > 0.0 ? GROUP_EXPONENTIAL : GROUP_POLYNOMIAL;
    case RESIDUAL_EXPONENTIAL:
        return GROUP_EXPONENTIAL;
    case RESIDUAL_GAUSSIAN:
    case RESIDUAL_INVERSE_GAUSSIAN:
    case RESIDUAL_SPECIAL_EXPONENTIAL:
        return GROUP_GAUSSIAN;
    case RESIDUAL_DOUBLE_EXPONENTIAL:
        return GROUP_DOUBLE;
    case RESIDUAL_NONANALYTIC:
    case RESIDUAL_KINDS:
        break;
    }
    return GROUP_CRITICAL;
}

/* value of a term and its delta d/ddelta. */
struct term_value {
    double value, slope;
};

/* The nonanalytic term n delta D^b psi of Span and Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509, table 32. */
static struct term_value nonanalytic_at(const struct residual_term *k, double tau, double delta)
{
    const double gap = delta - 1.0, square = gap * gap;
    const double theta = 1.0 - tau + k->A * pow(square, 1.0 / (2.0 * k->beta));
    const double D = theta * theta + k->B * pow(square, k->a);
    const double psi = exp(-k->C * square - k->E * (tau - 1.0) * (tau - 1.0));
    if (!(D > 0.0)) {
        return (struct term_value){0.0, 0.0}; /* at the critical point itself */
    }
    const double D_delta =
        square > 0.0
            ? 2.0 / gap *
                  (theta * k->A / k->beta * pow(square, 1.0 / (2.0 * k->beta)) + k->B * k->a * pow(square, k->a))
            : 0.0;
    const double value = k->n * delta * pow(D, k->b) * psi;
    return (struct term_value){value, value * (1.0 + delta * (k->b * D_delta / D - 2.0 * k->C * gap))};
}

/* n delta^d tau^t times its factor; the slope is the value times delta d/ddelta of its logarithm. */
static struct term_value term_at(const struct residual_term *k, double tau, double delta)
{
    double exponent = 0.0, slope = k->d;
    const double gap = delta - k->epsilon, turn = tau - k->gamma;
    switch (k->kind) {
    case RESIDUAL_POWER:
        exponent = k->l > 0.0 ? -pow(delta, k->l) : 0.0;
        slope += k->l * exponent;
        break;
    case RESIDUAL_EXPONENTIAL:
        exponent = -k->g * pow(delta, k->l);
        slope += k->l * exponent;
        break;
    case RESIDUAL_GAUSSIAN:
        exponent = -k->eta * gap * gap - k->beta * turn * turn;
        slope -= 2.0 * k->eta * delta * gap;
        break;
    case RESIDUAL_INVERSE_GAUSSIAN:
        exponent = -k->eta * gap * gap + 1.0 / (k->b + k->beta * turn * turn);
        slope -= 2.0 * k->eta * delta * gap;
        break;
    case RESIDUAL_DOUBLE_EXPONENTIAL:
        if (k->gd > 0.0 && k->ld > 0.0) {
            exponent = -k->gd * pow(delta, k->ld);
            slope += k->ld * exponent;
        }
        exponent -= k->gt > 0.0 && k->lt > 0.0 ? k->gt * pow(tau, k->lt) : 0.0;
        break;
    case RESIDUAL_SPECIAL_EXPONENTIAL:
        exponent = -k->eta * gap * gap - k->beta * (delta - k->gamma);
        slope -= (2.0 * k->eta * gap + k->beta) * delta;
        break;
    case RESIDUAL_NONANALYTIC:
    case RESIDUAL_KINDS:
        return nonanalytic_at(k, tau, delta);
    }
    const double value = k->n * pow(delta, k->d) * pow(tau, k->t) * exp(exponent);
    return (struct term_value){value, value * slope};
}

static void sum_groups(const struct reference_spec *equation, double tau, double delta, struct group_sum sums[GROUPS])
{
    memset(sums, 0, GROUPS * sizeof *sums);
    for (size_t i = 0; i < equation->residual_count; i++) {
        struct group_sum *sum = &sums[group_of(&equation->residual[i])];
        const struct term_value term = term_at(&equation->residual[i], tau, delta);
        sum->terms++;
        sum->value += term.value;
        sum->slope += term.slope;
    }
}

/* ---- telling --------------------------------------------------------------------------------------------------- */

struct group_words {
    const char *value_symbol, *value_meaning, *slope_symbol, *slope_meaning;
};

static const struct group_words WORDS[GROUPS] = {
    [GROUP_POLYNOMIAL] = {"A_pol", "polynomial terms, alphar", "D_pol", "polynomial terms, delta dalphar/ddelta"},
    [GROUP_EXPONENTIAL] = {"A_exp", "exponential terms, alphar", "D_exp", "exponential terms, delta dalphar/ddelta"},
    [GROUP_GAUSSIAN] = {"A_gau", "Gaussian terms, alphar", "D_gau", "Gaussian terms, delta dalphar/ddelta"},
    [GROUP_DOUBLE] = {"A_dbl", "double exponential terms, alphar", "D_dbl",
                      "double exponential terms, delta dalphar/ddelta"},
    [GROUP_CRITICAL] = {"A_crit", "near-critical terms, alphar", "D_crit", "near-critical terms, delta dalphar/ddelta"},
};

static void add(struct explanation *out, const char *symbol, const char *meaning, const char *formula, const char *unit,
                double value)
{
    explanation_add(out, (struct explained_value){symbol, meaning, formula, unit, 0, value, false});
}

static void add_state(const struct fluid_at_t *at_t, const struct reference_spec *equation, double v, double tau,
                      double delta, struct explanation *out)
{
    add(out, "R", "gas constant of the equation", NULL, "J/mol/K", equation->gas_constant);
    add(out, "T", "temperature", NULL, "K", at_t->temperature);
    add(out, "v", "molar volume", NULL, "m3/mol", v);
    add(out, "T_r", "reducing temperature", NULL, "K", equation->reducing_temperature);
    add(out, "rho_r", "reducing density", NULL, "mol/m3", equation->reducing_density);
    add(out, "tau", "reduced inverse temperature", "T_r / T", "1", tau);
    add(out, "rho", "density", "1 / v", "mol/m3", 1.0 / v);
    add(out, "delta", "reduced density", "rho / rho_r", "1", delta);
}

/* The sums of the groups the equation has, and "first + ... + last" over them behind `opening`. */
static void add_sums(const struct group_sum sums[GROUPS], bool is_slope, bool is_cancelling, const char *opening,
                     char text[EXPLAINED_TEXT_BYTES], struct explanation *out)
{
    size_t length = (size_t)snprintf(text, EXPLAINED_TEXT_BYTES, "%s", opening);
    for (size_t g = 0; g < GROUPS; g++) {
        if (sums[g].terms == 0) {
            continue;
        }
        const char *symbol = is_slope ? WORDS[g].slope_symbol : WORDS[g].value_symbol;
        const char *meaning = is_slope ? WORDS[g].slope_meaning : WORDS[g].value_meaning;
        const double value = is_slope ? sums[g].slope : sums[g].value;
        explanation_add(out, (struct explained_value){symbol, meaning, NULL, "1", sums[g].terms, value, is_cancelling});
        length += (size_t)snprintf(text + length, EXPLAINED_TEXT_BYTES - length, " + %s", symbol);
    }
}

enum answer reference_explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                              struct explanation *out)
{
    const struct reference_spec *equation = reference_of((const struct reference_at_t *)(const void *)at_t)->equation;
    const double v = molar_volume, RT = equation->gas_constant * at_t->temperature;
    if (!(v > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double tau = equation->reducing_temperature / at_t->temperature;
    const double delta = 1.0 / (v * equation->reducing_density);
    struct group_sum sums[GROUPS];
    sum_groups(equation, tau, delta, sums);
    double Z = 1.0, alphar = 0.0;
    for (size_t g = 0; g < GROUPS; g++) {
        Z += sums[g].slope;
        alphar += sums[g].value;
    }
    add_state(at_t, equation, v, tau, delta, out);
    add_sums(sums, true, fabs(Z) < STRONG_CANCELLATION, "1", out->texts[0], out);
    add(out, "Z", "compressibility factor", out->texts[0], "1", Z);
    add(out, "p", "pressure", "Z * rho * R * T", "Pa", Z * RT / v);
    if (!with_fugacity) {
        return ANSWER_OK;
    }
    add_sums(sums, false, false, "Z - 1 - ln(Z)", out->texts[1], out);
    add(out, "ln_phi", "ln fugacity coefficient", out->texts[1], "1", alphar + Z - 1.0 - log(Z));
    return Z > 0.0 ? ANSWER_OK : ANSWER_OUT_OF_RANGE;
}
