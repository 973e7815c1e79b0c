/* What the files of src/case share: the state of one elaboration, and the reading of statements, values and names.
 *
 * Ownership: everything lives in the run's arena. Functions that can fail have said why in the diagnostics when they
 * return false or NULL; nobody above needs to say it again.
 */
#ifndef TAREWRIGHT_CASE_CASE_INTERNAL_H
#define TAREWRIGHT_CASE_CASE_INTERNAL_H

#include "case/case.h"
#include "deck/expression.h"
#include "deck/vocabulary.h"

#include <assert.h>

/* Pa: what ratings are gauge above. */
#define STANDARD_ATMOSPHERE 101325.0

/* ---- Names that blocks define ---- */

enum name_kind {
    NAMES_LET,
    NAMES_SOURCE,
    NAMES_COMPONENT,
    NAMES_MIXTURE,
    NAMES_PAIR,       /* "nitrogen propane", in the order of the alphabet */
    NAMES_GROUP_PAIR, /* likewise */
    NAMES_EQUATION,
    NAMES_GERG_EQUATION,
    NAMES_DEPARTURE,
    NAMES_SOLID,
    NAMES_ENTRY,
    NAMES_VESSEL,
    NAMES_CHARGE,
    NAMES_RULE,
    NAME_KINDS
};

enum build_state { NOT_BUILT, BUILT, FAILED };

/* One defined name. All blocks are kept for a component and a pair (they add up), else only the one that counts. */
struct named {
    const char *name;
    size_t number;      /* in the order of first definition */
    struct location at; /* of the name in the block that counts */
    const struct statement **items;
    size_t count, capacity;
    enum build_state state;
    const void *built;                /* once state is BUILT: what its kind is built into */
    bool is_in_use;                   /* of a source: a value in use names it; of a component: a fluid has it */
    const struct case_fluid *fluid;   /* of a component, once a sheet or charge asked for it */
    const struct entry_list *entries; /* of a component, once a sheet asked for them */
    struct named *next_in_bucket;
};

struct name_table {
    struct named **items; /* in the order of first definition */
    size_t count, capacity;
    struct named **buckets;
    size_t bucket_count;
};

struct named *names_find(const struct name_table *table, const char *name);
struct named *names_add(struct arena *arena, struct name_table *table, const char *name);

/* What a let is built into. */
struct let_value {
    struct value value;
    struct shown_unit unit; /* symbol NULL: written without one */
};

/* ---- The elaboration ---- */

struct input_list {
    struct case_input *items;
    size_t count, capacity;
};

struct spread_list {
    struct case_spread *items;
    size_t count, capacity;
};

struct source_list {
    const struct case_source **items;
    size_t count, capacity;
};

struct component_list {
    const struct case_component **items;
    size_t count, capacity;
};

struct statement_list {
    const struct statement **items;
    size_t count, capacity;
};

struct cubic_set_list {
    struct case_cubic_set *items;
    size_t count, capacity;
};

struct reducing_list {
    struct case_reducing *items;
    size_t count, capacity;
};

struct residual_list {
    struct residual_term *items;
    size_t count, capacity;
};

struct group_list {
    struct case_group *items;
    size_t count, capacity;
};

struct entry_list {
    const struct case_entry **items;
    size_t count, capacity;
};

struct fluid_list {
    const struct case_fluid **items;
    size_t count, capacity;
};

struct methods_block; /* methods.c */

struct elaboration {
    const struct deck *deck;
    struct arena *arena;
    struct diagnostics *out;
    struct case_tree *tree;
    struct name_table tables[NAME_KINDS];
    struct name_scope scope;       /* the lets, for expressions */
    struct name_scope bound_scope; /* also what a bound may name beside them, for suggestions; made with the first */
    const struct statement *case_statement, *methods_statement;
    const struct methods_block *methods; /* NULL: the deck has none */
    struct display_units units;
    struct statement_list sheets;
    struct input_list inputs;
    struct spread_list spreads;
    const struct case_shift *shifts; /* values to be read as other than they are written */
    size_t shift_count;
    struct source_list sources;
    struct component_list components;
    struct fluid_list blends;      /* of preparation sheets, each set of components of a target once */
    struct name_table table_files; /* of the CSV tables, so that no two go into one */
    const char *group;             /* whose values are being read, as "vessel fifty" */
    enum vocabulary_block block;   /* what is being read */
    size_t silent;                 /* failures that need no message of their own */
    bool is_checking;              /* reading blocks no sheet uses: nothing counts as used */
    bool is_deferring;             /* reading what counts as used only once a method asks for it */
    struct name_table groups;      /* of molecules, numbered for the methods */
};

