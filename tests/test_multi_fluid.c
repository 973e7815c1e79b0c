/* The multi-fluid methods with the library's data: independent values, derivatives, roots, pairs. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "fluid/caloric.h"
#include "fluid/phase.h"
#include "support/measured_mixture.h"

#include "support/check.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

enum { MOST = 21 };

/* ---- independent values ---------------------------------------------------------------------------------------- */

struct independent {
    char method[32];
    double T, density, pressure;
    size_t count;
    const char *names[MOST];
    double x[MOST], ln_f[MOST];
};

/* Takes the line apart in place. */
static void read_independent(char *line, struct independent *out)
{
    char *rest = line, *field;
    *out = (struct independent){.count = 0};
    snprintf(out->method, sizeof out->method, "%s", strtok_r(rest, ",", &rest));
    out->T = strtod(strtok_r(NULL, ",", &rest), NULL);
    out->density = strtod(strtok_r(NULL, ",", &rest), NULL);
    out->pressure = strtod(strtok_r(NULL, ",", &rest), NULL);
    while ((field = strtok_r(NULL, ",", &rest)) != NULL) {
        assert_true(out->count < MOST);
        out->names[out->count] = field;
        out->x[out->count] = strtod(strtok_r(NULL, ",", &rest), NULL);
        out->ln_f[out->count++] = strtod(strtok_r(NULL, ",", &rest), NULL);
    }
}

static void check_independent(const struct independent *it, struct arena *arena)
{
    const struct measured_mixture m = measured_mixture_create(it->method, it->names, it->count, arena);
    struct phase *phase = phase_create(it->count, arena);
    char what[120];
    snprintf(what, sizeof what, "%s, %s and %s at %g K, independent evaluation", it->method, it->names[0], it->names[1],
             it->T);
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, it->T), ANSWER_OK);
    assert_int_equal(phase_tv(m.at_t, 1.0 / it->density, it->x, PHASE_LN_F, phase), ANSWER_OK);
    /* A pressure near zero in a stiff liquid is a small difference. */
    const double scale = fmax(fabs(it->pressure), 0.1 * it->density * 8.314 * it->T);
    assert_near(phase->pressure, it->pressure, 1e-12 * scale, what);
    for (size_t i = 0; i < it->count; i++) {
        assert_near(phase->ln_f_over_x[i], it->ln_f[i], 1e-11, what);
    }
}

static void states_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char *text, *rest;
    size_t length, seen = 0;
    assert_true(file_read(arena, "tests/data/multi-fluid-states.csv", &text, &length));
    for (char *line = strtok_r(text, "\n", &rest); line != NULL; line = strtok_r(NULL, "\n", &rest)) {
        if (*line != '#') {
            struct arena *own = arena_create(NULL);
            struct independent it;
            read_independent(line, &it);
            check_independent(&it, own);
            arena_free(own);
            seen++;
        }
    }
    assert_int_equal(seen, 44);
    arena_free(arena);
}

/* ---- derivatives ----------------------------------------------------------------------------------------------- */

enum { ALL_WANTS = WANT_F_VV | WANT_F_N | WANT_F_VN | WANT_F_NN | WANT_F_T | WANT_F_TT | WANT_F_TN };
enum { SEVEN = 7 };

struct evaluation {
    struct helmholtz F;
    double F_n[SEVEN], F_Vn[SEVEN], F_Tn[SEVEN], F_nn[SEVEN * SEVEN];
};

struct subject {
    const struct measured_mixture *m;
    double T, V, n[SEVEN];
};

static void evaluate(const struct subject *subject, struct evaluation *out)
{
    out->F = (struct helmholtz){.F_n = out->F_n, .F_Vn = out->F_Vn, .F_Tn = out->F_Tn, .F_nn = out->F_nn};
    const struct measured_mixture *m = subject->m;
    assert_int_equal(fluid_set_t(m->at_t, m->fluid, subject->T), ANSWER_OK);
    assert_int_equal(m->fluid->ops->tv(m->at_t, subject->V, subject->n, ALL_WANTS, &out->F), ANSWER_OK);
}

