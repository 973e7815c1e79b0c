/* Charges: what a vessel was filled with, and how far, in the way it was measured. */
#include "case/case_internal.h"

/* `at T`, perhaps `+/- u`: the temperature of a fill by pressure. */
static bool take_temperature(struct reading *reading, double *temperature, struct location *place)
{
    const struct item *at = take_item(reading, ITEM_AT);
    if (at == NULL) {
        report_missing(reading, "'at' and a temperature");
        return false;
    }
    static const char name[] = "the fill temperature";
    double uncertainty = 0.0;
    struct location last = at->at;
    const bool is_value = read_value(reading->e, &FORM_TEMPERATURE, name, at->value, temperature);
    if (!take_uncertainty(reading, &FORM_TEMPERATURE, name, *temperature, &uncertainty, &last) || !is_value) {
        return false;
    }
    const struct origin origin = origin_of(reading->e, location_span(at->at, last));
    if (!settle_value(reading->e, &FORM_TEMPERATURE, "fill temperature", at->value, uncertainty, &origin,
                      temperature)) {
        return false;
    }
    *place = at->value->at;
    add_input(reading->e, "fill temperature", si_text(reading->e, &FORM_TEMPERATURE, *temperature), &origin);
    return true;
}

bool take_state(struct reading *reading, const char *name, double *temperature, double *pressure)
{
    const struct item *at = reading->item;
    if (at == NULL || at->kind != ITEM_AT || at->value->kind != EXPRESSION_TUPLE ||
        at->value->right->kind == EXPRESSION_TUPLE) {
        report_missing(reading, "'at' and a state, as in 'at (15 degC, 1 bara)',");
        return false;
    }
    struct elaboration *e = reading->e;
    take_item(reading, ITEM_AT);
    const bool is_temperature =
        read_value(e, &FORM_TEMPERATURE, "the temperature of the volume", at->value->left, temperature);
    const bool is_pressure = read_value(e, &FORM_PRESSURE, "the pressure of the volume", at->value->right, pressure);
    if (!is_temperature || !is_pressure) {
        return false;
    }
    const struct origin origin = origin_of(e, at->at);
    add_input(e, name,
              arena_format(e->arena, "%s, %s", si_text(e, &FORM_TEMPERATURE, *temperature),
                           si_text(e, &FORM_PRESSURE, *pressure)),
              &origin);
    return true;
}

static const struct {
    enum vocabulary_word word;
    enum fill_kind kind;
    const struct quantity_form *form;
} FILLS[] = {
    {WORD_CHARGE_FILL, FILL_PRESSURE, &FORM_PRESSURE},
    {WORD_CHARGE_MASS, FILL_MASS, &FORM_MASS},
    {WORD_CHARGE_FILLING_RATIO, FILL_RATIO, &FORM_FILLING_RATIO},
    {WORD_CHARGE_DENSITY, FILL_DENSITY, &FORM_DENSITY},
    {WORD_CHARGE_MOLES, FILL_MOLES, &FORM_AMOUNT},
    {WORD_CHARGE_VOLUME, FILL_VOLUME, &FORM_VOLUME},
};

static bool report_second_fill(struct elaboration *e, const struct statement *statement, const struct fill *fill)
{
    struct diagnostic *said = diagnose(e->out, CODE_E207, statement->word_at, "the amount filled is given twice");
    said->note = "first given here";
    said->note_at = fill->at;
    return false;
}

/* What follows the amount: `at T` of a pressure, `at (T, p)` of a volume. */
static bool take_state_of(struct reading *reading, struct fill *fill)
{
    switch (fill->kind) {
    case FILL_PRESSURE:
        return take_temperature(reading, &fill->temperature, &fill->temperature_at);
    case FILL_VOLUME:
        return take_state(reading, "volume stated", &fill->temperature, &fill->pressure);
    case FILL_MASS:
    case FILL_RATIO:
    case FILL_DENSITY:
    case FILL_MOLES:
        break;
    }
    return true;
}

void read_fill(struct elaboration *e, const struct statement *statement, struct fill *fill)
{
    const struct vocabulary_row *word = vocabulary_find(BLOCK_CHARGE, statement->word);
    if (fill->given || fill->is_refused) {
        report_second_fill(e, statement, fill);
        return;
    }
    fill->at = statement->at;
    fill->is_refused = true;
    struct reading reading = read_items(e, statement);
    for (size_t i = 0; i < sizeof FILLS / sizeof *FILLS; i++) {
        if (FILLS[i].word == word->id) {
            fill->kind = FILLS[i].kind;
            if (forbid_block(e, statement) && take_quantity(&reading, FILLS[i].form, word->word, &fill->amount) &&
                take_state_of(&reading, fill) && finish_items(&reading)) {
                fill->given = true;
            }
        }
    }
}