/* A number that grows with every failure, told or silent: a block was read well when it did not change. */
size_t trouble_so_far(const struct elaboration *e);

/* The definition an item names, or NULL after "unknown ... did you mean". `what` as in "vessel". */
struct named *named_of_item(struct elaboration *e, enum name_kind kind, const struct expression *name,
                            const char *what);

/* The names of a kind for the nearest one, the first thousand of them. */
const char **known_names(struct elaboration *e, enum name_kind kind, size_t *count);

/* Adds "did you mean ..." where one of the known words is near. */
void suggest(struct elaboration *e, struct diagnostic *said, const char *word, const char *const *known, size_t count);

/* Marks the file of a place as one the case was built from. */
void mark_file_used(struct elaboration *e, struct location at);

/* ---- Statements: statement.c ---- */

/* The items of one statement, taken from left to right. */
struct reading {
    struct elaboration *e;
    const struct statement *of;
    const struct item *item; /* the next one, or NULL */
};

struct reading read_items(struct elaboration *e, const struct statement *statement);

/* The next item if it is of this kind, else NULL and nothing is taken. */
const struct item *take_item(struct reading *reading, enum item_kind kind);

/* The next item if it is a bare name (not a sum, not a number), else NULL. */
const struct expression *take_name(struct reading *reading);

/* The next item if it is that very name. */
bool take_word(struct reading *reading, const char *word);

/* The next item's name as a word of `block`; `what` as in "a method". NULL after a message: no name, or none of these.
 */
const struct vocabulary_row *take_choice(struct reading *reading, enum vocabulary_block block, const char *what);
const struct vocabulary_row *choice_of_name(struct elaboration *e, enum vocabulary_block block,
                                            const struct expression *name);

/* A quoted text that is not empty; NULL after a message. */
const char *take_text(struct reading *reading, const char *what);

/* Says that something is missing after the last item taken; `what` as in "a temperature". */
void report_missing(struct reading *reading, const char *what);

/* Says that the next item, if there is one, has no place here. True when there was none. */
bool finish_items(struct reading *reading);

struct quantity_form;

/* One word of a block: a handler, or (read NULL) a quantity to be put at an offset of the target. */
struct block_row {
    enum vocabulary_word word;
    bool repeats;
    void (*read)(struct elaboration *e, const struct statement *statement, void *target);
    const struct quantity_form *form; /* NULL: as the word's measure has it */
    size_t offset;
};

struct block_form {
    enum vocabulary_block block;
    const struct block_row *rows;
    size_t count;
    /* Statements that begin with a word of `other_block`; BLOCKS where there are none. */
    enum vocabulary_block other_block;
    void (*read_other)(struct elaboration *e, const struct statement *statement, void *target);
};

#define BLOCK_FORM(block, rows)                                  \
    {                                                            \
        block, rows, sizeof(rows) / sizeof *(rows), BLOCKS, NULL \
    }
#define READ_ONCE(word, read)      \
    {                              \
        word, false, read, NULL, 0 \
    }
#define READ_EACH(word, read)     \
    {                             \
        word, true, read, NULL, 0 \
    }
#define READ_QUANTITY(word, form, type, member)         \
    {                                                   \
        word, false, NULL, form, offsetof(type, member) \
    }

/* At most this many words in one kind of block. */
enum { BLOCK_ROWS_MOST = 80 };

/* Reads every statement of a block by the form's rows: unknown words, words of other blocks and words given twice are
 * reported. `group` names the block in the listing's inputs, as "vessel fifty". */
void read_block(struct elaboration *e, const struct block_form *form, const char *group, const struct statement *owner,
                void *target);

/* The statement that begins with `word` in a block, or NULL. */
const struct statement *find_statement(const struct statement *block, const char *word);

/* A statement that is a word and one quoted text: the text, or NULL after a message. `what` as in "a title in quotes".
 */
const char *read_text(struct elaboration *e, const struct statement *statement, const char *what);

/* Says that a statement's word has no place in a block. */
void report_word(struct elaboration *e, enum vocabulary_block block, const struct statement *statement);

/* True when the statement has a block; else says so. */
bool require_block(struct elaboration *e, const struct statement *statement);

/* True when the statement has no block; else says so. */
bool forbid_block(struct elaboration *e, const struct statement *statement);

/* Text safe to quote in a message: at most some 60 bytes of it. */
const char *shortened(struct elaboration *e, const char *text);

/* ---- Values: value.c ---- */

