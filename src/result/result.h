/* The result tree: everything a listing says, in the order it says it, with no computation and no layout.
 *
 * Values are SI; each carries how it is to be shown. Ownership: all nodes live in the run's arena; texts given to the
 * builders are kept by pointer and must live as long.
 */
#ifndef TAREWRIGHT_RESULT_RESULT_H
#define TAREWRIGHT_RESULT_RESULT_H

#include "base/arena.h"
#include "base/codes.h"
#include "base/shown.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* What is shown of a number: SI unit for machines, chosen unit and digits for readers. */
struct look {
    const char *si_unit; /* "Pa", "K", "kg/m3", "1" */
    struct shown_unit shown;
    int decimals; /* digits after the point; negative: that many significant digits */
};

/* What is known of a result's uncertainty. */
enum carried_kind {
    CARRIED_NONE,       /* no input is uncertain that it depends on */
    CARRIED,            /* first order holds */
    CARRIED_NOT_LINEAR, /* the result is not nearly linear within the inputs' uncertainty */
    CARRIED_UNKNOWN     /* there was no answer at shifted inputs */
};

struct carried {
    enum carried_kind kind;
    double expanded; /* SI, k = 2; above 0 unless unknown */
};

struct fact {
    const char *name;   /* for machines and readers, "filling-ratio" */
    const char *method; /* "reference"; NULL: no method involved */
    const char *source; /* key of a data source, or the place of the deck that gives it; NULL: computed */
    const char *text;   /* not NULL: a fact in words, `value` unused */
    double value;
    struct look look;
    const char *remark; /* set beside the value: "rounded down"; NULL: none */
    struct carried carried;
};

enum cell_kind { CELL_NUMBER, CELL_TEXT, CELL_SHEET, CELL_EMPTY };

struct cell {
    enum cell_kind kind;
    double number; /* SI; of CELL_SHEET a sheet of the result, from 1 */
    const char *text;
    bool is_outside_range;  /* printed with a mark that points at the warning */
    bool is_bent;           /* an uncertainty of a result that is not nearly linear; printed with a mark */
    struct carried carried; /* of CELL_NUMBER */
};

struct column {
    const char *name; /* "temperature" */
    struct look look; /* si_unit NULL: a column of words */
    double least;     /* SI: listings say of what is nearer to zero that it is less than this; 0: they tell it */
};

struct table {
    const char *title;
    const char *method; /* NULL: several or none */
    size_t column_count, column_capacity;
    struct column *columns;
    size_t row_count, cell_capacity;
    struct cell *cells;       /* [row_count * column_count], row by row */
    const char *csv;          /* file to write; NULL: none */
    bool has_own_uncertainty; /* a column tells it, or none is meant: none is carried to its cells */
    struct table *next;
};

struct hand_check {
    const char *title;
    struct line_list {
        size_t count, capacity;
        const char **items;
    } lines;
    struct hand_check *next;
};

enum requirement_state { REQUIREMENT_MET, REQUIREMENT_NOT_MET, REQUIREMENT_UNDECIDED };

struct requirement {
    const char *text;
    enum requirement_state state;
    const char *reason; /* why undecided, or what a not-comparable predicate found; NULL: none */
    bool has_margin;    /* compared quantities only */
    double margin;      /* SI, positive when met */
    struct look look;
    bool has_worst_temperature;
    double worst_temperature; /* K */
    struct look temperature_look;
    size_t line; /* in the deck */
    const char *method;
    struct carried carried;     /* of the margin */
    bool is_within_uncertainty; /* the verdict might be the other one, for all that is known of the inputs */
    struct requirement *next;
};

/* One input's part in a result's uncertainty. */
struct budget_line {
    const char *input;          /* "n-butane of mixture span-gas" */
    size_t line;                /* in the deck; 0: in another file */
    double value, standard;     /* SI; standard uncertainty, k = 1 */
    struct look look;           /* of the value */
    struct look step_look;      /* of the uncertainty */
    double sensitivity;         /* SI of the result over SI of the input */
    double contribution, share; /* SI, sensitivity times uncertainty; of the variance, 0 to 1 */
    bool is_one_sided;          /* the input cannot be varied to both sides */
};

/* Random draws of a result beside its uncertainty by first order. */
enum agreement { AGREES, AGREES_NOT, AGREEMENT_BLURRED };

struct drawn_budget {
    bool given;
    size_t draws, answered;
    uint64_t seed;
    double mean, standard, low, high; /* SI; the ends hold 95 % */
    double first_low, first_high;     /* the same ends by first order */
    double tolerance;
    enum agreement agreement;
    bool has_part_met; /* of a margin */
    double part_met;   /* of the draws with an answer, 0 to 1 */
};

struct budget {
    const char *result; /* the name of the fact, "margin of requirement 2" */
    const char *method; /* NULL: several or none */
    double value;
    struct look look;
    struct look step_look; /* of differences of it */
    double standard;       /* combined, k = 1 */
    double deviation;      /* from the straight line at the ends of the inputs' intervals, the largest */
    bool is_linear;
    size_t line_count;
    const struct budget_line *lines;
    struct drawn_budget drawn;
};

struct note_line { /* free text within a sheet: a method cannot answer, a listed row's explanation */
    const char *text;
    struct note_line *next;
};

