/* One Check suite a program. */
#ifndef SUITE_H
#define SUITE_H

#include <check.h>
#include <stdlib.h>

/* A check that passes writes nothing: Check would note its place in a file, which costs more than most of our
   checks, and there are millions. A crash is then placed by the last check's test alone. */
#define _mark_point(file, line) ((void)0)

static inline int suite_run(const char *name, void (*add_tests)(TCase *tests))
{
    Suite *const suite = suite_create(name);
    TCase *const tests = tcase_create(name);
    tcase_set_timeout(tests, 900);
    add_tests(tests);
    suite_add_tcase(suite, tests);
    SRunner *const runner = srunner_create(suite);
    srunner_run_all(runner, CK_NORMAL);
    const int failed = srunner_ntests_failed(runner);
    srunner_free(runner);
    return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}

#endif
