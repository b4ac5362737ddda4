/* faults: each kind of mistake a description can hold, one by one, with the line a person reads.
 * Every row stands alone in a small plant without faults, as line 20 of its file, and must give
 * exactly one problem. The wording is the project's own; no published source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "describe.h"

static const struct {
    enum plant_file file;
    const char *row, *problem;
} faults[] = {
    {PLANT_FIELDS, "nam,Marrow", "plant.csv:20:1: no field 'nam'; the nearest is 'name'"},
    {PLANT_FIELDS, "xyzzy,Marrow",
     "plant.csv:20:1: no field 'xyzzy'; write one of name, permit, receiving_water, units, "
     "time_zone, since, or a rule"},
    {PLANT_FIELDS, "permit,YY", "plant.csv:20:1: 'permit' stands already in line 3; keep one"},
    {PLANT_FIELDS, ",Y", "plant.csv:20:1: field is blank; fill it in"},
    {PLANT_FIELDS, "since,2025-02-29",
     "plant.csv:20:2: cannot read '2025-02-29' as a date; write an existing day as YYYY-MM-DD, "
     "such as 2025-03-31"},
    {PLANT_FIELDS, "nondetect,haf",
     "plant.csv:20:2: no nondetect rule 'haf'; the nearest is 'half'"},
    {PLANT_FIELDS, "nondetect,",
     "plant.csv:20:2: nondetect rule is blank; write one of zero, half, full, median"},
    {PLANT_FIELDS, "nondetet,half",
     "plant.csv:20:1: no field 'nondetet'; the nearest is 'nondetect'"},
    {PLANT_FIELDS, "load_factor,0",
     "plant.csv:20:2: load_factor '0' is not above 0; write a number above 0"},
    {PLANT_FIELDS, "load_factor,8;34",
     "plant.csv:20:2: cannot read '8;34' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_FIELDS, "digits,12",
     "plant.csv:20:2: no digits rule '12'; write limit, figures, or a number of decimals from 0 to "
     "9"},
    {PLANT_FIELDS, "flow,EFX", "plant.csv:20:2: no point 'EFX'; the nearest is 'EFF'"},
    {PLANT_FIELDS, "week_starts,mondy",
     "plant.csv:20:2: no week_starts rule 'mondy'; the nearest is 'monday'"},
    {PLANT_POINTS, "EFF,Again,effluent,001",
     "points.csv:20:1: point 'EFF' stands already in line 3; keep one"},
    {PLANT_POINTS, "Eff,Again,effluent,001",
     "points.csv:20:1: point 'Eff' differs from 'EFF' in line 3 only in capitals; write it the "
     "same way, or name it otherwise"},
    {PLANT_POINTS, "DIG,Digester,digestr,",
     "points.csv:20:3: no role 'digestr'; the nearest is 'digester'"},
    {PLANT_POINTS, "DIG,Digester,,",
     "points.csv:20:3: role is blank; write one of influent, primary-effluent, aeration, "
     "secondary-effluent, return-sludge, waste-sludge, effluent, upstream, downstream, "
     "digester-feed, digester, digested-sludge, cake, chemical, other"},
    {PLANT_POINTS, ",Digester,digester,", "points.csv:20:1: point is blank; fill it in"},
    {PLANT_POINTS, "A B,Digester,digester,",
     "points.csv:20:1: cannot use 'A B' as the name of a point; begin with a letter or digit, and "
     "use letters, digits, - _ . /"},
    {PLANT_POINTS, "=A1,x,other,",
     "points.csv:20:1: cannot use '=A1' as the name of a point; begin with a letter or digit, and "
     "use letters, digits, - _ . /"},
    {PLANT_POINTS, "A+B,x,other,",
     "points.csv:20:1: cannot use 'A+B' as the name of a point; begin with a letter or digit, and "
     "use letters, digits, - _ . /"},
    {PLANT_POINTS, "A234567890123456789012345678901234567890123,x,other,",
     "points.csv:20:1: point 'A234567890123456789012345678901234567890123' is too long; keep it to "
     "40 letters, and put the rest under name"},
    {PLANT_PARAMETERS, "XX,New",
     "parameters.csv:20:3: parameter 'XX' has no unit; name the unit it is measured in"},
    {PLANT_PARAMETERS, "XX,New,mgL", "parameters.csv:20:3: no unit 'mgL'; the nearest is 'mL'"},
    {PLANT_PARAMETERS, "XX,New,MG/L", "parameters.csv:20:3: no unit 'MG/L'; the nearest is 'mg/L'"},
    {PLANT_PARAMETERS, "XX,New,mg/L,x",
     "parameters.csv:20:4: cannot take 'x' as decimals; write a whole number from 0 to 9"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,meen",
     "parameters.csv:20:5: no day rule 'meen'; the nearest is 'mean'"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,geometrik",
     "parameters.csv:20:6: no average 'geometrik'; the nearest is 'geometric'"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,310",
     "parameters.csv:20:7: cannot take '310' as a parameter code; write five digits, leading zeros "
     "included, such as 00310"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,,9,1",
     "parameters.csv:20:8: the low bound of XX is above the high one; exchange them or correct "
     "one"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,,,,0.5,0.1",
     "parameters.csv:20:10: the detection limit (mdl) of XX is above its reporting limit (rl); "
     "exchange them or correct one"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,,1O",
     "parameters.csv:20:8: cannot read '1O' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,,1234567890123456789",
     "parameters.csv:20:8: '1234567890123456789' has more than 18 digits; shorten it"},
    {PLANT_PARAMETERS, "XX,New,mg/L,1,mean,,,,,,,nondetect:half",
     "parameters.csv:20:12: cannot read the rule 'nondetect:half'; write name=value, such as "
     "nondetect=half, with ; between rules"},
    {PLANT_PARAMETERS, "bod5,New,mg/L",
     "parameters.csv:20:1: parameter 'bod5' differs from 'BOD5' only in capitals; write it the "
     "same way, or name it otherwise"},
    {PLANT_PARAMETERS, "TSS,,,\nTSS,,,",
     "parameters.csv:21:1: parameter 'TSS' stands already in line 20; keep one"},
    {PLANT_PARAMETERS, "XX,,mg/L\nXX,,mg/L,",
     "parameters.csv:21:1: parameter 'XX' stands already in line 20; keep one"},
    {PLANT_BASINS, "AB1,aeration,,0.5,MG",
     "basins.csv:20:1: basin 'AB1' is in service already by line 2 on days of this one; part the "
     "days by from and to, or name another basin"},
    {PLANT_BASINS, "AB1,aeration,,0.5,MG,,,,,2024-12-31,",
     "basins.csv:20:10: basin 'AB1' is in service already by line 2 on days of this one; part the "
     "days by from and to, or name another basin"},
    {PLANT_BASINS, "AB2,aeratoin",
     "basins.csv:20:2: no kind of basin 'aeratoin'; the nearest is 'aeration'"},
    {PLANT_BASINS, "AB2,aeration,EFFF", "basins.csv:20:3: no point 'EFFF'; the nearest is 'EFF'"},
    {PLANT_BASINS, "AB2,aeration,,0.5", "basins.csv:20:5: volume '0.5' has no unit; name the unit"},
    {PLANT_BASINS, "AB2,aeration,,0.5,ft2",
     "basins.csv:20:5: 'ft2' is a unit of area; name a unit of volume"},
    {PLANT_BASINS, "AB2,aeration,,,MG",
     "basins.csv:20:4: volume has a unit and no number; write the number, or take the unit away"},
    {PLANT_BASINS, "AB2,aeration,,-1,MG",
     "basins.csv:20:4: volume '-1' is not above 0; write a number above 0"},
    {PLANT_BASINS, "AB2,aeration,,,,,,,,2025-02-30",
     "basins.csv:20:10: cannot read '2025-02-30' as a date; write an existing day as YYYY-MM-DD, "
     "such as 2025-03-31"},
    {PLANT_BASINS, "AB2,aeration,,,,,,,,2025-02-01,2025-01-01",
     "basins.csv:20:11: to 2025-01-01 lies before from 2025-02-01; put the earlier day under from"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-average,maks,30,mg/L",
     "limits.csv:20:6: no bound 'maks'; write one of max, min, below, above, report, target"},
    {PLANT_LIMITS, "001,EFG,TSS,concentration,monthly-average,max,30,mg/L",
     "limits.csv:20:2: no point 'EFG'; the nearest is 'EFF'"},
    {PLANT_LIMITS, "001,,TSS,concentration,monthly-average,max,30,mg/L",
     "limits.csv:20:2: point is blank; fill it in"},
    {PLANT_LIMITS, "001,EFF,TS,concentration,monthly-average,max,30,mg/L",
     "limits.csv:20:3: no parameter 'TS'; the nearest is 'TSS'"},
    {PLANT_LIMITS, "001,EFF,QQQQQQ,concentration,monthly-average,max,30,mg/L",
     "limits.csv:20:3: no parameter 'QQQQQQ'; add it to parameters.csv"},
    {PLANT_LIMITS, "001,EFF,TSS,concentrations,monthly-average,max,30,mg/L",
     "limits.csv:20:4: no basis 'concentrations'; the nearest is 'concentration'"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,montly-average,max,30,mg/L",
     "limits.csv:20:5: no statistic 'montly-average'; the nearest is 'monthly-average'"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,percentile-0,max,30,mg/L",
     "limits.csv:20:5: no statistic 'percentile-0'; write percentile-1 to percentile-99, such as "
     "percentile-90"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,percentile-100,max,30,mg/L",
     "limits.csv:20:5: no statistic 'percentile-100'; write percentile-1 to percentile-99, such as "
     "percentile-90"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,percentile-N,max,30,mg/L",
     "limits.csv:20:5: no statistic 'percentile-N'; write percentile-1 to percentile-99, such as "
     "percentile-90"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,,mg/L",
     "limits.csv:20:7: limit is blank; write the number, or report as the bound"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,report,30,mg/L",
     "limits.csv:20:7: report takes no limit, and here is '30'; leave it blank, or write target as "
     "the bound"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,target,,mg/L",
     "limits.csv:20:7: limit is blank; write the number, or report as the bound"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,\"2,5\",mg/L",
     "limits.csv:20:7: cannot read '2,5' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,",
     "limits.csv:20:8: unit is blank; fill it in"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,lb/d",
     "limits.csv:20:8: 'lb/d' is a unit of mass-rate, not one for the daily concentration of TSS; "
     "name a unit of concentration"},
    {PLANT_LIMITS, "001,EFF,TSS,load,daily,max,30,mg/L",
     "limits.csv:20:8: 'mg/L' is a unit of concentration, not one for the daily load of TSS; name "
     "a unit of mass-rate, such as lb/d or kg/d"},
    {PLANT_LIMITS, "001,EFF,TSS,load,monthly-total,max,30,lb/d",
     "limits.csv:20:8: 'lb/d' is a unit of mass-rate, not one for the monthly-total load of TSS; "
     "name a unit of mass, such as lb or kg"},
    {PLANT_LIMITS, "001,EFF,PH,load,daily,max,30,lb/d",
     "limits.csv:20:8: no load of PH, which is measured in pH; only what is measured as a "
     "concentration has one"},
    {PLANT_LIMITS, "001,EFF,TSS,flow,daily,max,30,MGD",
     "limits.csv:20:8: no flow of TSS, which is measured in mg/L; only what is measured as a flow "
     "has one"},
    {PLANT_LIMITS, "001,EFF,FLOW,flow,monthly-total,max,30,MGD",
     "limits.csv:20:8: 'MGD' is a unit of flow, not one for the monthly-total flow of FLOW; name a "
     "unit of volume, such as MG or m3"},
    {PLANT_LIMITS, "001,EFF,FLOW,flow,daily,max,30,mg/L",
     "limits.csv:20:8: 'mg/L' is a unit of concentration, not one for the daily flow of FLOW; name "
     "a unit of flow, such as MGD or m3/d"},
    {PLANT_LIMITS, "001,EFF,TSS,removal,monthly-average,min,85,mg/L",
     "limits.csv:20:8: 'mg/L' is a unit of concentration, not one for the monthly-average removal "
     "of TSS; write %"},
    {PLANT_LIMITS, "001,EFF,TSS,removal,monthly-total,min,85,%",
     "limits.csv:20:5: a removal has no total; write an average, or another basis"},
    {PLANT_LIMITS, "001,EFF,TSS,removal,instantaneous,min,85,%",
     "limits.csv:20:5: a removal has no instantaneous figure; write daily, or another basis"},
    {PLANT_LIMITS, "001,EFF,EXCURSION,count,monthly-total,max,446,mg/L",
     "limits.csv:20:8: 'mg/L' is a unit of concentration, not one for the monthly-total count of "
     "EXCURSION; name a unit of time"},
    {PLANT_LIMITS, "001,EFF+EF2,TSS,concentration,daily,max,30,mg/L",
     "limits.csv:20:2: points can be added for loads and flows, not for concentration; write a "
     "limit for each point, or load or flow as the basis"},
    {PLANT_LIMITS, "001,EFF+EFF,TSS,load,daily,max,30,lb/d",
     "limits.csv:20:2: 'EFF' stands twice in 'EFF+EFF'; keep one"},
    {PLANT_LIMITS, "001,EFF+,TSS,load,daily,max,30,lb/d",
     "limits.csv:20:2: a part of 'EFF+' is blank; write a name on both sides of each +"},
    {PLANT_LIMITS, "001,EFF,NH3N+PH,concentration,daily,max,30,mg/L",
     "limits.csv:20:3: NH3N is measured in mg/L and PH in pH; add only what is measured in units "
     "of one kind"},
    {PLANT_LIMITS,
     "001,EFF,NH3N+NO3N+NH3N+NO3N+NH3N+NO3N+NH3N+NO3N+NH3N,concentration,daily,max,30,mg/L",
     "limits.csv:20:3: 'NH3N+NO3N+NH3N+NO3N+NH3N+NO3N+NH3N+NO3N+NH3N' has too many parts; keep to "
     "8"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,05-01-10-31",
     "limits.csv:20:9: cannot read '05-01-10-31' as a season; write month and day twice, such as "
     "05-01..10-31"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,02-30..10-31",
     "limits.csv:20:9: the season '02-30..10-31' has a day that does not exist; write months 01 to "
     "12 and days they have"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,2025-13-01",
     "limits.csv:20:10: cannot read '2025-13-01' as a date; write an existing day as YYYY-MM-DD, "
     "such as 2025-03-31"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,2025-12-01,2025-11-30",
     "limits.csv:20:11: to 2025-11-30 lies before from 2025-12-01; put the earlier day under from"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW > 2.5 MGD",
     "limits.csv:20:12: cannot read the condition 'EFF FLOW > 2.5 MGD'; write it as EFF FLOW "
     "monthly-average > 2.5 MGD"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFX FLOW monthly-average > 2.5 MGD",
     "limits.csv:20:12: no point 'EFX'; the nearest is 'EFF'"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOWS monthly-average > 2.5 MGD",
     "limits.csv:20:12: no parameter 'FLOWS'; the nearest is 'FLOW'"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW monthly-averag > 2.5 MGD",
     "limits.csv:20:12: no statistic 'monthly-averag'; the nearest is 'monthly-average'"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW monthly-average => 2.5 MGD",
     "limits.csv:20:12: no comparison '=>'; write one of > >= < <="},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW monthly-average > x MGD",
     "limits.csv:20:12: cannot read 'x' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW monthly-average > 2.5 MDG",
     "limits.csv:20:12: no unit 'MDG'; the nearest is 'MG'"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW monthly-average > 2.5 lb/d",
     "limits.csv:20:12: no load of FLOW, which is measured in MGD; only what is measured as a "
     "concentration has one"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW daily > 2.5 MGD",
     "limits.csv:20:12: 'daily' is not one figure a month; name one, such as monthly-average"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,8/week",
     "limits.csv:20:13: a week cannot hold '8/week' where samples are counted by day; lower it, or "
     "set count_by=reading in the rules of this row"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,2/day",
     "limits.csv:20:13: a day cannot hold '2/day' where samples are counted by day; lower it, or "
     "set count_by=reading in the rules of this row"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,99999/week,,,,,count_by=reading",
     "limits.csv:20:13: a week cannot hold '99999/week'; lower it"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,0/week",
     "limits.csv:20:13: cannot read '0/week' as a sampling frequency; write a number per day, "
     "week, month, quarter or year, such as 3/week, or continuous"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,weekly",
     "limits.csv:20:13: cannot read 'weekly' as a sampling frequency; write a number per day, "
     "week, month, quarter or year, such as 3/week, or continuous"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,3/fortnight",
     "limits.csv:20:13: cannot read '3/fortnight' as a sampling frequency; write a number per day, "
     "week, month, quarter or year, such as 3/week, or continuous"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,1/day,grabb",
     "limits.csv:20:14: no kind of sample 'grabb'; the nearest is 'grab'"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,10%",
     "limits.csv:20:15: allowed does not go with daily; take it away, or name monthly-, quarterly- "
     "or annual-samples"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,60",
     "limits.csv:20:16: ceiling does not go with daily; take it away, or name monthly-, quarterly- "
     "or annual-samples"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-samples,max,30,mg/L,,,,,,,ten,60",
     "limits.csv:20:15: cannot read 'ten' as the samples allowed; write a whole number, a "
     "percentage such as 10%, or eu-table-3"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-samples,max,30,mg/L,,,,,,,101%,60",
     "limits.csv:20:15: cannot read '101%' as the samples allowed; write a whole number, a "
     "percentage such as 10%, or eu-table-3"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-samples,max,30,mg/L,,,,,,,10%,20",
     "limits.csv:20:16: the ceiling '20' is not beyond the limit '30'; exchange them or correct "
     "one"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-samples,max,30,mg/L,,,,,,,10%,sixty",
     "limits.csv:20:16: cannot read 'sixty' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,a",
     "limits.csv:20:17: no other limit is in the group 'a'; write it as the other rows do, or take "
     "it away"},
    {PLANT_LIMITS,
     "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,nondetect=zero;nondetect=half",
     "limits.csv:20:18: the rule 'nondetect' is set twice; keep one"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,nondetect",
     "limits.csv:20:18: cannot read the rule 'nondetect'; write name=value, such as "
     "nondetect=half, with ; between rules"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,nondetct=zero",
     "limits.csv:20:18: no rule 'nondetct'; the nearest is 'nondetect'"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,zzzzzzz=zero",
     "limits.csv:20:18: no rule 'zzzzzzz'; weirbook-rules(7) lists the rules"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,;nondetect=zero",
     "limits.csv:20:18: cannot read the rule ''; write name=value, such as nondetect=half, with ; "
     "between rules"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,nondetect=nil",
     "limits.csv:20:18: no nondetect rule 'nil'; write one of zero, half, full, median"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,influent=INN",
     "limits.csv:20:18: no point 'INN'; the nearest is 'INF'"},
    {PLANT_LIMITS, "001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,,2024-12-31,",
     "limits.csv:20: this max limit and the one of line 2 hold on the same days; part the two by "
     "from, to, season or when, or keep one"},
    {PLANT_LIMITS, "001,EFF,NH3N,concentration,monthly-average,max,2.5,mg/L,10-31..04-30,,",
     "limits.csv:20: this max limit and the one of line 3 hold on the same days; part the two by "
     "from, to, season or when, or keep one"},
    {PLANT_LIMITS,
     "001,EFF,TEMP,concentration,daily,max,20,degC\n001,EFF,TEMP,concentration,daily,min,70,degF",
     "limits.csv:21:7: min 70 degF and max 20 degC of line 20 leave no room between them; exchange "
     "them or correct one"},
    {PLANT_LIMITS,
     "001,EFF,TEMP,concentration,daily,max,20,degC\n001,EFF,TEMP,concentration,daily,above,68,degF",
     "limits.csv:21:7: above 68 degF and max 20 degC of line 20 leave no room between them; "
     "exchange them or correct one"},
    {PLANT_METERS, "EFF,FLOW,totalizer,1000000,,2024-12-31,",
     "meters.csv:20:6: EFF FLOW has a meter already by line 2 on days of this one; part the days "
     "by from and to"},
    {PLANT_METERS, "EFF,FLOW,totaliser,,,2025-01-01,",
     "meters.csv:20:3: no kind of meter 'totaliser'; the nearest is 'totalizer'"},
    {PLANT_METERS, "EFX,FLOW,rate", "meters.csv:20:1: no point 'EFX'; the nearest is 'EFF'"},
    {PLANT_METERS, "INF,FLOOW,rate",
     "meters.csv:20:2: no parameter 'FLOOW'; the nearest is 'FLOW'"},
    {PLANT_METERS, "INF,FLOW,rate,1000",
     "meters.csv:20:4: a meter of rate does not roll over; take it away, or call the meter a "
     "totalizer"},
    {PLANT_METERS, "INF,FLOW,totalizer,0",
     "meters.csv:20:4: rolls_at '0' is not above 0; write a number above 0"},
    {PLANT_METERS, "INF,FLOW,totalizer,,x",
     "meters.csv:20:5: cannot read 'x' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_PROCESS, "load-in,INF,BOD5,mass-load,flow,INF FLOW,",
     "process.csv:20:5: the argument 'flow' of 'load-in' at INF stands already in line 2; keep "
     "one"},
    {PLANT_PROCESS, "load-in,INF,BOD5,mass-loads,x,INF FLOW,",
     "process.csv:20:4: 'load-in' at INF has the formula 'mass-load' in line 2; name one formula, "
     "or another figure"},
    {PLANT_PROCESS, ",INF,BOD5,f,x,3,", "process.csv:20:1: name is blank; fill it in"},
    {PLANT_PROCESS, "q,INX,BOD5,f,x,3,", "process.csv:20:2: no point 'INX'; the nearest is 'INF'"},
    {PLANT_PROCESS, "q,INF>EFX,BOD5,f,x,3,",
     "process.csv:20:2: no point 'EFX'; the nearest is 'EFF'"},
    {PLANT_PROCESS, "q,INF,BOD55,f,x,3,",
     "process.csv:20:3: no parameter 'BOD55'; the nearest is 'BOD5'"},
    {PLANT_PROCESS, "q,INF,BOD5,,x,3,", "process.csv:20:4: formula is blank; fill it in"},
    {PLANT_PROCESS, "q,INF,BOD5,f,,3,", "process.csv:20:5: argument is blank; fill it in"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,,", "process.csv:20:6: source is blank; fill it in"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,three,",
     "process.csv:20:6: cannot read 'three' as a number; write digits, with a point before the "
     "decimals"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,3,mgg/L",
     "process.csv:20:7: no unit 'mgg/L'; the nearest is 'mg/L'"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,INF BOD5,MGD",
     "process.csv:20:7: 'MGD' is a unit of flow; BOD5 is measured in mg/L; name a unit of "
     "concentration"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,basin AB1 volum,MG",
     "process.csv:20:6: no measure of a basin 'volum'; the nearest is 'volume'"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,basin AB11 volume,MG",
     "process.csv:20:6: no basin 'AB11'; the nearest is 'AB1'"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,basin SC1 volume,MG",
     "process.csv:20:6: basin 'SC1' has no volume; add it to basins.csv"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,basin AB1 volume,ft2",
     "process.csv:20:7: 'ft2' is a unit of area; name a unit of volume"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,a b c d,",
     "process.csv:20:6: cannot read the source 'a b c d'; write POINT PARAMETER, basin NAME volume "
     "(or area, weir), or a number"},
    {PLANT_ROUND, "INF,FLOW,\nEFF,FLOW,\nINF,FLOW,",
     "round.csv:22:2: the stop INF FLOW stands already in line 20; keep one, or name another "
     "sample"},
    {PLANT_ROUND, "INF,PH,grab\nINF,PH,grab",
     "round.csv:21:3: the stop INF PH grab stands already in line 20; keep one, or name another "
     "sample"},
    {PLANT_ROUND, "INX,PH,", "round.csv:20:1: no point 'INX'; the nearest is 'INF'"},
    {PLANT_ROUND, "INF,FLOOW,", "round.csv:20:2: no parameter 'FLOOW'; the nearest is 'FLOW'"},
    {PLANT_ROUND, "QQQQQQ,PH,", "round.csv:20:1: no point 'QQQQQQ'; add it to points.csv"},
    {PLANT_ROUND, ",PH,", "round.csv:20:1: point is blank; fill it in"},
    {PLANT_ROUND, "INF", "round.csv:20:2: parameter is blank; fill it in"},
};

static void each_mistake_gives_its_own_line(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(faults); i++) {
        struct arena *a = arena_new();
        struct plant_draft *d = small_plant(a);
        struct plant *p = NULL;
        struct fault f = {0};

        add_rows(d, faults[i].file, false, NEXT, faults[i].row);
        if (plant_draft_finish(d, &p, &f) == OK)
            fail_msg("taken without a problem: %s", faults[i].row);
        assert_null(p);
        assert_string_equal(f.text, faults[i].problem);
        if (plant_draft_problems(d) != 1)
            fail_msg("%s\nalso: %s", faults[i].problem, plant_draft_problem_at(d, 1));
        assert_string_equal(plant_draft_problem_at(d, 0), faults[i].problem);
        arena_free(a);
    }
}

/* What stands near a mistake and is none. */
static const struct {
    enum plant_file file;
    const char *row;
} fine[] = {
    {PLANT_FIELDS, "time_zone,"},
    {PLANT_FIELDS, "flow,EFF"},
    {PLANT_BASINS, "AB1,aeration,,0.5,MG,,,,,2025-01-01,"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,percentile-95,max,30,mg/L"},
    {PLANT_LIMITS, "001,EFF,TSS,load,monthly-total,max,30,lb"},
    {PLANT_LIMITS, "001,EFF,EXCURSION,count,monthly-total,max,446,min"},
    {PLANT_LIMITS, "001,EFF+EF2,TSS,load,daily,max,30,lb/d"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,2/day,,,,,count_by=reading"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,,,,,,nondetect=zero;"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,30,mg/"
                   "L,,,,,,,,,,influent=INF;flow=EF2;week_starts=monday"},
    {PLANT_LIMITS, "001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,,2025-01-01,"},
    {PLANT_LIMITS, "001,EFF,NH3N,concentration,monthly-average,max,2.5,mg/L,11-01..04-30,,"},
    {PLANT_LIMITS, "001,EFF,NH3N,concentration,monthly-average,max,2.5,mg/L,,,,EFF FLOW "
                   "monthly-average > 2.5 MGD"},
    {PLANT_LIMITS,
     "001,EFF,TEMP,concentration,daily,max,20,degC\n001,EFF,TEMP,concentration,daily,min,68,degF"},
    {PLANT_PROCESS, "q,INF>EFF,BOD5,f,x,3,"},
    {PLANT_PROCESS, "q,INF,BOD5,f,x,basin AB1 volume,MG"},
    /* A load in pounds and the same in kilograms are two limits. */
    {PLANT_LIMITS, "001,EFF,TSS,load,daily,max,60,lb/d\n001,EFF,TSS,load,daily,max,27,kg/d"},
    /* Two action levels; a table of allowed samples; one figure reported under two rules. */
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,target,60,mg/L\n"
                   "001,EFF,TSS,concentration,daily,target,90,mg/L"},
    {PLANT_LIMITS, "001,EFF,ECOLI,concentration,monthly-samples,max,410,/100mL,,,,,,,10%\n"
                   "001,EFF,ECOLI,concentration,monthly-samples,max,1000,/100mL,,,,,,,2%,"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,report,,mg/L\n"
                   "001,EFF,TSS,concentration,daily,report,,mg/L,,,,,,,,,,dnq=half"},
    /* A value or a percentage: rows of a group are choices. */
    {PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,60,mg/L,,,,,,,,,choice\n"
                   "001,EFF,TSS,concentration,daily,max,90,mg/L,,,,,,,,,choice"},
    {PLANT_LIMITS, "001,EFF,NO3N,concentration,daily,max,5,mg/L,,,,EFF FLOW monthly-total > 60 MG"},
    {PLANT_LIMITS,
     "001,EFF,NO3N,concentration,daily,max,5,mg/L,,,,INF BOD5 monthly-average >= 9 kg/d"},
    {PLANT_LIMITS,
     "001,EFF,NO3N,concentration,daily,max,5,mg/L,,,,EFF BOD5 monthly-average <= 85 %"},
    {PLANT_LIMITS,
     "001,EFF,NO3N,concentration,daily,max,5,mg/L,,,,EFF BOD5 monthly-average < 9 mg/L"},
    {PLANT_LIMITS, "001,EFF,NO3N,concentration,daily,max,5,mg/L,,,,,366/year"},
    {PLANT_LIMITS, "001,EFF,TEMP,concentration,daily,max,-5,degC"},
    {PLANT_LIMITS, "001,EFF,NH3N + NO3N,concentration,daily,max,20,mg/L"},
    {PLANT_PARAMETERS, "BOD5,,,,,,,,,,,sign=never ; nondetect = half"},
    {PLANT_PARAMETERS, "WET,Toxicity,%,,,,TGP3B"},
    {PLANT_BASINS, "AB2,anoxic,RAS,400,m3,,,,,,"},
    {PLANT_METERS, "INF,FLOW,totalizer,999999,0.001,2025-01-01,"},
    {PLANT_PROCESS, "q,AB1,,f,x,8.34,"},
    {PLANT_PROCESS, "q,,,f,x,basin SC1 weir,ft"},
    /* One place more than once on a round: other things are read there, or another sample. */
    {PLANT_ROUND, "INF,FLOW,\nINF,PH,\nINF,PH,grab\nEFF,PH,\nINF,PH,composite"},
};

