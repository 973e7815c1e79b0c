/* `lee-kesler`: B. I. Lee and M. G. Kesler, AIChE J. 21 (1975) 510, for mixtures by the rules of U. Ploecker, H. Knapp
 * and J. Prausnitz, Ind. Eng. Chem. Process Des. Dev. 17 (1978) 324.
 *
 * With g = ln phi of the whole, lambda = ln(T / Tc), pi = ln(p / pc) and the acentric factor omega of the mixture,
 *
 *   g(lambda, pi, omega) = g0 + (omega / omega_r) (gr - g0),
 *
 * where g0 and gr are the simple and the reference fluid's, each at its own root on the same branch. All else follows
 * from n g, as Tc, pc and omega are functions of the amounts:
 *
 *   ln phi_i = d(n g)/dn_i = g + n (g_lambda lambda_i + g_pi pi_i + g_omega omega_i)
 *
 * so that sum x_i ln phi_i = g and the equations of Gibbs and Duhem hold by construction. The mixing rules are
 *
 *   Vc = sum sum x_i x_j Vc_ij,       Vc_ij = (Vc_i^(1/3) + Vc_j^(1/3))^3 / 8,   Vc_i = zc_i R Tc_i / pc_i
 *   Tc = Vc^-eta sum sum x_i x_j Vc_ij^eta Tc_ij,   Tc_ij = kappa_ij sqrt(Tc_i Tc_j),   eta = 0.25
 *   omega = sum x_i omega_i,  pc = zc R Tc / Vc,  zc = 0.2905 - 0.085 omega
 */
#include "fluid/explanation.h"
#include "fluid/lee_kesler_internal.h"
#include "fluid/methods_internal.h"
#include "fluid/phase.h"

#include <math.h>
#include <string.h>

#define ETA 0.25

/* The range of the paper's tables. */
#define LEAST_REDUCED_TEMPERATURE   0.3
#define LARGEST_REDUCED_TEMPERATURE 4.0
#define LARGEST_REDUCED_PRESSURE    10.0

/* No state is denser: of R Tc / pc, a quarter to a third of the volume of the coldest liquids in the paper's tables.
 * Pressures there are hundreds to thousands of times pc. */
#define SMALLEST_REDUCED_VOLUME 0.04

struct lee_kesler {
    struct fluid head;
    const double *acentric;            /* [count] */
    const double *volume, *product;    /* [count * count]: Vc_ij, and Vc_ij^eta Tc_ij */
    const struct pair_parameter *pair; /* [count * count]; kij = 1 - kappa_ij */
};

/* Scratch for the derivatives by amounts, [count] each. */
struct lee_kesler_at_t {
    struct fluid_at_t head;
    double *lambda, *pi, *omega; /* derivatives by n_i, 1/mol */
    double *ln_S, *ln_V;         /* of the two double sums' logarithms, 1/mol */
};

static const struct lee_kesler *lee_kesler_of(const struct fluid *fluid)
{
    return (const struct lee_kesler *)(const void *)fluid;
}

/* ---- creating ---------------------------------------------------------------------------------------------------- */

static double critical_compressibility(double acentric)
{
    return 0.2905 - 0.085 * acentric;
}

static enum fluid_lack lack_of(const struct pure_spec *pure)
{
    if (!pure->critical_temperature.given || !pure->critical_pressure.given) {
        return LACK_CRITICAL_POINT;
    }
    return pure->acentric.given ? LACK_NOTHING : LACK_ACENTRIC;
}

/* The deck's constant of the pair before the library's; NULL: none. */
static const struct pair_constant *constant_of(const struct fluid_spec *spec, size_t i, size_t j)
{
    const struct pair_constant *found = NULL;
    for (size_t k = 0; k < spec->pair_count; k++) {
        const struct pair_constant *pair = &spec->pairs[k];
        const bool is_theirs = (pair->first == i && pair->second == j) || (pair->first == j && pair->second == i);
        if (is_theirs && strcmp(pair->method, lee_kesler_ops.name) == 0 &&
            (found == NULL || pair->origin == PAIR_FROM_DECK)) {
            found = pair;
        }
    }
    return found;
}

