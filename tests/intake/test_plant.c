/* plant: descriptions in and out: the built-in catalogue, folders with every kind of trouble, and
 * that what is written back reads as the same description. No published source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <fcntl.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#define POINTS "point,name,role,outfall\nEFF,Effluent,effluent,001\n"
#define LIMITS "outfall,point,parameter,basis,statistic,bound,limit,unit\n"

static const struct {
    const char *file, *bytes; /* in a folder that is otherwise sound; bytes NULL: taken out */
    const char *problems;     /* one a line, the folder's name taken off */
} troubles[] = {
    {"points.csv", NULL,
     "points.csv: the description has no such file; add it; 'weirbook plant --example DIR' writes "
     "one to start from\n"},
    {"limits.csv", "", "limits.csv: the file is empty; export it again\n"},
    {"limits.csv",
     "\xff\xfe"
     "o",
     "limits.csv: the file is UTF-16; save it as UTF-8\n"},
    {"points.csv", "point,nmae,role,outfall,colour\nEFF,Effluent,effluent,001,red\n",
     "points.csv:1:2: no column 'nmae'; the nearest is 'name'; correct the heading\n"
     "points.csv:1:5: no column 'colour'; correct the heading, or take the column out\n"},
    {"points.csv", "point,name\nEFF,Effluent\n",
     "points.csv:1: the column 'role' is missing; add it\n"},
    {"points.csv", "point,name,role,point\nEFF,Effluent,effluent,EFF\n",
     "points.csv:1:4: the column 'point' stands twice; take one of them out\n"},
    {"points.csv", "point,name,,role\nEFF,Effluent,,effluent\n",
     "points.csv:1:3: the column has no heading; name it, or take it out\n"},
    {"points.csv", POINTS "INF,Influent,influent\n",
     "points.csv:3: the row has 3 cells, the header 4; give the row as many cells as the "
     "header\n"},
    {"points.csv", POINTS "INF,6\" main,influent,\n",
     "points.csv:3: a quote is not closed, or stands inside a cell that is not quoted; close the "
     "quotes, or double those inside a cell\n"},
    {"meter.csv", "point,parameter,kind\n",
     ": 'meter.csv' is no file of a description; the nearest is 'meters.csv'; rename it, or take "
     "it out of the folder\n"},
    {"Basins.csv", "basin,kind\n",
     ": 'Basins.csv' is no file of a description; the nearest is 'basins.csv'; rename it, or take "
     "it out of the folder\n"},
    {"round.csv", "point,paramter\nEFF,PH\n",
     "round.csv:1:2: no column 'paramter'; the nearest is 'parameter'; correct the heading\n"},
    {"round.csv", "point,sample\nEFF,grab\n",
     "round.csv:1: the column 'parameter' is missing; add it\n"},
    {"round.csv", "point,parameter,sample\nEFF,PH\n",
     "round.csv:2: the row has 2 cells, the header 3; give the row as many cells as the header\n"},
    {"rounds.csv", "point,parameter\nEFF,PH\n",
     ": 'rounds.csv' is no file of a description; the nearest is 'round.csv'; rename it, or take "
     "it out of the folder\n"},
    {"round.csv", "sample;parameter;point\ngrab;PH;EFF\n", ""},
    {"limits2.csv", LIMITS, ""}, /* a copy beside the real one */
    {"readings.csv", "date,EFF TSS\n", ""},
    {"notes.txt", "x", ""},
};

/* Reads the folder; said gets the problems that the reading of files found. */
static const char *problems_of(struct scene *s, const char *folder)
{
    struct plant_draft *draft = plant_draft_new(s->arena);
    struct fault f = {.set = false};
    text_clear(&s->said);
    intake_catalogue(draft);
    if (intake_plant(s->arena, folder, draft, &f) != OK) {
        text_add(&s->said, f.text);
        return s->said.at;
    }
    for (size_t i = 0; i < plant_draft_problems(draft); i++) {
        const char *text = plant_draft_problem_at(draft, i);
        size_t length = strlen(folder);
        if (strncmp(text, folder, length) == 0)
            text += length + (text[length] == '/');
        text_print(&s->said, "%s\n", text);
    }
    return s->said.at;
}

static const char *sound_folder(struct scene *s, const char *name)
{
    const char *folder = scene_path(s, name);
    assert_int_equal(mkdir(folder, 0700), 0);
    scene_file(s, arena_print(s->arena, "%s/plant.csv", name), "field,value\nname,Plant\n");
    scene_file(s, arena_print(s->arena, "%s/points.csv", name), POINTS);
    scene_file(s, arena_print(s->arena, "%s/limits.csv", name), LIMITS);
    return folder;
}

