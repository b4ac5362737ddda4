/* A conversation that can be taken back and gone on with. What was answered is kept as a list; to
 * take an answer back the list loses its last one and the whole conversation runs again in silence
 * up to there. So the flow of questions is written straight down, and knows nothing of undo. */
#ifndef WEIRBOOK_BENCH_TALK_H
#define WEIRBOOK_BENCH_TALK_H

#include "command/bench.h"

enum turn { TURN_ON, TURN_UNDO, TURN_STOP, TURN_FAULT };
enum taking { TAKEN, TAKEN_IF_REPEATED, NOT_TAKEN };
enum answer_kind { ANSWER_VALUE, ANSWER_NONE, ANSWER_DONE };

struct answer {
    enum answer_kind kind;
    const char *value, *unit;
    const char *prompt; /* what it answered */
};

struct talk;

struct question {
    const char *prompt;
    const char *offer;        /* taken by an empty line; NULL: none */
    bool optional;            /* may be left out: an empty line, or "-" where there is an offer */
    bool ends;                /* "done" may be said */
    bool opens;               /* opens a run: an empty line leaves it out, "=" takes the offer */
    const char *help;         /* for "?" */
    const char *const *words; /* for TAB */
    size_t words_count;
    /* Reads what was typed into the answer, or says on the spot why not. */
    enum taking (*check)(struct talk *t, const struct question *q, const char *typed,
                         struct answer *out);
    const void *about; /* what check looks at */
    enum raw_column
        column;           /* RAW_DATE, RAW_TIME, RAW_POINT, RAW_RUN, RAW_VALUE: what a row tells */
    const char *argument; /* RAW_VALUE: which argument's */
};

struct talk {
    struct bench *bench;
    struct arena *arena;
    struct bench_line *line;
    struct journal journal;
    struct fault *fault;
    struct answer *answer;
    size_t answers, answer_room, next;
    const struct raw_value *old;      /* rows of an unfinished sheet, not yet gone through */
    size_t olds, old_next, old_named; /* old_named: where a point or run was last read off */
    bool resumed;                     /* there were such rows */
    struct raw_value *row;            /* the sheet so far */
    size_t rows, row_room;
    const char *date, *time, *point, *run; /* where the conversation stands */
    day_t day;
    bool done; /* "done" was said */
};

/* Runs the flow until it ends, again for each undo. */
enum turn talk_run(struct talk *t, enum turn (*flow)(struct talk *t));
enum turn talk_ask(struct talk *t, const struct question *q, struct answer *out);
/* Whether the next question goes to the person. */
bool talk_live(const struct talk *t);
/* One more raw value where the conversation stands; on the disk when it returns. */
enum turn talk_row(struct talk *t, const char *argument, const struct answer *answer);
/* The file says what the rows say. */
MUST_USE enum status talk_catch_up(struct talk *t);
void talk_say(struct talk *t, const char *format, ...) PRINTS(2, 3);

#endif
