/* row: a reading or a row set aside as a statement gives it, proved against its mark before any
 * other part of the program sees it. */
#include "book/store.h"

#include <assert.h>

#include "base/poison.h"

/* Columns of READING_COLUMNS. */
enum {
    AT_ID,
    AT_SERIES,
    AT_DAY,
    AT_MINUTE,
    AT_VERSION,
    AT_BATCH,
    AT_LINE,
    AT_QUALIFIER,
    AT_CODE,
    AT_VALUE,
    AT_COEFFICIENT,
    AT_SCALE,
    AT_DETAIL,
    AT_MARK
};

static bool is_null(sqlite3_stmt *s, int at)
{
    return sqlite3_column_type(s, at) == SQLITE_NULL;
}

static void read_numbers(sqlite3_stmt *s, struct stored *out)
{
    *out = (struct stored){
        .id = sqlite3_column_int64(s, AT_ID),
        .series = sqlite3_column_int64(s, AT_SERIES),
        .day = sqlite3_column_int64(s, AT_DAY),
        .minute = sqlite3_column_int64(s, AT_MINUTE),
        .version = sqlite3_column_int64(s, AT_VERSION),
        .batch = sqlite3_column_int64(s, AT_BATCH),
        .line = sqlite3_column_int64(s, AT_LINE),
        .qualifier = sqlite3_column_int64(s, AT_QUALIFIER),
        .has_number = !is_null(s, AT_COEFFICIENT) || !is_null(s, AT_SCALE),
        .coefficient = sqlite3_column_int64(s, AT_COEFFICIENT),
        .scale = sqlite3_column_int64(s, AT_SCALE),
        .detail = sqlite3_column_int64(s, AT_DETAIL),
        .mark = sqlite3_column_int64(s, AT_MARK),
    };
}

enum status row_read(struct book *b, struct names *n, sqlite3_stmt *s, struct stored *out,
                     struct fault *f)
{
    names_turn(n);
    read_numbers(s, out);
    out->code = is_null(s, AT_CODE) ? NULL : column_text(s, AT_CODE);
    out->value = column_text(s, AT_VALUE);
    const struct series_name *series = names_series(n, out->series);
    if (series) {
        out->point = series->point;
        out->parameter = series->parameter;
        out->sample = series->sample;
    }
    return names_common(b, n, out->detail, &out->common, f);
}

bool row_sound(struct pack *p, const struct stored *s)
{
    pack_reading(p, s);
    return pack_mark(p) == s->mark;
}

static enum status unsound(struct book *b, struct names *n, const struct stored *s, struct fault *f)
{
    const char *file = "";
    if (sqlite3_errcode(b->db) == SQLITE_NOMEM) /* a text could not be had */
        return book_fault(b, f);
    if (names_file(b, n, s->batch, &file, f) != OK)
        return FAULT;
    return book_damaged(b, f, "reading %lld (%s %s) of batch %lld, %s:%lld, is not what was loaded",
                        (long long)s->id, s->point ? s->point : "?",
                        s->parameter ? s->parameter : "?", (long long)s->batch, file,
                        (long long)s->line);
}

enum status row_reading(struct book *b, struct names *n, struct pack *p, const struct stored *s,
                        struct reading *out, struct fault *f)
{
    if (!row_sound(p, s))
        return unsound(b, n, s, f);
    const struct series_name *series = names_series(n, s->series);
    const struct common *common = s->common;
    /* What is sound was written by this program or a later one. */
    if (!series || series->plant_point < 0 || series->plant_parameter < 0)
        return book_damaged(b, f, "it has readings of %s %s, which its description does not know",
                            series ? series->point : "?", series ? series->parameter : "?");
    if (!common || common->unit < 0 || s->qualifier < 0 || s->qualifier >= QUALIFIERS)
        return book_damaged(b, f, "reading %lld has a unit or qualifier this program does not know",
                            (long long)s->id);
    *out = (struct reading){
        .day = (day_t)s->day,
        .minute = (int16_t)s->minute,
        .point = (uint16_t)series->plant_point,
        .parameter = (uint16_t)series->plant_parameter,
        .unit = (uint16_t)common->unit,
        .qualifier = (uint8_t)s->qualifier,
        .code = s->code ? s->code[0] : '\0',
        .has_mdl = common->has_mdl,
        .has_rl = common->has_rl,
        .version = (int)s->version,
        .value = {.coefficient = s->coefficient, .scale = (int8_t)s->scale},
        .mdl = common->mdl,
        .rl = common->rl,
        .text = s->value,
        .sample = s->sample,
        .detail = &common->detail,
        .line = (long)s->line,
        .id = s->id,
        .batch = s->batch,
    };
    return names_file(b, n, s->batch, &out->file, f);
}

void row_raw(sqlite3_stmt *s, struct stored_raw *out)
{
    enum { FIRST_CELL = 3, MARK = FIRST_CELL + RAW_COLUMNS };
    *out = (struct stored_raw){.id = sqlite3_column_int64(s, 0),
                               .batch = sqlite3_column_int64(s, 1),
                               .line = sqlite3_column_int64(s, 2),
                               .mark = sqlite3_column_int64(s, MARK)};
    for (int i = 0; i < RAW_COLUMNS; i++)
        out->cell[i] = column_text(s, FIRST_CELL + i);
}

void row_aside(sqlite3_stmt *s, struct stored_aside *out)
{
    enum { FIRST_CELL = 5, RAW = FIRST_CELL + LONG_COLUMNS };
    *out = (struct stored_aside){
        .id = sqlite3_column_int64(s, 0),
        .batch = sqlite3_column_int64(s, 1),
        .line = sqlite3_column_int64(s, 2),
        .column = sqlite3_column_int64(s, 3),
        .has_day = !is_null(s, 4),
        .day = sqlite3_column_int64(s, 4),
        .raw = column_text(s, RAW),
        .reason = column_text(s, RAW + 1),
        .explanation = column_text(s, RAW + 2),
        .mark = sqlite3_column_int64(s, RAW + 3),
    };
    for (int i = 0; i < LONG_COLUMNS; i++)
        out->cell[i] = column_text(s, FIRST_CELL + i);
}
