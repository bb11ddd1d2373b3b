/* play_record: sends a record as live samples, on standard output or as UDP datagrams to this machine.

   Between the record's samples the value is on the straight line, which is what rampwise takes it to be: played
   at any rate that meets the record's own times it is the same load. --drop and --jitter make it behave as
   real senders do. Run it with --help. */
#include <arpa/inet.h>
#include <errno.h>
#include <getopt.h>
#include <math.h>
#include <netinet/in.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/socket.h>
#include <time.h>
#include <unistd.h>
#include <rampwise.h>
#include "live_line.h"
#include "site_data.h"
#include "site_options.h"
#include "text_table.h"

const char *const program_name = "play_record";

typedef struct player {
    const char *record_path;
    double speed;                 /* 0: as fast as it goes */
    double drop, jitter;          /* shares of the samples, and of an interval */
    double seconds, count_size;   /* count_size 0: decimal numbers */
    uint64_t interval, generator; /* ns; state of the random numbers */
    uint16_t port;                /* 0: standard output */
    int output;
    site_record record;
    size_t segment; /* of the record: where the last value was */
    struct timespec started;
    uint64_t sent, dropped;
} player;

/* From 0 to 1. The linear congruential generator of make_shake.c. */
static double chance(player *x)
{
    x->generator = x->generator * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
    return (double)(x->generator >> 33) / 2147483648.0;
}

/* On the straight line of the record; times come in order. */
static double value_at(player *x, double time)
{
    const site_record *const r = &x->record;
    while (x->segment + 2 < r->n && r->time[x->segment + 1] <= time)
        ++x->segment;
    const double *const t = r->time + x->segment, *const p = r->acceleration + x->segment;
    const double share = fmin(fmax((time - t[0]) / (t[1] - t[0]), 0), 1);
    return share == 1 ? p[1] : p[0] + share * (p[1] - p[0]);
}

static double as_sent(const player *x, double value)
{
    if (x->count_size == 0)
        return value;
    return fmin(fmax(rint(value / x->count_size), -LIVE_LINE_RAIL), LIVE_LINE_RAIL);
}

/* Until a sample that is so many seconds into the record is due. */
static void wait_for(const player *x, double seconds)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    const double gone =
        (double)(now.tv_sec - x->started.tv_sec) + 1e-9 * (double)(now.tv_nsec - x->started.tv_nsec);
    const double left = seconds / x->speed - gone;
    if (left > 0) /* cut short by a signal, the sample is early */
        nanosleep(&(struct timespec){(time_t)left, (long)((left - floor(left)) * 1e9)}, NULL);
}

static int send_line(const player *x, const live_line *line)
{
    char text[LIVE_LINE_ROOM];
    const size_t length = (size_t)live_line_print(text, line);
    if (x->port != 0) {
        if (send(x->output, text, length, 0) == (ssize_t)length)
            return 0;
        return complain("127.0.0.1, port %u: %s", (unsigned)x->port,
                        errno == ECONNREFUSED ? "nobody listens there" : strerror(errno));
    }
    if (fwrite(text, 1, length, stdout) == length && (x->speed == 0 || fflush(stdout) == 0))
        return 0;
    return complain("standard output: cannot be written: %s", strerror(errno));
}

/* The end is said more than once where it could get lost. */
static int send_end(const player *x, uint64_t number)
{
    const live_line line = {.number = number, .is_end = 1};
    const int status = send_line(x, &line);
    for (int again = 0; x->port != 0 && status == 0 && again < 2; ++again) {
        char text[LIVE_LINE_ROOM];
        nanosleep(&(struct timespec){.tv_nsec = 20000000}, NULL);
        (void)send(x->output, text, (size_t)live_line_print(text, &line), 0); /* they may be gone */
    }
    return status;
}

static int play(player *x)
{
    const double first = x->record.time[0], last = x->record.time[x->record.n - 1];
    const double length = fmin(last - first, x->seconds), step = (double)x->interval * 1e-9;
    const int64_t origin = (int64_t)llround(first * 1e9);
    const uint64_t count = (uint64_t)floor(length / step + 1e-6) + 1;
    if (origin < 0 || last > 1e9)
        return complain("%s: its times are not from 0 to 1e9 s", x->record_path);
    clock_gettime(CLOCK_MONOTONIC, &x->started);
    for (uint64_t i = 0; i < count; ++i) {
        const double moved = x->jitter * (2 * chance(x) - 1) * (double)x->interval;
        const int is_dropped = chance(x) < x->drop && i > 0;
        live_line line = {.number = i, .stamp = origin + (int64_t)(i * x->interval) + llround(moved)};
        if (line.stamp < origin)
            line.stamp = origin;
        line.value = as_sent(x, value_at(x, (double)line.stamp / 1e9));
        if (x->speed > 0)
            wait_for(x, (double)(line.stamp - origin) * 1e-9);
        x->sent += is_dropped ? 0 : 1;
        x->dropped += is_dropped ? 1 : 0;
        if (!is_dropped && send_line(x, &line) != 0)
            return -1;
    }
    return send_end(x, count);
}

