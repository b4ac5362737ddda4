/* evidence: gathering what cells prove, and judging it. */
#include "intake/evidence.h"

#include <string.h>

#include "base/poison.h"

static void see(struct sighting *s, const char *text, long line, size_t column)
{
    if (s->line > 0)
        return;
    s->line = line;
    s->column = (int)column + 1;
    snprintf(s->text, sizeof s->text, "%s", text);
}

/* ---- gathering ---- */

static void see_date(struct evidence *e, const struct row *row, size_t column)
{
    const char *text = row->cell[column];
    struct date_parts parts;
    bool same = false;
    if (!date_split(text, &parts) || !date_needs_order(&parts))
        return;
    enum date_order order = date_proves(&parts, &same);
    if (order == ORDER_DMY)
        see(&e->day_first, text, row->line, column);
    else if (order == ORDER_MDY)
        see(&e->month_first, text, row->line, column);
    else if (!same)
        see(&e->either_order, text, row->line, column);
}

static void see_number(struct evidence *e, const struct row *row, size_t column, struct column *c)
{
    const char *text = row->cell[column];
    switch (number_shape(text)) {
    case NUMBER_SILENT:
        break;
    case NUMBER_COMMA:
        see(&e->comma, text, row->line, column);
        break;
    case NUMBER_POINT:
        see(&e->point, text, row->line, column);
        break;
    case NUMBER_MAYBE_COMMA:
        see(&e->maybe_comma, text, row->line, column);
        break;
    case NUMBER_MAYBE_POINT:
        see(&e->maybe_point, text, row->line, column);
        break;
    case NUMBER_GROUPS_COMMAS:
        see(&e->point, text, row->line, column);
        c->grouped = ',';
        break;
    case NUMBER_GROUPS_POINTS:
        see(&e->comma, text, row->line, column);
        c->grouped = '.';
        break;
    }
}

static enum status gather(struct rows *rows, const struct dialect *dialect, struct layout *layout,
                          struct evidence *e, struct fault *f)
{
    const struct row *row = NULL;
    if (rows_header(rows, dialect->header_line, &row, f) != OK)
        return FAULT;
    for (;;) {
        if (rows_next(rows, &row, f) != OK)
            return FAULT;
        if (row == NULL || row_is_footer(row, dialect->footer))
            return OK;
        if (row->problem != REASON_COUNT || !row_fits(row, layout->columns))
            continue;
        see_date(e, row, (size_t)layout->at[LONG_DATE]);
        for (size_t i = 0; i < layout->columns; i++)
            if (layout->column[i].number)
                see_number(e, row, i, &layout->column[i]);
    }
}

enum status evidence_gather(const struct lines *known, char delimiter,
                            const struct dialect *dialect, struct layout *layout,
                            struct evidence *out, struct fault *f)
{
    struct arena *a = arena_new();
    struct lines lines;
    struct rows rows;
    *out = (struct evidence){.comma = {.line = 0}};
    enum status rc = lines_open_again(&lines, a, known, f);
    if (rc == OK) {
        rows_open(&rows, a, &lines, delimiter);
        rc = gather(&rows, dialect, layout, out, f);
        rows_close(&rows);
    }
    lines_close(&lines);
    arena_free(a);
    return rc;
}

/* ---- judging ---- */

static enum status either_order(const struct sighting *s, const char *path, struct fault *f)
{
    const struct place where = {path, s->line, s->column};
    struct date_parts parts;
    day_t day = 0;
    char by_month[11] = "";
    char by_day[11] = "";
    if (!date_split(s->text, &parts))
        return fault_at(f, &where, NULL, "cannot read '%s' as a date", s->text);
    if (date_read(&parts, ORDER_MDY, false, &day) == DATE_FINE)
        day_write(day, by_month);
    if (date_read(&parts, ORDER_DMY, false, &day) == DATE_FINE)
        day_write(day, by_day);
    return fault_at(
        f, &where,
        "put the lines 'field,value' and 'date_order,mdy' (or dmy) in a file and give it"
        " with --dialect",
        "'%s' is %s or %s, and no date of the file settles it", s->text, by_month, by_day);
}

enum status evidence_order(const struct evidence *e, const char *path, enum date_order *out,
                           struct fault *f)
{
    const struct sighting *s = &e->day_first;
    if (s->line > 0 && e->month_first.line > 0)
        return fault_at(f, &(struct place){path, s->line, s->column},
                        "put the lines 'field,value' and 'date_order,dmy' (or mdy) in a file and"
                        " give it with --dialect; dates of the other order are then set aside",
                        "'%s' has the day first, '%s' in line %ld the month", s->text,
                        e->month_first.text, e->month_first.line);
    if (s->line == 0 && e->month_first.line == 0 && e->either_order.line > 0)
        return either_order(&e->either_order, path, f);
    *out = s->line > 0 ? ORDER_DMY : e->month_first.line > 0 ? ORDER_MDY : ORDER_UNKNOWN;
    return OK;
}

static enum status either_mark(const struct sighting *s, const char *path, char mark,
                               struct fault *f)
{
    char decimal[sizeof s->text];
    char whole[sizeof s->text];
    size_t length = 0;
    snprintf(decimal, sizeof decimal, "%s", s->text + strcspn(s->text, "0123456789"));
    for (char *c = decimal; *c != '\0'; c++) {
        if (*c != mark)
            whole[length++] = *c;
        else
            *c = '.';
    }
    whole[length] = '\0';
    const char *todo = mark == ',' ? "put the lines 'field,value' and 'decimal,comma' (or"
                                     " 'thousands,comma') in a file and give it with --dialect"
                                   : "put the lines 'field,value' and 'decimal,point' (or"
                                     " 'thousands,point') in a file and give it with --dialect";
    return fault_at(f, &(struct place){path, s->line, s->column}, todo,
                    "'%s' is %s or %s, and no number of the file settles it", s->text, decimal,
                    whole);
}

enum status evidence_decimal(const struct evidence *e, const char *path, char delimiter, char *out,
                             struct fault *f)
{
    bool comma = e->comma.line > 0;
    bool point = e->point.line > 0;
    *out = comma && !point ? ',' : '.';
    /* In a file parted by commas a decimal point is the rule, and a stray comma is set aside. */
    if (comma && point && delimiter != ',')
        return fault_at(f, &(struct place){path, e->comma.line, e->comma.column},
                        "put the lines 'field,value' and 'decimal,comma' (or point) in a file and"
                        " give it with --dialect; numbers with the other mark are then set aside",
                        "'%s' has a decimal comma, '%s' in line %ld a decimal point", e->comma.text,
                        e->point.text, e->point.line);
    if (comma || point)
        return OK;
    if (e->maybe_comma.line > 0)
        return either_mark(&e->maybe_comma, path, ',', f);
    /* Semicolons part the cells where the comma is the decimal mark: then a point may part
     * thousands. */
    if (e->maybe_point.line > 0 && delimiter == ';')
        return either_mark(&e->maybe_point, path, '.', f);
    return OK;
}
