/* live_watch: a service that watches the gear of a pump hall on live samples of the floor's acceleration.

   Every level of the trips file has a stream and a watch (rampwise/stream.h, watch.h): the response, its greatest
   and least value and the exact instants at which the level is passed, between the samples. The sample path is
   take_sample() below: nothing in it allocates, draws, writes or waits; live_board does that in its own thread.
   Run it with --help. */
#include <errno.h>
#include <getopt.h>
#include <math.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <rampwise.h>
#include "live_board.h"
#include "live_line.h"
#include "live_source.h"
#include "site_options.h"
#include "site_report.h"
#include "text_table.h"

const char *const program_name = "live_watch";

enum { UP, DOWN, SIDES, EVENTS = 64 }; /* the two levels of a watch; events of one step */

/* One level of the trips file at work. */
typedef struct point {
    rampwise_stream stream;
    rampwise_watch watch;
    rampwise_event event[EVENTS];
    int64_t last_trip;
} point;

/* A good sample: the beginning or the end of the step that a trip lies in. */
typedef struct mark {
    uint64_t number;
    int64_t stamp;
} mark;

typedef struct service {
    const char *gear_path, *trips_path, *log_path;
    uint64_t interval; /* ns */
    uint64_t longest;
    uint16_t port;     /* 0: standard input */
    double count_size; /* 0: decimal numbers */
    site_gear gear;
    trip_levels levels;
    point at[TRIP_LEVELS_MOST];
    FILE *show, *log;
    live_source source;
    live_board board;
    live_picture picture;
    mark before, now;
    uint64_t lines, late, refused;
} service;

static volatile sig_atomic_t stopped, release_asked;

static void on_signal(int number)
{
    if (number == SIGUSR1)
        release_asked = 1;
    else
        stopped = 1;
}

/* ---- before the first sample ---- */

static rampwise_level side_of(const trip_level *level, int direction)
{
    return (rampwise_level){direction * level->level, level->hysteresis, direction, 1};
}

static int prepare_point(const service *x, point *at, const trip_level *level, int row)
{
    rampwise_system system;
    rampwise_coeffs c;
    rampwise_stream_options stream;
    rampwise_watch_options watch;

    rampwise_stream_options_init(&stream);
    stream.ticks = x->interval;
    stream.longest = x->longest;
    stream.output[0].quantity = level->of->quantity;
    if (x->count_size > 0) {
        stream.scale = x->count_size;
        stream.rail_low = -LIVE_LINE_RAIL;
        stream.rail_high = LIVE_LINE_RAIL;
    }
    rampwise_watch_options_init(&watch);
    watch.output = stream.output[0];
    watch.number = row;
    watch.level_count = SIDES;
    watch.level[UP] = side_of(level, 1);
    watch.level[DOWN] = side_of(level, -1);
    watch.events = at->event;
    watch.event_capacity = EVENTS;

    int status = rampwise_system_hertz(&system, level->gear->frequency, level->gear->damping_ratio);
    if (status == RAMPWISE_OK)
        status = rampwise_coeffs_make(&c, &system, (double)x->interval / 1e9, RAMPWISE_BASE_ACCELERATION,
                                      RAMPWISE_RAMP);
    if (status == RAMPWISE_OK)
        status = rampwise_stream_init(&at->stream, &c, &stream);
    if (status == RAMPWISE_OK)
        status = rampwise_watch_init(&at->watch, &c, &watch);
    if (status == RAMPWISE_OK)
        status = rampwise_stream_attach(&at->stream, &at->watch);
    if (status != RAMPWISE_OK)
        return complain("%s:%zu: '%s' cannot be watched: %s", x->trips_path, level->line, level->gear->name,
                        rampwise_status_text(status));
    return 0;
}

static int prepare(service *x)
{
    if (site_gear_read(&x->gear, x->gear_path) != 0 ||
        trip_levels_read(&x->levels, x->trips_path, &x->gear) != 0)
        return -1;
    for (size_t i = 0; i < x->levels.n; ++i)
        if (prepare_point(x, &x->at[i], &x->levels.at[i], (int)i) != 0)
            return -1;
    return 0;
}

static int open_log(service *x)
{
    x->show = stdout;
    if (x->log_path == NULL)
        return 0;
    if (strcmp(x->log_path, "-") == 0) {
        x->show = stderr;
        x->log = stdout;
        return 0;
    }
    x->log = fopen(x->log_path, "wx");
    if (x->log == NULL)
        return complain("%s: cannot be written: %s", x->log_path, strerror(errno));
    return 0;
}

/* ---- the sample path ---- */

