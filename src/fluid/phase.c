/* Phase properties from either form of method.
 *
 * A (T, V, n) method gives F = A^residual / (R T); everything follows from its derivatives as in Michelsen and
 * Mollerup, Thermodynamic Models, 2nd ed., chapter 2:
 *
 *   p                = n R T / V - R T F_V
 *   ln(f_i / x_i)    = F_i + ln(n R T / V)
 *   ln phi_i         = F_i - ln Z
 *   d ln phi_i / dp  = v_i / (R T) - 1 / p                                with v_i = -(dp/dn_i) / (dp/dV)
 *   d ln phi_i / dT  = F_Ti + 1 / T - v_i (dp/dT) / (R T)
 *   d ln phi_i / dn_j = F_ij + 1 / n + (dp/dn_i)(dp/dn_j) / (dp/dV) / (R T)
 *
 * A (T, p, n) method gives Z and ln phi_i, and if it can their derivatives by T and p, from which all the same follows;
 * at a given volume its pressure is solved for.
 */
#include "fluid/phase.h"

#include <float.h>
#include <math.h>

/* Relative error in a volume that a search for the pressure of a (T, p) method may leave. */
#define LAST_VOLUME_ERROR 1e-13

void phase_of_pure(struct phase *phase, struct pure_arrays *arrays)
{
    *phase = (struct phase){
        .ln_phi = &arrays->ln_phi,
        .ln_f_over_x = &arrays->ln_f_over_x,
        .dln_phi_dp = &arrays->dln_phi_dp,
        .dln_phi_dt = &arrays->dln_phi_dt,
        .dln_phi_dn = &arrays->dln_phi_dn,
        .dp_dn = &arrays->dp_dn,
        .scratch = arrays->scratch,
    };
}

struct phase *phase_create(size_t count, struct arena *arena)
{
    struct phase *phase = arena_alloc(arena, 1, sizeof *phase);
    phase->ln_phi = arena_alloc(arena, count, sizeof(double));
    phase->ln_f_over_x = arena_alloc(arena, count, sizeof(double));
    phase->dln_phi_dp = arena_alloc(arena, count, sizeof(double));
    phase->dln_phi_dt = arena_alloc(arena, count, sizeof(double));
    phase->dln_phi_dn = arena_alloc(arena, count * count, sizeof(double));
    phase->dp_dn = arena_alloc(arena, count, sizeof(double));
    phase->scratch = arena_alloc(arena, count * (count + 4), sizeof(double));
    return phase;
}

double phase_smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    const struct fluid_ops *ops = at_t->fluid->ops;
    return ops->smallest_volume == NULL ? 0.0 : ops->smallest_volume(at_t, n);
}