static int open_output(player *x)
{
    const struct sockaddr_in there = {
        .sin_family = AF_INET, .sin_port = htons(x->port), .sin_addr.s_addr = htonl(INADDR_LOOPBACK)};
    if (x->port == 0)
        return 0;
    x->output = socket(AF_INET, SOCK_DGRAM, 0);
    if (x->output < 0 || connect(x->output, (const struct sockaddr *)&there, sizeof there) != 0)
        return complain("127.0.0.1, port %u: %s", (unsigned)x->port, strerror(errno));
    return 0;
}

static int do_job(player *x)
{
    signal(SIGPIPE, SIG_IGN); /* a reader that is gone shows as an error of the write */
    if (site_record_read(&x->record, x->record_path, site_time_units[0], site_acceleration_units[0]) != 0 ||
        open_output(x) != 0 || play(x) != 0)
        return -1;
    if (fflush(stdout) != 0)
        return complain("standard output: cannot be written: %s", strerror(errno));
    fprintf(stderr, "%s: %llu samples sent, %llu dropped\n", program_name, (unsigned long long)x->sent,
            (unsigned long long)x->dropped);
    return 0;
}

static void print_help(void)
{
    puts("Usage: play_record [OPTION...] RECORD\n"
         "\n"
         "Sends RECORD as live samples, a line each, on standard output or over UDP: sample number,\n"
         "stamp in nanoseconds, acceleration in m/s^2; at the end, the number after the last, and 'end'.\n"
         "Between its samples the record is a straight line.\n"
         "\n"
         "  -p, --port PORT        as UDP datagrams to 127.0.0.1, instead of standard output\n"
         "  -r, --rate HZ          samples a second of the record's time: 1000 if not given\n"
         "  -x, --speed TIMES      faster than real: 1 if not given; 0 is as fast as it goes\n"
         "  -n, --seconds S        the first S seconds of RECORD only\n"
         "  -d, --drop PERCENT     loses so many of the samples, never the first: 0 to 99\n"
         "  -j, --jitter PERCENT   takes and stamps each sample up to so much of an interval early or\n"
         "                         late: 0 to 24\n"
         "  -s, --seed NUMBER      of --drop and --jitter: other random numbers\n"
         "  -c, --count-size SIZE  whole numbers of SIZE m/s^2, as from a 16-bit converter, which\n"
         "                         clips at +-32767\n"
         "  -h, --help             print this\n"
         "  -V, --version          print the version\n"
         "\n"
         "RECORD has two columns, time (s) and base acceleration (m/s^2). How many samples were sent and\n"
         "dropped is said on standard error. Exit status: 0, or 2 with one message.");
}

static int take_number(double *number, const char *option, double least, double most)
{
    if (text_is_number(optarg, number) && *number >= least && *number <= most)
        return 0;
    return complain("--%s: '%s' is not from %g to %g", option, optarg, least, most);
}

/* 0: go on; 1: nothing is left to do; -1 after a message. */
static int take_option(player *x, int option, char **argv)
{
    double number = 0;
    int status;
    switch (option) {
    case 'p':
        return live_line_port(&x->port, optarg);
    case 'r':
        return live_line_interval(&x->interval, optarg);
    case 'x':
        return take_number(&x->speed, "speed", 0, 1e6);
    case 'n':
        return take_number(&x->seconds, "seconds", 0, 1e9);
    case 'd':
        status = take_number(&number, "drop", 0, 99);
        x->drop = number / 100;
        return status;
    case 'j':
        status = take_number(&number, "jitter", 0, 24);
        x->jitter = number / 100;
        return status;
    case 's':
        status = take_number(&number, "seed", 0, 9e15);
        x->generator = (uint64_t)number;
        return status;
    case 'c':
        return live_line_count_size(&x->count_size, optarg);
    case 'h':
        print_help();
        return 1;
    case 'V':
        printf("play_record (rampwise %s)\n", rampwise_version());
        return 1;
    default:
        return site_refuse_option(option, argv);
    }
}

static int read_arguments(player *x, int argc, char **argv)
{
    static const struct option options[] = {{"port", required_argument, NULL, 'p'},
                                            {"rate", required_argument, NULL, 'r'},
                                            {"speed", required_argument, NULL, 'x'},
                                            {"seconds", required_argument, NULL, 'n'},
                                            {"drop", required_argument, NULL, 'd'},
                                            {"jitter", required_argument, NULL, 'j'},
                                            {"seed", required_argument, NULL, 's'},
                                            {"count-size", required_argument, NULL, 'c'},
                                            {"help", no_argument, NULL, 'h'},
                                            {"version", no_argument, NULL, 'V'},
                                            {NULL, 0, NULL, 0}};
    int option, status = 0;
    opterr = 0;
    while (status == 0 && (option = getopt_long(argc, argv, ":p:r:x:n:d:j:s:c:hV", options, NULL)) != -1)
        status = take_option(x, option, argv);
    if (status != 0)
        return status;
    if (argc - optind != 1)
        return complain("%s; see --help", argc == optind ? "RECORD is missing" : "too many files");
    x->record_path = argv[optind];
    return 0;
}

int main(int argc, char **argv)
{
    player x = {.speed = 1, .seconds = INFINITY, .interval = 1000000, .generator = 20};
    int status = read_arguments(&x, argc, argv);
    if (status == 0)
        status = do_job(&x);
    site_record_free(&x.record);
    return site_end(status);
}
