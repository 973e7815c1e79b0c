#include "filling/search.h"

#include <math.h>

/* Halving alone narrows a bracket by 2^200, more than the range of doubles holds. */
enum { ROOT_PASSES = 200 };

#define GOLDEN_SECTION 0.61803398874989484820 /* (sqrt(5) - 1) / 2 */

struct place {
    double x, y;
};

static enum answer look_at(const struct search_function *function, struct place *place)
{
    const enum answer answer = function->value(function->context, place->x, &place->y);
    return answer == ANSWER_OK && isnan(place->y) ? ANSWER_FAILED : answer;
}

static bool signs_differ(double left, double right)
{
    return (left < 0.0) != (right < 0.0);
}

/* Where between a (0) and b (1) to look next: the inverse quadratic through the three places where the paper's test
 * finds the function well behaved, else the middle. `c` is the place given up last. */
static double next_share(struct place a, struct place b, struct place c)
{
    if (!isfinite(a.y) || !isfinite(b.y) || !isfinite(c.y)) {
        return 0.5;
    }
    const double xi = (a.x - b.x) / (c.x - b.x);
    const double phi = (a.y - b.y) / (c.y - b.y);
    if (!(phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi)) {
        return 0.5;
    }
    return a.y / (b.y - a.y) * c.y / (b.y - c.y) + (c.x - a.x) / (b.x - a.x) * a.y / (c.y - a.y) * b.y / (c.y - b.y);
}

static void keep_bracket(struct place first, struct place second, struct search_bracket *bracket)
{
    const bool in_order = !signs_differ(first.y, bracket->value_a);
    const struct place a = in_order ? first : second;
    const struct place b = in_order ? second : first;
    *bracket = (struct search_bracket){a.x, a.y, b.x, b.y};
}

enum answer search_root(const struct search_function *function, double absolute, double relative,
                        struct search_bracket *bracket)
{
    struct place a = {bracket->a, bracket->value_a}, b = {bracket->b, bracket->value_b}, c;
    if (!signs_differ(a.y, b.y)) {
        return isnan(a.y) || isnan(b.y) ? ANSWER_FAILED : ANSWER_NO_SUCH_ROOT;
    }
    double share = 0.5;
    for (int pass = 0; pass < ROOT_PASSES; pass++) {
        struct place now = {a.x + share * (b.x - a.x), 0.0};
        const enum answer answer = look_at(function, &now);
        if (answer != ANSWER_OK) {
            return answer;
        }
        if (signs_differ(now.y, a.y)) {
            c = b;
            b = a;
        } else {
            c = a;
        }
        a = now;
        const double width = fabs(b.x - a.x);
        const double tolerance = absolute + relative * fabs(b.x);
        if (width <= tolerance || width <= 4e-16 * fabs(b.x)) {
            keep_bracket(a, b, bracket);
            return ANSWER_OK;
        }
        /* Never nearer to an end than half the tolerance, so that the bracket closes from both sides. */
        const double nearest = fmin(0.5, 0.5 * tolerance / width);
        share = fmin(fmax(next_share(a, b, c), nearest), 1.0 - nearest);
    }
    return ANSWER_FAILED;
}

/* The least value between two places by golden section; *best is replaced where something lower is found. */
static enum answer golden_section(const struct search_function *function, double low, double high, double tolerance,
                                  struct place *best)
{
    struct place left = {high - GOLDEN_SECTION * (high - low), 0.0};
    struct place right = {low + GOLDEN_SECTION * (high - low), 0.0};
    enum answer answer = look_at(function, &left);
    if (answer == ANSWER_OK) {
        answer = look_at(function, &right);
    }
    while (answer == ANSWER_OK && high - low > tolerance) {
        struct place *fresh;
        if (left.y <= right.y) {
            high = right.x;
            right = left;
            left.x = high - GOLDEN_SECTION * (high - low);
            fresh = &left;
        } else {
            low = left.x;
            left = right;
            right.x = low + GOLDEN_SECTION * (high - low);
            fresh = &right;
        }
        answer = look_at(function, fresh);
        if (fresh->y < best->y) {
            *best = *fresh;
        }
    }
    return answer;
}

enum answer search_least(const struct search_function *function, double from, double to, double step, double tolerance,
                         double *at, double *value)
{
    struct place before = {from, 0.0}, here = {from, 0.0}, best;
    enum answer answer = function->value(function->context, from, &here.y);
    if (answer != ANSWER_OK) {
        return answer;
    }
    before.y = here.y;
    best = here;
    const double span = to - from;
    const size_t steps = span > 0.0 ? (size_t)ceil(span / step) : 0;
    for (size_t i = 1; i <= steps + 1 && steps > 0; i++) {
        struct place after = {i >= steps ? to : from + span * (double)i / (double)steps, 0.0};
        if (i <= steps) {
            answer = look_at(function, &after);
            if (answer != ANSWER_OK) {
                return answer;
            }
        } else {
            after.y = here.y;
        }
        if (after.y < best.y) {
            best = after;
        }
        /* A low place is one with higher ground on one side at least and none lower on the other: on a level stretch
         * there is nothing to look for. */
        const bool is_low = here.y <= before.y && here.y <= after.y && (here.y < before.y || here.y < after.y);
        if (is_low && after.x - before.x > tolerance) {
            answer = golden_section(function, before.x, after.x, tolerance, &best);
            if (answer != ANSWER_OK) {
                return answer;
            }
        }
        before = here;
        here = after;
    }
    *at = best.x;
    *value = best.y;
    return ANSWER_OK;
}
