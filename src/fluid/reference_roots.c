/* Density roots of a reference equation at given temperature and pressure.
 *
 * Below the critical temperature the vapour root is the first mechanically stable one going up from zero density and
 * the liquid root the first going down from the largest density; roots between, which such equations have many of,
 * are never looked at. On the vapour side p(rho) is concave and on the liquid side convex up to the limit of
 * stability, so steps taken from the saturated density outward cannot jump over that limit unnoticed. */
#include "fluid/reference_internal.h"

#include <math.h>

/* Relative step at which the density stepped to is the answer; the steps shrink at least quadratically. */
#define DENSITY_TOLERANCE 1e-9
#define MOST_PASSES       100
/* A bracket this narrow that holds no root has none. */
#define NARROWEST_BRACKET 1e-12
/* Largest relative step beyond the saturated density. */
#define METASTABLE_STEP 0.1
/* The same for a vapour below this part of the critical density, where no loop is narrower. */
#define DILUTE_STEP 1.0
#define DILUTE      0.005
/* Starting value of the slope of the bulk modulus in pressure, for a liquid and for a gas. */
#define LIQUID_STIFFENING 8.0
#define GAS_STIFFENING    1.0
/* Nearer to saturation than this, the Gibbs energies decide which root is the stable one. */
#define SATURATION_MARGIN 1e-4

enum side { SIDE_VAPOUR, SIDE_LIQUID, SIDE_SINGLE };

struct search {
    const struct reference_at_t *at_t;
    enum side side;
    double RT, pressure;
    double low, high;  /* densities the root lies between */
    double dilute;     /* density below which a vapour may take long steps */
    double saturated;  /* density beyond which a root is metastable; VAPOUR and LIQUID */
    bool high_is_wall; /* `high` is the largest density and has not been looked at */
    bool far_is_seen;  /* the unstable end was narrowed: bisection cannot land beyond a loop */
};

/* From a density with bulk modulus K and dK/dp = m, Murnaghan's law p - p0 = K/m ((rho/rho0)^m - 1) gives the density
 * at the pressure sought; it is exact for an ideal gas (m = 1) and nearly so for a liquid. */
static double step_from(const struct reference_spot *spot, double RT, double pressure, double m)
{
    const double strain = (pressure - spot->pressure) / (spot->density * spot->stiffness * RT);
    if (fabs(m) < 0.01) {
        return spot->density * exp(strain);
    }
    const double base = 1.0 + m * strain;
    return base > 0.0 ? spot->density * exp(log(base) / m) : -1.0;
}

/* The slope of the bulk modulus between two densities; `usual` where they tell nothing. */
static double stiffening(const struct reference_spot *a, const struct reference_spot *b, double RT, double usual)
{
    const double rise = a->pressure - b->pressure;
    const double m = (a->density * a->stiffness - b->density * b->stiffness) * RT / (fabs(rise) > 0.0 ? rise : 1.0);
    return fabs(m) < 40.0 && fabs(rise) > 0.0 ? m : usual;
}

static double middle(const struct search *search)
{
    return search->low > 0.0 ? sqrt(search->low * search->high) : 0.5 * search->high;
}

/* Keeps a step inside the bracket, and short where the state is metastable. */
static double limited(const struct search *search, double density, double next)
{
    if (!(next > search->low && next < search->high)) {
        next = middle(search);
    }
    if (search->side == SIDE_VAPOUR && next > search->saturated) {
        const double step = density < search->dilute ? DILUTE_STEP : METASTABLE_STEP;
        next = fmin(next, fmin(fmax(density, search->saturated) * (1.0 + step), 0.5 * (density + search->high)));
    } else if (search->side == SIDE_LIQUID && next < search->saturated) {
        next =
            fmax(next, fmax(fmin(density, search->saturated) * (1.0 - METASTABLE_STEP), 0.5 * (density + search->low)));
    }
    return next;
}

/* By concavity (convexity) no density up to the unstable end of the bracket reaches the pressure. Asked only once
 * that end was seen, as over the whole way to the critical density an isotherm may bend both ways. */
static bool is_lost(const struct search *search, const struct reference_spot *spot)
{
    if (!search->far_is_seen) {
        return false;
    }
    const double slope = spot->stiffness * search->RT;
    switch (search->side) {
    case SIDE_VAPOUR:
        return spot->pressure < search->pressure &&
               spot->pressure + slope * (search->high - spot->density) < search->pressure;
    case SIDE_LIQUID:
        return spot->pressure > search->pressure &&
               spot->pressure - slope * (spot->density - search->low) > search->pressure;
    case SIDE_SINGLE:
        break;
    }
    return false;
}

