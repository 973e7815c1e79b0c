#include "run/help.h"

#include "base/codes.h"
#include "deck/diagnostic.h"
#include "deck/units.h"
#include "deck/vocabulary.h"
#include "fluid/fluid.h"
#include "report/grid.h"
#include "report/page.h"

#include <string.h>

enum { TEXT_COLUMN = 12, INDENT = 2 };

static bool is_code(const struct code_row *row, const char *topic)
{
    const char letter = topic[0] == 'e' ? 'E' : topic[0] == 'w' ? 'W' : topic[0];
    return letter == row->severity && strcmp(topic + 1, row->name + 1) == 0;
}

static bool explain_code(const char *topic, struct text *out)
{
    size_t count;
    const struct code_row *rows = code_rows(&count);
    for (size_t i = 0; i < count; i++) {
        if (is_code(&rows[i], topic)) {
            text_format(out, "%s, %s\n", rows[i].name, rows[i].severity == 'E' ? "an error" : "a warning");
            page_hanging(out, INDENT, "means", TEXT_COLUMN, rows[i].meaning);
            page_hanging(out, INDENT, "advice", TEXT_COLUMN, rows[i].advice);
            return true;
        }
    }
    return false;
}

static void begin_entry(struct text *out)
{
    if (out->length != 0) {
        page_blank(out);
    }
}

static bool explain_words(const char *topic, struct text *out)
{
    bool is_known = false;
    for (const struct vocabulary_row *row = vocabulary_next(topic, NULL); row; row = vocabulary_next(topic, row)) {
        begin_entry(out);
        page_hanging(out, 0, row->word, strlen(row->word) + 2, vocabulary_block_title(row->block));
        if (*row->follows != '\0') {
            page_hanging(out, INDENT, "then", TEXT_COLUMN, row->follows);
        }
        page_hanging(out, INDENT, "means", TEXT_COLUMN, row->meaning);
        page_hanging(out, INDENT, "example", TEXT_COLUMN, row->example);
        is_known = true;
    }
    return is_known;
}

static const char *abilities(const struct fluid_ops *method)
{
    if (method->capabilities & CAN_MIXTURE) {
        return method->capabilities & CAN_LIQUID ? "pure gases and mixtures, vapour and liquid"
                                                 : "pure gases and mixtures, no liquid";
    }
    return method->capabilities & CAN_LIQUID ? "pure gases, vapour and liquid" : "pure gases, no liquid";
}

static bool explain_method(const char *topic, struct text *out)
{
    const struct fluid_ops *method = fluid_method(topic);
    if (!method) {
        return false;
    }
    begin_entry(out);
    page_hanging(out, 0, method->name, strlen(method->name) + 2, "a property method");
    page_hanging(out, INDENT, "title", TEXT_COLUMN, method->title);
    page_hanging(out, INDENT, "answers", TEXT_COLUMN, abilities(method));
    return true;
}

static bool explain_unit(const char *topic, struct text *out)
{
    size_t count;
    const struct unit *rows = unit_rows(&count);
    for (size_t i = 0; i < count; i++) {
        if (strcmp(rows[i].shown.symbol, topic) == 0) {
            begin_entry(out);
            page_hanging(out, 0, topic, strlen(topic) + 2,
                         arena_format(out->arena, "a unit of %s", dimension_name(rows[i].dimension, out->arena)));
            page_hanging(out, INDENT, "is", TEXT_COLUMN, unit_definition(&rows[i]));
            return true;
        }
    }
    return false;
}

static void list_words(struct text *out)
{
    const struct vocabulary_row *rows = vocabulary_rows();
    struct grid *grid = grid_create(out->arena, 2);
    for (size_t i = 0; i < WORDS; i++) {
        struct grid_row *row = grid_add_row(grid);
        if (i == 0 || rows[i].block != rows[i - 1].block) {
            row->group = vocabulary_block_title(rows[i].block);
        }
        row->cells[0].text = rows[i].word;
        row->cells[1].text = rows[i].meaning;
    }
    grid_draw(grid, 0, out);
}

static void list_units(struct text *out)
{
    size_t count;
    const struct unit *rows = unit_rows(&count);
    struct grid *grid = grid_create(out->arena, 3);
    for (size_t i = 0; i < count; i++) {
        struct grid_row *row = grid_add_row(grid);
        row->cells[0].text = rows[i].shown.symbol;
        row->cells[1].text = dimension_name(rows[i].dimension, out->arena);
        row->cells[2].text = unit_definition(&rows[i]);
    }
    grid_draw(grid, 0, out);
    page_paragraph(out, 0, "Units are joined by '.' and '/', each perhaps with a power: kg/m3, J/mol/K, s-2.");
}

static void list_methods(struct text *out)
{
    struct grid *grid = grid_create(out->arena, 3);
    for (const struct fluid_ops *const *method = fluid_methods(); *method; method++) {
        struct grid_row *row = grid_add_row(grid);
        row->cells[0].text = (*method)->name;
        row->cells[1].text = (*method)->title;
        row->cells[2].text = abilities(*method);
    }
    grid_draw(grid, 0, out);
}

static void list_codes(struct text *out)
{
    size_t count;
    const struct code_row *rows = code_rows(&count);
    struct grid *grid = grid_create(out->arena, 2);
    for (size_t i = 0; i < count; i++) {
        struct grid_row *row = grid_add_row(grid);
        row->cells[0].text = rows[i].name;
        row->cells[1].text = rows[i].meaning;
    }
    grid_draw(grid, 0, out);
}

static const struct {
    const char *name;
    void (*draw)(struct text *out);
} lists[] = {{"words", list_words}, {"units", list_units}, {"methods", list_methods}, {"codes", list_codes}};

/* The lists are longer than the single entries, so a list goes behind the word that shares its name. */
static bool draw_list(const char *topic, struct text *out)
{
    for (size_t i = 0; i < sizeof lists / sizeof *lists; i++) {
        if (strcmp(topic, lists[i].name) == 0) {
            begin_entry(out);
            lists[i].draw(out);
            return true;
        }
    }
    return false;
}

static const char *nearest_topic(const char *topic, struct arena *arena)
{
    const struct vocabulary_row *rows = vocabulary_rows();
    const size_t list_count = sizeof lists / sizeof *lists;
    const char **known = arena_alloc(arena, WORDS + list_count, sizeof *known);
    for (size_t i = 0; i < WORDS; i++) {
        known[i] = rows[i].word;
    }
    for (size_t i = 0; i < list_count; i++) {
        known[WORDS + i] = lists[i].name;
    }
    return nearest_word(topic, known, WORDS + list_count);
}

bool help_topic(const char *topic, struct text *out, const char **nearest)
{
    bool is_known = explain_code(topic, out);
    is_known = explain_words(topic, out) || is_known;
    is_known = explain_method(topic, out) || is_known;
    is_known = explain_unit(topic, out) || is_known;
    is_known = draw_list(topic, out) || is_known;
    *nearest = is_known ? NULL : nearest_topic(topic, out->arena);
    return is_known;
}
