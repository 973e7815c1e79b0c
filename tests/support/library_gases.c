#include "support/library_gases.h"

/* One line of constants and its source for each gas. The acentric factors follow from the sources' vapour pressures. */
#define GAS(word, Tc, pc, omega)                                                                                     \
    {                                                                                                                \
        .name = (word), .molar_mass = 0.03, .critical_temperature = {true, (Tc)}, .critical_pressure = {true, (pc)}, \
        .acentric = {                                                                                                \
            true,                                                                                                    \
            (omega)                                                                                                  \
        }                                                                                                            \
    }

const struct pure_spec LIBRARY_GAS[LIBRARY_GASES] = {
    /* Leachman et al. 2009 */
    GAS("hydrogen", 33.145, 1296400.0, -0.2187),
    GAS("parahydrogen", 32.938, 1285800.0, -0.2186),
    /* Richardson et al. 2014 */
    GAS("deuterium", 38.34, 1679600.0, -0.1363),
    /* Ortiz Vega et al. 2023 */
    GAS("helium", 5.1953, 228326.07, -0.3835),
    /* Thol et al. 2019 */
    GAS("neon", 44.4, 2661630.8, -0.0355),
    /* Tegeler et al. 1999 */
    GAS("argon", 150.687, 4863000.0, -0.0022),
    /* Lemmon & Span 2006 */
    GAS("krypton", 209.48, 5525000.0, -0.0009),
    GAS("xenon", 289.733, 5842000.0, 0.0036),
    /* Span et al. 2000 */
    GAS("nitrogen", 126.192, 3395800.0, 0.0372),
    /* Schmidt & Wagner 1985; Stewart et al. 1991 */
    GAS("oxygen", 154.581, 5043000.0, 0.0222),
    /* de Reuck 1990 */
    GAS("fluorine", 144.414, 5172400.0, 0.0449),
    /* Lemmon & Span 2006 */
    GAS("carbon-monoxide", 132.86, 3494000.0, 0.0497),
    /* Tc: Mathews 1972; pc: Mathews 1972; Vc: Mathews 1972 */
    GAS("nitric-oxide", 180.0, 6484800.0, 0.588),
    /* Setzmann & Wagner 1991 */
    GAS("methane", 190.564, 4599200.0, 0.0114),
    /* Tc: Mathews 1972; pc: Mathews 1972; Vc: Horstmann et al. 2005 */
    GAS("nitrogen-trifluoride", 234.0, 4529228.0, 0.1327),
    /* Platzer et al. 1990 */
    GAS("r14", 227.51, 3750000.0, 0.1785),
    /* Span & Wagner 1996 */
    GAS("carbon-dioxide", 304.1282, 7377300.0, 0.2249),
    /* Lemmon & Span 2006 */
    GAS("nitrous-oxide", 309.52, 7245000.0, 0.1622),
    /* Buecker & Wagner 2006 */
    GAS("ethane", 305.322, 4872200.0, 0.0995),
    /* Smukala et al. 2000 */
    GAS("ethylene", 282.35, 5041800.0, 0.0866),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("acetylene", 308.3, 6138000.0, 0.1911),
    /* Thol et al. 2018 */
    GAS("hydrogen-chloride", 324.55, 8291521.2, 0.1297),
    /* Tc: Mathews 1972; pc: Mathews 1972; Vc: Horstmann et al. 2005 */
    GAS("hydrogen-bromide", 363.2, 8551830.0, 0.063),
    GAS("hydrogen-iodide", 424.0, 8308650.0, 0.05),
    /* Guder & Wagner 2009 */
    GAS("sulfur-hexafluoride", 318.7232, 3754983.0, 0.2185),
    /* Penoncello et al. 2003 */
    GAS("r23", 299.293, 4832000.0, 0.263),
    /* Platzer et al. 1990 */
    GAS("r13", 301.88, 3879000.0, 0.1753),
    /* Lemmon & Span 2006 */
    GAS("r116", 293.03, 3048000.0, 0.2566),
    GAS("r41", 317.28, 5897000.0, 0.1997),
    /* Akasaka et al. 2026 */
    GAS("r1132a", 302.62, 4460494.4, 0.177),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("vinyl-fluoride", 328.5, 5200000.0, 0.1555),
    /* Tc: Horstmann et al. 2005; pc: Horstmann et al. 2005 */
    GAS("silane", 269.0, 4855494.0, 0.0993),
    /* Tc: Mathews 1972; pc: Mathews 1972 */
    GAS("phosphine", 324.8, 6535462.0, 0.0446),
    GAS("diborane", 289.8, 4053000.0, 0.138),
    GAS("boron-trifluoride", 260.8, 4985190.0, 0.3872),
    GAS("boron-trichloride", 452.0, 3870615.0, 0.1474),
    /* Gao et al. 2023 */
    GAS("ammonia", 405.56, 11363391.0, 0.2557),
    /* Thol et al. 2021 */
    GAS("chlorine", 416.8654, 7642387.5, 0.07),
    /* Gao et al. 2016 */
    GAS("sulfur-dioxide", 430.64, 7886587.6, 0.2561),
    /* Lemmon & Span 2006 */
    GAS("hydrogen-sulfide", 373.1, 9000000.0, 0.1005),
    GAS("carbonyl-sulfide", 378.77, 6370000.0, 0.0978),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("methyl-mercaptan", 470.0, 7230000.0, 0.1502),
    GAS("hydrogen-cyanide", 457.0, 5400000.0, 0.407),
    /* Tc: Horstmann et al. 2005; pc: Horstmann et al. 2005; Vc: Horstmann et al. 2005 */
    GAS("nitrogen-dioxide", 431.0, 10132500.0, 0.8555),
    /* Tc: Mathews 1972; pc: Mathews 1972; Vc: Mathews 1972 */
    GAS("phosgene", 455.0, 5674200.0, 0.1984),
    /* Tc: Mathews 1972; pc: Horstmann et al. 2005; Vc: Horstmann et al. 2005 */
    GAS("nitrosyl-chloride", 440.0, 9119250.0, 0.318),
    /* Lemmon et al. 2009 */
    GAS("propane", 369.89, 4251200.0, 0.1521),
    /* Lemmon et al. 2010 */
    GAS("propylene", 364.211, 4555000.0, 0.1461),
    /* Polt et al. 1992 */
    GAS("propyne", 402.38, 5626000.0, 0.2036),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: CRC Handbook */
    GAS("propadiene", 394.0, 5250000.0, 0.1393),
    /* Polt et al. 1992 */
    GAS("cyclopropane", 398.3, 5579700.0, 0.1306),
    /* Buecker & Wagner 2006 */
    GAS("n-butane", 425.125, 3796000.0, 0.2008),
    GAS("isobutane", 407.817, 3629000.0, 0.1835),
    /* Lemmon & Ihmels 2005 */
    GAS("1-butene", 419.29, 4005100.0, 0.1919),
    GAS("isobutene", 418.09, 4009800.0, 0.1926),
    GAS("cis-2-butene", 435.75, 4225500.0, 0.2024),
    GAS("trans-2-butene", 428.61, 4027300.0, 0.2101),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("1-3-butadiene", 425.0, 4320000.0, 0.1944),
    /* Lemmon & Span 2006 */
    GAS("neopentane", 433.74, 3196000.0, 0.1961),
    /* Wu et al. 2011 */
    GAS("dimethyl-ether", 400.378, 5336800.0, 0.1961),
    /* Thol et al. 2015; Thol et al. 2015; Thol 2015 */
    GAS("ethylene-oxide", 468.92, 7304686.2, 0.2102),
    /* Thol et al. 2014 */
    GAS("r40", 416.3, 6671687.0, 0.1501),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: CRC Handbook */
    GAS("ethyl-chloride", 460.0, 5200000.0, 0.1887),
    /* Tc: Horstmann et al. 2005; pc: Horstmann et al. 2005; Vc: Horstmann et al. 2005 */
    GAS("methyl-bromide", 467.0, 8265790.0, 0.2039),
    /* Thol et al. 2022 */
    GAS("vinyl-chloride", 425.0, 5600300.0, 0.1601),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("methylamine", 430.8, 7620000.0, 0.2896),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: CRC Handbook */
    GAS("dimethylamine", 437.2, 5340000.0, 0.2974),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("trimethylamine", 433.0, 4080000.0, 0.2027),
    GAS("ethylamine", 456.0, 5600000.0, 0.2817),
    /* Tillner-Roth & Baehr 1994 */
    GAS("r134a", 374.21, 4059280.0, 0.3268),
    /* Tillner-Roth & Yokozeki 1997 */
    GAS("r32", 351.255, 5782000.0, 0.2769),
    /* Lemmon & Jacobsen 2005 */
    GAS("r125", 339.173, 3617700.0, 0.3052),
    /* Lemmon & Jacobsen 2000 */
    GAS("r143a", 345.857, 3761000.0, 0.2615),
    /* Outcalt & McLinden 1996 */
    GAS("r152a", 386.411, 4520000.0, 0.2755),
    /* Wu & Zhou 2012 */
    GAS("r161", 375.25, 5010000.0, 0.2162),
    /* Kamei et al. 1995 */
    GAS("r22", 369.295, 4990000.0, 0.2208),
    /* Platzer et al. 1990 */
    GAS("r21", 451.48, 5181200.0, 0.2061),
    /* Marx et al. 1992 */
    GAS("r12", 385.12, 4136100.0, 0.1795),
    /* Jacobsen et al. 1992 */
    GAS("r11", 471.06, 4394000.0, 0.1878),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("r13b1", 340.1, 3960000.0, 0.1687),
    /* Platzer et al. 1990 */
    GAS("r114", 418.83, 3257000.0, 0.2523),
    /* Lemmon & Span 2016 */
    GAS("r115", 353.1, 3129037.0, 0.2484),
    /* de Vries et al. 1995 */
    GAS("r124", 395.425, 3624295.0, 0.2881),
    /* Lemmon & Span 2006 */
    GAS("r142b", 410.26, 4055000.0, 0.2321),
    /* Younglove 1994 */
    GAS("r123", 456.831, 3672000.0, 0.2831),
    /* Lemmon & Span 2006 */
    GAS("r141b", 477.5, 4212000.0, 0.2195),
    GAS("r218", 345.02, 2640000.0, 0.3172),
    /* Platzer et al. 1990 */
    GAS("rc318", 388.38, 2777500.0, 0.3553),
    /* Tc: IUPAC critical-property series (Ambrose, Tsonopoulos et al. 1995-2015); pc: IUPAC critical-property */
    /* series (Ambrose, Tsonopoulos et al. 1995-2015); Vc: IUPAC critical-property series (Ambrose, Tsonopoulos et */
    /* al. 1995-2015) */
    GAS("r1114", 307.0, 3940000.0, 0.2186),
    /* Lemmon & Span 2016 */
    GAS("r227ea", 374.9, 2925242.2, 0.3576),
    /* Pan et al. 2012 */
    GAS("r236fa", 398.07, 3200000.0, 0.3769),
    /* Akasaka et al. 2015 */
    GAS("r245fa", 427.01, 3651000.0, 0.3783),
    /* Lemmon & Akasaka 2022 */
    GAS("r1234yf", 367.85, 3384400.0, 0.2764),
    /* Thol & Lemmon 2016 */
    GAS("r1234ze-e", 382.52, 3635376.3, 0.3131),
    /* Akasaka & Lemmon 2025 */
    GAS("r1243zf", 376.93, 3513700.0, 0.2595),
    /* Akasaka & Lemmon 2022 */
    GAS("r1233zd-e", 438.86, 3582800.0, 0.3037),
    /* Lemmon & Span 2016 */
    GAS("r13i1", 396.44, 3952566.1, 0.1762),
    /* Wagner & Pruß 2002 */
    GAS("water", 647.096, 22064000.0, 0.3443),
    /* Thol et al. 2012 */
    GAS("benzene", 562.02, 4894000.0, 0.2097),
    /* Lemmon & Span 2006 */
    GAS("toluene", 591.75, 4126000.0, 0.2657),
    /* Thol et al. 2019 */
    GAS("n-pentane", 469.7, 3367519.0, 0.251),
    /* Lemmon & Span 2006 */
    GAS("isopentane", 460.35, 3378000.0, 0.2274),
    /* Thol et al. 2019 */
    GAS("n-hexane", 507.82, 3044115.3, 0.3003),
    /* Lemmon & Span 2006 */
    GAS("isohexane", 497.7, 3040000.0, 0.2797),
    /* Span & Wagner 2003 */
    GAS("n-heptane", 540.13, 2736000.0, 0.3494),
    /* Beckmueller et al. 2019 */
    GAS("n-octane", 568.74, 2483591.2, 0.3975),
    /* Lemmon & Span 2006 */
    GAS("n-nonane", 594.55, 2281000.0, 0.4433),
    GAS("n-decane", 617.7, 2103000.0, 0.4884),
    /* Gedanitz et al. 2015 */
    GAS("cyclopentane", 511.72, 4582761.2, 0.2019),
    /* Zhou et al. 2014 */
    GAS("cyclohexane", 553.6, 4082400.0, 0.2098),
    /* de Reuck & Craven 1993 */
    GAS("methanol", 512.5, 8089818.7, 0.5649),
    /* Schroeder et al. 2014 */
    GAS("ethanol", 514.71, 6268000.0, 0.6461),
    /* Lemmon & Span 2006 */
    GAS("acetone", 508.1, 4700000.0, 0.3071),
    /* Thol et al. 2014 */
    GAS("diethyl-ether", 466.7, 3646618.8, 0.2816),
    /* Tc: Horstmann et al. 2005; pc: Horstmann et al. 2005; Vc: IUPAC critical-property series (Ambrose, */
    /* Tsonopoulos et al. 1995-2015) */
    GAS("acetaldehyde", 461.0, 5572875.0, 0.3023),
    /* Tc: Mathews 1972; pc: Mathews 1972; Vc: Mathews 1972 */
    GAS("carbon-disulfide", 552.0, 7903350.0, 0.1212),
    /* Zhou et al. 2012 */
    GAS("o-xylene", 630.259, 3737500.0, 0.3118),
    GAS("m-xylene", 616.89, 3534600.0, 0.3261),
    GAS("p-xylene", 616.168, 3531500.0, 0.324),
    GAS("ethylbenzene", 617.12, 3622400.0, 0.305),
};
