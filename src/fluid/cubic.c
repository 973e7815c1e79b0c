/* The cubic equations of state, for pure fluids and for mixtures by the one-fluid rules
 *   a = sum_i sum_j x_i x_j sqrt(a_i a_j) (1 - k_ij),   b = sum_i x_i b_i.
 *
 * A row at the end of this file is one equation: its form (the denominator's constants) and its slope m(omega) in
 * Soave's  sqrt(alpha) = 1 + m (1 - sqrt(T / Tc)).
 * Derivatives follow Michelsen and Mollerup, Thermodynamic Models, 2nd ed., chapter 3, with A = n^2 a / (R T) in
 * place of their D / T.
 */
#include "fluid/cubic_internal.h"
#include "fluid/methods_internal.h"

#include <math.h>

/* One equation of state. */
struct cubic_equation {
    const struct cubic_form *form;
    double (*slope)(double acentric);
    const char *slope_formula; /* the same for readers */
};

struct cubic_component {
    double critical_temperature; /* K */
    double a_critical;           /* a(Tc) / R, K m3/mol */
    double b;                    /* m3/mol */
    double m;                    /* 1 */
};

struct cubic_fluid {
    struct fluid head;
    const struct cubic_equation *equation;
    struct cubic_component component[];
};

/* sqrt(a_i / (R T)) of one component, with its first and second temperature derivative. */
struct root_of_a {
    double value, t, tt;
};

/* pair[i, j] is a_ij / (R T) in m3/mol. The arrays follow the roots in the same block. */
struct cubic_at_t {
    struct fluid_at_t head;
    double *pair, *pair_t, *pair_tt; /* [count * count] each */
    struct root_of_a root[];         /* [count] */
};

/* ---- creating -------------------------------------------------------------------------------------------------- */

static struct cubic_component component_of(const struct cubic_equation *equation, const struct pure_spec *pure)
{
    const double Tc = pure->critical_temperature.value;
    const double Tc_over_pc = Tc / pure->critical_pressure.value;
    return (struct cubic_component){
        .critical_temperature = Tc,
        .a_critical = equation->form->omega_a * GAS_CONSTANT * Tc * Tc_over_pc,
        .b = equation->form->omega_b * GAS_CONSTANT * Tc_over_pc,
        .m = equation->slope(pure->acentric.value),
    };
}

static enum fluid_lack lack_of(const struct pure_spec *pure)
{
    if (!pure->critical_temperature.given || !pure->critical_pressure.given) {
        return LACK_CRITICAL_POINT;
    }
    return pure->acentric.given ? LACK_NOTHING : LACK_ACENTRIC;
}

static struct fluid *create(const struct fluid_ops *ops, const struct cubic_equation *equation,
                            const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    for (size_t i = 0; i < spec->count; i++) {
        lack->lack = lack_of(spec->pure[i]);
        lack->component = i;
        if (lack->lack != LACK_NOTHING) {
            return NULL;
        }
    }
    struct cubic_fluid *cubic = arena_alloc(arena, 1, sizeof *cubic + spec->count * sizeof *cubic->component);
    cubic->head = (struct fluid){.ops = ops, .spec = spec, .count = spec->count, .gas_constant = GAS_CONSTANT};
    cubic->equation = equation;
    for (size_t i = 0; i < spec->count; i++) {
        cubic->component[i] = component_of(equation, spec->pure[i]);
    }
    return &cubic->head;
}

/* ---- at one temperature ---------------------------------------------------------------------------------------- */

static const struct cubic_fluid *fluid_of(const struct fluid_at_t *at_t)
{
    return (const struct cubic_fluid *)at_t->fluid;
}

static size_t at_t_size(const struct fluid *fluid)
{
    const size_t count = fluid->count;
    return sizeof(struct cubic_at_t) + count * sizeof(struct root_of_a) + 3 * count * count * sizeof(double);
}

