/* The table of units: factors against their definitions, composed units, dimensions. */
#include "deck/units.h"
#include "support/check.h"

#include <string.h>

struct factor {
    const char *symbol;
    double factor, offset;
    const char *source;
};

/* Every row of the table stands here, so that a wrong digit shows. The values are exact by definition; the places in
 * the documents are named from memory. */
static const struct factor factors[] = {
    {"Pa", 1.0, 0.0, "SI brochure, 9th edition, table 4"},
    {"hPa", 100.0, 0.0, "SI brochure, table 7, prefixes"},
    {"kPa", 1000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"MPa", 1000000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"mbar", 100.0, 0.0, "1 bar = 100 kPa, SI brochure, 8th edition, table 8"},
    {"bar", 100000.0, 0.0, "1 bar = 100 kPa, SI brochure, 8th edition, table 8"},
    {"atm", 101325.0, 0.0, "10th CGPM, 1954, resolution 4"},
    {"torr", 133.32236842105263, 0.0, "101325/760 Pa, NIST SP 811, appendix B.8"},
    {"mmHg", 133.322387415, 0.0, "13595.1 x 9.80665 / 1000, closed form"},
    {"psi", 6894.757293168361, 0.0, "0.45359237 x 9.80665 / 0.0254^2; NIST SP 811 gives 6.894757 E+03"},
    {"kPaa", 1000.0, 0.0, "as kPa"},
    {"MPaa", 1000000.0, 0.0, "as MPa"},
    {"mbara", 100.0, 0.0, "as mbar"},
    {"bara", 100000.0, 0.0, "as bar"},
    {"psia", 6894.757293168361, 0.0, "as psi"},
    {"kPag", 1000.0, 0.0, "as kPa"},
    {"MPag", 1000000.0, 0.0, "as MPa"},
    {"mbarg", 100.0, 0.0, "as mbar"},
    {"barg", 100000.0, 0.0, "as bar"},
    {"psig", 6894.757293168361, 0.0, "as psi"},
    {"K", 1.0, 0.0, "SI brochure, table 2"},
    {"degC", 1.0, 273.15, "SI brochure, section 2.3.1, T/K = t/degC + 273.15"},
    {"degF", 0.55555555555555556, 255.37222222222222, "T/K = (t/degF + 459.67) / 1.8, NIST SP 811, appendix B.8"},
    {"m", 1.0, 0.0, "SI brochure, table 2"},
    {"dm", 0.1, 0.0, "SI brochure, table 7, prefixes"},
    {"cm", 0.01, 0.0, "SI brochure, table 7, prefixes"},
    {"mm", 0.001, 0.0, "SI brochure, table 7, prefixes"},
    {"ft", 0.3048, 0.0, "international yard and pound, 1959: 1 yd = 0.9144 m"},
    {"L", 0.001, 0.0, "12th CGPM, 1964, resolution 6: 1 dm3"},
    {"mL", 1e-6, 0.0, "12th CGPM, 1964, resolution 6"},
    {"ft3", 0.028316846592, 0.0, "0.3048^3, closed form; NIST SP 811 gives 2.831685 E-02"},
    {"in3", 1.6387064e-5, 0.0, "0.0254^3, closed form; NIST SP 811 gives 1.638706 E-05"},
    {"gal", 0.003785411784, 0.0, "231 in3, NIST Handbook 44, appendix C"},
    {"kg", 1.0, 0.0, "SI brochure, table 2"},
    {"g", 0.001, 0.0, "SI brochure, table 7, prefixes"},
    {"mg", 1e-6, 0.0, "SI brochure, table 7, prefixes"},
    {"t", 1000.0, 0.0, "SI brochure, table 8"},
    {"lb", 0.45359237, 0.0, "international yard and pound, 1959"},
    {"oz", 0.028349523125, 0.0, "1 lb / 16, NIST Handbook 44, appendix C"},
    {"mol", 1.0, 0.0, "SI brochure, table 2"},
    {"mmol", 0.001, 0.0, "SI brochure, table 7, prefixes"},
    {"kmol", 1000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"J", 1.0, 0.0, "SI brochure, table 4"},
    {"kJ", 1000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"MJ", 1000000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"cal", 4.184, 0.0, "thermochemical calorie, NIST SP 811, appendix B.8"},
    {"kcal", 4184.0, 0.0, "thermochemical calorie, NIST SP 811, appendix B.8"},
    {"W", 1.0, 0.0, "SI brochure, table 4"},
    {"kW", 1000.0, 0.0, "SI brochure, table 7, prefixes"},
    {"N", 1.0, 0.0, "SI brochure, table 4"},
    {"s", 1.0, 0.0, "SI brochure, table 2"},
    {"min", 60.0, 0.0, "SI brochure, table 8"},
    {"h", 3600.0, 0.0, "SI brochure, table 8"},
    {"d", 86400.0, 0.0, "SI brochure, table 8"},
    {"D", 3.3356409519815206e-30, 0.0, "1e-21 / 299792458 C m, closed form; from memory: 1e-18 statC cm"},
    {"%", 0.01, 0.0, "SI brochure, section 5.4.7"},
    {"ppm", 1e-6, 0.0, "SI brochure, section 5.4.7"},
    {"ppb", 1e-9, 0.0, "1e-9; the brochure warns of its ambiguity"},
};

