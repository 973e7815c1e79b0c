/* A recipe at work: what the files of the preparation sheet share. */
#ifndef TAREWRIGHT_FILLING_PREPARATION_INTERNAL_H
#define TAREWRIGHT_FILLING_PREPARATION_INTERNAL_H

#include "filling/recipe.h"
#include "filling/requirement.h"

/* Amounts over all components of the sheet's fluid. */
struct preparation {
    struct sheet_run *run;
    const struct case_preparation *made;
    size_t count, parents;
    const double *molar_masses;         /* [count] */
    double volume;                      /* m3, of one vessel */
    double *const *parent;              /* [parents][count], mole fractions, in the order of the deck */
    double *heel;                       /* [count], mol */
    double heel_mass, heel_uncertainty; /* kg; its expanded uncertainty */
    struct recipe_task task;
    size_t *order;    /* [parents], of additions of the deck */
    double *amounts;  /* [parents], mol, in the order of the deck */
    double *finished; /* [count], mol */
    double mass;      /* kg, of all that is in the vessel */
};

/* What is in the vessel at one moment. */
struct filled_state {
    double pressure; /* Pa */
    size_t phase_count;
    bool has_liquid; /* one phase is taken for a gas as long as it is not told from one */
    double liquid_amount;
};

/* One addition as a method sees it. */
struct filled_step {
    struct filled_state before, after; /* at the temperature of the step */
    bool has_liquid_between;           /* while it goes in */
    double peak_pressure;              /* Pa, the highest of the step: what its supply has to reach */
};

/* Amounts in the vessel at a temperature, by one method. */
enum answer filled_at(const struct preparation *it, struct method_run *method, double temperature, const double n[],
                      struct filled_state *out);

/* kg/mol of a parent. */
double parent_molar_mass(const struct preparation *it, size_t p);

/* As the balance of a hall shows a mass. */
struct look look_weighed(const struct sheet_run *run);

/* All steps in their order, with `amounts` of the parents. */
enum answer follow_steps(const struct preparation *it, struct method_run *method, const double amounts[],
                         struct filled_step steps[]);

/* Steps by one method as a table. */
void tell_steps(const struct preparation *it, const struct method_run *method, const struct filled_step steps[]);

/* Temperatures and pressures at the end of additions that have a time; the steps' peak pressures become those. */
void tell_fast_fills(const struct preparation *it, struct method_run *method, struct filled_step steps[]);

/* The recipe by ideal partial pressures beside the real one, and what would come of it. */
void tell_ideal_recipe(const struct preparation *it, struct method_run *method, const struct filled_step steps[]);

/* The mass of each addition in every vessel of the sheet. */
void tell_all_vessels(const struct preparation *it);

/* Composition with its uncertainty, by recipe or as weighed, and what goes on the label. */
void tell_certificate(const struct preparation *it, const struct filled_step steps[]);

#endif
