/* names: from an id to its index, for every row of a file. Private to this room. */
#ifndef WEIRBOOK_INTAKE_NAMES_H
#define WEIRBOOK_INTAKE_NAMES_H

#include "base/base.h"

struct name {
    const char *text; /* NULL: free */
    int index;
};

/* A hash table at most half full. */
struct names {
    struct name *slot;
    size_t mask;
};

void names_new(struct names *n, struct arena *a, size_t count);
void names_add(struct names *n, const char *text, int index); /* the text is not copied */
int names_find(const struct names *n, const char *text);      /* -1: unknown */

#endif
