/* What the files that carry uncertainty to the results of a sheet share. */
#ifndef TAREWRIGHT_FILLING_UNCERTAINTY_INTERNAL_H
#define TAREWRIGHT_FILLING_UNCERTAINTY_INTERNAL_H

#include "filling/propagation.h"
#include "filling/sheet.h"

/* ---- results of a sheet as a row of numbers: outlets.c ---- */

enum outlet_kind { OUTLET_FACT, OUTLET_CELL, OUTLET_MARGIN, OUTLET_STATE };

/* One number a sheet tells. */
struct outlet {
    enum outlet_kind kind;
    size_t place; /* among facts of that name; of a cell within its table; of the requirement */
    struct fact *fact;
    struct table *table;
    size_t table_place; /* among the sheet's tables */
    struct cell *cell;
    struct requirement *requirement;
};

struct outlet_list {
    struct outlet *items;
    size_t count, capacity;
    size_t table_count;
};

/* All numbers of a sheet: facts and cells in the order told, then margin and state of each requirement. */
struct outlet_list collect_outlets(struct result_sheet *sheet, struct arena *arena);

/* The same numbers of the sheet answered with other inputs; NaN where it does not have one. */
void read_outlets(const struct outlet_list *list, const struct result_sheet *sheet, double values[]);

/* The value, look and name for a budget. */
double outlet_value(const struct outlet *outlet);
struct look outlet_look(const struct outlet *outlet);

/* ---- the sheet as a model ---- */

/* Uncertain inputs, and the sheet as a function of them. */
struct uncertain_sheet {
    struct sheet_run *run;
    size_t input_count;
    const struct case_spread **inputs;
    struct outlet_list outlets;
    struct propagation_model model; /* of all outlets */
    struct first_order first;
};

/* ---- budgets and draws: uncertainty_budget.c ---- */

/* Output i of a run of draws, beside first order with the same outputs. */
struct drawn_budget drawn_budget_of(const struct drawn *drawn, const struct first_order *first, size_t i,
                                    uint64_t seed);

/* Budgets of the results that govern, each with its draws where the sheet asks for them. */
void tell_budgets(struct uncertain_sheet *it);

/* A table of uncertainties under each table: uncertainty_tables.c. */
void tell_every_row(const struct uncertain_sheet *it);

/* What has to be known to read them. */
void tell_how_carried(struct uncertain_sheet *it);

#endif
