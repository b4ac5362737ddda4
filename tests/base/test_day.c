/* Calendar days and times. Every day of the range is compared with another calendar by the
 * reference run (tests/reference); here stand the published facts and the edges. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static void days_count_from_1970(void **state)
{
    (void)state;
    static const struct {
        const char *iso;
        day_t day;
        enum weekday weekday;
    } cases[] = {
        {"1969-12-27", -5, SATURDAY},     /* five days before that Thursday */
        {"1970-01-01", 0, THURSDAY},      /* POSIX, seconds since the Epoch, over 86400 */
        {"2000-01-01", 10957, SATURDAY},  /* 946684800 s, common practice, no source */
        {"2000-03-01", 11017, WEDNESDAY}, /* Julian day 2451604.5 less 2440587.5 */
        {"1900-01-01", -25567, MONDAY},   /* RFC 868: 2208988800 s before 1970 */
        {"2038-01-19", 24855, TUESDAY},   /* day on which 2^31 s are passed: 2147483648 / 86400 */
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        day_t day = DAY_NONE;
        char iso[11];
        assert_true(day_parse(cases[i].iso, &day));
        assert_int_equal(day, cases[i].day);
        assert_int_equal(day_weekday(day), cases[i].weekday);
        day_write(day, iso);
        assert_string_equal(iso, cases[i].iso);
    }
}

static void leap_years_follow_the_gregorian_rule(void **state)
{
    (void)state;
    /* Inter gravissimas, 1582: of the centuries only those divisible by 400 */
    static const struct {
        int year;
        bool leap;
    } cases[] = {{1900, false}, {1904, true},  {2000, true}, {2023, false},
                 {2024, true},  {2100, false}, {2196, true}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        day_t day = 0;
        assert_int_equal(day_from(cases[i].year, 2, 29, &day), cases[i].leap);
        assert_true(day_from(cases[i].year, 2, 1, &day));
        int year = 0;
        int month = 0;
        int date = 0;
        day_split(month_last(day), &year, &month, &date);
        assert_int_equal(date, cases[i].leap ? 29 : 28);
    }
}

static void what_is_no_day_is_refused(void **state)
{
    (void)state;
    static const char *const cases[] = {
        "",           "2025-02-29", "2025-00-01", "2025-13-01",  "2025-04-31",
        "2025-01-00", "2025-01-32", "1899-12-31", "2200-01-01",  "2025-1-01",
        "2025-01-1",  "25-01-01",   "2025/01/01", "2025-01-01 ", " 2025-01-01",
        "2025-01-0x", "20250101",   "+025-01-01", "2025-01-011", "2025-01--1",
        "-025-01-01",
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        day_t day = 12345;
        if (day_parse(cases[i], &day))
            fail_msg("'%s' was taken for a day", cases[i]);
        assert_int_equal(day, 12345);
    }
}

static void months_are_stepped_by_their_first_day(void **state)
{
    (void)state;
    static const struct {
        const char *from;
        int months;
        const char *to, *last;
    } cases[] = {
        {"2025-03", 1, "2025-04-01", "2025-04-30"},  {"2025-12", 1, "2026-01-01", "2026-01-31"},
        {"2025-01", -1, "2024-12-01", "2024-12-31"}, {"2025-03", -12, "2024-03-01", "2024-03-31"},
        {"2024-03", -1, "2024-02-01", "2024-02-29"}, {"2025-03", 0, "2025-03-01", "2025-03-31"},
        {"2025-11", 15, "2027-02-01", "2027-02-28"}, {"2025-02", -26, "2022-12-01", "2022-12-31"},
        {"2199-12", 1, "2200-01-01", "2200-01-31"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        day_t first = 0;
        char iso[11];
        assert_true(month_parse(cases[i].from, &first));
        day_t to = month_step(first, cases[i].months);
        day_write(to, iso);
        assert_string_equal(iso, cases[i].to);
        assert_int_equal(month_first(month_last(to)), to);
        day_write(month_last(to), iso);
        assert_string_equal(iso, cases[i].last);
    }
}

static void what_is_no_month_is_refused(void **state)
{
    (void)state;
    static const char *const cases[] = {"",        "2025-00",  "2025-13", "2025-1",     "2025",
                                        "2025-3x", "2025-03 ", "2025/03", "2025-03-01", "1899-12"};
    for (size_t i = 0; i < NELEM(cases); i++) {
        day_t first = 0;
        assert_false(month_parse(cases[i], &first));
    }
}

static void months_and_weekdays_have_names(void **state)
{
    (void)state;
    assert_string_equal(month_name(1), "January");
    assert_string_equal(month_name(12), "December");
    assert_string_equal(weekday_names[SUNDAY], "sunday");
    assert_string_equal(weekday_names[SATURDAY], "saturday");
}

static void times_are_minutes_after_midnight(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        int minute; /* -2: not a time */
        const char *written;
    } cases[] = {
        {"00:00", 0, "00:00"},    {"8:05", 485, "08:05"},
        {"08:05", 485, "08:05"},  {"23:59:59", 1439, "23:59"},
        {"24:00", 1440, "24:00"}, {"24:00:00", 1440, "24:00"},
        {"24:01", -2, NULL},      {"24:00:01", -2, NULL},
        {"25:00", -2, NULL},      {"12:60", -2, NULL},
        {"12:30:60", -2, NULL},   {"12", -2, NULL},
        {"", -2, NULL},           {":30", -2, NULL},
        {"1:3", -2, NULL},        {"12:3", -2, NULL},
        {"12:30:", -2, NULL},     {"12:30:5", -2, NULL},
        {"12:30 ", -2, NULL},     {"12:30x", -2, NULL},
        {"-1:30", -2, NULL},      {"012:30", -2, NULL},
        {"1", -2, NULL},          {"12:30:05:1", -2, NULL},
        {"12.30", -2, NULL},      {"12:30am", -2, NULL},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        int minute = -2;
        bool fine = minute_parse(cases[i].text, &minute);
        if (fine != (cases[i].minute >= 0) || minute != cases[i].minute)
            fail_msg("'%s' became %d", cases[i].text, minute);
        if (fine) {
            char written[6];
            minute_write(minute, written);
            assert_string_equal(written, cases[i].written);
        }
    }
    char written[6] = "x";
    minute_write(-1, written);
    assert_string_equal(written, "");
}

static void the_clock_agrees_with_itself(void **state)
{
    (void)state;
    char stamp[21];
    clock_stamp(stamp);
    assert_int_equal(strlen(stamp), 20);
    assert_int_equal(stamp[10], 'T');
    assert_int_equal(stamp[19], 'Z');
    stamp[10] = '\0';
    day_t utc = 0;
    assert_true(day_parse(stamp, &utc));
    day_t today = clock_today();
    assert_in_range(today - utc + 1, 0, 2); /* no zone is a whole day from UTC, plus midnight */
    double before = clock_seconds();
    assert_true(before <= clock_seconds());
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(days_count_from_1970),
        cmocka_unit_test(leap_years_follow_the_gregorian_rule),
        cmocka_unit_test(what_is_no_day_is_refused),
        cmocka_unit_test(months_are_stepped_by_their_first_day),
        cmocka_unit_test(what_is_no_month_is_refused),
        cmocka_unit_test(months_and_weekdays_have_names),
        cmocka_unit_test(times_are_minutes_after_midnight),
        cmocka_unit_test(the_clock_agrees_with_itself),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
