/* Melting lines of the library beside published values, and the temperatures that belong to a pressure. */
#include "fluid/solid.h"
#include "support/check.h"
#include "support/library_deck.h"
#include "support/result_reading.h"

#include <math.h>

static const struct solid_spec *solid_of(const char *gas, struct arena *arena)
{
    const char *text =
        arena_format(arena, "use \"gases\"\nsheet saturation { fluid %s; sweep temperature 280 K }\n", gas);
    const struct solid_spec *solid = library_deck(text, arena)->sheets[0].fluid->spec.pure[0]->solid;
    assert_non_null(solid);
    return solid;
}

/* IAPWS R14-08 (2011), table of values for computer-program verification, from memory: ices Ih, III, V and VI. Krypton
 * by Michels and Prins 1962 as published; carbon dioxide by Span and Wagner 1996 with theta - 1 = 0.05 at 227.4216 K:
 * 0.51795 MPa (1 + 1955.539 * 0.05 + 2055.4593 * 0.0025). */
static const struct {
    const char *gas;
    size_t part;
    double T, pressure, tolerance;
} VALUES[] = {
    {"water", 0, 260.0, 138.268e6, 1e-5},
    {"water", 1, 254.0, 268.685e6, 1e-5},
    {"water", 2, 265.0, 479.640e6, 1e-5},
    {"water", 3, 320.0, 1356.76e6, 1e-5},
};

static void lines_are_those_published(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < sizeof VALUES / sizeof *VALUES; k++) {
        const struct solid_spec *solid = solid_of(VALUES[k].gas, arena);
        assert_true(VALUES[k].part < solid->melting_count);
        assert_close(solid_melting_pressure(&solid->melting[VALUES[k].part], VALUES[k].T), VALUES[k].pressure,
                     VALUES[k].tolerance, VALUES[k].gas);
    }
    const struct solid_spec *krypton = solid_of("krypton", arena);
    assert_close(solid_melting_pressure(&krypton->melting[0], 140.0),
                 -237497645.7 + 109479.2307 * (pow(140.0, 1.6169841) - 1.0), 1e-8, "Michels and Prins 1962, about 1 K");
    arena_free(arena);
}

/* Parts of a line follow on each other, within the last digits of their published ends, Younglove's within 0.2 %; ice V
 * begins far above ice Ih.
 */
static void parts_meet(void **state)
{
    (void)state;
    static const struct {
        const char *gas;
        size_t first;
        double tolerance;
    } meetings[] = {{"water", 1, 1e-4}, {"water", 2, 1e-4}, {"ethylene", 0, 2e-4}, {"parahydrogen", 0, 3e-3}};
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < sizeof meetings / sizeof *meetings; k++) {
        const struct melting_part *one = &solid_of(meetings[k].gas, arena)->melting[meetings[k].first], *next = one + 1;
        assert_close(one->largest_temperature, next->smallest_temperature, 1e-12, meetings[k].gas);
        assert_close(solid_melting_pressure(one, one->largest_temperature),
                     solid_melting_pressure(next, one->largest_temperature), meetings[k].tolerance, meetings[k].gas);
    }
    arena_free(arena);
}

static void a_pressure_has_the_temperature_it_belongs_to(void **state)
{
    (void)state;
    static const char *const gases[] = {"water",   "carbon-dioxide", "argon",
                                        "methane", "ethylene",       "sulfur-hexafluoride"};
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < sizeof gases / sizeof *gases; k++) {
        const struct solid_spec *solid = solid_of(gases[k], arena);
        double slope;
        for (size_t i = 0; i < solid->melting_count; i++) {
            const struct melting_part *part = &solid->melting[i];
            const double T = 0.37 * part->smallest_temperature + 0.63 * part->largest_temperature;
            assert_close(solid_melting_temperature(part, solid_melting_pressure(part, T)), T, 1e-11, gases[k]);
            assert_true(isnan(solid_melting_temperature(part, 1e13)));
        }
        const double T = 0.21 * solid->smallest_temperature + 0.79 * solid->largest_temperature;
        const double p = solid_sublimation_pressure(solid, T, &slope);
        assert_close(solid_sublimation_temperature(solid, p), T, 1e-11, gases[k]);
        assert_true(isnan(solid_sublimation_temperature(solid, 1e9)));
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(lines_are_those_published),
        cmocka_unit_test(parts_meet),
        cmocka_unit_test(a_pressure_has_the_temperature_it_belongs_to),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
