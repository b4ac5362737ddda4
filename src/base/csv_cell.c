/* Cells of CSV on their way out, and the guard against text that a spreadsheet would run. */
#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static bool is_number(const char *s)
{
    struct decimal d;
    return decimal_parse(s, strlen(s), &d) != DECIMAL_NOT_A_NUMBER;
}

/* Whether a guarded byte comes first once leading apostrophes are passed over. They are, so that
 * text which had apostrophes of its own comes back with all of them. */
static bool starts_formula(const char *s)
{
    s += strspn(s, "'");
    return *s != '\0' && strchr("=+-@\t\r", *s) != NULL;
}

void csv_cell(struct text *t, const char *s, bool guard)
{
    bool quoted = strpbrk(s, ",\"\r\n") != NULL;
    if (quoted)
        text_add_char(t, '"');
    if (guard && starts_formula(s) && !is_number(s))
        text_add_char(t, '\'');
    if (!quoted) {
        text_add(t, s);
        return;
    }
    for (const char *p = s; *p != '\0'; p++) {
        if (*p == '"')
            text_add_char(t, '"');
        text_add_char(t, *p);
    }
    text_add_char(t, '"');
}

const char *csv_unguard(const char *s)
{
    return s[0] == '\'' && starts_formula(s) ? s + 1 : s;
}
