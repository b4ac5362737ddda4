/* rules: the conventions permits differ in: their names, words and defaults, how a description sets
 * them, and the sentence a report prints for each. */
#include "plant/draft.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

#define DIGITS_MOST 9

static const char *const nondetect_words[] = {"zero", "half", "full", "median", NULL};
static const char *const sign_words[] = {"any", "all", "never", NULL};
static const char *const week_starts_words[] = {"sunday",   "monday", "tuesday",  "wednesday",
                                                "thursday", "friday", "saturday", NULL};
static const char *const week_counts_words[] = {"end",   "start",    "most-days",
                                                "split", "days-1-7", NULL};
static const char *const rounding_words[] = {"half-even", "half-up", NULL};
static const char *const digits_words[] = {"limit", "figures", NULL};
static const char *const compare_words[] = {"rounded", "raw", NULL};
static const char *const removal_words[] = {"averages", "paired", "loads", "daily", NULL};
static const char *const load_average_words[] = {"daily", "product", NULL};
static const char *const count_by_words[] = {"day", "reading", NULL};
static const char *const no_discharge_words[] = {"skip", "zero", NULL};
static const char *const dnq_words[] = {"value", "zero", "half", NULL};
static const char *const long_average_words[] = {"default", "months", "days", NULL};
static const char *const percentile_words[] = {"nearest-rank", "linear", "weibull", NULL};
static const char *const load_total_words[] = {"days", "sum", NULL};
static const char *const window_words[] = {"days", "results", NULL};

static const struct rule_info infos[RULES] = {
    [RULE_NONDETECT] = {"nondetect", RULE_IS_WORD, nondetect_words, "zero",
                        "what a less-than result counts as in averages"},
    [RULE_SIGN] = {"sign", RULE_IS_WORD, sign_words, "any",
                   "when \"<\" is printed before a figure"},
    [RULE_GEOMEAN_ZERO] = {"geomean_zero", RULE_IS_NUMBER, NULL, "1",
                           "what a zero becomes in a geometric mean"},
    [RULE_WEEK_STARTS] = {"week_starts", RULE_IS_WORD, week_starts_words, "sunday",
                          "the first day of a week"},
    [RULE_WEEK_COUNTS_IN] = {"week_counts_in", RULE_IS_WORD, week_counts_words, "end",
                             "the month a week over two months belongs to"},
    [RULE_ROUNDING] = {"rounding", RULE_IS_WORD, rounding_words, "half-even",
                       "where a dropped 5 goes"},
    [RULE_DIGITS] = {"digits", RULE_IS_DIGITS, digits_words, "limit",
                     "how many digits a figure is printed with"},
    [RULE_COMPARE] = {"compare", RULE_IS_WORD, compare_words, "rounded",
                      "whether the rounded or the exact figure meets the limit"},
    [RULE_REMOVAL] = {"removal", RULE_IS_WORD, removal_words, "averages",
                      "how a percent removal is worked"},
    [RULE_LOAD_FACTOR] = {"load_factor", RULE_IS_NUMBER, NULL, "8.34",
                          "pounds a day in one MGD at one mg/L"},
    [RULE_LOAD_AVERAGE] = {"load_average", RULE_IS_WORD, load_average_words, "daily",
                           "how an average load is worked"},
    [RULE_COUNT_BY] = {"count_by", RULE_IS_WORD, count_by_words, "day", "what one sample is"},
    [RULE_NO_DISCHARGE] = {"no_discharge", RULE_IS_WORD, no_discharge_words, "skip",
                           "what a day without discharge counts as"},
    [RULE_DNQ] = {"dnq", RULE_IS_WORD, dnq_words, "value",
                  "what a result below its reporting limit counts as"},
    [RULE_LONG_AVERAGE] = {"long_average", RULE_IS_WORD, long_average_words, "default",
                           "whether a long average is one of months or of days"},
    [RULE_PERCENTILE] = {"percentile", RULE_IS_WORD, percentile_words, "nearest-rank",
                         "how a percentile is read from the values"},
    [RULE_LOAD_TOTAL] = {"load_total", RULE_IS_WORD, load_total_words, "days",
                         "how a total load is worked"},
    [RULE_FLOW] = {"flow", RULE_IS_POINT, NULL, "",
                   "the point whose flow serves a load or removal"},
    [RULE_INFLUENT] = {"influent", RULE_IS_POINT, NULL, "", "the point a removal starts from"},
    [RULE_WINDOW] = {"window", RULE_IS_WORD, window_words, "days",
                     "what a rolling statistic looks back over"},
};

const struct rule_info *rule_info(enum rule r)
{
    assert((size_t)r < NELEM(infos));
    return &infos[r];
}

int rule_find(const char *name)
{
    for (int i = 0; i < RULES; i++)
        if (text_equal(infos[i].name, name))
            return i;
    return -1;
}

static size_t word_count(const char *const *words)
{
    size_t n = 0;

    while (words[n])
        n++;
    return n;
}

static int word_index(const char *const *words, const char *word)
{
    for (int i = 0; words[i]; i++)
        if (text_equal(words[i], word))
            return i;
    return -1;
}