/* sqrt(a / (R T)) = sqrt(a_c / R) r / sqrt(T) with r = sqrt(alpha) by Soave. Beyond the temperature where r passes
 * through zero alpha rises again, as its square does: the root is then -r, never negative. */
static struct root_of_a root_of_a_at(const struct cubic_component *component, double T)
{
    const double root_Tr = sqrt(T / component->critical_temperature);
    double r = 1.0 + component->m * (1.0 - root_Tr);
    double r_t = -component->m * root_Tr / (2.0 * T);
    if (r < 0.0) {
        r = -r;
        r_t = -r_t;
    }
    const double r_tt = -r_t / (2.0 * T);
    const double scale = sqrt(component->a_critical / T);
    return (struct root_of_a){
        .value = scale * r,
        .t = scale * (r_t - r / (2.0 * T)),
        .tt = scale * (r_tt - r_t / T + 3.0 * r / (4.0 * T * T)),
    };
}

static enum answer set_t(struct fluid_at_t *at_t)
{
    const struct cubic_fluid *cubic = fluid_of(at_t);
    struct cubic_at_t *at = (struct cubic_at_t *)at_t;
    const size_t count = at_t->fluid->count;
    const double *kij = at_t->fluid->spec->kij;
    at->pair = (double *)(at->root + count);
    at->pair_t = at->pair + count * count;
    at->pair_tt = at->pair_t + count * count;
    for (size_t i = 0; i < count; i++) {
        at->root[i] = root_of_a_at(&cubic->component[i], at_t->temperature);
    }
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            const struct root_of_a a = at->root[i], b = at->root[j];
            const size_t ij = i * count + j;
            const double factor = kij == NULL ? 1.0 : 1.0 - kij[ij];
            at->pair[ij] = factor * a.value * b.value;
            at->pair_t[ij] = factor * (a.t * b.value + a.value * b.t);
            at->pair_tt[ij] = factor * (a.tt * b.value + 2.0 * a.t * b.t + a.value * b.tt);
        }
    }
    return ANSWER_OK;
}

/* ---- the mixture as one fluid ---------------------------------------------------------------------------------- */

/* Sum over j of n_j pair[i, j]. */
static double row_sum(const double *pair, size_t count, size_t i, const double n[])
{
    double sum = 0.0;
    for (size_t j = 0; j < count; j++) {
        sum += n[j] * pair[i * count + j];
    }
    return sum;
}

/* Sum over i and j of n_i n_j pair[i, j]. */
static double double_sum(const double *pair, size_t count, const double n[])
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i] * row_sum(pair, count, i, n);
    }
    return sum;
}

