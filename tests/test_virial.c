/* The virial methods: coefficients against measurements, reference equations and cross coefficients; the equations
 * against closed forms; where they stop. The identities that every method meets are in test_helmholtz.c and
 * test_phase.c. */
#include "fluid/phase.h"
#include "fluid/virial_internal.h"
#include "support/check.h"
#include "support/sample_fluids.h"

#include <math.h>
#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

#define CM3   1e-6
#define DEBYE 3.33564e-30

enum gas {
    NITROGEN_,
    OXYGEN_,
    ARGON_,
    METHANE_,
    CARBON_MONOXIDE_,
    CARBON_DIOXIDE_,
    ETHYLENE_,
    ETHANE_,
    HYDROGEN_,
    KRYPTON_,
    XENON_,
    PROPANE_,
    PROPYLENE_,
    NITROUS_OXIDE_,
    AMMONIA_,
    HYDROGEN_CHLORIDE_,
    DIMETHYL_ETHER_,
    HELIUM_,
    N_BUTANE_,
    SULFUR_HEXAFLUORIDE_,
    GASES
};

/* Critical constants and acentric factors as in the library's decks, molar mass in g/mol, dipole in debye. */
#define GAS(word, mass, Tc, pc, rhoc, omega, mu)                                                            \
    {                                                                                                       \
        .name = (word), .molar_mass = 1e-3 * (mass), .critical_temperature = {true, (Tc)},                  \
        .critical_pressure = {true, (pc)}, .critical_density = {true, (rhoc)}, .acentric = {true, (omega)}, \
        .dipole = {                                                                                         \
            true,                                                                                           \
            (mu)*DEBYE                                                                                      \
        }                                                                                                   \
    }
static const struct pure_spec GAS[GASES] = {
    [NITROGEN_] = GAS("nitrogen", 28.01348, 126.192, 3395800.0, 11183.901, 0.0372, 0),
    [OXYGEN_] = GAS("oxygen", 31.9988, 154.581, 5043000.0, 13630, 0.0222, 0),
    [ARGON_] = GAS("argon", 39.948, 150.687, 4863000.0, 13407.43, -0.0022, 0),
    [METHANE_] = GAS("methane", 16.0428, 190.564, 4599200.0, 10139.128, 0.0114, 0),
    [CARBON_MONOXIDE_] = GAS("carbon-monoxide", 28.0101, 132.86, 3494000.0, 10850, 0.0497, 0.1),
    [CARBON_DIOXIDE_] = GAS("carbon-dioxide", 44.0098, 304.1282, 7377300.0, 10624.906, 0.2249, 0),
    [ETHYLENE_] = GAS("ethylene", 28.05376, 282.35, 5041800.0, 7636.766, 0.0866, 0),
    [ETHANE_] = GAS("ethane", 30.06904, 305.322, 4872200.0, 6856.8867, 0.0995, 0),
    [HYDROGEN_] = GAS("hydrogen", 2.01588, 33.145, 1296400.0, 15508, -0.2187, 0),
    [KRYPTON_] = GAS("krypton", 83.798, 209.48, 5525000.0, 10850, -0.0009, 0.0),
    [XENON_] = GAS("xenon", 131.293, 289.733, 5842000.0, 8400, 0.0036, 0.0),
    [PROPANE_] = GAS("propane", 44.09562, 369.89, 4251200.0, 5000, 0.1521, 0),
    [PROPYLENE_] = GAS("propylene", 42.07974, 364.211, 4555000.0, 5457, 0.1461, 0.4),
    [NITROUS_OXIDE_] = GAS("nitrous-oxide", 44.0128, 309.52, 7245000.0, 10270, 0.1622, 0.17),
    [AMMONIA_] = GAS("ammonia", 17.03052, 405.56, 11363391.0, 13696, 0.2557, 1.47),
    [HYDROGEN_CHLORIDE_] = GAS("hydrogen-chloride", 36.4609, 324.55, 8291521.2, 11800, 0.1297, 1.1),
    [DIMETHYL_ETHER_] = GAS("dimethyl-ether", 46.06844, 400.378, 5336800.0, 5940, 0.1961, 1.3),
    [N_BUTANE_] = GAS("n-butane", 58.1222, 425.125, 3796000.0, 3922.7696, 0.2008, 0),
    [SULFUR_HEXAFLUORIDE_] = GAS("sulfur-hexafluoride", 146.0554192, 318.7232, 3755000.0, 5082.3238, 0.2185, 0),
    [HELIUM_] = GAS("helium", 4.002602, 5.1953, 228326.07, 18130, -0.3835, 0.0),
};

