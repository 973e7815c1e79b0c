/* Dew and bubble points, envelopes and their extrema: against an independent evaluation and by what they mean. */
#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "equilibrium/split.h"
#include "support/check.h"
#include "support/mixture_states.h"
#include "support/sample_mixture.h"

#include <math.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const enum sample_substance FIVE[] = {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE};
static const double FIVE_PARTS[] = {0.11, 0.43, 0.17, 0.19, 0.10};
static const enum sample_substance SPAN_GAS[] = {NITROGEN, N_BUTANE};
static const double SPAN_GAS_PARTS[] = {0.98, 0.02};

/* Peng-Robinson 1976 in 34 digits from the same constants: equal ln f and mole fractions that sum to one, by Newton's
 * method in ln K and ln p. */
struct known_boundary {
    const char *name;
    size_t count;
    enum sample_substance substance[SAMPLE_MOST];
    double z[SAMPLE_MOST];
    double temperature;
    size_t points;
    double pressure[2];
    enum boundary_kind kind[2];
    double first_incipient; /* mole fraction of the first component in the first point's incipient phase */
};

static const struct known_boundary KNOWN[] = {
    {"2 % n-butane in nitrogen, both dew points",
     2,
     {NITROGEN, N_BUTANE},
     {0.98, 0.02},
     248.15,
     2,
     {2903366.9516650985, 14099129.930567956},
     {BOUNDARY_DEW, BOUNDARY_DEW},
     0.0510152119581},
    {"methane and propane",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     277.6,
     2,
     {907209.2202260977, 6067147.5041687842},
     {BOUNDARY_DEW, BOUNDARY_BUBBLE},
     0.0257525246703},
    {"five components",
     5,
     {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE},
     {0.11, 0.43, 0.17, 0.19, 0.10},
     251.3,
     2,
     {327072.34338708006, 10812095.907341331},
     {BOUNDARY_DEW, BOUNDARY_BUBBLE},
     0.000708406279931},
    {"methane and propane, a dew point of less than a kilopascal",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     135.86,
     2,
     {83.2358046263547397, 246224.868226345793},
     {BOUNDARY_DEW, BOUNDARY_BUBBLE},
     4.058288857542e-5},
    {"methane and propane, a dew point of less than a pascal",
     2,
     {METHANE, PROPANE},
     {0.37, 0.63},
     100.0,
     2,
     {0.0658233861184396899, 18122.9092637533688},
     {BOUNDARY_DEW, BOUNDARY_BUBBLE},
     4.021290597124e-7},
    {"nothing above the cricondentherm", 2, {NITROGEN, N_BUTANE}, {0.98, 0.02}, 255.4, 0, {0.0}, {BOUNDARY_DEW}, 0.0},
};

static void all_points_at_a_temperature_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(KNOWN); k++) {
        const struct known_boundary *known = &KNOWN[k];
        struct sample_mixture m = sample_mixture_create(known->count, known->substance, 300.0, arena);
        struct envelope *envelope = envelope_create(known->count, arena);
        struct boundary_list *list = boundary_list_create(known->count, arena);
        assert_int_equal(envelope_trace(m.at_t, m.fluid, known->z, m.ws, envelope), ANSWER_OK);
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, known->temperature, known->z, envelope, m.ws, list), ANSWER_OK);
        assert_int_equal(list->count, known->points);
        for (size_t i = 0; i < list->count; i++) {
            assert_close(list->point[i]->pressure, known->pressure[i], 1e-10, known->name);
            assert_int_equal(list->point[i]->kind, known->kind[i]);
            assert_true(list->point[i]->is_stable);
        }
        if (list->count > 0) {
            assert_close(list->point[0]->incipient[0], known->first_incipient, 1e-9, known->name);
        }
    }
    arena_free(arena);
}

