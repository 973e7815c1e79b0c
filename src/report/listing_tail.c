#include "report/listing_internal.h"
#include "report/number.h"
#include "report/page.h"

enum requirement_column {
    REQUIREMENT_NUMBER,
    REQUIREMENT_TEXT,
    REQUIREMENT_STATE,
    REQUIREMENT_MARGIN,
    REQUIREMENT_WORST,
    REQUIREMENT_METHOD,
    REQUIREMENT_WHERE,
    REQUIREMENT_COLUMNS
};

static const char *state_words(enum requirement_state state)
{
    switch (state) {
    case REQUIREMENT_MET:
        return "met";
    case REQUIREMENT_NOT_MET:
        return "NOT MET";
    case REQUIREMENT_UNDECIDED:
        return "undecided";
    }
    return "";
}

static void set_numbers(struct grid *grid, struct grid_row *row, const struct requirement *one)
{
    if (one->has_margin) {
        const char *margin = number_shown_difference(grid->arena, &one->look, one->margin);
        row->cells[REQUIREMENT_MARGIN] = number_cell(grid->arena, &one->look, margin);
    }
    if (one->has_worst_temperature) {
        const char *worst = number_shown(grid->arena, &one->temperature_look, one->worst_temperature);
        row->cells[REQUIREMENT_WORST] = number_cell(grid->arena, &one->temperature_look, worst);
    }
}

/* The reason, the margin's uncertainty, and that the verdict is not certain. */
static const char *words_below(struct arena *arena, const struct requirement *one)
{
    struct text words = {.arena = arena};
    if (one->reason) {
        text_format(&words, "%s", one->reason);
    }
    const char *spread = one->has_margin ? spread_words(arena, &one->look, &one->carried) : NULL;
    if (spread) {
        text_format(&words, "%smargin %s %s", words.length == 0 ? "" : "; ", spread, number_unit(&one->look));
    }
    if (one->is_within_uncertainty) {
        text_format(&words, "%sWITHIN UNCERTAINTY, %s", words.length == 0 ? "" : "; ",
                    spread ? "as the margin is smaller" : "as the verdict turns within the +/- of an input");
    }
    return words.bytes;
}

static void add_requirement(struct grid *grid, const struct requirement *one, size_t section)
{
    const size_t number = grid->row_count + 1;
    struct grid_row *row = grid_add_row(grid);
    row->cells[REQUIREMENT_NUMBER].text = arena_format(grid->arena, "%zu", number);
    row->cells[REQUIREMENT_TEXT].text = page_clean(grid->arena, one->text);
    row->cells[REQUIREMENT_STATE].text = state_words(one->state);
    set_numbers(grid, row, one);
    row->cells[REQUIREMENT_METHOD].text = one->method;
    struct text where = {.arena = grid->arena};
    text_format(&where, "%zu", section);
    if (one->line != 0) {
        text_format(&where, ", line %zu", one->line);
    }
    row->cells[REQUIREMENT_WHERE].text = where.bytes;
    row->below = words_below(grid->arena, one);
}

static void name_columns(struct grid *grid)
{
    static const char *const heads[REQUIREMENT_COLUMNS] = {
        [REQUIREMENT_TEXT] = "requirement", [REQUIREMENT_STATE] = "verdict", [REQUIREMENT_MARGIN] = "margin",
        [REQUIREMENT_WORST] = "worst at",   [REQUIREMENT_METHOD] = "method", [REQUIREMENT_WHERE] = "section",
    };
    for (size_t c = 0; c < REQUIREMENT_COLUMNS; c++) {
        grid->columns[c].name = heads[c];
    }
    grid->columns[REQUIREMENT_MARGIN].align = GRID_NUMBERS;
    grid->columns[REQUIREMENT_WORST].align = GRID_NUMBERS;
}

void listing_requirements(const struct result *result, struct text *out)
{
    page_section(out, section_of_requirements(result), "Requirements");
    struct grid *grid = grid_create(out->arena, REQUIREMENT_COLUMNS);
    name_columns(grid);
    size_t section = SECTION_FIRST_SHEET;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct requirement *one = sheet->first_requirement; one; one = one->next) {
            add_requirement(grid, one, section);
        }
        section++;
    }
    if (grid->row_count == 0) {
        page_paragraph(out, SECTION_INDENT, "none stated");
    } else {
        grid_draw(grid, SECTION_INDENT, out);
    }
}

static void draw_warning(const struct warning *warning, struct text *out)
{
    const struct code_row *row = code_row(warning->code);
    struct text words = {.arena = out->arena};
    text_format(&words, "%s", warning->text);
    const char *opener = " (";
    if (warning->line != 0) {
        text_format(&words, "%sline %zu", opener, warning->line);
        opener = ", ";
    }
    if (warning->sheet != 0) {
        text_format(&words, "%ssection %zu", opener, section_of_sheet(warning->sheet));
        opener = ", ";
    }
    text_format(&words, "%s", opener[0] == ',' ? ")" : "");
    page_hanging(out, SECTION_INDENT, row ? row->name : PAGE_DASH, SECTION_INDENT + 6, words.bytes);
}

void listing_warnings(const struct result *result, struct text *out)
{
    page_section(out, section_of_warnings(result), "Warnings");
    for (size_t i = 0; i < result->warnings.count; i++) {
        draw_warning(&result->warnings.items[i], out);
    }
    if (result->warnings.count == 0) {
        page_paragraph(out, SECTION_INDENT, "none");
    }
}

void listing_cautions(const struct result *result, struct text *out)
{
    page_section(out, section_of_cautions(result), "Cautions");
    for (size_t i = 0; i < result->cautions.count; i++) {
        page_paragraph(out, SECTION_INDENT, result->cautions.items[i]);
    }
    if (result->cautions.count == 0) {
        page_paragraph(out, SECTION_INDENT, "none");
    }
}
