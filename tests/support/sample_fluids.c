#include "support/sample_fluids.h"
#include "case/case.h"
#include "support/check.h"
#include "support/measured_mixture.h"

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
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.017534618,
     .t = 0.76,
     .d = 1.0,
     .eta = 0.963,
     .epsilon = 1.283,
     .beta = 2.33,
     .gamma = 0.684},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.33874242,
     .t = 2.5,
     .d = 1.0,
     .eta = 1.977,
     .epsilon = 0.6936,
     .beta = 3.47,
     .gamma = 0.829},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.22228777,
     .t = 2.75,
     .d = 1.0,
     .eta = 1.917,
     .epsilon = 0.788,
     .beta = 3.15,
     .gamma = 1.419},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.23219062,
     .t = 3.05,
     .d = 2.0,
     .eta = 2.307,
     .epsilon = 0.473,
     .beta = 3.19,
     .gamma = 0.817},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.09220694,
     .t = 2.55,
     .d = 2.0,
     .eta = 2.546,
     .epsilon = 0.8577,
     .beta = 0.92,
     .gamma = 1.5},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.47575718,
     .t = 8.4,
     .d = 4.0,
     .eta = 3.28,
     .epsilon = 0.271,
     .beta = 18.8,
     .gamma = 1.426},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.017486824,
     .t = 6.75,
     .d = 1.0,
     .eta = 14.6,
     .epsilon = 0.948,
     .beta = 547.8,
     .gamma = 1.093},
};

static const struct ideal_term PROPANE_IDEAL[] = {
    {.kind = IDEAL_LEAD, .a = -4.970583, .b = 4.29352},  {.kind = IDEAL_LOG_TAU, .a = 3.0},
    {.kind = IDEAL_EINSTEIN, .a = 3.043, .b = 1.062478}, {.kind = IDEAL_EINSTEIN, .a = 5.874, .b = 3.344237},
    {.kind = IDEAL_EINSTEIN, .a = 9.337, .b = 5.363757}, {.kind = IDEAL_EINSTEIN, .a = 7.922, .b = 11.762957},
};

static const double PROPANE_PRESSURE[][2] = {
    {-6.7722, 1.0}, {1.6938, 1.5}, {-1.3341, 2.2}, {-3.1876, 4.8}, {0.94937, 6.2},
};
static const double PROPANE_LIQUID[][2] = {{1.82205, 0.345}, {0.65802, 0.74}, {0.21109, 2.6}, {0.083973, 7.2}};
static const double PROPANE_VAPOUR[][2] = {
    {-2.4887, 0.3785}, {-5.1069, 1.07}, {-12.174, 2.7}, {-30.495, 5.5}, {-52.192, 10.0}, {-134.89, 20.0},
};

