#include "fluid/multi_fluid_terms.h"

#include "fluid/residual_parts.h"

/* Whole powers of tau below this one come from a table of products. Beside exp(t ln tau) for each t that is faster, and
 * for a large t better by a digit: rounding in t ln tau is a relative error of the power. */
#define WHOLE_POWERS 64
/* Exponents whose fractions differ by no more than this are of the same one: 2.65 less 2 is not 0.65 to the last bit.
 */
#define SAME_FRACTION 1e-12

/* tau^t = tau^whole tau^fraction; by itself where `whole` is WHOLE_POWERS. */
struct tau_power {
    double t;
    unsigned whole, fraction;
};

/* E(delta) delta^d, shared by all terms that have it. */
struct slot {
    double d;
    unsigned power;
};

struct envelope {
    struct residual_envelope shape;
    size_t first_slot, end_slot;
};

struct term {
    double n, t;
    unsigned power;  /* index of tau^t */
    unsigned factor; /* index of W(tau); 0 is W = 1 */
    unsigned slot;
};

/* Nonanalytic terms have no slots: they are evaluated part by part. */
struct nonanalytic_part {
    size_t part;
    const struct residual *residual;
    size_t state_offset; /* bytes into the state's tail */
};

struct parts {
    size_t count, term_count, slot_count, envelope_count, power_count, fraction_count, factor_count, nonanalytic_count;
    size_t *first_term; /* [count + 1] */
    struct term *terms;
    struct slot *slots;
    struct envelope *envelopes;
    struct tau_power *powers;
    double *fractions; /* the first is none */
    struct residual_factor *factors;
    struct nonanalytic_part *nonanalytic;
    size_t nonanalytic_bytes;
    unsigned table_end; /* powers of delta needed from the table, one past the last */
    unsigned whole_end; /* the same of tau */
};

/* A slot's weighted coefficient and its derivatives by tau. */
struct blended {
    double c, t, tt;
};

/* A slot's E delta^d and its derivatives by delta. */
struct basis {
    double value, d, dd;
};

struct parts_state {
    const struct parts *parts;
    double tau, delta;
    double *term_value;            /* [term_count], n tau^t W */
    struct blended *blended;       /* [slot_count] */
    struct basis *basis;           /* [slot_count], at `delta` */
    struct factor_value *factors;  /* [factor_count] */
    double *powers;                /* [power_count] */
    double *fractions;             /* [fraction_count] */
    double *nonanalytic_weight;    /* [nonanalytic_count] */
    struct residual_sums *special; /* [nonanalytic_count], at `delta` */
    unsigned char *tail;           /* states of the nonanalytic residuals */
};

/* ---- creation -------------------------------------------------------------------------------------------------- */

/* A term's places while all are being sorted; `envelope` and `d` find the slot. */
struct placed {
    struct term term;
    size_t envelope;
    double d;
};

static size_t envelope_index(struct parts *parts, const struct residual_envelope *shape)
{
    for (size_t i = 0; i < parts->envelope_count; i++) {
        if (residual_same_envelope(&parts->envelopes[i].shape, shape)) {
            return i;
        }
    }
    parts->envelopes[parts->envelope_count].shape = *shape;
    return parts->envelope_count++;
}

static unsigned fraction_index(struct parts *parts, double fraction)
{
    for (size_t i = 0; i < parts->fraction_count; i++) {
        if (fabs(parts->fractions[i] - fraction) <= SAME_FRACTION) {
            return (unsigned)i;
        }
    }
    parts->fractions[parts->fraction_count] = fraction;
    return (unsigned)parts->fraction_count++;
}

static unsigned power_index(struct parts *parts, double t)
{
    for (size_t i = 0; i < parts->power_count; i++) {
        if (parts->powers[i].t == t) {
            return (unsigned)i;
        }
    }
    struct tau_power *power = &parts->powers[parts->power_count];
    *power = (struct tau_power){.t = t, .whole = WHOLE_POWERS};
    if (t >= 0.0 && t < WHOLE_POWERS) {
        power->whole = (unsigned)t;
        power->fraction = fraction_index(parts, t - power->whole);
        parts->whole_end = power->whole >= parts->whole_end ? power->whole + 1 : parts->whole_end;
    }
    return (unsigned)parts->power_count++;
}

static unsigned factor_index(struct parts *parts, const struct residual_factor *factor)
{
    for (size_t i = 0; i < parts->factor_count; i++) {
        if (residual_same_factor(&parts->factors[i], factor)) {
            return (unsigned)i;
        }
    }
    parts->factors[parts->factor_count] = *factor;
    return (unsigned)parts->factor_count++;
}

