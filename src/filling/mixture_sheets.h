/* The sheets `saturation` and `fugacity` for mixtures.
 */
#ifndef TAREWRIGHT_FILLING_MIXTURE_SHEETS_H
#define TAREWRIGHT_FILLING_MIXTURE_SHEETS_H

#include "filling/sheet.h"

/* Dew and bubble points at each swept temperature or pressure, and what bounds them. */
void answer_mixture_saturation(struct sheet_run *run);

/* Phases, fugacities of every component in each, and the proof of their stability, over swept temperature and pressure
 * or density. */
void answer_mixture_fugacity(struct sheet_run *run);

#endif
