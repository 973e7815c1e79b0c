#include "deck/scan.h"

#include "deck/vocabulary.h"
#include "deck_parser.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum {
    LONGEST_UNIT = 48,
    LONGEST_MARKER = 8 /* longer words are not looked for among the reserved ones */
};

/* Names joined by operators without blanks up to this length are taken apart; a longer chain is taken as one wrong
 * name, as scanning its rest anew after each part would take time that grows with its square. */
enum { LONGEST_COMPOSED = 1000 };

void *scan_reserve(struct parse_context *context, size_t bytes)
{
    const size_t step = sizeof(max_align_t);
    const size_t rounded = (bytes + step - 1) / step * step;
    if (rounded > sizeof context->scanner_memory - context->scanner_bytes) {
        return NULL;
    }
    void *taken = (char *)context->scanner_memory + context->scanner_bytes;
    context->scanner_bytes += rounded;
    return taken;
}

void scan_locate(const struct parse_context *context, struct location *at, const char *match, size_t length)
{
    at->file = context->file;
    at->begin = (uint32_t)(match - context->buffer);
    at->end = at->begin + (uint32_t)length;
}

static bool is_in_pair(const struct parse_context *context)
{
    return context->opener_count > 0 && context->openers[context->opener_count - 1].with == '(';
}

static void give_up_pairs(struct parse_context *context)
{
    while (is_in_pair(context)) {
        context->unclosed_pair = context->openers[--context->opener_count].at;
    }
}

void scan_begin(struct parse_context *context)
{
    if (context->last_token == TOK_END) {
        give_up_pairs(context);
        context->is_recovering = false;
    }
}

int scan_give(struct parse_context *context, int token, struct location at)
{
    context->last_token = token;
    context->last_at = at;
    if (++context->token_count == TOKENS_MOST) {
        parse_complain(context, CODE_E119, at, "a file of more than %d words and signs", TOKENS_MOST);
        context->is_stopped = true;
    }
    return token;
}

bool scan_needs_end(const struct parse_context *context)
{
    const int last = context->last_token;
    return last != 0 && last != TOK_END && last != TOK_OPEN_BLOCK;
}

static bool is_continued(int last_token)
{
    switch (last_token) {
    case TOK_COMMA:
    case TOK_PLUS:
    case TOK_MINUS:
    case TOK_TIMES:
    case TOK_OVER:
    case TOK_RELATION:
        return true;
    default:
        return false;
    }
}

bool scan_ends_statement(const struct parse_context *context)
{
    const bool is_held = is_in_pair(context) && !context->is_recovering;
    return scan_needs_end(context) && !is_held && !is_continued(context->last_token);
}

int scan_open(struct parse_context *context, char with, struct location at)
{
    if (with == '{') {
        give_up_pairs(context);
    }
    if (context->opener_count == NESTING_MOST) {
        parse_complain(context, CODE_E108, at, "nested too deeply: more than %d '{' and '(' inside one another",
                       NESTING_MOST);
        context->is_stopped = true;
        return TOK_END;
    }
    context->openers[context->opener_count++] = (struct opener){with, at};
    return with == '{' ? TOK_OPEN_BLOCK : TOK_OPEN_PAIR;
}

void scan_close_pair(struct parse_context *context)
{
    if (is_in_pair(context)) {
        context->opener_count--;
    }
}

bool scan_close_block(struct parse_context *context, struct location at)
{
    give_up_pairs(context);
    if (context->opener_count == 0) {
        if (context->swallowed_blocks > 0) {
            context->swallowed_blocks--;
        } else {
            parse_complain(context, CODE_E106, at, "'}' without a '{' before it");
        }
        return false;
    }
    context->opener_count--;
    return true;
}

static bool is_blank(char byte)
{
    return byte == ' ' || byte == '\t' || byte == '\r' || byte == '\n';
}

/* The place after the last byte that is not blank, where a reader would add what is missing. */
static struct location last_written(const struct parse_context *context)
{
    size_t end = context->file->length;
    while (end > 0 && is_blank(context->file->text[end - 1])) {
        end--;
    }
    return (struct location){context->file, (uint32_t)end, (uint32_t)end};
}

int scan_finish(struct parse_context *context, struct location *at)
{
    *at = last_written(context);
    if (scan_needs_end(context)) {
        return scan_give(context, TOK_END, *at);
    }
    give_up_pairs(context);
    if (context->opener_count == 0) {
        return TOK_DECK_END;
    }
    const struct opener *open = &context->openers[--context->opener_count];
    if (!context->is_end_known && !context->is_stopped) {
        struct parse_message *message =
            parse_complain(context, CODE_E107, last_written(context), "'}' expected to close the '{' of line %zu",
                           location_line(open->at));
        parse_note(message, open->at, "the '{' that is not closed");
    }
    context->is_end_known = true;
    return scan_give(context, TOK_CLOSE_BLOCK, *at);
}

