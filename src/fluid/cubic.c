/* The cubic equations of state, for pure fluids and for mixtures by the one-fluid rules
 *   a = sum_i sum_j x_i x_j a_ij,   b = sum_i x_i b_i,   c = sum_i x_i c_i.
 *
 * The equations themselves are rows of cubic_equations.c.
 */
#include "fluid/cubic_internal.h"

#include <math.h>
#include <string.h>

/* ---- creating -------------------------------------------------------------------------------------------------- */

static const struct cubic_set *set_of(const struct cubic_equation *equation, const struct pure_spec *pure)
{
    for (size_t k = 0; k < pure->cubic_set_count; k++) {
        if (strcmp(pure->cubic_sets[k].method, equation->method) == 0) {
            return &pure->cubic_sets[k];
        }
    }
    return NULL;
}

/* The set's own critical constants where it has them: an alpha is fitted with them. */
static struct optional first_given(const struct optional *own, struct optional common)
{
    return own != NULL && own->given ? *own : common;
}

/* What of the component the equation needs and does not find. */
static enum fluid_lack take_component(const struct cubic_equation *equation, const struct pure_spec *pure,
                                      struct cubic_component *out)
{
    const struct cubic_set *set = set_of(equation, pure);
    const struct optional Tc = first_given(set == NULL ? NULL : &set->critical_temperature, pure->critical_temperature);
    const struct optional pc = first_given(set == NULL ? NULL : &set->critical_pressure, pure->critical_pressure);
    if (equation->needs_set && (set == NULL || !set->has_twu)) {
        return LACK_PARAMETERS;
    }
    if (!Tc.given || !pc.given) {
        return LACK_CRITICAL_POINT;
    }
    if (equation->slope != NULL && !pure->acentric.given) {
        return LACK_ACENTRIC;
    }
    const double Tc_over_pc = Tc.value / pc.value;
    *out = (struct cubic_component){
        .set = set,
        .critical_temperature = Tc.value,
        .critical_pressure = pc.value,
        .a_critical = equation->form->omega_a * GAS_CONSTANT * Tc.value * Tc_over_pc,
        .root_critical = sqrt(Tc.value),
        .b = equation->form->omega_b * GAS_CONSTANT * Tc_over_pc,
        .m = equation->slope == NULL ? 0.0 : equation->slope(pure->acentric.value),
    };
    out->root_a = sqrt(out->a_critical);
    if (equation->needs_set) {
        out->L = set->L;
        out->M = set->M;
        out->N = set->N;
    }
    return LACK_NOTHING;
}

struct fluid *cubic_create(const struct fluid_ops *ops, const struct cubic_equation *equation,
                           const struct fluid_spec *spec, struct arena *arena, struct fluid_lack_report *lack)
{
    struct cubic_fluid *cubic = arena_alloc(arena, 1, sizeof *cubic);
    struct cubic_component *component = arena_alloc(arena, spec->count, sizeof *component);
    double *b = arena_alloc(arena, spec->count, sizeof *b), *c = arena_alloc(arena, spec->count, sizeof *c);
    for (size_t i = 0; i < spec->count; i++) {
        lack->lack = take_component(equation, spec->pure[i], &component[i]);
        lack->component = i;
        if (lack->lack != LACK_NOTHING) {
            return NULL;
        }
        b[i] = component[i].b;
        c[i] = component[i].set == NULL ? 0.0 : component[i].set->shift;
    }
    *cubic = (struct cubic_fluid){
        .head = {.ops = ops, .spec = spec, .count = spec->count, .gas_constant = GAS_CONSTANT},
        .equation = equation,
        .component = component,
        .b = b,
        .c = c,
    };
    cubic_choose_pairs(cubic, arena);
    return &cubic->head;
}

/* ---- at one temperature ---------------------------------------------------------------------------------------- */

/* Vectors and matrices of the state, in the order in which set_t lays them out. */
enum { VECTORS = 10, MATRICES = 3 };

size_t cubic_at_t_size(const struct fluid *fluid)
{
    const struct cubic_fluid *cubic = (const struct cubic_fluid *)fluid;
    const size_t count = fluid->count;
    return sizeof(struct cubic_at_t) + sizeof(struct cubic_work) +
           (VECTORS * count + MATRICES * count * count + cubic->powers.count) * sizeof(double);
}

static double *lay_out(double **next, size_t count)
{
    double *here = *next;
    *next += count;
    return here;
}

static void place_arrays(struct cubic_at_t *at)
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    const size_t count = at->head.fluid->count;
    struct cubic_work *work = (struct cubic_work *)(at + 1);
    double *next = (double *)(work + 1);
    at->work = work;
    at->b = cubic->b;
    at->c = cubic->c;
    at->s = lay_out(&next, count);
    at->s_t = lay_out(&next, count);
    at->s_tt = lay_out(&next, count);
    at->moving_b = lay_out(&next, count);
    at->b_t = lay_out(&next, count);
    at->b_tt = lay_out(&next, count);
    work->A_n = lay_out(&next, count);
    work->A_Tn = lay_out(&next, count);
    work->B_n = lay_out(&next, count);
    work->B_Tn = lay_out(&next, count);
    at->pair = lay_out(&next, count * count);
    work->pair_t = lay_out(&next, count * count);
    work->pair_tt = lay_out(&next, count * count);
    at->power = lay_out(&next, cubic->powers.count);
}

static void set_covolumes(struct cubic_at_t *at)
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    for (size_t i = 0; i < at->head.fluid->count; i++) {
        const struct cubic_curve b = cubic_covolume(cubic->equation, &cubic->component[i], at->head.temperature);
        at->moving_b[i] = b.value;
        at->b_t[i] = b.t;
        at->b_tt[i] = b.tt;
    }
    at->b = at->moving_b;
}

