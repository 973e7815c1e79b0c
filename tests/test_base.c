/* The base: arena, growing text, files, codes. */
#define _XOPEN_SOURCE 700
#include "base/arena.h"
#include "base/codes.h"
#include "base/file.h"
#include "base/parallel.h"
#include "base/text.h"
#include "support/check.h"
#include "support/rationing.h"

#include <dirent.h>
#include <errno.h>
#include <stdalign.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* ---- Arena ---- */

static void memory_is_zeroed_aligned_and_apart(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    unsigned char *blocks[300];
    for (size_t i = 0; i < 300; i++) {
        const size_t size = (i * i * 7) % 1500 + 1;
        blocks[i] = arena_alloc(arena, size, 1);
        assert_int_equal((uintptr_t)blocks[i] % alignof(max_align_t), 0);
        for (size_t j = 0; j < size; j++) {
            assert_int_equal(blocks[i][j], 0);
        }
        memset(blocks[i], (int)(i & 0xffU), size);
    }
    for (size_t i = 0; i < 300; i++) {
        const size_t size = (i * i * 7) % 1500 + 1;
        for (size_t j = 0; j < size; j++) {
            assert_int_equal(blocks[i][j], i & 0xffU);
        }
    }
    arena_free(arena);
}

static void large_and_empty_requests_are_served(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char *large = arena_alloc(arena, 3, 1000000);
    large[2999999] = 'x';
    assert_non_null(arena_alloc(arena, 0, 8));
    assert_non_null(arena_alloc(arena, 8, 0));
    char *small = arena_alloc(arena, 1, 1);
    *small = 'y';
    assert_int_equal(large[2999999], 'x');
    arena_free(arena);
    arena_free(NULL);
}

static void a_product_beyond_memory_is_refused(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    assert_null(arena_try(arena, SIZE_MAX, 2));
    assert_null(arena_try(arena, SIZE_MAX / 2 + 2, 2));
    assert_null(arena_try(arena, SIZE_MAX, 1));
    jmp_buf place;
    volatile bool has_jumped = false;
    if (setjmp(place) == 0) {
        arena_on_exhaustion(arena, &place);
        arena_alloc(arena, SIZE_MAX, 16);
    } else {
        has_jumped = true;
    }
    assert_true(has_jumped);
    arena_free(arena);
}

static void grow_lists(struct arena *arena, void *context)
{
    (void)context;
    struct {
        size_t *items;
        size_t count, capacity;
    } list = {NULL, 0, 0};
    for (size_t i = 0; i < 20000; i++) {
        *ARENA_APPEND(arena, &list) = i;
    }
    for (size_t i = 0; i < 20000; i++) {
        assert_int_equal(list.items[i], i);
    }
}

static void running_out_leaks_nothing(void **state)
{
    (void)state;
    assert_true(ration_until_done(grow_lists, NULL) > 2);
}

static void give_up_at_once(struct arena *arena, void *context)
{
    (void)context;
    arena_give_up(arena);
}

static void giving_up_leaves_as_running_out_does(void **state)
{
    (void)state;
    assert_false(ration_run(10, give_up_at_once, NULL));
    struct ration none = {.left = 0};
    const struct arena_source source = ration_source(&none);
    assert_null(arena_create(&source));
}

static void grown_lists_keep_their_items_and_zero_the_rest(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    size_t capacity = 0;
    int *items = arena_grow(arena, NULL, &capacity, 3, sizeof *items);
    assert_true(capacity >= 3);
    items[0] = 7;
    const size_t before = capacity;
    int *same = arena_grow(arena, items, &capacity, before, sizeof *items);
    assert_ptr_equal(same, items);
    int *larger = arena_grow(arena, items, &capacity, before + 1, sizeof *items);
    assert_true(capacity > before);
    assert_int_equal(larger[0], 7);
    for (size_t i = before; i < capacity; i++) {
        assert_int_equal(larger[i], 0);
    }
    arena_free(arena);
}

static void texts_are_copied_and_formatted_at_any_length(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    assert_string_equal(arena_copy_text(arena, "abcdef", 3), "abc");
    assert_string_equal(arena_copy_text(arena, NULL, 0), "");
    assert_string_equal(arena_format(arena, "%s %d", "a", 5), "a 5");
    const char *wide = arena_format(arena, "%*d", 100000, 1);
    assert_int_equal(strlen(wide), 100000);
    arena_free(arena);
}

/* ---- Text ---- */

