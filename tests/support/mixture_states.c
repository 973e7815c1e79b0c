#include "support/mixture_states.h"
#include "case/case.h"
#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "support/check.h"
#include "support/library_gases.h"
#include "support/measured_mixture.h"

#include <math.h>
#include <string.h>

/* A state of fewer gases than were to be drawn, where so many draws find none that has a pair with each of the others.
 */
enum { MOST_DRAWS = 300 };

/* K. Below about 235 K the reference equation of water has no liquid (water is ice there): mixtures with water are
 * drawn at this temperature and above by the methods that take the equation. */
#define LEAST_TEMPERATURE_WITH_WATER 240.0

/* The gases a method's mixtures are drawn from. */
struct state_pool {
    const char *method;
    size_t count;
    const struct fluid_spec *library; /* of all gases as one mixture; NULL: LIBRARY_GAS, with no pairs */
};

struct state_room {
    struct state_pool pool;
    struct arena *arena; /* of the current fluid alone */
    struct fluid_spec spec;
    const struct pure_spec *pure[STATE_MOST_COMPONENTS];
    struct equilibrium_workspace *ws[STATE_MOST_COMPONENTS + 1];
    struct split *split[STATE_MOST_COMPONENTS + 1];
    struct envelope *envelope[STATE_MOST_COMPONENTS + 1];
    struct boundary_point *point;
};

/* Gases with a reference equation and published pairs. */
static const char *const MULTI_FLUID_GASES[] = {"carbon-dioxide",
                                                "propane",
                                                "n-butane",
                                                "isobutane",
                                                "n-hexane",
                                                "n-pentane",
                                                "ethane",
                                                "n-heptane",
                                                "propylene",
                                                "r32",
                                                "n-octane",
                                                "ethanol",
                                                "n-nonane",
                                                "r134a",
                                                "methane",
                                                "benzene",
                                                "n-decane",
                                                "nitrogen",
                                                "r22",
                                                "r152a",
                                                "hydrogen-sulfide",
                                                "argon",
                                                "acetone",
                                                "carbon-monoxide",
                                                "r23",
                                                "toluene",
                                                "cyclohexane",
                                                "water",
                                                "r125",
                                                "isopentane",
                                                "oxygen",
                                                "hydrogen",
                                                "methanol",
                                                "helium",
                                                "ethylene",
                                                "dimethyl-ether",
                                                "r1234yf",
                                                "r12",
                                                "r143a",
                                                "m-xylene",
                                                "ammonia",
                                                "r1234ze-e",
                                                "p-xylene",
                                                "r227ea",
                                                "ethylbenzene",
                                                "o-xylene",
                                                "r114",
                                                "hydrogen-chloride",
                                                "xenon",
                                                "isobutene",
                                                "sulfur-dioxide",
                                                "r116",
                                                "diethyl-ether",
                                                "r142b",
                                                "r14",
                                                "r218",
                                                "r245fa",
                                                "r13",
                                                "r161",
                                                "r1243zf",
                                                "r13i1",
                                                "1-butene",
                                                "r236fa",
                                                "krypton",
                                                "neopentane",
                                                "isohexane",
                                                "r1233zd-e",
                                                "r41",
                                                "r40",
                                                "r115",
                                                "rc318",
                                                "r123",
                                                "r124",
                                                "cis-2-butene",
                                                "trans-2-butene",
                                                "cyclopentane",
                                                "carbonyl-sulfide",
                                                "cyclopropane",
                                                "neon",
                                                "sulfur-hexafluoride",
                                                "r11",
                                                "deuterium",
                                                "r21",
                                                "r141b",
                                                "nitrous-oxide",
                                                "propyne",
                                                "chlorine"};

static const char *const GERG_GASES[] = {
    "methane",    "nitrogen",  "carbon-dioxide",  "ethane",    "propane",          "isobutane", "n-butane",
    "isopentane", "n-pentane", "n-hexane",        "n-heptane", "n-octane",         "n-nonane",  "n-decane",
    "hydrogen",   "oxygen",    "carbon-monoxide", "water",     "hydrogen-sulfide", "helium",    "argon",
};

