/* What a permitted charge has to meet: the rules' predicates, the entry's limits, the vessel's ratings. */
#include "filling/permissible_internal.h"

#include "filling/classify.h"
#include "filling/requirement.h"

#include <math.h>

/* Ratios limited by a rating are rounded as the rules do by default. */
#define DEFAULT_ROUNDING 0.01

static struct criterion *add_criterion(struct permissible *sheet, enum criterion_kind kind, const char *name,
                                       const struct predicate *predicate, double round_to)
{
    sheet->criteria = arena_grow(sheet->run->arena, sheet->criteria, &sheet->criterion_capacity,
                                 sheet->criterion_count + 1, sizeof *sheet->criteria);
    struct criterion *criterion = &sheet->criteria[sheet->criterion_count++];
    *criterion = (struct criterion){.kind = kind, .name = name, .predicate = predicate, .round_to = round_to};
    return criterion;
}

/* A liquefied gas is filled by its filling ratio, which is rounded down; a compressed gas to a settled pressure, where
 * rounding the ratio (helium's is 0.03) would take away a third of the charge. The rules say which it is; where none
 * does, the gas's critical temperature. */
static bool fills_by_ratio(const struct case_sheet *sheet)
{
    bool has_compressed = false;
    for (size_t i = 0; i < sheet->rule_count; i++) {
        const enum filling_class of = sheet->rules[i]->meant_for;
        if (class_is_liquefied(of)) {
            return true;
        }
        has_compressed = has_compressed || of == CLASS_COMPRESSED;
    }
    return !has_compressed && classify_fluid(sheet->fluid) != CLASS_COMPRESSED;
}

static bool has_listed_criterion(const struct case_rule *rule)
{
    for (size_t i = 0; i < rule->predicate_count; i++) {
        if (rule->predicates[i].unless_listed) {
            return true;
        }
    }
    return false;
}

static void add_rules(struct permissible *sheet)
{
    const struct case_sheet *asked = sheet->run->sheet;
    for (size_t i = 0; i < asked->rule_count; i++) {
        const struct case_rule *rule = asked->rules[i];
        for (size_t j = 0; j < rule->predicate_count; j++) {
            struct criterion *criterion = add_criterion(sheet, CRITERION_RULE, rule->name, &rule->predicates[j],
                                                        sheet->is_by_ratio ? rule->round_to : 0.0);
            criterion->meant_for = rule->meant_for;
            criterion->is_of_listed_rule = has_listed_criterion(rule);
        }
    }
}

/* Limits of a group's entry hold for a gas filled under that entry. */
static void add_entry_limits(struct permissible *sheet)
{
    const struct case_sheet *asked = sheet->run->sheet;
    for (size_t i = 0; i < asked->entry_count; i++) {
        const struct case_entry *entry = asked->entries[i];
        for (size_t j = 0; j < entry->limit_count; j++) {
            add_criterion(sheet, CRITERION_ENTRY, entry->name, &entry->limits[j],
                          sheet->is_by_ratio ? DEFAULT_ROUNDING : 0.0);
        }
    }
}

static void add_ratings(struct permissible *sheet)
{
    size_t count;
    const struct predicate *ratings = rating_predicates(sheet->run, &count);
    for (size_t i = 0; i < count; i++) {
        add_criterion(sheet, CRITERION_RATING, "vessel", &ratings[i], sheet->is_by_ratio ? DEFAULT_ROUNDING : 0.0);
    }
}

double hottest_ruled(const struct permissible *sheet)
{
    double hottest = sheet->criteria[0].predicate->to;
    for (size_t i = 1; i < sheet->criterion_count; i++) {
        hottest = fmax(hottest, sheet->criteria[i].predicate->to);
    }
    return hottest;
}

void collect_criteria(struct permissible *sheet)
{
    sheet->is_by_ratio = fills_by_ratio(sheet->run->sheet);
    add_rules(sheet);
    add_entry_limits(sheet);
    add_ratings(sheet);
    apply_listed_row(sheet);
    if (sheet->listed.predicate != NULL) {
        add_criterion(sheet, CRITERION_LISTED, sheet->listed.entry->name, sheet->listed.predicate, 0.0)->is_shown_only =
            sheet->run->sheet->listed == LISTED_COMPARE && !sheet->listed.entry->is_never_exceeded;
    }
}
