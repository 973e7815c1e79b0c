/* The cubic methods' data as they stand under decks/library, read as a user's deck reads them. */
#include "base/text.h"
#include "case/case.h"
#include "deck/deck.h"
#include "equilibrium/saturation.h"
#include "fluid/phase.h"
#include "support/check.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* The library brings in a method's parameters where the method is named. */
#define METHODS                                                                                                   \
    "methods { show peng-robinson-1978, peng-robinson-twu, translated-peng-robinson, translated-redlich-kwong,\n" \
    "  quantum-peng-robinson, reference }\n"

/* A root deck from memory; everything else from the library's folder. */
static bool read_root_or_library(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const char *root = context;
    if (strcmp(path, "root.deck") != 0) {
        return deck_read_file(NULL, arena, path, text, length);
    }
    *length = strlen(root);
    *text = arena_copy_text(arena, root, *length);
    return true;
}

static const struct deck *load(struct arena *arena, char *root, struct diagnostics *diagnostics)
{
    const struct deck_reader reader = {read_root_or_library, root, "decks/library"};
    const struct deck *deck = deck_load("root.deck", &reader, arena, diagnostics);
    assert_non_null(deck);
    return deck;
}

/* Equal parts of those substances. */
static const struct fluid_spec *mixture_of(struct arena *arena, const char *const names[], size_t count)
{
    struct text text = {.arena = arena};
    struct diagnostics diagnostics = {.arena = arena};
    text_format(&text, "use \"gases\"\n" METHODS "mixture all by mole {\n");
    for (size_t i = 0; i + 1 < count; i++) {
        text_format(&text, "  %s 1 %%\n", names[i]);
    }
    text_format(&text, "  %s rest\n}\n", names[count - 1]);
    const struct case_fluid *fluid =
        case_find_mixture(load(arena, text.bytes, &diagnostics), "all", arena, &diagnostics);
    assert_non_null(fluid);
    return &fluid->spec;
}

static const struct fluid_spec *gas_of(struct arena *arena, const char *name)
{
    struct diagnostics diagnostics = {.arena = arena};
    char *root = arena_format(arena, "use \"gases\"\n" METHODS "component %s { }\n", name);
    const struct case_component *component =
        case_find_component(load(arena, root, &diagnostics), name, arena, &diagnostics);
    assert_non_null(component);
    const struct pure_spec **pure = arena_alloc(arena, 1, sizeof *pure);
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *pure = &component->spec;
    *spec = (struct fluid_spec){.count = 1, .pure = pure};
    return spec;
}

static const struct fluid *fluid_of(const char *method, const struct fluid_spec *spec, struct arena *arena)
{
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create(method, spec, arena, &lack);
    assert_non_null(fluid);
    return fluid;
}

static struct pair_parameter pair_at(const struct fluid *fluid, double T, size_t i, size_t j, struct arena *arena)
{
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    struct pair_parameter found;
    assert_int_equal(fluid_set_t(at_t, fluid, T), ANSWER_OK);
    assert_int_equal(fluid_pair(at_t, i, j, &found), ANSWER_OK);
    return found;
}

/* From the formula of the papers with 40 digits, with the data of their tables. */
static void groups_give_the_pair_parameters_of_the_papers(void **state)
{
    (void)state;
    static const struct {
        const char *first, *second;
        double T, kij;
    } cases[] = {
        {"nitrogen", "methane", 231.0, 0.028421092276573544},
        {"nitrogen", "carbon-dioxide", 347.0, -0.041082884253412809},
        {"carbon-dioxide", "propane", 231.0, 0.15362898231604168},
        {"nitrogen", "n-butane", 231.0, 0.045707991044230062},
        {"propane", "n-butane", 347.0, 0.0024395432408118333},
    };
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct arena *arena = arena_create(NULL);
        const char *const names[] = {cases[k].first, cases[k].second};
        const struct fluid_spec *spec = mixture_of(arena, names, 2);
        const struct pair_parameter pair =
            pair_at(fluid_of("peng-robinson-1978", spec, arena), cases[k].T, 0, 1, arena);
        assert_int_equal(pair.origin, PAIR_FROM_GROUPS);
        assert_near(pair.kij, cases[k].kij, 1e-13, cases[k].second);
        arena_free(arena);
    }
}

