/* A mixture in a closed vessel: against an independent evaluation, and by returning to the state it was made from. */
#include "equilibrium/closed_vessel.h"
#include "equilibrium/mixture_vessel.h"
#include "support/check.h"
#include "support/mixture_states.h"
#include "support/sample_mixture.h"

#include <math.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Molar volumes of flashes by Peng-Robinson 1976 in 34 digits (the states of test_split.c): in that volume the mixture
 * must come to the flash's pressure and vapour fraction. */
struct known_vessel {
    const char *name;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double z[SAMPLE_MOST];
    double temperature, molar_volume;
    double pressure, vapour_fraction;
};

static const struct known_vessel KNOWN[] = {
    {"2 % n-butane in nitrogen, 97 bar",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     0.00019548756109266449,
     9.7e6,
     0.99574910376391955},
    {"the same beside its lower dew point",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     0.00067264562865253438,
     2.95e6,
     0.99981725787819597},
    {"methane and propane",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     277.6,
     0.00016154571322721819,
     4.1e6,
     0.23156841464158535},
    {"five components",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     251.3,
     0.00036179650235071203,
     3.3e6,
     0.6329615232241607},
    {"carbon dioxide and propane",
     2,
     {CARBON_DIOXIDE, PROPANE},
     {0.4, 0.6},
     290.0,
     0.00024636132801476561,
     2.5e6,
     0.25823155114167854},
    {"five components, retrograde",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.13, 0.61, 0.11, 0.10, 0.05},
     280.15,
     0.00021386968140727885,
     7.5e6,
     0.91800281752670503},
};

static void pressures_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(KNOWN); k++) {
        const struct known_vessel *known = &KNOWN[k];
        struct sample_mixture m = sample_mixture_create(known->count, known->substance, known->temperature, arena);
        struct mixture_vessel *vessel = mixture_vessel_create(known->count, arena);
        assert_int_equal(mixture_vessel_at_tv(m.at_t, known->molar_volume, known->z, NULL, m.ws, vessel), ANSWER_OK);
        assert_int_equal(vessel->split->phase_count, 2);
        assert_close(vessel->split->pressure, known->pressure, 1e-9, known->name);
        assert_near(vessel->split->phase[0].fraction, known->vapour_fraction, 1e-9, known->name);
    }
    arena_free(arena);
}

/* What the phases fill is the vessel, by the reported fractions and molar volumes. */
static double filled_volume(const struct mixture_vessel *vessel)
{
    double volume = 0.0;
    for (size_t k = 0; k < vessel->split->phase_count; k++) {
        volume += vessel->amount * vessel->split->phase[k].fraction * vessel->split->phase[k].molar_volume;
    }
    return volume;
}

/* Where rounding decides: phases that differ by less than 0.1 % in density beside a critical point, and one of less
 * than 1e-9 of the contents on a phase boundary. */
static bool is_undecided(const struct split *split)
{
    for (size_t k = 1; k < split->phase_count; k++) {
        if (fabs(split->phase[k - 1].molar_volume / split->phase[k].molar_volume - 1.0) < 1e-3) {
            return true;
        }
    }
    for (size_t k = 0; k < split->phase_count; k++) {
        if (split->phase[k].fraction < 1e-9) {
            return true;
        }
    }
    return false;
}