static double total(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

static bool all_finite(const double values[], size_t count)
{
    bool is_good = true;
    for (size_t i = 0; i < count; i++) {
        is_good &= isfinite(values[i]) != 0;
    }
    return is_good;
}

/* ANSWER_OK only if everything that was wanted is a number. */
static enum answer check_phase(const struct phase *out, size_t count, unsigned want)
{
    bool is_good = isfinite(out->pressure) && isfinite(out->Z) && isfinite(out->dp_dv);
    if (want & PHASE_LN_PHI) {
        is_good = is_good && all_finite(out->ln_phi, count);
    }
    if (want & PHASE_LN_F) {
        is_good = is_good && all_finite(out->ln_f_over_x, count);
    }
    if (want & PHASE_DLN_PHI_DP) {
        is_good = is_good && all_finite(out->dln_phi_dp, count);
    }
    if (want & PHASE_DLN_PHI_DT) {
        is_good = is_good && isfinite(out->dp_dt) && all_finite(out->dln_phi_dt, count);
    }
    if (want & PHASE_DLN_PHI_DN) {
        is_good = is_good && all_finite(out->dln_phi_dn, count * count);
    }
    if (want & PHASE_DP_DN) {
        is_good = is_good && all_finite(out->dp_dn, count);
    }
    if (want & PHASE_RESIDUAL) {
        is_good = is_good && isfinite(out->dp_dt) && isfinite(out->residual_enthalpy_rt) &&
                  isfinite(out->residual_entropy_r) && isfinite(out->residual_heat_capacity_r);
    }
    return is_good ? ANSWER_OK : ANSWER_FAILED;
}

/* ---- methods explicit in T, V, n ------------------------------------------------------------------------------- */

static unsigned helmholtz_want_of(unsigned want)
{
    unsigned needed = WANT_F_VV;
    if (want & (PHASE_LN_PHI | PHASE_LN_F)) {
        needed |= WANT_F_N;
    }
    if (want & (PHASE_DLN_PHI_DP | PHASE_DP_DN)) {
        needed |= WANT_F_VN;
    }
    if (want & PHASE_DLN_PHI_DT) {
        needed |= WANT_F_VN | WANT_F_T | WANT_F_TN;
    }
    if (want & PHASE_DLN_PHI_DN) {
        needed |= WANT_F_VN | WANT_F_NN;
    }
    if (want & PHASE_RESIDUAL) {
        needed |= WANT_F_T | WANT_F_TT;
    }
    return needed;
}

/* Turns F_i, which stands in `ln_phi` or else in `ln_f_over_x`, into what was wanted. The fugacity is taken from the
 * volume, not from ln phi + ln p, so that it also exists where the pressure is not positive. */
static void set_fugacities(const double *F_n, size_t count, double RT, unsigned want, struct phase *out)
{
    const double ln_ideal_pressure = want & PHASE_LN_F ? log(out->amount * RT / out->volume) : 0.0;
    const double ln_Z = want & PHASE_LN_PHI ? log(out->Z) : 0.0;
    for (size_t i = 0; i < count; i++) {
        const double F_i = F_n[i];
        if (want & PHASE_LN_F) {
            out->ln_f_over_x[i] = F_i + ln_ideal_pressure;
        }
        if (want & PHASE_LN_PHI) {
            out->ln_phi[i] = F_i - ln_Z;
        }
    }
}

static void add_to_row(double *row, size_t count, double constant, double factor, const double values[])
{
    for (size_t j = 0; j < count; j++) {
        row[j] += constant + factor * values[j];
    }
}

/* `dp_dn` arrives holding F_Vi. The other arrays hold F_Ti and F_ij where they are wanted. */
static void set_derivatives(double *dp_dn, size_t count, double RT, unsigned want, struct phase *out)
{
    for (size_t i = 0; i < count; i++) {
        dp_dn[i] = RT / out->volume - RT * dp_dn[i];
    }
    for (size_t i = 0; i < count; i++) {
        const double partial_volume = -dp_dn[i] / out->dp_dv;
        if (want & PHASE_DLN_PHI_DP) {
            out->dln_phi_dp[i] = partial_volume / RT - 1.0 / out->pressure;
        }
        if (want & PHASE_DLN_PHI_DT) {
            out->dln_phi_dt[i] += 1.0 / out->temperature - partial_volume * out->dp_dt / RT;
        }
        if (want & PHASE_DLN_PHI_DN) {
            add_to_row(&out->dln_phi_dn[i * count], count, 1.0 / out->amount, -partial_volume / RT, dp_dn);
        }
    }
}

/* Against the ideal gas at the same T and p; F is against the one at the same T and V. */
static void set_residuals(const struct helmholtz *F, double gas_constant, struct phase *out)
{
    const double T = out->temperature, n = out->amount, R = gas_constant;
    out->residual_enthalpy_rt = -T * F->F_T / n + out->Z - 1.0;
    out->residual_entropy_r = (-T * F->F_T - F->F) / n + log(out->Z);
    const double cv_r = -T * (T * F->F_TT + 2.0 * F->F_T) / n;
    out->residual_heat_capacity_r = cv_r - T * out->dp_dt * out->dp_dt / (out->dp_dv * n * R) - 1.0;
}

/* Where tv puts the arrays of F: in place of what will be made from them. */
static struct helmholtz arrays_for(const struct fluid *fluid, unsigned want, const struct phase *out, double *single)
{
    return (struct helmholtz){
        .F_n = want & PHASE_LN_PHI ? out->ln_phi : out->ln_f_over_x,
        /* A pure fluid's dp/dn needs no scratch. */
        .F_Vn = want & PHASE_DP_DN  ? out->dp_dn
                : fluid->count == 1 ? single
                                    : out->scratch,
        .F_Tn = out->dln_phi_dt,
        .F_nn = out->dln_phi_dn,
    };
}

/* The phase from what tv said at `volume`. With `pressure` not NULL the pressure is the one the volume was solved for,
 * to its last digit, rather than what rounding in a stiff liquid makes of it. */
static enum answer phase_from_tv(const struct fluid_at_t *at_t, double volume, const double *pressure, const double n[],
                                 const struct helmholtz *F, unsigned want, struct phase *out)
{
    const struct fluid *fluid = at_t->fluid;
    const size_t count = fluid->count;
    const double RT = fluid->gas_constant * at_t->temperature;
    out->temperature = at_t->temperature;
    out->volume = volume;
    out->amount = total(n, count);
    out->pressure = pressure != NULL ? *pressure : RT * (out->amount / volume - F->F_V);
    out->Z = out->pressure * volume / (out->amount * RT);
    out->dp_dv = -RT * (out->amount / (volume * volume) + F->F_VV);
    if (want & (PHASE_LN_PHI | PHASE_DLN_PHI_DP | PHASE_RESIDUAL) && !(out->pressure > 0.0)) {
        return isfinite(out->pressure) ? ANSWER_OUT_OF_RANGE : ANSWER_FAILED;
    }
    if (want & (PHASE_DLN_PHI_DT | PHASE_RESIDUAL)) {
        out->dp_dt = fluid->gas_constant * (out->amount / volume - F->F_V - at_t->temperature * F->F_TV);
    }
    if (want & (PHASE_LN_PHI | PHASE_LN_F)) {
        set_fugacities(F->F_n, count, RT, want, out);
    }
    if (want & (PHASE_DLN_PHI_DP | PHASE_DLN_PHI_DT | PHASE_DLN_PHI_DN | PHASE_DP_DN)) {
        if (!(fabs(out->dp_dv) > 0.0)) {
            return ANSWER_FAILED; /* so thin that 1 / V^2 is lost to underflow */
        }
        set_derivatives(F->F_Vn, count, RT, want, out);
    }
    if (want & PHASE_RESIDUAL) {
        set_residuals(F, fluid->gas_constant, out);
    }
    return check_phase(out, count, want);
}

/* ---- methods explicit in T, p, n ------------------------------------------------------------------------------- */

/* From Z and its derivatives, as V = n R T Z / p:  dV/dp = -(n R T / p^2) (Z - p dZ/dp),
 * dV/dT = (n R / p) (Z + T dZ/dT),  dp/dT = -(dV/dT) / (dV/dp),  dp/dn_i = -v_i / (dV/dp). */
static enum answer set_explicit_slopes(const struct explicit_phase *explicit, const double *dln_phi_dp,
                                       double gas_constant, size_t count, unsigned want, struct phase *out)
{
    const double R = gas_constant, T = out->temperature, p = out->pressure;
    const double dv_dp = -out->amount * R * T / p / p * explicit->compliance;
    if (!(fabs(dv_dp) > 0.0) || !isfinite(dv_dp)) {
        return ANSWER_FAILED; /* an amount or pressure whose products are lost to underflow */
    }
    out->dp_dv = 1.0 / dv_dp;
    out->dp_dt = -out->amount * R / p * (explicit->Z + explicit->Z_ln_t) / dv_dp;
    for (size_t i = 0; want & PHASE_DP_DN && i < count; i++) {
        out->dp_dn[i] = -R * T * (dln_phi_dp[i] + 1.0 / p) / dv_dp;
    }
    if (want & PHASE_RESIDUAL) {
        out->residual_enthalpy_rt = explicit->residual_enthalpy_rt;
        out->residual_entropy_r = explicit->residual_enthalpy_rt - explicit->residual_gibbs_rt;
        out->residual_heat_capacity_r = explicit->residual_heat_capacity_r;
    }
    return ANSWER_OK;
}

/* Where tp puts what is wanted; PHASE_DP_DN needs the derivative by p. */
static struct explicit_phase arrays_of_explicit(unsigned want, const struct phase *out)
{
    return (struct explicit_phase){
        .ln_phi = want & PHASE_LN_PHI ? out->ln_phi
                  : want & PHASE_LN_F ? out->ln_f_over_x
                                      : NULL,
        .dln_phi_dn = want & PHASE_DLN_PHI_DN ? out->dln_phi_dn : NULL,
        .dln_phi_dp = want & PHASE_DLN_PHI_DP ? out->dln_phi_dp
                      : want & PHASE_DP_DN    ? out->dp_dn
                                              : NULL,
        .dln_phi_dt = want & PHASE_DLN_PHI_DT ? out->dln_phi_dt : NULL,
        .roots = 1,
    };
}

static enum answer phase_from_tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                 unsigned want, struct phase *out)
{
    const struct fluid *fluid = at_t->fluid;
    const size_t count = fluid->count;
    struct explicit_phase explicit = arrays_of_explicit(want, out);
    const enum answer answer = fluid->ops->tp(at_t, pressure, n, branch, &explicit);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!explicit.has_slopes && want & ~((unsigned)PHASE_LN_PHI | PHASE_LN_F | PHASE_DLN_PHI_DN)) {
        return ANSWER_CANNOT;
    }
    out->temperature = at_t->temperature;
    out->pressure = pressure;
    out->amount = total(n, count);
    out->Z = explicit.Z;
    out->volume = explicit.Z * out->amount * fluid->gas_constant * at_t->temperature / pressure;
    out->dp_dv = 0.0;
    out->branch = branch;
    out->roots = explicit.roots;
    if (explicit.has_slopes) {
        const enum answer slopes =
            set_explicit_slopes(&explicit, explicit.dln_phi_dp, fluid->gas_constant, count, want, out);
        if (slopes != ANSWER_OK) {
            return slopes;
        }
    }
    for (size_t i = 0; want & PHASE_LN_F && i < count; i++) {
        out->ln_f_over_x[i] = explicit.ln_phi[i] + log(pressure);
    }
    return check_phase(out, count, want);
}