/* The substances whose molecules are made of the groups. */
static const char *const GROUPED[] = {
    "methane",
    "ethane",
    "propane",
    "n-butane",
    "n-pentane",
    "n-hexane",
    "n-heptane",
    "n-octane",
    "n-nonane",
    "n-decane",
    "isobutane",
    "isopentane",
    "isohexane",
    "neopentane",
    "cyclopropane",
    "cyclopentane",
    "cyclohexane",
    "benzene",
    "toluene",
    "ethylbenzene",
    "o-xylene",
    "m-xylene",
    "p-xylene",
    "ethylene",
    "propylene",
    "1-butene",
    "cis-2-butene",
    "trans-2-butene",
    "isobutene",
    "1-3-butadiene",
    "acetylene",
    "propyne",
    "carbon-dioxide",
    "nitrogen",
    "hydrogen-sulfide",
    "methyl-mercaptan",
    "water",
    "hydrogen",
    "carbon-monoxide",
    "helium",
    "argon",
    "sulfur-dioxide",
    "oxygen",
    "nitric-oxide",
    "carbonyl-sulfide",
    "ammonia",
    "nitrogen-dioxide",
    "nitrous-oxide",
    "r116",
    "r218",
    "r152a",
    "r134a",
};

/* Counted by a script of its own in exact fractions: every pair of which no interaction is missing. */
static void all_pairs_have_their_parameters_from_groups_but_those_with_a_missing_interaction(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct fluid_spec *spec = mixture_of(arena, GROUPED, COUNT(GROUPED));
    const struct fluid *fluid = fluid_of("peng-robinson-1978", spec, arena);
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    size_t by_groups = 0;
    assert_int_equal(fluid->count, 52);
    assert_int_equal(fluid_set_t(at_t, fluid, 300.0), ANSWER_OK);
    for (size_t i = 0; i < fluid->count; i++) {
        for (size_t j = 0; j < i; j++) {
            struct pair_parameter pair;
            assert_int_equal(fluid_pair(at_t, i, j, &pair), ANSWER_OK);
            assert_true(isfinite(pair.kij));
            by_groups += pair.origin == PAIR_FROM_GROUPS;
        }
    }
    assert_int_equal(by_groups, 864);
    arena_free(arena);
}

/* Knapp et al. 1982, from memory. */
static void constants_stand_for_both_forms_of_peng_and_robinson(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const char *const names[] = {"propane", "nitrogen"};
    const struct fluid_spec *spec = mixture_of(arena, names, 2);
    struct pair_parameter pair = pair_at(fluid_of("peng-robinson", spec, arena), 300.0, 0, 1, arena);
    assert_int_equal(pair.origin, PAIR_FROM_LIBRARY);
    assert_near(pair.kij, 0.085, 1e-15, "Knapp et al. 1982, from memory");
    assert_int_equal(pair_at(fluid_of("soave-redlich-kwong", spec, arena), 300.0, 0, 1, arena).origin,
                     PAIR_FROM_NOTHING);
    arena_free(arena);
}

/* Aasen et al., Fluid Phase Equilib. 524 (2020) 112790. */
static void quantum_gases_have_their_own_pairs(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const char *const names[] = {"helium", "hydrogen"};
    const struct fluid_spec *spec = mixture_of(arena, names, 2);
    const struct pair_parameter pair = pair_at(fluid_of("quantum-peng-robinson", spec, arena), 300.0, 0, 1, arena);
    assert_int_equal(pair.origin, PAIR_FROM_LIBRARY);
    assert_near(pair.kij, 0.17, 1e-15, "Aasen et al. 2020");
    assert_near(pair.lij, -0.16, 1e-15, "Aasen et al. 2020");
    arena_free(arena);
}

