#include "deck/vocabulary.h"

#include <assert.h>
#include <string.h>

struct block_row {
    const char *title;
    enum vocabulary_block also[2];
};

#define ALSO(first, second)           \
    {                                 \
        BLOCK_##first, BLOCK_##second \
    }

static const struct block_row blocks[] = {
#define BLOCK(id, title, also) [BLOCK_##id] = {title, also},
#define WORD(block, id, word, follows, measure, meaning, example)
#include "../../grammar/vocabulary.def"
#undef BLOCK
#undef WORD
};

static const struct vocabulary_row rows[] = {
#define BLOCK(id, title, also)
#define WORD(block, id, word, follows, measure, meaning, example) \
    {BLOCK_##block, WORD_##block##_##id, word, follows, MEASURE_##measure, meaning, example},
#include "../../grammar/vocabulary.def"
#undef BLOCK
#undef WORD
};

static const struct vocabulary_row *find_own(enum vocabulary_block block, const char *word)
{
    for (size_t i = 0; i < WORDS; i++) {
        if (rows[i].block == block && strcmp(rows[i].word, word) == 0) {
            return &rows[i];
        }
    }
    return NULL;
}

const struct vocabulary_row *vocabulary_find(enum vocabulary_block block, const char *word)
{
    const struct vocabulary_row *found = find_own(block, word);
    for (size_t i = 0; i < 2 && !found && block < BLOCKS; i++) {
        const enum vocabulary_block also = blocks[block].also[i];
        found = also == block ? NULL : find_own(also, word);
    }
    return found;
}

const struct vocabulary_row *vocabulary_next(const char *word, const struct vocabulary_row *previous)
{
    for (const struct vocabulary_row *row = previous ? previous + 1 : rows; row < rows + WORDS; row++) {
        if (strcmp(row->word, word) == 0) {
            return row;
        }
    }
    return NULL;
}

static bool is_in(const struct block_row *block, enum vocabulary_block own, enum vocabulary_block candidate)
{
    return candidate == own || candidate == block->also[0] || candidate == block->also[1];
}

size_t vocabulary_words(enum vocabulary_block block, const char **words, size_t capacity)
{
    size_t count = 0;
    for (size_t i = 0; i < WORDS && block < BLOCKS; i++) {
        if (is_in(&blocks[block], block, rows[i].block)) {
            if (count < capacity) {
                words[count] = rows[i].word;
            }
            count++;
        }
    }
    return count;
}

const struct vocabulary_row *vocabulary_rows(void)
{
    static_assert(sizeof rows / sizeof *rows == WORDS, "every word has its row");
    return rows;
}

const char *vocabulary_block_title(enum vocabulary_block block)
{
    return block < BLOCKS ? blocks[block].title : "";
}

struct dimension measure_dimension(enum measure measure)
{
    switch (measure) {
    case MEASURE_PRESSURE:
    case MEASURE_GAUGE:
        return DIMENSION_PRESSURE;
    case MEASURE_TEMPERATURE:
        return DIMENSION_TEMPERATURE;
    case MEASURE_VOLUME:
        return DIMENSION_VOLUME;
    case MEASURE_MASS:
        return DIMENSION_MASS;
    case MEASURE_AMOUNT:
        return DIMENSION_AMOUNT;
    case MEASURE_DENSITY:
        return DIMENSION_DENSITY;
    case MEASURE_MOLAR_DENSITY:
        return DIMENSION_MOLAR_DENSITY;
    case MEASURE_MOLAR_VOLUME:
        return DIMENSION_MOLAR_VOLUME;
    case MEASURE_MOLAR_MASS:
        return DIMENSION_MOLAR_MASS;
    case MEASURE_MOLAR_HEAT:
        return DIMENSION_MOLAR_HEAT;
    case MEASURE_DIPOLE:
        return DIMENSION_DIPOLE;
    case MEASURE_TIME:
        return DIMENSION_TIME;
    case MEASURE_MASS_FLOW:
        return DIMENSION_MASS_FLOW;
    case MEASURE_HEAT_CAPACITY:
        return DIMENSION_HEAT_CAPACITY;
    case MEASURE_CONDUCTANCE:
        return DIMENSION_CONDUCTANCE;
    case MEASURE_NONE:
    case MEASURE_NUMBER:
    case MEASURES:
        break;
    }
    return DIMENSION_NONE;
}
