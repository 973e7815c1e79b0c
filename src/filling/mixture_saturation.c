/* The sheet `saturation` for a mixture: its dew and bubble points at each swept temperature or pressure, with the phase
 * that forms there, and what bounds them: cricondentherm, cricondenbar, critical points. */
#include "equilibrium/boundary.h"
#include "equilibrium/mixture_critical.h"
#include "filling/hand_check.h"
#include "filling/mixture_contents.h"
#include "filling/mixture_sheets.h"
#include "filling/sweep.h"

#include <math.h>
#include <string.h>

enum { DIGITS = 7 };

struct sweeping {
    const struct sheet_run *run;
    struct method_run *method;
    struct table *points, *evidence;
    bool is_lead;
};

static bool by_pressure(const struct sheet_run *run)
{
    return run->sheet->pressures.given && !run->sheet->temperatures.given;
}

static const struct case_sweep *sweep_of(const struct sheet_run *run)
{
    return by_pressure(run) ? &run->sheet->pressures : &run->sheet->temperatures;
}

/* ---- columns ----------------------------------------------------------------------------------------------------- */

enum point_column {
    POINT_TEMPERATURE,
    POINT_PRESSURE,
    POINT_KIND,
    POINT_DENSITY,
    POINT_OTHER_DENSITY,
    POINT_FRACTIONS
};

static struct look look_found_temperature(const struct sheet_run *run)
{
    struct look look = look_temperature(run);
    look.decimals += by_pressure(run) ? 2 : 0;
    return look;
}

static struct table *begin_points(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    const struct look density = look_significant(look_density(run), DIGITS);
    const struct look fraction = {"1", {"%", 0.01, 0.0}, -5};
    struct table *table = sheet_add_table(
        result, run->out, "dew and bubble points, and mole fractions of the phase that forms", method->name);
    table_add_column(result, table, "temperature", look_found_temperature(run));
    table_add_column(result, table, "pressure", look_significant(look_pressure(run), DIGITS));
    table_add_word_column(result, table, "point");
    table_add_column(result, table, "density", density);
    table_add_column(result, table, "forming-density", density);
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        table_add_column(result, table, run->sheet->fluid->components[i]->name, fraction);
    }
    return table;
}

enum evidence_column {
    EVIDENCE_TEMPERATURE,
    EVIDENCE_PRESSURE,
    EVIDENCE_DIFFERENCE,
    EVIDENCE_DISTANCE,
    EVIDENCE_VERDICT
};

static struct table *begin_evidence(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "equality of the fugacities, and stability", method->name);
    table_add_column(result, table, "temperature", look_found_temperature(run));
    table_add_column(result, table, "pressure", look_significant(look_pressure(run), DIGITS));
    table_add_residual_column(result, table, "ln-fugacity-difference");
    table_add_column(result, table, "tangent-plane-distance", look_ratio(-3));
    table_add_word_column(result, table, "whole-is");
    return table;
}

/* ---- points ------------------------------------------------------------------------------------------------------ */

static void add_point(const struct sweeping *at, const struct boundary_point *point)
{
    const struct sheet_run *run = at->run;
    struct cell *row = table_add_row(run->result, at->points);
    const bool is_inside = warn_outside_range(run, at->method, point->temperature, point->pressure);
    cell_set(&row[POINT_TEMPERATURE], point->temperature);
    cell_set(&row[POINT_PRESSURE], point->pressure);
    cell_set_text(&row[POINT_KIND], point->kind == BOUNDARY_DEW ? "dew" : "bubble");
    cell_set(&row[POINT_DENSITY], at->method->molar_mass / point->feed_volume);
    cell_set(&row[POINT_OTHER_DENSITY], mixture_molar_mass(at->method, point->incipient) / point->incipient_volume);
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        cell_set(&row[POINT_FRACTIONS + i], point->incipient[i]);
    }
    row[POINT_TEMPERATURE].is_outside_range = row[POINT_PRESSURE].is_outside_range = !is_inside;
}

