#include "task.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

void task_add(task_list *list, task t)
{
    if (list->count == TASK_MOST) {
        fprintf(stderr, "bench: too many tasks\n");
        exit(EXIT_FAILURE);
    }
    list->task[list->count++] = t;
}

const task *task_find(const task_list *list, const char *id)
{
    for (size_t i = 0; i < list->count; ++i)
        if (strcmp(list->task[i].id, id) == 0)
            return &list->task[i];
    return NULL;
}
