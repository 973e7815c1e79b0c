/* Explanations of methods, redone as a reader with a calculator would. */
#ifndef TAREWRIGHT_TESTS_EXPLAINED_H
#define TAREWRIGHT_TESTS_EXPLAINED_H

#include "fluid/explanation.h"

/* Every formula, with the values before it put in, gives its value to 1e-12. */
void assert_formulas_hold(const struct explanation *numbers);

/* The value of that symbol; fails where there is none. */
double explained_number(const struct explanation *numbers, const char *symbol);

#endif
