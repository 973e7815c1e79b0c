#include "report/listing_internal.h"

#include "report/number.h"
#include "report/page.h"
#include "report/report.h"

#include <string.h>

size_t section_of_sheet(size_t sheet)
{
    return SECTION_FIRST_SHEET + sheet - 1;
}

size_t section_of_requirements(const struct result *result)
{
    return SECTION_FIRST_SHEET + result->sheet_count;
}

size_t section_of_warnings(const struct result *result)
{
    return section_of_requirements(result) + 1;
}

size_t section_of_cautions(const struct result *result)
{
    return section_of_requirements(result) + 2;
}

const char *counted(struct arena *arena, size_t count, const char *noun)
{
    if (count == 0) {
        return arena_format(arena, "no %ss", noun);
    }
    return arena_format(arena, "%zu %s%s", count, noun, count == 1 ? "" : "s");
}

struct grid_cell number_cell(struct arena *arena, const struct look *look, const char *shown)
{
    if (strcmp(shown, PAGE_DASH) == 0) {
        return (struct grid_cell){.text = shown};
    }
    const char *unit = number_unit(look);
    const bool is_plain = strcmp(unit, "1") == 0;
    return (struct grid_cell){.text = is_plain ? shown : arena_format(arena, "%s %s", shown, unit), .is_number = true};
}

void report_listing(const struct result *result, struct text *out)
{
    listing_head(result, out);
    listing_deck(result, out);
    listing_inputs(result, out);
    listing_data(result, out);
    listing_methods(result, out);
    size_t section = SECTION_FIRST_SHEET;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        listing_sheet(result, sheet, section++, out);
    }
    listing_requirements(result, out);
    listing_warnings(result, out);
    listing_cautions(result, out);
}

void report_data(const struct result *result, struct text *out)
{
    listing_values(result, out);
}
