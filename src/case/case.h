/* The case tree: what a deck means. Typed, in SI, each value knowing where it came from.
 *
 * Ownership: everything lives in the run's arena and is read-only after elaboration.
 */
#ifndef TAREWRIGHT_CASE_CASE_H
#define TAREWRIGHT_CASE_CASE_H

#include "base/arena.h"
#include "base/shown.h"
#include "deck/deck.h"
#include "fluid/spec.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

struct case_source {
    const char *key;
    const char *citation;
    bool is_unverified; /* entered from memory */
};

enum origin_kind { ORIGIN_DECK, ORIGIN_LIBRARY, ORIGIN_DEFAULT };

struct origin {
    enum origin_kind kind;
    struct location at;
    const char *written;              /* as in the deck, "50.2 L" */
    const struct case_source *source; /* NULL: given in this deck (or a default) */
};

/* A value that may be absent, in SI. Ratings are gauge: Pa above 101 325 Pa. */
struct quantity {
    bool given;
    double value;
    double uncertainty; /* expanded, k = 2; 0 where none was given */
    struct origin origin;
    const struct quantity *overridden; /* the earlier value this one replaced, or NULL */
};

enum hazard {
    HAZARD_FLAMMABLE = 1,
    HAZARD_OXIDISING = 2,
    HAZARD_TOXIC = 4,
    HAZARD_CORROSIVE = 8,
    HAZARD_PYROPHORIC = 16,
    HAZARD_DECOMPOSES = 32,
    HAZARD_POLYMERISES = 64,
    HAZARD_DISSOLVED = 128
};

/* What one cubic method knows of a component beyond its constants. */
struct case_cubic_set {
    const char *method;                                      /* the method's word */
    struct quantity critical_temperature, critical_pressure; /* not given: the component's */
    struct quantity twu[3];                                  /* L, M, N; all or none */
    struct quantity shift;                                   /* m3/mol */
    struct quantity covolume_A, covolume_B;                  /* K; both or none */
};

/* How often a molecule has a group. */
struct case_group {
    const char *name;
    double number;
};

/* A substance as a solid. */
struct case_solid {
    const struct case_source *source; /* of the sublimation line; NULL: none named */
    const struct case_source *melting_source;
    struct location at;
    struct quantity molar_volume;
    struct solid_spec spec;
};

struct case_component {
    const char *name;
    const char *title;   /* NULL: none */
    const char *formula; /* NULL: none */
    const char *cas;     /* NULL: none */
    unsigned un_number;  /* 0: none */
    struct quantity molar_mass, critical_temperature, critical_pressure, critical_density, acentric;
    struct quantity triple_temperature, triple_pressure, boiling_temperature, dipole;
    unsigned hazards;   /* set of enum hazard */
    const char *refuse; /* the reason why no charge is computed; NULL: none */
    struct location refuse_at;
    const struct case_source *equation_source; /* NULL where it has no reference equation */
    const struct case_source *gerg_source;     /* likewise of GERG-2008 */
    struct location gerg_at;
    const struct case_solid *solid; /* NULL: nothing is known of it as a solid */
    size_t cubic_set_count;
    const struct case_cubic_set *cubic_sets;
    size_t group_count;
    const struct case_group *groups;
    struct origin groups_origin;
    struct pure_spec spec;
};

/* What one method has of a pair. */
struct case_pair_constants {
    const char *method; /* the method's word */
    struct quantity kij, lij;
    struct quantity kappa; /* as written, where the method takes it: kij is then 1 - kappa */
};

/* A departure function of mixtures. */
struct case_departure {
    const struct case_source *source; /* NULL: none named */
    struct location at;
    struct departure_spec spec;
};

/* What one multi-fluid method has of a pair; see struct reducing_pair. */
struct case_reducing {
    const char *method; /* the method's word */
    const char *first;  /* the component that beta_T and beta_V take as first */
    struct quantity beta_T, gamma_T, beta_V, gamma_V;
    const struct case_departure *departure; /* NULL: none */
    struct quantity weight;                 /* of the departure */
};

