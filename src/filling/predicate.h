/* Rules and requirements are one predicate; this is the one piece of code that evaluates it.
 */
#ifndef TAREWRIGHT_FILLING_PREDICATE_H
#define TAREWRIGHT_FILLING_PREDICATE_H

#include "filling/sheet.h"

/* Whether a predicate holds for a mass in the sheet's vessel, and by how much. */
struct predicate_finding {
    enum answer answer;           /* not ANSWER_OK: undecided, the rest is unset */
    bool holds;
    bool has_margin;              /* false for `one phase` and the like, and where none of the quantity is present */
    double margin;                /* SI of the quantity compared, positive when it holds */
    double worst_temperature;     /* K */
    struct vessel_contents worst; /* the contents there */
    const char *words;            /* what was found where a number does not say it ("liquid-full"); may be NULL */
};

/* Evaluates over the predicate's temperature range: the worst temperature between the ends is located to 1 mK by
 * adaptive bracketing (features narrower than 0.5 K may be missed). */
struct predicate_finding predicate_check(const struct sheet_run *run, struct method_run *method,
                                         const struct predicate *predicate, double mass);

/* The largest mass (kg) such that it and every smaller one meets the predicate, by one method: located to 1e-10 relative.
 * *is_unlimited when no mass up to `most` breaks it. answer: ANSWER_OK, or why it is undecided. */
enum answer predicate_largest_mass(const struct sheet_run *run, struct method_run *method,
                                   const struct predicate *predicate, double most, double *mass, bool *is_unlimited,
                                   struct predicate_finding *at_limit);

/* The vessel's rating a rule names (gauge, Pa), or NaN where it has none. */
double vessel_symbol(const struct case_vessel *vessel, enum case_symbol symbol);

#endif
