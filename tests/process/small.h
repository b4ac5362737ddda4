/* A small plant and its readings, written into a test as lines of text. */
#ifndef WEIRBOOK_TESTS_PROCESS_SMALL_H
#define WEIRBOOK_TESTS_PROCESS_SMALL_H

#include "process/process.h"

struct small_row {
    enum plant_file file;
    const char *cells; /* in the order of the file's layout, a comma between them */
};

struct small_reading {
    const char *day, *point, *parameter, *value; /* "12", "<5", "E" (a code) */
};

/* Ends the test with the fault when the rows make no plant. */
struct plant *small_plant(struct arena *a, const struct small_row *rows, size_t count);
struct frame *small_frame(struct arena *a, const struct plant *p, const char *first,
                          const char *last, const struct small_reading *readings, size_t count);
day_t small_day(const char *iso);

/* The figure of a day; NULL when the table has no such row. `parameter` may be NULL: any. */
const struct process_figure *small_figure(const struct process_figure *figures, size_t count,
                                          const char *from, const char *name, const char *at,
                                          const char *parameter);

#endif
