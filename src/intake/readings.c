/* readings: a readings file from its first byte to its last row. */
#include "intake/intake.h"
#include "intake/reader.h"

#include "base/poison.h"

enum { PROGRESS_ROWS = 1024, TOLD_BYTES = 1000, CHUNK = 1 << 16 };

/* ---- how the file is read ---- */

static void collect_names(struct reader *r)
{
    const struct plant *p = r->plant;
    names_new(&r->points, r->arena, p->point_count);
    for (size_t i = 0; i < p->point_count; i++)
        names_add(&r->points, p->points[i].id, (int)i);
    names_new(&r->parameters, r->arena, p->parameter_count);
    for (size_t i = 0; i < p->parameter_count; i++)
        names_add(&r->parameters, p->parameters[i].id, (int)i);
    names_new(&r->units, r->arena, unit_count());
    for (size_t i = 0; i < unit_count(); i++)
        names_add(&r->units, unit_at(i)->name, (int)i);
}

/* A comma can stand in a cell only where another sign parts the cells, or in quotes: elsewhere the
 * decimal mark is a point for certain, and the file need not be read twice. */
static bool marks_are_open(const struct reader *r)
{
    return r->dialect.decimal == '\0' && (r->delimiter != ',' || r->lines.look.quotes);
}

static bool groups_are_open(const struct reader *r)
{
    return !r->dialect.thousands_stated && (r->delimiter != ',' || r->lines.look.quotes);
}

static enum status settle_numbers(struct reader *r, struct fault *f)
{
    r->decimal = r->dialect.decimal != '\0' ? r->dialect.decimal : '.';
    if ((marks_are_open(r) || groups_are_open(r)) && reader_gather(r, f) != OK)
        return FAULT;
    if (marks_are_open(r) &&
        evidence_decimal(&r->evidence, r->path, r->delimiter, &r->decimal, f) != OK)
        return FAULT;
    for (size_t i = 0; i < r->layout.columns; i++) {
        struct column *c = &r->layout.column[i];
        char grouped = c->grouped != r->decimal ? c->grouped : '\0';
        c->style.decimal = r->decimal;
        c->style.thousands = r->dialect.thousands_stated ? r->dialect.thousands : grouped;
    }
    return OK;
}

static enum status settle(struct reader *r, struct fault *f)
{
    const struct row *header = NULL;
    if (dialect_read(r->arena, r->options->dialect, &r->dialect, f) != OK ||
        lines_open(&r->lines, r->arena, r->path, f) != OK)
        return FAULT;
    if (r->dialect.encoding_stated)
        r->lines.encoding = r->dialect.encoding;
    r->delimiter = r->dialect.delimiter;
    long from = r->dialect.header_line > 0 ? r->dialect.header_line : 1;
    if (r->delimiter == '\0' && rows_find_delimiter(&r->lines, from, &r->delimiter, f) != OK)
        return FAULT;
    r->order = r->dialect.date_order;
    r->ordered = r->order != ORDER_UNKNOWN;
    r->lines.digest = digest_new(r->arena);
    rows_open(&r->rows, r->arena, &r->lines, r->delimiter);
    if (rows_header(&r->rows, r->dialect.header_line, &header, f) != OK ||
        layout_read(r->arena, r->path, header, r->plant, &r->dialect, r->options->map, &r->layout,
                    f) != OK)
        return FAULT;
    collect_names(r);
    return settle_numbers(r, f);
}

/* ---- rows ---- */

static void show_progress(struct reader *r)
{
    int percent = (int)(r->lines.taken * 100 / r->lines.look.bytes);
    if (r->options->progress == NULL || percent == r->percent)
        return;
    r->percent = percent;
    r->options->progress(r->options->progress_context, r->path, percent);
}

static enum status read_rows(struct reader *r, struct fault *f)
{
    const struct row *row = NULL;
    struct line line;
    for (long count = 1;; count++) {
        if (rows_next(&r->rows, &row, f) != OK)
            return FAULT;
        if (row == NULL || row_is_footer(row, r->dialect.footer))
            break;
        if ((r->layout.wide ? reader_wide_row(r, row, f) : reader_long_row(r, row, f)) != OK)
            return FAULT;
        if (count % PROGRESS_ROWS == 0)
            show_progress(r);
    }
    /* What stands below a footer belongs to the file's identity too. */
    do {
        if (lines_next(&r->lines, &line, f) != OK)
            return FAULT;
    } while (line.at != NULL);
    const struct place where = {.file = r->path};
    if (r->lines.taken != r->lines.look.bytes)
        return fault_at(f, &where, "load it again", "the file changed while it was read");
    if (r->summary->rows == 0)
        return fault_at(f, &where, "export it again with its readings",
                        "the file has no readings below its header");
    show_progress(r);
    return OK;
}

