#include "support/sample_fluids.h"
#include "support/check.h"

/* Lemmon, McLinden and Wagner, J. Chem. Eng. Data 54 (2009) 3141, tables 4 and 5. The fits for starting values are
 * its ancillary equations, from memory. */
static const struct residual_term PROPANE_RESIDUAL[] = {
    {.kind = RESIDUAL_POWER, .n = 0.042910051, .t = 1.0, .d = 4.0},
    {.kind = RESIDUAL_POWER, .n = 1.7313671, .t = 0.33, .d = 1.0},
    {.kind = RESIDUAL_POWER, .n = -2.4516524, .t = 0.8, .d = 1.0},
    {.kind = RESIDUAL_POWER, .n = 0.34157466, .t = 0.43, .d = 2.0},
    {.kind = RESIDUAL_POWER, .n = -0.46047898, .t = 0.9, .d = 2.0},
    {.kind = RESIDUAL_POWER, .n = -0.66847295, .t = 2.46, .d = 1.0, .l = 1.0},
    {.kind = RESIDUAL_POWER, .n = 0.20889705, .t = 2.09, .d = 3.0, .l = 1.0},
    {.kind = RESIDUAL_POWER, .n = 0.19421381, .t = 0.88, .d = 6.0, .l = 1.0},
    {.kind = RESIDUAL_POWER, .n = -0.22917851, .t = 1.09, .d = 6.0, .l = 1.0},
    {.kind = RESIDUAL_POWER, .n = -0.60405866, .t = 3.25, .d = 2.0, .l = 2.0},
    {.kind = RESIDUAL_POWER, .n = 0.066680654, .t = 4.62, .d = 3.0, .l = 2.0},
    {.kind = RESIDUAL_GAUSSIAN, .n = 0.017534618, .t = 0.76, .d = 1.0, .eta = 0.963, .epsilon = 1.283, .beta = 2.33,
     .gamma = 0.684},
    {.kind = RESIDUAL_GAUSSIAN, .n = 0.33874242, .t = 2.5, .d = 1.0, .eta = 1.977, .epsilon = 0.6936, .beta = 3.47,
     .gamma = 0.829},
    {.kind = RESIDUAL_GAUSSIAN, .n = 0.22228777, .t = 2.75, .d = 1.0, .eta = 1.917, .epsilon = 0.788, .beta = 3.15,
     .gamma = 1.419},
    {.kind = RESIDUAL_GAUSSIAN, .n = -0.23219062, .t = 3.05, .d = 2.0, .eta = 2.307, .epsilon = 0.473, .beta = 3.19,
     .gamma = 0.817},
    {.kind = RESIDUAL_GAUSSIAN, .n = -0.09220694, .t = 2.55, .d = 2.0, .eta = 2.546, .epsilon = 0.8577, .beta = 0.92,
     .gamma = 1.5},
    {.kind = RESIDUAL_GAUSSIAN, .n = -0.47575718, .t = 8.4, .d = 4.0, .eta = 3.28, .epsilon = 0.271, .beta = 18.8,
     .gamma = 1.426},
    {.kind = RESIDUAL_GAUSSIAN, .n = -0.017486824, .t = 6.75, .d = 1.0, .eta = 14.6, .epsilon = 0.948, .beta = 547.8,
     .gamma = 1.093},
};

static const struct ideal_term PROPANE_IDEAL[] = {
    {.kind = IDEAL_LEAD, .a = -4.970583, .b = 4.29352},        {.kind = IDEAL_LOG_TAU, .a = 3.0},
    {.kind = IDEAL_EINSTEIN, .a = 3.043, .b = 1.062478},       {.kind = IDEAL_EINSTEIN, .a = 5.874, .b = 3.344237},
    {.kind = IDEAL_EINSTEIN, .a = 9.337, .b = 5.363757},       {.kind = IDEAL_EINSTEIN, .a = 7.922, .b = 11.762957},
};

static const double PROPANE_PRESSURE[][2] = {
    {-6.7722, 1.0}, {1.6938, 1.5}, {-1.3341, 2.2}, {-3.1876, 4.8}, {0.94937, 6.2},
};
static const double PROPANE_LIQUID[][2] = {{1.82205, 0.345}, {0.65802, 0.74}, {0.21109, 2.6}, {0.083973, 7.2}};
static const double PROPANE_VAPOUR[][2] = {
    {-2.4887, 0.3785}, {-5.1069, 1.07}, {-12.174, 2.7}, {-30.495, 5.5}, {-52.192, 10.0}, {-134.89, 20.0},
};

#define GUESS(kind, value, table)                                                                                      \
    {                                                                                                                  \
        .form = (kind), .reducing_temperature = 369.89, .reducing_value = (value),                                     \
        .count = sizeof(table) / sizeof *(table), .terms = (table)                                                     \
    }

