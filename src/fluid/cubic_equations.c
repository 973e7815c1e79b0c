/* The cubic equations of the literature, one row each: a form, that is the denominator, and what alpha, covolume and
 * pairs do. */
#include "fluid/cubic_internal.h"
#include "fluid/methods_internal.h"

#define SQUARE_ROOT_OF_2 1.41421356237309505
#define CUBE_ROOT_OF_2   1.25992104989487316

/* ---- forms ----------------------------------------------------------------------------------------------------- */

/* Peng and Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59: denominator v (v + b) + b (v - b). The omegas are the
 * critical conditions solved to 17 digits; the paper rounds them to 0.45724 and 0.07780. The saturation fits of all
 * forms are ours, to equal fugacities solved with 40 digits. */
static const struct cubic_form PENG_ROBINSON_FORM = {
    .delta1 = 1.0 + SQUARE_ROOT_OF_2,
    .delta2 = 1.0 - SQUARE_ROOT_OF_2,
    .omega_a = 0.45723552892138219,
    .omega_b = 0.077796073903888456,
    .liquid = {2.50614411, 1.35556063, -0.693574821, -0.301563134, -1.43020855, 4.34235514, -5.44546099, 3.58949935,
               -0.971370145},
    .vapour = {-2.50621681, -2.81887722, 2.35397544, -9.82493401, 53.0467219, -139.289998, 198.796194, -145.356307,
               41.938622},
};

/* Redlich and Kwong, Chem. Rev. 44 (1949) 233: denominator v (v + b), with the exact omegas. */
static const struct cubic_form REDLICH_KWONG_FORM = {
    .delta1 = 1.0,
    .delta2 = 0.0,
    .omega_a = 1.0 / (9.0 * (CUBE_ROOT_OF_2 - 1.0)),
    .omega_b = (CUBE_ROOT_OF_2 - 1.0) / 3.0,
    .liquid = {2.25990435, 0.985264744, -0.390438741, 0.476616382, -2.45925427, 5.77973797, -7.61709178, 5.22047326,
               -1.40784378},
    .vapour = {-2.25946953, -2.63732606, 2.57997351, -14.1677606, 68.1064649, -168.101449, 229.227762, -161.04617,
               44.878542},
};

/* Van der Waals, thesis, Leiden 1873: denominator v^2. */
static const struct cubic_form VAN_DER_WAALS_FORM = {
    .delta1 = 0.0,
    .delta2 = 0.0,
    .omega_a = 27.0 / 64.0,
    .omega_b = 1.0 / 8.0,
    .liquid = {1.9999929, 0.401110511, -0.548049889, 0.41295949, -1.31007658, 3.1068757, -4.18281295, 2.92245912,
               -0.802437114},
    .vapour = {-1.99975739, -2.64164803, 1.78470333, -10.5974303, 55.3621082, -142.852696, 201.386168, -144.725312,
               40.9096893},
};

/* ---- slopes of Soave's alpha ----------------------------------------------------------------------------------- */

/* Peng and Robinson 1976, eq. 18. */
static double peng_robinson_slope(double acentric)
{
    return 0.37464 + acentric * (1.54226 - 0.26992 * acentric);
}

/* Robinson and Peng, GPA Research Report RR-28, 1978: another polynomial above 0.491. */
static double peng_robinson_1978_slope(double acentric)
{
    if (acentric <= 0.491) {
        return peng_robinson_slope(acentric);
    }
    return 0.379642 + acentric * (1.48503 + acentric * (-0.164423 + acentric * 0.016666));
}

/* Soave 1972, eq. 15. */
static double soave_slope(double acentric)
{
    return 0.480 + acentric * (1.574 - 0.176 * acentric);
}

/* ---- equations ------------------------------------------------------------------------------------------------- */

static const struct cubic_equation VAN_DER_WAALS = {
    .method = "van-der-waals",
    .form = &VAN_DER_WAALS_FORM,
    .alpha = ALPHA_ONE,
};

static const struct cubic_equation REDLICH_KWONG = {
    .method = "redlich-kwong",
    .form = &REDLICH_KWONG_FORM,
    .alpha = ALPHA_REDLICH_KWONG,
};

static const struct cubic_equation SOAVE_REDLICH_KWONG = {
    .method = "soave-redlich-kwong",
    .form = &REDLICH_KWONG_FORM,
    .alpha = ALPHA_SOAVE,
    .slope = soave_slope,
    .slope_formula = "0.480 + 1.574 * omega - 0.176 * omega ^ 2",
};

