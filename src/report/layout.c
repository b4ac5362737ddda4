/* layout: column widths of a table of text, and the breaking of long texts. */
#include "report/layout.h"

#include <assert.h>
#include <limits.h>
#include <string.h>

#include "base/poison.h"

static const size_t text_most = (size_t)1 << 26;

const char *layout_escape(struct arena *a, const char *text)
{
    struct text t;
    text_init(&t, text_most);
    text_add_escaped(&t, text);
    char *escaped = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return escaped;
}

/* ---- breaking ---- */

/* The bytes of the character at s (valid UTF-8), and its width. */
static size_t character(const char *s, int *width)
{
    char one[5] = {s[0]};
    size_t n = 1;
    while (n < 4 && ((unsigned char)s[n] & 0xC0) == 0x80) {
        one[n] = s[n];
        n++;
    }
    *width = text_width(one);
    return n;
}

/* How many bytes from s fit into `width` columns; at least one character. */
static size_t fitting(const char *s, size_t length, int width)
{
    size_t used = 0;
    int taken = 0;
    while (used < length) {
        int w = 0;
        size_t n = character(s + used, &w);
        if (used > 0 && taken + w > width)
            break;
        taken += w;
        used += n;
    }
    return used;
}

/* The width of a part of a text that ends at a space or at the end. */
static int part_width(struct arena *a, const char *s, size_t length)
{
    return text_width(arena_bytes(a, s, length));
}

static void add_line(struct arena *a, struct lines *out, const char *s, size_t length)
{
    const char **line = arena_push(a, &out->at, &out->count, &out->room, sizeof *line);
    *line = arena_bytes(a, s, length);
}

/* Where the line that begins at s ends: before the last space that leaves it narrow enough; a word
 * that is too long ends after a stroke or a hyphen, if it has one (names of files, of formulas). */
static size_t line_end(const char *s, int width)
{
    size_t fits = fitting(s, strlen(s), width);
    if (s[fits] == '\0' || s[fits] == ' ')
        return fits;
    size_t end = fits;
    while (end > 0 && s[end - 1] != ' ')
        end--;
    while (end > 0 && s[end - 1] == ' ')
        end--;
    if (end > 0)
        return end;
    end = fits;
    while (end > 0 && s[end - 1] != '/' && s[end - 1] != '-')
        end--;
    return end > 0 ? end : fits;
}

void layout_wrap(struct arena *a, const char *text, int width, struct lines *out)
{
    *out = (struct lines){0};
    assert(width > 0);
    do {
        size_t end = line_end(text, width);
        add_line(a, out, text, end);
        text += end;
        text += strspn(text, " ");
    } while (*text != '\0');
}

static int widest_word(struct arena *a, const char *text)
{
    int widest = 0;
    while (*text != '\0') {
        size_t length = strcspn(text, " ");
        int w = part_width(a, text, length);
        if (w > widest)
            widest = w;
        text += length;
        text += strspn(text, " ");
    }
    return widest;
}

/* ---- measuring ---- */

int layout_point(const char *text)
{
    size_t lead = strspn(text, "<>=+-~ ");
    size_t digits = strspn(text + lead, "0123456789");
    if (digits == 0 && text[lead] != '.')
        return -1;
    return (int)(lead + digits);
}

static int larger(int a, int b)
{
    return a > b ? a : b;
}

static void measure_cell(struct arena *a, const struct column *c, struct column_layout *l,
                         const char *text)
{
    int width = text_width(text);
    int point = c->align == ALIGN_POINT ? layout_point(text) : -1;
    if (point >= 0) {
        int before = part_width(a, text, (size_t)point);
        l->before = larger(l->before, before);
        l->after = larger(l->after, width - before);
        width = l->before + l->after;
    }
    l->cells = larger(l->cells, width);
    if (c->wraps || c->align == ALIGN_LEFT)
        l->cell_word = larger(l->cell_word, widest_word(a, text));
}

