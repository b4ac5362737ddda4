/* numbers: reading with a given decimal mark, and telling which mark a file uses. */
#include "intake/numbers.h"

#include <string.h>

#include "base/poison.h"

enum { NUMBER_BYTES = 256, GROUP = 3 };
static const char minus[] = "\xe2\x88\x92";                 /* U+2212 */
static const char narrow_no_break_space[] = "\xe2\x80\xaf"; /* U+202F */

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

/* The length of a space that may stand between thousands, 0 when there is none. */
static size_t space_at(const char *s)
{
    if (*s == ' ')
        return 1;
    if (strncmp(s, "\xc2\xa0", 2) == 0)
        return 2;
    return strncmp(s, narrow_no_break_space, 3) == 0 ? 3 : 0;
}

static size_t mark_at(const char *s, char mark)
{
    if (mark == '\0')
        return 0;
    return mark == ' ' ? space_at(s) : *s == mark;
}

/* Copies the digits before the decimal mark. Once there is a mark between thousands, every group
 * but the first must have three digits. Returns where it stopped, NULL when a group is not one. */
static const char *copy_whole(const char *s, char thousands, struct text *out)
{
    size_t group = 0;
    bool marked = false;
    for (;;) {
        size_t mark = mark_at(s, thousands);
        if (is_digit(*s)) {
            group++;
            text_add_char(out, *s++);
        } else if (mark > 0 && is_digit(s[mark])) {
            if (marked ? group != GROUP : group == 0 || group > GROUP)
                return NULL;
            marked = true;
            group = 0;
            s += mark;
        } else {
            return marked && group != GROUP ? NULL : s;
        }
    }
}

/* In the spelling of decimal_parse. False when it cannot be a number. */
static bool normalize(const char *s, struct number_style style, struct text *out)
{
    if (strncmp(s, minus, 3) == 0) {
        text_add_char(out, '-');
        s += 3;
    } else if (*s == '-' || *s == '+') {
        text_add_char(out, *s++);
    }
    s = copy_whole(s, style.thousands, out);
    if (s == NULL)
        return false;
    if (*s == style.decimal) {
        text_add_char(out, '.');
        s++;
    } else if (*s == '.') {
        return false;
    }
    if (strchr(s, '.') != NULL)
        return false;
    text_add(out, s);
    return true;
}

enum decimal_problem number_read(const char *s, struct number_style style, struct decimal *out)
{
    size_t length = strlen(s);
    if (style.decimal == '.' && style.thousands == '\0' && *s != minus[0])
        return decimal_parse(s, length, out);
    struct text plain;
    text_init(&plain, length + 1);
    enum decimal_problem problem = DECIMAL_NOT_A_NUMBER;
    if (normalize(s, style, &plain))
        problem = decimal_parse(plain.at, plain.length, out);
    text_free(&plain);
    return problem;
}

/* ---- evidence ---- */

/* Digits in groups of three parted by the mark: 1,234 and 1,234,567. */
static bool is_grouped(const char *s, size_t length, char mark)
{
    size_t group = 0;
    size_t groups = 0;
    for (size_t i = 0; i < length; i++) {
        if (is_digit(s[i])) {
            group++;
            continue;
        }
        if (s[i] != mark || (groups == 0 ? group == 0 || group > GROUP : group != GROUP))
            return false;
        groups++;
        group = 0;
    }
    return groups > 0 && group == GROUP;
}

static enum number_shape one_mark(const char *s, size_t length, bool comma)
{
    bool could_be_thousands = is_grouped(s, length, comma ? ',' : '.') && s[0] != '0';
    if (could_be_thousands)
        return comma ? NUMBER_MAYBE_COMMA : NUMBER_MAYBE_POINT;
    return comma ? NUMBER_COMMA : NUMBER_POINT;
}

static enum number_shape shape(const char *s, size_t length)
{
    size_t commas = 0;
    size_t points = 0;
    size_t last = 0;
    for (size_t i = 0; i < length; i++) {
        commas += s[i] == ',';
        points += s[i] == '.';
        if (!is_digit(s[i]))
            last = i;
    }
    if (commas + points == length || commas + points == 0)
        return NUMBER_SILENT;
    if (commas + points == 1)
        return one_mark(s, length, commas == 1);
    if (points == 0)
        return is_grouped(s, length, ',') ? NUMBER_GROUPS_COMMAS : NUMBER_SILENT;
    if (commas == 0)
        return is_grouped(s, length, '.') ? NUMBER_GROUPS_POINTS : NUMBER_SILENT;
    if (s[last] == '.' && points == 1 && is_grouped(s, last, ','))
        return NUMBER_GROUPS_COMMAS;
    if (s[last] == ',' && commas == 1 && is_grouped(s, last, '.'))
        return NUMBER_GROUPS_POINTS;
    return NUMBER_SILENT;
}

enum number_shape number_shape(const char *value)
{
    const char *s = value + strcspn(value, "0123456789.,");
    size_t length = strspn(s, "0123456789.,");
    /* What stands before may be a sign or one of the words of a value, not a sentence. */
    size_t before = strcspn(value, "abcfghijklmoprstuvwxyzABCFGHIJKLMOPRSTUVWXYZ");
    if (before < (size_t)(s - value) || length > NUMBER_BYTES)
        return NUMBER_SILENT;
    const char *rest = s + length;
    if (*rest == 'e' || *rest == 'E')
        rest += 1 + strspn(rest + 1, "+-0123456789");
    return *rest == '\0' ? shape(s, length) : NUMBER_SILENT;
}
