/* What the library holds for cubic methods and mixtures, and that a deck brings in no more of it than it needs. */
#include "support/elaborated.h"

#define EVERYTHING                                                                                                \
    "use \"gases\"\n"                                                                                             \
    "methods { show peng-robinson-1978, peng-robinson-twu, translated-peng-robinson, translated-redlich-kwong,\n" \
    "  quantum-peng-robinson }\n"                                                                                 \
    "mixture m by mole { nitrogen rest }\n"

static bool read_root_or_library(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (strcmp(path, "job.deck") != 0) {
        return deck_read_file(NULL, arena, path, text, length);
    }
    *length = strlen(context);
    *text = arena_copy_text(arena, context, *length);
    return true;
}

/* A deck from memory with the real library. */
static struct elaborated with_library(const char *text)
{
    struct elaborated it = {.arena = arena_create(NULL)};
    it.diagnostics.arena = it.arena;
    const struct deck_reader reader = {
        .read = read_root_or_library,
        .context = arena_copy_text(it.arena, text, strlen(text)),
        .library_folder = "decks/library",
    };
    it.deck = deck_load("job.deck", &reader, it.arena, &it.diagnostics);
    assert_non_null(it.deck);
    it.tree = case_elaborate(it.deck, it.arena, &it.diagnostics);
    if (it.tree == NULL) {
        print_error("%s\n%s\n", text, elaborated_messages(&it));
        fail();
    }
    return it;
}

static bool has_file(const struct deck *deck, const char *name)
{
    for (size_t i = 0; i < deck->file_count; i++) {
        if (strcmp(deck->files[i]->name, name) == 0) {
            return true;
        }
    }
    return false;
}

static void a_deck_brings_in_what_its_methods_and_mixtures_need(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        bool shifts, twu, groups, pairs, reactions;
    } rows[] = {
        {"use \"gases\"\nsheet saturation { fluid propane; sweep temperature 300 K }\n", false, false, false, false,
         false},
        {"use \"gases\"\nsheet saturation { fluid propane; sweep temperature 300 K\n"
         "  methods reference, peng-robinson-twu }\n",
         false, true, false, false, false},
        {"use \"gases\"\nmethods { show peng-robinson-1978 }\n"
         "sheet saturation { fluid propane; sweep temperature 300 K }\n",
         true, false, false, false, false},
        {"use \"gases\"\nmixture lpg by mass { propane 60 %; n-butane rest }\n", true, false, true, true, true},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct elaborated it = with_library(rows[i].text);
        assert_int_equal(has_file(it.deck, "cubic/peng-robinson-1978.deck"), rows[i].shifts);
        assert_int_equal(has_file(it.deck, "cubic/peng-robinson-twu.deck"), rows[i].twu);
        assert_int_equal(has_file(it.deck, "cubic/groups.deck"), rows[i].groups);
        assert_int_equal(has_file(it.deck, "cubic/pairs.deck"), rows[i].pairs);
        assert_int_equal(has_file(it.deck, "reactions.deck"), rows[i].reactions);
        elaborated_end(&it);
    }
}

static void the_components_of_a_mixture_bring_in_their_own_files(void **state)
{
    (void)state;
    struct elaborated it = with_library("use \"gases\"\nmixture lpg by mass { propane 60 %; n-butane rest }\n");
    assert_true(has_file(it.deck, "equations/propane.deck"));
    assert_true(has_file(it.deck, "equations/n-butane.deck"));
    assert_false(has_file(it.deck, "equations/nitrogen.deck"));
    elaborated_end(&it);
}

/* The components of the deck, each once. */
static size_t count_components(struct elaborated *it, const char *method, bool *is_twu_whole)
{
    const char *seen[300];
    size_t seen_count = 0;
    size_t count = 0;
    for (const struct statement *at = it->deck->statements; at != NULL; at = at->next) {
        bool is_new = strcmp(at->word, "component") == 0;
        for (size_t i = 0; i < seen_count && is_new; i++) {
            is_new = strcmp(seen[i], at->items->value->name) != 0;
        }
        if (!is_new) {
            continue;
        }
        seen[seen_count++] = at->items->value->name;
        const struct case_component *gas =
            case_find_component(it->deck, at->items->value->name, it->arena, &it->diagnostics);
        assert_non_null(gas);
        for (size_t i = 0; i < gas->spec.cubic_set_count; i++) {
            const struct cubic_set *set = &gas->spec.cubic_sets[i];
            if (strcmp(set->method, method) == 0) {
                count++;
                *is_twu_whole = *is_twu_whole && set->has_twu;
            }
        }
        count += strcmp(method, "groups") == 0 && gas->group_count != 0;
    }
    return count;
}

static void every_record_of_the_collections_is_there(void **state)
{
    (void)state;
    static const struct {
        const char *method;
        size_t count;
        bool has_twu;
        const char *source;
    } rows[] = {
        {"peng-robinson-twu", 101, true, "102 records of Bell et al. 2018 less r124"},
        {"translated-peng-robinson", 112, true, "114 records of Pina-Martinez et al. 2022 less two"},
        {"translated-redlich-kwong", 112, true, "114 records of Pina-Martinez et al. 2022 less two"},
        {"quantum-peng-robinson", 5, true, "Aasen et al. 2020"},
        {"peng-robinson-1978", 92, false, "one for each reference equation"},
        {"groups", 52, true, "molecules made of the groups of E-PPR78"},
    };
    struct elaborated it = with_library(EVERYTHING);
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        bool is_twu_whole = true;
        const size_t count = count_components(&it, rows[i].method, &is_twu_whole);
        if (count != rows[i].count || is_twu_whole != rows[i].has_twu) {
            print_error("%s: %zu, %s\n", rows[i].method, count, rows[i].source);
            fail();
        }
    }
    elaborated_end(&it);
}

