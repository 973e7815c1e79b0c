#include "filling/pair_warnings.h"

#include "base/text.h"
#include "filling/method_parameters.h"

#include <string.h>

/* K: which parameters a pair has does not depend on the temperature; that of a yard serves. */
#define ANY_TEMPERATURE 288.15
/* K: helium, hydrogen, deuterium and neon are critical below this, and nothing else is: the heaviest of them, neon, at
 * 44.4 K, fluorine as the next at 144 K. Their acentric factors measure quantum effects, not shape. */
#define LIGHT_CRITICAL_TEMPERATURE 50.0

static bool has_share(const struct method_run *method, size_t i)
{
    return method->z[i] > 0.0;
}

static bool is_unknown(const struct method_run *method, size_t i, size_t j)
{
    struct pair_parameter pair;
    struct reducing_parameter reducing;
    if (!has_share(method, i) || !has_share(method, j)) {
        return false;
    }
    return (fluid_pair(method->at_t, i, j, &pair) == ANSWER_OK && pair.origin == PAIR_FROM_NOTHING) ||
           (fluid_reducing(method->fluid, i, j, &reducing) == ANSWER_OK && reducing.origin == PAIR_FROM_NOTHING);
}

/* "a with b, c; b with c": each pair once, and a name once for all its pairs. */
static void list_unknown(const struct sheet_run *run, const struct method_run *method, struct text *names)
{
    const struct case_component *const *components = run->sheet->fluid->components;
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        bool is_named = false;
        for (size_t j = i + 1; j < run->sheet->fluid->count; j++) {
            if (!is_unknown(method, i, j)) {
                continue;
            }
            if (is_named) {
                text_format(names, ", %s", components[j]->name);
            } else {
                text_format(names, "%s%s with %s", names->length == 0 ? "" : "; ", components[i]->name,
                            components[j]->name);
            }
            is_named = true;
        }
    }
}

static void warn_of_unknown(const struct sheet_run *run, const struct method_run *method)
{
    struct text names = {.arena = run->arena};
    if (fluid_set_t(method->at_t, method->fluid, ANY_TEMPERATURE) != ANSWER_OK) {
        return;
    }
    list_unknown(run, method, &names);
    if (names.length > 0 && method->fluid->ops->reducing != NULL) {
        result_warn(run->result, CODE_W370, location_line(run->sheet->at), run->number,
                    "%s, %s: no reducing parameters are published, and beta = gamma = 1 without a departure function "
                    "is an estimate of unknown accuracy, of %s",
                    run->sheet->fluid->name, method->name, names.bytes);
    } else if (names.length > 0) {
        result_warn(run->result, CODE_W306, location_line(run->sheet->at), run->number,
                    "%s, %s: no interaction is known, and none is taken, of %s", run->sheet->fluid->name, method->name,
                    names.bytes);
    }
}

/* What the acentric factor is to a method; NULL where it is nothing, or where light gases have constants of their own,
 * as the virial methods' have. */
static const char *use_of_acentric(const struct fluid_ops *ops)
{
    if (strcmp(ops->name, "lee-kesler") == 0) {
        return "all properties follow the acentric factor";
    }
    return method_takes_acentric(ops->name) && (ops->capabilities & IS_CUBIC) != 0
               ? "the attraction follows the acentric factor"
               : NULL;
}

static void warn_of_light_gases(const struct sheet_run *run, const struct method_run *method, const char *use)
{
    struct text names = {.arena = run->arena};
    for (size_t i = 0; i < run->sheet->fluid->count; i++) {
        const struct case_component *component = run->sheet->fluid->components[i];
        if (has_share(method, i) && component->critical_temperature.given &&
            component->critical_temperature.value < LIGHT_CRITICAL_TEMPERATURE) {
            text_format(&names, "%s%s", names.length == 0 ? "" : ", ", component->name);
        }
    }
    if (names.length > 0) {
        result_warn(run->result, CODE_W307, location_line(run->sheet->at), run->number,
                    "%s, %s: %s, which says little of a gas as light as %s", run->sheet->fluid->name, method->name, use,
                    names.bytes);
    }
}

void warn_pairs(struct sheet_run *run, struct method_run *method)
{
    if (method->fluid == NULL) {
        return;
    }
    if (run->sheet->fluid->count > 1) {
        warn_of_unknown(run, method);
    }
    const char *use = use_of_acentric(method->fluid->ops);
    if (use != NULL) {
        warn_of_light_gases(run, method, use);
    }
}
