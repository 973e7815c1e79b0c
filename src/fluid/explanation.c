#include "fluid/explanation.h"

#include <assert.h>

void explanation_add(struct explanation *explanation, struct explained_value value)
{
    assert(explanation->count < EXPLAINED_MOST);
    explanation->values[explanation->count++] = value;
}

enum answer fluid_explain(const struct fluid_at_t *at_t, double volume, const double n[], bool with_fugacity,
                          struct explanation *out)
{
    out->count = 0;
    if (at_t->fluid->ops->explain == NULL || at_t->fluid->count != 1) {
        return ANSWER_CANNOT;
    }
    return at_t->fluid->ops->explain(at_t, volume / n[0], with_fugacity, out);
}
