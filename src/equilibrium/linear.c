#include "equilibrium/linear.h"

#include <math.h>

enum { MOST_SWEEPS = 60 };

bool linear_factor(double *matrix, size_t size)
{
    for (size_t i = 0; i < size; i++) {
        double *row = matrix + i * size;
        for (size_t j = 0; j <= i; j++) {
            const double *other = matrix + j * size;
            double sum = row[j];
            for (size_t k = 0; k < j; k++) {
                sum -= row[k] * other[k];
            }
            if (j < i) {
                row[j] = sum * other[j];
            } else if (sum > 0.0) {
                row[i] = 1.0 / sqrt(sum); /* the diagonal keeps its reciprocal: solving then divides nowhere */
            } else {
                return false;
            }
        }
    }
    return true;
}

void linear_solve_factored(const double *factor, size_t size, double *b)
{
    for (size_t i = 0; i < size; i++) {
        const double *row = factor + i * size;
        double sum = b[i];
        for (size_t k = 0; k < i; k++) {
            sum -= row[k] * b[k];
        }
        b[i] = sum * row[i];
    }
    for (size_t i = size; i-- > 0;) {
        const double *row = factor + i * size;
        const double value = b[i] * row[i];
        b[i] = value;
        for (size_t k = 0; k < i; k++) {
            b[k] -= row[k] * value;
        }
    }
}

static size_t pivot_of(const double *matrix, size_t size, size_t column)
{
    size_t best = column;
    for (size_t i = column + 1; i < size; i++) {
        if (fabs(matrix[i * size + column]) > fabs(matrix[best * size + column])) {
            best = i;
        }
    }
    return best;
}

static void exchange(double *a, double *b, size_t size)
{
    for (size_t k = 0; k < size; k++) {
        const double kept = a[k];
        a[k] = b[k];
        b[k] = kept;
    }
}

bool linear_solve(double *matrix, size_t size, double *b)
{
    for (size_t c = 0; c < size; c++) {
        const size_t pivot = pivot_of(matrix, size, c);
        double *row = matrix + c * size;
        if (pivot != c) {
            exchange(row, matrix + pivot * size, size);
            exchange(b + c, b + pivot, 1);
        }
        if (!(fabs(row[c]) > 0.0) || !isfinite(row[c])) {
            return false;
        }
        for (size_t i = c + 1; i < size; i++) {
            double *below = matrix + i * size;
            const double factor = below[c] / row[c];
            for (size_t k = c + 1; k < size; k++) {
                below[k] -= factor * row[k];
            }
            b[i] -= factor * b[c];
        }
    }
    for (size_t i = size; i-- > 0;) {
        const double *row = matrix + i * size;
        for (size_t k = i + 1; k < size; k++) {
            b[i] -= row[k] * b[k];
        }
        b[i] /= row[i];
    }
    return true;
}

/* Turns rows, or columns where `stride` says so, p and q by the angle of cosine c and sine s. */
static void rotate(double *first, double *second, size_t size, size_t stride, double c, double s)
{
    for (size_t k = 0; k < size; k++) {
        const double a = first[k * stride], b = second[k * stride];
        first[k * stride] = c * a - s * b;
        second[k * stride] = s * a + c * b;
    }
}

static void annihilate(double *matrix, double *vectors, size_t size, size_t p, size_t q)
{
    const double off = matrix[p * size + q];
    if (!(fabs(off) > 0.0)) {
        return;
    }
    const double theta = (matrix[q * size + q] - matrix[p * size + p]) / (2.0 * off);
    const double t = (theta < 0.0 ? -1.0 : 1.0) / (fabs(theta) + hypot(theta, 1.0));
    const double c = 1.0 / hypot(t, 1.0), s = t * c;
    rotate(matrix + p, matrix + q, size, size, c, s);
    rotate(matrix + p * size, matrix + q * size, size, 1, c, s);
    rotate(vectors + p, vectors + q, size, size, c, s);
}

/* The sum of squares off the diagonal, against that on it. */
static bool is_diagonal(const double *matrix, size_t size)
{
    double off = 0.0, on = 0.0;
    for (size_t i = 0; i < size; i++) {
        for (size_t j = 0; j < size; j++) {
            *(i == j ? &on : &off) += matrix[i * size + j] * matrix[i * size + j];
        }
    }
    return off <= 1e-34 * on;
}

void linear_eigen(double *matrix, size_t size, double *values, double *vectors)
{
    for (size_t i = 0; i < size * size; i++) {
        vectors[i] = i % (size + 1) == 0 ? 1.0 : 0.0;
    }
    for (int sweep = 0; sweep < MOST_SWEEPS && !is_diagonal(matrix, size); sweep++) {
        for (size_t p = 0; p + 1 < size; p++) {
            for (size_t q = p + 1; q < size; q++) {
                annihilate(matrix, vectors, size, p, q);
            }
        }
    }
    for (size_t i = 0; i < size; i++) {
        values[i] = matrix[i * size + i];
    }
}
