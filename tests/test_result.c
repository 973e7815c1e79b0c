/* The result tree's builders: order kept, empty cells, warnings once, the verdict. */
#include "result/result.h"

#include "support/check.h"

#include <math.h>
#include <string.h>

static const struct look BAR = {"Pa", {"barg", 1e5, 101325.0}, 2};

static int set_up(void **state)
{
    struct arena *arena = arena_create(NULL);
    *state = result_create(arena);
    return 0;
}

static int tear_down(void **state)
{
    arena_free(((struct result *)*state)->arena);
    return 0;
}

static void sheets_keep_their_order(void **state)
{
    struct result *result = *state;
    const char *kinds[] = {"saturation", "fugacity", "settled-pressure"};
    for (size_t i = 0; i < 3; i++) {
        result_add_sheet(result, kinds[i], NULL);
    }
    size_t i = 0;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        assert_string_equal(sheet->kind, kinds[i++]);
    }
    assert_int_equal(i, 3);
    assert_int_equal(result->sheet_count, 3);
}

static void parts_keep_their_order_and_facts_their_group(void **state)
{
    struct result *result = *state;
    struct result_sheet *sheet = result_add_sheet(result, "fugacity", "t");
    sheet_begin_facts(result, sheet, "charge");
    sheet_add_fact(result, sheet, "pressure", 3e5, BAR)->method = "reference";
    sheet_add_words(result, sheet, "class", "compressed");
    sheet_add_note(result, sheet, "%d of %s", 3, "these");
    sheet_add_words(result, sheet, "after", "note");
    sheet_add_table(result, sheet, "table", NULL);
    sheet_add_hand_check(result, sheet, "check");

    const enum part_kind kinds[] = {PART_FACTS, PART_NOTE, PART_FACTS, PART_TABLE, PART_HAND_CHECK};
    const struct sheet_part *part = sheet->first_part;
    for (size_t i = 0; i < sizeof kinds / sizeof *kinds; i++, part = part->next) {
        assert_non_null(part);
        assert_int_equal(part->kind, kinds[i]);
    }
    assert_null(part);
    const struct sheet_part *first = sheet->first_part;
    assert_int_equal(first->facts.count, 2);
    assert_string_equal(first->facts.items[0].method, "reference");
    assert_string_equal(first->facts.items[1].text, "compressed");
    assert_string_equal(first->next->note, "3 of these");
    assert_null(first->next->next->title);
}

static void rows_start_empty_and_outlive_growth(void **state)
{
    struct result *result = *state;
    struct result_sheet *sheet = result_add_sheet(result, "fugacity", NULL);
    struct table *table = sheet_add_table(result, sheet, "t", "reference");
    table_add_column(result, table, "pressure", BAR);
    table_add_word_column(result, table, "state");
    enum { ROWS = 1000 };
    for (size_t i = 0; i < ROWS; i++) {
        struct cell *row = table_add_row(result, table);
        assert_int_equal(row[0].kind, CELL_EMPTY);
        assert_int_equal(row[1].kind, CELL_EMPTY);
        cell_set(&row[0], 1.5 * (double)i);
        cell_set_text(&row[1], "vapour");
    }
    assert_int_equal(table->row_count, ROWS);
    assert_null(table->columns[1].look.si_unit);
    for (size_t i = 0; i < ROWS; i++) {
        assert_close(table->cells[2 * i].number + 1.0, 1.5 * (double)i + 1.0, 0.0, "as set");
        assert_string_equal(table->cells[2 * i + 1].text, "vapour");
    }
}

static void a_number_that_is_not_finite_leaves_the_cell_empty(void **state)
{
    (void)state;
    const double values[] = {NAN, INFINITY, -INFINITY};
    for (size_t i = 0; i < 3; i++) {
        struct cell cell = {.kind = CELL_TEXT, .text = "x"};
        cell_set(&cell, values[i]);
        assert_int_equal(cell.kind, CELL_EMPTY);
    }
}