#define GUESS(kind, value, table)                                                  \
    {                                                                              \
        .form = (kind), .reducing_temperature = 369.89, .reducing_value = (value), \
        .count = sizeof(table) / sizeof *(table), .terms = (table)                 \
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

/* Bell, Satyro and Lemmon, J. Chem. Eng. Data 63 (2018) 2402, with the critical constants fitted there. */
#define TWU(Tc, pc, L_, M_, N_)                                                                                 \
    {                                                                                                           \
        .method = "peng-robinson-twu", .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
        .has_twu = true, .L = (L_), .M = (M_), .N = (N_)                                                        \
    }

/* Pina-Martinez, Privat and Jaubert, AIChE J. 68 (2022) e17518. */
#define TRANSLATED(word, L_, M_, N_, c)                                                  \
    {                                                                                    \
        .method = (word), .has_twu = true, .L = (L_), .M = (M_), .N = (N_), .shift = (c) \
    }
#define TRANSLATED_PR(L_, M_, N_, c) TRANSLATED("translated-peng-robinson", L_, M_, N_, c)
#define TRANSLATED_RK(L_, M_, N_, c) TRANSLATED("translated-redlich-kwong", L_, M_, N_, c)

/* A translation of Peng and Robinson's equation of 1978, invented. */
#define INVENTED_SHIFT(c)                            \
    {                                                \
        .method = "peng-robinson-1978", .shift = (c) \
    }

/* Aasen et al., Fluid Phase Equilib. 524 (2020) 112790. */
#define QUANTUM(Tc, pc, L_, M_, N_, A_, B_, c)                                                                      \
    {                                                                                                               \
        .method = "quantum-peng-robinson", .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
        .has_twu = true, .L = (L_), .M = (M_), .N = (N_), .shift = (c), .covolume_A = (A_), .covolume_B = (B_)      \
    }

static const struct cubic_set NITROGEN_SETS[] = {
    TWU(126.206891159, 3398217.289, 0.127192188535626, 0.891188980616533, 1.99727664374937),
    TRANSLATED_PR(0.1243, 0.8898, 2.0129, -3.643e-6),
    TRANSLATED_RK(0.1902, 0.89, 2.0106, 1.347e-6),
    INVENTED_SHIFT(-4.1e-6),
};
static const struct cubic_set METHANE_SETS[] = {
    TWU(190.562942605, 4606885.33571, 0.152824010202571, 0.909319677052752, 1.80563830691598),
    TRANSLATED_PR(0.1474, 0.9075, 1.8241, -3.56e-6),
    TRANSLATED_RK(0.217, 0.9082, 1.8172, 2.051e-6),
};
static const struct cubic_set CARBON_DIOXIDE_SETS[] = {
    TWU(304.179353468, 7381764.54696, 0.646067920218348, 0.827942676466649, 0.957675702925436),
    TRANSLATED_PR(0.1784, 0.859, 2.4107, -1.137e-6),
    TRANSLATED_RK(0.2805, 0.8684, 2.2783, 4.158e-6),
    INVENTED_SHIFT(-1.7e-6),
};
static const struct cubic_set PROPANE_SETS[] = {
    TWU(369.900723099, 4255458.05979, 0.813733572256653, 0.929511021596615, 0.683735841338464),
    TRANSLATED_PR(0.7455, 0.9133, 0.761, -3.735e-6),
    TRANSLATED_RK(0.5467, 0.8814, 1.183, 7.703e-6),
    INVENTED_SHIFT(2.3e-6),
};
static const struct cubic_set N_BUTANE_SETS[] = {
    TWU(425.156714148, 3793718.96426, 0.465153323156917, 0.847493294686681, 1.20103761626744),
    TRANSLATED_PR(0.4154, 0.849, 1.3205, -3.436e-6),
    TRANSLATED_RK(0.3515, 0.8609, 1.8324, 11.027e-6),
};
static const struct cubic_set HYDROGEN_SETS[] = {
    QUANTUM(33.145, 1296400.0, 156.21, -0.0062072, 5.047, 3.0696, 12.682, -3.8139e-6),
};
static const struct cubic_set HELIUM_SETS[] = {
    QUANTUM(5.1953, 227600.0, 0.48558, 1.7173, 0.30271, 1.4912, 3.2634, -3.1791e-6),
};
static const struct cubic_set NEON_SETS[] = {
    QUANTUM(44.4, 2661630.0, 0.40453, 0.95861, 0.8396, 0.4673, 2.4634, -2.4665e-6),
};

/* The groups of E-PPR78; the assignment of molecules from memory. */
enum { GROUP_CH3, GROUP_CH2, GROUP_CH4, GROUP_CO2, GROUP_N2 };

static const struct group_share NITROGEN_GROUPS[] = {{GROUP_N2, 1.0}};
static const struct group_share METHANE_GROUPS[] = {{GROUP_CH4, 1.0}};
static const struct group_share CARBON_DIOXIDE_GROUPS[] = {{GROUP_CO2, 1.0}};
static const struct group_share PROPANE_GROUPS[] = {{GROUP_CH3, 2.0}, {GROUP_CH2, 1.0}};
static const struct group_share N_BUTANE_GROUPS[] = {{GROUP_CH3, 2.0}, {GROUP_CH2, 2.0}};

/* Jaubert and Mutelet, Fluid Phase Equilib. 224 (2004) 285, and the papers that followed it: A and B in Pa. */
const struct group_pair SAMPLE_GROUP_PAIRS[] = {
    {GROUP_CH3, GROUP_CH2, 65.5e6, 105.7e6},  {GROUP_CH3, GROUP_CH4, 28.5e6, 20.2e6},
    {GROUP_CH4, GROUP_CH2, 37.7e6, 74.8e6},   {GROUP_CH3, GROUP_CO2, 144.8e6, 401.5e6},
    {GROUP_CH2, GROUP_CO2, 141.4e6, 237.1e6}, {GROUP_CH4, GROUP_CO2, 136.6e6, 214.8e6},
    {GROUP_CH3, GROUP_N2, 38.1e6, 88.2e6},    {GROUP_N2, GROUP_CH2, 83.7e6, 188.7e6},
    {GROUP_CH4, GROUP_N2, 30.9e6, 37.1e6},    {GROUP_CO2, GROUP_N2, 113.9e6, 212.4e6},
};
const size_t SAMPLE_GROUP_PAIRS_COUNT = sizeof SAMPLE_GROUP_PAIRS / sizeof *SAMPLE_GROUP_PAIRS;

/* Critical constants of the reference equations' papers: Span et al. 2000, Setzmann and Wagner 1991, Span and Wagner
 * 1996, Lemmon et al. 2009, Buecker and Wagner 2006, Leachman et al. 2009, Ortiz Vega et al. 2023, Thol et al. 2019;
 * acentric factors follow from those equations. */
#define LIST(array)   .cubic_set_count = sizeof(array) / sizeof *(array), .cubic_sets = (array)
#define GROUPS(array) .group_count = sizeof(array) / sizeof *(array), .groups = (array)
#define SUBSTANCE(word, mass, Tc, pc, omega)                                                                       \
    .name = (word), .molar_mass = (mass), .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
    .acentric = {true, (omega)}

const struct pure_spec SAMPLE_SUBSTANCE[SAMPLE_SUBSTANCES] = {
    [NITROGEN] = {SUBSTANCE("nitrogen", 0.02801348, 126.192, 3.3958e6, 0.0372), LIST(NITROGEN_SETS),
                  GROUPS(NITROGEN_GROUPS)},
    [METHANE] = {SUBSTANCE("methane", 0.0160428, 190.564, 4.5992e6, 0.0114), LIST(METHANE_SETS),
                 GROUPS(METHANE_GROUPS)},
    [CARBON_DIOXIDE] = {SUBSTANCE("carbon-dioxide", 0.0440098, 304.1282, 7.3773e6, 0.2249), LIST(CARBON_DIOXIDE_SETS),
                        GROUPS(CARBON_DIOXIDE_GROUPS)},
    [PROPANE] = {SUBSTANCE("propane", 0.04409562, 369.89, 4.2512e6, 0.1521), LIST(PROPANE_SETS), GROUPS(PROPANE_GROUPS),
                 .reference = &PROPANE_EQUATION},
    [N_BUTANE] = {SUBSTANCE("n-butane", 0.0581222, 425.125, 3.796e6, 0.2008), LIST(N_BUTANE_SETS),
                  GROUPS(N_BUTANE_GROUPS)},
    [HYDROGEN] = {SUBSTANCE("hydrogen", 0.00201588, 33.145, 1.2964e6, -0.2187), LIST(HYDROGEN_SETS)},
    [HELIUM] = {SUBSTANCE("helium", 0.004002602, 5.1953, 228326.07, -0.3835), LIST(HELIUM_SETS)},
    [NEON] = {SUBSTANCE("neon", 0.020179, 44.4, 2661630.8, -0.0355), LIST(NEON_SETS)},
};

#define FIVE                                                 \
    {                                                        \
        NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE \
    }
#define FIVE_AMOUNTS                 \
    {                                \
        0.23, 0.41, 0.37, 0.19, 0.11 \
    }

const struct sample_fluid SAMPLE_FLUIDS[] = {
    {"ideal gas", "ideal-gas", 3, {NITROGEN, PROPANE, METHANE}, {0.31, 0.47, 1.13}, SAMPLE_INVENTED},
    {"Peng-Robinson propane", "peng-robinson", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"Peng-Robinson mixture", "peng-robinson", 5, FIVE, FIVE_AMOUNTS, SAMPLE_INVENTED},
    {"Soave propane", "soave-redlich-kwong", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"Soave mixture",
     "soave-redlich-kwong",
     3,
     {CARBON_DIOXIDE, N_BUTANE, NITROGEN},
     {0.71, 0.43, 0.17},
     SAMPLE_INVENTED},
    {"reference propane", "reference", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"van der Waals propane", "van-der-waals", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"van der Waals mixture",
     "van-der-waals",
     3,
     {CARBON_DIOXIDE, N_BUTANE, NITROGEN},
     {0.71, 0.43, 0.17},
     SAMPLE_INVENTED},
    {"Redlich-Kwong mixture", "redlich-kwong", 3, {METHANE, PROPANE, HYDROGEN}, {0.53, 0.29, 0.13}, SAMPLE_INVENTED},
    {"Peng-Robinson 1978 propane", "peng-robinson-1978", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"Peng-Robinson 1978 by groups", "peng-robinson-1978", 5, FIVE, FIVE_AMOUNTS, SAMPLE_GROUPS},
    {"Peng-Robinson by Twu",
     "peng-robinson-twu",
     3,
     {N_BUTANE, NITROGEN, METHANE},
     {0.37, 0.71, 0.19},
     SAMPLE_INVENTED},
    {"translated Peng-Robinson propane", "translated-peng-robinson", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"translated Peng-Robinson mixture",
     "translated-peng-robinson",
     3,
     {CARBON_DIOXIDE, METHANE, PROPANE},
     {0.41, 0.67, 0.29},
     SAMPLE_INVENTED},
    {"translated Redlich-Kwong mixture",
     "translated-redlich-kwong",
     3,
     {NITROGEN, N_BUTANE, CARBON_DIOXIDE},
     {0.41, 0.67, 0.29},
     SAMPLE_INVENTED},
    {"quantum hydrogen", "quantum-peng-robinson", 1, {HYDROGEN}, {1.37}, SAMPLE_CONSTANTS},
    {"quantum mixture", "quantum-peng-robinson", 3, {NEON, HYDROGEN, HELIUM}, {0.47, 0.59, 0.31}, SAMPLE_CONSTANTS},
    {"Lee-Kesler propane", "lee-kesler", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"Lee-Kesler mixture", "lee-kesler", 5, FIVE, FIVE_AMOUNTS, SAMPLE_INVENTED},
    {"multi-fluid propane", "multi-fluid", 1, {PROPANE}, {1.37}, SAMPLE_LIBRARY},
    {"multi-fluid mixture", "multi-fluid", 5, FIVE, FIVE_AMOUNTS, SAMPLE_LIBRARY},
    {"multi-fluid with a nonanalytic part alone",
     "multi-fluid",
     2,
     {CARBON_DIOXIDE, NEON},
     {0.83, 0.41},
     SAMPLE_LIBRARY},
    {"GERG-2008 propane", "gerg-2008", 1, {PROPANE}, {1.37}, SAMPLE_LIBRARY},
    {"GERG-2008 mixture", "gerg-2008", 5, FIVE, FIVE_AMOUNTS, SAMPLE_LIBRARY},
    {"GERG-2008 with light gases", "gerg-2008", 3, {METHANE, HYDROGEN, HELIUM}, {0.71, 0.31, 0.17}, SAMPLE_LIBRARY},
    {"virial propane", "virial-tsonopoulos", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"virial mixture", "virial-tsonopoulos", 5, FIVE, FIVE_AMOUNTS, SAMPLE_INVENTED},
    {"virial mixture by Pitzer and Abbott",
     "virial-pitzer-abbott",
     3,
     {METHANE, PROPANE, HYDROGEN},
     {0.53, 0.29, 0.13},
     SAMPLE_INVENTED},
    {"virial propane in pressure", "virial-pitzer-abbott-pressure", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"virial mixture by Pitzer and Abbott in pressure",
     "virial-pitzer-abbott-pressure",
     3,
     {METHANE, PROPANE, HYDROGEN},
     {0.53, 0.29, 0.13},
     SAMPLE_INVENTED},
    {"liquid and vapour by Poynting", "poynting", 1, {PROPANE}, {1.37}, SAMPLE_INVENTED},
    {"virial mixture in pressure", "virial-tsonopoulos-pressure", 5, FIVE, FIVE_AMOUNTS, SAMPLE_INVENTED},
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

static const double *invent(size_t count, struct arena *arena)
{
    double *kij = arena_alloc(arena, count * count, sizeof *kij);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < count; j++) {
            kij[i * count + j] = invented_kij(i, j);
        }
    }
    return kij;
}

