/* Slow draw-down of a closed vessel: against textbook answers, balances, and the sheet from deck text. */
#include "equilibrium/draw_down.h"
#include "filling/solve.h"

#include "support/check.h"
#include "support/elaborated.h"
#include "support/result_reading.h"
#include "support/sample_mixture.h"

#include <gsl/gsl_spline.h>
#include <math.h>

#define R 8.31446261815324 /* J/(mol K), CODATA 2018 */

/* ---- the integration --------------------------------------------------------------------------------------------- */

static const double LPG_MOLAR_MASSES[] = {0.04409562, 0.0581222};

/* 221.3 mol of 60 % propane in n-butane, 26.2 L: some 11 kg, near three quarters liquid. */
static const double LPG[] = {132.78, 88.52};

static struct draw_task lpg_task(enum drawn_phase drawn, double least_pressure)
{
    return (struct draw_task){.drawn = drawn,
                              .volume = 0.0262,
                              .least_pressure = least_pressure,
                              .tolerance = 1e-11,
                              .molar_masses = LPG_MOLAR_MASSES,
                              .start = LPG};
}

static struct draw_down *draw_lpg(const struct draw_task *task, struct arena *arena)
{
    const enum sample_substance substance[] = {PROPANE, N_BUTANE};
    struct draw_down *draw = draw_down_create(sample_mixture_create(2, substance, 288.15, arena).at_t, 2, task, arena);
    assert_non_null(draw);
    assert_int_equal(draw_down_begin(draw), ANSWER_OK);
    return draw;
}

static double mass_of(const double n[])
{
    return n[0] * LPG_MOLAR_MASSES[0] + n[1] * LPG_MOLAR_MASSES[1];
}

/* dn_i/dm = -y_i / M gives d(n x)/dn = y, so that n dx = (y - x) dn and
 *
 *   ln(n_1 / n_0) = integral from x_0 to x_1 of dx / (y - x),
 *
 * Rayleigh's equation, with n and x of all that is in the vessel. The integral is taken over the states by a cubic
 * spline, which knows nothing of the steps. */
static void slow_draw_of_two_components_follows_the_differential_equation(void **state)
{
    (void)state;
    enum { POINTS = 121 };
    struct arena *arena = arena_create(NULL);
    const struct draw_task task = lpg_task(DRAWN_VAPOUR, 1e4);
    struct draw_down *draw = draw_lpg(&task, arena);
    const double mass = mass_of(LPG);
    double x[POINTS], slope[POINTS], first = 0.0, last = 0.0;
    for (size_t i = 0; i < POINTS; i++) {
        enum draw_event event;
        assert_int_equal(draw_down_to(draw, 0.7 * mass * (double)i / (POINTS - 1), &event), ANSWER_OK);
        assert_int_equal(event, DRAW_NO_EVENT);
        const struct draw_state *at = draw_down_state(draw);
        last = at->amounts[0] + at->amounts[1];
        first = i == 0 ? last : first;
        x[POINTS - 1 - i] = at->amounts[0] / last; /* falls: the lighter leaves first */
        slope[POINTS - 1 - i] = 1.0 / (at->drawn[0] - at->amounts[0] / last);
    }
    gsl_spline *spline = gsl_spline_alloc(gsl_interp_cspline, POINTS);
    gsl_spline_init(spline, x, slope, POINTS);
    const double integral = gsl_spline_eval_integ(spline, x[0], x[POINTS - 1], NULL);
    assert_close(log(last / first), -integral, 1e-6, "Rayleigh's equation");
    gsl_spline_free(spline);
    draw_down_free(draw);
    arena_free(arena);
}

static void mass_closes_and_the_phases_fill_the_vessel(void **state)
{
    (void)state;
    for (int drawn = DRAWN_VAPOUR; drawn <= DRAWN_LIQUID; drawn++) {
        struct arena *arena = arena_create(NULL);
        const struct draw_task task = lpg_task((enum drawn_phase)drawn, 5e4);
        struct draw_down *draw = draw_lpg(&task, arena);
        const double mass = mass_of(LPG);
        enum draw_event event = DRAW_NO_EVENT;
        for (int i = 1; event != DRAW_LEAST_PRESSURE && event != DRAW_LIQUID_IS_GONE; i++) {
            assert_in_range(i, 1, 60);
            assert_int_equal(draw_down_to(draw, fmin(mass * i / 40.0, mass), &event), ANSWER_OK);
            const struct draw_state *at = draw_down_state(draw);
            assert_close(at->delivered + mass_of(at->amounts), mass, 1e-12, "delivered and left");
            assert_close(at->filled, task.volume, 1e-9, "volumes of the phases");
            assert_true(at->amounts[0] >= 0.0 && at->amounts[1] >= 0.0);
        }
        assert_int_equal(event, drawn == DRAWN_LIQUID ? DRAW_LIQUID_IS_GONE : DRAW_LEAST_PRESSURE);
        draw_down_free(draw);
        arena_free(arena);
    }
}

