/* Equations: a published Helmholtz energy as rows of coefficients, read by a table of columns for each kind of term. */
#include "case/case_internal.h"

#include <string.h>

/* What a column may hold. */
enum column_range { ANY, NOT_NEGATIVE, POSITIVE };

struct column {
    const char *name;
    enum column_range range;
    size_t offset;
};

enum { COLUMNS_MOST = 8 };

struct term_kind {
    enum vocabulary_word word;
    int kind;
    size_t required; /* so many columns must be written, */
    size_t count;    /* so many may be */
    struct column columns[COLUMNS_MOST];
};

#define R(member, range)                                       \
    {                                                          \
#member, range, offsetof(struct residual_term, member) \
    }
#define N_T_D R(n, ANY), R(t, ANY), R(d, NOT_NEGATIVE)
#define BELL  R(eta, ANY), R(epsilon, ANY), R(beta, ANY), R(gamma, ANY)

static const struct term_kind RESIDUALS[] = {
    {WORD_RESIDUAL_POWER, RESIDUAL_POWER, 3, 4, {N_T_D, R(l, NOT_NEGATIVE)}},
    {WORD_RESIDUAL_EXPONENTIAL, RESIDUAL_EXPONENTIAL, 5, 5, {N_T_D, R(l, NOT_NEGATIVE), R(g, ANY)}},
    {WORD_RESIDUAL_GAUSSIAN, RESIDUAL_GAUSSIAN, 7, 7, {N_T_D, BELL}},
    {WORD_RESIDUAL_INVERSE_GAUSSIAN, RESIDUAL_INVERSE_GAUSSIAN, 8, 8, {N_T_D, BELL, R(b, POSITIVE)}},
    {WORD_RESIDUAL_DOUBLE_EXPONENTIAL,
     RESIDUAL_DOUBLE_EXPONENTIAL,
     7,
     7,
     {N_T_D, R(gd, ANY), R(ld, NOT_NEGATIVE), R(gt, ANY), R(lt, NOT_NEGATIVE)}},
    {WORD_RESIDUAL_SPECIAL_EXPONENTIAL, RESIDUAL_SPECIAL_EXPONENTIAL, 7, 7, {N_T_D, BELL}},
    {WORD_RESIDUAL_NONANALYTIC,
     RESIDUAL_NONANALYTIC,
     8,
     8,
     {R(n, ANY), R(a, POSITIVE), R(b, POSITIVE), R(beta, POSITIVE), R(A, ANY), R(B, NOT_NEGATIVE), R(C, NOT_NEGATIVE),
      R(E, NOT_NEGATIVE)}},
};

#define I(member, range)                                    \
    {                                                       \
#member, range, offsetof(struct ideal_term, member) \
    }

static const struct term_kind IDEALS[] = {
    {WORD_IDEAL_LEAD, IDEAL_LEAD, 2, 2, {I(a, ANY), I(b, ANY)}},
    {WORD_IDEAL_LOG_TAU, IDEAL_LOG_TAU, 1, 1, {I(a, ANY)}},
    {WORD_IDEAL_TAU_LOG_TAU, IDEAL_TAU_LOG_TAU, 1, 1, {I(a, ANY)}},
    {WORD_IDEAL_POWER, IDEAL_POWER, 2, 2, {I(a, ANY), I(b, ANY)}},
    {WORD_IDEAL_EINSTEIN, IDEAL_EINSTEIN, 2, 2, {I(a, ANY), I(b, POSITIVE)}},
    {WORD_IDEAL_EINSTEIN_GENERAL, IDEAL_EINSTEIN_GENERAL, 4, 4, {I(a, ANY), I(b, ANY), I(c, ANY), I(d, ANY)}},
    {WORD_IDEAL_LOG_SINH, IDEAL_LOG_SINH, 2, 2, {I(a, ANY), I(b, POSITIVE)}},
    {WORD_IDEAL_LOG_COSH, IDEAL_LOG_COSH, 2, 2, {I(a, ANY), I(b, ANY)}},
};

