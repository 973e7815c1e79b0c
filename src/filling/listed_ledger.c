#include "filling/listed_ledger.h"

#include "filling/requirement.h"

#include <math.h>
#include <string.h>

/* Listed ratios have two decimals: what differs by no more than their last place agrees with the row. The slack is
 * for the binary form of a decimal difference. */
#define LISTED_PLACE       0.01
#define LISTED_PLACE_SLACK 1e-9

static bool is_within_place(const struct listed_line *line)
{
    return line->computed.given && fabs(line->listed - line->computed.value) <= LISTED_PLACE + LISTED_PLACE_SLACK;
}

/* The method of every line, or NULL where they differ. */
static const char *common_method(const struct listed_ledger *ledger)
{
    for (size_t i = 1; i < ledger->count; i++) {
        if (strcmp(ledger->items[i].method, ledger->items[0].method) != 0) {
            return NULL;
        }
    }
    return ledger->items[0].method;
}

/* The last column only where the methods differ. */
enum row_column {
    ROW_ENTRY,
    ROW_TEST_PRESSURE,
    ROW_LISTED,
    ROW_COMPUTED,
    ROW_EXCESS,
    ROW_WITHIN,
    ROW_LIQUID_FULL,
    ROW_SHEET,
    ROW_METHOD
};

static void add_row(struct result *result, struct table *table, const struct listed_line *line)
{
    struct cell *row = table_add_row(result, table);
    cell_set_text(&row[ROW_ENTRY], line->entry);
    cell_set(&row[ROW_TEST_PRESSURE], line->test_pressure + STANDARD_ATMOSPHERE);
    cell_set(&row[ROW_LISTED], line->listed);
    cell_set_text(&row[ROW_WITHIN], is_within_place(line) ? "yes" : "no");
    cell_set_sheet(&row[ROW_SHEET], line->run->number);
    if (line->computed.given) {
        cell_set(&row[ROW_COMPUTED], line->computed.value);
        cell_set(&row[ROW_EXCESS], line->listed - line->computed.value);
    }
    if (line->liquid_full.given) {
        cell_set(&row[ROW_LIQUID_FULL], line->liquid_full.value);
    }
    if (table->column_count > ROW_METHOD) {
        cell_set_text(&row[ROW_METHOD], line->method);
    }
}

static void tell_rows(const struct listed_ledger *ledger, struct result *result, struct result_sheet *out)
{
    const struct sheet_run *run = ledger->items[0].run;
    const char *method = common_method(ledger);
    struct table *table = sheet_add_table(result, out, "filling ratio, listed beside computed", method);
    table_add_word_column(result, table, "entry");
    table_add_column(result, table, "test-pressure", look_gauge(run));
    table_add_column(result, table, "listed", look_ratio(2));
    table_add_column(result, table, "computed", look_ratio(4));
    table_add_column(result, table, "excess", look_ratio(4));
    table_add_word_column(result, table, "agrees");
    table_add_column(result, table, "liquid-full", look_temperature(run));
    table_add_word_column(result, table, "sheet");
    if (method == NULL) {
        table_add_word_column(result, table, "method");
    }
    for (size_t i = 0; i < ledger->count; i++) {
        add_row(result, table, &ledger->items[i]);
    }
    sheet_add_note(
        result, out,
        "computed: the least of the rules' criteria, unrounded; excess: listed less computed; agrees: within "
        "0.01; liquid-full: of the listed charge");
}

enum miss_column { MISS_ENTRY, MISS_SHEET, MISS_CRITERION, MISS_FOUND };

static void add_miss(struct result *result, struct table *table, const struct listed_line *line,
                     const struct listed_miss *miss)
{
    struct cell *row = table_add_row(result, table);
    cell_set_text(&row[MISS_ENTRY], line->entry);
    cell_set_sheet(&row[MISS_SHEET], line->run->number);
    cell_set_text(&row[MISS_CRITERION], miss->criterion);
    cell_set_text(&row[MISS_FOUND], arena_format(result->arena, "%s, at %s", miss->words,
                                                 temperature_words(line->run, miss->temperature)));
}

static void tell_misses(const struct listed_ledger *ledger, struct result *result, struct result_sheet *out)
{
    struct table *table = NULL;
    for (size_t i = 0; i < ledger->count; i++) {
        for (size_t k = 0; k < ledger->items[i].miss_count; k++) {
            if (table == NULL) {
                table = sheet_add_table(result, out, "criteria that listed charges miss", common_method(ledger));
                table_add_word_column(result, table, "entry");
                table_add_word_column(result, table, "sheet");
                table_add_word_column(result, table, "criterion");
                table_add_word_column(result, table, "missed");
            }
            add_miss(result, table, &ledger->items[i], &ledger->items[i].misses[k]);
        }
    }
    sheet_add_note(result, out, "a listed charge not named here meets every criterion of its rule");
}

void tell_listed_ledger(const struct listed_ledger *ledger, struct result *result)
{
    if (ledger->count < 2) {
        return;
    }
    struct result_sheet *out = result_add_sheet(result, "listed-rows", "all sheets");
    tell_rows(ledger, result, out);
    tell_misses(ledger, result, out);
    size_t within = 0;
    for (size_t i = 0; i < ledger->count; i++) {
        within += is_within_place(&ledger->items[i]);
    }
    sheet_add_note(result, out, "%zu of %zu rows lie within 0.01 of the computed ratio", within, ledger->count);
}
