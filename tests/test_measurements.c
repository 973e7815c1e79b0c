/* The default method for mixtures beside published measurements: Peng-Robinson 1978 with the library's groups and
 * shifts.
 *
 * Nothing is fitted here. A bound says how far the method is known to part from measurements of that kind, as a mean
 * and at worst; its reason stands beside it. Each test prints what it found. */
#include "equilibrium/mixture_vessel.h"
#include "support/check.h"
#include "support/measured_mixture.h"

#include <math.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

static const char DEFAULT_METHOD[] = "peng-robinson-1978";

struct bound {
    double mean, worst;
};

static void print_heading(const char *what)
{
    print_message("%s\n%-10s %-37s %6s %4s %9s %9s %9s\n", what, "method", "system", "points", "none", "mean |d|",
                  "mean d", "worst |d|");
}

static void print_deviations(const char *method, const char *system, const struct deviations *found)
{
    print_message("%-10s %-37s %6zu %4zu %9.4f %+9.4f %9.4f\n", method, system, found->points, found->missing,
                  deviations_mean(found), found->sum_of_signed / (double)found->points, found->worst);
}

static void assert_within(const struct deviations *found, struct bound bound, const char *system, const char *reason)
{
    if (!(deviations_mean(found) <= bound.mean) || !(found->worst <= bound.worst)) {
        fail_msg("%s: mean %g and worst %g exceed %g and %g (%s)", system, deviations_mean(found), found->worst,
                 bound.mean, bound.worst, reason);
    }
}

/* ---- compositions of liquid and vapour -----------------------------------------------------------------------------
 */

enum { FIRST, SECOND, TEMPERATURE, PRESSURE, X1, Y1, NOTE };

/* The authors of E-PPR78 report about 0.02 in x and 0.01 to 0.02 in y, or 7 to 8 % of the compositions, over all their
 * systems (Xu, Lasala, Privat and Jaubert, Int. J. Greenhouse Gas Control 56 (2017) 126, and the papers it collects;
 * figures from memory). A single series may part by more.
 *
 * For the pairs with nitrogen, oxygen, argon and carbon monoxide a second program of its own, by successive
 * substitution, found the same means and worsts from the same groups to 0.001; and one constant kij for all
 * temperatures, whichever, brings the mean of x of oxygen and argon in carbon dioxide closer by less than that. */
static const char HYDROCARBONS[] = "E-PPR78 papers: about 0.02 in x, 0.01 in y (from memory); worst near critical";
static const char PENTANE[] = "its series at 313 K parts by 0.07 from a reference equation too";
static const char BRANCHED[] = "the groups' kij is 0.02 to 0.04 below the constant that suits these later series";
static const char NITROGEN[] =
    "E-PPR78 papers: nitrogen in alkanes a tenth of x and more (from memory); the groups' kij "
    "of pentane falls with temperature, these later series ask for about 0.05 throughout";
static const char GASES[] =
    "one-fluid mixing exaggerates the critical pressures of these by up to a tenth: with any one "
    "kij compositions within some 20 bar of it part by 0.1 and more (known of all such cubics)";

struct binary {
    const char *first, *second;
    size_t rows;
    struct bound x, y, p; /* mole fractions; bubble pressure in per cent */
    const char *reason;
};

