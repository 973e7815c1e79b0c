/* What the library holds about one gas: a deck that asks for it is made up and elaborated, and what that brought is
 * laid out as the listing lays out its data. */
#include "report/report.h"
#include "run/run_internal.h"

#include <errno.h>
#include <setjmp.h>
#include <string.h>

/* Where the made-up deck is taken to lie; no file is looked for beside it. */
#define FOLDER  "asked/"
#define MADE_UP FOLDER "gas.deck"

struct made_up {
    const struct deck_reader *library;
    const char *text;
};

/* The made-up deck, and files of the library only. */
static bool read_library(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const struct made_up *made_up = context;
    if (strcmp(path, MADE_UP) == 0) {
        *length = strlen(made_up->text);
        *text = arena_copy_text(arena, made_up->text, *length);
        return true;
    }
    if (strncmp(path, FOLDER, strlen(FOLDER)) == 0) {
        errno = ENOENT;
        return false;
    }
    return made_up->library->read(made_up->library->context, arena, path, text, length);
}

/* Letters, digits and hyphens: what a name may hold. Anything else must not reach the made-up deck. */
static bool is_name(const char *name)
{
    static const char allowed[] = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-";
    return *name != '\0' && name[strspn(name, allowed)] == '\0';
}

static struct data_row *add_row(struct result *result, const char *group, const char *name, const char *value)
{
    struct data_row *row = ARENA_APPEND(result->arena, &result->data);
    *row = (struct data_row){.group = group, .name = name, .value = value};
    return row;
}

/* A source that values shown name, once. */
static void cite(struct result *result, const struct case_source *source)
{
    for (size_t i = 0; i < result->sources.count; i++) {
        if (strcmp(result->sources.items[i].key, source->key) == 0) {
            return;
        }
    }
    *ARENA_APPEND(result->arena, &result->sources) =
        (struct source_row){source->key, source->citation, source->is_unverified};
}

static void set_source(struct result *result, struct data_row *row, const struct case_source *source,
                       struct location at)
{
    row->source = source ? source->key : NULL;
    if (source) {
        cite(result, source);
    }
    if (!source && at.file) {
        row->source = arena_format(result->arena, "%s, line %zu", at.file->name, location_line(at));
    }
}

static void add_quantity(struct result *result, const char *group, const char *name, const struct quantity *quantity)
{
    if (quantity->given) {
        struct data_row *row = add_row(result, group, name, quantity->origin.written);
        set_source(result, row, quantity->origin.source, quantity->origin.at);
    }
}

static const char *hazard_words(struct arena *arena, unsigned hazards)
{
    static const char *const names[] = {"flammable",  "oxidising",  "toxic",       "corrosive",
                                        "pyrophoric", "decomposes", "polymerises", "dissolved"};
    struct text words = {.arena = arena};
    for (size_t i = 0; i < sizeof names / sizeof *names; i++) {
        if (hazards & 1U << i) {
            text_format(&words, "%s%s", words.length == 0 ? "" : ", ", names[i]);
        }
    }
    return words.bytes;
}

static void add_words(struct result *result, const char *group, const char *name, const char *words)
{
    if (words) {
        add_row(result, group, name, words);
    }
}

static void add_equation(struct result *result, const struct case_component *component)
{
    const struct reference_spec *equation = component->spec.reference;
    if (!equation) {
        return;
    }
    struct data_row *row = add_row(result, component->name, "reference equation",
                                   arena_format(result->arena, "%zu terms, %g K to %g K, to %g MPa",
                                                equation->residual_count, equation->smallest_temperature,
                                                equation->largest_temperature, equation->largest_pressure / 1e6));
    set_source(result, row, component->equation_source, (struct location){.file = NULL});
}

static void add_set(struct result *result, const char *group, const struct case_cubic_set *set)
{
    const struct {
        const char *name;
        const struct quantity *quantity;
    } rows[] = {
        {"critical-temperature", &set->critical_temperature},
        {"critical-pressure", &set->critical_pressure},
        {"twu L", &set->twu[0]},
        {"twu M", &set->twu[1]},
        {"twu N", &set->twu[2]},
        {"covolume A", &set->covolume_A},
        {"covolume B", &set->covolume_B},
        {"shift", &set->shift},
    };
    const char *own_group = arena_format(result->arena, "%s, %s", group, set->method);
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        add_quantity(result, own_group, rows[i].name, rows[i].quantity);
    }
}

/* What cubic methods take of the gas beyond its constants. */
static void add_parameters(struct result *result, const struct case_component *component)
{
    struct text groups = {.arena = result->arena};
    for (size_t i = 0; i < component->group_count; i++) {
        text_format(&groups, "%s%s %g", i == 0 ? "" : ", ", component->groups[i].name, component->groups[i].number);
    }
    if (component->group_count != 0) {
        struct data_row *row = add_row(result, component->name, "groups", groups.bytes);
        set_source(result, row, component->groups_origin.source, component->groups_origin.at);
    }
    for (size_t i = 0; i < component->cubic_set_count; i++) {
        add_set(result, component->name, &component->cubic_sets[i]);
    }
}

