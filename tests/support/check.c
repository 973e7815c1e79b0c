#include "support/check.h"

#include <math.h>

bool check_is_close(double actual, double expected, double rtol)
{
    return isfinite(actual) && isfinite(expected) && fabs(actual - expected) <= rtol * fabs(expected);
}

bool check_is_near(double actual, double expected, double atol)
{
    return isfinite(actual) && isfinite(expected) && fabs(actual - expected) <= atol;
}

void check_close_at(double actual, double expected, double rtol, const char *what, const char *file, int line)
{
    if (!check_is_close(actual, expected, rtol)) {
        print_error("%s\n  actual   %.17g\n  expected %.17g\n  relative %.3g, allowed %.3g\n", what, actual, expected,
                    (actual - expected) / expected, rtol);
        _fail(file, line);
    }
}

void check_near_at(double actual, double expected, double atol, const char *what, const char *file, int line)
{
    if (!check_is_near(actual, expected, atol)) {
        print_error("%s\n  actual   %.17g\n  expected %.17g\n  difference %.3g, allowed %.3g\n", what, actual, expected,
                    actual - expected, atol);
        _fail(file, line);
    }
}