static void measure(struct arena *a, struct layout *l)
{
    const struct table *t = l->table;
    for (size_t i = 0; i < t->columns; i++) {
        l->column[i].shown = true;
        l->column[i].title_word = widest_word(a, t->column[i].title);
        for (size_t r = 0; r < t->rows; r++)
            measure_cell(a, &t->column[i], &l->column[i], l->text[r * t->columns + i]);
    }
}

/* ---- fitting ---- */

static int total(const struct layout *l)
{
    int sum = -COLUMN_GAP;
    for (size_t i = 0; i < l->table->columns; i++)
        if (l->column[i].shown)
            sum += l->column[i].width + COLUMN_GAP;
    return sum;
}

/* What a column may shrink to in a step of the fitting. */
enum fit_step { FIT_TEXTS, FIT_WORDS };

static int narrowest(const struct column *c, const struct column_layout *l, enum fit_step step)
{
    enum { LONG_WORD = 24, SHORT_TEXT = 6 };
    bool text = c->wraps || (step == FIT_WORDS && c->align == ALIGN_LEFT);
    if (!text)
        return larger(l->cells, l->title_word);
    if (step == FIT_TEXTS)
        return larger(l->title_word, l->cell_word < LONG_WORD ? l->cell_word : LONG_WORD);
    return l->title_word < SHORT_TEXT ? l->title_word : SHORT_TEXT;
}

/* How many lines the text takes at a width. */
static int lines_at(const char *text, int text_columns, int width)
{
    int count = 1;
    if (text_columns <= width)
        return 1;
    for (;; count++) {
        text += line_end(text, width);
        text += strspn(text, " ");
        if (*text == '\0')
            return count;
    }
}

/* The height of all rows were column `at` of width `width`. */
static long height_with(const struct layout *l, const int *cell_width, const int *cell_lines,
                        size_t at, int width)
{
    const struct table *t = l->table;
    long sum = 0;
    for (size_t r = 0; r < t->rows; r++) {
        size_t row = r * t->columns;
        int height = lines_at(l->text[row + at], cell_width[row + at], width);
        for (size_t i = 0; i < t->columns; i++)
            if (i != at && l->column[i].shown)
                height = larger(height, cell_lines[row + i]);
        sum += height;
    }
    return sum;
}

static void count_lines(const struct layout *l, const int *cell_width, int *cell_lines, size_t at)
{
    const struct table *t = l->table;
    for (size_t r = 0; r < t->rows; r++)
        cell_lines[r * t->columns + at] =
            lines_at(l->text[r * t->columns + at], cell_width[r * t->columns + at],
                     larger(1, l->column[at].width));
}

/* Narrows texts a column at a time, there where it makes the fewest rows taller; of equals the
 * widest column gives. */
static void shrink_texts(struct arena *a, struct layout *l, int most, enum fit_step step)
{
    const struct table *t = l->table;
    int *cell_width = arena_alloc(a, (t->rows * t->columns + 1) * sizeof *cell_width);
    int *cell_lines = arena_alloc(a, (t->rows * t->columns + 1) * sizeof *cell_lines);
    for (size_t i = 0; i < t->rows * t->columns; i++)
        cell_width[i] = text_width(l->text[i]);
    for (size_t i = 0; i < t->columns; i++)
        count_lines(l, cell_width, cell_lines, i);
    for (int over = total(l) - most; over > 0; over--) {
        size_t chosen = t->columns;
        long best = 0;
        for (size_t i = 0; i < t->columns; i++) {
            struct column_layout *c = &l->column[i];
            if (!c->shown || c->width <= larger(1, narrowest(&t->column[i], c, step)))
                continue;
            long height = height_with(l, cell_width, cell_lines, i, c->width - 1);
            bool wider = chosen < t->columns && c->width > l->column[chosen].width;
            if (chosen == t->columns || height < best || (height == best && wider)) {
                best = height;
                chosen = i;
            }
        }
        if (chosen == t->columns)
            return;
        l->column[chosen].width--;
        count_lines(l, cell_width, cell_lines, chosen);
    }
}