/* F, F_V, F_T and F_1 ... by one argument, in sixth-order differences. */
static void differentiate(struct subject *subject, double *x, double row[3 + SEVEN])
{
    static const double weight[] = {45.0 / 60.0, -9.0 / 60.0, 1.0 / 60.0};
    const double at = *x, h = 1e-3 * at;
    memset(row, 0, (3 + SEVEN) * sizeof *row);
    for (int offset = -3; offset <= 3; offset++) {
        struct evaluation e;
        const double part = offset == 0 ? 0.0 : (offset > 0 ? 1.0 : -1.0) * weight[abs(offset) - 1] / h;
        *x = at + offset * h;
        evaluate(subject, &e);
        row[0] += part * e.F.F;
        row[1] += part * e.F.F_V;
        row[2] += part * e.F.F_T;
        for (size_t i = 0; i < SEVEN; i++) {
            row[3 + i] += part * e.F_n[i];
        }
    }
    *x = at;
}

static void compare(double F_x, double F_Vx, double F_Tx, const double F_nx[], size_t stride, const double row[],
                    double scale, const char *what)
{
    assert_near(F_x, row[0], 1e-8 * fmax(fabs(F_x), scale), what);
    assert_near(F_Vx, row[1], 1e-8 * fabs(F_Vx) + 1e-300, what);
    assert_near(F_Tx, row[2], 1e-7 * fabs(F_Tx) + 1e-300, what);
    for (size_t i = 0; i < SEVEN; i++) {
        assert_near(F_nx[i * stride], row[3 + i], 1e-8 * fmax(fabs(F_nx[i * stride]), scale), what);
    }
}

static void check_derivatives(struct subject *subject, const char *what)
{
    struct evaluation e;
    double row[3 + SEVEN];
    evaluate(subject, &e);
    differentiate(subject, &subject->V, row);
    compare(e.F.F_V, e.F.F_VV, e.F.F_TV, e.F_Vn, 1, row, fabs(e.F.F_V), what);
    differentiate(subject, &subject->T, row);
    compare(e.F.F_T, e.F.F_TV, e.F.F_TT, e.F_Tn, 1, row, fabs(e.F.F_T), what);
    for (size_t j = 0; j < SEVEN; j++) {
        differentiate(subject, &subject->n[j], row);
        compare(e.F_n[j], e.F_Vn[j], e.F_Tn[j], &e.F_nn[j], SEVEN, row, fabs(e.F.F) + 1.0, what);
    }
}

/* F is homogeneous of first degree in (V, n), F_i of degree zero; F_nn is symmetric. */
static void check_homogeneity(const struct subject *subject, const char *what)
{
    struct evaluation e;
    evaluate(subject, &e);
    double sum = subject->V * e.F.F_V;
    for (size_t i = 0; i < SEVEN; i++) {
        sum += subject->n[i] * e.F_n[i];
        double row = subject->V * e.F_Vn[i], size = fabs(row);
        for (size_t j = 0; j < SEVEN; j++) {
            row += subject->n[j] * e.F_nn[i * SEVEN + j];
            size += fabs(subject->n[j] * e.F_nn[i * SEVEN + j]);
            assert_close(e.F_nn[i * SEVEN + j], e.F_nn[j * SEVEN + i], 1e-13, what);
        }
        assert_near(row, 0.0, 1e-11 * size, what);
    }
    assert_close(sum, e.F.F, 1e-11, what);
}

static void derivatives_are_those_of_the_energy(void **state)
{
    (void)state;
    static const struct {
        const char *method;
        const char *names[SEVEN];
    } cases[] = {
        {"gerg-2008", {"methane", "nitrogen", "carbon-dioxide", "ethane", "n-butane", "isobutane", "hydrogen"}},
        {"multi-fluid", {"nitrogen", "water", "carbon-dioxide", "argon", "oxygen", "xenon", "neon"}},
        {"multi-fluid", {"r32", "r125", "r134a", "r1234yf", "r152a", "ammonia", "methanol"}},
    };
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(cases); k++) {
        const struct measured_mixture m = measured_mixture_create(cases[k].method, cases[k].names, SEVEN, arena);
        for (double v = 5.3e-5; v < 3e-2; v *= 7.1) {
            struct subject subject = {&m, 411.0, 1.9 * v, {0.61, 0.11, 0.32, 0.27, 0.13, 0.21, 0.25}};
            char what[80];
            snprintf(what, sizeof what, "%s, case %zu, at %g m3", cases[k].method, k, subject.V);
            check_derivatives(&subject, what);
            check_homogeneity(&subject, what);
        }
    }
    arena_free(arena);
}

