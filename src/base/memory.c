/* Where memory comes from, and how the program ends when there is none left. */
#include "base/memory.h"

#include <stdlib.h>
#include <unistd.h>

#include "base/poison.h"

void base_out_of_memory(void)
{
    static const char line[] = "weirbook: out of memory; close other programs or use a smaller"
                               " period\n";
    /* The program ends whether or not the line could be written. */
    ssize_t written = write(STDERR_FILENO, line, sizeof line - 1);
    (void)written;
    _exit(1);
}

void *base_zeroed(size_t size)
{
    void *p = calloc(1, size > 0 ? size : 1);
    if (p == NULL)
        base_out_of_memory();
    return p;
}

void *base_resize(void *old, size_t size)
{
    void *p = realloc(old, size > 0 ? size : 1);
    if (p == NULL)
        base_out_of_memory();
    return p;
}
