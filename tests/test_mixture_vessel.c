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
        cmocka_unit_test(a_start_nearby_changes_nothing),
        cmocka_unit_test(a_vessel_without_meaning_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
