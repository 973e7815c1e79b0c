/* What temperature does to a component's attraction and covolume in the cubic equations. */
#include "fluid/cubic_internal.h"

#include <math.h>

/* sqrt(alpha) = 1 + m (1 - sqrt(Tr)): Soave, Chem. Eng. Sci. 27 (1972) 1197. */
static struct cubic_curve soave(const struct cubic_component *component, double T, double root_Tr)
{
    double r = 1.0 + component->m * (1.0 - root_Tr);
    double r_t = -component->m * root_Tr / (2.0 * T);
    if (r < 0.0) {
        r = -r;
        r_t = -r_t;
    }
    return (struct cubic_curve){.value = r, .t = r_t, .tt = -r_t / (2.0 * T)};
}

/* sqrt(alpha) = Tr^(-1/4): Redlich and Kwong, Chem. Rev. 44 (1949) 233. */
static struct cubic_curve redlich_kwong(double T, double root_Tr)
{
    const double r = 1.0 / sqrt(root_Tr);
    return (struct cubic_curve){.value = r, .t = -r / (4.0 * T), .tt = 5.0 * r / (16.0 * T * T)};
}

/* ln alpha = N (M - 1) ln Tr + L (1 - Tr^(N M)): Twu, Bluck, Cunningham and Coon, Fluid Phase Equilib. 69 (1991) 33. */
static struct cubic_curve twu(const struct cubic_component *component, double T)
{
    const double ln_Tr = log(T / component->critical_temperature);
    const double NM = component->N * component->M, slope = component->N * (component->M - 1.0);
    const double power = component->L * exp(NM * ln_Tr);
    const double r = exp(0.5 * (slope * ln_Tr + component->L - power));
    const double h_t = (slope - NM * power) / (2.0 * T); /* of ln sqrt(alpha) */
    const double h_tt = -(slope + NM * (NM - 1.0) * power) / (2.0 * T * T);
    return (struct cubic_curve){.value = r, .t = r * h_t, .tt = r * (h_t * h_t + h_tt)};
}

static struct cubic_curve root_of_alpha(const struct cubic_equation *equation, const struct cubic_component *component,
                                        double T, double root_T)
{
    switch (equation->alpha) {
    case ALPHA_REDLICH_KWONG:
        return redlich_kwong(T, root_T / component->root_critical);
    case ALPHA_SOAVE:
        return soave(component, T, root_T / component->root_critical);
    case ALPHA_TWU:
        return twu(component, T);
    case ALPHA_ONE:
        break;
    }
    return (struct cubic_curve){.value = 1.0};
}

/* sqrt(a / (R T)) = sqrt(a_c / R) r / sqrt(T) with r = sqrt(alpha). */
struct cubic_curve cubic_root_of_a(const struct cubic_equation *equation, const struct cubic_component *component,
                                   double temperature, double root_temperature)
{
    const double T = temperature;
    const struct cubic_curve r = root_of_alpha(equation, component, T, root_temperature);
    const double scale = component->root_a / root_temperature;
    return (struct cubic_curve){
        .value = scale * r.value,
        .t = scale * (r.t - r.value / (2.0 * T)),
        .tt = scale * (r.tt - r.t / T + 3.0 * r.value / (4.0 * T * T)),
    };
}

/* b(T) = b ((1 + A / (T + B)) / (1 + A / (Tc + B)))^3: Aasen et al., Fluid Phase Equilib. 524 (2020) 112790. */
struct cubic_curve cubic_covolume(const struct cubic_equation *equation, const struct cubic_component *component,
                                  double temperature)
{
    if (!equation->has_moving_covolume) {
        return (struct cubic_curve){.value = component->b};
    }
    const double A = component->set->covolume_A, offset = component->set->covolume_B;
    const double x = temperature + offset, swelling = 1.0 + A / x;
    const double unit = 1.0 + A / (component->critical_temperature + offset);
    const double scale = component->b / (unit * unit * unit);
    const double s_t = -A / (x * x), s_tt = 2.0 * A / (x * x * x);
    return (struct cubic_curve){
        .value = scale * swelling * swelling * swelling,
        .t = scale * 3.0 * swelling * swelling * s_t,
        .tt = scale * 3.0 * swelling * (2.0 * s_t * s_t + swelling * s_tt),
    };
}