static const struct reference_spec PROPANE_EQUATION = {
    .gas_constant = 8.314472,
    .reducing_temperature = 369.89,
    .reducing_density = 5000.0,
    .residual_count = sizeof PROPANE_RESIDUAL / sizeof *PROPANE_RESIDUAL,
    .residual = PROPANE_RESIDUAL,
    .ideal_count = sizeof PROPANE_IDEAL / sizeof *PROPANE_IDEAL,
    .ideal = PROPANE_IDEAL,
    .critical_temperature = 369.890009, /* of the equation itself; the paper has 369.89 K, 4.2512 MPa, 5000 mol/m3 */
    .critical_pressure = 4251165.33,
    .critical_density = 5000.0006,
    .smallest_temperature = 85.525,
    .largest_temperature = 650.0,
    .largest_pressure = 1e9,
    .pressure_guess = GUESS(GUESS_EXP_TAU, 4251200.0, PROPANE_PRESSURE),
    .liquid_guess = GUESS(GUESS_ONE_PLUS, 5000.0, PROPANE_LIQUID),
    .vapour_guess = GUESS(GUESS_EXP, 5000.0, PROPANE_VAPOUR),
};

/* Critical constants of the reference equations' papers: Span et al. 2000, Setzmann and Wagner 1991, Span and Wagner
 * 1996, Lemmon et al. 2009, Buecker and Wagner 2006; acentric factors follow from those equations. */
#define SUBSTANCE(word, mass, Tc, pc, omega, equation)                                                                 \
    {                                                                                                                  \
        .name = (word), .molar_mass = (mass), .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
        .acentric = {true, (omega)}, .reference = (equation)                                                           \
    }

const struct pure_spec SAMPLE_SUBSTANCE[SAMPLE_SUBSTANCES] = {
    [NITROGEN] = SUBSTANCE("nitrogen", 0.02801348, 126.192, 3.3958e6, 0.0372, NULL),
    [METHANE] = SUBSTANCE("methane", 0.0160428, 190.564, 4.5992e6, 0.0114, NULL),
    [CARBON_DIOXIDE] = SUBSTANCE("carbon-dioxide", 0.0440098, 304.1282, 7.3773e6, 0.2249, NULL),
    [PROPANE] = SUBSTANCE("propane", 0.04409562, 369.89, 4.2512e6, 0.1521, &PROPANE_EQUATION),
    [N_BUTANE] = SUBSTANCE("n-butane", 0.0581222, 425.125, 3.796e6, 0.2008, NULL),
};

const struct sample_fluid SAMPLE_FLUIDS[] = {
    {"ideal gas", "ideal-gas", 3, {NITROGEN, PROPANE, METHANE}, {0.31, 0.47, 1.13}},
    {"Peng-Robinson propane", "peng-robinson", 1, {PROPANE}, {1.37}},
    {"Peng-Robinson mixture", "peng-robinson", 5, {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.23, 0.41, 0.37, 0.19, 0.11}},
    {"Soave propane", "soave-redlich-kwong", 1, {PROPANE}, {1.37}},
    {"Soave mixture", "soave-redlich-kwong", 3, {CARBON_DIOXIDE, N_BUTANE, NITROGEN}, {0.71, 0.43, 0.17}},
    {"reference propane", "reference", 1, {PROPANE}, {1.37}},
};
const size_t SAMPLE_FLUIDS_COUNT = sizeof SAMPLE_FLUIDS / sizeof *SAMPLE_FLUIDS;

/* Invented, all different, positive and negative. */
static double invented_kij(size_t i, size_t j)
{
    return i == j ? 0.0 : 0.013 * (double)(i + j) - 0.007 * (double)(i * j);
}

static const struct fluid *create(const char *method, const struct fluid_spec *spec, struct arena *arena)
{
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create(method, spec, arena, &lack);
    assert_non_null(fluid);
    return fluid;
}

const struct fluid *sample_fluid_create(const struct sample_fluid *sample, struct arena *arena)
{
    const size_t count = sample->count;
    const struct pure_spec **pure = arena_alloc(arena, count, sizeof *pure);
    double *kij = arena_alloc(arena, count * count, sizeof *kij);
    for (size_t i = 0; i < count; i++) {
        pure[i] = &SAMPLE_SUBSTANCE[sample->substance[i]];
        for (size_t j = 0; j < count; j++) {
            kij[i * count + j] = invented_kij(i, j);
        }
    }
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct fluid_spec){.count = count, .pure = pure, .kij = kij};
    return create(sample->method, spec, arena);
}

const struct fluid *sample_pure(const char *method, const struct pure_spec *substance, struct arena *arena)
{
    const struct pure_spec **pure = arena_alloc(arena, 1, sizeof *pure);
    *pure = substance;
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct fluid_spec){.count = 1, .pure = pure};
    return create(method, spec, arena);
}

struct fluid_at_t *sample_at_t(const struct fluid *fluid, double temperature, struct arena *arena)
{
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    assert_int_equal(fluid_set_t(at_t, fluid, temperature), ANSWER_OK);
    return at_t;
}
