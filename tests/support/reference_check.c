#include "support/reference_check.h"

#include "base/file.h"
#include "equilibrium/saturation.h"
#include "fluid/caloric.h"
#include "support/check.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* The file has 13 digits. What regrouping and rounding may add is a few units of 1e-16 of the largest sums, which in
 * a cold liquid are a hundred times rho R T. */
#define TOLERANCE 1e-10

struct subject {
    const struct pure_spec *pure;
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
};

const char *reference_rows_read(struct arena *arena)
{
    char *text = NULL;
    size_t length = 0;
    if (!file_read(arena, "tests/data/reference-states.csv", &text, &length)) {
        fail_msg("%s", "tests/data/reference-states.csv cannot be read; tests run from the top of the tree");
    }
    return text;
}

static void set_temperature(const struct subject *subject, double temperature)
{
    assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, temperature), ANSWER_OK);
}

/* T, rho, p, ln phi, dp/drho, dp/dT, residual h/(RT), residual s/R, cp/R, w^2 M/(RT). */
enum { T, RHO, P, LN_PHI, DP_DRHO, DP_DT, H, S, CP, SOUND, STATE_VALUES };

static void check_caloric(const struct subject *subject, const double row[STATE_VALUES], const char *what)
{
    const double R = subject->fluid->gas_constant;
    struct caloric caloric;
    if (subject->pure->reference->ideal_count == 0) {
        return;
    }
    assert_int_equal(caloric_at_volume(subject->at_t, 1.0 / row[RHO], (const double[]){1.0}, &caloric), ANSWER_OK);
    const double w2 = caloric.speed_of_sound * caloric.speed_of_sound;
    assert_close(caloric.heat_capacity_p / R, row[CP], 100.0 * TOLERANCE, what);
    assert_close(w2 * subject->pure->molar_mass / (R * row[T]), row[SOUND], TOLERANCE, what);
}

static void check_root(const struct subject *subject, const double row[STATE_VALUES], const char *what)
{
    const double n[] = {1.0};
    struct pure_arrays arrays;
    struct phase phase;
    if (row[P] > subject->pure->reference->largest_pressure) {
        return; /* the dense states of short-ranged equations lie beyond the pressures that are answered */
    }
    const bool dense = row[RHO] > subject->pure->reference->critical_density;
    phase_of_pure(&phase, &arrays);
    if (phase_tp(subject->at_t, row[P], n, dense ? BRANCH_LIQUID : BRANCH_VAPOUR, 0, &phase) != ANSWER_OK) {
        fail_msg("no root: %s", what);
    }
    assert_close(1.0 / phase.volume, row[RHO], 10.0 * TOLERANCE, what);
}

static void check_state(const struct subject *subject, const double row[STATE_VALUES], const char *what)
{
    const double n[] = {1.0}, volume = 1.0 / row[RHO];
    const double ideal = row[RHO] * subject->fluid->gas_constant * row[T];
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    set_temperature(subject, row[T]);
    assert_int_equal(phase_tv(subject->at_t, volume, n, PHASE_LN_PHI | PHASE_RESIDUAL, &phase), ANSWER_OK);
    assert_near(phase.pressure, row[P], TOLERANCE * fmax(row[P], ideal), what);
    assert_near(*phase.ln_phi, row[LN_PHI], TOLERANCE * fmax(1.0, ideal / row[P]), what);
    assert_near(-phase.dp_dv * volume * volume, row[DP_DRHO], TOLERANCE * fmax(row[DP_DRHO], ideal / row[RHO]), what);
    assert_close(phase.dp_dt, row[DP_DT], TOLERANCE, what);
    assert_near(phase.residual_enthalpy_rt, row[H], TOLERANCE * fmax(1.0, fabs(row[H])), what);
    assert_near(phase.residual_entropy_r, row[S], TOLERANCE * fmax(1.0, ideal / row[P]), what);
    check_caloric(subject, row, what);
    check_root(subject, row, what);
}

/* T, p, rho of vapour, rho of liquid. */
static void check_saturation(const struct subject *subject, const double row[4], const char *what)
{
    struct saturation saturation;
    set_temperature(subject, row[0]);
    assert_int_equal(saturation_at_t(subject->at_t, &saturation), ANSWER_OK);
    assert_close(saturation.pressure, row[1], TOLERANCE, what);
    assert_close(1.0 / saturation.vapour_volume, row[2], TOLERANCE, what);
    assert_close(1.0 / saturation.liquid_volume, row[3], TOLERANCE, what);
}

/* The numbers of a row behind its two words. */
static void read_numbers(const char *text, double *numbers, int count)
{
    for (int i = 0; i < count; i++) {
        char after = '\0';
        assert_true(sscanf(text, "%lf%c", &numbers[i], &after) >= 1);
        text = strpbrk(text, ",\n");
        assert_non_null(text);
        text++;
    }
}

static bool check_row(const struct subject *subject, const char *row)
{
    char kind[16], gas[64], what[160];
    double numbers[STATE_VALUES];
    int numbers_at = 0;
    if (row[0] == '#' || sscanf(row, "%15[^,],%63[^,],%n", kind, gas, &numbers_at) != 2 ||
        strcmp(gas, subject->pure->name) != 0) {
        return false;
    }
    snprintf(what, sizeof what, "%.60s, independent evaluation, tests/data/reference-states.csv", row);
    if (strcmp(kind, "state") == 0) {
        read_numbers(row + numbers_at, numbers, STATE_VALUES);
        check_state(subject, numbers, what);
    } else {
        assert_string_equal(kind, "saturation");
        read_numbers(row + numbers_at, numbers, 4);
        check_saturation(subject, numbers, what);
    }
    return true;
}

size_t reference_rows_check(const char *rows, const struct pure_spec *pure, struct arena *arena)
{
    const struct pure_spec **list = arena_alloc(arena, 1, sizeof *list);
    struct fluid_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    struct fluid_lack_report lack;
    list[0] = pure;
    *spec = (struct fluid_spec){.count = 1, .pure = list};
    struct subject subject = {.pure = pure, .fluid = fluid_create("reference", spec, arena, &lack)};
    assert_non_null(subject.fluid);
    subject.at_t = fluid_at_t_create(subject.fluid, arena);
    size_t count = 0;
    for (const char *row = rows; *row != '\0';) {
        count += check_row(&subject, row) ? 1 : 0;
        const char *end = strchr(row, '\n');
        row = end == NULL ? row + strlen(row) : end + 1;
    }
    return count;
}
