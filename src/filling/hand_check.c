/* Hand checks: named numbers become lines "symbol = formula = the same with numbers = value unit   meaning". */
#include "filling/hand_check.h"

#include "base/text.h"

#include <ctype.h>
#include <math.h>
#include <string.h>

/* Columns of a line, and where the meaning of a short line stands. */
enum { LINE_COLUMNS = 88, MEANING_COLUMN = 40, NUMBER_DIGITS = 10, ALL_DIGITS = 15 };

/* ---- writing numbers and formulas ------------------------------------------------------------------------------ */

static const char *number_text(struct arena *arena, const struct explained_value *value)
{
    return arena_format(arena, "%.*g", value->is_cancelling ? ALL_DIGITS : NUMBER_DIGITS, value->value);
}

/* Value `symbol` among the first `count`, the last of that name; NULL for a function's name. */
static const struct explained_value *find(const struct explanation *numbers, size_t count, const char *symbol,
                                          size_t length)
{
    for (size_t i = count; i-- > 0;) {
        const struct explained_value *value = &numbers->values[i];
        if (strlen(value->symbol) == length && memcmp(value->symbol, symbol, length) == 0) {
            return value;
        }
    }
    return NULL;
}

static bool is_name_start(char c)
{
    return isalpha((unsigned char)c) != 0;
}

static bool is_name_part(char c)
{
    return isalnum((unsigned char)c) != 0 || c == '_';
}

/* A negative number keeps its sign in parentheses, unless it stands alone in a function's. */
static void add_number(struct text *text, const char *number, char after)
{
    const bool stands_alone = text->length > 0 && text->bytes[text->length - 1] == '(' && after == ')';
    text_format(text, number[0] == '-' && !stands_alone ? "(%s)" : "%s", number);
}

/* The formula of value `index` with every symbol replaced by its number. Every symbol names an earlier value. */
static const char *with_numbers(struct arena *arena, const struct explanation *numbers, size_t index)
{
    struct text text = {.arena = arena};
    const char *at = numbers->values[index].formula;
    while (*at != '\0') {
        size_t length = 1;
        if (is_name_start(*at)) {
            while (is_name_part(at[length])) {
                length++;
            }
            const struct explained_value *value = find(numbers, index, at, length);
            if (value != NULL) {
                add_number(&text, number_text(arena, value), at[length]);
                at += length;
                continue;
            }
        }
        text_add(&text, at, length);
        at += length;
    }
    return text.bytes;
}

/* ---- laying out lines ------------------------------------------------------------------------------------------ */

/* One line, or several broken at blanks with the rest indented by `indent` columns. */
static void add_wrapped(const struct sheet_run *run, struct hand_check *check, const char *line, int indent)
{
    size_t length = strlen(line);
    int margin = 0;
    while (length + (size_t)margin > LINE_COLUMNS) {
        size_t cut = LINE_COLUMNS - (size_t)margin;
        while (cut > (size_t)indent && line[cut] != ' ') {
            cut--;
        }
        if (cut <= (size_t)indent) {
            break;
        }
        hand_check_line(run->result, check, "%*s%.*s", margin, "", (int)cut, line);
        line += cut + 1;
        length -= cut + 1;
        margin = indent;
    }
    hand_check_line(run->result, check, "%*s%s", margin, "", line);
}

static const char *value_with_unit(struct arena *arena, const struct explained_value *value)
{
    const char *number = number_text(arena, value);
    return strcmp(value->unit, "1") == 0 ? number : arena_format(arena, "%s %s", number, value->unit);
}

static const char *with_meaning(struct arena *arena, const char *line, const char *meaning)
{
    if (*meaning == '\0') {
        return line;
    }
    const int gap = MEANING_COLUMN - (int)strlen(line);
    return arena_format(arena, "%s%*s%s", line, gap > 3 ? gap : 3, "", meaning);
}

