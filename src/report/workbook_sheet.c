/* workbook_sheet: cells, looks and page settings of a workbook's sheets. */
#include "report/workbook_sheet.h"
#include "report/layout.h"
#include "report/words.h"

#include <string.h>
#include <xlsxwriter.h>

#include "base/poison.h"

enum {
    CELL_CHARACTERS_MOST = 32000, /* a cell holds 32,767 */
    PRINT_CHARACTERS_MOST = 255,  /* of a header or footer */
    TEXT_WIDTH_MOST = 40,
    LINE_POINTS = 15, /* the height of a line in the default face */
    ROWS_ON_A_PAGE = 48,
    PAGE_CHARACTERS = 290 /* across a landscape page at the smallest size still read */
};

struct sheet_format {
    struct look look;
    lxw_format *format;
};

static void check(struct sheets *s, lxw_error error)
{
    if (s->error == 0)
        s->error = (int)error;
}

/* ---- looks ---- */

/* Bold, a border and a pale fill show on paper without colour; the word stands beside them. */
static void flag_look(lxw_format *f, enum flag flag)
{
    switch (flag) {
    case FLAG_BAD:
        format_set_bold(f);
        format_set_border(f, LXW_BORDER_MEDIUM);
        format_set_bg_color(f, 0xF8D9B0);
        format_set_font_color(f, 0x5A2A00);
        break;
    case FLAG_SHORT:
        format_set_bold(f);
        format_set_border(f, LXW_BORDER_DASHED);
        format_set_bg_color(f, 0xFCEFD8);
        break;
    case FLAG_WATCH:
        format_set_bold(f);
        break;
    case FLAG_GOOD:
        format_set_font_color(f, 0x1F4E8C);
        break;
    case FLAG_LIGHT:
        format_set_bg_color(f, 0xF0F0F0);
        break;
    default:
        break;
    }
}

static void kind_look(struct arena *a, lxw_format *f, const struct look *look)
{
    if (look->kind == LOOK_NUMBER && look->decimals > 0)
        format_set_num_format(f, arena_print(a, "0.%0*d", look->decimals, 0));
    else if (look->kind == LOOK_NUMBER)
        format_set_num_format(f, "0");
    else if (look->kind == LOOK_DATE)
        format_set_num_format(f, "yyyy-mm-dd");
    else if (look->kind == LOOK_HEADER) {
        format_set_bold(f);
        format_set_bg_color(f, 0xDDE6F0);
        format_set_bottom(f, LXW_BORDER_THIN);
        format_set_align(f, LXW_ALIGN_VERTICAL_BOTTOM);
    } else if (look->kind == LOOK_TITLE) {
        format_set_bold(f);
        format_set_font_size(f, 14);
    } else if (look->kind == LOOK_STRONG) {
        format_set_bold(f);
    }
}

static lxw_format *format_of(struct sheets *s, struct look look)
{
    for (size_t i = 0; i < s->formats; i++) {
        const struct look *l = &s->format[i].look;
        if (l->kind == look.kind && l->decimals == look.decimals && l->flag == look.flag &&
            l->right == look.right && l->wraps == look.wraps && l->indent == look.indent)
            return s->format[i].format;
    }
    struct sheet_format *made =
        arena_push(s->arena, &s->format, &s->formats, &s->room, sizeof *made);
    made->look = look;
    made->format = workbook_add_format(s->book);
    format_set_align(made->format, LXW_ALIGN_VERTICAL_TOP);
    kind_look(s->arena, made->format, &look);
    flag_look(made->format, look.flag);
    if (look.right)
        format_set_align(made->format, LXW_ALIGN_RIGHT);
    else if (look.kind == LOOK_DATE || look.indent)
        format_set_align(made->format, LXW_ALIGN_LEFT);
    if (look.indent)
        format_set_indent(made->format, 1); /* clear of a number to its left */
    if (look.wraps)
        format_set_text_wrap(made->format);
    return made->format;
}

/* ---- cells ---- */

/* At most so many characters from the start of a text. */
static const char *first_characters(struct arena *a, const char *text, size_t most)
{
    size_t count = 0;
    const char *s = text;
    for (; *s != '\0'; s++) {
        if (((unsigned char)*s & 0xC0) != 0x80 && count++ == most)
            return arena_bytes(a, text, (size_t)(s - text));
    }
    return text;
}

