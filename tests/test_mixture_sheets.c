/* The four sheets on mixtures, from deck text to result tree.
 *
 * The numbers of 2 % n-butane in nitrogen were evaluated independently: the 1976 equation of Peng and Robinson with
 * these constants and kij = 0.08, R = 8.31446261815324 J/(mol K), written anew in Python and solved by Newton's method
 * for equal fugacities to 1e-14. */
#include "filling/solve.h"

#include "support/check.h"
#include "support/elaborated.h"
#include "support/result_reading.h"

#include <math.h>
#include <stdio.h>

#define BAR 1e5

static const char GASES[] =
    "component n-butane { molar-mass 58.1222 g/mol; critical-temperature 425.125 K; critical-pressure 3.796 MPa\n"
    "  acentric 0.2008; hazard flammable }\n"
    "component nitrogen { molar-mass 28.01348 g/mol; critical-temperature 126.192 K; critical-pressure 3.3958 MPa\n"
    "  acentric 0.0372 }\n"
    "component propane { molar-mass 44.09562 g/mol; critical-temperature 369.89 K; critical-pressure 4.2512 MPa\n"
    "  acentric 0.1521; hazard flammable }\n"
    "component oxygen { molar-mass 31.9988 g/mol; critical-temperature 154.581 K; critical-pressure 5.043 MPa\n"
    "  acentric 0.0222; hazard oxidising }\n"
    "pair nitrogen n-butane { peng-robinson kij 0.08 }\n"
    "pair nitrogen propane { peng-robinson kij 0.085 }\n"
    "mixture span by mole { n-butane 2 %; nitrogen rest }\n"
    "vessel ten { water-capacity 10 L; test-pressure 300 barg }\n"
    "methods { lead peng-robinson }\n";

struct answered {
    struct elaborated it;
    const struct result *result;
    const struct result_sheet *sheet; /* the first */
};

static struct answered answer(const char *deck)
{
    struct arena *arena = arena_create(NULL);
    struct answered answered = {.it =
                                    elaborate_in(arena, arena_copy_text(arena, arena_format(arena, "%s%s", GASES, deck),
                                                                        strlen(GASES) + strlen(deck)))};
    if (answered.it.tree == NULL) {
        fail_msg("%s", elaborated_messages(&answered.it));
    }
    answered.result = filling_solve(answered.it.tree, "0.0.0", arena);
    answered.sheet = answered.result->first_sheet;
    return answered;
}

static double fact_of(const struct answered *answered, const char *name)
{
    const struct fact *fact = result_fact(answered->sheet, name, NULL);
    if (fact == NULL) {
        fail_msg("no fact %s", name);
    }
    return fact->value;
}

static double cell_of(const struct table *table, size_t row, const char *column)
{
    const struct cell *cell = table == NULL ? NULL : result_cell(table, row, column);
    if (cell == NULL || cell->kind != CELL_NUMBER) {
        fail_msg("no number in row %zu of %s", row, column);
    }
    return cell->number;
}

/* ---- permissible charge ------------------------------------------------------------------------------------------ */

static void no_liquid_ends_at_the_lowest_dew_density(void **state)
{
    (void)state;
    struct answered answered = answer("rule cold { from -25 degC to 50 degC no liquid }\n"
                                      "sheet permissible-charge { fluid span; vessel ten; rules cold }\n");
    assert_close(fact_of(&answered, "mass"), 0.418430987119, 1e-9, "dew density at 248.15 K in 10 L: independent");
    assert_close(fact_of(&answered, "governing-temperature"), 248.15, 1e-9, "the coldest is the worst");
    assert_string_equal(result_fact(answered.sheet, "governing-component", NULL)->text, "n-butane");
    const struct table *table = result_table(
        answered.sheet,
        "dew limit of 'from -25 degC to 50 degC no liquid', at -25 degC, beside the rule of partial pressures", NULL);
    assert_close(cell_of(table, 0, "dew-pressure"), 2903366.95167, 1e-9, "independent");
    assert_string_equal(result_cell(table, 0, "condensing")->text, "n-butane");
    assert_close(cell_of(table, 0, "ideal-pressure"), 1804791.13385, 1e-9, "psat / 0.02: independent");
    assert_close(cell_of(table, 0, "ideal-mass"), 0.250312285888, 1e-9, "p M V / (R T): independent");
    assert_close(cell_of(table, 0, "enhancement"), 2903366.95167 / 1804791.13385, 1e-9, "0.02 p / psat");
    table = result_table(answered.sheet, "the first liquid at -25 degC", "peng-robinson");
    assert_close(cell_of(table, 0, "first-liquid"), 0.948984788042, 1e-8, "n-butane: independent");
    assert_close(cell_of(table, 0, "vapour-pressure"), 36095.8226769, 1e-9, "of n-butane by itself: independent");
    elaborated_end(&answered.it);
}