static void the_first_dew_pressure_is_found_without_an_envelope(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(KNOWN); k++) {
        const struct known_boundary *known = &KNOWN[k];
        struct sample_mixture m = sample_mixture_create(known->count, known->substance, known->temperature, arena);
        struct boundary_point *point = boundary_point_create(known->count, arena);
        const enum answer answer = boundary_dew_pressure(m.at_t, known->z, m.ws, point);
        if (known->points == 0) {
            assert_int_equal(answer, ANSWER_NO_SUCH_ROOT);
        } else {
            assert_int_equal(answer, ANSWER_OK);
            assert_close(point->pressure, known->pressure[0], 1e-10, known->name);
            assert_true(point->kind == BOUNDARY_DEW && point->is_stable);
        }
    }
    arena_free(arena);
}

/* Constants as given here, so that states can be chosen beside their critical points. */
struct critical_neighbour {
    const char *name;
    size_t count;
    double constants[3][3]; /* K, Pa, acentric factor */
    double z[3];
    double kij[3]; /* of the first and second, first and third, second and third */
    double temperature;
    size_t points;
    double pressure; /* of the point next to the critical one */
    enum boundary_kind kind;
    double incipient; /* mole fraction of the first component */
};

/* Peng-Robinson 1976 in 34 digits: equal ln f and pressures by Newton's method in ln w and both ln v. */
static const struct critical_neighbour NEIGHBOURS[] = {
    {"methane and n-butane",
     2,
     {{190.564, 4599200.0, 0.01142}, {425.125, 3796000.0, 0.201}},
     {0.7, 0.3},
     {0.02},
     323.0,
     2,
     13511522.1461714567,
     BOUNDARY_BUBBLE,
     0.708394822359},
    {"methane and n-butane",
     2,
     {{190.564, 4599200.0, 0.01142}, {425.125, 3796000.0, 0.201}},
     {0.7, 0.3},
     {0.02},
     324.4,
     2,
     13456753.0891840839,
     BOUNDARY_BUBBLE,
     0.700399871928},
    {"methane and n-butane",
     2,
     {{190.564, 4599200.0, 0.01142}, {425.125, 3796000.0, 0.201}},
     {0.7, 0.3},
     {0.02},
     324.47,
     2,
     13453855.2199547985,
     BOUNDARY_DEW,
     0.699993833768},
    {"methane and n-butane",
     2,
     {{190.564, 4599200.0, 0.01142}, {425.125, 3796000.0, 0.201}},
     {0.7, 0.3},
     {0.02},
     324.6,
     2,
     13448432.5299147402,
     BOUNDARY_DEW,
     0.699238138958},
    {"methane and n-butane",
     2,
     {{190.564, 4599200.0, 0.01142}, {425.125, 3796000.0, 0.201}},
     {0.7, 0.3},
     {0.02},
     325.03,
     2,
     13430114.359497673,
     BOUNDARY_DEW,
     0.696723362327},
    {"methane and propane",
     2,
     {{190.564, 4599200.0, 0.01142}, {369.89, 4251200.0, 0.1521}},
     {0.8, 0.2},
     {0.0},
     256.21,
     2,
     9622024.13728368563,
     BOUNDARY_BUBBLE,
     0.800027108096},
    {"methane and propane",
     2,
     {{190.564, 4599200.0, 0.01142}, {369.89, 4251200.0, 0.1521}},
     {0.8, 0.2},
     {0.0},
     256.3,
     2,
     9625071.98889033081,
     BOUNDARY_DEW,
     0.799418019777},
    {"methane and hydrogen sulfide",
     2,
     {{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.5},
     {0.08},
     241.57,
     2,
     17628968.1748560976,
     BOUNDARY_BUBBLE,
     0.500923295097},
    {"methane and hydrogen sulfide",
     2,
     {{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.5},
     {0.08},
     245.0,
     2,
     16745536.1404188353,
     BOUNDARY_BUBBLE,
     0.509185167459},
    {"methane and hydrogen sulfide",
     2,
     {{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.5},
     {0.08},
     281.4,
     2,
     14670550.980095739,
     BOUNDARY_BUBBLE,
     0.500266012765},
    {"methane, carbon dioxide and hydrogen sulfide",
     3,
     {{190.564, 4599200.0, 0.01142}, {304.1282, 7377300.0, 0.22394}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.1, 0.4},
     {0.1, 0.08, 0.1},
     234.2,
     2,
     10688581.0000462158,
     BOUNDARY_BUBBLE,
     0.501180676571},
    {"difluoromethane, pentafluoroethane and R134a",
     3,
     {{351.255, 5782000.0, 0.2769}, {339.173, 3617700.0, 0.3052}, {374.21, 4059280.0, 0.32684}},
     {0.2, 0.4, 0.4},
     {0.0, -0.01, 0.0},
     355.946,
     2,
     4201720.43185362185,
     BOUNDARY_DEW,
     0.19997578421},
    {"nitrogen and ethane",
     2,
     {{126.192, 3395800.0, 0.0372}, {305.322, 4872200.0, 0.0995}},
     {0.3, 0.7},
     {0.05},
     281.7727,
     2,
     9033662.2602133901,
     BOUNDARY_BUBBLE,
     0.30015885245},
    {"nitrogen and ethane",
     2,
     {{126.192, 3395800.0, 0.0372}, {305.322, 4872200.0, 0.0995}},
     {0.3, 0.7},
     {0.05},
     281.7874,
     2,
     9031250.2072575355,
     BOUNDARY_DEW,
     0.299886785902},
    {"methane, ethane and n-butane",
     3,
     {{190.564, 4599200.0, 0.0114}, {305.322, 4872200.0, 0.0995}, {425.125, 3796000.0, 0.2008}},
     {0.7, 0.2, 0.1},
     {0.0, 0.013, 0.0},
     269.0002,
     2,
     10335987.000714064,
     BOUNDARY_BUBBLE,
     0.700048885691},
    {"methane, ethane and n-butane",
     3,
     {{190.564, 4599200.0, 0.0114}, {305.322, 4872200.0, 0.0995}, {425.125, 3796000.0, 0.2008}},
     {0.7, 0.2, 0.1},
     {0.0, 0.013, 0.0},
     269.0136,
     2,
     10336535.214117501,
     BOUNDARY_DEW,
     0.699967425747},
    {"argon and carbon dioxide",
     2,
     {{150.687, 4863000.0, -0.0022}, {304.1282, 7377300.0, 0.22394}},
     {0.4, 0.6},
     {0.13},
     266.5248,
     2,
     14236584.89475937,
     BOUNDARY_BUBBLE,
     0.400149809758},
    {"methane and hydrogen sulfide",
     2,
     {{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.5},
     {0.08},
     281.4661,
     2,
     14669852.995863619,
     BOUNDARY_BUBBLE,
     0.500007927405},
    {"methane and hydrogen sulfide",
     2,
     {{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
     {0.5, 0.5},
     {0.08},
     281.4706,
     2,
     14669805.33189932,
     BOUNDARY_DEW,
     0.499990326451},
};

static struct sample_mixture mixture_of(const struct critical_neighbour *known, struct arena *arena)
{
    struct pure_spec *pure = arena_alloc(arena, known->count, sizeof *pure);
    const struct pure_spec **list = arena_alloc(arena, known->count, sizeof *list);
    double *kij = arena_alloc(arena, known->count * known->count, sizeof *kij);
    for (size_t i = 0; i < known->count; i++) {
        pure[i] = SAMPLE_SUBSTANCE[METHANE];
        pure[i].critical_temperature.value = known->constants[i][0];
        pure[i].critical_pressure.value = known->constants[i][1];
        pure[i].acentric.value = known->constants[i][2];
        list[i] = &pure[i];
        for (size_t j = 0; j < i; j++) {
            kij[i * known->count + j] = kij[j * known->count + i] = known->kij[i + j - 1];
        }
    }
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct fluid_spec){.count = known->count, .pure = list, .kij = kij};
    struct fluid_lack_report lack;
    struct sample_mixture mixture = {.fluid = fluid_create("peng-robinson", spec, arena, &lack)};
    assert_non_null(mixture.fluid);
    mixture.at_t = sample_at_t(mixture.fluid, known->temperature, arena);
    mixture.ws = equilibrium_workspace_create(known->count, arena);
    return mixture;
}

/* Beside a critical point a pressure cannot be had nearer than rounding leaves it, which grows with the inverse square
 * of the contrast: to 5e-9 and not to the last digits. */
static void points_beside_a_critical_point_are_found(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    for (size_t k = 0; k < COUNT(NEIGHBOURS); k++) {
        const struct critical_neighbour *known = &NEIGHBOURS[k];
        struct sample_mixture m = mixture_of(known, arena);
        struct envelope *envelope = envelope_create(known->count, arena);
        struct boundary_list *list = boundary_list_create(known->count, arena);
        assert_int_equal(envelope_trace(m.at_t, m.fluid, known->z, m.ws, envelope), ANSWER_OK);
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, known->temperature, known->z, envelope, m.ws, list), ANSWER_OK);
        assert_int_equal(list->count, known->points);
        const struct boundary_point *point = list->point[list->count - 1];
        assert_close(point->pressure, known->pressure, 5e-9, known->name);
        assert_int_equal(point->kind, known->kind);
        assert_true(point->is_stable && point->residual <= BOUNDARY_TOLERANCE);
        assert_close(point->incipient[0], known->incipient, 3e-6, known->name);
        assert_int_equal(boundary_at_p(m.at_t, m.fluid, known->pressure, known->z, envelope, m.ws, list), ANSWER_OK);
        double nearest = HUGE_VAL;
        for (size_t i = 0; i < list->count; i++) {
            nearest = fmin(nearest, fabs(list->point[i]->temperature / known->temperature - 1.0));
        }
        assert_near(nearest, 0.0, 1e-7, known->name);
    }
    arena_free(arena);
}

/* From a part in a hundred to one in a million to either side of its critical temperature a mixture has points, one of
 * them close to the critical one; at it there is an answer too. Mixtures of two to five substances in parts drawn from
 * a seed. */
static void no_temperature_beside_a_critical_point_is_without_points(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const enum sample_substance all[] = {NITROGEN, METHANE, CARBON_DIOXIDE, PROPANE, N_BUTANE};
    size_t tried = 0;
    uint64_t seed = 20261201;
    for (size_t k = 0; k < 24; k++) {
        const size_t first = k % 3, count = 2 + k % 4 > 5 - first ? 5 - first : 2 + k % 4;
        struct sample_mixture m = sample_mixture_create(count, &all[first], 300.0, arena);
        struct envelope *envelope = envelope_create(count, arena);
        struct boundary_list *list = boundary_list_create(count, arena);
        double z[5];
        for (size_t i = 0; i < count; i++) {
            seed = seed * 6364136223846793005U + 1442695040888963407U;
            z[i] = 0.1 + (double)(seed >> 11) / 9007199254740992.0;
        }
        struct mixture_critical critical;
        assert_int_equal(envelope_trace(m.at_t, m.fluid, z, m.ws, envelope), ANSWER_OK);
        if (envelope->critical_count == 0 ||
            mixture_critical_near(m.at_t, m.fluid, z, &envelope->critical[0], m.ws, &critical) != ANSWER_OK) {
            continue;
        }
        tried++;
        static const double off[] = {-1e-2, -1e-3, -1e-4, -1e-5, -1e-6, 0.0, 1e-6, 1e-5, 1e-4, 1e-3};
        for (size_t j = 0; j < COUNT(off); j++) {
            const double T = critical.temperature * (1.0 + off[j]);
            double nearest = HUGE_VAL;
            assert_int_equal(boundary_at_t(m.at_t, m.fluid, T, z, envelope, m.ws, list), ANSWER_OK);
            for (size_t i = 0; i < list->count; i++) {
                nearest = fmin(nearest, fabs(list->point[i]->pressure / critical.pressure - 1.0));
            }
            /* At the critical temperature itself rounding decides whether the point where nothing opens is told. */
            assert_true(nearest <= 30.0 * fabs(off[j]) + 1e-7 || !(fabs(off[j]) > 0.0));
        }
    }
    assert_true(tried >= 15);
    arena_free(arena);
}

/* Methane and hydrogen sulfide: critical at 281.4681 K and, where a second liquid forms, at 241.1893 K; by the criteria
 * of Heidemann and Khalil. */
static void a_line_is_followed_past_two_critical_points_without_turning_back(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct critical_neighbour mixture = {.count = 2, .z = {0.5, 0.5}, .kij = {0.08}, .temperature = 300.0};
    memcpy(mixture.constants, (const double[3][3]){{190.564, 4599200.0, 0.01142}, {373.1, 9000000.0, 0.1005}},
           sizeof mixture.constants);
    struct sample_mixture m = mixture_of(&mixture, arena);
    struct envelope *envelope = envelope_create(2, arena);
    struct boundary_list *list = boundary_list_create(2, arena);
    assert_int_equal(envelope_trace(m.at_t, m.fluid, mixture.z, m.ws, envelope), ANSWER_OK);
    assert_int_equal(envelope->critical_count, 2);
    assert_close(envelope->critical[0].temperature, 281.46812666, 1e-4, "the criteria");
    assert_close(envelope->critical[1].temperature, 241.18930868, 1e-4, "the criteria");
    assert_int_equal(envelope->line[0].end, ENVELOPE_END_HIGH_PRESSURE);
    static const struct {
        double temperature;
        size_t points;
    } known[] = {{205.33, 1}, {285.0, 2}, {314.04, 2}};
    for (size_t k = 0; k < COUNT(known); k++) {
        const double T = known[k].temperature;
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, T, mixture.z, envelope, m.ws, list), ANSWER_OK);
        assert_int_equal(list->count, known[k].points);
    }
    arena_free(arena);
}

/* The temperatures found at a pressure lead back to it. */
static void temperatures_at_a_pressure_lead_back_to_it(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct sample_mixture m = sample_mixture_create(5, FIVE, 300.0, arena);
    struct envelope *envelope = envelope_create(5, arena);
    struct boundary_list *at_p = boundary_list_create(5, arena), *at_t = boundary_list_create(5, arena);
    assert_int_equal(envelope_trace(m.at_t, m.fluid, FIVE_PARTS, m.ws, envelope), ANSWER_OK);
    static const double pressures[] = {2.3e4, 7.1e5, 5.3e6, 1.19e7, 1.23e7};
    for (size_t k = 0; k < COUNT(pressures); k++) {
        assert_int_equal(boundary_at_p(m.at_t, m.fluid, pressures[k], FIVE_PARTS, envelope, m.ws, at_p), ANSWER_OK);
        assert_int_equal(at_p->count, 2);
        for (size_t i = 0; i < at_p->count; i++) {
            const double T = at_p->point[i]->temperature;
            double nearest = HUGE_VAL;
            assert_int_equal(boundary_at_t(m.at_t, m.fluid, T, FIVE_PARTS, envelope, m.ws, at_t), ANSWER_OK);
            for (size_t j = 0; j < at_t->count; j++) {
                nearest = fmin(nearest, fabs(at_t->point[j]->pressure / pressures[k] - 1.0));
            }
            assert_near(nearest, 0.0, 1e-9, "the pressure the temperature was found at");
        }
    }
    arena_free(arena);
}

/* Peng-Robinson 1976 in 50 digits: the equations of a dew point with the derivative that vanishes at the extremum. */
static void extrema_agree_with_an_independent_evaluation(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct sample_mixture m = sample_mixture_create(5, FIVE, 300.0, arena);
    struct envelope *envelope = envelope_create(5, arena);
    assert_int_equal(envelope_trace(m.at_t, m.fluid, FIVE_PARTS, m.ws, envelope), ANSWER_OK);
    assert_true(envelope->has_cricondentherm && envelope->has_cricondenbar);
    assert_close(envelope->cricondentherm->temperature, 326.159754198780718, 1e-10, "five components");
    assert_close(envelope->cricondentherm->pressure, 7724339.44574178597, 1e-7, "five components");
    assert_close(envelope->cricondenbar->temperature, 290.527804545601946, 1e-7, "five components");
    assert_close(envelope->cricondenbar->pressure, 12329268.1729720643, 1e-10, "five components");
    assert_int_equal(envelope->critical_count, 1);
    assert_int_equal(envelope->line_count, 1);
    assert_int_equal(envelope->line[0].end, ENVELOPE_END_LOW_PRESSURE);
    struct sample_mixture s = sample_mixture_create(2, SPAN_GAS, 300.0, arena);
    struct envelope *open = envelope_create(2, arena);
    assert_int_equal(envelope_trace(s.at_t, s.fluid, SPAN_GAS_PARTS, s.ws, open), ANSWER_OK);
    assert_close(open->cricondentherm->temperature, 255.365561008200818, 1e-10, "2 % n-butane in nitrogen");
    assert_close(open->cricondentherm->pressure, 7353498.02915674304, 1e-7, "2 % n-butane in nitrogen");
    assert_int_equal(open->line[0].end, ENVELOPE_END_HIGH_PRESSURE); /* dew line without a critical point */
    arena_free(arena);
}

/* Close to the cricondentherm the two dew points approach each other, and none is lost. */
static void no_pair_is_missed_beside_the_cricondentherm(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct sample_mixture m = sample_mixture_create(5, FIVE, 300.0, arena);
    struct envelope *envelope = envelope_create(5, arena);
    struct boundary_list *list = boundary_list_create(5, arena);
    assert_int_equal(envelope_trace(m.at_t, m.fluid, FIVE_PARTS, m.ws, envelope), ANSWER_OK);
    static const double below[] = {1.0, 0.1, 1e-2, 1e-3, 1e-4};
    for (size_t k = 0; k < COUNT(below); k++) {
        const double T = 326.159754198780718;
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, T - below[k], FIVE_PARTS, envelope, m.ws, list), ANSWER_OK);
        assert_int_equal(list->count, 2);
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, T + below[k], FIVE_PARTS, envelope, m.ws, list), ANSWER_OK);
        assert_int_equal(list->count, 0);
    }
    arena_free(arena);
}

