/* The sections of a result that tell its making: inputs, data used, sources, methods. */
#include "filling/data_used.h"

#include "filling/method_parameters.h"
#include "filling/mixture_data.h"

#include "base/text.h"

#include <ctype.h>
#include <string.h>

/* ---- inputs ---------------------------------------------------------------------------------------------------- */

static const char *place_words(const struct case_tree *tree, const struct origin *origin, struct arena *arena)
{
    if (origin->kind == ORIGIN_DEFAULT || origin->at.file == NULL) {
        return "default";
    }
    const size_t line = location_line(origin->at);
    if (origin->at.file == tree->deck->root) {
        return arena_format(arena, "line %zu", line);
    }
    return arena_format(arena, "%s, line %zu", origin->at.file->name, line);
}

void tell_inputs(const struct case_tree *tree, struct result *result)
{
    for (size_t i = 0; i < tree->input_count; i++) {
        const struct case_input *input = &tree->inputs[i];
        *ARENA_APPEND(result->arena, &result->inputs) = (struct input_row){
            .group = input->group,
            .name = input->name,
            .written = input->origin.written,
            .si = input->si,
            .from = place_words(tree, &input->origin, result->arena),
        };
    }
}

/* ---- who uses what --------------------------------------------------------------------------------------------- */

static bool contains(const struct case_fluid *fluid, const struct case_component *component)
{
    for (size_t i = 0; i < fluid->count; i++) {
        if (fluid->components[i] == component) {
            return true;
        }
    }
    return false;
}

static bool uses_equation(const char *method, const struct case_component *component)
{
    (void)component;
    return strcmp(method, "reference") == 0;
}

static bool uses_acentric(const char *method, const struct case_component *component)
{
    (void)component;
    return method_takes_acentric(method);
}

/* Groups make the pairs of the one method that was fitted with them. */
static bool uses_groups(const char *method, const struct case_component *component)
{
    (void)component;
    return strcmp(method, "peng-robinson-1978") == 0;
}

/* Whether a method that answers for the component, in a mixture if that is asked for, uses something of it. */
static bool any_method(const struct method_pool *pool, const struct case_component *component, bool in_mixture,
                       bool (*uses)(const char *method, const struct case_component *component))
{
    for (size_t i = 0; i < pool->count; i++) {
        const struct pooled_method *pooled = &pool->items[i];
        if (pooled->run.fluid != NULL && contains(pooled->fluid, component) &&
            (!in_mixture || pooled->fluid->count > 1) && uses(pooled->run.name, component)) {
            return true;
        }
    }
    return false;
}

static bool any_sheet(const struct case_tree *tree, enum sheet_kind kind)
{
    for (size_t i = 0; i < tree->sheet_count; i++) {
        if (tree->sheets[i].kind == kind) {
            return true;
        }
    }
    return false;
}

/* ---- components ------------------------------------------------------------------------------------------------ */

/* Where the rows of one component or entry go. */
struct telling {
    const struct case_tree *tree;
    struct result *result;
    const char *group;
};

static struct data_row *add_row(const struct telling *telling, const char *name, const char *value)
{
    struct data_row *row = ARENA_APPEND(telling->result->arena, &telling->result->data);
    *row = (struct data_row){.group = telling->group, .name = name, .value = value};
    return row;
}

const char *data_source_words(const struct case_tree *tree, const struct origin *origin, struct arena *arena)
{
    if (origin->source != NULL) {
        return origin->source->key;
    }
    switch (origin->kind) {
    case ORIGIN_DECK:
        return arena_format(arena, "given in this deck, %s", place_words(tree, origin, arena));
    case ORIGIN_LIBRARY:
        return place_words(tree, origin, arena);
    case ORIGIN_DEFAULT:
        break;
    }
    return "default";
}

static const char *source_words(const struct telling *telling, const struct origin *origin)
{
    return data_source_words(telling->tree, origin, telling->result->arena);
}

/* "replaces 369.9 K (lemmon-2009)", back to the first value; and the mark of a value entered from memory. */
static const char *remark_words(const struct telling *telling, const struct quantity *quantity, const char *si_unit)
{
    struct text text = {.arena = telling->result->arena};
    if (quantity->origin.source != NULL && quantity->origin.source->is_unverified) {
        text_format(&text, "unverified");
    }
    for (const struct quantity *old = quantity->overridden; old != NULL; old = old->overridden) {
        text_format(&text, "%sreplaces %s (%s)", text.length == 0 ? "" : "; ",
                    quantity_words(old, si_unit, telling->result->arena), source_words(telling, &old->origin));
    }
    return text.bytes;
}

