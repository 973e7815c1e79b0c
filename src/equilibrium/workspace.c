#include "equilibrium/workspace.h"

#include <math.h>

static double *vector(size_t count, struct arena *arena)
{
    return arena_alloc(arena, count, sizeof(double));
}

static void create_trial_vectors(struct equilibrium_workspace *ws, struct arena *arena)
{
    double **const vectors[] = {&ws->feed, &ws->ln_feed,     &ws->ln_pure,     &ws->d,     &ws->feed_d,
                                &ws->ln_K, &ws->ln_K_change, &ws->last_change, &ws->W,     &ws->ln_W,
                                &ws->g,    &ws->kept_W,      &ws->kept_ln_W,   &ws->offset};
    for (size_t k = 0; k < sizeof vectors / sizeof *vectors; k++) {
        *vectors[k] = vector(ws->count, arena);
    }
}

struct equilibrium_workspace *equilibrium_workspace_create(size_t count, struct arena *arena)
{
    struct equilibrium_workspace *ws = arena_alloc(arena, 1, sizeof *ws);
    const size_t unknowns = (MOST_PHASES - 1) * count + 2;
    ws->count = count;
    ws->active = arena_alloc(arena, count, sizeof *ws->active);
    create_trial_vectors(ws, arena);
    ws->reference = phase_create(count, arena);
    ws->trial = phase_create(count, arena);
    ws->known = phase_create(count, arena);
    ws->known_factor = vector(count * count, arena);
    for (size_t k = 0; k < MOST_PHASES; k++) {
        ws->phase[k] = phase_create(count, arena);
        ws->amounts[k] = vector(count, arena);
        ws->candidate[k] = vector(count, arena);
        ws->known_hessian[k] = vector(count * count, arena);
        ws->valley[k] = vector(count, arena);
    }
    ws->matrix = vector(unknowns * unknowns, arena);
    ws->step = vector(unknowns, arena);
    ws->scale = vector(unknowns, arena);
    ws->border = vector(unknowns, arena);
    ws->partial_volume = vector(unknowns, arena);
    ws->unknowns = vector(unknowns, arena);
    ws->next_unknowns = vector(unknowns, arena);
    ws->next_slope = vector(unknowns, arena);
    ws->crossed = vector(unknowns, arena);
    ws->slope_before = vector(unknowns, arena);
    ws->slope_after = vector(unknowns, arena);
    return ws;
}

double amount_of(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

bool workspace_set_feed(struct equilibrium_workspace *ws, const double z[])
{
    double sum = 0.0;
    ws->active_count = 0;
    for (size_t i = 0; i < ws->count; i++) {
        if (!(z[i] >= 0.0) || !isfinite(z[i])) {
            return false;
        }
        sum += z[i];
        if (z[i] > 0.0) {
            ws->active[ws->active_count++] = i;
        }
    }
    for (size_t i = 0; i < ws->count; i++) {
        ws->feed[i] = z[i] > 0.0 ? z[i] / sum : 0.0;
        ws->ln_feed[i] = z[i] > 0.0 ? log(ws->feed[i]) : 0.0;
    }
    return sum > 0.0 && isfinite(sum);
}

/* ln(vapour pressure / critical pressure). The coefficients are the papers'. */
static double ln_reduced_vapour_pressure(double Tr, double omega)
{
    if (Tr > 1.0) {
        return 5.373 * (1.0 + omega) * (1.0 - 1.0 / Tr);
    }
    const double ln_Tr = log(Tr), Tr_6 = Tr * Tr * Tr * Tr * Tr * Tr;
    const double simple = 5.92714 - 6.09648 / Tr - 1.28862 * ln_Tr + 0.169347 * Tr_6;
    const double departure = 15.2518 - 15.6875 / Tr - 13.4721 * ln_Tr + 0.43577 * Tr_6;
    return simple + omega * departure;
}

void workspace_set_pure(struct equilibrium_workspace *ws, const struct fluid_at_t *at_t, double pressure)
{
    const struct fluid_spec *spec = at_t->fluid->spec;
    for (size_t i = 0; i < ws->count; i++) {
        const struct pure_spec *pure = spec->pure[i];
        ws->ln_pure[i] = 0.0;
        if (pure->critical_temperature.given && pure->critical_pressure.given) {
            const double omega = pure->acentric.given ? pure->acentric.value : 0.0;
            const double Tr = at_t->temperature / pure->critical_temperature.value;
            ws->ln_pure[i] = log(pure->critical_pressure.value / pressure) + ln_reduced_vapour_pressure(Tr, omega);
        }
    }
}
