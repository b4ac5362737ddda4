/* text: a page as aligned text, for a terminal or for paper. */
#include "report/layout.h"
#include "report/report.h"
#include "report/words.h"

#include <string.h>

#include "base/poison.h"

struct writer {
    FILE *out;
    struct arena *arena;
    const struct text_style *style;
    bool started; /* something stands on the page */
    bool blank;   /* and the last line of it is empty */
};

/* Blue and orange differ for eyes that do not tell red from green. */
static const char *const colours[FLAGS] = {
    [FLAG_NONE] = "",         [FLAG_BAD] = "\x1b[1;38;5;208m", [FLAG_SHORT] = "\x1b[38;5;208m",
    [FLAG_WATCH] = "\x1b[1m", [FLAG_GOOD] = "\x1b[38;5;33m",   [FLAG_LIGHT] = "\x1b[2m",
};

static void spaces(struct text *line, int n)
{
    while (n-- > 0)
        text_add_char(line, ' ');
}

static void coloured(const struct writer *w, struct text *line, enum flag flag, const char *s)
{
    bool colour = w->style->colour && flag != FLAG_NONE && *s != '\0';
    if (colour)
        text_add(line, colours[flag]);
    text_add(line, s);
    if (colour)
        text_add(line, "\x1b[0m");
}

/* Ends the line: no spaces before its end. */
static void put_line(struct writer *w, struct text *line)
{
    while (line->length > 0 && line->at[line->length - 1] == ' ')
        line->at[--line->length] = '\0';
    w->blank = line->length == 0;
    w->started = true;
    text_add_char(line, '\n');
    fwrite(line->at, 1, line->length, w->out);
    text_clear(line);
}

static void put_blank(struct writer *w)
{
    if (w->started && !w->blank)
        fputc('\n', w->out);
    w->blank = true;
}

/* ---- lines ---- */

static void put_wrapped(struct writer *w, struct text *line, const struct block *b)
{
    const char *text = layout_escape(w->arena, b->text);
    int indent = (int)strspn(text, " ");
    if (indent > w->style->width / 2)
        indent = w->style->width / 2;
    text += indent;
    int hang = strncmp(text, "- ", 2) == 0 ? indent + 2 : indent;
    struct lines lines;
    layout_wrap(w->arena, text, w->style->width - hang, &lines);
    for (size_t i = 0; i < lines.count; i++) {
        spaces(line, i == 0 ? indent : hang);
        coloured(w, line, b->flag, lines.at[i]);
        put_line(w, line);
    }
}

static void put_heading(struct writer *w, struct text *line, const struct block *b)
{
    put_blank(w);
    struct lines lines;
    layout_wrap(w->arena, layout_escape(w->arena, b->text), w->style->width, &lines);
    int widest = 0;
    for (size_t i = 0; i < lines.count; i++) {
        int width = text_width(lines.at[i]);
        widest = width > widest ? width : widest;
        coloured(w, line, FLAG_WATCH, lines.at[i]);
        put_line(w, line);
    }
    while (widest-- > 0)
        text_add_char(line, '=');
    put_line(w, line);
}

/* ---- tables ---- */

/* One line of a cell, filled up to the column's width. A title is never set by a point. */
static void put_cell(const struct writer *w, struct text *line, const struct column *c,
                     const struct column_layout *l, const struct cell *cell, const char *s)
{
    int width = text_width(s);
    int before = 0;
    int point = c->align == ALIGN_POINT && cell != NULL ? layout_point(s) : -1;
    if (point >= 0) {
        int whole = text_width(arena_bytes(w->arena, s, (size_t)point));
        before = l->width - l->before - l->after + (l->before - whole);
    } else if (c->align != ALIGN_LEFT) {
        before = l->width - width;
    }
    spaces(line, before);
    coloured(w, line, cell == NULL ? FLAG_NONE : cell->flag, s);
    spaces(line, l->width - width - (before > 0 ? before : 0));
}

