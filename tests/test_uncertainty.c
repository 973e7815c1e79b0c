/* What a deck writes with `+/-` reaches every result of its sheets: ideal gases, whose uncertainties have closed forms.
 */
#include "filling/solve.h"

#include "support/elaborated.h"
#include "support/rationing.h"
#include "support/result_reading.h"

#include "report/report.h"

#include <jansson.h>
#include <math.h>

#define LITRE 1e-3
#define BAR   1e5

/* M = 20 g/mol, by the gas law. */
#define HEAD    "use \"small\"\nmethods { lead ideal-gas }\n"
#define VESSEL  "vessel ten { water-capacity 10.2 L +/- 0.06 L; test-pressure 300 barg; tare 13.4 kg +/- 0.01 kg }\n"
#define BY_MASS "charge lot { fluid vapid; vessel ten; mass 1.31 kg +/- 0.02 kg }\n"
#define BY_FILL "charge lot { fluid vapid; vessel ten; fill 151 bara +/- 1.3 bar at 288.15 K +/- 1.1 K }\n"
#define SHEET   "sheet settled-pressure { charge lot; sweep temperature 288.15 K, 338.15 K; "

struct solved {
    struct elaborated deck;
    const struct result *result;
    const struct result_sheet *sheet;
};

static struct solved solve(const char *text)
{
    struct solved it = {.deck = elaborate_well(text)};
    it.result = filling_solve(it.deck.tree, "0.0.0", it.deck.arena);
    it.sheet = it.result->first_sheet;
    return it;
}

static void end(struct solved *it)
{
    elaborated_end(&it->deck);
}

static double expanded_of(const struct solved *it, const char *fact)
{
    const struct fact *found = result_fact(it->sheet, fact, NULL);
    assert_non_null(found);
    assert_int_equal(found->carried.kind, CARRIED);
    return found->carried.expanded;
}

static const struct budget *budget_of(const struct solved *it, const char *result)
{
    for (const struct sheet_part *part = it->sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_BUDGET && strstr(part->budget->result, result) != NULL) {
            return part->budget;
        }
    }
    return NULL;
}

static const struct budget_line *line_of(const struct budget *budget, const char *input)
{
    for (size_t i = 0; budget != NULL && i < budget->line_count; i++) {
        if (strncmp(budget->lines[i].input, input, strlen(input)) == 0) {
            return &budget->lines[i];
        }
    }
    return NULL;
}

static bool has_warning(const struct solved *it, enum code code)
{
    for (size_t i = 0; i < it->result->warnings.count; i++) {
        if (it->result->warnings.items[i].code == code) {
            return true;
        }
    }
    return false;
}

/* ---- facts and cells --------------------------------------------------------------------------------------------- */

/* p = m R T / (M V): relative uncertainties 0.02 / 1.31 and 0.06 / 10.2 add in squares. Central differences of 1 / V
 * over u are off by (u / V)^2, a hundred-thousandth. */
static void a_mass_and_a_volume_reach_the_pressure(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_MASS SHEET "}\n");
    const struct table *table = result_table(it.sheet, "settled pressure", "ideal-gas");
    const double relative = sqrt(pow(0.02 / 1.31, 2.0) + pow(0.06 / 10.2, 2.0));
    for (size_t row = 0; row < 2; row++) {
        const struct cell *cell = result_cell(table, row, "pressure");
        assert_int_equal(cell->carried.kind, CARRIED);
        assert_close(cell->carried.expanded, cell->number * relative, 1e-5, "product of powers");
        assert_int_equal(result_cell(table, row, "temperature")->carried.kind, CARRIED_NONE);
    }
    assert_close(expanded_of(&it, "mass"), 0.02, 1e-9, "as written");
    assert_close(expanded_of(&it, "gross-weight"), hypot(0.02, 0.01), 1e-9, "a sum");
    assert_close(expanded_of(&it, "density"), 1.31 / 0.0102 * relative, 1e-5, "m / V");
    end(&it);
}

