/* The pairs of a mixture in the cubic equations: where their parameters come from, and the attraction a_ij.
 *
 * A constant gives  a_ij = (1 - kij) sqrt(a_i a_j).  The group contributions of Jaubert and Mutelet, Fluid Phase
 * Equilib. 224 (2004) 285, in the form of the later papers of that series (E-PPR78), are
 *
 *   kij = [E_ij - (d_i - d_j)^2] / (2 d_i d_j),   d_i = sqrt(a_i) / b_i,
 *   E_ij = -1/2 sum_k sum_l (f_ik - f_jk)(f_il - f_jl) A_kl (298.15 K / T)^(B_kl / A_kl - 1)
 *
 * and put into a_ij leave no quotient of alphas:  a_ij = b_i b_j (d_i^2 + d_j^2 - E_ij) / 2.
 */
#include "fluid/cubic_internal.h"

#include <math.h>
#include <string.h>

#define GROUP_TEMPERATURE 298.15

/* ---- choosing -------------------------------------------------------------------------------------------------- */

/* The constant of that origin for components i and j, or NULL; the last one given counts. */
static const struct pair_constant *constant_of(const struct cubic_fluid *cubic, size_t i, size_t j,
                                               enum pair_origin origin)
{
    const struct fluid_spec *spec = cubic->head.spec;
    for (size_t k = spec->pair_count; k-- > 0;) {
        const struct pair_constant *pair = &spec->pairs[k];
        const bool is_pair = (pair->first == i && pair->second == j) || (pair->first == j && pair->second == i);
        if (is_pair && pair->origin == origin && strcmp(pair->method, cubic->equation->method) == 0) {
            return pair;
        }
    }
    return NULL;
}

/* How much of the molecule a group makes up. */
static double share_of(const struct pure_spec *pure, size_t group)
{
    double all = 0.0, part = 0.0;
    for (size_t k = 0; k < pure->group_count; k++) {
        all += pure->groups[k].number;
        part += pure->groups[k].group == group ? pure->groups[k].number : 0.0;
    }
    return part / all;
}

/* Every group of both molecules, once. */
struct groups {
    const struct pure_spec *first, *second;
    size_t count;
};

static size_t group_at(const struct groups *groups, size_t k)
{
    return k < groups->first->group_count ? groups->first->groups[k].group
                                          : groups->second->groups[k - groups->first->group_count].group;
}

static bool is_first_mention(const struct groups *groups, size_t k)
{
    for (size_t earlier = 0; earlier < k; earlier++) {
        if (group_at(groups, earlier) == group_at(groups, k)) {
            return false;
        }
    }
    return true;
}

static double difference_in(const struct groups *groups, size_t group)
{
    return share_of(groups->first, group) - share_of(groups->second, group);
}

static const struct group_pair *find_group_pair(const struct fluid_spec *spec, size_t k, size_t l)
{
    for (size_t row = 0; row < spec->group_pair_count; row++) {
        const struct group_pair *pair = &spec->group_pairs[row];
        if ((pair->first == k && pair->second == l) || (pair->first == l && pair->second == k)) {
            return pair;
        }
    }
    return NULL;
}

/* The index of that pair of groups among the fluid's powers of temperature. */
static size_t power_of(struct cubic_powers *powers, const struct group_pair *groups, struct arena *arena)
{
    for (size_t k = 0; k < powers->count; k++) {
        if (powers->items[k].groups == groups) {
            return k;
        }
    }
    *ARENA_APPEND(arena, powers) = (struct cubic_power){groups, groups->B / groups->A - 1.0};
    return powers->count - 1;
}

struct parts {
    size_t count, capacity;
    struct cubic_group_part *items;
};

/* Adds the part of groups k and l; false where their interaction is not known but counts. */
static bool add_part(struct cubic_fluid *cubic, const struct groups *groups, size_t k, size_t l, struct arena *arena,
                     struct parts *parts)
{
    const double product = difference_in(groups, group_at(groups, k)) * difference_in(groups, group_at(groups, l));
    if (!(fabs(product) > 0.0)) {
        return true;
    }
    const struct group_pair *pair = find_group_pair(cubic->head.spec, group_at(groups, k), group_at(groups, l));
    if (pair != NULL && fabs(pair->A) > 0.0) {
        const size_t power = power_of(&cubic->powers, pair, arena);
        *ARENA_APPEND(arena, parts) = (struct cubic_group_part){power, -product * pair->A};
    }
    return pair != NULL;
}

