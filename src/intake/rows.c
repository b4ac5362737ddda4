/* rows: libcsv behind a face that keeps line numbers, ceilings, and its footing after a bad quote.
 * One physical line is fed per call, because libcsv counts none. */
#include "intake/rows.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

enum { SAMPLE_LINES = 20, CELL_BLOCK = 1 << 16 };
static const size_t row_bytes = LINE_BYTES_MAX + 2 * COLUMNS_MAX;
static const char no_break_space[] = "\xc2\xa0";

/* ---- blanks ---- */

static bool is_blank(char c)
{
    return c == ' ' || c == '\t';
}

/* Most cells have no blanks, and every cell passes here. */
static char *trim_bytes(char *s, size_t length)
{
    for (;;) {
        if (length >= 1 && is_blank(s[length - 1]))
            length--;
        else if (length >= 2 && s[length - 1] == no_break_space[1] &&
                 s[length - 2] == no_break_space[0])
            length -= 2;
        else
            break;
    }
    s[length] = '\0';
    for (;;) {
        if (is_blank(*s))
            s++;
        else if (s[0] == no_break_space[0] && s[1] == no_break_space[1])
            s += 2;
        else
            return s;
    }
}

char *trim(char *s)
{
    return trim_bytes(s, strlen(s));
}

/* ---- what libcsv calls ---- */

static void take_cell(void *at, size_t length, void *context)
{
    struct rows *r = context;
    struct row *row = &r->row;
    if (r->ended) { /* a return in the middle of a line: libcsv begins a row there, we do not */
        r->stray = true;
        return;
    }
    row->count++;
    if (row->count > COLUMNS_MAX)
        return;
    const char **cell = &r->cell[row->count - 1];
    *cell = "";
    if (length == 0)
        return;
    if (length > CELL_BYTES_MAX || length + 1 > row_bytes - r->used) {
        r->too_long = true;
        return;
    }
    char *copy = r->bytes + r->used;
    memcpy(copy, at, length);
    copy[length] = '\0';
    r->used += length + 1;
    copy = trim_bytes(copy, length);
    *cell = *copy == '\'' ? csv_unguard(copy) : copy;
}

static void take_end(int c, void *context)
{
    struct rows *r = context;
    (void)c;
    r->ended = true;
}

/* ---- opening ---- */

static void start_parser(struct rows *r)
{
    /* csv_init fails only when given no parser. */
    (void)csv_init(&r->parser, CSV_STRICT | CSV_STRICT_FINI | CSV_APPEND_NULL | CSV_EMPTY_IS_NULL);
    csv_set_delim(&r->parser, (unsigned char)r->delimiter);
    csv_set_blk_size(&r->parser, CELL_BLOCK); /* its own 128 bytes make a long cell costly */
    r->parsing = true;
}

/* After an error libcsv can only be freed. */
static void drop_parser(struct rows *r)
{
    if (r->parsing)
        csv_free(&r->parser);
    r->parsing = false;
}

void rows_open(struct rows *r, struct arena *a, struct lines *lines, char delimiter)
{
    *r = (struct rows){.lines = lines, .delimiter = delimiter};
    r->bytes = arena_alloc(a, row_bytes);
    r->cell = arena_alloc(a, COLUMNS_MAX * sizeof *r->cell);
    text_init(&r->joined, 8 * LINE_BYTES_MAX);
    text_init(&r->held, 8 * LINE_BYTES_MAX);
    text_init(&r->raw, 16 * LINE_BYTES_MAX);
}

void rows_close(struct rows *r)
{
    drop_parser(r);
    text_free(&r->joined);
    text_free(&r->held);
    text_free(&r->raw);
}

/* ---- lines, those to be read again first ---- */

static enum status next_line(struct rows *r, struct line *out, struct fault *f)
{
    if (r->held_at == r->held.length)
        return lines_next(r->lines, out, f);
    const char *from = r->held.at + r->held_at;
    const char *stop = memchr(from, '\n', r->held.length - r->held_at);
    assert(stop != NULL);
    size_t length = (size_t)(stop - from);
    *out = (struct line){.at = from, .length = length, .number = r->held_number++};
    out->bad = lines_bad(r->lines, from, length);
    r->held_at += length + 1;
    return OK;
}

