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
 * A (T, p, n) method gives Z and ln phi_i, and is asked for no more than these.
 */
#include "fluid/phase.h"

#include <math.h>

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
        set_derivatives(F->F_Vn, count, RT, want, out);
    }
    if (want & PHASE_RESIDUAL) {
        set_residuals(F, fluid->gas_constant, out);
    }
    return check_phase(out, count, want);
}

/* ---- methods explicit in T, p, n ------------------------------------------------------------------------------- */

/* Z and ln phi_i, and with them the fugacities. */
static enum answer phase_from_tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                 unsigned want, struct phase *out)
{
    const struct fluid *fluid = at_t->fluid;
    const size_t count = fluid->count;
    if (want & ~((unsigned)PHASE_LN_PHI | PHASE_LN_F | PHASE_DLN_PHI_DN)) {
        return ANSWER_CANNOT;
    }
    struct explicit_phase explicit = {
        .ln_phi = want & PHASE_LN_PHI || !(want & PHASE_LN_F) ? out->ln_phi : out->ln_f_over_x,
        .dln_phi_dn = want & PHASE_DLN_PHI_DN ? out->dln_phi_dn : NULL,
    };
    const enum answer answer = fluid->ops->tp(at_t, pressure, n, branch, &explicit);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->temperature = at_t->temperature;
    out->pressure = pressure;
    out->amount = total(n, count);
    out->Z = explicit.Z;
    out->volume = explicit.Z * out->amount * fluid->gas_constant * at_t->temperature / pressure;
    out->dp_dv = 0.0;
    out->branch = branch;
    out->roots = 1;
    for (size_t i = 0; want & PHASE_LN_F && i < count; i++) {
        out->ln_f_over_x[i] = explicit.ln_phi[i] + log(pressure);
    }
    return check_phase(out, count, want);
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
    if (ops->form == FLUID_FROM_TP) {
        return ANSWER_CANNOT;
    }
    if (!(volume > phase_smallest_volume(at_t, n)) || !isfinite(volume)) {
        return ANSWER_OUT_OF_RANGE;
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