void rules_default(struct rules *r)
{
    *r = (struct rules){0};
    for (int i = 0; i < RULES; i++) {
        const struct rule_info *info = &infos[i];

        r->text[i] = info->fallback;
        if (info->kind == RULE_IS_NUMBER) {
            enum decimal_problem is =
                decimal_parse(info->fallback, strlen(info->fallback), &r->number[i]);

            assert(is == DECIMAL_FINE);
            (void)is;
        } else {
            r->word[i] = info->words ? word_index(info->words, info->fallback) : -1;
        }
    }
}

void rules_inherit(struct rules *r, const struct rules *from)
{
    *r = *from;
    for (int i = 0; i < RULES; i++)
        r->own[i] = false;
}

/* ---- setting one ---- */

static bool set_digits(struct plant_draft *d, const struct plant_row *row, int column,
                       struct rules *r, const char *value)
{
    int n, word = word_index(digits_words, value);

    if (word >= 0) {
        r->word[RULE_DIGITS] = word;
        return true;
    }
    if (!whole_parse(value, DIGITS_MOST, &n)) {
        problem(d, row, column, "write limit, figures, or a number of decimals from 0 to 9",
                "no digits rule '%s'", value);
        return false;
    }
    r->word[RULE_DIGITS] = DIGITS_NUMBER;
    r->number[RULE_DIGITS] = (struct decimal){n, 0};
    return true;
}

static bool set_number(struct plant_draft *d, const struct plant_row *row, int column,
                       struct rules *r, enum rule rule, const char *value)
{
    struct decimal n;

    if (!number_in(d, row, column, value, &n))
        return false;
    if (n.coefficient <= 0) {
        problem(d, row, column, "write a number above 0", "%s '%s' is not above 0",
                infos[rule].name, value);
        return false;
    }
    r->number[rule] = n;
    return true;
}

bool rule_set(struct plant_draft *d, const struct plant_row *row, int column, struct rules *r,
              enum rule rule, const char *value)
{
    const struct rule_info *info = rule_info(rule);
    bool ok = false;

    switch (info->kind) {
    case RULE_IS_WORD:
        ok = word_in(d, row, column, arena_print(d->arena, "%s rule", info->name), value,
                     info->words, word_count(info->words), &r->word[rule]);
        break;
    case RULE_IS_DIGITS:
        ok = set_digits(d, row, column, r, value);
        break;
    case RULE_IS_NUMBER:
        ok = set_number(d, row, column, r, rule, value);
        break;
    case RULE_IS_POINT:
        ok = point_in(d, row, column, value, &r->word[rule]);
        break;
    }
    if (ok) {
        r->text[rule] = value;
        r->own[rule] = true;
    }
    return ok;
}

static const char *nearest_rule(const char *name)
{
    const char *names[RULES];

    for (size_t i = 0; i < RULES; i++)
        names[i] = infos[i].name;
    return text_nearest(name, names, RULES);
}

static bool rule_part(struct plant_draft *d, const struct plant_row *row, int column,
                      struct rules *r, const char *part)
{
    const char *pair[2];
    int rule;

    if (split(d, part, '=', pair, 2) != 2) {
        problem(d, row, column, "write name=value, such as nondetect=half, with ; between rules",
                "cannot read the rule '%s'", part);
        return false;
    }
    rule = rule_find(pair[0]);
    if (rule < 0) {
        const char *near = nearest_rule(pair[0]);

        problem(d, row, column,
                near ? arena_print(d->arena, "the nearest is '%s'", near)
                     : "weirbook-rules(7) lists the rules",
                "no rule '%s'", pair[0]);
        return false;
    }
    if (r->own[rule]) {
        problem(d, row, column, "keep one", "the rule '%s' is set twice", pair[0]);
        return false;
    }
    return rule_set(d, row, column, r, (enum rule)rule, pair[1]);
}

bool read_rules(struct plant_draft *d, const struct plant_row *row, int column, struct rules *r)
{
    const char *parts[RULES + 1];
    size_t count;
    bool ok = true;

    if (read_blank(row, column))
        return true;
    count = split(d, cell(row, column), ';', parts, NELEM(parts));
    if (count > NELEM(parts)) {
        problem(d, row, column, "name each rule once", "more rules than there are");
        return false;
    }
    for (size_t i = 0; i < count; i++) {
        if (i > 0 && i == count - 1 && *parts[i] == '\0') /* a ";" after the last one */
            break;
        ok = rule_part(d, row, column, r, parts[i]) && ok;
    }
    return ok;
}

/* What a person asks for outside a description is read as a row of limits.csv would be. */
enum status plant_rules_read(struct arena *a, const struct plant *plant, const char *where,
                             const char *text, struct rules *r, struct fault *f)
{
    struct plant_draft *d = plant_draft_new(a);
    struct plant_row row = {.file = PLANT_LIMITS, .name = where};

    d->plant = (struct plant *)plant; /* only looked into */
    row.cell[LIMIT_RULES] = text;
    if (*text == '\0')
        problem(d, &row, WHOLE_LINE, "write it as RULE=VALUE, such as nondetect=half", "no rule");
    if (read_rules(d, &row, LIMIT_RULES, r) && plant_draft_problems(d) == 0)
        return OK;
    return fault_usage(f, NULL, "%s", plant_draft_problem_at(d, 0));
}

