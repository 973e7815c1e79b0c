/* Sweeps: every point told once and in order, nothing carried from chunk to chunk, the same for any number of threads.
 */
#include "filling/sweep.h"

#include "filling/solve.h"
#include "support/check.h"
#include "support/elaborated.h"
#include "support/result_reading.h"

#ifdef _OPENMP
#include <omp.h>
#endif

static const char DECK[] =
    "component n-butane { molar-mass 58.1222 g/mol; critical-temperature 425.125 K; critical-pressure 3.796 MPa\n"
    "  acentric 0.2008; hazard flammable }\n"
    "component nitrogen { molar-mass 28.01348 g/mol; critical-temperature 126.192 K; critical-pressure 3.3958 MPa\n"
    "  acentric 0.0372 }\n"
    "pair nitrogen n-butane { peng-robinson kij 0.08 }\n"
    "mixture span by mole { n-butane 2 %; nitrogen rest }\n"
    "vessel ten { water-capacity 10 L; test-pressure 300 barg }\n"
    "methods { lead peng-robinson; beside soave-redlich-kwong }\n"
    "charge lot { fluid span; vessel ten; fill 62 barg at 20 degC }\n"
    "sheet settled-pressure { charge lot; sweep temperature from -70 degC to 60 degC in 1500 steps }\n"
    "sheet fugacity { fluid span; sweep temperature from -70 degC to 10 degC in 40 steps\n"
    "  sweep density from 1 kg/m3 to 150 kg/m3 in 40 steps }\n"
    "sheet saturation { fluid span; sweep temperature from -60 degC to 30 degC in 1500 steps }\n";

static void use_threads(int count)
{
#ifdef _OPENMP
    omp_set_num_threads(count);
#else
    (void)count;
#endif
}

/* ---- points that only count -------------------------------------------------------------------------------------- */

/* Several blocks and no whole number of chunks; enough for threads. */
enum { POINTS = 4099, METHODS = 2, CHUNK = 16 };

struct counted {
    double point, pressure;
};

struct told {
    size_t count, method, point; /* how many, and the last */
    size_t in_order;
    struct counted answers[METHODS][POINTS];
};

/* The pressure of a charge that depends on the place in the chunk: with a warm start its last bits depend on the
 * points before. */
static void count_point(const void *context, struct method_run *method, size_t point, void *out)
{
    struct counted *answer = out;
    struct contents contents;
    const enum answer found = contents_at(context, method, 0.5 + 0.0001 * (double)(point % CHUNK), 228.0, &contents);
    answer->point = (double)point;
    answer->pressure = found == ANSWER_OK ? contents.pressure : 0.0;
}

static void hear(void *teller, size_t method, size_t point, const void *answer)
{
    struct told *told = teller;
    const bool is_first = told->count == 0 && method == 0 && point == 0;
    const bool is_next = method == told->method && point == told->point + 1;
    const bool is_other_method = method == told->method + 1 && point <= told->point;
    const bool is_next_block = method == 0 && told->method == METHODS - 1 && point == told->point + 1;
    told->in_order += is_first || is_next || is_other_method || is_next_block;
    told->method = method;
    told->point = point;
    told->answers[method][point] = *(const struct counted *)answer;
    told->count++;
}

/* Told once for each call, on the thread that asked. */
struct heard {
    size_t calls, last, falls, beyond;
};

static void hear_progress(void *context, const struct progress_state *state)
{
    struct heard *heard = context;
    heard->falls += state->done < heard->last;
    heard->beyond += state->done > state->count || state->sheet != 1 || state->sheet_count != 3;
    heard->last = state->done;
    heard->calls++;
}

static void sweep_counting(const struct elaborated *it, struct told *told, struct heard *heard)
{
    const struct progress progress = {hear_progress, heard};
    struct result *result = result_create(it->arena);
    const struct case_sheet *sheet = &it->tree->sheets[0];
    struct sheet_run run = {.arena = it->arena,
                            .tree = it->tree,
                            .sheet = sheet,
                            .result = result,
                            .out = result_add_sheet(result, "settled-pressure", NULL),
                            .number = 1,
                            .progress = &progress};
    struct method_run first = method_run_create(sheet->fluid, "peng-robinson", true, it->arena);
    struct method_run second = method_run_create(sheet->fluid, "soave-redlich-kwong", true, it->arena);
    struct method_run *const methods[METHODS] = {&first, &second};
    const struct sweep sweep = {
        .run = &run,
        .point_count = POINTS,
        .method_count = METHODS,
        .methods = methods,
        .needs_edges = true,
        .answer_size = sizeof(struct counted),
        .context = &run,
        .solve = count_point,
        .tell = hear,
        .teller = told,
    };
    sweep_points(&sweep);
}

