/* wide: a row of a wide file to the readings of a day. Every filled cell is a row of its own; it is
 * put into the words of a long file, so that what is set aside can be corrected and loaded. */
#include "intake/reader.h"

#include "base/poison.h"

/* What a row's cells share, put in plain words once it is known. */
struct moment {
    const char *date, *time;
    enum reason reason;
    char iso[11], clock[6];
};

static void read_moment(struct reader *r, const struct row *row, struct moment *m)
{
    const struct layout *l = &r->layout;
    m->date = row->cell[l->at[LONG_DATE]];
    m->time = l->at[LONG_TIME] < 0 ? "" : row->cell[l->at[LONG_TIME]];
    m->reason = reader_day(r, m->date);
    if (m->reason == REASON_COUNT)
        m->reason = reader_minute(r, m->time);
    if (m->reason != REASON_COUNT)
        return;
    day_write(r->reading.day, m->iso);
    minute_write(r->reading.minute, m->clock);
    m->date = m->iso;
    m->time = m->clock;
}

static enum reason read_cell(struct reader *r, const struct column *c, const char *value,
                             const struct moment *m)
{
    struct row_text *t = &r->text;
    t->cell[LONG_DATE] = m->date;
    t->cell[LONG_TIME] = m->time;
    t->cell[LONG_POINT] = r->plant->points[c->point].id;
    t->cell[LONG_PARAMETER] = r->plant->parameters[c->parameter].id;
    t->cell[LONG_VALUE] = value;
    t->cell[LONG_UNIT] = c->unit->name;
    t->cell[LONG_SAMPLE] = c->sample;
    r->reading.point = (uint16_t)c->point;
    r->reading.parameter = (uint16_t)c->parameter;
    r->reading.sample = c->sample;
    if (m->reason != REASON_COUNT)
        return m->reason; /* told already */
    enum reason reason = reader_unit_fits(r, c->unit);
    return reason == REASON_COUNT ? reader_value(r, value, c->style) : reason;
}

enum status reader_wide_row(struct reader *r, const struct row *row, struct fault *f)
{
    const struct layout *l = &r->layout;
    struct moment m;
    if (row->problem != REASON_COUNT || !row_fits(row, l->columns))
        return reader_raw_aside(r, row, f);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        r->text.cell[i] = "";
    r->text.line = r->reading.line = row->line;
    if (reader_part_date(r, row->cell[l->at[LONG_DATE]], f) != OK)
        return FAULT;
    read_moment(r, row, &m);
    for (size_t i = 0; i < l->columns; i++) {
        const struct column *c = &l->column[i];
        if (c->point < 0 || row->cell[i][0] == '\0')
            continue;
        r->text.column = (int)i + 1;
        if (reader_give(r, read_cell(r, c, row->cell[i], &m), f) != OK)
            return FAULT;
    }
    return OK;
}
