/* A blend off the scales as a model of uncertainty: n-butane in nitrogen from two parent gases, each with a trace of
 * the other, by the gravimetric equation of ISO 6142-1:
 *
 *     x_i = sum_A (x_iA m_A / M_A) / sum_A (m_A / M_A),  M_A = sum_i x_iA M_i
 *
 * with the major part of each parent what its traces leave. Outputs: the fraction of n-butane, that of nitrogen.
 */
#ifndef TAREWRIGHT_TESTS_WEIGHED_BLEND_H
#define TAREWRIGHT_TESTS_WEIGHED_BLEND_H

#include "filling/propagation.h"

enum {
    BLEND_BUTANE_MASS,       /* kg */
    BLEND_NITROGEN_MASS,     /* kg */
    BLEND_TRACE_IN_BUTANE,   /* nitrogen in the n-butane, mole fraction */
    BLEND_TRACE_IN_NITROGEN, /* n-butane in the nitrogen, mole fraction */
    BLEND_BUTANE_MOLAR_MASS, /* kg/mol */
    BLEND_NITROGEN_MOLAR_MASS,
    BLEND_INPUTS
};
enum { BLEND_BUTANE, BLEND_NITROGEN, BLEND_OUTPUTS };

/* A ten-litre lot of 2 % n-butane, and standard uncertainties of the balance, the purity tables, the molar masses. */
extern const double BLEND_VALUES[BLEND_INPUTS], BLEND_SPREADS[BLEND_INPUTS];

/* With derivatives; no context. */
struct propagation_model weighed_blend(void);

#endif
