/* Signs, digits and rounding: what is printed, and what is compared. R7, R10 to R16, R24, R27 to
 * R32 and R48 of weirbook-rules(7). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define CU(statistic, limit) "001,EFF,CU,concentration," statistic ",max," limit ",ug/L"
#define ECOLI(statistic)     "001,EFF,ECOLI,concentration," statistic ",max,126,MPN/100mL"

static void less_thans_in_means_and_when_their_sign_is_printed(void **state)
{
    (void)state;
    static const char mixed[] = "EFF CU ug/L 4=4.0 6=<2.0 11=6.0 13=<2.0 18=3.0";
    static const char all[] = "EFF CU ug/L 4=<0.5 11=<0.2 18=<0.4";
    static const struct month_case cases[] = {
        {"Colorado COG-603000 definition 11, Ohio: zero", "2025-03", "nondetect,zero",
         CU("monthly-average", "3.0"), mixed, "03-01..03-31 <2.6 met 5"},
        {"half: common practice, no source", "2025-03", "nondetect,half",
         CU("monthly-average", "3.0"), mixed, "03-01..03-31 <3.0 met 5"},
        {"Iowa DNR: full", "2025-03", "nondetect,full", CU("monthly-average", "3.0"), mixed,
         "03-01..03-31 <3.4 exceeded 5"},
        {"California order R2-2012-0012: median; R27: read off a value, no sign", "2025-03",
         "nondetect,median", CU("monthly-average", "3.0"), mixed, "03-01..03-31 3.0 met 5"},
        {"sign=all needs all; common practice, no source", "2025-03", "nondetect,zero\nsign,all",
         CU("monthly-average", "3.0"), mixed, "03-01..03-31 2.6 met 5"},
        {"sign=never; common practice, no source", "2025-03", "nondetect,full\nsign,never",
         CU("monthly-average", "3.0"), mixed, "03-01..03-31 3.4 exceeded 5"},
        {"R13, Colorado COG-603000 definition 11: less than the largest", "2025-03",
         "nondetect,zero\nsign,all", CU("monthly-average", "3.0"), all, "03-01..03-31 <0.5 met 3"},
        {"R13 under half", "2025-03", "nondetect,half", CU("monthly-average", "3.0"), all,
         "03-01..03-31 <0.5 met 3"},
        {"R13 under full: the mean", "2025-03", "nondetect,full", CU("monthly-average", "3.00"),
         all, "03-01..03-31 <0.37 met 3"},
        {"R13 under never: the substituted mean", "2025-03", "nondetect,zero\nsign,never",
         CU("monthly-average", "3.0"), all, "03-01..03-31 0.0 met 3"},
        {"R13 under median", "2025-03", "nondetect,median", CU("monthly-average", "3.0"), all,
         "03-01..03-31 <0.5 met 3"},
        {"R30: a day partly less-than is enough for any", "2025-03", "nondetect,full",
         CU("monthly-average", "3.0"), "EFF CU ug/L 4@08:00=<1 4@09:00=3 11=4",
         "03-01..03-31 <3.0 met 2"},
        {"R30: and not for all", "2025-03", "nondetect,full\nsign,all",
         CU("monthly-average", "3.0"), "EFF CU ug/L 4@08:00=<1 4@09:00=3 11=<4",
         "03-01..03-31 3.0 met 2"},
        {"R31: a number that rounds to 0 is printed as written", "2025-03", "",
         CU("monthly-average", "3"), "EFF CU ug/L 4=<0.20 11=<0.1", "03-01..03-31 <0.20 met 2"},
        {"R31: in another unit with all its digits", "2025-03", "", CU("monthly-average", "3"),
         "EFF CU mg/L 4=<0.0002", "03-01..03-31 <0.2 met 1"},
    };

    check_months(cases, NELEM(cases));
}

static void the_median_procedure_ranks_nondetects_then_dnq_then_values(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"California order R2-2012-0012: ND, DNQ, DNQ, values; the third", "2025-03",
         "nondetect,median", CU("monthly-average", "1.00"),
         "EFF CU ug/L 4=ND(0.20,1.0) 6=DNQ0.40(0.20,1.0) 11=DNQ0.60(0.20,1.0) 13=1.50 18=2.10",
         "03-01..03-31 0.60 met 5"},
        {"California order R2-2012-0012: even, one of the two a DNQ: the lower", "2025-03",
         "nondetect,median", CU("monthly-average", "1.00"),
         "EFF CU ug/L 4=ND(0.20,1.0) 6=DNQ0.40(0.20,1.0) 11=1.50 13=2.10",
         "03-01..03-31 0.40 met 4"},
        {"the same: even, the lower is an ND (R27: with its sign)", "2025-03", "nondetect,median",
         CU("monthly-average", "1.00"), "EFF CU ug/L 4=<0.20 6=<0.30 11=DNQ0.40 13=2.10",
         "03-01..03-31 <0.30 met 4"},
        {"the same: a less-than of a large number ranks lowest all the same", "2025-03",
         "nondetect,median", CU("monthly-average", "1.00"), "EFF CU ug/L 4=<9 6=0.40 11=0.50",
         "03-01..03-31 0.40 met 3"},
        {"the same: without ND and DNQ the mean stays", "2025-03", "nondetect,median",
         CU("monthly-average", "1.00"), "EFF CU ug/L 4=0.40 6=0.50 11=1.50",
         "03-01..03-31 0.80 met 3"},
        {"R28: a daily maximum compares the number", "2025-03", "nondetect,median",
         CU("daily", "1.0"), "EFF CU ug/L 4=<2.0 6=0.4", "03-01..03-31 @03-04 <2.0 exceeded x1 2"},
    };

    check_months(cases, NELEM(cases));
}

static void medians_and_percentiles_are_read_off_their_ranks(void **state)
{
    (void)state;
    static const char twenty[] = "EFF CU ug/L 1=10 2=9 3=8 4=7 5=6 6=5 7=4 8=3 9=2 10=1";
    static const struct month_case cases[] = {
        {"R24: the mean of the middle two; common practice, no source", "2025-03", "",
         CU("monthly-median", "14"), "EFF CU ug/L 4=8 6=30 11=11 13=23",
         "03-01..03-31 17 exceeded 4"},
        {"R27: the sign of the values read", "2025-03", "nondetect,full\nsign,all",
         CU("monthly-median", "14"), "EFF CU ug/L 4=8 6=30 11=<11 13=23",
         "03-01..03-31 <17 exceeded 4"},
        {"R27: none when they have none", "2025-03", "nondetect,full", CU("monthly-median", "14"),
         "EFF CU ug/L 4=<8 6=30 11=11 13=23", "03-01..03-31 17 exceeded 4"},
        {"R27: both less-thans: the largest of their numbers", "2025-03", "nondetect,zero",
         CU("monthly-median", "14"), "EFF CU ug/L 4=<8 6=<12 11=<3 13=23",
         "03-01..03-31 <12 met 4"},
        {"R27: none under never", "2025-03", "nondetect,full\nsign,never",
         CU("monthly-median", "14"), "EFF CU ug/L 4=<8", "03-01..03-31 8 met 1"},
        {"G7 nearest rank: ceil(0.9 x 10) = 9th; common practice, no source", "2025-03", "",
         CU("percentile-90", "9.0"), twenty, "03-01..03-31 9.0 met 10"},
        {"G7 linear: 1 + 0.9 x 9 = 9.1th; common practice, no source", "2025-03",
         "percentile,linear", CU("percentile-90", "9.0"), twenty, "03-01..03-31 9.1 exceeded 10"},
        {"G7 Weibull: 0.9 x 11 = 9.9th; common practice, no source", "2025-03",
         "percentile,weibull", CU("percentile-90", "9.0"), twenty, "03-01..03-31 9.9 exceeded 10"},
        {"G7 Weibull: held inside the ranks there are", "2025-03", "percentile,weibull",
         CU("percentile-99", "9.0"), "EFF CU ug/L 1=5 2=7", "03-01..03-31 7.0 met 2"},
        {"R46: one value is enough", "2025-03", "percentile,linear", CU("percentile-95", "9.0"),
         "EFF CU ug/L 4=3", "03-01..03-31 3.0 met 1"},
    };

    check_months(cases, NELEM(cases));
}

static void geometric_means_go_through_their_power(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"Texas: zero enters as 1; 1, 1, 2^5, 3^5, 4^5: the fifth root is 24", "2025-03", "",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=0 5=0 10=32 12=243 17=1024",
         "03-01..03-31 24 met 5"},
        {"R16: a non-detect that zero makes 0 too", "2025-03", "nondetect,zero\nsign,never",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=<4 5=16", "03-01..03-31 4 met 2"},
        {"Iowa DNR: less-thans at their number", "2025-03", "nondetect,full",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=<4 5=16 10=64", "03-01..03-31 <16 met 3"},
        {"R13, Colorado: all less-thans, less than the largest", "2025-03", "nondetect,zero",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=<2 5=<10", "03-01..03-31 <10 met 2"},
        {"New York DEC: a greater-than is carried; >2420, 10, 10, 10", "2025-03", "",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=>2420 5=10 10=10 12=10",
         "03-01..03-31 >39 met 4"},
        {"exactly the limit is met, by the power and not by a double", "2025-03", "compare,raw",
         ECOLI("monthly-geomean"), "EFF ECOLI MPN/100mL 3=108 5=147", "03-01..03-31 126 met 2"},
        {"strictly below is not", "2025-03", "compare,raw",
         "001,EFF,ECOLI,concentration,monthly-geomean,below,126,MPN/100mL",
         "EFF ECOLI MPN/100mL 3=108 5=147", "03-01..03-31 126 exceeded 2"},
        {"just over", "2025-03", "compare,raw", ECOLI("monthly-geomean"),
         "EFF ECOLI MPN/100mL 3=108 5=147.000000001", "03-01..03-31 126 exceeded 2"},
        {"R48: days of several readings keep their roots: sqrt(2) and sqrt(8) give 2", "2025-03",
         "compare,raw", "001,EFF,ECOLI,concentration,monthly-geomean,max,2,MPN/100mL",
         "EFF ECOLI MPN/100mL 3@08:00=1 3@09:00=2 5@08:00=2 5@09:00=4", "03-01..03-31 2 met 2"},
        {"R48: roots of two and of three: sqrt(4) and cbrt(27) give sqrt(6), 2.449", "2025-03", "",
         "001,EFF,ECOLI,concentration,monthly-geomean,max,2.449,MPN/100mL",
         "EFF ECOLI MPN/100mL 3@08:00=1 3@09:00=4 5@08:00=1 5@09:00=3 5@10:00=9",
         "03-01..03-31 2.449 met 2"},
        {"a number below 0 has no geometric mean", "2025-03", "",
         "001,EFF,TEMP,concentration,monthly-geomean,report,,degC", "EFF TEMP degC 3=-1 5=4",
         "03-01..03-31 - no-data 2"},
    };

    check_months(cases, NELEM(cases));
}

static void worst_values_and_their_ties(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"R7: the earliest day on ties; common practice, no source", "2025-03", "",
         CU("daily", "9.0"), "EFF CU ug/L 4=7 11=7 18=3", "03-01..03-31 @03-04 7.0 met x0 3"},
        {"R32: the less-than with the larger number", "2025-03", "", CU("daily", "9.0"),
         "EFF CU ug/L 4=<2.0 11=<5.0 18=<5.0", "03-01..03-31 @03-11 <5.0 met x0 3"},
        {"Colorado footnote: below what the method can see, met under zero", "2025-03",
         "nondetect,zero", "001,EFF,TRC,concentration,daily,max,0.02,mg/L", "EFF TRC mg/L 4=<0.05",
         "03-01..03-31 @03-04 <0.05 met x0 1"},
        {"and exceeded under full; common practice, no source", "2025-03", "nondetect,full",
         "001,EFF,TRC,concentration,daily,max,0.02,mg/L", "EFF TRC mg/L 4=<0.03 5=0.022",
         "03-01..03-31 @03-04 <0.03 exceeded x1 2"},
        {"R15, New York DEC: > wins over <", "2025-03", "nondetect,full",
         CU("monthly-average", "9"), "EFF CU ug/L 4=<2 11=>8", "03-01..03-31 >5 met 2"},
        {"R15, New York DEC: but not for a minimum", "2025-03", "nondetect,full",
         "001,EFF,CU,concentration,monthly-average,min,2,ug/L", "EFF CU ug/L 4=<2 11=>8",
         "03-01..03-31 <5 met 2"},
        {"R7: the lowest for a minimum", "2025-03", "",
         "001,EFF,DO,concentration,daily,min,5.0,mg/L",
         "EFF DO mg/L 4@08:00=5.0 4@15:00=4.8 11=5.4 18=4.9",
         "03-01..03-31 @03-04 4.8 exceeded x2 3"},
        {"above is strict", "2025-03", "", "001,EFF,DO,concentration,daily,above,5.0,mg/L",
         "EFF DO mg/L 4=5.0", "03-01..03-31 @03-04 5.0 exceeded x1 1"},
        {"SOR/2012-139, s. 6(1): below 1.25", "2025-03", "",
         "001,EFF,NH3N,concentration,daily,below,1.25,mg/L", "EFF NH3N mg/L 4=1.24 6=1.25",
         "03-01..03-31 @03-06 1.25 exceeded x1 2"},
        {"R8: instantaneous judges readings and counts days", "2025-03", "",
         "001,EFF,PH,concentration,instantaneous,max,9.0,pH",
         "EFF PH pH 4@08:00=9.1 4@09:00=9.2 6=8.0", "03-01..03-31 @03-04 9.2 exceeded x2 2"},
        {"R8: or counts readings", "2025-03", "count_by,reading",
         "001,EFF,PH,concentration,instantaneous,max,9.0,pH",
         "EFF PH pH 4@08:00=9.1 4@09:00=9.2 6=8.0", "03-01..03-31 @03-04 9.2 exceeded x2 3"},
        {"R25, R33: a target is shown and counts its passes", "2025-03", "",
         "001,EFF,CU,concentration,daily,target,5.0,ug/L", "EFF CU ug/L 4=6 11=7",
         "03-01..03-31 @03-11 7.0 target-passed x2 2"},
        {"a target met", "2025-03", "", "001,EFF,CU,concentration,daily,target,5.0,ug/L",
         "EFF CU ug/L 4=5.04", "03-01..03-31 @03-04 5.0 target-met x0 1"},
        {"R33: report has no times; R10: the parameter's decimals", "2025-03", "",
         "001,EFF,CU,concentration,daily,report,,ug/L", "EFF CU ug/L 4=6.27",
         "03-01..03-31 @03-04 6.3 report 1"},
        {"R10: digits=N", "2025-03", "digits,0", "001,EFF,CU,concentration,daily,report,,ug/L",
         "EFF CU ug/L 4=6.5", "03-01..03-31 @03-04 6 report 1"},
    };

    check_months(cases, NELEM(cases));
}

static void rounding_ties_digits_and_comparison(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"Standard Methods 1050 B, from memory: 30.5 goes to the even 30", "2025-03", "",
         CU("monthly-average", "30"), "EFF CU ug/L 4=30 11=31", "03-01..03-31 30 met 2"},
        {"Standard Methods 1050 B: 31.5 goes to 32", "2025-03", "", CU("monthly-average", "31"),
         "EFF CU ug/L 4=31 11=32", "03-01..03-31 32 exceeded 2"},
        {"EPA drinking-water guidance: 5 up", "2025-03", "rounding,half-up",
         CU("monthly-average", "30"), "EFF CU ug/L 4=30 11=31", "03-01..03-31 31 exceeded 2"},
        {"2.45 is a tie exactly; common practice, no source", "2025-03", "",
         CU("monthly-average", "2.4"), "EFF CU ug/L 4=2.4 11=2.5", "03-01..03-31 2.4 met 2"},
        {"three days of 7/3 and one of 2.8 are 2.45 exactly; common practice, no source", "2025-03",
         "", CU("monthly-average", "2.4"),
         "EFF CU ug/L 4@08:00=2 4@09:00=2 4@10:00=3 5@08:00=2 5@09:00=2 5@10:00=3 6@08:00=2 "
         "6@09:00=2 6@10:00=3 7=2.8",
         "03-01..03-31 2.4 met 4"},
        {"thirty-one tenths are 0.1, raw; common practice, no source", "2025-03", "compare,raw",
         CU("monthly-average", "0.1"), "EFF CU ug/L 1..31=0.1", "03-01..03-31 0.1 met 31"},
        {"rounded: 30.4 meets 30", "2025-03", "", CU("monthly-average", "30"), "EFF CU ug/L 4=30.4",
         "03-01..03-31 30 met 1"},
        {"raw: it does not", "2025-03", "compare,raw", CU("monthly-average", "30"),
         "EFF CU ug/L 4=30.4", "03-01..03-31 30 exceeded 1"},
        {"30 and 30.0 are different limits", "2025-03", "", CU("monthly-average", "30.0"),
         "EFF CU ug/L 4=30.4", "03-01..03-31 30.4 exceeded 1"},
        {"R12: compared at the limit's decimals whatever digits prints", "2025-03", "digits,3",
         CU("monthly-average", "1.0"), "EFF CU ug/L 4=1.04", "03-01..03-31 1.040 met 1"},
        {"R11, New York DEC: figures, also after a carry", "2025-03", "digits,figures",
         CU("monthly-average", "1.0"), "EFF CU ug/L 4=0.995 11=0.998", "03-01..03-31 1.0 met 2"},
        {"R11: 9.96 to two figures is 10", "2025-03", "digits,figures", CU("monthly-average", "30"),
         "EFF CU ug/L 4=9.94 11=9.98", "03-01..03-31 10 met 2"},
        {"R31: 0 under figures has the limit's decimals", "2025-03", "digits,figures",
         CU("monthly-average", "1.0"), "EFF CU ug/L 4=0", "03-01..03-31 0.0 met 1"},
        {"G14: trailing zeros are significant", "2025-03", "digits,figures",
         CU("monthly-average", "300"), "EFF CU ug/L 4=1234.5", "03-01..03-31 1230 exceeded 1"},
        {"figures of a geometric mean", "2025-03", "digits,figures",
         "001,EFF,ECOLI,concentration,monthly-geomean,max,126,MPN/100mL",
         "EFF ECOLI MPN/100mL 4=1 11=2", "03-01..03-31 1.41 met 2"},
        {"R31: half-up goes away from 0, and -0 is never printed", "2025-03", "rounding,half-up",
         "001,EFF,TEMP,concentration,daily,min,-5,degC", "EFF TEMP degC 4=-0.4",
         "03-01..03-31 @03-04 0 met x0 1"},
        {"R31: half-up away from 0", "2025-03", "rounding,half-up",
         "001,EFF,TEMP,concentration,daily,min,-5,degC", "EFF TEMP degC 4=-0.5",
         "03-01..03-31 @03-04 -1 met x0 1"},
    };

    check_months(cases, NELEM(cases));
}

static void sums_of_parameters_need_all_parts(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"91/271/EEC annex I table 2 note: nitrogen as a sum; R43", "2025-03", "",
         "001,EFF,NH3N+NO2N+NO3N,concentration,monthly-average,max,7.0,mg/L\n"
         "001,EFF,NH3N+NO2N+NO3N,concentration,daily,report,,mg/L",
         "EFF NH3N mg/L 4=1.2 11=0.8 18=9\nEFF NO2N mg/L 4=0.1 11=0.3\nEFF NO3N mg/L 4=5.0 11=7.0 "
         "18=9",
         "03-01..03-31 7.2 exceeded 2\n03-01..03-31 @03-11 8.10 report 2"},
        {"R30: R13's number is the sum of the parts'", "2025-03", "",
         "001,EFF,NH3N+NO2N,concentration,monthly-average,max,7.0,mg/L",
         "EFF NH3N mg/L 4=<0.2\nEFF NO2N mg/L 4=<0.1", "03-01..03-31 <0.3 met 1"},
        {"R30: partly", "2025-03", "sign,all",
         "001,EFF,NH3N+NO2N,concentration,monthly-average,max,7.0,mg/L",
         "EFF NH3N mg/L 4=<0.2\nEFF NO2N mg/L 4=0.1", "03-01..03-31 0.1 met 1"},
        {"R48: a day's geometric mean that enters a sum", "2025-03", "",
         "001,EFF,ECOLI+FCOLI,concentration,daily,max,9.999,MPN/100mL",
         "EFF ECOLI MPN/100mL 4@08:00=1 4@09:00=2\nEFF FCOLI cfu/100mL 4=3",
         "03-01..03-31 @03-04 4.414 met x0 1"},
    };

    check_months(cases, NELEM(cases));
}

static void a_days_only_reading_keeps_its_digits_and_others_are_rounded(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "");
    const struct rules *rules = &m->plant->rules;
    int eff = plant_point(m->plant, "EFF"), cu = plant_parameter(m->plant, "CU");
    struct frame *f;

    made_readings(m, "EFF CU ug/L 3=<2 4=14.55 5@08:00=<2 5@09:00=4 6=>50 7=<0.01");
    f = made_frame(m, m->month, month_last(m->month));
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 2, rules, 1), "<2");
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 3, rules, 1), "14.55");
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 4, rules, 1), "<2.0");
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 5, rules, 0), ">50");
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 6, rules, 1), "<0.01");
    assert_string_equal(permit_day_text(m->arena, f, eff, cu, m->month + 9, rules, 1), "");
    made_free(m);
}

/* R10, R13: the mean of a column without a limit follows the same rules as a row. */
static void a_months_mean_without_a_limit_follows_the_parameters_rules(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "nondetect,median", "", "");
    int eff = plant_point(m->plant, "EFF");
    struct frame *f;

    made_readings(m, "EFF CU ug/L 3=<2 4=4 5=9\nEFF ECOLI MPN/100mL 3=12 4=28 5=37 6=25\n"
                     "EFF TSS mg/L 1=10 2=11\n");
    f = made_frame(m, m->month, month_last(m->month));
    /* California order R2-2012-0012: the median gives way for a mean with less-thans. */
    assert_string_equal(permit_month_mean(m->arena, f, eff, plant_parameter(m->plant, "CU"),
                                          m->month, month_last(m->month)),
                        "4.0");
    /* Spellman, operators' mathematics: the geometric mean of 12, 28, 37, 25 is 23.6. */
    m->plant->parameters[plant_parameter(m->plant, "ECOLI")].average = AVERAGE_GEOMETRIC;
    assert_string_equal(permit_month_mean(m->arena, f, eff, plant_parameter(m->plant, "ECOLI"),
                                          m->month, month_last(m->month)),
                        "24");
    assert_string_equal(permit_month_mean(m->arena, f, eff, plant_parameter(m->plant, "TSS"),
                                          m->month, month_last(m->month)),
                        "10.5");
    /* On the first day only one is known. */
    assert_string_equal(
        permit_month_mean(m->arena, f, eff, plant_parameter(m->plant, "TSS"), m->month, m->month),
        "10.0");
    assert_string_equal(permit_month_mean(m->arena, f, eff, plant_parameter(m->plant, "PH"),
                                          m->month, month_last(m->month)),
                        "");
    made_free(m);
}

