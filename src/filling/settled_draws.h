/* The charge and settled pressures of a settled-pressure sheet as quick functions of its inputs. */
#ifndef TAREWRIGHT_FILLING_SETTLED_DRAWS_H
#define TAREWRIGHT_FILLING_SETTLED_DRAWS_H

#include "filling/uncertainty_internal.h"

/* Gives the model a quick evaluation of the chosen outlets (mass, margins of pressures), where every input that matters
 * is a fraction, the water capacity, or the amount or temperature of the charge. The pressure is that of a stable state
 * of one phase or more; margins are taken at the temperature that is worst at the best estimates. False, and the model
 * is as before, where the whole sheet has to be answered for each draw. */
bool settled_quick_model(const struct uncertain_sheet *it, const size_t chosen[], size_t count,
                         struct propagation_model *model);

#endif
