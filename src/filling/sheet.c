/* What the sheets share: how numbers are shown, warnings of range, contents of the vessel, mass of a charge. */
#include "filling/sheet.h"

#include "filling/mixture_contents.h"

#include <float.h>
#include <math.h>
#include <string.h>

/* The last place shown, in SI: what an equation of state and a plant's instruments can stand for. */
#define PRESSURE_PLACE   1e3  /* Pa */
#define DENSITY_PLACE    1e-2 /* kg/m3 */
#define MASS_PLACE       1e-3 /* kg */
#define VOLUME_PLACE     1e-5 /* m3, of vessels */
#define GAS_VOLUME_PLACE 1e-3 /* m3 */

enum { TEMPERATURE_DECIMALS = 2, AMOUNT_DECIMALS = 2, MOST_DECIMALS = 12 };

/* ---- methods --------------------------------------------------------------------------------------------------- */

struct method_run method_run_create(const struct case_fluid *fluid, const char *method, bool may_govern,
                                    struct arena *arena)
{
    struct method_run run = {.name = method, .molar_mass = fluid->molar_mass, .z = fluid->fractions};
    run.fluid = fluid_create(method, &fluid->spec, arena, &run.lack);
    if (run.fluid == NULL) {
        return run;
    }
    run.may_govern = may_govern && (run.fluid->ops->capabilities & IS_FOR_COMPARISON) == 0;
    run.at_t = fluid_at_t_create(run.fluid, arena);
    run.has_critical = fluid->count == 1 && run.fluid->ops->critical != NULL &&
                       run.fluid->ops->critical(run.fluid, &run.critical) == ANSWER_OK;
    run.mixture = fluid->count == 1 ? NULL : mixture_work_create(fluid, method, arena);
    return run;
}

/* ---- looks ----------------------------------------------------------------------------------------------------- */

/* Decimals that reach `place` in a unit of that factor. */
static struct look look_to(const char *si_unit, struct shown_unit shown, double place)
{
    const double decimals = ceil(log10(shown.factor / place) - 1e-9);
    return (struct look){si_unit, shown, decimals > 0.0 ? (int)fmin(decimals, MOST_DECIMALS) : 0};
}

struct look look_temperature(const struct sheet_run *run)
{
    return (struct look){"K", run->sheet->units.temperature, TEMPERATURE_DECIMALS};
}

struct look look_pressure(const struct sheet_run *run)
{
    return look_to("Pa", run->sheet->units.pressure, PRESSURE_PLACE);
}

struct look look_gauge(const struct sheet_run *run)
{
    return look_to("Pa", run->sheet->units.gauge, PRESSURE_PLACE);
}

struct look look_density(const struct sheet_run *run)
{
    return look_to("kg/m3", run->sheet->units.density, DENSITY_PLACE);
}

struct look look_mass(const struct sheet_run *run)
{
    return look_to("kg", run->sheet->units.mass, MASS_PLACE);
}

struct look look_volume(const struct sheet_run *run)
{
    return look_to("m3", run->sheet->units.volume, VOLUME_PLACE);
}

struct look look_gas_volume(const struct sheet_run *run)
{
    return look_to("m3", run->sheet->units.gas_volume, GAS_VOLUME_PLACE);
}

struct look look_ratio(int decimals)
{
    return (struct look){"1", {"1", 1.0, 0.0}, decimals};
}

struct look look_percent(int decimals)
{
    return (struct look){"1", {"%", 0.01, 0.0}, decimals};
}

struct look look_molar_density(void)
{
    return (struct look){"mol/m3", {"mol/m3", 1.0, 0.0}, 2};
}

struct look look_amount(void)
{
    return (struct look){"mol", {"mol", 1.0, 0.0}, AMOUNT_DECIMALS};
}

struct look look_significant(struct look look, int digits)
{
    look.decimals = -digits;
    return look;
}

/* ---- numbers within sentences ---------------------------------------------------------------------------------- */

const char *shown_text(const struct sheet_run *run, struct look look, double si)
{
    const double shown = look_shown(&look, si);
    if (look.decimals >= 0) {
        return arena_format(run->arena, "%.*f %s", look.decimals, shown, look.shown.symbol);
    }
    return arena_format(run->arena, "%.*g %s", -look.decimals, shown, look.shown.symbol);
}

static const char *limit_text(const struct sheet_run *run, struct look look, double si)
{
    return arena_format(run->arena, "%.7g %s", look_shown(&look, si), look.shown.symbol);
}

/* ---- published ranges ------------------------------------------------------------------------------------------ */

static bool is_warned(const struct sheet_run *run, const char *opening)
{
    for (size_t i = 0; i < run->result->warnings.count; i++) {
        const struct warning *known = &run->result->warnings.items[i];
        if (known->code == CODE_W300 && known->sheet == run->number &&
            strncmp(known->text, opening, strlen(opening)) == 0) {
            return true;
        }
    }
    return false;
}

