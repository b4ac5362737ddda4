/* fleet_page: many plants' month on one page: what could not be read, what is beyond a limit, where
 * samples are short, and how many plants are clear of both. */
#include "report/content.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum { SHARE_DECIMALS = 3 };

const char *report_limit_name(struct arena *a, const struct limit *l)
{
    return limit_name(a, l);
}

const char *report_limit_bound(struct arena *a, const struct limit *l)
{
    return limit_bound(a, l, true);
}

const char *report_row_figure(struct arena *a, const struct permit_row *row)
{
    return row_figure(a, row);
}

const char *report_row_when(struct arena *a, const struct permit_row *row)
{
    return row_when(a, row);
}

char *report_share(struct arena *a, const struct permit_row *row)
{
    const struct limit *l = row->limit;
    bool low = l->bound == BOUND_MIN || l->bound == BOUND_ABOVE;

    if (row->verdict != VERDICT_EXCEEDED && row->has_required && row->required > 0)
        return fraction_print(a,
                              fraction_from_ratio(a, row->required - row->samples, row->required),
                              SHARE_DECIMALS, ROUND_HALF_EVEN);
    if (!row->rounded || !l->limit.set)
        return arena_text(a, "");
    const struct fraction *limit = fraction_from_decimal(a, l->limit.value);
    const struct fraction *over = low ? limit : row->rounded;
    const struct fraction *under = low ? row->rounded : limit;
    if (fraction_sign(under) <= 0)
        return arena_text(a, "");
    return fraction_print(a, fraction_divide(a, over, under), SHARE_DECIMALS, ROUND_HALF_EVEN);
}

/* What cannot be said as a share (a limit of 0) is the farthest of all. */
static int by_share(const void *x, const void *y)
{
    const struct fleet_finding *left = x;
    const struct fleet_finding *right = y;
    struct decimal l;
    struct decimal r;
    bool has_left = decimal_parse(left->share, strlen(left->share), &l) == DECIMAL_FINE;
    bool has_right = decimal_parse(right->share, strlen(right->share), &r) == DECIMAL_FINE;

    if (has_left && has_right && decimal_compare(l, r) != 0)
        return -decimal_compare(l, r);
    if (has_left != has_right)
        return has_left ? 1 : -1;
    int order = strcmp(left->book, right->book);
    return order ? order : strcmp(left->what, right->what);
}

/* Several books of one name are told apart by their path. */
static const char *plant_label(const struct fleet_summary *s, const struct fleet_finding *finding)
{
    for (size_t i = 0; i < s->plant_count; i++)
        if (text_equal(s->plants[i].name, finding->plant) &&
            !text_equal(s->plants[i].book, finding->book))
            return finding->book;
    return finding->plant;
}

static void exceedances(struct page *p, const struct fleet_summary *s)
{
    static const enum word titles[] = {WORD_COLUMN_SHARE, WORD_COLUMN_PLANT,  WORD_COLUMN_WHAT,
                                       WORD_COLUMN_WHEN,  WORD_COLUMN_FIGURE, WORD_COLUMN_LIMIT,
                                       WORD_COLUMN_TIMES};
    struct column *columns = arena_alloc(p->arena, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = i > 0 && i < 6};
    columns[0].align = columns[6].align = ALIGN_RIGHT;
    struct table *t = table_new(p->arena, "", columns, NELEM(titles));
    for (size_t i = 0; i < s->finding_count; i++) {
        const struct fleet_finding *finding = &s->findings[i];
        if (!finding->exceeded)
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_number(finding->share);
        c[1] = cell_text(plant_label(s, finding));
        c[2] = cell_text(finding->what);
        c[3] = cell_text(finding->when);
        c[4] = cell_flagged(cell_text(finding->figure), FLAG_BAD);
        c[5] = cell_text(finding->limit);
        c[6] = cell_number(finding->times);
    }
    if (t->rows == 0)
        return;
    page_heading(p, word(WORD_HEADING_FLEET_EXCEEDANCES));
    page_table(p, t);
    page_line(p, FLAG_NONE, "%s", word(WORD_FLEET_SHARE));
    page_space(p);
}

