/* Reading what multi-fluid methods know: departures, reducing parameters of pairs, the equations of GERG-2008; and
 * which mixtures multi-fluid leads for. */
#include "support/elaborated.h"

/* Coefficients are invented, as nothing is computed with them. */
#define EQUATION(name)                                                                     \
    "equation " name " {\n"                                                                \
    "  gas-constant 8.3 J/mol/K; molar-mass 30 g/mol\n"                                    \
    "  reducing-temperature 300 K; reducing-density 1e4 mol/m3\n"                          \
    "  critical-temperature 300 K; critical-pressure 5 MPa; critical-density 1e4 mol/m3\n" \
    "  valid-temperature from 60 K to 700 K; valid-pressure 70 MPa\n"                      \
    "  residual power { term 0.5 1 1 }\n"                                                  \
    "  residual special-exponential { term 0.3 5.25 1 0.25 0.5 0.75 0.6 }\n"               \
    "}\n"
#define COMPONENTS "component light { molar-mass 20 g/mol }\ncomponent heavy { molar-mass 40 g/mol }\n"
#define EQUATIONS  EQUATION("light") EQUATION("heavy")
#define DEPARTURE  "departure bent { source paper; residual special-exponential { term 0.2 5 1 0.25 0.5 1 0.7 } }\n"
#define PAPER      "source paper \"a paper\"\n"
#define PAIR                                                                 \
    "pair light heavy { multi-fluid temperature 0.98, 1.1 volume 1.02, 0.9 " \
    "departure bent 0.7 ref paper }\n"
#define MIXTURE "mixture m by mole { heavy 30 %; light rest }\n"
#define SHEET   "sheet fugacity { fluid m; sweep temperature 400 K; sweep pressure 1 bara }\n"
#define WHOLE   COMPONENTS EQUATIONS PAPER DEPARTURE

static void a_pair_keeps_its_numbers_and_its_order(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(WHOLE PAIR MIXTURE SHEET);
    const struct case_fluid *fluid = it.tree->sheets[0].fluid;
    assert_int_equal(fluid->spec.reducing_pair_count, 1);
    const struct reducing_pair *pair = &fluid->spec.reducing_pairs[0];
    assert_string_equal(pair->method, "multi-fluid");
    assert_int_equal(pair->first, 1);
    assert_int_equal(pair->second, 0);
    assert_int_equal(pair->origin, PAIR_FROM_DECK);
    assert_close(pair->beta_T, 0.98, 1e-15, "as written");
    assert_close(pair->gamma_T, 1.1, 1e-15, "as written");
    assert_close(pair->beta_V, 1.02, 1e-15, "as written");
    assert_close(pair->gamma_V, 0.9, 1e-15, "as written");
    assert_close(pair->weight, 0.7, 1e-15, "as written");
    assert_string_equal(pair->departure->name, "bent");
    const struct residual_term *term = &pair->departure->residual[0];
    assert_int_equal(term->kind, RESIDUAL_SPECIAL_EXPONENTIAL);
    assert_close(term->gamma, 0.7, 1e-15, "as written");
    const struct case_reducing *reducing = case_reducing_of(fluid->pairs[0], "multi-fluid");
    assert_string_equal(reducing->beta_T.origin.source->key, "paper");
    assert_null(case_reducing_of(fluid->pairs[0], "gerg-2008"));
    elaborated_end(&it);
}

static void a_later_pair_of_the_other_order_replaces_all_of_it(void **state)
{
    (void)state;
    struct elaborated it =
        elaborate_well(WHOLE PAIR "pair heavy light { multi-fluid temperature 0.5, 1.2 volume 1, 1 }\n" MIXTURE SHEET);
    const struct reducing_pair *pair = &it.tree->sheets[0].fluid->spec.reducing_pairs[0];
    assert_int_equal(it.tree->sheets[0].fluid->spec.reducing_pair_count, 1);
    assert_int_equal(pair->first, 0);
    assert_close(pair->beta_T, 0.5, 1e-15, "as written");
    assert_null(pair->departure);
    elaborated_end(&it);
}

static void an_equation_for_gerg_stands_beside_the_reference_equation(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(
        WHOLE EQUATION("light gerg-2008") "sheet fugacity { fluid light; methods "
                                          "gerg-2008; sweep temperature 400 K; sweep pressure 1 bara }\n");
    const struct pure_spec *pure = it.tree->sheets[0].fluid->spec.pure[0];
    assert_non_null(pure->reference);
    assert_non_null(pure->gerg_2008);
    assert_ptr_not_equal(pure->reference, pure->gerg_2008);
    assert_true(pure->gerg_2008->molar_mass.given);
    assert_close(pure->gerg_2008->molar_mass.value, 0.03, 1e-15, "as written");
    assert_int_equal(pure->gerg_2008->residual[1].kind, RESIDUAL_SPECIAL_EXPONENTIAL);
    elaborated_end(&it);
}