/* No y bound where no vapour was measured. */
static const struct binary BINARIES[] = {
    {"methane", "ethane", 24, {0.02, 0.05}, {0.01, 0.03}, {4, 10}, HYDROCARBONS},
    {"methane", "propane", 15, {0.02, 0.05}, {0.01, 0.03}, {4, 10}, HYDROCARBONS},
    {"methane", "n-butane", 15, {0.025, 0.08}, {0.01, 0.03}, {5, 10}, HYDROCARBONS},
    {"methane", "isobutane", 15, {0.02, 0.05}, {0, 0}, {4, 10}, HYDROCARBONS},
    {"methane", "n-pentane", 10, {0.04, 0.10}, {0, 0}, {10, 25}, PENTANE},
    {"carbon-dioxide", "propane", 104, {0.02, 0.06}, {0, 0}, {4, 10}, HYDROCARBONS},
    {"carbon-dioxide", "isobutane", 19, {0.04, 0.10}, {0, 0}, {8, 15}, BRANCHED},
    {"nitrogen", "ethane", 11, {0.02, 0.06}, {0, 0}, {5, 10}, NITROGEN},
    {"nitrogen", "n-pentane", 47, {0.04, 0.08}, {0, 0}, {14, 25}, NITROGEN},
    {"nitrogen", "carbon-dioxide", 38, {0.02, 0.06}, {0.03, 0.15}, {5, 15}, GASES},
    {"oxygen", "carbon-dioxide", 141, {0.02, 0.12}, {0.05, 0.18}, {7, 25}, GASES},
    {"argon", "carbon-dioxide", 155, {0.02, 0.12}, {0.05, 0.18}, {7, 25}, GASES},
    {"carbon-monoxide", "carbon-dioxide", 85, {0.03, 0.22}, {0, 0}, {8, 30}, GASES},
    {"methane", "carbon-dioxide", 57, {0.02, 0.08}, {0.01, 0.03}, {4, 10}, HYDROCARBONS},
};

struct binary_deviations {
    size_t rows;
    struct deviations x, y, p;
};

static void compare_row(const struct measured_mixture *mixture, const struct measured_row *row,
                        struct binary_deviations *out)
{
    const double T = measured_number(row, TEMPERATURE), p = 1e5 * measured_number(row, PRESSURE);
    const double x = measured_number(row, X1), y = measured_number(row, Y1);
    const double near = isnan(x) ? y : isnan(y) ? x : 0.5 * (x + y);
    double x_found = (double)NAN, y_found = (double)NAN, p_found = (double)NAN;
    const bool is_two = measured_tie_line(mixture, T, p, near, &x_found, &y_found);
    deviations_of(&out->x, !isnan(x), is_two, x_found - x);
    deviations_of(&out->y, !isnan(y), is_two, y_found - y);
    if (!isnan(x)) {
        const double z[] = {x, 1.0 - x};
        const bool has_bubble = measured_boundary_pressure(mixture, BOUNDARY_BUBBLE, T, z, p, &p_found);
        deviations_of(&out->p, true, has_bubble, 100.0 * (p_found / p - 1.0));
    }
    out->rows++;
}

/* All trusted rows of one pair of substances. */
static struct binary_deviations compare_binary(const struct measured_table *table, const char *first,
                                               const char *second, const struct measured_mixture *mixture)
{
    struct binary_deviations out = {0};
    for (size_t i = 0; i < table->count; i++) {
        const struct measured_row *row = &table->rows[i];
        if (strcmp(row->field[FIRST], first) == 0 && strcmp(row->field[SECOND], second) == 0 &&
            strcmp(row->field[NOTE], "doubtful") != 0) {
            compare_row(mixture, row, &out);
        }
    }
    return out;
}

static const char *system_name(const char *first, const char *second, const char *kind, struct arena *arena)
{
    return arena_format(arena, "%s + %s%s%s", first, second, *kind != '\0' ? ": " : "", kind);
}

static void print_binary(const char *method, const struct binary *binary, const struct binary_deviations *found,
                         struct arena *arena)
{
    print_deviations(method, system_name(binary->first, binary->second, "x", arena), &found->x);
    if (found->y.points > 0) {
        print_deviations(method, system_name(binary->first, binary->second, "y", arena), &found->y);
    }
    print_deviations(method, system_name(binary->first, binary->second, "p, %", arena), &found->p);
}