static struct pair_parameter choose_pair(const struct fluid_spec *spec, size_t i, size_t j)
{
    const struct pair_constant *constant = constant_of(spec, i, j);
    if (i == j) {
        return (struct pair_parameter){.origin = PAIR_FROM_NOTHING};
    }
    if (constant != NULL && constant->origin == PAIR_FROM_DECK) {
        return (struct pair_parameter){.origin = PAIR_FROM_DECK, .kij = constant->kij};
    }
    if (spec->kij != NULL) {
        return (struct pair_parameter){.origin = PAIR_FROM_DECK, .kij = spec->kij[i * spec->count + j]};
    }
    return constant != NULL ? (struct pair_parameter){.origin = constant->origin, .kij = constant->kij}
                            : (struct pair_parameter){.origin = PAIR_FROM_NOTHING};
}

static double critical_volume(const struct pure_spec *pure)
{
    return critical_compressibility(pure->acentric.value) * GAS_CONSTANT * pure->critical_temperature.value /
           pure->critical_pressure.value;
}

static void fill_pairs(struct lee_kesler *fluid, struct arena *arena)
{
    const struct fluid_spec *spec = fluid->head.spec;
    const size_t count = spec->count;
    struct pair_parameter *pair = arena_alloc(arena, count * count, sizeof *pair);
    double *volume = arena_alloc(arena, count * count, sizeof *volume);
    double *product = arena_alloc(arena, count * count, sizeof *product);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j, ji = j * count + i;
            const struct pure_spec *one = spec->pure[i], *other = spec->pure[j];
            const double edge = 0.5 * (cbrt(critical_volume(one)) + cbrt(critical_volume(other)));
            const double T_ij = sqrt(one->critical_temperature.value * other->critical_temperature.value);
            pair[ij] = pair[ji] = choose_pair(spec, i, j);
            volume[ij] = volume[ji] = edge * edge * edge;
            product[ij] = product[ji] = pow(volume[ij], ETA) * T_ij * (1.0 - pair[ij].kij);
        }
    }
    fluid->pair = pair;
    fluid->volume = volume;
    fluid->product = product;
}

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    struct lee_kesler *fluid = arena_alloc(arena, 1, sizeof *fluid);
    double *acentric = arena_alloc(arena, spec->count, sizeof *acentric);
    for (size_t i = 0; i < spec->count; i++) {
        *lack = (struct fluid_lack_report){lack_of(spec->pure[i]), i};
        if (lack->lack != LACK_NOTHING) {
            return NULL;
        }
        acentric[i] = spec->pure[i]->acentric.value;
    }
    fluid->head = (struct fluid){&lee_kesler_ops, spec, spec->count, GAS_CONSTANT};
    fluid->acentric = acentric;
    fill_pairs(fluid, arena);
    return &fluid->head;
}

enum { VECTORS = 5 };

static size_t at_t_size(const struct fluid *fluid)
{
    return sizeof(struct lee_kesler_at_t) + VECTORS * fluid->count * sizeof(double);
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    struct lee_kesler_at_t *at = (struct lee_kesler_at_t *)(void *)at_t;
    const size_t count = at_t->fluid->count;
    double *next = (double *)(void *)(at + 1);
    at->lambda = next;
    at->pi = next + count;
    at->omega = next + 2 * count;
    at->ln_S = next + 3 * count;
    at->ln_V = next + 4 * count;
    return ANSWER_OK;
}

/* ---- the mixture's critical constants ---------------------------------------------------------------------------- */

struct pseudocritical {
    double n;
    double T, p, acentric; /* K, Pa, 1 */
    double S, V;           /* the double sums over amounts: n^2 Vc^eta Tc, n^2 Vc */
};

/* sum_ij n_i n_j matrix_ij, and the derivatives of its logarithm. */
static double double_sum(const double *matrix, size_t count, const double n[], double ln_gradient[])
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        double row = 0.0;
        for (size_t j = 0; j < count; j++) {
            row += n[j] * matrix[i * count + j];
        }
        ln_gradient[i] = 2.0 * row;
        sum += n[i] * row;
    }
    for (size_t i = 0; i < count; i++) {
        ln_gradient[i] /= sum;
    }
    return sum;
}

