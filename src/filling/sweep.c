/* Each thread has a method_run of its own for each method. They are made before the threads begin, as the arena serves
 * one thread only. Where a sweep is too small to be worth threads, the caller's thread takes chunk after chunk, in the
 * same way. */
#include "filling/sweep.h"

#include "base/parallel.h"
#include "filling/mixture_contents.h"
#include "filling/solve.h"

#include <string.h>

/* Points that share what they found: enough for a warm start to pay, few enough for many threads. */
enum { CHUNK_POINTS = 16 };
/* Points solved before they are told. */
enum { BLOCK_POINTS = 32 * CHUNK_POINTS };
/* Work in points of a pure gas, each some microseconds. Below this much, some fiftieths of a second, nobody would
 * notice the difference, and threads use up time waiting for each other. */
enum { WORK_WORTH_THREADS = 30000, WORK_OF_COMPONENT = 6 };

/* A block of points at work. */
struct block {
    const struct sweep *sweep;
    size_t first, count; /* points */
    size_t chunks;       /* of each method */
    size_t thread_count;
    struct method_run *own; /* [thread_count * method_count] */
    char *answers;          /* [method_count * BLOCK_POINTS] of answer_size */
    bool *speaks_against;   /* [method_count * chunks]: the envelope was given up */
};

static size_t smaller(size_t a, size_t b)
{
    return a < b ? a : b;
}

static void *answer_at(const struct block *block, size_t method, size_t index)
{
    return block->answers + (method * block->count + index) * block->sweep->answer_size;
}

/* ---- progress ---------------------------------------------------------------------------------------------------- */

static void tell_progress(const struct sweep *sweep, size_t done)
{
    const struct progress *progress = sweep->run->progress;
    if (progress != NULL) {
        const struct progress_state state = {
            .sheet = sweep->run->number,
            .sheet_count = sweep->run->tree->sheet_count,
            .kind = sweep->run->out->kind,
            .done = done,
            .count = sweep->point_count * sweep->method_count,
        };
        progress->tell(progress->context, &state);
    }
}

/* ---- one chunk --------------------------------------------------------------------------------------------------- */

static void solve_chunk(void *context, size_t thread, size_t task)
{
    const struct block *block = context;
    const struct sweep *sweep = block->sweep;
    const size_t method = task / block->chunks, chunk = task % block->chunks;
    const size_t first = chunk * CHUNK_POINTS, end = smaller(first + CHUNK_POINTS, block->count);
    struct method_run *own = &block->own[thread * sweep->method_count + method];
    method_run_begin_again(own, sweep->methods[method]);
    for (size_t i = first; i < end; i++) {
        sweep->solve(sweep->context, own, block->first + i, answer_at(block, method, i));
    }
    block->speaks_against[task] = method_run_gave_up_envelope(own, sweep->methods[method]);
}

static void tell_chunks(void *context, size_t done)
{
    const struct block *block = context;
    const size_t methods = block->sweep->method_count;
    tell_progress(block->sweep, block->first * methods + smaller(done * CHUNK_POINTS, methods * block->count));
}

static size_t threads_for(const struct sweep *sweep)
{
    const size_t components = sweep->methods[0]->fluid->count;
    const size_t work_of_point = components > 1 ? WORK_OF_COMPONENT * components : 1;
    if (sweep->point_count * sweep->method_count * work_of_point < WORK_WORTH_THREADS) {
        return 1;
    }
    const size_t chunks = (smaller(sweep->point_count, BLOCK_POINTS) + CHUNK_POINTS - 1) / CHUNK_POINTS;
    return parallel_threads(0, chunks * sweep->method_count);
}

/* ---- blocks ------------------------------------------------------------------------------------------------------ */

static struct method_run *own_methods(const struct sweep *sweep, size_t thread_count)
{
    struct arena *arena = sweep->run->arena;
    struct method_run *own = arena_alloc(arena, thread_count * sweep->method_count, sizeof *own);
    for (size_t i = 0; i < thread_count * sweep->method_count; i++) {
        own[i] = method_run_for_thread(sweep->methods[i % sweep->method_count], arena);
    }
    return own;
}