/* The nonanalytic terms of a part as a residual of their own. */
static void add_nonanalytic(struct parts *parts, size_t part, const struct part_terms *from, struct arena *arena)
{
    struct residual_term *terms = arena_alloc(arena, from->count + 1, sizeof *terms);
    size_t count = 0;
    for (size_t i = 0; i < from->count; i++) {
        if (from->terms[i].kind == RESIDUAL_NONANALYTIC) {
            terms[count++] = from->terms[i];
        }
    }
    if (count == 0) {
        return;
    }
    struct reference_spec *spec = arena_alloc(arena, 1, sizeof *spec);
    *spec = (struct reference_spec){.residual_count = count, .residual = terms};
    struct nonanalytic_part *out = &parts->nonanalytic[parts->nonanalytic_count++];
    *out = (struct nonanalytic_part){
        .part = part, .residual = residual_create(spec, arena), .state_offset = parts->nonanalytic_bytes};
    parts->nonanalytic_bytes += residual_at_t_size(out->residual);
}

static void place_part(struct parts *parts, const struct part_terms *from, struct placed *placed)
{
    for (size_t i = 0; i < from->count; i++) {
        if (from->terms[i].kind == RESIDUAL_NONANALYTIC) {
            continue;
        }
        const struct residual_parts apart = residual_take_apart(&from->terms[i]);
        placed[parts->term_count++] = (struct placed){
            .term = {.n = apart.n,
                     .t = apart.t,
                     .power = power_index(parts, apart.t),
                     .factor = factor_index(parts, &apart.factor)},
            .envelope = envelope_index(parts, &apart.envelope),
            .d = apart.d,
        };
    }
}

static void widen_table(struct parts *parts, unsigned power)
{
    if (power < GENERAL_POWER && power >= parts->table_end) {
        parts->table_end = power + 1;
    }
}

static unsigned slot_index(struct parts *parts, const struct envelope *envelope, double d)
{
    for (size_t i = envelope->first_slot; i < parts->slot_count; i++) {
        if (parts->slots[i].d == d) {
            return (unsigned)i;
        }
    }
    parts->slots[parts->slot_count] = (struct slot){.d = d, .power = residual_power_slot(d)};
    widen_table(parts, parts->slots[parts->slot_count].power);
    return (unsigned)parts->slot_count++;
}

/* Slots in the order of their envelopes; terms stay in the order of their parts. */
static void assign_slots(struct parts *parts, struct placed *placed)
{
    for (size_t e = 0; e < parts->envelope_count; e++) {
        struct envelope *envelope = &parts->envelopes[e];
        envelope->first_slot = parts->slot_count;
        for (size_t i = 0; i < parts->term_count; i++) {
            if (placed[i].envelope == e) {
                placed[i].term.slot = slot_index(parts, envelope, placed[i].d);
            }
        }
        envelope->end_slot = parts->slot_count;
        if (envelope->shape.kind == ENVELOPE_EXPONENTIAL) {
            widen_table(parts, envelope->shape.l_slot);
        }
    }
    for (size_t i = 0; i < parts->term_count; i++) {
        parts->terms[i] = placed[i].term;
    }
}

const struct parts *parts_create(const struct part_terms *terms, size_t count, struct arena *arena)
{
    size_t total = 1;
    for (size_t p = 0; p < count; p++) {
        total += terms[p].count;
    }
    struct parts *parts = arena_alloc(arena, 1, sizeof *parts);
    *parts = (struct parts){
        .count = count,
        .factor_count = 1, /* the first factor is W = 1, all zero */
        .table_end = 2,
        .whole_end = 2,
        .fraction_count = 1,
        .first_term = arena_alloc(arena, count + 1, sizeof *parts->first_term),
        .terms = arena_alloc(arena, total, sizeof *parts->terms),
        .slots = arena_alloc(arena, total, sizeof *parts->slots),
        .envelopes = arena_alloc(arena, total, sizeof *parts->envelopes),
        .powers = arena_alloc(arena, total, sizeof *parts->powers),
        .fractions = arena_alloc(arena, total + 1, sizeof *parts->fractions),
        .factors = arena_alloc(arena, total, sizeof *parts->factors),
        .nonanalytic = arena_alloc(arena, count, sizeof *parts->nonanalytic),
    };
    struct placed *placed = arena_alloc(arena, total, sizeof *placed);
    for (size_t p = 0; p < count; p++) {
        parts->first_term[p] = parts->term_count;
        place_part(parts, &terms[p], placed);
        add_nonanalytic(parts, p, &terms[p], arena);
    }
    parts->first_term[count] = parts->term_count;
    assign_slots(parts, placed);
    return parts;
}

