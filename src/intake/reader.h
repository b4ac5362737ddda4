/* reader: one readings file on its way to the sink: what is known of it, and the checks that long
 * and wide rows share. Private to this room. */
#ifndef WEIRBOOK_INTAKE_READER_H
#define WEIRBOOK_INTAKE_READER_H

#include "intake/evidence.h"
#include "intake/intake.h"
#include "intake/names.h"

struct reader {
    struct arena *arena; /* dies with the file */
    const char *path;
    const struct plant *plant;
    const struct intake_options *options;
    const struct intake_sink *sink;
    struct intake_summary *summary;
    struct dialect dialect;
    char delimiter, decimal;
    struct lines lines;
    struct rows rows;
    struct layout layout;
    struct names points, parameters, units;
    bool gathered; /* the evidence is in */
    struct evidence evidence;
    bool ordered; /* the order of dates is settled */
    enum date_order order;
    bool years_first, dots; /* dates seen so */
    char sign;              /* '/' or '-' of dates that need an order; '\0': none seen */
    int percent;
    struct text told; /* why a row is set aside, in words */
    /* Of the row at hand: */
    struct row_text text;
    struct reading reading;
    struct detail detail;
    struct date_parts parts;
    bool parted; /* its date could be taken apart */
};

/* ---- steps of a row: each returns REASON_COUNT, or the reason with r->told saying why ---- */

/* Takes the date apart; settles the order of dates when this one needs it, which can FAULT. */
MUST_USE enum status reader_part_date(struct reader *r, const char *date, struct fault *f);
enum reason reader_day(struct reader *r, const char *date); /* after reader_part_date */
enum reason reader_minute(struct reader *r, const char *time);
/* Point, parameter and unit of the reading must stand. */
enum reason reader_unit_fits(struct reader *r, const struct unit *unit);
enum reason reader_value(struct reader *r, const char *text, struct number_style style);
/* Writes why; `text` is quoted, shortened where it is long. %s in the format stands for it. */
enum reason reader_tell(struct reader *r, enum reason reason, const char *before, const char *text,
                        const char *after);

/* ---- what becomes of a row ---- */

MUST_USE enum status reader_gather(struct reader *r, struct fault *f); /* once */
MUST_USE enum status reader_give(struct reader *r, enum reason reason, struct fault *f);
/* Sets the row aside as it stands in the file: its cells could not be told apart. */
MUST_USE enum status reader_raw_aside(struct reader *r, const struct row *row, struct fault *f);
MUST_USE enum status reader_long_row(struct reader *r, const struct row *row, struct fault *f);
MUST_USE enum status reader_wide_row(struct reader *r, const struct row *row, struct fault *f);

#endif
