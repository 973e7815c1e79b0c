/* The numbers of an answered sheet, and the same numbers of the sheet answered with other inputs. */
#include "filling/uncertainty_internal.h"

#include <math.h>
#include <string.h>

/* ---- collecting -------------------------------------------------------------------------------------------------- */

static bool is_same_word(const char *one, const char *other)
{
    return one == other || (one != NULL && other != NULL && strcmp(one, other) == 0);
}

/* How many facts of that name stand before `end`; NULL: in all. Facts in words count: what is a number here may be told
 * in words there. */
static size_t facts_before(const struct result_sheet *sheet, const char *name, const struct fact *end)
{
    size_t before = 0;
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        for (size_t i = 0; i < part->facts.count; i++) {
            if (&part->facts.items[i] == end) {
                return before;
            }
            before += strcmp(part->facts.items[i].name, name) == 0;
        }
    }
    return before;
}

static void collect_facts(const struct result_sheet *sheet, struct sheet_part *part, struct outlet_list *list,
                          struct arena *arena)
{
    for (size_t i = 0; i < part->facts.count; i++) {
        struct fact *fact = &part->facts.items[i];
        if (fact->text == NULL) {
            *ARENA_APPEND(arena, list) =
                (struct outlet){.kind = OUTLET_FACT, .place = facts_before(sheet, fact->name, fact), .fact = fact};
        }
    }
}

static void collect_cells(struct table *table, struct outlet_list *list, struct arena *arena)
{
    for (size_t i = 0; i < table->row_count * table->column_count && !table->has_own_uncertainty; i++) {
        if (table->cells[i].kind == CELL_NUMBER) {
            *ARENA_APPEND(arena, list) = (struct outlet){.kind = OUTLET_CELL,
                                                         .place = i,
                                                         .table = table,
                                                         .table_place = list->table_count,
                                                         .cell = &table->cells[i]};
        }
    }
    list->table_count++;
}

struct outlet_list collect_outlets(struct result_sheet *sheet, struct arena *arena)
{
    struct outlet_list list = {.count = 0};
    for (struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        collect_facts(sheet, part, &list, arena);
        if (part->table != NULL) {
            collect_cells(part->table, &list, arena);
        }
    }
    size_t place = 0;
    for (struct requirement *one = sheet->first_requirement; one != NULL; one = one->next, place++) {
        if (one->has_margin) {
            *ARENA_APPEND(arena, &list) = (struct outlet){.kind = OUTLET_MARGIN, .place = place, .requirement = one};
        }
        *ARENA_APPEND(arena, &list) = (struct outlet){.kind = OUTLET_STATE, .place = place, .requirement = one};
    }
    return list;
}

/* ---- finding them again ------------------------------------------------------------------------------------------ */

/* The fact of that name and place; where another method stands there, the first of the same method, if there is one. */
static const struct fact *find_fact(const struct result_sheet *sheet, const struct outlet *outlet)
{
    const struct fact *by_place = NULL, *by_method = NULL;
    size_t place = 0;
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        for (size_t i = 0; i < part->facts.count; i++) {
            const struct fact *fact = &part->facts.items[i];
            if (strcmp(fact->name, outlet->fact->name) == 0) {
                const bool has_method = is_same_word(fact->method, outlet->fact->method);
                by_method = by_method == NULL && has_method ? fact : by_method;
                by_place = place++ == outlet->place ? fact : by_place;
            }
        }
    }
    const bool keeps_method = by_place != NULL && is_same_word(by_place->method, outlet->fact->method);
    return keeps_method || by_method == NULL ? by_place : by_method;
}

static bool is_alike(const struct table *one, const struct table *other)
{
    if (one->column_count != other->column_count || one->row_count != other->row_count ||
        !is_same_word(one->method, other->method)) {
        return false;
    }
    for (size_t c = 0; c < one->column_count; c++) {
        if (!is_same_word(one->columns[c].name, other->columns[c].name)) {
            return false;
        }
    }
    return true;
}

/* The table at that place, or the first alike behind it; NULL where there is none. */
static const struct table *find_table(const struct result_sheet *sheet, const struct outlet *outlet)
{
    size_t place = 0;
    for (const struct sheet_part *part = sheet->first_part; part != NULL; part = part->next) {
        if (part->table != NULL && place++ >= outlet->table_place && is_alike(part->table, outlet->table)) {
            return part->table;
        }
    }
    return NULL;
}

static const struct requirement *find_requirement(const struct result_sheet *sheet, size_t place)
{
    const struct requirement *one = sheet->first_requirement;
    for (; one != NULL && place > 0; place--) {
        one = one->next;
    }
    return one;
}

static double number_of_cell(const struct table *table, size_t place)
{
    const struct cell *cell = table == NULL ? NULL : &table->cells[place];
    return cell != NULL && cell->kind == CELL_NUMBER ? cell->number : (double)NAN;
}

static double number_of_fact(const struct fact *fact)
{
    return fact == NULL || fact->text != NULL ? (double)NAN : fact->value;
}

static double number_of_requirement(const struct requirement *one, enum outlet_kind kind)
{
    if (one == NULL || (kind == OUTLET_MARGIN && !one->has_margin)) {
        return (double)NAN;
    }
    return kind == OUTLET_MARGIN ? one->margin : (double)one->state;
}

void read_outlets(const struct outlet_list *list, const struct result_sheet *sheet, double values[])
{
    const struct table *of = NULL, *found = NULL;
    for (size_t k = 0; k < list->count; k++) {
        const struct outlet *outlet = &list->items[k];
        switch (outlet->kind) {
        case OUTLET_FACT:
            values[k] = number_of_fact(find_fact(sheet, outlet));
            break;
        case OUTLET_CELL:
            if (of != outlet->table) {
                of = outlet->table;
                found = find_table(sheet, outlet);
            }
            values[k] = number_of_cell(found, outlet->place);
            break;
        case OUTLET_MARGIN:
        case OUTLET_STATE:
            values[k] = number_of_requirement(find_requirement(sheet, outlet->place), outlet->kind);
            break;
        }
    }
}

/* ---- what they are ----------------------------------------------------------------------------------------------- */

double outlet_value(const struct outlet *outlet)
{
    switch (outlet->kind) {
    case OUTLET_FACT:
        return outlet->fact->value;
    case OUTLET_CELL:
        return outlet->cell->number;
    case OUTLET_MARGIN:
        return outlet->requirement->margin;
    case OUTLET_STATE:
        break;
    }
    return (double)outlet->requirement->state;
}

struct look outlet_look(const struct outlet *outlet)
{
    switch (outlet->kind) {
    case OUTLET_FACT:
        return outlet->fact->look;
    case OUTLET_CELL:
        return outlet->table->columns[outlet->place % outlet->table->column_count].look;
    case OUTLET_MARGIN:
        return outlet->requirement->look;
    case OUTLET_STATE:
        break;
    }
    return look_ratio(0);
}
