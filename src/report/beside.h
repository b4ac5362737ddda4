/* beside: a file written under a temporary name beside its own and renamed once whole, so that no
 * half-written file ever stands in the place of a good one. Private to this room. */
#ifndef WEIRBOOK_REPORT_BESIDE_H
#define WEIRBOOK_REPORT_BESIDE_H

#include "base/base.h"

struct beside {
    const char *path, *temporary;
    int fd; /* of the temporary file, open for writing; -1 once closed */
};

/* Makes the temporary file. Faults: the path is something other than a plain file, or its folder
 * cannot be written. */
MUST_USE enum status beside_open(struct arena *a, const char *path, struct beside *out,
                                 struct fault *f);
/* Syncs and renames; on a fault nothing is left. The file at the temporary name may have been
 * written through another descriptor. */
MUST_USE enum status beside_keep(struct beside *b, struct fault *f);
/* Removes the temporary file; harmless after beside_keep. */
void beside_drop(struct beside *b);
/* The one fault for a file that could not be written, in the words of `error` (errno). */
enum status beside_fault(const struct beside *b, int error, struct fault *f);

#endif
