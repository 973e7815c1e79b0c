#include "support/campaign.h"

#include <math.h>

#define MOST_IMBALANCE 1e-12
#define MOST_GAIN      1e-13

const char *campaign_kind_name(enum state_kind kind)
{
    static const char *const names[STATE_KINDS] = {"general", "nearly pure", "near boundary", "near critical",
                                                   "azeotrope"};
    return names[kind];
}

static double sum_of(const double n[], size_t count)
{
    double sum = 0.0;
    for (size_t i = 0; i < count; i++) {
        sum += n[i];
    }
    return sum;
}

/* The largest error of any component's balance, relative to its amount. */
static double imbalance_of(const struct split *split, const struct mixture_state *state)
{
    const double total = sum_of(state->z, state->count);
    double worst = 0.0;
    for (size_t i = 0; i < state->count; i++) {
        double held = 0.0;
        for (size_t k = 0; k < split->phase_count; k++) {
            held += split->phase[k].fraction * split->phase[k].x[i];
        }
        const double error = fabs(held * total - state->z[i]);
        worst = fmax(worst, state->z[i] > 0.0 ? error / state->z[i] : error);
    }
    return worst;
}

/* The largest difference of ln f between phases, from the compositions and coefficients reported. */
static double residual_of(const struct split *split, const struct mixture_state *state)
{
    double worst = 0.0;
    for (size_t i = 0; i < state->count; i++) {
        for (size_t k = 1; state->z[i] > 0.0 && k < split->phase_count; k++) {
            const struct split_phase *a = &split->phase[0], *b = &split->phase[k];
            worst = fmax(worst, fabs(log(a->x[i] / b->x[i]) + a->ln_phi[i] - b->ln_phi[i]));
        }
    }
    return worst;
}

static bool is_number(const struct split *split, size_t count)
{
    bool is_finite = true;
    for (size_t k = 0; k < split->phase_count; k++) {
        const struct split_phase *phase = &split->phase[k];
        is_finite = is_finite && isfinite(phase->fraction) && isfinite(phase->molar_volume) && isfinite(phase->Z);
        for (size_t i = 0; i < count; i++) {
            is_finite = is_finite && isfinite(phase->x[i]) && isfinite(phase->ln_phi[i]);
        }
    }
    return is_finite;
}

/* The tangent plane through the phases reported, searched from every start there is. */
static bool misses_a_phase(const struct state_place *place, const struct mixture_state *state)
{
    struct equilibrium_workspace *ws = place->ws;
    const struct split *split = place->split;
    struct known_phases known = {.count = split->phase_count};
    struct stability found;
    if (!workspace_set_feed(ws, state->z)) {
        return true;
    }
    workspace_set_pure(ws, place->at_t, state->pressure);
    for (size_t k = 0; k < split->phase_count; k++) {
        known.amounts[k] = split->phase[k].x;
        known.molar_volume[k] = split->phase[k].molar_volume;
    }
    for (size_t a = 0; a < ws->active_count; a++) {
        const size_t i = ws->active[a];
        size_t richest = 0;
        for (size_t k = 1; k < split->phase_count; k++) {
            richest = split->phase[k].x[i] > split->phase[richest].x[i] ? k : richest;
        }
        ws->d[i] = log(split->phase[richest].x[i]) + split->phase[richest].ln_phi[i];
    }
    return stability_of_plane(place->at_t, state->pressure, &known, STABILITY_EXHAUSTIVE, ws, &found) != ANSWER_OK ||
           found.smallest_tpd < -SPLIT_LEAST_TPD;
}

static void note_bad(struct campaign_tally *out, long *count, uint64_t seed)
{
    ++*count;
    out->first_bad = out->first_bad == 0 ? seed : out->first_bad;
}

static void judge(const struct state_place *place, const struct mixture_state *state, uint64_t seed,
                  struct campaign_tally *out)
{
    const struct split *split = place->split;
    const double balance = imbalance_of(split, state), residual = residual_of(split, state);
    const bool is_good = is_number(split, state->count) && balance <= MOST_IMBALANCE &&
                         residual <= SPLIT_LN_F_TOLERANCE && split->gibbs_gain <= MOST_GAIN &&
                         split->smallest_tpd >= -SPLIT_LEAST_TPD;
    out->by_phases[split->phase_count]++;
    out->worst_balance = fmax(out->worst_balance, balance);
    out->worst_residual = fmax(out->worst_residual, residual);
    out->worst_gain = fmax(out->worst_gain, split->gibbs_gain);
    out->lowest_tpd = fmin(out->lowest_tpd, split->smallest_tpd);
    if (!is_good) {
        note_bad(out, &out->wrong, seed);
    }
}

void campaign_run(const char *method, uint64_t first, long count, enum state_kind kind, long searched_every,
                  struct campaign_tally *out)
{
    struct arena *arena = arena_create(NULL);
    struct state_room *room = state_room_create_for(method, arena);
    *out = (struct campaign_tally){.states = count, .worst_gain = -HUGE_VAL};
    for (long k = 0; k < count; k++) {
        const uint64_t seed = first + (uint64_t)k;
        struct mixture_state state;
        mixture_state_draw(seed, kind, room, &state);
        const struct state_place place = mixture_state_place(&state, room);
        if (split_at_tp(place.at_t, state.pressure, state.z, place.ws, place.split) != ANSWER_OK) {
            note_bad(out, &out->refused, seed);
            continue;
        }
        judge(&place, &state, seed, out);
        if (k % searched_every == 0) {
            out->searched++;
            if (misses_a_phase(&place, &state)) {
                note_bad(out, &out->missed, seed);
            }
        }
    }
    state_room_close(room);
    arena_free(arena);
}