static void groups_give_the_compositions_of_two_phases_as_well_as_published(void **state)
{
    (void)state;
    struct arena *tables = arena_create(NULL);
    const struct measured_table table = measured_table_read("binary-equilibrium.csv", tables);
    print_heading("x and y of binary mixtures in two phases (mole fraction), bubble pressure (per cent)");
    for (size_t k = 0; k < COUNT(BINARIES); k++) {
        struct arena *arena = arena_create(NULL);
        const struct binary *binary = &BINARIES[k];
        const char *const names[] = {binary->first, binary->second};
        const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, names, 2, arena);
        const struct binary_deviations found = compare_binary(&table, names[0], names[1], &mixture);
        print_binary("groups", binary, &found, arena);
        assert_int_equal(found.rows, binary->rows);
        assert_int_equal(measured_pair_origin(&mixture), PAIR_FROM_GROUPS);
        /* A row of methane and carbon dioxide lies within a kelvin of the critical point. */
        assert_in_range(found.x.missing + found.y.missing, 0, 1);
        assert_int_equal(found.p.missing, 0);
        assert_within(&found.x, binary->x, arena_format(arena, "%s + %s, x", names[0], names[1]), binary->reason);
        assert_within(&found.p, binary->p, arena_format(arena, "%s + %s, p", names[0], names[1]), binary->reason);
        if (found.y.points > 0) {
            assert_within(&found.y, binary->y, arena_format(arena, "%s + %s, y", names[0], names[1]), binary->reason);
        }
        arena_free(arena);
    }
    arena_free(tables);
}

/* The constants of Knapp et al. 1982 (from memory) were fitted to phase equilibria of just such pairs, and are said to
 * leave 0.01 to 0.03 in x; most of the series here are later. */
static void constants_give_the_compositions_of_liquids_nearly_as_well(void **state)
{
    (void)state;
    struct arena *tables = arena_create(NULL);
    const struct measured_table table = measured_table_read("binary-equilibrium.csv", tables);
    size_t with_constants = 0;
    print_heading("the same with Peng-Robinson 1976 and the library's constants");
    for (size_t k = 0; k < COUNT(BINARIES); k++) {
        struct arena *arena = arena_create(NULL);
        const struct binary *binary = &BINARIES[k];
        const char *const names[] = {binary->first, binary->second};
        const struct measured_mixture mixture = measured_mixture_create("peng-robinson", names, 2, arena);
        if (measured_pair_origin(&mixture) == PAIR_FROM_LIBRARY) {
            const struct binary_deviations found = compare_binary(&table, names[0], names[1], &mixture);
            print_binary("constants", binary, &found, arena);
            assert_within(&found.x, (struct bound){0.035, 0.15}, names[1], "Knapp et al. 1982, from memory");
            with_constants++;
        }
        arena_free(arena);
    }
    assert_int_equal(with_constants, 11);
    arena_free(tables);
}

/* ---- liquefied petroleum gas ---------------------------------------------------------------------------------------
 */

/* Peng-Robinson gives vapour pressures of the pure C3 and C4 hydrocarbons to 1 % (Peng and Robinson 1976, table 1, from
 * memory), and these mixtures are nearly ideal; the series scatter by up to 5 % among each other. */
static void bubble_pressures_of_petroleum_gases_are_as_good_as_the_vapour_pressures(void **state)
{
    (void)state;
    static const struct {
        const char *first, *second;
        size_t rows;
        struct bound p;
    } cases[] = {
        {"propane", "n-butane", 78, {1.5, 6.0}},
        {"propane", "isobutane", 58, {1.5, 4.0}},
        {"isobutane", "n-butane", 7, {1.5, 4.0}},
        {"propylene", "propane", 52, {1.0, 2.0}},
    };
    struct arena *arena = arena_create(NULL);
    const struct measured_table table = measured_table_read("binary-equilibrium.csv", arena);
    print_heading("bubble pressures of petroleum gases (per cent)");
    for (size_t k = 0; k < COUNT(cases); k++) {
        const char *const names[] = {cases[k].first, cases[k].second};
        const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, names, 2, arena);
        const struct binary_deviations found = compare_binary(&table, names[0], names[1], &mixture);
        const char *system = system_name(names[0], names[1], "p, %", arena);
        print_deviations("groups", system, &found.p);
        assert_int_equal(found.rows, cases[k].rows);
        assert_int_equal(found.p.missing, 0);
        assert_within(&found.p, cases[k].p, system, "vapour pressures to 1 %, scatter of the series");
    }
    arena_free(arena);
}

