/* A liquefied gas charged with a compressed gas: the regulation's stepwise estimate of the pressure at 65 degC, beside
 * the rigorous equilibrium. UN Model Regulations, P200 (5)(e).
 */
#ifndef TAREWRIGHT_FILLING_STEPWISE_H
#define TAREWRIGHT_FILLING_STEPWISE_H

#include "filling/sheet.h"

/* Facts of every step for `mass` kg, by the method given; nothing unless the fluid is one liquefied gas and one
 * compressed gas (critical up to -50 degC) and the vessel holds liquid at 15 degC. */
void add_stepwise(const struct sheet_run *run, struct method_run *method, double mass);

#endif