/* ---- the state at one tau -------------------------------------------------------------------------------------- */

size_t parts_state_size(const struct parts *parts)
{
    return sizeof(struct parts_state) + parts->term_count * sizeof(double) +
           parts->slot_count * (sizeof(struct blended) + sizeof(struct basis)) +
           parts->factor_count * sizeof(struct factor_value) +
           (parts->power_count + parts->fraction_count) * sizeof(double) +
           parts->nonanalytic_count * (sizeof(double) + sizeof(struct residual_sums)) + parts->nonanalytic_bytes;
}

void parts_state_place(struct parts_state *state, const struct parts *parts)
{
    state->parts = parts;
    state->term_value = (double *)(void *)(state + 1);
    state->blended = (struct blended *)(void *)(state->term_value + parts->term_count);
    state->basis = (struct basis *)(void *)(state->blended + parts->slot_count);
    state->factors = (struct factor_value *)(void *)(state->basis + parts->slot_count);
    state->powers = (double *)(void *)(state->factors + parts->factor_count);
    state->fractions = state->powers + parts->power_count;
    state->nonanalytic_weight = state->fractions + parts->fraction_count;
    state->special = (struct residual_sums *)(void *)(state->nonanalytic_weight + parts->nonanalytic_count);
    state->tail = (unsigned char *)(void *)(state->special + parts->nonanalytic_count);
}

static struct residual_at_t *nonanalytic_state(const struct parts_state *state, size_t i)
{
    return (struct residual_at_t *)(void *)(state->tail + state->parts->nonanalytic[i].state_offset);
}

static void set_powers(struct parts_state *state, double tau, double log_tau)
{
    const struct parts *parts = state->parts;
    double table[WHOLE_POWERS];
    residual_fill_powers(table, parts->whole_end, tau);
    state->fractions[0] = 1.0;
    for (size_t i = 1; i < parts->fraction_count; i++) {
        state->fractions[i] = exp(parts->fractions[i] * log_tau);
    }
    for (size_t i = 0; i < parts->power_count; i++) {
        const struct tau_power *power = &parts->powers[i];
        state->powers[i] = power->whole < WHOLE_POWERS ? table[power->whole] * state->fractions[power->fraction]
                                                       : exp(power->t * log_tau);
    }
}

void parts_set_tau(struct parts_state *state, double tau)
{
    const struct parts *parts = state->parts;
    const double log_tau = log(tau);
    state->tau = tau;
    set_powers(state, tau, log_tau);
    for (size_t i = 0; i < parts->factor_count; i++) {
        state->factors[i] = residual_factor_at(&parts->factors[i], tau, log_tau);
    }
    for (size_t i = 0; i < parts->term_count; i++) {
        const struct term *term = &parts->terms[i];
        state->term_value[i] = term->n * state->powers[term->power] * state->factors[term->factor].value;
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        residual_set_tau(nonanalytic_state(state, i), parts->nonanalytic[i].residual, tau);
    }
}

static void blend_values(struct parts_state *state, const double weights[])
{
    const struct parts *parts = state->parts;
    for (size_t p = 0; p < parts->count; p++) {
        const double weight = weights[p];
        for (size_t i = parts->first_term[p]; i < parts->first_term[p + 1]; i++) {
            state->blended[parts->terms[i].slot].c += weight * state->term_value[i];
        }
    }
}

static void blend_slopes(struct parts_state *state, const double weights[])
{
    const struct parts *parts = state->parts;
    for (size_t p = 0; p < parts->count; p++) {
        for (size_t i = parts->first_term[p]; i < parts->first_term[p + 1]; i++) {
            const struct term *term = &parts->terms[i];
            const struct factor_value *factor = &state->factors[term->factor];
            struct blended *blended = &state->blended[term->slot];
            const double value = weights[p] * state->term_value[i];
            const double first = term->t + factor->first;
            blended->c += value;
            blended->t += value * first;
            blended->tt += value * (first * first - term->t + factor->second);
        }
    }
}

void parts_set_weights(struct parts_state *state, const double weights[], bool with_slopes)
{
    const struct parts *parts = state->parts;
    for (size_t s = 0; s < parts->slot_count; s++) {
        state->blended[s] = (struct blended){0.0, 0.0, 0.0};
    }
    if (with_slopes) {
        blend_slopes(state, weights);
    } else {
        blend_values(state, weights);
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        state->nonanalytic_weight[i] = weights[parts->nonanalytic[i].part];
    }
}

/* ---- at one density -------------------------------------------------------------------------------------------- */