/* What a sheet says, in order. */
enum part_kind { PART_FACTS, PART_TABLE, PART_HAND_CHECK, PART_NOTE, PART_BUDGET };

struct sheet_part {
    enum part_kind kind;
    const char *title; /* of a group of facts; NULL: none */
    struct {
        size_t count, capacity;
        struct fact *items;
    } facts;
    struct table *table;
    struct hand_check *hand_check;
    const char *note;
    struct budget *budget;
    struct sheet_part *next;
};

struct result_sheet {
    const char *kind;                    /* "settled-pressure" */
    const char *title;                   /* NULL: none */
    const char *fluid, *vessel, *charge; /* names; NULL: none */
    struct sheet_part *first_part, *last_part;
    struct requirement *first_requirement, *last_requirement;
    struct result_sheet *next;
};

struct warning {
    enum code code;
    const char *text;
    size_t line;  /* in the deck; 0: none */
    size_t sheet; /* number of the sheet, from 1; 0: none */
};

struct input_row {
    const char *group, *name, *written, *si, *from;
};

struct data_row {
    const char *group; /* component or entry */
    const char *name, *value, *source, *remark;
};

struct method_row {
    const char *name, *title, *parameters, *range, *reason;
};

enum verdict { VERDICT_NONE, VERDICT_MET, VERDICT_NOT_MET, VERDICT_UNDECIDED };

struct result {
    struct arena *arena;
    const char *version;
    const char *number, *revision, *title;
    struct line_list notes;
    const char *deck_name, *deck_sha256, *deck_text;
    struct {
        size_t count, capacity;
        struct library_row {
            const char *name, *sha256;
        } * items;
    } library;
    struct line_list headlines; /* the verdict's lines below the count of requirements */
    struct {
        size_t count, capacity;
        struct input_row *items;
    } inputs;
    struct {
        size_t count, capacity;
        struct data_row *items;
    } data;
    struct {
        size_t count, capacity;
        struct source_row {
            const char *key, *citation;
            bool is_unverified;
        } * items;
    } sources;
    struct {
        size_t count, capacity;
        struct method_row *items;
    } methods;
    struct result_sheet *first_sheet, *last_sheet;
    size_t sheet_count;
    struct {
        size_t count, capacity;
        struct warning *items;
    } warnings;
    struct line_list cautions;
    bool is_undecided; /* a sheet had no answer although no requirement says so */
};

struct result *result_create(struct arena *arena);

struct result_sheet *result_add_sheet(struct result *result, const char *kind, const char *title);

/* Parts are added at the end of the sheet. Facts go to the current group; a new group starts with its title. */
void sheet_begin_facts(struct result *result, struct result_sheet *sheet, const char *title);
struct fact *sheet_add_fact(struct result *result, struct result_sheet *sheet, const char *name, double value,
                            struct look look);
struct fact *sheet_add_words(struct result *result, struct result_sheet *sheet, const char *name, const char *text);
struct table *sheet_add_table(struct result *result, struct result_sheet *sheet, const char *title, const char *method);
/* A table right behind another one of the sheet. */
struct table *sheet_add_table_behind(struct result *result, struct result_sheet *sheet, const struct table *before,
                                     const char *title, const char *method);
struct hand_check *sheet_add_hand_check(struct result *result, struct result_sheet *sheet, const char *title);
void sheet_add_note(struct result *result, struct result_sheet *sheet, const char *format, ...)
    __attribute__((format(printf, 3, 4)));
struct budget *sheet_add_budget(struct result *result, struct result_sheet *sheet, const char *name);
struct requirement *sheet_add_requirement(struct result *result, struct result_sheet *sheet, const char *text);

/* Columns first, then rows; table_add_row gives the row's cells, all CELL_EMPTY. */
void table_add_column(struct result *result, struct table *table, const char *name, struct look look);
/* What equations leave, dimensionless: in a listing never told more closely than rounding lets it be. */
void table_add_residual_column(struct result *result, struct table *table, const char *name);
void table_add_word_column(struct result *result, struct table *table, const char *name);
struct cell *table_add_row(struct result *result, struct table *table);
void cell_set(struct cell *cell, double number); /* a number that is not finite becomes CELL_EMPTY */
void cell_set_text(struct cell *cell, const char *text);
void cell_set_sheet(struct cell *cell, size_t sheet); /* in a column of words: readers are led to the sheet's section */

void hand_check_line(struct result *result, struct hand_check *check, const char *format, ...)
    __attribute__((format(printf, 3, 4)));
void line_list_add(struct result *result, struct line_list *lines, const char *format, ...)
    __attribute__((format(printf, 3, 4)));

/* The same warning (code and text) of the same sheet is kept once. */
void result_warn(struct result *result, enum code code, size_t line, size_t sheet, const char *format, ...)
    __attribute__((format(printf, 5, 6)));

/* Requirements whose verdict might be the other one, over all sheets. */
size_t result_close_verdicts(const struct result *result);

/* Over all sheets' requirements: not met, else undecided, else met, or none. */
enum verdict result_verdict(const struct result *result);

/* The look of differences of a quantity: "bar" for "barg", "K" for "degC". */
struct look look_of_steps(struct look look);

/* Shown number of a look. */
double look_shown(const struct look *look, double si);

#endif
