/* controller_host: a computer as the board of controller_loop.c. Lines of live_line.h in whole counts on standard
   input are the converter; its timer ticks once for every number, missing ones too. Standard output is the
   service plug, CSV. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "controller_board.h"
#include "live_line.h"
#include "text_table.h"

const char *const program_name = "controller_loop";

enum { AT_ONCE = 16 /* ticks before the loop wakes; its ring holds more */ };

static uint64_t next; /* number of the coming tick */
static live_line waiting;
static int has_waiting, relay;

static int refuse(const char *text)
{
    (void)fflush(stdout);
    complain("standard input: '%.60s' is no sample in counts, or is late", text);
    exit(2);
}

/* The next line that counts samples up; 0 where there is none. */
static int read_line(void)
{
    char text[LIVE_LINE_ROOM];
    if (fgets(text, sizeof text, stdin) == NULL)
        return 0;
    text[strcspn(text, "\r\n")] = '\0';
    if (!live_line_read(&waiting, text, 1) || waiting.number < next)
        refuse(text);
    return 1;
}

int board_sleep(void)
{
    for (int i = 0; i < AT_ONCE; ++i) {
        if (!has_waiting && !(has_waiting = read_line()))
            return i > 0;
        const int is_now = waiting.number == next;
        if (is_now && waiting.is_end)
            return i > 0;
        controller_tick(is_now ? (int32_t)waiting.value : CONTROLLER_NO_SAMPLE);
        has_waiting = !is_now;
        ++next;
    }
    return 1;
}

void board_relay(int tripped)
{
    if (tripped != relay)
        fprintf(stderr, "%s: the relay %s\n", program_name, tripped ? "opens" : "closes");
    relay = tripped;
}

void board_report(uint64_t sample, float fraction, float value, int is_trip)
{
    printf("%.9f,%s,%.6g\n", ((double)sample + (double)fraction) * 1e-3, is_trip ? "trip" : "return",
           1000 * (double)value);
}

void board_fault(const char *text)
{
    complain("%s", text);
}
