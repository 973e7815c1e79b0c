/* First-order propagation of uncertainty by central differences. */
#include "filling/propagation.h"

#include "base/parallel.h"

#include <math.h>
#include <string.h>

/* The places the model is tried at, for each input. */
enum { PLUS_ONE, MINUS_ONE, PLUS_TWO, MINUS_TWO, PLACES };

static const double STEPS[PLACES] = {[PLUS_ONE] = 1.0, [MINUS_ONE] = -1.0, [PLUS_TWO] = 2.0, [MINUS_TWO] = -2.0};

/* First-order propagation under way. */
struct differences {
    const struct propagation_model *model;
    double *base;
    size_t input;            /* the one at work */
    void *contexts[PLACES];  /* of the threads, at most one for each place */
    double *inputs[PLACES];  /* [input_count] each, likewise */
    double *outputs[PLACES]; /* [output_count] each, of the input at work */
    double *sensitivities, *standard, *deviations;
    bool *is_one_sided;
    bool has_derivatives; /* they lie in `sensitivities` */
};

static void evaluate(const struct propagation_model *model, void *context, const double inputs[], double outputs[])
{
    if (model->evaluate(context, inputs, outputs) != MODEL_OK) {
        for (size_t k = 0; k < model->output_count; k++) {
            outputs[k] = (double)NAN;
        }
    }
}

/* Over the two sides where both have an answer; over the side that has one. */
static double slope_of(double base, double plus, double minus, double spread)
{
    if (isfinite(plus) && isfinite(minus)) {
        return (plus - minus) / (2.0 * spread);
    }
    return isfinite(plus) ? (plus - base) / spread : (base - minus) / spread;
}

/* How far the results lie from the straight line, at the farther step of each side that has an answer. */
static double deviation_of(const struct differences *it, size_t i, size_t k, double slope)
{
    double largest = 0.0;
    for (int place = 0; place < PLACES; place++) {
        const double found = it->outputs[place][k];
        if (isfinite(found)) {
            const double line = it->base[k] + slope * STEPS[place] * it->model->spreads[i];
            largest = fmax(largest, fabs(found - line));
        }
    }
    return largest;
}

static double resolution_of(const struct propagation_model *model, size_t k)
{
    return model->resolutions == NULL ? 0.0 : model->resolutions[k];
}

static void take_output(struct differences *it, size_t i, size_t k)
{
    const struct propagation_model *model = it->model;
    const double spread = model->spreads[i], resolution = resolution_of(model, k);
    double slope = it->has_derivatives
                       ? it->sensitivities[i * model->output_count + k]
                       : slope_of(it->base[k], it->outputs[PLUS_ONE][k], it->outputs[MINUS_ONE][k], spread);
    double deviation = deviation_of(it, i, k, slope);
    if (isfinite(slope)) {
        slope = fabs(slope * spread) > resolution ? slope : 0.0;
        deviation = deviation > resolution ? deviation : 0.0;
    }
    it->sensitivities[i * model->output_count + k] = slope;
    it->standard[k] = hypot(it->standard[k], slope * spread);
    it->deviations[k] = fmax(it->deviations[k], deviation);
}

static bool has_answer(const double outputs[], size_t count)
{
    for (size_t k = 0; k < count; k++) {
        if (isfinite(outputs[k])) {
            return true;
        }
    }
    return false;
}

/* The places that are tried for an input: the near ones only where the derivatives are not known. */
static int first_place(const struct differences *it)
{
    return it->has_derivatives ? PLUS_TWO : PLUS_ONE;
}

static void evaluate_place(void *context, size_t thread, size_t task)
{
    const struct differences *it = context;
    const struct propagation_model *model = it->model;
    const size_t place = (size_t)first_place(it) + task;
    double *inputs = it->inputs[thread];
    memcpy(inputs, model->values, model->input_count * sizeof *inputs);
    inputs[it->input] += STEPS[place] * model->spreads[it->input];
    evaluate(model, it->contexts[thread], inputs, it->outputs[place]);
}

static void take_input(struct differences *it, size_t i, size_t threads)
{
    const struct propagation_model *model = it->model;
    it->input = i;
    parallel_run(&(struct parallel){.work = evaluate_place, .context = it}, threads,
                 (size_t)(PLACES - first_place(it)));
    it->is_one_sided[i] = !it->has_derivatives && has_answer(it->outputs[PLUS_ONE], model->output_count) !=
                                                      has_answer(it->outputs[MINUS_ONE], model->output_count);
    for (size_t k = 0; k < model->output_count; k++) {
        take_output(it, i, k);
    }
    if (model->tell != NULL) {
        model->tell(model->tell_context, i + 1, model->input_count);
    }
}

/* One context for each thread, of which the first is the model's own. */
static size_t ready_threads(struct differences *it, struct arena *arena)
{
    const struct propagation_model *model = it->model;
    const size_t threads = parallel_threads(0, (size_t)(PLACES - first_place(it)));
    for (size_t t = 0; t < threads; t++) {
        const bool is_shared = t == 0 || model->context_for_thread == NULL;
        it->contexts[t] = is_shared ? model->context : model->context_for_thread(model->context, arena);
        it->inputs[t] = arena_alloc(arena, model->input_count, sizeof(double));
    }
    return threads;
}

/* Where the derivatives are known nothing is evaluated there. */
static void forget_near_places(struct differences *it)
{
    for (size_t k = 0; it->has_derivatives && k < it->model->output_count; k++) {
        it->outputs[PLUS_ONE][k] = it->outputs[MINUS_ONE][k] = (double)NAN;
    }
}

struct first_order propagate_first_order(const struct propagation_model *model, struct arena *arena)
{
    const size_t outputs = model->output_count;
    struct differences it = {
        .model = model,
        .base = arena_alloc(arena, outputs, sizeof(double)),
        .sensitivities = arena_alloc(arena, model->input_count * outputs, sizeof(double)),
        .standard = arena_alloc(arena, outputs, sizeof(double)),
        .deviations = arena_alloc(arena, outputs, sizeof(double)),
        .is_one_sided = arena_alloc(arena, model->input_count, sizeof(bool)),
    };
    for (int place = 0; place < PLACES; place++) {
        it.outputs[place] = arena_alloc(arena, outputs, sizeof(double));
    }
    evaluate(model, model->context, model->values, it.base);
    const bool is_known = has_answer(it.base, outputs);
    it.has_derivatives = is_known && model->differentiate != NULL &&
                         model->differentiate(model->context, model->values, it.sensitivities);
    forget_near_places(&it);
    const size_t threads = ready_threads(&it, arena);
    for (size_t i = 0; is_known && i < model->input_count; i++) {
        take_input(&it, i, threads);
    }
    return (struct first_order){
        .is_known = is_known,
        .base = it.base,
        .sensitivities = it.sensitivities,
        .is_one_sided = it.is_one_sided,
        .standard = it.standard,
        .deviations = it.deviations,
    };
}

double first_order_share(const struct propagation_model *model, const struct first_order *first, size_t i, size_t k)
{
    const double part = first->sensitivities[i * model->output_count + k] * model->spreads[i] / first->standard[k];
    return first->standard[k] > 0.0 ? part * part : 0.0;
}

bool first_order_is_linear(const struct first_order *first, size_t k)
{
    return first->deviations[k] <= NEARLY_LINEAR * 2.0 * first->standard[k];
}
