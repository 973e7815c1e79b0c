/* Mixtures written by volume at a stated state: parts of the volumes that the components have by themselves there as
 * gases. Real molar volumes turn them into amounts before any sheet asks about the mixture.
 *
 * Ownership: everything made here lives in the arena.
 */
#ifndef TAREWRIGHT_FILLING_MIXTURE_BASIS_H
#define TAREWRIGHT_FILLING_MIXTURE_BASIS_H

#include "filling/sheet.h"

/* One mixture by one method. */
struct mixture_basis {
    const struct case_fluid *written; /* has a state */
    const char *method;
    const struct case_fluid *fluid; /* the same in mole fractions, without a state; NULL: there are none */
    size_t without;                 /* index of the component that then has no volume as a gas */
    double *molar_volumes;          /* [count], m3/mol, by itself as a gas; 0 of what has no share */
    bool *is_liquid; /* [count], by itself a liquid there: the volume is that of its supersaturated gas */
};

/* x_i is proportional to phi_i / v_i, phi_i its part of the volume and v_i its molar volume by the method at the
 * state of `written`, on the gas's branch. A component without a share needs no volume. */
const struct mixture_basis *mixture_basis_create(const struct case_fluid *written, const char *method,
                                                 struct arena *arena);

/* Both fractions with the volumes between them, as a table of the sheet; warnings for what is a liquid by itself.
 * Without mole fractions: the reason, and the result is undecided. `run` needs the sheet as the deck has it, no
 * methods. */
void tell_mixture_basis(const struct sheet_run *run, const struct mixture_basis *basis);

#endif
