/* load: readings files into the book, each file whole or not at all. */
#include "command/long.h"
#include "command/session.h"

#include "intake/intake.h"

#include <errno.h>
#include <string.h>
#include <unistd.h>

#include "base/poison.h"

struct load_options {
    const char *map, *dialect, *set_aside, *reason, *by;
    bool dry_run, revise;
    int as;
};

static const struct option_spec options[] = {
    {"map", OPTION_FILE, offsetof(struct load_options, map), "FILE",
     "which column of a wide file is which point and parameter", false},
    {"dialect", OPTION_FILE, offsetof(struct load_options, dialect), "FILE",
     "how the file is laid out: delimiter, decimal mark, date order", false},
    {"dry-run", OPTION_FLAG, offsetof(struct load_options, dry_run), NULL,
     "change nothing; print the readings as long CSV", false},
    {"set-aside", OPTION_FILE, offsetof(struct load_options, set_aside), "FILE",
     "write the rows not accepted there, to be corrected and loaded", false},
    {"revise", OPTION_FLAG, offsetof(struct load_options, revise), NULL,
     "values that contradict the book become revisions", false},
    {"reason", OPTION_TEXT, offsetof(struct load_options, reason), "TEXT", "why, with --revise",
     false},
    {"by", OPTION_TEXT, offsetof(struct load_options, by), "NAME",
     "who loads, for the record (default: the login)", false},
    AS_OPTION(struct load_options),
};

static const struct example examples[] = {
    {"weirbook load operations-2025.csv laboratory-2025.csv", "loads two files"},
    {"weirbook load --map laboratory.map.csv laboratory.csv",
     "loads a wide file whose headings a column map explains"},
    {"weirbook load --dry-run march.csv", "shows what a load would do; the book stays as it is"},
    {"weirbook load --set-aside to-correct.csv march.csv",
     "also writes the rows not accepted, with reasons"},
    {"weirbook load --revise --reason 'laboratory correction' corrected.csv",
     "replaces values; the old ones are kept"},
};

enum { PLACES_SHOWN = 3 };

/* What a load knows of the rows it set aside: how many of each kind, and the first places. */
struct asides {
    long count[REASON_COUNT];
    const char *place[REASON_COUNT][PLACES_SHOWN];
};

struct load {
    struct session *session;
    const struct load_options *options;
    const struct plant *plant;
    const char *file;
    struct asides asides;
    struct beside beside; /* the file of --set-aside */
    FILE *aside_out;      /* and the stream into it; NULL without */
    struct text line;
    struct book_counts counts;
};

/* ---- where rows go ---- */

static enum status set_aside(struct load *l, const struct row_text *row, enum reason reason,
                             const char *explanation, struct fault *f)
{
    struct asides *a = &l->asides;
    if (a->count[reason] < PLACES_SHOWN) {
        const char *place = row->column ? arena_print(l->session->arena, "%s:%ld:%d: %s", l->file,
                                                      row->line, row->column, explanation)
                                        : arena_print(l->session->arena, "%s:%ld: %s", l->file,
                                                      row->line, explanation);
        a->place[reason][a->count[reason]] = place;
    }
    a->count[reason]++;
    l->counts.aside++;
    if (l->aside_out) {
        text_clear(&l->line);
        long_aside(&l->line, row, reason_words[reason], explanation);
        fwrite(l->line.at, 1, l->line.length, l->aside_out);
    }
    return book_load_aside(l->session->book, row, reason, explanation, f);
}

static enum status take_aside(void *context, const struct row_text *row, enum reason reason,
                              const char *explanation, struct fault *f)
{
    return set_aside(context, row, reason, explanation, f);
}

static enum status contradiction(struct load *l, const struct reading *r,
                                 const struct row_text *row, const struct book_clash *clash,
                                 struct fault *f)
{
    char told[512];
    snprintf(told, sizeof told, "the book holds '%s' %s (%s), this row says '%s' %s", clash->text,
             clash->unit, long_place(l->session->arena, clash->file, clash->line), r->text,
             unit_at(r->unit)->name);
    return set_aside(l, row, REASON_CONTRADICTS, told, f);
}

static enum status take_reading(void *context, const struct reading *r, const struct row_text *row,
                                struct fault *f)
{
    struct load *l = context;
    enum book_outcome outcome = BOOK_ACCEPTED;
    struct book_clash clash = {0};
    if (book_load_reading(l->session->book, r, &outcome, &clash, f) != OK)
        return FAULT;
    if (outcome == BOOK_CONTRADICTS)
        return contradiction(l, r, row, &clash, f);
    l->counts.accepted += outcome == BOOK_ACCEPTED;
    l->counts.present += outcome == BOOK_PRESENT;
    l->counts.revised += outcome == BOOK_REVISED;
    if (l->options->dry_run) {
        text_clear(&l->line);
        long_reading(&l->line, l->plant, r);
        fwrite(l->line.at, 1, l->line.length, l->session->out);
    }
    return OK;
}

