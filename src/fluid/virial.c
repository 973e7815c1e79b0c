/* The virial equation of a gas, with coefficients by correlations:
 *
 *   in density   p = R T rho (1 + B rho + C rho^2),  F = S_B / V + S_C / (2 V^2)
 *   in pressure  Z = 1 + B p / (R T)
 *
 * with S_B = sum sum n_i n_j B_ij and S_C = sum sum sum n_i n_j n_k C_ijk. It has no liquid. The series in density is
 * refused beyond three quarters of the critical density, the one in pressure beyond p = (T / 2) sum x_i pc_i / sum x_i
 * Tc_i: the usual rules (Prausnitz, Lichtenthaler, de Azevedo, Molecular Thermodynamics, chapter 5; from memory).
 */
#include "fluid/explanation.h"
#include "fluid/methods_internal.h"
#include "fluid/phase.h"
#include "fluid/virial_internal.h"

#include <math.h>
#include <string.h>

#define LARGEST_REDUCED_DENSITY 0.75

enum { MOST_STEPS = 100 };

struct virial {
    struct fluid head;
    enum virial_correlation correlation;
    bool has_third;
    const struct virial_constants *pair, *triple; /* [count^2], [count^3]; those of components on the diagonal */
    const struct pair_parameter *parameter;       /* [count^2] */
};

/* Coefficients at one temperature, each followed by its derivatives, and scratch. */
struct virial_at_t {
    struct fluid_at_t head;
    double *B, *B_t, *B_tt;          /* [count^2] */
    double *C, *C_t, *C_tt;          /* [count^3] */
    double *B_n, *C_n, *B_tn, *C_tn; /* [count] */
    double *contracted;              /* [count^2] */
};

static const struct virial *virial_of(const struct fluid *fluid)
{
    return (const struct virial *)(const void *)fluid;
}

static const struct virial_at_t *at_of(const struct fluid_at_t *at_t)
{
    return (const struct virial_at_t *)(const void *)at_t;
}

/* ---- creating ---------------------------------------------------------------------------------------------------- */

/* Both forms of a correlation share the parameters given under this word. */
static const char *parameter_word(enum virial_correlation correlation)
{
    return correlation == VIRIAL_TSONOPOULOS ? virial_tsonopoulos_ops.name : virial_pitzer_abbott_ops.name;
}

static const struct cubic_set *set_of(const struct pure_spec *pure, enum virial_correlation correlation)
{
    for (size_t k = 0; k < pure->cubic_set_count; k++) {
        if (strcmp(pure->cubic_sets[k].method, parameter_word(correlation)) == 0) {
            return &pure->cubic_sets[k];
        }
    }
    return NULL;
}

static struct pair_parameter choose_pair(const struct virial *fluid, size_t i, size_t j)
{
    const struct fluid_spec *spec = fluid->head.spec;
    struct pair_parameter found = {.origin = PAIR_FROM_NOTHING};
    if (i == j) {
        return found;
    }
    for (size_t k = 0; k < spec->pair_count; k++) {
        const struct pair_constant *pair = &spec->pairs[k];
        const bool is_theirs = (pair->first == i && pair->second == j) || (pair->first == j && pair->second == i);
        if (is_theirs && strcmp(pair->method, parameter_word(fluid->correlation)) == 0 &&
            found.origin != PAIR_FROM_DECK) {
            found = (struct pair_parameter){.origin = pair->origin, .kij = pair->kij};
        }
    }
    if (found.origin != PAIR_FROM_DECK && spec->kij != NULL) {
        found = (struct pair_parameter){.origin = PAIR_FROM_DECK, .kij = spec->kij[i * spec->count + j]};
    }
    return found;
}

