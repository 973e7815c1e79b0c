#include "report/listing_internal.h"
#include "report/page.h"

#include <string.h>

static const char *cleaned(const struct grid *grid, const char *text)
{
    return text && *text != '\0' ? page_clean(grid->arena, text) : NULL;
}

/* The group's line, where this row is the first of its group. */
static const char *new_group(const struct grid *grid, const char *group, const char *previous)
{
    const bool is_same = previous && group && strcmp(previous, group) == 0;
    return is_same ? NULL : cleaned(grid, group);
}

void listing_inputs(const struct result *result, struct text *out)
{
    page_section(out, SECTION_INPUTS, "Inputs, in SI");
    if (result->inputs.count == 0) {
        page_paragraph(out, SECTION_INDENT, "none");
        return;
    }
    static const char *const heads[] = {"what", "as written", "SI", "from"};
    struct grid *grid = grid_create(out->arena, sizeof heads / sizeof *heads);
    for (size_t c = 0; c < grid->column_count; c++) {
        grid->columns[c].name = heads[c];
    }
    const char *group = NULL;
    for (size_t i = 0; i < result->inputs.count; i++) {
        const struct input_row *input = &result->inputs.items[i];
        struct grid_row *row = grid_add_row(grid);
        row->group = new_group(grid, input->group, group);
        group = input->group;
        row->cells[0].text = cleaned(grid, input->name);
        row->cells[1].text = cleaned(grid, input->written);
        row->cells[2].text = cleaned(grid, input->si);
        row->cells[3].text = cleaned(grid, input->from);
    }
    grid_draw(grid, SECTION_INDENT, out);
}

static void draw_values(const struct result *result, struct text *out)
{
    static const char *const heads[] = {"what", "value", "source", "remark"};
    struct grid *grid = grid_create(out->arena, sizeof heads / sizeof *heads);
    bool has_remarks = false;
    const char *group = NULL;
    for (size_t i = 0; i < result->data.count; i++) {
        const struct data_row *datum = &result->data.items[i];
        struct grid_row *row = grid_add_row(grid);
        row->group = new_group(grid, datum->group, group);
        group = datum->group;
        row->cells[0].text = cleaned(grid, datum->name);
        row->cells[1].text = cleaned(grid, datum->value);
        row->cells[2].text = cleaned(grid, datum->source);
        row->cells[3].text = cleaned(grid, datum->remark);
        has_remarks = has_remarks || row->cells[3].text;
    }
    for (size_t c = 0; c + !has_remarks < grid->column_count; c++) {
        grid->columns[c].name = heads[c];
    }
    grid_draw(grid, SECTION_INDENT, out);
}

static void draw_sources(const struct result *result, struct text *out)
{
    struct grid *grid = grid_create(out->arena, 2);
    for (size_t i = 0; i < result->sources.count; i++) {
        const struct source_row *source = &result->sources.items[i];
        struct grid_row *row = grid_add_row(grid);
        row->cells[0].text = cleaned(grid, source->key);
        const char *mark = source->is_unverified ? " (unverified: entered from memory)" : "";
        row->span = arena_format(out->arena, "%s%s", source->citation ? source->citation : "", mark);
    }
    grid_draw(grid, SECTION_INDENT, out);
}

void listing_values(const struct result *result, struct text *out)
{
    if (result->data.count == 0 && result->sources.count == 0) {
        page_paragraph(out, SECTION_INDENT, "none");
    }
    if (result->data.count != 0) {
        draw_values(result, out);
    }
    if (result->sources.count != 0) {
        if (result->data.count != 0) {
            page_blank(out);
        }
        draw_sources(result, out);
    }
}

void listing_data(const struct result *result, struct text *out)
{
    page_section(out, SECTION_DATA, "Data used");
    listing_values(result, out);
}

static void add_method_words(struct grid *grid, const char *lead, const char *words)
{
    if (words && *words != '\0') {
        struct grid_row *row = grid_add_row(grid);
        row->cells[0].text = lead;
        row->span = words;
    }
}

void listing_methods(const struct result *result, struct text *out)
{
    page_section(out, SECTION_METHODS, "Methods");
    if (result->methods.count == 0) {
        page_paragraph(out, SECTION_INDENT, "none");
        return;
    }
    struct grid *grid = grid_create(out->arena, 2);
    for (size_t i = 0; i < result->methods.count; i++) {
        const struct method_row *method = &result->methods.items[i];
        const size_t first = grid->row_count;
        add_method_words(grid, "method", method->title ? method->title : method->name);
        add_method_words(grid, "parameters", method->parameters);
        add_method_words(grid, "range", method->range);
        add_method_words(grid, "reason", method->reason);
        if (grid->row_count > first) {
            grid->rows[first].group = cleaned(grid, method->name);
        }
    }
    grid_draw(grid, SECTION_INDENT, out);
}