struct charge_target {
    const struct expression *fluid, *vessel; /* as named */
    struct fill fill;
};

static void read_fluid(struct elaboration *e, const struct statement *statement, void *target)
{
    struct charge_target *into = target;
    into->fluid = read_one_name(e, statement, "the name of a component or mixture");
}

static void read_vessel(struct elaboration *e, const struct statement *statement, void *target)
{
    struct charge_target *into = target;
    into->vessel = read_one_name(e, statement, "the name of a vessel");
}

static void read_fill_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct charge_target *into = target;
    read_fill(e, statement, &into->fill);
}

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_CHARGE_FLUID, read_fluid),
    READ_ONCE(WORD_CHARGE_VESSEL, read_vessel),
    READ_ONCE(WORD_CHARGE_FILL, read_fill_row),
    READ_ONCE(WORD_CHARGE_MASS, read_fill_row),
    READ_ONCE(WORD_CHARGE_FILLING_RATIO, read_fill_row),
    READ_ONCE(WORD_CHARGE_DENSITY, read_fill_row),
    READ_ONCE(WORD_CHARGE_MOLES, read_fill_row),
    READ_ONCE(WORD_CHARGE_VOLUME, read_fill_row),
};
static const struct block_form CHARGE = BLOCK_FORM(BLOCK_CHARGE, ROWS);

static void report_lack(struct elaboration *e, const struct named *named, const char *what, const char *example)
{
    struct diagnostic *said =
        diagnose(e->out, CODE_E214, named->at, "charge '%s' has no %s", shortened(e, named->name), what);
    diagnostic_hint(e->out, said, "as in: %s", example);
}

/* Says what is missing, unless something went wrong before. */
static void check_complete(struct elaboration *e, const struct named *named, const struct charge_target *target)
{
    if (target->fluid == NULL) {
        report_lack(e, named, "fluid", "fluid carbon-dioxide");
    } else if (target->vessel == NULL) {
        report_lack(e, named, "vessel", "vessel fifty");
    } else if (!target->fill.given) {
        report_lack(e, named, "amount filled", "fill 150 barg at 15 degC, or mass 1.9 kg, or filling-ratio 0.68");
    }
}

const struct case_charge *make_charge(struct elaboration *e, const char *name, const struct case_fluid *fluid,
                                      const struct case_vessel *vessel, const struct fill *fill)
{
    struct case_charge *charge = arena_alloc(e->arena, 1, sizeof *charge);
    *charge = (struct case_charge){
        .name = name,
        .fluid = fluid,
        .vessel = vessel,
        .kind = fill->kind,
        .amount = fill->amount,
        .temperature = fill->temperature,
        .pressure = fill->pressure,
        .temperature_at = fill->temperature_at,
        .origin = origin_of(e, fill->at),
    };
    return charge;
}

const struct case_charge *build_charge(struct elaboration *e, struct named *named)
{
    if (named->state != NOT_BUILT) {
        return named->built;
    }
    const struct statement *block = named->items[0];
    const size_t before = trouble_so_far(e);
    struct charge_target target = {.fluid = NULL};
    if (require_block(e, block)) {
        read_block(e, &CHARGE, arena_format(e->arena, "charge %s", named->name), block, &target);
    }
    if (trouble_so_far(e) == before) {
        check_complete(e, named, &target);
    }
    const struct case_fluid *fluid = target.fluid == NULL ? NULL : fluid_of_name(e, target.fluid);
    const struct case_vessel *vessel = target.vessel == NULL ? NULL : vessel_of_name(e, target.vessel);
    mark_file_used(e, block->at);
    const bool is_whole = trouble_so_far(e) == before && fluid != NULL && vessel != NULL && target.fill.given;
    named->state = is_whole ? BUILT : FAILED;
    named->built = is_whole ? make_charge(e, named->name, fluid, vessel, &target.fill) : NULL;
    return named->built;
}

const struct case_charge *charge_of_name(struct elaboration *e, const struct expression *name)
{
    struct named *named = named_of_item(e, NAMES_CHARGE, name, "charge");
    return named == NULL ? NULL : build_charge(e, named);
}
