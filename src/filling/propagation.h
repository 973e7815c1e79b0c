/* Uncertainty carried through a model: by first-order sensitivities, and by random draws.
 *
 * The first after the Guide to the expression of uncertainty in measurement, JCGM 100:2008, clauses 5.1 and 6; the
 * second after its Supplement 1, JCGM 101:2008, clauses 7 and 8. Inputs are normal and independent of each other.
 * Ownership: results live in the arena given.
 */
#ifndef TAREWRIGHT_FILLING_PROPAGATION_H
#define TAREWRIGHT_FILLING_PROPAGATION_H

#include "base/arena.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

enum model_answer {
    MODEL_OK,
    MODEL_IMPOSSIBLE, /* these inputs cannot be: a fraction below zero */
    MODEL_NO_ANSWER   /* the solvers found nothing */
};

struct propagation_model {
    size_t input_count, output_count;
    const double *values;      /* [input_count], the best estimates */
    const double *spreads;     /* [input_count], standard uncertainties, above 0 */
    const double *resolutions; /* [output_count], changes below these are rounding; NULL: none */
    /* One evaluation; outputs that it does not have are NaN. */
    enum model_answer (*evaluate)(void *context, const double inputs[], double outputs[]);
    /* Derivatives at the best estimates, [input_count * output_count], where the model knows them: sensitivities are
     * then theirs. False, or NULL: they are found by differences. */
    bool (*differentiate)(void *context, const double inputs[], double derivatives[]);
    void *context;
    /* A context of a further thread's own, made before the threads begin; NULL: `context` serves all of them. */
    void *(*context_for_thread)(void *context, struct arena *arena);
    /* Told how far the work is, on the caller's thread; NULL: nobody waits. */
    void (*tell)(void *tell_context, size_t done, size_t count);
    void *tell_context;
};

/* ---- first order ---- */

struct first_order {
    bool is_known;      /* the model answers at the best estimates */
    const double *base; /* [output_count], the results there */
    /* [input_count * output_count]: c_i = dy/dx_i, by central differences over one standard uncertainty to either side
     * unless the model knows it; over one side only where the other is impossible. NaN where neither has an answer. */
    const double *sensitivities;
    const bool *is_one_sided; /* [input_count] */
    const double *standard;   /* [output_count], u(y) = sqrt(sum (c_i u_i)^2); NaN: not known */
    /* [output_count]: how far the results at two standard uncertainties, to either side, of one input lie from the
     * straight line of its sensitivity; the largest over the inputs. */
    const double *deviations;
};

/* 4 evaluations for each input, 2 where derivatives are known, and one at the best estimates, on the caller's thread.
 */
struct first_order propagate_first_order(const struct propagation_model *model, struct arena *arena);

/* Input i's part of the variance of output k, from 0 to 1. */
double first_order_share(const struct propagation_model *model, const struct first_order *first, size_t i, size_t k);

/* More than this part of the expanded uncertainty (k = 2) off the straight line is not nearly linear. */
#define NEARLY_LINEAR 0.1

bool first_order_is_linear(const struct first_order *first, size_t k);

/* ---- Monte Carlo ---- */

/* The ends of intervals that hold 95 % in the middle of a result's distribution. */
#define COVERAGE        0.95
#define COVERAGE_FACTOR 1.959963984540054 /* of a normal distribution, for that coverage */

struct drawn_output {
    size_t count;                     /* draws with an answer */
    double mean, standard, low, high; /* of them; NaN below two */
    double part_not_below_zero;       /* of them, 0 to 1: of a margin, how often it is kept */
    double tolerance;                 /* numerical tolerance of u(y) by first order */
    double low_off, high_off;         /* | end of the interval - (y -+ COVERAGE_FACTOR u) | */
    double low_blur, high_blur;       /* standard uncertainties of the ends themselves, from the number of draws */
    bool agrees;                      /* neither end is off by more than the tolerance */
    bool is_blurred;                  /* it does not, yet no end is off by more than the draws can tell */
};

struct drawn {
    size_t draws, impossible; /* asked for; drawn anew because the inputs could not be */
    size_t unanswered;        /* draws left out: the solvers found nothing, or no possible inputs were drawn */
    const struct drawn_output *outputs; /* [output_count] */
};

/* Significant digits of u(y) that the numerical tolerance keeps: delta = half of the last one's place. */
enum { TOLERANCE_DIGITS = 1 };

/* JCGM 101, 7.9.2: half of the place of the last of so many significant digits of u; 0 of 0. */
double numerical_tolerance(double standard, int digits);

/* `draws` evaluations in chunks of a fixed size, each with a generator of its own whose seed follows from `seed` and
 * the chunk's number: the same to the bit for any number of threads (`threads`; 0: as many as there are). A draw whose
 * inputs are impossible is drawn anew, so that the distribution of the inputs is cut off where they end. */
struct drawn propagate_draws(const struct propagation_model *model, const struct first_order *first, size_t draws,
                             uint64_t seed, size_t threads, struct arena *arena);

#endif
