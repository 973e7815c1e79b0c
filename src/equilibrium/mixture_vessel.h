/* A mixture in a closed vessel: the pressure and the phases at given temperature, volume and amounts.
 *
 * Method-agnostic; nothing is allocated.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_MIXTURE_VESSEL_H
#define TAREWRIGHT_EQUILIBRIUM_MIXTURE_VESSEL_H

#include "equilibrium/split.h"

/* The contents are a split at the pressure found: phase k holds amount * fraction mol in
 * amount * fraction * molar_volume m3, and the phases fill the vessel to 1e-10 of its volume. */
struct mixture_vessel {
    double volume; /* m3 */
    double amount; /* mol */
    struct split *split;
    struct split *below, *above; /* for mixture_vessel_at_tv alone: flashes on either side of the pressure */
};

struct mixture_vessel *mixture_vessel_create(size_t count, struct arena *arena);

/* n[] mol (zeros allowed) in `volume` m3 at the temperature set. `start` is NULL, or the contents found before for a
 * state nearby and the same components, which may be *out itself: it saves time and changes nothing else.
 * ANSWER_OUT_OF_RANGE for an input without meaning, a volume at or below the method's smallest, or a pressure that is
 * not positive; ANSWER_FAILED rather than anything unconverged or unproved. */
enum answer mixture_vessel_at_tv(const struct fluid_at_t *at_t, double volume, const double n[],
                                 const struct mixture_vessel *start, struct equilibrium_workspace *ws,
                                 struct mixture_vessel *out);

#endif
