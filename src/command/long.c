/* Long CSV out: the value in the spelling `load` takes everywhere (decimal point, ISO date),
 * whatever the file it came from used. */
#include "command/long.h"

#include <string.h>

#include "base/poison.h"

static const char *const aside_columns[] = {"reason", "explanation", "file", "line", "column"};

void long_heading(struct text *t, bool asides)
{
    for (size_t i = 0; i < LONG_COLUMNS; i++) {
        text_add(t, i ? "," : "");
        text_add(t, long_columns[i]);
    }
    for (size_t i = 0; asides && i < NELEM(aside_columns); i++) {
        text_add_char(t, ',');
        text_add(t, aside_columns[i]);
    }
    text_add_char(t, '\n');
}

/* The sign and word before the number: "<", ">=", "DNQ ", "E "; a reading written as a word alone
 * keeps it. */
static void add_value(struct text *t, const struct reading *r)
{
    char number[24];
    decimal_write(r->value, number);
    switch ((enum qualifier)r->qualifier) {
    case QUALIFIER_PLAIN:
        text_add(t, number);
        break;
    case QUALIFIER_LESS:
    case QUALIFIER_GREATER: {
        bool less = r->qualifier == QUALIFIER_LESS;
        bool word = strpbrk(r->text, "0123456789") == NULL;
        if (word)
            text_add(t, less ? "ND" : "TNTC");
        else
            text_print(t, "%c%s%s", less ? '<' : '>', strchr(r->text, '=') ? "=" : "", number);
        break;
    }
    case QUALIFIER_DNQ:
        text_print(t, "DNQ %s", number);
        break;
    case QUALIFIER_DNQ_BARE:
        text_add(t, "DNQ");
        break;
    case QUALIFIER_ESTIMATED:
        text_print(t, "E %s", number);
        break;
    case QUALIFIER_CODE:
        text_print(t, r->code >= '0' && r->code <= '9' ? "code %c" : "%c", r->code);
        break;
    default:
        break;
    }
}

static void add_cell(struct text *t, const char *s)
{
    csv_cell(t, s, true);
    text_add_char(t, ',');
}

static void add_limit(struct text *t, bool has, struct decimal d)
{
    char number[24] = "";
    if (has)
        decimal_write(d, number);
    add_cell(t, number);
}

void long_reading(struct text *t, const struct plant *plant, const struct reading *r)
{
    char date[11], time[6];
    day_write(r->day, date);
    minute_write(r->minute, time);
    text_print(t, "%s,%s,", date, time);
    add_cell(t, plant->points[r->point].id);
    add_cell(t, plant->parameters[r->parameter].id);
    add_value(t, r);
    text_add_char(t, ',');
    add_cell(t, unit_at(r->unit)->name);
    add_cell(t, r->sample);
    add_cell(t, r->detail ? r->detail->method : "");
    add_cell(t, r->detail ? r->detail->analyst : "");
    add_cell(t, r->detail ? r->detail->collected_by : "");
    add_cell(t, r->detail ? r->detail->analyzed : "");
    add_limit(t, r->has_mdl, r->mdl);
    add_limit(t, r->has_rl, r->rl);
    csv_cell(t, r->detail ? r->detail->note : "", true);
    text_add_char(t, '\n');
}

void long_aside(struct text *t, const struct row_text *row, const char *reason,
                const char *explanation)
{
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        add_cell(t, row->cell[i] ? row->cell[i] : "");
    add_cell(t, reason);
    if (row->raw && *row->raw) {
        struct text whole;
        text_init(&whole, 1 << 20);
        text_print(&whole, "%s; the row: %s", explanation, row->raw);
        add_cell(t, whole.at);
        text_free(&whole);
    } else {
        add_cell(t, explanation);
    }
    add_cell(t, row->file ? row->file : "");
    text_print(t, "%ld,", row->line);
    if (row->column)
        text_print(t, "%d", row->column);
    text_add_char(t, '\n');
}

const char *long_place(struct arena *a, const char *file, long line)
{
    return line > 0 ? arena_print(a, "%s:%ld", file, line) : arena_text(a, file);
}
