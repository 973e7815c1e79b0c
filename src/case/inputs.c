/* Values as the listing and the messages show them: as written, and in base units; and the echo of all inputs. */
#include "case/case_internal.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* A reader of deck text that skips comments, gives one blank for any run of blanks and '?' for control bytes. */
struct glance {
    const char *at, *end;
    bool in_text;
};

static bool is_blank(char byte)
{
    return byte == ' ' || byte == '\t' || byte == '\n' || byte == '\r';
}

static void skip_blanks(struct glance *glance)
{
    while (glance->at < glance->end && (is_blank(*glance->at) || *glance->at == '#')) {
        if (*glance->at == '#') {
            while (glance->at < glance->end && *glance->at != '\n') {
                glance->at++;
            }
        } else {
            glance->at++;
        }
    }
}

/* The next byte to show; false at the end. */
static bool next_byte(struct glance *glance, char *byte)
{
    if (!glance->in_text && glance->at < glance->end && (is_blank(*glance->at) || *glance->at == '#')) {
        skip_blanks(glance);
        *byte = ' ';
        return glance->at < glance->end;
    }
    if (glance->at >= glance->end) {
        return false;
    }
    const char found = *glance->at++;
    if (found == '"') {
        glance->in_text = !glance->in_text;
    }
    *byte = (unsigned char)found < 0x20U || found == 0x7F ? '?' : found;
    return true;
}

/* Cuts at `length` or before, never inside a character of UTF-8. */
static size_t whole_characters(const char *bytes, size_t length)
{
    while (length > 0 && ((unsigned char)bytes[length] & 0xC0U) == 0x80U) {
        length--;
    }
    return length;
}

const char *written_at(struct elaboration *e, struct location at, size_t most)
{
    if (at.file == NULL) {
        return "";
    }
    struct glance glance = {.at = at.file->text + at.begin, .end = at.file->text + at.end};
    char *shown = arena_alloc(e->arena, most + 4, 1);
    size_t length = 0;
    char byte;
    while (length <= most && next_byte(&glance, &byte)) {
        shown[length++] = byte;
    }
    if (length > most) {
        length = whole_characters(shown, most);
        memcpy(shown + length, "...", 3);
        length += 3;
    }
    shown[length] = '\0';
    return shown;
}

const char *shortened(struct elaboration *e, const char *text)
{
    const size_t length = strlen(text);
    if (length <= QUOTED_MOST) {
        return text;
    }
    const size_t kept = whole_characters(text, QUOTED_MOST);
    return arena_format(e->arena, "%.*s...", (int)kept, text);
}

/* The fewest significant digits that give the value back to 1e-12 relative: rounding of unit factors stays hidden. */
static int digits_needed(double value)
{
    char shown[40];
    for (int digits = 1; digits < 15; digits++) {
        snprintf(shown, sizeof shown, "%.*e", digits - 1, value);
        if (fabs(strtod(shown, NULL) - value) <= 1e-12 * fabs(value)) {
            return digits;
        }
    }
    return 15;
}

/* Blanks between groups of three in the whole part, from five digits on. */
static const char *group_digits(struct arena *arena, const char *plain)
{
    const size_t sign = *plain == '-';
    const size_t whole = strcspn(plain, ".") - sign;
    if (whole < 5) {
        return arena_format(arena, "%s", plain);
    }
    struct text grouped = {.arena = arena};
    text_add(&grouped, plain, sign);
    for (size_t i = 0; i < whole; i++) {
        if (i != 0 && (whole - i) % 3 == 0) {
            text_add(&grouped, " ", 1);
        }
        text_add(&grouped, plain + sign + i, 1);
    }
    text_format(&grouped, "%s", plain + sign + whole);
    return grouped.bytes;
}

const char *si_number(struct arena *arena, double value)
{
    const double size = fabs(value);
    if (!(size > 0.0)) {
        return "0";
    }
    const int digits = digits_needed(value);
    if (!(size >= 1e-4 && size < 1e15)) {
        return arena_format(arena, "%.*g", digits, value);
    }
    const int exponent = (int)floor(log10(size));
    const int decimals = digits - 1 > exponent ? digits - 1 - exponent : 0;
    char plain[64];
    snprintf(plain, sizeof plain, "%.*f", decimals, value);
    return group_digits(arena, plain);
}

