#include "support/rationing.h"

#include "support/check.h"

#include <stdlib.h>

enum { BLOCKS_MOST = 100000 };

static void *take(void *context, size_t bytes)
{
    struct ration *ration = context;
    void *block = atomic_fetch_sub(&ration->left, 1) > 0 ? malloc(bytes) : NULL;
    if (block) {
        atomic_fetch_add(&ration->held, 1);
    }
    return block;
}

static void give_back(void *context, void *block)
{
    struct ration *ration = context;
    if (block) {
        atomic_fetch_sub(&ration->held, 1);
    }
    free(block);
}

struct arena_source ration_source(struct ration *ration)
{
    return (struct arena_source){take, give_back, ration};
}

bool ration_run(size_t blocks, void (*work)(struct arena *arena, void *context), void *context)
{
    struct ration ration;
    atomic_init(&ration.left, (long)blocks);
    atomic_init(&ration.held, 0);
    const struct arena_source source = ration_source(&ration);
    struct arena *arena = arena_create(&source);
    volatile bool is_done = false;
    jmp_buf place;
    if (arena && setjmp(place) == 0) {
        arena_on_exhaustion(arena, &place);
        work(arena, context);
        is_done = true;
    }
    arena_free(arena);
    assert_int_equal(atomic_load(&ration.held), 0);
    return is_done;
}

size_t ration_until_done(void (*work)(struct arena *arena, void *context), void *context)
{
    size_t blocks = 0;
    while (!ration_run(blocks, work, context)) {
        blocks++;
        assert_true(blocks < BLOCKS_MOST);
    }
    return blocks;
}
