/* reader: the checks that long and wide rows share, and what becomes of a row. */
#include "intake/reader.h"
#include "intake/value.h"

#include <string.h>

#include "base/poison.h"

enum { QUOTED_BYTES = 60 };

/* ---- words for a row set aside ---- */

/* At most QUOTED_BYTES of it, no character cut, nothing that draws on a terminal. */
static void add_quoted(struct text *t, const char *s)
{
    char part[QUOTED_BYTES + 1];
    size_t length = strlen(s);
    size_t keep = length <= QUOTED_BYTES ? length : QUOTED_BYTES;
    if (keep < length)
        while (keep > 0 && ((unsigned char)s[keep] & 0xc0) == 0x80)
            keep--;
    memcpy(part, s, keep);
    part[keep] = '\0';
    text_add_char(t, '\'');
    text_add_escaped(t, part);
    text_add(t, keep < length ? "...'" : "'");
}

enum reason reader_tell(struct reader *r, enum reason reason, const char *before, const char *text,
                        const char *after)
{
    text_clear(&r->told);
    text_add(&r->told, before);
    if (text != NULL)
        add_quoted(&r->told, text);
    text_add(&r->told, after);
    return reason;
}

/* ---- dates ---- */

enum status reader_gather(struct reader *r, struct fault *f)
{
    if (r->gathered)
        return OK;
    r->gathered = true;
    return evidence_gather(&r->lines, r->delimiter, &r->dialect, &r->layout, &r->evidence, f);
}

enum status reader_part_date(struct reader *r, const char *date, struct fault *f)
{
    r->parted = date_split(date, &r->parts);
    if (!r->parted)
        return OK;
    bool needs_order = date_needs_order(&r->parts);
    r->years_first = r->years_first || r->parts.digits[0] == 4;
    r->dots = r->dots || r->parts.separator == '.';
    if (needs_order)
        r->sign = r->parts.separator;
    if (!needs_order || r->ordered)
        return OK;
    r->ordered = true;
    if (reader_gather(r, f) != OK)
        return FAULT;
    return evidence_order(&r->evidence, r->path, &r->order, f);
}

static enum reason outside(struct reader *r, enum reason reason, const char *date, const char *what,
                           day_t bound)
{
    char iso[11];
    char after[64];
    day_write(bound, iso);
    snprintf(after, sizeof after, "%s%s", what, iso);
    return reader_tell(r, reason, "", date, after);
}

enum reason reader_day(struct reader *r, const char *date)
{
    if (*date == '\0')
        return reader_tell(r, REASON_BAD_DATE, "the date is blank", NULL, "");
    if (!r->parted)
        return reader_tell(r, REASON_BAD_DATE, "cannot read ", date, " as a date");
    bool stated = r->dialect.date_order != ORDER_UNKNOWN;
    switch (date_read(&r->parts, r->order, stated, &r->reading.day)) {
    case DATE_FINE:
        break;
    case DATE_UNREADABLE:
        return reader_tell(r, REASON_BAD_DATE, "cannot read ", date, " as a date");
    case DATE_NO_SUCH_DAY:
        return reader_tell(r, REASON_BAD_DATE, "there is no day ", date, "");
    case DATE_SHORT_YEAR:
        return reader_tell(r, REASON_BAD_DATE, "", date,
                           " has a short year; write four digits, or state date_order in a"
                           " dialect file");
    }
    if (r->reading.day > r->options->today)
        return outside(r, REASON_FUTURE_DATE, date, " is after today, ", r->options->today);
    if (r->plant->since != DAY_NONE && r->reading.day < r->plant->since)
        return outside(r, REASON_BEFORE_PLANT, date, " is before the plant's first day, ",
                       r->plant->since);
    return REASON_COUNT;
}

enum reason reader_minute(struct reader *r, const char *time)
{
    int minute = -1;
    if (!time_read(time, &minute))
        return reader_tell(r, REASON_BAD_TIME, "cannot read ", time, " as a time");
    int behind_date = r->parts.minute;
    if (minute >= 0 && behind_date >= 0 && minute != behind_date)
        return reader_tell(r, REASON_BAD_TIME, "the time ", time,
                           " is not the one behind the date");
    r->reading.minute = (int16_t)(minute >= 0 ? minute : behind_date);
    return REASON_COUNT;
}

/* ---- units and values ---- */

