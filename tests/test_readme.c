/* The README shows a real deck and its real listing: both are compared with the files they were taken from.
 * With TAREWRIGHT_UPDATE_GOLDEN set they are written into the README anew. */
#include "base/file.h"
#include "base/text.h"
#include "support/check.h"

#include <stdlib.h>
#include <string.h>

static const char *const SHOWN[] = {"decks/oxygen-ten-litre.deck", "tests/golden/listings/oxygen-ten-litre.listing"};
enum { SHOWN_COUNT = sizeof SHOWN / sizeof *SHOWN };

static char *read_whole(struct arena *arena, const char *path)
{
    char *text;
    size_t length;
    if (!file_read(arena, path, &text, &length)) {
        print_error("cannot read %s\n", path);
        fail();
    }
    return text;
}

/* The README with the text of its first fences replaced by the files they show. */
static struct text with_files_shown(struct arena *arena, const char *readme)
{
    struct text made = {.arena = arena};
    const char *rest = readme;
    for (int i = 0; i < SHOWN_COUNT; i++) {
        const char *fence = strstr(rest, "\n```\n");
        assert_non_null(fence);
        const char *content = fence + strlen("\n```\n");
        const char *end = strstr(content - 1, "\n```\n");
        assert_non_null(end);
        text_add(&made, rest, (size_t)(content - rest));
        text_format(&made, "%s```\n", read_whole(arena, SHOWN[i]));
        rest = end + strlen("\n```\n");
    }
    text_add(&made, rest, strlen(rest));
    return made;
}

static void the_readme_shows_a_deck_and_its_listing_as_they_are(void **state)
{
    (void)state;
    struct arena *arena = arena_create(NULL);
    const char *readme = read_whole(arena, "README.md");
    const struct text expected = with_files_shown(arena, readme);
    if (getenv("TAREWRIGHT_UPDATE_GOLDEN") != NULL) {
        assert_true(file_write(arena, "README.md", expected.bytes, expected.length));
    } else {
        assert_string_equal(readme, expected.bytes);
    }
    arena_free(arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(the_readme_shows_a_deck_and_its_listing_as_they_are)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
