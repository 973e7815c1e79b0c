/* What a charge holds at rest where some of it is solid. */
#include "filling/solid_contents.h"

#include "equilibrium/solid_vessel.h"
#include "filling/hand_check.h"
#include "filling/mixture_contents.h"
#include "filling/requirement.h"

#include <math.h>

enum { MOST_HALVINGS = 40 };

#define FOUND_WITHIN 1e-3 /* K */

/* Memory for one method, pure gas or mixture. */
struct freezer {
    const struct sheet_run *run;
    struct method_run *method;
    double volume, amount;            /* m3, mol */
    double *n;                        /* [count], mol */
    struct equilibrium_workspace *ws; /* NULL: a pure gas */
    struct solid_vessel *vessel;
};

/* The contents at one temperature. */
struct frozen {
    double pressure; /* Pa */
    size_t phases;   /* of the fluid */
    size_t solid_count;
    struct former formers[MOST_FORMERS];
    double solid[MOST_FORMERS], left[MOST_FORMERS]; /* mol; mole fraction in the lightest phase */
    double phi[MOST_FORMERS];                       /* fugacity coefficient in the lightest phase */
};

static struct freezer freezer_create(const struct sheet_run *run, struct method_run *method, double mass)
{
    const size_t count = run->sheet->fluid->count;
    struct freezer freezer = {.run = run,
                              .method = method,
                              .volume = run->sheet->vessel->water_capacity.value,
                              .amount = mass / method->molar_mass,
                              .n = arena_alloc(run->arena, count, sizeof(double))};
    for (size_t i = 0; i < count; i++) {
        freezer.n[i] = freezer.amount * method->z[i];
    }
    if (count > 1) {
        freezer.ws = equilibrium_workspace_create(count, run->arena);
        freezer.vessel = solid_vessel_create(count, run->arena);
    }
    return freezer;
}

/* ---- contents ---------------------------------------------------------------------------------------------------- */

/* Above the triple point by its melting line only: the sublimation line drawn out serves gases under pressure. */
static bool can_be_solid(const struct solid_spec *solid, const struct method_run *alone, double temperature)
{
    return temperature < solid->largest_temperature ||
           (alone->fluid != NULL &&
            solid_line_at(solid, (alone->fluid->ops->capabilities & CAN_LIQUID) != 0, temperature) == SOLID_MELTS);
}

/* The components present that can be solid; one that the method does not know as a solid there is left out. */
static enum answer find_formers(const struct freezer *f, double temperature, struct former formers[], size_t *count)
{
    const struct fluid_spec *spec = f->method->fluid->spec;
    *count = 0;
    for (size_t i = 0; i < spec->count; i++) {
        const struct solid_spec *solid = spec->pure[i]->solid;
        const struct method_run *alone = spec->count == 1 ? f->method : mixture_alone(f->method, i);
        if (solid == NULL || !(f->n[i] > 0.0) || !can_be_solid(solid, alone, temperature)) {
            continue;
        }
        if (*count == MOST_FORMERS || alone->fluid == NULL) {
            return ANSWER_CANNOT;
        }
        enum answer answer = fluid_set_t(alone->at_t, alone->fluid, temperature);
        if (answer == ANSWER_OK) {
            answer = former_at(solid, alone->at_t, i, &formers[*count]);
        }
        if (answer == ANSWER_OK) {
            (*count)++;
        } else if (answer != ANSWER_NO_SUCH_ROOT) {
            return answer;
        }
    }
    return ANSWER_OK;
}

static enum answer freeze_pure(const struct freezer *f, const struct former *former, struct frozen *out)
{
    struct pure_solid_vessel vessel;
    const enum answer answer = pure_solid_vessel_at_tv(f->method->at_t, f->volume, f->amount, former, &vessel);
    if (answer != ANSWER_OK) {
        return answer;
    }
    out->pressure = vessel.pressure;
    out->phases = 1;
    if (vessel.solid_amount > 0.0) {
        out->solid_count = 1;
        out->formers[0] = *former;
        out->solid[0] = vessel.solid_amount;
        out->left[0] = 1.0;
        out->phi[0] = vessel.phi;
    }
    return ANSWER_OK;
}

