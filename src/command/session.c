/* The frame round every command: finds the command, reads its options, opens and closes its book,
 * prints what it made, and turns how it ended into the exit status. */
#include "command/session.h"

#include <dirent.h>
#include <poll.h>
#include <pwd.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <sys/ioctl.h>
#include <unistd.h>

#include "base/poison.h"

enum {
    EXIT_DONE = 0,
    EXIT_FAILED = 1,
    EXIT_USAGE = 2,
    EXIT_FOUND = 3,
    WIDTH_MOST = 100,
    WIDTH_LEAST = 80
};

/* ---- the book ---- */

/* The only *.book of the current folder. */
static enum status find_book(struct session *s, struct fault *f)
{
    DIR *folder = opendir(".");
    const char *found = NULL;
    size_t count = 0;
    for (struct dirent *e; folder && (e = readdir(folder));) {
        size_t length = strlen(e->d_name);
        if (length > 5 && strcmp(e->d_name + length - 5, ".book") == 0) {
            count++;
            found = arena_text(s->arena, e->d_name);
        }
    }
    if (folder)
        closedir(folder);
    if (count == 1) {
        s->book_path = found;
        return OK;
    }
    return fault_usage(f, "name one with -b BOOK, or make one with: weirbook new BOOK DIR",
                       count ? "this folder holds several books" : "this folder holds no book");
}

static enum status find_path(struct session *s, struct fault *f)
{
    if (!s->book_path) {
        const char *said = getenv("WEIRBOOK");
        if (said && *said)
            s->book_path = said;
    }
    return s->book_path ? OK : find_book(s, f);
}

enum status session_may_write(const struct session *s, struct fault *f)
{
    if (!s->read_only)
        return OK;
    return fault_at(f, NULL, "leave --read-only out to change a book",
                    "%s would write, and --read-only was asked for", s->command->name);
}

/* The book as it stood at the end of the day that was asked for. Moments in it are UTC. */
static enum status step_back(struct session *s, struct fault *f)
{
    char day[11];
    int64_t batch = 0;
    bool odd = false;
    day_write(s->as_of, day);
    if (book_batch_at(s->book, arena_print(s->arena, "%sT23:59:59Z", day), &batch, &odd, f) != OK)
        return FAULT;
    if (batch == 0)
        return fault_at(f, NULL, "weirbook history --batches lists what was done when",
                        "the book is younger than %s", day);
    if (odd)
        fprintf(stderr,
                "weirbook: the clock once ran backwards: a batch after batch %lld claims to be of "
                "%s or before; it does not count here\n",
                (long long)batch, day);
    return book_as_of(s->book, batch, f);
}

void session_name(struct session *s, const char *path)
{
    const char **book =
        arena_push(s->arena, &s->books, &s->book_count, &s->book_room, sizeof *book);
    *book = path;
    s->book_path = path;
}

enum status session_open(struct session *s, enum book_mode mode, struct fault *f)
{
    if (mode == BOOK_WRITE && session_may_write(s, f) != OK)
        return FAULT;
    if (find_path(s, f) != OK || book_open(&s->book, s->book_path, mode, f) != OK)
        return FAULT;
    if (book_warning(s->book))
        fprintf(stderr, "weirbook: %s\n", book_warning(s->book));
    if (book_migrated(s->book))
        fprintf(stderr,
                "weirbook: the book was brought to format %d; as it was before, it is kept in %s\n",
                book_format(), book_migrated(s->book));
    return s->as_of == DAY_NONE ? OK : step_back(s, f);
}

enum status session_book(struct session *s, enum book_mode mode, struct plant_draft **draft,
                         struct plant **plant, struct fault *f)
{
    struct plant_draft *own = NULL;
    if (session_open(s, mode, f) != OK)
        return FAULT;
    return book_plant(s->book, s->arena, draft ? draft : &own, plant, f);
}

enum status session_author(struct session *s, const char *by, struct author *out, struct fault *f)
{
    const char *who = by;
    if (!who || !*who) {
        const struct passwd *login = getpwuid(getuid());
        who = login && login->pw_name ? login->pw_name : "unknown";
    }
    for (const char *c = who; *c; c++)
        if ((unsigned char)*c < 0x20 || *c == 0x7f)
            return fault_usage(f, "write it in one line", "a name cannot hold control characters");
    char stamp[21];
    clock_stamp(stamp);
    *out = (struct author){.who = arena_text(s->arena, who), .when = arena_text(s->arena, stamp)};
    return OK;
}