static double total(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

static double covolume(const struct fluid_at_t *at_t, const double n[])
{
    const struct cubic_fluid *cubic = fluid_of(at_t);
    double B = 0.0;
    for (size_t i = 0; i < at_t->fluid->count; i++) {
        B += n[i] * cubic->component[i].b;
    }
    return B;
}

/* ---- residual Helmholtz energy --------------------------------------------------------------------------------- */

/* F = -n g(V, B) - A f(V, B), the repulsive and the attractive part, with
 *   g = ln(1 - B / V),  f = ln((V + delta1 B) / (V + delta2 B)) / ((delta1 - delta2) B). */
struct parts {
    double n, A, B;
    double g, g_V, g_B, g_VV, g_VB, g_BB;
    double f, f_V, f_B, f_VV, f_VB, f_BB;
};

static void set_repulsion(struct parts *p, double V)
{
    const double B = p->B, free = V - B;
    p->g = log1p(-B / V);
    p->g_V = B / (V * free);
    p->g_B = -1.0 / free;
    p->g_VV = -B * (V + free) / (V * V * free * free);
    p->g_VB = 1.0 / (free * free);
    p->g_BB = -1.0 / (free * free);
}

/* f is homogeneous of degree -1 in V and B, which gives f_B and f_BB from the other derivatives. Below B / V = 1e-5
 * or so f_BB loses digits, but there it multiplies terms that no longer count. */
static void set_attraction(struct parts *p, const struct cubic_form *form, double V)
{
    const double B = p->B, span = form->delta1 - form->delta2;
    const double first = V + form->delta1 * B, second = V + form->delta2 * B;
    const double product = first * second;
    const double product_V = first + second;
    const double product_B = form->delta1 * second + form->delta2 * first;
    p->f = log1p(span * B / second) / (span * B);
    p->f_V = -1.0 / product;
    p->f_VV = product_V / (product * product);
    p->f_VB = product_B / (product * product);
    p->f_B = -(p->f + V * p->f_V) / B;
    p->f_BB = -(2.0 * p->f_B + V * p->f_VB) / B;
}

static void set_composition_derivatives(const struct cubic_at_t *at, const struct parts *p, const double n[],
                                        unsigned want, struct helmholtz *out)
{
    const struct cubic_fluid *cubic = fluid_of(&at->head);
    const size_t count = at->head.fluid->count;
    for (size_t i = 0; i < count; i++) {
        const double b_i = cubic->component[i].b;
        const double A_i = 2.0 * row_sum(at->pair, count, i, n);
        if (want & WANT_F_N) {
            out->F_n[i] = -p->g - A_i * p->f - (p->n * p->g_B + p->A * p->f_B) * b_i;
        }
        if (want & WANT_F_VN) {
            out->F_Vn[i] = -p->g_V - A_i * p->f_V - (p->n * p->g_VB + p->A * p->f_VB) * b_i;
        }
        if (want & WANT_F_NN) {
            out->F_nn[i * count + i] = A_i; /* lent to set_second_composition_derivatives */
        }
    }
}

/* The diagonal of F_nn arrives holding dA/dn_i and is overwritten last. */
static void set_second_composition_derivatives(const struct cubic_at_t *at, const struct parts *p, double *F_nn)
{
    const struct cubic_fluid *cubic = fluid_of(&at->head);
    const size_t count = at->head.fluid->count;
    const double curvature = p->n * p->g_BB + p->A * p->f_BB;
    for (size_t distance = count; distance-- > 0;) {
        for (size_t i = 0; i + distance < count; i++) {
            const size_t j = i + distance;
            const double b_i = cubic->component[i].b, b_j = cubic->component[j].b;
            const double A_i = F_nn[i * count + i], A_j = F_nn[j * count + j];
            const double value = -p->g_B * (b_i + b_j) - 2.0 * at->pair[i * count + j] * p->f -
                                 (A_i * b_j + A_j * b_i) * p->f_B - curvature * b_i * b_j;
            F_nn[i * count + j] = F_nn[j * count + i] = value;
        }
    }
}

static void set_temperature_derivatives(const struct cubic_at_t *at, const struct parts *p, const double n[],
                                        unsigned want, struct helmholtz *out)
{
    const struct cubic_fluid *cubic = fluid_of(&at->head);
    const size_t count = at->head.fluid->count;
    const double A_T = double_sum(at->pair_t, count, n);
    if (want & WANT_F_T) {
        out->F_T = -A_T * p->f;
        out->F_TV = -A_T * p->f_V;
    }
    if (want & WANT_F_TT) {
        out->F_TT = -double_sum(at->pair_tt, count, n) * p->f;
    }
    if (want & WANT_F_TN) {
        for (size_t i = 0; i < count; i++) {
            out->F_Tn[i] = -2.0 * row_sum(at->pair_t, count, i, n) * p->f - A_T * p->f_B * cubic->component[i].b;
        }
    }
}

static enum answer tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                      struct helmholtz *out)
{
    const struct cubic_at_t *at = (const struct cubic_at_t *)at_t;
    const size_t count = at_t->fluid->count;
    struct parts p = {.n = total(n, count), .A = double_sum(at->pair, count, n), .B = covolume(at_t, n)};
    if (!(volume > p.B)) {
        return ANSWER_OUT_OF_RANGE;
    }
    set_repulsion(&p, volume);
    set_attraction(&p, fluid_of(at_t)->equation->form, volume);
    out->F = -p.n * p.g - p.A * p.f;
    out->F_V = -p.n * p.g_V - p.A * p.f_V;
    out->F_VV = -p.n * p.g_VV - p.A * p.f_VV;
    if (want & (WANT_F_N | WANT_F_VN | WANT_F_NN)) {
        set_composition_derivatives(at, &p, n, want, out);
    }
    if (want & WANT_F_NN) {
        set_second_composition_derivatives(at, &p, out->F_nn);
    }
    if (want & (WANT_F_T | WANT_F_TT | WANT_F_TN)) {
        set_temperature_derivatives(at, &p, n, want, out);
    }
    return ANSWER_OK;
}

