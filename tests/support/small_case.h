/* A case built by hand: propane in a vessel, for tests of sheets without a deck.
 *
 * All of it is in this header, so that only the tests of sheets link what sheets need. */
#ifndef TAREWRIGHT_TESTS_SMALL_CASE_H
#define TAREWRIGHT_TESTS_SMALL_CASE_H

#include "filling/sheet.h"
#include "support/check.h"

#include <string.h>

enum { SMALL_CASE_METHODS = 4 };

/* Everything may be changed before small_case_start. The struct must stay where it is. */
struct small_case {
    struct arena *arena;
    struct pure_spec pure;
    const struct pure_spec *pure_list[1];
    struct case_component component;
    const struct case_component *component_list[1];
    double fraction;
    struct case_fluid fluid;
    struct case_vessel vessel;
    struct case_charge charge;
    struct case_sheet sheet;
    struct deck deck;
    struct source_file file;
    struct case_tree tree;
    struct method_run methods[SMALL_CASE_METHODS];
    struct sheet_run run;
};

/* Lemmon, McLinden and Wagner, J. Chem. Eng. Data 54 (2009) 3141, table 4. */
static const struct residual_term SMALL_CASE_PROPANE_TERMS[] = {
    {.kind = RESIDUAL_POWER, .n = 0.042910051, .t = 1, .d = 4},
    {.kind = RESIDUAL_POWER, .n = 1.7313671, .t = 0.33, .d = 1},
    {.kind = RESIDUAL_POWER, .n = -2.4516524, .t = 0.8, .d = 1},
    {.kind = RESIDUAL_POWER, .n = 0.34157466, .t = 0.43, .d = 2},
    {.kind = RESIDUAL_POWER, .n = -0.46047898, .t = 0.9, .d = 2},
    {.kind = RESIDUAL_POWER, .n = -0.66847295, .t = 2.46, .d = 1, .l = 1},
    {.kind = RESIDUAL_POWER, .n = 0.20889705, .t = 2.09, .d = 3, .l = 1},
    {.kind = RESIDUAL_POWER, .n = 0.19421381, .t = 0.88, .d = 6, .l = 1},
    {.kind = RESIDUAL_POWER, .n = -0.22917851, .t = 1.09, .d = 6, .l = 1},
    {.kind = RESIDUAL_POWER, .n = -0.60405866, .t = 3.25, .d = 2, .l = 2},
    {.kind = RESIDUAL_POWER, .n = 0.066680654, .t = 4.62, .d = 3, .l = 2},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.017534618,
     .t = 0.76,
     .d = 1,
     .eta = 0.963,
     .epsilon = 1.283,
     .beta = 2.33,
     .gamma = 0.684},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.33874242,
     .t = 2.5,
     .d = 1,
     .eta = 1.977,
     .epsilon = 0.6936,
     .beta = 3.47,
     .gamma = 0.829},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = 0.22228777,
     .t = 2.75,
     .d = 1,
     .eta = 1.917,
     .epsilon = 0.788,
     .beta = 3.15,
     .gamma = 1.419},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.23219062,
     .t = 3.05,
     .d = 2,
     .eta = 2.307,
     .epsilon = 0.473,
     .beta = 3.19,
     .gamma = 0.817},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.09220694,
     .t = 2.55,
     .d = 2,
     .eta = 2.546,
     .epsilon = 0.8577,
     .beta = 0.92,
     .gamma = 1.5},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.47575718,
     .t = 8.4,
     .d = 4,
     .eta = 3.28,
     .epsilon = 0.271,
     .beta = 18.8,
     .gamma = 1.426},
    {.kind = RESIDUAL_GAUSSIAN,
     .n = -0.017486824,
     .t = 6.75,
     .d = 1,
     .eta = 14.6,
     .epsilon = 0.948,
     .beta = 547.8,
     .gamma = 1.093},
};

/* Its ideal-gas part is left out: no filling question needs it. */
static const struct reference_spec SMALL_CASE_PROPANE_EQUATION = {
    .gas_constant = 8.314472,
    .reducing_temperature = 369.89,
    .reducing_density = 5000.0,
    .residual_count = sizeof SMALL_CASE_PROPANE_TERMS / sizeof *SMALL_CASE_PROPANE_TERMS,
    .residual = SMALL_CASE_PROPANE_TERMS,
    .critical_temperature = 369.890009,
    .critical_pressure = 4251165.33,
    .critical_density = 5000.0006,
    .smallest_temperature = 85.525,
    .largest_temperature = 650.0,
    .largest_pressure = 1e9,
};

static const struct case_source SMALL_CASE_SOURCE = {
    .key = "lemmon-2009",
    .citation = "E. W. Lemmon, M. O. McLinden, W. Wagner, J. Chem. Eng. Data 54 (2009) 3141",
};

static inline struct quantity small_case_sourced(double value, const char *written)
{
    return (struct quantity){
        .given = true,
        .value = value,
        .origin = {.kind = ORIGIN_LIBRARY, .written = written, .source = &SMALL_CASE_SOURCE},
    };
}

static inline struct quantity small_case_given(double value, const char *written)
{
    return (struct quantity){.given = true, .value = value, .origin = {.kind = ORIGIN_DECK, .written = written}};
}

