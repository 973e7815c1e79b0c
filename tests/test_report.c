/* The renderers, on result trees built by hand: what a listing, its JSON and its CSV look like. The numbers are made
 * up; nothing here says that a figure is right. */
#include "base/file.h"
#include "report/grid.h"
#include "report/number.h"
#include "report/page.h"
#include "report/report.h"
#include "support/check.h"
#include "support/golden.h"

#include <jansson.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static const struct look kelvin_as_celsius = {"K", {"degC", 1.0, 273.15}, 1};
static const struct look pascal_as_bar = {"Pa", {"bara", 1e5, 0.0}, 2};
static const struct look pascal_as_gauge = {"Pa", {"barg", 1e5, 101325.0}, 1};
static const struct look plain_ratio = {"1", {"1", 1.0, 0.0}, 4};
static const struct look kilograms = {"kg", {"kg", 1.0, 0.0}, 2};
static const struct look six_digits = {"1", {"1", 1.0, 0.0}, -6};

static int begin(void **state)
{
    *state = arena_create(NULL);
    return *state ? 0 : -1;
}

static int end(void **state)
{
    arena_free(*state);
    return 0;
}

static void numbers_are_shown_in_the_looks_unit_and_digits(void **state)
{
    static const struct {
        double si;
        struct look look;
        const char *shown;
    } cases[] = {
        {338.15, {"K", {"degC", 1.0, 273.15}, 1}, "65.0"},
        {25101325.0, {"Pa", {"barg", 1e5, 101325.0}, 1}, "250.0"},
        {-0.04, {"1", {"1", 1.0, 0.0}, 1}, "0.0"},
        {-0.06, {"1", {"1", 1.0, 0.0}, 1}, "-0.1"},
        {-0.4, {"1", {"1", 1.0, 0.0}, 0}, "0"},
        {0.0, {"1", {"1", 1.0, 0.0}, -3}, "0"},
        {1234.567, {"1", {"1", 1.0, 0.0}, -6}, "1234.57"},
        {0.00123456, {"1", {"1", 1.0, 0.0}, -3}, "0.00123"},
        {9.9996, {"1", {"1", 1.0, 0.0}, -4}, "10.00"},
        {24790.4, {"1", {"1", 1.0, 0.0}, -3}, "24800"},
        {1.5e-7, {"1", {"1", 1.0, 0.0}, -3}, "1.50e-07"},
        {2.5e11, {"1", {"1", 1.0, 0.0}, -3}, "2.50e+11"},
        {-1.25e-4, {"1", {"1", 1.0, 0.0}, -2}, "-0.00013"}, /* -1.25e-4 lies a hair further from zero as a double */
        {9999999.6, {"1", {"1", 1.0, 0.0}, -7}, "1.000000e+07"},
        {9999999.4, {"1", {"1", 1.0, 0.0}, -7}, "9999999"},
        {7.0, {"1", {"1", 1.0, 0.0}, -1}, "7"},
        {7345678.0, {"1", {"1", 1.0, 0.0}, -1}, "7000000"},
        {-123456789.25, {"1", {"1", 1.0, 0.0}, -12}, "-123456789.250"},
        {1e308, {"1", {"1", 1.0, 0.0}, 2}, "1.000000000e+308"},
        {1.0, {"1", {"1", 1e-308, 0.0}, 17}, "1.000000000e+308"},
        {-1e308, {"1", {"1", 1e-308, 0.0}, 1}, PAGE_DASH},
        {(double)NAN, {"1", {"1", 1.0, 0.0}, 2}, PAGE_DASH},
        {(double)INFINITY, {"1", {"1", 1.0, 0.0}, -2}, PAGE_DASH},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        assert_string_equal(number_shown(*state, &cases[i].look, cases[i].si), cases[i].shown);
    }
}

static void a_difference_takes_no_zero_of_its_unit(void **state)
{
    assert_string_equal(number_shown_difference(*state, &kelvin_as_celsius, 5.0), "5.0");
    assert_string_equal(number_shown_difference(*state, &pascal_as_gauge, 310000.0), "3.1");
}

