/* Roots of the cubic family: the volume, or packing y = b / v, at a given pressure. */
#include "fluid/cubic_internal.h"

#include <float.h>
#include <math.h>

enum { MOST_ROOT_STEPS = 100 };

double cubic_critical_theta(const struct cubic_form *form)
{
    return form->omega_a / form->omega_b;
}

double cubic_critical_compressibility(const struct cubic_form *form)
{
    /* The sum of three equal roots Z of the equation multiplied out in Z: 3 Zc = 1 - (delta1 + delta2 - 1) Bc. */
    return (1.0 - (form->delta1 + form->delta2 - 1.0) * form->omega_b) / 3.0;
}

double cubic_critical_packing(const struct cubic_form *form)
{
    return form->omega_b / cubic_critical_compressibility(form);
}

double cubic_reduced_pressure(const struct cubic_form *form, double theta, double y)
{
    return y / (1.0 - y) - theta * y * y / ((1.0 + form->delta1 * y) * (1.0 + form->delta2 * y));
}

double cubic_reduced_pressure_slope(const struct cubic_form *form, double theta, double y)
{
    const double denominator = (1.0 + form->delta1 * y) * (1.0 + form->delta2 * y);
    const double free = 1.0 - y;
    return 1.0 / (free * free) - theta * y * (2.0 + (form->delta1 + form->delta2) * y) / (denominator * denominator);
}

double cubic_ln_reduced_fugacity(const struct cubic_form *form, double theta, double y)
{
    const double span = form->delta1 - form->delta2;
    const double attraction = span > 0.0 ? log1p(span * y / (1.0 + form->delta2 * y)) / span : y;
    const double Z_less_1 = y / (1.0 - y) - theta * y / ((1.0 + form->delta1 * y) * (1.0 + form->delta2 * y));
    return log(y / (1.0 - y)) - theta * attraction + Z_less_1;
}

/* h(y) = c[0] + c[1] y + c[2] y^2 + c[3] y^3, the pressure equation with its denominators multiplied out. On (0, 1)
 * it has the sign of pi(y) - pi, so h(0) < 0 < h(1). */
struct cubic_polynomial {
    double c[4];
};

static struct cubic_polynomial polynomial_at(const struct cubic_form *form, double theta, double pi)
{
    const double u = form->delta1 + form->delta2, w = form->delta1 * form->delta2;
    return (struct cubic_polynomial){{-pi, 1.0 - pi * (u - 1.0), u - theta - pi * (w - u), w + theta + pi * w}};
}

static double value_of(const struct cubic_polynomial *h, double y)
{
    return h->c[0] + y * (h->c[1] + y * (h->c[2] + y * h->c[3]));
}

static double slope_of(const struct cubic_polynomial *h, double y)
{
    return h->c[1] + y * (2.0 * h->c[2] + y * 3.0 * h->c[3]);
}

/* One step of Halley's towards a root, and whether it is the last: the error it leaves, of third order in the step, is
 * below the last digit, and no digits were lost to a step much longer than what remains. */
struct step {
    double next;
    bool is_last;
};

static struct step step_from(const struct cubic_polynomial *h, double y, double value)
{
    const double slope = slope_of(h, y), bend = h->c[2] + 3.0 * h->c[3] * y;
    const double denominator = slope * slope - value * bend;
    if (!(denominator > 0.0)) {
        return (struct step){.next = -1.0};
    }
    const double change = value * slope / denominator, size = fabs(change), next = y - change;
    const double left = size * size * size * (bend * bend + fabs(h->c[3] * slope));
    return (struct step){
        .next = next,
        .is_last =
            size <= 4.0 * DBL_EPSILON * next || (size <= next && left <= 0.5 * DBL_EPSILON * next * slope * slope),
    };
}

/* The root between `low` and `high`, where h rises through zero: Halley's steps, halving wherever one would leave the
 * bracket. Stops when nothing is left to gain, or when rounding leaves the bracket no middle. */
static double root_between(const struct cubic_polynomial *h, double low, double high, double y)
{
    for (int count = 0; count < MOST_ROOT_STEPS; count++) {
        const double value = value_of(h, y);
        if (value < 0.0) {
            low = y;
        } else {
            high = y;
        }
        struct step step = step_from(h, y, value);
        if (!(step.next > low && step.next < high)) {
            if (step.is_last) {
                break;
            }
            step.next = 0.5 * (low + high);
            if (!(step.next > low && step.next < high)) {
                break;
            }
        }
        y = step.next;
        if (step.is_last) {
            break;
        }
    }
    return y;
}

