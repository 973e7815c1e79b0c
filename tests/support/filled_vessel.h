/* A sheet at work, built by hand: one pure gas in one vessel by the methods named, without a deck.
 *
 * Everything lives in the fixture's arena. The constants are those of carbon dioxide (Span and Wagner, J. Phys. Chem.
 * Ref. Data 25 (1996) 1509) unless a test changes them before methods are added.
 */
#ifndef TAREWRIGHT_TESTS_FILLED_VESSEL_H
#define TAREWRIGHT_TESTS_FILLED_VESSEL_H

#include "filling/predicate.h"

#include <stdlib.h>
#include <string.h>

#define BAR        1e5
#define GAUGE_ZERO 101325.0
#define CELSIUS    273.15

struct filled_vessel {
    struct arena *arena;
    struct case_component component;
    const struct case_component *components[1];
    const struct pure_spec *pure[1];
    double fractions[1];
    struct case_fluid fluid;
    struct case_vessel vessel;
    struct case_charge charge;
    struct case_entry entry;
    const struct case_entry *entries[1];
    struct case_sheet sheet;
    struct case_tree tree;
    struct method_run methods[4];
    struct sheet_run run;
};

static inline struct quantity given(double value)
{
    return (struct quantity){.given = true, .value = value};
}

static inline struct filled_vessel *filled_vessel_create(void)
{
    struct arena *arena = arena_create(NULL);
    struct filled_vessel *it = arena_alloc(arena, 1, sizeof *it);
    it->arena = arena;
    it->component = (struct case_component){
        .name = "carbon-dioxide",
        .molar_mass = given(0.0440098),
        .critical_temperature = given(304.1282),
        .critical_pressure = given(7.3773e6),
        .acentric = given(0.22394),
        .triple_temperature = given(216.592),
        .spec = {.name = "carbon-dioxide",
                 .molar_mass = 0.0440098,
                 .critical_temperature = {true, 304.1282},
                 .critical_pressure = {true, 7.3773e6},
                 .acentric = {true, 0.22394},
                 .triple_temperature = {true, 216.592}},
    };
    it->components[0] = &it->component;
    it->pure[0] = &it->component.spec;
    it->fractions[0] = 1.0;
    it->fluid = (struct case_fluid){.name = "carbon-dioxide",
                                    .count = 1,
                                    .components = it->components,
                                    .fractions = it->fractions,
                                    .molar_mass = 0.0440098,
                                    .spec = {.count = 1, .pure = it->pure}};
    it->vessel =
        (struct case_vessel){.name = "fifty", .water_capacity = given(0.0502), .test_pressure = given(250.0 * BAR)};
    it->sheet = (struct case_sheet){.kind = SHEET_PERMISSIBLE_CHARGE,
                                    .fluid = &it->fluid,
                                    .vessel = &it->vessel,
                                    .units = {.temperature = {"degC", 1.0, CELSIUS},
                                              .pressure = {"bara", BAR, 0.0},
                                              .gauge = {"barg", BAR, GAUGE_ZERO},
                                              .density = {"kg/L", 1000.0, 0.0},
                                              .mass = {"kg", 1.0, 0.0},
                                              .gas_volume = {"m3", 1.0, 0.0},
                                              .volume = {"L", 1e-3, 0.0}}};
    it->tree = (struct case_tree){.ambient_pressure = GAUGE_ZERO, .sheet_count = 1, .sheets = &it->sheet};
    struct result *result = result_create(arena);
    it->run = (struct sheet_run){.arena = arena,
                                 .tree = &it->tree,
                                 .sheet = &it->sheet,
                                 .result = result,
                                 .out = result_add_sheet(result, "permissible-charge", NULL),
                                 .number = 1,
                                 .methods = it->methods};
    return it;
}

static inline struct method_run *filled_vessel_method(struct filled_vessel *it, const char *name)
{
    struct method_run *method = &it->methods[it->run.method_count++];
    *method = method_run_create(&it->fluid, name, true, it->arena);
    if (method->fluid == NULL) {
        abort();
    }
    return method;
}

static inline const struct formula *formula_number(struct filled_vessel *it, double number)
{
    struct formula *formula = arena_alloc(it->arena, 1, sizeof *formula);
    *formula = (struct formula){.kind = FORMULA_NUMBER, .number = number};
    return formula;
}

/* factor * symbol */
static inline const struct formula *formula_share(struct filled_vessel *it, double factor, enum case_symbol symbol)
{
    struct formula *right = arena_alloc(it->arena, 1, sizeof *right);
    *right = (struct formula){.kind = FORMULA_SYMBOL, .symbol = symbol};
    struct formula *product = arena_alloc(it->arena, 1, sizeof *product);
    *product = (struct formula){.kind = FORMULA_MULTIPLY, .left = formula_number(it, factor), .right = right};
    return product;
}

static inline struct predicate compared(double from, double to, enum case_symbol quantity, enum relation relation,
                                        const struct formula *bound)
{
    return (struct predicate){.kind = PREDICATE_COMPARE,
                              .from = from,
                              .to = to,
                              .has_temperature = true,
                              .quantity = quantity,
                              .relation = relation,
                              .bound = bound,
                              .gauge_zero = GAUGE_ZERO,
                              .written = "hand-built"};
}

static inline struct predicate of_phases(enum predicate_kind kind, double from, double to)
{
    return (struct predicate){.kind = kind,
                              .from = from,
                              .to = to,
                              .has_temperature = true,
                              .gauge_zero = GAUGE_ZERO,
                              .written = "hand-built"};
}

/* pressure <= factor * test-pressure, the bound a gauge one */
static inline struct predicate pressure_within_test(struct filled_vessel *it, double temperature, double factor)
{
    struct predicate predicate = compared(temperature, temperature, SYMBOL_PRESSURE, RELATION_AT_MOST,
                                          formula_share(it, factor, SYMBOL_TEST_PRESSURE));
    predicate.bound_is_gauge = true;
    predicate.written = "pressure <= share of test-pressure";
    return predicate;
}

#endif