static const struct cubic_equation PENG_ROBINSON = {
    .method = "peng-robinson",
    .form = &PENG_ROBINSON_FORM,
    .alpha = ALPHA_SOAVE,
    .slope = peng_robinson_slope,
    .slope_formula = "0.37464 + 1.54226 * omega - 0.26992 * omega ^ 2",
};

static const struct cubic_equation PENG_ROBINSON_1978 = {
    .method = "peng-robinson-1978",
    .form = &PENG_ROBINSON_FORM,
    .alpha = ALPHA_SOAVE,
    .slope = peng_robinson_1978_slope,
    .slope_formula = "0.37464 + 1.54226 * omega - 0.26992 * omega ^ 2",
    .high_slope_formula = "0.379642 + 1.48503 * omega - 0.164423 * omega ^ 2 + 0.016666 * omega ^ 3",
    .takes_groups = true,
};

static const struct cubic_equation PENG_ROBINSON_TWU = {
    .method = "peng-robinson-twu",
    .form = &PENG_ROBINSON_FORM,
    .alpha = ALPHA_TWU,
    .needs_set = true,
};

static const struct cubic_equation TRANSLATED_PENG_ROBINSON = {
    .method = "translated-peng-robinson",
    .form = &PENG_ROBINSON_FORM,
    .alpha = ALPHA_TWU,
    .needs_set = true,
};

static const struct cubic_equation TRANSLATED_REDLICH_KWONG = {
    .method = "translated-redlich-kwong",
    .form = &REDLICH_KWONG_FORM,
    .alpha = ALPHA_TWU,
    .needs_set = true,
};

static const struct cubic_equation QUANTUM_PENG_ROBINSON = {
    .method = "quantum-peng-robinson",
    .form = &PENG_ROBINSON_FORM,
    .alpha = ALPHA_TWU,
    .needs_set = true,
    .has_moving_covolume = true,
};

/* ---- rows of the table of methods ------------------------------------------------------------------------------ */

#define CUBIC_CAPABILITIES (CAN_LIQUID | CAN_MIXTURE | CAN_CALORIC | IS_CUBIC)

#define CUBIC_OPS                                                                                           \
    .form = FLUID_FROM_TV, .at_t_size = cubic_at_t_size, .set_t = cubic_set_t, .tv = cubic_tv,              \
    .volume_and_tv = cubic_volume_and_tv, .volume = cubic_volume, .smallest_volume = cubic_smallest_volume, \
    .range = cubic_range, .critical = cubic_critical, .saturation_start = cubic_saturation_start,           \
    .pair = cubic_pair_at, .explain = cubic_explain

static struct fluid *create_van_der_waals(const struct fluid_spec *spec, struct arena *arena,
                                          struct fluid_lack_report *lack)
{
    return cubic_create(&van_der_waals_ops, &VAN_DER_WAALS, spec, arena, lack);
}

const struct fluid_ops van_der_waals_ops = {
    .name = "van-der-waals",
    .title = "Van der Waals (1873)",
    .citation = "J. D. van der Waals, thesis, Leiden (1873)",
    .validity = "qualitative: wrong by tens of per cent; shown for comparison, never governs",
    .capabilities = CUBIC_CAPABILITIES | IS_FOR_COMPARISON,
    .create = create_van_der_waals,
    CUBIC_OPS,
};

static struct fluid *create_redlich_kwong(const struct fluid_spec *spec, struct arena *arena,
                                          struct fluid_lack_report *lack)
{
    return cubic_create(&redlich_kwong_ops, &REDLICH_KWONG, spec, arena, lack);
}

const struct fluid_ops redlich_kwong_ops = {
    .name = "redlich-kwong",
    .title = "Redlich and Kwong (1949)",
    .citation = "O. Redlich, J. N. S. Kwong, Chem. Rev. 44 (1949) 233",
    .validity = "no published limits; meant for gases: vapour pressures and liquid densities are poor",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_redlich_kwong,
    CUBIC_OPS,
};

static struct fluid *create_soave_redlich_kwong(const struct fluid_spec *spec, struct arena *arena,
                                                struct fluid_lack_report *lack)
{
    return cubic_create(&soave_redlich_kwong_ops, &SOAVE_REDLICH_KWONG, spec, arena, lack);
}

const struct fluid_ops soave_redlich_kwong_ops = {
    .name = "soave-redlich-kwong",
    .title = "Redlich and Kwong, by Soave (1972)",
    .citation = "G. Soave, Chem. Eng. Sci. 27 (1972) 1197",
    .validity = "no published limits; liquid densities are off by ten per cent and more",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_soave_redlich_kwong,
    CUBIC_OPS,
};