/* Two components together. */
struct case_pair {
    const char *first, *second; /* as the first of its blocks has them */
    size_t count;
    const struct case_pair_constants *constants;
    size_t reducing_count;
    const struct case_reducing *reducing;
    const char *reacts; /* what the two do; NULL: nothing is known */
    struct origin reacts_origin;
};

/* Two groups together: the interaction of the method of group contributions, Pa. */
struct case_group_pair {
    const char *first, *second;
    struct quantity A, B;
};

enum fraction_basis { BASIS_MOLE, BASIS_MASS, BASIS_VOLUME };

/* One line of a mixture as it was written. */
struct case_share {
    struct quantity given; /* part of the whole on the mixture's basis; of the rest, what completes the whole */
    bool is_rest;
    bool is_beside; /* no line of the mixture: it may come with a parent gas the mixture is made from */
};

/* What is filled: a component by itself with fraction 1, or a mixture. */
struct case_fluid {
    const char *name;
    struct location at; /* of the name where it is defined */
    size_t count;
    const struct case_component *const *components; /* of a mixture in the order written; none stands twice */
    const double *fractions;                        /* mole fractions, [count]; zero is allowed */
    double molar_mass;                              /* kg/mol, of the whole */
    const struct case_share *shares;                /* [count]; NULL: a component named as a fluid */
    enum fraction_basis basis;                      /* of the shares */
    /* The shares are parts of the volumes the components have by themselves at this state (K, Pa absolute). Fractions
     * and molar mass then still take volume for amount: whoever has a method converts them. */
    bool has_state;
    double temperature, pressure;
    const char *assessment; /* what an assessment has to cover before a charge is permitted; NULL: nothing */
    const char *refuse;     /* why no charge is computed however much is known; NULL: none */
    size_t pair_count;      /* pairs of the components of which something is known */
    const struct case_pair *const *pairs;
    size_t group_pair_count;
    const struct case_group_pair *const *group_pairs;
    struct fluid_spec spec;
};

/* The pair of these components of the fluid, and what it has for a method; NULL: none. */
const struct case_pair *case_pair_of(const struct case_fluid *fluid, const char *one, const char *other);
const struct case_pair_constants *case_pair_constants_of(const struct case_pair *pair, const char *method);
const struct case_reducing *case_reducing_of(const struct case_pair *pair, const char *method);

struct case_rating {
    const char *name; /* "test-pressure", or the fitting's text */
    struct quantity pressure;
};

struct case_vessel {
    const char *name;
    struct location at;
    struct quantity water_capacity, tare;
    struct quantity wall_heat_capacity, wall_conductance;              /* J/K, W/K; both or none */
    struct quantity test_pressure, working_pressure, service_pressure; /* gauge */
    size_t fitting_count;
    const struct case_rating *fittings;
};

/* Arithmetic over numbers and symbols that only a filled vessel gives a value to. */
enum formula_kind {
    FORMULA_NUMBER,
    FORMULA_SYMBOL,
    FORMULA_NEGATE,
    FORMULA_ADD,
    FORMULA_SUBTRACT,
    FORMULA_MULTIPLY,
    FORMULA_DIVIDE
};

enum case_symbol {
    SYMBOL_PRESSURE,        /* of the contents; Pa absolute */
    SYMBOL_VAPOUR_PRESSURE, /* Pa absolute */
    SYMBOL_DENSITY,         /* mass over water capacity, kg/m3 */
    SYMBOL_LIQUID_DENSITY,  /* kg/m3 */
    SYMBOL_LIQUID_VOLUME,   /* fraction of the water capacity */
    SYMBOL_FILLING_RATIO,
    SYMBOL_TEST_PRESSURE, /* gauge, of the vessel */
    SYMBOL_WORKING_PRESSURE,
    SYMBOL_SERVICE_PRESSURE,
    SYMBOLS
};

