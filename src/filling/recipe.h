/* How much of each parent gas a mixture takes, and in which order they go in.
 *
 * Amounts are in mol, masses in kg; nothing is kept between calls. Ownership: workspace comes from the arena given.
 */
#ifndef TAREWRIGHT_FILLING_RECIPE_H
#define TAREWRIGHT_FILLING_RECIPE_H

#include "base/arena.h"
#include "fluid/fluid.h"

struct recipe_task {
    size_t count;                /* components */
    size_t parents;              /* no more than the target has components */
    const double *target;        /* [count], mole fractions */
    size_t rest;                 /* the component that takes what impurities leave */
    const double *molar_masses;  /* [count] */
    const double *const *parent; /* [parents][count], mole fractions */
    const double *heel;          /* [count], mol in the vessel before */
    double mass;                 /* of all that is in the vessel afterwards */
};

/* mol of each parent, [parents], some perhaps negative: every component of the target but the rest gets its fraction,
 * all parts together the mass. Where there are fewer parents than the target has components the fractions come as near
 * to it as they can, each by part of itself (least squares). ANSWER_NO_SUCH_ROOT where the parents cannot be told
 * apart. */
enum answer recipe_amounts(const struct recipe_task *task, struct arena *arena, double amounts[]);

/* The part of the heel, 0 to 1, with which no amount is negative; NaN where there is none even without it. */
double recipe_heel_part(const struct recipe_task *task, struct arena *arena);

/* What the order of additions goes by. */
struct recipe_nature {
    double critical_temperature; /* K, of most of the parent */
    bool is_fuel, is_oxidant, is_balance;
};

/* A fuel and an oxidant never follow one another. */
bool recipe_may_follow(const struct recipe_nature *one, const struct recipe_nature *next);

/* Sets order[count]: the parents by falling critical temperature, the balance gas last; a fuel and an oxidant next to
 * one another are parted by the parent nearest behind that is neither. False where none is left to part them. */
bool recipe_order(const struct recipe_nature natures[], size_t count, size_t order[]);

#endif
