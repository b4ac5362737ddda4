/* Worked cases of formulas, read from CSV files and asked of the program as a person would. */
#ifndef WEIRBOOK_TESTS_PROCESS_CASES_H
#define WEIRBOOK_TESTS_PROCESS_CASES_H

#include "process/process.h"

#define CASE_CELLS_MOST 12

struct case_row {
    long line;
    const char *cell[CASE_CELLS_MOST];
};

struct case_file {
    struct case_row *rows; /* without the header */
    size_t count;
    struct case_row header;
};

/* False when the file cannot be opened. */
bool case_file_read(struct arena *a, const char *path, struct case_file *out);
/* The cell of a row in the column with this name; ends the test when there is no such column. */
const char *case_cell(const struct case_file *f, const struct case_row *row, const char *column);

struct case_asked {
    const char *formula, *arguments; /* ARG=VALUE words, a blank between them */
    const char *expected, *within;   /* decimals; expected "" : must be refused */
    const char *unit, *source, *where;
};

/* Asks the formula; prints what is wrong, with the source, and returns whether it passed. */
bool case_passes(const struct case_asked *c);

/* ENV/path, or fallback/path where the variable is unset. */
const char *case_path(struct arena *a, const char *env, const char *fallback, const char *path);

#endif
