/* Tables of defined names: hashed, because a library defines some hundreds and a deck may define any number. */
#include "case/case_internal.h"

#include <string.h>

/* FNV-1a, 32 bits: short, and good enough for words. */
static size_t hash_of(const char *name)
{
    uint32_t hash = 2166136261U;
    for (const char *at = name; *at != '\0'; at++) {
        hash = (hash ^ (unsigned char)*at) * 16777619U;
    }
    return hash;
}

struct named *names_find(const struct name_table *table, const char *name)
{
    if (table->bucket_count == 0) {
        return NULL;
    }
    struct named *named = table->buckets[hash_of(name) % table->bucket_count];
    while (named != NULL && strcmp(named->name, name) != 0) {
        named = named->next_in_bucket;
    }
    return named;
}

static void put_in_bucket(struct name_table *table, struct named *named)
{
    struct named **bucket = &table->buckets[hash_of(named->name) % table->bucket_count];
    named->next_in_bucket = *bucket;
    *bucket = named;
}

/* Twice the buckets, so that chains stay short. */
static void widen(struct arena *arena, struct name_table *table)
{
    table->bucket_count = table->bucket_count == 0 ? 64 : table->bucket_count * 2;
    table->buckets = arena_alloc(arena, table->bucket_count, sizeof *table->buckets);
    for (size_t i = 0; i < table->count; i++) {
        put_in_bucket(table, table->items[i]);
    }
}

struct named *names_add(struct arena *arena, struct name_table *table, const char *name)
{
    struct named *named = names_find(table, name);
    if (named != NULL) {
        return named;
    }
    if (table->count >= table->bucket_count) {
        widen(arena, table);
    }
    named = arena_alloc(arena, 1, sizeof *named);
    named->name = name;
    named->number = table->count;
    *ARENA_APPEND(arena, table) = named;
    put_in_bucket(table, named);
    return named;
}
