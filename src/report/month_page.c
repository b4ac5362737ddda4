/* month_page: the monthly summary as one page model, for a text of at most 100 columns. */
#include "report/content.h"
#include "report/layout.h"

#include "base/poison.h"

enum { PAGE_WIDTH = 100 };

static void list(struct page *p, const struct sentences *s)
{
    for (size_t i = 0; i < s->count; i++)
        page_line(p, FLAG_NONE, "- %s", s->at[i]);
    if (s->count > 0)
        page_space(p);
}

/* ---- daily values ---- */

static void daily_notes(struct page *p, const struct daily *d)
{
    if (d->any_beyond)
        page_line(p, FLAG_BAD, "%s", word(WORD_DAILY_STAR));
    if (d->any_less)
        page_line(p, FLAG_NONE, "%s", word(WORD_DAILY_LESS));
    if (d->any_code)
        page_line(p, FLAG_NONE, "%s", word(WORD_DAILY_CODES));
    if (d->any_geometric)
        page_line(p, FLAG_NONE, "%s", word(WORD_DAILY_GEOMETRIC));
    for (size_t i = 0; i < d->broken_count; i++)
        page_line(p, FLAG_WATCH, "%s", d->broken[i]);
}

static void daily_blocks(struct page *p, const struct month_input *in)
{
    struct daily d;
    daily_make(p->arena, in, &d);
    page_heading(p, SAY(p->arena, HEADING_DAILY, [PLACE_MONTH] = month_title(p->arena, d.first)));
    if (d.columns == 0) {
        page_line(p, FLAG_NONE, "%s", word(WORD_NO_READINGS));
        page_space(p);
        return;
    }
    daily_notes(p, &d);
    struct table **part = NULL;
    size_t parts = layout_split(p->arena, daily_table(p->arena, &d, true), 1, PAGE_WIDTH, &part);
    for (size_t i = 0; i < parts; i++) {
        page_space(p);
        page_table(p, part[i]);
    }
    page_space(p);
}

/* ---- the other parts ---- */

static void table_block(struct page *p, enum word heading, const struct table *t)
{
    if (t->rows == 0)
        return;
    page_heading(p, word(heading));
    page_table(p, t);
    page_space(p);
}

static void aside_block(struct page *p, const struct month_input *in)
{
    page_heading(p, word(WORD_HEADING_ASIDE));
    if (in->asides == 0)
        page_line(p, FLAG_NONE, "%s", word(WORD_NO_ASIDE));
    else
        page_table(p, aside_table(p->arena, in));
    page_space(p);
}

static void revision_block(struct page *p, const struct month_input *in)
{
    page_heading(p, word(WORD_HEADING_REVISIONS));
    if (in->revisions == 0)
        page_line(p, FLAG_NONE, "%s", word(WORD_NO_REVISIONS));
    else
        page_table(p, revision_table(p->arena, in, true));
    page_space(p);
}

static void rules_block(struct page *p, const struct month_input *in)
{
    struct sentences rules = {0};
    struct sentences exceptions = {0};
    rules_sentences(p->arena, in, &rules);
    rules_exceptions(p->arena, in, &exceptions);
    page_heading(p, word(WORD_HEADING_RULES));
    list(p, &rules);
    if (exceptions.count > 0) {
        page_line(p, FLAG_NONE, "%s", word(WORD_RULES_DIFFER));
        list(p, &exceptions);
    }
}

static void sentences_block(struct page *p, enum word heading, const struct sentences *s)
{
    if (s->count == 0)
        return;
    page_heading(p, word(heading));
    list(p, s);
}

static void certification_block(struct page *p)
{
    static const enum word lines[] = {WORD_SIGN_NAME, WORD_SIGN_TITLE, WORD_SIGN_SIGNATURE,
                                      WORD_SIGN_DATE};
    page_heading(p, word(WORD_HEADING_CERTIFICATION));
    page_line(p, FLAG_NONE, "%s", word(WORD_CERTIFICATION));
    page_line(p, FLAG_NONE, "%s", word(WORD_CERTIFICATION_FORM));
    for (size_t i = 0; i < NELEM(lines); i++) {
        page_space(p);
        page_line(p, FLAG_NONE, "%s", word(lines[i]));
    }
    page_space(p);
}

struct page *report_month_page(struct arena *a, const struct month_input *in)
{
    struct page *p = page_new(a);
    permit_title(p, in->plant, in->permit);
    permit_blocks(p, in->plant, in->permit, &in->remarks);
    page_break(p);
    daily_blocks(p, in);
    table_block(p, WORD_HEADING_CODES, code_table(a, in));
    table_block(p, WORD_HEADING_PROCESS, process_summary(a, in));
    aside_block(p, in);
    revision_block(p, in);
    page_break(p);
    rules_block(p, in);
    struct sentences flows = {0};
    flow_sentences(a, in, &flows);
    sentences_block(p, WORD_HEADING_FLOWS, &flows);
    struct sentences methods = {0};
    method_sentences(a, in, &methods);
    sentences_block(p, WORD_HEADING_METHODS, &methods);
    struct sentences cautions = {0};
    caution_sentences(a, &cautions);
    sentences_block(p, WORD_HEADING_CAUTIONS, &cautions);
    certification_block(p);
    struct sentences foot = {0};
    footer_sentences(a, in, &foot);
    for (size_t i = 0; i < foot.count; i++)
        page_line(p, FLAG_NONE, "%s", foot.at[i]);
    return p;
}
