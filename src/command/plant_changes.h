/* What a changed description does to days that have readings. */
#ifndef WEIRBOOK_PLANT_CHANGES_H
#define WEIRBOOK_PLANT_CHANGES_H

#include "command/session.h"

/* Tells the limits and rules that now judge a day of first..last otherwise, and how to keep what
 * was reported. Nothing when no reading is in the book (DAY_NONE), or no such limit or rule
 * changed. */
void plant_changes_tell(struct session *s, const struct plant *old, const struct plant *new,
                        day_t first, day_t last);

#endif
