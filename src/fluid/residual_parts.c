#include "fluid/residual_parts.h"

unsigned residual_power_slot(double d)
{
    return d >= 0.0 && d < TABLE_POWERS && d == floor(d) ? (unsigned)d : GENERAL_POWER; /* == on given numbers */
}

static struct residual_envelope exponential_envelope(double g, double l)
{
    /* A part whose g or l is zero is 1 by the definition of the kinds. */
    if (g == 0.0 || l == 0.0) {
        return (struct residual_envelope){.kind = ENVELOPE_NONE};
    }
    return (struct residual_envelope){
        .kind = ENVELOPE_EXPONENTIAL, .strength = g, .l = l, .l_slot = residual_power_slot(l)};
}

static struct residual_envelope gaussian_envelope(const struct residual_term *term)
{
    return (struct residual_envelope){.kind = ENVELOPE_GAUSSIAN, .strength = term->eta, .epsilon = term->epsilon};
}

struct residual_parts residual_take_apart(const struct residual_term *term)
{
    struct residual_parts parts = {.n = term->n, .t = term->t, .d = term->d};
    switch (term->kind) {
    case RESIDUAL_POWER:
        parts.envelope = exponential_envelope(1.0, term->l);
        break;
    case RESIDUAL_EXPONENTIAL:
        /* Unlike a double exponential's part, g delta^0 here is a constant factor exp(-g). */
        parts.envelope = exponential_envelope(term->g, term->l);
        parts.n *= term->l == 0.0 ? exp(-term->g) : 1.0;
        break;
    case RESIDUAL_GAUSSIAN:
        parts.envelope = gaussian_envelope(term);
        parts.factor = (struct residual_factor){.kind = FACTOR_GAUSSIAN, .beta = term->beta, .gamma = term->gamma};
        break;
    case RESIDUAL_INVERSE_GAUSSIAN:
        parts.envelope = gaussian_envelope(term);
        parts.factor = (struct residual_factor){
            .kind = FACTOR_INVERSE_GAUSSIAN, .beta = term->beta, .gamma = term->gamma, .b = term->b};
        break;
    case RESIDUAL_DOUBLE_EXPONENTIAL:
        parts.envelope = exponential_envelope(term->gd, term->ld);
        if (term->gt != 0.0 && term->lt != 0.0) {
            parts.factor = (struct residual_factor){.kind = FACTOR_EXPONENTIAL, .g = term->gt, .l = term->lt};
        }
        break;
    case RESIDUAL_SPECIAL_EXPONENTIAL:
        parts.envelope = gaussian_envelope(term);
        parts.envelope.slope = term->beta;
        parts.envelope.gamma = term->gamma;
        break;
    case RESIDUAL_NONANALYTIC:
    case RESIDUAL_KINDS:
        break;
    }
    return parts;
}

bool residual_same_envelope(const struct residual_envelope *a, const struct residual_envelope *b)
{
    return a->kind == b->kind && a->strength == b->strength && a->l == b->l && a->epsilon == b->epsilon &&
           a->slope == b->slope && a->gamma == b->gamma;
}

bool residual_same_factor(const struct residual_factor *a, const struct residual_factor *b)
{
    return a->kind == b->kind && a->beta == b->beta && a->gamma == b->gamma && a->b == b->b && a->g == b->g &&
           a->l == b->l;
}

struct factor_value residual_factor_at(const struct residual_factor *factor, double tau, double log_tau)
{
    switch (factor->kind) {
    case FACTOR_GAUSSIAN: {
        const double x = tau - factor->gamma;
        return (struct factor_value){exp(-factor->beta * x * x), -2.0 * factor->beta * tau * x,
                                     -2.0 * factor->beta * tau * tau};
    }
    case FACTOR_INVERSE_GAUSSIAN: {
        const double x = tau - factor->gamma;
        const double h = factor->b + factor->beta * x * x;
        const double slope = 2.0 * factor->beta * x;
        return (struct factor_value){exp(1.0 / h), -tau * slope / (h * h),
                                     tau * tau * (2.0 * slope * slope / h - 2.0 * factor->beta) / (h * h)};
    }
    case FACTOR_EXPONENTIAL: {
        const double x = factor->g * exp(factor->l * log_tau);
        return (struct factor_value){exp(-x), -factor->l * x, -factor->l * (factor->l - 1.0) * x};
    }
    case FACTOR_ONE:
        break;
    }
    return (struct factor_value){1.0, 0.0, 0.0};
}