/* The instant of an event, on the straight line from stamp to stamp: a bridge spans several numbers. */
static int64_t stamp_of(const service *x, const rampwise_event *e)
{
    const double samples = (double)(x->now.number - x->before.number);
    if (samples == 0)
        return x->now.stamp;
    const double share = ((double)(e->sample - x->before.number) + e->fraction) / samples;
    return x->before.stamp + (int64_t)llround(share * (double)(x->now.stamp - x->before.stamp));
}

static void note_event(service *x, size_t i, const rampwise_event *e)
{
    live_picture *const picture = &x->picture;
    const int is_trip = e->level == UP ? e->direction > 0 : e->direction < 0;
    if (e->kind != RAMPWISE_EVENT_LEVEL)
        return;
    const int64_t stamp = stamp_of(x, e);
    if (is_trip)
        x->at[i].last_trip = stamp;
    if (picture->n_events == LIVE_BOARD_EVENTS)
        ++picture->lost;
    else
        picture->event[picture->n_events++] =
            (live_event){stamp, e->value, e->flags, (int16_t)i, (int16_t)e->direction, is_trip};
}

static void note_row(service *x, size_t i, double value)
{
    point *const at = &x->at[i];
    live_row *const row = &x->picture.row[i];
    rampwise_level_report side[SIDES];
    rampwise_peak peak;
    rampwise_event events[EVENTS];
    const size_t count = rampwise_watch_events(&at->watch, EVENTS, events);
    for (size_t k = 0; k < count; ++k)
        note_event(x, i, &events[k]);
    (void)rampwise_watch_level(&at->watch, UP, &side[UP]);
    (void)rampwise_watch_level(&at->watch, DOWN, &side[DOWN]);
    (void)rampwise_watch_peak(&at->watch, RAMPWISE_SINCE_RESET, &peak);
    *row = (live_row){.value = value,
                      .peak = rampwise_peak_larger(&peak)->value,
                      .tripped = side[UP].tripped || side[DOWN].tripped,
                      .trips = side[UP].passed + side[DOWN].passed,
                      .last_trip = at->last_trip};
}

/* Number and stamp must tell the same story: half an interval is where a stream would see a gap by itself. */
static int disagrees(const service *x, const live_line *line, uint64_t next)
{
    const uint64_t numbers = line->number - (next - 1);
    const double expected = (double)numbers * (double)x->interval;
    return fabs((double)(line->stamp - x->picture.stamp) - expected) >= 0.5 * (double)x->interval;
}

/* One sample into one stream. After a gap that is too long to be bridged the stream starts anew. */
static int put(const service *x, point *at, const live_line *line, int anew, double *value)
{
    const int32_t raw = (int32_t)line->value;
    int status = RAMPWISE_OK;
    if (x->picture.started)
        status = rampwise_stream_skip_to(&at->stream, line->number);
    if (status == RAMPWISE_OK && anew)
        status = rampwise_stream_start(&at->stream, NULL, line->number);
    if (status != RAMPWISE_OK)
        return status;
    return x->count_size > 0
               ? rampwise_stream_put_raw_at(&at->stream, 1, &line->stamp, &raw, value, NULL, NULL)
               : rampwise_stream_put_at(&at->stream, 1, &line->stamp, &line->value, value, NULL, NULL);
}

/* 0; 1 where the line does not belong; -1 after a message. */
static int take_sample(service *x, const live_line *line)
{
    const uint64_t next = x->picture.started ? x->now.number + 1 : line->number;
    if (line->number < next) {
        ++x->late;
        return 0;
    }
    const int anew = !x->picture.started || line->number - next > x->longest;
    if (!anew && disagrees(x, line, next))
        return 1;
    x->before = x->now;
    x->now = (mark){line->number, line->stamp};
    if (anew)
        x->before = x->now;
    for (size_t i = 0; i < x->levels.n; ++i) {
        double value;
        const int status = put(x, &x->at[i], line, anew, &value);
        if (status != RAMPWISE_OK)
            return complain("sample %llu: '%s': %s", (unsigned long long)line->number,
                            x->levels.at[i].gear->name, rampwise_status_text(status));
        note_row(x, i, value);
    }
    x->picture.started = 1;
    x->picture.stamp = line->stamp;
    return 0;
}

/* Someone has looked at the gear: trips are let go where the response is back, and peaks begin anew. */
static void release(service *x)
{
    release_asked = 0;
    for (size_t i = 0; i < x->levels.n; ++i) {
        (void)rampwise_watch_release(&x->at[i].watch, UP);
        (void)rampwise_watch_release(&x->at[i].watch, DOWN);
        (void)rampwise_watch_reset(&x->at[i].watch);
        if (x->picture.started)
            note_row(x, i, x->picture.row[i].value);
    }
}