/* Vapour down to 0.5 bar: the liquid goes before. Both events and the composition at the end. */
static void halving_the_tolerance_changes_no_digit_that_is_printed(void **state)
{
    (void)state;
    double delivered[2][2], left[2];
    for (int i = 0; i < 2; i++) {
        struct arena *arena = arena_create(NULL);
        struct draw_task task = lpg_task(DRAWN_VAPOUR, 5e4);
        task.tolerance /= i + 1;
        struct draw_down *draw = draw_lpg(&task, arena);
        enum draw_event event;
        assert_int_equal(draw_down_to(draw, mass_of(LPG), &event), ANSWER_OK);
        assert_int_equal(event, DRAW_PHASE_GOES);
        assert_int_equal(draw_down_state(draw)->phase_count, 1);
        delivered[i][0] = draw_down_state(draw)->delivered;
        assert_int_equal(draw_down_to(draw, mass_of(LPG), &event), ANSWER_OK);
        assert_int_equal(event, DRAW_LEAST_PRESSURE);
        assert_close(draw_down_state(draw)->pressure, 5e4, 1e-9, "the pressure asked for");
        delivered[i][1] = draw_down_state(draw)->delivered;
        left[i] = draw_down_state(draw)->amounts[0];
        draw_down_free(draw);
        arena_free(arena);
    }
    assert_close(delivered[1][0], delivered[0][0], 1e-8, "where the liquid goes");
    assert_close(delivered[1][1], delivered[0][1], 1e-8, "the end");
    assert_close(left[1], left[0], 1e-7, "propane left");
}

/* The end is no place to go on from. */
static void the_end_comes_again(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct draw_task task = lpg_task(DRAWN_VAPOUR, 2e5);
    struct draw_down *draw = draw_lpg(&task, arena);
    enum draw_event event;
    for (int i = 0; i < 3; i++) {
        assert_int_equal(draw_down_to(draw, mass_of(LPG), &event), ANSWER_OK);
        assert_int_equal(event, DRAW_LEAST_PRESSURE);
        assert_close(draw_down_state(draw)->pressure, 2e5, 1e-9, "the pressure asked for");
    }
    draw_down_free(draw);
    arena_free(arena);
}

/* Held at its saturation pressure, a pure gas keeps its pressure until V / v_vapour is left, all of it vapour; liquid
 * drawn ends with as much. */