static struct fluid *create_peng_robinson(const struct fluid_spec *spec, struct arena *arena,
                                          struct fluid_lack_report *lack)
{
    return cubic_create(&peng_robinson_ops, &PENG_ROBINSON, spec, arena, lack);
}

const struct fluid_ops peng_robinson_ops = {
    .name = "peng-robinson",
    .title = "Peng and Robinson (1976)",
    .citation = "D.-Y. Peng, D. B. Robinson, Ind. Eng. Chem. Fundam. 15 (1976) 59",
    .validity = "no published limits; liquid densities are off by several per cent",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_peng_robinson,
    CUBIC_OPS,
};

static struct fluid *create_peng_robinson_1978(const struct fluid_spec *spec, struct arena *arena,
                                               struct fluid_lack_report *lack)
{
    return cubic_create(&peng_robinson_1978_ops, &PENG_ROBINSON_1978, spec, arena, lack);
}

const struct fluid_ops peng_robinson_1978_ops = {
    .name = "peng-robinson-1978",
    .title = "Peng and Robinson (1978)",
    .citation = "D. B. Robinson, D.-Y. Peng, Gas Processors Association RR-28 (1978)",
    .validity = "no published limits; liquid densities are off by several per cent unless translated",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_peng_robinson_1978,
    CUBIC_OPS,
};

static struct fluid *create_peng_robinson_twu(const struct fluid_spec *spec, struct arena *arena,
                                              struct fluid_lack_report *lack)
{
    return cubic_create(&peng_robinson_twu_ops, &PENG_ROBINSON_TWU, spec, arena, lack);
}

const struct fluid_ops peng_robinson_twu_ops = {
    .name = "peng-robinson-twu",
    .title = "Peng and Robinson, with the alpha of Twu by Bell et al. (2018)",
    .citation = "I. H. Bell, M. Satyro, E. W. Lemmon, J. Chem. Eng. Data 63 (2018) 2402",
    .validity = "no published limits; liquid densities are off by several per cent",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_peng_robinson_twu,
    CUBIC_OPS,
};

static struct fluid *create_translated_peng_robinson(const struct fluid_spec *spec, struct arena *arena,
                                                     struct fluid_lack_report *lack)
{
    return cubic_create(&translated_peng_robinson_ops, &TRANSLATED_PENG_ROBINSON, spec, arena, lack);
}

const struct fluid_ops translated_peng_robinson_ops = {
    .name = "translated-peng-robinson",
    .title = "Peng and Robinson, translated and consistent",
    .citation = "A. Pina-Martinez, R. Privat, J.-N. Jaubert, AIChE J. 68 (2022) e17518",
    .validity = "no published limits; liquid densities are off by a few per cent, more near the critical point",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_translated_peng_robinson,
    CUBIC_OPS,
};

static struct fluid *create_translated_redlich_kwong(const struct fluid_spec *spec, struct arena *arena,
                                                     struct fluid_lack_report *lack)
{
    return cubic_create(&translated_redlich_kwong_ops, &TRANSLATED_REDLICH_KWONG, spec, arena, lack);
}

const struct fluid_ops translated_redlich_kwong_ops = {
    .name = "translated-redlich-kwong",
    .title = "Redlich and Kwong, translated and consistent",
    .citation = "A. Pina-Martinez, R. Privat, J.-N. Jaubert, AIChE J. 68 (2022) e17518",
    .validity = "no published limits; liquid densities are off by a few per cent, more near the critical point",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_translated_redlich_kwong,
    CUBIC_OPS,
};

static struct fluid *create_quantum_peng_robinson(const struct fluid_spec *spec, struct arena *arena,
                                                  struct fluid_lack_report *lack)
{
    return cubic_create(&quantum_peng_robinson_ops, &QUANTUM_PENG_ROBINSON, spec, arena, lack);
}

const struct fluid_ops quantum_peng_robinson_ops = {
    .name = "quantum-peng-robinson",
    .title = "Peng and Robinson, with quantum covolume",
    .citation = "A. Aasen, M. Hammer, S. Lasala, J.-N. Jaubert, O. Wilhelmsen, Fluid Ph"
                "ase Equilib. 524 (2020) 112790",
    .validity = "helium, neon, hydrogen, deuterium and their mixtures",
    .capabilities = CUBIC_CAPABILITIES,
    .create = create_quantum_peng_robinson,
    CUBIC_OPS,
};
