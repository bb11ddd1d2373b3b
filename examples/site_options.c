#include "site_options.h"

#include <errno.h>
#include <getopt.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "text_table.h"

enum { STATUS_REFUSED = 2 };

const site_unit site_time_units[] = {{"s", 1, 1}, {"ms", 1, 1000}, {NULL, 0, 0}};
const site_unit site_acceleration_units[] = {
    {"m/s2", 1, 1}, {"cm/s2", 1, 100}, {"g", 9.80665, 1}, {NULL, 0, 0}};

int site_choose_unit(site_unit *unit, const site_unit *known, const char *option)
{
    for (; known->name != NULL; ++known)
        if (strcmp(known->name, optarg) == 0) {
            *unit = *known;
            return 0;
        }
    return complain("--%s: there is no unit '%s'; see --help", option, optarg);
}

int site_refuse_option(int option, char **argv)
{
    if (option == ':')
        return complain("%s: a value is missing; see --help", argv[optind - 1]);
    if (optopt != 0)
        return complain("-%c: no such option, or a value that it does not take; see --help", optopt);
    return complain("%s: no such option; see --help", argv[optind - 1]);
}

int site_end(int status)
{
    if (status >= 0 && (fflush(stdout) != 0 || ferror(stdout)))
        status = complain("standard output: cannot be written: %s", strerror(errno));
    return status < 0 ? STATUS_REFUSED : EXIT_SUCCESS;
}
