# The week as a sheet: a box for each day on which the sample may still be taken, filled where one is on record.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,season,from,to,when,samples,sample
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,,3/week,composite
001,EFF,PH,concentration,daily,max,9.0,pH,,,,,1/day,grab
001,EFF,TSS,concentration,monthly-average,max,30,mg/L,,,,,1/month,composite
001,EFF,NH3N,concentration,monthly-average,max,2.0,mg/L,05-01..10-31,,,,1/week,composite
END
cat >march.csv <<END
date,point,parameter,value,unit
2025-03-10,EFF,BOD5,20.0,mg/L
2025-03-09,EFF,PH,7.1,pH
2025-03-10,EFF,PH,code E,pH
2025-03-11,EFF,PH,7.0,pH
2025-03-03,EFF,TSS,11,mg/L
END
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester march.csv >/dev/null
"$weirbook" due --on 2025-03-12 --sheet
echo "exit status $?"
