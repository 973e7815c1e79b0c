/* Preparation sheets from deck text: masses, pressures and uncertainties against ideal gases by hand, what cannot be
 * made, and random recipes of library gases.
 *
 * TAREWRIGHT_RECIPES in the environment is the number of random ones, 150 unless given. */
#include "filling/solve.h"

#include "support/elaborated.h"
#include "support/library_deck.h"
#include "support/result_reading.h"

#include <gsl/gsl_rng.h>
#include <math.h>
#include <stdlib.h>

#define R 8.31446261815324

/* ---- ideal gases by hand ----------------------------------------------------------------------------------------- */

/* Invented gases: `light` 4 g/mol, `heavy` 40 g/mol, `trace` 30 g/mol. */
static const char DECK[] =
    "component light { molar-mass 4 g/mol; critical-temperature 5 K; critical-pressure 2 bara; acentric 0 }\n"
    "component heavy { molar-mass 40 g/mol; critical-temperature 150 K; critical-pressure 48 bara; acentric 0 }\n"
    "component trace { molar-mass 30 g/mol; critical-temperature 180 K; critical-pressure 50 bara; acentric 0 }\n"
    "mixture target by mole { light 20 %; heavy rest }\n"
    "mixture parent-light by mole { trace 0.1 % +/- 0.02 %; light rest }\n"
    "mixture parent-heavy by mass { trace 0.2 % +/- 0.04 %; heavy rest }\n"
    "mixture half by mole { light 50 %; heavy rest }\n"
    "vessel ten { water-capacity 10 L; test-pressure 300 barg; tare 11 kg }\n"
    "vessel other { water-capacity 30 L; test-pressure 300 barg }\n"
    "charge lot { fluid target; vessel ten; moles 40 mol }\n"
    "charge leftover { fluid half; vessel ten; moles 8 mol }\n"
    "charge elsewhere { fluid half; vessel other; moles 8 mol }\n"
    "methods { lead ideal-gas }\n";

static struct elaborated elaborate_behind(const char *sheet)
{
    struct arena *arena = arena_create(NULL);
    const char *text = arena_format(arena, "%s%s", DECK, sheet);
    return elaborate_in(arena, arena_copy_text(arena, text, strlen(text)));
}

static const struct result *solve_behind(const char *sheet, struct elaborated *it)
{
    *it = elaborate_behind(sheet);
    if (it->tree == NULL) {
        fail_msg("%s", elaborated_messages(it));
    }
    return filling_solve(it->tree, "0.0.0", it->arena);
}

static double number_in(const struct result *result, const char *table, size_t row, const char *column)
{
    const struct table *of = result_table(result->first_sheet, table, NULL);
    assert_non_null(of);
    return result_cell(of, row, column)->number;
}

/* 40 mol, 20 % of them light: 8 mol x 4 g/mol = 32 g, 32 mol x 40 g/mol = 1280 g; p = n R T / V. */
static void ideal_gases_give_masses_and_pressures_by_hand(void **state)
{
    (void)state;
    struct elaborated it;
    const struct result *result = solve_behind("sheet preparation { charge lot; make by weight\n"
                                               "  add light at 290 K\n  add heavy at 300 K }\n",
                                               &it);
    const struct table *steps = result_table(result->first_sheet, "additions", "ideal-gas");
    assert_non_null(steps);
    assert_close(result_cell(steps, 0, "mass-to-add")->number, 0.032, 1e-12, "by hand");
    assert_close(result_cell(steps, 1, "mass-to-add")->number, 1.280, 1e-12, "by hand");
    assert_close(result_cell(steps, 1, "running-mass")->number, 1.312, 1e-12, "by hand");
    assert_close(result_cell(steps, 1, "gross-weight")->number, 12.312, 1e-12, "by hand");
    assert_close(result_cell(steps, 0, "gauge-pressure")->number, 8.0 * R * 290.0 / 0.01, 1e-10, "n R T / V");
    assert_close(result_cell(steps, 1, "gauge-pressure")->number, 40.0 * R * 300.0 / 0.01, 1e-10, "n R T / V");
    assert_close(number_in(result, "composition by the recipe", 0, "made"), 0.2, 1e-12, "the target");
    elaborated_end(&it);
}

