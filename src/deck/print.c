/* Writing the tree back as a deck. The one care to take is that what is written is scanned as it was meant: signs keep
 * their blanks, and a number without unit never stands before a name that is one. */
#include "deck/deck.h"

#include "deck/units.h"

#include <assert.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static_assert(EXPRESSION_KINDS == 8 && ITEM_KINDS == 14, "a new kind of node needs printing");

/* The fewest digits that read back as the same number. */
static void print_number(double number, struct text *out)
{
    char digits[32];
    for (int precision = 15; precision <= 17; precision++) {
        snprintf(digits, sizeof digits, "%.*g", precision, number);
        if (strtod(digits, NULL) == number) { /* exact by intent */
            break;
        }
    }
    text_format(out, "%s", digits);
}

static void print_text(const char *text, struct text *out)
{
    text_add(out, "\"", 1);
    for (const char *at = text; *at; at++) {
        if (*at == '"' || *at == '\\') {
            text_add(out, "\\", 1);
        }
        text_add(out, at, 1);
    }
    text_add(out, "\"", 1);
}

/* How tightly a kind binds; an operand that binds less than its place needs parentheses. */
static int binding(enum expression_kind kind)
{
    switch (kind) {
    case EXPRESSION_ADD:
    case EXPRESSION_SUBTRACT:
        return 1;
    case EXPRESSION_MULTIPLY:
    case EXPRESSION_DIVIDE:
        return 2;
    case EXPRESSION_NEGATE:
        return 3;
    case EXPRESSION_NUMBER:
    case EXPRESSION_NAME:
    case EXPRESSION_TUPLE:
    case EXPRESSION_KINDS:
        break;
    }
    return 4;
}

static const char *sign(enum expression_kind kind)
{
    switch (kind) {
    case EXPRESSION_ADD:
        return " + ";
    case EXPRESSION_SUBTRACT:
        return " - ";
    case EXPRESSION_MULTIPLY:
        return " * ";
    case EXPRESSION_DIVIDE:
        return " / ";
    case EXPRESSION_NEGATE:
    case EXPRESSION_NUMBER:
    case EXPRESSION_NAME:
    case EXPRESSION_TUPLE:
    case EXPRESSION_KINDS:
        break;
    }
    return "";
}

static void print_expression(const struct expression *expression, struct text *out);

static void print_operand(const struct expression *operand, int least, struct text *out)
{
    const bool is_bare = binding(operand->kind) >= least;
    text_format(out, "%s", is_bare ? "" : "(");
    print_expression(operand, out);
    text_format(out, "%s", is_bare ? "" : ")");
}

/* A minus directly before digits, those of 1-butene too, would become part of a number. */
static void print_negation(const struct expression *of, struct text *out)
{
    const bool is_bare = of->kind == EXPRESSION_NAME && !(of->name[0] >= '0' && of->name[0] <= '9');
    text_add(out, "-", 1);
    print_operand(of, is_bare ? 4 : 5, out);
}

static void print_tuple(const struct expression *tuple, struct text *out)
{
    text_add(out, "(", 1);
    for (; tuple->kind == EXPRESSION_TUPLE; tuple = tuple->right) {
        print_expression(tuple->left, out);
        text_add(out, ", ", 2);
    }
    print_expression(tuple, out);
    text_add(out, ")", 1);
}

static void print_expression(const struct expression *expression, struct text *out)
{
    switch (expression->kind) {
    case EXPRESSION_NUMBER:
        print_number(expression->number, out);
        if (expression->unit) {
            text_format(out, " %s", expression->unit);
        }
        return;
    case EXPRESSION_NAME:
        text_format(out, "%s", expression->name);
        return;
    case EXPRESSION_NEGATE:
        print_negation(expression->left, out);
        return;
    case EXPRESSION_TUPLE:
        print_tuple(expression, out);
        return;
    case EXPRESSION_ADD:
    case EXPRESSION_SUBTRACT:
    case EXPRESSION_MULTIPLY:
    case EXPRESSION_DIVIDE:
        print_operand(expression->left, binding(expression->kind), out);
        text_format(out, "%s", sign(expression->kind));
        print_operand(expression->right, binding(expression->kind) + 1, out);
        return;
    case EXPRESSION_KINDS:
        return;
    }
}

