/* demo: the files of the invented plant Marrow Bend, each with its habit, read as its README says:
 * how many rows, how many set aside, and how the file was understood. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>

/* Rows as in fixtures/marrow-bend/expected-load.csv; asides are those that the book does not find.
 */
static const struct {
    const char *file, *map;
    long rows, asides;
    const char *told;
} files[] = {
    {"operations-2025.csv", NULL, 8679, 0,
     "wide, commas, decimal point, dates year-month-day, UTF-8"},
    {"solids-2025.txt", NULL, 5038, 0, "wide, tabs, decimal point, dates month/day/year, UTF-8"},
    {"laboratory-2025-q1.csv", NULL, 453, 0,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    {"laboratory-2025-q2.csv", NULL, 421, 0,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    {"laboratory-2025-q3.csv", NULL, 423, 0,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    {"laboratory-2025-q4.csv", NULL, 436, 0,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    {"outside-laboratory-2025.csv", "outside-laboratory.csv", 192, 0,
     "wide, semicolons, decimal comma, dates day.month.year, Windows-1252"},
    {"influent-totalizer-2025.csv", NULL, 376, 0,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    {"late-slips-2025.csv", NULL, 22, 18,
     "long, commas, decimal point, dates year-month-day, UTF-8"},
};

static void the_demo_files_read_as_they_are_described(void **state)
{
    struct scene *s = *state;
    const char *demo = arena_print(s->arena, "%sfixtures/marrow-bend", checkout(s->arena));
    s->plant = plant_in(s->arena, arena_print(s->arena, "%s/plant", demo));
    if (!day_parse("2026-01-31", &s->today))
        fail();
    for (size_t i = 0; i < NELEM(files); i++) {
        const char *path = arena_print(s->arena, "%s/readings/%s", demo, files[i].file);
        const char *map =
            files[i].map == NULL ? NULL : arena_print(s->arena, "%s/maps/%s", demo, files[i].map);
        const char *said = scene_read_path(s, path, map, NULL);
        if (s->summary.rows != files[i].rows || s->asides != files[i].asides)
            fail_msg("%s: %ld rows, %ld set aside:\n%.2000s", files[i].file, s->summary.rows,
                     s->asides, said);
        assert_string_equal(s->summary.dialect_told, files[i].told);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_demo_files_read_as_they_are_described),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