enum { MOST_PRESSURES = 200 };

/* A search for ln p between two bounds, either of which may not be known yet. */
struct pressure_search {
    double low, high, ln_p;
};

/* Newton's next ln p where it stays between the bounds, else the middle, or a step outwards. */
static double next_ln_pressure(const struct pressure_search *search, double newton)
{
    if (newton > search->low && newton < search->high) {
        return newton;
    }
    if (!isfinite(search->high)) {
        return search->ln_p + 1.0;
    }
    return isfinite(search->low) ? 0.5 * (search->low + search->high) : search->ln_p - 1.0;
}

/* The change of ln p from V(p) = n R T Z / p to the volume at which the ideal gas has the pressure p / ratio: of a
 * vapour ln V is nearly straight in ln p, of a liquid V in p. */
static double ln_pressure_step(const struct explicit_phase *at, double ratio, enum branch branch)
{
    if (branch == BRANCH_VAPOUR) {
        return -log(ratio / at->Z) * at->Z / at->compliance;
    }
    const double part = (at->Z - ratio) / at->compliance;
    return part > -0.5 ? log1p(part) : -0.7;
}

/* The pressure at which a branch has the volume asked for. The vapour's branch ends at a high pressure, the liquid's at
 * a low one. */
static enum answer pressure_on_branch(const struct fluid_at_t *at_t, double volume, const double n[],
                                      enum branch branch, double *pressure)
{
    const double ideal = total(n, at_t->fluid->count) * at_t->fluid->gas_constant * at_t->temperature / volume;
    struct pressure_search search = {-(double)INFINITY, (double)INFINITY, log(ideal)};
    enum answer refusal = ANSWER_NO_SUCH_ROOT;
    for (int count = 0; count < MOST_PRESSURES; count++) {
        struct explicit_phase at = {.roots = 1};
        *pressure = exp(search.ln_p);
        const enum answer answer = at_t->fluid->ops->tp(at_t, *pressure, n, branch, &at);
        double newton = (double)NAN;
        if (answer == ANSWER_NO_SUCH_ROOT || answer == ANSWER_OUT_OF_RANGE) {
            refusal = answer;
            *(branch == BRANCH_VAPOUR ? &search.high : &search.low) = search.ln_p;
        } else if (answer != ANSWER_OK || !at.has_slopes) {
            return answer != ANSWER_OK ? answer : ANSWER_CANNOT;
        } else {
            const double ratio = *pressure / ideal, step = ln_pressure_step(&at, ratio, branch);
            if (fabs(ratio - at.Z) <= 4.0 * DBL_EPSILON * at.Z || fabs(step) <= DBL_EPSILON) {
                return ANSWER_OK;
            }
            *(step > 0.0 ? &search.low : &search.high) = search.ln_p;
            newton = search.ln_p + step;
        }
        const double next = next_ln_pressure(&search, newton);
        if (!(next > search.low && next < search.high)) {
            /* No number is left between the bounds: at a root, or at the end of the branch. */
            return fabs(*pressure / ideal - at.Z) <= LAST_VOLUME_ERROR * at.Z ? ANSWER_OK : refusal;
        }
        search.ln_p = next;
    }
    return refusal;
}

