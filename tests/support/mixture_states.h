/* Random states of mixtures of library gases from seeds, by Peng-Robinson with all pair parameters zero or by a method
 * named. */
#ifndef TAREWRIGHT_TESTS_MIXTURE_STATES_H
#define TAREWRIGHT_TESTS_MIXTURE_STATES_H

#include "equilibrium/split.h"

#include <stdint.h>

enum { STATE_MOST_COMPONENTS = 10 };

enum state_kind {
    STATE_GENERAL,       /* anything: 200 to 400 K, 1 kPa to 60 MPa, 1 to 10 components, some exactly absent */
    STATE_NEARLY_PURE,   /* 99.999 % of one gas */
    STATE_NEAR_BOUNDARY, /* within 1 % in pressure of a change of the number of phases */
    STATE_NEAR_CRITICAL, /* within 1 % in temperature and pressure of a critical point, at any temperature */
    STATE_AZEOTROPE,     /* two gases at or within 1 % in pressure of an azeotrope, where the two have one */
    STATE_KINDS
};

struct mixture_state {
    size_t count;
    size_t gas[STATE_MOST_COMPONENTS]; /* indices into LIBRARY_GAS, or into the multi-fluid method's own gases */
    double z[STATE_MOST_COMPONENTS];
    double temperature, pressure; /* K, Pa */
};

/* Memory for states of any size: fluids with 1 to 10 components share it. */
struct state_room;
struct state_room *state_room_create(struct arena *arena);

/* The same for another method. A cubic or `lee-kesler` takes all pair parameters zero; `multi-fluid` and `gerg-2008`
 * take the library's equations, and mixtures of gases each pair of which is published. */
struct state_room *state_room_create_for(const char *method, struct arena *arena);

/* Gives back the current fluid, which has an arena of its own; the room itself belongs to the arena it came from. */
void state_room_close(struct state_room *room);

/* The state of that seed. */
void mixture_state_draw(uint64_t seed, enum state_kind kind, struct state_room *room, struct mixture_state *out);

/* Its fluid at its temperature, and memory of the right size; valid until the next state is set. */
struct state_place {
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
    struct equilibrium_workspace *ws;
    struct split *split;
};
struct state_place mixture_state_place(const struct mixture_state *state, struct state_room *room);

#endif
