/* evidence: what a whole file tells of its decimal mark and its order of dates. One row never
 * decides what another means: the whole column does, or the person. Private to this room. */
#ifndef WEIRBOOK_INTAKE_EVIDENCE_H
#define WEIRBOOK_INTAKE_EVIDENCE_H

#include "intake/layout.h"

/* The first cell that showed something; line 0: none did. */
struct sighting {
    char text[48];
    long line;
    int column;
};

struct evidence {
    struct sighting day_first, month_first, either_order;
    struct sighting comma, point, maybe_comma, maybe_point;
};

/* Reads the file once more from its beginning, and marks the columns whose numbers prove a mark
 * between thousands. */
MUST_USE enum status evidence_gather(const struct lines *known, char delimiter,
                                     const struct dialect *dialect, struct layout *layout,
                                     struct evidence *out, struct fault *f);
/* The order of dates such as 3/4/2025. Faults show both readings and what to write. */
MUST_USE enum status evidence_order(const struct evidence *e, const char *path,
                                    enum date_order *out, struct fault *f);
/* The decimal mark, '.' or ','. Faults likewise. */
MUST_USE enum status evidence_decimal(const struct evidence *e, const char *path, char delimiter,
                                      char *out, struct fault *f);

#endif
