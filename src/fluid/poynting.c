/* Liquids by their vapour pressure and the Poynting factor, pure gases only:
 *
 *   f = p_sat phi_sat exp(integral from p_sat to p of v dp / (R T))
 *
 * each part by a published correlation of its own: the vapour pressure by Lee and Kesler, AIChE J. 21 (1975) 510; the
 * vapour, and with it phi_sat, by the virial equation in pressure with B by Tsonopoulos, AIChE J. 20 (1974) 263; the
 * saturated liquid's volume by Rackett's equation with Z_RA by Yamada and Gunn, J. Chem. Eng. Data 18 (1973) 234; and
 * that of the compressed liquid by Tait's equation with the parameters of Thomson, Brobst and Hankinson, AIChE J. 28
 * (1982) 671 (from memory), v = v_sat (1 - c ln((beta + p) / (beta + p_sat))), whose integral is
 *
 *   v_sat ((1 + c) (p - p_sat) - c (beta + p) ln((beta + p) / (beta + p_sat))).
 */
#include "fluid/explanation.h"
#include "fluid/methods_internal.h"
#include "fluid/phase.h"
#include "fluid/virial_internal.h"

#include <math.h>

/* A liquid compressed to less than this part of its saturated volume is beyond Tait's equation. */
#define LEAST_COMPRESSED 0.6
/* The vapour's series stops where that of the virial method in pressure does. */
#define LARGEST_PRESSURE 0.5 /* of T pc / Tc */

struct poynting {
    struct fluid head;
    struct virial_constants vapour;
    double Tc, pc, omega;
    double tait; /* c */
};

/* The parts at one temperature, each with its derivatives. */
struct poynting_at_t {
    struct fluid_at_t head;
    struct virial_curve B, ln_psat, psat; /* m3/mol, -, Pa */
    struct virial_curve vsat, beta;       /* m3/mol, Pa; where there is a liquid */
    bool has_liquid;
};

static const struct poynting *poynting_of(const struct fluid *fluid)
{
    return (const struct poynting *)(const void *)fluid;
}

static const struct poynting_at_t *at_of(const struct fluid_at_t *at_t)
{
    return (const struct poynting_at_t *)(const void *)at_t;
}

/* ---- curves: values with two derivatives by temperature ---------------------------------------------------------- */

static struct virial_curve constant(double value)
{
    return (struct virial_curve){value, 0.0, 0.0};
}

static struct virial_curve add(struct virial_curve a, double factor, struct virial_curve b)
{
    return (struct virial_curve){a.value + factor * b.value, a.t + factor * b.t, a.tt + factor * b.tt};
}

static struct virial_curve times(struct virial_curve a, struct virial_curve b)
{
    return (struct virial_curve){a.value * b.value, a.t * b.value + a.value * b.t,
                                 a.tt * b.value + 2.0 * a.t * b.t + a.value * b.tt};
}

static struct virial_curve exponential(struct virial_curve a)
{
    const double value = exp(a.value);
    return (struct virial_curve){value, value * a.t, value * (a.tt + a.t * a.t)};
}

static struct virial_curve logarithm(struct virial_curve a)
{
    return (struct virial_curve){log(a.value), a.t / a.value, a.tt / a.value - a.t * a.t / (a.value * a.value)};
}

static struct virial_curve power(struct virial_curve a, double exponent)
{
    const double slope = exponent * pow(a.value, exponent - 1.0);
    return (struct virial_curve){pow(a.value, exponent), slope * a.t,
                                 slope * a.tt + (exponent - 1.0) * slope / a.value * a.t * a.t};
}

/* ---- the correlations -------------------------------------------------------------------------------------------- */

/* ln(p_sat / pc) = f0 + omega f1. */
static struct virial_curve ln_vapour_pressure(const struct poynting *fluid, struct virial_curve Tr)
{
    const double omega = fluid->omega;
    struct virial_curve ln = constant(5.92714 + 15.2518 * omega + log(fluid->pc));
    ln = add(ln, -(6.09648 + 15.6875 * omega), power(Tr, -1.0));
    ln = add(ln, -(1.28862 + 13.4721 * omega), logarithm(Tr));
    return add(ln, 0.169347 + 0.43577 * omega, power(Tr, 6.0));
}

static double rackett_constant(const struct poynting *fluid)
{
    return 0.29056 - 0.08775 * fluid->omega;
}

/* (R Tc / pc) Z_RA^(1 + (1 - Tr)^(2/7)), and beta / pc = -1 - 9.070217 u + 62.45326 u^2 - 135.1102 u^3 + e u^4 with
 * u = (1 - Tr)^(1/3). */