static const struct term_kind GUESS_TERM = {
    .required = 2, .count = 2, .columns = {{"n", ANY, 0}, {"t", ANY, sizeof(double)}}};

struct ideal_list {
    struct ideal_term *items;
    size_t count, capacity;
};

struct guess_list {
    double (*items)[2];
    size_t count, capacity;
};

struct equation {
    struct quantity gas_constant, molar_mass, reducing_temperature, reducing_density;
    struct quantity critical_temperature, critical_pressure, critical_density, valid_pressure;
    bool has_range;
    double smallest_temperature, largest_temperature;
    struct residual_list residual;
    struct ideal_list ideal;
    struct saturation_guess pressure_guess, liquid_guess, vapour_guess;
    const struct case_source *source;
};

static const struct term_kind *find_kind(const struct term_kind *kinds, size_t count, enum vocabulary_word word)
{
    for (size_t i = 0; i < count; i++) {
        if (kinds[i].word == word) {
            return &kinds[i];
        }
    }
    return NULL;
}

/* One coefficient; a plain number, which nearly all are, takes the short way. */
static bool read_coefficient(struct elaboration *e, const struct column *column, const struct expression *expression,
                             double *number)
{
    static const struct quantity_form forms[] = {
        [ANY] = {.reading = READ_NUMBER, .least = -1e30, .most = 1e30},
        [NOT_NEGATIVE] = {.reading = READ_NUMBER, .least = 0.0, .most = 1e30},
        [POSITIVE] = {.reading = READ_NUMBER, .least = 0.0, .is_least_open = true, .most = 1e30},
    };
    if (expression->kind == EXPRESSION_NUMBER && expression->unit == NULL && column->range == ANY) {
        *number = expression->number;
        return true;
    }
    return read_value(e, &forms[column->range], column->name, expression, number);
}

static void report_columns(struct elaboration *e, const struct term_kind *kind, struct location at, bool is_surplus)
{
    struct text list = {.arena = e->arena};
    for (size_t i = 0; i < kind->count; i++) {
        text_format(&list, " %s", kind->columns[i].name);
    }
    const char *numbers = kind->required == kind->count
                              ? arena_format(e->arena, "%zu", kind->count)
                              : arena_format(e->arena, "%zu or %zu", kind->required, kind->count);
    struct diagnostic *said = diagnose(e->out, CODE_E215, at, "a row of this kind has %s numbers%s", numbers,
                                       is_surplus ? ", this is one more" : "");
    diagnostic_hint(e->out, said, "its columns: term%s", list.bytes);
}

/* One `term` row into the struct at `into`, by the kind's columns. False after a message. */
static bool read_term(struct elaboration *e, const struct term_kind *kind, const struct statement *statement,
                      void *into)
{
    struct reading reading = read_items(e, statement);
    size_t count = 0;
    for (const struct item *item; count < kind->count && (item = take_item(&reading, ITEM_EXPRESSION)) != NULL;
         count++) {
        double number;
        if (!read_coefficient(e, &kind->columns[count], item->value, &number)) {
            return false;
        }
        memcpy((char *)into + kind->columns[count].offset, &number, sizeof number);
    }
    if (count < kind->required || reading.item != NULL) {
        report_columns(e, kind, reading.item == NULL ? statement->at : reading.item->at, reading.item != NULL);
        return false;
    }
    return true;
}

/* A block of terms at work: their kind, and a function that makes room for one more row. */
struct terms {
    const struct term_kind *kind;
    void *(*add)(struct elaboration *e, struct terms *terms);
    void *list;
};

/* A bad row makes the whole equation fail, so what it leaves behind does not matter. */
static void read_term_row(struct elaboration *e, const struct statement *statement, void *target)
{
    struct terms *terms = target;
    if (forbid_block(e, statement)) {
        read_term(e, terms->kind, statement, terms->add(e, terms));
    }
}

