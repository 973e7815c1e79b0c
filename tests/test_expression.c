/* Arithmetic on written values: results with their units, and what has no meaning. */
#include "deck/expression.h"
#include "deck/parse.h"
#include "support/check.h"

#include <string.h>

/* Values known by name. */
static const char *const known[] = {"test-pressure", "coldest", "factor", "zero", "span"};

static bool look_up(void *context, const char *name, struct value *out)
{
    (void)context;
    const struct value values[] = {
        {300e5, DIMENSION_PRESSURE, SORT_GAUGE},  {248.15, DIMENSION_TEMPERATURE, SORT_TEMPERATURE_POINT},
        {1.5, DIMENSION_NONE, SORT_PLAIN},        {0.0, DIMENSION_NONE, SORT_PLAIN},
        {5.0, DIMENSION_TEMPERATURE, SORT_PLAIN},
    };
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        if (strcmp(known[i], name) == 0) {
            *out = values[i];
            return true;
        }
    }
    return false;
}

struct evaluated {
    struct arena *arena;
    struct diagnostics diagnostics;
    struct value value;
    bool is_right;
};

static struct evaluated evaluate(const char *expression)
{
    struct evaluated it = {.arena = arena_create(NULL)};
    it.diagnostics.arena = it.arena;
    const char *text = arena_format(it.arena, "let x = %s", expression);
    const struct source_file *file = source_create(it.arena, "job.deck", "job.deck", text, strlen(text));
    const struct statement *statement;
    if (!deck_parse_file(file, it.arena, &it.diagnostics, &statement)) {
        print_error("'%s' does not parse\n", expression);
        fail();
    }
    const struct name_scope scope = {look_up, NULL, known, sizeof known / sizeof *known};
    it.is_right = expression_value(statement->items->next->value, &scope, &it.diagnostics, &it.value);
    assert_int_equal(it.is_right, it.diagnostics.errors == 0);
    return it;
}

struct calculated {
    const char *expression;
    double si;
    struct dimension dimension;
    enum value_sort sort;
};

#define P                  \
    {                      \
        1, -1, -2, 0, 0, 0 \
    }
#define T                \
    {                    \
        0, 0, 0, 1, 0, 0 \
    }
#define ONE              \
    {                    \
        0, 0, 0, 0, 0, 0 \
    }

/* All expected values are closed forms: the factors stand in tests/test_units.c. */
static const struct calculated calculations[] = {
    {"12.5", 12.5, ONE, SORT_PLAIN},
    {"-3", -3.0, ONE, SORT_PLAIN},
    {"50 %", 0.5, ONE, SORT_PLAIN},
    {"760 ppm", 760e-6, ONE, SORT_PLAIN},
    {"0.68 kg/L", 680.0, {1, -3, 0, 0, 0, 0}, SORT_PLAIN},
    {"44.0098 g/mol", 0.0440098, {1, 0, 0, 0, -1, 0}, SORT_PLAIN},
    {"150 barg", 150e5, P, SORT_GAUGE},
    {"1 bara", 1e5, P, SORT_ABSOLUTE},
    {"1 bar", 1e5, P, SORT_PLAIN},
    {"15 degC", 288.15, T, SORT_TEMPERATURE_POINT},
    {"-40 degF", 233.15, T, SORT_TEMPERATURE_POINT},
    {"280 K", 280.0, T, SORT_PLAIN},
    {"1 + 2 * 3 - 4 / 5", 6.2, ONE, SORT_PLAIN},
    {"(1 + 2) * (3 - 4)", -3.0, ONE, SORT_PLAIN},
    {"8 / 4 / 2", 1.0, ONE, SORT_PLAIN},
    {"-factor", -1.5, ONE, SORT_PLAIN},
    {"-(1 + 2)", -3.0, ONE, SORT_PLAIN},
    {"2 / 3 * 300 barg", 200e5, P, SORT_GAUGE},
    {"2 / 3 * test-pressure", 200e5, P, SORT_GAUGE},
    {"test-pressure / 1.5", 200e5, P, SORT_GAUGE},
    {"test-pressure * factor", 450e5, P, SORT_GAUGE},
    {"test-pressure / 150 barg", 2.0, ONE, SORT_PLAIN},
    {"test-pressure - 100 barg", 200e5, P, SORT_PLAIN},
    {"test-pressure - 5 bar", 295e5, P, SORT_GAUGE},
    {"5 bar + test-pressure", 305e5, P, SORT_GAUGE},
    {"-test-pressure", -300e5, P, SORT_GAUGE},
    {"2 * 5 bara", 10e5, P, SORT_ABSOLUTE},
    {"5 bara + 1 bar", 6e5, P, SORT_ABSOLUTE},
    {"5 bara + 1 bara", 6e5, P, SORT_ABSOLUTE},
    {"5 bara - 1 bara", 4e5, P, SORT_PLAIN},
    {"5 bara / 1 bara", 5.0, ONE, SORT_PLAIN},
    {"15 degC - 10 degC", 5.0, T, SORT_PLAIN},
    {"15 degC + 5 K", 293.15, T, SORT_TEMPERATURE_POINT},
    {"5 K + coldest", 253.15, T, SORT_TEMPERATURE_POINT},
    {"coldest - span", 243.15, T, SORT_TEMPERATURE_POINT},
    {"400 K - 25 degC", 101.85, T, SORT_PLAIN},
    {"(65 degC - 15 degC) / 2", 25.0, T, SORT_PLAIN},
    {"15 degC + (65 degC - 15 degC) / 2", 313.15, T, SORT_TEMPERATURE_POINT},
    {"50 L * 0.68 kg/L", 34.0, {1, 0, 0, 0, 0, 0}, SORT_PLAIN},
    {"34 kg / 44 g/mol / 50 L", 34.0 / 0.044 / 0.05, {0, -3, 0, 0, 1, 0}, SORT_PLAIN},
    {"2 kg/L * 3", 6000.0, {1, -3, 0, 0, 0, 0}, SORT_PLAIN},
    {"1 bar / 8.31446261815324 J/mol/K / 288.15 K", 1e5 / 8.31446261815324 / 288.15, {0, -3, 0, 0, 1, 0}, SORT_PLAIN},
    {"2 bara * 1 m3", 2e5, {1, 2, -2, 0, 0, 0}, SORT_PLAIN},
};