static void warn_unverified(const struct telling *telling, const char *what, const struct case_source *source)
{
    if (source != NULL && source->is_unverified) {
        result_warn(telling->result, CODE_W301, 0, 0,
                    "%s: %s: its source %s is marked unverified, as the citation or the figures were entered from "
                    "memory: compare them with the publication",
                    telling->group, what, source->key);
    }
}

static void tell_quantity(const struct telling *telling, const char *name, const struct quantity *quantity,
                          const char *si_unit, bool is_used)
{
    const bool is_of_interest = is_used || quantity->origin.kind == ORIGIN_DECK || quantity->overridden != NULL;
    if (!quantity->given || !is_of_interest) {
        return;
    }
    const char *value = quantity_words(quantity, si_unit, telling->result->arena);
    struct data_row *row = add_row(telling, name, value);
    row->source = source_words(telling, &quantity->origin);
    row->remark = remark_words(telling, quantity, si_unit);
    if (is_used) {
        warn_unverified(telling, arena_format(telling->result->arena, "%s %s", name, value), quantity->origin.source);
    }
}

static void tell_hazards(const struct telling *telling, unsigned hazards)
{
    static const struct {
        enum hazard hazard;
        const char *word;
    } words[] = {
        {HAZARD_FLAMMABLE, "flammable"},     {HAZARD_OXIDISING, "oxidising"},   {HAZARD_TOXIC, "toxic"},
        {HAZARD_CORROSIVE, "corrosive"},     {HAZARD_PYROPHORIC, "pyrophoric"}, {HAZARD_DECOMPOSES, "decomposes"},
        {HAZARD_POLYMERISES, "polymerises"}, {HAZARD_DISSOLVED, "dissolved"},
    };
    struct text text = {.arena = telling->result->arena};
    for (size_t i = 0; i < sizeof words / sizeof *words; i++) {
        if (hazards & words[i].hazard) {
            text_format(&text, "%s%s", text.length == 0 ? "" : ", ", words[i].word);
        }
    }
    if (text.length != 0) {
        add_row(telling, "hazards", text.bytes);
    }
}

static void tell_identity(const struct telling *telling, const struct case_component *component)
{
    if (component->formula != NULL) {
        add_row(telling, "formula", component->formula);
    }
    if (component->cas != NULL) {
        add_row(telling, "cas", component->cas);
    }
    if (component->un_number != 0) {
        add_row(telling, "un-number", arena_format(telling->result->arena, "%u", component->un_number));
    }
    tell_hazards(telling, component->hazards);
}

static void tell_equation(const struct telling *telling, const struct case_component *component)
{
    const struct reference_spec *equation = component->spec.reference;
    if (equation == NULL) {
        return;
    }
    struct arena *arena = telling->result->arena;
    const char *value =
        arena_format(arena, "%zu terms, %s", equation->residual_count, equation_range_words(equation, arena));
    struct data_row *row = add_row(telling, "reference-equation", value);
    const struct case_source *source = component->equation_source;
    row->source = source == NULL ? "given in this deck" : source->key;
    row->remark = source != NULL && source->is_unverified ? "unverified" : NULL;
    warn_unverified(telling, row->name, source);
}

static bool any_sheet_tells_solids(const struct case_tree *tree, const struct case_component *component)
{
    for (size_t i = 0; i < tree->sheet_count; i++) {
        if (contains(tree->sheets[i].fluid, component) && case_sheet_tells_solid(&tree->sheets[i], component)) {
            return true;
        }
    }
    return false;
}

static bool any_sheet_melts(const struct case_tree *tree, const struct case_component *component)
{
    for (size_t i = 0; i < tree->sheet_count; i++) {
        if (case_sheet_melts(&tree->sheets[i], component) && contains(tree->sheets[i].fluid, component)) {
            return true;
        }
    }
    return false;
}

