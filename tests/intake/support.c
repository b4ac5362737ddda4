/* support: see support.h. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static const char *const plant_files[][2] = {
    {"plant.csv", "field,value\nname,Small plant\nsince,2024-01-01\n"},
    {"points.csv", "point,name,role,outfall\nINF,Influent,influent,\nEFF,Effluent,effluent,001\n"
                   "RAS,Return sludge,return-sludge,\n"},
    {"parameters.csv", "parameter,name,unit,decimals,mdl,rl\nCU,Copper,ug/L,1,0.5,4.0\n"
                       "PB,Lead,ug/L,1,,2.0\n"},
    {"limits.csv", "outfall,point,parameter,basis,statistic,bound,limit,unit\n"},
    {"meters.csv", "point,parameter,kind,rolls_at,multiplier,from,to\n"
                   "INF,FLOW,totalizer,1000000,,2025-01-01,2025-03-31\n"},
};

/* ---- files ---- */

const char *scene_path(struct scene *s, const char *name)
{
    return arena_print(s->arena, "%s/%s", s->folder, name);
}

const char *scene_bytes(struct scene *s, const char *name, const void *bytes, size_t length)
{
    const char *path = scene_path(s, name);
    FILE *file = fopen(path, "wb");
    if (file == NULL)
        fail_msg("cannot write %s", path);
    assert_int_equal(fwrite(bytes, 1, length, file), length);
    assert_int_equal(fclose(file), 0);
    return path;
}

const char *scene_file(struct scene *s, const char *name, const char *bytes)
{
    return scene_bytes(s, name, bytes, strlen(bytes));
}

static void remove_folder(const char *folder)
{
    char path[1024];
    DIR *dir = opendir(folder);
    if (dir == NULL)
        return;
    for (struct dirent *e = readdir(dir); e != NULL; e = readdir(dir)) {
        struct stat info;
        if (strcmp(e->d_name, ".") == 0 || strcmp(e->d_name, "..") == 0)
            continue;
        snprintf(path, sizeof path, "%s/%s", folder, e->d_name);
        if (lstat(path, &info) == 0 && S_ISDIR(info.st_mode))
            remove_folder(path);
        else
            unlink(path);
    }
    closedir(dir);
    rmdir(folder);
}

const char *checkout(struct arena *a)
{
    const char *here = __FILE__;
    const char *end = strstr(here, "tests/intake/");
    if (end == NULL)
        fail_msg("cannot tell where the checkout is from %s", here);
    return end == here ? "./" : arena_bytes(a, here, (size_t)(end - here));
}

struct plant *plant_in(struct arena *a, const char *folder)
{
    struct plant_draft *draft = plant_draft_new(a);
    struct plant *plant = NULL;
    struct fault f = {.set = false};
    intake_catalogue(draft);
    if (intake_plant(a, folder, draft, &f) != OK || plant_draft_finish(draft, &plant, &f) != OK)
        fail_msg("%s", f.text);
    return plant;
}

/* ---- the scene ---- */

int scene_setup(void **state)
{
    struct scene *s = calloc(1, sizeof *s);
    if (s == NULL)
        return -1;
    s->arena = arena_new();
    snprintf(s->folder, sizeof s->folder, "weirbook-intake-XXXXXX");
    if (mkdtemp(s->folder) == NULL)
        return -1;
    text_init(&s->said, (size_t)64 << 20);
    if (!day_parse("2025-06-30", &s->today))
        return -1;
    for (size_t i = 0; i < NELEM(plant_files); i++)
        scene_file(s, plant_files[i][0], plant_files[i][1]);
    s->plant = plant_in(s->arena, s->folder);
    *state = s;
    return 0;
}

int scene_teardown(void **state)
{
    struct scene *s = *state;
    remove_folder(s->folder);
    text_free(&s->said);
    arena_free(s->arena);
    free(s);
    return 0;
}

/* ---- reading ---- */

static void add_place(struct text *t, const struct row_text *row)
{
    text_print(t, "%ld", row->line);
    if (row->column > 0)
        text_print(t, ":%d", row->column);
}

static enum status take_reading(void *context, const struct reading *r, const struct row_text *row,
                                struct fault *f)
{
    struct scene *s = context;
    char date[11];
    char time[6];
    char value[24];
    (void)f;
    day_write(r->day, date);
    minute_write(r->minute, time);
    decimal_write(r->value, value);
    add_place(&s->said, row);
    text_print(&s->said, " %s%s%s %s %s %s", date, *time != '\0' ? " " : "", time,
               s->plant->points[r->point].id, s->plant->parameters[r->parameter].id,
               qualifier_words[r->qualifier]);
    if (r->qualifier == QUALIFIER_CODE)
        text_print(&s->said, " %c", r->code);
    else
        text_print(&s->said, " %s", value);
    text_print(&s->said, " %s%s%s\n", unit_at(r->unit)->name, *r->sample != '\0' ? " " : "",
               r->sample);
    s->readings++;
    return OK;
}

static enum status take_aside(void *context, const struct row_text *row, enum reason reason,
                              const char *explanation, struct fault *f)
{
    struct scene *s = context;
    (void)f;
    add_place(&s->said, row);
    text_print(&s->said, " %s: %s", reason_words[reason], explanation);
    if (*row->raw != '\0')
        text_print(&s->said, " | %s", row->raw);
    text_add_char(&s->said, '\n');
    s->asides++;
    return OK;
}

const char *scene_read_path(struct scene *s, const char *path, const char *map, const char *dialect)
{
    const struct intake_options options = {.map = map, .dialect = dialect, .today = s->today};
    const struct intake_sink sink = {.context = s, .reading = take_reading, .aside = take_aside};
    struct fault f = {.set = false};
    size_t folder = strlen(s->folder) + 1;
    text_clear(&s->said);
    s->readings = s->asides = 0;
    enum status rc = intake_readings(s->arena, path, s->plant, &options, &sink, &s->summary, &f);
    if (rc == OK) {
        assert_int_equal(s->summary.rows, s->readings + s->asides);
        return s->said.at;
    }
    assert_true(f.set);
    assert_null(strchr(f.text, '\n'));
    text_clear(&s->said);
    text_add(&s->said, strncmp(f.text, s->folder, folder - 1) == 0 ? f.text + folder : f.text);
    return s->said.at;
}

const char *scene_read_with(struct scene *s, const char *text, const char *map, const char *dialect)
{
    return scene_read_path(s, scene_file(s, "readings.csv", text),
                           map != NULL ? scene_file(s, "map.csv", map) : NULL,
                           dialect != NULL ? scene_file(s, "dialect.csv", dialect) : NULL);
}

const char *scene_read(struct scene *s, const char *text)
{
    return scene_read_with(s, text, NULL, NULL);
}

void assert_said(const char *said, const char *expected, const char *input)
{
    if (strcmp(said, expected) != 0)
        fail_msg("of\n%s\ncame\n%s\nand not\n%s", input, said, expected);
}
