/* Reference equations carried by hand for the tests, so that they need no deck: every kind of residual and ideal term
 * is among them. Figures from the papers named; the saturation fits are fits to the equations, for starting values. */
#include "support/reference_data.h"

#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof *(array))

/* The terms' members in the order of the papers' tables. */
#define POWER(n_, t_, d_, l_)                                              \
    {                                                                      \
        .kind = RESIDUAL_POWER, .n = (n_), .t = (t_), .d = (d_), .l = (l_) \
    }
#define EXPONENTIAL(n_, t_, d_, g_, l_)                                                     \
    {                                                                                       \
        .kind = RESIDUAL_EXPONENTIAL, .n = (n_), .t = (t_), .d = (d_), .g = (g_), .l = (l_) \
    }
#define GAUSSIAN(n_, t_, d_, eta_, epsilon_, beta_, gamma_)                                               \
    {                                                                                                     \
        .kind = RESIDUAL_GAUSSIAN, .n = (n_), .t = (t_), .d = (d_), .eta = (eta_), .epsilon = (epsilon_), \
        .beta = (beta_), .gamma = (gamma_)                                                                \
    }
#define INVERSE_GAUSSIAN(n_, t_, d_, eta_, epsilon_, beta_, gamma_, b_)                                           \
    {                                                                                                             \
        .kind = RESIDUAL_INVERSE_GAUSSIAN, .n = (n_), .t = (t_), .d = (d_), .eta = (eta_), .epsilon = (epsilon_), \
        .beta = (beta_), .gamma = (gamma_), .b = (b_)                                                             \
    }
#define DOUBLE(n_, t_, d_, gd_, ld_, gt_, lt_)                                                                       \
    {                                                                                                                \
        .kind = RESIDUAL_DOUBLE_EXPONENTIAL, .n = (n_), .t = (t_), .d = (d_), .gd = (gd_), .ld = (ld_), .gt = (gt_), \
        .lt = (lt_)                                                                                                  \
    }
#define NONANALYTIC(n_, a_, b_, beta_, A_, B_, C_, E_)                                                        \
    {                                                                                                         \
        .kind = RESIDUAL_NONANALYTIC, .n = (n_), .a = (a_), .b = (b_), .beta = (beta_), .A = (A_), .B = (B_), \
        .C = (C_), .E = (E_)                                                                                  \
    }

/* R. Span and W. Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509-1596. */
static const struct residual_term carbon_dioxide_residual[] = {
    POWER(0.388568232032, 0, 1, 0),
    POWER(2.93854759427, 0.75, 1, 0),
    POWER(-5.5867188535, 1, 1, 0),
    POWER(-0.767531995925, 2, 1, 0),
    POWER(0.317290055804, 0.75, 2, 0),
    POWER(0.548033158978, 2, 2, 0),
    POWER(0.122794112203, 0.75, 3, 0),
    POWER(2.16589615432, 1.5, 1, 1),
    POWER(1.58417351097, 1.5, 2, 1),
    POWER(-0.231327054055, 2.5, 4, 1),
    POWER(0.0581169164314, 0, 5, 1),
    POWER(-0.553691372054, 1.5, 5, 1),
    POWER(0.489466159094, 2, 5, 1),
    POWER(-0.0242757398435, 0, 6, 1),
    POWER(0.0624947905017, 1, 6, 1),
    POWER(-0.121758602252, 2, 6, 1),
    POWER(-0.370556852701, 3, 1, 2),
    POWER(-0.0167758797004, 6, 1, 2),
    POWER(-0.11960736638, 3, 4, 2),
    POWER(-0.0456193625088, 6, 4, 2),
    POWER(0.0356127892703, 8, 4, 2),
    POWER(-0.00744277271321, 6, 7, 2),
    POWER(-0.00173957049024, 0, 8, 2),
    POWER(-0.0218101212895, 7, 2, 3),
    POWER(0.0243321665592, 12, 3, 3),
    POWER(-0.0374401334235, 16, 3, 3),
    POWER(0.143387157569, 22, 5, 4),
    POWER(-0.134919690833, 24, 5, 4),
    POWER(-0.0231512250535, 16, 6, 4),
    POWER(0.0123631254929, 24, 7, 4),
    POWER(0.00210583219729, 8, 8, 4),
    POWER(-0.000339585190264, 2, 10, 4),
    POWER(0.00559936517716, 28, 4, 5),
    POWER(-0.000303351180556, 14, 8, 6),
    GAUSSIAN(-213.654886883, 1, 2, 25, 1, 325, 1.16),
    GAUSSIAN(26641.5691493, 0, 2, 25, 1, 300, 1.19),
    GAUSSIAN(-24027.2122046, 1, 2, 25, 1, 300, 1.19),
    GAUSSIAN(-283.41603424, 3, 3, 15, 1, 275, 1.25),
    GAUSSIAN(212.472844002, 3, 3, 20, 1, 275, 1.22),
    NONANALYTIC(-0.666422765408, 3.5, 0.875, 0.3, 0.7, 0.3, 10, 275),
    NONANALYTIC(0.726086323499, 3.5, 0.925, 0.3, 0.7, 0.3, 10, 275),
    NONANALYTIC(0.0550686686128, 3, 0.875, 0.3, 0.7, 1, 12.5, 275),
};