/* The phase of that volume: on the vapour's branch or else the liquid's. */
static enum answer phase_from_tp_at_volume(const struct fluid_at_t *at_t, double volume, const double n[],
                                           unsigned want, struct phase *out)
{
    double pressure;
    enum branch branch = BRANCH_VAPOUR;
    enum answer answer = pressure_on_branch(at_t, volume, n, branch, &pressure);
    if (answer == ANSWER_NO_SUCH_ROOT) {
        branch = BRANCH_LIQUID;
        answer = pressure_on_branch(at_t, volume, n, branch, &pressure);
    }
    answer = answer == ANSWER_OK ? phase_from_tp(at_t, pressure, n, branch, want, out) : answer;
    if (answer == ANSWER_OK) {
        out->volume = volume;
        out->branch = BRANCH_STABLE;
        out->roots = 0;
    }
    return answer;
}

/* ---- what the layers above call -------------------------------------------------------------------------------- */

enum answer phase_tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                     unsigned want, struct phase *out)
{
    const struct fluid_ops *ops = at_t->fluid->ops;
    if (!(pressure > 0.0) || !isfinite(pressure)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (ops->form == FLUID_FROM_TP) {
        return phase_from_tp(at_t, pressure, n, branch, want, out);
    }
    double volume, single;
    struct helmholtz F = arrays_for(at_t->fluid, want, out, &single);
    const unsigned needed = helmholtz_want_of(want);
    enum answer answer;
    if (ops->volume_and_tv != NULL) {
        answer = ops->volume_and_tv(at_t, pressure, n, branch, needed, &volume, &out->roots, &F);
    } else {
        answer = ops->volume(at_t, pressure, n, branch, &volume, &out->roots);
        answer = answer != ANSWER_OK ? answer : ops->tv(at_t, volume, n, needed, &F);
    }
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->branch = branch;
    return phase_from_tv(at_t, volume, &pressure, n, &F, want, out);
}

enum answer phase_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want, struct phase *out)
{
    const struct fluid_ops *ops = at_t->fluid->ops;
    if (!(volume > phase_smallest_volume(at_t, n)) || !isfinite(volume)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (ops->form == FLUID_FROM_TP) {
        return phase_from_tp_at_volume(at_t, volume, n, want, out);
    }
    double single;
    struct helmholtz F = arrays_for(at_t->fluid, want, out, &single);
    const enum answer answer = ops->tv(at_t, volume, n, helmholtz_want_of(want), &F);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->branch = BRANCH_STABLE;
    out->roots = 0;
    return phase_from_tv(at_t, volume, NULL, n, &F, want, out);
}

double phase_molar_volume(const struct phase *phase)
{
    return phase->volume / phase->amount;
}