/* Lines traced from either end of one curve meet it twice; a point is told once all the same. */
static void no_point_is_told_twice(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    for (uint64_t seed = 1; seed <= 400; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, STATE_GENERAL, room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        struct envelope *envelope = envelope_create(drawn.count, arena);
        struct boundary_list *list = boundary_list_create(drawn.count, arena);
        if (envelope_trace(place.at_t, place.fluid, drawn.z, place.ws, envelope) != ANSWER_OK) {
            continue; /* one component present */
        }
        for (size_t i = 1; i < envelope->critical_count; i++) {
            const struct critical_point *a = &envelope->critical[i - 1], *b = &envelope->critical[i];
            assert_true(fabs(log(a->temperature / b->temperature)) > 1e-4 ||
                        fabs(log(a->pressure / b->pressure)) > 1e-3);
        }
        if (boundary_at_t(place.at_t, place.fluid, drawn.temperature, drawn.z, envelope, place.ws, list) != ANSWER_OK) {
            continue;
        }
        for (size_t i = 1; i < list->count; i++) {
            const struct boundary_point *a = list->point[i - 1], *b = list->point[i];
            assert_true(fabs(log(a->pressure / b->pressure)) > 1e-9 ||
                        fabs(log(a->incipient_volume / b->incipient_volume)) > 1e-6);
        }
    }
    state_room_close(room);
    arena_free(arena);
}