/* ---- saying one ---- */

#define WORDS_MOST 7

/* By rule and word; "%s" takes the number as written, the weekday or the point. */
static const char *const sentences[RULES][WORDS_MOST] = {
    [RULE_NONDETECT] = {"less-than results count as zero in averages",
                        "less-than results count as half their number in averages",
                        "less-than results count as their full number in averages",
                        "an average gives way to the median when a result in it is a less-than or "
                        "not quantified"},
    [RULE_SIGN] = {"a figure is printed with \"<\" when any result in it is a less-than",
                   "a figure is printed with \"<\" only when all results in it are less-thans",
                   "figures are printed without \"<\""},
    [RULE_GEOMEAN_ZERO] = {"a zero enters a geometric mean as %s"},
    [RULE_WEEK_COUNTS_IN] = {"a week over two months counts in the month of its last day",
                             "a week over two months counts in the month of its first day",
                             "a week over two months counts in the month that holds four or more "
                             "of its days",
                             "weeks are cut at the ends of the month and each part stands alone",
                             "weeks are days 1-7, 8-14, 15-21 and 22-28; days 29 to 31 are in "
                             "no week"},
    [RULE_ROUNDING] = {"figures are rounded once, at the end; a dropped 5 goes to the even digit",
                       "figures are rounded once, at the end; a dropped 5 goes up, away from zero"},
    [RULE_DIGITS] = {"figures have as many decimals as their limit",
                     "figures have as many significant figures as their limit",
                     "figures have %s decimals"},
    [RULE_COMPARE] = {"a figure is rounded to the decimals of its limit before the two are "
                      "compared",
                      "the exact figure, not rounded, is compared with its limit"},
    [RULE_REMOVAL] = {"a removal is worked from the average influent and the average effluent, "
                      "each over its own days",
                      "a removal is worked from the averages of the days that have both influent "
                      "and effluent",
                      "a removal is worked from the average loads in and out",
                      "a removal is the average of the daily removals"},
    [RULE_LOAD_FACTOR] = {"pounds a day are MGD x mg/L x %s"},
    [RULE_LOAD_AVERAGE] = {"an average load is the mean of the daily loads",
                           "an average load is average flow times average concentration"},
    [RULE_COUNT_BY] = {"samples are counted by day: several readings on one day are one sample",
                       "samples are counted by reading: each reading is a sample"},
    [RULE_NO_DISCHARGE] = {"days without discharge are left out",
                           "days without discharge count as zero flow and zero load"},
    [RULE_DNQ] = {"results below their reporting limit count as their number",
                  "results below their reporting limit count as zero",
                  "results below their reporting limit count as half their number"},
    [RULE_LONG_AVERAGE] = {"a rolling 12-month average is the mean of monthly figures, an annual "
                           "average the mean of daily values",
                           "annual and rolling 12-month averages are means of monthly figures",
                           "annual and rolling 12-month averages are means of daily values"},
    [RULE_PERCENTILE] = {"a percentile is the value at its nearest rank",
                         "a percentile is read between ranks by straight line",
                         "a percentile is read at its rank of n + 1 by straight line (Weibull)"},
    [RULE_LOAD_TOTAL] = {"a total load is the mean daily load times the days of the period",
                         "a total load is the sum of the measured daily loads"},
    [RULE_FLOW] = {"a point without a flow of its own takes the flow of %s"},
    [RULE_INFLUENT] = {"where several influent points could serve, a removal starts from %s"},
    [RULE_WINDOW] = {"a rolling statistic looks back over calendar days",
                     "a rolling statistic looks back over the last days that have a result"},
};

const char *rule_sentence(struct arena *a, const struct rules *rules, enum rule r)
{
    const struct rule_info *info = rule_info(r);
    int word = info->kind == RULE_IS_NUMBER ? 0 : rules->word[r];
    const char *sentence, *gap;

    if (r == RULE_WEEK_STARTS)
        return arena_print(a, "weeks begin on %c%s", week_starts_words[word][0] - 'a' + 'A',
                           week_starts_words[word] + 1);
    if (r == RULE_FLOW && word < 0)
        return arena_text(a, "a load takes the flow of its own point");
    if (r == RULE_INFLUENT && word < 0)
        return arena_text(a, "a removal starts from the only influent point, or the one of the "
                             "same outfall");
    if (r == RULE_DIGITS && word == DIGITS_NUMBER && rules->number[r].coefficient == 1)
        return arena_text(a, "figures have 1 decimal");
    if (info->kind == RULE_IS_POINT)
        word = 0;
    assert(word >= 0 && word < WORDS_MOST && sentences[r][word]);
    sentence = sentences[r][word];
    gap = strstr(sentence, "%s");
    if (!gap)
        return arena_text(a, sentence);
    return arena_print(a, "%.*s%s%s", (int)(gap - sentence), sentence, rules->text[r], gap + 2);
}
