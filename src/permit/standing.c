/* standing: six months beside the screening criteria of 40 CFR 123.45, appendix A: for monthly
 * averages in any six months, technical review means two months at or above 1.4 times the limit
 * (group I) or 1.2 times (group II), chronic four months above it by any amount; by parameter and
 * outfall. */
#include "permit/work.h"

#include "base/poison.h"

/* ---- groups ---- */

/* 40 CFR 123.45, appendix A names kinds: group I oxygen demand, solids, nutrients, detergents and
 * oils, minerals, and of metals aluminum, cobalt, iron and vanadium; group II the other metals,
 * cyanide, total residual chlorine and organics. Which parameter belongs to which kind is read from
 * those words, from memory where they leave it open (calcium hardness, alkalinity and chloride as
 * minerals; free chlorine as total). pH, bacteria, temperature and dissolved oxygen are in neither.
 */
static const struct {
    const char *parameter;
    enum pollutant_group group;
} groups[] = {
    {"BOD5", GROUP_I},    {"CBOD5", GROUP_I},      {"COD", GROUP_I},      {"TOC", GROUP_I},
    {"TSS", GROUP_I},     {"VSS", GROUP_I},        {"TDS", GROUP_I},      {"TS", GROUP_I},
    {"TURB", GROUP_I},    {"SETTLEABLE", GROUP_I}, {"NH3N", GROUP_I},     {"UIA", GROUP_I},
    {"NO2N", GROUP_I},    {"NO3N", GROUP_I},       {"NOXN", GROUP_I},     {"TKN", GROUP_I},
    {"TN", GROUP_I},      {"TP", GROUP_I},         {"PO4P", GROUP_I},     {"OG", GROUP_I},
    {"ALK", GROUP_I},     {"HARD", GROUP_I},       {"CHLORIDE", GROUP_I}, {"SO4", GROUP_I},
    {"SULFIDE", GROUP_I}, {"AL", GROUP_I},         {"CO", GROUP_I},       {"FE", GROUP_I},
    {"V", GROUP_I},       {"TRC", GROUP_II},       {"FRC", GROUP_II},     {"CN", GROUP_II},
    {"AG", GROUP_II},     {"AS", GROUP_II},        {"BA", GROUP_II},      {"BE", GROUP_II},
    {"CD", GROUP_II},     {"CR", GROUP_II},        {"CU", GROUP_II},      {"HG", GROUP_II},
    {"MN", GROUP_II},     {"MO", GROUP_II},        {"NI", GROUP_II},      {"PB", GROUP_II},
    {"SB", GROUP_II},     {"SE", GROUP_II},        {"TL", GROUP_II},      {"ZN", GROUP_II},
};

const char *const group_words[POLLUTANT_GROUPS] = {
    [GROUP_NEITHER] = "neither", [GROUP_I] = "I", [GROUP_II] = "II"};

enum pollutant_group *permit_groups(struct arena *a, const struct plant *plant)
{
    enum pollutant_group *of = arena_alloc(a, (plant->parameter_count + 1) * sizeof *of);

    for (size_t i = 0; i < plant->parameter_count; i++)
        for (size_t j = 0; j < NELEM(groups); j++)
            if (text_equal(groups[j].parameter, plant->parameters[i].id))
                of[i] = groups[j].group;
    return of;
}

/* A sum is in the group that all its parts are in. */
static enum pollutant_group group_of(const struct limit *l, const enum pollutant_group *of)
{
    for (int i = 1; i < l->parameters; i++)
        if (of[l->parameter[i]] != of[l->parameter[0]])
            return GROUP_NEITHER;
    return of[l->parameter[0]];
}

/* ---- which limits take part ---- */

/* Upper bounds with a number, over a day, a week or a month: a year's average tells nothing of six
 * months, and 1.4 times a minimum is no measure of harm. */
static bool takes_part(const struct limit *l)
{
    const struct statistic_kind *k = statistic_kind(l->statistic);

    return (l->bound == BOUND_MAX || l->bound == BOUND_BELOW) && k->window == 0 &&
           (k->span == SPAN_MONTH || k->span == SPAN_WEEK);
}

static bool is_monthly_average(const struct limit *l)
{
    const struct statistic_kind *k = statistic_kind(l->statistic);

    return k->span == SPAN_MONTH && k->window == 0 &&
           (k->measure == MEASURE_MEAN || k->measure == MEASURE_GEOMEAN);
}

/* The plant with those limits alone. */
static const struct plant *plant_of(struct arena *a, const struct plant *plant)
{
    struct plant *p = arena_alloc(a, sizeof *p);

    *p = *plant;
    p->limit_count = 0;
    p->limits = arena_alloc(a, (plant->limit_count + 1) * sizeof *p->limits);
    for (size_t i = 0; i < plant->limit_count; i++)
        if (takes_part(&plant->limits[i]) || *plant->limits[i].group != '\0')
            p->limits[p->limit_count++] = plant->limits[i];
    return p;
}

void permit_standing_needs(struct arena *a, const struct plant *plant, day_t month,
                           struct frame_span **needs, size_t *count)
{
    const struct plant *p = plant_of(a, plant);
    size_t room = 0;

    *needs = NULL;
    *count = 0;
    for (int i = 1 - STANDING_MONTHS; i <= 0; i++)
        needs_add(a, p, month_step(month, i), needs, count, &room);
}

/* ---- lines ---- */

