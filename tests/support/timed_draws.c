#define _POSIX_C_SOURCE 200809L
#include "support/timed_draws.h"

#include "filling/solve.h"
#include "support/weighed_blend.h"

#include <errno.h>
#include <string.h>
#include <time.h>

static double now(void)
{
    struct timespec time;
    clock_gettime(CLOCK_MONOTONIC, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

double time_blend_draws(size_t draws)
{
    struct arena *arena = arena_create(NULL);
    const struct propagation_model model = weighed_blend();
    const struct first_order first = propagate_first_order(&model, arena);
    const double begin = now();
    propagate_draws(&model, &first, draws, 7, 1, arena);
    const double taken = now() - begin;
    arena_free(arena);
    return taken;
}

#define DECK "span-gas.deck"

static const char SPAN_GAS[] = "use \"gases\"\n"
                               "mixture span-gas by mole { n-butane 2 % +/- 0.02 %; nitrogen rest }\n"
                               "vessel ten { water-capacity 10 L +/- 0.05 L; test-pressure 300 barg }\n"
                               "methods { lead peng-robinson-1978 }\n"
                               "charge lot { fluid span-gas; vessel ten; fill 90 barg +/- 1 bar at 15 degC +/- 1 K }\n";

static char *deck_of(const char *temperature, size_t draws, struct arena *arena)
{
    return arena_format(arena,
                        "%ssheet settled-pressure { charge lot; quote pressure at 15 degC\n"
                        "  require at %s pressure <= 150 barg\n  monte-carlo draws %zu }\n",
                        SPAN_GAS, temperature, draws);
}

static bool read_deck(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    if (strcmp(path, DECK) == 0) {
        *text = context;
        *length = strlen(*text);
        return true;
    }
    return deck_read_file(NULL, arena, path, text, length);
}

/* The seconds a deck's sheets take; below 0 where a draw had no answer. */
static double time_deck(char *text, size_t draws, struct arena *arena)
{
    const struct deck_reader reader = {.read = read_deck, .context = text, .library_folder = "decks/library"};
    struct diagnostics diagnostics = {.arena = arena};
    const struct deck *deck = deck_load(DECK, &reader, arena, &diagnostics);
    const struct case_tree *tree = deck == NULL ? NULL : case_elaborate(deck, arena, &diagnostics);
    if (tree == NULL) {
        return -1.0;
    }
    const double begin = now();
    const struct result *result = filling_solve(tree, "0.0.0", arena);
    const double taken = now() - begin;
    for (const struct sheet_part *part = result->first_sheet->first_part; part != NULL; part = part->next) {
        if (part->budget != NULL && part->budget->drawn.answered != draws) {
            return -1.0;
        }
    }
    return taken;
}

static double time_at(const char *temperature, size_t draws, struct arena *arena)
{
    enum { FEWEST = 100 };
    const double some = time_deck(deck_of(temperature, draws, arena), draws, arena);
    const double few = time_deck(deck_of(temperature, FEWEST, arena), FEWEST, arena);
    return some < 0.0 || few < 0.0 ? -1.0 : (some - few) * (double)draws / (double)(draws - FEWEST);
}

double time_settled_draws(size_t draws)
{
    struct arena *arena = arena_create(NULL);
    const double hot = time_at("50 degC", draws, arena), cold = time_at("-25 degC", draws, arena);
    arena_free(arena);
    return hot < 0.0 || cold < 0.0 ? -1.0 : hot + cold;
}