static const struct ideal_term carbon_dioxide_ideal[] = {
    {.kind = IDEAL_LEAD, .a = 8.37304456, .b = -3.70454304},
    {.kind = IDEAL_LOG_TAU, .a = 2.5},
    {.kind = IDEAL_EINSTEIN, .a = 1.99427042, .b = 3.15163},
    {.kind = IDEAL_EINSTEIN, .a = 0.62105248, .b = 6.1119},
    {.kind = IDEAL_EINSTEIN, .a = 0.41195293, .b = 6.77708},
    {.kind = IDEAL_EINSTEIN, .a = 1.04028922, .b = 11.32384},
    {.kind = IDEAL_EINSTEIN, .a = 0.08327678, .b = 27.08792},
    {.kind = IDEAL_LEAD, .a = -14.4979156224319, .b = 8.82013935801453},
};

static const double carbon_dioxide_pressure[][2] = {
    {-5.867399337600407, 0.983}, {-7.10969550015274, 1.322},  {11.022781986239263, 1.488},
    {4.8260764050219995, 2.807}, {-6.240803382557819, 3.571}, {-6.7009642572439, 1.941},
};
static const double carbon_dioxide_liquid[][2] = {
    {0.861951794789174, 0.264}, {5.535795098719573, 0.672},   {-21.766373764605415, 0.986},
    {20.01416999278327, 1.092}, {-2.2218647220786862, 1.714}, {888.2387848519858, 9.902},
};
static const double carbon_dioxide_vapour[][2] = {
    {-1.1635587811569494, 0.306}, {-3.64216164754343, 0.569},   {2.7773118075713237, 0.677},
    {-3.2573848494624533, 0.891}, {-1.9739104682508852, 3.206}, {-16.057319994659142, 6.093},
};

static const struct reference_spec carbon_dioxide = {
    .gas_constant = 8.31451,
    .reducing_temperature = 304.1282,
    .reducing_density = 10624.9063,
    .residual_count = COUNT(carbon_dioxide_residual),
    .residual = carbon_dioxide_residual,
    .ideal_count = COUNT(carbon_dioxide_ideal),
    .ideal = carbon_dioxide_ideal,
    .critical_temperature = 304.1282,
    .critical_pressure = 7377300,
    .critical_density = 10624.9063,
    .smallest_temperature = 216.592,
    .largest_temperature = 2000,
    .largest_pressure = 800000000,
    .pressure_guess = {GUESS_EXP_TAU, 304.1282, 7377300, COUNT(carbon_dioxide_pressure), carbon_dioxide_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 304.1282, 10624.906299999999, COUNT(carbon_dioxide_liquid), carbon_dioxide_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 304.1282, 10624.906299999999, COUNT(carbon_dioxide_vapour), carbon_dioxide_vapour},
};

/* Roland Span and Eric W. Lemmon and Richard T. Jacobsen and Wolfgang Wagner and Akimichi Yokozeki, J. Phys. Chem.
Ref. Data 29 (2000) 1361-1433. */
static const struct residual_term nitrogen_residual[] = {
    POWER(0.924803575275, 0.25, 1, 0),
    POWER(-0.492448489428, 0.875, 1, 0),
    POWER(0.661883336938, 0.5, 2, 0),
    POWER(-1.92902649201, 0.875, 2, 0),
    POWER(-0.0622469309629, 0.375, 3, 0),
    POWER(0.349943957581, 0.75, 3, 0),
    POWER(0.564857472498, 0.5, 1, 1),
    POWER(-1.61720005987, 0.75, 1, 1),
    POWER(-0.481395031883, 2, 1, 1),
    POWER(0.421150636384, 1.25, 3, 1),
    POWER(-0.0161962230825, 3.5, 3, 1),
    POWER(0.172100994165, 1, 4, 1),
    POWER(0.00735448924933, 0.5, 6, 1),
    POWER(0.0168077305479, 3, 6, 1),
    POWER(-0.00107626664179, 0, 7, 1),
    POWER(-0.0137318088513, 2.75, 7, 1),
    POWER(0.000635466899859, 0.75, 8, 1),
    POWER(0.00304432279419, 2.5, 8, 1),
    POWER(-0.0435762336045, 4, 1, 2),
    POWER(-0.0723174889316, 6, 2, 2),
    POWER(0.0389644315272, 6, 3, 2),
    POWER(-0.021220136391, 3, 4, 2),
    POWER(0.00408822981509, 3, 5, 2),
    POWER(-5.51990017984e-05, 6, 8, 2),
    POWER(-0.0462016716479, 16, 4, 3),
    POWER(-0.00300311716011, 11, 5, 3),
    POWER(0.0368825891208, 15, 5, 3),
    POWER(-0.0025585684622, 12, 8, 3),
    POWER(0.00896915264558, 12, 3, 4),
    POWER(-0.0044151337035, 7, 5, 4),
    POWER(0.00133722924858, 4, 6, 4),
    POWER(0.000264832491957, 16, 9, 4),
    GAUSSIAN(19.6688194015, 0, 1, 20, 1, 325, 1.16),
    GAUSSIAN(-20.911560073, 1, 1, 20, 1, 325, 1.16),
    GAUSSIAN(0.0167788306989, 2, 3, 15, 1, 300, 1.13),
    GAUSSIAN(2627.67566274, 3, 2, 25, 1, 275, 1.25),
};

static const struct ideal_term nitrogen_ideal[] = {
    {.kind = IDEAL_LEAD, .a = -12.76952708, .b = -0.00784163},
    {.kind = IDEAL_LOG_TAU, .a = 2.5},
    {.kind = IDEAL_POWER, .a = -0.0001934819, .b = -1},
    {.kind = IDEAL_POWER, .a = -1.247742e-05, .b = -2},
    {.kind = IDEAL_POWER, .a = 6.678326e-08, .b = -3},
    {.kind = IDEAL_EINSTEIN, .a = 1.012941, .b = 26.657878470901483},
};

