/* The steps, at 15 and 65 degC: the liquefied gas is taken to be all liquid at its own vapour pressure, the compressed
 * gas to fill the rest of the vessel by itself, none of it dissolved:
 *   V_gas(T) = V - n_liquefied v_liquid(T);  p(T) = p_vapour(T) + Z n_compressed R T / V_gas(T)
 * With the solubility left out, as the clause allows where it is not known, the sum is on the high side. */
#include "filling/stepwise.h"

#include "filling/mixture_contents.h"

#include <math.h>

#define FILL_TEMPERATURE     288.15 /* K */
#define HOT_TEMPERATURE      338.15 /* K */
#define HIGHEST_COMPRESSED   223.15 /* K: gases critical up to -50 degC are compressed gases */
#define TEST_PRESSURE_CREDIT 1e5    /* Pa: the test pressure need not be more than the sum less 1 bar */

struct pair {
    size_t liquefied, compressed;               /* components */
    double liquefied_amount, compressed_amount; /* mol */
};

struct step {
    double temperature;
    double vapour_pressure;  /* Pa, of the liquefied gas */
    double gas_volume;       /* m3, left by the liquid; not positive: the vessel is full of liquid */
    double partial_pressure; /* Pa, of the compressed gas in it */
    double Z;
};

static bool find_pair(const struct sheet_run *run, const struct method_run *method, double mass, struct pair *pair)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    bool has_liquefied = false, has_compressed = false;
    if (fluid->count != 2) {
        return false;
    }
    for (size_t i = 0; i < fluid->count; i++) {
        const struct quantity *critical = &fluid->components[i]->critical_temperature;
        const double amount = mass / method->molar_mass * method->z[i];
        if (!critical->given || !(amount > 0.0)) {
            return false;
        }
        if (critical->value <= HIGHEST_COMPRESSED) {
            has_compressed = true;
            pair->compressed = i;
            pair->compressed_amount = amount;
        } else {
            has_liquefied = true;
            pair->liquefied = i;
            pair->liquefied_amount = amount;
        }
    }
    return has_liquefied && has_compressed;
}

static bool find_step(const struct sheet_run *run, struct method_run *method, const struct pair *pair,
                      double temperature, struct step *step)
{
    struct method_run *liquefied = mixture_alone(method, pair->liquefied);
    struct method_run *compressed = mixture_alone(method, pair->compressed);
    struct phase_edges edges;
    const double one = 1.0;
    struct phase phase = {0};
    if (edges_at(liquefied, temperature, &edges) != ANSWER_OK || !edges.high_is_bubble) {
        return false;
    }
    *step = (struct step){.temperature = temperature, .vapour_pressure = edges.high_pressure};
    step->gas_volume = run->sheet->vessel->water_capacity.value - pair->liquefied_amount * edges.high_volume;
    if (!(step->gas_volume > 0.0)) {
        return true;
    }
    if (fluid_set_t(compressed->at_t, compressed->fluid, temperature) != ANSWER_OK ||
        phase_tv(compressed->at_t, step->gas_volume / pair->compressed_amount, &one, 0, &phase) != ANSWER_OK) {
        return false;
    }
    step->partial_pressure = phase.pressure;
    step->Z = phase.Z;
    return true;
}

static void add_number(const struct sheet_run *run, const struct method_run *method, const char *name, double value,
                       struct look look, const char *remark)
{
    struct fact *fact = sheet_add_fact(run->result, run->out, name, value, look);
    fact->method = method->name;
    fact->remark = remark;
}

static void add_step(const struct sheet_run *run, const struct method_run *method, const struct pair *pair,
                     const struct step *step, const char *at)
{
    const struct case_fluid *fluid = run->sheet->fluid;
    const char *liquefied = fluid->components[pair->liquefied]->name;
    const char *compressed = fluid->components[pair->compressed]->name;
    struct arena *arena = run->arena;
    add_number(run, method, arena_format(arena, "vapour-pressure-%s", at), step->vapour_pressure, look_pressure(run),
               arena_format(arena, "of %s", liquefied));
    add_number(run, method, arena_format(arena, "gas-space-%s", at), step->gas_volume, look_volume(run),
               arena_format(arena, "left by liquid %s", liquefied));
    add_number(run, method, arena_format(arena, "partial-pressure-%s", at), step->partial_pressure, look_pressure(run),
               arena_format(arena, "of %s there, Z = %.4f", compressed, step->Z));
}

static void add_sum(const struct sheet_run *run, struct method_run *method, double mass, const struct step *hot)
{
    const double total = hot->vapour_pressure + hot->partial_pressure;
    struct contents contents;
    add_number(run, method, "stepwise-pressure", total, look_pressure(run), "their sum at 65 degC");
    if (run->sheet->vessel->test_pressure.given) {
        const double needed = total - TEST_PRESSURE_CREDIT;
        sheet_add_words(run->result, run->out, "stepwise-test-pressure",
                        needed <= run->sheet->vessel->test_pressure.value ? "sufficient: at least the sum less 1 bar"
                                                                          : "not sufficient: below the sum less 1 bar")
            ->method = method->name;
    }
    if (pressure_at(run, method, mass, HOT_TEMPERATURE, &contents) == ANSWER_OK) {
        add_number(run, method, "equilibrium-pressure", contents.pressure, look_pressure(run),
                   "at 65 degC, with what dissolves");
        add_number(run, method, "stepwise-excess", total / contents.pressure - 1.0, look_percent(1),
                   "of the sum over the equilibrium");
    }
}

void add_stepwise(const struct sheet_run *run, struct method_run *method, double mass)
{
    struct pair pair;
    struct step cold, hot;
    struct contents filled;
    if (method->mixture == NULL || !find_pair(run, method, mass, &pair) ||
        pressure_at(run, method, mass, FILL_TEMPERATURE, &filled) != ANSWER_OK || filled.phase_count < 2) {
        return;
    }
    sheet_begin_facts(run->result, run->out, "liquefied gas charged with a compressed gas, stepwise as in P200 (5)(e)");
    if (!find_step(run, method, &pair, FILL_TEMPERATURE, &cold) ||
        !find_step(run, method, &pair, HOT_TEMPERATURE, &hot)) {
        sheet_add_words(run->result, run->out, "stepwise-pressure",
                        "none: the liquefied gas has no vapour pressure at 65 degC")
            ->method = method->name;
        return;
    }
    if (!(cold.gas_volume > 0.0) || !(hot.gas_volume > 0.0)) {
        sheet_add_words(run->result, run->out, "stepwise-pressure", "none: the liquid alone fills the vessel")->method =
            method->name;
        return;
    }
    add_step(run, method, &pair, &cold, "15");
    add_step(run, method, &pair, &hot, "65");
    add_sum(run, method, mass, &hot);
}
