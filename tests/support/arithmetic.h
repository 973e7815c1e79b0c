/* A calculator for the tests: evaluates arithmetic as a reader of a hand check would. */
#ifndef TAREWRIGHT_TESTS_ARITHMETIC_H
#define TAREWRIGHT_TESTS_ARITHMETIC_H

/* Value of numbers joined by + - * / ^, parentheses, sqrt, exp and ln; NaN when the text is anything else. */
double arithmetic(const char *text);

#endif
