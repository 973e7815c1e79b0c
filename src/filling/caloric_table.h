/* Caloric properties of the states a fugacity sheet tells, where it asks for them. */
#ifndef TAREWRIGHT_FILLING_CALORIC_TABLE_H
#define TAREWRIGHT_FILLING_CALORIC_TABLE_H

#include "filling/sheet.h"

/* One method's table; NULL where the sheet does not ask, or the method has no ideal parts, which is then said. */
struct caloric_table;
struct caloric_table *caloric_table_begin(const struct sheet_run *run, struct method_run *method);

/* One phase: its words, temperature (K), pressure (Pa), molar volume (m3/mol) and mole fractions. Of a pure liquid with
 * a saturation pressure at that temperature its Poynting factor too. Nothing where `table` is NULL. */
struct caloric_state {
    const char *phase;
    double temperature, pressure, molar_volume;
    const double *x;
    bool is_inside; /* of the method's range */
};
void caloric_table_add(struct caloric_table *table, const struct caloric_state *state);

/* What the columns mean, once after all methods' tables. */
void caloric_table_explain(const struct sheet_run *run);

#endif