/* Text that is safe in a cell: valid UTF-8, no control bytes, not too long. */
static const char *safe_text(struct arena *a, const char *text)
{
    const char *escaped = layout_escape(a, text);
    const char *cut = first_characters(a, escaped, CELL_CHARACTERS_MOST);
    return cut == escaped ? escaped : SAY(a, CUT_CELL, [PLACE_NOTE] = cut);
}

/* Always as a string: a text that starts like a formula is never one. */
void sheet_text(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                const char *text, struct look look)
{
    lxw_format *format = format_of(s, look);
    if (text[0] == '\0')
        check(s, worksheet_write_blank(sheet, row, column, format));
    else
        check(s, worksheet_write_string(sheet, row, column, safe_text(s->arena, text), format));
}

static bool write_number(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row,
                         uint16_t column, const char *text, struct look look)
{
    struct decimal d;
    if (decimal_parse(text, strlen(text), &d) != DECIMAL_FINE)
        return false;
    look.kind = LOOK_NUMBER;
    look.decimals = d.scale;
    /* The text is turned into the nearest double once; nothing is worked from it. */
    double number = fraction_double(fraction_from_decimal(s->arena, d));
    check(s, worksheet_write_number(sheet, row, column, number, format_of(s, look)));
    return true;
}

static bool write_date(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                       const char *text, struct look look)
{
    day_t day = DAY_NONE;
    if (!day_parse(text, &day)) /* the library would make 30 February the first of March */
        return false;
    lxw_datetime date = {0};
    day_split(day, &date.year, &date.month, &date.day);
    look.kind = LOOK_DATE;
    check(s, worksheet_write_datetime(sheet, row, column, &date, format_of(s, look)));
    return true;
}

static void write_cell(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                       const struct cell *c, const struct column *of)
{
    struct look look = {.kind = LOOK_TEXT, .flag = c->flag};
    look.right = of->align != ALIGN_LEFT;
    look.wraps = of->wraps && !look.right;
    look.indent = !look.right;
    if (c->kind == CELL_NUMBER && write_number(s, sheet, row, column, c->text, look))
        return;
    if (c->kind == CELL_DATE && write_date(s, sheet, row, column, c->text, look))
        return;
    if (c->kind != CELL_EMPTY || c->flag != FLAG_NONE)
        sheet_text(s, sheet, row, column, c->text, look);
}

/* ---- sheets ---- */

/* Text for a header or footer, where & starts a code. */
static const char *print_text(struct arena *a, const char *text, size_t most)
{
    struct text t;
    text_init(&t, (size_t)1 << 16);
    for (const char *s = first_characters(a, layout_escape(a, text), most); *s != '\0'; s++) {
        if (*s == '&')
            text_add_char(&t, '&');
        text_add_char(&t, *s);
    }
    const char *copy = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return copy;
}

struct lxw_worksheet *sheet_new(struct sheets *s, const char *name, bool landscape)
{
    struct arena *a = s->arena;
    lxw_worksheet *sheet = workbook_add_worksheet(s->book, name);
    if (sheet == NULL) {
        check(s, LXW_ERROR_PARAMETER_VALIDATION);
        return NULL;
    }
    if (landscape)
        worksheet_set_landscape(sheet);
    enum { PAPER_LETTER = 1, PAPER_A4 = 9 };
    worksheet_set_paper(sheet, s->metric ? PAPER_A4 : PAPER_LETTER);
    worksheet_fit_to_pages(sheet, 1, 0);
    worksheet_set_margins(sheet, 0.5, 0.5, 0.75, 0.75);
    /* Every & may double: three such texts stay below the limit with room for the codes. */
    const char *head = arena_print(a, "&L%s&C%s&R%s", print_text(a, s->left, 50),
                                   print_text(a, s->middle, 40), print_text(a, name, 15));
    const char *foot = arena_print(a, "&L%s&C%s&R%s", print_text(a, s->foot_left, 40),
                                   word(WORD_PRINT_PAGE), print_text(a, s->foot_right, 40));
    if (strlen(head) < PRINT_CHARACTERS_MOST)
        check(s, worksheet_set_header(sheet, head));
    if (strlen(foot) < PRINT_CHARACTERS_MOST)
        check(s, worksheet_set_footer(sheet, foot));
    /* An outfall such as 001 is text, and no reader need warn of it. */
    check(s, worksheet_ignore_errors(sheet, LXW_IGNORE_NUMBER_STORED_AS_TEXT, "A1:XFD1048576"));
    return sheet;
}

