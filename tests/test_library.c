/* The data library as it stands under decks/library, read as a user's deck reads it, against independent values. */
#include "base/file.h"
#include "case/case.h"
#include "equilibrium/saturation.h"
#include "run/run.h"
#include "support/check.h"
#include "support/reference_check.h"

#include <jansson.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* A root deck from memory; everything else from the library's folder. */
static bool read_root_or_library(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const char *root = context;
    if (strcmp(path, "root.deck") != 0) {
        return deck_read_file(NULL, arena, path, text, length);
    }
    *length = strlen(root);
    *text = arena_copy_text(arena, root, *length);
    return true;
}

/* The component as a sheet with that lead method uses it. */
static const struct case_component *component_in_use(struct arena *arena, const char *gas, const char *method)
{
    char *root = arena_format(arena,
                              "use \"gases\"\nmethods { lead %s }\n"
                              "sheet fugacity { fluid %s; sweep temperature 300 K; sweep pressure 1 bara }\n",
                              method, gas);
    const struct deck_reader reader = {read_root_or_library, root, "decks/library"};
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck *deck = deck_load("root.deck", &reader, arena, &diagnostics);
    const struct case_tree *tree = deck != NULL ? case_elaborate(deck, arena, &diagnostics) : NULL;
    if (tree == NULL) {
        struct text drawn = {.arena = arena};
        diagnostics_draw(&diagnostics, &drawn);
        print_error("%s\n%s\n", gas, drawn.bytes);
        fail();
    }
    return tree->sheets[0].fluid->components[0];
}

/* The second field of each row that differs from the row before: the gases of reference-states.csv, in its order. */
static bool next_gas(const char **row, char gas[64])
{
    for (; **row != '\0'; *row = strchr(*row, '\n') + 1) {
        char name[64];
        if (sscanf(*row, "state,%63[^,]", name) == 1 && strcmp(name, gas) != 0) {
            strcpy(gas, name);
            return true;
        }
    }
    return false;
}

static void every_reference_equation_gives_its_independent_values(void **state)
{
    (void)state;
    struct arena *file = arena_create(NULL);
    const char *rows = reference_rows_read(file);
    const char *row = rows;
    char gas[64] = "";
    size_t gases = 0, checked = 0;
    while (next_gas(&row, gas)) {
        struct arena *arena = arena_create(NULL);
        const size_t count = reference_rows_check(rows, &component_in_use(arena, gas, "reference")->spec, arena);
        assert_true(count >= 9);
        checked += count;
        gases++;
        arena_free(arena);
    }
    assert_int_equal(gases, 92);
    assert_int_equal(checked, 1360);
    arena_free(file);
}

/* ---- vapour pressures ----------------------------------------------------------------------------------------------
 */

/* One row of vapour-pressure.csv: a published equation for a vapour pressure, in Pa, and by how much at most it is
 * known to part from the reference equation, in per cent of that. */
struct vapour_pressure {
    char gas[64], form[16];
    double A, B, C, D, critical_temperature, critical_pressure, lowest, highest, deviation;
};

/* Fields are separated by commas outside quotation marks; absent numbers become NaN. */
static const char *next_field(const char *at, char *field, size_t size)
{
    bool is_quoted = false;
    size_t length = 0;
    for (; *at != '\0' && *at != '\n' && (is_quoted || *at != ','); at++) {
        if (*at == '"') {
            is_quoted = !is_quoted;
        } else if (length + 1 < size) {
            field[length++] = *at;
        }
    }
    field[length] = '\0';
    return *at == ',' ? at + 1 : at;
}

static const char *next_number(const char *at, double *number)
{
    char field[64];
    at = next_field(at, field, sizeof field);
    *number = field[0] != '\0' ? strtod(field, NULL) : (double)NAN;
    return at;
}

static struct vapour_pressure vapour_pressure_row(const char *row)
{
    struct vapour_pressure read;
    char source[256];
    const char *at = next_field(row, read.gas, sizeof read.gas);
    at = next_field(at, read.form, sizeof read.form);
    double *const numbers[] = {
        &read.A,      &read.B,      &read.C, &read.D, &read.critical_temperature, &read.critical_pressure,
        &read.lowest, &read.highest};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; i++) {
        at = next_number(at, numbers[i]);
    }
    at = next_field(at, source, sizeof source);
    next_number(at, &read.deviation);
    return read;
}

static double vapour_pressure_at(const struct vapour_pressure *row, double T)
{
    if (strcmp(row->form, "antoine10") == 0) {
        return pow(10.0, row->A - row->B / (T + row->C));
    }
    if (strcmp(row->form, "antoine_e") == 0) {
        return exp(row->A - row->B / (T + row->C));
    }
    const double x = 1.0 - T / row->critical_temperature;
    const bool is_25 = strcmp(row->form, "wagner25") == 0;
    const double sum =
        row->A * x + row->B * pow(x, 1.5) + row->C * pow(x, is_25 ? 2.5 : 3.0) + row->D * pow(x, is_25 ? 5.0 : 6.0);
    return row->critical_pressure * exp(row->critical_temperature / T * sum);
}

/* The saturation pressures of one gas by its reference equation against one published vapour-pressure equation, at five
 * temperatures of the range for which the row's deviation was worked out. */