/* Narrows the bracket by what was seen at a density. */
static void narrow(struct search *search, const struct reference_spot *spot)
{
    const bool stable = spot->stiffness > 0.0;
    const bool above = search->side == SIDE_VAPOUR   ? !stable || spot->pressure >= search->pressure
                       : search->side == SIDE_LIQUID ? stable && spot->pressure >= search->pressure
                                                     : spot->pressure >= search->pressure;
    if (above) {
        search->high = spot->density;
        search->high_is_wall = false;
        search->far_is_seen = search->far_is_seen || search->side == SIDE_VAPOUR;
    } else {
        search->low = spot->density;
        search->far_is_seen = search->far_is_seen || search->side == SIDE_LIQUID;
    }
}

/* True when the pressure lies beyond the one at the largest density. */
static bool passes_wall(struct search *search, double next)
{
    if (!search->high_is_wall || next < search->high) {
        return false;
    }
    search->high_is_wall = false;
    return reference_spot_at(search->at_t, search->high).pressure < search->pressure;
}

static enum answer find_root(struct search *search, double density, double usual, double *root)
{
    struct reference_spot last = {0};
    bool has_last = false;
    for (int pass = 1; pass <= MOST_PASSES; pass++) {
        const struct reference_spot spot = reference_spot_at(search->at_t, density);
        if (!isfinite(spot.pressure) || !isfinite(spot.stiffness)) {
            return ANSWER_FAILED;
        }
        narrow(search, &spot);
        double next = middle(search);
        if (spot.stiffness > 0.0) {
            const double m = has_last ? stiffening(&spot, &last, search->RT, usual) : usual;
            const double free_step = step_from(&spot, search->RT, search->pressure, m);
            if (fabs(free_step - density) <= DENSITY_TOLERANCE * density) {
                *root = free_step;
                return ANSWER_OK;
            }
            if (is_lost(search, &spot)) {
                return ANSWER_NO_SUCH_ROOT;
            }
            if (passes_wall(search, free_step)) {
                return ANSWER_OUT_OF_RANGE;
            }
            /* Every eighth pass halves the bracket, so that no shape of isotherm keeps it from closing. */
            next = pass % 8 == 0 && search->far_is_seen ? next : limited(search, density, free_step);
            last = spot;
            has_last = true;
        }
        if (search->high - search->low <= NARROWEST_BRACKET * search->high) {
            *root = next;
            return search->side == SIDE_SINGLE ? ANSWER_OK : ANSWER_NO_SUCH_ROOT;
        }
        density = next;
    }
    return ANSWER_FAILED;
}

static struct search search_at(const struct reference_at_t *at_t, enum side side, double pressure)
{
    const struct reference *reference = reference_of(at_t);
    return (struct search){.at_t = at_t,
                           .side = side,
                           .pressure = pressure,
                           .far_is_seen = side == SIDE_SINGLE,
                           .RT = reference->head.gas_constant * at_t->head.temperature};
}

/* Below saturation the start is the density from Z = 1 + B rho with B from the saturated vapour, so that both ends
 * of the branch are met. */
static enum answer vapour_root(const struct reference_at_t *at_t, const struct reference_pair *pair, double pressure,
                               double *root)
{
    struct search search = search_at(at_t, SIDE_VAPOUR, pressure);
    search.high = reference_of(at_t)->equation->critical_density;
    search.dilute = DILUTE * search.high;
    search.saturated = pair->vapour_density;
    const double ideal = pressure / search.RT;
    double start = pair->vapour_density;
    if (pressure < pair->pressure) {
        const double B = (pair->pressure / (pair->vapour_density * search.RT) - 1.0) / pair->vapour_density;
        start = 2.0 * ideal / (1.0 + sqrt(fmax(0.0, 1.0 + 4.0 * B * ideal)));
        start = fmin(start, pair->vapour_density);
    }
    return find_root(&search, start, GAS_STIFFENING, root);
}

static enum answer liquid_root(const struct reference_at_t *at_t, const struct reference_pair *pair, double pressure,
                               double *root)
{
    struct search search = search_at(at_t, SIDE_LIQUID, pressure);
    search.low = reference_of(at_t)->equation->critical_density;
    search.high = at_t->largest_density;
    search.high_is_wall = true;
    search.saturated = pair->liquid_density;
    double start = pair->liquid_density;
    if (pressure > pair->pressure) {
        const struct reference_spot saturated = {pair->liquid_density, pair->pressure, pair->liquid_stiffness, 0.0};
        start = step_from(&saturated, search.RT, pressure, LIQUID_STIFFENING);
        start = fmin(start, search.high);
    }
    return find_root(&search, start, LIQUID_STIFFENING, root);
}