/* What no sample comes after; 0, or -1 after a message. */
static int take_end(service *x, const live_line *line)
{
    stopped = 1;
    for (size_t i = 0; x->picture.started && line->number > x->now.number && i < x->levels.n; ++i)
        if (rampwise_stream_skip_to(&x->at[i].stream, line->number) != RAMPWISE_OK)
            return complain("the end, %llu, lies too far off", (unsigned long long)line->number);
    return 0;
}

/* Whoever writes to a pipe is at fault; to a port, anyone may send anything. */
static int refuse(service *x, const char *text)
{
    ++x->refused;
    if (x->port != 0)
        return 0;
    return complain(
        "standard input:%llu: '%.60s' is no sample, or its number and stamp do not agree; see --help",
        (unsigned long long)x->lines, text);
}

static int take_text(service *x, const char *text)
{
    live_line line;
    ++x->lines;
    if (!live_line_read(&line, text, x->count_size > 0))
        return refuse(x, text);
    if (line.is_end)
        return take_end(x, &line);
    const int status = take_sample(x, &line);
    return status > 0 ? refuse(x, text) : status;
}

static int watch(service *x)
{
    int status = 0;
    while (status == 0 && !stopped) {
        char *text;
        const int found = live_source_next(&x->source, &text);
        if (found == LIVE_SOURCE_END)
            break;
        if (release_asked)
            release(x);
        if (found == LIVE_SOURCE_FAILED)
            status = -1;
        else if (found == LIVE_SOURCE_LINE)
            status = take_text(x, text);
        live_board_offer(&x->board, &x->picture);
    }
    return status;
}

/* ---- around it ---- */

static void summarize(const service *x)
{
    rampwise_stream_counts counts;
    uint64_t lost = x->picture.lost;
    (void)rampwise_stream_count(&x->at[0].stream, &counts);
    for (size_t i = 0; i < x->levels.n; ++i) {
        uint64_t here = 0;
        (void)rampwise_watch_counts(&x->at[i].watch, &here, NULL);
        lost += here;
    }
    fprintf(x->show,
            "\nSamples   %llu good, %llu missing (%llu in a row at most), %llu clipped\n"
            "          %llu bridges, %llu starts; %llu lines late, %llu refused\n",
            (unsigned long long)counts.good, (unsigned long long)counts.missing,
            (unsigned long long)counts.longest, (unsigned long long)counts.clipped,
            (unsigned long long)counts.bridges, (unsigned long long)counts.starts,
            (unsigned long long)x->late, (unsigned long long)x->refused);
    for (size_t i = 0; i < x->levels.n; ++i)
        fprintf(x->show, "Trips     %s, %s: %llu\n", x->levels.at[i].gear->name, x->levels.at[i].of->name,
                (unsigned long long)x->picture.row[i].trips);
    if (lost > 0)
        fprintf(x->show, "WARNING: %llu events came too fast for the log.\n", (unsigned long long)lost);
    fprintf(x->show, "A trip that protects people needs certified equipment and licensed practice.\n");
    site_report_caution(x->show);
}

static void listen_to_signals(void)
{
    struct sigaction action = {.sa_handler = on_signal};
    sigemptyset(&action.sa_mask);
    sigaction(SIGINT, &action, NULL);
    sigaction(SIGTERM, &action, NULL);
    sigaction(SIGUSR1, &action, NULL);
}

static int do_job(service *x)
{
    if (prepare(x) != 0 || live_source_open(&x->source, x->port) != 0)
        return -1;
    int status = open_log(x);
    listen_to_signals();
    if (status == 0 && x->port != 0)
        fprintf(x->show, "Listening to 127.0.0.1, port %u\n", (unsigned)x->port);
    fflush(stdout);
    if (status == 0)
        status = live_board_start(&x->board, &x->levels, x->show, x->log);
    if (status == 0) {
        status = watch(x);
        if (live_board_finish(&x->board, &x->picture) != 0)
            status = -1;
    }
    live_source_close(&x->source);
    if (status == 0)
        summarize(x);
    if (x->log != NULL && x->log != stdout && fclose(x->log) != 0 && status == 0)
        status = complain("%s: cannot be written: %s", x->log_path, strerror(errno));
    return status;
}