/* The volume of any flash leads back to its pressure and number of phases. */
static void vessels_return_to_the_flash_they_are_made_from(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    for (uint64_t seed = 1; seed <= 1500; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, (enum state_kind)(seed % STATE_KINDS), room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        struct mixture_vessel *vessel = mixture_vessel_create(drawn.count, arena);
        assert_int_equal(split_at_tp(place.at_t, drawn.pressure, drawn.z, place.ws, place.split), ANSWER_OK);
        double volume = 0.0, amount = 0.0;
        for (size_t k = 0; k < place.split->phase_count; k++) {
            volume += place.split->phase[k].fraction * place.split->phase[k].molar_volume;
        }
        for (size_t i = 0; i < drawn.count; i++) {
            amount += drawn.z[i];
        }
        const enum answer answer = mixture_vessel_at_tv(place.at_t, volume * amount, drawn.z, NULL, place.ws, vessel);
        assert_int_equal(answer, ANSWER_OK);
        if (is_undecided(place.split) || is_undecided(vessel->split)) {
            continue;
        }
        assert_int_equal(vessel->split->phase_count, place.split->phase_count);
        assert_close(vessel->split->pressure, drawn.pressure, 1e-7, "the flash the volume is from");
        assert_close(filled_volume(vessel), volume * amount, 1e-9, "the vessel's volume");
    }
    state_room_close(room);
    arena_free(arena);
}

/* A mixture of one component present is the pure fluid in its vessel: vapour, two phases, liquid-full. */
static void one_component_behaves_as_the_pure_fluid(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 291.3, arena);
    struct mixture_vessel *vessel = mixture_vessel_create(2, arena);
    const struct fluid *pure = sample_pure("peng-robinson", &SAMPLE_SUBSTANCE[PROPANE], arena);
    struct fluid_at_t *at_t = sample_at_t(pure, 291.3, arena);
    static const double volumes[] = {4e-3, 1.1e-3, 2.7e-4, 9.5e-5, 8.3e-5};
    const double n[] = {0.0, 1.3};
    for (size_t k = 0; k < COUNT(volumes); k++) {
        struct vessel_contents contents;
        assert_int_equal(closed_vessel_at_tv(at_t, 1.3 * volumes[k], 1.3, &contents), ANSWER_OK);
        assert_int_equal(mixture_vessel_at_tv(m.at_t, 1.3 * volumes[k], n, NULL, m.ws, vessel), ANSWER_OK);
        assert_close(vessel->split->pressure, contents.pressure, 1e-9, "the pure fluid's vessel");
        assert_int_equal(vessel->split->phase_count, contents.state == VESSEL_TWO_PHASE ? 2 : 1);
    }
    arena_free(arena);
}

/* Vapour and two liquids of two components: the temperature fixes the pressure, over a range of densities.
 * Peng-Robinson 1976 in 40 digits, the four equations of equal ln f solved for pressure and the three compositions,
 * apart from this program. The constants are of their substances' size; what counts is that both evaluations use the
 * same. */
struct three_phases {
    const char *name;
    struct sample_binary binary;
    double temperature, z; /* K; mole fraction of the first */
    double pressure;       /* Pa */
    double x[3];           /* mole fraction of the first in vapour, light and heavy liquid by molar volume */
    double molar_volume[3];
};

static const struct three_phases THREE_PHASES[] = {
    {"nitrogen and n-butane",
     {{126.192, 425.125}, {3395800.0, 3796000.0}, {0.0372, 0.201}, 0.08},
     100.0,
     0.98,
     780039.44461176163588,
     {0.999999999382490457, 0.108938641837246459, 0.999522991208258043},
     {0.0008686740874684531, 0.0000707913275967814064, 0.0000370247032090962421}},
    {"carbon dioxide and n-hexadecane",
     {{304.1282, 722.0}, {7377300.0, 1400000.0}, {0.22394, 0.718}, 0.125},
     262.9,
     0.9,
     2614353.1398665974762,
     {0.999999952545774914, 0.548534349167094184, 0.999496630868977777},
     {0.000627507866556042703, 0.000185249043392700522, 0.0000447765661296681261}},
    {"methane and n-hexadecane",
     {{190.564, 722.0}, {4599200.0, 1400000.0}, {0.01142, 0.718}, 0.06},
     165.03,
     0.95,
     1952456.9467660945246,
     {0.999999999999999718, 0.582330214254204321, 0.999830573417521994},
     {0.000497336812677171824, 0.000164854680625505863, 0.0000473222906158510515}},
};