static void add_given(const struct sheet_run *run, struct hand_check *check, const struct explained_value *value)
{
    struct arena *arena = run->arena;
    const char *line = arena_format(arena, "%s = %s", value->symbol, value_with_unit(arena, value));
    const char *meaning = value->meaning;
    if (value->terms != 0) {
        meaning = arena_format(arena, "%zu %s", value->terms, value->meaning);
    }
    add_wrapped(run, check, with_meaning(arena, line, meaning), 2);
}

static void add_worked(const struct sheet_run *run, struct hand_check *check, const struct explanation *numbers,
                       size_t index)
{
    struct arena *arena = run->arena;
    const struct explained_value *value = &numbers->values[index];
    const char *substituted = with_numbers(arena, numbers, index);
    const char *result = value_with_unit(arena, value);
    const char *chain = arena_format(arena, "%s = %s = %s = %s", value->symbol, value->formula, substituted, result);
    const char *line = with_meaning(arena, chain, value->meaning);
    if (strlen(line) <= LINE_COLUMNS) {
        hand_check_line(run->result, check, "%s", line);
        return;
    }
    const int indent = (int)strlen(value->symbol);
    const char *opening = arena_format(arena, "%s = %s", value->symbol, value->formula);
    add_wrapped(run, check, with_meaning(arena, opening, value->meaning), indent + 3);
    add_wrapped(run, check, arena_format(arena, "%*s = %s", indent, "", substituted), indent + 3);
    add_wrapped(run, check, arena_format(arena, "%*s = %s", indent, "", result), indent + 3);
}

/* Whether `before` already shows this value. */
static bool is_shown(const struct explanation *before, const struct explained_value *value)
{
    const struct explained_value *known =
        before == NULL ? NULL : find(before, before->count, value->symbol, strlen(value->symbol));
    return known != NULL && fabs(known->value - value->value) <= 0.0;
}

void hand_check_further_numbers(const struct sheet_run *run, struct hand_check *check,
                                const struct explanation *numbers, const struct explanation *before)
{
    for (size_t i = 0; i < numbers->count; i++) {
        const struct explained_value *value = &numbers->values[i];
        if (is_shown(before, value)) {
            continue;
        }
        if (value->formula == NULL) {
            add_given(run, check, value);
        } else {
            add_worked(run, check, numbers, i);
        }
    }
}

void hand_check_numbers(const struct sheet_run *run, struct hand_check *check, const struct explanation *numbers)
{
    hand_check_further_numbers(run, check, numbers, NULL);
}

void hand_check_put(struct explanation *numbers, const char *symbol, const char *meaning, const char *formula,
                    const char *unit, double value)
{
    explanation_add(numbers, (struct explained_value){symbol, meaning, formula, unit, 0, value, false});
}

void hand_check_put_solid(struct explanation *numbers, const struct solid_state *solid)
{
    const bool melts = solid->line == SOLID_MELTS;
    hand_check_put(numbers, melts ? "p_melt" : "p_sub", melts ? "melting pressure" : "sublimation pressure", NULL, "Pa",
                   solid->line_pressure);
    hand_check_put(numbers, melts ? "phi_melt" : "phi_sub",
                   melts ? "of its liquid at p_melt" : "of its vapour at p_sub", NULL, "1", exp(solid->ln_phi));
    hand_check_put(numbers, "v", "molar volume of the solid", NULL, "m3/mol", solid->molar_volume);
    hand_check_put(numbers, "poynting", "Poynting factor",
                   melts ? "exp(v * (p - p_melt) / (R * T))" : "exp(v * (p - p_sub) / (R * T))", "1", solid->poynting);
    hand_check_put(numbers, "f_solid", "fugacity of the solid",
                   melts ? "p_melt * phi_melt * poynting" : "p_sub * phi_sub * poynting", "Pa",
                   exp(solid->ln_fugacity));
}

/* ---- the checks ------------------------------------------------------------------------------------------------ */

void hand_check_pressure_shown(const struct sheet_run *run, struct hand_check *check, double pressure)
{
    hand_check_line(run->result, check, "p is %s, %s", shown_text(run, look_pressure(run), pressure),
                    shown_text(run, look_gauge(run), pressure));
}

