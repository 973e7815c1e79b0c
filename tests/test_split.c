/* The flash at T, p: against an independent evaluation, and by the conditions of equilibrium themselves. */
#include "equilibrium/split.h"
#include "support/check.h"
#include "support/mixture_states.h"
#include "support/sample_mixture.h"

#include <math.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* Peng-Robinson 1976 evaluated in 34 digits from the same critical constants and pair parameters: cubic roots by
 * polynomial solver, successive substitution and Newton's method in ln K. x is the liquid's, y the vapour's. */
struct known_split {
    const char *name;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double z[SAMPLE_MOST];
    double temperature, pressure;
    double vapour_fraction, x[SAMPLE_MOST], y[SAMPLE_MOST], Z_liquid, Z_vapour;
};

static const struct known_split KNOWN[] = {
    {"2 % n-butane in nitrogen, 248.15 K, 97 bar",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     9.7e6,
     0.99574910376391955,
     {0.15576511053629648, 0.84423488946370352},
     {0.98351869459487672, 0.016481305405123283},
     0.37886387992399298,
     0.92136300345441957},
    {"the same beside its lower dew point, 29.5 bar",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     2.95e6,
     0.99981725787819597,
     {0.051808255359365082, 0.94819174464063492},
     {0.98016965073119119, 0.019830349268808807},
     0.12233163440226733,
     0.96189828781583596},
    {"methane and propane",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     277.6,
     4.1e6,
     0.23156841464158535,
     {0.24137068442232311, 0.75862931557767689},
     {0.7968407202506786, 0.2031592797493214},
     0.13637371281800643,
     0.78667448146894322},
    {"five components",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     251.3,
     3.3e6,
     0.6329615232241607,
     {0.013626763689144461, 0.16078351390928689, 0.1493283240312284, 0.41941465558756091, 0.25684674278277933},
     {0.16588441723489618, 0.58611187307934533, 0.18198698527729408, 0.05696820794414758, 0.0090485164643168297},
     0.11049636581295038,
     0.83869011659798692},
    {"carbon dioxide and propane",
     2,
     {CARBON_DIOXIDE, PROPANE},
     {0.4, 0.6},
     290.0,
     2.5e6,
     0.25823155114167854,
     {0.3002501209279304, 0.6997498790720696},
     {0.68653087798902983, 0.31346912201097017},
     0.080488845642962785,
     0.75796659259219495},
    {"five components, retrograde",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.13, 0.61, 0.11, 0.10, 0.05},
     280.15,
     7.5e6,
     0.91800281752670503,
     {0.031071808937832262, 0.30772447061238109, 0.099352888366750628, 0.30020054407722138, 0.26165028800581465},
     {0.13883639219771957, 0.63699963580415416, 0.11095101359030382, 0.082117832069207881, 0.031095126338614574},
     0.24458487677234199,
     0.72829221951878603},
};

static void splits_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(KNOWN); k++) {
        const struct known_split *known = &KNOWN[k];
        struct sample_mixture m = sample_mixture_create(known->count, known->substance, known->temperature, arena);
        struct split *split = split_create(known->count, arena);
        assert_int_equal(split_at_tp(m.at_t, known->pressure, known->z, m.ws, split), ANSWER_OK);
        assert_int_equal(split->phase_count, 2);
        assert_near(split->phase[0].fraction, known->vapour_fraction, 1e-10, known->name);
        assert_close(split->phase[0].Z, known->Z_vapour, 1e-10, known->name);
        assert_close(split->phase[1].Z, known->Z_liquid, 1e-10, known->name);
        for (size_t i = 0; i < known->count; i++) {
            assert_near(split->phase[0].x[i], known->y[i], 1e-10, known->name);
            assert_near(split->phase[1].x[i], known->x[i], 1e-10, known->name);
        }
    }
    arena_free(arena);
}

/* ---- conditions of equilibrium --------------------------------------------------------------------------------- */

/* Material balance, equal fugacities from the reported compositions alone, fractions that sum to one, lightest first.
 */
static void assert_equilibrium(const struct split *split, const double z[], size_t count, const char *what)
{
    double sum = 0.0, total = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += z[i];
    }
    for (size_t k = 0; k < split->phase_count; k++) {
        total += split->phase[k].fraction;
        assert_true(k == 0 || split->phase[k].molar_volume <= split->phase[k - 1].molar_volume);
    }
    assert_close(total, 1.0, 1e-14, what);
    for (size_t i = 0; i < count; i++) {
        double held = 0.0;
        for (size_t k = 0; k < split->phase_count; k++) {
            const struct split_phase *phase = &split->phase[k];
            held += phase->fraction * phase->x[i];
            if (z[i] > 0.0) {
                const double ln_f = log(phase->x[i]) + phase->ln_phi[i];
                const double first = log(split->phase[0].x[i]) + split->phase[0].ln_phi[i];
                assert_near(ln_f - first, 0.0, 1e-11, what);
            }
        }
        assert_near(held * sum - z[i], 0.0, 1e-13 * z[i], what);
    }
    assert_true(split->smallest_tpd >= -SPLIT_LEAST_TPD && split->gibbs_gain <= 1e-13);
}