/* m = p V M / (R T): the settled pressure at T2 is p T2 / T1, in which the volume has no part. */
static void a_fill_pressure_becomes_mass_once(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_FILL SHEET "}\n");
    const struct table *table = result_table(it.sheet, "settled pressure", "ideal-gas");
    const struct cell *cell = result_cell(table, 1, "pressure");
    const double of_pressure = sqrt(pow(1.3 / 151.0, 2.0) + pow(1.1 / 288.15, 2.0));
    assert_close(cell->carried.expanded, cell->number * of_pressure, 1e-5, "p T2 / T1");
    const struct fact *mass = result_fact(it.sheet, "mass", NULL);
    assert_close(mass->carried.expanded, mass->value * hypot(of_pressure, 0.06 / 10.2), 1e-5, "p V M / (R T)");
    const struct budget *budget = budget_of(&it, "mass");
    assert_non_null(budget);
    assert_int_equal(budget->line_count, 3);
    const struct budget_line *line = line_of(budget, "fill temperature");
    assert_close(line->standard, 0.55, 1e-12, "k = 2 is halved");
    assert_close(line->sensitivity, -mass->value / 288.15, 1e-5, "dm / dT");
    assert_close(line->contribution, line->sensitivity * 0.55, 1e-14, "c u");
    assert_close(line->value, 288.15, 1e-14, "as written");
    assert_close(budget->standard, mass->carried.expanded / 2.0, 1e-14, "combined");
    end(&it);
}

static void shares_of_a_budget_are_the_whole(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_FILL SHEET "}\n");
    const struct budget *budget = budget_of(&it, "mass");
    double sum = 0.0;
    for (size_t i = 0; i < budget->line_count; i++) {
        sum += budget->lines[i].share;
    }
    assert_close(sum, 1.0, 1e-14, "parts of the variance");
    end(&it);
}

static void every_row_is_shown_where_it_is_asked_for(void **state)
{
    (void)state;
    static const char title[] = "U (k = 2) in the rows of the table above";
    struct solved brief = solve(HEAD VESSEL BY_MASS SHEET "}\n");
    assert_null(result_table(brief.sheet, title, NULL));
    end(&brief);
    struct solved it = solve(HEAD VESSEL BY_MASS SHEET "uncertainty every-row }\n");
    const struct table *table = result_table(it.sheet, "settled pressure", "ideal-gas");
    const struct table *spreads = result_table(it.sheet, title, "ideal-gas");
    assert_non_null(spreads);
    assert_int_equal(spreads->row_count, 2);
    for (size_t row = 0; row < 2; row++) {
        assert_close(result_cell(spreads, row, "temperature")->number, result_cell(table, row, "temperature")->number,
                     0.0, "tells the row");
        assert_close(result_cell(spreads, row, "margin")->number, result_cell(table, row, "margin")->carried.expanded,
                     0.0, "the same");
    }
    assert_null(result_cell(spreads, 0, "state"));
    for (const struct sheet_part *part = it.sheet->first_part; part != NULL; part = part->next) {
        assert_true(part->table != table || part->next->table == spreads);
    }
    end(&it);
}

/* Without a requirement the last of the lead's pressures has a budget: p T2 / T1, so that no volume is in it. */
static void a_sheet_without_margins_has_a_budget_of_its_last_pressure(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_FILL SHEET "monte-carlo draws 4000 }\n");
    const struct budget *budget = budget_of(&it, "pressure in row 2 of 'settled pressure'");
    assert_non_null(budget);
    assert_int_equal(budget->line_count, 2);
    assert_close(line_of(budget, "fill of")->sensitivity, 338.15 / 288.15, 1e-9, "T2 / T1");
    assert_close(budget->drawn.standard, budget->standard, 5.0 / sqrt(8000.0), "nearly linear");
    end(&it);
}

/* ---- mixtures ---------------------------------------------------------------------------------------------------- */

#define MIXED_SHEET  "sheet settled-pressure { fluid blend; vessel ten; mass 1.31 kg; sweep temperature 288.15 K }\n"
#define PLAIN_VESSEL "vessel ten { water-capacity 10.2 L; test-pressure 300 barg }\n"

/* What one part gains the rest loses: M = x 39.948 + (1 - x) 20, dM/dx = 19.948 g/mol; the amount is m / M. */
static void the_rest_of_a_mixture_gives_way(void **state)
{
    (void)state;
    struct solved it =
        solve(HEAD PLAIN_VESSEL "mixture blend by mole { argon 30 % +/- 0.4 %; vapid rest }\n" MIXED_SHEET);
    const double molar_mass = 0.3 * 39.948 + 0.7 * 20.0;
    assert_close(expanded_of(&it, "amount"), 1310.0 / molar_mass * 0.004 * 19.948 / molar_mass, 1e-5, "m / M");
    end(&it);
}