static void a_pure_gas_leaves_its_saturated_vapour_behind(void **state)
{
    (void)state;
    for (int drawn = DRAWN_VAPOUR; drawn <= DRAWN_LIQUID; drawn++) {
        struct arena *arena = arena_create(NULL);
        struct fluid_at_t *at_t =
            sample_at_t(sample_pure("peng-robinson", &SAMPLE_SUBSTANCE[PROPANE], arena), 288.15, arena);
        struct saturation saturation;
        assert_int_equal(saturation_at_t(at_t, &saturation), ANSWER_OK);
        const double M = 0.04409562, n = 200.0;
        const struct draw_task task = {.drawn = (enum drawn_phase)drawn,
                                       .volume = 0.0262,
                                       .least_pressure = 1e5,
                                       .tolerance = 1e-11,
                                       .molar_masses = &M,
                                       .start = &n};
        struct draw_down *draw = draw_down_create(at_t, 1, &task, arena);
        assert_int_equal(draw_down_begin(draw), ANSWER_OK);
        enum draw_event event;
        assert_int_equal(draw_down_to(draw, n * M, &event), ANSWER_OK);
        assert_int_equal(event, drawn == DRAWN_LIQUID ? DRAW_LIQUID_IS_GONE : DRAW_PHASE_GOES);
        const struct draw_state *at = draw_down_state(draw);
        assert_close(at->amounts[0], task.volume / saturation.vapour_volume, 1e-9, "V / v_vapour");
        assert_close(at->pressure, saturation.pressure, 1e-9, "saturation pressure");
        assert_close(at->delivered, (n - task.volume / saturation.vapour_volume) * M, 1e-10, "the rest");
        draw_down_free(draw);
        arena_free(arena);
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static const char DECK[] =
    "component nitrogen { molar-mass 28.01348 g/mol; critical-temperature 126.192 K; critical-pressure 3.3958 MPa\n"
    "  acentric 0.0372; triple-temperature 63.151 K }\n"
    "vessel ten { water-capacity 10 L; test-pressure 300 barg }\n"
    "charge lot { fluid nitrogen; vessel ten; mass 1 kg }\n";

static struct elaborated elaborate_behind(const char *sheet)
{
    struct arena *arena = arena_create(NULL);
    const char *text = arena_format(arena, "%s%s", DECK, sheet);
    return elaborate_in(arena, arena_copy_text(arena, text, strlen(text)));
}

static double fact_of(const struct result *result, const char *name)
{
    const struct fact *fact = result_fact(result->first_sheet, name, NULL);
    if (fact == NULL) {
        fail_msg("no fact %s", name);
    }
    return fact->value;
}

/* n = p V / (R T): from 1 kg to 2 bar absolute there leave m - p V M / (R T), in a straight line of pressure; the
 * volume is n R T / p at 288.15 K and 1 bar. */
static void an_isothermal_ideal_gas_gives_the_textbook_answer(void **state)
{
    (void)state;
    struct elaborated it = elaborate_behind("sheet draw-down { charge lot; draw vapour; temperature 300 K\n"
                                            "  methods ideal-gas; least-pressure 2 bara }\n");
    if (it.tree == NULL) {
        fail_msg("%s", elaborated_messages(&it));
    }
    const struct result *result = filling_solve(it.tree, "0.0.0", it.arena);
    const double M = 0.02801348, left = 2e5 * 0.01 * M / (R * 300.0);
    assert_close(fact_of(result, "start-gauge-pressure"), R * 300.0 / (M * 0.01), 1e-12, "n R T / V");
    assert_close(fact_of(result, "residue-mass"), left, 1e-9, "p V M / (R T)");
    assert_close(fact_of(result, "usable-mass"), 1.0 - left, 1e-11, "the rest");
    assert_close(fact_of(result, "usable-volume"), (1.0 - left) / M * R * 288.15 / 1e5, 1e-10, "n R T / p");
    const struct table *course = result_table(result->first_sheet, "draw-down", "ideal-gas");
    assert_non_null(course);
    assert_int_equal(course->row_count, 11);
    for (size_t row = 0; row < course->row_count; row++) {
        const double m = result_cell(course, row, "left")->number;
        assert_close(result_cell(course, row, "pressure")->number, m / M * R * 300.0 / 0.01, 1e-10, "n R T / V");
    }
    elaborated_end(&it);
}

static void what_cannot_be_drawn_is_said(void **state)
{
    (void)state;
    struct elaborated it = elaborate_behind("sheet draw-down { charge lot; draw vapour; temperature 60 K\n"
                                            "  methods peng-robinson }\n"
                                            "sheet draw-down { charge lot; draw vapour; temperature 15 degC\n"
                                            "  methods peng-robinson; least-pressure 200 bara }\n");
    const struct result *result = filling_solve(it.tree, "0.0.0", it.arena);
    assert_int_equal(result_warnings(result, CODE_W391), 1);
    assert_true(result->is_undecided);
    const struct fact *end = result_fact(result->first_sheet->next, "end", "peng-robinson");
    assert_non_null(end);
    assert_string_equal(end->text, "the charge is at or below the least pressure from the start");
    assert_close(result_fact(result->first_sheet->next, "residue-mass", NULL)->value, 1.0, 1e-15, "all of it");
    elaborated_end(&it);
}

static void a_sheet_needs_a_phase_and_a_temperature(void **state)
{
    (void)state;
    static const struct {
        const char *sheet;
        enum code code;
    } decks[] = {
        {"sheet draw-down { charge lot; temperature 300 K; methods ideal-gas }\n", CODE_E214},
        {"sheet draw-down { charge lot; draw vapour; methods ideal-gas }\n", CODE_E214},
        {"sheet draw-down { draw vapour; temperature 300 K; methods ideal-gas }\n", CODE_E214},
        {"sheet draw-down { charge lot; draw vapour; temperature 300 K; methods ideal-gas; stop-when argon <= 5 % }\n",
         CODE_E205},
        {"sheet draw-down { charge lot; draw vapour; temperature 300 K; methods ideal-gas; stop-at noon }\n",
         CODE_E213},
        {"sheet draw-down { charge lot; draw vapour; temperature 300 K; methods ideal-gas; time 3 min }\n", CODE_E214},
        {"sheet draw-down { charge lot; draw foam; temperature 300 K; methods ideal-gas }\n", CODE_E213},
    };
    for (size_t i = 0; i < sizeof decks / sizeof *decks; i++) {
        struct elaborated it = elaborate_behind(decks[i].sheet);
        assert_null(it.tree);
        if (it.diagnostics.items[0].code != decks[i].code) {
            fail_msg("%s", elaborated_messages(&it));
        }
        elaborated_end(&it);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(slow_draw_of_two_components_follows_the_differential_equation),
        cmocka_unit_test(mass_closes_and_the_phases_fill_the_vessel),
        cmocka_unit_test(halving_the_tolerance_changes_no_digit_that_is_printed),
        cmocka_unit_test(the_end_comes_again),
        cmocka_unit_test(a_pure_gas_leaves_its_saturated_vapour_behind),
        cmocka_unit_test(an_isothermal_ideal_gas_gives_the_textbook_answer),
        cmocka_unit_test(what_cannot_be_drawn_is_said),
        cmocka_unit_test(a_sheet_needs_a_phase_and_a_temperature),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
