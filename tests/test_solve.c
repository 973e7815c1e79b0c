/* A whole case to its result: sheets in order, and the sections that tell how the result was made. */
#include "filling/solve.h"

#include "support/check.h"
#include "support/small_case.h"

#include <string.h>

static const double TEMPERATURES[] = {250.0, 300.0};
static const double PRESSURES[] = {1e5, 3e6};
static const char *const METHODS[] = {"reference", "peng-robinson", "ideal-gas"};

struct solved {
    struct small_case small;
    struct case_sheet sheets[2];
};

static struct case_methods methods(size_t count, size_t may_govern)
{
    return (struct case_methods){.count = count, .names = METHODS, .may_govern = may_govern, .reason = "named here"};
}

/* Two sheets on the same propane: saturation by two methods, fugacity by three of which one is only shown. */
static int set_up(void **state)
{
    static struct solved solved;
    small_case_set_up(&solved.small, SHEET_SATURATION);
    solved.small.sheet.temperatures = (struct case_sweep){.given = true, .count = 2, .values = TEMPERATURES};
    solved.sheets[0] = solved.sheets[1] = solved.small.sheet;
    solved.sheets[0].title = "boiling line";
    solved.sheets[0].methods = methods(2, 2);
    solved.sheets[1].kind = SHEET_FUGACITY;
    solved.sheets[1].methods = methods(3, 2);
    solved.sheets[1].pressures = (struct case_sweep){.given = true, .count = 2, .values = PRESSURES};
    solved.small.tree.sheets = solved.sheets;
    solved.small.tree.sheet_count = 2;
    *state = &solved;
    return 0;
}

static int tear_down(void **state)
{
    small_case_tear_down(&((struct solved *)*state)->small);
    return 0;
}

static const struct result *solve(struct solved *solved)
{
    return filling_solve(&solved->small.tree, "0.0.0", solved->small.arena);
}

static const struct data_row *datum(const struct result *result, const char *name)
{
    for (size_t i = 0; i < result->data.count; i++) {
        if (strcmp(result->data.items[i].name, name) == 0) {
            return &result->data.items[i];
        }
    }
    return NULL;
}

static size_t warnings_of(const struct result *result, enum code code)
{
    size_t count = 0;
    for (size_t i = 0; i < result->warnings.count; i++) {
        count += result->warnings.items[i].code == code;
    }
    return count;
}

static void sheets_are_answered_in_order_with_their_names(void **state)
{
    const struct result *result = solve(*state);
    assert_int_equal(result->sheet_count, 2);
    assert_string_equal(result->first_sheet->kind, "saturation");
    assert_string_equal(result->first_sheet->title, "boiling line");
    assert_string_equal(result->last_sheet->kind, "fugacity");
    assert_string_equal(result->last_sheet->fluid, "propane");
    assert_non_null(result->last_sheet->first_part);
    assert_int_equal(result_verdict(result), VERDICT_NONE);
}

static void the_document_names_only_files_in_use(void **state)
{
    struct solved *solved = *state;
    struct source_file used = {.name = "gases.deck", .sha256 = "11", .is_library = true, .is_used = true};
    struct source_file idle = {.name = "rules.deck", .sha256 = "22", .is_library = true};
    struct source_file *files[] = {&solved->small.file, &used, &idle};
    const char *const notes[] = {"first note"};
    solved->small.deck.files = files;
    solved->small.deck.file_count = 3;
    solved->small.tree.number = "P-7";
    solved->small.tree.notes = notes;
    solved->small.tree.note_count = 1;
    const struct result *result = solve(solved);
    assert_string_equal(result->number, "P-7");
    assert_string_equal(result->version, "0.0.0");
    assert_string_equal(result->deck_name, "small.deck");
    assert_string_equal(result->notes.items[0], "first note");
    assert_int_equal(result->library.count, 1);
    assert_string_equal(result->library.items[0].name, "gases.deck");
}