static const double nitrogen_pressure[][2] = {
    {7.557523110967278, 0.945},  {-15.31423072093374, 0.976}, {2.530452363947435, 1.134},
    {-3.5464937257192077, 4.43}, {2.4443140451500853, 4.942}, {-1.089727092432518, 6.222},
};
static const double nitrogen_liquid[][2] = {
    {3.423788275604014, 0.396},   {-2.9664673074957677, 0.549}, {12.095926119341373, 1.037},
    {-13.681823050784574, 1.209}, {4.19110684294756, 1.682},    {-0.6241396008655289, 2.819},
};
static const double nitrogen_vapour[][2] = {
    {-2.412387653165135, 0.369}, {1.2535963572601478, 0.556}, {-6.375300212535008, 0.878},
    {3.257106728291224, 1.049},  {-3.263645679265735, 4.174}, {1.2673447905058262, 6.303},
};

static const struct reference_spec nitrogen = {
    .gas_constant = 8.31451,
    .reducing_temperature = 126.192,
    .reducing_density = 11183.901464580624,
    .residual_count = COUNT(nitrogen_residual),
    .residual = nitrogen_residual,
    .ideal_count = COUNT(nitrogen_ideal),
    .ideal = nitrogen_ideal,
    .critical_temperature = 126.192,
    .critical_pressure = 3395800.44,
    .critical_density = 11183.9015,
    .smallest_temperature = 63.151,
    .largest_temperature = 2000,
    .largest_pressure = 2200000000.0,
    .pressure_guess = {GUESS_EXP_TAU, 126.192, 3395800, COUNT(nitrogen_pressure), nitrogen_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 126.192, 11183.901464580624, COUNT(nitrogen_liquid), nitrogen_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 126.192, 11183.901464580624, COUNT(nitrogen_vapour), nitrogen_vapour},
};

/* Eric W. Lemmon and Mark O. McLinden and Wolfgang Wagner, J. Chem. Eng. Data 54 (2009) 3141-3180. */
static const struct residual_term propane_residual[] = {
    POWER(0.042910051, 1, 4, 0),
    POWER(1.7313671, 0.33, 1, 0),
    POWER(-2.4516524, 0.8, 1, 0),
    POWER(0.34157466, 0.43, 2, 0),
    POWER(-0.46047898, 0.9, 2, 0),
    POWER(-0.66847295, 2.46, 1, 1),
    POWER(0.20889705, 2.09, 3, 1),
    POWER(0.19421381, 0.88, 6, 1),
    POWER(-0.22917851, 1.09, 6, 1),
    POWER(-0.60405866, 3.25, 2, 2),
    POWER(0.066680654, 4.62, 3, 2),
    GAUSSIAN(0.017534618, 0.76, 1, 0.963, 1.283, 2.33, 0.684),
    GAUSSIAN(0.33874242, 2.5, 1, 1.977, 0.6936, 3.47, 0.829),
    GAUSSIAN(0.22228777, 2.75, 1, 1.917, 0.788, 3.15, 1.419),
    GAUSSIAN(-0.23219062, 3.05, 2, 2.307, 0.473, 3.19, 0.817),
    GAUSSIAN(-0.09220694, 2.55, 2, 2.546, 0.8577, 0.92, 1.5),
    GAUSSIAN(-0.47575718, 8.4, 4, 3.28, 0.271, 18.8, 1.426),
    GAUSSIAN(-0.017486824, 6.75, 1, 14.6, 0.948, 547.8, 1.093),
};

static const struct ideal_term propane_ideal[] = {
    {.kind = IDEAL_LEAD, .a = -4.970583, .b = 4.29352},  {.kind = IDEAL_LOG_TAU, .a = 3},
    {.kind = IDEAL_EINSTEIN, .a = 3.043, .b = 1.062478}, {.kind = IDEAL_EINSTEIN, .a = 5.874, .b = 3.344237},
    {.kind = IDEAL_EINSTEIN, .a = 9.337, .b = 5.363757}, {.kind = IDEAL_EINSTEIN, .a = 7.922, .b = 11.762957},
};

static const double propane_pressure[][2] = {
    {-23.998635747391152, 1.05},  {18.313017605233238, 1.084}, {-0.42240851966839504, 2.259},
    {-2.7378298813798962, 4.287}, {0.257888414168987, 7.66},   {-1.3113462226130785, 18.584},
};
static const double propane_liquid[][2] = {
    {2.104068052280433, 0.368},  {0.3371892411622086, 0.875}, {0.4401223810964251, 3.009},
    {-3.5679018989260567, 9.51}, {59.93889697061387, 15.381}, {-70.9402469085883, 17.001},
};
static const double propane_vapour[][2] = {
    {-3.401360845132903, 0.431},  {-1.9443653795380451, 1.339}, {-0.4101211459709529, 2.091},
    {-15.598374206544214, 6.822}, {15.844867806184942, 8.214},  {-15.298907422332046, 19.706},
};

static const struct reference_spec propane = {
    .gas_constant = 8.314472,
    .reducing_temperature = 369.89,
    .reducing_density = 5000.000000000001,
    .residual_count = COUNT(propane_residual),
    .residual = propane_residual,
    .ideal_count = COUNT(propane_ideal),
    .ideal = propane_ideal,
    .critical_temperature = 369.890009,
    .critical_pressure = 4251165.33,
    .critical_density = 5000.0006,
    .smallest_temperature = 85.525,
    .largest_temperature = 650,
    .largest_pressure = 1000000000.0,
    .pressure_guess = {GUESS_EXP_TAU, 369.89, 4251200, COUNT(propane_pressure), propane_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 369.89, 5000.000000000001, COUNT(propane_liquid), propane_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 369.89, 5000.000000000001, COUNT(propane_vapour), propane_vapour},
};

