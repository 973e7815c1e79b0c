/* Units of measurement: one table of exact factors, and values that carry their dimension.
 *
 * Nothing is allocated here.
 */
#ifndef TAREWRIGHT_DECK_UNITS_H
#define TAREWRIGHT_DECK_UNITS_H

#include "base/arena.h"
#include "base/shown.h"

#include <stdbool.h>
#include <stddef.h>

/* Exponents of the base units. */
struct dimension {
    signed char kg, m, s, K, mol, A;
};

/* What a number stands for beyond its dimension. */
enum value_sort {
    SORT_PLAIN,
    SORT_GAUGE,            /* a pressure above the standard atmosphere, 101 325 Pa; scales as such */
    SORT_ABSOLUTE,         /* a pressure written with an `a`, or a plain one where a point is wanted */
    SORT_TEMPERATURE_POINT /* written in degC or degF; K serves as point and as difference */
};

struct value {
    double si; /* gauge values: Pa above 101 325 Pa */
    struct dimension dimension;
    enum value_sort sort;
};

struct unit {
    struct shown_unit shown; /* symbol, exact factor, offset */
    struct dimension dimension;
    enum value_sort sort;
};

/* The unit written as `symbol` ("bar", "kg/L", "J/mol/K"); composed ones are parsed: atoms joined by '.' and '/', each
 * perhaps with an integer power ("m3", "s-2"). False when it is not known. A composed unit's shown.symbol is the
 * pointer passed in, an atom's the table's. Gauge, absolute and point units do not compose. */
bool unit_find(const char *symbol, size_t length, struct unit *out);

/* All atoms of the table, for help and for "did you mean". */
const struct unit *unit_rows(size_t *count);
const char *unit_definition(const struct unit *row); /* the definition behind the factor, as "0.45359237 kg, exact" */

bool dimension_equal(struct dimension a, struct dimension b);

/* The dimension of a times b to the given power (1 or -1); false when an exponent gets beyond what makes sense. */
bool dimension_multiply(struct dimension a, struct dimension b, int power, struct dimension *out);

/* A name for a dimension ("pressure", "temperature", "amount per volume"), never NULL: unnamed ones are spelled out in
 * base units into the arena. */
const char *dimension_name(struct dimension dimension, struct arena *arena);

#define DIMENSION_NONE          ((struct dimension){0, 0, 0, 0, 0, 0})
#define DIMENSION_TEMPERATURE   ((struct dimension){0, 0, 0, 1, 0, 0})
#define DIMENSION_PRESSURE      ((struct dimension){1, -1, -2, 0, 0, 0})
#define DIMENSION_VOLUME        ((struct dimension){0, 3, 0, 0, 0, 0})
#define DIMENSION_MASS          ((struct dimension){1, 0, 0, 0, 0, 0})
#define DIMENSION_AMOUNT        ((struct dimension){0, 0, 0, 0, 1, 0})
#define DIMENSION_DENSITY       ((struct dimension){1, -3, 0, 0, 0, 0})
#define DIMENSION_MOLAR_DENSITY ((struct dimension){0, -3, 0, 0, 1, 0})
#define DIMENSION_MOLAR_VOLUME  ((struct dimension){0, 3, 0, 0, -1, 0})
#define DIMENSION_MOLAR_MASS    ((struct dimension){1, 0, 0, 0, -1, 0})
#define DIMENSION_MOLAR_HEAT    ((struct dimension){1, 2, -2, -1, -1, 0})
#define DIMENSION_DIPOLE        ((struct dimension){0, 1, 1, 0, 0, 1})
#define DIMENSION_TIME          ((struct dimension){0, 0, 1, 0, 0, 0})
#define DIMENSION_MASS_FLOW     ((struct dimension){1, 0, -1, 0, 0, 0})
#define DIMENSION_HEAT_CAPACITY ((struct dimension){1, 2, -2, -1, 0, 0})
#define DIMENSION_CONDUCTANCE   ((struct dimension){1, 2, -3, -1, 0, 0})

#endif
