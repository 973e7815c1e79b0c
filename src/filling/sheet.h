/* What the files of src/filling share: one sheet at work, with a fluid ready for each method.
 *
 * Ownership: a sheet_run lives in the run's arena for the time its sheet is answered.
 */
#ifndef TAREWRIGHT_FILLING_SHEET_H
#define TAREWRIGHT_FILLING_SHEET_H

#include "case/case.h"
#include "filling/contents.h"
#include "fluid/fluid.h"
#include "result/result.h"

struct mixture_work;
struct progress;

/* One method at work on the sheet's fluid. `fluid` is NULL when the method cannot serve it (`lack` says why). */
struct method_run {
    const char *name;
    const struct fluid *fluid;
    struct fluid_at_t *at_t; /* workspace; its temperature changes with every question */
    struct fluid_lack_report lack;
    bool has_critical; /* of a pure gas */
    struct critical_point critical;
    bool may_govern;
    double molar_mass;            /* kg/mol, of the whole */
    const double *z;              /* [fluid->count], mole fractions of the whole */
    struct mixture_work *mixture; /* NULL: a pure gas */
};

/* Listed rows held against the computation, over all sheets. */
struct listed_ledger;

struct sheet_run {
    struct arena *arena;
    const struct case_tree *tree;
    const struct case_sheet *sheet;
    struct result *result;
    struct result_sheet *out;
    size_t number; /* of the sheet, from 1 */
    size_t method_count;
    struct method_run *methods;      /* lead first */
    struct listed_ledger *ledger;    /* NULL: none is kept */
    const struct progress *progress; /* NULL: nobody waits */
    double found_mass;               /* kg, the charge a sheet found and holds its requirements against; 0: none */
    bool found_is_limit; /* that charge is where a criterion ends, and no rounded or listed value below it */
    double held_mass;    /* kg; not 0: the requirements are held against this charge, whatever the sheet finds */
};

/* A method ready for a fluid, or with `lack` set. Ideal gas is never allowed to govern, whatever `may_govern` says. */
struct method_run method_run_create(const struct case_fluid *fluid, const char *method, bool may_govern,
                                    struct arena *arena);

/* The same method with memory of its own for another thread. For `method_run_begin_again` to ready it. */
struct method_run method_run_for_thread(const struct method_run *method, struct arena *arena);

/* Forgets whatever `own` has found, and takes over the envelope of `method`: its next answers depend on nothing that
 * either was asked before. */
void method_run_begin_again(struct method_run *own, const struct method_run *method);

/* Forgets whatever `own` has found, as its mole fractions are about to change: it then has no envelope. */
void method_run_change_mixture(struct method_run *own);

/* Whether `own` has since found a state that speaks against that envelope. */
bool method_run_gave_up_envelope(const struct method_run *own, const struct method_run *method);

/* Traces a mixture's envelope unless that has been done: the one thing that takes memory when it is first needed. */
void method_run_trace_envelope(struct method_run *method);

/* The looks of a sheet: SI unit, the sheet's display unit and the digits its table deserves. */
struct look look_temperature(const struct sheet_run *run);
struct look look_pressure(const struct sheet_run *run); /* absolute */
struct look look_gauge(const struct sheet_run *run);    /* of an absolute SI value: the offset makes it gauge */
struct look look_density(const struct sheet_run *run);
struct look look_mass(const struct sheet_run *run);
struct look look_ratio(int decimals);   /* dimensionless */
struct look look_percent(int decimals); /* SI fraction shown in % */
struct look look_molar_density(void);
struct look look_amount(void);                        /* mol */
struct look look_volume(const struct sheet_run *run); /* of vessels */
struct look look_gas_volume(const struct sheet_run *run);

/* The same look with that many significant digits, for tables that span decades. */
struct look look_significant(struct look look, int digits);

/* "62.00 degC": a number with its unit within a sentence. */
const char *shown_text(const struct sheet_run *run, struct look look, double si);

/* Warns once a sheet and method where (T, p) lies outside the method's published range; true when inside. */
bool warn_outside_range(const struct sheet_run *run, const struct method_run *method, double temperature,
                        double pressure);

/* The contents of the sheet's vessel with `mass` kg at `temperature` by one method. */
enum answer contents_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                        struct contents *out);

/* The same for who asks for pressure and amounts alone: the edges of a mixture are left unknown, which saves most of
 * the work, and its one phase is told VESSEL_SUPERCRITICAL. */
enum answer pressure_at(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                        struct contents *out);

/* The same without the vessel: molar volume, edges, and the state that follows from them; pressure and phases are left
 * out. For questions whether any density up to the vessel's would condense. */
enum answer density_beside_edges(const struct sheet_run *run, struct method_run *method, double mass,
                                 double temperature, struct contents *out);

/* The edges at `temperature`. */
enum answer edges_at(struct method_run *method, double temperature, struct phase_edges *out);

/* The fluid, free to expand, at `temperature` and `pressure`: molar volume of the whole (m3/mol); *holds_liquid when a
 * liquid is all or part of it. */
enum answer free_volume_at(struct method_run *method, double temperature, double pressure, double *molar_volume,
                           bool *holds_liquid);

/* The same without asking whether it is a liquid. */
enum answer free_volume_alone_at(struct method_run *method, double temperature, double pressure, double *molar_volume);

/* The smallest volume (m3) that the method knows for one mole at the temperature set last; 0 where there is none. */
double smallest_molar_volume(const struct method_run *method);

/* A charge's mass in kg for a molar volume at the charge's state (m3/mol), which counts where it is given by pressure
 * or by volume, and a molar mass. */
double charge_mass_of(const struct case_charge *charge, double molar_volume, double molar_mass);

/* A charge's mass in kg, by the lead method where it was given by pressure or by volume. */
enum answer charge_mass(const struct sheet_run *run, const struct case_charge *charge, double *mass);

/* Density of water at 15 degC in kg/m3, the base of filling ratios. */
#define WATER_DENSITY_15C 999.1

/* The largest multiple of `step` that is not above `ratio` (a ratio within rounding of a multiple is that multiple). */
double ratio_rounded_down(double ratio, double step);

/* The zero of gauge ratings, Pa. */
#define STANDARD_ATMOSPHERE 101325.0

/* One file for each kind. */
void answer_permissible_charge(struct sheet_run *run);
void answer_settled_pressure(struct sheet_run *run);
void answer_saturation(struct sheet_run *run);
void answer_fugacity(struct sheet_run *run);
void answer_draw_down(struct sheet_run *run);
void answer_preparation(struct sheet_run *run);

#endif