/* W. Wagner and A. Pruß, J. Phys. Chem. Ref. Data 31 (2002) 387-535. */
static const struct residual_term water_residual[] = {
    POWER(0.012533547935523, -0.5, 1, 0),
    POWER(7.8957634722828, 0.875, 1, 0),
    POWER(-8.7803203303561, 1, 1, 0),
    POWER(0.31802509345418, 0.5, 2, 0),
    POWER(-0.26145533859358, 0.75, 2, 0),
    POWER(-0.0078199751687981, 0.375, 3, 0),
    POWER(0.0088089493102134, 1, 4, 0),
    POWER(-0.66856572307965, 4, 1, 1),
    POWER(0.20433810950965, 6, 1, 1),
    POWER(-6.6212605039687e-05, 12, 1, 1),
    POWER(-0.19232721156002, 1, 2, 1),
    POWER(-0.25709043003438, 5, 2, 1),
    POWER(0.16074868486251, 4, 3, 1),
    POWER(-0.040092828925807, 2, 4, 1),
    POWER(3.9343422603254e-07, 13, 4, 1),
    POWER(-7.5941377088144e-06, 9, 5, 1),
    POWER(0.00056250979351888, 3, 7, 1),
    POWER(-1.5608652257135e-05, 4, 9, 1),
    POWER(1.1537996422951e-09, 11, 10, 1),
    POWER(3.6582165144204e-07, 4, 11, 1),
    POWER(-1.3251180074668e-12, 13, 13, 1),
    POWER(-6.2639586912454e-10, 1, 15, 1),
    POWER(-0.10793600908932, 7, 1, 2),
    POWER(0.017611491008752, 1, 2, 2),
    POWER(0.22132295167546, 9, 2, 2),
    POWER(-0.40247669763528, 10, 2, 2),
    POWER(0.58083399985759, 10, 3, 2),
    POWER(0.0049969146990806, 3, 4, 2),
    POWER(-0.031358700712549, 7, 4, 2),
    POWER(-0.74315929710341, 10, 4, 2),
    POWER(0.4780732991548, 10, 5, 2),
    POWER(0.020527940895948, 6, 6, 2),
    POWER(-0.13636435110343, 10, 6, 2),
    POWER(0.014180634400617, 10, 7, 2),
    POWER(0.0083326504880713, 1, 9, 2),
    POWER(-0.029052336009585, 2, 9, 2),
    POWER(0.038615085574206, 3, 9, 2),
    POWER(-0.020393486513704, 4, 9, 2),
    POWER(-0.0016554050063734, 8, 9, 2),
    POWER(0.0019955571979541, 6, 10, 2),
    POWER(0.00015870308324157, 9, 10, 2),
    POWER(-1.638856834253e-05, 8, 12, 2),
    POWER(0.043613615723811, 16, 3, 3),
    POWER(0.034994005463765, 22, 4, 3),
    POWER(-0.076788197844621, 23, 4, 3),
    POWER(0.022446277332006, 23, 5, 3),
    POWER(-6.2689710414685e-05, 10, 14, 4),
    POWER(-5.5711118565645e-10, 50, 3, 6),
    POWER(-0.19905718354408, 44, 6, 6),
    POWER(0.31777497330738, 46, 6, 6),
    POWER(-0.11841182425981, 50, 6, 6),
    GAUSSIAN(-31.306260323435, 0, 3, 20, 1, 150, 1.21),
    GAUSSIAN(31.546140237781, 1, 3, 20, 1, 150, 1.21),
    GAUSSIAN(-2521.3154341695, 4, 3, 20, 1, 250, 1.25),
    NONANALYTIC(-0.14874640856724, 3.5, 0.85, 0.3, 0.32, 0.2, 28, 700),
    NONANALYTIC(0.31806110878444, 3.5, 0.95, 0.3, 0.32, 0.2, 32, 800),
};

static const struct ideal_term water_ideal[] = {
    {.kind = IDEAL_LEAD, .a = -8.3204464837497, .b = 6.6832105275932},
    {.kind = IDEAL_LOG_TAU, .a = 3.00632},
    {.kind = IDEAL_EINSTEIN, .a = 0.012436, .b = 1.28728967},
    {.kind = IDEAL_EINSTEIN, .a = 0.97315, .b = 3.53734222},
    {.kind = IDEAL_EINSTEIN, .a = 1.2795, .b = 7.74073708},
    {.kind = IDEAL_EINSTEIN, .a = 0.96956, .b = 9.24437796},
    {.kind = IDEAL_EINSTEIN, .a = 0.24873, .b = 27.5075105},
};

static const double water_pressure[][2] = {
    {-9.75639641045262, 1.018},   {3.3357600887120102, 1.206},  {-1.10029278432831, 2.327},
    {0.02037617155190105, 5.753}, {-2.6668589845604367, 4.215}, {6.676721087238668, 14.951},
};
static const double water_liquid[][2] = {
    {0.8157021355019343, 0.276}, {2.0434712177006693, 0.455},   {-78.58278372496308, 7.127},
    {1026.4273940070307, 9.846}, {-2290.5642779377695, 11.707}, {8420.141408210317, 17.805},
};
static const double water_vapour[][2] = {
    {0.9791749335365787, 0.21},   {-2.6190679042770215, 0.262}, {-3.9166443712365235, 0.701},
    {-20.313306821636637, 3.909}, {16.497589490043744, 4.076},  {-125.36580458432083, 17.459},
};

