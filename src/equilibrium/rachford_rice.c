/* The material balance of two phases whose compositions stand in given ratios. */
#include "equilibrium/split.h"

#include <math.h>

enum { MOST_STEPS = 60 };

/* With beta the amount of the phase of higher K: the sum, and its slope, which is negative. The smaller of both
 * amounts is the unknown, so that it is exact to its last digit however small. */
struct balance {
    double value, slope;
};

/* 1 + beta (K - 1), in the unknown `small`; ln_K_change holds K - 1. */
static double denominator(const struct equilibrium_workspace *ws, size_t i, bool first_is_small, double small)
{
    const double c = ws->ln_K_change[i];
    return first_is_small ? 1.0 + small * c : 1.0 + c - small * c;
}

static struct balance balance_at(const struct equilibrium_workspace *ws, bool first_is_small, double small)
{
    struct balance b = {0.0, 0.0};
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double ratio = ws->ln_K_change[i] / denominator(ws, i, first_is_small, small);
        b.value += ws->feed[i] * ratio;
        b.slope -= ws->feed[i] * ratio * ratio;
    }
    if (!first_is_small) {
        b.value = -b.value; /* falls with the second phase's amount too */
    }
    return b;
}

/* Newton's steps within a bracket in which the balance falls through zero. */
static double solve_balance(const struct equilibrium_workspace *ws, bool first_is_small)
{
    double low = 0.0, high = 0.5, small = 0.25;
    for (int step = 0; step < MOST_STEPS; step++) {
        const struct balance b = balance_at(ws, first_is_small, small);
        if (b.value > 0.0) {
            low = small;
        } else {
            high = small;
        }
        double next = small - b.value / b.slope;
        if (!(next > low && next < high)) {
            next = 0.5 * (low + high);
        }
        const double change = fabs(next - small);
        small = next;
        if (!(change > 1e-15 * small)) {
            break;
        }
    }
    return small;
}

bool split_by_ratios(struct equilibrium_workspace *ws)
{
    double at_none = 0.0, at_all = 0.0;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double c = expm1(fmin(ws->ln_K[i], 600.0));
        ws->ln_K_change[i] = c;
        at_none += ws->feed[i] * c;
        at_all -= ws->feed[i] * expm1(fmin(-ws->ln_K[i], 600.0)); /* 1 - 1 / K, where c may have rounded to -1 */
    }
    if (!(at_none > 0.0) || !(at_all < 0.0)) {
        return false;
    }
    const bool first_is_small = balance_at(ws, true, 0.5).value < 0.0;
    const double small = solve_balance(ws, first_is_small);
    const double first = first_is_small ? small : 1.0 - small, second = first_is_small ? 1.0 - small : small;
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        const double x = ws->feed[i] / denominator(ws, i, first_is_small, small);
        ws->amounts[0][i] = first * (1.0 + ws->ln_K_change[i]) * x;
        ws->amounts[1][i] = second * x;
    }
    return true;
}