/* Without a rest, x = a / (a + b): dx = (b da - a db) / (a + b)^2, here 0.7 0.004 and 0.3 0.005 in squares. */
static void fractions_without_a_rest_are_brought_to_a_whole(void **state)
{
    (void)state;
    struct solved it =
        solve(HEAD PLAIN_VESSEL "mixture blend by mole { argon 30 % +/- 0.4 %; vapid 70 % +/- 0.5 % }\n" MIXED_SHEET);
    const double molar_mass = 0.3 * 39.948 + 0.7 * 20.0;
    const double of_fraction = hypot(0.7 * 0.004, 0.3 * 0.005);
    assert_close(expanded_of(&it, "amount"), 1310.0 / molar_mass * of_fraction * 19.948 / molar_mass, 1e-4,
                 "m / M, to second order in u / a");
    end(&it);
}

/* By mass, n / m = w / Ma + (1 - w) / Mb: linear in w. */
static void fractions_of_mass_become_amounts(void **state)
{
    (void)state;
    struct solved it =
        solve(HEAD PLAIN_VESSEL "mixture blend by mass { argon 30 % +/- 2 % relative; vapid rest }\n" MIXED_SHEET);
    assert_close(expanded_of(&it, "amount"), 1310.0 * 0.006 * (1.0 / 20.0 - 1.0 / 39.948), 1e-9, "linear");
    end(&it);
}

static void molar_masses_count_too(void **state)
{
    (void)state;
    struct solved it = solve(HEAD PLAIN_VESSEL "component vapid { molar-mass 21 g/mol +/- 0.03 g/mol }\n"
                                               "sheet settled-pressure { fluid vapid; vessel ten; mass 1.31 kg }\n");
    assert_close(expanded_of(&it, "amount"), 1310.0 / 21.0 * 0.03 / 21.0, 1e-5, "m / M");
    end(&it);
}

/* A let's uncertainty is one input, however often it is named: V and m double together and leave the density alone. */
static void what_a_let_names_moves_together(void **state)
{
    (void)state;
    struct solved it = solve(HEAD "let size = 5.1 L +/- 0.03 L\n"
                                  "let reading = 90 barg +/- 2 % relative\n"
                                  "vessel ten { water-capacity 2 * size; test-pressure 300 barg }\n"
                                  "sheet settled-pressure { fluid vapid; vessel ten; fill reading at 288.15 K }\n");
    assert_int_equal(it.deck.tree->spread_count, 2);
    const struct fact *mass = result_fact(it.sheet, "mass", NULL);
    /* 2 % of the 90 bar above the atmosphere */
    const double relative = hypot(0.03 / 5.1, 1.8 / (90.0 + 1.01325));
    assert_close(mass->carried.expanded, mass->value * relative, 1e-6, "p V M / (R T)");
    assert_string_equal(budget_of(&it, "mass")->lines[0].input, "size of let");
    assert_close(expanded_of(&it, "density"), result_fact(it.sheet, "density", NULL)->value * 1.8 / 91.01325, 1e-6,
                 "p M / (R T)");
    end(&it);
    assert_refused(HEAD "let size = 5.1 L +/- 0.03 kg\n", CODE_E208);
    assert_refused(HEAD "let hall = 18 degC +/- 2 degC\n", CODE_E208);
    assert_refused(HEAD "let size = 5.1 L +/- 0.03 L relative\n", CODE_E208);
}

/* A gauge reading of 90 bar in an air of 0.97 bar. */
static void the_air_at_the_gauge_is_an_input(void **state)
{
    (void)state;
    struct solved it = solve("case \"hill\" { ambient-pressure 0.97 bara +/- 0.03 bar }\n" HEAD PLAIN_VESSEL
                             "sheet settled-pressure { fluid vapid; vessel ten; fill 90 barg at 288.15 K }\n");
    const struct fact *mass = result_fact(it.sheet, "mass", NULL);
    assert_close(mass->carried.expanded, mass->value * 0.03 / 90.97, 1e-6, "p V M / (R T)");
    end(&it);
}

/* ---- verdicts ---------------------------------------------------------------------------------------------------- */

