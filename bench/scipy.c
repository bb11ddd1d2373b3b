/* SciPy in a process of its own, which waits for its turn at the other end of two pipes and times itself:
   scipy_methods.py. It inherits the processor core. */
#define _POSIX_C_SOURCE 200809L
#include <math.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/types.h>
#include <sys/wait.h>
#include <unistd.h>
#include "methods.h"

typedef struct scipy {
    FILE *to, *from;
    pid_t process;
} scipy;

typedef struct scipy_method {
    scipy *in;
    const char *name;
    size_t samples;
    int few; /* for a few oscillators only */
} scipy_method;

static double timed(void *self)
{
    const scipy_method *const m = self;
    char line[64] = "";
    fprintf(m->in->to, "time %s\n", m->name);
    fflush(m->in->to);
    return fgets(line, sizeof line, m->in->from) != NULL ? atof(line) : NAN;
}

static size_t history(void *self, size_t j, double *u)
{
    const scipy_method *const m = self;
    int known = !m->few;
    for (size_t k = 0; k < CASE_FEW; ++k)
        known |= case_spread(k, CASE_FEW) == j;
    if (!known)
        return 0;
    fprintf(m->in->to, "%s %zu\n", m->name, j);
    fflush(m->in->to);
    for (size_t got = fread(u, sizeof *u, m->samples, m->in->from); got < m->samples; ++got)
        u[got] = NAN;
    return m->samples;
}

static void become(const char *python, const char *script, const int in[2], const int out[2])
{
    if (dup2(in[0], STDIN_FILENO) < 0 || dup2(out[1], STDOUT_FILENO) < 0)
        _exit(EXIT_FAILURE);
    close(in[1]);
    close(out[0]);
    execl(python, python, script, (char *)NULL);
    _exit(EXIT_FAILURE);
}

static int start(scipy *s, const char *python, const char *script)
{
    int in[2], out[2];
    signal(SIGPIPE, SIG_IGN); /* a python that has ended is no reason to end here */
    if (pipe(in) != 0 || pipe(out) != 0)
        return 0;
    fflush(NULL);
    s->process = fork();
    if (s->process == 0)
        become(python, script, in, out);
    close(in[0]);
    close(out[1]);
    s->to = fdopen(in[1], "w");
    s->from = fdopen(out[0], "r");
    return s->process > 0 && s->to != NULL && s->from != NULL;
}

static void send_case(const scipy *s, const bench_case *in)
{
    fprintf(s->to, "%d %zu %d %d %.17g\n", CASE_SAMPLES, in->stretch, CASE_OSCILLATORS, CASE_FEW, CASE_DT);
    fwrite(in->p, sizeof *in->p, CASE_SAMPLES, s->to);
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j)
        fwrite(&in->sys[j].stiffness, sizeof(double), 1, s->to);
    for (size_t j = 0; j < CASE_OSCILLATORS; ++j)
        fwrite(&in->sys[j].damper, sizeof(double), 1, s->to);
    fflush(s->to);
}

static void add(task_list *list, scipy *s, const char *id, const char *name, const char *method,
                size_t samples, int few)
{
    scipy_method *const m = case_memory(sizeof *m);
    *m = (scipy_method){s, method, samples, few};
    task_add(list, (task){.kind = TASK_METHOD,
                          .id = id,
                          .name = name,
                          .gives = few ? "u, few" : "u",
                          .units = (double)CASE_FEW * (double)samples,
                          .self = m,
                          .clocked = timed,
                          .slow = few,
                          .history = history});
}

int scipy_tasks(task_list *list, const bench_case *in, const char *python, const char *script, char *version,
                size_t version_size)
{
    scipy *const s = case_memory(sizeof *s);
    *version = '\0';
    if (!start(s, python, script))
        return 0;
    send_case(s, in);
    if (fgets(version, (int)version_size, s->from) == NULL) {
        waitpid(s->process, NULL, 0);
        return 0;
    }
    version[strcspn(version, "\n")] = '\0';
    add(list, s, "scipy_lfilter", "SciPy lfilter, ramp-invariant", "lfilter", CASE_SAMPLES, 0);
    add(list, s, "scipy_lsim", "SciPy lsim", "lsim", in->stretch, 1);
    return 1;
}