/* The pair's group contributions; false where there are none, or one of them is not known. */
static bool take_groups(struct cubic_fluid *cubic, size_t i, size_t j, struct arena *arena, struct cubic_pair *out)
{
    struct groups groups = {.first = cubic->head.spec->pure[i], .second = cubic->head.spec->pure[j]};
    groups.count = groups.first->group_count + groups.second->group_count;
    if (groups.first->group_count == 0 || groups.second->group_count == 0) {
        return false;
    }
    struct parts parts = {.count = 0};
    for (size_t k = 0; k < groups.count; k++) {
        for (size_t l = 0; l < k; l++) {
            const bool is_new = is_first_mention(&groups, k) && is_first_mention(&groups, l);
            if (is_new && !add_part(cubic, &groups, k, l, arena, &parts)) {
                return false;
            }
        }
    }
    *out = (struct cubic_pair){.origin = PAIR_FROM_GROUPS, .part_count = parts.count, .parts = parts.items};
    return true;
}

static struct cubic_pair constant_pair(const struct pair_constant *constant)
{
    return (struct cubic_pair){.origin = constant->origin, .kij = constant->kij, .lij = constant->lij};
}

static struct cubic_pair choose(struct cubic_fluid *cubic, size_t i, size_t j, struct arena *arena)
{
    const struct fluid_spec *spec = cubic->head.spec;
    const struct pair_constant *constant = constant_of(cubic, i, j, PAIR_FROM_DECK);
    struct cubic_pair pair = {.origin = PAIR_FROM_NOTHING};
    if (constant != NULL) {
        return constant_pair(constant);
    }
    if (spec->kij != NULL) {
        return (struct cubic_pair){.origin = PAIR_FROM_DECK, .kij = spec->kij[i * spec->count + j]};
    }
    if (cubic->equation->takes_groups && take_groups(cubic, i, j, arena, &pair)) {
        return pair;
    }
    constant = constant_of(cubic, i, j, PAIR_FROM_LIBRARY);
    return constant != NULL ? constant_pair(constant) : pair;
}

void cubic_choose_pairs(struct cubic_fluid *cubic, struct arena *arena)
{
    const size_t count = cubic->head.count;
    struct cubic_pair *pair = arena_alloc(arena, count * count, sizeof *pair);
    double *factor = arena_alloc(arena, count * count, sizeof *factor);
    for (size_t i = 0; i < count; i++) {
        pair[i * count + i].origin = PAIR_FROM_NOTHING;
        factor[i * count + i] = 1.0;
        for (size_t j = 0; j < i; j++) {
            const struct cubic_pair chosen = choose(cubic, i, j, arena);
            pair[i * count + j] = pair[j * count + i] = chosen;
            factor[i * count + j] = factor[j * count + i] = 1.0 - chosen.kij;
            cubic->has_groups = cubic->has_groups || chosen.origin == PAIR_FROM_GROUPS;
            cubic->has_lij = cubic->has_lij || fabs(chosen.lij) > 0.0;
        }
    }
    cubic->pair = pair;
    cubic->factor = factor;
}

/* ---- at one temperature ---------------------------------------------------------------------------------------- */

/* E_ij / (R T) with its derivatives: a sum of powers of the temperature, each with one power more by 1 / T. */
static struct cubic_curve group_energy(const struct cubic_at_t *at, const struct cubic_pair *pair)
{
    const struct cubic_power *powers = cubic_of(&at->head)->powers.items;
    const double T = at->head.temperature;
    struct cubic_curve sum = {.value = 0.0};
    for (size_t k = 0; k < pair->part_count; k++) {
        const struct cubic_group_part *part = &pair->parts[k];
        const double power = powers[part->power].exponent + 1.0;
        const double value = part->part * at->power[part->power];
        sum.value += value;
        sum.t -= power * value / T;
        sum.tt += power * (power + 1.0) * value / (T * T);
    }
    return sum;
}

