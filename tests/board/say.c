#include "say.h"

#include "../bits/numbers.h"

static void say_in_base(const char *name, uint64_t x, unsigned base, int digits)
{
    char text[24];
    char *first = text + sizeof text - 1;
    *first = '\0';
    *--first = '\n';
    while (x != 0 || digits > 0) {
        *--first = "0123456789abcdef"[x % base];
        x /= base;
        --digits;
    }
    say(name);
    say(" ");
    say(first);
}

void say_number(const char *name, uint64_t x)
{
    say_in_base(name, x, 10, 1);
}

void say_bits(const char *name, const void *data, size_t size)
{
    say_in_base(name, hashed(empty, data, size), 16, 16);
}
