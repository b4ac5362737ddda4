/* Readings as a long CSV file that `load` reads back to the same readings. */
#ifndef WEIRBOOK_LONG_H
#define WEIRBOOK_LONG_H

#include "frame/frame.h"

/* The heading line of a long file; with `asides` the columns that tell why a row was set aside as
 * well. */
void long_heading(struct text *t, bool asides);
/* One reading as one line. */
void long_reading(struct text *t, const struct plant *plant, const struct reading *r);
/* One row that was set aside, with its reason and place, ready to be corrected and loaded. */
void long_aside(struct text *t, const struct row_text *row, const char *reason,
                const char *explanation);
/* "march.csv:5"; what came from no file (a correction by hand) has no line. */
const char *long_place(struct arena *a, const char *file, long line);

#endif
