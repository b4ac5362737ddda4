/* failing: a set of memory functions and a file system for SQLite that pass everything on, and
 * count. */
#include "book/failing.h"

#include <signal.h>
#include <sqlite3.h>
#include <stddef.h>
#include <string.h>

static struct {
    enum failing kind;
    long left; /* 0: nothing is to fail */
    bool forever, came;
} plan;

void failing_at(enum failing kind, long n, bool forever)
{
    plan.kind = kind;
    plan.left = n;
    plan.forever = forever;
    plan.came = false;
}

bool failing_came(void)
{
    return plan.came;
}

static bool fails(enum failing kind)
{
    bool kills = plan.kind == FAIL_KILL && kind == FAIL_FILES;
    if ((plan.kind != kind && !kills) || plan.left == 0)
        return false;
    if (plan.left > 1) {
        plan.left--;
        return false;
    }
    plan.came = true;
    if (kills)
        raise(SIGKILL);
    if (!plan.forever)
        plan.left = 0;
    return true;
}

/* ---- memory ---- */

static sqlite3_mem_methods memory; /* the usual ones */

static void *get(int size)
{
    return fails(FAIL_MEMORY) ? NULL : memory.xMalloc(size);
}

static void *resize(void *at, int size)
{
    return fails(FAIL_MEMORY) ? NULL : memory.xRealloc(at, size);
}

/* ---- files ---- */

struct file {
    sqlite3_file base;
    sqlite3_file *real;
};

static sqlite3_file *real_of(sqlite3_file *f)
{
    return ((struct file *)f)->real;
}

static int file_close(sqlite3_file *f)
{
    return real_of(f)->pMethods->xClose(real_of(f));
}

static int file_read(sqlite3_file *f, void *to, int length, sqlite3_int64 at)
{
    return fails(FAIL_FILES) ? SQLITE_IOERR_READ
                             : real_of(f)->pMethods->xRead(real_of(f), to, length, at);
}

/* Half of what was to be written is, as on a disk that gives up. */
static int file_write(sqlite3_file *f, const void *from, int length, sqlite3_int64 at)
{
    if (!fails(FAIL_FILES))
        return real_of(f)->pMethods->xWrite(real_of(f), from, length, at);
    (void)real_of(f)->pMethods->xWrite(real_of(f), from, length / 2, at);
    return length % 2048 ? SQLITE_IOERR_WRITE : SQLITE_FULL;
}

static int file_truncate(sqlite3_file *f, sqlite3_int64 size)
{
    return fails(FAIL_FILES) ? SQLITE_IOERR_TRUNCATE
                             : real_of(f)->pMethods->xTruncate(real_of(f), size);
}

static int file_sync(sqlite3_file *f, int flags)
{
    return fails(FAIL_FILES) ? SQLITE_IOERR_FSYNC : real_of(f)->pMethods->xSync(real_of(f), flags);
}

static int file_size(sqlite3_file *f, sqlite3_int64 *out)
{
    return fails(FAIL_FILES) ? SQLITE_IOERR_FSTAT
                             : real_of(f)->pMethods->xFileSize(real_of(f), out);
}

static int file_lock(sqlite3_file *f, int level)
{
    return real_of(f)->pMethods->xLock(real_of(f), level);
}

static int file_unlock(sqlite3_file *f, int level)
{
    return real_of(f)->pMethods->xUnlock(real_of(f), level);
}

static int file_reserved(sqlite3_file *f, int *out)
{
    return real_of(f)->pMethods->xCheckReservedLock(real_of(f), out);
}

static int file_control(sqlite3_file *f, int what, void *with)
{
    return real_of(f)->pMethods->xFileControl(real_of(f), what, with);
}

static int file_sector(sqlite3_file *f)
{
    return real_of(f)->pMethods->xSectorSize(real_of(f));
}

static int file_traits(sqlite3_file *f)
{
    return real_of(f)->pMethods->xDeviceCharacteristics(real_of(f));
}

static const sqlite3_io_methods methods = {
    1,         file_close,  file_read,     file_write,   file_truncate, file_sync,   file_size,
    file_lock, file_unlock, file_reserved, file_control, file_sector,   file_traits, NULL,
    NULL,      NULL,        NULL,          NULL,         NULL};

static sqlite3_vfs *usual;

static int open_file(sqlite3_vfs *vfs, const char *name, sqlite3_file *f, int flags, int *out)
{
    struct file *file = (struct file *)f;
    (void)vfs;
    file->base.pMethods = NULL;
    file->real = (sqlite3_file *)(file + 1);
    if (fails(FAIL_FILES))
        return SQLITE_CANTOPEN;
    int code = usual->xOpen(usual, name, file->real, flags, out);
    if (file->real->pMethods)
        file->base.pMethods = &methods;
    return code;
}

static int delete_file(sqlite3_vfs *vfs, const char *name, int sync)
{
    (void)vfs;
    return fails(FAIL_FILES) ? SQLITE_IOERR_DELETE : usual->xDelete(usual, name, sync);
}

void failing_install(void)
{
    static sqlite3_mem_methods mine;
    static sqlite3_vfs vfs;
    sqlite3_config(SQLITE_CONFIG_GETMALLOC, &memory);
    mine = memory;
    mine.xMalloc = get;
    mine.xRealloc = resize;
    sqlite3_config(SQLITE_CONFIG_MALLOC, &mine);
    sqlite3_initialize();
    usual = sqlite3_vfs_find(NULL);
    vfs = *usual;
    vfs.zName = "failing";
    vfs.szOsFile = (int)sizeof(struct file) + usual->szOsFile;
    vfs.xOpen = open_file;
    vfs.xDelete = delete_file;
    sqlite3_vfs_register(&vfs, 1);
}
