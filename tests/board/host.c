/* The answers of this machine. */
#include <stdio.h>
#include "programs.h"
#include "say.h"

void say(const char *text)
{
    fputs(text, stdout);
}

int main(void)
{
    program();
    return 0;
}
