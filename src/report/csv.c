#include "report/number.h"
#include "report/page.h"
#include "report/report.h"

#include <string.h>

/* Quotes a field that holds a separator, a quote or a line break, as RFC 4180, section 2. */
static void add_field(struct text *out, const char *field)
{
    if (field[strcspn(field, ",\"\n\r")] == '\0') {
        text_add(out, field, strlen(field));
        return;
    }
    text_add(out, "\"", 1);
    for (const char *at = field; *at != '\0'; at++) {
        text_add(out, at, 1);
        text_add(out, "\"", *at == '"');
    }
    text_add(out, "\"", 1);
}

static const char *cell_field(struct arena *arena, const struct column *column, const struct cell *cell)
{
    switch (cell->kind) {
    case CELL_NUMBER:
        return number_exact(arena, &column->look, cell->number);
    case CELL_TEXT:
        return page_clean(arena, cell->text);
    case CELL_SHEET:
        return arena_format(arena, "%.0f", cell->number);
    case CELL_EMPTY:
        break;
    }
    return "";
}

static const char *column_field(struct arena *arena, const struct column *column)
{
    const char *name = page_clean(arena, column->name);
    return column->look.si_unit ? arena_format(arena, "%s [%s]", name, number_unit(&column->look)) : name;
}

void report_csv(const struct table *table, struct text *out)
{
    for (size_t c = 0; c < table->column_count; c++) {
        text_add(out, ",", c != 0);
        add_field(out, column_field(out->arena, &table->columns[c]));
    }
    text_add(out, "\n", 1);
    for (size_t r = 0; r < table->row_count; r++) {
        for (size_t c = 0; c < table->column_count; c++) {
            text_add(out, ",", c != 0);
            add_field(out, cell_field(out->arena, &table->columns[c], &table->cells[r * table->column_count + c]));
        }
        text_add(out, "\n", 1);
    }
}