static void fill_pairs(struct virial *fluid, struct arena *arena)
{
    const size_t count = fluid->head.count;
    struct virial_constants *pair = arena_alloc(arena, count * count, sizeof *pair);
    struct pair_parameter *parameter = arena_alloc(arena, count * count, sizeof *parameter);
    for (size_t i = 0; i < count; i++) {
        const struct pure_spec *pure = fluid->head.spec->pure[i];
        pair[i * count + i] = virial_of_component(pure, set_of(pure, fluid->correlation));
    }
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            parameter[i * count + j] = choose_pair(fluid, i, j);
            if (i != j) {
                pair[i * count + j] =
                    virial_of_pair(&pair[i * count + i], &pair[j * count + j], parameter[i * count + j].kij);
            }
        }
    }
    fluid->pair = pair;
    fluid->parameter = parameter;
}

static void fill_triples(struct virial *fluid, struct arena *arena)
{
    const size_t count = fluid->head.count;
    struct virial_constants *triple = arena_alloc(arena, count * count * count, sizeof *triple);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            for (size_t k = 0; k < count; k++) {
                triple[(i * count + j) * count + k] = virial_of_triple(
                    &fluid->pair[i * count + j], &fluid->pair[i * count + k], &fluid->pair[j * count + k]);
            }
        }
    }
    fluid->triple = triple;
}

static struct fluid *create(const struct fluid_ops *ops, enum virial_correlation correlation,
                            const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    struct virial *fluid = arena_alloc(arena, 1, sizeof *fluid);
    for (size_t i = 0; i < spec->count; i++) {
        const struct pure_spec *pure = spec->pure[i];
        const bool has_point = pure->critical_temperature.given && pure->critical_pressure.given;
        *lack = (struct fluid_lack_report){!has_point              ? LACK_CRITICAL_POINT
                                           : !pure->acentric.given ? LACK_ACENTRIC
                                                                   : LACK_NOTHING,
                                           i};
        if (lack->lack != LACK_NOTHING) {
            return NULL;
        }
    }
    fluid->head = (struct fluid){ops, spec, spec->count, GAS_CONSTANT};
    fluid->correlation = correlation;
    fluid->has_third = ops->form == FLUID_FROM_TV;
    fill_pairs(fluid, arena);
    if (fluid->has_third) {
        fill_triples(fluid, arena);
    }
    return &fluid->head;
}

/* ---- at one temperature ------------------------------------------------------------------------------------------ */

static size_t at_t_size(const struct fluid *fluid)
{
    const size_t count = fluid->count, square = count * count;
    const size_t cubes = virial_of(fluid)->has_third ? 3 * square * count : 0;
    return sizeof(struct virial_at_t) + (4 * square + cubes + 4 * count) * sizeof(double);
}

static double *lay_out(double **next, size_t count)
{
    double *here = *next;
    *next += count;
    return here;
}

static void place_arrays(struct virial_at_t *at, const struct virial *fluid)
{
    const size_t count = fluid->head.count, square = count * count, cube = fluid->has_third ? square * count : 0;
    double *next = (double *)(void *)(at + 1);
    at->B = lay_out(&next, square);
    at->B_t = lay_out(&next, square);
    at->B_tt = lay_out(&next, square);
    at->contracted = lay_out(&next, square);
    at->C = lay_out(&next, cube);
    at->C_t = lay_out(&next, cube);
    at->C_tt = lay_out(&next, cube);
    at->B_n = lay_out(&next, count);
    at->C_n = lay_out(&next, count);
    at->B_tn = lay_out(&next, count);
    at->C_tn = lay_out(&next, count);
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    struct virial_at_t *at = (struct virial_at_t *)(void *)at_t;
    const struct virial *fluid = virial_of(at_t->fluid);
    const size_t count = fluid->head.count;
    place_arrays(at, fluid);
    for (size_t i = 0; i < count * count; i++) {
        const struct virial_curve B = virial_second(fluid->correlation, &fluid->pair[i], at_t->temperature);
        at->B[i] = B.value;
        at->B_t[i] = B.t;
        at->B_tt[i] = B.tt;
    }
    for (size_t i = 0; fluid->has_third && i < count * count * count; i++) {
        const struct virial_curve C = virial_third(&fluid->triple[i], at_t->temperature);
        at->C[i] = C.value;
        at->C_t[i] = C.t;
        at->C_tt[i] = C.tt;
    }
    return ANSWER_OK;
}

