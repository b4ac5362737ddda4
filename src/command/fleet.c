/* fleet: processes, not threads: a damaged book, or one on a drive that hangs up, takes only its
 * own process with it. Worker w has the books w, w + workers, ...; the parent reads them in the
 * order of the books, so a worker that is ahead waits at its full pipe and memory stays flat. */
#include "command/fleet.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

#include "base/poison.h"

enum { WORKERS_MOST = 64 };

struct worker {
    pid_t pid;
    int pipe; /* what it writes, read here; -1 once it is gone */
};

/* What stands before each book's output in the pipe. */
struct parcel {
    size_t length;
    bool fine, found;
};

/* ---- in a worker ---- */

static bool write_whole(int fd, const void *bytes, size_t length)
{
    for (const char *at = bytes; length > 0;) {
        ssize_t n = write(fd, at, length);

        if (n < 0 && errno == EINTR)
            continue;
        if (n <= 0)
            return false;
        at += n;
        length -= (size_t)n;
    }
    return true;
}

/* One book; false when nobody reads any more. */
static bool work_on(const struct session *parent, const char *book, const void *options,
                    fleet_work *work, int fd)
{
    struct session s = *parent;
    struct fault f = {0};
    char *printed = NULL;
    size_t length = 0;

    s.arena = arena_new();
    s.book = NULL;
    s.book_path = book;
    s.found = false;
    s.out = open_memstream(&printed, &length);
    enum status rc = s.out ? work(&s, options, &f)
                           : fault_at(&f, NULL, "free some memory", "cannot hold its output");
    book_close(s.book);
    if (s.out && fclose(s.out) != 0 && rc == OK)
        rc = fault_at(&f, NULL, "free some memory", "cannot hold its output");
    struct parcel parcel = {
        .length = rc == OK ? length : strlen(f.text), .fine = rc == OK, .found = s.found};
    bool read = write_whole(fd, &parcel, sizeof parcel) &&
                write_whole(fd, rc == OK ? printed : f.text, parcel.length);
    free(printed);
    arena_free(s.arena);
    return read;
}

static _Noreturn void be_worker(const struct session *s, size_t first, size_t step,
                                const void *options, fleet_work *work, int fd)
{
    for (size_t i = first; i < s->book_count; i += step)
        if (!work_on(s, s->books[i], options, work, fd))
            break;
    /* Not exit: what the parent had still to print is the parent's. */
    _exit(0);
}

/* ---- in the parent ---- */

static enum status start(struct session *s, struct worker *workers, size_t count,
                         const void *options, fleet_work *work, struct fault *f)
{
    fflush(s->out);
    for (size_t i = 0; i < count; i++) {
        int ends[2];

        if (pipe(ends) != 0)
            return fault_at(f, NULL, "close other programs", "cannot open a pipe: %s",
                            strerror(errno));
        pid_t pid = fork();
        if (pid == 0) {
            close(ends[0]);
            for (size_t k = 0; k < i; k++)
                close(workers[k].pipe);
            be_worker(s, i, count, options, work, ends[1]);
        }
        close(ends[1]);
        if (pid < 0) {
            close(ends[0]);
            return fault_at(f, NULL, "close other programs", "cannot start a process: %s",
                            strerror(errno));
        }
        workers[i] = (struct worker){.pid = pid, .pipe = ends[0]};
    }
    return OK;
}

static void end(struct worker *workers, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        if (workers[i].pipe < 0)
            continue;
        close(workers[i].pipe);
        while (waitpid(workers[i].pid, NULL, 0) < 0 && errno == EINTR)
            continue;
    }
}

static bool read_whole(int fd, void *bytes, size_t length)
{
    for (char *at = bytes; length > 0;) {
        ssize_t n = read(fd, at, length);

        if (n < 0 && errno == EINTR)
            continue;
        if (n <= 0)
            return false;
        at += n;
        length -= (size_t)n;
    }
    return true;
}

