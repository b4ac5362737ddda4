/* Worked cases: a small CSV reader of the tests' own, and one way to ask and compare. */
#include "process/cases.h"

#include <stdlib.h>
#include <string.h>

/* One line into cells, in place: quotes may surround a cell and are doubled inside. */
static void split(struct arena *a, const char *line, struct case_row *row)
{
    char *to = arena_text(a, line);
    const char *from = line;
    for (size_t i = 0; i < CASE_CELLS_MOST; i++)
        row->cell[i] = "";
    for (size_t i = 0; i < CASE_CELLS_MOST; i++) {
        bool quoted = *from == '"';
        row->cell[i] = to;
        if (quoted)
            from++;
        while (*from != '\0' && (quoted || *from != ',')) {
            if (quoted && from[0] == '"' && from[1] != '"') {
                from++;
                break;
            }
            if (quoted && *from == '"')
                from++;
            *to++ = *from++;
        }
        *to++ = '\0';
        if (*from != ',')
            return;
        from++;
    }
}

bool case_file_read(struct arena *a, const char *path, struct case_file *out)
{
    char line[4096];
    size_t room = 0;
    FILE *f = fopen(path, "r");
    *out = (struct case_file){0};
    if (f == NULL)
        return false;
    for (long number = 1; fgets(line, sizeof line, f) != NULL; number++) {
        line[strcspn(line, "\r\n")] = '\0';
        struct case_row *row =
            number == 1
                ? &out->header
                : (struct case_row *)arena_push(a, &out->rows, &out->count, &room, sizeof *row);
        split(a, line, row);
        row->line = number;
    }
    fclose(f);
    return true;
}

const char *case_cell(const struct case_file *f, const struct case_row *row, const char *column)
{
    for (size_t i = 0; i < CASE_CELLS_MOST; i++)
        if (text_equal(f->header.cell[i], column))
            return row->cell[i];
    fprintf(stderr, "no column '%s'\n", column);
    exit(1);
}

/* Arguments are parted by blanks; a blank that is followed by no "name=" belongs to the value. */
static size_t words_of(struct arena *a, const char *arguments, const char **words, size_t most)
{
    char *text = arena_text(a, arguments);
    size_t count = 0;
    for (char *at = text; *at != '\0' && count < most;) {
        words[count++] = at;
        at += strcspn(at, " ");
        while (*at == ' ')
            *at++ = '\0';
    }
    return count;
}

static bool wrong(const struct case_asked *c, const char *what, const char *got)
{
    fprintf(stderr, "%s: %s %s: %s %s; expected '%s' %s within %s; source: %s\n", c->where,
            c->formula, c->arguments, what, got, c->expected, c->unit, c->within, c->source);
    return false;
}

/* Published figures carry at most one more digit of rounding than their tolerance says. */
static bool close_enough(struct arena *a, const struct fraction *got, const char *expected,
                         const char *within)
{
    const struct fraction *off = fraction_subtract(a, got, fraction_parse(a, expected));
    const struct fraction *most = fraction_parse(a, within);
    if (fraction_sign(off) < 0)
        off = fraction_subtract(a, fraction_from_int(a, 0), off);
    return fraction_compare(off, most) <= 0;
}

bool case_passes(const struct case_asked *c)
{
    struct arena *a = arena_new();
    const char *words[32];
    size_t count = words_of(a, c->arguments, words, NELEM(words));
    struct formula_result result;
    struct fault fault = {.set = false};
    enum status rc = formula_ask(a, c->formula, words, count, false, &result, &fault);
    bool ok;
    if (*c->expected == '\0') {
        ok = rc != OK && fault.set && *fault.text != '\0';
        if (!ok)
            wrong(c, "was not refused", "");
    } else if (rc != OK) {
        ok = wrong(c, "was refused:", fault.text);
    } else if (!text_equal(result.unit, c->unit)) {
        ok = wrong(c, "came in", result.unit);
    } else {
        ok = close_enough(a, result.value, c->expected, c->within);
        if (!ok)
            wrong(c, "gave", fraction_print(a, result.value, 12, ROUND_HALF_EVEN));
    }
    arena_free(a);
    return ok;
}

const char *case_path(struct arena *a, const char *env, const char *fallback, const char *path)
{
    const char *folder = getenv(env);
    return arena_print(a, "%s/%s", folder && *folder ? folder : fallback, path);
}
