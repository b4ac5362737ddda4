/* remarks: what people have said of days and limits, beside the figures of a month. A remark is
 * shown; no figure and no verdict ever looks at one. */
#include "report/content.h"

#include "base/poison.h"

bool report_remark_of_row(const struct month_remark *r, const struct permit_row *row)
{
    const struct limit *l = row->limit;
    return text_equal(r->point, l->point_text) && text_equal(r->parameter, l->parameter_text) &&
           (r->statistic[0] == '\0' || text_equal(r->statistic, l->statistic_text)) &&
           r->from <= row->to && r->to >= row->from;
}

const char *report_remark_note(struct arena *a, const struct month_remark *r)
{
    return SAY(
        a, REMARK_NOTE, [PLACE_COUNT] = arena_print(a, "%ld", r->number), [PLACE_NOTE] = r->text);
}

const char *row_note(struct arena *a, const struct permit_row *row,
                     const struct month_remarks *remarks)
{
    const char *note = row->note;
    for (size_t i = 0; remarks != NULL && i < remarks->count; i++) {
        const struct month_remark *r = &remarks->at[i];
        if (report_remark_of_row(r, row))
            note = arena_print(a, "%s%s%s", note, note[0] != '\0' ? "; " : "",
                               report_remark_note(a, r));
    }
    return note;
}

static bool is_shown(const struct month_remark *r, const struct permit_month *m)
{
    if (r->from <= month_last(m->month) && r->to >= m->month)
        return true;
    for (size_t i = 0; i < m->count; i++)
        if (report_remark_of_row(r, &m->rows[i]))
            return true;
    return false;
}

static const char *remark_when(struct arena *a, const struct month_remark *r)
{
    char from[11], to[11];
    day_write(r->from, from);
    day_write(r->to, to);
    return r->from == r->to ? arena_text(a, from)
                            : SAY(a, FROM_TO, [PLACE_FROM] = from, [PLACE_TO] = to);
}

/* "EFF TSS weekly-average": what of it is named. */
static const char *remark_about(struct arena *a, const struct month_remark *r)
{
    const char *const part[] = {r->point, r->parameter, r->statistic};
    const char *about = "";
    for (size_t i = 0; i < NELEM(part); i++)
        if (part[i][0] != '\0')
            about = arena_print(a, "%s%s%s", about, about[0] != '\0' ? " " : "", part[i]);
    return about[0] != '\0' ? about : word(WORD_REMARK_ABOUT_ALL);
}

struct table *remark_table(struct arena *a, const struct permit_month *m,
                           const struct month_remarks *remarks)
{
    static const enum word titles[] = {WORD_COLUMN_REMARK, WORD_COLUMN_WHEN, WORD_COLUMN_ABOUT,
                                       WORD_COLUMN_KIND,   WORD_COLUMN_TEXT, WORD_COLUMN_WHO};
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){
            .title = word(titles[i]), .align = i == 0 ? ALIGN_RIGHT : ALIGN_LEFT, .wraps = i > 1};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; remarks != NULL && i < remarks->count; i++) {
        const struct month_remark *r = &remarks->at[i];
        if (!is_shown(r, m))
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_count(a, r->number);
        c[1] = cell_text(remark_when(a, r));
        c[2] = cell_text(remark_about(a, r));
        c[3] = cell_text(r->event[0] != '\0' ? SAY(a, REMARK_EVENT, [PLACE_WHAT] = r->event)
                                             : r->kind);
        c[4] = cell_text(r->text);
        c[5] = cell_text(r->who);
    }
    return t;
}