static struct saturation saturation_of(const char *method, const struct fluid_spec *spec, double T, struct arena *arena)
{
    const struct fluid *fluid = fluid_of(method, spec, arena);
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    struct saturation found;
    assert_int_equal(fluid_set_t(at_t, fluid, T), ANSWER_OK);
    assert_int_equal(saturation_at_t(at_t, &found), ANSWER_OK);
    return found;
}

static double molar_volume(const char *method, const struct fluid_spec *spec, double T, double p, struct arena *arena)
{
    const struct fluid *fluid = fluid_of(method, spec, arena);
    struct fluid_at_t *at_t = fluid_at_t_create(fluid, arena);
    const double n[] = {1.0};
    struct phase phase = {.ln_phi = NULL};
    assert_int_equal(fluid_set_t(at_t, fluid, T), ANSWER_OK);
    assert_int_equal(phase_tp(at_t, p, n, BRANCH_STABLE, 0, &phase), ANSWER_OK);
    return phase.volume;
}

/* Against the reference equations, where gases are filled; c is one to five per cent of each of these volumes. */
static void the_shift_of_1978_gives_the_volumes_of_compressed_gases(void **state)
{
    (void)state;
    static const char *const gases[] = {"nitrogen", "oxygen", "argon", "carbon-monoxide", "helium", "hydrogen"};
    for (size_t k = 0; k < COUNT(gases); k++) {
        struct arena *arena = arena_create(NULL);
        const struct fluid_spec *spec = gas_of(arena, gases[k]);
        for (double p = 1e7; p < 3.1e7; p += 1e7) {
            const double expected = molar_volume("reference", spec, 288.15, p, arena);
            assert_close(molar_volume("peng-robinson-1978", spec, 288.15, p, arena), expected, 0.01, gases[k]);
        }
        arena_free(arena);
    }
}

/* Vapour pressures by alphas fitted to each substance, against the reference equation: what the papers promise is about
 * one per cent, and the tolerance would not pass a figure mistyped by a few. */
static void fitted_alphas_give_the_vapour_pressures_of_the_reference_equations(void **state)
{
    (void)state;
    static const struct {
        const char *gas, *method;
        double tolerance;
    } cases[] = {
        {"nitrogen", "peng-robinson-twu", 0.01},      {"carbon-dioxide", "peng-robinson-twu", 0.01},
        {"oxygen", "translated-peng-robinson", 0.01}, {"n-butane", "translated-peng-robinson", 0.01},
        {"argon", "translated-redlich-kwong", 0.01},  {"ethylene", "translated-redlich-kwong", 0.01},
        {"hydrogen", "quantum-peng-robinson", 0.01},  {"neon", "quantum-peng-robinson", 0.01},
    };
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct arena *arena = arena_create(NULL);
        const struct fluid_spec *spec = gas_of(arena, cases[k].gas);
        const double T = 0.83 * spec->pure[0]->critical_temperature.value;
        const struct saturation expected = saturation_of("reference", spec, T, arena);
        const struct saturation found = saturation_of(cases[k].method, spec, T, arena);
        assert_close(found.pressure, expected.pressure, cases[k].tolerance, cases[k].gas);
        arena_free(arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(groups_give_the_pair_parameters_of_the_papers),
        cmocka_unit_test(all_pairs_have_their_parameters_from_groups_but_those_with_a_missing_interaction),
        cmocka_unit_test(constants_stand_for_both_forms_of_peng_and_robinson),
        cmocka_unit_test(quantum_gases_have_their_own_pairs),
        cmocka_unit_test(the_shift_of_1978_gives_the_volumes_of_compressed_gases),
        cmocka_unit_test(fitted_alphas_give_the_vapour_pressures_of_the_reference_equations),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