/* Where h has its local maximum and minimum, if both lie between 0 and 1 with zero between their values: then there
 * are three roots. */
struct extrema {
    bool separate_three_roots;
    double centre, reach; /* the extrema lie at centre -+ reach */
};

static struct extrema extrema_of(const struct cubic_polynomial *h)
{
    struct extrema found = {.separate_three_roots = false};
    if (!(h->c[3] > 0.0)) {
        return found;
    }
    const double unit = 1.0 / (3.0 * h->c[3]);
    found.centre = -h->c[2] * unit;
    const double square = found.centre * found.centre - h->c[1] * unit;
    if (!(square > 0.0)) {
        return found;
    }
    found.reach = sqrt(square);
    const double top = found.centre - found.reach, bottom = found.centre + found.reach;
    found.separate_three_roots = top > 0.0 && bottom < 1.0 && value_of(h, top) >= 0.0 && value_of(h, bottom) <= 0.0;
    return found;
}

/* The only root in (0, 1). With c[3] > 0 the curve bends down left of its centre and up right of it, so the
 * steps from the far end of the side that holds the root run to it from one side. */
static double lone_root(const struct cubic_polynomial *h, double centre)
{
    double start = 0.5;
    if (h->c[3] > 0.0) {
        if (!(centre > 0.0)) {
            start = 1.0;
        } else if (!(centre < 1.0)) {
            start = 0.0;
        } else {
            start = value_of(h, centre) > 0.0 ? 0.0 : 1.0;
        }
    }
    return root_between(h, 0.0, 1.0, start);
}

/* The smallest and the largest of three roots. A cubic reaches the height of its maximum again two reaches right of
 * its centre, and that of its minimum two reaches left, so both lie within those ends and steps from there run to
 * them from one side. */
static double vapour_root(const struct cubic_polynomial *h, const struct extrema *extrema)
{
    const double low = fmax(0.0, extrema->centre - 2.0 * extrema->reach);
    return root_between(h, low, extrema->centre - extrema->reach, low);
}

static double liquid_root(const struct cubic_polynomial *h, const struct extrema *extrema)
{
    const double high = fmin(1.0, extrema->centre + 2.0 * extrema->reach);
    return root_between(h, extrema->centre + extrema->reach, high, high);
}

enum answer cubic_packing(const struct cubic_form *form, double theta, double pi, enum branch branch, double *y,
                          int *roots)
{
    const struct cubic_polynomial h = polynomial_at(form, theta, pi);
    const struct extrema extrema = extrema_of(&h);
    *roots = extrema.separate_three_roots ? 2 : 1;
    if (!extrema.separate_three_roots) {
        *y = lone_root(&h, extrema.centre);
        if (branch == BRANCH_STABLE || !(theta > cubic_critical_theta(form))) {
            return ANSWER_OK;
        }
        /* Below the critical temperature the slope of pi is negative at the critical packing, which therefore lies
         * between the two branches. */
        return (*y < cubic_critical_packing(form)) == (branch == BRANCH_VAPOUR) ? ANSWER_OK : ANSWER_NO_SUCH_ROOT;
    }
    if (branch != BRANCH_LIQUID) {
        *y = vapour_root(&h, &extrema);
    }
    if (branch != BRANCH_VAPOUR) {
        const double vapour = *y;
        *y = liquid_root(&h, &extrema);
        if (branch == BRANCH_STABLE &&
            cubic_ln_reduced_fugacity(form, theta, vapour) < cubic_ln_reduced_fugacity(form, theta, *y)) {
            *y = vapour;
        }
    }
    return ANSWER_OK;
}

static double sum_of_powers(const double coefficients[CUBIC_FIT_TERMS], double s)
{
    double sum = coefficients[CUBIC_FIT_TERMS - 1];
    for (size_t k = CUBIC_FIT_TERMS - 1; k > 0; k--) {
        sum = sum * s + coefficients[k - 1];
    }
    return sum;
}

void cubic_saturation_guess(const struct cubic_form *form, double theta, double *vapour, double *liquid)
{
    const double critical = cubic_critical_packing(form);
    const double tau = cubic_critical_theta(form) / theta;
    const double s = sqrt(1.0 - tau);
    *liquid = critical * (1.0 + s * sum_of_powers(form->liquid, s));
    *vapour = critical / tau * exp(s * sum_of_powers(form->vapour, s) / tau);
}