/* Classical constants of quantum gases, from memory of Prausnitz et al., Molecular Thermodynamics. */
static const struct cubic_set HYDROGEN_SET = {.critical_temperature = {true, 43.6},
                                              .critical_pressure = {true, 20.5e5}};
static const struct cubic_set HELIUM_SET = {.critical_temperature = {true, 10.47}, .critical_pressure = {true, 6.76e5}};

static struct virial_constants constants_of(enum gas gas)
{
    return virial_of_component(&GAS[gas], gas == HYDROGEN_ ? &HYDROGEN_SET : gas == HELIUM_ ? &HELIUM_SET : NULL);
}

/* ---- second coefficients ----------------------------------------------------------------------------------------- */

/* Measured, of the better class of the compilation of Dymond and Smith, The Virial Coefficients of Pure Gases and
 * Mixtures, Oxford 1980, and of Dymond et al., Landolt-Boernstein IV/21A, 2002: K, cm3/mol. */
static const char RECOMMENDED[] = "Dymond and Smith 1980, recommended, from memory";

static const struct {
    enum gas gas;
    double T, B;
    const char *source;
} MEASURED[] = {
    {NITROGEN_, 200.0, -35.6, "Ewing, M. B. 1992"},
    {NITROGEN_, 277.6, -8.5, "J.A. Huff and T.M. Reed, J. chem. Engng Data  1963"},
    {NITROGEN_, 323.15, -0.5, "J. Otto, A. Michels, and H. Wouters, Phys. Z. 1934"},
    {NITROGEN_, 425.0, 11.6, "Schmiedel, H. 1980"},
    {OXYGEN_, 200.0, -49.9, "Wagner, W. 1984"},
    {OXYGEN_, 265.0, -24.34, "L.A. Weber, J. Res. natn. Bur. Stand. 74A 93  1970"},
    {OXYGEN_, 295.0, -16.98, "L.A. Weber, J. Res. natn. Bur. Stand. 74A 93  1970"},
    {OXYGEN_, 420.0, 1.5, "Wagner, W. 1984"},
    {ARGON_, 200.0, -47.9, "Ewing, M. B. 1992"},
    {ARGON_, 273.15, -22.41, "E. Whalley, Y. Lupien, and W.G. Schneider, Ca 1953"},
    {ARGON_, 323.15, -10.82, "A.L. Blancett, K.R. Hall, and F.B. Canfield 1970"},
    {ARGON_, 423.15, 1.01, "E. Whalley, Y. Lupien, and W.G. Schneider, Ca 1953"},
    {METHANE_, 200.0, -106.12, "A.E. Hoover, I. Nagata, T.W. Leland, Jr., and 1968"},
    {METHANE_, 298.15, -42.82, "D.R. Douslin, R.H. Harrison, R.T. Moore, and  1964"},
    {METHANE_, 340.0, -28.9, "J. Bellm, W. Reineke, K. Schafer, and B. Schr 1974"},
    {METHANE_, 423.18, -11.54, "Holleran, E. M. 1970"},
    {CARBON_MONOXIDE_, 213.0, -35.0, "B. Schramm and R. Gehrmann (unpublished) (197 1979"},
    {CARBON_MONOXIDE_, 295.0, -9.0, "B. Schramm and H. Schmiedel (unpublished) (19 1979"},
    {CARBON_MONOXIDE_, 330.0, -4.3, "B. Schramm and H. Schmiedel (unpublished) (19 1979"},
    {CARBON_MONOXIDE_, 423.15, 10.16, "A. Michels, J.M. Lupton, T. Wassenaar, and W. 1952"},
    {CARBON_DIOXIDE_, 220.0, -248.2, "S. Angus, B. Armstrong, and K.M. de Reuck, In 1976"},
    {CARBON_DIOXIDE_, 298.2, -123.56, "A. Michels and C. Michels, Proc. R. Soc. A153 1935"},
    {CARBON_DIOXIDE_, 348.15, -81.8, "A. Sass, B.F. Dodge, and R.H. Bretton, J. che 1967"},
    {CARBON_DIOXIDE_, 425.0, -47.5, "B. Schramm and H. Schmiedel (unpublished) (19 1979"},
    {ETHYLENE_, 209.2, -288.51, "W. Goepel and T. Dorfmueller, Z. phys. Chem.  1972"},
    {ETHYLENE_, 295.0, -143.5, "S. Angus, B. Armstrong, and K.M de Reuck, Int"},
    {ETHYLENE_, 348.15, -95.48, "A. Michels, J. Gruyter, and F. Niesen 1936"},
    {ETHYLENE_, 425.0, -61.3, "S. Angus, B. Armstrong, and K.M de Reuck, Int"},
    {ETHANE_, 200.0, -419.2, "Estrada-Alexanders, A. F. 1994"},
    {ETHANE_, 300.0, -182.1, "Estrada-Alexanders, A. F. 1994"},
    {ETHANE_, 345.03, -132.0, "Kerl, K. 1984"},
    {ETHANE_, 423.2, -84.92, "A. Michels, W. van Straaten, and J. Dawson 1954"},
    {HYDROGEN_, 223.15, 12.1, "L. Holborn, and J. Otto, Z. Phys. 33 1 (1925)"},
    {HYDROGEN_, 298.15, 13.65, "D.T.A. Townend and L.A. Bhatt, Proc. R. Soc.  1932"},
    {HYDROGEN_, 373.15, 14.17, "H. Kamerlingh Onnes and C. Braak, Communs phy 1907"},
    {KRYPTON_, 300.0, -50.5, RECOMMENDED},
    {XENON_, 300.0, -130.0, RECOMMENDED},
    {XENON_, 400.0, -69.0, RECOMMENDED},
    {PROPANE_, 300.0, -382.0, RECOMMENDED},
    {PROPANE_, 400.0, -208.0, RECOMMENDED},
    {N_BUTANE_, 300.0, -722.0, RECOMMENDED},
    {N_BUTANE_, 400.0, -367.0, RECOMMENDED},
    {SULFUR_HEXAFLUORIDE_, 300.0, -275.0, RECOMMENDED},
    {SULFUR_HEXAFLUORIDE_, 400.0, -134.0, RECOMMENDED},
    {HYDROGEN_, 423.25, 15.54, "C.W. Gibby, C.C. Tanner, and I. Masson, Proc. 1928"},
};