/* The volume of a mole with the given part of it in the vapour, the rest divided between the liquids by the balance of
 * the first component. Zero where a liquid would have to be less than nothing. */
static double three_phase_volume(const struct three_phases *known, double vapour)
{
    const double rest = 1.0 - vapour, in_liquid = (known->z - vapour * known->x[0]) / rest;
    const double light = rest * (in_liquid - known->x[2]) / (known->x[1] - known->x[2]);
    const double heavy = rest - light;
    return light > 0.0 && heavy > 0.0
               ? vapour * known->molar_volume[0] + light * known->molar_volume[1] + heavy * known->molar_volume[2]
               : 0.0;
}

static void assert_three_phases(const struct three_phases *known, const struct mixture_vessel *vessel, double vapour)
{
    assert_int_equal(vessel->split->phase_count, 3);
    assert_close(vessel->split->pressure, known->pressure, 1e-9, known->name);
    assert_near(vessel->split->phase[0].fraction, vapour, 1e-8, known->name);
    assert_true(vessel->split->residual <= 1e-10);
    for (size_t k = 0; k < 3; k++) {
        assert_near(vessel->split->phase[k].x[0], known->x[k], 1e-9, known->name);
        assert_close(vessel->split->phase[k].molar_volume, known->molar_volume[k], 1e-8, known->name);
    }
}

/* At every density of the range, from nothing and from the density before. */
static void three_phases_keep_one_pressure(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(THREE_PHASES); k++) {
        const struct three_phases *known = &THREE_PHASES[k];
        struct fluid_at_t *at_t = sample_binary_at_t(&known->binary, known->temperature, arena);
        struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
        struct mixture_vessel *cold = mixture_vessel_create(2, arena), *warm = mixture_vessel_create(2, arena);
        const double n[] = {known->z, 1.0 - known->z};
        const struct mixture_vessel *start = NULL;
        size_t count = 0;
        for (double vapour = 1e-4; vapour < 1.0; vapour += 0.0123) {
            const double volume = three_phase_volume(known, vapour);
            if (!(volume > 0.0)) {
                continue;
            }
            assert_int_equal(mixture_vessel_at_tv(at_t, volume, n, NULL, ws, cold), ANSWER_OK);
            assert_int_equal(mixture_vessel_at_tv(at_t, volume, n, start, ws, warm), ANSWER_OK);
            assert_three_phases(known, cold, vapour);
            assert_three_phases(known, warm, vapour);
            start = warm;
            count++;
        }
        assert_true(count > 30);
    }
    arena_free(arena);
}

/* A little off that pressure there are two phases at most, however near: a third one found on the way has to go again
 * and leave the other two as they should be. */
static void beside_their_pressure_two_phases_are_left(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(THREE_PHASES); k++) {
        const struct three_phases *known = &THREE_PHASES[k];
        struct fluid_at_t *at_t = sample_binary_at_t(&known->binary, known->temperature, arena);
        struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
        struct split *split = split_create(2, arena);
        for (double z = 0.05; z < 1.0; z += 0.05) {
            const double feed[] = {z, 1.0 - z};
            for (double off = 1e-1; off > 1e-6; off *= 0.2) {
                for (int side = -1; side <= 1; side += 2) {
                    const double pressure = known->pressure * (1.0 + side * off);
                    assert_int_equal(split_at_tp(at_t, pressure, feed, ws, split), ANSWER_OK);
                    assert_true(split->phase_count <= 2);
                    assert_true(split->residual <= 1e-10);
                }
            }
        }
    }
    arena_free(arena);
}

/* Flashes on whose way a phase shrinks to nothing beside two that become one: what the one that goes had must go to its
 * twin. Only what they are of stands here; the answer is checked by its residual and its proof. */
