/* cells: one cell at a time: blank or not, a word, a number, a day, a unit, a name. */
#include "plant/draft.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

#define ID_BYTES_MOST 40

const char *cell(const struct plant_row *row, int column)
{
    assert(column >= 0 && column < PLANT_COLUMNS_MOST);
    return row->cell[column] ? row->cell[column] : "";
}

bool read_blank(const struct plant_row *row, int column)
{
    return *cell(row, column) == '\0';
}

const char *layout_column(const struct plant_row *row, int column)
{
    return plant_layout(row->file)->column[column];
}

bool read_given(struct plant_draft *d, const struct plant_row *row, int column)
{
    if (!read_blank(row, column))
        return true;
    problem(d, row, column, "fill it in", "%s is blank", layout_column(row, column));
    return false;
}

const char *one_of(struct plant_draft *d, const char *const *words, size_t count)
{
    struct text t;
    char *list;

    text_init(&t, 800);
    text_add(&t, "write one of ");
    for (size_t i = 0; i < count; i++)
        text_print(&t, "%s%s", i > 0 ? ", " : "", words[i]);
    list = arena_text(d->arena, t.at);
    text_free(&t);
    return list;
}

/* What to do about a word nobody knows. */
static const char *hint(struct plant_draft *d, const char *nearest, const char *otherwise)
{
    return nearest ? arena_print(d->arena, "the nearest is '%s'", nearest) : otherwise;
}

bool word_in(struct plant_draft *d, const struct plant_row *row, int column, const char *what,
             const char *word, const char *const *words, size_t count, int *out)
{
    const char *near;

    for (size_t i = 0; i < count; i++) {
        if (text_equal(words[i], word)) {
            *out = (int)i;
            return true;
        }
    }
    if (*word == '\0') {
        problem(d, row, column, one_of(d, words, count), "%s is blank", what);
        return false;
    }
    near = text_nearest(word, words, count);
    problem(d, row, column, near ? hint(d, near, NULL) : one_of(d, words, count), "no %s '%s'",
            what, word);
    return false;
}

bool read_word(struct plant_draft *d, const struct plant_row *row, int column, const char *what,
               const char *const *words, size_t count, int *out)
{
    return word_in(d, row, column, what, cell(row, column), words, count, out);
}

bool number_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
               struct decimal *out)
{
    switch (decimal_parse(text, strlen(text), out)) {
    case DECIMAL_FINE:
        return true;
    case DECIMAL_TOO_LONG:
        problem(d, row, column, "shorten it", "'%s' has more than 18 digits", text);
        return false;
    case DECIMAL_NOT_A_NUMBER:
        break;
    }
    problem(d, row, column, "write digits, with a point before the decimals",
            "cannot read '%s' as a number", text);
    return false;
}

bool read_number(struct plant_draft *d, const struct plant_row *row, int column,
                 struct optional *out)
{
    *out = (struct optional){0};
    if (read_blank(row, column))
        return true;
    out->set = number_in(d, row, column, cell(row, column), &out->value);
    return out->set;
}

bool read_positive(struct plant_draft *d, const struct plant_row *row, int column,
                   struct optional *out)
{
    if (!read_number(d, row, column, out))
        return false;
    if (!out->set || out->value.coefficient > 0)
        return true;
    problem(d, row, column, "write a number above 0", "%s '%s' is not above 0",
            layout_column(row, column), cell(row, column));
    return false;
}

bool whole_parse(const char *text, int most, int *out)
{
    int n = 0;

    if (*text == '\0')
        return false;
    for (; *text != '\0'; text++) {
        if (*text < '0' || *text > '9')
            return false;
        n = n * 10 + (*text - '0');
        if (n > most)
            return false;
    }
    *out = n;
    return true;
}

bool read_whole(struct plant_draft *d, const struct plant_row *row, int column, int least, int most,
                int *out)
{
    int n;

    if (read_blank(row, column))
        return true;
    if (!whole_parse(cell(row, column), most, &n) || n < least) {
        problem(d, row, column,
                arena_print(d->arena, "write a whole number from %d to %d", least, most),
                "cannot take '%s' as %s", cell(row, column), layout_column(row, column));
        return false;
    }
    *out = n;
    return true;
}

