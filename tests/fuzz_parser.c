/* Fuzz target: a text is parsed, drawn messages or not, printed, and parsed again to the same tree; all its values are
 * evaluated.
 */
#include "deck/deck.h"
#include "deck/expression.h"
#include "deck/parse.h"
#include "support/tree.c" /* fuzz targets are linked with the library alone */

#include <assert.h>
#include <stdint.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void evaluate_expressions(const struct statement *statements, struct diagnostics *diagnostics)
{
    for (; statements; statements = statements->next) {
        for (const struct item *item = statements->items; item; item = item->next) {
            struct value value;
            if (item->value && expression_value(item->value, NULL, diagnostics, &value)) {
                assert(value.si - value.si == 0.0); /* finite */
                assert(*dimension_name(value.dimension, diagnostics->arena) != '\0');
            }
        }
        evaluate_expressions(statements->block, diagnostics);
    }
}

static const struct statement *parse(const char *text, size_t length, struct diagnostics *diagnostics)
{
    struct arena *arena = diagnostics->arena;
    const struct statement *statements = NULL;
    const struct source_file *file = source_create(arena, "input.deck", "input.deck", text, length);
    const bool is_right = deck_parse_file(file, arena, diagnostics, &statements);
    assert(is_right == (diagnostics->errors == 0));
    assert(diagnostics->count <= DIAGNOSTICS_MOST);
    for (size_t i = 0; i < diagnostics->count; i++) {
        assert(diagnostics->items[i].at.end <= length);
    }
    return statements;
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct arena *arena = arena_create(NULL);
    struct diagnostics first = {.arena = arena};
    const struct statement *statements = parse((const char *)data, size, &first);
    struct text printed = {.arena = arena};
    text_add(&printed, "", 0);
    deck_print(statements, &printed);

    /* What was kept of a wrong text is as good as a right one. */
    struct diagnostics second = {.arena = arena};
    const struct statement *again = parse(printed.bytes, printed.length, &second);
    assert(second.errors == 0);
    assert(tree_equal(statements, again));

    evaluate_expressions(again, &second);
    struct text drawn = {.arena = arena};
    diagnostics_draw(&first, &drawn);
    diagnostics_draw(&second, &drawn);
    arena_free(arena);
    return 0;
}
