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
#include "fluid/solid.h"

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

/* The same without the numbers that `before` (may be NULL) shows already, by name and value. */
void hand_check_further_numbers(const struct sheet_run *run, struct hand_check *check,
                                const struct explanation *numbers, const struct explanation *before);

/* "p is 24.79 bara, 23.78 barg". */
void hand_check_pressure_shown(const struct sheet_run *run, struct hand_check *check, double pressure);

/* One more number; `formula` NULL: given. */
void hand_check_put(struct explanation *numbers, const char *symbol, const char *meaning, const char *formula,
                    const char *unit, double value);

/* The fugacity of a solid, f_solid, from the line it was taken from; R, T and p are there already. */
void hand_check_put_solid(struct explanation *numbers, const struct solid_state *solid);

/* A homogeneous phase of a mixture. */
struct mixture_state {
    double temperature, molar_volume; /* K, m3/mol */
    const double *x;                  /* mole fractions */
};

/* Each component's constants at the state's temperature, as the method sets them out for it by itself. */
void hand_check_mixture_components(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                                   const struct mixture_state *state);

/* The pressure of a mixture's phase by a cubic equation: the mixing rules over those constants, and the equation; and
 * where `with_fugacity`, the fugacity of every component. */
void hand_check_mixture_phase(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                              const struct mixture_state *state, const char *phase, bool with_fugacity);

/* A mixture's contents of `mass` kg at `temperature`: every phase, and for two or more that their volumes fill the
 * vessel. */
void hand_check_mixture_contents(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                                 double mass, double temperature);

/* The lowest dew point at `temperature`: the whole as one phase, and the first liquid, of equal fugacities. */
void hand_check_dew_point(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                          double temperature);

#endif