static const struct three_phases TWINS_ON_THE_WAY[] = {
    {.name = "oxygen and nitrogen",
     .binary = {{154.58, 126.192}, {5043000.0, 3395800.0}, {0.0222, 0.0372}, 0.2},
     .temperature = 100.26,
     .z = 0.65129547375,
     .pressure = 869397.7385},
    {.name = "water and propane",
     .binary = {{647.096, 369.89}, {22064000.0, 4251200.0}, {0.3443, 0.1521}, 0.1},
     .temperature = 361.06,
     .z = 0.128578546,
     .pressure = 3591379.663},
};

static void twins_on_the_way_become_one(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(TWINS_ON_THE_WAY); k++) {
        const struct three_phases *known = &TWINS_ON_THE_WAY[k];
        struct fluid_at_t *at_t = sample_binary_at_t(&known->binary, known->temperature, arena);
        struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
        struct split *split = split_create(2, arena);
        const double feed[] = {known->z, 1.0 - known->z};
        for (double off = -2e-5; off < 2e-5; off += 1e-6) {
            assert_int_equal(split_at_tp(at_t, known->pressure * (1.0 + off), feed, ws, split), ANSWER_OK);
            assert_int_equal(split->phase_count, 2);
            assert_true(split->residual <= 1e-10 && split->smallest_tpd >= -1e-10);
        }
    }
    arena_free(arena);
}

/* Along a sweep the answers started nearby are those started from nothing. */
static void a_start_nearby_changes_nothing(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance all[] = {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE};
    struct sample_mixture m = sample_mixture_create(5, all, 230.0, arena);
    struct mixture_vessel *warm = mixture_vessel_create(5, arena), *cold = mixture_vessel_create(5, arena);
    const double n[] = {0.11, 0.43, 0.17, 0.19, 0.10};
    const struct mixture_vessel *start = NULL;
    size_t single = 0;
    for (double T = 220.0; T < 340.0; T += 2.5) {
        assert_int_equal(fluid_set_t(m.at_t, m.fluid, T), ANSWER_OK);
        assert_int_equal(mixture_vessel_at_tv(m.at_t, 2.5e-4, n, start, m.ws, warm), ANSWER_OK);
        assert_int_equal(mixture_vessel_at_tv(m.at_t, 2.5e-4, n, NULL, m.ws, cold), ANSWER_OK);
        assert_int_equal(warm->split->phase_count, cold->split->phase_count);
        assert_close(warm->split->pressure, cold->split->pressure, 1e-9, "started from nothing");
        single += warm->split->phase_count == 1;
        start = warm;
    }
    assert_true(single > 3 && single < 45); /* the sweep crosses the phase boundary */
    arena_free(arena);
}

static void a_vessel_without_meaning_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 291.3, arena);
    struct mixture_vessel *vessel = mixture_vessel_create(2, arena);
    const double n[] = {0.4, 0.6}, none[] = {0.0, 0.0};
    static const double volumes[] = {0.0, -1.0, 4e-5, (double)NAN,
                                     (double)INFINITY}; /* the third is below the covolume */
    for (size_t k = 0; k < COUNT(volumes); k++) {
        assert_int_equal(mixture_vessel_at_tv(m.at_t, volumes[k], n, NULL, m.ws, vessel), ANSWER_OUT_OF_RANGE);
    }
    assert_int_equal(mixture_vessel_at_tv(m.at_t, 1e-3, none, NULL, m.ws, vessel), ANSWER_OUT_OF_RANGE);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(pressures_agree_with_an_independent_evaluation),
        cmocka_unit_test(vessels_return_to_the_flash_they_are_made_from),
        cmocka_unit_test(one_component_behaves_as_the_pure_fluid),
        cmocka_unit_test(three_phases_keep_one_pressure),
        cmocka_unit_test(beside_their_pressure_two_phases_are_left),
        cmocka_unit_test(twins_on_the_way_become_one),
        cmocka_unit_test(a_start_nearby_changes_nothing),
        cmocka_unit_test(a_vessel_without_meaning_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
