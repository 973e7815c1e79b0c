/* The contents of a closed vessel at given temperature, volume and amounts.
 *
 * Nothing is allocated; a vessel's answer is a plain struct that may be copied.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_CLOSED_VESSEL_H
#define TAREWRIGHT_EQUILIBRIUM_CLOSED_VESSEL_H

#include "equilibrium/saturation.h"

enum vessel_state {
    VESSEL_VAPOUR,        /* one phase, below the critical temperature, at or below the dew density */
    VESSEL_TWO_PHASE,     /* vapour and liquid */
    VESSEL_LIQUID_FULL,   /* one phase, below the critical temperature, at or above the bubble density */
    VESSEL_SUPERCRITICAL, /* one phase above the critical temperature */
    VESSEL_GAS            /* one phase by a method that has no liquid */
};

struct vessel_contents {
    enum vessel_state state;
    double temperature;                              /* K */
    double pressure;                                 /* Pa */
    double liquid_fraction;                          /* of the vessel's volume, 0 to 1 */
    double vapour_amount, liquid_amount;             /* mol; a single phase that is no liquid is vapour */
    double vapour_molar_volume, liquid_molar_volume; /* m3/mol; 0 for a phase that is absent */
    bool has_saturation; /* false above the critical temperature and for a method without liquid */
    struct saturation saturation;
};

/* Pure fluid: `amount` mol in `volume` m3 at the temperature set. ANSWER_OUT_OF_RANGE when the volume is at or below
 * the method's smallest, or the pressure found is not positive. */
enum answer closed_vessel_at_tv(const struct fluid_at_t *at_t, double volume, double amount,
                                struct vessel_contents *out);

#endif
