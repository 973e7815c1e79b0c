/* What the files of the virial methods share: second and third coefficients by correlations, as functions of
 * temperature. */
#ifndef TAREWRIGHT_FLUID_VIRIAL_INTERNAL_H
#define TAREWRIGHT_FLUID_VIRIAL_INTERNAL_H

#include "fluid/fluid.h"

/* A function of temperature with its first and second derivatives. */
struct virial_curve {
    double value, t, tt;
};

enum virial_correlation { VIRIAL_PITZER_ABBOTT, VIRIAL_TSONOPOULOS };

/* The constants of a molecule, or those that stand for a pair or a triple of unlike ones. */
struct virial_constants {
    double critical_temperature, critical_volume; /* K, m3/mol */
    double compressibility;                       /* critical */
    double acentric;
    double polar;        /* the dipole's constant a of Tsonopoulos */
    double inverse_mass; /* mol/kg; of unlike molecules the mean */
    bool is_quantum;     /* a quantum gas takes part */
};

/* The constants of a component; `set` are the classical critical constants of a quantum gas, else NULL. */
struct virial_constants virial_of_component(const struct pure_spec *pure, const struct cubic_set *set);

/* Those of a pair, and of three from those of their pairs. */
struct virial_constants virial_of_pair(const struct virial_constants *one, const struct virial_constants *other,
                                       double kij);
struct virial_constants virial_of_triple(const struct virial_constants *ij, const struct virial_constants *ik,
                                         const struct virial_constants *jk);

/* B in m3/mol, and C in m6/mol2 by Orbey and Vera. */
struct virial_curve virial_second(enum virial_correlation correlation, const struct virial_constants *of, double T);
struct virial_curve virial_third(const struct virial_constants *of, double T);

#endif