static void add_sums(const struct residual_sums *one, double weight, struct residual_sums *out)
{
    out->value += weight * one->value;
    out->d += weight * one->d;
    out->dd += weight * one->dd;
    out->t += weight * one->t;
    out->tt += weight * one->tt;
    out->dt += weight * one->dt;
}

void parts_by_density(struct parts_state *state, double delta, struct residual_sums *out)
{
    const struct parts *parts = state->parts;
    double table[TABLE_POWERS];
    residual_fill_powers(table, parts->table_end, delta);
    double value = 0.0, d = 0.0, dd = 0.0;
    for (size_t e = 0; e < parts->envelope_count; e++) {
        const struct envelope *envelope = &parts->envelopes[e];
        const struct envelope_value E = residual_envelope_at(&envelope->shape, table, delta);
        double s = 0.0, sd = 0.0, sdd = 0.0;
        for (size_t i = envelope->first_slot; i < envelope->end_slot; i++) {
            const struct slot *slot = &parts->slots[i];
            const double part = state->blended[i].c * residual_power_of(table, slot->power, slot->d, delta);
            s += part;
            sd += part * slot->d;
            sdd += part * slot->d * (slot->d - 1.0);
        }
        value += E.value * s;
        d += E.value * (sd + E.first * s);
        dd += E.value * (sdd + 2.0 * E.first * sd + E.second * s);
    }
    *out = (struct residual_sums){.value = value, .d = d, .dd = dd};
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        struct residual_sums special;
        residual_by_density(nonanalytic_state(state, i), parts->nonanalytic[i].residual, delta, &special);
        add_sums(&special, state->nonanalytic_weight[i], out);
    }
}

static void fill_basis(struct parts_state *state, double delta)
{
    const struct parts *parts = state->parts;
    double table[TABLE_POWERS];
    residual_fill_powers(table, parts->table_end, delta);
    for (size_t e = 0; e < parts->envelope_count; e++) {
        const struct envelope *envelope = &parts->envelopes[e];
        const struct envelope_value E = residual_envelope_at(&envelope->shape, table, delta);
        for (size_t i = envelope->first_slot; i < envelope->end_slot; i++) {
            const struct slot *slot = &parts->slots[i];
            const double value = E.value * residual_power_of(table, slot->power, slot->d, delta);
            state->basis[i] = (struct basis){value, value * (slot->d + E.first),
                                             value * (slot->d * (slot->d - 1.0) + 2.0 * slot->d * E.first + E.second)};
        }
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        residual_by_both(nonanalytic_state(state, i), parts->nonanalytic[i].residual, delta, &state->special[i]);
    }
}

void parts_by_both(struct parts_state *state, double delta, struct residual_sums *out)
{
    const struct parts *parts = state->parts;
    *out = (struct residual_sums){0};
    fill_basis(state, delta);
    for (size_t i = 0; i < parts->slot_count; i++) {
        const struct blended *blended = &state->blended[i];
        const struct basis *basis = &state->basis[i];
        out->value += blended->c * basis->value;
        out->d += blended->c * basis->d;
        out->dd += blended->c * basis->dd;
        out->t += blended->t * basis->value;
        out->dt += blended->t * basis->d;
        out->tt += blended->tt * basis->value;
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        add_sums(&state->special[i], state->nonanalytic_weight[i], out);
    }
}

void parts_values(struct parts_state *state, double value[])
{
    const struct parts *parts = state->parts;
    for (size_t p = 0; p < parts->count; p++) {
        double sum = 0.0;
        for (size_t i = parts->first_term[p]; i < parts->first_term[p + 1]; i++) {
            sum += state->term_value[i] * state->basis[parts->terms[i].slot].value;
        }
        value[p] = sum;
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        value[parts->nonanalytic[i].part] += state->special[i].value;
    }
}

void parts_slopes(struct parts_state *state, double value[], double d[], double t[])
{
    const struct parts *parts = state->parts;
    for (size_t p = 0; p < parts->count; p++) {
        value[p] = d[p] = t[p] = 0.0;
        for (size_t i = parts->first_term[p]; i < parts->first_term[p + 1]; i++) {
            const struct term *term = &parts->terms[i];
            const struct basis *basis = &state->basis[term->slot];
            value[p] += state->term_value[i] * basis->value;
            d[p] += state->term_value[i] * basis->d;
            t[p] += state->term_value[i] * basis->value * (term->t + state->factors[term->factor].first);
        }
    }
    for (size_t i = 0; i < parts->nonanalytic_count; i++) {
        value[parts->nonanalytic[i].part] += state->special[i].value;
        d[parts->nonanalytic[i].part] += state->special[i].d;
        t[parts->nonanalytic[i].part] += state->special[i].t;
    }
}
