/* Arithmetic on written values, with their units checked.
 */
#ifndef TAREWRIGHT_DECK_EXPRESSION_H
#define TAREWRIGHT_DECK_EXPRESSION_H

#include "deck/diagnostic.h"
#include "deck/syntax.h"
#include "deck/units.h"

/* What a name stands for; false when it is unknown (evaluation then reports it, with the nearest of `known`). */
struct name_scope {
    bool (*look_up)(void *context, const char *name, struct value *out);
    void *context;
    const char *const *known;
    size_t known_count;
};

/* The value of an expression. False after a message: unknown name or unit, dimensions that do not fit an addition, a
 * sum of two gauge or two temperature points, a division by zero, a result that is not finite. Rules: number times
 * gauge is gauge, gauge over gauge a number; point - point is a difference; point +- difference is a point; gauge +-
 * plain pressure is gauge; absolute - gauge is an error with a hint. A K is a point or a difference as its partner
 * needs. */
bool expression_value(const struct expression *expression, const struct name_scope *scope, struct diagnostics *out,
                      struct value *value);

#endif
