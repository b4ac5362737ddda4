/* Where the arguments of a process figure come from: readings day by day, and streams of amount and
 * strength made of them. Everything is worked once; it is kept by day, or for one day alone where
 * days are only ever asked for in turn. */
#ifndef WEIRBOOK_PROCESS_SUPPLY_H
#define WEIRBOOK_PROCESS_SUPPLY_H

#include "process/process.h"

/* One column of the frame in one unit. */
struct cell {
    const struct fraction *number; /* NULL: none, and `why` says so */
    const char *why;
    bool less, greater;
};

struct series {
    int point, parameter;
    const struct unit *unit;
    struct cell *cell;     /* by day from supplies.first */
    struct stream *stream; /* of this reading alone, once asked for */
    struct series *next;
};

struct supplies {
    struct arena *arena, *passing; /* `passing` is dropped now and then: see supplies_tidy */
    const struct frame *frame;
    const struct plant *plant;
    day_t first, last; /* the days asked for and those that smoothing reaches back to */
    int smooth;
    bool in_turn; /* a day is done with when the next is asked for: streams keep one day alone, in
                     `passing`. Not with smoothing, which looks back. */
    struct series *series;
    const struct fraction *zero;
};

/* A part of a stream: an amount (a reading, a number, a basin's measure while it is in service, or
 * another stream's amount) and, where solids or the like go with it, their strength. */
struct part {
    const struct series *reading;
    const struct fraction *number;
    const struct basin *basin; /* the number counts while this one is in service */
    struct stream *stream;
    const struct series *strength; /* NULL: none */
    bool minus;                    /* the amount is taken off */
};

/* What a stream carries on a day. */
struct carried {
    bool known;
    bool idle;                      /* made of basins, and none is in service */
    const struct fraction *amount;  /* NULL: `no_amount` says why */
    const struct fraction *product; /* sum of amount x strength; NULL: `no_product` says why */
    const char *no_amount, *no_product;
    bool less, greater; /* a less-than, a greater-than took part */
    int days;           /* of a smoothed one: how many took part */
};

struct stream {
    struct part *part;
    size_t parts, room;
    struct carried *daily, *smoothed; /* by day from supplies.first, where it pays to keep them */
    struct carried *latest;           /* where days come in turn: of `day` alone */
    day_t day;
};

/* NULL when the frame holds no reading of the column. `unit`: NULL for the parameter's own. */
struct series *series_of(struct supplies *s, int point, int parameter, const struct unit *unit);
const struct cell *series_cell(const struct supplies *s, const struct series *series, day_t day);

struct stream *stream_new(struct supplies *s);
void stream_add(struct supplies *s, struct stream *stream, struct part part);
/* The stream of one reading alone; one for all who ask. */
struct stream *stream_of(struct supplies *s, struct series *series);
struct carried stream_day(struct supplies *s, struct stream *stream, day_t day);
/* The mean over the days of the window that ends on `day` and that have what is needed. */
struct carried stream_smoothed(struct supplies *s, struct stream *stream, day_t day);

/* Drops what was worked in passing once it has grown: between two days. Results must have been
 * copied. */
void supplies_tidy(struct supplies *s);

#endif