/* Just inside a stable boundary the flash finds one phase more than just outside, on the side that the point says. */
static void flashes_change_their_phases_at_the_boundary(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create(arena);
    size_t points = 0;
    for (uint64_t seed = 1; seed <= 150; seed++) {
        struct mixture_state drawn;
        mixture_state_draw(seed, STATE_GENERAL, room, &drawn);
        const struct state_place place = mixture_state_place(&drawn, room);
        struct envelope *envelope = envelope_create(drawn.count, arena);
        struct boundary_list *list = boundary_list_create(drawn.count, arena);
        if (envelope_trace(place.at_t, place.fluid, drawn.z, place.ws, envelope) != ANSWER_OK) {
            continue; /* one component present */
        }
        assert_int_equal(boundary_at_t(place.at_t, place.fluid, drawn.temperature, drawn.z, envelope, place.ws, list),
                         ANSWER_OK);
        for (size_t i = 0; i < list->count; i++) {
            const double p = list->point[i]->pressure;
            size_t phases[2];
            if (!list->point[i]->is_stable || p > 2e8) {
                continue;
            }
            for (int side = 0; side < 2; side++) {
                const double moved = p * (side == 0 ? 1.0 - 1e-8 : 1.0 + 1e-8);
                assert_int_equal(split_at_tp(place.at_t, moved, drawn.z, place.ws, place.split), ANSWER_OK);
                phases[side] = place.split->phase_count;
            }
            assert_int_not_equal(phases[0], phases[1]);
            assert_true(list->point[i]->opens == (phases[1] > phases[0]));
            points++;
        }
    }
    assert_true(points > 100);
    state_room_close(room);
    arena_free(arena);
}

