/* table: small CSV files whole in memory, and the plain answers about their columns. Private to
 * this room; intake_table is its public face. */
#ifndef WEIRBOOK_INTAKE_TABLE_H
#define WEIRBOOK_INTAKE_TABLE_H

#include "intake/intake.h"
#include "intake/rows.h"

/* A small file whose columns are all known. */
struct sheet {
    const char *path;
    struct intake_table table;
    const char *const *known; /* names of the columns it may have */
    size_t known_count;
    int *at; /* [known_count] where each stands, -1: absent */
};

/* Reads a file and finds its columns; the first `needed` of the known must be there. */
MUST_USE enum status sheet_read(struct arena *a, const char *path, const char *const *known,
                                size_t known_count, size_t needed, struct sheet *out,
                                struct fault *f);
const char *sheet_cell(const struct sheet *s, size_t row, size_t column); /* "" when absent */
/* The place of a cell, for a fault. */
struct place sheet_place(const struct sheet *s, size_t row, size_t column);
/* The index of a word; a fault at the cell names the nearest. */
MUST_USE enum status sheet_word(const struct sheet *s, size_t row, size_t column,
                                const char *const *words, size_t count, int *out, struct fault *f);
/* "; the nearest is 'x'" for a message; "" when there is none. In the arena. */
const char *nearest_told(struct arena *a, const char *nearest);

#endif
