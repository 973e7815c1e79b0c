#include "report/number.h"

#include "report/page.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { MOST_DIGITS = 17, NUMBER_BYTES = 64 };

/* JCGM 100, 7.2.6: at most two significant digits of an uncertainty. */
enum { SPREAD_DIGITS = 2 };

/* From here on a double's digits before the point are no longer its own. */
#define LARGEST_FIXED 1e15

/* Fewer significant digits than this many places before the point are written as a power of ten. */
enum { MOST_PLACES_FILLED = 7, MOST_LEADING_ZEROS = 4 };

static int at_most(int value, int limit)
{
    return value < limit ? value : limit;
}

static void write_fixed(char text[NUMBER_BYTES], double value, int decimals)
{
    if (fabs(value) < LARGEST_FIXED) {
        snprintf(text, NUMBER_BYTES, "%.*f", at_most(decimals, MOST_DIGITS), value);
    } else {
        snprintf(text, NUMBER_BYTES, "%.9e", value);
    }
}

/* "-d.ddde+xx" becomes "-ddd.d", "-ddd000" or "-0.00dddd"; places that the digits do not reach are zeros. */
static void write_without_power(char text[NUMBER_BYTES], long exponent)
{
    char digits[NUMBER_BYTES];
    const bool is_negative = text[0] == '-';
    const size_t dot = 1 + (size_t)is_negative, end = strcspn(text, "e");
    const size_t after = end > dot ? end - dot - 1 : 0; /* of the point */
    const size_t before_point = exponent < 0 ? 0 : (size_t)exponent + 1;
    digits[0] = text[dot - 1];
    memcpy(digits + 1, text + dot + 1, after);
    const size_t count = 1 + after;
    char *to = text + is_negative;
    for (size_t k = 0; k < before_point; k++) {
        *to++ = k < count ? digits[k] : '0';
    }
    if (exponent < 0) {
        *to++ = '0';
    }
    if (count > before_point) {
        *to++ = '.';
    }
    for (long k = exponent + 1; k < 0; k++) {
        *to++ = '0';
    }
    for (size_t k = before_point; k < count; k++) {
        *to++ = digits[k];
    }
    *to = '\0';
}

static void write_significant(char text[NUMBER_BYTES], double value, int digits)
{
    snprintf(text, NUMBER_BYTES, "%.*e", at_most(digits, MOST_DIGITS) - 1, value);
    const long exponent = strtol(strchr(text, 'e') + 1, NULL, 10);
    if (exponent >= -MOST_LEADING_ZEROS && (exponent < MOST_PLACES_FILLED || exponent < digits)) {
        write_without_power(text, exponent);
    }
}

/* A negative number that rounds to nothing must not keep its sign. */
static const char *without_sign_of_zero(const char *text)
{
    return text[0] == '-' && text[1 + strspn(text + 1, "0.")] == '\0' ? text + 1 : text;
}

static const char *show(struct arena *arena, double value, int decimals)
{
    if (!isfinite(value)) {
        return PAGE_DASH;
    }
    char text[NUMBER_BYTES];
    if (decimals >= 0) {
        write_fixed(text, value, decimals);
    } else if (fabs(value) > 0) {
        write_significant(text, value, -decimals);
    } else {
        snprintf(text, sizeof text, "0");
    }
    const char *shown = without_sign_of_zero(text);
    return arena_copy_text(arena, shown, strlen(shown));
}

const char *number_shown(struct arena *arena, const struct look *look, double si)
{
    return show(arena, look_shown(look, si), look->decimals);
}

const char *number_shown_difference(struct arena *arena, const struct look *look, double si)
{
    return show(arena, si / look->shown.factor, look->decimals);
}

const char *number_spread(struct arena *arena, const struct look *look, double si)
{
    return show(arena, si / look->shown.factor, -SPREAD_DIGITS);
}

const char *number_unit(const struct look *look)
{
    return look->shown.symbol && look->shown.symbol[0] != '\0' ? look->shown.symbol : "1";
}

const char *number_exact(struct arena *arena, const struct look *look, double si)
{
    const double value = look_shown(look, si);
    if (!isfinite(value)) {
        return "";
    }
    char text[NUMBER_BYTES];
    for (int digits = 15; digits <= MOST_DIGITS; digits++) {
        snprintf(text, sizeof text, "%.*g", digits, value);
        const double read_back = strtod(text, NULL) * look->shown.factor + look->shown.offset;
        if (!(read_back < si || read_back > si)) {
            break;
        }
    }
    const char *shown = without_sign_of_zero(text);
    return arena_copy_text(arena, shown, strlen(shown));
}
