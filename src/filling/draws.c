/* Propagation of distributions by random draws. Each chunk of draws has a generator of its own and its own part of the
 * results, which are summed up afterwards in their order: nothing depends on which thread did what. */
#include "base/parallel.h"
#include "filling/propagation.h"

#include <gsl/gsl_randist.h>
#include <gsl/gsl_rng.h>
#include <math.h>
#include <stdlib.h>

enum { CHUNK_DRAWS = 250, TRIES_MOST = 100 };

/* What a thread needs for itself. */
struct drawer {
    void *context;
    gsl_rng generator; /* its state lies in the arena */
    double *inputs;    /* [input_count] */
    double *outputs;   /* [output_count] */
};

struct chunk_tally {
    size_t impossible, unanswered;
};

struct drawing {
    const struct propagation_model *model;
    size_t draws, chunks;
    uint64_t seed;
    double *results;             /* [output_count * draws], output by output; NaN: no answer */
    struct chunk_tally *tallies; /* [chunks] */
    struct drawer *drawers;      /* [threads] */
};

/* ---- generators -------------------------------------------------------------------------------------------------- */

/* The finishing step of SplitMix64 (G. Steele, D. Lea, C. Flood, OOPSLA 2014), so that neighbouring chunks and seeds
 * begin far apart. */
static uint64_t mixed(uint64_t bits)
{
    bits += UINT64_C(0x9E3779B97F4A7C15);
    bits = (bits ^ (bits >> 30)) * UINT64_C(0xBF58476D1CE4E5B9);
    bits = (bits ^ (bits >> 27)) * UINT64_C(0x94D049BB133111EB);
    return bits ^ (bits >> 31);
}

/* Only 32 bits of a seed count for the Mersenne twister, and 0 stands for its usual one. */
static unsigned long chunk_seed(uint64_t seed, size_t chunk)
{
    return (unsigned long)(mixed(mixed(seed) + (uint64_t)chunk) & UINT64_C(0xFFFFFFFF)) | 1UL;
}

/* The library's generator on memory of the arena. */
static gsl_rng generator_create(struct arena *arena)
{
    const gsl_rng_type *type = gsl_rng_mt19937;
    return (gsl_rng){.type = type, .state = arena_alloc(arena, 1, type->size)};
}

/* ---- draws ------------------------------------------------------------------------------------------------------- */

static enum model_answer draw_once(const struct propagation_model *model, struct drawer *drawer)
{
    for (size_t i = 0; i < model->input_count; i++) {
        drawer->inputs[i] = model->values[i] + gsl_ran_gaussian_ziggurat(&drawer->generator, model->spreads[i]);
    }
    return model->evaluate(drawer->context, drawer->inputs, drawer->outputs);
}

static enum model_answer draw_possible(const struct propagation_model *model, struct drawer *drawer,
                                       struct chunk_tally *tally)
{
    for (int tries = 0; tries < TRIES_MOST; tries++) {
        const enum model_answer answer = draw_once(model, drawer);
        if (answer != MODEL_IMPOSSIBLE) {
            return answer;
        }
        tally->impossible++;
    }
    return MODEL_NO_ANSWER;
}

static void draw_chunk(void *context, size_t thread, size_t chunk)
{
    const struct drawing *it = context;
    struct drawer *drawer = &it->drawers[thread];
    struct chunk_tally tally = {0, 0};
    gsl_rng_set(&drawer->generator, chunk_seed(it->seed, chunk));
    const size_t first = chunk * CHUNK_DRAWS;
    for (size_t j = first; j < first + CHUNK_DRAWS && j < it->draws; j++) {
        const bool is_answered = draw_possible(it->model, drawer, &tally) == MODEL_OK;
        tally.unanswered += !is_answered;
        for (size_t k = 0; k < it->model->output_count; k++) {
            it->results[k * it->draws + j] = is_answered ? drawer->outputs[k] : (double)NAN;
        }
    }
    it->tallies[chunk] = tally;
}

static void tell(void *context, size_t done)
{
    const struct drawing *it = context;
    it->model->tell(it->model->tell_context, done, it->chunks);
}

static struct drawer *drawers_create(const struct propagation_model *model, size_t threads, struct arena *arena)
{
    struct drawer *drawers = arena_alloc(arena, threads, sizeof *drawers);
    for (size_t t = 0; t < threads; t++) {
        drawers[t].context =
            model->context_for_thread == NULL ? model->context : model->context_for_thread(model->context, arena);
        drawers[t].generator = generator_create(arena);
        drawers[t].inputs = arena_alloc(arena, model->input_count, sizeof(double));
        drawers[t].outputs = arena_alloc(arena, model->output_count, sizeof(double));
    }
    return drawers;
}

/* ---- summing up -------------------------------------------------------------------------------------------------- */

double numerical_tolerance(double standard, int digits)
{
    if (!(standard > 0.0)) {
        return 0.0;
    }
    /* u = c 10^l with c of so many digits; rounding up to 10^digits moves the place. */
    double place = floor(log10(standard)) - (double)(digits - 1);
    if (round(standard / pow(10.0, place)) >= pow(10.0, (double)digits)) {
        place += 1.0;
    }
    return 0.5 * pow(10.0, place);
}

