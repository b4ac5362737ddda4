/* lines: a file as physical lines of UTF-8, in bounded memory. A first look settles what holds for
 * the whole file (encoding, line ends); then lines come one at a time. Private to this room. */
#ifndef WEIRBOOK_INTAKE_LINES_H
#define WEIRBOOK_INTAKE_LINES_H

#include "base/base.h"

#define LINE_BYTES_MAX ((size_t)1 << 20)
#define FILE_BYTES_MAX ((int64_t)1 << 30)

enum encoding { ENCODING_UTF8, ENCODING_WINDOWS_1252 };

/* What the first look found. */
struct look {
    int64_t bytes;
    bool ascii;
    bool utf8;     /* valid to the last byte */
    bool mark;     /* a byte-order mark stands first: then it was meant as UTF-8 */
    bool quotes;   /* a double quote stands somewhere */
    bool controls; /* control bytes other than tab, CR and LF */
    bool feeds, returns;
};

struct line {
    const char *at; /* at[length] is a line feed, whatever ended the line in the file */
    size_t length;
    long number; /* from 1 */
    bool bad;    /* not text: control bytes, or bytes that its encoding does not have */
};

struct lines {
    const char *path;
    FILE *stream;
    struct look look;
    enum encoding encoding; /* by the look; a dialect may set it otherwise */
    struct digest *digest;  /* gets every byte read; NULL: none wanted */
    char *buffer;
    size_t start, end;
    int64_t taken; /* bytes read from the file */
    long number;
    bool at_end;
    struct text decoded;
};

/* Opens a file and takes the first look. Faults: missing, a folder, not to be read, empty, too
 * large, UTF-16, a workbook, NUL bytes. lines_close is safe after a FAULT. */
MUST_USE enum status lines_open(struct lines *l, struct arena *a, const char *path,
                                struct fault *f);
/* Bytes compiled in; `name` stands for the path. */
MUST_USE enum status lines_open_bytes(struct lines *l, struct arena *a, const char *name,
                                      const void *bytes, size_t length, struct fault *f);
/* The same file once more, from its beginning; what is known of it is taken over. */
MUST_USE enum status lines_open_again(struct lines *l, struct arena *a, const struct lines *known,
                                      struct fault *f);
void lines_close(struct lines *l);
MUST_USE enum status lines_rewind(struct lines *l, struct fault *f);
/* The next line; out->at is NULL behind the last. It lives until the next call. Faults: a line
 * longer than LINE_BYTES_MAX, a file that can no longer be read. */
MUST_USE enum status lines_next(struct lines *l, struct line *out, struct fault *f);
/* Whether UTF-8 bytes of this file must be taken as no text. */
bool lines_bad(const struct lines *l, const char *s, size_t length);
/* Opens a readings file or a table: the checks that need no look at its bytes. */
MUST_USE enum status file_open(const char *path, FILE **out, int64_t *bytes, struct fault *f);

#endif
