/* Plain text on a page of fixed width: cleaning, wrapping, indenting.
 *
 * No line written through these functions is wider than PAGE_WIDTH columns or ends in a blank, whatever the deck's own
 * words hold. Ownership: texts are made in the arena of the struct text or the arena given.
 */
#ifndef TAREWRIGHT_REPORT_PAGE_H
#define TAREWRIGHT_REPORT_PAGE_H

#include "base/text.h"

#include <stdbool.h>
#include <stddef.h>

enum { PAGE_WIDTH = 100 };

/* What stands in a place that has no value. */
#define PAGE_DASH "\xE2\x80\x93"

struct page_lines {
    size_t count, capacity;
    const char **items;
};

/* A copy in which line breaks and tabs are blanks, and control characters and broken UTF-8 are '?'. */
const char *page_clean(struct arena *arena, const char *text);

/* `text` (clean) broken into lines of at most `width` columns (at least 1): at blanks where there are any, and after
 * hyphens too when `at_hyphens`; a longer word is cut. Blanks at a break are dropped. Always at least one line. */
struct page_lines page_wrap(struct arena *arena, const char *text, size_t width, bool at_hyphens);

/* The columns of the widest line that page_wrap would make, without hyphens. */
size_t page_wrapped_columns(const char *text, size_t width);

/* The columns a whole text takes. */
size_t page_columns(const char *text);

/* One line as it stands; when it is too wide its rest follows on lines indented by `indent`. */
void page_line(struct text *out, size_t indent, const char *line);

/* Words wrapped to the page, every line indented by `indent`. */
void page_paragraph(struct text *out, size_t indent, const char *words);

/* `lead` at column `lead_indent`, then words wrapped with every line starting at column `indent`; a lead that reaches
 * past `indent` gets a line of its own. */
void page_hanging(struct text *out, size_t lead_indent, const char *lead, size_t indent, const char *words);

void page_blank(struct text *out);

/* The head of a numbered section, with the blank lines around it. */
void page_section(struct text *out, size_t number, const char *title);

#endif