/* The next book's parcel into `held`, which grows and is the caller's to free. */
static bool next_parcel(const struct worker *w, struct parcel *parcel, char **held, size_t *room)
{
    if (!read_whole(w->pipe, parcel, sizeof *parcel))
        return false;
    if (parcel->length >= *room) {
        char *more = realloc(*held, parcel->length + 1);

        if (!more)
            return false;
        *held = more;
        *room = parcel->length + 1;
    }
    if (!read_whole(w->pipe, *held, parcel->length))
        return false;
    (*held)[parcel->length] = '\0';
    return true;
}

static size_t worker_count(const struct session *s)
{
    long processors = sysconf(_SC_NPROCESSORS_ONLN);
    size_t count = processors < 1 ? 1 : (size_t)processors;

    count = count > WORKERS_MOST ? WORKERS_MOST : count;
    return count > s->book_count ? s->book_count : count;
}

enum status fleet_run(struct session *s, const void *options, fleet_work *work,
                      const struct fleet_taker *taker, struct fault *f)
{
    size_t count = worker_count(s);
    struct worker workers[WORKERS_MOST];
    char *held = NULL;
    size_t room = 0;
    size_t missing = 0;

    for (size_t i = 0; i < WORKERS_MOST; i++)
        workers[i] = (struct worker){.pipe = -1};
    enum status rc = start(s, workers, count, options, work, f);
    for (size_t i = 0; i < s->book_count && rc == OK; i++) {
        struct parcel parcel = {0};
        bool came = next_parcel(&workers[i % count], &parcel, &held, &room);

        if (came && parcel.fine) {
            taker->take(taker->context, s->books[i], held, parcel.length);
            s->found = s->found || parcel.found;
            continue;
        }
        missing++;
        taker->missing(taker->context, s->books[i],
                       came ? held : "its process ended before it was read");
    }
    end(workers, count);
    free(held);
    if (rc == OK && missing > 0)
        rc = fault_at(f, NULL, "see the lines above; the others are done",
                      "%zu of %zu books could not be read", missing, s->book_count);
    return rc;
}

/* ---- rows under one heading ---- */

struct rows {
    FILE *out;
    int as;
    bool any;
};

static void take_rows(void *context, const char *book, const char *printed, size_t length)
{
    struct rows *r = context;
    const char *at = printed;

    (void)book;
    if (r->as == AS_CSV) {
        const char *end = memchr(printed, '\n', length);

        if (r->any && end)
            at = end + 1;
        fwrite(at, 1, length - (size_t)(at - printed), r->out);
        r->any = true;
        return;
    }
    /* An array is "[\nobject,\nobject\n]\n", or "[]\n". */
    if (length < 6)
        return;
    fputs(r->any ? "," : "[", r->out);
    fwrite(printed + 1, 1, length - 4, r->out);
    r->any = true;
}

static void tell_missing(void *context, const char *book, const char *why)
{
    (void)context;
    fprintf(stderr, "weirbook: %s: %s\n", book, why);
}

enum status fleet_rows(struct session *s, const void *options, fleet_work *work, int as,
                       struct fault *f)
{
    struct rows rows = {.out = s->out, .as = as};
    const struct fleet_taker taker = {&rows, take_rows, tell_missing};
    enum status rc = fleet_run(s, options, work, &taker, f);

    if (as == AS_JSON)
        fputs(rows.any ? "\n]\n" : "[]\n", s->out);
    return rc;
}

struct table *fleet_table(struct session *s, const struct table *t)
{
    struct column *columns = arena_alloc(s->arena, (t->columns + 1) * sizeof *columns);

    columns[0] = (struct column){.key = "book", .title = "book"};
    memcpy(columns + 1, t->column, t->columns * sizeof *columns);
    struct table *out = table_new(s->arena, t->title, columns, t->columns + 1);
    for (size_t r = 0; r < t->rows; r++) {
        struct cell *cell = table_row(out);

        cell[0] = cell_text(s->book_path);
        memcpy(cell + 1, t->cell + r * t->columns, t->columns * sizeof *cell);
    }
    return out;
}