enum { FACTORS = sizeof factors / sizeof *factors };

static struct unit unit(const char *symbol)
{
    struct unit found;
    if (!unit_find(symbol, strlen(symbol), &found)) {
        print_error("'%s' is not known\n", symbol);
        fail();
    }
    return found;
}

static void every_factor_is_that_of_its_definition(void **state)
{
    (void)state;
    for (size_t i = 0; i < FACTORS; i++) {
        const struct unit found = unit(factors[i].symbol);
        assert_string_equal(found.shown.symbol, factors[i].symbol);
        assert_close(found.shown.factor, factors[i].factor, 2.3e-16, factors[i].source);
        assert_close(found.shown.offset, factors[i].offset, 2.3e-16, factors[i].source);
    }
}

static void every_row_is_tested_and_says_its_definition(void **state)
{
    (void)state;
    size_t count;
    const struct unit *rows = unit_rows(&count);
    assert_int_equal(count, FACTORS);
    for (size_t i = 0; i < count; i++) {
        assert_string_equal(rows[i].shown.symbol, factors[i].symbol);
        assert_true(strlen(unit_definition(&rows[i])) > 3);
        for (size_t j = 0; j < i; j++) {
            assert_string_not_equal(rows[i].shown.symbol, rows[j].shown.symbol);
        }
    }
}

static void fixed_points_of_the_temperature_scales_agree(void **state)
{
    (void)state;
    const struct unit celsius = unit("degC"), fahrenheit = unit("degF");
    const struct {
        double celsius, fahrenheit;
    } points[] = {{-40.0, -40.0}, {0.0, 32.0}, {100.0, 212.0}, {-273.15, -459.67}, {15.0, 59.0}, {65.0, 149.0}};
    for (size_t i = 0; i < sizeof points / sizeof *points; i++) {
        const double a = points[i].celsius * celsius.shown.factor + celsius.shown.offset;
        const double b = points[i].fahrenheit * fahrenheit.shown.factor + fahrenheit.shown.offset;
        assert_near(a, b, 1e-13, "t/degF = 1.8 t/degC + 32, closed form");
    }
}

struct composed {
    const char *symbol;
    double factor;
    struct dimension dimension;
    const char *source;
};