/* Aasen et al., Fluid Phase Equilib. 524 (2020) 112790. */
static const struct {
    enum sample_substance first, second;
    double kij, lij;
} QUANTUM_PAIRS[] = {{HYDROGEN, NEON, 0.18, 0.0}, {HYDROGEN, HELIUM, 0.17, -0.16}, {HELIUM, NEON, -0.17, 0.0}};

static void add_quantum_pairs(const struct sample_fluid *sample, struct fluid_spec *spec, struct arena *arena)
{
    struct pair_constant *pairs = arena_alloc(arena, sample->count * sample->count, sizeof *pairs);
    for (size_t i = 0; i < sample->count; i++) {
        for (size_t j = 0; j < sample->count; j++) {
            for (size_t k = 0; k < sizeof QUANTUM_PAIRS / sizeof *QUANTUM_PAIRS; k++) {
                if (QUANTUM_PAIRS[k].first == sample->substance[i] && QUANTUM_PAIRS[k].second == sample->substance[j]) {
                    pairs[spec->pair_count++] = (struct pair_constant){
                        i, j, "quantum-peng-robinson", PAIR_FROM_LIBRARY, QUANTUM_PAIRS[k].kij, QUANTUM_PAIRS[k].lij};
                }
            }
        }
    }
    spec->pairs = pairs;
}

