/* Vessels: water capacity, ratings and fittings. */
#include "case/case_internal.h"

/* The clause fixes the least test pressure of any receptacle it covers. */
static const struct quantity_form TEST_PRESSURE = {.measure = MEASURE_PRESSURE,
                                                   .reading = READ_RATING,
                                                   .least = 1e6,
                                                   .most = 1e9,
                                                   .because =
                                                       "least test pressure 10 bar, UN Model Regulations P200 (4)"};

struct rating_list {
    struct case_rating *items;
    size_t count, capacity;
};

struct vessel_target {
    struct case_vessel vessel; /* first, so that the rows' offsets serve both */
    struct rating_list fittings;
};

static void read_fitting(struct elaboration *e, const struct statement *statement, void *target)
{
    struct vessel_target *into = target;
    struct reading reading = read_items(e, statement);
    struct case_rating fitting = {.name = take_text(&reading, "the fitting's name in quotes")};
    if (fitting.name == NULL || !forbid_block(e, statement)) {
        return;
    }
    const char *name = arena_format(e->arena, "fitting \"%s\"", shortened(e, fitting.name));
    if (take_quantity(&reading, &FORM_RATING, name, &fitting.pressure) && finish_items(&reading)) {
        struct rating_list *list = &into->fittings;
        *ARENA_APPEND(e->arena, list) = fitting;
    }
}

#define QUANTITY(word, form, member) READ_QUANTITY(WORD_VESSEL_##word, form, struct case_vessel, member)

static const struct block_row ROWS[] = {
    QUANTITY(WATER_CAPACITY, NULL, water_capacity),
    QUANTITY(TEST_PRESSURE, &TEST_PRESSURE, test_pressure),
    QUANTITY(WORKING_PRESSURE, NULL, working_pressure),
    QUANTITY(SERVICE_PRESSURE, NULL, service_pressure),
    QUANTITY(TARE, NULL, tare),
    QUANTITY(WALL_HEAT_CAPACITY, NULL, wall_heat_capacity),
    QUANTITY(WALL_CONDUCTANCE, NULL, wall_conductance),
    READ_EACH(WORD_VESSEL_FITTING, read_fitting),
};
static const struct block_form VESSEL = BLOCK_FORM(BLOCK_VESSEL, ROWS);

/* A vessel is worked below the pressure it was tested at. */
static void check_below_test(struct elaboration *e, const char *name, const struct quantity *rating,
                             const struct quantity *test)
{
    if (!rating->given || !test->given || rating->value <= test->value) {
        return;
    }
    struct diagnostic *said =
        diagnose(e->out, CODE_E209, rating->origin.at, "the %s '%s' is above the test-pressure '%s'", name,
                 rating->origin.written, test->origin.written);
    said->note = "the test pressure";
    said->note_at = test->origin.at;
}

const struct case_vessel *build_vessel(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const struct statement *block = named->items[0];
    const size_t before = trouble_so_far(e);
    struct vessel_target *target = arena_alloc(e->arena, 1, sizeof *target);
    target->vessel.name = named->name;
    target->vessel.at = named->at;
    if (require_block(e, block)) {
        read_block(e, &VESSEL, arena_format(e->arena, "vessel %s", named->name), block, target);
    }
    if (trouble_so_far(e) == before && !target->vessel.water_capacity.given) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E214, named->at, "vessel '%s' has no water-capacity", shortened(e, named->name));
        diagnostic_hint(e->out, said, "as in: water-capacity 50.2 L");
    }
    const struct quantity *heat = &target->vessel.wall_heat_capacity, *passes = &target->vessel.wall_conductance;
    if (trouble_so_far(e) == before && heat->given != passes->given) {
        struct diagnostic *said =
            diagnose(e->out, CODE_E214, named->at, "the wall of vessel '%s' has no %s", shortened(e, named->name),
                     heat->given ? "wall-conductance" : "wall-heat-capacity");
        diagnostic_hint(e->out, said, "as in: wall-heat-capacity 25 kJ/K; wall-conductance 30 W/K");
    }
    const struct quantity *test = &target->vessel.test_pressure;
    check_below_test(e, "working-pressure", &target->vessel.working_pressure, test);
    check_below_test(e, "service-pressure", &target->vessel.service_pressure, test);
    target->vessel.fitting_count = target->fittings.count;
    target->vessel.fittings = target->fittings.items;
    mark_file_used(e, block->at);
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    named->built = named->state == BUILT ? &target->vessel : NULL;
    return named->built;
}

const struct case_vessel *vessel_of_name(struct elaboration *e, const struct expression *name)
{
    struct named *named = named_of_item(e, NAMES_VESSEL, name, "vessel");
    return named == NULL ? NULL : build_vessel(e, named);
}
