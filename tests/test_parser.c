/* The parser: which tree a text gives, what is refused, that printing loses nothing, that odd texts do no harm. */
#include "deck/deck.h"
#include "deck/parse.h"
#include "support/check.h"
#include "support/rationing.h"
#include "support/tree.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

struct parsed {
    struct arena *arena;
    struct diagnostics diagnostics;
    const struct statement *statements;
    bool is_right;
};

static struct parsed parse_bytes(const char *text, size_t length)
{
    struct parsed parsed = {.arena = arena_create(NULL)};
    assert_non_null(parsed.arena);
    parsed.diagnostics.arena = parsed.arena;
    const struct source_file *file = source_create(parsed.arena, "job.deck", "job.deck", text, length);
    parsed.is_right = deck_parse_file(file, parsed.arena, &parsed.diagnostics, &parsed.statements);
    assert_int_equal(parsed.is_right, parsed.diagnostics.errors == 0);
    return parsed;
}

static struct parsed parse(const char *text)
{
    return parse_bytes(text, strlen(text));
}

static const char *tree_of(struct parsed *parsed)
{
    struct text out = {.arena = parsed->arena};
    text_format(&out, "%s", "");
    tree_add(parsed->statements, &out);
    return out.bytes;
}

/* ---- Accepted texts ---- */

struct accepted {
    const char *name, *text, *tree;
};

static const struct accepted statements[] = {
    {"nothing", "", ""},
    {"blank lines and comments", "\n \t\n# a comment; { not read }\n\n", ""},
    {"a word", "listed", "listed"},
    {"a byte-order mark", "\xef\xbb\xbfmass 1 kg\n", "mass[1_kg]"},
    {"line ends of two bytes", "a 1\r\nb 2\r\n", "a[1] b[2]"},
    {"no line end at the end", "a 1\nb 2", "a[1] b[2]"},
    {"semicolons", "a 1; b 2;; c", "a[1] b[2] c"},
    {"an empty block", "vessel v { }", "vessel[v]{}"},
    {"a block on one line", "vessel v { a 1; b }", "vessel[v]{a[1] b}"},
    {"a block over lines", "vessel v {\n a 1\n\n b\n}\n", "vessel[v]{a[1] b}"},
    {"blocks in blocks", "a { b { c 1 } ; d { } }", "a{b{c[1]} d{}}"},
    {"a comment closes a line", "a 1 # and so on\nb", "a[1] b"},
    {"a comment after a brace", "a { # what\n b } # end\nc", "a{b} c"},
    {"commas", "quote pressure at 15 degC, 20 degC", "quote[pressure][at 15_degC][,20_degC]"},
    {"a line goes on after a comma", "rules a,\n\n  b, # and\n c", "rules[a][,b][,c]"},
    {"a line goes on after an operator", "x 1 +\n 2 *\n 3", "x[(1 + (2 * 3))]"},
    {"a line goes on after a relation", "let x =\n 5", "let[x][= 5]"},
    {"a line goes on in parentheses", "v 1 at (15 degC\n ,\n 1 bara\n )\nw", "v[1][at (15_degC, 1_bara)] w"},
    {"use and its condition", "use \"gases\"\nuse \"equations/argon\" for argon",
     "use['gases'] use['equations/argon'][for argon]"},
    {"a source", "source adr-2025 \"ADR 2025\" unverified", "source[adr-2025]['ADR 2025'][unverified]"},
    {"every marker", "x from 1 to 2 by 3 in 4 at 5 no a one b rest ref c for d",
     "x[from 1][to 2][by 3][in 4][at 5][no a][one b][rest][ref c][for d]"},
    {"conditions begin with markers", "at 65 degC pressure <= p\nfrom a to b no liquid\none phase\nno solid\nref adr",
     "at[at 65_degC][pressure][<= p] from[from a][to b][no liquid] one[one phase] no[no solid] ref[ref adr]"},
    {"relations", "x < 1 <= 2 = 3 >= 4 > 5", "x[< 1][<= 2][= 3][>= 4][> 5]"},
    {"both ways to write plus or minus", "a 2 % +/- 0.02 %\nb 2 % \xc2\xb1 0.02 %",
     "a[2_%][+/- 0.02_%] b[2_%][+/- 0.02_%]"},
    {"a sweep in steps", "sweep temperature from 0 K to 9 K in 20 steps",
     "sweep[temperature][from 0_K][to 9_K][in 20][steps]"},
    {"rows of numbers", "term 0.3 -1.2 3e-5 +4 -5E+6",
     "term[0.29999999999999999][-1.2][3.0000000000000001e-05][4][-5000000]"},
};