/* Impurities and a heel: what must hold whatever the numbers are. */
static void composition_and_mass_close(void **state)
{
    (void)state;
    static const char *const ways[] = {"weight", "pressure"};
    for (size_t k = 0; k < 2; k++) {
        struct elaborated it;
        char sheet[400];
        snprintf(sheet, sizeof sheet,
                 "sheet preparation { charge lot; make by %s; heel leftover; balance 0.1 g; gauge 0.5 bar\n"
                 "  add parent-light at 290 K\n  add parent-heavy at 300 K }\n",
                 ways[k]);
        const struct result *result = solve_behind(sheet, &it);
        double sum = 0.0;
        for (size_t row = 0; row < 3; row++) {
            sum += number_in(result, "composition by the recipe", row, "made");
        }
        assert_close(sum, 1.0, 1e-12, "a whole");
        assert_close(number_in(result, "composition by the recipe", 0, "made"), 0.2, 1e-12, "the target");
        const struct fact *heel = result_fact(result->first_sheet, "heel-mass", NULL);
        assert_close(heel->value, 4.0 * 0.004 + 4.0 * 0.040, 1e-12, "by hand");
        const double added = number_in(result, "additions", 0, "mass-to-add") +
                             number_in(result, "additions", 1, "mass-to-add") + heel->value;
        assert_close(added, 1.312, 1e-12, "the mass of the charge");
        assert_close(number_in(result, "additions", 1, "running-mass"), 1.312, 1e-12, "the same");
        elaborated_end(&it);
    }
}

/* Of ideal gases x = (p1 / T1) / (p2 / T2), so that u(x)^2 / x^2 is the sum of those of the four readings: with
 * p1 = 8 R 290 / V, p2 = 40 R 300 / V, u(p) = 0.25 bar and u(T) = 1 K. And ideal partial pressures are right. */
static void readings_of_ideal_gases_give_the_uncertainty_by_hand(void **state)
{
    (void)state;
    struct elaborated it;
    const struct result *result = solve_behind("sheet preparation { charge lot; make by pressure; gauge 0.5 bar\n"
                                               "  add light at 290 K +/- 2 K\n  add heavy at 300 K +/- 2 K }\n",
                                               &it);
    const double p1 = 8.0 * R * 290.0 / 0.01, p2 = 40.0 * R * 300.0 / 0.01;
    const double square = pow(0.25e5 / p1, 2.0) + pow(0.25e5 / p2, 2.0) + pow(1.0 / 290.0, 2.0) + pow(1.0 / 300.0, 2.0);
    assert_close(number_in(result, "composition by the recipe", 0, "U"), 2.0 * 0.2 * sqrt(square), 1e-4, "by hand");
    for (size_t row = 0; row < 2; row++) {
        assert_near(number_in(result, "gauge targets beside ideal partial pressures", row, "ideal-less-real"), 0.0,
                    1e-3, "ideal gases are ideal");
        assert_near(number_in(result, "what the ideal pressures would make", row, "off-by"), 0.0, 1e-9, "so is this");
    }
    elaborated_end(&it);
}

/* Weighed masses make what they make: 30 g and 1300 g are 7.5 mol and 32.5 mol, 18.75 % light; u by the balance alone
 * is x (1 - x) sqrt((u1/m1)^2 + (u2/m2)^2). Off by 6.25 %, which 5 % does not allow. */
