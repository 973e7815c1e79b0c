/* Facts about a charge that more than one sheet tells.
 */
#ifndef TAREWRIGHT_FILLING_CHARGE_FACTS_H
#define TAREWRIGHT_FILLING_CHARGE_FACTS_H

#include "filling/found_temperatures.h"
#include "filling/sheet.h"

/* Volume in m3 of `mass` kg as a gas at 15 degC and 1 bar by one method; false where it is a liquid there. */
bool gas_volume_of(const struct sheet_run *run, struct method_run *method, double mass, double *volume);

/* What a mass rests on: the method that computed it, or the source or the place in the deck that states it. */
struct mass_basis {
    const char *method, *source; /* one of them; the other NULL */
    const char *ratio_remark;    /* set beside the filling ratio; NULL: none */
};

/* Of the sheet's charge: the lead method where it is filled by pressure or volume, else the line that gives it. */
struct mass_basis basis_of_charge(const struct sheet_run *run);

/* mass, amount, gas-volume, density, filling-ratio, gross-weight where a tare is given, class; gas volume and class by
 * the method given, the rest on the mass's own basis. */
void add_charge_facts(const struct sheet_run *run, struct method_run *method, double mass, struct mass_basis basis);

/* liquid-full-temperature, last-liquid-temperature or words in their place; nothing where the method knows no
 * liquid. */
struct liquid_end_found add_liquid_end(const struct sheet_run *run, struct method_run *method, double mass);

/* The state of the vessel at the fill: the charge's own where it was given by pressure, else, for contents that are a
 * gas at 15 degC, the settled pressure there. */
struct fill_point fill_point_of(const struct sheet_run *run, struct method_run *method, double mass);

#endif
