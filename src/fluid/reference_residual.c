#include "fluid/reference_residual.h"

#include "fluid/residual_parts.h"

#include <math.h>

/* A nonanalytic term damped by more than exp(-this) is below 1e-26 and left out. */
#define FARTHEST_EXPONENT 60.0

/* An envelope and the entries under it. */
struct envelope {
    struct residual_envelope shape;
    size_t first_entry, end_entry;
};

/* All terms of one envelope with the same power of delta. */
struct entry {
    double d;
    unsigned slot;
    size_t first_term, end_term;
};

struct term {
    double n, t;
    size_t power;  /* index of tau^t */
    size_t factor; /* index of W(tau); 0 is W = 1 */
};

struct nonanalytic {
    double n, a, b, A, B, C, E;
    double m;           /* 1 / (2 beta) */
    unsigned twice_a;   /* 2 a where that is a small whole number, else 0 */
    bool same_root;     /* theta as in the term before */
    bool same_distance; /* D as in the term before */
};

struct residual {
    struct envelope *envelopes;
    struct entry *entries;
    struct term *terms;
    double *powers;
    struct residual_factor *factors;
    struct nonanalytic *nonanalytic;
    size_t envelope_count, entry_count, term_count, power_count, factor_count, nonanalytic_count;
    unsigned table_end; /* powers of delta needed from the table, one past the last */
    double least_C;     /* of the nonanalytic terms */
};

/* A coefficient of delta^d, times 1, d and d (d - 1), and its first and second derivatives in tau, scaled. */
struct coefficient {
    double c, cd, cdd;
    double t, td, tt;
};

struct residual_at_t {
    double tau;
    double nonanalytic_exponent; /* least E (tau - 1)^2 of the nonanalytic terms */
    /* coefficient[entry_count], factor_value[factor_count], double[power_count] */
    struct coefficient coefficients[];
};

static size_t envelope_index(struct residual *residual, const struct residual_envelope *envelope)
{
    for (size_t i = 0; i < residual->envelope_count; i++) {
        if (residual_same_envelope(&residual->envelopes[i].shape, envelope)) {
            return i;
        }
    }
    residual->envelopes[residual->envelope_count].shape = *envelope;
    return residual->envelope_count++;
}

static size_t power_index(struct residual *residual, double t)
{
    for (size_t i = 0; i < residual->power_count; i++) {
        if (residual->powers[i] == t) {
            return i;
        }
    }
    residual->powers[residual->power_count] = t;
    return residual->power_count++;
}

static size_t factor_index(struct residual *residual, const struct residual_factor *factor)
{
    for (size_t i = 0; i < residual->factor_count; i++) {
        if (residual_same_factor(&residual->factors[i], factor)) {
            return i;
        }
    }
    residual->factors[residual->factor_count] = *factor;
    return residual->factor_count++;
}

static void add_nonanalytic(struct residual *residual, const struct residual_term *term)
{
    struct nonanalytic *out = &residual->nonanalytic[residual->nonanalytic_count];
    *out = (struct nonanalytic){.n = term->n,
                                .a = term->a,
                                .b = term->b,
                                .A = term->A,
                                .B = term->B,
                                .C = term->C,
                                .E = term->E,
                                .m = 0.5 / term->beta};
    const double twice_a = 2.0 * term->a;
    out->twice_a = twice_a >= 1.0 && twice_a < TABLE_POWERS && twice_a == floor(twice_a) ? (unsigned)twice_a : 0;
    if (residual->nonanalytic_count > 0) {
        const struct nonanalytic *last = out - 1;
        out->same_root = last->A == out->A && last->m == out->m;
        out->same_distance = out->same_root && last->B == out->B && last->a == out->a;
        residual->least_C = fmin(residual->least_C, out->C);
    } else {
        residual->least_C = out->C;
    }
    residual->nonanalytic_count++;
}

/* Where each ordinary term goes while the groups are being built. */
struct placed {
    struct term term;
    size_t envelope;
    double d;
};