/* Without a methods block. */
static void multi_fluid_leads_only_where_every_pair_is_published(void **state)
{
    (void)state;
    struct elaborated published = elaborate_well(WHOLE PAIR MIXTURE SHEET);
    assert_string_equal(published.tree->sheets[0].methods.names[0], "multi-fluid");
    assert_non_null(strstr(published.tree->sheets[0].methods.reason, "all pairs are published"));
    elaborated_end(&published);
    static const char *const others[] = {
        COMPONENTS EQUATIONS,
        COMPONENTS PAPER DEPARTURE PAIR,
    };
    for (size_t i = 0; i < sizeof others / sizeof *others; i++) {
        struct arena *arena = arena_create(NULL);
        char *text = arena_format(
            arena, "%s%s%s", others[i],
            "component light { critical-temperature 300 K; critical-pressure 5 MPa; acentric 0.1 }\n"
            "component heavy { critical-temperature 350 K; critical-pressure 4 MPa; acentric 0.2 }\n" MIXTURE,
            SHEET);
        struct elaborated it = elaborate_in(arena, text);
        assert_non_null(it.tree);
        assert_string_equal(it.tree->sheets[0].methods.names[0], "peng-robinson-1978");
        elaborated_end(&it);
    }
}

static void methods_without_their_equations_are_refused(void **state)
{
    (void)state;
    assert_refused(WHOLE "sheet fugacity { fluid light; methods gerg-2008; sweep temperature 400 K; sweep pressure 1 "
                         "bara }\n",
                   CODE_E220);
    assert_refused(COMPONENTS "sheet fugacity { fluid light; methods multi-fluid; sweep temperature 400 K; sweep "
                              "pressure 1 bara }\n",
                   CODE_E220);
}

static void slips_in_a_pair_or_departure_are_told(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        enum code code;
    } cases[] = {
        {"pair light heavy { multi-fluid temperature 0.98, 1.1 }\n", CODE_E203},
        {"pair light heavy { multi-fluid volume 0.98, 1.1 }\n", CODE_E203},
        {"pair light heavy { multi-fluid temperature 0.98 }\n", CODE_E203},
        {"pair light heavy { multi-fluid }\n", CODE_E203},
        {"pair light heavy { multi-fluid temperature 1, 1 volume 1, 1 temperature 1, 1 }\n", CODE_E207},
        {"pair light heavy { multi-fluid temperature 0, 1.1 volume 1, 1 }\n", CODE_E209},
        {"pair light heavy { multi-fluid temperature 1, 1 volume 1, 1 departure straight 1 }\n", CODE_E205},
        {"pair light heavy { multi-fluid temperature 1, 1 volume 1, 1 departure }\n", CODE_E203},
        {"pair light heavy { multi-fluid temperature 1, 1 volume 1, 1 departure bent }\n", CODE_E203},
        {"pair light heavy { multi-fluid temperature 1, 1 volume 1, 1 { kij 1 } }\n", CODE_E212},
        {"pair light heavy { multi-fluid kij 0.1 }\n", CODE_E213},
        {"departure empty { source paper }\n", CODE_E216},
        {"departure short { residual power { term 1 1 } }\n", CODE_E215},
        {"departure sharp { residual nonanalytic { term -0.6 3.5 0.875 0.3 0.7 0.3 10 275 } }\n", CODE_E213},
        {"departure bare\n", CODE_E212},
        {"departure { residual power { term 1 1 1 } }\n", CODE_E203},
        {"equation light gerg-2004 { gas-constant 8.3 J/mol/K }\n", CODE_E204},
        {"component light { parameters multi-fluid { shift 1 cm3/mol } }\n", CODE_E213},
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        struct arena *arena = arena_create(NULL);
        assert_refused(arena_format(arena, "%s%s", WHOLE, cases[i].text), cases[i].code);
        arena_free(arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_pair_keeps_its_numbers_and_its_order),
        cmocka_unit_test(a_later_pair_of_the_other_order_replaces_all_of_it),
        cmocka_unit_test(an_equation_for_gerg_stands_beside_the_reference_equation),
        cmocka_unit_test(multi_fluid_leads_only_where_every_pair_is_published),
        cmocka_unit_test(methods_without_their_equations_are_refused),
        cmocka_unit_test(slips_in_a_pair_or_departure_are_told),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