static const char *relation_sign(enum relation relation)
{
    switch (relation) {
    case RELATION_LESS:
        return "< ";
    case RELATION_AT_MOST:
        return "<= ";
    case RELATION_EQUAL:
        return "= ";
    case RELATION_AT_LEAST:
        return ">= ";
    case RELATION_GREATER:
        return "> ";
    }
    return "";
}

static const char *marker(const struct item *item)
{
    switch (item->kind) {
    case ITEM_RELATION:
        return relation_sign(item->relation);
    case ITEM_FROM:
        return "from ";
    case ITEM_TO:
        return "to ";
    case ITEM_BY:
        return "by ";
    case ITEM_IN:
        return "in ";
    case ITEM_AT:
        return "at ";
    case ITEM_REF:
        return "ref ";
    case ITEM_PLUS_MINUS:
        return "+/- ";
    case ITEM_NO:
        return "no ";
    case ITEM_ONE:
        return "one ";
    case ITEM_FOR:
        return "for ";
    case ITEM_REST:
        return "rest";
    case ITEM_EXPRESSION:
    case ITEM_TEXT:
    case ITEM_KINDS:
        break;
    }
    return "";
}

/* The value written last in an expression, and the one written first. */
static const struct expression *last_written(const struct expression *expression)
{
    while (expression->right && expression->kind != EXPRESSION_TUPLE) {
        expression = expression->right;
    }
    return expression;
}

static const struct expression *first_written(const struct expression *expression)
{
    while (expression->left && expression->kind != EXPRESSION_TUPLE && expression->kind != EXPRESSION_NEGATE) {
        expression = expression->left;
    }
    return expression;
}

/* Whether `5` before the item `bar` would be read as 5 bar. */
static bool would_take_unit(const struct expression *value, const struct item *next)
{
    if (!next || next->after_comma || next->kind != ITEM_EXPRESSION) {
        return false;
    }
    const struct expression *last = last_written(value);
    const struct expression *first = first_written(next->value);
    struct unit unit;
    return last->kind == EXPRESSION_NUMBER && !last->unit && first->kind == EXPRESSION_NAME &&
           unit_find(first->name, strlen(first->name), &unit);
}

static void print_item(const struct item *item, struct text *out)
{
    text_format(out, "%s", marker(item));
    if (item->kind == ITEM_TEXT) {
        print_text(item->text, out);
    }
    if (item->value) {
        print_operand(item->value, would_take_unit(item->value, item->next) ? 5 : 0, out);
    }
}

/* A statement that begins with a marker has it as its word and as its first item. */
static bool is_word_an_item(const struct statement *statement)
{
    if (!statement->items) {
        return false;
    }
    const char *first = marker(statement->items);
    const size_t length = strlen(statement->word);
    return statement->items->kind != ITEM_RELATION && strncmp(first, statement->word, length) == 0 &&
           first[length] == ' ';
}

static void print_statements(const struct statement *statement, size_t indent, struct text *out)
{
    for (; statement; statement = statement->next) {
        text_pad(out, indent);
        const bool is_led = is_word_an_item(statement);
        text_format(out, "%s", is_led ? "" : statement->word);
        for (const struct item *item = statement->items; item; item = item->next) {
            const bool is_first = is_led && item == statement->items;
            text_format(out, "%s%s", item->after_comma ? "," : "", is_first ? "" : " ");
            print_item(item, out);
        }
        if (statement->has_block) {
            text_format(out, " {\n");
            print_statements(statement->block, indent + 2, out);
            text_pad(out, indent);
            text_format(out, "}");
        }
        text_format(out, "\n");
    }
}

void deck_print(const struct statement *statements, struct text *out)
{
    print_statements(statements, 0, out);
}