/* ---- volumes, limits, starting values -------------------------------------------------------------------------- */

static enum answer volume_at(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                             double *volume, int *roots)
{
    const struct cubic_at_t *at = (const struct cubic_at_t *)at_t;
    const size_t count = at_t->fluid->count;
    const double amount = total(n, count), B = covolume(at_t, n);
    const double theta = double_sum(at->pair, count, n) / (amount * B);
    const double pi = pressure * B / (amount * at_t->fluid->gas_constant * at_t->temperature);
    double y;
    const enum answer answer = cubic_packing(fluid_of(at_t)->equation->form, theta, pi, branch, &y, roots);
    if (answer == ANSWER_OK) {
        *volume = B / y;
    }
    return answer;
}

static struct range_note range(const struct fluid *fluid, double temperature, double pressure)
{
    (void)fluid;
    (void)temperature;
    (void)pressure;
    return (struct range_note){.side = RANGE_INSIDE}; /* none of the papers sets limits */
}

static enum answer critical(const struct fluid *fluid, struct critical_point *out)
{
    const struct pure_spec *pure = fluid->spec->pure[0];
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    const struct cubic_form *form = ((const struct cubic_fluid *)fluid)->equation->form;
    out->temperature = pure->critical_temperature.value;
    out->pressure = pure->critical_pressure.value;
    out->molar_volume =
        cubic_critical_compressibility(form) * fluid->gas_constant * out->temperature / out->pressure;
    return ANSWER_OK;
}

static enum answer saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    const struct fluid *fluid = at_t->fluid;
    const struct cubic_form *form = fluid_of(at_t)->equation->form;
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    const double b = fluid_of(at_t)->component[0].b;
    const double theta = ((const struct cubic_at_t *)at_t)->pair[0] / b;
    if (!(theta > cubic_critical_theta(form))) {
        return ANSWER_NO_SUCH_ROOT;
    }
    double vapour, liquid;
    cubic_saturation_guess(form, theta, &vapour, &liquid);
    out->vapour_volume = b / vapour;
    out->liquid_volume = b / liquid;
    out->pressure = cubic_reduced_pressure(form, theta, vapour) * fluid->gas_constant * at_t->temperature / b;
    return ANSWER_OK;
}

struct cubic_parameters cubic_parameters_at(const struct fluid_at_t *at_t)
{
    const struct cubic_fluid *cubic = fluid_of(at_t);
    const struct cubic_component *component = &cubic->component[0];
    const double R = at_t->fluid->gas_constant;
    return (struct cubic_parameters){
        .form = cubic->equation->form,
        .slope_formula = cubic->equation->slope_formula,
        .a_critical = component->a_critical * R,
        .a = ((const struct cubic_at_t *)at_t)->pair[0] * R * at_t->temperature,
        .b = component->b,
        .m = component->m,
    };
}

/* ---- the equations --------------------------------------------------------------------------------------------- */

#define SQUARE_ROOT_OF_2 1.41421356237309505
#define CUBE_ROOT_OF_2   1.25992104989487316