static void set_liquid(const struct poynting *fluid, struct virial_curve Tr, struct poynting_at_t *at)
{
    const struct virial_curve gap = add(constant(1.0), -1.0, Tr), u = power(gap, 1.0 / 3.0);
    const double ln_Z = log(rackett_constant(fluid)), omega = fluid->omega;
    const struct virial_curve exponent = add(constant(1.0), 1.0, power(gap, 2.0 / 7.0));
    at->vsat = times(constant(GAS_CONSTANT * fluid->Tc / fluid->pc), exponential(times(constant(ln_Z), exponent)));
    const double e = exp(4.79594 + 0.250047 * omega + 1.14188 * omega * omega);
    struct virial_curve beta = constant(-1.0);
    beta = add(beta, -9.070217, u);
    beta = add(beta, 62.45326, power(u, 2.0));
    beta = add(beta, -135.1102, gap);
    beta = add(beta, e, power(u, 4.0));
    at->beta = times(constant(fluid->pc), beta);
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    struct poynting_at_t *at = (struct poynting_at_t *)(void *)at_t;
    const struct poynting *fluid = poynting_of(at_t->fluid);
    const double T = at_t->temperature;
    const struct virial_curve Tr = {T / fluid->Tc, 1.0 / fluid->Tc, 0.0};
    at->B = virial_second(VIRIAL_TSONOPOULOS, &fluid->vapour, T);
    at->ln_psat = ln_vapour_pressure(fluid, Tr);
    at->psat = exponential(at->ln_psat);
    at->has_liquid =
        T < fluid->Tc && at->psat.value <= LARGEST_PRESSURE * T * fluid->pc / fluid->Tc && at->psat.value > 0.0;
    if (at->has_liquid) {
        set_liquid(fluid, Tr, at);
        at->has_liquid = at->beta.value + at->psat.value > 0.0;
    }
    return isfinite(at->B.value) ? ANSWER_OK : ANSWER_OUT_OF_RANGE;
}

/* ---- creating ---------------------------------------------------------------------------------------------------- */

static struct fluid *create(const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    const struct pure_spec *pure = spec->pure[0];
    *lack = (struct fluid_lack_report){LACK_NOTHING, 0};
    if (spec->count != 1) {
        lack->lack = LACK_MIXTURE;
    } else if (!pure->critical_temperature.given || !pure->critical_pressure.given) {
        lack->lack = LACK_CRITICAL_POINT;
    } else if (!pure->acentric.given) {
        lack->lack = LACK_ACENTRIC;
    }
    if (lack->lack != LACK_NOTHING) {
        return NULL;
    }
    struct poynting *fluid = arena_alloc(arena, 1, sizeof *fluid);
    *fluid = (struct poynting){
        .head = {&poynting_ops, spec, 1, GAS_CONSTANT},
        .vapour = virial_of_component(pure, NULL),
        .Tc = pure->critical_temperature.value,
        .pc = pure->critical_pressure.value,
        .omega = pure->acentric.value,
        .tait = 0.0861488 + 0.0344483 * pure->acentric.value,
    };
    return &fluid->head;
}

static size_t at_t_size(const struct fluid *fluid)
{
    (void)fluid;
    return sizeof(struct poynting_at_t);
}

/* ---- a branch ---------------------------------------------------------------------------------------------------- */

/* What one branch has at a pressure: ln f with its derivatives at constant pressure, volume, and how that yields. */
struct at_pressure {
    struct virial_curve ln_f, volume;
    double volume_slope; /* dv/dp, m3/(mol Pa) */
};

static struct virial_curve by_RT(struct virial_curve a, double T)
{
    return times(a, power((struct virial_curve){GAS_CONSTANT * T, GAS_CONSTANT, 0.0}, -1.0));
}

static enum answer vapour_at(const struct poynting_at_t *at, double p, struct at_pressure *out)
{
    const struct poynting *fluid = poynting_of(at->head.fluid);
    const double T = at->head.temperature;
    if (p > LARGEST_PRESSURE * T * fluid->pc / fluid->Tc) {
        return at->has_liquid ? ANSWER_NO_SUCH_ROOT : ANSWER_OUT_OF_RANGE; /* the liquid is then what there is */
    }
    out->ln_f = add(constant(log(p)), p, by_RT(at->B, T));
    out->volume = add((struct virial_curve){GAS_CONSTANT * T / p, GAS_CONSTANT / p, 0.0}, 1.0, at->B);
    out->volume_slope = -GAS_CONSTANT * T / (p * p);
    return out->volume.value > 0.0 ? ANSWER_OK : ANSWER_OUT_OF_RANGE;
}