static enum answer freeze_mixture(const struct freezer *f, const struct former formers[], size_t count,
                                  struct frozen *out)
{
    const enum answer answer = solid_vessel_at_tv(f->method->at_t, f->volume, f->n, formers, count, f->ws, f->vessel);
    if (answer != ANSWER_OK) {
        return answer;
    }
    const struct split *split = f->vessel->fluid->split;
    out->pressure = split->pressure;
    out->phases = split->phase_count;
    for (size_t j = 0; j < count; j++) {
        if (f->vessel->solid[j] > 0.0) {
            const size_t i = formers[j].component;
            out->formers[out->solid_count] = formers[j];
            out->solid[out->solid_count] = f->vessel->solid[j];
            out->left[out->solid_count] = split->phase[0].x[i];
            out->phi[out->solid_count++] = exp(split->phase[0].ln_phi[i]);
        }
    }
    return ANSWER_OK;
}

static enum answer freeze_at(const struct freezer *f, double temperature, struct frozen *out)
{
    struct former formers[MOST_FORMERS];
    size_t count;
    *out = (struct frozen){.solid_count = 0};
    enum answer answer = fluid_set_t(f->method->at_t, f->method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = find_formers(f, temperature, formers, &count);
    }
    if (answer != ANSWER_OK || count == 0) {
        return answer;
    }
    return f->ws == NULL ? freeze_pure(f, formers, out) : freeze_mixture(f, formers, count, out);
}

/* ---- the first of it --------------------------------------------------------------------------------------------- */

/* Between a temperature with a solid and a warmer one without. */
static double first_frost(const struct freezer *f, double cold, double warm)
{
    struct frozen frozen;
    for (int k = 0; k < MOST_HALVINGS && warm - cold > FOUND_WITHIN; k++) {
        const double middle = 0.5 * (cold + warm);
        const bool is_solid = freeze_at(f, middle, &frozen) == ANSWER_OK && frozen.solid_count > 0;
        *(is_solid ? &cold : &warm) = middle;
    }
    return cold;
}

/* ---- what is told ------------------------------------------------------------------------------------------------ */

enum solid_column {
    SOLID_TEMPERATURE,
    SOLID_PRESSURE,
    SOLID_GAUGE,
    SOLID_FLUID,
    SOLID_NAME,
    SOLID_MASS,
    SOLID_SHARE,
    SOLID_VOLUME,
    SOLID_LEFT
};

static struct table *begin_table(const struct sheet_run *run, const struct method_run *method)
{
    struct result *result = run->result;
    struct table *table = sheet_add_table(result, run->out, "with solids, at rest", method->name);
    table_add_column(result, table, "temperature", look_temperature(run));
    table_add_column(result, table, "pressure", look_pressure(run));
    table_add_column(result, table, "gauge-pressure", look_gauge(run));
    table_add_word_column(result, table, "fluid");
    table_add_word_column(result, table, "solid");
    table_add_column(result, table, "solid-mass", look_significant(look_mass(run), 4));
    table_add_column(result, table, "solid-share", look_percent(1));
    table_add_column(result, table, "solid-volume", look_percent(2));
    if (method->mixture != NULL) {
        table_add_column(result, table, "left-in-gas", look_significant(look_percent(0), 4));
    }
    return table;
}

static void add_rows(const struct freezer *f, struct table *table, double temperature, const struct frozen *frozen)
{
    const struct sheet_run *run = f->run;
    for (size_t j = 0; j < frozen->solid_count; j++) {
        const struct former *former = &frozen->formers[j];
        const struct case_component *component = run->sheet->fluid->components[former->component];
        struct cell *row = table_add_row(run->result, table);
        cell_set(&row[SOLID_TEMPERATURE], temperature);
        cell_set(&row[SOLID_PRESSURE], frozen->pressure);
        cell_set(&row[SOLID_GAUGE], frozen->pressure);
        cell_set_text(&row[SOLID_FLUID], frozen->phases == 1   ? "one phase"
                                         : frozen->phases == 2 ? "two phases"
                                                               : "three phases or more");
        cell_set_text(&row[SOLID_NAME], component->name);
        cell_set(&row[SOLID_MASS], frozen->solid[j] * component->molar_mass.value);
        cell_set(&row[SOLID_SHARE], frozen->solid[j] / f->n[former->component]);
        cell_set(&row[SOLID_VOLUME], frozen->solid[j] * former->molar_volume / f->volume);
        if (table->column_count > SOLID_LEFT) {
            cell_set(&row[SOLID_LEFT], frozen->left[j]);
        }
    }
}