static void what_only_looks_like_a_mistake_is_taken(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(fine); i++) {
        struct arena *a = arena_new();
        struct plant_draft *d = small_plant(a);
        struct plant *p = NULL;
        struct fault f = {0};

        add_rows(d, fine[i].file, false, NEXT, fine[i].row);
        if (plant_draft_finish(d, &p, &f) != OK)
            fail_msg("%s\n%s", fine[i].row, f.text);
        assert_non_null(p);
        assert_int_equal(plant_draft_problems(d), 0);
        arena_free(a);
    }
}

/* ---- problems of a folder together ---- */

static void all_problems_come_in_order_of_file_and_line(void **state)
{
    static const char *const expected[] = {
        "cannot list 'plant'; allow reading it",
        "plant.csv:4:1: no field 'prmit'; the nearest is 'permit'",
        "plant/points.csv:1:2: no column 'nam'; the nearest is 'name'",
        "points.csv:3:3: no role 'effluant'; the nearest is 'effluent'",
        "basins.csv:2:2: no kind of basin 'aerasion'; the nearest is 'aeration'",
        "basins.csv:2:5: no unit 'mg/l'; the nearest is 'mg/L'",
        "limits.csv:9:2: no point 'EFX'; the nearest is 'EFF'",
        "limits.csv:9:4: no basis 'laod'; the nearest is 'load'",
    };
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    add_rows(d, PLANT_PARAMETERS, true, 2, small_catalogue);
    add_rows(d, PLANT_LIMITS, false, 9, "001,EFX,TSS,laod,daily,max,30,lb/d");
    add_rows(d, PLANT_BASINS, false, 2, "AB1,aerasion,,1,mg/l");
    plant_draft_problem(d, "plant/points.csv:1:2: no column 'nam'; the nearest is 'name'");
    add_rows(d, PLANT_POINTS, false, 2, "INF,,influent,\nEFF,,effluant,001");
    add_rows(d, PLANT_FIELDS, false, 3, "name,Marrow Bend\nprmit,XX");
    plant_draft_problem(d, "cannot list 'plant'; allow reading it");
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_string_equal(f.text, expected[0]);
    assert_int_equal(plant_draft_problems(d), NELEM(expected));
    for (size_t i = 0; i < NELEM(expected); i++)
        assert_string_equal(plant_draft_problem_at(d, i), expected[i]);
    arena_free(a);
}