#define COUNT(array) (sizeof(array) / sizeof *(array))

static struct state_pool open_pool(const char *method, struct arena *arena)
{
    if (strcmp(method, "multi-fluid") == 0) {
        const size_t count = COUNT(MULTI_FLUID_GASES);
        return (struct state_pool){method, count, &measured_case_fluid(method, MULTI_FLUID_GASES, count, arena)->spec};
    }
    if (strcmp(method, "gerg-2008") == 0) {
        const size_t count = COUNT(GERG_GASES);
        return (struct state_pool){method, count, &measured_case_fluid(method, GERG_GASES, count, arena)->spec};
    }
    return (struct state_pool){method, LIBRARY_GASES, NULL};
}

struct state_room *state_room_create(struct arena *arena)
{
    return state_room_create_for("peng-robinson", arena);
}

struct state_room *state_room_create_for(const char *method, struct arena *arena)
{
    struct state_room *room = arena_alloc(arena, 1, sizeof *room);
    room->pool = open_pool(method, arena);
    for (size_t count = 1; count <= STATE_MOST_COMPONENTS; count++) {
        room->ws[count] = equilibrium_workspace_create(count, arena);
        room->split[count] = split_create(count, arena);
        room->envelope[count] = envelope_create(count, arena);
    }
    room->point = boundary_point_create(STATE_MOST_COMPONENTS, arena);
    return room;
}

void state_room_close(struct state_room *room)
{
    arena_free(room->arena);
    room->arena = NULL;
}

/* splitmix64: Steele, Lea and Flood, OOPSLA 2014. */
static uint64_t next(uint64_t *state)
{
    uint64_t z = (*state += 0x9E3779B97F4A7C15U);
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9U;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBU;
    return z ^ (z >> 31);
}

/* In [0, 1). */
static double uniform(uint64_t *state)
{
    return (double)(next(state) >> 11) / 9007199254740992.0;
}

static size_t one_of(uint64_t *state, size_t count)
{
    return (size_t)(next(state) % count);
}

static const struct reducing_pair *pair_of(const struct fluid_spec *library, size_t a, size_t b)
{
    for (size_t k = 0; k < library->reducing_pair_count; k++) {
        const struct reducing_pair *pair = &library->reducing_pairs[k];
        if ((pair->first == a && pair->second == b) || (pair->first == b && pair->second == a)) {
            return pair;
        }
    }
    return NULL;
}

/* Whether a gas may join those before it: another one, and each pair with them published where pairs matter. */
static bool may_join(const struct state_pool *pool, const struct mixture_state *out, size_t i)
{
    for (size_t j = 0; j < i; j++) {
        if (out->gas[j] == out->gas[i] ||
            (pool->library != NULL && pair_of(pool->library, out->gas[j], out->gas[i]) == NULL)) {
            return false;
        }
    }
    return true;
}

static void draw_gases(uint64_t *state, const struct state_pool *pool, struct mixture_state *out)
{
    out->count = 1 + one_of(state, STATE_MOST_COMPONENTS);
    for (size_t i = 0; i < out->count; i++) {
        size_t draws = 0;
        do {
            if (draws++ == MOST_DRAWS) {
                out->count = i;
                return;
            }
            out->gas[i] = one_of(state, pool->count);
        } while (!may_join(pool, out, i));
    }
}

/* Half of the mixtures with parts of like size, half with parts spread over eight decades; one part in fifteen is
 * exactly absent. */
static void draw_parts(uint64_t *state, enum state_kind kind, struct mixture_state *out)
{
    const double decades = kind == STATE_NEARLY_PURE ? 3.0 : one_of(state, 2) == 0 ? 1.0 : 8.0;
    for (size_t i = 0; i < out->count; i++) {
        out->z[i] = pow(10.0, -decades * uniform(state));
        if (one_of(state, 15) == 0) {
            out->z[i] = 0.0;
        }
    }
    const size_t chief = one_of(state, out->count);
    out->z[chief] = kind == STATE_NEARLY_PURE ? 1e5 * (double)out->count : fmax(out->z[chief], 0.1);
}

