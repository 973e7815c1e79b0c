/* Fractions of volume at a stated state, turned into amounts by real volumes of the gases. */
#include "filling/mixture_basis.h"

#include "filling/solve.h"
#include "support/result_reading.h"
#include "support/small_mixture.h"

static const double SHARES[] = {0.2, 0.7, 0.1, 0.0};

static int set_up(void **state)
{
    static struct small_mixture mixture;
    memset(&mixture, 0, sizeof mixture);
    small_mixture_set_up(&mixture, SHEET_FUGACITY, SHARES);
    mixture.fluid.basis = BASIS_VOLUME;
    mixture.fluid.has_state = true;
    mixture.fluid.temperature = 288.15;
    mixture.fluid.pressure = 1e5;
    *state = &mixture;
    return 0;
}

static int tear_down(void **state)
{
    small_mixture_tear_down(*state);
    return 0;
}

static const struct mixture_basis *basis_at(struct small_mixture *mixture, double pressure, const char *method)
{
    mixture->fluid.pressure = pressure;
    return mixture_basis_create(&mixture->fluid, method, mixture->small.arena);
}

static void equal_volumes_of_ideal_gases_are_equal_amounts(void **state)
{
    const struct mixture_basis *basis = basis_at(*state, 1e5, "ideal-gas");
    assert_non_null(basis->fluid);
    assert_false(basis->fluid->has_state);
    for (size_t i = 0; i < SMALL_MIXTURE_COUNT; i++) {
        assert_near(basis->fluid->fractions[i], SHARES[i], 4e-16, "Avogadro's law");
    }
    assert_close(basis->molar_volumes[NITROGEN], 8.31446261815324 * 288.15 / 1e5, 4e-16, "R T / p, closed form");
}

/* Largest roots of the cubic of Peng and Robinson (1976), by polynomial roots at 40 digits with mpmath, and from them
 * x_i = (phi_i / v_i) / sum(phi / v). */
static void amounts_follow_the_real_volumes_of_the_gases(void **state)
{
    static const struct {
        double pressure, volumes[3], fractions[3], molar_mass;
    } cases[] = {
        {1e5,
         {0.02322678224312019, 0.02394467045320774, 0.02396454434783029},
         {0.2049317535145477, 0.6957568399238221, 0.0993114065616302},
         0.0316018545624519},
        {3e5,
         {0.007213304383116751, 0.007972771455922666, 0.007992508787988612},
         {0.2165508760671461, 0.6857296578091251, 0.09771946612372888},
         0.03199307810076215},
    };
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        const struct mixture_basis *basis = basis_at(*state, cases[k].pressure, "peng-robinson");
        assert_non_null(basis->fluid);
        for (size_t i = 0; i < 3; i++) {
            assert_close(basis->molar_volumes[i], cases[k].volumes[i], 1e-12, "independent evaluation, above");
            assert_close(basis->fluid->fractions[i], cases[k].fractions[i], 1e-12, "independent evaluation, above");
        }
        assert_close(basis->fluid->molar_mass, cases[k].molar_mass, 1e-12, "independent evaluation, above");
    }
}

static void what_has_no_share_needs_no_volume(void **state)
{
    struct small_mixture *mixture = *state;
    mixture->pure[ARGON].critical_temperature.given = false;
    const struct mixture_basis *basis = basis_at(mixture, 1e5, "peng-robinson");
    assert_non_null(basis->fluid);
    assert_near(basis->fluid->fractions[ARGON], 0.0, 0.0, "no share");
}

/* n-butane boils at 15 degC under 1.77 bar: Buecker and Wagner 2006, from memory. */
static void a_liquid_is_known_from_a_gas(void **state)
{
    assert_false(basis_at(*state, 1e5, "peng-robinson")->is_liquid[N_BUTANE]);
    const struct mixture_basis *basis = basis_at(*state, 3e5, "peng-robinson");
    assert_true(basis->is_liquid[N_BUTANE]);
    assert_false(basis->is_liquid[NITROGEN]);
}

/* At 20 bar the cubic has one root for n-butane, 0.0939 L/mol, by the same independent evaluation: a liquid. */
static void where_no_gas_is_there_is_no_amount(void **state)
{
    const struct mixture_basis *basis = basis_at(*state, 20e5, "peng-robinson");
    assert_null(basis->fluid);
    assert_int_equal(basis->without, N_BUTANE);
}