static void a_cell_is_placed_where_it_stands_in_its_row(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant_row row = {.file = PLANT_POINTS, .name = "bend/points.csv", .line = 7};
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    row.cell[0] = "DIG"; /* the columns of this file stand as role, point */
    row.at[0] = 2;
    row.cell[2] = "digestor";
    row.at[2] = 1;
    plant_draft_add(d, &row);
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_string_equal(f.text,
                        "bend/points.csv:7:1: no role 'digestor'; the nearest is 'digester'");
    arena_free(a);
}

static void a_plant_without_points_says_so_once(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);
    struct plant_row row = {
        .file = PLANT_LIMITS,
        .name = "bend/limits.csv",
        .line = 2,
        .cell = {"001", "EFF", "BOD5", "concentration", "daily", "max", "30", "mg/L"}};
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    add_rows(d, PLANT_PARAMETERS, true, 2, small_catalogue);
    plant_draft_add(d, &row);
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_int_equal(plant_draft_problems(d), 2);
    assert_string_equal(plant_draft_problem_at(d, 0),
                        "bend/plant.csv: the plant has no name; add a line such as "
                        "name,Marrow Bend");
    assert_string_equal(plant_draft_problem_at(d, 1),
                        "bend/points.csv: no points; add a line for each place where samples are "
                        "taken");
    arena_free(a);
}