static void every_trouble_of_a_folder_is_told_in_one_line(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(troubles); i++) {
        const char *name = arena_print(s->arena, "trouble-%zu", i);
        const char *folder = sound_folder(s, name);
        const char *file = arena_print(s->arena, "%s/%s", name, troubles[i].file);
        if (troubles[i].bytes == NULL)
            assert_int_equal(unlink(scene_path(s, file)), 0);
        else
            scene_file(s, file, troubles[i].bytes);
        assert_said(problems_of(s, folder), troubles[i].problems, file);
    }
}

static void a_folder_that_cannot_be_read_is_a_fault(void **state)
{
    struct scene *s = *state;
    const char *none = scene_path(s, "none");
    assert_string_equal(problems_of(s, none),
                        arena_print(s->arena,
                                    "%s: there is no such folder; correct the name; "
                                    "'weirbook plant --example DIR' writes one",
                                    none));
    const char *file = scene_path(s, "plant.csv");
    assert_string_equal(problems_of(s, file),
                        arena_print(s->arena,
                                    "%s: it is a file, not the folder of a description; "
                                    "name the folder that holds plant.csv",
                                    file));
}

static void the_catalogue_is_read_without_a_problem(void **state)
{
    struct scene *s = *state;
    struct plant_draft *draft = plant_draft_new(s->arena);
    intake_catalogue(draft);
    assert_int_equal(plant_draft_problems(draft), 0);
    assert_true(plant_draft_rows(draft) > 40);
    for (size_t i = 0; i < plant_draft_rows(draft); i++) {
        assert_true(plant_draft_row(draft, i)->builtin);
        assert_int_equal(plant_draft_row(draft, i)->file, PLANT_PARAMETERS);
    }
}

/* ---- out and in again ---- */

/* The rows of a folder without the catalogue's, as text. Absent and blank cells count alike. */
static void rows_of(struct scene *s, const char *folder, struct text *out)
{
    struct plant_draft *draft = plant_draft_new(s->arena);
    struct fault f = {.set = false};
    text_clear(out);
    if (intake_plant(s->arena, folder, draft, &f) != OK || plant_draft_problems(draft) > 0)
        fail_msg("%s has problems", folder);
    for (size_t i = 0; i < plant_draft_rows(draft); i++) {
        const struct plant_row *row = plant_draft_row(draft, i);
        const struct plant_layout *layout = plant_layout(row->file);
        text_print(out, "%s", layout->file);
        for (size_t c = 0; c < layout->columns; c++)
            text_print(out, "|%s", row->cell[c] != NULL ? row->cell[c] : "");
        text_add_char(out, '\n');
    }
}

static void write_back(struct scene *s, const char *from, const char *to, bool replace)
{
    struct plant_draft *draft = plant_draft_new(s->arena);
    struct fault f = {.set = false};
    intake_catalogue(draft);
    if (intake_plant(s->arena, from, draft, &f) != OK ||
        intake_plant_write(to, draft, replace, &f) != OK)
        fail_msg("%s", f.text);
}

static void what_is_written_back_is_the_same_description(void **state)
{
    struct scene *s = *state;
    static const char *const folders[] = {"fixtures/starter", "fixtures/marrow-bend/plant",
                                          "fixtures/secondary/plant"};
    struct text before, after;
    text_init(&before, 1 << 20);
    text_init(&after, 1 << 20);
    for (size_t i = 0; i < NELEM(folders); i++) {
        const char *from = arena_print(s->arena, "%s%s", checkout(s->arena), folders[i]);
        const char *to = scene_path(s, arena_print(s->arena, "back-%zu", i));
        write_back(s, from, to, false);
        rows_of(s, from, &before);
        rows_of(s, to, &after);
        assert_true(before.length > 100);
        assert_string_equal(after.at, before.at);
    }
    text_free(&before);
    text_free(&after);
}

static void odd_cells_survive_writing(void **state)
{
    struct scene *s = *state;
    const char *from = sound_folder(s, "odd");
    const char *to = scene_path(s, "odd-back");
    struct text before, after;
    scene_file(s, "odd/points.csv",
               "role,point,name\neffluent,EFF,\"=HYPERLINK(\"\"x\"\"), ''quoted''\nsecond line\"\n"
               "influent,INF,'=1+1\nother,X,\"-x; \xc2\xb5\"\n");
    text_init(&before, 1 << 16);
    text_init(&after, 1 << 16);
    write_back(s, from, to, false);
    rows_of(s, from, &before);
    rows_of(s, to, &after);
    assert_string_equal(after.at, before.at);
    assert_non_null(strstr(before.at, "points.csv|INF|=1+1|influent|\n"));
    text_free(&before);
    text_free(&after);
}

static const char *round_told(struct scene *s, const struct plant *p)
{
    text_clear(&s->said);
    for (size_t i = 0; i < p->round_count; i++)
        text_print(&s->said, "%s %s %s\n", p->points[p->round[i].point].id,
                   p->parameters[p->round[i].parameter].id, p->round[i].sample);
    return s->said.at;
}