/* Breaks titles between words, the title that is longest beyond its column first. */
static void shrink_titles(struct layout *l, int most)
{
    for (int over = total(l) - most; over > 0; over--) {
        struct column_layout *chosen = NULL;
        int best = 0;
        for (size_t i = 0; i < l->table->columns; i++) {
            struct column_layout *c = &l->column[i];
            int spare = c->width - larger(c->cells, c->title_word);
            if (c->shown && spare > best) {
                best = spare;
                chosen = c;
            }
        }
        if (chosen == NULL)
            return;
        chosen->width--;
    }
}

static void full_widths(struct layout *l)
{
    for (size_t i = 0; i < l->table->columns; i++)
        l->column[i].width = larger(l->column[i].cells, text_width(l->table->column[i].title));
}

/* Leaves out the column of the highest rank, the rightmost of equals. */
static bool drop_one(struct layout *l)
{
    int rank = 0;
    size_t chosen = 0;
    for (size_t i = 0; i < l->table->columns; i++)
        if (l->column[i].shown && l->table->column[i].rank > 0 &&
            l->table->column[i].rank >= rank) {
            rank = l->table->column[i].rank;
            chosen = i;
        }
    if (rank == 0)
        return false;
    l->column[chosen].shown = false;
    l->dropped++;
    return true;
}

void layout_make(struct arena *a, const struct table *t, int most, struct layout *out)
{
    size_t cells = t->rows * t->columns;
    *out = (struct layout){.table = t};
    out->text = arena_alloc(a, cells * sizeof *out->text);
    out->column = arena_alloc(a, t->columns * sizeof *out->column);
    for (size_t i = 0; i < cells; i++)
        out->text[i] = layout_escape(a, t->cell[i].text);
    measure(a, out);
    for (;;) {
        full_widths(out);
        shrink_titles(out, most);
        shrink_texts(a, out, most, FIT_TEXTS);
        if (total(out) <= most || !drop_one(out))
            break;
    }
    if (total(out) > most)
        shrink_texts(a, out, most, FIT_WORDS);
    out->width = total(out);
}

/* ---- cutting into several ---- */

static struct table *part_of(struct arena *a, const struct table *t, size_t fixed, size_t from,
                             size_t to)
{
    size_t count = fixed + to - from;
    struct column *columns = arena_alloc(a, count * sizeof *columns);
    for (size_t i = 0; i < count; i++)
        columns[i] = t->column[i < fixed ? i : from + i - fixed];
    struct table *part = table_new(a, t->title, columns, count);
    for (size_t r = 0; r < t->rows; r++) {
        struct cell *row = table_row(part);
        for (size_t i = 0; i < count; i++)
            row[i] = t->cell[r * t->columns + (i < fixed ? i : from + i - fixed)];
    }
    return part;
}

size_t layout_split(struct arena *a, const struct table *t, size_t fixed, int most,
                    struct table ***out)
{
    struct layout l;
    layout_make(a, t, INT_MAX / 2, &l);
    for (size_t i = 0; i < t->columns; i++) /* as narrow as cells and whole words allow */
        l.column[i].width = larger(l.column[i].cells, l.column[i].title_word);
    size_t count = 0;
    size_t room = 0;
    int start = -COLUMN_GAP;
    for (size_t i = 0; i < fixed; i++)
        start += l.column[i].width + COLUMN_GAP;
    *out = NULL;
    for (size_t from = fixed; from < t->columns;) {
        int width = start;
        size_t to = from;
        while (to < t->columns && (to == from || width + COLUMN_GAP + l.column[to].width <= most))
            width += COLUMN_GAP + l.column[to++].width;
        struct table **part = arena_push(a, out, &count, &room, sizeof(struct table *));
        *part = part_of(a, t, fixed, from, to);
        from = to;
    }
    return count;
}