static const struct reference_spec water = {
    .gas_constant = 8.314371357587,
    .reducing_temperature = 647.096,
    .reducing_density = 17873.72799560906,
    .residual_count = COUNT(water_residual),
    .residual = water_residual,
    .ideal_count = COUNT(water_ideal),
    .ideal = water_ideal,
    .critical_temperature = 647.096,
    .critical_pressure = 22064000,
    .critical_density = 17873.72799560906,
    .smallest_temperature = 273.16,
    .largest_temperature = 2000,
    .largest_pressure = 1000000000.0,
    .pressure_guess = {GUESS_EXP_TAU, 647.096, 22064000, COUNT(water_pressure), water_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 647.096, 17873.72799560906, COUNT(water_liquid), water_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 647.096, 17873.72799560906, COUNT(water_vapour), water_vapour},
};

/* K. Gao and J. Wu and I. H. Bell and A. H. Harvey and E. W. Lemmon, J. Phys. Chem. Ref. Data 52 (2023) 013102. */
static const struct residual_term ammonia_residual[] = {
    POWER(0.006132232, 1, 4, 0),
    POWER(1.7395866, 0.382, 1, 0),
    POWER(-2.2261792, 1, 1, 0),
    POWER(-0.30127553, 1, 2, 0),
    POWER(0.08967023, 0.677, 3, 0),
    POWER(-0.076387037, 2.915, 3, 2),
    POWER(-0.84063963, 3.51, 2, 2),
    POWER(-0.27026327, 1.063, 3, 1),
    GAUSSIAN(6.212578, 0.655, 1, 0.42776, -0.0726, 1.708, 1.036),
    GAUSSIAN(-5.7844357, 1.3, 1, 0.6424, -0.1274, 1.4865, 1.2777),
    GAUSSIAN(2.4817542, 3.1, 1, 0.8175, 0.7527, 2.0915, 1.083),
    GAUSSIAN(-2.3739168, 1.4395, 2, 0.7995, 0.57, 2.43, 1.2906),
    GAUSSIAN(0.01493697, 1.623, 2, 0.91, 2.2, 0.488, 0.928),
    GAUSSIAN(-3.7749264, 0.643, 1, 0.3574, -0.243, 1.1, 0.934),
    GAUSSIAN(0.0006254348, 1.13, 3, 1.21, 2.96, 0.85, 0.919),
    GAUSSIAN(-1.7359e-05, 4.5, 3, 4.14, 3.02, 1.14, 1.852),
    GAUSSIAN(-0.13462033, 1, 1, 22.56, 0.9574, 945.64, 1.05897),
    GAUSSIAN(0.07749072839, 4, 1, 22.68, 0.9576, 993.85, 1.05277),
    INVERSE_GAUSSIAN(-1.6909858, 4.3315, 1, 2.8452, 0.4478, 0.3696, 1.108, 1.244),
    INVERSE_GAUSSIAN(0.93739074, 4.015, 1, 2.8342, 0.44689, 0.2962, 1.313, 0.6826),
};

static const struct ideal_term ammonia_ideal[] = {
    {.kind = IDEAL_LEAD, .a = -6.59406093943886, .b = 5.60101151987913},
    {.kind = IDEAL_LOG_TAU, .a = 3},
    {.kind = IDEAL_EINSTEIN, .a = 2.224, .b = 4.0585856593352405},
    {.kind = IDEAL_EINSTEIN, .a = 3.148, .b = 9.776605187888352},
    {.kind = IDEAL_EINSTEIN, .a = 0.9579, .b = 17.829667620080876},
};

static const double ammonia_pressure[][2] = {
    {-7.2257, 1}, {1.4263, 1.5}, {-0.59642, 2}, {-2.798, 3.6}, {-3.7869, 15.5},
};
static const double ammonia_liquid[][2] = {
    {2.447, 0.384}, {5.8341, 1.65}, {-25.944, 2.2}, {53.383, 2.75}, {-54.411, 3.35}, {22.771, 4},
};
static const double ammonia_vapour[][2] = {
    {-0.053296, 0.14}, {-3.4589, 0.44}, {-6.7572, 1.314}, {-17.26, 3.225}, {-43.12, 6.4}, {-115.18, 14},
};

static const struct reference_spec ammonia = {
    .gas_constant = 8.3144598,
    .reducing_temperature = 405.56,
    .reducing_density = 13696,
    .residual_count = COUNT(ammonia_residual),
    .residual = ammonia_residual,
    .ideal_count = COUNT(ammonia_ideal),
    .ideal = ammonia_ideal,
    .critical_temperature = 405.56,
    .critical_pressure = 11363391.16,
    .critical_density = 13695.9997,
    .smallest_temperature = 195.49,
    .largest_temperature = 725,
    .largest_pressure = 1000000000.0,
    .pressure_guess = {GUESS_EXP_TAU, 405.56, 11365000, COUNT(ammonia_pressure), ammonia_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 405.56, 13696, COUNT(ammonia_liquid), ammonia_liquid},
    .vapour_guess = {GUESS_EXP, 405.56, 13696, COUNT(ammonia_vapour), ammonia_vapour},
};

