#include "deck/syntax_build.h"

#include "deck/diagnostic.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

enum { LONGEST_MESSAGE = 400 };

struct parse_message *parse_complain(struct parse_context *context, enum code code, struct location at,
                                     const char *format, ...)
{
    if (++context->message_count > DIAGNOSTICS_MOST) {
        context->is_stopped |= context->message_count >= ERRORS_READ_MOST;
        return NULL;
    }
    char text[LONGEST_MESSAGE];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(text, sizeof text, format, arguments);
    va_end(arguments);
    const size_t length = strlen(text);
    struct parse_message *message = arena_try(context->arena, 1, sizeof *message);
    char *copy = arena_try(context->arena, length + 1, 1);
    if (!message || !copy) {
        context->is_out_of_memory = true;
        return NULL;
    }
    memcpy(copy, text, length);
    *message = (struct parse_message){.code = code, .at = at, .text = copy};
    if (context->last_message) {
        context->last_message->next = message;
    } else {
        context->first_message = message;
    }
    context->last_message = message;
    return message;
}

void parse_hint(struct parse_message *to, const char *hint)
{
    if (to) {
        to->hint = hint;
    }
}

void parse_note(struct parse_message *to, struct location at, const char *note)
{
    if (to) {
        to->note = note;
        to->note_at = at;
    }
}

static struct expression *make(struct parse_context *context, enum expression_kind kind, struct location at)
{
    struct expression *made = arena_try(context->arena, 1, sizeof *made);
    if (made) {
        made->kind = kind;
        made->at = at;
    }
    return made;
}

struct expression *expression_number(struct parse_context *context, struct location at, double number)
{
    struct expression *made = make(context, EXPRESSION_NUMBER, at);
    if (made) {
        made->number = number;
    }
    return made;
}

struct expression *expression_of_name(struct parse_context *context, struct location at, const char *name)
{
    struct expression *made = make(context, EXPRESSION_NAME, at);
    if (made) {
        made->name = name;
    }
    return made;
}

/* The depth of an operation over both, or 0 after a message when that is too much. */
static unsigned depth_over(struct parse_context *context, struct location at, unsigned left, unsigned right)
{
    const unsigned depth = 1 + (left > right ? left : right);
    if (depth <= EXPRESSION_MOST) {
        return depth;
    }
    if (!context->is_stopped) {
        struct parse_message *message = parse_complain(
            context, CODE_E108, at, "an expression of more than %d operations inside one another", EXPRESSION_MOST);
        parse_hint(message, "give parts of it names with 'let'");
    }
    context->is_stopped = true;
    return 0;
}

struct expression *expression_operation(struct parse_context *context, enum expression_kind kind, struct location at,
                                        struct expression *left, struct expression *right)
{
    const unsigned depth = depth_over(context, at, left->depth, right ? right->depth : 0);
    if (depth == 0) {
        return left;
    }
    struct expression *made = make(context, kind, at);
    if (made) {
        made->left = left;
        made->right = right;
        made->depth = depth;
    }
    return made;
}

struct tuple_list tuple_start(struct expression *left, struct expression *right, struct parse_context *context,
                              struct location at)
{
    struct expression *pair = expression_operation(context, EXPRESSION_TUPLE, at, left, right);
    return (struct tuple_list){pair, pair, 2};
}

struct tuple_list tuple_add(struct tuple_list list, struct expression *value, struct parse_context *context,
                            struct location at)
{
    const unsigned depth = depth_over(context, at, list.first->depth, value->depth);
    if (depth == 0 || list.last->kind != EXPRESSION_TUPLE) {
        return list;
    }
    struct expression *pair = make(context, EXPRESSION_TUPLE, location_span(list.last->right->at, value->at));
    if (!pair) {
        return (struct tuple_list){NULL, NULL, 0};
    }
    pair->left = list.last->right;
    pair->right = value;
    pair->depth = 1 + (pair->left->depth > value->depth ? pair->left->depth : value->depth);
    list.last->right = pair;
    list.first->depth = depth;
    return (struct tuple_list){list.first, pair, list.count + 1};
}

struct item *item_of(struct parse_context *context, enum item_kind kind, struct location at,
                     const struct expression *value)
{
    struct item *made = arena_try(context->arena, 1, sizeof *made);
    if (made) {
        made->kind = kind;
        made->at = at;
        made->value = value;
    }
    return made;
}

struct item *item_of_text(struct parse_context *context, struct location at, const char *text)
{
    struct item *made = item_of(context, ITEM_TEXT, at, NULL);
    if (made) {
        made->text = text;
    }
    return made;
}

struct item *item_of_relation(struct parse_context *context, struct location at, enum relation relation,
                              const struct expression *value)
{
    struct item *made = item_of(context, ITEM_RELATION, at, value);
    if (made) {
        made->relation = relation;
    }
    return made;
}

struct statement_head statement_start(struct parse_context *context, struct location at, const char *word)
{
    struct statement *made = arena_try(context->arena, 1, sizeof *made);
    if (made) {
        made->at = at;
        made->word_at = at;
        made->word = word;
    }
    return (struct statement_head){made, NULL};
}

struct statement_head statement_add_item(struct statement_head head, struct item *item, bool after_comma)
{
    item->after_comma = after_comma;
    if (head.last) {
        head.last->next = item;
    } else {
        head.statement->items = item;
    }
    head.statement->at = location_span(head.statement->at, item->at);
    return (struct statement_head){head.statement, item};
}

struct statement_list statement_list_add(struct statement_list list, struct statement *statement)
{
    if (!statement) {
        return list;
    }
    if (list.last) {
        list.last->next = statement;
    } else {
        list.first = statement;
    }
    list.last = statement;
    return list;
}

struct statement *statement_with_block(struct statement *statement, struct location at, struct statement_list block)
{
    statement->has_block = true;
    statement->block_at = at;
    statement->block = block.first;
    return statement;
}
