/* Elaboration of mixtures: fractions on each basis, the rest, what needs an assessment, the entry a sheet names. */
#include "support/elaborated.h"

#define GASES                                                                               \
    "component fuel { molar-mass 16 g/mol; hazard flammable }\n"                            \
    "component oxidant { molar-mass 32 g/mol; hazard oxidising }\n"                         \
    "component inert { molar-mass 28 g/mol }\n"                                             \
    "component heavy { molar-mass 44 g/mol }\n"                                             \
    "component spark { molar-mass 28 g/mol; hazard pyrophoric }\n"                          \
    "component unstable { molar-mass 26 g/mol; hazard flammable, decomposes, dissolved }\n" \
    "component monomer { molar-mass 54 g/mol; hazard flammable, polymerises }\n"            \
    "component barred { molar-mass 50 g/mol; refuse \"never here\" }\n"

struct mixed {
    struct elaborated it;
    const struct case_fluid *fluid;
};

/* Elaborates `mixture m <text>` among the gases above. */
static struct mixed mix(const char *text)
{
    char deck[2000];
    snprintf(deck, sizeof deck, GASES "mixture m %s\n", text);
    struct mixed mixed = {.it = elaborate_well(deck)};
    mixed.fluid = case_find_mixture(mixed.it.deck, "m", mixed.it.arena, &mixed.it.diagnostics);
    assert_non_null(mixed.fluid);
    return mixed;
}

/* ---- Fractions ---- */

static void fractions_by_mole_are_kept_in_the_order_written(void **state)
{
    (void)state;
    struct mixed m = mix("by mole { fuel 2 % +/- 0.02 %; heavy 500 ppm; inert rest }");
    assert_int_equal(m.fluid->count, 3);
    assert_string_equal(m.fluid->name, "m");
    assert_string_equal(m.fluid->components[0]->name, "fuel");
    assert_string_equal(m.fluid->components[2]->name, "inert");
    assert_close(m.fluid->fractions[0], 0.02, 1e-15, "as written");
    assert_close(m.fluid->fractions[1], 5e-4, 1e-15, "500 / 1e6");
    assert_close(m.fluid->fractions[2], 0.9795, 1e-15, "1 - 0.02 - 0.0005");
    assert_close(m.fluid->molar_mass, 0.02 * 0.016 + 5e-4 * 0.044 + 0.9795 * 0.028, 1e-14, "sum of x M");
    assert_int_equal(m.fluid->basis, BASIS_MOLE);
    assert_close(m.fluid->shares[0].given.uncertainty, 2e-4, 1e-14, "0.02 %, absolute");
    assert_true(m.fluid->shares[2].is_rest);
    assert_close(m.fluid->shares[2].given.value, 0.9795, 1e-15, "what completes the whole");
    assert_string_equal(m.fluid->shares[2].given.origin.written, "rest");
    assert_int_equal(m.fluid->spec.count, 3);
    assert_ptr_equal(m.fluid->spec.pure[1], &m.fluid->components[1]->spec);
    elaborated_end(&m.it);
}

static void fractions_by_mass_become_mole_fractions(void **state)
{
    (void)state;
    struct mixed m = mix("by mass { fuel 40 % +/- 1 % relative; heavy 60 % }");
    const double moles = 0.4 / 16.0 + 0.6 / 44.0;
    assert_close(m.fluid->fractions[0], 0.4 / 16.0 / moles, 1e-14, "(w / M) over its sum");
    assert_close(m.fluid->fractions[1], 0.6 / 44.0 / moles, 1e-14, "(w / M) over its sum");
    assert_close(m.fluid->molar_mass, 1e-3 / moles, 1e-14, "1 / sum of w / M");
    assert_close(m.fluid->shares[0].given.value, 0.4, 1e-15, "as written");
    assert_close(m.fluid->shares[0].given.uncertainty, 4e-3, 1e-14, "1 % of 40 %");
    assert_int_equal(m.fluid->basis, BASIS_MASS);
    elaborated_end(&m.it);
}

static void fractions_by_volume_are_mole_fractions_unless_a_state_is_given(void **state)
{
    (void)state;
    struct mixed plain = mix("by volume { fuel 0.25; inert rest }");
    assert_int_equal(plain.fluid->basis, BASIS_VOLUME);
    assert_false(plain.fluid->has_state);
    assert_close(plain.fluid->fractions[0], 0.25, 1e-15, "as written");
    elaborated_end(&plain.it);
    struct mixed stated = mix("by volume at (15 degC, 1 bara) { fuel 0.25; inert rest }");
    assert_true(stated.fluid->has_state);
    assert_close(stated.fluid->temperature, 288.15, 1e-15, "15 + 273.15");
    assert_close(stated.fluid->pressure, 1e5, 1e-15, "1 bar");
    assert_close(stated.fluid->shares[1].given.value, 0.75, 1e-15, "what completes the whole");
    elaborated_end(&stated.it);
}

