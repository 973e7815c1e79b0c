#include "filling/volume_fractions.h"

static bool molar_volume_alone(const struct case_fluid *fluid, size_t i, const char *method, struct arena *arena,
                               double *molar_volume)
{
    const double one = 1.0;
    const struct case_fluid alone = {
        .name = fluid->components[i]->name,
        .count = 1,
        .components = &fluid->components[i],
        .fractions = &one,
        .molar_mass = fluid->components[i]->molar_mass.value,
        .spec = {.count = 1, .pure = &fluid->spec.pure[i]},
    };
    struct method_run run = method_run_create(&alone, method, false, arena);
    bool holds_liquid;
    return run.fluid != NULL &&
           free_volume_at(&run, fluid->temperature, fluid->pressure, molar_volume, &holds_liquid) == ANSWER_OK;
}

const struct case_fluid *fluid_by_amount(const struct case_fluid *fluid, const char *method, struct arena *arena)
{
    if (!fluid->has_state) {
        return fluid;
    }
    double *fractions = arena_alloc(arena, fluid->count, sizeof *fractions);
    struct case_fluid *made = arena_alloc(arena, 1, sizeof *made);
    double sum = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        double molar_volume;
        if (!molar_volume_alone(fluid, i, method, arena, &molar_volume)) {
            return NULL;
        }
        fractions[i] = fluid->fractions[i] / molar_volume;
        sum += fractions[i];
    }
    *made = *fluid;
    made->has_state = false;
    made->fractions = fractions;
    made->molar_mass = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        fractions[i] /= sum;
        made->molar_mass += fractions[i] * fluid->components[i]->molar_mass.value;
    }
    return made;
}