/* 40 CFR 133.102(c): pH 6.0 to 9.0; each reading is judged, not the day's mean. */
static void a_day_is_beyond_when_one_of_its_readings_is(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "",
                                "001,EFF,PH,concentration,instantaneous,max,9.0,pH\n"
                                "001,EFF,PH,concentration,daily,max,9.0,pH\n",
                                "");
    struct frame *f;

    made_readings(m, "EFF PH pH 1@08:00=9.2 1@15:00=7.0 2=9.04 3=9.1\n");
    f = made_frame(m, m->month, month_last(m->month));
    static const bool readings[] = {true, false, true}, days[] = {false, false, true};
    for (int i = 0; i < 4; i++) {
        day_t day = m->month + i;
        assert_int_equal(permit_day_beyond(m->arena, f, &m->plant->limits[0], day),
                         i < 3 && readings[i]);
        assert_int_equal(permit_day_beyond(m->arena, f, &m->plant->limits[1], day),
                         i < 3 && days[i]);
    }
    made_free(m);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(less_thans_in_means_and_when_their_sign_is_printed),
        cmocka_unit_test(the_median_procedure_ranks_nondetects_then_dnq_then_values),
        cmocka_unit_test(medians_and_percentiles_are_read_off_their_ranks),
        cmocka_unit_test(geometric_means_go_through_their_power),
        cmocka_unit_test(worst_values_and_their_ties),
        cmocka_unit_test(rounding_ties_digits_and_comparison),
        cmocka_unit_test(sums_of_parameters_need_all_parts),
        cmocka_unit_test(a_months_mean_without_a_limit_follows_the_parameters_rules),
        cmocka_unit_test(a_day_is_beyond_when_one_of_its_readings_is),
        cmocka_unit_test(a_days_only_reading_keeps_its_digits_and_others_are_rounded),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
