#include "base/text.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

static void make_room(struct text *text, size_t more)
{
    text->bytes = arena_grow(text->arena, text->bytes, &text->capacity, text->length + more + 1, 1);
}

void text_add(struct text *text, const char *bytes, size_t length)
{
    make_room(text, length);
    if (length != 0) {
        memcpy(text->bytes + text->length, bytes, length);
    }
    text->length += length;
    text->bytes[text->length] = '\0';
}

void text_format(struct text *text, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    const int length = vsnprintf(NULL, 0, format, arguments);
    va_end(arguments);
    if (length < 0) {
        return;
    }
    make_room(text, (size_t)length);
    va_start(arguments, format);
    vsnprintf(text->bytes + text->length, (size_t)length + 1, format, arguments);
    va_end(arguments);
    text->length += (size_t)length;
}

void text_pad(struct text *text, size_t count)
{
    make_room(text, count);
    memset(text->bytes + text->length, ' ', count);
    text->length += count;
    text->bytes[text->length] = '\0';
}

size_t text_columns(const char *bytes, size_t length)
{
    size_t columns = 0;
    for (size_t i = 0; i < length; i++) {
        const unsigned char byte = (unsigned char)bytes[i];
        columns += (byte & 0xC0U) != 0x80U;
    }
    return columns;
}