static void a_text_grows_at_its_end(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    struct text text = {.arena = arena};
    text_add(&text, "ab", 2);
    text_format(&text, "%d-%s", 5, "c");
    text_pad(&text, 2);
    text_add(&text, "", 0);
    text_add(&text, "d", 1);
    assert_string_equal(text.bytes, "ab5-c  d");
    assert_int_equal(text.length, 8);
    for (int i = 0; i < 10000; i++) {
        text_format(&text, "%s", "0123456789");
    }
    assert_int_equal(text.length, 100008);
    assert_int_equal(strlen(text.bytes), text.length);
    arena_free(arena);
}

static void columns_are_characters(void **state)
{
    (void)state;
    assert_int_equal(text_columns("abc", 3), 3);
    assert_int_equal(text_columns("", 0), 0);
    assert_int_equal(text_columns("\xc2\xb1\xe2\x82\xac", 5), 2);
    assert_int_equal(text_columns("\xf0\x9f\x98\x80!", 5), 2);
    assert_int_equal(text_columns("a\xff"
                                  "b",
                                  3),
                     3);
}

/* ---- Files ---- */

/* A fresh folder for one test; its path in `path`. */
static void make_folder(char path[64])
{
    snprintf(path, 64, P_tmpdir "/tarewright-test-XXXXXX");
    assert_non_null(mkdtemp(path));
}

static size_t count_entries(const char *folder)
{
    DIR *open = opendir(folder);
    assert_non_null(open);
    size_t count = 0;
    while (readdir(open)) {
        count++;
    }
    closedir(open);
    return count - 2; /* without the folder itself and the one above */
}

static void what_is_written_is_read_back(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char folder[64];
    make_folder(folder);
    const char *path = arena_format(arena, "%s/a.txt", folder);
    char bytes[300];
    for (size_t i = 0; i < sizeof bytes; i++) {
        bytes[i] = (char)(i & 0xffU);
    }
    const size_t lengths[] = {sizeof bytes, 1, 0, 17};
    for (size_t i = 0; i < sizeof lengths / sizeof *lengths; i++) {
        char *text;
        size_t length;
        assert_true(file_write(arena, path, bytes, lengths[i]));
        assert_true(file_read(arena, path, &text, &length));
        assert_int_equal(length, lengths[i]);
        assert_memory_equal(text, bytes, length);
        assert_int_equal(text[length], '\0');
    }
    assert_int_equal(count_entries(folder), 1);
    unlink(path);
    rmdir(folder);
    arena_free(arena);
}

static void what_cannot_be_read_says_why(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char folder[64];
    make_folder(folder);
    char *text;
    size_t length;
    errno = 0;
    assert_false(file_read(arena, arena_format(arena, "%s/none", folder), &text, &length));
    assert_int_equal(errno, ENOENT);
    assert_false(file_read(arena, folder, &text, &length));
    assert_int_equal(errno, EISDIR);
    assert_false(file_read(arena, arena_format(arena, "%s/none/deeper", folder), &text, &length));
    assert_int_equal(errno, ENOENT);
    const char *pipe = arena_format(arena, "%s/pipe", folder);
    assert_int_equal(mkfifo(pipe, 0600), 0);
    assert_false(file_read(arena, pipe, &text, &length)); /* and does not wait for a writer */
    assert_int_equal(errno, EINVAL);
    unlink(pipe);
    const char *huge = arena_format(arena, "%s/huge", folder);
    assert_true(file_write(arena, huge, "x", 1));
    assert_int_equal(truncate(huge, 65L * 1024 * 1024), 0);
    assert_false(file_read(arena, huge, &text, &length));
    assert_int_equal(errno, EFBIG);
    unlink(huge);
    rmdir(folder);
    arena_free(arena);
}

static void a_file_that_cannot_be_written_leaves_nothing_behind(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char folder[64];
    make_folder(folder);
    assert_false(file_write(arena, arena_format(arena, "%s/none/a.txt", folder), "x", 1));
    assert_int_equal(errno, ENOENT);
    const char *inner = arena_format(arena, "%s/inner", folder);
    assert_int_equal(mkdir(inner, 0700), 0);
    assert_false(file_write(arena, inner, "x", 1));
    assert_int_equal(count_entries(folder), 1);
    rmdir(inner);
    rmdir(folder);
    arena_free(arena);
}

static void read_in_small(struct arena *arena, void *context)
{
    char *text;
    size_t length;
    errno = 0;
    if (!file_read(arena, context, &text, &length)) {
        assert_int_equal(errno, ENOMEM);
        arena_give_up(arena);
    }
}

static void reading_without_memory_says_so(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    char folder[64];
    make_folder(folder);
    char *path = arena_format(arena, "%s/a.txt", folder);
    assert_true(file_write(arena, path, arena_alloc(arena, 100000, 1), 100000));
    assert_int_equal(ration_until_done(read_in_small, path), 2);
    unlink(path);
    rmdir(folder);
    arena_free(arena);
}