/* A quote that opened and never closed has run through good lines: only the first line is set
 * aside, the others are read again. */
static void hold_the_rest(struct rows *r)
{
    r->held_number = r->row.line + 1;
    if (r->held_at < r->held.length) { /* all lines of the row came from there */
        r->held_at = r->held_first;
        return;
    }
    const char *rest = memchr(r->joined.at, '\n', r->joined.length);
    assert(rest != NULL);
    rest++;
    text_clear(&r->held);
    text_add_bytes(&r->held, rest, r->joined.length - (size_t)(rest - r->joined.at));
    r->held_at = 0;
}

static bool blank_line(const struct rows *r, const struct line *line)
{
    for (size_t i = 0; i < line->length; i++) {
        char c = line->at[i];
        if ((c != ' ' && c != '\t' && c != '\r') || c == r->delimiter)
            return false;
    }
    return true;
}

/* ---- rows ---- */

/* False when libcsv finds a quote out of place. */
static bool feed(struct rows *r, const struct line *line)
{
    size_t length = line->length + 1; /* with its line feed */
    return csv_parse(&r->parser, line->at, length, take_cell, take_end, r) == length;
}

static void fail_row(struct rows *r, enum reason problem)
{
    drop_parser(r);
    r->row.problem = problem;
    if (r->first.at == NULL)
        hold_the_rest(r);
}

/* Reads on while a quoted cell runs over the end of a line. */
static enum status continue_row(struct rows *r, struct fault *f)
{
    struct line line;
    text_clear(&r->joined);
    text_add_bytes(&r->joined, r->first.at, r->first.length + 1);
    r->first.at = NULL;
    while (!r->ended) {
        if (next_line(r, &line, f) != OK)
            return FAULT;
        if (line.at != NULL)
            text_add_bytes(&r->joined, line.at, line.length + 1);
        if (line.at == NULL || line.bad || r->joined.length > LINE_BYTES_MAX || !feed(r, &line)) {
            fail_row(r, REASON_BAD_QUOTES);
            return OK;
        }
    }
    if (r->too_long || r->stray)
        fail_row(r, REASON_BAD_QUOTES);
    return OK;
}

static enum status read_row(struct rows *r, const struct line *line, struct fault *f)
{
    r->row = (struct row){.line = line->number, .cell = r->cell, .problem = REASON_COUNT};
    r->used = 0;
    r->ended = r->stray = r->too_long = false;
    r->first = *line;
    r->held_first = r->held_at;
    if (line->bad) {
        r->row.problem = REASON_BAD_TEXT;
        return OK;
    }
    if (!r->parsing)
        start_parser(r);
    if (!feed(r, line))
        fail_row(r, REASON_BAD_QUOTES);
    else if (!r->ended)
        return continue_row(r, f);
    else if (r->stray)
        fail_row(r, REASON_BAD_TEXT);
    else if (r->too_long)
        r->row.problem = REASON_TOO_LONG;
    return OK;
}

static bool blank_row(const struct row *row)
{
    size_t count = row->count < COLUMNS_MAX ? row->count : COLUMNS_MAX;
    for (size_t i = 0; i < count; i++)
        if (row->cell[i][0] != '\0')
            return false;
    return row->problem == REASON_COUNT;
}

enum status rows_next(struct rows *r, const struct row **out, struct fault *f)
{
    struct line line;
    for (;;) {
        *out = NULL;
        if (next_line(r, &line, f) != OK)
            return FAULT;
        if (line.at == NULL)
            return OK;
        if (blank_line(r, &line))
            continue;
        if (read_row(r, &line, f) != OK)
            return FAULT;
        if (blank_row(&r->row))
            continue;
        *out = &r->row;
        return OK;
    }
}

