/* Recipes: amounts of parents that make a target, what a heel allows, and the order they go in. */
#include "filling/recipe.h"

#include "support/check.h"

#include <math.h>

enum { COMPONENTS = 3, PARENTS = 3 };

static const double MOLAR_MASSES[] = {0.004, 0.032, 0.028};
static const double HELIUM[] = {1.0, 0.0, 0.0}, OXYGEN[] = {0.0, 0.995, 0.005}, NITROGEN[] = {0.0, 1e-5, 0.99999},
                    AIR[] = {0.0, 0.21, 0.79};
static const double TARGET[] = {0.45, 0.18, 0.37}, NOTHING[] = {0.0, 0.0, 0.0};

static double finished(const struct recipe_task *task, const double amounts[], double n[])
{
    double mass = 0.0;
    for (size_t i = 0; i < task->count; i++) {
        n[i] = task->heel[i];
        for (size_t p = 0; p < task->parents; p++) {
            n[i] += amounts[p] * task->parent[p][i];
        }
        mass += n[i] * task->molar_masses[i];
    }
    return mass;
}

/* By hand, of pure parents without a heel: a = m x_i / sum x_k M_k. With impurities and a heel what must hold. */
static void parents_make_the_target(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const double heels[][COMPONENTS] = {{0.0, 0.0, 0.0}, {2.0, 3.0, 5.0}, {0.0, 0.4, 1e-7}};
    static const double *const parents[] = {HELIUM, OXYGEN, NITROGEN};
    for (size_t k = 0; k < sizeof heels / sizeof *heels; k++) {
        const struct recipe_task task = {.count = COMPONENTS,
                                         .parents = PARENTS,
                                         .target = TARGET,
                                         .rest = 2,
                                         .molar_masses = MOLAR_MASSES,
                                         .parent = parents,
                                         .heel = heels[k],
                                         .mass = 4.0};
        double amounts[PARENTS], n[COMPONENTS];
        assert_int_equal(recipe_amounts(&task, arena, amounts), ANSWER_OK);
        assert_close(finished(&task, amounts, n), 4.0, 1e-12, "the mass");
        const double whole = n[0] + n[1] + n[2];
        for (size_t i = 0; i < COMPONENTS; i++) {
            assert_close(n[i] / whole, TARGET[i], 1e-12, "the target");
        }
        if (k == 0) {
            assert_close(amounts[0], 4.0 * 0.45 / (0.45 * 0.004 + 0.18 * 0.032 + 0.37 * 0.028), 1e-12, "by hand");
        }
        assert_close(recipe_heel_part(&task, arena), 1.0, 0.0, "all of it may stay");
    }
    arena_free(arena);
}

/* Air has oxygen and nitrogen in one proportion: with helium alone beside it the fractions come near, the mass holds.
 */
static void fewer_parents_come_near(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const double *const parents[] = {HELIUM, AIR};
    const struct recipe_task task = {.count = COMPONENTS,
                                     .parents = 2,
                                     .target = TARGET,
                                     .rest = 2,
                                     .molar_masses = MOLAR_MASSES,
                                     .parent = parents,
                                     .heel = NOTHING,
                                     .mass = 4.0};
    double amounts[2], n[COMPONENTS];
    assert_int_equal(recipe_amounts(&task, arena, amounts), ANSWER_OK);
    assert_close(finished(&task, amounts, n), 4.0, 1e-7, "the mass, nearly");
    const double helium = n[0] / (n[0] + n[1] + n[2]), oxygen = n[1] / (n[0] + n[1] + n[2]);
    assert_true(fabs(helium / 0.45 - 1.0) < 0.2 && fabs(oxygen / 0.18 - 1.0) < 0.4);
    assert_close(n[1] / n[2], 0.21 / 0.79, 1e-12, "air stays air");
    arena_free(arena);
}

/* By hand: 10 mol of helium for a target that has 45 % of 100 mol are too much by none; of a target of 5 % in about
 * 100 mol at most 5 mol may stay, so that half the heel has to go. */