static const struct accepted words[] = {
    {"names with digits first", "1-3-butadiene rest; 2-2-dimethylpropane", "1-3-butadiene[rest] 2-2-dimethylpropane"},
    {"names with hyphens and digits", "x r1234yf a-1 B2 c-2-d", "x[r1234yf][a-1][B2][c-2-d]"},
    {"words are names where they are not reserved", "vessel case { sheet 1 }", "vessel[case]{sheet[1]}"},
    {"upper case is another word", "From At", "From[At]"},
    {"texts with signs",
     "note \"a # b { c } ; \\\"d\\\" \\\\ \xc2\xb0"
     "C\"",
     "note['a # b { c } ; \"d\" \\ \xc2\xb0"
     "C']"},
    {"an empty text", "note \"\"", "note['']"},
    {"display units", "units psig, kg/L, %, J/mol/K", "units[psig][,kg/L][,%][,J/mol/K]"},
    {"a unit without blank before it", "x 10L 5%", "x[10_L][5_%]"},
    {"composed units", "x 1 kg/m3 2 J/mol/K 3 Pa.s 4 s-2", "x[1_kg/m3][2_J/mol/K][3_Pa.s][4_s-2]"},
    {"a word after a number that is no unit", "x 5 steps 6 barr", "x[5][steps][6][barr]"},
    {"a unit is a name where no number is before it", "x bar (5) bar", "x[bar][5][bar]"},
    {"a unit does not cross a line", "x 5\nbar 6", "x[5] bar[6]"},
    {"a marker is no unit", "x from 5 to 6", "x[from 5][to 6]"},
    {"numbers", "x 0 12 12.5 1e3 1.5e-3 007", "x[0][12][12.5][1000][0.0015][7]"},
    {"seventeen digits", "x 0.12345678901234567 123456789012345678", "x[0.12345678901234566][1.2345678901234568e+17]"},
    {"a number of many digits", "x 0.3000000000000000000000000000000000001", "x[0.29999999999999999]"},
    {"the largest and the smallest", "x 1.7976931348623157e308 2.2250738585072014e-308 0e-999",
     "x[1.7976931348623157e+308][2.2250738585072014e-308][0]"},
};

static const struct accepted expressions[] = {
    {"products before sums", "x 1 + 2 * 3 - 4 / 5", "x[((1 + (2 * 3)) - (4 / 5))]"},
    {"from the left", "x 1 - 2 - 3; y 8 / 4 / 2", "x[((1 - 2) - 3)] y[((8 / 4) / 2)]"},
    {"parentheses", "x (1 + 2) * 3", "x[((1 + 2) * 3)]"},
    {"two thirds of the test pressure", "x <= 2 / 3 * test-pressure", "x[<= ((2 / 3) * test-pressure)]"},
    {"a minus before a name", "x -a (-b) -(c + d)", "x[(-a)][(-b)][(-(c + d))]"},
    {"a minus binds to one value", "x -a * b", "x[((-a) * b)]"},
    {"a minus after an operator", "x 2 * -a - -b", "x[((2 * (-a)) - (-b))]"},
    {"a sign after an operator", "x 2 - -5", "x[(2 - -5)]"},
    {"a name and a negative number are two values", "x a -5", "x[a][-5]"},
    {"a name with a hyphen is one", "x a-b", "x[a-b]"},
    {"pairs and longer", "x (1, 2) (1, 2, 3) ((1, 2), 3)", "x[(1, 2)][(1, (2, 3))][((1, 2), 3)]"},
    {"parentheses begin a new value", "x a (b)", "x[a][b]"},
};

static void check_accepted(const struct accepted *cases, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct parsed parsed = parse(cases[i].text);
        const char *tree = tree_of(&parsed);
        if (!parsed.is_right || strcmp(tree, cases[i].tree) != 0) {
            struct text out = {.arena = parsed.arena};
            diagnostics_draw(&parsed.diagnostics, &out);
            print_error("%s\n  tree     %s\n  expected %s\n%s", cases[i].name, tree, cases[i].tree,
                        out.bytes ? out.bytes : "");
            fail();
        }
        arena_free(parsed.arena);
    }
}

#define COUNT(list) (sizeof(list) / sizeof *(list))

static void statements_give_their_tree(void **state)
{
    (void)state;
    check_accepted(statements, COUNT(statements));
}

