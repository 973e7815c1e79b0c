#include "filling/gravimetric.h"

#include <math.h>
#include <string.h>

/* ---- the equation ------------------------------------------------------------------------------------------------ */

static double molar_mass_of(const double X[], const double M[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += X[i] * M[i];
    }
    return sum;
}

/* Adds what one part brings to n[]; returns its amount. */
static double add_amounts(double mass, const double X[], bool is_by_mass, const double M[], size_t count, double n[])
{
    const double amount = is_by_mass ? 0.0 : mass / molar_mass_of(X, M, count);
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        const double brought = is_by_mass ? mass * X[i] / M[i] : amount * X[i];
        n[i] += brought;
        sum += brought;
    }
    return sum;
}

static double whole_of(const struct gravimetric *of, double n[])
{
    double whole = 0.0;
    memset(n, 0, of->count * sizeof *n);
    for (size_t p = 0; p < of->parts; p++) {
        const struct gravimetric_part *part = &of->part[p];
        whole += add_amounts(part->mass, part->fractions, part->is_by_mass, of->molar_masses, of->count, n);
    }
    return whole;
}

void gravimetric_fractions(const struct gravimetric *of, double x[])
{
    const double whole = whole_of(of, x);
    for (size_t i = 0; i < of->count; i++) {
        x[i] /= whole;
    }
}

/* ---- derivatives ------------------------------------------------------------------------------------------------- */

/* How the fractions of a part move with one of them: the rest gives what it takes, or all do in proportion. */
static double fraction_change(const struct gravimetric_part *part, size_t moved, size_t i)
{
    const double own = i == moved ? 1.0 : 0.0;
    return part->has_rest ? own - (i == part->rest ? 1.0 : 0.0) : own - part->fractions[i];
}

/* d n_pi / dX_pk: by mole a_p (dX_i - X_i dM_p / M_p), by mass m_p dX_i / M_i. */
static void set_fraction_changes(const struct gravimetric *of, const struct gravimetric_input *input, double dn[])
{
    const struct gravimetric_part *part = &of->part[input->part];
    const double *M = of->molar_masses;
    const double M_p = molar_mass_of(part->fractions, M, of->count);
    double dM_p = 0.0;
    for (size_t i = 0; i < of->count; i++) {
        dM_p += fraction_change(part, input->component, i) * M[i];
    }
    for (size_t i = 0; i < of->count; i++) {
        const double dX = fraction_change(part, input->component, i);
        dn[i] = part->is_by_mass ? part->mass * dX / M[i] : part->mass / M_p * (dX - part->fractions[i] * dM_p / M_p);
    }
}

/* d n_i / dM_k: by mole -n_pi X_pk / M_p, by mass -n_pk / M_k of k alone. */
static void set_molar_mass_changes(const struct gravimetric *of, size_t k, double dn[])
{
    for (size_t p = 0; p < of->parts; p++) {
        const struct gravimetric_part *part = &of->part[p];
        const double *X = part->fractions, *M = of->molar_masses, M_p = molar_mass_of(X, M, of->count);
        if (part->is_by_mass) {
            dn[k] -= part->mass * X[k] / (M[k] * M[k]);
            continue;
        }
        for (size_t i = 0; i < of->count; i++) {
            dn[i] -= part->mass * X[i] * X[k] / (M_p * M_p);
        }
    }
}

static void set_mass_changes(const struct gravimetric *of, const struct gravimetric_input *input, double dn[])
{
    for (size_t p = 0; p < of->parts; p++) {
        const struct gravimetric_part *part = &of->part[p];
        add_amounts(input->mass_change[p], part->fractions, part->is_by_mass, of->molar_masses, of->count, dn);
    }
}

/* From the amounts': dx_i = (dn_i - x_i sum dn) / n. */
void gravimetric_derivatives(const struct gravimetric *of, const struct gravimetric_input *input, struct arena *arena,
                             double derivatives[])
{
    double *n = arena_alloc(arena, of->count, sizeof *n), sum = 0.0;
    const double whole = whole_of(of, n);
    memset(derivatives, 0, of->count * sizeof *derivatives);
    switch (input->kind) {
    case GRAVIMETRIC_MASS:
        set_mass_changes(of, input, derivatives);
        break;
    case GRAVIMETRIC_FRACTION:
        set_fraction_changes(of, input, derivatives);
        break;
    case GRAVIMETRIC_MOLAR_MASS:
        set_molar_mass_changes(of, input->component, derivatives);
        break;
    }
    for (size_t i = 0; i < of->count; i++) {
        sum += derivatives[i];
    }
    for (size_t i = 0; i < of->count; i++) {
        derivatives[i] = (derivatives[i] - n[i] / whole * sum) / whole;
    }
}

/* ---- the model --------------------------------------------------------------------------------------------------- */

/* The equation with inputs moved; each thread has its own. */
struct moved {
    const struct gravimetric *of;
    struct arena *arena; /* of the thread that differentiates */
    double *masses;      /* [parts] */
    double *fractions;   /* [parts * count] */
    double *molar_masses;
    const size_t *told; /* [told_count]; NULL: all */
    size_t told_count;
    double *all; /* [count] */
};