/* Eric W. Lemmon and Richard T Jacobsen, J. Phys. Chem. Ref. Data 34 (2005) 69-108. */
static const struct residual_term r125_residual[] = {
    POWER(5.28076, 0.669, 1, 0),
    POWER(-8.67658, 1.05, 1, 0),
    POWER(0.7501127, 2.75, 1, 0),
    POWER(0.7590023, 0.956, 2, 0),
    POWER(0.01451899, 1, 4, 0),
    POWER(4.777189, 2, 1, 1),
    POWER(-3.330988, 2.75, 1, 1),
    POWER(3.775673, 2.38, 2, 1),
    POWER(-2.290919, 3.37, 2, 1),
    POWER(0.8888268, 3.47, 3, 1),
    POWER(-0.6234864, 2.63, 4, 1),
    POWER(-0.04127263, 3.45, 5, 1),
    POWER(-0.08455389, 0.72, 1, 2),
    POWER(-0.1308752, 4.23, 5, 2),
    POWER(0.008344962, 0.2, 1, 3),
    DOUBLE(-1.532005, 4.5, 2, 1, 2, 1, 1.7),
    DOUBLE(-0.05883649, 29, 3, 1, 3, 1, 7),
    DOUBLE(0.02296658, 24, 5, 1, 3, 1, 6),
};

static const struct ideal_term r125_ideal[] = {
    {.kind = IDEAL_LEAD, .a = 37.2674, .b = 8.88404},   {.kind = IDEAL_LOG_TAU, .a = -1},
    {.kind = IDEAL_POWER, .a = -49.8651, .b = -0.1},    {.kind = IDEAL_EINSTEIN, .a = 2.303, .b = 0.92578},
    {.kind = IDEAL_EINSTEIN, .a = 5.086, .b = 2.22895}, {.kind = IDEAL_EINSTEIN, .a = 7.3, .b = 5.03283},
};

static const double r125_pressure[][2] = {
    {6.579940225415354, 0.885},  {-13.12524401279829, 0.925}, {-10.469172276861269, 3.474},
    {13.618968108873503, 3.812}, {-8.0692357647322, 4.411},   {55.965891794172045, 15.538},
};
static const double r125_liquid[][2] = {
    {2.2016016101218163, 0.356}, {9.66884730895765, 2.347},   {-38.74092529625786, 3.224},
    {45.90185095955414, 4.03},   {-68.77471029167359, 7.525}, {3782.012676140688, 16.03},
};
static const double r125_vapour[][2] = {
    {-2.0301408267555248, 0.352}, {-1.7694859385413004, 0.604}, {-2.66520428063493, 1.327},
    {-2012.3802928260302, 9.866}, {4435.166819598504, 10.986},  {-67300.56720486972, 18.158},
};

static const struct reference_spec r125 = {
    .gas_constant = 8.314472,
    .reducing_temperature = 339.173,
    .reducing_density = 4779,
    .residual_count = COUNT(r125_residual),
    .residual = r125_residual,
    .ideal_count = COUNT(r125_ideal),
    .ideal = r125_ideal,
    .critical_temperature = 339.177282,
    .critical_pressure = 3618276.06,
    .critical_density = 4777.4385,
    .smallest_temperature = 172.52,
    .largest_temperature = 500,
    .largest_pressure = 60000000,
    .pressure_guess = {GUESS_EXP_TAU, 339.173, 3617700, COUNT(r125_pressure), r125_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 339.173, 4779, COUNT(r125_liquid), r125_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 339.173, 4779, COUNT(r125_vapour), r125_vapour},
};

/* K. M. de Reuck, Blackwell Scientific Publications, Oxford, United Kingdom  (1990). */
static const struct residual_term fluorine_residual[] = {
    POWER(1.51144749736, 0, 1, 0),
    POWER(-2.98666288409, 0.5, 1, 0),
    POWER(3.29644905098, 1.5, 1, 0),
    POWER(-2.98458624201, 2, 1, 0),
    POWER(-2.28688966459, 0.5, 2, 0),
    POWER(-1.094921934, 1, 2, 0),
    POWER(3.04775277572, 0.5, 3, 0),
    POWER(0.115689564208, 2, 3, 0),
    POWER(-1.16100171627, 0.5, 4, 0),
    POWER(0.295656394476, 1, 4, 0),
    POWER(0.0711482542928, 0, 5, 0),
    POWER(-0.00171363832155, 0.5, 8, 0),
    POWER(0.000665317955515, 0, 9, 0),
    EXPONENTIAL(5.06026676251, 1, 2, 1.078102576, 2),
    EXPONENTIAL(-6.2926843544, 3, 2, 1.078102576, 2),
    EXPONENTIAL(6.17784808739, 4, 2, 1.078102576, 2),
    EXPONENTIAL(-1.55366191788, 5, 2, 1.078102576, 2),
    EXPONENTIAL(-2.87170687343, 1, 3, 1.078102576, 2),
    EXPONENTIAL(3.17214480494, 4, 3, 1.078102576, 2),
    EXPONENTIAL(-2.67969025215, 5, 3, 1.078102576, 2),
    EXPONENTIAL(2.71865479252, 1, 4, 1.078102576, 2),
    EXPONENTIAL(-1.07191065039, 3, 4, 1.078102576, 2),
    EXPONENTIAL(1.26597342291, 5, 4, 1.078102576, 2),
    EXPONENTIAL(-0.706244695489, 4, 5, 1.078102576, 2),
    EXPONENTIAL(0.268707888826, 4, 6, 1.078102576, 2),
    EXPONENTIAL(0.0527251190274, 1, 7, 1.078102576, 2),
    EXPONENTIAL(0.0544411481926, 1, 8, 1.078102576, 2),
    EXPONENTIAL(0.000228949994105, 5, 12, 1.078102576, 2),
    EXPONENTIAL(-5.479082643040001e-10, 30, 4, 2.156205153, 2),
    EXPONENTIAL(-0.096427322495, 20, 6, 3.234307729, 2),
    EXPONENTIAL(0.000368084486225, 25, 6, 3.234307729, 2),
};