/* The Poynting integral over v_sat: (1 + c) (p - p_sat) - c (beta + p) ln w, w = (beta + p) / (beta + p_sat). */
static enum answer liquid_at(const struct poynting_at_t *at, double p, struct at_pressure *out)
{
    const double T = at->head.temperature, c = poynting_of(at->head.fluid)->tait;
    if (!at->has_liquid || !(at->beta.value + p > 0.0)) {
        return ANSWER_NO_SUCH_ROOT;
    }
    const struct virial_curve above = add(at->beta, 1.0, constant(p)), below = add(at->beta, 1.0, at->psat);
    const struct virial_curve ln_w = logarithm(times(above, power(below, -1.0)));
    const struct virial_curve compressed = add(constant(1.0), -c, ln_w);
    if (!(compressed.value > LEAST_COMPRESSED)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const struct virial_curve rise = add(constant(p), -1.0, at->psat);
    const struct virial_curve integral = times(at->vsat, add(times(constant(1.0 + c), rise), -c, times(above, ln_w)));
    const struct virial_curve ln_phi_sat = by_RT(times(at->B, at->psat), T);
    out->ln_f = add(add(at->ln_psat, 1.0, ln_phi_sat), 1.0, by_RT(integral, T));
    out->volume = times(at->vsat, compressed);
    out->volume_slope = -at->vsat.value * c / above.value;
    return ANSWER_OK;
}

static enum answer branch_at(const struct poynting_at_t *at, double p, enum branch branch, struct at_pressure *out)
{
    const bool is_liquid = branch == BRANCH_LIQUID || (branch == BRANCH_STABLE && at->has_liquid && p > at->psat.value);
    return is_liquid ? liquid_at(at, p, out) : vapour_at(at, p, out);
}

static enum answer tp(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                      struct explicit_phase *out)
{
    const double T = at_t->temperature, RT = GAS_CONSTANT * T;
    struct at_pressure found;
    const enum answer answer = branch_at(at_of(at_t), pressure, branch, &found);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const double g = found.ln_f.value - log(pressure);
    out->Z = pressure * found.volume.value / RT;
    out->roots = 1;
    out->has_slopes = true;
    out->compliance = -pressure * pressure / RT * found.volume_slope;
    out->Z_ln_t = pressure / RT * (T * found.volume.t - found.volume.value);
    out->residual_gibbs_rt = g;
    out->residual_enthalpy_rt = -T * found.ln_f.t;
    out->residual_heat_capacity_r = -2.0 * T * found.ln_f.t - T * T * found.ln_f.tt;
    if (out->ln_phi != NULL) {
        out->ln_phi[0] = g;
    }
    if (out->dln_phi_dp != NULL) {
        out->dln_phi_dp[0] = found.volume.value / RT - 1.0 / pressure;
    }
    if (out->dln_phi_dt != NULL) {
        out->dln_phi_dt[0] = found.ln_f.t;
    }
    if (out->dln_phi_dn != NULL) {
        out->dln_phi_dn[0] = 0.0; /* of a pure substance ln phi does not depend on its amount */
    }
    (void)n;
    return ANSWER_OK;
}

/* ---- limits ------------------------------------------------------------------------------------------------------ */

static double smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    const struct poynting_at_t *at = at_of(at_t);
    return at->has_liquid ? n[0] * LEAST_COMPRESSED * at->vsat.value : 0.0;
}

static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    (void)fluid;
    (void)temperature;
    (void)pressure;
    return (struct range_note){.side = RANGE_INSIDE};
}

static enum answer critical(const struct fluid *fluid, struct critical_point *out)
{
    const struct poynting *of = poynting_of(fluid);
    *out = (struct critical_point){.temperature = of->Tc,
                                   .pressure = of->pc,
                                   .molar_volume = rackett_constant(of) * GAS_CONSTANT * of->Tc / of->pc};
    return ANSWER_OK;
}

static enum answer saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    const struct poynting_at_t *at = at_of(at_t);
    struct at_pressure vapour;
    if (!at->has_liquid) {
        return ANSWER_NO_SUCH_ROOT;
    }
    const enum answer answer = vapour_at(at, at->psat.value, &vapour);
    *out = (struct saturation_start){
        .pressure = at->psat.value, .vapour_volume = vapour.volume.value, .liquid_volume = at->vsat.value};
    return answer;
}

/* ---- for a reader with a calculator ------------------------------------------------------------------------------ */

