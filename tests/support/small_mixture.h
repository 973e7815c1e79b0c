/* A mixture built by hand: four gases in a vessel, for tests of what is told about mixtures, without a deck.
 *
 * All of it is in this header, so that only the tests of sheets link what sheets need. */
#ifndef TAREWRIGHT_TESTS_SMALL_MIXTURE_H
#define TAREWRIGHT_TESTS_SMALL_MIXTURE_H

#include "support/small_case.h"

enum { N_BUTANE, NITROGEN, HYDROGEN, ARGON, SMALL_MIXTURE_COUNT };
enum { GROUP_CH3, GROUP_CH2, GROUP_N2 };

static const struct case_source SMALL_GROUP_SOURCE = {
    .key = "small-groups", .citation = "groups", .is_unverified = true};
static const struct case_source SMALL_MOLECULE_SOURCE = {
    .key = "small-molecules", .citation = "molecules", .is_unverified = true};
static const struct case_source SMALL_PAIR_SOURCE = {.key = "small-pairs", .citation = "pairs"};
static const struct case_source *const SMALL_SOURCES[] = {&SMALL_CASE_SOURCE, &SMALL_GROUP_SOURCE,
                                                          &SMALL_MOLECULE_SOURCE, &SMALL_PAIR_SOURCE};

/* Everything may be changed before the sheets are solved. The struct must stay where it is. */
struct small_mixture {
    struct small_case small;
    struct pure_spec pure[SMALL_MIXTURE_COUNT];
    const struct pure_spec *pure_list[SMALL_MIXTURE_COUNT];
    struct case_component component[SMALL_MIXTURE_COUNT];
    const struct case_component *component_list[SMALL_MIXTURE_COUNT];
    struct cubic_set set[2]; /* of n-butane and nitrogen, peng-robinson-1978 */
    struct case_cubic_set case_set[2];
    double fractions[SMALL_MIXTURE_COUNT];
    struct case_share shares[SMALL_MIXTURE_COUNT];
    struct pair_constant constants[2];
    struct case_pair_constants case_constants[2];
    struct case_pair pairs[2];
    const struct case_pair *pair_list[2];
    struct group_pair group_pairs[3];
    struct case_group_pair case_group_pairs[3];
    const struct case_group_pair *group_pair_list[3];
    struct case_fluid fluid;
};

static const struct group_share SMALL_BUTANE_SHARES[] = {{GROUP_CH3, 2.0}, {GROUP_CH2, 2.0}};
static const struct group_share SMALL_NITROGEN_SHARES[] = {{GROUP_N2, 1.0}};
static const struct case_group SMALL_BUTANE_GROUPS[] = {{"CH3", 2.0}, {"CH2", 2.0}};
static const struct case_group SMALL_NITROGEN_GROUPS[] = {{"N2", 1.0}};

/* Critical constants and molar masses: Buecker and Wagner, J. Phys. Chem. Ref. Data 35 (2006) 929 (n-butane); Span et
 * al., ibid. 29 (2000) 1361 (nitrogen); Leachman et al., ibid. 38 (2009) 721 (hydrogen); Tegeler et al., ibid. 28
 * (1999) 779 (argon). Acentric factors from those equations, as in decks/library/gases.deck. */
static const struct {
    const char *name;
    double molar_mass, critical_temperature, critical_pressure, acentric;
} SMALL_MIXTURE_GASES[SMALL_MIXTURE_COUNT] = {
    {"n-butane", 58.1222e-3, 425.125, 3.796e6, 0.2008},
    {"nitrogen", 28.01348e-3, 126.192, 3.3958e6, 0.0372},
    {"hydrogen", 2.01588e-3, 33.145, 1.2964e6, -0.2187},
    {"argon", 39.948e-3, 150.687, 4.863e6, -0.0022},
};

static inline struct quantity small_mixture_value(double value, enum origin_kind kind, const struct case_source *source)
{
    return (struct quantity){.given = true, .value = value, .origin = {.kind = kind, .source = source}};
}

