/* workbook: the monthly summary as a workbook, from the same tables and sentences as the page. */
#include "report/content.h"
#include "report/workbook_sheet.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <unistd.h>
#include <xlsxwriter.h>

#include "base/poison.h"

/* ---- lines on sheets of text ---- */

/* Where the next line goes. */
struct next_line {
    struct sheets *sheets;
    lxw_worksheet *sheet;
    uint32_t row;
    uint16_t column;
    int width; /* of that column */
};

static void line(struct next_line *at, const char *text, struct look look)
{
    sheet_line(at->sheets, at->sheet, at->row++, at->column, at->width, text, look);
}

static void lines_of(struct next_line *at, enum word heading, const struct sentences *s)
{
    if (s->count == 0)
        return;
    at->row++;
    line(at, word(heading), (struct look){.kind = LOOK_STRONG});
    for (size_t i = 0; i < s->count; i++)
        line(at, s->at[i], (struct look){.kind = LOOK_TEXT, .wraps = true});
}

/* ---- sheets ---- */

static const char *finding_line(struct arena *a, const struct permit_row *row)
{
    const char *value[PLACES] = {
        [PLACE_NAME] = limit_name(a, row->limit),          [PLACE_FIGURE] = row_figure(a, row),
        [PLACE_LIMIT] = limit_bound(a, row->limit, true),  [PLACE_FROM] = row_when(a, row),
        [PLACE_COUNT] = arena_print(a, "%ld", row->times),
    };
    enum word said = !row->has_times   ? WORD_FINDING_BEYOND
                     : row->times == 1 ? WORD_FINDING_ONCE
                                       : WORD_FINDING_TIMES;
    return words_fill(a, said, value);
}

/* The word in the first column, the sentence beside it. */
static void finding(struct next_line *at, enum word kind, enum flag flag, const char *text)
{
    sheet_text(at->sheets, at->sheet, at->row, 0, word(kind),
               (struct look){.kind = LOOK_TEXT, .flag = flag});
    line(at, text, (struct look){.kind = LOOK_TEXT, .wraps = true, .indent = true});
}

/* Worst news first: beyond limits, short of samples, targets passed. */
static void findings(struct next_line *at, const struct permit_month *m)
{
    struct arena *a = at->sheets->arena;
    uint32_t start = at->row;
    for (size_t i = 0; i < m->count; i++)
        if (m->rows[i].verdict == VERDICT_EXCEEDED)
            finding(at, WORD_VERDICT_EXCEEDED, FLAG_BAD, finding_line(a, &m->rows[i]));
    for (size_t i = 0; i < m->count; i++)
        if (permit_shortfall(&m->rows[i], m->on))
            finding(at, WORD_SHORT, FLAG_SHORT, shortfall_line(a, &m->rows[i]));
    for (size_t i = 0; i < m->count; i++)
        if (m->rows[i].verdict == VERDICT_TARGET_PASSED)
            finding(at, WORD_VERDICT_TARGET_PASSED, FLAG_WATCH, finding_line(a, &m->rows[i]));
    if (at->row == start)
        line(at, word(WORD_NOTHING_FOUND), (struct look){.kind = LOOK_TEXT, .flag = FLAG_GOOD});
}

static void certification(struct next_line *at)
{
    static const enum word lines[] = {WORD_SIGN_NAME, WORD_SIGN_TITLE, WORD_SIGN_SIGNATURE,
                                      WORD_SIGN_DATE};
    const struct look wrapped = {.kind = LOOK_TEXT, .wraps = true};
    at->row++;
    line(at, word(WORD_HEADING_CERTIFICATION), (struct look){.kind = LOOK_STRONG});
    line(at, word(WORD_CERTIFICATION), wrapped);
    line(at, word(WORD_CERTIFICATION_FORM), wrapped);
    for (size_t i = 0; i < NELEM(lines); i++) {
        at->row++;
        line(at, word(lines[i]), (struct look){.kind = LOOK_TEXT});
    }
}

static void summary_head(struct next_line *at, const struct month_input *in)
{
    struct arena *a = at->sheets->arena;
    const struct permit_month *m = in->permit;
    enum flag flag = m->exceeded > 0 ? FLAG_BAD : m->shortfalls > 0 ? FLAG_SHORT : FLAG_GOOD;
    at->column = 0;
    line(at, title_line(a, in->plant, m), (struct look){.kind = LOOK_TITLE});
    line(at, permit_line(a, in->plant, m), (struct look){.kind = LOOK_TEXT});
    at->column = 1;
    at->row++;
    line(at, month_headline(a, m),
         (struct look){.kind = LOOK_STRONG, .flag = flag, .wraps = true, .indent = true});
    if (m->on < month_last(m->month))
        line(at, judged_line(a, m), (struct look){.kind = LOOK_TEXT, .wraps = true});
    at->row++;
}

