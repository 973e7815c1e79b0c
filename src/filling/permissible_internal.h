/* The permissible-charge sheet at work: its criteria, the limit each sets by each method, and which one governs.
 *
 * Ownership: everything lives in the run's arena for the time the sheet is answered.
 */
#ifndef TAREWRIGHT_FILLING_PERMISSIBLE_INTERNAL_H
#define TAREWRIGHT_FILLING_PERMISSIBLE_INTERNAL_H

#include "filling/predicate.h"

enum criterion_kind {
    CRITERION_RULE,   /* a predicate of a rule */
    CRITERION_ENTRY,  /* a limit of the gas's entry in the tables */
    CRITERION_RATING, /* a rating of the vessel, always checked */
    CRITERION_LISTED  /* the listed row itself */
};

struct criterion {
    enum criterion_kind kind;
    const char *name;             /* of the rule or the entry; "vessel" */
    enum filling_class meant_for; /* of the rule */
    bool is_of_listed_rule; /* its rule has a criterion that listed rows replace: rows are held against all of it */
    const struct predicate *predicate;
    double round_to;    /* filling ratios are rounded down to a multiple of this; 0: not rounded */
    bool is_replaced;   /* by the listed row: computed and shown, but does not bind */
    bool is_shown_only; /* the listed row under `listed compare` */
};

/* What one criterion allows by one method. */
struct criterion_limit {
    enum answer answer;
    bool is_unlimited;
    double mass;    /* kg, as found */
    double rounded; /* kg, of the filling ratio rounded down; equal to mass where nothing is rounded */
    struct predicate_finding finding; /* at `mass` */
};

/* An index into the criteria, or none. */
struct choice {
    bool given;
    size_t index;
};

struct method_limits {
    struct method_run *method;
    struct criterion_limit *limits; /* [criterion_count] */
    struct choice permitted;        /* the least of those that bind */
    struct choice computed;         /* the least of the computed ones, replaced ones too */
    struct choice ruled;            /* the least of the rules that listed rows stand for, replaced ones too */
    struct choice replaced;         /* the least of those a listed row replaces, or would */
    bool is_decided;                /* every criterion that binds had an answer */
    struct choice undecided;        /* the first that had none */
    bool is_within_range;           /* the permitted limit lies within the method's published range */
};

/* The row of the gas's entry that applies to the vessel. */
struct listed_choice {
    const struct case_entry *entry;    /* NULL: the gas has no rows, or no criterion that a row replaces */
    const struct listed_row *row;      /* NULL: none at or below the vessel's test pressure, see `lowest` */
    const struct listed_row *lowest;   /* letter o without a row that applies: not above the lowest row */
    const struct predicate *predicate; /* what the row allows; NULL: it states nothing */
    double filling_ratio;              /* of the row, where it states one */
    bool has_ratio;
};

struct permissible {
    struct sheet_run *run;
    size_t criterion_count, criterion_capacity;
    struct criterion *criteria;
    struct listed_choice listed;
    bool is_by_ratio; /* a liquefied gas: the limit is a filling ratio, rounded down; else a settled pressure */
    struct method_limits *by_method; /* [run->method_count]; method NULL where it cannot serve */
    struct choice governing;         /* of the methods */
    double mass;                     /* kg, permitted */
};

/* ---- criteria.c, listed.c ---- */

/* All criteria of the sheet, with the listed row applied under the sheet's policy. */
void collect_criteria(struct permissible *sheet);

/* Chooses the row and adds it to the criteria; marks what it replaces. */
void apply_listed_row(struct permissible *sheet);

/* The hottest temperature any criterion speaks of, K: where a charge's pressure matters most. */
double hottest_ruled(const struct permissible *sheet);

/* "UN 1013, 250 barg". */
const char *listed_words(const struct permissible *sheet);

/* The key of the source that states the row, or words for a row of the deck itself. */
const char *listed_source(const struct permissible *sheet);

/* The row beside the computation: facts, what it misses and by how much, warnings. */
void tell_listed_row(struct permissible *sheet);

/* ---- limits.c ---- */

/* Every criterion by every method; then the method and the criterion that govern. */
void find_limits(struct permissible *sheet);

/* The limit that governs; only where sheet->governing is given. */
const struct criterion_limit *governing_limit(const struct permissible *sheet);
const struct criterion *governing_criterion(const struct permissible *sheet);
struct method_run *governing_method(const struct permissible *sheet);

double ratio_of_mass(const struct sheet_run *run, double mass);
double mass_of_ratio(const struct sheet_run *run, double ratio);

/* Cubic equations miss liquid densities by several percent. */
bool is_cubic(const struct method_run *method);

/* The charge of a liquefied gas that a cubic alone computed. */
bool is_indicative(const struct permissible *sheet);

/* ---- permissible_tables.c ---- */

void tell_rules(const struct permissible *sheet);
void tell_limits(const struct permissible *sheet);

/* "liquefied-high-pressure, 65.00 degC", or the listed row. */
const char *governed_by(const struct permissible *sheet, size_t criterion, const struct criterion_limit *limit);

/* ---- fill_chart.c ---- */

/* The gauge reading against the gas temperature at the permitted density. */
void tell_fill_chart(const struct permissible *sheet);

#endif
