/* Small dense systems, solved in the caller's memory.
 *
 * Matrices are stored by rows, [size * size]. Nothing is allocated; sizes are those of a mixture, up to a few tens.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_LINEAR_H
#define TAREWRIGHT_EQUILIBRIUM_LINEAR_H

#include <stdbool.h>
#include <stddef.h>

/* Cholesky's factor of a symmetric matrix, left in its lower triangle; false, with the matrix spoiled, unless it is
 * positive definite. Only the lower triangle is read. */
bool linear_factor(double *matrix, size_t size);

/* Solves with that factor; `b` becomes the solution. */
void linear_solve_factored(const double *factor, size_t size, double *b);

/* Solves a general system by elimination with row exchanges: `matrix` is spoiled, `b` becomes the solution. False
 * when the matrix is singular. */
bool linear_solve(double *matrix, size_t size, double *b);

/* All eigenvalues of a symmetric matrix by Jacobi's rotations (Golub and Van Loan, Matrix Computations, section 8.5):
 * `matrix` is spoiled, values[size], and vectors[size * size] with the k-th vector in the k-th column. */
void linear_eigen(double *matrix, size_t size, double *values, double *vectors);

#endif