/* And the derivatives of lambda, pi and omega by the amounts. */
static struct pseudocritical mix(const struct lee_kesler_at_t *at, const double n[])
{
    const struct lee_kesler *fluid = lee_kesler_of(at->head.fluid);
    const size_t count = fluid->head.count;
    struct pseudocritical c = {.n = 0.0};
    for (size_t i = 0; i < count; i++) {
        c.n += n[i];
        c.acentric += n[i] * fluid->acentric[i];
    }
    c.acentric /= c.n;
    c.S = double_sum(fluid->product, count, n, at->ln_S);
    c.V = double_sum(fluid->volume, count, n, at->ln_V);
    const double volume = c.V / (c.n * c.n), zc = critical_compressibility(c.acentric);
    c.T = c.S / (c.n * c.n) * pow(volume, -ETA);
    c.p = zc * GAS_CONSTANT * c.T / volume;
    for (size_t i = 0; i < count; i++) {
        at->omega[i] = (fluid->acentric[i] - c.acentric) / c.n;
        at->lambda[i] = -(at->ln_S[i] - ETA * at->ln_V[i] - (2.0 - 2.0 * ETA) / c.n);
        at->pi[i] = at->lambda[i] + at->ln_V[i] - 2.0 / c.n + 0.085 * at->omega[i] / zc;
    }
    return c;
}

/* ---- the interpolation ------------------------------------------------------------------------------------------- */

/* g and its derivatives by lambda (l), pi (p) and omega (w). */
struct potential {
    double Z, compliance; /* g_p + 1 and Z - g_pp, which a liquid needs with all their digits */
    double g, g_l, g_p, g_w;
    double g_ll, g_lp, g_pp, g_wl, g_wp;
};

static struct potential interpolate(const double density[LEE_KESLER_ENDS], double T_r, double p_r, double acentric)
{
    const struct lee_kesler_spot simple = lee_kesler_spot_at(LEE_KESLER_SIMPLE, T_r, p_r, density[LEE_KESLER_SIMPLE]);
    const struct lee_kesler_spot ref =
        lee_kesler_spot_at(LEE_KESLER_REFERENCE, T_r, p_r, density[LEE_KESLER_REFERENCE]);
    const double by = 1.0 / LEE_KESLER_REFERENCE_ACENTRIC, w = acentric * by;
    const double Z = simple.Z + w * (ref.Z - simple.Z);
    return (struct potential){
        .Z = Z,
        .compliance = simple.compliance + w * (ref.compliance - simple.compliance),
        .g = simple.ln_phi + w * (ref.ln_phi - simple.ln_phi),
        .g_l = -simple.h - w * (ref.h - simple.h),
        .g_p = Z - 1.0,
        .g_w = by * (ref.ln_phi - simple.ln_phi),
        .g_ll = simple.h - simple.cp + w * (ref.h - ref.cp - simple.h + simple.cp),
        .g_lp = simple.Z_lambda + w * (ref.Z_lambda - simple.Z_lambda),
        .g_pp = simple.Z_pi + w * (ref.Z_pi - simple.Z_pi),
        .g_wl = -by * (ref.h - simple.h),
        .g_wp = by * (ref.Z - simple.Z),
    };
}

/* The potential on the branch asked for. Where BRANCH_STABLE finds no branch on which both ends have a root, as happens
 * in a sliver of pressures about the saturation line from T_r = 0.99 on, each end's only root is taken, as one takes it
 * from the paper's tables. */
