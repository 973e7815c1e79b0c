/* Formulas: the bound of a requirement, arithmetic over numbers and what a filled vessel gives a value to.
 *
 * A part without symbols is evaluated at once by the deck's own arithmetic, so that its checks of units and gauges hold
 * here too; only what mentions a symbol stays a tree.
 */
#include "case/case_internal.h"

#include <math.h>
#include <string.h>

static const struct {
    enum case_symbol symbol;
    const char *name;
    enum vocabulary_word quantity; /* as what is compared; WORDS: never */
    enum vocabulary_word bound;    /* as what it is compared with; WORDS: never */
} SYMBOL_WORDS[] = {
    {SYMBOL_PRESSURE, "pressure", WORD_QUANTITY_PRESSURE, WORDS},
    {SYMBOL_VAPOUR_PRESSURE, "vapour-pressure", WORD_QUANTITY_VAPOUR_PRESSURE, WORDS},
    {SYMBOL_DENSITY, "density", WORD_QUANTITY_DENSITY, WORD_SYMBOL_DENSITY},
    {SYMBOL_LIQUID_DENSITY, "liquid-density", WORD_QUANTITY_LIQUID_DENSITY, WORD_SYMBOL_LIQUID_DENSITY},
    {SYMBOL_LIQUID_VOLUME, "liquid-volume", WORD_QUANTITY_LIQUID_VOLUME, WORDS},
    {SYMBOL_FILLING_RATIO, "filling-ratio", WORD_QUANTITY_FILLING_RATIO, WORDS},
    {SYMBOL_TEST_PRESSURE, "test-pressure", WORDS, WORD_SYMBOL_TEST_PRESSURE},
    {SYMBOL_WORKING_PRESSURE, "working-pressure", WORDS, WORD_SYMBOL_WORKING_PRESSURE},
    {SYMBOL_SERVICE_PRESSURE, "service-pressure", WORDS, WORD_SYMBOL_SERVICE_PRESSURE},
};
static_assert(sizeof SYMBOL_WORDS / sizeof *SYMBOL_WORDS == SYMBOLS, "each symbol has its row");

const char *case_symbol_name(enum case_symbol symbol)
{
    for (size_t i = 0; i < SYMBOLS; i++) {
        if (SYMBOL_WORDS[i].symbol == symbol) {
            return SYMBOL_WORDS[i].name;
        }
    }
    return "";
}

bool quantity_of_word(enum vocabulary_word word, enum case_symbol *symbol)
{
    for (size_t i = 0; i < SYMBOLS; i++) {
        if (SYMBOL_WORDS[i].quantity == word) {
            *symbol = SYMBOL_WORDS[i].symbol;
            return true;
        }
    }
    return false;
}

bool symbol_of_word(enum vocabulary_word word, enum case_symbol *symbol)
{
    for (size_t i = 0; i < SYMBOLS; i++) {
        if (SYMBOL_WORDS[i].bound == word) {
            *symbol = SYMBOL_WORDS[i].symbol;
            return true;
        }
    }
    return false;
}

bool symbol_is_pressure(enum case_symbol symbol)
{
    return symbol == SYMBOL_PRESSURE || symbol == SYMBOL_VAPOUR_PRESSURE || symbol == SYMBOL_TEST_PRESSURE ||
           symbol == SYMBOL_WORKING_PRESSURE || symbol == SYMBOL_SERVICE_PRESSURE;
}

double formula_value(const struct formula *formula, double (*value_of_symbol)(void *context, enum case_symbol symbol),
                     void *context)
{
    if (formula->kind == FORMULA_NUMBER) {
        return formula->number;
    }
    if (formula->kind == FORMULA_SYMBOL) {
        return value_of_symbol(context, formula->symbol);
    }
    const double left = formula_value(formula->left, value_of_symbol, context);
    if (formula->kind == FORMULA_NEGATE) {
        return -left;
    }
    const double right = formula_value(formula->right, value_of_symbol, context);
    switch (formula->kind) {
    case FORMULA_ADD:
        return left + right;
    case FORMULA_SUBTRACT:
        return left - right;
    case FORMULA_MULTIPLY:
        return left * right;
    case FORMULA_DIVIDE:
        return fabs(right) > 0.0 ? left / right : (double)NAN;
    case FORMULA_NUMBER:
    case FORMULA_SYMBOL:
    case FORMULA_NEGATE:
        break;
    }
    return (double)NAN;
}

