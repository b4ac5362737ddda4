/* sample: see sample.h. The numbers are invented; the tests say where what they expect comes from.
 */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <dirent.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "sample.h"

enum { LINE_BYTES = 1024, OUTPUT_BYTES = 1 << 24 };

day_t sample_day(const char *iso)
{
    day_t day = DAY_NONE;
    if (!day_parse(iso, &day))
        fail_msg("no such day: %s", iso);
    return day;
}

/* ---- a plant ---- */

struct plant_draft *sample_draft(struct arena *a)
{
    return plant_draft_new(a);
}

void sample_rows(struct plant_draft *d, enum plant_file file, const char *rows)
{
    long line = 2;
    while (*rows != '\0') {
        char cells[LINE_BYTES];
        size_t length = strcspn(rows, "\n");
        struct plant_row row = {.file = file, .name = plant_layout(file)->file, .line = line++};
        if (length >= sizeof cells)
            fail_msg("a row is too long");
        memcpy(cells, rows, length);
        cells[length] = '\0';
        size_t n = 0;
        for (char *s = cells; s != NULL && n < PLANT_COLUMNS_MOST; n++) {
            row.cell[n] = s;
            row.at[n] = (int)n + 1;
            s = strchr(s, '|');
            if (s != NULL)
                *s++ = '\0';
        }
        plant_draft_add(d, &row);
        rows += length;
        rows += *rows == '\n';
    }
}

struct plant *sample_finish(struct plant_draft *d)
{
    struct plant *p = NULL;
    struct fault f = {0};
    if (plant_draft_finish(d, &p, &f) != OK)
        fail_msg("%s", f.text);
    return p;
}

static const char fields[] = "name|Quill Ford Wastewater Plant\npermit|XX0012345\n"
                             "receiving_water|Quill Creek\nunits|us\n";
static const char points[] = "INF|Raw influent|influent|\nEFF|Final effluent|effluent|001\n";
static const char parameters[] =
    "FLOW|Flow|MGD|3|mean|arithmetic|50050|0|1000||\n"
    "BOD5|Oxygen demand|mg/L|1|mean|arithmetic|00310|0|20000||\n"
    "TSS|Suspended solids|mg/L|1|mean|arithmetic|00530|0|100000||\n"
    "CL2|Residual chlorine|mg/L|3|max|arithmetic|50060|0|100||\n"
    "PH|pH|pH|1|mean|arithmetic|00400|0|14||\n"
    "ECOLI|E. coli|MPN/100mL|0|geometric|geometric|51040|0|9999999||\n";
static const char limits[] =
    "001|EFF|BOD5|concentration|monthly-average|max|30|mg/L|||||||||||"
    "=HYPERLINK(\"x\") is a note\n"
    "001|EFF|TSS|concentration|weekly-average|max|45|mg/L|||||3/week|composite\n"
    "001|EFF|TSS|load|monthly-average|max|625|lb/d\n"
    "001|EFF|BOD5|removal|monthly-average|min|85|%\n"
    "001|EFF|CL2|concentration|daily|max|0.019|mg/L|||||1/day|grab\n"
    "001|EFF|PH|concentration|instantaneous|min|6.0|pH\n"
    "001|EFF|ECOLI|concentration|monthly-geomean|max|126|MPN/100mL||||||||||nondetect=full\n"
    "001|EFF|ECOLI|concentration|monthly-samples|max|410|MPN/100mL|||||||10%\n"
    "001|EFF|FLOW|flow|monthly-average|report||MGD\n"
    "001|EFF|TSS|concentration|daily|target|20|mg/L\n";

/* ---- readings ---- */