static enum answer choose(double T_r, double p_r, double acentric, enum branch branch, struct potential *out,
                          int *roots)
{
    struct lee_kesler_roots simple, reference;
    if (!lee_kesler_find_roots(LEE_KESLER_SIMPLE, T_r, p_r, branch, &simple) ||
        !lee_kesler_find_roots(LEE_KESLER_REFERENCE, T_r, p_r, branch, &reference)) {
        return ANSWER_FAILED;
    }
    const bool has_vapour = branch != BRANCH_LIQUID && simple.has_vapour && reference.has_vapour;
    const bool has_liquid = branch != BRANCH_VAPOUR && simple.has_liquid && reference.has_liquid;
    const bool are_one = simple.are_one && reference.are_one;
    *roots = has_vapour && has_liquid && !are_one ? 2 : 1;
    *out = (struct potential){.g = (double)INFINITY};
    if (has_vapour) {
        *out = interpolate((const double[]){simple.vapour, reference.vapour}, T_r, p_r, acentric);
    }
    if (has_liquid && !(has_vapour && are_one)) {
        const struct potential liquid =
            interpolate((const double[]){simple.liquid, reference.liquid}, T_r, p_r, acentric);
        *out = liquid.g < out->g ? liquid : *out;
    }
    if (has_vapour || has_liquid || branch != BRANCH_STABLE) {
        return has_vapour || has_liquid ? ANSWER_OK : ANSWER_NO_SUCH_ROOT;
    }
    *out = interpolate((const double[]){simple.has_vapour ? simple.vapour : simple.liquid,
                                        reference.has_vapour ? reference.vapour : reference.liquid},
                       T_r, p_r, acentric);
    return ANSWER_OK;
}

/* ---- by amounts -------------------------------------------------------------------------------------------------- */

static void set_ln_phi(const struct lee_kesler_at_t *at, double n, const struct potential *g, double ln_phi[])
{
    for (size_t i = 0; i < at->head.fluid->count; i++) {
        ln_phi[i] = g->g + n * (g->g_l * at->lambda[i] + g->g_p * at->pi[i] + g->g_w * at->omega[i]);
    }
}

/* d/d(ln p) or d/d(ln T) of the same, over p or T. */
static void set_slopes(const struct lee_kesler_at_t *at, double n, double pressure, const struct potential *g,
                       struct explicit_phase *out)
{
    const double T = at->head.temperature;
    for (size_t i = 0; out->dln_phi_dp != NULL && i < at->head.fluid->count; i++) {
        out->dln_phi_dp[i] =
            (g->g_p + n * (g->g_lp * at->lambda[i] + g->g_pp * at->pi[i] + g->g_wp * at->omega[i])) / pressure;
    }
    for (size_t i = 0; out->dln_phi_dt != NULL && i < at->head.fluid->count; i++) {
        out->dln_phi_dt[i] =
            (g->g_l + n * (g->g_ll * at->lambda[i] + g->g_lp * at->pi[i] + g->g_wl * at->omega[i])) / T;
    }
}

/* With y = (lambda, pi, omega):
 *   d2(n g)/dn_i dn_j = g_y . (y_i + y_j + n y_ij) + n y_i . g_yy . y_j */
static void set_matrix(const struct lee_kesler_at_t *at, const struct pseudocritical *c, const struct potential *g,
                       double *matrix)
{
    const struct lee_kesler *fluid = lee_kesler_of(at->head.fluid);
    const size_t count = fluid->head.count;
    const double n = c->n, slope = 0.085 / critical_compressibility(c->acentric);
    const double *l = at->lambda, *p = at->pi, *w = at->omega;
    for (size_t i = 0; i < count; i++) {
        const double by_l = g->g_l + n * (g->g_ll * l[i] + g->g_lp * p[i] + g->g_wl * w[i]);
        const double by_p = g->g_p + n * (g->g_lp * l[i] + g->g_pp * p[i] + g->g_wp * w[i]);
        const double by_w = g->g_w + n * (g->g_wl * l[i] + g->g_wp * p[i]);
        const double own = g->g_l * l[i] + g->g_p * p[i] + g->g_w * w[i];
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j;
            const double ln_S = 2.0 * fluid->product[ij] / c->S - at->ln_S[i] * at->ln_S[j];
            const double ln_V = 2.0 * fluid->volume[ij] / c->V - at->ln_V[i] * at->ln_V[j];
            const double w_ij = -(w[i] + w[j]) / n;
            const double l_ij = -(ln_S - ETA * ln_V + (2.0 - 2.0 * ETA) / (n * n));
            const double p_ij = l_ij + ln_V + 2.0 / (n * n) + slope * w_ij + slope * slope * w[i] * w[j];
            matrix[ij] = matrix[j * count + i] =
                own + by_l * l[j] + by_p * p[j] + by_w * w[j] + n * (g->g_l * l_ij + g->g_p * p_ij + g->g_w * w_ij);
        }
    }
}