/* A component at zero is the limit of a component at little, in value and in every derivative. */
static void an_absent_component_is_the_limit_of_a_trace(void **state)
{
    (void)state;
    static const char *const names[] = {"methane", "n-decane", "water", "helium"};
    static const char *const methods[] = {"gerg-2008", "multi-fluid"};
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct measured_mixture m = measured_mixture_create(methods[k], names, COUNT(names), arena);
        struct phase *absent = phase_create(COUNT(names), arena), *trace = phase_create(COUNT(names), arena);
        const double none[] = {1.0, 0.4, 0.0, 0.0}, little[] = {1.0, 0.4, 1e-9, 1e-9};
        const unsigned want = PHASE_LN_PHI | PHASE_DLN_PHI_DT | PHASE_DLN_PHI_DP | PHASE_DLN_PHI_DN;
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, 520.0), ANSWER_OK);
        assert_int_equal(phase_tp(m.at_t, 9e6, none, BRANCH_STABLE, want, absent), ANSWER_OK);
        assert_int_equal(phase_tp(m.at_t, 9e6, little, BRANCH_STABLE, want, trace), ANSWER_OK);
        for (size_t i = 0; i < COUNT(names); i++) {
            assert_near(absent->ln_phi[i], trace->ln_phi[i], 1e-7, names[i]);
            assert_close(absent->dln_phi_dt[i], trace->dln_phi_dt[i], 1e-6, names[i]);
            for (size_t j = 0; j < 2; j++) {
                assert_near(absent->dln_phi_dn[i * COUNT(names) + j], trace->dln_phi_dn[i * COUNT(names) + j], 1e-6,
                            names[i]);
            }
        }
    }
    arena_free(arena);
}

/* ---- roots ----------------------------------------------------------------------------------------------------- */

static double draw_uniform(uint64_t *seed)
{
    *seed = *seed * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*seed >> 11) / 9007199254740992.0;
}

enum { GRID = 2000 };

/* One isotherm looked at from end to end. */
struct isotherm {
    double density[GRID], pressure[GRID], slope[GRID];
};

static void look_along(const struct measured_mixture *m, const double x[], struct isotherm *out)
{
    struct phase phase = {.ln_phi = NULL};
    const double largest = (1.0 - 1e-12) / phase_smallest_volume(m->at_t, x);
    for (size_t k = 0; k < GRID; k++) {
        const double part = (double)(k + 1) / GRID;
        /* Even steps, below a twentieth even in the logarithm. */
        out->density[k] = largest * (part < 0.05 ? 0.05 * exp((part / 0.05 - 1.0) * 16.0) : part);
        assert_int_equal(phase_tv(m->at_t, 1.0 / out->density[k], x, 0, &phase), ANSWER_OK);
        out->pressure[k] = phase.pressure;
        out->slope[k] = -phase.dp_dv;
    }
}

/* The step of the grid that holds the first stable root going up, or the first going down; GRID where there is none. */
static size_t first_going_up(const struct isotherm *line, double pressure)
{
    for (size_t k = 1; k < GRID && line->slope[k] > 0.0; k++) {
        if (line->pressure[k] >= pressure) {
            return k;
        }
    }
    return GRID;
}

static size_t first_going_down(const struct isotherm *line, double pressure)
{
    for (size_t k = GRID - 1; k > 0 && line->slope[k] > 0.0 && line->slope[k - 1] > 0.0; k--) {
        if (line->pressure[k - 1] <= pressure) {
            return k;
        }
    }
    return GRID;
}

