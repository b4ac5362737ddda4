/* describe: a plant description in: the built-in catalogue, and the files of a folder. Every
 * problem is kept; none stops the reading. */
#include "intake/embedded.h"
#include "intake/intake.h"
#include "intake/rows.h"

#include <assert.h>
#include <dirent.h>
#include <errno.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

#include "base/poison.h"

/* One file of a description being read. */
struct description {
    struct arena *arena;
    struct plant_draft *draft;
    enum plant_file file;
    const struct plant_layout *layout;
    const char *name;
    bool builtin;
    size_t columns;
    int at[PLANT_COLUMNS_MOST]; /* where each column stands in the file, -1: absent */
};

static void problem(struct description *d, long line, int column, const char *todo,
                    const char *what, ...) PRINTS(5, 6);

static void problem(struct description *d, long line, int column, const char *todo,
                    const char *what, ...)
{
    struct fault f = {.set = false};
    struct text t;
    va_list ap;
    text_init(&t, sizeof f.text);
    va_start(ap, what);
    text_vprint(&t, what, ap);
    va_end(ap);
    if (fault_at(&f, &(struct place){d->name, line, column}, todo, "%s", t.at) != OK)
        plant_draft_problem(d->draft, f.text);
    text_free(&t);
}

/* ---- the header ---- */

/* The column is known, comes for the first time, or is a problem. `hinted` gets the columns that a
 * problem named: they are not told as missing once more. */
static bool read_heading(struct description *d, const struct row *row, size_t i,
                         bool hinted[PLANT_COLUMNS_MOST])
{
    const char *nearest = NULL;
    const char *heading = row->cell[i];
    int column = (int)i + 1;
    int at = plant_column(d->file, heading, &nearest);
    if (at >= 0 && d->at[at] < 0) {
        d->at[at] = (int)i;
        return true;
    }
    if (at >= 0) {
        problem(d, row->line, column, "take one of them out", "the column '%s' stands twice",
                heading);
    } else if (nearest != NULL) {
        problem(d, row->line, column, "correct the heading", "no column '%s'; the nearest is '%s'",
                heading, nearest);
        hinted[plant_column(d->file, nearest, NULL)] = true;
    } else if (*heading == '\0') {
        problem(d, row->line, column, "name it, or take it out", "the column has no heading");
    } else {
        problem(d, row->line, column, "correct the heading, or take the column out",
                "no column '%s'", heading);
    }
    return false;
}

static bool read_header(struct description *d, const struct row *row)
{
    bool hinted[PLANT_COLUMNS_MOST] = {false};
    bool complete = true;
    for (size_t i = 0; i < PLANT_COLUMNS_MOST; i++)
        d->at[i] = -1;
    if (row->problem != REASON_COUNT || row->count > COLUMNS_MAX) {
        problem(d, row->line, 0, "correct the header", "%s", row_problem(row->problem));
        return false;
    }
    d->columns = row->count;
    while (d->columns > 0 && row->cell[d->columns - 1][0] == '\0')
        d->columns--;
    for (size_t i = 0; i < d->columns; i++)
        complete = read_heading(d, row, i, hinted) && complete;
    for (size_t i = 0; i < d->layout->needed; i++) {
        if (d->at[i] >= 0)
            continue;
        complete = false;
        if (!hinted[i])
            problem(d, row->line, 0, "add it", "the column '%s' is missing", d->layout->column[i]);
    }
    return complete;
}

/* ---- rows ---- */

static void read_row(struct description *d, const struct row *row)
{
    if (row->problem != REASON_COUNT) {
        problem(d, row->line, 0, reason_todo[row->problem], "%s", row_problem(row->problem));
        return;
    }
    if (!row_fits(row, d->columns)) {
        problem(d, row->line, 0, reason_todo[REASON_WRONG_COLUMNS],
                "the row has %zu cells, the header %zu", row->count, d->columns);
        return;
    }
    struct plant_row out = {
        .file = d->file, .name = d->name, .line = row->line, .builtin = d->builtin};
    for (size_t i = 0; i < d->layout->columns; i++) {
        if (d->at[i] < 0)
            continue;
        out.cell[i] = row->cell[d->at[i]];
        out.at[i] = d->at[i] + 1;
    }
    plant_draft_add(d->draft, &out);
}

static enum status read_rows(struct description *d, struct lines *lines, struct fault *f)
{
    struct rows rows;
    const struct row *row = NULL;
    char delimiter = ',';
    if (rows_find_delimiter(lines, 1, &delimiter, f) != OK)
        return FAULT;
    rows_open(&rows, d->arena, lines, delimiter);
    enum status rc = OK;
    TRY(rows_header(&rows, 0, &row, f));
    /* Under a header that is wrong every row would be: one problem is enough. */
    if (!read_header(d, row))
        goto done;
    do {
        TRY(rows_next(&rows, &row, f));
        if (row != NULL)
            read_row(d, row);
    } while (row != NULL);
done:
    rows_close(&rows);
    return rc;
}