/* ---- what no line from low pressure leads to --------------------------------------------------------------------- */

/* Nitrous oxide, oxygen, methane and hydrogen sulphide, with critical constants rounded for this test. */
static const struct pure_spec NITROUS_OXIDE = {.name = "nitrous-oxide",
                                               .molar_mass = 0.0440128,
                                               .critical_temperature = {true, 309.52},
                                               .critical_pressure = {true, 7.245e6},
                                               .acentric = {true, 0.1613}};
static const struct pure_spec OXYGEN = {.name = "oxygen",
                                        .molar_mass = 0.0319988,
                                        .critical_temperature = {true, 154.581},
                                        .critical_pressure = {true, 5.043e6},
                                        .acentric = {true, 0.0222}};
static const struct pure_spec LIGHT = {.name = "methane",
                                       .molar_mass = 0.0160425,
                                       .critical_temperature = {true, 190.564},
                                       .critical_pressure = {true, 4.5992e6},
                                       .acentric = {true, 0.01142}};
static const struct pure_spec HYDROGEN_SULFIDE = {.name = "hydrogen-sulfide",
                                                  .molar_mass = 0.0340809,
                                                  .critical_temperature = {true, 373.1},
                                                  .critical_pressure = {true, 9.0e6},
                                                  .acentric = {true, 0.1005}};

