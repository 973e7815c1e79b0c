/* A stability test under way, shared by its trial phases, the valleys between them and the choice of where they start.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_STABILITY_INTERNAL_H
#define TAREWRIGHT_EQUILIBRIUM_STABILITY_INTERNAL_H

#include "equilibrium/stability.h"

/* The distance bends about a known phase by no more than this part of what it would about an ideal one: it is flat. */
#define STABILITY_FLAT 0.2
/* No other trial is needed after one that ended as far below as this: nearer, another may lie much lower. */
#define STABILITY_SETTLED (-1e-6)
/* ln W is kept within what exp can take. */
#define STABILITY_LARGEST_LN_W 600.0
/* A phase that differs by no more than this part in ln W and ln v from a known one is that phase. */
#define STABILITY_SAME_PHASE 1e-6

struct test {
    const struct fluid_at_t *at_t;
    double pressure;
    const struct known_phases *known;
    enum stability_effort effort;
    struct equilibrium_workspace *ws;
    struct stability *out;
    enum branch branch;                  /* that the trial keeps to, as long as it exists */
    bool has_looked_about[MOST_PHASES];  /* at each known phase: ws->known_hessian, ws->valley and ... */
    double least_curvature[MOST_PHASES]; /* along ws->valley; NaN where there is none to be had */
    bool has_seen[MOST_PHASES][2];       /* either side of the valley, backwards and forwards */
};

/* Where a trial stands. */
struct trial {
    double tm;        /* the modified distance */
    double sum;       /* of W */
    double norm;      /* sqrt(sum W g^2) */
    double largest;   /* max sqrt(W_i) |g_i| */
    bool is_on_slope; /* that leads down to a known phase and nowhere else */
};

enum verdict { GOING_ON, STATIONARY, BELOW_PLANE, NOT_BELOW, KNOWN_PHASE };

/* The phase of the amounts ws->W, into ws->trial, on the test's branch for as long as it exists there. */
enum answer trial_evaluate_phase(struct test *t, unsigned want);

/* The same, and from it the distance and its gradient ws->g. */
enum answer trial_evaluate(struct test *t, unsigned want, struct trial *trial);

/* Sets ln W_i and W_i. */
void trial_set_ln_W(struct equilibrium_workspace *ws, size_t i, double ln_W);

/* ln W_i = d_i - ln phi_i by the phase evaluated last. */
void trial_substitute(struct equilibrium_workspace *ws);

/* The length in alpha of ws->step, and W moved from ws->kept_ln_W along `part` of it. */
double trial_step_length(const struct equilibrium_workspace *ws);
void trial_take_step(struct equilibrium_workspace *ws, double part);

/* Newton's steps to a verdict from a trial evaluated with the derivatives of ln phi; ANSWER_FAILED when there is none
 * after many. */
enum answer trial_run_newton(struct test *t, struct trial *trial, enum verdict *verdict);

/* From ws->W and ws->ln_W to a verdict by substitution and Newton's steps; recorded unless it is a known phase. */
enum answer trial_follow(struct test *t, struct trial *trial, enum verdict *verdict);

/* Notes the trial in the outcome where it lies lowest so far. */
void trial_record(struct test *t, const struct trial *trial);

/* Whether the trial, with its Hessian in ws->matrix and minus its scaled gradient in ws->step, stands on a slope that
 * ends at a known phase. */
bool valley_leads_to_known(struct test *t, const struct trial *trial);

/* Looks for another phase in the valley of the known phase k, where that is flat. */
void valley_try(struct test *t, size_t k);

#endif