static void add_evidence(const struct sweeping *at, const struct boundary_point *point)
{
    struct cell *row = table_add_row(at->run->result, at->evidence);
    cell_set(&row[EVIDENCE_TEMPERATURE], point->temperature);
    cell_set(&row[EVIDENCE_PRESSURE], point->pressure);
    cell_set(&row[EVIDENCE_DIFFERENCE], point->residual);
    cell_set(&row[EVIDENCE_DISTANCE], point->smallest_tpd);
    cell_set_text(&row[EVIDENCE_VERDICT], point->is_stable ? "stable" : "metastable, left out");
}

static void add_words(const struct sweeping *at, double swept, const char *words)
{
    struct cell *row = table_add_row(at->run->result, at->points);
    cell_set(&row[by_pressure(at->run) ? POINT_PRESSURE : POINT_TEMPERATURE], swept);
    cell_set_text(&row[POINT_KIND], words);
}

static void work_by_hand(const struct sweeping *at, const struct boundary_point *point)
{
    const struct sheet_run *run = at->run;
    const struct mixture_state whole = {point->temperature, point->feed_volume, at->method->z};
    const struct mixture_state forming = {point->temperature, point->incipient_volume, point->incipient};
    struct hand_check *check = sheet_add_hand_check(
        run->result, run->out,
        arena_format(run->arena, "%s point at %s and %s, %s", point->kind == BOUNDARY_DEW ? "dew" : "bubble",
                     shown_text(run, look_temperature(run), point->temperature),
                     shown_text(run, look_pressure(run), point->pressure), at->method->name));
    hand_check_mixture_components(run, check, at->method, &whole);
    hand_check_mixture_phase(run, check, at->method, &whole, "the whole", true);
    hand_check_mixture_phase(run, check, at->method, &forming, "the phase that forms", true);
}

static const char *no_answer(const struct sweeping *at, double swept)
{
    const struct sheet_run *run = at->run;
    result_warn(run->result, CODE_W303, location_line(run->sheet->at), run->number,
                "%s, %s: dew and bubble points were not found at %s", run->sheet->fluid->name, at->method->name,
                by_pressure(run) ? shown_text(run, look_pressure(run), swept)
                                 : shown_text(run, look_temperature(run), swept));
    run->result->is_undecided = run->result->is_undecided || at->is_lead;
    return "no answer";
}

static void warn_incomplete(const struct sweeping *at, double swept)
{
    const struct sheet_run *run = at->run;
    result_warn(run->result, CODE_W352, location_line(run->sheet->at), run->number,
                "%s, %s: the fluid is two-phase at %s where no point told bounds it; a dew or bubble point is missing",
                run->sheet->fluid->name, at->method->name,
                shown_text(run, by_pressure(run) ? look_pressure(run) : look_temperature(run), swept));
}

/* ---- the sweep --------------------------------------------------------------------------------------------------- */

/* All points at one temperature or pressure, with the memory for their compositions. */
struct swept_points {
    enum answer answer;
    bool is_complete, opens_below;
    size_t count;
    struct boundary_point point[BOUNDARY_MOST];
    double incipient[]; /* [BOUNDARY_MOST * components] */
};

static void solve_points(const void *context, struct method_run *method, size_t index, void *out)
{
    const struct sheet_run *run = context;
    const size_t components = method->fluid->count;
    struct swept_points *points = out;
    const struct boundary_list *list;
    points->answer = mixture_points(method, by_pressure(run), sweep_of(run)->values[index], &list);
    points->count = points->answer == ANSWER_OK ? list->count : 0;
    points->is_complete = points->answer == ANSWER_OK && list->is_complete;
    points->opens_below = points->answer == ANSWER_OK && list->opens_below;
    for (size_t i = 0; i < points->count; i++) {
        points->point[i] = *list->point[i];
        points->point[i].incipient =
            memcpy(&points->incipient[i * components], list->point[i]->incipient, components * sizeof(double));
    }
}

