#include "fluid/explanation.h"

#include <assert.h>
#include <math.h>
#include <stdarg.h>
#include <stdio.h>

void explanation_add(struct explanation *explanation, struct explained_value value)
{
    assert(explanation->count < EXPLAINED_MOST);
    explanation->values[explanation->count++] = value;
}

void explanation_put(struct explanation *explanation, const char *symbol, const char *meaning, const char *formula,
                     const char *unit, double value)
{
    explanation_add(explanation, (struct explained_value){symbol, meaning, formula, unit, 0, value, false});
}

const char *explanation_text(struct explanation *explanation, const char *format, ...)
{
    char *text = explanation->pool + explanation->pool_used;
    const size_t room = EXPLAINED_POOL_BYTES - explanation->pool_used;
    va_list arguments;
    va_start(arguments, format);
    const int length = vsnprintf(text, room, format, arguments);
    va_end(arguments);
    assert(length >= 0 && (size_t)length < room);
    explanation->pool_used += (size_t)length + 1;
    return text;
}

void explanation_put_fractions(struct explanation *explanation, const struct fluid_spec *spec, const double x[])
{
    for (size_t i = 0; spec->count > 1 && spec->count <= EXPLAINED_COMPONENTS && i < spec->count; i++) {
        explanation_put(explanation, explanation_text(explanation, "x_%zu", i + 1),
                        explanation_text(explanation, "mole fraction of %s", spec->pure[i]->name), NULL, "1", x[i]);
    }
}

void explanation_put_fugacity(struct explanation *explanation, size_t count, size_t i, double x, double ln_phi,
                              double pressure)
{
    if (count > 1) {
        explanation_put(explanation, explanation_text(explanation, "f_%zu", i + 1), "fugacity",
                        explanation_text(explanation, "x_%zu * p * exp(ln_phi_%zu)", i + 1, i + 1), "Pa",
                        x * pressure * exp(ln_phi));
    }
}

enum answer fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                          struct explanation *out)
{
    const struct fluid_ops *ops = at_t->fluid->ops;
    double amount = 0.0;
    out->count = out->pool_used = 0;
    for (size_t i = 0; i < at_t->fluid->count; i++) {
        amount += n[i];
    }
    if (!(amount > 0.0) || !(volume > 0.0)) {
        return ANSWER_OUT_OF_RANGE;
    }
    if (ops->explain_whole != NULL) {
        return ops->explain_whole(at_t, volume, n, with_fugacity, out);
    }
    if (ops->explain == NULL || at_t->fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    return ops->explain(at_t, volume / amount, with_fugacity, out);
}