static const struct block_row TERM_ROWS[] = {READ_EACH(WORD_TERMS_TERM, read_term_row)};
static const struct block_form TERMS = BLOCK_FORM(BLOCK_TERMS, TERM_ROWS);

static void *add_residual(struct elaboration *e, struct terms *terms)
{
    struct residual_list *list = terms->list;
    struct residual_term *term = ARENA_APPEND(e->arena, list);
    term->kind = (enum residual_kind)terms->kind->kind;
    return term;
}

static void *add_ideal(struct elaboration *e, struct terms *terms)
{
    struct ideal_list *list = terms->list;
    struct ideal_term *term = ARENA_APPEND(e->arena, list);
    term->kind = (enum ideal_kind)terms->kind->kind;
    return term;
}

/* `residual KIND { term ... }` or `ideal KIND { ... }`. */
static void read_terms(struct elaboration *e, const struct statement *statement, enum vocabulary_block block,
                       struct terms terms, const struct term_kind *kinds, size_t kind_count)
{
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *kind = take_choice(&reading, block, "a kind of terms");
    if (kind == NULL || !finish_items(&reading) || !require_block(e, statement)) {
        return;
    }
    terms.kind = find_kind(kinds, kind_count, kind->id);
    if (terms.kind != NULL) {
        read_block(e, &TERMS, e->group, statement, &terms);
    }
}

void read_residual_terms(struct elaboration *e, const struct statement *statement, struct residual_list *list)
{
    read_terms(e, statement, BLOCK_RESIDUAL, (struct terms){.add = add_residual, .list = list}, RESIDUALS,
               sizeof RESIDUALS / sizeof *RESIDUALS);
}

static void read_residual(struct elaboration *e, const struct statement *statement, void *target)
{
    struct equation *equation = target;
    read_residual_terms(e, statement, &equation->residual);
}

static void read_ideal(struct elaboration *e, const struct statement *statement, void *target)
{
    struct equation *equation = target;
    read_terms(e, statement, BLOCK_IDEAL, (struct terms){.add = add_ideal, .list = &equation->ideal}, IDEALS,
               sizeof IDEALS / sizeof *IDEALS);
}

/* A guess block at work. */
struct guess {
    struct quantity temperature;
    const struct quantity_form *value_form;
    struct quantity value;
    struct guess_list terms;
};

static void read_reducing_value(struct elaboration *e, const struct statement *statement, void *target)
{
    struct guess *guess = target;
    struct reading reading = read_items(e, statement);
    if (take_quantity(&reading, guess->value_form, "reducing-value", &guess->value)) {
        finish_items(&reading);
    }
}

static void read_guess_term(struct elaboration *e, const struct statement *statement, void *target)
{
    struct guess *guess = target;
    struct guess_list *list = &guess->terms;
    read_term(e, &GUESS_TERM, statement, ARENA_APPEND(e->arena, list));
}

static const struct block_row GUESS_ROWS[] = {
    READ_QUANTITY(WORD_GUESS_REDUCING_TEMPERATURE, NULL, struct guess, temperature),
    READ_ONCE(WORD_GUESS_REDUCING_VALUE, read_reducing_value),
    READ_EACH(WORD_TERMS_TERM, read_guess_term),
};
static const struct block_form GUESS = BLOCK_FORM(BLOCK_GUESS, GUESS_ROWS);

static enum guess_form form_of(enum vocabulary_word word)
{
    return word == WORD_FORM_ONE_PLUS ? GUESS_ONE_PLUS : word == WORD_FORM_EXP ? GUESS_EXP : GUESS_EXP_TAU;
}

