/* The saturation line and the largest density of a reference equation, found once when the fluid is created.
 *
 * The published fits to the saturation line miss the equation's own critical point by up to 2 K for some gases, and
 * then have no use within that distance of it. The line is therefore solved here, from the critical point downward
 * in steps of s = sqrt(1 - T/Tc): each pair starts from the line through the ones above it, and the fits only step
 * in where that fails. */
#include "fluid/reference_internal.h"

#include <math.h>

/* The table reaches this part of the smallest temperature, and this part of the critical one if that is colder: a
 * liquefied gas is classed by its state at -50 degC, where some equations that end at 273 K must be extrapolated. */
#define BELOW_RANGE    0.95
#define BELOW_CRITICAL 0.5
#define PAIR_PASSES    60
/* Relative change of a density at which a pair is good enough for a starting value. */
#define PAIR_TOLERANCE 1e-9
/* The largest pressure answered is this multiple of the published limit, and at least the second figure (Pa). */
#define PRESSURE_MARGIN        2.0
#define LEAST_LARGEST_PRESSURE 1e9
#define DENSITY_PASSES         400
/* A fall of dp/drho to this part of its largest value is more than a wiggle near the critical density. */
#define SOFTENING 0.9

static double reduced_temperature(const struct reference_table *table, size_t node)
{
    const double s = table->step * (double)node;
    return 1.0 - s * s;
}

/* Lagrange's cubic through four nodes at equal steps, at x steps from the first. */
static void cubic_weights(double x, double weights[4])
{
    const double a = x - 1.0, b = x - 2.0, c = x - 3.0;
    weights[0] = -a * b * c / 6.0;
    weights[1] = x * b * c / 2.0;
    weights[2] = -x * a * c / 2.0;
    weights[3] = x * a * b / 6.0;
}

static struct saturation_node weighted(const struct saturation_node nodes[4], const double weights[4])
{
    struct saturation_node sum = {0};
    for (size_t i = 0; i < 4; i++) {
        sum.pressure += weights[i] * nodes[i].pressure;
        sum.vapour += weights[i] * nodes[i].vapour;
        sum.liquid += weights[i] * nodes[i].liquid;
        sum.stiffness += weights[i] * nodes[i].stiffness;
    }
    return sum;
}

static struct reference_pair pair_of_node(const struct reference_spec *equation, const struct saturation_node *node,
                                          double reduced)
{
    return (struct reference_pair){
        .pressure = equation->critical_pressure * exp(node->pressure / reduced),
        .vapour_density = equation->critical_density * exp(node->vapour / reduced),
        .liquid_density = equation->critical_density * node->liquid,
        .liquid_stiffness = node->stiffness,
    };
}

static struct saturation_node node_of_pair(const struct reference_spec *equation, const struct reference_pair *pair,
                                           double reduced)
{
    return (struct saturation_node){
        .pressure = reduced * log(pair->pressure / equation->critical_pressure),
        .vapour = reduced * log(pair->vapour_density / equation->critical_density),
        .liquid = pair->liquid_density / equation->critical_density,
        .stiffness = pair->liquid_stiffness,
    };
}

/* A fit of the spec at a temperature; 0 where it has none or no value there. */
static double fit_at(const struct saturation_guess *guess, double temperature)
{
    if (guess->form == GUESS_NONE || !(temperature < guess->reducing_temperature)) {
        return 0.0;
    }
    const double theta = 1.0 - temperature / guess->reducing_temperature;
    double sum = 0.0;
    for (size_t i = 0; i < guess->count; i++) {
        sum += guess->terms[i][0] * pow(theta, guess->terms[i][1]);
    }
    double value = 0.0;
    switch (guess->form) {
    case GUESS_EXP_TAU:
        value = exp(sum * guess->reducing_temperature / temperature);
        break;
    case GUESS_EXP:
        value = exp(sum);
        break;
    case GUESS_ONE_PLUS:
        value = 1.0 + sum;
        break;
    case GUESS_NONE:
        break;
    }
    return value > 0.0 && isfinite(value) ? value * guess->reducing_value : 0.0;
}

/* The nearest stable density from the critical one outward, in steps of the `ratio` (above 1: to the liquid side). */
static double stable_side(const struct reference_at_t *at_t, double critical_density, double ratio)
{
    double density = critical_density;
    for (int i = 0; i < PAIR_PASSES; i++) {
        density *= ratio;
        if (reference_spot_at(at_t, density).stiffness > 0.0) {
            return density;
        }
    }
    return 0.0;
}