static void check_vapour_pressure(const struct vapour_pressure *row, const struct case_component *component,
                                  struct arena *arena)
{
    const struct pure_spec *pure = &component->spec;
    const struct fluid_spec spec = {.count = 1, .pure = &pure};
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create("reference", &spec, arena, &lack);
    assert_non_null(fluid);
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    struct critical_point critical;
    assert_int_equal(fluid->ops->critical(fluid, &critical), ANSWER_OK);
    const double low = fmax(fmax(row->lowest, 0.45 * critical.temperature), pure->reference->smallest_temperature);
    const double high = fmin(row->highest, 0.995 * critical.temperature);
    for (int i = 0; i < 5 && low < high; i++) {
        const double T = low + (0.03 + 0.235 * i) * (high - low);
        struct saturation saturation;
        assert_int_equal(fluid_set_t(at_t, fluid, T), ANSWER_OK);
        assert_int_equal(saturation_at_t(at_t, &saturation), ANSWER_OK);
        const char *what = arena_format(arena, "%s at %.2f K, %s: published vapour-pressure equation and its deviation",
                                        row->gas, T, row->form);
        assert_close(vapour_pressure_at(row, T), saturation.pressure, row->deviation / 100.0 + 0.001, what);
    }
}

static void saturation_pressures_agree_with_published_vapour_pressure_equations(void **state)
{
    (void)state;
    struct arena *file = arena_create(NULL);
    char *rows;
    size_t length, checked = 0;
    assert_true(file_read(file, "tests/data/vapour-pressure.csv", &rows, &length));
    for (const char *line = strchr(rows, '\n') + 1; *line != '\0'; line = strchr(line, '\n') + 1) {
        const struct vapour_pressure row = vapour_pressure_row(line);
        if (isfinite(row.deviation)) {
            struct arena *arena = arena_create(NULL);
            check_vapour_pressure(&row, component_in_use(arena, row.gas, "reference"), arena);
            arena_free(arena);
            checked++;
        }
    }
    assert_true(checked > 150);
    arena_free(file);
}

/* ---- the carbon dioxide figures of the trade ------------------------------------------------------------------------
 */

/* Pressures of carbon dioxide in a closed vessel by filling ratio (here kg/L): computed with the 12-term equation of
 * Span and Wagner, Int. J. Thermophys. 24 (2003) 111, which is good to about 0.5 %. */
static void carbon_dioxide_isochores_agree_with_a_shorter_equation(void **state)
{
    (void)state;
    const struct {
        double density, celsius, bar;
    } cases[] = {
        {680.0, 30.0, 76.9},  {680.0, 40.0, 109.1}, {680.0, 50.0, 142.3}, {680.0, 65.0, 193.2}, {750.0, 30.0, 91.7},
        {750.0, 50.0, 175.1}, {750.0, 65.0, 239.3}, {760.0, 25.0, 74.2},  {760.0, 40.0, 138.0}, {760.0, 65.0, 247.9},
    };
    struct arena *arena = arena_create(NULL);
    const struct case_component *component = component_in_use(arena, "carbon-dioxide", "reference");
    const struct pure_spec *pure = &component->spec;
    const struct fluid_spec spec = {.count = 1, .pure = &pure};
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create("reference", &spec, arena, &lack);
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct pure_arrays arrays;
        struct phase phase;
        phase_of_pure(&phase, &arrays);
        const double n = 1.0;
        assert_int_equal(fluid_set_t(at_t, fluid, cases[i].celsius + 273.15), ANSWER_OK);
        assert_int_equal(phase_tv(at_t, pure->molar_mass / cases[i].density, &n, 0, &phase), ANSWER_OK);
        assert_close(phase.pressure, 1e5 * cases[i].bar, 0.006, "Span and Wagner 2003, printed to 0.1 bar");
    }
    arena_free(arena);
}

/* ---- the listed rows ------------------------------------------------------------------------------------------------
 */

/* The column of that name of a table in JSON, or the number of columns. */
static size_t column_named(json_t *columns, const char *name)
{
    size_t at;
    json_t *column;
    json_array_foreach(columns, at, column)
    {
        if (strcmp(json_string_value(json_object_get(column, "name")), name) == 0) {
            break;
        }
    }
    return at;
}

/* ADR/RID 2025, P200 table 2, by the reference equations: the regulation's own criteria explain most of its ratios. */
static void four_in_five_listed_ratios_lie_within_a_hundredth_of_the_computed(void **state)
{
    (void)state;
    const struct deck_reader reader = {deck_read_file, NULL, "decks/library"};
    const struct run_request request = {.mode = RUN_ANSWER,
                                        .deck_path = "decks/table-audit.deck",
                                        .reader = &reader,
                                        .version = "0",
                                        .json_path = "unwritten.json"};
    struct run *run = run_deck(&request, NULL);
    assert_int_equal(run->files.count, 1);
    json_t *tree = json_loadb(run->files.items[0].content.bytes, run->files.items[0].content.length, 0, NULL);
    json_t *sheets = json_object_get(tree, "sheets");
    json_t *last = json_array_get(sheets, json_array_size(sheets) - 1);
    assert_string_equal(json_string_value(json_object_get(last, "kind")), "listed-rows");
    json_t *table = json_array_get(json_object_get(last, "tables"), 0);
    json_t *rows = json_object_get(table, "rows"), *row;
    const size_t listed = column_named(json_object_get(table, "columns"), "listed");
    const size_t computed = column_named(json_object_get(table, "columns"), "computed");
    size_t near = 0, i;
    json_array_foreach(rows, i, row)
    {
        near += fabs(json_number_value(json_array_get(row, listed)) -
                     json_number_value(json_array_get(row, computed))) <= 0.01;
    }
    assert_true(json_array_size(rows) >= 60);
    assert_true(5 * near >= 4 * json_array_size(rows));
    json_decref(tree);
    run_free(run);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_reference_equation_gives_its_independent_values),
        cmocka_unit_test(saturation_pressures_agree_with_published_vapour_pressure_equations),
        cmocka_unit_test(carbon_dioxide_isochores_agree_with_a_shorter_equation),
        cmocka_unit_test(four_in_five_listed_ratios_lie_within_a_hundredth_of_the_computed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
