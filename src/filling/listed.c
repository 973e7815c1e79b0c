/* Listed rows: which row of the gas's entry applies to the vessel, what it replaces, and how it compares with the
 * computation it stands for. */
#include "filling/permissible_internal.h"

#include "filling/classify.h"
#include "filling/contents_table.h"
#include "filling/found_temperatures.h"
#include "filling/listed_ledger.h"
#include "filling/requirement.h"

#define SETTLED_TEMPERATURE 288.15 /* K: where listed working pressures are stated */
/* Test pressures that agree to this part are the same: a row in psi and a vessel in bar. */
#define SAME_PRESSURE 1e-9
/* Ratios that differ by less than this are shown as equal. */
#define SAME_RATIO 5e-5

/* ---- the choice -------------------------------------------------------------------------------------------------- */

/* A filling ratio stands for a criterion on liquefied gases, a working pressure for one on compressed gases. */
static bool implements(const struct listed_row *row, const struct criterion *criterion)
{
    if (criterion->kind != CRITERION_RULE || !criterion->predicate->unless_listed) {
        return false;
    }
    return row->filling_ratio.given ? criterion->meant_for != CLASS_COMPRESSED
                                    : row->working_pressure.given && !class_is_liquefied(criterion->meant_for);
}

static bool implements_any(const struct permissible *sheet, const struct listed_row *row)
{
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        if (implements(row, &sheet->criteria[i])) {
            return true;
        }
    }
    return false;
}

/* Among rows of one test pressure the smaller ratio. */
static bool replaces_choice(const struct listed_row *row, const struct listed_row *chosen)
{
    if (chosen == NULL || row->test_pressure > chosen->test_pressure) {
        return true;
    }
    return row->test_pressure >= chosen->test_pressure && row->filling_ratio.given &&
           row->filling_ratio.value < chosen->filling_ratio.value;
}

/* Of several entries one with a row that applies, and of several rows the smaller ratio. */
static bool is_better_entry(const struct listed_choice *choice, const struct listed_choice *chosen)
{
    if (chosen->entry == NULL) {
        return true;
    }
    if (choice->row == NULL || chosen->row == NULL) {
        return choice->row != NULL;
    }
    return choice->row->filling_ratio.given && chosen->row->filling_ratio.given &&
           choice->row->filling_ratio.value < chosen->row->filling_ratio.value;
}

/* By letter o a row is never exceeded: it binds whatever rules the sheet names, also where it replaces none of them. */
static void choose_row(struct permissible *sheet, const struct case_entry *entry)
{
    const struct quantity *test = &sheet->run->sheet->vessel->test_pressure;
    struct listed_choice choice = {.entry = entry};
    const struct listed_row *lowest = NULL;
    for (size_t i = 0; i < entry->row_count; i++) {
        const struct listed_row *row = &entry->rows[i];
        if (!entry->is_never_exceeded && !implements_any(sheet, row)) {
            continue;
        }
        lowest = lowest == NULL || row->test_pressure < lowest->test_pressure ? row : lowest;
        if (test->given && row->test_pressure <= test->value * (1.0 + SAME_PRESSURE) &&
            replaces_choice(row, choice.row)) {
            choice.row = row;
        }
    }
    choice.lowest = lowest;
    if (lowest != NULL && is_better_entry(&choice, &sheet->listed)) {
        sheet->listed = choice;
    }
}

