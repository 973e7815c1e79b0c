#include "filling/recipe.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_linalg.h>
#include <math.h>
#include <string.h>

/* Against a component's fraction, which may be missed, the mass is to be met: this many times as heavily. */
#define WEIGHT_OF_MASS 1e4
/* A parent that adds less than this part to what the others do is no parent of its own. */
#define LEAST_INDEPENDENCE 1e-9

/* ---- amounts ----------------------------------------------------------------------------------------------------- */

static double product_of(const double a[], const double b[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += a[i] * b[i];
    }
    return sum;
}

/* One row for each component of the target but the rest,
 *   sum_p a_p (X_pi - x_i) = x_i H - h_i, by x_i and the amount of the whole,
 * and one for the mass, sum_p a_p M_p = m - m_heel; a in parts of the whole. */
static void set_equations(const struct recipe_task *task, double scale, gsl_matrix *A, gsl_vector *b, bool is_square)
{
    double heel = 0.0;
    size_t row = 0;
    for (size_t i = 0; i < task->count; i++) {
        heel += task->heel[i];
    }
    for (size_t i = 0; i < task->count; i++) {
        const double x = task->target[i];
        if (i == task->rest || !(x > 0.0)) {
            continue;
        }
        for (size_t p = 0; p < task->parents; p++) {
            gsl_matrix_set(A, row, p, (task->parent[p][i] - x) / x);
        }
        gsl_vector_set(b, row++, (x * heel - task->heel[i]) / (x * scale));
    }
    const double weight = is_square ? 1.0 : WEIGHT_OF_MASS;
    for (size_t p = 0; p < task->parents; p++) {
        gsl_matrix_set(A, row, p,
                       weight * product_of(task->parent[p], task->molar_masses, task->count) * scale / task->mass);
    }
    gsl_vector_set(b, row, weight * (1.0 - product_of(task->heel, task->molar_masses, task->count) / task->mass));
}

static bool is_independent(const gsl_matrix *QR, size_t parents)
{
    double largest = 0.0, least = HUGE_VAL;
    for (size_t p = 0; p < parents; p++) {
        largest = fmax(largest, fabs(gsl_matrix_get(QR, p, p)));
        least = fmin(least, fabs(gsl_matrix_get(QR, p, p)));
    }
    return least > LEAST_INDEPENDENCE * largest;
}

enum answer recipe_amounts(const struct recipe_task *task, struct arena *arena, double amounts[])
{
    size_t rows = 0;
    for (size_t i = 0; i < task->count; i++) {
        rows += task->target[i] > 0.0;
    }
    if (task->parents == 0 || task->parents > rows) {
        return ANSWER_NO_SUCH_ROOT;
    }
    double *memory = arena_alloc(arena, rows * task->parents + 3 * rows + task->parents, sizeof *memory);
    gsl_matrix_view A = gsl_matrix_view_array(memory, rows, task->parents);
    gsl_vector_view b = gsl_vector_view_array(memory + rows * task->parents, rows);
    gsl_vector_view left = gsl_vector_view_array(memory + rows * task->parents + rows, rows);
    gsl_vector_view tau = gsl_vector_view_array(memory + rows * task->parents + 2 * rows, task->parents);
    gsl_vector_view a = gsl_vector_view_array(amounts, task->parents);
    const double scale = task->mass / product_of(task->target, task->molar_masses, task->count);
    set_equations(task, scale, &A.matrix, &b.vector, task->parents == rows);
    if (gsl_linalg_QR_decomp(&A.matrix, &tau.vector) != GSL_SUCCESS || !is_independent(&A.matrix, task->parents) ||
        gsl_linalg_QR_lssolve(&A.matrix, &tau.vector, &b.vector, &a.vector, &left.vector) != GSL_SUCCESS) {
        return ANSWER_NO_SUCH_ROOT;
    }
    for (size_t p = 0; p < task->parents; p++) {
        amounts[p] *= scale;
        if (!isfinite(amounts[p])) {
            return ANSWER_FAILED;
        }
    }
    return ANSWER_OK;
}

/* The amounts are linear in how much of the heel there is. */
double recipe_heel_part(const struct recipe_task *task, struct arena *arena)
{
    double *with = arena_alloc(arena, 2 * task->parents + task->count, sizeof *with);
    double *without = with + task->parents, part = 1.0;
    struct recipe_task empty = *task;
    empty.heel = without + task->parents;
    if (recipe_amounts(task, arena, with) != ANSWER_OK || recipe_amounts(&empty, arena, without) != ANSWER_OK) {
        return (double)NAN;
    }
    for (size_t p = 0; p < task->parents; p++) {
        if (without[p] < 0.0) {
            return (double)NAN;
        }
        if (with[p] < 0.0) {
            part = fmin(part, without[p] / (without[p] - with[p]));
        }
    }
    return part;
}

/* ---- order ------------------------------------------------------------------------------------------------------- */

static bool is_after(const struct recipe_nature *one, const struct recipe_nature *other)
{
    if (one->is_balance != other->is_balance) {
        return one->is_balance;
    }
    return one->critical_temperature < other->critical_temperature;
}

bool recipe_may_follow(const struct recipe_nature *one, const struct recipe_nature *next)
{
    return !((one->is_fuel && next->is_oxidant) || (one->is_oxidant && next->is_fuel));
}

/* Moves the parent at `from` to stand at `to`, before those in between. */
static void move_before(size_t order[], size_t from, size_t to)
{
    const size_t moved = order[from];
    memmove(&order[to + 1], &order[to], (from - to) * sizeof *order);
    order[to] = moved;
}

bool recipe_order(const struct recipe_nature natures[], size_t count, size_t order[])
{
    for (size_t i = 0; i < count; i++) {
        size_t place = i;
        for (; place > 0 && is_after(&natures[order[place - 1]], &natures[i]); place--) {
            order[place] = order[place - 1];
        }
        order[place] = i;
    }
    for (size_t i = 0; i + 1 < count; i++) {
        if (recipe_may_follow(&natures[order[i]], &natures[order[i + 1]])) {
            continue;
        }
        size_t k = i + 2;
        while (k < count && (natures[order[k]].is_fuel || natures[order[k]].is_oxidant)) {
            k++;
        }
        if (k == count) {
            return false;
        }
        move_before(order, k, i + 1);
    }
    return true;
}
