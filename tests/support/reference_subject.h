/* A reference equation opened as a fluid, for the tests. */
#ifndef TAREWRIGHT_TESTS_REFERENCE_SUBJECT_H
#define TAREWRIGHT_TESTS_REFERENCE_SUBJECT_H

#include "base/arena.h"
#include "fluid/phase.h"
#include "support/reference_data.h"

/* A gas as a fluid with a place for one temperature; holds pointers into itself, so it is not to be copied. */
struct subject {
    const char *name;
    const struct reference_spec *equation;
    struct pure_spec pure;
    const struct pure_spec *list[1];
    struct fluid_spec spec;
    struct arena *arena;
    const struct fluid *fluid;
    struct fluid_at_t *at_t;
};

/* `equation` must outlive the subject; close_gas gives everything back. */
void open_equation(struct subject *subject, const char *name, const struct reference_spec *equation, double molar_mass);

/* One of the carried gases. */
void open_gas(struct subject *subject, const char *name);
void close_gas(struct subject *subject);

void set_temperature(struct subject *subject, double temperature);

/* Pressure and dp/dV of one mole at a density (mol/m3). */
struct phase phase_at(const struct subject *subject, double density);

/* The density (mol/m3) of a branch at a pressure (Pa); 0 unless the answer is ANSWER_OK. */
enum answer density_at(const struct subject *subject, double pressure, enum branch branch, double *density);

/* Runs `check` on each of the carried gases. */
void with_each_gas(void (*check)(struct subject *subject));

#endif