static struct moved *create_moved(const struct gravimetric *of, struct arena *arena)
{
    struct moved *moved = arena_alloc(arena, 1, sizeof *moved);
    *moved = (struct moved){.of = of,
                            .arena = arena,
                            .masses = arena_alloc(arena, of->parts, sizeof(double)),
                            .fractions = arena_alloc(arena, of->parts * of->count, sizeof(double)),
                            .molar_masses = arena_alloc(arena, of->count, sizeof(double)),
                            .all = arena_alloc(arena, of->count, sizeof(double))};
    return moved;
}

static void *moved_for_thread(void *context, struct arena *arena)
{
    const struct moved *from = context;
    struct moved *own = create_moved(from->of, arena);
    own->told = from->told;
    own->told_count = from->told_count;
    return own;
}

static void take_as_written(struct moved *it)
{
    const struct gravimetric *of = it->of;
    memcpy(it->molar_masses, of->molar_masses, of->count * sizeof *it->molar_masses);
    for (size_t p = 0; p < of->parts; p++) {
        it->masses[p] = of->part[p].mass;
        memcpy(&it->fractions[p * of->count], of->part[p].fractions, of->count * sizeof *it->fractions);
    }
}

static void move_input(struct moved *it, const struct gravimetric_input *input, double by)
{
    switch (input->kind) {
    case GRAVIMETRIC_MASS:
        for (size_t p = 0; p < it->of->parts; p++) {
            it->masses[p] += by * input->mass_change[p];
        }
        break;
    case GRAVIMETRIC_FRACTION:
        it->fractions[input->part * it->of->count + input->component] += by;
        break;
    case GRAVIMETRIC_MOLAR_MASS:
        it->molar_masses[input->component] += by;
        break;
    }
}

/* The rest completes the whole; without one the fractions are brought to it. False where that leaves one negative. */
static bool complete_fractions(const struct gravimetric_part *part, size_t count, double X[])
{
    double sum = 0.0;
    bool is_possible = true;
    for (size_t i = 0; i < count; i++) {
        sum += part->has_rest && i == part->rest ? 0.0 : X[i];
    }
    if (part->has_rest) {
        X[part->rest] = 1.0 - sum;
    }
    for (size_t i = 0; i < count; i++) {
        X[i] /= part->has_rest ? 1.0 : sum;
        is_possible = is_possible && X[i] >= 0.0;
    }
    return is_possible;
}

static enum model_answer evaluate(void *context, const double inputs[], double outputs[])
{
    struct moved *it = context;
    const struct gravimetric *of = it->of;
    double whole = 0.0;
    take_as_written(it);
    for (size_t k = 0; k < of->input_count; k++) {
        move_input(it, &of->inputs[k], inputs[k] - of->inputs[k].value);
    }
    memset(outputs, 0, of->count * sizeof *outputs);
    for (size_t p = 0; p < of->parts; p++) {
        double *X = &it->fractions[p * of->count];
        if (!complete_fractions(&of->part[p], of->count, X) || !(it->masses[p] >= 0.0)) {
            return MODEL_IMPOSSIBLE;
        }
        whole += add_amounts(it->masses[p], X, of->part[p].is_by_mass, it->molar_masses, of->count, outputs);
    }
    for (size_t i = 0; i < of->count; i++) {
        outputs[i] /= whole;
    }
    return MODEL_OK;
}

static enum model_answer evaluate_told(void *context, const double inputs[], double outputs[])
{
    struct moved *it = context;
    const enum model_answer answer = evaluate(context, inputs, it->all);
    for (size_t k = 0; answer == MODEL_OK && k < it->told_count; k++) {
        outputs[k] = it->all[it->told[k]];
    }
    return answer;
}

static bool differentiate(void *context, const double inputs[], double derivatives[])
{
    const struct moved *it = context;
    (void)inputs; /* they are asked for where the inputs are as written */
    for (size_t k = 0; k < it->of->input_count; k++) {
        gravimetric_derivatives(it->of, &it->of->inputs[k], it->arena, &derivatives[k * it->of->count]);
    }
    return true;
}

struct propagation_model gravimetric_model(const struct gravimetric *of, struct arena *arena)
{
    double *values = arena_alloc(arena, 2 * of->input_count + 1, sizeof *values);
    double *spreads = values + of->input_count;
    for (size_t k = 0; k < of->input_count; k++) {
        values[k] = of->inputs[k].value;
        spreads[k] = of->inputs[k].standard;
    }
    return (struct propagation_model){.input_count = of->input_count,
                                      .output_count = of->count,
                                      .values = values,
                                      .spreads = spreads,
                                      .evaluate = evaluate,
                                      .differentiate = differentiate,
                                      .context = create_moved(of, arena),
                                      .context_for_thread = moved_for_thread};
}

struct propagation_model gravimetric_model_of(const struct gravimetric *of, const size_t told[], size_t told_count,
                                              struct arena *arena)
{
    struct propagation_model model = gravimetric_model(of, arena);
    struct moved *moved = model.context;
    moved->told = told;
    moved->told_count = told_count;
    model.output_count = told_count;
    model.evaluate = evaluate_told;
    model.differentiate = NULL;
    return model;
}