void sample_reading(struct arena *a, struct frame *frame, const char *point, const char *parameter,
                    day_t day, const char *value)
{
    static const struct detail plain = {"SM 5210 B", "", "", "", ""};
    static const struct detail bare = {"", "", "", "", "sampler failed"};
    const struct plant *plant = frame_plant(frame);
    int p = plant_point(plant, point);
    int q = plant_parameter(plant, parameter);
    if (p < 0 || q < 0)
        fail_msg("no such column: %s %s", point, parameter);
    struct reading r = {.day = day,
                        .minute = -1,
                        .point = (uint16_t)p,
                        .parameter = (uint16_t)q,
                        .unit = (uint16_t)unit_index(plant->parameters[q].unit),
                        .text = arena_text(a, value),
                        .sample = "",
                        .detail = text_equal(parameter, "BOD5") ? &plain : &bare,
                        .file = "march.csv",
                        .line = 2};
    const char *digits = value;
    if (strncmp(value, "code ", 5) == 0) {
        r.qualifier = QUALIFIER_CODE;
        r.code = value[5];
        digits = "0";
    } else if (value[0] == '<' || value[0] == '>') {
        r.qualifier = value[0] == '<' ? QUALIFIER_LESS : QUALIFIER_GREATER;
        digits = value + 1;
    }
    if (decimal_parse(digits, strlen(digits), &r.value) != DECIMAL_FINE)
        fail_msg("not a value: %s", value);
    frame_add(frame, &r);
}

/* A month with a week of high solids (16 to 22), a chlorine spike, a lost sample, less-thans. */
static void fill(struct arena *a, struct frame *frame, day_t first, day_t last)
{
    day_t month = sample_day("2025-03-01");
    for (day_t day = first; day <= last; day++) {
        int n = day - month;
        bool storm = n >= 15 && n <= 21;
        sample_reading(a, frame, "EFF", "FLOW", day,
                       arena_print(a, "%d.%03d", storm ? 4 : 2, 100 + 7 * ((n + 31) % 13)));
        sample_reading(a, frame, "EFF", "CL2", day,
                       n == 17  ? "0.031"
                       : n == 9 ? "code E"
                                : "<0.010");
        sample_reading(a, frame, "EFF", "PH", day, arena_print(a, "%d.%d", 6, 8 + n % 2));
        if (day_weekday(day) != MONDAY && day_weekday(day) != WEDNESDAY &&
            day_weekday(day) != FRIDAY)
            continue;
        sample_reading(a, frame, "INF", "BOD5", day, arena_print(a, "%d", 180 + n));
        sample_reading(a, frame, "EFF", "BOD5", day, n % 5 == 2 ? "<2.0" : "6.5");
        sample_reading(a, frame, "EFF", "TSS", day,
                       arena_print(a, "%d", storm ? 48 + n - 15 : 8 + (n + 31) % 5));
        if (n % 4 == 0)
            sample_reading(a, frame, "EFF", "ECOLI", day, n == 16 ? ">2420" : "12");
    }
}

static const struct month_aside aside[] = {
    {"march.csv", "not-a-number", "correct the value, or write ND with its limit", "2025-03-07",
     "EFF", "BOD5", "=1O.2", 41, 5},
    {"march.csv", "unknown-point", "correct the point, or add it to points.csv", "2025-03-09",
     "@EFL", "TSS", "12", 57, 3},
};
static const struct month_revision revision[] = {
    {"2025-03-05", "EFF", "TSS", "88", "8.8", "mg/L", "lab", "2025-04-02T09:10:11Z",
     "+decimal point lost in copying", "march-corrected.csv", 12},
};

static void add_process(struct sample *s)
{
    struct arena *a = s->arena;
    day_t first = s->month.month;
    struct process_figure *days = arena_alloc(a, 2 * sizeof *days);
    struct process_figure *month = arena_alloc(a, sizeof *month);
    const struct process_figure figure = {.from = first,
                                          .to = first,
                                          .name = "sludge-volume-index",
                                          .at = "AB1",
                                          .parameter = "",
                                          .value = fraction_from_int(a, 121),
                                          .count = 1,
                                          .unit = "mL/g",
                                          .note = ""};
    days[0] = figure;
    days[1] = figure;
    days[1].from = days[1].to = first + 1;
    days[1].value = fraction_parse(a, "124.5");
    month[0] = figure;
    month[0].to = month_last(first);
    month[0].value = fraction_parse(a, "122.75");
    month[0].least = days[0].value;
    month[0].most = days[1].value;
    month[0].count = 2;
    s->input.process = days;
    s->input.process_count = 2;
    s->input.process_month = month;
    s->input.process_months = 1;
}