static void inputs_carry_the_line_they_came_from(void **state)
{
    struct solved *solved = *state;
    static const uint32_t starts[] = {0, 5};
    solved->small.file.line_starts = starts;
    solved->small.file.line_count = 2;
    const struct case_input input = {
        .group = "vessel eighty",
        .name = "water-capacity",
        .si = "0.0793 m3",
        .origin = {.kind = ORIGIN_DECK, .at = {.file = &solved->small.file, .begin = 7, .end = 9}, .written = "79.3 L"},
    };
    solved->small.tree.inputs = &input;
    solved->small.tree.input_count = 1;
    const struct result *result = solve(solved);
    assert_int_equal(result->inputs.count, 1);
    assert_string_equal(result->inputs.items[0].from, "line 2");
    assert_string_equal(result->inputs.items[0].written, "79.3 L");
}

static void every_method_is_made_ready_and_told_once(void **state)
{
    const struct result *result = solve(*state);
    assert_int_equal(result->methods.count, 3);
    const struct method_row *reference = &result->methods.items[0], *cubic = &result->methods.items[1];
    assert_string_equal(reference->range, "85.525 to 650 K, to 1000 MPa");
    assert_string_equal(reference->reason, "leads: named here");
    assert_non_null(strstr(reference->title, "J. Chem. Eng. Data 54 (2009) 3141"));
    assert_non_null(strstr(cubic->title, "Ind. Eng. Chem. Fundam. 15 (1976) 59"));
    assert_non_null(strstr(cubic->parameters, "acentric factor 0.1521"));
    assert_string_equal(cubic->reason, "stands beside the lead");
    assert_non_null(strstr(result->methods.items[2].reason, "never governs"));
}

static void data_stand_with_their_sources(void **state)
{
    const struct result *result = solve(*state);
    const struct data_row *mass = datum(result, "molar-mass");
    assert_string_equal(mass->group, "propane");
    assert_string_equal(mass->value, "44.09562 g/mol");
    assert_string_equal(mass->source, "lemmon-2009");
    assert_null(mass->remark);
    assert_string_equal(datum(result, "reference-equation")->value, "18 terms, 85.525 to 650 K, to 1000 MPa");
    assert_string_equal(datum(result, "un-number")->value, "1978");
    assert_int_equal(warnings_of(result, CODE_W301), 0);
}

static void only_sources_that_something_cites_are_told(void **state)
{
    struct solved *solved = *state;
    const struct case_source idle = {.key = "poling-2001", .citation = "a handbook"};
    const struct case_source *const sources[] = {&idle, &SMALL_CASE_SOURCE};
    solved->small.tree.sources = sources;
    solved->small.tree.source_count = 2;
    const struct result *result = solve(solved);
    assert_int_equal(result->sources.count, 1);
    assert_string_equal(result->sources.items[0].key, "lemmon-2009");
}

static void only_data_that_a_method_uses_are_told(void **state)
{
    struct solved *solved = *state;
    solved->sheets[0].methods = solved->sheets[1].methods = methods(1, 1);
    const struct result *result = solve(solved);
    assert_non_null(datum(result, "molar-mass"));
    assert_null(datum(result, "acentric"));
}

static void a_value_that_replaces_another_shows_both(void **state)
{
    struct solved *solved = *state;
    const struct quantity old = solved->small.component.acentric;
    solved->small.component.acentric = (struct quantity){
        .given = true,
        .value = 0.153,
        .origin = {.kind = ORIGIN_DECK, .at = {.file = &solved->small.file}, .written = "0.153"},
        .overridden = &old,
    };
    static const uint32_t starts[] = {0};
    solved->small.file.line_starts = starts;
    solved->small.file.line_count = 1;
    const struct data_row *row = datum(solve(solved), "acentric");
    assert_string_equal(row->value, "0.153");
    assert_string_equal(row->source, "given in this deck, line 1");
    assert_string_equal(row->remark, "replaces 0.1521 (lemmon-2009)");
}