static void exact_numbers_convert_back_to_the_same_si_value(void **state)
{
    static const struct {
        double si;
        struct look look;
        const char *exact;
    } cases[] = {
        {0.1, {"1", {"1", 1.0, 0.0}, 1}, "0.1"},
        {294.45, {"K", {"degC", 1.0, 273.15}, 1}, "21.3"},
        {1.0 / 3.0, {"1", {"1", 1.0, 0.0}, 1}, "0.3333333333333333"},
        {5e-324, {"1", {"1", 1.0, 0.0}, 1}, "4.94065645841247e-324"},
        {-0.0, {"1", {"1", 1.0, 0.0}, 1}, "0"},
        {(double)NAN, {"1", {"1", 1.0, 0.0}, 1}, ""},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        assert_string_equal(number_exact(*state, &cases[i].look, cases[i].si), cases[i].exact);
    }
}

static void broken_bytes_and_control_characters_do_not_reach_the_page(void **state)
{
    static const struct {
        const char *text, *clean;
    } cases[] = {
        {"tab\tand\nline", "tab and line"},
        {"bell\a and \x1B[31m", "bell? and ?[31m"},
        {"caf\xC3\xA9 \xC2\xB1", "caf\xC3\xA9 \xC2\xB1"},
        {"\xC3", "?"},
        {"\xC0\x80", "??"},
        {"\xE2\x80", "??"},
        {"\xED\xA0\x80", "???"},
        {"\xC2\x85next", "??next"},
        {"\xE2\x80\xA8", "???"},
        {"\xF4\x90\x80\x80", "????"},
        {"\xF0\x9F\x94\xA5", "\xF0\x9F\x94\xA5"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        assert_string_equal(page_clean(*state, cases[i].text), cases[i].clean);
    }
}

static void wrapping_breaks_at_blanks_and_cuts_only_longer_words(void **state)
{
    const struct page_lines lines = page_wrap(*state, "one two threefour   five", 8, false);
    const char *const expected[] = {"one two", "threefou", "r   five"};
    assert_int_equal(lines.count, 3);
    for (size_t i = 0; i < lines.count; i++) {
        assert_string_equal(lines.items[i], expected[i]);
    }
    const struct page_lines unit = page_wrap(*state, "charge at most 65 degC", 18, false);
    assert_string_equal(unit.items[0], "charge at most");
    assert_string_equal(unit.items[1], "65 degC");
    assert_string_equal(page_wrap(*state, "65 degC", 5, false).items[0], "65");
    const struct page_lines head = page_wrap(*state, "liquid-volume", 8, true);
    assert_int_equal(head.count, 2);
    assert_string_equal(head.items[0], "liquid-");
    assert_int_equal(page_wrap(*state, "", 8, false).count, 1);
}

static void add_document(struct result *result)
{
    result->version = "0.1.0";
    result->number = "CO2-050";
    result->revision = "C";
    result->title = "Carbon dioxide, 50 L cylinders, east hall";
    line_list_add(result, &result->notes,
                  "a note that runs on and on so that it has to be wrapped on the page, as an "
                  "engineer's notes about the yard and its gates will be");
    result->deck_name = "co2-fifty.deck";
    result->deck_sha256 = "5b0c91d2aa00bb11cc22dd33ee44ff5566778899aabbccddeeff00112233f77a";
    result->deck_text = "case \"Carbon dioxide\" {\r\n\tnumber \"CO2-050\"\n}\n\n# a long line: "
                        "abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij "
                        "abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij abcdefghij\n"
                        "# aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa"
                        "aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa\n"
                        "use \"gases\"";
    const struct library_row rows[] = {
        {"gases.deck", "e4a10c3baa00bb11cc22dd33ee44ff5566778899aabbccddeeff00112233012d"},
        {"rules/model-regulations.deck", "90be44f7aa00bb11cc22dd33ee44ff5566778899aabbccddeeff00112233a08c"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        *ARENA_APPEND(result->arena, &result->library) = rows[i];
    }
    line_list_add(result, &result->headlines, "permitted charge 38.1 kg, filling ratio 0.76");
}

static void add_inputs_and_data(struct result *result)
{
    const struct input_row inputs[] = {
        {"vessel fifty", "water-capacity", "50.2 L", "0.0502 m3", "line 9"},
        {"vessel fifty", "test-pressure", "250 barg", "25 101 325 Pa abs", "line 10"},
        {"charge lot", "fill", "a very long expression that was written out, 2 / 3 * (test-pressure + 1 bar)", "0.68",
         "line 14 of a/very/long/path/below/the/deck/that/names/a/file/with-a-long-name.deck"},
    };
    for (size_t i = 0; i < sizeof inputs / sizeof *inputs; i++) {
        *ARENA_APPEND(result->arena, &result->inputs) = inputs[i];
    }
    const struct data_row data[] = {
        {"carbon-dioxide", "molar-mass", "44.0098 g/mol", "span-wagner-1996", NULL},
        {"carbon-dioxide", "critical-temperature", "304.1282 K", "given in this deck",
         "overrides 304.13 K of gases.deck line 12"},
        {"UN 1013", "listed-fill", "250 barg, filling ratio 0.76", "adr-2025", NULL},
    };
    for (size_t i = 0; i < sizeof data / sizeof *data; i++) {
        *ARENA_APPEND(result->arena, &result->data) = data[i];
    }
    const struct source_row sources[] = {
        {"span-wagner-1996",
         "R. Span, W. Wagner, A new equation of state for carbon dioxide covering the fluid region "
         "from the triple-point temperature to 1100 K at pressures up to 800 MPa, J. Phys. Chem. "
         "Ref. Data 25 (1996) 1509",
         false},
        {"shop-note", "a figure somebody remembered", true},
    };
    for (size_t i = 0; i < sizeof sources / sizeof *sources; i++) {
        *ARENA_APPEND(result->arena, &result->sources) = sources[i];
    }
    const struct method_row methods[] = {
        {"reference", "reference Helmholtz equation of state", "42 terms", "216.592 to 1100 K, to 800 MPa", "leads"},
        {"peng-robinson", "Peng and Robinson 1976", NULL, NULL, NULL},
    };
    for (size_t i = 0; i < sizeof methods / sizeof *methods; i++) {
        *ARENA_APPEND(result->arena, &result->methods) = methods[i];
    }
}

static struct table *add_small_table(struct result *result, struct result_sheet *sheet)
{
    struct table *table = sheet_add_table(result, sheet, "settled pressure of the charge", "reference");
    table_add_column(result, table, "temperature", kelvin_as_celsius);
    table_add_column(result, table, "settled-pressure", pascal_as_bar);
    table_add_column(result, table, "gauge", pascal_as_gauge);
    table_add_word_column(result, table, "phases");
    table_add_column(result, table, "liquid-volume", (struct look){"1", {"%", 0.01, 0.0}, 1});
    const struct {
        double temperature, pressure, liquid;
        const char *phases;
    } rows[] = {{288.15, 5.09e6, 0.9512, "vapour + liquid"},
                {294.45, 5.89e6, 1.0, "liquid-full, \"brim\""},
                {338.15, 24.79e6, (double)NAN, "one phase, above critical"}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct cell *cells = table_add_row(result, table);
        cell_set(&cells[0], rows[i].temperature);
        cell_set(&cells[1], rows[i].pressure);
        cell_set(&cells[2], rows[i].pressure);
        cells[2].is_outside_range = i == 2;
        cell_set_text(&cells[3], rows[i].phases);
        cell_set(&cells[4], rows[i].liquid);
    }
    return table;
}

static void add_wide_table(struct result *result, struct result_sheet *sheet)
{
    struct table *table = sheet_add_table(result, sheet, "a table too wide for the page", NULL);
    table_add_column(result, table, "temperature", kelvin_as_celsius);
    static const char *const names[] = {
        "density-of-the-vapour",     "density-of-the-liquid", "fugacity-coefficient", "compressibility-factor",
        "second-virial-coefficient", "residual-enthalpy",     "residual-entropy",     "heat-capacity"};
    for (size_t i = 0; i < sizeof names / sizeof *names; i++) {
        table_add_column(result, table, names[i], six_digits);
    }
    table_add_word_column(result, table, "remark");
    for (size_t r = 0; r < 3; r++) {
        struct cell *cells = table_add_row(result, table);
        cell_set(&cells[0], 250.0 + (double)r);
        for (size_t c = 1; c <= 8; c++) {
            cell_set(&cells[c], pow(-7.3, (double)(c + r)) * 1e-5);
        }
        cell_set_text(&cells[9], "words that say at some length why this row is not like the one above it");
    }
}

static void add_charge_sheet(struct result *result)
{
    struct result_sheet *sheet = result_add_sheet(result, "permissible-charge", "how far may we fill?");
    sheet->fluid = "carbon-dioxide";
    sheet->vessel = "fifty";
    sheet_begin_facts(result, sheet, "permitted");
    struct fact *fact = sheet_add_fact(result, sheet, "filling-ratio", 0.76, plain_ratio);
    fact->method = "reference";
    fact->remark = "rounded down";
    sheet_add_fact(result, sheet, "mass", 38.1164, kilograms)->method = "reference";
    sheet_add_fact(result, sheet, "listed-ratio", 0.76, plain_ratio)->source = "adr-2025";
    sheet_add_fact(result, sheet, "never-known", (double)NAN, kilograms);
    sheet_add_words(
        result, sheet, "governed-by",
        "the listed row of UN 1013 at 250 barg, as the edition of 2025 has it, which replaces the criterion "
        "of the rule and stands above what was computed");
    add_small_table(result, sheet)->csv = "co2.csv";
    struct hand_check *check = sheet_add_hand_check(result, sheet, "65 degC, reference equation");
    hand_check_line(result, check, "tau   = Tr / T     = 304.1282 / 338.15         = 0.899388");
    hand_check_line(result, check, "delta = rho / rhor = 17253.4 / 10624.9063      = 1.623864");
    hand_check_line(result, check,
                    "p     = Z rho R T  = 1.234567890123 * 17253.4 mol/m3 * 8.31451 J/mol/K * 338.15 K "
                    "= 24.79 MPa");
    sheet_add_note(result, sheet, "the listed row is below the computed limit");
    sheet_add_note(result, sheet, "a second note");
    struct requirement *met = sheet_add_requirement(result, sheet, "at 65 degC pressure <= test-pressure");
    met->state = REQUIREMENT_MET;
    met->has_margin = true;
    met->margin = 3.1e5;
    met->look = pascal_as_gauge;
    met->has_worst_temperature = true;
    met->worst_temperature = 338.15;
    met->temperature_look = kelvin_as_celsius;
    met->line = 21;
    met->method = "reference";
    struct requirement *undecided = sheet_add_requirement(result, sheet, "from -25 degC to 50 degC no liquid");
    undecided->reason =
        "the method has no answer between 49.3 degC and 50 degC, where the volume is below its smallest";
    undecided->line = 22;
}

static struct result *full_tree(struct arena *arena)
{
    struct result *result = result_create(arena);
    add_document(result);
    add_inputs_and_data(result);
    add_charge_sheet(result);
    struct result_sheet *second = result_add_sheet(result, "fugacity", NULL);
    add_wide_table(result, second);
    sheet_add_table(result, second, "nothing in it", NULL);
    struct requirement *broken = sheet_add_requirement(result, second, "filling-ratio <= 0.7");
    broken->state = REQUIREMENT_NOT_MET;
    broken->has_margin = true;
    broken->margin = -0.06;
    broken->look = plain_ratio;
    result_warn(result, CODE_E101, 14, 1,
                "a warning that is long enough to be wrapped on the page, since it says what "
                "was found, where, and what to do about it");
    result_warn(result, CODE_E101, 0, 0, "short");
    line_list_add(result, &result->cautions,
                  "Engineering estimates. The statutory table or approval for this gas and "
                  "vessel overrides them; a competent person decides.");
    return result;
}

static void the_listing_has_every_section_in_order(void **state)
{
    struct text out = {.arena = *state};
    report_listing(full_tree(*state), &out);
    assert_golden("tests/golden/report/full.listing", out.bytes, out.length);
    assert_int_equal(golden_wide_line(out.bytes, PAGE_WIDTH), 0);
}

/* What rounding leaves is not told digit by digit: it would change with the order of operations. */
static void residuals_are_told_no_closer_than_rounding_lets_them(void **state)
{
    struct result *result = result_create(*state);
    struct result_sheet *sheet = result_add_sheet(result, "saturation", NULL);
    struct table *table = sheet_add_table(result, sheet, "equality of the fugacities", NULL);
    table_add_residual_column(result, table, "difference");
    const double residuals[] = {3.1e-15, 0.0, 4.56e-11, (double)NAN};
    for (size_t i = 0; i < sizeof residuals / sizeof *residuals; i++) {
        cell_set(table_add_row(result, table), residuals[i]);
    }
    struct text out = {.arena = *state};
    report_listing(result, &out);
    const char *rows = strstr(out.bytes, "difference");
    assert_non_null(rows);
    const char *first = strstr(rows, "< 1.0e-12"), *second = first == NULL ? NULL : strstr(first + 1, "< 1.0e-12");
    assert_non_null(second);
    assert_non_null(strstr(second, "4.6e-11"));
    assert_null(strstr(rows, "e-15"));
}

static void an_empty_result_is_a_listing_too(void **state)
{
    struct text out = {.arena = *state};
    report_listing(result_create(*state), &out);
    assert_golden("tests/golden/report/empty.listing", out.bytes, out.length);
}

/* Texts of every length from nothing to far over the page, in every place that takes words. */
static void no_line_is_wider_than_the_page_or_ends_in_a_blank(void **state)
{
    (void)state;
    for (size_t length = 0; length < 400; length += 7) {
        struct arena *arena = arena_create(NULL);
        char *word = arena_alloc(arena, length + 1, 1);
        for (size_t i = 0; i < length; i++) {
            word[i] = (i * 31 + length) % 11 == 0 && length % 2 == 0 ? ' ' : (char)('a' + i % 26);
        }
        struct result *result = full_tree(arena);
        result->title = result->number = result->revision = result->deck_name = result->deck_text = word;
        result->library.items[0].name = word;
        result->inputs.items[1] = (struct input_row){word, word, word, word, word};
        result->data.items[1] = (struct data_row){word, word, word, word, word};
        result->sources.items[0] = (struct source_row){word, word, false};
        result->methods.items[0] = (struct method_row){word, word, word, word, word};
        line_list_add(result, &result->headlines, "%s", word);
        line_list_add(result, &result->cautions, "%s", word);
        struct result_sheet *sheet = result_add_sheet(result, word, word);
        sheet->fluid = sheet->vessel = sheet->charge = word;
        sheet_begin_facts(result, sheet, word);
        *sheet_add_fact(result, sheet, word, 1e300, six_digits) = (struct fact){
            .name = word, .method = word, .source = word, .remark = word, .value = 1.0, .look = six_digits};
        sheet_add_words(result, sheet, word, word);
        struct table *table = sheet_add_table(result, sheet, word, word);
        table_add_column(result, table, word, (struct look){"1", {word, 1.0, 0.0}, 2});
        table_add_word_column(result, table, word);
        struct cell *cells = table_add_row(result, table);
        cell_set_text(&cells[0], word);
        cell_set_text(&cells[1], word);
        hand_check_line(result, sheet_add_hand_check(result, sheet, word), "%s", word);
        sheet_add_requirement(result, sheet, word)->reason = word;
        result_warn(result, CODE_E101, 1, 1, "%s", word);
        struct text out = {.arena = arena};
        report_listing(result, &out);
        assert_int_equal(golden_wide_line(out.bytes, PAGE_WIDTH), 0);
        assert_null(strstr(out.bytes, " \n"));
        assert_null(strstr(out.bytes, "nan"));
        arena_free(arena);
    }
}

static void the_same_tree_gives_the_same_bytes(void **state)
{
    struct text first = {.arena = *state}, second = {.arena = *state};
    report_listing(full_tree(*state), &first);
    report_listing(full_tree(*state), &second);
    assert_string_equal(first.bytes, second.bytes);
}

static json_t *parsed_json(struct arena *arena, const struct result *result)
{
    struct text out = {.arena = arena};
    assert_true(report_json(result, &out));
    assert_true(out.bytes[out.length - 1] == '\n');
    json_error_t error;
    json_t *tree = json_loads(out.bytes, 0, &error);
    assert_non_null(tree);
    return tree;
}

static const char *word_at(json_t *tree, const char *key)
{
    return json_string_value(json_object_get(tree, key));
}

static void json_holds_document_verdict_and_warnings(void **state)
{
    json_t *tree = parsed_json(*state, full_tree(*state));
    static const char *const keys[] = {"tarewright", "deck", "verdict", "sheets", "warnings"};
    size_t i = 0;
    for (void *at = json_object_iter(tree); at; at = json_object_iter_next(tree, at)) {
        assert_true(i < sizeof keys / sizeof *keys);
        assert_string_equal(json_object_iter_key(at), keys[i++]);
    }
    assert_string_equal(word_at(tree, "tarewright"), "0.1.0");
    assert_string_equal(word_at(tree, "verdict"), "not met");
    assert_string_equal(word_at(json_object_get(tree, "deck"), "name"), "co2-fifty.deck");
    assert_int_equal(strlen(word_at(json_object_get(tree, "deck"), "sha256")), 64);
    json_t *warnings = json_object_get(tree, "warnings");
    assert_int_equal(json_array_size(warnings), 2);
    assert_string_equal(word_at(json_array_get(warnings, 0), "code"), "E101");
    assert_int_equal(json_integer_value(json_object_get(json_array_get(warnings, 0), "line")), 14);
    assert_true(json_is_null(json_object_get(json_array_get(warnings, 1), "line")));
    json_decref(tree);
}

static void json_facts_carry_si_value_unit_and_method(void **state)
{
    json_t *tree = parsed_json(*state, full_tree(*state));
    json_t *sheet = json_array_get(json_object_get(tree, "sheets"), 0);
    assert_string_equal(word_at(sheet, "kind"), "permissible-charge");
    assert_true(json_is_null(json_object_get(json_array_get(json_object_get(tree, "sheets"), 1), "title")));
    json_t *facts = json_object_get(sheet, "facts");
    assert_int_equal(json_array_size(facts), 5);
    json_t *ratio = json_array_get(facts, 0);
    assert_string_equal(word_at(ratio, "name"), "filling-ratio");
    assert_close(json_real_value(json_object_get(ratio, "value")), 0.76, 0.0, "set above");
    assert_string_equal(word_at(ratio, "unit"), "1");
    assert_string_equal(word_at(ratio, "method"), "reference");
    assert_string_equal(word_at(json_array_get(facts, 2), "source"), "adr-2025");
    assert_true(json_is_null(json_object_get(json_array_get(facts, 3), "value")));
    json_t *words = json_array_get(facts, 4);
    assert_ptr_equal(strstr(word_at(words, "value"), "the listed row of UN 1013"), word_at(words, "value"));
    assert_true(json_is_null(json_object_get(words, "unit")));
    json_decref(tree);
}

static void json_tables_and_requirements_are_si_with_null_for_nothing(void **state)
{
    json_t *tree = parsed_json(*state, full_tree(*state));
    json_t *sheet = json_array_get(json_object_get(tree, "sheets"), 0);
    json_t *table = json_array_get(json_object_get(sheet, "tables"), 0);
    assert_string_equal(word_at(table, "method"), "reference");
    json_t *columns = json_object_get(table, "columns");
    assert_int_equal(json_array_size(columns), 5);
    assert_string_equal(word_at(json_array_get(columns, 0), "unit"), "K");
    assert_true(json_is_null(json_object_get(json_array_get(columns, 3), "unit")));
    json_t *row = json_array_get(json_object_get(table, "rows"), 2);
    assert_close(json_real_value(json_array_get(row, 0)), 338.15, 0.0, "set above");
    assert_close(json_real_value(json_array_get(row, 1)), 24.79e6, 0.0, "set above, absolute");
    assert_close(json_real_value(json_array_get(row, 2)), 24688675.0, 0.0,
                 "the same less 101 325 Pa, as it is a gauge");
    assert_string_equal(json_string_value(json_array_get(row, 3)), "one phase, above critical");
    assert_true(json_is_null(json_array_get(row, 4)));
    json_t *requirements = json_object_get(sheet, "requirements");
    json_t *met = json_array_get(requirements, 0);
    assert_true(json_is_true(json_object_get(met, "met")));
    assert_close(json_real_value(json_object_get(met, "margin")), 3.1e5, 0.0, "set above");
    assert_string_equal(word_at(met, "unit"), "Pa");
    assert_close(json_real_value(json_object_get(met, "worst_temperature")), 338.15, 0.0, "set above");
    json_t *undecided = json_array_get(requirements, 1);
    assert_true(json_is_null(json_object_get(undecided, "met")));
    assert_true(json_is_null(json_object_get(undecided, "margin")));
    json_decref(tree);
}

/* For jansson's allocator, which has no context argument. */
static size_t calls_left, blocks_held;

static void *take_counted(size_t bytes)
{
    if (calls_left == 0) {
        return NULL;
    }
    calls_left--;
    void *block = malloc(bytes);
    blocks_held += block != NULL;
    return block;
}

static void give_counted(void *block)
{
    blocks_held -= block != NULL;
    free(block);
}

static void json_without_memory_is_refused_and_nothing_is_lost(void **state)
{
    const struct result *result = full_tree(*state);
    json_malloc_t usual_take;
    json_free_t usual_give;
    json_get_alloc_funcs(&usual_take, &usual_give);
    json_set_alloc_funcs(take_counted, give_counted);
    bool is_done = false;
    size_t allowed = 0;
    for (; !is_done; allowed++) {
        struct text out = {.arena = *state};
        calls_left = allowed;
        is_done = report_json(result, &out);
        assert_int_equal(blocks_held, 0);
    }
    json_set_alloc_funcs(usual_take, usual_give);
    assert_true(allowed > 100);
}

static void csv_has_one_head_and_full_precision_in_shown_units(void **state)
{
    struct result *result = result_create(*state);
    struct result_sheet *sheet = result_add_sheet(result, "settled-pressure", NULL);
    struct text out = {.arena = *state};
    report_csv(add_small_table(result, sheet), &out);
    assert_string_equal(out.bytes, "temperature [degC],settled-pressure [bara],gauge [barg],phases,liquid-volume [%]\n"
                                   "15,50.9,49.88675,vapour + liquid,95.12\n"
                                   "21.3,58.9,57.88675,\"liquid-full, \"\"brim\"\"\",100\n"
                                   "65,247.9,246.88675,\"one phase, above critical\",\n");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(numbers_are_shown_in_the_looks_unit_and_digits, begin, end),
        cmocka_unit_test_setup_teardown(a_difference_takes_no_zero_of_its_unit, begin, end),
        cmocka_unit_test_setup_teardown(exact_numbers_convert_back_to_the_same_si_value, begin, end),
        cmocka_unit_test_setup_teardown(broken_bytes_and_control_characters_do_not_reach_the_page, begin, end),
        cmocka_unit_test_setup_teardown(wrapping_breaks_at_blanks_and_cuts_only_longer_words, begin, end),
        cmocka_unit_test_setup_teardown(the_listing_has_every_section_in_order, begin, end),
        cmocka_unit_test_setup_teardown(residuals_are_told_no_closer_than_rounding_lets_them, begin, end),
        cmocka_unit_test_setup_teardown(an_empty_result_is_a_listing_too, begin, end),
        cmocka_unit_test_setup_teardown(no_line_is_wider_than_the_page_or_ends_in_a_blank, begin, end),
        cmocka_unit_test_setup_teardown(the_same_tree_gives_the_same_bytes, begin, end),
        cmocka_unit_test_setup_teardown(json_holds_document_verdict_and_warnings, begin, end),
        cmocka_unit_test_setup_teardown(json_facts_carry_si_value_unit_and_method, begin, end),
        cmocka_unit_test_setup_teardown(json_tables_and_requirements_are_si_with_null_for_nothing, begin, end),
        cmocka_unit_test_setup_teardown(json_without_memory_is_refused_and_nothing_is_lost, begin, end),
        cmocka_unit_test_setup_teardown(csv_has_one_head_and_full_precision_in_shown_units, begin, end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
