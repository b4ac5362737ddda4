/* Bench sheets written into a test as lines of text, and what they come to. */
#ifndef WEIRBOOK_TESTS_PROCESS_SHEETS_H
#define WEIRBOOK_TESTS_PROCESS_SHEETS_H

#include "process/process.h"

struct sheets {
    struct arena *arena;
    struct plant *plant;
    struct raw_value *raw;
    size_t raws;
    struct bench_outcome *outcome;
    size_t outcomes;
};

/* Lines of "sheet,date,time,point,run,argument,value,unit"; ends of lines may lack cells. The plant
 * has INF (influent), AB (aeration), EFF (effluent); today is 2025-06-30. */
struct sheets sheets_work(const char *lines);
/* The same with rows of a plant beside the usual ones. */
struct sheets sheets_work_at(const char *lines, const char *plant_field, const char *parameter);
/* Rows of one sheet, day and point: "RUN ARGUMENT VALUE [UNIT]; ..."; a run of "-" is blank. A
 * point of "-" is blank too. */
const char *sheet_lines(struct arena *a, const char *sheet, const char *point, const char *rows);
/* Works one such sheet. */
struct sheets sheet_work(const char *sheet, const char *point, const char *rows);
void sheets_free(struct sheets *s);

/* The outcome that is a reading of the parameter; NULL: none. */
const struct bench_outcome *sheets_reading(const struct sheets *s, const char *parameter);
/* A reading's text, or "refused: WHY", or "record"; for the only outcome of a kind. */
const char *sheets_text(const struct sheets *s, const char *parameter);
/* The check whose text begins so; NULL: none. */
const struct bench_check *sheets_check(const struct bench_outcome *o, const char *begins);
/* Every outcome is whole: text and value agree, a refusal has its words, places are set. */
void sheets_whole(const struct sheets *s);

#endif
