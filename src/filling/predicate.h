/* Rules and requirements are one predicate; this is the one piece of code that evaluates it.
 *
 * Nothing is allocated. `method->at_t` is used as workspace.
 */
#ifndef TAREWRIGHT_FILLING_PREDICATE_H
#define TAREWRIGHT_FILLING_PREDICATE_H

#include "filling/sheet.h"

/* Whether a predicate holds for a mass in the sheet's vessel, and by how much. */
struct predicate_finding {
    enum answer answer; /* not ANSWER_OK: undecided, only `words` and `worst_temperature` are set */
    bool holds;
    bool has_margin;          /* false for `one phase` and the like, and where none of the quantity is present */
    double margin;            /* SI of the quantity compared, positive when it holds */
    double bound;             /* what it was compared with, in the margin's unit; only with a margin */
    double worst_temperature; /* K */
    bool is_overfull;         /* fails only because the method knows no state as dense */
    bool has_contents;        /* false for what temperature or mass alone decides, and for an overfull vessel */
    struct contents worst;    /* the contents there */
    const char *words;        /* what was found where a number does not say it ("liquid-full"); may be NULL */
    bool has_window;          /* predicate_largest_mass: some larger mass meets the predicate again */
    double window;            /* kg, such a mass */
};

/* Evaluates over the predicate's temperature range: the worst temperature between the ends is located to 1 mK by
 * adaptive bracketing (features narrower than 0.5 K may be missed). `mass` is in kg and greater than zero. */
struct predicate_finding predicate_check(const struct sheet_run *run, struct method_run *method,
                                         const struct predicate *predicate, double mass);

/* A condition on the fluid itself, as the entries of the tables state them: checked for a vessel all but full of its
 * liquid at the predicate's temperature. Undecided where the fluid has no bubble point there. */
struct predicate_finding predicate_check_fluid(const struct sheet_run *run, struct method_run *method,
                                               const struct predicate *predicate);

/* The largest mass (kg) such that it and every smaller one meets the predicate, by one method: located to 1e-10,
 * relative, on the side that meets it; 0 when no mass does. *is_unlimited when no mass up to `most`, or to the densest
 * state the method knows, breaks it (*mass is that). answer: ANSWER_OK, or why it is undecided (at_limit->words may say
 * more). */
enum answer predicate_largest_mass(const struct sheet_run *run, struct method_run *method,
                                   const struct predicate *predicate, double most, double *mass, bool *is_unlimited,
                                   struct predicate_finding *at_limit);

/* A mass (kg) near the densest the method knows in the sheet's vessel: the upper end of searches. */
double predicate_most_mass(const struct sheet_run *run, struct method_run *method);

/* The vessel's rating a rule names (gauge, Pa), or NaN where it has none. */
double vessel_symbol(const struct case_vessel *vessel, enum case_symbol symbol);

#endif
