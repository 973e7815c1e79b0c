/* The melting line in a saturation sheet. */
#include "filling/melting_line.h"

#include "filling/requirement.h"
#include "fluid/solid.h"

#include <math.h>

enum { MELTING_DIGITS = 6 };
enum melting_column { MELTING_TEMPERATURE, MELTING_PRESSURE, MELTING_STATE };

struct melting_table {
    const struct sheet_run *run;
    struct table *table; /* NULL until the first row */
};

static void add_row(struct melting_table *into, double temperature, double pressure, const char *state)
{
    const struct sheet_run *run = into->run;
    if (into->table == NULL) {
        struct look exact = look_temperature(run);
        exact.decimals = 3;
        into->table = sheet_add_table(run->result, run->out, "lines of the solid, as published", NULL);
        table_add_column(run->result, into->table, "temperature", exact);
        table_add_column(run->result, into->table, "pressure", look_significant(look_pressure(run), MELTING_DIGITS));
        table_add_word_column(run->result, into->table, "state");
    }
    struct cell *row = table_add_row(run->result, into->table);
    cell_set(&row[MELTING_TEMPERATURE], temperature);
    cell_set(&row[MELTING_PRESSURE], pressure);
    cell_set_text(&row[MELTING_STATE], state);
}

static void add_temperature(struct melting_table *into, const struct solid_spec *solid, double temperature)
{
    for (size_t k = 0; k < solid->melting_count; k++) {
        const struct melting_part *part = &solid->melting[k];
        if (temperature >= part->smallest_temperature && temperature <= part->largest_temperature) {
            add_row(into, temperature, solid_melting_pressure(part, temperature), "solid + liquid");
        }
    }
}

static void add_pressure(struct melting_table *into, const struct solid_spec *solid, double pressure)
{
    const double sublimation = solid_sublimation_temperature(solid, pressure);
    if (isfinite(sublimation)) {
        add_row(into, sublimation, pressure, "solid + vapour");
    }
    for (size_t k = 0; k < solid->melting_count; k++) {
        const double temperature = solid_melting_temperature(&solid->melting[k], pressure);
        if (isfinite(temperature)) {
            add_row(into, temperature, pressure, "solid + liquid");
        }
    }
}

/* How far the two published lines part where they meet. */
static void tell_offset(const struct sheet_run *run, const struct solid_spec *solid)
{
    double slope;
    const double T = solid->largest_temperature, p = solid_sublimation_pressure(solid, T, &slope);
    for (size_t k = 0; k < solid->melting_count; k++) {
        const struct melting_part *part = &solid->melting[k];
        const double nearest = fmin(fmax(T, part->smallest_temperature), part->largest_temperature);
        if (fabs(nearest - T) > 1e-3 * T) {
            continue;
        }
        const double melting = solid_melting_pressure(part, nearest);
        if (melting < 1e6 + 2.0 * p) { /* the part that starts at the triple point, not another ice */
            struct fact *fact = sheet_add_fact(run->result, run->out, "melting-triple-point-offset", melting / p - 1.0,
                                               look_percent(3));
            fact->remark = arena_format(run->arena, "of the melting line at %s against the sublimation line's end, %s",
                                        temperature_words(run, nearest),
                                        shown_text(run, look_significant(look_pressure(run), MELTING_DIGITS), p));
        }
    }
}

void tell_melting_line(const struct sheet_run *run)
{
    const struct case_sheet *sheet = run->sheet;
    const struct solid_spec *solid = sheet->fluid->spec.pure[0]->solid;
    struct melting_table into = {run, NULL};
    if (!sheet->show_melting) {
        return;
    }
    if (solid == NULL || solid->melting_count == 0) {
        sheet_add_note(run->result, run->out, "No melting line is known of %s.", sheet->fluid->name);
    }
    for (size_t i = 0; solid != NULL && sheet->temperatures.given && i < sheet->temperatures.count; i++) {
        add_temperature(&into, solid, sheet->temperatures.values[i]);
    }
    for (size_t i = 0;
         solid != NULL && sheet->pressures.given && !sheet->temperatures.given && i < sheet->pressures.count; i++) {
        add_pressure(&into, solid, sheet->pressures.values[i]);
    }
    if (into.table != NULL) {
        tell_offset(run, solid);
    } else if (solid != NULL && solid->melting_count > 0) {
        sheet_add_note(run->result, run->out, "No swept value lies on the melting line of %s.", sheet->fluid->name);
    }
}