static void a_rich_heel_has_to_go_in_part(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const double lean[] = {0.05, 0.0, 0.95}, rich[] = {10.0, 0.0, 0.0}, none[] = {0.0, 10.0, 0.0};
    static const double *const parents[] = {HELIUM, NITROGEN};
    struct recipe_task task = {.count = COMPONENTS,
                               .parents = 2,
                               .target = lean,
                               .rest = 2,
                               .molar_masses = MOLAR_MASSES,
                               .parent = parents,
                               .heel = rich,
                               .mass = 0.05 * 100.0 * 0.004 + 0.95 * 100.0 * 0.028};
    double amounts[2], without[2];
    assert_int_equal(recipe_amounts(&task, arena, amounts), ANSWER_OK);
    assert_true(amounts[0] < 0.0);
    const double part = recipe_heel_part(&task, arena);
    assert_close(part, 0.5, 1e-4, "by hand, but for the oxygen in the nitrogen");
    double less[COMPONENTS] = {10.0 * part, 0.0, 0.0};
    task.heel = less;
    assert_int_equal(recipe_amounts(&task, arena, without), ANSWER_OK);
    assert_near(without[0], 0.0, 1e-10, "no helium is to be added");
    /* oxygen is no component of the target: no bleeding makes it right, and nothing forbids it by itself */
    task.heel = none;
    assert_int_equal(recipe_amounts(&task, arena, amounts), ANSWER_OK);
    arena_free(arena);
}

static void parents_that_are_alike_cannot_be_told_apart(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    static const double *const parents[] = {NITROGEN, NITROGEN};
    const struct recipe_task task = {.count = COMPONENTS,
                                     .parents = 2,
                                     .target = TARGET,
                                     .rest = 2,
                                     .molar_masses = MOLAR_MASSES,
                                     .parent = parents,
                                     .heel = NOTHING,
                                     .mass = 4.0};
    double amounts[2];
    assert_int_equal(recipe_amounts(&task, arena, amounts), ANSWER_NO_SUCH_ROOT);
    assert_true(isnan(recipe_heel_part(&task, arena)));
    arena_free(arena);
}

#define FUEL    .is_fuel = true
#define OXIDANT .is_oxidant = true
#define BALANCE .is_balance = true

/* The rules by hand. */
static void additions_are_ordered_by_rule(void **state)
{
    (void)state;
    static const struct {
        struct recipe_nature natures[4];
        size_t count, order[4];
        bool is_parted;
    } cases[] = {
        {{{.critical_temperature = 126.0, BALANCE}, {.critical_temperature = 425.0, FUEL}}, 2, {1, 0}, true},
        {{{.critical_temperature = 5.0},
          {.critical_temperature = 154.0, OXIDANT},
          {.critical_temperature = 126.0, BALANCE}},
         3,
         {1, 0, 2},
         true},
        /* methane next to oxygen, then nitrogen: nitrogen has to go between them */
        {{{.critical_temperature = 190.0, FUEL},
          {.critical_temperature = 154.0, OXIDANT},
          {.critical_temperature = 126.0, BALANCE}},
         3,
         {0, 2, 1},
         true},
        {{{.critical_temperature = 190.0, FUEL},
          {.critical_temperature = 154.0, OXIDANT},
          {.critical_temperature = 126.0, BALANCE},
          {.critical_temperature = 5.0}},
         4,
         {0, 3, 1, 2},
         true},
        {{{.critical_temperature = 190.0, FUEL}, {.critical_temperature = 154.0, OXIDANT, BALANCE}}, 2, {0, 1}, false},
    };
    for (size_t k = 0; k < sizeof cases / sizeof *cases; k++) {
        size_t order[4];
        assert_true(recipe_order(cases[k].natures, cases[k].count, order) == cases[k].is_parted);
        for (size_t i = 0; cases[k].is_parted && i < cases[k].count; i++) {
            assert_int_equal(order[i], cases[k].order[i]);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(parents_make_the_target),       cmocka_unit_test(fewer_parents_come_near),
        cmocka_unit_test(a_rich_heel_has_to_go_in_part), cmocka_unit_test(parents_that_are_alike_cannot_be_told_apart),
        cmocka_unit_test(additions_are_ordered_by_rule),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
