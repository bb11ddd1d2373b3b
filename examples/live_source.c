#include "live_source.h"

#include <arpa/inet.h>
#include <errno.h>
#include <netinet/in.h>
#include <poll.h>
#include <string.h>
#include <sys/socket.h>
#include <unistd.h>
#include "text_table.h"

enum { QUIET_MS = 100, SOCKET_ROOM = 4 << 20 };

int live_source_open(live_source *source, uint16_t port)
{
    const struct sockaddr_in here = {
        .sin_family = AF_INET, .sin_port = htons(port), .sin_addr.s_addr = htonl(INADDR_LOOPBACK)};
    const int room = SOCKET_ROOM;
    *source = (live_source){.descriptor = STDIN_FILENO, .datagrams = port != 0};
    if (port == 0)
        return 0;
    source->descriptor = socket(AF_INET, SOCK_DGRAM, 0);
    if (source->descriptor < 0)
        return complain("UDP: %s", strerror(errno));
    /* What waits while this program does not run; the system may grant less. */
    (void)setsockopt(source->descriptor, SOL_SOCKET, SO_RCVBUF, &room, sizeof room);
    if (bind(source->descriptor, (const struct sockaddr *)&here, sizeof here) != 0) {
        complain("127.0.0.1, port %u: %s", (unsigned)port, strerror(errno));
        close(source->descriptor);
        return -1;
    }
    return 0;
}

void live_source_close(live_source *source)
{
    if (source->datagrams)
        close(source->descriptor);
}

/* The next line among what has arrived. */
static int cut_line(live_source *source, char **line)
{
    while (source->begin < source->end) {
        char *const start = source->text + source->begin;
        char *const stop = memchr(start, '\n', source->end - source->begin);
        if (stop == NULL)
            return 0;
        source->begin = (size_t)(stop + 1 - source->text);
        *stop = '\0';
        start[strcspn(start, "\r")] = '\0';
        *line = start;
        if (*start != '\0')
            return 1;
    }
    return 0;
}

/* More text behind what is there; a datagram, or a last line, gets the end of line that it may lack. */
static int fetch(live_source *source)
{
    struct pollfd now = {.fd = source->descriptor, .events = POLLIN};
    memmove(source->text, source->text + source->begin, source->end - source->begin);
    source->end -= source->begin;
    source->begin = 0;
    const size_t room = sizeof source->text - 1 - source->end;
    if (room == 0)
        return complain("a line of more than %zu bytes", sizeof source->text - 1);
    const int ready = poll(&now, 1, QUIET_MS);
    if (ready == 0 || (ready < 0 && errno == EINTR))
        return LIVE_SOURCE_QUIET;
    const ssize_t got = ready < 0 ? -1 : read(source->descriptor, source->text + source->end, room);
    if (got < 0 && (errno == EINTR || errno == EAGAIN))
        return LIVE_SOURCE_QUIET;
    if (got < 0)
        return complain("input: cannot be read: %s", strerror(errno));
    const int is_last = got == 0 && !source->datagrams;
    if (is_last && source->end == 0)
        return LIVE_SOURCE_END;
    source->end += (size_t)got;
    if (source->datagrams || is_last)
        source->text[source->end++] = '\n';
    return LIVE_SOURCE_LINE;
}

int live_source_next(live_source *source, char **line)
{
    while (!cut_line(source, line)) {
        const int fetched = fetch(source);
        if (fetched != LIVE_SOURCE_LINE)
            return fetched;
    }
    return LIVE_SOURCE_LINE;
}
