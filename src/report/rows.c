/* rows: a table for programs: CSV and JSON, the columns that have a key. */
#include "report/report.h"

#include <cjson/cJSON.h>
#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

static const size_t row_bytes_most = (size_t)1 << 26;

void write_csv(FILE *out, const struct table *t)
{
    struct text line;
    text_init(&line, row_bytes_most);
    const char *comma = "";
    for (size_t i = 0; i < t->columns; i++) {
        if (t->column[i].key == NULL)
            continue;
        text_add(&line, comma);
        csv_cell(&line, t->column[i].key, true);
        comma = ",";
    }
    text_add_char(&line, '\n');
    fwrite(line.at, 1, line.length, out);
    text_free(&line);
    write_csv_rows(out, t);
}

void write_csv_rows(FILE *out, const struct table *t)
{
    struct text line;
    text_init(&line, row_bytes_most);
    for (size_t r = 0; r < t->rows; r++) {
        const char *comma = "";
        text_clear(&line);
        for (size_t i = 0; i < t->columns; i++) {
            if (t->column[i].key == NULL)
                continue;
            text_add(&line, comma);
            csv_cell(&line, t->cell[r * t->columns + i].text, true);
            comma = ",";
        }
        text_add_char(&line, '\n');
        fwrite(line.at, 1, line.length, out);
    }
    text_free(&line);
}

/* Whether the text is a number in the grammar of RFC 8259, section 6, so that it may stand as it is
 * written: 2.40 keeps its zero. 007, .5 and +3 are none and go as strings. */
static bool is_json_number(const char *s)
{
    static const char digits[] = "0123456789";
    if (*s == '-')
        s++;
    size_t whole = strspn(s, digits);
    if (whole == 0 || (whole > 1 && *s == '0'))
        return false;
    s += whole;
    if (*s == '.') {
        size_t more = strspn(++s, digits);
        if (more == 0)
            return false;
        s += more;
    }
    return *s == '\0';
}

/* libcjson says that memory ran out by giving nothing; the program then ends as arenas end it. */
static void *must(void *made)
{
    if (made == NULL) {
        fputs("weirbook: out of memory\n", stderr);
        exit(1);
    }
    return made;
}

static void add_member(cJSON *object, const char *key, const struct cell *cell)
{
    if (cell->kind == CELL_EMPTY)
        must(cJSON_AddNullToObject(object, key));
    else if (cell->kind == CELL_NUMBER && is_json_number(cell->text))
        must(cJSON_AddRawToObject(object, key, cell->text));
    else
        must(cJSON_AddStringToObject(object, key, cell->text));
}

/* One object a line: easy on people, on diff, and on memory. */
void write_json(FILE *out, const struct table *t)
{
    fputs("[", out);
    for (size_t r = 0; r < t->rows; r++) {
        cJSON *object = must(cJSON_CreateObject());
        for (size_t i = 0; i < t->columns; i++)
            if (t->column[i].key != NULL)
                add_member(object, t->column[i].key, &t->cell[r * t->columns + i]);
        char *text = must(cJSON_PrintUnformatted(object));
        fputs(r == 0 ? "\n" : ",\n", out);
        fputs(text, out);
        cJSON_free(text);
        cJSON_Delete(object);
    }
    fputs(t->rows == 0 ? "]\n" : "\n]\n", out);
}