/* 1.31 kg in 10.2 L at 338.15 K are 180.55 bara; U = 180.55 sqrt((0.02 / 1.31)^2 + (0.06 / 10.2)^2) = 2.95 bar. */
static void a_margin_smaller_than_its_uncertainty_is_marked(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_MASS SHEET "require at 338.15 K pressure <= 182.5 bara\n"
                                                       "require at 338.15 K pressure <= 178.6 bara\n"
                                                       "require at 338.15 K pressure <= 185 bara }\n");
    const struct requirement *one = it.sheet->first_requirement;
    assert_int_equal(one->state, REQUIREMENT_MET);
    assert_close(one->carried.expanded, 2.955 * BAR, 1e-2, "see above");
    assert_true(one->is_within_uncertainty);
    assert_int_equal(one->next->state, REQUIREMENT_NOT_MET);
    assert_true(one->next->is_within_uncertainty);
    assert_false(one->next->next->is_within_uncertainty);
    assert_int_equal(result_close_verdicts(it.result), 2);
    assert_true(has_warning(&it, CODE_W345));
    end(&it);
}

#define HOT_DAY                                                                                                      \
    "use \"small\"\nmethods { lead peng-robinson }\n" VESSEL "rule hot-day { at 338.15 K pressure <= test-pressure " \
    "}\n"

/* The limit less its U: filled with that, the margin is just its own U. The permitted mass itself stands at the bound,
 * so that its verdict is within the uncertainty. */
static void the_guarded_mass_keeps_the_limit_by_its_uncertainty(void **state)
{
    (void)state;
    struct solved it = solve(HOT_DAY "sheet permissible-charge { fluid argon; vessel ten; rules hot-day }\n");
    const struct fact *mass = result_fact(it.sheet, "mass", NULL),
                      *guarded = result_fact(it.sheet, "guarded-mass", NULL);
    assert_non_null(guarded);
    assert_close(guarded->value, mass->value - mass->carried.expanded, 1e-14, "the mass less its U");
    assert_true(it.sheet->first_requirement->is_within_uncertainty);
    char *text = arena_format(it.deck.arena,
                              HOT_DAY "charge lot { fluid argon; vessel ten; mass %.17g kg }\n"
                                      "sheet settled-pressure { charge lot; require at 338.15 K pressure <= "
                                      "test-pressure }\n",
                              guarded->value);
    struct solved filled = solve(text);
    const struct requirement *kept = filled.sheet->first_requirement;
    assert_close(kept->margin, kept->carried.expanded, 0.02, "to second order");
    end(&filled);
    end(&it);
}

/* ---- decks without --------------------------------------------------------------------------------------------- */

static void a_deck_without_uncertainties_says_nothing_of_them(void **state)
{
    (void)state;
    struct solved it = solve(HEAD PLAIN_VESSEL "sheet settled-pressure { fluid vapid; vessel ten; mass 1.31 kg }\n");
    assert_int_equal(it.deck.tree->spread_count, 0);
    assert_null(budget_of(&it, ""));
    assert_int_equal(result_fact(it.sheet, "mass", NULL)->carried.kind, CARRIED_NONE);
    end(&it);
}

static void another_vessel_is_no_matter_of_this_sheet(void **state)
{
    (void)state;
    struct solved it =
        solve(HEAD VESSEL "vessel other { water-capacity 10.2 L; test-pressure 300 barg }\n" BY_MASS SHEET "}\n"
                          "sheet settled-pressure { fluid vapid; vessel other; mass 1.31 kg }\n");
    it.sheet = it.sheet->next;
    assert_int_equal(result_fact(it.sheet, "density", NULL)->carried.kind, CARRIED_NONE);
    assert_false(case_sheet_may_depend(&it.deck.tree->sheets[1], &it.deck.tree->spreads[0]));
    end(&it);
}

static void draws_need_something_uncertain(void **state)
{
    (void)state;
    struct solved it = solve(
        HEAD PLAIN_VESSEL "sheet settled-pressure { fluid vapid; vessel ten; mass 1.31 kg; monte-carlo draws 200 }\n");
    bool is_said = false;
    for (const struct sheet_part *part = it.sheet->first_part; part != NULL; part = part->next) {
        is_said = is_said || (part->note != NULL && strstr(part->note, "nothing to draw") != NULL);
    }
    assert_true(is_said);
    end(&it);
}

/* ---- draws ------------------------------------------------------------------------------------------------------- */

static void draws_agree_where_the_gas_law_is_nearly_linear(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_FILL SHEET "monte-carlo draws 4000, seed 3 }\n");
    const struct budget *budget = budget_of(&it, "mass");
    assert_true(budget->drawn.given);
    assert_int_equal(budget->drawn.answered, 4000);
    assert_close(budget->drawn.mean, budget->value, 0.001, "the estimate");
    assert_close(budget->drawn.standard, budget->standard, 0.06, "first order, within 5 sqrt(1 / 8000)");
    assert_int_not_equal(budget->drawn.agreement, AGREES_NOT);
    end(&it);
}

