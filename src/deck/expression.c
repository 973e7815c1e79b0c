#include "deck/expression.h"

#include <math.h>
#include <string.h>

struct evaluation {
    const struct name_scope *scope;
    struct diagnostics *out;
};

static bool evaluate(const struct evaluation *with, const struct expression *expression, struct value *value);

static bool evaluate_number(const struct evaluation *with, const struct expression *number, struct value *value)
{
    struct unit unit = {{"", 1.0, 0.0}, DIMENSION_NONE, SORT_PLAIN};
    if (number->unit && !unit_find(number->unit, strlen(number->unit), &unit)) {
        diagnose(with->out, CODE_E113, number->at, "'%s' is not a unit", number->unit);
        return false;
    }
    *value = (struct value){number->number * unit.shown.factor + unit.shown.offset, unit.dimension, unit.sort};
    return true;
}

static bool evaluate_name(const struct evaluation *with, const struct expression *name, struct value *value)
{
    const struct name_scope *scope = with->scope;
    if (scope && scope->look_up && scope->look_up(scope->context, name->name, value)) {
        return true;
    }
    struct diagnostic *message = diagnose(with->out, CODE_E112, name->at, "'%s' stands for no value here", name->name);
    const char *nearest = scope ? nearest_word(name->name, scope->known, scope->known_count) : NULL;
    if (nearest) {
        diagnostic_hint(with->out, message, "did you mean '%s'?", nearest);
    }
    return false;
}

static bool refuse(const struct evaluation *with, const struct expression *at, const char *what, const char *hint)
{
    struct diagnostic *message = diagnose(with->out, CODE_E115, at->at, "%s", what);
    if (hint) {
        diagnostic_hint(with->out, message, "%s", hint);
    }
    return false;
}

static bool is_either(const struct value *a, const struct value *b, enum value_sort sort)
{
    return a->sort == sort || b->sort == sort;
}

static bool is_both(const struct value *a, const struct value *b, enum value_sort sort)
{
    return a->sort == sort && b->sort == sort;
}

static bool is_number(const struct value *value)
{
    return dimension_equal(value->dimension, DIMENSION_NONE);
}

static const char mixed_hint[] = "gauge is measured from 101 325 Pa, absolute from zero: write both the same way";

static bool add(const struct evaluation *with, const struct expression *at, const struct value *a,
                const struct value *b, struct value *value)
{
    if (is_both(a, b, SORT_GAUGE)) {
        return refuse(with, at, "a sum of two gauge pressures has no meaning",
                      "write the difference as a plain pressure, as in 200 barg + 5 bar");
    }
    if (is_either(a, b, SORT_GAUGE) && is_either(a, b, SORT_ABSOLUTE)) {
        return refuse(with, at, "a gauge and an absolute pressure cannot be added", mixed_hint);
    }
    if (is_both(a, b, SORT_TEMPERATURE_POINT)) {
        return refuse(with, at, "a sum of two temperatures has no meaning",
                      "write the difference in K, as in 15 degC + 5 K");
    }
    value->si = a->si + b->si;
    value->sort = a->sort != SORT_PLAIN ? a->sort : b->sort;
    return true;
}

static bool subtract(const struct evaluation *with, const struct expression *at, const struct value *a,
                     const struct value *b, struct value *value)
{
    if (is_either(a, b, SORT_GAUGE) && is_either(a, b, SORT_ABSOLUTE)) {
        return refuse(with, at, "a gauge and an absolute pressure cannot be subtracted", mixed_hint);
    }
    if (b->sort == SORT_GAUGE && a->sort != SORT_GAUGE) {
        return refuse(with, at, "a gauge pressure cannot be taken from a plain pressure",
                      "write the first with a 'g' too, as in 200 barg - 5 barg");
    }
    value->si = a->si - b->si;
    value->sort = b->sort == SORT_PLAIN ? a->sort : SORT_PLAIN;
    return true;
}

static bool evaluate_sum(const struct evaluation *with, const struct expression *at, const struct value *a,
                         const struct value *b, struct value *value)
{
    const bool is_addition = at->kind == EXPRESSION_ADD;
    if (!dimension_equal(a->dimension, b->dimension)) {
        struct arena *arena = with->out->arena;
        diagnose(with->out, CODE_E114, at->at, "%s %s %s has no meaning", dimension_name(a->dimension, arena),
                 is_addition ? "plus" : "minus", dimension_name(b->dimension, arena));
        return false;
    }
    value->dimension = a->dimension;
    return is_addition ? add(with, at, a, b, value) : subtract(with, at, a, b, value);
}

