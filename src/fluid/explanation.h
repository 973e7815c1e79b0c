/* How a method comes from T and V to the pressure and the fugacity coefficient: named numbers in the order in which
 * they are worked out, for a reader who redoes them with a calculator. Layout is the caller's.
 *
 * Ownership: texts are literals or stand in the explanation itself, which therefore must stay where it was filled in.
 * Nothing is allocated.
 */
#ifndef TAREWRIGHT_FLUID_EXPLANATION_H
#define TAREWRIGHT_FLUID_EXPLANATION_H

#include "fluid/fluid.h"

/* One number. A formula uses numbers, + - * / ^ ( ), blanks between factors never left out, the functions sqrt, exp and
 * ln, and symbols of the values before it; evaluated in SI it gives the value. */
struct explained_value {
    const char *symbol;  /* "tau" */
    const char *meaning; /* "reducing temperature over T" */
    const char *formula; /* "T_r / T"; NULL: a given number, or a sum too long to write out */
    const char *unit;    /* SI, "1" when dimensionless */
    size_t terms;        /* how many terms of the equation went into a sum; 0: not a sum */
    double value;        /* SI */
    bool is_cancelling;  /* larger than what it is used for: to be shown with all its digits */
};

enum { EXPLAINED_MOST = 40, EXPLAINED_TEXT_BYTES = 96 };

/* The last value is the pressure "p", or with fugacity "ln_phi". */
struct explanation {
    size_t count;
    struct explained_value values[EXPLAINED_MOST];
    char texts[2][EXPLAINED_TEXT_BYTES]; /* a method's own formulas, where the equation decides what is in them */
};

/* The homogeneous phase of `n` mol in `volume` m3 at the temperature set. ANSWER_CANNOT for a method that does not
 * explain itself (or not for mixtures); else as phase_tv. */
enum answer fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                          struct explanation *out);

/* For the methods' explain functions: one more value at the end. */
void explanation_add(struct explanation *explanation, struct explained_value value);

#endif