static struct saturation_guess *guess_of(struct equation *equation, enum vocabulary_word word)
{
    return word == WORD_GUESSED_SATURATION_PRESSURE ? &equation->pressure_guess
           : word == WORD_GUESSED_LIQUID_DENSITY    ? &equation->liquid_guess
                                                    : &equation->vapour_guess;
}

static void report_incomplete(struct elaboration *e, struct location at, const char *what, const char *lacks)
{
    diagnose(e->out, CODE_E216, at, "%s lacks its %s", what, lacks);
}

bool read_power_terms(struct elaboration *e, const struct statement *statement, const char *what,
                      const struct quantity_form *value_form, struct power_terms *out)
{
    struct guess guess = {.value_form = value_form};
    read_block(e, &GUESS, e->group, statement, &guess);
    if (!guess.temperature.given || !guess.value.given || guess.terms.count == 0) {
        report_incomplete(e, statement->at, what,
                          !guess.temperature.given ? "reducing-temperature"
                          : !guess.value.given     ? "reducing-value"
                                                   : "terms");
        return false;
    }
    *out = (struct power_terms){guess.temperature.value, guess.value.value, guess.terms.count,
                                (const double(*)[2])guess.terms.items};
    return true;
}

static void read_guess(struct elaboration *e, const struct statement *statement, void *target)
{
    struct equation *equation = target;
    struct reading reading = read_items(e, statement);
    const struct vocabulary_row *what = take_choice(&reading, BLOCK_GUESSED, "a quantity to guess");
    const struct vocabulary_row *form =
        what == NULL ? NULL : take_choice(&reading, BLOCK_FORM, "the form of the guess");
    struct power_terms terms;
    if (form == NULL || !finish_items(&reading) || !require_block(e, statement) ||
        !read_power_terms(e, statement, "the guess",
                          what->id == WORD_GUESSED_SATURATION_PRESSURE ? &FORM_PRESSURE : &FORM_MOLAR_DENSITY,
                          &terms)) {
        return;
    }
    *guess_of(equation, what->id) = (struct saturation_guess){
        .form = form_of(form->id),
        .reducing_temperature = terms.temperature,
        .reducing_value = terms.value,
        .count = terms.count,
        .terms = terms.terms,
    };
}

static void read_source(struct elaboration *e, const struct statement *statement, void *target)
{
    struct equation *equation = target;
    struct reading reading = read_items(e, statement);
    const struct expression *key = take_name(&reading);
    if (key == NULL) {
        report_missing(&reading, "the key of a source");
        return;
    }
    equation->source = source_of_name(e, key);
    finish_items(&reading);
}

bool read_temperature_range(struct elaboration *e, const struct statement *statement, double *least, double *most)
{
    struct reading reading = read_items(e, statement);
    const struct item *from = take_item(&reading, ITEM_FROM);
    const struct item *to = take_item(&reading, ITEM_TO);
    if (from == NULL || to == NULL) {
        report_missing(&reading, "a range, from a temperature to a temperature,");
        return false;
    }
    if (!read_value(e, &FORM_TEMPERATURE, "valid-temperature", from->value, least) ||
        !read_value(e, &FORM_TEMPERATURE, "valid-temperature", to->value, most) || !finish_items(&reading)) {
        return false;
    }
    if (!(*least < *most)) {
        diagnose(e->out, CODE_E209, statement->at, "valid-temperature: the range ends before it begins");
        return false;
    }
    return true;
}

static void read_valid_temperature(struct elaboration *e, const struct statement *statement, void *target)
{
    struct equation *equation = target;
    equation->has_range =
        read_temperature_range(e, statement, &equation->smallest_temperature, &equation->largest_temperature);
}

#define QUANTITY(word, member) READ_QUANTITY(WORD_EQUATION_##word, NULL, struct equation, member)