/* ---- dew and bubble pressures of ternary mixtures -------------------------------------------------------------------
 */

enum { TERNARY_THIRD = 4, TERNARY_KIND = 6, TERNARY_TEMPERATURE, TERNARY_PRESSURE };

static struct deviations compare_ternary(const struct measured_table *table, const struct measured_mixture *mixture,
                                         const char *third, enum boundary_kind kind)
{
    struct deviations out = {0};
    for (size_t i = 0; i < table->count; i++) {
        const struct measured_row *row = &table->rows[i];
        const bool is_dew = strcmp(row->field[TERNARY_KIND], "dew") == 0;
        if (strcmp(row->field[TERNARY_THIRD], third) == 0 && is_dew == (kind == BOUNDARY_DEW)) {
            const double z[] = {measured_number(row, 1), measured_number(row, 3), measured_number(row, 5)};
            const double p = 1e5 * measured_number(row, TERNARY_PRESSURE);
            double found = (double)NAN;
            const bool is_found =
                measured_boundary_pressure(mixture, kind, measured_number(row, TERNARY_TEMPERATURE), z, p, &found);
            deviations_of(&out, true, is_found, 100.0 * (found / p - 1.0));
        }
    }
    return out;
}

/* Carbon dioxide with a few per cent of other gases: 2 to 3 % in pressure over the E-PPR78 papers (from memory). Where
 * a dew line turns back, as at 273 K and 93 bar, a small deviation in temperature is a large one in pressure. */
static void boundaries_of_ternary_mixtures_lie_where_measured(void **state)
{
    (void)state;
    static const struct {
        const char *third;
        enum boundary_kind kind;
        size_t rows;
        struct bound p;
    } cases[] = {
        {"argon", BOUNDARY_DEW, 26, {2.0, 5.0}},
        {"argon", BOUNDARY_BUBBLE, 16, {3.0, 6.0}},
        {"methane", BOUNDARY_DEW, 18, {3.0, 20.0}},
        {"methane", BOUNDARY_BUBBLE, 21, {3.0, 6.0}},
    };
    struct arena *arena = arena_create(NULL);
    const struct measured_table table = measured_table_read("ternary-boundary.csv", arena);
    print_heading("dew and bubble pressures of carbon dioxide and nitrogen with a third gas (per cent)");
    for (size_t k = 0; k < COUNT(cases); k++) {
        const char *const names[] = {"carbon-dioxide", "nitrogen", cases[k].third};
        const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, names, 3, arena);
        const struct deviations found = compare_ternary(&table, &mixture, cases[k].third, cases[k].kind);
        const char *kind = cases[k].kind == BOUNDARY_DEW ? "dew p, %" : "bubble p, %";
        const char *system = arena_format(arena, "with %s, %s", cases[k].third, kind);
        print_deviations("groups", system, &found);
        assert_int_equal(found.points, cases[k].rows);
        assert_within(&found, cases[k].p, system, "carbon dioxide with little of other gases: 2 to 3 %");
    }
    arena_free(arena);
}

/* ---- critical points ------------------------------------------------------------------------------------------------
 */

enum { CRITICAL_X1 = 2, CRITICAL_TEMPERATURE, CRITICAL_PRESSURE, CRITICAL_KIND };

/* The E-PPR78 papers report 2 to 3 % in the critical pressures of their mixtures (from memory). The compiled points of
 * methane and propane scatter by 5 K and 5 % among each other. */
static const char CRITICALS[] = "E-PPR78 papers: 2 to 3 % in pressure (from memory), and the scatter of old points";

struct critical_case {
    const char *first, *second;
    size_t rows;
    struct bound T, p; /* K, per cent */
    const char *reason;
};