/* Tsonopoulos 1974 states a few cm3/mol, growing as B does at low temperatures: here 3 cm3/mol and 3 per cent, twice
 * that below T_r = 0.75, for hydrogen 5 cm3/mol. Abbott's form with two terms parts from that of four by 1 to 2 per
 * cent of B near T_r = 0.8. The scatter of the measurements among each other is in it. */
static double stated_error(enum virial_correlation which, enum gas gas, double T, double B)
{
    if (gas == HYDROGEN_) {
        return 5.5;
    }
    const double wide = T < 0.75 * GAS[gas].critical_temperature.value ? 2.0 : 1.0;
    return wide * (3.0 + (which == VIRIAL_PITZER_ABBOTT ? 0.045 : 0.03) * fabs(B));
}

static void second_coefficients_meet_the_measured_ones(void **state)
{
    (void)state;
    for (size_t k = 0; k < COUNT(MEASURED); k++) {
        const struct virial_constants gas = constants_of(MEASURED[k].gas);
        for (int which = VIRIAL_PITZER_ABBOTT; which <= VIRIAL_TSONOPOULOS; which++) {
            const double B = virial_second((enum virial_correlation)which, &gas, MEASURED[k].T).value / CM3;
            const double allowed =
                stated_error((enum virial_correlation)which, MEASURED[k].gas, MEASURED[k].T, MEASURED[k].B);
            assert_near(B, MEASURED[k].B, allowed, MEASURED[k].source);
        }
    }
}

