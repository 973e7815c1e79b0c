/* The fill chart: what the gauge should read while the vessel is filled, for each gas temperature. */
#include "filling/permissible_internal.h"

#include "filling/contents_table.h"
#include "filling/sweep.h"

enum chart_column { CHART_TEMPERATURE, CHART_READING, CHART_STATE };

/* A gauge reads above the air around it, which need not be the standard atmosphere of the ratings. */
static struct look look_reading(const struct sheet_run *run)
{
    struct look look = look_gauge(run);
    look.shown.offset += run->tree->ambient_pressure - STANDARD_ATMOSPHERE;
    return look;
}

struct chart {
    const struct sheet_run *run;
    struct method_run *method;
    struct table *table;
};

static void add_row(void *teller, size_t method, size_t point, const struct swept_contents *found)
{
    const struct chart *chart = teller;
    const struct sheet_run *run = chart->run;
    const struct contents *contents = &found->contents;
    const double temperature = run->sheet->temperatures.values[point];
    (void)method; /* there is one */
    warn_below_triple(run, temperature);
    struct cell *row = table_add_row(run->result, chart->table);
    cell_set(&row[CHART_TEMPERATURE], temperature);
    if (found->answer != ANSWER_OK) {
        cell_set_text(&row[CHART_STATE], "no answer");
        return;
    }
    cell_set(&row[CHART_READING], contents->pressure);
    row[CHART_READING].is_outside_range = !warn_outside_range(run, chart->method, temperature, contents->pressure);
    cell_set_text(&row[CHART_STATE], contents_words(run, contents));
}

void tell_fill_chart(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct case_sweep *temperatures = &run->sheet->temperatures;
    if (!temperatures->given) {
        return;
    }
    struct method_run *method = governing_method(sheet);
    struct table *table =
        sheet_add_table(run->result, run->out, "fill chart: gauge reading of the permitted charge", method->name);
    struct chart chart = {run, method, table};
    table->csv = run->sheet->table_csv;
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, "gauge-reading", look_reading(run));
    table_add_word_column(run->result, table, "state");
    const struct contents_sweep sweep = {.run = run,
                                         .method_count = 1,
                                         .methods = &method,
                                         .mass = sheet->mass,
                                         .count = temperatures->count,
                                         .temperatures = temperatures->values,
                                         .tell = add_row,
                                         .teller = &chart};
    sweep_contents(&sweep);
    sheet_add_note(run->result, run->out,
                   "gas temperature, not wall temperature; readings above an ambient pressure of %s",
                   shown_text(run, look_pressure(run), run->tree->ambient_pressure));
}
