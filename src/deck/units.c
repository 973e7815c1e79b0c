#include "deck/units.h"

#include <assert.h>
#include <math.h>
#include <string.h>

/* Two rows of the same fact would need keeping equal, so all three tables come from units.def. */
static const struct unit rows[] = {
#define UNIT(symbol, numerator, denominator, offset, sort, kg, m, s, K, mol, A, definition) \
    {{symbol, (numerator) / (denominator), offset}, {kg, m, s, K, mol, A}, SORT_##sort},
#include "deck/units.def"
#undef UNIT
};

/* The exact factors, kept apart so that a composed unit is rounded once: kg/L is 1000 kg/m3 to the last digit. */
struct ratio {
    double numerator, denominator;
};

static const struct ratio ratios[] = {
#define UNIT(symbol, numerator, denominator, offset, sort, kg, m, s, K, mol, A, definition) {numerator, denominator},
#include "deck/units.def"
#undef UNIT
};

static const char *const definitions[] = {
#define UNIT(symbol, numerator, denominator, offset, sort, kg, m, s, K, mol, A, definition) definition,
#include "deck/units.def"
#undef UNIT
};

enum {
    ROWS = sizeof rows / sizeof *rows,
    LONGEST_SYMBOL = 48,  /* of a composed unit, in bytes */
    LARGEST_EXPONENT = 12 /* of any base unit in a composed one */
};

static_assert(sizeof ratios / sizeof *ratios == ROWS, "one ratio for each row");
static_assert(sizeof definitions / sizeof *definitions == ROWS, "one definition for each row");

/* The index of the row written exactly so, or ROWS. */
static size_t find_row(const char *symbol, size_t length)
{
    for (size_t i = 0; i < ROWS; i++) {
        const char *row = rows[i].shown.symbol;
        if (row[0] == symbol[0] && strncmp(row, symbol, length) == 0 && row[length] == '\0') {
            return i;
        }
    }
    return ROWS;
}

static void raise_exponents(struct dimension *to, struct dimension by, int power)
{
    to->kg = (signed char)(to->kg + power * by.kg);
    to->m = (signed char)(to->m + power * by.m);
    to->s = (signed char)(to->s + power * by.s);
    to->K = (signed char)(to->K + power * by.K);
    to->mol = (signed char)(to->mol + power * by.mol);
    to->A = (signed char)(to->A + power * by.A);
}

static bool is_small(int exponent)
{
    return exponent >= -LARGEST_EXPONENT && exponent <= LARGEST_EXPONENT;
}

static bool is_bounded(struct dimension d)
{
    return is_small(d.kg) && is_small(d.m) && is_small(d.s) && is_small(d.K) && is_small(d.mol) && is_small(d.A);
}

/* Splits "m3" or "s-2" into the letters' length and the power; false when the power is not one digit from 1 to 9. */
static bool split_power(const char *part, size_t length, size_t *letters, int *power)
{
    *letters = length;
    *power = 1;
    if (length < 2 || part[length - 1] < '1' || part[length - 1] > '9') {
        return true;
    }
    *power = part[length - 1] - '0';
    *letters = length - 1;
    if (part[*letters - 1] == '-') {
        *power = -*power;
        *letters -= 1;
    }
    return *letters > 0;
}

/* Multiplies one factor of a composed unit ("m3" of "kg/m3") into the product so far; `sign` is -1 after a '/'. */
static bool multiply_part(const char *part, size_t length, int sign, struct ratio *product, struct dimension *dimension)
{
    size_t letters = length;
    int power = 1;
    size_t row = length > 0 ? find_row(part, length) : ROWS;
    if (row == ROWS && length > 0 && split_power(part, length, &letters, &power)) {
        row = find_row(part, letters);
    }
    if (row == ROWS || rows[row].sort != SORT_PLAIN) {
        return false;
    }
    power *= sign;
    for (int i = 0; i < (power < 0 ? -power : power); i++) {
        product->numerator *= power > 0 ? ratios[row].numerator : ratios[row].denominator;
        product->denominator *= power > 0 ? ratios[row].denominator : ratios[row].numerator;
    }
    raise_exponents(dimension, rows[row].dimension, power);
    return is_bounded(*dimension);
}

static bool compose(const char *symbol, size_t length, struct unit *out)
{
    struct ratio product = {1.0, 1.0};
    struct dimension dimension = DIMENSION_NONE;
    int sign = 1;
    for (size_t from = 0; from <= length;) {
        size_t to = from;
        while (to < length && symbol[to] != '.' && symbol[to] != '/') {
            to++;
        }
        if (!multiply_part(symbol + from, to - from, sign, &product, &dimension)) {
            return false;
        }
        sign = to < length && symbol[to] == '/' ? -1 : 1;
        from = to + 1;
    }
    const double factor = product.numerator / product.denominator;
    *out = (struct unit){{symbol, factor, 0.0}, dimension, SORT_PLAIN};
    return isfinite(factor) && factor > 0.0;
}

bool unit_find(const char *symbol, size_t length, struct unit *out)
{
    if (length == 0 || length > LONGEST_SYMBOL) {
        return false;
    }
    const size_t row = find_row(symbol, length);
    if (row < ROWS) {
        *out = rows[row];
        return true;
    }
    return compose(symbol, length, out);
}

const struct unit *unit_rows(size_t *count)
{
    *count = ROWS;
    return rows;
}

const char *unit_definition(const struct unit *row)
{
    return definitions[row - rows];
}

bool dimension_multiply(struct dimension a, struct dimension b, int power, struct dimension *out)
{
    *out = a;
    raise_exponents(out, b, power);
    return is_bounded(*out);
}

bool dimension_equal(struct dimension a, struct dimension b)
{
    return a.kg == b.kg && a.m == b.m && a.s == b.s && a.K == b.K && a.mol == b.mol && a.A == b.A;
}

struct named_dimension {
    struct dimension dimension;
    const char *name;
};

static const struct named_dimension names[] = {
    {{0, 0, 0, 0, 0, 0}, "number"},
    {{1, -1, -2, 0, 0, 0}, "pressure"},
    {{0, 0, 0, 1, 0, 0}, "temperature"},
    {{0, 1, 0, 0, 0, 0}, "length"},
    {{0, 2, 0, 0, 0, 0}, "area"},
    {{0, 3, 0, 0, 0, 0}, "volume"},
    {{1, 0, 0, 0, 0, 0}, "mass"},
    {{0, 0, 0, 0, 1, 0}, "amount"},
    {{0, 0, 1, 0, 0, 0}, "time"},
    {{1, -3, 0, 0, 0, 0}, "mass per volume"},
    {{0, -3, 0, 0, 1, 0}, "amount per volume"},
    {{0, 3, 0, 0, -1, 0}, "volume per amount"},
    {{-1, 3, 0, 0, 0, 0}, "volume per mass"},
    {{1, 0, 0, 0, -1, 0}, "mass per amount"},
    {{1, 2, -2, 0, 0, 0}, "energy"},
    {{1, 2, -2, 0, -1, 0}, "energy per amount"},
    {{1, 2, -2, -1, -1, 0}, "heat per amount and kelvin"},
    {{1, 2, -3, 0, 0, 0}, "power"},
    {{1, 1, -2, 0, 0, 0}, "force"},
    {{0, 1, 1, 0, 0, 1}, "dipole moment"},
    {{1, 0, -1, 0, 0, 0}, "mass per time"},
    {{1, 2, -2, -1, 0, 0}, "heat per kelvin"},
    {{1, 2, -3, -1, 0, 0}, "power per kelvin"},
};

const char *dimension_name(struct dimension dimension, struct arena *arena)
{
    for (size_t i = 0; i < sizeof names / sizeof *names; i++) {
        if (dimension_equal(names[i].dimension, dimension)) {
            return names[i].name;
        }
    }
    const char *const symbols[] = {"kg", "m", "s", "K", "mol", "A"};
    const int exponents[] = {dimension.kg, dimension.m, dimension.s, dimension.K, dimension.mol, dimension.A};
    const char *spelled = "";
    for (size_t i = 0; i < sizeof symbols / sizeof *symbols; i++) {
        const char *gap = *spelled ? " " : "";
        if (exponents[i] == 1) {
            spelled = arena_format(arena, "%s%s%s", spelled, gap, symbols[i]);
        } else if (exponents[i] != 0) {
            spelled = arena_format(arena, "%s%s%s%d", spelled, gap, symbols[i], exponents[i]);
        }
    }
    return spelled;
}