static void words_are_told_apart(void **state)
{
    (void)state;
    check_accepted(words, COUNT(words));
}

static void expressions_bind_as_in_arithmetic(void **state)
{
    (void)state;
    check_accepted(expressions, COUNT(expressions));
}

static void places_cover_what_was_written(void **state)
{
    (void)state;
    struct parsed parsed = parse("vessel v { tare 13.4 kg\n quote p at (15 degC, 1 bara) }");
    const struct statement *vessel = parsed.statements;
    assert_int_equal(vessel->at.begin, 0);
    assert_int_equal(vessel->at.end, 8);
    assert_int_equal(vessel->word_at.end, 6);
    assert_int_equal(vessel->block_at.begin, 9);
    assert_int_equal(vessel->block_at.end, 55);
    const struct item *tare = vessel->block->items;
    assert_int_equal(tare->value->at.begin, 16);
    assert_int_equal(tare->value->at.end, 23);
    const struct item *at = vessel->block->next->items->next;
    assert_int_equal(at->at.begin, 33);
    assert_int_equal(at->value->at.begin, 36);
    assert_int_equal(at->value->at.end, 53);
    assert_int_equal(location_line(at->at), 2);
    assert_int_equal(location_column(at->at), 10);
    arena_free(parsed.arena);
}

/* ---- Refused texts: code and place; the whole messages stand in tests/golden/diagnostics. ---- */

struct refused {
    const char *name, *text;
    enum code code;
    size_t line, column;
};

static const struct refused refusals[] = {
    {"a text cut in a quotation", "note \"abc", CODE_E102, 1, 6},
    {"a text over two lines", "note \"abc\ndef\"", CODE_E102, 1, 6},
    {"a text cut in a pair", "v 1 at (15 degC", CODE_E105, 1, 16},
    {"a text cut in a block", "vessel v {\n a 1", CODE_E107, 2, 5},
    {"a text cut after a head", "vessel v {", CODE_E107, 1, 11},
    {"a text cut after from", "sweep t from", CODE_E105, 1, 13},
    {"a text cut after an operator", "let x = 5 *", CODE_E105, 1, 12},
    {"a text cut after a relation", "at 1 K p <=", CODE_E105, 1, 12},
    {"a text cut after a comma", "rules a,", CODE_E105, 1, 9},
    {"a text cut after no", "no", CODE_E105, 1, 3},
    {"a comma first", ", a", CODE_E105, 1, 1},
    {"a comma after the word", "rules , a", CODE_E105, 1, 7},
    {"two commas", "rules a,, b", CODE_E105, 1, 9},
    {"a number first", "5 bar", CODE_E105, 1, 1},
    {"a text first", "\"abc\"", CODE_E105, 1, 1},
    {"a brace on the next line", "vessel v\n{ a }", CODE_E105, 2, 1},
    {"a statement after a block", "vessel v { } x", CODE_E105, 1, 14},
    {"a closing brace too many", "vessel v { } }", CODE_E106, 1, 14},
    {"a closing brace alone", "}", CODE_E106, 1, 1},
    {"a parenthesis closed twice", "x (1))", CODE_E105, 1, 6},
    {"empty parentheses", "x ()", CODE_E105, 1, 4},
    {"a brace in parentheses", "x (1 { a }", CODE_E105, 1, 6},
    {"a semicolon in parentheses", "x (1; y 2", CODE_E105, 1, 5},
    {"a reserved word as a name", "let from = 5", CODE_E105, 1, 10},
    {"a reserved word after ref", "x 1 ref to", CODE_E105, 1, 9},
    {"use inside a statement", "x use", CODE_E105, 1, 3},
    {"an operator first", "x * 5", CODE_E105, 1, 3},
    {"two operators", "x 5 * / 6", CODE_E105, 1, 7},
    {"a division without blanks", "x 2/3", CODE_E103, 1, 4},
    {"a difference without blanks", "x 2-3", CODE_E103, 1, 4},
    {"a sum without one blank", "x 2 +a", CODE_E103, 1, 5},
    {"a product without blanks", "x 2*3", CODE_E103, 1, 4},
    {"a hyphen at a name's end", "x a- b", CODE_E103, 1, 4},
    {"an underscore", "test_pressure 5 barg", CODE_E101, 1, 5},
    {"a decimal without its digit", "x .5", CODE_E101, 1, 3},
    {"a degree sign",
     "x 5 \xc2\xb0"
     "C",
     CODE_E101, 1, 5},
    {"an exclamation mark", "x !", CODE_E101, 1, 3},
    {"single quotes", "note 'abc'", CODE_E101, 1, 6},
    {"a control byte", "x \001", CODE_E101, 1, 3},
    {"a carriage return alone", "x 1\ry 2", CODE_E101, 1, 4},
    {"a byte that is no UTF-8", "note \"\xff\"", CODE_E101, 1, 7},
    {"a cut UTF-8 character", "note \"\xe2\x82\"", CODE_E101, 1, 7},
    {"an overlong UTF-8 character", "note \"\xc0\xaf\"", CODE_E101, 1, 7},
    {"half of a surrogate pair", "note \"\xed\xa0\x80\"", CODE_E101, 1, 7},
    {"a code point beyond Unicode", "note \"\xf4\x90\x80\x80\"", CODE_E101, 1, 7},
    {"UTF-16",
     "\xff\xfe"
     "c",
     CODE_E109, 1, 1},
    {"a number too large", "x 1e999", CODE_E104, 1, 3},
    {"a number too small", "x 1e-999", CODE_E104, 1, 3},
    {"an unknown escape", "note \"a\\n\"", CODE_E110, 1, 8},
    {"nan is a name, and no number", "x 5 - -nan +inf", CODE_E103, 1, 12},
};

