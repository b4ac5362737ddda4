/* What a process table has a line for at this plant: catalogue formulas bound to what the plant
 * measures, by the roles of its points and the kinds of its basins, and the plant's own figures. */
#ifndef WEIRBOOK_PROCESS_LINES_H
#define WEIRBOOK_PROCESS_LINES_H

#include "process/ready.h"
#include "process/supply.h"

enum side { AMOUNT, STRENGTH };

/* How one argument gets its number on a day. */
struct input {
    struct stream *stream;     /* NULL: a figure, or the formula's default */
    const struct line *figure; /* what another formula gives on the day, in its own unit */
    const struct line *share;  /* a percentage of that figure is what is taken; NULL: all */
    enum side side;
    bool shared;                            /* an even part for each basin of the line's kind */
    const struct fraction *factor, *offset; /* into the argument's unit; NULL: it is in that unit */
};

struct line {
    const struct ready *ready;
    const char *name, *at, *parameter;
    struct input input[FORMULA_ARGUMENTS_MOST];
    bool smoothed;
    const char *basin; /* the basin the line is about, or NULL */
    enum basin_kind kind;
    const char *counted; /* an argument of which none, or a less-than, gives no figure but a bound;
                            NULL mostly */
    const char *note;    /* what always holds for the line, "" mostly */
    const char *unit;    /* the plant's: metric or not */
    const struct fraction *factor, *offset; /* of the result into `unit`; NULL: as it is */
    size_t order;                           /* in the catalogue, then as found */
};

struct lines {
    struct line *line;
    size_t count, room;
};

void lines_find(struct supplies *s, struct lines *out);
/* The rows of process.csv, which must have passed process_check. */
void lines_own(struct supplies *s, struct lines *out);

/* An empty line of the formula. */
struct line *lines_add(struct supplies *s, struct lines *lines, const char *formula);
/* Numbers of `from` are turned into the argument's unit, or into `to`. */
void line_feed(struct supplies *s, struct line *line, const char *argument, struct stream *stream,
               enum side side, const struct unit *from);
void line_feed_as(struct supplies *s, struct line *line, const char *argument,
                  struct stream *stream, enum side side, const struct unit *from,
                  const struct unit *to);

#endif
