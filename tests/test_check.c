/* The number checks themselves: what must pass, and that NaN, infinity and zero cannot slip through. */
#include "support/check.h"

#include <math.h>

static void a_close_value_passes_and_a_far_one_does_not(void **state)
{
    (void)state;
    assert_true(check_is_close(1.0 + 1e-12, 1.0, 1e-11));
    assert_false(check_is_close(1.0 + 1e-10, 1.0, 1e-11));
    assert_true(check_is_close(-2.0, -2.0, 0.0));
    assert_false(check_is_close(-2.0, 2.0, 1e-3));
}

static void nan_and_infinity_never_pass(void **state)
{
    (void)state;
    const double odd[] = {(double)NAN, (double)INFINITY, -(double)INFINITY};
    for (size_t i = 0; i < sizeof odd / sizeof *odd; i++) {
        assert_false(check_is_close(odd[i], 1.0, 1e300));
        assert_false(check_is_close(1.0, odd[i], 1e300));
        assert_false(check_is_close(odd[i], odd[i], 1e300));
        assert_false(check_is_near(odd[i], 0.0, 1e300));
    }
}

static void an_expected_zero_needs_an_absolute_tolerance(void **state)
{
    (void)state;
    assert_false(check_is_close(1e-300, 0.0, 1.0));
    assert_true(check_is_near(1e-13, 0.0, 1e-12));
    assert_false(check_is_near(1e-11, 0.0, 1e-12));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_close_value_passes_and_a_far_one_does_not),
        cmocka_unit_test(nan_and_infinity_never_pass),
        cmocka_unit_test(an_expected_zero_needs_an_absolute_tolerance),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
