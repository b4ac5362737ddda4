/* sample: a small invented plant with a month of troubles, and the readers of what was written, for
 * the tests of this room. */
#ifndef WEIRBOOK_TESTS_SAMPLE_H
#define WEIRBOOK_TESTS_SAMPLE_H

#include "report/report.h"

struct sample {
    struct arena *arena;
    struct plant *plant;
    struct frame *frame;
    struct permit_month month;
    struct month_input input;
};

/* The plant, its readings of March 2025, and the month judged on `on`. */
void sample_make(struct sample *s, const char *on);
void sample_free(struct sample *s);

/* A plant from rows of text: one row a line, cells parted by |, in the order of the layout. */
struct plant_draft *sample_draft(struct arena *a);
void sample_rows(struct plant_draft *d, enum plant_file file, const char *rows);
struct plant *sample_finish(struct plant_draft *d);
/* Adds a reading in the parameter's unit; `value` as written: "2.0", "<2", "code E". */
void sample_reading(struct arena *a, struct frame *frame, const char *point, const char *parameter,
                    day_t day, const char *value);
day_t sample_day(const char *iso);

/* What a writer wrote, as one text that the caller frees. */
char *written_text(const struct page *p, int width, bool colour);
char *written_csv(const struct table *t);
char *written_json(const struct table *t);
char *file_bytes(const char *path, size_t *length);
/* A new folder of its own for a test, and its removal with what is in it. */
char *folder_new(void);
void folder_drop(char *folder);
size_t folder_files(const char *folder);
/* Columns of the widest line. */
int widest(const char *text);

#endif