static void tell_points(void *teller, size_t method, size_t index, const void *answer)
{
    const struct sweeping *at = &((const struct sweeping *)teller)[method];
    const struct swept_points *points = answer;
    const double swept = sweep_of(at->run)->values[index];
    if (points->answer != ANSWER_OK) {
        add_words(at, swept, no_answer(at, swept));
        return;
    }
    size_t told = 0;
    if (points->opens_below) { /* not to be read as a temperature at which nothing condenses */
        add_words(at, swept, arena_format(at->run->arena, "dew below %g Pa", ENVELOPE_LOWEST_PRESSURE));
        told++;
    }
    for (size_t i = 0; i < points->count; i++) {
        add_evidence(at, &points->point[i]);
        if (points->point[i].is_stable) {
            add_point(at, &points->point[i]);
            told++;
        }
    }
    if (!points->is_complete) {
        warn_incomplete(at, swept);
        add_words(at, swept, told == 0 ? "not found" : "another not found");
        at->run->result->is_undecided = at->run->result->is_undecided || at->is_lead;
    } else if (told == 0) {
        add_words(at, swept, "none");
    }
}

/* The first stable point of the sweep; a list lives only until the next question. */
static void work_first_point(const struct sweeping *at)
{
    const struct case_sweep *sweep = sweep_of(at->run);
    for (size_t i = 0; i < sweep->count; i++) {
        const struct boundary_list *list;
        if (mixture_points(at->method, by_pressure(at->run), sweep->values[i], &list) != ANSWER_OK) {
            continue;
        }
        for (size_t k = 0; k < list->count; k++) {
            if (list->point[k]->is_stable) {
                work_by_hand(at, list->point[k]);
                return;
            }
        }
    }
}

/* ---- bounds ------------------------------------------------------------------------------------------------------ */

static void add_state(const struct sheet_run *run, const struct method_run *method, const char *name,
                      double temperature, double pressure)
{
    struct fact *fact = sheet_add_fact(run->result, run->out, arena_format(run->arena, "%s-temperature", name),
                                       temperature, look_temperature(run));
    fact->method = method->name;
    fact = sheet_add_fact(run->result, run->out, arena_format(run->arena, "%s-pressure", name), pressure,
                          look_pressure(run));
    fact->method = method->name;
}

#define COLDER_THAN_ANY_YARD 150.0 /* K */

/* A line lost at a temperature colder than any asked about takes nothing from the answer. */
static bool matters(const struct sheet_run *run, const struct envelope *envelope, const struct envelope_line *line)
{
    if (line->count == 0) {
        return false;
    }
    const size_t last = line->first + line->count - 1;
    const double temperature = exp(envelope->X[last * (envelope->components + 2) + envelope->components]);
    double coldest = COLDER_THAN_ANY_YARD;
    if (!by_pressure(run)) {
        coldest = run->sheet->temperatures.values[0];
        for (size_t i = 1; i < run->sheet->temperatures.count; i++) {
            coldest = fmin(coldest, run->sheet->temperatures.values[i]);
        }
    }
    return temperature > coldest;
}

static void add_open_ends(const struct sheet_run *run, const struct method_run *method, const struct envelope *envelope)
{
    for (size_t i = 0; i < envelope->line_count; i++) {
        if (envelope->line[i].end == ENVELOPE_END_HIGH_PRESSURE) {
            sheet_add_note(run->result, run->out, "the boundary is open: it goes on above %s, where it was left (%s)",
                           shown_text(run, look_pressure(run), ENVELOPE_HIGHEST_PRESSURE), method->name);
        } else if (envelope->line[i].end == ENVELOPE_END_LOST && matters(run, envelope, &envelope->line[i])) {
            result_warn(run->result, CODE_W352, location_line(run->sheet->at), run->number,
                        "%s, %s: a line of dew and bubble points could not be followed to its end",
                        run->sheet->fluid->name, method->name);
        }
    }
}

static void tell_incomplete(const struct sheet_run *run)
{
    for (size_t m = 0; m < run->method_count; m++) {
        struct method_run *method = &run->methods[m];
        if (method->fluid != NULL && mixture_envelope_is_incomplete(method)) {
            sheet_add_note(run->result, run->out,
                           "the line traced from low pressure is not the whole boundary: its highest temperature and "
                           "pressure are left out (%s)",
                           method->name);
        }
    }
}

/* Parts within which two solutions are one critical point, passed by two lines or interpolated from two starts. */
#define SAME_CRITICAL 1e-6

static bool is_same_critical(const struct mixture_critical *a, const struct mixture_critical *b)
{
    return fabs(log(a->temperature / b->temperature)) <= SAME_CRITICAL &&
           fabs(log(a->pressure / b->pressure)) <= SAME_CRITICAL;
}