/* ---- fluids ---------------------------------------------------------------------------------------------------- */

/* The pairs of the gases drawn, numbered as these are. */
static void take_pairs(const struct mixture_state *state, struct state_room *room)
{
    struct reducing_pair *pairs = arena_alloc(room->arena, state->count * state->count, sizeof *pairs);
    size_t count = 0;
    for (size_t i = 0; i < state->count; i++) {
        for (size_t j = 0; j < i; j++) {
            const struct reducing_pair *pair = pair_of(room->pool.library, state->gas[i], state->gas[j]);
            if (pair != NULL) {
                pairs[count] = *pair;
                pairs[count].first = pair->first == state->gas[i] ? i : j;
                pairs[count++].second = pair->first == state->gas[i] ? j : i;
            }
        }
    }
    room->spec.reducing_pairs = pairs;
    room->spec.reducing_pair_count = count;
}

struct state_place mixture_state_place(const struct mixture_state *state, struct state_room *room)
{
    struct fluid_lack_report lack;
    if (room->arena) {
        arena_free(room->arena);
    }
    room->arena = arena_create(NULL);
    for (size_t i = 0; i < state->count; i++) {
        const size_t gas = state->gas[i];
        room->pure[i] = room->pool.library != NULL ? room->pool.library->pure[gas] : &LIBRARY_GAS[gas];
    }
    room->spec = (struct fluid_spec){.count = state->count, .pure = room->pure};
    if (room->pool.library != NULL) {
        take_pairs(state, room);
    }
    struct state_place place = {.ws = room->ws[state->count], .split = room->split[state->count]};
    place.fluid = fluid_create(room->pool.method, &room->spec, room->arena, &lack);
    assert_non_null(place.fluid);
    place.at_t = fluid_at_t_create(place.fluid, room->arena);
    assert_int_equal(fluid_set_t(place.at_t, place.fluid, state->temperature), ANSWER_OK);
    return place;
}

/* ---- states beside a boundary ---------------------------------------------------------------------------------- */

static size_t phases_at(const struct state_place *place, const struct mixture_state *state, double pressure)
{
    const enum answer answer = split_at_tp(place->at_t, pressure, state->z, place->ws, place->split);
    return answer == ANSWER_OK ? place->split->phase_count : 0;
}

/* Moves the pressure to within 1 % of the first change found going up or down from it, at any distance from 1e-2 to
 * 1e-11 of it; a state that has none between 100 Pa and 100 MPa stays where it is. */
static void move_to_boundary(uint64_t *state, struct state_room *room, struct mixture_state *out)
{
    const struct state_place place = mixture_state_place(out, room);
    const size_t here = phases_at(&place, out, out->pressure);
    const double factor = one_of(state, 2) == 0 ? 1.3 : 1.0 / 1.3;
    double inside = out->pressure, outside = out->pressure;
    while (phases_at(&place, out, outside) == here) {
        inside = outside;
        outside *= factor;
        if (!(outside > 1e2 && outside < 1e8)) {
            return;
        }
    }
    for (int k = 0; k < 45; k++) {
        const double middle = sqrt(inside * outside);
        *(phases_at(&place, out, middle) == here ? &inside : &outside) = middle;
    }
    const double distance = pow(10.0, -2.0 - 9.0 * uniform(state));
    out->pressure = inside * (1.0 + (one_of(state, 2) == 0 ? distance : -distance));
}

/* ---- states beside a critical point or an azeotrope ------------------------------------------------------------ */

/* A relative distance of either sign, from 1e-2 down to 1e-2 - decades. */
static double draw_distance(uint64_t *state, double decades)
{
    const double distance = pow(10.0, -2.0 - decades * uniform(state));
    return one_of(state, 2) == 0 ? distance : -distance;
}