enum reason reader_unit_fits(struct reader *r, const struct unit *unit)
{
    int point = r->reading.point;
    int parameter = r->reading.parameter;
    const struct parameter *p = &r->plant->parameters[parameter];
    const struct meter *m = NULL;
    r->reading.unit = (uint16_t)unit_index(unit);
    if (r->plant->meter_count > 0)
        m = plant_meter(r->plant, point, parameter, r->reading.day);
    char after[160];
    if (m != NULL && m->kind == METER_TOTALIZER) {
        if (text_equal(unit->kind, "volume"))
            return REASON_COUNT;
        snprintf(after, sizeof after,
                 " is a unit of %s, the totalizer of %.32s %.32s counts a volume", unit->kind,
                 r->plant->points[point].id, p->id);
        return reader_tell(r, REASON_WRONG_UNIT, "", unit->name, after);
    }
    if (unit == p->unit || unit_same_kind(unit, p->unit))
        return REASON_COUNT;
    snprintf(after, sizeof after, " is a unit of %s, %.32s is measured in %s (%s)", unit->kind,
             p->id, p->unit->name, p->unit->kind);
    return reader_tell(r, REASON_WRONG_UNIT, "", unit->name, after);
}

static enum reason not_a_number(struct reader *r, const char *text)
{
    const char *after = " as a number";
    enum number_shape shape = number_shape(text);
    if (r->decimal == '.' && (shape == NUMBER_COMMA || shape == NUMBER_GROUPS_POINTS))
        after = " as a number: the decimal mark of the file is a point";
    else if (r->decimal == ',' && (shape == NUMBER_POINT || shape == NUMBER_GROUPS_COMMAS))
        after = " as a number: the decimal mark of the file is a comma";
    else if (shape != NUMBER_SILENT)
        after = " as a number; if its mark parts thousands, state thousands in a dialect file";
    return reader_tell(r, REASON_NOT_A_NUMBER, "cannot read ", text, after);
}

static enum reason tell_value(struct reader *r, enum reason reason, const char *text)
{
    char after[96];
    switch (reason) {
    case REASON_BLANK_VALUE:
        return reader_tell(r, reason, "the value is blank", NULL, "");
    case REASON_NOT_A_NUMBER:
        return not_a_number(r, text);
    case REASON_TOO_MANY_DIGITS:
        return reader_tell(r, reason, "", text, " has more than 18 digits");
    case REASON_NEGATIVE_VALUE:
        return reader_tell(r, reason, "", text, " is below zero");
    case REASON_NO_LIMIT_FOR_ND:
        snprintf(after, sizeof after,
                 " has no limit to stand for it, and %.32s has none of its own",
                 r->plant->parameters[r->reading.parameter].id);
        return reader_tell(r, reason, "", text, after);
    case REASON_CODE_WITHOUT_NUMBER:
        return reader_tell(r, reason, "", text, " says below a limit, but not below which");
    default:
        return reason;
    }
}

enum reason reader_value(struct reader *r, const char *text, struct number_style style)
{
    const struct parameter *p = &r->plant->parameters[r->reading.parameter];
    enum reason reason = value_read(&r->reading, p, text, style);
    return reason == REASON_COUNT ? reason : tell_value(r, reason, text);
}

/* ---- what becomes of a row ---- */

enum status reader_give(struct reader *r, enum reason reason, struct fault *f)
{
    const struct intake_sink *sink = r->sink;
    r->summary->rows++;
    if (reason == REASON_COUNT)
        return sink->reading(sink->context, &r->reading, &r->text, f);
    return sink->aside(sink->context, &r->text, reason, r->told.at, f);
}

enum status reader_raw_aside(struct reader *r, const struct row *row, struct fault *f)
{
    enum reason reason = row->problem;
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        r->text.cell[i] = "";
    r->text.line = row->line;
    r->text.column = 0;
    r->text.raw = rows_raw(&r->rows);
    if (reason != REASON_COUNT) {
        reader_tell(r, reason, row_problem(reason), NULL, "");
    } else {
        char counts[96];
        reason = REASON_WRONG_COLUMNS;
        snprintf(counts, sizeof counts, "the row has %zu cells, the header %zu", row->count,
                 r->layout.columns);
        reader_tell(r, reason, counts, NULL, "");
    }
    enum status rc = reader_give(r, reason, f);
    r->text.raw = "";
    return rc;
}
