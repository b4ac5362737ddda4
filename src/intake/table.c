/* table: column maps, dialects, claims: files of a few rows. */
#include "intake/table.h"

#include <string.h>

#include "base/poison.h"

struct table_draft {
    struct arena *arena;
    struct intake_table *table;
    size_t cells_room, lines_room;
};

static const char **copy_cells(struct arena *a, const struct row *row, size_t columns)
{
    const char **cells = arena_alloc(a, (columns + 1) * sizeof *cells);
    for (size_t i = 0; i < columns; i++)
        cells[i] = arena_text(a, row->cell[i]);
    return cells;
}

static enum status add_row(struct table_draft *d, const char *path, const struct row *row,
                           struct fault *f)
{
    struct intake_table *t = d->table;
    const struct place where = {.file = path, .line = row->line};
    if (row->problem != REASON_COUNT)
        return fault_at(f, &where, reason_todo[row->problem], "%s", row_problem(row->problem));
    if (t->header == NULL) {
        if (row->count > COLUMNS_MAX)
            return fault_at(f, &where, "split the file", "more than %zu columns", COLUMNS_MAX);
        t->columns = row->count;
        while (t->columns > 0 && row->cell[t->columns - 1][0] == '\0')
            t->columns--;
        t->header = copy_cells(d->arena, row, t->columns);
        return OK;
    }
    if (!row_fits(row, t->columns))
        return fault_at(f, &where, reason_todo[REASON_WRONG_COLUMNS],
                        "the row has %zu cells, the header %zu", row->count, t->columns);
    size_t lines = t->rows;
    const char ***cells = arena_push(d->arena, &t->cell, &t->rows, &d->cells_room, sizeof *cells);
    *cells = copy_cells(d->arena, row, t->columns);
    long *line = arena_push(d->arena, &t->line, &lines, &d->lines_room, sizeof *line);
    *line = row->line;
    return OK;
}

static enum status read_all(struct arena *a, struct arena *scratch, struct lines *lines,
                            struct intake_table *out, struct fault *f)
{
    struct table_draft d = {.arena = a, .table = out};
    struct rows rows;
    const struct row *row = NULL;
    char delimiter = ',';
    if (rows_find_delimiter(lines, 1, &delimiter, f) != OK)
        return FAULT;
    rows_open(&rows, scratch, lines, delimiter);
    enum status rc = OK;
    do {
        TRY(rows_next(&rows, &row, f));
        if (row != NULL)
            TRY(add_row(&d, lines->path, row, f));
    } while (row != NULL);
    if (out->header == NULL)
        rc = fault_at(f, &(struct place){.file = lines->path}, "export it again",
                      "the file holds only blank lines");
done:
    rows_close(&rows);
    return rc;
}

enum status intake_table(struct arena *a, const char *path, struct intake_table *out,
                         struct fault *f)
{
    struct arena *scratch = arena_new();
    struct lines lines;
    *out = (struct intake_table){.rows = 0};
    enum status rc = lines_open(&lines, scratch, path, f);
    if (rc == OK)
        rc = read_all(a, scratch, &lines, out, f);
    lines_close(&lines);
    arena_free(scratch);
    return rc;
}

/* ---- columns ---- */

const char *nearest_told(struct arena *a, const char *nearest)
{
    return nearest != NULL ? arena_print(a, "; the nearest is '%s'", nearest) : "";
}

static int find_word(const char *const *words, size_t count, const char *word)
{
    for (size_t i = 0; i < count; i++)
        if (text_equal_nocase(words[i], word))
            return (int)i;
    return -1;
}

enum status sheet_read(struct arena *a, const char *path, const char *const *known,
                       size_t known_count, size_t needed, struct sheet *out, struct fault *f)
{
    *out = (struct sheet){.path = path, .known = known, .known_count = known_count};
    if (intake_table(a, path, &out->table, f) != OK)
        return FAULT;
    out->at = arena_alloc(a, known_count * sizeof *out->at);
    for (size_t i = 0; i < known_count; i++)
        out->at[i] = -1;
    for (size_t i = 0; i < out->table.columns; i++) {
        const char *name = out->table.header[i];
        const struct place where = {.file = path, .line = 1, .column = (int)i + 1};
        int at = find_word(known, known_count, name);
        if (at < 0)
            return fault_at(f, &where, "correct the heading", "no column '%s'%s", name,
                            nearest_told(a, text_nearest(name, known, known_count)));
        if (out->at[at] >= 0)
            return fault_at(f, &where, "leave one of them out", "the column '%s' stands twice",
                            name);
        out->at[at] = (int)i;
    }
    for (size_t i = 0; i < needed; i++)
        if (out->at[i] < 0)
            return fault_at(f, &(struct place){.file = path, .line = 1}, "add it",
                            "the column '%s' is missing", known[i]);
    return OK;
}

const char *sheet_cell(const struct sheet *s, size_t row, size_t column)
{
    return s->at[column] < 0 ? "" : s->table.cell[row][s->at[column]];
}

struct place sheet_place(const struct sheet *s, size_t row, size_t column)
{
    return (struct place){s->path, s->table.line[row], s->at[column] + 1};
}

enum status sheet_word(const struct sheet *s, size_t row, size_t column, const char *const *words,
                       size_t count, int *out, struct fault *f)
{
    const char *word = sheet_cell(s, row, column);
    const struct place where = sheet_place(s, row, column);
    *out = find_word(words, count, word);
    if (*out >= 0)
        return OK;
    struct text todo;
    text_init(&todo, 200);
    text_add(&todo, count == 1 ? "write " : "write one of ");
    for (size_t i = 0; i < count; i++)
        text_print(&todo, "%s%s", i == 0 ? "" : ", ", words[i]);
    const char *nearest = text_nearest(word, words, count);
    enum status rc = nearest != NULL
                         ? fault_at(f, &where, todo.at, "no %s '%s'; the nearest is '%s'",
                                    s->known[column], word, nearest)
                         : fault_at(f, &where, todo.at, "no %s '%s'", s->known[column], word);
    text_free(&todo);
    return rc;
}