static void a_parameter_without_a_unit_is_told_once_and_not_by_its_limits(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    add_rows(d, PLANT_PARAMETERS, false, NEXT, "TP,Total phosphorus,");
    add_rows(d, PLANT_LIMITS, false, NEXT,
             "001,EFF,TP,concentration,daily,max,1.0,mg/L\n"
             "001,EFF,NH3N+TP,concentration,daily,max,9.0,mg/L");
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_int_equal(plant_draft_problems(d), 1);
    assert_string_equal(f.text, "parameters.csv:20:3: parameter 'TP' has no unit; name the unit it "
                                "is measured in");
    arena_free(a);
}

static void a_missing_file_is_told_once(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend");
    plant_draft_problem(d, "bend/points.csv: no such file; write it");
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_int_equal(plant_draft_problems(d), 1);
    assert_string_equal(f.text, "bend/points.csv: no such file; write it");
    arena_free(a);
}

static void a_long_or_wild_cell_gives_one_printable_line(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p = NULL;
    struct fault f = {0};
    char wild[4000];
    struct plant_row row = {.file = PLANT_LIMITS, .name = "limits.csv", .line = 9};

    (void)state;
    for (size_t i = 0; i < sizeof wild - 1; i++)
        wild[i] = (char)(1 + i % 31);
    wild[sizeof wild - 1] = '\0';
    for (size_t i = 0; i < plant_layout(PLANT_LIMITS)->columns; i++)
        row.cell[i] = wild;
    plant_draft_add(d, &row);
    for (size_t i = 0; i < PLANT_FILES; i++) {
        row.file = (enum plant_file)i;
        plant_draft_add(d, &row);
    }
    assert_int_equal(plant_draft_finish(d, &p, &f), FAULT);
    assert_true(plant_draft_problems(d) > 20);
    for (size_t i = 0; i < plant_draft_problems(d); i++)
        for (const char *s = plant_draft_problem_at(d, i); *s != '\0'; s++)
            assert_true((unsigned char)*s >= ' ');
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(each_mistake_gives_its_own_line),
        cmocka_unit_test(what_only_looks_like_a_mistake_is_taken),
        cmocka_unit_test(all_problems_come_in_order_of_file_and_line),
        cmocka_unit_test(a_cell_is_placed_where_it_stands_in_its_row),
        cmocka_unit_test(a_plant_without_points_says_so_once),
        cmocka_unit_test(a_parameter_without_a_unit_is_told_once_and_not_by_its_limits),
        cmocka_unit_test(a_missing_file_is_told_once),
        cmocka_unit_test(a_long_or_wild_cell_gives_one_printable_line),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