/* The limit of the reference equations at zero density, d(alphar)/d(delta) / rho_r, evaluated by a script of its own
 * from the published coefficients. */
static const struct {
    enum gas gas;
    double T, B;
} REFERENCE[] = {
    {KRYPTON_, 300.0, -50.00},
    {KRYPTON_, 350.0, -33.86},
    {KRYPTON_, 450.0, -13.79},
    {XENON_, 300.0, -127.34},
    {XENON_, 350.0, -93.54},
    {XENON_, 450.0, -52.92},
    {PROPANE_, 300.0, -385.45},
    {PROPANE_, 350.0, -276.97},
    {PROPANE_, 450.0, -157.93},
    {PROPYLENE_, 300.0, -343.22},
    {PROPYLENE_, 350.0, -248.25},
    {PROPYLENE_, 450.0, -143.29},
    {NITROUS_OXIDE_, 300.0, -131.51},
    {NITROUS_OXIDE_, 350.0, -93.48},
    {NITROUS_OXIDE_, 450.0, -49.37},
    {AMMONIA_, 300.0, -250.26},
    {AMMONIA_, 350.0, -162.25},
    {AMMONIA_, 450.0, -83.52},
    {HYDROGEN_CHLORIDE_, 300.0, -143.69},
    {HYDROGEN_CHLORIDE_, 350.0, -103.96},
    {HYDROGEN_CHLORIDE_, 450.0, -60.99},
    {DIMETHYL_ETHER_, 300.0, -434.35},
    {DIMETHYL_ETHER_, 350.0, -300.24},
    {DIMETHYL_ETHER_, 450.0, -173.97},
    {HELIUM_, 300.0, 11.84},
    {HELIUM_, 350.0, 11.63},
    {HELIUM_, 450.0, 11.21},
};

static void second_coefficients_meet_the_reference_equations(void **state)
{
    (void)state;
    for (size_t k = 0; k < COUNT(REFERENCE); k++) {
        const struct virial_constants gas = constants_of(REFERENCE[k].gas);
        const double B = virial_second(VIRIAL_TSONOPOULOS, &gas, REFERENCE[k].T).value / CM3;
        /* Polar gases: 10 per cent; helium, whose attraction is weakest: 7 cm3/mol. */
        const double part = GAS[REFERENCE[k].gas].dipole.value > 0.5 * DEBYE ? 0.10 : 0.03;
        assert_near(B, REFERENCE[k].B, (REFERENCE[k].gas == HELIUM_ ? 7.0 : 3.0) + part * fabs(REFERENCE[k].B),
                    GAS[REFERENCE[k].gas].name);
    }
}

/* Cross coefficients derived from published densities on isotherms (the papers are in the library's deck of virial
 * constants), with their uncertainty; kij of the same deck. The last constant is one for each pair, so that what is
 * tested is the change with temperature. */