/* ---- what the interface asks for --------------------------------------------------------------------------------- */

static enum answer tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                      struct explicit_phase *out)
{
    const struct lee_kesler_at_t *at = (const struct lee_kesler_at_t *)(const void *)at_t;
    const struct pseudocritical c = mix(at, n);
    const double T_r = at_t->temperature / c.T, p_r = pressure / c.p;
    if (!(T_r >= LEE_KESLER_LEAST_REDUCED_TEMPERATURE) || !isfinite(T_r) || !(p_r > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    struct potential g;
    const enum answer answer = choose(T_r, p_r, c.acentric, branch, &g, &out->roots);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->Z = g.Z;
    if (!(out->Z * T_r > SMALLEST_REDUCED_VOLUME * p_r)) {
        return ANSWER_OUT_OF_RANGE; /* the interpolation, drawn out far beyond an end, has no volume left */
    }
    out->has_slopes = true;
    out->compliance = g.compliance;
    out->Z_ln_t = g.g_lp;
    out->residual_gibbs_rt = g.g;
    out->residual_enthalpy_rt = -g.g_l;
    out->residual_heat_capacity_r = -g.g_l - g.g_ll;
    if (out->ln_phi != NULL) {
        set_ln_phi(at, c.n, &g, out->ln_phi);
    }
    set_slopes(at, c.n, pressure, &g, out);
    if (out->dln_phi_dn != NULL) {
        set_matrix(at, &c, &g, out->dln_phi_dn);
    }
    return ANSWER_OK;
}

static double smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    const struct pseudocritical c = mix((const struct lee_kesler_at_t *)(const void *)at_t, n);
    return SMALLEST_REDUCED_VOLUME * c.n * GAS_CONSTANT * c.T / c.p;
}

/* For a mixture the state is outside for certain where it would be so for each of the components. */
static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    double least_T = (double)INFINITY, largest_T = 0.0, largest_p = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        const struct pure_spec *pure = fluid->spec->pure[i];
        least_T = fmin(least_T, LEAST_REDUCED_TEMPERATURE * pure->critical_temperature.value);
        largest_T = fmax(largest_T, LARGEST_REDUCED_TEMPERATURE * pure->critical_temperature.value);
        largest_p = fmax(largest_p, LARGEST_REDUCED_PRESSURE * pure->critical_pressure.value);
    }
    if (!(temperature >= least_T)) {
        return (struct range_note){RANGE_TOO_COLD, least_T};
    }
    if (!(temperature <= largest_T)) {
        return (struct range_note){RANGE_TOO_HOT, largest_T};
    }
    if (!(pressure <= largest_p)) {
        return (struct range_note){RANGE_TOO_HIGH_PRESSURE, largest_p};
    }
    return (struct range_note){.side = RANGE_INSIDE};
}

static enum answer critical(const struct fluid *fluid, struct critical_point *out)
{
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    const struct pure_spec *pure = fluid->spec->pure[0];
    *out =
        (struct critical_point){pure->critical_temperature.value, pure->critical_pressure.value, critical_volume(pure)};
    return ANSWER_OK;
}

static enum answer saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    const struct fluid *fluid = at_t->fluid;
    struct critical_point c;
    if (critical(fluid, &c) != ANSWER_OK) {
        return ANSWER_CANNOT;
    }
    const double T_r = at_t->temperature / c.temperature, one[] = {1.0};
    if (!(T_r < 1.0)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    out->pressure = c.pressure * exp(lee_kesler_ln_vapour_pressure(T_r, lee_kesler_of(fluid)->acentric[0]));
    struct explicit_phase vapour = {.Z = 0.0}, liquid = vapour;
    enum answer answer = tp(at_t, out->pressure, one, BRANCH_VAPOUR, &vapour);
    answer = answer != ANSWER_OK ? answer : tp(at_t, out->pressure, one, BRANCH_LIQUID, &liquid);
    const double ideal_volume = fluid->gas_constant * at_t->temperature / out->pressure;
    out->vapour_volume = vapour.Z * ideal_volume;
    out->liquid_volume = liquid.Z * ideal_volume;
    return answer;
}