struct formula {
    enum formula_kind kind;
    double number; /* SI; a gauge number as Pa above 101 325 Pa */
    enum case_symbol symbol;
    const struct formula *left, *right;
};

const char *case_symbol_name(enum case_symbol symbol); /* the deck's word */

/* The value of a formula; `value_of` gives each symbol's. A division by zero gives NaN. */
double formula_value(const struct formula *formula, double (*value_of)(void *context, enum case_symbol symbol),
                     void *context);
bool formula_mentions(const struct formula *formula, enum case_symbol symbol);

enum predicate_kind { PREDICATE_COMPARE, PREDICATE_ONE_PHASE, PREDICATE_NO_LIQUID, PREDICATE_NO_SOLID };

struct predicate {
    enum predicate_kind kind;
    double from, to;      /* K; equal for `at` */
    bool has_temperature; /* false for a requirement that holds at every swept temperature, and for a quantity that
                             does not depend on it (filling-ratio, density) */
    enum case_symbol quantity;
    enum relation relation;
    const struct formula *bound;
    bool bound_is_gauge;    /* the bound is Pa above `gauge_zero`; else absolute or no pressure */
    double gauge_zero;      /* Pa, 101 325 unless stated */
    bool states_gauge_zero; /* the predicate or its rule states it */
    bool unless_listed;
    const char *written; /* "at 65 degC pressure <= test-pressure" */
    struct location at;
    struct shown_unit temperature_unit; /* as written */
};

enum filling_class { CLASS_NONE, CLASS_COMPRESSED, CLASS_HIGH_PRESSURE_LIQUEFIED, CLASS_LOW_PRESSURE_LIQUEFIED };

struct case_rule {
    const char *name;
    const char *title, *clause, *edition; /* NULL: none */
    const struct case_source *source;     /* NULL: none */
    enum filling_class meant_for;
    double round_to; /* filling ratios are rounded down to a multiple of this; 0.01 by default */
    size_t predicate_count;
    const struct predicate *predicates;
    struct origin origin;
};

struct listed_row {
    double test_pressure; /* gauge, Pa */
    struct optional filling_ratio;
    struct optional working_pressure; /* gauge, Pa */
    struct origin origin;
};

struct case_entry {
    const char *name;                         /* "UN 1978" */
    const char *title, *class_code, *letters; /* NULL: none */
    const struct case_component *component;   /* NULL: a group or a mixture */
    struct optional lc50;                     /* fraction, as 760 ppm = 760e-6 */
    bool is_never_exceeded;                   /* letter o */
    size_t row_count;
    const struct listed_row *rows; /* by rising test pressure */
    size_t limit_count;
    const struct predicate *limits;
    struct origin origin;
};

enum fill_kind { FILL_PRESSURE, FILL_MASS, FILL_RATIO, FILL_DENSITY, FILL_MOLES, FILL_VOLUME };

struct case_charge {
    const char *name;
    const struct case_fluid *fluid;
    const struct case_vessel *vessel;
    enum fill_kind kind;
    struct quantity amount;       /* absolute Pa, kg, 1, kg/m3, mol or m3 by kind */
    double temperature, pressure; /* K, Pa absolute: the state of FILL_PRESSURE (temperature) and FILL_VOLUME (both) */
    struct location temperature_at; /* of FILL_PRESSURE */
    struct origin origin;
};

enum governing { GOVERN_LEAD, GOVERN_STRICTEST };

struct case_methods {
    size_t count; /* lead first, then beside, then show */
    const char *const *names;
    size_t may_govern; /* the first so many are lead and beside */
    enum governing govern;
    const char *reason; /* why this lead, in words */
    struct location at;
};