static void fractions_that_make_a_whole_but_for_rounding_are_made_one(void **state)
{
    (void)state;
    struct mixed m = mix("by mole { fuel 0.3333333333; heavy 0.3333333333; inert 0.3333333333 }");
    const double sum = m.fluid->fractions[0] + m.fluid->fractions[1] + m.fluid->fractions[2];
    assert_close(sum, 1.0, 1e-15, "a whole");
    assert_close(m.fluid->fractions[0], 1.0 / 3.0, 1e-15, "all alike");
    elaborated_end(&m.it);
}

static void a_component_may_be_absent_and_the_rest_nothing(void **state)
{
    (void)state;
    struct mixed m = mix("by mole { fuel 0 %; heavy 100 %; inert rest }");
    assert_int_equal(m.fluid->count, 3);
    assert_near(m.fluid->fractions[0], 0.0, 0.0, "as written");
    assert_near(m.fluid->fractions[2], 0.0, 0.0, "nothing is left");
    assert_close(m.fluid->molar_mass, 0.044, 1e-15, "of heavy");
    elaborated_end(&m.it);
}

static void a_line_of_a_mixture_may_name_its_source(void **state)
{
    (void)state;
    struct mixed m = mix("by mole { fuel 2 % +/- 0.02 % ref sheet-7; inert rest }\nsource sheet-7 \"certificate 7\"");
    assert_string_equal(m.fluid->shares[0].given.origin.source->citation, "certificate 7");
    elaborated_end(&m.it);
}

static void the_lines_of_a_mixture_are_echoed(void **state)
{
    (void)state;
    static const struct {
        const char *name, *written, *si;
    } rows[] = {
        {"volumes stated", "at (15 degC, 1 bara)", "288.15 K, 100 000 Pa abs"},
        {"fuel", "2 % +/- 0.02 %", "0.02"},
        {"inert", "rest", "0.98"},
    };
    char text[2000];
    snprintf(text, sizeof text, "%s",
             "component fuel { molar-mass 16 g/mol }\ncomponent inert { molar-mass 28 g/mol }\n"
             "mixture m by volume at (15 degC, 1 bara) { fuel 2 % +/- 0.02 %; inert rest }\n");
    struct elaborated it = elaborate_well(text);
    size_t found = 0;
    for (size_t i = 0; i < it.tree->input_count; i++) {
        const struct case_input *input = &it.tree->inputs[i];
        if (strcmp(input->group, "mixture m") == 0) {
            assert_true(found < sizeof rows / sizeof *rows);
            assert_string_equal(input->name, rows[found].name);
            assert_string_equal(input->origin.written, rows[found].written);
            assert_string_equal(input->si, rows[found].si);
            found++;
        }
    }
    assert_int_equal(found, sizeof rows / sizeof *rows);
    elaborated_end(&it);
}

static void the_decks_mixture_is_checked_though_no_sheet_names_it(void **state)
{
    (void)state;
    assert_refused(GASES "mixture m { fuel 2 %; inert rest }\n", CODE_E226);
    assert_refused(GASES "mixture m by mole { fuel 2 %; inert 97 % }\n", CODE_E227);
    assert_refused(GASES "mixture m by mole { fuel 2 %; inert rest }\nmixture m by mole { inert rest }\n", CODE_E206);
    assert_refused(GASES "mixture m by mole { massless 2 %; inert rest }\ncomponent massless { acentric 0.1 }\n",
                   CODE_E214);
    assert_refused(GASES "mixture m by mole { fuel -2 %; inert rest }\n", CODE_E209);
}

static void a_hundred_components_are_enough(void **state)
{
    (void)state;
    static char text[20000];
    size_t length = 0;
    for (int i = 0; i < 101; i++) {
        length += (size_t)snprintf(text + length, sizeof text - length, "component c%d { molar-mass 16 g/mol }\n", i);
    }
    length += (size_t)snprintf(text + length, sizeof text - length, "mixture m by mole { c0 rest\n");
    for (int i = 1; i < 101; i++) {
        length += (size_t)snprintf(text + length, sizeof text - length, "c%d 0.1 %%\n", i);
    }
    snprintf(text + length, sizeof text - length, "}\n");
    assert_refused(text, CODE_E204);
}

/* ---- What a charge needs before it is permitted ---- */

