/* site_options: what the programs that read a shake share on their command lines. */
#ifndef SITE_OPTIONS_H
#define SITE_OPTIONS_H

#include "site_data.h"

/* The units that a user can name, the default first; the last has no name. */
extern const site_unit site_time_units[], site_acceleration_units[];

/* For the value of --option that getopt_long has just found: 0, or -1 after a message. */
int site_choose_unit(site_unit *unit, const site_unit *known, const char *option);

/* A message about what getopt_long did not take, and the answer -1. */
int site_refuse_option(int option, char **argv);

/* The exit status of a program, once all that it printed is out; status is below 0 where a message
   has been given. */
int site_end(int status);

#endif