void sheet_width(struct sheets *s, struct lxw_worksheet *sheet, uint16_t column, double width)
{
    check(s, worksheet_set_column(sheet, column, column, width, NULL));
}

/* Programs do not all work out the height of a row of wrapped text: it is said. Widths are counted
 * in digits; running text is narrower, a short bold word may be wider. */
static int lines_in(const struct sheets *s, const char *text, int width)
{
    enum { RUNNING_TEXT = 40 };
    struct lines lines;
    layout_wrap(s->arena, text, width < RUNNING_TEXT ? width : width + width / 8, &lines);
    return (int)lines.count;
}

void sheet_height(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, int lines)
{
    enum { LINES_MOST = 27 }; /* a row is 409 points at most */
    if (lines > 1)
        check(s, worksheet_set_row(sheet, row,
                                   LINE_POINTS * (lines < LINES_MOST ? lines : LINES_MOST), NULL));
}

void sheet_line(struct sheets *s, struct lxw_worksheet *sheet, uint32_t row, uint16_t column,
                int width, const char *text, struct look look)
{
    sheet_text(s, sheet, row, column, text, look);
    if (look.wraps)
        sheet_height(s, sheet, row, lines_in(s, text, width));
}

/* Half a title, for it stands on two lines; but no word of it is broken. */
static int title_width(const struct sheets *s, const char *title)
{
    int longest = (text_width(title) + 1) / 2;
    for (const char *w = title; *w != '\0'; w += strspn(w, " ")) {
        size_t length = strcspn(w, " ");
        int width = text_width(arena_bytes(s->arena, w, length));
        longest = width > longest ? width : longest;
        w += length;
    }
    return longest;
}

/* Wide enough for the cells and for half the title; long texts wrap. */
static int column_width(const struct sheets *s, const struct table *t, size_t i)
{
    int width = title_width(s, t->column[i].title);
    for (size_t r = 0; r < t->rows; r++) {
        int w = text_width(t->cell[r * t->columns + i].text);
        width = w > width ? w : width;
    }
    width += 2;
    return width > TEXT_WIDTH_MOST ? TEXT_WIDTH_MOST : width;
}

static void table_titles(struct sheets *s, struct lxw_worksheet *sheet, const struct table *t,
                         const int *width)
{
    int most = 1;
    for (size_t i = 0; i < t->columns; i++) {
        bool right = t->column[i].align != ALIGN_LEFT;
        struct look look = {.kind = LOOK_HEADER, .right = right, .wraps = true, .indent = !right};
        int lines = lines_in(s, t->column[i].title, width[i] - 1);
        most = lines > most ? lines : most;
        sheet_width(s, sheet, (uint16_t)i, width[i]);
        sheet_text(s, sheet, 0, (uint16_t)i, t->column[i].title, look);
    }
    sheet_height(s, sheet, 0, most);
}

static void table_rows(struct sheets *s, struct lxw_worksheet *sheet, const struct table *t,
                       const int *width)
{
    for (size_t r = 0; r < t->rows; r++) {
        int most = 1;
        for (size_t i = 0; i < t->columns; i++) {
            const struct cell *c = &t->cell[r * t->columns + i];
            write_cell(s, sheet, (uint32_t)r + 1, (uint16_t)i, c, &t->column[i]);
            int lines = t->column[i].wraps ? lines_in(s, c->text, width[i] - 1) : 1;
            most = lines > most ? lines : most;
        }
        sheet_height(s, sheet, (uint32_t)r + 1, most);
    }
}

void sheet_table(struct sheets *s, struct lxw_worksheet *sheet, const struct table *t, size_t fixed)
{
    if (sheet == NULL)
        return;
    int total = 0;
    int *width = arena_alloc(s->arena, t->columns * sizeof *width);
    for (size_t i = 0; i < t->columns; i++)
        total += width[i] = column_width(s, t, i);
    table_titles(s, sheet, t, width);
    table_rows(s, sheet, t, width);
    worksheet_freeze_panes(sheet, 1, (uint16_t)fixed);
    check(s, worksheet_repeat_rows(sheet, 0, 0));
    if (fixed > 0)
        check(s, worksheet_repeat_columns(sheet, 0, (uint16_t)(fixed - 1)));
    /* One page wide while that can be read; the first columns come again on each page after it. A
     * month of days stays on one page. */
    worksheet_fit_to_pages(sheet, (uint16_t)(1 + (total - 1) / PAGE_CHARACTERS),
                           t->rows <= ROWS_ON_A_PAGE);
}