/* Bytes of the file's own text, in which nothing was replaced; a blank outside of it. */
static char byte_at(const struct parse_context *context, size_t offset)
{
    return offset < context->file->length ? context->file->text[offset] : '\n';
}

static bool is_digit(char byte)
{
    return byte >= '0' && byte <= '9';
}

static bool is_letter(char byte)
{
    return (byte >= 'A' && byte <= 'Z') || (byte >= 'a' && byte <= 'z');
}

/* Whether a value may begin at the place: after a blank or a sign that opens or separates. */
static bool is_value_start(const struct parse_context *context, struct location at)
{
    const char before = at.begin > 0 ? byte_at(context, at.begin - 1) : ' ';
    return is_blank(before) || (before != '\0' && strchr("({,;<>=", before));
}

bool scan_is_sign(const struct parse_context *context, struct location at)
{
    return is_value_start(context, at);
}

int scan_operator(struct parse_context *context, struct location at)
{
    const char sign = byte_at(context, at.begin);
    const char after = byte_at(context, at.begin + 1);
    if (sign == '-' && is_value_start(context, at) && (is_letter(after) || after == '%' || after == '(')) {
        return TOK_NEGATE;
    }
    const bool is_apart = at.begin > 0 && is_blank(byte_at(context, at.begin - 1)) && is_blank(after);
    if (!is_apart) {
        struct parse_message *message =
            parse_complain(context, CODE_E103, at, "'%c' without a blank on both sides", sign);
        parse_hint(message, "write it as in 2 / 3 * test-pressure");
    }
    return sign == '+' ? TOK_PLUS : sign == '-' ? TOK_MINUS : sign == '*' ? TOK_TIMES : TOK_OVER;
}

/* The digits as one whole number times a power of ten, when both are exact in binary: the usual case, and much faster
 * than strtod. The result is then rounded once, hence correctly. */
static bool read_exactly(const char *digits, double *value)
{
    static const double powers[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,  1e8,  1e9,  1e10, 1e11,
                                    1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};
    const int largest_power = (int)(sizeof powers / sizeof *powers) - 1;
    const uint64_t largest_whole = UINT64_C(1) << 53;
    uint64_t whole = 0;
    int decimals = 0;
    bool is_fraction = false;
    const char *at = digits;
    for (; is_digit(*at) || *at == '.'; at++) {
        if (*at == '.') {
            is_fraction = true;
            continue;
        }
        whole = 10 * whole + (uint64_t)(*at - '0');
        decimals += is_fraction;
        if (whole > largest_whole) {
            return false;
        }
    }
    const long exponent = *at == '\0' ? 0 : strtol(at + 1, NULL, 10);
    if (exponent < -largest_power || exponent > largest_power || decimals > largest_power) {
        return false;
    }
    const int power = (int)exponent - decimals;
    if (power < -largest_power) {
        return false;
    }
    *value = power < 0 ? (double)whole / powers[-power] : (double)whole * powers[power];
    return true;
}

double scan_number(struct parse_context *context, struct location at, const char *digits)
{
    const bool is_negative = digits[0] == '-';
    const bool has_sign = is_negative || digits[0] == '+';
    double size = 0.0;
    if (!read_exactly(digits + has_sign, &size)) {
        size = strtod(digits + has_sign, NULL);
        const bool is_zero = strcspn(digits, "123456789") >= strcspn(digits, "eE");
        if (!isfinite(size) || (!is_zero && !isnormal(size))) {
            parse_complain(context, CODE_E104, at, "the number is too %s", isfinite(size) ? "small" : "large");
            size = 1.0;
        }
    }
    return is_negative ? -size : size;
}

bool scan_may_unit_follow(const struct parse_context *context, struct location at)
{
    size_t next = at.end;
    while (byte_at(context, next) == ' ' || byte_at(context, next) == '\t') {
        next++;
    }
    return is_letter(byte_at(context, next)) || byte_at(context, next) == '%';
}

/* The token of a word of the vocabulary's list of markers. */
static int token_of_marker(enum vocabulary_word marker)
{
    static const struct {
        enum vocabulary_word marker;
        int token;
    } tokens[] = {
        {WORD_MARKER_FROM, TOK_FROM}, {WORD_MARKER_TO, TOK_TO},     {WORD_MARKER_BY, TOK_BY},
        {WORD_MARKER_AT, TOK_AT},     {WORD_MARKER_IN, TOK_IN},     {WORD_MARKER_NO, TOK_NO},
        {WORD_MARKER_ONE, TOK_ONE},   {WORD_MARKER_REST, TOK_REST}, {WORD_MARKER_REF, TOK_REF},
        {WORD_MARKER_USE, TOK_USE},   {WORD_MARKER_LET, TOK_LET},   {WORD_MARKER_FOR, TOK_FOR},
    };
    for (size_t i = 0; i < sizeof tokens / sizeof *tokens; i++) {
        if (tokens[i].marker == marker) {
            return tokens[i].token;
        }
    }
    return TOK_NAME;
}