/* Each of them once. */
static void add_critical_points(const struct sheet_run *run, struct method_run *method, size_t starts)
{
    struct mixture_critical told[ENVELOPE_MOST_CRITICAL];
    size_t count = 0;
    for (size_t i = 0; i < starts; i++) {
        struct mixture_critical *critical = &told[count];
        bool is_new = mixture_critical_point(method, i, critical) == ANSWER_OK;
        for (size_t k = 0; is_new && k < count; k++) {
            is_new = !is_same_critical(critical, &told[k]);
        }
        if (is_new) {
            add_state(run, method, "critical", critical->temperature, critical->pressure);
            count++;
        }
    }
}

static void tell_bounds(const struct sheet_run *run)
{
    sheet_begin_facts(run->result, run->out, "what bounds the two-phase states");
    for (size_t m = 0; m < run->method_count; m++) {
        struct method_run *method = &run->methods[m];
        const struct envelope *envelope = method->fluid == NULL ? NULL : mixture_envelope(method);
        if (envelope == NULL) {
            continue;
        }
        if (envelope->has_cricondentherm) {
            add_state(run, method, "cricondentherm", envelope->cricondentherm->temperature,
                      envelope->cricondentherm->pressure);
        }
        if (envelope->has_cricondenbar) {
            add_state(run, method, "cricondenbar", envelope->cricondenbar->temperature,
                      envelope->cricondenbar->pressure);
        }
        add_critical_points(run, method, envelope->critical_count);
    }
    for (size_t m = 0; m < run->method_count; m++) {
        struct method_run *method = &run->methods[m];
        const struct envelope *envelope = method->fluid == NULL ? NULL : mixture_envelope(method);
        if (envelope != NULL) {
            add_open_ends(run, method, envelope);
        }
    }
}

/* ---- the sheet --------------------------------------------------------------------------------------------------- */

static bool has_liquid(const struct sheet_run *run, const struct method_run *method)
{
    if (method->fluid == NULL) {
        return false; /* said once for all sheets, where methods are made ready */
    }
    if ((method->fluid->ops->capabilities & CAN_LIQUID) == 0) {
        sheet_add_note(run->result, run->out, "%s has no liquid and therefore no dew or bubble points.", method->name);
        return false;
    }
    return true;
}

static struct sweeping begin_sweeping(const struct sheet_run *run, struct method_run *method, bool is_lead)
{
    struct sweeping at = {.run = run, .method = method, .is_lead = is_lead};
    at.points = begin_points(run, method);
    at.points->csv = is_lead ? run->sheet->table_csv : NULL;
    at.evidence = begin_evidence(run, method);
    if (is_lead) {
        work_first_point(&at);
    }
    return at;
}

static void sweep_by(const struct sheet_run *run, struct method_run *const methods[], size_t count)
{
    struct sweeping *each = arena_alloc(run->arena, count, sizeof *each);
    for (size_t m = 0; m < count; m++) {
        each[m] = begin_sweeping(run, methods[m], m == 0);
    }
    const struct sweep sweep = {
        .run = run,
        .point_count = sweep_of(run)->count,
        .method_count = count,
        .methods = methods,
        .needs_edges = true,
        .answer_size = sizeof(struct swept_points) + BOUNDARY_MOST * run->sheet->fluid->count * sizeof(double),
        .context = run,
        .solve = solve_points,
        .tell = tell_points,
        .teller = each,
    };
    sweep_points(&sweep);
}

void answer_mixture_saturation(struct sheet_run *run)
{
    struct method_run **methods = arena_alloc(run->arena, run->method_count, sizeof *methods);
    size_t count = 0;
    for (size_t i = 0; i < run->method_count; i++) {
        if (has_liquid(run, &run->methods[i])) {
            methods[count++] = &run->methods[i];
        } else {
            run->result->is_undecided |= i == 0;
        }
    }
    sweep_by(run, methods, count);
    tell_bounds(run);
    tell_incomplete(run);
    if (run->sheet->show_iteration) {
        sheet_add_note(run->result, run->out, "the iteration p fL / fV is shown for pure gases only");
    }
}