/* Swept values of one quantity. */
struct case_sweep {
    bool given;
    size_t count;
    const double *values;    /* SI: K, Pa absolute, or mol/m3 */
    bool is_mass_density;    /* a density sweep written per mass: values are kg/m3 */
    struct shown_unit shown; /* as first written; a gauge unit's offset is the ambient pressure */
    struct origin origin;
};

enum sheet_kind {
    SHEET_PERMISSIBLE_CHARGE,
    SHEET_SETTLED_PRESSURE,
    SHEET_SATURATION,
    SHEET_FUGACITY,
    SHEET_DRAW_DOWN,
    SHEET_PREPARATION,
    SHEET_KINDS
};

/* A parent gas put into the vessel. */
struct case_addition {
    const char *name;
    struct location at;
    const struct case_fluid *parent;
    const size_t *places;               /* [parent->count], of its components among those of the sheet's fluid */
    struct quantity temperature;        /* K, of the vessel after it */
    struct quantity supply_pressure;    /* Pa */
    struct quantity balance;            /* kg, expanded uncertainty of its mass */
    struct quantity weighed;            /* kg */
    struct quantity fill_time;          /* s; not given: slow enough to keep the temperature */
    struct quantity supply_temperature; /* K */
};

/* Further vessels filled with the same mixture. */
struct case_further {
    const struct case_vessel *vessel;
    size_t number;
};

/* How a mixture is made. The fluid of such a sheet has the components of the target and of all that goes into it. */
struct case_preparation {
    const struct case_fluid *target; /* as it was named */
    bool is_by_pressure, is_order_proposed;
    size_t addition_count;
    const struct case_addition *additions;
    const struct case_charge *heel; /* NULL: the vessel is evacuated */
    const size_t *heel_places;      /* as those of a parent */
    struct quantity balance, gauge; /* kg, Pa: expanded uncertainties of one reading */
    struct quantity tolerance;
    size_t together;
    size_t further_count;
    const struct case_further *further;
};

enum listed_policy { LISTED_GOVERNS, LISTED_CHECK_GOVERNS, LISTED_COMPARE };

/* Units for results, chosen by the deck or by default (bara, barg, degC, kg/L, kg, m3, L). The gauge unit is for
 * absolute values: its offset is 101 325 Pa. */
struct display_units {
    struct shown_unit temperature, pressure, gauge, density, mass, gas_volume, volume;
};

struct case_sheet {
    enum sheet_kind kind;
    const char *title; /* NULL: none */
    struct location at;
    const struct case_fluid *fluid;
    const struct case_vessel *vessel; /* NULL where the sheet needs none */
    const struct case_charge *charge; /* NULL where the sheet needs none */
    struct case_methods methods;
    struct display_units units;
    struct case_sweep temperatures, pressures, densities;
    size_t rule_count;
    const struct case_rule *const *rules;
    size_t requirement_count;
    const struct predicate *requirements;
    size_t quote_count;
    const double *quotes; /* K: temperatures the pressure is quoted at */
    bool show_iteration, show_caloric, show_melting;
    struct optional iteration_at; /* K */
    enum listed_policy listed;
    bool asks_of_solids;   /* a rule or a requirement says `no solid` */
    const char *assessed;  /* NULL: none */
    const char *table_csv; /* NULL: none */
    size_t entry_count;    /* entries of the fluid that are in use */
    const struct case_entry *const *entries;
    size_t note_count;
    const char *const *notes;
    bool shows_every_uncertainty; /* of tables, row by row */
    struct {
        bool given, is_liquid;
        bool stops_at_liquid, stops_at_solid;
        const char *limited;      /* component whose fraction in what is drawn ends it; NULL: none */
        bool is_limit_from_above; /* it ends once the fraction is no more than the limit */
        struct quantity limit;
        struct quantity temperature;                                     /* K */
        struct quantity least_pressure;                                  /* Pa */
        struct quantity rate;                                            /* kg/s; not given: slow, at one temperature */
        struct quantity ambient, ambient_conductance, least_temperature; /* K, W/K, K */
        struct quantity time, least_content;                             /* s, kg */
    } drawing;                                                           /* of a draw-down sheet */
    const struct case_preparation *preparation;                          /* NULL: another kind of sheet */
    size_t draws; /* of a Monte Carlo run; 0: none is asked for */
    uint64_t seed;
};