static const struct {
    enum gas first, second;
    double kij, T, B, uncertainty; /* K, cm3/mol */
} CROSS[] = {
    {NITROGEN_, CARBON_DIOXIDE_, -0.004, 250.03, -65.2, 2.5},
    {NITROGEN_, CARBON_DIOXIDE_, -0.004, 275.02, -51.4, 2.5},
    {NITROGEN_, CARBON_DIOXIDE_, -0.004, 374.95, -17.3, 2.5},
    {NITROGEN_, CARBON_DIOXIDE_, -0.004, 400.02, -12.8, 2.5},
    {CARBON_DIOXIDE_, ARGON_, 0.04, 273.15, -55.6, 4.0},
    {CARBON_DIOXIDE_, ARGON_, 0.04, 293.15, -44.3, 4.0},
    {CARBON_DIOXIDE_, ARGON_, 0.04, 308.15, -40.0, 4.0},
    {CARBON_DIOXIDE_, ARGON_, 0.04, 323.15, -33.2, 2.5},
    {ETHANE_, CARBON_DIOXIDE_, 0.093, 273.15, -150.6, 2.5},
    {ETHANE_, CARBON_DIOXIDE_, 0.093, 273.15, -149.6, 4.0},
    {ETHANE_, CARBON_DIOXIDE_, 0.093, 273.15, -149.3, 2.5},
    {HYDROGEN_, CARBON_DIOXIDE_, -0.17, 273.15, -9.7, 5.0},
    {HYDROGEN_, CARBON_DIOXIDE_, -0.17, 323.15, -1.2, 5.0},
    {NITROGEN_, METHANE_, 0.028, 240.01, -38.5, 2.5},
    {NITROGEN_, METHANE_, 0.028, 274.86, -25.1, 2.5},
    {NITROGEN_, METHANE_, 0.028, 299.92, -17.9, 2.5},
    {NITROGEN_, METHANE_, 0.028, 349.98, -7.4, 2.5},
    {METHANE_, HELIUM_, 0.348, 240.05, 23.7, 4.0},
    {METHANE_, HELIUM_, 0.348, 259.99, 24.4, 2.5},
    {METHANE_, HELIUM_, 0.348, 299.96, 24.3, 4.0},
    {METHANE_, HELIUM_, 0.348, 400.0, 28.9, 4.0},
    {NITROGEN_, HYDROGEN_, -0.021, 240.05, 10.3, 4.0},
    {NITROGEN_, HYDROGEN_, -0.021, 260.04, 11.5, 4.0},
    {NITROGEN_, HYDROGEN_, -0.021, 299.94, 13.7, 2.5},
    {NITROGEN_, HYDROGEN_, -0.021, 349.94, 17.4, 4.0},
    {HYDROGEN_, METHANE_, -0.076, 240.08, -1.2, 4.0},
    {HYDROGEN_, METHANE_, -0.076, 260.04, 2.3, 4.0},
    {HYDROGEN_, METHANE_, -0.076, 299.96, 6.6, 4.0},
    {HYDROGEN_, METHANE_, -0.076, 349.95, 10.7, 4.0},
    {METHANE_, PROPANE_, 0.051, 248.16, -179.5, 6.0},
    {METHANE_, PROPANE_, 0.051, 273.15, -150.9, 6.0},
    {METHANE_, PROPANE_, 0.051, 323.16, -105.6, 6.0},
    {METHANE_, PROPANE_, 0.051, 373.15, -71.5, 6.0},
};

static void cross_coefficients_meet_the_derived_ones(void **state)
{
    (void)state;
    for (size_t k = 0; k < COUNT(CROSS); k++) {
        const struct virial_constants one = constants_of(CROSS[k].first), other = constants_of(CROSS[k].second);
        const struct virial_constants pair = virial_of_pair(&one, &other, CROSS[k].kij);
        const double B = virial_second(VIRIAL_TSONOPOULOS, &pair, CROSS[k].T).value / CM3;
        assert_near(B, CROSS[k].B, CROSS[k].uncertainty, GAS[CROSS[k].second].name);
    }
}

/* Fourteen gases and nine pairs stand in the two tables of measured coefficients. */
static void the_tables_hold_many_gases_and_pairs(void **state)
{
    (void)state;
    bool is_there[GASES] = {false}, is_pair[GASES][GASES] = {{false}};
    size_t gases = 0, pairs = 0;
    for (size_t k = 0; k < COUNT(MEASURED); k++) {
        gases += is_there[MEASURED[k].gas] ? 0 : 1;
        is_there[MEASURED[k].gas] = true;
    }
    for (size_t k = 0; k < COUNT(CROSS); k++) {
        pairs += is_pair[CROSS[k].first][CROSS[k].second] ? 0 : 1;
        is_pair[CROSS[k].first][CROSS[k].second] = true;
    }
    assert_int_equal(gases, 14);
    assert_int_equal(pairs, 9);
}

