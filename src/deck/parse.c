#include "deck/parse.h"

#include "deck/scan.h"

#include <string.h>

enum { STRANGE_BYTES_MOST = 10 }; /* runs of bytes that are no text, before the file is taken for something else */

/* Bytes at `from` that a text cannot hold: control characters and what is not UTF-8. */
static size_t strange_bytes(const struct source_file *file, size_t from)
{
    size_t at = from;
    while (at < file->length) {
        const unsigned char byte = (unsigned char)file->text[at];
        const bool is_line_end = byte == '\r' && at + 1 < file->length && file->text[at + 1] == '\n';
        const bool is_control = (byte < 0x20 && byte != '\t' && byte != '\n' && !is_line_end) || byte == 0x7f;
        if (!is_control && utf8_length(file->text + at, file->length - at) > 0) {
            break;
        }
        at++;
    }
    return at - from;
}

/* Blanks a byte-order mark, which some editors put before UTF-8, and names the two of UTF-16. */
static bool check_mark(struct parse_context *context)
{
    const char *text = context->file->text;
    const size_t length = context->file->length;
    if (length >= 3 && memcmp(text, "\xef\xbb\xbf", 3) == 0) {
        memset(context->buffer, ' ', 3);
    }
    if (length >= 2 && (memcmp(text, "\xff\xfe", 2) == 0 || memcmp(text, "\xfe\xff", 2) == 0)) {
        parse_complain(context, CODE_E109, (struct location){context->file, 0, 2}, "a text in UTF-16 cannot be read");
        return false;
    }
    return true;
}

/* The first place from `at` on that is not plain text in ASCII, found eight bytes at a time. */
static size_t skip_plain(const struct source_file *file, size_t at)
{
    const uint64_t ones = UINT64_C(0x0101010101010101);
    while (at + sizeof ones <= file->length) {
        uint64_t bytes;
        memcpy(&bytes, file->text + at, sizeof bytes);
        /* A byte below 0x20 borrows, and 0x7f carries, into its highest bit; a neighbour's borrow only stops early. */
        const uint64_t odd = (bytes | (bytes - 0x20 * ones) | (bytes + ones)) & (0x80 * ones);
        if (odd != 0) {
            break;
        }
        at += sizeof bytes;
    }
    return at;
}

/* Replaces bytes that are no text by blanks, after a message for each run; false when there are too many. */
static bool clean_buffer(struct parse_context *context)
{
    const struct source_file *file = context->file;
    size_t runs = 0;
    for (size_t at = skip_plain(file, 0); at < file->length;) {
        const unsigned char byte = (unsigned char)file->text[at];
        if ((byte >= 0x20 && byte < 0x7f) || byte == '\n') {
            at = skip_plain(file, at + 1);
            continue;
        }
        const size_t strange = strange_bytes(file, at);
        if (strange == 0) {
            at += utf8_length(file->text + at, file->length - at);
            continue;
        }
        const struct location here = {file, (uint32_t)at, (uint32_t)(at + strange)};
        if (++runs > STRANGE_BYTES_MOST) {
            parse_complain(context, CODE_E109, here, "too many bytes that are no text: this is not a deck");
            return false;
        }
        struct parse_message *message =
            parse_complain(context, CODE_E101, here, "byte 0x%02X is no text", (unsigned)byte);
        if (byte >= 0x80) {
            parse_hint(message, "decks are read as UTF-8: save the file so");
        }
        memset(context->buffer + at, ' ', strange);
        at += strange;
    }
    return true;
}

static void pass_messages_on(const struct parse_context *context, struct diagnostics *diagnostics)
{
    size_t kept = 0;
    for (const struct parse_message *message = context->first_message; message; message = message->next) {
        struct diagnostic *item = diagnose(diagnostics, message->code, message->at, "%s", message->text);
        item->hint = message->hint;
        item->note = message->note;
        item->note_at = message->note_at;
        kept++;
    }
    diagnostics_count_more(diagnostics, context->message_count - kept);
}

bool deck_parse_file(const struct source_file *file, struct arena *arena, struct diagnostics *diagnostics,
                     const struct statement **statements)
{
    struct parse_context *context = arena_alloc(arena, 1, sizeof *context);
    context->arena = arena;
    context->file = file;
    context->buffer = arena_alloc(arena, file->length + 2, 1);
    memcpy(context->buffer, file->text, file->length);
    if (check_mark(context) && clean_buffer(context)) {
        const int outcome = scan_file(context);
        context->is_out_of_memory |= outcome == 2;
    }
    if (context->is_out_of_memory) {
        arena_give_up(arena);
    }
    pass_messages_on(context, diagnostics);
    *statements = context->statements;
    return context->message_count == 0;
}