/* ---- progress: on a terminal, after a second ---- */

struct progress {
    double began;
    bool shown;
};

static void show_progress(void *context, const char *file, int percent)
{
    struct progress *p = context;
    if (clock_seconds() - p->began < 1)
        return;
    fprintf(stderr, "\rloading %s: %d %%", file, percent);
    fflush(stderr);
    p->shown = true;
}

static void end_progress(const struct progress *p)
{
    if (p->shown)
        fputs("\r\033[K", stderr);
}

/* ---- one file ---- */

/* A file whose every row is in the book already, or was set aside before, changes nothing. */
static bool changes_nothing(const struct load *l, bool known)
{
    return known && l->counts.accepted == 0 && l->counts.revised == 0;
}

static enum status read_into_book(struct load *l, struct intake_summary *summary, struct fault *f)
{
    struct progress progress = {.began = clock_seconds()};
    struct intake_options how = {.map = l->options->map,
                                 .dialect = l->options->dialect,
                                 .today = clock_today(),
                                 .progress_context = &progress};
    if (isatty(STDERR_FILENO))
        how.progress = show_progress;
    const struct intake_sink sink = {.context = l, .reading = take_reading, .aside = take_aside};
    enum status rc = intake_readings(l->session->arena, l->file, l->plant, &how, &sink, summary, f);
    end_progress(&progress);
    return rc;
}

static enum status load_known(struct load *l, bool *known, const char **told, struct fault *f)
{
    struct session *s = l->session;
    int64_t bytes = 0, batch = 0;
    uint8_t digest[DIGEST_BYTES];
    const char *file = "", *when = "";
    struct book_counts before = {0};
    if (intake_identify(s->arena, l->file, &bytes, digest, f) != OK ||
        book_known(s->book, s->arena, digest, known, &batch, &file, &when, &before, f) != OK)
        return FAULT;
    if (!*known)
        return OK;
    *told = arena_print(s->arena,
                        "the same file was loaded on %.10s as %s (batch %lld); nothing was changed",
                        when, file, (long long)batch);
    if (before.aside == 0 && !l->options->dry_run)
        l->counts = (struct book_counts){.rows = before.rows, .present = before.rows};
    return OK;
}

static enum status load_rows(struct load *l, bool known, const char **told, struct fault *f)
{
    struct session *s = l->session;
    const struct load_options *o = l->options;
    struct author author = {0};
    struct intake_summary summary = {0};
    int64_t batch = 0;
    if (session_author(s, o->by, &author, f) != OK ||
        book_load_begin(s->book, l->plant, &author, o->revise, f) != OK)
        return FAULT;
    if (read_into_book(l, &summary, f) != OK) {
        book_load_abandon(s->book);
        return FAULT;
    }
    l->counts.rows = summary.rows;
    if (o->dry_run || changes_nothing(l, known)) {
        book_load_abandon(s->book);
        return OK;
    }
    struct book_source source = {.file = l->file,
                                 .bytes = summary.bytes,
                                 .dialect_told = summary.dialect_told,
                                 .reason = o->reason ? o->reason : ""};
    memcpy(source.digest, summary.digest, sizeof source.digest);
    if (book_load_end(s->book, &source, summary.rows, &l->counts, &batch, f) != OK) {
        book_load_abandon(s->book);
        return FAULT;
    }
    *told = arena_print(s->arena, "read as %s; batch %lld", summary.dialect_told, (long long)batch);
    return OK;
}

static enum status load_file(struct load *l, const char **told, struct fault *f)
{
    bool known = false;
    *told = NULL;
    l->counts = (struct book_counts){0};
    memset(&l->asides, 0, sizeof l->asides);
    if (load_known(l, &known, told, f) != OK)
        return FAULT;
    if (l->counts.rows > 0)
        return OK;
    return load_rows(l, known, told, f);
}

/* ---- what is told ---- */

static void tell_asides(FILE *out, const struct asides *a)
{
    for (size_t r = 0; r < REASON_COUNT; r++) {
        if (a->count[r] == 0)
            continue;
        fprintf(out, "  set aside, %s: %ld; %s\n", reason_words[r], a->count[r], reason_todo[r]);
        for (long i = 0; i < a->count[r] && i < PLACES_SHOWN; i++)
            fprintf(out, "    %s\n", a->place[r][i]);
        if (a->count[r] > PLACES_SHOWN)
            fprintf(out, "    and %ld more\n", a->count[r] - PLACES_SHOWN);
    }
}

static void tell_file(FILE *out, const struct load *l, const char *told)
{
    const struct book_counts *c = &l->counts;
    fprintf(out, "%s: %ld rows: %ld accepted, %ld already present, %ld revised, %ld set aside%s\n",
            l->file, c->rows, c->accepted, c->present, c->revised, c->aside,
            l->options->dry_run ? " (dry run: nothing was changed)" : "");
    if (told)
        fprintf(out, "  %s\n", told);
    tell_asides(out, &l->asides);
}