static void summary_sheet(struct sheets *s, const struct month_input *in)
{
    enum { WORD_WIDTH = 16, LINE_WIDTH = 88, ROWS_ON_A_PAGE = 72 };
    struct arena *a = s->arena;
    struct sentences weeks = {0};
    struct sentences cautions = {0};
    struct sentences foot = {0};
    struct next_line at = {.sheets = s, .width = LINE_WIDTH};
    at.sheet = sheet_new(s, word(WORD_SHEET_SUMMARY), false);
    if (at.sheet == NULL)
        return;
    worksheet_gridlines(at.sheet, LXW_HIDE_ALL_GRIDLINES);
    sheet_width(s, at.sheet, 0, WORD_WIDTH);
    sheet_width(s, at.sheet, 1, LINE_WIDTH);
    summary_head(&at, in);
    findings(&at, in->permit);
    week_sentences(a, in->permit, &weeks);
    lines_of(&at, WORD_HEADING_WEEKS, &weeks);
    caution_sentences(a, &cautions);
    lines_of(&at, WORD_HEADING_CAUTIONS, &cautions);
    certification(&at);
    at.row++;
    footer_sentences(a, in, &foot);
    for (size_t i = 0; i < foot.count; i++)
        line(&at, foot.at[i], (struct look){.kind = LOOK_TEXT, .wraps = true});
    worksheet_fit_to_pages(at.sheet, 1, at.row <= ROWS_ON_A_PAGE); /* signed on one page */
}

static void rules_sheet(struct sheets *s, const struct month_input *in)
{
    enum { LINE_WIDTH = 100 };
    struct arena *a = s->arena;
    struct next_line at = {.sheets = s, .width = LINE_WIDTH};
    struct sentences part[5] = {{0}};
    static const enum word heading[] = {WORD_HEADING_RULES, WORD_RULES_DIFFER, WORD_HEADING_FLOWS,
                                        WORD_HEADING_METHODS, WORD_HEADING_CAUTIONS};
    at.sheet = sheet_new(s, word(WORD_SHEET_RULES), false);
    if (at.sheet == NULL)
        return;
    sheet_width(s, at.sheet, 0, LINE_WIDTH);
    line(&at, word(WORD_SHEET_RULES), (struct look){.kind = LOOK_HEADER});
    worksheet_freeze_panes(at.sheet, 1, 0);
    if (worksheet_repeat_rows(at.sheet, 0, 0) != LXW_NO_ERROR)
        s->error = LXW_ERROR_PARAMETER_VALIDATION;
    rules_sentences(a, in, &part[0]);
    rules_exceptions(a, in, &part[1]);
    flow_sentences(a, in, &part[2]);
    method_sentences(a, in, &part[3]);
    caution_sentences(a, &part[4]);
    for (size_t i = 0; i < NELEM(part); i++)
        lines_of(&at, heading[i], &part[i]);
    struct table *codes = code_table(a, in);
    for (size_t r = 0; r < codes->rows; r++) {
        const struct cell *c = codes->cell + r * codes->columns;
        if (r == 0) {
            at.row++;
            line(&at, word(WORD_HEADING_CODES), (struct look){.kind = LOOK_STRONG});
        }
        line(&at,
             SAY(a, CODE_LINE, [PLACE_DAY] = c[0].text, [PLACE_POINT] = c[1].text,
                 [PLACE_PARAMETER] = c[2].text, [PLACE_CODE] = c[3].text, [PLACE_NOTE] = c[4].text),
             (struct look){.kind = LOOK_TEXT, .wraps = true});
    }
}

static void table_sheet(struct sheets *s, enum word name, const struct table *t, size_t fixed)
{
    sheet_table(s, sheet_new(s, word(name), true), t, fixed);
}

