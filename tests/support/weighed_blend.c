#include "support/weighed_blend.h"

/* Invented weighings. Molar masses: IUPAC's standard atomic weights as of 2021, C 12.011, H 1.008, N 14.007. */
const double BLEND_VALUES[BLEND_INPUTS] = {0.077, 1.8186, 4e-4, 3e-6, 0.058124, 0.028014};
const double BLEND_SPREADS[BLEND_INPUTS] = {6e-6, 1.2e-4, 1e-4, 1.5e-6, 1.2e-6, 4e-7};

/* Amounts of n-butane and of all gas. */
static void amounts(const double x[], double n[2])
{
    const double p = x[BLEND_TRACE_IN_BUTANE], q = x[BLEND_TRACE_IN_NITROGEN];
    const double butane = x[BLEND_BUTANE_MOLAR_MASS], nitrogen = x[BLEND_NITROGEN_MOLAR_MASS];
    const double from_butane = x[BLEND_BUTANE_MASS] / ((1.0 - p) * butane + p * nitrogen);
    const double from_nitrogen = x[BLEND_NITROGEN_MASS] / (q * butane + (1.0 - q) * nitrogen);
    n[0] = (1.0 - p) * from_butane + q * from_nitrogen;
    n[1] = from_butane + from_nitrogen;
}

static enum model_answer evaluate(void *context, const double x[], double y[])
{
    (void)context;
    double n[2];
    if (!(x[BLEND_TRACE_IN_BUTANE] >= 0.0) || !(x[BLEND_TRACE_IN_NITROGEN] >= 0.0)) {
        return MODEL_IMPOSSIBLE;
    }
    amounts(x, n);
    y[BLEND_BUTANE] = n[0] / n[1];
    y[BLEND_NITROGEN] = 1.0 - n[0] / n[1];
    return MODEL_OK;
}

/* With a and b the amounts from the two parents, A and B their molar masses, N = a + b, x the fraction of n-butane:
 * dx = ((1 - p - x) da + (q - x) db - a dp + b dq) / N, where da = a (dm / m - dA / A) and
 * dA = (1 - p) dM_C + p dM_N + (M_N - M_C) dp; likewise db with dB = q dM_C + (1 - q) dM_N + (M_C - M_N) dq. */
static bool differentiate(void *context, const double x[], double derivatives[])
{
    (void)context;
    const double p = x[BLEND_TRACE_IN_BUTANE], q = x[BLEND_TRACE_IN_NITROGEN];
    const double heavy = x[BLEND_BUTANE_MOLAR_MASS], light = x[BLEND_NITROGEN_MOLAR_MASS];
    const double A = (1.0 - p) * heavy + p * light, B = q * heavy + (1.0 - q) * light;
    const double a = x[BLEND_BUTANE_MASS] / A, b = x[BLEND_NITROGEN_MASS] / B;
    double n[2];
    amounts(x, n);
    const double part = n[0] / n[1];
    const double by_a = (1.0 - p - part) / n[1], by_b = (q - part) / n[1];
    double d[BLEND_INPUTS];
    d[BLEND_BUTANE_MASS] = by_a / A;
    d[BLEND_NITROGEN_MASS] = by_b / B;
    d[BLEND_TRACE_IN_BUTANE] = by_a * -a / A * (light - heavy) - a / n[1];
    d[BLEND_TRACE_IN_NITROGEN] = by_b * -b / B * (heavy - light) + b / n[1];
    d[BLEND_BUTANE_MOLAR_MASS] = by_a * -a / A * (1.0 - p) + by_b * -b / B * q;
    d[BLEND_NITROGEN_MOLAR_MASS] = by_a * -a / A * p + by_b * -b / B * (1.0 - q);
    for (size_t i = 0; i < BLEND_INPUTS; i++) {
        derivatives[i * BLEND_OUTPUTS + BLEND_BUTANE] = d[i];
        derivatives[i * BLEND_OUTPUTS + BLEND_NITROGEN] = -d[i];
    }
    return true;
}

struct propagation_model weighed_blend(void)
{
    return (struct propagation_model){.input_count = BLEND_INPUTS,
                                      .output_count = BLEND_OUTPUTS,
                                      .values = BLEND_VALUES,
                                      .spreads = BLEND_SPREADS,
                                      .evaluate = evaluate,
                                      .differentiate = differentiate};
}