static void add_remark(struct sample *s)
{
    struct month_remark *r = arena_alloc(s->arena, sizeof *r);
    *r = (struct month_remark){.number = 12,
                               .kind = "event",
                               .event = "wet-weather",
                               .from = s->month.month + 16,
                               .to = s->month.month + 17,
                               .point = "EFF",
                               .parameter = "TSS",
                               .statistic = "weekly-average",
                               .text = "=two days of rain",
                               .who = "day shift",
                               .when = "2025-03-19T06:00:00Z"};
    s->input.remarks = (struct month_remarks){.at = r, .count = 1};
}

void sample_make(struct sample *s, const char *on)
{
    struct fault f = {0};
    *s = (struct sample){.arena = arena_new()};
    struct plant_draft *d = sample_draft(s->arena);
    sample_rows(d, PLANT_FIELDS, fields);
    sample_rows(d, PLANT_POINTS, points);
    sample_rows(d, PLANT_PARAMETERS, parameters);
    sample_rows(d, PLANT_LIMITS, limits);
    s->plant = sample_finish(d);
    day_t month = sample_day("2025-03-01");
    s->frame = frame_new(s->arena, s->plant, month - 7, month_last(month) + 7);
    fill(s->arena, s->frame, month - 7, month_last(month) + 7);
    frame_close(s->frame);
    if (permit_month(s->arena, s->frame, month, sample_day(on), &s->month, &f) != OK)
        fail_msg("%s", f.text);
    s->input = (struct month_input){
        .plant = s->plant,
        .frame = s->frame,
        .permit = &s->month,
        .aside = aside,
        .asides = NELEM(aside),
        .revision = revision,
        .revisions = NELEM(revision),
        .head = "3f2a9d0c4b7e18563f2a9d0c4b7e18563f2a9d0c4b7e18563f2a9d0c4b7e1856",
        .version = "0.1.0",
        .printed = sample_day("2025-04-10"),
    };
    add_process(s);
    add_remark(s);
}

void sample_free(struct sample *s)
{
    arena_free(s->arena);
}

/* ---- what was written ---- */

static char *read_all(FILE *f, size_t *length)
{
    char *bytes = malloc(OUTPUT_BYTES);
    assert_non_null(bytes);
    rewind(f);
    *length = fread(bytes, 1, OUTPUT_BYTES - 1, f);
    bytes[*length] = '\0';
    fclose(f);
    return bytes;
}

char *written_text(const struct page *p, int width, bool colour)
{
    const struct text_style style = {.width = width, .colour = colour};
    size_t length = 0;
    FILE *f = tmpfile();
    assert_non_null(f);
    write_text(f, p, &style);
    return read_all(f, &length);
}

char *written_csv(const struct table *t)
{
    size_t length = 0;
    FILE *f = tmpfile();
    assert_non_null(f);
    write_csv(f, t);
    return read_all(f, &length);
}

char *written_json(const struct table *t)
{
    size_t length = 0;
    FILE *f = tmpfile();
    assert_non_null(f);
    write_json(f, t);
    return read_all(f, &length);
}

char *file_bytes(const char *path, size_t *length)
{
    FILE *f = fopen(path, "rb");
    if (f == NULL)
        fail_msg("no file: %s", path);
    return read_all(f, length);
}

char *folder_new(void)
{
    char name[] = "/tmp/report-XXXXXX";
    char *folder = mkdtemp(name);
    assert_non_null(folder);
    return strdup(folder);
}

static void each_file(const char *folder, bool drop, size_t *count)
{
    DIR *d = opendir(folder);
    assert_non_null(d);
    for (struct dirent *e = readdir(d); e != NULL; e = readdir(d)) {
        if (strcmp(e->d_name, ".") == 0 || strcmp(e->d_name, "..") == 0)
            continue;
        ++*count;
        if (drop)
            unlinkat(dirfd(d), e->d_name, 0);
    }
    closedir(d);
}

size_t folder_files(const char *folder)
{
    size_t count = 0;
    each_file(folder, false, &count);
    return count;
}

void folder_drop(char *folder)
{
    size_t count = 0;
    each_file(folder, true, &count);
    rmdir(folder);
    free(folder);
}

int widest(const char *text)
{
    int most = 0;
    while (*text != '\0') {
        size_t length = strcspn(text, "\n\f");
        char *line = strndup(text, length);
        assert_non_null(line);
        int width = text_width(line);
        most = width > most ? width : most;
        free(line);
        text += length;
        text += *text != '\0';
    }
    return most;
}
