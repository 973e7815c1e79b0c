/* Temperatures at which a filled vessel changes: liquid-full, last liquid gone, a pressure reached.
 *
 * Nothing is allocated. `method->at_t` is used as workspace. Searched from the method's lowest temperature or the
 * triple point, whichever is higher, to the method's highest or 200 degC.
 */
#ifndef TAREWRIGHT_FILLING_FOUND_TEMPERATURES_H
#define TAREWRIGHT_FILLING_FOUND_TEMPERATURES_H

#include "filling/sheet.h"

/* How the liquid of a warming vessel ends. */
enum liquid_end {
    LIQUID_END_UNKNOWN, /* the method has no liquid, or gave no answer */
    LIQUID_END_FULL,    /* the vessel goes liquid-full at the temperature found */
    LIQUID_END_DRY,     /* the last liquid evaporates at the temperature found */
    LIQUID_END_BELOW,   /* neither within the range: it is one phase at the lowest temperature already */
    LIQUID_END_CRITICAL /* liquid and vapour become one at the critical temperature, within 1e-4 of it */
};

struct liquid_end_found {
    enum liquid_end end;
    double temperature; /* K; unset for UNKNOWN; the lowest searched for BELOW */
};

/* Of `mass` kg, to 1e-7 K. Of a mixture: the warmest temperature with more than one phase, where what is there over
 * less than 5 K may be missed; DRY: the first liquid of a cooling vessel. */
struct liquid_end_found find_liquid_end(const struct sheet_run *run, struct method_run *method, double mass);

/* The temperature at which the settled pressure of `mass` kg reaches `pressure` (Pa absolute), going up, to 1e-7 K.
 * ANSWER_NO_SUCH_ROOT when it does not within the range (*temperature is the end of the range nearest to it). */
enum answer find_temperature_of_pressure(const struct sheet_run *run, struct method_run *method, double mass,
                                         double pressure, double *temperature);

#endif