static const struct predicate *row_predicate(const struct permissible *sheet, const struct listed_row *row)
{
    struct arena *arena = sheet->run->arena;
    struct formula *bound = arena_alloc(arena, 1, sizeof *bound);
    struct predicate *predicate = arena_alloc(arena, 1, sizeof *predicate);
    bound->kind = FORMULA_NUMBER;
    bound->number = row->filling_ratio.given ? row->filling_ratio.value : row->working_pressure.value;
    *predicate = (struct predicate){
        .kind = PREDICATE_COMPARE,
        .from = SETTLED_TEMPERATURE,
        .to = SETTLED_TEMPERATURE,
        .has_temperature = true,
        .quantity = row->filling_ratio.given ? SYMBOL_FILLING_RATIO : SYMBOL_PRESSURE,
        .relation = RELATION_AT_MOST,
        .bound = bound,
        .bound_is_gauge = !row->filling_ratio.given,
        .gauge_zero = STANDARD_ATMOSPHERE,
        .at = row->origin.at,
        .temperature_unit = {"degC", 1.0, 273.15},
    };
    predicate->written =
        row->filling_ratio.given
            ? arena_format(arena, "filling-ratio <= %g", row->filling_ratio.value)
            : arena_format(arena, "at 15 degC pressure <= %s",
                           shown_text(sheet->run, look_gauge(sheet->run), bound->number + STANDARD_ATMOSPHERE));
    return predicate;
}

void apply_listed_row(struct permissible *sheet)
{
    const struct case_sheet *asked = sheet->run->sheet;
    for (size_t i = 0; i < asked->entry_count; i++) {
        choose_row(sheet, asked->entries[i]);
    }
    struct listed_choice *listed = &sheet->listed;
    if (listed->entry == NULL) {
        return;
    }
    const struct listed_row *row = listed->row;
    if (row == NULL && listed->entry->is_never_exceeded) {
        row = listed->lowest;
    }
    if (row == NULL) {
        return;
    }
    listed->predicate = row_predicate(sheet, row);
    listed->has_ratio = row->filling_ratio.given;
    listed->filling_ratio = row->filling_ratio.value;
    for (size_t i = 0; i < sheet->criterion_count && listed->row != NULL && asked->listed == LISTED_GOVERNS; i++) {
        sheet->criteria[i].is_replaced = implements(row, &sheet->criteria[i]);
    }
}

/* The row that applies, or by letter o the lowest. */
static const struct listed_row *row_in_question(const struct permissible *sheet)
{
    return sheet->listed.row != NULL ? sheet->listed.row : sheet->listed.lowest;
}

const char *listed_words(const struct permissible *sheet)
{
    const struct listed_row *row = row_in_question(sheet);
    return arena_format(sheet->run->arena, "%s, %.6g %s", sheet->listed.entry->name,
                        (row->test_pressure + STANDARD_ATMOSPHERE - sheet->run->sheet->units.gauge.offset) /
                            sheet->run->sheet->units.gauge.factor,
                        sheet->run->sheet->units.gauge.symbol);
}

const char *listed_source(const struct permissible *sheet)
{
    const struct listed_row *row = row_in_question(sheet);
    if (row->origin.source != NULL) {
        return row->origin.source->key;
    }
    return arena_format(sheet->run->arena, "given, line %zu", deck_line(sheet->run, row->origin.at));
}

/* ---- the comparison ---------------------------------------------------------------------------------------------- */

/* The method whose numbers the row is held against: the one that governs, else the lead. */
static struct method_limits *basis_of(const struct permissible *sheet)
{
    return &sheet->by_method[sheet->governing.given ? sheet->governing.index : 0];
}

/* How a criterion is met or missed; where the liquid's volume misses it, from which temperature on the vessel is full.
 */
static const char *found_words(const struct sheet_run *run, struct method_run *method,
                               const struct predicate *predicate, const struct predicate_finding *finding, double mass)
{
    const char *words = margin_words(run, predicate, finding);
    if (finding->holds || predicate->quantity != SYMBOL_LIQUID_VOLUME) {
        return words;
    }
    const struct liquid_end_found end = find_liquid_end(run, method, mass);
    return end.end == LIQUID_END_FULL
               ? arena_format(run->arena, "liquid-full from %s on", temperature_words(run, end.temperature))
               : words;
}

static void add_miss(const struct sheet_run *run, struct listed_line *line, const struct predicate *predicate,
                     const struct predicate_finding *finding, const char *words)
{
    line->misses =
        arena_grow(run->arena, line->misses, &line->miss_capacity, line->miss_count + 1, sizeof *line->misses);
    line->misses[line->miss_count++] = (struct listed_miss){
        .criterion = predicate->written, .temperature = finding->worst_temperature, .words = words};
}

