#include "support/arithmetic.h"

#include <ctype.h>
#include <math.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>

static double sum(const char **at);
static double atom(const char **at);

static void skip(const char **at)
{
    while (**at == ' ') {
        (*at)++;
    }
}

static double function(const char **at)
{
    static const struct {
        const char *name;
        double (*call)(double);
    } functions[] = {{"sqrt", sqrt}, {"exp", exp}, {"ln", log}};
    for (size_t i = 0; i < sizeof functions / sizeof *functions; i++) {
        const size_t length = strlen(functions[i].name);
        if (strncmp(*at, functions[i].name, length) == 0 && (*at)[length] == '(') {
            *at += length;
            return functions[i].call(atom(at));
        }
    }
    return (double)NAN;
}

/* A number, a function of a parenthesis, or a parenthesis; a sign binds to the number it stands before. */
static double atom(const char **at)
{
    skip(at);
    if (isalpha((unsigned char)**at)) {
        return function(at);
    }
    if (**at == '(') {
        (*at)++;
        const double value = sum(at);
        skip(at);
        if (**at != ')') {
            return (double)NAN;
        }
        (*at)++;
        return value;
    }
    char *end;
    const double value = strtod(*at, &end);
    if (end == *at) {
        return (double)NAN;
    }
    *at = end;
    return value;
}

static double power(const char **at)
{
    const double base = atom(at);
    skip(at);
    if (**at != '^') {
        return base;
    }
    (*at)++;
    return pow(base, power(at));
}

static double product(const char **at)
{
    double value = power(at);
    for (skip(at); **at == '*' || **at == '/'; skip(at)) {
        const char operation = *(*at)++;
        const double next = power(at);
        value = operation == '*' ? value * next : value / next;
    }
    return value;
}

static double sum(const char **at)
{
    double value = product(at);
    for (skip(at); **at == '+' || **at == '-'; skip(at)) {
        const char operation = *(*at)++;
        const double next = product(at);
        value = operation == '+' ? value + next : value - next;
    }
    return value;
}

double arithmetic(const char *text)
{
    const char *at = text;
    const double value = sum(&at);
    skip(&at);
    return *at == '\0' ? value : (double)NAN;
}
