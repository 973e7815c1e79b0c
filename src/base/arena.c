#include "base/arena.h"

#include <stdalign.h>
#include <stdarg.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Blocks are chained; small requests share one, a request larger than half a block gets its own. */
enum { BLOCK_BYTES = 64 * 1024 };

struct block {
    struct block *next;
    max_align_t content[];
};

struct arena {
    struct arena_source source;
    struct block *blocks;
    char *free_from; /* the unused rest of the current shared block */
    size_t free_bytes;
    jmp_buf *exhausted;
};

static void *take_by_malloc(void *context, size_t bytes)
{
    (void)context;
    return malloc(bytes);
}

static void give_back_by_free(void *context, void *block)
{
    (void)context;
    free(block);
}

struct arena *arena_create(const struct arena_source *source)
{
    const struct arena_source usual = {take_by_malloc, give_back_by_free, NULL};
    const struct arena_source from = source ? *source : usual;
    struct arena *arena = from.take(from.context, sizeof *arena);
    if (arena) {
        *arena = (struct arena){.source = from};
    }
    return arena;
}

struct arena *arena_create_beside(const struct arena *beside)
{
    return arena_create(&beside->source);
}

void arena_free(struct arena *arena)
{
    if (!arena) {
        return;
    }
    const struct arena_source source = arena->source;
    for (struct block *block = arena->blocks; block;) {
        struct block *next = block->next;
        source.give_back(source.context, block);
        block = next;
    }
    source.give_back(source.context, arena);
}

void arena_on_exhaustion(struct arena *arena, jmp_buf *place)
{
    arena->exhausted = place;
}

static struct block *take_block(struct arena *arena, size_t bytes)
{
    if (bytes > SIZE_MAX - sizeof(struct block)) {
        return NULL;
    }
    struct block *block = arena->source.take(arena->source.context, sizeof *block + bytes);
    if (block) {
        block->next = arena->blocks;
        arena->blocks = block;
    }
    return block;
}

static void *take_bytes(struct arena *arena, size_t bytes)
{
    if (bytes <= arena->free_bytes) {
        void *taken = arena->free_from;
        arena->free_from += bytes;
        arena->free_bytes -= bytes;
        return taken;
    }
    if (bytes > BLOCK_BYTES / 2) {
        struct block *block = take_block(arena, bytes);
        return block ? block->content : NULL;
    }
    struct block *block = take_block(arena, BLOCK_BYTES);
    if (!block) {
        return NULL;
    }
    arena->free_from = (char *)block->content + bytes;
    arena->free_bytes = BLOCK_BYTES - bytes;
    return block->content;
}

void *arena_try(struct arena *arena, size_t count, size_t size)
{
    const size_t step = alignof(max_align_t);
    if (size != 0 && count > (SIZE_MAX - step) / size) {
        return NULL;
    }
    /* Nothing takes a step too: an arena without a block has no place to point at. */
    const size_t bytes = count * size > 0 ? (count * size + step - 1) / step * step : step;
    void *taken = take_bytes(arena, bytes);
    if (taken) {
        memset(taken, 0, bytes);
    }
    return taken;
}

void arena_give_up(struct arena *arena)
{
    if (!arena->exhausted) {
        abort();
    }
    longjmp(*arena->exhausted, 1);
}

void *arena_alloc(struct arena *arena, size_t count, size_t size)
{
    void *taken = arena_try(arena, count, size);
    if (!taken) {
        arena_give_up(arena);
    }
    return taken;
}

char *arena_copy_text(struct arena *arena, const char *text, size_t length)
{
    char *copy = arena_alloc(arena, length + 1, 1);
    if (length != 0) {
        memcpy(copy, text, length);
    }
    return copy;
}

char *arena_format(struct arena *arena, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    const int length = vsnprintf(NULL, 0, format, arguments);
    va_end(arguments);
    if (length < 0) {
        return arena_copy_text(arena, "", 0);
    }
    char *text = arena_alloc(arena, (size_t)length + 1, 1);
    va_start(arguments, format);
    vsnprintf(text, (size_t)length + 1, format, arguments);
    va_end(arguments);
    return text;
}

void *arena_grow(struct arena *arena, void *items, size_t *capacity, size_t needed, size_t size)
{
    if (needed <= *capacity) {
        return items;
    }
    size_t larger = *capacity < 4 ? 8 : *capacity * 2;
    if (larger < needed) {
        larger = needed;
    }
    void *grown = arena_alloc(arena, larger, size);
    if (*capacity != 0) {
        memcpy(grown, items, *capacity * size);
    }
    *capacity = larger;
    return grown;
}
