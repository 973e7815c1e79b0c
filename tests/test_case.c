/* Elaboration: values in SI with their origin, components, vessels, charges, lets, the echo of inputs. */
#include "support/elaborated.h"

#define VESSEL "vessel v { water-capacity 50.2 L; test-pressure 250 barg }\n"
#define SHEET_OF(charge)                                                                 \
    "use \"small\"\n" VESSEL "charge c { fluid carbon-dioxide; vessel v; " charge " }\n" \
    "sheet settled-pressure { charge c; sweep temperature 15 degC }\n"

static const struct case_vessel *vessel_of(const struct elaborated *it)
{
    return it->tree->sheets[0].vessel;
}

static struct elaborated with_vessel(const char *vessel)
{
    char text[2000];
    snprintf(text, sizeof text,
             "use \"small\"\nvessel v { %s }\n"
             "sheet settled-pressure { fluid carbon-dioxide; vessel v; mass 1 kg; sweep temperature 15 degC }\n",
             vessel);
    return elaborate_well(text);
}

static void a_vessel_is_read_in_si_and_its_ratings_as_gauge(void **state)
{
    (void)state;
    struct elaborated it = with_vessel("water-capacity 50.2 L +/- 0.05 L; test-pressure 250 barg\n"
                                       "working-pressure 3000 psig; service-pressure 150 barg; tare 100 lb\n"
                                       "fitting \"outlet valve\" 20 MPag; fitting \"gauge\" 300 barg");
    const struct case_vessel *vessel = vessel_of(&it);
    assert_close(vessel->water_capacity.value, 0.0502, 1e-15, "50.2 L, 1 L = 1 dm3");
    assert_close(vessel->water_capacity.uncertainty, 5e-5, 1e-15, "0.05 L");
    assert_close(vessel->test_pressure.value, 250e5, 1e-15, "250 barg as Pa gauge, 1 bar = 1e5 Pa");
    assert_close(vessel->working_pressure.value, 20684271.87950535, 1e-12,
                 "3000 psi, 0.45359237 kg x 9.80665 m/s2 / (0.0254 m)2 each");
    assert_close(vessel->tare.value, 45.359237, 1e-14, "100 lb of 0.45359237 kg");
    assert_int_equal(vessel->fitting_count, 2);
    assert_string_equal(vessel->fittings[0].name, "outlet valve");
    assert_close(vessel->fittings[0].pressure.value, 20e6, 1e-15, "20 MPag");
    elaborated_end(&it);
}

static void a_value_knows_its_text_its_file_and_its_line(void **state)
{
    (void)state;
    struct elaborated it = with_vessel("water-capacity 50.2 L");
    const struct quantity *capacity = &vessel_of(&it)->water_capacity;
    assert_string_equal(capacity->origin.written, "50.2 L");
    assert_int_equal(capacity->origin.kind, ORIGIN_DECK);
    assert_null(capacity->origin.source);
    assert_int_equal(location_line(capacity->origin.at), 2);
    assert_false(vessel_of(&it)->test_pressure.given);

    const struct case_component *gas = it.tree->components[0];
    assert_int_equal(gas->molar_mass.origin.kind, ORIGIN_LIBRARY);
    assert_string_equal(gas->molar_mass.origin.source->key, "span-wagner-1996");
    assert_false(gas->molar_mass.origin.source->is_unverified);
    elaborated_end(&it);
}

static void an_uncertainty_may_be_relative(void **state)
{
    (void)state;
    struct elaborated it = with_vessel("water-capacity 40 L +/- 0.5 % relative");
    assert_close(vessel_of(&it)->water_capacity.uncertainty, 2e-4, 1e-14, "0.5 % of 40 L");
    elaborated_end(&it);
}

