#include "support/measured_mixture.h"
#include "base/file.h"
#include "base/text.h"
#include "case/case.h"
#include "deck/deck.h"
#include "support/check.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* ---- tables --------------------------------------------------------------------------------------------------------
 */

/* Splits one line at its commas, in place. */
static void split_row(char *line, struct measured_row *row)
{
    size_t column = 0;
    for (char *at = line; at != NULL && column < MEASURED_FIELDS; column++) {
        row->field[column] = at;
        at = strchr(at, ',');
        if (at != NULL) {
            *at++ = '\0';
        }
    }
    for (; column < MEASURED_FIELDS; column++) {
        row->field[column] = "";
    }
}

struct measured_table measured_table_read(const char *name, struct arena *arena)
{
    char *text;
    size_t length;
    assert_true(file_read(arena, arena_format(arena, "tests/data/measurements/%s", name), &text, &length));
    struct {
        struct measured_row *items;
        size_t count, capacity;
    } rows = {NULL, 0, 0};
    bool is_past_heading = false;
    for (char *line = text, *end; *line != '\0'; line = end + 1) {
        end = strchr(line, '\n');
        assert_non_null(end);
        *end = '\0';
        if (*line != '#' && is_past_heading) {
            split_row(line, ARENA_APPEND(arena, &rows));
        } else if (*line != '#') {
            is_past_heading = true;
        }
    }
    return (struct measured_table){rows.count, rows.items};
}

double measured_number(const struct measured_row *row, size_t column)
{
    const char *field = row->field[column];
    return *field != '\0' ? strtod(field, NULL) : (double)NAN;
}

/* ---- mixtures ------------------------------------------------------------------------------------------------------
 */

/* A root deck from memory; everything else from the library's folder. */
static bool read_root_or_library(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const char *root = context;
    if (strcmp(path, "root.deck") != 0) {
        return deck_read_file(NULL, arena, path, text, length);
    }
    *length = strlen(root);
    *text = arena_copy_text(arena, root, *length);
    return true;
}

/* Naming the method makes the library bring in its parameters. */
const struct case_fluid *measured_case_fluid(const char *method, const char *const names[], size_t count,
                                             struct arena *arena)
{
    struct text root = {.arena = arena};
    struct diagnostics diagnostics = {.arena = arena};
    text_format(&root, "use \"gases\"\nmethods { lead %s }\nmixture measured by mole {\n", method);
    for (size_t i = 0; i + 1 < count; i++) {
        text_format(&root, "  %s 1 %%\n", names[i]);
    }
    text_format(&root, "  %s rest\n}\n", names[count - 1]);
    const struct deck_reader reader = {read_root_or_library, root.bytes, "decks/library"};
    const struct deck *deck = deck_load("root.deck", &reader, arena, &diagnostics);
    assert_non_null(deck);
    const struct case_fluid *fluid = case_find_mixture(deck, "measured", arena, &diagnostics);
    assert_non_null(fluid);
    assert_int_equal(fluid->count, count);
    return fluid;
}

struct measured_mixture measured_mixture_create(const char *method, const char *const names[], size_t count,
                                                struct arena *arena)
{
    struct measured_mixture mixture = {.spec = &measured_case_fluid(method, names, count, arena)->spec};
    struct fluid_lack_report lack;
    mixture.fluid = fluid_create(method, mixture.spec, arena, &lack);
    assert_non_null(mixture.fluid);
    mixture.at_t = fluid_at_t_create(mixture.fluid, arena);
    mixture.ws = equilibrium_workspace_create(count, arena);
    mixture.split = split_create(count, arena);
    mixture.envelope = envelope_create(count, arena);
    mixture.boundaries = boundary_list_create(count, arena);
    return mixture;
}

enum pair_origin measured_pair_origin(const struct measured_mixture *mixture)
{
    struct pair_parameter pair;
    assert_int_equal(fluid_set_t(mixture->at_t, mixture->fluid, 300.0), ANSWER_OK);
    assert_int_equal(fluid_pair(mixture->at_t, 0, 1, &pair), ANSWER_OK);
    return pair.origin;
}

size_t measured_phases(const struct measured_mixture *mixture, double T, double p, const double z[])
{
    assert_int_equal(fluid_set_t(mixture->at_t, mixture->fluid, T), ANSWER_OK);
    assert_int_equal(split_at_tp(mixture->at_t, p, z, mixture->ws, mixture->split), ANSWER_OK);
    return mixture->split->phase_count;
}

/* Whether a feed with that much of the first component forms two phases. */
static bool forms_two(const struct measured_mixture *mixture, double T, double p, double part)
{
    const double z[2] = {part, 1.0 - part};
    return part > 0.0 && part < 1.0 && measured_phases(mixture, T, p, z) == 2;
}

bool measured_tie_line(const struct measured_mixture *mixture, double T, double p, double near, double *x1, double *y1)
{
    /* Outwards on both sides: finely first, as two-phase regions are narrow where they end. */
    double distance = 0.0;
    while (distance < 1.0) {
        if (forms_two(mixture, T, p, near + distance) || forms_two(mixture, T, p, near - distance)) {
            *y1 = mixture->split->phase[0].x[0];
            *x1 = mixture->split->phase[1].x[0];
            return true;
        }
        distance += distance < 0.02 ? 0.001 : 0.01;
    }
    return false;
}

bool measured_boundary_pressure(const struct measured_mixture *mixture, enum boundary_kind kind, double T,
                                const double z[], double near, double *pressure)
{
    const struct boundary_list *list = mixture->boundaries;
    assert_int_equal(envelope_trace(mixture->at_t, mixture->fluid, z, mixture->ws, mixture->envelope), ANSWER_OK);
    if (boundary_at_t(mixture->at_t, mixture->fluid, T, z, mixture->envelope, mixture->ws, mixture->boundaries) !=
        ANSWER_OK) {
        return false;
    }
    bool is_found = false;
    for (size_t i = 0; i < list->count; i++) {
        const struct boundary_point *point = list->point[i];
        if (point->kind == kind && point->is_stable &&
            (!is_found || fabs(log(point->pressure / near)) < fabs(log(*pressure / near)))) {
            *pressure = point->pressure;
            is_found = true;
        }
    }
    return is_found;
}

struct mixture_critical measured_critical(const struct measured_mixture *mixture, const double z[],
                                          struct critical_point near)
{
    struct mixture_critical found;
    measured_phases(mixture, near.temperature, near.pressure, z);
    near.molar_volume = 0.0;
    for (size_t i = 0; i < mixture->split->phase_count; i++) {
        near.molar_volume += mixture->split->phase[i].fraction * mixture->split->phase[i].molar_volume;
    }
    assert_int_equal(mixture_critical_near(mixture->at_t, mixture->fluid, z, &near, mixture->ws, &found), ANSWER_OK);
    return found;
}

/* ---- deviations ----------------------------------------------------------------------------------------------------
 */

void deviations_of(struct deviations *deviations, bool is_measured, bool is_found, double deviation)
{
    if (!is_measured) {
        return;
    }
    if (!is_found) {
        deviations->missing++;
        return;
    }
    /* Written so that a NaN comes through. */
    if (!(fabs(deviation) <= deviations->worst)) {
        deviations->worst = fabs(deviation);
    }
    deviations->sum += fabs(deviation);
    deviations->sum_of_signed += deviation;
    deviations->points++;
}

double deviations_mean(const struct deviations *deviations)
{
    return deviations->sum / (double)deviations->points;
}