static const struct critical_case CRITICAL_CASES[] = {
    {"methane", "ethane", 10, {2, 5}, {3, 6}, CRITICALS},
    {"methane", "propane", 15, {3, 8}, {3, 8}, CRITICALS},
    {"ethane", "n-butane", 8, {3, 8}, {3, 6}, CRITICALS},
    {"propane", "n-hexane", 7, {3, 8}, {3, 6}, CRITICALS},
    {"methane", "nitrogen", 9, {2, 5}, {3, 6}, CRITICALS},
    {"n-butane", "carbon-dioxide", 7, {3, 8}, {5, 8}, CRITICALS},
    {"methane", "carbon-dioxide", 2, {2, 5}, {3, 6}, CRITICALS},
    {"nitrogen", "carbon-dioxide", 3, {6, 10}, {3, 6}, GASES},
    {"oxygen", "carbon-dioxide", 1, {8, 10}, {8, 12}, GASES},
    {"argon", "carbon-dioxide", 3, {6, 10}, {8, 12}, GASES},
};

static void compare_critical(const struct measured_mixture *mixture, const struct measured_row *row,
                             struct deviations *T, struct deviations *p)
{
    const double x = measured_number(row, CRITICAL_X1), z[] = {x, 1.0 - x};
    const struct critical_point measured = {.temperature = measured_number(row, CRITICAL_TEMPERATURE),
                                            .pressure = 1e5 * measured_number(row, CRITICAL_PRESSURE)};
    const struct mixture_critical found = measured_critical(mixture, z, measured);
    deviations_of(T, true, true, found.temperature - measured.temperature);
    deviations_of(p, true, true, 100.0 * (found.pressure / measured.pressure - 1.0));
}

static void critical_points_of_binary_mixtures_are_as_good_as_published(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const struct measured_table table = measured_table_read("critical-points.csv", arena);
    print_heading("critical points (K and per cent); those marked doubtful are left out");
    for (size_t k = 0; k < COUNT(CRITICAL_CASES); k++) {
        const struct critical_case *c = &CRITICAL_CASES[k];
        const char *const names[] = {c->first, c->second};
        const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, names, 2, arena);
        struct deviations T = {0}, p = {0};
        for (size_t i = 0; i < table.count; i++) {
            const struct measured_row *row = &table.rows[i];
            if (strcmp(row->field[FIRST], c->first) == 0 && strcmp(row->field[SECOND], c->second) == 0 &&
                strcmp(row->field[CRITICAL_KIND], "doubtful") != 0) {
                compare_critical(&mixture, row, &T, &p);
            }
        }
        print_deviations("groups", system_name(c->first, c->second, "T, K", arena), &T);
        print_deviations("groups", system_name(c->first, c->second, "p, %", arena), &p);
        assert_int_equal(T.points, c->rows);
        assert_within(&T, c->T, system_name(c->first, c->second, "T", arena), c->reason);
        assert_within(&p, c->p, system_name(c->first, c->second, "p", arena), c->reason);
    }
    arena_free(arena);
}

/* ---- densities of gas mixtures -------------------------------------------------------------------------------------
 */

enum { Z1 = 1, NAME2, Z2, NAME3, Z3, DENSITY_TEMPERATURE, DENSITY_PRESSURE, DENSITY };

/* A cubic with a constant shift is known to give densities of gases to 0.5 to 1 % where they are far above their
 * critical temperature, and to some 3 to 6 % at one to two times the critical density near it, as its critical
 * compressibility is too large (from memory; Peneloux, Rauzy and Freze, Fluid Phase Equilib. 8 (1982) 7). */
static const char FAR[] = "far above the critical temperature: about 1 %";
static const char NEAR[] = "up to the critical density near the critical temperature: 1 to 2 %, at worst 6 %";

struct density_case {
    const char *name[MEASURED_MOST];
    size_t rows, missing;
    struct bound rho; /* per cent */
    const char *reason;
};