/* What is known of it as a solid. */
static void tell_solid(const struct telling *telling, const struct case_component *component)
{
    const struct case_solid *solid = component->solid;
    struct arena *arena = telling->result->arena;
    if (solid == NULL) {
        add_row(telling, "solid", "nothing is known of it")->source = "–";
        return;
    }
    struct data_row *row = add_row(telling, "sublimation-line",
                                   arena_format(arena, "%zu terms, %g to %g K", solid->spec.count,
                                                solid->spec.smallest_temperature, solid->spec.largest_temperature));
    row->source = solid->source == NULL ? "given in this deck" : solid->source->key;
    row->remark = solid->source != NULL && solid->source->is_unverified ? "unverified" : NULL;
    warn_unverified(telling, row->name, solid->source);
    if (solid->spec.melting_count > 0 && any_sheet_melts(telling->tree, component)) {
        const struct melting_part *parts = solid->spec.melting, *last = &parts[solid->spec.melting_count - 1];
        struct data_row *line = add_row(telling, "melting-line",
                                        arena_format(arena, "%zu part%s, %g to %g K", solid->spec.melting_count,
                                                     solid->spec.melting_count == 1 ? "" : "s",
                                                     parts[0].smallest_temperature, last->largest_temperature));
        line->source = solid->melting_source == NULL ? "given in this deck" : solid->melting_source->key;
        line->remark = solid->melting_source != NULL && solid->melting_source->is_unverified ? "unverified" : NULL;
        warn_unverified(telling, line->name, solid->melting_source);
    }
    tell_quantity(telling, "solid molar-volume", &solid->molar_volume, "m3/mol", true);
}

static bool is_in_use(const struct method_pool *pool, const struct case_component *component, const char *method)
{
    for (size_t i = 0; i < pool->count; i++) {
        if (pool->items[i].run.fluid != NULL && strcmp(pool->items[i].run.name, method) == 0 &&
            contains(pool->items[i].fluid, component)) {
            return true;
        }
    }
    return false;
}

/* What a cubic method in use knows of the component beyond its constants. */
static void tell_cubic_set(const struct telling *telling, const struct case_cubic_set *set)
{
    struct arena *arena = telling->result->arena;
    const struct {
        const char *name, *unit;
        const struct quantity *quantity;
    } rows[] = {
        {"critical-temperature", "K", &set->critical_temperature},
        {"critical-pressure", "Pa", &set->critical_pressure},
        {"L", "", &set->twu[0]},
        {"M", "", &set->twu[1]},
        {"N", "", &set->twu[2]},
        {"shift", "m3/mol", &set->shift},
        {"covolume A", "K", &set->covolume_A},
        {"covolume B", "K", &set->covolume_B},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        tell_quantity(telling, arena_format(arena, "%s %s", set->method, rows[i].name), rows[i].quantity, rows[i].unit,
                      true);
    }
}

/* "CH3 2, CH2 1"; the warning of an unverified source stands with the pairs. */
static void tell_groups(const struct telling *telling, const struct case_component *component)
{
    struct text text = {.arena = telling->result->arena};
    for (size_t i = 0; i < component->group_count; i++) {
        text_format(&text, "%s%s %.6g", i == 0 ? "" : ", ", component->groups[i].name, component->groups[i].number);
    }
    if (text.length == 0) {
        return;
    }
    const struct case_source *source = component->groups_origin.source;
    struct data_row *row = add_row(telling, "groups", text.bytes);
    row->source = source_words(telling, &component->groups_origin);
    row->remark = source != NULL && source->is_unverified ? "unverified" : NULL;
}

static void tell_component(const struct case_tree *tree, const struct method_pool *pool,
                           const struct case_component *component, struct result *result)
{
    const struct telling telling = {tree, result, component->name};
    const bool critical = any_method(pool, component, false, method_takes_critical);
    const bool acentric = any_method(pool, component, false, uses_acentric);
    tell_identity(&telling, component);
    tell_quantity(&telling, "molar-mass", &component->molar_mass, "kg/mol", true);
    tell_quantity(&telling, "critical-temperature", &component->critical_temperature, "K", critical);
    tell_quantity(&telling, "critical-pressure", &component->critical_pressure, "Pa", critical);
    tell_quantity(&telling, "critical-density", &component->critical_density, "mol/m3", false);
    tell_quantity(&telling, "acentric", &component->acentric, "", acentric);
    tell_quantity(&telling, "triple-temperature", &component->triple_temperature, "K",
                  any_sheet(tree, SHEET_SATURATION));
    tell_quantity(&telling, "triple-pressure", &component->triple_pressure, "Pa", false);
    tell_quantity(&telling, "boiling-temperature", &component->boiling_temperature, "K", false);
    tell_quantity(&telling, "dipole", &component->dipole, "C m", false);
    for (size_t i = 0; i < component->cubic_set_count; i++) {
        if (is_in_use(pool, component, component->cubic_sets[i].method)) {
            tell_cubic_set(&telling, &component->cubic_sets[i]);
        }
    }
    if (any_method(pool, component, true, uses_groups)) {
        tell_groups(&telling, component);
    }
    if (any_method(pool, component, false, uses_equation)) {
        tell_equation(&telling, component);
    }
    if (any_sheet_tells_solids(tree, component)) {
        tell_solid(&telling, component);
    }
}

