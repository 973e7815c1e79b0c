/* Memory for one run: blocks that are taken one by one and given back all at once.
 *
 * Ownership: everything an arena hands out belongs to the arena and lives until arena_free.
 * No other allocation is made by tarewright's own code, so one call ends a run's memory, also after a failure.
 * Running out is not handled call by call: arena_alloc leaves by longjmp to the place the run set with
 * arena_on_exhaustion, as no caller in between could do better than give up. Code that holds something outside
 * the arena (a parser's stack, an open file) uses arena_try and gives it back itself.
 */
#ifndef TAREWRIGHT_BASE_ARENA_H
#define TAREWRIGHT_BASE_ARENA_H

#include <setjmp.h>
#include <stddef.h>

struct arena;

/* Where blocks come from; tests pass one that fails at the i-th call. Both members as malloc and free, also in that
 * several threads may call them at once. */
struct arena_source {
    void *(*take)(void *context, size_t bytes);
    void (*give_back)(void *context, void *block);
    void *context;
};

/* A new arena fed from `source` (NULL: malloc and free); NULL when there is no memory for it. */
struct arena *arena_create(const struct arena_source *source);

/* A further arena that takes its memory where `beside` takes it, with a life of its own; NULL when there is none.
 * Running out of it has to be provided for anew. */
struct arena *arena_create_beside(const struct arena *beside);

/* Gives back everything taken from the arena and the arena itself; NULL is fine. */
void arena_free(struct arena *arena);

/* Where arena_alloc jumps when memory runs out; without one it aborts. `place` must outlive its use. */
void arena_on_exhaustion(struct arena *arena, jmp_buf *place);

/* `count` items of `size` bytes, zeroed, aligned for any type; never NULL (see above). The product is checked. */
void *arena_alloc(struct arena *arena, size_t count, size_t size);

/* As arena_alloc, but NULL when memory runs out. */
void *arena_try(struct arena *arena, size_t count, size_t size);

/* What arena_alloc does when memory runs out, for those who used arena_try and have given back what they held. */
_Noreturn void arena_give_up(struct arena *arena);

/* A copy of `length` bytes of `text` with a closing NUL. */
char *arena_copy_text(struct arena *arena, const char *text, size_t length);

/* Formatted text, of any length. */
char *arena_format(struct arena *arena, const char *format, ...) __attribute__((format(printf, 2, 3)));

/* A larger block for a growing list: at least `needed` items, contents of the old block kept, the rest zeroed.
 * `capacity` holds the block's size in items and is updated; `items` may be NULL with *capacity 0. */
void *arena_grow(struct arena *arena, void *items, size_t *capacity, size_t needed, size_t size);

/* One more item at the end of a list: `list` is any struct with `items`, `count` and `capacity` members. */
#define ARENA_APPEND(arena, list)                                                                                     \
    ((list)->items = arena_grow((arena), (list)->items, &(list)->capacity, (list)->count + 1, sizeof *(list)->items), \
     &(list)->items[(list)->count++])

#endif
