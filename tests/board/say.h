/* Lines of text from a program without a C library's output: board.c says them through a debugger's semihosting, host.c
   on standard output. */
#ifndef BOARD_SAY_H
#define BOARD_SAY_H

#include <stddef.h>
#include <stdint.h>

void say(const char *text);
void say_number(const char *name, uint64_t x); /* "name decimal" and the end of the line */
void say_bits(const char *name, const void *data,
              size_t); /* "name hexadecimal": the FNV-1a hash of the bytes */

#endif