static void tell_liquid(const struct poynting_at_t *at, double p, struct explanation *out)
{
    const struct poynting *fluid = poynting_of(at->head.fluid);
    explanation_put(out, "v_sat", "volume of the saturated liquid, Rackett", NULL, "m3/mol", at->vsat.value);
    explanation_put(out, "beta", "of Tait's equation", NULL, "Pa", at->beta.value);
    explanation_put(out, "c", "likewise", "0.0861488 + 0.0344483 * omega", "1", fluid->tait);
    explanation_put(out, "p", "pressure, of v = v_sat (1 - c ln((beta + p) / (beta + p_sat)))",
                    "(beta + p_sat) * exp((1 - v / v_sat) / c) - beta", "Pa", p);
}

static void tell_liquid_fugacity(const struct poynting_at_t *at, double p, double ln_phi, struct explanation *out)
{
    const double RT = GAS_CONSTANT * at->head.temperature, ps = at->psat.value, c = poynting_of(at->head.fluid)->tait;
    const double w = (at->beta.value + p) / (at->beta.value + ps);
    const double integral = at->vsat.value * ((1.0 + c) * (p - ps) - c * (at->beta.value + p) * log(w));
    explanation_put(out, "ln_phi_sat", "of the saturated vapour", "B * p_sat / (R * T)", "1", at->B.value * ps / RT);
    explanation_put(out, "w", "Tait's ratio", "(beta + p) / (beta + p_sat)", "1", w);
    explanation_put(out, "I", "integral of v dp from p_sat to p",
                    "v_sat * ((1 + c) * (p - p_sat) - c * (beta + p) * ln(w))", "J/mol", integral);
    explanation_put(out, "P", "Poynting factor", "exp(I / (R * T))", "1", exp(integral / RT));
    explanation_put(out, "ln_phi", "ln fugacity coefficient", "ln(p_sat / p) + ln_phi_sat + ln(P)", "1", ln_phi);
}

static enum answer explain(const struct fluid_at_t *at_t, double molar_volume, bool with_fugacity,
                           struct explanation *out)
{
    const struct poynting_at_t *at = at_of(at_t);
    const struct poynting *fluid = poynting_of(at_t->fluid);
    const double one = 1.0;
    double ln_phi = 0.0;
    struct phase phase = {.ln_phi = &ln_phi};
    const enum answer answer = phase_tv(at_t, molar_volume, &one, PHASE_LN_PHI, &phase);
    if (answer != ANSWER_OK) {
        return answer;
    }
    explanation_put(out, "R", "gas constant", NULL, "J/mol/K", GAS_CONSTANT);
    explanation_put(out, "T", "temperature", NULL, "K", at_t->temperature);
    explanation_put(out, "v", "molar volume", NULL, "m3/mol", molar_volume);
    explanation_put(out, "omega", "acentric factor", NULL, "1", fluid->omega);
    explanation_put(out, "B", "second virial coefficient, Tsonopoulos", NULL, "m3/mol", at->B.value);
    if (at->has_liquid) {
        explanation_put(out, "p_sat", "vapour pressure, Lee and Kesler", NULL, "Pa", at->psat.value);
    }
    if (at->has_liquid && molar_volume <= at->vsat.value * (1.0 + 1e-9)) {
        tell_liquid(at, phase.pressure, out);
        if (with_fugacity) {
            tell_liquid_fugacity(at, phase.pressure, ln_phi, out);
        }
        return ANSWER_OK;
    }
    explanation_put(out, "p", "pressure, of v = R T / p + B", "R * T / (v - B)", "Pa", phase.pressure);
    if (with_fugacity) {
        explanation_put(out, "ln_phi", "ln fugacity coefficient", "B * p / (R * T)", "1", ln_phi);
    }
    return ANSWER_OK;
}

const struct fluid_ops poynting_ops = {
    .name = "poynting",
    .title = "vapour pressure, saturation fugacity and Poynting factor",
    .citation =
        "vapour pressure: B. I. Lee, M. G. Kesler, AIChE J. 21 (1975) 510; B: C. Tsonopoulos, AIChE J. 20 (1974) "
        "263; liquid: H. G. Rackett, Z_RA by T. Yamada, R. D. Gunn, J. Chem. Eng. Data 18 (1973) 234; G. H. "
        "Thomson, K. R. Brobst, R. W. Hankinson, AIChE J. 28 (1982) 671",
    .validity =
        "pure gases: vapour to p = (T / 2) pc / Tc, liquid as long as the vapour pressure lies below that, near Tr "
        "= 0.95; not for gases with hydrogen bonds, nor for helium, hydrogen and neon",
    .form = FLUID_FROM_TP,
    .capabilities = CAN_LIQUID | CAN_CALORIC,
    .create = create,
    .at_t_size = at_t_size,
    .set_t = set_t,
    .tp = tp,
    .smallest_volume = smallest_volume,
    .range = range,
    .critical = critical,
    .saturation_start = saturation_start,
    .explain = explain,
};