static void a_warning_is_kept_once_for_each_sheet(void **state)
{
    struct result *result = *state;
    result_warn(result, CODE_W300, 4, 1, "at %g K", 250.0);
    result_warn(result, CODE_W300, 9, 1, "at %g K", 250.0);
    assert_int_equal(result->warnings.count, 1);
    result_warn(result, CODE_W300, 4, 2, "at %g K", 250.0);
    result_warn(result, CODE_W301, 4, 1, "at %g K", 250.0);
    result_warn(result, CODE_W300, 4, 1, "at %g K", 251.0);
    assert_int_equal(result->warnings.count, 4);
    assert_int_equal(result->warnings.items[0].line, 4);
    assert_string_equal(result->warnings.items[3].text, "at 251 K");
}

static void the_worst_requirement_is_the_verdict(void **state)
{
    (void)state;
    const struct {
        const char *name;
        size_t count;
        enum requirement_state states[3];
        bool is_undecided;
        enum verdict expected;
    } cases[] = {
        {"nothing asked", 0, {REQUIREMENT_MET}, false, VERDICT_NONE},
        {"a sheet without an answer", 0, {REQUIREMENT_MET}, true, VERDICT_UNDECIDED},
        {"all met", 2, {REQUIREMENT_MET, REQUIREMENT_MET}, false, VERDICT_MET},
        {"one undecided", 3, {REQUIREMENT_MET, REQUIREMENT_UNDECIDED, REQUIREMENT_MET}, false, VERDICT_UNDECIDED},
        {"met, but a sheet without an answer", 1, {REQUIREMENT_MET}, true, VERDICT_UNDECIDED},
        {"not met wins", 3, {REQUIREMENT_UNDECIDED, REQUIREMENT_NOT_MET, REQUIREMENT_MET}, true, VERDICT_NOT_MET},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct arena *arena = arena_create(NULL);
        struct result *result = result_create(arena);
        result->is_undecided = cases[i].is_undecided;
        for (size_t k = 0; k < cases[i].count; k++) {
            struct result_sheet *sheet = result_add_sheet(result, "settled-pressure", NULL);
            sheet_add_requirement(result, sheet, "r")->state = cases[i].states[k];
        }
        if (result_verdict(result) != cases[i].expected) {
            fail_msg("%s: verdict %d", cases[i].name, (int)result_verdict(result));
        }
        arena_free(arena);
    }
}

static void requirements_of_a_sheet_keep_their_order_and_begin_undecided(void **state)
{
    struct result *result = *state;
    struct result_sheet *sheet = result_add_sheet(result, "settled-pressure", NULL);
    sheet_add_requirement(result, sheet, "first");
    sheet_add_requirement(result, sheet, "second");
    assert_string_equal(sheet->first_requirement->text, "first");
    assert_string_equal(sheet->first_requirement->next->text, "second");
    assert_int_equal(sheet->last_requirement->state, REQUIREMENT_UNDECIDED);
}

static void a_look_shows_in_its_unit(void **state)
{
    (void)state;
    assert_close(look_shown(&BAR, 25101325.0), 250.0, 1e-15, "(25 101 325 - 101 325) / 1e5, by definition of barg");
}

static void lines_are_formatted_and_kept(void **state)
{
    struct result *result = *state;
    struct result_sheet *sheet = result_add_sheet(result, "fugacity", NULL);
    struct hand_check *check = sheet_add_hand_check(result, sheet, "check");
    hand_check_line(result, check, "Z = %.3f", 0.25);
    line_list_add(result, &result->cautions, "%s", "");
    assert_string_equal(check->lines.items[0], "Z = 0.250");
    assert_string_equal(result->cautions.items[0], "");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(sheets_keep_their_order, set_up, tear_down),
        cmocka_unit_test_setup_teardown(parts_keep_their_order_and_facts_their_group, set_up, tear_down),
        cmocka_unit_test_setup_teardown(rows_start_empty_and_outlive_growth, set_up, tear_down),
        cmocka_unit_test(a_number_that_is_not_finite_leaves_the_cell_empty),
        cmocka_unit_test_setup_teardown(a_warning_is_kept_once_for_each_sheet, set_up, tear_down),
        cmocka_unit_test(the_worst_requirement_is_the_verdict),
        cmocka_unit_test_setup_teardown(requirements_of_a_sheet_keep_their_order_and_begin_undecided, set_up,
                                        tear_down),
        cmocka_unit_test(a_look_shows_in_its_unit),
        cmocka_unit_test_setup_teardown(lines_are_formatted_and_kept, set_up, tear_down),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
