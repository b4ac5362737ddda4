/* outlook: a period that is not over, and what it comes to if the samples still to come are such
 * and such. The figure is always worked by the same functions as a month's (figure_of), on the
 * values that stand with the assumed ones put behind them, so that no rule is written twice.
 *   remaining.c  which samples are still to come, and on which days
 *   outlook.c    the values that stand with assumed ones behind them; what may still come
 *   room.c       every limit of a day
 * Private to this room. */
#ifndef WEIRBOOK_PERMIT_OUTLOOK_H
#define WEIRBOOK_PERMIT_OUTLOOK_H

#include "permit/statistic.h"

struct outlook {
    struct work w;       /* its end is the period's last day */
    struct work today;   /* the same as it stands: its end is the day asked for */
    struct series now;   /* what stands of the period */
    struct series past;  /* the last 30 days, whatever the period */
    struct series parts; /* of a removal: effluent (top) and influent (bottom) of both */
    day_t on, next;      /* the first day that may still bring a sample */
    const day_t *day;    /* those the remaining samples are taken to fall on */
    size_t days;
    long left;                       /* days that may still bring one */
    const struct fraction *influent; /* what the rest of a removal is measured against */
    const struct fraction *feed;     /* the load of it, under removal=loads */
    const struct fraction *flow;     /* of the rest, under load_average=product */
    int decimals;                    /* of room and single */
};

#define DAYS_LATELY 30
#define PAST_DAYS   40 /* 30 days, and the week or month that begins before them */

/* ---- remaining.c ---- */

struct remaining {
    const day_t *day;
    size_t days, room;
    long samples; /* still to come; under count_by=reading a day may hold several */
    long lost;    /* owed, but no day is left for them */
    long left;    /* days that may still bring one */
    bool lately;  /* no frequency serves: judged from the last 30 days */
    bool longer;  /* since the one named is longer than the period */
    long seen;    /* days with a value in them */
    bool extra;   /* nothing more is owed: one more is looked at */
};

/* `past` holds the values of the days before the period that its first week or month needs. */
void remaining_of(const struct outlook *o, struct remaining *out);
/* The weeks, months, quarters or years of a frequency that overlap first..last, in order. */
size_t stretches_of(struct arena *a, const struct rules *rules, enum per per, day_t first,
                    day_t last, struct period **out);

/* ---- outlook.c ---- */

/* The figure with these samples behind what stands, as many as the outlook has days: of a load
 * limit loads, of a removal effluents, else values. */
void outlook_figure(const struct outlook *o, struct arena *a, const struct amount *more,
                    struct figure *x);
/* The mean (of bacteria the geometric mean, of ranks the same rank) of what stands in from..to, as
 * one amount to expect, a geometric mean rounded three decimals past the printed ones; number NULL
 * without any. */
struct amount outlook_typical(const struct outlook *o, const struct series *s, day_t from,
                              day_t to);
/* The highest (of a minimum: lowest) number that keeps the period within its limit, in steps of the
 * outlook's decimals. others NULL: every remaining sample has it; else one has, and the others
 * that. */
enum room_state outlook_search(const struct outlook *o, const struct amount *others,
                               int64_t *number);
/* How many of the remaining samples may be beyond the limit (samples rows). */
enum room_state outlook_count(const struct outlook *o, int64_t *number);
/* The day from which on the limit could no longer be met; DAY_NONE when it never could. */
day_t outlook_gone(const struct outlook *o);
/* A value just within the limit, or just beyond it. */
struct amount outlook_edge(const struct outlook *o, struct arena *a, bool beyond);
/* Whether a larger number makes it worse: of a removal an effluent's does. */
bool outlook_upwards(const struct outlook *o);
struct list outlook_judged(const struct series *s);

#endif