static inline void small_mixture_set_up_components(struct small_mixture *mixture)
{
    for (size_t i = 0; i < SMALL_MIXTURE_COUNT; i++) {
        mixture->pure[i] = (struct pure_spec){
            .name = SMALL_MIXTURE_GASES[i].name,
            .molar_mass = SMALL_MIXTURE_GASES[i].molar_mass,
            .critical_temperature = {true, SMALL_MIXTURE_GASES[i].critical_temperature},
            .critical_pressure = {true, SMALL_MIXTURE_GASES[i].critical_pressure},
            .acentric = {true, SMALL_MIXTURE_GASES[i].acentric},
        };
        mixture->component[i] = (struct case_component){
            .name = SMALL_MIXTURE_GASES[i].name,
            .molar_mass = small_mixture_value(SMALL_MIXTURE_GASES[i].molar_mass, ORIGIN_LIBRARY, &SMALL_CASE_SOURCE),
            .critical_temperature =
                small_mixture_value(SMALL_MIXTURE_GASES[i].critical_temperature, ORIGIN_LIBRARY, &SMALL_CASE_SOURCE),
            .critical_pressure =
                small_mixture_value(SMALL_MIXTURE_GASES[i].critical_pressure, ORIGIN_LIBRARY, &SMALL_CASE_SOURCE),
            .acentric = small_mixture_value(SMALL_MIXTURE_GASES[i].acentric, ORIGIN_LIBRARY, &SMALL_CASE_SOURCE),
        };
        mixture->pure_list[i] = &mixture->pure[i];
        mixture->component_list[i] = &mixture->component[i];
    }
}

/* Shifts of the library for n-butane and nitrogen; molecules by the groups of E-PPR78, n-butane as 2 CH3 and 2 CH2. */
static inline void small_mixture_set_up_sets(struct small_mixture *mixture)
{
    static const double shifts[2] = {-5.3e-6, -3.825e-6};
    for (size_t i = 0; i < 2; i++) {
        mixture->set[i] = (struct cubic_set){.method = "peng-robinson-1978", .shift = shifts[i]};
        mixture->case_set[i] =
            (struct case_cubic_set){.method = "peng-robinson-1978",
                                    .shift = small_mixture_value(shifts[i], ORIGIN_LIBRARY, &SMALL_CASE_SOURCE)};
        mixture->pure[i].cubic_sets = &mixture->set[i];
        mixture->pure[i].cubic_set_count = 1;
        mixture->component[i].cubic_sets = &mixture->case_set[i];
        mixture->component[i].cubic_set_count = 1;
        mixture->component[i].groups_origin.source = &SMALL_MOLECULE_SOURCE;
    }
    mixture->pure[N_BUTANE].groups = SMALL_BUTANE_SHARES;
    mixture->pure[N_BUTANE].group_count = 2;
    mixture->component[N_BUTANE].groups = SMALL_BUTANE_GROUPS;
    mixture->component[N_BUTANE].group_count = 2;
    mixture->pure[NITROGEN].groups = SMALL_NITROGEN_SHARES;
    mixture->pure[NITROGEN].group_count = 1;
    mixture->component[NITROGEN].groups = SMALL_NITROGEN_GROUPS;
    mixture->component[NITROGEN].group_count = 1;
    for (size_t i = 0; i < SMALL_MIXTURE_COUNT; i++) {
        mixture->component[i].spec = mixture->pure[i];
    }
}

/* The three interactions of groups that n-butane and nitrogen need: E-PPR78, A and B in MPa, as in
 * decks/library/cubic/groups.deck. */
static inline void small_mixture_set_up_groups(struct small_mixture *mixture)
{
    static const char *const names[] = {"CH3", "CH2", "N2"};
    static const struct {
        size_t first, second;
        double A, B;
    } pairs[3] = {{GROUP_CH3, GROUP_CH2, 65.5e6, 105.7e6},
                  {GROUP_CH3, GROUP_N2, 38.1e6, 88.2e6},
                  {GROUP_CH2, GROUP_N2, 83.7e6, 188.7e6}};
    for (size_t i = 0; i < 3; i++) {
        mixture->group_pairs[i] = (struct group_pair){pairs[i].first, pairs[i].second, pairs[i].A, pairs[i].B};
        mixture->case_group_pairs[i] =
            (struct case_group_pair){names[pairs[i].first], names[pairs[i].second],
                                     small_mixture_value(pairs[i].A, ORIGIN_LIBRARY, &SMALL_GROUP_SOURCE),
                                     small_mixture_value(pairs[i].B, ORIGIN_LIBRARY, &SMALL_GROUP_SOURCE)};
        mixture->group_pair_list[i] = &mixture->case_group_pairs[i];
    }
}

