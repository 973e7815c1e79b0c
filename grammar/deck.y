/* The grammar of decks. It knows the shape of statements only; what a word means is found out later, in src/case.
 *
 * The scanner takes half of the work: it ends every statement with one END, also before a '}' and at the end of the
 * file, leaves out the line ends that do not count, and sees to it that every '{' has its '}'. So the grammar has no
 * optional separators, an error never reaches beyond the END of its statement, and a block whose head was wrong is still
 * read.
 */
%require "3.8"
%define api.pure full
%define api.header.include {"deck_parser.h"}
%define api.prefix {deck_}
%define api.token.prefix {TOK_}
%define api.value.type union
%define api.location.type {struct location}
%define parse.error custom
%define parse.lac full
%define parse.trace
%locations
%expect 0
%param {struct parse_context *context} {yyscan_t scanner}

/* Tracing needs a switch that all parsers share, so it is there only when asked for, with -DDECK_DEBUG=1. */
%code top {
#ifndef DECK_DEBUG
#define DECK_DEBUG 0
#endif
}

%code requires {
#include "deck/syntax_build.h"

#ifndef YY_TYPEDEF_YY_SCANNER_T
#define YY_TYPEDEF_YY_SCANNER_T
typedef void *yyscan_t;
#endif
}

%code provides {
#define YY_DECL                                                                                                        \
    int deck_lex(DECK_STYPE *yylval_param, struct location *yylloc_param, struct parse_context *context,               \
                 yyscan_t yyscanner)
YY_DECL;
}

%code {
#include "deck/syntax_report.h"

#define YYLLOC_DEFAULT(whole, parts, count)                                                                            \
    ((whole) = (count)                                                                                                 \
         ? (struct location){YYRHSLOC(parts, 1).file, YYRHSLOC(parts, 1).begin, YYRHSLOC(parts, count).end}            \
         : (struct location){YYRHSLOC(parts, 0).file, YYRHSLOC(parts, 0).end, YYRHSLOC(parts, 0).end})

/* Leaves the parse when a constructor found no memory. */
#define NEED(made)                                                                                                     \
    do {                                                                                                               \
        if (!(made)) {                                                                                                 \
            YYNOMEM;                                                                                                   \
        }                                                                                                              \
    } while (0)

/* Called only when memory runs out; syntax errors go to yyreport_syntax_error. */
static void deck_error(const struct location *at, struct parse_context *context, yyscan_t scanner, const char *message)
{
    (void)at;
    (void)scanner;
    (void)message;
    context->is_out_of_memory = true;
}
}

%initial-action {
    @$ = (struct location){context->file, 0, 0};
}

%token DECK_END 0 "end of file"
%token END "end of line"
%token OPEN_BLOCK "'{'"
%token CLOSE_BLOCK "'}'"
%token OPEN_PAIR "'('"
%token CLOSE_PAIR "')'"
%token COMMA "','"
%token PLUS "'+'"
%token MINUS "'-'"
%token TIMES "'*'"
%token OVER "'/'"
%token NEGATE "'-' before a value"
%token PLUS_MINUS "'+/-'"
%token <enum relation> RELATION "relation"
%token <double> NUMBER "number"
%token <const char *> UNIT "unit"
%token <const char *> NAME "name"
%token <const char *> TEXT "text in quotes"
%token <const char *> FROM "'from'"
%token <const char *> AT "'at'"
%token <const char *> NO "'no'"
%token <const char *> ONE "'one'"
%token <const char *> REF "'ref'"
%token <const char *> USE "'use'"
%token <const char *> LET "'let'"
%token TO "'to'"
%token BY "'by'"
%token IN "'in'"
%token FOR "'for'"
%token REST "'rest'"

%type <struct statement_list> lines block
%type <struct statement *> statement
%type <struct statement_head> head filled
%type <const char *> word
%type <struct item *> item leader
%type <struct expression *> value name
%type <struct tuple_list> values

%printer { fprintf(yyo, "%s", $$); } <const char *>
%printer { fprintf(yyo, "%g", $$); } <double>
%printer { fprintf(yyo, "%d", (int)$$); } <enum relation>
%printer { fprintf(yyo, "kind %d", (int)$$->kind); } <struct item *> <struct expression *>
%printer { fprintf(yyo, "%s", $$ ? $$->word : "nothing"); } <struct statement *>
%printer { fprintf(yyo, "%s", $$.statement->word); } <struct statement_head>
%printer { fprintf(yyo, "from %s", $$.first ? $$.first->word : "nothing"); } <struct statement_list>
%printer { fprintf(yyo, "%u values", $$.count); } <struct tuple_list>

/* Products bind before sums, both from the left, as in arithmetic; a sign binds to the one value after it. */
%left "'+'" "'-'"
%left "'*'" "'/'"
%precedence "'-' before a value"

%start deck

%%

deck:
    lines                           { context->statements = $lines.first; }
;

lines:
    %empty                          { $$ = (struct statement_list){NULL, NULL}; }
|   lines[before] "end of line"     { $$ = $before; }
|   lines[before] statement         { $$ = statement_list_add($before, $statement); }
;

statement:
    head "end of line"              { $$ = $head.statement; }
|   head block "end of line"        { $$ = statement_with_block($head.statement, @block, $block); }
|   error "end of line"             { $$ = NULL; yyerrok; }
|   error block "end of line"       { $$ = NULL; yyerrok; }
;

block:
    "'{'" lines "'}'"               { $$ = $lines; }
;