/* ---- what people say, for the record ---- */

enum status session_record(const char *option, const char *text, struct fault *f)
{
    enum { BYTES_MOST = 2000 };
    size_t length = strlen(text);
    if (text[strspn(text, " ")] == '\0')
        return fault_usage(f, "say it in a few words", "%s is empty", option);
    for (const char *c = text; *c; c++)
        if ((unsigned char)*c < 0x20 || *c == 0x7f)
            return fault_usage(f, "write it in one line",
                               "%s cannot hold line breaks or control characters", option);
    if (!text_is_utf8(text, length))
        return fault_usage(f, "write it in UTF-8", "%s is no readable text", option);
    if (length > BYTES_MOST)
        return fault_usage(f, "shorten it to 2000", "%s has %zu bytes", option, length);
    return OK;
}

enum status session_number(const char *what, const char *lister, const char *text, int64_t *out,
                           struct fault *f)
{
    struct decimal d;
    if (decimal_parse(text, strlen(text), &d) != DECIMAL_FINE || d.scale != 0 || d.coefficient < 1)
        return fault_usage(f, lister, "'%s' is no number of a %s", text, what);
    *out = d.coefficient;
    return OK;
}

static enum status unknown(const char *what, const char *id, const char *nearest, struct fault *f)
{
    char todo[200] = "weirbook plant --out DIR writes the description that lists them";
    if (nearest)
        snprintf(todo, sizeof todo, "the nearest is '%s'", nearest);
    return fault_usage(f, todo, "no %s '%s'", what, id);
}

enum status session_point(const struct plant *plant, const char *id, int *out, struct fault *f)
{
    *out = plant_point(plant, id);
    return *out >= 0 ? OK : unknown("point", id, plant_nearest_point(plant, id), f);
}

enum status session_parameter(const struct plant *plant, const char *id, int *out, struct fault *f)
{
    *out = plant_parameter(plant, id);
    return *out >= 0 ? OK : unknown("parameter", id, plant_nearest_parameter(plant, id), f);
}

enum status session_frame(struct session *s, const struct plant *plant,
                          const struct frame_span *spans, size_t count, day_t first, day_t last,
                          struct frame **out, struct fault *f)
{
    for (size_t i = 0; i < count; i++) {
        first = spans[i].first < first ? spans[i].first : first;
        last = spans[i].last > last ? spans[i].last : last;
    }
    struct frame *frame = frame_new(s->arena, plant, first, last);
    if (book_fill(s->book, s->arena, plant, spans, count, frame, f) != OK)
        return FAULT;
    frame_close(frame);
    *out = frame;
    return OK;
}

enum status session_frame_all(struct session *s, const struct plant *plant, day_t first, day_t last,
                              struct frame **out, struct fault *f)
{
    struct frame_span *spans = NULL;
    size_t count = 0;
    if (book_spans(s->book, s->arena, plant, first, last, &spans, &count, f) != OK)
        return FAULT;
    return session_frame(s, plant, spans, count, first, last, out, f);
}

/* ---- printing ---- */

static void print_page(struct session *s, const struct page *page, const struct text_style *style)
{
    if (s->as_of != DAY_NONE) {
        char day[11];
        struct page *before = page_new(s->arena);
        day_write(s->as_of, day);
        page_line(before, FLAG_WATCH, "As the book stood at the end of %s (UTC).", day);
        page_space(before);
        write_text(s->out, before, style);
    }
    write_text(s->out, page, style);
}

void session_print(struct session *s, int as, const struct page *page, const struct table *table)
{
    const struct text_style style = {.width = s->width, .colour = s->colour};
    if (as == AS_CSV)
        write_csv(s->out, table);
    else if (as == AS_JSON)
        write_json(s->out, table);
    else
        print_page(s, page, &style);
}