static void weighed_masses_make_what_they_make(void **state)
{
    (void)state;
    struct elaborated it;
    const struct result *result = solve_behind("sheet preparation { charge lot; make by weight; tolerance 5 %\n"
                                               "  weighed heavy 1300 g +/- 1 g\n  weighed light 30 g +/- 0.1 g\n"
                                               "  add light at 290 K\n  add heavy at 300 K }\n",
                                               &it);
    const double x = 0.1875, part = sqrt(pow(0.05 / 30.0, 2.0) + pow(0.5 / 1300.0, 2.0));
    assert_close(number_in(result, "composition as weighed", 0, "made"), x, 1e-12, "by hand");
    assert_close(number_in(result, "composition as weighed", 0, "off-target-by"), -0.0625, 1e-12, "by hand");
    assert_close(number_in(result, "composition as weighed", 0, "U"), 2.0 * x * (1.0 - x) * part, 1e-9, "by hand");
    assert_int_equal(result->first_sheet->first_requirement->state, REQUIREMENT_NOT_MET);
    elaborated_end(&it);
}

/* A bundle takes so many times the masses, another vessel as its capacity. */
static void every_vessel_has_its_masses(void **state)
{
    (void)state;
    struct elaborated it;
    const struct result *result =
        solve_behind("sheet preparation { charge lot; make by weight; together 4; also other 2\n"
                     "  add light at 290 K\n  add heavy at 300 K }\n",
                     &it);
    assert_close(number_in(result, "bundle of 4, filled together", 2, "mass-to-add"), 4.0 * 1.312, 1e-12, "by hand");
    assert_close(number_in(result, "2 of vessel other, together", 0, "mass-to-add"), 6.0 * 0.032, 1e-12, "by hand");
    elaborated_end(&it);
}

/* ---- what cannot be ---------------------------------------------------------------------------------------------- */

static void what_cannot_be_made_is_said_with_what_would_help(void **state)
{
    (void)state;
    static const struct {
        const char *sheet, *words;
    } cases[] = {
        /* 8 mol of half hold 4 mol of light, and a target of 5 % of 40 mol takes 2: half may stay, 4 mol R 300 K / V */
        {"mixture lean by mole { light 5 %; heavy rest }\ncharge little { fluid lean; vessel ten; moles 40 mol }\n"
         "sheet preparation { charge little; make by weight; heel leftover; add light at 300 K; add heavy at 300 K }\n",
         "bleed it down to 8.96 barg"},
        {"mixture rich by mole { light 20 %; heavy rest }\nmixture poor by mole { light 1 %; heavy rest }\n"
         "sheet preparation { charge lot; make by weight; add poor at 300 K; add heavy at 300 K }\n",
         "the richest, poor, has 1 %"},
        {"sheet preparation { charge lot; make by weight; add light at 300 K; add heavy at 300 K { "
         "supply-pressure 50 barg } }\n",
         /* (50 + 1.01325) bar V / (R T) of 40 mol */ "enough for 0.671 kg in all"},
        {"mixture burns by mole { methane 3 %; oxygen rest }\n"
         "component methane { molar-mass 16 g/mol; hazard flammable; critical-temperature 190 K; critical-pressure 46 "
         "bara; acentric 0 }\n"
         "component oxygen { molar-mass 32 g/mol; hazard oxidising; critical-temperature 154 K; critical-pressure 50 "
         "bara; acentric 0 }\n"
         "charge hot { fluid burns; vessel ten; moles 40 mol }\n"
         "sheet preparation { charge hot; make by weight; add methane at 300 K; add oxygen at 300 K }\n",
         "the sheet names no assessment"},
    };
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        struct elaborated it;
        const struct result *result = solve_behind(cases[k].sheet, &it);
        bool is_said = false;
        for (const struct requirement *one = result->first_sheet->first_requirement; one != NULL; one = one->next) {
            is_said = is_said || (one->state == REQUIREMENT_NOT_MET && one->reason != NULL &&
                                  strstr(one->reason, cases[k].words) != NULL);
        }
        if (!is_said) {
            fail_msg("nothing says '%s'; '%s'", cases[k].words, result->first_sheet->first_requirement->reason);
        }
        elaborated_end(&it);
    }
}