enum value_reading {
    READ_NUMBER,      /* of the dimension; no scale with a zero of its own */
    READ_TEMPERATURE, /* a point, K */
    READ_DIFFERENCE,  /* a step or an uncertainty: neither point nor gauge */
    READ_ABSOLUTE,    /* a pressure, Pa absolute; gauge readings add the ambient pressure */
    READ_RATING       /* gauge only, Pa above 101 325 Pa */
};

struct quantity_form {
    enum measure measure;
    enum value_reading reading;
    double least, most;  /* SI, as read */
    bool is_least_open;  /* `least` itself is not allowed */
    const char *because; /* where the range comes from; NULL: nature */
};

/* How values of a measure are read where no narrower range is known. */
const struct quantity_form *form_of_measure(enum measure measure);

extern const struct quantity_form FORM_TEMPERATURE, FORM_PRESSURE, FORM_RATING, FORM_DENSITY, FORM_MOLAR_DENSITY,
    FORM_VOLUME, FORM_MASS, FORM_AMOUNT, FORM_FILLING_RATIO, FORM_FRACTION;

/* The value of an expression with the deck's lets; false after a message. */
bool value_of(struct elaboration *e, const struct expression *expression, struct value *value);

/* The value as `form` wants it, in SI; `name` is the quantity's name in messages. False after a message. */
bool read_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                const struct expression *expression, double *si);

/* As read_value, of an expression evaluated before. */
bool convert_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                   const struct expression *expression, const struct value *value, double *si);

/* The next item as a quantity with what may follow it: `+/- u`, `+/- u relative`, `ref KEY`. Replaces *into, keeping
 * what it held as overridden. False after a message; *into is then as before. */
bool take_quantity(struct reading *reading, const struct quantity_form *form, const char *name, struct quantity *into);

/* `ref KEY` where it stands next: the source, NULL when there is none; false after a message. */
bool take_reference(struct reading *reading, const struct case_source **source);

/* The source a name stands for, which counts as used unless that is deferred; NULL after a message. */
const struct case_source *source_of_name(struct elaboration *e, const struct expression *key);

/* The source counts as used; NULL: none. */
void use_source(struct elaboration *e, const struct case_source *source);

/* The unit of the first number in the expression, also behind a let; the fallback where there is none. */
struct shown_unit unit_written(struct elaboration *e, const struct expression *expression, struct shown_unit fallback);

struct origin origin_of(struct elaboration *e, struct location at);

/* Whether an SI value lies in the form's range; says so where it does not. */
bool check_range(struct elaboration *e, const struct quantity_form *form, const char *name,
                 const struct expression *expression, double si);

/* The expanded uncertainty after `+/-`, where it stands next: absolute in the quantity's own dimension, or `relative`.
 * *last, the end of what was read, moves on. False after a message. */
bool take_uncertainty(struct reading *reading, const struct quantity_form *form, const char *name, double value,
                      double *uncertainty, struct location *last);

/* ---- Uncertain values and shifts: spread.c ---- */

/* Takes down that the value of an expression is uncertain, and moves it by the shift its place has. False where that
 * leaves the form's range. */
bool settle_value(struct elaboration *e, const struct quantity_form *form, const char *name,
                  const struct expression *expression, double uncertainty, const struct origin *origin, double *si);

/* The same of a let, with the `+/- u` or `+/- u relative` that may stand next: the values that name it move together.
 * False after a message. */
bool settle_let(struct reading *reading, const char *name, const struct expression *expression, struct let_value *let,
                struct location *last);

/* `monte-carlo draws N, seed S`; *draws stays 0 after a message. */
void read_monte_carlo(struct elaboration *e, const struct statement *statement, size_t *draws, uint64_t *seed);

/* ---- Texts and the echo of inputs: inputs.c ---- */

/* The deck's text at a place on one line, blanks and comments collapsed, shortened to `most` bytes. */
const char *written_at(struct elaboration *e, struct location at, size_t most);
enum { WRITTEN_MOST = 160, QUOTED_MOST = 60 };

/* "25 101 325 Pa abs": a value in base units with its digits in groups of three. */
const char *si_text(struct elaboration *e, const struct quantity_form *form, double si);
const char *si_value_text(struct elaboration *e, const struct value *value);
const char *si_number(struct arena *arena, double value);
const char *base_unit(struct dimension dimension, struct arena *arena);

/* Whether the place is in one of the user's own files; a line of the inputs is added only then. */
bool is_input(const struct origin *origin);
void add_input(struct elaboration *e, const char *name, const char *si, const struct origin *origin);
void finish_inputs(struct elaboration *e);

/* ---- Builders, one file each ---- */