/* The components and pairs that a deck gets. */
static const struct fluid *create_from_library(const struct sample_fluid *sample, struct arena *arena)
{
    const char *names[SAMPLE_MOST];
    for (size_t i = 0; i < sample->count; i++) {
        names[i] = SAMPLE_SUBSTANCE[sample->substance[i]].name;
    }
    return create(sample->method, &measured_case_fluid(sample->method, names, sample->count, arena)->spec, arena);
}

const struct fluid *sample_fluid_create(const struct sample_fluid *sample, struct arena *arena)
{
    const size_t count = sample->count;
    if (sample->pairs == SAMPLE_LIBRARY) {
        return create_from_library(sample, arena);
    }
    const struct pure_spec **pure = arena_alloc(arena, count, sizeof *pure);
    for (size_t i = 0; i < count; i++) {
        pure[i] = &SAMPLE_SUBSTANCE[sample->substance[i]];
    }
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct fluid_spec){.count = count, .pure = pure};
    switch (sample->pairs) {
    case SAMPLE_INVENTED:
        spec->kij = invent(count, arena);
        break;
    case SAMPLE_GROUPS:
        spec->group_pair_count = SAMPLE_GROUP_PAIRS_COUNT;
        spec->group_pairs = SAMPLE_GROUP_PAIRS;
        break;
    case SAMPLE_CONSTANTS:
        add_quantum_pairs(sample, spec, arena);
        break;
    case SAMPLE_LIBRARY:
        break;
    }
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
