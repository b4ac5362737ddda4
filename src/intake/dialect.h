/* dialect: how a file is laid out beyond its columns, as its person states it. Private to this
 * room. */
#ifndef WEIRBOOK_INTAKE_DIALECT_H
#define WEIRBOOK_INTAKE_DIALECT_H

#include "intake/dates.h"
#include "intake/lines.h"

enum stated_layout { LAYOUT_UNSTATED, LAYOUT_LONG, LAYOUT_WIDE };

/* What is not stated is found out from the file. */
struct dialect {
    enum stated_layout layout;
    char delimiter; /* '\0': not stated */
    char decimal;   /* '.', ',' or '\0' */
    enum date_order date_order;
    bool encoding_stated;
    enum encoding encoding;
    long header_line;   /* 0: the first line that is not blank */
    const char *footer; /* NULL: none */
    bool thousands_stated;
    char thousands; /* '.', ',', ' '; '\0' with `none` */
};

/* Reads a dialect file; path NULL: nothing is stated. Texts live in the arena. */
MUST_USE enum status dialect_read(struct arena *a, const char *path, struct dialect *out,
                                  struct fault *f);

#endif
