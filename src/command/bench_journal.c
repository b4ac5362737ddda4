/* The unfinished sheet: a raw values file beside the book that grows by one row for each entry,
 * each on the disk before the next is asked, so that no ^C, hang-up or power cut takes any. */
#include "command/bench.h"

#include "intake/intake.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/poison.h"

enum { NAMES_TRIED = 1000, ROW_MOST = 1 << 20 };

static enum status fault_of(const struct journal *j, int error, struct fault *f)
{
    const struct beside b = {.path = j->path, .fd = -1};
    return beside_fault(&b, error, f);
}

/* Two conversations over one sheet would mix their rows. A file system without locks is no reason
 * to refuse. */
static enum status lock(const struct journal *j, struct fault *f)
{
    const struct place where = {.file = j->path};
    if (flock(j->fd, LOCK_EX | LOCK_NB) != 0 && errno == EWOULDBLOCK)
        return fault_at(f, &where, "finish it there, or name another sheet",
                        "somebody is at this sheet now");
    return OK;
}

/* A row that a power cut left without its end was never taken. */
static enum status cut_tail(struct journal *j, struct fault *f)
{
    off_t end = lseek(j->fd, 0, SEEK_END), whole = end;
    char byte = '\0';
    while (whole > 0 && pread(j->fd, &byte, 1, whole - 1) == 1 && byte != '\n')
        whole--;
    if (end < 0 || (whole < end && (ftruncate(j->fd, whole) != 0 || fsync(j->fd) != 0)))
        return fault_of(j, errno, f);
    return OK;
}

enum status journal_open(struct journal *j, struct arena *a, const char *book, const char *sheet,
                         struct fault *f)
{
    struct stat there;
    *j = (struct journal){.arena = a, .fd = -1};
    j->path = arena_print(a, "%s-bench-%s.csv", book, sheet);
    if (lstat(j->path, &there) != 0)
        return errno == ENOENT ? OK : fault_of(j, errno, f);
    const struct place where = {.file = j->path};
    if (!S_ISREG(there.st_mode))
        return fault_at(f, &where, "move it away", "the unfinished sheet is no plain file");
    j->fd = open(j->path, O_RDWR | O_APPEND | O_CLOEXEC | O_NOFOLLOW);
    if (j->fd < 0)
        return fault_of(j, errno, f);
    if (lock(j, f) != OK || cut_tail(j, f) != OK)
        return FAULT;
    return OK;
}

/* Whether anything stands below the heading. */
static bool has_rows(const struct journal *j)
{
    char byte = '\0';
    off_t at = 0;
    int lines = 0;
    while (lines < 2 && pread(j->fd, &byte, 1, at++) == 1)
        lines += byte == '\n';
    return lines == 2;
}

enum status journal_read(struct journal *j, struct raw_value **out, size_t *count, struct fault *f)
{
    struct intake_summary summary = {0};
    *count = 0;
    if (j->fd < 0 || !has_rows(j))
        return OK;
    if (intake_raw(j->arena, j->path, out, count, &summary, f) != OK)
        return FAULT;
    j->rows = *count;
    return OK;
}

void journal_when(const struct journal *j, char out[17])
{
    struct stat there = {0};
    clock_wall(j->fd >= 0 && fstat(j->fd, &there) == 0 ? (int64_t)there.st_mtime : -1, out);
}

static void add_heading(struct text *t)
{
    for (size_t i = 0; i < RAW_COLUMNS; i++)
        text_print(t, "%s%s", i ? "," : "", raw_columns[i]);
    text_add_char(t, '\n');
}

static void add_row(struct text *t, const struct raw_value *row)
{
    for (size_t i = 0; i < RAW_COLUMNS; i++) {
        if (i)
            text_add_char(t, ',');
        csv_cell(t, row->cell[i], true);
    }
    text_add_char(t, '\n');
}