static int by_value(const void *left, const void *right)
{
    const double a = *(const double *)left, b = *(const double *)right;
    return (a > b) - (a < b);
}

/* The answers first, in the order they were drawn. */
static size_t without_gaps(double results[], size_t count)
{
    size_t kept = 0;
    for (size_t j = 0; j < count; j++) {
        if (isfinite(results[j])) {
            results[kept++] = results[j];
        }
    }
    return kept;
}

/* Deviations from the first result are summed up, so that nothing is lost where the spread is small. */
static void sum_up(const double results[], size_t count, struct drawn_output *out)
{
    const double origin = results[0];
    double sum = 0.0;
    for (size_t j = 0; j < count; j++) {
        sum += results[j] - origin;
    }
    out->mean = origin + sum / (double)count;
    double squares = 0.0;
    size_t kept = 0;
    for (size_t j = 0; j < count; j++) {
        squares += (results[j] - out->mean) * (results[j] - out->mean);
        kept += results[j] >= 0.0;
    }
    out->part_not_below_zero = (double)kept / (double)count;
    out->standard = sqrt(squares / (double)(count - 1));
}

/* The result that a part of all sorted ones lies below: between the two nearest, JCGM 101, 7.5 and 7.7. */
static double quantile(const double sorted[], size_t count, double part)
{
    const double place = fmin(fmax(part * (double)count - 0.5, 0.0), (double)(count - 1));
    const size_t below = (size_t)place;
    const double rest = place - (double)below;
    const double next = sorted[below + 1 < count ? below + 1 : below];
    return sorted[below] + rest * (next - sorted[below]);
}

/* The standard uncertainty of a quantile: half the way between those one standard deviation of the number of draws
 * below it to either side. */
static double quantile_blur(const double sorted[], size_t count, double part)
{
    const double off = sqrt(part * (1.0 - part) / (double)count);
    return 0.5 * (quantile(sorted, count, part + off) - quantile(sorted, count, part - off));
}

/* JCGM 101, 8.1: both ends within the numerical tolerance of those by first order. */
static void compare(const struct first_order *first, size_t k, struct drawn_output *out)
{
    const double reach = COVERAGE_FACTOR * first->standard[k];
    out->tolerance = numerical_tolerance(first->standard[k], TOLERANCE_DIGITS);
    out->low_off = fabs(out->low - (first->base[k] - reach));
    out->high_off = fabs(out->high - (first->base[k] + reach));
    out->agrees = out->low_off <= out->tolerance && out->high_off <= out->tolerance;
    out->is_blurred = !out->agrees && out->low_off <= out->tolerance + 2.0 * out->low_blur &&
                      out->high_off <= out->tolerance + 2.0 * out->high_blur;
}

static struct drawn_output sum_up_output(const struct drawing *it, const struct first_order *first, size_t k)
{
    double *results = &it->results[k * it->draws];
    struct drawn_output out = {.count = without_gaps(results, it->draws)};
    if (out.count < 2) {
        out.mean = out.standard = out.low = out.high = (double)NAN;
        return out;
    }
    sum_up(results, out.count, &out);
    qsort(results, out.count, sizeof *results, by_value);
    out.low = quantile(results, out.count, 0.5 * (1.0 - COVERAGE));
    out.high = quantile(results, out.count, 0.5 * (1.0 + COVERAGE));
    out.low_blur = quantile_blur(results, out.count, 0.5 * (1.0 - COVERAGE));
    out.high_blur = quantile_blur(results, out.count, 0.5 * (1.0 + COVERAGE));
    compare(first, k, &out);
    return out;
}

struct drawn propagate_draws(const struct propagation_model *model, const struct first_order *first, size_t draws,
                             uint64_t seed, size_t threads, struct arena *arena)
{
    struct drawing it = {.model = model, .draws = draws, .seed = seed};
    it.chunks = (draws + CHUNK_DRAWS - 1) / CHUNK_DRAWS;
    it.results = arena_alloc(arena, model->output_count * draws, sizeof *it.results);
    it.tallies = arena_alloc(arena, it.chunks, sizeof *it.tallies);
    const size_t used = parallel_threads(threads, it.chunks);
    it.drawers = drawers_create(model, used, arena);
    parallel_run(&(struct parallel){.work = draw_chunk, .context = &it, .tell = model->tell == NULL ? NULL : tell},
                 used, it.chunks);
    struct drawn_output *outputs = arena_alloc(arena, model->output_count, sizeof *outputs);
    for (size_t k = 0; k < model->output_count; k++) {
        outputs[k] = sum_up_output(&it, first, k);
    }
    struct drawn drawn = {.draws = draws, .outputs = outputs};
    for (size_t chunk = 0; chunk < it.chunks; chunk++) {
        drawn.impossible += it.tallies[chunk].impossible;
        drawn.unanswered += it.tallies[chunk].unanswered;
    }
    return drawn;
}