static const struct ideal_term fluorine_ideal[] = {
    {.kind = IDEAL_LEAD, .a = 4.3887271, .b = -16.372517},
    {.kind = IDEAL_LOG_TAU, .a = 2.5011231},
    {.kind = IDEAL_POWER, .a = 3.0717001e-06, .b = -4},
    {.kind = IDEAL_POWER, .a = -5.2985762e-05, .b = -3},
    {.kind = IDEAL_POWER, .a = 3.6884682e-05, .b = 2},
    {.kind = IDEAL_EINSTEIN, .a = 1.012767, .b = 8.9057501},
    {.kind = IDEAL_LEAD, .a = -7.97036812567026, .b = 19.8946542032696},
};

static const double fluorine_pressure[][2] = {
    {-6.268536557, 1},   {1.577204134, 1.5},  {-1.017315818, 2.3},
    {-0.423498131, 3.6}, {-1.333792542, 5.2}, {0.2543900688, 7.3},
};
static const double fluorine_liquid[][2] = {
    {0.6533669553, 0.33}, {3.298403323, 0.6},   {-3.62566732, 0.95},
    {2.747349336, 1.4},   {-0.8677730892, 2.1}, {0.1939945855, 3.2},
};
static const double fluorine_vapour[][2] = {
    {-2.272333335, 0.38}, {-2.693554334, 0.85}, {1.093274146, 1.3},
    {-1.680297446, 2.5},  {-0.8059609497, 4.5}, {-1.691198448, 7.5},
};

static const struct reference_spec fluorine = {
    .gas_constant = 8.31448,
    .reducing_temperature = 144.414,
    .reducing_density = 15603,
    .residual_count = COUNT(fluorine_residual),
    .residual = fluorine_residual,
    .ideal_count = COUNT(fluorine_ideal),
    .ideal = fluorine_ideal,
    .critical_temperature = 144.414428,
    .critical_pressure = 5239516.52,
    .critical_density = 15602.9916,
    .smallest_temperature = 53.4811,
    .largest_temperature = 300,
    .largest_pressure = 20000000,
    .pressure_guess = {GUESS_EXP_TAU, 144.414428, 5239516.52, COUNT(fluorine_pressure), fluorine_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 144.414428, 15602.9916, COUNT(fluorine_liquid), fluorine_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 144.414428, 15602.9916, COUNT(fluorine_vapour), fluorine_vapour},
};

/* Axel Polt and Bernhard Platzer and Gerd Maurer, Chem. Technik 22 (1992) 216-224. */
static const struct residual_term cyclopropane_residual[] = {
    POWER(-1.15634007067133, 0, 1, 0),   POWER(2.52574627508968, 1, 1, 0),    POWER(-2.82266128097357, 2, 1, 0),
    POWER(0.283576801605235, 3, 1, 0),   POWER(-0.0842720496332253, 4, 1, 0), POWER(0.931088565988454, 0, 2, 0),
    POWER(-1.0529683988751, 1, 2, 0),    POWER(0.432021581602768, 2, 2, 0),   POWER(-0.251108864340636, 0, 3, 0),
    POWER(0.127725892482498, 1, 3, 0),   POWER(0.0483622335785703, 0, 4, 0),  POWER(-0.0116474078333994, 1, 4, 0),
    POWER(0.00033400656553506, 1, 5, 0), POWER(-1.37016097592368, 3, 0, 0),   POWER(2.12444673007915, 4, 0, 0),
    POWER(-0.578908942731662, 5, 0, 0),  POWER(0.304945770506538, 3, 2, 2),   POWER(-0.184276165170077, 4, 2, 2),
    POWER(-0.292111460404481, 5, 2, 2),  POWER(1.37016097592368, 3, 0, 2),    POWER(-2.12444673007915, 4, 0, 2),
    POWER(0.578908942731662, 5, 0, 2),
};

static const struct ideal_term cyclopropane_ideal[] = {
    {.kind = IDEAL_LEAD, .a = -0.8063581565655351, .b = -3.64026131609901},
    {.kind = IDEAL_LOG_TAU, .a = 5.378038040672545},
    {.kind = IDEAL_POWER, .a = 9.125099406310419, .b = -1},
    {.kind = IDEAL_POWER, .a = -6.764806428057105, .b = -2},
    {.kind = IDEAL_POWER, .a = 2.058077355606209, .b = -3},
    {.kind = IDEAL_POWER, .a = -0.2581873520089957, .b = -4},
    {.kind = IDEAL_LEAD, .a = -10.9358280454636, .b = 8.75156673092286},
};

static const double cyclopropane_pressure[][2] = {
    {-0.11955219361137283, 0.135}, {0.18406121015183027, 0.181}, {-0.13653132075738866, 0.421},
    {-5.797505519116896, 0.983},   {-20.62240936494475, 6.3},    {-324540.4065607637, 16.644},
};
static const double cyclopropane_liquid[][2] = {
    {0.36728670919821876, 0.109}, {17.39312205196081, 0.951},  {-65.70893634663562, 1.509},
    {917.3256648476147, 2.43},    {-909.8353253919709, 2.535}, {1550.3280904976405, 7.779},
};
static const double cyclopropane_vapour[][2] = {
    {-0.33841331698570076, 0.098}, {-4.9703350919635545, 0.654}, {5.62081036731097, 2.255},
    {-352.4354033337558, 5.732},   {14193580833.179937, 18.195}, {-19206776520.109684, 18.473},
};

