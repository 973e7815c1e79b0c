/* The lines that let a reader with a calculator redo a governing number: the equation, then the numbers put in.
 *
 * Each function adds lines to a check begun with sheet_add_hand_check. Every line fits a page of 100 columns with the
 * listing's indent. `method->at_t` is used as workspace and keeps the temperature of the check. What a method cannot
 * explain is said in words.
 */
#ifndef TAREWRIGHT_FILLING_HAND_CHECK_H
#define TAREWRIGHT_FILLING_HAND_CHECK_H

#include "filling/sheet.h"
#include "fluid/explanation.h"

/* Mass, amount of substance and molar volume of `mass` kg in the sheet's vessel: n = m / M, v = V / n. */
void hand_check_amount(const struct sheet_run *run, struct hand_check *check, double mass);

/* How `contents` (of `mass` kg, by this method) follows: the method's equation with its numbers for one phase; the
 * equal fugacities and the balance of volumes for two. Ends with the pressure. */
void hand_check_contents(const struct sheet_run *run, struct hand_check *check, struct method_run *method, double mass,
                         const struct contents *contents);

/* The method's pressure at `temperature` (K) and `molar_volume` (m3/mol) of one homogeneous phase; and where
 * `with_fugacity`, its fugacity coefficient. `phase` names it in the lines ("vapour", "liquid", "contents"). */
void hand_check_pressure(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                         double temperature, double molar_volume, const char *phase, bool with_fugacity);

/* Equality of the fugacities in vapour and liquid at the saturation pressure, and both densities. */
void hand_check_saturation(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                           const struct saturation *saturation);

/* Filling ratio of `limiting_mass` kg, m / (999.1 kg/m3 x capacity); rounded down to a multiple of `round_to` (0: not
 * rounded); and the mass of the rounded ratio. */
void hand_check_ratio(const struct sheet_run *run, struct hand_check *check, double limiting_mass, double round_to);

/* Pressure (Pa absolute) against a gauge bound (Pa above `gauge_zero`): p - zero, bound, and the margin. */
void hand_check_gauge(const struct sheet_run *run, struct hand_check *check, double pressure, double gauge_zero,
                      double bound);

/* Any named numbers, each with its formula and the numbers put in: for checks that a sheet puts together itself
 * (explanation_add fills them in). */
void hand_check_numbers(const struct sheet_run *run, struct hand_check *check, const struct explanation *numbers);

#endif
