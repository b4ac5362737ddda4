/* store: how a frame keeps its readings. Private to this room. */
#ifndef WEIRBOOK_FRAME_STORE_H
#define WEIRBOOK_FRAME_STORE_H

#include "frame/frame.h"

/* What a day of a totalizer's column comes to. */
struct meter_day {
    const struct fraction
        *volume; /* in the parameter's unit; NULL: `why` says so, or an empty day */
    const char *why;
    size_t readings;
};

/* One point and parameter. Its readings stand in order of day, time and loading; those of the day
 * first + i are at[start[i]] up to at[start[i + 1]]. */
struct column {
    int point, parameter;
    day_t first, last;
    const struct reading **at;
    uint32_t *start;
    struct meter_day *meter; /* by day, of a totalizer's column; else NULL */
};

struct block; /* readings as they were added */

enum { MARK_ENTRY = 1, MARK_NO_DISCHARGE = 2 };

struct frame {
    struct arena *arena;
    const struct plant *plant;
    day_t first, last;
    bool closed;
    int flow_parameter; /* FLOW, or -1 */
    struct block *newest;
    size_t readings;
    struct column *columns;
    size_t column_count, column_room;
    int32_t *index;     /* by point and parameter: the column, or -1 */
    const char **empty; /* by point and parameter: "no reading of EFF BOD5", once asked for */
    uint8_t *marks;     /* by point and day */
};

size_t frame_cell(const struct frame *f, int point, int parameter);
const struct column *frame_column(const struct frame *f, int point, int parameter); /* or NULL */
/* The readings of a day wherever the column has them, outside the frame's days too. */
const struct reading *const *column_day(const struct column *c, day_t day, size_t *count);
bool column_has(const struct column *c, day_t first, day_t last);

/* Whether frame_in_unit can turn one into the other. */
bool units_meet(const struct unit *a, const struct unit *b);

/* Whether a totalizer stands at the point and parameter at any time. */
bool totalizer_at(const struct plant *p, int point, int parameter);
void totalizer_work(struct frame *f, struct column *c);

/* Once the columns stand. */
void discharge_mark(struct frame *f);

/* The day's amount by the day rule, whatever the no-discharge marks say. False: no number; `out`
 * then holds the state and why. */
bool day_work(const struct frame *f, const struct column *c, day_t day, const struct rules *rules,
              const struct unit *unit, struct day_value *out);

#endif
