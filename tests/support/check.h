/* Number checks for the tests: every expected value stands beside its source. */
#ifndef TAREWRIGHT_TESTS_CHECK_H
#define TAREWRIGHT_TESTS_CHECK_H

#include <setjmp.h>
#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

/* True when |actual - expected| <= rtol |expected|, both finite. A comparison with NaN or infinity is false. */
bool check_is_close(double actual, double expected, double rtol);

/* True when |actual - expected| <= atol, both finite: for an expected zero. */
bool check_is_near(double actual, double expected, double atol);

void check_close_at(double actual, double expected, double rtol, const char *what, const char *file, int line);
void check_near_at(double actual, double expected, double atol, const char *what, const char *file, int line);

/* Fail the running test at the caller's line, printing both values and `what`: the case and where the value is from. */
#define assert_close(actual, expected, rtol, what) check_close_at(actual, expected, rtol, what, __FILE__, __LINE__)
#define assert_near(actual, expected, atol, what)  check_near_at(actual, expected, atol, what, __FILE__, __LINE__)

#endif
