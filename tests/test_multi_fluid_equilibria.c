/* Equilibria by the multi-fluid methods with the library's data against independent solutions of the same equations. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "equilibrium/mixture_vessel.h"
#include "support/check.h"
#include "support/measured_mixture.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { MOST = 10, ROWS = 45 };

/* Relative; both solutions converge far below this. */
#define AGREEMENT 1e-9

struct row {
    const char *method, *what;
    double T, volume, pressure;
    size_t count;
    const char *names[MOST];
    double z[MOST];
};

/* Takes the line apart in place. */
static void read_row(char *line, struct row *out)
{
    char *rest = line, *field;
    *out = (struct row){.method = strtok_r(rest, ",", &rest)};
    out->what = strtok_r(NULL, ",", &rest);
    out->T = strtod(strtok_r(NULL, ",", &rest), NULL);
    out->volume = strtod(strtok_r(NULL, ",", &rest), NULL);
    out->pressure = strtod(strtok_r(NULL, ",", &rest), NULL);
    while ((field = strtok_r(NULL, ",", &rest)) != NULL) {
        assert_true(out->count < MOST);
        out->names[out->count] = field;
        out->z[out->count++] = strtod(strtok_r(NULL, ",", &rest), NULL);
    }
}

static double vessel_pressure(const struct measured_mixture *m, const struct row *row, struct arena *arena)
{
    struct mixture_vessel *vessel = mixture_vessel_create(row->count, arena);
    assert_int_equal(fluid_set_t(m->at_t, m->fluid, row->T), ANSWER_OK);
    assert_int_equal(mixture_vessel_at_tv(m->at_t, row->volume, row->z, NULL, m->ws, vessel), ANSWER_OK);
    assert_int_equal(vessel->split->phase_count, 2);
    return vessel->split->pressure;
}

static double pressure_of(const struct measured_mixture *m, const struct row *row, struct arena *arena)
{
    if (strcmp(row->what, "vessel") == 0) {
        return vessel_pressure(m, row, arena);
    }
    double pressure = 0.0;
    const enum boundary_kind kind = strcmp(row->what, "dew") == 0 ? BOUNDARY_DEW : BOUNDARY_BUBBLE;
    assert_true(measured_boundary_pressure(m, kind, row->T, row->z, row->pressure, &pressure));
    return pressure;
}

static void check_row(char *line)
{
    struct arena *arena = arena_create(NULL);
    struct row row;
    char what[120];
    read_row(line, &row);
    const struct measured_mixture m = measured_mixture_create(row.method, row.names, row.count, arena);
    snprintf(what, sizeof what, "%s of %s and %zu more at %g K by %s, independent solution", row.what, row.names[0],
             row.count - 1, row.T, row.method);
    assert_close(pressure_of(&m, &row, arena), row.pressure, AGREEMENT, what);
    arena_free(arena);
}

static void boundaries_and_vessels_agree_with_independent_solutions(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char *text, *rest;
    size_t length, seen = 0;
    assert_true(file_read(arena, "tests/data/multi-fluid-equilibria.csv", &text, &length));
    for (char *line = strtok_r(text, "\n", &rest); line != NULL; line = strtok_r(NULL, "\n", &rest)) {
        if (*line != '#') {
            check_row(line);
            seen++;
        }
    }
    assert_int_equal(seen, ROWS);
    arena_free(arena);
}

/* Equations have boundaries of their own making at thousands of bar: none is looked for there, as none is told. */
static void boundaries_are_looked_for_as_far_as_the_equations_are_meant_to_go(void **state)
{
    (void)state;
    static const char *const names[] = {"methane",   "nitrogen", "carbon-dioxide", "ethane",   "propane",
                                        "isobutane", "n-butane", "n-pentane",      "n-hexane", "oxygen"};
    static const double z[] = {0.80, 0.03, 0.02, 0.07, 0.04, 0.01, 0.015, 0.008, 0.004, 0.003};
    struct arena *arena = arena_create(NULL);
    const struct measured_mixture m = measured_mixture_create("multi-fluid", names, MOST, arena);
    assert_int_equal(envelope_trace(m.at_t, m.fluid, z, m.ws, m.envelope), ANSWER_OK);
    for (double T = 193.15; T < 240.0; T += 10.0) {
        assert_int_equal(boundary_at_t(m.at_t, m.fluid, T, z, m.envelope, m.ws, m.boundaries), ANSWER_OK);
        assert_int_equal(boundary_complete_at_t(m.at_t, m.fluid, T, z, m.ws, m.boundaries), ANSWER_OK);
        assert_int_equal(m.boundaries->count, 2);
        assert_true(m.boundaries->is_complete);
        assert_int_equal(m.boundaries->point[0]->kind, BOUNDARY_DEW);
        assert_int_equal(m.boundaries->point[1]->kind, BOUNDARY_BUBBLE);
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(boundaries_and_vessels_agree_with_independent_solutions),
        cmocka_unit_test(boundaries_are_looked_for_as_far_as_the_equations_are_meant_to_go),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
