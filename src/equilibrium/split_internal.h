/* A flash under way, shared by the split at T, p and the closed vessel at T, V. Amounts are by mole of feed. */
#ifndef TAREWRIGHT_EQUILIBRIUM_SPLIT_INTERNAL_H
#define TAREWRIGHT_EQUILIBRIUM_SPLIT_INTERNAL_H

#include "equilibrium/split.h"

struct flash {
    const struct fluid_at_t *at_t;
    double pressure;
    struct equilibrium_workspace *ws;
    struct split *out;
    size_t phases;
    double gibbs;    /* against the feed as one phase */
    double residual; /* largest |g| */
    /* Phase 0 is on the vapour branch and the others on the liquid's, where those exist; else each is at its stable
     * root. Of use where phases have the same composition, as a pure fluid's do. */
    bool is_gas_over_liquid;
};

/* The unknowns in order: component by component, phases other than its rest phase. */
struct unknown {
    size_t i, phase, rest;
};

struct unknown flash_unknown_at(const struct flash *f, size_t index);
size_t flash_unknowns_of(const struct flash *f);
size_t flash_rest_phase(const struct flash *f, size_t i);

/* Sets the feed and evaluates it as one phase; everything counted starts from zero. */
enum answer flash_begin(struct flash *f, const double z[]);

/* Evaluates f->phases phases of the given amounts; *gibbs is against the feed as one phase. */
enum answer flash_evaluate(struct flash *f, unsigned want, double *const amounts[], double *gibbs);

/* The gradient and f->residual, the scales (ws->scale), and the scaled Hessian (ws->matrix) of the phases evaluated. */
void flash_set_gradient(struct flash *f, double *g);
void flash_set_hessian(const struct flash *f, double shift);

/* `part` of the step ws->step, in amounts, into ws->candidate; false when it cannot be taken. */
bool flash_take_step(const struct flash *f, double part);
void flash_accept_candidate(struct equilibrium_workspace *ws, size_t phases);
double flash_largest_change(const struct flash *f);

void flash_set_single_phase(struct flash *f);

/* The tangent-plane test of the phases at hand. */
enum answer flash_prove(struct flash *f, struct stability *found);

/* Adds the phases that the test finds missing, and minimises, until none is. */
enum answer flash_complete(struct flash *f);

void flash_report(const struct flash *f);

#endif
