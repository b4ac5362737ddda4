/* fleet: one command over many books. Each book is read in a process of its own, as many at once as
 * the machine has processors; what they print comes back in the order of the books. */
#ifndef WEIRBOOK_FLEET_H
#define WEIRBOOK_FLEET_H

#include "command/session.h"

/* Works on the session's one book and prints what `take` will get; may set found. */
typedef enum status fleet_work(struct session *s, const void *options, struct fault *f);

struct fleet_taker {
    void *context;
    void (*take)(void *context, const char *book, const char *printed, size_t length);
    void (*missing)(void *context, const char *book, const char *why);
};

/* Goes through all books; one that cannot be read is handed to `missing`, and the rest go on. FAULT
 * at the end when there was one. Nothing is kept of a book once it was taken. */
MUST_USE enum status fleet_run(struct session *s, const void *options, fleet_work *work,
                               const struct fleet_taker *taker, struct fault *f);

/* For --as csv and json: the tables that `work` prints, under one heading, with a column `book`
 * first. */
MUST_USE enum status fleet_rows(struct session *s, const void *options, fleet_work *work, int as,
                                struct fault *f);
/* A table with a column `book` first, for such a `work`. */
struct table *fleet_table(struct session *s, const struct table *t);

#endif