static const struct column columns[] = {
    {"file", "file", ALIGN_LEFT, true, 0},
    {"rows", "rows", ALIGN_RIGHT, false, 0},
    {"accepted", "accepted", ALIGN_RIGHT, false, 0},
    {"present", "present", ALIGN_RIGHT, false, 0},
    {"revised", "revised", ALIGN_RIGHT, false, 0},
    {"set_aside", "set aside", ALIGN_RIGHT, false, 0},
};

static void add_row(struct table *t, struct arena *a, const struct load *l)
{
    struct cell *cell = table_row(t);
    const struct book_counts *c = &l->counts;
    cell[0] = cell_text(l->file);
    const long counts[] = {c->rows, c->accepted, c->present, c->revised, c->aside};
    for (size_t i = 0; i < NELEM(counts); i++)
        cell[1 + i] = cell_count(a, counts[i]);
}

/* ---- the command ---- */

static enum status check_options(const struct load_options *o, struct fault *f)
{
    if (o->revise && !(o->reason && *o->reason))
        return fault_usage(f, "add --reason TEXT", "--revise needs a reason, for the record");
    if (o->reason && !o->revise)
        return fault_usage(f, "add --revise, or leave --reason out",
                           "--reason is only used with --revise");
    if (o->dry_run && (o->as == AS_CSV || o->as == AS_JSON))
        return fault_usage(f, "leave --as out", "--dry-run prints the readings as long CSV");
    return OK;
}

static enum status open_aside(struct load *l, struct fault *f)
{
    if (!l->options->set_aside)
        return OK;
    if (beside_open(l->session->arena, l->options->set_aside, &l->beside, f) != OK)
        return FAULT;
    int copy = dup(l->beside.fd);
    l->aside_out = copy < 0 ? NULL : fdopen(copy, "w");
    if (!l->aside_out)
        return beside_fault(&l->beside, errno, f);
    text_clear(&l->line);
    long_heading(&l->line, true);
    fwrite(l->line.at, 1, l->line.length, l->aside_out);
    return OK;
}

/* What could be read before a fault is kept as well: those files are in the book. */
static enum status close_aside(struct load *l, enum status rc, struct fault *f)
{
    if (!l->aside_out)
        return rc;
    bool bad = fflush(l->aside_out) != 0 || ferror(l->aside_out) != 0;
    int error = errno;
    bad = fclose(l->aside_out) != 0 || bad;
    if (bad) {
        beside_drop(&l->beside);
        return beside_fault(&l->beside, error, f);
    }
    return beside_keep(&l->beside, f) == OK ? rc : FAULT;
}

static enum status load_all(struct load *l, struct table *table, struct fault *f)
{
    struct session *s = l->session;
    FILE *out = l->options->dry_run ? stderr : s->out;
    bool text = l->options->as != AS_CSV && l->options->as != AS_JSON;
    for (size_t i = 0; i < s->operands; i++) {
        const char *told = NULL;
        l->file = s->operand[i];
        if (load_file(l, &told, f) != OK)
            return FAULT;
        s->found = s->found || l->counts.aside > 0;
        if (text)
            tell_file(out, l, told);
        else
            tell_asides(stderr, &l->asides);
        add_row(table, s->arena, l);
    }
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    struct load l = {.session = s, .options = given};
    struct plant *plant = NULL;
    if (check_options(l.options, f) != OK || session_book(s, BOOK_WRITE, NULL, &plant, f) != OK)
        return FAULT;
    l.plant = plant;
    text_init(&l.line, 4u << 20);
    struct table *table = table_new(s->arena, "", columns, NELEM(columns));
    if (l.options->dry_run) {
        long_heading(&l.line, false);
        fwrite(l.line.at, 1, l.line.length, s->out);
    }
    enum status rc = open_aside(&l, f);
    if (rc == OK)
        rc = load_all(&l, table, f);
    if (l.options->as == AS_CSV || l.options->as == AS_JSON)
        session_print(s, l.options->as, NULL, table);
    rc = close_aside(&l, rc, f);
    text_free(&l.line);
    return rc;
}

const struct command command_load = {
    .name = "load",
    .summary = "load readings files",
    .operands = "FILE...",
    .least = 1,
    .most = SIZE_MAX,
    .operand = OPERAND_FILE,
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct load_options),
    .example = examples,
    .examples = NELEM(examples),
    .about =
        "Every row ends as accepted, already present, revised or set aside; the four counts add up "
        "to the rows\n"
        "read. A file is loaded whole or not at all. Exit status 3: some rows were set aside.\n"
        "File layouts, value tokens, maps and dialects: weirbook-files(5).",
    .run = run,
};