/* Fluids whose dew pressures lie below 1 Pa. Their dew points were evaluated independently: the 1976 equation of Peng
 * and Robinson in 60 digits, by successive substitution for equal fugacities to 1e-40. */
#define HEAVY_IN_METHANE                                                                                         \
    "component x-ch4 { molar-mass 16.0425 g/mol; critical-temperature 190.564 K; critical-pressure 4599200 Pa\n" \
    "  acentric 0.01142 }\n"                                                                                     \
    "component x-nc16 { molar-mass 226.441 g/mol; critical-temperature 722.1 K; critical-pressure 1479850 Pa\n"  \
    "  acentric 0.744 }\n"                                                                                       \
    "pair x-ch4 x-nc16 { peng-robinson kij 0.06 }\n"                                                             \
    "mixture thin by mole { x-ch4 95 %; x-nc16 5 % }\n"
#define BUTANE_IN_COLD_NITROGEN                                                                                  \
    "component x-nc4 { molar-mass 58.1222 g/mol; critical-temperature 425.125 K; critical-pressure 3796000 Pa\n" \
    "  acentric 0.201 }\n"                                                                                       \
    "component x-n2 { molar-mass 28.0134 g/mol; critical-temperature 126.192 K; critical-pressure 3395800 Pa\n"  \
    "  acentric 0.0372 }\n"                                                                                      \
    "pair x-nc4 x-n2 { peng-robinson kij 0.08 }\n"                                                               \
    "mixture thin by mole { x-nc4 2 %; x-n2 98 % }\n"

static void a_dew_pressure_below_one_pascal_leaves_practically_no_charge(void **state)
{
    (void)state;
    static const struct {
        const char *range;
        double coldest, density;
    } cases[] = {
        {"at -25 degC", 248.15, 1.40062229698873e-7},
        {"from -25 degC to 5 degC", 248.15, 1.40062229698873e-7},
        {"from -25 degC to 50 degC", 248.15, 1.40062229698873e-7},
        {"at 5 degC", 278.15, 7.87212679132213e-6},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        char deck[2000];
        snprintf(deck, sizeof deck,
                 "%srule cold { %s no liquid; at 65 degC pressure <= test-pressure }\n"
                 "sheet permissible-charge { fluid thin; vessel ten; rules cold; assessed \"x\" }\n",
                 HEAVY_IN_METHANE, cases[i].range);
        struct answered answered = answer(deck);
        assert_close(fact_of(&answered, "mass"), 0.01 * cases[i].density, 1e-8, "dew density in 10 L: independent");
        assert_close(fact_of(&answered, "governing-temperature"), cases[i].coldest, 1e-12, "the coldest is the worst");
        assert_null(result_fact(answered.sheet, "coldest-above-cricondentherm", NULL));
        assert_true(result_has_note(answered.sheet, "that is practically no charge"));
        elaborated_end(&answered.it);
    }
}

/* The dew densities at the cold ends, 5.42741192421919e-10 and 1.7065596475794e-7 kg/m3 (independent, as above), lie
 * between each two charges. */