static void wrong_texts_are_refused_where_they_are_wrong(void **state)
{
    (void)state;
    for (size_t i = 0; i < COUNT(refusals); i++) {
        const struct refused *wrong = &refusals[i];
        struct parsed parsed = parse(wrong->text);
        const struct diagnostic *first = parsed.diagnostics.items;
        if (parsed.is_right || first->code != wrong->code || location_line(first->at) != wrong->line ||
            location_column(first->at) != wrong->column) {
            struct text out = {.arena = parsed.arena};
            diagnostics_draw(&parsed.diagnostics, &out);
            print_error("%s\n%s", wrong->name, out.bytes ? out.bytes : "  accepted\n");
            fail();
        }
        arena_free(parsed.arena);
    }
}

static void every_mistake_of_a_file_is_found_in_one_run(void **state)
{
    (void)state;
    struct parsed parsed = parse("a ) 1\nb 2\nc { d ) ; e ( 1 \n f 1 }\ng = ;\nh } \ni 5\n");
    const size_t lines[] = {1, 3, 4, 5, 6};
    assert_int_equal(parsed.diagnostics.errors, COUNT(lines));
    for (size_t i = 0; i < COUNT(lines); i++) {
        assert_int_equal(location_line(parsed.diagnostics.items[i].at), lines[i]);
    }
    arena_free(parsed.arena);
}

static void statements_beside_a_mistake_are_kept(void **state)
{
    (void)state;
    struct parsed parsed = parse("a 1\nb ) 2\nc { d 1; e ( ; f 2 }\ng ) { h }\ni 3");
    assert_string_equal(tree_of(&parsed), "a[1] c{d[1] f[2]} i[3]");
    arena_free(parsed.arena);
}

/* ---- Round trip ---- */

static const char *print(struct parsed *parsed)
{
    struct text out = {.arena = parsed->arena};
    text_format(&out, "%s", "");
    deck_print(parsed->statements, &out);
    return out.bytes;
}

static void check_round_trip(const char *name, const char *text)
{
    struct parsed first = parse(text);
    const char *printed = print(&first);
    struct parsed second = parse(printed);
    const char *again = print(&second);
    if (!second.is_right || !tree_equal(first.statements, second.statements) || strcmp(printed, again) != 0) {
        print_error("%s\n  printed\n%s\n  again\n%s\n", name, printed, again);
        fail();
    }
    arena_free(first.arena);
    arena_free(second.arena);
}

static void printing_and_parsing_give_the_same_tree(void **state)
{
    (void)state;
    const struct {
        const struct accepted *cases;
        size_t count;
    } all[] = {{statements, COUNT(statements)}, {words, COUNT(words)}, {expressions, COUNT(expressions)}};
    for (size_t i = 0; i < COUNT(all); i++) {
        for (size_t j = 0; j < all[i].count; j++) {
            check_round_trip(all[i].cases[j].name, all[i].cases[j].text);
        }
    }
    const char *const awkward[] = {
        "x (5) bar (2 * 5) m (a - 5) K",
        "x -(5) -(-5) -(-a) -((1, 2))",
        "x 0.1 1e22 1e23 123456.789012345678 -0",
        "x 1 - (2 - 3) - (4 + 5) * 6 / (7 / 8)",
        "x (a + b) * -(c * d) / -e",
        "at (5) bar no m",
        "let x = -(%) * -(kg/L) - -(1-butene)",
        "x 5, bar ; y 5 one m",
    };
    for (size_t i = 0; i < COUNT(awkward); i++) {
        check_round_trip(awkward[i], awkward[i]);
    }
}

