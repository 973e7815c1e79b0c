#include "deck/syntax_report.h"

#include <stdio.h>
#include <string.h>

enum { LONGEST_SHOWN = 30 };

/* How the token found is named: as written, shortened; an end by what ended the statement. */
struct shown_token {
    char text[LONGEST_SHOWN + 8];
};

static const char *name_of_end(const struct source_file *file, size_t at)
{
    const char byte = at < file->length ? file->text[at] : '\0';
    if (byte == '}' || byte == ';') {
        return byte == '}' ? "'}'" : "';'";
    }
    while (at < file->length && strchr(" \t\r\n", file->text[at])) {
        at++;
    }
    return at >= file->length ? "end of file" : "end of line";
}

static struct shown_token show_token(const struct syntax_error *error)
{
    struct shown_token shown;
    const struct source_file *file = error->at.file;
    if (error->is_end) {
        snprintf(shown.text, sizeof shown.text, "%s", name_of_end(file, error->at.begin));
        return shown;
    }
    const char *at = file->text + error->at.begin;
    size_t length = error->at.end - error->at.begin;
    const bool is_long = length > LONGEST_SHOWN;
    if (is_long) {
        for (length = LONGEST_SHOWN; length > 0 && ((unsigned char)at[length] & 0xc0U) == 0x80U; length--) {}
    }
    const char *quote = *at == '"' ? "" : "'";
    snprintf(shown.text, sizeof shown.text, "%s%.*s%s%s", quote, (int)length, at, is_long ? "..." : "", quote);
    return shown;
}

static void report_open_pair(struct parse_context *context, const struct syntax_error *error, const char *shown)
{
    const size_t count = context->opener_count;
    const bool is_open = count > 0 && context->openers[count - 1].with == '(';
    const struct location at = is_open ? context->openers[count - 1].at : context->unclosed_pair;
    struct parse_message *message =
        parse_complain(context, CODE_E105, error->at, "')' expected before %s, to close the '(' of line %zu", shown,
                       location_line(at));
    parse_note(message, at, "the '(' that is not closed");
}

/* Whether a word stands before `at`, with nothing but blanks between. */
static bool follows_word(struct location at)
{
    const char *const start = at.file->text;
    const char *before = start + at.begin;
    while (before > start && (before[-1] == ' ' || before[-1] == '\t')) {
        before--;
    }
    return before > start && before[-1] >= 'a' && before[-1] <= 'z';
}

static void report_value(struct parse_context *context, const struct syntax_error *error, const char *shown)
{
    const char *wanted = error->may_begin_value ? "value" : "name";
    struct parse_message *message =
        parse_complain(context, CODE_E105, error->at, "a %s is expected here, not %s", wanted, shown);
    if ((error->is_block || error->is_relation) && follows_word(error->at)) {
        parse_hint(message, "the word before it is reserved and cannot be a name");
    } else if (error->is_reserved) {
        parse_hint(message, "it is reserved and cannot be a name");
    }
}

static void report_stranger(struct parse_context *context, const struct syntax_error *error, const char *shown)
{
    struct parse_message *message = parse_complain(context, CODE_E105, error->at, "%s is not expected here", shown);
    if (error->is_close_pair) {
        parse_hint(message, "there is no '(' before it");
    } else if (error->is_starter) {
        parse_hint(message, "it begins a statement: put it on a line of its own");
    }
}

void syntax_report(struct parse_context *context, const struct syntax_error *error)
{
    if (context->is_stopped) { /* a message says why; what follows it is no mistake of the reader's */
        return;
    }
    const struct shown_token shown = show_token(error);
    if (error->may_begin_statement) {
        struct parse_message *message =
            parse_complain(context, CODE_E105, error->at, "a statement begins with a word, not with %s", shown.text);
        if (error->is_block) {
            parse_hint(message, "put the '{' on the line of the word it belongs to");
        } else if (error->is_reserved) {
            parse_hint(message, "it is reserved for use inside a statement");
        }
    } else if (error->may_close_pair && !error->may_begin_value) {
        report_open_pair(context, error, shown.text);
    } else if ((error->may_begin_value || error->may_be_name) && !error->may_end) {
        report_value(context, error, shown.text);
    } else if (error->may_end && !error->may_begin_value) {
        parse_complain(context, CODE_E105, error->at,
                       "a new statement begins on a new line or after ';', not with %s here", shown.text);
    } else {
        report_stranger(context, error, shown.text);
    }
    context->is_recovering = !error->is_end;
}
