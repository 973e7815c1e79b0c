/* A closed vessel in which pure solids stand beside the fluid's phases.
 *
 * Method-agnostic; nothing is allocated after solid_vessel_create.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_SOLID_VESSEL_H
#define TAREWRIGHT_EQUILIBRIUM_SOLID_VESSEL_H

#include "equilibrium/mixture_vessel.h"
#include "fluid/solid.h"

enum { MOST_FORMERS = 8 };

/* Largest |ln f_fluid - ln f_solid| of a solid that is reported, and the largest by which a component without its solid
 * may exceed it. */
#define SOLID_LN_F_TOLERANCE 1e-10

/* A component that can be a solid, at one temperature: ln f = ln_fugacity + poynting p. */
struct former {
    size_t component;
    enum solid_line line;
    double line_pressure; /* Pa */
    double ln_fugacity;   /* ln(f / Pa) of the solid, drawn out to p = 0 */
    double molar_volume;  /* m3/mol */
    double poynting;      /* molar_volume / (R T), 1/Pa, with the gas constant of the pure fluid */
};

/* The former of `component`, of which `pure` is the fluid alone, by the same method and at the temperature wanted.
 * Answers as solid_at does; the other as solid_by_sublimation. */
enum answer former_at(const struct solid_spec *solid, const struct fluid_at_t *pure, size_t component,
                      struct former *out);
enum answer former_by_sublimation(const struct solid_spec *solid, const struct fluid_at_t *pure, size_t component,
                                  struct former *out);

struct solid_vessel {
    struct mixture_vessel *fluid; /* what is left of the fluid, in what the solids leave of the volume */
    size_t former_count;
    struct former formers[MOST_FORMERS];
    double solid[MOST_FORMERS]; /* mol; 0: that solid is not there */
    double residual;            /* largest |ln f_fluid - ln f_solid| of the solids that are there; 0 without any */
    int steps;                  /* closed vessels of the fluid that were solved */
    double *amounts, *trial;    /* [count], mol left in the fluid: the answer's, and a step's */
};

struct solid_vessel *solid_vessel_create(size_t count, struct arena *arena);

/* n[] mol (zeros allowed) in `volume` m3 at the temperature set, each of the formers with its solid where that lowers
 * the Helmholtz energy. ANSWER_OUT_OF_RANGE for an input without meaning, as of mixture_vessel_at_tv, for a fluid of
 * one component (pure_solid_vessel_at_tv answers that) and for more than MOST_FORMERS; ANSWER_FAILED rather than
 * anything unconverged. */
enum answer solid_vessel_at_tv(const struct fluid_at_t *at_t, double volume, const double n[],
                               const struct former formers[], size_t former_count, struct equilibrium_workspace *ws,
                               struct solid_vessel *out);

/* A pure substance with its solid: vapour over it below the triple point, liquid pressed onto it above. */
struct pure_solid_vessel {
    double pressure;                   /* Pa, where both have one fugacity; without a solid, of the fluid alone */
    double fluid_amount, solid_amount; /* mol; no solid: the fluid alone does not reach that pressure */
    double fluid_volume, solid_volume; /* m3/mol; fluid_volume of the fluid that is there */
    double phi;                        /* fugacity coefficient of the fluid at that pressure */
    double residual;                   /* ln f_fluid - ln f_solid; 0 without a solid */
};

/* `amount` mol in `volume` m3 at the temperature set. ANSWER_NO_SUCH_ROOT where the method has no vapour, or liquid, at
 * that pressure, ANSWER_OUT_OF_RANGE where the solid alone overfills the vessel. */
enum answer pure_solid_vessel_at_tv(const struct fluid_at_t *at_t, double volume, double amount,
                                    const struct former *former, struct pure_solid_vessel *out);

#endif
