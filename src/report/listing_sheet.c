#include "report/listing_internal.h"
#include "report/number.h"
#include "report/page.h"

#include <string.h>

enum fact_column { FACT_NAME, FACT_VALUE, FACT_SPREAD, FACT_METHOD, FACT_REMARK, FACT_COLUMNS };

/* A longer remark behind an uncertainty goes below, so that all columns have room on the page. */
enum { LONGEST_BEHIND_SPREAD = 22 };

static void add_fact(struct grid *grid, const struct fact *fact)
{
    struct grid_row *row = grid_add_row(grid);
    row->cells[FACT_NAME].text = page_clean(grid->arena, fact->name);
    struct text remark = {.arena = grid->arena};
    if (fact->source) {
        text_format(&remark, "%s", fact->source);
    }
    if (fact->remark) {
        text_format(&remark, "%s%s", fact->source ? "; " : "", fact->remark);
    }
    if (fact->text) {
        const char *behind = remark.bytes ? remark.bytes : fact->method;
        row->span = behind ? arena_format(grid->arena, "%s   (%s)", fact->text, behind) : fact->text;
        return;
    }
    row->cells[FACT_VALUE] = number_cell(grid->arena, &fact->look, number_shown(grid->arena, &fact->look, fact->value));
    row->cells[FACT_SPREAD].text = spread_words(grid->arena, &fact->look, &fact->carried);
    row->cells[FACT_METHOD].text = fact->method;
    const char *words = remark.bytes ? page_clean(grid->arena, remark.bytes) : NULL;
    const bool is_crowded = words && row->cells[FACT_SPREAD].text && page_columns(words) > LONGEST_BEHIND_SPREAD;
    row->cells[FACT_REMARK].text = is_crowded ? NULL : words;
    row->below = is_crowded ? words : NULL;
}

static void draw_facts(const struct sheet_part *part, struct text *out)
{
    size_t indent = SECTION_INDENT;
    if (part->title) {
        page_paragraph(out, SECTION_INDENT, part->title);
        indent = PART_INDENT;
    }
    struct grid *grid = grid_create(out->arena, FACT_COLUMNS);
    grid->columns[FACT_VALUE].align = GRID_NUMBERS;
    for (size_t i = 0; i < part->facts.count; i++) {
        add_fact(grid, &part->facts.items[i]);
    }
    if (grid->row_count != 0) {
        grid_draw(grid, indent, out);
    }
}

/* The lines keep their blanks, as the author lines up equals signs. */
static void draw_hand_check(const struct hand_check *check, struct text *out)
{
    page_hanging(out, SECTION_INDENT, "hand check:", SECTION_INDENT + 12, check->title ? check->title : "");
    for (size_t i = 0; i < check->lines.count; i++) {
        page_line(out, PART_INDENT + 4, arena_format(out->arena, "%*s%s", PART_INDENT, "", check->lines.items[i]));
    }
}

static void draw_part(const struct sheet_part *part, size_t warnings, struct text *out)
{
    switch (part->kind) {
    case PART_FACTS:
        draw_facts(part, out);
        break;
    case PART_TABLE:
        listing_table(part->table, warnings, out);
        break;
    case PART_HAND_CHECK:
        draw_hand_check(part->hand_check, out);
        break;
    case PART_NOTE:
        page_paragraph(out, SECTION_INDENT, part->note);
        break;
    case PART_BUDGET:
        listing_budget(part->budget, out);
        break;
    }
}

static bool is_empty(const struct sheet_part *part)
{
    return part->kind == PART_FACTS && part->facts.count == 0 && !part->title;
}

static void draw_parts(const struct result_sheet *sheet, size_t warnings, struct text *out)
{
    const struct sheet_part *previous = NULL;
    for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
        if (is_empty(part)) {
            continue;
        }
        /* Notes that follow each other are one paragraph each, without a gap. */
        if (previous && !(previous->kind == PART_NOTE && part->kind == PART_NOTE)) {
            page_blank(out);
        }
        draw_part(part, warnings, out);
        previous = part;
    }
}

/* "permissible-charge" as a heading: "Permissible charge". */
static const char *kind_as_heading(struct arena *arena, const char *kind)
{
    char *heading = arena_copy_text(arena, kind, strlen(kind));
    if (*heading >= 'a' && *heading <= 'z') {
        *heading = (char)(*heading - 'a' + 'A');
    }
    for (char *at = heading; (at = strchr(at, '-'));) {
        *at = ' ';
    }
    return heading;
}

static void add_name(struct text *line, const char *what, const char *name)
{
    if (name) {
        text_format(line, "%s%s %s", line->length == 0 ? "" : "   ", what, name);
    }
}

void listing_sheet(const struct result *result, const struct result_sheet *sheet, size_t section, struct text *out)
{
    const char *heading = kind_as_heading(out->arena, sheet->kind);
    page_section(out, section, sheet->title ? arena_format(out->arena, "%s  \"%s\"", heading, sheet->title) : heading);
    struct text names = {.arena = out->arena};
    add_name(&names, "fluid", sheet->fluid);
    add_name(&names, "vessel", sheet->vessel);
    add_name(&names, "charge", sheet->charge);
    if (names.length != 0) {
        page_paragraph(out, SECTION_INDENT, names.bytes);
        page_blank(out);
    }
    draw_parts(sheet, section_of_warnings(result), out);
}
