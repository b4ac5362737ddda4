/* Process figures to text: see figures.h. */
#include "command/figures.h"

#include <string.h>

#include "base/poison.h"

/* "12.50000000" says no more than "12.5" in a file: zeros at the end of a decimal part are dropped
 * there. */
static void drop_zeros(char *s)
{
    if (!strchr(s, '.'))
        return;
    size_t n = strlen(s);
    while (n > 0 && s[n - 1] == '0')
        n--;
    if (n > 0 && s[n - 1] == '.')
        n--;
    s[n] = '\0';
}

const char *figure_print(struct arena *a, const struct fraction *value, int figures)
{
    if (!value)
        return "";
    int decimals = fraction_decimals_for(value, figures, ROUND_HALF_EVEN);
    char *s = fraction_print(a, value, decimals < 0 ? 0 : decimals, ROUND_HALF_EVEN);
    if (figures >= FIGURES_FILE)
        drop_zeros(s);
    return s;
}