static const struct composed composed[] = {
    {"kg/L", 1000.0, {1, -3, 0, 0, 0, 0}, "closed form"},
    {"g/L", 1.0, {1, -3, 0, 0, 0, 0}, "closed form"},
    {"g/cm3", 1000.0, {1, -3, 0, 0, 0, 0}, "closed form"},
    {"kg/m3", 1.0, {1, -3, 0, 0, 0, 0}, "closed form"},
    {"lb/ft3", 16.018463373960142, {1, -3, 0, 0, 0, 0}, "0.45359237 / 0.3048^3; NIST SP 811 gives 1.601846 E+01"},
    {"lb/gal", 119.82642731689663, {1, -3, 0, 0, 0, 0}, "0.45359237 / 0.003785411784; NIST SP 811 gives 1.198264 E+02"},
    {"g/mol", 0.001, {1, 0, 0, 0, -1, 0}, "closed form"},
    {"kg/kmol", 0.001, {1, 0, 0, 0, -1, 0}, "closed form"},
    {"mol/L", 1000.0, {0, -3, 0, 0, 1, 0}, "closed form"},
    {"mol/dm3", 1000.0, {0, -3, 0, 0, 1, 0}, "closed form"},
    {"cm3/mol", 1e-6, {0, 3, 0, 0, -1, 0}, "closed form"},
    {"J/mol/K", 1.0, {1, 2, -2, -1, -1, 0}, "closed form"},
    {"J/kmol/K", 0.001, {1, 2, -2, -1, -1, 0}, "closed form"},
    {"cal/mol/K", 4.184, {1, 2, -2, -1, -1, 0}, "closed form"},
    {"kg.m/s2", 1.0, {1, 1, -2, 0, 0, 0}, "closed form"},
    {"s-2", 1.0, {0, 0, -2, 0, 0, 0}, "closed form"},
    {"min-1", 1.0 / 60.0, {0, 0, -1, 0, 0, 0}, "closed form"},
    {"m3", 1.0, {0, 3, 0, 0, 0, 0}, "closed form"},
    {"cm3", 1e-6, {0, 3, 0, 0, 0, 0}, "closed form"},
    {"dm3", 1e-3, {0, 3, 0, 0, 0, 0}, "closed form"},
    {"mm3", 1e-9, {0, 3, 0, 0, 0, 0}, "closed form"},
    {"bar/K", 1e5, {1, -1, -2, -1, 0, 0}, "closed form"},
    {"MPa.m3/kg", 1e6, {0, 2, -2, 0, 0, 0}, "closed form"},
    {"%/K", 0.01, {0, 0, 0, -1, 0, 0}, "closed form"},
};

static void composed_units_are_rounded_once(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof composed / sizeof *composed; i++) {
        const struct unit found = unit(composed[i].symbol);
        assert_close(found.shown.factor, composed[i].factor, 2.3e-16, composed[i].source);
        assert_true(dimension_equal(found.dimension, composed[i].dimension));
        assert_int_equal(found.sort, SORT_PLAIN);
        assert_string_equal(found.shown.symbol, composed[i].symbol);
    }
}

static void what_is_no_unit_is_not_found(void **state)
{
    (void)state;
    const char *const wrong[] = {
        "",
        "barr",
        "Bar",
        "BAR",
        "kg/",
        "/kg",
        "kg//L",
        "kg/L/",
        ".",
        "kg.",
        "m0",
        "m10",
        "m-",
        "m--3",
        "3",
        "-3",
        "m3.5",
        "degC/K",
        "barg/K",
        "kg/bara",
        "degF2",
        "barg2",
        "in",
        "psi a",
        "kg L",
        "m9.m9",
        "s-9.s-9",
        "kg/L/kg/L/kg/L/kg/L/kg/L/kg/L/kg/L/kg/L/kg/L/kg/L",
        "%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%.%x",
    };
    struct unit found;
    for (size_t i = 0; i < sizeof wrong / sizeof *wrong; i++) {
        if (unit_find(wrong[i], strlen(wrong[i]), &found)) {
            print_error("'%s' was taken for a unit\n", wrong[i]);
            fail();
        }
    }
}