/* Z of the Peng-Robinson equation above the critical temperature, where it has one root, by Newton's method from the
 * gas side; a starting value only, so a few passes will do. */
static double cubic_Z(double A, double B)
{
    double Z = 1.0 + B;
    for (int i = 0; i < 12; i++) {
        const double c2 = B - 1.0, c1 = A - B * (2.0 + 3.0 * B), c0 = B * (B * (1.0 + B) - A);
        const double f = ((Z + c2) * Z + c1) * Z + c0;
        const double slope = (3.0 * Z + 2.0 * c2) * Z + c1;
        const double step = slope != 0.0 ? f / slope : 0.0;
        Z = fmax(Z - step, B + 0.05 * (Z - B));
        if (fabs(step) < 1e-3 * Z) {
            break;
        }
    }
    return Z;
}

static double cubic_start(const struct reference *reference, double temperature, double pressure)
{
    const struct reference_spec *equation = reference->equation;
    const double Tr = temperature / equation->critical_temperature, pr = pressure / equation->critical_pressure;
    const double w = reference->acentric;
    const double root = 1.0 + (0.37464 + w * (1.54226 - 0.26992 * w)) * (1.0 - sqrt(Tr));
    const double Z = cubic_Z(0.45724 * root * root * pr / (Tr * Tr), 0.0778 * pr / Tr);
    return pressure / (Z * reference->head.gas_constant * temperature);
}

static enum answer single_root(const struct reference_at_t *at_t, double pressure, double *root)
{
    const struct reference *reference = reference_of(at_t);
    struct search search = search_at(at_t, SIDE_SINGLE, pressure);
    search.high = at_t->largest_density;
    search.high_is_wall = true;
    const double start = cubic_start(reference, at_t->head.temperature, pressure);
    const double dense = start / reference->equation->critical_density;
    return find_root(&search, fmin(start, search.high), dense > 1.5 ? LIQUID_STIFFENING : GAS_STIFFENING, root);
}

/* ln phi of a root. */
static double log_phi(const struct reference_at_t *at_t, double density, double pressure)
{
    const double RT = reference_of(at_t)->head.gas_constant * at_t->head.temperature;
    return reference_spot_at(at_t, density).log_activity + log(density * RT / pressure);
}

/* Clear of saturation only the stable side is looked at; near it both, and the lower Gibbs energy wins. */
static enum answer stable_root(const struct reference_at_t *at_t, const struct reference_pair *pair, double pressure,
                               double *root, int *roots)
{
    if (pair->inside && pressure < pair->pressure * (1.0 - SATURATION_MARGIN)) {
        return vapour_root(at_t, pair, pressure, root);
    }
    if (pair->inside && pressure > pair->pressure * (1.0 + SATURATION_MARGIN)) {
        return liquid_root(at_t, pair, pressure, root);
    }
    double vapour = 0.0, liquid = 0.0;
    const enum answer has_vapour = vapour_root(at_t, pair, pressure, &vapour);
    const enum answer has_liquid = liquid_root(at_t, pair, pressure, &liquid);
    if (has_vapour == ANSWER_OK && has_liquid == ANSWER_OK) {
        *roots = 2;
        *root = log_phi(at_t, vapour, pressure) <= log_phi(at_t, liquid, pressure) ? vapour : liquid;
        return ANSWER_OK;
    }
    *root = has_vapour == ANSWER_OK ? vapour : liquid;
    return has_vapour == ANSWER_OK ? has_vapour : has_liquid;
}

enum answer reference_volume(const struct fluid_at_t *head, double pressure, const double n[], enum branch branch,
                             double *volume, int *roots)
{
    const struct reference_at_t *at_t = (const struct reference_at_t *)(const void *)head;
    const struct reference *reference = reference_of(at_t);
    if (!(pressure > 0.0) || !isfinite(pressure) || !(n[0] > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    double density = 0.0;
    enum answer answer = ANSWER_FAILED;
    *roots = 1;
    if (head->temperature >= reference->equation->critical_temperature) {
        answer = single_root(at_t, pressure, &density);
    } else {
        struct reference_pair pair;
        if (!reference_pair_at(reference, head->temperature, &pair)) {
            return ANSWER_FAILED;
        }
        switch (branch) {
        case BRANCH_VAPOUR:
            answer = vapour_root(at_t, &pair, pressure, &density);
            break;
        case BRANCH_LIQUID:
            answer = liquid_root(at_t, &pair, pressure, &density);
            break;
        case BRANCH_STABLE:
            answer = stable_root(at_t, &pair, pressure, &density, roots);
            break;
        }
    }
    if (answer == ANSWER_OK) {
        *volume = n[0] / density;
    }
    return answer;
}
