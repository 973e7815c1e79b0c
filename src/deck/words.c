#include "deck/words.h"

#include "deck/units.h"

#include <string.h>

enum { FIRST_CAPACITY = 256 };

/* FNV-1a, 32 bits (Fowler, Noll, Vo; RFC draft "The FNV Non-Cryptographic Hash Algorithm"), stirred once more, since
 * numbered words would otherwise fill neighbouring places. */
static uint32_t hash_of(const char *text, size_t length)
{
    uint32_t hash = 2166136261U;
    for (size_t i = 0; i < length; i++) {
        hash = (hash ^ (unsigned char)text[i]) * 16777619U;
    }
    hash = (hash ^ hash >> 16) * 0x9e3779b1U;
    return hash ^ hash >> 15;
}

/* The place of the word, or the free place where it belongs. The table is never full. */
static struct word *find_place(const struct word_table *table, const char *text, size_t length, uint32_t hash)
{
    for (size_t at = hash & (table->capacity - 1);; at = (at + 1) & (table->capacity - 1)) {
        struct word *place = &table->places[at];
        const bool is_same =
            place->text && place->hash == hash && place->length == length && memcmp(place->text, text, length) == 0;
        if (!place->text || is_same) {
            return place;
        }
    }
}

static bool make_room(struct word_table *table, struct arena *arena)
{
    if (2 * (table->count + 1) <= table->capacity) {
        return true;
    }
    struct word_table larger = {.capacity = table->capacity ? 2 * table->capacity : FIRST_CAPACITY,
                                .count = table->count};
    larger.places = arena_try(arena, larger.capacity, sizeof *larger.places);
    if (!larger.places) {
        return false;
    }
    for (size_t i = 0; i < table->capacity; i++) {
        const struct word *old = &table->places[i];
        if (old->text) {
            *find_place(&larger, old->text, old->length, old->hash) = *old;
        }
    }
    *table = larger;
    return true;
}

struct word *word_enter(struct word_table *table, struct arena *arena, const char *text, size_t length)
{
    if (!make_room(table, arena)) {
        return NULL;
    }
    const uint32_t hash = hash_of(text, length);
    struct word *place = find_place(table, text, length, hash);
    if (!place->text) {
        char *copy = arena_try(arena, length + 1, 1);
        if (!copy) {
            return NULL;
        }
        memcpy(copy, text, length);
        *place = (struct word){.text = copy, .length = (uint32_t)length, .hash = hash};
        table->count++;
    }
    return place;
}

bool word_is_entered(const struct word_table *table, const char *text, size_t length)
{
    return table->capacity > 0 && find_place(table, text, length, hash_of(text, length))->text;
}

bool word_is_unit(struct word *word)
{
    if (word->unit == UNIT_UNKNOWN) {
        struct unit found;
        word->unit = unit_find(word->text, word->length, &found) ? UNIT_YES : UNIT_NO;
    }
    return word->unit == UNIT_YES;
}
