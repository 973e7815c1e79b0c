/* The reducing functions of a multi-fluid mixture and their derivatives by amount.
 *
 * Both are Y(x) = sum_i x_i^2 Y_i + sum_{i<j} c x_i x_j (x_i + x_j) / (b x_i + x_j) with b = beta^2 and
 * c = 2 beta gamma times the pair's mean (Kunz and Wagner, J. Chem. Eng. Data 57 (2012) 3032, eqs. 16 and 17). Y is
 * homogeneous of degree two, so that Y as a function of amounts is Y(n) / N^2 and, at N = 1,
 *
 *   n dln Y/dn_i = Y_i / Y - 2,   n^2 d2ln Y/(dn_i dn_j) = Y_ij / Y - Y_i Y_j / Y^2 + 2.
 */
#include "fluid/multi_fluid_internal.h"

#include <math.h>

/* Two fractions that sum to no more than this are as good as absent: their reciprocal's square would be no number. */
#define LEAST_SUM 1e-150

struct reducing_term reducing_term_of(double beta, double gamma, double mean)
{
    return (struct reducing_term){.c = 2.0 * beta * gamma * mean, .b = beta * beta};
}

static double term_value(const struct reducing_term *term, double x, double y)
{
    const double q = term->b * x + y;
    return q > 0.0 ? term->c * x * y * (x + y) / q : 0.0;
}

void multi_fluid_reduce(const struct multi_fluid *fluid, struct multi_fluid_work *w)
{
    double temperature = 0.0, volume = 0.0;
    for (size_t i = 0; i < fluid->head.count; i++) {
        temperature += w->x[i] * w->x[i] * fluid->temperature[i];
        volume += w->x[i] * w->x[i] * fluid->volume[i];
    }
    for (size_t k = 0; k < fluid->pair_count; k++) {
        const struct multi_fluid_pair *pair = &fluid->pairs[k];
        temperature += term_value(&pair->temperature, w->x[pair->i], w->x[pair->j]);
        volume += term_value(&pair->volume, w->x[pair->i], w->x[pair->j]);
    }
    w->reducing_temperature = temperature;
    w->reducing_volume = volume;
}

/* Adds a pair's derivatives; with u = (x + y) / (b x + y):  f = c x y u,  u_x = (1 - b u) / q,  u_y = (1 - u) / q. */
static void add_slopes(const struct reducing_term *term, double x, double y, double *by_x, double *by_y)
{
    const double q = term->b * x + y;
    if (!(q > LEAST_SUM)) {
        return; /* both absent: f is of second order in the two */
    }
    const double r = 1.0 / q, u = (x + y) * r;
    *by_x += term->c * y * (u + x * (1.0 - term->b * u) * r);
    *by_y += term->c * x * (u + y * (1.0 - u) * r);
}

void multi_fluid_reduce_slopes(const struct multi_fluid *fluid, struct multi_fluid_work *w)
{
    const size_t count = fluid->head.count;
    for (size_t i = 0; i < count; i++) {
        w->temperature_slope[i] = 2.0 * w->x[i] * fluid->temperature[i];
        w->volume_slope[i] = 2.0 * w->x[i] * fluid->volume[i];
    }
    for (size_t k = 0; k < fluid->pair_count; k++) {
        const struct multi_fluid_pair *pair = &fluid->pairs[k];
        const size_t i = pair->i, j = pair->j;
        add_slopes(&pair->temperature, w->x[i], w->x[j], &w->temperature_slope[i], &w->temperature_slope[j]);
        add_slopes(&pair->volume, w->x[i], w->x[j], &w->volume_slope[i], &w->volume_slope[j]);
    }
    for (size_t i = 0; i < count; i++) {
        w->temperature_slope[i] = w->temperature_slope[i] / w->reducing_temperature - 2.0;
        w->volume_slope[i] = w->volume_slope[i] / w->reducing_volume - 2.0;
    }
}

/* A pair's second derivatives. Where both are absent they depend on the direction they are approached from (unless
 * beta = 1); the middle one, x = y, is taken. */
static void put_bends(const struct reducing_term *term, double x, double y, size_t i, size_t j, size_t count,
                      double *bent)
{
    if (!(term->b * x + y > LEAST_SUM)) {
        x = y = 1.0;
    }
    const double r = 1.0 / (term->b * x + y), u = (x + y) * r;
    const double u_x = (1.0 - term->b * u) * r, u_y = (1.0 - u) * r;
    const double u_xy = -(term->b * u_y + u_x) * r;
    bent[i * count + i] += term->c * y * (2.0 * u_x - 2.0 * x * term->b * u_x * r);
    bent[j * count + j] += term->c * x * (2.0 * u_y - 2.0 * y * u_y * r);
    bent[i * count + j] = bent[j * count + i] = term->c * (u + x * u_x + y * u_y + x * y * u_xy);
}

/* From Y_ij to n^2 d2ln Y/(dn_i dn_j); slope[i] is Y_i / Y - 2. */
static void bend_logarithm(const double slope[], double Y, size_t count, double *bent)
{
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            bent[i * count + j] = bent[i * count + j] / Y - (slope[i] + 2.0) * (slope[j] + 2.0) + 2.0;
        }
    }
}

void multi_fluid_reduce_bends(const struct multi_fluid *fluid, struct multi_fluid_work *w)
{
    const size_t count = fluid->head.count;
    for (size_t i = 0; i < count; i++) {
        w->bent_temperature[i * count + i] = 2.0 * fluid->temperature[i];
        w->bent_volume[i * count + i] = 2.0 * fluid->volume[i];
    }
    for (size_t k = 0; k < fluid->pair_count; k++) {
        const struct multi_fluid_pair *pair = &fluid->pairs[k];
        const double x = w->x[pair->i], y = w->x[pair->j];
        put_bends(&pair->temperature, x, y, pair->i, pair->j, count, w->bent_temperature);
        put_bends(&pair->volume, x, y, pair->i, pair->j, count, w->bent_volume);
    }
    bend_logarithm(w->temperature_slope, w->reducing_temperature, count, w->bent_temperature);
    bend_logarithm(w->volume_slope, w->reducing_volume, count, w->bent_volume);
}