static struct standing_line *line_of(struct arena *a, struct permit_standing *s, size_t *room,
                                     const struct limit *l)
{
    struct standing_line *line;

    for (size_t i = 0; i < s->count; i++)
        if (text_equal(s->lines[i].limit->outfall, l->outfall) &&
            text_equal(s->lines[i].limit->point_text, l->point_text) &&
            text_equal(s->lines[i].limit->parameter_text, l->parameter_text))
            return &s->lines[i];
    line = arena_push(a, &s->lines, &s->count, room, sizeof *line);
    line->limit = l;
    return line;
}

static bool at_factor(struct arena *a, const struct permit_row *row, const struct fraction *factor)
{
    const struct fraction *limit = fraction_from_decimal(a, row->limit->limit.value);

    return fraction_compare(row->rounded, fraction_multiply(a, factor, limit)) >= 0;
}

/* The figure over its limit, as compared; NULL where the limit is 0. */
static const struct fraction *ratio_of(struct arena *a, const struct permit_row *row)
{
    const struct fraction *limit = fraction_from_decimal(a, row->limit->limit.value);

    return fraction_sign(limit) == 0 ? NULL : fraction_divide(a, row->rounded, limit);
}

const struct fraction *permit_standing_factor(struct arena *a, enum pollutant_group group)
{
    if (group == GROUP_NEITHER)
        return NULL;
    return group == GROUP_I ? fraction_from_ratio(a, 7, 5) : fraction_from_ratio(a, 6, 5);
}

static void add_row(struct arena *a, struct standing_line *line, int month,
                    const struct permit_row *row)
{
    struct standing_month *m = &line->month[month];
    const struct fraction *factor = permit_standing_factor(a, line->group);
    bool exceeded = row->verdict == VERDICT_EXCEEDED;
    const struct fraction *ratio;

    if (!is_monthly_average(row->limit)) {
        m->others += exceeded;
        return;
    }
    m->limited = true;
    m->judged = m->judged || exceeded || row->verdict == VERDICT_MET ||
                row->verdict == VERDICT_NO_DISCHARGE;
    m->above = m->above || exceeded;
    if (!row->rounded)
        return;
    m->technical = m->technical || (exceeded && factor && at_factor(a, row, factor));
    ratio = ratio_of(a, row);
    if (!m->worst || (exceeded && m->worst->verdict != VERDICT_EXCEEDED) ||
        (ratio && m->ratio && exceeded == (m->worst->verdict == VERDICT_EXCEEDED) &&
         fraction_compare(ratio, m->ratio) > 0)) {
        m->worst = row;
        m->ratio = ratio;
    }
}

static void judge_line(struct standing_line *line)
{
    int above_before = 0, technical_before = 0;

    for (int i = 0; i < STANDING_MONTHS; i++) {
        const struct standing_month *m = &line->month[i];
        bool beyond = m->above || m->others > 0;

        line->above += m->above;
        line->technical += m->technical;
        line->exceeded += beyond;
        line->run = beyond ? line->run + 1 : 0;
        line->longest = line->run > line->longest ? line->run : line->longest;
        above_before += i > 0 && m->above;
        technical_before += i > 0 && m->technical;
    }
    if (line->group == GROUP_NEITHER)
        return;
    line->meets_chronic = line->above >= CHRONIC_MONTHS;
    line->meets_technical = line->technical >= TECHNICAL_MONTHS;
    line->near_chronic = !line->meets_chronic && above_before == CHRONIC_MONTHS - 1;
    line->near_technical = !line->meets_technical && technical_before == TECHNICAL_MONTHS - 1;
}

static int rank_of(const struct standing_line *l)
{
    if (l->meets_chronic || l->meets_technical)
        return 0;
    return l->near_chronic || l->near_technical ? 1 : l->exceeded > 0 ? 2 : 3;
}

/* Few lines: a stable insertion will do. */
static void put_in_order(struct standing_line *lines, size_t count)
{
    for (size_t i = 1; i < count; i++) {
        struct standing_line line = lines[i];
        size_t j = i;

        for (; j > 0 && rank_of(&lines[j - 1]) > rank_of(&line); j--)
            lines[j] = lines[j - 1];
        lines[j] = line;
    }
}

enum status permit_standing(struct arena *a, const struct frame *frame, day_t month, day_t on,
                            const enum pollutant_group *group, struct permit_standing *out,
                            struct fault *f)
{
    const struct plant *p = plant_of(a, frame_plant(frame));
    const struct frame *under = frame_under(a, frame, p);
    size_t room = 0;

    *out = (struct permit_standing){
        .first = month_step(month, 1 - STANDING_MONTHS), .month = month, .on = on};
    for (int i = 0; i < STANDING_MONTHS; i++) {
        struct permit_month m;

        if (permit_month(a, under, month_step(out->first, i), on, &m, f) != OK)
            return FAULT;
        for (size_t j = 0; j < m.count; j++) {
            struct standing_line *line;

            if (!takes_part(m.rows[j].limit))
                continue;
            line = line_of(a, out, &room, m.rows[j].limit);
            line->group = group_of(line->limit, group);
            add_row(a, line, i, &m.rows[j]);
        }
    }
    for (size_t i = 0; i < out->count; i++) {
        judge_line(&out->lines[i]);
        out->meeting += out->lines[i].meets_chronic || out->lines[i].meets_technical;
        out->exceeding += out->lines[i].exceeded > 0;
        for (int j = 0; j < STANDING_MONTHS; j++)
            out->unjudged += out->lines[i].month[j].limited && !out->lines[i].month[j].judged;
    }
    put_in_order(out->lines, out->count);
    return OK;
}
