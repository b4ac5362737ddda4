/* raw: the raw values of bench sheets. They are kept as the person wrote them, so nothing of a file
 * is read past: one row that cannot be told apart stops the whole file. */
#include "intake/intake.h"
#include "intake/table.h"

#include "base/poison.h"

#define RAW_BYTES_MAX ((int64_t)64 << 20) /* all of it stands in memory */

struct raw_file {
    struct arena *arena; /* what stays */
    const char *path;
    struct lines *lines;
    struct rows rows;
    size_t columns;
    int at[RAW_COLUMNS]; /* where each column stands in the file */
    struct raw_value *value;
    size_t count, room;
};

/* ---- the header ---- */

static enum status read_heading(struct raw_file *r, const struct row *row, size_t i,
                                struct fault *f)
{
    const char *heading = row->cell[i];
    const struct place where = {r->path, row->line, (int)i + 1};
    for (size_t c = 0; c < RAW_COLUMNS; c++) {
        if (!text_equal_nocase(raw_columns[c], heading))
            continue;
        if (r->at[c] >= 0)
            return fault_at(f, &where, "take one of them out", "the column '%s' stands twice",
                            heading);
        r->at[c] = (int)i;
        return OK;
    }
    if (*heading == '\0')
        return fault_at(f, &where, "name it, or take it out", "the column has no heading");
    return fault_at(f, &where, "correct the heading, or take the column out", "no column '%s'%s",
                    heading,
                    nearest_told(r->arena, text_nearest(heading, raw_columns, RAW_COLUMNS)));
}

static enum status read_header(struct raw_file *r, struct fault *f)
{
    const struct row *row = NULL;
    if (rows_header(&r->rows, 0, &row, f) != OK)
        return FAULT;
    const struct place where = {.file = r->path, .line = row->line};
    if (row->problem != REASON_COUNT)
        return fault_at(f, &where, reason_todo[row->problem], "%s", row_problem(row->problem));
    if (row->count > COLUMNS_MAX)
        return fault_at(f, &where, "see whether it is a file of raw values",
                        "more than %zu columns", COLUMNS_MAX);
    r->columns = row->count;
    while (r->columns > 0 && row->cell[r->columns - 1][0] == '\0')
        r->columns--;
    for (size_t c = 0; c < RAW_COLUMNS; c++)
        r->at[c] = -1;
    for (size_t i = 0; i < r->columns; i++)
        if (read_heading(r, row, i, f) != OK)
            return FAULT;
    for (size_t c = 0; c < RAW_COLUMNS; c++)
        if (r->at[c] < 0)
            return fault_at(f, &where, "add it; its cells may be blank where nothing is known",
                            "the column '%s' is missing", raw_columns[c]);
    return OK;
}

/* ---- rows ---- */

static enum status read_row(struct raw_file *r, const struct row *row, struct fault *f)
{
    const struct place where = {.file = r->path, .line = row->line};
    if (row->problem != REASON_COUNT)
        return fault_at(f, &where, reason_todo[row->problem], "%s", row_problem(row->problem));
    if (!row_fits(row, r->columns))
        return fault_at(f, &where, reason_todo[REASON_WRONG_COLUMNS],
                        "the row has %zu cells, the header %zu", row->count, r->columns);
    struct raw_value *v = arena_push(r->arena, &r->value, &r->count, &r->room, sizeof *v);
    const struct raw_value *last = r->count > 1 ? v - 1 : NULL;
    *v = (struct raw_value){.file = r->path, .line = row->line};
    for (size_t c = 0; c < RAW_COLUMNS; c++) {
        const char *cell = row->cell[r->at[c]];
        /* Most cells say what the one above them says. */
        bool same = last != NULL && text_equal(last->cell[c], cell);
        v->cell[c] = same ? last->cell[c] : arena_text(r->arena, cell);
    }
    return OK;
}

static enum status read_rows(struct raw_file *r, struct fault *f)
{
    const struct place where = {.file = r->path};
    const struct row *row = NULL;
    do {
        if (rows_next(&r->rows, &row, f) != OK)
            return FAULT;
        if (row != NULL && read_row(r, row, f) != OK)
            return FAULT;
    } while (row != NULL);
    if (r->lines->taken != r->lines->look.bytes)
        return fault_at(f, &where, "read it again", "the file changed while it was read");
    if (r->count == 0)
        return fault_at(f, &where, "write a row for each raw value",
                        "the file has no raw values below its header");
    return OK;
}

/* ---- the file ---- */

static const char *tell_dialect(const struct raw_file *r)
{
    return arena_print(r->arena, "raw values, %s, %s",
                       r->rows.delimiter == ','   ? "commas"
                       : r->rows.delimiter == ';' ? "semicolons"
                                                  : "tabs",
                       r->lines->encoding == ENCODING_UTF8 ? "UTF-8" : "Windows-1252");
}

static enum status read_all(struct raw_file *r, struct arena *scratch,
                            struct intake_summary *summary, struct fault *f)
{
    char delimiter = ',';
    if (r->lines->look.bytes > RAW_BYTES_MAX)
        return fault_at(f, &(struct place){.file = r->path}, "split it",
                        "the file is larger than 64 MB");
    if (rows_find_delimiter(r->lines, 1, &delimiter, f) != OK)
        return FAULT;
    r->lines->digest = digest_new(scratch);
    rows_open(&r->rows, scratch, r->lines, delimiter);
    enum status rc = OK;
    TRY(read_header(r, f));
    TRY(read_rows(r, f));
    summary->rows = (long)r->count;
    summary->bytes = r->lines->look.bytes;
    digest_end(r->lines->digest, summary->digest);
    summary->dialect_told = tell_dialect(r);
done:
    rows_close(&r->rows);
    return rc;
}

enum status intake_raw(struct arena *a, const char *path, struct raw_value **out, size_t *count,
                       struct intake_summary *summary, struct fault *f)
{
    struct arena *scratch = arena_new();
    struct lines lines;
    struct raw_file r = {.arena = a, .path = arena_text(a, path), .lines = &lines};
    *summary = (struct intake_summary){.dialect_told = ""};
    *out = NULL;
    *count = 0;
    enum status rc = lines_open(&lines, scratch, r.path, f);
    if (rc == OK)
        rc = read_all(&r, scratch, summary, f);
    if (rc == OK) {
        *out = r.value;
        *count = r.count;
    }
    lines_close(&lines);
    arena_free(scratch);
    return rc;
}
