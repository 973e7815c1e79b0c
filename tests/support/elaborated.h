/* Decks from memory, elaborated: what the tests of src/case share.
 *
 * The root is "job.deck"; `use "small"` brings SMALL_LIBRARY as a library file.
 */
#ifndef TAREWRIGHT_TESTS_ELABORATED_H
#define TAREWRIGHT_TESTS_ELABORATED_H

#include "case/case.h"
#include "support/check.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>

/* Constants of carbon dioxide: Span and Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509. The one-term equation is
 * invented: these tests only carry numbers, they compute nothing with them. */
static const char SMALL_LIBRARY[] =
    "source span-wagner-1996 \"R. Span, W. Wagner, J. Phys. Chem. Ref. Data 25 (1996) 1509\"\n"
    "source notebook \"works notebook\" unverified\n"
    "component carbon-dioxide {\n"
    "  formula \"CO2\"; cas \"124-38-9\"; un-number 1013\n"
    "  molar-mass 44.0098 g/mol ref span-wagner-1996\n"
    "  critical-temperature 304.1282 K ref span-wagner-1996\n"
    "  critical-pressure 7.3773 MPa ref span-wagner-1996\n"
    "  critical-density 467.6 kg/m3 ref span-wagner-1996\n"
    "  acentric 0.22394 ref span-wagner-1996\n"
    "}\n"
    "component vapid { molar-mass 20 g/mol }\n"
    "component argon {\n"
    "  molar-mass 39.948 g/mol; critical-temperature 150.687 K; critical-pressure 4.863 MPa; acentric -0.00219\n"
    "}\n"
    "component broken { molar-mass -5 g/mol }\n"
    "equation carbon-dioxide {\n"
    "  source span-wagner-1996\n"
    "  gas-constant 8.31451 J/mol/K\n"
    "  reducing-temperature 304.1282 K; reducing-density 10624.9063 mol/m3\n"
    "  critical-temperature 304.1282 K; critical-pressure 7.3773 MPa; critical-density 10624.9063 mol/m3\n"
    "  valid-temperature from 216.592 K to 2000 K; valid-pressure 800 MPa\n"
    "  residual power { term 0.388568 0.5 1; term -0.5 1.5 2 1 }\n"
    "  residual gaussian { term -213.65 1 2 25 1 325 1.16 }\n"
    "  ideal lead { term 8.37 -3.70 }\n"
    "  guess saturation-pressure exp-tau { reducing-temperature 304.1282 K; reducing-value 7.3773 MPa; term -7.06 1 }\n"
    "}\n"
    "equation unbuilt { gas-constant 8.31451 kg }\n"
    "entry \"UN 1013\" {\n"
    "  title \"Carbon dioxide\"; fluid carbon-dioxide; class-code \"2A\"; letters \"ua, va\"\n"
    "  listed-fill 250 barg filling-ratio 0.76; listed-fill 190 barg filling-ratio 0.68\n"
    "}\n"
    "rule liquefied-high-pressure {\n"
    "  title \"high-pressure liquefied gas\"; clause \"P200 (5)(b)\"; class high-pressure-liquefied; ref notebook\n"
    "  at 65 degC pressure <= test-pressure unless listed\n"
    "}\n"
    "component argon { groups Ar 1 ref notebook\n"
    "  parameters peng-robinson-twu { critical-temperature 150.72 K ref notebook; twu 0.34, 0.86, 0.83 ref notebook }\n"
    "  parameters peng-robinson-1978 { shift -3.3 cm3/mol } }\n"
    "component carbon-dioxide { groups CO2 1 ref notebook }\n"
    "group-pair CO2 Ar 164.3 MPa, 270.0 MPa ref notebook\n"
    "pair argon carbon-dioxide { peng-robinson kij 0.1 ref notebook; soave-redlich-kwong kij 0.2, lij 0.03 }\n"
    "rule broken-rule { at 65 degC pressure <= 5 kg }\n";

struct elaborated {
    struct arena *arena;
    struct diagnostics diagnostics;
    struct deck *deck;
    const struct case_tree *tree;
};

static inline bool elaborated_read(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    const char *found = strcmp(path, "job.deck") == 0         ? (const char *)context
                        : strcmp(path, "lib/small.deck") == 0 ? SMALL_LIBRARY
                                                              : NULL;
    if (found == NULL) {
        errno = ENOENT;
        return false;
    }
    *length = strlen(found);
    *text = arena_copy_text(arena, found, *length);
    return true;
}

static inline struct elaborated elaborate_in(struct arena *arena, char *text)
{
    const struct deck_reader reader = {.read = elaborated_read, .context = text, .library_folder = "lib"};
    struct elaborated it = {.arena = arena, .diagnostics = {.arena = arena}};
    it.deck = deck_load("job.deck", &reader, arena, &it.diagnostics);
    it.tree = it.deck == NULL ? NULL : case_elaborate(it.deck, arena, &it.diagnostics);
    return it;
}

/* Elaborates a deck that may be wrong. */
static inline struct elaborated elaborate(const char *text)
{
    struct arena *arena = arena_create(NULL);
    return elaborate_in(arena, arena_copy_text(arena, text, strlen(text)));
}

static inline const char *elaborated_messages(struct elaborated *it)
{
    struct text drawn = {.arena = it->arena};
    diagnostics_draw(&it->diagnostics, &drawn);
    return drawn.bytes == NULL ? "" : drawn.bytes;
}

/* Elaborates a deck that must be right: fails the test with its messages otherwise. */
static inline struct elaborated elaborate_well(const char *text)
{
    struct elaborated it = elaborate(text);
    if (it.tree == NULL) {
        print_error("%s\n%s\n", text, elaborated_messages(&it));
        fail();
    }
    return it;
}

static inline void elaborated_end(struct elaborated *it)
{
    arena_free(it->arena);
}

/* Fails unless the deck is refused with exactly this one error. */
static inline void assert_refused(const char *text, enum code code)
{
    struct elaborated it = elaborate(text);
    const bool is_so = it.tree == NULL && it.diagnostics.errors == 1 && it.diagnostics.items[0].code == code;
    if (!is_so) {
        print_error("expected the one error %s for:\n%s\n--- got:\n%s\n", code_row(code)->name, text,
                    elaborated_messages(&it));
        fail();
    }
    elaborated_end(&it);
}

#endif
