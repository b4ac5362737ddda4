/* beside: files that people keep are written under a temporary name and renamed once whole. */
#include "base/base.h"

#include <errno.h>
#include <fcntl.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/poison.h"

enum { NAMES_TRIED = 100 };

enum status beside_fault(const struct beside *b, int error, struct fault *f)
{
    const struct place where = {.file = b->path};
    const char *todo = "choose a folder that can be written";
    if (error == ENOSPC || error == EDQUOT || error == EFBIG)
        todo = "free some space, then write it again";
    return fault_at(f, &where, todo, "cannot write the file: %s", strerror(error));
}

enum status beside_open(struct arena *a, const char *path, struct beside *out, struct fault *f)
{
    *out = (struct beside){.path = path, .fd = -1};
    struct stat there;
    if (stat(path, &there) == 0 && !S_ISREG(there.st_mode)) {
        const struct place where = {.file = path};
        return fault_at(f, &where, "choose another name", "there is something other than a file");
    }
    /* A name left behind by a run that was killed is passed over, never taken. */
    int error = EEXIST;
    for (int n = 1; n <= NAMES_TRIED && error == EEXIST; n++) {
        out->temporary = arena_print(a, "%s.%d.part", path, n);
        out->fd = open(out->temporary, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
        error = out->fd < 0 ? errno : 0;
    }
    if (out->fd >= 0)
        return OK;
    out->temporary = NULL;
    return beside_fault(out, error, f);
}

enum status beside_add(const struct beside *b, const void *bytes, size_t length, struct fault *f)
{
    const char *from = bytes;
    while (length > 0) {
        ssize_t put = write(b->fd, from, length);
        if (put < 0 && errno == EINTR)
            continue;
        if (put < 0)
            return beside_fault(b, errno, f);
        from += put;
        length -= (size_t)put;
    }
    return OK;
}

void beside_drop(struct beside *b)
{
    if (b->fd >= 0)
        close(b->fd);
    b->fd = -1;
    if (b->temporary != NULL)
        unlink(b->temporary);
    b->temporary = NULL;
}

/* Syncs the folder, so that the new name outlives a power cut. A file system that cannot do it is
 * no reason to say the writing failed: it stands under its name. */
static void sync_folder(const char *path)
{
    const char *slash = strrchr(path, '/');
    char *folder = slash == NULL ? strdup(".") : strndup(path, (size_t)(slash - path) + 1);
    if (folder == NULL)
        return;
    int fd = open(folder, O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    if (fd >= 0) {
        (void)fsync(fd);
        close(fd);
    }
    free(folder);
}

enum status beside_keep(struct beside *b, struct fault *f)
{
    int error = fsync(b->fd) == 0 ? 0 : errno;
    if (close(b->fd) != 0 && error == 0)
        error = errno;
    b->fd = -1;
    if (error == 0 && rename(b->temporary, b->path) != 0)
        error = errno;
    if (error != 0) {
        beside_drop(b);
        return beside_fault(b, error, f);
    }
    b->temporary = NULL;
    sync_folder(b->path);
    return OK;
}

enum status beside_write(const char *path, void (*write)(FILE *out, const void *context),
                         const void *context, struct fault *f)
{
    enum status rc = OK;
    struct arena *a = arena_new();
    struct beside b;
    FILE *out = NULL;
    TRY(beside_open(a, path, &b, f));
    int copy = dup(b.fd);
    out = copy < 0 ? NULL : fdopen(copy, "w");
    if (out == NULL) {
        rc = beside_fault(&b, errno, f);
        if (copy >= 0)
            close(copy);
        goto done;
    }
    errno = 0;
    write(out, context);
    /* The stream remembers that a write failed, though not always why. */
    bool failed = ferror(out) != 0;
    int error = errno;
    if (fclose(out) != 0) {
        failed = true;
        error = errno;
    }
    if (failed) {
        rc = beside_fault(&b, error != 0 ? error : EIO, f);
        goto done;
    }
    TRY(beside_keep(&b, f));
done:
    beside_drop(&b);
    arena_free(a);
    return rc;
}
