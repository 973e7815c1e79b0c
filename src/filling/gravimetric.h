/* The composition of a mixture from the masses of its parts: the gravimetric equation of ISO 6142-1,
 *   x_i = sum_p n_pi / sum_p sum_k n_pk,
 * n_pi the amount of component i that the mass m_p of part p brings: m_p X_pi / sum_k X_pk M_k with X by mole, and
 * m_p w_pi / M_i with w by mass. Its uncertain inputs, its derivatives by them, and the two as a model to propagate
 * through. Ownership: everything lives in the arena given to gravimetric_create.
 */
#ifndef TAREWRIGHT_FILLING_GRAVIMETRIC_H
#define TAREWRIGHT_FILLING_GRAVIMETRIC_H

#include "filling/propagation.h"

/* Something put into the vessel, or in it before. */
struct gravimetric_part {
    double mass;       /* kg */
    double *fractions; /* [count] */
    bool is_by_mass;   /* the fractions are parts of its mass, else of its amount */
    bool has_rest;     /* one component completes the whole; else fractions that change are brought to a whole */
    size_t rest;
};

enum gravimetric_kind { GRAVIMETRIC_MASS, GRAVIMETRIC_FRACTION, GRAVIMETRIC_MOLAR_MASS };

struct gravimetric_input {
    enum gravimetric_kind kind;
    size_t part, component;    /* of a fraction; the component of a molar mass */
    const double *mass_change; /* [parts], kg for each unit of it; of a mass */
    double value, standard;    /* SI; standard uncertainty, above 0 */
};

struct gravimetric {
    size_t count, parts;
    const double *molar_masses; /* [count], kg/mol */
    const struct gravimetric_part *part;
    size_t input_count;
    const struct gravimetric_input *inputs;
};

/* Mole fractions [count] of the whole. */
void gravimetric_fractions(const struct gravimetric *of, double x[]);

/* dx_i/dq of one input, [count]. */
void gravimetric_derivatives(const struct gravimetric *of, const struct gravimetric_input *input, struct arena *arena,
                             double derivatives[]);

/* Inputs to outputs, which are the mole fractions. The model's memory is in the arena. */
struct propagation_model gravimetric_model(const struct gravimetric *of, struct arena *arena);

/* The same for the fractions of some components alone, told[told_count], and without derivatives: for random draws,
 * whose cost lies in putting each output in order. */
struct propagation_model gravimetric_model_of(const struct gravimetric *of, const size_t told[], size_t told_count,
                                              struct arena *arena);

#endif