/* ---- entries and rules ----------------------------------------------------------------------------------------- */

static const char *gauge_words(const struct case_tree *tree, double gauge, struct arena *arena)
{
    const struct shown_unit unit = tree->sheets[0].units.gauge;
    return arena_format(arena, "%.6g %s", gauge / unit.factor, unit.symbol);
}

static void tell_listed_row(const struct telling *telling, const struct listed_row *listed)
{
    struct arena *arena = telling->result->arena;
    struct text value = {.arena = arena};
    if (listed->filling_ratio.given) {
        text_format(&value, "filling-ratio %.6g", listed->filling_ratio.value);
    }
    if (listed->working_pressure.given) {
        text_format(&value, "%sworking-pressure %s", value.length == 0 ? "" : ", ",
                    gauge_words(telling->tree, listed->working_pressure.value, arena));
    }
    const char *name = arena_format(arena, "listed-fill %s", gauge_words(telling->tree, listed->test_pressure, arena));
    struct data_row *row = add_row(telling, name, value.bytes);
    row->source = source_words(telling, &listed->origin);
    row->remark = listed->origin.source != NULL && listed->origin.source->is_unverified ? "unverified" : NULL;
    warn_unverified(telling, name, listed->origin.source);
}

static void tell_entry(const struct case_tree *tree, const struct case_entry *entry, struct result *result)
{
    const struct telling telling = {tree, result, arena_format(result->arena, "entry %s", entry->name)};
    if (entry->title != NULL) {
        add_row(&telling, "title", entry->title);
    }
    if (entry->class_code != NULL) {
        add_row(&telling, "class-code", entry->class_code);
    }
    if (entry->letters != NULL) {
        add_row(&telling, "letters", entry->letters);
    }
    if (entry->lc50.given) {
        add_row(&telling, "lc50", arena_format(result->arena, "%.6g ppm", entry->lc50.value * 1e6));
    }
    for (size_t i = 0; i < entry->row_count; i++) {
        tell_listed_row(&telling, &entry->rows[i]);
    }
    for (size_t i = 0; i < entry->limit_count; i++) {
        add_row(&telling, "limit", entry->limits[i].written);
    }
}

static void tell_rule(const struct case_tree *tree, const struct case_rule *rule, struct result *result)
{
    const struct telling telling = {tree, result, arena_format(result->arena, "rule %s", rule->name)};
    const char *source = rule->source != NULL ? rule->source->key : source_words(&telling, &rule->origin);
    const struct {
        const char *name, *text;
    } words[] = {{"title", rule->title}, {"clause", rule->clause}, {"edition", rule->edition}};
    for (size_t i = 0; i < sizeof words / sizeof *words; i++) {
        if (words[i].text != NULL) {
            add_row(&telling, words[i].name, words[i].text)->source = source;
        }
    }
    for (size_t i = 0; i < rule->predicate_count; i++) {
        add_row(&telling, "criterion", rule->predicates[i].written)->source = source;
    }
    warn_unverified(&telling, "the rule's text", rule->source);
}

/* Things that several sheets use are told once. */
struct told {
    size_t count, capacity;
    const void **items;
};

static bool is_first_time(struct told *told, const void *thing, struct arena *arena)
{
    for (size_t i = 0; i < told->count; i++) {
        if (told->items[i] == thing) {
            return false;
        }
    }
    *ARENA_APPEND(arena, told) = thing;
    return true;
}

static void tell_entries_and_rules(const struct case_tree *tree, struct result *result)
{
    struct told told = {0};
    for (size_t i = 0; i < tree->sheet_count; i++) {
        const struct case_sheet *sheet = &tree->sheets[i];
        for (size_t k = 0; k < sheet->entry_count; k++) {
            if (is_first_time(&told, sheet->entries[k], result->arena)) {
                tell_entry(tree, sheet->entries[k], result);
            }
        }
    }
    for (size_t i = 0; i < tree->sheet_count; i++) {
        const struct case_sheet *sheet = &tree->sheets[i];
        for (size_t k = 0; k < sheet->rule_count; k++) {
            if (is_first_time(&told, sheet->rules[k], result->arena)) {
                tell_rule(tree, sheet->rules[k], result);
            }
        }
    }
}

static bool is_part_of_key(char c)
{
    return isalnum((unsigned char)c) || c == '-';
}

