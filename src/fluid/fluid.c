/* What is common to all property methods: choosing one, and setting a temperature. */
#include "fluid/fluid.h"

#include <math.h>

/* K: colder than anything; far below, powers of a temperature are lost to underflow. */
#define COLDEST_TEMPERATURE 1e-6

const struct fluid *fluid_create(const char *method, const struct fluid_spec *spec, struct arena *arena,
                                 struct fluid_lack_report *lack)
{
    *lack = (struct fluid_lack_report){.lack = LACK_NOTHING};
    const struct fluid_ops *ops = fluid_method(method);
    if (ops == NULL) {
        lack->lack = LACK_METHOD;
        return NULL;
    }
    if (spec->count > 1 && (ops->capabilities & CAN_MIXTURE) == 0) {
        lack->lack = LACK_MIXTURE;
        return NULL;
    }
    return ops->create(spec, arena, lack);
}

size_t fluid_at_t_size(const struct fluid *fluid)
{
    return fluid->ops->at_t_size(fluid);
}

struct fluid_at_t *fluid_at_t_create(const struct fluid *fluid, struct arena *arena)
{
    return arena_alloc(arena, fluid_at_t_size(fluid), 1);
}

enum answer fluid_set_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature)
{
    if (!(temperature > COLDEST_TEMPERATURE) || !isfinite(temperature)) {
        return ANSWER_OUT_OF_RANGE;
    }
    at_t->fluid = fluid;
    at_t->temperature = temperature;
    return fluid->ops->set_t(at_t);
}

enum answer fluid_pair(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out)
{
    const struct fluid *fluid = at_t->fluid;
    if (fluid->ops->pair == NULL || i >= fluid->count || j >= fluid->count || i == j) {
        return ANSWER_CANNOT;
    }
    return fluid->ops->pair(at_t, i, j, out);
}

enum answer fluid_reducing(const struct fluid *fluid, size_t i, size_t j, struct reducing_parameter *out)
{
    if (fluid->ops->reducing == NULL || i >= fluid->count || j >= fluid->count || i == j) {
        return ANSWER_CANNOT;
    }
    return fluid->ops->reducing(fluid, i, j, out);
}