static void check_root(const struct measured_mixture *m, const struct isotherm *line, const double x[], double p,
                       enum branch branch, size_t *found)
{
    struct phase phase = {.ln_phi = NULL};
    const size_t k = branch == BRANCH_VAPOUR ? first_going_up(line, p) : first_going_down(line, p);
    if (k == GRID) {
        return;
    }
    assert_int_equal(phase_tp(m->at_t, p, x, branch, 0, &phase), ANSWER_OK);
    assert_true(1.0 / phase.volume > line->density[k - 1] * (1.0 - 1e-9));
    assert_true(1.0 / phase.volume < line->density[k] * (1.0 + 1e-9));
    (*found)++;
}

/* Mixtures of strangers, from far below the critical temperature on, where the isotherms have many spurious loops. */
static void roots_are_the_first_from_either_end(void **state)
{
    (void)state;
    static const struct {
        const char *method;
        const char *names[4];
    } cases[] = {
        {"gerg-2008", {"methane", "ethane", "n-hexane", "hydrogen-sulfide"}},
        {"gerg-2008", {"nitrogen", "carbon-dioxide", "propane", "helium"}},
        {"multi-fluid", {"nitrogen", "oxygen", "carbon-dioxide", "argon"}},
        {"multi-fluid", {"n-butane", "nitrogen", "ethylene", "r134a"}},
    };
    uint64_t seed = 77;
    size_t found = 0;
    struct arena *arena = arena_create(NULL);
    struct isotherm *line = arena_alloc(arena, 1, sizeof *line);
    for (size_t k = 0; k < COUNT(cases); k++) {
        const struct measured_mixture m = measured_mixture_create(cases[k].method, cases[k].names, 4, arena);
        for (size_t s = 0; s < 24; s++) {
            double x[4], sum = 0.0;
            for (size_t i = 0; i < 4; i++) {
                x[i] = pow(draw_uniform(&seed), 3.0);
                sum += x[i];
            }
            for (size_t i = 0; i < 4; i++) {
                x[i] /= sum;
            }
            assert_int_equal(fluid_set_t(m.at_t, m.fluid, 110.0 + 390.0 * draw_uniform(&seed)), ANSWER_OK);
            look_along(&m, x, line);
            for (double p = 3e3; p < 1e8; p *= 4.3) {
                check_root(&m, line, x, p, BRANCH_VAPOUR, &found);
                check_root(&m, line, x, p, BRANCH_LIQUID, &found);
            }
        }
    }
    assert_true(found > 600);
    arena_free(arena);
}

/* At these pressures this gas has neither a vapour nor a liquid root as one phase: its isotherm has two loops near the
 * critical density, the ends of the branches at 3.805 and 4.165 MPa (looked at along the isotherm). */
static void a_feed_between_its_branches_still_splits(void **state)
{
    (void)state;
    static const char *const names[] = {"methane",   "nitrogen", "carbon-dioxide", "ethane", "propane",
                                        "isobutane", "n-butane", "n-pentane",      "oxygen", "helium"};
    const double z[] = {0.5, 0.04, 0.03, 0.14, 0.12, 0.04, 0.05, 0.073, 0.003, 0.005};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, COUNT(names), arena);
    struct phase phase = {.ln_phi = NULL};
    for (double p = 3.85e6; p < 4.15e6; p += 0.07e6) {
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, 269.0), ANSWER_OK);
        assert_int_equal(phase_tp(m.at_t, p, z, BRANCH_VAPOUR, 0, &phase), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(phase_tp(m.at_t, p, z, BRANCH_LIQUID, 0, &phase), ANSWER_NO_SUCH_ROOT);
        assert_int_equal(measured_phases(&m, 269.0, p, z), 2);
    }
    arena_free(arena);
}

/* Below 235 K or so the equation of water has no liquid at these pressures; the loops it has instead are no phases. */
static void a_loop_of_cold_water_is_no_phase(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "water"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, COUNT(names), arena);
    const double n[] = {1e-9, 1.0};
    struct phase phase = {.ln_phi = NULL};
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, 225.0), ANSWER_OK);
    assert_int_equal(phase_tp(m.at_t, 2e6, n, BRANCH_STABLE, 0, &phase), ANSWER_NO_SUCH_ROOT);
    arena_free(arena);
}