static int run_out(struct parse_context *context)
{
    context->is_out_of_memory = true;
    context->is_stopped = true;
    return TOK_END;
}

int scan_word(struct parse_context *context, const char *match, size_t length, const char **spelled)
{
    struct word *word = word_enter(&context->words, context->arena, match, length);
    if (!word) {
        return run_out(context);
    }
    if (word->token == 0) {
        const struct vocabulary_row *row = length > LONGEST_MARKER ? NULL : vocabulary_find(BLOCK_MARKER, word->text);
        word->token = row ? token_of_marker(row->id) : TOK_NAME;
    }
    *spelled = word->text;
    return word->token;
}

bool scan_is_unit(struct parse_context *context, const char *match, size_t length, const char **spelled)
{
    struct word *word = length <= LONGEST_UNIT ? word_enter(&context->words, context->arena, match, length) : NULL;
    *spelled = word ? word->text : "";
    return word && word_is_unit(word);
}

size_t scan_composed(struct parse_context *context, const char *match, size_t length)
{
    const char *spelled;
    if (length > LONGEST_COMPOSED || scan_is_unit(context, match, length, &spelled)) {
        return length;
    }
    size_t name = match[0] == '%' ? 1 : 0;
    while (name == 0 || (match[0] != '%' && (is_letter(match[name]) || is_digit(match[name]) || match[name] == '-'))) {
        name++;
    }
    while (match[name - 1] == '-') {
        name--;
    }
    return name;
}

static void complain_about_escape(struct parse_context *context, struct location text, size_t offset)
{
    const uint32_t begin = text.begin + (uint32_t)offset;
    const struct location at = {text.file, begin, begin + 2};
    struct parse_message *message =
        parse_complain(context, CODE_E110, at, "'\\' before something other than '\"' or '\\'");
    parse_hint(message, "write '\\\\' for one backslash");
}

int scan_text(struct parse_context *context, struct location at, bool is_closed, const char **text)
{
    const char *match = context->buffer + at.begin;
    size_t end = (size_t)(at.end - at.begin) - (is_closed ? 1U : 0U);
    if (!is_closed) {
        parse_complain(context, CODE_E102, at, "a text that is not closed on its line");
        end -= match[end - 1] == '\r' ? 1U : 0U;
        context->swallowed_blocks += match[end - 1] == '{';
    }
    char *plain = arena_try(context->arena, end + 1, 1);
    if (!plain) {
        return run_out(context);
    }
    size_t length = 0;
    for (size_t i = 1; i < end; i++) {
        if (match[i] == '\\') {
            if (match[i + 1] != '"' && match[i + 1] != '\\') {
                complain_about_escape(context, at, i);
            }
            i++;
        }
        plain[length++] = match[i];
    }
    *text = plain;
    return TOK_TEXT;
}

struct stranger {
    const char *begins;
    const char *hint;
};

/* Characters that come from word processors, or from habits, and what to write for them. */
static const struct stranger strangers[] = {
    {"\xc2\xb0"
     "C",
     "write degC"},
    {"\xc2\xb0"
     "F",
     "write degF"},
    {"\xc2\xb0", "write degC or degF"},
    {"\xc2\xb7", "join units with '.'"},
    {"\xc2\xb2", "write powers as in m2"},
    {"\xc2\xb3", "write powers as in m3"},
    {"\xe2\x80\x93", "write '-'"},
    {"\xe2\x88\x92", "write '-'"},
    {"\xe2\x89\xa4", "write <="},
    {"\xe2\x89\xa5", "write >="},
    {"\xe2\x80\x9c", "write \" for a quotation mark"},
    {"\xe2\x80\x9d", "write \" for a quotation mark"},
    {"\xc3\x97", "write *"},
    {"_", "words are joined by hyphens"},
    {".", "a number has digits before and after its point, as in 0.5"},
    {"'", "a text stands in \"double quotes\""},
    {":", "a word and its value are separated by blanks only"},
    {"[", "pairs stand in parentheses, blocks in braces"},
};

void scan_stranger(struct parse_context *context, struct location at)
{
    const char *match = context->file->text + at.begin;
    const size_t left = context->file->length - at.begin;
    const size_t length = utf8_length(match, left);
    at.end = at.begin + (uint32_t)length;
    struct parse_message *message =
        parse_complain(context, CODE_E101, at, "'%.*s' has no place outside a text or a comment", (int)length, match);
    for (size_t i = 0; i < sizeof strangers / sizeof *strangers; i++) {
        const size_t bytes = strlen(strangers[i].begins);
        if (bytes <= left && memcmp(match, strangers[i].begins, bytes) == 0) {
            parse_hint(message, strangers[i].hint);
            break;
        }
    }
}