static size_t place_terms(struct residual *residual, const struct reference_spec *spec, struct placed *placed)
{
    size_t count = 0;
    for (size_t i = 0; i < spec->residual_count; i++) {
        if (spec->residual[i].kind == RESIDUAL_NONANALYTIC) {
            add_nonanalytic(residual, &spec->residual[i]);
            continue;
        }
        const struct residual_parts parts = residual_take_apart(&spec->residual[i]);
        placed[count++] = (struct placed){
            .term = {.n = parts.n,
                     .t = parts.t,
                     .power = power_index(residual, parts.t),
                     .factor = factor_index(residual, &parts.factor)},
            .envelope = envelope_index(residual, &parts.envelope),
            .d = parts.d,
        };
    }
    return count;
}

/* Moves the terms of (`envelope`, d of placed[first]) behind one another into a new entry. */
static void gather_entry(struct residual *residual, struct placed *placed, bool *taken, size_t first, size_t count)
{
    const size_t envelope = placed[first].envelope;
    const double d = placed[first].d;
    struct entry *entry = &residual->entries[residual->entry_count++];
    *entry = (struct entry){.d = d, .slot = residual_power_slot(d), .first_term = residual->term_count};
    for (size_t i = first; i < count; i++) {
        if (!taken[i] && placed[i].envelope == envelope && placed[i].d == d) {
            residual->terms[residual->term_count++] = placed[i].term;
            taken[i] = true;
        }
    }
    entry->end_term = residual->term_count;
    if (entry->slot != GENERAL_POWER && entry->slot >= residual->table_end) {
        residual->table_end = entry->slot + 1;
    }
}

static void gather_entries(struct residual *residual, struct placed *placed, bool *taken, size_t count)
{
    for (size_t e = 0; e < residual->envelope_count; e++) {
        struct envelope *envelope = &residual->envelopes[e];
        envelope->first_entry = residual->entry_count;
        for (size_t i = 0; i < count; i++) {
            if (placed[i].envelope == e && !taken[i]) {
                gather_entry(residual, placed, taken, i, count);
            }
        }
        envelope->end_entry = residual->entry_count;
        const struct residual_envelope *shape = &envelope->shape;
        if (shape->kind == ENVELOPE_EXPONENTIAL && shape->l_slot != GENERAL_POWER &&
            shape->l_slot >= residual->table_end) {
            residual->table_end = shape->l_slot + 1;
        }
    }
}

const struct residual *residual_create(const struct reference_spec *spec, struct arena *arena)
{
    const size_t count = spec->residual_count;
    struct residual *residual = arena_alloc(arena, 1, sizeof *residual);
    residual->envelopes = arena_alloc(arena, count, sizeof *residual->envelopes);
    residual->entries = arena_alloc(arena, count, sizeof *residual->entries);
    residual->terms = arena_alloc(arena, count, sizeof *residual->terms);
    residual->powers = arena_alloc(arena, count, sizeof *residual->powers);
    residual->factors = arena_alloc(arena, count + 1, sizeof *residual->factors);
    residual->nonanalytic = arena_alloc(arena, count, sizeof *residual->nonanalytic);
    residual->factor_count = 1; /* the first factor is W = 1, all zero */
    residual->table_end = 2;
    struct placed *placed = arena_alloc(arena, count, sizeof *placed);
    bool *taken = arena_alloc(arena, count, sizeof *taken);
    gather_entries(residual, placed, taken, place_terms(residual, spec, placed));
    return residual;
}

size_t residual_at_t_size(const struct residual *residual)
{
    return sizeof(struct residual_at_t) + residual->entry_count * sizeof(struct coefficient) +
           residual->factor_count * sizeof(struct factor_value) + residual->power_count * sizeof(double);
}

static struct coefficient coefficient_at(const struct residual *residual, const struct entry *entry,
                                         const struct factor_value *factors, const double *powers)
{
    double c = 0.0, t = 0.0, tt = 0.0;
    for (size_t i = entry->first_term; i < entry->end_term; i++) {
        const struct term *term = &residual->terms[i];
        const struct factor_value *factor = &factors[term->factor];
        const double value = term->n * powers[term->power] * factor->value;
        const double first = term->t + factor->first;
        c += value;
        t += value * first;
        tt += value * (first * first - term->t + factor->second);
    }
    return (struct coefficient){c, c * entry->d, c * entry->d * (entry->d - 1.0), t, t * entry->d, tt};
}