/* Trials of a stability test spread over hundreds of decades. */
static void traces_too_small_to_divide_by_are_as_good_as_absent(void **state)
{
    (void)state;
    static const char *const names[] = {"methane", "n-decane", "water", "helium"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("gerg-2008", names, COUNT(names), arena);
    struct phase *absent = phase_create(COUNT(names), arena), *trace = phase_create(COUNT(names), arena);
    const double none[] = {1.0, 0.0, 0.0, 0.0}, least[] = {1.0, 1e-312, 1e-310, 1e-160};
    const unsigned want = PHASE_LN_PHI | PHASE_DLN_PHI_DN;
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, 520.0), ANSWER_OK);
    assert_int_equal(phase_tp(m.at_t, 9e6, none, BRANCH_STABLE, want, absent), ANSWER_OK);
    assert_int_equal(phase_tp(m.at_t, 9e6, least, BRANCH_STABLE, want, trace), ANSWER_OK);
    for (size_t i = 0; i < COUNT(names); i++) {
        assert_close(trace->ln_phi[i], absent->ln_phi[i], 1e-13, names[i]);
        assert_close(trace->dln_phi_dn[i], absent->dln_phi_dn[i], 1e-12, names[i]);
    }
    arena_free(arena);
}

/* Both sides of a vapour-liquid equilibrium from the library, by fugacities that have to be equal. */
static void a_split_settles_with_equal_fugacities(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "n-butane"};
    static const char *const methods[] = {"gerg-2008", "multi-fluid"};
    const double z[] = {0.5, 0.5};
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(methods); k++) {
        const struct measured_mixture m = measured_mixture_create(methods[k], names, COUNT(names), arena);
        assert_int_equal(measured_phases(&m, 320.0, 6e6, z), 2);
        for (size_t i = 0; i < 2; i++) {
            const struct split_phase *V = &m.split->phase[0], *L = &m.split->phase[1];
            assert_near(log(V->x[i]) + V->ln_phi[i], log(L->x[i]) + L->ln_phi[i], 1e-10, methods[k]);
        }
    }
    arena_free(arena);
}

/* ---- pairs ------------------------------------------------------------------------------------------------------ */

static void a_pair_turned_round_is_the_same_pair(void **state)
{
    (void)state;
    static const char *const names[] = {"methane", "propane"}, *const turned[] = {"propane", "methane"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture a = measured_mixture_create("gerg-2008", names, 2, arena);
    const struct measured_mixture b = measured_mixture_create("gerg-2008", turned, 2, arena);
    struct reducing_parameter one, other;
    assert_int_equal(fluid_reducing(a.fluid, 0, 1, &one), ANSWER_OK);
    assert_close(one.beta_T, 0.989680305, 1e-15, "Kunz and Wagner 2012, methane with propane");
    assert_close(one.gamma_V, 1.038470657, 1e-15, "Kunz and Wagner 2012, methane with propane");
    assert_string_equal(one.departure, "methane-propane");
    assert_int_equal(one.origin, PAIR_FROM_LIBRARY);
    assert_int_equal(fluid_reducing(b.fluid, 0, 1, &other), ANSWER_OK);
    assert_close(other.beta_T, 1.0 / one.beta_T, 1e-15, "1 / beta");
    assert_close(other.beta_V, 1.0 / one.beta_V, 1e-15, "1 / beta");
    assert_int_equal(fluid_reducing(b.fluid, 0, 0, &other), ANSWER_CANNOT);
    struct phase *p = phase_create(2, arena), *q = phase_create(2, arena);
    assert_int_equal(fluid_set_t(a.at_t, a.fluid, 300.0), ANSWER_OK);
    assert_int_equal(fluid_set_t(b.at_t, b.fluid, 300.0), ANSWER_OK);
    assert_int_equal(phase_tp(a.at_t, 3e6, (const double[]){0.7, 0.3}, BRANCH_STABLE, PHASE_LN_PHI, p), ANSWER_OK);
    assert_int_equal(phase_tp(b.at_t, 3e6, (const double[]){0.3, 0.7}, BRANCH_STABLE, PHASE_LN_PHI, q), ANSWER_OK);
    assert_close(p->volume, q->volume, 1e-13, "order of components");
    assert_near(p->ln_phi[0], q->ln_phi[1], 1e-13, "order of components");
    arena_free(arena);
}

static void a_pair_nobody_published_is_estimated_and_says_so(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "xenon"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 2, arena);
    struct reducing_parameter pair;
    assert_int_equal(fluid_reducing(m.fluid, 0, 1, &pair), ANSWER_OK);
    assert_int_equal(pair.origin, PAIR_FROM_NOTHING);
    assert_close(pair.beta_T, 1.0, 1e-15, "the stated estimate");
    assert_close(pair.gamma_V, 1.0, 1e-15, "the stated estimate");
    assert_null(pair.departure);
    arena_free(arena);
}