/* Peng and Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59: denominator v (v + b) + b (v - b). The omegas are the
 * critical conditions solved to 17 digits; the paper rounds them to 0.45724 and 0.07780. The saturation fits of both
 * forms are ours, to equal fugacities solved with 40 digits. */
static const struct cubic_form PENG_ROBINSON_FORM = {
    .delta1 = 1.0 + SQUARE_ROOT_OF_2,
    .delta2 = 1.0 - SQUARE_ROOT_OF_2,
    .omega_a = 0.45723552892138219,
    .omega_b = 0.077796073903888456,
    .liquid = {2.50614411, 1.35556063, -0.693574821, -0.301563134, -1.43020855, 4.34235514, -5.44546099, 3.58949935,
               -0.971370145},
    .vapour = {-2.50621681, -2.81887722, 2.35397544, -9.82493401, 53.0467219, -139.289998, 198.796194, -145.356307,
               41.938622},
};

/* Soave, Chem. Eng. Sci. 27 (1972) 1197: Redlich and Kwong's denominator v (v + b), with their exact omegas. */
static const struct cubic_form REDLICH_KWONG_FORM = {
    .delta1 = 1.0,
    .delta2 = 0.0,
    .omega_a = 1.0 / (9.0 * (CUBE_ROOT_OF_2 - 1.0)),
    .omega_b = (CUBE_ROOT_OF_2 - 1.0) / 3.0,
    .liquid = {2.25990435, 0.985264744, -0.390438741, 0.476616382, -2.45925427, 5.77973797, -7.61709178, 5.22047326,
               -1.40784378},
    .vapour = {-2.25946953, -2.63732606, 2.57997351, -14.1677606, 68.1064649, -168.101449, 229.227762, -161.04617,
               44.878542},
};

/* Peng and Robinson 1976, eq. 18. */
static double peng_robinson_slope(double acentric)
{
    return 0.37464 + acentric * (1.54226 - 0.26992 * acentric);
}

/* Soave 1972, eq. 15. */
static double soave_slope(double acentric)
{
    return 0.480 + acentric * (1.574 - 0.176 * acentric);
}

static const struct cubic_equation PENG_ROBINSON = {
    &PENG_ROBINSON_FORM,
    peng_robinson_slope,
    "0.37464 + 1.54226 * omega - 0.26992 * omega ^ 2",
};
static const struct cubic_equation SOAVE_REDLICH_KWONG = {
    &REDLICH_KWONG_FORM,
    soave_slope,
    "0.480 + 1.574 * omega - 0.176 * omega ^ 2",
};

static struct fluid *create_peng_robinson(const struct fluid_spec *spec, struct arena *arena,
                                          struct fluid_lack_report *lack)
{
    return create(&peng_robinson_ops, &PENG_ROBINSON, spec, arena, lack);
}

static struct fluid *create_soave_redlich_kwong(const struct fluid_spec *spec, struct arena *arena,
                                                struct fluid_lack_report *lack)
{
    return create(&soave_redlich_kwong_ops, &SOAVE_REDLICH_KWONG, spec, arena, lack);
}

/* The members of struct fluid_ops that all cubic equations share. */
#define CUBIC_OPS                                                                                                      \
    .form = FLUID_FROM_TV, .capabilities = CAN_LIQUID | CAN_MIXTURE | CAN_CALORIC, .at_t_size = at_t_size,             \
    .set_t = set_t, .tv = tv, .volume = volume_at, .smallest_volume = covolume, .range = range,                        \
    .critical = critical, .saturation_start = saturation_start, .explain = cubic_explain

const struct fluid_ops peng_robinson_ops = {
    .name = "peng-robinson",
    .title = "Peng and Robinson (1976)",
    .create = create_peng_robinson,
    CUBIC_OPS,
};

const struct fluid_ops soave_redlich_kwong_ops = {
    .name = "soave-redlich-kwong",
    .title = "Redlich and Kwong, by Soave (1972)",
    .create = create_soave_redlich_kwong,
    CUBIC_OPS,
};
