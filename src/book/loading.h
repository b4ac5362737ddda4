/* loading: what a load under way keeps, and the steps of it that an act shares. */
#ifndef WEIRBOOK_BOOK_LOADING_H
#define WEIRBOOK_BOOK_LOADING_H

#include "book/codes.h"
#include "book/store.h"

struct load {
    struct arena *arena;
    const struct plant *plant;
    bool revise;
    struct stored_batch batch;
    struct book_counts counts;
    int64_t next_reading, next_aside, next_raw;
    struct digest *readings, *asides, *raws; /* running over all that was added */
    struct pack pack;
    int64_t *point, *parameter, *unit; /* codes by index; 0: not met yet */
    struct codes series, details;
    struct text key;                    /* of a series or a detail */
    struct text clash_text, clash_file; /* what the last contradiction met */
    uint8_t *confirmed; /* with revise: a bit for each older reading that a row of this file agreed
                           with */
};

/* The newest version under a reading's key. */
struct newest {
    int64_t id, version, batch, line, detail, qualifier;
    struct decimal number;
    char code;
};

/* Begins a batch of a kind that makes readings; b->load is it. A fault has rolled back already. */
MUST_USE enum status loading_begin(struct book *b, const char *kind, const struct plant *plant,
                                   const struct author *author, bool revise, struct fault *f);
void loading_common(const struct reading *r, struct common *c);
/* What the table will hold. `code` gives the no-data code room for a NUL. */
void loading_stored(const struct load *l, const struct reading *r, const struct common *c,
                    char code[2], struct stored *s);
/* The number of a detail, added where there is none yet. */
MUST_USE enum status loading_detail(struct book *b, struct load *l, const struct reading *r,
                                    const struct common *c, int64_t *out, struct fault *f);
/* The same qualifier and, brought to one unit, exactly the same number. */
bool loading_same(const struct reading *r, const struct newest *old, const struct unit *old_unit);
/* Adds `s` as the version after `old`. */
MUST_USE enum status loading_revision(struct book *b, struct load *l, const struct newest *old,
                                      struct stored *s, struct fault *f);

#endif
