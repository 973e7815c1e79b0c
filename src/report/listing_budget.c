/* uncertainty: what stands behind a number, under a table, and the budgets */
#include "report/listing_internal.h"
#include "report/number.h"
#include "report/page.h"

#include <inttypes.h>
#include <math.h>
#include <string.h>

#define BENT_MARK    "~"
#define UNKNOWN_MARK "?"

const char *spread_words(struct arena *arena, const struct look *look, const struct carried *carried)
{
    switch (carried->kind) {
    case CARRIED_NONE:
        return NULL;
    case CARRIED:
        return arena_format(arena, "\u00b1%s", number_spread(arena, look, carried->expanded));
    case CARRIED_NOT_LINEAR:
        return arena_format(arena, "\u00b1%s%s", number_spread(arena, look, carried->expanded), BENT_MARK);
    case CARRIED_UNKNOWN:
        break;
    }
    return "\u00b1" UNKNOWN_MARK;
}

/* ---- under a table ----------------------------------------------------------------------------------------------- */

struct column_spread {
    size_t known, bent, unknown; /* cells */
    double least, most;
};

static struct column_spread spread_of_column(const struct table *table, size_t c)
{
    struct column_spread spread = {.least = (double)INFINITY};
    for (size_t r = 0; r < table->row_count; r++) {
        const struct carried *carried = &table->cells[r * table->column_count + c].carried;
        spread.unknown += carried->kind == CARRIED_UNKNOWN;
        spread.bent += carried->kind == CARRIED_NOT_LINEAR;
        if (carried->kind == CARRIED || carried->kind == CARRIED_NOT_LINEAR) {
            spread.known++;
            spread.least = fmin(spread.least, carried->expanded);
            spread.most = fmax(spread.most, carried->expanded);
        }
    }
    return spread;
}

static void add_column(const struct column *column, const struct column_spread *spread, struct text *words)
{
    const struct look steps = look_of_steps(column->look);
    text_format(words, "%s%s", words->length == 0 ? "\u00b1 " : "; ", column->name);
    if (spread->known > 0) {
        const char *least = number_spread(words->arena, &steps, spread->least);
        const char *most = number_spread(words->arena, &steps, spread->most);
        text_format(words, " %s", least);
        if (strcmp(least, most) != 0) {
            text_format(words, " to %s", most);
        }
        if (strcmp(number_unit(&steps), "1") != 0) {
            text_format(words, " %s", number_unit(&steps));
        }
    }
    if (spread->bent > 0) {
        text_format(words, " (%s in %s)", BENT_MARK, counted(words->arena, spread->bent, "row"));
    }
    if (spread->unknown > 0) {
        text_format(words, " (%s in %s)", UNKNOWN_MARK, counted(words->arena, spread->unknown, "row"));
    }
}

void listing_table_spreads(const struct table *table, struct text *out)
{
    struct text words = {.arena = out->arena};
    for (size_t c = 0; c < table->column_count; c++) {
        const struct column_spread spread = spread_of_column(table, c);
        if (spread.known + spread.unknown > 0) {
            add_column(&table->columns[c], &spread, &words);
        }
    }
    if (words.length > 0) {
        page_hanging(out, PART_INDENT, "", PART_INDENT + 4, words.bytes);
    }
}

/* ---- budgets ----------------------------------------------------------------------------------------------------- */

enum budget_column {
    BUDGET_INPUT,
    BUDGET_LINE,
    BUDGET_VALUE,
    BUDGET_STANDARD,
    BUDGET_SENSITIVITY,
    BUDGET_CONTRIBUTION,
    BUDGET_SHARE,
    BUDGET_COLUMNS
};

/* Significant digits: enough to follow the sums with a calculator, and all that a deck is likely to write. */
enum { BUDGET_DIGITS = 4, VALUE_DIGITS = 9 };

static const char *with_digits(struct arena *arena, double number, int digits, const char *unit)
{
    const bool is_plain = strcmp(unit, "1") == 0;
    return is_plain ? arena_format(arena, "%.*g", digits, number)
                    : arena_format(arena, "%.*g %s", digits, number, unit);
}

static const char *with_unit(struct arena *arena, double number, const char *unit)
{
    return with_digits(arena, number, BUDGET_DIGITS, unit);
}

/* Result over input, "bar/K"; a unit that is itself a quotient stands in parentheses. */
static const char *unit_of_sensitivity(struct arena *arena, const struct look *result, const struct look *input)
{
    const char *above = number_unit(result), *below = number_unit(input);
    if (strcmp(below, "1") == 0) {
        return above;
    }
    const bool is_quotient = strchr(below, '/') != NULL;
    return arena_format(arena, is_quotient ? "%s/(%s)" : "%s/%s", above, below);
}

static void set_number(struct grid_cell *cell, const char *text)
{
    *cell = (struct grid_cell){.text = text, .is_number = true};
}

