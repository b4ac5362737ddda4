/* layout: how wide each column of a table becomes on a page of text. Private to this room. */
#ifndef WEIRBOOK_REPORT_LAYOUT_H
#define WEIRBOOK_REPORT_LAYOUT_H

#include "report/report.h"

enum { COLUMN_GAP = 2 };

struct column_layout {
    bool shown;
    int width;         /* columns of the page; 0 when not shown */
    int before, after; /* of numbers set by their point: columns before it, and from it on */
    int cells;         /* the widest cell */
    int cell_word;     /* the widest word of a cell */
    int title_word;    /* the widest word of the title */
};

/* The text of every cell of a table, escaped for a terminal, and the layout of its columns. */
struct layout {
    const struct table *table;
    const char **text; /* as table->cell */
    struct column_layout *column;
    int width; /* of the whole table; more than asked only when numbers alone do not fit */
    size_t dropped;
};

/* Fits the table into `most` columns: titles are broken first, then long texts, then columns of a
 * high rank are left out, and last of all words are broken. Numbers never are. */
void layout_make(struct arena *a, const struct table *t, int most, struct layout *out);

/* Cuts a table that is too wide into several that fit, each beginning with the first `fixed`
 * columns. Returns how many. */
size_t layout_split(struct arena *a, const struct table *t, size_t fixed, int most,
                    struct table ***out);

/* Where a number's part before the point ends: the index of the point, of the unit, or of the end;
 * -1 when the text does not start like a number ("<0.5 mg/L" does). */
int layout_point(const char *text);

/* Text cut into lines of at most `width` columns, at spaces where there are any. */
struct lines {
    const char **at;
    size_t count, room;
};
void layout_wrap(struct arena *a, const char *text, int width, struct lines *out);
const char *layout_escape(struct arena *a, const char *text);

#endif
