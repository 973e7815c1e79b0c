/* The uncertainty of what a sheet says: every `+/-` of the deck carried to each of its results.
 *
 * The sheet is answered again with the values shifted, as a whole, so that whatever a result depends on counts: the
 * rest of a mixture, the mass that a fill pressure stands for, the method that governs.
 */
#ifndef TAREWRIGHT_FILLING_UNCERTAINTY_H
#define TAREWRIGHT_FILLING_UNCERTAINTY_H

#include "filling/sheet.h"

/* Adds to the answered sheet `run->out` the expanded uncertainty of its facts, margins and cells, budgets of those that
 * govern, and, where the sheet asks for them, random draws beside. Does nothing where no value is uncertain. */
void tell_uncertainty(struct sheet_run *run);

#endif