static void a_recipe_that_cannot_be_put_together_is_refused(void **state)
{
    (void)state;
    static const struct {
        const char *sheet;
        enum code code;
    } decks[] = {
        {"sheet preparation { make by weight; add light at 300 K }\n", CODE_E214},
        {"sheet preparation { charge lot; add light at 300 K }\n", CODE_E214},
        {"sheet preparation { charge lot; make by weight }\n", CODE_E214},
        {"sheet preparation { charge lot; make by guess; add light at 300 K }\n", CODE_E213},
        {"sheet preparation { charge lot; make by weight; add light }\n", CODE_E203},
        {"sheet preparation { charge lot; make by weight; add dark at 300 K }\n", CODE_E205},
        {"sheet preparation { charge lot; make by weight; add light at 300 K; add light at 300 K }\n", CODE_E207},
        {"sheet preparation { charge lot; make by weight; add light at 300 K; add heavy at 300 K; add half at 300 K "
         "}\n",
         CODE_E232},
        {"sheet preparation { charge lot; make by weight; add light at 300 K; weighed heavy 1 kg }\n", CODE_E232},
        {"sheet preparation { charge lot; make by weight; heel elsewhere; add light at 300 K }\n", CODE_E232},
        {"sheet preparation { charge lot; make by weight; add light at 300 K { fill-time 3 min } }\n", CODE_E214},
        {"mixture real by volume at (300 K, 1 bara) { light 50 %; heavy rest }\n"
         "sheet preparation { charge lot; make by weight; add light at 300 K; add real at 300 K }\n",
         CODE_E232},
    };
    for (size_t i = 0; i < sizeof decks / sizeof *decks; i++) {
        struct elaborated it = elaborate_behind(decks[i].sheet);
        assert_null(it.tree);
        if (it.diagnostics.items[0].code != decks[i].code) {
            fail_msg("%zu: %s", i, elaborated_messages(&it));
        }
        elaborated_end(&it);
    }
}

/* ---- random recipes ---------------------------------------------------------------------------------------------- */

static const char *const GASES[] = {"nitrogen", "argon",   "helium",         "oxygen",   "carbon-dioxide",
                                    "methane",  "propane", "n-butane",       "hydrogen", "sulfur-hexafluoride",
                                    "ethylene", "ethane",  "carbon-monoxide"};
enum { GAS_COUNT = sizeof GASES / sizeof *GASES };

static const char *random_deck(unsigned long seed, struct arena *arena)
{
    gsl_rng *rng = gsl_rng_alloc(gsl_rng_mt19937);
    gsl_rng_set(rng, seed);
    const size_t first = gsl_rng_uniform_int(rng, GAS_COUNT),
                 second = (first + 1 + gsl_rng_uniform_int(rng, 5)) % GAS_COUNT;
    const size_t third = (second + 1 + gsl_rng_uniform_int(rng, 5)) % GAS_COUNT;
    const bool has_third = third != first && gsl_rng_uniform(rng) < 0.5;
    const double x = pow(10.0, -4.0 + 3.6 * gsl_rng_uniform(rng)), y = 0.3 * gsl_rng_uniform(rng);
    const char *in_target = has_third ? arena_format(arena, "%s %.6f %%;", GASES[third], 100.0 * y) : "";
    const char *added =
        has_third ? arena_format(arena, "add %s at %.1f degC\n", GASES[third], 40.0 * gsl_rng_uniform(rng)) : "";
    const char *text = arena_format(
        arena,
        "use \"gases\"\nmethods { lead peng-robinson }\n"
        "mixture goal by mole { %s %.6f %%; %s %s rest }\n"
        "mixture parent by %s { %s %.4f %% +/- 0.01 %%; %s rest }\n"
        "mixture old by mole { %s %.4f %%; %s rest }\n"
        "vessel v { water-capacity 50 L; test-pressure 300 barg; working-pressure 200 barg }\n"
        "charge full { fluid goal; vessel v; fill %.3f barg at %.1f degC }\n"
        "charge rest-of { fluid old; vessel v; fill %.3f barg at 15 degC }\n"
        "sheet preparation { charge full; make by %s; order %s; balance 1 g; gauge 0.5 bar; tolerance 2 %%\n"
        "  assessed \"none, a test\"; %s\n"
        "  add parent at %.1f degC { supply-pressure %.2f barg }\n  %s"
        "  add %s at %.1f degC { supply-pressure %.2f barg } }\n",
        GASES[first], 100.0 * x, in_target, GASES[second], gsl_rng_uniform(rng) < 0.3 ? "mass" : "mole", GASES[second],
        gsl_rng_uniform(rng), GASES[first], GASES[first], 60.0 * gsl_rng_uniform(rng), GASES[second],
        1.0 + 249.0 * gsl_rng_uniform(rng), 40.0 * gsl_rng_uniform(rng), 20.0 * gsl_rng_uniform(rng),
        gsl_rng_uniform(rng) < 0.5 ? "weight" : "pressure", gsl_rng_uniform(rng) < 0.5 ? "proposed" : "as-written",
        gsl_rng_uniform(rng) < 0.4 ? "heel rest-of" : "", 40.0 * gsl_rng_uniform(rng), 300.0 * gsl_rng_uniform(rng),
        added, GASES[second], 40.0 * gsl_rng_uniform(rng), 300.0 * gsl_rng_uniform(rng));
    gsl_rng_free(rng);
    return text;
}