static void a_component_without_an_equation_is_lacking(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "xenon"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 2, arena);
    struct pure_spec bare = *m.spec->pure[0];
    bare.reference = NULL;
    const struct pure_spec *list[] = {&bare, m.spec->pure[1]};
    const struct fluid_spec spec = {.count = 2, .pure = list};
    struct fluid_lack_report lack;
    assert_null(fluid_create("multi-fluid", &spec, arena, &lack));
    assert_int_equal(lack.lack, LACK_EQUATION);
    assert_int_equal(lack.component, 0);
    arena_free(arena);
}

/* ---- what has no answer ------------------------------------------------------------------------------------------ */

static void questions_without_meaning_are_out_of_range(void **state)
{
    (void)state;
    static const char *const names[] = {"nitrogen", "oxygen"};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, 2, arena);
    const double air[] = {0.79, 0.21}, nothing[] = {0.0, 0.0}, negative[] = {1.0, -0.1};
    struct phase *phase = phase_create(2, arena);
    struct caloric caloric;
    assert_int_equal(fluid_set_t(m.at_t, m.fluid, 300.0), ANSWER_OK);
    assert_int_equal(phase_tp(m.at_t, 1e5, nothing, BRANCH_STABLE, 0, phase), ANSWER_OUT_OF_RANGE);
    assert_int_equal(phase_tp(m.at_t, 1e5, negative, BRANCH_STABLE, 0, phase), ANSWER_OUT_OF_RANGE);
    assert_int_equal(phase_tp(m.at_t, (double)NAN, air, BRANCH_STABLE, 0, phase), ANSWER_OUT_OF_RANGE);
    assert_int_equal(phase_tp(m.at_t, 1e14, air, BRANCH_STABLE, 0, phase), ANSWER_OUT_OF_RANGE);
    assert_int_equal(phase_tv(m.at_t, 1e-6, air, 0, phase), ANSWER_OUT_OF_RANGE);
    assert_int_equal(caloric_at_volume(m.at_t, -1.0, air, &caloric), ANSWER_OUT_OF_RANGE);
    assert_int_equal(m.fluid->ops->range(m.fluid, 50.0, 1e5).side, RANGE_TOO_COLD);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(states_agree_with_an_independent_evaluation),
        cmocka_unit_test(derivatives_are_those_of_the_energy),
        cmocka_unit_test(an_absent_component_is_the_limit_of_a_trace),
        cmocka_unit_test(roots_are_the_first_from_either_end),
        cmocka_unit_test(a_feed_between_its_branches_still_splits),
        cmocka_unit_test(a_loop_of_cold_water_is_no_phase),
        cmocka_unit_test(traces_too_small_to_divide_by_are_as_good_as_absent),
        cmocka_unit_test(a_split_settles_with_equal_fugacities),
        cmocka_unit_test(a_pair_turned_round_is_the_same_pair),
        cmocka_unit_test(a_pair_nobody_published_is_estimated_and_says_so),
        cmocka_unit_test(a_component_without_an_equation_is_lacking),
        cmocka_unit_test(questions_without_meaning_are_out_of_range),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