/* Near the critical point of an analytic equation the coexisting densities lie sqrt(3) times as far from the
 * critical one as the limits of stability (Landau's expansion). */
static bool pair_near_critical(const struct reference_at_t *at_t, double s, struct reference_pair *pair)
{
    const double centre = reference_of(at_t)->equation->critical_density;
    const double vapour = stable_side(at_t, centre, 1.0 - 0.1 * s);
    const double liquid = stable_side(at_t, centre, 1.0 + 0.1 * s);
    pair->vapour_density = centre + sqrt(3.0) * (vapour - centre);
    pair->liquid_density = centre + sqrt(3.0) * (liquid - centre);
    return vapour > 0.0 && liquid > 0.0 && pair->vapour_density > 0.0;
}

static bool pair_from_fits(const struct reference_spec *equation, double temperature, struct reference_pair *pair)
{
    pair->vapour_density = fit_at(&equation->vapour_guess, temperature);
    pair->liquid_density = fit_at(&equation->liquid_guess, temperature);
    return pair->vapour_density > 0.0 && pair->liquid_density > pair->vapour_density;
}

/* Equal pressures and equal fugacities by Newton's method in the logarithms of both densities (Akasaka, J. Thermal
 * Sci. Technol. 3 (2008) 442, with ln rho as variable). Steps are cut to stay on the stable sides. */
static bool solve_pair(const struct reference_at_t *at_t, struct reference_pair *pair)
{
    const struct reference *reference = reference_of(at_t);
    const double RT = reference->head.gas_constant * at_t->head.temperature;
    double x = log(pair->vapour_density), y = log(pair->liquid_density);
    for (int i = 0; i < PAIR_PASSES; i++) {
        const struct reference_spot V = reference_spot_at(at_t, exp(x)), L = reference_spot_at(at_t, exp(y));
        const double K_V = V.density * V.stiffness, K_L = L.density * L.stiffness;
        const double f1 = (L.pressure - V.pressure) / RT;
        const double f2 = y + L.log_activity - x - V.log_activity;
        const double determinant = L.stiffness * K_V - K_L * V.stiffness;
        if (!(V.stiffness > 0.0) || !(L.stiffness > 0.0) || !(determinant < 0.0)) {
            return false; /* off the stable sides, or the same density on both */
        }
        const double dy = (f1 * V.stiffness - f2 * K_V) / determinant;
        const double dx = (f1 * L.stiffness - f2 * K_L) / determinant;
        if (!isfinite(dx) || !isfinite(dy)) {
            return false;
        }
        const double cut = 1.0 / fmax(1.0, fmax(fabs(dx), 10.0 * fabs(dy)));
        x += cut * dx;
        y += cut * dy;
        if (fabs(dx) < PAIR_TOLERANCE && fabs(dy) < PAIR_TOLERANCE) {
            *pair = (struct reference_pair){V.pressure, exp(x), exp(y), L.stiffness, true};
            return y - x > 1e-6 && V.pressure > 0.0;
        }
    }
    return false;
}

/* The line through the nodes above, prolonged by one step: cubic where there are four. */
static void prolong(const struct reference_table *table, size_t node, struct saturation_node *out)
{
    if (node >= 4) {
        const double weights[4] = {-1.0, 4.0, -6.0, 4.0};
        *out = weighted(&table->nodes[node - 4], weights);
    } else if (node == 3) {
        const double weights[4] = {1.0, -3.0, 3.0, 0.0};
        *out = weighted(&table->nodes[0], weights);
    } else {
        const double weights[4] = {-1.0, 2.0, 0.0, 0.0};
        *out = weighted(&table->nodes[0], weights);
    }
}

static bool fill_node(struct reference *reference, struct reference_at_t *at_t, size_t node)
{
    struct reference_table *table = &reference->table;
    const struct reference_spec *equation = reference->equation;
    const double reduced = reduced_temperature(table, node);
    const double s = table->step * (double)node;
    struct reference_pair pair = {0};
    reference_set_temperature(at_t, reference, equation->critical_temperature * reduced);
    bool solved = false;
    if (node == 1) {
        solved = pair_near_critical(at_t, s, &pair) && solve_pair(at_t, &pair);
    } else {
        struct saturation_node guess;
        prolong(table, node, &guess);
        pair = pair_of_node(equation, &guess, reduced);
        solved = solve_pair(at_t, &pair);
    }
    if (!solved) {
        solved = pair_from_fits(equation, at_t->head.temperature, &pair) && solve_pair(at_t, &pair);
    }
    if (solved) {
        table->nodes[node] = node_of_pair(equation, &pair, reduced);
    }
    return solved;
}