static void add_component(struct result *result, const struct case_component *component)
{
    const char *group = component->name;
    add_words(result, group, "title", component->title);
    add_words(result, group, "formula", component->formula);
    add_words(result, group, "cas", component->cas);
    if (component->un_number != 0) {
        add_words(result, group, "un-number", arena_format(result->arena, "%04u", component->un_number));
    }
    add_words(result, group, "hazard", hazard_words(result->arena, component->hazards));
    add_words(result, group, "refuse", component->refuse);
    add_quantity(result, group, "molar-mass", &component->molar_mass);
    add_quantity(result, group, "critical-temperature", &component->critical_temperature);
    add_quantity(result, group, "critical-pressure", &component->critical_pressure);
    add_quantity(result, group, "critical-density", &component->critical_density);
    add_quantity(result, group, "acentric", &component->acentric);
    add_quantity(result, group, "triple-temperature", &component->triple_temperature);
    add_quantity(result, group, "triple-pressure", &component->triple_pressure);
    add_quantity(result, group, "boiling-temperature", &component->boiling_temperature);
    add_quantity(result, group, "dipole", &component->dipole);
    add_equation(result, component);
    add_parameters(result, component);
}

static void add_listed_row(struct result *result, const char *group, const struct listed_row *listed)
{
    struct text value = {.arena = result->arena};
    text_format(&value, "%g barg", listed->test_pressure / 1e5);
    if (listed->filling_ratio.given) {
        text_format(&value, ", filling ratio %g", listed->filling_ratio.value);
    }
    if (listed->working_pressure.given) {
        text_format(&value, ", working pressure %g barg", listed->working_pressure.value / 1e5);
    }
    struct data_row *row = add_row(result, group, "listed-fill", value.bytes);
    set_source(result, row, listed->origin.source, listed->origin.at);
}

static void add_entry(struct result *result, const struct case_entry *entry)
{
    add_words(result, entry->name, "title", entry->title);
    add_words(result, entry->name, "class-code", entry->class_code);
    add_words(result, entry->name, "letters", entry->letters);
    if (entry->lc50.given) {
        add_words(result, entry->name, "lc50", arena_format(result->arena, "%g ppm", entry->lc50.value * 1e6));
    }
    for (size_t i = 0; i < entry->row_count; i++) {
        add_listed_row(result, entry->name, &entry->rows[i]);
    }
}

static void describe(struct run *run, const struct case_tree *tree)
{
    struct result *result = result_create(run->arena);
    const struct case_sheet *sheet = &tree->sheets[0];
    add_component(result, sheet->fluid->components[0]);
    for (size_t i = 0; i < sheet->entry_count; i++) {
        add_entry(result, sheet->entries[i]);
    }
    for (size_t i = 0; i < tree->source_count; i++) {
        cite(result, tree->sources[i]);
    }
    report_data(result, &run->output);
}

static void refuse_name(struct run *run, const char *name, const char *hint)
{
    text_format(&run->diagnostics, "tarewright: error: the library has no gas named '%s' [%s]\n", name,
                code_row(CODE_E417)->name);
    if (hint) {
        text_format(&run->diagnostics, "  hint: %s\n", hint);
    }
    run->status = RUN_DECK_WRONG;
}

/* The made-up deck has one place that can be wrong, the gas; anything else is the library's and is told as it is. */
static void tell(struct run *run, const char *name, struct diagnostics *diagnostics)
{
    for (size_t i = 0; i < diagnostics->count; i++) {
        if (diagnostics->items[i].code == CODE_E205) {
            refuse_name(run, name, diagnostics->items[i].hint);
            return;
        }
    }
    diagnostics_draw(diagnostics, &run->diagnostics);
    run->status = status_of_messages(diagnostics);
}

static void show(struct run *run, const char *name, const struct deck_reader *library)
{
    if (!is_name(name)) {
        refuse_name(run, name, NULL);
        return;
    }
    struct made_up made_up = {.library = library};
    made_up.text = arena_format(run->arena,
                                "use \"show\"\n"
                                "sheet saturation { fluid %s; methods peng-robinson; sweep temperature 300 K }\n",
                                name);
    const struct deck_reader reader = {
        .read = read_library, .context = &made_up, .library_folder = library->library_folder};
    struct diagnostics diagnostics = {.arena = run->arena};
    const struct deck *deck = deck_load(MADE_UP, &reader, run->arena, &diagnostics);
    const struct case_tree *tree =
        deck && diagnostics.errors == 0 ? case_elaborate(deck, run->arena, &diagnostics) : NULL;
    if (tree && diagnostics.errors == 0) {
        describe(run, tree);
    } else {
        tell(run, name, &diagnostics);
    }
}

struct run *run_show_gas(const char *name, const struct deck_reader *reader, const struct arena_source *source)
{
    struct run *const run = run_begin(source);
    if (!run) {
        return NULL;
    }
    jmp_buf exhausted;
    if (setjmp(exhausted) != 0) {
        run_free(run);
        return NULL;
    }
    arena_on_exhaustion(run->arena, &exhausted);
    show(run, name, reader);
    arena_on_exhaustion(run->arena, NULL);
    return run;
}
