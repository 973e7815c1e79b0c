/* Where a drawing of a draw-down sheet ends beside its limits: at a moment, or at a fraction of what is drawn. */
#include "case/case_internal.h"

#include <string.h>

/* `stop-at first-solid` */
void read_stop_at(struct elaboration *e, const struct statement *statement, struct case_sheet *sheet)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row = take_choice(&reading, BLOCK_STOP, "'first-liquid' or 'first-solid'");
    if (row != NULL && finish_items(&reading)) {
        sheet->drawing.stops_at_liquid = row->id == WORD_STOP_FIRST_LIQUID;
        sheet->drawing.stops_at_solid = row->id == WORD_STOP_FIRST_SOLID;
    }
}

/* `stop-when propane <= 40 %` */
void read_stop_when(struct elaboration *e, const struct statement *statement, struct case_sheet *sheet)
{
    struct reading reading = read_items(e, statement);
    const struct expression *name = take_name(&reading);
    const struct item *relation = name == NULL ? NULL : take_item(&reading, ITEM_RELATION);
    if (relation == NULL) {
        report_missing(&reading, name == NULL ? "the name of a component" : "'<=' or '>=' and a fraction");
        return;
    }
    struct quantity *limit = &sheet->drawing.limit;
    if (read_value(e, &FORM_FRACTION, "stop-when", relation->value, &limit->value) && finish_items(&reading)) {
        limit->given = true;
        limit->origin = origin_of(e, name->at);
        sheet->drawing.limited = name->name;
        sheet->drawing.is_limit_from_above =
            relation->relation == RELATION_AT_MOST || relation->relation == RELATION_LESS;
        add_input(e, arena_format(e->arena, "stop-when %s", shortened(e, name->name)),
                  si_number(e->arena, limit->value), &limit->origin);
    }
}

/* The component whose fraction ends a drawing is one of the fluid's. */
bool check_limited(struct elaboration *e, const struct case_sheet *sheet)
{
    const char *name = sheet->drawing.limited;
    for (size_t i = 0; name != NULL && i < sheet->fluid->count; i++) {
        if (strcmp(sheet->fluid->components[i]->name, name) == 0) {
            return true;
        }
    }
    if (name != NULL) {
        diagnose(e->out, CODE_E205, sheet->drawing.limit.origin.at, "'%s' is no component of '%s'", shortened(e, name),
                 shortened(e, sheet->fluid->name));
    }
    return name == NULL;
}
