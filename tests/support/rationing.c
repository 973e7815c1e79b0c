#include "support/rationing.h"

#include "support/check.h"

#include <stdlib.h>

enum { BLOCKS_MOST = 100000 };

static void *take(void *context, size_t bytes)
{
    struct ration *ration = context;
    void *block = ration->left > 0 ? malloc(bytes) : NULL;
    if (block) {
        ration->left--;
        ration->held++;
    }
    return block;
}

static void give_back(void *context, void *block)
{
    struct ration *ration = context;
    ration->held -= block != NULL;
    free(block);
}

struct arena_source ration_source(struct ration *ration)
{
    return (struct arena_source){take, give_back, ration};
}

bool ration_run(size_t blocks, void (*work)(struct arena *arena, void *context), void *context)
{
    struct ration ration = {.left = blocks};
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
    assert_int_equal(ration.held, 0);
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