static enum status write_all(const struct journal *j, const struct text *t, struct fault *f)
{
    off_t before = lseek(j->fd, 0, SEEK_END);
    const struct beside b = {.path = j->path, .fd = j->fd};
    if (before >= 0 && beside_add(&b, t->at, t->length, f) == OK) {
        if (fsync(j->fd) == 0)
            return OK;
        fault_of(j, errno, f);
    }
    /* Half a row must not stand before the next one. */
    if (before >= 0 && ftruncate(j->fd, before) != 0)
        return FAULT;
    return fault_of(j, EIO, f);
}

static void sync_folder(const struct journal *j)
{
    const char *slash = strrchr(j->path, '/');
    const char *folder =
        slash ? arena_bytes(j->arena, j->path, (size_t)(slash - j->path) + 1) : ".";
    int fd = open(folder, O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    if (fd < 0)
        return;
    (void)fsync(fd);
    close(fd);
}

static enum status create(struct journal *j, struct fault *f)
{
    const struct place where = {.file = j->path};
    j->fd = open(j->path, O_RDWR | O_APPEND | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
    if (j->fd < 0 && errno == EEXIST)
        return fault_at(f, &where, "finish it there, or name another sheet",
                        "somebody began this sheet meanwhile");
    if (j->fd < 0)
        return fault_of(j, errno, f);
    sync_folder(j);
    return lock(j, f);
}

enum status journal_add(struct journal *j, const struct raw_value *row, struct fault *f)
{
    struct text t;
    struct stat there;
    if (j->fd < 0 && create(j, f) != OK)
        return FAULT;
    text_init(&t, ROW_MOST);
    if (fstat(j->fd, &there) == 0 && there.st_size == 0)
        add_heading(&t);
    add_row(&t, row);
    enum status rc = write_all(j, &t, f);
    text_free(&t);
    j->rows += rc == OK;
    return rc;
}

enum status journal_rewrite(struct journal *j, const struct raw_value *rows, size_t count,
                            struct fault *f)
{
    enum status rc = OK;
    struct beside b = {.fd = -1};
    struct text t;
    if (count == 0) {
        j->rows = 0;
        return journal_remove(j, f);
    }
    text_init(&t, (size_t)ROW_MOST * 64);
    add_heading(&t);
    for (size_t i = 0; i < count; i++)
        add_row(&t, &rows[i]);
    TRY(beside_open(j->arena, j->path, &b, f));
    TRY(beside_add(&b, t.at, t.length, f));
    TRY(beside_keep(&b, f));
    journal_close(j);
    j->rows = count;
    j->fd = open(j->path, O_RDWR | O_APPEND | O_CLOEXEC | O_NOFOLLOW);
    if (j->fd < 0)
        rc = fault_of(j, errno, f);
    else
        rc = lock(j, f);
done:
    beside_drop(&b);
    text_free(&t);
    return rc;
}

enum status journal_discard(struct journal *j, const char **name, struct fault *f)
{
    size_t stem = strlen(j->path) - strlen(".csv");
    int error = EEXIST;
    for (int n = 1; n <= NAMES_TRIED && error == EEXIST; n++) {
        *name = arena_print(j->arena, "%.*s-discarded-%d.csv", (int)stem, j->path, n);
        /* A link never takes a name that is there; a rename would. */
        error = link(j->path, *name) == 0 ? 0 : errno;
    }
    if (error != 0 || unlink(j->path) != 0)
        return fault_of(j, error ? error : errno, f);
    sync_folder(j);
    journal_close(j);
    j->rows = 0;
    return OK;
}

enum status journal_remove(struct journal *j, struct fault *f)
{
    if (j->fd < 0)
        return OK;
    if (unlink(j->path) != 0)
        return fault_of(j, errno, f);
    sync_folder(j);
    journal_close(j);
    return OK;
}

void journal_close(struct journal *j)
{
    if (j->fd >= 0)
        close(j->fd);
    j->fd = -1;
}