static void values_follow_arithmetic_and_carry_their_unit(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof calculations / sizeof *calculations; i++) {
        const struct calculated *wanted = &calculations[i];
        struct evaluated it = evaluate(wanted->expression);
        if (!it.is_right || it.value.sort != wanted->sort || !dimension_equal(it.value.dimension, wanted->dimension)) {
            print_error("'%s': %s, sort %d, %s\n", wanted->expression,
                        it.is_right ? "evaluated" : it.diagnostics.items[0].message, (int)it.value.sort,
                        dimension_name(it.value.dimension, it.arena));
            fail();
        }
        assert_close(it.value.si, wanted->si, 1e-14, wanted->expression);
        arena_free(it.arena);
    }
}

struct refused {
    const char *expression;
    enum code code;
    size_t column; /* of the message, counted from the expression's first byte */
};

static const struct refused refusals[] = {
    {"unknown", CODE_E112, 1},
    {"1 + test-presure", CODE_E112, 5},
    {"1 + 1 bar", CODE_E114, 1},
    {"1 kg + 1 mol", CODE_E114, 1},
    {"5 + (1 kg - 1 K)", CODE_E114, 5},
    {"1 barg + 1 barg", CODE_E115, 1},
    {"test-pressure + 1 bara", CODE_E115, 1},
    {"1 bara + test-pressure", CODE_E115, 1},
    {"1 bara - 1 barg", CODE_E115, 1},
    {"1 barg - 1 bara", CODE_E115, 1},
    {"1 bar - 1 barg", CODE_E115, 1},
    {"1 barg * 1 barg", CODE_E115, 1},
    {"1 barg * 1 m3", CODE_E115, 1},
    {"2 / 1 barg", CODE_E115, 1},
    {"1 barg / 1 bar", CODE_E115, 1},
    {"15 degC + 15 degC", CODE_E115, 1},
    {"2 * 15 degC", CODE_E115, 1},
    {"15 degC / 2", CODE_E115, 1},
    {"-coldest", CODE_E115, 1},
    {"-(15 degC)", CODE_E115, 1},
    {"1 / 0", CODE_E116, 5},
    {"1 bar / zero", CODE_E116, 9},
    {"0 / (1 - 1)", CODE_E116, 5},
    {"1e308 * 10", CODE_E117, 1},
    {"1e308 MPa", CODE_E117, 1},
    {"1e300 / 1e-300", CODE_E117, 1},
    {"1e308 + 1e308", CODE_E117, 1},
    {"(1, 2)", CODE_E118, 1},
    {"1 + (1 bar, 2 K)", CODE_E118, 5},
    {"1 m9 * 1 m9", CODE_E114, 1},
};

static void what_has_no_meaning_is_refused_at_its_place(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof refusals / sizeof *refusals; i++) {
        struct evaluated it = evaluate(refusals[i].expression);
        const struct diagnostic *first = it.diagnostics.items;
        if (it.is_right || first->code != refusals[i].code || location_column(first->at) != 8 + refusals[i].column) {
            print_error("'%s': %s\n", refusals[i].expression, it.is_right ? "accepted" : first->message);
            fail();
        }
        arena_free(it.arena);
    }
}

static void both_sides_of_a_sum_are_looked_at(void **state)
{
    (void)state;
    struct evaluated it = evaluate("first + second * third");
    assert_int_equal(it.diagnostics.errors, 3);
    arena_free(it.arena);
}

static void a_misspelled_name_gets_the_nearest_known_one(void **state)
{
    (void)state;
    struct evaluated it = evaluate("2 / 3 * test-presure");
    assert_string_equal(it.diagnostics.items[0].hint, "did you mean 'test-pressure'?");
    arena_free(it.arena);
    it = evaluate("something");
    assert_null(it.diagnostics.items[0].hint);
    arena_free(it.arena);
}

static void mixing_gauge_and_absolute_says_what_to_write(void **state)
{
    (void)state;
    struct evaluated it = evaluate("1 bara - 1 barg");
    assert_non_null(strstr(it.diagnostics.items[0].hint, "101 325 Pa"));
    arena_free(it.arena);
}

static void a_scope_may_be_empty(void **state)
{
    (void)state;
    struct evaluated it = evaluate("1");
    const struct expression name = {.kind = EXPRESSION_NAME, .name = "a"};
    assert_false(expression_value(&name, NULL, &it.diagnostics, &it.value));
    const struct expression odd = {.kind = EXPRESSION_NUMBER, .number = 1.0, .unit = "furlong"};
    assert_false(expression_value(&odd, NULL, &it.diagnostics, &it.value));
    assert_int_equal(it.diagnostics.items[1].code, CODE_E113);
    arena_free(it.arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(values_follow_arithmetic_and_carry_their_unit),
        cmocka_unit_test(what_has_no_meaning_is_refused_at_its_place),
        cmocka_unit_test(both_sides_of_a_sum_are_looked_at),
        cmocka_unit_test(a_misspelled_name_gets_the_nearest_known_one),
        cmocka_unit_test(mixing_gauge_and_absolute_says_what_to_write),
        cmocka_unit_test(a_scope_may_be_empty),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