static void correlations_agree_with_hand_evaluation(void **state)
{
    (void)state;
    /* Methane at T_r = 1.5 with omega 0.0114: f = 0.1445 - 0.22 - 0.0615556 - 0.0035852 - 0.0000237 + omega (0.0637 +
     * 0.1471111 - 0.1253333 - 0.0003121) = -0.1406645 + 0.0114 * 0.0851657, by hand. */
    const struct virial_constants plain = {
        .critical_temperature = 100.0, .critical_volume = 1.0, .compressibility = 1.0, .acentric = 0.0114};
    assert_near(virial_second(VIRIAL_TSONOPOULOS, &plain, 150.0).value, -0.1396935, 2e-6, "by hand");
    /* 0.083 - 0.422 / 1.5^1.6 + omega (0.139 - 0.172 / 1.5^4.2) = 0.083 - 0.2205803 + 0.0114 * 0.1076711. */
    assert_near(virial_second(VIRIAL_PITZER_ABBOTT, &plain, 150.0).value, -0.1363529, 1e-6, "by hand");
}

/* The papers of the reference equations give C to some per cent; Orbey and Vera's claim is of that order for nonpolar
 * gases above their critical temperature. */
static void third_coefficients_are_near_those_of_reference_equations(void **state)
{
    (void)state;
    static const struct {
        enum gas gas;
        double T, C; /* K, cm6/mol2: second difference of the reference equation at low density, by a script */
    } cases[] = {
        {NITROGEN_, 300.0, 1410.0}, {NITROGEN_, 450.0, 1252.0}, {METHANE_, 300.0, 2494.0},
        {METHANE_, 350.0, 2091.0},  {ARGON_, 250.0, 1247.0},    {ARGON_, 300.0, 1056.0},
        {ETHANE_, 350.0, 8513.0},   {ETHANE_, 450.0, 5526.0},   {CARBON_DIOXIDE_, 350.0, 3898.0},
    };
    for (size_t k = 0; k < COUNT(cases); k++) {
        const struct virial_constants gas = constants_of(cases[k].gas);
        assert_close(virial_third(&gas, cases[k].T).value / (CM3 * CM3), cases[k].C, 0.12, GAS[cases[k].gas].name);
    }
}

static void coefficients_have_the_slopes_they_say(void **state)
{
    (void)state;
    for (int gas = 0; gas < GASES; gas++) {
        const struct virial_constants own = constants_of((enum gas)gas), hydrogen = constants_of(HYDROGEN_);
        const struct virial_constants pair = virial_of_pair(&own, &hydrogen, 0.05);
        const struct virial_constants triple = virial_of_triple(&own, &pair, &pair);
        const double T = 311.0, h = 0.05;
        const struct virial_curve at = virial_third(&triple, T), B = virial_second(VIRIAL_TSONOPOULOS, &pair, T);
        const struct virial_curve up = virial_third(&triple, T + h), down = virial_third(&triple, T - h);
        const struct virial_curve B_up = virial_second(VIRIAL_TSONOPOULOS, &pair, T + h);
        const struct virial_curve B_down = virial_second(VIRIAL_TSONOPOULOS, &pair, T - h);
        assert_near(at.t, (up.value - down.value) / (2.0 * h), 1e-6 * fabs(at.value / T), "central difference");
        assert_near(at.tt, (up.t - down.t) / (2.0 * h), 1e-6 * fabs(at.value / (T * T)), "central difference");
        assert_near(B.t, (B_up.value - B_down.value) / (2.0 * h), 1e-6 * fabs(B.t) + 1e-14, "central difference");
        assert_near(B.tt, (B_up.t - B_down.t) / (2.0 * h), 1e-6 * fabs(B.tt) + 1e-16, "central difference");
    }
}

/* ---- the equations ----------------------------------------------------------------------------------------------- */

static const struct fluid *pure_of(const char *method, enum gas gas, struct arena *arena)
{
    return sample_pure(method, &GAS[gas], arena);
}