/* ---- in a case --------------------------------------------------------------------------------------------------- */

static const double TEMPERATURES[] = {300.0};
static const double PRESSURES[] = {1e5};
static const char *const BY_PENG_ROBINSON[] = {"peng-robinson"};

static const struct result *solve(struct small_mixture *mixture, double pressure)
{
    mixture->fluid.pressure = pressure;
    mixture->small.sheet.charge = NULL;
    mixture->small.sheet.methods =
        (struct case_methods){.count = 1, .names = BY_PENG_ROBINSON, .may_govern = 1, .reason = "named here"};
    mixture->small.sheet.temperatures = (struct case_sweep){.given = true, .count = 1, .values = TEMPERATURES};
    mixture->small.sheet.pressures = (struct case_sweep){.given = true, .count = 1, .values = PRESSURES};
    return filling_solve(&mixture->small.tree, "0.0.0", mixture->small.arena);
}

static const struct table *first_table(const struct result *result)
{
    for (const struct sheet_part *part = result->first_sheet->first_part; part != NULL; part = part->next) {
        if (part->kind == PART_TABLE) {
            return part->table;
        }
    }
    return NULL;
}

static void a_sheet_tells_both_fractions_before_it_uses_one(void **state)
{
    const struct result *result = solve(*state, 1e5);
    const struct table *table = first_table(result);
    assert_non_null(table);
    assert_string_equal(table->method, "peng-robinson");
    assert_int_equal(table->row_count, SMALL_MIXTURE_COUNT);
    assert_close(result_cell(table, N_BUTANE, "volume-fraction")->number, 0.2, 4e-16, "as given");
    assert_close(result_cell(table, N_BUTANE, "mole-fraction")->number, 0.2049317535145477, 1e-12,
                 "independent evaluation, above");
    assert_close(result_cell(table, N_BUTANE, "molar-volume")->number, 0.02322678224312019, 1e-12,
                 "independent evaluation, above");
    assert_int_equal(result_cell(table, ARGON, "molar-volume")->kind, CELL_EMPTY);
    assert_int_equal(result_warnings(result, CODE_W308), 0);
    assert_false(result->is_undecided);
}

static void a_sheet_warns_of_volumes_that_are_not_of_gases(void **state)
{
    const struct result *result = solve(*state, 3e5);
    assert_int_equal(result_warnings(result, CODE_W308), 1);
    assert_false(result->is_undecided);
}

static void a_sheet_without_amounts_is_undecided(void **state)
{
    const struct result *result = solve(*state, 20e5);
    assert_int_equal(result_warnings(result, CODE_W309), 1);
    assert_true(result->is_undecided);
    assert_true(result_has_note(result->first_sheet, "no gas of n-butane"));
    assert_null(first_table(result));
    assert_int_equal(result->methods.count, 0);
}

static void a_fluid_is_turned_into_amounts_once_for_all_sheets(void **state)
{
    struct small_mixture *mixture = *state;
    struct case_sheet sheets[2];
    solve(mixture, 1e5);
    sheets[0] = sheets[1] = mixture->small.sheet;
    mixture->small.tree.sheets = sheets;
    mixture->small.tree.sheet_count = 2;
    const struct result *result = filling_solve(&mixture->small.tree, "0.0.0", mixture->small.arena);
    assert_int_equal(result->methods.count, 1);
    assert_int_equal(result->sheet_count, 2);
}

#define TEST(name) cmocka_unit_test_setup_teardown(name, set_up, tear_down)

int main(void)
{
    const struct CMUnitTest tests[] = {
        TEST(equal_volumes_of_ideal_gases_are_equal_amounts),
        TEST(amounts_follow_the_real_volumes_of_the_gases),
        TEST(what_has_no_share_needs_no_volume),
        TEST(a_liquid_is_known_from_a_gas),
        TEST(where_no_gas_is_there_is_no_amount),
        TEST(a_sheet_tells_both_fractions_before_it_uses_one),
        TEST(a_sheet_warns_of_volumes_that_are_not_of_gases),
        TEST(a_sheet_without_amounts_is_undecided),
        TEST(a_fluid_is_turned_into_amounts_once_for_all_sheets),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
