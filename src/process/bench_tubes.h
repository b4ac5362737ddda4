/* The published table of most probable numbers, for the sheets and the tests. */
#ifndef WEIRBOOK_PROCESS_BENCH_TUBES_H
#define WEIRBOOK_PROCESS_BENCH_TUBES_H

#include <stddef.h>

struct mpn_entry {
    int positive[3];   /* of five tubes each of 10, 1.0 and 0.1 mL */
    const char *index; /* per 100 mL, as printed */
};

extern const struct mpn_entry mpn_table[];
extern const size_t mpn_entries;

#endif