static void digests_are_those_of_the_standard(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    assert_string_equal(file_sha256(arena, "abc", 3), /* FIPS 180-2, appendix B.1 */
                        "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    const char *two_blocks = "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq"; /* FIPS 180-2, appendix B.2 */
    assert_string_equal(file_sha256(arena, two_blocks, strlen(two_blocks)),
                        "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
    char *million = arena_alloc(arena, 1000000, 1); /* FIPS 180-2, appendix B.3 */
    memset(million, 'a', 1000000);
    assert_string_equal(file_sha256(arena, million, 1000000),
                        "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0");
    arena_free(arena);
}

/* ---- Codes ---- */

static void codes_rise_within_their_list_and_are_unique(void **state)
{
    (void)state;
    size_t count;
    const struct code_row *rows = code_rows(&count);
    assert_true(count > 30);
    for (size_t i = 0; i < count; i++) {
        assert_true(rows[i].code >= 100 && rows[i].code < 500);
        for (size_t j = 0; j < i; j++) {
            assert_int_not_equal(rows[i].code, rows[j].code);
        }
        if (i > 0 && rows[i].code < rows[i - 1].code) {
            print_error("%s stands after %s\n", rows[i].name, rows[i - 1].name);
            fail();
        }
    }
}

static void each_code_has_its_name_meaning_and_advice(void **state)
{
    (void)state;
    size_t count;
    const struct code_row *rows = code_rows(&count);
    for (size_t i = 0; i < count; i++) {
        char name[8];
        snprintf(name, sizeof name, "%c%d", rows[i].severity, (int)rows[i].code);
        assert_string_equal(rows[i].name, name);
        assert_true(rows[i].severity == 'E' || rows[i].severity == 'W');
        assert_true(strlen(rows[i].meaning) > 5 && strlen(rows[i].advice) > 5);
        assert_null(strchr(rows[i].meaning, '\n'));
        assert_ptr_equal(code_row(rows[i].code), &rows[i]);
    }
    assert_null(code_row(CODE_NONE));
}

/* ---- threads ----------------------------------------------------------------------------------------------------- */

enum { TASKS = 57 };

struct tasks {
    int done[TASKS];
    size_t by_thread[TASKS], told;
};

static void do_task(void *context, size_t thread, size_t task)
{
    struct tasks *it = context;
    it->done[task]++;
    it->by_thread[task] = thread;
}

static void tell_task(void *context, size_t done)
{
    ((struct tasks *)context)->told = done;
}

static void every_task_is_done_once_on_any_number_of_threads(void **state)
{
    (void)state;
    for (size_t wanted = 0; wanted <= 3; wanted++) {
        struct tasks it = {.told = 0};
        const size_t threads = parallel_threads(wanted, TASKS);
        assert_true(threads >= 1 && (wanted == 0 || threads <= wanted));
        parallel_run(&(struct parallel){do_task, &it, tell_task}, threads, TASKS);
        for (size_t task = 0; task < TASKS; task++) {
            assert_int_equal(it.done[task], 1);
            assert_true(it.by_thread[task] < threads);
        }
        assert_true(it.told >= (threads == 1 ? TASKS : 0) && it.told <= TASKS);
    }
    assert_int_equal(parallel_threads(8, 1), 1);
    assert_int_equal(parallel_threads(8, 0), 1);
    parallel_run(&(struct parallel){.work = do_task}, 1, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(memory_is_zeroed_aligned_and_apart),
        cmocka_unit_test(large_and_empty_requests_are_served),
        cmocka_unit_test(a_product_beyond_memory_is_refused),
        cmocka_unit_test(running_out_leaks_nothing),
        cmocka_unit_test(giving_up_leaves_as_running_out_does),
        cmocka_unit_test(grown_lists_keep_their_items_and_zero_the_rest),
        cmocka_unit_test(texts_are_copied_and_formatted_at_any_length),
        cmocka_unit_test(a_text_grows_at_its_end),
        cmocka_unit_test(columns_are_characters),
        cmocka_unit_test(what_is_written_is_read_back),
        cmocka_unit_test(what_cannot_be_read_says_why),
        cmocka_unit_test(a_file_that_cannot_be_written_leaves_nothing_behind),
        cmocka_unit_test(reading_without_memory_says_so),
        cmocka_unit_test(digests_are_those_of_the_standard),
        cmocka_unit_test(codes_rise_within_their_list_and_are_unique),
        cmocka_unit_test(each_code_has_its_name_meaning_and_advice),
        cmocka_unit_test(every_task_is_done_once_on_any_number_of_threads),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
