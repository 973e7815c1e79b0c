/* Where a fluid freezes: which of its components forms a solid, and at what density.
 *
 * A solid is pure; it forms where the fugacity of its component in the fluid reaches its own (fluid/solid.h). Nothing
 * is allocated.
 */
#ifndef TAREWRIGHT_FILLING_FROST_H
#define TAREWRIGHT_FILLING_FROST_H

#include "filling/sheet.h"
#include "fluid/solid.h"

/* A component that is present, below its triple temperature, and of which nothing is known as a solid: nothing can be
 * said of frost then. NULL: none. One whose triple temperature is not given counts where it is not known to be
 * a solid either. */
const struct case_component *frost_unknown(const struct case_fluid *fluid, double temperature);

/* Whether any component can be a solid at this temperature at all, as far as the method can tell. */
bool frost_is_possible(const struct case_fluid *fluid, const struct method_run *method, double temperature);

/* A state of the fluid held against the solids. */
struct frost_margin {
    double value;     /* largest ln f_fluid - ln f_solid of any component; above 0 it freezes */
    size_t component; /* that it is of */
    double pressure;  /* Pa, of the fluid */
    double ln_phi, x; /* of the component in the phase it was taken from */
    struct solid_state solid;
};

/* The lowest density at which frost forms: below the triple point of what freezes out of the fluid as one phase, be it
 * stable against liquids or not, above it out of the fluid as it settles. */
struct frost_limit {
    bool may_sublime;    /* a sublimation line was asked, not melting lines alone */
    bool forms;          /* false: at no density the method knows; only the next is then given */
    double clearance;    /* the least ln f_solid - ln f_fluid at the densities without frost */
    double molar_volume; /* m3/mol, of the whole */
    struct frost_margin at;
    double ideal_pressure; /* Pa: the sublimation pressure over the component's mole fraction; NaN of what melts */
};
/* ANSWER_CANNOT where the method says nothing at any density. */
enum answer frost_limit_at(const struct case_fluid *fluid, struct method_run *method, double temperature,
                           struct frost_limit *out);

#endif