static void what_may_react_needs_an_assessment(void **state)
{
    (void)state;
    static const struct {
        const char *written, *assessment, *refuse;
    } rows[] = {
        {"by mole { fuel 2 %; inert rest }", NULL, NULL},
        {"by mole { oxidant 21 %; inert rest }", NULL, NULL},
        {"by mole { fuel 2 %; oxidant 20 %; inert rest }", "a fuel beside an oxidant, fuel and oxidant", NULL},
        {"by mole { spark 2 %; oxidant rest }", "a fuel beside an oxidant, spark and oxidant", NULL},
        {"by mole { fuel 90 ppm; oxidant rest }", NULL, NULL},
        {"by mole { oxidant 5 ppm; fuel rest }", NULL, NULL},
        {"by mole { oxidant 110 ppm; fuel rest }", "a fuel beside an oxidant, fuel and oxidant", NULL},
        {"by mass { oxidant 0 %; fuel rest }", NULL, NULL},
        {"by mole { unstable 1 %; inert rest }", "unstable may decompose, and the pressure after that was not computed",
         NULL},
        {"by mole { inert 0.4 %; unstable rest }",
         "unstable may decompose, and the pressure after that was not computed",
         "a dissolved gas: its charge follows from the porous mass and the solvent"},
        {"by mole { unstable 20 ppm; inert rest }", NULL, NULL},
        {"by mole { monomer 30 %; inert rest }", NULL, NULL},
        {"by mole { inert 2 %; barred rest }", NULL, "never here"},
        {"by mole { barred 2 %; inert rest }", NULL, NULL},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct mixed m = mix(rows[i].written);
        const char *assessment = m.fluid->assessment == NULL ? "none" : m.fluid->assessment;
        const char *refuse = m.fluid->refuse == NULL ? "none" : m.fluid->refuse;
        assert_string_equal(assessment, rows[i].assessment == NULL ? "none" : rows[i].assessment);
        assert_string_equal(refuse, rows[i].refuse == NULL ? "none" : rows[i].refuse);
        elaborated_end(&m.it);
    }
}

static void a_pure_gas_carries_the_same_marks(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(
        "component barred { molar-mass 50 g/mol; critical-temperature 300 K; critical-pressure 4 MPa; acentric 0.1\n"
        "  hazard flammable, oxidising; refuse \"never here\" }\n"
        "sheet saturation { fluid barred; sweep temperature 250 K }\n");
    const struct case_fluid *fluid = it.tree->sheets[0].fluid;
    assert_null(fluid->shares);
    assert_string_equal(fluid->refuse, "never here");
    assert_string_equal(fluid->assessment, "barred is fuel and oxidant in one");
    elaborated_end(&it);
}

/* ---- Pairs ---- */

static struct mixed mix_of_library(const char *more)
{
    char deck[2000];
    snprintf(deck, sizeof deck, "use \"small\"\nmixture m by mole { carbon-dioxide 18 %%; argon rest }\n%s\n", more);
    struct mixed mixed = {.it = elaborate_well(deck)};
    mixed.fluid = case_find_mixture(mixed.it.deck, "m", mixed.it.arena, &mixed.it.diagnostics);
    assert_non_null(mixed.fluid);
    return mixed;
}

static const struct pair_constant *constant_of(const struct case_fluid *fluid, const char *method)
{
    for (size_t i = 0; i < fluid->spec.pair_count; i++) {
        if (strcmp(fluid->spec.pairs[i].method, method) == 0) {
            return &fluid->spec.pairs[i];
        }
    }
    fail_msg("no constants for %s", method);
    return NULL;
}

static void a_pair_of_the_library_is_found_whatever_its_order(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("");
    assert_int_equal(m.fluid->spec.pair_count, 2);
    const struct pair_constant *constant = constant_of(m.fluid, "peng-robinson");
    assert_int_equal(constant->first, 0);
    assert_int_equal(constant->second, 1);
    assert_int_equal(constant->origin, PAIR_FROM_LIBRARY);
    assert_close(constant->kij, 0.1, 1e-15, "as written");
    assert_near(constant->lij, 0.0, 0.0, "none given");
    assert_close(constant_of(m.fluid, "soave-redlich-kwong")->lij, 0.03, 1e-15, "as written");
    const struct case_pair *pair = case_pair_of(m.fluid, "carbon-dioxide", "argon");
    assert_string_equal(pair->first, "argon");
    assert_string_equal(case_pair_constants_of(pair, "peng-robinson")->kij.origin.source->key, "notebook");
    assert_null(case_pair_constants_of(pair, "peng-robinson-1978"));
    assert_null(case_pair_of(m.fluid, "argon", "vapid"));
    elaborated_end(&m.it);
}

