#include "support/reference_subject.h"

#include "support/check.h"

void open_equation(struct subject *subject, const char *name, const struct reference_spec *equation, double molar_mass)
{
    struct fluid_lack_report lack;
    subject->name = name;
    subject->equation = equation;
    subject->pure = (struct pure_spec){.name = name, .molar_mass = molar_mass, .reference = equation};
    subject->list[0] = &subject->pure;
    subject->spec = (struct fluid_spec){.count = 1, .pure = subject->list};
    subject->arena = arena_create(NULL);
    assert_non_null(subject->arena);
    subject->fluid = fluid_create("reference", &subject->spec, subject->arena, &lack);
    assert_non_null(subject->fluid);
    subject->at_t = fluid_at_t_create(subject->fluid, subject->arena);
}

void open_gas(struct subject *subject, const char *name)
{
    const struct reference_gas *gas = reference_gas(name);
    assert_non_null(gas);
    open_equation(subject, name, gas->equation, gas->molar_mass);
}

void close_gas(struct subject *subject)
{
    arena_free(subject->arena);
}

void set_temperature(struct subject *subject, double temperature)
{
    assert_int_equal(fluid_set_t(subject->at_t, subject->fluid, temperature), ANSWER_OK);
}

struct phase phase_at(const struct subject *subject, double density)
{
    const double n[] = {1.0};
    struct phase phase = {0};
    assert_int_equal(phase_tv(subject->at_t, 1.0 / density, n, 0, &phase), ANSWER_OK);
    return phase;
}

enum answer density_at(const struct subject *subject, double pressure, enum branch branch, double *density)
{
    const double n[] = {1.0};
    double volume = 0.0;
    int roots = 0;
    const enum answer answer = subject->fluid->ops->volume(subject->at_t, pressure, n, branch, &volume, &roots);
    *density = answer == ANSWER_OK ? 1.0 / volume : 0.0;
    return answer;
}

void with_each_gas(void (*check)(struct subject *subject))
{
    size_t count = 0;
    const struct reference_gas *gases = reference_gases(&count);
    for (size_t i = 0; i < count; i++) {
        struct subject subject;
        open_gas(&subject, gases[i].name);
        check(&subject);
        close_gas(&subject);
    }
}