static const struct reference_spec cyclopropane = {
    .gas_constant = 8.3143,
    .reducing_temperature = 398.3,
    .reducing_density = 6142.9149,
    .residual_count = COUNT(cyclopropane_residual),
    .residual = cyclopropane_residual,
    .ideal_count = COUNT(cyclopropane_ideal),
    .ideal = cyclopropane_ideal,
    .critical_temperature = 398.692053,
    .critical_pressure = 5605282.6,
    .critical_density = 6116.1782,
    .smallest_temperature = 273,
    .largest_temperature = 473,
    .largest_pressure = 28000000,
    .pressure_guess = {GUESS_EXP_TAU, 398.3, 5579700, COUNT(cyclopropane_pressure), cyclopropane_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 398.3, 6142.9149, COUNT(cyclopropane_liquid), cyclopropane_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 398.3, 6142.9149, COUNT(cyclopropane_vapour), cyclopropane_vapour},
};

/* R. Span and W. Wagner, Int. J. Thermophys. 24 (2003) 41-109. */
static const struct residual_term n_heptane_residual[] = {
    POWER(1.0543748, 0.25, 1, 0),    POWER(-2.6500682, 1.125, 1, 0),    POWER(0.81730048, 1.5, 1, 0),
    POWER(-0.30451391, 1.375, 2, 0), POWER(0.12253869, 0.25, 3, 0),     POWER(0.00027266473, 0.875, 7, 0),
    POWER(0.49865826, 0.625, 2, 1),  POWER(-0.00071432815, 1.75, 5, 1), POWER(-0.54236896, 3.625, 1, 2),
    POWER(-0.13801822, 3.625, 4, 2), POWER(-0.0061595287, 14.5, 3, 3),  POWER(0.0004860251, 12, 4, 3),
};

static const struct ideal_term n_heptane_ideal[] = {
    {.kind = IDEAL_LEAD, .a = 19.488539403602626, .b = -101.85711516983689},
    {.kind = IDEAL_LOG_TAU, .a = 3},
    {.kind = IDEAL_LOG_SINH, .a = 13.7266, .b = 0.3143483976079832},
    {.kind = IDEAL_LOG_SINH, .a = 43.5561, .b = 3.259326458445189},
    {.kind = IDEAL_LOG_COSH, .a = 30.4707, .b = 1.5481365597171053},
    {.kind = IDEAL_LEAD, .a = 12.1096994176959, .b = 0.37483941500785},
};

static const double n_heptane_pressure[][2] = {
    {-0.001547608055848768, 0.006}, {-8.278553452057723, 1.018}, {2.2800315192023684, 1.502},
    {-4.304490300717095, 3.003},    {0.8703765102176411, 6.048}, {-2.80944123395076, 6.315},
};
static const double n_heptane_liquid[][2] = {
    {0.35147807402250625, 0.124}, {4.121792126592887, 0.664},   {-2.4954273570574026, 1.294},
    {2938.5470325829165, 10.615}, {-4682.169465017815, 11.227}, {2501.072581290023, 13.607},
};
static const double n_heptane_vapour[][2] = {
    {-0.29457754530864466, 0.061}, {-7.274148490152896, 0.718}, {75.40064985046571, 1.921},
    {-79.02485215998952, 2.015},   {1.254951249920929, 2.746},  {-6.677464890274236, 9.877},
};

static const struct reference_spec n_heptane = {
    .gas_constant = 8.31451,
    .reducing_temperature = 540.13,
    .reducing_density = 2315.323047444163,
    .residual_count = COUNT(n_heptane_residual),
    .residual = n_heptane_residual,
    .ideal_count = COUNT(n_heptane_ideal),
    .ideal = n_heptane_ideal,
    .critical_temperature = 541.225915,
    .critical_pressure = 2773824.28,
    .critical_density = 2244.4802,
    .smallest_temperature = 182.55,
    .largest_temperature = 600,
    .largest_pressure = 100000000,
    .pressure_guess = {GUESS_EXP_TAU, 540.13, 2736000, COUNT(n_heptane_pressure), n_heptane_pressure},
    .liquid_guess = {GUESS_ONE_PLUS, 540.13, 2315.3230474441625, COUNT(n_heptane_liquid), n_heptane_liquid},
    .vapour_guess = {GUESS_EXP_TAU, 540.13, 2315.3230474441625, COUNT(n_heptane_vapour), n_heptane_vapour},
};

static const struct reference_gas gases[] = {
    {"carbon-dioxide", 0.0440098, 216.592, &carbon_dioxide},
    {"nitrogen", 0.02801348, 63.151, &nitrogen},
    {"propane", 0.04409562, 85.525, &propane},
    {"water", 0.018015268, 273.16, &water},
    {"ammonia", 0.01703052, 195.49, &ammonia},
    {"r125", 0.1200214, 172.52, &r125},
    {"fluorine", 0.03799681000000001, 53.4811, &fluorine},
    {"cyclopropane", 0.042081, 145.7, &cyclopropane},
    {"n-heptane", 0.100202, 182.55, &n_heptane},
};

const struct reference_gas *reference_gases(size_t *count)
{
    *count = COUNT(gases);
    return gases;
}

const struct reference_gas *reference_gas(const char *name)
{
    for (size_t i = 0; i < COUNT(gases); i++) {
        if (strcmp(gases[i].name, name) == 0) {
            return &gases[i];
        }
    }
    return NULL;
}