static void the_decks_pair_overrides_what_it_names(void **state)
{
    (void)state;
    struct mixed m =
        mix_of_library("pair carbon-dioxide argon { peng-robinson kij 0.12; peng-robinson-1978 kij 0.11 }");
    assert_int_equal(m.fluid->spec.pair_count, 3);
    assert_close(constant_of(m.fluid, "peng-robinson")->kij, 0.12, 1e-15, "the deck's");
    assert_int_equal(constant_of(m.fluid, "peng-robinson")->origin, PAIR_FROM_DECK);
    assert_int_equal(constant_of(m.fluid, "peng-robinson-1978")->origin, PAIR_FROM_DECK);
    assert_int_equal(constant_of(m.fluid, "soave-redlich-kwong")->origin, PAIR_FROM_LIBRARY);
    const struct case_pair *pair = case_pair_of(m.fluid, "argon", "carbon-dioxide");
    const struct quantity *kij = &case_pair_constants_of(pair, "peng-robinson")->kij;
    assert_close(kij->overridden->value, 0.1, 1e-15, "the library's");
    elaborated_end(&m.it);
}

static void a_kappa_reaches_the_method_as_its_kij(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("pair argon carbon-dioxide { lee-kesler kappa 1.2 }");
    assert_close(constant_of(m.fluid, "lee-kesler")->kij, -0.2, 1e-14, "1 - kappa");
    assert_int_equal(constant_of(m.fluid, "lee-kesler")->origin, PAIR_FROM_DECK);
    const struct case_pair *pair = case_pair_of(m.fluid, "argon", "carbon-dioxide");
    assert_close(case_pair_constants_of(pair, "lee-kesler")->kappa.value, 1.2, 1e-15, "as written");
    elaborated_end(&m.it);
}

static void each_method_takes_its_own_parameters_of_pairs(void **state)
{
    (void)state;
    static const char *const wrong[] = {"lee-kesler kij 0.1", "peng-robinson kappa 1.1", "lee-kesler kappa -1"};
    for (size_t k = 0; k < sizeof wrong / sizeof *wrong; k++) {
        char deck[300];
        snprintf(deck, sizeof deck, "use \"small\"\npair argon carbon-dioxide { %s }\n", wrong[k]);
        struct elaborated it = elaborate(deck);
        assert_true(it.diagnostics.errors > 0);
        elaborated_end(&it);
    }
}

static void groups_and_their_pairs_share_their_numbers(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("");
    const struct fluid_spec *spec = &m.fluid->spec;
    assert_int_equal(spec->group_pair_count, 1);
    assert_close(spec->group_pairs[0].A, 164.3e6, 1e-15, "164.3 MPa");
    assert_close(spec->group_pairs[0].B, 270e6, 1e-15, "270 MPa");
    const struct pure_spec *carbon_dioxide = spec->pure[0];
    const struct pure_spec *argon = spec->pure[1];
    assert_int_equal(carbon_dioxide->group_count, 1);
    assert_close(argon->groups[0].number, 1.0, 1e-15, "as written");
    assert_int_equal(spec->group_pairs[0].first, carbon_dioxide->groups[0].group);
    assert_int_equal(spec->group_pairs[0].second, argon->groups[0].group);
    assert_string_equal(m.fluid->components[1]->groups_origin.source->key, "notebook");
    elaborated_end(&m.it);
}

static void a_group_pair_of_the_deck_replaces_the_librarys(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("group-pair Ar CO2 150 MPa, 250 MPa");
    assert_int_equal(m.fluid->spec.group_pair_count, 1);
    assert_close(m.fluid->spec.group_pairs[0].A, 150e6, 1e-15, "150 MPa");
    elaborated_end(&m.it);
}

static void parameters_of_a_method_come_with_their_component(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("component argon { parameters peng-robinson-twu { twu 0.3, 0.8, 0.7 } }\n"
                                    "component argon { parameters quantum-peng-robinson { twu 1, 2, 3\n"
                                    "  covolume 3.0696 K, 12.682 K; critical-pressure 1.2964 MPa } }");
    const struct pure_spec *argon = m.fluid->spec.pure[1];
    assert_int_equal(argon->cubic_set_count, 3);
    const struct cubic_set *twu = &argon->cubic_sets[0];
    assert_string_equal(twu->method, "peng-robinson-twu");
    assert_close(twu->critical_temperature.value, 150.72, 1e-15, "the library's");
    assert_true(twu->has_twu);
    assert_close(twu->L, 0.3, 1e-15, "the deck's");
    assert_close(twu->N, 0.7, 1e-15, "the deck's");
    assert_close(m.fluid->components[1]->cubic_sets[0].twu[0].overridden->value, 0.34, 1e-15, "the library's");
    assert_false(argon->cubic_sets[1].has_twu);
    assert_close(argon->cubic_sets[1].shift, -3.3e-6, 1e-15, "-3.3 cm3");
    const struct cubic_set *quantum = &argon->cubic_sets[2];
    assert_close(quantum->covolume_A, 3.0696, 1e-15, "as written");
    assert_close(quantum->covolume_B, 12.682, 1e-15, "as written");
    assert_false(quantum->critical_temperature.given);
    assert_close(quantum->critical_pressure.value, 1.2964e6, 1e-15, "1.2964 MPa");
    elaborated_end(&m.it);
}

