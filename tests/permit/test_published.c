/* Worked examples that others have published, each with its source, and the federal secondary
 * treatment numbers at, just under and just over each limit. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define MEAN(limit)    "001,EFF,BOD5,concentration,monthly-average,max," limit ",mg/L"
#define GEOMEAN(limit) "001,EFF,ECOLI,concentration,monthly-geomean,max," limit ",MPN/100mL"

static void published_examples_come_out_as_printed(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"Spellman, operators' mathematics: geometric mean of 12, 28, 37, 25 is 23.6", "2025-03",
         "", GEOMEAN("126.0"), "EFF ECOLI MPN/100mL 3=12 10=28 17=37 24=25",
         "03-01..03-31 23.6 met 4"},
        {"Spellman, operators' mathematics: arithmetic mean of 12, 28, 37, 25 is 25.5", "2025-03",
         "", "001,EFF,ECOLI,concentration,monthly-average,max,126.0,MPN/100mL",
         "EFF ECOLI MPN/100mL 3=12 10=28 17=37 24=25", "03-01..03-31 25.5 met 4"},
        {"State reporting sheet: product of 50, 100, 150, 200 is 1.5 x 10^8, root computed 110.67",
         "2025-03", "", GEOMEAN("126.00"), "EFF ECOLI MPN/100mL 3=50 10=100 17=150 24=200",
         "03-01..03-31 110.67 met 4"},
        {"State reporting sheet: 5.30, 6.21, 4.00, 5.25, 8.72 is 29.48/5 = 5.896, reported 5.90",
         "2025-03", "", MEAN("10.00"), "EFF BOD5 mg/L 3=5.30 5=6.21 10=4.00 17=5.25 24=8.72",
         "03-01..03-31 5.90 met 5"},
        {"permit definition: 1, 2 and less than the ML average 1", "2025-03",
         "nondetect,zero\nsign,never", MEAN("2"), "EFF BOD5 mg/L 3=1 10=2 17=<3",
         "03-01..03-31 1 met 3"},
        {"EPA drinking-water questions, half up: 0.0105 is 0.011", "2025-03", "rounding,half-up",
         MEAN("0.010"), "EFF BOD5 mg/L 3=0.0105", "03-01..03-31 0.011 exceeded 1"},
        {"EPA drinking-water questions: 0.0104 is 0.010", "2025-03", "rounding,half-up",
         MEAN("0.010"), "EFF BOD5 mg/L 3=0.0104", "03-01..03-31 0.010 met 1"},
        {"New York DEC: limit 1.0, a result of .067 is entered .067", "2025-03", "digits,figures",
         MEAN("1.0"), "EFF BOD5 mg/L 3=.067", "03-01..03-31 0.067 met 1"},
        {"MWPCA article: 34 colonies in 50 mL are 68 per 100 mL", "2025-03", "",
         "001,EFF,FCOLI,concentration,daily,max,200,cfu/100mL", "EFF FCOLI /mL 3=0.68",
         "03-01..03-31 @03-03 68 met x0 1"},
    };

    check_months(cases, NELEM(cases));
}

/* wastewater101, discharge-report example: BOD5 22, 29, 18, 10 mg/L at .19, .20, .18, .19 MGD. */
static void a_published_month_of_loads_comes_out_as_printed(void **state)
{
    (void)state;
    static const char readings[] =
        "EFF BOD5 mg/L 3=22 10=29 17=18 24=10\nEFF FLOW MGD 3=.19 10=.20 17=.18 24=.19";
    static const struct month_case cases[] = {
        {"wastewater101: 34.86 lb/d", "2021-03", "",
         "001,EFF,BOD5,load,daily,max,60.00,lb/d,,2021-03-01,2021-03-07", readings,
         "03-01..03-07 @03-03 34.86 met x0 1"},
        {"wastewater101: 48.37 lb/d", "2021-03", "",
         "001,EFF,BOD5,load,daily,max,60.00,lb/d,,2021-03-08,2021-03-14", readings,
         "03-08..03-14 @03-10 48.37 met x0 1"},
        {"wastewater101: 27.02 lb/d", "2021-03", "",
         "001,EFF,BOD5,load,daily,max,60.00,lb/d,,2021-03-15,2021-03-21", readings,
         "03-15..03-21 @03-17 27.02 met x0 1"},
        {"wastewater101: 15.85 lb/d", "2021-03", "",
         "001,EFF,BOD5,load,daily,max,60.00,lb/d,,2021-03-22,2021-03-28", readings,
         "03-22..03-28 @03-24 15.85 met x0 1"},
        {"wastewater101: mean 31.53 lb/d", "2021-03", "",
         "001,EFF,BOD5,load,monthly-average,max,50.00,lb/d", readings, "03-01..03-31 31.53 met 4"},
        {"wastewater101: mean 19.75 mg/L", "2021-03", "", MEAN("30.00"), readings,
         "03-01..03-31 19.75 met 4"},
    };

    check_months(cases, NELEM(cases));
}

