/* open data: published files of real plants, as they are, read where the sets stand beside the
 * checkout. Sets, terms and figures: the README and SOURCE.md of each set. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

enum { SKIPPED = 77 };

/* Rows: as the sets' README counts them, or counted in the file by another program (blank cells are
 * no rows). first: a reading at a known line, typed from the raw file. */
static const struct {
    const char *folder, *file, *map;
    long rows;
    const char *told, *first;
} sets[] = {
    {"tracy-esmr", "readings.csv", NULL, 11712,
     "long, commas, decimal point, dates year-month-day, UTF-8",
     "11 2010-08-03 06:48 EFF NH3N dnq 0.963 mg/L\n12 2010-08-03 10:16 EFF NO2N less 0.004 mg/L\n"},
    {"uci-water-treatment", "readings.csv", "map.csv", 14951,
     "wide, commas, decimal point, dates year-month-day, UTF-8",
     "2:2 1990-01-01 INF FLOW plain 41230 m3/d\n2:3 1990-01-01 INF ZN plain 0.35 mg/L\n"},
    {"exeter-dmr", "readings.csv", NULL, 4003,
     "long, commas, decimal point, dates year-month-day, UTF-8",
     "2 2008-01-15 EFFAVG BOD plain 30 mg/L\n3 2008-01-15 EFFAVG FLOW plain 1.9 MGD\n"},
    {"leipzig-2016", "GeordneteBetriebsdaten_2016_ODD.csv", "map.csv", 2067,
     "wide, semicolons, decimal comma, dates day.month.year, UTF-8",
     "2:2 2016-01-01 INF FLOW plain 7505 m3/d\n2:3 2016-01-01 INF COD plain 742 mg/L\n"},
    {"chicago-beaches-2015", "counts.csv", "map.csv", 162,
     "wide, commas, decimal point, dates month/day/year, UTF-8",
     "2:2 2015-05-26 CALUMET ENTERO plain 435 /100mL\n"},
};

static const char *sets_folder(struct arena *a)
{
    const char *shared = getenv("WEIRBOOK_SHARED");
    const char *folder = shared != NULL ? arena_print(a, "%s/open-data", shared)
                                        : arena_print(a, "%s../shared/open-data", checkout(a));
    return access(folder, R_OK) == 0 ? folder : NULL;
}

static void published_files_are_read_as_they_are(void **state)
{
    struct scene *s = *state;
    const char *root = sets_folder(s->arena);
    for (size_t i = 0; i < NELEM(sets); i++) {
        const char *folder = arena_print(s->arena, "%s/%s", root, sets[i].folder);
        const char *map =
            sets[i].map == NULL ? NULL : arena_print(s->arena, "%s/%s", folder, sets[i].map);
        s->plant = plant_in(s->arena, arena_print(s->arena, "%s/plant", folder));
        const char *said =
            scene_read_path(s, arena_print(s->arena, "%s/%s", folder, sets[i].file), map, NULL);
        if (s->summary.rows != sets[i].rows || s->asides != 0 ||
            strstr(said, sets[i].first) == NULL)
            fail_msg("%s: %ld rows, %ld set aside:\n%.2000s", sets[i].folder, s->summary.rows,
                     s->asides, said);
        assert_string_equal(s->summary.dialect_told, sets[i].told);
        print_message("%s: %ld rows read\n", sets[i].folder, s->summary.rows);
    }
}

/* Every one of the 366 days of 2016 has its flow (the set's README: 366 days). */
static void a_leap_year_of_a_german_plant_has_366_days(void **state)
{
    struct scene *s = *state;
    const char *folder = arena_print(s->arena, "%s/leipzig-2016", sets_folder(s->arena));
    s->plant = plant_in(s->arena, arena_print(s->arena, "%s/plant", folder));
    const char *said =
        scene_read_path(s, arena_print(s->arena, "%s/GeordneteBetriebsdaten_2016_ODD.csv", folder),
                        arena_print(s->arena, "%s/map.csv", folder), NULL);
    int days = 0;
    for (const char *p = strstr(said, " INF FLOW "); p != NULL; p = strstr(p + 1, " INF FLOW "))
        days++;
    assert_int_equal(days, 366);
    assert_non_null(strstr(said, "2016-12-31 INF FLOW plain 7401 m3/d"));
}

/* The energy columns write 28.209,00: taken in by a map of our own, they are the sums that the
 * set's expected.csv lists (bought_kwh of 31.01.2016 and 31.12.2016). */
static void points_between_thousands_are_taken_off(void **state)
{
    struct scene *s = *state;
    const char *folder = arena_print(s->arena, "%s/leipzig-2016", sets_folder(s->arena));
    struct intake_table map;
    struct fault f = {.set = false};
    struct text t;
    text_init(&t, 1 << 16);
    if (intake_table(s->arena, arena_print(s->arena, "%s/map.csv", folder), &map, &f) != OK)
        fail_msg("%s", f.text);
    text_add(&t, "column,point,parameter,unit,skip\n");
    for (size_t i = 0; i < map.rows; i++) {
        bool energy = strcmp(map.cell[i][0], "Fremdbezug in kwh") == 0;
        csv_cell(&t, map.cell[i][0], false);
        text_add(&t, energy ? ",CAKE,ENERGY,kWh,\n" : ",,,,yes\n");
    }
    s->plant = plant_in(s->arena, arena_print(s->arena, "%s/plant", folder));
    const char *said =
        scene_read_path(s, arena_print(s->arena, "%s/GeordneteBetriebsdaten_2016_ODD.csv", folder),
                        scene_file(s, "map.csv", t.at), NULL);
    assert_int_equal(s->readings, 12);
    assert_int_equal(s->asides, 0);
    assert_non_null(strstr(said, "2016-01-31 CAKE ENERGY plain 28209.00 kWh\n"));
    assert_non_null(strstr(said, "2016-12-31 CAKE ENERGY plain 1674.00 kWh\n"));
    text_free(&t);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_files_are_read_as_they_are),
        cmocka_unit_test(a_leap_year_of_a_german_plant_has_366_days),
        cmocka_unit_test(points_between_thousands_are_taken_off),
    };
    struct arena *a = arena_new();
    bool there = sets_folder(a) != NULL;
    arena_free(a);
    if (!there) {
        puts("SKIPPED: open-data: not found beside the checkout");
        return getenv("WEIRBOOK_CI") != NULL ? 1 : SKIPPED;
    }
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