/* K; by the methods that take reference equations none colder. */
static double least_temperature(const struct state_pool *pool, const struct mixture_state *out)
{
    double least = 0.0;
    for (size_t i = 0; pool->library != NULL && i < out->count; i++) {
        if (strcmp(pool->library->pure[out->gas[i]]->name, "water") == 0) {
            least = LEAST_TEMPERATURE_WITH_WATER;
        }
    }
    return least;
}

/* Reference equations have no meaning far above their published pressures, where the lines of an open envelope end. */
static bool is_inside(const struct state_room *room, const struct state_place *place, const struct mixture_state *state,
                      const struct mixture_critical *critical)
{
    return room->pool.library == NULL ||
           (critical->temperature >= least_temperature(&room->pool, state) &&
            place->fluid->ops->range(place->fluid, critical->temperature, critical->pressure).side == RANGE_INSIDE);
}

/* A mixture without a critical point that is found stays where it is. */
static void move_to_critical(uint64_t *state, struct state_room *room, struct mixture_state *out)
{
    const struct state_place place = mixture_state_place(out, room);
    struct envelope *envelope = room->envelope[out->count];
    struct mixture_critical critical;
    if (envelope_trace(place.at_t, place.fluid, out->z, place.ws, envelope) == ANSWER_OK &&
        envelope->critical_count > 0 &&
        mixture_critical_near(place.at_t, place.fluid, out->z, &envelope->critical[0], place.ws, &critical) ==
            ANSWER_OK &&
        critical.pressure > 0.0 && is_inside(room, &place, out, &critical)) {
        out->temperature = critical.temperature * (1.0 + draw_distance(state, 5.0));
        out->pressure = critical.pressure * (1.0 + draw_distance(state, 5.0));
    }
}

/* ln K of the first of two gases at the dew point of a composition; false where there is none. */
static bool dew_ratio(struct state_room *room, const struct state_place *place, const double z[], double *ln_K)
{
    if (boundary_dew_pressure(place->at_t, z, place->ws, room->point) != ANSWER_OK) {
        return false;
    }
    *ln_K = log(room->point->incipient[0] / z[0]);
    return true;
}

/* The composition whose dew has the same, by halving; two gases without one stay as they are. */
static void move_to_azeotrope(uint64_t *state, struct state_room *room, struct mixture_state *out)
{
    out->count = 2;
    out->z[0] = fmax(out->z[0], 0.1); /* both may have been drawn absent */
    const struct state_place place = mixture_state_place(out, room);
    double low = 0.02, high = 0.98, at_low, at_high;
    const double lean[] = {low, 1.0 - low}, rich[] = {high, 1.0 - high};
    if (!dew_ratio(room, &place, lean, &at_low) || !dew_ratio(room, &place, rich, &at_high) ||
        (at_low < 0.0) == (at_high < 0.0)) {
        return;
    }
    for (int k = 0; k < 60; k++) {
        const double middle = 0.5 * (low + high), z[] = {middle, 1.0 - middle};
        double here;
        if (!dew_ratio(room, &place, z, &here)) {
            return;
        }
        *((here < 0.0) == (at_low < 0.0) ? &low : &high) = middle;
    }
    out->z[0] = low;
    out->z[1] = 1.0 - low;
    out->pressure = room->point->pressure * (1.0 + draw_distance(state, 12.0));
}

void mixture_state_draw(uint64_t seed, enum state_kind kind, struct state_room *room, struct mixture_state *out)
{
    uint64_t state = seed * 1000003U + (uint64_t)kind;
    draw_gases(&state, &room->pool, out);
    draw_parts(&state, kind, out);
    const double coldest = fmax(200.0, least_temperature(&room->pool, out));
    out->temperature = coldest + (400.0 - coldest) * uniform(&state);
    out->pressure = 1e3 * pow(6e4, uniform(&state));
    if (kind == STATE_NEAR_BOUNDARY) {
        move_to_boundary(&state, room, out);
    } else if (kind == STATE_NEAR_CRITICAL) {
        move_to_critical(&state, room, out);
    } else if (kind == STATE_AZEOTROPE && out->count > 1) {
        move_to_azeotrope(&state, room, out);
    }
}
