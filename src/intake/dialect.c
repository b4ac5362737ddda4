/* dialect: reading the small file of fields and values that states a dialect. */
#include "intake/dialect.h"
#include "intake/table.h"

#include <assert.h>

#include "base/poison.h"

enum { FIELD, VALUE };
static const char *const columns[] = {"field", "value"};

enum field {
    FIELD_LAYOUT,
    FIELD_DELIMITER,
    FIELD_DECIMAL,
    FIELD_DATE_ORDER,
    FIELD_ENCODING,
    FIELD_THOUSANDS,
    FIELD_HEADER_LINE,
    FIELD_FOOTER,
    FIELDS
};
enum { WORDS_MOST = 4, HEADER_LINE_MOST = 100000 };

/* In the order of the enum; a field without words takes what its reader accepts. */
static const char *const field_names[FIELDS] = {"layout",      "delimiter", "decimal",
                                                "date_order",  "encoding",  "thousands",
                                                "header_line", "footer"};
static const struct {
    size_t count;
    const char *word[WORDS_MOST];
} field_words[FIELDS] = {
    [FIELD_LAYOUT] = {2, {"long", "wide"}},
    [FIELD_DELIMITER] = {3, {"comma", "semicolon", "tab"}},
    [FIELD_DECIMAL] = {2, {"point", "comma"}},
    [FIELD_DATE_ORDER] = {3, {"ymd", "mdy", "dmy"}},
    [FIELD_ENCODING] = {2, {"utf-8", "windows-1252"}},
    [FIELD_THOUSANDS] = {4, {"none", "point", "comma", "space"}},
};

static const char thousands[] = {'\0', '.', ',', ' '}; /* in the order of the words */

static void set_word(struct dialect *d, enum field field, int word)
{
    switch (field) {
    case FIELD_LAYOUT:
        d->layout = word == 0 ? LAYOUT_LONG : LAYOUT_WIDE;
        break;
    case FIELD_DELIMITER:
        d->delimiter = ",;\t"[word];
        break;
    case FIELD_DECIMAL:
        d->decimal = ".,"[word];
        break;
    case FIELD_DATE_ORDER:
        d->date_order = (enum date_order)(ORDER_YMD + word);
        break;
    case FIELD_ENCODING:
        d->encoding_stated = true;
        d->encoding = word == 0 ? ENCODING_UTF8 : ENCODING_WINDOWS_1252;
        break;
    case FIELD_THOUSANDS:
        d->thousands_stated = true;
        d->thousands = thousands[word];
        break;
    default:
        assert(false);
    }
}

static enum status header_line(const struct sheet *s, size_t row, long *out, struct fault *f)
{
    const char *text = sheet_cell(s, row, VALUE);
    const struct place where = sheet_place(s, row, VALUE);
    *out = 0;
    for (const char *c = text; *c >= '0' && *c <= '9' && *out <= HEADER_LINE_MOST; c++) {
        *out = *out * 10 + (*c - '0');
        if (c[1] == '\0' && *out >= 1 && *out <= HEADER_LINE_MOST)
            return OK;
    }
    return fault_at(f, &where, "write the number of the line that holds the headings",
                    "cannot read '%s' as the number of a line", text);
}

static enum status read_field(struct arena *a, const struct sheet *s, size_t row, bool seen[FIELDS],
                              struct dialect *d, struct fault *f)
{
    int field = 0;
    int word = 0;
    if (sheet_word(s, row, FIELD, field_names, FIELDS, &field, f) != OK)
        return FAULT;
    if (seen[field]) {
        const struct place where = sheet_place(s, row, FIELD);
        return fault_at(f, &where, "leave one of them out", "the field '%s' stands twice",
                        field_names[field]);
    }
    seen[field] = true;
    if (field == FIELD_HEADER_LINE)
        return header_line(s, row, &d->header_line, f);
    if (field == FIELD_FOOTER) {
        const char *text = sheet_cell(s, row, VALUE);
        d->footer = *text != '\0' ? arena_text(a, text) : NULL;
        return OK;
    }
    if (sheet_word(s, row, VALUE, field_words[field].word, field_words[field].count, &word, f) !=
        OK)
        return FAULT;
    set_word(d, (enum field)field, word);
    return OK;
}

enum status dialect_read(struct arena *a, const char *path, struct dialect *out, struct fault *f)
{
    struct sheet s;
    bool seen[FIELDS] = {false};
    *out = (struct dialect){.layout = LAYOUT_UNSTATED};
    if (path == NULL)
        return OK;
    if (sheet_read(a, path, columns, NELEM(columns), NELEM(columns), &s, f) != OK)
        return FAULT;
    for (size_t i = 0; i < s.table.rows; i++)
        if (read_field(a, &s, i, seen, out, f) != OK)
            return FAULT;
    if (out->thousands != '\0' && out->thousands == out->decimal)
        return fault_at(f, &(struct place){.file = path}, "correct one of them",
                        "'decimal' and 'thousands' cannot be the same mark");
    /* One mark that is taken leaves the other for the decimals. */
    if (out->decimal == '\0' && (out->thousands == '.' || out->thousands == ','))
        out->decimal = out->thousands == '.' ? ',' : '.';
    return OK;
}
