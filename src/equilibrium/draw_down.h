/* Vapour or liquid drawn from a closed vessel, slowly so that it is held at one temperature, or at a rate.
 *
 *   dn_i / dm = -w_i / sum_j w_j M_j
 *
 * with n_i the amounts left, m the mass delivered and w the mole fractions of the phase that is drawn: the differential
 * equation of Rayleigh, Phil. Mag. 4 (1902) 521, with the vessel's own equilibrium in place of its constant ratio.
 * At a rate the contents have an energy, and perhaps a wall between them and the surroundings:
 *
 *   dU/dt = -h dm/dt + k_w (T_w - T),  C_w dT_w/dt = k_a (T_a - T_w) - k_w (T_w - T)
 *
 * with h the enthalpy of what is drawn, kinetic energy left out; without a wall the surroundings heat the contents. Of
 * a pure substance solid stands in the vessel at and below its triple point; it is not drawn. Method-agnostic. The
 * integration is GSL's eighth-order Runge-Kutta-Prince-Dormand pair; where a phase comes or goes and where the pressure
 * falls to its limit, the step is shortened until it ends there.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_DRAW_DOWN_H
#define TAREWRIGHT_EQUILIBRIUM_DRAW_DOWN_H

#include "equilibrium/closed_vessel.h"
#include "equilibrium/mixture_vessel.h"

enum drawn_phase { DRAWN_VAPOUR, DRAWN_LIQUID }; /* the phase of the least, and of the largest mass density */

enum draw_event {
    DRAW_NO_EVENT,       /* the mass asked for was delivered */
    DRAW_PHASE_COMES,    /* a phase appears */
    DRAW_PHASE_GOES,     /* one disappears */
    DRAW_LIQUID_IS_GONE, /* an end: liquid is drawn, and the phase drawn disappears */
    DRAW_SOLID_COMES,
    DRAW_SOLID_GOES,
    DRAW_LEAST_PRESSURE,    /* an end */
    DRAW_LEAST_TEMPERATURE, /* an end */
    DRAW_COMPOSITION        /* an end: the fraction that the task limits is reached */
};

/* At a rate. */
struct draw_heat {
    const struct fluid *fluid;
    struct fluid_at_t *at_t;             /* workspace */
    const struct solid_spec *solid;      /* of a pure fluid; NULL: none */
    double temperature;                  /* K, of contents and wall at the start */
    double rate;                         /* kg/s */
    double wall_heat_capacity;           /* J/K; 0: no wall */
    double wall_conductance;             /* W/K */
    double ambient, ambient_conductance; /* K, W/K */
    double least_temperature;            /* K; 0: none */
};

struct draw_task {
    enum drawn_phase drawn;
    double volume;              /* m3 */
    double least_pressure;      /* Pa, above 0 */
    double tolerance;           /* of the amounts, against the amount at the start, at each step */
    const double *molar_masses; /* [count], kg/mol */
    const double *start;        /* [count], mol, zeros allowed */
    bool has_limit;             /* of a component's fraction in what is drawn */
    bool is_limit_from_above;   /* it ends at the limit or below, else at it or above */
    size_t limited;
    double limit;
    const struct draw_heat *heat; /* NULL: at one temperature */
};

/* What the vessel holds. The arrays belong to the draw_down. */
struct draw_state {
    double delivered;       /* kg */
    double pressure;        /* Pa */
    double liquid_fraction; /* of the volume: all phases but the lightest where there are two or more; else 0 */
    double liquid_amount;   /* mol, likewise */
    size_t phase_count;     /* of the fluid */
    double temperature, wall_temperature;  /* K; of a draw at a rate, as all down to the heat */
    double solid_amount;                   /* mol */
    double energy;                         /* J, of the contents by their parts */
    double enthalpy_delivered, heat_taken; /* J; the latter from the surroundings */
    double filled;         /* m3, sum of the phases' volumes: the vessel's to the accuracy of its solution */
    double *amounts;       /* [count], mol left */
    double *drawn;         /* [count], mole fractions of the phase that is drawn */
    double drawn_enthalpy; /* J/mol of it; of a draw at a rate */
};

struct draw_down;

/* `at_t` has its temperature set and keeps it, unless there is heat. NULL where memory runs out; ended by
 * draw_down_free. The integrator's memory is its own, the rest is of the arena. */
struct draw_down *draw_down_create(const struct fluid_at_t *at_t, size_t count, const struct draw_task *task,
                                   struct arena *arena);
void draw_down_free(struct draw_down *draw);

/* Back to the start. ANSWER_OK or what the vessel's solution answered. */
enum answer draw_down_begin(struct draw_down *draw);

const struct draw_state *draw_down_state(const struct draw_down *draw);

/* Draws until `delivered` kg in all, or until the next event before, whichever is first. An event is placed to 1e-12 of
 * the mass at the start; the state is the one right behind it, of DRAW_LIQUID_IS_GONE the one right before. The end
 * comes again when asked again. ANSWER_FAILED where the vessel has no solution on the way, or it takes too many. */
enum answer draw_down_to(struct draw_down *draw, double delivered, enum draw_event *event);

#endif