void hand_check_amount(const struct sheet_run *run, struct hand_check *check, double mass)
{
    const double M = run->sheet->fluid->molar_mass, V = run->sheet->vessel->water_capacity.value;
    struct explanation numbers = {.count = 0};
    hand_check_put(&numbers, "m", "mass of gas", NULL, "kg", mass);
    hand_check_put(&numbers, "M", "molar mass", NULL, "kg/mol", M);
    hand_check_put(&numbers, "V", "water capacity", NULL, "m3", V);
    hand_check_put(&numbers, "n", "amount of substance", "m / M", "mol", mass / M);
    hand_check_put(&numbers, "v", "molar volume of the contents", "V / n", "m3/mol", V / (mass / M));
    hand_check_numbers(run, check, &numbers);
}

/* The explanation of one phase, with the words that stand for it when there is none. */
static bool explain(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                    double temperature, double molar_volume, const char *phase, bool with_fugacity,
                    struct explanation *numbers)
{
    const double one = 1.0;
    hand_check_line(run->result, check, "%s by %s:", phase, method->name);
    enum answer answer = fluid_set_t(method->at_t, method->fluid, temperature);
    if (answer == ANSWER_OK) {
        answer = fluid_explain(method->at_t, molar_volume, &one, with_fugacity, numbers);
    }
    if (answer != ANSWER_OK) {
        hand_check_line(run->result, check, "  %s does not set out its numbers for this state", method->name);
    }
    return answer == ANSWER_OK;
}

void hand_check_pressure(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                         double temperature, double molar_volume, const char *phase, bool with_fugacity)
{
    struct explanation numbers = {.count = 0};
    if (!explain(run, check, method, temperature, molar_volume, phase, with_fugacity, &numbers)) {
        return;
    }
    if (with_fugacity) {
        const double p = find(&numbers, numbers.count, "p", 1)->value;
        const double ln_phi = numbers.values[numbers.count - 1].value;
        hand_check_put(&numbers, "f", "fugacity", "p * exp(ln_phi)", "Pa", p * exp(ln_phi));
    }
    hand_check_numbers(run, check, &numbers);
    hand_check_pressure_shown(run, check, find(&numbers, numbers.count, "p", 1)->value);
}

void hand_check_saturation(const struct sheet_run *run, struct hand_check *check, struct method_run *method,
                           const struct saturation *saturation)
{
    struct explanation vapour = {.count = 0}, liquid = {.count = 0}, both = {.count = 0};
    const double p = saturation->pressure, T = saturation->temperature;
    if (!explain(run, check, method, T, saturation->vapour_volume, "vapour", true, &vapour)) {
        return;
    }
    hand_check_numbers(run, check, &vapour);
    if (explain(run, check, method, T, saturation->liquid_volume, "liquid", true, &liquid)) {
        hand_check_further_numbers(run, check, &liquid, &vapour);
    }
    hand_check_line(run->result, check, "equal fugacity of both:");
    hand_check_put(&both, "p", "saturation pressure", NULL, "Pa", p);
    hand_check_put(&both, "ln_phi_V", "of the vapour", NULL, "1", saturation->ln_phi_vapour);
    hand_check_put(&both, "ln_phi_L", "of the liquid", NULL, "1", saturation->ln_phi_liquid);
    hand_check_put(&both, "f_V", "fugacity in the vapour", "p * exp(ln_phi_V)", "Pa",
                   p * exp(saturation->ln_phi_vapour));
    hand_check_put(&both, "f_L", "fugacity in the liquid", "p * exp(ln_phi_L)", "Pa",
                   p * exp(saturation->ln_phi_liquid));
    hand_check_numbers(run, check, &both);
    hand_check_pressure_shown(run, check, p);
}