static const struct display_units SMALL_CASE_UNITS = {
    .temperature = {"degC", 1.0, 273.15},
    .pressure = {"bara", 1e5, 0.0},
    .gauge = {"barg", 1e5, 101325.0},
    .density = {"kg/L", 1e3, 0.0},
    .mass = {"kg", 1.0, 0.0},
    .gas_volume = {"m3", 1.0, 0.0},
    .volume = {"L", 1e-3, 0.0},
};

static inline void small_case_set_up_fluid(struct small_case *small)
{
    small->pure = (struct pure_spec){
        .name = "propane",
        .molar_mass = 0.04409562,
        .critical_temperature = {true, 369.89},
        .critical_pressure = {true, 4251200.0},
        .acentric = {true, 0.1521},
        .triple_temperature = {true, 85.525},
        .reference = &SMALL_CASE_PROPANE_EQUATION,
    };
    small->component = (struct case_component){
        .name = "propane",
        .formula = "C3H8",
        .cas = "74-98-6",
        .un_number = 1978,
        .molar_mass = small_case_sourced(0.04409562, "44.09562 g/mol"),
        .critical_temperature = small_case_sourced(369.89, "369.89 K"),
        .critical_pressure = small_case_sourced(4251200.0, "4.2512 MPa"),
        .acentric = small_case_sourced(0.1521, "0.1521"),
        .triple_temperature = small_case_sourced(85.525, "85.525 K"),
        .equation_source = &SMALL_CASE_SOURCE,
        .spec = small->pure,
    };
    small->pure_list[0] = &small->pure;
    small->component_list[0] = &small->component;
    small->fraction = 1.0;
    small->fluid = (struct case_fluid){
        .name = "propane",
        .count = 1,
        .components = small->component_list,
        .fractions = &small->fraction,
        .molar_mass = 0.04409562,
        .spec = {.count = 1, .pure = small->pure_list},
    };
}

/* Propane (constants and reference equation of Lemmon, McLinden and Wagner 2009) in 79.3 L of water capacity. */
static inline void small_case_set_up(struct small_case *small, enum sheet_kind kind)
{
    memset(small, 0, sizeof *small);
    small->arena = arena_create(NULL);
    small_case_set_up_fluid(small);
    small->vessel = (struct case_vessel){
        .name = "eighty",
        .water_capacity = small_case_given(0.0793, "79.3 L"),
        .test_pressure = small_case_given(30e5, "30 barg"),
    };
    small->charge = (struct case_charge){.name = "lot", .fluid = &small->fluid, .vessel = &small->vessel};
    small->file = (struct source_file){
        .name = "small.deck",
        .text = "case \"small\"\n",
        .length = 13,
        .sha256 = "0000000000000000000000000000000000000000000000000000000000000000",
    };
    small->deck.root = &small->file;
    small->sheet = (struct case_sheet){
        .kind = kind,
        .fluid = &small->fluid,
        .vessel = &small->vessel,
        .charge = &small->charge,
        .units = SMALL_CASE_UNITS,
    };
    small->tree = (struct case_tree){
        .deck = &small->deck,
        .ambient_pressure = 101325.0,
        .sheet_count = 1,
        .sheets = &small->sheet,
        .component_count = 1,
        .components = small->component_list,
    };
}

static inline void small_case_tear_down(struct small_case *small)
{
    arena_free(small->arena);
}

/* Creates the methods named (NULL-terminated, lead first) and the result; afterwards small->run may be answered. */
static inline void small_case_start(struct small_case *small, const char *const methods[])
{
    struct result *result = result_create(small->arena);
    small->run = (struct sheet_run){
        .arena = small->arena,
        .tree = &small->tree,
        .sheet = &small->sheet,
        .result = result,
        .out = result_add_sheet(result, "test", NULL),
        .number = 1,
        .methods = small->methods,
    };
    while (methods[small->run.method_count] != NULL) {
        assert_in_range(small->run.method_count, 0, SMALL_CASE_METHODS - 1);
        small->methods[small->run.method_count] =
            method_run_create(&small->fluid, methods[small->run.method_count], true, small->arena);
        small->run.method_count++;
    }
}

static inline const struct sheet_part *small_case_part(const struct small_case *small, enum part_kind kind,
                                                       size_t index)
{
    for (const struct sheet_part *each = small->run.out->first_part; each; each = each->next) {
        if (each->kind == kind && index-- == 0) {
            return each;
        }
    }
    return NULL;
}

/* Parts of the sheet so far; NULL when there are fewer. */
static inline const struct table *small_case_table(const struct small_case *small, size_t index)
{
    const struct sheet_part *found = small_case_part(small, PART_TABLE, index);
    return found ? found->table : NULL;
}

static inline const struct hand_check *small_case_check(const struct small_case *small, size_t index)
{
    const struct sheet_part *found = small_case_part(small, PART_HAND_CHECK, index);
    return found ? found->hand_check : NULL;
}

/* A cell by its column's name; fails the test when there is none. */
static inline const struct cell *small_case_cell(const struct table *table, size_t row, const char *column)
{
    assert_non_null(table);
    assert_true(row < table->row_count);
    for (size_t i = 0; i < table->column_count; i++) {
        if (strcmp(table->columns[i].name, column) == 0) {
            return &table->cells[row * table->column_count + i];
        }
    }
    fail_msg("no column %s", column);
    return NULL;
}

#endif