static void all_sheets(struct sheets *s, const struct month_input *in)
{
    struct arena *a = s->arena;
    struct daily d;
    daily_make(a, in, &d);
    summary_sheet(s, in);
    table_sheet(s, WORD_SHEET_LIMITS, limits_table(a, in->permit, &in->remarks), 0);
    table_sheet(s, WORD_SHEET_DAILY, daily_table(a, &d, false), 1);
    if (in->process_count > 0)
        table_sheet(s, WORD_SHEET_PROCESS, process_by_day(a, in), 1);
    else if (in->process_months > 0)
        table_sheet(s, WORD_SHEET_PROCESS, process_summary(a, in), 0);
    table_sheet(s, WORD_SHEET_FINDINGS, findings_table(a, in->permit, &in->remarks), 0);
    const struct table *remarks = remark_table(a, in->permit, &in->remarks);
    if (remarks->rows > 0)
        table_sheet(s, WORD_SHEET_REMARKS, remarks, 0);
    table_sheet(s, WORD_SHEET_ASIDE, aside_table(a, in), 0);
    if (in->revisions > 0)
        table_sheet(s, WORD_SHEET_REVISIONS, revision_table(a, in, false), 0);
    rules_sheet(s, in);
}

/* ---- the file ---- */

/* The library's properties are not const. Noon of the printed day is the time of making: without
 * one the library would take now. */
static void set_properties(struct sheets *s, const struct month_input *in)
{
    enum { SECONDS_OF_DAY = 86400, SHORT_TEXT = 250 };
    struct arena *a = s->arena;
    lxw_doc_properties p = {
        .title = arena_text(a, title_line(a, in->plant, in->permit)),
        .subject = arena_text(a, permit_line(a, in->plant, in->permit)),
        .author = arena_print(a, "weirbook %s", in->version),
        .created = (time_t)in->printed * SECONDS_OF_DAY + SECONDS_OF_DAY / 2,
    };
    if (text_width(p.title) < SHORT_TEXT && text_width(p.subject) < SHORT_TEXT &&
        workbook_set_properties(s->book, &p) != LXW_NO_ERROR)
        s->error = LXW_ERROR_PARAMETER_VALIDATION;
}

/* The library tells of its troubles on standard error, in words of its own; ours are told once, by
 * the fault. Returns standard error's twin, or -1. */
static int quiet_begin(void)
{
    fflush(stderr);
    int kept = dup(STDERR_FILENO);
    int nowhere = open("/dev/null", O_WRONLY | O_CLOEXEC);
    if (kept >= 0 && nowhere >= 0)
        dup2(nowhere, STDERR_FILENO);
    if (nowhere >= 0)
        close(nowhere);
    return kept;
}

static void quiet_end(int kept)
{
    fflush(stderr);
    if (kept >= 0) {
        dup2(kept, STDERR_FILENO);
        close(kept);
    }
}

/* Closing writes the file, and frees the book whether that works or not. */
static enum status write_out(struct sheets *s, const struct beside *b, struct fault *f)
{
    const struct place where = {.file = b->path};
    if (s->error != 0) {
        lxw_workbook_free(s->book);
        return fault_at(f, &where, NULL, "cannot make the workbook: %s",
                        lxw_strerror((lxw_error)s->error));
    }
    errno = 0;
    int kept = quiet_begin();
    lxw_error error = workbook_close(s->book);
    int reason = errno;
    quiet_end(kept);
    if (error == LXW_NO_ERROR)
        return OK;
    return beside_fault(b, reason != 0 ? reason : EIO, f);
}

enum status report_month_workbook(struct arena *a, const struct month_input *in, const char *path,
                                  struct fault *f)
{
    enum status rc = OK;
    struct beside b;
    char printed[11];
    day_write(in->printed, printed);
    struct sheets s = {.arena = a, .metric = in->plant->metric, .left = in->plant->name};
    s.middle = arena_print(a, "%s, %s", in->plant->permit, month_title(a, in->permit->month));
    s.foot_left = SAY(a, PRINT_PRINTED, [PLACE_VERSION] = in->version, [PLACE_DAY] = printed);
    s.foot_right = in->head == NULL || in->head[0] == '\0'
                       ? ""
                       : SAY(a, PRINT_HEAD, [PLACE_HEAD] = arena_print(a, "%.16s", in->head));
    TRY(beside_open(a, path, &b, f));
    s.book = workbook_new(b.temporary);
    if (s.book == NULL) {
        rc = beside_fault(&b, ENOMEM, f);
        goto done;
    }
    set_properties(&s, in);
    all_sheets(&s, in);
    TRY(write_out(&s, &b, f));
    TRY(beside_keep(&b, f));
done:
    beside_drop(&b);
    return rc;
}
