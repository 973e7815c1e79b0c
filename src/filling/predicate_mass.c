/* The largest mass that a predicate allows.
 *
 * At one temperature masses are tried from small to large, with the dew and the bubble density of the method among
 * them, where predicates on phases change; the first change from met to not met is then closed in on. Over a range of
 * temperatures the same is done at a few temperatures at a time: the limit there is checked over the whole range, and
 * the worst temperature found joins them until none is worse.
 */
#include "filling/predicate_internal.h"
#include "filling/search.h"

#include <math.h>
#include <stdlib.h>

enum {
    DOUBLINGS = 14, /* tried masses go down to 2^-14 of the largest, thin gas at a few bar */
    UPPER_STEPS = 12,
    MOST_TRIALS = DOUBLINGS + UPPER_STEPS + 5,
    MOST_EXCHANGES = 30
};

#define MASS_TOLERANCE 1e-10 /* relative */
/* A trial this near to a phase change, relative, lies clearly on one side of it. */
#define BESIDE_PHASE_CHANGE 1e-9
/* Searches end a little short of the densest state, where pressures have no bound. */
#define SHORT_OF_DENSEST 0.999
/* Of a mixture's densest state: tens of thousands of bar, where splits no longer converge. */
#define MIXTURE_SHORT_OF_DENSEST 0.97
/* kg/m3: denser than any filled gas; for methods without a densest state. */
#define DENSEST             5000.0
#define SETTLED_TEMPERATURE 288.15 /* K */

double predicate_most_mass(const struct sheet_run *run, struct method_run *method)
{
    const double volume = run->sheet->vessel->water_capacity.value;
    if (fluid_set_t(method->at_t, method->fluid, SETTLED_TEMPERATURE) == ANSWER_OK) {
        const double smallest = smallest_molar_volume(method);
        if (smallest > 0.0) {
            return (method->mixture == NULL ? SHORT_OF_DENSEST : MIXTURE_SHORT_OF_DENSEST) * volume *
                   method->molar_mass / smallest;
        }
    }
    return DENSEST * volume;
}

/* ---- one temperature --------------------------------------------------------------------------------------------- */

struct mass_search {
    const struct sheet_run *run;
    struct method_run *method;
    const struct predicate *predicate;
    double temperature;
    struct predicate_finding last;
};

static enum answer score_at_mass(void *context, double mass, double *score)
{
    struct mass_search *search = context;
    search->last = predicate_at(search->run, search->method, search->predicate, mass, search->temperature, score);
    return search->last.answer;
}

struct trials {
    size_t count;
    double masses[MOST_TRIALS];
};

static void add_trial(struct trials *trials, double mass, double most)
{
    if (mass > 0.0 && mass <= most && trials->count < MOST_TRIALS) {
        trials->masses[trials->count++] = mass;
    }
}

/* Both sides of an edge at `molar_volume`, where predicates on phases change; `per_volume` over it is the mass there.
 */
static void add_edge_trials(struct trials *trials, bool is_given, double per_volume, double molar_volume, double most)
{
    if (is_given) {
        const double mass = per_volume / molar_volume;
        add_trial(trials, mass * (1.0 - BESIDE_PHASE_CHANGE), most);
        add_trial(trials, mass * (1.0 + BESIDE_PHASE_CHANGE), most);
    }
}

static bool asks_of_phases(const struct predicate *predicate)
{
    return predicate->kind == PREDICATE_ONE_PHASE || predicate->kind == PREDICATE_NO_LIQUID ||
           predicate->kind == PREDICATE_COMPARE;
}

static int by_mass(const void *left, const void *right)
{
    const double a = *(const double *)left, b = *(const double *)right;
    return (a > b) - (a < b);
}

static struct trials trial_masses(const struct mass_search *search, double most)
{
    struct trials trials = {0};
    for (int k = DOUBLINGS; k >= 1; k--) {
        add_trial(&trials, ldexp(most, -k), most);
    }
    for (int k = 1; k <= UPPER_STEPS; k++) {
        add_trial(&trials, most * (0.5 + 0.5 * k / UPPER_STEPS), most);
    }
    struct phase_edges edges;
    if (asks_of_phases(search->predicate) && edges_at(search->method, search->temperature, &edges) == ANSWER_OK) {
        const double per_volume = search->run->sheet->vessel->water_capacity.value * search->method->molar_mass;
        add_edge_trials(&trials, edges.has_low, per_volume, edges.low_volume, most);
        add_edge_trials(&trials, edges.has_high, per_volume, edges.high_volume, most);
    }
    qsort(trials.masses, trials.count, sizeof *trials.masses, by_mass);
    return trials;
}

struct mass_limit {
    double mass; /* the largest that is met, as are all below */
    bool is_unlimited;
    bool has_window;
    double window;
    struct predicate_finding finding; /* at the mass, or at the smallest trial where none is met */
};

/* Walks up the trials to the first that is not met; *below and *above are then the last met one (0: none) and it.
 * Trials beyond it are looked at only for a window in which the predicate is met again. */