/* ---- for a reader with a calculator ------------------------------------------------------------------------------ */

/* The two ends at the root that the volume was found on. */
struct both_ends {
    struct lee_kesler_spot simple, reference;
};

static double between(double simple, double reference, double acentric)
{
    return simple + acentric / LEE_KESLER_REFERENCE_ACENTRIC * (reference - simple);
}

static struct both_ends ends_on(const struct lee_kesler_roots *simple, const struct lee_kesler_roots *reference,
                                double T_r, double p_r, bool is_liquid)
{
    const bool simple_liquid = is_liquid ? simple->has_liquid : !simple->has_vapour;
    const bool reference_liquid = is_liquid ? reference->has_liquid : !reference->has_vapour;
    return (struct both_ends){
        lee_kesler_spot_at(LEE_KESLER_SIMPLE, T_r, p_r, simple_liquid ? simple->liquid : simple->vapour),
        lee_kesler_spot_at(LEE_KESLER_REFERENCE, T_r, p_r, reference_liquid ? reference->liquid : reference->vapour),
    };
}

/* The roots that Z comes from. */
static bool find_ends(double T_r, double p_r, double acentric, double Z, struct both_ends *out)
{
    struct lee_kesler_roots simple, reference;
    if (!lee_kesler_find_roots(LEE_KESLER_SIMPLE, T_r, p_r, BRANCH_STABLE, &simple) ||
        !lee_kesler_find_roots(LEE_KESLER_REFERENCE, T_r, p_r, BRANCH_STABLE, &reference)) {
        return false;
    }
    const struct both_ends vapour = ends_on(&simple, &reference, T_r, p_r, false);
    const struct both_ends liquid = ends_on(&simple, &reference, T_r, p_r, true);
    const double vapour_miss = fabs(between(vapour.simple.Z, vapour.reference.Z, acentric) - Z);
    const double liquid_miss = fabs(between(liquid.simple.Z, liquid.reference.Z, acentric) - Z);
    *out = liquid_miss < vapour_miss ? liquid : vapour;
    return true;
}

static void tell_reduced(const struct fluid_at_t *at_t, const struct pseudocritical *c, const double x[], double v,
                         double pressure, struct explanation *out)
{
    const bool is_pure = at_t->fluid->count == 1;
    explanation_put(out, "R", "gas constant", NULL, "J/mol/K", GAS_CONSTANT);
    explanation_put(out, "T", "temperature", NULL, "K", at_t->temperature);
    explanation_put(out, "v", "molar volume", NULL, "m3/mol", v);
    explanation_put_fractions(out, at_t->fluid->spec, x);
    explanation_put(out, "T_c", is_pure ? "critical temperature" : "of the whole by the mixing rules", NULL, "K", c->T);
    explanation_put(out, "p_c", is_pure ? "critical pressure" : "of the whole by the mixing rules", NULL, "Pa", c->p);
    explanation_put(out, "omega", is_pure ? "acentric factor" : "of the whole, sum x_i omega_i", NULL, "1",
                    c->acentric);
    explanation_put(out, "omega_r", "acentric factor of the reference fluid", NULL, "1", LEE_KESLER_REFERENCE_ACENTRIC);
    explanation_put(out, "T_r", "reduced temperature", "T / T_c", "1", at_t->temperature / c->T);
    explanation_put(out, "p_r", "reduced pressure, p / p_c", NULL, "1", pressure / c->p);
}

static void tell_compressibility(const struct both_ends *ends, double acentric, double RT, double v,
                                 struct explanation *out)
{
    const double Z = between(ends->simple.Z, ends->reference.Z, acentric);
    explanation_put(out, "Z_0", "of the simple fluid at T_r, p_r", NULL, "1", ends->simple.Z);
    explanation_put(out, "Z_r", "of the reference fluid at T_r, p_r", NULL, "1", ends->reference.Z);
    explanation_put(out, "Z_1", "departure from the simple fluid", "(Z_r - Z_0) / omega_r", "1",
                    (ends->reference.Z - ends->simple.Z) / LEE_KESLER_REFERENCE_ACENTRIC);
    explanation_put(out, "Z", "compressibility factor", "Z_0 + omega * Z_1", "1", Z);
    explanation_put(out, "p", "pressure", "Z * R * T / v", "Pa", Z * RT / v);
}