/* `warm` NULL: a solid is there at every temperature asked about. */
static void tell_first_frost(const struct freezer *f, double cold, const double *warm)
{
    const struct sheet_run *run = f->run;
    const char *from = "at every temperature asked about";
    if (warm != NULL) {
        const double first = first_frost(f, cold, *warm);
        sheet_begin_facts(run->result, run->out, "solids at the filled density");
        sheet_add_fact(run->result, run->out, "first-frost-temperature", first, look_temperature(run))->method =
            f->method->name;
        from = arena_format(run->arena, "from %s down", temperature_words(run, first));
    }
    result_warn(run->result, CODE_W363, location_line(run->sheet->at), run->number,
                "%s, %s: %s a solid is there; the table of settled pressures has the fluid alone, the table 'with "
                "solids, at rest' what settles in the end",
                run->sheet->fluid->name, f->method->name, from);
}

/* The first solid's fugacity and that of its component in the gas, of which both are the answer's. */
static void add_hand_check(const struct freezer *f, double temperature, const struct frozen *frozen)
{
    const struct sheet_run *run = f->run;
    const struct former *former = &frozen->formers[0];
    const struct method_run *alone = f->ws == NULL ? f->method : mixture_alone(f->method, former->component);
    const double p = frozen->pressure, x = frozen->left[0], phi = frozen->phi[0];
    struct solid_state solid;
    if (fluid_set_t(alone->at_t, alone->fluid, temperature) != ANSWER_OK ||
        solid_at(alone->fluid->spec->pure[0]->solid, alone->at_t, p, &solid) != ANSWER_OK) {
        return;
    }
    struct explanation numbers = {.count = 0};
    struct hand_check *check = sheet_add_hand_check(run->result, run->out,
                                                    arena_format(run->arena, "solid %s at %s, %s",
                                                                 run->sheet->fluid->components[former->component]->name,
                                                                 temperature_words(run, temperature), f->method->name));
    hand_check_put(&numbers, "R", "gas constant", NULL, "J/mol/K", alone->fluid->gas_constant);
    hand_check_put(&numbers, "T", "temperature", NULL, "K", temperature);
    hand_check_put(&numbers, "p", "settled pressure, with solids", NULL, "Pa", p);
    hand_check_put_solid(&numbers, &solid);
    hand_check_put(&numbers, "x", "mole fraction left in the fluid", NULL, "1", x);
    hand_check_put(&numbers, "phi", "its fugacity coefficient there", NULL, "1", phi);
    hand_check_put(&numbers, "f_fluid", "fugacity in the fluid", "x * p * phi", "Pa", x * p * phi);
    hand_check_numbers(run, check, &numbers);
}

void tell_solid_contents(const struct sheet_run *run, struct method_run *method, double mass,
                         const double temperatures[], size_t count)
{
    struct table *table = NULL;
    const struct freezer freezer = freezer_create(run, method, mass);
    struct frozen coldest = {.solid_count = 0};
    size_t first = 0, last = 0;
    for (size_t t = 0; t < count; t++) {
        struct frozen frozen;
        const enum answer answer = freeze_at(&freezer, temperatures[t], &frozen);
        if (answer == ANSWER_OUT_OF_RANGE || answer == ANSWER_FAILED) {
            result_warn(run->result, CODE_W364, location_line(run->sheet->at), run->number,
                        "%s, %s: no answer for the solids at %s", run->sheet->fluid->name, method->name,
                        temperature_words(run, temperatures[t]));
        }
        if (answer != ANSWER_OK || frozen.solid_count == 0) {
            continue;
        }
        if (table == NULL) {
            table = begin_table(run, method);
            coldest = frozen;
            first = t;
        }
        add_rows(&freezer, table, temperatures[t], &frozen);
        last = t;
    }
    if (table != NULL) {
        tell_first_frost(&freezer, temperatures[last], last + 1 < count ? &temperatures[last + 1] : NULL);
        add_hand_check(&freezer, temperatures[first], &coldest);
    }
}
