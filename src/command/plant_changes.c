/* plant_changes: what a changed description does to days that have readings already. Their months
 * are judged by the description in force, so a limit or rule that changes without a date changes
 * what was reported; a person must hear of it and of the way out. */
#include "command/plant_changes.h"

#include "base/poison.h"

struct changes {
    struct session *session;
    day_t first, last; /* days that have readings */
    long told;
};

static const char *dates(struct arena *a, day_t from, day_t to)
{
    char first[11];
    char last[11];

    day_write(from, first);
    day_write(to, last);
    return arena_print(a, "%s to %s", first, last);
}

static void tell(struct changes *c, const char *what, day_t from, day_t to)
{
    if (c->told++ == 0)
        fputs("Days that have readings are judged anew:\n", c->session->out);
    fprintf(c->session->out, "  %s, %s\n", what, dates(c->session->arena, from, to));
}

/* ---- limits ---- */

/* Where two limits only follow their plants' rules, which differ, the plant's rule is told once. */
static bool same_rules(const struct limit *x, const struct plant *of_x, const struct limit *y,
                       const struct plant *of_y)
{
    for (size_t i = 0; i < RULES; i++) {
        bool inherited = text_equal(x->rules.text[i], of_x->rules.text[i]) &&
                         text_equal(y->rules.text[i], of_y->rules.text[i]);

        if (!inherited && !text_equal(x->rules.text[i], y->rules.text[i]))
            return false;
    }
    return true;
}

static bool same_season(const struct season *x, const struct season *y)
{
    return x->set == y->set &&
           (!x->set || (x->from_month == y->from_month && x->from_date == y->from_date &&
                        x->to_month == y->to_month && x->to_date == y->to_date));
}

static bool same_optional(const struct optional *x, const struct optional *y)
{
    return x->set == y->set && (!x->set || decimal_compare(x->value, y->value) == 0);
}

/* All but the dates in force, names and notes. */
static bool same_limit(const struct limit *x, const struct limit *y)
{
    return text_equal(x->outfall, y->outfall) && text_equal(x->point_text, y->point_text) &&
           text_equal(x->parameter_text, y->parameter_text) && x->basis == y->basis &&
           text_equal(x->statistic_text, y->statistic_text) && x->bound == y->bound &&
           text_equal(x->limit_text, y->limit_text) && x->unit == y->unit &&
           same_season(&x->season, &y->season) &&
           text_equal(x->when.set ? x->when.text : "", y->when.set ? y->when.text : "") &&
           text_equal(x->samples.text, y->samples.text) && x->sample == y->sample &&
           x->allowed_kind == y->allowed_kind &&
           (x->allowed_kind != ALLOWED_COUNT && x->allowed_kind != ALLOWED_PERCENT
                ? true
                : decimal_compare(x->allowed, y->allowed) == 0) &&
           same_optional(&x->ceiling, &y->ceiling) && text_equal(x->group, y->group);
}

static bool holds(const struct limit *l, day_t day)
{
    return (l->from == DAY_NONE || day >= l->from) && (l->to == DAY_NONE || day <= l->to);
}

static bool held_by(const struct plant *there, const struct plant *here, const struct limit *l,
                    day_t day)
{
    for (size_t i = 0; i < there->limit_count; i++) {
        const struct limit *other = &there->limits[i];

        if (holds(other, day) && same_limit(other, l) && same_rules(other, there, l, here))
            return true;
    }
    return false;
}

static const char *limit_words(struct arena *a, const struct limit *l)
{
    return arena_print(a, "%s %s %s %s %s%s%s%s%s", l->point_text, l->parameter_text,
                       basis_words[l->basis], l->statistic_text, bound_words[l->bound],
                       *l->limit_text ? " " : "", l->limit_text, *l->unit_text ? " " : "",
                       l->unit_text);
}

/* Limits of `here` that `there` has not, each with the days that have readings and lack it: the
 * first and the last of them. Days are looked at where a date in force may change something. */
static void tell_limits(struct changes *c, const struct plant *here, const struct plant *there,
                        const char *verb)
{
    for (size_t i = 0; i < here->limit_count; i++) {
        const struct limit *l = &here->limits[i];
        day_t from = l->from != DAY_NONE && l->from > c->first ? l->from : c->first;
        day_t to = l->to != DAY_NONE && l->to < c->last ? l->to : c->last;
        day_t first = DAY_NONE;
        day_t last = DAY_NONE;

        for (day_t day = from; day <= to; day++) {
            if (held_by(there, here, l, day))
                continue;
            first = first == DAY_NONE ? day : first;
            last = day;
        }
        if (first != DAY_NONE)
            tell(c,
                 arena_print(c->session->arena, "%s: %s", verb, limit_words(c->session->arena, l)),
                 first, last);
    }
}

/* ---- rules of the plant and its parameters ---- */

static void tell_rules(struct changes *c, const struct plant *old, const struct plant *new)
{
    struct arena *a = c->session->arena;

    for (size_t r = 0; r < RULES; r++)
        if (!text_equal(old->rules.text[r], new->rules.text[r]))
            tell(c,
                 arena_print(a, "rule %s: '%s' before, '%s' now", rule_info((enum rule)r)->name,
                             old->rules.text[r], new->rules.text[r]),
                 c->first, c->last);
}

void plant_changes_tell(struct session *s, const struct plant *old, const struct plant *new,
                        day_t first, day_t last)
{
    struct changes c = {.session = s, .first = first, .last = last};

    if (first == DAY_NONE)
        return;
    tell_rules(&c, old, new);
    tell_limits(&c, old, new, "no longer");
    tell_limits(&c, new, old, "now");
    if (c.told > 0)
        fputs(
            "To keep what was reported, apply a description that leaves the old row, with the date "
            "it ends in\ncolumn 'to', and gives the new one the date it begins in column 'from'.\n",
            s->out);
}