const struct case_component *build_component(struct elaboration *e, struct named *named);
const struct case_component *component_of_name(struct elaboration *e, const struct expression *name);
const struct case_fluid *build_mixture(struct elaboration *e, struct named *named);

/* The component or mixture of that name as what is filled; NULL after a message. */
const struct case_fluid *fluid_of_name(struct elaboration *e, const struct expression *name);

/* Completes a fluid that has its components and mole fractions. */
void finish_fluid(struct elaboration *e, struct case_fluid *fluid);

/* `parameters METHOD { ... }` of a component, added to the sets; `groups NAME number, ...` */
void read_parameters(struct elaboration *e, const struct statement *statement, struct cubic_set_list *sets);
void read_groups(struct elaboration *e, const struct statement *statement, struct case_component *component);

/* The same as the methods take them. */
const struct cubic_set *plain_sets(struct elaboration *e, const struct case_cubic_set *sets, size_t count);
const struct group_share *plain_groups(struct elaboration *e, const struct case_component *component);

/* The next item's name as a cubic method; NULL after a message. */
const struct vocabulary_row *take_cubic(struct reading *reading);
bool method_is_cubic(enum vocabulary_word method);

/* The name a pair is kept under, whatever the order of the two. */
const char *pair_name(struct elaboration *e, const char *one, const char *other);
const struct case_pair *build_component_pair(struct elaboration *e, struct named *named);
const struct case_group_pair *build_group_pair(struct elaboration *e, struct named *named);

/* All pairs of the fluid's components and of their groups, into the fluid and its spec. */
void find_pairs(struct elaboration *e, struct case_fluid *fluid);

/* Marks the sources and files of what a method takes of a fluid beyond the constants: of everything, of one component's
 * parameters, of its groups, of one value. */
void use_method_data(struct elaboration *e, const struct case_fluid *fluid, const char *method);
void use_parameters(struct elaboration *e, const struct case_component *component, const char *method);
void use_groups(struct elaboration *e, const struct case_component *component);
void use_quantity(struct elaboration *e, const struct quantity *quantity);

/* One method's reducing parameters of a pair, added to the list or in place of earlier ones; `first` as the pair's
 * block has it. */
void read_reducing(struct elaboration *e, const struct statement *statement, const char *first,
                   struct reducing_list *list);

/* The same as the methods take them, of components i and j of which i is called `first`. */
struct reducing_pair plain_reducing(const struct case_reducing *from, const char *first, size_t i, size_t j);

/* Marks what a method takes of a pair's reducing parameters, and of equations no other method has. */
void use_reducing(struct elaboration *e, const struct case_pair *pair, const char *method);
void use_own_equation(struct elaboration *e, const struct case_component *component, const char *method);

const struct case_departure *build_departure(struct elaboration *e, struct named *named);

/* What is known of a substance as a solid; NULL after a message. Counts as used once use_solid says so. */
const struct case_solid *build_solid(struct elaboration *e, struct named *named);
void use_solid(struct elaboration *e, const struct case_component *component);
void use_melting(struct elaboration *e, const struct case_component *component);

/* A block of `reducing-temperature`, `reducing-value` and rows `term n t`: a guess, or a sublimation line; `what` as in
 * "the guess". False after a message. */
struct power_terms {
    double temperature, value; /* K; SI */
    size_t count;
    const double (*terms)[2]; /* n, t */
};
bool read_power_terms(struct elaboration *e, const struct statement *statement, const char *what,
                      const struct quantity_form *value_form, struct power_terms *out);

/* `from T to T` of valid-temperature; false after a message. */
bool read_temperature_range(struct elaboration *e, const struct statement *statement, double *least, double *most);

/* `residual KIND { term ... }` of an equation or a departure, added to the list. */
void read_residual_terms(struct elaboration *e, const struct statement *statement, struct residual_list *list);

/* The equation of a component into `spec`; false after a message. */
bool build_equation(struct elaboration *e, struct named *named, struct reference_spec *spec,
                    const struct case_source **source);

const struct case_vessel *build_vessel(struct elaboration *e, struct named *named);
const struct case_vessel *vessel_of_name(struct elaboration *e, const struct expression *name);

const struct case_charge *build_charge(struct elaboration *e, struct named *named);
const struct case_charge *charge_of_name(struct elaboration *e, const struct expression *name);

/* A fill written directly in a sheet (`mass 1.9 kg`): the same words as in a charge. */
struct fill {
    bool given;
    bool is_refused; /* one was written, and reported */
    enum fill_kind kind;
    struct quantity amount;
    double temperature, pressure;
    struct location temperature_at;
    struct location at;
};
void read_fill(struct elaboration *e, const struct statement *statement, struct fill *fill);