/* What is told of a recipe: no mass below zero, all fractions from 0 to 1 with 1 for their sum, or a reason. */
static bool is_told_rightly(const struct result *result)
{
    const struct result_sheet *sheet = result->first_sheet;
    const struct table *steps = result_table(sheet, "additions", NULL);
    const struct table *made = result_table(sheet, "composition by the recipe", NULL);
    if (steps == NULL || made == NULL) {
        const struct requirement *one = sheet->first_requirement;
        return result->is_undecided || (one != NULL && one->state == REQUIREMENT_NOT_MET && one->reason != NULL);
    }
    double sum = 0.0;
    bool is_right = sheet->first_requirement != NULL;
    for (size_t row = 0; row < steps->row_count; row++) {
        is_right = is_right && result_cell(steps, row, "mass-to-add")->number >= -1e-12 &&
                   result_cell(steps, row, "gauge-pressure")->number > 0.0;
    }
    for (size_t row = 0; row < made->row_count; row++) {
        const double x = result_cell(made, row, "made")->number;
        is_right = is_right && x >= -1e-15 && x <= 1.0;
        sum += x;
    }
    return is_right && fabs(sum - 1.0) <= 1e-12;
}

static void random_recipes_end_with_a_verdict_or_a_reason(void **state)
{
    (void)state;
    const char *asked = getenv("TAREWRIGHT_RECIPES");
    const unsigned long count = asked == NULL ? 150 : strtoul(asked, NULL, 10);
    unsigned long undecided = 0;
    for (unsigned long seed = 1; seed <= count; seed++) {
        struct arena *arena = arena_create(NULL);
        const char *text = random_deck(seed, arena);
        const struct case_tree *tree = library_deck(text, arena);
        const struct result *result = filling_solve(tree, "0.0.0", arena);
        undecided += result->is_undecided;
        if (!is_told_rightly(result)) {
            fail_msg("seed %lu:\n%s", seed, text);
        }
        arena_free(arena);
    }
    assert_true(undecided * 50 <= count);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(ideal_gases_give_masses_and_pressures_by_hand),
        cmocka_unit_test(composition_and_mass_close),
        cmocka_unit_test(readings_of_ideal_gases_give_the_uncertainty_by_hand),
        cmocka_unit_test(weighed_masses_make_what_they_make),
        cmocka_unit_test(every_vessel_has_its_masses),
        cmocka_unit_test(what_cannot_be_made_is_said_with_what_would_help),
        cmocka_unit_test(a_recipe_that_cannot_be_put_together_is_refused),
        cmocka_unit_test(random_recipes_end_with_a_verdict_or_a_reason),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