bool formula_mentions(const struct formula *formula, enum case_symbol symbol)
{
    if (formula == NULL) {
        return false;
    }
    if (formula->kind == FORMULA_SYMBOL) {
        return formula->symbol == symbol;
    }
    return formula_mentions(formula->left, symbol) || formula_mentions(formula->right, symbol);
}

/* A longer bound is no bound anyone would write; the limit keeps the recursions shallow. */
enum { DEPTH_MOST = 60 };

/* How deep an expression is, counted no further than `most`. */
static int depth_of(const struct expression *expression, int most)
{
    if (expression == NULL || most == 0) {
        return 0;
    }
    const int left = depth_of(expression->left, most - 1);
    const int right = depth_of(expression->right, most - 1);
    return 1 + (left > right ? left : right);
}

static bool names_symbol(const struct expression *expression)
{
    if (expression == NULL) {
        return false;
    }
    if (expression->kind == EXPRESSION_NAME) {
        return vocabulary_find(BLOCK_SYMBOL, expression->name) != NULL;
    }
    return names_symbol(expression->left) || names_symbol(expression->right);
}

static struct dimension dimension_of(enum case_symbol symbol)
{
    if (symbol_is_pressure(symbol)) {
        return DIMENSION_PRESSURE;
    }
    return symbol == SYMBOL_DENSITY || symbol == SYMBOL_LIQUID_DENSITY ? DIMENSION_DENSITY : DIMENSION_NONE;
}

static bool symbol_is_gauge(enum case_symbol symbol)
{
    return symbol == SYMBOL_TEST_PRESSURE || symbol == SYMBOL_WORKING_PRESSURE || symbol == SYMBOL_SERVICE_PRESSURE;
}

struct value value_kind_of(enum case_symbol symbol)
{
    return (struct value){
        .dimension = dimension_of(symbol),
        .sort = symbol_is_gauge(symbol)      ? SORT_GAUGE
                : symbol_is_pressure(symbol) ? SORT_ABSOLUTE
                                             : SORT_PLAIN,
    };
}

static struct formula *new_formula(struct elaboration *e, enum formula_kind kind)
{
    struct formula *formula = arena_alloc(e->arena, 1, sizeof *formula);
    formula->kind = kind;
    return formula;
}

/* The lets, and for a misspelled word also what the vessel gives a value to. */
static struct name_scope scope_of_bounds(struct elaboration *e)
{
    if (e->bound_scope.known == NULL) {
        const char **known = arena_alloc(e->arena, e->scope.known_count + VOCABULARY_MOST, sizeof *known);
        size_t count = vocabulary_words(BLOCK_SYMBOL, known, VOCABULARY_MOST);
        for (size_t i = 0; i < e->scope.known_count; i++) {
            known[count++] = e->scope.known[i];
        }
        e->bound_scope = e->scope;
        e->bound_scope.known = known;
        e->bound_scope.known_count = count;
    }
    return e->bound_scope;
}

static const struct formula *number_formula(struct elaboration *e, const struct expression *expression,
                                            struct value *kind)
{
    const struct name_scope lets = e->scope;
    e->scope = scope_of_bounds(e);
    const bool has_value = value_of(e, expression, kind);
    e->scope = lets;
    if (!has_value) {
        return NULL;
    }
    struct formula *formula = new_formula(e, FORMULA_NUMBER);
    formula->number = kind->si;
    return formula;
}

/* A rule's word means the vessel's quantity. Where the deck itself gives that word another value, say so instead of
 * choosing in silence. */
static const struct formula *symbol_formula(struct elaboration *e, const struct expression *name, struct value *kind)
{
    const struct vocabulary_row *row = vocabulary_find(BLOCK_SYMBOL, name->name);
    const struct named *let = names_find(&e->tables[NAMES_LET], name->name);
    if (let != NULL && !name->at.file->is_library) {
        struct diagnostic *said = diagnose(
            e->out, CODE_E217, name->at, "'%s' could be the vessel's or the value the deck gives that name", row->word);
        diagnostic_hint(e->out, said, "give the value another name");
        said->note = "the value";
        said->note_at = let->at;
        return NULL;
    }
    struct formula *formula = new_formula(e, FORMULA_SYMBOL);
    symbol_of_word(row->id, &formula->symbol);
    *kind = value_kind_of(formula->symbol);
    return formula;
}

static const struct formula *report_mix(struct elaboration *e, const struct expression *expression, const char *why)
{
    diagnose(e->out, CODE_E218, expression->at, "'%s': %s", written_at(e, expression->at, QUOTED_MOST), why);
    return NULL;
}

