#include "support/tree.h"

#include <string.h>

static void add_expression(const struct expression *expression, struct text *out)
{
    static const char *const signs[EXPRESSION_KINDS] = {
        [EXPRESSION_ADD] = " + ",    [EXPRESSION_SUBTRACT] = " - ", [EXPRESSION_MULTIPLY] = " * ",
        [EXPRESSION_DIVIDE] = " / ", [EXPRESSION_TUPLE] = ", ",
    };
    if (expression->kind == EXPRESSION_NUMBER) {
        const bool has_unit = expression->unit != NULL;
        text_format(out, "%.17g%s%s", expression->number, has_unit ? "_" : "", has_unit ? expression->unit : "");
    } else if (expression->kind == EXPRESSION_NAME) {
        text_format(out, "%s", expression->name);
    } else {
        text_format(out, "(%s", expression->kind == EXPRESSION_NEGATE ? "-" : "");
        add_expression(expression->left, out);
        if (expression->right) {
            text_format(out, "%s", signs[expression->kind]);
            add_expression(expression->right, out);
        }
        text_format(out, ")");
    }
}

static void add_item(const struct item *item, struct text *out)
{
    static const char *const kinds[ITEM_KINDS] = {
        [ITEM_FROM] = "from ", [ITEM_TO] = "to ",    [ITEM_BY] = "by ",          [ITEM_IN] = "in ",
        [ITEM_AT] = "at ",     [ITEM_REF] = "ref ",  [ITEM_PLUS_MINUS] = "+/- ", [ITEM_NO] = "no ",
        [ITEM_ONE] = "one ",   [ITEM_REST] = "rest", [ITEM_FOR] = "for ",
    };
    static const char *const relations[] = {"< ", "<= ", "= ", ">= ", "> "};
    text_format(out, "[%s%s", item->after_comma ? "," : "", kinds[item->kind] ? kinds[item->kind] : "");
    if (item->kind == ITEM_RELATION) {
        text_format(out, "%s", relations[item->relation]);
    }
    if (item->kind == ITEM_TEXT) {
        text_format(out, "'%s'", item->text);
    }
    if (item->value) {
        add_expression(item->value, out);
    }
    text_format(out, "]");
}

void tree_add(const struct statement *statements, struct text *out)
{
    for (const struct statement *statement = statements; statement; statement = statement->next) {
        text_format(out, "%s%s", statement == statements ? "" : " ", statement->word);
        for (const struct item *item = statement->items; item; item = item->next) {
            add_item(item, out);
        }
        if (statement->has_block) {
            text_format(out, "{");
            tree_add(statement->block, out);
            text_format(out, "}");
        }
    }
}

static bool is_same_text(const char *a, const char *b)
{
    return a && b ? strcmp(a, b) == 0 : a == b;
}

/* Exact: a printed number is meant to read back to the last bit. */
static bool is_same_number(double a, double b)
{
    return memcmp(&a, &b, sizeof a) == 0;
}

static bool is_same_expression(const struct expression *a, const struct expression *b)
{
    if (!a || !b) {
        return a == b;
    }
    return a->kind == b->kind && is_same_number(a->number, b->number) && is_same_text(a->unit, b->unit) &&
           is_same_text(a->name, b->name) && is_same_expression(a->left, b->left) &&
           is_same_expression(a->right, b->right);
}

static bool is_same_item(const struct item *a, const struct item *b)
{
    return a->kind == b->kind && a->after_comma == b->after_comma && a->relation == b->relation &&
           is_same_text(a->text, b->text) && is_same_expression(a->value, b->value);
}

static bool has_same_items(const struct item *a, const struct item *b)
{
    for (; a && b; a = a->next, b = b->next) {
        if (!is_same_item(a, b)) {
            return false;
        }
    }
    return !a && !b;
}

bool tree_equal(const struct statement *a, const struct statement *b)
{
    for (; a && b; a = a->next, b = b->next) {
        const bool is_same = strcmp(a->word, b->word) == 0 && has_same_items(a->items, b->items) &&
                             a->has_block == b->has_block && tree_equal(a->block, b->block);
        if (!is_same) {
            return false;
        }
    }
    return !a && !b;
}