/* One line of the listing's inputs: a value as written, in SI, with its place. The place may be in any of the user's
 * own files, of which the root is one. */
struct case_input {
    const char *group; /* "vessel fifty" */
    const char *name;  /* "water-capacity" */
    const char *si;    /* "0.0502 m3" */
    struct origin origin;
};

/* A value written with `+/-`, so that every result that depends on it is uncertain. */
struct case_spread {
    const char *group;      /* "vessel ten-litre" */
    const char *name;       /* "water-capacity" */
    double value;           /* SI */
    double uncertainty;     /* expanded, k = 2; above 0 */
    struct shown_unit unit; /* as the value was written; a gauge unit's offset fits `value` */
    const char *si_unit;    /* of value and uncertainty; "1" for a number */
    struct location at;     /* of the value: what a shift names it by */
    struct origin origin;
};

/* A value of the deck other than it was written: SI, added to it. */
struct case_shift {
    struct location at;
    double by;
};

struct case_tree {
    const struct deck *deck;
    const char *title, *number, *revision; /* NULL: none */
    size_t note_count;
    const char *const *notes;
    double ambient_pressure; /* Pa */
    size_t sheet_count;
    const struct case_sheet *sheets;
    size_t component_count; /* those the sheets use */
    const struct case_component *const *components;
    size_t input_count;
    const struct case_input *inputs; /* of the user's own blocks, file by file in the order of the text */
    size_t source_count;             /* sources that values in use name */
    const struct case_source *const *sources;
    size_t spread_count;
    const struct case_spread *spreads; /* of the values that were read for the sheets, in the order they were read */
};

/* The case a deck describes, or NULL when there were errors (all of them are in the diagnostics). Only what the sheets
 * need is built. A deck that was read with errors is looked through too, for the further messages it gives. */
const struct case_tree *case_elaborate(const struct deck *deck, struct arena *arena, struct diagnostics *diagnostics);

/* The same case with some of its values shifted; what follows from them, such as the rest of a mixture or mole
 * fractions from masses, follows from the shifted ones. Fractions without a rest need no longer add up to 1: they are
 * brought to a whole. NULL where a shifted value is impossible; the diagnostics are then of no use to anybody. The deck
 * must have been elaborated before without errors, and is not changed: shifted cases may be made on many threads. */
const struct case_tree *case_elaborate_shifted(const struct deck *deck, const struct case_shift *shifts, size_t count,
                                               struct arena *arena, struct diagnostics *diagnostics);

/* Whether a value at `at` is the one that a spread or shift names. */
bool case_is_same_place(struct location a, struct location b);

/* Whether the sheet can depend on that value at all, as far as the names of blocks tell. */
bool case_sheet_may_depend(const struct case_sheet *sheet, const struct case_spread *spread);

/* Whether the sheet tells of the component as a solid: it asks for solids, or sweeps temperatures at which there is
 * one. */
bool case_sheet_tells_solid(const struct case_sheet *sheet, const struct case_component *component);

/* Whether the component's melting line has a say in the sheet's answers: it is shown, or swept or asked temperatures
 * lie beside its beginning. */
bool case_sheet_melts(const struct case_sheet *sheet, const struct case_component *component);

/* One library or deck component by name, for showing; NULL when there is none. */
const struct case_component *case_find_component(const struct deck *deck, const char *name, struct arena *arena,
                                                 struct diagnostics *diagnostics);

/* One mixture by name, likewise. */
const struct case_fluid *case_find_mixture(const struct deck *deck, const char *name, struct arena *arena,
                                           struct diagnostics *diagnostics);

#endif