static void the_coldest_temperature_is_the_worst_where_dew_pressures_are_tiny(void **state)
{
    (void)state;
    static const struct {
        const char *density, *range;
        enum requirement_state state;
    } cases[] = {
        {"5.427411e-10", "from 85 K to 110 K", REQUIREMENT_MET},
        {"5.427412e-10", "from 85 K to 110 K", REQUIREMENT_NOT_MET},
        {"1.706559e-7", "from 99.13 K to 171.82 K", REQUIREMENT_MET},
        {"1.706560e-7", "from 99.13 K to 171.82 K", REQUIREMENT_NOT_MET},
        {"2e-5", "from 99.13 K to 171.82 K", REQUIREMENT_NOT_MET},
        {"1", "from 85 K to 110 K", REQUIREMENT_NOT_MET},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        char deck[2000];
        snprintf(deck, sizeof deck,
                 "%scharge some { fluid thin; vessel ten; density %s kg/m3 }\n"
                 "sheet settled-pressure { charge some; sweep temperature 20 degC; require %s no liquid }\n",
                 BUTANE_IN_COLD_NITROGEN, cases[i].density, cases[i].range);
        struct answered answered = answer(deck);
        assert_int_equal(answered.sheet->first_requirement->state, cases[i].state);
        elaborated_end(&answered.it);
    }
}

/* At 119 K its dew pressure is 5.6e-23 Pa: independent, as above; at 60 K it is 6.4e-66 Pa. */
static void a_fluid_that_is_unstable_however_thin_gets_no_charge(void **state)
{
    (void)state;
    static const char *const ranges[] = {"at 119 K", "at 60 K", "from 60 K to 300 K"};
    for (size_t i = 0; i < sizeof ranges / sizeof *ranges; i++) {
        char deck[2000];
        snprintf(deck, sizeof deck,
                 "%srule cold { %s no liquid; at 65 degC pressure <= test-pressure }\n"
                 "sheet permissible-charge { fluid thin; vessel ten; rules cold; assessed \"x\" }\n",
                 HEAVY_IN_METHANE, ranges[i]);
        struct answered answered = answer(deck);
        const struct fact *mass = result_fact(answered.sheet, "mass", NULL);
        assert_true(mass == NULL || mass->value < 1e-28);
        assert_null(result_fact(answered.sheet, "coldest-above-cricondentherm", NULL));
        assert_true(result_has_note(answered.sheet, "no state was found thin enough"));
        elaborated_end(&answered.it);
    }
}

/* The vessel's phases are found on their own, without the edges. */
static void no_liquid_and_the_table_of_states_agree_where_the_dew_pressure_is_tiny(void **state)
{
    (void)state;
    struct answered answered =
        answer(HEAVY_IN_METHANE "charge dense { fluid thin; vessel ten; density 100 kg/m3 }\n"
                                "sheet settled-pressure { charge dense; sweep temperature -25 degC, 0 degC\n"
                                "  require from -25 degC to 5 degC no liquid; require at 0 degC no liquid\n"
                                "  require at 0 degC one phase }\n");
    size_t count = 0;
    for (const struct requirement *one = answered.sheet->first_requirement; one != NULL; one = one->next) {
        assert_int_equal(one->state, REQUIREMENT_NOT_MET);
        count++;
    }
    assert_int_equal(count, 3);
    elaborated_end(&answered.it);
}

static void a_denser_window_is_shown_and_never_permitted(void **state)
{
    (void)state;
    struct answered answered = answer("rule cold { at -25 degC no liquid }\n"
                                      "sheet permissible-charge { fluid span; vessel ten; rules cold }\n");
    assert_true(result_has_note(answered.sheet, "would condense in use at 140.99 bara: shown, never permitted"));
    assert_true(fact_of(&answered, "mass") < 0.42); /* and not the 2.125 kg of the window */
    elaborated_end(&answered.it);
}

static void one_phase_asks_about_the_density_of_the_vessel_alone(void **state)
{
    (void)state;
    struct answered answered = answer("charge dense { fluid span; vessel ten; density 0.2126 kg/L }\n"
                                      "charge inside { fluid span; vessel ten; density 0.2124 kg/L }\n"
                                      "sheet settled-pressure { charge dense; sweep temperature -25 degC\n"
                                      "  require at -25 degC one phase; require at -25 degC no liquid }\n"
                                      "sheet settled-pressure { charge inside; sweep temperature -25 degC\n"
                                      "  require at -25 degC one phase }\n");
    /* Between the two lies the upper dew density, 212.4968 kg/m3: independent. */
    const struct requirement *one = answered.sheet->first_requirement;
    assert_int_equal(one->state, REQUIREMENT_MET);
    assert_non_null(strstr(one->reason, "would condense in use"));
    assert_int_equal(one->next->state, REQUIREMENT_NOT_MET);
    assert_int_equal(answered.sheet->next->first_requirement->state, REQUIREMENT_NOT_MET);
    elaborated_end(&answered.it);
}