static void tell_block(const struct block *block)
{
    const struct sweep *sweep = block->sweep;
    for (size_t m = 0; m < sweep->method_count; m++) {
        for (size_t i = 0; i < block->count; i++) {
            sweep->tell(sweep->teller, m, block->first + i, answer_at(block, m, i));
        }
    }
}

static void learn_of_envelopes(const struct block *block)
{
    for (size_t task = 0; task < block->sweep->method_count * block->chunks; task++) {
        if (block->speaks_against[task]) {
            mixture_give_up_envelope(block->sweep->methods[task / block->chunks]);
        }
    }
}

void sweep_points(const struct sweep *sweep)
{
    if (sweep->point_count == 0 || sweep->method_count == 0) {
        return;
    }
    for (size_t m = 0; sweep->needs_edges && m < sweep->method_count; m++) {
        method_run_trace_envelope(sweep->methods[m]);
    }
    struct arena *arena = sweep->run->arena;
    const size_t most = smaller(sweep->point_count, BLOCK_POINTS),
                 most_chunks = (most + CHUNK_POINTS - 1) / CHUNK_POINTS;
    struct block block = {
        .sweep = sweep,
        .thread_count = threads_for(sweep),
        .answers = arena_alloc(arena, sweep->method_count * most, sweep->answer_size),
        .speaks_against = arena_alloc(arena, sweep->method_count * most_chunks, sizeof(bool)),
    };
    block.own = own_methods(sweep, block.thread_count);
    for (block.first = 0; block.first < sweep->point_count; block.first += block.count) {
        block.count = smaller(sweep->point_count - block.first, BLOCK_POINTS);
        block.chunks = (block.count + CHUNK_POINTS - 1) / CHUNK_POINTS;
        parallel_run(&(struct parallel){.work = solve_chunk, .context = &block, .tell = tell_chunks},
                     block.thread_count, sweep->method_count * block.chunks);
        learn_of_envelopes(&block);
        tell_block(&block);
    }
}

struct method_run **methods_that_serve(const struct sheet_run *run, size_t *count)
{
    struct method_run **methods = arena_alloc(run->arena, run->method_count, sizeof *methods);
    *count = 0;
    for (size_t i = 0; i < run->method_count; i++) {
        if (run->methods[i].fluid != NULL) {
            methods[(*count)++] = &run->methods[i];
        }
    }
    return methods;
}

/* ---- contents over temperature ----------------------------------------------------------------------------------- */

static size_t size_of_contents(size_t components)
{
    return sizeof(struct swept_contents) + (components > 1 ? MOST_PHASES * components * sizeof(double) : 0);
}

/* The compositions move to the answer's own memory. */
static void take_compositions(struct swept_contents *answer, size_t components)
{
    for (size_t k = 0; k < answer->contents.phase_count; k++) {
        struct contents_phase *phase = &answer->contents.phases[k];
        if (phase->x != NULL) {
            phase->x = memcpy(&answer->x[k * components], phase->x, components * sizeof *phase->x);
        }
    }
}

static void solve_contents(const void *context, struct method_run *method, size_t point, void *out)
{
    const struct contents_sweep *sweep = context;
    struct swept_contents *answer = out;
    answer->answer = contents_at(sweep->run, method, sweep->mass, sweep->temperatures[point], &answer->contents);
    if (answer->answer == ANSWER_OK) {
        take_compositions(answer, method->fluid->count);
    }
}

static void tell_contents(void *teller, size_t method, size_t point, const void *answer)
{
    const struct contents_sweep *sweep = teller;
    sweep->tell(sweep->teller, method, point, answer);
}

void sweep_contents(const struct contents_sweep *sweep)
{
    struct contents_sweep telling = *sweep;
    const struct sweep points = {
        .run = sweep->run,
        .point_count = sweep->count,
        .method_count = sweep->method_count,
        .methods = sweep->methods,
        .needs_edges = true,
        .answer_size = size_of_contents(sweep->run->sheet->fluid->count),
        .context = sweep,
        .solve = solve_contents,
        .tell = tell_contents,
        .teller = &telling,
    };
    sweep_points(&points);
}

struct swept_contents *swept_contents_keep(const struct swept_contents *answer, size_t components, struct arena *arena)
{
    const size_t size = size_of_contents(components);
    struct swept_contents *kept = memcpy(arena_alloc(arena, 1, size), answer, size);
    take_compositions(kept, components);
    return kept;
}
