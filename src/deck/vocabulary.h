/* The words of the deck language: one table (grammar/vocabulary.def) from which the scanner takes its reserved words,
 * elaboration its dispatch, the help verb and the language reference their texts.
 *
 * A word has its meaning in its block only, so the same spelling may stand in several rows.
 * Nothing is allocated here; all texts are constants.
 */
#ifndef TAREWRIGHT_DECK_VOCABULARY_H
#define TAREWRIGHT_DECK_VOCABULARY_H

#include "deck/units.h"

#include <stdbool.h>
#include <stddef.h>

/* Where a word may stand: in a block of statements, or among the words that may follow another word. */
enum vocabulary_block {
#define BLOCK(id, title, also) BLOCK_##id,
#define WORD(block, id, word, follows, measure, meaning, example)
#include "../../grammar/vocabulary.def"
#undef BLOCK
#undef WORD
    BLOCKS
};

/* One identifier for each row, as WORD_VESSEL_TEST_PRESSURE. */
enum vocabulary_word {
#define BLOCK(id, title, also)
#define WORD(block, id, word, follows, measure, meaning, example) WORD_##block##_##id,
#include "../../grammar/vocabulary.def"
#undef BLOCK
#undef WORD
    WORDS
};

/* What is measured by the value a word takes. */
enum measure {
    MEASURE_NONE, /* the word takes no single value */
    MEASURE_NUMBER,
    MEASURE_PRESSURE,    /* absolute; a plain unit is read as absolute */
    MEASURE_GAUGE,       /* a rating: must be written as gauge */
    MEASURE_TEMPERATURE, /* a point */
    MEASURE_VOLUME,
    MEASURE_MASS,
    MEASURE_AMOUNT,
    MEASURE_DENSITY,       /* mass per volume */
    MEASURE_MOLAR_DENSITY, /* amount per volume; a component's critical-density may be mass per volume too */
    MEASURE_MOLAR_VOLUME,
    MEASURE_MOLAR_MASS,
    MEASURE_MOLAR_HEAT,
    MEASURE_DIPOLE,
    MEASURE_TIME,
    MEASURE_MASS_FLOW,
    MEASURE_HEAT_CAPACITY, /* energy per kelvin, of a thing */
    MEASURE_CONDUCTANCE,   /* power per kelvin */
    MEASURES
};

struct vocabulary_row {
    enum vocabulary_block block;
    enum vocabulary_word id; /* equal to the row's index in vocabulary_rows() */
    const char *word;
    const char *follows; /* what follows the word, "" for nothing */
    enum measure measure;
    const char *meaning; /* one line */
    const char *example; /* a statement that uses it */
};

/* The row of `word` in `block`, or in a block whose words `block` shares (a sheet's kind shares those of all sheets);
 * NULL when it has no place there. */
const struct vocabulary_row *vocabulary_find(enum vocabulary_block block, const char *word);

/* All rows with this spelling are visited in table order: start with previous NULL, end at NULL. For help. */
const struct vocabulary_row *vocabulary_next(const char *word, const struct vocabulary_row *previous);

/* The spellings allowed in `block`, shared ones included, for suggestions. At most `capacity` are stored; returns how
 * many there are. VOCABULARY_MOST always suffices. */
enum { VOCABULARY_MOST = 64 };
size_t vocabulary_words(enum vocabulary_block block, const char **words, size_t capacity);

/* The whole table, WORDS rows. */
const struct vocabulary_row *vocabulary_rows(void);

/* What a block is called, as "in a vessel block"; for messages: "'tset-pressure' has no place %s". */
const char *vocabulary_block_title(enum vocabulary_block block);

/* The dimension a measure has; DIMENSION_NONE for MEASURE_NONE and MEASURE_NUMBER. */
struct dimension measure_dimension(enum measure measure);

#endif
