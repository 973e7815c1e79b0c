/* What a method takes of a fluid, and how far it can be relied on, in words.
 *
 * Ownership: all texts live in the arena or in the case tree.
 */
#ifndef TAREWRIGHT_FILLING_METHOD_PARAMETERS_H
#define TAREWRIGHT_FILLING_METHOD_PARAMETERS_H

#include "filling/data_used.h"

/* Whether a method takes the acentric factor. */
bool method_takes_acentric(const char *method);

/* What the component has for a cubic method beyond its constants; NULL: nothing. */
const struct case_cubic_set *method_set_of(const struct case_component *component, const char *method);

/* Whether the method needs the component's own critical point: not where it has another with its parameters, and not
 * for an equation of the component's own or an ideal gas. */
bool method_takes_critical(const char *method, const struct case_component *component);

/* A given value as it was written, else in `si_unit`. */
const char *quantity_words(const struct quantity *quantity, const char *si_unit, struct arena *arena);

/* "216.592 to 2000 K, to 800 MPa" */
const char *equation_range_words(const struct reference_spec *equation, struct arena *arena);

/* Of a pure gas with the values; of a mixture by name, as the values stand with each component, and a count of its
 * pairs by origin. The method has a fluid; its temperature changes. */
const char *method_parameters(const struct pooled_method *pooled, struct arena *arena);

/* Published limits and accuracy, and whether its volumes are translated; may be NULL. */
const char *method_range(const struct pooled_method *pooled, struct arena *arena);

#endif