static void a_value_from_memory_is_marked_and_warned_of_where_it_is_used(void **state)
{
    struct solved *solved = *state;
    const struct case_source memory = {.key = "handbook", .citation = "a handbook", .is_unverified = true};
    solved->small.component.acentric.origin.source = &memory;
    solved->small.component.boiling_temperature = solved->small.component.acentric; /* in no method's use */
    const struct result *result = solve(solved);
    assert_string_equal(datum(result, "acentric")->remark, "unverified");
    assert_int_equal(warnings_of(result, CODE_W301), 1);
}

static void a_lead_that_lacks_data_leaves_the_case_undecided(void **state)
{
    struct solved *solved = *state;
    solved->small.pure.reference = NULL;
    const struct result *result = solve(solved);
    assert_int_equal(result_verdict(result), VERDICT_UNDECIDED);
    assert_string_equal(result->first_sheet->first_part->note,
                        "reference gives no answer: no reference equation is given for propane.");
    assert_int_equal(warnings_of(result, CODE_W302), 2);
    assert_string_equal(result->methods.items[0].reason, "no answer: no reference equation is given for propane");
}

static void entries_and_rules_in_use_are_told_once(void **state)
{
    struct solved *solved = *state;
    const struct case_source adr = {.key = "adr-2025", .citation = "ADR 2025"};
    const struct listed_row rows[] = {
        {.test_pressure = 23e5, .filling_ratio = {true, 0.43}, .origin = {.kind = ORIGIN_LIBRARY, .source = &adr}},
    };
    const struct case_entry entry = {.name = "UN 1978", .class_code = "2F", .row_count = 1, .rows = rows};
    const struct case_entry *const entries[] = {&entry};
    const struct case_rule rule = {.name = "liquefied", .clause = "P200 (5)(c)", .source = &adr};
    const struct case_rule *const rules[] = {&rule};
    for (size_t i = 0; i < 2; i++) {
        solved->sheets[i].entries = entries;
        solved->sheets[i].entry_count = 1;
        solved->sheets[i].rules = rules;
        solved->sheets[i].rule_count = 1;
    }
    const struct result *result = solve(solved);
    const struct data_row *row = datum(result, "listed-fill 23 barg");
    assert_string_equal(row->group, "entry UN 1978");
    assert_string_equal(row->value, "filling-ratio 0.43");
    assert_string_equal(row->source, "adr-2025");
    assert_string_equal(datum(result, "clause")->group, "rule liquefied");
    size_t count = 0;
    for (size_t i = 0; i < result->data.count; i++) {
        count += strcmp(result->data.items[i].name, "clause") == 0;
    }
    assert_int_equal(count, 1);
}

static void the_cautions_name_the_statutory_table_and_the_licensed_person(void **state)
{
    const struct result *result = solve(*state);
    bool names_table = false, names_person = false, names_withdrawal = false;
    for (size_t i = 0; i < result->cautions.count; i++) {
        names_table |= strstr(result->cautions.items[i], "statutory table") != NULL;
        names_person |= strstr(result->cautions.items[i], "licensed person") != NULL;
        names_withdrawal |= strstr(result->cautions.items[i], "fast withdrawal") != NULL;
    }
    assert_true(names_table && names_person && names_withdrawal);
}

#define TEST(name) cmocka_unit_test_setup_teardown(name, set_up, tear_down)

int main(void)
{
    const struct CMUnitTest tests[] = {
        TEST(sheets_are_answered_in_order_with_their_names),
        TEST(the_document_names_only_files_in_use),
        TEST(inputs_carry_the_line_they_came_from),
        TEST(every_method_is_made_ready_and_told_once),
        TEST(data_stand_with_their_sources),
        TEST(only_sources_that_something_cites_are_told),
        TEST(only_data_that_a_method_uses_are_told),
        TEST(a_value_that_replaces_another_shows_both),
        TEST(a_value_from_memory_is_marked_and_warned_of_where_it_is_used),
        TEST(a_lead_that_lacks_data_leaves_the_case_undecided),
        TEST(entries_and_rules_in_use_are_told_once),
        TEST(the_cautions_name_the_statutory_table_and_the_licensed_person),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
