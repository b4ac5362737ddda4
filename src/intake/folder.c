/* folder: a description out: files written beside their place, synced, then renamed into it. */
#include "intake/folder.h"
#include "intake/embedded.h"
#include "intake/intake.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>

#include "base/poison.h"

static const char starter[] = "starter/";

static char *path_in(struct arena *a, const char *folder, const char *file)
{
    size_t length = strlen(folder);
    const char *slash = length > 0 && folder[length - 1] == '/' ? "" : "/";
    return arena_print(a, "%s%s%s", folder, slash, file);
}

enum status folder_make(const char *folder, struct fault *f)
{
    struct stat info;
    const struct place where = {.file = folder};
    if (mkdir(folder, 0777) == 0)
        return OK;
    if (errno == EEXIST && stat(folder, &info) == 0 && S_ISDIR(info.st_mode))
        return OK;
    if (errno == EEXIST)
        return fault_at(f, &where, "name a folder", "it is a file, not a folder");
    return fault_at(f, &where, "choose a place that can be written",
                    "the folder cannot be made (%s)", strerror(errno));
}

bool folder_has(const char *folder, const char *file)
{
    struct stat info;
    struct arena *a = arena_new();
    bool has = lstat(path_in(a, folder, file), &info) == 0;
    arena_free(a);
    return has;
}

enum status folder_free(const char *folder, const char *file, struct fault *f)
{
    if (!folder_has(folder, file))
        return OK;
    struct arena *a = arena_new();
    enum status rc = fault_at(f, &(struct place){.file = path_in(a, folder, file)},
                              "choose another folder", "the file is there already");
    arena_free(a);
    return rc;
}

enum status folder_write(const char *folder, const char *file, const void *bytes, size_t length,
                         struct fault *f)
{
    struct arena *a = arena_new();
    struct beside b;
    enum status rc = OK;
    TRY(beside_open(a, path_in(a, folder, file), &b, f));
    TRY(beside_add(&b, bytes, length, f));
    TRY(beside_keep(&b, f));
done:
    beside_drop(&b);
    arena_free(a);
    return rc;
}

/* ---- the starter description ---- */

static const char *starter_name(size_t i)
{
    const char *name = intake_files[i].name;
    size_t length = sizeof starter - 1;
    return strncmp(name, starter, length) == 0 ? name + length : NULL;
}

enum status intake_example(const char *folder, struct fault *f)
{
    if (folder_make(folder, f) != OK)
        return FAULT;
    for (size_t i = 0; i < intake_files_count; i++)
        if (starter_name(i) != NULL && folder_free(folder, starter_name(i), f) != OK)
            return FAULT;
    for (size_t i = 0; i < intake_files_count; i++)
        if (starter_name(i) != NULL && folder_write(folder, starter_name(i), intake_files[i].bytes,
                                                    intake_files[i].length, f) != OK)
            return FAULT;
    return OK;
}

/* ---- a description's rows ---- */

static size_t write_rows(struct text *t, const struct plant_draft *draft, enum plant_file file)
{
    const struct plant_layout *layout = plant_layout(file);
    size_t count = 0;
    for (size_t c = 0; c < layout->columns; c++)
        text_print(t, "%s%s", c == 0 ? "" : ",", layout->column[c]);
    text_add_char(t, '\n');
    for (size_t i = 0; i < plant_draft_rows(draft); i++) {
        const struct plant_row *row = plant_draft_row(draft, i);
        if (row->builtin || row->file != file)
            continue;
        for (size_t c = 0; c < layout->columns; c++) {
            if (c > 0)
                text_add_char(t, ',');
            csv_cell(t, row->cell[c] != NULL ? row->cell[c] : "", true);
        }
        text_add_char(t, '\n');
        count++;
    }
    return count;
}

static enum status write_file(const char *folder, const struct plant_draft *draft,
                              enum plant_file file, struct fault *f)
{
    const struct plant_layout *layout = plant_layout(file);
    struct text t;
    enum status rc = OK;
    text_init(&t, SIZE_MAX);
    size_t count = write_rows(&t, draft, file);
    /* An old file that the description has no rows for would be read again: it is emptied. */
    if (count > 0 || layout->required || folder_has(folder, layout->file))
        rc = folder_write(folder, layout->file, t.at, t.length, f);
    text_free(&t);
    return rc;
}

enum status intake_plant_write(const char *folder, const struct plant_draft *draft, bool replace,
                               struct fault *f)
{
    if (folder_make(folder, f) != OK)
        return FAULT;
    for (int file = 0; file < PLANT_FILES && !replace; file++)
        if (folder_free(folder, plant_layout((enum plant_file)file)->file, f) != OK)
            return FAULT;
    for (int file = 0; file < PLANT_FILES; file++)
        if (write_file(folder, draft, (enum plant_file)file, f) != OK)
            return FAULT;
    return OK;
}