static enum answer walk_up(struct mass_search *search, const struct trials *trials, struct search_bracket *step,
                           struct mass_limit *limit)
{
    bool has_failed = false;
    *step = (struct search_bracket){0};
    for (size_t i = 0; i < trials->count; i++) {
        double score;
        const enum answer answer = score_at_mass(search, trials->masses[i], &score);
        if (answer != ANSWER_OK) {
            return has_failed ? ANSWER_OK : answer;
        }
        if (search->last.holds && has_failed) {
            limit->has_window = true;
            limit->window = trials->masses[i];
            return ANSWER_OK;
        }
        if (search->last.holds) {
            step->a = trials->masses[i];
            step->value_a = score;
        } else if (!has_failed) {
            has_failed = true;
            limit->finding = search->last;
            step->b = trials->masses[i];
            step->value_b = score;
        }
    }
    limit->is_unlimited = !has_failed;
    return ANSWER_OK;
}

static enum answer limit_at_temperature(struct mass_search *search, double most, struct mass_limit *limit)
{
    const struct trials trials = trial_masses(search, most);
    struct search_bracket step;
    *limit = (struct mass_limit){.mass = most};
    enum answer answer = walk_up(search, &trials, &step, limit);
    if (answer != ANSWER_OK) {
        limit->finding = search->last;
        return answer;
    }
    if (!limit->is_unlimited) {
        limit->mass = step.a;
        if (!(step.a > 0.0)) {
            return ANSWER_OK;
        }
        const struct search_function function = {score_at_mass, search};
        answer = search_root(&function, 0.0, MASS_TOLERANCE, &step);
        limit->mass = step.a;
        /* What ends at the densest state of the method was not broken by anything. */
        double score;
        limit->is_unlimited =
            answer == ANSWER_OK && score_at_mass(search, step.b, &score) == ANSWER_OK && search->last.is_overfull;
    }
    if (answer == ANSWER_OK) {
        double score;
        answer = score_at_mass(search, limit->mass, &score);
    }
    limit->finding = search->last;
    return answer;
}

/* ---- a range of temperatures ------------------------------------------------------------------------------------- */

/* Lowers the limit to what `temperature` allows, if that is less. */
static enum answer lower_limit(struct mass_search *search, double temperature, struct mass_limit *limit)
{
    struct mass_limit here;
    search->temperature = temperature;
    const enum answer answer = limit_at_temperature(search, limit->mass, &here);
    if (answer != ANSWER_OK) {
        limit->finding = here.finding;
        return answer;
    }
    if (here.mass < limit->mass || !here.is_unlimited) {
        here.is_unlimited = here.is_unlimited && limit->is_unlimited;
        here.has_window = here.has_window || limit->has_window;
        here.window = limit->has_window ? limit->window : here.window;
        *limit = here;
    }
    return ANSWER_OK;
}

/* Checks `mass` over the whole range; where it is not met the limit comes down to what the worst temperature allows.
 * *is_met tells whether it was met, to within the tolerance of the limits. */
static enum answer exchange(struct mass_search *search, double mass, struct mass_limit *limit, bool *is_met)
{
    const struct predicate_finding finding = predicate_check(search->run, search->method, search->predicate, mass);
    *is_met = finding.holds;
    if (finding.answer != ANSWER_OK || finding.holds) {
        limit->finding = finding;
        return finding.answer;
    }
    const double before = limit->mass;
    limit->mass = fmin(before, mass);
    limit->is_unlimited = limit->is_unlimited && finding.is_overfull;
    const enum answer answer = lower_limit(search, finding.worst_temperature, limit);
    /* The worst temperature moves a little with the mass: a step below the limits' tolerance is taken twice over. */
    if (answer == ANSWER_OK && limit->mass > before * (1.0 - 10.0 * MASS_TOLERANCE)) {
        limit->mass = before * (1.0 - 20.0 * MASS_TOLERANCE);
    }
    return answer;
}

static enum answer limit_over_range(struct mass_search *search, double most, struct mass_limit *limit)
{
    /* Every smaller mass counts: some are looked at over the whole range besides the limit itself. */
    static const double shares[] = {1.0, 0.75, 0.5, 0.25};
    *limit = (struct mass_limit){.mass = most, .is_unlimited = true};
    enum answer answer = lower_limit(search, search->predicate->from, limit);
    if (answer == ANSWER_OK && limit->mass > 0.0) {
        answer = lower_limit(search, search->predicate->to, limit);
    }
    size_t share = 0;
    struct predicate_finding at_limit = limit->finding;
    for (int pass = 0; answer == ANSWER_OK && limit->mass > 0.0 && share < sizeof shares / sizeof *shares; pass++) {
        if (pass == MOST_EXCHANGES) {
            return ANSWER_FAILED;
        }
        bool is_met;
        answer = exchange(search, shares[share] * limit->mass, limit, &is_met);
        at_limit = is_met && share == 0 ? limit->finding : at_limit;
        share = is_met ? share + 1 : 0;
    }
    if (answer == ANSWER_OK && limit->mass > 0.0) {
        limit->finding = at_limit;
    }
    return answer;
}

enum answer predicate_largest_mass(const struct sheet_run *run, struct method_run *method,
                                   const struct predicate *predicate, double most, double *mass, bool *is_unlimited,
                                   struct predicate_finding *at_limit)
{
    struct mass_search search = {.run = run, .method = method, .predicate = predicate, .temperature = predicate->from};
    struct mass_limit limit;
    const enum answer answer = predicate->to > predicate->from ? limit_over_range(&search, most, &limit)
                                                               : limit_at_temperature(&search, most, &limit);
    *mass = limit.mass;
    *is_unlimited = limit.is_unlimited;
    *at_limit = limit.finding;
    at_limit->has_window = limit.has_window;
    at_limit->window = limit.window;
    return answer;
}