static const struct cubic_set *set_of(const struct case_component *gas, const char *method)
{
    for (size_t i = 0; i < gas->spec.cubic_set_count; i++) {
        if (strcmp(gas->spec.cubic_sets[i].method, method) == 0) {
            return &gas->spec.cubic_sets[i];
        }
    }
    fail_msg("%s has nothing for %s", gas->name, method);
    return NULL;
}

static void parameters_are_those_of_the_papers(void **state)
{
    (void)state;
    struct elaborated it = with_library(EVERYTHING);
    const struct case_component *argon = case_find_component(it.deck, "argon", it.arena, &it.diagnostics);
    const struct cubic_set *twu = set_of(argon, "peng-robinson-twu");
    assert_close(twu->critical_pressure.value, 4854796.48405, 1e-15, "Bell et al. 2018");
    assert_close(twu->M, 0.86113893776623, 1e-15, "Bell et al. 2018");
    const struct cubic_set *translated = set_of(argon, "translated-redlich-kwong");
    assert_close(translated->N, 1.8139, 1e-15, "Pina-Martinez et al. 2022");
    assert_close(translated->shift, 0.874e-6, 1e-14, "Pina-Martinez et al. 2022");
    assert_close(set_of(argon, "translated-peng-robinson")->shift, -3.293e-6, 1e-14, "Pina-Martinez et al. 2022");
    const struct case_component *deuterium = case_find_component(it.deck, "deuterium", it.arena, &it.diagnostics);
    const struct cubic_set *quantum = set_of(deuterium, "quantum-peng-robinson");
    assert_close(quantum->L, 55.007, 1e-15, "Aasen et al. 2020");
    assert_close(quantum->covolume_B, 7.309, 1e-15, "Aasen et al. 2020");
    elaborated_end(&it);
}

static void a_mixture_finds_its_groups_pairs_and_reactions(void **state)
{
    (void)state;
    struct elaborated it = with_library("use \"gases\"\nmixture m by mole { propane 10 %; nitrogen 80 %; ammonia 5 %\n"
                                        "  chlorine 5 % }\n");
    const struct case_fluid *fluid = case_find_mixture(it.deck, "m", it.arena, &it.diagnostics);
    assert_non_null(fluid);
    assert_int_equal(fluid->group_pair_count, 4); /* CH3 CH2, CH3 N2, CH2 N2, N2 NH3 */
    const struct case_pair *pair = case_pair_of(fluid, "nitrogen", "propane");
    assert_close(case_pair_constants_of(pair, "peng-robinson")->kij.value, 0.085, 1e-15, "Knapp et al. 1982");
    assert_true(case_pair_constants_of(pair, "peng-robinson-1978")->kij.origin.source->is_unverified);
    assert_string_equal(fluid->assessment, "a fuel beside an oxidant, propane and chlorine");
    elaborated_end(&it);
    it = with_library("use \"gases\"\nmixture m by mole { ammonia 5 %; carbon-dioxide rest }\n");
    fluid = case_find_mixture(it.deck, "m", it.arena, &it.diagnostics);
    assert_string_equal(fluid->assessment, "ammonia and carbon-dioxide react: they form solid ammonium carbamate");
    elaborated_end(&it);
}

/* All gases at once: every pair, group pair and parameter of the library is built and none twice. */
static void the_whole_library_makes_one_mixture(void **state)
{
    (void)state;
    struct elaborated all = with_library(EVERYTHING);
    struct text text = {.arena = all.arena};
    text_format(&text, "%s", "use \"gases\"\nmixture all by mole {\n");
    size_t count = 0;
    for (const struct statement *at = all.deck->statements; at != NULL && count < 99; at = at->next) {
        if (strcmp(at->word, "component") == 0 && strstr(at->at.file->name, "gases") != NULL) {
            text_format(&text, "  %s %s\n", at->items->value->name, count == 0 ? "rest" : "0.1 %");
            count++;
        }
    }
    text_format(&text, "}\n");
    struct elaborated it = with_library(text.bytes);
    const struct case_fluid *fluid = case_find_mixture(it.deck, "all", it.arena, &it.diagnostics);
    assert_non_null(fluid);
    assert_int_equal(fluid->count, 99);
    assert_true(fluid->pair_count > 100);
    assert_true(fluid->group_pair_count > 250);
    elaborated_end(&it);
    elaborated_end(&all);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_deck_brings_in_what_its_methods_and_mixtures_need),
        cmocka_unit_test(the_components_of_a_mixture_bring_in_their_own_files),
        cmocka_unit_test(every_record_of_the_collections_is_there),
        cmocka_unit_test(parameters_are_those_of_the_papers),
        cmocka_unit_test(a_mixture_finds_its_groups_pairs_and_reactions),
        cmocka_unit_test(the_whole_library_makes_one_mixture),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