/* A share of 0.1 % with a standard uncertainty as large as itself: a sixth of all draws would be below nothing. */
static void a_share_is_never_drawn_below_nothing(void **state)
{
    (void)state;
    struct solved it = solve(HEAD PLAIN_VESSEL "mixture blend by mole { argon 0.1 % +/- 0.2 %; vapid rest }\n"
                                               "sheet settled-pressure { fluid blend; vessel ten; fill 100 bara at "
                                               "288.15 K; monte-carlo draws 1000 }\n");
    const struct budget *budget = budget_of(&it, "mass");
    assert_non_null(budget);
    const double least = 100.0 * BAR * 10.2 * LITRE * 0.020 / (8.31446261815324 * 288.15);
    assert_true(budget->drawn.low >= least * (1.0 - 1e-12));
    assert_int_equal(budget->drawn.agreement, AGREES_NOT);
    assert_true(has_warning(&it, CODE_W348));
    end(&it);
}

static void the_words_of_draws_are_checked(void **state)
{
    (void)state;
#define IN_SHEET(words) \
    HEAD PLAIN_VESSEL "sheet settled-pressure { fluid vapid; vessel ten; mass 1.31 kg; " words " }\n"
    assert_refused(IN_SHEET("monte-carlo draws 99"), CODE_E209);
    assert_refused(IN_SHEET("monte-carlo draws 3000000"), CODE_E209);
    assert_refused(IN_SHEET("monte-carlo draws 200.5"), CODE_E209);
    assert_refused(IN_SHEET("monte-carlo draws 200, seed -1"), CODE_E209);
    assert_refused(IN_SHEET("monte-carlo draws"), CODE_E203);
    assert_refused(IN_SHEET("monte-carlo seed 7"), CODE_E203);
    assert_refused(IN_SHEET("monte-carlo draws 200, 7"), CODE_E203);
    assert_refused(IN_SHEET("monte-carlo draws 200, seed 7, 8"), CODE_E204);
    assert_refused(IN_SHEET("uncertainty all"), CODE_E213);
    assert_refused(IN_SHEET("monte-carlo draws 200; monte-carlo draws 300"), CODE_E207);
}

/* The same sheet by the quick way and, where an acentric factor counts among its inputs, by answering the sheet for
 * each draw. In the place of that factor the first has a tare, so that all other inputs are drawn alike. */
#define TWO_WAYS(component, tare)                                                                                  \
    "use \"small\"\nmethods { lead peng-robinson }\n" component                                                    \
    "mixture blend by mole { carbon-dioxide 30 % +/- 2 %; argon rest }\n"                                          \
    "vessel ten { " tare "water-capacity 10.2 L +/- 0.06 L; test-pressure 300 barg; working-pressure 200 barg }\n" \
    "sheet settled-pressure { fluid blend; vessel ten; fill 91 bara +/- 1.3 bar at 288.15 K +/- 1.1 K;\n"          \
    "sweep temperature 338.15 K; monte-carlo draws 120, seed 5 }\n"

static void the_quick_draws_are_those_of_the_sheet(void **state)
{
    (void)state;
    struct solved quick = solve(TWO_WAYS("", "tare 13 kg +/- 2e-9 kg; "));
    struct solved whole = solve(TWO_WAYS("component argon { acentric -0.00219 +/- 2e-9 }\n", ""));
    assert_int_equal(quick.deck.tree->spread_count, 5);
    assert_string_equal(quick.deck.tree->spreads[3].name, "tare");
    assert_string_equal(whole.deck.tree->spreads[3].name, "acentric");
    static const char *const results[] = {"mass", "margin of"};
    for (size_t i = 0; i < 2; i++) {
        const struct budget *one = budget_of(&quick, results[i]), *other = budget_of(&whole, results[i]);
        assert_non_null(one);
        assert_non_null(other);
        assert_int_equal(one->drawn.answered, 120);
        assert_int_equal(other->drawn.answered, 120);
        assert_close(one->drawn.mean, other->drawn.mean, 1e-7, "two ways");
        assert_close(one->drawn.standard, other->drawn.standard, 1e-6, "two ways");
        assert_close(one->drawn.low, other->drawn.low, 1e-7, "two ways");
        assert_close(one->drawn.high, other->drawn.high, 1e-7, "two ways");
    }
    end(&quick);
    end(&whole);
}

