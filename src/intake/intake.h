/* intake: files to readings and to plant descriptions. The only room that parses CSV files. */
#ifndef WEIRBOOK_INTAKE_H
#define WEIRBOOK_INTAKE_H

#include "base/base.h"
#include "frame/frame.h"
#include "plant/plant.h"

/* Limits with clear faults: a cell 64 kB, a row 1 MB, a file 1 GB, 2000 columns. */

/* ---- plant descriptions ---- */

/* Adds the built-in parameter catalogue (schema/parameters.csv, compiled in) to a draft. */
void intake_catalogue(struct plant_draft *draft);
/* Adds the files of a description folder to a draft. Unknown columns, unreadable files and the like
 * become problems of the draft; FAULT only when the folder itself cannot be read. */
MUST_USE enum status intake_plant(struct arena *a, const char *folder, struct plant_draft *draft,
                                  struct fault *f);
/* Writes the starter description into a folder, which is made when missing; never over a file. */
MUST_USE enum status intake_example(const char *folder, struct fault *f);
/* Writes a description's rows back out as the files of a folder (made when missing; never over a
 * file unless `replace`), each file beside its place and then renamed. Built-in rows are left out.
 */
MUST_USE enum status intake_plant_write(const char *folder, const struct plant_draft *draft,
                                        bool replace, struct fault *f);

/* ---- readings files ----------------------------------------------------------------------------
 */

struct intake_options {
    const char *map;     /* column map of a wide file, or NULL */
    const char *dialect; /* dialect file (field,value), or NULL */
    day_t today;         /* later dates are set aside */
    /* Called now and then with the share read, 0 to 100, for a progress line; may be NULL. */
    void (*progress)(void *context, const char *file, int percent);
    void *progress_context;
};

/* Where rows go. What is handed over dies with the call. A sink's FAULT stops the reading. */
struct intake_sink {
    void *context;
    enum status (*reading)(void *context, const struct reading *r, const struct row_text *row,
                           struct fault *f);
    enum status (*aside)(void *context, const struct row_text *row, enum reason reason,
                         const char *explanation, struct fault *f);
};

/* What was read and how it was understood; `dialect_told` is one line for the summary: "wide,
 * semicolons, decimal comma, dates day.month.year, UTF-8". */
struct intake_summary {
    long rows; /* long: rows; wide: filled cells; each went to the sink exactly once */
    int64_t bytes;
    uint8_t digest[DIGEST_BYTES];
    const char *dialect_told;
};

/* The file's size and SHA-256, without reading it as CSV: tells a file that was loaded before. */
MUST_USE enum status intake_identify(struct arena *a, const char *path, int64_t *bytes,
                                     uint8_t digest[DIGEST_BYTES], struct fault *f);
/* Reads a long or wide file, row by row in bounded memory. FAULT: the file cannot be read at all,
 * its header is wrong, its dates are ambiguous (both readings shown, and the dialect line to
 * write). */
MUST_USE enum status intake_readings(struct arena *a, const char *path, const struct plant *plant,
                                     const struct intake_options *options,
                                     const struct intake_sink *sink, struct intake_summary *summary,
                                     struct fault *f);

/* A value as people write it: number, <n, <=n, >n, >=n, ND, DNQ n, DNQ, TNTC, E n, a no-data code
 * (a letter alone, or "code 9"). Fills qualifier, value, code, text of `r`, whose mdl and rl must
 * already stand there (or in the parameter). `comma`: the decimal mark is a comma. Returns
 * REASON_COUNT when it is fine. */
enum reason intake_value(struct reading *r, const struct parameter *p, const char *text,
                         bool comma);

/* ---- raw values of bench sheets ---------------------------------------------------------------
 * A CSV file of the columns raw_columns, in any order; comma, semicolon or tab, UTF-8 (or else
 * Windows-1252, as readings files). Whole in memory: a file of a shift or a month is small, and one
 * above 64 MB is refused. FAULT: it cannot be read, its header lacks a column, a row has not the
 * header's cells, or there are no rows. */
MUST_USE enum status intake_raw(struct arena *a, const char *path, struct raw_value **out,
                                size_t *count, struct intake_summary *summary, struct fault *f);

/* ---- small CSV tables (maps, and later claims): whole in memory ---- */

struct intake_table {
    size_t rows, columns;
    const char **header; /* [columns] */
    const char ***cell;  /* [rows][columns] */
    long *line;          /* [rows] */
};
MUST_USE enum status intake_table(struct arena *a, const char *path, struct intake_table *out,
                                  struct fault *f);

#endif