static void random_states_meet_the_conditions_of_equilibrium(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    for (uint64_t seed = 1; seed <= 2000; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, seed % 2 == 0 ? STATE_GENERAL : STATE_NEARLY_PURE, room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        assert_int_equal(split_at_tp(place.at_t, drawn.pressure, drawn.z, place.ws, place.split), ANSWER_OK);
        assert_equilibrium(place.split, drawn.z, drawn.count, "conditions of equilibrium");
    }
    state_room_close(room);
    arena_free(arena);
}

/* The amount of feed does not matter, nor does a component that is not there. */
static void absent_components_change_nothing(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance all[] = {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE};
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(5, all, 277.6, arena),
                          n = sample_mixture_create(2, two, 277.6, arena);
    struct split *more = split_create(5, arena), *less = split_create(2, arena);
    const double with_zeros[] = {0.0, 3.7, 0.0, 6.3, 0.0}, without[] = {0.37, 0.63};
    assert_int_equal(split_at_tp(m.at_t, 4.1e6, with_zeros, m.ws, more), ANSWER_OK);
    assert_int_equal(split_at_tp(n.at_t, 4.1e6, without, n.ws, less), ANSWER_OK);
    assert_int_equal(more->phase_count, 2);
    assert_close(more->phase[0].fraction, less->phase[0].fraction, 1e-12, "the same mixture of two");
    assert_close(more->phase[1].x[3], less->phase[1].x[1], 1e-12, "the same mixture of two");
    assert_true(more->phase[1].x[0] <= 0.0 && isfinite(more->phase[1].ln_phi[0]));
    arena_free(arena);
}

/* One present component is one phase at any pressure: the root of lower Gibbs energy. */
static void a_pure_feed_is_one_phase(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 277.6, arena);
    struct split *split = split_create(2, arena);
    const double z[] = {0.0, 2.0};
    assert_int_equal(split_at_tp(m.at_t, 5.2e5, z, m.ws, split), ANSWER_OK);
    assert_true(split->phase_count == 1 && split->phase[0].Z > 0.5);
    assert_int_equal(split_at_tp(m.at_t, 5.6e5, z, m.ws, split), ANSWER_OK);
    assert_true(split->phase_count == 1 && split->phase[0].Z < 0.1);
    arena_free(arena);
}

/* A trace of methane in propane splits within parts in 1e6 of propane's vapour pressure, with the amounts of the
 * lever rule between: the split is found although its range of pressure is that narrow. */
static void a_nearly_pure_feed_splits_at_the_vapour_pressure(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 277.6, arena);
    struct split *split = split_create(2, arena);
    const double z[] = {1e-6, 1.0};
    size_t found = 0;
    for (double p = 5.2e5; p < 5.6e5; p *= 1.0 + 2e-6) {
        assert_int_equal(split_at_tp(m.at_t, p, z, m.ws, split), ANSWER_OK);
        found += split->phase_count == 2;
        assert_equilibrium(split, z, 2, "nearly pure");
    }
    assert_true(found >= 3);
    arena_free(arena);
}

static void three_phases_are_found(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    size_t found = 0;
    for (uint64_t seed = 1; seed <= 4000 && found < 20; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, STATE_GENERAL, room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        assert_int_equal(split_at_tp(place.at_t, drawn.pressure, drawn.z, place.ws, place.split), ANSWER_OK);
        if (place.split->phase_count > 2) {
            found++;
            assert_equilibrium(place.split, drawn.z, drawn.count, "three phases");
        }
    }
    assert_int_equal(found, 20);
    state_room_close(room);
    arena_free(arena);
}

static void a_feed_without_meaning_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance two[] = {METHANE, PROPANE};
    struct sample_mixture m = sample_mixture_create(2, two, 277.6, arena);
    struct split *split = split_create(2, arena);
    static const double wrong[][2] = {{0.0, 0.0}, {-0.1, 1.0}, {(double)NAN, 1.0}, {(double)INFINITY, 1.0}};
    for (size_t k = 0; k < COUNT(wrong); k++) {
        assert_int_equal(split_at_tp(m.at_t, 1e6, wrong[k], m.ws, split), ANSWER_OUT_OF_RANGE);
    }
    static const double pressures[] = {0.0, -1e5, (double)NAN, (double)INFINITY};
    const double z[] = {0.5, 0.5};
    for (size_t k = 0; k < COUNT(pressures); k++) {
        assert_int_equal(split_at_tp(m.at_t, pressures[k], z, m.ws, split), ANSWER_OUT_OF_RANGE);
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(splits_agree_with_an_independent_evaluation),
        cmocka_unit_test(random_states_meet_the_conditions_of_equilibrium),
        cmocka_unit_test(absent_components_change_nothing),
        cmocka_unit_test(a_pure_feed_is_one_phase),
        cmocka_unit_test(a_nearly_pure_feed_splits_at_the_vapour_pressure),
        cmocka_unit_test(three_phases_are_found),
        cmocka_unit_test(a_feed_without_meaning_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