/* Equal parts of two gases by Peng-Robinson 1976, evaluated for this test in 34 digits as above, each from a phase that
 * a scan of the tangent-plane distance over all compositions found on one side of it. */
struct known_edge {
    const char *name;
    const struct pure_spec *pure[2];
    double kij, temperature;
    size_t stable; /* points that are stable */
    double lowest, highest;
    enum boundary_kind highest_kind;
    double first_incipient; /* mole fraction of the first component in the phase that forms at the highest */
    double tolerance;       /* of that: beside a critical point little tells one composition from the next */
};

static const struct known_edge EDGES[] = {
    {"N2O + O2 at 139.23 K",
     {&NITROUS_OXIDE, &OXYGEN},
     0.05,
     139.23,
     2,
     5384.02048890769657,
     12898721.9575023394,
     BOUNDARY_BUBBLE,
     0.2509430071744,
     1e-9},
    {"N2O + O2 at 116.03 K",
     {&NITROUS_OXIDE, &OXYGEN},
     0.05,
     116.03,
     2,
     235.088388705409126,
     565972042.793378896,
     BOUNDARY_DEW,
     0.2789223105978,
     1e-9},
    {"N2O + O2 at 150 K, where a third phase takes the bubble point away",
     {&NITROUS_OXIDE, &OXYGEN},
     0.05,
     150.0,
     2,
     16053.0318404549944,
     4960396.2859845217,
     BOUNDARY_BUBBLE,
     0.1987622895274,
     1e-9},
    {"CH4 + H2S at 241.57 K, lost next to a critical point",
     {&LIGHT, &HYDROGEN_SULFIDE},
     0.08,
     241.57,
     2,
     755079.721913484311,
     17628968.1748560806,
     BOUNDARY_BUBBLE,
     0.5009232950967,
     2e-6},
};