static void the_normal_form_is_as_the_reference_shows(void **state)
{
    (void)state;
    struct parsed parsed = parse("vessel  v{tare 13.40 kg;fitting \"a \\\"b\\\"\" 3e2 barg}let x=(1+ 2)*3\n"
                                 "quote p at 15 degC,20 degC\nrule r { from a to b no liquid; e { } }");
    assert_false(parsed.is_right); /* for want of blanks and a line end */
    arena_free(parsed.arena);
    parsed = parse("vessel  v{tare 13.40 kg;fitting \"a \\\"b\\\"\" 3e2 barg}\nlet x = (1 + 2) * (3)\n"
                   "quote p at 15 degC,20 degC\nrule r { from a to b no liquid; e { } }");
    assert_string_equal(print(&parsed), "vessel v {\n  tare 13.4 kg\n  fitting \"a \\\"b\\\"\" 300 barg\n}\n"
                                        "let x = (1 + 2) * 3\nquote p at 15 degC, 20 degC\n"
                                        "rule r {\n  from a to b no liquid\n  e {\n  }\n}\n");
    arena_free(parsed.arena);
}

/* ---- Odd texts ---- */

static char *repeated(const char *before, const char *part, size_t times, const char *after)
{
    const size_t part_length = strlen(part), before_length = strlen(before);
    char *text = malloc(before_length + times * part_length + strlen(after) + 1);
    assert_non_null(text);
    memcpy(text, before, before_length);
    for (size_t i = 0; i < times; i++) {
        memcpy(text + before_length + i * part_length, part, part_length);
    }
    strcpy(text + before_length + times * part_length, after);
    return text;
}

static void endless_texts_are_refused_with_few_messages(void **state)
{
    (void)state;
    const struct {
        const char *before, *part, *after;
        enum code code; /* of the first message; CODE_NONE: accepted */
    } cases[] = {
        {"x ", "(", "\n", CODE_E108},
        {"", "x {", "\n", CODE_E108},
        {"x ", "-(", "a\n", CODE_E108},
        {"let x = 1", " + 1", "\n", CODE_E108},
        {"let x = 1", " * a", "\n", CODE_E108},
        {"x (1", ", 1", ")\n", CODE_E108},
        {"x ", "a ", "\n", CODE_E119},
        {"x ", "5 bar, ", "1\n", CODE_E119},
        {"", "x;", "\n", CODE_E119},
        {"x ", "a", "\n", CODE_NONE},
        {"x \"", "abc ", "\"\n", CODE_NONE},
        {"# ", "abc ", "\n", CODE_NONE},
        {"x ", "7", "\n", CODE_E104},
        {"", "@ ", "\n", CODE_E101},
        {"", ") ; ", "\n", CODE_E105},
        {"", "} ", "\n", CODE_E106},
        {"x 1", "/", "\n", CODE_E103},
        {"x 1 ", "a/", "\n", CODE_E103},
        {"", "1-", "\n", CODE_E105},
        {"x \"", "\\n", "\"\n", CODE_E110},
        {"x \"", "\xff\xff a", "\"\n", CODE_E101},
        {"", "\"", "\n", CODE_E105},
        {"", "\n", "}", CODE_E106},
    };
    for (size_t i = 0; i < COUNT(cases); i++) {
        char *text = repeated(cases[i].before, cases[i].part, 600000, cases[i].after);
        struct parsed parsed = parse(text);
        const struct diagnostic *first = parsed.diagnostics.items;
        if ((first ? first->code : CODE_NONE) != cases[i].code || parsed.diagnostics.count > DIAGNOSTICS_MOST) {
            print_error("'%s' repeated gives %zu messages, the first is %d\n", cases[i].part, parsed.diagnostics.errors,
                        first ? (int)first->code : 0);
            fail();
        }
        arena_free(parsed.arena);
        free(text);
    }
}

/* A generator of its own, so that every run is the same: Lehmer's, modulus 2^31 - 1, multiplier 48271. */
static unsigned next_random(unsigned *state)
{
    *state = (unsigned)((unsigned long long)*state * 48271U % 2147483647U);
    return *state;
}

