/* value: the tokens of a value: numbers, <n, >n, ND, DNQ, TNTC, E n, no-data codes. */
#include "intake/value.h"
#include "intake/intake.h"

#include <string.h>

#include "base/poison.h"

static const char *after_blanks(const char *s)
{
    for (;;) {
        if (*s == ' ' || *s == '\t')
            s++;
        else if (s[0] == '\xc2' && s[1] == '\xa0')
            s += 2;
        else
            return s;
    }
}

static char upper(char c)
{
    return c >= 'a' && c <= 'z' ? (char)(c - 'a' + 'A') : c;
}

/* What follows the word at the start of s, without blanks; NULL when another word stands there. The
 * number may stand right behind it: E12. */
static const char *after_word(const char *s, const char *word)
{
    for (; *word != '\0'; word++, s++)
        if (upper(*s) != *word)
            return NULL;
    if (upper(*s) >= 'A' && upper(*s) <= 'Z')
        return NULL;
    return after_blanks(s);
}

static const char *after_sign(const char *s, enum qualifier *qualifier)
{
    static const struct {
        const char *sign;
        enum qualifier qualifier;
    } signs[] = {
        {"<=", QUALIFIER_LESS},    {"<", QUALIFIER_LESS},    {"\xe2\x89\xa4", QUALIFIER_LESS},
        {">=", QUALIFIER_GREATER}, {">", QUALIFIER_GREATER}, {"\xe2\x89\xa5", QUALIFIER_GREATER},
    };
    for (size_t i = 0; i < NELEM(signs); i++) {
        size_t length = strlen(signs[i].sign);
        if (strncmp(s, signs[i].sign, length) == 0) {
            *qualifier = signs[i].qualifier;
            return after_blanks(s + length);
        }
    }
    return NULL;
}

static enum reason number(struct reading *r, const struct parameter *p, const char *s,
                          struct number_style style, enum qualifier qualifier)
{
    struct decimal d;
    switch (number_read(s, style, &d)) {
    case DECIMAL_NOT_A_NUMBER:
        return REASON_NOT_A_NUMBER;
    case DECIMAL_TOO_LONG:
        return REASON_TOO_MANY_DIGITS;
    case DECIMAL_FINE:
        break;
    }
    /* Only a temperature can lie below its zero. */
    if (d.coefficient < 0 && !text_equal(p->unit->kind, "temperature"))
        return REASON_NEGATIVE_VALUE;
    r->value = d;
    r->qualifier = (uint8_t)qualifier;
    return REASON_COUNT;
}

/* The parameter's own limit in the reading's unit; false where that is no decimal of 18 digits. */
static bool own_limit(const struct reading *r, const struct parameter *p,
                      const struct optional *limit, struct decimal *out)
{
    if (!limit->set)
        return false;
    *out = limit->value;
    const struct unit *unit = unit_at(r->unit);
    if (unit == p->unit)
        return true;
    if (!unit_same_kind(unit, p->unit))
        return false;
    struct arena *a = arena_new();
    struct text digits;
    text_init(&digits, 64);
    const struct fraction *own = fraction_from_decimal(a, limit->value);
    bool fine = fraction_write_all(&digits, unit_convert(a, own, p->unit, unit), 18) &&
                decimal_parse(digits.at, digits.length, out) == DECIMAL_FINE;
    text_free(&digits);
    arena_free(a);
    return fine;
}

/* A result without a number of its own: its number is a limit of the method. ND takes the mdl
 * before the rl (rules page, R14), TNTC and a bare DNQ the rl (R15, G17). */
static enum reason by_limit(struct reading *r, const struct parameter *p, enum qualifier qualifier)
{
    bool found = true;
    if (qualifier == QUALIFIER_LESS && r->has_mdl)
        r->value = r->mdl;
    else if (r->has_rl)
        r->value = r->rl;
    else
        found = (qualifier == QUALIFIER_LESS && own_limit(r, p, &p->mdl, &r->value)) ||
                own_limit(r, p, &p->rl, &r->value);
    r->qualifier = (uint8_t)qualifier;
    return found ? REASON_COUNT : REASON_NO_LIMIT_FOR_ND;
}

static enum reason code(struct reading *r, const char *s)
{
    char letter = upper(s[0]);
    if (s[0] == '\0' || s[1] != '\0' || no_data_code(letter) == NULL)
        return REASON_NOT_A_NUMBER;
    /* Below detection, not quantifiable: a number must say below what (rules page, section 7). */
    if (letter == 'B' || letter == 'Q')
        return REASON_CODE_WITHOUT_NUMBER;
    r->value = (struct decimal){0, 0};
    r->qualifier = QUALIFIER_CODE;
    r->code = letter;
    return REASON_COUNT;
}

/* Words that may or must stand alone, and those that take a number. */
static enum reason word(struct reading *r, const struct parameter *p, const char *s,
                        struct number_style style)
{
    const char *rest = after_word(s, "ND");
    if (rest != NULL && *rest == '\0')
        return by_limit(r, p, QUALIFIER_LESS);
    rest = after_word(s, "TNTC");
    if (rest != NULL && *rest == '\0')
        return by_limit(r, p, QUALIFIER_GREATER);
    rest = after_word(s, "DNQ");
    if (rest != NULL)
        return *rest == '\0' ? by_limit(r, p, QUALIFIER_DNQ_BARE)
                             : number(r, p, rest, style, QUALIFIER_DNQ);
    rest = after_word(s, "E");
    if (rest != NULL && *rest != '\0')
        return number(r, p, rest, style, QUALIFIER_ESTIMATED);
    rest = after_word(s, "CODE");
    return code(r, rest != NULL ? rest : s);
}

enum reason value_read(struct reading *r, const struct parameter *p, const char *text,
                       struct number_style style)
{
    r->text = after_blanks(text);
    r->code = '\0';
    if (*r->text == '\0')
        return REASON_BLANK_VALUE;
    char first = upper(*r->text);
    if (first >= 'A' && first <= 'Z')
        return word(r, p, r->text, style);
    if (first >= '0' && first <= '9') /* most are plain numbers */
        return number(r, p, r->text, style, QUALIFIER_PLAIN);
    enum qualifier qualifier = QUALIFIER_PLAIN;
    const char *rest = after_sign(r->text, &qualifier);
    return number(r, p, rest != NULL ? rest : r->text, style, qualifier);
}

enum reason value_limit(const char *text, struct number_style style, bool *has, struct decimal *out)
{
    *has = false;
    if (*text == '\0')
        return REASON_COUNT;
    switch (number_read(text, style, out)) {
    case DECIMAL_NOT_A_NUMBER:
        return REASON_NOT_A_NUMBER;
    case DECIMAL_TOO_LONG:
        return REASON_TOO_MANY_DIGITS;
    case DECIMAL_FINE:
        break;
    }
    *has = true;
    return out->coefficient < 0 ? REASON_NEGATIVE_VALUE : REASON_COUNT;
}

enum reason intake_value(struct reading *r, const struct parameter *p, const char *text, bool comma)
{
    return value_read(r, p, text, (struct number_style){comma ? ',' : '.', '\0'});
}
