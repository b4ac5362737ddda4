/* workbook_sheet: tables and lines onto the sheets of a workbook. Only workbook*.c see
 * libxlsxwriter; its types stand here by name alone. Private to this room. */
#ifndef WEIRBOOK_REPORT_WORKBOOK_SHEET_H
#define WEIRBOOK_REPORT_WORKBOOK_SHEET_H

#include "report/report.h"

struct lxw_workbook;
struct lxw_worksheet;

struct sheet_format; /* one look of cells, made once */

/* A workbook being made. The first error of the library is kept, later ones are not asked for. */
struct sheets {
    struct arena *arena;
    struct lxw_workbook *book;
    int error;
    struct sheet_format *format;
    size_t formats, room;
    bool metric;                        /* paper: A4, else US Letter */
    const char *left, *middle;          /* printed at the head of each sheet */
    const char *foot_left, *foot_right; /* and at its foot, beside the page number */
};

/* A look: what is in the cell, and how it stands out. */
struct look {
    enum { LOOK_TEXT, LOOK_NUMBER, LOOK_DATE, LOOK_HEADER, LOOK_TITLE, LOOK_STRONG } kind;
    int decimals;
    enum flag flag;
    bool right, wraps, indent;
};

struct lxw_worksheet *sheet_new(struct sheets *s, const char *name, bool landscape);
/* Writes the table from row 0 with its titles frozen and repeated in print; `fixed` columns stay at
 * the left. */
void sheet_table(struct sheets *s, struct lxw_worksheet *sheet, const struct table *t,
                 size_t fixed);
/* One line of text in a column of a row. */
void sheet_text(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                const char *text, struct look look);
/* The same over as many lines as the text needs in a column of that width. */
void sheet_line(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                int width, const char *text, struct look look);
void sheet_height(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, int lines);
void sheet_width(struct sheets *s, struct lxw_worksheet *sheet, uint16_t column, double width);

#endif