/* Whether a text, perhaps NULL, names the source: by itself, not as part of a longer key. */
static bool mentions(const char *text, const char *key)
{
    const size_t length = strlen(key);
    for (const char *at = text == NULL ? NULL : strstr(text, key); at != NULL; at = strstr(at + 1, key)) {
        if ((at == text || !is_part_of_key(at[-1])) && !is_part_of_key(at[length])) {
            return true;
        }
    }
    return false;
}

static bool is_cited_in_data(const struct result *result, const char *key)
{
    for (size_t i = 0; i < result->data.count; i++) {
        const struct data_row *row = &result->data.items[i];
        if (mentions(row->source, key) || mentions(row->remark, key)) {
            return true;
        }
    }
    return false;
}

static bool is_cited_in_sheets(const struct result *result, const char *key)
{
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next) {
        for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
            for (size_t i = 0; i < part->facts.count; i++) {
                const char *source = part->facts.items[i].source;
                if (source != NULL && strcmp(source, key) == 0) {
                    return true;
                }
            }
        }
    }
    return false;
}

/* A source that nothing told here cites would only puzzle a reader. */
static void tell_sources(const struct case_tree *tree, struct result *result)
{
    for (size_t i = 0; i < tree->source_count; i++) {
        const struct case_source *source = tree->sources[i];
        if (is_cited_in_data(result, source->key) || is_cited_in_sheets(result, source->key)) {
            *ARENA_APPEND(result->arena, &result->sources) =
                (struct source_row){source->key, source->citation, source->is_unverified};
        }
    }
}

void tell_data(const struct case_tree *tree, const struct method_pool *pool, struct result *result)
{
    for (size_t i = 0; i < tree->component_count; i++) {
        tell_component(tree, pool, tree->components[i], result);
    }
    tell_mixtures(tree, pool, result);
    tell_entries_and_rules(tree, result);
    tell_sources(tree, result);
}

/* ---- methods --------------------------------------------------------------------------------------------------- */

static const char *title_of(const struct pooled_method *pooled, struct arena *arena)
{
    const char *citation = pooled->run.fluid->ops->citation;
    if (strcmp(pooled->run.name, "reference") == 0 && pooled->fluid->components[0]->equation_source != NULL) {
        citation = pooled->fluid->components[0]->equation_source->citation;
    }
    const char *title = pooled->run.fluid->ops->title;
    return citation == NULL ? title : arena_format(arena, "%s: %s", title, citation);
}

static const char *role_words(const struct pooled_method *pooled, struct arena *arena)
{
    switch (pooled->role) {
    case ROLE_LEADS:
        return pooled->reason == NULL ? "leads" : arena_format(arena, "leads: %s", pooled->reason);
    case ROLE_BESIDE:
        return pooled->run.may_govern ? "stands beside the lead" : "stands beside the lead, never governs";
    case ROLE_SHOWN:
        break;
    }
    return "shown for comparison, never governs";
}

void tell_methods(const struct method_pool *pool, struct result *result)
{
    for (size_t i = 0; i < pool->count; i++) {
        const struct pooled_method *pooled = &pool->items[i];
        struct method_row *row = ARENA_APPEND(result->arena, &result->methods);
        *row = (struct method_row){.name = pooled->run.name};
        if (pooled->run.fluid == NULL) {
            row->reason = arena_format(result->arena, "no answer: %s",
                                       lack_words(pooled->fluid, &pooled->run.lack, result->arena));
            continue;
        }
        row->title = title_of(pooled, result->arena);
        row->parameters = method_parameters(pooled, result->arena);
        row->range = method_range(pooled, result->arena);
        row->reason = role_words(pooled, result->arena);
    }
}

const char *lack_words(const struct case_fluid *fluid, const struct fluid_lack_report *lack, struct arena *arena)
{
    const char *component = lack->component < fluid->count ? fluid->components[lack->component]->name : fluid->name;
    switch (lack->lack) {
    case LACK_CRITICAL_POINT:
        return arena_format(arena, "no critical temperature or pressure is given for %s", component);
    case LACK_ACENTRIC:
        return arena_format(arena, "no acentric factor is given for %s", component);
    case LACK_EQUATION:
        return arena_format(arena, "no reference equation is given for %s", component);
    case LACK_PARAMETERS:
        return arena_format(arena, "no parameters of this method are given for %s", component);
    case LACK_MIXTURE:
        return "it serves pure gases only";
    case LACK_METHOD:
    case LACK_NOTHING:
        break;
    }
    return "it is not known";
}
