#include "support/explained.h"
#include "support/arithmetic.h"
#include "support/check.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* The formula with every symbol replaced by its value. */
static void put_numbers_in(const struct explanation *numbers, size_t before, const char *formula, char *text,
                           size_t bytes)
{
    size_t used = 0;
    for (const char *at = formula; *at != '\0';) {
        size_t length = strspn(at, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_0123456789");
        const bool is_symbol = length > 0 && !(*at >= '0' && *at <= '9');
        size_t k = 0;
        while (is_symbol && k < before &&
               !(strlen(numbers->values[k].symbol) == length && memcmp(numbers->values[k].symbol, at, length) == 0)) {
            k++;
        }
        length = length == 0 ? 1 : length;
        used +=
            (size_t)(is_symbol && k < before ? snprintf(text + used, bytes - used, "(%.17g)", numbers->values[k].value)
                                             : snprintf(text + used, bytes - used, "%.*s", (int)length, at));
        at += length;
    }
}

void assert_formulas_hold(const struct explanation *numbers)
{
    for (size_t i = 0; i < numbers->count; i++) {
        const struct explained_value *each = &numbers->values[i];
        if (each->formula != NULL) {
            char text[800];
            put_numbers_in(numbers, i, each->formula, text, sizeof text);
            assert_near(arithmetic(text), each->value, 1e-12 * (fabs(each->value) + 1e-3), text);
        }
    }
}

double explained_number(const struct explanation *numbers, const char *symbol)
{
    for (size_t i = 0; i < numbers->count; i++) {
        if (strcmp(numbers->values[i].symbol, symbol) == 0) {
            return numbers->values[i].value;
        }
    }
    fail_msg("no %s in the explanation", symbol);
    return 0.0;
}
