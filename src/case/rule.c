/* Rules: conditions that every permitted charge meets, with the clause they stand for. */
#include "case/case_internal.h"

struct rule_target {
    struct case_rule rule;
    struct predicate_list predicates;
    bool has_gauge_zero;
    double gauge_zero;
};

static void read_title(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    into->rule.title = read_text(e, statement, "a title in quotes");
}

static void read_clause(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    into->rule.clause = read_text(e, statement, "a clause in quotes");
}

static void read_edition(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    into->rule.edition = read_text(e, statement, "an edition in quotes");
}

static void read_ref(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    struct reading reading = read_items(e, statement);
    if (take_reference(&reading, &into->rule.source) && into->rule.source == NULL) {
        report_missing(&reading, "the key of a source");
    }
    finish_items(&reading);
}

static void read_class(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *row = take_choice(&reading, BLOCK_CLASS, "a class");
    if (row == NULL || !finish_items(&reading)) {
        return;
    }
    into->rule.meant_for = row->id == WORD_CLASS_COMPRESSED                ? CLASS_COMPRESSED
                           : row->id == WORD_CLASS_HIGH_PRESSURE_LIQUEFIED ? CLASS_HIGH_PRESSURE_LIQUEFIED
                                                                           : CLASS_LOW_PRESSURE_LIQUEFIED;
}

static void read_round(struct elaboration *e, const struct statement *statement, void *target)
{
    static const struct quantity_form form = {
        .measure = MEASURE_NUMBER, .reading = READ_NUMBER, .least = 1e-6, .most = 0.5};
    struct rule_target *into = target;
    struct reading reading = read_items(e, statement);
    struct quantity round = {.given = false};
    if (take_quantity(&reading, &form, "round", &round) && finish_items(&reading)) {
        into->rule.round_to = round.value;
    }
}

static void read_rule_gauge_zero(struct elaboration *e, const struct statement *statement, void *target)
{
    struct rule_target *into = target;
    struct reading reading = read_items(e, statement);
    const struct item *item = take_item(&reading, ITEM_EXPRESSION);
    if (item == NULL) {
        report_missing(&reading, "an absolute pressure");
        return;
    }
    if (read_air_pressure(e, item->value, "gauge-zero", &into->gauge_zero) && finish_items(&reading)) {
        into->has_gauge_zero = true;
        const struct origin origin = origin_of(e, item->at);
        add_input(e, "gauge-zero", si_text(e, &FORM_PRESSURE, into->gauge_zero), &origin);
    }
}

static void add_predicate(struct elaboration *e, const struct statement *statement, bool is_bare, void *target)
{
    struct rule_target *into = target;
    struct predicate predicate;
    if (!read_predicate(e, statement, is_bare, "condition", &predicate)) {
        return;
    }
    if (!predicate.has_temperature && predicate_needs_temperature(&predicate)) {
        report_no_temperature(e, &predicate);
        return;
    }
    struct predicate_list *list = &into->predicates;
    *ARENA_APPEND(e->arena, list) = predicate;
}

static void read_condition(struct elaboration *e, const struct statement *statement, void *target)
{
    add_predicate(e, statement, false, target);
}

static void read_bare_condition(struct elaboration *e, const struct statement *statement, void *target)
{
    add_predicate(e, statement, true, target);
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_RULE_TITLE, read_title),
    READ_ONCE(WORD_RULE_CLAUSE, read_clause),
    READ_ONCE(WORD_RULE_EDITION, read_edition),
    READ_ONCE(WORD_RULE_REF, read_ref),
    READ_ONCE(WORD_RULE_CLASS, read_class),
    READ_ONCE(WORD_RULE_ROUND, read_round),
    READ_ONCE(WORD_RULE_GAUGE_ZERO, read_rule_gauge_zero),
    READ_EACH(WORD_RULE_AT, read_condition),
    READ_EACH(WORD_RULE_FROM, read_condition),
    READ_EACH(WORD_RULE_NO, read_condition),
    READ_EACH(WORD_RULE_ONE, read_condition),
};
static const struct block_form RULE = {BLOCK_RULE, ROWS, sizeof ROWS / sizeof *ROWS, BLOCK_QUANTITY,
                                       read_bare_condition};

/* The rule's gauge zero holds for each of its conditions that states none itself. */
static void apply_gauge_zero(struct rule_target *target)
{
    for (size_t i = 0; i < target->predicates.count && target->has_gauge_zero; i++) {
        struct predicate *predicate = &target->predicates.items[i];
        if (!predicate->states_gauge_zero && predicate->bound_is_gauge) {
            predicate->gauge_zero = target->gauge_zero;
            predicate->states_gauge_zero = true;
        }
    }
}

const struct case_rule *build_rule(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const struct statement *block = named->items[0];
    const size_t before = trouble_so_far(e);
    struct rule_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->rule = (struct case_rule){.name = named->name, .round_to = 0.01, .origin = origin_of(e, named->at)};
    if (require_block(e, block)) {
        read_block(e, &RULE, arena_format(e->arena, "rule %s", named->name), block, target);
    }
    if (trouble_so_far(e) == before && target->predicates.count == 0) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E214, named->at, "rule '%s' has no condition", shortened(e, named->name));
        diagnostic_hint(e->out, said, "as in: at 65 degC pressure <= test-pressure");
    }
    apply_gauge_zero(target);
    target->rule.predicate_count = target->predicates.count;
    target->rule.predicates = target->predicates.items;
    mark_file_used(e, block->at);
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? &target->rule : NULL;
    return named->built;
}

const struct case_rule *rule_of_name(struct elaboration *e, const struct expression *name)
{
    struct named *named = named_of_item(e, NAMES_RULE, name, "rule");
    return named == NULL ? NULL : build_rule(e, named);
}
