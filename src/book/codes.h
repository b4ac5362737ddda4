/* codes: what a load remembers of codes it has met: bytes to a number. It forgets all when it has
 * grown, so that a file of a million different notes takes no more memory than one of a few. */
#ifndef WEIRBOOK_BOOK_CODES_H
#define WEIRBOOK_BOOK_CODES_H

#include "base/base.h"

enum { CODES_SLOTS = 16384, CODES_MOST = 8192, CODES_BYTES_MOST = 4 << 20 };

struct code {
    uint64_t hash;
    const char *key; /* NULL: an empty slot */
    size_t length;
    int64_t id;
};

struct codes {
    struct arena *arena;
    size_t count;
    struct code *slot; /* [CODES_SLOTS] */
};

void codes_init(struct codes *c);
void codes_free(struct codes *c); /* accepts a zeroed one */
/* The number of a key, or 0. */
int64_t codes_find(const struct codes *c, const void *key, size_t length);
/* A key that is not there. */
void codes_add(struct codes *c, const void *key, size_t length, int64_t id);

#endif