/* The balance of volumes: n_V v_V + n_L v_L = V with n_V + n_L = n. */
static void add_lever_rule(const struct sheet_run *run, struct hand_check *check, double mass,
                           const struct contents *contents)
{
    const double n = mass / run->sheet->fluid->molar_mass, V = run->sheet->vessel->water_capacity.value;
    const struct contents_phase *vapour = &contents->phases[0], *liquid = &contents->phases[1];
    const double n_L = liquid->amount, v_L = liquid->molar_volume;
    struct explanation numbers = {.count = 0};
    hand_check_line(run->result, check, "balance of volumes, n_V v_V + n_L v_L = V with n_V + n_L = n:");
    hand_check_put(&numbers, "n", "amount of substance", NULL, "mol", n);
    hand_check_put(&numbers, "V", "water capacity", NULL, "m3", V);
    hand_check_put(&numbers, "v_V", "molar volume of the vapour", NULL, "m3/mol", vapour->molar_volume);
    hand_check_put(&numbers, "v_L", "molar volume of the liquid", NULL, "m3/mol", v_L);
    hand_check_put(&numbers, "n_L", "amount of liquid", "(n * v_V - V) / (v_V - v_L)", "mol", n_L);
    hand_check_put(&numbers, "x_L", "liquid's part of the capacity", "n_L * v_L / V", "1", n_L * v_L / V);
    hand_check_numbers(run, check, &numbers);
}

void hand_check_contents(const struct sheet_run *run, struct hand_check *check, struct method_run *method, double mass,
                         const struct contents *contents)
{
    if (method->mixture != NULL) {
        hand_check_mixture_contents(run, check, method, mass, contents->temperature);
        return;
    }
    if (contents->state == VESSEL_TWO_PHASE) {
        hand_check_saturation(run, check, method, &contents->saturation);
        add_lever_rule(run, check, mass, contents);
        return;
    }
    const double n = mass / run->sheet->fluid->molar_mass, V = run->sheet->vessel->water_capacity.value;
    hand_check_pressure(run, check, method, contents->temperature, V / n, "contents", false);
}

void hand_check_ratio(const struct sheet_run *run, struct hand_check *check, double limiting_mass, double round_to)
{
    const double V = run->sheet->vessel->water_capacity.value;
    const double ratio = limiting_mass / (WATER_DENSITY_15C * V);
    struct explanation numbers = {.count = 0};
    hand_check_put(&numbers, "m", "largest mass", NULL, "kg", limiting_mass);
    hand_check_put(&numbers, "rho_w", "density of water at 15 degC", NULL, "kg/m3", WATER_DENSITY_15C);
    hand_check_put(&numbers, "V", "water capacity", NULL, "m3", V);
    hand_check_put(&numbers, "r", "filling ratio", "m / (rho_w * V)", "1", ratio);
    if (round_to > 0.0) {
        const double rounded = ratio_rounded_down(ratio, round_to);
        hand_check_put(&numbers, "r_d", arena_format(run->arena, "r rounded down to a multiple of %g", round_to), NULL,
                       "1", rounded);
        hand_check_put(&numbers, "m_d", "mass of the rounded ratio", "r_d * rho_w * V", "kg",
                       rounded * WATER_DENSITY_15C * V);
    }
    hand_check_numbers(run, check, &numbers);
}

/* Pressures of a check are compared to this: far below any gauge, and so that the printed digits give the margin. */
#define SHOWN_PRESSURE_PLACE 1e-2 /* Pa */

void hand_check_gauge(const struct sheet_run *run, struct hand_check *check, double pressure, double gauge_zero,
                      double bound)
{
    const double p = round(pressure / SHOWN_PRESSURE_PLACE) * SHOWN_PRESSURE_PLACE;
    struct explanation numbers = {.count = 0};
    hand_check_put(&numbers, "p", "pressure, absolute", NULL, "Pa", p);
    hand_check_put(&numbers, "p_0", "zero of the gauge", NULL, "Pa", gauge_zero);
    hand_check_put(&numbers, "p_g", "pressure, gauge", "p - p_0", "Pa", p - gauge_zero);
    hand_check_put(&numbers, "p_r", "bound, gauge", NULL, "Pa", bound);
    hand_check_put(&numbers, "margin", "", "p_r - p_g", "Pa", bound - (p - gauge_zero));
    hand_check_numbers(run, check, &numbers);
}