/* ---- sums over amounts ------------------------------------------------------------------------------------------- */

static double double_sum(const double *matrix, size_t count, const double n[], double factor, double gradient[])
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        double row = 0.0;
        for (size_t j = 0; j < count; j++) {
            row += n[j] * matrix[i * count + j];
        }
        gradient[i] = factor * row;
        sum += n[i] * row;
    }
    return sum;
}

/* Leaves sum_k n_k cube_ijk in `contracted`. */
static double triple_sum(const double *cube, size_t count, const double n[], double contracted[], double gradient[])
{
    for (size_t ij = 0; ij < count * count; ij++) {
        contracted[ij] = 0.0;
        for (size_t k = 0; k < count; k++) {
            contracted[ij] += n[k] * cube[ij * count + k];
        }
    }
    return double_sum(contracted, count, n, 3.0, gradient);
}

/* ---- in density -------------------------------------------------------------------------------------------------- */

/* The derivatives of F by temperature; leaves those of S_B and S_C by T and n in B_tn and C_tn. */
static void set_thermal(const struct virial_at_t *at, double V, const double n[], unsigned want, struct helmholtz *out)
{
    const size_t count = at->head.fluid->count;
    const double B_tt = double_sum(at->B_tt, count, n, 2.0, at->B_tn);
    const double C_tt = triple_sum(at->C_tt, count, n, at->contracted, at->C_tn);
    const double B_t = double_sum(at->B_t, count, n, 2.0, at->B_tn);
    const double C_t = triple_sum(at->C_t, count, n, at->contracted, at->C_tn);
    out->F_T = B_t / V + 0.5 * C_t / (V * V);
    out->F_TV = -(B_t + C_t / V) / (V * V);
    out->F_TT = B_tt / V + 0.5 * C_tt / (V * V);
    for (size_t i = 0; want & WANT_F_TN && i < count; i++) {
        out->F_Tn[i] = at->B_tn[i] / V + 0.5 * at->C_tn[i] / (V * V);
    }
}

static enum answer tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                      struct helmholtz *out)
{
    const struct virial_at_t *at = at_of(at_t);
    const size_t count = at_t->fluid->count;
    const double V = volume;
    if (!(V > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (want & (WANT_F_T | WANT_F_TT | WANT_F_TN)) {
        set_thermal(at, V, n, want, out);
    }
    const double B = double_sum(at->B, count, n, 2.0, at->B_n);
    const double C = triple_sum(at->C, count, n, at->contracted, at->C_n);
    out->F = B / V + 0.5 * C / (V * V);
    out->F_V = -(B + C / V) / (V * V);
    out->F_VV = (2.0 * B + 3.0 * C / V) / (V * V * V);
    for (size_t i = 0; want & WANT_F_N && i < count; i++) {
        out->F_n[i] = at->B_n[i] / V + 0.5 * at->C_n[i] / (V * V);
    }
    for (size_t i = 0; want & WANT_F_VN && i < count; i++) {
        out->F_Vn[i] = -(at->B_n[i] + at->C_n[i] / V) / (V * V);
    }
    for (size_t i = 0; want & WANT_F_NN && i < count; i++) {
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j;
            out->F_nn[ij] = out->F_nn[j * count + i] = 2.0 * at->B[ij] / V + 3.0 * at->contracted[ij] / (V * V);
        }
    }
    return ANSWER_OK;
}

static double smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    const struct virial *fluid = virial_of(at_t->fluid);
    const size_t count = fluid->head.count;
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i] * fluid->pair[i * count + i].critical_volume;
    }
    return sum / LARGEST_REDUCED_DENSITY;
}

/* The lowest density at which rho (1 + B rho + C rho^2) stops rising; infinite where it never does. */
static double spinodal_density(double B, double C)
{
    const double discriminant = B * B - 3.0 * C;
    if (!(discriminant > 0.0) || (B >= 0.0 && C >= 0.0)) {
        return (double)INFINITY;
    }
    /* The smaller positive root of 1 + 2 B rho + 3 C rho^2, without cancellation. */
    return 1.0 / (-B + sqrt(discriminant));
}