/* Fractions of mass, a charge by filling ratio: m = ratio 999.1 V, n = m (w / Ma + (1 - w) / Mb). */
static void quick_draws_know_fractions_of_mass_and_filling_ratios(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL "mixture blend by mass { argon 30 % +/- 1 %; vapid rest }\n"
                                         "sheet settled-pressure { fluid blend; vessel ten; filling-ratio 0.11 +/- "
                                         "0.002; monte-carlo draws 4000, seed 9 }\n");
    const struct budget *budget = budget_of(&it, "mass");
    const double mass = 0.11 * 999.1 * 10.2 * LITRE;
    assert_close(budget->value, mass, 1e-12, "ratio 999.1 V");
    assert_close(budget->drawn.standard, mass * hypot(0.001 / 0.11, 0.03 / 10.2), 5.0 / sqrt(8000.0), "product");
    end(&it);
}

/* ---- reports ----------------------------------------------------------------------------------------------------- */

static void the_listing_shows_what_is_uncertain(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_MASS SHEET "require at 338.15 K pressure <= 182.5 bara;\n"
                                                       "monte-carlo draws 400 }\n");
    struct text listing = {.arena = it.deck.arena};
    report_listing(it.result, &listing);
    static const char *const words[] = {
        "1 requirement: met; 1 WITHIN UNCERTAINTY",
        "\u00b10.020   ",
        "uncertainty budget: mass",
        "mass of charge lot",
        "U = 2 u = 0.02 kg",
        "400 random draws (JCGM 101, seed 1), 400 with an answer",
        "WITHIN UNCERTAINTY, as the margin is smaller",
        "expanded uncertainty U, k = 2",
    };
    for (size_t i = 0; i < sizeof words / sizeof *words; i++) {
        if (strstr(listing.bytes, words[i]) == NULL) {
            print_error("not in the listing: %s\n%s\n", words[i], listing.bytes);
            fail();
        }
    }
    end(&it);
}

static double real_of(const json_t *tree, const char *key)
{
    const json_t *value = json_object_get(tree, key);
    assert_true(json_is_number(value));
    return json_number_value(value);
}

static void programs_get_the_same_in_si(void **state)
{
    (void)state;
    struct solved it = solve(HEAD VESSEL BY_MASS SHEET "require at 338.15 K pressure <= 182.5 bara }\n");
    struct text json = {.arena = it.deck.arena};
    assert_true(report_json(it.result, &json));
    json_t *tree = json_loads(json.bytes, 0, NULL);
    assert_non_null(tree);
    const json_t *sheet = json_array_get(json_object_get(tree, "sheets"), 0);
    const json_t *mass = json_array_get(json_object_get(sheet, "facts"), 0);
    assert_string_equal(json_string_value(json_object_get(mass, "name")), "mass");
    assert_close(real_of(mass, "uncertainty"), 0.02, 1e-9, "as written");
    const json_t *requirement = json_array_get(json_object_get(sheet, "requirements"), 0);
    assert_true(json_is_true(json_object_get(requirement, "within_uncertainty")));
    assert_close(real_of(requirement, "uncertainty"), it.sheet->first_requirement->carried.expanded, 1e-15, "the same");
    const json_t *table = json_array_get(json_object_get(sheet, "tables"), 0);
    const json_t *row = json_array_get(json_object_get(table, "uncertainties"), 1);
    assert_int_equal(json_array_size(row), json_array_size(json_array_get(json_object_get(table, "rows"), 1)));
    assert_true(json_is_null(json_array_get(row, 0)));
    assert_true(json_is_real(json_array_get(row, 1)));
    const json_t *budget = json_array_get(json_object_get(sheet, "budgets"), 0);
    assert_string_equal(json_string_value(json_object_get(budget, "result")), "mass");
    assert_close(real_of(budget, "standard_uncertainty"), 0.01, 1e-9, "half of U");
    const json_t *line = json_array_get(json_object_get(budget, "inputs"), 0);
    assert_close(real_of(line, "sensitivity"), 1.0, 1e-9, "the mass is the input");
    assert_close(real_of(line, "share"), 1.0, 1e-12, "the only one");
    assert_null(json_object_get(budget, "draws"));
    json_decref(tree);
    end(&it);
}

/* ---- whatever is written ----------------------------------------------------------------------------------------- */