enum answer cubic_set_t(struct fluid_at_t *at_t)
{
    const struct cubic_fluid *cubic = cubic_of(at_t);
    struct cubic_at_t *at = (struct cubic_at_t *)at_t;
    const double root_T = sqrt(at_t->temperature);
    place_arrays(at);
    for (size_t i = 0; i < at_t->fluid->count; i++) {
        const struct cubic_curve s = cubic_root_of_a(cubic->equation, &cubic->component[i], at_t->temperature, root_T);
        at->s[i] = s.value;
        at->s_t[i] = s.t;
        at->s_tt[i] = s.tt;
    }
    if (cubic->equation->has_moving_covolume) {
        set_covolumes(at);
    }
    cubic_set_pairs(at);
    return ANSWER_OK;
}

/* ---- volumes --------------------------------------------------------------------------------------------------- */

/* mol: sums of squares of smaller amounts are lost to underflow. */
#define SMALLEST_AMOUNT 1e-140

/* Whether anything is left of a volume beside the covolume, also after rounding. */
static bool is_free(const struct cubic_sums *sums, double volume)
{
    return sums->n > SMALLEST_AMOUNT && volume > 0.0 && volume - (sums->B - sums->C) > 0.0;
}

enum answer cubic_tv(const struct fluid_at_t *at_t, double volume, const double n[], unsigned want,
                     struct helmholtz *out)
{
    const struct cubic_at_t *at = cubic_at(at_t);
    const struct cubic_sums sums = cubic_sums_of(at, n);
    if (!is_free(&sums, volume)) {
        return ANSWER_OUT_OF_RANGE;
    }
    cubic_energy_at(at, &sums, volume, n, want, out);
    return ANSWER_OK;
}

static enum answer volume_from_sums(const struct fluid_at_t *at_t, const struct cubic_sums *sums, double pressure,
                                    enum branch branch, double *volume, int *roots)
{
    if (!(sums->n > SMALLEST_AMOUNT)) {
        return ANSWER_OUT_OF_RANGE;
    }
    const double theta = sums->A / (sums->n * sums->B);
    const double pi = pressure * sums->B / (sums->n * at_t->fluid->gas_constant * at_t->temperature);
    double y;
    const enum answer answer = cubic_packing(cubic_of(at_t)->equation->form, theta, pi, branch, &y, roots);
    if (answer != ANSWER_OK) {
        return answer;
    }
    if (!(y > 0.0)) {
        return ANSWER_OUT_OF_RANGE; /* a pressure so low that the reduced one is lost in rounding */
    }
    *volume = sums->B / y - sums->C;
    return is_free(sums, *volume) ? ANSWER_OK : ANSWER_OUT_OF_RANGE;
}

enum answer cubic_volume(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                         double *volume, int *roots)
{
    const struct cubic_sums sums = cubic_sums_of(cubic_at(at_t), n);
    return volume_from_sums(at_t, &sums, pressure, branch, volume, roots);
}

enum answer cubic_volume_and_tv(const struct fluid_at_t *at_t, double pressure, const double n[], enum branch branch,
                                unsigned want, double *volume, int *roots, struct helmholtz *out)
{
    const struct cubic_at_t *at = cubic_at(at_t);
    const struct cubic_sums sums = cubic_sums_of(at, n);
    const enum answer answer = volume_from_sums(at_t, &sums, pressure, branch, volume, roots);
    if (answer == ANSWER_OK) {
        cubic_energy_at(at, &sums, *volume, n, want, out);
    }
    return answer;
}

/* A translation may exceed the covolume in principle; no volume is negative all the same. */
double cubic_smallest_volume(const struct fluid_at_t *at_t, const double n[])
{
    return fmax(cubic_occupied_volume(cubic_at(at_t), n), 0.0);
}

/* ---- limits, starting values ----------------------------------------------------------------------------------- */

struct range_note cubic_range(const struct fluid *fluid, double temperature, double pressure)
{
    (void)fluid;
    (void)temperature;
    (void)pressure;
    return (struct range_note){.side = RANGE_INSIDE}; /* none of the papers sets limits */
}

enum answer cubic_critical(const struct fluid *fluid, struct critical_point *out)
{
    const struct cubic_fluid *cubic = (const struct cubic_fluid *)fluid;
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    out->temperature = cubic->component[0].critical_temperature;
    out->pressure = cubic->component[0].critical_pressure;
    const double Z = cubic_critical_compressibility(cubic->equation->form);
    out->molar_volume = Z * fluid->gas_constant * out->temperature / out->pressure - cubic->c[0];
    return ANSWER_OK;
}

enum answer cubic_saturation_start(const struct fluid_at_t *at_t, struct saturation_start *out)
{
    const struct fluid *fluid = at_t->fluid;
    const struct cubic_at_t *at = cubic_at(at_t);
    const struct cubic_form *form = cubic_of(at_t)->equation->form;
    if (fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    const double b = at->b[0], theta = at->pair[0] / b;
    if (!(theta > cubic_critical_theta(form))) {
        return ANSWER_NO_SUCH_ROOT;
    }
    double vapour, liquid;
    cubic_saturation_guess(form, theta, &vapour, &liquid);
    out->vapour_volume = b / vapour - at->c[0];
    out->liquid_volume = b / liquid - at->c[0];
    out->pressure = cubic_reduced_pressure(form, theta, vapour) * fluid->gas_constant * at_t->temperature / b;
    return ANSWER_OK;
}