static void set_powers(struct cubic_at_t *at)
{
    const struct cubic_powers *powers = &cubic_of(&at->head)->powers;
    if (powers->count == 0) {
        return;
    }
    const double RT = at->head.fluid->gas_constant * at->head.temperature;
    const double ln_ratio = log(GROUP_TEMPERATURE / at->head.temperature);
    for (size_t k = 0; k < powers->count; k++) {
        at->power[k] = exp(powers->items[k].exponent * ln_ratio) / RT;
    }
}

/* a_ij / (R T) from groups. The covolumes are constant in every equation that takes groups. */
static struct cubic_curve from_groups(const struct cubic_at_t *at, size_t i, size_t j)
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    const struct cubic_curve energy = group_energy(at, &cubic->pair[i * at->head.fluid->count + j]);
    const double u = at->b[j] / (2.0 * at->b[i]), w = at->b[i] / (2.0 * at->b[j]);
    const double half = 0.5 * at->b[i] * at->b[j];
    const double *s = at->s, *s_t = at->s_t, *s_tt = at->s_tt;
    return (struct cubic_curve){
        .value = u * s[i] * s[i] + w * s[j] * s[j] - half * energy.value,
        .t = 2.0 * (u * s[i] * s_t[i] + w * s[j] * s_t[j]) - half * energy.t,
        .tt =
            2.0 * (u * (s_t[i] * s_t[i] + s[i] * s_tt[i]) + w * (s_t[j] * s_t[j] + s[j] * s_tt[j])) - half * energy.tt,
    };
}

/* Calls `put` for every pair from groups, with its attraction. */
static void for_pairs_from_groups(const struct cubic_at_t *at,
                                  void (*put)(const struct cubic_at_t *at, size_t ij, const struct cubic_curve *a))
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    const size_t count = at->head.fluid->count;
    for (size_t i = 0; cubic->has_groups && i < count; i++) {
        for (size_t j = 0; j < i; j++) {
            if (cubic->pair[i * count + j].origin == PAIR_FROM_GROUPS) {
                const struct cubic_curve a = from_groups(at, i, j);
                put(at, i * count + j, &a);
                put(at, j * count + i, &a);
            }
        }
    }
}

static void put_value(const struct cubic_at_t *at, size_t ij, const struct cubic_curve *a)
{
    at->pair[ij] = a->value;
}

static void put_slopes(const struct cubic_at_t *at, size_t ij, const struct cubic_curve *a)
{
    at->work->pair_t[ij] = a->t;
    at->work->pair_tt[ij] = a->tt;
}

void cubic_set_pairs(struct cubic_at_t *at)
{
    const struct cubic_fluid *cubic = cubic_of(&at->head);
    const size_t count = at->head.fluid->count;
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j;
            at->pair[ij] = at->pair[j * count + i] = cubic->factor[ij] * at->s[i] * at->s[j];
        }
    }
    set_powers(at);
    for_pairs_from_groups(at, put_value);
    at->work->has_slopes = false;
}

void cubic_set_pair_slopes(const struct cubic_at_t *at)
{
    const double *factor = cubic_of(&at->head)->factor;
    const size_t count = at->head.fluid->count;
    const double *s = at->s, *s_t = at->s_t, *s_tt = at->s_tt;
    struct cubic_work *work = at->work;
    if (work->has_slopes) {
        return;
    }
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j <= i; j++) {
            const size_t ij = i * count + j, ji = j * count + i;
            work->pair_t[ij] = work->pair_t[ji] = factor[ij] * (s_t[i] * s[j] + s[i] * s_t[j]);
            work->pair_tt[ij] = work->pair_tt[ji] =
                factor[ij] * (s_tt[i] * s[j] + 2.0 * s_t[i] * s_t[j] + s[i] * s_tt[j]);
        }
    }
    for_pairs_from_groups(at, put_slopes);
    work->has_slopes = true;
}

enum answer cubic_pair_at(const struct fluid_at_t *at_t, size_t i, size_t j, struct pair_parameter *out)
{
    const struct cubic_at_t *at = cubic_at(at_t);
    const size_t ij = i * at_t->fluid->count + j;
    const struct cubic_pair *pair = &cubic_of(at_t)->pair[ij];
    *out = (struct pair_parameter){.origin = pair->origin, .kij = pair->kij, .lij = pair->lij};
    if (pair->origin == PAIR_FROM_GROUPS) {
        out->kij = 1.0 - at->pair[ij] / (at->s[i] * at->s[j]);
    }
    return ANSWER_OK;
}