static double coldest_temperature(const struct reference_spec *equation)
{
    return fmin(BELOW_RANGE * equation->smallest_temperature, BELOW_CRITICAL * equation->critical_temperature);
}

static void fill_saturation(struct reference *reference, struct reference_at_t *at_t)
{
    struct reference_table *table = &reference->table;
    const struct reference_spec *equation = reference->equation;
    table->step = sqrt(1.0 - coldest_temperature(equation) / equation->critical_temperature) / SATURATION_NODES;
    table->nodes[0] = (struct saturation_node){.liquid = 1.0};
    table->count = 1;
    while (table->count <= SATURATION_NODES && fill_node(reference, at_t, table->count)) {
        table->count++;
    }
}

bool reference_pair_at(const struct reference *reference, double temperature, struct reference_pair *out)
{
    const struct reference_table *table = &reference->table;
    if (table->count < 4) {
        return false; /* an equation without a saturation line */
    }
    const double reduced = temperature / reference->equation->critical_temperature;
    const double x = sqrt(fmax(0.0, 1.0 - reduced)) / table->step;
    const double last = (double)(table->count - 1);
    /* The four nodes around x; past the last node the line through the last two. */
    const double first = fmax(0.0, fmin(floor(x) - 1.0, last - 3.0));
    double weights[4] = {0.0, 0.0, last - x, x - last + 1.0};
    if (x <= last) {
        cubic_weights(x - first, weights);
    }
    const struct saturation_node node = weighted(&table->nodes[(size_t)first], weights);
    *out = pair_of_node(reference->equation, &node, reduced);
    out->inside = x <= last;
    return out->pressure > 0.0 && out->vapour_density > 0.0 && out->liquid_density > out->vapour_density &&
           isfinite(out->liquid_density);
}

/* Upward in steps of a fortieth until the pressure reaches `most`. Where dp/drho falls first, the equation has left
 * the ground it was fitted on and its next step may be a loop: the stiffest density before that is the largest. */
static double walk_to_largest(const struct reference_at_t *at_t, double density, double most)
{
    struct reference_spot stiffest = reference_spot_at(at_t, density);
    for (int i = 0; i < DENSITY_PASSES; i++) {
        density *= 1.025;
        const struct reference_spot spot = reference_spot_at(at_t, density);
        if (!(spot.stiffness > SOFTENING * stiffest.stiffness) || !isfinite(spot.pressure)) {
            break;
        }
        if (spot.stiffness > stiffest.stiffness) {
            stiffest = spot;
        }
        if (spot.pressure >= most) {
            return density;
        }
    }
    return stiffest.density;
}

static void fill_densities(struct reference *reference, struct reference_at_t *at_t)
{
    struct reference_table *table = &reference->table;
    const struct reference_spec *equation = reference->equation;
    const double most = fmax(PRESSURE_MARGIN * equation->largest_pressure, LEAST_LARGEST_PRESSURE);
    table->first_log = log(coldest_temperature(equation));
    table->log_step = (log(equation->largest_temperature) - table->first_log) / (DENSITY_NODES - 1);
    for (size_t i = 0; i < DENSITY_NODES; i++) {
        const double temperature = exp(table->first_log + table->log_step * (double)i);
        double start = equation->critical_density;
        reference_set_temperature(at_t, reference, temperature);
        if (temperature < equation->critical_temperature) {
            struct reference_pair pair;
            start = reference_pair_at(reference, temperature, &pair) ? fmax(start, pair.liquid_density) : start;
        }
        table->largest_density[i] = walk_to_largest(at_t, start, most);
    }
}

double reference_largest_density(const struct reference *reference, double temperature)
{
    const struct reference_table *table = &reference->table;
    const double x = (log(temperature) - table->first_log) / table->log_step;
    const double first = fmax(0.0, fmin(floor(x), DENSITY_NODES - 2));
    const double part = fmax(0.0, fmin(x - first, 1.0));
    const double *density = &table->largest_density[(size_t)first];
    return density[0] + part * (density[1] - density[0]);
}

void reference_fill_table(struct reference *reference, struct reference_at_t *at_t)
{
    fill_saturation(reference, at_t);
    fill_densities(reference, at_t);
    /* Acentric factor of the equation itself, -log10(psat(0.7 Tc)/pc) - 1. */
    struct reference_pair pair;
    if (reference_pair_at(reference, 0.7 * reference->equation->critical_temperature, &pair)) {
        reference->acentric = -log10(pair.pressure / reference->equation->critical_pressure) - 1.0;
    }
}