/* A sum or difference: equal dimensions; gauge and absolute do not mix, two gauges only subtract. NULL: fits. */
static const char *misfit_of_sum(bool is_sum, const struct value *left, const struct value *right, struct value *kind)
{
    if (!dimension_equal(left->dimension, right->dimension)) {
        return "the two sides have different dimensions";
    }
    const bool has_points = left->sort != SORT_PLAIN && right->sort != SORT_PLAIN;
    if (has_points && left->sort != right->sort) {
        return "a gauge and an absolute pressure do not mix";
    }
    if (has_points && is_sum) {
        return "two pressures with a zero of their own cannot be added";
    }
    *kind = (struct value){.dimension = left->dimension};
    kind->sort = has_points ? SORT_PLAIN : left->sort != SORT_PLAIN ? left->sort : right->sort;
    return !is_sum && right->sort != SORT_PLAIN && !has_points ? "a difference less a gauge or absolute pressure"
                                                               : NULL;
}

static struct dimension product(struct dimension left, struct dimension right, int power)
{
    return (struct dimension){
        .kg = (signed char)(left.kg + power * right.kg),
        .m = (signed char)(left.m + power * right.m),
        .s = (signed char)(left.s + power * right.s),
        .K = (signed char)(left.K + power * right.K),
        .mol = (signed char)(left.mol + power * right.mol),
        .A = (signed char)(left.A + power * right.A),
    };
}

/* A product keeps the scale of a gauge that a plain number multiplies; any other product has no scale. */
static void kind_of_product(enum expression_kind kind, const struct value *left, const struct value *right,
                            struct value *out)
{
    const bool is_product = kind == EXPRESSION_MULTIPLY;
    *out = (struct value){.dimension = product(left->dimension, right->dimension, is_product ? 1 : -1)};
    if (dimension_equal(right->dimension, DIMENSION_NONE)) {
        out->sort = left->sort;
    } else if (is_product && dimension_equal(left->dimension, DIMENSION_NONE)) {
        out->sort = right->sort;
    }
}

static const struct formula *build(struct elaboration *e, const struct expression *expression, struct value *kind);

static const struct formula *build_pair(struct elaboration *e, const struct expression *expression,
                                        enum formula_kind formula_kind, struct value *kind)
{
    struct value left_kind;
    struct value right_kind;
    const struct formula *left = build(e, expression->left, &left_kind);
    const struct formula *right = left == NULL ? NULL : build(e, expression->right, &right_kind);
    if (right == NULL) {
        return NULL;
    }
    const bool is_sum = expression->kind == EXPRESSION_ADD;
    if (is_sum || expression->kind == EXPRESSION_SUBTRACT) {
        const char *misfit = misfit_of_sum(is_sum, &left_kind, &right_kind, kind);
        if (misfit != NULL) {
            return report_mix(e, expression, misfit);
        }
    } else {
        kind_of_product(expression->kind, &left_kind, &right_kind, kind);
    }
    struct formula *formula = new_formula(e, formula_kind);
    formula->left = left;
    formula->right = right;
    return formula;
}

static const struct formula *build(struct elaboration *e, const struct expression *expression, struct value *kind)
{
    if (!names_symbol(expression)) {
        return number_formula(e, expression, kind);
    }
    struct formula *negated;
    switch (expression->kind) {
    case EXPRESSION_NAME:
        return symbol_formula(e, expression, kind);
    case EXPRESSION_NEGATE:
        negated = new_formula(e, FORMULA_NEGATE);
        negated->left = build(e, expression->left, kind);
        return negated->left == NULL ? NULL : negated;
    case EXPRESSION_ADD:
        return build_pair(e, expression, FORMULA_ADD, kind);
    case EXPRESSION_SUBTRACT:
        return build_pair(e, expression, FORMULA_SUBTRACT, kind);
    case EXPRESSION_MULTIPLY:
        return build_pair(e, expression, FORMULA_MULTIPLY, kind);
    case EXPRESSION_DIVIDE:
        return build_pair(e, expression, FORMULA_DIVIDE, kind);
    case EXPRESSION_TUPLE:
        return report_mix(e, expression, "one value is needed here, not several");
    case EXPRESSION_NUMBER:
    case EXPRESSION_KINDS:
        break;
    }
    return NULL;
}

bool read_formula(struct elaboration *e, const struct expression *expression, const struct formula **formula,
                  struct value *kind)
{
    if (depth_of(expression, DEPTH_MOST + 1) > DEPTH_MOST) {
        report_mix(e, expression, "this is too long for a bound");
        return false;
    }
    *formula = build(e, expression, kind);
    return *formula != NULL;
}