/* ---- files ---- */

static const struct embedded_file *embedded(const char *name)
{
    for (size_t i = 0; i < intake_files_count; i++)
        if (text_equal(intake_files[i].name, name))
            return &intake_files[i];
    return NULL;
}

void intake_catalogue(struct plant_draft *draft)
{
    const struct embedded_file *file = embedded("parameters.csv");
    struct description d = {.arena = arena_new(),
                            .draft = draft,
                            .file = PLANT_PARAMETERS,
                            .layout = plant_layout(PLANT_PARAMETERS),
                            .name = "built-in parameters.csv",
                            .builtin = true};
    struct lines lines;
    struct fault f = {.set = false};
    assert(file != NULL); /* the build compiled it in */
    enum status rc = lines_open_bytes(&lines, d.arena, d.name, file->bytes, file->length, &f);
    if (rc == OK)
        rc = read_rows(&d, &lines, &f);
    if (rc != OK)
        plant_draft_problem(draft, f.text);
    lines_close(&lines);
    arena_free(d.arena);
}

static void read_file(const char *folder, enum plant_file file, struct plant_draft *draft)
{
    struct description d = {
        .arena = arena_new(), .draft = draft, .file = file, .layout = plant_layout(file)};
    struct fault f = {.set = false};
    struct lines lines = {.path = NULL};
    struct stat info;
    const char *slash = folder[strlen(folder) - 1] == '/' ? "" : "/";
    d.name = arena_print(d.arena, "%s%s%s", folder, slash, d.layout->file);
    bool absent = stat(d.name, &info) != 0 && errno == ENOENT;
    if (absent && d.layout->required)
        problem(&d, 0, 0, "add it; 'weirbook plant --example DIR' writes one to start from",
                "the description has no such file");
    if (!absent &&
        (lines_open(&lines, d.arena, d.name, &f) != OK || read_rows(&d, &lines, &f) != OK))
        plant_draft_problem(draft, f.text);
    lines_close(&lines);
    arena_free(d.arena);
}

/* Without its ".csv", which would make all names look alike. */
static const char *stem(struct arena *a, const char *file)
{
    return arena_bytes(a, file, strlen(file) - 4);
}

/* A file that is nearly one of the description and whose right name is absent: limit.csv. It would
 * be passed over in silence. */
static void check_slips(struct arena *a, const char *folder, const char *const *seen, size_t count,
                        struct plant_draft *draft)
{
    const char *known[PLANT_FILES];
    for (size_t i = 0; i < PLANT_FILES; i++)
        known[i] = stem(a, plant_layout((enum plant_file)i)->file);
    for (size_t i = 0; i < count; i++) {
        const char *nearest = text_nearest(stem(a, seen[i]), known, PLANT_FILES);
        bool there = false;
        if (nearest == NULL)
            continue;
        nearest = arena_print(a, "%s.csv", nearest);
        for (size_t k = 0; k < count; k++)
            there = there || text_equal(seen[k], nearest);
        if (there)
            continue;
        struct fault f = {.set = false};
        struct place where = {.file = folder};
        if (fault_at(&f, &where, "rename it, or take it out of the folder",
                     "'%s' is no file of a description; the nearest is '%s'", seen[i],
                     nearest) != OK)
            plant_draft_problem(draft, f.text);
    }
}

static int by_name(const void *left, const void *right)
{
    return strcmp(*(const char *const *)left, *(const char *const *)right);
}

static bool is_csv(const char *name)
{
    size_t length = strlen(name);
    return length > 4 && name[0] != '.' && text_equal_nocase(name + length - 4, ".csv");
}

enum status intake_plant(struct arena *a, const char *folder, struct plant_draft *draft,
                         struct fault *f)
{
    const struct place where = {.file = folder};
    const char **seen = NULL;
    size_t count = 0;
    size_t room = 0;
    DIR *dir = opendir(folder);
    if (dir == NULL && errno == ENOENT)
        return fault_at(f, &where, "correct the name; 'weirbook plant --example DIR' writes one",
                        "there is no such folder");
    if (dir == NULL && errno == ENOTDIR)
        return fault_at(f, &where, "name the folder that holds plant.csv",
                        "it is a file, not the folder of a description");
    if (dir == NULL)
        return fault_at(f, &where, "see to it that you may read it",
                        "the folder cannot be read (%s)", strerror(errno));
    for (struct dirent *e = readdir(dir); e != NULL; e = readdir(dir)) {
        if (!is_csv(e->d_name))
            continue;
        const char **name = arena_push(a, &seen, &count, &room, sizeof *name);
        *name = arena_text(a, e->d_name);
    }
    closedir(dir);
    if (count > 0)
        qsort(seen, count, sizeof *seen, by_name); /* a folder lists its files in any order */
    check_slips(a, folder, seen, count, draft);
    for (int file = 0; file < PLANT_FILES; file++)
        read_file(folder, (enum plant_file)file, draft);
    return OK;
}