/* A linear congruential generator (Knuth's MMIX constants). */
static double draw(uint64_t *seed)
{
    *seed = *seed * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(*seed >> 11) / 9007199254740992.0;
}

/* From a millionth to nearly all of a value, even in the logarithm. */
static double draw_part(uint64_t *seed)
{
    return pow(10.0, -6.0 + 5.95 * draw(seed));
}

static const char *random_deck(uint64_t *seed, struct arena *arena)
{
    static const char *const methods[] = {"ideal-gas", "peng-robinson", "soave-redlich-kwong"};
    static const char *const fluids[] = {"argon", "carbon-dioxide", "blend"};
    static const double most[] = {280.0, 6.0, 0.7};
    const size_t method = (size_t)(3.0 * draw(seed)), fluid = (size_t)(3.0 * draw(seed)),
                 fill = (size_t)(3.0 * draw(seed));
    const double share = draw(seed), amount = most[fill] * (0.01 + draw(seed));
    struct text text = {.arena = arena};
    text_format(&text, "use \"small\"\nmethods { lead %s }\n", methods[method]);
    text_format(&text, "mixture blend by %s { carbon-dioxide %.4g %% +/- %.3g %% relative; argon rest }\n",
                draw(seed) < 0.5 ? "mole" : "mass", 100.0 * share, 100.0 * draw_part(seed));
    text_format(&text, "vessel ten { water-capacity 10.2 L +/- %.3g %% relative; test-pressure 300 barg }\n",
                100.0 * draw_part(seed));
    text_format(&text, "sheet settled-pressure { fluid %s; vessel ten; ", fluids[fluid]);
    text_format(&text, "%s %.4g%s",
                fill == 0   ? "fill"
                : fill == 1 ? "mass"
                            : "filling-ratio",
                amount,
                fill == 0   ? " bara"
                : fill == 1 ? " kg"
                            : "");
    text_format(&text, " +/- %.3g %% relative", 100.0 * draw_part(seed));
    if (fill == 0) {
        text_format(&text, " at 288.15 K +/- %.3g K", 60.0 * draw(seed));
    }
    text_format(&text, "; sweep temperature 268.15 K, 338.15 K; require at 338.15 K pressure <= test-pressure;\n");
    text_format(&text, "require at 268.15 K one phase; uncertainty every-row; monte-carlo draws 100 }\n");
    return text.bytes;
}

static void check_carried(const struct carried *carried, const char *deck)
{
    const bool is_told = carried->kind == CARRIED || carried->kind == CARRIED_NOT_LINEAR;
    if (is_told && !(carried->expanded > 0.0 && isfinite(carried->expanded))) {
        print_error("an uncertainty of %g in:\n%s\n", carried->expanded, deck);
        fail();
    }
}

static void check_part(const struct sheet_part *part, const char *deck)
{
    for (size_t i = 0; i < part->facts.count; i++) {
        check_carried(&part->facts.items[i].carried, deck);
    }
    for (size_t i = 0; part->table != NULL && i < part->table->row_count * part->table->column_count; i++) {
        check_carried(&part->table->cells[i].carried, deck);
    }
    if (part->budget != NULL) {
        double sum = 0.0;
        for (size_t i = 0; i < part->budget->line_count; i++) {
            sum += part->budget->lines[i].share;
        }
        assert_close(sum, 1.0, 1e-12, "shares of the whole");
        assert_true(part->budget->drawn.answered <= 100);
    }
}

/* Uncertainties up to nine tenths of the value, charges that are liquid, shares close to nothing: every number is one,
 * or is told as unknown. */
static void no_uncertainty_is_ever_not_a_number(void **state)
{
    (void)state;
    uint64_t seed = 2027;
    for (int i = 0; i < 24; i++) {
        struct arena *arena = arena_create(NULL);
        const char *deck = random_deck(&seed, arena);
        struct solved it = solve(deck);
        for (const struct sheet_part *part = it.sheet->first_part; part != NULL; part = part->next) {
            check_part(part, deck);
        }
        for (const struct requirement *one = it.sheet->first_requirement; one != NULL; one = one->next) {
            check_carried(&one->carried, deck);
        }
        struct text listing = {.arena = arena};
        report_listing(it.result, &listing);
        assert_null(strstr(listing.bytes, "nan"));
        assert_null(strstr(listing.bytes, " inf"));
        end(&it);
        arena_free(arena);
    }
}

/* ---- memory ------------------------------------------------------------------------------------------------------ */

