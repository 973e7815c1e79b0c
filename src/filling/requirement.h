/* Requirements of a sheet from findings of its predicates.
 */
#ifndef TAREWRIGHT_FILLING_REQUIREMENT_H
#define TAREWRIGHT_FILLING_REQUIREMENT_H

#include "filling/predicate.h"

/* The look of a difference of pressures, in the sheet's unit of pressure without its zero: "bar" for bara and barg. */
struct look look_pressure_difference(const struct sheet_run *run);

/* The look of a predicate's margin. */
struct look look_predicate_margin(const struct sheet_run *run, const struct predicate *predicate);

/* "65 degC": a temperature for sentences, without closing zeros. */
const char *temperature_words(const struct sheet_run *run, double temperature);

/* "by 3.36 bar", or what was found where there is no margin: how a predicate was met or missed. */
const char *margin_words(const struct sheet_run *run, const struct predicate *predicate,
                         const struct predicate_finding *finding);

/* Adds the requirement `text` as found by `method`. */
struct requirement *add_requirement(const struct sheet_run *run, const struct method_run *method, const char *text,
                                    const struct predicate *predicate, const struct predicate_finding *finding);

/* Checks the predicate for `mass` kg and adds it: by the lead method or, where the strictest governs, by the method
 * that finds it worst. A predicate without a temperature is checked from `from` to `to`. `text` NULL: as written. */
struct requirement *require_predicate(struct sheet_run *run, const char *text, const struct predicate *predicate,
                                      double mass, double from, double to);

/* Every rating the vessel must keep to whatever the rules say: the settled pressure at 15 degC against the working
 * pressure and against each fitting. Predicates in the run's arena; *count is their number. */
const struct predicate *rating_predicates(const struct sheet_run *run, size_t *count);

/* The line of a place in the deck itself; for one in a library or another used file, the line of the sheet. */
size_t deck_line(const struct sheet_run *run, struct location at);

/* May the method's numbers govern? Never an ideal gas, and only lead and beside methods. */
bool method_governs(const struct method_run *method);

#endif