head:
    word                            { NEED(($$ = statement_start(context, @word, $word)).statement); }
|   filled
;

filled:
    leader                          { NEED(($$ = statement_start(context, @leader, $leader->text)).statement);
                                      $leader->text = NULL;
                                      $$ = statement_add_item($$, $leader, false); }
|   word item                       { NEED(($$ = statement_start(context, @word, $word)).statement);
                                      $$ = statement_add_item($$, $item, false); }
|   filled[before] item             { $$ = statement_add_item($before, $item, false); }
|   filled[before] "','" item       { $$ = statement_add_item($before, $item, true); }
;

word:
    "name"
|   "'use'"
|   "'let'"
;

/* Items a statement may begin with, for want of another word. The word rides in the item's text up to the statement. */
leader:
    "'at'"[w] value                 { NEED($$ = item_of(context, ITEM_AT, @$, $value)); $$->text = $w; }
|   "'from'"[w] value               { NEED($$ = item_of(context, ITEM_FROM, @$, $value)); $$->text = $w; }
|   "'no'"[w] name                  { NEED($$ = item_of(context, ITEM_NO, @$, $name)); $$->text = $w; }
|   "'one'"[w] name                 { NEED($$ = item_of(context, ITEM_ONE, @$, $name)); $$->text = $w; }
|   "'ref'"[w] name                 { NEED($$ = item_of(context, ITEM_REF, @$, $name)); $$->text = $w; }
;

item:
    leader                          { $$ = $leader; $$->text = NULL; }
|   value                           { NEED($$ = item_of(context, ITEM_EXPRESSION, @$, $value)); }
|   "text in quotes"[t]             { NEED($$ = item_of_text(context, @$, $t)); }
|   "relation"[is] value            { NEED($$ = item_of_relation(context, @$, $is, $value)); }
|   "'to'" value                    { NEED($$ = item_of(context, ITEM_TO, @$, $value)); }
|   "'by'" value                    { NEED($$ = item_of(context, ITEM_BY, @$, $value)); }
|   "'in'" value                    { NEED($$ = item_of(context, ITEM_IN, @$, $value)); }
|   "'+/-'" value                   { NEED($$ = item_of(context, ITEM_PLUS_MINUS, @$, $value)); }
|   "'for'" name                    { NEED($$ = item_of(context, ITEM_FOR, @$, $name)); }
|   "'rest'"                        { NEED($$ = item_of(context, ITEM_REST, @$, NULL)); }
;

value:
    "number"[n]                     { NEED($$ = expression_number(context, @$, $n)); }
|   "number"[n] "unit"[u]           { NEED($$ = expression_number(context, @$, $n)); $$->unit = $u; }
|   name
|   "'('" value[in] "')'"           { $$ = $in; $$->at = @$; }
|   "'('" values "')'"              { $$ = $values.first; $$->at = @$; }
|   "'-' before a value" value[of]  { NEED($$ = expression_operation(context, EXPRESSION_NEGATE, @$, $of, NULL)); }
|   value[l] "'+'" value[r]         { NEED($$ = expression_operation(context, EXPRESSION_ADD, @$, $l, $r)); }
|   value[l] "'-'" value[r]         { NEED($$ = expression_operation(context, EXPRESSION_SUBTRACT, @$, $l, $r)); }
|   value[l] "'*'" value[r]         { NEED($$ = expression_operation(context, EXPRESSION_MULTIPLY, @$, $l, $r)); }
|   value[l] "'/'" value[r]         { NEED($$ = expression_operation(context, EXPRESSION_DIVIDE, @$, $l, $r)); }
;

values:
    value[l] "','" value[r]         { NEED(($$ = tuple_start($l, $r, context, @$)).first); }
|   values[before] "','" value      { NEED(($$ = tuple_add($before, $value, context, @$)).first); }
;

name:
    "name"[n]                       { NEED($$ = expression_of_name(context, @$, $n)); }
;

%%

/* Collects what the parser knows about an error; the wording is in src/deck/syntax_report.c. */
static int yyreport_syntax_error(const yypcontext_t *at, struct parse_context *context, yyscan_t scanner)
{
    (void)scanner;
    yysymbol_kind_t expected[YYNTOKENS];
    const int count = yypcontext_expected_tokens(at, expected, YYNTOKENS);
    struct syntax_error error = {
        .at = *yypcontext_location(at),
        .is_end = yypcontext_token(at) == YYSYMBOL_END,
        .is_block = yypcontext_token(at) == YYSYMBOL_OPEN_BLOCK,
        .is_relation = yypcontext_token(at) == YYSYMBOL_RELATION,
        .is_close_pair = yypcontext_token(at) == YYSYMBOL_CLOSE_PAIR,
        .is_starter = yypcontext_token(at) == YYSYMBOL_USE || yypcontext_token(at) == YYSYMBOL_LET,
        .is_reserved = yypcontext_token(at) >= YYSYMBOL_FROM && yypcontext_token(at) <= YYSYMBOL_REST,
    };
    for (int i = 0; i < count; i++) {
        error.may_begin_value |= expected[i] == YYSYMBOL_OPEN_PAIR;
        error.may_begin_statement |= expected[i] == YYSYMBOL_USE;
        error.may_close_pair |= expected[i] == YYSYMBOL_CLOSE_PAIR;
        error.may_be_name |= expected[i] == YYSYMBOL_NAME;
        error.may_end |= expected[i] == YYSYMBOL_END;
    }
    syntax_report(context, &error);
    return 0;
}
