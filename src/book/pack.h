/* pack: the one way a record is put into bytes before it is hashed. Every field of the record takes
 * part, in a fixed order, and no two different records give the same bytes: a number is written
 * seven bits a byte, low bits first, its sign in the lowest (zigzag); a text is its length and its
 * bytes; what may be absent has a 0 or a 1 before it. */
#ifndef WEIRBOOK_BOOK_PACK_H
#define WEIRBOOK_BOOK_PACK_H

#include "base/base.h"
#include "frame/frame.h"

struct pack {
    struct arena *arena;
    uint8_t *at;
    size_t length, room;
};

void pack_init(struct pack *p, struct arena *a);
void pack_clear(struct pack *p);
void pack_int(struct pack *p, int64_t n);
void pack_text(struct pack *p, const char *s);                     /* NULL: absent */
void pack_bytes(struct pack *p, const void *bytes, size_t length); /* as they are */
/* FNV-1a (Fowler, Noll and Vo), 64 bits, the highest one dropped so that it fits a signed
 * column. Two records of one length that differ in one byte never share a mark: each step is one to
 * one. */
int64_t pack_mark(const struct pack *p);

/* What many readings have in common: a row of table detail. */
struct common {
    const char *unit_name;
    int unit; /* unit_at(); -1: none of this program's */
    bool has_mdl, has_rl;
    struct decimal mdl, rl;
    struct detail detail; /* no text is NULL */
};

/* A reading as its table holds it, names beside its codes. Numbers are kept as wide as the file can
 * make them, so that a damaged one is hashed as it stands. */
struct stored {
    int64_t id, batch, line, day, minute, version, qualifier, mark;
    int64_t series, detail; /* codes */
    bool has_number;
    int64_t coefficient, scale;
    const char *code; /* NULL: none */
    const char *value;
    const char *point, *parameter, *sample; /* NULL: no such series */
    const struct common *common;            /* NULL: no such detail */
};
void pack_reading(struct pack *p, const struct stored *s);

/* A row set aside. */
struct stored_aside {
    int64_t id, batch, line, column, day, mark;
    bool has_day;
    const char *cell[LONG_COLUMNS];
    const char *raw, *reason, *explanation;
};
void pack_aside(struct pack *p, const struct stored_aside *s);

/* A raw value of a bench sheet. */
struct stored_raw {
    int64_t id, batch, line, mark;
    const char *cell[RAW_COLUMNS];
};
void pack_raw(struct pack *p, const struct stored_raw *s);

/* A row of a description file. */
struct stored_row {
    int64_t batch, place, builtin, line, mark;
    enum plant_file kind;
    const char *file;
    const char *cell[PLANT_COLUMNS_MOST]; /* NULL: the file had no such column */
};
void pack_row(struct pack *p, const struct stored_row *s);

/* A batch: what every kind has, and what its kind adds. */
struct stored_batch {
    int64_t id;
    const char *kind, *at, *who;
    const char *reason;
    int64_t rows;
    /* a load */
    const char *file, *dialect;
    int64_t bytes, accepted, present, revised, aside, first_reading, first_aside;
    uint8_t digest[DIGEST_BYTES];
    bool is_load, is_description; /* which of the two tables has a row for it */
    /* a bench sheet, which is a load too */
    bool is_bench; /* table bench has a row for it */
    int64_t raw_values, first_raw;
    uint8_t raw_digest[DIGEST_BYTES]; /* SHA-256 of its raw values; not kept in a table */
};
/* The head after a batch. `content`: SHA-256 of its readings, or of its description's rows;
 * `asides`: of its rows set aside (of nothing for a description). What a bench sheet adds comes
 * last: other batches are packed as in format 1. */
void pack_head(struct pack *p, struct digest *d, const struct stored_batch *s,
               const uint8_t previous[DIGEST_BYTES], const uint8_t content[DIGEST_BYTES],
               const uint8_t asides[DIGEST_BYTES], uint8_t head[DIGEST_BYTES]);

#endif
