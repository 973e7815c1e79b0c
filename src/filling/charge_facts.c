#include "filling/charge_facts.h"

#include "filling/classify.h"
#include "filling/requirement.h"
#include "filling/sensitivities.h"

#define STATED_TEMPERATURE 288.15 /* K: gas volumes and settled pressures are stated at 15 degC */
#define STATED_PRESSURE    1e5    /* Pa */

bool gas_volume_of(const struct sheet_run *run, struct method_run *method, double mass, double *volume)
{
    double molar_volume;
    bool holds_liquid;
    if (free_volume_at(method, STATED_TEMPERATURE, STATED_PRESSURE, &molar_volume, &holds_liquid) != ANSWER_OK ||
        holds_liquid) {
        return false;
    }
    *volume = mass / run->sheet->fluid->molar_mass * molar_volume;
    return true;
}

static void add_gas_volume(const struct sheet_run *run, struct method_run *method, double mass)
{
    double volume;
    if (gas_volume_of(run, method, mass, &volume)) {
        struct fact *fact = sheet_add_fact(run->result, run->out, "gas-volume", volume, look_gas_volume(run));
        fact->method = method->name;
        fact->remark = "at 15 degC and 1 bara";
    }
}

struct mass_basis basis_of_charge(const struct sheet_run *run)
{
    const struct case_charge *charge = run->sheet->charge;
    if (charge->kind == FILL_PRESSURE || charge->kind == FILL_VOLUME) {
        return (struct mass_basis){.method = run->methods[0].name};
    }
    const struct origin *origin = &charge->amount.origin;
    const size_t line = deck_line(run, origin->at.file != NULL ? origin->at : charge->origin.at);
    return (struct mass_basis){.source = arena_format(run->arena, "given, line %zu", line)};
}

static struct fact *add_based(const struct sheet_run *run, const char *name, double value, struct look look,
                              struct mass_basis basis)
{
    struct fact *fact = sheet_add_fact(run->result, run->out, name, value, look);
    fact->method = basis.method;
    fact->source = basis.source;
    return fact;
}

void add_charge_facts(const struct sheet_run *run, struct method_run *method, double mass, struct mass_basis basis)
{
    const struct case_vessel *vessel = run->sheet->vessel;
    const double density = mass / vessel->water_capacity.value;
    add_based(run, "mass", mass, look_mass(run), basis);
    add_based(run, "amount", mass / run->sheet->fluid->molar_mass, look_amount(), basis);
    add_gas_volume(run, method, mass);
    add_based(run, "density", density, look_density(run), basis);
    add_based(run, "filling-ratio", density / WATER_DENSITY_15C, look_ratio(4), basis)->remark = basis.ratio_remark;
    if (vessel->tare.given) {
        add_based(run, "gross-weight", vessel->tare.value + mass, look_mass(run), basis)->remark = "tare and charge";
    }
    sheet_add_words(run->result, run->out, "class", class_words(classify_charge(run, method, mass)))->method =
        method->name;
}

/* A pure gas that warms loses its last liquid there; a mixture is asked when it condenses as it cools. */
static const char *end_name(const struct method_run *method)
{
    return method->mixture == NULL ? "last-liquid-temperature" : "first-liquid-temperature";
}

struct liquid_end_found add_liquid_end(const struct sheet_run *run, struct method_run *method, double mass)
{
    const struct liquid_end_found found = find_liquid_end(run, method, mass);
    struct result *result = run->result;
    switch (found.end) {
    case LIQUID_END_FULL:
        sheet_add_fact(result, run->out, "liquid-full-temperature", found.temperature, look_temperature(run))->method =
            method->name;
        break;
    case LIQUID_END_DRY:
        sheet_add_fact(result, run->out, end_name(method), found.temperature, look_temperature(run))->method =
            method->name;
        break;
    case LIQUID_END_CRITICAL:
        sheet_add_fact(result, run->out, "last-liquid-temperature", found.temperature, look_temperature(run))->method =
            method->name;
        break;
    case LIQUID_END_BELOW:
        sheet_add_words(
            result, run->out, end_name(method),
            arena_format(run->arena, "one phase down to %s", shown_text(run, look_temperature(run), found.temperature)))
            ->method = method->name;
        break;
    case LIQUID_END_UNKNOWN:
        break;
    }
    return found;
}

struct fill_point fill_point_of(const struct sheet_run *run, struct method_run *method, double mass)
{
    const struct case_charge *charge = run->sheet->charge;
    if (charge != NULL && charge->kind == FILL_PRESSURE) {
        return (struct fill_point){true, charge->temperature, charge->amount.value};
    }
    struct contents contents;
    if (contents_at(run, method, mass, STATED_TEMPERATURE, &contents) != ANSWER_OK ||
        contents.state == VESSEL_TWO_PHASE || contents.state == VESSEL_LIQUID_FULL) {
        return (struct fill_point){.is_known = false};
    }
    return (struct fill_point){true, STATED_TEMPERATURE, contents.pressure};
}