/* What the listed charge does to each computed criterion: this explains a row that differs from the computation. */
static void add_findings(const struct permissible *sheet, struct method_run *method, double mass,
                         struct listed_line *line)
{
    const struct sheet_run *run = sheet->run;
    for (size_t i = 0; i < sheet->criterion_count; i++) {
        const struct criterion *criterion = &sheet->criteria[i];
        if (!criterion->is_of_listed_rule) {
            continue;
        }
        const struct predicate_finding finding = predicate_check(run, method, criterion->predicate, mass);
        if (finding.answer != ANSWER_OK) {
            continue;
        }
        const char *words = found_words(run, method, criterion->predicate, &finding, mass);
        sheet_add_note(run->result, run->out, "filled to the row, '%s' is %s at %s: %s (%s)",
                       criterion->predicate->written, finding.holds ? "met" : "missed",
                       temperature_words(run, finding.worst_temperature), words, method->name);
        if (!finding.holds) {
            add_miss(run, line, criterion->predicate, &finding, words);
        }
    }
}

static void add_listed_pressure(const struct permissible *sheet, struct method_run *method, double mass,
                                struct listed_line *line)
{
    const struct sheet_run *run = sheet->run;
    const double temperature = hottest_ruled(sheet);
    struct contents contents;
    if (contents_at(run, method, mass, temperature, &contents) == ANSWER_OK) {
        struct fact *fact =
            sheet_add_fact(run->result, run->out, "listed-pressure", contents.pressure, look_pressure(run));
        fact->method = method->name;
        fact->remark = arena_format(run->arena, "settled, at %s", temperature_words(run, temperature));
    }
    const struct liquid_end_found found = find_liquid_end(run, method, mass);
    if (found.end == LIQUID_END_FULL) {
        line->liquid_full = (struct optional){true, found.temperature};
        sheet_add_fact(run->result, run->out, "listed-liquid-full-temperature", found.temperature,
                       look_temperature(run))
            ->method = method->name;
    }
}

static void warn_of_difference(const struct permissible *sheet, double computed)
{
    const struct sheet_run *run = sheet->run;
    const double listed = sheet->listed.filling_ratio;
    const size_t line = location_line(run->sheet->at);
    if (listed > computed + SAME_RATIO) {
        result_warn(run->result, CODE_W320, line, run->number,
                    "%s: listed filling ratio %g exceeds the computed limit %.4f by %.4f, %.2f %%", listed_words(sheet),
                    listed, computed, listed - computed, 100.0 * (listed / computed - 1.0));
    } else if (listed < computed - SAME_RATIO && sheet->governing.given &&
               governing_criterion(sheet)->kind == CRITERION_LISTED) {
        result_warn(run->result, CODE_W321, line, run->number,
                    "%s: listed filling ratio %g is below the computed limit %.4f by %.4f, %.2f %%: the row governs",
                    listed_words(sheet), listed, computed, computed - listed, 100.0 * (1.0 - listed / computed));
    }
}

/* The row's ratio beside the computed one: facts, and a warning where they differ. */
static void add_computed_ratio(const struct permissible *sheet, const struct method_limits *basis,
                               struct listed_line *line)
{
    const struct sheet_run *run = sheet->run;
    const double computed = ratio_of_mass(run, basis->limits[basis->ruled.index].mass);
    line->computed = (struct optional){true, computed};
    struct fact *fact = sheet_add_fact(run->result, run->out, "computed-filling-ratio", computed, look_ratio(4));
    fact->method = basis->method->name;
    fact->remark = "least of the rules' criteria, unrounded";
    fact =
        sheet_add_fact(run->result, run->out, "listed-excess", sheet->listed.filling_ratio - computed, look_ratio(4));
    fact->method = basis->method->name;
    fact->remark = "listed less computed";
    warn_of_difference(sheet, computed);
}