static void each_form_of_charge_is_read(void **state)
{
    (void)state;
    static const struct {
        const char *written;
        enum fill_kind kind;
        double amount, temperature, pressure;
        const char *source;
    } rows[] = {
        {"fill 150 barg at 15 degC", FILL_PRESSURE, 15101325.0, 288.15, 0.0, "150 bar above 1.01325 bar; 15 + 273.15"},
        {"fill 150 bara at 59 degF", FILL_PRESSURE, 150e5, 288.15, 0.0, "absolute; (59 + 459.67) 5/9"},
        {"fill 150 bar at 290 K", FILL_PRESSURE, 150e5, 290.0, 0.0, "a plain pressure is absolute"},
        {"mass 1900 g", FILL_MASS, 1.9, 0.0, 0.0, "1900 g"},
        {"filling-ratio 0.68", FILL_RATIO, 0.68, 0.0, 0.0, "as written"},
        {"filling-ratio 68 %", FILL_RATIO, 0.68, 0.0, 0.0, "68/100"},
        {"density 0.2 kg/L", FILL_DENSITY, 200.0, 0.0, 0.0, "0.2 kg / 0.001 m3"},
        {"moles 64 mol", FILL_MOLES, 64.0, 0.0, 0.0, "as written"},
        {"volume 1.5 m3 at (15 degC, 1 bara)", FILL_VOLUME, 1.5, 288.15, 1e5, "as written"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        char text[1000];
        snprintf(text, sizeof text, SHEET_OF("%s"), rows[i].written);
        struct elaborated it = elaborate_well(text);
        const struct case_charge *charge = it.tree->sheets[0].charge;
        assert_int_equal(charge->kind, rows[i].kind);
        assert_close(charge->amount.value, rows[i].amount, 1e-14, rows[i].source);
        assert_near(charge->temperature, rows[i].temperature, 1e-10, rows[i].source);
        assert_near(charge->pressure, rows[i].pressure, 1e-6, rows[i].source);
        elaborated_end(&it);
    }
}

static void a_gauge_reading_counts_from_the_ambient_pressure_and_a_rating_does_not(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("case \"high plant\" { ambient-pressure 0.8 bara }\n" SHEET_OF("fill 100 barg at 15 degC"));
    assert_close(it.tree->ambient_pressure, 0.8e5, 1e-15, "as written");
    assert_close(it.tree->sheets[0].charge->amount.value, 100.8e5, 1e-14, "100 bar above 0.8 bar");
    assert_close(vessel_of(&it)->test_pressure.value, 250e5, 1e-15, "a rating stays gauge");
    elaborated_end(&it);
}

static void a_sheet_may_state_its_own_charge(void **state)
{
    (void)state;
    struct elaborated it = with_vessel("water-capacity 50.2 L");
    const struct case_charge *charge = it.tree->sheets[0].charge;
    assert_non_null(charge);
    assert_int_equal(charge->kind, FILL_MASS);
    assert_ptr_equal(charge->vessel, vessel_of(&it));
    elaborated_end(&it);
}

static void lets_are_values_with_units_in_the_order_of_the_text(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("let capacity = 25 L\nlet both = 2 * capacity + 200 mL\nlet hot = 65 degC\n"
                                          "vessel v { water-capacity both }\nuse \"small\"\n"
                                          "sheet settled-pressure { fluid carbon-dioxide; vessel v; mass 1 kg\n"
                                          "  require at hot pressure <= 250 barg }\n");
    assert_close(vessel_of(&it)->water_capacity.value, 0.0502, 1e-14, "2 x 25 L + 0.2 L");
    const struct predicate *requirement = &it.tree->sheets[0].requirements[0];
    assert_close(requirement->from, 338.15, 1e-15, "65 + 273.15");
    assert_string_equal(requirement->temperature_unit.symbol, "degC");
    elaborated_end(&it);
}

static void a_let_is_unknown_before_its_line(void **state)
{
    (void)state;
    assert_refused("let a = b\nlet b = 2\n", CODE_E112);
}

static void a_failed_let_is_reported_once(void **state)
{
    (void)state;
    assert_refused("let a = 1 kg + 1 L\nlet b = 2 * a\nvessel v { water-capacity b }\n", CODE_E114);
}

static void a_component_carries_its_constants_and_its_equation(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(SHEET_OF("mass 1 kg"));
    const struct case_component *gas = it.tree->components[0];
    assert_string_equal(gas->formula, "CO2");
    assert_string_equal(gas->cas, "124-38-9");
    assert_int_equal(gas->un_number, 1013);
    assert_close(gas->critical_density.value, 467.6 / 0.0440098, 1e-14, "467.6 kg/m3 over the molar mass");
    assert_close(gas->spec.critical_pressure.value, 7377300.0, 1e-15, "7.3773 MPa");
    const struct reference_spec *equation = gas->spec.reference;
    assert_non_null(equation);
    assert_string_equal(gas->equation_source->key, "span-wagner-1996");
    assert_int_equal(equation->residual_count, 3);
    assert_int_equal(equation->residual[0].kind, RESIDUAL_POWER);
    assert_close(equation->residual[0].t, 0.5, 1e-15, "second column");
    assert_near(equation->residual[0].l, 0.0, 0.0, "a column left out");
    assert_close(equation->residual[1].l, 1.0, 1e-15, "fourth column");
    const struct residual_term *bell = &equation->residual[2];
    assert_int_equal(bell->kind, RESIDUAL_GAUSSIAN);
    assert_close(bell->eta, 25.0, 1e-15, "fourth column");
    assert_close(bell->gamma, 1.16, 1e-15, "seventh column");
    assert_int_equal(equation->ideal_count, 1);
    assert_close(equation->ideal[0].b, -3.70, 1e-15, "second column");
    assert_int_equal(equation->pressure_guess.form, GUESS_EXP_TAU);
    assert_close(equation->pressure_guess.reducing_value, 7377300.0, 1e-15, "7.3773 MPa");
    assert_close(equation->pressure_guess.terms[0][0], -7.06, 1e-15, "first column");
    assert_int_equal(equation->liquid_guess.form, GUESS_NONE);
    assert_close(equation->smallest_temperature, 216.592, 1e-15, "as written");
    elaborated_end(&it);
}

static void every_kind_of_term_puts_its_columns_where_they_belong(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(
        "component g { molar-mass 20 g/mol }\n"
        "equation g { gas-constant 8.314462618 J/mol/K; reducing-temperature 200 K; reducing-density 9 mol/L\n"
        "  critical-temperature 200 K; critical-pressure 4 MPa; critical-density 9 mol/L\n"
        "  valid-temperature from 100 K to 500 K; valid-pressure 100 MPa\n"
        "  residual exponential { term 1.1 2.2 3.3 4.4 5.5 }\n"
        "  residual inverse-gaussian { term 1 2 3 4 5 6 7 8.5 }\n"
        "  residual double-exponential { term 1 2 3 4.25 5.25 6.25 7.25 }\n"
        "  residual nonanalytic { term -0.66 3.5 0.875 0.3 0.7 0.31 10 275 }\n"
        "  ideal einstein-general { term 1.5 -2.5 0.5 -0.25 } }\n"
        "vessel v { water-capacity 1 L }\n"
        "sheet settled-pressure { fluid g; vessel v; mass 1 kg; sweep temperature 300 K }\n");
    const struct reference_spec *equation = it.tree->components[0]->spec.reference;
    const struct residual_term *term = equation->residual;
    assert_close(equation->reducing_density, 9000.0, 1e-15, "9 mol over 1 dm3");
    assert_close(term[0].l, 4.4, 1e-15, "exponential: n t d l g");
    assert_close(term[0].g, 5.5, 1e-15, "exponential: n t d l g");
    assert_close(term[1].b, 8.5, 1e-15, "inverse-gaussian: the last");
    assert_close(term[2].gd, 4.25, 1e-15, "double-exponential: n t d gd ld gt lt");
    assert_close(term[2].lt, 7.25, 1e-15, "double-exponential: n t d gd ld gt lt");
    assert_close(term[3].a, 3.5, 1e-15, "nonanalytic: n a b beta A B C E");
    assert_close(term[3].beta, 0.3, 1e-15, "nonanalytic: n a b beta A B C E");
    assert_close(term[3].B, 0.31, 1e-15, "nonanalytic: n a b beta A B C E");
    assert_close(term[3].E, 275.0, 1e-15, "nonanalytic: n a b beta A B C E");
    assert_near(term[3].t, 0.0, 0.0, "a member its kind does not use");
    assert_close(equation->ideal[0].d, -0.25, 1e-15, "einstein-general: a b c d");
    elaborated_end(&it);
}

static void only_what_a_sheet_names_is_built(void **state)
{
    (void)state;
    /* The library's broken component and rule and its unbuilt equation would each be an error. */
    struct elaborated it = elaborate_well(SHEET_OF("mass 1 kg"));
    assert_int_equal(it.tree->component_count, 1);
    assert_int_equal(it.tree->source_count, 1);
    elaborated_end(&it);
    assert_refused("use \"small\"\n" VESSEL "charge c { fluid broken; vessel v; mass 1 kg }\n"
                   "sheet settled-pressure { charge c; sweep temperature 15 degC }\n",
                   CODE_E209);
}

static void the_users_own_unused_blocks_are_checked_all_the_same(void **state)
{
    (void)state;
    assert_refused(SHEET_OF("mass 1 kg") "vessel spare { water-capacity 5 kg }\n", CODE_E208);
    assert_refused(SHEET_OF("mass 1 kg") "rule spare { at 65 degC pressure <= 5 kg }\n", CODE_E208);
    assert_refused(SHEET_OF("mass 1 kg") "component spare { acentric 5 }\n", CODE_E209);
    assert_refused(SHEET_OF("mass 1 kg") "charge spare { fluid carbon-dioxid; vessel v; mass 1 kg }\n", CODE_E205);
    struct elaborated it = elaborate_well(SHEET_OF("mass 1 kg") "component spare { acentric 0.2 }\n");
    assert_int_equal(it.tree->component_count, 1);
    elaborated_end(&it);
}

static void a_later_block_overrides_only_what_it_names(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("component carbon-dioxide { acentric 0.225 }\n" SHEET_OF("mass 1 kg"));
    const struct case_component *gas = it.tree->components[0];
    assert_close(gas->acentric.value, 0.225, 1e-15, "the deck's, though it stands before the library's");
    assert_int_equal(gas->acentric.origin.kind, ORIGIN_DECK);
    assert_non_null(gas->acentric.overridden);
    assert_close(gas->acentric.overridden->value, 0.22394, 1e-15, "the library's");
    assert_string_equal(gas->acentric.overridden->origin.source->key, "span-wagner-1996");
    assert_null(gas->molar_mass.overridden);
    assert_close(gas->spec.acentric.value, 0.225, 1e-15, "what the methods see");
    elaborated_end(&it);
}

static void a_critical_density_overridden_in_another_unit_stays_per_amount(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("component carbon-dioxide { critical-density 470 kg/m3 }\n"
                       "component carbon-dioxide { critical-density 10.5 mol/L }\n" SHEET_OF("mass 1 kg"));
    const struct quantity *density = &it.tree->components[0]->critical_density;
    assert_close(density->value, 10500.0, 1e-15, "10.5 mol over 1 dm3");
    assert_close(density->overridden->value, 470.0 / 0.0440098, 1e-14, "470 kg/m3 over the library's molar mass");
    assert_close(density->overridden->overridden->value, 467.6 / 0.0440098, 1e-14, "the library's");
    elaborated_end(&it);
    assert_refused("component x { critical-density 470 kg/m3 }\n", CODE_E214);
}

static void the_decks_own_definition_replaces_the_librarys(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well("use \"small\"\n" VESSEL
                                          "rule liquefied-high-pressure { at 60 degC pressure <= test-pressure }\n"
                                          "sheet permissible-charge { fluid carbon-dioxide; vessel v\n"
                                          "  rules liquefied-high-pressure }\n");
    assert_close(it.tree->sheets[0].rules[0]->predicates[0].from, 333.15, 1e-15, "60 + 273.15");
    elaborated_end(&it);
}

static void hazards_and_refusals_are_kept(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(
        "component carbon-dioxide { hazard toxic, decomposes; refuse \"not here\" }\n" SHEET_OF("mass 1 kg"));
    const struct case_component *gas = it.tree->components[0];
    assert_int_equal(gas->hazards, HAZARD_TOXIC | HAZARD_DECOMPOSES);
    assert_string_equal(gas->refuse, "not here");
    assert_int_equal(location_line(gas->refuse_at), 1);
    elaborated_end(&it);
}

static void inputs_are_echoed_in_the_order_of_the_text(void **state)
{
    (void)state;
    static const struct {
        const char *group, *name, *written, *si;
        size_t line;
    } rows[] = {
        {"case", "ambient-pressure", "0.97 bara", "97 000 Pa abs", 1},
        {"let", "hot", "65 degC", "338.15 K", 2},
        {"vessel v", "water-capacity", "50.2 L", "0.0502 m3", 4},
        {"vessel v", "test-pressure", "250 barg", "25 101 325 Pa abs", 4},
        {"charge c", "fill", "150 barg", "15 097 000 Pa abs", 5},
        {"charge c", "fill temperature", "at 15 degC", "288.15 K", 5},
        {"sheet 1 settled-pressure", "sweep temperature", "from 0 degC to 60 degC by 20 K",
         "273.15 K to 333.15 K, 4 values", 6},
        {"sheet 1 settled-pressure", "require", "at hot pressure <= 240 barg", "338.15 K; 24 101 325 Pa abs", 7},
    };
    struct elaborated it =
        elaborate_well("case \"echo\" { ambient-pressure 0.97 bara }\nlet hot = 65 degC\nuse \"small\"\n" VESSEL
                       "charge c { fluid carbon-dioxide; vessel v; fill 150 barg at 15 degC }\n"
                       "sheet settled-pressure { charge c; sweep temperature from 0 degC to 60 degC by 20 K\n"
                       "  require at hot pressure <= 240 barg }\n");
    assert_int_equal(it.tree->input_count, sizeof rows / sizeof *rows);
    for (size_t i = 0; i < it.tree->input_count; i++) {
        const struct case_input *input = &it.tree->inputs[i];
        assert_string_equal(input->group, rows[i].group);
        assert_string_equal(input->name, rows[i].name);
        assert_string_equal(input->origin.written, rows[i].written);
        assert_string_equal(input->si, rows[i].si);
        assert_int_equal(location_line(input->origin.at), rows[i].line);
    }
    elaborated_end(&it);
}

static void the_case_block_names_the_document(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("case \"a title\" { number \"SG-1\"; revision \"B\"; note \"one\"; note \"two\"\n"
                       "  units psig, degF, lb, psia, ft3, kg/m3 }\n" SHEET_OF("mass 1 kg"));
    assert_string_equal(it.tree->title, "a title");
    assert_string_equal(it.tree->number, "SG-1");
    assert_string_equal(it.tree->revision, "B");
    assert_int_equal(it.tree->note_count, 2);
    assert_string_equal(it.tree->notes[1], "two");
    const struct display_units *units = &it.tree->sheets[0].units;
    assert_string_equal(units->gauge.symbol, "psig");
    assert_close(units->gauge.offset, 101325.0, 1e-15, "a gauge unit is shown of absolute values");
    assert_string_equal(units->temperature.symbol, "degF");
    assert_string_equal(units->mass.symbol, "lb");
    assert_string_equal(units->gas_volume.symbol, "ft3");
    assert_string_equal(units->volume.symbol, "L");
    assert_string_equal(units->density.symbol, "kg/m3");
    elaborated_end(&it);
}

static void files_that_contributed_are_marked(void **state)
{
    (void)state;
    struct elaborated used = elaborate_well(SHEET_OF("mass 1 kg"));
    assert_int_equal(used.deck->file_count, 2);
    assert_true(used.deck->files[0]->is_used);
    assert_true(used.deck->files[1]->is_used);
    elaborated_end(&used);
    struct elaborated unused = elaborate_well("use \"small\"\n" VESSEL);
    assert_true(unused.deck->files[0]->is_used);
    assert_false(unused.deck->files[1]->is_used);
    assert_int_equal(unused.diagnostics.count, 1);
    assert_int_equal(unused.diagnostics.items[0].code, CODE_W280);
    elaborated_end(&unused);
}

static void a_component_can_be_found_for_showing(void **state)
{
    (void)state;
    struct elaborated it = elaborate("use \"small\"\n");
    const struct case_component *gas = case_find_component(it.deck, "carbon-dioxide", it.arena, &it.diagnostics);
    assert_non_null(gas);
    assert_non_null(gas->spec.reference);
    assert_null(case_find_component(it.deck, "carbon", it.arena, &it.diagnostics));
    assert_int_equal(it.diagnostics.errors, 0);
    elaborated_end(&it);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_vessel_is_read_in_si_and_its_ratings_as_gauge),
        cmocka_unit_test(a_value_knows_its_text_its_file_and_its_line),
        cmocka_unit_test(an_uncertainty_may_be_relative),
        cmocka_unit_test(each_form_of_charge_is_read),
        cmocka_unit_test(a_gauge_reading_counts_from_the_ambient_pressure_and_a_rating_does_not),
        cmocka_unit_test(a_sheet_may_state_its_own_charge),
        cmocka_unit_test(lets_are_values_with_units_in_the_order_of_the_text),
        cmocka_unit_test(a_let_is_unknown_before_its_line),
        cmocka_unit_test(a_failed_let_is_reported_once),
        cmocka_unit_test(a_component_carries_its_constants_and_its_equation),
        cmocka_unit_test(every_kind_of_term_puts_its_columns_where_they_belong),
        cmocka_unit_test(only_what_a_sheet_names_is_built),
        cmocka_unit_test(the_users_own_unused_blocks_are_checked_all_the_same),
        cmocka_unit_test(a_later_block_overrides_only_what_it_names),
        cmocka_unit_test(a_critical_density_overridden_in_another_unit_stays_per_amount),
        cmocka_unit_test(the_decks_own_definition_replaces_the_librarys),
        cmocka_unit_test(hazards_and_refusals_are_kept),
        cmocka_unit_test(inputs_are_echoed_in_the_order_of_the_text),
        cmocka_unit_test(the_case_block_names_the_document),
        cmocka_unit_test(files_that_contributed_are_marked),
        cmocka_unit_test(a_component_can_be_found_for_showing),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