/* Gauge pressures scale with plain numbers only; temperatures on a scale not at all. */
static bool check_factors(const struct evaluation *with, const struct expression *at, const struct value *a,
                          const struct value *b)
{
    const bool is_division = at->kind == EXPRESSION_DIVIDE;
    if (is_either(a, b, SORT_TEMPERATURE_POINT)) {
        return refuse(with, at, "a temperature in degC or degF cannot be multiplied or divided", "write it in K");
    }
    const bool is_ratio = is_division && is_both(a, b, SORT_GAUGE);
    const bool is_scaled = (a->sort == SORT_GAUGE && is_number(b) && b->sort == SORT_PLAIN) ||
                           (!is_division && b->sort == SORT_GAUGE && is_number(a));
    if (is_either(a, b, SORT_GAUGE) && !is_ratio && !is_scaled) {
        return refuse(with, at, "a gauge pressure can be multiplied or divided by a number only",
                      "write it as an absolute pressure");
    }
    return true;
}

static bool evaluate_product(const struct evaluation *with, const struct expression *at, const struct value *a,
                             const struct value *b, struct value *value)
{
    const bool is_division = at->kind == EXPRESSION_DIVIDE;
    if (!check_factors(with, at, a, b)) {
        return false;
    }
    if (is_division && b->si == 0.0) { /* exactly zero: anything else divides */
        diagnose(with->out, CODE_E116, at->right->at, "a division by zero");
        return false;
    }
    if (!dimension_multiply(a->dimension, b->dimension, is_division ? -1 : 1, &value->dimension)) {
        diagnose(with->out, CODE_E114, at->at, "the unit of this product has an exponent beyond all use");
        return false;
    }
    value->si = is_division ? a->si / b->si : a->si * b->si;
    value->sort = SORT_PLAIN;
    if (is_number(b)) {
        value->sort = a->sort;
    } else if (is_number(a) && !is_division) {
        value->sort = b->sort;
    }
    return true;
}

static bool evaluate_negation(const struct evaluation *with, const struct expression *at, const struct value *of,
                              struct value *value)
{
    if (of->sort == SORT_TEMPERATURE_POINT) {
        return refuse(with, at, "a temperature in degC or degF cannot be negated", "write the number itself negative");
    }
    *value = *of;
    value->si = -of->si;
    return true;
}

/* Both sides are looked at before giving up, so that one run shows the mistakes of both. */
static bool evaluate_operation(const struct evaluation *with, const struct expression *at, struct value *value)
{
    struct value left;
    struct value right = {.sort = SORT_PLAIN};
    const bool has_left = evaluate(with, at->left, &left);
    const bool has_right = !at->right || evaluate(with, at->right, &right);
    if (!has_left || !has_right) {
        return false;
    }
    if (at->kind == EXPRESSION_NEGATE) {
        return evaluate_negation(with, at, &left, value);
    }
    if (at->kind == EXPRESSION_ADD || at->kind == EXPRESSION_SUBTRACT) {
        return evaluate_sum(with, at, &left, &right, value);
    }
    return evaluate_product(with, at, &left, &right, value);
}

static bool evaluate_kind(const struct evaluation *with, const struct expression *expression, struct value *value)
{
    switch (expression->kind) {
    case EXPRESSION_NUMBER:
        return evaluate_number(with, expression, value);
    case EXPRESSION_NAME:
        return evaluate_name(with, expression, value);
    case EXPRESSION_NEGATE:
    case EXPRESSION_ADD:
    case EXPRESSION_SUBTRACT:
    case EXPRESSION_MULTIPLY:
    case EXPRESSION_DIVIDE:
        return evaluate_operation(with, expression, value);
    case EXPRESSION_TUPLE:
    case EXPRESSION_KINDS:
        break;
    }
    diagnose(with->out, CODE_E118, expression->at, "one value is wanted here, not several in parentheses");
    return false;
}

static bool evaluate(const struct evaluation *with, const struct expression *expression, struct value *value)
{
    if (!evaluate_kind(with, expression, value)) {
        return false;
    }
    if (!isfinite(value->si)) {
        diagnose(with->out, CODE_E117, expression->at, "the value is too large");
        return false;
    }
    return true;
}

bool expression_value(const struct expression *expression, const struct name_scope *scope, struct diagnostics *out,
                      struct value *value)
{
    const struct evaluation with = {scope, out};
    return evaluate(&with, expression, value);
}