static void shortfalls(struct page *p, const struct fleet_summary *s)
{
    static const enum word titles[] = {WORD_COLUMN_PLANT, WORD_COLUMN_WHAT, WORD_COLUMN_WHEN,
                                       WORD_COLUMN_TAKEN, WORD_COLUMN_REQUIRED};
    struct column *columns = arena_alloc(p->arena, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){
            .title = word(titles[i]), .wraps = i < 3, .align = i < 3 ? ALIGN_LEFT : ALIGN_RIGHT};
    struct table *t = table_new(p->arena, "", columns, NELEM(titles));
    for (size_t i = 0; i < s->finding_count; i++) {
        const struct fleet_finding *finding = &s->findings[i];
        if (finding->exceeded)
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_text(plant_label(s, finding));
        c[1] = cell_text(finding->what);
        c[2] = cell_text(finding->when);
        c[3] = cell_flagged(cell_number(finding->samples), FLAG_SHORT);
        c[4] = cell_number(finding->required);
    }
    if (t->rows == 0)
        return;
    page_heading(p, word(WORD_HEADING_FLEET_SHORTFALLS));
    page_table(p, t);
    page_space(p);
}

static void missing(struct page *p, const struct fleet_summary *s)
{
    if (s->missing_count == 0)
        return;
    page_heading(p, word(WORD_HEADING_FLEET_MISSING));
    for (size_t i = 0; i < s->missing_count; i++)
        page_line(p, FLAG_BAD, "%s: %s", s->missing[i].book, s->missing[i].why);
    page_space(p);
}

static void headline(struct page *p, const struct fleet_summary *s)
{
    struct arena *a = p->arena;
    long beyond = 0;
    long lacking = 0;
    for (size_t i = 0; i < s->plant_count; i++) {
        bool exceeded = !text_equal(s->plants[i].exceeded, "0");
        beyond += exceeded;
        lacking += !exceeded && !text_equal(s->plants[i].shortfalls, "0");
    }
    long clear = (long)s->plant_count - beyond - lacking;
    const char *said = arena_print(
        a, "%s, %s, %s", say_count(a, beyond, WORD_FLEET_BEYOND_ONE, WORD_FLEET_BEYOND_MANY),
        say_count(a, lacking, WORD_FLEET_SHORT_ONE, WORD_FLEET_SHORT_ONE),
        say_count(a, clear, WORD_FLEET_CLEAR, WORD_FLEET_CLEAR));
    if (s->missing_count > 0)
        said = arena_print(
            a, "%s, %s", said,
            say_count(a, (long)s->missing_count, WORD_FLEET_MISSING, WORD_FLEET_MISSING));
    enum flag flag = beyond > 0 || s->missing_count > 0 ? FLAG_BAD
                     : lacking > 0                      ? FLAG_SHORT
                                                        : FLAG_GOOD;
    page_line(p, flag, "%s", said);
    page_space(p);
}

struct page *report_fleet_page(struct arena *a, struct fleet_summary *s)
{
    struct page *p = page_new(a);
    const char *count = arena_print(a, "%zu", s->plant_count + s->missing_count);
    const char *value[PLACES] = {[PLACE_COUNT] = count, [PLACE_MONTH] = month_title(a, s->month)};
    page_heading(
        p, words_fill(a, s->plant_count + s->missing_count == 1 ? WORD_FLEET_ONE : WORD_FLEET_TITLE,
                      value));
    if (s->finding_count > 0)
        qsort(s->findings, s->finding_count, sizeof *s->findings, by_share);
    headline(p, s);
    missing(p, s);
    exceedances(p, s);
    shortfalls(p, s);
    page_line(p, FLAG_NONE, "%s", word(WORD_CAUTION_PERMIT));
    return p;
}
