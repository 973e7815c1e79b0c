#include "fluid/ideal_part.h"

#include <math.h>

static struct ideal_part power_term(const struct ideal_term *term, double tau)
{
    const double value = term->a * pow(tau, term->b);
    return (struct ideal_part){value, term->b * value, term->b * (term->b - 1.0) * value};
}

/* ln(1 - exp(-x)), written with exp(-x) alone so that a cold vibration does not overflow. */
static struct ideal_part einstein_term(const struct ideal_term *term, double tau)
{
    const double x = term->b * tau, decay = exp(-x), rest = -expm1(-x);
    return (struct ideal_part){term->a * log(rest), term->a * x * decay / rest,
                               -term->a * x * x * decay / (rest * rest)};
}

static struct ideal_part general_einstein_term(const struct ideal_term *term, double tau)
{
    const double x = term->b * tau, y = term->d * exp(x), sum = term->c + y;
    return (struct ideal_part){term->a * log(sum), term->a * x * y / sum, term->a * x * x * term->c * y / (sum * sum)};
}

/* ln|sinh x| (`sign` -1) or ln cosh x (`sign` +1), as |x| + ln((1 + sign exp(-2|x|)) / 2). */
static struct ideal_part hyperbolic_term(double a, double x, double sign)
{
    const double size = fabs(x), decay = exp(-2.0 * size);
    const double sum = sign < 0.0 ? -expm1(-2.0 * size) : 1.0 + decay;
    const double slope = (1.0 - sign * decay) / sum;
    return (struct ideal_part){a * (size + log(0.5 * sum)), a * size * slope,
                               a * sign * x * x * 4.0 * decay / (sum * sum)};
}

static struct ideal_part term_at(const struct ideal_term *term, double tau)
{
    switch (term->kind) {
    case IDEAL_LEAD:
        return (struct ideal_part){term->a + term->b * tau, term->b * tau, 0.0};
    case IDEAL_LOG_TAU:
        return (struct ideal_part){term->a * log(tau), term->a, -term->a};
    case IDEAL_TAU_LOG_TAU:
        return (struct ideal_part){term->a * tau * log(tau), term->a * tau * (log(tau) + 1.0), term->a * tau};
    case IDEAL_POWER:
        return power_term(term, tau);
    case IDEAL_EINSTEIN:
        return einstein_term(term, tau);
    case IDEAL_EINSTEIN_GENERAL:
        return general_einstein_term(term, tau);
    case IDEAL_LOG_SINH:
        return hyperbolic_term(term->a, term->b * tau, -1.0);
    case IDEAL_LOG_COSH:
        return hyperbolic_term(-term->a, term->b * tau, 1.0);
    case IDEAL_KINDS:
        break;
    }
    return (struct ideal_part){0.0, 0.0, 0.0};
}

struct ideal_part ideal_part_at(const struct reference_spec *equation, double tau)
{
    struct ideal_part sum = {0.0, 0.0, 0.0};
    for (size_t i = 0; i < equation->ideal_count; i++) {
        const struct ideal_part term = term_at(&equation->ideal[i], tau);
        sum.value += term.value;
        sum.t += term.t;
        sum.tt += term.tt;
    }
    return sum;
}

double ideal_part_heat_capacity_r(const struct reference_spec *equation, double temperature)
{
    return 1.0 - ideal_part_at(equation, equation->reducing_temperature / temperature).tt;
}