static void a_round_keeps_its_order_on_the_way_in_and_out(void **state)
{
    struct scene *s = *state;
    const char *from = sound_folder(s, "walked");
    const char *to = scene_path(s, "walked-back");
    const char *walk = "INF PH grab\nEFF TEMP \nEFF PH \nEFF DO =1, \"x\"\n";
    scene_file(s, "walked/points.csv", POINTS "INF,Influent,influent,\n");
    scene_file(s, "walked/round.csv",
               "\xef\xbb\xbfsample;point;parameter\r\ngrab;INF;PH\r\n;EFF;TEMP\r\n\r\n;EFF;PH\r\n"
               "\"=1, \"\"x\"\"\";EFF;DO\r\n");
    assert_string_equal(round_told(s, plant_in(s->arena, from)), walk);
    write_back(s, from, to, false);
    assert_string_equal(round_told(s, plant_in(s->arena, to)), walk);
}

static const char *file_text(struct scene *s, const char *path)
{
    char *text = arena_alloc(s->arena, 4096);
    FILE *file = fopen(path, "rb");
    if (file == NULL)
        fail_msg("cannot open %s", path);
    size_t got = fread(text, 1, 4095, file);
    text[got] = '\0';
    fclose(file);
    return text;
}

static void a_file_that_is_there_is_never_written_over(void **state)
{
    struct scene *s = *state;
    const char *folder = sound_folder(s, "kept");
    const char *other = sound_folder(s, "other");
    struct plant_draft *draft = plant_draft_new(s->arena);
    struct fault f = {.set = false};
    scene_file(s, "kept/limits.csv", "mine\n");
    assert_int_equal(intake_plant(s->arena, other, draft, &f), OK);
    assert_int_equal(intake_plant_write(folder, draft, false, &f), FAULT);
    assert_string_equal(f.text, arena_print(s->arena,
                                            "%s/plant.csv: the file is there already; "
                                            "choose another folder",
                                            folder));
    fault_clear(&f);
    assert_int_equal(intake_example(folder, &f), FAULT);
    assert_string_equal(file_text(s, scene_path(s, "kept/limits.csv")), "mine\n");
    assert_int_equal(access(scene_path(s, "kept/basins.csv"), F_OK), -1); /* nor half of them */
    /* With `replace` a file that has no rows any more is emptied, or it would be read again. */
    scene_file(s, "kept/meters.csv", "point,parameter,kind\nEFF,FLOW,rate\n");
    fault_clear(&f);
    assert_int_equal(intake_plant_write(folder, draft, true, &f), OK);
    assert_string_equal(file_text(s, scene_path(s, "kept/meters.csv")),
                        "point,parameter,kind,rolls_at,multiplier,from,to\n");
    assert_int_equal(access(scene_path(s, "kept/basins.csv"), F_OK), -1);
    assert_string_equal(file_text(s, scene_path(s, "kept/points.csv")), POINTS);
}

static void what_cannot_be_written_says_so(void **state)
{
    struct scene *s = *state;
    struct fault f = {.set = false};
    const char *file = scene_path(s, "plant.csv");
    assert_int_equal(intake_example(file, &f), FAULT);
    assert_string_equal(f.text, arena_print(s->arena,
                                            "%s: it is a file, not a folder; name a "
                                            "folder",
                                            file));
    fault_clear(&f);
    const char *deep = scene_path(s, "a/b");
    assert_int_equal(intake_example(deep, &f), FAULT);
    assert_string_equal(f.text, arena_print(s->arena,
                                            "%s: the folder cannot be made (No such file or "
                                            "directory); choose a place that can be written",
                                            deep));
}

static void the_starter_description_is_a_sound_plant(void **state)
{
    struct scene *s = *state;
    struct fault f = {.set = false};
    const char *folder = scene_path(s, "example");
    if (intake_example(folder, &f) != OK)
        fail_msg("%s", f.text);
    const struct plant *plant = plant_in(s->arena, folder);
    assert_true(plant->point_count > 3);
    assert_true(plant->limit_count > 5);
    assert_true(plant_point(plant, "EFF") >= 0);
    assert_true(plant->round_count > 5);
    struct stat info;
    assert_int_equal(stat(scene_path(s, "example/plant.csv"), &info), 0);
    mode_t mask = umask(0);
    umask(mask);
    assert_int_equal(info.st_mode & 0777, 0666 & ~mask);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_trouble_of_a_folder_is_told_in_one_line),
        cmocka_unit_test(a_folder_that_cannot_be_read_is_a_fault),
        cmocka_unit_test(the_catalogue_is_read_without_a_problem),
        cmocka_unit_test(what_is_written_back_is_the_same_description),
        cmocka_unit_test(odd_cells_survive_writing),
        cmocka_unit_test(a_round_keeps_its_order_on_the_way_in_and_out),
        cmocka_unit_test(a_file_that_is_there_is_never_written_over),
        cmocka_unit_test(what_cannot_be_written_says_so),
        cmocka_unit_test(the_starter_description_is_a_sound_plant),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