static void add_power(struct text *text, const char *unit, int power)
{
    if (power > 1) {
        text_format(text, "%s%s%d", text->length == 0 ? "" : ".", unit, power);
    } else if (power == 1) {
        text_format(text, "%s%s", text->length == 0 ? "" : ".", unit);
    }
}

const char *base_unit(struct dimension dimension, struct arena *arena)
{
    if (dimension_equal(dimension, DIMENSION_PRESSURE)) {
        return "Pa";
    }
    if (dimension_equal(dimension, DIMENSION_MOLAR_HEAT)) {
        return "J/mol/K";
    }
    const char *const units[] = {"kg", "m", "s", "K", "mol", "A"};
    const int powers[] = {dimension.kg, dimension.m, dimension.s, dimension.K, dimension.mol, dimension.A};
    const size_t count = sizeof units / sizeof *units;
    struct text text = {.arena = arena};
    for (size_t i = 0; i < count; i++) {
        add_power(&text, units[i], powers[i]);
    }
    for (size_t i = 0; i < count; i++) {
        if (powers[i] < 0) {
            text_format(&text, "%s%s", text.length == 0 ? "1/" : "/", units[i]);
            if (powers[i] < -1) {
                text_format(&text, "%d", -powers[i]);
            }
        }
    }
    return text.length == 0 ? "" : text.bytes;
}

static const char *with_unit(struct elaboration *e, double si, enum value_sort sort, struct dimension dimension)
{
    const char *number = si_number(e->arena, sort == SORT_GAUGE ? si + STANDARD_ATMOSPHERE : si);
    if (sort == SORT_GAUGE || sort == SORT_ABSOLUTE) {
        return arena_format(e->arena, "%s Pa abs", number);
    }
    const char *unit = base_unit(dimension, e->arena);
    return *unit == '\0' ? number : arena_format(e->arena, "%s %s", number, unit);
}

const char *si_text(struct elaboration *e, const struct quantity_form *form, double si)
{
    const enum value_sort sort = form->reading == READ_RATING     ? SORT_GAUGE
                                 : form->reading == READ_ABSOLUTE ? SORT_ABSOLUTE
                                                                  : SORT_PLAIN;
    return with_unit(e, si, sort, measure_dimension(form->measure));
}

const char *si_value_text(struct elaboration *e, const struct value *value)
{
    return with_unit(e, value->si, value->sort, value->dimension);
}

bool is_input(const struct origin *origin)
{
    return origin->kind == ORIGIN_DECK && origin->at.file != NULL;
}

void add_input(struct elaboration *e, const char *name, const char *si, const struct origin *origin)
{
    if (!is_input(origin)) {
        return;
    }
    *ARENA_APPEND(e->arena, &e->inputs) =
        (struct case_input){.group = e->group, .name = name, .si = si, .origin = *origin};
}

/* Files in the order they were opened, places in the order they were written. */
static int compare_inputs(const void *left, const void *right)
{
    const struct case_input *a = left;
    const struct case_input *b = right;
    if (a->origin.at.file != b->origin.at.file) {
        return a->origin.at.file->order < b->origin.at.file->order ? -1 : 1;
    }
    if (a->origin.at.begin != b->origin.at.begin) {
        return a->origin.at.begin < b->origin.at.begin ? -1 : 1;
    }
    if (a->origin.at.end != b->origin.at.end) {
        return a->origin.at.end < b->origin.at.end ? -1 : 1;
    }
    return strcmp(a->name, b->name);
}

void finish_inputs(struct elaboration *e)
{
    if (e->inputs.count != 0) {
        qsort(e->inputs.items, e->inputs.count, sizeof *e->inputs.items, compare_inputs);
    }
    e->tree->inputs = e->inputs.items;
    e->tree->input_count = e->inputs.count;
}