static void every_point_is_told_once_in_order(void **state)
{
    (void)state;
    for (int threads = 1; threads <= 3; threads++) {
        struct elaborated it = elaborate_well(DECK);
        struct told *told = arena_alloc(it.arena, 1, sizeof *told);
        struct heard heard = {0};
        use_threads(threads);
        sweep_counting(&it, told, &heard);
        assert_int_equal(told->count, METHODS * POINTS);
        assert_int_equal(told->in_order, METHODS * POINTS);
        for (size_t i = 0; i < METHODS * POINTS; i++) {
            const struct counted *answer = &told->answers[i / POINTS][i % POINTS];
            assert_near(answer->point, (double)(i % POINTS), 0.0, "each in its own place");
        }
        elaborated_end(&it);
    }
}

/* Chunks that ask the same questions in the same order get the same answers to the last bit. */
static void a_chunk_knows_nothing_of_the_one_before(void **state)
{
    (void)state;
    struct elaborated it = elaborate_well(DECK);
    struct told *told = arena_alloc(it.arena, 1, sizeof *told);
    struct heard heard = {0};
    use_threads(2);
    sweep_counting(&it, told, &heard);
    for (size_t i = 0; i < METHODS * POINTS; i++) {
        const size_t method = i / POINTS, point = i % POINTS;
        assert_true(told->answers[method][point].pressure > 1e6);
        assert_near(told->answers[method][point].pressure, told->answers[method][point % CHUNK].pressure, 0.0,
                    "the same questions in the first chunk");
    }
    elaborated_end(&it);
}

static void progress_rises_to_the_whole_on_one_thread(void **state)
{
    (void)state;
    for (int threads = 1; threads <= 3; threads += 2) {
        struct elaborated it = elaborate_well(DECK);
        struct told *told = arena_alloc(it.arena, 1, sizeof *told);
        struct heard heard = {0};
        use_threads(threads);
        sweep_counting(&it, told, &heard);
        assert_int_equal(heard.falls, 0);
        assert_int_equal(heard.beyond, 0);
        if (threads == 1) {
            assert_int_equal(heard.calls, METHODS * (POINTS / CHUNK + 1));
            assert_int_equal(heard.last, METHODS * POINTS);
        }
        elaborated_end(&it);
    }
}

/* ---- sheets ------------------------------------------------------------------------------------------------------ */

static void assert_same_cell(const struct cell *cell, const struct cell *expected)
{
    assert_int_equal(cell->kind, expected->kind);
    assert_int_equal(cell->is_outside_range, expected->is_outside_range);
    if (cell->kind == CELL_NUMBER) {
        assert_memory_equal(&cell->number, &expected->number, sizeof cell->number);
    } else if (cell->kind == CELL_TEXT) {
        assert_string_equal(cell->text, expected->text);
    }
}

static size_t assert_same_table(const struct table *table, const struct table *expected)
{
    assert_int_equal(table->row_count, expected->row_count);
    for (size_t i = 0; i < table->row_count; i++) {
        for (size_t k = 0; k < table->column_count; k++) {
            assert_same_cell(result_cell(table, i, table->columns[k].name),
                             result_cell(expected, i, table->columns[k].name));
        }
    }
    return table->row_count;
}

/* Rows of all tables. */
static size_t assert_same_result(const struct result *result, const struct result *expected)
{
    size_t rows = 0;
    const struct result_sheet *other = expected->first_sheet;
    for (const struct result_sheet *sheet = result->first_sheet; sheet; sheet = sheet->next, other = other->next) {
        const struct sheet_part *other_part = other->first_part;
        for (const struct sheet_part *part = sheet->first_part; part; part = part->next) {
            assert_int_equal(part->kind, other_part->kind);
            rows += part->kind == PART_TABLE ? assert_same_table(part->table, other_part->table) : 0;
            other_part = other_part->next;
        }
    }
    assert_int_equal(result->warnings.count, expected->warnings.count);
    for (size_t i = 0; i < result->warnings.count; i++) {
        assert_string_equal(result->warnings.items[i].text, expected->warnings.items[i].text);
    }
    return rows;
}

static void any_number_of_threads_gives_the_same_to_the_last_bit(void **state)
{
    (void)state;
    struct elaborated one = elaborate_well(DECK);
    use_threads(1);
    const struct result *expected = filling_solve(one.tree, "0.0.0", one.arena);
    for (int threads = 2; threads <= 5; threads++) {
        struct elaborated it = elaborate_well(DECK);
        use_threads(threads);
        assert_true(assert_same_result(filling_solve(it.tree, "0.0.0", it.arena), expected) > 2 * 1501);
        elaborated_end(&it);
    }
    elaborated_end(&one);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_point_is_told_once_in_order),
        cmocka_unit_test(a_chunk_knows_nothing_of_the_one_before),
        cmocka_unit_test(progress_rises_to_the_whole_on_one_thread),
        cmocka_unit_test(any_number_of_threads_gives_the_same_to_the_last_bit),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