static const struct density_case DENSITIES[] = {
    {{"nitrogen", "methane", ""}, 66, 0, {1.0, 3.0}, FAR},
    {{"nitrogen", "hydrogen", ""}, 75, 0, {1.0, 3.0}, FAR},
    {{"hydrogen", "methane", ""}, 71, 0, {1.0, 3.0}, FAR},
    {{"methane", "helium", ""}, 133, 0, {1.0, 3.0}, FAR},
    {{"nitrogen", "carbon-dioxide", ""}, 123, 0, {1.0, 4.0}, FAR},
    {{"ethane", "methane", "propane"}, 26, 0, {2.0, 5.0}, "to 1700 bar, where the covolume decides: 2 %"},
    {{"methane", "propane", ""}, 160, 0, {1.0, 3.0}, "below the critical density: about 1 %"},
    {{"propane", "isobutane", ""}, 82, 0, {0.5, 1.0}, "second virial coefficients at a few bar"},
    {{"ethane", "carbon-dioxide", ""}, 60, 0, {2.0, 6.0}, NEAR},
    {{"carbon-dioxide", "argon", ""}, 76, 0, {2.0, 6.0}, NEAR},
    /* One row lies inside the two-phase region as the method has it. */
    {{"carbon-dioxide", "oxygen", ""}, 45, 1, {2.0, 6.0}, NEAR},
    {{"hydrogen", "carbon-dioxide", ""}, 13, 0, {2.0, 6.0}, NEAR},
    {{"carbon-dioxide", "hydrogen-sulfide", ""}, 27, 0, {2.0, 6.0}, NEAR},
    {{"carbon-dioxide", "methane", ""}, 117, 0, {2.5, 6.0}, NEAR},
    {{"nitrogen", "carbon-dioxide", "argon"}, 53, 0, {2.5, 6.0}, NEAR},
};

/* kg/m3 of the one phase at T, p; NaN where there are two. */
static double density_of(const struct measured_mixture *mixture, double T, double p, const double z[])
{
    double mass = 0.0;
    for (size_t i = 0; i < mixture->spec->count; i++) {
        mass += z[i] * mixture->spec->pure[i]->molar_mass;
    }
    return measured_phases(mixture, T, p, z) == 1 ? mass / mixture->split->phase[0].molar_volume : (double)NAN;
}

static struct deviations compare_densities(const struct measured_table *table, const struct density_case *c,
                                           const struct measured_mixture *mixture)
{
    struct deviations out = {0};
    for (size_t i = 0; i < table->count; i++) {
        const struct measured_row *row = &table->rows[i];
        if (strcmp(row->field[FIRST], c->name[0]) == 0 && strcmp(row->field[NAME2], c->name[1]) == 0 &&
            strcmp(row->field[NAME3], c->name[2]) == 0) {
            const double z[] = {measured_number(row, Z1), measured_number(row, Z2), measured_number(row, Z3)};
            const double rho = density_of(mixture, measured_number(row, DENSITY_TEMPERATURE),
                                          1e5 * measured_number(row, DENSITY_PRESSURE), z);
            deviations_of(&out, true, !isnan(rho), 100.0 * (rho / measured_number(row, DENSITY) - 1.0));
        }
    }
    return out;
}

static void densities_of_gas_mixtures_are_as_good_as_of_a_cubic(void **state)
{
    (void)state;
    struct arena *tables = arena_create(NULL);
    const struct measured_table table = measured_table_read("gas-density.csv", tables);
    print_heading("densities of gas mixtures (per cent)");
    for (size_t k = 0; k < COUNT(DENSITIES); k++) {
        struct arena *arena = arena_create(NULL);
        const struct density_case *c = &DENSITIES[k];
        const size_t count = c->name[2][0] != '\0' ? 3 : 2;
        const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, c->name, count, arena);
        const struct deviations found = compare_densities(&table, c, &mixture);
        const char *system = count == 3 ? arena_format(arena, "%s + %s + %s", c->name[0], c->name[1], c->name[2])
                                        : system_name(c->name[0], c->name[1], "", arena);
        print_deviations("groups", system, &found);
        assert_int_equal(found.points + found.missing, c->rows);
        assert_int_equal(found.missing, c->missing);
        assert_within(&found, c->rho, system, c->reason);
        arena_free(arena);
    }
    arena_free(tables);
}

