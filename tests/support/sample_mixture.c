#include "support/sample_mixture.h"
#include "support/check.h"

static const double KIJ[SAMPLE_SUBSTANCES][SAMPLE_SUBSTANCES] = {
    [NITROGEN] = {0.0, 0.031, -0.017, 0.085, 0.08},           [METHANE] = {0.031, 0.0, 0.0919, 0.014, 0.0133},
    [CARBON_DIOXIDE] = {-0.017, 0.0919, 0.0, 0.1241, 0.1333}, [PROPANE] = {0.085, 0.014, 0.1241, 0.0, 0.0033},
    [N_BUTANE] = {0.08, 0.0133, 0.1333, 0.0033, 0.0},
};

double sample_kij(enum sample_substance a, enum sample_substance b)
{
    return KIJ[a][b];
}

struct sample_mixture sample_mixture_create(size_t count, const enum sample_substance *substance, double temperature,
                                            struct arena *arena)
{
    const struct pure_spec **pure = arena_alloc(arena, count, sizeof *pure);
    double *kij = arena_alloc(arena, count * count, sizeof *kij);
    for (size_t i = 0; i < count; i++) {
        pure[i] = &SAMPLE_SUBSTANCE[substance[i]];
        for (size_t j = 0; j < count; j++) {
            kij[i * count + j] = sample_kij(substance[i], substance[j]);
        }
    }
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct fluid_spec){.count = count, .pure = pure, .kij = kij};
    struct fluid_lack_report lack;
    struct sample_mixture mixture = {.fluid = fluid_create("peng-robinson", spec, arena, &lack)};
    assert_non_null(mixture.fluid);
    mixture.at_t = sample_at_t(mixture.fluid, temperature, arena);
    mixture.ws = equilibrium_workspace_create(count, arena);
    return mixture;
}

struct fluid_at_t *sample_binary_at_t(const struct sample_binary *binary, double temperature, struct arena *arena)
{
    struct pure_spec *pure = arena_alloc(arena, 2, sizeof *pure);
    const struct pure_spec **list = arena_alloc(arena, 2, sizeof *list);
    double *kij = arena_alloc(arena, 4, sizeof *kij);
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    for (size_t i = 0; i < 2; i++) {
        pure[i] = (struct pure_spec){.name = "sample",
                                     .molar_mass = 0.03,
                                     .critical_temperature = {true, binary->critical_temperature[i]},
                                     .critical_pressure = {true, binary->critical_pressure[i]},
                                     .acentric = {true, binary->acentric[i]}};
        list[i] = &pure[i];
    }
    kij[0] = kij[3] = 0.0;
    kij[1] = kij[2] = binary->kij;
    *spec = (struct fluid_spec){.count = 2, .pure = list, .kij = kij};
    struct fluid_lack_report lack;
    return sample_at_t(fluid_create("peng-robinson", spec, arena, &lack), temperature, arena);
}