static void look_at_terminal(struct session *s)
{
    s->width = WIDTH_MOST;
    if (!isatty(STDOUT_FILENO))
        return;
    struct winsize size = {0};
    if (ioctl(STDOUT_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0 && size.ws_col < WIDTH_MOST)
        s->width = size.ws_col < WIDTH_LEAST ? WIDTH_LEAST : size.ws_col;
    const char *plain = getenv("NO_COLOR");
    const char *terminal = getenv("TERM");
    s->colour = !(plain && *plain) && terminal && strcmp(terminal, "dumb") != 0;
}

/* A reader that has seen enough, such as head, is no failure. */
static bool reader_is_gone(void)
{
    struct pollfd out = {.fd = STDOUT_FILENO, .events = POLLOUT};
    return poll(&out, 1, 0) == 1 && (out.revents & POLLERR) != 0;
}

/* A full device must not lose what was printed without a word. */
static enum status close_output(struct session *s, struct fault *f)
{
    bool bad = fflush(s->out) != 0 || ferror(s->out) != 0;
    bool gone = bad && reader_is_gone();
    bad = fclose(s->out) != 0 || bad;
    if (bad && !gone)
        return fault_at(f, NULL, "free some room, or print to another place",
                        "could not write all of the output");
    return OK;
}

static int exit_status(const struct session *s, const struct fault *f, enum status rc)
{
    if (rc != OK) {
        fprintf(stderr, "weirbook: %s\n", f->text);
        return f->kind == FAULT_USAGE ? EXIT_USAGE : EXIT_FAILED;
    }
    return s->found ? EXIT_FOUND : EXIT_DONE;
}

/* ---- from words to a command ---- */

static void print_version(struct session *s)
{
    fprintf(s->out, "weirbook %s (book format %d, SQLite %s)\n", WEIRBOOK_VERSION, book_format(),
            book_sqlite_version());
}

/* Reads -b BOOK, --read-only, --help and --version, which may stand before the command. *next is
 * the command's index. */
static enum status read_globals(struct session *s, int argc, char **argv, int *next, bool *done,
                                struct fault *f)
{
    int i = 1;
    for (; i < argc && argv[i][0] == '-' && argv[i][1]; i++) {
        const char *word = argv[i];
        if (strcmp(word, "--version") == 0 || strcmp(word, "-V") == 0) {
            print_version(s);
            *done = true;
        } else if (strcmp(word, "--help") == 0 || strcmp(word, "-h") == 0) {
            help_program(s);
            *done = true;
        } else if ((strcmp(word, "-b") == 0 || strcmp(word, "--book") == 0) && i + 1 < argc) {
            session_name(s, argv[++i]);
        } else if (strcmp(word, "--read-only") == 0) {
            s->read_only = true;
        } else if (strncmp(word, "--book=", 7) == 0) {
            session_name(s, word + 7);
        } else if (strncmp(word, "-b", 2) == 0 && word[2]) {
            session_name(s, word + 2);
        } else {
            return fault_usage(f, "see: weirbook --help", "cannot use '%s' before a command", word);
        }
        if (*done)
            return OK;
    }
    *next = i;
    return OK;
}

static enum status run_command(struct session *s, int argc, char **argv, struct fault *f)
{
    int next = 1;
    bool done = false;
    if (read_globals(s, argc, argv, &next, &done, f) != OK || done)
        return done ? OK : FAULT;
    if (next >= argc) {
        help_program(s);
        return OK;
    }
    s->command = command_find(s, argv[next]);
    if (!s->command)
        return command_unknown(s, argv[next], f);
    void *options = arena_alloc(s->arena, s->command->options_size + 1);
    bool help = false;
    if (options_read(s, s->command, argc - next, argv + next, options, &help, f) != OK)
        return FAULT;
    if (help) {
        help_command(s, s->command);
        return OK;
    }
    if (s->book_count > 1 && !s->command->fleet)
        return fault_usage(f, "name one book", "%s works on one book at a time", s->command->name);
    return s->command->run(s, options, f);
}

int command_main(const struct command *const *table, size_t count, int argc, char **argv)
{
    /* With these ignored a broken pipe or a size limit comes back as an error and the book stays
     * whole. */
    signal(SIGPIPE, SIG_IGN);
    signal(SIGXFSZ, SIG_IGN);
    struct session s = {
        .arena = arena_new(), .table = table, .commands = count, .out = stdout, .as_of = DAY_NONE};
    struct fault f = {0};
    look_at_terminal(&s);
    enum status rc = run_command(&s, argc, argv, &f);
    book_close(s.book);
    if (close_output(&s, &f) != OK)
        rc = FAULT;
    int status = exit_status(&s, &f, rc);
    arena_free(s.arena);
    return status;
}
