#include "filling/classify.h"

#define COLD_TEMPERATURE         223.15 /* K, -50 degC */
#define HIGHEST_HIGH_PRESSURE_TC 338.15 /* K, 65 degC */

static enum filling_class class_of_critical(double Tc)
{
    if (Tc <= COLD_TEMPERATURE) {
        return CLASS_COMPRESSED;
    }
    return Tc <= HIGHEST_HIGH_PRESSURE_TC ? CLASS_HIGH_PRESSURE_LIQUEFIED : CLASS_LOW_PRESSURE_LIQUEFIED;
}

enum filling_class classify_fluid(const struct case_fluid *fluid)
{
    double Tc = 0.0;
    for (size_t i = 0; i < fluid->count; i++) {
        if (!fluid->components[i]->critical_temperature.given) {
            return CLASS_NONE;
        }
        Tc += fluid->fractions[i] * fluid->components[i]->critical_temperature.value;
    }
    return class_of_critical(Tc);
}

/* Saturation below the triple point is that of the undercooled liquid: a gas not condensed by that is not condensed. */
enum filling_class classify_charge(const struct sheet_run *run, struct method_run *method, double mass)
{
    const enum filling_class by_gas = classify_fluid(run->sheet->fluid);
    struct contents contents;
    if (by_gas == CLASS_NONE || by_gas == CLASS_COMPRESSED ||
        contents_at(run, method, mass, COLD_TEMPERATURE, &contents) != ANSWER_OK) {
        return by_gas;
    }
    const bool is_gas = contents.state == VESSEL_VAPOUR ||
                        (method->mixture != NULL && contents.phase_count == 1 && !contents.phases[0].is_liquid);
    return is_gas ? CLASS_COMPRESSED : by_gas;
}

bool class_is_liquefied(enum filling_class of)
{
    return of == CLASS_HIGH_PRESSURE_LIQUEFIED || of == CLASS_LOW_PRESSURE_LIQUEFIED;
}

const char *class_words(enum filling_class of)
{
    switch (of) {
    case CLASS_COMPRESSED:
        return "compressed gas";
    case CLASS_HIGH_PRESSURE_LIQUEFIED:
        return "high-pressure liquefied gas";
    case CLASS_LOW_PRESSURE_LIQUEFIED:
        return "low-pressure liquefied gas";
    case CLASS_NONE:
        break;
    }
    return "not known";
}
