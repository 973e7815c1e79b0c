/* One method's memory for one mixture: what mixture_contents.c and mixture_edges.c share. */
#ifndef TAREWRIGHT_FILLING_MIXTURE_INTERNAL_H
#define TAREWRIGHT_FILLING_MIXTURE_INTERNAL_H

#include "filling/mixture_contents.h"

/* Searches over a range ask for the same temperatures again and again. */
enum { KEPT_TEMPERATURES = 1024, KEPT_BY_THREADS = 8 };

struct kept_edges {
    double temperature; /* K; 0: none yet */
    enum answer answer;
    struct phase_edges edges;
    bool is_proved; /* states below the lowest edge were found stable */
};

struct mixture_work {
    size_t count;
    const double *molar_masses; /* [count], kg/mol */
    struct equilibrium_workspace *ws;
    struct split *split;
    struct mixture_vessel *vessel;
    bool has_vessel;         /* it holds an answer, from which the next search may start */
    struct phase *phase;     /* for the feed by itself */
    double list_temperature; /* K, of the list below; 0: none yet */
    enum answer list_answer;
    struct edge_list list;
    size_t kept_count;
    struct kept_edges *kept;  /* [kept_count] */
    struct method_run *alone; /* [count], each component by itself; NULL in the memory of a further thread */
    struct arena *arena;      /* for the envelope, which not every case asks for */
    bool is_traced;
    struct envelope *envelope; /* NULL: there is none, or it is not the whole boundary */
    bool is_incomplete;        /* stable states were found where the envelope has none, or the other way round */
    struct boundary_list *points;
};

/* What the edges at the temperature set say is not what a vessel holds: they are looked for again, without the
 * envelope; where it had none at all it is given up. */
void mixture_distrust_edges(struct method_run *method);

#endif