enum status rows_header(struct rows *r, long header_line, const struct row **out, struct fault *f)
{
    const struct place where = {.file = r->lines->path};
    struct line line;
    *out = NULL;
    for (long i = 1; i < header_line; i++)
        if (lines_next(r->lines, &line, f) != OK)
            return FAULT;
    if (rows_next(r, out, f) != OK)
        return FAULT;
    if (*out == NULL && header_line > 0)
        return fault_at(f, &where, "correct header_line in the dialect file",
                        "the file has no line %ld", header_line);
    if (*out == NULL)
        return fault_at(f, &where, "export it again", "the file holds only blank lines");
    return OK;
}

/* Tabs and line ends belong to the row; whatever else could draw on a terminal is escaped. */
static void add_escaped(struct text *t, const char *s, size_t length)
{
    struct text part;
    text_init(&part, SIZE_MAX);
    for (size_t i = 0; i <= length; i++) {
        bool kept = i < length && (s[i] == '\t' || s[i] == '\n');
        if (i < length && !kept) {
            text_add_char(&part, s[i]);
            continue;
        }
        text_add_escaped(t, part.at);
        text_clear(&part);
        if (kept)
            text_add_char(t, s[i]);
    }
    text_free(&part);
}

const char *rows_raw(struct rows *r)
{
    const char *from = r->first.at;
    size_t length = r->first.length;
    if (from == NULL) {
        from = r->joined.at;
        length = r->joined.length - 1;
        if (r->row.problem != REASON_COUNT)
            length = (size_t)((const char *)memchr(from, '\n', r->joined.length) - from);
    }
    text_clear(&r->raw);
    add_escaped(&r->raw, from, length);
    return r->raw.at;
}

const char *row_problem(enum reason problem)
{
    switch (problem) {
    case REASON_BAD_QUOTES:
        return "a quote is not closed, or stands inside a cell that is not quoted";
    case REASON_BAD_TEXT:
        return "the row has bytes that are no text";
    case REASON_TOO_LONG:
        return "a cell is longer than 64 kB";
    default:
        return "the row cannot be read";
    }
}

bool row_is_footer(const struct row *row, const char *footer)
{
    return footer != NULL && row->problem == REASON_COUNT && row->count > 0 &&
           strncmp(row->cell[0], footer, strlen(footer)) == 0;
}

bool row_fits(const struct row *row, size_t columns)
{
    if (row->count < columns || row->count > COLUMNS_MAX)
        return false;
    for (size_t i = columns; i < row->count; i++)
        if (row->cell[i][0] != '\0')
            return false;
    return true;
}

/* ---- what parts the cells ---- */

static int count_outside_quotes(const struct line *line, char c)
{
    int count = 0;
    bool quoted = false;
    for (size_t i = 0; i < line->length; i++) {
        if (line->at[i] == '"')
            quoted = !quoted;
        else if (line->at[i] == c && !quoted)
            count++;
    }
    return count;
}

enum status rows_find_delimiter(struct lines *l, long from, char *out, struct fault *f)
{
    static const char known[] = {',', ';', '\t'};
    int heading[NELEM(known)] = {0};
    int alike[NELEM(known)] = {0}; /* lines with as many as the heading: other signs vary */
    struct line line;
    for (int lines = 0; lines < SAMPLE_LINES;) {
        if (lines_next(l, &line, f) != OK)
            return FAULT;
        if (line.at == NULL)
            break;
        if (line.number < from || line.length == 0)
            continue;
        for (size_t i = 0; i < NELEM(known); i++) {
            int count = count_outside_quotes(&line, known[i]);
            if (lines == 0)
                heading[i] = count;
            alike[i] += count > 0 && count == heading[i];
        }
        lines++;
    }
    size_t best = 0;
    for (size_t i = 1; i < NELEM(known); i++)
        if (alike[i] > alike[best] || (alike[i] == alike[best] && heading[i] > heading[best]))
            best = i;
    *out = known[best];
    return lines_rewind(l, f);
}