static void parameters_count_as_used_once_their_method_is_named(void **state)
{
    (void)state;
    struct elaborated plain =
        elaborate_well("use \"small\"\nsheet saturation { fluid argon; sweep temperature 100 K }\n");
    assert_int_equal(plain.tree->source_count, 0);
    elaborated_end(&plain);
    struct elaborated twu = elaborate_well("use \"small\"\nsheet saturation { fluid argon; sweep temperature 100 K\n"
                                           "  methods peng-robinson, peng-robinson-twu }\n");
    assert_int_equal(twu.tree->source_count, 1);
    assert_string_equal(twu.tree->sources[0]->key, "notebook");
    elaborated_end(&twu);
}

static void components_that_react_need_an_assessment(void **state)
{
    (void)state;
    struct mixed m = mix_of_library("pair argon carbon-dioxide { reacts \"never\" }");
    assert_string_equal(m.fluid->assessment, "argon and carbon-dioxide react: never");
    elaborated_end(&m.it);
}

/* ---- Entries ---- */

static void the_entry_a_sheet_names_stands_instead_of_those_of_its_gas(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well("use \"small\"\nvessel v { water-capacity 50 L; test-pressure 250 barg }\n"
                       "entry \"UN 1965 mixture C\" { limit at 70 degC vapour-pressure <= 31 bara\n"
                       "  limit at 50 degC liquid-density >= 0.440 kg/L; listed-fill 30 barg filling-ratio 0.42 }\n"
                       "sheet permissible-charge { fluid carbon-dioxide; vessel v; rules liquefied-high-pressure\n"
                       "  entry \"UN 1965 mixture C\" }\n");
    const struct case_sheet *sheet = &it.tree->sheets[0];
    assert_int_equal(sheet->entry_count, 1);
    assert_string_equal(sheet->entries[0]->name, "UN 1965 mixture C");
    assert_int_equal(sheet->entries[0]->limit_count, 2);
    assert_string_equal(sheet->entries[0]->limits[1].written, "at 50 degC liquid-density >= 0.440 kg/L");
    assert_null(sheet->entries[0]->component);
    elaborated_end(&it);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(fractions_by_mole_are_kept_in_the_order_written),
        cmocka_unit_test(fractions_by_mass_become_mole_fractions),
        cmocka_unit_test(fractions_by_volume_are_mole_fractions_unless_a_state_is_given),
        cmocka_unit_test(fractions_that_make_a_whole_but_for_rounding_are_made_one),
        cmocka_unit_test(a_component_may_be_absent_and_the_rest_nothing),
        cmocka_unit_test(a_line_of_a_mixture_may_name_its_source),
        cmocka_unit_test(the_lines_of_a_mixture_are_echoed),
        cmocka_unit_test(the_decks_mixture_is_checked_though_no_sheet_names_it),
        cmocka_unit_test(a_hundred_components_are_enough),
        cmocka_unit_test(what_may_react_needs_an_assessment),
        cmocka_unit_test(a_pure_gas_carries_the_same_marks),
        cmocka_unit_test(a_pair_of_the_library_is_found_whatever_its_order),
        cmocka_unit_test(the_decks_pair_overrides_what_it_names),
        cmocka_unit_test(a_kappa_reaches_the_method_as_its_kij),
        cmocka_unit_test(each_method_takes_its_own_parameters_of_pairs),
        cmocka_unit_test(groups_and_their_pairs_share_their_numbers),
        cmocka_unit_test(a_group_pair_of_the_deck_replaces_the_librarys),
        cmocka_unit_test(parameters_of_a_method_come_with_their_component),
        cmocka_unit_test(parameters_count_as_used_once_their_method_is_named),
        cmocka_unit_test(components_that_react_need_an_assessment),
        cmocka_unit_test(the_entry_a_sheet_names_stands_instead_of_those_of_its_gas),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