/* ---- nitrous oxide and oxygen --------------------------------------------------------------------------------------
 */

static void print_separation(const char *how, double found, double quoted)
{
    print_message("%-60s %7.2f degC, quoted %5.1f degC\n", how, found - 273.15, quoted - 273.15);
}

/* The temperature at which a second phase appears on cooling at constant pressure. */
static double separation_at_pressure(const struct measured_mixture *mixture, double p, const double z[])
{
    double low = 220.0, high = 300.0;
    while (high - low > 1e-6) {
        const double middle = 0.5 * (low + high);
        *(measured_phases(mixture, middle, p, z) > 1 ? &low : &high) = middle;
    }
    return low;
}

/* The same in a closed vessel filled to p at 15 degC. */
static double separation_in_vessel(const struct measured_mixture *mixture, double p, const double z[],
                                   struct arena *arena)
{
    assert_int_equal(measured_phases(mixture, 288.15, p, z), 1);
    const double volume = mixture->split->phase[0].molar_volume;
    struct mixture_vessel *vessel = mixture_vessel_create(2, arena);
    double low = 220.0, high = 288.15;
    while (high - low > 1e-6) {
        const double middle = 0.5 * (low + high);
        assert_int_equal(fluid_set_t(mixture->at_t, mixture->fluid, middle), ANSWER_OK);
        assert_int_equal(mixture_vessel_at_tv(mixture->at_t, volume, z, NULL, mixture->ws, vessel), ANSWER_OK);
        *(vessel->split->phase_count > 1 ? &low : &high) = middle;
    }
    return low;
}

/* Bracken, Broughton and Hill, Br. Med. J. 3 (1968) 715 and J. Phys. D 3 (1970) 1747, as quoted in anaesthesia texts,
 * from memory: -5.5 degC at 117 bar; -7 degC (also -6 degC) in a cylinder as filled, 137 bar. Quoted to half a kelvin
 * and more; the dew line of a cubic is good to a few kelvin near its greatest temperature, where it is flat. */
static void equal_parts_of_nitrous_oxide_and_oxygen_separate_where_the_trade_says(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const char *const names[] = {"nitrous-oxide", "oxygen"};
    const double z[] = {0.5, 0.5};
    const struct measured_mixture mixture = measured_mixture_create(DEFAULT_METHOD, names, 2, arena);
    assert_int_equal(measured_pair_origin(&mixture), PAIR_FROM_GROUPS);
    const double at_pressure = separation_at_pressure(&mixture, 117e5, z);
    const double in_vessel = separation_in_vessel(&mixture, 137e5, z, arena);
    print_separation("nitrous oxide with 50 % oxygen, cooled at 117 bar", at_pressure, 267.65);
    print_separation("the same in a vessel filled to 137 bar at 15 degC", in_vessel, 266.15);
    assert_near(at_pressure, 267.65, 3.0, "Bracken 1970 as quoted, from memory");
    assert_near(in_vessel, 266.15, 4.0, "Bracken 1968 and 1970 as quoted, from memory");
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(groups_give_the_compositions_of_two_phases_as_well_as_published),
        cmocka_unit_test(constants_give_the_compositions_of_liquids_nearly_as_well),
        cmocka_unit_test(bubble_pressures_of_petroleum_gases_are_as_good_as_the_vapour_pressures),
        cmocka_unit_test(boundaries_of_ternary_mixtures_lie_where_measured),
        cmocka_unit_test(critical_points_of_binary_mixtures_are_as_good_as_published),
        cmocka_unit_test(densities_of_gas_mixtures_are_as_good_as_of_a_cubic),
        cmocka_unit_test(equal_parts_of_nitrous_oxide_and_oxygen_separate_where_the_trade_says),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