bool warn_outside_range(const struct sheet_run *run, const struct method_run *method, double temperature,
                        double pressure)
{
    const struct range_note note = method->fluid->ops->range(method->fluid, temperature, pressure);
    if (note.side == RANGE_INSIDE) {
        return true;
    }
    const bool is_pressure = note.side == RANGE_TOO_HIGH_PRESSURE;
    const struct look look = is_pressure ? look_pressure(run) : look_temperature(run);
    const char *opening =
        arena_format(run->arena, "%s, %s: %s the published limit of %s", run->sheet->fluid->name, method->name,
                     note.side == RANGE_TOO_COLD ? "below" : "above", limit_text(run, look, note.limit));
    if (!is_warned(run, opening)) {
        result_warn(run->result, CODE_W300, location_line(run->sheet->at), run->number, "%s, first at %s", opening,
                    shown_text(run, look, is_pressure ? pressure : temperature));
    }
    return false;
}

/* ---- the vessel and its charge --------------------------------------------------------------------------------- */

/* One phase that is not of a gas, by pressure and volume of the charge's own statement. */
static void warn_of_liquid(const struct sheet_run *run, const struct case_charge *charge, enum code code,
                           double pressure, const char *words)
{
    result_warn(run->result, code, location_line(charge->origin.at), run->number, "charge %s: at %s and %s %s is %s",
                charge->name, shown_text(run, look_pressure(run), pressure),
                shown_text(run, look_temperature(run), charge->temperature), run->sheet->fluid->name, words);
}

/* Molar volume by the lead method, which alone turns pressures and volumes into mass. */
static enum answer lead_molar_volume(const struct sheet_run *run, double temperature, double pressure,
                                     double *molar_volume, bool *holds_liquid)
{
    struct method_run *lead = &run->methods[0];
    if (lead->fluid == NULL) {
        return ANSWER_CANNOT;
    }
    const enum answer answer = free_volume_at(lead, temperature, pressure, molar_volume, holds_liquid);
    if (answer == ANSWER_OK) {
        warn_outside_range(run, lead, temperature, pressure);
    }
    return answer;
}

double charge_mass_of(const struct case_charge *charge, double molar_volume, double molar_mass)
{
    const double amount = charge->amount.value, capacity = charge->vessel->water_capacity.value;
    switch (charge->kind) {
    case FILL_PRESSURE:
        return capacity / molar_volume * molar_mass;
    case FILL_VOLUME:
        return amount / molar_volume * molar_mass;
    case FILL_MASS:
        break;
    case FILL_RATIO:
        return amount * WATER_DENSITY_15C * capacity;
    case FILL_DENSITY:
        return amount * capacity;
    case FILL_MOLES:
        return amount * molar_mass;
    }
    return amount;
}

static enum answer mass_by_pressure(const struct sheet_run *run, const struct case_charge *charge, double *mass)
{
    double molar_volume;
    bool holds_liquid;
    const enum answer answer =
        lead_molar_volume(run, charge->temperature, charge->amount.value, &molar_volume, &holds_liquid);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *mass = charge_mass_of(charge, molar_volume, run->sheet->fluid->molar_mass);
    if (holds_liquid) {
        warn_of_liquid(run, charge, CODE_W304, charge->amount.value,
                       run->sheet->fluid->count == 1 ? "a liquid, and the vessel is taken as full of it"
                                                     : "not all gas, and the vessel is taken as full of it all");
    }
    return ANSWER_OK;
}

static enum answer mass_by_volume(const struct sheet_run *run, const struct case_charge *charge, double *mass)
{
    double molar_volume;
    bool holds_liquid;
    const enum answer answer =
        lead_molar_volume(run, charge->temperature, charge->pressure, &molar_volume, &holds_liquid);
    if (answer != ANSWER_OK) {
        return answer;
    }
    *mass = charge_mass_of(charge, molar_volume, run->sheet->fluid->molar_mass);
    if (holds_liquid) {
        warn_of_liquid(run, charge, CODE_W305, charge->pressure,
                       run->sheet->fluid->count == 1 ? "a liquid; its volume is taken as liquid volume"
                                                     : "not all gas; its volume is taken as that of gas and liquid");
    }
    return ANSWER_OK;
}

enum answer charge_mass(const struct sheet_run *run, const struct case_charge *charge, double *mass)
{
    switch (charge->kind) {
    case FILL_PRESSURE:
        return mass_by_pressure(run, charge, mass);
    case FILL_VOLUME:
        return mass_by_volume(run, charge, mass);
    case FILL_MASS:
    case FILL_RATIO:
    case FILL_DENSITY:
    case FILL_MOLES:
        break;
    }
    *mass = charge_mass_of(charge, 0.0, run->sheet->fluid->molar_mass);
    return ANSWER_OK;
}

double ratio_rounded_down(double ratio, double step)
{
    /* A step such as 0.01 is taken as 1 / 100, so that 76 of them are the double nearest to 0.76. */
    const double multiples = floor(ratio / step * (1.0 + 4.0 * DBL_EPSILON));
    const double parts = round(1.0 / step);
    const bool is_part = step < 1.0 && fabs(parts * step - 1.0) <= 4.0 * DBL_EPSILON;
    return is_part ? multiples / parts : multiples * step;
}