/* One row: its cells side by side, each over as many lines as it needs; titles stand at the bottom
 * of theirs. */
static void put_row(struct writer *w, struct text *line, const struct layout *l,
                    const char *const *text, const struct cell *cell, bool bottom)
{
    size_t columns = l->table->columns;
    struct lines *cut = arena_alloc(w->arena, columns * sizeof *cut);
    size_t height = 1;
    for (size_t i = 0; i < columns; i++) {
        if (!l->column[i].shown)
            continue;
        layout_wrap(w->arena, text[i], l->column[i].width, &cut[i]);
        height = cut[i].count > height ? cut[i].count : height;
    }
    for (size_t n = 0; n < height; n++) {
        bool first = true;
        for (size_t i = 0; i < columns; i++) {
            if (!l->column[i].shown)
                continue;
            size_t above = bottom ? height - cut[i].count : 0;
            bool there = n >= above && n - above < cut[i].count;
            spaces(line, first ? 0 : COLUMN_GAP);
            put_cell(w, line, &l->table->column[i], &l->column[i], cell == NULL ? NULL : &cell[i],
                     there ? cut[i].at[n - above] : "");
            first = false;
        }
        put_line(w, line);
    }
}

static void put_titles(struct writer *w, struct text *line, const struct layout *l)
{
    const struct table *t = l->table;
    const char **titles = arena_alloc(w->arena, t->columns * sizeof *titles);
    for (size_t i = 0; i < t->columns; i++)
        titles[i] = layout_escape(w->arena, t->column[i].title);
    put_row(w, line, l, titles, NULL, true);
    bool first = true;
    for (size_t i = 0; i < t->columns; i++) {
        if (!l->column[i].shown)
            continue;
        spaces(line, first ? 0 : COLUMN_GAP);
        for (int n = 0; n < l->column[i].width; n++)
            text_add_char(line, '-');
        first = false;
    }
    put_line(w, line);
}

/* Nothing is left out in silence. */
static void put_left_out(struct writer *w, struct text *line, const struct layout *l)
{
    struct text names;
    text_init(&names, (size_t)1 << 16);
    for (size_t i = 0; i < l->table->columns; i++)
        if (!l->column[i].shown)
            text_print(&names, "%s%s", names.length > 0 ? ", " : "", l->table->column[i].title);
    struct block b = {.kind = BLOCK_LINE};
    b.text = SAY(w->arena, LEFT_OUT, [PLACE_NAMES] = names.at);
    text_free(&names);
    put_wrapped(w, line, &b);
}

static void put_table(struct writer *w, struct text *line, const struct table *t)
{
    struct layout l;
    layout_make(w->arena, t, w->style->width, &l);
    if (t->title[0] != '\0') {
        struct block b = {.kind = BLOCK_LINE, .text = t->title};
        put_wrapped(w, line, &b);
    }
    put_titles(w, line, &l);
    for (size_t r = 0; r < t->rows; r++)
        put_row(w, line, &l, l.text + r * t->columns, t->cell + r * t->columns, false);
    if (l.dropped > 0)
        put_left_out(w, line, &l);
}

void write_text(FILE *out, const struct page *p, const struct text_style *style)
{
    struct writer w = {.out = out, .arena = arena_new(), .style = style};
    struct text line;
    text_init(&line, (size_t)1 << 26);
    for (size_t i = 0; i < p->blocks; i++) {
        const struct block *b = &p->block[i];
        switch (b->kind) {
        case BLOCK_HEADING:
            put_heading(&w, &line, b);
            break;
        case BLOCK_LINE:
            put_wrapped(&w, &line, b);
            break;
        case BLOCK_TABLE:
            put_table(&w, &line, b->table);
            break;
        case BLOCK_SPACE:
            put_blank(&w);
            break;
        case BLOCK_NEW_PAGE:
            fputs("\f\n", out);
            w.blank = true;
            break;
        }
    }
    text_free(&line);
    arena_free(w.arena);
}
