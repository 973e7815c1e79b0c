/* What a result says about its own making: inputs, data with their sources, methods.
 *
 * Ownership: all texts live in the result's arena or in the case tree.
 */
#ifndef TAREWRIGHT_FILLING_DATA_USED_H
#define TAREWRIGHT_FILLING_DATA_USED_H

#include "filling/sheet.h"

/* The most a method did in any sheet. */
enum method_role { ROLE_SHOWN, ROLE_BESIDE, ROLE_LEADS };

/* Each fluid by each method that the case asks for, made ready once, in the order first asked for. */
struct method_pool {
    size_t count, capacity;
    struct pooled_method {
        const struct case_fluid *fluid;
        struct method_run run;
        enum method_role role;
        const char *reason; /* why it leads, in the case's words; NULL: it never leads */
    } * items;
};

/* Every value the deck gives, in SI, with its line. */
void tell_inputs(const struct case_tree *tree, struct result *result);

/* The values of every component and entry in use, with source and what they replace; the sources. Warns of values in
 * use that were entered from memory. */
void tell_data(const struct case_tree *tree, const struct method_pool *pool, struct result *result);

/* Every method in use: published name, parameters, range, and why it leads. */
void tell_methods(const struct method_pool *pool, struct result *result);

/* Where a value comes from: the key of its source, else the place that gives it. */
const char *data_source_words(const struct case_tree *tree, const struct origin *origin, struct arena *arena);

/* Why a method has no answer for a fluid: "no acentric factor is given for propane". */
const char *lack_words(const struct case_fluid *fluid, const struct fluid_lack_report *lack, struct arena *arena);

#endif
