#include "deck/parse.h"
#include "run/run_internal.h"

/* The deck was loaded with what it uses, so that mistakes anywhere are told; what is printed is the root file alone. */
void print_root(struct run *run, const struct deck *deck, struct diagnostics *diagnostics)
{
    const struct statement *statements;
    if (deck_parse_file(deck->root, run->arena, diagnostics, &statements)) {
        deck_print(statements, &run->output);
    }
}
