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

enum { EXPLAINED_MOST = 48, EXPLAINED_TEXT_BYTES = 96, EXPLAINED_POOL_BYTES = 4096 };

/* Of a pure fluid the last value is the pressure "p", or with fugacity "ln_phi"; of a mixture they are "ln_phi_1" and
 * so on, each followed by the fugacity "f_1", where there are few enough components to be told. */
struct explanation {
    size_t count;
    struct explained_value values[EXPLAINED_MOST];
    char texts[2][EXPLAINED_TEXT_BYTES]; /* a method's own formulas, where the equation decides what is in them */
    size_t pool_used;
    char pool[EXPLAINED_POOL_BYTES]; /* explanation_text's */
};

/* Mixtures of so many components are told component by component, those of more by their sums alone. */
enum { EXPLAINED_COMPONENTS = 3 };

/* The homogeneous phase of `n` mol in `volume` m3 at the temperature set. ANSWER_CANNOT for a method that does not
 * explain itself (or not for mixtures); else as phase_tv. */
enum answer fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                          struct explanation *out);

/* For the methods' explain functions: one more value at the end. */
void explanation_add(struct explanation *explanation, struct explained_value value);

/* The same for a number that is no sum. */
void explanation_put(struct explanation *explanation, const char *symbol, const char *meaning, const char *formula,
                     const char *unit, double value);

/* Text that stands in the explanation. */
__attribute__((format(printf, 2, 3))) const char *explanation_text(struct explanation *explanation, const char *format,
                                                                   ...);

/* Mole fractions "x_1", "x_2", ... of few enough components. */
void explanation_put_fractions(struct explanation *explanation, const struct fluid_spec *spec, const double x[]);

/* Component i's "f_i = x_i * p * exp(ln_phi_i)" after its ln_phi_i; of a pure fluid nothing. */
void explanation_put_fugacity(struct explanation *explanation, size_t count, size_t i, double x, double ln_phi,
                              double pressure);

#endif