static void add_budget_line(struct grid *grid, const struct budget *budget, const struct budget_line *line)
{
    struct arena *arena = grid->arena;
    struct grid_row *row = grid_add_row(grid);
    const double in_shown = line->step_look.shown.factor / budget->step_look.shown.factor;
    row->cells[BUDGET_INPUT].text = page_clean(arena, line->input);
    row->cells[BUDGET_LINE].text = line->line == 0 ? NULL : arena_format(arena, "%zu", line->line);
    set_number(&row->cells[BUDGET_VALUE],
               with_digits(arena, look_shown(&line->look, line->value), VALUE_DIGITS, number_unit(&line->look)));
    set_number(&row->cells[BUDGET_STANDARD],
               with_unit(arena, line->standard / line->step_look.shown.factor, number_unit(&line->step_look)));
    set_number(&row->cells[BUDGET_SENSITIVITY],
               with_unit(arena, line->sensitivity * in_shown,
                         unit_of_sensitivity(arena, &budget->step_look, &line->step_look)));
    set_number(&row->cells[BUDGET_CONTRIBUTION],
               with_unit(arena, line->contribution / budget->step_look.shown.factor, number_unit(&budget->step_look)));
    set_number(&row->cells[BUDGET_SHARE], arena_format(arena, "%.1f %%", 100.0 * line->share));
    row->below = line->is_one_sided ? "varied to one side only: the other is impossible or has no answer" : NULL;
}

static void draw_lines(const struct budget *budget, struct text *out)
{
    static const char *const HEADS[BUDGET_COLUMNS] = {"input",       "line",         "value", "u",
                                                      "sensitivity", "contribution", "share"};
    struct grid *grid = grid_create(out->arena, BUDGET_COLUMNS);
    for (size_t c = 0; c < BUDGET_COLUMNS; c++) {
        grid->columns[c].name = HEADS[c];
        grid->columns[c].align = c <= BUDGET_LINE ? GRID_WORDS : GRID_NUMBERS;
    }
    for (size_t i = 0; i < budget->line_count; i++) {
        add_budget_line(grid, budget, &budget->lines[i]);
    }
    grid_draw(grid, PART_INDENT, out);
}

static const char *in_unit(struct arena *arena, const struct look *look, double si)
{
    return with_unit(arena, si / look->shown.factor, number_unit(look));
}

static void draw_combined(const struct budget *budget, struct text *out)
{
    struct text words = {.arena = out->arena};
    const struct look *look = &budget->step_look;
    text_format(&words, "u = sqrt(sum of contributions^2) = %s, U = 2 u = %s",
                in_unit(out->arena, look, budget->standard), in_unit(out->arena, look, 2.0 * budget->standard));
    if (!budget->is_linear) {
        text_format(&words, "; not nearly linear %s: off the straight line by %s", BENT_MARK,
                    in_unit(out->arena, look, budget->deviation));
    }
    page_paragraph(out, PART_INDENT, words.bytes);
}

/* Of results whose look has no fixed decimals; of others one more than usual. */
enum { DRAWN_DIGITS = 6 };

static const char *agreement_words(enum agreement agreement)
{
    switch (agreement) {
    case AGREES:
        return "first order agrees within";
    case AGREES_NOT:
        return "FIRST ORDER DOES NOT AGREE within";
    case AGREEMENT_BLURRED:
        break;
    }
    return "too few draws to tell whether first order agrees within";
}

static void draw_draws(const struct budget *budget, struct text *out)
{
    const struct drawn_budget *drawn = &budget->drawn;
    struct arena *arena = out->arena;
    const struct look *look = &budget->step_look;
    if (drawn->answered < 2) {
        page_paragraph(out, PART_INDENT, "random draws: none had an answer");
        return;
    }
    struct look shown = budget->look;
    shown.decimals = shown.decimals < 0 ? -DRAWN_DIGITS : shown.decimals + 1;
    page_paragraph(out, PART_INDENT,
                   arena_format(arena,
                                "%zu random draws (JCGM 101, seed %" PRIu64
                                "), %zu with an answer: mean %s, u %s, 95 %% from %s to %s "
                                "%s; by first order from %s to %s %s; %s %s",
                                drawn->draws, drawn->seed, drawn->answered, number_shown(arena, &shown, drawn->mean),
                                in_unit(arena, look, drawn->standard), number_shown(arena, &shown, drawn->low),
                                number_shown(arena, &shown, drawn->high), number_unit(&shown),
                                number_shown(arena, &shown, drawn->first_low),
                                number_shown(arena, &shown, drawn->first_high), number_unit(&shown),
                                agreement_words(drawn->agreement), in_unit(arena, look, drawn->tolerance)));
    if (drawn->has_part_met) {
        page_paragraph(out, PART_INDENT, arena_format(arena, "met in %.2f %% of the draws", 100.0 * drawn->part_met));
    }
}

void listing_budget(const struct budget *budget, struct text *out)
{
    struct text title = {.arena = out->arena};
    text_format(&title, "uncertainty budget: %s", budget->result);
    if (budget->method) {
        text_format(&title, " (%s)", budget->method);
    }
    text_format(&title, ", %s",
                number_cell(out->arena, &budget->look, number_shown(out->arena, &budget->look, budget->value)).text);
    page_paragraph(out, SECTION_INDENT, title.bytes);
    draw_lines(budget, out);
    draw_combined(budget, out);
    if (budget->drawn.given) {
        draw_draws(budget, out);
    }
}
