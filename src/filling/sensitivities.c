#include "filling/sensitivities.h"

#include "filling/requirement.h"

#define ONE_KELVIN  1.0
#define ONE_PERCENT 0.01
#define ONE_BAR     1e5 /* Pa */

static bool rise_between(const struct sheet_run *run, struct method_run *method, const double mass[2],
                         const double temperature[2], double *rise)
{
    struct contents before, after;
    if (pressure_at(run, method, mass[0], temperature[0], &before) != ANSWER_OK ||
        pressure_at(run, method, mass[1], temperature[1], &after) != ANSWER_OK) {
        return false;
    }
    *rise = after.pressure - before.pressure;
    return true;
}

bool rise_per_kelvin(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                     double *rise)
{
    return rise_between(run, method, (double[]){mass, mass}, (double[]){temperature, temperature + ONE_KELVIN}, rise);
}

bool rise_per_percent(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                      double *rise)
{
    return rise_between(run, method, (double[]){mass, mass * (1.0 + ONE_PERCENT)}, (double[]){temperature, temperature},
                        rise);
}

bool rise_per_bar_of_fill(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                          const struct fill_point *fill, double *rise)
{
    double molar_volume;
    bool holds_liquid;
    if (!fill->is_known ||
        free_volume_at(method, fill->temperature, fill->pressure + ONE_BAR, &molar_volume, &holds_liquid) !=
            ANSWER_OK ||
        holds_liquid) {
        return false;
    }
    const double raised = run->sheet->vessel->water_capacity.value / molar_volume * method->molar_mass;
    return rise_between(run, method, (double[]){mass, raised}, (double[]){temperature, temperature}, rise);
}

/* A rise within the sheet's unit of pressure, to the hundredth that a plant reads. */
static struct look look_rise(const struct sheet_run *run)
{
    return look_pressure_difference(run);
}

static struct look look_rise_per_kelvin(const struct sheet_run *run)
{
    struct look look = look_rise(run);
    look.si_unit = "Pa/K";
    look.shown.symbol = arena_format(run->arena, "%s/K", look.shown.symbol);
    return look;
}

static void add_rise(const struct sheet_run *run, const struct method_run *method, const char *name, double rise,
                     struct look look, double temperature)
{
    struct fact *fact = sheet_add_fact(run->result, run->out, name, rise, look);
    fact->method = method->name;
    fact->remark = arena_format(run->arena, "at %s", temperature_words(run, temperature));
}

void add_sensitivities(const struct sheet_run *run, struct method_run *method, double mass, double temperature,
                       const struct fill_point *fill)
{
    double rise;
    sheet_begin_facts(run->result, run->out, "rise of the settled pressure for 1 K, 1 % of charge, 1 bar of fill more");
    if (rise_per_kelvin(run, method, mass, temperature, &rise)) {
        add_rise(run, method, "rise-per-kelvin", rise, look_rise_per_kelvin(run), temperature);
    }
    if (rise_per_percent(run, method, mass, temperature, &rise)) {
        add_rise(run, method, "rise-per-percent-of-charge", rise, look_rise(run), temperature);
    }
    if (rise_per_bar_of_fill(run, method, mass, temperature, fill, &rise)) {
        add_rise(run, method, "rise-per-bar-of-fill", rise, look_rise(run), temperature);
    }
}
