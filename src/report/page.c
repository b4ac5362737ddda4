/* page: building the page model: tables of cells, and pages of blocks. */
#include "report/report.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

struct table *table_new(struct arena *a, const char *title, const struct column *column,
                        size_t columns)
{
    assert(columns > 0);
    struct table *t = arena_alloc(a, sizeof *t);
    *t = (struct table){.title = title, .column = column, .columns = columns, .arena = a};
    return t;
}

struct cell *table_row(struct table *t)
{
    if (t->rows == t->room) {
        size_t room = t->room == 0 ? 8 : t->room * 2;
        struct cell *larger = arena_alloc(t->arena, room * t->columns * sizeof *larger);
        if (t->rows > 0)
            memcpy(larger, t->cell, t->rows * t->columns * sizeof *larger);
        t->cell = larger;
        t->room = room;
    }
    struct cell *row = t->cell + t->rows * t->columns;
    for (size_t i = 0; i < t->columns; i++)
        row[i] = (struct cell){.kind = CELL_EMPTY, .text = ""};
    t->rows++;
    return row;
}

struct cell cell_text(const char *text)
{
    return (struct cell){.kind = text[0] == '\0' ? CELL_EMPTY : CELL_TEXT, .text = text};
}

struct cell cell_number(const char *text)
{
    return (struct cell){.kind = text[0] == '\0' ? CELL_EMPTY : CELL_NUMBER, .text = text};
}

struct cell cell_count(struct arena *a, long n)
{
    return cell_number(arena_print(a, "%ld", n));
}

struct cell cell_day(struct arena *a, day_t day)
{
    if (day == DAY_NONE)
        return (struct cell){.kind = CELL_EMPTY, .text = ""};
    char iso[11];
    day_write(day, iso);
    return (struct cell){.kind = CELL_DATE, .text = arena_text(a, iso)};
}

struct cell cell_flagged(struct cell c, enum flag flag)
{
    c.flag = flag;
    return c;
}

struct page *page_new(struct arena *a)
{
    struct page *p = arena_alloc(a, sizeof *p);
    p->arena = a;
    return p;
}

static struct block *add_block(struct page *p, enum block_kind kind)
{
    struct block *b = arena_push(p->arena, &p->block, &p->blocks, &p->room, sizeof *b);
    b->kind = kind;
    b->text = "";
    return b;
}

void page_heading(struct page *p, const char *text)
{
    add_block(p, BLOCK_HEADING)->text = text;
}

void page_line(struct page *p, enum flag flag, const char *format, ...)
{
    struct text t;
    text_init(&t, (size_t)1 << 20);
    va_list ap;
    va_start(ap, format);
    text_vprint(&t, format, ap);
    va_end(ap);
    struct block *b = add_block(p, BLOCK_LINE);
    b->flag = flag;
    b->text = arena_bytes(p->arena, t.at, t.length);
    text_free(&t);
}

void page_table(struct page *p, const struct table *t)
{
    add_block(p, BLOCK_TABLE)->table = t;
}

void page_space(struct page *p)
{
    add_block(p, BLOCK_SPACE);
}

void page_break(struct page *p)
{
    add_block(p, BLOCK_NEW_PAGE);
}