bool read_day(struct plant_draft *d, const struct plant_row *row, int column, day_t *out)
{
    *out = DAY_NONE;
    if (read_blank(row, column) || day_parse(cell(row, column), out))
        return true;
    *out = DAY_NONE;
    problem(d, row, column, "write an existing day as YYYY-MM-DD, such as 2025-03-31",
            "cannot read '%s' as a date", cell(row, column));
    return false;
}

bool read_days(struct plant_draft *d, const struct plant_row *row, int from_column, day_t *from,
               day_t *to)
{
    bool ok = read_day(d, row, from_column, from);

    ok = read_day(d, row, from_column + 1, to) && ok;
    if (!ok || *from == DAY_NONE || *to == DAY_NONE || *from <= *to)
        return ok;
    problem(d, row, from_column + 1, "put the earlier day under from", "to %s lies before from %s",
            cell(row, from_column + 1), cell(row, from_column));
    return false;
}

bool unit_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
             const struct unit **out)
{
    const char *near;

    *out = unit_find(text);
    if (*out)
        return true;
    near = unit_nearest(text);
    problem(d, row, column, hint(d, near, "write a known unit, such as mg/L, MGD or lb/d"),
            "no unit '%s'", text);
    return false;
}

bool point_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
              int *out)
{
    *out = plant_point(d->plant, text);
    if (*out >= 0)
        return true;
    if (d->plant->point_count > 0) /* without any, that alone is the problem to tell */
        problem(d, row, column,
                hint(d, plant_nearest_point(d->plant, text), "add it to points.csv"),
                "no point '%s'", text);
    return false;
}

bool parameter_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
                  int *out)
{
    *out = plant_parameter(d->plant, text);
    if (*out >= 0)
        return true;
    problem(d, row, column,
            hint(d, plant_nearest_parameter(d->plant, text), "add it to parameters.csv"),
            "no parameter '%s'", text);
    return false;
}

/* Wide headers join point and parameter by a blank, sums by "+", rules by ";" and "=", flow
 * directions by ">", sheets and reports bracket the unit: none of these may stand inside a name. A
 * name that begins with a sign could be taken for a formula by a spreadsheet. */
bool read_id(struct plant_draft *d, const struct plant_row *row, int column)
{
    const char *id = cell(row, column);
    unsigned char first = (unsigned char)*id;
    bool opens = (first >= '0' && first <= '9') || (first >= 'A' && first <= 'Z') ||
                 (first >= 'a' && first <= 'z') || first >= 0x80;

    if (!read_given(d, row, column))
        return false;
    if (strlen(id) > ID_BYTES_MOST) {
        problem(d, row, column, "keep it to 40 letters, and put the rest under name",
                "%s '%.60s' is too long", layout_column(row, column), id);
        return false;
    }
    for (const char *s = id; opens && *s != '\0'; s++)
        opens = (unsigned char)*s > ' ' && *s != 0x7F && !strchr("+,;:=<>[]|\"'`", *s);
    if (!opens)
        problem(d, row, column, "begin with a letter or digit, and use letters, digits, - _ . /",
                "cannot use '%s' as the name of a %s", id, layout_column(row, column));
    return opens;
}

size_t split(struct plant_draft *d, const char *text, char sign, const char **parts, size_t most)
{
    size_t count = 0;

    for (const char *s = text;; s++) {
        const char *begin, *end;

        while (*s == ' ')
            s++;
        begin = s;
        while (*s != '\0' && *s != sign)
            s++;
        for (end = s; end > begin && end[-1] == ' '; end--)
            ;
        if (sign == ' ' && begin == end) /* nothing more after the last blank */
            return count;
        if (count == most)
            return most + 1;
        parts[count++] = arena_bytes(d->arena, begin, (size_t)(end - begin));
        if (*s == '\0')
            return count;
    }
}