/* ---- what is told ---- */

static void add_dates(const struct reader *r, struct text *t)
{
    static const char *const orders[][2] = {
        [ORDER_UNKNOWN] = {"month", "day"},
        [ORDER_YMD] = {"year", "month"},
        [ORDER_MDY] = {"month", "day"},
        [ORDER_DMY] = {"day", "month"},
    };
    const char *between = ", dates ";
    if (r->years_first) {
        text_print(t, "%syear-month-day", between);
        between = " and ";
    }
    if (r->dots) {
        bool stated = r->dialect.date_order != ORDER_UNKNOWN;
        const char *const *o = orders[stated ? r->order : ORDER_DMY];
        text_print(t, "%s%s.%s.%s", between, o[0], o[1], r->order == ORDER_YMD ? "day" : "year");
        between = " and ";
    }
    if (r->sign != '\0') {
        const char *const *o = orders[r->order];
        text_print(t, "%s%s%c%s%cyear", between, o[0], r->sign, o[1], r->sign);
    }
}

/* Marks between thousands, when some column has them. */
static const char *thousands_told(const struct reader *r)
{
    for (size_t i = 0; i < r->layout.columns; i++) {
        switch (r->layout.column[i].style.thousands) {
        case ',':
            return ", thousands comma";
        case '.':
            return ", thousands point";
        case ' ':
            return ", thousands space";
        default:
            break;
        }
    }
    return "";
}

static const char *tell_dialect(const struct reader *r, struct arena *a)
{
    struct text t;
    text_init(&t, TOLD_BYTES);
    text_print(&t, "%s, %s, decimal %s%s", r->layout.wide ? "wide" : "long",
               r->delimiter == ','   ? "commas"
               : r->delimiter == ';' ? "semicolons"
                                     : "tabs",
               r->decimal == ',' ? "comma" : "point", thousands_told(r));
    add_dates(r, &t);
    text_print(&t, ", %s", r->lines.encoding == ENCODING_UTF8 ? "UTF-8" : "Windows-1252");
    const char *told = arena_text(a, t.at);
    text_free(&t);
    return told;
}

enum status intake_readings(struct arena *a, const char *path, const struct plant *plant,
                            const struct intake_options *options, const struct intake_sink *sink,
                            struct intake_summary *summary, struct fault *f)
{
    struct reader r = {.arena = arena_new(),
                       .path = path,
                       .plant = plant,
                       .options = options,
                       .sink = sink,
                       .summary = summary,
                       .percent = -1};
    *summary = (struct intake_summary){.dialect_told = ""};
    r.text.file = r.reading.file = path;
    r.text.raw = "";
    r.detail = (struct detail){"", "", "", "", ""};
    r.reading.detail = &r.detail;
    text_init(&r.told, TOLD_BYTES);
    enum status rc = OK;
    TRY(settle(&r, f));
    TRY(read_rows(&r, f));
    summary->bytes = r.lines.look.bytes;
    digest_end(r.lines.digest, summary->digest);
    summary->dialect_told = tell_dialect(&r, a);
done:
    rows_close(&r.rows);
    lines_close(&r.lines);
    text_free(&r.told);
    arena_free(r.arena);
    return rc;
}

enum status intake_identify(struct arena *a, const char *path, int64_t *bytes,
                            uint8_t digest[DIGEST_BYTES], struct fault *f)
{
    FILE *stream = NULL;
    if (file_open(path, &stream, bytes, f) != OK)
        return FAULT;
    struct digest *d = digest_new(a);
    char *chunk = arena_alloc(a, CHUNK);
    size_t got = 0;
    while ((got = fread(chunk, 1, CHUNK, stream)) > 0)
        digest_add(d, chunk, got);
    bool broken = ferror(stream) != 0;
    fclose(stream);
    digest_end(d, digest);
    if (broken)
        return fault_at(f, &(struct place){.file = path}, "see whether its disk is sound",
                        "the file cannot be read");
    return OK;
}
