/* rows: lines to rows of cells, by libcsv (RFC 4180 read strictly). A row that cannot be read is
 * handed out with its reason, and reading goes on at the line behind it. Private to this room. */
#ifndef WEIRBOOK_INTAKE_ROWS_H
#define WEIRBOOK_INTAKE_ROWS_H

#include "base/base.h"
#include "frame/frame.h"
#include "intake/lines.h"

#include <csv.h>

#define CELL_BYTES_MAX ((size_t)1 << 16)
#define COLUMNS_MAX    ((size_t)2000)

struct row {
    long line; /* where it begins */
    size_t count;
    const char *const *cell; /* without blanks around it, and without the guard of CSV injection */
    enum reason problem;     /* REASON_COUNT: none; else the cells mean nothing */
};

struct rows {
    struct lines *lines;
    struct csv_parser parser;
    bool parsing; /* the parser holds memory */
    char delimiter;
    struct row row;
    char *bytes; /* the row's cells, each with a NUL */
    size_t used;
    const char **cell;
    bool ended, stray, too_long;
    struct text joined;         /* the row's lines, when there are several */
    struct text held;           /* lines to be read again before the file's own */
    size_t held_at, held_first; /* next; behind the row's first line */
    long held_number;           /* of the line at held_at */
    struct text raw;            /* the row as it stands in the file */
    struct line first;          /* the row's first line, while it is the only one */
};

void rows_open(struct rows *r, struct arena *a, struct lines *lines, char delimiter);
void rows_close(struct rows *r); /* the lines stay open */
/* The next row that is not blank; *out is NULL behind the last. It lives until the next call. */
MUST_USE enum status rows_next(struct rows *r, const struct row **out, struct fault *f);
/* The first row: of line `header_line` where one is stated (0: none), else the first not blank. */
MUST_USE enum status rows_header(struct rows *r, long header_line, const struct row **out,
                                 struct fault *f);
/* The row as it stands in the file, control bytes escaped; of a problem, the line it is told of. */
const char *rows_raw(struct rows *r);
/* What a row's problem is, in words: "a quote is not closed, ..." */
const char *row_problem(enum reason problem);
/* Whether the file's own rows end here: the first cell begins with the footer (NULL: none). */
bool row_is_footer(const struct row *row, const char *footer);
/* As many cells as the header, or more that are blank. */
bool row_fits(const struct row *row, size_t columns);
/* Comma, semicolon or tab: what parts the cells of the file's first lines from line `from` on. The
 * lines are rewound. */
MUST_USE enum status rows_find_delimiter(struct lines *l, long from, char *out, struct fault *f);
/* Blanks (space, tab, no-break space) at both ends taken off, in place. */
char *trim(char *s);

#endif
