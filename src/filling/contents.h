/* What a vessel holds at a temperature: pure gases and mixtures alike, by any method.
 *
 * Nothing is allocated after method_run_create; the method's workspace is used. Compositions stay in the method's
 * memory until its next question.
 */
#ifndef TAREWRIGHT_FILLING_CONTENTS_H
#define TAREWRIGHT_FILLING_CONTENTS_H

#include "equilibrium/closed_vessel.h"
#include "equilibrium/workspace.h"

/* Where, at one temperature, the fluid at overall composition stops being one phase: between the two densities it is
 * more than one. The lower edge is the dew point of lowest density; the upper one the bubble point or, above a
 * mixture's critical temperature, the dew point where the last liquid goes again. */
struct phase_edges {
    bool is_known; /* false: the method knows no liquid, or gave no answer; then neither edge is given */
    bool has_low, has_high;
    size_t edge_count; /* of a mixture; more than two: it may be one phase somewhere between these two */
    bool high_is_bubble;
    double low_volume, high_volume;     /* m3/mol of the whole */
    double low_pressure, high_pressure; /* Pa */
};

struct contents_phase {
    bool is_liquid;
    double amount;       /* mol */
    double molar_volume; /* m3/mol */
    double molar_mass;   /* kg/mol */
    const double *x;     /* [count], mole fractions; NULL: a pure gas */
};

/* VESSEL_TWO_PHASE stands for two phases or more; VESSEL_SUPERCRITICAL for one phase where the temperature has no
 * bubble point, perhaps denser than its upper edge. */
struct contents {
    enum vessel_state state;
    double temperature;     /* K */
    double pressure;        /* Pa */
    double molar_volume;    /* m3/mol, of the whole */
    double liquid_fraction; /* of the vessel's volume, 0 to 1 */
    double liquid_density;  /* kg/m3, of all the liquid; 0: none */
    size_t phase_count;
    struct contents_phase phases[MOST_PHASES]; /* the lightest first */
    struct phase_edges edges;
    bool has_saturation; /* of pure gases, below the critical temperature */
    struct saturation saturation;
};

#endif