static const struct block_row ROWS[] = {
    READ_ONCE(WORD_EQUATION_SOURCE, read_source),
    QUANTITY(GAS_CONSTANT, gas_constant),
    QUANTITY(MOLAR_MASS, molar_mass),
    QUANTITY(REDUCING_TEMPERATURE, reducing_temperature),
    QUANTITY(REDUCING_DENSITY, reducing_density),
    QUANTITY(CRITICAL_TEMPERATURE, critical_temperature),
    QUANTITY(CRITICAL_PRESSURE, critical_pressure),
    QUANTITY(CRITICAL_DENSITY, critical_density),
    QUANTITY(VALID_PRESSURE, valid_pressure),
    READ_ONCE(WORD_EQUATION_VALID_TEMPERATURE, read_valid_temperature),
    READ_EACH(WORD_EQUATION_RESIDUAL, read_residual),
    READ_EACH(WORD_EQUATION_IDEAL, read_ideal),
    READ_EACH(WORD_EQUATION_GUESS, read_guess),
};
static const struct block_form EQUATION = BLOCK_FORM(BLOCK_EQUATION, ROWS);

/* What an equation cannot do without, in the order a reader would write it; NULL: complete. */
static const char *first_lack(const struct equation *equation)
{
    const struct {
        bool is_there;
        const char *word;
    } parts[] = {
        {equation->gas_constant.given, "gas-constant"},
        {equation->reducing_temperature.given, "reducing-temperature"},
        {equation->reducing_density.given, "reducing-density"},
        {equation->critical_temperature.given, "critical-temperature"},
        {equation->critical_pressure.given, "critical-pressure"},
        {equation->critical_density.given, "critical-density"},
        {equation->has_range, "valid-temperature"},
        {equation->valid_pressure.given, "valid-pressure"},
        {equation->residual.count != 0, "residual terms"},
    };
    for (size_t i = 0; i < sizeof parts / sizeof *parts; i++) {
        if (!parts[i].is_there) {
            return parts[i].word;
        }
    }
    return NULL;
}

static struct reference_spec spec_of(const struct equation *equation)
{
    return (struct reference_spec){
        .gas_constant = equation->gas_constant.value,
        .reducing_temperature = equation->reducing_temperature.value,
        .reducing_density = equation->reducing_density.value,
        .molar_mass = {.given = equation->molar_mass.given, .value = equation->molar_mass.value},
        .residual_count = equation->residual.count,
        .residual = equation->residual.items,
        .ideal_count = equation->ideal.count,
        .ideal = equation->ideal.items,
        .critical_temperature = equation->critical_temperature.value,
        .critical_pressure = equation->critical_pressure.value,
        .critical_density = equation->critical_density.value,
        .smallest_temperature = equation->smallest_temperature,
        .largest_temperature = equation->largest_temperature,
        .largest_pressure = equation->valid_pressure.value,
        .pressure_guess = equation->pressure_guess,
        .liquid_guess = equation->liquid_guess,
        .vapour_guess = equation->vapour_guess,
    };
}

bool build_equation(struct elaboration *e, struct named *named, struct reference_spec *spec,
                    const struct case_source **source)
{
    static const struct case_source unnamed = {"", "given in this deck, no source named", true};
    if (named->state == FAILED) {
        return false;
    }
    const struct statement *block = named->items[0];
    const size_t before = trouble_so_far(e);
    struct equation equation = {.has_range = false};
    if (!e->is_deferring) {
        mark_file_used(e, block->at);
    }
    if (require_block(e, block)) {
        read_block(e, &EQUATION, arena_format(e->arena, "equation %s", named->name), block, &equation);
    }
    const char *lack = first_lack(&equation);
    if (lack != NULL && trouble_so_far(e) == before) {
        report_incomplete(e, block->at, arena_format(e->arena, "the equation of %s", shortened(e, named->name)), lack);
    }
    named->state = trouble_so_far(e) == before ? BUILT : FAILED;
    *spec = spec_of(&equation);
    *source = equation.source == NULL ? &unnamed : equation.source;
    return named->state == BUILT;
}