static void solve_in(struct arena *arena, void *context)
{
    struct elaborated it = elaborate_in(arena, arena_copy_text(arena, context, strlen(context)));
    assert_non_null(it.tree);
    assert_non_null(filling_solve(it.tree, "0.0.0", arena));
}

/* However few blocks there are, it ends there and gives all of them back. */
static void running_out_of_memory_ends_the_run(void **state)
{
    (void)state;
    static char quick[] = HEAD VESSEL BY_MASS SHEET "monte-carlo draws 100 }\n";
    static char whole[] = HEAD "let mass = 1.3 kg +/- 0.02 kg\n" PLAIN_VESSEL
                               "sheet settled-pressure { fluid vapid; vessel ten; mass mass; monte-carlo draws 100 }\n";
    assert_true(ration_until_done(solve_in, quick) > 10);
    for (size_t blocks = 3; blocks < 200; blocks += 7) {
        ration_run(blocks, solve_in, whole);
    }
}

/* ---- shifted cases ----------------------------------------------------------------------------------------------- */

static void a_shifted_value_is_checked_and_carried_on(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(HEAD VESSEL BY_FILL SHEET "}\n");
    assert_int_equal(it.tree->spread_count, 4);
    const struct case_spread *capacity = NULL;
    for (size_t i = 0; i < it.tree->spread_count; i++) {
        capacity = strcmp(it.tree->spreads[i].name, "water-capacity") == 0 ? &it.tree->spreads[i] : capacity;
    }
    assert_non_null(capacity);
    assert_string_equal(capacity->group, "vessel ten");
    assert_string_equal(capacity->si_unit, "m3");
    assert_close(capacity->uncertainty, 0.06 * LITRE, 1e-12, "as written");
    struct case_shift shift = {.at = capacity->at, .by = 0.3 * LITRE};
    struct diagnostics unheard = {.arena = it.arena};
    const struct case_tree *tree = case_elaborate_shifted(it.deck, &shift, 1, it.arena, &unheard);
    assert_non_null(tree);
    assert_close(tree->sheets[0].vessel->water_capacity.value, 10.5 * LITRE, 1e-14, "10.2 L and 0.3 L");
    assert_int_equal(tree->spread_count, 0);
    shift.by = -11.0 * LITRE;
    assert_null(case_elaborate_shifted(it.deck, &shift, 1, it.arena, &unheard));
    elaborated_end(&it);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_mass_and_a_volume_reach_the_pressure),
        cmocka_unit_test(a_fill_pressure_becomes_mass_once),
        cmocka_unit_test(shares_of_a_budget_are_the_whole),
        cmocka_unit_test(every_row_is_shown_where_it_is_asked_for),
        cmocka_unit_test(a_sheet_without_margins_has_a_budget_of_its_last_pressure),
        cmocka_unit_test(the_rest_of_a_mixture_gives_way),
        cmocka_unit_test(fractions_without_a_rest_are_brought_to_a_whole),
        cmocka_unit_test(fractions_of_mass_become_amounts),
        cmocka_unit_test(molar_masses_count_too),
        cmocka_unit_test(what_a_let_names_moves_together),
        cmocka_unit_test(the_air_at_the_gauge_is_an_input),
        cmocka_unit_test(a_margin_smaller_than_its_uncertainty_is_marked),
        cmocka_unit_test(the_guarded_mass_keeps_the_limit_by_its_uncertainty),
        cmocka_unit_test(a_deck_without_uncertainties_says_nothing_of_them),
        cmocka_unit_test(another_vessel_is_no_matter_of_this_sheet),
        cmocka_unit_test(draws_need_something_uncertain),
        cmocka_unit_test(draws_agree_where_the_gas_law_is_nearly_linear),
        cmocka_unit_test(a_share_is_never_drawn_below_nothing),
        cmocka_unit_test(the_quick_draws_are_those_of_the_sheet),
        cmocka_unit_test(quick_draws_know_fractions_of_mass_and_filling_ratios),
        cmocka_unit_test(the_listing_shows_what_is_uncertain),
        cmocka_unit_test(programs_get_the_same_in_si),
        cmocka_unit_test(the_words_of_draws_are_checked),
        cmocka_unit_test(no_uncertainty_is_ever_not_a_number),
        cmocka_unit_test(running_out_of_memory_ends_the_run),
        cmocka_unit_test(a_shifted_value_is_checked_and_carried_on),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