static void tell_ratio_row(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct method_limits *basis = basis_of(sheet);
    const double mass = mass_of_ratio(run, sheet->listed.filling_ratio);
    sheet_add_fact(run->result, run->out, "listed-filling-ratio", sheet->listed.filling_ratio, look_ratio(4))->source =
        listed_source(sheet);
    sheet_add_fact(run->result, run->out, "listed-mass", mass, look_mass(run))->source = listed_source(sheet);
    if (basis->method == NULL) {
        return;
    }
    struct listed_line line = {.run = run,
                               .entry = sheet->listed.entry->name,
                               .test_pressure = row_in_question(sheet)->test_pressure,
                               .listed = sheet->listed.filling_ratio,
                               .method = basis->method->name};
    if (basis->ruled.given) {
        add_computed_ratio(sheet, basis, &line);
    }
    add_listed_pressure(sheet, basis->method, mass, &line);
    add_findings(sheet, basis->method, mass, &line);
    if (run->ledger != NULL) {
        *ARENA_APPEND(run->arena, run->ledger) = line;
    }
}

/* A listed working pressure beside the settled pressure that the criterion it stands for would allow. */
static void tell_pressure_row(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct method_limits *basis = basis_of(sheet);
    const struct listed_row *row = row_in_question(sheet);
    sheet_add_fact(run->result, run->out, "listed-working-pressure", row->working_pressure.value + STANDARD_ATMOSPHERE,
                   look_gauge(run))
        ->source = listed_source(sheet);
    struct contents contents;
    if (basis->method != NULL && basis->replaced.given &&
        contents_at(run, basis->method, basis->limits[basis->replaced.index].mass, SETTLED_TEMPERATURE, &contents) ==
            ANSWER_OK) {
        struct fact *fact =
            sheet_add_fact(run->result, run->out, "computed-working-pressure", contents.pressure, look_gauge(run));
        fact->method = basis->method->name;
        fact->remark = "allowed by the criterion the row stands for";
    }
}

static void tell_missing_row(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const struct quantity *test = &run->sheet->vessel->test_pressure;
    const char *vessel = test->given ? shown_text(run, look_gauge(run), test->value + STANDARD_ATMOSPHERE) : "none";
    result_warn(run->result, CODE_W322, location_line(run->sheet->at), run->number,
                "%s: the lowest listed test pressure is %s, the vessel's %s: no row applies%s",
                sheet->listed.entry->name,
                shown_text(run, look_gauge(run), sheet->listed.lowest->test_pressure + STANDARD_ATMOSPHERE), vessel,
                sheet->listed.predicate == NULL ? ", the computed criterion stands alone"
                                                : "; by letter o the lowest row is not exceeded");
}

/* Letter o is told where it is what keeps the computation from allowing more. */
static void tell_letter_o(const struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    const char *although = run->sheet->listed == LISTED_COMPARE             ? "the sheet only compares"
                           : !implements_any(sheet, row_in_question(sheet)) ? "no rule of the sheet gives way to it"
                                                                            : NULL;
    if (sheet->listed.entry->is_never_exceeded && although != NULL) {
        result_warn(run->result, CODE_W331, location_line(run->sheet->at), run->number,
                    "%s has letter o: its row binds although %s", sheet->listed.entry->name, although);
    }
}

void tell_listed_row(struct permissible *sheet)
{
    const struct sheet_run *run = sheet->run;
    if (sheet->listed.entry == NULL) {
        return;
    }
    if (sheet->listed.row == NULL) {
        tell_missing_row(sheet);
    }
    if (sheet->listed.predicate == NULL) {
        return;
    }
    sheet_begin_facts(run->result, run->out, "listed row beside the computation");
    sheet_add_words(run->result, run->out, "listed-row", listed_words(sheet));
    if (sheet->listed.has_ratio) {
        tell_ratio_row(sheet);
    } else {
        tell_pressure_row(sheet);
    }
    tell_letter_o(sheet);
}