static double total(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

/* Newton's steps between bounds on a curve that rises from one to the other. */
static enum answer volume_at(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                             double *volume, int *roots)
{
    const struct virial_at_t *at = at_of(at_t);
    const size_t count = at_t->fluid->count;
    const double amount = total(n, count), ideal = pressure / (at_t->fluid->gas_constant * at_t->temperature);
    *roots = 1;
    if (branch == BRANCH_LIQUID) {
        return ANSWER_NO_SUCH_ROOT;
    }
    const double B = double_sum(at->B, count, n, 2.0, at->B_n) / (amount * amount);
    const double C = triple_sum(at->C, count, n, at->contracted, at->C_n) / (amount * amount * amount);
    double low = 0.0, high = fmin(amount / smallest_volume(at_t, n), spinodal_density(B, C));
    if (!(high * (1.0 + high * (B + high * C)) > ideal)) {
        return ANSWER_OUT_OF_RANGE;
    }
    double rho = fmin(ideal, 0.9 * high);
    for (int step = 0; step < MOST_STEPS; step++) {
        const double missing = ideal - rho * (1.0 + rho * (B + rho * C));
        const double change = missing / (1.0 + rho * (2.0 * B + 3.0 * rho * C));
        *(missing > 0.0 ? &low : &high) = rho;
        const double next = rho + change;
        if (fabs(change) <= 1e-15 * rho) {
            *volume = amount / next;
            return ANSWER_OK;
        }
        rho = next > low && next < high ? next : 0.5 * (low + high);
    }
    *volume = amount / rho;
    return high - low <= 1e-12 * high ? ANSWER_OK : ANSWER_FAILED;
}

/* ---- in pressure ------------------------------------------------------------------------------------------------- */

static double largest_pressure(const struct fluid_at_t *at_t, const double n[])
{
    const struct fluid *fluid = at_t->fluid;
    double sum_p = 0.0, sum_T = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        sum_p += n[i] * fluid->spec->pure[i]->critical_pressure.value;
        sum_T += n[i] * fluid->spec->pure[i]->critical_temperature.value;
    }
    return 0.5 * at_t->temperature * sum_p / sum_T;
}

/* ln phi_i = (p / R T) b_i, with b_i the derivative of n B = S_B / n. */
static void set_coefficients(const struct virial_at_t *at, double amount, double B, double B_t, double pressure,
                             struct explicit_phase *out)
{
    const size_t count = at->head.fluid->count;
    const double R = at->head.fluid->gas_constant, T = at->head.temperature, scale = pressure / (R * T);
    for (size_t i = 0; i < count; i++) {
        const double b = at->B_n[i] / amount - B, b_t = at->B_tn[i] / amount - B_t;
        if (out->ln_phi != NULL) {
            out->ln_phi[i] = scale * b;
        }
        if (out->dln_phi_dp != NULL) {
            out->dln_phi_dp[i] = b / (R * T);
        }
        if (out->dln_phi_dt != NULL) {
            out->dln_phi_dt[i] = scale * (b_t - b / T);
        }
        for (size_t j = 0; out->dln_phi_dn != NULL && j < count; j++) {
            out->dln_phi_dn[i * count + j] =
                scale / amount * (2.0 * at->B[i * count + j] - (at->B_n[i] + at->B_n[j]) / amount + 2.0 * B);
        }
    }
}