void residual_set_tau(struct residual_at_t *at_t, const struct residual *residual, double tau)
{
    struct factor_value *factors = (struct factor_value *)(void *)&at_t->coefficients[residual->entry_count];
    double *powers = (double *)(void *)&factors[residual->factor_count];
    const double log_tau = log(tau);
    at_t->tau = tau;
    for (size_t i = 0; i < residual->power_count; i++) {
        powers[i] = exp(residual->powers[i] * log_tau);
    }
    for (size_t i = 0; i < residual->factor_count; i++) {
        factors[i] = residual_factor_at(&residual->factors[i], tau, log_tau);
    }
    for (size_t i = 0; i < residual->entry_count; i++) {
        at_t->coefficients[i] = coefficient_at(residual, &residual->entries[i], factors, powers);
    }
    const double z = tau - 1.0;
    at_t->nonanalytic_exponent = (double)INFINITY;
    for (size_t i = 0; i < residual->nonanalytic_count; i++) {
        at_t->nonanalytic_exponent = fmin(at_t->nonanalytic_exponent, residual->nonanalytic[i].E * z * z);
    }
}

/* The nonanalytic terms (Span and Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509, eq. 5.11 and table 32). */
struct distance {
    double theta, theta_d, theta_dd; /* derivatives in delta */
    double D, D_d, D_dd;
};

static double distance_power(const struct nonanalytic *term, double y, double log_x)
{
    if (term->twice_a == 0) {
        return exp(term->a * log_x);
    }
    double power = 1.0, base = fabs(y);
    for (unsigned k = term->twice_a; k > 0; k /= 2) {
        power *= k % 2 ? base : 1.0;
        base *= base;
    }
    return power;
}

static void distance_root(const struct nonanalytic *term, double tau, double y, double log_x, struct distance *out)
{
    /* A x^m with x = (delta - 1)^2; the derivatives vanish with y as m > 1. */
    const double s = y == 0.0 ? 0.0 : term->A * exp(term->m * log_x);
    const double ratio = y == 0.0 ? 0.0 : 2.0 * term->m / y;
    out->theta = (1.0 - tau) + s;
    out->theta_d = s * ratio;
    out->theta_dd = y == 0.0 ? 0.0 : s * ratio * (2.0 * term->m - 1.0) / y;
}

static void distance_rest(const struct nonanalytic *term, double y, double log_x, struct distance *out)
{
    const double s = y == 0.0 ? 0.0 : term->B * distance_power(term, y, log_x);
    const double ratio = y == 0.0 ? 0.0 : 2.0 * term->a / y;
    /* D vanishes at the critical point itself, where D^(b-1) times its derivatives tend to zero with density; the
     * floor is D at the nearest tau a double can hold, and keeps the second tau derivative finite there. */
    const double floor_of_D = 2.220446049250313e-16 * 2.220446049250313e-16;
    out->D = fmax(out->theta * out->theta + s, floor_of_D);
    out->D_d = 2.0 * out->theta * out->theta_d + s * ratio;
    out->D_dd = 2.0 * (out->theta_d * out->theta_d + out->theta * out->theta_dd) +
                (y == 0.0 ? 0.0 : s * ratio * (2.0 * term->a - 1.0) / y);
}

static void add_nonanalytic_term(const struct nonanalytic *term, const struct distance *at, double log_D, double delta,
                                 double tau, bool with_tau, struct residual_sums *out)
{
    const double y = delta - 1.0, z = tau - 1.0;
    const double ratio = at->D_d / at->D;
    const double L_d = term->b * ratio - 2.0 * term->C * y;
    const double L_dd = term->b * (at->D_dd / at->D - ratio * ratio) - 2.0 * term->C;
    const double value = term->n * delta * exp(term->b * log_D - term->C * y * y - term->E * z * z);
    out->value += value;
    out->d += value * (1.0 + delta * L_d);
    out->dd += value * delta * (2.0 * L_d + delta * (L_dd + L_d * L_d));
    if (with_tau) {
        const double reach = 2.0 * at->theta / at->D;
        const double L_t = -term->b * reach - 2.0 * term->E * z;
        const double L_tt = term->b * (2.0 / at->D - reach * reach) - 2.0 * term->E;
        const double L_dt = term->b * (reach * ratio - 2.0 * at->theta_d / at->D);
        out->t += value * tau * L_t;
        out->tt += value * tau * tau * (L_tt + L_t * L_t);
        out->dt += value * tau * (L_t + delta * (L_dt + L_d * L_t));
    }
}

