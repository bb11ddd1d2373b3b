/* A live loop for counting its instructions: N samples, one a call, of the kind that the first argument names, through a
   stream with every named output; with a second argument, a watch with four levels and a window is attached. */
#include <math.h>
#include <rampwise.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { N = 2000, W = 64, EVENTS = 16 };

static double sample(const char *kind, int i)
{
    static unsigned long random = 12345;
    random = (random * 1103515245 + 12345) & 0x7fffffff;
    const double noise = (double)random / 0x40000000 - 1;
    if (strcmp(kind, "zeros") == 0)
        return 0;
    if (strcmp(kind, "subnormal") == 0)
        return noise * 1e-310;
    if (strcmp(kind, "silence") == 0) /* a blow, then nothing for the rest */
        return i < 10 ? 1 : 0;
    if (strcmp(kind, "huge") == 0)
        return noise * 1e290;
    if (strcmp(kind, "clipped") == 0)
        return noise > 0 ? 2 : -2;
    if (strcmp(kind, "alternating") == 0)
        return i % 2 == 0 ? 1 : -1;
    return noise;
}

int main(int argc, char **argv)
{
    static double p[N];
    static rampwise_stream stream;
    static rampwise_watch watch;
    static rampwise_watched place[2 * W];
    static rampwise_event event[EVENTS];
    rampwise_system system;
    rampwise_coeffs c;
    rampwise_stream_options o;
    rampwise_watch_options w;
    double out[7];
    unsigned char flags;
    if (argc < 2)
        return 2;
    rampwise_system_natural(&system, 30, 0.02);
    rampwise_coeffs_make(&c, &system, 0.01, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    rampwise_stream_options_init(&o);
    o.output_count = 7;
    o.rail_low = -1.5;
    o.rail_high = 1.5;
    for (int i = 0; i < 7; ++i)
        o.output[i].quantity = RAMPWISE_DISPLACEMENT + i;
    if (rampwise_stream_init(&stream, &c, &o) != RAMPWISE_OK)
        return 2;
    rampwise_watch_options_init(&w);
    w.output.quantity = RAMPWISE_TOTAL_ACCELERATION;
    w.level_count = 4;
    for (int i = 0; i < 4; ++i) {
        w.level[i].value = 0.1 * i;
        w.level[i].direction = 1;
    }
    w.window = place;
    w.window_steps = W;
    w.events = event;
    w.event_capacity = EVENTS;
    if (argc > 2 && (rampwise_watch_init(&watch, &c, &w) != RAMPWISE_OK ||
                     rampwise_stream_attach(&stream, &watch) != RAMPWISE_OK))
        return 2;
    for (int i = 0; i < N; ++i)
        p[i] = sample(argv[1], i);
    for (int i = 0; i < N; ++i)
        if (rampwise_stream_put(&stream, 1, &p[i], out, &flags, NULL) != RAMPWISE_OK)
            return 1;
    return 0;
}