static enum answer tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                      struct explicit_phase *out)
{
    const struct virial_at_t *at = at_of(at_t);
    const size_t count = at_t->fluid->count;
    if (branch == BRANCH_LIQUID) {
        return ANSWER_NO_SUCH_ROOT;
    }
    if (!(pressure <= largest_pressure(at_t, n))) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double T = at_t->temperature, amount = total(n, count), by_n2 = 1.0 / (amount * amount);
    const double scale = pressure / (at_t->fluid->gas_constant * T);
    const double B_tt = double_sum(at->B_tt, count, n, 2.0, at->B_tn) * by_n2;
    const double B_t = double_sum(at->B_t, count, n, 2.0, at->B_tn) * by_n2;
    const double B = double_sum(at->B, count, n, 2.0, at->B_n) * by_n2;
    out->Z = 1.0 + scale * B;
    if (!(out->Z > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    out->roots = 1;
    out->has_slopes = true;
    out->compliance = 1.0;
    out->Z_ln_t = scale * (T * B_t - B);
    out->residual_gibbs_rt = scale * B;
    out->residual_enthalpy_rt = scale * (B - T * B_t);
    out->residual_heat_capacity_r = -scale * T * T * B_tt;
    set_coefficients(at, amount, B, B_t, pressure, out);
    return ANSWER_OK;
}

/* ---- rows of the table of methods -------------------------------------------------------------------------------- */

/* No limits but those by composition, at which the methods refuse to answer. */
static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    (void)fluid;
    (void)temperature;
    (void)pressure;
    return (struct range_note){.side = RANGE_INSIDE};
}

/* ---- for a reader with a calculator ------------------------------------------------------------------------------ */

/* B of a pair taken apart: of a simple fluid, by the acentric factor, and of a polar one. */
static void tell_parts(const struct virial *fluid, double T, struct explanation *out)
{
    struct virial_constants of = fluid->pair[0];
    const double B = virial_second(fluid->correlation, &of, T).value;
    const double acentric = of.acentric;
    of.polar = 0.0;
    const double without_polar = virial_second(fluid->correlation, &of, T).value;
    of.acentric = 0.0;
    const double simple = virial_second(fluid->correlation, &of, T).value;
    of.acentric = 1.0;
    const double shape = virial_second(fluid->correlation, &of, T).value - simple;
    explanation_put(out, "T_c", "critical temperature", NULL, "K", of.critical_temperature);
    explanation_put(out, "omega", "acentric factor", NULL, "1", acentric);
    explanation_put(out, "B_0", "of a simple fluid at T / T_c", NULL, "m3/mol", simple);
    explanation_put(out, "B_1", "by the acentric factor", NULL, "m3/mol", shape);
    explanation_put(out, "B_polar", "by the dipole", NULL, "m3/mol", B - without_polar);
    explanation_put(out, "B", "second virial coefficient", "B_0 + omega * B_1 + B_polar", "m3/mol", B);
}

/* "x_1 ^ 2 * B_11 + 2 * x_1 * x_2 * B_12 + ..." and the coefficients in it. */
static const char *tell_pairs(const struct virial_at_t *at, struct explanation *out)
{
    const size_t count = at->head.fluid->count;
    const char *sum = "";
    for (size_t i = 0; i < count; i++) {
        for (size_t j = i; j < count; j++) {
            explanation_put(out, explanation_text(out, "B_%zu%zu", i + 1, j + 1),
                            i == j ? "second virial coefficient" : "of the unlike pair", NULL, "m3/mol",
                            at->B[i * count + j]);
            sum = i == j
                      ? explanation_text(out, "%s%sx_%zu ^ 2 * B_%zu%zu", sum, i == 0 ? "" : " + ", i + 1, i + 1, i + 1)
                      : explanation_text(out, "%s + 2 * x_%zu * x_%zu * B_%zu%zu", sum, i + 1, j + 1, i + 1, j + 1);
        }
    }
    return sum;
}

static void tell_second(const struct virial_at_t *at, const double x[], double B, struct explanation *out)
{
    const struct virial *fluid = virial_of(at->head.fluid);
    const size_t count = fluid->head.count;
    explanation_put_fractions(out, fluid->head.spec, x);
    if (count == 1) {
        tell_parts(fluid, at->head.temperature, out);
        return;
    }
    const char *formula = count <= EXPLAINED_COMPONENTS ? tell_pairs(at, out) : NULL;
    explanation_put(out, "B", "of the whole, sum x_i x_j B_ij", formula, "m3/mol", B);
}

/* 2 sum x_j B_ij, and from it and the third coefficients ln phi_i. */
static void tell_component(const struct virial_at_t *at, size_t i, double x, const struct phase *phase,
                           struct explanation *out)
{
    const struct virial *fluid = virial_of(at->head.fluid);
    const size_t count = fluid->head.count;
    const char *S = explanation_text(out, "S_%zu", i + 1), *ln_phi = explanation_text(out, "ln_phi_%zu", i + 1);
    explanation_put(out, S, "2 sum x_j B_ij", NULL, "m3/mol", at->B_n[i]);
    if (fluid->has_third) {
        const char *Q = explanation_text(out, "Q_%zu", i + 1);
        explanation_put(out, Q, "3 sum x_j x_k C_ijk", NULL, "m6/mol2", at->C_n[i]);
        explanation_put(out, ln_phi, "ln fugacity coefficient",
                        explanation_text(out, "%s / v + %s / (2 * v ^ 2) - ln(Z)", S, Q), "1", phase->ln_phi[i]);
    } else {
        explanation_put(out, ln_phi, "ln fugacity coefficient", explanation_text(out, "(%s - B) * p / (R * T)", S), "1",
                        phase->ln_phi[i]);
    }
    explanation_put_fugacity(out, count, i, x, phase->ln_phi[i], phase->pressure);
}

static void tell_pure_fugacity(bool has_third, double ln_phi, struct explanation *out)
{
    explanation_put(out, "ln_phi", "ln fugacity coefficient",
                    has_third ? "2 * B / v + 3 * C / (2 * v ^ 2) - ln(Z)" : "B * p / (R * T)", "1", ln_phi);
}

static void tell_pressure(const struct virial_at_t *at, double C, const struct phase *phase, double v,
                          struct explanation *out)
{
    if (virial_of(at->head.fluid)->has_third) {
        explanation_put(out, "C", "third virial coefficient", NULL, "m6/mol2", C);
        explanation_put(out, "Z", "compressibility factor", "1 + B / v + C / v ^ 2", "1", phase->Z);
        explanation_put(out, "p", "pressure", "Z * R * T / v", "Pa",
                        phase->Z * GAS_CONSTANT * at->head.temperature / v);
    } else {
        explanation_put(out, "p", "pressure, of v = R T / p + B", "R * T / (v - B)", "Pa", phase->pressure);
        explanation_put(out, "Z", "compressibility factor", "1 + B * p / (R * T)", "1", phase->Z);
    }
}

static enum answer explain_whole(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                                 struct explanation *out)
{
    const struct virial_at_t *at = at_of(at_t);
    const size_t count = at_t->fluid->count;
    double ln_phi[EXPLAINED_COMPONENTS], scratch[EXPLAINED_COMPONENTS], x[EXPLAINED_COMPONENTS];
    const bool is_told = count <= EXPLAINED_COMPONENTS, has_third = virial_of(at_t->fluid)->has_third;
    const double amount = total(n, count), v = volume / amount;
    struct phase phase = {.ln_phi = ln_phi, .ln_f_over_x = scratch};
    const enum answer answer = phase_tv(at_t, volume, n, is_told && with_fugacity ? PHASE_LN_PHI : 0U, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    for (size_t i = 0; is_told && i < count; i++) {
        x[i] = n[i] / amount;
    }
    /* B_n and C_n become slopes by amount at one mole: of mole fractions where those are told. */
    const double *of = is_told ? x : n, scale = is_told ? 1.0 : 1.0 / amount;
    const double B = double_sum(at->B, count, of, 2.0, at->B_n) * scale * scale;
    const double C = has_third ? triple_sum(at->C, count, of, at->contracted, at->C_n) * scale * scale * scale : 0.0;
    explanation_put(out, "R", "gas constant", NULL, "J/mol/K", GAS_CONSTANT);
    explanation_put(out, "T", "temperature", NULL, "K", at_t->temperature);
    explanation_put(out, "v", "molar volume", NULL, "m3/mol", v);
    tell_second(at, x, B, out);
    tell_pressure(at, C, &phase, v, out);
    if (with_fugacity && count == 1) {
        tell_pure_fugacity(has_third, ln_phi[0], out);
    }
    for (size_t i = 0; with_fugacity && is_told && count > 1 && i < count; i++) {
        tell_component(at, i, x[i], &phase, out);
    }
    return ANSWER_OK;
}

static enum answer pair_at(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out)
{
    *out = virial_of(at_t->fluid)->parameter[i * at_t->fluid->count + j];
    return ANSWER_OK;
}

#define DENSITY_OPS                                                                                               \
    .form = FLUID_FROM_TV, .capabilities = CAN_MIXTURE | CAN_CALORIC, .at_t_size = at_t_size, .set_t = set_t,     \
    .tv = tv, .volume = volume_at, .smallest_volume = smallest_volume, .range = range, .pair = pair_at,           \
    .explain_whole = explain_whole,                                                                               \
    .validity = "gases to three quarters of the critical density, where it stops; no liquid; not for gases with " \
                "hydrogen bonds"

#define PRESSURE_OPS                                                                                          \
    .form = FLUID_FROM_TP, .capabilities = CAN_MIXTURE | CAN_CALORIC, .at_t_size = at_t_size, .set_t = set_t, \
    .tp = tp, .range = range, .pair = pair_at, .explain_whole = explain_whole,                                \
    .validity = "gases to p = (T / 2) pc / Tc, where it stops; no liquid; not for gases with hydrogen bonds"

static struct fluid *create_pitzer_abbott(const struct fluid_spec *spec, struct arena *arena,
                                          struct fluid_lack_report *lack)
{
    return create(&virial_pitzer_abbott_ops, VIRIAL_PITZER_ABBOTT, spec, arena, lack);
}

const struct fluid_ops virial_pitzer_abbott_ops = {
    .name = "virial-pitzer-abbott",
    .title = "virial equation in density, B by Pitzer and Abbott, C by Orbey and Vera",
    .citation = "K. S. Pitzer, R. F. Curl, J. Am. Chem. Soc. 79 (1957) 2369, in Abbott's form; H. Orbey, J. H. Vera, "
                "AIChE J. 29 (1983) 107",
    .create = create_pitzer_abbott,
    DENSITY_OPS,
};

static struct fluid *create_tsonopoulos(const struct fluid_spec *spec, struct arena *arena,
                                        struct fluid_lack_report *lack)
{
    return create(&virial_tsonopoulos_ops, VIRIAL_TSONOPOULOS, spec, arena, lack);
}

const struct fluid_ops virial_tsonopoulos_ops = {
    .name = "virial-tsonopoulos",
    .title = "virial equation in density, B by Tsonopoulos, C by Orbey and Vera",
    .citation = "C. Tsonopoulos, AIChE J. 20 (1974) 263; H. Orbey, J. H. Vera, AIChE J. 29 (1983) 107",
    .create = create_tsonopoulos,
    DENSITY_OPS,
};

static struct fluid *create_pitzer_abbott_pressure(const struct fluid_spec *spec, struct arena *arena,
                                                   struct fluid_lack_report *lack)
{
    return create(&virial_pitzer_abbott_pressure_ops, VIRIAL_PITZER_ABBOTT, spec, arena, lack);
}

const struct fluid_ops virial_pitzer_abbott_pressure_ops = {
    .name = "virial-pitzer-abbott-pressure",
    .title = "virial equation in pressure, B by Pitzer and Abbott",
    .citation = "K. S. Pitzer, R. F. Curl, J. Am. Chem. Soc. 79 (1957) 2369, in Abbott's form",
    .create = create_pitzer_abbott_pressure,
    PRESSURE_OPS,
};

static struct fluid *create_tsonopoulos_pressure(const struct fluid_spec *spec, struct arena *arena,
                                                 struct fluid_lack_report *lack)
{
    return create(&virial_tsonopoulos_pressure_ops, VIRIAL_TSONOPOULOS, spec, arena, lack);
}

const struct fluid_ops virial_tsonopoulos_pressure_ops = {
    .name = "virial-tsonopoulos-pressure",
    .title = "virial equation in pressure, B by Tsonopoulos",
    .citation = "C. Tsonopoulos, AIChE J. 20 (1974) 263",
    .create = create_tsonopoulos_pressure,
    PRESSURE_OPS,
};