/* `at (T, p)`: the state a gas volume is stated at, in K and Pa absolute; `name` in the inputs. False after a message.
 */
bool take_state(struct reading *reading, const char *name, double *temperature, double *pressure);
const struct case_charge *make_charge(struct elaboration *e, const char *name, const struct case_fluid *fluid,
                                      const struct case_vessel *vessel, const struct fill *fill);

/* A statement that is a word and one name (`fluid propane`): the name, or NULL after a message. */
const struct expression *read_one_name(struct elaboration *e, const struct statement *statement, const char *what);

/* `stop-at` and `stop-when` of a draw-down sheet, and whether the component of the latter is one of the fluid's (false
 * after a message): drawing.c. */
void read_stop_at(struct elaboration *e, const struct statement *statement, struct case_sheet *sheet);
void read_stop_when(struct elaboration *e, const struct statement *statement, struct case_sheet *sheet);
bool check_limited(struct elaboration *e, const struct case_sheet *sheet);

/* The lines of a preparation sheet: preparation.c. */
struct addition_list {
    struct case_addition *items;
    size_t count, capacity;
};

struct further_list {
    struct case_further *items;
    size_t count, capacity;
};

struct weighing {
    const struct expression *name;
    struct quantity mass;
};

struct weighing_list {
    struct weighing *items;
    size_t count, capacity;
};

struct preparation_lines {
    struct case_preparation preparation;
    bool is_way_given;
    struct addition_list additions;
    struct further_list further;
    struct weighing_list weighed;
    const struct expression *heel; /* as named */
};

/* One statement whose word only such a sheet has. */
void read_preparation_line(struct elaboration *e, const struct statement *statement, struct preparation_lines *lines);

/* The recipe of a sheet that has its target, vessel and charge: gives it the fluid of all components that may be in the
 * vessel. False after a message. */
bool complete_preparation(struct elaboration *e, struct preparation_lines *lines, struct case_sheet *sheet);

const struct case_rule *build_rule(struct elaboration *e, struct named *named);
const struct case_rule *rule_of_name(struct elaboration *e, const struct expression *name);
const struct case_entry *build_entry(struct elaboration *e, struct named *named);

/* The entries of all files in use that are for this fluid, none for a mixture; never NULL. */
const struct entry_list *entries_of_fluid(struct elaboration *e, const struct case_fluid *fluid);

/* The one entry that a sheet names with `entry "..."`; NULL after a message. */
const struct entry_list *entry_of_name(struct elaboration *e, const struct item *name, const struct case_fluid *fluid);

struct predicate_list {
    struct predicate *items;
    size_t count, capacity;
};

/* One predicate from a statement's items (`is_bare`: the statement's own word is the quantity); `name` in the inputs.
 * False after a message. The caller judges whether a temperature may be missing. */
bool read_predicate(struct elaboration *e, const struct statement *statement, bool is_bare, const char *name,
                    struct predicate *out);
bool predicate_needs_temperature(const struct predicate *predicate);
void report_no_temperature(struct elaboration *e, const struct predicate *predicate);

/* An absolute pressure of some air, the zero of gauges; false after a message. */
bool read_air_pressure(struct elaboration *e, const struct expression *expression, const char *name, double *pressure);

/* The bound of a comparison; false after a message. */
bool read_formula(struct elaboration *e, const struct expression *expression, const struct formula **formula,
                  struct value *kind);

/* What a symbol of a requirement is: its dimension and scale, with no value. */
struct value value_kind_of(enum case_symbol symbol);
bool symbol_is_pressure(enum case_symbol symbol);

/* The symbol a word of the vocabulary stands for, among the quantities; among what a bound may mention. */
bool quantity_of_word(enum vocabulary_word word, enum case_symbol *symbol);
bool symbol_of_word(enum vocabulary_word word, enum case_symbol *symbol);

void read_methods_block(struct elaboration *e);

/* A sheet's own `methods A, B` (NULL: none) for a fluid; `at` is where the fluid is named. */
bool choose_methods(struct elaboration *e, const struct statement *own, const struct case_fluid *fluid,
                    struct location at, struct case_methods *out);

bool read_sweep(struct elaboration *e, const struct statement *statement, struct case_sweep *temperatures,
                struct case_sweep *pressures, struct case_sweep *densities);

void read_units(struct elaboration *e, const struct statement *statement, struct display_units *units);
struct display_units default_units(void);

void build_sheets(struct elaboration *e);

#endif