static void noise_is_refused(void **state)
{
    (void)state;
    unsigned random = 4711;
    for (size_t length = 1; length < 70000; length = 2 * length + 3) {
        char *noise = malloc(length);
        for (size_t i = 0; i < length; i++) {
            noise[i] = (char)(next_random(&random) & 0xffU);
        }
        struct parsed parsed = parse_bytes(noise, length);
        assert_true(parsed.diagnostics.count <= DIAGNOSTICS_MOST);
        assert_true(length < 50 || !parsed.is_right);
        arena_free(parsed.arena);
        free(noise);
    }
}

static const char BUSY[] = "case \"busy\" { number \"1\"; note \"n \\\" m\"; units psig, kg/L }\n"
                           "use \"gases\" # comment\nlet hot = 2 / 3 * (65 K + -a)\n"
                           "charge c { fluid x; volume 1.5 m3 at (15 degC, 1 bara) }\n"
                           "rule r { from -25 degC to 50 degC no liquid; at hot p <= 2 / 3 * t unless listed\n"
                           "  ref adr }\nmixture m by mole { 1-3-butadiene 2 % +/- 0.02 %; nitrogen rest }\n";

static void a_text_cut_anywhere_does_no_harm(void **state)
{
    (void)state;
    for (size_t length = 0; length < sizeof BUSY - 1; length++) {
        struct parsed parsed = parse_bytes(BUSY, length);
        print(&parsed);
        arena_free(parsed.arena);
    }
}

static void a_text_with_a_byte_changed_does_no_harm(void **state)
{
    (void)state;
    const char bytes[] = "{}();,\"\\#-+*/<=>@a5 \n\t\r\xc3%.";
    char text[sizeof BUSY];
    for (size_t at = 0; at < sizeof BUSY - 1; at++) {
        for (size_t i = 0; i < sizeof bytes; i++) { /* the closing NUL too */
            memcpy(text, BUSY, sizeof BUSY);
            text[at] = bytes[i];
            struct parsed parsed = parse_bytes(text, sizeof BUSY - 1);
            if (parsed.is_right) {
                check_round_trip("a byte changed", text);
            }
            struct text out = {.arena = parsed.arena};
            diagnostics_draw(&parsed.diagnostics, &out);
            arena_free(parsed.arena);
        }
    }
}

/* ---- Running out of memory ---- */

static void parse_in(struct arena *arena, void *context)
{
    const char *text = context;
    struct diagnostics diagnostics = {.arena = arena};
    const struct source_file *file = source_create(arena, "job.deck", "job.deck", text, strlen(text));
    const struct statement *parsed;
    deck_parse_file(file, arena, &diagnostics, &parsed);
    struct text out = {.arena = arena};
    deck_print(parsed, &out);
    diagnostics_draw(&diagnostics, &out);
}

static void running_out_of_memory_leaks_nothing(void **state)
{
    (void)state;
    char *const texts[] = {
        repeated("", BUSY, 200, ""),
        repeated("x ", "word 1 bar \"text\" ", 5000, ""),
        repeated("", "a ) ( \"b\n @ 2/3 }\n", 500, ""),
    };
    for (size_t i = 0; i < COUNT(texts); i++) {
        assert_true(ration_until_done(parse_in, texts[i]) > 2);
        free(texts[i]);
    }
    char distinct[60000];
    size_t length = 0;
    for (unsigned i = 0; length + 20 < sizeof distinct; i++) {
        length += (size_t)snprintf(distinct + length, sizeof distinct - length, "w%u ", i);
    }
    assert_true(ration_until_done(parse_in, distinct) > 5);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(statements_give_their_tree),
        cmocka_unit_test(words_are_told_apart),
        cmocka_unit_test(expressions_bind_as_in_arithmetic),
        cmocka_unit_test(places_cover_what_was_written),
        cmocka_unit_test(wrong_texts_are_refused_where_they_are_wrong),
        cmocka_unit_test(every_mistake_of_a_file_is_found_in_one_run),
        cmocka_unit_test(statements_beside_a_mistake_are_kept),
        cmocka_unit_test(printing_and_parsing_give_the_same_tree),
        cmocka_unit_test(the_normal_form_is_as_the_reference_shows),
        cmocka_unit_test(endless_texts_are_refused_with_few_messages),
        cmocka_unit_test(noise_is_refused),
        cmocka_unit_test(a_text_cut_anywhere_does_no_harm),
        cmocka_unit_test(a_text_with_a_byte_changed_does_no_harm),
        cmocka_unit_test(running_out_of_memory_leaks_nothing),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
