/* How much the settled pressure moves: for 1 K, for 1 % of charge, for 1 bar of fill.
 */
#ifndef TAREWRIGHT_FILLING_SENSITIVITIES_H
#define TAREWRIGHT_FILLING_SENSITIVITIES_H

#include "filling/sheet.h"

/* The state at which the vessel was filled, for the rise for 1 bar of fill. */
struct fill_point {
    bool is_known;                /* false: filled by mass, and that rise is left out */
    double temperature, pressure; /* K, Pa absolute */
};

/* Rises of the settled pressure of `mass` kg at `temperature`, in Pa: each the pressure with the one thing changed
 * by the whole step named, less the pressure without. False where the method had no answer. */
bool rise_per_kelvin(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                     double *rise);
bool rise_per_percent(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                      double *rise);
/* The fill pressure is raised by 1 bar at the fill temperature; false also where the contents were not a gas there. */
bool rise_per_bar_of_fill(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                          const struct fill_point *fill, double *rise);

/* A group of facts with those of the rises that have an answer. */
void add_sensitivities(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                       const struct fill_point *fill);

#endif