static void near_the_cricondentherm_the_jump_of_the_limit_is_warned_of(void **state)
{
    (void)state;
    struct answered answered = answer("rule cold { from -15 degC to 50 degC no liquid }\n"
                                      "rule cool { from -10 degC to 50 degC no liquid }\n"
                                      "rule hot { at 65 degC pressure <= test-pressure }\n"
                                      "sheet permissible-charge { fluid span; vessel ten; rules cold, hot }\n"
                                      "sheet permissible-charge { fluid span; vessel ten; rules cool, hot }\n");
    assert_close(fact_of(&answered, "cricondentherm"), 255.36556100821, 1e-8, "highest dew temperature: independent");
    assert_close(fact_of(&answered, "coldest-above-cricondentherm"), 258.15 - 255.36556100821, 1e-5, "difference");
    assert_int_equal(result_warnings(answered.result, CODE_W334), 1); /* -10 degC is more than 5 K away */
    assert_non_null(strstr(answered.result->warnings.items[0].text, "-20 degC is 0."));
    elaborated_end(&answered.it);
}

static void a_limit_on_vapour_pressure_is_held_against_the_bubble_pressure(void **state)
{
    (void)state;
    static const char deck[] = "mixture lpg by mole { propane 60 %%; n-butane rest }\n"
                               "entry \"UN 1965 test\" { limit at 50 degC vapour-pressure <= %s }\n"
                               "rule hot { at 65 degC pressure <= test-pressure }\n"
                               "sheet permissible-charge { fluid lpg; vessel ten; rules hot; entry \"UN 1965 test\" }\n"
                               "sheet saturation { fluid lpg; sweep temperature 50 degC }\n";
    struct arena *arena = arena_create(NULL);
    struct answered tight = answer(arena_format(arena, deck, "10 bara"));
    const struct table *points =
        result_table(tight.sheet->next, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    const double bubble = cell_of(points, 1, "pressure");
    assert_true(bubble > 10.0 * BAR && bubble < 14.0 * BAR); /* between 5.0 and 17.1 bar, those of the pure gases */
    assert_int_equal(result_requirement(tight.sheet, "may be filled")->state, REQUIREMENT_NOT_MET);
    struct answered wide = answer(arena_format(arena, deck, "14 bara"));
    const struct requirement *limit = result_requirement(wide.sheet, "vapour-pressure");
    assert_int_equal(limit->state, REQUIREMENT_MET);
    assert_close(limit->margin, 14.0 * BAR - bubble, 1e-7, "the saturation sheet's bubble pressure");
    elaborated_end(&tight.it);
    elaborated_end(&wide.it);
    arena_free(arena);
}

static void fuel_with_oxidant_needs_an_assessment(void **state)
{
    (void)state;
    static const char deck[] = "mixture mix by mole { propane 1 %%; oxygen rest }\n"
                               "rule hot { at 65 degC pressure <= test-pressure }\n"
                               "sheet permissible-charge { fluid mix; vessel ten; rules hot%s }\n";
    struct arena *arena = arena_create(NULL);
    struct answered bare = answer(arena_format(arena, deck, ""));
    assert_int_equal(result_requirement(bare.sheet, "may be filled")->state, REQUIREMENT_NOT_MET);
    struct answered assessed = answer(arena_format(arena, deck, "; assessed \"HAZ-9\""));
    assert_true(result_has_note(assessed.sheet, "assessed: \"HAZ-9\""));
    assert_non_null(result_fact(assessed.sheet, "mass", NULL));
    elaborated_end(&bare.it);
    elaborated_end(&assessed.it);
    arena_free(arena);
}

/* ---- settled pressure -------------------------------------------------------------------------------------------- */

static void a_vessel_between_the_dew_densities_holds_two_phases(void **state)
{
    (void)state;
    struct answered answered = answer("charge c { fluid span; vessel ten; density 0.1 kg/L }\n"
                                      "sheet settled-pressure { charge c; sweep temperature -25 degC, 20 degC }\n");
    const struct table *table = result_table(answered.sheet, "settled pressure", "peng-robinson");
    assert_close(cell_of(table, 0, "pressure"), 6704313.10112, 1e-9, "independent");
    assert_close(cell_of(table, 0, "liquid-volume"), 0.00147586786297, 1e-7, "independent");
    const struct table *phases = result_table(answered.sheet, "phases, and mole fractions in them", "peng-robinson");
    assert_int_equal(phases->row_count, 2); /* one phase at 20 degC */
    assert_close(cell_of(phases, 1, "amount"), 0.00510748341773, 1e-7, "of the liquid: independent");
    assert_close(cell_of(phases, 0, "n-butane"), 0.0155446477074, 1e-8, "in the vapour: independent");
    assert_close(cell_of(phases, 1, "n-butane"), 0.887863151408, 1e-8, "in the liquid: independent");
    elaborated_end(&answered.it);
}

/* The dew density at 248.15 K, filled into the vessel, condenses on cooling at just that temperature. */
static void the_first_liquid_of_a_cooling_vessel_is_found(void **state)
{
    (void)state;
    struct answered answered = answer("charge c { fluid span; vessel ten; density 41.8430987119 kg/m3 }\n"
                                      "sheet settled-pressure { charge c; sweep temperature 20 degC }\n");
    assert_near(fact_of(&answered, "first-liquid-temperature") - 248.15, 0.0, 1e-6, "dew density: independent");
    elaborated_end(&answered.it);
}

static void a_fill_by_pressure_becomes_mass_once_by_the_lead(void **state)
{
    (void)state;
    struct answered answered = answer("charge c { fluid span; vessel ten; fill 150 bara at -10 degC }\n"
                                      "sheet settled-pressure { charge c; sweep temperature -10 degC }\n");
    const double amount = 150.0 * BAR * 0.01 / (0.948275259128 * 8.31446261815324 * 263.15);
    assert_close(fact_of(&answered, "mass"), amount * 0.0286156544, 1e-9, "p V / (Z R T), Z independent");
    const struct table *table = result_table(answered.sheet, "settled pressure", NULL);
    assert_close(cell_of(table, 0, "pressure"), 150.0 * BAR, 1e-9, "filled to");
    elaborated_end(&answered.it);
}

static void a_liquefied_gas_under_a_compressed_one_is_told_step_by_step(void **state)
{
    (void)state;
    struct answered answered = answer("mixture charged by mass { propane 95 %; nitrogen rest }\n"
                                      "vessel twenty { water-capacity 20 L; test-pressure 60 barg }\n"
                                      "charge c { fluid charged; vessel twenty; mass 7 kg }\n"
                                      "sheet settled-pressure { charge c; sweep temperature 15 degC, 65 degC }\n"
                                      "sheet saturation { fluid propane; sweep temperature 15 degC, 65 degC }\n");
    const struct table *line = result_table(answered.sheet->next, "saturation line", NULL);
    const double vapour = cell_of(line, 1, "pressure");
    assert_close(fact_of(&answered, "vapour-pressure-65"), vapour, 1e-9, "saturation of propane by itself");
    assert_close(fact_of(&answered, "gas-space-65"), 0.02 - 6.65 / cell_of(line, 1, "liquid-density"), 1e-9,
                 "V - m / rho of 95 % of 7 kg");
    assert_close(fact_of(&answered, "stepwise-pressure"), vapour + fact_of(&answered, "partial-pressure-65"), 1e-12,
                 "their sum");
    const struct table *table = result_table(answered.sheet, "settled pressure", NULL);
    assert_close(fact_of(&answered, "equilibrium-pressure"), cell_of(table, 1, "pressure"), 1e-9, "the same vessel");
    assert_true(fact_of(&answered, "stepwise-excess") > 0.0); /* what dissolves takes pressure away */
    elaborated_end(&answered.it);
}

/* ---- saturation -------------------------------------------------------------------------------------------------- */

static void both_dew_pressures_are_found_and_none_above_the_cricondentherm(void **state)
{
    (void)state;
    struct answered answered = answer("sheet saturation { fluid span; sweep temperature -25 degC, -15 degC }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    assert_int_equal(points->row_count, 3);
    assert_close(cell_of(points, 0, "pressure"), 2903366.95167, 1e-9, "lower dew pressure: independent");
    assert_close(cell_of(points, 1, "pressure"), 14099129.9306, 1e-9, "upper dew pressure: independent");
    assert_close(cell_of(points, 1, "density"), 212.496822876, 1e-9, "independent");
    assert_close(cell_of(points, 1, "forming-density"), 664.77531074, 1e-9, "independent");
    assert_close(cell_of(points, 1, "n-butane"), 0.786232949911, 1e-8, "independent");
    assert_string_equal(result_cell(points, 2, "point")->text, "none");
    elaborated_end(&answered.it);
}

static const char *word_of(const struct table *table, size_t row)
{
    return result_cell(table, row, "point")->text;
}

/* The dew pressure at 140 K was evaluated anew in 34 digits as above. At 80 K it is below any that is looked for. */
static void a_dew_pressure_of_next_to_nothing_is_told(void **state)
{
    (void)state;
    struct answered answered = answer("sheet saturation { fluid span; sweep temperature 140 K, 80 K }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    assert_string_equal(word_of(points, 0), "dew");
    assert_close(cell_of(points, 0, "pressure"), 110.267072285179064, 1e-9, "independent");
    size_t row = 0;
    while (row < points->row_count && cell_of(points, row, "temperature") > 100.0) {
        row++;
    }
    assert_true(row < points->row_count);
    assert_string_equal(word_of(points, row), "dew below 0.001 Pa");
    elaborated_end(&answered.it);
}

/* Nitrous oxide and oxygen in equal parts at 139.23 K: above the metastable bubble point two liquids part, up to a
 * pressure evaluated anew in 34 digits. */
static void an_upper_edge_between_two_liquids_is_told(void **state)
{
    (void)state;
    struct answered answered = answer("component nitrous { molar-mass 44.0128 g/mol; critical-temperature 309.52 K\n"
                                      "  critical-pressure 72.45 bara; acentric 0.1613 }\n"
                                      "pair nitrous oxygen { peng-robinson kij 0.05 }\n"
                                      "mixture even by mole { nitrous 0.5; oxygen 0.5 }\n"
                                      "sheet saturation { fluid even; sweep temperature 139.23 K }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    assert_int_equal(points->row_count, 2);
    assert_close(cell_of(points, 0, "pressure"), 5384.02048890769657, 1e-9, "independent");
    assert_close(cell_of(points, 1, "pressure"), 12898721.9575023394, 1e-9, "independent");
    assert_string_equal(word_of(points, 1), "bubble");
    elaborated_end(&answered.it);
}

/* The same edge from the other side: at that pressure no line leads to it, and the temperature is found by stability.
 */
static void a_sweep_of_pressure_finds_where_two_liquids_part(void **state)
{
    (void)state;
    struct answered answered = answer("component nitrous { molar-mass 44.0128 g/mol; critical-temperature 309.52 K\n"
                                      "  critical-pressure 72.45 bara; acentric 0.1613 }\n"
                                      "pair nitrous oxygen { peng-robinson kij 0.05 }\n"
                                      "mixture even by mole { nitrous 0.5; oxygen 0.5 }\n"
                                      "sheet saturation { fluid even; sweep pressure 12898721.9575023394 Pa }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    size_t found = 0;
    for (size_t row = 0; row < points->row_count; row++) {
        found += fabs(cell_of(points, row, "temperature") / 139.23 - 1.0) < 1e-9;
    }
    assert_int_equal(found, 1);
    elaborated_end(&answered.it);
}

static void a_sweep_of_pressure_finds_the_temperatures_back(void **state)
{
    (void)state;
    struct answered answered = answer("sheet saturation { fluid span; sweep pressure 2903366.95167 Pa }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    assert_close(cell_of(points, points->row_count - 1, "temperature"), 248.15, 1e-9,
                 "the dew pressure at 248.15 K: independent");
    elaborated_end(&answered.it);
}

/* Traces of water condense on a line of their own, far from where the gas itself does; both are told. */
static void a_trace_that_condenses_early_hides_no_bubble_point(void **state)
{
    (void)state;
    struct answered answered = answer("component water { molar-mass 18.015268 g/mol; critical-temperature 647.096 K\n"
                                      "  critical-pressure 22.064 MPa; acentric 0.3443 }\n"
                                      "mixture damp by mole { water 5 ppm; nitrogen 20 ppm; propane rest }\n"
                                      "sheet saturation { fluid damp; sweep temperature 20 degC }\n"
                                      "sheet saturation { fluid propane; sweep temperature 20 degC }\n");
    const struct table *points =
        result_table(answered.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    const size_t last = points->row_count - 1;
    assert_string_equal(result_cell(points, last, "point")->text, "bubble");
    const double pure = cell_of(result_table(answered.sheet->next, "saturation line", NULL), 0, "pressure");
    assert_close(cell_of(points, last, "pressure"), pure, 0.01, "propane but for 25 ppm, which add a few mbar");
    struct arena *arena = arena_create(NULL);
    struct answered back =
        answer(arena_format(arena,
                            "component water { molar-mass 18.015268 g/mol; critical-temperature 647.096 K\n"
                            "  critical-pressure 22.064 MPa; acentric 0.3443 }\n"
                            "mixture damp by mole { water 5 ppm; nitrogen 20 ppm; propane rest }\n"
                            "sheet saturation { fluid damp; sweep pressure %.17g Pa }\n",
                            cell_of(points, last, "pressure")));
    points = result_table(back.sheet, "dew and bubble points, and mole fractions of the phase that forms", NULL);
    size_t bubble = 0; /* further down the water parts from the liquid propane */
    while (bubble < points->row_count && strcmp(result_cell(points, bubble, "point")->text, "bubble") != 0) {
        bubble++;
    }
    assert_true(bubble < points->row_count);
    assert_near(cell_of(points, bubble, "temperature") - 293.15, 0.0, 1e-6, "the bubble point's own temperature");
    elaborated_end(&back.it);
    arena_free(arena);
    elaborated_end(&answered.it);
}

/* ---- fugacity ---------------------------------------------------------------------------------------------------- */

static void fugacities_of_one_phase_are_those_of_the_equation(void **state)
{
    (void)state;
    struct answered answered =
        answer("sheet fugacity { fluid span; sweep temperature -10 degC; sweep pressure 150 bara }\n");
    const struct table *table = result_table(answered.sheet, "fugacities of the components", "peng-robinson");
    assert_close(log(cell_of(table, 0, "fugacity-coefficient")), -1.45735643, 1e-8, "n-butane: independent");
    assert_close(log(cell_of(table, 1, "fugacity-coefficient")), -0.08322199, 1e-7, "nitrogen: independent");
    assert_close(cell_of(result_table(answered.sheet, "stable phases", NULL), 0, "compressibility-factor"),
                 0.948275259128, 1e-10, "independent");
    elaborated_end(&answered.it);
}

static void phases_in_equilibrium_have_equal_fugacities(void **state)
{
    (void)state;
    struct answered answered =
        answer("sheet fugacity { fluid span; sweep temperature -25 degC; sweep density 0.1 kg/L }\n");
    const struct table *table = result_table(answered.sheet, "fugacities of the components", "peng-robinson");
    assert_int_equal(table->row_count, 4);
    for (size_t i = 0; i < 2; i++) {
        assert_close(cell_of(table, i, "fugacity"), cell_of(table, 2 + i, "fugacity"), 1e-9, "equal fugacity");
    }
    assert_close(cell_of(table, 2, "K"), 0.0155446477074 / 0.887863151408, 1e-8, "y / x: independent");
    const struct table *evidence = result_table(answered.sheet, "evidence of stability", NULL);
    assert_true(cell_of(evidence, 0, "tangent-plane-distance") >= -1e-10); /* the promise of split.h */
    elaborated_end(&answered.it);
}

/* ---- fractions and data ------------------------------------------------------------------------------------------ */

static void fractions_of_volume_become_amounts_by_the_lead(void **state)
{
    (void)state;
    struct answered ideal =
        answer("mixture v by volume at (15 degC, 1 bara) { n-butane 2 %; nitrogen rest }\n"
               "sheet fugacity { fluid v; methods ideal-gas; sweep temperature 0 degC; sweep pressure 1 bara }\n");
    const struct table *table = result_table(ideal.sheet, "fugacities of the components", NULL);
    assert_close(cell_of(table, 0, "mole-fraction"), 0.02, 1e-12, "ideal gases: volume is amount");
    struct answered real =
        answer("mixture v by volume at (15 degC, 1 bara) { n-butane 2 %; nitrogen rest }\n"
               "sheet fugacity { fluid v; sweep temperature 0 degC; sweep pressure 1 bara }\n"
               "sheet fugacity { fluid n-butane; sweep temperature 15 degC; sweep pressure 1 bara }\n"
               "sheet fugacity { fluid nitrogen; sweep temperature 15 degC; sweep pressure 1 bara }\n");
    const double n_butane = 0.02 * cell_of(result_table(real.sheet->next, "fugacity", NULL), 0, "molar-density");
    const double nitrogen = 0.98 * cell_of(result_table(real.sheet->next->next, "fugacity", NULL), 0, "molar-density");
    table = result_table(real.sheet, "fugacities of the components", NULL);
    assert_close(cell_of(table, 0, "mole-fraction"), n_butane / (n_butane + nitrogen), 1e-9,
                 "amounts are volumes times molar densities");
    elaborated_end(&ideal.it);
    elaborated_end(&real.it);
}

static void pairs_are_told_and_unknown_ones_warned_of(void **state)
{
    (void)state;
    struct answered answered =
        answer("mixture three by mole { n-butane 2 %; propane 3 %; nitrogen rest }\n"
               "sheet fugacity { fluid three; sweep temperature 0 degC; sweep pressure 1 bara }\n");
    size_t pairs = 0;
    for (size_t i = 0; i < answered.result->data.count; i++) {
        pairs += strncmp(answered.result->data.items[i].group, "kij at 15 degC of three", 23) == 0;
    }
    assert_int_equal(pairs, 3);
    assert_int_equal(result_warnings(answered.result, CODE_W306), 1); /* n-butane with propane */
    elaborated_end(&answered.it);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(no_liquid_ends_at_the_lowest_dew_density),
        cmocka_unit_test(a_dew_pressure_below_one_pascal_leaves_practically_no_charge),
        cmocka_unit_test(the_coldest_temperature_is_the_worst_where_dew_pressures_are_tiny),
        cmocka_unit_test(a_fluid_that_is_unstable_however_thin_gets_no_charge),
        cmocka_unit_test(no_liquid_and_the_table_of_states_agree_where_the_dew_pressure_is_tiny),
        cmocka_unit_test(a_denser_window_is_shown_and_never_permitted),
        cmocka_unit_test(one_phase_asks_about_the_density_of_the_vessel_alone),
        cmocka_unit_test(near_the_cricondentherm_the_jump_of_the_limit_is_warned_of),
        cmocka_unit_test(a_limit_on_vapour_pressure_is_held_against_the_bubble_pressure),
        cmocka_unit_test(fuel_with_oxidant_needs_an_assessment),
        cmocka_unit_test(a_vessel_between_the_dew_densities_holds_two_phases),
        cmocka_unit_test(the_first_liquid_of_a_cooling_vessel_is_found),
        cmocka_unit_test(a_fill_by_pressure_becomes_mass_once_by_the_lead),
        cmocka_unit_test(a_liquefied_gas_under_a_compressed_one_is_told_step_by_step),
        cmocka_unit_test(both_dew_pressures_are_found_and_none_above_the_cricondentherm),
        cmocka_unit_test(a_dew_pressure_of_next_to_nothing_is_told),
        cmocka_unit_test(an_upper_edge_between_two_liquids_is_told),
        cmocka_unit_test(a_sweep_of_pressure_finds_where_two_liquids_part),
        cmocka_unit_test(a_sweep_of_pressure_finds_the_temperatures_back),
        cmocka_unit_test(a_trace_that_condenses_early_hides_no_bubble_point),
        cmocka_unit_test(fugacities_of_one_phase_are_those_of_the_equation),
        cmocka_unit_test(phases_in_equilibrium_have_equal_fugacities),
        cmocka_unit_test(fractions_of_volume_become_amounts_by_the_lead),
        cmocka_unit_test(pairs_are_told_and_unknown_ones_warned_of),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
