/* The transport class of a filled gas: compressed, or liquefied at high or at low pressure.
 */
#ifndef TAREWRIGHT_FILLING_CLASSIFY_H
#define TAREWRIGHT_FILLING_CLASSIFY_H

#include "filling/sheet.h"

/* ADR/RID 2025, 2.2.2.1.2: compressed when wholly gas at -50 degC as filled; else liquefied, at high pressure when
 * the critical temperature is up to 65 degC and at low pressure above. `mass` kg in the sheet's vessel, by one
 * method; where the method says nothing about -50 degC (no liquid, below its range) the critical temperature alone
 * decides. CLASS_NONE when that is not known either. */
enum filling_class classify_charge(const struct sheet_run *run, struct method_run *method, double mass);

/* By the critical temperature alone, as for a vessel full enough to hold liquid; of a mixture by the mean of its
 * components' critical temperatures, weighted with the mole fractions (Kay, Ind. Eng. Chem. 28 (1936) 1014). */
enum filling_class classify_fluid(const struct case_fluid *fluid);

/* At high or at low pressure. */
bool class_is_liquefied(enum filling_class of);

/* "high-pressure liquefied gas". */
const char *class_words(enum filling_class of);

#endif