static void check_edge(const struct known_edge *known, struct arena *arena)
{
    static const double z[] = {0.5, 0.5};
    const double kij[] = {0.0, known->kij, known->kij, 0.0};
    const struct fluid_spec spec = {.count = 2, .pure = (const struct pure_spec *const *)known->pure, .kij = kij};
    struct fluid_lack_report lack;
    const struct fluid *fluid = fluid_create("peng-robinson", &spec, arena, &lack);
    assert_non_null(fluid);
    struct fluid_at_t *at_t = sample_at_t(fluid, 300.0, arena);
    struct equilibrium_workspace *ws = equilibrium_workspace_create(2, arena);
    struct envelope *envelope = envelope_create(2, arena);
    struct boundary_list *list = boundary_list_create(2, arena);
    assert_int_equal(envelope_trace(at_t, fluid, z, ws, envelope), ANSWER_OK);
    assert_int_equal(boundary_at_t(at_t, fluid, known->temperature, z, envelope, ws, list), ANSWER_OK);
    assert_int_equal(boundary_complete_at_t(at_t, fluid, known->temperature, z, ws, list), ANSWER_OK);
    assert_true(list->is_complete);
    const struct boundary_point *lowest = NULL, *highest = NULL;
    size_t stable = 0;
    for (size_t i = 0; i < list->count; i++) {
        if (list->point[i]->is_stable) {
            lowest = lowest == NULL ? list->point[i] : lowest;
            highest = list->point[i];
            stable++;
        }
    }
    assert_int_equal(stable, known->stable);
    assert_close(lowest->pressure, known->lowest, 1e-10, known->name);
    assert_int_equal(lowest->kind, BOUNDARY_DEW);
    assert_close(highest->pressure, known->highest, 1e-8, known->name); /* the last lies beside a critical point */
    assert_int_equal(highest->kind, known->highest_kind);
    assert_close(highest->incipient[0], known->first_incipient, known->tolerance, known->name);
}

static void edges_that_no_line_leads_to_are_found_by_stability(void **state)
{
    (void)state;
    for (size_t k = 0; k < COUNT(EDGES); k++) {
        struct arena *arena = arena_create(NULL);
        check_edge(&EDGES[k], arena);
        arena_free(arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(all_points_at_a_temperature_agree_with_an_independent_evaluation),
        cmocka_unit_test(the_first_dew_pressure_is_found_without_an_envelope),
        cmocka_unit_test(points_beside_a_critical_point_are_found),
        cmocka_unit_test(no_temperature_beside_a_critical_point_is_without_points),
        cmocka_unit_test(a_line_is_followed_past_two_critical_points_without_turning_back),
        cmocka_unit_test(temperatures_at_a_pressure_lead_back_to_it),
        cmocka_unit_test(extrema_agree_with_an_independent_evaluation),
        cmocka_unit_test(no_pair_is_missed_beside_the_cricondentherm),
        cmocka_unit_test(no_point_is_told_twice),
        cmocka_unit_test(flashes_change_their_phases_at_the_boundary),
        cmocka_unit_test(edges_that_no_line_leads_to_are_found_by_stability),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