static void only_the_length_given_is_read(void **state)
{
    (void)state;
    struct unit found;
    assert_true(unit_find("kg/L and more", 4, &found));
    assert_close(found.shown.factor, 1000.0, 0.0, "closed form");
    assert_true(unit_find("bargain", 4, &found));
    assert_int_equal(found.sort, SORT_GAUGE);
    assert_true(unit_find("bargain", 3, &found));
    assert_int_equal(found.sort, SORT_PLAIN);
}

static void pressures_say_what_they_are_measured_from(void **state)
{
    (void)state;
    size_t count;
    const struct unit *rows = unit_rows(&count);
    for (size_t i = 0; i < count; i++) {
        const char *symbol = rows[i].shown.symbol;
        const char last = symbol[strlen(symbol) - 1];
        if (dimension_equal(rows[i].dimension, DIMENSION_PRESSURE)) {
            const bool is_pascal = strcmp(symbol + strlen(symbol) - 2, "Pa") == 0;
            const enum value_sort sort = last == 'a' && !is_pascal                    ? SORT_ABSOLUTE
                                         : last == 'g' && strcmp(symbol, "mmHg") != 0 ? SORT_GAUGE
                                                                                      : SORT_PLAIN;
            assert_int_equal(rows[i].sort, sort);
        }
    }
    assert_int_equal(unit("degC").sort, SORT_TEMPERATURE_POINT);
    assert_int_equal(unit("K").sort, SORT_PLAIN);
}

static void dimensions_have_names(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct {
        struct dimension dimension;
        const char *name;
    } cases[] = {
        {DIMENSION_NONE, "number"},
        {DIMENSION_PRESSURE, "pressure"},
        {DIMENSION_TEMPERATURE, "temperature"},
        {DIMENSION_VOLUME, "volume"},
        {DIMENSION_MASS, "mass"},
        {DIMENSION_AMOUNT, "amount"},
        {DIMENSION_DENSITY, "mass per volume"},
        {DIMENSION_MOLAR_DENSITY, "amount per volume"},
        {DIMENSION_MOLAR_MASS, "mass per amount"},
        {DIMENSION_MOLAR_HEAT, "heat per amount and kelvin"},
        {DIMENSION_DIPOLE, "dipole moment"},
        {{1, -2, 0, 0, 0, 3}, "kg m-2 A3"},
        {{0, 0, 0, -1, 2, 0}, "K-1 mol2"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        assert_string_equal(dimension_name(cases[i].dimension, arena), cases[i].name);
    }
    arena_free(arena);
}

static void dimensions_multiply_and_stop_at_what_is_senseless(void **state)
{
    (void)state;
    struct dimension product;
    assert_true(dimension_multiply(DIMENSION_DENSITY, DIMENSION_VOLUME, 1, &product));
    assert_true(dimension_equal(product, DIMENSION_MASS));
    assert_true(dimension_multiply(DIMENSION_MASS, DIMENSION_MOLAR_MASS, -1, &product));
    assert_true(dimension_equal(product, DIMENSION_AMOUNT));
    struct dimension volumes = DIMENSION_NONE;
    int times = 0;
    while (dimension_multiply(volumes, DIMENSION_VOLUME, 1, &volumes)) {
        times++;
    }
    assert_int_equal(times, 4);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_factor_is_that_of_its_definition),
        cmocka_unit_test(every_row_is_tested_and_says_its_definition),
        cmocka_unit_test(fixed_points_of_the_temperature_scales_agree),
        cmocka_unit_test(composed_units_are_rounded_once),
        cmocka_unit_test(what_is_no_unit_is_not_found),
        cmocka_unit_test(only_the_length_given_is_read),
        cmocka_unit_test(pressures_say_what_they_are_measured_from),
        cmocka_unit_test(dimensions_have_names),
        cmocka_unit_test(dimensions_multiply_and_stop_at_what_is_senseless),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