static void add_nonanalytic_terms(const struct residual_at_t *at_t, const struct residual *residual, double delta,
                                  bool with_tau, struct residual_sums *out)
{
    const double y = delta - 1.0;
    if (residual->least_C * y * y + at_t->nonanalytic_exponent > FARTHEST_EXPONENT) {
        return;
    }
    const double log_x = y == 0.0 ? 0.0 : log(y * y);
    struct distance at = {0};
    double log_D = 0.0;
    for (size_t i = 0; i < residual->nonanalytic_count; i++) {
        const struct nonanalytic *term = &residual->nonanalytic[i];
        if (!term->same_root) {
            distance_root(term, at_t->tau, y, log_x, &at);
        }
        if (!term->same_distance) {
            distance_rest(term, y, log_x, &at);
            log_D = log(at.D);
        }
        add_nonanalytic_term(term, &at, log_D, delta, at_t->tau, with_tau, out);
    }
}

void residual_by_density(const struct residual_at_t *at_t, const struct residual *residual, double delta,
                         struct residual_sums *out)
{
    double table[TABLE_POWERS];
    residual_fill_powers(table, residual->table_end, delta);
    double value = 0.0, d = 0.0, dd = 0.0;
    for (size_t e = 0; e < residual->envelope_count; e++) {
        const struct envelope *envelope = &residual->envelopes[e];
        const struct envelope_value E = residual_envelope_at(&envelope->shape, table, delta);
        double s = 0.0, sd = 0.0, sdd = 0.0;
        for (size_t i = envelope->first_entry; i < envelope->end_entry; i++) {
            const double power = residual_power_of(table, residual->entries[i].slot, residual->entries[i].d, delta);
            s += at_t->coefficients[i].c * power;
            sd += at_t->coefficients[i].cd * power;
            sdd += at_t->coefficients[i].cdd * power;
        }
        value += E.value * s;
        d += E.value * (sd + E.first * s);
        dd += E.value * (sdd + 2.0 * E.first * sd + E.second * s);
    }
    *out = (struct residual_sums){.value = value, .d = d, .dd = dd};
    add_nonanalytic_terms(at_t, residual, delta, false, out);
}

void residual_by_both(const struct residual_at_t *at_t, const struct residual *residual, double delta,
                      struct residual_sums *out)
{
    double table[TABLE_POWERS];
    residual_fill_powers(table, residual->table_end, delta);
    *out = (struct residual_sums){0};
    for (size_t e = 0; e < residual->envelope_count; e++) {
        const struct envelope *envelope = &residual->envelopes[e];
        const struct envelope_value E = residual_envelope_at(&envelope->shape, table, delta);
        struct coefficient s = {0};
        for (size_t i = envelope->first_entry; i < envelope->end_entry; i++) {
            const struct coefficient *c = &at_t->coefficients[i];
            const double power = residual_power_of(table, residual->entries[i].slot, residual->entries[i].d, delta);
            s.c += c->c * power;
            s.cd += c->cd * power;
            s.cdd += c->cdd * power;
            s.t += c->t * power;
            s.td += c->td * power;
            s.tt += c->tt * power;
        }
        out->value += E.value * s.c;
        out->d += E.value * (s.cd + E.first * s.c);
        out->dd += E.value * (s.cdd + 2.0 * E.first * s.cd + E.second * s.c);
        out->t += E.value * s.t;
        out->tt += E.value * s.tt;
        out->dt += E.value * (s.td + E.first * s.t);
    }
    add_nonanalytic_terms(at_t, residual, delta, true, out);
}