#define PH(bound, limit) "001,EFF,PH,concentration,instantaneous," bound "," limit ",pH"
#define REMOVAL          "001,EFF,BOD5,removal,monthly-average,min,85,%"
#define WEEKLY           "001,EFF,BOD5,concentration,weekly-average,max,45,mg/L,,2025-03-08,2025-03-08"

/* 40 CFR 133.102 (2015): BOD5 and SS 30 mg/L (30-day), 45 (7-day), 85 % removal; pH 6.0 to 9.0. */
static void secondary_treatment_at_just_under_and_just_over(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"133.102(a)(1), at", "2025-03", "compare,raw", MEAN("30"), "EFF BOD5 mg/L 4=29 11=31",
         "03-01..03-31 30 met 2"},
        {"133.102(a)(1), just under", "2025-03", "compare,raw", MEAN("30"),
         "EFF BOD5 mg/L 4=29 11=30.998", "03-01..03-31 30 met 2"},
        {"133.102(a)(1), just over", "2025-03", "compare,raw", MEAN("30"),
         "EFF BOD5 mg/L 4=29 11=31.002", "03-01..03-31 30 exceeded 2"},
        {"133.102(a)(1), just over, to the digits of the limit", "2025-03", "", MEAN("30"),
         "EFF BOD5 mg/L 4=29 11=32.002", "03-01..03-31 31 exceeded 2"},
        {"133.102(a)(2), at", "2025-03", "compare,raw", WEEKLY, "EFF BOD5 mg/L 4=44 6=46",
         "03-02..03-08 45 met 2"},
        {"133.102(a)(2), just under", "2025-03", "compare,raw", WEEKLY,
         "EFF BOD5 mg/L 4=44 6=45.999", "03-02..03-08 45 met 2"},
        {"133.102(a)(2), just over", "2025-03", "compare,raw", WEEKLY,
         "EFF BOD5 mg/L 4=44 6=46.001", "03-02..03-08 45 exceeded 2"},
        {"133.102(b)(1), at", "2025-03", "compare,raw",
         "001,EFF,TSS,concentration,monthly-average,max,30,mg/L", "EFF TSS mg/L 4=30",
         "03-01..03-31 30 met 1"},
        {"133.102(b)(1), just over", "2025-03", "compare,raw",
         "001,EFF,TSS,concentration,monthly-average,max,30,mg/L", "EFF TSS mg/L 4=30.001",
         "03-01..03-31 30 exceeded 1"},
        {"133.102(a)(3), at", "2025-03", "compare,raw", REMOVAL,
         "EFF BOD5 mg/L 4=30\nINF BOD5 mg/L 4=200", "03-01..03-31 85 met 1"},
        {"133.102(a)(3), just over, which is better", "2025-03", "compare,raw", REMOVAL,
         "EFF BOD5 mg/L 4=29.999\nINF BOD5 mg/L 4=200", "03-01..03-31 85 met 1"},
        {"133.102(a)(3), just under", "2025-03", "compare,raw", REMOVAL,
         "EFF BOD5 mg/L 4=30.001\nINF BOD5 mg/L 4=200", "03-01..03-31 85 exceeded 1"},
        {"133.102(c), at", "2025-03", "", PH("min", "6.0") "\n" PH("max", "9.0"),
         "EFF PH pH 4@08:00=6.0 4@15:00=9.0",
         "03-01..03-31 @03-04 6.0 met x0 1\n03-01..03-31 @03-04 9.0 met x0 1"},
        {"133.102(c), just inside", "2025-03", "compare,raw",
         PH("min", "6.0") "\n" PH("max", "9.0"), "EFF PH pH 4@08:00=6.01 4@15:00=8.99",
         "03-01..03-31 @03-04 6.0 met x0 1\n03-01..03-31 @03-04 9.0 met x0 1"},
        {"133.102(c), just outside", "2025-03", "compare,raw",
         PH("min", "6.0") "\n" PH("max", "9.0"), "EFF PH pH 4@08:00=5.99 4@15:00=9.01",
         "03-01..03-31 @03-04 6.0 exceeded x1 1\n03-01..03-31 @03-04 9.0 exceeded x1 1"},
    };

    check_months(cases, NELEM(cases));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_examples_come_out_as_printed),
        cmocka_unit_test(a_published_month_of_loads_comes_out_as_printed),
        cmocka_unit_test(secondary_treatment_at_just_under_and_just_over),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
