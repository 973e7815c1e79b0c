/* The unknowns of a flash and the Hessian of its Gibbs energy: see split.c for both. */
#include "equilibrium/split_internal.h"

size_t flash_rest_phase(const struct flash *f, size_t i)
{
    size_t rest = 0;
    for (size_t k = 1; k < f->phases; k++) {
        if (f->ws->amounts[k][i] > f->ws->amounts[rest][i]) {
            rest = k;
        }
    }
    return rest;
}

struct unknown flash_unknown_at(const struct flash *f, size_t index)
{
    const size_t others = f->phases - 1;
    struct unknown u = {.i = f->ws->active[index / others]};
    u.rest = flash_rest_phase(f, u.i);
    u.phase = index % others;
    if (u.phase >= u.rest) {
        u.phase++;
    }
    return u;
}

size_t flash_unknowns_of(const struct flash *f)
{
    return (f->phases - 1) * f->ws->active_count;
}

/* d ln f_i / d n_j in phase k. */
static double ln_f_slope(const struct equilibrium_workspace *ws, size_t k, size_t i, size_t j)
{
    const struct phase *phase = ws->phase[k];
    const double slope = phase->dln_phi_dn[i * ws->count + j] - 1.0 / phase->amount;
    return i == j ? slope + 1.0 / ws->amounts[k][i] : slope;
}

static double hessian_entry(const struct equilibrium_workspace *ws, struct unknown u, struct unknown v)
{
    double sum = 0.0;
    if (u.phase == v.phase) {
        sum += ln_f_slope(ws, u.phase, u.i, v.i);
    } else if (u.phase == v.rest) {
        sum -= ln_f_slope(ws, u.phase, u.i, v.i);
    }
    if (u.rest == v.rest) {
        sum += ln_f_slope(ws, u.rest, u.i, v.i);
    } else if (u.rest == v.phase) {
        sum -= ln_f_slope(ws, u.rest, u.i, v.i);
    }
    return sum;
}

/* Two phases, the usual case: an entry is the sum of both slopes, negative where the two components have different
 * rest phases. ws->step lends its room to the scales with that sign. */
static void set_hessian_of_two(const struct flash *f, double shift)
{
    struct equilibrium_workspace *ws = f->ws;
    const size_t size = ws->active_count;
    const double *first = ws->phase[0]->dln_phi_dn, *second = ws->phase[1]->dln_phi_dn;
    const double dilution = 1.0 / ws->phase[0]->amount + 1.0 / ws->phase[1]->amount;
    for (size_t a = 0; a < size; a++) {
        const size_t i = ws->active[a], row = i * ws->count;
        ws->step[a] = flash_rest_phase(f, i) == 0 ? ws->scale[a] : -ws->scale[a];
        for (size_t b = 0; b <= a; b++) {
            const size_t j = row + ws->active[b];
            ws->matrix[a * size + b] = ws->step[a] * ws->step[b] * (first[j] + second[j] - dilution);
        }
        const double ideal = 1.0 / ws->amounts[0][i] + 1.0 / ws->amounts[1][i];
        ws->matrix[a * size + a] += ws->scale[a] * ws->scale[a] * ideal + shift;
    }
}

void flash_set_hessian(const struct flash *f, double shift)
{
    struct equilibrium_workspace *ws = f->ws;
    const size_t size = flash_unknowns_of(f);
    if (f->phases == 2) {
        set_hessian_of_two(f, shift);
        return;
    }
    for (size_t a = 0; a < size; a++) {
        const struct unknown u = flash_unknown_at(f, a);
        for (size_t b = 0; b <= a; b++) {
            ws->matrix[a * size + b] = ws->scale[a] * ws->scale[b] * hessian_entry(ws, u, flash_unknown_at(f, b));
        }
        ws->matrix[a * size + a] += shift;
    }
}