static void tell_fugacity(const struct both_ends *ends, double acentric, bool is_pure, struct explanation *out)
{
    const double simple = ends->simple.ln_phi, reference = ends->reference.ln_phi;
    explanation_put(out, "L_0", "ln phi of the simple fluid", NULL, "1", simple);
    explanation_put(out, "L_r", "ln phi of the reference fluid", NULL, "1", reference);
    explanation_put(out, "L_1", "departure from the simple fluid", "(L_r - L_0) / omega_r", "1",
                    (reference - simple) / LEE_KESLER_REFERENCE_ACENTRIC);
    explanation_put(out, is_pure ? "ln_phi" : "L",
                    is_pure ? "ln fugacity coefficient" : "of the whole, sum x_i ln phi_i", "L_0 + omega * L_1", "1",
                    between(simple, reference, acentric));
}

/* Components' coefficients follow from L by its slopes in the mixing rules: too long to be written out. */
static void tell_components(size_t count, const double x[], const double ln_phi[], double pressure,
                            struct explanation *out)
{
    for (size_t i = 0; i < count; i++) {
        explanation_put(out, explanation_text(out, "ln_phi_%zu", i + 1), "L and its slopes by amount", NULL, "1",
                        ln_phi[i]);
        explanation_put_fugacity(out, count, i, x[i], ln_phi[i], pressure);
    }
}

static enum answer explain_whole(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                                 struct explanation *out)
{
    const struct lee_kesler_at_t *at = (const struct lee_kesler_at_t *)(const void *)at_t;
    const size_t count = at_t->fluid->count;
    double ln_phi[EXPLAINED_COMPONENTS], x[EXPLAINED_COMPONENTS], scratch[EXPLAINED_COMPONENTS];
    const bool is_told = count <= EXPLAINED_COMPONENTS;
    struct phase phase = {.ln_phi = ln_phi, .ln_f_over_x = scratch};
    enum answer answer = phase_tv(at_t, volume, n, is_told && with_fugacity ? PHASE_LN_PHI : 0U, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const struct pseudocritical c = mix(at, n);
    const double T = at_t->temperature, v = volume / c.n;
    for (size_t i = 0; is_told && i < count; i++) {
        x[i] = n[i] / c.n;
    }
    struct both_ends ends;
    if (!find_ends(T / c.T, phase.pressure / c.p, c.acentric, phase.Z, &ends)) {
        return ANSWER_FAILED;
    }
    tell_reduced(at_t, &c, x, v, phase.pressure, out);
    tell_compressibility(&ends, c.acentric, GAS_CONSTANT * T, v, out);
    if (with_fugacity) {
        tell_fugacity(&ends, c.acentric, count == 1, out);
    }
    if (with_fugacity && is_told && count > 1) {
        tell_components(count, x, ln_phi, phase.pressure, out);
    }
    return ANSWER_OK;
}

static enum answer pair_at(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out)
{
    *out = lee_kesler_of(at_t->fluid)->pair[i * at_t->fluid->count + j];
    return ANSWER_OK;
}

const struct fluid_ops lee_kesler_ops = {
    .name = "lee-kesler",
    .title = "Lee and Kesler (1975), mixtures by Ploecker, Knapp and Prausnitz (1978)",
    .citation = "B. I. Lee, M. G. Kesler, AIChE J. 21 (1975) 510",
    .validity =
        "Tr from 0.3 to 4, pr to 10, acentric factors from 0 to 0.4; saturation to Tr = 0.97 to 0.99; not meant "
        "for strongly polar gases, nor for helium, hydrogen and neon",
    .form = FLUID_FROM_TP,
    .capabilities = CAN_LIQUID | CAN_MIXTURE | CAN_CALORIC,
    .create = create,
    .at_t_size = at_t_size,
    .set_t = set_t,
    .tp = tp,
    .smallest_volume = smallest_volume,
    .range = range,
    .critical = critical,
    .saturation_start = saturation_start,
    .pair = pair_at,
    .explain_whole = explain_whole,
};
