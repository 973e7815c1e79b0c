#include "filling/method_spread.h"

#include <math.h>

enum { DIGITS = 6 };

struct noted {
    double Z;
    bool counts; /* towards the spread */
};

struct method_spread {
    const struct sheet_run *run;
    struct method_run *const *methods;
    size_t method_count, points;
    struct noted *noted; /* [method_count * points] */
};

struct method_spread *method_spread_create(const struct sheet_run *run, struct method_run *const methods[],
                                           size_t method_count, size_t points)
{
    struct method_spread *spread = arena_alloc(run->arena, 1, sizeof *spread);
    *spread = (struct method_spread){run, methods, method_count, points, NULL};
    spread->noted = arena_alloc(run->arena, method_count * points, sizeof *spread->noted);
    for (size_t i = 0; i < method_count * points; i++) {
        spread->noted[i] = (struct noted){(double)NAN, false};
    }
    return spread;
}

void method_spread_note(struct method_spread *spread, size_t method, size_t point, double Z, bool is_inside)
{
    const unsigned capabilities = spread->methods[method]->fluid->ops->capabilities;
    spread->noted[method * spread->points + point] =
        (struct noted){Z, is_inside && (capabilities & IS_FOR_COMPARISON) == 0};
}

static const struct noted *noted_at(const struct method_spread *spread, size_t method, size_t point)
{
    return &spread->noted[method * spread->points + point];
}

/* NaN unless two methods count. */
static double spread_at(const struct method_spread *spread, size_t point)
{
    double least = (double)INFINITY, largest = -(double)INFINITY;
    size_t counted = 0;
    for (size_t m = 0; m < spread->method_count; m++) {
        const struct noted *noted = noted_at(spread, m, point);
        if (noted->counts && isfinite(noted->Z)) {
            least = fmin(least, noted->Z);
            largest = fmax(largest, noted->Z);
            counted++;
        }
    }
    const double lead = fabs(noted_at(spread, 0, point)->Z);
    return counted > 1 && lead > 0.0 ? (largest - least) / lead : (double)NAN;
}

static void add_row(const struct method_spread *spread, struct table *table, size_t point, double second)
{
    const struct sheet_run *run = spread->run;
    const size_t seconds = spread->points / run->sheet->temperatures.count;
    struct cell *row = table_add_row(run->result, table);
    cell_set(&row[0], run->sheet->temperatures.values[point / seconds]);
    cell_set(&row[1], second);
    for (size_t m = 0; m < spread->method_count; m++) {
        const struct noted *noted = noted_at(spread, m, point);
        if (isfinite(noted->Z)) {
            cell_set(&row[2 + m], noted->Z);
        }
    }
    const double largest = spread_at(spread, point);
    if (isfinite(largest)) {
        cell_set(&row[2 + spread->method_count], largest);
    }
}

void method_spread_tell(const struct method_spread *spread, const struct spread_axis *second)
{
    const struct sheet_run *run = spread->run;
    if (spread->method_count < 2) {
        return;
    }
    struct table *table =
        sheet_add_table(run->result, run->out, "compressibility factor, method beside method", run->methods[0].name);
    table_add_column(run->result, table, "temperature", look_temperature(run));
    table_add_column(run->result, table, second->name, second->look);
    for (size_t m = 0; m < spread->method_count; m++) {
        table_add_column(run->result, table, spread->methods[m]->name, look_ratio(-DIGITS));
    }
    table_add_column(run->result, table, "spread", look_percent(2));
    for (size_t point = 0; point < spread->points; point++) {
        add_row(spread, table, point, second->values[point % second->count]);
    }
    sheet_add_note(run->result, run->out,
                   "spread: the largest difference between two methods by part of the lead's value, of those within "
                   "their range and without those that are for comparison only");
}