static void print_help(void)
{
    puts(
        "Usage: live_watch --gear GEAR --trips TRIPS [OPTION...]\n"
        "\n"
        "Watches gear on live samples of the base's acceleration: a line for every trip level, with\n"
        "the value, the peak so far and the state of the trip; a log of when levels were passed, exactly,\n"
        "between the samples; a summary at the end of the samples, or after an interrupt (Ctrl-C).\n"
        "\n"
        "  -g, --gear GEAR        the gear, one piece a line: name, mass (kg), natural frequency (Hz),\n"
        "                         damping ratio (1 is critical)\n"
        "  -t, --trips TRIPS      trip levels, one a line: gear, displacement (mm), velocity (mm/s) or\n"
        "                         acceleration (m/s^2, against a fixed frame), level, hysteresis\n"
        "  -p, --port PORT        samples come as UDP datagrams to 127.0.0.1, not on standard input\n"
        "  -r, --rate HZ          samples a second: 1000 if not given\n"
        "  -m, --longest NUMBER   missing samples in a row that a straight line may bridge: 10 if not\n"
        "                         given; after more, everything starts anew, from rest\n"
        "  -c, --count-size SIZE  values are whole numbers of SIZE m/s^2, clipped at +-32767\n"
        "  -l, --log FILE         passed levels as CSV in a new FILE; '-' is standard output, and the\n"
        "                         lines then go to standard error\n"
        "  -h, --help             print this\n"
        "  -V, --version          print the version\n"
        "\n"
        "A sample is a line, or a datagram of lines:\n"
        "\n"
        "    NUMBER,STAMP,VALUE   120,119998750,-0.0375\n"
        "\n"
        "with the sender's count of samples, the sample's instant in nanoseconds, within half an interval "
        "of\n"
        "where its number puts it, and a value in m/s^2. 'NUMBER,end' says that none comes from NUMBER on.\n"
        "Samples are counted from the first that comes. A signal USR1 releases trips and resets peaks.\n"
        "\n"
        "Exit status: 0; or 2 with one message where something is wrong. Lines of the log that were written\n"
        "before stay. Bad lines on standard input are wrong; bad datagrams are counted, and passed over.");
}

static int take_longest(uint64_t *longest)
{
    double number;
    if (!text_is_number(optarg, &number) || !(number >= 0 && number <= 1000) || number != rint(number))
        return complain("--longest: '%s' is not a whole number from 0 to 1000", optarg);
    *longest = (uint64_t)number;
    return 0;
}

/* 0: go on; 1: nothing is left to do; -1 after a message. */
static int take_option(service *x, int option, char **argv)
{
    switch (option) {
    case 'g':
        x->gear_path = optarg;
        return 0;
    case 't':
        x->trips_path = optarg;
        return 0;
    case 'p':
        return live_line_port(&x->port, optarg);
    case 'r':
        return live_line_interval(&x->interval, optarg);
    case 'm':
        return take_longest(&x->longest);
    case 'c':
        return live_line_count_size(&x->count_size, optarg);
    case 'l':
        x->log_path = optarg;
        return 0;
    case 'h':
        print_help();
        return 1;
    case 'V':
        printf("live_watch (rampwise %s)\n", rampwise_version());
        return 1;
    default:
        return site_refuse_option(option, argv);
    }
}

static int read_arguments(service *x, int argc, char **argv)
{
    static const struct option options[] = {
        {"gear", required_argument, NULL, 'g'},    {"trips", required_argument, NULL, 't'},
        {"port", required_argument, NULL, 'p'},    {"rate", required_argument, NULL, 'r'},
        {"longest", required_argument, NULL, 'm'}, {"count-size", required_argument, NULL, 'c'},
        {"log", required_argument, NULL, 'l'},     {"help", no_argument, NULL, 'h'},
        {"version", no_argument, NULL, 'V'},       {NULL, 0, NULL, 0}};
    int option, status = 0;
    opterr = 0;
    while (status == 0 && (option = getopt_long(argc, argv, ":g:t:p:r:m:c:l:hV", options, NULL)) != -1)
        status = take_option(x, option, argv);
    if (status != 0)
        return status;
    if (optind < argc)
        return complain("%s: samples come on standard input, or from a port; see --help", argv[optind]);
    if (x->gear_path == NULL || x->trips_path == NULL)
        return complain("--%s is missing; see --help", x->gear_path == NULL ? "gear" : "trips");
    return 0;
}

int main(int argc, char **argv)
{
    static service x = {.interval = 1000000, .longest = 10};
    int status = rampwise_self_test();
    if (status != RAMPWISE_OK)
        status = complain("this build of rampwise: %s", rampwise_status_text(status));
    else
        status = read_arguments(&x, argc, argv);
    if (status == 0)
        status = do_job(&x);
    site_gear_free(&x.gear);
    return site_end(status);
}