/* Two invented constants: n-butane with nitrogen for peng-robinson, of the library; nitrogen with hydrogen for
 * peng-robinson-1978, of the deck (line 1). */
static inline void small_mixture_set_up_pairs(struct small_mixture *mixture)
{
    mixture->constants[0] = (struct pair_constant){N_BUTANE, NITROGEN, "peng-robinson", PAIR_FROM_LIBRARY, 0.08, 0.0};
    mixture->constants[1] =
        (struct pair_constant){NITROGEN, HYDROGEN, "peng-robinson-1978", PAIR_FROM_DECK, 0.0711, 0.0};
    mixture->case_constants[0] = (struct case_pair_constants){
        .method = "peng-robinson", .kij = small_mixture_value(0.08, ORIGIN_LIBRARY, &SMALL_PAIR_SOURCE)};
    mixture->case_constants[1] = (struct case_pair_constants){.method = "peng-robinson-1978",
                                                              .kij = small_mixture_value(0.0711, ORIGIN_DECK, NULL)};
    mixture->case_constants[1].kij.origin.at = (struct location){.file = &mixture->small.file};
    mixture->pairs[0] = (struct case_pair){
        .first = "n-butane", .second = "nitrogen", .count = 1, .constants = &mixture->case_constants[0]};
    mixture->pairs[1] = (struct case_pair){
        .first = "nitrogen", .second = "hydrogen", .count = 1, .constants = &mixture->case_constants[1]};
    mixture->pair_list[0] = &mixture->pairs[0];
    mixture->pair_list[1] = &mixture->pairs[1];
}

static inline void small_mixture_set_up_fluid(struct small_mixture *mixture, const double shares[])
{
    mixture->fluid = (struct case_fluid){
        .name = "blend",
        .count = SMALL_MIXTURE_COUNT,
        .components = mixture->component_list,
        .fractions = mixture->fractions,
        .shares = mixture->shares,
        .pair_count = 2,
        .pairs = mixture->pair_list,
        .group_pair_count = 3,
        .group_pairs = mixture->group_pair_list,
        .spec = {.count = SMALL_MIXTURE_COUNT,
                 .pure = mixture->pure_list,
                 .pair_count = 2,
                 .pairs = mixture->constants,
                 .group_pair_count = 3,
                 .group_pairs = mixture->group_pairs},
    };
    for (size_t i = 0; i < SMALL_MIXTURE_COUNT; i++) {
        mixture->fractions[i] = shares[i];
        mixture->shares[i].given = small_mixture_value(shares[i], ORIGIN_DECK, NULL);
        mixture->shares[i].given.origin.at = (struct location){.file = &mixture->small.file};
        mixture->fluid.molar_mass += shares[i] * SMALL_MIXTURE_GASES[i].molar_mass;
    }
}

/* Those shares of n-butane, nitrogen, hydrogen and argon, which are mole fractions unless the fluid is changed. */
static inline void small_mixture_set_up(struct small_mixture *mixture, enum sheet_kind kind, const double shares[])
{
    static const uint32_t line_starts[] = {0};
    small_case_set_up(&mixture->small, kind);
    mixture->small.file.line_starts = line_starts;
    mixture->small.file.line_count = 1;
    small_mixture_set_up_components(mixture);
    small_mixture_set_up_sets(mixture);
    small_mixture_set_up_groups(mixture);
    small_mixture_set_up_pairs(mixture);
    small_mixture_set_up_fluid(mixture, shares);
    mixture->small.charge.fluid = mixture->small.sheet.fluid = &mixture->fluid;
    mixture->small.tree.component_count = SMALL_MIXTURE_COUNT;
    mixture->small.tree.components = mixture->component_list;
    mixture->small.tree.source_count = sizeof SMALL_SOURCES / sizeof *SMALL_SOURCES;
    mixture->small.tree.sources = SMALL_SOURCES;
}

static inline void small_mixture_tear_down(struct small_mixture *mixture)
{
    small_case_tear_down(&mixture->small);
}

#endif
