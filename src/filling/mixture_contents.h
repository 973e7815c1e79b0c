/* A mixture in a closed vessel, where it condenses at a temperature, and how it stands free to expand.
 *
 * `method->at_t` has its temperature set. Nothing is allocated after mixture_work_create.
 */
#ifndef TAREWRIGHT_FILLING_MIXTURE_CONTENTS_H
#define TAREWRIGHT_FILLING_MIXTURE_CONTENTS_H

#include "filling/sheet.h"

/* Memory for one method's answers on one mixture. */
struct mixture_work *mixture_work_create(const struct case_fluid *fluid, const char *method, struct arena *arena);

/* Memory of a thread's own for the same answers; components by themselves are not among them. */
struct mixture_work *mixture_work_for_thread(const struct mixture_work *work, struct arena *arena);

/* The same method for component i by itself; its `fluid` is NULL where it lacks data. */
struct method_run *mixture_alone(struct method_run *method, size_t i);

/* The method's split at the temperature set and `pressure`, in its memory until its next question. */
struct split;
enum answer mixture_split(struct method_run *method, double pressure, const struct split **out);

/* Likewise at a molar volume of the whole (m3/mol): the pressure is found. */
enum answer mixture_split_at_volume(struct method_run *method, double molar_volume, const struct split **out);

/* The whole boundary of the two-phase states, traced when first asked for and held against the stability test; NULL
 * where the method has none, or what was traced is not the whole. */
struct envelope;
const struct envelope *mixture_envelope(struct method_run *method);

/* From now on the method has no envelope: one that was traced is not the whole boundary. */
void mixture_give_up_envelope(struct method_run *method);

/* Whether an envelope was traced and given up. */
bool mixture_envelope_is_incomplete(struct method_run *method);

/* Its critical point `index`, solved for. */
struct mixture_critical;
enum answer mixture_critical_point(struct method_run *method, size_t index, struct mixture_critical *out);

/* All dew and bubble points at a pressure (Pa) or temperature (K), in the method's memory until its next question; with
 * an envelope metastable ones among them, without one the stable ones found by trying states. */
struct boundary_list;
enum answer mixture_points(struct method_run *method, bool is_pressure, double value, const struct boundary_list **out);

/* Whether phase k of a split of two or more is a liquid: all but the lightest, and that too where it is as dense. */
bool mixture_is_liquid(const struct method_run *method, const struct split *split, size_t k);

/* `amount` mol in `volume` m3. The answer is stable against any further phase. */
enum answer mixture_contents(struct method_run *method, double volume, double amount, bool with_edges,
                             struct contents *out);

/* A state of the fluid at overall composition that just touches a second phase, its other one. */
struct phase_edge {
    bool opens;            /* with rising density: one phase ends here; else it begins again */
    bool other_is_lighter; /* a bubble point; else a dew point */
    double pressure;       /* Pa */
    double molar_volume;   /* m3/mol, of the whole as one phase */
    double other_volume;   /* m3/mol */
    double *other;         /* [count], mole fractions */
};

enum { MOST_EDGES = 8 };

struct edge_list {
    size_t count;              /* by rising density */
    bool is_unstable_at_start; /* the thinnest state tried is more than one phase, and no dew point below it was found;
                                  the first edge, where there is one, then closes */
    struct phase_edge items[MOST_EDGES];
};

/* All edges at the temperature set, in the method's memory until it is asked at another temperature. */
enum answer mixture_edge_list(struct method_run *method, const struct edge_list **out);

/* The lowest and the highest of them, kept for many temperatures; without compositions. A fluid that is unstable
 * however thin has a lowest edge at an infinite volume and no pressure. */
enum answer mixture_edges(struct method_run *method, struct phase_edges *out);

/* Holds the edges at the temperature set against the stability test at densities below the lowest, and at all where
 * there is none, `molar_volume` then among them; what they missed is looked for again. ANSWER_FAILED where it is not
 * found and the test still denies that the fluid is one phase. */
enum answer mixture_prove_edges(struct method_run *method, double molar_volume);

enum answer mixture_free_volume(struct method_run *method, double pressure, double *molar_volume, bool *holds_liquid);

/* The same without asking whether it is a liquid, which saves most of the work. */
enum answer mixture_free_volume_alone(struct method_run *method, double pressure, double *molar_volume);

/* kg/mol of a phase with these mole fractions. */
double mixture_molar_mass(const struct method_run *method, const double x[]);

#endif