static void the_two_forms_are_their_closed_forms(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.6}, T = 300.0, RT = GAS_CONSTANT * T, p = 1.2e6;
    const struct virial_constants gas = constants_of(METHANE_);
    const double B = virial_second(VIRIAL_TSONOPOULOS, &gas, T).value, C = virial_third(&gas, T).value;
    struct pure_arrays arrays;
    struct phase phase;
    phase_of_pure(&phase, &arrays);
    struct fluid_at_t *at_t = sample_at_t(pure_of("virial-tsonopoulos", METHANE_, arena), T, arena);
    assert_int_equal(phase_tp(at_t, p, n, BRANCH_STABLE, PHASE_LN_PHI, &phase), ANSWER_OK);
    const double rho = n[0] / phase.volume;
    assert_close(RT * rho * (1.0 + rho * (B + rho * C)), p, 1e-13, "the series");
    assert_close(arrays.ln_phi, 2.0 * B * rho + 1.5 * C * rho * rho - log(phase.Z), 1e-12, "its ln phi");
    at_t = sample_at_t(pure_of("virial-tsonopoulos-pressure", METHANE_, arena), T, arena);
    assert_int_equal(phase_tp(at_t, p, n, BRANCH_STABLE, PHASE_LN_PHI, &phase), ANSWER_OK);
    assert_close(phase.Z, 1.0 + B * p / RT, 1e-14, "the series");
    assert_close(arrays.ln_phi, B * p / RT, 1e-13, "its ln phi");
    arena_free(arena);
}

static void there_is_no_liquid_and_an_end(void **state)
{
    (void)state;
    static const struct {
        const char *method;
        enum gas gas;
        double T, p;
        enum answer answer;
    } cases[] = {
        {"virial-tsonopoulos", NITROGEN_, 288.0, 1.5e7, ANSWER_OK},
        {"virial-tsonopoulos", NITROGEN_, 288.0, 4e7, ANSWER_OUT_OF_RANGE}, /* beyond 0.75 rho_c */
        {"virial-pitzer-abbott", PROPANE_, 300.0, 9e5, ANSWER_OK},
        {"virial-pitzer-abbott", PROPANE_, 300.0, 5e6, ANSWER_OUT_OF_RANGE}, /* beyond its spinodal */
        {"virial-tsonopoulos-pressure", NITROGEN_, 288.0, 3.8e6, ANSWER_OK}, /* to 3.875 MPa = (T / 2) pc / Tc */
        {"virial-tsonopoulos-pressure", NITROGEN_, 288.0, 3.9e6, ANSWER_OUT_OF_RANGE},
    };
    struct arena *arena = arena_create(NULL);
    const double n[] = {1.0};
    for (size_t k = 0; k < COUNT(cases); k++) {
        struct fluid_at_t *at_t = sample_at_t(pure_of(cases[k].method, cases[k].gas, arena), cases[k].T, arena);
        struct phase phase = {.ln_phi = NULL};
        assert_int_equal(at_t->fluid->ops->capabilities & CAN_LIQUID, 0);
        assert_int_equal(phase_tp(at_t, cases[k].p, n, BRANCH_STABLE, 0, &phase), cases[k].answer);
        assert_int_equal(phase_tp(at_t, 1e5, n, BRANCH_LIQUID, 0, &phase), ANSWER_NO_SUCH_ROOT);
    }
    struct fluid_at_t *at_t = sample_at_t(pure_of("virial-tsonopoulos-pressure", NITROGEN_, arena), 288.0, arena);
    struct phase phase = {.ln_phi = NULL};
    assert_int_equal(phase_tv(at_t, 1e-4, n, 0, &phase), ANSWER_OUT_OF_RANGE);
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(second_coefficients_meet_the_measured_ones),
        cmocka_unit_test(second_coefficients_meet_the_reference_equations),
        cmocka_unit_test(cross_coefficients_meet_the_derived_ones),
        cmocka_unit_test(the_tables_hold_many_gases_and_pairs),
        cmocka_unit_test(correlations_agree_with_hand_evaluation),
        cmocka_unit_test(third_coefficients_are_near_those_of_reference_equations),
        cmocka_unit_test(coefficients_have_the_slopes_they_say),
        cmocka_unit_test(the_two_forms_are_their_closed_forms),
        cmocka_unit_test(there_is_no_liquid_and_an_end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
